// Package agree compares the results of a floating-point computation with those
// of the same computation done again, perhaps on another machine. There the last
// digits may differ: some fuse a product and a sum, and elementary functions are
// not the same everywhere.
//
// What an error was stated for has to agree to that error; nothing is compared
// bit by bit, and nothing more loosely than is said here.
package agree

import (
	"math"
	"regexp"
	"strconv"
	"strings"
)

// Within reports whether a and b differ by at most tolerance. Numbers that are
// not finite agree with nothing.
func Within(a, b, tolerance float64) bool { return a == b || math.Abs(a-b) <= tolerance }

// Errors reports whether two estimates of the error of a number of the given size
// are alike: they differ by at most a twentieth, or by what rounding of that
// number may do to them (4e-15 of it), and in any case neither is more than four
// times the other.
//
// The energies of the built-in cases, computed with products and sums fused and
// without, have estimates that differ by up to 3 %, or 7e-16 of the energy.
func Errors(a, b, size float64) bool {
	return a == b || 0 < a && a <= 4*b && b <= 4*a && math.Abs(a-b) <= math.Max(a, b)/20+4e-15*math.Abs(size)
}

// number is a decimal in a text, a sign included where it can only be one.
var number = regexp.MustCompile(`[0-9]+(?:\.[0-9]+)?(?:[eE][-+]?[0-9]+)?`)

// Texts reports whether two texts are the same but for their numbers, and those
// differ by at most relative, absolute, or one unit of the last digit that is
// written.
func Texts(a, b string, relative, absolute float64) bool {
	if a == b {
		return true
	}
	x, y := number.FindAllStringIndex(a, -1), number.FindAllStringIndex(b, -1)
	if len(x) != len(y) {
		return false
	}
	ia, ib := 0, 0
	for k := range x {
		s, t := a[x[k][0]:x[k][1]], b[y[k][0]:y[k][1]]
		if a[ia:x[k][0]] != b[ib:y[k][0]] || !numbers(s, t, relative, absolute) {
			return false
		}
		ia, ib = x[k][1], y[k][1]
	}
	return a[ia:] == b[ib:]
}

func numbers(s, t string, relative, absolute float64) bool {
	if s == t {
		return true
	}
	if !strings.ContainsAny(s+t, ".eE") {
		return false // counts
	}
	x, err := strconv.ParseFloat(s, 64)
	y, err2 := strconv.ParseFloat(t, 64)
	unit := 1.000001 * math.Max(lastDigit(s), lastDigit(t))
	return err == nil && err2 == nil && Within(x, y, math.Max(unit, math.Max(absolute, relative*math.Max(math.Abs(x), math.Abs(y)))))
}

// lastDigit is one unit of the last digit that is written, not more than a tenth
// of the number.
func lastDigit(s string) float64 {
	power := 0
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		power, _ = strconv.Atoi(s[i+1:])
		s = s[:i]
	}
	digits := strings.TrimLeft(strings.Replace(s, ".", "", 1), "0")
	if i := strings.IndexByte(s, '.'); i >= 0 {
		power -= len(s) - i - 1
	}
	if len(digits) < 2 {
		return 0
	}
	return math.Pow(10, float64(power))
}

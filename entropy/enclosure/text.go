package enclosure

import (
	"math"
	"math/big"
	"strconv"
	"strings"
)

// textExp is the binary exponent from which on a number is written as a bare
// power of ten: its digits would take long to find.
const textExp = 1 << 17

// Text returns the two ends as decimals of at most the given number of
// significant digits (at least 1), the lower one rounded down and the upper one
// rounded up: the decimals enclose x. Infinite ends are "-Inf" and "+Inf".
// A number beyond about 10^±39000 is written as a power of ten.
func (x Interval) Text(digits int) (lo, hi string) {
	digits = max(digits, 1)
	if x.lo == nil {
		return "-Inf", "+Inf"
	}
	return decimal(x.lo, digits, false), decimal(x.hi, digits, true)
}

// decimal writes v rounded up or down to the given number of digits.
func decimal(v *big.Float, digits int, up bool) string {
	if v.IsInf() {
		return v.String()
	}
	if v.Sign() == 0 {
		return "0"
	}
	sign := ""
	if v.Signbit() { // -v rounds the other way
		sign, up = "-", !up
	}
	a := new(big.Float).Abs(v)
	e := a.MantExp(nil) // 2^(e-1) ≤ a < 2^e
	if e > textExp || e < -textExp {
		// The product errs by less than 1e-6 for |e| ≤ 2^29.
		if up {
			return sign + "1e" + strconv.Itoa(int(math.Ceil(float64(e)*math.Log10(2)+1e-6)))
		}
		t := int(math.Floor(float64(e-1)*math.Log10(2) - 1e-6))
		return sign + "1e" + strconv.Itoa(t)
	}
	r, _ := a.Rat(nil)
	// A first guess of the decimal exponent, corrected by the digit count below.
	ten := int(math.Floor(float64(e-1) * math.Log10(2)))
	var n *big.Int
	for {
		n = scaled(r, digits-1-ten, up)
		if len(n.String()) <= digits {
			break
		}
		ten++
	}
	s := n.String()
	ten += len(s) - digits // shorter only if the guess was one too high
	s = strings.TrimRight(s, "0")
	return sign + layout(s, ten, digits)
}

// scaled returns r 10^k rounded to an integer.
func scaled(r *big.Rat, k int, up bool) *big.Int {
	p := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(max(k, -k))), nil)
	num, den := new(big.Int).Set(r.Num()), new(big.Int).Set(r.Denom())
	if k >= 0 {
		num.Mul(num, p)
	} else {
		den.Mul(den, p)
	}
	n, rem := new(big.Int).QuoRem(num, den, new(big.Int))
	if up && rem.Sign() != 0 {
		n.Add(n, big.NewInt(1))
	}
	return n
}

// layout writes the digits d1.d2d3... times 10^ten, without an exponent where
// that is short.
func layout(s string, ten, digits int) string {
	switch {
	case ten >= 0 && ten < max(digits, 17):
		if len(s) <= ten+1 {
			return s + strings.Repeat("0", ten+1-len(s))
		}
		return s[:ten+1] + "." + s[ten+1:]
	case ten < 0 && ten >= -5:
		return "0." + strings.Repeat("0", -ten-1) + s
	}
	out := s[:1]
	if len(s) > 1 {
		out += "." + s[1:]
	}
	return out + "e" + strconv.Itoa(ten)
}

package algebra

import (
	"errors"
	"fmt"
	"math/big"
	"strconv"
	"strings"
)

// maxDigits bounds the length of a number that ParseRat accepts: a number of so
// many decimal digits stays below MaxBits.
const maxDigits = 30_000

var errNumber = errors.New("not an integer, a fraction or a decimal")

// ParseRat reads an integer, a fraction or a finite decimal, with an optional
// sign and, for a decimal, an optional exponent: "3", "-3/4", "0.25", "2e-3".
// Nothing else is accepted: no spaces, no underscores, no other base.
func ParseRat(s string) (Rat, error) {
	r, err := parseRat(s)
	if err != nil {
		if len(s) > 40 {
			s = s[:40] + "..."
		}
		return Rat{}, fmt.Errorf("number %q: %w", s, err)
	}
	return r, nil
}

func parseRat(s string) (Rat, error) {
	if len(s) > maxDigits {
		return Rat{}, fmt.Errorf("%w: more than %d digits", ErrLimit, maxDigits)
	}
	body := strings.TrimLeft(s, "+-")
	if len(s)-len(body) > 1 {
		return Rat{}, errNumber
	}
	if num, den, ok := strings.Cut(body, "/"); ok {
		if !digits(num) || !digits(den) {
			return Rat{}, errNumber
		}
		if strings.Trim(den, "0") == "" {
			return Rat{}, ErrDivision
		}
	} else {
		mantissa := body
		if i := strings.IndexAny(body, "eE"); i >= 0 {
			mantissa = body[:i]
			e, err := strconv.Atoi(body[i+1:])
			if err != nil {
				return Rat{}, errNumber
			}
			if e > maxDigits || e < -maxDigits {
				return Rat{}, fmt.Errorf("%w: an exponent beyond %d", ErrLimit, maxDigits)
			}
		}
		whole, frac, point := strings.Cut(mantissa, ".")
		if !digits(whole) || point && !digits(frac) {
			return Rat{}, errNumber
		}
	}
	b, ok := new(big.Rat).SetString(s)
	if !ok {
		return Rat{}, errNumber
	}
	return demote(b), nil
}

func digits(s string) bool {
	for _, c := range []byte(s) {
		if c < '0' || c > '9' {
			return false
		}
	}
	return s != ""
}

// String returns a as "3" or "-3/4".
func (a Rat) String() string {
	if a.b != nil {
		return a.b.RatString()
	}
	if a.dm == 0 {
		return strconv.FormatInt(a.n, 10)
	}
	return strconv.FormatInt(a.n, 10) + "/" + strconv.FormatInt(a.dm+1, 10)
}

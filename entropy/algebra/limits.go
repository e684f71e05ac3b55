package algebra

import (
	"errors"
	"fmt"
)

// Limits of the package. An operation that would exceed one of them returns a
// poisoned value, whose Err wraps ErrLimit.
const (
	// MaxTerms is the largest number of terms of a polynomial.
	MaxTerms = 1 << 20
	// MaxProducts bounds the work of one product, in term products. A product
	// of terms whose coefficients need more than a machine word counts for
	// several, in proportion to its cost.
	MaxProducts = 30_000_000
	// MaxExponent is the largest total degree of a monomial.
	MaxExponent = 1 << 30
	// MaxWords bounds the memory of the exponents of a polynomial, in words of 64
	// bits. A term takes one word for up to fifteen indeterminates at degree
	// seven, and more for more.
	MaxWords = 1 << 23
	// MaxBits is the largest bit length of the numerator or denominator of a
	// coefficient.
	MaxBits = 1 << 17
)

var (
	// ErrLimit says that a result was abandoned because of a limit.
	ErrLimit = errors.New("algebraic limit reached")
	// ErrDivision says that a denominator became zero.
	ErrDivision = errors.New("division by zero")
	// ErrExponent says that a monomial had an exponent below zero.
	ErrExponent = errors.New("exponent out of range")
)

var (
	errTerms    = fmt.Errorf("%w: more than %d terms", ErrLimit, MaxTerms)
	errProducts = fmt.Errorf("%w: a product of more than %d pairs of terms", ErrLimit, MaxProducts)
	errExponent = fmt.Errorf("%w: a degree above %d", ErrLimit, MaxExponent)
	errWords    = fmt.Errorf("%w: exponents of more than %d words", ErrLimit, MaxWords)
	errBits     = fmt.Errorf("%w: a coefficient of more than %d bits", ErrLimit, MaxBits)
	errWork     = fmt.Errorf("%w: a division of more than %d steps", ErrLimit, MaxProducts)
)

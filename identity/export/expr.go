package export

import (
	"errors"
	"fmt"
	"math/big"
)

// ErrUnsupported says that a statement is outside what can be exported.
var ErrUnsupported = errors.New("this cannot be exported")

// Expr is a formula as a tree: Number, Variable, Sum, Product, Quotient, Power
// or Negation.
type Expr interface{ isExpr() }

// Number is an exact rational such as "-3/2".
type Number string

// Variable is a real variable, by its name in the claim.
type Variable string

// Sum is the sum of its terms; the empty one is 0. A Negation as a later term
// is printed as a difference.
type Sum []Expr

// Product is the product of its factors; the empty one is 1.
type Product []Expr

// Quotient is Num/Den.
type Quotient struct{ Num, Den Expr }

// Power is Base to an integer exponent.
type Power struct {
	Base Expr
	Exp  int
}

// Negation is minus X.
type Negation struct{ X Expr }

func (Number) isExpr()   {}
func (Variable) isExpr() {}
func (Sum) isExpr()      {}
func (Product) isExpr()  {}
func (Quotient) isExpr() {}
func (Power) isExpr()    {}
func (Negation) isExpr() {}

// Limits of what is exported.
const (
	maxDepth    = 2000   // of a tree
	maxExponent = 1000   // in a tree
	maxTerms    = 50_000 // of a polynomial
)

// Denominators lists the denominators of e, each once, in the order in which
// they are met: the formulas that must not vanish for e to have a value.
func Denominators(e Expr) []Expr {
	var out []Expr
	seen := map[string]bool{}
	add := func(d Expr) {
		if _, isNumber := d.(Number); isNumber {
			return
		}
		if s := fmt.Sprintf("%#v", d); !seen[s] {
			seen[s] = true
			out = append(out, d)
		}
	}
	var walk func(e Expr)
	walk = func(e Expr) {
		switch e := e.(type) {
		case Sum:
			for _, x := range e {
				walk(x)
			}
		case Product:
			for _, x := range e {
				walk(x)
			}
		case Quotient:
			walk(e.Num)
			walk(e.Den)
			add(e.Den)
		case Power:
			walk(e.Base)
			if e.Exp < 0 {
				add(e.Base)
			}
		case Negation:
			walk(e.X)
		}
	}
	walk(e)
	return out
}

// inspect checks that a tree is whole and of bounded size, and that its names
// are declared.
func inspect(e Expr, declared func(string) bool) error {
	var walk func(e Expr, depth int) error
	all := func(list []Expr, depth int) error {
		for _, x := range list {
			if err := walk(x, depth); err != nil {
				return err
			}
		}
		return nil
	}
	walk = func(e Expr, depth int) error {
		if depth > maxDepth {
			return fmt.Errorf("%w: a formula nested more than %d deep", ErrUnsupported, maxDepth)
		}
		switch e := e.(type) {
		case Number:
			_, err := rational(string(e))
			return err
		case Variable:
			if !declared(string(e)) {
				return fmt.Errorf("variable %q is not declared", string(e))
			}
			return nil
		case Sum:
			return all(e, depth+1)
		case Product:
			return all(e, depth+1)
		case Quotient:
			return all([]Expr{e.Num, e.Den}, depth+1)
		case Power:
			if e.Exp > maxExponent || e.Exp < -maxExponent {
				return fmt.Errorf("%w: the exponent %d", ErrUnsupported, e.Exp)
			}
			return walk(e.Base, depth+1)
		case Negation:
			return walk(e.X, depth+1)
		}
		return fmt.Errorf("a formula has a missing or unknown part: %T", e)
	}
	return walk(e, 0)
}

// rational reads an exact rational: an integer, or a quotient of two.
func rational(s string) (*big.Rat, error) {
	for i, r := range s {
		if (r < '0' || r > '9') && r != '/' && (r != '-' || i > 0) {
			return nil, fmt.Errorf("%q is not an exact rational", s)
		}
	}
	x, ok := new(big.Rat).SetString(s)
	if !ok {
		return nil, fmt.Errorf("%q is not an exact rational", s)
	}
	return x, nil
}

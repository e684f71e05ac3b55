package export

import (
	"errors"
	"fmt"
	"math/big"
)

// Comparison is Left Relation Right, the relation one of <, <=, =, >= and >.
type Comparison struct {
	Left, Right Expr
	Relation    string
}

// comparisons are the relations: the lemma by which the difference of the two
// sides proves them, and whether it does.
var comparisons = map[string]struct {
	lemma string
	holds func(sign int) bool
}{
	"<":  {"less_from_value", func(sign int) bool { return sign < 0 }},
	"<=": {"at_most_from_value", func(sign int) bool { return sign <= 0 }},
	"=":  {"equal_from_value", func(sign int) bool { return sign == 0 }},
	">=": {"at_least_from_value", func(sign int) bool { return sign >= 0 }},
	">":  {"greater_from_value", func(sign int) bool { return sign > 0 }},
}

// at is Left - Right at a point, where the comparison must hold.
func (c Comparison) at(r *ring, values []*big.Rat) (*big.Rat, error) {
	relation, ok := comparisons[c.Relation]
	if !ok {
		return nil, fmt.Errorf("%q is no relation", c.Relation)
	}
	for _, e := range []Expr{c.Left, c.Right} {
		if err := inspect(e, r.declared); err != nil {
			return nil, err
		}
	}
	x, err := r.evaluate(Sum{c.Left, Negation{c.Right}})
	if err != nil {
		return nil, err
	}
	value, ok := isConstant(at(x.num, values))
	if !ok {
		return nil, errors.New("it is no number at the point")
	}
	value = new(big.Rat).Set(value)
	for _, d := range x.den {
		below, ok := isConstant(at(d.p, values))
		if !ok || below.Sign() == 0 {
			return nil, fmt.Errorf("%w: a denominator that vanishes or is no number at the point", ErrUnsupported)
		}
		for range d.power {
			value.Quo(value, below)
		}
	}
	if !relation.holds(value.Sign()) {
		return nil, errors.New("it does not hold at the point")
	}
	return value, nil
}

func (c Comparison) text(ids map[string]string) string {
	return tree(c.Left, ids, levelSum) + " " + c.Relation + " " + tree(c.Right, ids, levelSum)
}

package exact

import (
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
)

// highMultiple is the multiple of an angle from which on cosines are bounded
// without being expanded in those of the angle.
const highMultiple = 20

// byCosines reports whether left <= right follows from bounds of the formulas as
// they are written, in which every cosine and sine lies in [-1, 1]. It is asked
// only where a high multiple of an angle occurs, which would be expanded into
// as many powers.
func (d *Problem) byCosines(st *formula.Statement) (bool, error) {
	high := false
	b := &bounding{d: d, high: &high}
	great, less := st.Right, st.Left
	if st.Relation == formula.GreaterEqual {
		great, less = less, great
	}
	if !b.hasCosine(great, 0) && !b.hasCosine(less, 0) {
		return false, nil
	}
	x, err := b.of(great, 0)
	if err != nil {
		return false, err
	}
	y, err := b.of(less, 0)
	if err != nil {
		return false, err
	}
	return high && x.lo != nil && y.hi != nil && x.lo.Cmp(*y.hi) >= 0 && len(d.Ring.Conditions()) == 0, nil
}

// bounding bounds formulas.
type bounding struct {
	d    *Problem
	high *bool // whether a high multiple was met
}

// extent is the bounds of a formula; nil is infinite.
type extent struct{ lo, hi *algebra.Rat }

func (e extent) neg() extent {
	out := extent{}
	if e.hi != nil {
		x := e.hi.Neg()
		out.lo = &x
	}
	if e.lo != nil {
		x := e.lo.Neg()
		out.hi = &x
	}
	return out
}

func (e extent) add(f extent) extent {
	sum := func(a, b *algebra.Rat) *algebra.Rat {
		if a == nil || b == nil {
			return nil
		}
		x := a.Add(*b)
		return &x
	}
	return extent{sum(e.lo, f.lo), sum(e.hi, f.hi)}
}

// mul is for a bounded factor, and for two that are not negative.
func (e extent) mul(f extent) extent {
	zero := algebra.Rat{}
	if e.lo == nil || e.hi == nil || f.lo == nil || f.hi == nil {
		if e.lo != nil && f.lo != nil && e.lo.Sign() >= 0 && f.lo.Sign() >= 0 {
			return extent{lo: &zero}
		}
		return extent{}
	}
	ends := []algebra.Rat{e.lo.Mul(*f.lo), e.lo.Mul(*f.hi), e.hi.Mul(*f.lo), e.hi.Mul(*f.hi)}
	slices.SortFunc(ends, algebra.Rat.Cmp)
	return extent{&ends[0], &ends[3]}
}

const maxFormulaDepth = 40

// of is the bounds of n. Every part is evaluated somewhere, so that what means
// nothing is an error.
func (b *bounding) of(n formula.Node, depth int) (extent, error) {
	one := algebra.Int(1)
	minus := one.Neg()
	if depth > maxFormulaDepth || !b.hasCosine(n, depth) {
		return b.leaf(n)
	}
	product := func(factors []formula.Node) (extent, error) {
		out := extent{&one, &one}
		for _, f := range factors {
			x, err := b.of(f, depth+1)
			if err != nil {
				return x, err
			}
			out = out.mul(x)
		}
		return out, nil
	}
	switch x := n.(type) {
	case *formula.Name:
		return b.of(b.d.Claim.Setting.Lets[x.ID], depth+1)
	case *formula.Sum:
		zero := algebra.Rat{}
		out := extent{&zero, &zero}
		for _, t := range x.Terms {
			y, err := b.of(t.X, depth+1)
			if err != nil {
				return y, err
			}
			if t.Neg {
				y = y.neg()
			}
			out = out.add(y)
		}
		return out, nil
	case *formula.Juxt:
		return product(x.Factors)
	case *formula.Product:
		var factors []formula.Node
		by := one
		for _, f := range x.Factors {
			if f.Op != formula.Slash {
				factors = append(factors, f.X)
				continue
			}
			y, err := b.leaf(f.X)
			if err != nil || y.lo == nil || y.hi == nil || !y.lo.Equal(*y.hi) || y.lo.IsZero() {
				return extent{}, err
			}
			by, _ = by.Quo(*y.lo)
		}
		y, err := product(factors)
		return y.mul(extent{&by, &by}), err
	case *formula.Power:
		return b.power(x, depth)
	case *formula.Call:
		arg, err := b.d.In.Scalar(x.Args[0])
		if err != nil {
			return extent{}, err
		}
		if p, ok := arg.IsPoly(); ok {
			for _, c := range p.Terms() {
				*b.high = *b.high || c.Abs().Cmp(algebra.Int(highMultiple)) > 0
			}
			return extent{&minus, &one}, nil
		}
	}
	return extent{}, nil
}

// power bounds base^n for whole n > 0.
func (b *bounding) power(x *formula.Power, depth int) (extent, error) {
	y, err := b.of(x.Base, depth+1)
	if err != nil || !x.Exp.IsInt() || x.Exp.Sign() <= 0 || x.Exp.Cmp(big.NewRat(100, 1)) > 0 {
		return extent{}, err
	}
	n := int(x.Exp.Num().Int64())
	out := y
	for range n - 1 {
		out = out.mul(y)
	}
	if zero := (algebra.Rat{}); n%2 == 0 && (out.lo == nil || out.lo.Sign() < 0) {
		out.lo = &zero
	}
	return out, nil
}

// leaf bounds a formula without cosines, by its value.
func (b *bounding) leaf(n formula.Node) (extent, error) {
	f, err := b.d.In.Scalar(n)
	if err != nil {
		return extent{}, err
	}
	if len(f.DenFactors()) > 0 {
		return extent{}, nil
	}
	zero := algebra.Rat{}
	if c, ok := f.IsConst(); ok {
		return extent{&c, &c}, nil
	}
	switch {
	case b.d.Ring.VisiblyNonNegative(f):
		return extent{lo: &zero}, nil
	case b.d.Ring.VisiblyNonNegative(f.Neg()):
		return extent{hi: &zero}, nil
	}
	return extent{}, nil
}

// hasCosine reports a cosine or sine among what is added and multiplied.
func (b *bounding) hasCosine(n formula.Node, depth int) bool {
	in := func(list ...formula.Node) bool {
		return depth <= maxFormulaDepth && slices.ContainsFunc(list, func(m formula.Node) bool { return b.hasCosine(m, depth+1) })
	}
	switch x := n.(type) {
	case *formula.Name:
		let, ok := b.d.Claim.Setting.Lets[x.ID]
		return ok && in(let)
	case *formula.Sum:
		return slices.ContainsFunc(x.Terms, func(t formula.Term) bool { return in(t.X) })
	case *formula.Juxt:
		return in(x.Factors...)
	case *formula.Product:
		return slices.ContainsFunc(x.Factors, func(f formula.Factor) bool { return in(f.X) })
	case *formula.Power:
		return in(x.Base)
	case *formula.Call:
		return (x.Func == "cos" || x.Func == "sin") && len(x.Args) == 1
	}
	return false
}

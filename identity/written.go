package identity

import (
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// Bounds on what is read off a formula as it is written.
const (
	longTarget     = 60 // terms of a gap that is looked at as it is written before it is expanded into squares
	maxWritten     = 64 // squares
	maxWrittenBase = 1000
	maxLeaf        = 60 // terms of a factor in which squares are completed
	maxLeafDegree  = 6
)

// written reads squares off a gap as it is written: sums of even powers and of
// products of factors that are themselves such sums, or assumed to be
// non-negative.
type written struct {
	*decider
	r     *reduction
	depth int
}

// asWritten proves a gap by what is read off the formula. It reports whether
// the checker accepted that.
func (d *decider) asWritten(g *exact.Gap) (bool, error) {
	if p, ok := g.Value.IsPoly(); !ok || g.Turned != nil || !p.Equal(g.Poly) {
		return false, nil
	}
	st := d.Claim.Statement
	great, less := st.Right, st.Left
	if st.Relation == formula.GreaterEqual {
		great, less = less, great
	}
	r := d.reduction(g)
	w := &written{decider: d, r: r}
	list, ok, err := w.sum([]formula.Term{{X: great}, {Neg: true, X: less}})
	if err != nil || !ok || len(list) == 0 {
		return false, err
	}
	p := &gram.Proof{Squares: list}
	cert, err := r.certify(p)
	if err != nil {
		return false, nil // what the checker refuses was no proof
	}
	d.certified("squares as they are written", g, r, p, cert)
	return true, nil
}

// sum is the squares of a signed sum.
func (w *written) sum(terms []formula.Term) ([]gram.Square, bool, error) {
	var out []gram.Square
	for _, t := range terms {
		list, ok, err := w.node(t.X, t.Neg)
		if err != nil || !ok {
			return nil, false, err
		}
		out = append(out, list...)
	}
	return out, len(out) <= maxWritten, nil
}

// node is the squares of a formula, or of its negative.
func (w *written) node(n formula.Node, neg bool) ([]gram.Square, bool, error) {
	if w.depth++; w.depth > 40 {
		return nil, false, nil
	}
	defer func() { w.depth-- }()
	switch x := n.(type) {
	case *formula.Sum:
		terms := slices.Clone(x.Terms)
		for i := range terms {
			terms[i].Neg = terms[i].Neg != neg
		}
		if list, ok, err := w.sum(terms); err != nil || ok {
			return list, ok, err
		}
	case *formula.Power:
		if list, ok, err := w.power(x); !neg && (err != nil || ok) {
			return list, ok, err
		}
	case *formula.Juxt:
		return w.product(x.Factors, neg)
	case *formula.Product:
		var factors []formula.Node
		one := algebra.Int(1)
		for _, f := range x.Factors {
			if f.Op != formula.Slash {
				factors = append(factors, f.X)
				continue
			}
			by, err := w.In.Scalar(f.X)
			if err != nil {
				return nil, false, err
			}
			c, ok := by.IsConst()
			if ok {
				one, ok = one.Quo(c)
			}
			if !ok || c.Sign() <= 0 {
				return nil, false, nil
			}
		}
		list, ok, err := w.product(factors, neg)
		for i := range list {
			list[i].Weight = list[i].Weight.Mul(one)
		}
		return list, ok, err
	}
	return w.leaf(n, neg)
}

// power is the squares of base^n, n a natural number.
func (w *written) power(x *formula.Power) ([]gram.Square, bool, error) {
	if !x.Exp.IsInt() || x.Exp.Sign() <= 0 || !x.Exp.Num().IsInt64() || x.Exp.Num().Int64() > 100 {
		return nil, false, nil
	}
	n := int(x.Exp.Num().Int64())
	base, err := w.In.Scalar(x.Base)
	if err != nil {
		return nil, false, err
	}
	p, ok := base.IsPoly()
	if !ok || p.IsZero() {
		return nil, false, nil
	}
	list := []gram.Square{{Weight: algebra.Int(1), Base: algebra.Const(algebra.Int(1))}}
	if n%2 == 1 {
		if list, ok, err = w.node(x.Base, false); err != nil || !ok {
			return nil, false, err
		}
	}
	half := algebra.Const(algebra.Int(1))
	for range n / 2 {
		if half = half.Mul(p); half.Err() != nil || half.Len() > maxWrittenBase {
			return nil, false, nil
		}
	}
	for i := range list {
		list[i].Base = list[i].Base.Mul(half)
	}
	return list, true, nil
}

// product is the squares of a product, one factor of which takes the sign.
func (w *written) product(factors []formula.Node, neg bool) ([]gram.Square, bool, error) {
	out := []gram.Square{{Weight: algebra.Int(1), Base: algebra.Const(algebra.Int(1))}}
	for _, f := range factors {
		list, ok, err := w.node(f, false)
		if err == nil && !ok {
			// A negative factor changes the sign of the others.
			list, ok, err = w.node(f, true)
			neg = !neg
		}
		if err != nil || !ok || len(list)*len(out) > maxWritten {
			return nil, false, err
		}
		var next []gram.Square
		for _, a := range out {
			for _, b := range list {
				q := a.Base.Mul(b.Base)
				if q.Err() != nil || q.Len() > maxWrittenBase {
					return nil, false, nil
				}
				next = append(next, gram.Square{Weight: a.Weight.Mul(b.Weight), Factors: slices.Concat(a.Factors, b.Factors), Base: q})
			}
		}
		out = next
	}
	return out, !neg || len(out) == 0, nil
}

// leaf is the squares of a formula that is looked at expanded.
func (w *written) leaf(n formula.Node, neg bool) ([]gram.Square, bool, error) {
	f, err := w.In.Scalar(n)
	if err != nil {
		return nil, false, err
	}
	p, ok := f.IsPoly()
	if !ok || p.Err() != nil {
		return nil, false, nil
	}
	if neg {
		p = p.Neg()
	}
	list, ok := w.r.cone(p)
	return list, ok, nil
}

// cone writes p as a sum of squares times assumptions, where its monomials,
// one assumption or completed squares show that.
func (r *reduction) cone(p algebra.Poly) ([]gram.Square, bool) {
	one := algebra.Const(algebra.Int(1))
	if p.IsZero() {
		return nil, true
	}
	if list, ok := r.monomialSquares(p, one); ok {
		return list, true
	}
	c, prim := p.Primitive()
	if c.Sign() < 0 {
		c, prim = c.Neg(), prim.Neg()
	}
	for i, g := range r.Positive {
		if g.Poly.Equal(prim) {
			return []gram.Square{{Weight: c, Factors: []int{i}, Base: one}}, true
		}
	}
	if p.Len() > maxLeaf || p.TotalDegree() > maxLeafDegree {
		return nil, false
	}
	res := squares.Complete(r.d.Ctx, r.d.Ring, p, r.d.squareVars(p))
	if !res.Proved {
		return nil, false
	}
	proof, ok := r.fromSquares(res.Terms)
	if !ok || len(proof.Multiplier) > 0 {
		return nil, false
	}
	return proof.Squares, true
}

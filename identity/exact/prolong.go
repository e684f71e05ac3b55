package exact

import (
	"math/rand/v2"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// A claim modulo equations is about jets at which the equations and all their
// total derivatives vanish. A proof may use any of these derivatives. A
// refutation is a jet of finite order, and counts only where that jet extends
// to all orders: at it the derivatives of higher order must be solvable for
// the jets of higher order (formal integrability; Seiler, Involution, Springer
// 2010, chapter 2). Where the equations are about the gradient alone, a jet
// whose derivatives of order two and more vanish extends without more: an affine
// function has it, and satisfies the equations everywhere.

// radical is the product of the square-free factors of p: it has the same
// zeros, and so has the system of its derivatives.
func radical(p algebra.Poly) algebra.Poly {
	_, factors, _ := algebra.SquareFree(p)
	if len(factors) == 0 || p.Err() != nil {
		return p
	}
	out := algebra.Const(algebra.Int(1))
	for _, f := range factors {
		out = out.Mul(f.Base)
	}
	if out.Err() != nil {
		return p
	}
	return out
}

// extends reports whether a jet on the zeros of the equations certainly
// extends to all orders. With σ_k the symbol of equation k at the jet, the
// row of ∂f_k/∂u^a_J ξ^J over the unknowns a, J of the highest order in f_k,
// the derivatives of order n of the equations are linear in the jets of the
// highest order, with the independent rows ξ^I σ_k if the σ_k are independent
// over the polynomials in ξ: then they can be solved, whatever the jets of
// lower order are. That is so where the matrix of the σ_k has full rank at
// one ξ. A restriction of the jets besides makes this uncertain.
func (d *Problem) extends(at jet.Point) bool {
	if len(d.equations) == 0 || d.affine(at, nil) {
		return true
	}
	if len(d.Claim.Restrict) > 0 {
		return false
	}
	rng := rand.New(rand.NewPCG(1, 0x73796d62))
	for range 3 {
		xi := make([]algebra.Rat, len(d.Ring.Coordinates))
		for i := range xi {
			xi[i] = algebra.Int(1 + rng.Int64N(97))
		}
		rows, ok := d.symbols(at, xi)
		if !ok {
			return false
		}
		if rankIs(rows, len(rows)) {
			return true
		}
	}
	return false
}

// ofGradients reports whether the equations and restrictions are about first
// derivatives and constants only.
func (d *Problem) ofGradients() bool {
	if slices.ContainsFunc(d.Claim.Restrict, func(r claim.Restriction) bool { return r.Index.Order() != 1 }) {
		return false
	}
	return !slices.ContainsFunc(d.equations, func(p algebra.Poly) bool {
		return slices.ContainsFunc(d.Ring.Support(algebra.FromPoly(p)), func(v algebra.Var) bool {
			s := d.Ring.Symbol(v)
			return s.Kind == jet.Coordinate || s.Kind == jet.Derivative && s.Index.Order() != 1
		})
	})
}

// affine reports whether affine functions have the jet at a point of the
// equations, and satisfy these.
func (d *Problem) affine(at jet.Point, roots map[algebra.Var]enclosure.Interval) bool {
	if !d.ofGradients() {
		return false
	}
	for v, x := range at {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative && s.Index.Order() > 1 && !x.IsZero() {
			return false
		}
	}
	for v := range roots {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative && s.Index.Order() > 1 {
			return false
		}
	}
	return true
}

// symbols are the rows σ_k at a jet and a covector ξ, those of equations in
// constants alone left out.
func (d *Problem) symbols(at jet.Point, xi []algebra.Rat) ([][]algebra.Rat, bool) {
	var rows [][]algebra.Rat
	for _, p := range d.equations {
		f := algebra.FromPoly(p)
		order, constant := -1, true
		for _, v := range d.Ring.Support(f) {
			switch s := d.Ring.Symbol(v); s.Kind {
			case jet.Derivative:
				order, constant = max(order, s.Index.Order()), false
			case jet.Coordinate:
				constant = false
			}
		}
		if constant {
			continue
		}
		row := make([]algebra.Rat, len(d.Ring.Unknowns))
		for _, v := range d.Ring.Support(f) {
			s := d.Ring.Symbol(v)
			if s.Kind != jet.Derivative || s.Index.Order() != order {
				continue
			}
			g, err := d.Ring.Partial(f, v)
			if err != nil {
				return nil, false
			}
			c, ok := d.Ring.Exact(g, at)
			if !ok {
				return nil, false
			}
			for i, k := range s.Index[:len(xi)] {
				for range k {
					c = c.Mul(xi[i])
				}
			}
			row[s.Place] = row[s.Place].Add(c)
		}
		rows = append(rows, row)
	}
	return rows, true
}

// extendsIsolated is extends for a jet known by enclosures: for one equation,
// some coefficient of its symbol is certainly not zero.
func (d *Problem) extendsIsolated(at jet.Point, roots map[algebra.Var]enclosure.Interval) bool {
	if len(d.equations) == 0 || d.affine(at, roots) {
		return true
	}
	if len(d.equations) > 1 || len(d.Claim.Restrict) > 0 {
		return false
	}
	f := algebra.FromPoly(d.equations[0])
	order := -1
	for _, v := range d.Ring.Support(f) {
		if s := d.Ring.Symbol(v); s.Kind == jet.Derivative {
			order = max(order, s.Index.Order())
		}
	}
	for _, v := range d.Ring.Support(f) {
		if s := d.Ring.Symbol(v); s.Kind != jet.Derivative || s.Index.Order() != order {
			continue
		}
		g, err := d.Ring.Partial(f, v)
		if err != nil {
			return false
		}
		if s, ok := d.Ring.EncloseAt(g, at, roots, 256).Sign(); ok && s != 0 {
			return true
		}
	}
	return false
}

// rankIs reports whether the rows have the given rank.
func rankIs(rows [][]algebra.Rat, rank int) bool {
	if rank == 0 {
		return true
	}
	// Independent rows have no combination that vanishes.
	a := make([][]algebra.Rat, len(rows[0]))
	for i := range a {
		for _, r := range rows {
			a[i] = append(a[i], r[i])
		}
	}
	_, null, ok := algebra.SolveRat(a, make([]algebra.Rat, len(a)))
	return ok && len(rows)-len(null) == rank
}

// atOnce proves an inequality between numbers by enclosing both sides. On
// equations it differentiates these up to the order of the inequality, and
// proves it where its two sides agree on their zeros.
func (d *Problem) atOnce() error {
	if d.Claim.Divergence || len(d.Claim.Solve) > 0 {
		return nil
	}
	if d.Claim.Best == "" && len(d.Claim.Given) == 0 {
		if ok, err := d.byCosines(d.Claim.Statement); err != nil {
			return err
		} else if ok {
			d.Proved("bounds of the sides as they are written, every cosine and sine between -1 and 1")
			return nil
		}
	}
	l, r, err := d.inequalitySides()
	if err != nil {
		return err
	}
	d.Rec.Details = nil // of the sides, which are looked at again
	g, err := d.Ring.Sub(l, r)
	if err != nil {
		return err
	}
	if !slices.ContainsFunc(d.Ring.Support(g), func(v algebra.Var) bool { return d.Ring.Symbol(v).Kind != jet.Pi }) {
		want := -1
		if d.Claim.Statement.Relation == formula.GreaterEqual {
			want = 1
		}
		switch s, ok := d.Ring.Sign(g, nil); {
		case len(d.Ring.Conditions()) > 0:
		case ok && s == want:
			d.Proved("both sides enclosed with outward rounding")
		case !ok && d.vanishingNumbers(g.Num()):
			d.Proved("both sides are the same algebraic number")
		}
		return nil
	}
	if len(d.Wells) > 2 { // a system on each side
		if ok, err := d.whereTracesDiffer(g); err != nil || ok {
			if ok {
				d.Proved("exact, on the well on both sides: both sides are equal")
			}
			return err
		}
	}
	if len(d.Ideal) == 0 {
		return nil
	}
	rest, err := d.onIdeal(g)
	if err != nil {
		return err
	}
	if rest.IsZero() && d.Claim.Statement.Relation != formula.Equal {
		d.Proved("exact, on the zeros of the equations and of their derivatives: both sides are equal")
	}
	return nil
}

package exact

import (
	"maps"
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// isolated is the precision of the enclosures of algebraic points.
var isolated = enclosure.Context{Prec: 320}

// maxIsolation bounds the points, and the roots isolated for them, that are
// looked at.
const maxIsolation = 400

// isolatedWitness refutes an equation at a real algebraic point: some jets are
// rational, some are simple roots isolated by a change of sign, and some follow
// linearly.
func (d *Problem) isolatedWitness(g, left, right algebra.Fraction) bool {
	return d.isolate(d.Points(g, left, right), left, right, func(at jet.Point, roots map[algebra.Var]enclosure.Interval) (fails, told bool) {
		s, ok := d.Ring.EncloseAt(g, at, roots, 256).Sign()
		return ok && s != 0, ok
	})
}

// RefuteIsolated refutes an inequality on the zeros of equations, of a well or of
// assumptions at a real algebraic point of them: the gap is certainly negative
// there, by enclosures, and the point is certainly one that the claim is about.
// It reports whether it did, and does nothing where there are no equations.
func (d *Problem) RefuteIsolated(g *Gap) bool {
	return d.isolate(d.GapPoints(g), g.Left, g.Right, func(at jet.Point, roots map[algebra.Var]enclosure.Interval) (fails, told bool) {
		s, ok := d.Ring.EncloseAt(g.Value, at, roots, 256).Sign()
		return ok && s < 0, ok
	})
}

// isolate looks for an admissible algebraic point at which the sides fail. The
// test of a point says whether they do, and whether that could be told.
func (d *Problem) isolate(pts *Points, left, right algebra.Fraction, test func(jet.Point, map[algebra.Var]enclosure.Interval) (fails, told bool)) bool {
	gens := d.Ideal
	if len(d.Wells) > 0 {
		gens = d.Wells
	}
	for _, c := range d.Assumed {
		if p, ok := c.equation(); ok {
			gens = append(slices.Clone(gens), p)
		}
	}
	if len(gens) == 0 {
		return false
	}
	same := 0
	for work := 0; work < maxIsolation && same < maxSame; {
		if d.Ctx.Err() != nil {
			return false
		}
		at, roots, ok := pts.drawIsolated(gens)
		if work += 1 + len(roots); !ok || !pts.admissibleIsolated(at, roots) {
			continue
		}
		fails, told := test(at, roots)
		if !told {
			same++
		}
		if !fails {
			continue
		}
		if d.Claim.Jump {
			at = d.filled(at, roots)
		}
		show := func(f algebra.Fraction) string {
			if x, ok := d.Ring.Exact(f, at); ok {
				return x.String()
			}
			lo, hi := d.Ring.EncloseAt(f, at, roots, 256).Text(20)
			return "[" + lo + ", " + hi + "]"
		}
		d.Rec.Verdict, d.Rec.Method = claim.Refuted, "exact division, and a real zero isolated by a change of sign"
		d.showPoint(at, show(left), show(right), show)
		for v, r := range roots {
			if s := d.Ring.Symbol(v); s.Side == jet.NoSide {
				lo, hi := r.Text(20)
				d.Rec.Witness.Jet[s.Name] = "[" + lo + ", " + hi + "]"
			}
		}
		return true
	}
	return false
}

// drawIsolated draws rational values for all jets but one of each generator,
// generators of low order first. That one is a rational root or one isolated
// by a change of sign; where other jets in the generator are known only by
// enclosures, it must be linear in it, with a factor that is certainly not
// zero. Every enclosure then holds the coordinate of one real point at which
// all generators vanish.
func (p *Points) drawIsolated(gens []algebra.Poly) (jet.Point, map[algebra.Var]enclosure.Interval, bool) {
	at := jet.Point{}
	flat := p.flat && p.rng.IntN(2) == 0
	for _, v := range p.Free {
		at[v] = p.value(v, p.rng.IntN(2) == 0)
		p.flatten(at, v, flat)
	}
	for _, g := range gens { // traces are drawn themselves
		for _, v := range p.d.Ring.Support(algebra.FromPoly(g)) {
			if _, ok := at[v]; !ok && p.d.Ring.Symbol(v).Kind <= jet.Derivative {
				at[v] = p.value(v, false)
				p.flatten(at, v, flat)
			}
		}
	}
	for _, c := range p.Angles {
		t := triples[p.rng.IntN(len(triples))]
		at[c] = algebra.Frac64(int64(t[0]), int64(t[2]))
		at[p.d.Ring.Symbol(c).Partner] = algebra.Frac64(int64(t[1]), int64(t[2]))
	}
	for _, s := range p.Signs {
		at[s] = algebra.Int(1 - 2*p.rng.Int64N(2))
	}
	maps.Copy(at, p.Fixed)
	roots := map[algebra.Var]enclosure.Interval{}
	used := map[algebra.Var]bool{} // by generators before
	for _, g := range p.byOrder(gens) {
		if !p.isolateOne(g, at, roots, used) {
			return nil, nil, false
		}
		for _, v := range p.d.Ring.Support(algebra.FromPoly(g)) {
			used[v] = true
		}
	}
	p.meansFromTraces(at, roots)
	return at, roots, true
}

// isolateOne gives one unused jet of g the value that makes g vanish.
func (p *Points) isolateOne(g algebra.Poly, at jet.Point, roots map[algebra.Var]enclosure.Interval, used map[algebra.Var]bool) bool {
	if x, ok := p.d.Ring.Exact(algebra.FromPoly(g), at); ok && x.IsZero() {
		return true
	}
	vars := g.Vars()
	inside := map[algebra.Var]bool{} // what roots and functions in g hold
	for _, k := range p.d.Ring.Kernels(algebra.FromPoly(g)) {
		for _, v := range p.d.Ring.Support(p.d.Ring.Symbol(k).Arg) {
			inside[v] = true
		}
	}
	p.rng.Shuffle(len(vars), func(i, k int) { vars[i], vars[k] = vars[k], vars[i] })
	rational := !slices.ContainsFunc(vars, func(v algebra.Var) bool { _, ok := at[v]; return !ok })
	for _, v := range vars {
		if !p.d.isolable(v) || used[v] || inside[v] {
			continue
		}
		if g.Degree(v) == 1 {
			co := g.Coeffs(v)
			factor := algebra.FromPoly(co[1])
			if s, ok := p.d.Ring.EncloseAt(factor, at, roots, 256).Sign(); !ok || s == 0 {
				continue
			}
			value, ok := algebra.FromPoly(co[0]).Neg().Quo(factor)
			if !ok {
				continue
			}
			if x, ok := p.d.Ring.Exact(value, at); ok {
				at[v] = x
			} else {
				roots[v] = p.d.Ring.EncloseAt(value, at, roots, 320)
				delete(at, v)
			}
			return true
		}
		if !rational {
			continue
		}
		values := map[algebra.Var]algebra.Rat{}
		for _, w := range vars {
			if w != v {
				values[w] = at[w]
			}
		}
		lo, hi, ok := p.signChange(g.EvalPartial(values), v)
		switch {
		case !ok:
			continue
		case lo.Equal(hi):
			at[v] = lo
		default:
			roots[v] = isolated.FromRats(lo.Big(), hi.Big())
			delete(at, v)
		}
		return true
	}
	return false
}

// isolable reports an indeterminate that may follow from an equation: a
// derivative, and where there are no equations on the jets, but assumptions on
// single points alone, a constant or a coordinate as well.
func (d *Problem) isolable(v algebra.Var) bool {
	k := d.Ring.Symbol(v).Kind
	return k == jet.Derivative || k < jet.Derivative && len(d.Ideal) == 0 && len(d.Wells) == 0
}

// equation is the polynomial of an assumption that is an equation.
func (c Constraint) equation() (algebra.Poly, bool) {
	p, ok := c.Value.IsPoly()
	return p, ok && c.Relation == "=" && !p.IsZero()
}

// meansFromTraces makes the means and differences follow from the traces.
func (p *Points) meansFromTraces(at jet.Point, roots map[algebra.Var]enclosure.Interval) {
	if !p.d.Claim.Jump {
		return
	}
	c := isolated
	half := c.FromRat(big.NewRat(1, 2))
	for _, v := range p.Free {
		s := p.d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side < jet.Mean {
			continue
		}
		value := func(side jet.Side) (enclosure.Interval, bool) {
			w, err := p.d.Ring.JetVar(s.Place, s.Index, side)
			if err != nil {
				return enclosure.Entire(), false
			}
			if r, ok := roots[w]; ok {
				return r, true
			}
			x, ok := at[w]
			return c.FromRat(x.Big()), ok
		}
		plus, ok1 := value(jet.PlusSide)
		minus, ok2 := value(jet.MinusSide)
		if !ok1 || !ok2 {
			continue // no well holds it: drawn itself
		}
		delete(at, v)
		if s.Side == jet.Mean {
			roots[v] = c.Mul(half, c.Add(plus, minus))
		} else {
			roots[v] = c.Sub(plus, minus)
		}
	}
}

func (p *Points) admissibleIsolated(at jet.Point, roots map[algebra.Var]enclosure.Interval) bool {
	for _, c := range p.d.Assumed {
		if _, ok := c.equation(); ok || c.Relation == "=" && c.Value.IsZero() {
			continue // the point was drawn on its zeros
		}
		s, ok := p.d.Ring.EncloseAt(c.Value, at, roots, 256).Sign()
		want := map[string]int{">": 1, ">=": 1, "<": -1, "<=": -1}[c.Relation]
		if !ok || want == 0 || s != want {
			return false
		}
	}
	for _, c := range p.d.Ring.Conditions() {
		s, ok := p.d.Ring.EncloseAt(c.Value, at, roots, 256).Sign()
		if !ok || s == 0 || s < 0 && c.Need != jet.NeedNonZero {
			return false
		}
	}
	if p.d.Claim.Jump {
		return p.d.jumps(at, roots)
	}
	return p.d.extendsIsolated(at, roots)
}

// signChange isolates a real zero of a polynomial in v alone between two
// rationals at which it has opposite signs, about 2^-240 apart in proportion.
func (p *Points) signChange(h algebra.Poly, v algebra.Var) (lo, hi algebra.Rat, ok bool) {
	if vs := h.Vars(); len(vs) != 1 || vs[0] != v {
		return lo, hi, false
	}
	value := func(x algebra.Rat) int {
		y, _ := h.Eval(func(algebra.Var) algebra.Rat { return x })
		return y.Sign()
	}
	grid := []algebra.Rat{
		algebra.Int(-1_000_000), algebra.Int(-10_000), algebra.Int(-100), algebra.Int(-10), algebra.Int(-3), algebra.Frac64(-3, 2), algebra.Int(-1), algebra.Frac64(-1, 3), {},
		algebra.Frac64(1, 3), algebra.Int(1), algebra.Frac64(3, 2), algebra.Int(3), algebra.Int(10), algebra.Int(100), algebra.Int(10_000), algebra.Int(1_000_000),
	}
	var found []int
	for i := range grid[1:] {
		if value(grid[i])*value(grid[i+1]) < 0 {
			found = append(found, i)
		}
	}
	if len(found) == 0 {
		return lo, hi, false
	}
	i := found[p.rng.IntN(len(found))]
	lo, hi = grid[i], grid[i+1]
	s := value(lo)
	for range 250 {
		mid := lo.Add(hi).Mul(algebra.Frac64(1, 2))
		switch value(mid) {
		case 0:
			return mid, mid, true
		case s:
			lo = mid
		default:
			hi = mid
		}
	}
	return lo, hi, true
}

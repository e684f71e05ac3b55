package creases

import (
	"fmt"
	"math"
	"math/big"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/interval"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/quadrature/certified"
)

// certified is a result after certify.
func (c *combination) certified(r Result, err error) (Result, error) {
	if err == nil {
		err = c.certify(&r)
	}
	return r, err
}

// certify encloses the energy and decides the claimed one. A surface without
// an enclosure keeps its verdict, and says why.
func (c *combination) certify(r *Result) error {
	if !c.o.Certify || r.Energy == nil || r.Verdict == claim.Proved || r.Verdict == claim.Refuted {
		return nil
	}
	e, err := c.enclosed()
	if c.ctx.Err() != nil {
		return c.ctx.Err()
	}
	if err != nil {
		r.add("no enclosure: " + strings.TrimPrefix(err.Error(), errNoEnclosure.Error()+": "))
		return nil
	}
	r.Enclosure = []string{decimal(e.Inf(), -1), decimal(e.Sup(), 1)}
	return c.judge(r)
}

// judge decides the claimed energy by the enclosure, as it is written down, and
// says so where the number found by quadrature is not in it.
func (c *combination) judge(r *Result) error {
	lo, hi, err := endpoints(r.Enclosure)
	if err != nil {
		return err
	}
	if r.Claimed != nil {
		if err := c.weigh(r, lo, hi); err != nil {
			return err
		}
	}
	if r.Energy == nil || r.Error == nil {
		return nil
	}
	least, most := above(lo), -above(new(big.Rat).Neg(hi))
	if x, e := *r.Energy, *r.Error+settled*math.Abs(*r.Energy); x+e < least || x-e > most {
		r.add(fmt.Sprintf("the number %.17g with its estimated error is not in [%s, %s]: quadrature in floating point has missed something", x, r.Enclosure[0], r.Enclosure[1]))
	}
	return nil
}

// weigh decides the claimed energy by the enclosure from lo to hi.
func (c *combination) weigh(r *Result, lo, hi *big.Rat) error {
	energy, err := c.claimed()
	if err != nil {
		return err
	}
	d := energy.against(lo, hi, c.s.src.Within)
	before := r.Verdict
	reason := r.Reason // of what the floats showed
	r.Reason = ""
	in := fmt.Sprintf("the energy lies in [%s, %s]", r.Enclosure[0], r.Enclosure[1])
	switch {
	case d.verdict == claim.Proved && d.far.Sign() == 0:
		r.add("proved: the energy is the claimed value")
	case d.verdict == claim.Proved:
		of := " of it"
		if energy.zero() {
			of = ""
		}
		r.add(fmt.Sprintf("proved to within %.1e%s: %s", min(1.1*above(d.relative), d.most), of, in))
		if d.near.Sign() > 0 {
			r.add(fmt.Sprintf("it is not the claimed value itself, which the enclosure misses by %.2g", above(d.near)))
		}
	case d.verdict == claim.Refuted:
		r.add(fmt.Sprintf("the enclosure [%s, %s] misses the claimed value by %.2g", r.Enclosure[0], r.Enclosure[1], above(d.near)))
	case d.near.Sign() > 0:
		r.Reason = reason
		r.add(in + ", which is not all within what is allowed of the claimed value, nor all outside, so that it decides nothing")
		return nil
	default:
		r.Reason = reason
		r.add(fmt.Sprintf("the enclosure contains the claimed value and is wider than %.2g, so that it decides nothing", above(d.allowed)))
		return nil
	}
	r.Verdict = d.verdict
	c.expect(r, before)
	return nil
}

// expect is what the case expects once an enclosure has decided: where it does not
// say, that the claim is proved. A proof also meets the expectation that the
// claim is supported, and a refutation that it is left open.
func (c *combination) expect(r *Result, before claim.Verdict) {
	switch {
	case c.s.src.Expect == nil:
		r.Expected = claim.Proved
	case r.Expected == before && r.Verdict != before:
		if before == claim.Supported && r.Verdict == claim.Proved || before == claim.Open && r.Verdict == claim.Refuted {
			r.Expected = r.Verdict
		}
	}
}

// decimal is x with 17 digits, rounded down or up: the decimal nearest to x
// reads back as x, but need not be on the right side of it.
func decimal(x float64, side int) string {
	f := new(big.Float).SetPrec(2000).SetMode(big.ToNegativeInf)
	if side > 0 {
		f.SetMode(big.ToPositiveInf)
	}
	for digits := 17; ; digits++ {
		s := fmt.Sprintf("%.*e", digits-1, x)
		y, ok := new(big.Rat).SetString(s)
		if !ok {
			return s
		}
		if cmp := y.Cmp(new(big.Rat).SetFloat64(x)); cmp == 0 || cmp == side {
			return shorter(s)
		}
		if digits > 780 {
			return s
		}
	}
}

// shorter writes a decimal without an exponent where it is small.
func shorter(s string) string {
	y, ok := new(big.Rat).SetString(s)
	if !ok {
		return s
	}
	e := strings.IndexByte(s, 'e')
	var power int
	if _, err := fmt.Sscanf(s[e+1:], "%d", &power); err != nil || power < -4 || power > 15 {
		return s
	}
	digits := len(strings.TrimLeft(strings.Replace(s[:e], ".", "", 1), "-")) - 1
	return y.FloatString(max(0, digits-power))
}

// enclosed is an enclosure of the energy.
func (c *combination) enclosed() (interval.Interval, error) {
	var angles *jet.Angles
	for range 4 {
		e, err := c.enclosedWith(angles)
		if a := finer(err); a != nil {
			angles = a
			continue
		}
		return e, err
	}
	return interval.Entire(), noEnclosure("the angles in the formulas are not whole multiples of one")
}

func (c *combination) enclosedWith(angles *jet.Angles) (interval.Interval, error) {
	total := interval.Point(0)
	list, err := c.pieces(angles)
	if err != nil {
		return total, err
	}
	for _, p := range list {
		if err := c.tracesOn(p); err != nil {
			return total, err
		}
		d, err := c.densityOn(p)
		if err != nil {
			return total, err
		}
		f, err := p.Ring.Mul(d, p.area)
		if err != nil {
			return total, err
		}
		x, err := c.integral(p, f)
		if err != nil {
			return total, err
		}
		if err := p.conditions(); err != nil {
			return total, err
		}
		total = total.Add(x)
	}
	if !total.IsBounded() || total.IsEmpty() {
		return total, noEnclosure("the integrand could not be bounded near some point of the surface")
	}
	return total, nil
}

// tracesOn finds the traces on a piece and checks by exact arithmetic that
// they are on the well, that u is continuous where it is given, and that the
// jump of the gradient is normal.
func (c *combination) tracesOn(p *piece) error {
	if c.s.plus == nil {
		return nil
	}
	p.grads = map[jet.Side][]algebra.Fraction{}
	var values []algebra.Fraction
	for side, list := range map[jet.Side][]formulaText{jet.PlusSide: c.s.plus, jet.MinusSide: c.s.minus} {
		if !c.s.isU {
			g, err := c.allOn(p.onSurface, list)
			if err != nil {
				return err
			}
			p.grads[side] = g
			continue
		}
		in := &entropy.Interpreter[dual]{Setting: c.set, Arith: duals{p.onSurface}}
		u, err := in.Scalar(list[0].node)
		if err != nil {
			return err
		}
		if u.d == nil {
			u.d = make([]algebra.Fraction, len(p.pos))
		}
		p.grads[side] = u.d
		values = append(values, u.x)
	}
	if c.s.isU {
		if !p.vanishes(values[0].Sub(values[1])) {
			return noEnclosure("it does not show by exact arithmetic that u is continuous across the surface")
		}
		p.value = &values[0]
	}
	plus, minus := p.grads[jet.PlusSide], p.grads[jet.MinusSide]
	q := make([]algebra.Fraction, len(plus))
	for i := range q {
		var err error
		if q[i], err = p.Ring.Sub(plus[i], minus[i]); err != nil {
			return err
		}
	}
	for _, t := range p.tangents {
		if c.s.isU {
			break // the derivative of the jump of u, which vanishes
		}
		x, err := p.dot(q, t)
		if err != nil {
			return err
		}
		if !p.vanishes(x) {
			return noEnclosure("it does not show by exact arithmetic that the jump of the gradient is normal to the surface")
		}
	}
	if c.set.Model.Residual == nil {
		return nil
	}
	for _, g := range [][]algebra.Fraction{plus, minus} {
		at := *p.onSurface
		at.grads = map[jet.Side][]algebra.Fraction{jet.NoSide: g}
		r, err := c.on(&at, formulaText{node: c.set.Model.Residual})
		if err != nil {
			return err
		}
		if !p.vanishes(r) {
			return noEnclosure("it does not show by exact arithmetic that both traces are on the well")
		}
	}
	return nil
}

// densityOn is the density on a piece.
func (c *combination) densityOn(p *piece) (algebra.Fraction, error) {
	if f := c.s.density; f != nil {
		in := &entropy.Interpreter[algebra.Fraction]{Setting: c.set, Arith: p.onSurface, Jump: c.s.plus != nil}
		return in.Scalar(f.node)
	}
	var zero algebra.Fraction
	if c.s.ev.profileErr != nil {
		return zero, c.s.ev.profileErr
	}
	// R and L along the segment minus + s q.
	n := len(p.pos)
	s := jet.Of(p.Ring.FreshConstant("s"))
	plus, minus := p.grads[jet.PlusSide], p.grads[jet.MinusSide]
	q, path := make([]algebra.Fraction, n), make([]algebra.Fraction, n)
	for i := range q {
		q[i] = plus[i].Sub(minus[i])
		path[i] = minus[i].Add(s.Mul(q[i]))
	}
	at := *p.onSurface
	at.grads = map[jet.Side][]algebra.Fraction{jet.NoSide: path}
	at.second = func(i, j int) (algebra.Fraction, error) {
		sum := q[i].Mul(p.nu[j]).Add(q[j].Mul(p.nu[i]))
		return p.Ring.Reduce(sum.Scale(algebra.Frac64(1, 2)))
	}
	var parts [2][]algebra.Fraction
	for k, f := range []formula.Node{c.set.Model.Residual, c.set.Model.Bending} {
		x, err := c.on(&at, formulaText{node: f})
		if err != nil {
			return zero, err
		}
		if parts[k], err = polynomialIn(p.Ring, x, s.Vars()[0]); err != nil {
			return zero, err
		}
	}
	r, l := parts[0], parts[1]
	if len(r) < 3 {
		return zero, nil // R is affine and vanishes at both ends
	}
	if len(r) == 3 && len(l) <= 1 {
		if len(l) == 0 {
			return zero, nil
		}
		x, err := p.Ring.Mul(r[2], l[0])
		if err != nil {
			return zero, err
		}
		return p.size(x.Scale(algebra.Frac64(1, 6)))
	}
	return p.cost(r, l)
}

// polynomialIn are the coefficients of a polynomial in s.
func polynomialIn(ring *jet.Ring, f algebra.Fraction, s algebra.Var) ([]algebra.Fraction, error) {
	den := jet.Whole(1)
	for _, v := range ring.Kernels(f) {
		if ring.Symbol(v).Arg.Has(s) {
			return nil, noEnclosure("the profile cost is not polynomial")
		}
	}
	for _, d := range f.DenFactors() {
		if d.Base.Has(s) {
			return nil, noEnclosure("the profile cost is not polynomial")
		}
		den = den.Mul(algebra.FromPoly(d.Base).Pow(-d.Exp))
	}
	var out []algebra.Fraction
	for _, c := range f.Num().Coeffs(s) {
		out = append(out, algebra.FromPoly(c).Mul(den))
	}
	return out, nil
}

// cost is the integral over [0, 1] of |R L|, polynomials in s, where all
// Bernstein coefficients of the product are of one sign on the whole piece.
func (p *piece) cost(r, l []algebra.Fraction) (algebra.Fraction, error) {
	var sum algebra.Fraction
	prod := make([]algebra.Fraction, len(r)+len(l)-1)
	for i, a := range r {
		for j, b := range l {
			x, err := p.Ring.Mul(a, b)
			if err == nil {
				prod[i+j], err = p.Ring.Add(prod[i+j], x)
			}
			if err != nil {
				return sum, err
			}
		}
	}
	n := len(prod) - 1
	signs := map[bool]bool{}
	for j := range prod {
		var b algebra.Fraction
		ratio := algebra.Int(1)
		for i := 0; i <= j; i++ {
			b = b.Add(prod[i].Scale(ratio))
			if i < n {
				ratio = ratio.Mul(algebra.Frac64(int64(j-i), int64(n-i)))
			}
		}
		b, err := p.Ring.Reduce(b)
		if err != nil {
			return sum, err
		}
		sum = sum.Add(b)
		if b.IsZero() {
			continue
		}
		x := p.from.fraction(b)
		up := p.tape.NonNegative(x, 10)
		if !up && !p.tape.NonNegative(p.tape.Mul(p.tape.Const(interval.Point(-1)), x), 10) {
			return sum, noEnclosure("the integrand of the profile cost is not shown to keep its sign")
		}
		signs[up] = true
	}
	if len(signs) > 1 {
		return sum, noEnclosure("the integrand of the profile cost is not shown to keep its sign")
	}
	sum = sum.Scale(algebra.Frac64(1, int64(n+1)))
	if signs[false] {
		sum = sum.Neg()
	}
	return p.Ring.Reduce(sum)
}

// fine is the relative width up to which an enclosure is not tried to be
// narrowed in a second way.
const fine = 1e-12

// integral encloses the integral of f over the parameters, f the density times
// the area element in normal form, and where that is wide the density as it is
// written.
func (c *combination) integral(p *piece, f algebra.Fraction) (interval.Interval, error) {
	total := interval.Point(0)
	if err := p.Ring.Err(f); err != nil {
		return total, err
	}
	w := p.from
	list, ok := w.factors(f)
	if !ok {
		list = [][2]certified.Ref{{w.fraction(f), p.tape.Const(interval.Point(1))}}
	}
	if w.fault != "" {
		return total, noEnclosure("%s has no value", w.fault)
	}
	for _, pair := range list {
		x := interval.Point(1)
		for _, g := range pair {
			r, err := p.tape.Integrate(c.ctx, g, certified.Options{})
			if err != nil {
				return total, err
			}
			x = x.Mul(r.Value)
		}
		total = total.Add(x)
	}
	total = p.scaled(total)
	if total.IsBounded() && total.Wid() <= fine*total.Mag() {
		return total, nil
	}
	other, err := c.asWritten(p)
	if err != nil {
		return total, err
	}
	both := total.Intersection(other)
	if both.IsEmpty() {
		return total, noEnclosure("the enclosures %s and %s, found in two ways, have nothing in common", total, other)
	}
	return both, nil
}

// conditions checks that what stands under roots is not negative, and what is
// in logarithms positive, inside the piece. Of a denominator it is enough that
// it does not vanish on a part with an area: where it vanishes at single points or
// on lines, and cancels, the integrand is its continuation.
func (p *piece) conditions() error {
	const depth = 12
	for _, k := range p.Ring.Conditions() {
		if k.Need == jet.NeedNonZero {
			if p.dividesZero(k.Value) && !p.apart(k.Value) {
				return noEnclosure("%s, which is divided by, may vanish on a part of the surface", p.Ring.Format(k.Value))
			}
			continue
		}
		x := p.from.fraction(k.Value)
		if k.Need == jet.NeedPositive && p.tape.Positive(x, depth) || k.Need == jet.NeedNonNegative && p.tape.NonNegative(x, depth) {
			continue
		}
		if p.from.fault == "" && p.toEnds(k.Value) {
			continue
		}
		return noEnclosure("%s is not shown to be %s everywhere on the surface", p.Ring.Format(k.Value), k.Need)
	}
	return nil
}

// toEnds shows that f is positive inside the range of the one parameter that it
// depends on, although it vanishes at an end: there it does so exactly, and its
// derivative has the right sign in the neighbourhood.
func (p *piece) toEnds(f algebra.Fraction) bool {
	const near, depth = 0x1p-6, 12
	k := -1
	for _, v := range f.Vars() {
		switch mask := p.from.mask(v); {
		case mask == 0:
		case k < 0 && v == p.vars[mask>>1] && mask != 3:
			k = int(mask >> 1)
		default:
			return false
		}
	}
	if k < 0 || len(f.DenFactors()) > 0 {
		return false
	}
	slope, err := p.Ring.Partial(f, p.vars[k])
	if err != nil {
		return false
	}
	from, to := 0.0, 1.0
	for end, x := range p.over[k] {
		at, err := p.Ring.Reduce(f.SubstMany(map[algebra.Var]algebra.Fraction{p.vars[k]: x}))
		if err != nil {
			return false
		}
		if !at.IsZero() {
			continue
		}
		a, b, s := 0.0, near, slope
		if end == 1 {
			a, b, s = 1-near, 1, slope.Neg()
			to = a
		} else {
			from = b
		}
		w, _, err := p.within(a, b)
		if err != nil || !p.tape.Positive(w.fraction(s), depth) {
			return false
		}
	}
	w, _, err := p.within(from, to)
	return err == nil && p.tape.Positive(w.fraction(f), depth)
}

package identity

import (
	"errors"
	"maps"
	"math"
	"math/big"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
	"creaseproof/identity/gram"
	"creaseproof/identity/squares"
)

// best decides for which values of a constant an inequality holds. The gap
// must be affine in it, so that the set is an interval.
func (d *decider) best() error {
	v := d.Ring.ConstantVar(d.Claim.Best)
	st := d.Claim.Statement
	g, err := d.Gap()
	if err != nil {
		return err
	}
	if err := d.RemoveAngle(g); err != nil {
		return err
	}
	if !g.Poly.Has(v) {
		return &entropy.Error{At: st.Left.At(), Err: errors.New("the inequality does not depend on " + d.Claim.Best), Advice: "take `best` away, or let the constant occur"}
	}
	if err := d.Affine(g, v); err != nil {
		d.Open("%v: its best values are not searched for", err)
		return nil
	}
	if len(d.Wells) > 0 || len(d.Ideal) > 0 {
		d.Open("best values on a well that determines no derivative are not searched for")
		return nil
	}
	b := &bestSearch{d: d, g: g, v: v, slope: g.Poly.Deriv(v), rest: g.Poly.Coeffs(v)[0]}
	return b.run()
}

type bestSearch struct {
	d           *decider
	g           *exact.Gap
	v           algebra.Var
	slope, rest algebra.Poly // poly = rest + v slope
}

func (b *bestSearch) at(x algebra.Rat) *exact.Gap { return b.g.At(b.v, x) }

// proves looks for a certificate at a value; the record then holds it.
func (b *bestSearch) proves(g *exact.Gap) (bool, error) {
	if g.Poly.IsZero() {
		b.d.Proved("exact normal form")
		return true, nil
	}
	res := squares.Complete(b.d.Ctx, b.d.Ring, g.Poly, b.d.squareVars(g.Poly))
	return b.d.prove(g, res.Terms)
}

func (b *bestSearch) run() error {
	d := b.d
	var ends []End
	var free []claim.Unbounded
	for _, upper := range []bool{false, true} {
		unbounded, err := b.proves(b.recession(upper))
		if err != nil {
			return err
		}
		if unbounded {
			free = append(free, claim.Unbounded{Upper: upper, Reduced: d.Rec.Reduced, Certificate: d.Rec.Certificate})
			continue
		}
		e, ok, err := b.end(upper)
		if err != nil {
			return err
		}
		if !ok {
			d.clearProof()
			d.Rec.Method = ""
			d.Open("no end of the set of %s was found on the %s side", d.Claim.Best, map[bool]string{false: "lower", true: "upper"}[upper])
			return nil
		}
		ends = append(ends, *e)
	}
	d.clearProof()
	if len(ends) == 0 {
		d.Rec.Method = ""
		d.Open("the inequality does not change with %s on the set of the assumptions", d.Claim.Best)
		return nil
	}
	d.Rec.Ends, d.Rec.Unbounded = ends, free
	d.Rec.Method = "certificates at the ends, jets beyond them"
	d.Rec.Verdict = Proved
	for _, e := range ends {
		if e.Outer != "" {
			d.Rec.Verdict = Open
			d.Rec.Reason = "an end is bracketed, not exact"
		}
	}
	d.Rec.Solution = claim.SolutionText(d.Claim.Best, ends)
	return nil
}

// clearProof forgets what proofs along the way have left in the record.
func (d *decider) clearProof() {
	d.Rec.Certificate, d.Rec.Reduced, d.Rec.Equality, d.Rec.Details, d.Rec.Reason = nil, nil, nil, nil, ""
}

// recession is the inequality that says that there is no end on a side: the
// slope, or its negative, is non-negative.
func (b *bestSearch) recession(upper bool) *exact.Gap {
	g := *b.g
	g.Poly = b.slope
	if !upper {
		g.Poly = g.Poly.Neg()
	}
	g.Value = algebra.FromPoly(g.Poly)
	return &g
}

// end finds the end on one side.
func (b *bestSearch) end(upper bool) (*End, bool, error) {
	d := b.d
	guesses := b.guesses(upper)
	for _, x := range guesses {
		e, ok, err := b.exactEnd(x, upper)
		if err != nil || ok {
			return e, ok, err
		}
	}
	return b.bracket(guesses, upper, d)
}

// exactEnd proves the inequality at x and looks for an equality jet at which
// the gap falls beyond x.
func (b *bestSearch) exactEnd(x algebra.Rat, upper bool) (*End, bool, error) {
	d := b.d
	g := b.at(x)
	ok, err := b.proves(g)
	if err != nil || !ok {
		return nil, false, err
	}
	e := &End{Upper: upper, Value: x.String(), Reduced: d.Rec.Reduced, Certificate: d.Rec.Certificate}
	at, ok := b.beyond(g, upper)
	if !ok {
		return nil, false, nil
	}
	delete(at, b.v) // the jet serves for all values beyond
	d.ShowWitness(at, g.Left, g.Right)
	e.Beyond = d.Rec.Witness
	d.Rec.Witness = nil
	return e, true, nil
}

// beyond looks for an admissible point where the gap at the end is zero and
// the slope has the sign that makes it negative beyond.
func (b *bestSearch) beyond(g *exact.Gap, upper bool) (jet.Point, bool) {
	d := b.d
	slope := algebra.FromPoly(b.slope)
	good := func(at jet.Point) bool {
		s, ok := d.Ring.Sign(slope, at)
		return ok && (upper && s < 0 || !upper && s > 0)
	}
	list := echelon(d.vanishing)
	pts := d.GapPoints(b.g) // with what only the slope depends on
	for range 600 {         // small rational points first
		at, ok := pts.Next()
		if !ok {
			break
		}
		if x, ok := d.Ring.Exact(g.Value, at); ok && x.IsZero() && good(at) {
			return at, true
		}
	}
	for _, z := range append(b.lattice(g), b.rationalZeros(g)...) {
		at := pts.Draw()
		if at == nil {
			continue
		}
		maps.Copy(at, z)
		if !d.Consistent(pts, at) || !pts.Admissible(at) {
			continue
		}
		if x, ok := d.Ring.Exact(g.Value, at); ok && x.IsZero() && good(at) {
			return at, true
		}
	}
	for range 200 {
		at := pts.Draw()
		if at == nil || !pts.OnVariety(at, list) {
			continue
		}
		if !d.Consistent(pts, at) || !pts.Admissible(at) {
			continue
		}
		if x, ok := d.Ring.Exact(g.Value, at); ok && x.IsZero() && good(at) {
			return at, true
		}
	}
	return nil, false
}

// lattice are jets with entries 0 and 1, of gaps with few derivatives.
func (b *bestSearch) lattice(g *exact.Gap) []jet.Point {
	var vars []algebra.Var
	for _, v := range g.Poly.Vars() {
		if b.d.Ring.Symbol(v).Kind == jet.Derivative {
			vars = append(vars, v)
		}
	}
	if len(vars) > 9 {
		return nil
	}
	var out []jet.Point
	for k := range 1 << len(vars) {
		p := jet.Point{}
		for i, v := range vars {
			p[v] = algebra.Int(int64(k >> i & 1))
		}
		out = append(out, p)
	}
	return out
}

// rationalZeros are numerical zeros of a gap, scaled so that their largest
// derivative is ±1, and recognised as rational.
func (b *bestSearch) rationalZeros(g *exact.Gap) []jet.Point {
	d := b.d
	var out []jet.Point
next:
	for _, z := range gram.Zeros(d.Ctx, d.reduction(g).problemFor(g.Poly)) {
		scale := 0.0
		for v, x := range z {
			if d.Ring.Symbol(v).Kind == jet.Derivative {
				scale = max(scale, math.Abs(x))
			}
		}
		for _, by := range []float64{1, scale} {
			p := jet.Point{}
			for v, x := range z {
				if d.Ring.Symbol(v).Kind == jet.Derivative && by > 0 {
					x /= by
				}
				r := gram.Recognise(x)
				if len(r) == 0 {
					continue next
				}
				p[v] = r[len(r)-1]
			}
			out = append(out, p)
		}
	}
	return out
}

// guesses are candidates for the end: recognised from the semidefinite program
// that moves the constant as far as it goes, then from bisection.
func (b *bestSearch) guesses(upper bool) []algebra.Rat {
	d := b.d
	r := d.reduction(b.at(algebra.Rat{}))
	effort, _ := gram.Efforts(d.opt.Effort)
	cost := 1.0
	if upper {
		cost = -1
	}
	x, ok := gram.Fit(d.Ctx, r.problemFor(r.Normal(b.rest)), []algebra.Poly{b.slope}, []float64{cost}, effort)
	if !ok || math.IsNaN(x[0]) || math.Abs(x[0]) > 1e9 {
		return nil
	}
	return gram.Recognise(x[0])
}

// bisections bounds the values tried by bracket.
const bisections = 24

// bracket finds a value at which the inequality is proved and one beyond at
// which it is refuted, as near to each other as the budget allows; the
// simplest rationals between are tried as exact ends.
func (b *bestSearch) bracket(guesses []algebra.Rat, upper bool, d *decider) (*End, bool, error) {
	inner, ok, err := b.provedValue(guesses)
	if err != nil || !ok {
		return nil, false, err
	}
	dir := algebra.Int(1)
	if !upper {
		dir = dir.Neg()
	}
	// Go outwards until it fails.
	step := algebra.Int(1)
	var outer algebra.Rat
	found := false
	for range 40 {
		x := inner.Add(dir.Mul(step))
		ok, err := b.proves(b.at(x))
		if err != nil {
			return nil, false, err
		}
		if ok {
			inner = x
		} else if b.fails(x) {
			outer, found = x, true
			break
		}
		step = step.Add(step)
	}
	if !found {
		return nil, false, nil
	}
	if e, ok, err := b.exactEnd(inner, upper); err != nil || ok {
		return e, ok, err
	}
	for range bisections {
		mid := simplestBetween(inner, outer)
		ok, err := b.proves(b.at(mid))
		switch {
		case err != nil:
			return nil, false, err
		case ok:
			if e, ok, err := b.exactEnd(mid, upper); err != nil || ok {
				return e, ok, err
			}
			inner = mid
		case b.fails(mid):
			outer = mid
		default:
			// Undecided: halve towards the proved side.
			mid = inner.Add(mid).Mul(algebra.Frac64(1, 2))
			if ok, err := b.proves(b.at(mid)); err != nil {
				return nil, false, err
			} else if ok {
				inner = mid
				continue
			}
			return b.bracketed(inner, outer, upper)
		}
	}
	return b.bracketed(inner, outer, upper)
}

func (b *bestSearch) bracketed(inner, outer algebra.Rat, upper bool) (*End, bool, error) {
	ok, err := b.proves(b.at(inner))
	if err != nil || !ok {
		return nil, false, err
	}
	e := &End{Upper: upper, Value: inner.String(), Outer: outer.String(), Reduced: b.d.Rec.Reduced, Certificate: b.d.Rec.Certificate}
	g := b.at(outer)
	if at, ok := b.d.cheapCounterexample(g, b.d.GapPoints(g)); ok {
		b.d.ShowWitness(at, g.Left, g.Right)
		e.Beyond, b.d.Rec.Witness = b.d.Rec.Witness, nil
	}
	return e, true, nil
}

// fails reports whether the inequality is refuted at a value.
func (b *bestSearch) fails(x algebra.Rat) bool {
	g := b.at(x)
	pts := b.d.GapPoints(g)
	if _, ok := b.d.cheapCounterexample(g, pts); ok {
		return true
	}
	if len(pts.Signs) > 0 {
		return false
	}
	t := &task{d: b.d, g: g, pts: pts}
	if t.compile() != nil {
		return false
	}
	found, err := t.attack(nil)
	return err == nil && found.Witness != nil
}

// provedValue is some value at which the inequality is proved.
func (b *bestSearch) provedValue(guesses []algebra.Rat) (algebra.Rat, bool, error) {
	try := slices.Clone(guesses)
	for _, n := range []int64{0, 1, -1, 2, -2, 3, -3, 4, -4, 6, -6, 10, -10, 100, -100} {
		try = append(try, algebra.Int(n))
	}
	for _, x := range try {
		ok, err := b.proves(b.at(x))
		if err != nil || ok {
			return x, ok, err
		}
	}
	return algebra.Rat{}, false, nil
}

// simplestBetween is a rational well between two others, with a denominator as
// small as that allows.
func simplestBetween(a, b algebra.Rat) algebra.Rat {
	third := b.Sub(a).Mul(algebra.Frac64(1, 3))
	lo, hi := a.Add(third), b.Sub(third)
	if lo.Cmp(hi) > 0 {
		lo, hi = hi, lo
	}
	for den := int64(1); den < 1<<40; den *= 2 {
		for _, k := range []int64{den, den * 3, den * 5} {
			x := lo.Mul(algebra.Int(k)).Big()
			n := algebra.FromBig(ceil(x))
			if y, ok := n.Quo(algebra.Int(k)); ok && y.Cmp(hi) <= 0 {
				return y
			}
		}
	}
	return a.Add(b).Mul(algebra.Frac64(1, 2))
}

// ceil is the least whole number not below x.
func ceil(x *big.Rat) *big.Rat {
	q, m := new(big.Int).DivMod(x.Num(), x.Denom(), new(big.Int))
	if m.Sign() != 0 {
		q.Add(q, big.NewInt(1))
	}
	return new(big.Rat).SetInt(q)
}

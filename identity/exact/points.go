package exact

import (
	"maps"
	"math/rand/v2"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// Points draws rational points at which formulas can be evaluated exactly:
// small numbers first, then wider ones. The sequence depends only on the seed
// and on the formulas.
type Points struct {
	d      *Problem
	Free   []algebra.Var // coordinates, constants, jets
	Angles []algebra.Var // cosines of free angles
	Signs  []algebra.Var // orientations
	Fixed  jet.Point     // values that are not drawn
	rng    *rand.Rand
	drawn  int
	flat   bool // derivatives of higher order are tried as zero

	assumed []algebra.Poly // equations on single points, which are solved where they can be

	lattice     []latticeZeros // of whole generators, found so far
	latticeWork int
}

// Points looks at what the values depend on. An angle that occurs only in its
// own cosine and sine becomes a rational point of the circle.
func (d *Problem) Points(fs ...algebra.Fraction) *Points {
	p := &Points{d: d, rng: rand.New(rand.NewPCG(d.Seed, 0x6a657473))}
	all := slices.Clone(fs)
	for _, c := range d.Ring.Conditions() {
		all = append(all, c.Value)
	}
	for _, c := range d.Assumed {
		all = append(all, c.Value)
	}
	for _, g := range append(d.Wells, d.Ideal...) {
		all = append(all, algebra.FromPoly(g))
	}
	var cosines []algebra.Var
	bare := map[algebra.Var]bool{}
	var other []algebra.Fraction
	other = append(other, all...)
	for _, k := range d.Ring.Kernels(all...) {
		s := d.Ring.Symbol(k)
		switch s.Kind {
		case jet.Cosine, jet.Sine:
			if v, ok := LoneVar(s.Arg); ok && d.Ring.Symbol(v).Kind == jet.Constant {
				c := k
				if s.Kind == jet.Sine {
					c = s.Partner
				}
				if !slices.Contains(cosines, c) {
					cosines = append(cosines, c)
				}
				continue
			}
		case jet.Root:
			if one, ok := s.Arg.IsConst(); ok && one.IsOne() {
				p.Signs = append(p.Signs, k)
			}
		}
		other = append(other, s.Arg)
	}
	for _, f := range other {
		for _, v := range f.Vars() {
			if d.Ring.Symbol(v).Kind <= jet.Derivative {
				bare[v] = true
			}
		}
	}
	for _, c := range cosines {
		v, _ := LoneVar(d.Ring.Symbol(c).Arg)
		if bare[v] {
			continue
		}
		p.Angles = append(p.Angles, c)
	}
	// Angles that are not free points of the circle need a value themselves.
	for _, c := range cosines {
		if v, _ := LoneVar(d.Ring.Symbol(c).Arg); !slices.Contains(p.Angles, c) {
			bare[v] = true
		}
	}
	for v := range bare {
		p.Free = append(p.Free, v)
	}
	// A mean goes with every difference, and both with the traces in a well, so
	// that a witness has both traces.
	for _, v := range slices.Clone(p.Free) {
		s := d.Ring.Symbol(v)
		if s.Kind != jet.Derivative || s.Side == jet.NoSide {
			continue
		}
		for _, side := range []jet.Side{jet.Mean, jet.Difference} {
			if w, err := d.Ring.JetVar(s.Place, s.Index, side); err == nil && !bare[w] {
				bare[w] = true
				p.Free = append(p.Free, w)
			}
		}
	}
	p.Free = slices.DeleteFunc(p.Free, func(v algebra.Var) bool {
		s := d.Ring.Symbol(v)
		return s.Kind == jet.Derivative && (s.Side == jet.PlusSide || s.Side == jet.MinusSide)
	})
	slices.Sort(p.Free)
	p.flat = len(d.equations) > 0 && d.ofGradients()
	if len(d.Ideal) == 0 && !d.Claim.Jump {
		for _, c := range d.Assumed {
			if q, ok := c.equation(); ok && len(d.Ring.Kernels(c.Value)) == 0 {
				p.assumed = append(p.assumed, q)
			}
		}
	}
	return p
}

var smallPool = func() []algebra.Rat {
	var out []algebra.Rat
	for _, q := range [][2]int64{{1, 1}, {2, 1}, {3, 1}, {1, 2}, {0, 1}, {-1, 1}, {-2, 1}, {3, 2}, {-1, 2}, {5, 1}, {-3, 1}, {3, 5}, {4, 5}, {-4, 5}, {1, 3}, {7, 2}} {
		out = append(out, algebra.Frac64(q[0], q[1]))
	}
	return out
}()

// triples give rational points of the circle.
var triples = [][3]int64{{1, 0, 1}, {3, 4, 5}, {0, 1, 1}, {4, 3, 5}, {5, 12, 13}, {-3, 4, 5}, {12, -5, 13}, {8, 15, 17}, {-4, -3, 5}, {7, 24, 25}, {20, 21, 29}}

func (p *Points) value(v algebra.Var, wide bool) algebra.Rat {
	var x algebra.Rat
	switch {
	case !wide:
		x = smallPool[p.rng.IntN(len(smallPool))]
	default:
		x = algebra.Frac64(p.rng.Int64N(2001)-1000, 1+p.rng.Int64N(60))
		if p.rng.IntN(4) == 0 {
			x = x.Mul(algebra.Int(1 + p.rng.Int64N(100000)))
		}
		if p.rng.IntN(4) == 0 {
			x, _ = x.Quo(algebra.Int(1 + p.rng.Int64N(100000)))
		}
	}
	switch p.d.Ring.Symbol(v).Sign {
	case jet.Positive:
		if x = x.Abs(); x.IsZero() {
			x = algebra.Int(1)
		}
	case jet.NonNegative:
		x = x.Abs()
	case jet.Negative:
		if x = x.Abs().Neg(); x.IsZero() {
			x = algebra.Int(-1)
		}
	case jet.NonPositive:
		x = x.Abs().Neg()
	}
	return p.bounded(v, x)
}

// bounded moves x into what the assumptions and the box allow of v.
func (p *Points) bounded(v algebra.Var, x algebra.Rat) algebra.Rat {
	return p.d.Range(v).into(x, algebra.Frac64(p.rng.Int64N(33), 32))
}

// Next draws a point that satisfies the assumptions and conditions. It
// reports false where none of many draws does.
func (p *Points) Next() (jet.Point, bool) {
	for range 200 {
		if p.d.Ctx.Err() != nil {
			return nil, false
		}
		at := p.Draw()
		if at != nil && p.Admissible(at) {
			return at, true
		}
	}
	return nil, false
}

func (p *Points) Draw() jet.Point {
	p.drawn++
	wide := p.drawn > 60 && p.drawn%2 == 0
	at := jet.Point{}
	flat := p.flat && p.rng.IntN(4) == 0
	for _, v := range p.Free {
		at[v] = p.value(v, wide)
		p.flatten(at, v, flat)
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
	if len(p.d.Ideal) > 0 && (!p.OnVariety(at, p.d.Ideal) || !p.d.extends(at)) {
		return nil
	}
	if p.assumed != nil {
		if moved := at.Clone(); p.OnVariety(moved, p.assumed) {
			at = moved
		}
	}
	if p.d.Claim.Jump {
		if err := p.d.Traces(at); err != nil {
			return nil
		}
		if len(p.d.Wells) > 0 && !p.onWells(at) {
			return nil
		}
	}
	return at
}

// flatten makes a derivative of order two or more zero.
func (p *Points) flatten(at jet.Point, v algebra.Var, flat bool) {
	if s := p.d.Ring.Symbol(v); flat && s.Kind == jet.Derivative && s.Index.Order() > 1 {
		at[v] = algebra.Rat{}
	}
}

// Admissible reports whether the assumptions and the conditions of the ring
// certainly hold at a point; at a jump, that there is one.
func (p *Points) Admissible(at jet.Point) bool {
	for _, c := range p.d.Assumed {
		if !c.holds(p.d.Ring, at) {
			return false
		}
	}
	for _, c := range p.d.Ring.Conditions() {
		if !c.Holds(p.d.Ring, at) {
			return false
		}
	}
	return !p.d.Claim.Jump || p.d.jumps(at, nil)
}

// Vars are all indeterminates that are drawn.
func (p *Points) Vars() []algebra.Var { return slices.Concat(p.Free, p.Angles, p.Signs) }

// SimpleAngles are the first rational points of the circle that are tried, as
// numerators of cosine and sine and the common denominator.
func SimpleAngles() [][3]int64 {
	out := make([][3]int64, 4)
	for i, t := range triples[:4] {
		out[i] = [3]int64{int64(t[0]), int64(t[1]), int64(t[2])}
	}
	return out
}

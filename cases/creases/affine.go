package creases

import (
	"errors"
	"fmt"
	"math"
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/quadrature/branches"
)

// affine are the branches as affine functions with rational coefficients; nil
// where one is none.
func (c *combination) affine() []branches.Affine {
	n := len(c.set.Coordinates)
	place := map[algebra.Var]int{}
	for i := range n {
		place[c.exact.Ring.CoordinateVar(i)] = i
	}
	var out []branches.Affine
	for _, f := range c.s.shape.branches {
		x, err := c.in.Scalar(f.node)
		if err != nil || c.exact.Ring.Err(x) != nil {
			return nil
		}
		p, ok := x.IsPoly()
		if !ok || p.TotalDegree() > 1 {
			return nil
		}
		a := branches.Affine{Gradient: make([]*big.Rat, n), Constant: new(big.Rat)}
		for i := range a.Gradient {
			a.Gradient[i] = new(big.Rat)
		}
		for m, coef := range p.Terms() {
			if m.Degree() == 0 {
				a.Constant = coef.Big()
				continue
			}
			i, ok := place[m.Powers()[0].Var]
			if !ok {
				return nil
			}
			a.Gradient[i] = coef.Big()
		}
		out = append(out, a)
	}
	return out
}

// price is the energy of a face in exact arithmetic: Energy, or the multiple
// Factor of its area where the density is a rational number.
type price struct {
	energy *big.Rat
	factor *big.Rat
}

// price is nil without an error where the density is not known exactly.
func (c *combination) price(f *branches.Face, list []branches.Affine) (*price, error) {
	if c.s.density != nil {
		d := c.rational(*c.s.density)
		if d == nil {
			return nil, nil
		}
		return &price{factor: d}, nil
	}
	at := map[string]algebra.Rat{}
	for _, v := range c.s.values {
		if r := c.rational(c.chosen[v.name]); r != nil {
			at[v.name] = algebra.FromBig(r)
		}
	}
	gradient := func(k int) []algebra.Rat {
		out := make([]algebra.Rat, len(list[k].Gradient))
		for i, g := range list[k].Gradient {
			out[i] = algebra.FromBig(g)
		}
		return out
	}
	cost, err := c.s.ev.profile.Exact(gradient(f.Plus), gradient(f.Minus), at)
	if errors.Is(err, jet.ErrOutside) {
		return nil, nil
	}
	if err != nil {
		return nil, err
	}
	// cost.Numerator/|q| times Ratio |q|
	return &price{energy: new(big.Rat).Mul(cost.Numerator.Big(), f.Ratio)}, nil
}

// faces evaluates affine branches exactly. It reports false where that is not
// possible: a branch is not affine, a number not rational, the domain round, or
// the density not rational.
func (c *combination) faces(r *Result, d domain) (done bool, err error) {
	if d.exact == nil || c.s.density == nil && c.s.ev.profileErr != nil {
		return false, nil
	}
	list := c.affine()
	if list == nil {
		return false, nil
	}
	faces, err := branches.Faces(c.ctx, list, c.s.shape.tree, *d.exact)
	var same *branches.SameError
	var side *branches.BoundaryError
	switch {
	case errors.As(err, &same):
		return true, c.sameBranches(same)
	case errors.As(err, &side):
		*r = r.refuse(c.inSide(side))
		return true, nil
	case c.ctx.Err() != nil:
		return true, c.ctx.Err()
	case err != nil:
		return false, nil
	}
	total := newExactSum()
	var pair *exactSum
	var last *Pair
	close := func() {
		if last != nil {
			last.Energy, last.Error = pair.energy()
			last.Area = pair.areaFloat()
			last.Exact, last.AreaRoots = pair.exact(), pair.roots()
		}
	}
	for _, group := range branches.Connected(faces, nil) {
		one := newExactSum()
		var sheet Sheet
		for _, i := range group {
			f := &faces[i]
			p, err := c.price(f, list)
			if err != nil {
				*r = r.refuse(fmt.Sprintf("branches %d and %d: %v%s", f.Branches[0]+1, f.Branches[1]+1, err, c.where()))
				return true, nil
			}
			if p == nil {
				return false, nil
			}
			if names := [2]int{f.Branches[0] + 1, f.Branches[1] + 1}; last == nil || last.Branches != names {
				close()
				r.Pairs = append(r.Pairs, Pair{Branches: names})
				last, pair = &r.Pairs[len(r.Pairs)-1], newExactSum()
			}
			for _, s := range []*exactSum{one, pair, total} {
				s.add(f.SquaredArea(), p)
			}
			sheet.Polygons = append(sheet.Polygons, vertices(f))
		}
		sheet.Area, sheet.Exact = one.areaFloat(), one.exact()
		sheet.Energy, sheet.Error = one.energy()
		sheet.SquaredArea = one.roots()[0]
		if len(sheet.Polygons) == 1 {
			sheet.Vertices, sheet.Polygons = sheet.Polygons[0], nil
		}
		last.Sheets = append(last.Sheets, sheet)
	}
	close()
	e, failure := total.energy()
	area := total.areaFloat()
	r.Energy, r.Error, r.Area = &e, &failure, &area
	r.Exact, r.AreaRoots = total.exact(), total.roots()
	if len(faces) == 0 {
		r.add("there is no crease in the domain")
	}
	c.decide(r, total)
	return true, nil
}

// vertices are those of a face as they are printed.
func vertices(f *branches.Face) (list [][]string) {
	for _, v := range f.Vertices {
		var x []string
		for _, q := range v {
			x = append(x, q.RatString())
		}
		list = append(list, x)
	}
	return list
}

// exactSum is a sum of rational energies and of multiples of areas.
type exactSum struct {
	rational *big.Rat
	areas    []root // each the root of a square times a factor
	weighted []root
	factors  bool // energies are multiples of areas
}

// root is factor √square.
type root struct{ factor, square *big.Rat }

func newExactSum() *exactSum { return &exactSum{rational: new(big.Rat)} }

func (s *exactSum) add(squaredArea *big.Rat, p *price) {
	s.areas = join(s.areas, root{big.NewRat(1, 1), squaredArea})
	if p.factor != nil {
		s.factors = true
		s.weighted = join(s.weighted, root{p.factor, squaredArea})
		return
	}
	s.rational.Add(s.rational, p.energy)
}

// join adds a root to a sum, to one that it is a rational multiple of where
// there is one among them.
func join(list []root, r root) []root {
	for i, t := range list {
		ratio := new(big.Rat).Quo(r.square, t.square)
		if k, ok := jet.SqrtRat(algebra.FromBig(ratio)); ok {
			f := new(big.Rat).Mul(r.factor, k.Big())
			list[i].factor = f.Add(f, t.factor)
			return list
		}
	}
	return append(list, r)
}

// precise is the context for roots.
var precise = enclosure.Context{Prec: precision}

func enclosed(list []root) enclosure.Interval {
	sum := precise.Int(0)
	for _, r := range list {
		sum = precise.Add(sum, precise.Mul(precise.FromRat(r.factor), precise.Sqrt(precise.FromRat(r.square))))
	}
	return sum
}

// value encloses the energy.
func (s *exactSum) value() enclosure.Interval {
	return precise.Add(precise.FromRat(s.rational), enclosed(s.weighted))
}

// energy is the energy rounded, and a bound on the error of that.
func (s *exactSum) energy() (x, failure float64) {
	x = middle(s.value())
	if s.weighted == nil {
		if y, exact := s.rational.Float64(); exact {
			return y, 0
		}
	}
	return x, math.Abs(x) * 0x1p-52
}

func (s *exactSum) areaFloat() float64 { return middle(enclosed(s.areas)) }

func middle(i enclosure.Interval) float64 {
	mid := new(big.Float).SetPrec(2*precision).Add(i.Lo(), i.Hi())
	x, _ := mid.Quo(mid, big.NewFloat(2)).Float64()
	return x
}

// exact is the energy where it is a rational number.
func (s *exactSum) exact() string {
	sum := new(big.Rat).Set(s.rational)
	for _, r := range s.weighted {
		k, ok := jet.SqrtRat(algebra.FromBig(r.square))
		if !ok && r.factor.Sign() != 0 {
			return ""
		}
		sum.Add(sum, new(big.Rat).Mul(r.factor, k.Big()))
	}
	return sum.RatString()
}

// ends are rational numbers on both sides of the energy, the energy itself where
// that is rational.
func (s *exactSum) ends() (lo, hi *big.Rat) {
	if x, ok := new(big.Rat).SetString(s.exact()); ok {
		return x, x
	}
	i := s.value()
	lo, _ = i.Lo().Rat(nil)
	hi, _ = i.Hi().Rat(nil)
	return lo, hi
}

// roots are the rational numbers whose roots add up to the area.
func (s *exactSum) roots() (out []string) {
	for _, r := range s.areas {
		q := new(big.Rat).Mul(r.factor, r.factor)
		out = append(out, q.Mul(q, r.square).RatString())
	}
	return out
}

// mostRoots bounds the roots in the exact comparison with a claim.
const mostRoots = 32

// decide compares an exact energy with the claimed one.
func (c *combination) decide(r *Result, s *exactSum) {
	r.Met = true
	if c.s.energy == nil {
		if r.Expected != "" {
			r.Met = false
			r.add("the surface claims no energy, so that there is nothing to decide")
		}
		return
	}
	if c.s.src.Expect == nil {
		r.Expected = claim.Proved
	}
	r.Verdict = c.settle(r, s)
	r.Met = r.Verdict == r.Expected
}

func (c *combination) settle(r *Result, s *exactSum) claim.Verdict {
	refuted := func() claim.Verdict {
		value := s.exact()
		if value == "" || len(value) > 60 {
			value = fmt.Sprintf("%.17g", *r.Energy)
		}
		difference := math.Abs(*r.Energy - *r.Claimed)
		if claimed, err := c.enclose(*c.s.energy); err == nil {
			difference = math.Abs(middle(precise.Sub(s.value(), claimed)))
		}
		r.add(fmt.Sprintf("the energy is %s by exact arithmetic, and not the claimed %.17g: they differ by %.3g", value, *r.Claimed, difference))
		if w := c.s.src.Within; w == nil && difference <= 1e-3*math.Abs(*r.Claimed) {
			r.add("if the claim has been rounded, allow for it with within")
		}
		return claim.Refuted
	}
	claimed, err := c.claimed()
	if err != nil {
		return claim.Open
	}
	lo, hi := s.ends()
	d := claimed.against(lo, hi, c.s.src.Within)
	switch {
	case d.verdict == claim.Refuted:
		return refuted()
	case c.s.src.Within != nil && d.verdict == claim.Proved:
		return claim.Proved
	case d.near.Sign() > 0:
		r.add("the energy differs from the claimed one by what is allowed, to 60 digits, and whether by more was not decided")
		return claim.Open
	}
	ring := c.exact.Ring
	x, err := c.in.Scalar(c.s.energy.node)
	if err != nil || len(s.weighted) > mostRoots {
		return c.undecided(r)
	}
	x = x.Sub(jet.Rational(s.rational))
	for _, w := range s.weighted {
		q, err := ring.Root(jet.Rational(w.square), 2)
		if err != nil {
			return c.undecided(r)
		}
		x = x.Sub(q.Scale(algebra.FromBig(w.factor)))
	}
	if x, err = ring.Reduce(x); err != nil || ring.Err(x) != nil {
		return c.undecided(r)
	}
	if x.IsZero() {
		return claim.Proved
	}
	if sign, ok := ring.Sign(x, nil); ok && sign != 0 {
		return refuted()
	}
	return c.undecided(r)
}

// undecided is for a claim that agrees to all the digits computed, where exact
// arithmetic does not show that it is equal.
func (c *combination) undecided(r *Result) claim.Verdict {
	r.add("the claimed energy agrees to 60 digits, and whether it is equal was not decided")
	return claim.Supported
}

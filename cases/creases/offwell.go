package creases

import (
	"fmt"
	"maps"
	"math"
	"math/big"
	"slices"
	"strconv"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/formula"
)

// offWell brings the residuals of traces in closed form to exact normal form.
// onWell says that both are zero. Where one is not, it is enclosed at a few
// points of the surface, and the reason names one at which it is certainly not
// zero. If neither is found the numerical check at every node remains.
func (c *combination) offWell() (reason string, onWell bool, err error) {
	if !c.s.isU || c.set.Model.Residual == nil {
		return "", false, nil
	}
	zeros := 0
	for i, f := range []formulaText{c.s.plus[0], c.s.minus[0]} {
		what := [...]string{"plus", "minus"}[i]
		c.in.Reset()
		c.in.Given = map[int]formula.Node{0: f.node}
		r, err := c.in.Scalar(c.set.Model.Residual)
		c.in.Given = nil
		c.in.Reset()
		if c.ctx.Err() != nil {
			return "", false, c.ctx.Err()
		}
		if err != nil || r.Err() != nil {
			continue // not in closed form for the exact ring
		}
		if r.IsZero() {
			zeros++
			continue
		}
		u, err := c.in.Scalar(f.node)
		if err != nil {
			continue
		}
		for _, p := range c.samples() {
			if !c.exact.Ring.EncloseAt(u, nil, p.wide, precision).IsBounded() {
				continue // u itself is not defined there
			}
			x := c.exact.Ring.EncloseAt(r, nil, p.wide, precision)
			if s, ok := x.Sign(); !ok || s == 0 {
				continue
			}
			v, _ := x.Lo().Float64()
			return fmt.Sprintf("the %s trace is off the well%s%s: the residual is %.6g, not zero, by an enclosure", what, c.place(p.point, p.params), c.where(), v), false, nil
		}
	}
	return "", zeros == 2, nil
}

// torn encloses the jump of u, where both traces are formulas, at a few points
// of the surface; the reason names one at which it is certainly not zero. If
// none is found the numerical check at every node remains; continuous says that
// the jump is identically zero on the surface, by exact arithmetic.
func (c *combination) torn() (reason string, continuous bool) {
	if !c.s.isU {
		return "", false
	}
	plus, err := c.in.Scalar(c.s.plus[0].node)
	if err != nil {
		return "", false
	}
	minus, err := c.in.Scalar(c.s.minus[0].node)
	if err != nil {
		return "", false
	}
	jump := plus.Sub(minus)
	if c.exact.Ring.Err(jump) != nil {
		return "", false
	}
	for _, p := range c.samples() {
		x := c.exact.Ring.EncloseAt(jump, nil, p.wide, precision)
		if s, ok := x.Sign(); ok && s != 0 {
			v, _ := x.Lo().Float64()
			return fmt.Sprintf("u is discontinuous across the surface%s%s: it jumps by %.6g, by an enclosure", c.place(p.point, p.params), c.where(), v), false
		}
	}
	return "", c.sewn()
}

// sewn reports whether the jump of u vanishes identically on a patch or a graph
// by exact arithmetic, the formulas of its positions put for the coordinates.
func (c *combination) sewn() bool {
	h := &c.s.shape
	set := *c.set
	set.Lets = maps.Clone(c.set.Lets)
	switch {
	case h.maps != nil:
		set.Coordinates = nil
		set.Constants = append(slices.Clone(set.Constants), c.s.params...)
		for i, x := range c.set.Coordinates {
			set.Lets[x] = h.maps[i].node
		}
	case h.height != nil:
		n := len(c.set.Coordinates)
		up := n*(n-1)/2 - sum(h.spanned)
		set.Coordinates = slices.Delete(slices.Clone(set.Coordinates), up, up+1)
		set.Lets[c.set.Coordinates[up]] = h.height.node
	default:
		return false // of a polygon the enclosures show enough
	}
	set.Frame = nil
	in, exact, err := set.NewExact(c.ctx)
	if err != nil {
		return false
	}
	jump, err := in.Scalar(formula.NewSum(formula.Term{X: c.s.plus[0].node}, formula.Term{Neg: true, X: c.s.minus[0].node}))
	return err == nil && exact.Ring.Err(jump) == nil && jump.IsZero()
}

// samplePoint is a point of the surface known by enclosures.
type samplePoint struct {
	wide          map[algebra.Var]enclosure.Interval // of the coordinates
	point, params []float64
}

// fractions of edges and ranges at which a surface is looked at.
var fractions = [][2]*big.Rat{
	{big.NewRat(1, 2), big.NewRat(1, 3)},
	{big.NewRat(2, 7), big.NewRat(5, 8)},
	{big.NewRat(7, 9), big.NewRat(1, 5)},
}

// samples are a few points of the surface, none where they are not found.
func (c *combination) samples() (list []samplePoint) {
	h := &c.s.shape
	if c.s.src.Mesh != "" {
		return c.meshSamples()
	}
	if h.level != nil {
		return c.levelSamples()
	}
	if h.branches != nil {
		return nil
	}
	ec := enclosure.Context{Prec: precision}
	between := func(a, b enclosure.Interval, t *big.Rat) enclosure.Interval {
		return ec.Add(a, ec.Mul(ec.FromRat(t), ec.Sub(b, a)))
	}
	for k, t := range fractions {
		var x []enclosure.Interval
		var params []float64
		ok := true
		value := func(f formulaText) enclosure.Interval {
			v, err := c.enclose(f)
			ok = ok && err == nil
			return v
		}
		edge := func(corners [][]formulaText) {
			a, b := corners[k%len(corners)], corners[(k+1)%len(corners)]
			if len(corners) == 2 {
				a, b = corners[0], corners[1]
			}
			for i := range a {
				x = append(x, between(value(a[i]), value(b[i]), t[0]))
			}
		}
		var at []*big.Rat // in the ranges of a patch or graph
		for j, r := range h.over {
			q := inside(value(r[0]), value(r[1]), t[j])
			ok = ok && q != nil
			at = append(at, q)
		}
		switch {
		case !ok:
		case h.vertices != nil:
			corners := h.vertices
			if len(c.set.Coordinates) == 2 { // a chain, not closed
				corners = corners[k%(len(corners)-1):][:2]
			}
			edge(corners)
		case h.maps != nil:
			known := map[string]*big.Rat{}
			for j, q := range at {
				known[c.s.params[j]] = q
				f, _ := q.Float64()
				params = append(params, f)
			}
			for _, f := range h.maps {
				x = append(x, c.encloseAt(f, known))
			}
		default:
			switch {
			case h.corners != nil:
				edge(h.corners)
			case h.disc != nil:
				r := ec.Mul(value(h.disc[2]), ec.FromRat(t[1]))
				x = append(x, ec.Add(value(h.disc[0]), ec.Mul(r, ec.FromRat(big.NewRat(3, 5)))),
					ec.Add(value(h.disc[1]), ec.Mul(r, ec.FromRat(big.NewRat(4, 5)))))
			default:
				for _, q := range at {
					x = append(x, ec.FromRat(q))
				}
			}
			x = c.raise(x)
		}
		if !ok || len(x) != len(c.set.Coordinates) {
			continue
		}
		p := samplePoint{wide: map[algebra.Var]enclosure.Interval{}, params: params}
		for i, v := range x {
			if !v.IsBounded() {
				ok = false
				break
			}
			p.wide[c.exact.Ring.CoordinateVar(i)] = v
			f, _ := v.Lo().Float64()
			p.point = append(p.point, f)
		}
		if ok {
			list = append(list, p)
		}
	}
	return list
}

// raise puts the height of a graph to the coordinates it lies over.
func (c *combination) raise(base []enclosure.Interval) []enclosure.Interval {
	h := &c.s.shape
	wide := map[algebra.Var]enclosure.Interval{}
	out := make([]enclosure.Interval, len(c.set.Coordinates))
	for k, i := range h.spanned {
		wide[c.exact.Ring.CoordinateVar(i)] = base[k]
		out[i] = base[k]
	}
	f, err := c.in.Scalar(h.height.node)
	if err != nil {
		return nil
	}
	n := len(out)
	out[n*(n-1)/2-sum(h.spanned)] = c.exact.Ring.EncloseAt(f, nil, wide, precision)
	return out
}

// encloseAt is a formula with rational values for parameters.
func (c *combination) encloseAt(f formulaText, known map[string]*big.Rat) enclosure.Interval {
	x, err := c.in.Scalar(f.node)
	if err != nil {
		return enclosure.Entire()
	}
	at := map[algebra.Var]algebra.Rat{}
	for name, q := range known {
		at[c.exact.Ring.ConstantVar(name)] = algebra.FromBig(q)
	}
	return c.exact.Ring.Enclose(x, at, precision)
}

// inside is a short rational number near lo + t (hi - lo), inside the range;
// nil where there is none.
func inside(lo, hi enclosure.Interval, t *big.Rat) *big.Rat {
	if !lo.IsBounded() || !hi.IsBounded() {
		return nil
	}
	a, _ := lo.Hi().Float64()
	b, _ := hi.Lo().Float64()
	f, _ := t.Float64()
	x := a + f*(b-a)
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil
	}
	q, ok := new(big.Rat).SetString(strconv.FormatFloat(x, 'e', 3, 64))
	if y, _ := q.Float64(); !ok || !(a < y && y < b) {
		q = new(big.Rat).SetFloat64(x)
		if !(a < x && x < b) {
			return nil
		}
	}
	return q
}

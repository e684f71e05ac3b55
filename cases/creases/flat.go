package creases

import (
	"cmp"
	"errors"
	"math"
	"math/big"
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/quadrature/branches"
)

// flat evaluates affine branches where faces does not: in a ball or a cylinder, or
// where a number is not rational. The faces on a box about the domain are found
// exactly, numbers that are not rational being rounded to 128 bits; each is cut by
// the domain in closed form, and its energy is its area times the density, which is
// the same on all of it. It reports false where that is not so.
func (c *combination) flat(r Result, d domain, onWell bool, rel, allowed float64) (out Result, done bool, err error) {
	model := &c.set.Model
	switch {
	case model.Residual != nil && !onWell, c.s.density == nil && c.s.ev.profileErr != nil:
		return r, false, nil
	case c.s.density != nil && c.s.moves(c.s.density.node, map[string]bool{}):
		return r, false, nil
	}
	for _, n := range []formula.Node{model.Residual, model.Bending, model.Energy} {
		if c.s.density == nil && n != nil && c.s.moves(n, map[string]bool{}) {
			return r, false, nil
		}
	}
	list, exact := c.nearAffine()
	if list == nil {
		return r, false, nil
	}
	box, err := c.flatBox(d, exact)
	if err != nil {
		return r, false, err
	}
	faces, err := branches.Faces(c.ctx, list, c.s.shape.tree, box.wide)
	var same *branches.SameError
	var side *branches.BoundaryError
	switch {
	case c.ctx.Err() != nil:
		return r, true, c.ctx.Err()
	case errors.As(err, &same):
		return r, true, c.sameBranches(same)
	case errors.As(err, &side) && !slices.Contains(d.round, side.Coordinate):
		return r.refuse(c.inSide(side)), true, nil
	case err != nil:
		return r, false, nil
	}
	cuts := newCutter(d)
	var parts []cutFace
	var kept []branches.Face
	for i := range faces {
		f := &faces[i]
		e, sliver := box.along(f)
		if e != nil && !slices.Contains(d.round, e.Coordinate) {
			return r.refuse(c.inSide(e)), true, nil
		}
		if sliver {
			continue
		}
		if p, ok := cuts.cut(f); ok {
			parts, kept = append(parts, p), append(kept, *f)
		}
	}
	done, err = c.priced(parts, kept, list)
	if !done || err != nil {
		return r, done, err
	}
	groups := branches.Connected(kept, cuts.meets)
	out, err = c.finish(r, rel, allowed, func(t *tally) (string, error) {
		t.flat(parts, kept, groups)
		return "", nil
	})
	if err == nil && len(kept) == 0 {
		out.add("there is no crease in the domain")
	}
	return out, true, err
}

// priced gives every part its energy. It reports false where a density is no
// number.
func (c *combination) priced(parts []cutFace, faces []branches.Face, list []branches.Affine) (ok bool, err error) {
	density, inexact, err := c.between(0, 1).density()
	if err != nil {
		return true, err
	}
	gradients := make([][]float64, len(list))
	for k, f := range list {
		gradients[k] = floats(f.Gradient)
	}
	for i := range parts {
		p, f := &parts[i], &faces[i]
		nu := floats(f.Jump)
		length := norm(nu)
		for k := range nu {
			nu[k] /= length
		}
		v := density(p.point, gradients[f.Plus], gradients[f.Minus], nu)
		p.energy = v * p.area
		p.failure = math.Abs(v)*p.failure + (inexact+0x1p-49)*math.Abs(p.energy)
		if math.IsNaN(p.energy) || math.IsInf(p.energy, 0) || math.IsNaN(p.failure) {
			return false, nil
		}
	}
	return true, nil
}

// flat adds up the parts by pair and by sheet.
func (t *tally) flat(parts []cutFace, faces []branches.Face, groups [][]int) {
	t.nodes = len(parts)
	for at := 0; at < len(groups); {
		pair := faces[groups[at][0]].Branches
		var v share
		for ; at < len(groups) && faces[groups[at][0]].Branches == pair; at++ {
			var s Sheet
			best := 0.0
			for _, i := range groups[at] {
				p := &parts[i]
				s.Energy += p.energy
				s.Error += p.failure
				s.Area += p.area
				if s.Box == nil {
					s.Box = slices.Clone(p.box)
				}
				for k, b := range p.box {
					s.Box[k] = [2]float64{min(s.Box[k][0], b[0]), max(s.Box[k][1], b[1])}
				}
				if p.area > best {
					best, s.Point = p.area, p.point
				}
			}
			v.energy += s.Energy
			v.failure += s.Error
			v.area += s.Area
			v.sheets = append(v.sheets, s)
		}
		slices.SortStableFunc(v.sheets, func(a, b Sheet) int { return cmp.Compare(b.Area, a.Area) })
		t.add(v)
		t.pairs = append(t.pairs, Pair{
			Branches: [2]int{pair[0] + 1, pair[1] + 1}, Energy: v.energy, Error: v.failure, Area: v.area, Sheets: v.sheets,
		})
	}
}

// flatBox is a box about the domain with rational ends. Where numbers have been
// rounded wide is a little larger than it, so that a face in a side is found.
type flatBox struct {
	branches.Box
	wide  branches.Box
	exact bool
}

func (c *combination) flatBox(d domain, exact bool) (flatBox, error) {
	b := flatBox{exact: exact}
	for k := range d.box {
		ends := [2]*big.Rat{new(big.Rat).SetFloat64(d.box[k][0]), new(big.Rat).SetFloat64(d.box[k][1])}
		if !slices.Contains(d.round, k) {
			given := c.s.shape.heights
			if c.s.shape.box != nil {
				given = c.s.shape.box[k]
			}
			for i, f := range given {
				if ends[i] = c.rational(f); ends[i] != nil {
					continue
				}
				v, err := c.enclose(f)
				if err != nil {
					return b, err
				}
				ends[i], b.exact = roundedMiddle(v.Lo(), v.Hi()), false
			}
		}
		b.Lo, b.Hi = append(b.Lo, ends[0]), append(b.Hi, ends[1])
	}
	b.wide = b.Box
	if !b.exact {
		b.wide = branches.Box{}
		for k := range b.Lo {
			more := b.margin(k)
			b.wide.Lo = append(b.wide.Lo, new(big.Rat).Sub(b.Lo[k], more))
			b.wide.Hi = append(b.wide.Hi, new(big.Rat).Add(b.Hi[k], more))
		}
	}
	return b, nil
}

// margin is what rounding may move an end by, with plenty to spare.
func (b *flatBox) margin(k int) *big.Rat {
	w := new(big.Rat).Sub(b.Hi[k], b.Lo[k])
	for _, x := range []*big.Rat{b.Lo[k], b.Hi[k]} {
		w.Add(w, new(big.Rat).Abs(x))
	}
	return w.Mul(w, new(big.Rat).SetFloat64(0x1p-90))
}

// along is the side that a face lies in to rounding, nil where it lies in none. A
// sliver is what a face that meets a side at an angle has in the margin alone.
func (b *flatBox) along(f *branches.Face) (side *branches.BoundaryError, sliver bool) {
	if b.exact {
		return nil, false
	}
	for k := range b.Lo {
		more := b.margin(k)
		more.Add(more, more)
		for i, end := range []*big.Rat{b.Lo[k], b.Hi[k]} {
			away := func(x []*big.Rat) bool {
				s := new(big.Rat).Sub(x[k], end)
				return s.Abs(s).Cmp(more) > 0
			}
			if slices.ContainsFunc(f.Vertices, away) {
				continue
			}
			q := floats(f.Jump)
			up := math.Abs(q[k])
			q[k] = 0
			if norm(q) <= 0x1p-60*up {
				return &branches.BoundaryError{First: f.Branches[0], Second: f.Branches[1], Coordinate: k, High: i == 1}, false
			}
			sliver = true
		}
	}
	return nil, sliver
}

func (c *combination) sameBranches(e *branches.SameError) error {
	return fault(c.s.shape.branches[e.Second].text, "leave one of them out", "branches %d and %d are the same function%s", e.First+1, e.Second+1, c.where())
}

func floats(x []*big.Rat) []float64 {
	out := make([]float64, len(x))
	for k, v := range x {
		out[k], _ = v.Float64()
	}
	return out
}

func norm(x []float64) (n float64) {
	for _, v := range x {
		n = math.Hypot(n, v)
	}
	return n
}

package branches

import (
	"context"
	"fmt"
	"math"
	"math/big"
	"slices"
)

// sheet finds the faces of one pair of affine branches.
type sheet struct {
	ctx    context.Context
	list   []Affine
	float  [][]float64 // their coefficients, rounded: gradient, constant
	tree   *Tree
	i, j   int
	across Affine // u_i - u_j

	pieces int
	faces  []Face
}

// rounded are the coefficients of branches as floating-point numbers.
func rounded(list []Affine) [][]float64 {
	out := make([][]float64, len(list))
	for k, f := range list {
		for _, g := range f.Gradient {
			x, _ := g.Float64()
			out[k] = append(out[k], x)
		}
		x, _ := f.Constant.Float64()
		out[k] = append(out[k], x)
	}
	return out
}

// level is where a branch is compared with the pair: below, above, or equal on
// the whole plane, and then u_k - u_i = slope (u_i - u_j).
type level struct {
	known bool
	sign  int
	slope *big.Rat // where sign is 0
}

func (s *sheet) find(box Box) error {
	p := section(s.across, box)
	if p.empty() {
		return nil
	}
	levels := make([]level, len(s.list))
	levels[s.i] = level{known: true, slope: new(big.Rat)}
	levels[s.j] = level{known: true, slope: big.NewRat(-1, 1)}
	if err := s.split(p, levels); err != nil {
		return err
	}
	if k, high, ok := p.side(box); ok && len(s.faces) > 0 {
		return &BoundaryError{First: s.i, Second: s.j, Coordinate: k, High: high}
	}
	return nil
}

// split decides the tree on a polygon, and cuts it where that needs it.
func (s *sheet) split(p polygon, levels []level) error {
	for {
		for k := range levels {
			if !levels[k].known {
				if sign := s.clear(p, k); sign != 0 {
					levels[k] = level{known: true, sign: sign}
				}
			}
		}
		if s.pieces++; s.pieces > mostPieces {
			return fmt.Errorf("branches: the plane of branches %d and %d is cut more than %d times", s.i+1, s.j+1, mostPieces)
		}
		if err := s.ctx.Err(); err != nil {
			return err
		}
		v := s.value(s.tree, levels, 1)
		if v.known {
			if v.sign == 0 {
				s.keep(p, v.branch, s.value(s.tree, levels, -1).branch)
			}
			return nil
		}
		k := s.next(p, v.wants)
		apart := s.list[k].minus(s.list[s.i])
		if c, ok := apart.multiple(s.across); ok {
			levels[k] = level{known: true, slope: c}
			continue
		}
		above, below := p.cut(p.values(apart))
		up := slices.Clone(levels)
		levels[k], up[k] = level{known: true, sign: -1}, level{known: true, sign: 1}
		switch {
		case above.empty():
			p = below
		case below.empty():
			p, levels = above, up
		default:
			if err := s.split(above, up); err != nil {
				return err
			}
			p = below
		}
	}
}

// keep adds a face where u is the one branch of the pair on one side and the
// other on the other.
func (s *sheet) keep(p polygon, plus, minus int) {
	if p.empty() || !(plus == s.i && minus == s.j || plus == s.j && minus == s.i) {
		return
	}
	s.faces = append(s.faces, Face{
		Branches: [2]int{s.i, s.j}, Plus: plus, Minus: minus,
		Vertices: p.at, Jump: s.across.Gradient, Ratio: p.ratio(s.across.Gradient),
	})
}

// next is the branch among those wanted that most certainly settles the tree,
// judged by rounded numbers: one above a maximum, one below a minimum.
func (s *sheet) next(p polygon, wants []int) int {
	best, k := math.Inf(-1), wants[0]
	base := s.float[s.i]
	for _, w := range wants {
		f := s.float[w]
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, x := range p.near {
			v := f[len(x)] - base[len(x)]
			for i, c := range x {
				v += (f[i] - base[i]) * c
			}
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
		score := lo
		if s.tree.Op == Min {
			score = -hi
		}
		if score > best {
			best, k = score, w
		}
	}
	return k
}

// clear is the sign of u_k - u_i on a polygon where rounded numbers show it,
// otherwise 0. Coefficients and coordinates have a relative error of 2^-53 each,
// and so has every operation: together less than (2 dim + 6) 2^-53 of the sum of
// the absolute values, of which four times as much is allowed for. A number below
// the normal ones has an error of 2^-1075 instead; what it is multiplied by is
// less than 2^901, so that together they are below 2^-150.
func (s *sheet) clear(p polygon, k int) (sign int) {
	f, base := s.float[k], s.float[s.i]
	for _, x := range p.near {
		n := len(x)
		v, size := f[n]-base[n], math.Abs(f[n])+math.Abs(base[n])
		for i, c := range x {
			if !(math.Abs(c) < 0x1p900 && math.Abs(f[i]) < 0x1p900 && math.Abs(base[i]) < 0x1p900) {
				return 0
			}
			v += (f[i] - base[i]) * c
			size += (math.Abs(f[i]) + math.Abs(base[i])) * math.Abs(c)
		}
		one := 0
		switch slack := float64(2*n+6)*0x1p-51*size + 0x1p-150; {
		case !(size < 0x1p900):
			return 0
		case v > slack:
			one = 1
		case v < -slack:
			one = -1
		}
		if one == 0 || sign != 0 && one != sign {
			return 0
		}
		sign = one
	}
	return sign
}

// outcome is the value of a tree beside the plane: below or above the pair, or
// at it with a slope and the branch that has it; or not known before a branch
// among those it wants is.
type outcome struct {
	level
	branch int
	wants  []int
}

// value is the tree on the side where u_i - u_j has the given sign.
func (s *sheet) value(t *Tree, levels []level, side int) outcome {
	if t.Op == Leaf {
		l := levels[t.Branch]
		if !l.known {
			return outcome{wants: []int{t.Branch}}
		}
		return outcome{level: l, branch: t.Branch}
	}
	end := 1 // the sign that settles the node
	if t.Op == Min {
		end = -1
	}
	var best outcome
	var wants []int
	for i, a := range t.Args {
		v := s.value(a, levels, side)
		switch {
		case !v.known:
			wants = append(wants, v.wants...)
		case v.sign == end:
			return v
		case i == 0 || !best.known || s.compare(v.level, best.level, side)*end > 0:
			best = v
		}
	}
	if wants != nil {
		return outcome{wants: wants}
	}
	return best
}

// compare orders two known levels on a side.
func (s *sheet) compare(a, b level, side int) int {
	if a.sign != b.sign || a.sign != 0 {
		return a.sign - b.sign
	}
	return side * a.slope.Cmp(b.slope)
}

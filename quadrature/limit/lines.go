package limit

import (
	"math"
	"slices"
)

// piece is a part of a line on which one branch is active.
type piece struct {
	lo, hi float64
	branch int
}

// line is the line o + t w for t from lo to hi, whose greatest height above its
// foot is h; radially a factor t belongs to its length.
type line struct {
	o, w     vector
	lo, hi   float64
	h        float64
	radially bool
}

const (
	looks    = 7 // on a line, between which creases are looked for
	finest   = 1e-12
	onALine  = 9 // lines, between whose patterns of branches a change is looked for
	onSlices = 7
)

// pieces sets the list of pieces of a line.
func (b *ball) pieces(l *line) {
	b.cuts = append(b.cuts[:0], l.lo, l.hi)
	b.p.add(2 + len(b.set)*len(b.set))
	if b.flat {
		for k, i := range b.set {
			for _, j := range b.set[:k] {
				g := b.g[i].sub(b.g[j])
				at := b.u[i] - b.u[j] + b.delta*g.dot(l.o)
				if t := -at / (b.delta * g.dot(l.w)); t > l.lo && t < l.hi {
					b.cuts = append(b.cuts, t)
				}
			}
		}
	} else {
		b.crossings(l)
	}
	slices.Sort(b.cuts)
	b.list = b.list[:0]
	for k := 1; k < len(b.cuts); k++ {
		lo, hi := b.cuts[k-1], b.cuts[k]
		if !(hi-lo > finest) {
			continue
		}
		i := b.winner(l.o.plus(lo+(hi-lo)/2, l.w))
		if n := len(b.list); n > 0 && b.list[n-1].branch == i {
			b.list[n-1].hi = hi
			continue
		}
		b.list = append(b.list, piece{lo, hi, i})
	}
}

// winner is the active branch at y.
func (b *ball) winner(y vector) int {
	if len(b.set) == 1 {
		return b.set[0]
	}
	for _, i := range b.set {
		b.fixed[i] = b.value(i, y)
	}
	return b.p.active(b.fixed)
}

// value is branch i at y.
func (b *ball) value(i int, y vector) float64 {
	if b.affine[i] {
		return b.u[i] + b.delta*b.g[i].dot(y)
	}
	b.single[0].y = y
	b.eval(i, b.single[:])
	return b.single[0].u
}

// crossings adds the places at which two branches have the same value.
func (b *ball) crossings(l *line) {
	m := len(b.set)
	if m == 1 {
		return
	}
	if len(b.heights) < m*looks {
		b.heights = make([]float64, m*looks)
	}
	at := func(k int) float64 { return l.lo + (l.hi-l.lo)*float64(k)/(looks-1) }
	for a, i := range b.set {
		list := b.nodes[:0]
		for k := range looks {
			list = append(list, sample{y: l.o.plus(at(k), l.w)})
		}
		b.nodes = list
		if b.affine[i] {
			for k := range list {
				b.heights[a*looks+k] = b.value(i, list[k].y)
			}
			continue
		}
		b.eval(i, list)
		for k := range list {
			b.heights[a*looks+k] = list[k].u
		}
	}
	for a := range m {
		for c := range a {
			for k := range looks - 1 {
				f0 := b.heights[a*looks+k] - b.heights[c*looks+k]
				f1 := b.heights[a*looks+k+1] - b.heights[c*looks+k+1]
				if f0 < 0 != (f1 < 0) {
					b.cuts = append(b.cuts, b.root(l, b.set[a], b.set[c], at(k), at(k+1), f0, f1))
				}
			}
		}
	}
}

// root is a zero of the difference of two branches on a line (Illinois).
func (b *ball) root(l *line, i, j int, lo, hi, f0, f1 float64) float64 {
	side := 0
	for range 60 {
		t := hi - f1*(hi-lo)/(f1-f0)
		if !(t > lo && t < hi) {
			return lo + (hi-lo)/2
		}
		y := l.o.plus(t, l.w)
		f := b.value(i, y) - b.value(j, y)
		if math.Abs(f) <= 1e-14*(math.Abs(b.u[i])+b.delta*(b.g[i].norm()+b.g[j].norm())) {
			return t
		}
		if f < 0 == (f1 < 0) {
			hi, f1 = t, f
			if side == 1 {
				f0 /= 2
			}
			side = 1
		} else {
			lo, f0 = t, f
			if side == -1 {
				f1 /= 2
			}
			side = -1
		}
		if hi-lo < finest {
			break
		}
	}
	return lo + (hi-lo)/2
}

// pattern stands for the sequence of active branches on a line.
func (b *ball) pattern(l *line) uint64 {
	b.pieces(l)
	h := uint64(14695981039346656037)
	for _, p := range b.list {
		h = (h ^ uint64(p.branch+1)) * 1099511628211
	}
	return h
}

// line adds the integral along a line.
func (b *ball) line(l *line, weight float64) {
	b.pieces(l)
	for _, p := range b.list {
		if b.affine[p.branch] && !l.radially {
			b.closed(l, p, weight)
			continue
		}
		list := b.nodes[:0]
		for k, x := range b.o.line.x {
			t := p.lo + (p.hi-p.lo)*x
			w := weight * (p.hi - p.lo) * b.o.line.w[k]
			if l.radially {
				w *= t
			}
			list = append(list, sample{y: l.o.plus(t, l.w), w: w})
		}
		b.nodes = list
		b.eval(p.branch, list)
		for k := range list {
			s := &list[k]
			value, slope := b.weights(s.y)
			b.put(s.y, s.w*value, s.w*slope, s.u-b.u[b.here], s.g.sub(b.base))
		}
	}
}

// closed adds the integral of an affine branch along a piece of a line whose
// foot is o, by the kernel of the dimensions left.
func (b *ball) closed(l *line, p piece, weight float64) {
	m := b.kernel.along(l.h, p.lo, p.hi)
	full := b.g[p.branch]
	at := b.u[p.branch] - b.u[b.here] + b.delta*full.dot(l.o)
	b.sum[0] += weight * (at*m.value + b.delta*full.dot(l.w)*m.first)
	g := full.sub(b.base)
	for k := range b.n {
		b.sum[1+k] += weight * m.value * g[k]
		for a := range b.n {
			b.sum[4+3*a+k] += weight * (l.o[a]*m.slope + l.w[a]*m.moved) * g[k]
		}
	}
}

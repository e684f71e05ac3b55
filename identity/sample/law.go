package sample

import (
	"math"

	"creaseproof/entropy/program"
)

// Law draws points. Draw fills the first n lanes of the plain columns of the
// layout, n <= program.BlockSize, and leaves the columns of angles, which are
// set already, alone. Values out of the range of their column are moved into it
// afterwards. What it draws may depend only on its arguments, and it may be
// called from several goroutines at once.
type Law interface {
	Draw(s *Stream, l *Layout, cols [][]float64, n int)
}

// DefaultLaws returns the mixture used where no laws are given: independent
// values of comparable and of very different magnitudes, small fractions, and
// degenerate derivatives.
func DefaultLaws() []Law {
	return []Law{
		Gaussian{},
		HeavyTailed{},
		Lattice{},
		HeavyTailed{MinExp: -8, MaxExp: 8},
		Degenerate{Base: HeavyTailed{MinExp: -8, MaxExp: 8}},
		HeavyTailed{MinExp: -2, MaxExp: 2},
		Degenerate{Base: Lattice{}},
	}
}

// fill draws a block of points that satisfy the layout.
func (l *Layout) fill(law Law, s *Stream, cols [][]float64, n int) {
	l.fillAngles(s, cols, n)
	law.Draw(s, l, cols, n)
	l.restrict(cols, n)
}

// Gaussian draws independent normal values of mean 0 and standard deviation
// Scale; 0 means 1.
type Gaussian struct{ Scale float64 }

// Draw implements [Law].
func (g Gaussian) Draw(s *Stream, l *Layout, cols [][]float64, n int) {
	scale := g.Scale
	if scale == 0 {
		scale = 1
	}
	for _, i := range l.plain {
		x := cols[i][:n]
		for j := range x {
			x[j] = scale * s.NormFloat64()
		}
	}
}

// HeavyTailed draws independent values ±m 2^k with k in MinExp..MaxExp and m
// uniform in [1, 2), made of the raw bits of a float64. The weights of the
// exponents are multiples of 1/2048, as equal as that allows. If both bounds are
// 0 they are -30 and 30.
type HeavyTailed struct{ MinExp, MaxExp int }

// Draw implements [Law].
func (h HeavyTailed) Draw(s *Stream, l *Layout, cols [][]float64, n int) {
	if h == (HeavyTailed{}) {
		h = HeavyTailed{-30, 30}
	}
	e := exponentRange(h.MinExp, h.MaxExp)
	src := s.Source
	for _, i := range l.plain {
		x := cols[i][:n]
		for j := range x {
			x[j] = e.heavy(src.Uint64())
		}
	}
}

// Lattice draws independent small fractions: one value in four is 0, half are
// non-zero integers up to Max in magnitude, the others p/q with q in 2..5 and
// |p| <= Max. Max 0 means 4. Box columns take their ends and midpoint often.
type Lattice struct{ Max int }

// Draw implements [Law].
func (a Lattice) Draw(s *Stream, l *Layout, cols [][]float64, n int) {
	table := a.table()
	src := s.Source
	for _, i := range l.plain {
		x := cols[i][:n]
		for j := 0; j < len(x); j += 8 {
			w := src.Uint64()
			y := x[j:min(j+8, len(x))]
			for k := range y {
				y[k] = table[w&0xff]
				w >>= 8
			}
		}
		if c := &l.columns[i]; c.Kind == Box {
			latticeBox(s, c, x)
		}
	}
}

// table returns the values, each equally likely.
func (a Lattice) table() *[256]float64 {
	m := a.Max
	if m <= 0 {
		m = 4
	}
	var t [256]float64
	for i := range 192 {
		p := i/2%m + 1 // 1..m in turn
		if i%2 != 0 {
			p = -p
		}
		t[i] = float64(p)
		if i >= 128 {
			t[i] /= float64(2 + (i-128)/16)
		}
	}
	return &t
}

// latticeBox puts three lanes in eight on the ends or the midpoint of a box.
func latticeBox(s *Stream, c *Column, x []float64) {
	for j := range x {
		v := x[j]
		switch s.Source.Uint64() & 7 {
		case 0:
			v = c.Lo
		case 1:
			v = c.Hi
		case 2:
			v = float64(c.Lo/2) + float64(c.Hi/2)
		}
		if !math.IsInf(v, 0) && !math.IsNaN(v) {
			x[j] = v
		}
	}
}

// Near draws from Base, moves the points onto a set with Correct, and then
// perturbs three lanes in four by relative amounts 10^-k, k = 1..15, in about
// half of the plain columns; the other lanes stay on the set.
//
// Correct receives n points that satisfy the layout. It may be called from
// several goroutines at once; see [Newton].
type Near struct {
	Base    Law
	Correct func(cols [][]float64, n int)
}

// Draw implements [Law].
func (a Near) Draw(s *Stream, l *Layout, cols [][]float64, n int) {
	a.Base.Draw(s, l, cols, n)
	l.restrict(cols, n)
	a.Correct(cols, n)

	var size [program.BlockSize]float64
	var mask [program.BlockSize]uint64
	src := s.Source
	for j := range n {
		w := src.Uint64()
		if w&3 != 0 {
			size[j] = tenth[w>>2&0xffff*15>>16]
			mask[j] = w >> 18
		}
	}
	for b, i := range l.plain {
		x := cols[i][:n]
		bit := b % 46
		for j, v := range x {
			if mask[j]>>bit&1 != 0 {
				d := size[j] * signed(src.Uint64())
				if v == 0 {
					x[j] = d
				} else {
					x[j] = v + float64(v*d)
				}
			}
		}
	}
}

// tenth holds 10^-1 to 10^-15.
var tenth = [15]float64{1e-1, 1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10, 1e-11, 1e-12, 1e-13, 1e-14, 1e-15}

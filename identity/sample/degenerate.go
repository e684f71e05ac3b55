package sample

import (
	"math"

	"creaseproof/entropy/program"
)

// Degenerate draws from Base and then makes each lane degenerate in one of
// three ways. In six lanes of eight the derivatives of order two and more of
// each unknown become those of a function of one variable a·x,
//
//	u_α = s_k a^α,  |α| = k,
//
// so that all minors of order two of the Hessian vanish; one in eight of the a_i
// is 0. In one lane of eight all these derivatives are 0; in one, every plain
// column is 0 with probability 1/2.
//
// The a_i and s_k have so few bits that the products are exact: the float64
// minors of order two are exactly 0, too, up to order 8 of derivatives.
type Degenerate struct{ Base Law }

// Draw implements [Law].
func (d Degenerate) Draw(s *Stream, l *Layout, cols [][]float64, n int) {
	d.Base.Draw(s, l, cols, n)
	src := s.Source
	var mode [program.BlockSize]uint8
	for j := 0; j < n; j += 8 {
		w := src.Uint64()
		for k := j; k < min(j+8, n); k++ {
			mode[k] = uint8(w & 7)
			w >>= 8
		}
	}
	for g := range l.groups {
		l.groups[g].rankOne(s, cols, mode[:n])
	}
	for j := range n {
		if mode[j] != modeSparse {
			continue
		}
		var w uint64
		for k, i := range l.plain {
			if k&63 == 0 {
				w = src.Uint64()
			}
			if w&1 != 0 {
				cols[i][j] = 0
			}
			w >>= 1
		}
	}
}

const (
	modeZero = iota
	modeSparse
	// higher modes are rank one
)

// rankOne overwrites the columns of the group in the lanes whose mode asks for
// it. If the sign of a column is restricted, all factors are chosen non-zero and
// of the sign of the pure derivatives, so that restricting the columns later
// changes nothing.
func (g *group) rankOne(s *Stream, cols [][]float64, mode []uint8) {
	src := s.Source
	bits := max(53/(g.maxOrder+1), 2)
	e := exponentRange(-8, 8)
	a := make([]float64, g.dim)
	scale := make([]float64, g.maxOrder+1)
	for j, m := range mode {
		if m == modeSparse {
			continue
		}
		zero := m == modeZero && !g.definite
		for i := range a {
			w := src.Uint64()
			a[i] = e.short(w, bits)
			if g.definite {
				a[i] = math.Abs(a[i])
			} else if w&7 == 0 {
				a[i] = 0
			}
		}
		for k := 2; k <= g.maxOrder; k++ {
			scale[k] = e.short(src.Uint64(), bits)
			if g.definite {
				scale[k] = math.Copysign(scale[k], g.sign)
			}
		}
		for c, i := range g.columns {
			if zero {
				cols[i][j] = 0
				continue
			}
			v := scale[g.orders[c]]
			for i, p := range g.index[c] {
				for range p {
					v *= a[i]
				}
			}
			cols[i][j] = v
		}
	}
}

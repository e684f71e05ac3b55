package algebra

import (
	"math/bits"
	"slices"
)

// layout says how the exponents of a monomial are packed in words. Field 0 is
// the total degree, field i the exponent of the i-th indeterminate; fields fill
// each word from its high end, so that comparing words in turn compares
// monomials in graded lexicographic order. The top bit of each field is kept
// clear: adding packed words multiplies monomials, and one subtraction per word
// tests divisibility.
type layout struct {
	bits  int // of a field
	per   int // fields in a word
	words int
}

func layoutFor(vars, degree int) layout {
	b := 32
	switch {
	case degree < 1<<3:
		b = 4
	case degree < 1<<5:
		b = 6
	case degree < 1<<7:
		b = 8
	case degree < 1<<9:
		b = 10
	case degree < 1<<11:
		b = 12
	case degree < 1<<15:
		b = 16
	}
	per := 64 / b
	return layout{bits: b, per: per, words: (vars + per) / per}
}

// place returns word and shift of field i.
func (l layout) place(i int) (word int, shift uint) {
	return i / l.per, uint((l.per - 1 - i%l.per) * l.bits)
}

func (l layout) mask() uint64 { return 1<<l.bits - 1 }

// guard has the top bit of every field set.
func (l layout) guard() uint64 {
	g := uint64(0)
	for i := range l.per {
		g |= 1 << (i*l.bits + l.bits - 1)
	}
	return g
}

func (l layout) field(term []uint64, i int) int {
	w, s := l.place(i)
	return int(term[w] >> s & l.mask())
}

func (l layout) put(term []uint64, i, e int) {
	w, s := l.place(i)
	term[w] |= uint64(e) << s
}

// compare orders packed terms of the same layout.
func compare(a, b []uint64) int {
	for i, x := range a {
		if y := b[i]; x != y {
			if x < y {
				return -1
			}
			return 1
		}
	}
	return 0
}

// divides reports whether a divides b, with the guard g of their layout.
func divides(a, b []uint64, g uint64) bool {
	for i, x := range a {
		if ((b[i]|g)-x)&g != g {
			return false
		}
	}
	return true
}

// union merges two sorted lists.
func union(a, b []Var) []Var {
	if len(b) == 0 || slices.Equal(a, b) {
		return a
	}
	if len(a) == 0 {
		return b
	}
	out := make([]Var, 0, len(a)+len(b))
	for len(a) > 0 && len(b) > 0 {
		switch {
		case a[0] < b[0]:
			out, a = append(out, a[0]), a[1:]
		case a[0] > b[0]:
			out, b = append(out, b[0]), b[1:]
		default:
			out, a, b = append(out, a[0]), a[1:], b[1:]
		}
	}
	return append(append(out, a...), b...)
}

// repack moves packed terms over the indeterminates from to those of to. An
// indeterminate missing from to must not occur.
func repack(exps []uint64, from []Var, lf layout, to []Var, lt layout) []uint64 {
	if lf == lt && slices.Equal(from, to) {
		return exps
	}
	n := len(exps) / lf.words
	out := make([]uint64, n*lt.words)
	fields := make([]int, len(from)+1) // new number of each field, -1 where it is dropped
	j := 0
	for i, v := range from {
		for j < len(to) && to[j] < v {
			j++
		}
		fields[i+1] = -1
		if j < len(to) && to[j] == v {
			fields[i+1] = j + 1
		}
	}
	if len(from) <= 32 {
		repackDense(out, exps, lf, lt, fields)
	} else {
		repackSparse(out, exps, lf, lt, fields)
	}
	return out
}

// repackDense moves one field after the other.
func repackDense(out, exps []uint64, lf, lt layout, fields []int) {
	m := lf.mask()
	for i, k := range fields {
		if k < 0 {
			continue
		}
		wf, sf := lf.place(i)
		wt, st := lt.place(k)
		for a, b := wf, wt; a < len(exps); a, b = a+lf.words, b+lt.words {
			out[b] |= exps[a] >> sf & m << st
		}
	}
}

// repackSparse moves the fields that are not zero.
func repackSparse(out, exps []uint64, lf, lt layout, fields []int) {
	m := lf.mask()
	for a, b := 0, 0; a < len(exps); a, b = a+lf.words, b+lt.words {
		for w, x := range exps[a : a+lf.words] {
			for x != 0 {
				right := bits.TrailingZeros64(x) / lf.bits
				e := x >> (right * lf.bits) & m
				x &^= m << (right * lf.bits)
				wt, st := lt.place(fields[w*lf.per+lf.per-1-right])
				out[b+wt] |= e << st
			}
		}
	}
}

package algebra

import (
	"math/bits"
	"slices"
)

// index is an open-addressing hash table from packed terms to consecutive
// numbers.
type index struct {
	words int
	keys  []uint64
	table []int32 // number plus one; 0 is empty
	shift uint
}

const golden = 0x9E3779B97F4A7C15

// init makes room for about n terms.
func newIndex(words, n int) *index {
	b := max(bits.Len(uint(2*n)), 4)
	return &index{
		words: words,
		keys:  make([]uint64, 0, n*words),
		table: make([]int32, 1<<b),
		shift: uint(64 - b),
	}
}

func (x *index) len() int { return len(x.keys) / x.words }

// find1 is find for terms of one word.
func (x *index) find1(key uint64) int {
	mask := uint64(len(x.table) - 1)
	for h := key * golden >> x.shift; ; h = (h + 1) & mask {
		n := x.table[h]
		if n == 0 {
			x.keys = append(x.keys, key)
			x.table[h] = int32(len(x.keys))
			if 2*len(x.keys) > len(x.table) {
				x.grow()
			}
			return len(x.keys) - 1
		}
		if x.keys[n-1] == key {
			return int(n - 1)
		}
	}
}

func hash(key []uint64) uint64 {
	h := uint64(0)
	for _, k := range key {
		h = bits.RotateLeft64((h^k)*golden, 29)
	}
	return h * golden
}

// find returns the number of a term, the next free one where it is new.
func (x *index) find(key []uint64) int {
	if x.words == 1 {
		return x.find1(key[0])
	}
	mask := uint64(len(x.table) - 1)
	for h := hash(key) >> x.shift; ; h = (h + 1) & mask {
		n := int(x.table[h])
		if n == 0 {
			x.keys = append(x.keys, key...)
			n = x.len()
			x.table[h] = int32(n)
			if 2*n > len(x.table) {
				x.grow()
			}
			return n - 1
		}
		if compare(x.keys[(n-1)*x.words:n*x.words], key) == 0 {
			return n - 1
		}
	}
}

func (x *index) grow() {
	x.table = make([]int32, 2*len(x.table))
	x.shift--
	mask := uint64(len(x.table) - 1)
	for i := range x.len() {
		var h uint64
		if x.words == 1 {
			h = x.keys[i] * golden >> x.shift
		} else {
			h = hash(x.keys[i*x.words:(i+1)*x.words]) >> x.shift
		}
		for x.table[h] != 0 {
			h = (h + 1) & mask
		}
		x.table[h] = int32(i + 1)
	}
}

// sorted returns the numbers of the terms, larger terms first.
func (x *index) sorted() []int32 {
	order := make([]int32, x.len())
	if x.words > 1 {
		for i := range order {
			order[i] = int32(i)
		}
		slices.SortFunc(order, func(i, j int32) int {
			w := int32(x.words)
			return compare(x.keys[j*w:(j+1)*w], x.keys[i*w:(i+1)*w])
		})
		return order
	}
	type entry struct {
		key uint64
		n   int32
	}
	es := make([]entry, len(order))
	for i, k := range x.keys {
		es[i] = entry{k, int32(i)}
	}
	slices.SortFunc(es, func(a, b entry) int {
		if a.key > b.key {
			return -1
		}
		return 1
	})
	for i, e := range es {
		order[i] = e.n
	}
	return order
}

// collector sums terms that come in any order.
type collector struct {
	vars []Var
	lay  layout
	x    *index
	sums []Rat
	over bool
}

func newCollector(vars []Var, degree int) *collector {
	lay := layoutFor(len(vars), degree)
	return &collector{vars: vars, lay: lay, x: newIndex(lay.words, 16)}
}

func (c *collector) add(term []uint64, coef Rat) {
	if c.over || coef.IsZero() {
		return
	}
	n := c.x.find(term)
	if n == len(c.sums) {
		c.over = n >= MaxTerms || len(c.x.keys) > MaxWords
		c.sums = append(c.sums, coef)
		return
	}
	c.sums[n] = c.sums[n].Add(coef)
}

func (c *collector) poly() Poly {
	if c.over {
		return poison(errTerms)
	}
	w := c.lay.words
	exps := make([]uint64, 0, len(c.x.keys))
	coefs := make([]Rat, 0, len(c.sums))
	for _, n := range c.x.sorted() {
		if s := c.sums[n]; !s.IsZero() {
			exps = append(exps, c.x.keys[int(n)*w:(int(n)+1)*w]...)
			coefs = append(coefs, s)
		}
	}
	return canonical(c.vars, c.lay, exps, coefs)
}

package algebra

import (
	"math"
	"math/big"
	"math/bits"
)

// integers is a list of coefficients over one denominator: coefficient i is
// small[i]/den, or large[i]/den where the numerators do not fit an int64.
type integers struct {
	small []int64
	large []*big.Int
	den   *big.Int // nil is 1
	bits  int      // of the largest numerator
}

// clearDenominators brings coefficients to a common denominator; false where that would
// exceed MaxBits.
func clearDenominators(coefs []Rat) (integers, bool) {
	l, fits := int64(1), true
	top := uint64(0)
	for i := range coefs {
		c := &coefs[i]
		if c.b != nil {
			fits = false
			break
		}
		if d := c.dm + 1; d != 1 && l%d != 0 {
			if l, fits = mul64(l, d/int64(gcd64(uint64(l), uint64(d)))); !fits {
				break
			}
		}
		top |= abs64(c.n)
	}
	if fits {
		out := integers{small: make([]int64, len(coefs))}
		if l == 1 {
			for i := range coefs {
				out.small[i] = coefs[i].n
			}
			out.bits = bits.Len64(top)
			return out, true
		}
		top = 0
		for i := range coefs {
			n, ok := mul64(coefs[i].n, l/(coefs[i].dm+1))
			if !ok {
				fits = false
				break
			}
			out.small[i] = n
			top |= abs64(n)
		}
		if fits {
			out.den = big.NewInt(l)
			out.bits = bits.Len64(top)
			return out, true
		}
	}
	return clearLarge(coefs)
}

func clearLarge(coefs []Rat) (integers, bool) {
	den := big.NewInt(1)
	var g big.Int
	for _, c := range coefs {
		d := c.view().Denom()
		if g.GCD(nil, nil, den, d); g.Cmp(d) != 0 {
			den.Mul(den, g.Quo(d, &g))
		}
		if den.BitLen() > MaxBits {
			return integers{}, false
		}
	}
	if len(coefs)*(den.BitLen()/64) > MaxProducts {
		return integers{}, false
	}
	out := integers{large: make([]*big.Int, len(coefs)), den: den}
	for i, c := range coefs {
		b := c.view()
		n := new(big.Int).Quo(den, b.Denom())
		out.large[i] = n.Mul(n, b.Num())
		out.bits = max(out.bits, n.BitLen())
	}
	return out, true
}

func (x integers) widened() []*big.Int {
	if x.large != nil {
		return x.large
	}
	out := make([]*big.Int, len(x.small))
	for i, n := range x.small {
		out[i] = big.NewInt(n)
	}
	return out
}

// product is the state of one multiplication; a is the shorter factor.
type product struct {
	lay    layout
	ea, eb []uint64
	a, b   integers
	den    *big.Int // of the result; nil is 1
}

// Mul returns p q.
func (p Poly) Mul(q Poly) Poly {
	if e, ok := bad(p, q); ok {
		return e
	}
	if p.r == nil || q.r == nil {
		return Poly{}
	}
	a, b := p.r, q.r
	if len(a.coefs) > len(b.coefs) {
		a, b = b, a
	}
	degree := a.degree() + b.degree()
	if degree > MaxExponent {
		return poison(errExponent)
	}
	if len(a.coefs) == 1 {
		if len(a.vars) == 0 {
			return Poly{b}.Scale(a.coefs[0])
		}
		return mulTerm(a, b, degree)
	}
	n := float64(len(a.coefs)) * float64(len(b.coefs))
	if n > MaxProducts {
		return poison(errProducts)
	}
	vars, lay, ea, eb, ok := align(a, b, degree)
	if !ok {
		return poison(errWords)
	}
	ia, ok1 := clearDenominators(a.coefs)
	ib, ok2 := clearDenominators(b.coefs)
	if !ok1 || !ok2 || ia.bits+ib.bits > 4*MaxBits {
		return poison(errBits)
	}
	m := product{lay: lay, ea: ea, eb: eb, a: ia, b: ib, den: ia.den}
	if m.den == nil {
		m.den = ib.den
	} else if ib.den != nil {
		m.den = new(big.Int).Mul(ia.den, ib.den)
	}
	size := ia.bits + ib.bits + bits.Len(uint(len(a.coefs)))
	var exps []uint64
	var coefs []Rat
	switch narrow := ia.large == nil && ib.large == nil; {
	case narrow && size < 63 && lay.words == 1 && n <= mergeProducts:
		exps, coefs = m.merge()
	case narrow && size < 63:
		exps, coefs, ok = m.hash64()
	case narrow && size < 127:
		exps, coefs, ok = m.hash128()
	default:
		wa, wb := float64(ia.bits/64+1), float64(ib.bits/64+1)
		if n*(4+(wa+wb)/8+wa*wb/16) > MaxProducts {
			return poison(errProducts)
		}
		exps, coefs, ok = m.hashBig()
	}
	if !ok {
		return poison(errTerms)
	}
	for i := range coefs {
		if coefs[i].b != nil && coefs[i].BitLen() > MaxBits {
			return poison(errBits)
		}
	}
	// No indeterminate of a factor can cancel, nor can the degree.
	return Poly{&rep{vars: vars, lay: lay, exps: exps, coefs: coefs}}
}

// mulTerm multiplies b by the single term of a.
func mulTerm(a, b *rep, degree int) Poly {
	vars, lay, ea, eb, ok := align(a, b, degree)
	if !ok {
		return poison(errWords)
	}
	exps := make([]uint64, len(eb))
	for i := 0; i < len(eb); i += lay.words {
		for w, x := range ea {
			exps[i+w] = eb[i+w] + x
		}
	}
	c := a.coefs[0]
	if c.IsOne() {
		return Poly{&rep{vars: vars, lay: lay, exps: exps, coefs: b.coefs}}
	}
	return Poly{&rep{vars: vars, lay: lay, exps: exps, coefs: b.coefs}}.Scale(c)
}

// over returns the coefficient n/den.
func (m *product) over(n int64) Rat {
	switch {
	case m.den == nil:
		return Int(n)
	case m.den.IsInt64():
		return Frac64(n, m.den.Int64())
	}
	return demote(new(big.Rat).SetFrac(big.NewInt(n), m.den))
}

func (m *product) overBig(n *big.Int) Rat {
	if m.den == nil {
		return demote(new(big.Rat).SetInt(n))
	}
	return demote(new(big.Rat).SetFrac(n, m.den))
}

// mergeProducts is the number of products of terms up to which merging sorted
// rows beats the hash table.
const mergeProducts = 1 << 11

type product64 struct {
	key uint64
	sum int64
}

// merge forms one sorted row for each term of a and merges them pairwise.
func (m *product) merge() ([]uint64, []Rat) {
	na, nb := len(m.ea), len(m.eb)
	var space [2][128]product64
	from, to := space[0][:0], space[1][:0]
	if na*nb > len(space[0]) {
		from, to = make([]product64, 0, na*nb), make([]product64, 0, na*nb)
	}
	var ends [64]int
	rows := ends[:0]
	for i, x := range m.ea {
		c := m.a.small[i]
		for j, y := range m.eb {
			from = append(from, product64{x + y, c * m.b.small[j]})
		}
		rows = append(rows, len(from))
	}
	for len(rows) > 1 {
		to = to[:0]
		start, out := 0, rows[:0]
		for k := 0; k < len(rows); k += 2 {
			if k+1 == len(rows) {
				to = append(to, from[start:rows[k]]...)
			} else {
				i, j, end := start, rows[k], rows[k+1]
				mid := j
				for i < mid && j < end {
					x, y := &from[i], &from[j]
					switch {
					case x.key > y.key:
						to = append(to, *x)
						i++
					case x.key < y.key:
						to = append(to, *y)
						j++
					default:
						if s := x.sum + y.sum; s != 0 {
							to = append(to, product64{x.key, s})
						}
						i, j = i+1, j+1
					}
				}
				to = append(append(to, from[i:mid]...), from[j:end]...)
				start = end
			}
			out = append(out, len(to))
		}
		rows = out
		from, to = to, from
	}
	exps := make([]uint64, len(from))
	coefs := make([]Rat, len(from))
	for i, x := range from {
		exps[i], coefs[i] = x.key, m.over(x.sum)
	}
	return exps, coefs
}

// each calls add for every pair of terms with the number of their product in
// the table x; it stops, false, when there are more than MaxTerms.
func (m *product) each(x *index, add func(n, i, j int)) bool {
	w := m.lay.words
	key := make([]uint64, w)
	for i := 0; i < len(m.ea); i += w {
		for j := 0; j < len(m.eb); j += w {
			for k := range key {
				key[k] = m.ea[i+k] + m.eb[j+k]
			}
			add(x.find(key), i/w, j/w)
		}
		if x.len() > MaxTerms || len(x.keys) > MaxWords {
			return false
		}
	}
	return true
}

// gather sorts the table and drops the terms that cancelled.
func (m *product) gather(x *index, coef func(n int32) Rat) ([]uint64, []Rat) {
	w := m.lay.words
	exps := make([]uint64, 0, len(x.keys))
	coefs := make([]Rat, 0, x.len())
	for _, n := range x.sorted() {
		if c := coef(n); !c.IsZero() {
			exps = append(exps, x.keys[int(n)*w:(int(n)+1)*w]...)
			coefs = append(coefs, c)
		}
	}
	return exps, coefs
}

func (m *product) table() *index {
	return newIndex(m.lay.words, 2*(len(m.ea)+len(m.eb))/m.lay.words)
}

func (m *product) hash64() ([]uint64, []Rat, bool) {
	x := m.table()
	var sums []int64
	if m.lay.words == 1 {
		for i, ka := range m.ea {
			c := m.a.small[i]
			for j, kb := range m.eb {
				n := x.find1(ka + kb)
				if n == len(sums) {
					sums = append(sums, 0)
				}
				sums[n] += c * m.b.small[j]
			}
			if x.len() > MaxTerms {
				return nil, nil, false
			}
		}
	} else if !m.each(x, func(n, i, j int) {
		if n == len(sums) {
			sums = append(sums, 0)
		}
		sums[n] += m.a.small[i] * m.b.small[j]
	}) {
		return nil, nil, false
	}
	exps, coefs := m.gather(x, func(n int32) Rat { return m.over(sums[n]) })
	return exps, coefs, true
}

// hash128 sums in two's complement of two words.
func (m *product) hash128() ([]uint64, []Rat, bool) {
	type wide struct{ hi, lo uint64 }
	x := m.table()
	var sums []wide
	ok := m.each(x, func(n, i, j int) {
		if n == len(sums) {
			sums = append(sums, wide{})
		}
		u, v := m.a.small[i], m.b.small[j]
		hi, lo := bits.Mul64(abs64(u), abs64(v))
		s := &sums[n]
		var c uint64
		if (u < 0) != (v < 0) {
			s.lo, c = bits.Sub64(s.lo, lo, 0)
			s.hi, _ = bits.Sub64(s.hi, hi, c)
		} else {
			s.lo, c = bits.Add64(s.lo, lo, 0)
			s.hi, _ = bits.Add64(s.hi, hi, c)
		}
	})
	if !ok {
		return nil, nil, false
	}
	exps, coefs := m.gather(x, func(n int32) Rat {
		s := sums[n]
		neg := int64(s.hi) < 0
		if neg {
			var c uint64
			s.lo, c = bits.Sub64(0, s.lo, 0)
			s.hi, _ = bits.Sub64(0, s.hi, c)
		}
		if s.hi == 0 && s.lo <= math.MaxInt64 {
			if neg {
				return m.over(-int64(s.lo))
			}
			return m.over(int64(s.lo))
		}
		b := new(big.Int).SetUint64(s.hi)
		b.Lsh(b, 64).Or(b, new(big.Int).SetUint64(s.lo))
		if neg {
			b.Neg(b)
		}
		return m.overBig(b)
	})
	return exps, coefs, true
}

func (m *product) hashBig() ([]uint64, []Rat, bool) {
	x := m.table()
	var sums []*big.Int
	var t big.Int
	a, b := m.a.widened(), m.b.widened()
	ok := m.each(x, func(n, i, j int) {
		if n == len(sums) {
			sums = append(sums, new(big.Int).Mul(a[i], b[j]))
			return
		}
		sums[n].Add(sums[n], t.Mul(a[i], b[j]))
	})
	if !ok {
		return nil, nil, false
	}
	exps, coefs := m.gather(x, func(n int32) Rat { return m.overBig(sums[n]) })
	return exps, coefs, true
}

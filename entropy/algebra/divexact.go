package algebra

// divisionStep is the weight of one term product of a division against one of a
// product of polynomials.
const divisionStep = 2

// DivExact returns the quotient of p by q where q divides p. The quotient is
// poisoned, and ok false, where p or q is poisoned or the division reached a
// limit; where q does not divide p, or is 0, it is 0 and ok false.
//
// The method is division with a heap of the products still to be subtracted
// (S. C. Johnson, Sparse polynomial arithmetic, 1974), in integers: by the lemma
// of Gauss the quotient of primitive polynomials has integer coefficients.
func (p Poly) DivExact(q Poly) (quo Poly, ok bool) {
	if e, lost := bad(p, q); lost {
		return e, false
	}
	if q.r == nil {
		return Poly{}, false
	}
	if p.r == nil {
		return Poly{}, true
	}
	a, b := p.r, q.r
	if a.degree() < b.degree() || len(b.vars) > len(a.vars) {
		return Poly{}, false
	}
	vars, lay, ea, eb, fits := align(a, b, a.degree())
	if !fits {
		return poison(errWords), false
	}
	if len(vars) > len(a.vars) {
		return Poly{}, false
	}
	w, g := lay.words, lay.guard()
	if !divides(eb[:w], ea[:w], g) || !divides(eb[len(eb)-w:], ea[len(ea)-w:], g) {
		return Poly{}, false
	}
	if len(b.coefs) == 1 {
		exps := make([]uint64, len(ea))
		for i := 0; i < len(ea); i += w {
			if !divides(eb, ea[i:i+w], g) {
				return Poly{}, false
			}
			for k, x := range eb {
				exps[i+k] = ea[i+k] - x
			}
		}
		inv, _ := b.coefs[0].Inv()
		quo = canonical(vars, lay, exps, a.coefs).Scale(inv)
		return quo, quo.Err() == nil
	}
	ca, ok1 := content(a.coefs)
	cb, ok2 := content(b.coefs)
	if !ok1 || !ok2 {
		return poison(errBits), false
	}
	scale, _ := ca.Quo(cb)
	d := division{w: w, guard: g, a: ea, b: eb}
	var quotient []Rat
	divided := overflow
	if na, nb := small64(a.coefs, ca), small64(b.coefs, cb); na != nil && nb != nil {
		n := &numbers64{a: na, b: nb}
		if divided = d.run(n); divided == exact {
			quotient = make([]Rat, len(n.q))
			for i, c := range n.q {
				quotient[i] = Int(c)
			}
		}
	}
	if divided == overflow {
		n := newNumbersBig(a.coefs, ca, b.coefs, cb)
		if divided = d.run(n); divided == exact {
			quotient = n.quotient()
		}
	}
	switch divided {
	case inexact:
		return Poly{}, false
	case tooLong:
		return poison(errWork), false
	case tooLarge:
		return poison(errTerms), false
	}
	quo = canonical(vars, lay, d.q, quotient).Scale(scale)
	return quo, quo.Err() == nil
}

type outcome int

const (
	exact outcome = iota
	inexact
	overflow // of machine integers
	tooLong
	tooLarge
)

// pending is the product of quotient term i and divisor term j; key is the first
// word of its monomial.
type pending struct {
	key  uint64
	i, j int32
}

// division divides packed terms a by b, with the arithmetic of the coefficients
// left to numbers.
type division struct {
	w       int
	guard   uint64
	a, b, q []uint64
	heap    []pending
}

// numbers holds the coefficients of a division and the one being formed.
type numbers interface {
	start(k int)                   // takes coefficient k of the dividend, 0 where k < 0
	subtract(i, j int) bool        // subtracts a product; false on overflow
	isZero() bool                  // of the coefficient being formed
	divide() (cost int, o outcome) // divides it by the leading one of the divisor
	lens() (a, b int)
}

func (d *division) run(n numbers) outcome {
	w := d.w
	d.q, d.heap = nil, d.heap[:0]
	la, lb := n.lens()
	work, quotients := 0, 0
	m := make([]uint64, w)
	for k := 0; k < la || len(d.heap) > 0; {
		if k < la {
			copy(m, d.a[k*w:(k+1)*w])
		}
		if len(d.heap) > 0 && (k == la || d.against(m) > 0) {
			d.top(m)
		}
		if k < la && compare(d.a[k*w:(k+1)*w], m) == 0 {
			n.start(k)
			k++
		} else {
			n.start(-1)
		}
		for len(d.heap) > 0 && d.against(m) == 0 {
			t := d.heap[0]
			if !n.subtract(int(t.i), int(t.j)) {
				return overflow
			}
			work += divisionStep
			if t.j++; int(t.j) < lb {
				t.key = d.q[int(t.i)*w] + d.b[int(t.j)*w]
				d.heap[0] = t
				d.down()
			} else {
				d.pop()
			}
		}
		if n.isZero() {
			continue
		}
		if !divides(d.b[:w], m, d.guard) {
			return inexact
		}
		if quotients == MaxTerms || len(d.q) > MaxWords {
			return tooLarge
		}
		cost, o := n.divide()
		if o != exact {
			return o
		}
		if work += cost * lb; work > MaxProducts {
			return tooLong
		}
		for i, x := range m {
			d.q = append(d.q, x-d.b[i])
		}
		d.push(pending{d.q[quotients*w] + d.b[w], int32(quotients), 1})
		quotients++
	}
	return exact
}

// against compares the largest pending product with m.
func (d *division) against(m []uint64) int {
	t := &d.heap[0]
	if t.key != m[0] {
		if t.key < m[0] {
			return -1
		}
		return 1
	}
	i, j := int(t.i)*d.w, int(t.j)*d.w
	for k := 1; k < len(m); k++ {
		if x := d.q[i+k] + d.b[j+k]; x != m[k] {
			if x < m[k] {
				return -1
			}
			return 1
		}
	}
	return 0
}

func (d *division) top(m []uint64) {
	t := d.heap[0]
	for k := range m {
		m[k] = d.q[int(t.i)*d.w+k] + d.b[int(t.j)*d.w+k]
	}
}

// less puts larger monomials first.
func (d *division) less(s, t *pending) bool {
	if s.key != t.key || d.w == 1 {
		return s.key > t.key
	}
	for k := 1; k < d.w; k++ {
		x := d.q[int(s.i)*d.w+k] + d.b[int(s.j)*d.w+k]
		y := d.q[int(t.i)*d.w+k] + d.b[int(t.j)*d.w+k]
		if x != y {
			return x > y
		}
	}
	return false
}

func (d *division) push(t pending) {
	d.heap = append(d.heap, t)
	h := d.heap
	for c := len(h) - 1; c > 0; {
		p := (c - 1) / 2
		if !d.less(&h[c], &h[p]) {
			return
		}
		h[c], h[p] = h[p], h[c]
		c = p
	}
}

func (d *division) pop() {
	n := len(d.heap) - 1
	d.heap[0] = d.heap[n]
	d.heap = d.heap[:n]
	d.down()
}

func (d *division) down() {
	h := d.heap
	for p := 0; ; {
		c := 2*p + 1
		if c >= len(h) {
			return
		}
		if c+1 < len(h) && d.less(&h[c+1], &h[c]) {
			c++
		}
		if !d.less(&h[c], &h[p]) {
			return
		}
		h[c], h[p] = h[p], h[c]
		p = c
	}
}

package algebra

// DivExact returns the quotient of p by q where q divides p. The quotient is
// poisoned, and ok false, where p or q is poisoned or the division reached a
// limit; where q does not divide p, or is 0, it is 0 and ok false.
//
// The method is division with a heap of the products still to be subtracted
// (S. C. Johnson, Sparse polynomial arithmetic, 1974).
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
	inv, _ := b.coefs[0].Inv()
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
		quo = canonical(vars, lay, exps, a.coefs).Scale(inv)
		return quo, quo.Err() == nil
	}
	d := division{w: w, b: eb}
	var rest Rat
	work := 0
	m := make([]uint64, w)
	for k := 0; k < len(a.coefs) || len(d.heap) > 0; {
		if k < len(a.coefs) {
			copy(m, ea[k*w:(k+1)*w])
		}
		if len(d.heap) > 0 && (k == len(a.coefs) || d.against(m) > 0) {
			d.top(m)
		}
		rest = Rat{}
		if k < len(a.coefs) && compare(ea[k*w:(k+1)*w], m) == 0 {
			rest = a.coefs[k]
			k++
		}
		for len(d.heap) > 0 && d.against(m) == 0 {
			t := d.heap[0]
			rest = rest.Sub(d.coefs[t.i].Mul(b.coefs[t.j]))
			work++
			if int(t.j)+1 < len(b.coefs) {
				d.heap[0].j++
				d.down()
			} else {
				d.pop()
			}
		}
		if rest.IsZero() {
			continue
		}
		if !divides(eb[:w], m, g) {
			return Poly{}, false
		}
		if len(d.coefs) == MaxTerms || len(d.q) > MaxWords {
			return poison(errTerms), false
		}
		rest = rest.Mul(inv)
		if rest.b != nil {
			work += rest.BitLen() / 8 * len(b.coefs)
		}
		if work > MaxProducts {
			return poison(errWork), false
		}
		for n, x := range m {
			d.q = append(d.q, x-eb[n])
		}
		d.coefs = append(d.coefs, rest)
		d.push(pending{int32(len(d.coefs) - 1), 1})
	}
	quo = canonical(vars, lay, d.q, d.coefs)
	return quo, quo.Err() == nil
}

// pending is the product of quotient term i and divisor term j.
type pending struct{ i, j int32 }

type division struct {
	w     int
	q, b  []uint64
	coefs []Rat // of the quotient
	heap  []pending
}

// against compares the largest pending product with m.
func (d *division) against(m []uint64) int {
	t := d.heap[0]
	i, j := int(t.i)*d.w, int(t.j)*d.w
	for k, y := range m {
		if x := d.q[i+k] + d.b[j+k]; x != y {
			if x < y {
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

func (d *division) less(s, t pending) bool {
	for k := range d.w {
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
		if !d.less(h[c], h[p]) {
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
		if c+1 < len(h) && d.less(h[c+1], h[c]) {
			c++
		}
		if !d.less(h[c], h[p]) {
			return
		}
		h[c], h[p] = h[p], h[c]
		p = c
	}
}

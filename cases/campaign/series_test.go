package campaign

import "math/big"

const maxVariables = 8

// mono is a monomial of the displacements of the coordinates; the last place
// is the size of a variation.
type mono [maxVariables]int8

func (m mono) degree() int {
	d := 0
	for _, e := range m {
		d += int(e)
	}
	return d
}

// series is a power series cut above a total degree. The constant term stands
// apart: most series are constants.
type series struct {
	order int
	c     number
	rest  map[mono]number
}

func constant(order int, c number) series { return series{order: order, c: c} }

func (s *series) accumulate(m mono, x number) {
	switch d := m.degree(); {
	case d > s.order || x.isZero():
	case d == 0:
		s.c = s.c.add(x)
	default:
		if s.rest == nil {
			s.rest = map[mono]number{}
		}
		if old, ok := s.rest[m]; ok {
			x = x.add(old)
		}
		s.rest[m] = x
	}
}

func (s series) add(t series) series {
	out := series{order: s.order, c: s.c.add(t.c)}
	for m, x := range s.rest {
		out.accumulate(m, x)
	}
	for m, x := range t.rest {
		out.accumulate(m, x)
	}
	return out
}

func (s series) scale(k number) series {
	out := series{order: s.order, c: s.c.mul(k)}
	for m, x := range s.rest {
		out.accumulate(m, x.mul(k))
	}
	return out
}

func (s series) mul(t series) series {
	out := series{order: s.order, c: s.c.mul(t.c)}
	for m, x := range s.rest {
		out.accumulate(m, x.mul(t.c))
	}
	for n, y := range t.rest {
		out.accumulate(n, y.mul(s.c))
		dn := n.degree()
		for m, x := range s.rest {
			if m.degree()+dn > s.order {
				continue
			}
			k := m
			for i, e := range n {
				k[i] += e
			}
			out.accumulate(k, x.mul(y))
		}
	}
	return out
}

// compose is sum of coeff[i] r^i, where r is s without its constant term.
func (s series) compose(coeff func(i int) number) series {
	r := series{order: s.order, c: zero, rest: s.rest}
	out, power := constant(s.order, coeff(0)), constant(s.order, one)
	if len(s.rest) == 0 {
		return out
	}
	for i := 1; i <= s.order; i++ {
		power = power.mul(r)
		out = out.add(power.scale(coeff(i)))
	}
	return out
}

func (s series) inverse() (series, error) {
	inv, err := s.c.inverse()
	if err != nil {
		return s, err
	}
	c := inv
	return s.compose(func(i int) number {
		if i > 0 {
			c = c.mul(inv).neg()
		}
		return c
	}), nil
}

func (s series) sqrt() (series, error) {
	root, err := s.c.sqrt()
	if err != nil || len(s.rest) == 0 {
		return constant(s.order, root), err
	}
	inv, err := s.c.inverse()
	if err != nil {
		return s, err
	}
	c := root
	return s.compose(func(i int) number {
		if i > 0 { // binomial coefficients of 1/2
			c = c.mul(inv).mul(exactly(big.NewRat(int64(3-2*i), int64(2*i))))
		}
		return c
	}), nil
}

func (s series) abs() (series, error) {
	sign, ok := s.c.sign()
	if !ok || sign == 0 && len(s.rest) > 0 {
		return s, errEnclosure
	}
	if sign < 0 {
		return s.scale(one.neg()), nil
	}
	return s, nil
}

func (s series) power(n int) series {
	if n == 0 {
		return constant(s.order, one)
	}
	out := s
	for range n - 1 {
		out = out.mul(s)
	}
	return out
}

// deriv is the derivative by a variable; the order falls by one.
func (s series) deriv(v int) series {
	out := series{order: s.order - 1, c: zero}
	for m, x := range s.rest {
		if m[v] == 0 {
			continue
		}
		k := whole(int(m[v]))
		m[v]--
		out.accumulate(m, x.mul(k))
	}
	return out
}

// cut lowers the order.
func (s series) cut(order int) series {
	out := series{order: order, c: s.c}
	for m, x := range s.rest {
		out.accumulate(m, x)
	}
	return out
}

package campaign

import (
	"math/big"
	"strings"

	"creaseproof/entropy/formula"
)

const variation = maxVariables - 1 // the place of the size of a variation

// world is what the names of a case mean.
type world struct {
	coords, unknowns, axes []string
	plane                  [2]int
	angle                  string
	lets                   map[string]formula.Node
	fields                 map[string]map[string]formula.Node
	given                  map[string]formula.Node
	restrict               []restriction
}

type restriction struct {
	unknown string
	index   mono
	value   formula.Node
}

// view evaluates formulas at a point: the point, the angle in force, and at
// jumps the two traces.
type view struct {
	*world
	at          *point
	cos, sin    number
	plus, minus *point
	normal      number // 1 or -1: the side that nu points to

	vary string // the unknown that is varied, by the monomial of index
	by   mono
}

func (v *view) index(coordinate string) int {
	for i, c := range v.coords {
		if c == coordinate {
			return i
		}
	}
	return -1
}

// value evaluates a formula to a power series of the order.
func (v *view) value(n formula.Node, order int) (series, error) {
	switch n := n.(type) {
	case *formula.Num:
		return constant(order, exactly(n.Value)), nil
	case *formula.Name:
		return v.name(n.ID, order)
	case *formula.Deriv:
		if f, ok := v.lets[n.Of]; ok {
			return v.along(n.By, order, func(o int) (series, error) { return v.value(f, o) })
		}
		return v.jet(n.Of, mono{}, n.By, order)
	case *formula.TotalDeriv:
		return v.along(n.By, order, func(o int) (series, error) { return v.value(n.Arg, o) })
	case *formula.Sum:
		out := constant(order, zero)
		for _, t := range n.Terms {
			x, err := v.value(t.X, order)
			if err != nil {
				return out, err
			}
			if t.Neg {
				x = x.scale(one.neg())
			}
			out = out.add(x)
		}
		return out, nil
	case *formula.Product:
		out := constant(order, one)
		for _, f := range n.Factors {
			x, err := v.value(f.X, order)
			if err == nil && f.Op == formula.Slash {
				x, err = x.inverse()
			}
			if err != nil {
				return out, err
			}
			out = out.mul(x)
		}
		return out, nil
	case *formula.Juxt:
		out := constant(order, one)
		for _, f := range n.Factors {
			x, err := v.value(f, order)
			if err != nil {
				return out, err
			}
			out = out.mul(x)
		}
		return out, nil
	case *formula.Power:
		return v.power(n, order)
	case *formula.Component:
		return v.component(n, order)
	case *formula.Call:
		return v.call(n, order)
	case *formula.Jump, *formula.Average:
		return v.traces(n, order)
	case *formula.DotNu:
		return v.dotNormal(n, order)
	}
	return series{}, errOutside
}

func (v *view) name(id string, order int) (series, error) {
	if f, ok := v.lets[id]; ok {
		return v.value(f, order)
	}
	if i := v.index(id); i >= 0 {
		s := constant(order, exactly(v.at.get(id)))
		var m mono
		m[i] = 1
		s.accumulate(m, one)
		return s, nil
	}
	for _, u := range v.unknowns {
		if u == id {
			return v.jet(id, mono{}, nil, order)
		}
	}
	if id == "pi" || id == v.angle {
		return series{}, errOutside
	}
	return constant(order, exactly(v.at.get(id))), nil
}

// along is the total derivative of f along coordinates and axes.
func (v *view) along(by []string, order int, f func(int) (series, error)) (series, error) {
	s, err := f(order + len(by))
	if err != nil {
		return s, err
	}
	for _, b := range by {
		s = v.derive(s, b)
	}
	return s, nil
}

func (v *view) derive(s series, by string) series {
	if i := v.index(by); i >= 0 {
		return s.deriv(i)
	}
	a, b := v.direction(by)
	return s.deriv(v.plane[0]).scale(a).add(s.deriv(v.plane[1]).scale(b))
}

// direction is an axis of the frame in the coordinates of its plane.
func (v *view) direction(axis string) (a, b number) {
	if axis == v.axes[0] {
		return v.cos, v.sin
	}
	return v.sin.neg(), v.cos
}

// jet is the derivative of an unknown with the index m and along by.
func (v *view) jet(u string, m mono, by []string, order int) (series, error) {
	for i, b := range by {
		if k := v.index(b); k >= 0 {
			m[k]++
			continue
		}
		x, y := v.direction(b)
		out := constant(order, zero)
		for j, c := range []number{x, y} {
			mj := m
			mj[v.plane[j]]++
			s, err := v.jet(u, mj, by[i+1:], order)
			if err != nil {
				return out, err
			}
			out = out.add(s.scale(c))
		}
		return out, nil
	}
	return v.derivative(u, m, order)
}

func (v *view) derivative(u string, m mono, order int) (series, error) {
	if f, ok := v.given[u]; ok {
		s, err := v.value(f, order+m.degree())
		if err != nil {
			return s, err
		}
		for i, e := range m {
			for range e {
				s = s.deriv(i)
			}
		}
		return s, nil
	}
	out := constant(order, zero)
	var put func(i int, k mono, f number) error
	put = func(i int, k mono, f number) error {
		if i == len(v.coords) {
			x, err := v.coefficient(u, sumOf(m, k))
			if err != nil {
				return err
			}
			out.accumulate(k, x.mul(f))
			return nil
		}
		for e := int8(0); k.degree() <= order; e++ {
			if e > 0 {
				f = f.mul(exactly(big.NewRat(1, int64(e))))
			}
			if err := put(i+1, k, f); err != nil {
				return err
			}
			k[i]++
		}
		return nil
	}
	if err := put(0, mono{}, one); err != nil {
		return out, err
	}
	if v.vary == u { // the monomial of index v.by, divided by its factorials
		k, f := v.by, one
		for i, e := range m {
			if k[i] < e {
				return out, nil
			}
			k[i] -= e
			for j := int8(2); j <= k[i]; j++ {
				f = f.mul(exactly(big.NewRat(1, int64(j))))
			}
		}
		k[variation] = 1
		out.accumulate(k, f)
	}
	return out, nil
}

func sumOf(a, b mono) mono {
	for i, e := range b {
		a[i] += e
	}
	return a
}

// coefficient is the derivative of an unknown at the point.
func (v *view) coefficient(u string, m mono) (number, error) {
	for _, r := range v.restrict {
		if r.unknown != u {
			continue
		}
		above := true
		for i, e := range r.index {
			above = above && m[i] >= e
		}
		if above && m != r.index {
			return zero, nil
		}
		if above {
			s, err := v.value(r.value, 0)
			return s.c, err
		}
	}
	return exactly(v.at.get(jetName(v.world, u, m))), nil
}

// jetName is the name under which a point holds a derivative: coordinates in
// their order, as in u_xxz.
func jetName(w *world, u string, m mono) string {
	if m.degree() == 0 {
		return u
	}
	var b strings.Builder
	b.WriteString(u)
	b.WriteByte('_')
	for i, c := range w.coords {
		b.WriteString(strings.Repeat(c, int(m[i])))
	}
	return b.String()
}

func (v *view) power(n *formula.Power, order int) (series, error) {
	s, err := v.value(n.Base, order)
	if err != nil {
		return s, err
	}
	num, den := n.Exp.Num().Int64(), n.Exp.Denom().Int64()
	if den > 2 || num > 40 || num < -40 {
		return s, errOutside
	}
	if den == 2 {
		if s, err = s.sqrt(); err != nil {
			return s, err
		}
	}
	if num < 0 {
		if s, err = s.inverse(); err != nil {
			return s, err
		}
		num = -num
	}
	return s.power(int(num)), nil
}

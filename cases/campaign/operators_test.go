package campaign

import (
	"math/big"

	"creaseproof/entropy/formula"
)

func (v *view) call(n *formula.Call, order int) (series, error) {
	switch n.Func {
	case "div":
		return v.divergence(n.Args[0], order)
	case "euler":
		u := v.unknowns[0]
		if len(n.Args) > 1 {
			name, ok := n.Args[1].(*formula.Name)
			if !ok {
				return series{}, errOutside
			}
			u = name.ID
		}
		return v.euler(n.Args[0], u, order)
	case "norm":
		sum := constant(order, zero)
		for _, a := range n.Args {
			s, err := v.value(a, order)
			if err != nil {
				return s, err
			}
			sum = sum.add(s.mul(s))
		}
		return sum.sqrt()
	case "sqrt", "abs":
		s, err := v.value(n.Args[0], order)
		if err != nil {
			return s, err
		}
		if n.Func == "abs" {
			return s.abs()
		}
		return s.sqrt()
	case "cos", "sin":
		c, s, err := v.turn(n.Args[0])
		if n.Func == "sin" {
			c = s
		}
		return constant(order, c), err
	}
	return series{}, errOutside
}

// vector evaluates a field along the coordinates.
func (v *view) vector(n formula.Node, order int) ([]series, error) {
	switch n := n.(type) {
	case *formula.Field:
		w, err := v.turned(n.Angle)
		if err != nil {
			return nil, err
		}
		return w.fieldAlong(n.ID, order)
	case *formula.Jump, *formula.Average:
		x := v.inside(n)
		var out []series
		for i := range v.coords {
			pick := func(w *view) (series, error) {
				all, err := w.vector(x, order)
				if err != nil {
					return series{}, err
				}
				return all[i], nil
			}
			s, err := v.combine(n, pick)
			if err != nil {
				return nil, err
			}
			out = append(out, s)
		}
		return out, nil
	}
	return nil, errOutside
}

func (v *view) fieldAlong(id string, order int) ([]series, error) {
	out := make([]series, len(v.coords))
	for i := range out {
		out[i] = constant(order, zero)
	}
	for index, f := range v.fields[id] {
		s, err := v.value(f, order)
		if err != nil {
			return nil, err
		}
		if i := v.index(index); i >= 0 {
			out[i] = out[i].add(s)
			continue
		}
		a, b := v.direction(index)
		for j, c := range []number{a, b} {
			out[v.plane[j]] = out[v.plane[j]].add(s.scale(c))
		}
	}
	return out, nil
}

func (v *view) divergence(n formula.Node, order int) (series, error) {
	all, err := v.vector(n, order+1)
	if err != nil {
		return series{}, err
	}
	out := constant(order, zero)
	for i, s := range all {
		out = out.add(s.deriv(i))
	}
	return out, nil
}

func (v *view) component(n *formula.Component, order int) (series, error) {
	if n.Of == "nu" {
		nu, err := v.normals()
		if err != nil {
			return series{}, err
		}
		i := v.index(n.Index)
		if i < 0 {
			return series{}, errOutside
		}
		return constant(order, nu[i]), nil
	}
	all, err := v.vector(formula.NewField(n.Of, n.Angle), order)
	if err != nil {
		return series{}, err
	}
	if i := v.index(n.Index); i >= 0 {
		return all[i], nil
	}
	a, b := v.direction(n.Index)
	return all[v.plane[0]].scale(a).add(all[v.plane[1]].scale(b)), nil
}

// turned is the view with another angle of the frame in force.
func (v *view) turned(angle formula.Node) (*view, error) {
	if angle == nil {
		return v, nil
	}
	w := *v
	var err error
	w.cos, w.sin, err = v.turn(angle)
	return &w, err
}

// turn is the cosine and the sine of k theta + q pi, where 4 q is whole.
func (v *view) turn(n formula.Node) (c, s number, err error) {
	k, q, err := v.multiple(n)
	if err != nil {
		return zero, zero, err
	}
	c, s = one, zero
	turn := func(a, b number) { c, s = c.mul(a).add(s.mul(b).neg()), c.mul(b).add(s.mul(a)) }
	if !k.IsInt() {
		return zero, zero, errOutside
	}
	for i := k.Num().Int64(); i > 0; i-- {
		turn(v.cos, v.sin)
	}
	for i := k.Num().Int64(); i < 0; i++ {
		turn(v.cos, v.sin.neg())
	}
	eighths := new(big.Rat).Mul(q, big.NewRat(4, 1))
	if !eighths.IsInt() {
		return zero, zero, errOutside
	}
	half, _ := exactly(big.NewRat(1, 2)).sqrt()
	e := int(((eighths.Num().Int64() % 8) + 8) % 8)
	for range e / 2 {
		turn(zero, one)
	}
	if e%2 == 1 {
		turn(half, half)
	}
	return c, s, nil
}

// multiple reads an angle as k theta + q pi.
func (v *view) multiple(n formula.Node) (k, q *big.Rat, err error) {
	k, q = new(big.Rat), new(big.Rat)
	coefficient, angle := big.NewRat(1, 1), ""
	factor := func(x formula.Node, inverse bool) error {
		switch x := x.(type) {
		case *formula.Num:
			if inverse && x.Value.Sign() != 0 {
				coefficient.Quo(coefficient, x.Value)
			} else {
				coefficient.Mul(coefficient, x.Value)
			}
			return nil
		case *formula.Name:
			if angle == "" && !inverse && (x.ID == "pi" || x.ID == v.angle) {
				angle = x.ID
				return nil
			}
		}
		return errOutside
	}
	switch n := n.(type) {
	case *formula.Sum:
		for _, t := range n.Terms {
			a, b, err := v.multiple(t.X)
			if err != nil {
				return k, q, err
			}
			if t.Neg {
				a.Neg(a)
				b.Neg(b)
			}
			k.Add(k, a)
			q.Add(q, b)
		}
		return k, q, nil
	case *formula.Juxt:
		for _, f := range n.Factors {
			if err := factor(f, false); err != nil {
				return k, q, err
			}
		}
	case *formula.Product:
		for _, f := range n.Factors {
			if err := factor(f.X, f.Op == formula.Slash); err != nil {
				return k, q, err
			}
		}
	default:
		if err := factor(n, false); err != nil {
			return k, q, err
		}
	}
	switch {
	case angle == "pi":
		q = coefficient
	case angle != "":
		k = coefficient
	case coefficient.Sign() != 0:
		return k, q, errOutside
	}
	return k, q, nil
}

func (v *view) inside(n formula.Node) formula.Node {
	if j, ok := n.(*formula.Jump); ok {
		return j.X
	}
	return n.(*formula.Average).X
}

// combine is the jump or the average of what f is on the two sides.
func (v *view) combine(n formula.Node, f func(*view) (series, error)) (series, error) {
	if v.plus == nil {
		return series{}, errOutside
	}
	up, down := *v, *v
	up.at, up.plus, up.minus = v.plus, nil, nil
	down.at, down.plus, down.minus = v.minus, nil, nil
	a, err := f(&up)
	if err != nil {
		return a, err
	}
	b, err := f(&down)
	if err != nil {
		return b, err
	}
	if _, jump := n.(*formula.Jump); jump {
		return a.add(b.scale(one.neg())), nil
	}
	return a.add(b).scale(exactly(big.NewRat(1, 2))), nil
}

func (v *view) traces(n formula.Node, order int) (series, error) {
	x := v.inside(n)
	return v.combine(n, func(w *view) (series, error) { return w.value(x, order) })
}

// normals is the unit normal: along the jump of the gradient, on either side.
func (v *view) normals() ([]number, error) {
	if v.plus == nil {
		return nil, errOutside
	}
	var q []number
	sum := zero
	for i := range v.coords {
		var m mono
		m[i] = 1
		name := jetName(v.world, v.unknowns[0], m)
		d := exactly(new(big.Rat).Sub(v.plus.get(name), v.minus.get(name)))
		q, sum = append(q, d), sum.add(d.mul(d))
	}
	length, err := sum.sqrt()
	if err != nil {
		return nil, err
	}
	inv, err := length.inverse()
	if err != nil {
		return nil, err
	}
	for i := range q {
		q[i] = q[i].mul(inv).mul(v.normal)
	}
	return q, nil
}

func (v *view) dotNormal(n *formula.DotNu, order int) (series, error) {
	all, err := v.vector(n.X, order)
	if err != nil {
		return series{}, err
	}
	nu, err := v.normals()
	if err != nil {
		return series{}, err
	}
	out := constant(order, zero)
	for i, s := range all {
		out = out.add(s.scale(nu[i]))
	}
	return out, nil
}

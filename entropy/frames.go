package entropy

import (
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// rotation is (cos θ, sin θ) at the angle of the state.
func (in *Interpreter[T]) rotation(s state[T]) (cos, sin T, err error) {
	if s.turn != nil {
		return s.turn.cos, s.turn.sin, nil
	}
	angle := in.Arith.Constant(in.Setting.Frame.Angle)
	if cos, err = in.Arith.Function("cos", angle); err != nil {
		return cos, sin, err
	}
	sin, err = in.Arith.Function("sin", angle)
	return cos, sin, err
}

// unit is a coordinate or frame direction over the coordinates.
func (in *Interpreter[T]) unit(name string, s state[T]) (direction[T], error) {
	if i := in.Setting.coordinate(name); i >= 0 {
		return direction[T]{index: []int{i}}, nil
	}
	k := in.Setting.axis(name)
	c, sn, err := in.rotation(s)
	if err != nil {
		return direction[T]{}, err
	}
	p := in.Setting.Frame.Plane[:]
	if k == 0 {
		return direction[T]{coef: []T{c, sn}, index: p}, nil
	}
	return direction[T]{coef: []T{in.Arith.Neg(sn), c}, index: p}, nil
}

// along is the total derivative of x by coordinates and frame directions.
// The frame does not turn from point to point, so the order does not matter.
func (in *Interpreter[T]) along(x T, by []string, s state[T]) (T, error) {
	for _, name := range by {
		d, err := in.unit(name, s)
		if err != nil {
			return x, err
		}
		if x, err = in.directional(d, func(i int) (T, error) { return in.Arith.Total(x, i) }); err != nil {
			return x, err
		}
	}
	return x, nil
}

func (in *Interpreter[T]) directional(d direction[T], part func(i int) (T, error)) (T, error) {
	var sum T
	for k, i := range d.index {
		x, err := part(i)
		if err != nil {
			return x, err
		}
		if d.coef != nil {
			if x, err = in.Arith.Mul(d.coef[k], x); err != nil {
				return x, err
			}
		}
		if k == 0 {
			sum = x
		} else if sum, err = in.Arith.Add(sum, x); err != nil {
			return sum, err
		}
	}
	return sum, nil
}

// deriv is a subscripted unknown or named formula.
func (in *Interpreter[T]) deriv(n *formula.Deriv, s state[T]) (T, error) {
	var zero T
	u := slices.Index(in.Setting.Unknowns, n.Of)
	if u < 0 {
		v, err := in.name(formula.NewName(n.Of).(*formula.Name), s)
		if err != nil {
			return zero, at(n, err)
		}
		if v.Vector != nil {
			return zero, fault(n, "", "%s is a vector", n.Of)
		}
		return in.along(v.Scalar, n.By, s)
	}
	// Expand the product of directions over multi-indices.
	var walk func(k int, j jet.Index) (T, error)
	walk = func(k int, j jet.Index) (T, error) {
		if k == len(n.By) {
			return in.jet(n, u, j, s)
		}
		d, err := in.unit(n.By[k], s)
		if err != nil {
			return zero, err
		}
		return in.directional(d, func(i int) (T, error) { return walk(k+1, j.Plus(i)) })
	}
	return walk(0, jet.Index{})
}

// jet is the derivative u_J where the state is.
func (in *Interpreter[T]) jet(n formula.Node, u int, j jet.Index, s state[T]) (T, error) {
	key := jetAt{u, j, s.side}
	if x, ok := in.jets[key]; ok {
		return x, nil
	}
	x, err := in.freshJet(n, u, j, s)
	if err != nil {
		return x, at(n, err)
	}
	if in.jets == nil {
		in.jets = map[jetAt]T{}
	}
	in.jets[key] = x
	return x, nil
}

func (in *Interpreter[T]) freshJet(n formula.Node, u int, j jet.Index, s state[T]) (T, error) {
	var zero T
	if j.Order() > jet.MaxOrder {
		return zero, fault(n, "", "a derivative of order %d; at most order %d is supported", j.Order(), jet.MaxOrder)
	}
	if body, ok := in.Given[u]; ok {
		if j.Order() == 0 {
			v, err := in.memoised(n, "given "+in.Setting.Unknowns[u], state[T]{}, func() (Value[T], error) {
				return one(in.scalar(body, state[T]{}))
			})
			return v.Scalar, err
		}
		for i, k := range j {
			if k > 0 {
				lower := j
				lower[i]--
				x, err := in.jet(n, u, lower, state[T]{})
				if err != nil {
					return x, err
				}
				return in.Arith.Total(x, i)
			}
		}
	}
	if in.Jump {
		switch {
		case j.Order() == 0:
			return in.Arith.Jet(u, j, jet.NoSide) // u is continuous
		case j.Order() > 1:
			return zero, fault(n, "use first derivatives", "at a jump only the traces of the gradient are known")
		case s.side == jet.NoSide:
			t := formula.Text(n)
			return zero, fault(n, "write ["+t+"] for the jump or {"+t+"} for the average", "%s has two traces at a jump", t)
		}
	}
	return in.Arith.Jet(u, j, s.side)
}

// field is a field over the coordinates, at the given angle of its frame.
func (in *Interpreter[T]) field(n formula.Node, id string, angle formula.Node, s state[T]) (Value[T], error) {
	f, ok := in.Setting.Fields[id]
	if !ok {
		return Value[T]{}, fault(n, "", "%s is not a field of this case", id)
	}
	if angle != nil {
		if in.Setting.Frame == nil {
			return Value[T]{}, fault(n, "declare a [frame]", "%s at an angle, but the case has no frame", id)
		}
		var err error
		if s, err = in.turned(angle, s); err != nil {
			return Value[T]{}, err
		}
	}
	return in.memoised(n, "field "+id, s, func() (Value[T], error) {
		out := make([]T, len(in.Setting.Coordinates))
		for i := range out {
			out[i] = in.Arith.Rational(zeroRat)
		}
		for _, name := range sortedKeys(f.Components) {
			x, err := in.scalar(f.Components[name], s)
			if err != nil {
				return Value[T]{}, err
			}
			d, err := in.unit(name, s)
			if err != nil {
				return Value[T]{}, err
			}
			for k, i := range d.index {
				y := x
				if d.coef != nil {
					if y, err = in.Arith.Mul(d.coef[k], x); err != nil {
						return Value[T]{}, err
					}
				}
				if out[i], err = in.Arith.Add(out[i], y); err != nil {
					return Value[T]{}, err
				}
			}
		}
		return Value[T]{Vector: out}, nil
	})
}

// turned is the state with the frame at the given angle.
func (in *Interpreter[T]) turned(angle formula.Node, s state[T]) (state[T], error) {
	a, err := in.scalar(angle, s)
	if err != nil {
		return s, err
	}
	t := &turn[T]{key: formula.Text(angle), angle: a}
	if s.turn != nil {
		t.key += " in " + s.turn.key
	}
	if t.cos, err = in.Arith.Function("cos", a); err != nil {
		return s, at(angle, err)
	}
	if t.sin, err = in.Arith.Function("sin", a); err != nil {
		return s, at(angle, err)
	}
	s.turn = t
	return s, nil
}

// normal is a component of the unit normal. In exact arithmetic that is the
// direction of [grad u], which there is at a jump only.
func (in *Interpreter[T]) normal(n formula.Node, i int) (T, error) {
	if _, exact := any(in.Arith).(*Exact); exact && !in.Jump {
		var zero T
		return zero, fault(n, `give the claim at = "jump"`, "the normal of a jump outside a claim at a jump")
	}
	return in.Arith.Normal(i)
}

func (in *Interpreter[T]) component(n *formula.Component, s state[T]) (T, error) {
	var zero T
	var v []T
	if n.Of == "nu" {
		v = make([]T, len(in.Setting.Coordinates))
		for i := range v {
			var err error
			if v[i], err = in.normal(n, i); err != nil {
				return v[i], err
			}
		}
	} else {
		f, err := in.field(n, n.Of, n.Angle, s)
		if err != nil {
			return zero, err
		}
		v = f.Vector
		if n.Angle != nil { // the axes turn with the field
			if s, err = in.turned(n.Angle, s); err != nil {
				return zero, err
			}
		}
	}
	d, err := in.unit(n.Index, s)
	if err != nil {
		return zero, err
	}
	return in.directional(d, func(i int) (T, error) { return v[i], nil })
}

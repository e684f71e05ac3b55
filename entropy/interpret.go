package entropy

import (
	"errors"
	"math/big"
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// Arithmetic is a domain in which formulas are evaluated: the exact ring of
// jets, or compiled float64 programs. Values are never changed in place.
type Arithmetic[T any] interface {
	Rational(x *big.Rat) T
	Pi() T
	Coordinate(i int) T
	Constant(name string) T
	// Jet is the derivative of an unknown, on a side of a jump or on none.
	Jet(unknown int, j jet.Index, side jet.Side) (T, error)
	// Normal is component i of the unit normal of a jump.
	Normal(i int) (T, error)
	Add(a, b T) (T, error)
	Neg(a T) T
	Mul(a, b T) (T, error)
	Quo(a, b T) (T, error)
	Power(a T, e *big.Rat) (T, error)
	// Function applies sin cos tan sinh cosh tanh exp log sqrt erf abs.
	Function(name string, x T) (T, error)
	// Norm is the root of the sum of the squares.
	Norm(parts []T) (T, error)
	// Total is the total derivative by coordinate i.
	Total(x T, i int) (T, error)
	Euler(x T, unknown int) (T, error)
	// Sup is the supremum over all values of the named angle.
	Sup(angle string, x T) (T, error)
}

// Value is a scalar, or a vector with one component per coordinate.
type Value[T any] struct {
	Scalar T
	Vector []T // nil for a scalar
}

// Interpreter evaluates formulas of a setting in an arithmetic.
type Interpreter[T any] struct {
	Setting *Setting
	Arith   Arithmetic[T]
	Given   map[int]formula.Node // unknowns in closed form
	Jump    bool                 // in a claim at a jump, jets are traces

	memo   map[memoKey]Value[T]
	active map[memoKey]bool
	jets   map[jetAt]T
}

type memoKey struct {
	name  string
	side  jet.Side
	angle string
}

type jetAt struct {
	unknown int
	index   jet.Index
	side    jet.Side
}

// state is where a formula is evaluated: on which side of a jump, at which
// frame angle.
type state[T any] struct {
	side jet.Side
	turn *turn[T] // nil: the frame's own angle
}

type turn[T any] struct {
	key             string
	angle, cos, sin T
}

func (s state[T]) key(name string) memoKey {
	k := memoKey{name: name, side: s.side}
	if s.turn != nil {
		k.angle = s.turn.key
	}
	return k
}

// Reset forgets what names stood for, so that they are evaluated afresh.
func (in *Interpreter[T]) Reset() {
	in.memo, in.active, in.jets = nil, nil, nil
}

// Eval evaluates a formula.
func (in *Interpreter[T]) Eval(n formula.Node) (Value[T], error) {
	return in.eval(n, state[T]{})
}

// Scalar evaluates a formula that must be a scalar.
func (in *Interpreter[T]) Scalar(n formula.Node) (T, error) {
	return in.scalar(n, state[T]{})
}

// Field is the field at its own frame angle, as a vector over the coordinates.
func (in *Interpreter[T]) Field(f *formula.Field) ([]T, error) {
	v, err := in.eval(f, state[T]{})
	return v.Vector, err
}

// FieldOn is the field on one side of a jump.
func (in *Interpreter[T]) FieldOn(f *formula.Field, side jet.Side) ([]T, error) {
	v, err := in.eval(f, state[T]{side: side})
	return v.Vector, err
}

// ScalarOn evaluates a scalar on one side of a jump.
func (in *Interpreter[T]) ScalarOn(n formula.Node, side jet.Side) (T, error) {
	return in.scalar(n, state[T]{side: side})
}

func (in *Interpreter[T]) scalar(n formula.Node, s state[T]) (T, error) {
	v, err := in.eval(n, s)
	if err == nil && v.Vector != nil {
		err = fault(n, "write one component of it, its norm, or .nu", "%s is a vector where a number is needed", formula.Text(n))
	}
	return v.Scalar, err
}

func (in *Interpreter[T]) eval(n formula.Node, s state[T]) (Value[T], error) {
	v, err := in.dispatch(n, s)
	if err != nil {
		return v, at(n, err)
	}
	return v, nil
}

func one[T any](x T, err error) (Value[T], error) { return Value[T]{Scalar: x}, err }

func (in *Interpreter[T]) dispatch(n formula.Node, s state[T]) (Value[T], error) {
	a := in.Arith
	switch n := n.(type) {
	case *formula.Num:
		return one(a.Rational(n.Value), nil)
	case *formula.Name:
		return in.name(n, s)
	case *formula.Deriv:
		return one(in.deriv(n, s))
	case *formula.Field:
		return in.field(n, n.ID, n.Angle, s)
	case *formula.Component:
		return one(in.component(n, s))
	case *formula.TotalDeriv:
		v, err := in.eval(n.Arg, s)
		if err != nil {
			return v, err
		}
		return in.mapScalars(v, func(x T) (T, error) { return in.along(x, n.By, s) })
	case *formula.Call:
		return in.call(n, s)
	case *formula.Sum:
		return in.sum(n, s)
	case *formula.Product:
		return in.product(n, s)
	case *formula.Juxt:
		v, err := in.eval(n.Factors[0], s)
		for _, f := range n.Factors[1:] {
			if err != nil {
				return v, err
			}
			var w Value[T]
			if w, err = in.eval(f, s); err == nil {
				v, err = in.times(f, v, w)
			}
		}
		return v, err
	case *formula.Power:
		x, err := in.scalar(n.Base, s)
		if err != nil {
			return Value[T]{}, err
		}
		return one(a.Power(x, n.Exp))
	case *formula.DotNu:
		return one(in.dotNu(n, s))
	case *formula.Jump:
		return in.sides(n, n.X, s, func(p, m T) (T, error) { return a.Add(p, a.Neg(m)) })
	case *formula.Average:
		return in.sides(n, n.X, s, func(p, m T) (T, error) {
			t, err := a.Add(p, m)
			if err != nil {
				return t, err
			}
			return a.Mul(t, a.Rational(big.NewRat(1, 2)))
		})
	}
	return Value[T]{}, fault(n, "", "a formula of an unknown kind")
}

func (in *Interpreter[T]) mapScalars(v Value[T], f func(T) (T, error)) (Value[T], error) {
	if v.Vector == nil {
		return one(f(v.Scalar))
	}
	out := make([]T, len(v.Vector))
	for i, x := range v.Vector {
		var err error
		if out[i], err = f(x); err != nil {
			return v, err
		}
	}
	return Value[T]{Vector: out}, nil
}

// memoised evaluates what a name stands for once per side and frame angle,
// and refuses names that stand for themselves.
func (in *Interpreter[T]) memoised(n formula.Node, name string, s state[T], f func() (Value[T], error)) (Value[T], error) {
	if in.memo == nil {
		in.memo, in.active = map[memoKey]Value[T]{}, map[memoKey]bool{}
	}
	k := s.key(name)
	if v, ok := in.memo[k]; ok {
		return v, nil
	}
	if in.active[k] {
		return Value[T]{}, fault(n, "break the cycle", "%s is defined by itself", name)
	}
	in.active[k] = true
	defer delete(in.active, k)
	v, err := f()
	if err == nil {
		in.memo[k] = v
	}
	return v, err
}

func (in *Interpreter[T]) name(n *formula.Name, s state[T]) (Value[T], error) {
	set := in.Setting
	if n.ID == "pi" {
		return one(in.Arith.Pi(), nil)
	}
	if i := set.coordinate(n.ID); i >= 0 {
		return one(in.Arith.Coordinate(i), nil)
	}
	if i := slices.Index(set.Unknowns, n.ID); i >= 0 {
		return one(in.jet(n, i, jet.Index{}, s))
	}
	if body, ok := set.Lets[n.ID]; ok {
		return in.memoised(n, n.ID, s, func() (Value[T], error) { return in.eval(body, s) })
	}
	if set.Frame != nil && n.ID == set.Frame.Angle {
		if s.turn != nil {
			return one(s.turn.angle, nil)
		}
		return one(in.Arith.Constant(n.ID), nil)
	}
	return one(in.Arith.Constant(n.ID), nil)
}

func (in *Interpreter[T]) sum(n *formula.Sum, s state[T]) (Value[T], error) {
	var total Value[T]
	for i, t := range n.Terms {
		v, err := in.eval(t.X, s)
		if err != nil {
			return v, err
		}
		if t.Neg {
			if v, err = in.mapScalars(v, func(x T) (T, error) { return in.Arith.Neg(x), nil }); err != nil {
				return v, err
			}
		}
		if i == 0 {
			total = v
			continue
		}
		if (v.Vector == nil) != (total.Vector == nil) {
			return v, fault(t.X, "", "a vector and a number are added")
		}
		if v.Vector == nil {
			total.Scalar, err = in.Arith.Add(total.Scalar, v.Scalar)
		} else {
			out := slices.Clone(total.Vector)
			for k := range out {
				if out[k], err = in.Arith.Add(out[k], v.Vector[k]); err != nil {
					break
				}
			}
			total.Vector = out
		}
		if err != nil {
			return total, at(t.X, err)
		}
	}
	return total, nil
}

func (in *Interpreter[T]) times(n formula.Node, v, w Value[T]) (Value[T], error) {
	if v.Vector != nil && w.Vector != nil {
		return v, fault(n, "write norm(...) or .nu, or name the components", "two vectors are multiplied")
	}
	if v.Vector != nil {
		v, w = w, v
	}
	return in.mapScalars(w, func(x T) (T, error) {
		p, err := in.Arith.Mul(v.Scalar, x)
		return p, at(n, err)
	})
}

func (in *Interpreter[T]) product(n *formula.Product, s state[T]) (Value[T], error) {
	var out Value[T]
	for i, f := range n.Factors {
		v, err := in.eval(f.X, s)
		if err != nil {
			return v, err
		}
		switch {
		case i == 0:
			out = v
		case f.Op == formula.Slash:
			if v.Vector != nil {
				return v, fault(f.X, "", "division by a vector")
			}
			out, err = in.mapScalars(out, func(x T) (T, error) {
				q, err := in.Arith.Quo(x, v.Scalar)
				if errors.Is(err, jet.ErrDivisionByZero) {
					err = fault(f.X, "write a divisor that is not identically zero", "division by zero: %s vanishes identically", clip(formula.Text(f.X)))
				}
				return q, at(f.X, err)
			})
		default:
			out, err = in.times(f.X, out, v)
		}
		if err != nil {
			return out, err
		}
	}
	return out, nil
}

// clip shortens a long formula for a message.
func clip(s string) string {
	const limit = 60
	if r := []rune(s); len(r) > limit {
		return string(r[:limit]) + "…"
	}
	return s
}

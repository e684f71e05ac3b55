package entropy

import (
	"maps"
	"math/big"
	"slices"

	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

var zeroRat = new(big.Rat)

func sortedKeys[V any](m map[string]V) []string { return slices.Sorted(maps.Keys(m)) }

func (in *Interpreter[T]) sides(n, x formula.Node, s state[T], join func(p, m T) (T, error)) (Value[T], error) {
	if !in.Jump {
		return Value[T]{}, fault(n, `give the claim at = "jump"`, "a jump or an average outside a claim at a jump")
	}
	if s.side != jet.NoSide {
		return Value[T]{}, fault(n, "", "a jump inside a jump")
	}
	plus, minus := s, s
	plus.side, minus.side = jet.PlusSide, jet.MinusSide
	p, err := in.eval(x, plus)
	if err != nil {
		return p, err
	}
	m, err := in.eval(x, minus)
	if err != nil {
		return m, err
	}
	if p.Vector == nil {
		return one(join(p.Scalar, m.Scalar))
	}
	out := make([]T, len(p.Vector))
	for i := range out {
		if out[i], err = join(p.Vector[i], m.Vector[i]); err != nil {
			return p, err
		}
	}
	return Value[T]{Vector: out}, nil
}

func (in *Interpreter[T]) dotNu(n *formula.DotNu, s state[T]) (T, error) {
	var sum T
	v, err := in.eval(n.X, s)
	if err != nil {
		return sum, err
	}
	if v.Vector == nil {
		return sum, fault(n, "", ".nu needs a vector before it")
	}
	for i, x := range v.Vector {
		nu, err := in.normal(n, i)
		if err != nil {
			return sum, err
		}
		if x, err = in.Arith.Mul(x, nu); err != nil {
			return sum, err
		}
		if i == 0 {
			sum = x
		} else if sum, err = in.Arith.Add(sum, x); err != nil {
			return sum, err
		}
	}
	return sum, nil
}

func (in *Interpreter[T]) call(n *formula.Call, s state[T]) (Value[T], error) {
	arity := func(lo, hi int) error {
		if len(n.Args) < lo || len(n.Args) > hi {
			return fault(n, "", "%s takes %d argument(s), here are %d", n.Func, lo, len(n.Args))
		}
		return nil
	}
	switch n.Func {
	case "norm":
		return one(in.norm(n, s))
	case "div":
		if err := arity(1, 1); err != nil {
			return Value[T]{}, err
		}
		return one(in.divergence(n, s))
	case "grad":
		if err := arity(1, 1); err != nil {
			return Value[T]{}, err
		}
		return in.gradient(n, s)
	case "euler":
		if err := arity(1, 2); err != nil {
			return Value[T]{}, err
		}
		return one(in.euler(n, s))
	case "sup":
		if err := arity(2, 2); err != nil {
			return Value[T]{}, err
		}
		name, ok := n.Args[0].(*formula.Name)
		if !ok {
			return Value[T]{}, fault(n, "write sup(theta, formula)", "the first argument of sup is not an angle")
		}
		x, err := in.scalar(n.Args[1], s)
		if err != nil {
			return Value[T]{}, err
		}
		return one(in.Arith.Sup(name.ID, x))
	}
	if err := arity(1, 1); err != nil {
		return Value[T]{}, err
	}
	x, err := in.scalar(n.Args[0], s)
	if err != nil {
		return Value[T]{}, err
	}
	return one(in.Arith.Function(n.Func, x))
}

func (in *Interpreter[T]) norm(n *formula.Call, s state[T]) (T, error) {
	var parts []T
	for _, arg := range n.Args {
		v, err := in.eval(arg, s)
		if err != nil {
			return v.Scalar, err
		}
		if v.Vector != nil {
			parts = append(parts, v.Vector...)
		} else {
			parts = append(parts, v.Scalar)
		}
	}
	return in.Arith.Norm(parts)
}

func (in *Interpreter[T]) divergence(n *formula.Call, s state[T]) (T, error) {
	sum := in.Arith.Rational(zeroRat)
	v, err := in.eval(n.Args[0], s)
	if err != nil {
		return sum, err
	}
	if v.Vector == nil {
		return sum, fault(n, "write div of a field or of grad(f)", "div of a number")
	}
	for i, x := range v.Vector {
		d, err := in.Arith.Total(x, i)
		if err != nil {
			return sum, err
		}
		if sum, err = in.Arith.Add(sum, d); err != nil {
			return sum, err
		}
	}
	return sum, nil
}

func (in *Interpreter[T]) gradient(n *formula.Call, s state[T]) (Value[T], error) {
	out := make([]T, len(in.Setting.Coordinates))
	if name, ok := n.Args[0].(*formula.Name); ok {
		if u := slices.Index(in.Setting.Unknowns, name.ID); u >= 0 {
			for i := range out {
				var err error
				if out[i], err = in.jet(n, u, jet.Index{}.Plus(i), s); err != nil {
					return Value[T]{}, err
				}
			}
			return Value[T]{Vector: out}, nil
		}
	}
	x, err := in.scalar(n.Args[0], s)
	if err != nil {
		return Value[T]{}, err
	}
	for i := range out {
		if out[i], err = in.Arith.Total(x, i); err != nil {
			return Value[T]{}, err
		}
	}
	return Value[T]{Vector: out}, nil
}

func (in *Interpreter[T]) euler(n *formula.Call, s state[T]) (T, error) {
	u := 0
	switch {
	case len(n.Args) == 2:
		name, ok := n.Args[1].(*formula.Name)
		if ok {
			u = slices.Index(in.Setting.Unknowns, name.ID)
		}
		if !ok || u < 0 {
			var zero T
			return zero, fault(n.Args[1], "", "the second argument of euler is not an unknown")
		}
	case len(in.Setting.Unknowns) != 1:
		var zero T
		return zero, fault(n, "write euler(f, u)", "euler of a case with %d unknowns must name one", len(in.Setting.Unknowns))
	}
	if _, ok := in.Given[u]; ok {
		var zero T
		return zero, fault(n, "take `given` away", "the Euler operator needs a free unknown, but %s is given", in.Setting.Unknowns[u])
	}
	x, err := in.scalar(n.Args[0], s)
	if err != nil {
		return x, err
	}
	return in.Arith.Euler(x, u)
}

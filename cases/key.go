package cases

import (
	"math/big"
	"slices"

	"creaseproof/cases/casefile"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/source"
)

// key is what a key of restrict, box or integrability names.
type key struct {
	node    formula.Node // nil after a mistake
	unknown int          // index of the unknown; -1 for a coordinate or constant
	index   jet.Index
}

// key reads a key: a coordinate, a constant, an unknown, or a derivative of
// one along coordinates.
func (b *builder) key(scope *formula.Scope, name casefile.Name) key {
	out := key{unknown: -1}
	n := b.expr(scope, source.Text{File: b.text.file, Line: name.Pos.Line, Col: name.Pos.Col, S: name.S})
	switch n := n.(type) {
	case nil:
		return out
	case *formula.Name:
		switch scope.Kind(n.ID) {
		case formula.Unknown:
			out.unknown = slices.Index(b.set.Unknowns, n.ID)
			out.node = n
		case formula.Coordinate, formula.Constant:
			out.node = n
		}
	case *formula.Deriv:
		u := slices.Index(b.set.Unknowns, n.Of)
		if u < 0 {
			break
		}
		if len(n.By) > jet.MaxOrder {
			b.fault(name.Pos, "", "a derivative of order %d; at most order %d is supported", len(n.By), jet.MaxOrder)
			return out
		}
		for _, c := range n.By {
			i := slices.Index(b.set.Coordinates, c)
			if i < 0 {
				b.fault(name.Pos, "write it along coordinates", "%q is a derivative along an axis of the frame", Clip(name.S, 60))
				return out
			}
			out.index = out.index.Plus(i)
		}
		out.unknown, out.node = u, n
	}
	if out.node == nil {
		b.fault(name.Pos, "name a coordinate, a constant, or a derivative such as u_x", "%q cannot stand here", Clip(name.S, 60))
	}
	return out
}

// number reads a formula that is a rational number.
func (b *builder) number(scope *formula.Scope, t source.Text) *big.Rat {
	n := b.expr(scope, t)
	if n == nil {
		return nil
	}
	r, bad := rational(n)
	if bad != nil {
		pos := bad.At()
		if pos.Line == 0 {
			pos = position(t)
		}
		b.fault(pos, `write a number such as "1", "-3/2" or "0.25"`, "%s is not a rational number", Clip(formula.Text(bad), 60))
		return nil
	}
	return r
}

// maxExponent bounds the powers in a number that is given by a formula.
const maxExponent = 64

// rational evaluates a formula that is made of numbers; otherwise it returns
// the part that is not.
func rational(n formula.Node) (*big.Rat, formula.Node) {
	switch n := n.(type) {
	case *formula.Num:
		return n.Value, nil
	case *formula.Sum:
		sum := new(big.Rat)
		for _, t := range n.Terms {
			x, bad := rational(t.X)
			if bad != nil {
				return nil, bad
			}
			if t.Neg {
				sum.Sub(sum, x)
			} else {
				sum.Add(sum, x)
			}
		}
		return sum, nil
	case *formula.Product:
		product := big.NewRat(1, 1)
		for _, f := range n.Factors {
			x, bad := rational(f.X)
			switch {
			case bad != nil:
				return nil, bad
			case f.Op != formula.Slash:
				product.Mul(product, x)
			case x.Sign() == 0:
				return nil, n
			default:
				product.Quo(product, x)
			}
		}
		return product, nil
	case *formula.Juxt:
		product := big.NewRat(1, 1)
		for _, f := range n.Factors {
			x, bad := rational(f)
			if bad != nil {
				return nil, bad
			}
			product.Mul(product, x)
		}
		return product, nil
	case *formula.Power:
		x, bad := rational(n.Base)
		if bad != nil {
			return nil, bad
		}
		if !n.Exp.IsInt() || n.Exp.Num().BitLen() > 8 || x.Num().BitLen()+x.Denom().BitLen() > 4096 {
			return nil, n
		}
		e := n.Exp.Num().Int64()
		if e > maxExponent || e < -maxExponent || e < 0 && x.Sign() == 0 {
			return nil, n
		}
		power := big.NewRat(1, 1)
		for range max(e, -e) {
			power.Mul(power, x)
		}
		if e < 0 {
			power.Inv(power)
		}
		return power, nil
	}
	return nil, n
}

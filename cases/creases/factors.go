package creases

import (
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/source"
)

// A factor of a level function.
type factor struct {
	formulaText
	poly  algebra.Poly // where it is a polynomial in the coordinates
	power int
}

// mostFactors bounds the factors into which a level function is split.
const mostFactors = 12

// factoring is a level function as a sign times a product of powers.
type factoring struct {
	c    *combination
	of   source.Text
	sign int
	list []factor
}

// factors splits a level function into the factors that it is written with,
// these into numerator and denominator where they are quotients in normal form
// without roots and logarithms, which may bring in zeros of the numerator,
// and polynomials in the coordinates into square-free parts that have no
// common factor, and those by their contents. It reports false where a constant
// factor is zero or of unknown sign.
func (c *combination) factors(f formulaText) (*factoring, bool) {
	s := &factoring{c: c, of: f.text, sign: 1}
	ok := s.collect(f.node, 1) && s.coprime() && len(s.list) <= mostFactors
	return s, ok
}

func (s *factoring) collect(n formula.Node, power int) bool {
	if power < -64 || power > 64 || len(s.list) > mostFactors {
		return false
	}
	if s.c.constant(n) {
		x, err := s.c.in.Scalar(n)
		if err != nil || s.c.exact.Ring.Err(x) != nil {
			return false
		}
		sign, ok := s.c.exact.Ring.Enclose(x, nil, precision).Sign()
		s.turn(sign, power)
		return ok && sign != 0
	}
	switch n := n.(type) {
	case *formula.Name:
		if body := s.c.set.Lets[n.ID]; body != nil && !slices.Contains(s.c.set.Coordinates, n.ID) {
			return s.collect(body, power)
		}
	case *formula.Product:
		for _, x := range n.Factors {
			p := power
			if x.Op == formula.Slash {
				p = -p
			}
			if !s.collect(x.X, p) {
				return false
			}
		}
		return true
	case *formula.Juxt:
		for _, x := range n.Factors {
			if !s.collect(x, power) {
				return false
			}
		}
		return true
	case *formula.Call:
		if (n.Func == "abs" || n.Func == "sqrt") && len(n.Args) == 1 {
			return s.collect(n.Args[0], 2*power) // never negative
		}
	case *formula.Power:
		if !n.Exp.IsInt() {
			return s.collect(n.Base, 2*power*n.Exp.Sign()) // defined on one side only
		}
		if n.Exp.Num().IsInt64() && n.Exp.Sign() != 0 {
			if k := n.Exp.Num().Int64(); -64 <= k && k <= 64 {
				return s.collect(n.Base, power*int(k))
			}
		}
	case *formula.Sum:
		if len(n.Terms) == 1 {
			if n.Terms[0].Neg {
				s.turn(-1, power)
			}
			return s.collect(n.Terms[0].X, power)
		}
	}
	return s.leaf(n, power)
}

// turn multiplies the sign.
func (s *factoring) turn(sign, power int) {
	if power%2 != 0 {
		s.sign *= sign
	}
}

// leaf adds a factor that is not written as a product.
func (s *factoring) leaf(n formula.Node, power int) bool {
	plain := factor{formulaText: formulaText{s.of, n}, power: power}
	x, err := s.c.in.Scalar(n)
	if err != nil || s.c.exact.Ring.Err(x) != nil || x.IsZero() {
		s.list = append(s.list, plain)
		return true
	}
	rational := !slices.ContainsFunc(x.Vars(), func(v algebra.Var) bool { return s.c.exact.Ring.Symbol(v).Kind != jet.Coordinate })
	den := x.DenFactors()
	rooted := slices.ContainsFunc(s.c.exact.Ring.Kernels(x), func(v algebra.Var) bool {
		k := s.c.exact.Ring.Symbol(v).Kind
		return k != jet.Cosine && k != jet.Sine && k != jet.Exponential
	})
	if !rational && (len(den) == 0 || rooted) {
		s.list = append(s.list, plain)
		return true
	}
	before := len(s.list)
	if !s.parts(x.Num(), power, rational) {
		return false
	}
	if len(den) == 0 && len(s.list) == before+1 && s.list[before].power == power {
		// As it is written; the unit of the normal form does not count then.
		unit, _, _ := algebra.SquareFree(x.Num())
		s.turn(unit.Sign(), power)
		s.list[before].node = n
		if q := s.list[before].poly; len(q.Vars()) > 0 {
			s.list[before].poly = x.Num()
		}
	}
	for _, d := range den {
		if !s.parts(d.Base, -power*d.Exp, rational) {
			return false
		}
	}
	return true
}

// parts adds the factors of a polynomial, in the coordinates if rational.
func (s *factoring) parts(p algebra.Poly, power int, rational bool) bool {
	if !rational {
		return s.add(p, power, false)
	}
	unit, list, _ := algebra.SquareFree(p)
	if p.Err() != nil || unit.Sign() == 0 {
		return false
	}
	s.turn(unit.Sign(), power)
	for _, f := range list {
		for _, q := range split(f.Base) {
			if !s.add(q, power*f.Exp, true) {
				return false
			}
		}
	}
	return true
}

// add adds a polynomial as a factor; a constant counts by its sign.
func (s *factoring) add(p algebra.Poly, power int, rational bool) bool {
	if x, constant := p.IsConst(); constant {
		s.turn(x.Sign(), power)
		return x.Sign() != 0
	}
	text := s.c.exact.Ring.FormatPoly(p)
	if len(text) > 10000 {
		return false
	}
	node, err := s.c.s.scope.ParseExpr(source.Text{S: text, Line: 1, Col: 1})
	if err != nil {
		return false
	}
	f := factor{formulaText: formulaText{s.of, node}, power: power}
	f.text.S = text
	if rational {
		f.poly = p
	}
	s.list = append(s.list, f)
	return true
}

// split splits a polynomial by its contents with respect to each indeterminate,
// polynomials in the others, as x y - x into x and y - 1, and where it is
// quadratic in an indeterminate by the root of its discriminant, as x² - y².
func split(p algebra.Poly) []algebra.Poly {
	for _, v := range p.Vars() {
		var g algebra.Poly
		for _, q := range p.Coeffs(v) {
			if q.IsZero() {
				continue
			}
			if g.IsZero() {
				g = q
				continue
			}
			g, _ = algebra.GCD(g, q)
		}
		if _, constant := g.IsConst(); constant || g.Err() != nil {
			continue
		}
		if q, ok := p.DivExact(g); ok {
			if _, constant := q.IsConst(); !constant {
				return append(split(g), split(q)...)
			}
		}
	}
	for _, v := range p.Vars() {
		if q, r, ok := quadratic(p, v); ok {
			return append(split(q), split(r)...)
		}
	}
	return []algebra.Poly{p}
}

// quadratic splits a polynomial of degree two in v whose discriminant is a
// square of a polynomial.
func quadratic(p algebra.Poly, v algebra.Var) (q, r algebra.Poly, ok bool) {
	c := p.Coeffs(v)
	if len(c) != 3 {
		return q, r, false
	}
	unit, list, complete := algebra.SquareFree(c[1].Mul(c[1]).Sub(c[0].Mul(c[2]).Scale(algebra.Int(4))))
	x := unit.Big()
	num, den := new(big.Int).Sqrt(new(big.Int).Abs(x.Num())), new(big.Int).Sqrt(x.Denom())
	size := new(big.Rat).SetFrac(num, den)
	if !complete || x.Sign() <= 0 || new(big.Rat).Mul(size, size).Cmp(x) != 0 {
		return q, r, false
	}
	root := algebra.Const(algebra.FromBig(size))
	for _, f := range list {
		if f.Exp%2 != 0 {
			return q, r, false
		}
		for range f.Exp / 2 {
			root = root.Mul(f.Base)
		}
	}
	q, _ = algebra.GCD(p, c[2].Mul(algebra.Variable(v)).Scale(algebra.Int(2)).Add(c[1]).Sub(root))
	if _, constant := q.IsConst(); constant || q.Err() != nil {
		return q, r, false
	}
	r, ok = p.DivExact(q)
	_, constant := r.IsConst()
	return q, r, ok && !constant
}

// coprime takes common factors out of the polynomials.
func (s *factoring) coprime() bool {
	for i := 0; i < len(s.list); i++ {
		for k := 0; k < i; k++ {
			a, b := s.list[k], s.list[i]
			if len(a.poly.Vars()) == 0 || len(b.poly.Vars()) == 0 {
				continue
			}
			g, _ := algebra.GCD(a.poly, b.poly)
			if _, constant := g.IsConst(); constant || g.Err() != nil {
				continue
			}
			p, fits := a.poly.DivExact(g)
			q, also := b.poly.DivExact(g)
			if !fits || !also || len(s.list) > 4*mostFactors {
				return false
			}
			s.list = slices.Delete(slices.Delete(s.list, i, i+1), k, k+1)
			if !s.add(p, a.power, true) || !s.add(q, b.power, true) || a.power+b.power != 0 && !s.add(g, a.power+b.power, true) {
				return false
			}
			i = -1
			break
		}
	}
	return true
}

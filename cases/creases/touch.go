package creases

import (
	"math/big"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/quadrature/branches"
)

// orders remembers which branches are shown to be nowhere below others.
type orders struct {
	c    *combination
	done map[[2]int]int
}

// of is 1 where branch i is shown to be nowhere below branch j, -1 where it is
// nowhere above it, otherwise 0.
func (o *orders) of(i, j int) int {
	if i > j {
		return -o.of(j, i)
	}
	s, ok := o.done[[2]int{i, j}]
	if !ok {
		s = o.c.touching(i, j)
		o.done[[2]int{i, j}] = s
	}
	return s
}

// settle adds to what is known of a pair. It reports false where the two touch at
// most, which makes no crease.
func (o *orders) settle(p *branches.Pair) bool {
	if o.of(p.First, p.Second) != 0 {
		return false
	}
	for k, r := range p.Known {
		if k == p.First || k == p.Second || r != branches.Open {
			continue
		}
		for _, i := range [2]int{p.First, p.Second} {
			switch o.of(i, k) {
			case 1:
				p.Known[k] = branches.Below
			case -1:
				p.Known[k] = branches.Above
			}
		}
	}
	return true
}

// touching is orders.of by exact arithmetic. It decides where the difference of
// two branches is a + b r with a number b, not zero, and
// a root r of a quadratic function q, and b² q - a² is a quadratic function that is
// nowhere negative: then |b r| >= |a|. So a cone touches its tangent planes: where
// the two are equal their gradients are. The
// root must be smooth but on a set of codimension two or more, which it is where q
// is a sum of two or more independent squares.
func (c *combination) touching(i, j int) int {
	ring := c.exact.Ring
	list := c.s.shape.branches
	x, err := c.in.Scalar(formula.NewSum(formula.Term{X: list[i].node}, formula.Term{Neg: true, X: list[j].node}))
	if err != nil || ring.Err(x) != nil {
		return 0
	}
	p, ok := x.IsPoly()
	if !ok {
		return 0
	}
	root, found := algebra.Var(0), false
	for _, v := range p.Vars() {
		if s := ring.Symbol(v); s.Kind == jet.Root && s.Degree == 2 && len(ring.Support(jet.Of(v))) > 0 {
			if found {
				return 0
			}
			root, found = v, true
		}
	}
	if !found {
		return 0
	}
	coeffs := p.Coeffs(root)
	if len(coeffs) != 2 {
		return 0
	}
	b, ok := coeffs[1].IsConst()
	under, whole := ring.Symbol(root).Arg.IsPoly()
	if !ok || !whole {
		return 0
	}
	a := coeffs[0]
	rest := algebra.FromPoly(under).Scale(b).Scale(b).Sub(algebra.FromPoly(a).Mul(algebra.FromPoly(a)))
	rest, err = ring.Reduce(rest)
	if err != nil || ring.Err(rest) != nil {
		return 0
	}
	r, ok := rest.IsPoly()
	if !ok {
		return 0
	}
	if rank, ok := c.squares(under); !ok || rank < 2 {
		return 0
	}
	if _, ok = c.squares(r); !ok {
		return 0
	}
	return b.Big().Sign()
}

// squares reports whether a polynomial in the coordinates of degree two or less,
// with rational coefficients, is a sum of squares of affine functions, which is
// whether it is nowhere negative, and of how many independent ones: symmetric
// elimination of the matrix of its quadratic form.
func (c *combination) squares(p algebra.Poly) (rank int, ok bool) {
	n := len(c.set.Coordinates)
	place := map[algebra.Var]int{}
	for i := range n {
		place[c.exact.Ring.CoordinateVar(i)] = i
	}
	m := make([][]*big.Rat, n+1)
	for i := range m {
		m[i] = make([]*big.Rat, n+1)
		for j := range m[i] {
			m[i][j] = new(big.Rat)
		}
	}
	half := big.NewRat(1, 2)
	for mono, coef := range p.Terms() {
		at := []int{}
		for _, pw := range mono.Powers() {
			k, known := place[pw.Var]
			if !known || len(at)+pw.Exp > 2 {
				return 0, false
			}
			for range pw.Exp {
				at = append(at, k)
			}
		}
		for len(at) < 2 {
			at = append(at, n)
		}
		v := new(big.Rat).Mul(coef.Big(), half)
		m[at[0]][at[1]].Add(m[at[0]][at[1]], v)
		m[at[1]][at[0]].Add(m[at[1]][at[0]], v)
	}
	t := new(big.Rat)
	for k := range m {
		switch m[k][k].Sign() {
		case -1:
			return 0, false
		case 0:
			for _, v := range m[k][k:] {
				if v.Sign() != 0 {
					return 0, false
				}
			}
			continue
		}
		rank++
		for i := k + 1; i <= n; i++ {
			f := new(big.Rat).Quo(m[i][k], m[k][k])
			for j := k + 1; j <= n; j++ {
				m[i][j].Sub(m[i][j], t.Mul(f, m[k][j]))
			}
		}
	}
	return rank, true
}

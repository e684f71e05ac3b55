package entropy

import (
	"math"
	"math/big"

	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// maxProfileDegree bounds the degree in s of what is integrated in closed
// form.
const maxProfileDegree = 24

var twoRat = big.NewRat(2, 1)

// ProfileProgram is a profile cost compiled to float64. It is not safe for
// concurrent use.
type ProfileProgram struct {
	dim             int
	degree, bending int // of R and L along the segment, -1 where not polynomial
	taylor, along   *program.Program
	ws, wsAlong     *program.Workspace
	in, out         []float64
}

// Compile compiles the cost with values for the constants in R and L. A
// constant without a value is an error.
func (p *Profile) Compile(constants map[string]float64) (*ProfileProgram, error) {
	n := len(p.set.Coordinates)
	var inputs []Input
	for i := range n {
		inputs = append(inputs, Input{Kind: CoordinateInput, Place: i})
	}
	for i := range n {
		inputs = append(inputs, Input{Kind: JetInput, Index: jet.Index{}.Plus(i)})
	}
	for i := range n {
		inputs = append(inputs, Input{Kind: JetInput, Index: jet.Index{}.Plus(i), Side: jet.Difference})
	}
	for i := range n {
		inputs = append(inputs, Input{Kind: NormalInput, Place: i})
	}
	for i := range n {
		for j := i; j < n; j++ {
			inputs = append(inputs, Input{Kind: JetInput, Index: jet.Index{}.Plus(i).Plus(j)})
		}
	}
	in, num := p.set.NewNumeric(constants, inputs...)
	num.Closed = true
	r, err := in.Scalar(p.set.Model.Residual)
	if err != nil {
		return nil, err
	}
	l, err := in.Scalar(p.set.Model.Bending)
	if err != nil {
		return nil, err
	}
	b := num.Builder
	jump := func(i int) program.Ref { return b.Input(2*n + i) }
	normal := func(i int) program.Ref { return b.Input(3*n + i) }
	// L is linear in the Hessian: its derivative in the direction q ⊗ ν.
	l = b.Diff(l, func(k int) program.Ref {
		in := num.inputs[k]
		if in.Kind != JetInput || in.Index.Order() != 2 {
			return 0
		}
		var at []int
		for i, times := range in.Index {
			for range times {
				at = append(at, i)
			}
		}
		one, two := b.Mul(jump(at[0]), normal(at[1])), b.Mul(jump(at[1]), normal(at[0]))
		if one == two {
			return one
		}
		return b.Mul(b.Const(0.5), b.Add(one, two))
	})
	pp := &ProfileProgram{dim: n, degree: -1, bending: -1, in: make([]float64, len(inputs)), out: make([]float64, 2)}
	if pp.along, err = num.Compile(r, l); err != nil {
		return nil, err
	}
	pp.wsAlong = pp.along.NewWorkspace()
	if !p.Polynomial() {
		return pp, nil
	}
	// Taylor coefficients at the minus trace: c_k = D^k/k!, D p = q.
	pp.degree, pp.bending = p.degree, p.bendingDegree
	series := func(x program.Ref, degree int) []program.Ref {
		out := []program.Ref{x}
		for k := 1; k <= degree; k++ {
			x = b.Diff(x, func(k int) program.Ref {
				if in := num.inputs[k]; in.Kind == JetInput && in.Side == jet.NoSide && in.Index.Order() == 1 {
					return jump(k - n)
				}
				return 0
			})
			x = b.Quo(x, b.Const(float64(k)))
			out = append(out, x)
		}
		return out
	}
	outs := append(series(r, pp.degree), series(l, pp.bending)...)
	if pp.taylor, err = num.Compile(outs...); err != nil {
		return nil, err
	}
	pp.ws, pp.out = pp.taylor.NewWorkspace(), make([]float64, len(outs))
	return pp, nil
}

// Polynomial reports whether Cost is available.
func (p *ProfileProgram) Polynomial() bool { return p.degree >= 0 }

func (p *ProfileProgram) set(x, at, plus, minus, nu []float64) {
	n := p.dim
	copy(p.in[:n], x[:n])
	copy(p.in[n:2*n], at[:n])
	for i := range n {
		p.in[2*n+i] = plus[i] - minus[i]
	}
	copy(p.in[3*n:4*n], nu[:n])
}

// Integrand is |R(p)| |L(q ⊗ ν)| at p = minus + s (plus - minus), at the point
// x and for the unit normal nu; every slice has one element for each
// coordinate.
func (p *ProfileProgram) Integrand(s float64, x, plus, minus, nu []float64) float64 {
	p.set(x, minus, plus, minus, nu)
	for i := range p.dim {
		p.in[p.dim+i] = (1-s)*minus[i] + s*plus[i]
	}
	p.along.Eval(p.wsAlong, p.in, p.out)
	return math.Abs(p.out[0]) * math.Abs(p.out[1])
}

// Cost is the integral where R and L are polynomial in the gradient, and a
// bound of what was left out in the neighbourhood of changes of sign; rounding
// is not in the bound. The traces are taken to be on the well: R is
// s (1 - s) times a polynomial, so that for a quadratic residual the cost is
// |c| |L(q ⊗ ν)|/6 with c the coefficient of s². It panics where Polynomial is
// false.
func (p *ProfileProgram) Cost(x, plus, minus, nu []float64) (cost, bound float64) {
	if p.degree < 2 {
		return 0, 0 // R is affine and vanishes at both ends
	}
	p.set(x, minus, plus, minus, nu)
	p.taylor.Eval(p.ws, p.in, p.out)
	r, l := p.out[:p.degree+1], p.out[p.degree+1:]
	if p.degree == 2 && p.bending == 0 {
		return math.Abs(r[2]) * math.Abs(l[0]) / 6, 0
	}
	r[0], r[1] = 0, 0
	for _, c := range r[2:] {
		r[1] -= c
	}
	prod := make([]float64, p.degree+p.bending+1)
	for i, a := range r {
		for j, b := range l {
			prod[i+j] += a * b
		}
	}
	return absIntegral(prod)
}

// absIntegral is the integral over [0, 1] of the absolute value of the
// polynomial with the given coefficients, and a bound of what was left out.
// Where its Bernstein coefficients are of one sign the integral is their mean;
// elsewhere the interval is halved (de Casteljau).
func absIntegral(coefs []float64) (value, bound float64) {
	const deepest = 48
	n := len(coefs) - 1
	// b_j = Σ_i binom(j, i)/binom(n, i) a_i
	b := make([]float64, n+1)
	for j := range b {
		ratio := 1.0
		for i := 0; i <= j; i++ {
			b[j] += ratio * coefs[i]
			if i < n {
				ratio *= float64(j-i) / float64(n-i)
			}
		}
	}
	var walk func(b []float64, width float64, depth int)
	walk = func(b []float64, width float64, depth int) {
		var pos, neg bool
		var sum, most float64
		for _, c := range b {
			pos, neg = pos || c > 0, neg || c < 0
			sum += c
			most = math.Max(most, math.Abs(c))
		}
		if !pos || !neg {
			value += width * math.Abs(sum) / float64(len(b))
			return
		}
		if depth == deepest || math.IsNaN(sum) {
			value += width * math.Abs(sum) / float64(len(b))
			bound += width * most
			return
		}
		left, right := halves(b, func(a, c float64) float64 { return (a + c) / 2 })
		walk(left, width/2, depth+1)
		walk(right, width/2, depth+1)
	}
	walk(b, 1, 0)
	return value, bound
}

// halves are the Bernstein coefficients on the two halves of the interval.
func halves[T any](b []T, mean func(a, c T) T) (left, right []T) {
	n := len(b)
	left, right = make([]T, n), make([]T, n)
	row := append([]T(nil), b...)
	for k := range n {
		left[k], right[n-1-k] = row[0], row[n-1-k]
		for i := 0; i < n-1-k; i++ {
			row[i] = mean(row[i], row[i+1])
		}
	}
	return left, right
}

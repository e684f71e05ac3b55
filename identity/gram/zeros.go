package gram

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"

	"creaseproof/entropy/algebra"

	"gonum.org/v1/gonum/mat"
)

// numeric evaluates a polynomial with its first and second derivatives in
// float64.
type numeric struct {
	vars  []algebra.Var
	coefs []float64
	exps  [][]int
}

func newNumeric(p algebra.Poly, vars []algebra.Var) *numeric {
	f := &numeric{vars: vars, exps: support(p, vars)}
	for _, c := range p.Terms() {
		f.coefs = append(f.coefs, c.Float64())
	}
	return f
}

// value is p(x), and the sum of the absolute terms.
func (f *numeric) value(x []float64) (v, size float64) {
	for t, c := range f.coefs {
		for i, e := range f.exps[t] {
			for range e {
				c *= x[i]
			}
		}
		v += c
		size += math.Abs(c)
	}
	return v, size
}

// derivatives fills gradient and Hessian.
func (f *numeric) derivatives(x, g []float64, h *mat.SymDense) {
	n := len(x)
	for i := range g {
		g[i] = 0
	}
	h.Zero()
	power := func(x float64, e int) float64 {
		y := 1.0
		for range e {
			y *= x
		}
		return y
	}
	for t, c := range f.coefs {
		e := f.exps[t]
		for i := range n {
			if e[i] == 0 {
				continue
			}
			for k := i; k < n; k++ {
				if e[k] == 0 || k == i && e[i] < 2 {
					continue
				}
				y := c
				if k == i {
					y *= float64(e[i]*(e[i]-1)) * power(x[i], e[i]-2)
				} else {
					y *= float64(e[i]*e[k]) * power(x[i], e[i]-1) * power(x[k], e[k]-1)
				}
				for j := range n {
					if j != i && j != k {
						y *= power(x[j], e[j])
					}
				}
				h.SetSym(i, k, h.At(i, k)+y)
			}
			y := c * float64(e[i]) * power(x[i], e[i]-1)
			for j := range n {
				if j != i {
					y *= power(x[j], e[j])
				}
			}
			g[i] += y
		}
	}
}

// zeroWork bounds the multiplications of all descents to zeros together.
const zeroWork = 400_000_000

// Zeros are numerical zeros of the target at which the constraints hold, as
// guesses of exact ones: for each, values of the variables near which exact
// zeros may be.
func Zeros(ctx context.Context, p *Problem) []map[algebra.Var]float64 {
	vars := p.allVars()
	var out []map[algebra.Var]float64
	for _, z := range p.numericalZeros(ctx, vars, 4*len(vars)+20) {
		m := map[algebra.Var]float64{}
		for i, v := range vars {
			m[v] = z[i]
		}
		out = append(out, m)
	}
	return out
}

// numericalZeros looks for zeros of the target at which the constraints hold,
// by damped Newton steps from random starts with one variable and all positive
// constants held. They only guide the facial reduction.
func (p *Problem) numericalZeros(ctx context.Context, vars []algebra.Var, starts int) [][]float64 {
	f := newNumeric(p.Target, vars)
	cons := make([]*numeric, 0, len(p.Positive))
	fixed := make([]bool, len(vars))
	for i, g := range p.Positive {
		if !allIn(g.Poly, vars) {
			continue
		}
		cons = append(cons, newNumeric(g.Poly, vars))
		if v, ok := p.sign(i); ok {
			fixed[slices.Index(vars, v)] = true
		}
	}
	n := len(vars)
	cost := 40 * len(f.coefs) * n * n * n // of one descent, roughly
	starts = min(starts, zeroWork/max(cost, 1))
	rng := rand.New(rand.NewPCG(7, uint64(n)))
	var out [][]float64
	for s := range starts {
		if ctx.Err() != nil {
			return out
		}
		x := make([]float64, len(vars))
		for i := range x {
			x[i] = rng.NormFloat64()
			if fixed[i] {
				x[i] = math.Abs(x[i]) + 0.1
			}
		}
		hold := slices.Clone(fixed)
		if len(vars) > 1 {
			hold[s%len(vars)] = true
		}
		if p.descend(f, x, hold) {
			good := true
			for _, c := range cons {
				v, size := c.value(x)
				good = good && v > -1e-10*size
			}
			if good {
				out = append(out, x)
			}
		}
	}
	return out
}

func allIn(p algebra.Poly, vars []algebra.Var) bool {
	for _, v := range p.Vars() {
		if !slices.Contains(vars, v) {
			return false
		}
	}
	return true
}

// descend minimises f over the variables not held. It reports true where f is
// zero to rounding in the end.
func (p *Problem) descend(f *numeric, x []float64, hold []bool) bool {
	var free []int
	for i, h := range hold {
		if !h {
			free = append(free, i)
		}
	}
	n := len(free)
	if n == 0 {
		return false
	}
	g := make([]float64, len(x))
	h := mat.NewSymDense(len(x), nil)
	sub := mat.NewSymDense(n, nil)
	step := mat.NewVecDense(n, nil)
	rhs := mat.NewVecDense(n, nil)
	mu := 1.0
	v, size := f.value(x)
	next := make([]float64, len(x))
	for range 120 {
		if size == 0 || math.IsNaN(v) {
			return false
		}
		f.derivatives(x, g, h)
		scale := 0.0
		for a, i := range free {
			rhs.SetVec(a, -g[i])
			for b, k := range free {
				if b >= a {
					sub.SetSym(a, b, h.At(i, k))
				}
			}
			scale = max(scale, math.Abs(h.At(i, i)))
		}
		if scale == 0 {
			scale = 1
		}
		values, vectors, ok := eigen(sub)
		if !ok {
			return false
		}
		// |Hessian| + mu: a descent direction whatever the signature.
		step.Zero()
		for c, lam := range values {
			col := vectors.ColView(c)
			d := mat.Dot(col, rhs) / (math.Abs(lam) + mu*1e-3*scale + 1e-14*scale)
			step.AddScaledVec(step, d, col)
		}
		copy(next, x)
		for a, i := range free {
			next[i] += step.AtVec(a)
		}
		w, wsize := f.value(next)
		if w <= v || math.Abs(w) < 1e-15*wsize {
			moved := mat.Norm(step, 2)
			copy(x, next)
			v, size = w, wsize
			mu = max(mu/8, 1e-12)
			if math.Abs(v) <= 1e-15*size && moved < 1e-11*(1+norm(x)) {
				break
			}
		} else if mu *= 10; mu > 1e12 {
			break
		}
	}
	return math.Abs(v) <= 1e-12*size && norm(x) < 1e6
}

func norm(x []float64) float64 {
	s := 0.0
	for _, y := range x {
		s += y * y
	}
	return math.Sqrt(s)
}

// atNumericalZeros restricts every block by the span of the basis vectors at
// numerical zeros, where that span is recognised as rational.
func (a *ansatz) atNumericalZeros(zeros [][]float64) {
	for _, b := range a.blocks {
		if b.order() == 0 || b.multiplier || !allIn(b.factor, a.vars) {
			continue
		}
		f := newNumeric(b.factor, a.vars)
		var vecs [][]float64
		for _, z := range zeros {
			if len(z) < len(a.vars) {
				continue // a multiplier holds more than the target
			}
			if v, size := f.value(z); v <= 1e-7*size {
				continue
			}
			vec := make([]float64, b.order())
			for i, m := range b.basis {
				x := 1.0
				for _, pw := range m.Powers() {
					x *= math.Pow(z[slices.Index(a.vars, pw.Var)], float64(pw.Exp))
				}
				for r, c := range b.face[i] {
					if !c.IsZero() {
						vec[r] += c.Float64() * x
					}
				}
			}
			if n := norm(vec); n > 0 {
				for r := range vec {
					vec[r] /= n
				}
				vecs = append(vecs, vec)
			}
		}
		if span, ok := rationalSpan(vecs, 1e-5, 1e-6); ok && len(span) < b.order() {
			b.restrict(span)
		}
	}
}

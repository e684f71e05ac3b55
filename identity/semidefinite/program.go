package semidefinite

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/floats"
)

// program is a Problem with merged entries, rows of norm one, and b and C of
// norm at most one. With the scales below, a quantity of the Problem is
// X = beta X', z = beta z', S = gamma S', y_i = gamma y'_i / norm_i.
type program struct {
	shape
	rows        []int     // the row of the Problem for each row kept
	norm        []float64 // its norm
	b           []float64
	c           element
	freeCost    []float64
	free        []float64 // F in rows
	parts       [][]part  // for each block, by decreasing count of entries
	beta, gamma float64

	// Denominators of the relative residuals, in units of the Problem.
	primalScale, dualScale float64
}

// part is the part of one row in one block: the entries v at (p, q), p <= q,
// and their weights in an inner product, twice v off the diagonal.
type part struct {
	row     int
	p, q    []int
	v, w    []float64
	support []int // the indices that occur in p and q, ascending
	// packed has w for all of the upper triangle in rows, where that is not much
	// longer; a product with it is several times faster.
	packed []float64
}

// merge returns a sorted by place, with p <= q, without zeros and repetitions.
func merge(a SparseSym) SparseSym {
	a = slices.Clone(a)
	for i, e := range a {
		if e.Row > e.Col {
			a[i].Row, a[i].Col = e.Col, e.Row
		}
	}
	slices.SortStableFunc(a, func(x, y Entry) int {
		return cmp.Or(cmp.Compare(x.Block, y.Block), cmp.Compare(x.Row, y.Row), cmp.Compare(x.Col, y.Col))
	})
	out := a[:0]
	for _, e := range a {
		if k := len(out) - 1; k >= 0 && out[k].Block == e.Block && out[k].Row == e.Row && out[k].Col == e.Col {
			out[k].Value += e.Value
			continue
		}
		out = append(out, e)
	}
	out = slices.DeleteFunc(out, func(e Entry) bool { return e.Value == 0 })
	if len(out) == 0 {
		return nil
	}
	return out
}

// weight is the factor of an entry in an inner product.
func (e Entry) weight() float64 {
	if e.Row == e.Col {
		return 1
	}
	return 2
}

func (a SparseSym) norm() float64 {
	var sum float64
	for _, e := range a {
		sum = math.Hypot(sum, math.Sqrt(e.weight())*e.Value)
	}
	return sum
}

// merged returns p with merged matrices, and the rows of F.
func (p *Problem) merged() (Problem, [][]float64) {
	q := Problem{Blocks: p.Blocks, B: p.B, Free: p.Free, C: merge(p.C), A: make([]SparseSym, len(p.A))}
	f := make([][]float64, len(p.A))
	for i := range p.A {
		q.A[i] = merge(p.A[i])
		f[i] = make([]float64, len(p.Free))
	}
	for k, v := range p.Free {
		for _, t := range v.Terms {
			f[t.Row][k] += t.Value
		}
	}
	return q, f
}

// compile scales the rows of p, which is merged, that keep selects.
func compile(p *Problem, f [][]float64, keep []int, opt Options) *program {
	g := &program{shape: p.Blocks, rows: keep, parts: make([][]part, len(p.Blocks)), gamma: 1}
	nf := len(p.Free)
	for row, i := range keep {
		norm := math.Hypot(p.A[i].norm(), floats.Norm(f[i], 2))
		g.norm = append(g.norm, norm)
		g.b = append(g.b, p.B[i]/norm)
		for k := range nf {
			g.free = append(g.free, f[i][k]/norm)
		}
		for a := p.A[i]; len(a) > 0; {
			end := slices.IndexFunc(a, func(e Entry) bool { return e.Block != a[0].Block })
			if end < 0 {
				end = len(a)
			}
			g.parts[a[0].Block] = append(g.parts[a[0].Block], newPart(row, a[:end], p.Blocks[a[0].Block], norm))
			a = a[end:]
		}
	}
	for _, parts := range g.parts {
		slices.SortStableFunc(parts, func(x, y part) int { return cmp.Compare(len(y.v), len(x.v)) })
	}
	g.beta = max(1, floats.Norm(g.b, 2))
	floats.Scale(1/g.beta, g.b)
	g.c = g.zero()
	g.freeCost = make([]float64, nf)
	g.dualScale = 1
	if opt.Mode != AnalyticCentre {
		for k, v := range p.Free {
			g.freeCost[k] = v.Cost
		}
		p.addMatrix(g.c, 1, p.C)
		norm := math.Hypot(g.c.norm(), floats.Norm(g.freeCost, 2))
		g.dualScale = 1 + norm
		if opt.Mode == Optimum {
			g.gamma = max(1, norm)
			g.c.scale(1 / g.gamma)
			floats.Scale(1/g.gamma, g.freeCost)
		}
	}
	g.primalScale = 1 + floats.Norm(p.B, 2)
	return g
}

func newPart(row int, a SparseSym, n int, norm float64) part {
	r := part{row: row}
	for _, e := range a {
		r.p, r.q = append(r.p, e.Row), append(r.q, e.Col)
		r.v = append(r.v, e.Value/norm)
		r.w = append(r.w, e.weight()*e.Value/norm)
		r.support = append(r.support, e.Row, e.Col)
	}
	slices.Sort(r.support)
	r.support = slices.Compact(r.support)
	if n > 0 && 3*len(r.v) >= n*(n+1)/2 {
		r.packed = make([]float64, n*(n+1)/2)
		for t, p := range r.p {
			r.packed[p*n-p*(p+1)/2+r.q[t]] = r.w[t]
		}
	}
	return r
}

// apply adds a <A_i, X> to dst_i, for symmetric X.
func (g *program) apply(dst []float64, a float64, x element) {
	for k, n := range g.shape {
		xk := x[k]
		for _, r := range g.parts[k] {
			var sum float64
			if n < 0 {
				for t, p := range r.p {
					sum += r.w[t] * xk[p]
				}
			} else {
				for t, p := range r.p {
					sum += r.w[t] * xk[p*n+r.q[t]]
				}
			}
			dst[r.row] += a * sum
		}
	}
}

// adjoint adds a Σ y_i A_i to dst.
func (g *program) adjoint(dst element, a float64, y []float64) {
	for k, n := range g.shape {
		dk := dst[k]
		for _, r := range g.parts[k] {
			ay := a * y[r.row]
			if n < 0 {
				for t, p := range r.p {
					dk[p] += ay * r.v[t]
				}
				continue
			}
			for t, p := range r.p {
				v := ay * r.v[t]
				q := r.q[t]
				dk[p*n+q] += v
				if p != q {
					dk[q*n+p] += v
				}
			}
		}
	}
}

// applyFree adds a F z to dst.
func (g *program) applyFree(dst []float64, a float64, z []float64) {
	if nf := len(z); nf > 0 {
		for i := range dst {
			dst[i] += a * floats.Dot(g.free[i*nf:(i+1)*nf], z)
		}
	}
}

// adjointFree adds a F'y to dst.
func (g *program) adjointFree(dst []float64, a float64, y []float64) {
	if nf := len(dst); nf > 0 {
		for i, v := range y {
			floats.AddScaled(dst, a*v, g.free[i*nf:(i+1)*nf])
		}
	}
}

// addMatrix adds t a to dst.
func (p *Problem) addMatrix(dst element, t float64, a SparseSym) {
	for _, e := range a {
		n := p.Blocks[e.Block]
		switch {
		case n < 0:
			dst[e.Block][e.Row] += t * e.Value
		case e.Row == e.Col:
			dst[e.Block][e.Row*n+e.Row] += t * e.Value
		default:
			dst[e.Block][e.Row*n+e.Col] += t * e.Value
			dst[e.Block][e.Col*n+e.Row] += t * e.Value
		}
	}
}

// inner returns <a, X>.
func (p *Problem) inner(a SparseSym, x element) float64 {
	var sum float64
	for _, e := range a {
		if n := p.Blocks[e.Block]; n < 0 {
			sum += e.Value * x[e.Block][e.Row]
		} else {
			sum += e.weight() * e.Value * x[e.Block][e.Row*n+e.Col]
		}
	}
	return sum
}

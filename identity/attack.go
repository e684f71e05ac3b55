package identity

import (
	"math"
	"math/big"
	"math/rand/v2"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/adversary"
)

// attack minimises the margin from the worst samples and from random starts.
func (t *task) attack(starts [][]float64) (adversary.Result, error) {
	d := t.d
	n := len(t.pts.Free) + len(t.pts.Angles)
	p := adversary.Problem{Dim: n, Lower: make([]float64, n), Upper: make([]float64, n)}
	for i := range n {
		if p.Lower[i], p.Upper[i] = math.Inf(-1), math.Inf(1); i < len(t.pts.Free) {
			p.Lower[i], p.Upper[i] = t.bounds(t.pts.Free[i])
		}
	}
	outs := t.margin.NumOutputs()
	eval := func(x []float64) []float64 {
		out := make([]float64, outs)
		t.margin.Eval(t.margin.NewWorkspace(), x, out)
		return out
	}
	p.Value = func(x []float64) float64 { return eval(x)[0] }
	p.Gradient = func(grad, x []float64) { copy(grad, eval(x)[1:]) }
	p.Starts = func(i int, x []float64) {
		if i%2 == 0 && i/2 < len(starts) {
			copy(x, starts[i/2])
			return
		}
		rng := rand.New(rand.NewPCG(d.opt.Seed, uint64(i)+1<<32))
		for k := range x {
			x[k] = rng.NormFloat64()
			if i%3 == 1 {
				x[k] *= math.Exp(3 * rng.NormFloat64())
			}
			x[k] = math.Min(math.Max(x[k], p.Lower[k]), p.Upper[k])
			if x[k] == 0 && p.Lower[k] == 0 {
				x[k] = math.Abs(rng.NormFloat64())
			}
		}
	}
	p.Verify = func(x []*big.Rat) bool {
		at, ok := t.point(x)
		return ok && d.FalseAt(t.g, t.pts, at)
	}
	p.Polish = func(x []*big.Rat, i int) (*big.Rat, bool) {
		at, ok := t.point(x)
		if !ok || i >= len(t.pts.Free) {
			return nil, false
		}
		v := t.pts.Free[i]
		values := map[algebra.Var]algebra.Rat{}
		for _, w := range t.g.Poly.Vars() {
			y, ok := d.Ring.Exact(jet.Of(w), at)
			if !ok {
				return nil, false
			}
			if w != v {
				values[w] = y
			}
		}
		co := t.g.Poly.EvalPartial(values).Coeffs(v)
		if len(co) != 3 {
			return nil, false
		}
		a, _ := co[2].IsConst()
		b, _ := co[1].IsConst()
		y, ok := b.Neg().Quo(a.Add(a))
		if !ok || a.Sign() <= 0 {
			return nil, false
		}
		return y.Big(), true
	}
	n = int(within(int64(d.opt.Starts), descentWork, int64(t.margin.NumOps()+exactTerm*t.g.Poly.Len())))
	return adversary.Search(d.Ctx, p, adversary.Options{Seed: d.opt.Seed, Starts: n, Jobs: d.opt.Jobs})
}

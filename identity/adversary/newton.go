package adversary

import (
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// noise is the size of differences of the margin that rounding may cause.
const noise = 1e-15

// newton improves y in place by at most n Newton steps and returns the value
// and the number of steps. The Hessian comes from central differences of
// the gradient; its eigenvalues are replaced by their absolute values, and the
// step is limited in each eigendirection. A step is taken where the value falls,
// or where it stays the same up to rounding and the gradient is halved: this
// settles the point beyond what the values resolve.
func newton(v *view, y []float64, n int) (float64, int) {
	dim := len(y)
	f := v.at(y)
	if dim == 0 || f >= large {
		return f, 0
	}
	g, trial, gTrial := make([]float64, dim), make([]float64, dim), make([]float64, dim)
	v.gradientAt(g, y)
	radius := 1.0
	steps := 0
	for ; steps < n && v.ctx.Err() == nil; steps++ {
		norm := floats.Norm(g, math.Inf(1))
		if norm == 0 {
			break
		}
		step, ok := newtonStep(v, y, g, radius)
		if !ok {
			break
		}
		moved := false
		before := f
		for t := 1.0; t > 1e-7; t /= 8 {
			floats.AddScaledTo(trial, y, t, step)
			ft := v.at(trial)
			if ft > f+noise {
				continue
			}
			v.gradientAt(gTrial, trial)
			if ft < f-noise || floats.Norm(gTrial, math.Inf(1)) < norm/2 {
				moved = true
				f = ft
				copy(y, trial)
				copy(g, gTrial)
				radius = math.Min(4, math.Max(radius*4*t, 1e-3))
				break
			}
		}
		if !moved {
			break
		}
		// Creeping along a valley of equal values leads nowhere.
		if before-f < 1e-3*math.Abs(f) && floats.Norm(g, math.Inf(1)) > norm/2 {
			break
		}
	}
	return f, steps
}

func newtonStep(v *view, y, g []float64, radius float64) ([]float64, bool) {
	dim := len(y)
	h := mat.NewSymDense(dim, nil)
	up, down, z := make([]float64, dim), make([]float64, dim), append([]float64(nil), y...)
	full := mat.NewDense(dim, dim, nil)
	for j := range dim {
		d := 1e-5 * math.Max(math.Abs(y[j]), 1e-2)
		z[j] = y[j] + d
		v.gradientAt(up, z)
		z[j] = y[j] - d
		v.gradientAt(down, z)
		z[j] = y[j]
		for i := range dim {
			full.Set(i, j, (up[i]-down[i])/(2*d))
		}
	}
	for i := range dim {
		for j := i; j < dim; j++ {
			h.SetSym(i, j, (full.At(i, j)+full.At(j, i))/2)
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(h, true) {
		return nil, false
	}
	values := eig.Values(nil)
	var vectors mat.Dense
	eig.VectorsTo(&vectors)
	greatest := 0.0
	for _, l := range values {
		greatest = math.Max(greatest, math.Abs(l))
	}
	floor := 1e-11 * greatest // rounding of the differences
	step := make([]float64, dim)
	for k, l := range values {
		dot := 0.0
		for i := range dim {
			dot += vectors.At(i, k) * g[i]
		}
		if dot == 0 {
			continue
		}
		c := -dot / math.Max(math.Abs(l), floor)
		if !finite(c) {
			c = -math.Copysign(radius, dot)
		}
		c = math.Min(math.Max(c, -radius), radius)
		for i := range dim {
			step[i] += c * vectors.At(i, k)
		}
	}
	return step, true
}

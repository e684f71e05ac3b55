package limit

import "creaseproof/quadrature/branches"

// Mollifier is the maximum or minimum of the branches, smoothed in the
// difference d of two values by the kernel (315/256) (1 - (d/δ)²)⁴/δ on
// |d| < δ = Width eps. More than two branches are taken up in their order, so
// that where three meet within the layer the result depends on it. A Mollifier
// is not safe for concurrent use.
type Mollifier struct {
	Width float64 // DefaultWidth if zero

	jets []Jet
}

// DefaultWidth makes both parts of the energy about equal across a wall of the
// layered model and across one of the planar eikonal model.
const DefaultWidth = 10.8

// kernel is the kernel ρ on [-1, 1], its integral from -1 and the integral of
// that, at t in [-1, 1].
func kernel(t float64) (phi, cdf, rho float64) {
	const c = 315.0 / 256
	t2 := t * t
	v := 1 - t2
	rho = c * v * v * v * v
	// ∫(1 - t²)⁴ = t - 4t³/3 + 6t⁵/5 - 4t⁷/7 + t⁹/9; from -1, 1/2 at 0.
	cdf = 0.5 + c*t*(1+t2*(-4.0/3+t2*(6.0/5+t2*(-4.0/7+t2/9))))
	// phi(-1) = 0, phi(1) = 1, phi(t) - t/2 is even.
	even := func(t2 float64) float64 {
		return c * t2 * (1.0/2 + t2*(-1.0/3+t2*(1.0/5+t2*(-1.0/14+t2/90))))
	}
	phi = t/2 + even(t2) + 0.5 - even(1)
	return phi, cdf, rho
}

// Smooth implements Smoothing.
func (m *Mollifier) Smooth(p *Problem, x []float64, eps float64, out *Jet) {
	list := jetsOf(p, x, &m.jets)
	sign := 1.0
	if p.Combine != nil && p.Combine.Op == branches.Min {
		sign = -1
	}
	width := m.Width
	if width == 0 {
		width = DefaultWidth
	}
	delta := width * eps
	out.set(&list[0])
	n := len(out.P)
	for i := 1; i < len(list); i++ {
		b := &list[i]
		t := sign * (out.U - b.U) / delta
		switch {
		case t >= 1:
			continue
		case t <= -1:
			out.set(b)
			continue
		}
		phi, cdf, rho := kernel(t)
		out.U = b.U + sign*delta*phi
		for k := range out.H {
			out.H[k] = b.H[k] + cdf*(out.H[k]-b.H[k])
		}
		for k := range n {
			for l := range n {
				out.H[k*n+l] += sign * rho / delta * (out.P[k] - b.P[k]) * (out.P[l] - b.P[l])
			}
		}
		for k := range n {
			out.P[k] = b.P[k] + cdf*(out.P[k]-b.P[k])
		}
	}
}

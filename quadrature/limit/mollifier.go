package limit

// Mollifier is the combined function u convolved in space with the kernel
// ρ(y) = c (1 - |y|²/δ²)⁴ on |y| < δ = Width eps, of integral 1. It is five
// times differentiable, symmetric in the branches, and equals every branch that
// is affine on the ball about the point. With the derivatives on the kernel,
//
//	∇(ρ*u) = ρ*∇u,  ∇²(ρ*u) = ∇ρ*∇u,
//
// so that no branch is differentiated twice and the tip of a cone does no harm.
// Branches are evaluated up to the distance δ outside of the domain.
//
// Jets come by quadrature, exact to rounding where the branches in the ball are
// affine and their gradients lie on a line, otherwise with a relative error of
// about 1e-9 in the plane and 1e-6 in space, more where a branch bends much within
// a ball. In space, balls in which three branches meet that are not all affine
// take a hundred times as long as others, with an error of about 1e-5.
//
// A Mollifier is not safe for concurrent use.
type Mollifier struct {
	Width float64 // DefaultWidth if zero

	rules  [2]*orders // usual and finer ones
	dim    int
	work   ball
	approx bool // the last jet came by a rule that is not exact
}

// DefaultWidth makes both parts of the energy about equal across a wall with a
// jump of the gradient of length 1, for the layered and the planar eikonal model:
// they are equal with 11.31 in the plane and with 11.80 in space. Across a jump of
// length q the equal width is 1/q times that, the least energy of a mollified
// wall, 0.7 % above the sharp one.
const DefaultWidth = 11.5

// Radius is the radius δ of the kernel.
func (m *Mollifier) Radius(eps float64) float64 {
	if m.Width == 0 {
		return DefaultWidth * eps
	}
	return m.Width * eps
}

// Smooth implements Smoothing.
func (m *Mollifier) Smooth(p *Problem, x []float64, eps float64, out *Jet) {
	m.smooth(p, x, eps, 0, out)
}

// finer is Smooth with finer rules, if the last jet came by a rule that is not
// exact.
func (m *Mollifier) finer(p *Problem, x []float64, eps float64, out *Jet) bool {
	if !m.approx {
		return false
	}
	m.smooth(p, x, eps, 1, out)
	return true
}

func (m *Mollifier) begin() { m.work = ball{} }

func (m *Mollifier) reach(eps float64) float64 { return m.Radius(eps) }

func (m *Mollifier) accuracy(p *Problem) float64 {
	affine := 0
	for _, a := range p.Affine {
		if a {
			affine++
		}
	}
	switch {
	case affine == p.Branches && affine == 2:
		return 0
	case len(p.Domain.Lo) < 3:
		return 1e-8
	case affine == p.Branches:
		return 1e-6
	}
	if p.Branches > 2 {
		return 1e-4
	}
	return 1e-5
}

func (m *Mollifier) smooth(p *Problem, x []float64, eps float64, level int, out *Jet) {
	n := len(x)
	if m.dim != n {
		m.dim, m.rules = n, [2]*orders{newOrders(n, false), newOrders(n, true)}
	}
	b := &m.work
	b.begin(p, x, m.Radius(eps), m.rules[level])
	b.survey()
	b.convolve()
	m.approx = b.approx
	b.jet(out)
}

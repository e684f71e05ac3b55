package creases

import (
	"math"

	"creaseproof/quadrature"
)

// nodes evaluates a density at the nodes of a level set and checks the traces
// there, as quadrature.Integrate does on surfaces with parameters.
type nodes struct {
	tr          quadrature.Traces
	o           quadrature.Options
	d           quadrature.Density
	extent      float64 // of the domain
	reach       float64 // largest distance from the origin
	plus, minus []float64
	count       int // densities so far
	kinks       int // looks at smoothness that failed, without another in between
	bad         *quadrature.PlaceError
}

func newNodes(dim int, tr quadrature.Traces, o quadrature.Options, d quadrature.Density, box [][2]float64) *nodes {
	n := &nodes{tr: tr, o: o, d: d}
	if tr.Plus != nil {
		n.plus, n.minus = make([]float64, dim), make([]float64, dim)
	}
	for _, b := range box {
		far := math.Max(math.Abs(b[0]), math.Abs(b[1]))
		n.reach = math.Hypot(n.reach, far)
		n.extent = math.Hypot(n.extent, b[1]-b[0])
	}
	return n
}

// The relative tolerances of the checks: of the well and of the direction of
// the jump, and of continuity.
const (
	nodeTolerance   = 1e-9
	nodeContinuity  = 1024 * 0x1p-52
	smoothFails     = 4  // looks in a row that show a kink: a single one may be next to a tip
	smoothEvery     = 61 // nodes from one look at smoothness to the next
	smoothAlways    = 32 // nodes looked at in the beginning
	smoothStep      = 0x1p-20
	smoothStepRatio = 0x1p-10
)

func (n *nodes) fail(reason quadrature.Reason, what string, x []float64, residual, scale float64) *quadrature.PlaceError {
	return &quadrature.PlaceError{Reason: reason, What: what, Point: append([]float64(nil), x...), Residual: residual, Scale: scale}
}

// at is the density at a node; it is no number once a check has failed.
func (n *nodes) at(x, nu, out []float64) {
	if n.bad == nil {
		out[0], n.bad = n.density(x, nu)
	}
	if n.bad != nil {
		out[0] = math.NaN()
	}
}

// near is the density next to the surface, where the traces need not agree.
func (n *nodes) near(x, nu, out []float64) {
	if n.tr.Plus != nil {
		n.tr.Plus(x, n.plus)
		n.tr.Minus(x, n.minus)
	}
	out[0] = n.d(x, n.plus, n.minus, nu)
}

func (n *nodes) density(x, nu []float64) (float64, *quadrature.PlaceError) {
	jump := math.Inf(1)
	if n.tr.Plus != nil {
		var bad *quadrature.PlaceError
		if jump, bad = n.check(x, nu); bad != nil {
			if !(rounded(bad, n.tr, n.o.Well) && math.Abs(bad.Residual) <= loose*bad.Scale) {
				return 0, bad
			}
		}
	}
	v := n.d(x, n.plus, n.minus, nu)
	if jump == 0 && math.IsNaN(v) {
		v = 0
	}
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, n.fail(quadrature.NotFinite, "density", x, v, 0)
	}
	n.count++
	return v, nil
}

// check compares the traces at a node and gives the length of the jump of the
// gradient.
func (n *nodes) check(x, nu []float64) (jump float64, bad *quadrature.PlaceError) {
	up := n.tr.Plus(x, n.plus)
	um := n.tr.Minus(x, n.minus)
	for i, t := range [][]float64{n.plus, n.minus} {
		what := [...]string{"plus trace", "minus trace"}[i]
		if u := [...]float64{up, um}[i]; n.tr.HasValue && (math.IsNaN(u) || math.IsInf(u, 0)) {
			return 0, n.fail(quadrature.NotFinite, what, x, u, 0)
		}
		for _, g := range t {
			if math.IsNaN(g) || math.IsInf(g, 0) {
				return 0, n.fail(quadrature.NotFinite, "gradient of the "+what, x, g, 0)
			}
		}
	}
	if n.o.Well != nil {
		for i, g := range [][]float64{n.plus, n.minus} {
			what := [...]string{"plus", "minus"}[i]
			r, scale := n.o.Well(g)
			if math.IsNaN(r) || math.IsInf(r, 0) || math.IsNaN(scale) {
				return 0, n.fail(quadrature.NotFinite, "residual of the "+what+" trace", x, r, scale)
			}
			if math.Abs(r) > nodeTolerance*scale {
				return 0, n.fail(quadrature.OffWell, what, x, r, scale)
			}
		}
	}
	size := length(n.plus) + length(n.minus)
	if n.tr.HasValue {
		scale := math.Abs(up) + math.Abs(um) + size*n.reach
		if n.tr.Scale != nil {
			scale += math.Abs(n.tr.Scale(x))
		}
		tolerance := nodeContinuity
		if n.o.Continuity > 0 {
			tolerance = n.o.Continuity
		}
		if math.Abs(up-um) > tolerance*scale {
			return 0, n.fail(quadrature.Discontinuous, "surface", x, up-um, scale)
		}
	}
	q := make([]float64, len(x))
	var along float64
	for k := range q {
		q[k] = n.plus[k] - n.minus[k]
		along += q[k] * nu[k]
	}
	jump = length(q)
	for k := range q {
		q[k] -= along * nu[k]
	}
	off := length(q)
	if off > nodeTolerance*size || off > 1e-6*jump && off > 1e-12*size {
		return 0, n.fail(quadrature.NotNormal, "surface", x, off, size)
	}
	if n.tr.HasValue && (n.count < smoothAlways || n.count%smoothEvery == 0) {
		bad = n.smooth(x, nu, size)
	}
	return jump, bad
}

// smooth compares the gradient of each trace with those at two small distances
// on its own side: at a kink on the surface itself a derivative is no limit.
func (n *nodes) smooth(x, nu []float64, size float64) *quadrature.PlaceError {
	far := smoothStep * n.extent
	near := math.Max(smoothStepRatio*far, 64*0x1p-52*n.reach)
	if near > far/8 {
		return nil
	}
	at, grad := make([]float64, len(x)), make([]float64, len(x))
	for i, f := range []func(x, grad []float64) float64{n.tr.Plus, n.tr.Minus} {
		what, here, sign := "plus", n.plus, 1.0
		if i == 1 {
			what, here, sign = "minus", n.minus, -1
		}
		differs := func(h float64) float64 {
			for k := range at {
				at[k] = x[k] + sign*h*nu[k]
			}
			f(at, grad)
			for k := range grad {
				grad[k] -= here[k]
			}
			return length(grad)
		}
		one, two := differs(far), differs(near)
		if !math.IsNaN(one) && !math.IsNaN(two) && !math.IsInf(one, 0) && two > 1e-3*(size+one) && two > one/2 {
			if n.kinks++; n.kinks < smoothFails {
				return nil
			}
			return n.fail(quadrature.NotSmooth, what, x, two, size)
		}
	}
	n.kinks = 0
	return nil
}

func length(v []float64) float64 {
	var s float64
	for _, x := range v {
		s = math.Hypot(s, x)
	}
	return s
}

package quadrature

import "math"

// A Graph is the graph of a function over a region: z = f(x, y) in space over
// a Rectangle, Triangle or Disc, y = f(x) in the plane over an Interval. Its
// normal has a positive last component: plus is the side above the graph.
type Graph struct {
	Over Region
	// F returns the height over x (the coordinates but the last) and fills
	// grad with its derivatives.
	F func(x, grad []float64) float64
}

// A Region is an Interval, Rectangle, Triangle or Disc.
type Region interface {
	// chart gives the parameters and the map from them to the coordinates of
	// the base, with jac[j] the derivative by the j-th parameter, oriented
	// positively.
	chart() (n int, over [2]Range, eval func(s, x []float64, jac [][]float64), err error)
}

// An Interval is a region of the line.
type Interval Range

// A Rectangle is X × Y.
type Rectangle struct{ X, Y Range }

// A Triangle has three corners in the plane, in any order.
type Triangle [3][2]float64

// A Disc is round.
type Disc struct {
	Center [2]float64
	Radius float64
}

func (r Interval) chart() (int, [2]Range, func(s, x []float64, jac [][]float64), error) {
	return 1, [2]Range{Range(r)}, func(s, x []float64, jac [][]float64) {
		x[0], jac[0][0] = s[0], 1
	}, Range(r).check("the interval")
}

func (r Rectangle) chart() (int, [2]Range, func(s, x []float64, jac [][]float64), error) {
	eval := func(s, x []float64, jac [][]float64) {
		x[0], x[1] = s[0], s[1]
		jac[0][0], jac[0][1] = 1, 0
		jac[1][0], jac[1][1] = 0, 1
	}
	if err := r.X.check("the first side of the rectangle"); err != nil {
		return 0, [2]Range{}, nil, err
	}
	return 2, [2]Range{r.X, r.Y}, eval, r.Y.check("the second side of the rectangle")
}

func (t Triangle) chart() (int, [2]Range, func(s, x []float64, jac [][]float64), error) {
	a, b, c := t[0], t[1], t[2]
	for _, p := range t {
		if !finite(p[0]) || !finite(p[1]) {
			return 0, [2]Range{}, nil, shapeError("the triangle has a corner that is not finite")
		}
	}
	turn := orient(a, b, c)
	if turn == 0 {
		return 0, [2]Range{}, nil, shapeError("the triangle has no area: its corners lie on a line")
	}
	if turn < 0 {
		b, c = c, b
	}
	return 2, unitSquare, func(s, x []float64, jac [][]float64) {
		for i := range 2 {
			e, f := b[i]-a[i], c[i]-b[i]
			x[i] = a[i] + s[0]*(e+s[1]*f)
			jac[0][i] = e + s[1]*f
			jac[1][i] = s[0] * f
		}
	}, nil
}

func (d Disc) chart() (int, [2]Range, func(s, x []float64, jac [][]float64), error) {
	if !(d.Radius > 0) || !finite(d.Radius) || !finite(d.Center[0]) || !finite(d.Center[1]) {
		return 0, [2]Range{}, nil, shapeError("a disc needs a finite center and a positive radius, not %v", d.Radius)
	}
	return 2, [2]Range{{0, d.Radius}, {0, 2 * math.Pi}}, func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		x[0], x[1] = d.Center[0]+s[0]*cos, d.Center[1]+s[0]*sin
		jac[0][0], jac[0][1] = cos, sin
		jac[1][0], jac[1][1] = -s[0]*sin, s[0]*cos
	}, nil
}

// unitSquare is collapsed to a triangle: the first parameter runs from the
// first corner to the opposite side, the second along that side.
var unitSquare = [2]Range{{0, 1}, {0, 1}}

// Dimension is one more than that of the region.
func (g Graph) Dimension() int {
	if _, ok := g.Over.(Interval); ok {
		return 2
	}
	return 3
}

func (g Graph) pieces() ([]*piece, error) {
	if g.Over == nil || g.F == nil {
		return nil, shapeError("a graph needs a region and a function")
	}
	n, over, base, err := g.Over.chart()
	if err != nil {
		return nil, err
	}
	grad := make([]float64, n)
	eval := func(s, x []float64, jac [][]float64) {
		base(s, x[:n], jac)
		x[n] = g.F(x[:n], grad)
		for j := range n {
			var d float64
			for i, v := range grad {
				d += v * jac[j][i]
			}
			jac[j][n] = d
		}
	}
	q := &piece{dim: n + 1, n: n, over: over, eval: eval, flip: n == 1}
	if t, ok := g.Over.(Triangle); ok {
		q.vertices = unsure(t[0][:], t[1][:], t[2][:])
	}
	return []*piece{q}, nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

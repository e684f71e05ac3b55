package limit

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// gauss is a Gauss–Legendre rule on [0, 1].
type gauss struct{ x, w []float64 }

func newGauss(n int) gauss {
	g := gauss{make([]float64, n), make([]float64, n)}
	quad.Legendre{}.FixedLocations(g.x, g.w, 0, 1)
	return g
}

// orders are the numbers of nodes of the rules of a mollification.
type orders struct {
	line  gauss // along a line, on each piece
	cap   gauss // from the middle of a cap outwards
	round int   // directions of a cap in space
	ball  []node
	// Over lines and planes of lines, on a piece of a half turn and of nothing.
	half, least int
	rules       []gauss // by the number of nodes
}

// across is the rule on a piece of the given length of an angle; exact lines are
// cheap, so that there may be more of them.
func (o *orders) across(length float64, exact bool) *gauss {
	n := o.least + int(math.Ceil(float64(o.half-o.least)*math.Min(1, length/math.Pi)))
	if exact {
		n += more
	}
	return &o.rules[n]
}

const more = 5 // exact lines

// node is a node of a rule on the unit ball with the weights of ρ and of -∇ρ.
type node struct {
	y     vector
	value float64
	slope vector
}

// newOrders are the rules in n dimensions, finer ones to measure the error.
func newOrders(n int, finer bool) *orders {
	o := &orders{line: newGauss(8), cap: newGauss(12), round: 8, half: 17, least: 6}
	radial, angles, heights := 6, 14, 0
	if n == 3 {
		o.line, o.cap, o.half, o.least = newGauss(5), newGauss(9), 12, 5
		radial, angles, heights = 8, 10, 5
	}
	if finer {
		o.line, o.cap, o.round, o.half, o.least = newGauss(len(o.line.x)+2), newGauss(len(o.cap.x)+3), 12, o.half+4, o.least+3
		radial, angles = radial+3, angles+6
		if heights > 0 {
			heights += 3
		}
	}
	o.rules = make([]gauss, 1, o.half+more+1)
	for k := 1; k <= o.half+more; k++ {
		o.rules = append(o.rules, newGauss(k))
	}
	o.ball = ballRule(n, newGauss(radial), angles, heights)
	return o
}

// ballRule is a product rule on the unit ball of n dimensions: in the plane in
// |y|², in space in |y| and the height on the sphere, with equally spaced angles.
func ballRule(n int, r gauss, angles, heights int) (list []node) {
	k := newRadial(n, n)
	add := func(w float64, y ...float64) {
		var x node
		var r2 float64
		for i, v := range y {
			x.y[i] = v
			r2 += v * v
		}
		x.value = w * k.c * power(1-r2, k.k)
		for i, v := range y {
			x.slope[i] = w * k.c * 2 * k.k * power(1-r2, k.k-1) * v
		}
		list = append(list, x)
	}
	if n == 1 {
		g := newGauss(2 * len(r.x))
		for i, x := range g.x {
			add(2*g.w[i], 2*x-1)
		}
		return list
	}
	var up gauss
	if n == 3 {
		up = newGauss(heights)
	}
	for i, rho := range r.x {
		if n == 2 {
			rho = math.Sqrt(rho)
		}
		for a := range angles {
			sin, cos := math.Sincos(2 * math.Pi * (float64(a) + 0.25) / float64(angles))
			w := r.w[i] * 2 * math.Pi / float64(angles)
			if n == 2 {
				add(w/2, rho*cos, rho*sin)
				continue
			}
			for j, u := range up.x {
				z := 2*u - 1
				s := math.Sqrt(1 - z*z)
				add(2*w*up.w[j]*rho*rho, rho*s*cos, rho*s*sin, rho*z)
			}
		}
	}
	return list
}

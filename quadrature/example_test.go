package quadrature_test

import (
	"context"
	"fmt"
	"math"

	"creaseproof/quadrature"
)

// The front between u = -rho²/(2z) and u = -k is the paraboloid rho² = 2 k z.
// With the sharp density of the layered model its energy between the heights
// z0 and z1 is (2 pi k²/3) log(z1/z0).
func ExampleIntegrate() {
	const k, z0, z1 = 0.5, 0.5, 3
	front := quadrature.Patch{
		Dim:    3,
		Params: []quadrature.Range{{Lo: z0, Hi: z1}, {Lo: 0, Hi: 2 * math.Pi}},
		Map: func(s, x []float64, jac [][]float64) {
			sin, cos := math.Sincos(s[1])
			rho := math.Sqrt(2 * k * s[0])
			x[0], x[1], x[2] = rho*cos, rho*sin, s[0]
			jac[0][0], jac[0][1], jac[0][2] = k/rho*cos, k/rho*sin, 1
			jac[1][0], jac[1][1], jac[1][2] = -rho*sin, rho*cos, 0
		},
	}
	traces := quadrature.Traces{
		HasValue: true,
		Plus: func(x, grad []float64) float64 {
			r := x[0]*x[0] + x[1]*x[1]
			grad[0], grad[1], grad[2] = -x[0]/x[2], -x[1]/x[2], r/(2*x[2]*x[2])
			return -r / (2 * x[2])
		},
		Minus: func(_, grad []float64) float64 {
			clear(grad)
			return -k
		},
	}
	sharp := func(_, p, m, _ []float64) float64 {
		perp := math.Hypot(p[0]-m[0], p[1]-m[1])
		return math.Pow(perp, 4) / (12 * math.Hypot(perp, p[2]-m[2]))
	}
	well := func(p []float64) (residual, scale float64) {
		q := (p[0]*p[0] + p[1]*p[1]) / 2
		return p[2] - q, math.Abs(p[2]) + q
	}
	r, err := quadrature.Integrate(context.Background(), front, traces, sharp, quadrature.Options{Well: well})
	if err != nil {
		fmt.Println(err)
		return
	}
	exact := 2 * math.Pi * k * k / 3 * math.Log(z1/z0)
	fmt.Printf("%.10f, right to the error: %t\n", r.Energy, math.Abs(r.Energy-exact) <= r.Error)
	// Output: 0.9381630643, right to the error: true
}

// A trace off the well is refused, with the place.
func ExamplePlaceError() {
	wall := quadrature.Polygon{Vertices: [][]float64{{0, 0, 0}, {0, 1, 0}, {0, 0, 1}}}
	gradient := func(p ...float64) func(x, grad []float64) float64 {
		return func(_, grad []float64) float64 {
			copy(grad, p)
			return 0
		}
	}
	_, err := quadrature.Integrate(context.Background(), wall,
		quadrature.Traces{Plus: gradient(1, 0, 0.5), Minus: gradient(-1, 0, 0.25)},
		func(_, _, _, _ []float64) float64 { return 1 },
		quadrature.Options{Well: func(p []float64) (float64, float64) {
			q := (p[0]*p[0] + p[1]*p[1]) / 2
			return p[2] - q, math.Abs(p[2]) + q
		}})
	fmt.Println(err)
	// Output: quadrature: the minus trace is off the well at (0, 0.25, 0.5) (parameters (0.5, 0.5)), triangle of the vertices 3, 1, 2: residual -0.25 against terms of size 0.75
}

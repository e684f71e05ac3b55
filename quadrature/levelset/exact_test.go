package levelset

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// ellipsoid is the area of an ellipsoid with semi-axes a ≥ b ≥ c, 4π times the
// complete symmetric integral R_G of the squares of products of two axes (NIST
// Digital Library of Mathematical Functions 19.33.1), with R_G from R_F and R_D by 19.21.10.
func ellipsoid(a, b, c float64) float64 {
	x, y, z := a*a*b*b, a*a*c*c, b*b*c*c
	return 4 * math.Pi * carlsonG(x, z, y)
}

func carlsonG(x, y, z float64) float64 {
	return (z*mathext.EllipticRF(x, y, z) - (x-z)*(y-z)*mathext.EllipticRD(x, y, z)/3 + math.Sqrt(x*y/z)) / 2
}

// ellipse is the perimeter of an ellipse with semi-axes a ≥ b, 4 a E(m) with
// parameter m = 1 - b²/a² (NIST Digital Library of Mathematical Functions
// 19.9.9).
func ellipse(a, b float64) float64 { return 4 * a * mathext.CompleteE(1-b*b/(a*a)) }

// lens is the area that two caps of the unit sphere, x > c and y > c, have in
// common, by the Gauss–Bonnet theorem: two arcs of geodesic curvature cot t,
// t = acos c, and two corners. The triangle of the two axes and a corner has the
// sides t, t and π/2.
func lens(c float64) float64 {
	t := math.Acos(c)
	corner := math.Acos(-math.Cos(t) * math.Cos(t) / (math.Sin(t) * math.Sin(t)))
	axis := math.Acos(math.Cos(t) / math.Sin(t))
	return 2*math.Pi - 2*corner - 4*axis*math.Cos(t)
}

package limit

import (
	"math"
	"slices"

	combine "creaseproof/quadrature/branches"
)

// branch sets the jet of a function at x.
type branch func(x []float64, j *Jet)

// affine is a·x + c.
func affine(c float64, a ...float64) branch {
	return func(x []float64, j *Jet) {
		j.clear()
		j.U = c
		for i := range x {
			j.U += a[i] * x[i]
			j.P[i] = a[i]
		}
	}
}

// layeredBranch is a x + b y + (a² + b²) z/2 + c.
func layeredBranch(a, b, c float64) branch { return affine(c, a, b, (a*a+b*b)/2) }

// focal is -(x² + y²)/(2 z).
func focal(x []float64, j *Jet) {
	r2, z := x[0]*x[0]+x[1]*x[1], x[2]
	j.U = -r2 / (2 * z)
	j.P[0], j.P[1], j.P[2] = -x[0]/z, -x[1]/z, r2/(2*z*z)
	xz, yz := x[0]/(z*z), x[1]/(z*z)
	copy(j.H, []float64{-1 / z, 0, xz, 0, -1 / z, yz, xz, yz, -r2 / (z * z * z)})
}

// cone is m |(x, y)| + m² z/2.
func cone(m float64) branch {
	return func(x []float64, j *Jet) {
		j.clear()
		r := math.Hypot(x[0], x[1])
		c, s := x[0]/r, x[1]/r
		j.U = m*r + m*m*x[2]/2
		j.P[0], j.P[1], j.P[2] = m*c, m*s, m*m/2
		j.H[0], j.H[1], j.H[3], j.H[4] = m*s*s/r, -m*s*c/r, -m*s*c/r, m*c*c/r
	}
}

// fromPoint is the distance from the point (a, b) of the plane.
func fromPoint(a, b float64) branch {
	return func(x []float64, j *Jet) {
		dx, dy := x[0]-a, x[1]-b
		r := math.Hypot(dx, dy)
		c, s := dx/r, dy/r
		j.U, j.P[0], j.P[1] = r, c, s
		copy(j.H, []float64{s * s / r, -s * c / r, -s * c / r, c * c / r})
	}
}

func parts(eps, r, l, k float64) Density {
	d := Density{Compression: r * r / (2 * eps), Bending: eps * l * l / 2, Curvature: eps * k}
	d.Energy = d.Compression + d.Bending
	return d
}

func layered(_ []float64, eps float64, j *Jet) Density {
	return parts(eps, j.P[2]-(j.P[0]*j.P[0]+j.P[1]*j.P[1])/2, j.H[0]+j.H[4], j.H[0]*j.H[4]-j.H[1]*j.H[3])
}

func layeredCost(_, plus, minus, nu []float64) float64 {
	x, y, z := plus[0]-minus[0], plus[1]-minus[1], plus[2]-minus[2]
	perp := x*x + y*y
	return perp * perp / (12 * math.Sqrt(perp+z*z))
}

func eikonal(_ []float64, eps float64, j *Jet) Density {
	return parts(eps, (1-j.P[0]*j.P[0]-j.P[1]*j.P[1])/2, j.H[0]+j.H[3], j.H[0]*j.H[3]-j.H[1]*j.H[2])
}

func eikonalCost(_, plus, minus, nu []float64) float64 {
	q := math.Hypot(plus[0]-minus[0], plus[1]-minus[1])
	return q * q * q / 12
}

// minimum is the minimum of n branches.
func minimum(n int) *combine.Tree { return tree("min", n) }

func tree(text string, n int) *combine.Tree {
	t, err := combine.Parse(text, n)
	if err != nil {
		panic(err)
	}
	return t
}

func problem(d Domain, s Smoothing, branches ...branch) *Problem {
	jets := func(x []float64, out []Jet) {
		for i, b := range branches {
			b(x, &out[i])
		}
	}
	scratch := make([]Jet, len(branches))
	for i := range scratch {
		scratch[i] = NewJet(len(d.Lo))
	}
	p := &Problem{Domain: d, Branches: len(branches), Smoothing: s, Jets: jets, Density: layered, Cost: layeredCost,
		Values: func(x, v []float64) {
			jets(x, scratch)
			for i := range scratch {
				v[i] = scratch[i].U
			}
		}}
	if len(d.Lo) == 2 {
		p.Density, p.Cost = eikonal, eikonalCost
	}
	for _, b := range branches { // affine ones, by their gradients at places
		x, y, j, k := []float64{.3, .71, .57}[:len(d.Lo)], []float64{-.45, .23, .88}[:len(d.Lo)], NewJet(len(d.Lo)), NewJet(len(d.Lo))
		b(x, &j)
		b(y, &k)
		p.Affine = append(p.Affine, slices.Equal(j.P, k.P))
	}
	if f, ok := s.(*Front); ok && f.Min {
		p.Combine = minimum(len(branches))
	}
	return p
}

// cylinder has the parameters r, angle, z.
func cylinder(r0, r1, z0, z1 float64) Domain {
	return Domain{Lo: []float64{r0, 0, z0}, Hi: []float64{r1, 2 * math.Pi, z1}, Map: func(s, x []float64, jac [][]float64) {
		sin, cos := math.Sincos(s[1])
		x[0], x[1], x[2] = s[0]*cos, s[0]*sin, s[2]
		copy(jac[0], []float64{cos, sin, 0})
		copy(jac[1], []float64{-s[0] * sin, s[0] * cos, 0})
		copy(jac[2], []float64{0, 0, 1})
	}}
}

func box(ends ...float64) Domain {
	var d Domain
	for i := 0; i < len(ends); i += 2 {
		d.Lo, d.Hi = append(d.Lo, ends[i]), append(d.Hi, ends[i+1])
	}
	return d
}

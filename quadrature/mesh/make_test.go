package mesh_test

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/quadrature"
	"creaseproof/quadrature/mesh"
)

type point = [3]float64

// soup is a list of triangles.
type soup [][3]point

// grid is the image of a rectangle of parameters, n by m squares of two
// triangles each; the normal is f_s × f_t.
func grid(n, m int, s0, s1, t0, t1 float64, f func(s, t float64) point) (out soup) {
	at := func(i, j int) point {
		return f(s0+(s1-s0)*float64(i)/float64(n), t0+(t1-t0)*float64(j)/float64(m))
	}
	for i := range n {
		for j := range m {
			a, b, c, d := at(i, j), at(i+1, j), at(i+1, j+1), at(i, j+1)
			out = append(out, [3]point{a, b, c}, [3]point{a, c, d})
		}
	}
	return out
}

// sphere is an octahedron of radius r whose faces are divided into n² and moved
// outwards.
func sphere(r float64, n int) (out soup) {
	for _, s := range []point{{1, 1, 1}, {-1, 1, 1}, {-1, -1, 1}, {1, -1, 1}, {1, 1, -1}, {-1, 1, -1}, {-1, -1, -1}, {1, -1, -1}} {
		at := func(i, j int) point {
			x, y := float64(i), float64(j)
			z := float64(n) - x - y
			l := r / math.Sqrt(x*x+y*y+z*z)
			return point{s[0] * x * l, s[1] * y * l, s[2] * z * l}
		}
		add := func(a, b, c point) {
			if s[0]*s[1]*s[2] < 0 {
				b, c = c, b
			}
			out = append(out, [3]point{a, b, c})
		}
		for i := range n {
			for j := range n - i {
				add(at(i, j), at(i+1, j), at(i, j+1))
				if i+j < n-1 {
					add(at(i+1, j), at(i+1, j+1), at(i, j+1))
				}
			}
		}
	}
	return out
}

// torus has its seams closed exactly.
func torus(big, small float64, n, m int) soup {
	turn := func(i, n int) (c, s float64) {
		a := 2 * math.Pi * float64(i%n) / float64(n)
		return math.Cos(a), math.Sin(a)
	}
	return grid(n, m, 0, float64(n), 0, float64(m), func(i, j float64) point {
		ca, sa := turn(int(math.Round(i)), n)
		cb, sb := turn(int(math.Round(j)), m)
		return point{(big + small*cb) * ca, (big + small*cb) * sa, small * sb}
	})
}

// paraboloid is rho² = 2 k z for 1/2 ≤ z ≤ 3, with the normal outwards.
func paraboloid(k float64, n int) soup {
	return grid(n, n, 0, 2*math.Pi, 0.5, 3, func(a, z float64) point {
		r := math.Sqrt(2 * k * z)
		return point{r * math.Cos(a), r * math.Sin(a), z}
	})
}

// wall is the square 0 ≤ y ≤ 1, 0 ≤ z ≤ 1 of x = 0, with the normal along x.
func wall(n int) soup {
	return grid(n, n, 0, 1, 0, 1, func(y, z float64) point { return point{0, y, z} })
}

func (s soup) text() []byte {
	var b bytes.Buffer
	b.WriteString("solid test surface\n")
	for _, t := range s {
		b.WriteString("  facet normal 0 0 0\n    outer loop\n")
		for _, p := range t {
			fmt.Fprintf(&b, "      vertex %.17g %.17g %.17g\n", p[0], p[1], p[2])
		}
		b.WriteString("    endloop\n  endfacet\n")
	}
	b.WriteString("endsolid test surface\n")
	return b.Bytes()
}

func (s soup) binary() []byte {
	out := make([]byte, 80, 84+50*len(s))
	copy(out, "solid: the header may begin like a text")
	out = binary.LittleEndian.AppendUint32(out, uint32(len(s)))
	for _, t := range s {
		out = append(out, make([]byte, 12)...)
		for _, p := range t {
			for _, x := range p {
				out = binary.LittleEndian.AppendUint32(out, math.Float32bits(float32(x)))
			}
		}
		out = append(out, 0, 0)
	}
	return out
}

func (s soup) obj() []byte {
	var b bytes.Buffer
	for _, t := range s {
		for _, p := range t {
			fmt.Fprintf(&b, "v %.17g %.17g %.17g\n", p[0], p[1], p[2])
		}
		b.WriteString("f -3 -2 -1\n")
	}
	return b.Bytes()
}

func read(t testing.TB, data []byte) *mesh.Mesh {
	t.Helper()
	m, err := mesh.Read(t.Context(), bytes.NewReader(data), mesh.Limits{})
	require.NoError(t, err)
	return m
}

func readErr(t testing.TB, text string) error {
	t.Helper()
	m, err := mesh.Read(t.Context(), strings.NewReader(text), mesh.Limits{})
	require.Error(t, err)
	require.Nil(t, m)
	return err
}

func alone(d quadrature.Density) func() (mesh.Integrand, error) {
	return func() (mesh.Integrand, error) { return mesh.Integrand{Density: d}, nil }
}

// well is the residual of the layered model.
func well(g []float64) (float64, float64) {
	s := (g[0]*g[0] + g[1]*g[1]) / 2
	return g[2] - s, math.Abs(g[2]) + s
}

// layered is the sharp density |q_perp|⁴/(12 |q|).
func layered(_, p, m, _ []float64) float64 {
	x, y, z := p[0]-m[0], p[1]-m[1], p[2]-m[2]
	s := x*x + y*y
	return s * s / (12 * math.Sqrt(s+z*z))
}

// affine is a·x_perp + |a|² z/2.
func affine(a, b float64) func(x, g []float64) float64 {
	return func(x, g []float64) float64 {
		g[0], g[1], g[2] = a, b, (a*a+b*b)/2
		return a*x[0] + b*x[1] + g[2]*x[2]
	}
}

// focal is -rho²/(2 z) against -k, plus outside of the paraboloid rho² = 2 k z
// being -k for a minimum; the sign of the normal does not matter.
func focal(k float64) quadrature.Traces {
	return quadrature.Traces{
		HasValue: true,
		Plus: func(x, g []float64) float64 {
			r := x[0]*x[0] + x[1]*x[1]
			g[0], g[1], g[2] = -x[0]/x[2], -x[1]/x[2], r/(2*x[2]*x[2])
			return -r / (2 * x[2])
		},
		Minus: func(_, g []float64) float64 {
			clear(g)
			return -k
		},
	}
}

package branches_test

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/quadrature/branches"
)

func rats(list ...string) []*big.Rat {
	out := make([]*big.Rat, len(list))
	for i, s := range list {
		out[i], _ = new(big.Rat).SetString(s)
	}
	return out
}

// affine makes a branch of its coefficients, the constant last.
func affine(list ...string) branches.Affine {
	r := rats(list...)
	return branches.Affine{Gradient: r[:len(r)-1], Constant: r[len(r)-1]}
}

func faces(t testing.TB, list []branches.Affine, combine string, box branches.Box) []branches.Face {
	t.Helper()
	tree, err := branches.Parse(combine, len(list))
	require.NoError(t, err)
	fs, err := branches.Faces(t.Context(), list, tree, box)
	require.NoError(t, err)
	return fs
}

// fourth is the sum over the faces of |jump|^3 area, which for a jump density
// |q|^3 is rational.
func fourth(fs []branches.Face) *big.Rat {
	sum := new(big.Rat)
	for _, f := range fs {
		q := new(big.Rat)
		for _, x := range f.Jump {
			q.Add(q, new(big.Rat).Mul(x, x))
		}
		q.Mul(q, q)
		sum.Add(sum, q.Mul(q, f.Ratio))
	}
	return sum
}

// The distance to the boundary of a rectangle a × b has the energy 2 a/3,
// where the density is |q|^3/12.
func TestRectangle(t *testing.T) {
	list := []branches.Affine{affine("-1", "0", "1"), affine("1", "0", "1"), affine("0", "-1", "1/2"), affine("0", "1", "1/2")}
	fs := faces(t, list, "min", branches.Box{Lo: rats("-1", "-1/2"), Hi: rats("1", "1/2")})
	assert.Len(t, fs, 5)
	e := fourth(fs)
	assert.Equal(t, "4/3", e.Quo(e, big.NewRat(12, 1)).RatString())
	// A crease in a side of the box is refused, unless u is another branch there.
	side := branches.Box{Lo: rats("-1", "0"), Hi: rats("1", "1/2")}
	tree, err := branches.Parse("min", 2)
	require.NoError(t, err)
	_, err = branches.Faces(t.Context(), list[2:], tree, side)
	var e1 *branches.BoundaryError
	require.ErrorAs(t, err, &e1)
	assert.Equal(t, branches.BoundaryError{First: 0, Second: 1, Coordinate: 1}, *e1)
	assert.Empty(t, faces(t, append(list[2:4:4], affine("0", "0", "-3")), "min", side))
	// In a larger box the branches go on outside the rectangle.
	assert.NotEqual(t, "16", fourth(faces(t, list, "min", branches.Box{Lo: rats("-2", "-2"), Hi: rats("2", "2")})).RatString())
	// Away from the corners there is the long ridge alone.
	fs = faces(t, list, "min", branches.Box{Lo: rats("-1/2", "-1/2"), Hi: rats("1/2", "1/2")})
	assert.Len(t, fs, 1)
	assert.Equal(t, "8", fourth(fs).RatString())
	assert.Equal(t, [2]int{2, 3}, fs[0].Branches)
}

// Branches that coincide on the plane of two others are compared beside it.
func TestCoincident(t *testing.T) {
	box := branches.Box{Lo: rats("-1", "-1"), Hi: rats("1", "2")}
	steps := []branches.Affine{affine("0", "0", "0"), affine("1", "0", "0"), affine("2", "0", "0")}
	for combine, want := range map[string][2]int{
		"max": {0, 2}, "min": {0, 2},
		"max(min(1, 3), 2)": {0, 1}, // on the left max(2 x, x) = x, on the right max(0, x) = x: no crease
		"min(max(1, 2), 3)": {0, 2}, // 2 x on the left, x on the right
	} {
		fs := faces(t, steps, combine, box)
		switch combine {
		case "max(min(1, 3), 2)":
			assert.Empty(t, fs, combine)
		case "min(max(1, 2), 3)":
			require.Len(t, fs, 1, combine)
			assert.Equal(t, [2]int{1, 2}, fs[0].Branches, combine)
			assert.Equal(t, 1, fs[0].Plus+fs[0].Minus-2, combine)
		default:
			require.Len(t, fs, 1, combine)
			assert.Equal(t, want, fs[0].Branches, combine)
			assert.Equal(t, "9", new(big.Rat).Set(fs[0].SquaredArea()).RatString(), combine)
		}
	}
}

// The sheets are those that walking along random lines meets: the gradient of
// the tree changes where a line crosses a face and nowhere else.
func TestFacesAgainstWalks(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 11))
	combines := []string{"max", "min", "max(min(1, 2), 3, 4..6)", "min(max(1, 2, 3), max(4, 5), 6)", "max(min(1, max(2, 3)), min(4, 5..6))"}
	for round := range 40 {
		dim := 2 + round%2
		var list []branches.Affine
		for range 6 {
			f := branches.Affine{Constant: big.NewRat(rng.Int64N(41)-20, 12)}
			for range dim {
				f.Gradient = append(f.Gradient, big.NewRat(rng.Int64N(31)-15, 7))
			}
			list = append(list, f)
		}
		combine := combines[round%len(combines)]
		tree, err := branches.Parse(combine, 6)
		require.NoError(t, err)
		box := branches.Box{Lo: rats("-1", "-1", "-1")[:dim], Hi: rats("1", "1", "1")[:dim]}
		fs, err := branches.Faces(t.Context(), list, tree, box)
		require.NoError(t, err)
		coefficients := make([][]float64, len(list))
		for k, f := range list {
			for _, c := range append(f.Gradient[:dim:dim], f.Constant) {
				x, _ := c.Float64()
				coefficients[k] = append(coefficients[k], x)
			}
		}
		v := make([]float64, len(list))
		active := func(x []float64) int {
			for k, f := range coefficients {
				v[k] = f[dim]
				for i, c := range x {
					v[k] += f[i] * c
				}
			}
			_, k := tree.Eval(v)
			return k
		}
		for range 20 {
			a, b, x := make([]float64, dim), make([]float64, dim), make([]float64, dim)
			for i := range a {
				a[i], b[i] = 2*rng.Float64()-1, 2*rng.Float64()-1
			}
			at := func(s float64) int {
				for i := range x {
					x[i] = a[i] + s*(b[i]-a[i])
				}
				return active(x)
			}
			crossings := 0
			for _, f := range fs {
				if s, ok := hit(f, a, b); ok {
					crossings++
					below, above := at(s-1e-9), at(s+1e-9)
					assert.ElementsMatch(t, []int{f.Plus, f.Minus}, []int{below, above}, combine)
				}
			}
			changes := 0
			const steps = 2000
			for k := range steps {
				if at(float64(k)/steps) != at(float64(k+1)/steps) {
					changes++
				}
			}
			assert.LessOrEqual(t, changes, crossings, combine)
			assert.LessOrEqual(t, crossings, changes+2, combine) // two crossings within a step
		}
	}
}

// hit is the parameter at which a segment crosses a face.
func hit(f branches.Face, a, b []float64) (float64, bool) {
	dim := len(a)
	vs := make([][]float64, len(f.Vertices))
	for i, v := range f.Vertices {
		for _, c := range v {
			x, _ := c.Float64()
			vs[i] = append(vs[i], x)
		}
	}
	var along, off float64
	n := make([]float64, dim)
	for k, q := range f.Jump {
		n[k], _ = q.Float64()
		along += n[k] * (b[k] - a[k])
		off += n[k] * (vs[0][k] - a[k])
	}
	s := off / along
	if !(0 < s && s < 1) {
		return 0, false
	}
	x := make([]float64, dim)
	for k := range x {
		x[k] = a[k] + s*(b[k]-a[k])
	}
	if dim == 2 {
		var dot, length float64
		for k := range x {
			dot += (x[k] - vs[0][k]) * (vs[1][k] - vs[0][k])
			length += (vs[1][k] - vs[0][k]) * (vs[1][k] - vs[0][k])
		}
		return s, 0 < dot && dot < length
	}
	drop := 0
	for k := range n {
		if math.Abs(n[k]) > math.Abs(n[drop]) {
			drop = k
		}
	}
	i, j := (drop+1)%3, (drop+2)%3
	sign := 0.0
	for k := range vs {
		p, q := vs[k], vs[(k+1)%len(vs)]
		c := (q[i]-p[i])*(x[j]-p[j]) - (q[j]-p[j])*(x[i]-p[i])
		if sign != 0 && c*sign < 0 {
			return 0, false
		}
		sign = c
	}
	return s, true
}

// tangents are n planes tangent to the paraboloid (x^2 + y^2)/2 + z: solutions of the
// layered model in which the projection of the gradient runs over a grid.
func tangents(n int64) []branches.Affine {
	var list []branches.Affine
	for i := range n {
		for j := range n {
			a, b := big.NewRat(2*i+1-n, n), big.NewRat(2*j+1-n, n)
			s := new(big.Rat).Add(new(big.Rat).Mul(a, a), new(big.Rat).Mul(b, b))
			s.Mul(s, big.NewRat(1, 2))
			list = append(list, branches.Affine{Gradient: []*big.Rat{a, b, s}, Constant: new(big.Rat).Neg(s)})
		}
	}
	return list
}

// The upper envelope of planes tangent at the points of a grid has the grid of
// the walls half-way between them where z = 1 - that is, where z - 1 = 0 - and
// their widths are rational. Between heights each wall tilts not at all, for
// a·(x - c) + (z - 1) |a|²/2 shifts it by (z - 1) (a + b)/2.
func TestEnvelope(t *testing.T) {
	list := tangents(8)
	fs := faces(t, list, "max", branches.Box{Lo: rats("-2", "-2", "0"), Hi: rats("2", "2", "3/4")})
	assert.Len(t, fs, 2*8*7)
	for _, f := range fs {
		assert.Len(t, f.Vertices, 4)
	}
}

func TestSame(t *testing.T) {
	tree, err := branches.Parse("max", 3)
	require.NoError(t, err)
	f := affine("1", "2", "3")
	_, err = branches.Faces(t.Context(), []branches.Affine{f, affine("0", "0", "0"), f}, tree, branches.Box{Lo: rats("0", "0"), Hi: rats("1", "1")})
	var same *branches.SameError
	require.ErrorAs(t, err, &same)
	assert.Equal(t, 0, same.First)
	assert.Equal(t, 2, same.Second)
}

func TestParse(t *testing.T) {
	for text, want := range map[string]string{
		"max": "max(1, 2, 3, 4)", " min ": "min(1, 2, 3, 4)",
		"max(min(1,2), 3..4)": "max(min(1, 2), 3, 4)",
		"min( 4 , max(1..3))": "min(4, max(1, 2, 3))",
	} {
		tree, err := branches.Parse(text, 4)
		require.NoError(t, err, text)
		assert.Equal(t, want, tree.String())
	}
	for text, want := range map[string]string{
		"maximum": "neither max nor min", "max(1, 2)": "branch 3 is not used", "max(1, 2, 3, 5)": "no branch 5",
		"max(1, 2, 3, 4": "a comma or a closing bracket", "max 1": "an opening bracket", "max(1, 1, 2, 3, 4)": "stands twice",
		"max(1..4) 2": "something follows", "1": "combines nothing", "max(min(1), 2, 3, 4)": "of a single branch", "max(1, u)": "neither max nor min", "max(0, 1, 2, 3)": "no branch 0", "max(4..1)": "the range is empty",
		"": "a branch is expected", "max(1,,2)": "a branch is expected",
	} {
		_, err := branches.Parse(text, 4)
		var e *branches.SyntaxError
		require.ErrorAs(t, err, &e, text)
		assert.Contains(t, e.Problem, want, text)
	}
}

func BenchmarkEnvelope(b *testing.B) {
	list := tangents(8)
	tree, _ := branches.Parse("max", len(list))
	box := branches.Box{Lo: rats("-2", "-2", "0"), Hi: rats("2", "2", "3/4")}
	for b.Loop() {
		if _, err := branches.Faces(b.Context(), list, tree, box); err != nil {
			b.Fatal(err)
		}
	}
}

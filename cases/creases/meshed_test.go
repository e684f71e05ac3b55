package creases_test

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/identity"
)

// onMesh writes a mesh beside a case with the layered model and evaluates it.
func onMesh(t *testing.T, name, content, keys string) ([]creases.Result, error) {
	t.Helper()
	dir := t.TempDir()
	if name != "" {
		require.NoError(t, os.WriteFile(filepath.Join(dir, name), []byte(content), 0o600))
	}
	file := filepath.Join(dir, "case.toml")
	c, err := cases.Parse(file, []byte(layeredHead+"mesh = \""+name+"\"\n"+keys))
	require.NoError(t, err)
	return creases.New(c.Setting, file).Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
}

// front is the paraboloid rho² = 2 z, 1/2 ≤ z ≤ 3, as OBJ with n² quadrangles.
func front(n int) string {
	var b strings.Builder
	for j := range n + 1 {
		for i := range n {
			z := 0.5 + 2.5*float64(j)/float64(n)
			a := 2 * math.Pi * float64(i) / float64(n)
			r := math.Sqrt(2 * z)
			fmt.Fprintf(&b, "v %.17g %.17g %.17g\n", r*math.Cos(a), r*math.Sin(a), z)
		}
	}
	for j := range n {
		for i := range n {
			k, l := j*n+i+1, j*n+(i+1)%n+1
			fmt.Fprintf(&b, "f %d %d %d\nf %d %d %d\n", k, l, l+n, k, l+n, k+n)
		}
	}
	return b.String()
}

const quad = "v 0 0 0\nv 0 1 0\nv 0 1 1\nv 0 0 1\nf 1 2 3 4\n"

func TestMesh(t *testing.T) {
	// A wall: max(x, -x) + y, density 2³/12 on the unit square, exactly.
	r, err := onMesh(t, "wall.obj", quad, "plus = \"x + y + z\"\nminus = \"-x + y + z\"\nenergy = \"2/3\"\n")
	require.NoError(t, err)
	require.Len(t, r, 1)
	assert.Equal(t, identity.Supported, r[0].Verdict, r[0].Reason)
	assert.InDelta(t, 2.0/3, *r[0].Energy, 1e-15)
	assert.Equal(t, creases.Mesh{Triangles: 2, Vertices: 4, BoundaryEdges: 4}, *r[0].Mesh)
	assert.Zero(t, *r[0].Defect)

	const fronts = "plus = \"-(x^2 + y^2)/(2 z)\"\nminus = \"-k\"\nvalues = { k = \"1\" }\nenergy = \"(2 pi k^2/3) log(6)\"\n"
	r, err = onMesh(t, "front.obj", front(160), fronts+"within = 1e-3\norder = 4\n")
	require.NoError(t, err)
	assert.Equal(t, identity.Supported, r[0].Verdict, r[0].Reason)
	assert.Greater(t, *r[0].Defect, 1e-3)
	assert.Less(t, *r[0].Defect, 0.1)
	assert.Nil(t, r[0].Slices)

	// The polyhedron is not the surface.
	r, err = onMesh(t, "front.obj", front(40), fronts)
	require.NoError(t, err)
	assert.Equal(t, identity.Open, r[0].Verdict)
	assert.NotNil(t, r[0].Energy)
	r, err = onMesh(t, "front.obj", front(40), fronts+"within = 1e-3\ntolerance = 1e-6\n")
	require.NoError(t, err)
	assert.Nil(t, r[0].Energy)
	assert.Contains(t, r[0].Reason, "the largest defect is")
	assert.Contains(t, r[0].Reason, "triangle 1")
}

func TestMeshThatIsRefused(t *testing.T) {
	const wall = "plus = \"x + z/2\"\nminus = \"-x + z/2\"\n"
	huge := strings.Repeat("\x00", 80) + "\xff\xff\xff\xff"
	for name, c := range map[string]struct{ file, content, keys, says string }{
		"truncated":    {"a.stl", strings.Repeat("\x00", 80) + "\x02\x00\x00\x00" + strings.Repeat("\x00", 60), wall, "truncated"},
		"four billion": {"a.stl", huge, wall, "announces 4294967295 triangles"},
		"no mesh":      {"a.obj", "hello\n", wall, "line 1, column 1"},
		"not finite":   {"a.obj", "v 0 0 nan\n", wall, "line 1, column 7"},
		"non-manifold": {"a.obj", quad + "v 1 0 0\nv -1 0 0\nf 1 2 5\nf 2 1 6\n", wall, "3 triangles share it"},
		"inconsistent": {"a.obj", "v 0 0 0\nv 0 1 0\nv 0 1 1\nv 0 0 1\nf 1 2 3\nf 1 4 3\n", wall, "the triangles 1 and 2"},
		"off the well": {"a.obj", quad, "plus = \"x + z\"\nminus = \"-x + z/2\"\n", "off the well"},
		"torn":         {"a.obj", quad, "plus = \"x + z/2 + 1/1000\"\nminus = \"-x + z/2\"\n", "discontinuous"},
		"not normal":   {"a.obj", quad, "plus_gradient = [\"1\", \"1\", \"1\"]\nminus_gradient = [\"-1\", \"0\", \"1/2\"]\n", "not normal"},
	} {
		r, err := onMesh(t, c.file, c.content, c.keys)
		require.NoError(t, err, name)
		require.Len(t, r, 1, name)
		assert.Nil(t, r[0].Energy, name)
		assert.Equal(t, identity.Open, r[0].Verdict, name)
		assert.Contains(t, r[0].Reason, c.says, name)
	}
	r, err := onMesh(t, "a.obj", "v 0 0 0\nv 0 1 0\nv 0 1 1\nv 0 0 1\nf 1 2 3\nf 1 4 3\n", wall+"orientation = \"ignored\"\nenergy = \"2/3\"\n")
	require.NoError(t, err)
	assert.Equal(t, identity.Supported, r[0].Verdict, r[0].Reason)

	_, err = onMesh(t, "a.obj", quad, wall+"order = 7\n")
	assert.ErrorContains(t, err, "no rule of order 7")
	c, err := cases.Parse("case.toml", []byte(layeredHead+"mesh = \"none/such.stl\"\n"+wall))
	require.NoError(t, err)
	_, err = creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
	assert.ErrorContains(t, err, "no such file")
	c, err = cases.Parse("case.toml", []byte(layeredHead+"mesh = \".\"\n"+wall))
	require.NoError(t, err)
	_, err = creases.New(c.Setting, "case.toml").Evaluate(t.Context(), &c.File.Surfaces[0], creases.Options{})
	assert.ErrorContains(t, err, "no regular file")
}

// The error of a density that is not smooth, or not bounded, stands.
func TestMeshRoughDensity(t *testing.T) {
	for _, test := range []struct {
		density string
		want    float64
	}{
		{"1/norm(y, z)", 2 * math.Log(1+math.Sqrt2)},
		{"1/sqrt(y)", 2},
		{"abs(y - 1/3)", 5.0 / 18},
		{"sqrt(y)", 2.0 / 3},
	} {
		r, err := onMesh(t, "wall.obj", quad, fmt.Sprintf("density = %q\n", test.density))
		require.NoError(t, err)
		require.NotNil(t, r[0].Energy, r[0].Reason)
		assert.LessOrEqual(t, math.Abs(*r[0].Energy-test.want), *r[0].Error, test.density)
		assert.Less(t, *r[0].Error, 0.03, test.density)
	}
}

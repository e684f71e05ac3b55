package library_test

import (
	"fmt"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/library"
)

func decode(t *testing.T, name string) *casefile.File {
	t.Helper()
	data, ok := library.Source(name)
	require.True(t, ok, name)
	f, err := casefile.Decode(name, data)
	require.NoError(t, err)
	return f
}

// Every built-in case is well-formed and says what it is.
func TestEveryCaseDecodes(t *testing.T) {
	claims, surfaces := 0, 0
	for _, name := range library.Names() {
		f := decode(t, name)
		assert.Equal(t, name, f.Name)
		assert.NotEmpty(t, f.Title, name)
		assert.NotEmpty(t, f.About, name)
		assert.NotEmpty(t, f.Sources, name)
		assert.NotZero(t, len(f.Claims)+len(f.Surfaces)+len(f.Limits), name)
		for _, s := range f.Surfaces {
			assert.NotNil(t, s.Energy, "%s: %s", name, s.Name)
			assert.NotNil(t, s.Within, "%s: %s", name, s.Name)
		}
		claims += len(f.Claims)
		surfaces += len(f.Surfaces)
	}
	assert.GreaterOrEqual(t, len(library.Names()), 30)
	assert.GreaterOrEqual(t, claims, 200)
	assert.GreaterOrEqual(t, surfaces, 40)
}

// The models that the library is asked to hold.
func TestCasesThatMustBeThere(t *testing.T) {
	for _, name := range []string{
		"layered-rotated", "layered-plane", "planar-eikonal", "eikonal-reduction", "bps", "curvature-null-lagrangian",
		"compression", "single-dislocation", "smooth-fronts", "phase-transition", "burgers", "shallow-water",
		"korteweg-de-vries", "jacobians", "eikonal-3d", "false-claims",
		"hessian-newton", "kato", "forms", "box-bounds", "well-bounds", "young-bounds", "roots", "means",
		"crease-paraboloid", "crease-focal", "crease-cones", "crease-planes", "crease-sphere", "crease-eikonal", "areas",
	} {
		assert.Contains(t, library.Names(), name)
	}
	for _, c := range decode(t, "false-claims").Claims {
		require.NotNil(t, c.Expect, c.Name)
		assert.Equal(t, "refuted", c.Expect.S, c.Name)
	}
}

// Each crease appears as it is, exchanged, turned and after a Galilean map.
func TestVariantsOfEachCrease(t *testing.T) {
	for _, name := range []string{"crease-paraboloid", "crease-focal", "crease-cones", "crease-planes"} {
		var all []string
		for _, s := range decode(t, name).Surfaces {
			all = append(all, s.Name)
			assert.NotEmpty(t, s.Values, s.Name)
		}
		names := strings.Join(all, "; ")
		for _, variant := range []string{"exchanged", "turned", "Galilean"} {
			assert.Contains(t, names, variant, name)
		}
	}
}

func TestSourceOfNothing(t *testing.T) {
	for _, name := range []string{"", "none", "burgers.toml", "../library/burgers", "template/case", "./burgers", "a/b"} {
		_, ok := library.Source(name)
		assert.False(t, ok, name)
	}
}

func TestTemplate(t *testing.T) {
	f, err := casefile.Decode("mine.toml", library.Template())
	require.NoError(t, err)
	assert.NotEmpty(t, f.Claims)
	assert.NotEmpty(t, f.Surfaces)
	assert.NotContains(t, library.Names(), "template")
	for _, line := range strings.Split(string(library.Template()), "\n") {
		assert.LessOrEqual(t, len(line), 100)
	}

	b := library.Template()
	b[0] = 'x'
	assert.NotEqual(t, b, library.Template(), "a copy")
}

func ExampleSource() {
	data, ok := library.Source("burgers")
	if !ok {
		return
	}
	f, err := casefile.Decode("burgers", data)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(f.Title)
	fmt.Println(f.Claims[0].States.S)
	// Output:
	// Entropy pairs of Burgers' equation
	// d_t(u^2/2) + d_x(u^3/3) = 0
}

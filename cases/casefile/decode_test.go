package casefile

import (
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/source"
)

// sample uses every key once; it follows head.
const sample = `constants = ["eps"]
assume = ["eps > 0"]
[frame]
plane = ["x", "y"]
axes  = ["xi", "eta"]
angle = '\theta'
[let]
R = "u_z"   # a comment
"ψ" = 0.1
[model]
residual = "R"
bending = "u_xx"
energy = "R^2"
[field.Sigma]
xi = 'u_{\xi}'
y  = 0
[[claim]]
name = "first"
states = "2 R = c u"
modulo = "divergence"
solve = ["c"]
expect = "c = 4/3"
[[claim]]
name = "second"
states = "u_x <= C"
modulo = ["R", "u_y"]
at = "jump"
best = "C"
expect = "supported"
restrict = { u_z = "1/2" }
given = { u = "x^2" }
box = { u_x = ["-1", "1"], u_y = [-1, 1e-3] }
assume = "u_x > 0"
integrability = { u_x = 3, "u_{x y}" = "3/2", u_y = 1.5 }
[[surface]]
name = "patch"
values = { k = ["1/2", 0.7, 0x10], m = 2 }
plus = "x"
minus = "-x"
density = "nu_x"
patch = { map = ["cos(a)", "sin(a)"], over = { a = ["0", "2 pi"] } }
energy = "2 pi"
within = 1e-10
expect = "supported"
[[surface]]
name = "polygon"
plus_gradient = ["1", "0"]
minus_gradient = ["-1", 0]
polygon = [["0", "0"], [1, -1.50]]
[[surface]]
name = "graph"
density = "1"
graph = { of = "x^2", over = { x = ["0", "1"] } }
[[surface]]
name = "triangle"
density = "1"
graph = { of = "x", triangle = [[0, 0], [1, 0], [0, 1]] }
[[surface]]
name = "disc"
density = "1"
graph = { of = "x", disc = { center = ["0", 1], radius = "2" } }
[[surface]]
name = "level"
plus = "1"
minus = "2"
level = "x"
box = { x = ["-1", "1"], y = [0, 1] }
[[surface]]
name = "branches"
branches = ["x", "y"]
combine = "max"
box = { x = ["-1", "1"], y = [0, 1] }
[[surface]]
name = "in a ball"
branches = ["x", "y"]
combine = "max(1, 2)"
ball = { center = ["0", "1"], radius = 2 }
[[surface]]
name = "in a cylinder"
density = "1"
level = "x"
cylinder = { center = ["0", "1"], radius = "2", axis = "x", heights = [0, "1"] }
[[surface]]
name = "mesh"
density = "1"
mesh = "front.stl"
order = 8
tolerance = "1/1000"
orientation = "ignored"
`

func TestDecode(t *testing.T) {
	f, err := Decode("some/dir/mine.toml", []byte("title = 'T'\nabout = '''two\nlines'''\nsources = ['a', 'b']\n"+head+sample))
	require.NoError(t, err)
	text := func(line, col int, s string) source.Text {
		return source.Text{File: "some/dir/mine.toml", Line: line, Col: col, S: s}
	}
	assert.Equal(t, "mine", f.Name)
	assert.Equal(t, "some/dir/mine.toml", f.Path)
	assert.Equal(t, "T", f.Title)
	assert.Equal(t, "two\nlines", f.About)
	assert.Equal(t, []string{"a", "b"}, f.Sources)

	assert.Equal(t, []Name{{"x", source.Pos{Line: 6, Col: 17}}, {"y", source.Pos{Line: 6, Col: 22}}}, f.Space.Coordinates)
	assert.Equal(t, "u", f.Space.Unknowns[0].S)
	assert.Equal(t, "eps", f.Space.Constants[0].S)
	assert.Equal(t, []source.Text{text(9, 12, "eps > 0")}, f.Space.Assume)
	assert.Equal(t, "eta", f.Frame.Axes[1].S)
	assert.Equal(t, Name{`\theta`, source.Pos{Line: 13, Col: 10}}, f.Frame.Angle)
	assert.Equal(t, []Let{
		{Name{"R", source.Pos{Line: 15, Col: 1}}, text(15, 6, "u_z")},
		{Name{"ψ", source.Pos{Line: 16, Col: 2}}, text(16, 7, "0.1")},
	}, f.Lets)
	assert.Equal(t, text(20, 11, "R^2"), *f.Model.Energy)
	require.Len(t, f.Fields, 1)
	assert.Equal(t, Name{"Sigma", source.Pos{Line: 21, Col: 8}}, f.Fields[0].Name)
	assert.Equal(t, []Component{
		{Name{"xi", source.Pos{Line: 22, Col: 1}}, text(22, 7, `u_{\xi}`)},
		{Name{"y", source.Pos{Line: 23, Col: 1}}, text(23, 6, "0")},
	}, f.Fields[0].Components)

	require.Len(t, f.Claims, 2)
	c := f.Claims[0]
	assert.Equal(t, "first", c.Name)
	assert.Equal(t, source.Pos{Line: 25, Col: 9}, c.Pos)
	assert.True(t, c.Divergence)
	assert.Empty(t, c.Modulo)
	assert.Equal(t, "c", c.Solve[0].S)
	assert.Equal(t, "c = 4/3", c.Expect.S)
	c = f.Claims[1]
	assert.False(t, c.Divergence)
	assert.Equal(t, []source.Text{text(33, 12, "R"), text(33, 17, "u_y")}, c.Modulo)
	assert.Equal(t, "jump", c.At)
	assert.Equal(t, "C", c.Best.S)
	assert.Equal(t, "u_z", c.Restrict[0].Name.S)
	assert.Equal(t, text(37, 21, "1/2"), c.Restrict[0].Formula)
	assert.Equal(t, "x^2", c.Given[0].Formula.S)
	assert.Equal(t, "0.001", c.Box[1].Hi.S, "a formula in which e may be a name")
	assert.Equal(t, "u_x > 0", c.Assume[0].S)
	assert.Equal(t, []string{"3", "3/2", "3/2"}, []string{c.Integrability[0].P.RatString(), c.Integrability[1].P.RatString(), c.Integrability[2].P.RatString()})

	require.Len(t, f.Surfaces, 10)
	s := f.Surfaces[0]
	assert.Equal(t, "k", s.Values[0].Name.S)
	assert.Equal(t, []string{"1/2", "0.7", "16"}, []string{s.Values[0].List[0].S, s.Values[0].List[1].S, s.Values[0].List[2].S})
	assert.Equal(t, "2", s.Values[1].List[0].S)
	assert.Equal(t, "a", s.Patch.Over[0].Name.S)
	assert.Equal(t, "2 pi", s.Patch.Over[0].Hi.S)
	assert.Zero(t, s.Within.Cmp(big.NewRat(1, 10_000_000_000)), "exactly 1e-10")
	assert.Equal(t, "supported", s.Expect.S)
	assert.Equal(t, "-1.50", f.Surfaces[1].Polygon[1][1].S)
	assert.Equal(t, "0", f.Surfaces[1].MinusGradient[1].S)
	assert.Equal(t, "x", f.Surfaces[2].Graph.Over[0].Name.S)
	assert.Len(t, f.Surfaces[3].Graph.Triangle, 3)
	assert.Equal(t, "2", f.Surfaces[4].Graph.Disc.Radius.S)
	assert.Equal(t, "1", f.Surfaces[4].Graph.Disc.Center[1].S)
	assert.Equal(t, "x", f.Surfaces[5].Level.S)
	assert.Len(t, f.Surfaces[6].Branches, 2)
	assert.Equal(t, "max", f.Surfaces[6].Combine.S)
	assert.Equal(t, "max(1, 2)", f.Surfaces[7].Combine.S)
	assert.Equal(t, "1", f.Surfaces[7].Ball.Center[1].S)
	assert.Equal(t, "2", f.Surfaces[7].Ball.Radius.S)
	assert.Equal(t, "x", f.Surfaces[8].Cylinder.Axis.S)
	assert.Equal(t, "1", f.Surfaces[8].Cylinder.Heights[1].S)
	assert.Equal(t, "front.stl", f.Surfaces[9].Mesh)
	assert.Equal(t, 8, f.Surfaces[9].Order)
	assert.Zero(t, f.Surfaces[9].Tolerance.Cmp(big.NewRat(1, 1000)))
	assert.True(t, f.Surfaces[9].Unoriented)
}

// The order of over orients a patch, so it must be that of the file.
func TestOrderIsThatOfTheFile(t *testing.T) {
	for _, over := range []string{"t = [0, 1], a = [2, 3]", "a = [2, 3], t = [0, 1]"} {
		f, err := Decode("o.toml", []byte(head+"[[surface]]\nname='s'\ndensity='1'\npatch = { map = ['t','a','0'], over = { "+over+" } }\n"))
		require.NoError(t, err)
		assert.Equal(t, over[:1], f.Surfaces[0].Patch.Over[0].Name.S)
	}
}

// TOML has several ways to write the same thing.
func TestSpellings(t *testing.T) {
	want, err := Decode("s.toml", []byte(head+"[field.S]\nx = 'u'\n[[claim]]\nname = 'c'\nstates = 'u = u'\n"))
	require.NoError(t, err)
	for _, text := range []string{
		head + "[field]\nS.x = 'u'\n[[claim]]\nname = 'c'\nstates = 'u = u'\n",
		head + "[field]\nS = { x = 'u' }\n[[claim]]\nname = 'c'\nstates = 'u = u'\n",
		"field.S.x = \"u\"\nclaim = [ { name = 'c', states = 'u = u' } ]\n" + head,
		"\ufeff" + strings.ReplaceAll(head+"[field.\"S\"]\nx = '''u'''\n[[claim]]\nname = \"\"\"c\"\"\"\nstates = \"u = u\"\n", "\n", "\r\n"),
	} {
		f, err := Decode("s.toml", []byte(text))
		require.NoError(t, err, text)
		assert.Equal(t, want.Fields[0].Name.S, f.Fields[0].Name.S)
		assert.Equal(t, want.Fields[0].Components[0].Formula.S, f.Fields[0].Components[0].Formula.S)
		assert.Equal(t, want.Claims[0].Name, f.Claims[0].Name)
		assert.Equal(t, want.Claims[0].States.S, f.Claims[0].States.S)
	}
}

func TestNameOfTheCase(t *testing.T) {
	for path, want := range map[string]string{"a/b/c.toml": "c", "c": "c", "-": "-", `d\e.toml`: "e"} {
		f, err := Decode(path, []byte(head))
		require.NoError(t, err)
		assert.Equal(t, want, f.Name)
	}
}

package cases

import (
	"errors"
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/library"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/source"
	"creaseproof/identity/claim"
)

const space = `[space]
coordinates = ["x", "y", "z"]
unknowns = ["u"]
constants = ["eps"]
assume = ["eps > 0"]
`

const frame = `[frame]
plane = ["x", "y"]
axes = ["xi", "eta"]
angle = "theta"
`

func parsed(t *testing.T, text string) *Case {
	t.Helper()
	c, err := Parse("case.toml", []byte(text))
	require.NoError(t, err)
	return c
}

func claimOf(t *testing.T, keys string) *Claim {
	t.Helper()
	return parsed(t, space+"[let]\nR = 'u_z - u_x^2'\n[model]\nresidual = 'R'\n[[claim]]\nname = 'c'\n"+keys).Claims[0]
}

func TestLibraryParses(t *testing.T) {
	for _, name := range library.Names() {
		c, err := BuiltIn(name)
		require.NoError(t, err, name)
		assert.Equal(t, name, c.Name)
		assert.Len(t, c.Claims, len(c.File.Claims))
		assert.NotEmpty(t, c.Title)
	}
	_, err := Parse("template", library.Template())
	require.NoError(t, err)
}

func TestSetting(t *testing.T) {
	c := parsed(t, `title = "t"
[space]
coordinates = ["x", "y"]
unknowns = ["u", "v"]
constants = ["ε", '\lambda']
assume = ['λ ≥ ε/2', '\epsilon > 0']
[frame]
plane = ["y", "x"]
axes = ["ξ", "eta"]
angle = "θ"
[let]
B = "A + u"          # A comes later
A = "v_x"
[model]
residual = "B"
bending = "u_xx"
energy = "B^2"
[field.F]
xi = "A"
"η" = "B"
`)
	s := c.Setting
	assert.Equal(t, "case", c.Name)
	assert.Equal(t, []string{"x", "y"}, s.Coordinates)
	assert.Equal(t, []string{"u", "v"}, s.Unknowns)
	assert.Equal(t, []string{"eps", "lambda"}, s.Constants)
	assert.Equal(t, [2]int{1, 0}, s.Frame.Plane)
	assert.Equal(t, [2]string{"xi", "eta"}, s.Frame.Axes)
	assert.Equal(t, "theta", s.Frame.Angle)
	assert.Equal(t, "A + u", formula.Text(s.Lets["B"]))
	assert.Equal(t, "B^2", formula.Text(s.Model.Energy))
	assert.Equal(t, "A", formula.Text(s.Fields["F"].Components["xi"]))
	assert.Equal(t, "B", formula.Text(s.Fields["F"].Components["eta"]))
	require.Len(t, s.Assume, 2)
	assert.Equal(t, ">=", s.Assume[0].Relation)
	assert.Equal(t, "eps/2", formula.Text(s.Assume[0].Right))
	assert.Equal(t, source.Pos{Line: 6, Col: 16}, s.Assume[0].Right.At(), "the place is that of the file")
	assert.Equal(t, source.Pos{Line: 6, Col: 34}, s.Assume[1].Right.At())
}

func TestClaimKeys(t *testing.T) {
	c := claimOf(t, `states = "u_x <= 1"
restrict = { u_zy = "1/2 - eps" }
box = { u_x = ["-1", "(1 + 1)^2/3"], x = [0, 0.5], eps = ["1", "2"], u = [0, 1] }
assume = ["u_x \\ge u_y"]
modulo = ["R", "u_y = u_z^2", "u_x = 0"]
`)
	require.Len(t, c.Restrict, 1)
	assert.Equal(t, jet.Index{0, 1, 1}, c.Restrict[0].Index)
	assert.Equal(t, 0, c.Restrict[0].Unknown)
	assert.Equal(t, "1/2 - eps", formula.Text(c.Restrict[0].Value))
	require.Len(t, c.Box, 4)
	assert.Equal(t, big.NewRat(4, 3), c.Box[0].Hi)
	assert.Equal(t, big.NewRat(1, 2), c.Box[1].Hi)
	assert.Equal(t, "u_x", formula.Text(c.Box[0].Node))
	require.Len(t, c.Assume, 1)
	assert.Equal(t, ">=", c.Assume[0].Relation)
	var modulo []string
	for _, m := range c.Modulo {
		modulo = append(modulo, formula.Text(m))
	}
	assert.Equal(t, []string{"R", "u_y - u_z^2", "u_x"}, modulo)
	assert.Equal(t, Expectation{Verdict: claim.Proved}, c.Expected)
	require.Len(t, c.Assumed(), 2)
}

func TestConstantsOfAClaim(t *testing.T) {
	c := parsed(t, space+`[[claim]]
name = "a"
states = "c u_x = κ u_x + eps"
solve = ["c", "kappa", "eps"]
expect = "c = 1, κ = 2"
[[claim]]
name = "b"
states = "u_x <= C"
best = "C"
`)
	assert.Equal(t, []string{"c", "kappa", "eps"}, c.Claims[0].Solve)
	assert.Equal(t, []string{"eps", "c", "kappa"}, c.Claims[0].Setting.Constants)
	assert.Equal(t, "C", c.Claims[1].Best)
	assert.Equal(t, []string{"eps", "C"}, c.Claims[1].Setting.Constants)
	assert.Equal(t, []string{"eps"}, c.Setting.Constants, "the setting of the case is left as it is")
	assert.Equal(t, claim.Proved, c.Claims[0].Expected.Verdict)
}

func TestGivenAndJump(t *testing.T) {
	c := parsed(t, space+`[let]
k = "eps + 1"
R = "u_z - u_x^2"
[model]
residual = "R"
[[claim]]
name = "a"
given = { u = "k x" }
states = "u_x = k"
[[claim]]
name = "b"
at = "jump"
states = "[u_x] = {u_x}"
modulo = "divergence"
`)
	assert.Equal(t, "k x", formula.Text(c.Claims[0].Given[0]))
	assert.True(t, c.Claims[1].Jump)
	assert.True(t, c.Claims[1].Divergence)
}

// Each mistake is refused at its place, and the message says what to do.
func TestRefusals(t *testing.T) {
	claim := func(keys string) string {
		return space + frame + "[let]\nR = 'u_z'\nk = 'eps'\n[field.S]\nx = 'u_x'\n[[claim]]\nname = 'c'\n" + keys
	}
	for name, c := range map[string]struct {
		text string
		want []string // parts of the message
		at   source.Pos
	}{
		"cycle of two": {space + "[let]\nA = 'B + 1'\nB = '2 A'\n",
			[]string{"A is defined by itself: A, then B, then A", "break the cycle"}, source.Pos{Line: 7, Col: 1}},
		"self": {space + "[let]\nA = 'A_x'\n", []string{"A is defined by itself"}, source.Pos{Line: 7, Col: 1}},
		"cycle through a field": {space + "[let]\nA = 'F_x'\n[field.F]\nx = 'A'\n",
			[]string{"A, then the field F, then A"}, source.Pos{Line: 7, Col: 1}},
		"unknown name in a let":   {space + "[let]\nA = 'foo'\n", []string{`unknown name "foo"`}, source.Pos{Line: 7, Col: 6}},
		"a name declared twice":   {"[space]\ncoordinates = ['x']\nunknowns = ['x']\n[let]\nA = '1'\n", []string{"already"}, source.Pos{Line: 3, Col: 14}},
		"greek declared twice":    {"[space]\ncoordinates = ['ξ', 'xi']\n[let]\nA = '1'\n", []string{"declared twice"}, source.Pos{Line: 2, Col: 22}},
		"reserved":                {"[space]\ncoordinates = ['x']\nunknowns = ['nu']\n[let]\nA = '1'\n", []string{"reserved"}, source.Pos{Line: 3, Col: 14}},
		"ambiguous subscripts":    {"[space]\ncoordinates = ['x', 'y', 'xy']\n[let]\nA = '1'\n", []string{"could be read"}, source.Pos{Line: 2, Col: 27}},
		"plane is no coordinate":  {space + strings.Replace(frame, `"y"`, `"w"`, 1), []string{`"w" is no coordinate`}, source.Pos{Line: 7, Col: 16}},
		"plane of one coordinate": {"[space]\ncoordinates = ['ξ', 'y']\n[frame]\nplane = ['ξ', 'xi']\naxes = ['a', 'b']\nangle = 'c'\n", []string{"one coordinate twice"}, source.Pos{Line: 4, Col: 16}},
		"component is no direction": {space + "[field.F]\nw = 'u'\n",
			[]string{`"w" is no direction`}, source.Pos{Line: 7, Col: 1}},
		"mixed components": {space + frame + "[field.F]\nxi = 'u'\ny = 'u'\n", []string{"beside one along the axis xi"}, source.Pos{Line: 12, Col: 1}},
		"component twice":  {space + frame + "[field.F]\nxi = 'u'\n'ξ' = 'u'\n", []string{"given twice"}, source.Pos{Line: 12, Col: 2}},
		"assumption without relation": {"[space]\ncoordinates = ['x']\nassume = ['x + 1']\n[let]\nA = '1'\n",
			[]string{"an assumption has a relation"}, source.Pos{Line: 3, Col: 12}},
		"chained assumption": {"[space]\ncoordinates = ['x']\nassume = ['0 < x < 1']\n[let]\nA = '1'\n",
			[]string{"one relation", "write two"}, source.Pos{Line: 3, Col: 18}},
		"mistake right of an assumption": {"[space]\ncoordinates = ['x']\nassume = ['x > foo']\n[let]\nA = '1'\n",
			[]string{`"foo"`}, source.Pos{Line: 3, Col: 16}},

		"statement without relation": {claim("states = 'u_x'"), []string{"a claim has a relation"}, source.Pos{Line: 17, Col: 14}},
		"jump outside a jump":        {claim("states = '[u_x] = 0'"), []string{"jump"}, source.Pos{Line: 17, Col: 11}},
		"solve an inequality":        {claim("states = 'c u_x >= 0'\nsolve = ['c']"), []string{"solve is for an equation"}, source.Pos{Line: 18, Col: 11}},
		"best of an equation":        {claim("states = 'c u_x = 0'\nbest = 'c'"), []string{"best is for an inequality"}, source.Pos{Line: 18, Col: 9}},
		"solve for a let":            {claim("states = 'k u_x = 0'\nsolve = ['k']"), []string{"already that of a named formula"}, source.Pos{Line: 18, Col: 11}},
		"solution of another name":   {claim("states = 'c u_x = 0'\nsolve = ['c']\nexpect = 'd = 1'"), []string{"not asked for"}, source.Pos{Line: 19, Col: 11}},
		"solution without value":     {claim("states = 'c u_x = 0'\nsolve = ['c']\nexpect = 'c ='"), []string{"no solution"}, source.Pos{Line: 19, Col: 11}},
		"free and not asked for":     {claim("states = 'c u_x = 0'\nsolve = ['c']\nexpect = 'd free'"), []string{"not asked for"}, source.Pos{Line: 19, Col: 11}},
		"nothing free":               {claim("states = 'c u_x = 0'\nsolve = ['c']\nexpect = 'c = 1, free'"), []string{"no solution", `"c free"`}, source.Pos{Line: 19, Col: 11}},
		"assume a difference":        {claim("states = 'u_x = 0'\nassume = ['u_x != 0']"), []string{"differ", "a claim for each side"}, source.Pos{Line: 18, Col: 16}},
		"assume two signs":           {claim("states = 'u_x = 0'\nassume = ['u_x == 0']"), []string{`write "="`}, source.Pos{Line: 18, Col: 16}},
		"modulo two signs":           {claim("states = 'u_x = 0'\nmodulo = 'u_x == 0'"), []string{`write "="`}, source.Pos{Line: 18, Col: 15}},
		"unknown verdict":            {claim("states = 'u_x = 0'\nexpect = 'maybe'"), []string{"not a verdict"}, source.Pos{Line: 18, Col: 11}},
		"given is no unknown":        {claim("states = 'u_x = 0'\ngiven = { w = 'x' }"), []string{`"w" is no unknown`}, source.Pos{Line: 18, Col: 11}},
		"given by itself":            {claim("states = 'u_x = 0'\ngiven = { u = 'x + u' }"), []string{"depends on an unknown"}, source.Pos{Line: 18, Col: 20}},
		"given by a let of u":        {claim("states = 'u_x = 0'\ngiven = { u = 'R' }"), []string{"depends on an unknown: R"}, source.Pos{Line: 18, Col: 16}},
		"given by a field":           {claim("states = 'u_x = 0'\ngiven = { u = 'S_x' }"), []string{"depends on an unknown"}, source.Pos{Line: 18, Col: 16}},
		"restrict an axis":           {claim("states = 'u_x = 0'\nrestrict = { u_xi = 1 }"), []string{"along an axis"}, source.Pos{Line: 18, Col: 14}},
		"restrict the unknown":       {claim("states = 'u_x = 0'\nrestrict = { u = 1 }"), []string{"restrict fixes a derivative"}, source.Pos{Line: 18, Col: 14}},
		"restrict twice":             {claim("states = 'u_x = 0'\nrestrict = { u_xy = 1, u_yx = 2 }"), []string{"restricted twice"}, source.Pos{Line: 18, Col: 24}},
		"restrict to no constant":    {claim("states = 'u_x = 0'\nrestrict = { u_x = 'u_y' }"), []string{"no constant: u_y"}, source.Pos{Line: 18, Col: 21}},
		"restrict a let":             {claim("states = 'u_x = 0'\nrestrict = { R_x = 1 }"), []string{`"R_x" cannot stand here`}, source.Pos{Line: 18, Col: 14}},
		"too high a derivative":      {claim("states = 'u_x = 0'\nrestrict = { u_xxxxxxxxx = 1 }"), []string{"order 9"}, source.Pos{Line: 18, Col: 14}},
		"box of a let":               {claim("states = 'u_x >= 0'\nbox = { R = [0, 1] }"), []string{`"R" cannot stand here`}, source.Pos{Line: 18, Col: 9}},
		"box upside down":            {claim("states = 'u_x >= 0'\nbox = { u_x = [1, 0] }"), []string{"empty", "[lower, upper]"}, source.Pos{Line: 18, Col: 9}},
		"box without numbers":        {claim("states = 'u_x >= 0'\nbox = { u_x = ['0', 'pi'] }"), []string{"pi is not a rational number"}, source.Pos{Line: 18, Col: 22}},
		"box of a huge power":        {claim("states = 'u_x >= 0'\nbox = { u_x = ['0', '2^1000'] }"), []string{"not a rational number"}, source.Pos{Line: 18, Col: 22}},
		"modulo an inequality":       {claim("states = 'u_x = 0'\nmodulo = 'u_y > 0'"), []string{"modulo holds an inequality"}, source.Pos{Line: 18, Col: 15}},
		"modulo a chain":             {claim("states = 'u_x = 0'\nmodulo = 'u_y = u_x = 0'"), []string{"an equation has one relation"}, source.Pos{Line: 18, Col: 21}},
		"modulo of an entropy":       {strings.Replace(claim("states = 'entropy(S)'\nmodulo = 'R'"), "[field", "[model]\nresidual = 'R'\n[field", 1), []string{"without effect"}, source.Pos{Line: 20, Col: 11}},
		"entropy without a model":    {claim("states = 'entropy(S)'"), []string{"needs the residual"}, source.Pos{Line: 16, Col: 9}},
		"jump without a model":       {claim("states = '[u_x] = 0'\nat = 'jump'"), []string{"needs the residual"}, source.Pos{Line: 16, Col: 9}},
		"exponents of an equation":   {claim("states = 'u_x = 0'\nintegrability = { u_x = 3 }"), []string{"without effect"}, source.Pos{Line: 18, Col: 19}},
		"no exponents":               {claim("states = 'S in L^1'"), []string{"nothing is known"}, source.Pos{Line: 16, Col: 9}},
		"exponent of a coordinate":   {claim("states = 'S in L^1'\nintegrability = { x = 3 }"), []string{"integrability is of unknowns"}, source.Pos{Line: 18, Col: 19}},
	} {
		t.Run(name, func(t *testing.T) {
			_, err := Parse("case.toml", []byte(c.text))
			require.Error(t, err)
			for _, part := range c.want {
				assert.Contains(t, err.Error(), part)
			}
			var list casefile.Errors
			require.True(t, errors.As(err, &list))
			var first *source.Error
			require.True(t, errors.As(list[0], &first))
			assert.Equal(t, c.at, first.Pos(), err.Error())
			assert.Equal(t, "case.toml", first.File)
		})
	}
}

func TestManyMistakesStayShort(t *testing.T) {
	var b strings.Builder
	b.WriteString(space + "[let]\n")
	for i := range 500 {
		b.WriteString("A" + strings.Repeat("a", i%20) + strings.Repeat("b", i/20) + " = 'foo'\n")
	}
	_, err := Parse("case.toml", []byte(b.String()))
	var list casefile.Errors
	require.True(t, errors.As(err, &list))
	assert.Len(t, list, maxFaults)
	assert.LessOrEqual(t, len(err.Error()), 2500)
}

func TestLongChainsOfLets(t *testing.T) {
	chain := func(n int, down bool) error {
		b := strings.Builder{}
		b.WriteString(space + "[let]\nA0 = '1'\n")
		for i := range n {
			k := i + 1
			if down {
				k = n - i
			}
			b.WriteString("A" + big.NewInt(int64(k)).String() + " = 'A" + big.NewInt(int64(k-1)).String() + " + 1'\n")
		}
		_, err := Parse("case.toml", []byte(b.String()))
		return err
	}
	for _, down := range []bool{false, true} {
		assert.NoError(t, chain(maxChain-2, down))
		assert.ErrorContains(t, chain(maxChain+5, down), "one inside another")
		assert.ErrorContains(t, chain(20000, down), "one inside another")
	}
}

func TestLineOfAText(t *testing.T) {
	x := newText("f", []byte("\ufeffa\r\nb\n\nd"))
	assert.Equal(t, []string{"a", "b", "", "d", ""}, []string{x.line(1), x.line(2), x.line(3), x.line(4), x.line(5)})
}

func BenchmarkParseLibrary(b *testing.B) {
	for b.Loop() {
		for _, name := range library.Names() {
			if _, err := BuiltIn(name); err != nil {
				b.Fatal(err)
			}
		}
	}
}

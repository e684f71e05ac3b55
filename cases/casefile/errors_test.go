package casefile

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

const head = "[space]\ncoordinates = [\"x\", \"y\"]\nunknowns = [\"u\"]\n" // lines 1 to 3

// Each kind of mistake is reported at its place, with what to write instead.
func TestMistakes(t *testing.T) {
	for _, c := range []struct {
		name, text string
		line, col  int
		says       []string
	}{
		{"unknown key", head + "[[claim]]\nname=\"c\"\nstates=\"u_x = u_x\"\ncolour=\"red\"\n", 7, 1, []string{`"colour"`, "a [[claim]] has the keys name, states"}},
		{"misspelt key", head + "[[claim]]\nname = 'c'\nstate = 'u_x = 0'\n", 6, 1, []string{`did you mean "states"`}},
		{"swapped letters", head + "[[surface]]\nnmae = 's'\n", 5, 1, []string{`did you mean "name"`}},
		{"unknown table", head + "[lets]\nR = 'u_x'\n", 4, 2, []string{`did you mean "let"`}},
		{"unknown key in a patch", head + "[[surface]]\nname='s'\nplus='1'\nminus='2'\npatch = { mop = ['x'], over = {x=['0','1']} }\n", 8, 11, []string{`did you mean "map"`}},
		{"wrong type of title", "title = 3\n" + head, 1, 9, []string{`"title" must be a string, not a number`}},
		{"wrong type of a formula", head + "[let]\nR = true\n", 5, 5, []string{"a formula in quotes or a number", "true or false"}},
		{"date as a formula", head + "[let]\nR = 2020-01-02\n", 5, 5, []string{"not a date"}},
		{"list as a formula", head + "[let]\nR = ['a', 'b']\n", 5, 5, []string{"not a list"}},
		{"infinite number", head + "[let]\nR = inf\n", 5, 5, []string{"not a finite number"}},
		{"huge exponent", head + "[let]\nR = 1e999999999\n", 5, 5, []string{"too large an exponent"}},
		{"claim as a single table", head + "[claim]\nname='c'\n", 4, 2, []string{"list of tables", "[[claim]]"}},
		{"space as a list", "[[space]]\ncoordinates = ['x']\n", 1, 3, []string{"must be a table"}},
		{"space as a number", "space = 1\n", 1, 9, []string{"must be a table"}},
		{"claim without states", head + "[[claim]]\nname = 'c'\n", 4, 3, []string{`the claim "c" has no "states"`, "add states ="}},
		{"claim without name", head + "[[claim]]\nstates = '1 = 1'\n", 4, 3, []string{`has no "name"`}},
		{"empty name", head + "[[claim]]\nname = ' '\nstates = '1 = 1'\n", 5, 9, []string{"the name is empty"}},
		{"empty statement", head + "[[claim]]\nname = 'c'\nstates = ''\n", 6, 11, []string{`"states" is empty`, `write a claim such as "div(Sigma) = R L"`}},
		{"empty assumption", head + "[[claim]]\nname = 'c'\nstates = '1 = 1'\nassume = ['']\n", 7, 12, []string{`"assume" is empty`, `write a condition such as "eps > 0"`}},
		{"free without solve", head + "[[claim]]\nname = 'c'\nstates = '1 = 1'\nexpect = 'c free'\n", 7, 11, []string{`expects a solution, and nothing is solved for`}},
		{"rough within", head + "[[surface]]\nname='s'\ndensity='1'\npolygon=[['0','0'],['1','0']]\nwithin = 0.002\n", 8, 10, []string{`"within" is at most 1e-3`}},
		{"surface without name", head + "[[surface]]\nplus='1'\nminus='2'\npolygon=[['0','0'],['1','0']]\n", 4, 3, []string{`has no "name"`}},
		{"claim named twice", head + "[[claim]]\nname='c'\nstates='1 = 1'\n[[claim]]\nname='c'\nstates='1 = 1'\n", 8, 7, []string{`the claim "c" is already on line 5`}},
		{"surface named twice", head + strings.Repeat("[[surface]]\nname='s'\ndensity='1'\npolygon=[['0','0'],['1','0']]\n", 2), 9, 7, []string{`the surface "s" is already on line 5`}},
		{"key twice", head + "unknowns = ['v']\n", 4, 1, []string{`"unknowns" is already defined on line 3`}},
		{"key twice in an inline table", head + "[[claim]]\nname='c'\nstates='1=1'\ngiven = { u = '1', u = '2' }\n", 7, 20, []string{"already defined on line 7"}},
		{"table twice", head + "[let]\nR='u'\n[let]\nL='u'\n", 6, 2, []string{`"let" is already defined on line 4`, "under one header"}},
		{"table and list", head + "[[claim]]\nname='c'\nstates='1=1'\n[claim]\n", 7, 2, []string{"write [[claim]] each time"}},
		{"list and table", head + "[field.S]\nx='1'\n[[field.S]]\n", 6, 9, []string{"a single table above"}},
		{"table over a value", head + "[let]\nR='1'\n[let.R]\nx='1'\n", 6, 6, []string{`"R" is already defined on line 5`}},
		{"header through a value", "title = 'a'\n[title.b]\n", 2, 2, []string{`already defined on line 1`}},
		{"dotted key through a value", head + "[let]\nR = '1'\nR.x = '2'\n", 6, 1, []string{"already defined on line 5"}},
		{"long dotted key", "a.b.c.d.e.f = 1\n", 1, 9, []string{"more than 4 parts"}},
		{"deep lists", head + "[let]\nR = " + strings.Repeat("[", 40) + strings.Repeat("]", 40) + "\n", 5, 5, []string{"nested more than"}},
		{"tab in a formula", head + "[let]\nR = \"\\theta u_x\"\n", 5, 6, []string{"U+0009", "single quotes"}},
		{"newline in a formula", head + "[let]\nR = \"\\nu_x\"\n", 5, 6, []string{"U+000A", "single quotes"}},
		{"escape character in a formula", head + "[let]\nR = \"\\eps u_x\"\n", 5, 6, []string{"U+001B", "single quotes"}},
		{"unknown escape in a formula", head + "[let]\nR = \"u_x + \\sigma\"\n", 5, 12, []string{"single quotes"}},
		{"hexadecimal escape in a formula", head + "[let]\nR = \"\\xi\"\n", 5, 8, []string{"single quotes"}},
		{"raw tab in a formula", head + "[let]\nR = 'u_x +\tu_y'\n", 5, 11, []string{"U+0009", "spaces"}},
		{"formula over lines", head + "[let]\nR = '''u_x\n+ u_y'''\n", 5, 11, []string{"on one line"}},
		{"empty formula", head + "[let]\nR = '  '\n", 5, 6, []string{"empty"}},
		{"let that is no name", head + "[let]\nR_1 = 'u'\n", 5, 1, []string{`"R_1"`, "without underscores"}},
		{"let that is a number", head + "[let]\n1 = 'u'\n", 5, 1, []string{"a letter and then"}},
		{"field that is no name", head + "[field.S-1]\nx = 'u'\n", 4, 8, []string{"the name of a field"}},
		{"component that is no name", head + "[field.S]\nx-y = 'u'\n", 5, 1, []string{"the name of a component"}},
		{"field that is a formula", head + "[field]\nS = 'u'\n", 5, 1, []string{"[field.S]"}},
		{"field without components", head + "[field.S]\n", 4, 8, []string{"no components"}},
		{"coordinate that is no name", "[space]\ncoordinates = ['x', '2']\n", 2, 22, []string{`"2"`}},
		{"coordinate twice", "[space]\ncoordinates = ['x', 'x']\n", 2, 22, []string{"named twice"}},
		{"no coordinates", "[space]\nunknowns = ['u']\n", 1, 2, []string{`has no "coordinates"`}},
		{"seven coordinates", "[space]\ncoordinates = ['a','b','c','d','f','g','h']\n", 2, 15, []string{"at most 6"}},
		{"five unknowns", "[space]\ncoordinates = ['x']\nunknowns = ['a','b','c','d','f']\n", 3, 12, []string{"at most 4"}},
		{"frame without angle", head + "[frame]\nplane=['x','y']\naxes=['xi','eta']\n", 4, 2, []string{`no "angle"`}},
		{"frame with three axes", head + "[frame]\nplane=['x','y']\naxes=['a','b','c']\nangle='t'\n", 6, 6, []string{"two names"}},
		{"no space", "[[claim]]\nname='c'\nstates='1 = 1'\n", 1, 3, []string{"no [space]"}},
		{"title alone", "title = 'x'\n", 1, 1, []string{"holds no case"}},
		{"unknown at", head + "[[claim]]\nname='c'\nstates='1=1'\nat='jmup'\n", 7, 5, []string{`at = "jump"`}},
		{"unknown verdict", head + "[[claim]]\nname='c'\nstates='1=1'\nexpect='prooved'\n", 7, 9, []string{`did you mean "proved"`}},
		{"solution without solve", head + "[[claim]]\nname='c'\nstates='1=1'\nexpect='c = 1'\n", 7, 9, []string{"nothing is solved for"}},
		{"solve and best", head + "[[claim]]\nname='c'\nstates='1=1'\nsolve='c'\nbest='c'\n", 8, 7, []string{"not both"}},
		{"misspelt divergence", head + "[[claim]]\nname='c'\nstates='1=1'\nmodulo='divergance'\n", 7, 9, []string{`did you mean "divergence"`}},
		{"divergence in a list", head + "[[claim]]\nname='c'\nstates='1=1'\nmodulo=['divergence', 'u_x']\n", 7, 10, []string{"cannot be one of a list"}},
		{"box of one end", head + "[[claim]]\nname='c'\nstates='1=1'\nbox = { u_x = ['1'] }\n", 7, 15, []string{"2 entries, not 1"}},
		{"exponent below one", head + "[[claim]]\nname='c'\nstates='S in L^1'\nintegrability = { u_x = 0.5 }\n", 7, 25, []string{"at least 1"}},
		{"exponent that is no number", head + "[[claim]]\nname='c'\nstates='S in L^1'\nintegrability = { u_x = 'three' }\n", 7, 26, []string{"not a number"}},
		{"within not positive", head + "[[surface]]\nname='s'\ndensity='1'\npolygon=[['0','0'],['1','0']]\nwithin=0\n", 8, 8, []string{"positive"}},
		{"no shape", head + "[[surface]]\nname='s'\nplus='1'\nminus='2'\n", 4, 3, []string{"no shape"}},
		{"two shapes", head + "[[surface]]\nname='s'\nplus='1'\nminus='2'\nlevel='x'\nbox={x=[0,1],y=[0,1]}\npolygon=[['0','0'],['1','0']]\n", 10, 9, []string{"more than one shape"}},
		{"one trace", head + "[[surface]]\nname='s'\nplus='1'\npolygon=[['0','0'],['1','0']]\n", 4, 3, []string{`has "plus" and no "minus"`}},
		{"no trace", head + "[[surface]]\nname='s'\npolygon=[['0','0'],['1','0']]\n", 4, 3, []string{"no traces and no density"}},
		{"both kinds of trace", head + "[[surface]]\nname='s'\nplus='1'\nminus='2'\nplus_gradient=['1','0']\nminus_gradient=['1','0']\npolygon=[['0','0'],['1','0']]\n", 4, 3, []string{"both as u and as gradients"}},
		{"level without box", head + "[[surface]]\nname='s'\nplus='1'\nminus='2'\nlevel='x'\n", 4, 3, []string{`no "box"`}},
		{"branches without combine", head + "[[surface]]\nname='s'\nbranches=['x','y']\nbox={x=[0,1]}\n", 4, 3, []string{`no "combine"`}},
		{"two domains", head + "[[surface]]\nname='s'\nbranches=['x','y']\ncombine='max'\nbox={x=[0,1]}\nball={center=[0,0],radius=1}\n", 9, 6, []string{"more than one domain"}},
		{"traces of branches", head + "[[surface]]\nname='s'\nbranches=['x','y']\ncombine='max'\nbox={x=[0,1]}\ndensity='1'\nplus='x'\nminus='y'\n", 10, 7, []string{"remove the traces: they are the branches"}},
		{"domain of a polygon", head + "[[surface]]\nname='s'\ndensity='1'\npolygon=[['0','0'],['1','0']]\nball={center=[0,0],radius=1}\n", 8, 6, []string{"is a polygon and has a ball"}},
		{"ball without radius", head + "[[surface]]\nname='s'\nbranches=['x','y']\ncombine='max'\nball={center=[0,0]}\n", 8, 6, []string{`no "radius"`}},
		{"cylinder without heights", head + "[[surface]]\nname='s'\nbranches=['x','y']\ncombine='max'\ncylinder={center=[0,0],radius=1}\n", 8, 10, []string{`no "heights"`}},
		{"one branch", head + "[[surface]]\nname='s'\nbranches=['x']\ncombine='max'\nball={center=[0,0],radius=1}\n", 6, 10, []string{"2 to 256 entries, not 1"}},
		{"empty combine", head + "[[surface]]\nname='s'\nbranches=['x','y']\ncombine=''\nball={center=[0,0],radius=1}\n", 7, 10, []string{`"combine" is empty`}},
		{"points of two lengths", head + "[[surface]]\nname='s'\ndensity='1'\npolygon=[['0','0'],['1']]\n", 7, 21, []string{"coordinates"}},
		{"order of a patch", head + "[[surface]]\nname='s'\ndensity='1'\norder=6\npolygon=[['0','0'],['1','0']]\n", 7, 7, []string{"for a mesh"}},
		{"order in words", head + "[[surface]]\nname='s'\ndensity='1'\nmesh='a.stl'\norder='six'\n", 8, 8, []string{"positive integer"}},
		{"tolerance of zero", head + "[[surface]]\nname='s'\ndensity='1'\nmesh='a.stl'\ntolerance=0\n", 8, 11, []string{"positive"}},
		{"orientation of the moon", head + "[[surface]]\nname='s'\ndensity='1'\nmesh='a.stl'\norientation='moon'\n", 8, 14, []string{"required"}},
		{"mesh in a box", head + "[[surface]]\nname='s'\ndensity='1'\nmesh='a.stl'\nbox={x=[0,1]}\n", 8, 5, []string{"remove it"}},
		{"patch without over", head + "[[surface]]\nname='s'\ndensity='1'\npatch={map=['x','y']}\n", 7, 7, []string{`no "over"`}},
		{"graph over nothing", head + "[[surface]]\nname='s'\ndensity='1'\ngraph={of='x'}\n", 7, 7, []string{"one of over, triangle and disc"}},
		{"not TOML", "[[[", 1, 3, []string{"each line is"}},
		{"formula without quotes", head + "[let]\nR = u_x\n", 5, 5, []string{"between quotes"}},
		{"number and letters", head + "[let]\nR = 2 eps\n", 5, 7, []string{"between quotes"}},
		{"open string", head + "[let]\nR = 'u_x\n", 5, 9, []string{"close the string"}},
		{"key without value", head + "[let]\nR\n", 5, 2, []string{"key = value"}},
		{"not UTF-8", head + "[let]\nR = '\xff'\n", 5, 6, []string{"0xFF", "UTF-8"}},
		{"columns count runes", head + "[let]\n\"ξ\" = 'u'\nR = 'ξη' \t ξ\n", 6, 12, []string{"newline"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			f, err := Decode("dir/t.toml", []byte(c.text))
			require.Error(t, err)
			assert.Nil(t, f)
			assert.Contains(t, err.Error(), fmt.Sprintf("dir/t.toml:%d:%d: ", c.line, c.col))
			for _, s := range c.says {
				assert.Contains(t, err.Error(), s)
			}
			assert.Len(t, err.(Errors), 1, "one mistake is one problem")
		})
	}
}

// A file with nothing in it, or with something else in it, has no place.
func TestNotACase(t *testing.T) {
	for name, c := range map[string]struct{ text, says string }{
		"empty":    {"", "holds no case"},
		"comments": {"# nothing\n\n", "holds no case"},
		"bom":      {"\ufeff", "holds no case"},
		"binary":   {"\x7fELF\x00\x01", "binary"},
		"commas":   {"a = [" + strings.Repeat("1,", maxSeparators+1) + "]", "commas"},
		"large":    {strings.Repeat("#", maxBytes+1), "more than"},
	} {
		f, err := Decode("t.toml", []byte(c.text))
		require.Error(t, err, name)
		assert.Nil(t, f)
		assert.Contains(t, err.Error(), c.says, name)
		assert.Contains(t, err.Error(), "t.toml", name)
	}
}

// Independent mistakes come together, in the order of the file.
func TestSeveralMistakes(t *testing.T) {
	_, err := Decode("t.toml", []byte("titel = 'x'\n[space]\ncoordinates = ['x']\nunknown = ['u']\n[[claim]]\nname = 'c'\nstates = 3.5e\n"))
	require.Len(t, err.(Errors), 1, "a file that is not TOML has one problem")

	_, err = Decode("t.toml", []byte("titel = 'x'\n[space]\ncoordinates = ['x']\nunknown = ['u']\n[[claim]]\nname = 'c'\n[[claim]]\nstates = ''\nname = 'd'\n"))
	var places []string
	for _, e := range err.(Errors) {
		places = append(places, e.Error()[:len("t.toml:0:0")])
	}
	assert.Equal(t, []string{"t.toml:1:1", "t.toml:4:1", "t.toml:5:3", "t.toml:8:1"}, places)
}

// However bad the file, the text is short and comes at once.
func TestErrorsAreShort(t *testing.T) {
	start := time.Now()
	for _, text := range []string{
		head + "[let]\n" + strings.Repeat("1 = 'u'\n2 = 'v'\n", 5000),
		head + "[let]\n" + strings.Repeat("x", 1<<20) + "_ = '" + strings.Repeat("(", 1<<20) + "\t'\n",
		strings.Repeat("[", 1<<20),
		"a = " + strings.Repeat("[", 1<<20),
		"a = " + strings.Repeat("{a = ", 1<<18),
		"a = [" + strings.Repeat("1,", 1<<20) + "]",
		strings.Repeat("a.", 1<<20) + "a = 1",
		"[" + strings.Repeat("a.", 1<<20) + "a]",
		head + "[let]\nR = " + strings.Repeat("9", 1<<20) + "\n",
		head + "[let]\nR = 0x" + strings.Repeat("f", 1<<20) + "\n",
		head + strings.Repeat("[[claim]]\nname = 'c'\nstates = '1 = 1'\n", 20000),
		head + strings.Repeat("[[surface]]\n", 50000),
		"title = '''" + strings.Repeat("\n", 1<<20),
		head + "[let]\nR = '" + strings.Repeat("é", 1<<19) + "\t'",
	} {
		_, err := Decode("t.toml", []byte(text))
		require.Error(t, err, "%.40q", text)
		assert.LessOrEqual(t, len(err.Error()), maxText, "%.40q", text)
		assert.LessOrEqual(t, len(err.(Errors)), maxProblems)
	}
	assert.Less(t, time.Since(start), time.Minute, "a hang, not a speed")
}

func TestNearest(t *testing.T) {
	known := []string{"states", "solve", "name", "at"}
	for s, want := range map[string]string{"state": "states", "sovle": "solve", "Name": "name", "colour": "", "a": "at", "": "", strings.Repeat("x", 100): ""} {
		assert.Equal(t, want, nearest(s, known), s)
	}
	assert.Equal(t, 1, distance("ab", "ba"))
	assert.Equal(t, 3, distance("kitten", "sitting"))
}

func FuzzDecode(f *testing.F) {
	f.Add([]byte(head + sample))
	for _, s := range []string{"", "[[claim]]\nname='c'", "a = {b = [1, 2.5e3, 0x1F, '''x''']}", "a.b.c = 1\n[a]\n", "x = \"\\u00e9\"", "\ufeff# c", "[[surface]]\npolygon=[[0,0],[1,1]]"} {
		f.Add([]byte(s))
		f.Add([]byte(head + s))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		file, err := Decode("f.toml", data)
		if (file == nil) == (err == nil) {
			t.Fatalf("file %v and error %v", file, err)
		}
		if err == nil {
			return
		}
		if n := len(err.Error()); n == 0 || n > maxText {
			t.Fatalf("%d bytes of error", n)
		}
		if !strings.Contains(err.Error(), "f.toml") {
			t.Fatalf("no place in %q", err)
		}
	})
}

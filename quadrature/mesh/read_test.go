package mesh_test

import (
	"bytes"
	"context"
	"encoding/binary"
	"fmt"
	"io"
	"math"
	"runtime"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/quadrature/mesh"
)

func TestFormatsAgree(t *testing.T) {
	s := torus(2, 0.5, 12, 8)
	a, b := read(t, s.text()), read(t, s.obj())
	assert.Equal(t, "STL", a.Format)
	assert.Equal(t, "OBJ", b.Format)
	assert.Equal(t, a.Vertices, b.Vertices)
	assert.Equal(t, a.Triangles, b.Triangles)
	assert.Len(t, a.Vertices, 96)
	assert.Len(t, a.Triangles, 192)
	c := read(t, s.binary())
	assert.Equal(t, "binary STL", c.Format)
	assert.Equal(t, a.Triangles, c.Triangles)
	for i, p := range a.Vertices {
		for k := range p {
			assert.Equal(t, float64(float32(p[k])), c.Vertices[i][k]+0)
		}
	}
	top, err := c.Check(t.Context())
	require.NoError(t, err)
	assert.Equal(t, []int{288, 0}, []int{top.Edges, top.Boundary})
}

func TestOBJ(t *testing.T) {
	m := read(t, []byte("\ufeff# a comment with \\\n continued\nmtllib x.mtl\nv 0 0 0\r\nv 1 0 \\\r\n 0 # behind\nv 1 1 0 1.0\nv 0 1 0 .5 .5 1\n"+
		"vt 0 0\nvn 0 0 1\ng part\nf 1/1/1 2//1 3/1 \\\n -1\nl 1 2\nv 0 0 1\nf 2/1 1/1 5"))
	assert.Len(t, m.Vertices, 5)
	assert.Equal(t, [][3]int32{{0, 1, 2}, {0, 2, 3}, {1, 0, 4}}, m.Triangles)
	top, err := m.Check(t.Context())
	require.NoError(t, err)
	assert.Equal(t, 5, top.Boundary)
}

func TestSTLInAnyDress(t *testing.T) {
	m := read(t, []byte("  SOLID\rFacet Normal 0 0 -1 OUTER LOOP vertex 0 0 0\n vertex 1 0 0 vertex 0 1 -0.0 endloop\nendfacet endsolid\n"+
		"solid second one\nfacet normal nan nan nan outer loop vertex 1 0 0 vertex 1 1e0 0 vertex 0 1 0 endloop endfacet\nendsolid second one"))
	assert.Len(t, m.Vertices, 4)
	assert.Len(t, m.Triangles, 2)
	assert.Equal(t, 1, m.Contradicting)
}

func TestDegenerateTrianglesAreCounted(t *testing.T) {
	s := append(soup{{{0, 0, 0}, {0, 0, 0}, {1, 0, 0}}}, wall(1)...)
	s = append(s, [3]point{{0, 0, 0}, {0, 0, 1}, {0, 0, 2}})
	m := read(t, s.text())
	assert.Equal(t, []int{1, 1, 3}, []int{m.Dropped, m.Flat, len(m.Triangles)})
	assert.Equal(t, []int32{1, 2, 3}, m.Number)
	r, err := mesh.Integrate(t.Context(), m, alone(one), mesh.Options{Unoriented: true})
	require.NoError(t, err)
	assert.InDelta(t, 1, r.Area, 1e-15)
	assert.ErrorIs(t, readErr(t, string(soup{s[0], s[3]}.text())), mesh.ErrFormat)
}

const facet = "facet normal 0 0 1\nouter loop\nvertex 0 0 0\nvertex 1 0 0\nvertex 0 1 0\nendloop\nendfacet\n"

func TestMalformedText(t *testing.T) {
	for _, c := range []struct{ text, where, says string }{
		{"", "mesh file:", "empty"},
		{"solid x\n" + facet, "STL, line 9, column 1", "truncated"},
		{"solid x\n" + facet[:40], "STL, line 4, column", "truncated"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0 0 NaN\n", "STL, line 4, column 12", "not a number"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0 -inf 0\n", "line 4, column 10", "infinite"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0 1e400 0\n", "line 4, column 10", "infinite"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0 1e200 0\n", "line 4, column 10", "too large"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0,5 0 0\n", "line 4, column 8", "decimal sign"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0x1 0 0\n", "line 4, column 8", "decimal notation"},
		{"solid x\nfacet normal 0 0 1\nouter loop\nvertex 0 0 0\nendloop", "line 5, column 1", `"vertex" is expected`},
		{"solid é\nfacet normel", "line 2, column 7", `"normel"`},
		{"solid x\nendsolid x\n", "STL:", "no triangle"},
		{"solid x\n" + facet + "endsolid\nmore", "line 10, column 1", `"solid" is expected`},
		{"hello world\n", "OBJ, line 1, column 1", `"hello" is no statement`},
		{"{\"json\": 1}", "OBJ, line 1, column 1", "no statement"},
		{"v 1 2\nf 1 1 1\n", "OBJ, line 1, column 1", "not 2"},
		{"v 1 2 x\n", "line 1, column 7", "no number"},
		{"v 1 2 inf\n", "line 1, column 7", "infinite"},
		{"v 1 2 3 0.5\n", "line 1, column 1", "weight"},
		{"v 1 2 3 4 5 6 7 8\n", "line 1, column 17", "at most"},
		{"v 0 0 0\nf 1 2 3\n", "line 2, column 5", "vertex 2 where there are 1"},
		{"v 0 0 0\nf 1 -2 3\n", "line 2, column 5", "vertex -2"},
		{"v 0 0 0\nf 0 1 1\n", "line 2, column 3", "from 1"},
		{"v 0 0 0\nf 1/1/1/1 1 1\n", "line 2, column 3", "no corner"},
		{"v 0 0 0\nf 1/ 1 1\n", "line 2, column 3", "no corner"},
		{"v 0 0 0\nf 99999999999999999999 1 1\n", "line 2, column 3", "out of range"},
		{"v 0 0 0\nf 1 1\n", "line 2, column 1", "2 corners"},
		{"surf 0 1\n", "line 1, column 1", "free-form"},
		{"v 0 0 0\nv 2 0 0\nv .1 .1 0\nv 0 2 0\nf 3 4 1 2\nf 2 3 4 1\n", "line 6, column 1", "not convex"},
		{"v 0 0 0\n", "OBJ:", "no triangle"},
	} {
		err := readErr(t, c.text)
		assert.ErrorIs(t, err, mesh.ErrFormat, c.text)
		assert.Contains(t, err.Error(), c.where, c.text)
		assert.Contains(t, err.Error(), c.says, c.text)
	}
}

func TestMalformedBinary(t *testing.T) {
	good := string(wall(2).binary())
	set := func(at int, x uint32) string {
		b := []byte(good)
		binary.LittleEndian.PutUint32(b[at:], x)
		return string(b)
	}
	for name, c := range map[string]struct{ data, says string }{
		"truncated":        {good[:len(good)-1], "announces 8 triangles, 484 bytes, and ends within triangle 8"},
		"header":           {"\x00\x01" + good[:50], "within the 84 bytes"},
		"four billion":     {set(80, math.MaxUint32)[:84], "announces 4294967295 triangles, more than the 5000000"},
		"spaces":           {strings.Repeat(" ", 80) + "\xff\xff\xff\xff", "announces 4294967295 triangles"},
		"solid and spaces": {"solid" + strings.Repeat(" ", 75) + "\xff\xff\xff\xff", "announces 4294967295 triangles"},
		"a million":        {set(80, 1000000), "ends within triangle 9"},
		"too long":         {good + "x", "goes on after the 8 triangles"},
		"nan":              {set(84+50+12+12+4, 0x7fc00000), "byte 162: a coordinate is not a number, in triangle 2"},
		"infinite":         {set(84+12, 0xff800000), "byte 96: a coordinate is infinite, in triangle 1"},
		"no triangles":     {set(80, 0)[:84], "no triangle"},
		"picture":          {"\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR", "neither text nor a binary STL"},
	} {
		err := readErr(t, c.data)
		assert.Contains(t, err.Error(), c.says, name)
	}
}

func TestAnnouncedNumberAllocatesNothing(t *testing.T) {
	head := append(make([]byte, 80), 0xff, 0xff, 0xff, 0xff)
	limits := mesh.Limits{Triangles: 1 << 29}
	binary.LittleEndian.PutUint32(head[80:], 1<<29)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	_, err := mesh.Read(t.Context(), bytes.NewReader(head), limits)
	runtime.ReadMemStats(&after)
	require.ErrorIs(t, err, mesh.ErrFormat)
	assert.Less(t, after.TotalAlloc-before.TotalAlloc, uint64(1<<20))
}

func TestLimits(t *testing.T) {
	for _, data := range [][]byte{wall(3).text(), wall(3).binary(), wall(3).obj()} {
		_, err := mesh.Read(t.Context(), bytes.NewReader(data), mesh.Limits{Triangles: 17})
		require.ErrorIs(t, err, mesh.ErrLimit)
		_, err = mesh.Read(t.Context(), bytes.NewReader(data), mesh.Limits{Triangles: 18, Bytes: int64(len(data))})
		require.NoError(t, err)
		_, err = mesh.Read(t.Context(), bytes.NewReader(data), mesh.Limits{Bytes: int64(len(data)) - 1})
		require.ErrorIs(t, err, mesh.ErrLimit)
	}
	_, err := mesh.Read(t.Context(), strings.NewReader("v 0 0 0"), mesh.Limits{Triangles: 1 << 30})
	require.Error(t, err)
	// Endless input ends at the limits, in bounded memory.
	for _, text := range []string{"v 0 0 0\n", "# comment ", "f ", "x", "solid\nfacet ", "vt \\\n"} {
		_, err := mesh.Read(t.Context(), &endless{text: text}, mesh.Limits{Bytes: 4 << 20})
		require.Error(t, err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	_, err = mesh.Read(ctx, &endless{text: "# "}, mesh.Limits{})
	require.ErrorIs(t, err, context.Canceled)
}

type endless struct {
	text string
	at   int
}

func (e *endless) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = e.text[e.at%len(e.text)]
		e.at++
	}
	return len(p), nil
}

func TestReaderErrorsPass(t *testing.T) {
	data := wall(40).text()
	for _, n := range []int{10, 5000, 70000} {
		_, err := mesh.Read(t.Context(), io.MultiReader(bytes.NewReader(data[:n]), failing{}), mesh.Limits{})
		require.ErrorIs(t, err, io.ErrClosedPipe)
	}
}

type failing struct{}

func (failing) Read([]byte) (int, error) { return 0, io.ErrClosedPipe }

func TestTopology(t *testing.T) {
	s := wall(3)
	s[4][0], s[4][1] = s[4][1], s[4][0]
	_, err := read(t, s.text()).Check(t.Context())
	var top *mesh.TopologyError
	require.ErrorAs(t, err, &top)
	assert.Equal(t, 0, top.NonManifold)
	assert.Equal(t, 3, top.Inconsistent)
	assert.Equal(t, []int{3, 4}, top.Triangles)
	assert.Contains(t, err.Error(), "the triangles 4 and 5 run through it in the same direction")

	s = append(wall(2), [3]point{{0, 0, 0.5}, {0, 0.5, 0.5}, {1, 0, 0}})
	_, err = read(t, s.text()).Check(t.Context())
	require.ErrorAs(t, err, &top)
	assert.Equal(t, 3, top.Shared)
	assert.Equal(t, []int{1, 2, 8}, top.Triangles)
	assert.ElementsMatch(t, []point{{0, 0, 0.5}, {0, 0.5, 0.5}}, []point{top.A, top.B})
	assert.Contains(t, err.Error(), "3 triangles share it, the first are 2, 3 and 9")

	// A Möbius strip has one edge too few.
	strip := grid(24, 2, 0, 24, -1, 1, func(i, w float64) point {
		if i == 24 {
			i, w = 0, -w
		}
		a := 2 * math.Pi * i / 24
		r := 2 + w*math.Cos(a/2)/2
		return point{r * math.Cos(a), r * math.Sin(a), w * math.Sin(a/2) / 2}
	})
	_, err = read(t, strip.text()).Check(t.Context())
	require.ErrorAs(t, err, &top)
	assert.Equal(t, 2, top.Inconsistent)

	// The same triangle twice, and the same one from behind.
	_, err = read(t, append(wall(1), wall(1)...).text()).Check(t.Context())
	require.ErrorAs(t, err, &top)
}

func FuzzRead(f *testing.F) {
	for _, s := range [][]byte{wall(2).text(), wall(2).binary(), wall(2).obj(), []byte("v 0 0 0\nv 1 0 0\nv 0 1 0\nf 1//1 2/1 -1\\\n 1 # x\n"), []byte("solid\n" + facet + "endsolid")} {
		f.Add(s)
		f.Add(s[:len(s)/2])
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		m, err := mesh.Read(t.Context(), bytes.NewReader(data), mesh.Limits{Triangles: 1000, Bytes: 1 << 20})
		if err != nil {
			if m != nil || err.Error() == "" {
				t.Fatal("a mesh with an error")
			}
			return
		}
		if len(m.Triangles) > 1000 || len(m.Vertices) > len(data) {
			t.Fatalf("%d triangles, %d vertices from %d bytes", len(m.Triangles), len(m.Vertices), len(data))
		}
		for _, tri := range m.Triangles {
			for _, v := range tri {
				_ = m.Vertices[v]
			}
		}
		top, err := m.Check(t.Context())
		if (err == nil) != (top.NonManifold+top.Inconsistent == 0) {
			t.Fatal(err)
		}
		if len(m.Triangles) <= 20 {
			_, err = mesh.Integrate(t.Context(), m, alone(one), mesh.Options{Unoriented: true, Workers: 1, Degree: 2})
			if err != nil {
				t.Log(fmt.Sprint(err))
			}
		}
	})
}

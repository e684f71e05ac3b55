package mesh

import (
	"bytes"
	"errors"
	"math"
	"strconv"
)

// mostCorners bounds the corners of one polygon.
const mostCorners = 1 << 12

// An objReader reads the polygonal part of OBJ.
type objReader struct {
	l *lexer
	b *builder
	// merged are the vertices in the order of the file, as those of the
	// builder.
	merged []int32
	face   []int32
}

func readOBJ(l *lexer, b *builder) error {
	r := &objReader{l: l, b: b}
	for {
		t, err := l.next()
		if err != nil {
			return err
		}
		switch {
		case t == endToken:
			return nil
		case t == lineToken:
			continue
		case l.is("v"):
			err = r.vertex()
		case l.is("f"), l.is("fo"):
			err = r.polygon()
		case l.is("surf"), l.is("call"), l.is("curv"), l.is("scmp"):
			return l.fault("%s: free-form geometry and included files are not read; write the surface as triangles", l.shown())
		case r.passed():
			t, err = l.skip()
			if t == endToken && err == nil {
				return nil
			}
		default:
			return l.fault("%s is no statement of OBJ, and the file does not begin as an STL either", l.shown())
		}
		if err != nil {
			return err
		}
	}
}

// passed reports whether the word is a statement that says nothing about the
// surface.
func (r *objReader) passed() bool {
	if r.l.long {
		return false
	}
	switch string(bytes.ToLower(r.l.word)) {
	case "vt", "vn", "vp", "g", "s", "o", "mg", "p", "l", "usemtl", "mtllib", "usemap", "maplib",
		"bevel", "c_interp", "d_interp", "lod", "shadow_obj", "trace_obj", "ctech", "stech",
		"deg", "bmat", "step", "cstype", "curv2", "parm", "trim", "hole", "scrv", "sp", "end", "con", "csh":
		return true
	}
	return false
}

// vertex reads v x y z, with a weight of 1 or a colour behind it at most.
func (r *objReader) vertex() error {
	l := r.l
	at := l.at
	if len(r.merged) >= 3*r.b.most {
		return l.limit("more vertices than the triangles allowed have")
	}
	var x [7]float64
	n := 0
	for {
		t, err := l.next()
		if err != nil {
			return err
		}
		if t != wordToken {
			break
		}
		if n == len(x) {
			return l.fault("a vertex has three coordinates, and a weight or a colour behind them at most")
		}
		if n < 3 {
			x[n], err = l.coordinate()
		} else {
			x[n], err = l.number()
		}
		if err != nil {
			return err
		}
		n++
	}
	if n < 3 || n == 5 {
		l.at = at
		return l.fault("a vertex has three coordinates, not %d", n)
	}
	if n == 4 && x[3] != 1 {
		l.at = at
		return l.fault("the weight %g of a vertex: only polygons are read, whose vertices have none", x[3])
	}
	r.merged = append(r.merged, r.b.vertex([3]float64(x[:3])))
	return nil
}

// polygon reads f and its corners and adds a fan of triangles.
func (r *objReader) polygon() error {
	l := r.l
	at := l.at
	r.face = r.face[:0]
	for {
		t, err := l.next()
		if err != nil {
			return err
		}
		if t != wordToken {
			break
		}
		if len(r.face) == mostCorners {
			return l.limit("a polygon of more than " + strconv.Itoa(mostCorners) + " corners")
		}
		v, err := r.corner()
		if err != nil {
			return err
		}
		r.face = append(r.face, v)
	}
	l.at = at
	if len(r.face) < 3 {
		return l.fault("a polygon of %d corners", len(r.face))
	}
	if len(r.face) > 3 && !r.convex() {
		return l.fault("this polygon of %d corners is not convex, and a fan of triangles would not cover it: cut it into triangles", len(r.face))
	}
	for i := 2; i < len(r.face); i++ {
		if r.b.full() {
			return l.limit(r.b.tooMany())
		}
		r.b.add([3]int32{r.face[0], r.face[i-1], r.face[i]}, [3]float64{})
	}
	return nil
}

// corner is the vertex of a corner v, v/vt, v//vn or v/vt/vn.
func (r *objReader) corner() (int32, error) {
	l := r.l
	parts := bytes.Split(l.word, []byte("/"))
	if l.long || len(parts) > 3 {
		return 0, l.fault("%s is no corner of a polygon", l.shown())
	}
	var v int32
	for i, p := range parts {
		if i == 1 && len(p) == 0 && len(parts) == 3 {
			continue
		}
		k, err := strconv.Atoi(string(p))
		if errors.Is(err, strconv.ErrRange) {
			return 0, l.fault("the index %s is out of range", l.shown())
		}
		if err != nil || k == 0 {
			return 0, l.fault("%s is no corner of a polygon: indices are integers from 1, or from -1 backwards", l.shown())
		}
		if i > 0 {
			continue // of a texture or a normal, which nobody asks for
		}
		n := len(r.merged)
		if k < -n || k > n {
			return 0, l.fault("vertex %d where there are %d so far", k, n)
		}
		if k < 0 {
			k += n + 1
		}
		v = r.merged[k-1]
	}
	return v, nil
}

// convex reports whether all triangles of the fan lie on the same side, to
// rounding.
func (r *objReader) convex() bool {
	v := func(i int) [3]float64 { return r.b.m.Vertices[r.face[i]] }
	var sum [3]float64
	var size float64
	for i := 2; i < len(r.face); i++ {
		n := cross(sub(v(i-1), v(0)), sub(v(i), v(0)))
		for k := range sum {
			sum[k] += n[k]
		}
		size = math.Max(size, norm(n))
	}
	whole := norm(sum)
	if whole == 0 {
		return size == 0
	}
	for i := 2; i < len(r.face); i++ {
		n := cross(sub(v(i-1), v(0)), sub(v(i), v(0)))
		if dot(n, sum)/whole < -1e-9*size {
			return false
		}
	}
	return true
}

package mesh

import (
	"bufio"
	"bytes"
	"context"
	"fmt"
	"io"
	"unicode/utf8"
)

// Limits of a file. The zero value is ready for use.
type Limits struct {
	// Triangles is the largest number of triangles, 5 million if zero, and
	// Bytes the largest size of a file, 512 MiB if zero.
	Triangles int
	Bytes     int64
}

// The limits where none are given.
const (
	MaxTriangles = 5_000_000
	MaxBytes     = 512 << 20
)

func (l Limits) withDefaults() Limits {
	if l.Triangles == 0 {
		l.Triangles = MaxTriangles
	}
	if l.Bytes == 0 {
		l.Bytes = MaxBytes
	}
	return l
}

// window is how much of a file is looked at to recognise its format.
const window = 1024

// Read reads a mesh from STL in text or binary or from OBJ, whichever the
// content is. Errors about the content are a *FormatError, which wraps ErrFormat
// or ErrLimit; others come from the reader or are the cause of a cancelled
// context. Memory is bounded by what has been read, never by what a file
// announces.
func Read(ctx context.Context, r io.Reader, l Limits) (*Mesh, error) {
	l = l.withDefaults()
	if l.Triangles < 0 || l.Bytes < 0 || l.Triangles > 1<<29 {
		return nil, fmt.Errorf("mesh: limits must not be negative, and at most 2^29 triangles")
	}
	in := bufio.NewReaderSize(&counted{ctx: ctx, r: r, left: l.Bytes, most: l.Bytes}, 64<<10)
	head, err := in.Peek(window)
	if err != nil && err != io.EOF {
		return nil, err
	}
	if len(head) == 0 {
		return nil, &FormatError{Format: "mesh file", Problem: "the file is empty", Err: ErrFormat}
	}
	b := newBuilder(l.Triangles)
	switch recognise(head) {
	case binarySTL:
		b.format = "binary STL"
		err = readBinary(in, b)
	case textSTL:
		b.format = "STL"
		err = readText(newLexer(in, b.format), b)
	default:
		b.format = "OBJ"
		err = readOBJ(newLexer(in, b.format), b)
	}
	if err != nil {
		return nil, err
	}
	return b.finish()
}

type format int

const (
	obj format = iota
	textSTL
	binarySTL
)

// recognise tells the format from the beginning of a file. The header of a
// binary STL may begin with "solid" too; what follows it is no text.
func recognise(head []byte) format {
	control := bytes.ContainsFunc(head, func(r rune) bool {
		return r < ' ' && (r < '\t' || r > '\r') || r == 0x7f
	})
	text := utf8.Valid(head)
	for cut := 1; !text && cut < utf8.UTFMax && cut < len(head) && len(head) == window; cut++ {
		text = utf8.Valid(head[:len(head)-cut]) // a character cut in two
	}
	lower := bytes.ToLower(bytes.TrimLeft(bytes.TrimPrefix(head, []byte(bom)), " \t\r\n\v\f"))
	solid := bytes.HasPrefix(lower, []byte("solid"))
	if solid && !control && (text || bytes.Contains(lower, []byte("facet")) || bytes.Contains(lower, []byte("endsolid"))) {
		return textSTL
	}
	if control || !text && (solid || len(bytes.SplitN(head, []byte("\n"), 2)) == 1) {
		return binarySTL
	}
	return obj
}

const bom = "\xef\xbb\xbf"

// counted is a reader that stops at a size and at the end of a context.
type counted struct {
	ctx        context.Context
	r          io.Reader
	left, most int64
}

func (c *counted) Read(p []byte) (int, error) {
	if c.ctx.Err() != nil {
		return 0, context.Cause(c.ctx)
	}
	if c.left == 0 {
		// A file of exactly the size allowed ends here.
		var one [1]byte
		n, err := c.r.Read(one[:])
		if n == 0 {
			return 0, err
		}
		return 0, &FormatError{Format: "mesh file", Problem: fmt.Sprintf("the file is longer than the %d bytes allowed", c.most), Err: ErrLimit}
	}
	if int64(len(p)) > c.left {
		p = p[:c.left]
	}
	n, err := c.r.Read(p)
	c.left -= int64(n)
	return n, err
}

package mesh

import (
	"bufio"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"math"
)

// The sizes of the parts of a binary STL, in bytes.
const (
	headBytes  = 84
	facetBytes = 50
)

// readBinary reads a binary STL.
func readBinary(r *bufio.Reader, b *builder) error {
	var off int64
	fault := func(err error, format string, a ...any) error {
		return &FormatError{Format: b.format, Offset: off, Problem: fmt.Sprintf(format, a...), Err: err}
	}
	// ended is the error of a file that ends too early; others pass.
	ended := func(err error, format string, a ...any) error {
		if err == io.EOF || errors.Is(err, io.ErrUnexpectedEOF) {
			return fault(ErrFormat, format, a...)
		}
		return err
	}
	var head [headBytes]byte
	if n, err := io.ReadFull(r, head[:]); err != nil {
		off = int64(n)
		return ended(err, "the file is neither text nor a binary STL: it ends within the %d bytes of the header", headBytes)
	}
	announced := int64(binary.LittleEndian.Uint32(head[80:]))
	off = headBytes
	if announced > int64(b.most) {
		off = 80
		return fault(ErrLimit, "the file announces %d triangles, %s (if it is a binary STL at all)", announced, b.tooMany())
	}
	var f [facetBytes]byte
	for i := range announced {
		if n, err := io.ReadFull(r, f[:]); err != nil {
			off += int64(n)
			return ended(err, "the file is truncated, or no binary STL: it announces %d triangles, %d bytes, and ends within triangle %d", announced, headBytes+facetBytes*announced, i+1)
		}
		var x [12]float64
		for k := range x {
			x[k] = float64(math.Float32frombits(binary.LittleEndian.Uint32(f[4*k:])))
		}
		var t [3]int32
		for v := range t {
			p := [3]float64(x[3+3*v : 6+3*v])
			for k := range p {
				if bad := usable(p[k]); bad != "" {
					off += int64(12 + 12*v + 4*k)
					return fault(ErrFormat, "%s, in triangle %d", bad, i+1)
				}
			}
			t[v] = b.vertex(p)
		}
		b.add(t, [3]float64(x[:3]))
		off += facetBytes
	}
	switch _, err := r.ReadByte(); {
	case err == nil:
		return fault(ErrFormat, "the file goes on after the %d triangles it announces", announced)
	case err != io.EOF:
		return err
	}
	return nil
}

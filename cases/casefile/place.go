package casefile

import (
	"sort"
	"unicode/utf8"

	"creaseproof/entropy/source"
)

// placer turns byte offsets into places. Offsets mostly rise, so that it
// remembers the last one: a file that is one long line stays linear.
type placer struct {
	data  []byte
	lines []int // offset of the first byte of each line

	off, line, col int // a known place
}

func newPlacer(data []byte) *placer {
	p := &placer{data: data, lines: []int{0}, line: 1, col: 1}
	for i, c := range data {
		if c == '\n' {
			p.lines = append(p.lines, i+1)
		}
	}
	return p
}

// at returns the place of the byte at offset off.
func (p *placer) at(off int) source.Pos {
	off = min(max(off, 0), len(p.data))
	line := sort.SearchInts(p.lines, off+1)
	start, col := p.lines[line-1], 1
	if line == p.line && p.off <= off {
		start, col = p.off, p.col
	}
	col += utf8.RuneCount(p.data[start:off])
	p.off, p.line, p.col = off, line, col
	return source.Pos{Line: line, Col: col}
}

// text returns the line of the given number, without its end.
func (p *placer) text(line int) string {
	if line < 1 || line > len(p.lines) {
		return ""
	}
	end := len(p.data)
	if line < len(p.lines) {
		end = p.lines[line] - 1
	}
	b := p.data[p.lines[line-1]:end]
	if n := len(b); n > 0 && b[n-1] == '\r' {
		b = b[:n-1]
	}
	return string(b)
}

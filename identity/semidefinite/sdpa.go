package semidefinite

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
)

// The sparse SDPA format has the pair
//
//	minimise c'x subject to Σ x_i F_i - F_0 ⪰ 0,  maximise <F_0, Y> subject to <F_i, Y> = c_i, Y ⪰ 0,
//
// so that F_0 = -C, F_i = A_i, c = b, Y = X and x = -y.

// WriteSDPA writes p in the sparse SDPA format, each value with as many digits
// as it takes to read it back. A free variable becomes the difference of two
// entries of a diagonal block, which is appended.
func WriteSDPA(w io.Writer, p Problem) error {
	if err := p.Validate(); err != nil {
		return err
	}
	q, _ := p.merged()
	if err := q.Validate(); err != nil {
		return fmt.Errorf("sums of entries: %w", err)
	}
	blocks := append([]int(nil), p.Blocks...)
	free := len(p.Free)
	if free > 0 {
		blocks = append(blocks, -2*free)
		last := len(p.Blocks)
		for k, f := range p.Free {
			if f.Cost != 0 {
				q.C = append(q.C, Entry{last, k, k, f.Cost}, Entry{last, free + k, free + k, -f.Cost})
			}
			for _, t := range f.Terms {
				q.A[t.Row] = append(q.A[t.Row], Entry{last, k, k, t.Value}, Entry{last, free + k, free + k, -t.Value})
			}
		}
		q.C = merge(q.C)
		for i := range q.A {
			q.A[i] = merge(q.A[i])
		}
	}

	out := bufio.NewWriter(w)
	fmt.Fprintf(out, "%d\n%d\n", len(q.A), len(blocks))
	for _, n := range blocks {
		fmt.Fprintf(out, "%d ", n)
	}
	fmt.Fprintln(out)
	for _, b := range q.B {
		fmt.Fprintf(out, "%s ", number(b))
	}
	fmt.Fprintln(out)
	write := func(i int, a SparseSym, sign float64) {
		for _, e := range a {
			fmt.Fprintf(out, "%d %d %d %d %s\n", i, e.Block+1, e.Row+1, e.Col+1, number(sign*e.Value))
		}
	}
	write(0, q.C, -1)
	for i, a := range q.A {
		write(i+1, a, 1)
	}
	if err := out.Flush(); err != nil {
		return fmt.Errorf("semidefinite: write SDPA: %w", err)
	}
	return nil
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// ReadSDPA reads a program in the sparse SDPA format. Lines before the first
// number that begin with " or * are comments; what follows the count of rows or
// of blocks in its line is one too. Braces, parentheses and commas count as
// spaces. The memory taken is bounded by a multiple of the length of the input.
func ReadSDPA(r io.Reader) (Problem, error) {
	s := &sdpaReader{in: bufio.NewScanner(r)}
	s.in.Buffer(nil, 1<<26)
	p, err := s.read()
	if err != nil {
		return Problem{}, fmt.Errorf("semidefinite: read SDPA: line %d: %w", s.line, err)
	}
	if err := p.Validate(); err != nil {
		return Problem{}, fmt.Errorf("semidefinite: read SDPA: %w", err)
	}
	return p, nil
}

type sdpaReader struct {
	in   *bufio.Scanner
	line int
	rest []string
}

// next returns the next word.
func (s *sdpaReader) next() (string, error) {
	for len(s.rest) == 0 {
		if err := s.nextLine(); err != nil {
			return "", err
		}
	}
	word := s.rest[0]
	s.rest = s.rest[1:]
	return word, nil
}

func (s *sdpaReader) nextLine() error {
	if !s.in.Scan() {
		if err := s.in.Err(); err != nil {
			return err
		}
		return io.ErrUnexpectedEOF
	}
	s.line++
	s.rest = strings.FieldsFunc(s.in.Text(), func(c rune) bool {
		return strings.ContainsRune(" \t\r,{}()", c)
	})
	return nil
}

func (s *sdpaReader) integer() (int, error) {
	word, err := s.next()
	if err != nil {
		return 0, err
	}
	n, err := strconv.ParseInt(word, 10, 32)
	if err != nil {
		return 0, fmt.Errorf("%q is not an integer of 32 bits", word)
	}
	return int(n), nil
}

func (s *sdpaReader) float() (float64, error) {
	word, err := s.next()
	if err != nil {
		return 0, err
	}
	v, err := strconv.ParseFloat(word, 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, fmt.Errorf("%q is not a finite number", word)
	}
	return v, nil
}

// count reads a number that has a line for itself.
func (s *sdpaReader) count() (int, error) {
	n, err := s.integer()
	if err == nil && n < 0 {
		err = fmt.Errorf("count %d", n)
	}
	s.rest = nil
	return n, err
}

func (s *sdpaReader) read() (p Problem, err error) {
	for {
		if err := s.nextLine(); err != nil {
			return p, err
		}
		text := strings.TrimSpace(s.in.Text())
		if text != "" && text[0] != '"' && text[0] != '*' {
			break
		}
	}
	m, err := s.count()
	if err != nil {
		return p, err
	}
	blocks, err := s.count()
	if err != nil {
		return p, err
	}
	for range blocks {
		n, err := s.integer()
		if err != nil {
			return p, err
		}
		p.Blocks = append(p.Blocks, n)
	}
	for range m {
		b, err := s.float()
		if err != nil {
			return p, err
		}
		p.B = append(p.B, b)
	}
	p.A = make([]SparseSym, m)
	for {
		i, err := s.integer()
		if err == io.ErrUnexpectedEOF {
			return p, nil
		}
		if err != nil {
			return p, err
		}
		var at [3]int
		for k := range at {
			if at[k], err = s.integer(); err != nil {
				return p, err
			}
		}
		v, err := s.float()
		if err != nil {
			return p, err
		}
		e := Entry{at[0] - 1, at[1] - 1, at[2] - 1, v}
		switch {
		case i < 0 || i > m:
			return p, fmt.Errorf("matrix %d of %d", i, m)
		case i == 0:
			e.Value = -v
			p.C = append(p.C, e)
		default:
			p.A[i-1] = append(p.A[i-1], e)
		}
	}
}

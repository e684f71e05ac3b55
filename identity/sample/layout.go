package sample

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// Kind says which values a column takes.
type Kind uint8

const (
	// Free columns take any value.
	Free Kind = iota
	// Positive columns are greater than 0.
	Positive
	// Negative columns are less than 0.
	Negative
	// Box columns lie in [Lo, Hi]; either end may be infinite.
	Box
	// Cosine and Sine columns with the same Angle are the cosine and sine of
	// one angle.
	Cosine
	// Sine: see Cosine.
	Sine
)

// Column describes one input of the program.
type Column struct {
	Name string
	// Kind restricts the values.
	Kind Kind
	// Lo and Hi are the ends of a Box.
	Lo, Hi float64
	// Angle numbers the angles of Cosine and Sine columns.
	Angle int
	// Unknown names the function whose derivative the column is; empty for
	// constants, coordinates and angles.
	Unknown string
	// Order is the order of the derivative.
	Order int
	// Index is the multi-index of the derivative, one entry for each coordinate,
	// with sum Order. It may be nil, and then no degenerate structure is laid
	// over the column.
	Index []int
}

// ErrLayout is wrapped by the errors of NewLayout.
var ErrLayout = errors.New("sample: invalid layout")

// Layout is a checked list of columns. It is immutable.
type Layout struct {
	columns []Column
	plain   []int    // columns that are not of an angle
	angles  [][2]int // cosine and sine columns
	groups  []group
}

// A group is the columns of order two and more of one unknown.
type group struct {
	columns  []int
	orders   []int   // of each column
	index    [][]int // multi-index of each column
	dim      int     // number of coordinates
	maxOrder int
	sign     float64 // of pure second derivatives, 0 if not restricted
	definite bool    // some column is restricted to one sign
}

// NewLayout checks the columns and returns their layout. Every angle needs one
// Cosine and one Sine, a Box needs Lo <= Hi, and a multi-index needs
// non-negative entries with sum Order, of one length for each unknown.
func NewLayout(columns []Column) (*Layout, error) {
	l := &Layout{columns: append([]Column(nil), columns...)}
	pair := make(map[int]int)
	byUnknown := make(map[string]int)
	for i, c := range l.columns {
		bad := func(format string, args ...any) error {
			return fmt.Errorf("%w: column %d (%s): %s", ErrLayout, i, c.Name, fmt.Sprintf(format, args...))
		}
		switch c.Kind {
		case Free, Positive, Negative:
		case Box:
			if !(c.Lo <= c.Hi) || math.IsInf(c.Lo, 1) || math.IsInf(c.Hi, -1) {
				return nil, bad("the interval [%v, %v] is empty", c.Lo, c.Hi)
			}
		case Cosine, Sine:
			k, ok := pair[c.Angle]
			if !ok {
				k = len(l.angles)
				pair[c.Angle] = k
				l.angles = append(l.angles, [2]int{-1, -1})
			}
			if p := &l.angles[k][c.Kind-Cosine]; *p >= 0 {
				return nil, bad("angle %d has it twice", c.Angle)
			} else {
				*p = i
			}
			continue
		default:
			return nil, bad("unknown kind %d", c.Kind)
		}
		l.plain = append(l.plain, i)
		if c.Index == nil {
			continue
		}
		sum := 0
		for _, e := range c.Index {
			if e < 0 {
				return nil, bad("negative entry in multi-index %v", c.Index)
			}
			sum += e
		}
		if sum != c.Order {
			return nil, bad("multi-index %v is not of order %d", c.Index, c.Order)
		}
		if c.Unknown == "" || c.Order < 2 {
			continue
		}
		g, ok := byUnknown[c.Unknown]
		if !ok {
			g = len(l.groups)
			byUnknown[c.Unknown] = g
			l.groups = append(l.groups, group{dim: len(c.Index)})
		}
		if l.groups[g].dim != len(c.Index) {
			return nil, bad("multi-index %v has not %d entries", c.Index, l.groups[g].dim)
		}
		l.groups[g].include(i, c)
	}
	for a, k := range pair {
		if l.angles[k][0] < 0 || l.angles[k][1] < 0 {
			return nil, fmt.Errorf("%w: angle %d lacks its cosine or sine", ErrLayout, a)
		}
	}
	return l, nil
}

// include adds column i to the group.
func (g *group) include(i int, c Column) {
	g.columns = append(g.columns, i)
	g.orders = append(g.orders, c.Order)
	g.index = append(g.index, slices.Clone(c.Index))
	g.maxOrder = max(g.maxOrder, c.Order)
	sign := 0.0
	switch {
	case c.Kind == Positive || c.Kind == Box && c.Lo >= 0:
		sign = 1
	case c.Kind == Negative || c.Kind == Box && c.Hi <= 0:
		sign = -1
	}
	if sign != 0 {
		g.definite = true
		for _, e := range c.Index {
			if e == c.Order {
				g.sign = sign
			}
		}
	}
}

// Len returns the number of columns.
func (l *Layout) Len() int { return len(l.columns) }

// Column returns column i.
func (l *Layout) Column(i int) Column { return l.columns[i] }

// Plain returns the indices of the columns that do not belong to an angle;
// these are the ones a Law fills.
func (l *Layout) Plain() []int { return append([]int(nil), l.plain...) }

// restrict moves the values of every plain column into its range. Values that
// are in range stay as they are.
func (l *Layout) restrict(cols [][]float64, n int) {
	for _, i := range l.plain {
		x := cols[i][:n]
		switch c := &l.columns[i]; c.Kind {
		case Positive:
			for j, v := range x {
				if v = math.Abs(v); v == 0 {
					v = 1
				}
				x[j] = v
			}
		case Negative:
			for j, v := range x {
				if v = math.Abs(v); v == 0 {
					v = 1
				}
				x[j] = -v
			}
		case Box:
			for j, v := range x {
				if !(v >= c.Lo && v <= c.Hi) {
					x[j] = intoBox(v, c.Lo, c.Hi)
				}
			}
		}
	}
}

// intoBox maps a value outside the interval into it: by reflection at a single
// end, otherwise so that small values fall near Lo and large ones near Hi.
func intoBox(v, lo, hi float64) float64 {
	switch {
	case math.IsInf(hi, 1):
		v = lo + math.Abs(v-lo)
	case math.IsInf(lo, -1):
		v = hi - math.Abs(v-hi)
	default:
		v = math.Abs(v)
		if t := v / (1 + v); t < 0.5 {
			v = lo + float64((hi-lo)*t)
		} else {
			v = hi - (hi-lo)/(1+v)
		}
	}
	if !isFinite(v) { // a range too wide for float64, or no number to begin with
		v = 0
	}
	return min(max(v, lo), hi)
}

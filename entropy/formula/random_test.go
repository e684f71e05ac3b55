package formula

import (
	"encoding/xml"
	"errors"
	"io"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"creaseproof/entropy/source"

	"github.com/stretchr/testify/require"
)

// treeMaker makes random trees of the shapes that the parser makes, in the
// scope of layered.
type treeMaker struct{ *rand.Rand }

func (m treeMaker) pick(s ...string) string { return s[m.IntN(len(s))] }

func (m treeMaker) index() string { return m.pick("x", "y", "z", "xi", "eta", "x1") }

func (m treeMaker) by() []string {
	by := make([]string, 1+m.IntN(3))
	for i := range by {
		by[i] = m.index()
	}
	return by
}

func (m treeMaker) angle(depth int) Node {
	if m.IntN(2) == 0 {
		return nil
	}
	return m.tree(depth - 1)
}

func (m treeMaker) field(depth int) *Field {
	return &Field{ID: m.pick("Sigma", "F"), Angle: m.angle(depth)}
}

func (m treeMaker) leaf(depth int) Node {
	switch m.IntN(7) {
	case 0:
		n := &Num{Value: big.NewRat(m.Int64N(2000), []int64{1, 1, 2, 40, 1000}[m.IntN(5)])}
		return n
	case 1, 2:
		return &Name{ID: m.pick("u", "v", "x", "eps", "lambda", "theta", "pi", "R", "L", "e2", "Omicron", "e")}
	case 3:
		return &Field{ID: m.pick("Sigma", "F"), Angle: m.angle(depth)}
	case 4:
		if m.IntN(2) == 0 {
			return &Component{Of: "nu", Index: m.index()}
		}
		return &Component{Of: "Sigma", Angle: m.angle(depth), Index: m.index()}
	}
	return &Deriv{Of: m.pick("u", "v", "R", "K"), By: m.by()}
}

func (m treeMaker) trees(n, depth int) []Node {
	out := make([]Node, n)
	for i := range out {
		out[i] = m.tree(depth - 1)
	}
	return out
}

func (m treeMaker) tree(depth int) Node {
	if depth <= 0 {
		return m.leaf(0)
	}
	switch m.IntN(11) {
	case 0, 1:
		s := &Sum{}
		for _, x := range m.trees(1+m.IntN(3), depth) {
			s.Terms = append(s.Terms, Term{Neg: m.IntN(2) == 0, X: x})
		}
		if len(s.Terms) == 1 {
			s.Terms[0].Neg = true
		}
		return s
	case 2, 3:
		p := &Product{}
		for i, x := range m.trees(2+m.IntN(3), depth) {
			op := []Op{Star, Slash, Dot}[m.IntN(3)]
			if i == 0 {
				op = Star
			}
			p.Factors = append(p.Factors, Factor{op, x})
		}
		return p
	case 4, 5:
		j := &Juxt{Factors: m.trees(2+m.IntN(3), depth)}
		for i, x := range j.Factors {
			if _, ok := x.(*Num); ok && i > 0 {
				j.Factors[i] = &Name{ID: "c"}
			}
		}
		return j
	case 6, 7:
		e := big.NewRat(m.Int64N(11)-5, []int64{1, 1, 1, 2, 7}[m.IntN(5)])
		return &Power{Base: m.tree(depth - 1), Exp: e}
	case 8:
		switch f := m.pick("sin", "sqrt", "erf", "abs", "norm", "div", "sup", "euler", "log"); f {
		case "norm":
			return &Call{Func: f, Args: m.trees(1+m.IntN(3), depth)}
		case "sup":
			return &Call{Func: f, Args: []Node{&Name{ID: "theta"}, m.tree(depth - 1)}}
		case "euler":
			return &Call{Func: f, Args: []Node{m.tree(depth - 1), &Name{ID: "u"}}}
		default:
			return &Call{Func: f, Args: m.trees(1, depth)}
		}
	case 9:
		return &TotalDeriv{By: m.by(), Arg: m.tree(depth - 1)}
	}
	switch m.IntN(3) {
	case 0:
		return &Jump{X: m.tree(depth - 1)}
	case 1:
		return &Average{X: m.tree(depth - 1)}
	}
	return &DotNu{X: m.tree(depth - 1)}
}

func wide(t testing.TB) *Scope {
	s, err := NewScope(ScopeConfig{
		Coordinates: []string{"x", "y", "z", "x1"},
		Axes:        []string{"ξ", `\eta`},
		Unknowns:    []string{"u", "v"},
		Constants:   []string{"eps", "c", "lambda", "a", "b", "Omicron", "e"},
		Angles:      []string{"theta"},
		Lets:        []string{"R", "L", "K", "e2"},
		Fields:      []string{"Sigma", "F"},
		Jump:        true,
	})
	require.NoError(t, err)
	return s
}

func TestPrintingAndParsingAreInverse(t *testing.T) {
	s := wide(t)
	m := treeMaker{rand.New(rand.NewPCG(1, 2))}
	for range 4000 {
		n := m.tree(m.IntN(6))
		for _, printed := range []string{Text(n), TeX(n)} {
			got, err := s.ParseExpr(source.Text{S: printed})
			require.NoError(t, err, printed)
			require.True(t, Same(n, got), "%s\nreads as\n%s", printed, Text(got))
		}
	}
}

func TestStatementsPrintAndParse(t *testing.T) {
	s := wide(t)
	m := treeMaker{rand.New(rand.NewPCG(3, 4))}
	for i := range 1000 {
		st := &Statement{Relation: Relation(i % 6)}
		switch st.Relation {
		case Integrable:
			st.Field, st.Exponent = m.field(2), big.NewRat(1+m.Int64N(9), 1+m.Int64N(3))
		case Entropy:
			st.Field = m.field(2)
		case Span:
			st.Field = m.field(2)
			for range 1 + m.IntN(3) {
				st.Generators = append(st.Generators, m.field(2))
			}
		default:
			st.Left, st.Right = m.tree(3), m.tree(3)
		}
		for _, printed := range []string{st.Text(), st.TeX()} {
			got, err := s.ParseStatement(source.Text{S: printed})
			require.NoError(t, err, printed)
			require.True(t, st.Same(got), "%s\nreads as\n%s", printed, got.Text())
		}
		wellFormed(t, st.MathML())
	}
}

// wellFormed checks that s is one math element with elements of MathML Core
// only, each with the children it must have.
func wellFormed(t *testing.T, s string) {
	children := map[string]int{"mfrac": 2, "msup": 2, "msub": 2, "msubsup": 3}
	d := xml.NewDecoder(strings.NewReader(s))
	type element struct {
		name string
		n    int
	}
	stack := []element{{}}
	for {
		tok, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		require.NoError(t, err, s)
		top := &stack[len(stack)-1]
		switch x := tok.(type) {
		case xml.StartElement:
			name := x.Name.Local
			require.Contains(t, []string{"math", "mrow", "mi", "mn", "mo", "mfrac", "msqrt", "msup", "msub", "msubsup", "mspace", "mtext"}, name)
			top.n++
			stack = append(stack, element{name: name})
		case xml.EndElement:
			if want, ok := children[top.name]; ok {
				require.Equal(t, want, top.n, "%s in %s", top.name, s)
			}
			stack = stack[:len(stack)-1]
		case xml.CharData:
			require.Contains(t, []string{"mi", "mn", "mo", "mtext"}, top.name, s)
			require.NotEmpty(t, x)
		}
	}
	require.Equal(t, 1, stack[0].n)
}

func TestMathMLIsWellFormed(t *testing.T) {
	m := treeMaker{rand.New(rand.NewPCG(5, 6))}
	for range 500 {
		wellFormed(t, MathML(m.tree(4)))
	}
}

package gram

import (
	"context"
	"testing"
	"time"

	"creaseproof/entropy/algebra"

	"github.com/stretchr/testify/require"
)

// parse reads a polynomial such as "x^4 y^2 - 3 x^2 y^2 + 1": a small reader
// for tests, with variables of one letter or of one letter and digits.
func parse(t testing.TB, names map[string]algebra.Var, s string) algebra.Poly {
	t.Helper()
	p := &reader{t: t, s: s, names: names}
	q := p.sum()
	require.Equal(t, len(p.s), p.i, "left over: %q", p.s[p.i:])
	return q
}

type reader struct {
	t     testing.TB
	s     string
	i     int
	names map[string]algebra.Var
}

func (r *reader) skip() {
	for r.i < len(r.s) && r.s[r.i] == ' ' {
		r.i++
	}
}

func (r *reader) peek() byte {
	r.skip()
	if r.i >= len(r.s) {
		return 0
	}
	return r.s[r.i]
}

func (r *reader) sum() algebra.Poly {
	var out algebra.Poly
	sign := int64(1)
	for {
		switch r.peek() {
		case '+':
			r.i++
			continue
		case '-':
			r.i++
			sign = -sign
			continue
		}
		out = out.Add(r.product().Scale(algebra.Int(sign)))
		sign = 1
		if c := r.peek(); c != '+' && c != '-' {
			return out
		}
	}
}

func (r *reader) product() algebra.Poly {
	out := algebra.Const(algebra.Int(1))
	for {
		c := r.peek()
		var f algebra.Poly
		switch {
		case c == '(':
			r.i++
			f = r.sum()
			require.Equal(r.t, byte(')'), r.peek())
			r.i++
		case c >= '0' && c <= '9':
			k := r.i
			for r.i < len(r.s) && (r.s[r.i] >= '0' && r.s[r.i] <= '9' || r.s[r.i] == '/') {
				r.i++
			}
			x, err := algebra.ParseRat(r.s[k:r.i])
			require.NoError(r.t, err)
			f = algebra.Const(x)
		case c >= 'a' && c <= 'z':
			k := r.i
			for r.i++; r.i < len(r.s) && r.s[r.i] >= '0' && r.s[r.i] <= '9'; {
				r.i++
			}
			name := r.s[k:r.i]
			v, ok := r.names[name]
			if !ok {
				v = algebra.Var(len(r.names))
				r.names[name] = v
			}
			f = algebra.Variable(v)
		default:
			return out
		}
		if r.peek() == '^' {
			r.i++
			n := 0
			r.skip()
			for r.i < len(r.s) && r.s[r.i] >= '0' && r.s[r.i] <= '9' {
				n = 10*n + int(r.s[r.i]-'0')
				r.i++
			}
			f = f.Pow(n)
		}
		out = out.Mul(f)
	}
}

var forms = []struct {
	name, p  string
	positive []string
}{
	{"square", "(a - b)^2", nil},
	{"two squares", "(a - 2 b + c)^2 + 3 (a + c)^2", nil},
	{"quartic", "x^4 + y^4 - 2 x^2 y^2", nil},
	{"Newton s1^2 >= 3 s2", "(a+b+c)^2 - 3 (a b + b c + c a - d^2 - e^2 - f^2)", nil},
	{"Newton s2^2 >= 3 s1 s3", "(a b + b c + c a - d^2 - e^2 - f^2)^2 - 3 (a+b+c)(a b c + 2 d e f - a e^2 - b f^2 - c d^2)", nil},
	{"Kato in two dimensions", "(a^2 + 2 b^2 + c^2)(p^2 + q^2) - (a p + b q)^2 - (b p + c q)^2", nil},
	{"Motzkin", "x^4 y^2 + x^2 y^4 + 1 - 3 x^2 y^2", nil},
	{"Motzkin form", "x^4 y^2 + x^2 y^4 + z^6 - 3 x^2 y^2 z^2", nil},
	{"Robinson", "x^6 + y^6 + z^6 - (x^4 y^2 + x^4 z^2 + y^4 x^2 + y^4 z^2 + z^4 x^2 + z^4 y^2) + 3 x^2 y^2 z^2", nil},
	{"Choi-Lam sextic", "x^4 y^2 + y^4 z^2 + z^4 x^2 - 3 x^2 y^2 z^2", nil},
	{"Choi-Lam quartic", "w^4 + x^2 y^2 + y^2 z^2 + z^2 x^2 - 4 x y z w", nil},
	{"box", "x^2 (1 - x^2)", []string{"x + 1", "1 - x"}},
	{"arithmetic and geometric mean", "x^3 + y^3 + z^3 - 3 x y z", []string{"x", "y", "z"}},
	{"Young with eps", "(r - e (a - c))^2 + 4 e^2 b^2", []string{"e"}},
	{"scaled by eps", "e x^2 - 2 e x y + e y^2 + e^2 z^2", []string{"e"}},
}

func TestProvesForms(t *testing.T) {
	for _, f := range forms {
		t.Run(f.name, func(t *testing.T) {
			names := map[string]algebra.Var{}
			p := &Problem{Target: parse(t, names, f.p)}
			for _, g := range f.positive {
				p.Positive = append(p.Positive, Constraint{Poly: parse(t, names, g), Strict: len(g) == 1})
			}
			e, _ := Efforts("normal")
			start := time.Now()
			proof, pic, err := Prove(context.Background(), p, e)
			t.Logf("%v %+v", time.Since(start), *pic)
			require.NoError(t, err)
			t.Logf("%d squares, multiplier of %d", len(proof.Squares), len(proof.Multiplier))
		})
	}
}

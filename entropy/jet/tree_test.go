package jet_test

import (
	"context"
	"errors"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"

	"github.com/stretchr/testify/require"
)

// tree is a random formula: op over kids, or a leaf.
type tree struct {
	op   string
	kids []*tree
	leaf int      // "leaf": an index into the leaves
	num  *big.Rat // "num", and the exponent of "pow"
}

var binary = []string{"add", "sub", "mul", "quo", "norm"}
var unary = []string{"sqrt", "exp", "log", "sin", "cos", "tanh", "sinh", "cosh", "erf", "abs"}
var exponents = []*big.Rat{big.NewRat(2, 1), big.NewRat(3, 1), big.NewRat(-1, 1), big.NewRat(-2, 1), big.NewRat(1, 2), big.NewRat(1, 3), big.NewRat(2, 3), big.NewRat(3, 2), big.NewRat(-1, 2), big.NewRat(3, 4)}

func randomTree(rng *rand.Rand, depth, leaves int) *tree {
	if depth == 0 || rng.IntN(6) == 0 {
		if rng.IntN(3) == 0 {
			return &tree{op: "num", num: big.NewRat(rng.Int64N(9)-4, 1+rng.Int64N(3))}
		}
		return &tree{op: "leaf", leaf: rng.IntN(leaves)}
	}
	sub := func() *tree { return randomTree(rng, depth-1, leaves) }
	switch rng.IntN(8) {
	case 0, 1, 2, 3:
		return &tree{op: binary[rng.IntN(len(binary))], kids: []*tree{sub(), sub()}}
	case 4, 5:
		return &tree{op: "pow", kids: []*tree{sub()}, num: exponents[rng.IntN(len(exponents))]}
	}
	return &tree{op: unary[rng.IntN(len(unary))], kids: []*tree{sub()}}
}

// exact builds the tree in a ring.
func (t *tree) exact(r *jet.Ring, leaves []algebra.Fraction) (algebra.Fraction, error) {
	var k []algebra.Fraction
	for _, c := range t.kids {
		f, err := c.exact(r, leaves)
		if err != nil {
			return f, err
		}
		k = append(k, f)
	}
	switch t.op {
	case "num":
		return jet.Rational(t.num), nil
	case "leaf":
		return leaves[t.leaf], nil
	case "add":
		return r.Add(k[0], k[1])
	case "sub":
		return r.Sub(k[0], k[1])
	case "mul":
		return r.Mul(k[0], k[1])
	case "quo":
		return r.Quo(k[0], k[1])
	case "pow":
		return r.Pow(k[0], algebra.FromBig(t.num))
	case "norm":
		a, err := r.Mul(k[0], k[0])
		if err != nil {
			return a, err
		}
		b, err := r.Mul(k[1], k[1])
		if err != nil {
			return b, err
		}
		if a, err = r.Add(a, b); err != nil {
			return a, err
		}
		return r.NormRoot(a)
	case "sqrt":
		return r.Root(k[0], 2)
	case "exp":
		return r.Exp(k[0])
	case "log":
		return r.Log(k[0])
	case "erf":
		return r.Erf(k[0])
	case "abs":
		return r.Abs(k[0])
	case "sin", "cos":
		c, s, err := r.CosSin(k[0])
		if t.op == "sin" {
			return s, err
		}
		return c, err
	}
	return r.Hyperbolic(t.op, k[0])
}

// float evaluates the tree by the standard library, with a bound of the error
// to first order. It returns NaN where the formula is not defined, and where
// the error bound is useless.
func (t *tree) float(leaves []float64) (x, e float64) {
	const ulp = 1e-15
	nan := math.NaN()
	var v, d [2]float64
	for i, c := range t.kids {
		v[i], d[i] = c.float(leaves)
		if math.IsNaN(v[i]) || d[i] > 1e-6*(1+math.Abs(v[i])) || math.Abs(v[i]) > 1e8 {
			return nan, nan
		}
	}
	a, b := v[0], v[1]
	switch t.op {
	case "num":
		x, _ = t.num.Float64()
	case "leaf":
		return leaves[t.leaf], 0
	case "add":
		x, e = a+b, d[0]+d[1]
	case "sub":
		x, e = a-b, d[0]+d[1]
	case "mul":
		x, e = a*b, math.Abs(a)*d[1]+math.Abs(b)*d[0]
	case "quo":
		if math.Abs(b) <= 100*d[1] || b == 0 {
			return nan, nan
		}
		x = a / b
		e = d[0]/math.Abs(b) + math.Abs(a)*d[1]/(b*b)
	case "norm":
		x = math.Hypot(a, b)
		e = d[0] + d[1]
	case "pow":
		p, _ := t.num.Float64()
		if !t.num.IsInt() && a <= 100*d[0] || p < 0 && math.Abs(a) <= 100*d[0] {
			return nan, nan
		}
		x = math.Pow(a, p)
		if a != 0 {
			e = math.Abs(p*x/a) * d[0]
		}
	case "sqrt":
		if a <= 100*d[0] {
			return nan, nan
		}
		x = math.Sqrt(a)
		e = d[0] / (2 * x)
	case "exp":
		if math.Abs(a) > 25 {
			return nan, nan
		}
		x = math.Exp(a)
		e = x * d[0]
	case "log":
		if a <= 100*d[0] {
			return nan, nan
		}
		x = math.Log(a)
		e = d[0] / a
	case "sin":
		x, e = math.Sin(a), d[0]
	case "cos":
		x, e = math.Cos(a), d[0]
	case "tanh":
		x, e = math.Tanh(a), d[0]
	case "sinh", "cosh":
		if math.Abs(a) > 25 {
			return nan, nan
		}
		x, e = math.Sinh(a), d[0]*math.Cosh(a)
		if t.op == "cosh" {
			x = math.Cosh(a)
		}
	case "erf":
		x, e = math.Erf(a), 1.2*d[0]
	case "abs":
		x, e = math.Abs(a), d[0]
	}
	return x, e + ulp*math.Abs(x)
}

// refined builds in rings with finer and finer angles until one is enough.
func refined(t *testing.T, build func(r *jet.Ring) error) error {
	t.Helper()
	var a jet.Angles
	for {
		r, err := jet.NewRing(context.Background(), []string{"x", "y"}, []string{"u"})
		require.NoError(t, err)
		r.SetAngles(a)
		err = build(r)
		var finer *jet.FinerAngles
		if !errors.As(err, &finer) {
			return err
		}
		a = finer.Need
	}
}

func outside(err error) bool {
	return errors.Is(err, algebra.ErrLimit) || errors.Is(err, jet.ErrOutside) || errors.Is(err, jet.ErrDivisionByZero)
}

var smallIndices = []jet.Index{{}, {1}, {0, 1}, {2}}

// Random formulas through the normal form, enclosed at a rational point,
// against plain evaluation of the formula.
func TestNormalFormsAgainstPlainEvaluation(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 1))
	compared := 0
	for range 3000 {
		f := randomTree(rng, 4, 5)
		err := refined(t, func(r *jet.Ring) error {
			var vars []algebra.Var
			for _, j := range smallIndices {
				v, err := r.JetVar(0, j, jet.NoSide)
				require.NoError(t, err)
				vars = append(vars, v)
			}
			vars = append(vars, r.ConstantVar("eps"))
			r.Assume(vars[4], jet.Positive)
			var leaves []algebra.Fraction
			for _, v := range vars {
				leaves = append(leaves, jet.Of(v))
			}
			g, err := f.exact(r, leaves)
			if err != nil {
				return err
			}
			for range 4 {
				at := jet.Point{}
				var plain []float64
				for i, v := range vars {
					x := algebra.Frac64(rng.Int64N(33)-16, 8)
					if i == 4 {
						x = algebra.Frac64(1+rng.Int64N(24), 8)
					}
					at[v] = x
					plain = append(plain, x.Float64())
				}
				want, slack := f.float(plain)
				if math.IsNaN(want) || math.IsInf(want, 0) || slack > 1e-9*(1+math.Abs(want)) {
					continue
				}
				// Where the formula is defined its conditions hold.
				holds := true
				for _, c := range r.Conditions() {
					holds = holds && c.Holds(r, at)
				}
				if !holds {
					continue // a zero that only exact arithmetic sees, or its neighbourhood
				}
				x := r.Enclose(g, at, 200)
				require.True(t, x.IsBounded(), "%s at %v", r.Format(g), plain)
				lo, _ := x.Lo().Float64()
				hi, _ := x.Hi().Float64()
				tol := 20*slack + 1e-13*math.Abs(want)
				require.InDelta(t, want, lo, tol, "%s at %v", r.Format(g), plain)
				require.InDelta(t, want, hi, tol, "%s at %v", r.Format(g), plain)
				compared++
				if s, ok := r.Sign(g, at); ok && math.Abs(want) > tol {
					require.Equal(t, want > 0, s > 0)
				}
			}
			return nil
		})
		if err != nil && !outside(err) {
			require.Contains(t, err.Error(), "of") // root or log of a negative number or of zero
		}
	}
	t.Logf("%d values compared", compared)
	require.Greater(t, compared, 1500)
}

// The conditions are not too many: where plain evaluation meets no trouble
// they hold.
func TestConditionsHoldWhereFormulasAreDefined(t *testing.T) {
	rng := rand.New(rand.NewPCG(12, 1))
	seen, failed := 0, 0
	for range 1500 {
		f := randomTree(rng, 3, 3)
		_ = refined(t, func(r *jet.Ring) error {
			a, b, c := r.ConstantVar("a"), r.ConstantVar("b"), r.ConstantVar("c")
			g, err := f.exact(r, []algebra.Fraction{jet.Of(a), jet.Of(b), jet.Of(c)})
			if err != nil {
				return err
			}
			_ = g
			at := jet.Point{}
			var plain []float64
			for _, v := range []algebra.Var{a, b, c} {
				x := algebra.Frac64(rng.Int64N(65)-32, 7) // no zeros of small formulas
				at[v] = x
				plain = append(plain, x.Float64())
			}
			if want, slack := f.float(plain); math.IsNaN(want) || slack > 1e-9*(1+math.Abs(want)) {
				return nil
			}
			seen++
			for _, c := range r.Conditions() {
				if !c.Holds(r, at) {
					failed++
					if x, ok := r.Exact(c.Value, at); ok && !x.IsZero() {
						t.Errorf("%s %v fails where the formula is %v", r.Format(c.Value), c.Need, plain)
					}
				}
			}
			return nil
		})
	}
	t.Logf("%d points, %d undecided conditions", seen, failed)
	require.Greater(t, seen, 500)
}

// Total derivatives of random formulas along a concrete polynomial u, against
// central differences with one step of extrapolation.
func TestTotalDerivativeAgainstDifferences(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 1))
	compared := 0
	for range 1500 {
		f := randomTree(rng, 4, 6)
		var c [4][4]float64 // u = Σ c x^i y^j
		for i := range 4 {
			for j := range 4 - i {
				c[i][j] = float64(rng.IntN(17)-8) / 8
			}
		}
		u := func(nx, ny int, x, y float64) float64 {
			sum := 0.0
			for i := nx; i < 4; i++ {
				for j := ny; j < 4; j++ {
					term := c[i][j]
					for k := range nx {
						term *= float64(i - k)
					}
					for k := range ny {
						term *= float64(j - k)
					}
					sum += term * math.Pow(x, float64(i-nx)) * math.Pow(y, float64(j-ny))
				}
			}
			return sum
		}
		// leaves: u, u_x, u_y, u_xx, x, y
		leaves := func(x, y float64) []float64 {
			return []float64{u(0, 0, x, y), u(1, 0, x, y), u(0, 1, x, y), u(2, 0, x, y), x, y}
		}
		x0, y0 := float64(rng.IntN(17)-8)/8, float64(rng.IntN(17)-8)/8
		err := refined(t, func(r *jet.Ring) error {
			var in []algebra.Fraction
			for _, j := range smallIndices {
				g, err := r.Jet(0, j, jet.NoSide)
				require.NoError(t, err)
				in = append(in, g)
			}
			in = append(in, jet.Of(r.CoordinateVar(0)), jet.Of(r.CoordinateVar(1)))
			g, err := f.exact(r, in)
			if err != nil {
				return err
			}
			for i := range 2 {
				d, err := r.Total(g, i)
				if err != nil {
					return err
				}
				slope := func(h float64) float64 {
					p, m := [2]float64{x0, y0}, [2]float64{x0, y0}
					p[i] += h
					m[i] -= h
					a, _ := f.float(leaves(p[0], p[1]))
					b, _ := f.float(leaves(m[0], m[1]))
					return (a - b) / (2 * h)
				}
				const h = 1.0 / 2048
				s1, s2, s3 := slope(h), slope(h/2), slope(h/4)
				e1, e2 := (4*s2-s1)/3, (4*s3-s2)/3
				want := (16*e2 - e1) / 15
				err0 := math.Abs(e2-e1) + 1e-9*(1+math.Abs(want))
				if math.IsNaN(want) || math.Abs(e2-e1) > 1e-6*(1+math.Abs(want)) {
					continue
				}
				at := jet.Point{r.CoordinateVar(0): rational(x0), r.CoordinateVar(1): rational(y0)}
				for _, v := range r.Support(append([]algebra.Fraction{d, g}, values(r.Conditions())...)...) {
					if s := r.Symbol(v); s.Kind == jet.Derivative {
						at[v] = rational(u(int(s.Index[0]), int(s.Index[1]), x0, y0))
					}
				}
				holds := true
				for _, c := range r.Conditions() {
					holds = holds && c.Holds(r, at)
				}
				if !holds {
					continue
				}
				x := r.Enclose(d, at, 200)
				require.True(t, x.IsBounded(), "%s", r.Format(d))
				got, _ := x.Lo().Float64()
				require.InDelta(t, want, got, 100*err0, "d of %s by coordinate %d at (%v, %v)", r.Format(g), i, x0, y0)
				compared++
			}
			return nil
		})
		if err != nil && !outside(err) {
			require.Contains(t, err.Error(), "of")
		}
	}
	t.Logf("%d derivatives compared", compared)
	require.Greater(t, compared, 500)
}

func rational(x float64) algebra.Rat {
	r, _ := algebra.FromFloat(x)
	return r
}

func values(list []jet.Condition) []algebra.Fraction {
	var out []algebra.Fraction
	for _, c := range list {
		out = append(out, c.Value)
	}
	return out
}

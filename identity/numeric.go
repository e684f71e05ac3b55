package identity

import (
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
)

// Budgets of the numerical search, in operations of the compiled programs: long
// formulas are sampled and attacked less often.
const (
	sampleWork  = 4_000_000_000 // of all samples
	descentWork = 10_000_000    // of one evaluation in all descents
	exactTerm   = 500           // for the exact evaluations of one term that go with it
)

// within is n where so many runs of ops operations each stay within the work;
// else as many as do, at least one hundredth of n.
func within(n, work, ops int64) int64 {
	return min(n, max(work/max(ops, 1), n/100, 2))
}

// compiler turns normal forms into float64 programs. Indeterminates that have
// no input are computed from what they are kernels of.
type compiler struct {
	Ring *jet.Ring
	b    *program.Builder
	of   map[algebra.Var]program.Ref
}

func (c *compiler) value(v algebra.Var) program.Ref {
	if x, ok := c.of[v]; ok {
		return x
	}
	s := c.Ring.Symbol(v)
	var x program.Ref
	switch s.Kind {
	case jet.Pi:
		x = c.b.Const(3.141592653589793)
	case jet.Cosine:
		x = c.b.Func(program.Cos, c.fraction(s.Arg))
	case jet.Sine:
		x = c.b.Func(program.Sin, c.fraction(s.Arg))
	case jet.Exponential:
		x = c.b.Func(program.Exp, c.fraction(s.Arg))
	case jet.Logarithm:
		x = c.b.Func(program.Log, c.fraction(s.Arg))
	case jet.ErrorFunction:
		x = c.b.Func(program.Erf, c.fraction(s.Arg))
	case jet.Root:
		x = c.b.Pow(c.fraction(s.Arg), 1/float64(s.Degree))
	default:
		x = c.b.Const(0) // never asked for: every free indeterminate has an input
	}
	c.of[v] = x
	return x
}

// terms are the monomials of p with their coefficients.
func (c *compiler) terms(p algebra.Poly) []program.Ref {
	var out []program.Ref
	for m, k := range p.Terms() {
		t := c.b.Const(k.Float64())
		for _, pw := range m.Powers() {
			t = c.b.Mul(t, c.b.PowInt(c.value(pw.Var), pw.Exp))
		}
		out = append(out, t)
	}
	return out
}

func (c *compiler) poly(p algebra.Poly) program.Ref { return c.b.Sum(c.terms(p)...) }

// absSum is the sum of the absolute values of the monomials.
func (c *compiler) absSum(p algebra.Poly) program.Ref {
	t := c.terms(p)
	for i := range t {
		t[i] = c.b.Func(program.Abs, t[i])
	}
	return c.b.Sum(t...)
}

func (c *compiler) fraction(f algebra.Fraction) program.Ref {
	x := c.poly(f.Num())
	for _, d := range f.DenFactors() {
		x = c.b.Quo(x, c.b.PowInt(c.poly(d.Base), d.Exp))
	}
	return x
}

// where makes x undefined where g is negative.
func (c *compiler) where(x, g program.Ref) program.Ref {
	s := c.b.Add(c.b.Func(program.Sqrt, g), c.b.Const(1))
	return c.b.Mul(x, c.b.Quo(s, s))
}

package jet

import (
	"fmt"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
)

// Point gives rational values to coordinates, constants and jets, and may
// give them to kernels: a rational point of the circle to a cosine and its
// sine, ±1 to an orientation. It is the caller's to keep these consistent.
type Point map[algebra.Var]algebra.Rat

// Clone is a copy of p.
func (p Point) Clone() Point {
	q := make(Point, len(p))
	for v, x := range p {
		q[v] = x
	}
	return q
}

// precisions are tried in turn until a sign is settled.
var precisions = []uint{64, 192, 640}

// evaluator holds the values of the kernels at one point: exact where they
// are rational, enclosed otherwise.
type evaluator struct {
	r     *Ring
	ctx   enclosure.Context
	at    Point
	exact map[algebra.Var]algebra.Rat
	tried map[algebra.Var]bool
	wide  map[algebra.Var]enclosure.Interval
}

func (r *Ring) evaluator(at Point, prec uint) *evaluator {
	return &evaluator{r, enclosure.Context{Prec: prec}, at, map[algebra.Var]algebra.Rat{}, map[algebra.Var]bool{}, map[algebra.Var]enclosure.Interval{}}
}

// Exact is the value of f at a point, where it is rational and defined: every
// root in it is then a perfect power.
func (r *Ring) Exact(f algebra.Fraction, at Point) (algebra.Rat, bool) {
	return r.evaluator(at, 64).rational(f)
}

func (e *evaluator) rational(f algebra.Fraction) (algebra.Rat, bool) {
	if f.Err() != nil {
		return algebra.Rat{}, false
	}
	for _, v := range f.Vars() {
		if _, ok := e.exactVar(v); !ok {
			return algebra.Rat{}, false
		}
	}
	return f.Eval(func(v algebra.Var) algebra.Rat { x, _ := e.exactVar(v); return x })
}

func (e *evaluator) exactVar(v algebra.Var) (algebra.Rat, bool) {
	if x, ok := e.at[v]; ok {
		return x, true
	}
	if x, ok := e.exact[v]; ok || e.tried[v] {
		return x, ok
	}
	e.tried[v] = true
	s := e.r.symbols[v]
	if s.Kind < Cosine {
		return algebra.Rat{}, false
	}
	a, ok := e.rational(s.Arg)
	if !ok {
		return algebra.Rat{}, false
	}
	var x algebra.Rat
	switch {
	case s.Kind == Root:
		if x, ok = rootRational(a, s.Degree); !ok {
			return x, false
		}
	case a.IsZero() && (s.Kind == Cosine || s.Kind == Exponential):
		x = algebra.Int(1)
	case a.IsZero() && (s.Kind == Sine || s.Kind == ErrorFunction), a.IsOne() && s.Kind == Logarithm:
	default:
		return x, false
	}
	e.exact[v] = x
	return x, true
}

// rootRational is the non-negative rational q-th root of a, if there is one.
func rootRational(a algebra.Rat, q int) (algebra.Rat, bool) {
	if a.Sign() < 0 {
		return a, false
	}
	for q%2 == 0 {
		var ok bool
		if a, ok = SqrtRat(a); !ok {
			return a, false
		}
		q /= 2
	}
	if q == 1 || a.IsZero() || a.IsOne() {
		return a, true
	}
	return oddRoot(a, q)
}

// Enclose is an outward-rounded enclosure of f at a point, of the given
// precision in bits; the whole line where f is not defined there or nothing is
// known. Indeterminates without a value give the whole line.
func (r *Ring) Enclose(f algebra.Fraction, at Point, prec uint) enclosure.Interval {
	return r.evaluator(at, prec).interval(f)
}

// EncloseAt is Enclose where some indeterminates are known only by enclosures.
func (r *Ring) EncloseAt(f algebra.Fraction, at Point, wide map[algebra.Var]enclosure.Interval, prec uint) enclosure.Interval {
	e := r.evaluator(at, prec)
	for v, x := range wide {
		e.wide[v] = x
	}
	return e.interval(f)
}

func (e *evaluator) interval(f algebra.Fraction) enclosure.Interval {
	if x, ok := e.rational(f); ok {
		return e.ctx.FromRat(x.Big())
	}
	if f.Err() != nil {
		return enclosure.Entire()
	}
	out := e.poly(f.Num())
	for _, d := range f.DenFactors() {
		out = e.ctx.Quo(out, e.ctx.PowInt(e.poly(d.Base), d.Exp))
	}
	return out
}

func (e *evaluator) poly(p algebra.Poly) enclosure.Interval {
	// Known rational values go in exactly; only the rest is enclosed.
	known := map[algebra.Var]algebra.Rat{}
	for _, v := range p.Vars() {
		if x, ok := e.exactVar(v); ok {
			known[v] = x
		}
	}
	p = p.EvalPartial(known)
	if p.Err() != nil {
		return enclosure.Entire()
	}
	sum := e.ctx.Int(0)
	for m, c := range p.Terms() {
		t := e.ctx.FromRat(c.Big())
		for _, pw := range m.Powers() {
			t = e.ctx.Mul(t, e.ctx.PowInt(e.value(pw.Var), pw.Exp))
		}
		sum = e.ctx.Add(sum, t)
	}
	return sum
}

func (e *evaluator) value(v algebra.Var) enclosure.Interval {
	if x, ok := e.exactVar(v); ok {
		return e.ctx.FromRat(x.Big())
	}
	if x, ok := e.wide[v]; ok {
		return x
	}
	x := e.kernel(v)
	e.wide[v] = x
	return x
}

func (e *evaluator) kernel(v algebra.Var) enclosure.Interval {
	s := e.r.symbols[v]
	if s.Kind == Pi {
		return e.ctx.Pi()
	}
	if s.Kind < Cosine {
		return enclosure.Entire()
	}
	a := e.interval(s.Arg)
	switch s.Kind {
	case Cosine:
		return e.ctx.Cos(a)
	case Sine:
		return e.ctx.Sin(a)
	case Root:
		return e.ctx.Root(a, s.Degree)
	case Exponential:
		return e.ctx.Exp(a)
	case Logarithm:
		return e.ctx.Log(a)
	}
	return e.ctx.Erf(a)
}

// Sign is the sign of f at a point, and whether it is certain: from exact
// arithmetic where the value is rational, from outward-rounded enclosures of
// growing precision otherwise. A zero is certain only in exact arithmetic.
func (r *Ring) Sign(f algebra.Fraction, at Point) (int, bool) {
	if x, ok := r.Exact(f, at); ok {
		return x.Sign(), true
	}
	if f.Err() != nil {
		return 0, false
	}
	for _, prec := range precisions {
		if s, ok := r.Enclose(f, at, prec).Sign(); ok && s != 0 {
			return s, true
		}
	}
	return 0, false
}

// Show is f at a point for a record: an exact rational, or an enclosure
// written [lower, upper].
func (r *Ring) Show(f algebra.Fraction, at Point) string {
	if x, ok := r.Exact(f, at); ok {
		return x.String()
	}
	x := r.Enclose(f, at, precisions[1])
	if x.IsEntire() {
		return "undefined"
	}
	lo, hi := x.Text(24)
	return fmt.Sprintf("[%s, %s]", lo, hi)
}

package jet

import (
	"fmt"

	"creaseproof/entropy/algebra"
)

// Derivation is a derivation of the ring, given by its values on coordinates,
// constants and jets; on kernels it follows from their derivation rules.
type Derivation struct {
	r    *Ring
	base func(v algebra.Var) (algebra.Fraction, error)
	memo map[algebra.Var]algebra.Fraction
}

// NewDerivation makes the derivation with the given values on indeterminates
// that are no kernels.
func (r *Ring) NewDerivation(base func(v algebra.Var) (algebra.Fraction, error)) *Derivation {
	return &Derivation{r: r, base: base, memo: map[algebra.Var]algebra.Fraction{}}
}

// Apply is the derivative of f.
func (d *Derivation) Apply(f algebra.Fraction) (algebra.Fraction, error) {
	var sum algebra.Fraction
	for _, v := range f.Vars() {
		dv, err := d.of(v)
		if err != nil {
			return sum, err
		}
		if dv.IsZero() {
			continue
		}
		sum = sum.Add(f.Deriv(v).Mul(dv))
	}
	return d.r.Reduce(sum)
}

func (d *Derivation) of(v algebra.Var) (algebra.Fraction, error) {
	if dv, ok := d.memo[v]; ok {
		return dv, nil
	}
	dv, err := d.compute(v)
	if err != nil {
		return dv, err
	}
	d.memo[v] = dv
	return dv, nil
}

func (d *Derivation) compute(v algebra.Var) (algebra.Fraction, error) {
	r := d.r
	s := r.symbols[v]
	switch s.Kind {
	case Coordinate, Constant, Derivative:
		return d.base(v)
	case Pi:
		return algebra.Fraction{}, nil
	}
	da, err := d.Apply(s.Arg)
	if err != nil || da.IsZero() {
		return da, err
	}
	switch s.Kind {
	case Cosine:
		return r.Mul(Of(s.Partner).Neg(), da)
	case Sine:
		return r.Mul(Of(s.Partner), da)
	case Root:
		// r' = r a'/(q a)
		f, err := r.Quo(da, s.Arg)
		if err != nil {
			return f, err
		}
		return r.Mul(Of(v).Scale(algebra.Frac64(1, int64(s.Degree))), f)
	case Exponential:
		return r.Mul(Of(v), da)
	case Logarithm:
		return r.Quo(da, s.Arg)
	case ErrorFunction:
		return r.erfDerivative(s.Arg, da)
	}
	return algebra.Fraction{}, fmt.Errorf("no derivation rule for %s", s.Name)
}

// erfDerivative is 2/√π · exp(-a²) · da.
func (r *Ring) erfDerivative(a, da algebra.Fraction) (algebra.Fraction, error) {
	sq, err := r.Mul(a, a)
	if err != nil {
		return sq, err
	}
	e, err := r.Exp(sq.Neg())
	if err != nil {
		return e, err
	}
	root, err := r.Root(Of(r.PiVar()), 2)
	if err != nil {
		return root, err
	}
	f, err := r.Quo(e.Scale(algebra.Int(2)), root)
	if err != nil {
		return f, err
	}
	return r.Mul(f, da)
}

// Total is the total derivative D_i f with respect to coordinate i.
func (r *Ring) Total(f algebra.Fraction, i int) (algebra.Fraction, error) {
	if r.derivs[i] == nil {
		r.derivs[i] = r.NewDerivation(func(v algebra.Var) (algebra.Fraction, error) {
			s := r.symbols[v]
			switch {
			case s.Kind == Coordinate && s.Place == i:
				return Whole(1), nil
			case s.Kind == Derivative && s.Side != NoSide:
				return algebra.Fraction{}, fmt.Errorf("derivative of a trace: at a jump only the traces of the gradient are known")
			case s.Kind == Derivative:
				return r.Jet(s.Place, s.Index.Plus(i), NoSide)
			}
			return algebra.Fraction{}, nil
		})
	}
	return r.derivs[i].Apply(f)
}

// TotalIndex is D_J f.
func (r *Ring) TotalIndex(f algebra.Fraction, j Index) (algebra.Fraction, error) {
	var err error
	for i, k := range j {
		for range k {
			if f, err = r.Total(f, i); err != nil {
				return f, err
			}
		}
	}
	return f, nil
}

// Partial is ∂f/∂v with the other coordinates, constants and jets fixed, the
// kernels that depend on v included.
func (r *Ring) Partial(f algebra.Fraction, v algebra.Var) (algebra.Fraction, error) {
	d := r.NewDerivation(func(w algebra.Var) (algebra.Fraction, error) {
		if w == v {
			return Whole(1), nil
		}
		return algebra.Fraction{}, nil
	})
	return d.Apply(f)
}

// Support lists the coordinates, constants, π and jets that f depends on,
// those inside kernels included, in increasing order.
func (r *Ring) Support(fs ...algebra.Fraction) []algebra.Var {
	seen := make([]bool, len(r.symbols))
	var visit func(f algebra.Fraction)
	visit = func(f algebra.Fraction) {
		for _, v := range f.Vars() {
			if seen[v] {
				continue
			}
			seen[v] = true
			if s := r.symbols[v]; s.Kind >= Cosine {
				visit(s.Arg)
			}
		}
	}
	for _, f := range fs {
		visit(f)
	}
	var out []algebra.Var
	for v, ok := range seen {
		if ok && r.symbols[v].Kind < Cosine {
			out = append(out, algebra.Var(v))
		}
	}
	return out
}

// Kernels lists the kernels that f depends on, nested ones included, oldest
// first.
func (r *Ring) Kernels(fs ...algebra.Fraction) []algebra.Var {
	seen := make([]bool, len(r.symbols))
	var visit func(f algebra.Fraction)
	visit = func(f algebra.Fraction) {
		for _, v := range f.Vars() {
			if s := r.symbols[v]; s.Kind >= Cosine && !seen[v] {
				seen[v] = true
				visit(s.Arg)
			}
		}
	}
	for _, f := range fs {
		visit(f)
	}
	var out []algebra.Var
	for v, ok := range seen {
		if ok {
			out = append(out, algebra.Var(v))
		}
	}
	return out
}

// Euler is the Euler operator E_a(f) for unknown a: Σ_J (-D)_J ∂f/∂u^a_J.
func (r *Ring) Euler(f algebra.Fraction, unknown int) (algebra.Fraction, error) {
	var sum algebra.Fraction
	for _, v := range r.Support(f) {
		s := r.symbols[v]
		if s.Kind != Derivative || s.Place != unknown {
			continue
		}
		if s.Side != NoSide {
			return sum, fmt.Errorf("the Euler operator does not apply to traces")
		}
		p, err := r.Partial(f, v)
		if err != nil {
			return sum, err
		}
		if p, err = r.TotalIndex(p, s.Index); err != nil {
			return sum, err
		}
		if s.Index.Order()%2 == 1 {
			p = p.Neg()
		}
		if sum, err = r.Add(sum, p); err != nil {
			return sum, err
		}
	}
	return sum, nil
}

package entropy

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
)

// ErrNoPair says that no two members of a family of fields span it.
var ErrNoPair = errors.New("no two members span the family")

// SpanningPair is two members of a family Σ(θ) and the coefficients with which
// every other one is their combination:
//
//	Σ(θ) = Coefficients[0] Σ(Angles[0]) + Coefficients[1] Σ(Angles[1])
type SpanningPair struct {
	Field        string
	Angle        string          // name of θ
	Angles       [2]formula.Node // rational multiples of π
	Coefficients [2]formula.Node // trigonometric polynomials in θ
	// Harmonic is k where the coefficients are cos kθ and sin kθ, else 0.
	Harmonic int
}

// String is the identity as a formula.
func (p *SpanningPair) String() string {
	at := func(i int) formula.Node {
		return formula.NewJuxt(p.Coefficients[i], formula.NewField(p.Field, p.Angles[i]))
	}
	return formula.Text(formula.NewField(p.Field, nil)) + " = " + formula.Text(formula.NewSum(formula.Term{X: at(0)}, formula.Term{X: at(1)}))
}

// SpanningPair finds two members of the family of a field given in a frame that
// span it, and proves that they do in exact arithmetic.
//
// The components are written as trigonometric polynomials in the frame angle,
// Σ(θ) = Σ_j φ_j(θ) v_j with φ_j among 1, cos kθ, sin kθ. The rank over Q of
// the coefficient vectors v_j (their entries split over the monomials in all
// other indeterminates) is the dimension of the span of the family. Where only
// one harmonic k occurs the pair is Σ(0), Σ(π/(2k)), with coefficients cos kθ,
// sin kθ; where the rank is at most 2 otherwise, two of the angles 0, π/2, π,
// 3π/2 are tried. Finally the identity itself is brought to normal form; what
// is returned is proved.
//
// The error wraps ErrNoPair where the family has a larger span, and
// jet.ErrOutside where it is no trigonometric polynomial or the angles tried
// do not serve.
func (s *Setting) SpanningPair(ctx context.Context, field string) (*SpanningPair, error) {
	p, err := s.spanningPair(ctx, field)
	if err != nil {
		return nil, fmt.Errorf("the field %s: %w", field, err)
	}
	return p, nil
}

func (s *Setting) spanningPair(ctx context.Context, field string) (*SpanningPair, error) {
	if s.Frame == nil {
		return nil, errors.New("the setting has no frame")
	}
	in, ex, err := s.NewExact(ctx)
	if err != nil {
		return nil, err
	}
	v, err := in.Field(formula.NewField(field, nil))
	if err != nil {
		return nil, err
	}
	waves, err := ex.waves(v, s.Frame.Angle)
	if err != nil {
		return nil, err
	}
	weights, rank, err := ex.weights(waves)
	if err != nil {
		return nil, err
	}
	if rank > 2 {
		return nil, fmt.Errorf("%w: its span has dimension %d", ErrNoPair, rank)
	}
	p := &SpanningPair{Field: field, Angle: s.Frame.Angle}
	if !p.pure(waves) && !p.quarters(waves, weights) {
		return nil, fmt.Errorf("%w: the span has dimension %d, but no two of the angles 0, pi/2, pi, 3 pi/2 give a basis", jet.ErrOutside, rank)
	}
	if err := p.prove(in, ex, v); err != nil {
		return nil, err
	}
	return p, nil
}

// wave is one function 1, cos kθ or sin kθ and its coefficient vector.
type wave struct {
	k     int
	sine  bool
	coefs []algebra.Fraction
}

func (w wave) name(angle string) formula.Node {
	if w.k == 0 {
		return formula.NewInt(1)
	}
	arg := formula.NewName(angle)
	if w.k > 1 {
		arg = formula.NewJuxt(formula.NewInt(int64(w.k)), arg)
	}
	if w.sine {
		return formula.NewCall("sin", arg)
	}
	return formula.NewCall("cos", arg)
}

// at is the value of the wave at the angle q π/2: -1, 0 or 1.
func (w wave) at(q int) int64 {
	turn := w.k * q % 4
	if w.sine {
		return [...]int64{0, 1, 0, -1}[turn]
	}
	return [...]int64{1, 0, -1, 0}[turn]
}

// waves is a vector as a trigonometric polynomial.
func (ex *Exact) waves(v []algebra.Fraction, angle string) ([]wave, error) {
	var out []wave
	get := func(k int, sine bool) []algebra.Fraction {
		for _, w := range out {
			if w.k == k && w.sine == sine {
				return w.coefs
			}
		}
		out = append(out, wave{k, sine, make([]algebra.Fraction, len(v))})
		return out[len(out)-1].coefs
	}
	for i, x := range v {
		h, err := ex.Ring.Harmonics(x, angle)
		if err != nil {
			return nil, err
		}
		if !h.Mean.IsZero() {
			get(0, false)[i] = h.Mean
		}
		for _, w := range h.Waves {
			if !w.Cos.IsZero() {
				get(w.K, false)[i] = w.Cos
			}
			if !w.Sin.IsZero() {
				get(w.K, true)[i] = w.Sin
			}
		}
	}
	slices.SortFunc(out, func(a, b wave) int {
		switch {
		case a.k != b.k:
			return a.k - b.k
		case a.sine == b.sine:
			return 0
		case b.sine:
			return -1
		}
		return 1
	})
	return out, nil
}

// weights writes the coefficient vectors over a basis chosen among them:
// v_j = Σ_b weights[j][b] v_b with rational weights, one column for each basis
// vector. The vectors are compared entry by entry, over the monomials in all
// indeterminates after a common denominator is cleared.
func (ex *Exact) weights(waves []wave) ([][]algebra.Rat, int, error) {
	rows := make([]map[string]algebra.Rat, len(waves))
	for j, w := range waves {
		rows[j] = map[string]algebra.Rat{}
		for i, x := range w.coefs {
			// The denominators of one component are made equal.
			den := algebra.FromPoly(algebra.Const(algebra.Int(1)))
			for _, o := range waves {
				for _, f := range o.coefs[i].DenFactors() {
					if !x.IsZero() {
						den = den.Mul(algebra.FromPoly(f.Base.Pow(f.Exp)))
					}
				}
			}
			y, err := ex.Ring.Mul(x, den)
			if err != nil {
				return nil, 0, err
			}
			poly, ok := y.IsPoly()
			if !ok {
				return nil, 0, fmt.Errorf("%w: denominators that do not cancel", jet.ErrOutside)
			}
			for m, c := range poly.Terms() {
				rows[j][fmt.Sprint(i, " ", m.String(ex.Ring.Name))] = c
			}
		}
	}
	return combine(rows)
}

// combine writes each vector over those before it that are independent.
func combine(rows []map[string]algebra.Rat) (weights [][]algebra.Rat, rank int, err error) {
	type pivot struct {
		at   string
		vec  map[string]algebra.Rat // 1 at the pivot
		over []algebra.Rat          // vec over the basis vectors
	}
	var pivots []pivot
	for _, row := range rows {
		rest := map[string]algebra.Rat{}
		for k, c := range row {
			rest[k] = c
		}
		over := make([]algebra.Rat, len(rows)) // row - rest
		for _, p := range pivots {
			c, ok := rest[p.at]
			if !ok {
				continue
			}
			for k, x := range p.vec {
				if d := rest[k].Sub(c.Mul(x)); d.IsZero() {
					delete(rest, k)
				} else {
					rest[k] = d
				}
			}
			for b, x := range p.over {
				over[b] = over[b].Add(c.Mul(x))
			}
		}
		if len(rest) > 0 {
			keys := sortedKeys(rest)
			inv, _ := rest[keys[0]].Inv()
			p := pivot{at: keys[0], vec: map[string]algebra.Rat{}, over: make([]algebra.Rat, len(rows))}
			for k, x := range rest {
				p.vec[k] = x.Mul(inv)
			}
			for b, x := range over {
				p.over[b] = x.Neg().Mul(inv)
			}
			p.over[len(pivots)] = inv
			pivots = append(pivots, p)
			over = make([]algebra.Rat, len(rows))
			over[len(pivots)-1] = algebra.Int(1)
		}
		weights = append(weights, over)
	}
	for j := range weights {
		weights[j] = weights[j][:len(pivots)]
	}
	return weights, len(pivots), nil
}

// pure takes 0 and π/(2k) where there is one harmonic k >= 1 only.
func (p *SpanningPair) pure(waves []wave) bool {
	if len(waves) == 0 || waves[0].k == 0 || waves[len(waves)-1].k != waves[0].k {
		return false
	}
	p.Harmonic = waves[0].k
	p.Angles = [2]formula.Node{formula.NewInt(0), formula.NewQuotient(formula.NewName("pi"), formula.NewInt(2*int64(p.Harmonic)))}
	p.Coefficients = [2]formula.Node{
		wave{k: p.Harmonic}.name(p.Angle),
		wave{k: p.Harmonic, sine: true}.name(p.Angle),
	}
	return true
}

// quarters solves for the coefficients at two multiples of π/2.
func (p *SpanningPair) quarters(waves []wave, weights [][]algebra.Rat) bool {
	rank := 0
	if len(weights) > 0 {
		rank = len(weights[0])
	}
	// f_b(θ) = Σ_j φ_j(θ) weights[j][b], Σ(θ) = Σ_b f_b(θ) v_b
	value := func(b, q int) algebra.Rat {
		var sum algebra.Rat
		for j, w := range waves {
			sum = sum.Add(weights[j][b].Mul(algebra.Int(w.at(q))))
		}
		return sum
	}
	part := func(c []algebra.Rat) formula.Node { // Σ_b c_b f_b(θ)
		var terms []formula.Term
		for j, w := range waves {
			var x algebra.Rat
			for b := range c {
				x = x.Add(c[b].Mul(weights[j][b]))
			}
			if x.IsZero() {
				continue
			}
			t := w.name(p.Angle)
			if a := x.Abs(); w.k == 0 {
				t = formula.NewNum(a.Big())
			} else if !a.IsOne() {
				t = formula.NewProduct(formula.NewNum(a.Big()), t)
			}
			terms = append(terms, formula.Term{Neg: x.Sign() < 0, X: t})
		}
		return formula.NewSum(terms...)
	}
	angle := func(q int) formula.Node {
		switch q {
		case 0:
			return formula.NewInt(0)
		case 1:
			return formula.NewQuotient(formula.NewName("pi"), formula.NewInt(2))
		case 2:
			return formula.NewName("pi")
		}
		return formula.NewQuotient(formula.NewJuxt(formula.NewInt(3), formula.NewName("pi")), formula.NewInt(2))
	}
	for q := range 4 {
		for r := q + 1; r < 4; r++ {
			var one, two []algebra.Rat
			switch rank {
			case 0:
			case 1:
				inv, ok := value(0, q).Inv()
				if !ok {
					continue
				}
				one, two = []algebra.Rat{inv}, []algebra.Rat{{}}
			case 2:
				a, b, c, d := value(0, q), value(1, q), value(0, r), value(1, r)
				inv, ok := a.Mul(d).Sub(b.Mul(c)).Inv()
				if !ok {
					continue
				}
				one = []algebra.Rat{d.Mul(inv), c.Neg().Mul(inv)}
				two = []algebra.Rat{b.Neg().Mul(inv), a.Mul(inv)}
			}
			p.Angles = [2]formula.Node{angle(q), angle(r)}
			p.Coefficients = [2]formula.Node{part(one), part(two)}
			return true
		}
	}
	return false
}

// prove brings the identity to normal form.
func (p *SpanningPair) prove(in *Interpreter[algebra.Fraction], ex *Exact, whole []algebra.Fraction) error {
	rest := slices.Clone(whole)
	for i := range p.Angles {
		c, err := in.Scalar(p.Coefficients[i])
		if err != nil {
			return err
		}
		v, err := in.Field(formula.NewField(p.Field, p.Angles[i]))
		if err != nil {
			return err
		}
		for k := range rest {
			t, err := ex.Ring.Mul(c, v[k])
			if err != nil {
				return err
			}
			if rest[k], err = ex.Ring.Sub(rest[k], t); err != nil {
				return err
			}
		}
	}
	for _, x := range rest {
		if err := ex.Ring.Err(x); err != nil {
			return err
		}
		if !x.IsZero() {
			return fmt.Errorf("%w: %s could not be shown", jet.ErrOutside, p)
		}
	}
	return nil
}

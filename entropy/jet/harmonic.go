package jet

import (
	"fmt"
	"strconv"
	"strings"

	"creaseproof/entropy/algebra"
)

// Wave is Cos·cos(kθ) + Sin·sin(kθ).
type Wave struct {
	K        int
	Cos, Sin algebra.Fraction
}

// Harmonics is a trigonometric polynomial Mean + Σ waves, in increasing k ≥ 1,
// waves that vanish left out. Its angle is Unit times the named one.
type Harmonics struct {
	Mean  algebra.Fraction
	Waves []Wave
	Unit  algebra.Rat
}

// Harmonics writes f as a trigonometric polynomial in a rational multiple of
// the named angle. It fails where f depends on the angle in another way.
func (r *Ring) Harmonics(f algebra.Fraction, angle string) (Harmonics, error) {
	out := Harmonics{Unit: algebra.Int(1)}
	theta := r.ConstantVar(angle)
	c, s := algebra.Var(-1), algebra.Var(-1)
	for _, v := range r.cosines {
		unit := r.symbols[v].Arg.Deriv(theta)
		q, ok := unit.IsConst()
		if ok && !q.IsZero() && r.symbols[v].Arg.Equal(Of(theta).Mul(unit)) && (c < 0 || !f.Has(c) && !f.Has(s)) {
			c, s = v, r.symbols[v].Partner
			out.Unit = q
		}
	}
	outside := func() error {
		return fmt.Errorf("%w: %s depends on %s other than as a trigonometric polynomial", ErrOutside, clip(r.Format(f)), angle)
	}
	if f.Has(theta) {
		return out, outside()
	}
	for _, v := range r.Kernels(f) {
		if v != c && v != s && r.depends(r.symbols[v].Arg, theta) {
			return out, outside()
		}
	}
	if c < 0 || !f.Has(c) && !f.Has(s) {
		out.Mean = f
		return out, nil
	}
	den := f.Den()
	if den.Has(c) || den.Has(s) {
		return out, outside()
	}
	num := r.ReducePoly(f.Num())
	// cos and sin coefficients by harmonic
	n := num.Degree(c) + num.Degree(s)
	cc := make([]algebra.Poly, n+2)
	ss := make([]algebra.Poly, n+2)
	for e, part := range num.Coeffs(s) { // e is 0 or 1
		for m, a := range part.Coeffs(c) {
			if a.IsZero() {
				continue
			}
			// cos^m = 2^-m Σ_j binom(m, j) cos((m-2j)θ)
			b, _ := algebra.Frac64(1, 2).Pow(m)
			for j := 0; j <= m; j++ {
				w := a.Scale(b)
				k := m - 2*j
				if k < 0 {
					k = -k
				}
				if e == 0 {
					cc[k] = cc[k].Add(w)
				} else { // sin θ cos kθ = (sin (k+1)θ - sin (k-1)θ)/2
					h := w.Scale(algebra.Frac64(1, 2))
					ss[k+1] = ss[k+1].Add(h)
					if k > 0 {
						ss[k-1] = ss[k-1].Sub(h)
					} else {
						ss[1] = ss[1].Add(h)
					}
				}
				b = b.Mul(algebra.Frac64(int64(m-j), int64(j+1)))
			}
		}
	}
	inv := algebra.FromFactors(algebra.Const(algebra.Int(1)), f.DenFactors())
	var err error
	part := func(p algebra.Poly) algebra.Fraction {
		g, e := r.Mul(algebra.FromPoly(p), inv)
		if e != nil && err == nil {
			err = e
		}
		return g
	}
	out.Mean = part(cc[0])
	for k := 1; k < len(cc); k++ {
		if cc[k].IsZero() && ss[k].IsZero() {
			continue
		}
		out.Waves = append(out.Waves, Wave{k, part(cc[k]), part(ss[k])})
	}
	return out, err
}

// FormatHarmonic prints a value whose only kernels are the cosine and sine of
// one angle over its multiples, as cos(2 theta) rather than 2 cos(theta)^2 - 1;
// any other value as Format does.
func (r *Ring) FormatHarmonic(f algebra.Fraction) string {
	angle := ""
	for _, k := range r.Kernels(f) {
		s := &r.symbols[k]
		v, ok := loneVar(s.Arg.Num())
		if s.Kind != Cosine && s.Kind != Sine || !ok || len(s.Arg.DenFactors()) > 0 || angle != "" && r.symbols[v].Name != angle {
			return r.Format(f)
		}
		angle = r.symbols[v].Name
	}
	if angle == "" {
		return r.Format(f)
	}
	h, err := r.Harmonics(f, angle)
	if err != nil {
		return r.Format(f)
	}
	var b strings.Builder
	term := func(c algebra.Fraction, wave string) {
		if c.IsZero() {
			return
		}
		sep := " + "
		if num := c.Num(); num.Len() == 1 {
			if _, k := num.Leading(); k.Sign() < 0 {
				sep, c = " - ", c.Neg()
			}
		}
		if b.Len() == 0 {
			sep = strings.TrimPrefix(strings.TrimSuffix(sep, " "), " ")
			if sep == "+" {
				sep = ""
			}
		}
		b.WriteString(sep)
		k, ok := c.IsConst()
		switch {
		case wave == "":
			b.WriteString(r.Format(c))
		case ok && k.IsOne():
			b.WriteString(wave)
		case ok && k.IsInt():
			b.WriteString(k.String() + " " + wave)
		case ok:
			b.WriteString(k.String() + "*" + wave)
		default:
			b.WriteString("(" + r.Format(c) + ") " + wave)
		}
	}
	term(h.Mean, "")
	for _, w := range h.Waves {
		arg := angle
		if w.K > 1 {
			arg = strconv.Itoa(w.K) + " " + angle
		}
		term(w.Cos, "cos("+arg+")")
		term(w.Sin, "sin("+arg+")")
	}
	return b.String()
}

func (r *Ring) depends(f algebra.Fraction, v algebra.Var) bool {
	for _, w := range r.Support(f) {
		if w == v {
			return true
		}
	}
	return false
}

// NormRoot is the root of a value that is known to be a sum of squares: no
// condition is recorded.
func (r *Ring) NormRoot(f algebra.Fraction) (algebra.Fraction, error) {
	n := len(r.conditions) // f is defined already
	g, err := r.root(f, 2, true)
	r.conditions = r.conditions[:n]
	return g, err
}

// Orientation is an indeterminate σ with σ² = 1: the sign of the unit normal
// against the jump of the gradient.
func (r *Ring) Orientation() (algebra.Fraction, error) {
	n := len(r.symbols)
	v, err := r.kernel(Symbol{Kind: Root, Name: "orientation", Arg: Whole(1), Degree: 2})
	if err != nil {
		return algebra.Fraction{}, err
	}
	if int(v) == n {
		r.related = append(r.related, v)
	}
	return Of(v), nil
}

func clip(s string) string {
	const limit = 60
	if t := []rune(s); len(t) > limit {
		return string(t[:limit]) + "…"
	}
	return s
}

package jet

import (
	"fmt"
	"math/big"
	"slices"

	"creaseproof/entropy/algebra"
)

// circle is a pair (cos a, sin a).
type circle struct{ c, s algebra.Fraction }

// Angles says how fine the basis of angles of a ring is: the k-th angle that
// is independent of those before it is divided by Divisors[k] (1 where it is
// missing) before it joins the basis, and rational multiples of π that square
// roots do not settle are whole multiples of π/Turn.
type Angles struct {
	Divisors []int64
	Turn     int64
}

// FinerAngles says that formulas hold fractions of an angle in use, such as
// theta/2 after theta, and which basis would hold them all. It wraps
// ErrOutside.
type FinerAngles struct {
	Need Angles
	text string
}

func (e *FinerAngles) Error() string { return e.text }

// Unwrap is ErrOutside.
func (e *FinerAngles) Unwrap() error { return ErrOutside }

// maxTurns bounds the multiples of a basis angle.
const maxTurns = 1000

// SetAngles chooses the basis of angles. It must be called before formulas
// with angles are read.
func (r *Ring) SetAngles(a Angles) { r.angles = a }

// SplitAngle makes every argument of a cosine or sine fall into a rational
// multiple of v and a rest, in whatever order they are read. It must be called
// before formulas with angles are read.
func (r *Ring) SplitAngle(v algebra.Var) { r.turning = append(r.turning, v) }

func (r *Ring) finer(k int, d int64, f algebra.Fraction) error {
	need := Angles{slices.Clone(r.angles.Divisors), r.angles.Turn}
	for len(need.Divisors) <= k {
		need.Divisors = append(need.Divisors, 1)
	}
	need.Divisors[k] *= d
	text := fmt.Sprintf("%v: cos or sin of %s beside cos or sin of %s; write every angle as a whole multiple of one smallest angle",
		ErrOutside, r.Format(f), r.Format(r.symbols[r.angleBasis[k]].Arg))
	if need.Divisors[k] > maxTurns {
		return fmt.Errorf("%w%s", ErrOutside, text[len(ErrOutside.Error()):])
	}
	return &FinerAngles{need, text}
}

// CosSin is the pair cos f, sin f. Arguments are written over a basis of
// angles with integer coefficients, and a rational multiple of π, so that the
// addition theorems hold literally. Where the basis is too coarse (theta/2
// after theta) the error is a *FinerAngles.
func (r *Ring) CosSin(f algebra.Fraction) (cos, sin algebra.Fraction, err error) {
	if f.IsZero() {
		return Whole(1), algebra.Fraction{}, nil
	}
	// Split off the rational multiple of π.
	var turn algebra.Rat
	if r.pi >= 0 && f.Has(r.pi) {
		num, ok := f.IsPoly()
		if ok {
			for m, c := range num.Terms() {
				pw := m.Powers()
				if len(pw) == 1 && pw[0].Var == r.pi && pw[0].Exp == 1 {
					turn = c
				}
			}
			f = f.Sub(Of(r.pi).Scale(turn))
		}
	}
	z, err := r.rationalAngle(turn)
	if err != nil {
		return z.c, z.s, err
	}
	for _, v := range r.turning {
		q, ok := f.Deriv(v).IsConst()
		if !ok || q.IsZero() {
			continue
		}
		part := Of(v).Scale(q)
		if _, ok := combination(part, r.args(r.angleBasis)); !ok {
			if _, err = r.joinAngle(Of(v)); err != nil {
				return z.c, z.s, err
			}
		}
		if z, err = r.turnBy(z, part); err != nil {
			return z.c, z.s, err
		}
		f = f.Sub(part)
	}
	if !f.IsZero() {
		z, err = r.turnBy(z, f)
	}
	return z.c, z.s, err
}

// turnBy turns z by f, an angle without a rational multiple of π.
func (r *Ring) turnBy(z circle, f algebra.Fraction) (circle, error) {
	x, ok := combination(f, r.args(r.angleBasis))
	if !ok {
		k := len(r.angleBasis)
		d, err := r.joinAngle(f)
		if err != nil {
			return z, err
		}
		x = append(make([]algebra.Rat, k), algebra.Int(d))
	}
	for i, q := range x {
		if q.IsZero() {
			continue
		}
		if den := q.Big().Denom(); !q.IsInt() && den.IsInt64() && den.Int64() <= maxTurns {
			return z, r.finer(i, den.Int64(), f)
		}
		n, okInt := q.Int64()
		if !q.IsInt() || !okInt || n > maxTurns || n < -maxTurns {
			return z, fmt.Errorf("%w: cos or sin of %s, which is %s times another angle in use", ErrOutside, r.Format(f), q)
		}
		v := r.angleBasis[i]
		w, err := r.turnPow(circle{Of(v), Of(r.symbols[v].Partner)}, int(n))
		if err != nil {
			return z, err
		}
		if z, err = r.turnMul(z, w); err != nil {
			return z, err
		}
	}
	return z, nil
}

// joinAngle adds f, which is independent of the basis, to it: f/d, d returned.
func (r *Ring) joinAngle(f algebra.Fraction) (int64, error) {
	d := int64(1)
	if k := len(r.angleBasis); k < len(r.angles.Divisors) {
		d = r.angles.Divisors[k]
	}
	c, err := r.newAngle(f.Scale(algebra.Frac64(1, d)))
	if err != nil {
		return d, err
	}
	r.angleBasis = append(r.angleBasis, c)
	return d, nil
}

// newAngle finds or makes the pair of kernels cos f, sin f.
func (r *Ring) newAngle(f algebra.Fraction) (algebra.Var, error) {
	text := r.Format(f)
	n := len(r.symbols)
	c, err := r.kernel(Symbol{Kind: Cosine, Name: "cos(" + text + ")", Arg: f})
	if err != nil || int(c) < n {
		return c, err
	}
	s, err := r.kernel(Symbol{Kind: Sine, Name: "sin(" + text + ")", Arg: f, Partner: c})
	if err != nil {
		return c, err
	}
	r.symbols[c].Partner = s
	r.related = append(r.related, s)
	r.cosines = append(r.cosines, c)
	return c, nil
}

func (r *Ring) turnMul(a, b circle) (circle, error) {
	c, err := r.Reduce(a.c.Mul(b.c).Sub(a.s.Mul(b.s)))
	if err != nil {
		return a, err
	}
	s, err := r.Reduce(a.s.Mul(b.c).Add(a.c.Mul(b.s)))
	return circle{c, s}, err
}

func (r *Ring) turnPow(a circle, n int) (circle, error) {
	if n < 0 {
		a.s, n = a.s.Neg(), -n
	}
	out := circle{c: Whole(1)}
	var err error
	for ; n > 0; n >>= 1 {
		if n&1 == 1 {
			if out, err = r.turnMul(out, a); err != nil {
				return out, err
			}
		}
		if n > 1 {
			if a, err = r.turnMul(a, a); err != nil {
				return a, err
			}
		}
	}
	return out, nil
}

// rationalAngle is (cos, sin) of q·π: by square roots for multiples of π/12,
// as a kernel of its own otherwise.
func (r *Ring) rationalAngle(q algebra.Rat) (circle, error) {
	if q.IsZero() {
		return circle{c: Whole(1)}, nil
	}
	n, ok := q.Mul(algebra.Int(12)).Int64()
	if q.Mul(algebra.Int(12)).IsInt() && ok {
		n = ((n % 24) + 24) % 24
		third, quarter := n%4 == 0, n%3 == 0
		switch {
		case n%6 == 0:
			k := n / 6
			return circle{Whole([]int64{1, 0, -1, 0}[k]), Whole([]int64{0, 1, 0, -1}[k])}, nil
		case quarter: // odd multiples of π/4
			h, err := r.Root(Rational(algebra.Frac64(1, 2).Big()), 2)
			if err != nil {
				return circle{}, err
			}
			return circle{h, h}.quadrant(int(n / 6)), nil
		case third || n%2 == 0: // multiples of π/6
			h, err := r.Root(Whole(3), 2)
			if err != nil {
				return circle{}, err
			}
			h = h.Scale(algebra.Frac64(1, 2))
			half := Rational(algebra.Frac64(1, 2).Big())
			if n%6 == 2 {
				return circle{h, half}.quadrant(int(n / 6)), nil
			}
			return circle{half, h}.quadrant(int(n / 6)), nil
		default: // odd multiples of π/12: π/3 - π/4 and turns of it
			a, err := r.rationalAngle(algebra.Frac64(1, 4))
			if err != nil {
				return circle{}, err
			}
			b, err := r.rationalAngle(q.Sub(algebra.Frac64(1, 4)))
			if err != nil {
				return circle{}, err
			}
			return r.turnMul(a, b)
		}
	}
	// q = m/d: turns of the basis angle π/d.
	d := q.Big().Denom()
	if !d.IsInt64() || d.Int64() > maxTurns {
		return circle{}, fmt.Errorf("%w: cos or sin of %s pi", ErrOutside, q)
	}
	if r.angles.Turn == 0 {
		r.angles.Turn = d.Int64()
	}
	unit := r.angles.Turn
	if unit%d.Int64() != 0 {
		need := Angles{slices.Clone(r.angles.Divisors), lcm(unit, d.Int64())}
		text := fmt.Sprintf("%v: cos or sin of %s pi beside cos or sin of a multiple of pi/%d", ErrOutside, q, unit)
		if need.Turn > maxTurns {
			return circle{}, fmt.Errorf("%w%s", ErrOutside, text[len(ErrOutside.Error()):])
		}
		return circle{}, &FinerAngles{need, text}
	}
	// By half turns and reflection to 0 < m ≤ unit/2.
	whole := new(big.Int).Mul(q.Big().Num(), big.NewInt(unit/d.Int64()))
	m := whole.Mod(whole, big.NewInt(2*unit)).Int64()
	half, reflect := m >= unit, false
	if half {
		m -= unit
	}
	if 2*m > unit {
		m, reflect = unit-m, true
	}
	v, err := r.newAngle(Of(r.PiVar()).Scale(algebra.Frac64(1, unit)))
	if err != nil {
		return circle{}, err
	}
	r.relateTurn(v, unit)
	z, err := r.turnPow(circle{Of(v), Of(r.symbols[v].Partner)}, int(m))
	if err == nil && m == 1 {
		z.s, err = r.Reduce(z.s)
	}
	if reflect {
		z.c = z.c.Neg()
	}
	if half {
		z = circle{z.c.Neg(), z.s.Neg()}
	}
	return z, err
}

func lcm(a, b int64) int64 {
	g := a
	for m := b; m != 0; {
		g, m = m, g%m
	}
	return a / g * b
}

// quadrant turns z by k right angles.
func (z circle) quadrant(k int) circle {
	for range k {
		z = circle{z.s.Neg(), z.c}
	}
	return z
}

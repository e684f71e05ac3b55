package jet

import (
	"fmt"

	"creaseproof/entropy/algebra"
)

// circle is a pair (cos a, sin a).
type circle struct{ c, s algebra.Fraction }

// CosSin is the pair cos f, sin f. Arguments are written over a basis of
// angles with integer coefficients, and a rational multiple of π, so that the
// addition theorems hold literally. An argument that is a proper fraction of
// an angle already in use (theta/2 after theta) is outside.
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
	if err != nil || f.IsZero() {
		return z.c, z.s, err
	}
	x, ok := combination(f, r.args(r.angleBasis))
	if !ok {
		// f is independent of the basis, so it joins it as it stands.
		x = append(make([]algebra.Rat, len(r.angleBasis)), algebra.Int(1))
		c, err := r.newAngle(f)
		if err != nil {
			return z.c, z.s, err
		}
		r.angleBasis = append(r.angleBasis, c)
	}
	for i, q := range x {
		if q.IsZero() {
			continue
		}
		n, okInt := q.Int64()
		if !q.IsInt() || !okInt || n > 1000 || n < -1000 {
			return z.c, z.s, fmt.Errorf("%w: cos or sin of %s beside cos or sin of %s; write every angle as a whole multiple of one smallest angle",
				ErrOutside, r.Format(f), r.Format(r.symbols[r.angleBasis[i]].Arg))
		}
		v := r.angleBasis[i]
		w, err := r.turnPow(circle{Of(v), Of(r.symbols[v].Partner)}, int(n))
		if err != nil {
			return z.c, z.s, err
		}
		if z, err = r.turnMul(z, w); err != nil {
			return z.c, z.s, err
		}
	}
	return z.c, z.s, nil
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
	// q = n/d: the n-th turn of the basis angle π/d.
	d := q.Big().Denom()
	m := q.Big().Num()
	if !d.IsInt64() || d.Int64() > 1000 || !m.IsInt64() {
		return circle{}, fmt.Errorf("%w: cos or sin of %s pi", ErrOutside, q)
	}
	unit := Of(r.PiVar()).Scale(algebra.Frac64(1, d.Int64()))
	v, err := r.newAngle(unit)
	if err != nil {
		return circle{}, err
	}
	turns := m.Int64() % (2 * d.Int64())
	return r.turnPow(circle{Of(v), Of(r.symbols[v].Partner)}, int(turns))
}

// quadrant turns z by k right angles.
func (z circle) quadrant(k int) circle {
	for range k {
		z = circle{z.s.Neg(), z.c}
	}
	return z
}

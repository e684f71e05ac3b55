package limits

import (
	"math"

	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
)

// transition refuses a given profile that does not go from 0 to 1, or that
// jumps, as far as its values at some points show: at a jump the gradient is not
// continuous and the energy infinite, and its derivative does not know of it.
func (r *reader) transition(t source.Text, f func(s float64) float64) error {
	// One that is further away may tend to its ends slowly; then R², and with it
	// the energy, has no finite integral.
	for _, far := range []struct{ s, within float64 }{{-1e4, 1e-2}, {1e4, 1e-2}, {-1e12, 1e-5}, {1e12, 1e-5}} {
		want := (1 + math.Copysign(1, far.s)) / 2
		if v := f(far.s); !(math.Abs(v-want) <= far.within) {
			return r.fault(t, "it has to tend to 0 for s → -∞ and to 1 for s → ∞, faster than 1/sqrt(|s|) and without overflow", "the profile is %.4g at s = %g", v, far.s)
		}
	}
	const pieces, reach = 2001, 10
	left := math.Sinh(-reach)
	for i := 1; i <= pieces; i++ {
		right := math.Sinh(reach * (2*float64(i)/pieces - 1))
		if at, jumps := jump(f, left, right); jumps {
			return r.fault(t, "write a profile that is continuous: the energy of a jump is infinite", "the profile jumps, or has no value, near s = %.4g", at)
		}
		left = right
	}
	return nil
}

// jump looks for a place in an interval where a function changes by 1/1000 or
// has no value however short the interval about it is.
func jump(f func(float64) float64, a, b float64) (at float64, found bool) {
	fa, fb := f(a), f(b)
	for {
		if math.Abs(fb-fa) < 1e-3 {
			return 0, false
		}
		if b-a < 1e-13*(1+math.Abs(a)) {
			return a, true
		}
		m := a + 0.4871*(b-a) // not at the middle, where a formula may be 0/0
		fm := f(m)
		if math.Abs(fm-fa) < math.Abs(fb-fm) {
			a, fa = m, fm
		} else {
			b, fb = m, fm
		}
	}
}

// usual reports whether the energy is R²/(2 eps) + eps L²/2, by its values at a
// few jets in n coordinates. The program has the residual, the bending and the
// energy as its outputs, and eps after the coordinates among its inputs. What
// depends on it is only which parts of the energy are shown, and how a profile
// divides them.
func usual(p *program.Program, n int) bool {
	ws, out := p.NewWorkspace(), make([]float64, 3)
	values := make([]float64, p.NumInputs())
	for k := range 12 {
		for i := range values {
			_, f := math.Modf(0.618033988749895*float64((k+1)*(i+1)) + 0.1*float64(i))
			values[i] = 2*f - 1
		}
		eps := math.Abs(values[n]) + 0.1
		values[n] = eps
		p.Eval(ws, values, out)
		want := out[0]*out[0]/(2*eps) + eps*out[1]*out[1]/2
		if math.Abs(out[2]-want) > 1e-9*want {
			return false
		}
	}
	return true
}

package exact

import (
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// independent reports whether the kernels in some values are certainly
// algebraically independent but for their relations, so that a normal form
// that is not zero is not zero as a function: cosine and sine of free angles,
// and square roots of single primes or single indeterminates; instead of roots
// of primes, cosine and sine of a fraction of π, which may hold them. A linear system
// over such values has no solution only where elimination says so.
func (d *Problem) independent(fs ...algebra.Fraction) bool {
	turn, prime := false, false
	for _, k := range d.Ring.Kernels(fs...) {
		s := d.Ring.Symbol(k)
		switch s.Kind {
		case jet.Cosine, jet.Sine:
			if s.Degree > 0 || d.Ring.Symbol(s.Partner).Degree > 0 { // its minimal polynomial is known
				turn = true
				continue
			}
			if v, ok := LoneVar(s.Arg); !ok || d.Ring.Symbol(v).Kind != jet.Constant {
				return false
			}
		case jet.Root:
			if c, ok := s.Arg.IsConst(); ok {
				if n, ok := c.Int64(); ok && s.Degree == 2 && isPrime(n) {
					prime = true
					continue
				}
				return false
			}
			if v, ok := LoneVar(s.Arg); !ok || d.Ring.Symbol(v).Kind > jet.Derivative {
				return false
			}
		default:
			return false
		}
	}
	return !turn || !prime
}

func isPrime(n int64) bool {
	if n < 2 || n > 1_000_000 {
		return false
	}
	for p := int64(2); p*p <= n; p++ {
		if n%p == 0 {
			return false
		}
	}
	return true
}

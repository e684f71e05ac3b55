package jet

import "creaseproof/entropy/algebra"

// maxRelatedTurn bounds the n of the cosines of π/n that are reduced by their
// minimal polynomial, of degree φ(2n)/2. For larger n the normal forms may
// hide zeros.
const maxRelatedTurn = 60

// relateTurn gives c = cos(π/n) its minimal polynomial. For even n the sine is
// a polynomial in it: sin(π/n) = cos((n/2 - 1) π/n). For odd n it is of degree
// two over Q(c), and its square is 1 - c². Values in c and s are then zero only
// where their normal form is.
func (r *Ring) relateTurn(c algebra.Var, n int64) {
	if n > maxRelatedTurn || r.symbols[c].Degree > 0 {
		return
	}
	var value algebra.Poly
	psi := minimalOfCosine(int(2 * n))
	q := len(psi) - 1
	x := algebra.Variable(c)
	for k, a := range psi[:q] { // Σ a_k (2c)^k = 0
		two, _ := algebra.Int(2).Pow(k - q)
		value = value.Sub(x.Pow(k).Scale(algebra.Int(a).Mul(two)))
	}
	r.symbols[c].Degree, r.symbols[c].Value = q, value
	for i, v := range r.related {
		if v == r.symbols[c].Partner { // older than its sine
			r.related = append(r.related[:i:i], append([]algebra.Var{c}, r.related[i:]...)...)
			break
		}
	}
	if n%2 == 1 {
		return
	}
	s := &r.symbols[r.symbols[c].Partner]
	two := algebra.Int(2)
	last, next := algebra.Const(algebra.Int(1)), x // Chebyshev polynomials
	for range n/2 - 1 {
		last, next = next, x.Mul(next).Scale(two).Sub(last)
	}
	s.Degree, s.Value = 1, r.ReducePoly(last)
}

// minimalOfCosine is the minimal polynomial of 2 cos(2π/m), m > 2, by
// increasing powers: Ψ with Φ(z) = z^(deg Φ/2) Ψ(z + 1/z), Φ the cyclotomic
// polynomial of order m (Lehmer, A note on trigonometric algebraic numbers,
// American Mathematical Monthly 40 (1933), 165-166).
func minimalOfCosine(m int) []int64 {
	phi := cyclotomic(m)
	h := (len(phi) - 1) / 2
	out := make([]int64, h+1)
	// z^k + z^-k = V_k(z + 1/z), V_0 = 2, V_1 = x, V_{k+1} = x V_k - V_{k-1}.
	last, next := []int64{2}, []int64{0, 1}
	out[0] = phi[h]
	for k := 1; k <= h; k++ {
		for i, a := range next {
			out[i] += phi[h+k] * a
		}
		after := append([]int64{0}, next...)
		for i, a := range last {
			after[i] -= a
		}
		last, next = next, after
	}
	return out
}

// cyclotomic is the cyclotomic polynomial of order m, by increasing powers.
func cyclotomic(m int) []int64 {
	p := make([]int64, m+1)
	p[0], p[m] = -1, 1
	for d := 1; d < m; d++ {
		if m%d != 0 {
			continue
		}
		q := cyclotomic(d)
		n := len(q) - 1
		quo := make([]int64, len(p)-n)
		for k := len(quo) - 1; k >= 0; k-- {
			quo[k] = p[k+n] // q is monic
			for i, a := range q {
				p[k+i] -= quo[k] * a
			}
		}
		p = quo
	}
	return p
}

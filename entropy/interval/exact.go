package interval

import "math/big"

// signOfSum has the sign of the sum of v. The numbers are added one by one to
// an expansion of non-overlapping parts, whose largest part has the sign of the
// whole (J. R. Shewchuk, Discrete Comput. Geom. 18 (1997) 305–363, theorem 10).
func signOfSum(v [4]float64) float64 {
	var h [4]float64 // increasing in magnitude, zeros allowed
	for n, q := range v {
		for i := range n {
			q, h[i] = twoSum(q, h[i])
		}
		h[n] = q
	}
	for i := 3; i >= 0; i-- {
		if h[i] != 0 {
			return h[i]
		}
	}
	return 0
}

// exactSign returns the sign of a b + c - f by exact arithmetic.
func exactSign(a, b, c, f float64) int {
	t := new(big.Rat).SetFloat64(a)
	t.Mul(t, new(big.Rat).SetFloat64(b))
	t.Add(t, new(big.Rat).SetFloat64(c))
	t.Sub(t, new(big.Rat).SetFloat64(f))
	return t.Sign()
}

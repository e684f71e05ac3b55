package interval

import "math"

// Directed rounding without a rounding mode. An operation is rounded to nearest
// and the sign of its error, found by an error-free transformation, tells
// whether the neighbouring number is needed. Conversions float64(a*b) keep the
// compiler from fusing a product with a sum.

// up returns the least float64 above a finite x; +Inf above the largest.
func up(x float64) float64 {
	if x == 0 {
		return math.SmallestNonzeroFloat64
	}
	b := math.Float64bits(x)
	if x > 0 {
		return math.Float64frombits(b + 1)
	}
	return math.Float64frombits(b-1) + 0
}

// down returns the largest float64 below a finite x.
func down(x float64) float64 { return -up(-x) }

// twoSum returns s + e = a + b with s rounded to nearest, for finite s
// (O. Møller; D. E. Knuth, The Art of Computer Programming 2, 4.2.2, theorem B).
func twoSum(a, b float64) (s, e float64) {
	s = a + b
	t := s - a
	return s, (a - (s - t)) + (b - t)
}

// fastTwoSum is twoSum for |a| >= |b| or a = 0 (T. J. Dekker, Numer. Math. 18
// (1971) 224–242). Where a + b does not overflow, nothing does (S. Boldo,
// S. Graillat and J.-M. Muller, ACM Trans. Math. Softw. 44 (2017), article 4).
func fastTwoSum(a, b float64) (s, e float64) {
	s = a + b
	return s, b - (s - a)
}

// twoProd returns p + e = a b with p rounded to nearest, provided that p is
// finite and |p| >= 2^-969 or p = 0 exactly.
func twoProd(a, b float64) (p, e float64) {
	p = a * b
	return p, math.FMA(a, b, -p)
}

// addUp returns a + b rounded toward +Inf. Of infinite operands only +Inf
// occurs, or -Inf alone.
func addUp(a, b float64) float64 {
	if math.Abs(a) < math.Abs(b) {
		a, b = b, a
	}
	s, e := fastTwoSum(a, b)
	if s-s != 0 { // infinite
		if s < 0 && a != -inf && b != -inf {
			return -math.MaxFloat64
		}
		if s != s {
			return inf
		}
		return s
	}
	if e > 0 {
		return up(s)
	}
	return s
}

func addDown(a, b float64) float64 { return -addUp(-a, -b) }
func subUp(a, b float64) float64   { return addUp(a, -b) }
func subDown(a, b float64) float64 { return -addUp(-a, b) }

// safe is the magnitude from which the low part of a product or a remainder
// is no subnormal number.
const safe = 0x1p-900

// mulUp returns a b rounded toward +Inf, with 0 times anything 0.
func mulUp(a, b float64) float64 {
	p := a * b
	if math.Abs(p) >= safe && p-p == 0 {
		if math.FMA(a, b, -p) > 0 {
			return up(p)
		}
		return p
	}
	return mulUpRare(a, b, p)
}

func mulUpRare(a, b, p float64) float64 {
	switch {
	case a == 0 || b == 0:
		return 0
	case math.IsInf(p, 0):
		if p < 0 && !math.IsInf(a, 0) && !math.IsInf(b, 0) {
			return -math.MaxFloat64
		}
		return p
	case p == 0:
		if (a > 0) == (b > 0) {
			return math.SmallestNonzeroFloat64
		}
		return 0
	}
	// 2^-1075 <= |a b| < 2^-899. The smaller factor is below 2^-449, so that
	// scaling it and p by 2^537 is exact; a b has no bit below 2^-1181. The sign
	// of the fused operation is that of the exact error.
	if math.Abs(a) > math.Abs(b) {
		a, b = b, a
	}
	const scale = 0x1p537
	if math.FMA(a*scale, b, -(p*scale)) > 0 {
		return up(p)
	}
	return p
}

func mulDown(a, b float64) float64 { return -mulUp(-a, b) }

// divUp returns a/b rounded toward +Inf for b != 0, with 0 divided by anything
// 0; not both are infinite.
func divUp(a, b float64) float64 {
	q := a / b
	// a - q b has no bit below 2^-1007, so its sign is that of the result.
	if m := math.Abs(a); m >= safe && m < inf && math.Abs(b) < inf && q-q == 0 {
		if r := math.FMA(-q, b, a); r != 0 && (r > 0) == (b > 0) {
			return up(q)
		}
		return q
	}
	return divUpRare(a, b, q)
}

func divUpRare(a, b, q float64) float64 {
	switch {
	case a == 0 || math.IsInf(b, 0):
		return 0 // a/b for b to infinity: the bound 0 is the limit
	case math.IsInf(a, 0):
		return q
	case math.IsInf(q, 0):
		if q < 0 {
			return -math.MaxFloat64
		}
		return q
	case q == 0:
		if (a > 0) == (b > 0) {
			return math.SmallestNonzeroFloat64
		}
		return 0
	}
	// Compare q b with a by their significands: |q b/a| is between 1/2 and 2.
	fa, ea := math.Frexp(a)
	fb, eb := math.Frexp(b)
	fq, eq := math.Frexp(q)
	if r := math.FMA(-math.Ldexp(fq, eq+eb-ea), fb, fa); r != 0 && (r > 0) == (b > 0) {
		return up(q)
	}
	return q
}

func divDown(a, b float64) float64 { return -divUp(-a, b) }

// sqrtUp returns the root of a >= 0 rounded toward +Inf.
func sqrtUp(a float64) float64 {
	s := math.Sqrt(a)
	if rootError(a, s) > 0 {
		return up(s)
	}
	return s
}

// sqrtDown returns the root of a >= 0 rounded toward -Inf.
func sqrtDown(a float64) float64 {
	s := math.Sqrt(a)
	if rootError(a, s) < 0 {
		return down(s)
	}
	return s
}

// rootError has the sign of a - s^2, for s the rounded root of a.
func rootError(a, s float64) float64 {
	if a == 0 || a == inf {
		return 0
	}
	if a < safe {
		a *= 0x1p400
		s *= 0x1p200
	}
	return math.FMA(-s, s, a)
}

// scaleUp returns x 2^k rounded toward +Inf, for finite x.
func scaleUp(x float64, k int) float64 {
	v := math.Ldexp(x, k)
	switch {
	case v == inf || k >= 0 && v != -inf:
		return v
	case v == -inf:
		return -math.MaxFloat64
	case v == 0 && x > 0:
		return math.SmallestNonzeroFloat64
	case v == 0:
		return 0
	}
	if math.Ldexp(v, -k) < x { // exact: |v| is at most about |x|
		return up(v)
	}
	return v
}

func scaleDown(x float64, k int) float64 { return -scaleUp(-x, k) }

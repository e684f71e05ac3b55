package limit

import "math"

// exponent of the kernel (1 - |y|²)⁴ on the unit ball.
const exponent = 4

// scale is the factor that makes the integral of (1 - |y|²)^k over the unit
// ball of r dimensions 1.
func scale(r int, k float64) float64 {
	d := float64(r)
	num, _ := math.Lgamma(d/2 + k + 1)
	den, _ := math.Lgamma(k + 1)
	return math.Exp(num-den) / math.Pow(math.Pi, d/2)
}

// radial is the kernel c (1 - |y|²)^k in r dimensions. The kernel of n
// dimensions, integrated over n - r of them, is one with k = 4 + (n - r)/2.
type radial struct {
	k, c float64
	m    int // 2 k + 1, an integer
}

func newRadial(n, r int) radial {
	k := exponent + float64(n-r)/2
	return radial{k: k, c: scale(r, k), m: 2*exponent + n - r + 1}
}

// power is x^k for the k of the kernel, plus or minus a whole number.
func power(x, k float64) float64 {
	if x <= 0 {
		return 0
	}
	switch k {
	case 4:
		x *= x
		return x * x
	case 3:
		return x * x * x
	}
	return math.Pow(x, k)
}

// moments are the integrals of ρ, t ρ, ρ' and t ρ' along a line at the distance
// √(1 - h²) from the origin, where ρ = c (h² - t²)^k, ρ' = 2 k c (h² - t²)^(k-1).
type moments struct{ value, first, slope, moved float64 }

// along are the moments between t0 and t1, which lie in [-h, h].
func (k *radial) along(h, t0, t1 float64) (m moments) {
	if h <= 0 {
		return m
	}
	s0, s1 := math.Min(1, math.Max(-1, t0/h)), math.Min(1, math.Max(-1, t1/h))
	c0, c1 := math.Sqrt((1-s0)*(1+s0)), math.Sqrt((1-s1)*(1+s1))
	// ∫cos^j = cos^(j-1) sin/j + (j-1)/j ∫cos^(j-2), from j = 0 or 1.
	var less, now float64
	p0, p1 := 1.0, 1.0
	j := k.m % 2
	if j == 0 {
		now = math.Asin(s1) - math.Asin(s0)
		p0, p1 = c0, c1
	} else {
		now = s1 - s0
		p0, p1 = c0*c0, c1*c1
	}
	for j += 2; j <= k.m; j += 2 {
		less = now
		now = (p1*s1-p0*s0)/float64(j) + float64(j-1)/float64(j)*now
		p0, p1 = p0*c0*c0, p1*c1*c1
	}
	// p is cos^(m+1) = cos^(2k+2) now.
	q0, q1 := power(c0*c0, k.k), power(c1*c1, k.k)
	hk := math.Pow(h, 2*k.k-1)
	m.value = k.c * hk * h * h * now
	m.slope = 2 * k.k * k.c * hk * less
	m.moved = k.c * hk * h * (q0 - q1)
	m.first = k.c * hk * h * h * h * (p0 - p1) / (2*k.k + 2)
	return m
}

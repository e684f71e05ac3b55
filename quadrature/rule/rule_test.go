package rule

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

var all = map[int]*Kronrod{3: Kronrod7(), 7: Kronrod15(), 10: Kronrod21(), 15: Kronrod31()}

// Nodes and weights of Gauss–Legendre rules from the NIST Digital Library of
// Mathematical Functions, Tables 3.5.1 (n = 5) and 3.5.2 (n = 10).
var dlmf5 = [][2]float64{
	{0, 0.568888888888889},
	{0.538469310105683, 0.478628670499366},
	{0.906179845938664, 0.236926885056189},
}

var dlmf10 = [][2]float64{
	{0.148874338981631211, 0.295524224714752870},
	{0.433395394129247191, 0.269266719309996355},
	{0.679409568299024406, 0.219086362515982044},
	{0.865063366688984511, 0.149451349150580593},
	{0.973906528517171720, 0.066671344308688138},
}

// gonum gives the Gauss–Legendre rule of gonum in increasing order.
func gonum(n int) (x, w []float64) {
	x, w = make([]float64, n), make([]float64, n)
	quad.Legendre{}.FixedLocations(x, w, -1, 1)
	slices.Reverse(x)
	slices.Reverse(w)
	return x, w
}

func TestGaussTables(t *testing.T) {
	k := Kronrod21()
	i := len(k.X) / 2
	for _, e := range dlmf10 {
		for i++; k.Gauss[i] == 0; i++ {
		}
		if math.Abs(k.X[i]-e[0]) > 1e-16 || math.Abs(k.Gauss[i]-e[1]) > 1e-16 {
			t.Errorf("node %v, weight %v; the table has %v", k.X[i], k.Gauss[i], e)
		}
	}
	x, w := gonum(5)
	for j, e := range dlmf5 {
		if math.Abs(x[2+j]-e[0]) > 1e-15 || math.Abs(w[2+j]-e[1]) > 1e-15 {
			t.Errorf("node %v, weight %v; the table has %v", x[2+j], w[2+j], e)
		}
	}
}

func TestGaussAgainstGonum(t *testing.T) {
	for n, k := range all {
		x, w := gonum(n)
		j := 0
		for i := range k.X {
			if k.Gauss[i] == 0 {
				continue
			}
			if math.Abs(k.X[i]-x[j]) > 4e-16 || math.Abs(k.Gauss[i]-w[j]) > 4e-16 {
				t.Errorf("%d points: %v, %v against %v, %v", n, k.X[i], k.Gauss[i], x[j], w[j])
			}
			j++
		}
		if j != n {
			t.Errorf("%d Gauss nodes of %d", j, n)
		}
	}
}

// TestKronrodTables compares with the end nodes and weights printed in QUADPACK
// (routines qk15, qk21, qk31).
func TestKronrodTables(t *testing.T) {
	for n, e := range map[int][2]float64{
		7:  {0.991455371120812639206854697526329, 0.022935322010529224963732008058970},
		10: {0.995657163025808080735527280689003, 0.011694638867371874278064396062192},
		15: {0.998002298693397060285172840152271, 0.005377479872923348987792051430128},
	} {
		k := all[n]
		m := len(k.X) - 1
		if k.X[m] != e[0] || k.Weight[m] != e[1] {
			t.Errorf("%d: %v, %v, want %v", n, k.X[m], k.Weight[m], e)
		}
	}
}

func TestExactness(t *testing.T) {
	apply := func(x, w []float64, d int) float64 {
		var s float64
		for i := range x {
			s += w[i] * legendre(d, x[i])
		}
		return s
	}
	for n, k := range all {
		for _, r := range []struct {
			name   string
			w      []float64
			degree int
		}{{"Gauss", k.Gauss, 2*n - 1}, {"Kronrod", k.Weight, k.Degree}} {
			for d := 0; d <= r.degree; d++ {
				want := 0.0
				if d == 0 {
					want = 2
				}
				if got := apply(k.X, r.w, d); math.Abs(got-want) > 2e-15 {
					t.Errorf("%s %d, degree %d: %v", r.name, n, d, got)
				}
			}
			if got := apply(k.X, r.w, r.degree+1); math.Abs(got) < 1e-6 {
				t.Errorf("%s %d is exact beyond degree %d", r.name, n, r.degree)
			}
		}
	}
}

func TestCoefficients(t *testing.T) {
	for n, k := range all {
		if 2*k.High > k.Degree {
			t.Errorf("%d: coefficient %d is aliased", n, k.High)
		}
		for j, w := range k.Coefficient {
			if j > k.High {
				if w != nil {
					t.Errorf("%d: a coefficient of negative degree", n)
				}
				continue
			}
			for d := 0; d <= k.High; d++ {
				var s float64
				for i, x := range k.X {
					s += w[i] * (3 * legendre(d, x))
				}
				want := 0.0
				if d == k.High-j {
					want = 3
				}
				if math.Abs(s-want) > 1e-13 {
					t.Errorf("%d: coefficient %d of P_%d is %v", n, k.High-j, d, s)
				}
			}
		}
	}
}

func TestExtrapolation(t *testing.T) {
	for n, k := range all {
		var end, near float64
		for i, x := range k.X {
			end += k.End[i] * math.Exp(x)
			near += k.Near[i] * math.Exp(x)
		}
		bound := 1e-14
		if n == 3 { // seven nodes: the remainder is below e |Π (1 - x_i)|/7!
			bound = math.E / 5040
			for _, x := range k.X {
				bound *= 1 - x
			}
		}
		if math.Abs(end-math.E) > bound || math.Abs(near-math.Exp(1-k.Gap/NearFraction)) > bound {
			t.Errorf("%d: exp extrapolates to %v and %v", n, end, near)
		}
	}
}

func TestOrder(t *testing.T) {
	for n, k := range all {
		seen := make([]bool, len(k.X))
		last := 0.0
		for _, i := range k.Order {
			if seen[i] || math.Abs(k.X[i]) < last {
				t.Errorf("%d: order %v", n, k.Order)
			}
			seen[i], last = true, math.Abs(k.X[i])
		}
	}
}

func TestTanhSinh(t *testing.T) {
	for _, x := range []float64{0, 0.25, -0.5, 1} {
		d, w := TanhSinh(x)
		u := math.Pi / 2 * math.Sinh(math.Abs(x))
		if math.Abs(d-(1-math.Tanh(u))) > 1e-15 {
			t.Errorf("distance at %v is %v", x, d)
		}
		if want := math.Pi / 2 * math.Cosh(x) / math.Pow(math.Cosh(u), 2); math.Abs(w-want) > 1e-15 {
			t.Errorf("weight at %v is %v, want %v", x, w, want)
		}
	}
	// Far out 1 - tanh u = 2 exp(-2u) to all digits.
	d, _ := TanhSinh(4)
	if want := 2 * math.Exp(-math.Pi*math.Sinh(4)); math.Abs(d/want-1) > 1e-13 {
		t.Errorf("distance at 4 is %v, want %v", d, want)
	}
	var s float64
	for i := -100; i <= 100; i++ {
		_, w := TanhSinh(float64(i) / 20)
		s += w / 20
	}
	if math.Abs(s-2) > 1e-14 {
		t.Errorf("the weights add up to %v", s)
	}
}

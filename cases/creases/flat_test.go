package creases_test

import (
	"fmt"
	"math"
	"math/big"
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/claim"
	"creaseproof/quadrature/adaptive"
)

// fronts are n branches p x + q y + (p² + q²)/2 (z - 1) with (p, q) spread over
// the unit disc, in thousandths.
func fronts(n int) (list [][2]int64, text string) {
	var lines []string
	for k := range n {
		r, t := math.Sqrt((float64(k)+0.5)/float64(n)), 2.399963*float64(k)
		a := [2]int64{int64(math.Round(1000 * r * math.Cos(t))), int64(math.Round(1000 * r * math.Sin(t)))}
		list = append(list, a)
		lines = append(lines, fmt.Sprintf(`"(%d/1000) x + (%d/1000) y + (%s) (z - 1)"`, a[0], a[1], big.NewRat(a[0]*a[0]+a[1]*a[1], 2000000)))
	}
	return list, "branches = [" + strings.Join(lines, ", ") + "]\ncombine = \"max\"\n"
}

// sliced is the energy of the maximum of fronts in a domain whose section at
// height z is the disc of radius rho(z), by horizontal slices: |a_i - a_j|³/12
// times the length of where the two are equal and the largest, integrated in z.
// That needs no polygons, areas or normals.
func sliced(t *testing.T, list [][2]int64, lo, hi float64, rho func(z float64) float64) (sum float64) {
	t.Helper()
	at := func(k int) (p, q, c float64) {
		p, q = float64(list[k][0])/1000, float64(list[k][1])/1000
		return p, q, (p*p + q*q) / 2
	}
	for i := range list {
		for j := range i {
			p, q, c := at(i)
			v, w, d := at(j)
			p, q, c = p-v, q-w, c-d
			n := math.Hypot(p, q)
			length := func(z float64) float64 {
				// The line p x + q y + c (z - 1) = 0 in the disc.
				off := -c * (z - 1) / n
				h := rho(z)*rho(z) - off*off
				if h <= 0 {
					return 0
				}
				from, to := -math.Sqrt(h), math.Sqrt(h)
				for k := range list {
					if k == i || k == j {
						continue
					}
					r, s, e := at(k)
					r, s, e = v-r, w-s, d-e
					// The pair is above branch k where value + slope t >= 0.
					value, slope := (r*p+s*q)/n*off+e*(z-1), (s*p-r*q)/n
					switch {
					case slope > 0:
						from = max(from, -value/slope)
					case slope < 0:
						to = min(to, -value/slope)
					case value < 0:
						return 0
					}
					if from >= to {
						return 0
					}
				}
				return to - from
			}
			any := false
			for m := range 4000 {
				any = any || length(lo+(hi-lo)*(float64(m)+0.5)/4000) > 0
			}
			if !any {
				continue
			}
			const parts = 128
			for m := range parts {
				x, _, _, _ := adaptive.Integrate(t.Context(), length, lo+(hi-lo)*float64(m)/parts, lo+(hi-lo)*float64(m+1)/parts, 1e-11, 20000)
				sum += n * n * n / 12 * x
			}
		}
	}
	return sum
}

func TestManyFrontsInRoundDomains(t *testing.T) {
	list, text := fronts(24)
	r := one(t, layeredHead+text+`cylinder = { center = ["0", "0"], radius = "1", heights = ["0", "2"] }
`)
	require.NotNil(t, r.Energy, r.Reason)
	assert.InEpsilon(t, sliced(t, list, 0, 2, func(float64) float64 { return 1 }), *r.Energy, 1e-9)
	assert.Less(t, *r.Error, 1e-13**r.Energy)
	sheets(t, r)
	r = one(t, layeredHead+text+`ball = { center = ["0", "0", "1/2"], radius = "3/2" }
`)
	require.NotNil(t, r.Energy, r.Reason)
	ball := func(z float64) float64 { return math.Sqrt(max(0, 2.25-(z-0.5)*(z-0.5))) }
	assert.InEpsilon(t, sliced(t, list, -1, 2, ball), *r.Energy, 1e-9)
	sheets(t, r)
	if testing.Short() {
		return
	}
	// The axis of a cylinder along x: the general method on fewer.
	_, text = fronts(5)
	const domain = `cylinder = { axis = "x", center = ["1/10", "1/2"], radius = "3/4", heights = ["-1/2", "1"] }
`
	fast := one(t, layeredHead+text+domain)
	slow := one(t, layeredHead+text+domain+"density = \"norm([u_x], [u_y])^3/12*norm(nu_x, nu_y) + 0 x\"\n")
	require.NotNil(t, fast.Energy, fast.Reason)
	require.NotNil(t, slow.Energy, slow.Reason)
	assert.InEpsilon(t, *slow.Energy, *fast.Energy, 1e-9)
	assert.Less(t, fast.Evaluations, 20)
	assert.InEpsilon(t, *slow.Area, *fast.Area, 1e-8)
}

// Coefficients, ends and densities that are not rational.
func TestFrontsWithoutRationalNumbers(t *testing.T) {
	var lines []string
	for k := range 24 {
		lines = append(lines, fmt.Sprintf(`"cos(%d pi/24) x + sin(%d pi/24) y + z/2"`, 2*k, 2*k))
	}
	r := one(t, layeredHead+"branches = ["+strings.Join(lines, ", ")+`]
combine = "max"
cylinder = { center = ["0", "0"], radius = "sqrt(2)", heights = ["0", "pi"] }
energy = "24*(2 sin(pi/24))^3/12*sqrt(2) pi"
`)
	assert.Equal(t, claim.Supported, r.Verdict, r.Reason)
	assert.Len(t, r.Pairs, 24)
	// Three times the same difference, none of it rational: the middle one does
	// not matter, and no rounding may put it between the others.
	r = one(t, layeredHead+`branches = ["0", "sqrt(2) x + sqrt(3) y + (5/2) z", "3 sqrt(2) x + 3 sqrt(3) y + (45/2) z"]
combine = "max"
box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "pi"] }
`)
	require.NotNil(t, r.Energy, r.Reason)
	const plain = `[space]
coordinates = ["x", "y"]
unknowns = ["u"]
[[surface]]
name = "s"
density = "norm([u_x], [u_y])^3"
branches = ["0", "sqrt(2) x + sqrt(3) y", "3 sqrt(2) x + 3 sqrt(3) y"]
combine = "max"
`
	r = one(t, plain+`box = { x = ["-1", "1"], y = ["-1", "1"] }
`)
	require.NotNil(t, r.Energy, r.Reason)
	assert.InEpsilon(t, math.Pow(45, 1.5)*2*math.Sqrt(5./3), *r.Energy, 1e-9)
	assert.Len(t, r.Pairs, 1)
	r = one(t, plain+`ball = { center = ["0", "0"], radius = "2" }
`)
	require.NotNil(t, r.Energy, r.Reason)
	assert.InEpsilon(t, math.Pow(45, 1.5)*4, *r.Energy, 1e-9)
}

// A crease in the boundary of the domain is refused, whatever the domain and
// the numbers; one next to it is not.
func TestCreasesInTheBoundary(t *testing.T) {
	const pair = "branches = [\"x + z/2\", \"-x + z/2\"]\ncombine = \"max\"\n"
	const curved = "branches = [\"x + z/2\", \"-x + z/2\"]\ncombine = \"max\"\ndensity = \"1 + y^2\"\n"
	const level = "level = \"x (4 + y^2 + z^2)\"\ndensity = \"1\"\n"
	for _, surface := range []string{pair, curved, level} {
		for _, domain := range []string{
			`box = { x = ["0", "2"], y = ["-3", "3"], z = ["0", "1"] }`,
			`box = { x = ["0", "2"], y = ["-pi", "pi"], z = ["0", "1"] }`,
			`box = { x = ["-pi", "0"], y = ["-pi", "1"], z = ["0", "1"] }`,
			`cylinder = { axis = "x", center = ["0", "1/2"], radius = "1", heights = ["0", "1"] }`,
			`cylinder = { axis = "x", center = ["0", "1/2"], radius = "pi", heights = ["-sqrt(2)", "0"] }`,
		} {
			r := one(t, layeredHead+surface+domain+"\n")
			assert.Equal(t, claim.Open, r.Verdict, surface+domain)
			assert.Nil(t, r.Energy, surface+domain)
			assert.Contains(t, r.Reason, "along the boundary of the domain", surface+domain)
		}
		r := one(t, layeredHead+surface+"box = { x = [\"-1/1000000\", \"2\"], y = [\"-pi\", \"pi\"], z = [\"0\", \"1\"] }\n")
		require.NotNil(t, r.Energy, surface+r.Reason)
		assert.InEpsilon(t, 2*math.Pi, *r.Area, 1e-9)
	}
	// Ends that are equal and not written alike.
	for _, x := range []string{`"3 pi", "10"`, `"1", "pi + 2 pi"`} {
		r := one(t, layeredHead+"branches = [\"x - 3 pi + z/2\", \"-x + pi*3 + z/2\"]\ncombine = \"max\"\nbox = { x = ["+x+"], y = [\"-1\", \"1\"], z = [\"0\", \"1\"] }\n")
		assert.Nil(t, r.Energy)
		assert.Contains(t, r.Reason, "along the boundary of the domain, where x = ")
	}
	// Where another branch is the maximum there is none in the boundary.
	r := one(t, layeredHead+`branches = ["x + z/2", "-x + z/2", "z/2 + y/1000 + 1"]
combine = "max"
box = { x = ["0", "1/2"], y = ["-3", "pi"], z = ["0", "1"] }
`)
	require.Equal(t, claim.Open, r.Verdict) // off the well
	assert.Contains(t, r.Reason, "branch 3")
}

// Affine sheets are connected parts: what the order of the cuts leaves in pieces
// is one sheet, and what another branch separates several.
func TestAffineSheetsAreConnected(t *testing.T) {
	const walls = `branches = ["x + z/2", "-x + z/2", "2 y + 2 z - 3", "-2 y + 2 z - 3"]
combine = "%s"
%s
`
	const box = `box = { x = ["-1", "1"], y = ["-1", "1"], z = ["0", "1"] }`
	const cylinder = `cylinder = { center = ["0", "0"], radius = "1", heights = ["0", "1"] }`
	of := func(combine, domain string) []int {
		r := one(t, layeredHead+fmt.Sprintf(walls, combine, domain))
		require.NotNil(t, r.Energy, r.Reason)
		var counts []int
		total := 0.0
		for _, p := range r.Pairs {
			counts = append(counts, len(p.Sheets))
			for _, s := range p.Sheets {
				total += s.Energy
				if strings.HasPrefix(domain, "box") {
					assert.NotEqual(t, s.Vertices == nil, s.Polygons == nil)
					assert.NotEmpty(t, s.SquaredArea)
				}
			}
		}
		assert.InEpsilon(t, *r.Energy, total, 1e-14)
		return counts
	}
	// The third and the fourth cut the pair 1, 2 without a consequence.
	for _, domain := range []string{box, cylinder} {
		assert.Equal(t, 1, slices.Max(of("max(min(3, 4), 1, 2)", domain)[:1]), domain)
	}
}

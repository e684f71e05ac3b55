package creases_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity"
)

// A motion is a rotation about z by a rational angle, a shift, and a Galilean
// map, none of which changes an energy of the layered model.
type motion struct{ c, s, x0, y0, a, b string }

func randomMotion(r *rand.Rand) motion {
	triples := [][3]int{{3, 4, 5}, {5, 12, 13}, {-8, 15, 17}, {20, -21, 29}, {1, 0, 1}}
	t := triples[r.IntN(len(triples))]
	q := func() string { return fmt.Sprintf("(%d/%d)", r.IntN(9)-4, 1+r.IntN(5)) }
	return motion{fmt.Sprintf("(%d/%d)", t[0], t[2]), fmt.Sprintf("(%d/%d)", t[1], t[2]), q(), q(), q(), q()}
}

// back are the coordinates before the motion, as formulas in x, y, z.
func (m motion) back() (x, y string) {
	u := fmt.Sprintf("(x + %s z - %s)", m.a, m.x0)
	v := fmt.Sprintf("(y + %s z - %s)", m.b, m.y0)
	return fmt.Sprintf("(%s %s + %s %s)", m.c, u, m.s, v), fmt.Sprintf("(%s %s - %s %s)", m.c, v, m.s, u)
}

// u is a trace after the motion; X and Y stand for the coordinates before.
func (m motion) u(trace string) string {
	x, y := m.back()
	moved := strings.NewReplacer("X", x, "Y", y).Replace(trace)
	return fmt.Sprintf("%s + %s x + %s y + (%s^2 + %s^2) z/2", moved, m.a, m.b, m.a, m.b)
}

// patch is the image of a point.
func (m motion) patch(x, y, z string) string {
	return fmt.Sprintf(`["%s (%s) - %s (%s) + %s - %s (%s)", "%s (%s) + %s (%s) + %s - %s (%s)", "%s"]`,
		m.c, x, m.s, y, m.x0, m.a, z, m.s, x, m.c, y, m.y0, m.b, z, z)
}

// Closed forms with random parameters, moved at random: within 1e-10 and
// within the reported error.
func TestRandomClosedForms(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	over := `, over = { t = ["%s", "%s"], a = ["0", "2 pi"] } }`
	for range 25 {
		k, t0 := fmt.Sprintf("(%d/12)", 5+r.IntN(30)), fmt.Sprintf("%d/12", 3+r.IntN(20))
		t1 := fmt.Sprintf("%s + %d/12", t0, 1+r.IntN(40))
		c := fmt.Sprintf("(%d/7)", 1+r.IntN(20))
		m1, m2 := fmt.Sprintf("(%d/12)", 13+r.IntN(24)), fmt.Sprintf("(%d/12)", r.IntN(24)-12)
		m := randomMotion(r)
		for _, s := range []string{
			fmt.Sprintf(`plus = "%s"
minus = "%s"
patch = { map = %s`+over+`
energy = "(2 pi %s^2/3) log((%s)/(%s))"
`, m.u("-(X^2 + Y^2)/(2 z)"), m.u("-"+k), m.patch("sqrt(2*"+k+" t) cos(a)", "sqrt(2*"+k+" t) sin(a)", "t"), t0, t1, k, t1, t0),
			fmt.Sprintf(`plus = "%s"
minus = "%s"
patch = { map = %s`+over+`
energy = "(2 pi %s^2/3) log((%s) (%s + %s)/((%s) (%s + %s)))"
`, m.u("-(X^2 + Y^2)/(2 z)"), m.u("-(X^2 + Y^2)/(2 (z + "+c+")) - "+k),
				m.patch("sqrt(2*"+k+" t (t + "+c+")/"+c+") cos(a)", "sqrt(2*"+k+" t (t + "+c+")/"+c+") sin(a)", "t"), t0, t1, k, t1, t0, c, t0, t1, c),
			fmt.Sprintf(`plus = "%s"
minus = "%s"
patch = { map = %s`+over+`
energy = "pi abs(%s - %s)^3 (%s + %s) (%s)^2/24"
`, m.u(m1+" sqrt(X^2 + Y^2) + "+m1+"^2 z/2"), m.u(m2+" sqrt(X^2 + Y^2) + "+m2+"^2 z/2"),
				m.patch("-("+m1+" + "+m2+") (t/2) cos(a)", "-("+m1+" + "+m2+") (t/2) sin(a)", "t"), "-("+t0+")", "0", m1, m2, m1, m2, t0),
		} {
			res := one(t, layeredHead+s)
			require.NotNil(t, res.Energy, "%s: %s", s, res.Reason)
			off := math.Abs(*res.Energy - *res.Claimed)
			assert.LessOrEqual(t, off, 1e-10*math.Abs(*res.Claimed), s)
			assert.LessOrEqual(t, off, *res.Error+4e-15*math.Abs(*res.Claimed), s)
			assert.Equal(t, identity.Supported, res.Verdict, res.Reason)
		}
	}
}

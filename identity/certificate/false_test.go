package certificate_test

import (
	"testing"

	"creaseproof/identity/certificate"

	"github.com/stretchr/testify/assert"
)

func TestValid(t *testing.T) {
	for name, q := range valid() {
		assert.NoError(t, certificate.Check(q.Claim, q.Certificate), name)
	}
}

// Nothing below is true; in most, the identity is, and what fails is a rule
// without which the identity would prove nothing.
func TestFalseClaims(t *testing.T) {
	minus := func(positive ...string) *certificate.Claim { return with(claim("x y c s t", "-1"), positive...) }
	cert := func(multiplier list, squares list, cofactors ...string) *certificate.Certificate {
		return &certificate.Certificate{Multiplier: multiplier, Squares: squares, Cofactors: polys(cofactors...)}
	}
	m := func(base string, factors ...int) list { return list{square("1", base, factors...)} }
	deep := &certificate.Certificate{}
	deep.Squaring = &certificate.Squaring{Right: p("1"), Proof: deep}

	for name, q := range map[string]problem{
		"no proof":                              {minus(), cert(nil, nil)},
		"a negative weight":                     {minus(), cert(nil, list{square("-1", "1")})},
		"a weight of zero":                      {claim("x", ""), cert(nil, list{square("0", "x")})},
		"the square of zero":                    {claim("x", ""), cert(nil, list{square("1", "")})},
		"a multiplier of zero":                  {minus(), cert(list{square("1", "")}, nil)},
		"a multiplier that is cancelled":        {minus(), cert(list{square("1", "x"), square("-1", "x")}, nil)},
		"an assumption that is not there":       {minus(), cert(nil, m("1", 0))},
		"a negative index":                      {minus("x"), cert(nil, m("1", -1))},
		"an equation that is not there":         {minus(), cert(nil, nil, "1")},
		"a cofactor that is missing":            {where(minus(), "x"), cert(nil, nil)},
		"one cofactor too many":                 {where(minus(), "x"), cert(nil, nil, "", "1")},
		"zero on the circle":                    {where(minus(), "c^2 + s^2 - 1"), cert(m("c^2 + s^2 - 1"), nil, "-c^2 - s^2 + 1")},
		"zero on the circle, higher":            {where(minus(), "c^2 + s^2 - 1"), cert(m("s^3 - s + s c^2"), nil, "-s^4 - s^2 c^2 + s^2")},
		"on one point of a line":                {where(minus(), "x"), cert(m("x"), nil, "-x")},
		"on a cross":                            {where(claim("x y", "-x^2"), "x y"), cert(m("y"), nil, "-x y")},
		"on an empty circle":                    {where(minus(), "c^2 + s^2"), cert(m("c"), m("s"), "-1")},
		"on a hyperbola":                        {where(claim("c s", "s^2 - c^2"), "c^2 - s^2 - 1"), cert(m("c"), m("1"), "-c^2 - 1")},
		"two circles share a variable":          {where(minus(), "c^2 + s^2 - 1", "c^2 + t^2 - 1"), cert(m("s^2 - t^2"), nil, "-s^2 + t^2", "s^2 - t^2")},
		"one circle twice":                      {where(minus(), "c^2 + s^2 - 1", "c^2 + s^2 - 1"), cert(m("c^2 + s^2 - 1"), nil, "-c^2 - s^2 + 1", "")},
		"a bound on a circle":                   {where(minus("c - 1"), "c^2 + s^2 - 1"), cert(m("s"), list{square("1", "c - 1"), square("2", "1", 0)}, "-1")},
		"bounds that meet":                      {minus("x", "-x"), cert(m("x"), m("1", 0, 1))},
		"scaled bounds that meet":               {minus("2 x - 2", "3 - 3 x"), cert(m("x - 1"), list{square("1/6", "1", 0, 1)})},
		"a set without interior":                {minus("-x^2"), cert(m("x"), m("1", 0))},
		"a set without interior, two unknown":   {minus("-x^2 + 2 x y - y^2"), cert(m("x - y"), m("1", 0))},
		"an isolated point":                     {with(claim("x y", "x - 1"), "x^3 - x^2"), cert(m("x"), m("1", 0))},
		"a multiplier that an assumption hides": {minus("-x^2"), cert(list{square("1", "1", 0)}, list{square("1", "x")})},
		"an assumption without variables":       {minus("0"), cert(m("1", 0), nil)},
		"a squaring without proof":              {minus(), &certificate.Certificate{Squaring: &certificate.Squaring{Right: p("1")}}},
		"a squaring of itself":                  {minus(), deep},
		"a squaring of a negative side": {minus(), &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: list{square("-2", "1")}, Right: p("-1"), Proof: cert(nil, list{square("3", "1")})}}},
		"a squaring of other sides": {minus(), &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: list{square("2", "1")}, Right: p("1"), Proof: cert(nil, list{square("3", "1")})}}},
		"a squaring the wrong way round": {minus(), &certificate.Certificate{Squaring: &certificate.Squaring{
			Left: list{square("1", "1")}, Right: p("2"), Proof: cert(nil, list{square("3", "1")})}}},
		"a squaring beside squares": {minus(), &certificate.Certificate{Squares: list{square("1", "1")}, Squaring: &certificate.Squaring{
			Left: list{square("2", "1")}, Right: p("3"), Proof: cert(nil, nil)}}},
		"a squaring with a multiplier that vanishes": {where(minus(), "x"), &certificate.Certificate{Squaring: &certificate.Squaring{
			Right: p("1"), Cofactors: polys(""), Proof: cert(m("x"), nil, "-x")}}},
		"an unknown variable":        {claim("x", "y^2"), cert(nil, m("y"))},
		"an empty name":              {&certificate.Claim{Variables: []string{""}}, cert(nil, nil)},
		"a name twice":               {claim("x x", "x^2"), cert(nil, m("x"))},
		"an exponent of zero":        {&certificate.Claim{Variables: []string{"x"}, Target: poly{{C: "1", M: map[string]int{"x": 0}}}}, cert(nil, m("1"))},
		"a negative exponent":        {&certificate.Claim{Variables: []string{"x"}, Target: poly{{C: "1", M: map[string]int{"x": -2}}}}, cert(nil, m("x^-1"))},
		"a monomial twice":           {claim("x", "x^2 + x^2"), cert(nil, list{square("2", "x")})},
		"a coefficient of zero":      {claim("x", "x^2 + 0 x"), cert(nil, m("x"))},
		"no certificate":             {minus(), nil},
		"no claim":                   {nil, cert(nil, nil)},
		"strict, but only the other": {minus("> y", "-x^2"), cert(list{square("1", "1", 0, 1)}, nil)},
	} {
		assert.Error(t, certificate.Check(q.Claim, q.Certificate), name)
	}
	// Each of these is stopped by the rule alone: without it they are identities.
	for name, q := range map[string]problem{
		"bounds with room":  {with(claim("x", "x^2 - x^3"), "x", "1 - x"), cert(m("x"), m("x^2", 1))},
		"circles apart":     {where(claim("c s t x", "t^2"), "c^2 + s^2 - 1", "t^2 + x^2 - 1"), cert(m("s"), m("s t"), "", "")},
		"a strict factor":   {with(claim("x y", "y^2"), "> x", "-y^2 + 4"), cert(m("1", 0), m("y", 0))},
		"an open set":       {with(claim("x y", "y^2"), "> 1 - x^2 - y^2"), cert(m("x"), m("x y"))},
		"an impossible set": {with(claim("x", "-1"), "> -x^2"), cert(m("1", 0), list{square("1", "x")})},
		"zero":              {claim("", ""), cert(nil, nil)},
	} {
		assert.NoError(t, certificate.Check(q.Claim, q.Certificate), name)
	}
}

func TestNumbers(t *testing.T) {
	target := func(number string) error {
		c := &certificate.Claim{Target: poly{{C: number}}}
		return certificate.Check(c, &certificate.Certificate{Squares: list{{Weight: number, Base: p("1")}}})
	}
	for _, good := range []string{"1", "3/2", "10/4", "123456789012345678901234567890", "7/1", "10/20"} {
		assert.NoError(t, target(good), good)
	}
	for _, bad := range []string{
		"", "-", "/", "1/", "/2", "+1", "--1", "- 1", " 1", "1 ", "1\n", "1e3", "1E3", "0x10", "0b1", "0o7", "1_000", "1.5", ".5", "1.",
		"01", "010/1", "1/02", "1/0", "1/-2", "-1/-2", "1//2", "1/2/3", "١", "１", "½", "Inf", "NaN", "inf", "1p2", "1/2e3", "0/1", "-0", "0", "00",
	} {
		assert.Error(t, target(bad), bad)
	}
	// The value is the decimal one.
	c := &certificate.Claim{Target: poly{{C: "10/4"}}}
	assert.NoError(t, certificate.Check(c, &certificate.Certificate{Squares: list{{Weight: "5/2", Base: p("1")}}}))
	assert.Error(t, certificate.Check(c, &certificate.Certificate{Squares: list{{Weight: "2", Base: p("1")}}}))
}

func TestUsesContinuity(t *testing.T) {
	want := map[string]bool{"Motzkin": true, "multiplier that may vanish": true, "multiplier on a circle": true, "multiplier, cofactor": true}
	for name, q := range valid() {
		assert.Equal(t, want[name], certificate.UsesContinuity(q.Claim, q.Certificate), name)
	}
}

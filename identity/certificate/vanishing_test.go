package certificate_test

import (
	"testing"

	"creaseproof/identity/certificate"

	"github.com/stretchr/testify/assert"
)

// A multiplier may vanish where the identity makes the target vanish as well.
func TestMultiplierThatVanishesWithTheTarget(t *testing.T) {
	cert := func(multiplier, squares list, cofactors ...string) *certificate.Certificate {
		return &certificate.Certificate{Multiplier: multiplier, Squares: squares, Cofactors: polys(cofactors...)}
	}
	for name, q := range map[string]problem{
		"a cube":             {with(claim("x", "x"), "x^3"), cert(list{square("1", "1", 0)}, list{square("1", "x^2")})},
		"a multiple":         {with(claim("x", "2 x"), "x^3"), cert(list{square("1", "1", 0)}, list{square("2", "x^2")})},
		"a fifth power":      {with(claim("x", "x"), "x^5"), cert(list{square("1", "1", 0)}, list{square("1", "x^3")})},
		"squares compared":   {with(claim("x y", "x - y"), "x^2 - y^2", "x"), cert(list{square("2", "1", 1)}, list{square("1", "1", 0), square("1", "x - y")})},
		"the target negated": {with(claim("x y", "x - y"), "x^2 - y^2", "x"), cert(list{square("2", "1", 1)}, list{square("1", "1", 0), square("1", "y - x")})},
	} {
		assert.NoError(t, certificate.Check(q.Claim, q.Certificate), name)
		assert.Equal(t, certificate.WithTarget, certificate.WhereMultiplierVanishes(q.Claim, q.Certificate), name)
		assert.False(t, certificate.UsesContinuity(q.Claim, q.Certificate), name)
	}
	// All of these identities hold, and none of the claims is true.
	for name, q := range map[string]problem{
		"the square of something else":     {with(claim("x", "-1"), "-x^2"), cert(list{square("1", "x")}, list{square("1", "1", 0)})},
		"an isolated point":                {with(claim("x y", "x - 1"), "x^3 - x^2"), cert(list{square("1", "x")}, list{square("1", "1", 0)})},
		"the square times an assumption":   {where(with(claim("x y", "x"), "y"), "x y"), cert(list{square("1", "1", 0)}, list{square("1", "x", 0)}, "1 - x")},
		"a factor of the target":           {where(claim("x y", "x y - y"), "x"), cert(list{square("1", "x")}, list{square("1", "x")}, "x^2 y - x y - x")},
		"a square beside a negative":       {claim("x", "x"), cert(list{square("1", "x")}, list{square("1", "x"), square("-1", "x")})},
		"an odd power of a square":         {claim("x", "-x^2"), cert(list{square("1", "x")}, list{square("-1", "x^2")})},
		"the target up to one coefficient": {where(claim("x y", "x - 2 y"), "y", "x"), cert(list{square("1", "x")}, list{square("1", "x - y")}, "2 x - y - 2 x^2", "x^2 - x")},
	} {
		assert.Error(t, certificate.Check(q.Claim, q.Certificate), name)
	}
}

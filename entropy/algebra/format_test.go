package algebra

import (
	"testing"

	"github.com/stretchr/testify/assert"
)

func TestStrings(t *testing.T) {
	x, y, z := Variable(0), Variable(1), Variable(2)
	one := Const(Int(1))
	name := func(v Var) string { return []string{"u_x", "u_y", "eps"}[v] }
	for want, p := range map[string]Poly{
		"0":                                {},
		"-3/4":                             Const(Frac64(-3, 4)),
		"u_x":                              x,
		"-u_x":                             x.Neg(),
		"3/2*u_x^2 u_y - eps + 1":          x.Pow(2).Mul(y).Scale(Frac64(3, 2)).Sub(z).Add(one),
		"-2 u_x u_y - 1/3*eps - 5":         x.Mul(y).Scale(Int(-2)).Sub(z.Scale(Frac64(1, 3))).Sub(Const(Int(5))),
		"u_x^2 + 2 u_x u_y + u_y^2":        x.Add(y).Pow(2),
		"-9223372036854775808 u_x":         x.Scale(Int(-1 << 63)),
		"18446744073709551616 u_y^2 + u_x": y.Pow(2).Scale(Int(1 << 32)).Scale(Int(1 << 32)).Add(x),
	} {
		assert.Equal(t, want, p.String(name))
	}
	inv := func(p Poly) Fraction { f, _ := FromPoly(p).Inv(); return f }
	for want, f := range map[string]Fraction{
		"0":                     {},
		"1/eps":                 inv(z),
		"1/2*u_x/eps":           inv(z.Scale(Int(2))).Mul(FromPoly(x)),
		"(u_x + 1)/eps^2":       inv(z.Pow(2)).Mul(FromPoly(x.Add(one))),
		"-1/(u_x^2 + 1)":        inv(x.Pow(2).Add(one)).Neg(),
		"u_y/(u_x (u_x + 1)^2)": inv(x.Mul(x.Add(one).Pow(2))).Mul(FromPoly(y)),
	} {
		assert.Equal(t, want, f.String(name))
	}
}

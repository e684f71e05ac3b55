package statement

import (
	"creaseproof/entropy/jet"
	"creaseproof/identity/exact"
)

const originUnknown = "The formula that is not negative is that of the certificate: the gap between the sides times something positive, in the variables to which the claim is reduced."

// origin says by which factor the gap became the target of its certificate.
func origin(d *exact.Problem, g *exact.Gap) string {
	f, ok := jet.Whole(1).Quo(g.Factor)
	if !ok {
		return originUnknown
	}
	s := "The formula that is not negative is the gap between the sides"
	if one := jet.Whole(1); !f.Equal(one) {
		s += ", multiplied by " + d.Ring.Format(f)
	}
	if g.Turned != nil {
		s += ", at frame angle 0"
	}
	return s + "."
}

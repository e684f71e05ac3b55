package creases

import (
	"math/big"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/claim"
)

func rational(t testing.TB, s string) *big.Rat {
	t.Helper()
	x, ok := new(big.Rat).SetString(s)
	require.True(t, ok, s)
	return x
}

// What an enclosure [lo, hi] of the energy says of a claim: at the tolerance
// itself, across it, and where claimed value or energy are below every float64.
func TestClaimAgainstEnclosure(t *testing.T) {
	const none = ""
	for _, c := range []struct {
		name, least, most, lo, hi, within string
		want                              claim.Verdict
	}{
		{"at the tolerance", "1000/1001", "1000/1001", "1", "1", "1/1000", claim.Proved},
		{"at the tolerance from above", "1000/999", "1000/999", "1", "1", "1/1000", claim.Proved},
		{"beyond it by 10^-30", "1000/1001", "1000/1001", "1", "1", "1/1000 - 1/10^30", claim.Refuted},
		{"the energy beyond it by 10^-30", "1000/1001", "1000/1001", "1", "1.000000000000000000000000000001", "1/1000", none},
		{"negative", "-1000/1001", "-1000/1001", "-1", "-1", "1/1000", claim.Proved},
		{"negative, beyond", "-1000/1001", "-1000/1001", "-1.01", "-1.001", "1/1000", claim.Refuted},
		{"of the other sign", "1", "1", "-1", "-1", "1/1000", claim.Refuted},
		{"across the tolerance, beside the claim", "1", "1", "1.0005", "1.0015", "1/1000", none},
		{"across the tolerance, around the claim", "1", "1", "0.5", "1.5", "1/1000", none},
		{"wide and beside the claim", "1", "1", "1.0005", "1.0015", none, claim.Refuted},
		{"around the claim", "1", "1", "0.9999999999", "1.0000000001", none, claim.Proved},
		{"around the claim, too wide", "1", "1", "0.9", "1.1", none, none},
		{"touching the claim", "1", "1", "1", "1.0000000001", none, claim.Proved},
		{"touching the enclosed claim", "0.99", "1", "1", "1", none, none},
		{"zero", "0", "0", "-1e-10", "1e-10", none, claim.Proved},
		{"zero, absolute", "0", "0", "1e-5", "1e-4", "1/1000", claim.Proved},
		{"zero, missed", "0", "0", "1e-10", "1e-10", none, claim.Refuted},
		{"hardly zero", "-1e-60", "1e-60", "0", "0", none, none},
		{"below every float64", "1e-400", "1e-400", "0", "1e-320", none, none},
		{"below every float64, within", "1e-400", "1e-400", "0", "1e-320", "1/1000", none},
		{"below every float64, missed", "1e-400", "1e-400", "1e-320", "2e-320", none, claim.Refuted},
		{"hardly above zero", "1e-60", "2e-60", "1e-30", "2e-30", "1/1000", claim.Refuted},
	} {
		var within *big.Rat
		switch c.within {
		case none:
		case "1/1000 - 1/10^30":
			within = new(big.Rat).Sub(rational(t, "1/1000"), rational(t, "1e-30"))
		default:
			within = rational(t, c.within)
		}
		d := claimedEnergy{rational(t, c.least), rational(t, c.most)}.against(rational(t, c.lo), rational(t, c.hi), within)
		assert.Equal(t, c.want, d.verdict, c.name)
	}
}

func TestAbove(t *testing.T) {
	for _, s := range []string{"1/3", "2/3", "1e-400", "0", "5e-324", "1e400", "-1/3"} {
		x := rational(t, s)
		f := above(x)
		if f > 1e308 {
			continue
		}
		assert.GreaterOrEqual(t, new(big.Rat).SetFloat64(f).Cmp(x), 0, s)
	}
}

package identity_test

import (
	"context"
	"testing"

	"creaseproof/identity"

	"github.com/stretchr/testify/require"
)

var hessian3 = theory{
	coordinates: []string{"x", "y", "z"}, unknowns: []string{"u"},
	lets: map[string]string{
		"s1": "u_xx + u_yy + u_zz",
		"s2": "u_xx u_yy + u_yy u_zz + u_zz u_xx - u_xy^2 - u_yz^2 - u_xz^2",
		"s3": "u_xx u_yy u_zz + 2 u_xy u_yz u_xz - u_xx u_yz^2 - u_yy u_xz^2 - u_zz u_xy^2",
	},
}

func benchmark(b *testing.B, th theory, states string, want identity.Verdict) {
	c := state(b, th, states)
	for b.Loop() {
		rec, err := identity.Decide(context.Background(), c, identity.DefaultOptions())
		require.NoError(b, err)
		require.Equal(b, want, rec.Verdict)
		if want == identity.Proved {
			require.NotNil(b, rec.Certificate)
		}
	}
}

// Goals on two cores: the layered bound with its certificate under 50 ms,
// Newton's second inequality under 2 s.

func BenchmarkLayeredYoungBound(b *testing.B) {
	benchmark(b, layered, "div(Sigma) <= e - 2 eps K", identity.Proved)
}

func BenchmarkNewtonSecond(b *testing.B) {
	benchmark(b, hessian3, "s2^2 >= 3 s1 s3", identity.Proved)
}

func BenchmarkNewtonNearMiss(b *testing.B) {
	benchmark(b, hessian3, "s2^2 >= (3 + 1/1000000000) s1 s3", identity.Refuted)
}

func BenchmarkThinViolation(b *testing.B) {
	benchmark(b, layered, "div(Sigma) <= e - 2 eps K - eps u_xx^2/1000000000", identity.Refuted)
}

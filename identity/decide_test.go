package identity_test

import (
	"testing"
	"time"

	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
)

func TestVerdicts(t *testing.T) {
	type edits = []func(*identity.Claim)
	for _, c := range []struct {
		th     theory
		states string
		edit   edits
		want   identity.Verdict
	}{
		{layered, "div(Sigma) = R (u_xixi - u_etaeta)", nil, identity.Proved},
		{layered, "div(Sigma) = R (u_xixi + u_etaeta)", nil, identity.Refuted},
		{layered, "div(Sigma) <= e - 2 eps K", nil, identity.Proved},
		{layered, "div(Sigma) <= e", nil, identity.Refuted},
		{layered, "div(Sigma) <= e - 3/2*eps K", nil, identity.Refuted},
		{layered, "div(Sigma) <= e - 201/100*eps K", nil, identity.Refuted},
		{layered, "div(Sigma) <= e - 2 eps K - eps u_xx^2/1000000000", nil, identity.Refuted},
		{layered, "(u_xx - 1000 u_yy)^2 >= u_yy^2/1000000", nil, identity.Refuted},
		{layered, "entropy(Sigma)", nil, identity.Proved},
		{layered, "span(Sigma(0), Sigma(pi/4)) = Sigma", nil, identity.Proved},
		{layered, "span(Sigma(0), Sigma(pi/2)) = Sigma", nil, identity.Refuted},
		{layered, "Sigma = cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)", nil, identity.Proved},
		{layered, "2 K = 0", edits{divergence}, identity.Proved},
		{layered, "2 R L = 2 u K", edits{divergence}, identity.Refuted},
		{layered, "2 R L = 4/3*u K", edits{divergence}, identity.Proved},
		{layered, "2 R L = c u K", edits{divergence, solving("c")}, identity.Proved},
		{layered, "euler(2 R L) = 4 K", nil, identity.Proved},
		{layered, "euler(u K) = 3 K", nil, identity.Proved},
		{layered, "sup(theta, [Sigma].nu) = norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))", edits{atJump}, identity.Proved},
		{layered, "sup(theta, [Sigma].nu) = norm([u_x], [u_y])^4/(11 norm([u_x], [u_y], [u_z]))", edits{atJump}, identity.Refuted},
		{layered, "[Sigma].nu <= norm([u_x], [u_y])^4/(12 norm([u_x], [u_y], [u_z]))", edits{atJump}, identity.Proved},
		{layered, "[Sigma].nu <= norm([u_x], [u_y])^4/(13 norm([u_x], [u_y], [u_z]))", edits{atJump}, identity.Refuted},
		{layered, "abs(u_x) + abs(u_y) >= norm(u_x, u_y)", nil, identity.Proved},
		{layered, "abs(u_x) + abs(u_y) <= sqrt(2) norm(u_x, u_y)", nil, identity.Proved},
		{layered, "abs(u_x) + abs(u_y) <= 141/100*norm(u_x, u_y)", nil, identity.Refuted},
		{layered, "sqrt(1 + u_x^2) >= 1", nil, identity.Proved},
		{layered, "norm(u_x + u_xx, u_y + u_yy) <= norm(u_x, u_y) + norm(u_xx, u_yy)", nil, identity.Proved},
		{layered, "div(Sigma) <= e", edits{divergence}, identity.Proved},
		{layered, "div(Sigma) <= e/2", edits{divergence}, identity.Open},
		{layered, "u_xx (u_yy u_zz - u_yz^2) - u_xy (u_xy u_zz - u_yz u_xz) + u_xz (u_xy u_yz - u_yy u_xz) <= delta", edits{divergence}, identity.Proved},
		{layered, "u_xx (u_yy u_zz - u_yz^2) - u_xy (u_xy u_zz - u_yz u_xz) + 2 u_xz (u_xy u_yz - u_yy u_xz) <= delta", edits{divergence}, identity.Open},
		{eikonal, "sup(theta, [Sigma].nu) = norm([u_x], [u_y])^3/12", edits{atJump}, identity.Proved},
		{eikonal, "sup(theta, [Sigma].nu) = norm([u_x], [u_y])^3/11", edits{atJump}, identity.Refuted},
		{eikonal, "[Sigma].nu <= norm([u_x], [u_y])^3/12", edits{atJump}, identity.Proved},
		{eikonal, "[Sigma].nu <= norm([u_x], [u_y])^3/(12 + 1/1000000)", edits{atJump}, identity.Refuted},
		{layered, "[Sigma].nu <= norm([u_x], [u_y])^4/((12 + 1/1000000) norm([u_x], [u_y], [u_z]))", edits{atJump}, identity.Refuted},
		{eikonal, "[Sigma].nu <= norm([u_x], [u_y])^3/13", edits{atJump}, identity.Refuted},
		{eikonal, "div(Sigma) = R (u_xixi - u_etaeta)", nil, identity.Proved},
		{eikonal, "div(Sigma) <= e - 2 eps K", nil, identity.Proved},
		{eikonal, "entropy(Sigma)", nil, identity.Proved},
	} {
		t.Run(c.states, func(t *testing.T) {
			start := time.Now()
			rec := decide(t, state(t, c.th, c.states, c.edit...))
			assert.Equal(t, c.want, rec.Verdict, "%+v", rec)
			t.Logf("%v %s | %s | %s | %+v | %v", time.Since(start), rec.Method, rec.Solution, rec.Reason, rec.Witness, rec.Details)
		})
	}
}

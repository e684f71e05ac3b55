package statement_test

import (
	"os"
	"os/exec"
	"path/filepath"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/identity"
	"creaseproof/identity/export"
	"creaseproof/identity/statement"
)

// of decides the claims of a case and exports the one named.
func of(t *testing.T, text, name string) (export.Statement, error) {
	t.Helper()
	c, err := cases.Parse("case.toml", []byte(text))
	require.NoError(t, err)
	for _, cl := range c.Claims {
		if cl.Name != name {
			continue
		}
		r, err := identity.Decide(t.Context(), cl.Claim, identity.DefaultOptions())
		require.NoError(t, err)
		require.Equal(t, identity.Proved, r.Verdict, r.Reason)
		return statement.Of(t.Context(), cl.Claim, r)
	}
	t.Fatalf("no claim %s", name)
	return nil, nil
}

func builtIn(t *testing.T, name, claim string) (export.Statement, error) {
	t.Helper()
	c, err := cases.BuiltIn(name)
	require.NoError(t, err)
	return of(t, string(c.Source()), claim)
}

// accepted exports a statement and checks it by Coq where that is installed.
func accepted(t *testing.T, s export.Statement) string {
	t.Helper()
	_, err := export.TeX(s, export.TeXOptions{})
	require.NoError(t, err)
	text, err := export.Coq("", s)
	require.NoError(t, err)
	coqc, err := exec.LookPath("coqc")
	if err != nil {
		t.Log("coqc is not installed, so the file was not checked by Coq")
		return text
	}
	file := filepath.Join(t.TempDir(), "exported.v")
	require.NoError(t, os.WriteFile(file, []byte(text), 0o666))
	out, err := exec.CommandContext(t.Context(), coqc, "-q", "-noglob", file).CombinedOutput()
	require.NoError(t, err, "%s\n%s", out, text)
	return text
}

const head = `[space]
coordinates = ["x", "y"]
unknowns = ["u"]
constants = ["eps", "lambda", "k"]
assume = ["eps > 0", "k < 0"]
`

func claimOf(statement string) string {
	return head + "[[claim]]\nname = \"claim\"\nexpect = \"proved\"\n" + statement + "\n"
}

func TestInequalitiesAreStatedAsTheyStand(t *testing.T) {
	for text, want := range map[string]string{
		`states = "2 u_x u_y <= u_x^2 + u_y^2"`: "2 * u_x * u_y <= u_x^2 + u_y^2",
		// The denominators are not variables of the reduced claim.
		`states = "u_x^2/eps >= -u_y^2/eps^3"`:                    "- (u_y^2 / eps^3) <= u_x^2 / eps",
		`states = "u_x^2/k <= 0"`:                                 "u_x^2 / k <= 0",
		`states = "u_x/(1 + u_y^2) <= (u_x^2 + 1)/(2 + 2 u_y^2)"`: "u_x / (1 + u_y^2) <= (u_x^2 + 1) / (2 + 2 * u_y^2)",
		// What cancels stays in the statement.
		`states = "d_x(u_x u_y) - u_x u_xy <= u_xx u_y + u_xx^2"`: "u_xx * u_y + u_xy * u_x - u_x * u_xy <= u_xx * u_y + u_xx^2",
	} {
		s, err := of(t, claimOf(text), "claim")
		require.NoError(t, err)
		q, ok := s.(*export.Inequality)
		require.True(t, ok)
		require.NotNil(t, q.Left, text)
		assert.Contains(t, accepted(t, s), want, text)
	}
}

// A denominator that may vanish is a premise.
func TestDenominatorsThatMayVanish(t *testing.T) {
	for text, want := range map[string][]string{
		`states = "u_x^2/u_y^2 >= -1"`: {"0 < u_y^2 ->", "- 1 <= u_x^2 / u_y^2"},
		`states = "u_xx/sqrt(u_x^2 + u_y^2) <= (u_xx^2 + 1)/(2 sqrt(u_x^2 + u_y^2))"`: {"0 < sqrt_u_x_pow_2_plus_u_y_pow_2 ->", "u_xx / sqrt_u_x_pow_2_plus_u_y_pow_2 <="},
		`states = "1/(u_x^2 + u_y^2) >= -u_x^2"`:                                      {"0 < u_x^2 + u_y^2 ->"},
		`states = "u_x^4/u_y^3 <= u_x^4/u_y^3 + 1/u_y^2"`:                             {"0 < u_y^2 ->"},
	} {
		s, err := of(t, claimOf(text), "claim")
		require.NoError(t, err)
		got := accepted(t, s)
		require.NotNil(t, s.(*export.Inequality).Left, text)
		for _, w := range want {
			assert.Contains(t, got, w, text)
		}
	}
}

// The sign of a denominator that the statement divides by must show.
func TestSidesThatCannotBeWritten(t *testing.T) {
	for _, text := range []string{
		`states = "-u_x^2 <= u_x u_y/u_y"`,
		`states = "u_x^2/u_y <= u_x^2/u_y + u_xx^2"`,
		`states = "u_x^2/(u_x + u_y)^2 >= -1"`,
	} {
		s, err := of(t, head+"[[claim]]\nname = \"claim\"\nexpect = \"proved\"\n"+text+"\nassume = [\"u_x >= 0\"]\n", "claim")
		require.NoError(t, err)
		q, ok := s.(*export.Inequality)
		require.True(t, ok)
		assert.Nil(t, q.Left, text)
		accepted(t, s)
	}
}

// With the angle removed, both sides are those at angle 0.
func TestSidesAlongTheAxes(t *testing.T) {
	s, err := builtIn(t, "layered-rotated", "Young bound")
	require.NoError(t, err)
	q := s.(*export.Inequality)
	require.NotNil(t, q.Left)
	for _, v := range q.Claim.Variables {
		assert.NotContains(t, []string{"u_x", "u_y", "u_xx", "u_xy", "u_yy", "u_xz", "u_yz", "theta", "cos(theta)", "sin(theta)"}, v)
	}
	assert.Contains(t, q.Comment, "along the axes")
	text := accepted(t, s)
	assert.Contains(t, text, "u_xiz * u_xi")
	assert.Contains(t, text, "<= (u_z - (u_xi^2 + u_eta^2) / 2)^2 / (2 * eps)")
}

func TestSquaringsAreStated(t *testing.T) {
	s, err := builtIn(t, "roots", "triangle inequality")
	require.NoError(t, err)
	q := s.(*export.Inequality)
	require.NotNil(t, q.Certificate.Squaring)
	require.NotNil(t, q.Left)
	assert.Contains(t, accepted(t, s), "apply (by_squaring")

	// Another inner certificate, and another root, are refused by Coq.
	if _, err := exec.LookPath("coqc"); err != nil {
		t.Skip("coqc is not installed, so what it refuses was not tried")
	}
	for _, change := range []func(){
		func() { q.Certificate.Squaring.Proof.Squaring.Proof.Squares[0].Weight = "5" },
		func() { q.Claim.Zero[0][0].C = "-2" },
	} {
		change()
		q.Left, q.Right = nil, nil
		text, err := export.Coq("", q)
		require.NoError(t, err)
		file := filepath.Join(t.TempDir(), "exported.v")
		require.NoError(t, os.WriteFile(file, []byte(text), 0o666))
		require.Error(t, exec.CommandContext(t.Context(), "coqc", "-q", "-noglob", file).Run())
	}
}

func TestBestConstants(t *testing.T) {
	s, err := of(t, claimOf(`states = "u_x^2 + u_y^2 >= lambda u_x u_y"
best = "lambda"`), "claim")
	require.NoError(t, err)
	g := s.(*export.Group)
	require.Len(t, g.Statements, 4)
	text := accepted(t, s)
	for _, want := range []string{"2 * u_x * u_y <= u_x^2 + u_y^2", "2 < lambda ->", "lambda < (-2) ->", "u_x^2 + u_y^2 < lambda * u_x * u_y"} {
		assert.Contains(t, text, want)
	}

	s, err = of(t, claimOf(`states = "u_x^2 + lambda u_y^2 >= u_x^2"
best = "lambda"`), "claim")
	require.NoError(t, err)
	text = accepted(t, s)
	assert.Contains(t, text, "no upper end")
	assert.Contains(t, text, "lambda < 0 ->")
}

// The jet beyond an end satisfies the assumptions, those of the setting and of
// the claim.
func TestAssumptionsBeyondAnEnd(t *testing.T) {
	s, err := of(t, claimOf(`states = "u_x^2 + u_y^2 >= lambda u_x u_y/eps"
best = "lambda"
assume = ["u_x >= 3", "eps = 2"]`), "claim")
	require.NoError(t, err)
	text := accepted(t, s)
	for _, want := range []string{"eps > 0 /\\ ", "u_x >= 3 /\\", "eps = 2 /\\"} {
		assert.Contains(t, text, want)
	}
}

// An identity is exported only where it holds without the assumptions, which
// its statement does not name.
func TestIdentitiesThatRestOnAssumptions(t *testing.T) {
	for _, text := range []string{
		"states = \"u_x = k\"\nassume = [\"k = eps\", \"u_x = eps\"]",
		"states = \"u_x^2 = 1\"\nassume = [\"u_x^2 = 1\"]",
		"states = \"abs(u_x) = abs(eps)\"\nassume = [\"u_x > 0\", \"u_x = eps\"]",
	} {
		s, err := of(t, claimOf(text), "claim")
		if err == nil {
			accepted(t, s)
			continue
		}
		require.ErrorIs(t, err, export.ErrUnsupported, text)
	}
}

package entropy_test

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/source"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// zero evaluates left - right exactly, component by component.
func zero(t *testing.T, in *entropy.Interpreter[algebra.Fraction], ex *entropy.Exact, set *entropy.Setting, left, right string) {
	t.Helper()
	l, err := in.Eval(parse(set, left))
	require.NoError(t, err, left)
	r, err := in.Eval(parse(set, right))
	require.NoError(t, err, right)
	require.Equal(t, l.Vector == nil, r.Vector == nil)
	ls, rs := append(l.Vector, l.Scalar), append(r.Vector, r.Scalar)
	for i := range ls {
		d, err := ex.Ring.Sub(ls[i], rs[i])
		require.NoError(t, err)
		assert.True(t, d.IsZero(), "%s - (%s) = %s", left, right, ex.Ring.Format(d))
	}
}

func TestFrames(t *testing.T) {
	set := layered()
	in, ex, err := set.NewExact(context.Background())
	require.NoError(t, err)
	for _, c := range [][2]string{
		{"u_xi", "cos(theta) u_x + sin(theta) u_y"},
		{"u_eta", "-sin(theta) u_x + cos(theta) u_y"},
		{"u_xieta", "u_etaxi"},
		{"u_xixi + u_etaeta", "L"},
		{"u_xixi u_etaeta - u_xieta^2", "u_xx u_yy - u_xy^2"},
		{"u_xi^2 + u_eta^2", "u_x^2 + u_y^2"},
		{"d_xi(u_x)", "cos(theta) u_xx + sin(theta) u_xy"},
		{"R_xi", "u_{xi z} - u_x d_xi(u_x) - u_y d_xi(u_y)"},
		{"R_xi", "d_xi(R)"},
		{"d_{xi eta}(R)", "d_eta(R_xi)"},
		{"Sigma(theta)", "Sigma"},
		{"Sigma(theta + pi)", "Sigma"},
		{"Sigma(theta + pi/2)", "-Sigma"},
		{"Sigma", "cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)"},
		{"Sigma(0)_x", "u_z u_x - u_x u_y^2/2 - u_x^3/6"},
		{"Sigma(0)_xi", "Sigma(0)_x"}, // the axes turn with the field
		{"Sigma_xi", "u_z u_xi - u_xi u_eta^2/2 - u_xi^3/6"},
		{"Sigma_x", "cos(theta) Sigma_xi - sin(theta) Sigma_eta"},
		{"Sigma(pi/2)_xi", "Sigma(pi/2)_y"},
		{"div(Sigma)", "R (u_xixi - u_etaeta)"},
		{"div(Sigma(theta + pi/4))", "2 R u_xieta"},
		{"div(grad(u_z))", "u_xxz + u_yyz + u_zzz"},
		{"norm(grad(u))^2", "u_x^2 + u_y^2 + u_z^2"},
		{"norm(Sigma)^2", "norm(Sigma_xi, Sigma_eta, Sigma_z)^2"},
		{"2 Sigma - Sigma/3", "5/3*Sigma"},
		{"Sigma(0) u_x", "u_x*Sigma(0)"},
		{"euler(R^2)", "euler(R^2, u)"},
		{"sup(theta, 3 + 4 cos(2 theta) - 3 sin(2 theta))", "8"},
		{"sup(theta, u_x)", "u_x"},
		{"sup(theta, u_xi)", "norm(u_x, u_y)"},
	} {
		zero(t, in, ex, set, c[0], c[1])
	}
}

// The field at an angle against the rotation written out in floating point.
func TestFieldAtAnglesAgainstPlainArithmetic(t *testing.T) {
	set := layered()
	in, ex, err := set.NewExact(context.Background())
	require.NoError(t, err)
	v, err := in.Eval(parse(set, "Sigma"))
	require.NoError(t, err)
	rng := rand.New(rand.NewPCG(51, 1))
	for range 50 {
		var p [3]float64
		at := jet.Point{ex.Ring.ConstantVar("theta"): algebra.Frac64(rng.Int64N(200)-100, 31)}
		for i := range p {
			x := algebra.Frac64(rng.Int64N(65)-32, 8)
			p[i] = x.Float64()
			w, err := ex.Ring.JetVar(0, jet.Index{}.Plus(i), jet.NoSide)
			require.NoError(t, err)
			at[w] = x
		}
		s, c := math.Sincos(at[ex.Ring.ConstantVar("theta")].Float64())
		xi, eta, z := c*p[0]+s*p[1], c*p[1]-s*p[0], p[2]
		sx := z*xi - xi*eta*eta/2 - xi*xi*xi/6
		se := -(z*eta - eta*xi*xi/2 - eta*eta*eta/6)
		for i, want := range []float64{c*sx - s*se, s*sx + c*se, (eta*eta - xi*xi) / 2} {
			got, _ := ex.Ring.Enclose(v.Vector[i], at, 128).Lo().Float64()
			assert.InDelta(t, want, got, 1e-11)
		}
	}
}

func TestFormulasThatMeanNothing(t *testing.T) {
	set := layered()
	for _, text := range []string{
		"Sigma + 1", "Sigma Sigma", "1/Sigma", "Sigma^2", "div(u_x)", "grad(Sigma)", "cos(Sigma)", "div(Sigma, Sigma)",
		"cos(u_x, u_y)", "euler(u_x, x)", "sup(u_x, u_x)", "sup(x, cos(x) u_x)", "sup(u, cos(u))", "sup(pi, u_x)", "sup(R, u_x)",
		"sup(2, u_x)", "1/(u_x - u_x)", "(u_x - u_x)^(-1)", "log(u_x - u_x)", "Sigma(u_x)_z(0)", "sup(theta, theta u_x)",
		"sup(theta, cos(theta) + cos(2 theta))", "[u_x]", "{u_x}", "nu_x", "Sigma.nu", "u_xxxxxxxxx", "d_x(u_xxxxxxxx, u)",
	} {
		scope, err := set.Scope(false)
		require.NoError(t, err)
		n, err := scope.ParseExpr(source.Text{S: text})
		if err != nil {
			continue // refused by the parser
		}
		in, ex, err := set.NewExact(context.Background())
		require.NoError(t, err)
		v, err := in.Eval(n)
		if err == nil && v.Vector == nil {
			t.Errorf("%s is accepted as %s", text, ex.Ring.Format(v.Scalar))
		}
	}
}

func TestCyclesOfNames(t *testing.T) {
	set := &entropy.Setting{Coordinates: []string{"x"}, Unknowns: []string{"u"}, Lets: map[string]formula.Node{"A": nil, "B": nil, "C": nil}}
	set.Lets["A"], set.Lets["B"], set.Lets["C"] = parse(set, "B + 1"), parse(set, "d_x(A)"), parse(set, "C_x")
	for _, name := range []string{"A", "B", "C"} {
		in, _, err := set.NewExact(context.Background())
		require.NoError(t, err)
		_, err = in.Eval(parse(set, name))
		require.ErrorContains(t, err, "defined by itself")
		// The interpreter is as good as new.
		_, err = in.Eval(parse(set, "u_x"))
		require.NoError(t, err)
	}
}

func TestGivenUnknowns(t *testing.T) {
	set := layered()
	in, ex, err := set.NewExact(context.Background())
	require.NoError(t, err)
	in.Given = map[int]formula.Node{0: parse(set, "x^2 y + z cos(x)")}
	zero(t, in, ex, set, "u_xxy", "2")
	zero(t, in, ex, set, "u_xz", "-sin(x)")
	zero(t, in, ex, set, "L", "2 y - z cos(x)")
	zero(t, in, ex, set, "u_xi", "cos(theta) (2 x y - z sin(x)) + sin(theta) x^2")
	_, err = in.Eval(parse(set, "euler(u_x^2)"))
	require.Error(t, err)
}

func TestAssumedSigns(t *testing.T) {
	set := layered()
	for _, c := range []struct {
		left, rel, right string
		positive         bool
	}{
		{"eps", ">", "0", true}, {"0", "<", "eps", true}, {"2 eps", ">", "1", true}, {"eps", ">=", "1", true}, {"eps", "=", "3", true},
		{"-eps", "<", "0", true}, {"1 - eps", "<=", "0", true}, {"eps", ">=", "0", false}, {"eps", ">", "-1", false}, {"eps", "<", "1", false},
		{"eps^2", ">", "0", false}, {"1/eps", ">", "0", false}, {"eps", ">", "theta", false}, {"eps", "<", "0", false}, {"eps", "=", "0", false},
	} {
		in, ex, err := set.NewExact(context.Background())
		require.NoError(t, err)
		a := entropy.Assumption{Left: parse(set, c.left), Right: parse(set, c.right), Relation: c.rel}
		require.NoError(t, ex.AssumeSigns(in, []entropy.Assumption{a}))
		v, err := in.Scalar(parse(set, "eps"))
		require.NoError(t, err)
		assert.Equal(t, c.positive, ex.Ring.VisiblyPositive(v), "%s %s %s", c.left, c.rel, c.right)
	}
}

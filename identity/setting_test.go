package identity_test

import (
	"context"
	"strings"
	"testing"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
	"creaseproof/identity"

	"github.com/stretchr/testify/require"
)

// theory is a setting as formulas, for tests.
type theory struct {
	coordinates, unknowns, constants []string
	frame                            *entropy.Frame
	lets                             map[string]string
	fields                           map[string]map[string]string
	residual, bending, energy        string
	assume                           []string
}

var layered = theory{
	coordinates: []string{"x", "y", "z"}, unknowns: []string{"u"}, constants: []string{"eps", "delta"},
	frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	lets: map[string]string{
		"R": "u_z - (u_x^2 + u_y^2)/2", "L": "u_xx + u_yy", "K": "u_xx u_yy - u_xy^2",
		"e": "R^2/(2 eps) + eps L^2/2",
	},
	fields: map[string]map[string]string{"Sigma": {
		"xi":  "u_z u_xi - u_xi u_eta^2/2 - u_xi^3/6",
		"eta": "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)",
		"z":   "(u_eta^2 - u_xi^2)/2",
	}},
	residual: "R", bending: "L", energy: "e",
	assume: []string{"eps > 0", "delta > 0"},
}

var eikonal = theory{
	coordinates: []string{"x", "y"}, unknowns: []string{"u"}, constants: []string{"eps"},
	frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	lets: map[string]string{
		"R": "(1 - u_x^2 - u_y^2)/2", "L": "u_xx + u_yy", "K": "u_xx u_yy - u_xy^2", "e": "R^2/(2 eps) + eps L^2/2",
	},
	fields: map[string]map[string]string{"Sigma": {
		"xi":  "u_xi/2 - u_xi u_eta^2/2 - u_xi^3/6",
		"eta": "-(u_eta/2 - u_eta u_xi^2/2 - u_eta^3/6)",
	}},
	residual: "R", bending: "L", energy: "e",
	assume: []string{"eps > 0"},
}

func (th theory) build(t testing.TB) *entropy.Setting {
	t.Helper()
	set := &entropy.Setting{
		Coordinates: th.coordinates, Unknowns: th.unknowns, Constants: th.constants, Frame: th.frame,
		Lets: map[string]formula.Node{}, Fields: map[string]*entropy.Field{},
	}
	for name := range th.lets {
		set.Lets[name] = nil
	}
	for name := range th.fields {
		set.Fields[name] = nil
	}
	for name, text := range th.lets {
		set.Lets[name] = expr(t, set, text)
	}
	for name, comps := range th.fields {
		f := &entropy.Field{Name: name, Components: map[string]formula.Node{}}
		for c, text := range comps {
			f.Components[c] = expr(t, set, text)
		}
		set.Fields[name] = f
	}
	if th.residual != "" {
		set.Model = entropy.Model{Residual: expr(t, set, th.residual), Bending: expr(t, set, th.bending), Energy: expr(t, set, th.energy)}
	}
	for _, a := range th.assume {
		set.Assume = append(set.Assume, assumption(t, set, a))
	}
	return set
}

func expr(t testing.TB, set *entropy.Setting, text string) formula.Node {
	t.Helper()
	sc, err := set.Scope(false)
	require.NoError(t, err)
	n, err := sc.ParseExpr(source.Text{S: text})
	require.NoError(t, err)
	return n
}

func assumption(t testing.TB, set *entropy.Setting, text string) entropy.Assumption {
	t.Helper()
	sc, err := set.Scope(false)
	require.NoError(t, err)
	return parseAssumption(sc, text)
}

func parseAssumption(sc *formula.Scope, text string) entropy.Assumption {
	for _, rel := range []string{">=", "<=", ">", "<", "="} {
		if l, r, ok := strings.Cut(text, rel); ok {
			left, err := sc.ParseExpr(source.Text{S: l})
			if err != nil {
				panic(err)
			}
			right, err := sc.ParseExpr(source.Text{S: r})
			if err != nil {
				panic(err)
			}
			return entropy.Assumption{Left: left, Right: right, Relation: rel, Text: text}
		}
	}
	panic("no relation in " + text)
}

// state parses a claim; edit may change it before it is decided.
func state(t testing.TB, th theory, states string, edit ...func(*identity.Claim)) *identity.Claim {
	t.Helper()
	set := th.build(t)
	c := &identity.Claim{Name: states, Setting: set}
	for _, f := range edit {
		f(c)
	}
	sc, err := set.Scope(c.Jump)
	require.NoError(t, err)
	sc, err = sc.With(c.Solve...)
	require.NoError(t, err)
	c.Statement, err = sc.ParseStatement(source.Text{S: states})
	require.NoError(t, err)
	return c
}

func decide(t testing.TB, c *identity.Claim) *identity.Record {
	t.Helper()
	rec, err := identity.Decide(context.Background(), c, identity.DefaultOptions())
	require.NoError(t, err)
	return rec
}

func atJump(c *identity.Claim)     { c.Jump = true }
func divergence(c *identity.Claim) { c.Divergence = true }
func solving(names ...string) func(*identity.Claim) {
	return func(c *identity.Claim) { c.Solve = names }
}

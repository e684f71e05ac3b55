package library_test

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/library"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// Every formula of every case parses with the names that its case declares and
// with no others, and its place is that of the file.
func TestEveryFormulaParses(t *testing.T) {
	for _, name := range append(library.Names(), "template") {
		data, ok := library.Source(name)
		if name == "template" {
			data, ok = library.Template(), true
		}
		require.True(t, ok)
		f, err := casefile.Decode(name, data)
		require.NoError(t, err)
		parseAll(t, f)
	}
}

func names(list []casefile.Name) (s []string) {
	for _, n := range list {
		s = append(s, n.S)
	}
	return s
}

func parseAll(t *testing.T, f *casefile.File) {
	c := formula.ScopeConfig{Coordinates: names(f.Space.Coordinates), Unknowns: names(f.Space.Unknowns), Constants: names(f.Space.Constants)}
	if f.Frame != nil {
		c.Axes = names(f.Frame.Axes[:])
		c.Angles = []string{f.Frame.Angle.S}
	}
	for _, l := range f.Lets {
		c.Lets = append(c.Lets, l.Name.S)
	}
	for _, v := range f.Fields {
		c.Fields = append(c.Fields, v.Name.S)
	}
	scope, err := formula.NewScope(c)
	require.NoError(t, err, f.Name)
	expr := func(s *formula.Scope, texts ...source.Text) {
		for _, x := range texts {
			_, err := s.ParseExpr(x)
			assert.NoError(t, err)
		}
	}
	optional := func(s *formula.Scope, texts ...*source.Text) {
		for _, x := range texts {
			if x != nil {
				expr(s, *x)
			}
		}
	}
	for _, l := range f.Lets {
		expr(scope, l.Formula)
	}
	for _, v := range f.Fields {
		for _, k := range v.Components {
			expr(scope, k.Formula)
		}
	}
	for _, k := range f.Claims {
		asked := names(k.Solve)
		if k.Best != nil {
			asked = append(asked, k.Best.S)
		}
		s, err := scope.With(asked...)
		require.NoError(t, err)
		if k.At == "jump" {
			s = s.AtJump()
		}
		_, err = s.ParseStatement(k.States)
		assert.NoError(t, err)
		expr(s, k.Modulo...)
		for _, a := range append(k.Given, k.Restrict...) {
			expr(s, a.Formula)
		}
	}
	for _, k := range f.Surfaces {
		var values, over []string
		for _, v := range k.Values {
			values = append(values, v.Name.S)
		}
		if k.Patch != nil {
			for _, v := range k.Patch.Over {
				over = append(over, v.Name.S)
			}
		}
		fixed, err := scope.With(values...)
		require.NoError(t, err, k.Name)
		s, err := fixed.With(over...)
		require.NoError(t, err, k.Name)
		for _, v := range k.Values {
			expr(scope, v.List...)
		}
		optional(fixed, k.Energy)
		optional(s, k.Plus, k.Minus, k.Density)
		expr(s, k.PlusGradient...)
		expr(s, k.MinusGradient...)
		for _, p := range k.Polygon {
			expr(fixed, p...)
		}
		if k.Patch != nil {
			expr(s, k.Patch.Map...)
			for _, v := range k.Patch.Over {
				expr(fixed, v.Lo, v.Hi)
			}
		}
		if k.Graph != nil {
			expr(s, k.Graph.Of)
		}
	}
}

package campaign

import (
	"fmt"
	"maps"
	"math/big"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/cases/casefile"
	"creaseproof/cases/library"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// subject is a claim with its case, in trees that can be changed.
type subject struct {
	file      *casefile.File
	claim     *casefile.Claim
	world     *world
	statement *formula.Statement
	residual  formula.Node
	modulo    []formula.Node
	assume    []condition
	box       map[string][2]*big.Rat

	solvable []equation // see equations
}

// condition is left - right > 0, or >= 0.
type condition struct {
	left, right formula.Node
	strict      bool
}

// subjects are the claims of a built-in case, with those left out that hold
// what the sampler has no names for.
func subjects(t *testing.T, name string) []*subject {
	data, ok := library.Source(name)
	require.True(t, ok)
	f, err := casefile.Decode(name, data)
	require.NoError(t, err)
	if f.Space == nil {
		return nil
	}
	names := func(list []casefile.Name) (s []string) {
		for _, n := range list {
			s = append(s, n.S)
		}
		return s
	}
	w := &world{
		coords: names(f.Space.Coordinates), unknowns: names(f.Space.Unknowns),
		lets: map[string]formula.Node{}, fields: map[string]map[string]formula.Node{},
	}
	config := formula.ScopeConfig{Coordinates: w.coords, Unknowns: w.unknowns, Constants: names(f.Space.Constants)}
	if f.Frame != nil {
		config.Axes = names(f.Frame.Axes[:])
		config.Angles = []string{f.Frame.Angle.S}
		w.axes, w.angle = config.Axes, f.Frame.Angle.S
		for i, c := range f.Frame.Plane {
			w.plane[i] = slices.Index(w.coords, c.S)
		}
	}
	for _, l := range f.Lets {
		config.Lets = append(config.Lets, l.Name.S)
	}
	for _, v := range f.Fields {
		config.Fields = append(config.Fields, v.Name.S)
	}
	scope, err := formula.NewScope(config)
	require.NoError(t, err)
	read := func(s *formula.Scope, x source.Text) formula.Node {
		n, err := s.ParseExpr(x)
		require.NoError(t, err)
		return n
	}
	for _, l := range f.Lets {
		w.lets[l.Name.S] = read(scope, l.Formula)
	}
	for _, v := range f.Fields {
		w.fields[v.Name.S] = map[string]formula.Node{}
		for _, c := range v.Components {
			w.fields[v.Name.S][c.Index.S] = read(scope, c.Formula)
		}
	}
	var out []*subject
	for i := range f.Claims {
		k := &f.Claims[i]
		if len(k.Solve) > 0 || k.Best != nil {
			continue
		}
		mine := *w
		s := &subject{file: f, claim: k, world: &mine, box: map[string][2]*big.Rat{}}
		in := scope
		if k.At == "jump" {
			in = scope.AtJump()
		}
		if f.Model != nil && f.Model.Residual != nil {
			s.residual = read(scope, *f.Model.Residual)
		}
		s.statement, err = in.ParseStatement(k.States)
		require.NoError(t, err)
		for _, m := range k.Modulo {
			s.modulo = append(s.modulo, read(scope, m))
		}
		for _, a := range slices.Concat(f.Space.Assume, k.Assume) {
			for _, op := range []string{">=", "<=", ">", "<"} {
				l, r, ok := strings.Cut(a.S, op)
				if !ok {
					continue
				}
				c := condition{read(scope, source.Text{S: l}), read(scope, source.Text{S: r}), len(op) == 1}
				if op[0] == '<' {
					c.left, c.right = c.right, c.left
				}
				s.assume = append(s.assume, c)
				break
			}
		}
		for _, b := range k.Box {
			lo, ok1 := new(big.Rat).SetString(b.Lo.S)
			hi, ok2 := new(big.Rat).SetString(b.Hi.S)
			require.True(t, ok1 && ok2)
			s.box[b.Name.S] = [2]*big.Rat{lo, hi}
		}
		for _, g := range k.Given {
			if mine.given == nil {
				mine.given = map[string]formula.Node{}
			}
			mine.given[g.Name.S] = read(scope, g.Formula)
		}
		for _, r := range k.Restrict {
			u, sub, _ := strings.Cut(r.Name.S, "_")
			var m mono
			for _, c := range scope.Subscript(sub) {
				m[slices.Index(w.coords, c)]++
			}
			mine.restrict = append(mine.restrict, restriction{u, m, read(scope, r.Formula)})
		}
		out = append(out, s)
	}
	return out
}

// text is the case file of the claim alone.
func (s *subject) text() string {
	var b strings.Builder
	q := strconv.Quote
	list := func(names []casefile.Name) string {
		var out []string
		for _, n := range names {
			out = append(out, q(n.S))
		}
		return strings.Join(out, ", ")
	}
	texts := func(list []source.Text) string {
		var out []string
		for _, n := range list {
			out = append(out, q(n.S))
		}
		return strings.Join(out, ", ")
	}
	f := s.file
	fmt.Fprintf(&b, "title = \"mutant\"\n[space]\ncoordinates = [%s]\nunknowns = [%s]\n", list(f.Space.Coordinates), list(f.Space.Unknowns))
	if len(f.Space.Constants) > 0 {
		fmt.Fprintf(&b, "constants = [%s]\n", list(f.Space.Constants))
	}
	if len(f.Space.Assume) > 0 {
		fmt.Fprintf(&b, "assume = [%s]\n", texts(f.Space.Assume))
	}
	if f.Frame != nil {
		fmt.Fprintf(&b, "[frame]\nplane = [%s]\naxes = [%s]\nangle = %q\n", list(f.Frame.Plane[:]), list(f.Frame.Axes[:]), f.Frame.Angle.S)
	}
	if len(s.world.lets) > 0 {
		fmt.Fprintln(&b, "[let]")
	}
	for _, l := range slices.Sorted(maps.Keys(s.world.lets)) {
		fmt.Fprintf(&b, "%s = %q\n", l, formula.Text(s.world.lets[l]))
	}
	if s.residual != nil {
		fmt.Fprintf(&b, "[model]\nresidual = %q\n", formula.Text(s.residual))
	}
	for _, id := range slices.Sorted(maps.Keys(s.world.fields)) {
		fmt.Fprintf(&b, "[field.%s]\n", id)
		for _, c := range slices.Sorted(maps.Keys(s.world.fields[id])) {
			fmt.Fprintf(&b, "%s = %q\n", c, formula.Text(s.world.fields[id][c]))
		}
	}
	k := s.claim
	fmt.Fprintf(&b, "[[claim]]\nname = \"mutant\"\nstates = %q\n", s.statement.Text())
	if k.At != "" {
		fmt.Fprintf(&b, "at = %q\n", k.At)
	}
	if k.Divergence {
		fmt.Fprintln(&b, `modulo = "divergence"`)
	}
	if len(k.Modulo) > 0 {
		fmt.Fprintf(&b, "modulo = [%s]\n", texts(k.Modulo))
	}
	if len(k.Assume) > 0 {
		fmt.Fprintf(&b, "assume = [%s]\n", texts(k.Assume))
	}
	assigned := func(key string, list []casefile.Assignment) {
		var out []string
		for _, a := range list {
			out = append(out, a.Name.S+" = "+q(a.Formula.S))
		}
		if len(out) > 0 {
			fmt.Fprintf(&b, "%s = { %s }\n", key, strings.Join(out, ", "))
		}
	}
	assigned("given", k.Given)
	assigned("restrict", k.Restrict)
	var box []string
	for _, i := range k.Box {
		box = append(box, fmt.Sprintf("%s = [%q, %q]", i.Name.S, i.Lo.S, i.Hi.S))
	}
	if len(box) > 0 {
		fmt.Fprintf(&b, "box = { %s }\n", strings.Join(box, ", "))
	}
	return b.String()
}

// expected is the verdict that the file expects.
func (s *subject) expected() string {
	if s.claim.Expect == nil {
		return "proved"
	}
	return s.claim.Expect.S
}

func (s *subject) inequality() bool {
	r := s.statement.Relation
	return r == formula.LessEqual || r == formula.GreaterEqual
}

package export

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// Beyond says that Left <= Right fails at a point for all values of a constant
// beyond Value: the difference of the sides vanishes there at Value, is affine
// in the constant and falls beyond. The theorem reads
//
//	forall lambda u_x eps : R,  u_x = 1 -> eps = 1 -> Value < lambda -> 0 < eps /\ Right < Left,
//
// so that the point is one at which the claim is made.
type Beyond struct {
	Name     string
	Comment  string
	Constant string
	Value    string // an exact rational
	Upper    bool   // beyond is above
	// At gives an exact rational for each variable of the sides other than the
	// constant.
	At          map[string]string
	Left, Right Expr
	// Assumed are the assumptions of the claim, which must hold at the point.
	// The constant stands in none of them.
	Assumed []Comparison
}

func (s *Beyond) title() (string, string) { return s.Name, s.Comment }

// read is the slope k > 0 of Left - Right beyond the value.
func (s *Beyond) read() (r *ring, names []string, values []*big.Rat, end, slope *big.Rat, err error) {
	fail := func(err error) (*ring, []string, []*big.Rat, *big.Rat, *big.Rat, error) {
		return nil, nil, nil, nil, nil, err
	}
	if end, err = rational(s.Value); err != nil {
		return fail(err)
	}
	for v := range s.At {
		names = append(names, v)
	}
	slices.Sort(names)
	names = append([]string{s.Constant}, names...)
	if r, err = newRing(names); err != nil {
		return fail(err)
	}
	values = make([]*big.Rat, len(names))
	for i, v := range names[1:] {
		if values[i+1], err = rational(s.At[v]); err != nil {
			return fail(fmt.Errorf("%s: %w", v, err))
		}
	}
	for _, e := range []Expr{s.Left, s.Right} {
		if err := inspect(e, r.declared); err != nil {
			return fail(err)
		}
	}
	x, err := r.evaluate(Sum{s.Left, Negation{s.Right}})
	if err != nil {
		return fail(err)
	}
	for _, d := range x.den {
		if c, ok := isConstant(at(d.p, values)); !ok || c.Sign() == 0 {
			return fail(fmt.Errorf("%w: a denominator that vanishes or holds the constant", ErrUnsupported))
		}
	}
	var one, two poly // at the value, and 1 beyond
	step := big.NewRat(1, 1)
	if !s.Upper {
		step.Neg(step)
	}
	p := at(x.num, values)
	if len(p) > 0 && p[0].exps[0] > 1 {
		return fail(errors.New("the difference of the sides is not affine in the constant"))
	}
	values[0] = end
	one = at(p, values)
	values[0] = new(big.Rat).Add(end, step)
	two = at(p, values)
	values[0] = nil
	slope, _ = isConstant(two)
	slope = new(big.Rat).Set(slope)
	for _, d := range x.den {
		c, _ := isConstant(at(d.p, values))
		for range d.power {
			slope.Quo(slope, c)
		}
	}
	for i, a := range s.Assumed {
		if _, err := a.at(r, values); err != nil {
			return fail(fmt.Errorf("assumption %d: %w", i, err))
		}
	}
	if len(one) > 0 || slope.Sign() <= 0 {
		return fail(errors.New("the difference of the sides does not vanish at the end, or does not fall beyond it"))
	}
	return r, names, values, end, slope, nil
}

func (s *Beyond) coq(d *document) error {
	r, names, values, end, slope, err := s.read()
	if err != nil {
		return err
	}
	sc, name, err := d.open(s, names)
	if err != nil {
		return err
	}
	var premises, given []string
	for i, x := range values[1:] {
		premises = append(premises, sc.at[i+1]+" = "+coqNumber(x))
		given = append(given, sc.names.name(fmt.Sprintf("E%d", i)))
	}
	lemma, side := "fails_above", coqNumber(end)+" < "+sc.at[0]
	if !s.Upper {
		lemma, side = "fails_below", sc.at[0]+" < "+coqNumber(end)
	}
	h := sc.names.name("B")
	var conclusions []string
	for _, a := range s.Assumed {
		conclusions = append(conclusions, a.text(sc.ids))
	}
	conclusions = append(conclusions, tree(s.Right, sc.ids, levelSum)+" < "+tree(s.Left, sc.ids, levelSum))
	d.statement("Theorem", name, sc, append(premises, side), strings.Join(conclusions, " /\\ "))
	d.intros(sc, append(given, h))
	if len(given) > 0 {
		d.printf("%s\n", wrap("  ", "subst "+strings.Join(sc.at[1:], " ")+"."))
	}
	for _, a := range s.Assumed {
		c, err := a.at(r, values)
		if err != nil {
			return err
		}
		d.printf("  split.\n  { apply (%s _ _ %s); [lra | field; repeat split; lra]. }\n", comparisons[a.Relation].lemma, coqNumber(c))
	}
	d.printf("  apply (%s _ _ %s %s %s).\n", lemma, coqNumber(slope), coqNumber(end), sc.at[0])
	d.printf("  - lra.\n  - exact %s.\n  - field; repeat split; lra.\nQed.\n", h)
	return nil
}

func (s *Beyond) tex(o TeXOptions) ([]string, error) {
	r, names, values, end, slope, err := s.read()
	if err != nil {
		return nil, err
	}
	w := &typesetter{ring: r, ids: o.ids(names)}
	var where []string
	for i, x := range values[1:] {
		where = append(where, w.ids[names[i+1]]+" = "+texNumber(x))
	}
	left := w.difference(s.Right, s.Left)
	if len(where) > 0 {
		left = brackets(left) + `\big|_{` + strings.Join(where, ", ") + "}"
	}
	factor := ""
	if slope.Cmp(big.NewRat(1, 1)) != 0 {
		factor = texNumber(slope) + " "
	}
	c, v := w.ids[s.Constant], texNumber(end)
	difference := v + " - " + c
	switch {
	case !s.Upper && end.Sign() < 0:
		difference = c + " + " + texNumber(new(big.Rat).Neg(end))
	case !s.Upper && end.Sign() == 0:
		difference = c
	case !s.Upper:
		difference = c + " - " + v
	case end.Sign() == 0:
		difference = "-" + c
	}
	return o.layout(left, []string{factor + w.parenthesised([]string{difference})}), nil
}

// difference is a - b.
func (w *typesetter) difference(a, b Expr) string {
	if n, ok := b.(Number); ok && n == "0" {
		return w.tree(a, levelSum)
	}
	if n, ok := a.(Number); ok && n == "0" {
		return "-" + w.tree(b, levelProduct)
	}
	return strings.Join(append(w.summands(a), "- "+w.tree(b, levelProduct)), " ")
}

package export

import (
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// TeXOptions say how TeX typesets. The zero value is usable.
type TeXOptions struct {
	// Gap is what stands on the left of an inequality's identity, as TeX. It is
	// the gap right - left where the statement has sides, else the target.
	Gap string
	// Names is TeX for variables that TeXName would not typeset well.
	Names map[string]string
	// Width is how many signs a line takes before it is broken, 80 if zero.
	Width int
}

// TeX is an align block of the amsmath package that can be pasted into a paper.
// For an Inequality it shows the identity of its certificate,
//
//	gap = Σ weight · square,
//
// with multiplier and equations where there are any; where the scale and the
// multiplier are one term, the identity is divided by them. A squaring takes two
// rows, gap = x - y with x visibly nonnegative and x² - y² = Σ weight · square.
// For an Identity it shows its equations. Origins stand before the block, as
// comments.
func TeX(s Statement, o TeXOptions) (string, error) {
	rows, err := s.tex(o)
	if err != nil {
		return "", err
	}
	return origins(s) + "\\begin{align}\n" + strings.Join(rows, " \\\\\n") + "\n\\end{align}\n", nil
}

// origins is a comment of TeX for each target that is not the gap as it stands.
func origins(s Statement) string {
	switch s := s.(type) {
	case *Inequality:
		if s.Origin != "" {
			return "% " + strings.Join(strings.Fields(s.Name+": "+s.Origin), " ") + "\n"
		}
	case *Group:
		var b strings.Builder
		for _, x := range s.Statements {
			b.WriteString(origins(x))
		}
		return b.String()
	}
	return ""
}

func (o TeXOptions) ids(variables []string) map[string]string {
	ids := map[string]string{}
	for _, v := range variables {
		if ids[v] = o.Names[v]; ids[v] == "" {
			ids[v] = TeXName(v)
		}
	}
	return ids
}

func (s *Identity) tex(o TeXOptions) ([]string, error) {
	r, err := newRing(s.Variables)
	if err != nil {
		return nil, err
	}
	w := &typesetter{ring: r, ids: o.ids(s.Variables)}
	var rows []string
	for _, q := range s.Equalities {
		for _, e := range []Expr{q.Left, q.Right} {
			if err := inspect(e, r.declared); err != nil {
				return nil, err
			}
		}
		left := strings.Join(w.summands(q.Left), " ")
		rows = append(rows, o.layout(left, w.summands(q.Right))...)
	}
	return rows, nil
}

func (s *Inequality) tex(o TeXOptions) ([]string, error) {
	if s.Claim == nil {
		return nil, errors.New("there is no claim")
	}
	r, err := newRing(s.Claim.Variables)
	if err != nil {
		return nil, err
	}
	w := &typesetter{ring: r, ids: o.ids(s.Claim.Variables)}
	c, err := r.rational(s.Claim, s.Certificate)
	if err != nil {
		return nil, err
	}
	scales := make([][]product, len(s.Scale))
	for i, list := range s.Scale {
		if scales[i], err = r.products(list, c.positive); err != nil {
			return nil, fmt.Errorf("scale: %w", err)
		}
	}
	left := o.Gap
	if left == "" && s.Left != nil && s.Right != nil {
		for _, e := range []Expr{s.Left, s.Right} {
			if err := inspect(e, r.declared); err != nil {
				return nil, err
			}
		}
		left = w.difference(s.Right, s.Left)
	}
	isTarget := left == ""
	if isTarget {
		left = w.poly(r.over(c.target), false)
		scales = nil
	}
	if c.multiplier != nil {
		scales = append(scales, c.multiplier)
	}
	if c.squaring != nil {
		return w.squaring(o, left, scales, c)
	}
	divisor := w.unit()
	var before []string
	for _, list := range scales {
		if len(list) == 1 && list[0].base == nil {
			divisor.times(w.part(list[0], c.positive), 1)
			continue
		}
		before = append(before, w.parenthesised(w.sum(list, c.positive)))
	}
	if len(before) > 0 {
		left = strings.Join(before, " ") + " " + w.parenthesised([]string{left})
	}
	var pieces []string
	for _, t := range c.squares {
		x := w.part(t, c.positive)
		x.times(divisor, -1)
		pieces = append(pieces, w.terms(x, len(pieces) == 0)...)
	}
	pieces = w.equations(pieces, divisor, c)
	if len(pieces) == 0 {
		pieces = []string{"0"}
	}
	return o.layout(left, pieces), nil
}

// equations adds cofactor · equation, over a divisor, to the pieces of a sum.
func (w *typesetter) equations(pieces []string, divisor *part, c *cleared) []string {
	for k, t := range c.cofactors {
		if len(t) == 0 {
			continue
		}
		by, rest := primitive(t)
		x := w.unit()
		x.c.Mul(x.c, by)
		x.times(divisor, -1)
		if one, ok := isConstant(rest); !ok {
			x.others = append(x.others, group{rest, 1})
		} else {
			x.c.Mul(x.c, one)
		}
		x.others = append(x.others, group{w.ring.over(c.zero[k]), 1})
		pieces = append(pieces, w.terms(x, len(pieces) == 0)...)
	}
	return pieces
}

// squaring shows the gap as x - y, and x² - y² by the certificate inside.
func (w *typesetter) squaring(o TeXOptions, left string, scales [][]product, c *cleared) ([]string, error) {
	var before []string
	for _, list := range scales {
		before = append(before, w.parenthesised(w.sum(list, c.positive)))
	}
	if len(before) > 0 {
		left = strings.Join(before, " ") + " " + w.parenthesised([]string{left})
	}
	pieces := w.sum(c.squaring.left, c.positive)
	x := brackets(strings.Join(pieces, " "))
	for _, t := range c.squaring.right {
		y := w.unit()
		y.c.Neg(t.coef)
		y.monomial(t.exps, 1)
		pieces = append(pieces, w.terms(y, len(pieces) == 0)...)
	}
	pieces = w.equations(pieces, w.unit(), c)
	rows := o.layout(left, pieces)
	gap := x + "^{2}"
	if len(c.squaring.right) > 0 {
		gap += " - " + brackets(w.poly(c.squaring.right, false)) + "^{2}"
	}
	o.Gap = gap
	s := &Inequality{Claim: c.squaring.next, Certificate: c.squaring.proof}
	inner, err := s.tex(o)
	return append(rows, inner...), err
}

// over is n/d.
func (r *ring) over(p premise) poly {
	return scale(new(big.Rat).SetFrac(big.NewInt(1), p.d), p.n)
}

// part is c · Π variables^exps · Π others · square².
type part struct {
	c      *big.Rat
	exps   []int
	others []group
	square poly
}

type group struct {
	p     poly
	power int
}

func (w *typesetter) unit() *part {
	return &part{c: big.NewRat(1, 1), exps: make([]int, len(w.ring.names))}
}

// part takes monomials out of a product.
func (w *typesetter) part(t product, positive []premise) *part {
	x := w.unit()
	x.c.Set(t.weight)
	for _, f := range t.factors {
		n := positive[f].n
		if len(n) == 0 {
			x.c.SetInt64(0)
			continue
		}
		c, rest := content(n)
		x.c.Mul(x.c, c)
		if len(rest) == 1 {
			x.c.Mul(x.c, rest[0].coef) // a sign
			x.monomial(rest[0].exps, 1)
			continue
		}
		x.group(rest, 1)
	}
	if t.base != nil {
		c, rest := content(t.base)
		x.c.Mul(x.c, new(big.Rat).Mul(c, c))
		common := slices.Clone(rest[0].exps)
		for _, s := range rest {
			for i, e := range s.exps {
				common[i] = min(common[i], e)
			}
		}
		x.monomial(common, 2)
		if len(rest) > 1 {
			divided := make(poly, len(rest))
			for i, s := range rest {
				e := slices.Clone(s.exps)
				for j, k := range common {
					e[j] -= k
				}
				divided[i] = term{s.coef, e}
			}
			x.square = divided
		}
	}
	return x
}

func (x *part) monomial(exps []int, power int) {
	for i, e := range exps {
		x.exps[i] += power * e
	}
}

func (x *part) group(p poly, power int) {
	key := polyKey(p)
	for i, g := range x.others {
		if polyKey(g.p) == key {
			x.others[i].power += power
			return
		}
	}
	x.others = append(x.others, group{p, power})
}

// times multiplies by y or, with sign -1, divides by it; y has no square.
func (x *part) times(y *part, sign int) {
	if sign > 0 {
		x.c = new(big.Rat).Mul(x.c, y.c)
	} else {
		x.c = new(big.Rat).Quo(x.c, y.c)
	}
	x.monomial(y.exps, sign)
	for _, g := range y.others {
		x.group(g.p, sign*g.power)
	}
}

// layout breaks left = pieces into rows of an align block, of which the last
// carries the equation's number.
func (o TeXOptions) layout(left string, pieces []string) []string {
	limit := o.Width
	if limit <= 0 {
		limit = 80
	}
	var rows []string
	row := left + " &="
	if visible(left) > limit/2 {
		rows = fill("&", splitTerms(left), limit)
		row = "&="
	}
	rows = append(rows, fill(row, pieces, limit)...)
	for i := range rows[:len(rows)-1] {
		rows[i] += ` \notag`
	}
	return rows
}

// fill puts pieces behind row, and on further rows where it is full.
func fill(row string, pieces []string, limit int) []string {
	var rows []string
	width := visible(row)
	for i, p := range pieces {
		n := visible(p)
		if i > 0 && width+n > limit {
			rows = append(rows, row)
			row, width = `&\quad {}`, 4
		}
		row += " " + p
		width += n
	}
	return append(rows, row)
}

// splitTerms splits TeX before + and - that stand outside all brackets.
func splitTerms(s string) []string {
	var out []string
	depth, start := 0, 0
	for i, r := range s {
		switch {
		case r == '{' && (i == 0 || s[i-1] != '\\'):
			depth++
		case r == '}' && (i == 0 || s[i-1] != '\\'):
			depth--
		case r == '(' || r == '[':
			depth++
		case r == ')' || r == ']':
			depth--
		case (r == '+' || r == '-') && depth == 0 && i > 0 && s[i-1] == ' ':
			out = append(out, strings.TrimSpace(s[start:i]))
			start = i
		}
	}
	return append(out, strings.TrimSpace(s[start:]))
}

// visible estimates how many signs TeX prints for s.
func visible(s string) int {
	n := 0
	for i := 0; i < len(s); i++ {
		switch c := s[i]; {
		case c == '\\':
			j := i + 1
			for j < len(s) && (s[j] >= 'a' && s[j] <= 'z' || s[j] >= 'A' && s[j] <= 'Z') {
				j++
			}
			if w := s[i+1 : j]; !invisible[w] {
				n++
			}
			i = max(j-1, i+1)
		case strings.IndexByte("{}^_ &", c) < 0:
			n++
		}
	}
	return n
}

var invisible = words("bigl bigr Bigl Bigr frac tfrac mathit quad notag")

package creases

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"creaseproof/entropy/formula"
	"creaseproof/quadrature/levelset"
)

// kinkCells is the budget of boxes for a level function with absolute values,
// before these are taken apart.
const kinkCells = 20_000

// aside is a function that changes the sign of a level function across a part
// of its level set: another factor.
type aside struct {
	*levelFunction
	of    *factor
	grad  []float64
	zeros int // nodes at which it vanishes to rounding, and touches the level set
	at    []float64
}

// level integrates over a level set: that of each factor.
func (c *combination) level(t *tally, d *domain, onWell bool) (string, error) {
	f := *c.s.shape.level
	s, ok := c.factors(f)
	if ok {
		if err := s.trim(d); err != nil {
			return "", err
		}
	}
	var surfaces []int
	for i, g := range s.list {
		if g.power > 0 {
			surfaces = append(surfaces, i)
		}
	}
	empty := true
	add := func(v share) {
		t.add(v)
		empty = empty && v.empty
		t.sheets = append(t.sheets, v.sheets...)
		t.unsettled = t.unsettled || v.unsettled
	}
	switch {
	case !ok || len(s.list) == 0 || len(s.list) == 1 && s.list[0].power == 1:
		v, reason, err := c.levelOf(t, d, f, nil, 1, onWell)
		if reason != "" || err != nil {
			return reason, err
		}
		add(v)
	default:
		for _, i := range surfaces {
			g := s.list[i]
			if g.power%2 == 0 {
				return fmt.Sprintf("the level function does not change its sign where its factor %s vanishes, which has an even power or stands in an absolute value or a root: the surface has no plus side, and the gradient vanishes there or does not exist: write level = \"%s\", or leave the factor out", text(g.node), text(g.node)), nil
			}
			var others []*aside
			for k := range s.list {
				if k == i {
					continue
				}
				phi, err := c.levelFunction(s.list[k].formulaText, nil)
				if err != nil {
					return "", err
				}
				others = append(others, &aside{levelFunction: phi, of: &s.list[k], grad: make([]float64, len(d.box))})
			}
			v, reason, err := c.levelOf(t, d, g.formulaText, others, s.sign, onWell)
			if reason != "" || err != nil {
				return reason, err
			}
			add(v)
		}
		slices.SortStableFunc(t.sheets, func(a, b Sheet) int { return cmp.Compare(b.Area, a.Area) })
	}
	if empty {
		return fmt.Sprintf("the level set %s = 0 misses the domain%s: by enclosures it has no point there", strings.TrimSpace(f.text.S), c.where()), nil
	}
	return "", nil
}

// text is a formula for a message.
func text(n formula.Node) string {
	const most = 200
	s := formula.Text(n)
	if len(s) > most {
		s = s[:most] + "…"
	}
	return s
}

// trim drops the factors that have no zero in the domain, and counts their signs.
func (s *factoring) trim(d *domain) error {
	var list []factor
	for _, g := range s.list {
		r, err := s.c.rangeOf(g.formulaText, d)
		if err != nil {
			return err
		}
		switch {
		case r.Inf() > 0:
		case r.Sup() < 0:
			s.turn(-1, g.power)
		default:
			list = append(list, g)
		}
	}
	s.list = list
	return nil
}

// levelOf integrates over the level set of a factor of a function that has the
// sign of this factor times sign and the signs of the others.
func (c *combination) levelOf(t *tally, d *domain, f formulaText, others []*aside, sign int, onWell bool) (share, string, error) {
	iso, err := c.isolate(f, d)
	if err != nil {
		return share{}, "", err
	}
	iso.sign *= sign
	list, err := c.unfold(f, d)
	if err != nil {
		return share{}, "", err
	}
	limit := 0
	if list != nil {
		limit = kinkCells
	}
	v, reason, err := c.levelPart(t, d, f.text.S, iso, others, onWell, limit)
	if reason != "" || err != nil || list == nil || !errors.Is(v.limited, levelset.ErrResolution) {
		return v, reason, err
	}
	sum := share{empty: true, unsettled: true}
	for _, p := range list {
		p.sign *= sign
		w, reason, err := c.levelPart(t, d, f.text.S, p, others, onWell, 0)
		if reason != "" || err != nil {
			return w, reason, err
		}
		sum.energy += w.energy
		sum.failure += w.failure
		sum.area += w.area
		sum.undecided += w.undecided
		sum.resolution = math.Max(sum.resolution, w.resolution)
		sum.empty = sum.empty && w.empty
		if w.limited != nil {
			sum.limited = w.limited
		}
	}
	if sum.limited == nil || sum.failure < v.failure {
		return sum, "", nil
	}
	return v, "", nil
}

// levelPart integrates over a level set with conditions.
func (c *combination) levelPart(t *tally, d *domain, name string, iso isolated, others []*aside, onWell bool, limit int) (share, string, error) {
	f := formulaText{c.s.shape.level.text, iso.node}
	phi, err := c.levelFunction(f, nil)
	if err != nil {
		return share{}, "", err
	}
	trims := d.trims()
	for _, n := range iso.conditions {
		g, err := c.levelFunction(formulaText{f.text, n}, nil)
		if err != nil {
			return share{}, "", err
		}
		trims = append(trims, g)
	}
	p := part{phi: phi, systems: [][]levelset.Function{trims}, box: d.box, cells: limit}
	watched := slices.Clone(others)
	for _, g := range trims[len(d.trims()):] {
		watched = append(watched, &aside{levelFunction: g.(*levelFunction), of: &factor{}, grad: make([]float64, len(d.box))})
	}
	if watched != nil || iso.sign < 0 {
		p.sign = c.turning(watched, iso.sign)
	}
	if c.oriented() {
		if p.systems, err = c.sides(iso.node, trims, others); err != nil {
			return share{}, "", err
		}
	}
	before := t.nodes
	v, reason, err := c.within(t, d, p, onWell)
	if e := v.vanishing; e != nil && reason == "" && err == nil {
		switch k := e.Condition - len(d.trims()); {
		case k < 0:
			reason = c.onBoundary(e)
		case k < len(iso.conditions):
			reason = c.onKink(iso.conditions[k], e.Point)
		default:
			reason = c.together(name, e.Point)
		}
	}
	for i, a := range watched {
		if reason != "" || err != nil || a.zeros <= 2 || a.at == nil || 20*a.zeros < t.nodes-before {
			continue
		}
		if reason = c.together(name, a.at); i >= len(others) {
			reason = c.onKink(iso.conditions[i-len(others)], a.at)
		}
	}
	return v, reason, err
}

// together is the reason to refuse a level function two factors of which vanish
// on the same surface.
func (c *combination) together(name string, at []float64) string {
	return fmt.Sprintf("another factor of the level function vanishes on the level set of %s too%s%s: the gradient vanishes there, and which side is plus does not show: write the surface as the level set of one of them", strings.TrimSpace(name), c.place(at, nil), c.where())
}

// onKink is the reason to refuse a level function that ends, or has a kink, on
// its level set.
func (c *combination) onKink(condition formula.Node, at []float64) string {
	return fmt.Sprintf("%s vanishes on a part of the level set%s%s, where the level function ends or has a kink: write it without the root or the absolute value there", text(condition), c.place(at, nil), c.where())
}

// turning is the sign by which the normal of a factor is turned.
func (c *combination) turning(others []*aside, sign int) func(x, n []float64) float64 {
	return func(x, n []float64) float64 {
		s := float64(sign)
		for _, a := range others {
			v := a.Value(x)
			a.Gradient(a.grad, x)
			size := 0.0
			for k, g := range a.grad {
				size += math.Abs(g) * (1 + math.Abs(x[k]))
			}
			if math.Abs(v) <= 1e-12*size && parallel(a.grad, n) {
				if a.zeros++; a.at == nil {
					a.at = slices.Clone(x)
				}
			}
			if v < 0 && a.of.power%2 != 0 {
				s = -s
			}
		}
		return s
	}
}

// parallel reports whether a gradient has the direction of a unit normal, or
// vanishes.
func parallel(g, n []float64) bool {
	var along float64
	for k, x := range g {
		along += x * n[k]
	}
	var off []float64
	for k, x := range g {
		off = append(off, x-along*n[k])
	}
	return length(off) <= 1e-6*length(g)
}

// sides are the systems of conditions with the signs of the other factors.
func (c *combination) sides(node formula.Node, trims []levelset.Function, others []*aside) ([][]levelset.Function, error) {
	systems := [][]levelset.Function{trims}
	for _, a := range others {
		if a.of.power%2 == 0 {
			continue
		}
		side, known, err := c.beyond(node, a)
		if err != nil {
			return nil, err
		}
		if known {
			continue
		}
		var next [][]levelset.Function
		for _, s := range systems {
			next = append(next, append(slices.Clone(s), side), append(slices.Clone(s), opposite{side}))
		}
		if systems = next; len(systems) > 64 {
			return nil, fault(c.s.shape.level.text, "write a surface for each factor", "the level function has too many factors that change its sign")
		}
	}
	return systems, nil
}

// beyond is a function with the sign of another factor on the level set of a
// polynomial: the factor, less a multiple of the polynomial where that lowers its
// degree. It is known where the rest is a constant.
func (c *combination) beyond(node formula.Node, a *aside) (f levelset.Function, known bool, err error) {
	x, err := c.in.Scalar(node)
	if err != nil || c.exact.Ring.Err(x) != nil {
		return a.levelFunction, false, nil
	}
	p, ok := x.IsPoly()
	if !ok || len(a.of.poly.Vars()) == 0 || p.Len() == 0 {
		return a.levelFunction, false, nil
	}
	_, u := p.Leading()
	_, v := a.of.poly.Leading()
	ratio, ok := v.Quo(u)
	if !ok {
		return a.levelFunction, false, nil
	}
	rest := a.of.poly.Sub(p.Scale(ratio))
	if _, constant := rest.IsConst(); constant {
		return nil, !rest.IsZero(), nil
	}
	if rest.TotalDegree() < p.TotalDegree() {
		less := formula.NewSum(formula.Term{X: a.of.node}, formula.Term{Neg: true, X: formula.NewProduct(formula.NewNum(ratio.Big()), node)})
		if less = c.normalForm(less); less != nil {
			g, err := c.levelFunction(formulaText{a.of.text, less}, nil)
			return g, false, err
		}
	}
	return a.levelFunction, false, nil
}

// opposite is -f.
type opposite struct{ levelset.Function }

// Value is the value at x.
func (o opposite) Value(x []float64) float64 { return -o.Function.Value(x) }

// Gradient is the gradient at x.
func (o opposite) Gradient(g, x []float64) {
	o.Function.Gradient(g, x)
	for i := range g {
		g[i] = -g[i]
	}
}

// Range encloses the values on a box.
func (o opposite) Range(box []levelset.Interval) levelset.Interval {
	return o.Function.Range(box).Neg()
}

// GradientRange encloses the partial derivatives on a box.
func (o opposite) GradientRange(g, box []levelset.Interval) {
	o.Function.GradientRange(g, box)
	for i := range g {
		g[i] = g[i].Neg()
	}
}

// oriented reports whether the density may depend on which side is plus.
func (c *combination) oriented() bool {
	if c.s.density == nil || c.s.plus != nil {
		return true
	}
	return c.find(c.s.density.node, func(n formula.Node) bool {
		switch n.(type) {
		case *formula.Num, *formula.Sum, *formula.Product, *formula.Juxt, *formula.Power, *formula.Call, *formula.Name:
			return false
		}
		return true
	}) != nil
}

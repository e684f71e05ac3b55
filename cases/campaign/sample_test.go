package campaign

import (
	"hash/fnv"
	"math/big"
	"slices"
	"strings"

	"creaseproof/entropy/formula"
)

// point gives every name a rational value. What a name is given does not
// depend on when it is asked for.
type point struct {
	seed   uint64
	size   int // which values are drawn: see draw
	values map[string]*big.Rat
	box    map[string][2]*big.Rat
	signed map[string]bool // names that are assumed positive
}

func mix(x uint64) uint64 { // the finaliser of splitmix64
	x += 0x9e3779b97f4a7c15
	x = (x ^ x>>30) * 0xbf58476d1ce4e5b9
	x = (x ^ x>>27) * 0x94d049bb133111eb
	return x ^ x>>31
}

func (p *point) get(name string) *big.Rat {
	if x, ok := p.values[name]; ok {
		return x
	}
	h := fnv.New64a()
	_, _ = h.Write([]byte(name))
	x := p.draw(mix(h.Sum64()^mix(p.seed)), name)
	p.values[name] = x
	return x
}

// draw is a small rational: of sizes 0 and 1 from very few, so that equality
// is met by chance; of the others at several scales.
func (p *point) draw(h uint64, name string) *big.Rat {
	if b, ok := p.box[name]; ok {
		x := new(big.Rat).Sub(b[1], b[0])
		return x.Mul(x, big.NewRat(int64(h%33), 32)).Add(x, b[0])
	}
	var x *big.Rat
	switch p.size {
	case 0:
		x = big.NewRat(int64(h%3)-1, 1)
	case 1:
		x = big.NewRat(int64(h%5)-2, 1+int64(h>>32%2))
	default:
		x = big.NewRat(int64(h%25)-12, 1)
		switch p.size {
		case 3:
			x.Mul(x, big.NewRat(1, 1+int64(h>>32%7)))
		case 4:
			x.Mul(x, big.NewRat(1, 16))
		case 5:
			x.Mul(x, big.NewRat(16, 1))
		case 6:
			x.Mul(x, big.NewRat(1, 1000))
		}
	}
	if p.signed[name] {
		x.Abs(x)
		if x.Sign() == 0 {
			x.SetInt64(1)
		}
	}
	return x
}

func (p *point) clone() *point {
	q := *p
	q.values = make(map[string]*big.Rat, len(p.values))
	for k, x := range p.values {
		q.values[k] = x
	}
	return &q
}

// place is a point with an angle, or two traces, at which a claim is
// evaluated.
type place struct {
	at, plus, minus *point
	angle           int
	normal          number
}

var circle = [][4]int64{{1, 1, 0, 1}, {0, 1, 1, 1}, {3, 5, 4, 5}, {-3, 5, 4, 5}, {5, 13, -12, 13}, {-15, 17, -8, 17}}

func (s *subject) view(p *place) *view {
	c := circle[p.angle]
	return &view{
		world: s.world, at: p.at, plus: p.plus, minus: p.minus, normal: p.normal,
		cos: exactly(big.NewRat(c[0], c[1])), sin: exactly(big.NewRat(c[2], c[3])),
	}
}

// draw makes the place number i of a kind, before it obeys any equation.
func (s *subject) draw(i int, size int) *place {
	signed := map[string]bool{}
	for _, c := range s.assume {
		l, name := formula.Text(c.left), formula.Text(c.right)
		if name == "0" && c.strict {
			signed[l] = true
		}
	}
	fresh := func(salt int) *point {
		return &point{seed: mix(uint64(4*i + salt)), size: size, values: map[string]*big.Rat{}, box: s.box, signed: signed}
	}
	h := mix(uint64(i) + 77)
	p := &place{at: fresh(0), normal: one}
	if size == 3 || h%3 == 0 {
		p.angle = int(h>>8) % len(circle)
	}
	if s.claim.At == "jump" {
		p.plus, p.minus = fresh(1), fresh(2)
		for _, q := range []*point{p.plus, p.minus} { // constants are the same on both sides
			for _, c := range s.file.Space.Constants {
				q.values[c.S] = p.at.get(c.S)
			}
		}
		if h>>20%2 == 0 {
			p.normal = one.neg()
		}
	}
	return p
}

// complete makes a place obey the equations of its claim, by changing derived
// names; false where that fails, or where an assumption does.
func (s *subject) complete(p *place) bool {
	if p.plus != nil {
		for _, q := range []*point{p.plus, p.minus} {
			if !s.ontoWell(p, q) {
				return false
			}
		}
	}
	if len(s.modulo) > 0 && !s.ontoEquations(p) {
		return false
	}
	v := s.view(p)
	for name, b := range s.box {
		if x, ok := p.at.values[name]; ok && (x.Cmp(b[0]) < 0 || x.Cmp(b[1]) > 0) {
			return false
		}
	}
	for _, c := range s.assume {
		l, err1 := v.value(c.left, 0)
		r, err2 := v.value(c.right, 0)
		if err1 != nil || err2 != nil {
			return false
		}
		sign, ok := l.c.add(r.c.neg()).sign()
		if !ok || sign < 0 || sign == 0 && c.strict {
			return false
		}
	}
	return true
}

// residualAt evaluates a formula on one side.
func (s *subject) residualAt(p *place, q *point, f func(*view) (series, error)) (*big.Rat, bool) {
	side := *p
	side.at, side.plus, side.minus = q, nil, nil
	x, err := f(s.view(&side))
	return x.c.lo, err == nil && x.c.exact()
}

// solve gives a name the value at which an expression, affine in the name, is
// zero.
func (s *subject) solve(p *place, q *point, name string, f func(*view) (series, error)) bool {
	var r [3]*big.Rat
	for i := range r {
		q.values[name] = big.NewRat(int64(i), 1)
		var ok bool
		if r[i], ok = s.residualAt(p, q, f); !ok {
			return false
		}
	}
	slope := new(big.Rat).Sub(r[1], r[0])
	if slope.Sign() == 0 || new(big.Rat).Sub(r[2], r[1]).Cmp(slope) != 0 {
		return false
	}
	x := new(big.Rat).Quo(r[0], slope) // r may be shared: it is not changed
	q.values[name] = x.Neg(x)
	return true
}

func (s *subject) ontoWell(p *place, q *point) bool {
	if s.residual == nil {
		return false
	}
	f := func(v *view) (series, error) { return v.value(s.residual, 0) }
	u := s.world.unknowns[0]
	for i := len(s.world.coords) - 1; i >= 0; i-- {
		var m mono
		m[i] = 1
		name := jetName(s.world, u, m)
		old := q.get(name)
		if s.solve(p, q, name, f) {
			return true
		}
		q.values[name] = old
	}
	// Else the unit circle, by its rational points.
	t, ok := q.values["circle"]
	if !ok {
		t = q.draw(mix(q.seed), "circle")
		q.values["circle"] = t
	}
	n := new(big.Rat).Mul(t, t)
	d := new(big.Rat).Add(n, big.NewRat(1, 1))
	x, y := jetName(s.world, u, mono{1}), jetName(s.world, u, mono{0, 1})
	q.values[x] = new(big.Rat).Quo(new(big.Rat).Sub(big.NewRat(1, 1), n), d)
	q.values[y] = new(big.Rat).Quo(new(big.Rat).Add(t, t), d)
	r, ok := s.residualAt(p, q, f)
	return ok && r.Sign() == 0
}

// equation is an equation or one of its derivatives, and the derivative of an
// unknown for which it is solved.
type equation struct {
	f    formula.Node
	by   []string
	name string
}

func (e *equation) value(v *view) (series, error) {
	return v.along(e.by, 0, func(o int) (series, error) { return v.value(e.f, o) })
}

// equations are those of modulo and their derivatives, as far as the orders in
// the claim ask for, each solved for a derivative in which it is affine with a
// constant coefficient; nil where there is none.
func (s *subject) equations(p *place) []equation {
	v := s.view(p)
	need := max(v.depth(s.statement.Left, 0), v.depth(s.statement.Right, 0))
	var list []equation
	for _, f := range s.modulo {
		u, lead, ok := s.leading(p, f)
		if !ok {
			return nil
		}
		for _, m := range indices(len(s.world.coords), max(0, need-v.depth(f, 0))) {
			var by []string
			for i, e := range m {
				for range e {
					by = append(by, s.world.coords[i])
				}
			}
			list = append(list, equation{f, by, jetName(s.world, u, sumOf(lead, m))})
		}
	}
	slices.SortStableFunc(list, func(a, b equation) int { return len(a.by) - len(b.by) })
	return list
}

func (s *subject) ontoEquations(p *place) bool {
	if s.solvable == nil {
		s.solvable = s.equations(p)
	}
	for i := range s.solvable {
		if !s.solve(p, p.at, s.solvable[i].name, s.solvable[i].value) {
			return false
		}
	}
	for i := range s.solvable {
		if r, ok := s.residualAt(p, p.at, s.solvable[i].value); !ok || r.Sign() != 0 {
			return false
		}
	}
	return len(s.solvable) > 0
}

// leading is a derivative in which f is affine with a constant coefficient.
func (s *subject) leading(p *place, f formula.Node) (string, mono, bool) {
	v := s.view(p)
	for _, u := range s.world.unknowns {
		all := indices(len(s.world.coords), v.depth(f, 0))
		slices.Reverse(all)
		for _, m := range all {
			name := jetName(s.world, u, m)
			var slopes [2]*big.Rat
			ok := true
			for i := range slopes {
				q := *p
				q.at = &point{seed: mix(uint64(1000 + i)), size: 2, values: map[string]*big.Rat{}, signed: p.at.signed}
				var r [3]*big.Rat
				for j := range r {
					q.at.values[name] = big.NewRat(int64(j), 1)
					var fine bool
					r[j], fine = s.residualAt(&q, q.at, func(v *view) (series, error) { return v.value(f, 0) })
					ok = ok && fine
				}
				if ok {
					slopes[i] = new(big.Rat).Sub(r[1], r[0])
					ok = new(big.Rat).Sub(r[2], r[1]).Cmp(slopes[i]) == 0
				}
			}
			if ok && slopes[0].Sign() != 0 && slopes[0].Cmp(slopes[1]) == 0 {
				return u, m, true
			}
		}
	}
	return "", mono{}, false
}

// gap is the right side minus the left one, for A <= B and A = B.
func (s *subject) gap(p *place) (number, error) { return s.gapIn(s.view(p)) }

func (s *subject) gapIn(v *view) (number, error) {
	l, err := v.value(s.statement.Left, 0)
	if err != nil {
		return zero, err
	}
	r, err := v.value(s.statement.Right, 0)
	if err != nil {
		return zero, err
	}
	g := r.c.add(l.c.neg())
	if s.statement.Relation == formula.GreaterEqual {
		g = g.neg()
	}
	return g, nil
}

// free lists the names that a place may be moved along: those that evaluating
// has asked for, with "+" and "-" before those of a trace.
func (p *place) free() []string {
	var out []string
	add := func(prefix string, q *point) {
		if q == nil {
			return
		}
		for name := range q.values {
			out = append(out, prefix+name)
		}
	}
	add(".", p.at)
	add("+", p.plus)
	add("-", p.minus)
	slices.Sort(out)
	return out
}

func (p *place) moved(name string, x *big.Rat) *place {
	q := *p
	change := func(a *point) *point {
		b := a.clone()
		b.values[strings.TrimLeft(name, ".+-")] = x
		return b
	}
	switch name[0] {
	case '+':
		q.plus = change(q.plus)
	case '-':
		q.minus = change(q.minus)
	default:
		q.at = change(q.at)
	}
	if q.plus != nil { // what completes it is computed again
		if name[0] != '+' {
			q.plus = q.plus.clone()
		}
		if name[0] != '-' {
			q.minus = q.minus.clone()
		}
	} else if name[0] != '.' {
		return nil
	}
	return &q
}

func (p *place) value(name string) *big.Rat {
	key := name[1:]
	switch name[0] {
	case '+':
		return p.plus.values[key]
	case '-':
		return p.minus.values[key]
	}
	return p.at.values[key]
}

// descend minimises the gap exactly along one name after the other, wherever
// it is a parabola in that name; the least gap comes with its place.
func (s *subject) descend(p *place, sweeps int) (*place, number) {
	g, err := s.gap(p)
	if err != nil || !g.exact() {
		return p, one
	}
	for range sweeps {
		moved := false
		for _, name := range p.free() {
			if s.solved(p, name) {
				continue
			}
			q, h := s.vertex(p, g, name)
			if q != nil && h.lo.Cmp(g.lo) < 0 {
				p, g, moved = q, h, true
				if g.lo.Sign() <= 0 {
					return p, g
				}
			}
		}
		if !moved {
			break
		}
	}
	return p, g
}

// solved reports whether completing determines the name.
func (s *subject) solved(p *place, name string) bool {
	if p.plus != nil {
		x := p.value(name)
		q := p.moved(name, new(big.Rat).Add(x, big.NewRat(1, 1)))
		return q == nil || !s.complete(q) || q.value(name).Cmp(x) == 0
	}
	return slices.ContainsFunc(s.solvable, func(e equation) bool { return "."+e.name == name })
}

const maxBits = 48

func (s *subject) vertex(p *place, g number, name string) (*place, number) {
	at := func(x *big.Rat) (*place, number, bool) {
		q := p.moved(name, x)
		if q == nil || !s.complete(q) {
			return nil, zero, false
		}
		h, err := s.gap(q)
		return q, h, err == nil && h.exact()
	}
	x := p.value(name)
	var f [3]*big.Rat // at x, x + 1, x + 2
	f[0] = g.lo
	for i := 1; i < 3; i++ {
		_, h, ok := at(new(big.Rat).Add(x, big.NewRat(int64(i), 1)))
		if !ok {
			return nil, zero
		}
		f[i] = h.lo
	}
	d1 := new(big.Rat).Sub(f[1], f[0])
	d2 := new(big.Rat).Sub(f[2], f[1])
	curve := new(big.Rat).Sub(d2, d1) // twice the leading coefficient
	if curve.Sign() <= 0 {
		return nil, zero
	}
	step := new(big.Rat).Sub(d1, new(big.Rat).Mul(curve, big.NewRat(1, 2)))
	step.Quo(step.Neg(step), curve)
	y := step.Add(x, step)
	if y.Num().BitLen() > maxBits || y.Denom().BitLen() > maxBits {
		return nil, zero
	}
	q, h, ok := at(y)
	if !ok {
		return nil, zero
	}
	return q, h
}

package campaign

import (
	"context"
	"fmt"
	"hash/fnv"
	"math/big"
	"math/rand/v2"
	"os"
	"runtime"
	"runtime/debug"
	"strings"
	"sync"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases"
	"creaseproof/cases/library"
	"creaseproof/cases/run"
	"creaseproof/entropy/formula"
	"creaseproof/identity"
)

// tally counts mutants of a group of claims.
type tally struct {
	claims, mutants, refused int
	byTruth                  [3]map[identity.Verdict]int // by what the sampler says
}

// What the sampler says of a mutant.
const (
	unknown = iota // no point was found at which it fails
	failing
	holds // an identity that holds at every point tried
)

func (c *tally) add(d *tally) {
	c.claims += d.claims
	c.mutants += d.mutants
	c.refused += d.refused
	for i := range c.byTruth {
		if c.byTruth[i] == nil {
			c.byTruth[i] = map[identity.Verdict]int{}
		}
		for v, n := range d.byTruth[i] {
			c.byTruth[i][v] += n
		}
	}
}

func newTally() *tally {
	c := &tally{}
	c.add(&tally{})
	return c
}

func (c *tally) falseOnes() int {
	n := 0
	for _, k := range c.byTruth[failing] {
		n += k
	}
	return n
}

func (c *tally) row(name string) string {
	f, u := c.byTruth[failing], c.byTruth[unknown]
	return fmt.Sprintf("%-28s %6d %7d %7d %6d %8d %5d %9d %6d | %6d %7d %5d %9d", name, c.claims, c.mutants, c.refused,
		c.falseOnes(), f[identity.Refuted], f[identity.Open], f[identity.Supported], f[identity.Proved],
		u[identity.Proved]+c.byTruth[holds][identity.Proved], u[identity.Refuted], u[identity.Open], u[identity.Supported])
}

const heading = "                             claims mutants refused  false  refuted  open supported proved | others: proved refuted open supported"

// decide gives the verdict of the program on the text of a case file; ok is
// false where the mutant means nothing.
func decide(t *testing.T, text string) (r *run.Result, ok bool) {
	c, err := cases.Parse("mutant.toml", []byte(text))
	if err != nil {
		return nil, false
	}
	opt := run.Options{Options: identity.DefaultOptions()}
	opt.Jobs, opt.Samples, opt.Starts = 1, 20_000, 16
	out := run.Check(context.Background(), []*cases.Case{c}, opt)
	require.Len(t, out.Results, 1, text)
	if out.Results[0].Err != nil {
		return nil, false
	}
	assert.False(t, out.Results[0].Failed, "%s\n%s", text, out.Results[0].Record.Reason)
	return out.Results[0], true
}

func seedOf(s *subject) *rand.Rand {
	h := fnv.New64a()
	_, _ = fmt.Fprint(h, s.file.Name, "/", s.claim.Name)
	return rand.New(rand.NewPCG(h.Sum64(), 1))
}

// each runs f for the subjects on all cores and adds the tallies by case.
func each(t *testing.T, keep func(*subject) bool, f func(*testing.T, *subject) *tally) {
	var list []*subject
	for _, name := range library.Names() {
		for _, s := range subjects(t, name) {
			if keep(s) {
				list = append(list, s)
			}
		}
	}
	results := make([]*tally, len(list))
	next := make(chan int)
	var wg sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		wg.Go(func() {
			for i := range next {
				results[i] = f(t, list[i])
			}
		})
	}
	for i := range list {
		next <- i
	}
	close(next)
	wg.Wait()
	total := newTally()
	lines := []string{heading}
	last, group := "", newTally()
	flush := func() {
		if last != "" {
			lines = append(lines, group.row(last))
		}
		group = newTally()
	}
	for i, s := range list {
		if s.file.Name != last {
			flush()
			last = s.file.Name
		}
		if results[i] != nil {
			group.add(results[i])
			total.add(results[i])
		}
	}
	flush()
	lines = append(lines, total.row("all"))
	t.Log("\n" + strings.Join(lines, "\n"))
	assert.LessOrEqual(t, 100*total.refused, total.mutants, "mutants that mean nothing")
	bad := total.byTruth[failing]
	assert.Zero(t, bad[identity.Proved], "false mutants that are proved")
	assert.NotZero(t, total.falseOnes())
	assert.GreaterOrEqual(t, float64(bad[identity.Refuted]), 0.95*float64(total.falseOnes()), "false mutants that are refuted")
}

func TestMain(m *testing.M) {
	debug.SetGCPercent(400) // rationals are short-lived
	os.Exit(m.Run())
}

// TestInequalities changes every true inequality that is claimed at points. A
// bound up to a divergence says nothing at a point, so it has no mutants here.
func TestInequalities(t *testing.T) {
	count, points := 50, 1500
	if testing.Short() {
		count, points = 3, 200
	}
	keep := func(s *subject) bool {
		return s.inequality() && s.expected() == "proved" && !s.claim.Divergence
	}
	each(t, keep, func(t *testing.T, s *subject) *tally { return s.campaign(t, count, points) })
}

// TestSamplerFindsFalseClaims takes the false inequalities of the library: the
// sampler can do without the program.
func TestSamplerFindsFalseClaims(t *testing.T) {
	claims, found := 0, 0
	for _, name := range library.Names() {
		for _, s := range subjects(t, name) {
			if !s.inequality() || s.expected() != "refuted" || s.claim.Divergence {
				continue
			}
			claims++
			if p := (&mutant{subject: s}).refute(nil, nil, 300, true); p != nil {
				found++
			} else {
				t.Logf("not found: %s: %s", name, s.claim.Name)
			}
		}
	}
	t.Logf("%d of %d", found, claims)
	assert.GreaterOrEqual(t, claims, 25)
	assert.GreaterOrEqual(t, 10*found, 7*claims)
}

func (s *subject) campaign(t *testing.T, count, points int) *tally {
	label := s.file.Name + ": " + s.claim.Name
	equal, near := s.search(100 + 4*count)
	where := (&mutant{subject: s}).refute(equal, near, points, true)
	assert.Nil(t, where, "%s: a claim of the library fails at %s", label, where)
	c := newTally()
	c.claims = 1
	all := mutants(s, count, seedOf(s))
	if !testing.Short() {
		assert.GreaterOrEqual(t, len(all), 50, label)
	}
	for _, m := range all {
		c.mutants++
		r, ok := decide(t, m.text)
		if !ok {
			c.refused++
			continue
		}
		verdict := r.Record.Verdict
		truth := unknown
		tried := points
		if verdict != identity.Proved {
			tried = min(points, 200)
		}
		where := m.refute(equal, near, tried, verdict != identity.Refuted)
		if where != nil {
			truth = failing
		}
		c.byTruth[truth][verdict]++
		if truth == failing && verdict == identity.Proved {
			assert.Fail(t, "a false claim is proved", "%s\n%s\nfails at %s", label, m.text, where)
		}
		if verdict != identity.Refuted && verdict != identity.Proved {
			known := "not known to be false"
			if truth == failing {
				known = "false at " + where.String()
			}
			t.Logf("%s: %s: %s, %s", verdict, label, m.change, known)
		}
		if verdict == identity.Refuted {
			m.confirm(t, label, r)
		}
	}
	return c
}

// confirm evaluates the witness of a refutation on its own.
func (m *mutant) confirm(t *testing.T, label string, r *run.Result) {
	w := r.Record.Witness
	if w == nil || len(w.Plus) > 0 || len(w.Jet) == 0 || len(m.modulo) > 0 {
		return
	}
	p := m.draw(0, 2)
	for name, x := range w.Jet {
		v, ok := new(big.Rat).SetString(x)
		if !ok {
			return
		}
		p.at.values[name] = v
	}
	v := m.view(p)
	if a, ok := w.Angle[m.world.angle]; ok {
		c, ok1 := new(big.Rat).SetString(a.Cos)
		s, ok2 := new(big.Rat).SetString(a.Sin)
		if !ok1 || !ok2 {
			return
		}
		v.cos, v.sin = exactly(c), exactly(s)
	}
	g, err := m.gapIn(v)
	if err != nil {
		return
	}
	sign, ok := g.sign()
	if ok && (m.inequality() && sign >= 0 || sign == 0) {
		assert.Fail(t, "a witness at which the claim does not fail", "%s\n%s\n%v %v\n%v", label, m.text, w.Jet, w.Angle, g.lo)
	}
}

// search finds places of the original claim: some where it holds with
// equality, and some where its gap is small.
func (s *subject) search(places int) (equal, near []*place) {
	for i := range places {
		p := s.draw(i, i%3)
		if _, err := s.gap(p); err != nil && s.claim.At != "jump" {
			continue
		}
		if !s.complete(p) {
			continue
		}
		g, err := s.gap(p)
		if err != nil {
			continue
		}
		if !g.isZero() && len(near) < places/6 {
			p, g = s.descend(p, 2)
			near = append(near, p)
		}
		if g.isZero() {
			equal = append(equal, p)
		}
	}
	if len(equal) > 80 {
		equal = equal[:80]
	}
	return equal, near
}

// refute looks for a place at which the mutant fails: at the given places, at
// random ones, and where its own gap is small.
func (m *mutant) refute(equal, near []*place, points int, thorough bool) *place {
	fails := func(p *place) bool {
		if _, err := m.gap(p); err != nil && p.plus == nil { // asks for all names
			return false
		}
		if !m.complete(p) {
			return false
		}
		g, err := m.gap(p)
		if err != nil {
			return false
		}
		sign, ok := g.sign()
		return ok && sign < 0
	}
	for _, list := range [][]*place{equal, near} {
		for _, p := range list {
			if q := p.copied(); fails(q) {
				return q
			}
		}
	}
	for i := range points {
		if p := m.draw(10_000+i, i%7); fails(p) {
			return p
		}
	}
	if !thorough {
		return nil
	}
	for i := range 12 {
		p := m.draw(50_000+i, i%7)
		if len(near) > 0 && i%2 == 0 {
			p = near[i%len(near)].copied()
		}
		if _, err := m.gap(p); err != nil && p.plus == nil || !m.complete(p) {
			continue
		}
		if q, g := m.descend(p, 1); g.exact() && g.lo.Sign() < 0 {
			return q
		}
	}
	return nil
}

func (p *place) copied() *place {
	q := *p
	q.at = p.at.clone()
	if p.plus != nil {
		q.plus, q.minus = p.plus.clone(), p.minus.clone()
	}
	return &q
}

func (p *place) String() string {
	if p == nil {
		return "no place"
	}
	var b strings.Builder
	for _, name := range p.free() {
		fmt.Fprintf(&b, "%s=%s ", strings.TrimPrefix(name, "."), p.value(name).RatString())
	}
	fmt.Fprintf(&b, "angle=%v", circle[p.angle])
	return b.String()
}

// TestIdentities changes every true identity: what is proved has to hold at
// every point tried.
func TestIdentities(t *testing.T) {
	count := 30
	if testing.Short() {
		count = 4
	}
	keep := func(s *subject) bool {
		return s.statement.Relation == formula.Equal && s.expected() == "proved"
	}
	each(t, keep, func(t *testing.T, s *subject) *tally {
		c := newTally()
		if truth := s.identity(20); truth != holds {
			assert.NotEqual(t, failing, truth, "%s: %s", s.file.Name, s.claim.Name)
			return c // outside what the sampler evaluates
		}
		c.claims = 1
		for _, m := range mutants(s, count, seedOf(s)) {
			c.mutants++
			r, ok := decide(t, m.text)
			if !ok {
				c.refused++
				continue
			}
			truth := m.identity(20)
			c.byTruth[truth][r.Record.Verdict]++
			label := s.file.Name + ": " + s.claim.Name
			switch verdict := r.Record.Verdict; {
			case verdict == identity.Proved && truth != holds:
				assert.Fail(t, "proved, and not confirmed", "%s\n%s", label, m.text)
			case verdict != identity.Refuted && truth == failing:
				t.Logf("%s and false: %s: %s", verdict, label, m.change)
			case verdict == identity.Refuted && truth == holds:
				assert.Fail(t, "refuted, and it holds at every point tried", "%s\n%s", label, m.text)
			}
			if r.Record.Verdict == identity.Refuted && !s.claim.Divergence {
				m.confirm(t, label, r)
			}
		}
		return c
	})
}

// identity evaluates both sides at n places.
func (s *subject) identity(n int) int {
	seen := 0
	for i := 0; i < 10*n && seen < n; i++ {
		p := s.draw(i, 2+i%5)
		v := s.view(p)
		if _, err := s.gap(p); err != nil && p.plus == nil && !s.claim.Divergence {
			continue
		}
		if !s.complete(p) {
			continue
		}
		for _, u := range s.checks() {
			g, err := s.identityGap(v, u)
			if err != nil {
				continue
			}
			if sign, ok := g.sign(); ok && sign != 0 {
				return failing
			}
			seen++
		}
	}
	if seen < n/2 {
		return unknown
	}
	return holds
}

// checks lists the unknowns whose Euler expression has to vanish, or just ""
// where the sides themselves are compared.
func (s *subject) checks() []string {
	if s.claim.Divergence {
		return s.world.unknowns
	}
	return []string{""}
}

func (s *subject) identityGap(v *view, u string) (number, error) {
	if u == "" {
		return s.gapIn(v)
	}
	left := formula.NewSum(formula.Term{X: s.statement.Left}, formula.Term{Neg: true, X: s.statement.Right})
	e, err := v.euler(left, u, 0)
	return e.c, err
}

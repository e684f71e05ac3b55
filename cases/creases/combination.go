package creases

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"math"
	"math/big"
	"slices"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
	"creaseproof/quadrature"
)

// precision is that of claimed energies and of coordinates, in bits.
const precision = 200

// combination is a surface at one choice of its values. The values are named
// formulas of its setting.
type combination struct {
	ctx    context.Context
	s      *Surface
	set    *entropy.Setting
	o      Options
	in     *entropy.Interpreter[algebra.Fraction]
	exact  *entropy.Exact
	values map[string]string      // as written
	chosen map[string]formulaText // by folded name
	params []float64              // of the patch, at the last position computed
	fixed  map[string]bool        // which names are without variables
	folded *entropy.Setting       // see numeric
}

// Evaluate integrates the surface for every combination of its values, the
// first listed varying slowest. See Evaluator.Evaluate.
func (s *Surface) Evaluate(ctx context.Context, o Options) ([]Result, error) {
	if err := s.ev.look(ctx); err != nil {
		return nil, err
	}
	var results []Result
	at := make([]int, len(s.values))
	for {
		if err := ctx.Err(); err != nil {
			return results, err
		}
		c, err := s.combine(ctx, at, o)
		var r Result
		if err == nil {
			r, err = c.evaluate()
		}
		switch {
		case ctx.Err() != nil && err != nil: // at whatever place it was met
			return results, ctx.Err()
		case err != nil:
			return results, err
		}
		results = append(results, r)
		k := len(at) - 1
		for ; k >= 0; k-- {
			if at[k]++; at[k] < len(s.values[k].list) {
				break
			}
			at[k] = 0
		}
		if k < 0 {
			return results, nil
		}
	}
}

// withEnergy is the setting with the energy R²/(2 c) + c L²/2 where the model
// gives a residual and a bending and no energy.
func withEnergy(set *entropy.Setting) *entropy.Setting {
	m := set.Model
	if m.Residual == nil || m.Bending == nil || m.Energy != nil {
		return set
	}
	name := "c"
	for slices.Contains(set.Coordinates, name) || slices.Contains(set.Unknowns, name) || slices.Contains(set.Constants, name) || set.Lets[name] != nil ||
		set.Frame != nil && (name == set.Frame.Angle || slices.Contains(set.Frame.Axes[:], name)) {
		name += "c"
	}
	out := *set
	out.Constants = append(slices.Clone(set.Constants), name)
	square := func(n formula.Node) formula.Node { return formula.NewPower(n, big.NewRat(2, 1)) }
	two, c := formula.NewInt(2), formula.NewName(name)
	out.Model.Energy = formula.NewSum(
		formula.Term{X: formula.NewQuotient(square(m.Residual), formula.NewProduct(two, c))},
		formula.Term{X: formula.NewQuotient(formula.NewProduct(c, square(m.Bending)), two)})
	return &out
}

// look finds out once what profile cost the model has.
func (e *Evaluator) look(ctx context.Context) error {
	if e.looked {
		return nil
	}
	p, err := withEnergy(e.set).NewProfile(ctx)
	if ctx.Err() != nil {
		return ctx.Err()
	}
	e.profile, e.profileErr, e.looked = p, err, true
	e.layered = err == nil && p.Layered()
	return nil
}

func (s *Surface) combine(ctx context.Context, at []int, o Options) (*combination, error) {
	set := *s.ev.set
	set.Lets = maps.Clone(set.Lets)
	if set.Lets == nil {
		set.Lets = map[string]formula.Node{}
	}
	c := &combination{ctx: ctx, s: s, set: &set, o: o, values: map[string]string{}, chosen: map[string]formulaText{}, params: make([]float64, len(s.params)), fixed: map[string]bool{}}
	for i, v := range s.values {
		f := v.list[at[i]]
		set.Lets[v.name] = f.node
		c.chosen[v.name] = f
		c.values[v.written] = strings.TrimSpace(f.text.S)
	}
	var err error
	if c.in, c.exact, err = set.NewExact(ctx); err != nil {
		return nil, placed(s.place, err)
	}
	for _, v := range s.values {
		if _, err := c.enclose(c.chosen[v.name]); err != nil {
			return nil, err
		}
	}
	return c, nil
}

// enclose is the value of a formula without variables.
func (c *combination) enclose(f formulaText) (enclosure.Interval, error) {
	x, err := c.in.Scalar(f.node)
	if err == nil {
		err = c.exact.Ring.Err(x)
	}
	if err != nil {
		return enclosure.Interval{}, placed(f.text, err)
	}
	for _, v := range c.exact.Ring.Support(x) {
		switch y := c.exact.Ring.Symbol(v); y.Kind {
		case jet.Constant:
			return enclosure.Interval{}, fault(f.text, giveValue(y.Name), "the constant %s has no value", y.Name)
		case jet.Coordinate, jet.Derivative:
			return enclosure.Interval{}, fault(f.text, "write a number", "%s has no value here", y.Name)
		}
	}
	i := c.exact.Ring.Enclose(x, nil, precision)
	if i.IsEntire() || !i.IsBounded() {
		return i, fault(f.text, "", "%s has no finite value%s", strings.TrimSpace(f.text.S), c.where())
	}
	return i, nil
}

// where names the values, for a message.
func (c *combination) where() string {
	if len(c.values) == 0 {
		return ""
	}
	var parts []string
	for _, v := range c.s.values {
		parts = append(parts, v.written+" = "+c.values[v.written])
	}
	return " for " + strings.Join(parts, ", ")
}

// number is the float64 nearest to the middle of the enclosure.
func (c *combination) number(f formulaText) (float64, error) {
	i, err := c.enclose(f)
	if err != nil {
		return 0, err
	}
	mid := new(big.Float).SetPrec(2*precision).Add(i.Lo(), i.Hi())
	x, _ := mid.Quo(mid, big.NewFloat(2)).Float64()
	if math.IsInf(x, 0) {
		return x, fault(f.text, "", "%s is too large%s", strings.TrimSpace(f.text.S), c.where())
	}
	return x, nil
}

func (c *combination) numbers(list []formulaText) ([]float64, error) {
	out := make([]float64, len(list))
	for i, f := range list {
		var err error
		if out[i], err = c.number(f); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// evaluate integrates and compares.
func (c *combination) evaluate() (Result, error) {
	s := c.s
	r := Result{Surface: s.Name, Values: c.values, Expected: s.Expected}
	rel, allowed := defaultAccuracy, noDigits
	if s.src.Within != nil {
		rel, _ = s.src.Within.Float64()
		allowed = rel
	}
	if s.energy != nil {
		x, err := c.number(*s.energy)
		if err != nil {
			return r, err
		}
		r.Claimed = &x
	}
	if s.src.Mesh != "" {
		return c.certified(c.meshed(r, rel, allowed))
	}
	if reason := c.broken(); reason != "" {
		return r.refuse(reason), nil
	}
	if s.shape.implicit() {
		return c.certified(c.implicit(r, rel, allowed))
	}
	surface, err := c.surfaceOf()
	if err != nil {
		return r, err
	}
	tr, options, err := c.traces()
	if err != nil {
		return r, err
	}
	density, inexact, err := c.density()
	if err != nil {
		return r, err
	}
	options.MaxEvaluations, options.DensityError = c.o.MaxEvaluations, inexact
	options.Rel = math.Max(1e-13, math.Min(1e-11, rel/10))
	if r.Claimed != nil && *r.Claimed == 0 {
		options.Abs = rel / 10
	}
	reason, onWell, err := c.offWell()
	if err != nil {
		return r, err
	}
	if reason != "" {
		return r.refuse(reason), nil
	}
	if onWell {
		options.Well = nil
	}
	reason, continuous := c.torn()
	if reason != "" {
		return r.refuse(reason), nil
	}
	if continuous {
		options.Continuity = settled
	}
	q, err := c.integrate(surface, tr, density, options)
	if c.ctx.Err() != nil {
		return r, c.ctx.Err()
	}
	limited := errors.Is(err, quadrature.ErrBudget) || errors.Is(err, quadrature.ErrAccuracy)
	r.Evaluations = q.Evaluations
	if err != nil && !limited {
		return r.refuse(c.explain(err)), nil
	}
	r.Energy, r.Error, r.Area = &q.Energy, &q.Error, &q.Area
	c.compare(&r, rel, allowed)
	if limited && r.Verdict != claim.Supported && !(q.Error <= rel*math.Abs(q.Energy)) {
		r.Verdict = claim.Open
		r.add("the accuracy asked for was not reached: " + strings.TrimPrefix(err.Error(), "quadrature: "))
	}
	if err := c.slice(surface, tr, options, &r); err != nil {
		return r, err
	}
	if err := c.certify(&r); err != nil {
		return r, err
	}
	r.met()
	return r, nil
}

// refuse is a result without an energy.
func (r Result) refuse(reason string) Result {
	r.Verdict = claim.Open
	if r.Expected == "" {
		r.Expected = claim.Supported
	}
	r.Met = r.Verdict == r.Expected
	r.add(reason)
	return r
}

func (r *Result) add(reason string) {
	if r.Reason != "" {
		r.Reason += "; "
	}
	r.Reason += reason
}

// settled is the relative tolerance of the numerical check of what holds by
// exact arithmetic.
const settled = 1e-9

// rounding is the relative error of the claimed value after rounding, with a
// margin.
const rounding = 0x1p-52

// compare compares the energy with the claimed one: they may differ by the
// error and by allowed, and the error may be accuracy. Both are relative to the
// claimed energy, or absolute where that is 0.
func (c *combination) compare(r *Result, accuracy, allowed float64) {
	if r.Claimed == nil {
		if r.Expected != "" {
			r.add("the surface claims no energy, so that there is nothing to decide")
		}
		return
	}
	size := math.Abs(*r.Claimed)
	unit := size
	if size == 0 {
		unit = 1
	}
	difference := math.Abs(*r.Energy - *r.Claimed)
	switch {
	case !(difference <= *r.Error+allowed*unit+rounding*size):
		r.Verdict = claim.Open
		r.add(fmt.Sprintf("the energy is %.17g with an estimated error of %.2g, the claimed energy %.17g: they differ by %.3g, and floating-point numbers refute nothing", *r.Energy, *r.Error, *r.Claimed, difference))
		if c.s.src.Within == nil && difference <= 1e-3*size {
			r.add(fmt.Sprintf("if the claim has been rounded, allow for it: within = %.0e", math.Pow(10, math.Ceil(math.Log10(difference/size)))))
		}
	case !(*r.Error <= accuracy*unit+1e-12*size):
		r.Verdict = claim.Open
		r.add(fmt.Sprintf("the energy %.17g agrees with the claimed %.17g, but its estimated error %.2g is more than the %.2g allowed", *r.Energy, *r.Claimed, *r.Error, accuracy*unit))
	default:
		r.Verdict = claim.Supported
	}
}

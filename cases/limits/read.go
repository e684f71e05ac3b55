package limits

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/limit"
)

// reader makes the problem of one limit at one choice of its values. The
// values are named formulas of its setting.
type reader struct {
	ctx   context.Context
	c     *cases.Case
	l     *casefile.Limit
	set   *entropy.Setting
	scope *formula.Scope // with the names of the values
	small string         // the name of eps

	chosen map[string]string // values, as they are written
	n      int               // coordinates
}

func (r *reader) fault(t source.Text, advice, format string, args ...any) error {
	return r.c.Fault(source.Pos{Line: t.Line, Col: t.Col}, advice, format, args...)
}

// maxCombinations bounds how often one limit is repeated.
const maxCombinations = 10_000

// Evaluate evaluates a limit for every combination of its values, the first
// listed varying slowest. An error is a mistake in the file with its place, or
// the context's; the values so far come with it, the last one unfinished where
// the context ended between two eps. Up to jobs eps are integrated at once; no
// result depends on it.
func Evaluate(ctx context.Context, c *cases.Case, l *casefile.Limit, jobs int) ([]Value, error) {
	total := 1
	for _, v := range l.Values {
		if total *= len(v.List); total > maxCombinations {
			return nil, c.Fault(v.Name.Pos, "make a limit for each part of them", "the values have more than %d combinations", maxCombinations)
		}
	}
	var out []Value
	at := make([]int, len(l.Values))
	for range total {
		v, err := evaluate(ctx, c, l, at, 0, jobs)
		if v != nil {
			out = append(out, *v)
		}
		if err != nil {
			return out, err
		}
		for k := len(at) - 1; k >= 0; k-- {
			if at[k]++; at[k] < len(l.Values[k].List) {
				break
			}
			at[k] = 0
		}
	}
	return out, nil
}

// At evaluates a limit at one choice of its values, which are as they are
// written in the file. With first > 0 it stops, unfinished, after so many eps.
func At(ctx context.Context, c *cases.Case, l *casefile.Limit, values map[string]string, first int) (*Value, error) {
	if len(values) != len(l.Values) {
		return nil, fmt.Errorf("%d values for %d parameters", len(values), len(l.Values))
	}
	at := make([]int, len(l.Values))
	for k, v := range l.Values {
		x, ok := values[v.Name.S]
		if at[k] = slices.IndexFunc(v.List, func(t source.Text) bool { return strings.TrimSpace(t.S) == x }); !ok || at[k] < 0 {
			return nil, fmt.Errorf("the limit is not repeated for %s = %q", v.Name.S, cases.Clip(x, 40))
		}
	}
	return evaluate(ctx, c, l, at, first, 1)
}

// evaluate evaluates a limit at one choice of its values. Where the context
// ends, what was found comes with its error.
func evaluate(ctx context.Context, c *cases.Case, l *casefile.Limit, at []int, first, jobs int) (*Value, error) {
	r, err := newReader(ctx, c, l, at)
	if err != nil {
		return nil, err
	}
	v := Empty(l)
	if len(l.Values) > 0 {
		v.Values = r.chosen
	}
	eps, err := r.falling()
	if err != nil {
		return nil, err
	}
	p, err := r.problem()
	if err != nil {
		return nil, err
	}
	if err := r.target(p, &v); errors.Is(err, limit.ErrDomain) {
		return nil, c.Fault(l.Pos, "give a domain with a volume", "%s", strings.TrimPrefix(err.Error(), "limit: "))
	} else if err != nil {
		return nil, err
	}
	short := first > 0 && first < len(eps)
	if short {
		eps = eps[:first]
	}
	list := r.energies(p, eps, jobs)
	for i, x := range list {
		var infinite *limit.InfiniteError
		switch {
		case errors.As(x.err, &infinite):
			v.infinite(r, infinite)
			return &v, nil
		case errors.Is(x.err, limit.ErrWork):
			v.Judge(l)
			v.Outcome, v.Met = Undecided, false
			v.Reason = fmt.Sprintf("the work allowed for one eps was used up at eps = %.6g before the energy was known to one per mille: write fewer or greater eps, a smaller domain or fewer branches", eps[i])
			if i > 0 {
				v.Reason += fmt.Sprintf("; what is shown is of the first %d of %d eps", i, len(eps))
			}
			return &v, nil
		case x.err != nil && ctx.Err() == nil:
			return nil, r.c.Fault(l.Pos, r.outside(p, eps[i]), "%q at eps = %g: %s", cases.Clip(l.Name, 40), eps[i], strings.TrimPrefix(x.err.Error(), "limit: "))
		case x.err != nil || !x.done:
			for _, x := range list[i:] { // those that were found beside it
				if x.done && x.err == nil {
					v.add(x.energy)
				}
			}
			if len(v.Eps) == 0 {
				return nil, ctx.Err()
			}
			return &v, ctx.Err()
		}
		v.add(x.energy)
	}
	if short {
		return &v, nil
	}
	v.Judge(l)
	return &v, nil
}

// outside is advice where branches are evaluated beyond the domain.
func (r *reader) outside(p *limit.Problem, eps float64) string {
	m, ok := p.Smoothing.(*limit.Mollifier)
	if !ok {
		return ""
	}
	return fmt.Sprintf("a mollified function needs its branches up to the distance %.3g from the domain: make the domain, the width or eps smaller", m.Radius(eps))
}

func newReader(ctx context.Context, c *cases.Case, l *casefile.Limit, at []int) (*reader, error) {
	set := *c.Setting
	set.Lets = maps.Clone(set.Lets)
	if set.Lets == nil {
		set.Lets = map[string]formula.Node{}
	}
	r := &reader{ctx: ctx, c: c, l: l, set: &set, n: len(set.Coordinates), chosen: map[string]string{}}
	if r.n < 1 || r.n > 3 || len(set.Unknowns) != 1 {
		return nil, c.Fault(l.Pos, "declare one to three coordinates and one unknown", "approximations in %d coordinates of %d unknowns", r.n, len(set.Unknowns))
	}
	scope, err := set.Scope(false)
	if err != nil {
		return nil, err
	}
	plain, err := formula.NewScope(formula.ScopeConfig{})
	if err != nil {
		return nil, err
	}
	for i, v := range l.Values {
		name, err := formula.FoldName(v.Name.S)
		if err == nil {
			scope, err = scope.With(v.Name.S)
		}
		if err != nil {
			return nil, c.Place(err, v.Name.Pos)
		}
		node, err := plain.ParseExpr(v.List[at[i]])
		if err != nil {
			return nil, err
		}
		set.Lets[name] = node
		r.chosen[v.Name.S] = strings.TrimSpace(v.List[at[i]].S)
	}
	r.scope = scope
	for _, k := range set.Constants {
		if set.Lets[k] == nil && (r.small == "" || k == "eps") {
			r.small = k
		}
	}
	if set.Model.Residual == nil || set.Model.Bending == nil {
		return nil, c.Fault(l.Pos, "add [model] with residual, bending and energy", "a limit needs the residual and the bending of a model")
	}
	return r, nil
}

// program compiles a formula in the given inputs, with its derivatives by the
// coordinates up to the given order.
func (r *reader) compile(t source.Text, n formula.Node, order int, inputs ...entropy.Input) (*program.Program, error) {
	in, num := r.set.NewNumeric(nil, inputs...)
	num.Closed = true
	at := source.Pos{Line: t.Line, Col: t.Col}
	x, err := in.Scalar(n)
	if err == nil {
		err = num.Err()
	}
	if err != nil {
		return nil, r.c.Place(err, at)
	}
	outs := []program.Ref{x}
	if order > 0 {
		for i := range r.n {
			d, err := num.Total(x, i)
			if err != nil {
				return nil, r.c.Place(err, at)
			}
			outs = append(outs, d)
		}
	}
	if order > 1 {
		for i := range r.n {
			for j := i; j < r.n; j++ {
				d, err := num.Total(outs[1+i], j)
				if err != nil {
					return nil, r.c.Place(err, at)
				}
				outs = append(outs, d)
			}
		}
	}
	p, err := num.Compile(outs...)
	if err != nil {
		return nil, r.c.Place(err, at)
	}
	return p, nil
}

// number is the value of a formula without variables.
func (r *reader) number(t source.Text) (float64, error) {
	n, err := r.scope.ParseExpr(t)
	if err != nil {
		return 0, err
	}
	p, err := r.compile(t, n, 0)
	if err != nil {
		return 0, err
	}
	var out [1]float64
	p.Eval(p.NewWorkspace(), nil, out[:])
	if math.IsNaN(out[0]) || math.IsInf(out[0], 0) {
		return 0, r.fault(t, "", "%s has no finite value", strings.TrimSpace(t.S))
	}
	return out[0], nil
}

func (r *reader) numbers(list []source.Text) ([]float64, error) {
	var out []float64
	for _, t := range list {
		x, err := r.number(t)
		if err != nil {
			return nil, err
		}
		out = append(out, x)
	}
	return out, nil
}

// falling are the values of eps.
func (r *reader) falling() ([]float64, error) {
	eps, err := r.numbers(r.l.Eps)
	if err != nil {
		return nil, err
	}
	for i, e := range eps {
		if !(e > 0) {
			return nil, r.fault(r.l.Eps[i], "write positive values, the greatest first", "eps = %g is not positive", e)
		}
		if i > 0 && e >= eps[i-1] {
			return nil, r.fault(r.l.Eps[i], "write the greatest first", "eps does not fall: %g after %g", e, eps[i-1])
		}
	}
	return eps, nil
}

func (r *reader) coordinates() []entropy.Input {
	var in []entropy.Input
	for i := range r.n {
		in = append(in, entropy.Input{Kind: entropy.CoordinateInput, Place: i})
	}
	return in
}

// infinite says where an energy diverges.
func (v *Value) infinite(r *reader, e *limit.InfiniteError) {
	v.Outcome, v.Complete = Infinite, true
	v.Met = v.Outcome == v.Expected
	v.Reason = "the energy is infinite: it diverges near (" + strings.Join(r.set.Coordinates, ", ") + ") = " + point(e.Point) +
		", where the branch " + strings.TrimSpace(slices.Concat(r.l.Branches)[e.Branch].S) + " is not smooth"
}

package identity

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/gram"
)

// decider is the state of deciding one claim.
type decider struct {
	ctx   context.Context
	claim *Claim
	opt   Options
	in    *entropy.Interpreter[algebra.Fraction]
	ex    *entropy.Exact
	ring  *jet.Ring
	rec   *Record

	assumed []constraint
	wells   []algebra.Poly // at a jump: the well on each side, where it is not solved
	picture *gram.Picture  // what the last search for a certificate saw
	// vanishing is what has to vanish for equality in the last certificate.
	vanishing []algebra.Poly
	// jumpRewriter is what atJump installed.
	jumpRewriter jet.Rewriter
	ideal        []algebra.Poly // modulo: generators that are not solved
	equations    []algebra.Poly // modulo: the same before they were differentiated
	solved       []*solved      // modulo: equations that determine a derivative
	basis        []algebra.Poly // of the ideal of that many generators, completed
	basisOf      int
	// hidden says that the equations may have consequences that were not
	// found, so that a point is no refutation.
	hidden bool
}

// constraint is Value Relation 0.
type constraint struct {
	value    algebra.Fraction
	relation string
}

func (c constraint) holds(r *jet.Ring, at jet.Point) bool {
	s, ok := r.Sign(c.value, at)
	if !ok {
		return false
	}
	switch c.relation {
	case ">":
		return s > 0
	case ">=":
		return s >= 0
	case "<":
		return s < 0
	case "<=":
		return s <= 0
	}
	return s == 0
}

// Decide decides a claim. An error says that the claim means nothing (an
// unknown name, a division by zero), or that ctx ended; a claim that cannot be
// decided within the limits gives a record with the verdict Open.
func Decide(ctx context.Context, c *Claim, opt Options) (*Record, error) {
	var d *decider
	var err error
	var angles jet.Angles
	for range 8 { // until the basis of angles is fine enough
		d = &decider{ctx: ctx, claim: c, opt: opt, rec: &Record{Claim: c.Name}}
		err = d.run(angles)
		var finer *jet.FinerAngles
		if !errors.As(err, &finer) {
			break
		}
		angles = finer.Need
	}
	switch {
	case err == nil:
	case ctx.Err() != nil:
		return nil, ctx.Err()
	case errors.Is(err, algebra.ErrLimit), errors.Is(err, jet.ErrOutside):
		d.open("%v", err)
	default:
		return nil, err
	}
	if d.ring != nil && d.rec.Verdict != Open {
		for _, c := range d.ring.Conditions() {
			if d.ex.NoJump(c) || d.ofParameters(c.Value) {
				continue
			}
			d.rec.Assumptions = append(d.rec.Assumptions, d.ring.Format(c.Value)+" "+c.Need.String())
		}
	}
	return d.rec, nil
}

// ofParameters reports a condition on the parameters of a parametrised well,
// which excludes no trace.
func (d *decider) ofParameters(f algebra.Fraction) bool {
	return slices.ContainsFunc(d.ring.Support(f), func(v algebra.Var) bool {
		s := d.ring.Symbol(v)
		return s.Kind == jet.Constant && s.Place < 0
	})
}

func (d *decider) open(format string, args ...any) {
	d.rec.Verdict, d.rec.Reason = Open, fmt.Sprintf(format, args...)
}

func (d *decider) proved(method string) {
	d.rec.Verdict, d.rec.Method = Proved, method
}

func (d *decider) run(angles jet.Angles) error {
	var err error
	if d.in, d.ex, err = d.claim.Setting.NewExact(d.ctx); err != nil {
		return err
	}
	d.ring = d.ex.Ring
	d.ring.SetAngles(angles)
	d.in.Given = d.claim.Given
	d.in.Jump = d.claim.Jump
	d.in.Reset()
	for _, s := range d.claim.Solve {
		d.ring.ConstantVar(s)
	}
	if err := d.assumeSigns(); err != nil {
		return err
	}
	if err := d.rewrite(); err != nil {
		return err
	}
	if d.rec.Verdict != "" {
		return nil
	}
	if err := d.assume(); err != nil {
		return err
	}
	if err := d.decide(); err != nil {
		return err
	}
	if d.hidden && d.rec.Verdict == Refuted {
		d.rec.Witness, d.rec.Solution, d.rec.Method = nil, "", ""
		d.open("the equations determine one derivative in two ways that do not agree, so they have consequences that are not followed: no point refutes the claim")
	}
	return nil
}

func (d *decider) decide() error {
	switch st := d.claim.Statement; st.Relation {
	case formula.Equal:
		return d.equality()
	case formula.LessEqual, formula.GreaterEqual:
		if err := d.atOnce(); err != nil || d.rec.Verdict != "" {
			return err
		}
		return d.inequality()
	case formula.Integrable:
		return d.integrable()
	case formula.Entropy:
		return d.entropy()
	case formula.Span:
		return d.span()
	}
	return fmt.Errorf("a statement of an unknown kind")
}

// assumeSigns tells the ring the signs that the assumptions and the box give.
func (d *decider) assumeSigns() error {
	if err := d.ex.AssumeSigns(d.in, d.claim.Assume); err != nil {
		return err
	}
	for _, b := range d.claim.Box {
		x, err := d.in.Scalar(b.Node)
		if err != nil {
			return err
		}
		if v, ok := loneVar(x); ok && d.ring.Symbol(v).Sign == jet.AnySign {
			switch {
			case b.Lo.Sign() > 0:
				d.ring.Assume(v, jet.Positive)
			case b.Lo.Sign() == 0:
				d.ring.Assume(v, jet.NonNegative)
			case b.Hi.Sign() < 0:
				d.ring.Assume(v, jet.Negative)
			case b.Hi.Sign() == 0:
				d.ring.Assume(v, jet.NonPositive)
			}
		}
	}
	return nil
}

// assume evaluates the assumptions of the setting and the claim, and its box,
// on the jets that the claim is about: a derivative that an equation
// determines is replaced in them. At a jump only constants and coordinates may
// be assumed about.
func (d *decider) assume() error {
	for _, list := range [][]entropy.Assumption{d.claim.Setting.Assume, d.claim.Assume} {
		for _, a := range list {
			l, err := d.in.Scalar(a.Left)
			if err != nil {
				return err
			}
			r, err := d.in.Scalar(a.Right)
			if err != nil {
				return err
			}
			diff, err := d.ring.Sub(l, r)
			if err != nil {
				return err
			}
			d.assumed = append(d.assumed, constraint{diff, a.Relation})
		}
	}
	for _, b := range d.claim.Box {
		x, err := d.in.Scalar(b.Node)
		if err != nil {
			return err
		}
		lo, hi := x.Sub(jet.Rational(b.Lo)), jet.Rational(b.Hi).Sub(x)
		d.assumed = append(d.assumed, constraint{lo, ">="}, constraint{hi, ">="})
	}
	return nil
}

func loneVar(f algebra.Fraction) (algebra.Var, bool) {
	p, ok := f.IsPoly()
	if !ok || p.Len() != 1 {
		return 0, false
	}
	m, c := p.Leading()
	pw := m.Powers()
	if len(pw) != 1 || pw[0].Exp != 1 || !c.IsOne() {
		return 0, false
	}
	return pw[0].Var, true
}

// sides evaluates both sides of the statement: one pair for numbers, one for
// each component of vectors.
func (d *decider) sides() (left, right []algebra.Fraction, err error) {
	st := d.claim.Statement
	l, err := d.in.Eval(st.Left)
	if err != nil {
		return nil, nil, err
	}
	r, err := d.in.Eval(st.Right)
	if err != nil {
		return nil, nil, err
	}
	switch {
	case l.Vector == nil && r.Vector == nil:
		return []algebra.Fraction{l.Scalar}, []algebra.Fraction{r.Scalar}, nil
	case l.Vector != nil && r.Vector != nil && st.Relation == formula.Equal:
		return l.Vector, r.Vector, nil
	case l.Vector != nil && r.Vector == nil && r.Scalar.IsZero():
		return l.Vector, make([]algebra.Fraction, len(l.Vector)), nil
	}
	return nil, nil, &entropy.Error{At: st.Left.At(), Err: errors.New("a vector is compared with a number"), Advice: "compare components, norms or .nu"}
}

package exact

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// Problem is a claim made exact: its ring, what holds on the jets that it is
// about, and the record of what was decided. It is not safe for concurrent use.
type Problem struct {
	Ctx   context.Context
	Claim *claim.Claim
	In    *entropy.Interpreter[algebra.Fraction]
	Ex    *entropy.Exact
	Ring  *jet.Ring
	Rec   *claim.Record
	Seed  uint64 // of the points that are looked at

	Assumed []Constraint
	Wells   []algebra.Poly // at a jump: the well on each side, where it is not solved
	Ideal   []algebra.Poly // modulo: generators that are not solved

	jumpRewriter jet.Rewriter                   // what atJump installed
	equations    []algebra.Poly                 // modulo: the ideal before it was differentiated
	parameters   map[jet.Index]algebra.Fraction // derivatives on a parametrised well
	solved       []*solved                      // modulo: equations that determine a derivative
	basis        []algebra.Poly                 // of the ideal of that many generators, completed
	basisOf      int
	// hidden says that the equations may have consequences that were not
	// found, so that a point is no refutation.
	hidden bool
}

// Constraint is Value Relation 0.
type Constraint struct {
	Value    algebra.Fraction
	Relation string
}

func (c Constraint) holds(r *jet.Ring, at jet.Point) bool {
	s, ok := r.Sign(c.Value, at)
	if !ok {
		return false
	}
	switch c.Relation {
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

// Decide makes a claim exact and decides it, inequalities by the function
// given, which fills in the record of the problem. An error says that the claim
// means nothing (an unknown name, a division by zero), or that ctx ended; a
// claim that cannot be decided within the limits gives a record with the
// verdict Open.
func Decide(ctx context.Context, c *claim.Claim, seed uint64, inequality func(*Problem) error) (*claim.Record, error) {
	d, err := look(ctx, c, seed, nil, inequality)
	if err != nil {
		return nil, err
	}
	if d.Ring == nil || d.Rec.Verdict != claim.Open {
		return d.Rec, nil
	}
	// What the sides need to be defined may be what was missing.
	if signs := d.suppositions(); len(signs) > 0 {
		again, err := look(ctx, c, seed, signs, inequality)
		switch {
		case ctx.Err() != nil:
			return nil, ctx.Err()
		case err == nil && again.Rec.Verdict != claim.Open:
			return again.Rec, nil
		}
	}
	return d.Rec, nil
}

// look decides a claim once, with signs known beyond those assumed.
func look(ctx context.Context, c *claim.Claim, seed uint64, signs []supposition, inequality func(*Problem) error) (*Problem, error) {
	var d *Problem
	var err error
	var angles jet.Angles
	for range 8 { // until the basis of angles is fine enough
		d = &Problem{Ctx: ctx, Claim: c, Seed: seed, Rec: &claim.Record{Claim: c.Name}}
		err = d.run(angles, signs, inequality)
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
		d.Open("%v", err)
	default:
		return nil, err
	}
	if d.Ring != nil && d.Rec.Verdict != claim.Open {
		d.rest()
	}
	return d, nil
}

// ofParameters reports a condition on the parameters of a parametrised well,
// which excludes no trace.
func (d *Problem) ofParameters(f algebra.Fraction) bool {
	return slices.ContainsFunc(d.Ring.Support(f), func(v algebra.Var) bool {
		s := d.Ring.Symbol(v)
		return s.Kind == jet.Constant && s.Place < 0
	})
}

func (d *Problem) Open(format string, args ...any) {
	d.Rec.Verdict, d.Rec.Reason = claim.Open, fmt.Sprintf(format, args...)
}

func (d *Problem) Proved(method string) {
	d.Rec.Verdict, d.Rec.Method = claim.Proved, method
}

func (d *Problem) run(angles jet.Angles, signs []supposition, inequality func(*Problem) error) error {
	var err error
	if d.In, d.Ex, err = d.Claim.Setting.NewExact(d.Ctx); err != nil {
		return err
	}
	d.Ring = d.Ex.Ring
	d.Ring.SetAngles(angles)
	d.In.Given = d.Claim.Given
	d.In.Jump = d.Claim.Jump
	d.In.Reset()
	for _, s := range d.Claim.Solve {
		d.Ring.ConstantVar(s)
	}
	if err := d.assumeSigns(); err != nil {
		return err
	}
	if err := d.suppose(signs); err != nil {
		return err
	}
	if err := d.rewrite(); err != nil {
		return err
	}
	d.Ex.ResetNormal() // assumptions may have named it before the traces were those on the well
	if d.Rec.Verdict != "" {
		return nil
	}
	if err := d.assume(); err != nil {
		return err
	}
	if err := d.decide(inequality); err != nil {
		return err
	}
	if d.hidden && d.Rec.Verdict == claim.Refuted {
		d.Rec.Witness, d.Rec.Solution, d.Rec.Method = nil, "", ""
		d.Open("the equations determine one derivative in two ways that do not agree, so they have consequences that are not followed: no point refutes the claim")
	}
	return nil
}

func (d *Problem) decide(inequality func(*Problem) error) error {
	switch st := d.Claim.Statement; st.Relation {
	case formula.Equal:
		return d.equality()
	case formula.LessEqual, formula.GreaterEqual:
		if err := d.atOnce(); err != nil || d.Rec.Verdict != "" {
			return err
		}
		return inequality(d)
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
func (d *Problem) assumeSigns() error {
	if err := d.Ex.AssumeSigns(d.In, d.Claim.Assume); err != nil {
		return err
	}
	for _, b := range d.Claim.Box {
		x, err := d.In.Scalar(b.Node)
		if err != nil {
			return err
		}
		if v, ok := LoneVar(x); ok && d.Ring.Symbol(v).Sign == jet.AnySign {
			switch {
			case b.Lo.Sign() > 0:
				d.Ring.Assume(v, jet.Positive)
			case b.Lo.Sign() == 0:
				d.Ring.Assume(v, jet.NonNegative)
			case b.Hi.Sign() < 0:
				d.Ring.Assume(v, jet.Negative)
			case b.Hi.Sign() == 0:
				d.Ring.Assume(v, jet.NonPositive)
			}
		}
	}
	return nil
}

// assume evaluates the assumptions of the setting and the claim, and its box,
// on the jets that the claim is about: a derivative that an equation
// determines is replaced in them. At a jump only constants and coordinates may
// be assumed about.
func (d *Problem) assume() error {
	for _, list := range [][]entropy.Assumption{d.Claim.Setting.Assume, d.Claim.Assume} {
		for _, a := range list {
			l, err := d.In.Scalar(a.Left)
			if err != nil {
				return err
			}
			r, err := d.In.Scalar(a.Right)
			if err != nil {
				return err
			}
			diff, err := d.Ring.Sub(l, r)
			if err != nil {
				return err
			}
			d.Assumed = append(d.Assumed, Constraint{diff, a.Relation})
		}
	}
	for _, b := range d.Claim.Box {
		x, err := d.In.Scalar(b.Node)
		if err != nil {
			return err
		}
		lo, hi := x.Sub(jet.Rational(b.Lo)), jet.Rational(b.Hi).Sub(x)
		d.Assumed = append(d.Assumed, Constraint{lo, ">="}, Constraint{hi, ">="})
	}
	return nil
}

func LoneVar(f algebra.Fraction) (algebra.Var, bool) {
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
func (d *Problem) sides() (left, right []algebra.Fraction, err error) {
	st := d.Claim.Statement
	l, err := d.In.Eval(st.Left)
	if err != nil {
		return nil, nil, err
	}
	r, err := d.In.Eval(st.Right)
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

package evidence

import (
	"context"
	"errors"
	"fmt"
	"reflect"
	"slices"
	"strconv"
	"strings"

	"creaseproof/cases"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
	"creaseproof/identity/exact"
)

func inequality(c *cases.Claim) bool {
	r := c.Statement.Relation
	return r == formula.LessEqual || r == formula.GreaterEqual
}

// Audit verifies a file. A nil error means that the verdict follows, by exact
// computations done here, for the case that the file holds.
func Audit(ctx context.Context, data []byte) (*File, error) {
	f, err := Decode(data)
	if err != nil {
		return nil, err
	}
	c, err := cases.Parse(f.Case, []byte(f.Source))
	if err != nil {
		return f, fmt.Errorf("the case in the file: %w", err)
	}
	i := slices.IndexFunc(c.Claims, func(cl *cases.Claim) bool { return cl.Name == f.Claim })
	if i < 0 {
		return f, fmt.Errorf("the case has no claim %q", f.Claim)
	}
	cl := c.Claims[i]
	if err := f.fits(cl); err != nil {
		return f, err
	}
	a := &audit{file: f}
	rec, err := exact.Decide(ctx, cl.Claim, f.Seed, a.inequality)
	switch {
	case err != nil:
		return f, err
	case a.err != nil:
		return f, a.err
	case rec.Verdict != f.Verdict:
		return f, fmt.Errorf("the verdict is %s, not %s: %s", rec.Verdict, f.Verdict, rec.Reason)
	}
	return f, sameRecord(f, rec)
}

// fits makes sure that the file is of the kind that its claim has, and holds no
// parts of another kind, which nothing would verify.
func (f *File) fits(cl *cases.Claim) error {
	switch f.Kind {
	case Certificate, Witness:
		if !inequality(cl) || cl.Best != "" {
			return fmt.Errorf("evidence of the kind %q is for inequalities", f.Kind)
		}
	case Best:
		if !inequality(cl) || cl.Best == "" || cl.Divergence {
			return errors.New("the claim does not ask for the best value of a constant")
		}
	case Exact:
		if cl.Best != "" {
			return errors.New("the claim asks for the best value of a constant, and the file holds none")
		}
	default:
		return fmt.Errorf("evidence of an unknown kind %.40q", f.Kind)
	}
	for what, foreign := range map[string]bool{
		"a certificate":                f.Kind != Certificate && (f.Problem != nil || f.Certificate != nil),
		"a null Lagrangian":            len(f.Null) > 0 && (!cl.Divergence || !inequality(cl) || f.Kind == Witness),
		"ends":                         f.Kind != Best && len(f.Ends)+len(f.Unbounded) > 0,
		"a witness":                    f.Witness != nil && (f.Kind == Best || f.Kind == Certificate),
		"a remainder":                  f.Remainder != "" && f.Kind != Exact,
		"a solution":                   f.Solution != "" && (f.Kind == Witness || inequality(cl) && f.Kind != Best && !cl.Divergence),
		"a text that nothing verifies": f.Kind != Exact && (f.Method != "" || len(f.Details) > 0) || f.Equality != nil,
	} {
		if foreign {
			return fmt.Errorf("the file holds %s beside evidence of the kind %q", what, f.Kind)
		}
	}
	return nil
}

// sameRecord compares what is computed with what is recorded: all of it for an
// exact computation, and for the other kinds what their files hold beside the
// evidence itself.
func sameRecord(f *File, rec *claim.Record) error {
	type part struct {
		what string
		a, b any
	}
	parts := []part{{"solution", f.Solution, rec.Solution}, {"assumptions", f.Assumptions, rec.Assumptions}}
	if f.Kind == Exact {
		parts = append(parts, part{"method", f.Method, rec.Method}, part{"remainder", f.Remainder, rec.Remainder},
			part{"witness", f.Witness, rec.Witness}, part{"details", f.Details, rec.Details})
	}
	for _, x := range parts {
		if !reflect.DeepEqual(x.a, x.b) && fmt.Sprint(x.a) != fmt.Sprint(x.b) {
			return fmt.Errorf("the %s differs from what the computation gives", x.what)
		}
	}
	return nil
}

type audit struct {
	file *File
	err  error // why the evidence is refused
}

// inequality decides an inequality from the evidence alone.
func (a *audit) inequality(d *exact.Problem) error {
	f := a.file
	switch {
	case f.Kind == Certificate && f.Certificate != nil && f.Problem != nil:
		a.err = a.certificate(d)
	case f.Kind == Witness && f.Witness != nil:
		a.err = a.witness(d)
	case f.Kind == Best:
		a.err = a.best(d)
	case f.Kind == Exact:
		a.err = a.equal(d)
	default:
		a.err = errors.New("the file holds no evidence")
	}
	if errors.Is(a.err, context.Canceled) || errors.Is(a.err, context.DeadlineExceeded) {
		return a.err
	}
	if a.err != nil {
		d.Open("%v", a.err) // there may be a second look, with the signs that the sides need
	}
	return nil
}

// gap is the gap that the certificate is about.
func (a *audit) gap(d *exact.Problem) (*exact.Gap, error) {
	f := a.file
	if f.OnWells {
		g, ok, err := d.GapOnWells()
		if err == nil && !ok {
			err = errors.New("the wells are not relations for derivatives of their own")
		}
		return g, err
	}
	g, err := d.Gap()
	if err != nil {
		return nil, err
	}
	if f.Parameters {
		var ok bool
		if len(d.Wells) > 0 {
			ok, err = d.Parametrise()
		} else {
			ok, err = d.ParametriseZeros(g)
		}
		if err == nil && !ok {
			err = errors.New("the well has no rational parametrisation")
		}
		if err != nil {
			return nil, err
		}
		if g, err = d.Gap(); err != nil {
			return nil, err
		}
	}
	if len(d.Wells) > 0 || len(d.Ideal) > 0 {
		return nil, errors.New("a certificate beside equations that are not solved")
	}
	if len(f.Null) > 0 {
		if !d.Claim.Divergence {
			return nil, errors.New("a null Lagrangian in a claim that is not up to a divergence")
		}
		if len(d.Claim.Given) > 0 || d.Claim.Jump || len(d.Claim.Modulo) > 0 {
			return nil, errors.New("a null Lagrangian in a claim that is not about all smooth u")
		}
		list, err := d.NullLagrangians(g, len(f.Null))
		if err != nil {
			return nil, err
		}
		x := make([]algebra.Rat, len(f.Null))
		for k, s := range f.Null {
			if x[k], err = algebra.ParseRat(s); err != nil {
				return nil, err
			}
		}
		var potential []algebra.Fraction
		if g, potential, err = d.AddNull(g, list, x); err != nil {
			return nil, err
		}
		d.Rec.Solution, d.Rec.Details = d.FormatNull(list, x), []string{d.FormatPotential(potential)}
	} else if d.Claim.Divergence {
		d.Rec.Solution = "N = 0"
	}
	return g, d.RemoveAngle(g)
}

func (a *audit) certificate(d *exact.Problem) error {
	g, err := a.gap(d)
	if err != nil {
		return err
	}
	if err := checkCertificate(d, g, a.file.Problem, a.file.Certificate); err != nil {
		return err
	}
	d.Proved("certificate")
	return nil
}

func checkCertificate(d *exact.Problem, g *exact.Gap, problem *certificate.Claim, cert *certificate.Certificate) error {
	if problem == nil || cert == nil {
		return errors.New("no certificate is recorded")
	}
	if !sameClaim(d.Reduce(g).Claim, problem) {
		return errors.New("the inequality in the file is not the one that the claim reduces to")
	}
	return certificate.Check(problem, cert)
}

// sameClaim compares reduced claims up to the order of what they list.
func sameClaim(a, b *certificate.Claim) bool {
	x, y := canonical(a), canonical(b)
	return slices.Equal(x, y)
}

func canonical(c *certificate.Claim) []string {
	poly := func(p certificate.Polynomial) string {
		var terms []string
		for _, t := range p {
			var m []string
			for v, e := range t.M {
				m = append(m, v+"^"+strconv.Itoa(e))
			}
			slices.Sort(m)
			terms = append(terms, t.C+" "+strings.Join(m, " "))
		}
		slices.Sort(terms)
		return strings.Join(terms, " + ")
	}
	var out []string
	for _, v := range c.Variables {
		out = append(out, "variable "+v)
	}
	for _, g := range c.Positive {
		out = append(out, fmt.Sprint("positive ", g.Strict, " ", poly(g.Poly)))
	}
	for _, h := range c.Zero {
		out = append(out, "zero "+poly(h))
	}
	out = append(out, "target "+poly(c.Target))
	slices.Sort(out)
	return out
}

func (a *audit) witness(d *exact.Problem) error {
	if d.Claim.Divergence {
		return errors.New("a point does not refute a claim up to a divergence")
	}
	g, err := d.Gap()
	if err != nil {
		return err
	}
	pts := d.Points(g.Value, g.Left, g.Right)
	at, err := d.Replay(a.file.Witness, pts)
	switch {
	case errors.Is(err, exact.ErrIsolated):
		// Certified afresh: the same numbers must come out.
		if !d.RefuteIsolated(g) || !reflect.DeepEqual(d.Rec.Witness, a.file.Witness) {
			return errors.New("the recorded point is not the one that is isolated and certified for this claim")
		}
		return nil
	case err != nil:
		return err
	case !d.FalseAt(g, pts, at):
		return errors.New("the claim does not certainly fail at the witness")
	case !d.Shows(a.file.Witness, g, at):
		return errors.New("the two sides at the witness are not the recorded ones")
	}
	d.Refuted("witness", at, g.Left, g.Right)
	return nil
}

// equal proves an inequality whose two sides are equal in normal form.
func (a *audit) equal(d *exact.Problem) error {
	g, err := a.gap(d)
	if err != nil {
		return err
	}
	if !g.Value.IsZero() {
		return errors.New("the file holds no evidence for an inequality whose sides differ")
	}
	method := "exact normal form: both sides are equal"
	if d.Claim.Divergence {
		method += " up to a divergence"
	}
	d.Proved(method)
	return nil
}

func (a *audit) best(d *exact.Problem) error {
	g, err := d.Gap()
	if err != nil {
		return err
	}
	if err := d.RemoveAngle(g); err != nil {
		return err
	}
	v := d.Ring.ConstantVar(d.Claim.Best)
	if g.Poly.Degree(v) != 1 {
		return errors.New("the inequality is not affine in " + d.Claim.Best)
	}
	if err := d.Affine(g, v); err != nil {
		return err
	}
	if len(a.file.Ends) == 0 {
		return errors.New("no value is recorded at which the inequality holds")
	}
	sides := map[bool]bool{}
	for _, e := range a.file.Ends {
		if sides[e.Upper] || e.Outer != "" {
			return errors.New("an end is recorded twice, or is not exact")
		}
		sides[e.Upper] = true
		if err := auditEnd(d, g, v, e); err != nil {
			return fmt.Errorf("the end %s: %w", e.Value, err)
		}
	}
	for _, r := range a.file.Unbounded {
		if sides[r.Upper] {
			return errors.New("a side has an end and none")
		}
		sides[r.Upper] = true
		h := *g
		h.Poly = g.Poly.Deriv(v)
		if !r.Upper {
			h.Poly = h.Poly.Neg()
		}
		h.Value = algebra.FromPoly(h.Poly)
		if h.Poly.IsZero() {
			continue
		}
		if err := checkCertificate(d, &h, r.Reduced, r.Certificate); err != nil {
			return err
		}
	}
	if !sides[false] || !sides[true] {
		return errors.New("nothing is recorded of one side")
	}
	if s := claim.SolutionText(d.Claim.Best, a.file.Ends); s != a.file.Solution {
		return fmt.Errorf("the ends say %s, the file %s", s, a.file.Solution)
	}
	d.Proved("ends")
	d.Rec.Solution = a.file.Solution
	return nil
}

// auditEnd checks that the inequality holds at the end, and that the jet beyond
// makes it fail for every value beyond.
func auditEnd(d *exact.Problem, g *exact.Gap, v algebra.Var, e claim.End) error {
	x, err := algebra.ParseRat(e.Value)
	if err != nil {
		return err
	}
	at := g.At(v, x)
	if !at.Poly.IsZero() {
		if err := checkCertificate(d, at, e.Reduced, e.Certificate); err != nil {
			return err
		}
	}
	if e.Beyond == nil {
		return errors.New("no jet beyond it is recorded")
	}
	pts := d.Points(g.Value, g.Left, g.Right)
	p, err := d.Replay(e.Beyond, pts)
	if err != nil {
		return err
	}
	if !d.Consistent(pts, p) || !pts.Admissible(p) {
		return errors.New("the jet beyond it does not satisfy the assumptions")
	}
	zero, ok := d.Ring.Exact(at.Value, p)
	s, sure := d.Ring.Sign(g.Value.Deriv(v), p)
	if !ok || !zero.IsZero() || !sure || s == 0 || (s < 0) != e.Upper {
		return errors.New("at the jet beyond it the inequality does not fail for all values beyond")
	}
	if !d.Shows(e.Beyond, at, p) {
		return errors.New("the two sides at the jet beyond it are not the recorded ones")
	}
	return nil
}

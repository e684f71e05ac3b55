package export

import (
	"errors"
	"fmt"
	"strings"

	"creaseproof/identity/certificate"
)

// Statement is an *Inequality, an *Identity, a *Beyond or a *Group.
type Statement interface {
	// coq appends the theorem and the lemmas of its own.
	coq(d *document) error
	// tex is rows of an align block.
	tex(o TeXOptions) ([]string, error)
	// title and remark name the statement for a reader.
	title() (name, remark string)
}

// Inequality is a claim and its certificate. Where Left and Right are given,
// the theorem says Left <= Right and (Right - Left) · Π Scale equals the target
// of the claim modulo its equations; otherwise it says 0 <= target.
type Inequality struct {
	Name        string // becomes the name of the theorem
	Comment     string
	Claim       *certificate.Claim
	Certificate *certificate.Certificate

	Left, Right Expr
	// Scale is a product of sums, each strictly positive: one of its terms
	// must have a constant base and strictly positive factors only. So 2·eps
	// is {{{Weight: "2", Factors: []int{0}, Base: one}}} where assumption 0
	// is eps > 0.
	Scale [][]certificate.Square

	// Origin is a sentence that says how the target comes from the claim, such
	// as by which factor the gap was multiplied. TeX prints it as a comment.
	Origin string
}

// Identity is one equation, or several that hold together, between formulas in
// real variables.
type Identity struct {
	Name      string // becomes the name of the theorem
	Comment   string
	Variables []string
	// NonZero are formulas assumed not to vanish: the denominators of both
	// sides, which Denominators lists.
	NonZero []Expr
	// Relations are polynomials that vanish, such as c² + s² - 1 and r² - a;
	// see Cofactors for what they may be.
	Relations  []certificate.Polynomial
	Equalities []Equality
}

// Equality is Left = Right. The label names it in TeX and in comments.
type Equality struct {
	Label       string
	Left, Right Expr
}

// Group is several statements that answer one claim.
type Group struct {
	Name       string
	Comment    string
	Statements []Statement
}

func (s *Inequality) title() (string, string) { return s.Name, s.Comment }
func (s *Identity) title() (string, string)   { return s.Name, s.Comment }
func (s *Group) title() (string, string)      { return s.Name, s.Comment }

func (s *Group) coq(d *document) error {
	if len(s.Statements) == 0 {
		return errors.New("a group of no statements")
	}
	d.printf("\n(* %s *)\n", comment(s.Name))
	if s.Comment != "" {
		d.printf("(* %s *)\n", comment(s.Comment))
	}
	for _, x := range s.Statements {
		if err := x.coq(d); err != nil {
			name, _ := x.title()
			return fmt.Errorf("%s: %w", name, err)
		}
	}
	return nil
}

func (s *Group) tex(o TeXOptions) ([]string, error) {
	if len(s.Statements) == 0 {
		return nil, errors.New("a group of no statements")
	}
	var rows []string
	for _, x := range s.Statements {
		more, err := x.tex(o)
		if err != nil {
			return nil, err
		}
		rows = append(rows, more...)
	}
	return rows, nil
}

// document is a file of Coq while it is written.
type document struct {
	names      *namer
	continuity bool // whether the lemmas on continuity are needed
	body       strings.Builder
}

// Coq is a self-contained file for the Coq proof assistant with one theorem for
// each statement, in their order. It does not check certificates: coqc does. It
// fails where input is malformed, where an identity visibly does not hold
// modulo its relations, and with ErrUnsupported.
func Coq(about string, statements ...Statement) (string, error) {
	d := &document{names: newNamer()}
	for _, s := range statements {
		if err := s.coq(d); err != nil {
			name, _ := s.title()
			return "", fmt.Errorf("%s: %w", name, err)
		}
	}
	var b strings.Builder
	if about != "" {
		fmt.Fprintf(&b, "(* %s *)\n\n", comment(about))
	}
	b.WriteString(headerText + "\n" + signsText)
	if d.continuity {
		b.WriteString("\n" + continuityText)
	}
	b.WriteString("\n" + fractionsText + d.body.String())
	return b.String(), nil
}

func (d *document) printf(format string, args ...any) { fmt.Fprintf(&d.body, format, args...) }

// scope is what a theorem binds: its variables and the names of its premises.
type scope struct {
	ring  *ring
	names *namer
	at    places
	ids   map[string]string
}

func (d *document) open(s Statement, variables []string) (*scope, string, error) {
	r, err := newRing(variables)
	if err != nil {
		return nil, "", err
	}
	title, remark := s.title()
	if title == "" {
		title = "statement"
	}
	name := d.names.name(title)
	sc := &scope{ring: r, names: d.names.sub(), ids: map[string]string{}}
	var renamed []string
	for _, v := range variables {
		id := sc.names.name(v)
		sc.at = append(sc.at, id)
		sc.ids[v] = id
		if id != v {
			renamed = append(renamed, id+" for "+v)
		}
	}
	d.printf("\n(* %s *)\n", comment(title))
	if remark != "" {
		d.printf("(* %s *)\n", comment(remark))
	}
	if q, ok := s.(*Inequality); ok && q.Origin != "" {
		d.printf("(* %s *)\n", comment(q.Origin))
	}
	if len(renamed) > 0 {
		d.printf("(* Names: %s *)\n", comment(strings.Join(renamed, ", ")))
	}
	return sc, name, nil
}

// statement prints a theorem's premises and conclusion.
func (d *document) statement(kind, name string, sc *scope, premises []string, conclusion string) {
	d.printf("\n%s %s :", kind, name)
	if len(sc.at) > 0 {
		d.printf("\n%s", wrap("  ", "forall "+strings.Join(sc.at, " ")+" : R,"))
	}
	for _, p := range premises {
		d.printf("\n%s", wrap("  ", p+" ->"))
	}
	d.printf("\n%s.\nProof.\n", wrap("  ", conclusion))
}

// intros introduces variables and premises.
func (d *document) intros(sc *scope, premises []string) {
	if all := append(append([]string{}, sc.at...), premises...); len(all) > 0 {
		d.printf("%s\n", wrap("  ", "intros "+strings.Join(all, " ")+"."))
	}
}

package claim

import (
	"math/big"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/identity/certificate"
)

// Verdict is what is known of a claim.
type Verdict string

// The verdicts. Proved and Refuted rest on exact arithmetic or on enclosures
// with outward rounding; Supported says only that no counterexample was found;
// Open says that the claim was not decided, and the record says why.
const (
	Proved    Verdict = "proved"
	Refuted   Verdict = "refuted"
	Supported Verdict = "supported"
	Open      Verdict = "open"
)

// Claim is one statement to decide, with what it is said about.
type Claim struct {
	Name       string
	Setting    *entropy.Setting
	Statement  *formula.Statement
	Divergence bool           // up to a divergence
	Modulo     []formula.Node // on the real zeros of these and of their total derivatives
	Jump       bool           // over admissible jumps
	Solve      []string       // constants to find
	Best       string         // constant whose best value is asked for
	Given      map[int]formula.Node
	Restrict   []Restriction
	Box        []Bound
	Assume     []entropy.Assumption // beside those of the setting

	Integrability []Exponent
}

// Restriction fixes a derivative of an unknown as a constant; its own
// derivatives vanish.
type Restriction struct {
	Unknown int
	Index   jet.Index
	Value   formula.Node
}

// Bound is Lo <= Name <= Hi for a constant, a coordinate or a derivative.
type Bound struct {
	Node   formula.Node
	Lo, Hi *big.Rat
}

// Exponent is the p of u_J in L^p.
type Exponent struct {
	Node formula.Node
	P    *big.Rat
}

// Record is a decided claim.
type Record struct {
	Claim       string
	Verdict     Verdict
	Method      string
	Margin      *float64 // the least margin met, in float64: a numerical value, no proof
	Samples     int64    // random jets drawn
	Searches    int      // descents made
	Seed        uint64   // of the samples and descents, where there were any
	Witness     *Witness
	Remainder   string // what is left of left minus right
	Solution    string // of solve, or what the method found
	Reason      string // why open; what a refutation rests on
	Assumptions []string
	Details     []string // such as the terms of a sum of squares

	Null         []string // coefficients of the null Lagrangians that were added
	Coefficients []string // of the generators of a span
	OnWells      bool     // the certificate is in the traces, with the wells as equations
	Parameters   bool     // the certificate is in parameters of the well
	Ends         []End    // of the set of best values
	Unbounded    []Unbounded
	Equality     *Equality // when an inequality proved by a certificate is an equation
	Reduced      *certificate.Claim
	Certificate  *certificate.Certificate
}

// Equality says when equality holds in a certified inequality.
type Equality struct {
	Conditions []string          // what must vanish; empty where the two sides are equal
	Jet        map[string]string // an exact jet at which equality holds, if one was found
	Consistent string            // "yes", "no" or "unknown"
}

// CosSin is a rational point of the circle.
type CosSin struct{ Cos, Sin string }

// Witness is a point at which a claim fails, all numbers exact; Left and
// Right are the two sides there, exact or as enclosures [lower, upper].
type Witness struct {
	Jet         map[string]string
	Angle       map[string]CosSin
	Plus, Minus map[string]string // traces, at a jump
	Normal      map[string]string
	Left, Right string
}

// End is one end of the set of values of a constant for which an inequality
// holds: at Value it holds, by the certificate; beyond Value it fails, at the
// jet Beyond, where the gap at Value is zero and falls in that direction. Where
// that is not known exactly, the end lies between Value and Outer, at which the
// inequality fails.
type End struct {
	Upper       bool
	Value       string
	Outer       string // empty where Value is the end
	Beyond      *Witness
	Reduced     *certificate.Claim
	Certificate *certificate.Certificate
}

// Unbounded says that the set of best values has no end on a side: the slope of
// the gap in the constant, or its negative, is non-negative.
type Unbounded struct {
	Upper       bool
	Reduced     *certificate.Claim
	Certificate *certificate.Certificate
}

// SolutionText writes the set of best values of a constant.
func SolutionText(name string, ends []End) string {
	text := func(e End) string {
		if e.Outer == "" {
			return e.Value
		}
		return "(between " + e.Value + " and " + e.Outer + ")"
	}
	switch {
	case len(ends) == 0:
		return name + " arbitrary"
	case len(ends) == 2 && ends[0].Value == ends[1].Value && ends[0].Outer == "" && ends[1].Outer == "":
		return name + " = " + ends[0].Value
	case len(ends) == 2:
		return text(ends[0]) + " <= " + name + " <= " + text(ends[1])
	case ends[0].Upper:
		return name + " <= " + text(ends[0])
	}
	return name + " >= " + text(ends[0])
}

package run

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"creaseproof/cases"
	"creaseproof/entropy/source"
	"creaseproof/identity"
)

// Schema is the number of the form that the documents have.
const Schema = 1

// CheckDocument is what `creaseproof check --json` prints. Numbers that are
// exact are strings; what does not apply is absent.
type CheckDocument struct {
	Schema int           `json:"schema"`
	Cases  []CheckedCase `json:"cases"`
}

// CheckedCase is a case with the claims that have a verdict.
type CheckedCase struct {
	Case   string         `json:"case"`
	Claims []CheckedClaim `json:"claims"`
}

// CheckedClaim is a claim and what is known of it.
type CheckedClaim struct {
	Claim    string           `json:"claim"`
	Verdict  identity.Verdict `json:"verdict"`
	Expected identity.Verdict `json:"expected"`
	Met      bool             `json:"met"`
	Method   string           `json:"method,omitempty"`
	Seconds  float64          `json:"seconds"`

	Margin   *float64 `json:"margin,omitempty"`   // the least one met, numerically
	Samples  int64    `json:"samples,omitempty"`  // random jets drawn
	Searches int      `json:"searches,omitempty"` // descents made
	Seed     *uint64  `json:"seed,omitempty"`     // of the samples and descents

	Witness     *CheckedWitness  `json:"witness,omitempty"`
	Remainder   string           `json:"remainder,omitempty"`
	Solution    string           `json:"solution,omitempty"`
	Reason      string           `json:"reason,omitempty"`
	Assumptions []string         `json:"assumptions,omitempty"` // conditions that the verdict rests on
	Details     []string         `json:"details,omitempty"`
	Equality    *CheckedEquality `json:"equality,omitempty"` // of a certified inequality
}

// CheckedEquality says when the two sides of a certified inequality are equal.
type CheckedEquality struct {
	Conditions []string          `json:"conditions"`
	Consistent string            `json:"consistent"` // with the assumptions: yes, no or unknown
	Jet        map[string]string `json:"jet,omitempty"`
}

// CheckedWitness is a point at which a claim fails.
type CheckedWitness struct {
	Jet   map[string]string        `json:"jet"`
	Angle map[string]CheckedCircle `json:"angle,omitempty"`
	Plus  map[string]string        `json:"plus,omitempty"`
	Minus map[string]string        `json:"minus,omitempty"`
	Nu    map[string]string        `json:"nu,omitempty"`
	Left  string                   `json:"left,omitempty"`
	Right string                   `json:"right,omitempty"`
}

// CheckedCircle is a rational point of the unit circle.
type CheckedCircle struct {
	Cos string `json:"cos"`
	Sin string `json:"sin"`
}

// Document is the outcome for the given cases, in their order. A claim that
// means nothing is open, for the reason that the error gives.
func (o *Outcome) Document(list []*cases.Case) CheckDocument {
	doc := CheckDocument{Schema: Schema, Cases: []CheckedCase{}}
	byCase := map[*cases.Case][]CheckedClaim{}
	for _, r := range o.Results {
		byCase[r.Case] = append(byCase[r.Case], checked(r))
	}
	for _, c := range list {
		claims := byCase[c]
		if claims == nil {
			claims = []CheckedClaim{}
		}
		doc.Cases = append(doc.Cases, CheckedCase{Case: c.Name, Claims: claims})
	}
	return doc
}

// problem is what is wrong, without an excerpt of the file.
func problem(err error) string {
	var placed *source.Error
	if !errors.As(err, &placed) {
		return fmt.Sprint(err)
	}
	return fmt.Sprintf("line %d, column %d: %s", placed.Line, placed.Col, cases.Clip(placed.Problem, 400))
}

func checked(r *Result) CheckedClaim {
	rec := r.Record
	if rec == nil {
		rec = &identity.Record{Verdict: identity.Open, Reason: "without meaning: " + problem(r.Err)}
	}
	c := CheckedClaim{
		Claim: r.Claim.Name, Verdict: rec.Verdict, Expected: r.Claim.Expected.Verdict, Met: r.Met(),
		Method: rec.Method, Seconds: r.Elapsed.Seconds(),
		Samples: rec.Samples, Searches: rec.Searches,
		Remainder: rec.Remainder, Solution: rec.Solution, Reason: rec.Reason,
		Assumptions: slices.Clone(rec.Assumptions), Details: slices.Clone(rec.Details),
	}
	if e := rec.Equality; e != nil {
		c.Equality = &CheckedEquality{Conditions: e.Conditions, Consistent: e.Consistent, Jet: e.Jet}
	}
	if m := rec.Margin; m != nil && !math.IsNaN(*m) && !math.IsInf(*m, 0) {
		c.Margin = m
	}
	if rec.Samples > 0 || rec.Searches > 0 {
		c.Seed = &rec.Seed
	}
	if w := rec.Witness; w != nil {
		c.Witness = &CheckedWitness{Jet: w.Jet, Plus: w.Plus, Minus: w.Minus, Nu: w.Normal, Left: w.Left, Right: w.Right}
		if w.Jet == nil {
			c.Witness.Jet = map[string]string{}
		}
		for name, p := range w.Angle {
			if c.Witness.Angle == nil {
				c.Witness.Angle = map[string]CheckedCircle{}
			}
			c.Witness.Angle[name] = CheckedCircle{p.Cos, p.Sin}
		}
	}
	return c
}

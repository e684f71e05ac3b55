package evidence

import (
	"errors"

	"creaseproof/cases"
	"creaseproof/cases/evidence/sealed"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
)

// Schema numbers the format of the files.
const Schema = sealed.Schema

// Kind says what a verdict rests on.
type Kind string

// The kinds of evidence.
const (
	Exact       Kind = "exact computation"
	Certificate Kind = "certificate"
	Witness     Kind = "witness"
	Best        Kind = "ends"
)

// File is the evidence of one verdict.
type File struct {
	Schema      int                      `json:"schema"`
	Case        string                   `json:"case"`
	Claim       string                   `json:"claim"`
	Verdict     claim.Verdict            `json:"verdict"`
	Kind        Kind                     `json:"kind"`
	Method      string                   `json:"method,omitempty"`
	Seed        uint64                   `json:"seed"`
	Solution    string                   `json:"solution,omitempty"`
	Remainder   string                   `json:"remainder,omitempty"`
	Details     []string                 `json:"details,omitempty"`
	Assumptions []string                 `json:"assumptions,omitempty"`
	Problem     *certificate.Claim       `json:"problem,omitempty"`
	Certificate *certificate.Certificate `json:"certificate,omitempty"`
	OnWells     bool                     `json:"on_wells,omitempty"`
	Parameters  bool                     `json:"parameters,omitempty"`
	Null        []string                 `json:"null,omitempty"`
	Ends        []claim.End              `json:"ends,omitempty"`
	Unbounded   []claim.Unbounded        `json:"unbounded,omitempty"`
	Equality    *claim.Equality          `json:"equality,omitempty"`
	Witness     *claim.Witness           `json:"witness,omitempty"`
	Source      string                   `json:"source"` // the case file
	Digest      string                   `json:"digest"` // SHA-256 of the rest
}

// ErrNone says that a verdict has no evidence to verify: it is not decided, or
// nothing was recorded.
var ErrNone = errors.New("no evidence for this verdict")

// New is the evidence of a record.
func New(c *cases.Case, cl *cases.Claim, r *claim.Record, seed uint64) (*File, error) {
	if r.Verdict != claim.Proved && r.Verdict != claim.Refuted {
		return nil, ErrNone
	}
	f := &File{
		Schema: Schema, Case: c.Name, Claim: r.Claim, Verdict: r.Verdict, Method: r.Method, Seed: seed,
		Solution: r.Solution, Remainder: r.Remainder, Details: r.Details, Assumptions: r.Assumptions,
		Problem: r.Reduced, Certificate: r.Certificate, OnWells: r.OnWells, Parameters: r.Parameters, Null: r.Null,
		Ends: r.Ends, Unbounded: r.Unbounded, Equality: r.Equality, Witness: r.Witness, Source: string(c.Source()),
	}
	switch {
	case cl.Best != "":
		f.Kind = Best
	case r.Certificate != nil:
		f.Kind = Certificate
	case inequality(cl) && r.Witness != nil:
		f.Kind = Witness
	default:
		f.Kind = Exact
	}
	if f.Kind != Exact { // what the audit does not compute again has no place in the file
		f.Method, f.Details, f.Equality = "", nil, nil
	}
	return f, nil
}

// Seal implements sealed.Document.
func (f *File) Seal() (int, *string) { return f.Schema, &f.Digest }

// Encode is the file as JSON, with its digest.
func (f *File) Encode() ([]byte, error) { return sealed.Encode(f) }

// Decode reads a file. Unknown keys, a key twice, anything after the document,
// another schema and a digest that does not fit are errors.
func Decode(data []byte) (*File, error) {
	f := &File{}
	if err := sealed.Decode(data, f); err != nil {
		return nil, err
	}
	return f, nil
}

package evidence

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"

	"creaseproof/cases"
	"creaseproof/identity/certificate"
	"creaseproof/identity/claim"
)

// Schema numbers the format of the files.
const Schema = 1

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

// maxSize bounds a file that is read.
const maxSize = 16 << 20

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

// digest is the hash of the file with its digest left out.
func (f *File) digest() (string, error) {
	g := *f
	g.Digest = ""
	data, err := json.Marshal(&g)
	if err != nil {
		return "", err
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:]), nil
}

// Encode is the file as JSON, with its digest.
func (f *File) Encode() ([]byte, error) {
	var err error
	if f.Digest, err = f.digest(); err != nil {
		return nil, err
	}
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", " ")
	if err := enc.Encode(f); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// Decode reads a file. Unknown keys, a key twice, anything after the document,
// another schema and a digest that does not fit are errors.
func Decode(data []byte) (*File, error) {
	if len(data) > maxSize {
		return nil, fmt.Errorf("the file has more than %d MiB", maxSize>>20)
	}
	if err := strict(data); err != nil {
		return nil, fmt.Errorf("this is no evidence: %w", err)
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	var f File
	if err := dec.Decode(&f); err != nil {
		return nil, fmt.Errorf("this is no evidence: %w", err)
	}
	if _, err := dec.Token(); !errors.Is(err, io.EOF) {
		return nil, errors.New("there is more after the document")
	}
	if f.Schema != Schema {
		return nil, fmt.Errorf("schema %d; this program reads schema %d", f.Schema, Schema)
	}
	d, err := f.digest()
	if err != nil {
		return nil, err
	}
	if d != f.Digest {
		return nil, errors.New("the digest does not fit: the file was changed")
	}
	return &f, nil
}

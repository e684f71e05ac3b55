package energies

import (
	"errors"
	"math"

	"creaseproof/cases"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/sealed"
	"creaseproof/identity/claim"
)

// Kind says what an energy, and the verdict on a claimed one, rest on.
type Kind string

// The kinds of evidence.
const (
	Enclosure Kind = "enclosure"
	Exact     Kind = "exact"
	Numerical Kind = "numerical"
)

// File is the evidence of the energy of a surface at one choice of its values.
type File struct {
	Schema   int               `json:"schema"`
	Case     string            `json:"case"`
	Surface  string            `json:"surface"`
	Values   map[string]string `json:"values,omitempty"` // as written in the case
	Kind     Kind              `json:"kind"`
	Verdict  claim.Verdict     `json:"verdict,omitempty"` // absent where no energy is claimed
	Expected claim.Verdict     `json:"expected,omitempty"`
	Reason   string            `json:"reason,omitempty"`

	Energy  float64  `json:"energy"`
	Error   *float64 `json:"error,omitempty"`
	Area    *float64 `json:"area,omitempty"`
	Claimed *float64 `json:"claimed,omitempty"` // rounded once

	Certify   bool     `json:"certify,omitempty"`    // an enclosure was asked for
	Enclosure []string `json:"enclosure,omitempty"`  // decimals, rounded outward
	Exact     string   `json:"exact,omitempty"`      // the energy, a rational number
	AreaRoots []string `json:"area_roots,omitempty"` // whose roots add up to the area

	Mesh   *Mesh  `json:"mesh,omitempty"`
	Source string `json:"source"` // the case file
	Digest string `json:"digest"` // SHA-256 of the rest
}

// Mesh is the mesh of a surface, in a file beside the evidence.
type Mesh struct {
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
}

// ErrNone says that there is no energy to give evidence of.
var ErrNone = errors.New("no energy")

// New is the evidence of a result. With certify an enclosure was asked for; mesh
// is nil where the surface is none.
func New(c *cases.Case, r *creases.Result, certify bool, mesh *Mesh) (*File, error) {
	if r.Energy == nil || !finite(r.Energy) {
		return nil, ErrNone
	}
	f := &File{
		Schema: sealed.Schema, Case: c.Name, Surface: r.Surface, Values: r.Values, Kind: kindOf(r),
		Verdict: r.Verdict, Expected: r.Expected, Reason: r.Reason, Energy: *r.Energy, Claimed: r.Claimed,
		Enclosure: r.Enclosure, Exact: r.Exact, AreaRoots: r.AreaRoots, Mesh: mesh, Source: string(c.Source()),
	}
	f.Certify = certify && asked(r)
	if finite(r.Error) {
		f.Error = r.Error
	}
	if finite(r.Area) {
		f.Area = r.Area
	}
	return f, nil
}

func finite(x *float64) bool { return x != nil && !math.IsNaN(*x) && !math.IsInf(*x, 0) }

// isExact reports whether the energy comes from exact arithmetic.
func isExact(r *creases.Result) bool {
	return r.Exact != "" || len(r.AreaRoots) > 0 || decided(r) && r.Enclosure == nil
}

// decided reports whether there is a verdict that is no matter of floating point.
func decided(r *creases.Result) bool {
	return r.Verdict == claim.Proved || r.Verdict == claim.Refuted
}

// asked reports whether an enclosure is computed for this surface where one is
// asked for.
func asked(r *creases.Result) bool { return !decided(r) || r.Enclosure != nil }

func kindOf(r *creases.Result) Kind {
	switch {
	case r.Verdict != "" && !decided(r):
		return Numerical
	case r.Enclosure != nil:
		return Enclosure
	case isExact(r):
		return Exact
	}
	return Numerical
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

package approximations

import (
	"errors"
	"math"

	"creaseproof/cases"
	"creaseproof/cases/evidence/sealed"
	"creaseproof/cases/limits"
)

// Kind says what the numbers rest on.
type Kind string

// Numerical is the one kind: floating-point arithmetic.
const Numerical Kind = "numerical"

// File is what was computed of a limit at one choice of its values. The lists run
// along with Eps.
type File struct {
	Schema        int               `json:"schema"`
	Case          string            `json:"case"`
	Approximation string            `json:"approximation"` // its name
	Values        map[string]string `json:"values,omitempty"`
	Kind          Kind              `json:"kind"`
	Unfinished    bool              `json:"unfinished,omitempty"` // some eps are missing

	Eps         []float64 `json:"eps,omitempty"`
	Energy      []float64 `json:"energy,omitempty"`
	Compression []float64 `json:"compression,omitempty"`
	Bending     []float64 `json:"bending,omitempty"`
	Curvature   []float64 `json:"curvature,omitempty"`
	Error       []float64 `json:"error,omitempty"`

	Target        *float64 `json:"target,omitempty"`
	TargetError   *float64 `json:"target_error,omitempty"`
	TargetClaimed bool     `json:"target_claimed,omitempty"`

	Gap           *float64 `json:"gap,omitempty"`
	RelativeGap   *float64 `json:"relative_gap,omitempty"`
	Rate          *float64 `json:"rate,omitempty"`
	RateError     *float64 `json:"rate_error,omitempty"`
	BelowRounding bool     `json:"below_rounding,omitempty"`
	Limit         *float64 `json:"limit,omitempty"`
	LimitError    *float64 `json:"limit_error,omitempty"`
	Equipartition *float64 `json:"equipartition,omitempty"`

	Outcome  string `json:"outcome,omitempty"`
	Expected string `json:"expected,omitempty"`
	Reason   string `json:"reason,omitempty"`

	Source string `json:"source"` // the case file
	Digest string `json:"digest"` // SHA-256 of the rest
}

// ErrNone says that there is nothing computed to give evidence of.
var ErrNone = errors.New("no energies")

// New is the evidence of a value.
func New(c *cases.Case, v *limits.Value) (*File, error) {
	if len(v.Eps) == 0 && v.Outcome != limits.Infinite {
		return nil, ErrNone
	}
	for _, list := range [][]float64{v.Eps, v.Energy, v.Compression, v.Bending, v.Curvature, v.Error} {
		for _, x := range list {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return nil, ErrNone
			}
		}
	}
	f := &File{
		Schema: sealed.Schema, Case: c.Name, Approximation: v.Approximation, Values: v.Values, Kind: Numerical, Unfinished: !v.Complete,
		Eps: v.Eps, Energy: v.Energy, Compression: v.Compression, Bending: v.Bending, Curvature: v.Curvature, Error: v.Error,
		Target: finite(v.Target), TargetError: finite(v.TargetError), TargetClaimed: v.TargetClaimed, Source: string(c.Source()),
	}
	if f.Unfinished {
		return f, nil
	}
	f.follow(v)
	return f, nil
}

// follow sets what follows from the numbers before it.
func (f *File) follow(v *limits.Value) {
	f.Gap, f.RelativeGap, f.Rate, f.RateError = finite(v.Gap), finite(v.RelativeGap), finite(v.Rate), finite(v.RateError)
	f.Limit, f.LimitError, f.Equipartition = finite(v.Limit), finite(v.LimitError), finite(v.Equipartition)
	f.BelowRounding, f.Outcome, f.Expected, f.Reason = v.BelowRounding, v.Outcome, v.Expected, v.Reason
}

// finite leaves out what JSON cannot say.
func finite(x *float64) *float64 {
	if x == nil || math.IsNaN(*x) || math.IsInf(*x, 0) {
		return nil
	}
	return x
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

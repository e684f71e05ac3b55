package creases

import "creaseproof/identity"

// Result is what came of one surface at one choice of its values.
type Result struct {
	Surface string            `json:"surface"`
	Values  map[string]string `json:"values,omitempty"` // as written in the file

	// Energy, Error and Area are absent where the surface was refused. Error
	// is an estimate of the absolute error, meant to be at least the true one.
	Energy      *float64 `json:"energy,omitempty"`
	Error       *float64 `json:"error,omitempty"`
	Area        *float64 `json:"area,omitempty"` // in the plane the length
	Evaluations int      `json:"evaluations,omitempty"`

	// Mesh and Defect are there for a mesh: what it is, and by how much it and the
	// traces fail to fit at the worst node. Energy is that of the polyhedron, and
	// Error does not know how far that is from the surface which it approximates.
	Mesh   *Mesh    `json:"mesh,omitempty"`
	Defect *float64 `json:"defect,omitempty"`

	// Slices is the energy by horizontal slices and SlicesError its error,
	// absent where the model or the surface has none.
	Slices      *float64 `json:"slices,omitempty"`
	SlicesError *float64 `json:"slices_error,omitempty"`

	// Claimed is the claimed energy, rounded once.
	Claimed *float64 `json:"claimed,omitempty"`

	// Verdict and Expected are empty for a surface that was integrated and
	// claims no energy; a surface that was refused is open.
	Verdict  identity.Verdict `json:"verdict,omitempty"`
	Expected identity.Verdict `json:"expected,omitempty"`
	Met      bool             `json:"met"`
	Reason   string           `json:"reason,omitempty"`
}

// Options of an evaluation. The zero value is ready for use.
type Options struct {
	// MaxEvaluations is the budget of evaluations of the density for each
	// surface and choice of values; 2e6 if zero.
	MaxEvaluations int
	// NoSlices leaves out the second value.
	NoSlices bool
}

// Without within, a claimed energy has to agree with the number to its error
// estimate and noDigits, and the estimate has to be at most defaultAccuracy, all
// relative to the claimed energy.
const (
	defaultAccuracy = 1e-10
	noDigits        = 1e-13
)

package creases

import (
	"encoding/json"
	"math"

	"creaseproof/identity/claim"
)

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

	// Exact is the energy as a rational number, where all branches are affine
	// and it is one; AreaRoots are rational numbers whose roots add up to the
	// area. A claimed energy is then proved or refuted.
	Exact     string   `json:"exact,omitempty"`
	AreaRoots []string `json:"area_roots,omitempty"`

	// Pairs are the shares of the pairs of branches between which there is a
	// crease.
	Pairs []Pair `json:"pairs,omitempty"`
	// Sheets are the connected parts of a level set, the largest first, and
	// Unsettled is as in Pair.
	Sheets    []Sheet `json:"sheets,omitempty"`
	Unsettled bool    `json:"unsettled,omitempty"`
	// Resolution is the diameter of the largest box in which it was not decided
	// whether a level set passes; absent where everything was.
	Resolution *float64 `json:"resolution,omitempty"`

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

	// Enclosure are the ends of an interval that contains the energy, as decimals
	// rounded outward, where one was asked for and found.
	Enclosure []string `json:"enclosure,omitempty"`

	// Verdict and Expected are empty for a surface that was integrated and
	// claims no energy; a surface that was refused is open.
	Verdict  claim.Verdict `json:"verdict,omitempty"`
	Expected claim.Verdict `json:"expected,omitempty"`
	Met      bool          `json:"met"`
	Reason   string        `json:"reason,omitempty"`
}

// Pair is the crease between two branches, which are numbered from 1.
type Pair struct {
	Branches  [2]int   `json:"branches"`
	Energy    float64  `json:"energy"`
	Error     float64  `json:"error"`
	Area      float64  `json:"area"`
	Exact     string   `json:"exact,omitempty"`
	AreaRoots []string `json:"area_roots,omitempty"`
	// Sheets are the parts of it, of curved branches the largest first. Unsettled
	// says that their number is not settled: there are undecided boxes, which may
	// join some or hold further ones, or places at which it was not found what a
	// sheet continues to.
	Sheets    []Sheet `json:"sheets,omitempty"`
	Unsettled bool    `json:"unsettled,omitempty"`
}

// MarshalJSON leaves out an error that is not finite, for which JSON has no
// spelling.
func (p Pair) MarshalJSON() ([]byte, error) {
	type plain Pair
	out := struct {
		plain
		Error *float64 `json:"error,omitempty"`
	}{plain: plain(p)}
	if !math.IsNaN(p.Error) && !math.IsInf(p.Error, 0) {
		out.Error = &p.Error
	}
	return json.Marshal(out)
}

// Sheet is a part of a crease or of a level set: a connected component of where
// the other branches are strictly below or above, as the case may be, in the
// inside of the domain. Of affine branches in a rational box it is a convex
// polygon with Vertices, or consists of several Polygons that share parts of
// edges. Otherwise which parts are connected is a numerical finding.
type Sheet struct {
	Energy float64 `json:"energy"`
	Error  float64 `json:"error"`
	Area   float64 `json:"area"` // in the plane the length
	// Point is a point on a curved sheet, to rounding. Box contains the nodes on
	// it; the sheet may reach a little farther.
	Point []float64    `json:"point,omitempty"`
	Box   [][2]float64 `json:"box,omitempty"`

	Vertices    [][]string   `json:"vertices,omitempty"`
	Polygons    [][][]string `json:"polygons,omitempty"`
	Exact       string       `json:"exact,omitempty"`
	SquaredArea string       `json:"squared_area,omitempty"`
}

// Options of an evaluation. The zero value is ready for use.
type Options struct {
	// MaxEvaluations is the budget of evaluations of the density for each
	// surface and choice of values; 2e6 if zero.
	MaxEvaluations int
	// NoSlices leaves out the second value.
	NoSlices bool
	// Certify asks for an enclosure of the energy. A claimed energy is then
	// proved or refuted.
	Certify bool
}

// Without within, a claimed energy has to agree with the number to its error
// estimate and noDigits, and the estimate has to be at most defaultAccuracy, all
// relative to the claimed energy.
const (
	defaultAccuracy = 1e-10
	noDigits        = 1e-13
)

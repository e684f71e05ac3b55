package quadrature

import (
	"errors"
	"fmt"
	"math"
	"strings"
)

// ErrBudget says that the evaluations allowed were used up before the
// tolerance was met. The result returned with it is the best there is, with an
// error estimate that stands.
var ErrBudget = errors.New("evaluation budget used up before the tolerance was met")

// ErrAccuracy says that the tolerance was not met because further subdivision
// does not help: the integrand is too rough or not integrable, or its values
// are too inaccurate. The result returned with it stands with its error
// estimate.
var ErrAccuracy = errors.New("tolerance not met, and further subdivision does not help")

// ErrRange says that an integral is beyond the largest floating-point number.
var ErrRange = errors.New("the integral is beyond the range of floating-point numbers")

// ErrNoSlicing says that the horizontal slices of a surface are not known in
// closed form.
var ErrNoSlicing = errors.New("the horizontal slices of this surface are not known: its height must depend on one parameter only")

// ErrShape says that a surface is not well formed.
var ErrShape = errors.New("malformed surface")

func shapeError(format string, a ...any) error {
	return fmt.Errorf("%w: %s", ErrShape, fmt.Sprintf(format, a...))
}

// A Reason says why a surface was refused.
type Reason int

const (
	// OffWell: a trace does not lie on the well.
	OffWell Reason = iota
	// Discontinuous: u takes different values on the two sides.
	Discontinuous
	// NotNormal: the jump of the gradient is not parallel to the normal.
	NotNormal
	// NotSmooth: the gradient of a trace jumps from the surface to its own side.
	NotSmooth
	// NotFinite: a position, tangent, trace or density is infinite or NaN.
	NotFinite
	// Degenerate: the area element vanishes on more than isolated points or
	// lines.
	Degenerate
)

func (r Reason) String() string {
	switch r {
	case OffWell:
		return "trace off the well"
	case Discontinuous:
		return "u discontinuous across the surface"
	case NotNormal:
		return "jump of the gradient not normal to the surface"
	case NotSmooth:
		return "trace with a kink on the surface"
	case NotFinite:
		return "not finite"
	case Degenerate:
		return "degenerate surface"
	}
	return fmt.Sprintf("Reason(%d)", int(r))
}

// A PlaceError says what is wrong with a surface or its traces, and where.
type PlaceError struct {
	Reason Reason
	// What is concerned: "plus", "minus", "density", "surface".
	What string
	// Piece names the part of the surface, such as "edge 2"; may be empty.
	Piece string
	// Point and Params are the place in coordinates and parameters.
	Point, Params []float64
	// Residual is by how much the condition fails and Scale the sum of the
	// absolute terms it is judged against.
	Residual, Scale float64
}

func (e *PlaceError) Error() string {
	var b strings.Builder
	place := fmt.Sprintf(" at %s", tuple(e.Point))
	if len(e.Params) > 0 {
		place += fmt.Sprintf(" (parameters %s)", tuple(e.Params))
	}
	if e.Piece != "" {
		place += ", " + e.Piece
	}
	switch e.Reason {
	case OffWell:
		fmt.Fprintf(&b, "the %s trace is off the well%s: residual %.6g against terms of size %.6g", e.What, place, e.Residual, e.Scale)
	case Discontinuous:
		fmt.Fprintf(&b, "u is discontinuous across the surface%s: jump %.6g against terms of size %.6g", place, e.Residual, e.Scale)
	case NotNormal:
		fmt.Fprintf(&b, "the jump of the gradient is not normal to the surface%s: tangential part %.6g against gradients of size %.6g", place, e.Residual, e.Scale)
	case NotSmooth:
		fmt.Fprintf(&b, "the %s trace has a kink on the surface itself%s: its gradient jumps by %.6g", e.What, place, e.Residual)
	case NotFinite:
		if math.IsNaN(e.Residual) {
			fmt.Fprintf(&b, "the %s is not a real number%s", e.What, place)
			break
		}
		fmt.Fprintf(&b, "the %s is not finite%s", e.What, place)
	case Degenerate:
		fmt.Fprintf(&b, "the surface is degenerate, its area element is zero on a whole region%s", place)
	default:
		b.WriteString(e.Reason.String() + place)
	}
	return b.String()
}

func tuple(x []float64) string {
	s := make([]string, len(x))
	for i, v := range x {
		s[i] = fmt.Sprintf("%.6g", v)
	}
	return "(" + strings.Join(s, ", ") + ")"
}

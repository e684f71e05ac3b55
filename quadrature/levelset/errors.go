package levelset

import (
	"errors"
	"fmt"
)

var (
	// ErrEmpty says that the level set has no part in the box that meets the
	// conditions of the trims: the enclosures exclude it everywhere.
	ErrEmpty = errors.New("the level set does not meet the box")
	// ErrIdentical says that the function vanishes on a whole part of the box,
	// so that its zero set is not a surface.
	ErrIdentical = errors.New("the function vanishes identically on a part of the box")
	// ErrNotFinite says that a function or a density is not finite at a point
	// of the surface.
	ErrNotFinite = errors.New("value is not finite")
	// ErrSingular says that the gradient of the function vanishes or is not
	// finite at a node.
	ErrSingular = errors.New("the level set has no normal")
	// ErrBudget says that the nodes allowed were used up before the tolerance
	// was met. The result returned with it stands with its error estimate.
	ErrBudget = errors.New("budget of nodes used up before the tolerance was met")
	// ErrResolution says that cells remain in which the level set could not be
	// resolved, so many or so large that the tolerance cannot be met: singular
	// points, or sheets that meet. The result returned with it leaves them out;
	// their possible share is in its error estimate.
	ErrResolution = errors.New("the level set could not be resolved everywhere")
	// ErrAccuracy says that the tolerance was not met and that further
	// subdivision does not help.
	ErrAccuracy = errors.New("tolerance not met, and further subdivision does not help")
	// ErrInput says that the box, the options or the number of functions is
	// malformed.
	ErrInput = errors.New("malformed input")
)

// VanishingError says that a condition is zero, to rounding, on a whole part of
// the surface about a point, so that it does not say which part is meant.
type VanishingError struct {
	System, Condition int
	Point             []float64
}

func (e *VanishingError) Error() string {
	return fmt.Sprintf("condition %d vanishes on the level set about %v", e.Condition+1, e.Point)
}

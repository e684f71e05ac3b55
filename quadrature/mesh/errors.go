package mesh

import (
	"errors"
	"fmt"
)

// ErrFormat is wrapped by every error about the content of a file.
var ErrFormat = errors.New("malformed mesh file")

// ErrLimit is wrapped by errors about files and meshes that are too large.
var ErrLimit = errors.New("mesh too large")

// A FormatError says what is wrong in a file and where.
type FormatError struct {
	Format    string // "STL", "binary STL", "OBJ"
	Line, Col int    // from 1, in characters; 0 in a binary file
	Offset    int64  // of the byte, in a binary file
	Problem   string
	Err       error // ErrFormat or ErrLimit
}

func (e *FormatError) Error() string {
	switch {
	case e.Line > 0:
		return fmt.Sprintf("%s, line %d, column %d: %s", e.Format, e.Line, e.Col, e.Problem)
	case e.Offset > 0:
		return fmt.Sprintf("%s, byte %d: %s", e.Format, e.Offset, e.Problem)
	}
	return fmt.Sprintf("%s: %s", e.Format, e.Problem)
}

// Unwrap returns e.Err.
func (e *FormatError) Unwrap() error { return e.Err }

// A TopologyError says that a mesh has no consistent orientation, and names the
// first edge that is to blame: the one met first in the order of the triangles.
type TopologyError struct {
	A, B      [3]float64 // the ends of the edge
	Triangles []int      // that share it, from 0 in the order of the file; at most 8
	Shared    int        // how many share it
	// NonManifold and Inconsistent count the edges of three triangles or more
	// and those of two that run through them in the same direction.
	NonManifold, Inconsistent int
}

func (e *TopologyError) Error() string {
	what := fmt.Sprintf("the triangles %d and %d run through it in the same direction, so that their normals point to different sides", e.Triangles[0]+1, e.Triangles[1]+1)
	if e.Shared > 2 {
		what = fmt.Sprintf("%d triangles share it, the first are %d, %d and %d", e.Shared, e.Triangles[0]+1, e.Triangles[1]+1, e.Triangles[2]+1)
	}
	return fmt.Sprintf("the mesh has no consistent orientation: at the edge from (%.9g, %.9g, %.9g) to (%.9g, %.9g, %.9g) %s (edges of more than two triangles: %d; of two with opposite orientation: %d)",
		e.A[0], e.A[1], e.A[2], e.B[0], e.B[1], e.B[2], what, e.NonManifold, e.Inconsistent)
}

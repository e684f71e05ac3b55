package casefile

import (
	"math/big"

	"creaseproof/entropy/source"
)

// File is one case, as written. Lists are in the order of the file. A nil
// pointer is a key that is absent.
type File struct {
	Name    string // base name of the path without ".toml"
	Path    string // as the user named it
	Title   string
	About   string
	Sources []string

	Space    *Space // nil only in a case that has no claim, field, surface or limit
	Frame    *Frame
	Lets     []Let
	Model    *Model
	Fields   []Field
	Claims   []Claim
	Surfaces []Surface
	Limits   []Limit
}

// Name is a name or a jet variable, as written, and its place.
type Name struct {
	S   string
	Pos source.Pos
}

// Space is [space]: the independent variables, the functions of them, the
// symbolic constants, and conditions such as "eps > 0".
type Space struct {
	Pos         source.Pos
	Coordinates []Name // 1 to 6
	Unknowns    []Name // at most 4
	Constants   []Name
	Assume      []source.Text
}

// Frame is [frame]: an orthonormal basis of a coordinate plane, turned by an
// angle.
type Frame struct {
	Pos   source.Pos
	Plane [2]Name
	Axes  [2]Name
	Angle Name
}

// Let is one named formula of [let].
type Let struct {
	Name    Name
	Formula source.Text
}

// Model is [model].
type Model struct {
	Pos      source.Pos
	Residual *source.Text
	Bending  *source.Text
	Energy   *source.Text
}

// Field is one [field.NAME].
type Field struct {
	Name       Name
	Components []Component
}

// Component is one component of a field; Index is a coordinate or an axis of
// the frame.
type Component struct {
	Index   Name
	Formula source.Text
}

// Claim is one [[claim]].
type Claim struct {
	Name          string
	Pos           source.Pos // of the name
	States        source.Text
	At            string // "" or "jump"
	Divergence    bool   // modulo = "divergence"
	Modulo        []source.Text
	Solve         []Name
	Best          *Name
	Expect        *source.Text // a verdict, or a solution such as "c = 4/3"
	Restrict      []Assignment
	Given         []Assignment
	Box           []Interval
	Assume        []source.Text
	Integrability []Exponent
}

// Assignment gives a formula to a name: restrict = { u_z = "1/2" }.
type Assignment struct {
	Name    Name
	Formula source.Text
}

// Interval is a range of a name: box = { u_x = ["-1", "1"] }.
type Interval struct {
	Name   Name
	Lo, Hi source.Text
}

// Exponent says that a jet variable lies in L^P; P is at least 1.
type Exponent struct {
	Name Name
	P    *big.Rat
}

// Surface is one [[surface]]. Exactly one of Polygon, Patch, Graph, Level,
// Branches and Mesh is set. The traces are given by Plus and Minus, by
// PlusGradient and MinusGradient, by Branches, or not at all where Density
// is set.
type Surface struct {
	Name   string
	Pos    source.Pos // of the name
	Values []Values

	Plus, Minus                 *source.Text
	PlusGradient, MinusGradient []source.Text
	Density                     *source.Text

	Polygon  [][]source.Text // vertices; in the plane a polyline
	Patch    *Patch
	Graph    *Graph
	Level    *source.Text
	Branches []source.Text
	Combine  *source.Text // "max", "min" or a nested expression, with Branches
	Mesh     string       // path of a file
	// With Mesh: the degree of the rule on each triangle and the largest defect
	// between mesh and traces, zero and nil where not given, and whether the mesh
	// needs no consistent orientation.
	Order      int
	Tolerance  *big.Rat
	Unoriented bool
	// The domain of Level and Branches: one of
	Box      []Interval
	Ball     *Ball
	Cylinder *Cylinder

	Energy *source.Text
	Within *big.Rat // relative; positive, at most 1/1000
	Expect *source.Text
}

// Values is a parameter of a surface and the values it takes, one or more.
type Values struct {
	Name Name
	List []source.Text
}

// Patch is a parametric surface: Map gives the coordinates as formulas in the
// parameters of Over, whose order orients it.
type Patch struct {
	Pos  source.Pos
	Map  []source.Text
	Over []Interval
}

// Graph is the graph of a formula over a part of a coordinate plane (in two
// dimensions, over an interval). Exactly one of Over (a rectangle, whose names
// are the coordinates it spans), Triangle and Disc is set; over a triangle or
// a disc the graph gives the last coordinate.
type Graph struct {
	Pos      source.Pos
	Of       source.Text
	Over     []Interval
	Triangle [][]source.Text // three points of two coordinates
	Disc     *Disc
}

// Disc is a disc in a coordinate plane.
type Disc struct {
	Center [2]source.Text
	Radius source.Text
}

// Ball is a ball, in the plane a disc: as many coordinates as the space has.
type Ball struct {
	Pos    source.Pos
	Center []source.Text
	Radius source.Text
}

// Cylinder is a round cylinder along a coordinate. Center gives the other two
// coordinates, in their order.
type Cylinder struct {
	Pos     source.Pos
	Center  []source.Text
	Radius  source.Text
	Axis    *Name // the last coordinate where it is nil
	Heights []source.Text
}

package formula

import (
	"math/big"

	"creaseproof/entropy/source"
)

// Node is a formula. Nodes are immutable once built and may be shared.
type Node interface {
	// At is where the formula begins; the zero Pos where it was not parsed.
	At() source.Pos
	node()
}

type place struct{ pos source.Pos }

func (p place) At() source.Pos { return p.pos }
func (place) node()            {}

// Num is a non-negative finite decimal, held exactly.
type Num struct {
	place
	Value *big.Rat
}

// Name is a bare name: a coordinate, a constant, an unknown, a named formula
// (let), a frame angle, or "pi". Greek spellings are already folded to the
// ASCII name (eps, theta, xi).
type Name struct {
	place
	ID string
}

// Deriv is a subscripted unknown or named formula: u_xixi has Of "u" and
// By ["xi", "xi"]; the names in By are coordinates or frame axes.
type Deriv struct {
	place
	Of string
	By []string
}

// Field is an entropy field as a vector, Sigma, or the field at another frame
// angle, Sigma(pi/4); Angle is nil for the field's own angle.
type Field struct {
	place
	ID    string
	Angle Node
}

// Component is one component of a field, Sigma_xi or Sigma(0)_z, or of the
// unit normal, nu_x (Of is "nu" then).
type Component struct {
	place
	Of    string
	Angle Node
	Index string
}

// TotalDeriv is d_x(Arg), d_{xi eta}(Arg): the total derivative.
type TotalDeriv struct {
	place
	By  []string
	Arg Node
}

// Call is a named function or operator: sin cos tan sinh cosh tanh exp log
// sqrt erf abs norm, and div(F), grad(f), euler(f) or euler(f, u),
// sup(theta, f).
type Call struct {
	place
	Func string
	Args []Node
}

// Term is one signed term of a Sum.
type Term struct {
	Neg bool
	X   Node
}

// Sum is a sum of signed terms; it has one term only where that is negative.
type Sum struct {
	place
	Terms []Term
}

// Op is how a factor of a Product is joined to what stands before it.
type Op byte

// The joining signs. The first factor of a product carries Star.
const (
	Star  Op = '*'
	Slash Op = '/'
	Dot   Op = '.' // the raised dot, a multiplication
)

// Factor is one factor of a Product.
type Factor struct {
	Op Op
	X  Node
}

// Product is two or more factors joined by *, / or a raised dot, applied from
// left to right. \frac{a}{b} is the Product a / b.
type Product struct {
	place
	Factors []Factor
}

// Juxt is two or more factors written side by side; it binds tighter than
// Product.
type Juxt struct {
	place
	Factors []Node
}

// Power is Base to an exact rational exponent.
type Power struct {
	place
	Base Node
	Exp  *big.Rat
}

// DotNu is X.nu, the normal component of a vector X.
type DotNu struct {
	place
	X Node
}

// Jump is [X], the trace on the side nu points to minus the other.
type Jump struct {
	place
	X Node
}

// Average is {X}, half the sum of the two traces.
type Average struct {
	place
	X Node
}

// Relation is what a Statement says.
type Relation int

// The relations of the claim grammar.
const (
	Equal        Relation = iota // Left = Right
	LessEqual                    // Left <= Right
	GreaterEqual                 // Left >= Right
	Integrable                   // Field in L^Exponent
	Entropy                      // entropy(Field)
	Span                         // span(Generators...) = Field
)

// Statement is a parsed claim.
type Statement struct {
	Relation    Relation
	Left, Right Node     // Equal, LessEqual, GreaterEqual
	Field       *Field   // Integrable, Entropy, Span
	Exponent    *big.Rat // Integrable
	Generators  []*Field // Span
}

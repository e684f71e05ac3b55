package program

import (
	"errors"
	"fmt"
	"math"
)

// DefaultMaxNodes is the number of nodes a Builder holds unless
// [Builder.MaxNodes] says otherwise.
const DefaultMaxNodes = 4 << 20

// maxInputs bounds the index of an input, and maxPower that of an exponent.
const (
	maxInputs = 1 << 20
	maxPower  = 1 << 30
)

// Errors that a Builder records; see [Builder.Err].
var (
	// ErrTooManyNodes means that the graph would exceed the node limit.
	ErrTooManyNodes = errors.New("program: too many operations")
	// ErrInvalidRef means that a Ref is not one the Builder returned.
	ErrInvalidRef = errors.New("program: operand is not a node of this builder")
	// ErrInvalidInput means that the index of an input is out of range.
	ErrInvalidInput = errors.New("program: index of input out of range")
	// ErrExponent means that an integer exponent is too large in magnitude.
	ErrExponent = errors.New("program: exponent out of range")
	// ErrInvalidFunc means that a function is not one of the declared constants.
	ErrInvalidFunc = errors.New("program: unknown function")
)

// Ref is a node of a Builder. The zero Ref is the constant 0. Refs of one
// Builder are equal exactly if they are the same node.
type Ref int32

const (
	refZero Ref = 0
	refOne  Ref = 1
)

type kind uint8

const (
	kindConst kind = iota
	kindInput
	kindAdd
	kindSub
	kindMul
	kindQuo
	kindNeg
	kindPowInt
	kindPow
	kindFunc
	kindRange  // a constant known by an enclosure
	kindPowRat // a rational power
)

// A node has operands a (and b, for binary kinds) of smaller index. imm holds
// the bits of a constant or of a real exponent, the index of an input or of an
// enclosed constant, an integer exponent, or the two halves of a rational one.
type node struct {
	kind kind
	fn   Func
	a, b Ref
	imm  uint64
}

func (n node) value() float64 { return math.Float64frombits(n.imm) }

func (n node) arity() int {
	switch n.kind {
	case kindConst, kindInput, kindRange:
		return 0
	case kindAdd, kindSub, kindMul, kindQuo:
		return 2
	}
	return 1
}

// Builder holds a graph of operations. Its methods never fail on their own:
// the first error is kept, every later call returns the constant 0, and
// [Builder.Compile] reports it. A Builder is not safe for concurrent use.
type Builder struct {
	// MaxNodes is the number of nodes the graph may have;
	// 0 means [DefaultMaxNodes].
	MaxNodes int

	// Exact makes programs whose evaluation over intervals encloses the formulas
	// as written: see [Program.EvalInterval]. Constants are folded only where the
	// result is exact, and powers are kept as operations of their own. It is to
	// be set before the first formula is built.
	Exact bool

	nodes  []node
	index  map[node]Ref
	ranges []enclosed
	named  map[string]int
	inputs int
	err    error
}

// NewBuilder returns an empty Builder.
func NewBuilder() *Builder {
	b := &Builder{index: make(map[node]Ref)}
	b.add(constant(0))
	b.add(constant(1))
	return b
}

// Err returns the first error met, or nil.
func (b *Builder) Err() error { return b.err }

// Len returns the number of nodes of the graph, used or not.
func (b *Builder) Len() int { return len(b.nodes) }

func (b *Builder) fail(err error) Ref {
	if b.err == nil {
		b.err = err
	}
	return refZero
}

func (b *Builder) limit() int {
	if b.MaxNodes > 0 {
		return min(b.MaxNodes, math.MaxInt32)
	}
	return DefaultMaxNodes
}

func (b *Builder) add(n node) Ref {
	if b.err != nil {
		return refZero
	}
	if r, ok := b.index[n]; ok {
		return r
	}
	if len(b.nodes) >= b.limit() && len(b.nodes) > int(refOne) {
		return b.fail(fmt.Errorf("%w: the limit is %d", ErrTooManyNodes, b.limit()))
	}
	r := Ref(len(b.nodes))
	b.nodes = append(b.nodes, n)
	b.index[n] = r
	return r
}

// valid reports whether the builder is without error and all refs are nodes.
func (b *Builder) valid(refs ...Ref) bool {
	if b.err != nil {
		return false
	}
	for _, r := range refs {
		if r < 0 || int(r) >= len(b.nodes) {
			b.fail(ErrInvalidRef)
			return false
		}
	}
	return true
}

func constant(v float64) node {
	if v == 0 {
		v = 0 // one zero, without sign
	}
	return node{kind: kindConst, imm: math.Float64bits(v)}
}

// Const returns the constant v. The sign of a zero is dropped.
func (b *Builder) Const(v float64) Ref { return b.add(constant(v)) }

// Input returns the i-th input, counted from 0. The program has one more input
// than the largest index asked for, whether used or not.
func (b *Builder) Input(i int) Ref {
	if i < 0 || i >= maxInputs {
		return b.fail(fmt.Errorf("%w: %d", ErrInvalidInput, i))
	}
	b.inputs = max(b.inputs, i+1)
	return b.add(node{kind: kindInput, imm: uint64(i)})
}

// constOf returns the value of r if it is a constant.
func (b *Builder) constOf(r Ref) (float64, bool) {
	n := b.nodes[r]
	return n.value(), n.kind == kindConst
}

// negOf returns x if r is -x.
func (b *Builder) negOf(r Ref) (Ref, bool) {
	n := b.nodes[r]
	return n.a, n.kind == kindNeg
}

// Sum returns the sum of its operands, added from left to right; 0 for none.
func (b *Builder) Sum(refs ...Ref) Ref {
	s := refZero
	for _, r := range refs {
		s = b.Add(s, r)
	}
	return s
}

// Product returns the product of its operands, multiplied from left to right;
// 1 for none.
func (b *Builder) Product(refs ...Ref) Ref {
	p := refOne
	for _, r := range refs {
		p = b.Mul(p, r)
	}
	return p
}

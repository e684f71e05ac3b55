// Package program compiles numeric formulas to straight-line float64 programs
// that are evaluated at one point or at a block of points.
//
// A [Builder] holds a directed acyclic graph of the operations + - * /,
// integer and real powers and a few functions of one variable. Nodes are
// hash-consed: asking twice for the same operation on the same operands gives
// the same [Ref], so common subexpressions are shared without a search. The
// graph can be differentiated with respect to any derivation ([Builder.Diff])
// or in reverse mode ([Builder.Gradient]); the results are nodes of the same
// graph and share its subexpressions. For a derivation D the rules are
//
//	D(f + g) = Df + Dg,  D(f g) = Df g + f Dg,  D(f/g) = (Df - (f/g) Dg)/g,
//	D(f^n) = n f^(n-1) Df,  D(F(f)) = F'(f) Df,
//
// each applied once per node, so that the cost is proportional to the number
// of nodes however often they are shared. Reverse mode accumulates adjoints
// from the result to the inputs; see A. Griewank and A. Walther, Evaluating
// Derivatives, 2nd ed., SIAM 2008, sections 3.1 and 3.2.
//
// [Builder.Compile] removes dead code, expands integer powers to products,
// fuses products with the sum that uses them into one pass over memory, orders
// the instructions so that few intermediate values are alive at once (R. Sethi
// and J. D. Ullman, J. ACM 17 (1970) 715–728, used as a heuristic on the
// graph), and assigns them to reusable slots by a linear scan. A [Program] is
// immutable and safe for concurrent use; each goroutine needs its own
// [Workspace].
//
// # What is exact and what is not
//
// Evaluation at points is ordinary floating-point arithmetic and proves nothing:
// the sign of a result has to be settled elsewhere. Simplifications in the
// Builder are identities of real numbers (x*0 = 0, x+0 = x, x-x = 0, -(-x) = x)
// that do not change the rounding of a finite result; operations are not
// reassociated. They may hide the infinity or NaN of an operand and the sign of
// a zero. Constants are folded only when the result is finite, to the value the
// program would compute.
//
// Each of + - * / and sqrt rounds once, to nearest, on every architecture: a
// product that feeds a sum is rounded before the addition, fused or not. The
// results of sin, exp, log and the other functions come from package math and
// may differ in the last place between architectures. The value at a point
// does not depend on whether it was computed alone or in a block.
//
// # Enclosures
//
// The exception is [Program.EvalInterval], for programs from a [Builder] that
// is Exact: it evaluates the formulas over boxes in outward-rounded interval
// arithmetic (package interval) and encloses their values. Such a Builder folds
// constants only where the result is exact, keeps numbers that are no float64 as
// enclosures ([Builder.ConstRat], [Builder.ConstPi], [Builder.ConstInterval]), and
// does not split powers, whose ranges would grow; x x is a square. Gradients are
// further outputs, so that callers can form mean-value enclosures. The derivative
// of Abs over an interval with 0 inside is [-1, 1].
package program

// Package creases computes the jump energy over the surfaces of a case.
//
// A surface of a case file says where a gradient jumps (a polygon, a patch, a
// graph, a level set, or where branches of a maximum or minimum meet) and what the traces are on its two sides: u itself, its gradients,
// or nothing but a density. For every combination of the listed values
//
//   - the assumptions of the case are decided for the values by exact
//     arithmetic or an enclosure, and refuse the surface where they do not hold
//     or cannot be decided; those about coordinates are enclosed at a few points
//     of the surface;
//   - the traces are compiled together with their gradients, and for u in
//     closed form the residual is brought to exact normal form: a residual
//     that is exactly zero settles that the trace is on the well, one that an
//     outward-rounded enclosure shows not to vanish at a point of the surface
//     refuses it there. So does a jump of u, however small. On a patch or a
//     graph u is continuous where the jump vanishes identically once the
//     formulas of the positions are put for the coordinates. What remains is
//     checked numerically at every node and at some further places (package
//     quadrature), as are continuity of u and direction of the jump;
//   - the parts of formulas without variables are evaluated to 200 bits and
//     rounded once, so that the difference of two close constants costs nothing;
//   - the density is the one given, or the profile cost of the model (package
//     entropy, type Profile) where the energy is R²/(2 eps) + eps L²/2, or the
//     model gives R and L and no energy;
//   - the integral is computed with an error estimate and compared with the
//     claimed energy, which is enclosed with 200 bits and rounded once;
//   - for the layered model the energy is computed a second time by
//     horizontal slices, from which neither normals nor areas are needed.
//
// # Level sets and branches
//
// A level set {phi = 0} in a box, a ball or a cylinder has plus on the side
// phi > 0. It is integrated by package levelset, with enclosures of phi and its
// gradient by package ranges. The traces are checked at its nodes; and where u is
// a formula, its jump and a residual that does not vanish identically are enclosed
// at a few points of the surface, which lie between rational points of different
// signs of phi.
//
// A level function that is a product is integrated factor by factor: as it is
// written, by numerator and denominator, and polynomials by square-free parts
// without common factors, their contents, and quadratic parts by the roots of
// their discriminants. The normal is that of the whole function: where the
// density may depend on its side, the surface of a factor is cut where the others
// vanish. A factor of even multiplicity has no plus side and is refused. k √a + b,
// with a root that ends in the domain, is turned into k² a - b² where b has the
// right sign; absolute values that leave cells undecided are taken apart by the
// signs of what is in them. The sheets are those of each factor, where
// absolute values are taken apart they are not counted.
//
// Branches are combined by max, min, or a nested expression in their numbers,
// "max(min(1, 2), 3..5)", in which each stands once. They have to be
// differentiable wherever u is that branch; at other points, such as the foci
// of distances, they need not be. The jump set is that of package branches: the
// residual of every branch is brought to normal form; pairs of branches that
// enclosures exclude have no sheet; every other pair is the level set of its
// difference, with the other branches as conditions. Nothing larger than the
// resolution reported is missed, and where none is reported nothing at all, up
// to the area that the error allows for.
//
// Branches that agree with a pair on all of its surface are ordered beside it:
// exact arithmetic divides the differences, and the quotients have to be bounded
// on the box of the pair and apart from each other, by enclosures. Where that does
// not succeed the surface is refused.
//
// A branch that has no value in a part of the domain, or is infinite on a surface
// where a denominator changes its sign, is refused where that matters to u; both
// are looked for at points spread over the domain. A branch that exact arithmetic
// shows to be nowhere below another, as a cone is above its tangent planes, makes no
// crease with it where they touch.
//
// The sheets of a pair, and of a level set, are the connected components of where
// the other branches are strictly on their side, in the inside of the domain: two
// that only touch, at a point or along a line where more than two branches meet,
// are two. Which parts are connected is found numerically (package levelset), and
// where boxes are undecided their number is not settled, which the result says.
//
// Branches that are affine with rational coefficients, in a box with rational
// ends, have faces with rational corners. Where the density is rational on them
// up to the root of the area, the energy is a rational number, or with a
// rational density a sum of roots, and a claimed energy is proved or refuted.
// Faces that share a part of an edge are one sheet. In a ball or a cylinder, or
// with numbers that are not rational, the faces on a box about the domain are
// found in the same way, numbers being rounded to 128 bits, and cut by the domain
// in closed form (package disc), where the density is the same on all of a face:
// those energies are floating-point numbers with a bound of rounding.
//
// The jumps counted are those inside the open domain. A surface that runs along
// the boundary of its domain is refused: whether u jumps there depends on what it
// is beyond. For affine branches in a rational box that is found exactly,
// otherwise to rounding, at points spread over the flat sides and at the nodes.
//
// # Enclosures
//
// With Options.Certify the energy of a polygon, a patch or a graph is enclosed.
// Positions, traces, normal and density are exact functions of the parameters
// (package jet). Exact arithmetic shows that u is continuous across the surface,
// or for given gradients that their jump is normal, and that both traces are on
// the well; what it does not show leaves the claim as it was. Where a root keeps
// a value a + b r from being visibly zero, that (a + b r)(a - b r) is and that
// enclosures keep a - b r away from zero shows it. The profile cost is that of a
// quadratic residual in closed form, or the mean of Bernstein coefficients that
// are shown to be of one sign. The product of density and area element is
// written as a sum of products of functions of one parameter, where its normal
// form allows that, and integrated by package certified. What stands under roots
// and in logarithms is shown to be in their domain inside the ranges of the
// parameters. A denominator that cancels may vanish at points and on lines, where
// the integrand is its continuation; where it may vanish on a part with an area, as
// |s| - s does, there is no enclosure. Where that of the normal form is wide, a
// given density is enclosed a second time as its formula is written, and the
// intersection taken. That a polygon does not meet itself is checked at the rounded
// vertices only; what a patch covers twice counts twice.
//
// # Verdicts
//
// With an enclosure a claimed energy is proved where all of the enclosure
// differs from all of the enclosure of the claimed value by no more than within,
// or 1e-9 where that is not given, relative to the claimed value: proved is that
// difference, not equality. It is refuted where all of the enclosure differs from
// the claimed value by more than within, or, without within, where it misses that
// value. All of this is decided in rational arithmetic; a claim is relative, however
// small, unless it is zero. What is left over decides nothing.
//
// An energy that agrees with the claim within the error, and the relative
// difference that the case allows (within), is supported; nothing
// here is a proof, and a float never refutes. Disagreement, a failed check and
// an accuracy that was not reached leave the claim open, with the reason. A
// surface that fails a check has no energy.
package creases

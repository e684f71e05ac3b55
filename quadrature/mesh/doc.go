// Package mesh reads triangle meshes of discontinuity surfaces and integrates
// the energy of jumps over them.
//
// # Files
//
// Read takes STL, in text or binary, and the polygonal part of OBJ, both open
// formats, and tells them apart by their content:
//
//   - binary STL: 80 bytes of header, the number of triangles in four bytes
//     (little-endian), 50 bytes for each triangle. Nothing is allocated from the
//     number announced: triangles are counted as they come, and the file must
//     hold neither fewer nor more.
//   - STL in text: solid, facet normal, outer loop, three times vertex, endloop,
//     endfacet, endsolid; keywords in any case, several solids one after another.
//   - OBJ: v and f, with negative indices, v/vt/vn, comments, continuation lines
//     and convex polygons, which become fans of triangles. Texture, normal, group
//     and material statements, points and lines are passed over; free-form
//     surfaces, which would be lost, are refused, and so is what is no OBJ
//     statement.
//
// A file is read once from the beginning to the end with a buffer of fixed size.
// What is kept is the mesh itself: 24 bytes and an entry of a table for each
// vertex, 12 bytes for each triangle, for OBJ also 4 bytes for each v. Limits says
// how many triangles and bytes are accepted. Coordinates that are not finite are
// refused. The order of the vertices orients a triangle, by the right-hand rule;
// the normals of STL files decide nothing, but those that contradict the order
// are counted.
//
// Vertices with exactly the same coordinates are one vertex, in every format.
// Triangles of which two vertices are one are dropped and counted; those whose
// three vertices are different and on a line (to a relative 1e-13) stay part of
// the surface, are counted and have no area.
//
// # Orientation
//
// Check counts the edges. An edge shared by three triangles or more, or by two
// that run through it in the same direction, is a *TopologyError: such a surface
// has no consistent side. An edge of one triangle is a boundary edge. Surfaces that
// touch at a vertex only are accepted; whether a surface crosses itself is not
// looked at.
//
// # Integration
//
// Integrate integrates over the polyhedron, not over the surface that it
// approximates: it knows nothing of the latter. The difference is of second
// order in the length of the edges where the vertices lie on the surface. Each
// triangle gets the symmetric rule of the degree asked for and the next lower one;
// the sum over all triangles of the absolute differences is the error estimate,
// to which rounding is added. Triangles whose difference is too large are divided
// into four, as often as the budget allows.
//
// At every node the traces are checked: that they are finite and on the well,
// that u is continuous, and that the jump of the gradient is parallel to the
// normal. On a polyhedron the last two hold only to the discretisation. Unless a
// tolerance is given, a triangle allows for what the angles between the triangles
// around it say about its distance from a smooth surface (see Options.Tolerance); the
// largest deviations met are part of the result.
//
// Nothing here is an enclosure. Results are deterministic and do not depend on
// the number of cores.
package mesh

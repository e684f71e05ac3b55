// Package disc measures convex polygons cut by a disc or an ellipse.
//
// In a plane with the coordinates s, t let the conic be the set of points with
//
//	s² + (k t + c)² <= r²,    0 <= k <= 1:
//
// the plane cuts a ball in a disc (k = 1) and a circular cylinder of radius r in
// an ellipse, where k is the cosine of the angle between the normal and the axis;
// with k = 0 it is a strip, in a plane parallel to the axis.
//
// The intersection with a convex polygon is bounded by parts of its edges and by
// arcs. Its area is that of the polygon of their ends, by the shoelace formula,
// and of the segments between arcs and chords, r² (a - sin a)/(2 k) each, with the
// angle a of the arc in the coordinates s, k t + c. Both are computed from
// differences of coordinates, so that neither thin segments nor a small k cost
// digits: a is of the order of k there, and the segment of the order of k².
//
// All of this is in closed form and in floating point: errors are bounds of
// rounding by the sizes of the terms, and no enclosures.
package disc

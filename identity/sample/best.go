package sample

import (
	"cmp"
	"slices"
)

// Point is a point that was drawn.
type Point struct {
	// Block and Lane say where it was drawn.
	Block int64
	Lane  int
	// Margin is Gap/AbsSum, or 0 where AbsSum is 0 or not finite.
	Margin, Gap, AbsSum float64
	// Values holds one value for each column of the layout.
	Values []float64
}

// compare orders points by margin, then block, then lane.
func (p *Point) compare(q *Point) int {
	return cmp.Or(cmp.Compare(p.Margin, q.Margin), cmp.Compare(p.Block, q.Block), cmp.Compare(p.Lane, q.Lane))
}

// leaders keeps the points of least margin, in order and without repetition of
// values. Points are offered in the order of block and lane.
type leaders struct {
	keep   int
	points []Point
}

// bound returns the largest margin kept, if the list is full. A point with a
// margin not below it cannot enter, as it comes later than all that are kept.
func (l *leaders) bound() (margin float64, full bool) {
	if len(l.points) < l.keep {
		return 0, false
	}
	return l.points[l.keep-1].Margin, true
}

// offer inserts a point if it is among the best. cols[i][lane] are its values.
func (l *leaders) offer(p Point, cols [][]float64, lane int) {
	if m, full := l.bound(); full && p.Margin >= m {
		return
	}
	at, _ := slices.BinarySearchFunc(l.points, &p, func(q Point, p *Point) int { return q.compare(p) })
	for i := at - 1; i >= 0 && l.points[i].Margin == p.Margin; i-- {
		if equalColumns(l.points[i].Values, cols, lane) {
			return
		}
	}
	if len(l.points) == l.keep {
		p.Values = l.points[l.keep-1].Values // reuse
		l.points = l.points[:l.keep-1]
	} else {
		p.Values = make([]float64, len(cols))
	}
	for i := range cols {
		p.Values[i] = cols[i][lane]
	}
	l.points = slices.Insert(l.points, at, p)
}

func equalColumns(v []float64, cols [][]float64, lane int) bool {
	for i := range v {
		if v[i] != cols[i][lane] {
			return false
		}
	}
	return true
}

// merge joins the lists of all workers.
//
// The result does not depend on how blocks were shared out: a point that is
// among the first keep distinct points of all has fewer than keep distinct
// points before it in the list of its worker, so it is kept there; and of equal
// points the one drawn first is before the others everywhere.
func merge(lists []leaders, keep int) []Point {
	var all []Point
	for i := range lists {
		all = append(all, lists[i].points...)
	}
	slices.SortFunc(all, func(p, q Point) int { return p.compare(&q) })
	var best []Point
	for _, p := range all {
		if len(best) == keep {
			break
		}
		known := false
		for i := len(best) - 1; i >= 0 && best[i].Margin == p.Margin && !known; i-- {
			known = slices.Equal(best[i].Values, p.Values)
		}
		if !known {
			best = append(best, p)
		}
	}
	return best
}

package branches

import (
	"context"
	"math"
	"slices"
)

// A Range is an interval that contains the values of a function on a box. One
// with Lo > Hi, or NaN, contains none that are known: it is taken as the line.
type Range struct{ Lo, Hi float64 }

func (r Range) line() bool { return !(r.Lo <= r.Hi) }

// Pair is a pair of branches that may have a sheet in a box.
type Pair struct {
	First, Second int // numbers of the branches, from 0, in increasing order
	// Box contains every sheet of the pair.
	Box [][2]float64
	// Known are relations of the other branches to the pair that hold wherever the
	// two are equal in Box, whether there is a sheet or not.
	Known []Relation
}

// PairOptions limit the search of Pairs.
type PairOptions struct {
	// MaxBoxes is the number of boxes looked at, 4096 if zero.
	MaxBoxes int
	// Finest is the width of boxes, relative to the whole, that are not cut
	// any more, 1/64 if zero.
	Finest float64
}

// Pairs finds the pairs of branches that may have a sheet in a box, in the
// order of their numbers. Ranges encloses the values of the branches on a box;
// it must not keep the slices. A pair that is left out has no sheet, and no
// sheet leaves the Box of its pair, if the enclosures hold: boxes are cut while
// there are more than two branches that the tree may equal on them.
func Pairs(ctx context.Context, t *Tree, n int, box [][2]float64, ranges func(box [][2]float64, out []Range), o PairOptions) ([]Pair, error) {
	if o.MaxBoxes == 0 {
		o.MaxBoxes = 4096
	}
	if o.Finest == 0 {
		o.Finest = 1.0 / 64
	}
	found := map[[2]int][][2]float64{} // hulls of the boxes of the pairs so far
	values := make([]Range, n)
	queue := [][][2]float64{box}
	var live []int
	var treated []looked
	for boxes := 1; len(queue) > 0; {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		b := queue[0]
		queue = queue[1:]
		ranges(b, values)
		for k, r := range values {
			if r.line() {
				values[k] = Range{math.Inf(-1), math.Inf(1)}
			}
		}
		whole := t.enclose(values)
		live = live[:0]
		for k, r := range values {
			if r.Hi >= whole.Lo && r.Lo <= whole.Hi {
				live = append(live, k)
			}
		}
		if len(live) < 2 {
			treated = append(treated, looked{b, slices.Clone(values)})
			continue
		}
		k := widest(b, box)
		if boxes+2 <= o.MaxBoxes && (b[k][1]-b[k][0] > o.Finest*(box[k][1]-box[k][0])) && (len(live) > 2 || boxes < o.MaxBoxes/8) {
			mid := b[k][0] + (b[k][1]-b[k][0])/2
			left, right := slices.Clone(b), slices.Clone(b)
			left[k][1], right[k][0] = mid, mid
			queue = append(queue, left, right)
			boxes += 2
			continue
		}
		treated = append(treated, looked{b, slices.Clone(values)})
		for x, i := range live {
			for _, j := range live[x+1:] {
				v := Range{max(values[i].Lo, values[j].Lo, whole.Lo), min(values[i].Hi, values[j].Hi, whole.Hi)}
				if v.line() {
					continue
				}
				hull := found[[2]int{i, j}]
				if hull == nil {
					hull = slices.Clone(b)
					found[[2]int{i, j}] = hull
				}
				for d := range hull {
					hull[d][0], hull[d][1] = min(hull[d][0], b[d][0]), max(hull[d][1], b[d][1])
				}
			}
		}
	}
	var out []Pair
	for key, hull := range found {
		grow(hull, box)
		known := relations(key[0], key[1], hull, treated)
		out = append(out, Pair{First: key[0], Second: key[1], Box: hull, Known: known})
	}
	slices.SortFunc(out, func(a, b Pair) int {
		if a.First != b.First {
			return a.First - b.First
		}
		return a.Second - b.Second
	})
	return out, nil
}

// grow enlarges a box inside the whole by a little that is different for each
// side, so that its sides are no longer where surfaces placed symmetrically
// meet them in a special way.
func grow(b, whole [][2]float64) {
	for i := range b {
		w := whole[i][1] - whole[i][0]
		b[i][0] = max(whole[i][0], b[i][0]-w*(0.00731+0.00293*float64(i)))
		b[i][1] = min(whole[i][1], b[i][1]+w*(0.00517+0.00371*float64(i)))
	}
}

// widest is the direction in which a box is widest, relative to the whole.
func widest(b, box [][2]float64) int {
	k := 0
	for i := range b {
		if (b[i][1]-b[i][0])*(box[k][1]-box[k][0]) > (b[k][1]-b[k][0])*(box[i][1]-box[i][0]) {
			k = i
		}
	}
	return k
}

// looked is a box that is not cut any more, and the values of the branches there.
type looked struct {
	box    [][2]float64
	values []Range
}

// relations are how the branches lie to the common value of branches i and j in
// hull: Open where that is not certain or not everywhere the same. All boxes
// count in which the two may be equal, also those in which another branch is
// certainly ahead of them: it is a condition on the pair there.
func relations(i, j int, hull [][2]float64, treated []looked) []Relation {
	var seen []Relation
	for _, t := range treated {
		v := Range{max(t.values[i].Lo, t.values[j].Lo), min(t.values[i].Hi, t.values[j].Hi)}
		if seen == nil {
			seen = make([]Relation, len(t.values))
		}
		if v.line() || apart(hull, t.box) {
			continue
		}
		for k, r := range t.values {
			switch {
			case r.Hi < v.Lo:
				seen[k] |= Below
			case r.Lo > v.Hi:
				seen[k] |= Above
			default:
				seen[k] |= Below | Above
			}
		}
	}
	for k, r := range seen {
		if r == Below|Above {
			seen[k] = Open
		}
	}
	return seen
}

// apart reports whether two boxes have no point in common.
func apart(a, b [][2]float64) bool {
	for i := range a {
		if a[i][1] < b[i][0] || b[i][1] < a[i][0] {
			return true
		}
	}
	return false
}

// enclose is the range of the tree.
func (t *Tree) enclose(values []Range) Range {
	if t.Op == Leaf {
		return values[t.Branch]
	}
	var out Range
	for i, a := range t.Args {
		r := a.enclose(values)
		switch {
		case i == 0:
			out = r
		case t.Op == Max:
			out = Range{max(out.Lo, r.Lo), max(out.Hi, r.Hi)}
		default:
			out = Range{min(out.Lo, r.Lo), min(out.Hi, r.Hi)}
		}
	}
	return out
}

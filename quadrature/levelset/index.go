package levelset

import (
	"cmp"
	"slices"
)

// An index finds the sheets whose cells are near a point: a tree of boxes, cut
// at the median of the centres across the widest direction.
type index struct {
	lo, hi [3]float64
	parts  [2]*index
	sheets []int // of a leaf
	list   []*sheet
	dim    int
}

func newIndex(list []*sheet, dim int) *index {
	all := make([]int, len(list))
	for i := range all {
		all[i] = i
	}
	return indexOf(list, all, dim)
}

func indexOf(list []*sheet, of []int, dim int) *index {
	n := &index{list: list, dim: dim, lo: list[of[0]].lo, hi: list[of[0]].hi}
	for _, i := range of {
		for k := range dim {
			n.lo[k], n.hi[k] = min(n.lo[k], list[i].lo[k]), max(n.hi[k], list[i].hi[k])
		}
	}
	if len(of) <= 8 {
		n.sheets = of
		return n
	}
	wide := 0
	for k := range dim {
		if n.hi[k]-n.lo[k] > n.hi[wide]-n.lo[wide] {
			wide = k
		}
	}
	slices.SortFunc(of, func(a, b int) int {
		return cmp.Or(cmp.Compare(list[a].lo[wide]+list[a].hi[wide], list[b].lo[wide]+list[b].hi[wide]), a-b)
	})
	m := len(of) / 2
	n.parts = [2]*index{indexOf(list, of[:m], dim), indexOf(list, of[m:], dim)}
	return n
}

// find appends the sheets whose cells are within near of x.
func (n *index) find(x []float64, near [3]float64, out []int) []int {
	for k, v := range x {
		if v < n.lo[k]-near[k] || v > n.hi[k]+near[k] {
			return out
		}
	}
	if n.parts[0] != nil {
		return n.parts[1].find(x, near, n.parts[0].find(x, near, out))
	}
	for _, i := range n.sheets {
		s := n.list[i]
		ok := true
		for k, v := range x {
			ok = ok && v >= s.lo[k]-near[k] && v <= s.hi[k]+near[k]
		}
		if ok {
			out = append(out, i)
		}
	}
	return out
}

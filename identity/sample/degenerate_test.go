package sample

import (
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func hessian(kinds map[string]Kind) []Column {
	cs := []Column{
		{Name: "u", Unknown: "u", Index: []int{0, 0, 0}},
		{Name: "u_x", Unknown: "u", Order: 1, Index: []int{1, 0, 0}},
		{Name: "u_xx", Unknown: "u", Order: 2, Index: []int{2, 0, 0}},
		{Name: "u_xy", Unknown: "u", Order: 2, Index: []int{1, 1, 0}},
		{Name: "u_xz", Unknown: "u", Order: 2, Index: []int{1, 0, 1}},
		{Name: "u_yy", Unknown: "u", Order: 2, Index: []int{0, 2, 0}},
		{Name: "u_yz", Unknown: "u", Order: 2, Index: []int{0, 1, 1}},
		{Name: "u_zz", Unknown: "u", Order: 2, Index: []int{0, 0, 2}},
		{Name: "u_xxx", Unknown: "u", Order: 3, Index: []int{3, 0, 0}},
		{Name: "u_xxy", Unknown: "u", Order: 3, Index: []int{2, 1, 0}},
		{Name: "u_xyy", Unknown: "u", Order: 3, Index: []int{1, 2, 0}},
		{Name: "v_xx", Unknown: "v", Order: 2, Index: []int{2, 0}},
		{Name: "v_xy", Unknown: "v", Order: 2, Index: []int{1, 1}},
		{Name: "v_yy", Unknown: "v", Order: 2, Index: []int{0, 2}},
	}
	for i := range cs {
		cs[i].Kind = kinds[cs[i].Name]
	}
	return cs
}

// minors returns 2x2 minors of the Hessians and of third derivatives, in
// float64: all vanish for functions of one variable.
func minors(c [][]float64, j int) []float64 {
	v := func(i int) float64 { return c[i][j] }
	xx, xy, xz, yy, yz, zz := v(2), v(3), v(4), v(5), v(6), v(7)
	return []float64{
		xx*yy - xy*xy, xx*zz - xz*xz, yy*zz - yz*yz,
		xx*yz - xy*xz, yy*xz - xy*yz, zz*xy - xz*yz,
		v(8)*v(10) - v(9)*v(9),
		v(11)*v(13) - v(12)*v(12),
	}
}

func TestDegenerate(t *testing.T) {
	columns := hessian(nil)
	const blocks = 100
	c := draw(t, Degenerate{HeavyTailed{}}, columns, blocks)
	n := len(c[0])
	degenerate, flat, regular, negative, thin := 0, 0, 0, 0, 0
	for j := range n {
		all, zero := true, true
		for _, m := range minors(c, j) {
			all = all && m == 0
		}
		for i := 2; i < len(c); i++ {
			zero = zero && c[i][j] == 0
		}
		switch {
		case zero:
			flat++
		case all:
			degenerate++
			if c[2][j] < 0 {
				negative++
			}
			if c[2][j] != 0 && c[5][j] == 0 {
				thin++
			}
		default:
			regular++
		}
	}
	// six lanes of eight are of rank one, one is flat, one is sparse
	assert.Greater(t, float64(degenerate)/float64(n), 0.72)
	assert.InDelta(t, 0.125, float64(flat)/float64(n), 0.02)
	assert.InDelta(t, 0.125, float64(regular)/float64(n), 0.03)
	assert.Greater(t, float64(negative)/float64(n), 0.2)
	assert.Greater(t, float64(thin)/float64(n), 0.05)

	// lower derivatives keep the law of the base
	zeros := 0
	for _, v := range c[1] {
		if v == 0 {
			zeros++
		}
	}
	assert.InDelta(t, 0.0625, float64(zeros)/float64(n), 0.01)

	// the base law alone has no such minors
	c = draw(t, HeavyTailed{}, columns, 10)
	for j := range c[0] {
		for _, m := range minors(c, j) {
			require.NotZero(t, m)
		}
	}
}

// Restricted columns keep their sign and the Hessian its rank.
func TestDegenerateWithSigns(t *testing.T) {
	for _, kind := range []Kind{Positive, Negative} {
		for _, names := range [][]string{{"u_xx"}, {"u_xy"}, {"u_xx", "u_yy", "u_zz"}} {
			kinds := map[string]Kind{}
			for _, s := range names {
				kinds[s] = kind
			}
			columns := hessian(kinds)
			c := draw(t, Degenerate{HeavyTailed{}}, columns, 40)
			rankOne := 0
			for j := range c[0] {
				for i := range columns {
					if columns[i].Kind == Positive {
						require.Greater(t, c[i][j], 0.0)
					}
					if columns[i].Kind == Negative {
						require.Less(t, c[i][j], 0.0)
					}
				}
				all := true
				for _, m := range minors(c, j)[:3] {
					all = all && m == 0
				}
				if all {
					rankOne++
				}
			}
			assert.Greater(t, float64(rankOne)/float64(len(c[0])), 0.72, "%v %v", kind, names)
		}
	}
}

package branches_test

import (
	"math/big"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/quadrature/branches"
)

// face is a face in the plane z = 0, or on a line.
func face(first, second, plus int, vertices ...[]*big.Rat) branches.Face {
	return branches.Face{Branches: [2]int{first, second}, Plus: plus, Minus: first + second - plus, Vertices: vertices}
}

func TestConnected(t *testing.T) {
	square := func(x, y, w string) [][]*big.Rat {
		r := rats(x, y, w)
		at := func(i, j int64) []*big.Rat {
			a := new(big.Rat).Mul(big.NewRat(i, 1), r[2])
			b := new(big.Rat).Mul(big.NewRat(j, 1), r[2])
			return []*big.Rat{a.Add(a, r[0]), b.Add(b, r[1]), new(big.Rat)}
		}
		return [][]*big.Rat{at(0, 0), at(1, 0), at(1, 1), at(0, 1)}
	}
	fs := []branches.Face{
		face(0, 1, 0, square("0", "0", "1")...),
		face(0, 1, 0, square("1", "1/3", "1/3")...), // at a part of an edge of the first
		face(0, 1, 0, square("-1", "-1", "1")...),   // at a corner of the first
		face(0, 1, 1, square("0", "1", "1")...),     // turned round
		face(0, 1, 0, square("-1", "0", "1/7")...),  // on the third, apart from the first
		face(0, 2, 0, square("1", "1/3", "1/3")...),
	}
	assert.Equal(t, [][]int{{0, 1}, {2, 4}, {3}, {5}}, branches.Connected(fs, nil))
	var ends [][]*big.Rat
	groups := branches.Connected(fs, func(a, b []*big.Rat) bool {
		ends = append(ends, a, b)
		return false
	})
	assert.Len(t, groups, 6)
	require.Len(t, ends, 4)
	assert.Equal(t, "1", ends[0][0].RatString())
	length := new(big.Rat).Sub(ends[1][1], ends[0][1])
	assert.Equal(t, "1/3", length.Abs(length).RatString())
	// Segments on a line.
	line := []branches.Face{
		face(0, 1, 0, rats("0", "0"), rats("1", "1")), face(0, 1, 0, rats("2", "2"), rats("3", "3")), face(0, 1, 0, rats("2", "2"), rats("1", "1")),
		face(0, 1, 0, rats("4", "4"), rats("5", "5")),
	}
	assert.Equal(t, [][]int{{0, 1, 2}, {3}}, branches.Connected(line, nil))
}

// A branch that crosses the face of two others without mattering there leaves
// one sheet, and one that does two.
func TestConnectedCuts(t *testing.T) {
	box := branches.Box{Lo: rats("-1", "-1", "-1"), Hi: rats("1", "1", "1")}
	list := []branches.Affine{affine("1", "0", "0", "0"), affine("-1", "0", "0", "0"), affine("0", "5", "0", "0"), affine("0", "0", "5", "1")}
	fs := faces(t, list, "max(min(3, 4), max(1, 2))", box)
	pair := fs[:0:0]
	for _, f := range fs {
		if f.Branches == [2]int{0, 1} {
			pair = append(pair, f)
		}
	}
	require.Greater(t, len(pair), 1)
	assert.Len(t, branches.Connected(pair, nil), 1)
}

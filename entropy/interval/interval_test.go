package interval

import (
	"math"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

func iv(t testing.TB, lo, hi float64) Interval {
	t.Helper()
	x, err := New(lo, hi)
	require.NoError(t, err)
	return x
}

func TestNew(t *testing.T) {
	for _, b := range [][2]float64{{1, 0}, {math.NaN(), 1}, {0, math.NaN()}, {inf, inf}, {-inf, -inf}, {inf, -inf}} {
		x, err := New(b[0], b[1])
		require.ErrorIs(t, err, ErrUndefined, "%v", b)
		assert.True(t, x.IsEmpty())
	}
	x, err := New(math.Copysign(0, -1), math.Copysign(0, -1))
	require.NoError(t, err)
	assert.False(t, math.Signbit(x.Inf()))
	assert.Equal(t, Interval{}, x)
	assert.True(t, Point(math.NaN()).IsEmpty())
	assert.True(t, Point(inf).IsEmpty())
	assert.Equal(t, iv(t, 3, 3), Point(3))
}

func TestNumericFunctions(t *testing.T) {
	const big, tiny = math.MaxFloat64, math.SmallestNonzeroFloat64
	for _, c := range []struct {
		x                       Interval
		mid, rad, wid, mag, mig float64
	}{
		{iv(t, 1, 3), 2, 1, 2, 3, 1},
		{iv(t, -1, 3), 1, 2, 4, 3, 0},
		{iv(t, -3, -1), -2, 1, 2, 3, 1},
		{Point(0.1), 0.1, 0, 0, 0.1, 0.1},
		{Entire(), 0, inf, inf, inf, 0},
		{iv(t, 2, inf), big, inf, inf, inf, 2},
		{iv(t, -inf, 2), -big, inf, inf, inf, 0},
		{iv(t, 0x1p1023, 0x1.8p1023), 0x1.4p1023, 0x1p1021, 0x1p1022, 0x1.8p1023, 0x1p1023},
		{iv(t, 0, tiny), 0, tiny, tiny, tiny, 0},
		{iv(t, tiny, tiny), tiny, 0, 0, tiny, tiny},
	} {
		assert.Equal(t, []float64{c.mid, c.rad, c.wid, c.mag, c.mig}, []float64{c.x.Mid(), c.x.Rad(), c.x.Wid(), c.x.Mag(), c.x.Mig()}, "%v", c.x)
	}
	e := Empty()
	for _, v := range []float64{e.Mid(), e.Rad(), e.Wid(), e.Mag(), e.Mig()} {
		assert.True(t, math.IsNaN(v))
	}
	assert.Equal(t, inf, e.Inf())
	assert.Equal(t, -inf, e.Sup())
}

func TestSets(t *testing.T) {
	a, b, e := iv(t, 1, 2), iv(t, 2, 3), Empty()
	assert.Equal(t, Point(2), a.Intersection(b))
	assert.Equal(t, iv(t, 1, 3), a.ConvexHull(b))
	assert.Equal(t, e, a.Intersection(Point(4)))
	assert.Equal(t, a, a.ConvexHull(e))
	assert.Equal(t, e, e.ConvexHull(e))
	assert.True(t, a.Precedes(b))
	assert.False(t, a.StrictPrecedes(b))
	assert.True(t, a.Less(b))
	assert.False(t, b.Less(a))
	assert.True(t, a.StrictLess(b))
	assert.False(t, e.Less(a))
	assert.True(t, e.Less(e))
	assert.True(t, e.Precedes(a))
	assert.False(t, a.Disjoint(b))
	assert.True(t, a.Disjoint(e))
	assert.True(t, a.Subset(iv(t, 1, 3)))
	assert.False(t, a.Interior(iv(t, 1, 3)))
	assert.True(t, a.Interior(iv(t, 0, 3)))
	assert.True(t, Entire().Interior(Entire()))
	assert.True(t, e.Interior(e))
	assert.True(t, a.Contains(1))
	assert.False(t, Entire().Contains(inf))
	assert.False(t, Entire().Contains(math.NaN()))
	assert.True(t, Entire().IsEntire())
	assert.True(t, Point(1).IsSingleton())
	assert.False(t, e.IsSingleton())
	assert.False(t, e.IsEntire())
}

// Cases of the standard's tables of division, powers and point functions.
func TestConventions(t *testing.T) {
	z, one := Interval{}, Point(1)
	e, all := Empty(), Entire()
	for _, c := range []struct {
		name      string
		got, want Interval
	}{
		{"1/0", one.Div(z), e},
		{"0/0", z.Div(z), e},
		{"0/entire", z.Div(all), z},
		{"1/[0,1]", one.Div(iv(t, 0, 1)), iv(t, 1, inf)},
		{"1/[-1,0]", one.Div(iv(t, -1, 0)), iv(t, -inf, -1)},
		{"1/[-1,1]", one.Div(iv(t, -1, 1)), all},
		{"[0,1]/[0,1]", iv(t, 0, 1).Div(iv(t, 0, 1)), iv(t, 0, inf)},
		{"[-1,1]/[0,1]", iv(t, -1, 1).Div(iv(t, 0, 1)), all},
		{"entire/[1,2]", all.Div(iv(t, 1, 2)), all},
		{"0*entire", z.Mul(all), z},
		{"[0,1]*[0,inf]", iv(t, 0, 1).Mul(iv(t, 0, inf)), iv(t, 0, inf)},
		{"[-1,2]*[-3,inf]", iv(t, -1, 2).Mul(iv(t, -3, inf)), all},
		{"sqrt [-1,4]", iv(t, -1, 4).Sqrt(), iv(t, 0, 2)},
		{"sqrt [-2,-1]", iv(t, -2, -1).Sqrt(), e},
		{"log [-1,1]", iv(t, -1, 1).Log(), iv(t, -inf, 0)},
		{"log 0", z.Log(), e},
		{"exp entire", all.Exp(), iv(t, 0, inf)},
		{"sqr [-2,1]", iv(t, -2, 1).Sqr(), iv(t, 0, 4)},
		{"[-2,1]^3", iv(t, -2, 1).Pown(3), iv(t, -8, 1)},
		{"[-2,1]^4", iv(t, -2, 1).Pown(4), iv(t, 0, 16)},
		{"[-2,1]^-1", iv(t, -2, 1).Pown(-1), all},
		{"[-2,1]^-2", iv(t, -2, 1).Pown(-2), iv(t, 0.25, inf)},
		{"[-2,4]^-3", iv(t, -2, 4).Pown(-3), all},
		{"0^-3", z.Pown(-3), e},
		{"0^0", z.Pown(0), one},
		{"entire^0", all.Pown(0), one},
		{"empty^0", e.Pown(0), e},
		{"3^5", Point(3).Pown(5), Point(243)},
		{"2^-1074", Point(2).Pown(-1074), Point(math.SmallestNonzeroFloat64)},
		{"2^-1075", Point(2).Pown(-1075), iv(t, 0, math.SmallestNonzeroFloat64)},
		{"2^1024", Point(2).Pown(1024), iv(t, math.MaxFloat64, inf)},
		{"(-2)^1025", Point(-2).Pown(1025), iv(t, -inf, -math.MaxFloat64)},
		{"pow 0 0", z.Pow(z), e},
		{"pow 0 [0,1]", z.Pow(iv(t, 0, 1)), z},
		{"pow -1 2", Point(-1).Pow(Point(2)), e},
		{"pow [-1,4] 2", iv(t, -1, 4).Pow(Point(2)), iv(t, 0, 16)},
		{"pow [0,1] [0,1]", iv(t, 0, 1).Pow(iv(t, 0, 1)), iv(t, 0, 1)},
		{"pow [0,2] -1", iv(t, 0, 2).Pow(Point(-1)), iv(t, 0.5, inf)},
		{"pow [2,3] entire", iv(t, 2, 3).Pow(all), iv(t, 0, inf)},
		{"cbrt -27", Point(-27).Cbrt(), Point(-3)},
		{"rootn [-1,16] 4", iv(t, -1, 16).Rootn(4), iv(t, 0, 2)},
		{"rootn 0", one.Rootn(0), e},
		{"rootn [0,8] -3", iv(t, 0, 8).Rootn(-3), iv(t, 0.5, inf)},
		{"powrat [0,4] 1/2", iv(t, -1, 4).PowRat(2, 4), iv(t, 0, 2)},
		{"powrat -8 4/2", Point(-8).PowRat(4, 2), Point(64)},
		{"tan pole", iv(t, 1, 2).Tan(), all},
		{"sin entire", all.Sin(), iv(t, -1, 1)},
		{"cos 0", z.Cos(), one},
		{"sin 0", z.Sin(), z},
		{"cosh [-1,0]", iv(t, -1, 0).Cosh().Intersection(iv(t, 0, 1)), one},
		{"tanh entire", all.Tanh(), iv(t, -1, 1)},
		{"erf entire", all.Erf(), iv(t, -1, 1)},
		{"sign [-1,0]", iv(t, -1, 0).Sign(), iv(t, -1, 0)},
		{"sign [2,3]", iv(t, 2, 3).Sign(), one},
		{"abs [-3,2]", iv(t, -3, 2).Abs(), iv(t, 0, 3)},
		{"min", iv(t, 0, 3).Min(iv(t, 1, 2)), iv(t, 0, 2)},
		{"max", iv(t, 0, 3).Max(iv(t, 1, 2)), iv(t, 1, 3)},
		{"huge sum", Point(math.MaxFloat64).Add(Point(math.MaxFloat64)), iv(t, math.MaxFloat64, inf)},
		{"fma", Point(1+0x1p-52).Fma(Point(1-0x1p-52), Point(-1)), Point(-0x1p-104)},
	} {
		assert.Equal(t, c.want, c.got, c.name)
	}
}

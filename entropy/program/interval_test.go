package program

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/interval"
)

func exactBuilder() *Builder {
	b := NewBuilder()
	b.Exact = true
	return b
}

func within(t testing.TB, lo, hi float64) interval.Interval {
	t.Helper()
	x, err := interval.New(lo, hi)
	require.NoError(t, err)
	return x
}

// enclose compiles one formula and evaluates it over a box.
func enclose(t testing.TB, b *Builder, x Ref, in ...interval.Interval) (interval.Interval, interval.Decoration) {
	t.Helper()
	p, err := b.Compile(x)
	require.NoError(t, err)
	ws, err := p.NewIntervalWorkspace()
	require.NoError(t, err)
	out, dec := make([]interval.Interval, 1), make([]interval.Decoration, 1)
	p.EvalDecorated(ws, in, out, dec)
	plain := make([]interval.Interval, 1)
	p.EvalInterval(ws, in, plain)
	require.Equal(t, out, plain)
	return out[0], dec[0]
}

func TestIntervalNeedsExactBuilder(t *testing.T) {
	b := NewBuilder()
	p, err := b.Compile(b.Input(0))
	require.NoError(t, err)
	_, err = p.NewIntervalWorkspace()
	require.ErrorIs(t, err, ErrNotExact)
}

func TestConstantsAreEnclosed(t *testing.T) {
	b := exactBuilder()
	third, tenth := b.ConstRat(big.NewRat(1, 3)), b.ConstRat(big.NewRat(1, 10))
	assert.NotEqual(t, third, tenth)
	assert.Equal(t, third, b.ConstRat(big.NewRat(2, 6)))
	assert.Equal(t, b.Const(0.75), b.ConstRat(big.NewRat(3, 4)))
	// 1/3 + 1/10 = 13/30, 0.1 as a float64 is none of 1/10.
	x, dec := enclose(t, b, b.Add(third, tenth))
	assert.Equal(t, interval.Com, dec)
	for _, end := range []struct {
		v    float64
		sign int
	}{{x.Inf(), -1}, {x.Sup(), 1}} {
		assert.Equal(t, end.sign, new(big.Rat).SetFloat64(end.v).Cmp(big.NewRat(13, 30)))
	}
	assert.Less(t, x.Wid(), 0x1p-51)

	// Folding in float64 would give 0 for (2^53 + 1) - 2^53.
	x, _ = enclose(t, b, b.Sub(b.Add(b.Const(1<<53), b.Const(1)), b.Const(1<<53)))
	assert.True(t, x.Contains(1), "%v", x)
	x, _ = enclose(t, b, b.Mul(b.Quo(b.Const(1), b.Const(3)), b.Const(3)))
	assert.True(t, x.Contains(1) && !x.IsSingleton())

	x, _ = enclose(t, b, b.Func(Sin, b.ConstPi()))
	assert.True(t, x.Contains(0) && x.Wid() < 1e-15, "%v", x)

	huge := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), 2000))
	x, _ = enclose(t, b, b.ConstRat(huge))
	assert.Equal(t, within(t, math.MaxFloat64, math.Inf(1)), x)
	x, _ = enclose(t, b, b.ConstRat(new(big.Rat).Neg(huge)))
	assert.Equal(t, within(t, math.Inf(-1), -math.MaxFloat64), x)
	x, _ = enclose(t, b, b.ConstRat(new(big.Rat).Inv(huge)))
	assert.Equal(t, within(t, 0, math.SmallestNonzeroFloat64), x)
}

func TestNamedConstants(t *testing.T) {
	b := exactBuilder()
	x := within(t, 1, 2)
	p, q := b.ConstInterval("p", x), b.ConstInterval("q", x)
	assert.NotEqual(t, p, q, "two numbers with one enclosure")
	v, _ := enclose(t, b, b.Sub(p, q))
	assert.Equal(t, within(t, -1, 1), v)
	v, _ = enclose(t, b, b.Sub(p, b.ConstInterval("p", x)))
	assert.Equal(t, interval.Point(0), v)
	b.ConstInterval("p", within(t, 0, 2))
	require.ErrorIs(t, b.Err(), ErrEnclosure)
	b = exactBuilder()
	b.ConstInterval("p", interval.Empty())
	require.ErrorIs(t, b.Err(), ErrEnclosure)
}

func TestPowersStayWhole(t *testing.T) {
	b := exactBuilder()
	x := b.Input(0)
	for _, c := range []struct {
		name string
		f    Ref
		want interval.Interval
		dec  interval.Decoration
	}{
		{"square", b.Mul(x, x), within(t, 0, 4), interval.Com},
		{"square in a sum", b.Add(b.Mul(x, x), x), within(t, -1, 6), interval.Com},
		{"cube", b.PowInt(x, 3), within(t, -1, 8), interval.Com},
		{"fourth", b.PowInt(x, 4), within(t, 0, 16), interval.Com},
		{"inverse square", b.PowInt(x, -2), within(t, 0.25, math.Inf(1)), interval.Trv},
		{"3/2", b.PowRat(x, 3, 2), within(t, 0, 2.83), interval.Trv},
		{"root", b.PowRat(x, 2, 4), within(t, 0, 1.4143), interval.Trv},
		{"real power", b.Pow(x, 1.5), within(t, 0, 2.83), interval.Trv},
		{"sign", b.Func(Sign, x), within(t, -1, 1), interval.Def},
		{"abs", b.Func(Abs, x), within(t, 0, 2), interval.Com},
		{"log", b.Func(Log, x), within(t, math.Inf(-1), 0.6932), interval.Trv},
		{"log of square", b.Func(Log, b.Add(b.Const(1), b.Mul(x, x))), within(t, 0, 1.6095), interval.Com},
		{"tan", b.Func(Tan, x), interval.Entire(), interval.Trv},
	} {
		v, dec := enclose(t, b, c.f, within(t, -1, 2))
		assert.True(t, v.Subset(c.want) && c.want.Inf() == v.Inf(), "%s: %v", c.name, v)
		assert.Equal(t, c.dec, dec, c.name)
	}
}

// The float64 values of an exact program, blocks included, are those of the
// operations, and lie in the enclosures at points.
func TestRandomProgramsOverBoxes(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	checked := 0
	for range 60 {
		const n = 3
		b := exactBuilder()
		pool := randomPool(b, r, n, 30, false)
		third := b.ConstRat(big.NewRat(1, 3))
		var outs []Ref
		for _, p := range pool[len(pool)-8:] {
			outs = append(outs, p.ref, b.Diff(p.ref, func(i int) Ref {
				if i == 0 {
					return refOne
				}
				return refZero
			}), b.PowRat(b.Add(b.Const(1), b.Mul(p.ref, p.ref)), 2, 3), b.Mul(third, p.ref))
			outs = append(outs, b.Gradient(p.ref, []int{0, 1, 2})...)
		}
		if b.Err() != nil {
			continue
		}
		p, err := b.Compile(outs...)
		require.NoError(t, err)
		ws, err := p.NewIntervalWorkspace()
		require.NoError(t, err)
		fw := p.NewWorkspace()
		for range 20 {
			x := randomPoint(r, n)
			box, at := make([]interval.Interval, n), make([]interval.Interval, n)
			for i, v := range x {
				box[i] = within(t, v-r.Float64(), v+r.Float64())
				at[i] = interval.Point(v)
			}
			wide, point := make([]interval.Interval, len(outs)), make([]interval.Interval, len(outs))
			dec := make([]interval.Decoration, len(outs))
			p.EvalInterval(ws, box, wide)
			p.EvalDecorated(ws, at, point, dec)
			val := make([]float64, len(outs))
			p.Eval(fw, x, val)
			cols, res := make([][]float64, n), make([][]float64, len(outs))
			for i := range cols {
				cols[i] = []float64{x[i]}
			}
			for i := range res {
				res[i] = make([]float64, 1)
			}
			p.EvalBlock(fw, cols, res, 1)
			for i := range outs {
				require.True(t, same(val[i], res[i][0]))
				require.True(t, point[i].Subset(wide[i]), "%v in %v", point[i], wide[i])
				w := point[i].Wid()
				if dec[i] == interval.Com && w <= 1e-6*point[i].Mag() && finite(val[i]) {
					// The rounded value is near an enclosure that is narrow.
					checked++
					require.InDelta(t, point[i].Mid(), val[i], 1e-5*point[i].Mag()+1e-300)
				}
			}
		}
	}
	assert.Greater(t, checked, 5000)
}

// A mean-value form from a gradient is narrower than the formula itself on a
// small box, and both contain the values.
func TestMeanValueForm(t *testing.T) {
	b := exactBuilder()
	x, y := b.Input(0), b.Input(1)
	f := b.Sub(b.Mul(x, b.Func(Exp, y)), b.Mul(y, b.Func(Exp, x)))
	p, err := b.Compile(append([]Ref{f}, b.Gradient(f, []int{0, 1})...)...)
	require.NoError(t, err)
	ws, err := p.NewIntervalWorkspace()
	require.NoError(t, err)
	box := []interval.Interval{within(t, 1, 1.01), within(t, 1, 1.01)}
	at := []interval.Interval{interval.Point(box[0].Mid()), interval.Point(box[1].Mid())}
	out, mid := make([]interval.Interval, 3), make([]interval.Interval, 3)
	p.EvalInterval(ws, box, out)
	p.EvalInterval(ws, at, mid)
	form := mid[0]
	for i := range box {
		form = form.Add(out[1+i].Mul(box[i].Sub(at[i])))
	}
	assert.Less(t, form.Wid(), out[0].Wid()/20)
	assert.True(t, form.Contains(0) && out[0].Contains(0), "the diagonal is a zero")
}

func TestSelectKeepsEnclosures(t *testing.T) {
	b := exactBuilder()
	p, err := b.Compile(b.Input(0), b.ConstRat(big.NewRat(1, 3)), b.Mul(b.ConstPi(), b.Input(0)))
	require.NoError(t, err)
	q, err := p.Select(2, 1)
	require.NoError(t, err)
	ws, err := q.NewIntervalWorkspace()
	require.NoError(t, err)
	out := make([]interval.Interval, 2)
	q.EvalInterval(ws, []interval.Interval{interval.Point(1)}, out)
	assert.Equal(t, within(t, math.Pi, 0x1.921fb54442d19p+1), out[0])
	assert.Equal(t, math.Nextafter(1.0/3, 1), out[1].Sup())
}

func BenchmarkEvalInterval(b *testing.B) {
	bd := exactBuilder()
	// The density of the layered model, |q|^4/(12 |(q, r)|).
	x, y, z := bd.Input(0), bd.Input(1), bd.Input(2)
	s := bd.Add(bd.Mul(x, x), bd.Mul(y, y))
	f := bd.Quo(bd.Mul(s, s), bd.Mul(bd.Const(12), bd.Func(Sqrt, bd.Add(s, bd.Mul(z, z)))))
	p, err := bd.Compile(f)
	require.NoError(b, err)
	ws, err := p.NewIntervalWorkspace()
	require.NoError(b, err)
	in := []interval.Interval{within(b, 1, 1.1), within(b, -2, -1.9), within(b, -0.1, 0.1)}
	out := make([]interval.Interval, 1)
	b.ReportAllocs()
	for b.Loop() {
		p.EvalInterval(ws, in, out)
	}
}

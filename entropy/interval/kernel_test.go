package interval

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy/enclosure"
)

func rat(x float64) *big.Rat { return new(big.Rat).SetFloat64(x) }

// error2 is log2 of |a + b + c - r|, r a rational number.
func error2(r *big.Rat, parts ...float64) float64 {
	d := new(big.Rat).Set(r)
	for _, p := range parts {
		d.Sub(d, rat(p))
	}
	if d.Sign() == 0 {
		return math.Inf(-1)
	}
	f := new(big.Float).SetRat(d.Abs(d))
	m := new(big.Float)
	e := f.MantExp(m)
	v, _ := m.Float64()
	return float64(e) + math.Log2(v)
}

func TestSeriesConstants(t *testing.T) {
	factorial := func(n int) *big.Rat {
		return new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).MulRange(1, int64(n)))
	}
	check := func(head []ball, tail []float64, want func(i int) *big.Rat) {
		t.Helper()
		for i, b := range head {
			if b.e == 0 {
				assert.Zero(t, new(big.Rat).Add(rat(b.h), rat(b.l)).Cmp(want(i)))
				continue
			}
			assert.LessOrEqual(t, error2(want(i), b.h, b.l), math.Log2(b.e), "%d", i)
			assert.Equal(t, b.h, b.h+b.l)
		}
		for i, v := range tail {
			w, _ := want(len(head) + i).Float64()
			assert.Equal(t, w, v)
		}
	}
	check(expHead[:], expTail[:], factorial)
	check(oddHead[:], oddTail[:], func(i int) *big.Rat { return factorial(2*i + 1) })
	check(evenHead[:], evenTail[:], func(i int) *big.Rat { return factorial(2 * i) })
	check(atanhHead[:], atanhTail[:], func(i int) *big.Rat { return big.NewRat(1, int64(2*i+1)) })
}

func TestTranscendentalConstants(t *testing.T) {
	c := enclosure.Context{Prec: 400}
	value := func(x enclosure.Interval) *big.Rat {
		r, _ := x.Lo().Rat(nil)
		return r
	}
	ln2 := value(c.Log(c.Int(2)))
	assert.Less(t, error2(ln2, ln2a, ln2b), -110.0)
	pi := value(c.Pi())
	half := new(big.Rat).Mul(pi, big.NewRat(1, 2))
	assert.Less(t, error2(half, halfPiA, halfPiB, halfPiC), -163.0)
	assert.Less(t, error2(half, halfPiA, halfPiB), -108.0)
	root := value(c.Quo(c.Int(2), c.Sqrt(c.Pi())))
	assert.Less(t, error2(root, twoOverRootPiA, twoOverRootPiB), -110.0)
}

// Ball operations contain the exact results of the centres, and with radii also
// those of points at the rims.
func TestBallContainment(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	draw := func() (ball, *big.Rat) {
		h := math.Ldexp(r.NormFloat64(), r.IntN(61)-30)
		b := ball{h: h}
		if r.IntN(3) > 0 {
			b.l = h * 0x1p-53 * (r.Float64() - 0.5)
			b.h, b.l = fastTwoSum(b.h, b.l)
		}
		v := new(big.Rat).Add(rat(b.h), rat(b.l))
		if r.IntN(2) == 0 {
			b.e = math.Abs(h) * math.Ldexp(1, -60-r.IntN(60))
			v.Add(v, rat(b.e*float64(r.IntN(3)-1)))
		}
		return b, v
	}
	for range 6000 {
		a, x := draw()
		b, y := draw()
		if r.IntN(4) == 0 { // cancellation
			b.h = -a.h
			y = new(big.Rat).Add(rat(b.h), rat(b.l))
			if math.Abs(b.l) > math.Abs(b.h)*0x1p-53 {
				continue
			}
		}
		for name, c := range map[string]struct {
			got  ball
			want *big.Rat
			bits float64
		}{
			"add":   {a.add(b), new(big.Rat).Add(x, y), 0},
			"sub":   {a.sub(b), new(big.Rat).Sub(x, y), 0},
			"mul":   {a.mul(b), new(big.Rat).Mul(x, y), 103},
			"times": {a.times(b.h), new(big.Rat).Mul(x, rat(b.h)), 104},
			"div":   {a.div(b), new(big.Rat).Quo(x, y), 98},
		} {
			d := new(big.Rat).Sub(c.want, new(big.Rat).Add(rat(c.got.h), rat(c.got.l)))
			require.LessOrEqual(t, d.Abs(d).Cmp(rat(c.got.e)), 0, "%s %v %v", name, a, b)
			require.Equal(t, c.got.h, c.got.h+c.got.l)
			if a.e == 0 && b.e == 0 && c.bits > 0 {
				require.LessOrEqual(t, c.got.e, math.Abs(c.got.h)*math.Exp2(-c.bits), "%s %v %v", name, a, b)
			}
		}
	}
}

// Directed arithmetic is that of math/big with its rounding modes, where the
// result is in the normal range, and is bracketed exactly elsewhere.
func TestDirectedRounding(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	check := func(name string, got float64, exact *big.Rat) {
		t.Helper()
		if got == inf {
			require.Positive(t, exact.Cmp(rat(math.MaxFloat64)), name)
			return
		}
		require.GreaterOrEqual(t, rat(got).Cmp(exact), 0, name)
		if got > -math.MaxFloat64 {
			require.Negative(t, rat(down(got)).Cmp(exact), name)
		}
	}
	for range 4000 {
		a, b, c := bound(r, 1), bound(r, 1), bound(r, 1)
		if a-a != 0 || b-b != 0 || c-c != 0 {
			continue
		}
		check("add", addUp(a, b), new(big.Rat).Add(rat(a), rat(b)))
		p := new(big.Rat).Mul(rat(a), rat(b))
		check("mul", mulUp(a, b), p)
		check("fma", fmaUp(a, b, c), p.Add(p, rat(c)))
		if b != 0 {
			check("div", divUp(a, b), new(big.Rat).Quo(rat(a), rat(b)))
		}
		if s := sqrtUp(math.Abs(a)); a != 0 {
			q := new(big.Rat).Mul(rat(s), rat(s))
			require.GreaterOrEqual(t, q.Cmp(rat(math.Abs(a))), 0)
			q.Mul(rat(down(s)), rat(down(s)))
			require.Negative(t, q.Cmp(rat(math.Abs(a))))
		}
		k := r.IntN(2200) - 1100
		scaled := rat(a)
		if k >= 0 {
			scaled.Mul(scaled, new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), uint(k))))
		} else {
			scaled.Quo(scaled, new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), uint(-k))))
		}
		check("scale", scaleUp(a, k), scaled)
	}
}

func TestDecorations(t *testing.T) {
	bounded, half := Point(1), Interval{1, inf}
	assert.Equal(t, Com, Initial(bounded))
	assert.Equal(t, Dac, Initial(half))
	assert.Equal(t, Trv, Initial(Empty()))
	assert.Equal(t, Com, Com.After(true, true, bounded))
	assert.Equal(t, Dac, Com.After(true, true, half))
	assert.Equal(t, Def, Com.After(true, false, bounded))
	assert.Equal(t, Trv, Com.After(false, false, bounded))
	assert.Equal(t, Def, Def.After(true, true, bounded))
	assert.Equal(t, "com dac def trv", Com.String()+" "+Dac.String()+" "+Def.String()+" "+Trv.String())
}

// FuzzPoints checks properties that need no reference: points lie in boxes, no
// bound is NaN, bounds are in order, and functions respect their symmetries.
func FuzzPoints(f *testing.F) {
	f.Add(0.0, 1.0, 0.5, int16(3))
	f.Add(-1e308, 1e308, 1e-320, int16(-7))
	f.Add(710.0, -745.2, math.Pi, int16(1000))
	f.Fuzz(func(t *testing.T, a, b, c float64, n int16) {
		x, err := New(min(a, b), max(a, b))
		if err != nil {
			return
		}
		y := Point(c)
		m := x.Intersection(Interval{-math.MaxFloat64, math.MaxFloat64})
		for i := range operations {
			o := &operations[i]
			second := y
			if o.name == "powrat" {
				second = Point(7)
			}
			wide := o.eval(int(n), x, second, x)
			require.False(t, math.IsNaN(wide.lo) || math.IsNaN(wide.hi), o.name)
			require.True(t, wide.lo <= wide.hi && wide.lo < inf && wide.hi > -inf || wide == Empty(), "%s %v", o.name, wide)
			require.False(t, wide.lo == 0 && math.Signbit(wide.lo) || wide.hi == 0 && math.Signbit(wide.hi), o.name)
			if m.IsEmpty() {
				continue
			}
			for _, v := range []float64{m.lo, m.hi, m.Mid()} {
				p := o.eval(int(n), Point(v), second, Point(v))
				require.True(t, p.Subset(wide), "%s of %v in %v: %v in %v", o.name, v, x, p, wide)
			}
		}
		for _, odd := range []func(Interval) Interval{Interval.Sin, Interval.Tan, Interval.Sinh, Interval.Tanh, Interval.Atan, Interval.Erf, Interval.Cbrt} {
			require.Equal(t, odd(x).Neg(), odd(x.Neg()), "%v", x)
		}
		require.Equal(t, x.Cos(), x.Neg().Cos())
		require.Equal(t, x.Cosh(), x.Neg().Cosh())
	})
}

func BenchmarkOperations(b *testing.B) {
	x, y := Interval{0.71, 0.72}, Interval{-1.3, 2.1}
	for i := range operations {
		o := &operations[i]
		second := y
		if o.name == "powrat" {
			second = Point(3)
		}
		b.Run(o.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				o.eval(5, x, second, x)
			}
		})
	}
	b.Run("sin large", func(b *testing.B) {
		p := Point(0x1p30)
		for b.Loop() {
			p.Sin()
		}
	})
}

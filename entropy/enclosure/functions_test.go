package enclosure_test

import (
	"bufio"
	"bytes"
	"fmt"
	"math/big"
	"math/rand/v2"
	"os/exec"
	"strings"
	"testing"
	"time"

	"creaseproof/entropy/enclosure"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

type function struct {
	name string
	eval func(c ctx, x interval) interval
	// mp is the same function in the reference library.
	mp string
	// lo, hi bound the arguments drawn.
	lo, hi string
}

var functions = []function{
	{"exp", ctx.Exp, "exp(x)", "-60", "60"},
	{"exp far", ctx.Exp, "exp(x)", "-100000", "100000"},
	{"log", ctx.Log, "log(x)", "1e-9", "50"},
	{"log near 1", ctx.Log, "log(x)", "0.999999", "1.000001"},
	{"sin", ctx.Sin, "sin(x)", "-30", "30"},
	{"sin far", ctx.Sin, "sin(x)", "-1e30", "1e30"},
	{"cos", ctx.Cos, "cos(x)", "-30", "30"},
	{"tan", ctx.Tan, "tan(x)", "-30", "30"},
	{"sinh", ctx.Sinh, "sinh(x)", "-20", "20"},
	{"sinh small", ctx.Sinh, "sinh(x)", "-1e-6", "1e-6"},
	{"cosh", ctx.Cosh, "cosh(x)", "-20", "20"},
	{"tanh", ctx.Tanh, "tanh(x)", "-20", "20"},
	{"tanh small", ctx.Tanh, "tanh(x)", "-1e-6", "1e-6"},
	{"erf", ctx.Erf, "erf(x)", "-5", "5"},
	{"erf far", ctx.Erf, "erf(x)", "-20", "20"},
	{"erf small", ctx.Erf, "erf(x)", "-1e-6", "1e-6"},
	{"sqrt", ctx.Sqrt, "sqrt(x)", "0", "1e6"},
	{"seventh root", func(c ctx, x interval) interval { return c.Root(x, 7) }, "x**(mpf(1)/7)", "1e-9", "1e6"},
	{"root 100", func(c ctx, x interval) interval { return c.Root(x, 100) }, "x**(mpf(1)/100)", "1e-9", "1e6"},
	{"power 17", func(c ctx, x interval) interval { return c.PowInt(x, 17) }, "x**17", "-9", "9"},
	{"power -5", func(c ctx, x interval) interval { return c.PowInt(x, -5) }, "x**(-5)", "1e-3", "9"},
}

func (f function) draw(rng *rand.Rand) *big.Rat {
	lo, hi := rat(f.lo), rat(f.hi)
	t := new(big.Rat).SetFloat64(rng.Float64())
	if rng.IntN(8) == 0 { // simple numbers, for quadrants and special values
		t = big.NewRat(int64(rng.IntN(61)), 60)
	}
	d := new(big.Rat).Sub(hi, lo)
	return d.Add(lo, d.Mul(d, t))
}

// reference evaluates the functions in mpmath, with 1200 bits; each value is
// then good to far more bits than the intervals have.
func reference(t *testing.T, exprs []string, args []*big.Rat) []*big.Rat {
	t.Helper()
	const script = `
import sys
from mpmath import *
mp.prec = 1200
for line in sys.stdin:
    e, n, d = line.rstrip("\n").split("|")
    x = mpf(int(n)) / mpf(int(d))
    s, m, k, _ = eval(e)._mpf_
    print((-1)**s * int(m), int(k))
`
	const python = "/usr/bin/python3"
	if err := exec.Command(python, "-c", "import mpmath").Run(); err != nil {
		t.Skip("mpmath (Debian package python3-mpmath) is not installed: no reference values")
	}
	var in strings.Builder
	for i, e := range exprs {
		fmt.Fprintf(&in, "%s|%v|%v\n", e, args[i].Num(), args[i].Denom())
	}
	cmd := exec.Command(python, "-c", script)
	cmd.Stdin = strings.NewReader(in.String())
	var stderr bytes.Buffer
	cmd.Stderr = &stderr
	out, err := cmd.Output()
	require.NoError(t, err, stderr.String())
	var values []*big.Rat
	sc := bufio.NewScanner(bytes.NewReader(out))
	sc.Buffer(nil, 1<<20)
	for sc.Scan() {
		var m big.Int
		var k int
		_, err := fmt.Sscan(sc.Text(), &m, &k)
		require.NoError(t, err)
		v := new(big.Rat).SetInt(&m)
		s := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), uint(max(k, -k))))
		if k < 0 {
			s.Inv(s)
		}
		values = append(values, v.Mul(v, s))
	}
	require.Len(t, values, len(exprs))
	return values
}

// holds reports whether x contains v up to the error of the reference.
func holds(x interval, v *big.Rat) bool {
	e := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), 1000))
	e.Inv(e)
	e.Mul(e, new(big.Rat).Abs(v))
	c := ctx{Prec: 1300}
	return !enclosure.Disjoint(x, c.FromRats(new(big.Rat).Sub(v, e), new(big.Rat).Add(v, e)))
}

// Containment and tightness at random rational points, against mpmath (Debian
// package python3-mpmath, an independent implementation).
func TestAgainstMpmath(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	var exprs []string
	var args []*big.Rat
	const each = 24
	for _, f := range functions {
		for range each {
			exprs, args = append(exprs, f.mp), append(args, f.draw(rng))
		}
	}
	values := reference(t, exprs, args)
	for i, f := range functions {
		for j := range each {
			k := i*each + j
			for _, p := range []uint{53, 128, 300} {
				c := ctx{Prec: p}
				// The argument is given exactly, through a wide enough context.
				x := ctx{Prec: 2000}.FromRat(args[k])
				y := f.eval(c, x)
				require.True(t, holds(y, values[k]), "%s at %v, %d bits: %v", f.name, args[k], p, y)
				require.True(t, tight(y, p, 4), "%s at %v, %d bits: %v is wide", f.name, args[k], p, y)
			}
		}
	}
}

// Containment over wide intervals: values at members lie inside.
func TestWideAgainstMpmath(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	var exprs []string
	var args []*big.Rat
	var results []interval
	for _, f := range functions {
		for range 24 {
			a := f.draw(rng)
			d := new(big.Rat).Sub(f.draw(rng), a)
			d.Mul(d, big.NewRat(1, int64(1+rng.IntN(40))))
			b := new(big.Rat).Add(a, d)
			x := ctx{Prec: 80}.FromRats(a, b)
			exprs, args = append(exprs, f.mp), append(args, between(rng, a, b))
			results = append(results, f.eval(ctx{Prec: 80}, x))
		}
	}
	values := reference(t, exprs, args)
	for i, v := range values {
		require.True(t, holds(results[i], v), "%s at %v: %v", exprs[i], args[i], results[i])
	}
}

// A sub-interval gives a sub-interval.
func TestInclusion(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	c := ctx{Prec: 64}
	for _, f := range functions {
		for range 60 {
			a, b := f.draw(rng), f.draw(rng)
			in := f.eval(c, c.FromRats(between(rng, a, b), between(rng, a, b)))
			out := f.eval(c, c.FromRats(a, b))
			require.True(t, in.Within(out), "%s on %v, %v: %v in %v", f.name, a, b, in, out)
		}
	}
}

func TestSpecialValues(t *testing.T) {
	c := ctx{Prec: 128}
	zero, one := c.Int(0), c.Int(1)
	for name, x := range map[string]interval{
		"exp 0 = 1":  c.Sub(c.Exp(zero), one),
		"cosh 0 = 1": c.Sub(c.Cosh(zero), one),
		"cos 0 = 1":  c.Sub(c.Cos(zero), one),
		"log 1":      c.Log(one), "sin 0": c.Sin(zero), "tan 0": c.Tan(zero),
		"sinh 0": c.Sinh(zero), "tanh 0": c.Tanh(zero), "erf 0": c.Erf(zero),
	} {
		assert.Equal(t, 0, sign(t, x), name)
	}
	// NIST Digital Library of Mathematical Functions: π (3.12.1), e (4.2.11).
	assert.True(t, holdsDecimal(c.Pi(), "3.14159265358979323846264338327950288419716939937510"))
	assert.True(t, holdsDecimal(c.Exp(one), "2.71828182845904523536028747135266249775724709369995"))
	assert.False(t, holdsDecimal(c.Pi(), "3.14159265358979323846264338327950288429716939937510"))

	// Identities: the difference must contain zero and be small.
	for _, s := range []string{"1/3", "7/5", "-11/4", "22/7", "355/113"} {
		x := c.FromRat(rat(s))
		d := c.Sub(c.Add(c.Sqr(c.Sin(x)), c.Sqr(c.Cos(x))), one)
		assert.True(t, d.Contains(new(big.Rat)))
		d = c.Sub(c.Sub(c.Sqr(c.Cosh(x)), c.Sqr(c.Sinh(x))), one)
		assert.True(t, d.Contains(new(big.Rat)))
		d = c.Sub(c.Log(c.Exp(x)), x)
		assert.True(t, d.Contains(new(big.Rat)))
		assert.True(t, d.Width().Cmp(big.NewFloat(1e-35)) < 0)
	}
	// sin changes sign between two rational neighbours of π; at 64 bits the
	// neighbours cannot be told apart, and no sign may be claimed.
	for _, k := range []struct {
		at   string
		want int
	}{
		{"3.14159265358979323846264338327950288419", 1},
		{"3.14159265358979323846264338327950288420", -1},
	} {
		wide, narrow := ctx{Prec: 300}, ctx{Prec: 64}
		assert.Equal(t, k.want, sign(t, wide.Sin(wide.FromRat(rat(k.at)))))
		_, ok := narrow.Sin(narrow.FromRat(rat(k.at))).Sign()
		assert.False(t, ok)
	}
}

func holdsDecimal(x interval, s string) bool {
	v, e := rat(s), rat("1e-50")
	c := ctx{Prec: 300}
	return !enclosure.Disjoint(x, c.FromRats(new(big.Rat).Sub(v, e), new(big.Rat).Add(v, e)))
}

func TestQuadrants(t *testing.T) {
	c := ctx{Prec: 64}
	iv := func(a, b string) interval { return c.FromRats(rat(a), rat(b)) }
	check := func(name string, got interval, lo, hi string) {
		t.Helper()
		l, h := got.Text(4)
		assert.Equal(t, lo, l, name)
		assert.Equal(t, hi, h, name)
	}
	check("increasing", c.Sin(iv("0", "1")), "0", "0.8415")
	check("over the maximum", c.Sin(iv("1", "2")), "0.8414", "1")
	check("over the minimum", c.Sin(iv("4", "5")), "-1", "-0.7568")
	check("falling", c.Sin(iv("2", "4")), "-0.7569", "0.9093")
	check("both", c.Sin(iv("1", "5")), "-1", "1")
	check("a period", c.Sin(iv("10", "17")), "-1", "1")
	check("over zero", c.Cos(iv("-1/2", "1")), "0.5403", "1")
	check("over π", c.Cos(iv("3", "4")), "-1", "-0.6536")
	check("falling cosine", c.Cos(iv("1", "3")), "-0.99", "0.5404")
	check("tangent", c.Tan(iv("-1", "1")), "-1.558", "1.558")
	check("tangent, next branch", c.Tan(iv("2", "4")), "-2.186", "1.158")
}

func TestExtremes(t *testing.T) {
	start := time.Now()
	c := ctx{Prec: 128}
	tower := c.Exp(c.Exp(c.Exp(c.Int(1000))))
	assert.Equal(t, 1, sign(t, tower))
	assert.False(t, tower.IsBounded())
	assert.True(t, c.Quo(c.Int(1), tower).Contains(new(big.Rat)))
	low := c.Exp(c.Neg(tower))
	assert.True(t, low.Contains(new(big.Rat)))
	assert.True(t, c.Sub(tower, tower).IsEntire())
	huge, tiny := c.Int(3), c.FromRat(rat("1/3"))
	for range 64 {
		huge, tiny = c.Sqr(huge), c.Sqr(tiny)
	}
	assert.Equal(t, 1, sign(t, huge))
	_, ok := tiny.Sign()
	assert.False(t, ok, "underflow keeps zero possible")
	for _, x := range []interval{huge, tiny, c.Neg(huge), c.Neg(tiny), tower, low, c.Exp(c.Int(2000000)), c.Exp(c.Int(-2000000))} {
		for _, f := range functions {
			y := f.eval(c, x)
			y.Text(20)
			for _, z := range []interval{huge, tiny, tower, low, x} {
				c.Add(y, z)
				c.Mul(y, c.Sub(z, y))
				c.Quo(y, z)
				c.Quo(z, y).Width()
				y.Contains(rat("1/3"))
			}
		}
		c.PowInt(x, 1<<40)
		c.PowInt(x, -1<<40)
		c.PowInt(x, -1<<63)
	}
	assert.Equal(t, 1, sign(t, c.Sub(c.Exp(c.Int(2000000)), c.Int(1))))
	assert.Equal(t, -1, sign(t, c.Sub(c.Exp(c.Int(-2000000)), c.Int(1))))
	assert.Equal(t, 1, sign(t, c.Sub(c.Int(1), c.Mul(c.Tanh(c.Int(30)), c.Tanh(c.Int(30))))))
	one := c.Erf(c.Int(1 << 40))
	assert.True(t, one.Contains(rat("1")))
	assert.True(t, tight(one, 128, 2))
	assert.Less(t, time.Since(start), 2*time.Minute, "a hang, not a benchmark")
}

// FuzzExpression applies a random program of operations; nothing may panic, no
// interval may be reversed, and exact rational operations must be contained.
func FuzzExpression(f *testing.F) {
	f.Add([]byte{1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16, 17, 18, 19, 20}, uint8(53))
	f.Add([]byte{0, 0, 12, 0, 12, 0, 12, 5, 5, 5, 9, 9, 3, 200, 100, 50}, uint8(20))
	rng := rand.New(rand.NewPCG(13, 14))
	for range 50 {
		b := make([]byte, 40)
		for i := range b {
			b[i] = byte(rng.Uint32())
		}
		f.Add(b, byte(rng.Uint32()))
	}
	f.Fuzz(func(t *testing.T, program []byte, prec uint8) {
		if len(program) > 64 {
			program = program[:64]
		}
		c := ctx{Prec: uint(prec)}
		stack := []interval{c.Int(1), c.FromRat(big.NewRat(-7, 3))}
		for i, op := range program {
			x, y := stack[len(stack)-1], stack[int(op)%len(stack)]
			var z interval
			switch op % 12 {
			case 0:
				z = c.Add(x, y)
			case 1:
				z = c.Sub(x, y)
			case 2:
				z = c.Mul(x, y)
			case 3:
				z = c.Quo(x, y)
			case 4:
				z = enclosure.Union(x, y)
			case 5:
				z = c.PowInt(x, int(op)-100)
			case 6:
				z = c.Root(c.Abs(x), int(op)/3)
			case 7:
				z = c.FromRat(big.NewRat(int64(i)-20, int64(op)+1))
			default:
				z = functions[int(op)%len(functions)].eval(c, x)
			}
			if !z.IsEntire() && z.Lo().Cmp(z.Hi()) > 0 {
				t.Fatalf("reversed: %v", z)
			}
			z.Text(12)
			z.Width()
			z.Contains(big.NewRat(1, 3))
			stack = append(stack, z)
		}
	})
}

func BenchmarkExp(b *testing.B)  { benchmark(b, ctx.Exp) }
func BenchmarkSin(b *testing.B)  { benchmark(b, ctx.Sin) }
func BenchmarkLog(b *testing.B)  { benchmark(b, ctx.Log) }
func BenchmarkErf(b *testing.B)  { benchmark(b, ctx.Erf) }
func BenchmarkTanh(b *testing.B) { benchmark(b, ctx.Tanh) }

func benchmark(b *testing.B, f func(ctx, interval) interval) {
	c := ctx{Prec: 128}
	x := c.FromRat(big.NewRat(13, 8))
	for b.Loop() {
		f(c, x)
	}
}

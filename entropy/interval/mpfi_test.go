package interval

import (
	"bufio"
	"encoding/binary"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// An operation as the helper program knows it, by its place in the list, and
// how operands are drawn. domain clips the first operand to where the helper
// is defined.
type operation struct {
	name   string
	eval   func(n int, x, y, z Interval) Interval
	domain Interval
	scale  float64 // of moderate operands
	ulps   int64   // how far a bound may be from the nearest one outward
}

func unary(f func(Interval) Interval) func(int, Interval, Interval, Interval) Interval {
	return func(_ int, x, _, _ Interval) Interval { return f(x) }
}

func binaryOp(f func(x, y Interval) Interval) func(int, Interval, Interval, Interval) Interval {
	return func(_ int, x, y, _ Interval) Interval { return f(x, y) }
}

var operations = []operation{
	{"add", binaryOp(Interval.Add), Entire(), 1, 0},
	{"sub", binaryOp(Interval.Sub), Entire(), 1, 0},
	{"mul", binaryOp(Interval.Mul), Entire(), 1, 0},
	{"div", binaryOp(Interval.Div), Entire(), 1, 0},
	{"sqr", unary(Interval.Sqr), Entire(), 1, 0},
	{"sqrt", unary(Interval.Sqrt), Interval{0, inf}, 1, 0},
	{"fma", func(_ int, x, y, z Interval) Interval { return x.Fma(y, z) }, Entire(), 1, 0},
	{"pown", func(n int, x, _, _ Interval) Interval { return x.Pown(n) }, Entire(), 1, 1},
	{"pow", binaryOp(Interval.Pow), Interval{0, inf}, 3, 1},
	{"rootn", func(n int, x, _, _ Interval) Interval { return x.Rootn(n) }, Entire(), 1, 1},
	{"cbrt", unary(Interval.Cbrt), Entire(), 1, 1},
	{"abs", unary(Interval.Abs), Entire(), 1, 0},
	{"exp", unary(Interval.Exp), Entire(), 100, 1},
	{"log", unary(Interval.Log), Interval{0, inf}, 10, 1},
	{"sin", unary(Interval.Sin), Entire(), 10, 1},
	{"cos", unary(Interval.Cos), Entire(), 10, 1},
	{"tan", unary(Interval.Tan), Entire(), 3, 1},
	{"sinh", unary(Interval.Sinh), Entire(), 100, 1},
	{"cosh", unary(Interval.Cosh), Entire(), 100, 1},
	{"tanh", unary(Interval.Tanh), Entire(), 3, 1},
	{"atan", unary(Interval.Atan), Entire(), 3, 1},
	{"erf", unary(Interval.Erf), Entire(), 2, 1},
	{"powrat", func(n int, x, y, _ Interval) Interval { return x.PowRat(n, int(y.lo)) }, Interval{0, inf}, 3, 1},
	{"recip", unary(Interval.Recip), Entire(), 1, 0},
}

// bound draws a number: special, of any exponent, near a special one, an
// integer, or moderate.
func bound(r *rand.Rand, scale float64) float64 {
	special := [...]float64{0, 1, 2, 0.5, math.Pi, math.Pi / 2, 710, 745, 709.7827128933841,
		math.SmallestNonzeroFloat64, 0x1p-1022, 0x1p-1022 - 0x1p-1074, math.MaxFloat64, 0x1p1023, 0x1p-537, 0x1p512,
		inf, inf, 1e-8, 0x1p-28, 0x1p-27, 0x1p20, 6, 20, 711, 0x1p53}
	var v float64
	switch k := r.IntN(16); {
	case k < 2:
		v = special[r.IntN(len(special))]
	case k == 2: // any exponent
		v = math.Ldexp(1+r.Float64(), r.IntN(2098)-1074)
	case k == 3:
		v = special[r.IntN(len(special))]
		if v < inf {
			v = math.Float64frombits(math.Float64bits(v) + uint64(r.IntN(3)))
		}
		if v > 1 && v < inf {
			v = down(down(v))
		}
	case k < 6:
		v = float64(r.IntN(30))
	case k == 6: // near 1
		v = 1 + math.Ldexp(r.Float64()-0.5, -r.IntN(53))
	case k == 7: // small
		v = math.Ldexp(r.Float64(), -r.IntN(40))
	default:
		v = scale * r.ExpFloat64()
	}
	if r.IntN(2) == 0 {
		v = -v
	}
	return v
}

// operand draws an interval: a point, a narrow or a wide one, sometimes empty.
func operand(r *rand.Rand, scale float64) Interval {
	a := bound(r, scale)
	switch k := r.IntN(8); {
	case k < 3 && !math.IsInf(a, 0):
		return Point(a)
	case k == 3 && math.Abs(a) < 0x1p1000:
		return make2(a, up(a+math.Abs(a)*math.Ldexp(r.Float64(), -r.IntN(50))))
	case k == 4 && r.IntN(8) == 0:
		return Empty()
	}
	b := bound(r, scale)
	x, err := New(min(a, b), max(a, b))
	if err != nil {
		return Entire()
	}
	return x
}

// helper compiles the program that judges, or skips the test.
func helper(t *testing.T) string {
	t.Helper()
	missing := func(format string, args ...any) {
		if os.Getenv("CREASEPROOF_CI") != "" {
			t.Fatalf(format, args...)
		}
		t.Skipf(format, args...)
	}
	cc, err := exec.LookPath("cc")
	if err != nil {
		missing("no C compiler for the comparison with MPFI: %v", err)
	}
	bin := filepath.Join(t.TempDir(), "mpfi")
	out, err := exec.Command(cc, "-O2", "-o", bin, filepath.Join("testdata", "mpfi.c"), "-lmpfi", "-lmpfr", "-lgmp").CombinedOutput()
	if err != nil {
		missing("the comparison with MPFI needs the Debian package libmpfi-dev: %v\n%s", err, out)
	}
	return bin
}

type sample struct {
	op      int
	n       int
	x, y, z Interval
}

func draw(r *rand.Rand) sample {
	s := sample{op: r.IntN(len(operations))}
	o := operations[s.op]
	s.x, s.y, s.z = operand(r, o.scale), operand(r, o.scale), operand(r, o.scale)
	if o.name == "powrat" {
		s.y = Point(float64(2 + r.IntN(12)))
	}
	s.n = r.IntN(41) - 20
	if r.IntN(16) == 0 {
		s.n = r.IntN(4001) - 2000
	}
	if o.name == "rootn" {
		s.n = 1 + r.IntN(12)
	}
	// Large arguments of these are slow on both sides.
	if m := s.x.Mag(); (o.name == "sin" || o.name == "cos" || o.name == "tan") && m > large && m < inf && r.IntN(100) != 0 {
		s.x = Point(r.Float64() * large)
	}
	return s
}

// undefined reports whether the result is known without the helper: empty or
// without continuity conventions that the helper shares.
func (s *sample) undefined() (Interval, bool) {
	o := operations[s.op]
	x := s.x.Intersection(o.domain)
	if o.name == "rootn" && s.n%2 == 0 {
		x = x.Intersection(Interval{0, inf})
	}
	zero := Interval{}
	binary := strings.Contains(" add sub mul div fma pow powrat ", " "+o.name+" ")
	switch {
	case o.name == "powrat" && s.n%int(s.y.lo) == 0:
		return s.x.Pown(s.n / int(s.y.lo)), true
	case x.IsEmpty(), binary && s.y.IsEmpty(), o.name == "fma" && s.z.IsEmpty():
		return Empty(), true
	case o.name == "div" && s.y == zero, o.name == "recip" && x == zero, o.name == "log" && x.hi == 0:
		return Empty(), true
	case o.name == "pown" && s.n < 0 && x == zero, o.name == "pow" && x.hi == 0 && s.y.hi <= 0:
		return Empty(), true
	case o.name == "powrat" && s.n < 0 && x == zero:
		return Empty(), true
	case (o.name == "pow" || o.name == "powrat") && x == zero:
		return zero, true
	case o.name == "mul" && (x == zero || s.y == zero):
		return zero, true
	}
	s.x = x
	return Empty(), false
}

// steps is the number of float64 numbers from a up to b.
func steps(a, b float64) int64 {
	index := func(v float64) int64 {
		i := int64(math.Float64bits(math.Abs(v)))
		if v < 0 {
			return -i
		}
		return i
	}
	return index(b) - index(a)
}

// Every operation contains the range that MPFI (N. Revol and F. Rouillier,
// Reliable Computing 11 (2005) 275–290) computes with 200 bits.
func TestContainmentMPFI(t *testing.T) {
	bin := helper(t)
	count := 1_200_000
	if testing.Short() {
		count = 60_000
	}
	r := rand.New(rand.NewPCG(1788, 1))
	samples := make([]sample, 0, count)
	for len(samples) < count {
		s := draw(r)
		if want, ok := s.undefined(); ok {
			got := operations[s.op].eval(s.n, s.x, s.y, s.z)
			require.Equal(t, want, got, "%s n=%d %v %v %v", operations[s.op].name, s.n, s.x, s.y, s.z)
			continue
		}
		samples = append(samples, s)
	}

	cmd := exec.Command(bin)
	in, err := cmd.StdinPipe()
	require.NoError(t, err)
	out, err := cmd.StdoutPipe()
	require.NoError(t, err)
	cmd.Stderr = os.Stderr
	require.NoError(t, cmd.Start())
	sent := make(chan error, 1)
	go func() {
		w := bufio.NewWriterSize(in, 1<<16)
		var err error
		for _, s := range samples {
			rec := [8]float64{float64(s.op), float64(s.n), s.x.lo, s.x.hi, s.y.lo, s.y.hi, s.z.lo, s.z.hi}
			if err == nil {
				err = binary.Write(w, binary.NativeEndian, rec[:])
			}
		}
		if err == nil {
			err = w.Flush()
		}
		if e := in.Close(); err == nil {
			err = e
		}
		sent <- err
	}()

	type stat struct {
		bounds, tight int
		worst         int64
	}
	stats := make([]stat, len(operations))
	rd := bufio.NewReaderSize(out, 1<<16)
	failures := 0
	for _, s := range samples {
		var b [16]byte
		_, err := io.ReadFull(rd, b[:])
		require.NoError(t, err)
		lo := math.Float64frombits(binary.NativeEndian.Uint64(b[:8])) + 0
		hi := math.Float64frombits(binary.NativeEndian.Uint64(b[8:])) + 0
		o := &operations[s.op]
		got := o.eval(s.n, s.x, s.y, s.z)
		what := fmt.Sprintf("%s n=%d %v %v %v: %v, MPFI [%v, %v]", o.name, s.n, s.x, s.y, s.z, got, lo, hi)
		require.False(t, math.IsNaN(lo) || math.IsNaN(hi), what)
		if !(got.lo <= lo && hi <= got.hi) {
			t.Errorf("not contained: %s", what)
			if failures++; failures > 20 {
				t.Fatal("and so on")
			}
			continue
		}
		for _, d := range []int64{steps(got.lo, lo), steps(hi, got.hi)} {
			st := &stats[s.op]
			st.bounds++
			if d == 0 {
				st.tight++
			}
			st.worst = max(st.worst, d)
			if d > o.ulps {
				t.Errorf("loose by %d: %s", d, what)
				if failures++; failures > 20 {
					t.Fatal("and so on")
				}
			}
		}
	}
	require.NoError(t, <-sent)
	require.NoError(t, cmd.Wait())
	for i, st := range stats {
		tight := float64(st.tight) / float64(st.bounds)
		assert.Greater(t, tight, 0.99, operations[i].name)
		t.Logf("%-7s %7d bounds, %.4f%% the nearest outward, worst %d steps off", operations[i].name, st.bounds, 100*tight, st.worst)
	}
}

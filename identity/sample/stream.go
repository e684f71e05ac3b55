package sample

import (
	"math"
	"math/rand/v2"
)

// Stream is the source of random numbers of one block. Source is the generator
// itself, whose Uint64 the compiler can inline in a loop; Rand draws from the
// same generator.
type Stream struct {
	Source *rand.PCG
	*rand.Rand
}

// NewStream returns the stream of a block.
func NewStream(seed, block uint64) *Stream {
	src := rand.NewPCG(0, 0)
	s := &Stream{Source: src, Rand: rand.New(src)}
	s.seed(seed, block)
	return s
}

// seed sets the stream to the start of a block. Hashing keeps the states of
// neighbouring blocks apart.
func (s *Stream) seed(seed, block uint64) {
	a := mix(seed)
	s.Source.Seed(a, mix(a+block))
}

// mix is the finalizer of SplitMix64 (G. L. Steele, D. Lea and C. H. Flood,
// OOPSLA 2014), a bijection.
func mix(z uint64) uint64 {
	z += 0x9e3779b97f4a7c15
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

const (
	mantissaBits = 52
	exponentBias = 1023
)

// exponents are a range of binary exponents, as the bits of float64 encode it.
type exponents struct{ first, count uint64 }

func exponentRange(lo, hi int) exponents {
	lo = min(max(lo, -1022), 1023)
	hi = min(max(hi, lo), 1023)
	return exponents{uint64(lo + exponentBias), uint64(hi - lo + 1)}
}

// heavy makes a float64 of one random word: the low 52 bits are the mantissa,
// the top bit the sign, and 11 bits choose the exponent. The magnitude is
// within a factor 1.5 of log-uniform.
func (e exponents) heavy(w uint64) float64 {
	exp := e.first + (w>>mantissaBits&0x7ff)*e.count>>11
	return math.Float64frombits(w&(1<<63|1<<mantissaBits-1) | exp<<mantissaBits)
}

// short is heavy with a mantissa of the given number of bits.
func (e exponents) short(w uint64, bits int) float64 {
	return e.heavy(w &^ (1<<(mantissaBits+1-bits) - 1))
}

// signed returns a number uniform in [-1, 1), a multiple of 2^-52.
func signed(w uint64) float64 { return float64(int64(w)>>11) * 0x1p-52 }

// fillAngles draws the angles of n lanes: one in eight on an axis or a
// diagonal, three in eight with t = p/16, the others with t of 24 bits.
func (l *Layout) fillAngles(s *Stream, cols [][]float64, n int) {
	src := s.Source
	for _, p := range l.angles {
		cosines, sines := cols[p[0]][:n], cols[p[1]][:n]
		for j := range cosines {
			w := src.Uint64()
			var t float64
			switch class := w & 7; {
			case class == 0:
				k := w >> 3 & 7
				cosines[j], sines[j] = compass[k], compass[(k+6)&7]
				continue
			case class < 4:
				t = float64(int64(w>>3&31)-16) * 0x1p-4
			default:
				t = float64(int64(w>>8&(1<<25-1))-1<<24) * 0x1p-24
			}
			c, sn := circle(t)
			cosines[j] = math.Copysign(c, float64(int64(w)))
			sines[j] = sn
		}
	}
}

// compass holds the cosines of multiples of 45 degrees; the sine of k*45
// degrees is the cosine of (k-2)*45 degrees.
var compass = [8]float64{1, math.Sqrt2 / 2, 0, -math.Sqrt2 / 2, -1, -math.Sqrt2 / 2, 0, math.Sqrt2 / 2}

// circle returns the point of the unit circle with parameter t = tan(θ/2). For
// t of at most 24 bits in [-1, 1] each coordinate is rounded once.
func circle(t float64) (cos, sin float64) {
	q := float64(t * t) // exact for such t; the conversion forbids fusing
	d := 1 + q
	return (1 - q) / d, 2 * t / d
}

package program

import (
	"errors"
	"fmt"
	"math"
	"math/big"

	"creaseproof/entropy/interval"
)

// ErrEnclosure means that an enclosed constant is empty, or that two enclosures
// were given under one name.
var ErrEnclosure = errors.New("program: a constant needs one enclosure that is not empty")

// enclosed is a constant that is known by an enclosure; mid is its value in
// float64 evaluation.
type enclosed struct {
	name string
	x    interval.Interval
	mid  float64
}

// ConstInterval returns the constant that x encloses. Constants are the same
// number exactly if they have the same name, whatever their enclosures. In float64
// evaluation its value is the midpoint of x.
func (b *Builder) ConstInterval(name string, x interval.Interval) Ref {
	return b.enclosed(name, x, x.Mid())
}

func (b *Builder) enclosed(name string, x interval.Interval, mid float64) Ref {
	if b.err != nil {
		return refZero
	}
	if x.IsEmpty() {
		return b.fail(fmt.Errorf("%w: %s", ErrEnclosure, name))
	}
	if x.IsSingleton() {
		return b.Const(x.Inf())
	}
	i, ok := b.named[name]
	if !ok {
		if b.named == nil {
			b.named = map[string]int{}
		}
		i = len(b.ranges)
		b.named[name] = i
		b.ranges = append(b.ranges, enclosed{name, x, mid})
	}
	if b.ranges[i].x != x {
		return b.fail(fmt.Errorf("%w: %s in %v and %v", ErrEnclosure, name, b.ranges[i].x, x))
	}
	return b.add(node{kind: kindRange, imm: uint64(i)})
}

// ConstRat returns the constant r: rounded to nearest, and in an exact Builder
// enclosed where it is no float64.
func (b *Builder) ConstRat(r *big.Rat) Ref {
	v, _ := r.Float64() // what it says of exactness is wrong for underflow
	if !b.Exact || !math.IsInf(v, 0) && new(big.Rat).SetFloat64(v).Cmp(r) == 0 {
		return b.Const(v)
	}
	lo, hi := v, v
	switch {
	case math.IsInf(v, 1):
		lo, v = math.MaxFloat64, math.MaxFloat64
	case math.IsInf(v, -1):
		hi, v = -math.MaxFloat64, -math.MaxFloat64
	case new(big.Rat).SetFloat64(v).Cmp(r) < 0:
		hi = math.Nextafter(v, math.Inf(1))
	default:
		lo = math.Nextafter(v, math.Inf(-1))
	}
	return b.between(r.RatString(), lo, hi, v)
}

// ConstPi returns the constant pi, enclosed in an exact Builder.
func (b *Builder) ConstPi() Ref {
	if !b.Exact {
		return b.Const(math.Pi)
	}
	return b.between("pi", 0x1.921fb54442d18p+1, 0x1.921fb54442d19p+1, math.Pi)
}

// twoOverRootPi returns the factor 2/sqrt(pi) of the derivative of Erf.
func (b *Builder) twoOverRootPi() Ref {
	if !b.Exact {
		return b.Const(2 / math.SqrtPi)
	}
	return b.between("2/sqrt(pi)", 0x1.20dd750429b6dp+0, 0x1.20dd750429b6ep+0, 2/math.SqrtPi)
}

func (b *Builder) between(name string, lo, hi, v float64) Ref {
	x, err := interval.New(lo, hi)
	if err != nil {
		return b.fail(err)
	}
	return b.enclosed(name, x, v)
}

// exponent returns the exponent of a rational power, num/den with den > 1.
func (n node) exponent() (num, den int) {
	return int(int32(n.imm >> 32)), int(int32(n.imm))
}

// PowRat returns the power x^(num/den) of a base x >= 0; of any base where the
// exponent is an integer. It is Pow with a rounded exponent unless the Builder is
// exact.
func (b *Builder) PowRat(x Ref, num, den int) Ref {
	if !b.valid(x) {
		return refZero
	}
	if den == 0 || num > maxPower || num < -maxPower || den > maxPower || den < -maxPower {
		return b.fail(ErrExponent)
	}
	r := big.NewRat(int64(num), int64(den))
	num, den = int(r.Num().Int64()), int(r.Denom().Int64())
	switch {
	case den == 1:
		return b.PowInt(x, num)
	case den == 2 && num == 1:
		return b.Func(Sqrt, x)
	case !b.Exact:
		return b.Pow(x, float64(num)/float64(den))
	}
	if c, ok := b.constOf(x); ok {
		if v := pt(c).PowRat(num, den); v.IsSingleton() {
			return b.Const(v.Inf())
		}
	}
	return b.add(node{kind: kindPowRat, a: x, imm: uint64(uint32(int32(num)))<<32 | uint64(uint32(int32(den)))})
}

package certified

import (
	"math/bits"

	"creaseproof/entropy/interval"
)

// series are the Taylor coefficients of a function of x = c + h τ in τ, each
// enclosed for all c in a cell; those beyond the end are zero.
type series []interval.Interval

// evaluator evaluates one value of a tape, in series.
type evaluator struct {
	ops   []op
	deps  []uint8
	need  []Ref // operations that the value needs, in order
	value []series
	of    Ref
}

func (t *Tape) evaluator(of Ref) *evaluator {
	used := make([]bool, of+1)
	used[of] = true
	for i := of; i >= 0; i-- {
		if !used[i] {
			continue
		}
		switch o := &t.ops[i]; o.kind {
		case constant, parameter:
		case sum, product, quotient:
			used[o.a], used[o.b] = true, true
		default:
			used[o.a] = true
		}
	}
	e := &evaluator{ops: t.ops, deps: t.deps, value: make([]series, of+1), of: of}
	for i, u := range used {
		if u {
			e.need = append(e.need, Ref(i))
		}
	}
	return e
}

// work is the number of operations, a power counting as its multiplications.
func (e *evaluator) work() int {
	n := len(e.need)
	for _, i := range e.need {
		if o := &e.ops[i]; o.kind == power {
			n += 2 * bits.Len(uint(o.n))
		}
	}
	return n
}

// at is the series of the value up to the given order in direction dir, for
// parameters in box; h is the unit of the direction.
func (e *evaluator) at(box [2]interval.Interval, dir int, h interval.Interval, order int) series {
	for _, i := range e.need {
		o := &e.ops[i]
		m := order
		if e.deps[i]>>dir&1 == 0 {
			m = 0
		}
		var s series
		switch o.kind {
		case constant:
			s = series{o.c}
		case parameter:
			s = series{box[o.n]}
			if o.n == dir && m > 0 {
				s = append(s, h)
			}
		case sum:
			s = plus(e.value[o.a], e.value[o.b])
		case product:
			s = times(e.value[o.a], e.value[o.b], m)
		case quotient:
			s = over(e.value[o.a], e.value[o.b], m)
		case power:
			s = raised(e.value[o.a], o.n, m)
		case root:
			s = rooted(e.value[o.a], o.n, m)
		case cosine:
			s, _ = cosSin(e.value[o.a], m)
		case sine:
			_, s = cosSin(e.value[o.a], m)
		case exponential:
			s = exp(e.value[o.a], m)
		case logarithm:
			s = log(e.value[o.a], m)
		case errorFunction:
			s = erf(e.value[o.a], m)
		case magnitude:
			s = abs(e.value[o.a], m)
		}
		e.value[i] = s
	}
	return e.value[e.of]
}

// coefficient is coefficient k.
func (s series) coefficient(k int) interval.Interval {
	if k < len(s) {
		return s[k]
	}
	return zero
}

// unknown is a series of which only the value is known.
func unknown(value interval.Interval, m int) series {
	s := make(series, m+1)
	for k := range s {
		s[k] = interval.Entire()
	}
	s[0] = value
	return s
}

// abs is |a|, which is not smooth where a may vanish.
func abs(a series, m int) series {
	value := a[0].Abs()
	switch {
	case m == 0 || len(a) == 1:
		return series{value}
	case a[0].Contains(0):
		return unknown(value, m)
	case a[0].Inf() > 0:
		return a
	}
	s := make(series, len(a))
	for k, x := range a {
		s[k] = x.Neg()
	}
	return s
}

func plus(a, b series) series {
	if len(a) < len(b) {
		a, b = b, a
	}
	s := append(series(nil), a...)
	for k, x := range b {
		s[k] = s[k].Add(x)
	}
	return s
}

func times(a, b series, m int) series {
	s := make(series, min(len(a)+len(b)-1, m+1))
	for i, x := range a {
		for j := 0; j < len(b) && i+j < len(s); j++ {
			s[i+j] = s[i+j].Add(x.Mul(b[j]))
		}
	}
	return s
}

func square(a series, m int) series {
	s := make(series, min(2*len(a)-1, m+1))
	for k := range s {
		x := zero
		for i := max(0, k-len(a)+1); 2*i < k; i++ {
			x = x.Add(a[i].Mul(a[k-i]))
		}
		x = x.Mul(two)
		if k%2 == 0 {
			x = x.Add(a[k/2].Sqr())
		}
		s[k] = x
	}
	return s
}

func raised(a series, n, m int) series {
	if m == 0 {
		return series{a[0].Pown(n)}
	}
	value := a[0].Pown(n)
	var out series
	for {
		if n&1 == 1 {
			if out == nil {
				out = a
			} else {
				out = times(out, a, m)
			}
		}
		if n >>= 1; n == 0 {
			break
		}
		a = square(a, m)
	}
	out = append(series(nil), out...)
	out[0] = value.Intersection(out[0])
	return out
}

// over is a/b: c_k = (a_k - Σ_{j>0} b_j c_{k-j})/b_0.
func over(a, b series, m int) series {
	if m == 0 {
		return series{a[0].Div(b[0])}
	}
	if b[0].Contains(0) {
		return unknown(a[0].Div(b[0]), m)
	}
	n := m + 1
	if len(b) == 1 {
		n = min(len(a), n)
	}
	s := make(series, n)
	for k := range s {
		x := a.coefficient(k)
		for j := 1; j <= k && j < len(b); j++ {
			x = x.Sub(b[j].Mul(s[k-j]))
		}
		s[k] = x.Div(b[0])
	}
	return s
}

func whole(k int) interval.Interval { return interval.Point(float64(k)) }

// rooted is the q-th root c of a: from c² = a for q = 2, else from
// q a c' = c a'.
func rooted(a series, q, m int) series {
	value := rootOf(a[0], q)
	if m == 0 || len(a) == 1 {
		return series{value}
	}
	if !(value.Inf() > 0) || !(a[0].Inf() > 0) {
		return unknown(value, m)
	}
	s := make(series, m+1)
	s[0] = value
	for k := 1; k <= m; k++ {
		if q == 2 {
			x := zero
			for j := 1; 2*j < k; j++ {
				x = x.Add(s[j].Mul(s[k-j]))
			}
			x = x.Mul(two)
			if k%2 == 0 {
				x = x.Add(s[k/2].Sqr())
			}
			s[k] = a.coefficient(k).Sub(x).Div(two.Mul(value))
			continue
		}
		x := zero
		for j := 1; j <= k && j < len(a); j++ {
			x = x.Add(whole(j - q*(k-j)).Mul(a[j].Mul(s[k-j])))
		}
		s[k] = x.Div(whole(k * q).Mul(a[0]))
	}
	return s
}

// chain is the series y with y' = g a' and the given value; g has to be known
// up to order k-1 when coefficient k is asked for.
func chain(a, g series, k int) interval.Interval {
	x := zero
	for j := 1; j <= k && j < len(a); j++ {
		if k-j < len(g) {
			x = x.Add(whole(j).Mul(a[j].Mul(g[k-j])))
		}
	}
	return x.Div(whole(k))
}

func cosSin(a series, m int) (c, s series) {
	if len(a) == 1 {
		m = 0
	}
	c, s = make(series, 1, m+1), make(series, 1, m+1)
	c[0], s[0] = a[0].Cos(), a[0].Sin()
	for k := 1; k <= m; k++ {
		x, y := chain(a, s, k).Neg(), chain(a, c, k)
		c, s = append(c, x), append(s, y)
	}
	return c, s
}

func exp(a series, m int) series {
	if len(a) == 1 {
		m = 0
	}
	s := make(series, 1, m+1)
	s[0] = a[0].Exp()
	for k := 1; k <= m; k++ {
		s = append(s, chain(a, s, k))
	}
	return s
}

// log is the logarithm c of a, from a c' = a'.
func log(a series, m int) series {
	value := a[0].Log()
	if m == 0 || len(a) == 1 {
		return series{value}
	}
	if !(a[0].Inf() > 0) {
		return unknown(value, m)
	}
	s := make(series, m+1)
	s[0] = value
	for k := 1; k <= m; k++ {
		x := zero
		for j := 1; j < k; j++ {
			if k-j < len(a) {
				x = x.Add(whole(j).Mul(s[j].Mul(a[k-j])))
			}
		}
		s[k] = a.coefficient(k).Sub(x.Div(whole(k))).Div(a[0])
	}
	return s
}

// erf has the derivative 2/√π exp(-a²) a'.
func erf(a series, m int) series {
	s := series{a[0].Erf()}
	if m == 0 || len(a) == 1 {
		return s
	}
	minus := square(a, m)
	for k := range minus {
		minus[k] = minus[k].Neg()
	}
	g := exp(minus, m)
	factor := two.Div(pi().Sqrt())
	for k := range g {
		g[k] = g[k].Mul(factor)
	}
	for k := 1; k <= m; k++ {
		s = append(s, chain(a, g, k))
	}
	return s
}

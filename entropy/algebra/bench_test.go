package algebra

import (
	"testing"
)

func variables(n int) []Poly {
	vs := make([]Poly, n)
	for i := range vs {
		vs[i] = Variable(Var(i))
	}
	return vs
}

func sumOf(ps ...Poly) Poly {
	var s Poly
	for _, p := range ps {
		s = s.Add(p)
	}
	return s
}

func BenchmarkLargeProduct(b *testing.B) {
	x := variables(4)
	p := sumOf(Const(Int(1)), sumOf(x...)).Pow(12)
	q := p.Add(Const(Int(1)))
	for b.Loop() {
		p.Mul(q)
	}
}

func BenchmarkLargeProductFractions(b *testing.B) {
	x := variables(4)
	p := sumOf(Const(Frac64(1, 2)), x[0].Scale(Frac64(2, 3)), x[1], x[2], x[3].Scale(Frac64(1, 5))).Pow(12)
	q := p.Add(Const(Int(1)))
	for b.Loop() {
		p.Mul(q)
	}
}

func BenchmarkLargePow(b *testing.B) {
	x := variables(4)
	p := sumOf(Const(Int(1)), sumOf(x...))
	for b.Loop() {
		p.Pow(20)
	}
}

// jets are two polynomials of the size that derivations work with.
func jets() (p, q Poly) {
	x := variables(12)
	r := x[2].Sub(x[0].Pow(2).Add(x[1].Pow(2)).Scale(Frac64(1, 2)))
	p = r.Mul(x[3].Sub(x[4])).Add(x[5].Mul(x[6])).Add(x[9].Mul(x[1]))
	q = x[3].Add(x[4]).Mul(x[11]).Sub(x[7].Pow(2)).Add(x[0].Mul(x[8]).Scale(Frac64(3, 2)))
	return p, q
}

func BenchmarkSmallAdd(b *testing.B) {
	p, q := jets()
	for b.Loop() {
		p.Add(q)
	}
}

func BenchmarkSmallMul(b *testing.B) {
	p, q := jets()
	for b.Loop() {
		p.Mul(q)
	}
}

func BenchmarkSmallDeriv(b *testing.B) {
	p, q := jets()
	p = p.Mul(q)
	for b.Loop() {
		p.Deriv(3)
	}
}

func BenchmarkSmallDivExact(b *testing.B) {
	p, q := jets()
	p = p.Mul(q)
	for b.Loop() {
		if _, ok := p.DivExact(q); !ok {
			b.Fatal("not divisible")
		}
	}
}

func BenchmarkLargeDivExact(b *testing.B) {
	x := variables(4)
	q := sumOf(Const(Int(1)), sumOf(x...)).Pow(6)
	p := q.Mul(q.Add(Const(Int(1))))
	for b.Loop() {
		if _, ok := p.DivExact(q); !ok {
			b.Fatal("not divisible")
		}
	}
}

func BenchmarkSubst(b *testing.B) {
	p, q := jets()
	for b.Loop() {
		p.Subst(0, q)
	}
}

func BenchmarkEval(b *testing.B) {
	p, _ := jets()
	at := func(v Var) Rat { return Frac64(int64(v)+1, 3) }
	for b.Loop() {
		if _, ok := p.Eval(at); !ok {
			b.Fatal("no value")
		}
	}
}

func BenchmarkFractionSum(b *testing.B) {
	p, q := jets()
	eps := Variable(20)
	f, _ := FromPoly(p).Quo(FromPoly(eps.Scale(Int(2))))
	g, _ := FromPoly(q).Quo(FromPoly(eps))
	for b.Loop() {
		f.Add(g)
	}
}

func BenchmarkRatAdd(b *testing.B) {
	x, y := Frac64(7, 12), Frac64(5, 18)
	for b.Loop() {
		x.Add(y)
	}
}

func BenchmarkRatMul(b *testing.B) {
	x, y := Frac64(7, 12), Frac64(5, 18)
	for b.Loop() {
		x.Mul(y)
	}
}

package gram

import (
	"slices"

	"creaseproof/entropy/algebra"
)

// functional is a linear function of exponents, with the range of twice the
// half degrees that is allowed.
type functional struct {
	weight []int
	lo, hi int
}

func (f functional) of(e []int) int {
	s := 0
	for i, w := range f.weight {
		if w != 0 {
			s += w * e[i]
		}
	}
	return s
}

// support lists the exponents of p over vars.
func support(p algebra.Poly, vars []algebra.Var) [][]int {
	var out [][]int
	for m := range p.Terms() {
		e := make([]int, len(vars))
		for _, pw := range m.Powers() {
			e[slices.Index(vars, pw.Var)] = pw.Exp
		}
		out = append(out, e)
	}
	return out
}

// bounds are functionals whose extremes over the support bound twice the
// monomials of any square in a sum of squares without cancellation at the
// extremes: single variables, groups, the total, differences.
func bounds(supp [][]int, vars []algebra.Var, groups [][]algebra.Var) []functional {
	n := len(vars)
	var out []functional
	add := func(w []int) {
		f := functional{weight: w}
		for i, e := range supp {
			x := f.of(e)
			if i == 0 || x < f.lo {
				f.lo = x
			}
			if i == 0 || x > f.hi {
				f.hi = x
			}
		}
		out = append(out, f)
	}
	total := make([]int, n)
	for i := range total {
		total[i] = 1
	}
	add(total)
	for i := range n {
		w := make([]int, n)
		w[i] = 1
		add(w)
		for k := range n {
			if k != i {
				w := make([]int, n)
				w[i], w[k] = 1, -1
				add(w)
			}
			if k > i {
				w := make([]int, n)
				w[i], w[k] = 1, 1
				add(w)
			}
		}
	}
	for _, g := range groups {
		w := make([]int, n)
		for _, v := range g {
			if i := slices.Index(vars, v); i >= 0 {
				w[i] = 1
			}
		}
		add(w)
		for i := range n {
			w2 := slices.Clone(w)
			w2[i] -= 2
			add(w2)
			w3 := slices.Clone(w)
			w3[i]++
			add(w3)
		}
	}
	return append(out, gradings(supp, n)...)
}

// gradings are the independent weights for which the support is homogeneous.
func gradings(supp [][]int, n int) []functional {
	if len(supp) == 0 {
		return nil
	}
	var rows [][]algebra.Rat
	for _, e := range supp[1:] {
		row := make([]algebra.Rat, n)
		for i := range row {
			row[i] = algebra.Int(int64(e[i] - supp[0][i]))
		}
		rows = append(rows, row)
	}
	if len(rows) == 0 {
		rows = append(rows, make([]algebra.Rat, n))
	}
	_, null, ok := algebra.SolveRat(rows, make([]algebra.Rat, len(rows)))
	if !ok {
		return nil
	}
	var out []functional
	for _, v := range null {
		// Clear denominators.
		den := algebra.Int(1)
		for _, x := range v {
			y := x.Mul(den)
			if !y.IsInt() {
				den = den.Mul(algebra.FromBig(bigDenom(y)))
			}
		}
		f := functional{weight: make([]int, n)}
		small := true
		for i, x := range v {
			k, ok := x.Mul(den).Int64()
			small = small && ok && k < 1000 && k > -1000
			f.weight[i] = int(k)
		}
		if small {
			f.lo = f.of(supp[0])
			f.hi = f.lo
			out = append(out, f)
		}
	}
	return out
}

// candidates enumerates the exponents b with lo <= f(base + 2b) <= hi for all
// functionals, at most limit of them; ok is false where there are more.
func candidates(n int, base []int, fs []functional, limit int) (out [][]int, ok bool) {
	// Single-variable bounds drive the enumeration.
	top := make([]int, n)
	for i := range top {
		top[i] = -1
	}
	for _, f := range fs {
		only, k := true, -1
		for i, w := range f.weight {
			if w == 1 && k < 0 {
				k = i
			} else if w != 0 {
				only = false
			}
		}
		if only && k >= 0 {
			top[k] = (f.hi - base[k]) / 2
			if f.hi-base[k] < 0 {
				return nil, true
			}
		}
	}
	total := fs[0] // the total degree
	e := slices.Clone(base)
	steps := 0
	var walk func(i, used int) bool
	walk = func(i, used int) bool {
		if steps++; steps > 4_000_000 {
			return false
		}
		if i == n {
			for _, f := range fs {
				if x := f.of(e); x < f.lo || x > f.hi {
					return true
				}
			}
			b := make([]int, n)
			for k := range b {
				b[k] = (e[k] - base[k]) / 2
			}
			out = append(out, b)
			return len(out) <= limit
		}
		for x := 0; x <= top[i]; x++ {
			e[i] = base[i] + 2*x
			if used+2*x > total.hi {
				break
			}
			if !walk(i+1, used+2*x) {
				e[i] = base[i]
				return false
			}
		}
		e[i] = base[i]
		return true
	}
	used := 0
	for _, x := range base {
		used += x
	}
	ok = walk(0, used)
	return out, ok
}

func monomial(e []int, vars []algebra.Var) algebra.Monomial {
	var pw []algebra.Power
	for i, x := range e {
		if x > 0 {
			pw = append(pw, algebra.Power{Var: vars[i], Exp: x})
		}
	}
	return algebra.NewMonomial(pw...)
}

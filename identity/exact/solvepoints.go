package exact

import (
	"fmt"
	"math/big"
	"strings"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/enclosure"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// solveAtPoints handles gaps linear in the unknowns whose coefficients do not
// settle the question: kernels may depend on each other, or the jets on
// equations. At points with the same constants each gap is one linear
// equation for the unknowns. If enclosures show that these have no common
// solution, no value makes the claim true. If they enclose one, the simplest
// numbers in the enclosures are tried as a claim of its own.
func (d *Problem) solveAtPoints(gaps []algebra.Fraction, unknown []algebra.Var) ([]algebra.Fraction, error) {
	outside := fmt.Errorf("%w: the linear system of the coefficients has no solution in normal form, but kernels or jets in it may depend on each other", jet.ErrOutside)
	parts := linearParts(gaps, unknown)
	n := len(unknown)
	wide := d.equationsAtPoints(parts, n)
	if err := d.Ctx.Err(); err != nil {
		return nil, err
	}
	contradiction, x, unique := eliminate(wide, n)
	if contradiction {
		d.Rec.Verdict = claim.Refuted
		d.Rec.Method = "linear equations at several points with the same constants, enclosed"
		d.Rec.Solution = "none"
		d.Rec.Reason = "no value of " + strings.Join(d.Claim.Solve, ", ") + " makes the claim true: the equations at several points contradict each other"
		return nil, nil
	}
	if !unique {
		return nil, outside
	}
	sub := map[algebra.Var]algebra.Fraction{}
	var text []string
	for i, v := range unknown {
		y, ok := simplestIn(x[i])
		if !ok {
			return nil, outside
		}
		sub[v] = jet.Rational(y)
		text = append(text, d.Claim.Solve[i]+" = "+y.RatString())
	}
	out, err := d.substitute(gaps, sub)
	if err != nil {
		return nil, err
	}
	for _, g := range out {
		rest, err := d.onIdeal(g)
		if err != nil {
			return nil, err
		}
		one := d.onAssumed(rest.Num()).IsZero()
		if !one {
			if one, err = d.oneRoot(g); err != nil {
				return nil, err
			}
		}
		if !one {
			return nil, outside
		}
	}
	d.Rec.Solution = strings.Join(text, ", ")
	if ok, err := d.allowed(sub); err != nil || !ok {
		d.forbidden()
		return nil, err
	}
	return out, nil
}

// linearParts are, of each gap, the factors of the unknowns, and the rest with
// the sign changed.
func linearParts(gaps []algebra.Fraction, unknown []algebra.Var) []algebra.Fraction {
	zero := map[algebra.Var]algebra.Fraction{}
	for _, v := range unknown {
		zero[v] = algebra.Fraction{}
	}
	var parts []algebra.Fraction
	for _, g := range gaps {
		for _, v := range unknown {
			parts = append(parts, g.Deriv(v))
		}
		parts = append(parts, g.SubstMany(zero).Neg())
	}
	return parts
}

// equationsAtPoints encloses the linear equations for n unknowns at admissible
// points that all have the same constants.
func (d *Problem) equationsAtPoints(parts []algebra.Fraction, n int) [][]enclosure.Interval {
	const prec = 256
	pts := d.Points(parts...)
	base := jet.Point(nil)
	var wide [][]enclosure.Interval
	for tries := 0; tries < 40 && len(wide) < 4*len(parts); tries++ {
		at, ok := pts.Next()
		if !ok {
			break
		}
		if base == nil {
			base = at.Clone()
		}
		if !d.sameConstants(pts, at, base) {
			continue
		}
		for k := 0; k < len(parts); k += n + 1 {
			row := make([]enclosure.Interval, n+1)
			for i := range row {
				row[i] = d.Ring.Enclose(parts[k+i], at, prec)
			}
			wide = append(wide, row)
		}
	}
	return wide
}

// determined reports whether the equations at admissible points certainly
// leave no choice for the unknowns that are not free, once the free ones are
// given.
func (d *Problem) determined(gaps []algebra.Fraction, unknown []algebra.Var, free []bool) bool {
	given := map[algebra.Var]algebra.Fraction{}
	var rest []algebra.Var
	for i, v := range unknown {
		if free[i] {
			given[v] = algebra.Fraction{}
		} else {
			rest = append(rest, v)
		}
	}
	fixed, err := d.substitute(gaps, given)
	if err != nil {
		return false
	}
	_, _, unique := eliminate(d.equationsAtPoints(linearParts(fixed, rest), len(rest)), len(rest))
	return unique
}

// sameConstants gives the point the constants of base, and reports whether it
// is still one that the claim is about.
func (d *Problem) sameConstants(p *Points, at, base jet.Point) bool {
	moved := false
	for v, x := range base {
		if d.Ring.Symbol(v).Kind == jet.Constant && d.fixed(v) && !at[v].Equal(x) {
			at[v], moved = x, true
		}
	}
	if !moved {
		return true
	}
	for _, gens := range [][]algebra.Poly{d.Ideal, d.Wells} {
		for _, g := range gens {
			if x, ok := d.Ring.Exact(algebra.FromPoly(g), at); !ok || !x.IsZero() {
				return false
			}
		}
	}
	return p.Admissible(at) && d.extends(at)
}

// eliminate is Gaussian elimination in enclosures on the equations
// Σ row[i] c_i = row[n]. It reports whether they certainly contradict each
// other: 0 = something that is not zero is left. Otherwise it encloses the
// solution where it is unique. Entries below a pivot are zero by construction.
func eliminate(rows [][]enclosure.Interval, n int) (contradiction bool, x []enclosure.Interval, unique bool) {
	c := enclosure.Context{Prec: 256}
	done := 0
	for col := range n {
		p := -1
		for i := done; i < len(rows); i++ {
			if s, ok := rows[i][col].Sign(); ok && s != 0 {
				p = i
				break
			}
		}
		if p < 0 {
			for i := done; i < len(rows); i++ {
				if s, ok := rows[i][col].Sign(); !ok || s != 0 {
					return false, nil, false
				}
			}
			continue
		}
		rows[done], rows[p] = rows[p], rows[done]
		for i := done + 1; i < len(rows); i++ {
			f := c.Quo(rows[i][col], rows[done][col])
			for k := col + 1; k <= n; k++ {
				rows[i][k] = c.Sub(rows[i][k], c.Mul(f, rows[done][k]))
			}
		}
		done++
	}
	for _, row := range rows[done:] {
		if s, ok := row[n].Sign(); ok && s != 0 {
			return true, nil, false
		}
	}
	if done < n {
		return false, nil, false
	}
	x = make([]enclosure.Interval, n)
	for i := n - 1; i >= 0; i-- {
		x[i] = rows[i][n]
		for k := i + 1; k < n; k++ {
			x[i] = c.Sub(x[i], c.Mul(rows[i][k], x[k]))
		}
		x[i] = c.Quo(x[i], rows[i][i])
	}
	return false, x, true
}

// simplestIn is the first convergent of the continued fraction of the middle
// of an interval that lies in it, if its denominator is small.
func simplestIn(x enclosure.Interval) (*big.Rat, bool) {
	if !x.IsBounded() {
		return nil, false
	}
	lo, _ := x.Lo().Rat(nil)
	hi, _ := x.Hi().Rat(nil)
	mid := new(big.Rat).Add(lo, hi)
	mid.Mul(mid, big.NewRat(1, 2))
	rest := new(big.Rat).Set(mid)
	p, q := [2]*big.Int{big.NewInt(0), big.NewInt(1)}, [2]*big.Int{big.NewInt(1), big.NewInt(0)}
	for range 40 {
		a := new(big.Int).Div(rest.Num(), rest.Denom()) // floor
		p[0], p[1] = p[1], new(big.Int).Add(new(big.Int).Mul(a, p[1]), p[0])
		q[0], q[1] = q[1], new(big.Int).Add(new(big.Int).Mul(a, q[1]), q[0])
		if q[1].BitLen() > 40 {
			return nil, false
		}
		y := new(big.Rat).SetFrac(p[1], q[1])
		if x.Contains(y) {
			return y, true
		}
		if rest.Sub(rest, new(big.Rat).SetInt(a)); rest.Sign() == 0 {
			return nil, false
		}
		rest.Inv(rest)
	}
	return nil, false
}

package identity_test

import (
	"math"
	"math/big"
	"slices"
	"strings"
	"testing"

	"creaseproof/entropy/formula"
	"creaseproof/identity"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// recheck evaluates formulas at a witness with the standard library alone:
// no ring, no interpreter, no rewriting.
type recheck struct {
	t   testing.TB
	set *identity.Claim
	w   *identity.Witness
}

// number reads an exact number, or the middle of an enclosure.
func number(t testing.TB, s string) float64 {
	t.Helper()
	if strings.HasPrefix(s, "[") {
		lo, hi, _ := strings.Cut(strings.Trim(s, "[]"), ", ")
		a, ok1 := new(big.Rat).SetString(lo)
		b, ok2 := new(big.Rat).SetString(hi)
		require.True(t, ok1 && ok2, s)
		x, _ := a.Add(a, b).Mul(a, big.NewRat(1, 2)).Float64()
		return x
	}
	r, ok := new(big.Rat).SetString(s)
	require.True(t, ok, s)
	x, _ := r.Float64()
	return x
}

func (r *recheck) angle(name string) (c, s float64) {
	if a, ok := r.w.Angle[name]; ok {
		c, s = number(r.t, a.Cos), number(r.t, a.Sin)
		require.InDelta(r.t, 1, c*c+s*s, 1e-15)
		return c, s
	}
	x := r.name(name)
	return math.Cos(x), math.Sin(x)
}

// name is what the witness says of a name; what it does not say must not
// matter, so any number will do.
func (r *recheck) name(id string) float64 {
	if id == "pi" {
		return math.Pi
	}
	if a, ok := r.w.Angle[id]; ok {
		return math.Atan2(number(r.t, a.Sin), number(r.t, a.Cos))
	}
	if s, ok := r.w.Jet[id]; ok {
		return number(r.t, s)
	}
	if let, ok := r.set.Setting.Lets[id]; ok {
		return r.eval(let)
	}
	h := 0
	for _, c := range id {
		h = (h*31 + int(c)) % 97
	}
	return float64(h+10) / 7
}

// jet is a derivative along coordinates and frame axes.
func (r *recheck) jet(of string, by []string, done []string) float64 {
	if len(by) == 0 {
		slices.SortFunc(done, func(a, b string) int {
			return slices.Index(r.set.Setting.Coordinates, a) - slices.Index(r.set.Setting.Coordinates, b)
		})
		return r.name(of + "_" + strings.Join(done, ""))
	}
	next := func(c string) float64 { return r.jet(of, by[1:], append(slices.Clone(done), c)) }
	f := r.set.Setting.Frame
	if f == nil || !slices.Contains(f.Axes[:], by[0]) {
		return next(by[0])
	}
	c, s := r.angle(f.Angle)
	x, y := next(r.set.Setting.Coordinates[f.Plane[0]]), next(r.set.Setting.Coordinates[f.Plane[1]])
	if by[0] == f.Axes[0] {
		return c*x + s*y
	}
	return -s*x + c*y
}

func (r *recheck) eval(n formula.Node) float64 {
	switch n := n.(type) {
	case *formula.Num:
		x, _ := n.Value.Float64()
		return x
	case *formula.Name:
		return r.name(n.ID)
	case *formula.Deriv:
		if _, ok := r.set.Setting.Lets[n.Of]; ok {
			r.t.Skip("derivative of a named formula")
		}
		return r.jet(n.Of, n.By, nil)
	case *formula.Sum:
		sum := 0.0
		for _, t := range n.Terms {
			if t.Neg {
				sum -= r.eval(t.X)
			} else {
				sum += r.eval(t.X)
			}
		}
		return sum
	case *formula.Product:
		x := r.eval(n.Factors[0].X)
		for _, f := range n.Factors[1:] {
			if f.Op == formula.Slash {
				x /= r.eval(f.X)
			} else {
				x *= r.eval(f.X)
			}
		}
		return x
	case *formula.Juxt:
		x := 1.0
		for _, f := range n.Factors {
			x *= r.eval(f)
		}
		return x
	case *formula.Power:
		e, _ := n.Exp.Float64()
		return math.Pow(r.eval(n.Base), e)
	case *formula.Call:
		if n.Func == "norm" {
			sum := 0.0
			for _, a := range n.Args {
				sum = math.Hypot(sum, r.eval(a))
			}
			return sum
		}
		if name, ok := n.Args[0].(*formula.Name); ok && (n.Func == "cos" || n.Func == "sin" || n.Func == "tan") {
			c, s := r.angle(name.ID)
			return map[string]float64{"cos": c, "sin": s, "tan": s / c}[n.Func]
		}
		x := r.eval(n.Args[0])
		switch n.Func {
		case "sqrt":
			return math.Sqrt(x)
		case "exp":
			return math.Exp(x)
		case "log":
			return math.Log(x)
		case "sin":
			return math.Sin(x)
		case "cos":
			return math.Cos(x)
		case "tan":
			return math.Tan(x)
		case "sinh":
			return math.Sinh(x)
		case "cosh":
			return math.Cosh(x)
		case "tanh":
			return math.Tanh(x)
		case "erf":
			return math.Erf(x)
		case "abs":
			return math.Abs(x)
		}
	}
	r.t.Fatalf("not evaluated here: %T", n)
	return 0
}

// recheckWitness evaluates both sides of a refuted claim at its witness, and
// the equations and assumptions that the claim is under.
func recheckWitness(t testing.TB, c *identity.Claim, rec *identity.Record) {
	t.Helper()
	require.Equal(t, identity.Refuted, rec.Verdict)
	require.NotNil(t, rec.Witness)
	r := &recheck{t, c, rec.Witness}
	left, right := r.eval(c.Statement.Left), r.eval(c.Statement.Right)
	size := 1e-9 * (math.Abs(left) + math.Abs(right))
	assert.InDelta(t, number(t, rec.Witness.Left), left, size+1e-300, "left of %s at %+v", c.Name, rec.Witness)
	assert.InDelta(t, number(t, rec.Witness.Right), right, size+1e-300, "right of %s at %+v", c.Name, rec.Witness)
	exactLeft, exactRight := number(t, rec.Witness.Left), number(t, rec.Witness.Right)
	switch c.Statement.Relation {
	case formula.Equal:
		assert.NotEqual(t, rec.Witness.Left, rec.Witness.Right)
	case formula.LessEqual:
		assert.Greater(t, exactLeft, exactRight)
	case formula.GreaterEqual:
		assert.Less(t, exactLeft, exactRight)
	}
	for _, m := range c.Modulo {
		assert.InDelta(t, 0, r.eval(m), 1e-9, "an equation at %+v", rec.Witness)
	}
	for _, a := range slices.Concat(c.Setting.Assume, c.Assume) {
		if _, ok := rec.Witness.Jet[formula.Text(a.Left)]; !ok {
			continue
		}
		d := r.eval(a.Left) - r.eval(a.Right)
		assert.True(t, a.Relation[0] == '>' && d >= 0 || a.Relation[0] == '<' && d <= 0 || a.Relation == "=" && d == 0, a.Text)
	}
}

func TestWitnessesOfFalseClaims(t *testing.T) {
	for _, c := range []struct {
		th     theory
		states string
		edits  []edit
	}{
		{plane, "u_x^2 + u_y^2 = (u_x + u_y)^2", nil},
		{plane, "sqrt(u_x^2) = u_x", nil},
		{plane, "exp(u_x) = 1 + u_x + u_x^2/2", nil},
		{plane, "cos(3 a) = 4 cos(a)^3 - 2 cos(a)", nil},
		{plane, "tanh(u_x + u_y) = tanh(u_x) + tanh(u_y)", nil},
		{plane, "erf(u_x)^2 <= erf(u_x)", nil},
		{plane, "u_x u_y <= eps u_x^2 + u_y^2/(5 eps)", nil},
		{plane, "abs(u_x + u_y) >= abs(u_x) + abs(u_y)", nil},
		{plane, "u_x^4 + u_y^4 - u_x^2 u_y^2 >= (u_x^2 + u_y^2)^2/3", nil},
		{plane, "u_x/u_y + u_y/u_x >= 2", nil},
		{plane, "log(a + b) <= log(a) + log(b)", []edit{assuming(t, "a > 0", "b > 0")}},
		{plane, "(u_xx + u_yy)^2 >= 4 u_xx u_yy + eps", nil},
		{plane, "u_xx + u_yy = 0", []edit{modulo(t, "u_x^2 + u_y^2 - 1")}},
		{plane, "u_xx + u_yy <= 0", []edit{modulo(t, "u_x^2 + u_y^2 - 1")}},
		{plane, "u_x = u_y", []edit{modulo(t, "u_x^4 + u_y^4 - 1")}},
		{plane, "u_x^3 + u_y^3 = 1", []edit{modulo(t, "u_x^5 + u_y^5 + u_x u_y - 2")}},
		{plane, "u_yy = u_x^2 u_xx + u_x", []edit{modulo(t, "u_y - u_x^2")}},
		{layered, "u_xixi = u_xx", nil},
		{layered, "u_xi u_eta = u_x u_y", nil},
		{layered, "u_xi^2 <= u_x^2", nil},
		{layered, "R (u_xixi - u_etaeta) <= e - eps K", nil},
		{layered, "R (u_xixi - u_etaeta) <= e - 2 eps K - 201/100*eps u_xieta^2", nil},
		{layered, "R (u_xixi - u_etaeta) <= e - 19999/10000*eps K", nil},
	} {
		t.Run(c.states, func(t *testing.T) {
			claim := state(t, c.th, c.states, c.edits...)
			recheckWitness(t, claim, decide(t, claim))
		})
	}
}

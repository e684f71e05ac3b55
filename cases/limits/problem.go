package limits

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/jet"
	"creaseproof/entropy/program"
	"creaseproof/entropy/source"
	"creaseproof/quadrature/branches"
	"creaseproof/quadrature/limit"
	"creaseproof/quadrature/profile"
)

// work is the budget of a limit for all its eps together, in evaluations of a
// branch: a minute or less on one core.
const work = 1_500_000_000

func point(x []float64) string {
	parts := make([]string, len(x))
	for i, v := range x {
		if math.Abs(v) < 1e-9 {
			v = 0 // found by halving
		}
		parts[i] = strconv.FormatFloat(v, 'g', 4, 64)
	}
	return "(" + strings.Join(parts, ", ") + ")"
}

// problem makes the problem at the values chosen.
func (r *reader) problem() (*limit.Problem, error) {
	l := r.l
	texts := l.Branches
	if l.Approximation == "profile" {
		texts = []source.Text{*l.Plus, *l.Minus}
	}
	d, err := r.domain()
	if err != nil {
		return nil, err
	}
	if err := r.assume(&d); err != nil {
		return nil, err
	}
	p := &limit.Problem{Domain: d, Branches: len(texts), MaxWork: work / len(l.Eps)}
	if l.Approximation != "profile" {
		if p.Combine, err = branches.Read(*l.Combine, len(texts)); err != nil {
			return nil, err
		}
		if l.Approximation == "front" && !p.Combine.Flat() {
			return nil, r.fault(*l.Combine, `write combine = "max" or "min", or approximation = "mollified"`, "a front of a nested combination")
		}
	}
	if err := r.branches(p, texts); err != nil {
		return nil, err
	}
	if err := r.density(p); err != nil {
		return nil, err
	}
	cost, err := r.set.NewProfile(r.ctx)
	if r.ctx.Err() != nil {
		return nil, r.ctx.Err()
	}
	switch {
	case err == nil:
		program, err := cost.Compile(nil)
		if err != nil {
			return nil, err
		}
		p.Cost = profile.Density(r.ctx, program)
	case !errors.Is(err, entropy.ErrNoProfile):
		return nil, err
	case l.Energy == nil:
		return nil, r.c.Fault(l.Pos, `add energy = "..."`, "the limit claims no energy, and the model has no profile cost: %s", strings.TrimPrefix(err.Error(), entropy.ErrNoProfile.Error()+": "))
	}
	switch l.Approximation {
	case "front":
		p.Smoothing = &limit.Front{Min: p.Combine.Op == branches.Min}
	case "mollified":
		m := &limit.Mollifier{}
		if l.Width != nil {
			if m.Width, err = r.number(*l.Width); err != nil {
				return nil, err
			}
			if !(m.Width > 0) {
				return nil, r.fault(*l.Width, "", "the width %g is not positive", m.Width)
			}
		}
		p.Smoothing = m
	default:
		if p.Smoothing, err = r.wall(p); err != nil {
			return nil, err
		}
	}
	return p, nil
}

// target is the claimed energy, or the integral over the jumps.
func (r *reader) target(p *limit.Problem, v *Value) error {
	var x, e float64
	var err error
	if r.l.Energy != nil {
		v.TargetClaimed = true
		x, err = r.number(*r.l.Energy)
		if err == nil && p.Cost != nil {
			jumps, off, _, failed := p.Sharp(r.ctx)
			if r.ctx.Err() != nil {
				return r.ctx.Err()
			}
			if failed == nil && math.Abs(x-jumps) > off {
				v.Jumps = &jumps
			}
		}
	} else {
		var area float64
		x, e, area, err = p.Sharp(r.ctx)
		if err == nil && area == 0 {
			return r.c.Fault(r.l.Pos, `move the domain, or claim energy = "0"`, "no crease was found inside the domain: one branch prevails in all of it, or the crease is on its boundary, where half a layer is outside")
		}
	}
	if err != nil {
		return err
	}
	v.Target, v.TargetError = &x, &e
	return nil
}

// branches compiles the branches and requires that they lie on the well: by
// exact arithmetic, or to rounding where that does not decide it.
func (r *reader) branches(p *limit.Problem, texts []source.Text) error {
	n := r.n
	inputs := r.coordinates()
	type compiled struct {
		value, jets, first       *program.Program // first has the gradient
		wsValue, wsJets, wsFirst *program.Workspace
	}
	var list []compiled
	out := make([]float64, 1+n+n*(n+1)/2)
	for _, t := range texts {
		node, err := r.scope.ParseExpr(t)
		if err != nil {
			return err
		}
		jets, err := r.compile(t, node, 2, inputs...)
		if err != nil {
			return err
		}
		value, err := jets.Select(0)
		if err != nil {
			return err
		}
		upTo := make([]int, 1+n)
		for k := range upTo {
			upTo[k] = k
		}
		first, err := jets.Select(upTo...)
		if err != nil {
			return err
		}
		list = append(list, compiled{value, jets, first, value.NewWorkspace(), jets.NewWorkspace(), first.NewWorkspace()})
		affine, err := r.affine(t, node)
		if err != nil {
			return err
		}
		p.Affine = append(p.Affine, affine)
		if err := r.onWell(t, node, jets, &p.Domain); err != nil {
			return err
		}
	}
	p.Values = func(x, v []float64) {
		for i := range list {
			list[i].value.Eval(list[i].wsValue, x, v[i:i+1])
		}
	}
	outs := make([][]float64, 1+n)
	p.Gradients = func(i int, x [][]float64, u []float64, g [][]float64) {
		outs[0] = u
		copy(outs[1:], g)
		list[i].first.EvalBlock(list[i].wsFirst, x, outs, len(u))
	}
	p.Jets = func(x []float64, j []limit.Jet) {
		for i := range list {
			list[i].jets.Eval(list[i].wsJets, x, out)
			j[i].U = out[0]
			copy(j[i].P, out[1:1+n])
			k := 1 + n
			for a := range n {
				for b := a; b < n; b++ {
					j[i].H[a*n+b], j[i].H[b*n+a] = out[k], out[k]
					k++
				}
			}
		}
	}
	return nil
}

// onWell refuses a branch off the well.
func (r *reader) onWell(t source.Text, node formula.Node, jets *program.Program, d *limit.Domain) error {
	in, ex, err := r.set.NewExact(r.ctx)
	if err != nil {
		return err
	}
	in.Given = map[int]formula.Node{0: node}
	if x, err := in.Scalar(r.set.Model.Residual); err == nil && ex.Ring.Err(x) == nil && x.IsZero() {
		return nil
	}
	if r.ctx.Err() != nil {
		return r.ctx.Err()
	}
	num := r.coordinates()
	num = append(num, entropy.Input{Kind: entropy.JetInput})
	for i := range r.n {
		num = append(num, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i)})
	}
	p, err := r.compile(t, r.set.Model.Residual, 0, num...)
	if err != nil {
		return err
	}
	ws, wsJets := p.NewWorkspace(), jets.NewWorkspace()
	out, res := make([]float64, jets.NumOutputs()), make([]float64, 1)
	for _, x := range r.points(d) {
		jets.Eval(wsJets, x, out)
		size := 1e-300
		for _, v := range out[1 : 1+r.n] {
			size += math.Abs(v) + v*v
		}
		p.Eval(ws, append(append([]float64(nil), x...), out[:1+r.n]...), res)
		if math.Abs(res[0]) > 1e-9*size {
			return r.fault(t, "the energy of the approximations would grow like 1/eps", "the branch is off the well: at (%s) = %s the residual is %.4g",
				strings.Join(r.set.Coordinates, ", "), point(x), res[0])
		}
	}
	return nil
}

// density compiles the energy, the residual and the bending. The curvature K
// is the sum of the principal minors of second order of the Hessian in the
// coordinates whose pure second derivatives are in the bending. Of an energy
// that is not R²/(2 eps) + eps L²/2 the compression is what remains without
// second derivatives, and the bending is the rest.
func (r *reader) density(p *limit.Problem) error {
	n := r.n
	m := r.set.Model
	if m.Energy != nil && r.small == "" {
		return r.c.Fault(r.l.Pos, `declare constants = ["eps"]`, "the case has no constant that is to tend to zero")
	}
	inputs := r.coordinates()
	small := r.small
	if small == "" {
		small = "eps"
	}
	inputs = append(inputs, entropy.Input{Kind: entropy.ConstantInput, Name: small})
	for i := range n {
		inputs = append(inputs, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i)})
	}
	second := len(inputs)
	for i := range n {
		for j := i; j < n; j++ {
			inputs = append(inputs, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i).Plus(j)})
		}
	}
	value := len(inputs)
	if r.l.Approximation != "profile" { // a profile has no value of u
		inputs = append(inputs, entropy.Input{Kind: entropy.JetInput})
	}
	in, num := r.set.NewNumeric(nil, inputs...)
	num.Closed = true
	energy := m.Energy
	var outs []program.Ref
	for _, f := range []formula.Node{m.Residual, m.Bending, energy} {
		if f == nil {
			continue
		}
		x, err := in.Scalar(f)
		if err == nil {
			err = num.Err()
		}
		if err != nil {
			return r.c.Place(err, r.l.Pos)
		}
		outs = append(outs, x)
	}
	prog, err := num.Compile(outs...)
	if err != nil {
		return r.c.Place(err, r.l.Pos)
	}
	perp, err := r.bent()
	if err != nil {
		return err
	}
	ws, values, out := prog.NewWorkspace(), make([]float64, len(inputs)), make([]float64, 3)
	other := energy != nil && !usual(prog, n)
	p.Density = func(x []float64, eps float64, j *limit.Jet) limit.Density {
		k := copy(values, x)
		values[k] = eps
		copy(values[k+1:], j.P)
		k = second
		for a := range n {
			for b := a; b < n; b++ {
				values[k] = j.H[a*n+b]
				k++
			}
		}
		if value < len(values) {
			values[value] = j.U
		}
		prog.Eval(ws, values, out)
		d := limit.Density{Compression: out[0] * out[0] / (2 * eps), Bending: eps * out[1] * out[1] / 2}
		d.Energy = d.Compression + d.Bending
		if energy != nil {
			d.Energy = out[2]
		}
		if other {
			clear(values[second:value])
			prog.Eval(ws, values, out)
			d.Compression, d.Bending = out[2], d.Energy-out[2]
		}
		for i, a := range perp {
			for _, b := range perp[:i] {
				d.Curvature += eps * (j.H[a*n+a]*j.H[b*n+b] - j.H[a*n+b]*j.H[b*n+a])
			}
		}
		return d
	}
	return nil
}

// bent are the coordinates whose pure second derivatives are in the bending.
func (r *reader) bent() (list []int, err error) {
	in, num := r.set.NewNumeric(nil)
	if _, err := in.Scalar(r.set.Model.Bending); err != nil {
		return nil, r.c.Place(err, r.l.Pos)
	}
	for i := range r.n {
		for _, x := range num.Inputs() {
			if x.Kind == entropy.JetInput && x.Index == (jet.Index{}).Plus(i).Plus(i) {
				list = append(list, i)
			}
		}
	}
	return list, nil
}

// wall makes the transition between two affine branches.
func (r *reader) wall(p *limit.Problem) (limit.Smoothing, error) {
	l := r.l
	for i, t := range []source.Text{*l.Plus, *l.Minus} {
		if !p.Affine[i] {
			return nil, r.fault(t, `use approximation = "front" or "mollified"`, "a profile goes across a plane, and this branch is not affine")
		}
	}
	if l.Profile != nil {
		return r.givenProfile(*l.Profile)
	}
	n := r.n
	j := []limit.Jet{limit.NewJet(n), limit.NewJet(n)}
	x := make([]float64, n)
	p.Jets(x, j)
	plus, minus := j[0].P, j[1].P
	u := limit.NewJet(n)
	at := func(s float64) limit.Density {
		norm := 0.0
		for i := range n {
			norm = math.Hypot(norm, plus[i]-minus[i])
		}
		for a := range n {
			u.P[a] = (1-s)*minus[a] + s*plus[a]
			for b := range n {
				u.H[a*n+b] = (plus[a] - minus[a]) * (plus[b] - minus[b]) / norm
			}
		}
		return p.Density(x, 1, &u)
	}
	residual, err := r.residual()
	if err != nil {
		return nil, err
	}
	sign := func(s float64) float64 {
		at(s)
		return math.Copysign(1, residual(u.P))
	}
	speed := func(s float64) float64 {
		d := at(s)
		return math.Sqrt(d.Compression / d.Bending)
	}
	f, err := limit.Optimal(speed, sign)
	if err != nil {
		return nil, r.fault(*l.Plus, "", "%s", err)
	}
	return &limit.Wall{Profile: f}, nil
}

// residual compiles the residual in the gradient alone.
func (r *reader) residual() (func(grad []float64) float64, error) {
	var inputs []entropy.Input
	for i := range r.n {
		inputs = append(inputs, entropy.Input{Kind: entropy.JetInput, Index: jet.Index{}.Plus(i)})
	}
	p, err := r.compile(*r.l.Plus, r.set.Model.Residual, 0, inputs...)
	if err != nil {
		return nil, fmt.Errorf("the residual of the model has to depend on the gradient alone for a profile: %w", err)
	}
	ws, out := p.NewWorkspace(), make([]float64, 1)
	return func(grad []float64) float64 {
		p.Eval(ws, grad, out)
		return out[0]
	}, nil
}

// affine reports whether a branch certainly has no second derivatives.
func (r *reader) affine(t source.Text, node formula.Node) (bool, error) {
	in, ex, err := r.set.NewExact(r.ctx)
	if err != nil {
		return false, err
	}
	x, err := in.Scalar(node)
	if err != nil {
		return false, r.c.Place(err, source.Pos{Line: t.Line, Col: t.Col})
	}
	for i := range r.n {
		for k := range i + 1 {
			d, err := ex.Total(x, i)
			if err == nil {
				d, err = ex.Total(d, k)
			}
			if err != nil || !d.IsZero() {
				return false, r.ctx.Err()
			}
		}
	}
	return true, nil
}

// givenProfile compiles a profile in s, the distance over eps.
func (r *reader) givenProfile(t source.Text) (limit.Smoothing, error) {
	scope, err := r.scope.With("s")
	if err != nil {
		return nil, r.c.Place(err, source.Pos{Line: t.Line, Col: t.Col})
	}
	node, err := scope.ParseExpr(t)
	if err != nil {
		return nil, err
	}
	in, num := r.set.NewNumeric(nil, entropy.Input{Kind: entropy.ConstantInput, Name: "s"})
	num.Closed = true
	x, err := in.Scalar(node)
	if err == nil {
		err = num.Err()
	}
	if err != nil {
		return nil, r.c.Place(err, source.Pos{Line: t.Line, Col: t.Col})
	}
	p, err := num.Compile(x, num.Builder.Diff(x, func(int) program.Ref { return num.Builder.Const(1) }))
	if err != nil {
		return nil, err
	}
	ws, s, out := p.NewWorkspace(), make([]float64, 1), make([]float64, 2)
	f := func(tau float64) (float64, float64) {
		s[0] = tau
		p.Eval(ws, s, out)
		return out[0], out[1]
	}
	if err := r.transition(t, func(tau float64) float64 { v, _ := f(tau); return v }); err != nil {
		return nil, err
	}
	return &limit.Wall{Profile: f}, nil
}

package limit

import "math"

// vector has as many components as there are coordinates; the others are 0.
type vector [3]float64

func (a vector) dot(b vector) float64   { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
func (a vector) sub(b vector) vector    { return vector{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
func (a vector) norm() float64          { return math.Sqrt(a.dot(a)) }
func (a vector) times(t float64) vector { return vector{a[0] * t, a[1] * t, a[2] * t} }
func (a vector) plus(t float64, b vector) vector {
	return vector{a[0] + t*b[0], a[1] + t*b[1], a[2] + t*b[2]}
}

// ball is one convolution about a place x. Positions y in it are in units of
// the radius δ, from x.
type ball struct {
	p     *Problem
	n     int
	x     vector
	delta float64
	o     *orders

	// Of each branch: its jet at x, how far it may be from the tangent there,
	// the variation of its gradient, and whether it is affine or looks as if it
	// were not smooth.
	u      []float64
	g      []vector
	off    []float64
	vary   []float64
	affine []bool
	rough  []bool

	here   int       // the active branch at x
	set    []int     // the branches that may be active in the ball
	fixed  []float64 // values for the combination: those not in set are ±∞
	flat   bool      // these are affine
	approx bool
	tip    tip // the last one

	base    vector // a gradient that is left out of the sums, as is u at x
	kernel  radial
	kernels [4]radial // by the dimensions left
	frame   [3]vector // the last of those in use is along lines
	rank    int
	sum     [13]float64 // value, gradient, derivatives of the gradient by row

	blockX, blockG [3][]float64
	blockU         []float64
	cuts           []float64
	list           []piece
	nodes          []sample
	single         [1]sample
	rims           []rim
	at             []sample
	heights        []float64 // of branches along a line
	jets           []Jet
}

// sample is a position with the jets of one or two branches there.
type sample struct {
	y      vector
	w      float64
	u, v   float64
	g, h   vector
	t, top float64 // along a line
}

func (b *ball) begin(p *Problem, x []float64, delta float64, o *orders) {
	n := len(x)
	if b.n != n || len(b.u) != p.Branches {
		m := p.Branches
		*b = ball{n: n, u: make([]float64, m), g: make([]vector, m), off: make([]float64, m), vary: make([]float64, m),
			affine: make([]bool, m), rough: make([]bool, m), fixed: make([]float64, m)}
		for r := 1; r <= n; r++ {
			b.kernels[r] = newRadial(n, r)
		}
	}
	b.p, b.o, b.delta = p, o, delta
	copy(b.x[:], x)
	b.sum = [13]float64{}
	b.approx = false
}

// eval sets u and g of the samples to the jets of branch i there.
func (b *ball) eval(i int, list []sample) {
	n := len(list)
	if n == 0 {
		return
	}
	if b.p.Gradients == nil {
		b.slow(i, list)
		return
	}
	if len(b.blockX[0]) < n {
		for k := range b.n {
			b.blockX[k], b.blockG[k] = make([]float64, 2*n), make([]float64, 2*n)
		}
		b.blockU = make([]float64, 2*n)
	}
	for k := range b.n {
		x, at := b.blockX[k][:n], b.x[k]
		for j := range list {
			x[j] = at + b.delta*list[j].y[k]
		}
	}
	u := b.blockU[:n]
	b.p.Gradients(i, b.blockX[:b.n], u, b.blockG[:b.n])
	for j := range list {
		list[j].u = u[j]
		for k := range b.n {
			list[j].g[k] = b.blockG[k][j]
		}
	}
}

// slow does the same one by one.
func (b *ball) slow(i int, list []sample) {
	x := make([]float64, b.n)
	jets := jetsOf(b.p, b.x[:b.n], new([]Jet))
	for j := range list {
		for k := range x {
			x[k] = b.x[k] + b.delta*list[j].y[k]
		}
		b.p.Jets(x, jets)
		list[j].u = jets[i].U
		copy(list[j].g[:], jets[i].P)
	}
}

// put adds to the sums what a value and a gradient contribute at y, where value
// and slope are the weights of ρ and of -∇ρ/y.
func (b *ball) put(y vector, value, slope, u float64, g vector) {
	b.sum[0] += value * u
	for k := range b.n {
		b.sum[1+k] += value * g[k]
		s := slope * g[k]
		for a := range b.n {
			b.sum[4+3*a+k] += s * y[a]
		}
	}
}

// weights of ρ and of -∇ρ/y in n dimensions at y.
func (b *ball) weights(y vector) (value, slope float64) {
	k := &b.kernels[b.n]
	v := 1 - y.dot(y)
	if v <= 0 {
		return 0, 0
	}
	v3 := v * v * v
	return k.c * v3 * v, 2 * exponent * k.c * v3
}

// jet is the result.
func (b *ball) jet(out *Jet) {
	out.U = b.u[b.here] + b.sum[0]
	for k := range b.n {
		out.P[k] = b.base[k] + b.sum[1+k]
		for a := range b.n {
			out.H[a*b.n+k] = (b.sum[4+3*a+k] + b.sum[4+3*k+a]) / (2 * b.delta)
		}
	}
}

// survey looks at the branches about x.
func (b *ball) survey() {
	for i := range b.u {
		b.look(i)
	}
	b.here = b.p.active(b.u)
	b.set = append(b.set[:0], b.here)
	copy(b.fixed, b.u)
	for next := 0; next < len(b.set); next++ {
		for k := range b.u {
			if !b.has(k) && b.meet(b.set[next], k) {
				b.set = append(b.set, k)
			}
		}
	}
	for k := range b.fixed {
		if !b.has(k) {
			b.fixed[k] = math.Inf(1)
			if b.u[k] < b.u[b.here] {
				b.fixed[k] = math.Inf(-1)
			}
		}
	}
	b.base = b.g[b.here]
}

func (b *ball) has(k int) bool {
	for _, i := range b.set {
		if i == k {
			return true
		}
	}
	return false
}

// meet reports whether two branches may have the same value in the ball.
func (b *ball) meet(i, k int) bool {
	return math.Abs(b.u[i]-b.u[k]) <= b.delta*b.g[i].sub(b.g[k]).norm()+b.off[i]+b.off[k]
}

// look finds the jet of branch i at x, and how it varies in the ball from its
// gradients at the ends of the axes: half of the sum of squares of their
// distances from that at x bounds the distance from the tangent for a quadratic
// branch. A branch that is not smooth in the ball, or nearly so, has second
// differences of its gradient that are not small beside the first.
func (b *ball) look(i int) {
	b.affine[i] = b.p.Affine != nil && b.p.Affine[i]
	list := append(b.nodes[:0], sample{})
	if !b.affine[i] {
		for k := range b.n {
			var e vector
			e[k] = 1
			list = append(list, sample{y: e}, sample{y: e.times(-1)})
		}
	}
	b.nodes = list
	b.eval(i, list)
	at := list[0]
	b.u[i], b.g[i], b.off[i], b.vary[i], b.rough[i] = at.u, at.g, 0, 0, false
	if b.affine[i] {
		return
	}
	finite := !math.IsNaN(at.g.dot(at.g)) && !math.IsInf(at.g.dot(at.g), 0)
	if !finite {
		b.g[i] = vector{}
	}
	var first, second, most float64
	for k := range b.n {
		plus, minus := list[1+2*k].g, list[2+2*k].g
		p, m := plus.sub(b.g[i]), minus.sub(b.g[i])
		first += math.Max(p.dot(p), m.dot(m))
		s := plus.sub(b.g[i].times(2)).plus(1, minus)
		second = math.Max(second, s.norm())
		most = math.Max(most, math.Max(plus.norm(), minus.norm()))
	}
	first = math.Sqrt(first)
	b.vary[i] = first
	b.off[i] = 0.75 * b.delta * first
	b.rough[i] = !finite || second > 0.35*first && first > 1e-3*most
	if b.rough[i] {
		b.off[i] = 2 * b.delta * most
	}
	if !finite {
		b.off[i] = 4 * b.delta * most
	}
}

// convolve chooses the way.
func (b *ball) convolve() {
	b.flat = true
	rough := false
	for _, i := range b.set {
		b.flat = b.flat && b.affine[i]
		rough = rough || b.rough[i]
	}
	one := len(b.set) == 1
	if one && !rough {
		b.whole(b.here)
		return
	}
	if b.flat {
		b.axes()
		b.kernel = b.kernels[b.rank]
		b.approx = b.rank > 1
		b.over()
		return
	}
	b.approx = true
	b.rank, b.kernel = b.n, b.kernels[b.n]
	for _, i := range b.set {
		if b.rough[i] && b.n > 1 && b.about(i) {
			return
		}
	}
	if one && b.n > 1 {
		b.whole(b.here)
		return
	}
	if len(b.set) == 2 && b.n > 1 && b.pair(b.set[0], b.set[1]) {
		return
	}
	b.sum = [13]float64{}
	b.axes()
	b.rank = b.n
	b.over()
}

// whole adds branch i on the whole ball.
func (b *ball) whole(i int) {
	if b.affine[i] {
		return
	}
	b.approx = true
	list := b.nodes[:0]
	for k := range b.o.ball {
		list = append(list, sample{y: b.o.ball[k].y})
	}
	b.nodes = list
	b.eval(i, list)
	for k := range list {
		q := &b.o.ball[k]
		s := &list[k]
		u, g := s.u-b.u[b.here], s.g.sub(b.base)
		b.sum[0] += q.value * u
		for c := range b.n {
			b.sum[1+c] += q.value * g[c]
			for a := range b.n {
				b.sum[4+3*a+c] += q.slope[a] * g[c]
			}
		}
	}
}

// axes sets the frame: along the greatest difference of gradients first, then
// across what is left; of them, rank span the differences of affine branches.
func (b *ball) axes() {
	var list [3]vector
	b.rank = 0
	add := func(v vector, least float64) {
		size := v.norm()
		for range 2 { // twice is enough
			for _, e := range list[:b.rank] {
				v = v.plus(-v.dot(e), e)
			}
		}
		if l := v.norm(); b.rank < b.n && l > least && l > 1e-9*size {
			list[b.rank] = v.times(1 / l)
			b.rank++
		}
	}
	var top float64
	best := -1
	for _, i := range b.set {
		if l := b.g[i].sub(b.base).norm(); l > top {
			top, best = l, i
		}
	}
	if best >= 0 {
		add(b.g[best].sub(b.base), 0)
		for _, i := range b.set {
			add(b.g[i].sub(b.base), 1e-9*top)
		}
	}
	used := b.rank
	for k := range b.n {
		var e vector
		e[k] = 1
		add(e, 0.3)
	}
	for k := range b.n {
		var e vector
		e[k] = 1
		add(e, 1e-6)
	}
	b.frame = list
	b.rank = max(used, 1)
}

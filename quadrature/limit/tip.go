package limit

import "math"

// tip is a place at which a branch is not smooth: a point in the plane, a point
// of an axis in space. Positions are absolute.
type tip struct {
	known  bool
	branch int
	at     vector
	axis   vector // in space
}

const (
	sharpest = 1e-7 // step of the search, over δ
	singular = 1e4  // second derivatives times δ over the gradient
	nearby   = 4.0  // from x, over δ
)

// about integrates along rays from the place where branch i is not smooth, or in
// space from an axis. It reports false where there is none near the ball.
func (b *ball) about(i int) bool {
	if !b.seek(i) {
		return false
	}
	from := vector{b.x[0], b.x[1], b.x[2]}
	p := b.tip.at.sub(from).times(1 / b.delta)
	if b.n == 2 {
		b.frame = [3]vector{{1, 0, 0}, {0, 1, 0}}
		s := slice{b: b, h: 1, radially: true, p: p[0], q: p[1]}
		s.add(1)
		return true
	}
	b.frame[2] = b.tip.axis
	b.frame[0], b.frame[1] = across(b.tip.axis)
	q0, q1 := p.dot(b.frame[0]), p.dot(b.frame[1])
	b.planes(func(t float64) slice {
		return slice{b: b, at: t, h: math.Sqrt(1 - t*t), radially: true, p: q0, q: q1}
	})
	return true
}

// across are two directions that are orthonormal with e.
func across(e vector) (s, t vector) {
	k := 0
	for a := range e {
		if math.Abs(e[a]) < math.Abs(e[k]) {
			k = a
		}
	}
	s[k] = 1
	s = s.plus(-e[k], e)
	s = s.times(1 / s.norm())
	return s, vector{e[1]*s[2] - e[2]*s[1], e[2]*s[0] - e[0]*s[2], e[0]*s[1] - e[1]*s[0]}
}

// seek finds the singular place of branch i next to x: the one of last time, or
// the greatest second derivatives by a search along the axes.
func (b *ball) seek(i int) bool {
	var most float64
	for k := range b.n {
		var e vector
		e[k] = 1
		b.single[0].y = e
		b.eval(i, b.single[:])
		most = math.Max(most, b.single[0].g.norm())
	}
	large := singular * most / b.delta
	if t := &b.tip; t.known && t.branch == i {
		at := t.at
		if b.n == 3 {
			at = t.at.plus(b.x.sub(t.at).dot(t.axis), t.axis)
		}
		off := at
		off[0] += 1e-5 * b.delta * 0.6
		off[1] += 1e-5 * b.delta * 0.8
		if at.sub(b.x).norm() < nearby*b.delta && b.curved(i, off) > large {
			t.at = at
			return true
		}
	}
	at, top := b.x, b.curved(i, b.x)
	for k := range b.n {
		for _, s := range []float64{-1, -0.5, 0.5, 1} {
			y := b.x
			y[k] += s * b.delta
			if h := b.curved(i, y); h > top {
				at, top = y, h
			}
		}
	}
	for step, moves := 0.5*b.delta, 0; step > sharpest*b.delta && !math.IsInf(top, 0); moves++ {
		better := false
		for k := range b.n {
			for _, s := range []float64{-step, step} {
				y := at
				y[k] += s
				if h := b.curved(i, y); h > top {
					at, top, better = y, h, true
				}
			}
		}
		if !better || moves > 400 {
			step /= 2
		}
	}
	if !(top > large) || at.sub(b.x).norm() > nearby*b.delta {
		return false
	}
	b.tip = tip{known: true, branch: i, at: at}
	return b.n == 2 || b.direct(i)
}

// direct finds the direction of an axis: across those in which the gradient
// turns on two sides of it.
func (b *ball) direct(i int) bool {
	var turns [3]vector
	for k := range 3 {
		y := b.tip.at
		y[k] += 1e-3 * b.delta
		h := b.second(i, y)
		for a := range 3 {
			v := vector{h[3*a], h[3*a+1], h[3*a+2]}
			if v.norm() > turns[k].norm() {
				turns[k] = v
			}
		}
		turns[k] = turns[k].times(1 / turns[k].norm())
	}
	var best vector
	for k := range 3 {
		s, t := turns[k], turns[(k+1)%3]
		c := vector{s[1]*t[2] - s[2]*t[1], s[2]*t[0] - s[0]*t[2], s[0]*t[1] - s[1]*t[0]}
		if c.norm() > best.norm() {
			best = c
		}
	}
	l := best.norm()
	if !(l > 0.1) {
		return false
	}
	b.tip.axis = best.times(1 / l)
	return true
}

// second are the second derivatives of branch i at an absolute place.
func (b *ball) second(i int, at vector) []float64 {
	return jetsOf(b.p, at[:b.n], &b.jets)[i].H
}

// curved is their size, infinite where they are not finite.
func (b *ball) curved(i int, at vector) float64 {
	var s float64
	for _, h := range b.second(i, at) {
		s += h * h
	}
	if s = math.Sqrt(s); math.IsNaN(s) {
		return math.Inf(1)
	}
	return s
}

package limit

import "math"

const (
	sure    = 0.3    // variation of the gradients over their jump, below which lines cross a crease once
	grazing = 0.9995 // distance of a crease from which its part of the ball is nothing
	newton  = 4      // steps to a crease
)

// bent is the variation of the gradients over their jump up to which a crease is
// taken for a graph, by the number of coordinates.
var bent = [4]float64{0, 0, 0.3, 1.5}

// pair adds branch i on the ball and the difference of branch j on the part of
// it where j is active, if that is a cap whose base is the graph of a function
// over the plane across a direction, which is sure where the gradients vary
// little. Along a line in that direction the crease is found by Newton's
// method. Over the plane, polar coordinates about the middle of the cap end
// where the crease leaves the ball; as the kernel is zero there to fourth
// order, that need not be found exactly.
func (b *ball) pair(i, j int) bool {
	jump := b.g[j].sub(b.g[i]).norm()
	if b.vary[i]+b.vary[j] > bent[b.n]*jump {
		return false
	}
	sign := b.takes(i, j)
	if sign == 0 {
		b.whole(i)
		return true
	}
	c := caps{b: b, i: i, j: j, sign: sign, rims: b.rims[:0], at: b.at[:0]}
	defer func() { b.rims, b.at = c.rims, c.at }()
	switch c.middle() {
	case away:
		b.whole(i)
		return true
	case unclear:
		return false
	}
	if !c.rim() || !c.graph() || b.vary[i]+b.vary[j] > sure*jump && !c.below() || !c.add() {
		return false
	}
	b.whole(i)
	return true
}

// takes is 1 where branch j is active beside branch i if it is greater, -1 if it
// is less, and 0 otherwise.
func (b *ball) takes(i, j int) float64 {
	vi, vj := b.fixed[i], b.fixed[j]
	defer func() { b.fixed[i], b.fixed[j] = vi, vj }()
	b.fixed[i] = 0
	var sign float64
	for _, s := range []float64{1, -1} {
		b.fixed[j] = s
		if b.p.active(b.fixed) == j {
			sign += s
		}
	}
	return sign
}

// caps is the part of the ball where branch j is active.
type caps struct {
	b       *ball
	i, j    int
	sign    float64
	e       vector    // across the crease, into the cap
	side    [2]vector // across e
	directs int
	height  float64 // of the crease on the axis
	rims    []rim
	at      []sample
}

// rim is where the crease leaves the ball in one direction.
type rim struct {
	d          vector
	radius, up float64
}

// differ sets u and g of the samples to the difference of the branches, with
// the sign with which it is positive in the cap.
func (c *caps) differ(list []sample) {
	c.b.eval(c.i, list)
	for k := range list {
		list[k].v, list[k].h = list[k].u, list[k].g
	}
	c.b.eval(c.j, list)
	for k := range list {
		s := &list[k]
		s.u, s.g = c.sign*(s.u-s.v), s.g.sub(s.h).times(c.sign)
	}
}

type place int

const (
	found place = iota
	away
	unclear
)

// middle finds the point of the crease next to x and the axis of the cap.
func (c *caps) middle() place {
	b := c.b
	one := b.nodes[:1]
	var y vector
	for range newton {
		one[0] = sample{y: y}
		c.differ(one)
		g := one[0].g.times(b.delta)
		g2 := g.dot(g)
		if !(g2 > 0) {
			return unclear
		}
		y = g.times((g.dot(y) - one[0].u) / g2)
		if y.norm() > 1.5 {
			return away
		}
	}
	g := one[0].g
	c.e = g.times(1 / g.norm())
	c.height = c.e.dot(y)
	if c.height > grazing {
		return away
	}
	if c.height < -0.5 {
		return unclear
	}
	if b.n == 2 {
		c.side[0] = vector{-c.e[1], c.e[0]}
	} else {
		c.side[0], c.side[1] = across(c.e)
	}
	return found
}

// rim finds where the crease leaves the ball.
func (c *caps) rim() bool {
	b := c.b
	c.directs = 2
	if b.n == 3 {
		c.directs = b.o.round
	}
	start := math.Sqrt(1 - c.height*c.height)
	for k := range c.directs {
		sin, cos := math.Sincos(2 * math.Pi * float64(k) / float64(c.directs))
		c.rims = append(c.rims, rim{c.side[0].times(cos).plus(sin, c.side[1]), start, c.height})
	}
	list := b.nodes[:0]
	for range newton {
		list = list[:0]
		for _, r := range c.rims {
			list = append(list, sample{y: r.d.times(r.radius).plus(r.up, c.e)})
		}
		c.differ(list)
		for k := range c.rims {
			r, s := &c.rims[k], &list[k]
			g := s.g.times(b.delta)
			rise := g.dot(c.e)
			if !(rise > 0.2*g.norm()) {
				return false
			}
			up, slope := -s.u/rise, -g.dot(r.d)/rise
			r.up += up
			turn := 2*r.radius + 2*r.up*slope
			if turn < 0.1*r.radius {
				return false
			}
			step := -(r.radius*r.radius + r.up*r.up - 1) / turn
			if step < -r.radius/2 {
				step = -r.radius / 2
			}
			r.radius += step
			r.up += slope * step
		}
	}
	b.nodes = list
	for _, r := range c.rims {
		if !(r.radius > 0 && r.radius <= 1.001 && math.Abs(r.radius*r.radius+r.up*r.up-1) < 0.02) {
			return false
		}
	}
	return true
}

// graph finds the crease on the lines of the rule.
func (c *caps) graph() bool {
	b := c.b
	for _, r := range c.rims {
		for k, x := range b.o.cap.x {
			// The sine of an angle: the height of the ball is smooth in it.
			var cos float64
			x, cos = math.Sincos(math.Pi / 2 * x)
			w := b.o.cap.w[k] * math.Pi / 2 * r.radius * cos
			if b.n == 3 {
				w *= r.radius * x * 2 * math.Pi / float64(c.directs)
			}
			up := c.height + (r.up-c.height)*x*x
			c.at = append(c.at, sample{y: r.d.times(r.radius*x).plus(up, c.e), w: w, t: up, top: math.Sqrt(math.Max(0, 1-r.radius*r.radius*x*x))})
		}
	}
	for step := range newton {
		c.differ(c.at)
		var worst float64
		for k := range c.at {
			s := &c.at[k]
			rise := b.delta * s.g.dot(c.e)
			if !(rise > 0.2*b.delta*s.g.norm()) {
				return false
			}
			d := -s.u / rise
			s.t += d
			s.y = s.y.plus(d, c.e)
			worst = math.Max(worst, math.Abs(d))
		}
		if worst < 1e-6 { // the next would be rounding
			return true
		}
		if step == newton-1 && !(worst < 1e-5) {
			return false
		}
	}
	return true
}

// below reports whether branch j is not active at the lower ends of the lines.
func (c *caps) below() bool {
	b := c.b
	list := b.nodes[:0]
	for _, s := range c.at {
		if s.t > -s.top {
			list = append(list, sample{y: s.y.plus(-s.t-s.top, c.e)})
		}
	}
	b.nodes = list
	c.differ(list)
	for _, s := range list {
		if s.u > 0 {
			return false
		}
	}
	return true
}

// add adds the cap. It reports false where branch j turns out not to be active
// on all of it.
func (c *caps) add() bool {
	b := c.b
	list := b.nodes[:0]
	for _, s := range c.at {
		from := math.Max(s.t, -s.top)
		if from >= s.top {
			continue
		}
		foot := s.y.plus(-s.t, c.e)
		for k, x := range b.o.line.x {
			t := from + (s.top-from)*x
			list = append(list, sample{y: foot.plus(t, c.e), w: s.w * (s.top - from) * b.o.line.w[k]})
		}
	}
	b.nodes = list
	c.differ(list)
	for k := range list {
		s := &list[k]
		if s.u < 0 && s.u < -1e-6*b.delta*s.g.norm() {
			return false
		}
		value, slope := b.weights(s.y)
		b.put(s.y, s.w*value, s.w*slope, c.sign*s.u, s.g.times(c.sign))
	}
	return true
}

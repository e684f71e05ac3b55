package limit

import "math"

const (
	roughly  = 1e-3 // tolerance of the first stage
	trust    = 30   // by how much the distance of two stages may undercut an estimate
	growth   = 3.0  // of the work for a tenth of the tolerance, about
	enough   = 2e-5 // relative errors with which the integration is content
	patience = 10   // where more than this part of the work allowed would be used
	unitWork = 5    // of a density, in evaluations of a branch
)

// result is what a stage found.
type result struct {
	v, e  values
	known bool
	plain values // the estimates of the panels alone
}

// run integrates along one direction where that is enough, otherwise or where
// it fails with shares of all.
func (w *walk) run() (v, e values, err error) {
	var r result
	if w.even {
		plain, most := w.plain, w.most
		w.plain, w.most, w.allowed, w.rel = true, most/2, w.p.MaxWork/2, w.goal
		v, e, err = w.whole()
		if w.met = err == nil && worst(&e) <= math.Max(w.goal, enough)*math.Max(math.Abs(v[0]), w.least); w.met {
			return v, e, nil
		}
		r = result{v: v, e: e, known: err == nil, plain: e}
		w.most = most
		switch {
		case err != nil && err != errSpent || w.ctx.Err() != nil || w.used >= w.most:
			return v, e, err
		case !w.exhausted():
			w.plain, w.even = plain, false
		}
	}
	w.allowed = w.p.MaxWork
	return w.stages(r)
}

// stages integrates with falling tolerances, as long as that pays and the work
// allows it. It falls back on what is known already.
func (w *walk) stages(r result) (v, e values, err error) {
	w.rel = math.Max(w.goal, roughly)
	for stage := 0; ; stage++ {
		start := w.used
		w.turned = stage%2 == 1
		now, errs, err := w.whole()
		if r.known && (stage > 0 && w.spent() || err == errSpent) {
			return r.v, r.e, nil
		}
		if err != nil {
			return now, errs, err
		}
		plain := errs
		for c := range now {
			if stage > 0 {
				errs[c] = agreed(math.Abs(now[c]-r.v[c]), plain[c], r.plain[c])
			}
		}
		cost := float64(w.used - start)
		r = result{now, errs, true, plain}
		w.size = math.Max(math.Abs(now[0]), w.least)
		worst := worst(&errs)
		allowed := float64(w.most - w.used)
		if worst <= enough*w.size && !w.sharp {
			allowed = float64(w.most)/patience - float64(w.used)
		}
		w.met = worst <= math.Max(w.goal, enough)*w.size
		if w.rel <= w.goal || stage > 0 && worst <= w.goal*w.size || w.spent() || cost*growth > allowed {
			return now, errs, nil
		}
		// As many decades as the usual work allows.
		decades := 1.0
		if left := float64(w.most)/patience - float64(w.used); left > cost {
			decades = math.Min(4, math.Max(1, math.Floor(math.Log(left/cost)/math.Log(growth))))
		}
		w.rel = math.Max(w.goal, w.rel*math.Pow(0.1, decades))
	}
}

// agreed is the estimate of a stage at a distance from the stage before, where
// now and before are the estimates of their panels: what both did not expect is
// an error of either.
func agreed(distance, now, before float64) float64 {
	if distance > now+before {
		return math.Max(2*distance, now)
	}
	return math.Max(now/trust, math.Min(now, 2*distance))
}

// spent reports whether the work allowed is used up as far as panels may be
// divided; those begun are finished.
func (w *walk) spent() bool {
	return w.used >= w.most || w.p.work != nil && *w.p.work >= w.allowed/4*3 || w.ctx.Err() != nil
}

// exhausted reports whether all of it is used up.
func (w *walk) exhausted() bool { return w.p.work != nil && *w.p.work >= w.allowed }

// worst is the greatest of some estimates.
func worst(e *values) (x float64) {
	for _, v := range e {
		x = math.Max(x, v)
	}
	return x
}

// whole integrates the shares of all directions.
func (w *walk) whole() (v, e values, err error) {
	for i := range w.n {
		if w.plain && i > 0 {
			break
		}
		w.direct((w.first + i) % w.n)
		var own, errs values
		unit, least := w.size, w.least
		for d, j := range w.order {
			if w.size != 0 {
				w.scale[d] = math.Max(unit, smallestScale)
			}
			w.scale[d] = math.Max(w.scale[d], least)
			unit /= w.p.Domain.Hi[j] - w.p.Domain.Lo[j]
			least /= w.p.Domain.Hi[j] - w.p.Domain.Lo[j]
		}
		err = w.level(0, &own, &errs)
		for c := range v {
			v[c] += own[c]
			e[c] += errs[c]
		}
		if err != nil {
			break
		}
	}
	return v, e, err
}

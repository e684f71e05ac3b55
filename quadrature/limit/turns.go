package limit

import "slices"

const (
	turnPieces   = 16 // of a range, between which turns are looked for
	turnHalvings = 14
	jumpHalvings = 46   // where the integrand jumps
	turnShift    = 0.37 // of a piece
	turnMargin   = 1e-6 // of a range, left out at its ends
	mostChanges  = 4    // of one piece
	closest      = 1e-9 // of a range, between cuts
)

// turns cuts the range of the parameter of a level where what lies along the
// further ones changes its structure: next to the fibres, at their tangents to
// the crease and where three branches meet.
func (w *walk) turns(depth int) []span {
	k := w.order[depth]
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	var at []float64
	if w.creases != nil {
		at = w.vertices(depth)
	} else {
		at = w.changes(depth)
	}
	spans := make([]span, 0, len(at)+1)
	start := lo
	for _, s := range at {
		if s-start > closest*(hi-lo) && hi-s > closest*(hi-lo) {
			spans = append(spans, span{lo: start, hi: s})
			start = s
		}
	}
	return append(spans, span{lo: start, hi: hi})
}

// changes looks for the places where the structure changes, in each of the
// pieces of the range whose ends have different ones: one after another, as long
// as the rest of the piece has different ends.
func (w *walk) changes(depth int) (at []float64) {
	k := w.order[depth]
	halvings := turnHalvings
	if w.sharp {
		halvings = jumpHalvings
	}
	var last uint64
	for i := range turnPieces + 1 {
		from, to := w.place(k, i-1), w.place(k, i)
		next := w.structure(depth, to)
		for range mostChanges {
			if i == 0 || next == last {
				break
			}
			a, b, there := from, to, next
			for range halvings {
				m := a + (b-a)/2
				if h := w.structure(depth, m); h == last {
					a = m
				} else {
					b, there = m, h
				}
			}
			at = append(at, b)
			from, last = b, there
		}
		last = next
	}
	return at
}

// place is one of turnPieces + 1 places of the range of parameter k. Those inside
// are others where the outer parameters are turned.
func (w *walk) place(k, i int) float64 {
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	t := float64(i)
	if w.turned && i > 0 && i < turnPieces {
		t += turnShift
	}
	t = min(max(t/turnPieces, turnMargin), 1-turnMargin)
	return lo + (hi-lo)*t
}

// structure tells apart the sequences of crossings that the fibres have where
// the parameter of a level is s.
func (w *walk) structure(depth int, s float64) uint64 {
	const prime = 1_000_003
	w.s[w.order[depth]] = s
	h := uint64(1)
	if depth == w.n-2 {
		w.cross()
		for _, c := range w.cuts {
			h = h*prime + uint64(c.before*w.p.Branches+c.after+1)
		}
		return h
	}
	var last uint64
	for i := range turnPieces + 1 {
		if next := w.structure(depth+1, w.place(w.order[depth+1], i)); next != last {
			h = h*prime + next
			last = next
		}
	}
	return h
}

// regular looks at a grid of fibres in the first direction. They are enough where
// all have the same sequence of crossings, or where all begin on one branch and
// end on another and none comes back to a branch: so no crease is tangent to
// one, and none leaves the domain through an end of the fibres. Found says
// that there are crossings.
func (w *walk) regular() (enough, found bool) {
	w.direct(w.first)
	same, apart := true, true
	var all []int // the branches of the first fibre
	w.each(0, func() bool {
		w.cross()
		found = found || len(w.cuts) > 0
		list := w.sequence()
		if all == nil {
			all = slices.Clone(list)
		}
		same = same && slices.Equal(list, all)
		if apart = apart && list[0] == all[0] && list[len(list)-1] == all[len(all)-1]; apart {
			for i, b := range list {
				apart = apart && !slices.Contains(list[:i], b)
			}
		}
		return same || apart || !found
	})
	return same || apart && found, found
}

// sequence are the branches along the current fibre.
func (w *walk) sequence() []int {
	w.branches = w.branches[:0]
	if len(w.cuts) == 0 {
		return append(w.branches, w.winner(w.order[w.n-1], w.p.Domain.Lo[w.order[w.n-1]]))
	}
	w.branches = append(w.branches, w.cuts[0].before)
	for _, c := range w.cuts {
		w.branches = append(w.branches, c.after)
	}
	return w.branches
}

// each visits the fibres through the places of the levels from the given one
// inwards, until one is refused.
func (w *walk) each(depth int, visit func() bool) bool {
	if depth == w.n-1 {
		return visit()
	}
	k := w.order[depth]
	for i := range turnPieces + 1 {
		s := w.place(k, i)
		w.s[k] = s
		if !w.each(depth+1, visit) {
			return false
		}
	}
	return true
}

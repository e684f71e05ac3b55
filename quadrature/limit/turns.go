package limit

import "slices"

const (
	turnPieces   = 16 // of a range, between which turns are looked for
	turnHalvings = 14
	jumpHalvings = 46   // where the integrand jumps
	turnMargin   = 1e-6 // of a range, left out at its ends
)

// turns cuts the range of the parameter of a level where what lies along the
// further ones changes its structure: next to the fibres, at their tangents to
// the crease and where three branches meet.
func (w *walk) turns(depth int) []span {
	k := w.order[depth]
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	halvings := turnHalvings
	if w.sharp {
		halvings = jumpHalvings
	}
	spans := make([]span, 0, 4)
	start := lo
	var last uint64
	for i := range turnPieces + 1 {
		a, b := w.place(k, i-1), w.place(k, i)
		next := w.structure(depth, b)
		if i > 0 && next != last {
			for range halvings {
				m := a + (b-a)/2
				if w.structure(depth, m) == last {
					a = m
				} else {
					b = m
				}
			}
			spans = append(spans, span{lo: start, hi: b})
			start = b
		}
		last = next
	}
	return append(spans, span{lo: start, hi: hi})
}

// place is one of turnPieces + 1 places of the range of parameter k.
func (w *walk) place(k, i int) float64 {
	lo, hi := w.p.Domain.Lo[k], w.p.Domain.Hi[k]
	t := min(max(float64(i)/turnPieces, turnMargin), 1-turnMargin)
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

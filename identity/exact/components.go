package exact

import (
	"errors"

	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
	"creaseproof/identity/claim"
)

// components decides the parts of a claim in turn: part reports whether its
// part is refuted or left open, and has written that into the record. A part
// that is refuted refutes the claim, whatever is left open before it. It
// reports whether the record holds a verdict; otherwise all parts hold.
func (d *Problem) components(n int, part func(i int) (bool, error)) (bool, error) {
	var open *claim.Record
	for i := range n {
		done, err := part(i)
		var finer *jet.FinerAngles
		switch outside := errors.Is(err, algebra.ErrLimit) || errors.Is(err, jet.ErrOutside); {
		case err == nil:
		case d.Ctx.Err() == nil && outside && !errors.As(err, &finer):
			d.Open("%v", err)
			done = true
		default:
			return true, err
		}
		switch {
		case !done:
			continue
		case d.Rec.Verdict == claim.Refuted:
			return true, nil
		case open == nil:
			open = &claim.Record{Verdict: d.Rec.Verdict, Reason: d.Rec.Reason, Remainder: d.Rec.Remainder}
		}
		d.Rec.Verdict, d.Rec.Reason, d.Rec.Remainder = "", "", ""
	}
	if open == nil {
		return false, nil
	}
	d.Rec.Verdict, d.Rec.Reason, d.Rec.Remainder = open.Verdict, open.Reason, open.Remainder
	return true, nil
}

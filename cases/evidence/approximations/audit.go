package approximations

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/evidence/agree"
	"creaseproof/cases/limits"
)

const (
	rounding = 1e-14 // relative, of a number that is computed from the same data
	derived  = 1e-9  // relative, of what follows from numbers by the same formulas
)

// Audit repeats the computation of a file. A nil error means that it gives what
// the file holds. That is floating-point arithmetic and no proof.
func Audit(ctx context.Context, data []byte) (*File, error) {
	f, err := Decode(data)
	if err != nil {
		return nil, err
	}
	c, err := cases.Parse(f.Case, []byte(f.Source))
	if err != nil {
		return f, fmt.Errorf("the case in the file: %w", err)
	}
	i := slices.IndexFunc(c.File.Limits, func(l casefile.Limit) bool { return l.Name == f.Approximation })
	if i < 0 {
		return f, fmt.Errorf("the case has no limit %.60q", f.Approximation)
	}
	l := &c.File.Limits[i]
	if err := f.fits(l); err != nil {
		return f, err
	}
	first := 0
	if f.Unfinished {
		first = len(f.Eps)
	}
	got, err := limits.At(ctx, c, l, f.Values, first)
	if err != nil {
		return f, err
	}
	if err := f.numbers(got); err != nil || f.Unfinished {
		return f, err
	}
	if f.Outcome != got.Outcome {
		return f, fmt.Errorf("the outcome is %s here, not %.40s: %s", got.Outcome, f.Outcome, got.Reason)
	}
	return f, f.follows(f.judged(l, got))
}

// fits makes sure that the file is of the shape that its kind has.
func (f *File) fits(l *casefile.Limit) error {
	if f.Kind != Numerical {
		return fmt.Errorf("evidence of an unknown kind %.40q", f.Kind)
	}
	for _, list := range [][]float64{f.Energy, f.Compression, f.Bending, f.Curvature, f.Error} {
		if len(list) != len(f.Eps) {
			return errors.New("the lists of the file are not of one length")
		}
	}
	if !f.Unfinished {
		return nil
	}
	if len(f.Eps) == 0 || len(f.Eps) >= len(l.Eps) {
		return errors.New("the file is marked unfinished and holds all eps, or none")
	}
	empty := File{}
	empty.follow(&limits.Value{})
	if err := f.follows(&empty); err != nil {
		return fmt.Errorf("the file is marked unfinished: %w", err)
	}
	return nil
}

// numbers compares what is integrated with what is recorded.
func (f *File) numbers(got *limits.Value) error {
	if len(f.Eps) != len(got.Eps) {
		return fmt.Errorf("the file has %d eps, and here there are energies at %d", len(f.Eps), len(got.Eps))
	}
	for i, e := range got.Eps {
		if !agree.Within(f.Eps[i], e, rounding*e) {
			return fmt.Errorf("eps is %g here, and %g in the file", e, f.Eps[i])
		}
		if !agree.Errors(f.Error[i], got.Error[i], got.Energy[i]) {
			return fmt.Errorf("at eps = %g the error is estimated to be %.2g here, and to be %.2g in the file", e, got.Error[i], f.Error[i])
		}
		for _, x := range []struct {
			what string
			a, b float64
		}{
			{"energy", f.Energy[i], got.Energy[i]}, {"compression", f.Compression[i], got.Compression[i]},
			{"bending", f.Bending[i], got.Bending[i]}, {"curvature", f.Curvature[i], got.Curvature[i]},
		} {
			if !agree.Within(x.a, x.b, f.Error[i]+got.Error[i]) {
				return fmt.Errorf("at eps = %g the %s is %.17g here, and %.17g in the file: they differ by more than the errors allow for", e, x.what, x.b, x.a)
			}
		}
	}
	switch a, b := finite(got.Target), finite(got.TargetError); {
	case f.TargetClaimed != got.TargetClaimed, (f.Target == nil) != (a == nil), (f.TargetError == nil) != (b == nil):
		return errors.New("the jump energy is claimed in the one and not in the other, or missing")
	case (a == nil) != (b == nil):
		return errors.New("the jump energy has no error, or an error without it")
	case b != nil && !agree.Errors(*f.TargetError, *b, *a):
		return fmt.Errorf("the error of the jump energy is estimated to be %.2g here, and to be %.2g in the file", *b, *f.TargetError)
	case a != nil:
		allowed := rounding*math.Abs(*a) + *b + *f.TargetError
		if !agree.Within(*f.Target, *a, allowed) {
			return fmt.Errorf("the jump energy is %.17g here, and %.17g in the file", *a, *f.Target)
		}
	}
	return nil
}

// judged is what follows from the numbers in the file.
func (f *File) judged(l *casefile.Limit, got *limits.Value) *File {
	v := *got
	if v.Outcome != limits.Infinite {
		v = limits.Empty(l)
		v.Eps, v.Energy, v.Compression, v.Bending, v.Curvature, v.Error = f.Eps, f.Energy, f.Compression, f.Bending, f.Curvature, f.Error
		v.Target, v.TargetError, v.Jumps = f.Target, f.TargetError, got.Jumps
		v.Judge(l)
	}
	out := &File{}
	out.follow(&v)
	return out
}

// follows compares what follows from the numbers with what is recorded.
func (f *File) follows(want *File) error {
	scale := 0.0 // of what rounding is relative to
	if want.Limit != nil {
		scale = math.Abs(*want.Limit)
	}
	for _, x := range []struct {
		what  string
		a, b  *float64
		noise float64 // absolute
	}{
		{"gap", f.Gap, want.Gap, 0}, {"relative gap", f.RelativeGap, want.RelativeGap, 0},
		{"rate", f.Rate, want.Rate, 0}, {"standard error of the rate", f.RateError, want.RateError, 1e-12},
		{"limit", f.Limit, want.Limit, 0}, {"error of the limit", f.LimitError, want.LimitError, rounding * scale},
		{"equipartition ratio", f.Equipartition, want.Equipartition, 0},
	} {
		if (x.a == nil) != (x.b == nil) {
			return fmt.Errorf("the %s is missing, or has no place in the file", x.what)
		}
		if x.a != nil && !agree.Within(*x.a, *x.b, math.Max(x.noise, derived*math.Abs(*x.b))) {
			return fmt.Errorf("from the numbers in the file the %s is %.10g, and it says %.10g", x.what, *x.b, *x.a)
		}
	}
	switch {
	case f.BelowRounding != want.BelowRounding, f.Outcome != want.Outcome, f.Expected != want.Expected:
		return fmt.Errorf("from the numbers in the file the outcome is %q where %q is expected, and it says otherwise", want.Outcome, want.Expected)
	case !agree.Texts(f.Reason, want.Reason, derived, 0):
		return errors.New("the reason is not the one that the numbers give")
	}
	return nil
}

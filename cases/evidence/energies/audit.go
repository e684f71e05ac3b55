package energies

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"math"
	"math/big"
	"slices"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/agree"
)

// Open opens a file that stands beside the evidence.
type Open func(name string) (io.ReadCloser, error)

// Audit verifies a file. A nil error means that all that it states was computed
// here once more; for evidence of the kind Numerical in floating point, which is
// no proof. A file of a mesh is opened by open, which may be nil where there is
// none.
func Audit(ctx context.Context, data []byte, open Open) (*File, error) {
	f, err := Decode(data)
	if err != nil {
		return nil, err
	}
	c, err := cases.Parse(f.Case, []byte(f.Source))
	if err != nil {
		return f, fmt.Errorf("the case in the file: %w", err)
	}
	i := slices.IndexFunc(c.File.Surfaces, func(s casefile.Surface) bool { return s.Name == f.Surface })
	if i < 0 {
		return f, fmt.Errorf("the case has no surface %.60q", f.Surface)
	}
	ev := creases.New(c.Setting, c.File.Path)
	if ev.Open, err = f.mesh(ctx, &c.File.Surfaces[i], open); err != nil {
		return f, err
	}
	s, err := ev.Read(&c.File.Surfaces[i])
	if err != nil {
		return f, fmt.Errorf("the case in the file: %w", err)
	}
	got, err := s.EvaluateAt(ctx, f.Values, creases.Options{Certify: f.Certify})
	if err != nil {
		return f, err
	}
	if !finite(got.Energy) {
		return f, fmt.Errorf("the surface has no energy: %s", got.Reason)
	}
	if f.Certify && !asked(&got) {
		return f, errors.New("an enclosure of an exact energy")
	}
	if got, err = f.enclosure(ctx, s, got); err != nil {
		return f, err
	}
	return f, f.same(&got)
}

// enclosure requires that the enclosure in the file contains the one of the
// result, and gives the result with the verdict that follows from that in the
// file.
func (f *File) enclosure(ctx context.Context, s *creases.Surface, got creases.Result) (creases.Result, error) {
	if f.Enclosure == nil || got.Enclosure == nil {
		if f.Enclosure != nil || got.Enclosure != nil {
			return got, fmt.Errorf("the file has the enclosure %.60q, and what is computed is %.60q", f.Enclosure, got.Enclosure)
		}
		return got, nil
	}
	if slices.Equal(f.Enclosure, got.Enclosure) {
		return got, nil
	}
	base, err := s.EvaluateAt(ctx, f.Values, creases.Options{})
	if err != nil {
		return got, err
	}
	follows, err := s.Follow(ctx, base, f.Enclosure)
	if err != nil {
		return got, err
	}
	var ends [4]*big.Rat
	for i, text := range slices.Concat(f.Enclosure, got.Enclosure) {
		ends[i], _ = new(big.Rat).SetString(text) // both were read before
	}
	wide, width := new(big.Rat).Sub(ends[1], ends[0]), new(big.Rat).Sub(ends[3], ends[2])
	switch {
	case ends[0].Cmp(ends[2]) > 0 || ends[1].Cmp(ends[3]) < 0:
		return got, fmt.Errorf("the enclosure in the file does not contain the one computed here, [%s, %s]", got.Enclosure[0], got.Enclosure[1])
	case wide.Cmp(width.Mul(width, big.NewRat(3, 1))) > 0:
		return got, fmt.Errorf("the enclosure in the file is more than three times as wide as the one computed here, [%s, %s]", got.Enclosure[0], got.Enclosure[1])
	case follows.Verdict != got.Verdict:
		return got, fmt.Errorf("from the enclosure in the file it does not follow that the claimed energy is %s", got.Verdict)
	}
	return follows, nil
}

// same compares what is computed with what is recorded.
func (f *File) same(got *creases.Result) error {
	switch {
	case f.Verdict != got.Verdict:
		return fmt.Errorf("the verdict is %q, not %.40q: %s", got.Verdict, f.Verdict, got.Reason)
	case f.Kind != kindOf(got):
		return fmt.Errorf("evidence of the kind %.40q, and what is computed is of the kind %q", f.Kind, kindOf(got))
	case f.Expected != got.Expected:
		return fmt.Errorf("the case expects %q, not %.40q", got.Expected, f.Expected)
	case f.Exact != got.Exact:
		return fmt.Errorf("the exact energy is %.60q, not %.60q", got.Exact, f.Exact)
	case !slices.Equal(f.AreaRoots, got.AreaRoots):
		return errors.New("the radicands of the area differ from those computed")
	case !equal(f.Claimed, got.Claimed):
		return errors.New("the claimed energy is not that of the case")
	}
	if isExact(got) {
		if f.Energy != *got.Energy || !equal(f.Error, got.Error) || !equal(f.Area, got.Area) || f.Reason != got.Reason {
			return errors.New("energy, error, area or reason are not those of the exact energy")
		}
		return nil
	}
	failure, err := f.floats(got)
	if err != nil {
		return err
	}
	if decided(got) && f.Reason != got.Reason || !agree.Texts(f.Reason, got.Reason, 1e-12, failure) {
		return errors.New("the reason is not the one that the computation gives")
	}
	return nil
}

func equal(a, b *float64) bool { return a == nil && b == nil || a != nil && b != nil && *a == *b }

// floats compares what is computed in floating point, and gives the error to
// which that agrees.
func (f *File) floats(got *creases.Result) (failure float64, err error) {
	if finite(got.Error) {
		if f.Error == nil || !agree.Errors(*f.Error, *got.Error, *got.Energy) {
			return 0, fmt.Errorf("the error is estimated to be %.2g here, which is not as the file says", *got.Error)
		}
		failure = *f.Error + *got.Error
		if !agree.Within(f.Energy, *got.Energy, failure) {
			return 0, fmt.Errorf("the energy is %.17g here, and %.17g in the file: they differ by more than the errors allow for", *got.Energy, f.Energy)
		}
	} else if f.Error != nil || f.Energy != *got.Energy {
		return 0, errors.New("the energy, whose error has no estimate, is not the same")
	}
	if !finite(got.Area) || f.Area == nil {
		if finite(got.Area) || f.Area != nil {
			return 0, errors.New("the area is missing, or there is none")
		}
		return failure, nil
	}
	relative := 1e-6
	if failure > 0 {
		relative += math.Min(1, failure/math.Abs(*got.Energy))
	}
	if !agree.Within(*f.Area, *got.Area, relative*math.Abs(*got.Area)) {
		return 0, fmt.Errorf("the area is %.10g here, and %.10g in the file", *got.Area, *f.Area)
	}
	return failure, nil
}

// mesh requires that the mesh beside the evidence is the recorded one, and says
// how it is opened.
func (f *File) mesh(ctx context.Context, s *casefile.Surface, open Open) (func(string) (io.ReadCloser, error), error) {
	if (s.Mesh != "") != (f.Mesh != nil) {
		return nil, errors.New("the surface is a mesh and the file names none, or the other way round")
	}
	if f.Mesh == nil {
		return nil, nil
	}
	if open == nil {
		return nil, errors.New("the mesh is not at hand")
	}
	r, err := open(f.Mesh.File)
	if err != nil {
		return nil, fmt.Errorf("the mesh beside the evidence: %w", err)
	}
	defer r.Close()
	sum, err := SumOf(ctx, r)
	if err != nil {
		return nil, fmt.Errorf("the mesh beside the evidence: %w", err)
	}
	if sum != f.Mesh.SHA256 {
		return nil, errors.New("the mesh beside the evidence is not the recorded one")
	}
	return func(string) (io.ReadCloser, error) { return open(f.Mesh.File) }, nil
}

// SumOf is the SHA-256 of what is read, in hexadecimal digits.
func SumOf(ctx context.Context, r io.Reader) (string, error) {
	h := sha256.New()
	for {
		if err := ctx.Err(); err != nil {
			return "", err
		}
		_, err := io.CopyN(h, r, 1<<22)
		if errors.Is(err, io.EOF) {
			return hex.EncodeToString(h.Sum(nil)), nil
		}
		if err != nil {
			return "", err
		}
	}
}

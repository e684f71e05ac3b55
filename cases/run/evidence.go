package run

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"creaseproof/cases/evidence"
	"creaseproof/cases/evidence/approximations"
	"creaseproof/cases/evidence/energies"
	"creaseproof/identity/claim"
	"creaseproof/identity/export"
	"creaseproof/identity/statement"
)

// Evidence writes evidence into a folder, which it makes. Each file is written
// when its result is given, and is whole or not there at all, so that an
// interruption loses nothing. An error does not stop what comes after it. The
// methods are for one goroutine.
//
// The files are
//
//	CASE__CLAIM.json                       for the audit, and where the statement
//	                                       can be exported CASE__CLAIM.tex, an align
//	                                       block, and CASE__CLAIM.v, a file for the Coq
//	                                       proof assistant that needs nothing else
//	CASE__SURFACE__VALUES.energy.json      one for each choice of the values
//	CASE__APPROXIMATION__VALUES.limit.json one for each choice of the values
//	SHA256.mesh                            a copy of the mesh of a surface
type Evidence struct {
	dir     string
	names   map[string]bool           // that were given
	meshes  map[string]*energies.Mesh // by path; nil where it could not be copied
	broken  bool                      // the folder cannot be made or written to
	written int
	errs    []error
	more    int // errors beyond mostErrors
}

// mostErrors bounds the errors that are kept.
const mostErrors = 5

// NewEvidence prepares a folder for evidence; nothing is made before the first file.
func NewEvidence(dir string) *Evidence {
	return &Evidence{dir: dir, names: map[string]bool{}, meshes: map[string]*energies.Mesh{}}
}

// Written is how many results there are files of, and what went wrong.
func (e *Evidence) Written() (int, error) {
	if e.more > 0 {
		return e.written, errors.Join(slices.Concat(e.errs, []error{fmt.Errorf("and %d more errors", e.more)})...)
	}
	return e.written, errors.Join(e.errs...)
}

// errBroken stands for an error that was kept before.
var errBroken = errors.New("the folder for evidence is broken")

func (e *Evidence) fail(err error) {
	if errors.Is(err, errBroken) {
		return
	}
	if len(e.errs) < mostErrors {
		e.errs = append(e.errs, err)
	} else {
		e.more++
	}
}

// Claim writes the evidence of a decided claim. Where the context ends the files
// for TeX and Coq may be missing.
func (e *Evidence) Claim(ctx context.Context, r *Result, seed uint64) {
	if r.Record == nil {
		return
	}
	f, err := evidence.New(r.Case, r.Claim, r.Record, seed)
	if errors.Is(err, evidence.ErrNone) {
		return
	}
	base := ""
	if err == nil {
		base, err = e.document(f, ".json", r.Case.Name, r.Record.Claim)
	}
	if err == nil && r.Record.Verdict == claim.Proved {
		err = e.proof(ctx, base, r)
	}
	if err != nil {
		e.fail(about(err, r.Case.Name, r.Record.Claim))
	}
}

// Surface writes the evidence of the energies of a surface. With certify they
// were asked to be enclosed.
func (e *Evidence) Surface(ctx context.Context, r *EnergyResult, certify bool) {
	for i := range r.Values {
		v := &r.Values[i]
		if v.Energy == nil {
			continue
		}
		mesh, err := e.mesh(ctx, r)
		if err != nil {
			e.fail(about(err, r.Case.Name, r.Surface.Name))
			return
		}
		f, err := energies.New(r.Case, v, certify, mesh)
		if errors.Is(err, energies.ErrNone) {
			continue
		}
		if err == nil {
			var values []string
			for _, p := range r.Surface.Values {
				values = append(values, p.Name.S, v.Values[p.Name.S])
			}
			_, err = e.document(f, ".energy.json", r.Case.Name, v.Surface, values...)
		}
		if err != nil {
			e.fail(about(err, r.Case.Name, v.Surface))
		}
	}
}

// Limit writes the evidence of the energies of an approximation.
func (e *Evidence) Limit(r *LimitResult) {
	for i := range r.Values {
		v := &r.Values[i]
		f, err := approximations.New(r.Case, v)
		if errors.Is(err, approximations.ErrNone) {
			continue
		}
		if err == nil {
			var values []string
			for _, p := range r.Limit.Values {
				values = append(values, p.Name.S, v.Values[p.Name.S])
			}
			_, err = e.document(f, ".limit.json", r.Case.Name, v.Approximation, values...)
		}
		if err != nil {
			e.fail(about(err, r.Case.Name, v.Approximation))
		}
	}
}

// about names what an error concerns, unless it is one of the folder or a file.
func about(err error, name, part string) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return err
	}
	return fmt.Errorf("evidence for %s: %s: %w", name, part, err)
}

// document writes one document. It returns its path without the ending.
func (e *Evidence) document(f interface{ Encode() ([]byte, error) }, ending, name, part string, values ...string) (string, error) {
	data, err := f.Encode()
	if err != nil {
		return "", err
	}
	base := slug(name) + "__" + slug(part)
	if len(values) > 0 {
		base += "__" + strings.TrimPrefix(slug(strings.Join(values, " ")), "c_")
	}
	plain := base
	for n := 2; e.names[base+ending]; n++ {
		base = fmt.Sprintf("%s_%d", plain, n)
	}
	e.names[base+ending] = true
	base = filepath.Join(e.dir, base)
	if err := e.write(base+ending, data); err != nil {
		return "", err
	}
	e.written++
	return base, nil
}

// write makes a file, or none.
func (e *Evidence) write(path string, data []byte) error {
	return e.create(func(w io.Writer) (string, error) {
		_, err := w.Write(data)
		return path, err
	})
}

// create makes a file, or none: it gets the name that fill returns when it is
// complete. After an error of the folder no other file is tried.
func (e *Evidence) create(fill func(io.Writer) (path string, err error)) error {
	if e.broken {
		return errBroken
	}
	unfinished := filepath.Join(e.dir, fmt.Sprintf(".unfinished-%d", os.Getpid()))
	err := os.MkdirAll(e.dir, 0o777)
	var t *os.File
	if err == nil {
		t, err = os.OpenFile(unfinished, os.O_CREATE|os.O_TRUNC|os.O_WRONLY, 0o666)
	}
	if err != nil {
		e.broken = true
		return fmt.Errorf("the folder for evidence: %w", err)
	}
	path, err := fill(t)
	if err2 := t.Close(); err == nil {
		err = err2
	}
	if err == nil {
		err = os.Rename(unfinished, path)
	}
	if err != nil {
		_ = os.Remove(unfinished)
	}
	return err
}

// proof exports a proved claim as TeX and Coq, where that is supported.
func (e *Evidence) proof(ctx context.Context, base string, r *Result) error {
	s, err := statement.Of(ctx, r.Claim.Claim, r.Record)
	if errors.Is(err, export.ErrUnsupported) {
		return nil
	}
	if err != nil {
		return err
	}
	about := r.Case.Name + ": " + r.Record.Claim
	for ending, make := range map[string]func() (string, error){
		".tex": func() (string, error) { return export.TeX(s, export.TeXOptions{}) },
		".v":   func() (string, error) { return export.Coq(about, s) },
	} {
		text, err := make()
		if errors.Is(err, export.ErrUnsupported) {
			continue
		}
		if err != nil {
			return err
		}
		if err := e.write(base+ending, []byte(text)); err != nil {
			return err
		}
	}
	return nil
}

// slug is a name as part of a file name, which has to be a name of a module in
// Coq as well: letters and digits, and one underscore for anything else.
func slug(s string) string {
	var b strings.Builder
	gap := false
	for _, r := range strings.ToLower(s) {
		if r >= 'a' && r <= 'z' || r >= '0' && r <= '9' {
			b.WriteRune(r)
			gap = false
		} else if !gap && b.Len() > 0 {
			b.WriteByte('_')
			gap = true
		}
		if b.Len() > 60 {
			break
		}
	}
	name := strings.Trim(b.String(), "_")
	if name == "" || name[0] >= '0' && name[0] <= '9' {
		name = "c_" + name
	}
	return name
}

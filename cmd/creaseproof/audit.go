package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/replay"
	"creaseproof/cases/evidence/sealed"

	"github.com/spf13/cobra"
)

func newAudit(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "audit EVIDENCE...",
		Short: "Verify what check, energy and limit have written as evidence",
		Long: `Verify evidence that check, energy or limit has written with --evidence, with
none of the search code. The case in each file is read again, and

  of a claim      the claim is made exact, certificates are multiplied out by the
                  checker, counterexamples are put in and settled exactly, and what
                  rests on an exact computation is computed once more
  of an energy    the surface is made from the case; an enclosure has to contain the
                  one computed here, with outward rounding, an exact energy has to be
                  the same, and the verdict on the claimed energy has to follow
  of a number     an energy without either, and all of a limit, is computed once more
                  in floating point, and has to agree to the stated errors

The last shows that the computation was done and not that it is right: such a file
is called repeated, not verified, and proves nothing.

EVIDENCE is a file, or a folder whose files *.json are taken, those of its
folders too.

Exit status: 0 every file is verified or repeated, 1 one is refused, 2 one cannot
be read.`,
		Example: `  creaseproof check mine.toml --evidence proofs
  creaseproof energy mine.toml --certify --evidence proofs
  creaseproof audit proofs`,
		Args: cobra.MinimumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			return audit(cmd.Context(), args, s)
		},
	}
}

func audit(ctx context.Context, args []string, s streams) error {
	var files []string
	unread := 0
	for _, a := range args {
		found, err := evidenceFiles(a)
		if err != nil {
			fmt.Fprintf(s.err, "%s: %s\n", a, clip(err.Error(), 500))
			unread++
			continue
		}
		files = append(files, found...)
	}
	refused, verified, repeated := 0, 0, 0
	for _, path := range files {
		data, err := readEvidence(path)
		if err != nil {
			fmt.Fprintf(s.err, "%s: %s\n", path, clip(err.Error(), 500))
			unread++
			continue
		}
		r, err := replay.File(ctx, data, beside(path))
		switch {
		case ctx.Err() != nil:
			fmt.Fprintf(s.out, "interrupted after %d files\n", verified+repeated+refused)
			return status(exitInterrupted)
		case err != nil:
			refused++
			fmt.Fprintf(s.out, "refused   %s: %s\n", path, clip(err.Error(), 500))
		case r.Numerical:
			repeated++
			fmt.Fprintf(s.out, "repeated  %s: %s, %s: %s\n", path, r.Case, r.Name, r.States)
		default:
			verified++
			fmt.Fprintf(s.out, "verified  %s: %s, %s: %s\n", path, r.Case, r.Name, r.States)
		}
	}
	again := ""
	if repeated > 0 {
		fmt.Fprintln(s.out, "\nrepeated: a floating-point computation that was done again and agrees to the stated errors; no proof")
		again = fmt.Sprintf(", %d repeated", repeated)
	}
	fmt.Fprintf(s.out, "%s: %d verified%s, %d refused\n", count(len(files), "file", "files"), verified, again, refused)
	switch {
	case unread > 0:
		return status(exitBadInput)
	case refused > 0:
		return status(exitNotMet)
	}
	return nil
}

// readEvidence reads no more of a file than evidence may have, and one byte.
func readEvidence(path string) ([]byte, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return io.ReadAll(io.LimitReader(f, sealed.MaxSize+1))
}

// beside opens the mesh that stands beside a file of evidence. A name with a
// folder in it is none.
func beside(path string) replay.Open {
	return func(name string) (io.ReadCloser, error) {
		if name != filepath.Base(name) || !filepath.IsLocal(name) {
			return nil, fmt.Errorf("%.60q is not the name of a file beside the evidence", name)
		}
		return creases.OpenMesh(path, name)
	}
}

// evidenceFiles lists the files that an argument names.
func evidenceFiles(path string) ([]string, error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, errors.New("there is no such file or folder")
	case err != nil:
		return nil, err
	case info.Mode().IsRegular():
		return []string{path}, nil
	case !info.IsDir():
		return nil, errors.New("this is no regular file")
	}
	var out []string
	err = filepath.WalkDir(path, func(p string, e fs.DirEntry, err error) error {
		if err == nil && e.Type().IsRegular() && strings.HasSuffix(p, ".json") {
			out = append(out, p)
		}
		return err
	})
	if err == nil && len(out) == 0 {
		err = errors.New("this folder holds no evidence (files *.json)")
	}
	return out, err
}

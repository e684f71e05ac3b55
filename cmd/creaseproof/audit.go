package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"creaseproof/cases/evidence"

	"github.com/spf13/cobra"
)

func newAudit(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "audit EVIDENCE...",
		Short: "Verify certificates and counterexamples again",
		Long: `Verify evidence that check has written with --evidence, with none of the search
code: the case in each file is read again and made exact, certificates are
multiplied out by the checker, counterexamples are put in and settled exactly,
and what rests on an exact computation is computed once more.

EVIDENCE is a file, or a folder whose files *.json are taken, those of its
folders too.

Exit status: 0 every file is verified, 1 one is refused, 2 one cannot be read.`,
		Example: `  creaseproof check mine.toml --evidence proofs
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
	refused, verified := 0, 0
	for _, path := range files {
		data, err := os.ReadFile(path)
		if err != nil {
			fmt.Fprintf(s.err, "%s: %s\n", path, clip(err.Error(), 500))
			unread++
			continue
		}
		f, err := evidence.Audit(ctx, data)
		switch {
		case ctx.Err() != nil:
			fmt.Fprintf(s.out, "interrupted after %d files\n", verified+refused)
			return status(exitInterrupted)
		case err != nil:
			refused++
			fmt.Fprintf(s.out, "refused   %s: %s\n", path, clip(err.Error(), 500))
		default:
			verified++
			fmt.Fprintf(s.out, "verified  %s: %s, %s: %s\n", path, f.Case, f.Claim, f.Verdict)
		}
	}
	fmt.Fprintf(s.out, "%d files: %d verified, %d refused\n", len(files), verified, refused)
	switch {
	case unread > 0:
		return status(exitBadInput)
	case refused > 0:
		return status(exitNotMet)
	}
	return nil
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

package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"unicode/utf8"

	"creaseproof/cases"
	"creaseproof/cases/library"

	"github.com/spf13/cobra"
)

func newCases(s streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "cases",
		Short: "List the built-in cases, show one, or start a new one",
		Example: `  creaseproof cases list
  creaseproof cases show layered-rotated
  creaseproof cases new mine.toml`,
		Args: cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error { return listCases(s) },
	}
	cmd.AddCommand(&cobra.Command{
		Use:     "list",
		Short:   "List the built-in cases",
		Example: "  creaseproof cases list",
		Args:    cobra.NoArgs,
		RunE:    func(*cobra.Command, []string) error { return listCases(s) },
	}, &cobra.Command{
		Use:     "show NAME",
		Short:   "Print the text of a built-in case",
		Example: "  creaseproof cases show layered-rotated > mine.toml",
		Args:    cobra.ExactArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return library.Names(), cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(_ *cobra.Command, args []string) error {
			data, ok := library.Source(args[0])
			if !ok {
				return fmt.Errorf("there is no built-in case %q; `creaseproof cases list` lists them", clip(args[0], 100))
			}
			_, err := s.out.Write(data)
			return err
		},
	}, &cobra.Command{
		Use:     "new FILE",
		Short:   "Write a small case to start from",
		Example: "  creaseproof cases new mine.toml\n  creaseproof check mine.toml",
		Args:    cobra.ExactArgs(1),
		RunE:    func(_ *cobra.Command, args []string) error { return newFile(args[0], s) },
	})
	return cmd
}

func listCases(s streams) error {
	list, failed := cases.Load(nil, nil)
	say := complaints{w: s.err}
	for _, err := range failed {
		say.add(err)
	}
	names, titles := len("name"), len("title")
	for _, c := range list {
		names = max(names, utf8.RuneCountInString(c.Name))
		titles = max(titles, utf8.RuneCountInString(c.Title))
	}
	st := style(s.colour)
	fmt.Fprintf(s.out, "%s  %s  %s  %s\n", st.faint(pad("name", names)), st.faint(pad("title", titles)), st.faint("claims"), st.faint("surfaces"))
	for _, c := range list {
		fmt.Fprintf(s.out, "%s  %s  %6d  %8d\n", st.head(pad(c.Name, names)), pad(c.Title, titles), len(c.Claims), len(c.File.Surfaces))
	}
	if len(failed) > 0 {
		return status(exitBadInput)
	}
	return nil
}

// newFile writes the template; a file that is there already is left alone.
func newFile(path string, s streams) error {
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	switch {
	case errors.Is(err, fs.ErrExist):
		return fmt.Errorf("%s is there already and is left as it is; name a new file", clip(path, 200))
	case err != nil:
		return err
	}
	if _, err = f.Write(library.Template()); err != nil {
		f.Close()
		return err
	}
	if err := f.Close(); err != nil {
		return err
	}
	fmt.Fprintf(s.err, "wrote %s; edit it, then run `creaseproof check %s`\n", path, path)
	return nil
}

package main

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"strconv"
	"time"

	"github.com/spf13/cobra"
)

// The exit statuses.
const (
	exitMet         = 0
	exitNotMet      = 1
	exitBadInput    = 2
	exitInterrupted = 3
)

// status ends a command with an exit status; what there was to say is said.
type status int

func (s status) Error() string { return "exit status " + strconv.Itoa(int(s)) }

// execute runs one command and returns its exit status.
func execute(ctx context.Context, args []string, s streams) int {
	root := newRoot(s)
	root.SetArgs(args)
	root.SetIn(s.in)
	root.SetOut(s.out)
	root.SetErr(s.err)
	cmd, err := root.ExecuteContextC(ctx)
	var code status
	switch {
	case err == nil:
		return exitMet
	case errors.As(err, &code):
		return int(code)
	}
	fmt.Fprintf(s.err, "creaseproof: %s\n", clip(err.Error(), 1000))
	fmt.Fprintf(s.err, "`%s --help` shows how it is called\n", cmd.CommandPath())
	return exitBadInput
}

func newRoot(s streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "creaseproof",
		Short: "Decide claims about entropy fields and integrate crease energies",
		Long: `Creaseproof decides claims about entropy fields (vector fields of a gradient
whose divergence is controlled by an energy density) and integrates the energy
that concentrates on creases. A case is a TOML file of formulas, claims and
surfaces.

A CASE is a file, a folder (all files *.toml in it), the name of a built-in case,
or - for standard input; without one, every built-in case is taken.

Exit status: 0 every expectation met, 1 not so, 2 the input or the call is wrong,
3 interrupted (what was decided is printed).`,
		Example: `  creaseproof cases new mine.toml
  creaseproof check mine.toml`,
		SilenceErrors: true,
		SilenceUsage:  true,
		Run:           func(cmd *cobra.Command, _ []string) { _ = cmd.Help() },
	}
	root.AddCommand(newCheck(s), newEnergy(s), newLimit(s), newAudit(s), newCases(s))
	return root
}

// common are the flags that check and energy share.
type common struct {
	json    bool
	only    []string
	timeout seconds
	jobs    int
}

func (c *common) flags(cmd *cobra.Command, what string) {
	f := cmd.Flags()
	f.BoolVar(&c.json, "json", false, "print one JSON document")
	f.StringArrayVar(&c.only, "only", nil, "only the "+what+" whose `name` is or contains this; may be repeated")
	f.Var(&c.timeout, "timeout", "stop after so many `seconds` (or 90s, 5m); what is not decided is open")
	f.Var(&whole[int]{&c.jobs, 0}, "jobs", "`cores` to use, 0 for all; no result depends on it")
}

// begin limits the cores until end is called.
func (c *common) begin() (end func()) {
	if all := runtime.GOMAXPROCS(0); c.jobs > 0 && c.jobs < all {
		runtime.GOMAXPROCS(c.jobs)
		return func() { runtime.GOMAXPROCS(all) }
	}
	return func() {}
}

// whole is the value of a flag that is a whole number.
type whole[T int | int64 | uint64] struct {
	value *T
	least T
}

func (w *whole[T]) String() string {
	if w.value == nil { // the zero value, which the flag package looks at
		return "0"
	}
	return fmt.Sprint(*w.value)
}

// Type is the kind of value, for the help.
func (w *whole[T]) Type() string { return "number" }

// Set reads a value.
func (w *whole[T]) Set(text string) error {
	n, err := strconv.ParseUint(text, 10, 64)
	switch v := T(n); {
	case errors.Is(err, strconv.ErrRange), err == nil && (v < 0 || uint64(v) != n):
		return errors.New("the number is too large")
	case err != nil || v < w.least:
		return fmt.Errorf("write a whole number, at least %d", w.least)
	default:
		*w.value = v
	}
	return nil
}

// seconds is a time written as a number of seconds or as 90s or 5m.
type seconds time.Duration

func (s *seconds) String() string { return time.Duration(*s).String() }

// Type is the kind of value, for the help.
func (s *seconds) Type() string { return "seconds" }

// Set reads a value.
func (s *seconds) Set(text string) error {
	d, err := time.ParseDuration(text)
	if n, numErr := strconv.ParseFloat(text, 64); numErr == nil {
		if !(n > 0 && n < 1e9) {
			return errors.New("write a positive number of seconds")
		}
		d, err = time.Duration(n*float64(time.Second)), nil
	}
	if err != nil || d <= 0 {
		return errors.New("write a positive number of seconds, or a time such as 90s or 5m")
	}
	*s = seconds(d)
	return nil
}

func clip(s string, n int) string {
	r := []rune(s)
	if len(r) <= n {
		return s
	}
	return string(r[:n]) + "…"
}

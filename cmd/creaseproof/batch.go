package main

import (
	"context"
	"fmt"

	"creaseproof/cases"
	"creaseproof/cases/run"
)

// items are the parts of cases that a command goes through: surfaces or limits.
type items struct {
	one, many       string // "surface", "surfaces"
	result, results string // "energy", "energies"
	only            []string
	count           func(*cases.Case) int // those asked for
}

func (i *items) total(list []*cases.Case) int {
	n := 0
	for _, c := range list {
		n += i.count(c)
	}
	return n
}

// chosen reads the cases. It leaves out those without such an item, unless they
// are named and no item is.
func (i *items) chosen(ctx context.Context, args []string, s streams, say *complaints) (list []*cases.Case, bad int, err error) {
	all, bad, err := load(ctx, args, s.in, say)
	if err != nil {
		return nil, bad, err
	}
	for _, c := range all {
		if i.count(c) > 0 || len(i.only) == 0 && len(args) > 0 {
			list = append(list, c)
		}
	}
	if len(list) == 0 && len(i.only) > 0 && bad == 0 {
		return nil, bad, fmt.Errorf("no %s has a name that contains %q", i.one, i.only)
	}
	return list, bad, nil
}

// outcome is what came of a command.
type outcome interface {
	Faulty() bool
	Met() bool
}

// batch is one run over the items of some cases.
type batch struct {
	items
	request
	s        streams
	say      *complaints
	progress *progress
	evidence *run.Evidence // nil for none
	list     []*cases.Case
}

func newBatch(i items, q request, s streams, say *complaints, list []*cases.Case) *batch {
	b := &batch{items: i, request: q, s: s, say: say, list: list, progress: newProgress(s, i.total(list)), evidence: q.keep()}
	b.progress.inside(i.many, 0, 0)
	return b
}

// report writes what came of one item: as text, and the mistake.
func (b *batch) report(name string, text func(), mistake error) {
	b.progress.report(func() {
		if !b.json {
			text()
		}
		if mistake != nil {
			b.say.add(mistake)
		}
	})
	b.progress.inside(name, 0, 0)
}

// end writes what comes after the last item, and gives the exit status.
func (b *batch) end(o outcome, interrupted bool, doc any, sheet *sheet, summary func()) error {
	b.progress.end()
	if b.json {
		if err := writeJSON(b.s.out, doc); err != nil {
			return err
		}
	} else {
		for _, c := range b.list {
			if b.count(c) == 0 && len(b.only) == 0 {
				sheet.header(c)
				fmt.Fprintf(b.s.out, "  no %s\n", b.many)
			}
		}
		summary()
	}
	lost := b.kept(b.s, b.evidence, b.result, b.results)
	return finish(b.s, interrupted, b.bad > 0 || lost || o.Faulty(), o.Met())
}

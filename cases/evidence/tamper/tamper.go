// Package tamper changes JSON documents in one place at a time, for the tests of
// what reads them.
package tamper

import (
	"encoding/json"
	"fmt"
	"maps"
	"math/big"
	"regexp"
	"slices"
)

// Change is a document with one value changed, added or removed.
type Change struct {
	Path     string // the names and places that lead to the value, with dots
	Old, New any    // nil where there is none
	Text     []byte
}

// Changes are documents that differ from the given one in one value each: numbers
// by parts of 1e-9, 1e-3 and 1, by their sign and by being 0, decimals in strings
// likewise; flags; other strings by a sign more or all signs less; and every value
// is removed once.
func Changes(text []byte) ([]Change, error) {
	var doc any
	if err := json.Unmarshal(text, &doc); err != nil {
		return nil, err
	}
	w := &walker{}
	w.doc = func() ([]byte, error) { return json.Marshal(doc) }
	w.walk(doc, "", func(x any) { doc = x }, nil)
	return w.list, w.err
}

// Put is a document with another value in one place, any place below the top; the
// places are counted round.
func Put(text []byte, place uint, value any) ([]byte, error) {
	var doc any
	if err := json.Unmarshal(text, &doc); err != nil {
		return nil, err
	}
	var places []func()
	var visit func(x any)
	visit = func(x any) {
		switch x := x.(type) {
		case []any:
			for i := range x {
				places = append(places, func() { x[i] = value })
				visit(x[i])
			}
		case map[string]any:
			for _, k := range slices.Sorted(maps.Keys(x)) {
				places = append(places, func() { x[k] = value })
				visit(x[k])
			}
		}
	}
	visit(doc)
	if len(places) > 0 {
		places[place%uint(len(places))]()
	}
	return json.Marshal(doc)
}

type walker struct {
	doc  func() ([]byte, error)
	list []Change
	err  error
}

func (w *walker) take(path string, old, changed any) {
	text, err := w.doc()
	if err != nil {
		w.err = err
	}
	w.list = append(w.list, Change{path, old, changed, text})
}

// walk changes x in every way; put puts a value in the place of x, and drop
// takes x away.
func (w *walker) walk(x any, path string, put func(any), drop func() (restore func())) {
	for _, y := range others(x) {
		put(y)
		w.take(path, x, y)
		put(x)
	}
	if drop != nil {
		restore := drop()
		w.take(path, x, nil)
		restore()
	}
	switch x := x.(type) {
	case []any:
		for i := range x {
			w.walk(x[i], fmt.Sprintf("%s.%d", path, i), func(y any) { x[i] = y }, nil)
		}
		if len(x) > 0 {
			put(x[:len(x)-1])
			w.take(path, x, x[:len(x)-1])
			put(append(slices.Clone(x), x[len(x)-1]))
			w.take(path, x, nil)
			put(x)
		}
	case map[string]any:
		for _, k := range slices.Sorted(maps.Keys(x)) {
			inner := k
			if path != "" {
				inner = path + "." + k
			}
			w.walk(x[k], inner, func(y any) { x[k] = y }, func() func() {
				kept := x[k]
				delete(x, k)
				return func() { x[k] = kept }
			})
		}
	}
}

var decimal = regexp.MustCompile(`^-?[0-9]+(\.[0-9]+)?(e[-+]?[0-9]+)?$`)

func others(x any) (list []any) {
	switch x := x.(type) {
	case bool:
		return []any{!x}
	case float64:
		list = []any{2*x + 1, -x - 2}
		if x != 0 {
			list = append(list, x*(1+1e-9), x*(1-1e-9), x*1.001, -x, 0.0)
		}
	case string:
		list = []any{x + "1", x + " ", ""}
		r, ok := new(big.Rat).SetString(x)
		if !ok {
			return list
		}
		one := big.NewRat(1, 1)
		for _, y := range []*big.Rat{new(big.Rat).Add(r, one), new(big.Rat).Add(r, big.NewRat(1, 1_000_000_007)), new(big.Rat).Neg(r)} {
			if y.Cmp(r) == 0 {
				continue
			}
			if decimal.MatchString(x) {
				list = append(list, y.FloatString(20))
			} else {
				list = append(list, y.RatString())
			}
		}
	}
	return list
}

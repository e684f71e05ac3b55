package creases

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"regexp"
	"slices"
	"strings"
)

// at are the places of values, written as in the file, in the lists of a surface.
func (s *Surface) at(values map[string]string) ([]int, error) {
	if len(values) != len(s.values) {
		return nil, fmt.Errorf("%d values for %d parameters", len(values), len(s.values))
	}
	at := make([]int, len(s.values))
	for k, v := range s.values {
		x, ok := values[v.written]
		at[k] = slices.IndexFunc(v.list, func(f formulaText) bool { return strings.TrimSpace(f.text.S) == x })
		if !ok || at[k] < 0 {
			return nil, fmt.Errorf("the surface is not repeated for %s = %.40q", v.written, x)
		}
	}
	return at, nil
}

// EvaluateAt integrates the surface at one choice of its values, written as in
// the file.
func (s *Surface) EvaluateAt(ctx context.Context, values map[string]string, o Options) (Result, error) {
	at, err := s.at(values)
	if err != nil {
		return Result{}, err
	}
	if err := s.ev.look(ctx); err != nil {
		return Result{}, err
	}
	c, err := s.combine(ctx, at, o)
	if err != nil {
		return Result{}, err
	}
	return c.evaluate()
}

// Follow is a result of EvaluateAt without an enclosure, with the verdict and the
// reason that follow where the energy is in the given one. Whether it is in there
// is for the caller to know.
func (s *Surface) Follow(ctx context.Context, r Result, enclosure []string) (Result, error) {
	at, err := s.at(r.Values)
	if err != nil {
		return r, err
	}
	c, err := s.combine(ctx, at, Options{})
	if err != nil {
		return r, err
	}
	if _, _, err := endpoints(enclosure); err != nil {
		return r, err
	}
	r.Enclosure = slices.Clone(enclosure)
	err = c.judge(&r)
	r.met()
	return r, err
}

// met compares the verdict with what is expected.
func (r *Result) met() { r.Met = r.Verdict == r.Expected }

var decimals = regexp.MustCompile(`^-?[0-9]{1,800}(\.[0-9]{1,800})?(e[-+]?[0-9]{1,3})?$`)

// endpoints are the ends of an enclosure that is written in decimals.
func endpoints(enclosure []string) (lo, hi *big.Rat, err error) {
	if len(enclosure) != 2 {
		return nil, nil, errors.New("an enclosure has two ends")
	}
	var ends [2]*big.Rat
	for i, text := range enclosure {
		if !decimals.MatchString(text) {
			return nil, nil, fmt.Errorf("%.40q is no decimal", text)
		}
		ends[i], _ = new(big.Rat).SetString(text)
	}
	if ends[0].Cmp(ends[1]) > 0 {
		return nil, nil, errors.New("the ends of the enclosure are in the wrong order")
	}
	return ends[0], ends[1], nil
}

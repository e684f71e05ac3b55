package cases

import (
	"math/big"
	"slices"
	"strings"

	"creaseproof/cases/casefile"
	"creaseproof/entropy/formula"
	"creaseproof/identity/claim"
)

// Expectation is what a file expects of a claim: a verdict and, where
// constants are asked for, what they are.
type Expectation struct {
	Verdict  claim.Verdict
	Solution string // as written; "" where any solution will do
}

// Met reports whether a record is as expected.
func (e Expectation) Met(r *claim.Record) bool {
	return r != nil && r.Verdict == e.Verdict && (e.Solution == "" || sameSolution(e.Solution, r.Solution))
}

func (b *builder) expectation(f *casefile.Claim) Expectation {
	e := Expectation{Verdict: claim.Proved}
	if f.Expect == nil {
		return e
	}
	switch v := claim.Verdict(strings.TrimSpace(f.Expect.S)); v {
	case claim.Proved, claim.Refuted, claim.Supported, claim.Open:
		e.Verdict = v
		return e
	}
	asked := folded(f.Solve)
	if f.Best != nil {
		if !boundsOf(f.Expect.S, fold(*f.Best)) {
			b.fault(position(*f.Expect), `write a verdict, or the set of values such as "C = 2", "C >= 1/2" or "-2 <= C <= 2"`, "%q is no verdict and no set of values of %s", Clip(f.Expect.S, 60), fold(*f.Best))
			return e
		}
		e.Solution = strings.TrimSpace(f.Expect.S)
		return e
	}
	for _, part := range strings.Split(f.Expect.S, ",") {
		name, value := solved(part)
		folded, err := formula.FoldName(name)
		switch {
		case err != nil || value == "":
			b.fault(position(*f.Expect), `write a verdict, or a solution such as "c = 4/3", "a = 1, b = 2" or "c free"`, "%q is no verdict and no solution", Clip(f.Expect.S, 60))
			return e
		case !slices.Contains(asked, folded):
			b.fault(position(*f.Expect), "name it in solve or best", "%q is expected to be found, and is not asked for", Clip(name, 60))
			return e
		}
	}
	e.Solution = strings.TrimSpace(f.Expect.S)
	return e
}

// boundsOf reports whether a text says which values of a constant are good.
func boundsOf(s, name string) bool {
	s = spaceless(s)
	ops := 0
	for _, op := range []string{"<=", ">="} {
		ops += strings.Count(s, op)
		s = strings.ReplaceAll(s, op, "=")
	}
	fields := strings.Split(s, "=")
	named := 0
	for _, f := range fields {
		if folded, err := formula.FoldName(f); err == nil && folded == name {
			named++
		} else if _, ok := new(big.Rat).SetString(f); !ok {
			return false
		}
	}
	return named == 1 && (len(fields) == 2 && fields[0] != "" || len(fields) == 3 && ops == 2)
}

// sameSolution compares solutions such as "a = 1, b = 3/2": the order, white
// space, Greek spellings and the spelling of a rational number do not count.
func sameSolution(a, b string) bool {
	if strings.ContainsAny(a, "<>") || strings.ContainsAny(b, "<>") {
		return spaceless(a) == spaceless(b)
	}
	x, y := parts(a), parts(b)
	return len(x) > 0 && slices.Equal(x, y)
}

// free is the value of a constant that a solution leaves free. No value that
// is written has a space in it.
const free = " free"

// solved reads one part of a solution, "c = 4/3" or "c free": the name as it is
// written and its value without white space, "" where there is none.
func solved(part string) (name, value string) {
	if name, ok := strings.CutSuffix(strings.TrimSpace(part), free); ok && !strings.Contains(part, "=") {
		return spaceless(name), free
	}
	name, value, _ = strings.Cut(spaceless(part), "=")
	return name, value
}

func parts(s string) []string {
	var list []string
	for _, p := range strings.Split(s, ",") {
		name, value := solved(p)
		if folded, err := formula.FoldName(name); err == nil {
			name = folded
		}
		if len(value) < 1000 && !strings.ContainsAny(value, "eE") {
			if r, isRat := new(big.Rat).SetString(value); isRat {
				value = r.RatString()
			}
		}
		list = append(list, name+"="+value)
	}
	slices.Sort(list)
	return list
}

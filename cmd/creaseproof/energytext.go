package main

import (
	"fmt"
	"math"
	"strings"
	"unicode/utf8"

	"creaseproof/cases"
	"creaseproof/cases/casefile"
	"creaseproof/cases/creases"
	"creaseproof/cases/run"
	"creaseproof/identity"
)

// energyText writes the results of energy for people to read.
type energyText struct {
	sheet
	opt    *run.EnergyOptions
	names  int // columns of the names in the current case
	values int // columns of the values

	together bool // a refusal on standard error stands right below
}

// measure finds the widths of the columns of a case.
func (t *energyText) measure(c *cases.Case) {
	t.names, t.values = 0, 0
	for i := range c.File.Surfaces {
		s := &c.File.Surfaces[i]
		if !t.opt.Selected(s.Name) {
			continue
		}
		t.names = max(t.names, min(utf8.RuneCountInString(s.Name), mostName))
		n := 0
		for i, v := range s.Values {
			long := 0
			for _, x := range v.List {
				long = max(long, utf8.RuneCountInString(strings.TrimSpace(x.S)))
			}
			if i > 0 {
				n += len(", ")
			}
			n += utf8.RuneCountInString(v.Name.S) + len(" = ") + long
		}
		t.values = max(t.values, min(n, mostName))
	}
}

func (t *energyText) result(r *run.EnergyResult) {
	if r.Case != t.current {
		t.header(r.Case)
		t.measure(r.Case)
	}
	if r.Err != nil && len(r.Values) == 0 {
		t.nothing(r.Surface.Name, t.names, "not read, see the error")
	}
	refused := r.Err != nil && t.together
	for i := range r.Values {
		v := r.Values[i]
		if refused && v.Energy == nil && !v.Met {
			v.Reason, refused = "", false
		}
		t.value(r.Surface, &v)
	}
}

// value writes the energy of a surface for one choice of its parameters.
func (t *energyText) value(s *casefile.Surface, v *creases.Result) {
	verdict := t.style.verdict(v.Verdict, pad(string(v.Verdict), 9))
	if v.Verdict == "" {
		verdict = pad("-", 9)
	}
	line := fmt.Sprintf("  %s  %s  %s", t.mark(v.Met), verdict, pad(v.Surface, t.names))
	if t.values > 0 {
		line += "  " + pad(values(s, v), t.values)
	}
	if v.Energy != nil {
		line += fmt.Sprintf("  %-18.15g", *v.Energy)
		if v.Error != nil {
			line += fmt.Sprintf(" ± %-7.1e", *v.Error)
		}
		line += "  " + t.style.faint(strings.Join(t.beside(v), ", "))
	}
	fmt.Fprintln(t.w, strings.TrimRight(line, " "))
	t.pairs(v)
	if v.Reason != "" {
		t.note("", v.Reason)
	}
	if v.Enclosure != nil && v.Claimed == nil {
		t.note("", "the energy lies in ["+strings.Join(v.Enclosure, ", ")+"]")
	}
	if !v.Met && v.Expected != "" {
		t.lines(t.style.alarm, "expected "+string(v.Expected))
	}
}

// beside is what is known of a value beside the energy and its error.
func (t *energyText) beside(v *creases.Result) []string {
	var list []string
	if v.Claimed != nil {
		claimed := fmt.Sprintf("%.15g", *v.Claimed)
		if claimed == fmt.Sprintf("%.15g", *v.Energy) {
			list = append(list, "as claimed")
		} else {
			list = append(list, "claimed "+claimed)
		}
	}
	if v.Slices != nil {
		if d := math.Abs(*v.Slices - *v.Energy); d == 0 {
			list = append(list, "slices agree")
		} else {
			list = append(list, fmt.Sprintf("slices differ by %.0e", d))
		}
	}
	if v.Area != nil {
		area := "area"
		if len(t.current.Setting.Coordinates) == 2 {
			area = "length"
		}
		list = append(list, fmt.Sprintf("%s %.5g", area, *v.Area))
	}
	if v.Mesh != nil {
		list = append(list, count(v.Mesh.Triangles, "triangle", "triangles"))
	}
	if v.Defect != nil {
		list = append(list, fmt.Sprintf("defect %.1e", *v.Defect))
	}
	if v.Exact != "" && v.Evaluations == 0 {
		return append(list, "exactly "+v.Exact)
	}
	return append(list, count(v.Evaluations, "evaluation", "evaluations"))
}

// mostPairs bounds the pairs of branches that are listed, and mostSheets the
// sheets of each, or of a level set.
const (
	mostPairs  = 8
	mostSheets = 8
)

// pairs are the shares of the pairs of branches, where there are several, and
// of the curved sheets of each, or of a level set, where there are several.
func (t *energyText) pairs(v *creases.Result) {
	t.sheets(v, "", v.Sheets, v.Unsettled)
	for i, p := range v.Pairs {
		if i == mostPairs {
			t.note("", fmt.Sprintf("and %d more pairs", len(v.Pairs)-i))
			return
		}
		inner := ""
		if len(v.Pairs) > 1 {
			inner = "  "
			energy := p.Exact
			if energy == "" {
				energy = fmt.Sprintf("%.15g ± %.1e", p.Energy, p.Error)
			}
			t.note("", fmt.Sprintf("branches %d and %d: %s", p.Branches[0], p.Branches[1], energy))
		}
		t.sheets(v, inner, p.Sheets, p.Unsettled)
	}
}

// sheets lists curved sheets. That there is one alone is not said.
func (t *energyText) sheets(v *creases.Result, inner string, list []creases.Sheet, unsettled bool) {
	line := func(format string, args ...any) { fmt.Fprintf(t.w, indent+inner+format+"\n", args...) }
	if unsettled {
		why := ""
		if v.Resolution != nil {
			why = fmt.Sprintf(": boxes of diameter up to %.1e are undecided", *v.Resolution)
		}
		line("the number of sheets is not settled%s", why)
	}
	if len(list) < 2 || list[0].Point == nil {
		return
	}
	area := "area"
	if len(t.current.Setting.Coordinates) == 2 {
		area = "length"
	}
	for i, s := range list {
		if i == mostSheets {
			line("and %d more sheets", len(list)-i)
			return
		}
		var at []string
		for _, x := range s.Point {
			at = append(at, fmt.Sprintf("%.4g", x))
		}
		line("sheet through (%s): %.12g ± %.1e, %s %.5g", strings.Join(at, ", "), s.Energy, s.Error, area, s.Area)
	}
}

// values are the parameters, in the order of the file.
func values(s *casefile.Surface, v *creases.Result) string {
	var parts []string
	for _, p := range s.Values {
		if x, ok := v.Values[p.Name.S]; ok {
			parts = append(parts, p.Name.S+" = "+x)
		}
	}
	return strings.Join(parts, ", ")
}

// summary writes the last line.
func (t *energyText) summary(out *run.EnergyOutcome, surfaces, unread int) {
	if surfaces == 0 {
		return
	}
	total, met, faulty := 0, 0, 0
	counts := map[identity.Verdict]int{}
	for _, r := range out.Results {
		for _, v := range r.Values {
			total++
			counts[v.Verdict]++
			if v.Met {
				met++
			}
		}
		if r.Unread() {
			faulty++
		}
	}
	var parts []string
	for _, v := range verdicts {
		if n := counts[v]; n > 0 {
			parts = append(parts, t.style.verdict(v, fmt.Sprintf("%d %s", n, v)))
		}
	}
	if n := counts[""]; n > 0 {
		parts = append(parts, fmt.Sprintf("%d without a claim", n))
	}
	if faulty > 0 {
		parts = append(parts, fmt.Sprintf("%s not read", count(faulty, "surface", "surfaces")))
	}
	if n := surfaces - len(out.Results); n > 0 {
		parts = append(parts, fmt.Sprintf("%s not reached", count(n, "surface", "surfaces")))
	}
	t.last(fmt.Sprintf("%s of %s", count(total, "energy", "energies"), count(surfaces, "surface", "surfaces")), parts, tally{met, total - met, unread, faulty > 0 || out.Interrupted})
}

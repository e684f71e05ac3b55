package main

import (
	"fmt"
	"math"
	"strings"

	"creaseproof/cases/casefile"
	"creaseproof/cases/limits"
	"creaseproof/cases/run"
)

// limitText writes the results of limit for people to read.
type limitText struct{ sheet }

// outcomes in the order in which they are counted.
var outcomes = []string{limits.Sharp, limits.Above, limits.Below, limits.Infinite, limits.Undecided}

func (t *limitText) result(r *run.LimitResult) {
	if r.Case != t.current {
		t.header(r.Case)
	}
	if r.Err != nil && len(r.Values) == 0 {
		t.nothing(r.Limit.Name, 0, "not read, see the error")
	}
	for i := range r.Values {
		t.value(r.Limit, &r.Values[i])
	}
}

// value writes a table of the energies at one choice of the parameters.
func (t *limitText) value(l *casefile.Limit, v *limits.Value) {
	outcome := pad(v.Outcome, 9)
	if !v.Met {
		outcome = t.style.alarm(outcome)
	}
	line := fmt.Sprintf("  %s  %s  %s", t.mark(v.Met), outcome, v.Approximation)
	var with []string
	for _, p := range l.Values {
		if x, ok := v.Values[p.Name.S]; ok {
			with = append(with, p.Name.S+" = "+x)
		}
	}
	if len(with) > 0 {
		line += "  " + strings.Join(with, ", ")
	}
	fmt.Fprintln(t.w, line+"  "+t.style.faint("("+v.Kind+")"))
	const row = "       %-11s %-17s %-12s %-12s %-11s %s\n"
	if len(v.Eps) > 0 {
		fmt.Fprint(t.w, t.style.faint(fmt.Sprintf(row, "eps", "energy", "compression", "bending", "curvature", "gap")))
	}
	for i, e := range v.Eps {
		gap := "-"
		if v.Target != nil {
			g := v.Energy[i] - *v.Target
			gap = fmt.Sprintf("%+.3e", g)
			if math.Abs(g) <= v.Error[i]+*v.TargetError+1e-14*math.Abs(*v.Target) {
				gap = "below rounding"
			}
		}
		fmt.Fprintf(t.w, row, fmt.Sprintf("%.6g", e), fmt.Sprintf("%.12g", v.Energy[i]), fmt.Sprintf("%.8g", v.Compression[i]),
			fmt.Sprintf("%.8g", v.Bending[i]), fmt.Sprintf("%.3g", v.Curvature[i]), gap)
	}
	for _, s := range t.beside(v) {
		fmt.Fprintln(t.w, "       "+s)
	}
	if v.Reason != "" {
		t.note("", v.Reason)
	}
	if !v.Met {
		t.lines(t.style.alarm, "expected "+v.Expected)
	}
}

// beside is what is said below the table.
func (t *limitText) beside(v *limits.Value) (list []string) {
	if v.Target != nil {
		how := "integrated over the jumps"
		if v.TargetClaimed {
			how = "taken from the claim"
		}
		list = append(list, fmt.Sprintf("jump energy %.15g, %s", *v.Target, how))
	}
	var parts []string
	switch {
	case v.BelowRounding:
		parts = append(parts, "gap below rounding")
	case v.RelativeGap != nil:
		parts = append(parts, fmt.Sprintf("relative gap %.3g", *v.RelativeGap))
	}
	if v.Rate != nil {
		s := fmt.Sprintf("rate %.4g", *v.Rate)
		if v.RateError != nil {
			s += fmt.Sprintf(" ± %.2g", *v.RateError)
		}
		parts = append(parts, s)
	} else if !v.BelowRounding && v.Exponential() {
		parts = append(parts, "falling faster than any power of eps")
	}
	if v.Limit != nil && !v.BelowRounding {
		parts = append(parts, fmt.Sprintf("limit %.10g ± %.1g", *v.Limit, *v.LimitError))
	}
	if v.Equipartition != nil {
		parts = append(parts, fmt.Sprintf("compression/bending %.7g", *v.Equipartition))
	}
	if v.Evaluations > 0 {
		parts = append(parts, count(v.Evaluations, "evaluation", "evaluations"))
	}
	if len(parts) > 0 {
		list = append(list, strings.Join(parts, ", "))
	}
	return list
}

// summary writes the last line.
func (t *limitText) summary(out *run.LimitOutcome, limits, unread int) {
	if limits == 0 {
		return
	}
	total, met, faulty := 0, 0, 0
	counts := map[string]int{}
	for _, r := range out.Results {
		for _, v := range r.Values {
			total++
			counts[v.Outcome]++
			if v.Met {
				met++
			}
		}
		if r.Err != nil {
			faulty++
		}
	}
	var parts []string
	for _, o := range outcomes {
		if n := counts[o]; n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", n, o))
		}
	}
	if faulty > 0 {
		parts = append(parts, fmt.Sprintf("%s not read", count(faulty, "limit", "limits")))
	}
	if n := limits - len(out.Results); n > 0 {
		parts = append(parts, fmt.Sprintf("%s not reached", count(n, "limit", "limits")))
	}
	t.last(count(total, "approximation", "approximations"), parts, tally{met, total - met, unread, faulty > 0 || out.Interrupted})
}

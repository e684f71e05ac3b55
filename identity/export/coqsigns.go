package export

import (
	"fmt"
	"slices"
	"strings"
)

// signs writes proofs that sums of products have a sign.
type signs struct {
	at       places
	positive []premise
	known    []string // the names of the premises n > 0 or n >= 0
}

// one prints a product; each part of it is a factor that is not 1.
func (s *signs) one(t product) string {
	var parts []string
	if t.weight.Num().String() != "1" || !t.weight.IsInt() || len(t.factors) == 0 && t.base == nil {
		parts = append(parts, coqNumber(t.weight))
	}
	for _, f := range t.factors {
		parts = append(parts, s.at.factor(s.positive[f].n))
	}
	if t.base != nil {
		parts = append(parts, s.at.factor(t.base)+"^2")
	}
	return strings.Join(parts, " * ")
}

// sum prints a sum of products.
func (s *signs) sum(list []product) string {
	if len(list) == 0 {
		return "0"
	}
	parts := make([]string, len(list))
	for i, t := range list {
		parts[i] = s.one(t)
	}
	return strings.Join(parts, " + ")
}

// prove is a tactic for 0 <= product, or 0 < product where strict is asked.
func (s *signs) prove(t product, strict bool) string {
	var parts []string
	if t.weight.Num().String() != "1" || !t.weight.IsInt() || len(t.factors) == 0 && t.base == nil {
		parts = append(parts, "lra")
	}
	for _, f := range t.factors {
		if !strict && s.positive[f].strict {
			parts = append(parts, "apply Rlt_le; exact "+s.known[f])
		} else {
			parts = append(parts, "exact "+s.known[f])
		}
	}
	if t.base != nil {
		parts = append(parts, "apply square_nonneg")
	}
	lemma := "product_nonneg"
	if strict {
		lemma = "product_pos"
	}
	out := parts[0]
	for _, p := range parts[1:] {
		out = fmt.Sprintf("apply %s; [%s | %s]", lemma, out, p)
	}
	return out
}

// nonneg writes the proof of 0 <= sum; lead stands before it, and indent
// before later lines. Sums are split where they are printed, from the end, and
// not by a search: numbers are sums as well once they are unfolded, and so are
// assumptions that stand alone.
func (s *signs) nonneg(d *document, lead, indent string, list []product) {
	if len(list) == 0 {
		d.printf("%sapply Rle_refl.\n", lead)
		return
	}
	for _, t := range slices.Backward(list[1:]) {
		d.printf("%sapply sum_nonneg; [| %s].\n", lead, s.prove(t, false))
		lead = indent
	}
	d.printf("%s%s.\n", lead, s.prove(list[0], false))
}

// pos is a tactic for 0 < sum whose term k is strictly positive.
func (s *signs) pos(list []product, k int) string {
	n := len(list) - 1
	switch {
	case n == 0:
		return s.prove(list[0], true)
	case k == n:
		var rest []string
		for _, t := range list[:n] {
			rest = append(rest, s.prove(t, false))
		}
		return fmt.Sprintf("apply sum_pos_right; [%s | %s]", nested(rest), s.prove(list[n], true))
	}
	return fmt.Sprintf("apply sum_pos_left; [%s | %s]", s.pos(list[:n], k), s.prove(list[n], false))
}

// nested proves 0 <= ((a + b) + c) + … from proofs of its terms.
func nested(proofs []string) string {
	out := proofs[0]
	for _, p := range proofs[1:] {
		out = fmt.Sprintf("apply sum_nonneg; [%s | %s]", out, p)
	}
	return out
}

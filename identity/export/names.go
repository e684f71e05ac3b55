package export

import (
	"fmt"
	"maps"
	"regexp"
	"strings"
)

// reserved are the words that a bound variable must not be: keywords, what the
// statements use, and the names of the fixed lemmas.
var reserved = words(`as at cofix do else end exists exists2 fix for forall fun if IF in let match mod
	return then using where with by is of proof qed admit Prop Set Type SProp
	R Z N Q nat positive list bool option unit pow Rplus Rmult Rminus Ropp Rinv Rdiv Rle Rlt Rge Rgt IZR INR
	Theorem Lemma Fact Remark Corollary Proposition Definition Example Let Fixpoint CoFixpoint Inductive CoInductive
	Record Structure Class Instance Section Module Import Export Include End Variable Variables Context Proof Qed
	Defined Goal Require From Open Close Scope Notation Infix Ltac Tactic Print Check Search Compute Eval Set Unset
	Show Time Fail Canonical Coercion Existing Existential Local Global Polymorphic Monomorphic Private Program
	True False and or not eq ex le lt nil cons`)

// unfinished are words that leave a proof open or assume something; they stand
// nowhere in a file, not even in a comment.
var unfinished = regexp.MustCompile(`(?i)(admit|axiom|parameter|hypothes|abort|conjecture|give_up)`)

func words(s string) map[string]bool {
	out := map[string]bool{}
	for _, w := range strings.Fields(s) {
		out[w] = true
	}
	return out
}

var declaration = regexp.MustCompile(`(?m)^(?:Lemma|Definition|Fixpoint|Ltac) ([A-Za-z_0-9]+)`)

// namer hands out identifiers, each once.
type namer struct {
	used  map[string]bool
	fixed map[string]bool // not changed once made
}

func newNamer() *namer {
	n := &namer{used: map[string]bool{}, fixed: map[string]bool{}}
	for w := range reserved {
		n.fixed[w] = true
	}
	for _, text := range []string{signsText, continuityText, fractionsText} {
		for _, m := range declaration.FindAllStringSubmatch(text, -1) {
			n.fixed[m[1]] = true
		}
	}
	return n
}

// sub is a namer for names bound inside a theorem.
func (n *namer) sub() *namer { return &namer{used: maps.Clone(n.used), fixed: n.fixed} }

// name makes an identifier of s that is like s and not yet in use.
func (n *namer) name(s string) string {
	id := identifier(s)
	if unfinished.MatchString(id) {
		id = unfinished.ReplaceAllStringFunc(id, func(w string) string { return w[:1] + "_" + w[1:] })
	}
	out := id
	if n.fixed[out] {
		out += "'"
	}
	for i := 2; n.used[out]; i++ {
		out = fmt.Sprintf("%s_%d", id, i)
	}
	n.used[out] = true
	return out
}

var spelled = strings.NewReplacer("(+)", "_plus", "(-)", "_minus", "^", "_pow_", "'", "_prime", "+", "_plus_", "*", "_", "/", "_over_", "-", "_minus_")

// identifier spells s with letters, digits and underscores.
func identifier(s string) string {
	prefix := ""
	if len(s) > 2 {
		switch {
		case s[0] == '[' && s[len(s)-1] == ']':
			prefix, s = "jump_", s[1:len(s)-1]
		case s[0] == '{' && s[len(s)-1] == '}':
			prefix, s = "mean_", s[1:len(s)-1]
		}
	}
	s = spelled.Replace(s)
	var b strings.Builder
	b.WriteString(prefix)
	gap := false
	for _, r := range s {
		ok := r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9'
		if !ok && r > 127 {
			if w, known := greekLetters[r]; known {
				b.WriteString(w)
				continue
			}
		}
		if !ok {
			gap = true
			continue
		}
		if gap && b.Len() > 0 && !strings.HasSuffix(b.String(), "_") {
			b.WriteByte('_')
		}
		gap = false
		b.WriteRune(r)
	}
	out := b.String()
	if out == "" || out[0] >= '0' && out[0] <= '9' {
		out = "v" + out
	}
	if len(out) > 60 {
		out = out[:60]
	}
	return strings.TrimRight(out, "_")
}

// comment makes text safe within a comment of Coq.
func comment(s string) string {
	s = strings.Map(func(r rune) rune {
		switch {
		case r == '"':
			return '\''
		case r == '\n' || r == '\t':
			return ' '
		case r < 32 || r == 127:
			return -1
		}
		return r
	}, strings.ToValidUTF8(s, "?"))
	s = strings.ReplaceAll(s, "(*", "( *")
	s = strings.ReplaceAll(s, "*)", "* )")
	return unfinished.ReplaceAllStringFunc(s, func(w string) string { return w[:1] + "-" + w[1:] })
}

package export

import (
	"strings"
	"unicode"
)

// greek are the names of Greek letters, longer names before their beginnings.
var greek = []string{
	"varepsilon", "epsilon", "upsilon", "lambda", "alpha", "gamma", "delta", "theta", "kappa", "sigma", "omega",
	"beta", "zeta", "iota", "eps", "eta", "rho", "tau", "phi", "chi", "psi", "mu", "nu", "xi", "pi",
	"Gamma", "Delta", "Theta", "Lambda", "Sigma", "Upsilon", "Omega", "Phi", "Psi", "Xi", "Pi",
}

// greekLetters spells letters that may stand in names.
var greekLetters = map[rune]string{
	'α': "alpha", 'β': "beta", 'γ': "gamma", 'δ': "delta", 'ε': "eps", 'ζ': "zeta", 'η': "eta", 'θ': "theta",
	'ι': "iota", 'κ': "kappa", 'λ': "lambda", 'μ': "mu", 'ν': "nu", 'ξ': "xi", 'π': "pi", 'ρ': "rho", 'σ': "sigma",
	'τ': "tau", 'υ': "upsilon", 'φ': "phi", 'χ': "chi", 'ψ': "psi", 'ω': "omega", 'Γ': "Gamma", 'Δ': "Delta",
	'Θ': "Theta", 'Λ': "Lambda", 'Ξ': "Xi", 'Π': "Pi", 'Σ': "Sigma", 'Φ': "Phi", 'Ψ': "Psi", 'Ω': "Omega",
}

var texFunctions = words("cos sin tan exp log sinh cosh tanh")

// TeXName typesets the name of a variable: u_xixi, eps, cos(theta), [u_x],
// {u_x}, u_x(+), sqrt(u_x^2 + 1).
func TeXName(name string) string {
	t := &texReader{s: []rune(name)}
	return strings.TrimSpace(t.all(0))
}

type texReader struct {
	s []rune
	i int
}

func (t *texReader) all(closing rune) string {
	var b strings.Builder
	for t.i < len(t.s) {
		r := t.s[t.i]
		if r == closing {
			t.i++
			break
		}
		b.WriteString(t.next(r))
	}
	return b.String()
}

func (t *texReader) next(r rune) string {
	switch {
	case unicode.IsLetter(r):
		return t.word()
	case strings.HasPrefix(string(t.s[t.i:]), "(+)"), strings.HasPrefix(string(t.s[t.i:]), "(-)"):
		sign := string(t.s[t.i+1])
		t.i += 3
		return "^{" + sign + "}"
	}
	t.i++
	switch r {
	case '(':
		return "(" + t.all(')') + ")"
	case '[':
		return "[" + t.all(']') + "]"
	case '{':
		return `\{` + t.all('}') + `\}`
	case '*', ' ':
		return " "
	case '^':
		return "^{" + t.exponent() + "}"
	case '_':
		return `\_`
	case '#', '$', '%', '&':
		return `\` + string(r)
	case '\\':
		return `\backslash `
	case '~':
		return `\sim `
	}
	if unicode.IsControl(r) {
		return ""
	}
	return string(r)
}

// exponent reads what stands after ^: a number, or something in brackets.
func (t *texReader) exponent() string {
	if t.i >= len(t.s) {
		return ""
	}
	switch t.s[t.i] {
	case '(':
		t.i++
		return t.all(')')
	case '{':
		t.i++
		return t.all('}')
	}
	start := t.i
	if t.s[t.i] == '-' {
		t.i++
	}
	for t.i < len(t.s) && unicode.IsDigit(t.s[t.i]) {
		t.i++
	}
	return string(t.s[start:t.i])
}

// word reads a name, with its subscript or the argument of a function.
func (t *texReader) word() string {
	w := t.letters()
	if t.i < len(t.s) && t.s[t.i] == '(' && !strings.HasPrefix(string(t.s[t.i:]), "(+)") && !strings.HasPrefix(string(t.s[t.i:]), "(-)") {
		switch {
		case w == "sqrt":
			t.i++
			return `\sqrt{` + t.all(')') + "}"
		case texFunctions[w]:
			t.i++
			arg := t.all(')')
			if single(arg) {
				return `\` + w + " " + arg
			}
			return `\` + w + "(" + arg + ")"
		}
	}
	out := texWord(w)
	var index []string
	for t.i+1 < len(t.s) && t.s[t.i] == '_' {
		t.i++
		sub := ""
		if t.s[t.i] == '{' {
			t.i++
			sub = t.all('}')
		} else {
			sub = letters(t.letters())
		}
		index = append(index, strings.TrimSpace(sub))
	}
	if index != nil {
		out += "_{" + strings.Join(index, ",") + "}"
	}
	return out
}

// letters reads letters and digits.
func (t *texReader) letters() string {
	start := t.i
	for t.i < len(t.s) && (unicode.IsLetter(t.s[t.i]) || unicode.IsDigit(t.s[t.i])) {
		t.i++
	}
	return string(t.s[start:t.i])
}

// single reports one letter or one command.
func single(tex string) bool {
	s := strings.TrimSpace(tex)
	if rest, ok := strings.CutPrefix(s, `\`); ok {
		return strings.IndexFunc(rest, func(r rune) bool { return !unicode.IsLetter(r) }) < 0
	}
	return len([]rune(s)) == 1
}

// texWord typesets a whole name: a Greek letter, with digits as its index, or
// letters.
func texWord(w string) string {
	stem := strings.TrimRightFunc(w, unicode.IsDigit)
	index := w[len(stem):]
	out := ""
	switch {
	case single(letters(stem)):
		out = strings.TrimSpace(letters(stem))
	case len([]rune(stem)) > 1:
		out = `\mathit{` + stem + "}"
	default:
		out = stem
	}
	if index != "" && stem != "" {
		return out + "_{" + index + "}"
	}
	return out + index
}

// letters typesets a run of letters, Greek names among them: xieta is ξη.
func letters(w string) string {
	var b strings.Builder
next:
	for i, n := 0, len(w); i < n; {
		for _, g := range greek {
			if strings.HasPrefix(w[i:], g) {
				if g == "eps" || g == "epsilon" {
					g = "varepsilon"
					i += len("eps")
					i += len(w[i:]) - len(strings.TrimPrefix(w[i:], "ilon"))
				} else {
					i += len(g)
				}
				b.WriteString(`\` + g + " ")
				continue next
			}
		}
		r := []rune(w[i:])[0]
		if name, ok := greekLetters[r]; ok {
			if name == "eps" {
				name = "varepsilon"
			}
			b.WriteString(`\` + name + " ")
		} else {
			b.WriteRune(r)
		}
		i += len(string(r))
	}
	return strings.TrimSuffix(b.String(), " ")
}

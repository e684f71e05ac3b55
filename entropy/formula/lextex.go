package formula

import (
	"fmt"
	"slices"
	"strings"
)

// command makes a token of a TeX command.
func (l *lexer) command(t *token) {
	at := l.n
	l.skip()
	word := texWord(l.src.S[l.i:])
	if word == "" {
		l.escaped(t, at)
		return
	}
	for range len(word) {
		l.skip()
	}
	if name, ok := greekCommand(word); ok {
		t.kind, t.text, t.tex = kIdent, name, true
		return
	}
	switch word {
	case "sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "sup":
		t.kind, t.text = kIdent, word
	case "frac", "tfrac", "dfrac":
		t.kind = kFrac
	case "sqrt":
		t.kind = kSqrt
	case "cdot":
		t.kind = kDot
	case "times", "ast":
		t.kind = '*'
	case "le", "leq", "leqslant":
		t.kind = kLE
	case "ge", "geq", "geqslant":
		t.kind = kGE
	case "lt", "gt", "ne", "neq":
		t.kind, t.text = kStrict, `\`+word
	case "in":
		t.kind = kIn
	case "lbrace":
		t.kind = kOpen
	case "rbrace":
		t.kind = kClose
	case "lbrack":
		t.kind = '['
	case "rbrack":
		t.kind = ']'
	case "vert", "lvert", "rvert", "Vert", "lVert", "rVert", "mid":
		t.kind = '|'
	case "mathrm", "mathit", "mathsf", "mathbf", "mathup", "text", "textrm", "operatorname", "boldsymbol":
		l.wrapped(t, at, word)
	case "left", "right", "bigl", "bigr", "Bigl", "Bigr", "biggl", "biggr", "big", "Big", "bigg", "middle":
		l.delimiter(t, at, word)
	default:
		l.unknownCommand(at, word)
	}
}

// escaped makes a token of a backslash before something other than a letter.
func (l *lexer) escaped(t *token, at int) {
	switch l.rune() {
	case '{':
		l.skip()
		t.kind = kOpen
	case '}':
		l.skip()
		t.kind = kClose
	case '|':
		l.skip()
		t.kind = '|'
	case '\\':
		l.fail(at, "two backslashes", "in a single-quoted TOML string write one")
	default:
		l.fail(at, "a backslash that begins no command", "leave it out")
	}
}

// delimiter makes a token of the bracket after \left and its like.
func (l *lexer) delimiter(t *token, at int, word string) {
	l.spaces()
	if l.i < len(l.src.S) && strings.ContainsRune(`()[]{}|\`, l.rune()) {
		l.scan(t)
		switch t.kind {
		case '(', ')', '[', ']', kOpen, kClose, '|':
			return
		}
	}
	l.fail(at, fmt.Sprintf(`\%s stands before a bracket`, word), fmt.Sprintf(`write \%s( or leave \%s out`, word, word))
}

// wrapped makes a name of \mathit{name} and its like.
func (l *lexer) wrapped(t *token, at int, word string) {
	refuse := func() {
		l.fail(at, fmt.Sprintf(`\%s{...} holds one name`, word), "write the name alone")
	}
	l.spaces()
	if l.rune() != '{' {
		refuse()
		return
	}
	l.skip()
	l.spaces()
	switch r := l.rune(); {
	case isNameRune(r) && !isDigit(r):
		name, _ := foldRun(l.run(isNameRune))
		l.name(t, name)
	case r == '\\':
		l.skip()
		inner := texWord(l.src.S[l.i:])
		name, ok := greekCommand(inner)
		if !ok {
			refuse()
			return
		}
		for range len(inner) {
			l.skip()
		}
		t.kind, t.text = kIdent, name
	default:
		refuse()
		return
	}
	t.tex = true
	l.spaces()
	if l.rune() != '}' {
		refuse()
		return
	}
	l.skip()
}

func (l *lexer) unknownCommand(at int, word string) {
	advice := ""
	switch word {
	case "ln":
		advice = `write "log(x)"`
	case "partial":
		advice = `write "u_x" for a derivative of u, "d_x(f)" for that of a formula`
	case "nabla":
		advice = `write "grad(f)" or "div(F)"`
	case "cfrac", "over":
		advice = `write \frac{a}{b}`
	case "infty":
		advice = "infinity is no number here"
	case "rm", "it", "bf":
		advice = "leave it out"
	default:
		// A letter run on to a command, as in \xix.
		for n := min(len(word)-1, len("varepsilon")); n > 1; n-- {
			if _, ok := greekCommand(word[:n]); ok {
				advice = fmt.Sprintf(`write "\%s %s"`, word[:n], clip(word[n:]))
				break
			}
		}
		if advice == "" {
			if near := nearest(word, texCommands); near != "" {
				advice = fmt.Sprintf(`write "\%s"`, near)
			} else if IsFunction(word) || l.scope.kinds[word] != Undeclared {
				advice = fmt.Sprintf("write %q without the backslash", word)
			}
		}
	}
	l.fail(at, fmt.Sprintf(`unknown command \%s`, clip(word)), advice)
}

var texCommands = slices.Concat(slices.Compact(slices.Clone(lowerGreek)), []string{
	"epsilon", "varepsilon", "sin", "cos", "tan", "sinh", "cosh", "tanh", "exp", "log", "frac", "sqrt",
	"cdot", "times", "left", "right", "Sigma", "Xi", "Theta", "Lambda", "Gamma", "Delta", "Phi", "Psi", "Omega",
})

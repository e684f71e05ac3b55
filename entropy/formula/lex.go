package formula

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"

	"creaseproof/entropy/source"
)

// kind is a token's sign where that is one rune, or one of the following.
type kind rune

const (
	kEOF    kind = -(iota + 1)
	kNum         // text is the literal
	kIdent       // text is the folded name
	kSuper       // superscript digits; text is the ASCII exponent
	kFrac        // \frac
	kSqrt        // \sqrt
	kRoot        // √
	kLE          // <=
	kGE          // >=
	kStrict      // <, >, ==, !=: text is the sign
	kOpen        // \{
	kClose       // \}
	kIn          // in, ∈, \in
	kPower       // **
	kDot    = kind('·')
)

type token struct {
	kind  kind
	space bool  // white space stands before it
	tex   bool  // a name spelled as a TeX command
	from  int32 // first byte
	to    int32 // past the last byte
	at    int32 // first rune
	text  string
}

// lexer makes tokens on demand. After an error every token is kEOF.
type lexer struct {
	src   source.Text
	scope *Scope
	i     int // byte offset
	n     int // rune offset
	err   *source.Error
}

// fail records the first error, at a rune offset.
func (l *lexer) fail(at int, problem, advice string) {
	if l.err == nil {
		l.err = source.NewError(l.src, at, problem, advice)
	}
}

// rune is the next rune, 0 at the end.
func (l *lexer) rune() rune {
	if l.i >= len(l.src.S) {
		return 0
	}
	if c := l.src.S[l.i]; c < utf8.RuneSelf {
		return rune(c)
	}
	r, _ := utf8.DecodeRuneInString(l.src.S[l.i:])
	return r
}

func (l *lexer) skip() {
	_, size := utf8.DecodeRuneInString(l.src.S[l.i:])
	l.i += size
	l.n++
}

// run skips runes while ok holds, and returns them.
func (l *lexer) run(ok func(rune) bool) string {
	start := l.i
	for l.i < len(l.src.S) && ok(l.rune()) {
		l.skip()
	}
	return l.src.S[start:l.i]
}

// spaces skips white space, in its TeX spellings too.
func (l *lexer) spaces() bool {
	start := l.i
	for l.i < len(l.src.S) {
		r := l.rune()
		switch {
		case r == ' ', r == '~', r > 0x7f && unicode.Is(unicode.Zs, r):
			l.skip()
			continue
		case r == '\\':
			rest := l.src.S[l.i+1:]
			if rest != "" && strings.IndexByte(`,;:! `, rest[0]) >= 0 {
				l.skip()
				l.skip()
				continue
			}
			if word := texWord(rest); word == "quad" || word == "qquad" {
				for range len(word) + 1 {
					l.skip()
				}
				continue
			}
		}
		break
	}
	return l.i > start
}

// texWord is the run of ASCII letters that s begins with.
func texWord(s string) string {
	n := 0
	for n < len(s) && isASCIILetter(rune(s[n])) {
		n++
	}
	return s[:n]
}

// next makes the next token.
func (l *lexer) next() token {
	space := l.spaces()
	t := token{kind: kEOF, space: space, from: int32(l.i), at: int32(l.n)}
	if l.err == nil && l.i < len(l.src.S) {
		l.scan(&t)
	}
	if l.err != nil {
		t.kind = kEOF
	}
	t.to = int32(l.i)
	return t
}

func (l *lexer) scan(t *token) {
	r := l.rune()
	switch {
	case isDigit(r):
		l.number(t)
		return
	case isNameRune(r):
		run := l.run(isNameRune)
		name, _ := foldRun(run)
		l.name(t, name)
		return
	case r == '\\':
		l.command(t)
		return
	}
	if _, ok := superscript(r); ok {
		var b strings.Builder
		for {
			c, ok := superscript(l.rune())
			if !ok {
				break
			}
			b.WriteByte(c)
			l.skip()
		}
		t.kind, t.text = kSuper, b.String()
		return
	}
	l.sign(t, r)
}

func (l *lexer) name(t *token, name string) {
	t.kind, t.text = kIdent, name
	if name == "in" {
		t.kind = kIn
	}
}

// sign makes a token of a sign that is neither letter nor digit.
func (l *lexer) sign(t *token, r rune) {
	at := l.n
	l.skip()
	follows := func(c rune) bool {
		if l.rune() != c {
			return false
		}
		l.skip()
		return true
	}
	switch r {
	case '+', '/', '^', '_', '(', ')', '[', ']', '{', '}', ',', '|':
		t.kind = kind(r)
	case '-', '−':
		t.kind = '-'
	case '*':
		t.kind = '*'
		if follows('*') {
			t.kind = kPower
		}
	case '×':
		t.kind = '*'
	case '·', '⋅', 0x387:
		t.kind = kDot
	case '.':
		t.kind = '.'
		if isDigit(l.rune()) {
			digits := l.peekRun(isDigit)
			l.fail(at, fmt.Sprintf("a number begins with a digit, so .%s is ambiguous", clip(digits)),
				fmt.Sprintf("write %q for the number or %q for a product", "0."+clip(digits), "*"+clip(digits)))
		}
	case '=':
		t.kind = '='
		if follows('=') {
			t.kind, t.text = kStrict, "=="
		}
	case '<', '>':
		t.kind, t.text = kStrict, string(r)
		if follows('=') {
			t.kind = kLE
			if r == '>' {
				t.kind = kGE
			}
		}
	case '≤', '⩽':
		t.kind = kLE
	case '≥', '⩾':
		t.kind = kGE
	case '≠':
		t.kind, t.text = kStrict, "≠"
	case '!':
		if follows('=') {
			t.kind, t.text = kStrict, "!="
			return
		}
		l.fail(at, "! is no sign of the formula language", "write factorials and double factorials as numbers")
	case '∈':
		t.kind = kIn
	case '√':
		t.kind = kRoot
	default:
		l.strange(at, r)
	}
}

func (l *lexer) peekRun(ok func(rune) bool) string {
	c := *l
	return c.run(ok)
}

// strange refuses a rune that no formula holds.
func (l *lexer) strange(at int, r rune) {
	switch {
	case r == '$':
		l.fail(at, "$ is no sign of the formula language", "leave the dollar signs out")
	case r == ':' && l.rune() == '=':
		l.fail(at, `":=" is no sign of the formula language`, `write "=" for an equation; a formula is named in [let]`)
	case r == '÷', r == '∕', r == '⁄', r == ':':
		l.fail(at, fmt.Sprintf("%q is no sign of the formula language", r), `write "/" for division`)
	case r == '–', r == '—', r == '‐', r == '‑':
		l.fail(at, "this dash is no minus sign", `write "-"`)
	case r == '‖', r == '∥':
		l.fail(at, fmt.Sprintf("%q is no sign of the formula language", r), `write "norm(a, b)" for the norm of a vector`)
	case r == '∂':
		l.fail(at, "∂ is no sign of the formula language", `write "u_x" for a derivative of u, "d_x(f)" for that of a formula`)
	case r == '∇':
		l.fail(at, "∇ is no sign of the formula language", `write "grad(f)" or "div(F)"`)
	case r == '\'':
		l.fail(at, "a prime is no sign of the formula language", `write "u_x" for a derivative of u, "d_x(f)" for that of a formula`)
	case r == '∆': // the sign of the increment, not the Greek letter
		l.fail(at, "∆ is no sign of the formula language", l.scope.laplacian("u"))
	case r == '%':
		l.fail(at, "% is no sign of the formula language", `write "/100" for per cent; a comment stands outside the formula, after "#"`)
	case r == '#':
		l.fail(at, "# is no sign of the formula language", "a comment stands outside the quotation marks of the formula")
	case strings.ContainsRune("\"“”„«»‘’`", r):
		l.fail(at, fmt.Sprintf("%q is no sign of the formula language", r), "leave the quotation mark out")
	case r == '&':
		l.fail(at, "& is no sign of the formula language", "write two claims")
	case r == ';':
		l.fail(at, `";" is no sign of the formula language`, `write "," between arguments`)
	case unicode.IsLetter(r), unicode.IsMark(r), unicode.IsNumber(r):
		l.fail(at, fmt.Sprintf("%q is not used in formulas", r), "names are made of letters and digits, ASCII or Greek")
	case !unicode.IsPrint(r):
		l.fail(at, fmt.Sprintf("the invisible character U+%04X", r), "delete it")
	default:
		l.fail(at, fmt.Sprintf("%q is no sign of the formula language", r), "")
	}
}

// superscript is the ASCII digit or minus of a raised one.
func superscript(r rune) (byte, bool) {
	switch r {
	case '¹':
		return '1', true
	case '²':
		return '2', true
	case '³':
		return '3', true
	case '⁻':
		return '-', true
	case '⁰', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹':
		return byte('0' + r - '⁰'), true
	}
	return 0, false
}

package formula

import (
	"fmt"
	"math/big"
	"strconv"
	"strings"
)

// maxDigits bounds the digits of a number written out without an exponent.
const maxDigits = 1000

// number makes a token of digits, a decimal fraction, a decimal exponent.
func (l *lexer) number(t *token) {
	start, at := l.i, l.n
	whole := l.run(isDigit)
	if whole == "0" && l.based(at, start) {
		return
	}
	fraction := ""
	if l.rune() == '.' && l.i+1 < len(l.src.S) && isDigit(rune(l.src.S[l.i+1])) {
		l.skip()
		fraction = l.run(isDigit)
	}
	exponent := ""
	mark := *l
	if r := l.rune(); r == 'e' || r == 'E' {
		run := l.peekRun(isNameRune) // the name that begins here otherwise
		mantissa := l.src.S[start:l.i]
		l.skip()
		sign := ""
		switch l.rune() {
		case '+':
			l.skip()
		case '-', '−':
			sign = "-"
			l.skip()
		}
		digits := l.run(isDigit)
		switch {
		case digits == "":
			*l = mark
		case l.declared(string(r)) || l.declared(run):
			name, literal := string(r), fmt.Sprintf("%s*10^%s%s", clip(mantissa), sign, clip(digits))
			var product string
			switch between := l.src.S[mark.i+1 : l.i-len(digits)]; {
			case l.declared(run) && len(run) > 1:
				name = run
				product = fmt.Sprintf("%s*%s", clip(mantissa), clip(run))
			case between == "":
				product = fmt.Sprintf("%s*%s*%s", clip(mantissa), name, clip(digits))
			case sign == "-":
				product = fmt.Sprintf("%s*%s - %s", clip(mantissa), name, clip(digits))
			default:
				product = fmt.Sprintf("%s*%s + %s", clip(mantissa), name, clip(digits))
			}
			l.fail(at, fmt.Sprintf("%q could be a number or a product with %s", clip(l.src.S[start:l.i]), name),
				fmt.Sprintf("write %q for the number or %q for the product", literal, product))
			return
		default:
			exponent = sign + digits
		}
	}
	t.kind = kNum
	t.text = whole
	if fraction != "" {
		t.text += "." + fraction
	}
	if written(whole, fraction, exponent) > maxDigits {
		l.fail(at, fmt.Sprintf("a number has at most %d digits, written out", maxDigits), "write a power of ten as 10^n")
		return
	}
	if exponent != "" {
		t.text += "e" + exponent
	}
}

// based refuses 0x1F, 0b101 and 0o17, of which 0 is read, unless what follows
// the 0 is a declared name.
func (l *lexer) based(at, start int) bool {
	run := l.peekRun(isNameRune)
	if len(run) < 2 || !strings.ContainsRune("xXbBoO", rune(run[0])) || l.declared(run) {
		return false
	}
	v, ok := new(big.Int).SetString("0"+run, 0)
	if !ok {
		return false
	}
	advice := ""
	if s := v.String(); len(s) < 40 {
		advice = fmt.Sprintf("write %q", s)
	}
	l.fail(at, fmt.Sprintf("%q: numbers are decimal", clip(l.src.S[start:l.i]+run)), advice)
	return true
}

// declared reports whether a run of letters is a declared name.
func (l *lexer) declared(run string) bool {
	name, ok := foldRun(run)
	return ok && l.scope.kinds[name] != Undeclared
}

// written is how many digits a literal has without its exponent, or more than
// maxDigits where that is many.
func written(whole, fraction, exponent string) int {
	if exponent == "" {
		return len(whole) + len(fraction)
	}
	sign := 1
	if strings.HasPrefix(exponent, "-") {
		sign, exponent = -1, exponent[1:]
	}
	exponent = strings.TrimLeft(exponent, "0")
	if len(exponent) > 5 {
		return maxDigits + 1
	}
	e, err := strconv.Atoi("0" + exponent)
	if err != nil {
		return maxDigits + 1
	}
	e *= sign
	return max(len(whole)+e, 1) + max(len(fraction)-e, 0)
}

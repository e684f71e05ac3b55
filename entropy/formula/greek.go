package formula

import "strings"

// The Greek alphabet in the order of Unicode; U+03C2, the final sigma, stands
// in its place. "eps" is the name of epsilon throughout.
var lowerGreek = []string{
	"alpha", "beta", "gamma", "delta", "eps", "zeta", "eta", "theta", "iota",
	"kappa", "lambda", "mu", "nu", "xi", "omicron", "pi", "rho", "sigma",
	"sigma", "tau", "upsilon", "phi", "chi", "psi", "omega",
}

var upperGreek = []string{
	"Alpha", "Beta", "Gamma", "Delta", "Epsilon", "Zeta", "Eta", "Theta", "Iota",
	"Kappa", "Lambda", "Mu", "Nu", "Xi", "Omicron", "Pi", "Rho", "", "Sigma",
	"Tau", "Upsilon", "Phi", "Chi", "Psi", "Omega",
}

// greekLetter is the ASCII name of a Greek letter in any of its forms.
func greekLetter(r rune) (string, bool) {
	switch {
	case 0x3b1 <= r && r <= 0x3c9:
		return lowerGreek[r-0x3b1], true
	case 0x391 <= r && r <= 0x3a9 && r != 0x3a2:
		return upperGreek[r-0x391], true
	}
	switch r {
	case 0x3f5: // lunate epsilon
		return "eps", true
	case 0x3d1: // script theta
		return "theta", true
	case 0x3d5: // straight phi
		return "phi", true
	case 0x3f1: // script rho
		return "rho", true
	case 0x3f0: // script kappa
		return "kappa", true
	case 0x3f4: // capital theta symbol
		return "Theta", true
	case 0xb5: // micro sign
		return "mu", true
	case 0x2126: // ohm sign
		return "Omega", true
	}
	return "", false
}

// greekCommand is the ASCII name of a TeX command for a Greek letter, without
// its backslash.
func greekCommand(command string) (string, bool) {
	switch command {
	case "epsilon", "varepsilon":
		return "eps", true
	case "vartheta", "varphi", "varrho", "varsigma", "varkappa":
		return command[len("var"):], true
	case "eps":
		return "", false
	}
	_, ok := greekRune(command)
	return command, ok
}

// greekRune is the letter that a folded name stands for.
func greekRune(name string) (rune, bool) {
	for i, s := range lowerGreek {
		if s == name && i != 0x11 {
			return 0x3b1 + rune(i), true
		}
	}
	for i, s := range upperGreek {
		if s != "" && s == name {
			return 0x391 + rune(i), true
		}
	}
	return 0, false
}

// texGreek is the TeX command for a folded name, where TeX has one.
func texGreek(name string) (string, bool) {
	if name == "eps" {
		return `\varepsilon`, true
	}
	if name == "omicron" {
		return "", false
	}
	if _, ok := greekRune(name); !ok {
		return "", false
	}
	switch name {
	case "Alpha", "Beta", "Epsilon", "Zeta", "Eta", "Iota", "Kappa", "Mu", "Nu",
		"Omicron", "Rho", "Tau", "Chi":
		return "", false
	}
	return `\` + name, true
}

// foldRun folds a run of letters and digits: each Greek letter becomes its
// ASCII name, and the word epsilon becomes eps. It reports false where the run
// holds anything else.
func foldRun(run string) (string, bool) {
	if run == "epsilon" {
		return "eps", true
	}
	var b strings.Builder
	for _, r := range run {
		switch {
		case isASCIILetter(r), isDigit(r):
			b.WriteRune(r)
		default:
			name, ok := greekLetter(r)
			if !ok {
				return "", false
			}
			b.WriteString(name)
		}
	}
	return b.String(), true
}

func isASCIILetter(r rune) bool { return 'a' <= r && r <= 'z' || 'A' <= r && r <= 'Z' }

func isDigit(r rune) bool { return '0' <= r && r <= '9' }

// isNameRune reports whether r may stand in a name.
func isNameRune(r rune) bool {
	if r < 0x80 {
		return isASCIILetter(r) || isDigit(r)
	}
	_, ok := greekLetter(r)
	return ok
}

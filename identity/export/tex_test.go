package export_test

import (
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/identity/export"
)

func TestTeXNames(t *testing.T) {
	for name, want := range map[string]string{
		"u_xixi":               `u_{\xi \xi}`,
		"u_xieta":              `u_{\xi \eta}`,
		"u_xx":                 "u_{xx}",
		"u_z":                  "u_{z}",
		"u":                    "u",
		"eps":                  `\varepsilon`,
		"epsilon":              `\varepsilon`,
		"delta":                `\delta`,
		"beta":                 `\beta`,
		"lambda1":              `\lambda_{1}`,
		"x2":                   "x_{2}",
		"speed":                `\mathit{speed}`,
		"ξ":                    `\xi`,
		"R":                    "R",
		"cos(theta)":           `\cos \theta`,
		"sin(a + b)":           `\sin(a + b)`,
		"[u_x]":                "[u_{x}]",
		"{u_x}":                `\{u_{x}\}`,
		"[u_xieta]":            `[u_{\xi \eta}]`,
		"u_x(+)":               "u_{x}^{+}",
		"u_eta(-)":             `u_{\eta}^{-}`,
		"u_{xi eta}":           `u_{\xi \eta}`,
		"sqrt(u_x^2+1)":        `\sqrt{u_{x}^{2}+1}`,
		"sqrt(eps*a)":          `\sqrt{\varepsilon a}`,
		"sqrt(cos(theta) + 2)": `\sqrt{\cos \theta + 2}`,
		"(x + 1)^(1/3)":        "(x + 1)^{1/3}",
		"a_b_c":                "a_{b,c}",
		"#%":                   `\#\%`,
		"_":                    `\_`,
		"":                     "",
		"(":                    "()",
	} {
		assert.Equal(t, want, export.TeXName(name), name)
	}
}

func TestTeXOfTheLayeredBound(t *testing.T) {
	got, err := export.TeX(layered(), export.TeXOptions{Gap: `e - 2\varepsilon K - \operatorname{div}\Sigma`})
	require.NoError(t, err)
	assert.Equal(t, `\begin{align}
e - 2\varepsilon K - \operatorname{div}\Sigma &= \frac{1}{2 \varepsilon} \bigl(R - \varepsilon u_{\xi \xi} + \varepsilon u_{\eta \eta}\bigr)^{2} + 2 \varepsilon u_{\xi \eta}^{2}
\end{align}
`, got)

	got, err = export.TeX(layered(), export.TeXOptions{Names: map[string]string{"R": `\mathcal{R}`, "u_xieta": "b"}})
	require.NoError(t, err)
	assert.Contains(t, got, `&= \frac{1}{2 \varepsilon} \bigl(\mathcal{R} - \varepsilon u_{\xi \xi} + \varepsilon u_{\eta \eta}\bigr)^{2} + 2 \varepsilon b^{2}`)
	assert.Contains(t, got, `\frac{\mathcal{R}^{2}}{2 \varepsilon} + \frac{\varepsilon \bigl(u_{\xi \xi} + u_{\eta \eta}\bigr)^{2}}{2}`)
}

func TestTeXOfMultipliersAndEquations(t *testing.T) {
	got, err := export.TeX(motzkinSquared(), export.TeXOptions{})
	require.NoError(t, err)
	assert.Equal(t, `\begin{align}
\bigl(x^{2} + y^{2}\bigr)^{2} \bigl(x^{4} y^{2} + x^{2} y^{4} - 3 x^{2} y^{2} + 1\bigr) &= x^{4} y^{2} \bigl(x^{2} + y^{2} - 2\bigr)^{2} + x^{2} y^{4} \bigl(x^{2} + y^{2} - 2\bigr)^{2} + x^{2} y^{2} \bigl(x^{2} + y^{2} - 2\bigr)^{2} \notag \\
&\quad {} + \bigl(x^{2} - y^{2}\bigr)^{2}
\end{align}
`, got)

	got, err = export.TeX(onCircle(), export.TeXOptions{})
	require.NoError(t, err)
	assert.Contains(t, got, `1 - \cos \theta \sin \theta &= \tfrac{1}{2} \bigl(\cos \theta - \sin \theta\bigr)^{2} + \tfrac{1}{2} - \tfrac{1}{2} \bigl(\cos^{2} \theta + \sin^{2} \theta - 1\bigr)`)

	got, err = export.TeX(onBox(), export.TeXOptions{})
	require.NoError(t, err)
	assert.Contains(t, got, `&= \tfrac{1}{7} x \bigl(1 - x\bigr) \bigl(x + 3 y\bigr)`)
}

func TestTeXOfIdentities(t *testing.T) {
	want := map[string]string{
		"quotients":         `&= \frac{2 \varepsilon y \bigl(x + y\bigr) + 2 \bigl(x + y\bigr)^{2} - y}{2 \varepsilon y \bigl(y + x\bigr)^{2}}`,
		"rationalised root": "\\frac{1}{\\sqrt{u^{2}+1} - u} &= \\sqrt{u^{2}+1} + u \\\\\n",
		"jumps and means":   `(u_{\xi}^{+})^{2} - (u_{\xi}^{-})^{2} &= 2 \{u_{\xi}\} [u_{\xi}] \\`,
	}
	for _, s := range identities() {
		got, err := export.TeX(s, export.TeXOptions{})
		require.NoError(t, err)
		assert.Contains(t, got, want[s.Name])
	}
}

// Blocks must be balanced: brackets of each kind, and one number an equation.
func TestTeXIsBalanced(t *testing.T) {
	var all []export.Statement
	for _, s := range inequalities() {
		all = append(all, s)
	}
	for _, s := range identities() {
		all = append(all, s)
	}
	for _, s := range all {
		for _, width := range []int{0, 1, 20, 200} {
			got, err := export.TeX(s, export.TeXOptions{Width: width})
			require.NoError(t, err)
			for _, pair := range [][2]string{{`\bigl(`, `\bigr)`}, {`\Bigl(`, `\Bigr)`}, {"{", "}"}, {"(", ")"}} {
				assert.Equal(t, strings.Count(got, pair[0]), strings.Count(got, pair[1]), "%s in\n%s", pair[0], got)
			}
			equations := 1
			if q, ok := s.(*export.Identity); ok {
				equations = len(q.Equalities)
			}
			if q, ok := s.(*export.Inequality); ok {
				for in := q.Certificate; in.Squaring != nil; in = in.Squaring.Proof {
					equations++
				}
			}
			rows := strings.Count(got, "\\\\\n") + 1
			assert.Equal(t, equations, rows-strings.Count(got, `\notag`), got)
			assert.Equal(t, equations, strings.Count(got, "&="), got)
			assert.NotContains(t, got, "  ")
		}
	}
}

func TestTeXOfASquaring(t *testing.T) {
	s := withSquaring()
	s.Left, s.Right = nil, nil
	got, err := export.TeX(s, export.TeXOptions{})
	require.NoError(t, err)
	assert.Equal(t, `\begin{align}
\tfrac{3}{2} r - a - b &= \tfrac{3}{2} r - a - b \\
\bigl(\tfrac{3}{2} r\bigr)^{2} - \bigl(a + b\bigr)^{2} &= \bigl(a - b\bigr)^{2} + \tfrac{1}{4} a^{2} + \tfrac{1}{4} b^{2} + \tfrac{45}{4} \bigl(\tfrac{1}{5} r^{2} - \tfrac{1}{5} a^{2} - \tfrac{1}{5} b^{2}\bigr)
\end{align}
`, got)
}

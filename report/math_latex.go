package report

import (
	"regexp"
	"strings"
	"unicode/utf8"
)

// latex returns a formula as the mathematics of LaTeX with amsmath, in one
// line, in the commands that viewers of Markdown know too. It holds neither
// < nor > nor square brackets nor backticks, so that a viewer that knows no
// formulas shows it as it is. Spaces between pieces mean nothing there.
func latex(m Math) string {
	switch m := m.(type) {
	case MathRow:
		parts := make([]string, len(m))
		for i, piece := range m {
			parts[i] = latex(piece)
		}
		return strings.Join(parts, " ")
	case MathIdent:
		return latexIdent(string(m))
	case MathText:
		return latexText(string(m))
	case MathFrac:
		return `\frac{` + latex(m.Num) + "}{" + latex(m.Den) + "}"
	case MathSub:
		return latexBase(m.Base) + "_{" + latex(m.Sub) + "}"
	case MathOver:
		return latexOver(m)
	case MathSum:
		return latexSum(m)
	default:
		panic(unknown(m))
	}
}

// latexBase returns what an index hangs on, in braces if it is more than one
// piece.
func latexBase(m Math) string {
	switch m := m.(type) {
	case MathIdent, MathOver:
		return latex(m)
	}
	return "{" + latex(m) + "}"
}

// latexOver returns a base with a bar. A single letter goes without braces:
// then the index behind it looks like no emphasis to Markdown.
func latexOver(m MathOver) string {
	base := latex(m.Base)
	if utf8.RuneCountInString(base) == 1 {
		return `\overline ` + base
	}
	return `\overline{` + base + "}"
}

func latexSum(m MathSum) string {
	s := `\sum`
	if m.From != nil {
		s += "_{" + latex(m.From) + "}"
	}
	if m.To != nil {
		s += "^{" + latex(m.To) + "}"
	}
	return s
}

func latexIdent(s string) string { return latexSigns(words(s), latexItalic) }

// latexItalic returns a piece of a variable's name: a letter alone is in
// italics by itself.
func latexItalic(s string) string {
	if utf8.RuneCountInString(s) == 1 {
		return s
	}
	return `\mathit{` + strings.ReplaceAll(s, " ", `\ `) + "}"
}

func latexText(s string) string {
	if s = oneLine(s); s == "/" {
		return `\mathbin{/}`
	}
	return latexSigns(s, latexUpright)
}

var latexNumber = regexp.MustCompile(`^[0-9]+([.,][0-9]+)*$`)

// latexUpright returns a piece set upright: numbers and signs are so by
// themselves.
func latexUpright(s string) string {
	switch {
	case latexNumber.MatchString(s):
		return strings.ReplaceAll(s, ",", "{,}")
	case len(s) == 1 && strings.Contains("=+-(),.;:!", s):
		return s
	}
	return `\text{` + s + "}"
}

// latexSigns returns text set in a style, with what is not a plain character
// as a command between the pieces.
func latexSigns(s string, style func(string) string) string {
	var b strings.Builder
	piece := ""
	flush := func() {
		if piece != "" {
			b.WriteString(style(piece))
		}
		piece = ""
	}
	for _, r := range s {
		command, special := latexCommands[r]
		if !special {
			piece += string(r)
			continue
		}
		flush()
		b.WriteString(command)
	}
	flush()
	return strings.TrimRight(b.String(), " ")
}

// latexCommands are the characters that text cannot hold, or that older
// LaTeX does not know. A command that ends in a letter has a space behind.
var latexCommands = map[rune]string{
	'\\': `\backslash `, '{': `\lbrace `, '}': `\rbrace `, '[': `\lbrack `, ']': `\rbrack `,
	'$': `\$`, '%': `\%`, '&': `\&`, '#': `\#`, '_': `\_`,
	'^': `\wedge `, '~': `\sim `, '*': `\ast `, '`': `\backprime `, '<': `\lt `, '>': `\gt `,
	'≤': `\le `, '≥': `\ge `, '≠': `\ne `, '≈': `\approx `, '±': `\pm `, '−': `-`, '×': `\times `,
	'·': `\cdot `, '∞': `\infty `, '√': `\surd `, '→': `\to `, '…': `\dots `, '∂': `\partial `, '°': `{}^{\circ}`,
	'⁰': `{}^{0}`, '¹': `{}^{1}`, '²': `{}^{2}`, '³': `{}^{3}`, '⁻': `{}^{-}`,
	'α': `\alpha `, 'β': `\beta `, 'γ': `\gamma `, 'δ': `\delta `, 'ε': `\varepsilon `, 'ζ': `\zeta `,
	'η': `\eta `, 'θ': `\theta `, 'ι': `\iota `, 'κ': `\kappa `, 'λ': `\lambda `, 'μ': `\mu `, 'µ': `\mu `,
	'ν': `\nu `, 'ξ': `\xi `, 'π': `\pi `, 'ρ': `\rho `, 'σ': `\sigma `, 'τ': `\tau `, 'υ': `\upsilon `,
	'φ': `\varphi `, 'χ': `\chi `, 'ψ': `\psi `, 'ω': `\omega `,
	'Γ': `\Gamma `, 'Δ': `\Delta `, 'Θ': `\Theta `, 'Λ': `\Lambda `, 'Ξ': `\Xi `, 'Π': `\Pi `, 'Σ': `\Sigma `,
	'Φ': `\Phi `, 'Ψ': `\Psi `, 'Ω': `\Omega `,
}

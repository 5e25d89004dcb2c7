package report

import (
	"regexp"
	"strings"
)

// mathML returns a displayed formula in MathML Core.
func mathML(m Math) string {
	return `<math xmlns="http://www.w3.org/1998/Math/MathML" display="block">` + mathNode(m) + "</math>"
}

func mathNode(m Math) string {
	switch m := m.(type) {
	case MathRow:
		var b strings.Builder
		for _, piece := range m {
			b.WriteString(mathNode(piece))
		}
		return "<mrow>" + b.String() + "</mrow>"
	case MathIdent:
		return mathIdent(string(m))
	case MathText:
		return mathText(string(m))
	case MathFrac:
		return "<mfrac>" + fullSize(m.Num) + fullSize(m.Den) + "</mfrac>"
	case MathSub:
		return "<msub>" + mathNode(m.Base) + mathNode(m.Sub) + "</msub>"
	case MathOver:
		return `<mover accent="true">` + mathNode(m.Base) + `<mo class="bar" stretchy="true">‾</mo></mover>`
	case MathSum:
		return mathSum(m)
	default:
		panic(unknown(m))
	}
}

// fullSize returns a part of a fraction, at full size if there is more in it
// than can be read small.
func fullSize(m Math) string {
	if row, ok := m.(MathRow); ok && len(row) > 1 {
		return `<mstyle displaystyle="true" scriptlevel="0">` + mathNode(m) + "</mstyle>"
	}
	return mathNode(m)
}

// mathIdent returns a variable. The style sheet sets it in italics, a letter
// or a word: mathematical letters would come from whatever font has them.
func mathIdent(s string) string {
	return `<mi mathvariant="normal">` + escapeXML(words(s)) + "</mi>"
}

var mathNumber = regexp.MustCompile(`^[0-9][0-9., \x{a0}\x{2009}\x{202f}]*$`)

// mathText returns upright text: an operator that stands alone with the
// space around it that operators have, numbers, and words. The solidus has
// no space of its own in MathML.
func mathText(s string) string {
	s = oneLine(s)
	switch {
	case s == "/":
		return `<mo lspace="0.222em" rspace="0.222em">/</mo>`
	case s != "" && strings.Contains(" = + − × < > ≤ ≥ ± · ≈ ", " "+s+" ") && s != " ":
		return "<mo>" + escapeXML(s) + "</mo>"
	case mathNumber.MatchString(s):
		return "<mn>" + s + "</mn>"
	}
	return "<mtext>" + escapeXML(strings.ReplaceAll(s, " ", "\u00a0")) + "</mtext>"
}

func mathSum(m MathSum) string {
	const sign = `<mo class="sum" movablelimits="false">∑</mo>`
	switch {
	case m.From != nil && m.To != nil:
		return "<munderover>" + sign + mathNode(m.From) + mathNode(m.To) + "</munderover>"
	case m.From != nil:
		return "<munder>" + sign + mathNode(m.From) + "</munder>"
	case m.To != nil:
		return "<mover>" + sign + mathNode(m.To) + "</mover>"
	}
	return sign
}

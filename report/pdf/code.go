package pdf

import (
	"strings"
	"unicode/utf8"

	"shearbook/report"
)

// code sets preformatted text on a wash. A line too long goes on below, with
// a hook where it was broken.
func (s *setter) code(c *report.CodeBlock, a area) []*piece {
	const pad, hook = 7.0, 12.0
	outer := a
	a = a.inset(pad)
	a.font = mono(a.font)
	a.size *= 0.85
	a.leading = 1.32 * a.size
	width := a.width - pad - hook
	pieces := []*piece{space(4)}
	for text := range strings.SplitSeq(strings.TrimSuffix(c.Text, "\n"), "\n") {
		text = report.Visible(expandTabs(strings.TrimSuffix(text, "\r")))
		for first := true; first || text != ""; first = false {
			p := &piece{height: a.leading}
			x := a.x
			if !first {
				x += hook
			}
			var rest string
			p.ops, rest = s.codeLine(text, a.style, x, a.baseline(), width-(x-a.x))
			if rest != "" {
				p.ops = append(p.ops, hookMark(a.x+a.width-pad-4, a.baseline()))
			}
			text = rest
			pieces = append(pieces, p)
		}
	}
	pieces = append(pieces, space(5))
	keepEnds(pieces)
	keepEnds(pieces[1 : len(pieces)-1])
	enframe(&frame{x: outer.x, width: outer.width, fill: &wash}, pieces)
	return pieces
}

// codeLine sets as much of text as fits, and returns the rest.
func (s *setter) codeLine(text string, st style, x, y, width float64) (ops []op, rest string) {
	left := width
	for text != "" {
		part, as, after := s.printable(text, st)
		n := s.fitting(as, part, left, width, left == width)
		if n > 0 {
			ops = append(ops, &textOp{x, y - as.rise, part[:n], as})
			w := s.width(as, part[:n])
			x, left = x+w, left-w
		}
		if n < len(part) {
			// printable may have changed characters: skip as many as were set
			done := utf8.RuneCountInString(part[:n])
			for range done {
				_, size := utf8.DecodeRuneInString(text)
				text = text[size:]
			}
			return ops, text
		}
		text = after
	}
	return ops, ""
}

// expandTabs puts spaces for tabs, stops every four columns.
func expandTabs(text string) string {
	if !strings.Contains(text, "\t") {
		return text
	}
	var b strings.Builder
	column := 0
	for _, r := range text {
		if r != '\t' {
			b.WriteRune(r)
			column++
			continue
		}
		b.WriteByte(' ')
		for column++; column%4 != 0; column++ {
			b.WriteByte(' ')
		}
	}
	return b.String()
}

// hookMark is the sign that a line goes on below.
func hookMark(x, baseline float64) op {
	y := baseline - 1.6
	return &pathOp{
		points: []point{{x + 5, y - 4}, {x + 5, y}, {x, y}, {x + 1.8, y - 1.6}, {x, y}, {x + 1.8, y + 1.6}},
		width:  0.6, colour: soft,
	}
}

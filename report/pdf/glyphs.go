package pdf

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"shearbook/report"
)

// printable cuts from the front of text what one style can set, and returns
// it as it is to be set, the style, and the rest. Most text passes whole.
// Where a face lacks a character, another of ours prints it; raised and
// lowered figures that no face has are set small; what is left is noted as
// missing.
func (s *setter) printable(text string, st style) (part string, as style, rest string) {
	if plainASCII(text) {
		return text, st, ""
	}
	var b strings.Builder
	small := s.fonts.lacksFigure(text, st.font)
	for i, r := range text {
		use, face, sized := s.substitute(r, st, small)
		if i == 0 {
			as = sized
			as.font = face
		} else if sized.font = face; sized != as {
			return b.String(), as, text[i:]
		}
		b.WriteRune(use)
	}
	return b.String(), as, ""
}

func plainASCII(text string) bool {
	for i := range len(text) {
		if text[i] < ' ' || text[i] > '~' {
			return false
		}
	}
	return true
}

// lacksFigure tells whether a raised or lowered figure of text is missing
// from a face. Then all of them are set small, so that they look alike.
func (f *faces) lacksFigure(text string, font report.Font) bool {
	for _, r := range text {
		if plain, _ := smallFigure(r); plain != 0 && f.get(font).glyph(r) == 0 {
			return true
		}
	}
	return false
}

// substitute returns the character, the face and the style that print r;
// small tells that raised and lowered figures are set small.
func (s *setter) substitute(r rune, st style, small bool) (rune, report.Font, style) {
	switch {
	case r == '\u00A0' || unicode.Is(unicode.Zs, r) && s.fonts.get(st.font).glyph(r) == 0:
		return ' ', st.font, st
	case r == '\u2011': // non-breaking hyphen
		return '-', st.font, st
	case r == '\u22C5': // dot operator
		return '·', st.font, st
	}
	if plain, up := smallFigure(r); plain != 0 && small {
		if up {
			return plain, st.font, raised(st)
		}
		return plain, st.font, lowered(st)
	}
	if face, ok := s.fonts.printer(r, st.font); ok {
		return r, face, st
	}
	s.fonts.miss(r)
	return r, st.font, st
}

// printer returns the face that has r: the one asked for, or its nearest
// relative. Scripts written from right to left are not printed: their
// letters would come out in the wrong order.
func (f *faces) printer(r rune, font report.Font) (report.Font, bool) {
	if rightToLeft(r) {
		return font, false
	}
	if f.get(font).glyph(r) != 0 {
		return font, true
	}
	sans := report.Sans
	if font == bold(font) {
		sans = report.SansBold
	}
	for _, other := range []report.Font{sans, report.Serif} {
		if f.get(other).glyph(r) != 0 {
			return other, true
		}
	}
	return font, false
}

func rightToLeft(r rune) bool {
	return r >= 0x590 && (r < 0x900 || r >= 0xFB1D && r < 0xFE00 || r >= 0xFE70 && r < 0xFF00)
}

func (f *faces) miss(r rune) {
	if f.missing == nil {
		f.missing = map[rune]bool{}
	}
	f.missing[r] = true
}

// smallFigure returns what a superscript or subscript stands for.
func smallFigure(r rune) (plain rune, up bool) {
	switch {
	case r == '¹':
		return '1', true
	case r == '²' || r == '³':
		return r - '²' + '2', true
	case r == '\u2070' || 0x2074 <= r && r <= 0x207E:
		return []rune("0...456789+−=()")[r-0x2070], true
	case 0x2080 <= r && r <= 0x208E:
		return []rune("0123456789+−=()")[r-0x2080], false
	}
	return 0, false
}

// kernedFrom is the size from which letters are kerned. Below it nobody sees
// the difference, and unkerned text stays in one piece in the file.
const kernedFrom = 10.4

// width measures text in points.
func (s *setter) width(st style, text string) float64 {
	f := s.fonts.get(st.font)
	total, correction := 0, 0
	var before rune
	for _, r := range text {
		if isMark(r) {
			continue
		}
		total += f.advance(r)
		if st.size >= kernedFrom && before != 0 {
			correction += f.kern(before, r)
		}
		before = r
	}
	return st.size * (float64(total)/1000 + float64(correction)/float64(f.unitsEm))
}

// isMark tells whether r is a combining mark, set over or under the letter
// before it.
func isMark(r rune) bool { return 0x300 <= r && r <= 0x36F }

// segment is text that one showing operator prints, X and Y from the start
// of the run, y downward.
type segment struct {
	x, y float64
	text string
}

// segments cuts a run where letters are kerned or a mark must be placed.
func (s *setter) segments(st style, text string) []segment {
	f := s.fonts.get(st.font)
	if st.size < kernedFrom && !strings.ContainsFunc(text, isMark) {
		return []segment{{text: text}}
	}
	var out []segment
	unit := st.size / float64(f.unitsEm)
	x, start, at := 0.0, 0, 0.0 // pen, and where the open segment starts
	var base rune
	var baseX float64
	var stack markStack
	for i, r := range text {
		if isMark(r) {
			out = appendSegment(out, at, text[start:i])
			if base == 0 {
				baseX = x
			}
			dx, dy := stack.place(f, base, r)
			out = append(out, segment{baseX + unit*dx, -unit * dy, string(r)})
			start, at = i+utf8.RuneLen(r), x
			continue
		}
		if st.size >= kernedFrom && base != 0 {
			if k := f.kern(base, r); k != 0 {
				out = appendSegment(out, at, text[start:i])
				x += unit * float64(k)
				start, at = i, x
			}
		}
		base, baseX, stack = r, x, markStack{}
		x += st.size * float64(f.advance(r)) / 1000
	}
	return appendSegment(out, at, text[start:])
}

func appendSegment(out []segment, x float64, text string) []segment {
	if text == "" {
		return out
	}
	return append(out, segment{x: x, text: text})
}

// markStack is how far the marks on a letter have grown, in font units from
// its own edges.
type markStack struct{ above, below, count int }

// place centres a mark over or under its letter, clear of it and of the marks
// before, in font units from the letter's origin. Nothing in the file tells
// a viewer to do so.
func (m *markStack) place(f *face, base, mark rune) (dx, dy float64) {
	const clear = 140
	b, k := f.bounds(base), f.bounds(mark)
	if base == 0 || b == (bounds{}) {
		b = bounds{0, 0, 1000, 1082}
	}
	shift := 0
	m.count++
	switch {
	case m.count > 4: // no more than five are set clear of each other
	case k.bottom > 500:
		shift = b.top + clear + m.above - k.bottom
		m.above += k.top - k.bottom + clear
	case k.top <= 0:
		shift = min(b.bottom, 0) - clear + m.below - k.top
		m.below -= k.top - k.bottom + clear
	}
	dx = float64(b.left+b.right-k.left-k.right) / 2
	if f.slanted { // the stems lean by about 12 degrees
		dx += 0.21 * (float64(k.bottom+k.top)/2 + float64(shift) - float64(b.bottom+b.top)/2)
	}
	return dx, float64(shift)
}

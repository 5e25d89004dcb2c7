package pdf

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"

	"shearbook/report"
)

// run is text in one style.
type run struct {
	style
	text  string
	width float64
}

// word is what a line break leaves whole.
type word struct {
	runs   []run
	width  float64
	gap    *run  // the space to the next word if both stand on a line; nil for none
	hyphen bool  // a soft hyphen: shown if the line ends here
	ends   bool  // the line ends here
	binds  bool  // better not parted from the next word: a number and its unit
	notes  []int // footnotes mentioned
}

// Characters with a part in line breaking.
const (
	softHyphen     = '\u00AD'
	zeroWidthSpace = '\u200B'
	wordJoiner     = '\u2060'
)

// maker turns inlines to words.
type maker struct {
	s     *setter
	words []word
	now   word
	last  [2]rune // the two characters before
	gap   *run    // the last one: most words share it
}

func (s *setter) words(inlines []report.Inline, st style) []word {
	m := maker{s: s}
	m.inlines(inlines, st)
	m.close()
	bind(m.words)
	return m.words
}

// plainWords are the words of a string without markup.
func (s *setter) plainWords(text string, st style) []word {
	m := maker{s: s}
	m.text(text, st)
	m.close()
	bind(m.words)
	return m.words
}

func (m *maker) inlines(inlines []report.Inline, st style) {
	for _, in := range inlines {
		m.inline(in, st)
	}
}

func (m *maker) inline(in report.Inline, st style) {
	switch in := in.(type) {
	case report.Text:
		m.text(string(in), st)
	case report.Code:
		st.font = mono(st.font)
		st.size *= 0.92
		m.text(strings.ReplaceAll(string(in), "  ", " \u00A0"), st)
	case report.Sub:
		m.text(string(in), lowered(st))
	case report.Sup:
		m.text(string(in), raised(st))
	case *report.Emphasis:
		st.font = italic(st.font)
		m.inlines(in.Inline, st)
	case *report.Strong:
		st.font = bold(st.font)
		m.inlines(in.Inline, st)
	case *report.Strike:
		st.strike = true
		m.inlines(in.Inline, st)
	case *report.Link:
		m.link(in, st)
	case report.FootnoteRef:
		m.mention(int(in), st)
	case report.LineBreak:
		m.breakHere(true)
	default:
		panic(fmt.Sprintf("pdf: unknown inline %T", in))
	}
}

func lowered(st style) style {
	st.rise -= 0.16 * st.size
	st.size *= 0.72
	return st
}

func raised(st style) style {
	st.rise += 0.36 * st.size
	st.size *= 0.72
	return st
}

// link sets a link. Of one that report.Linkable refuses, the text is printed
// and the address behind it.
func (m *maker) link(in *report.Link, st style) {
	if st.link == nil && report.Linkable(in.URL) {
		st.link, st.colour = target(in.URL), accent
	}
	m.inlines(in.Inline, st)
	shown := report.PlainText(in.Inline)
	switch {
	case shown == "":
		m.text(in.URL, st)
	case in.URL != "" && shown != in.URL && st.link == nil:
		m.text(" ("+in.URL+")", st)
	}
}

func target(url string) *link {
	if url[0] == '#' {
		return &link{dest: headingDest(url[1:])}
	}
	return &link{url: escapeURL(url)}
}

// escapeURL writes what a PDF does not take in a URI as %XX.
func escapeURL(url string) string {
	var b strings.Builder
	for i := range len(url) {
		if c := url[i]; c <= ' ' || c >= 0x7F || strings.IndexByte("\"<>\\^`{|}", c) >= 0 {
			fmt.Fprintf(&b, "%%%02X", c)
		} else {
			b.WriteByte(c)
		}
	}
	return b.String()
}

// mention sets the number of a footnote.
func (m *maker) mention(n int, st style) {
	if n < 1 || n > len(m.s.doc.Footnotes) {
		panic(fmt.Sprintf("pdf: reference to footnote %d of %d", n, len(m.s.doc.Footnotes)))
	}
	st = raised(st)
	st.strike = false
	st.link, st.colour = &link{dest: noteDest(n)}, accent
	m.now.notes = append(m.now.notes, n)
	if m.last[1] == '\u2060' { // the number of a note before this one
		m.add(",", st)
	}
	m.add(strconv.Itoa(n), st)
	m.last = [2]rune{0, '\u2060'}
}

// clean makes every kind of white space a space and shows what would
// otherwise be invisible.
func clean(text string) string {
	if strings.ContainsAny(text, "\r\n\t") {
		text = whiteSpace.Replace(text)
	}
	return report.Visible(text)
}

var whiteSpace = strings.NewReplacer("\r\n", " ", "\r", " ", "\n", " ", "\t", " ")

func (m *maker) text(text string, st style) {
	text = clean(text)
	start := 0
	for i, r := range text {
		switch {
		case r == ' ':
			m.add(text[start:i], st)
			m.space(st)
			start = i + 1
		case r == zeroWidthSpace || r == softHyphen:
			m.add(text[start:i], st)
			m.now.hyphen = r == softHyphen && len(m.now.runs) > 0
			m.breakHere(false)
			start = i + len(string(r))
		case r == wordJoiner:
			m.add(text[start:i], st)
			start = i + len(string(r))
		case mayBreak(m.last, r):
			m.add(text[start:i], st)
			m.breakHere(false)
			start = i
		}
		m.last = [2]rune{m.last[1], r}
	}
	m.add(text[start:], st)
}

// mayBreak tells whether a line may end between a dash and what follows:
// between letters, so that neither a range nor a sign is torn from its
// number.
func mayBreak(before [2]rune, r rune) bool {
	switch before[1] {
	case '-', '–':
		return unicode.IsLetter(before[0]) && unicode.IsLetter(r)
	case '—':
		return unicode.IsLetter(r)
	}
	return false
}

// add appends text to the word at hand.
func (m *maker) add(text string, st style) {
	for text != "" {
		var part string
		var as style
		part, as, text = m.s.printable(text, st)
		w := m.s.width(as, part)
		m.now.width += w
		if n := len(m.now.runs); n > 0 && m.now.runs[n-1].style == as && len(m.now.runs[n-1].text) < 500 {
			m.now.runs[n-1].text += part
			m.now.runs[n-1].width += w
			continue
		}
		m.now.runs = append(m.now.runs, run{as, part, w})
	}
}

// space ends the word at hand with a space after it.
func (m *maker) space(st style) {
	if m.gap == nil || m.gap.style != st {
		m.gap = &run{st, " ", m.s.width(st, " ")}
	}
	if len(m.now.runs) > 0 {
		m.now.gap = m.gap
		m.flush()
	} else if n := len(m.words); n > 0 && m.words[n-1].gap == nil {
		m.words[n-1].gap = m.gap
	}
}

// breakHere ends the word at hand without a space; must tells that the line
// ends as well.
func (m *maker) breakHere(must bool) {
	m.now.ends = must
	if len(m.now.runs) > 0 || must {
		m.flush()
	}
	m.last = [2]rune{}
}

// gapWidth is the width of the space after a word.
func (w *word) gapWidth() float64 {
	if w.gap == nil {
		return 0
	}
	return w.gap.width
}

func (m *maker) flush() {
	m.words = append(m.words, m.now)
	m.now = word{}
}

func (m *maker) close() {
	if len(m.now.runs) > 0 {
		m.flush()
	}
}

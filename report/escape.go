package report

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Visible returns s with every character shown that would act on the page
// without being seen: control characters other than newline and tab, the
// bidirectional controls (Unicode property Bidi_Control: U+061C, U+200E,
// U+200F, U+202A–202E, U+2066–2069), the line and paragraph separators
// U+2028 and U+2029, and noncharacters become ‹U+202E› and the like. CR LF
// becomes LF, and a byte that is not UTF-8 becomes U+FFFD. Every printer
// passes every text through it.
func Visible(s string) string {
	if !strings.ContainsFunc(s, hidden) && utf8.ValidString(s) {
		return s
	}
	var b strings.Builder
	for _, r := range strings.ReplaceAll(s, "\r\n", "\n") {
		if hidden(r) {
			fmt.Fprintf(&b, "‹U+%04X›", r)
		} else {
			b.WriteRune(r)
		}
	}
	return b.String()
}

// hidden reports whether Visible shows r by its number.
func hidden(r rune) bool {
	switch {
	case ' ' <= r && r <= '~', r == '\n', r == '\t': // nearly every rune there is
		return false
	case unicode.IsControl(r), unicode.Is(unicode.Bidi_Control, r), r == '\u2028', r == '\u2029':
		return true
	}
	return unicode.Is(unicode.Noncharacter_Code_Point, r)
}

// oneLine returns s as Visible does, with newlines and tabs as spaces.
func oneLine(s string) string { return spaces.Replace(Visible(s)) }

var spaces = strings.NewReplacer("\n", " ", "\t", " ")

// words returns s as oneLine does, with one space between words and none
// around them.
func words(s string) string {
	return strings.Join(strings.FieldsFunc(Visible(s), isSpace), " ")
}

// isSpace reports whether r is white space that may be taken together. A
// no-break space is not.
func isSpace(r rune) bool { return r == ' ' || r == '\n' || r == '\t' }

// Linkable reports whether printers make a link of url: http, https and
// mailto addresses, and # with the anchor of a heading (see Anchors), none
// of them holding a character that Visible would show. Of any other link
// printers print the text, and the URL behind it in brackets.
func Linkable(url string) bool {
	if !utf8.ValidString(url) || strings.ContainsFunc(url, hidden) || strings.ContainsAny(url, "\n\t") {
		return false
	}
	for _, scheme := range []string{"http://", "https://", "mailto:", "#"} {
		if n := len(scheme); len(url) > n && strings.EqualFold(url[:n], scheme) {
			return true
		}
	}
	return false
}

// linkText returns what a link shows: its text, behind its URL if that is
// blank.
func linkText(l *Link) []Inline {
	if plain(l.Inline) == "" {
		return append([]Inline{Text(l.URL)}, l.Inline...)
	}
	return l.Inline
}

// encodeURL returns url with the bytes percent-encoded that would end it
// early in Markdown or have no place in a URL.
func encodeURL(url string) string {
	var b strings.Builder
	for i := 0; i < len(url); i++ {
		c := url[i]
		if c <= ' ' || c == 0x7f || strings.IndexByte("\"()<>\\^`{|}", c) >= 0 {
			fmt.Fprintf(&b, "%%%02X", c)
		} else {
			b.WriteByte(c)
		}
	}
	return b.String()
}

// encodeName returns the name of a file as one part of a URL: letters and
// digits of any script, and . _ - ~ stay, the rest is percent-encoded.
func encodeName(name string) string {
	var b strings.Builder
	for _, r := range Visible(name) {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || strings.ContainsRune("._-~", r) {
			b.WriteRune(r)
			continue
		}
		for _, c := range []byte(string(r)) {
			fmt.Fprintf(&b, "%%%02X", c)
		}
	}
	return b.String()
}

// plain returns inlines as plain text in one line, without footnotes.
func plain(inlines []Inline) string {
	var b strings.Builder
	plainInto(&b, inlines)
	return words(b.String())
}

func plainInto(b *strings.Builder, inlines []Inline) {
	for _, in := range inlines {
		switch in := in.(type) {
		case Text:
			b.WriteString(string(in))
		case Code:
			b.WriteString(string(in))
		case Sub:
			b.WriteString(plainSub(string(in)))
		case Sup:
			b.WriteString(plainSup(string(in)))
		case *Emphasis:
			plainInto(b, in.Inline)
		case *Strong:
			plainInto(b, in.Inline)
		case *Strike:
			plainInto(b, in.Inline)
		case *Link:
			plainInto(b, in.Inline)
		case FootnoteRef:
		case LineBreak:
			b.WriteByte(' ')
		default:
			panic(unknown(in))
		}
	}
}

// plainSub returns text below the line where there is only one line: after
// a low line, in brackets if it holds a space. V with index S30 is V_S30.
func plainSub(s string) string { return plainScript("_", s) }

// plainSup returns text above the line where there is only one line: in
// superscript digits where it is made of digits and signs, else after a
// circumflex. m with exponent 2 is m², x with exponent n is x^n.
func plainSup(s string) string {
	s = words(s)
	for _, r := range s {
		if superscripts[r] == 0 {
			return plainScript("^", s)
		}
	}
	return strings.Map(func(r rune) rune { return superscripts[r] }, s)
}

func plainScript(mark, s string) string {
	switch s = words(s); {
	case s == "":
		return ""
	case strings.Contains(s, " "):
		return mark + "(" + s + ")"
	}
	return mark + s
}

var superscripts = map[rune]rune{
	'0': '⁰', '1': '¹', '2': '²', '3': '³', '4': '⁴', '5': '⁵', '6': '⁶', '7': '⁷', '8': '⁸', '9': '⁹',
	'+': '⁺', '-': '⁻', '−': '⁻',
}

// Anchors gives headings the names that # links lead to: lower case, only
// letters, digits, hyphens and low lines, spaces as hyphens, and -1, -2 …
// behind a name that is taken. They are the names under which the common
// Markdown viewers know the headings of a page. The titles of TitleBlocks
// count as headings. The zero value is ready for use; headings must come in
// the order of the document.
type Anchors struct {
	taken map[string]int // how often the name was asked for
}

// Name returns the anchor of the next heading.
func (a *Anchors) Name(heading []Inline) string {
	if a.taken == nil {
		a.taken = map[string]int{}
	}
	base := strings.Map(anchorRune, plain(heading))
	if base == "" {
		base = "section"
	}
	name := base
	for {
		n, used := a.taken[name]
		if !used {
			break
		}
		if name == base {
			a.taken[base] = n + 1
		}
		name = fmt.Sprintf("%s-%d", base, a.taken[base])
		if _, used := a.taken[name]; used {
			name = base
		}
	}
	a.taken[name] = 0
	return name
}

func anchorRune(r rune) rune {
	switch {
	case r == ' ':
		return '-'
	case unicode.IsLetter(r), unicode.IsDigit(r), unicode.IsMark(r), r == '-', r == '_':
		return unicode.ToLower(r)
	}
	return -1
}

// cellsOf returns the cells of a table's row, filled up to n with empty
// ones. It panics if there are more: printers must not drop what they hold.
func cellsOf(row TableRow, n int) [][]Inline {
	if len(row.Cells) > n {
		panic(fmt.Sprintf("report: a row of %d cells in a table of %d columns", len(row.Cells), n))
	}
	cells := make([][]Inline, n)
	copy(cells, row.Cells)
	return cells
}

// checkRef panics if ref is not the number of one of n footnotes.
func checkRef(ref FootnoteRef, n int) {
	if ref < 1 || int(ref) > n {
		panic(fmt.Sprintf("report: reference to footnote %d of %d", ref, n))
	}
}

// unknown is what a printer panics with when it meets a node that it does
// not know.
func unknown(node any) string { return fmt.Sprintf("report: unknown node %T", node) }

package report

import (
	"strconv"
	"strings"
	"unicode/utf8"
)

// token is one piece of a line of Markdown before it is escaped.
type token struct {
	kind tokenKind
	text string // as it will stand there; of a word or code, before it is escaped
	pair int    // of a delimiter: the number it shares with its other half
}

type tokenKind uint8

const (
	tokenWord  tokenKind = iota // literal text without spaces
	tokenSpace                  // where a line may be broken
	tokenBreak                  // a hard line break
	tokenCode                   // a code span
	tokenRaw                    // finished Markdown
	tokenOpen                   // a delimiter that opens: * ** or ~~
	tokenClose
)

// place says where a line of Markdown stands.
type place uint8

const (
	inProse place = iota
	inLine        // a heading or a cell: it cannot be broken
	inCell
	inLink
)

// lexer turns inlines into tokens. Emphasis inside emphasis of its own kind
// is no more than emphasis.
type lexer struct {
	place     place
	footnotes int
	active    map[string]bool // the delimiters that are open
	pairs     int
	alias     map[int]int // pairs that were joined with one before them
	out       []token
	refs      []FootnoteRef // of a link: they stand behind it
}

// lex returns the tokens of inlines at a place.
func (p *markdown) lex(inlines []Inline, at place) []token {
	l := newLexer(at, p.footnotes)
	l.inlines(inlines)
	_, tokens, _ := trimGaps(l.out)
	return keepSound(tokens, false)
}

func newLexer(at place, footnotes int) *lexer {
	return &lexer{place: at, footnotes: footnotes, active: map[string]bool{}, alias: map[int]int{}}
}

// trimGaps returns tokens without the gaps at their ends, and whether there
// were any.
func trimGaps(tokens []token) (before bool, trimmed []token, behind bool) {
	for len(tokens) > 0 && isGap(tokens[0]) {
		tokens, before = tokens[1:], true
	}
	for len(tokens) > 0 && isGap(tokens[len(tokens)-1]) {
		tokens, behind = tokens[:len(tokens)-1], true
	}
	return before, tokens, behind
}

var space = token{kind: tokenSpace, text: " "}

func isGap(t token) bool { return t.kind == tokenSpace || t.kind == tokenBreak }

func (l *lexer) inlines(inlines []Inline) {
	for _, in := range inlines {
		switch in := in.(type) {
		case Text:
			l.text(string(in))
		case Code:
			l.code(string(in))
		case Sub:
			l.text(plainSub(string(in)))
		case Sup:
			l.text(plainSup(string(in)))
		case *Emphasis:
			l.delimited("*", in.Inline)
		case *Strong:
			l.delimited("**", in.Inline)
		case *Strike:
			l.delimited("~~", in.Inline)
		case *Link:
			l.link(in)
		case FootnoteRef:
			l.footnote(in)
		case LineBreak:
			l.lineBreak()
		default:
			panic(unknown(in))
		}
	}
}

func (l *lexer) text(s string) {
	s = oneLine(s)
	for s != "" {
		word, rest, gap := strings.Cut(s, " ")
		if word != "" {
			l.out = append(l.out, token{kind: tokenWord, text: word})
		}
		if gap {
			l.gap(space)
		}
		s = rest
	}
}

// gap adds a space or a line break: one only, and none just inside of a
// delimiter.
func (l *lexer) gap(t token) {
	n := len(l.out)
	for n > 0 && l.out[n-1].kind == tokenOpen {
		n--
	}
	if n > 0 && isGap(l.out[n-1]) {
		if t.kind == tokenSpace {
			return
		}
		if l.out[n-1].kind == tokenSpace {
			l.out[n-1] = t
			return
		}
	}
	opens := append([]token(nil), l.out[n:]...)
	l.out = append(append(l.out[:n], t), opens...)
}

func (l *lexer) lineBreak() {
	if l.place == inProse {
		l.gap(token{kind: tokenBreak, text: "\\\n"})
	} else {
		l.gap(space)
	}
}

// code adds a code span. In a cell a pipe is escaped even in code, which
// leaves no way to write a backslash before one: that code becomes text.
func (l *lexer) code(s string) {
	switch s = oneLine(s); {
	case s == "":
	case l.place == inCell && strings.Contains(s, `\|`):
		l.text(s)
	default:
		l.out = append(l.out, token{kind: tokenCode, text: s})
	}
}

func (l *lexer) delimited(mark string, inlines []Inline) {
	if l.active[mark] {
		l.inlines(inlines)
		return
	}
	l.active[mark] = true
	l.pairs++
	pair := l.pairs
	l.open(mark, pair)
	l.inlines(inlines)
	l.close(mark, pair)
	l.active[mark] = false
}

// open adds an opening delimiter, or takes back the closing one just before
// it.
func (l *lexer) open(mark string, pair int) {
	if n := len(l.out); n > 0 && l.out[n-1].kind == tokenClose && l.out[n-1].text == mark {
		l.alias[pair] = l.out[n-1].pair
		l.out = l.out[:n-1]
		return
	}
	l.out = append(l.out, token{tokenOpen, mark, pair})
}

// close adds a closing delimiter before the space at the end, or takes back
// the opening one just before it.
func (l *lexer) close(mark string, pair int) {
	if joined, ok := l.alias[pair]; ok {
		pair = joined
	}
	n := len(l.out)
	for n > 0 && isGap(l.out[n-1]) {
		n--
	}
	gaps := append([]token(nil), l.out[n:]...)
	if n > 0 && l.out[n-1].kind == tokenOpen && l.out[n-1].pair == pair {
		l.out = l.out[:n-1]
	} else {
		l.out = append(l.out[:n], token{tokenClose, mark, pair})
	}
	l.out = append(l.out, gaps...)
}

func (l *lexer) footnote(ref FootnoteRef) {
	checkRef(ref, l.footnotes)
	if l.place == inLink {
		l.refs = append(l.refs, ref)
		return
	}
	l.out = append(l.out, token{kind: tokenRaw, text: "[^" + strconv.Itoa(int(ref)) + "]"})
}

// link adds a link. A link inside a link is its text alone. Space at the
// ends of its text goes outside.
func (l *lexer) link(in *Link) {
	if l.place == inLink {
		l.inlines(in.Inline)
		return
	}
	if !Linkable(in.URL) {
		l.inlines(in.Inline)
		l.text(behind(in))
		return
	}
	inner := newLexer(inLink, l.footnotes)
	inner.inlines(linkText(in))
	before, tokens, behind := trimGaps(inner.out)
	if before {
		l.gap(space)
	}
	l.out = append(l.out, token{kind: tokenRaw, text: linkSource(in, keepSound(tokens, true))})
	for _, ref := range inner.refs {
		l.footnote(ref)
	}
	if behind {
		l.gap(space)
	}
}

// linkSource returns a link with tokens as its text.
func linkSource(in *Link, tokens []token) string {
	url := encodeURL(in.URL)
	if auto, ok := autolink(source(tokens, inLink), in.URL, url); ok {
		return auto
	}
	return "[" + source(tokens, inLink) + "](" + escapeEntities(url) + ")"
}

// behind returns what stands behind the text of a link that is not made one:
// its URL in brackets, unless the text says it.
func behind(l *Link) string {
	switch url, text := words(l.URL), plain(l.Inline); {
	case url == text:
		return ""
	case text == "":
		return url
	default:
		return " (" + url + ")"
	}
}

// autolink returns a link that shows its own address: <https://…>. source is
// its text as Markdown.
func autolink(source, url, encoded string) (string, bool) {
	if source != escaped(url) || url != encoded || strings.Contains(url, "&") || url[0] == '#' {
		return "", false
	}
	return "<" + url + ">", !strings.HasPrefix(strings.ToLower(url), "mailto:")
}

// escaped returns text as Markdown in a link.
func escaped(s string) string { return source(wordTokens(s), inLink) }

func wordTokens(s string) []token {
	l := &lexer{}
	l.text(s)
	return l.out
}

// char is one character of a line of Markdown: of finished Markdown, or of
// text that may need a backslash before it.
type char struct {
	r   rune
	raw bool
}

const hardBreak = '\n' // a char, raw

// chars returns tokens as characters. Code spans that touch become one.
func chars(tokens []token) []char {
	var out []char
	for i := 0; i < len(tokens); i++ {
		switch t := tokens[i]; t.kind {
		case tokenWord, tokenSpace:
			out = appendChars(out, t.text, false)
		case tokenBreak:
			out = append(out, char{hardBreak, true})
		case tokenCode:
			text := t.text
			for ; i+1 < len(tokens) && tokens[i+1].kind == tokenCode; i++ {
				text += tokens[i+1].text
			}
			out = appendChars(out, codeSpan(text), true)
		default:
			out = appendChars(out, t.text, true)
		}
	}
	return out
}

func appendChars(out []char, s string, raw bool) []char {
	for _, r := range s {
		out = append(out, char{r, raw})
	}
	return out
}

// codeSpan returns text between runs of backticks that are longer than any
// inside, with a space more at each end where CommonMark would take one off.
func codeSpan(text string) string {
	fence := strings.Repeat("`", longestRun(text, '`')+1)
	spaced := text[0] == ' ' && text[len(text)-1] == ' ' && strings.Trim(text, " ") != ""
	if spaced || text[0] == '`' || text[len(text)-1] == '`' {
		text = " " + text + " "
	}
	return fence + text + fence
}

// source returns tokens as Markdown in one line.
func source(tokens []token, at place) string {
	return strings.Join(pieces(tokens, at), " ")
}

// pieces returns tokens as Markdown, cut at the spaces where a line may be
// broken. A piece that ends in a backslash and a newline ends its line.
func pieces(tokens []token, at place) []string {
	var out []string
	var b strings.Builder
	line := chars(tokens)
	strike := hasStrike(line)
	for i, c := range line {
		switch {
		case c.raw && c.r == hardBreak:
			out = append(out, b.String()+"\\\n")
			b.Reset()
		case !c.raw && c.r == ' ':
			out = append(out, b.String())
			b.Reset()
		case c == char{'\\', false} && i+1 < len(line) && line[i+1] == char{hardBreak, true}:
			b.WriteString("&#92;") // three backslashes confuse readers
		default:
			if !c.raw && mustEscape(line, i, at, strike) {
				b.WriteByte('\\')
			}
			b.WriteRune(c.r)
		}
	}
	return append(out, b.String())
}

// line returns inlines as Markdown that cannot be broken.
func (p *markdown) line(inlines []Inline) string {
	tokens := p.lex(inlines, inLine)
	return source(tokens, inLine)
}

// cell returns inlines as the cell of a table.
func (p *markdown) cell(inlines []Inline) string {
	tokens := p.lex(inlines, inCell)
	return strings.ReplaceAll(source(tokens, inCell), "|", `\|`)
}

// alt returns the alternative text of a picture.
func (p *markdown) alt(s string) string { return escaped(words(s)) }

// paragraph returns the lines of a paragraph, behind a task's box if there
// is one.
func (p *markdown) paragraph(box string, inlines []Inline, width int) []string {
	tokens := p.lex(inlines, inProse)
	if box != "" && len(tokens) == 0 {
		return []string{box + " " + seenSpace}
	}
	if box != "" {
		tokens = append([]token{{kind: tokenRaw, text: box}, space}, tokens...)
	}
	if len(tokens) == 0 {
		return nil
	}
	lines := wrap(pieces(tokens, inProse), max(width, 20))
	for i, line := range lines {
		if i > 0 || box == "" {
			lines[i] = escapeLineStart(line)
		}
	}
	return lines
}

// wrap returns pieces joined to lines of up to width columns, or of one
// piece.
func wrap(pieces []string, width int) []string {
	var lines []string
	line, used := "", 0
	for _, piece := range pieces {
		text, broken := strings.CutSuffix(piece, "\\\n")
		n := columns(text)
		if used > 0 && used+1+n > width {
			lines = append(lines, line)
			line, used = "", 0
		}
		if used > 0 {
			line, used = line+" ", used+1
		}
		line, used = line+text, used+n
		if broken {
			lines = append(lines, line+"\\")
			line, used = "", 0
		}
	}
	return append(lines, strings.TrimRight(line, " "))
}

// lastRune and firstRune are the characters at the ends of a piece.
func lastRune(s string) rune {
	r, _ := utf8.DecodeLastRuneInString(s)
	return r
}

func firstRune(s string) rune {
	r, _ := utf8.DecodeRuneInString(s)
	return r
}

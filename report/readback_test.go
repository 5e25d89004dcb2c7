package report

import (
	"bytes"
	"encoding/xml"
	"io"
	"regexp"
	"strings"
	"testing"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	"github.com/yuin/goldmark/parser"
	xhtml "github.com/yuin/goldmark/renderer/html"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// What stands here reads back what the printers wrote: Markdown through
// goldmark, HTML as XML. Of both the same is kept: the elements, and the
// text of every block with the style of every letter.

// style is a set of the styles a letter can have.
type style uint8

const (
	styleEm style = 1 << iota
	styleStrong
	styleStrike
	styleCode
	styleLink
)

var styleOf = map[string]style{
	"em": styleEm, "strong": styleStrong, "s": styleStrike, "del": styleStrike, "code": styleCode, "a": styleLink,
}

// letter is a character of a text; a space has no style.
type letter struct {
	r     rune
	style style
}

// chunk is the text between two borders of blocks.
type chunk []letter

func (c chunk) String() string {
	var b strings.Builder
	for _, l := range c {
		b.WriteRune(l.r)
	}
	return b.String()
}

// add appends text with white space taken together.
func (c *chunk) add(s string, st style) {
	for _, r := range s {
		switch {
		case !isSpace(r):
			*c = append(*c, letter{r, st})
		case len(*c) > 0 && (*c)[len(*c)-1].r != ' ':
			*c = append(*c, letter{' ', 0})
		}
	}
}

// page is what was read back.
type page struct {
	elements []string // all start tags, and the end tags of blocks
	blocks   []string // the same without those of inlines
	chunks   []chunk  // those that are not empty
	links    []string // href of every a that is not a footnote's
	open     chunk
}

func (p *page) flush() {
	if n := len(p.open); n > 0 && p.open[n-1].r == ' ' {
		p.open = p.open[:n-1]
	}
	if len(p.open) > 0 {
		p.chunks = append(p.chunks, p.open)
	}
	p.open = nil
}

// inlineElements do not end a text.
var inlineElements = map[string]bool{
	"em": true, "strong": true, "s": true, "del": true, "a": true, "br": true, "sub": true, "sup": true,
	"span": true, "input": true, "mi": true, "mo": true, "mn": true, "mtext": true, "mrow": true, "mfrac": true,
	"msub": true, "mover": true, "munder": true, "munderover": true, "mstyle": true,
}

// readXML reads a well-formed document. Comments are refused: the printers
// write none, and goldmark puts them where it left out raw HTML. Not strict
// means that & may stand for itself, as in the titles that goldmark writes.
func readXML(t testing.TB, source string, strict bool) *page {
	t.Helper()
	p := &page{}
	d := xml.NewDecoder(strings.NewReader(source))
	d.Strict = strict
	var stack []string
	for {
		tok, err := d.Token()
		if err == io.EOF {
			p.flush()
			return p
		}
		if err != nil {
			t.Fatalf("not well-formed: %v\n%s", err, source)
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			name := tok.Name.Local
			if isFootnoteLink(tok) {
				if err := d.Skip(); err != nil {
					t.Fatal(err)
				}
				if n := len(p.open); n > 0 && p.open[n-1].r == '\u00a0' && name == "a" {
					p.open = p.open[:n-1] // goldmark's, before its links back
				}
				continue
			}
			p.start(tok, stack)
			stack = append(stack, name)
		case xml.EndElement:
			stack = stack[:len(stack)-1]
			p.end(tok.Name.Local, stack)
		case xml.CharData:
			p.text(string(tok), stack)
		case xml.Comment:
			t.Fatalf("a comment: %s\n%s", tok, source)
		}
	}
}

func isInline(name string, stack []string) bool {
	return inlineElements[name] || name == "code" && (len(stack) == 0 || stack[len(stack)-1] != "pre")
}

func (p *page) start(e xml.StartElement, stack []string) {
	name := e.Name.Local
	if name == "span" { // the box of decimals, which depends on the numbers
		return
	}
	p.elements = append(p.elements, "<"+name+">")
	if !isInline(name, stack) {
		p.flush()
		p.blocks = append(p.blocks, "<"+name+">")
	}
	for _, a := range e.Attr {
		switch {
		case name == "a" && a.Name.Local == "href":
			p.links = append(p.links, a.Value)
		case name == "img" && a.Name.Local == "alt":
			p.open.add(a.Value, 0)
			p.flush()
		case name == "img" && a.Name.Local == "title":
			p.open.add(a.Value, 0)
			p.flush()
		}
	}
	if name == "br" {
		p.open.add(" ", 0)
	}
}

func (p *page) end(name string, stack []string) {
	if !isInline(name, stack) {
		p.flush()
		p.blocks = append(p.blocks, "</"+name+">")
	}
}

func (p *page) text(s string, stack []string) {
	var st style
	for i, name := range stack {
		if isInline(name, stack[:i]) {
			st |= styleOf[name]
		}
	}
	for _, name := range stack {
		if name == "style" {
			return
		}
	}
	p.open.add(s, st)
}

// isFootnoteLink reports whether e leads to a footnote or back from one.
func isFootnoteLink(e xml.StartElement) bool {
	for _, a := range e.Attr {
		switch {
		case a.Name.Local == "class" && (a.Value == "ref" || a.Value == "footnote-backref"):
			return true
		case a.Name.Local == "role" && a.Value == "doc-backlink":
			return true
		case a.Name.Local == "id" && strings.HasPrefix(a.Value, "fnref"):
			return true
		}
	}
	return false
}

// readMarkdown reads Markdown with goldmark, raw HTML off.
func readMarkdown(t testing.TB, source string, with goldmark.Markdown) *page {
	t.Helper()
	var b bytes.Buffer
	if err := with.Convert([]byte(source), &b); err != nil {
		t.Fatal(err)
	}
	return readXML(t, "<body>"+b.String()+"</body>", false)
}

// asWritten reads what Markdown asks for; linkifying makes links of bare
// addresses too, as many viewers do. Its mail addresses are those of GFM
// 0.29, "Autolinks (extension)", where goldmark's hold backticks too.
var (
	asWritten  = viewer(extension.Table, extension.Strikethrough, extension.TaskList)
	linkifying = viewer(extension.Table, extension.Strikethrough, extension.TaskList, extension.NewLinkify(
		extension.WithLinkifyEmailRegexp(regexp.MustCompile(`^[0-9A-Za-z._+-]+@[0-9A-Za-z_-]+(\.[0-9A-Za-z_-]+)+`)),
	))
)

func viewer(extensions ...goldmark.Extender) goldmark.Markdown {
	return goldmark.New(
		goldmark.WithExtensions(append(extensions, extension.Footnote)...),
		goldmark.WithParserOptions(parser.WithInlineParsers(util.Prioritized(mathParser{}, 50))),
		goldmark.WithRendererOptions(xhtml.WithXHTML()),
	)
}

// mathParser reads $$ … $$ as viewers do that know formulas.
type mathParser struct{}

func (mathParser) Trigger() []byte { return []byte{'$'} }

func (mathParser) Parse(_ ast.Node, block text.Reader, _ parser.Context) ast.Node {
	line, _ := block.PeekLine()
	if !bytes.HasPrefix(line, []byte("$$ ")) {
		return nil
	}
	n := bytes.Index(line[2:], []byte("$$"))
	if n < 0 {
		return nil
	}
	s := ast.NewString(append([]byte(nil), line[2:2+n]...))
	s.SetCode(true)
	block.Advance(n + 4)
	return s
}

func markdownOf(t testing.TB, d *Document) string {
	t.Helper()
	var b strings.Builder
	if err := Markdown(&b, d, MarkdownOptions{}); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func htmlOf(t testing.TB, d *Document) string {
	t.Helper()
	var b strings.Builder
	if err := HTML(&b, d, HTMLOptions{}); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// bodyOf returns what stands in main.
func bodyOf(t testing.TB, page string) string {
	t.Helper()
	_, rest, ok := strings.Cut(page, "<main>\n")
	body, _, ok2 := strings.Cut(rest, "</main>\n")
	if !ok || !ok2 {
		t.Fatalf("no main in %s", page)
	}
	return body
}

// compareTexts reports where the text read back differs from what was meant.
func compareTexts(t testing.TB, seen, meant []chunk, source string) {
	t.Helper()
	for i := range max(len(seen), len(meant)) {
		if i >= len(seen) || i >= len(meant) || seen[i].String() != meant[i].String() {
			t.Fatalf("text %d: read back\n%q\nwant\n%q\nin\n%s", i, at(seen, i), at(meant, i), source)
		}
	}
}

// compareChunks is compareTexts and compares styles too. They may be lost
// where lossy is set, never gained.
func compareChunks(t testing.TB, seen, meant []chunk, lossy bool, source string) {
	t.Helper()
	compareTexts(t, seen, meant, source)
	for i := range seen {
		for j, l := range seen[i] {
			want := meant[i][j].style
			if l.style&^want != 0 || !lossy && l.style != want {
				t.Fatalf("text %d %q: letter %d %q has style %b, want %b in\n%s", i, seen[i], j, l.r, l.style, want, source)
			}
		}
	}
}

func at(chunks []chunk, i int) string {
	if i < len(chunks) {
		return chunks[i].String()
	}
	return "nothing"
}

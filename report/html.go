package report

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
)

// HTMLOptions changes what HTML writes around a document.
type HTMLOptions struct {
	Lang  string // BCP 47 tag of the document's language; "" for "en"
	Style string // style sheet in place of the built-in one; "" for that
}

// HTML writes d as one HTML5 file that needs nothing else: pictures are
// inside, as SVG or as data, formulas are MathML, and there is no script. It
// is well-formed XML too. Its content security policy forbids scripts and
// everything from elsewhere, and of styles allows the one inside.
//
// A style sheet that holds < or & is an error, and so is a picture with a
// number that is not finite.
func HTML(w io.Writer, d *Document, opt HTMLOptions) error {
	if opt.Lang == "" {
		opt.Lang = "en"
	}
	if opt.Style == "" {
		opt.Style = Style
	}
	if strings.ContainsAny(opt.Style, "<&") {
		return errors.New("the style sheet holds < or &, which would end it early in HTML")
	}
	p := &html{b: new(strings.Builder), footnotes: len(d.Footnotes), mentions: make([]int, len(d.Footnotes)+1)}
	body := p.body(d)
	if p.err != nil {
		return p.err
	}
	_, err := io.WriteString(w, htmlHead(d, opt)+body+"</body>\n</html>\n")
	return err
}

// htmlHead returns all of a file before what is in its body.
func htmlHead(d *Document, opt HTMLOptions) string {
	var b strings.Builder
	style := "\n" + strings.TrimSpace(opt.Style) + "\n"
	fmt.Fprintf(&b, "<!DOCTYPE html>\n<html lang=\"%s\">\n<head>\n<meta charset=\"utf-8\"/>\n", escapeXML(oneLine(opt.Lang)))
	fmt.Fprintf(&b, "<meta http-equiv=\"Content-Security-Policy\" content=\"%s\"/>\n", policy(style))
	b.WriteString("<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\"/>\n")
	fmt.Fprintf(&b, "<title>%s</title>\n", escapeXML(pageTitle(d)))
	for _, m := range [][2]string{
		{"description", d.Subject}, {"author", d.Author},
		{"keywords", strings.Join(d.Keywords, ", ")}, {"generator", d.Generator},
	} {
		if text := words(m[1]); text != "" {
			fmt.Fprintf(&b, "<meta name=\"%s\" content=\"%s\"/>\n", m[0], escapeXML(text))
		}
	}
	fmt.Fprintf(&b, "<style>%s</style>\n</head>\n<body>\n", style)
	return b.String()
}

// policy returns the content security policy of a file with one style sheet
// (Content Security Policy Level 3, W3C).
func policy(style string) string {
	sum := sha256.Sum256([]byte(style))
	return "default-src 'none'; img-src data:; style-src 'sha256-" +
		base64.StdEncoding.EncodeToString(sum[:]) + "'; base-uri 'none'; form-action 'none'"
}

// pageTitle returns the title of the page, which HTML does not let be empty.
func pageTitle(d *Document) string {
	if title := words(d.Title); title != "" {
		return title
	}
	for _, b := range d.Blocks {
		if t, ok := b.(*TitleBlock); ok && words(t.Title) != "" {
			return words(t.Title)
		}
	}
	return "Report"
}

// html prints blocks into b.
type html struct {
	b         *strings.Builder
	anchors   Anchors
	footnotes int
	mentions  []int // of each footnote, by number
	inLink    bool
	held      []FootnoteRef // met inside a link: they stand behind it
	err       error         // the first
}

// body returns the body: the document and its footnotes. The notes are
// printed before they are put together, as one may mention another.
func (p *html) body(d *Document) string {
	p.b.WriteString("<main>\n")
	p.blocks(d.Blocks)
	notes := make([]string, len(d.Footnotes))
	for i, f := range d.Footnotes {
		notes[i] = p.apart(func() { p.blocks(f.Blocks) })
	}
	if len(notes) > 0 {
		p.b.WriteString("<section class=\"footnotes\" role=\"doc-endnotes\" aria-label=\"Footnotes\">\n<ol>\n")
		for i, note := range notes {
			fmt.Fprintf(p.b, "<li id=\"fn:%d\">\n%s</li>\n", i+1, withBackLinks(note, i+1, p.mentions[i+1]))
		}
		p.b.WriteString("</ol>\n</section>\n")
	}
	p.b.WriteString("</main>\n")
	return p.b.String()
}

// apart returns what print prints, and leaves p.b as it was.
func (p *html) apart(print func()) string {
	before := p.b
	p.b = new(strings.Builder)
	print()
	printed := p.b.String()
	p.b = before
	return printed
}

// withBackLinks returns a footnote with links to its mentions behind its
// last paragraph.
func withBackLinks(note string, n, mentions int) string {
	var links strings.Builder
	for i := 1; i <= mentions; i++ {
		fmt.Fprintf(&links, " <a href=\"#ref:%d:%d\" role=\"doc-backlink\" aria-label=\"Back to mention %d of footnote %d\">↑</a>", n, i, i, n)
	}
	if text, ok := strings.CutSuffix(note, "</p>\n"); ok {
		return text + links.String() + "</p>\n"
	}
	return note + "<p>" + strings.TrimSpace(links.String()) + "</p>\n"
}

func (p *html) blocks(blocks []Block) {
	for _, b := range blocks {
		p.block(b)
	}
}

func (p *html) block(b Block) {
	switch b := b.(type) {
	case *Heading:
		p.heading(min(max(b.Level, 1), 6), b.Inline)
	case *Paragraph:
		if len(b.Inline) > 0 {
			p.element("p", "", b.Inline)
		}
	case *List:
		p.list(b)
	case *Quote:
		p.container("blockquote", "", b.Blocks)
	case *CodeBlock:
		p.code(b)
	case *Table:
		p.table(b)
	case *Figure:
		p.figure(b)
	case *Image:
		p.image(b)
	case *Formula:
		p.b.WriteString("<div class=\"formula\">" + mathML(b.Math) + "</div>\n")
	case *Rule:
		p.b.WriteString("<hr/>\n")
	case *TitleBlock:
		p.titleBlock(b)
	case *Summary:
		p.summary(b)
	case *CautionBox:
		p.container("div", ` class="caution" role="note" aria-label="Caution"`, b.Blocks)
	case *SignOff:
		p.signOff(b)
	case *PageBreak:
		p.b.WriteString("<div class=\"page-break\"></div>\n")
	default:
		panic(unknown(b))
	}
}

// element prints inlines in an element, on a line of its own.
func (p *html) element(name, attributes string, inlines []Inline) {
	p.b.WriteString("<" + name + attributes + ">")
	p.inlines(inlines)
	p.b.WriteString("</" + name + ">\n")
}

func (p *html) container(name, attributes string, blocks []Block) {
	p.b.WriteString("<" + name + attributes + ">\n")
	p.blocks(blocks)
	p.b.WriteString("</" + name + ">\n")
}

func (p *html) heading(level int, inlines []Inline) {
	id := ` id="` + escapeXML(p.anchors.Name(inlines)) + `"`
	p.element("h"+strconv.Itoa(level), id, inlines)
}

func (p *html) list(l *List) {
	name, attributes := "ul", ""
	if l.Ordered {
		name = "ol"
		if l.Start != 1 {
			attributes = fmt.Sprintf(` start="%d"`, l.Start)
		}
	}
	p.b.WriteString("<" + name + attributes + ">\n")
	for _, item := range l.Items {
		p.item(item, l.Tight)
	}
	p.b.WriteString("</" + name + ">\n")
}

// item prints an item of a list. The first paragraph of one in a tight list,
// or behind a box, is bare.
func (p *html) item(item ListItem, tight bool) {
	switch item.Task {
	case NoTask:
		p.b.WriteString("<li>")
	case TaskOpen:
		p.b.WriteString(`<li class="task"><input type="checkbox" disabled="disabled" aria-label="open"/> `)
	case TaskDone:
		p.b.WriteString(`<li class="task"><input type="checkbox" disabled="disabled" checked="checked" aria-label="done"/> `)
	default:
		panic(unknown(item.Task))
	}
	blocks := item.Blocks
	if len(blocks) > 0 && (tight || item.Task != NoTask) {
		if para, ok := blocks[0].(*Paragraph); ok {
			p.inlines(para.Inline)
			blocks = blocks[1:]
		}
	}
	if len(blocks) > 0 {
		p.b.WriteByte('\n')
	}
	p.blocks(blocks)
	p.b.WriteString("</li>\n")
}

func (p *html) code(c *CodeBlock) {
	attributes := ""
	if language := strings.Map(infoRune, c.Language); language != "" {
		attributes = ` class="language-` + language + `"`
	}
	text := Visible(c.Text)
	if text != "" && !strings.HasSuffix(text, "\n") {
		text += "\n"
	}
	fmt.Fprintf(p.b, "<pre><code%s>%s</code></pre>\n", attributes, escapeXML(text))
}

func (p *html) figure(f *Figure) {
	if f.Picture == nil {
		panic(fmt.Sprintf("report: figure %q has no picture", f.Name))
	}
	title := plain(f.Caption)
	if title == "" {
		title = f.Name
	}
	var picture bytes.Buffer
	if err := f.Picture.SVG(&picture, title, f.Alt); err != nil && p.err == nil {
		p.err = fmt.Errorf("figure %q: %w", f.Name, err)
	}
	p.b.WriteString("<figure>\n" + picture.String())
	if len(f.Caption) > 0 {
		p.element("figcaption", "", f.Caption)
	}
	p.b.WriteString("</figure>\n")
}

func (p *html) image(i *Image) {
	var media string
	switch i.Format {
	case "png", "jpeg":
		media = "image/" + i.Format
	default:
		panic(fmt.Sprintf("report: image %q of unknown format %q", i.Name, i.Format))
	}
	fmt.Fprintf(p.b, `<figure><img src="data:%s;base64,%s" alt="%s"`, media,
		base64.StdEncoding.EncodeToString(i.Data), escapeXML(words(i.Alt)))
	if i.Width > 0 && i.Height > 0 {
		fmt.Fprintf(p.b, ` width="%d" height="%d"`, i.Width, i.Height)
	}
	if title := words(i.Title); title != "" {
		fmt.Fprintf(p.b, ` title="%s"`, escapeXML(title))
	}
	p.b.WriteString("/></figure>\n")
}

package report

import (
	"fmt"
	"strings"
)

var xmlEscaper = strings.NewReplacer("&", "&amp;", "<", "&lt;", ">", "&gt;", `"`, "&#34;", "'", "&#39;")

// escapeXML returns s as text of HTML or XML, inside or outside of
// attributes. It must have gone through Visible.
func escapeXML(s string) string { return xmlEscaper.Replace(s) }

func (p *html) text(s string) { p.b.WriteString(escapeXML(oneLine(s))) }

func (p *html) inlines(inlines []Inline) {
	for _, in := range inlines {
		p.inline(in)
	}
}

func (p *html) inline(in Inline) {
	switch in := in.(type) {
	case Text:
		p.text(string(in))
	case Code:
		p.tagged("code", func() { p.text(string(in)) })
	case Sub:
		p.tagged("sub", func() { p.text(string(in)) })
	case Sup:
		p.tagged("sup", func() { p.text(string(in)) })
	case *Emphasis:
		p.tagged("em", func() { p.inlines(in.Inline) })
	case *Strong:
		p.tagged("strong", func() { p.inlines(in.Inline) })
	case *Strike:
		p.tagged("s", func() { p.inlines(in.Inline) })
	case *Link:
		p.link(in)
	case FootnoteRef:
		p.footnoteRef(in)
	case LineBreak:
		p.b.WriteString("<br/>\n")
	default:
		panic(unknown(in))
	}
}

func (p *html) tagged(name string, print func()) {
	p.b.WriteString("<" + name + ">")
	print()
	p.b.WriteString("</" + name + ">")
}

// link prints a link. A link inside a link is its text alone, and footnotes
// mentioned inside it stand behind it.
func (p *html) link(l *Link) {
	switch {
	case p.inLink:
		p.inlines(l.Inline)
		return
	case !Linkable(l.URL):
		p.inlines(l.Inline)
		p.text(behind(l))
		return
	}
	p.inLink = true
	fmt.Fprintf(p.b, `<a href="%s">`, escapeXML(encodeURL(l.URL)))
	p.inlines(linkText(l))
	p.b.WriteString("</a>")
	p.inLink = false
	held := p.held
	p.held = nil
	for _, ref := range held {
		p.footnoteRef(ref)
	}
}

func (p *html) footnoteRef(ref FootnoteRef) {
	checkRef(ref, p.footnotes)
	if p.inLink {
		p.held = append(p.held, ref)
		return
	}
	p.mentions[ref]++
	fmt.Fprintf(p.b, `<sup class="ref"><a id="ref:%d:%d" href="#fn:%d" role="doc-noteref" aria-label="Footnote %d">%d</a></sup>`,
		ref, p.mentions[ref], ref, ref, ref)
}

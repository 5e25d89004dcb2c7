package report

import (
	"fmt"
	"strings"
)

// meant is what a document's text should be read back as.
type meant struct {
	html   bool // else Markdown
	chunks []chunk
	open   chunk
	notes  []Footnote
}

func meantBy(d *Document, html bool) []chunk {
	m := &meant{html: html, notes: d.Footnotes}
	m.blocks(d.Blocks)
	for _, f := range d.Footnotes {
		m.blocks(f.Blocks)
	}
	return m.chunks
}

func (m *meant) flush() {
	p := page{open: m.open, chunks: m.chunks}
	p.flush()
	m.open, m.chunks = nil, p.chunks
}

func (m *meant) line(inlines []Inline) {
	m.inlines(inlines, 0)
	m.flush()
}

func (m *meant) string(s string, st style) {
	m.open.add(Visible(s), st)
	m.flush()
}

func (m *meant) blocks(blocks []Block) {
	for _, b := range blocks {
		m.block(b)
	}
}

func (m *meant) block(b Block) {
	switch b := b.(type) {
	case *Heading:
		m.line(b.Inline)
	case *Paragraph:
		m.line(b.Inline)
	case *List:
		for _, item := range b.Items {
			m.blocks(item.Blocks)
		}
	case *Quote:
		m.blocks(b.Blocks)
	case *CautionBox:
		m.blocks(b.Blocks)
	case *CodeBlock:
		m.string(b.Text, 0)
	case *Table:
		m.table(b)
	case *Figure:
		m.figure(b)
	case *Image:
		m.string(b.Alt, 0)
		m.string(b.Title, 0)
	case *Formula:
		if m.html {
			m.math(b.Math)
			m.flush()
		} else {
			m.string(latex(b.Math), 0)
		}
	case *TitleBlock:
		m.string(b.Title, 0)
		m.fields(b.Fields)
	case *Summary:
		m.string(b.Heading, 0)
		m.string(b.Label, 0)
		m.string(b.Answer, styleStrong)
		m.fields(b.Fields)
	case *SignOff:
		for _, c := range signOffColumns(b) {
			m.string(c, 0)
		}
		for _, s := range b.Signatures {
			for _, text := range []string{s.Role, s.Name, s.Title, s.Date} {
				m.string(text, 0)
			}
		}
	}
}

func (m *meant) fields(fields []Field) {
	for _, f := range fields {
		m.string(f.Label, 0)
		m.line(f.Value)
	}
}

func (m *meant) figure(f *Figure) {
	if !m.html {
		m.string(f.Alt, 0)
		m.inlines(f.Caption, styleEm)
		m.flush()
		return
	}
	title := plain(f.Caption)
	if title == "" {
		title = f.Name
	}
	m.string(title, 0)
	m.string(f.Alt, 0)
	for _, mark := range f.Picture.Marks {
		if l, ok := mark.(*Label); ok {
			m.string(l.Text, 0)
		}
	}
	m.line(f.Caption)
}

func (m *meant) table(t *Table) {
	caption, total := styleEm, styleStrong
	if m.html {
		caption, total = 0, 0 // the style sheet's
	}
	m.inlines(t.Caption, caption)
	m.flush()
	for _, c := range t.Columns {
		m.line(c.Header)
	}
	for _, r := range t.Rows {
		for i, cell := range r.Cells {
			if r.Marked && i == 0 {
				m.open.add("▸ ", 0)
			}
			var st style
			if r.Emphasis {
				st = total
			}
			m.inlines(cell, st)
			m.flush()
		}
	}
	for _, n := range t.Notes {
		m.line(n)
	}
}

func (m *meant) math(f Math) {
	switch f := f.(type) {
	case MathRow:
		for _, piece := range f {
			m.math(piece)
		}
	case MathIdent:
		m.open.add(words(string(f)), 0)
	case MathText:
		m.open.add(strings.ReplaceAll(oneLine(string(f)), " ", "\u00a0"), 0)
	case MathFrac:
		m.math(f.Num)
		m.math(f.Den)
	case MathSub:
		m.math(f.Base)
		m.math(f.Sub)
	case MathOver:
		m.math(f.Base)
		m.open.add("‾", 0)
	case MathSum:
		m.open.add("∑", 0)
		if f.From != nil {
			m.math(f.From)
		}
		if f.To != nil {
			m.math(f.To)
		}
	}
}

func (m *meant) inlines(inlines []Inline, st style) {
	for _, in := range inlines {
		switch in := in.(type) {
		case Text:
			m.open.add(Visible(string(in)), st)
		case Code:
			m.open.add(Visible(string(in)), st|styleCode)
		case Sub:
			m.script(string(in), plainSub, st)
		case Sup:
			m.script(string(in), plainSup, st)
		case *Emphasis:
			m.inlines(in.Inline, st|styleEm)
		case *Strong:
			m.inlines(in.Inline, st|styleStrong)
		case *Strike:
			m.inlines(in.Inline, st|styleStrike)
		case *Link:
			m.link(in, st)
		case LineBreak:
			m.open.add(" ", 0)
		case FootnoteRef:
		default:
			panic(fmt.Sprintf("%T", in))
		}
	}
}

func (m *meant) script(s string, inOneLine func(string) string, st style) {
	if !m.html {
		s = inOneLine(s)
	}
	m.open.add(Visible(s), st)
}

func (m *meant) link(l *Link, st style) {
	if st&styleLink != 0 {
		m.inlines(l.Inline, st)
		return
	}
	if !Linkable(l.URL) {
		m.inlines(l.Inline, st)
		m.open.add(behind(l), st)
		return
	}
	m.inlines(linkText(l), st|styleLink)
}

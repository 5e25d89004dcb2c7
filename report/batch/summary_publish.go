package batch

import (
	"errors"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"

	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/templates"
)

// templateFile is the name under which the summary's template appears in
// faults.
const templateFile = "batch summary template"

// publish writes the summary's pages and figures.
func publish(s *stage, opt *DeriveOptions) error {
	o, err := newOverview(s.dir, opt)
	if err != nil {
		return err
	}
	if err := o.draw(s.dir); err != nil {
		return err
	}
	d, err := o.document()
	if err != nil {
		return err
	}
	err = errors.Join(
		s.write(SummaryMarkdown, func(w io.Writer) error { return report.Markdown(w, d, report.MarkdownOptions{}) }),
		s.write(SummaryHTML, func(w io.Writer) error { return report.HTML(w, d, report.HTMLOptions{}) }),
		s.write(SummaryPDF, func(w io.Writer) error { return writePDF(w, d, opt) }),
	)
	for b := range d.All() {
		if f, ok := b.(*report.Figure); ok {
			err = errors.Join(err, s.write(Figures+"/"+f.Name+".svg", func(w io.Writer) error {
				return f.Picture.SVG(w, report.PlainText(f.Caption), f.Alt)
			}))
		}
	}
	return err
}

// document evaluates the template.
func (o *overview) document() (*report.Document, error) {
	body := o.opt.Template
	if body == "" {
		body = templates.Batch
	}
	nb, err := notebook.ParseOwn(templateFile, []byte(o.frontMatter()+body))
	if err != nil {
		return nil, err
	}
	r, err := notebook.Evaluate(nb, notebook.Options{Version: o.opt.Version, Command: o.opt.Command, Own: o.workings(),
		ReadFile: func(string) ([]byte, error) { return nil, errors.New("a summary reads no files") }})
	if err != nil {
		return nil, err
	}
	return r.Document, nil
}

// frontMatter is the front matter of the notebook. Texts are written as JSON
// strings, which YAML reads as they are.
func (o *overview) frontMatter() string {
	b := []byte("---\n")
	for _, f := range []struct{ key, value string }{
		{"title", o.opt.title()}, {"project", o.opt.Project}, {"prepared by", o.opt.PreparedBy}, {"date", o.opt.Date},
	} {
		if f.value != "" {
			b = append(appendJSONString(append(b, f.key+": "...), []byte(f.value)), '\n')
		}
	}
	if o.opt.US {
		b = append(b, "units: US\n"...)
	}
	if o.opt.Letter {
		b = append(b, "paper: Letter\n"...)
	}
	return string(append(b, "---\n\n"...))
}

// writePDF writes the pages. Characters that the fonts cannot print, as in the
// name of a profile, stand there as their numbers: one name must not keep the
// pages of a whole batch from being printed.
func writePDF(w io.Writer, d *report.Document, opt *DeriveOptions) error {
	var paper pdf.Options
	if opt.Letter {
		paper.Paper = pdf.Letter
	}
	err := pdf.Write(w, d, paper)
	var missing *pdf.MissingGlyphs
	if !errors.As(err, &missing) {
		return err
	}
	return pdf.Write(w, numbered(d, missing.Runes), paper)
}

// numbered is a copy of a document in which characters stand as their numbers
// in Unicode, with a paragraph that says so.
func numbered(d *report.Document, runes []rune) *report.Document {
	var pairs []string
	for _, r := range runes {
		pairs = append(pairs, string(r), fmt.Sprintf("[U+%04X]", r))
	}
	spell := strings.NewReplacer(pairs...)
	c := *d
	for _, text := range []*string{&c.Title, &c.Author, &c.Project} {
		*text = spell.Replace(*text)
	}
	c.Blocks = slices.Clone(d.Blocks)
	for i, b := range c.Blocks {
		c.Blocks[i] = spelled(b, spell)
	}
	c.Blocks = append(c.Blocks, paragraph("Characters that the fonts of these pages cannot print stand as their numbers in Unicode, "+
		strconv.Itoa(len(runes))+" of them; summary.md and summary.csv have them as they are."))
	return &c
}

// spelled is a copy of a block with its texts replaced. Only blocks that hold
// texts of the input are looked into.
func spelled(b report.Block, spell *strings.Replacer) report.Block {
	inline := func(in []report.Inline) []report.Inline { return spelledInlines(in, spell) }
	switch b := b.(type) {
	case *report.Heading:
		return &report.Heading{Level: b.Level, Inline: inline(b.Inline)}
	case *report.Paragraph:
		return &report.Paragraph{Inline: inline(b.Inline)}
	case *report.TitleBlock:
		return &report.TitleBlock{Title: spell.Replace(b.Title), Fields: spelledFields(b.Fields, spell)}
	case *report.Summary:
		c := *b
		c.Heading, c.Label, c.Answer = spell.Replace(b.Heading), spell.Replace(b.Label), spell.Replace(b.Answer)
		c.Fields = spelledFields(b.Fields, spell)
		return &c
	case *report.Table:
		c := *b
		c.Caption, c.Rows = inline(b.Caption), slices.Clone(b.Rows)
		for i := range c.Rows {
			c.Rows[i].Cells = spelledCells(b.Rows[i].Cells, spell)
		}
		c.Notes = spelledCells(b.Notes, spell)
		return &c
	case *report.List:
		c := *b
		c.Items = slices.Clone(b.Items)
		for i := range c.Items {
			c.Items[i].Blocks = slices.Clone(b.Items[i].Blocks)
			for k := range c.Items[i].Blocks {
				c.Items[i].Blocks[k] = spelled(b.Items[i].Blocks[k], spell)
			}
		}
		return &c
	case *report.Figure:
		c := *b
		c.Caption = inline(b.Caption)
		return &c
	default:
		return b
	}
}

func spelledFields(fields []report.Field, spell *strings.Replacer) []report.Field {
	out := make([]report.Field, len(fields))
	for i, f := range fields {
		out[i] = report.Field{Label: spell.Replace(f.Label), Value: spelledInlines(f.Value, spell)}
	}
	return out
}

func spelledCells(cells [][]report.Inline, spell *strings.Replacer) [][]report.Inline {
	out := make([][]report.Inline, len(cells))
	for i, c := range cells {
		out[i] = spelledInlines(c, spell)
	}
	return out
}

func spelledInlines(in []report.Inline, spell *strings.Replacer) []report.Inline {
	out := slices.Clone(in)
	for i := range out {
		switch t := out[i].(type) {
		case report.Text:
			out[i] = report.Text(spell.Replace(string(t)))
		case report.Code:
			out[i] = report.Code(spell.Replace(string(t)))
		case *report.Strong:
			out[i] = &report.Strong{Inline: spelledInlines(t.Inline, spell)}
		}
	}
	return out
}

package report

import (
	"fmt"
	"slices"
	"strings"
	"unicode/utf8"
)

func (p *html) table(t *Table) {
	class := "data"
	if t.Compact {
		class = "data compact"
	}
	width := ""
	if slices.ContainsFunc(t.Columns, func(c TableColumn) bool { return c.Wide }) {
		width = ` class="full"`
	}
	fmt.Fprintf(p.b, "<div class=\"%s\">\n<table%s>\n", class, width)
	if len(t.Caption) > 0 {
		p.element("caption", "", t.Caption)
	}
	tails := make([]int, len(t.Columns))
	p.b.WriteString("<thead>\n<tr>")
	for i, c := range t.Columns {
		tails[i] = decimalTail(t, i)
		p.cell("th", ` scope="col"`, columnClass(c), c.Header, 0)
	}
	p.b.WriteString("</tr>\n</thead>\n<tbody>\n")
	for _, r := range t.Rows {
		p.row(t, r, tails)
	}
	p.b.WriteString("</tbody>\n</table>\n")
	for _, note := range t.Notes {
		p.element("p", ` class="note"`, note)
	}
	p.b.WriteString("</div>\n")
}

func (p *html) row(t *Table, r TableRow, tails []int) {
	switch {
	case r.Marked && r.Emphasis:
		p.b.WriteString(`<tr class="marked total" aria-current="true">`)
	case r.Marked:
		p.b.WriteString(`<tr class="marked" aria-current="true">`)
	case r.Emphasis:
		p.b.WriteString(`<tr class="total">`)
	default:
		p.b.WriteString("<tr>")
	}
	for i, c := range cellsOf(r, len(t.Columns)) {
		if r.Marked && i == 0 {
			c = append([]Inline{Text(markedRow)}, c...)
		}
		p.cell("td", "", columnClass(t.Columns[i]), c, tails[i])
	}
	p.b.WriteString("</tr>\n")
}

// columnClass returns the class of the cells of a column; "" for the common
// one.
func columnClass(c TableColumn) string {
	class := ""
	switch c.Align {
	case AlignLeft:
	case AlignCentre:
		class = "centre"
	case AlignRight, AlignDecimal:
		class = "right"
	default:
		panic(unknown(c.Align))
	}
	switch {
	case c.Wide && class == "":
		return "wide"
	case c.Wide:
		return class + " wide"
	}
	return class
}

// cell prints a cell. Where tail is not 0 what follows the decimal point of
// its number stands in a box of that width, so that the points of a column
// stand below each other.
func (p *html) cell(name, attributes, class string, inlines []Inline, tail int) {
	p.b.WriteString("<" + name + attributes)
	if class != "" {
		p.b.WriteString(` class="` + class + `"`)
	}
	p.b.WriteString(">")
	before, behind, ok := splitDecimal(inlines)
	if tail > 0 && ok {
		p.inlines(before)
		fmt.Fprintf(p.b, `<span class="tail%d">`, tail)
		p.inlines(behind)
		p.b.WriteString("</span>")
	} else {
		p.inlines(inlines)
	}
	p.b.WriteString("</" + name + ">")
}

// splitDecimal returns a cell in two parts, the second from the decimal
// point on, and whether it begins with a number.
func splitDecimal(inlines []Inline) (before, behind []Inline, ok bool) {
	for i, in := range inlines {
		text, isText := in.(Text)
		if !isText {
			return nil, nil, false
		}
		s := strings.TrimLeft(oneLine(string(text)), " ")
		if s == "" || s == markedRow {
			continue
		}
		point, ok := decimalPoint(s)
		before = append(append(before, inlines[:i]...), Text(s[:point]))
		behind = append(append(behind, Text(s[point:])), inlines[i+1:]...)
		return before, behind, ok
	}
	return nil, nil, false
}

// decimalTail returns the width of the widest part behind a decimal point in
// a column, in digits, rounded up; 0 if its decimals are not aligned, or all
// are whole numbers. The style sheet knows widths up to 12.
func decimalTail(t *Table, col int) int {
	if t.Columns[col].Align != AlignDecimal {
		return 0
	}
	widest := 0
	for _, r := range t.Rows {
		_, behind, ok := splitDecimal(cellsOf(r, len(t.Columns))[col])
		if !ok {
			continue
		}
		n := utf8.RuneCountInString(plain(behind))
		for _, in := range behind {
			if _, ok := in.(FootnoteRef); ok {
				n++
			}
		}
		widest = max(widest, n)
	}
	return min(widest, 12)
}

// titleBlock prints the head of a report: a heading, and a table in which
// each row has its heading.
func (p *html) titleBlock(t *TitleBlock) {
	p.b.WriteString("<header>\n")
	if t.Title != "" {
		p.heading(1, []Inline{Text(t.Title)})
	}
	if len(t.Fields) > 0 {
		p.b.WriteString("<table class=\"fields\">\n<tbody>\n")
		p.fields(t.Fields)
		p.b.WriteString("</tbody>\n</table>\n")
	}
	p.b.WriteString("</header>\n")
}

func (p *html) summary(s *Summary) {
	p.b.WriteString("<table class=\"summary\">\n")
	if s.Heading != "" {
		p.element("caption", "", []Inline{Text(s.Heading)})
	}
	p.b.WriteString("<tbody>\n<tr class=\"answer\">")
	p.label(s.Label)
	p.cell("td", "", "", []Inline{&Strong{[]Inline{Text(s.Answer)}}}, 0)
	p.b.WriteString("</tr>\n")
	p.fields(s.Fields)
	p.b.WriteString("</tbody>\n</table>\n")
}

func (p *html) fields(fields []Field) {
	for _, f := range fields {
		p.b.WriteString("<tr>")
		p.label(f.Label)
		p.cell("td", "", "", f.Value, 0)
		p.b.WriteString("</tr>\n")
	}
}

func (p *html) label(s string) { p.cell("th", ` scope="row"`, "", []Inline{Text(s)}, 0) }

// signOff prints a table with room for signatures and seals.
func (p *html) signOff(s *SignOff) {
	columns := signOffColumns(s)
	p.b.WriteString("<table class=\"sign-off\">\n<thead>\n<tr>")
	for _, c := range columns {
		p.cell("th", ` scope="col"`, "", []Inline{Text(c)}, 0)
	}
	p.b.WriteString("</tr>\n</thead>\n<tbody>\n")
	for _, sig := range s.Signatures {
		p.signature(sig, len(columns))
	}
	p.b.WriteString("</tbody>\n</table>\n")
}

func (p *html) signature(s Signature, columns int) {
	p.b.WriteString("<tr>")
	p.label(s.Role)
	for _, text := range []string{s.Name, s.Title, s.Date, ""} {
		p.cell("td", "", "", []Inline{Text(text)}, 0)
	}
	switch {
	case s.Seal:
		p.cell("td", "", "seal", nil, 0)
	case columns > 5:
		p.cell("td", "", "", nil, 0)
	}
	p.b.WriteString("</tr>\n")
}

package report

import (
	"io"
	"strconv"
	"strings"
)

// MarkdownOptions says where a Markdown file finds its pictures.
type MarkdownOptions struct {
	Figures string // what stands before the names of figures; "" for "figures/"
	Images  string // what stands before the names of images; "" for "images/"
}

// lineWidth is the width in columns to which prose is wrapped.
const lineWidth = 80

// Markdown writes d as CommonMark with the tables, strike-through, task
// lists and footnotes of GitHub Flavored Markdown (CommonMark 0.31.2; GFM
// 0.29), and formulas between $$ as LaTeX. There is no raw HTML in it.
//
// It also reads well as plain text: prose is wrapped at 80 columns, tables
// are padded into columns with their decimal points below each other, and
// only what would be taken for markup is escaped. Code, links and tables are
// never wrapped.
//
// What Markdown has no form for is printed so: text below and above the line
// as V_S30, m² and x^n; a title block as a heading and a table of two
// columns; a summary as a table with the answer in bold; a caution box as a
// quotation; a sign-off as a table with room to write; captions in italics;
// a page break not at all; a line break in a heading or a table as a space.
// Emphasis that CommonMark cannot express, as in the middle of a word next
// to punctuation, is left out and its text kept.
func Markdown(w io.Writer, d *Document, opt MarkdownOptions) error {
	if opt.Figures == "" {
		opt.Figures = "figures/"
	}
	if opt.Images == "" {
		opt.Images = "images/"
	}
	p := &markdown{opt: opt, footnotes: len(d.Footnotes)}
	lines := p.blocks(d.Blocks, lineWidth)
	for i, f := range d.Footnotes {
		lines = apart(lines, p.footnote(i+1, f))
	}
	if len(lines) == 0 {
		return nil
	}
	_, err := io.WriteString(w, strings.Join(lines, "\n")+"\n")
	return err
}

// markdown prints blocks into lines. A container prints what it holds at its
// own width and then puts its prefix before the lines.
type markdown struct {
	opt       MarkdownOptions
	footnotes int
}

// blocks returns the lines of blocks with an empty line between them.
func (p *markdown) blocks(blocks []Block, width int) []string {
	return p.after(nil, nil, blocks, width, false)
}

// after returns lines, of which block last came last, and the lines of
// blocks behind them. In tight lists a list follows its paragraph directly.
func (p *markdown) after(lines []string, last Block, blocks []Block, width int, tight bool) []string {
	lastOther := false
	for _, b := range blocks {
		other := adjoin(last, b) && !lastOther
		part := p.block(b, width, other)
		if len(part) == 0 {
			continue
		}
		if tight && interrupts(last, b) {
			lines = append(lines, part...)
		} else {
			lines = apart(lines, part)
		}
		last, lastOther = b, other
	}
	return lines
}

// adjoin reports whether a and b are lists that Markdown would join.
func adjoin(a, b Block) bool {
	first, ok := a.(*List)
	second, ok2 := b.(*List)
	return ok && ok2 && first.Ordered == second.Ordered
}

// apart returns both with an empty line between them.
func apart(lines, part []string) []string {
	if len(lines) > 0 && len(part) > 0 {
		lines = append(lines, "")
	}
	return append(lines, part...)
}

func (p *markdown) block(b Block, width int, otherMarker bool) []string {
	switch b := b.(type) {
	case *Heading:
		return p.heading(b.Level, b.Inline)
	case *Paragraph:
		return p.paragraph("", b.Inline, width)
	case *List:
		return p.list(b, width, otherMarker)
	case *Quote:
		return p.quote(b.Blocks, width)
	case *CodeBlock:
		return codeBlock(b)
	case *Table:
		return p.table(b, width)
	case *Figure:
		return p.figure(b, width)
	case *Image:
		return p.image(b)
	case *Formula:
		return []string{"$$ " + latex(b.Math) + " $$"}
	case *Rule:
		return []string{"***"} // not ---, which becomes one with a bullet
	case *TitleBlock:
		return p.titleBlock(b)
	case *Summary:
		return p.summary(b)
	case *CautionBox:
		return p.quote(b.Blocks, width)
	case *SignOff:
		return p.signOff(b)
	case *PageBreak:
		return nil
	default:
		panic(unknown(b))
	}
}

func (p *markdown) heading(level int, inlines []Inline) []string {
	marks := strings.Repeat("#", min(max(level, 1), 6))
	return []string{strings.TrimRight(marks+" "+closeHeading(p.line(inlines)), " ")}
}

func (p *markdown) quote(blocks []Block, width int) []string {
	lines := p.blocks(blocks, width-2)
	if len(lines) == 0 {
		return []string{">"}
	}
	return prefixed(lines, "> ", "> ")
}

// prefixed returns lines with first before the first and rest before the
// others, without space at the end of empty lines.
func prefixed(lines []string, first, rest string) []string {
	out := make([]string, len(lines))
	for i, line := range lines {
		if out[i] = rest + line; i == 0 {
			out[i] = first + line
		}
		if line == "" {
			out[i] = strings.TrimRight(out[i], " ")
		}
	}
	return out
}

// seenSpace is a space that is not white space to Markdown.
const seenSpace = "&#32;"

// list returns the lines of a list. An empty item holds a space: some readers
// end the list behind one that holds nothing, or show the box of a task.
func (p *markdown) list(l *List, width int, other bool) []string {
	var lines []string
	for i, item := range l.Items {
		marker := marker(l, i, other)
		part := p.item(item, l.Tight, width-len(marker))
		if len(part) == 0 {
			part = []string{seenSpace}
		}
		part = prefixed(part, marker, strings.Repeat(" ", len(marker)))
		if l.Tight {
			lines = append(lines, part...)
		} else {
			lines = apart(lines, part)
		}
	}
	return lines
}

// marker returns what stands before item i. CommonMark allows numbers from 0
// of up to nine digits.
func marker(l *List, i int, other bool) string {
	switch {
	case l.Ordered && other:
		return strconv.Itoa(min(max(l.Start+i, 0), 999999999)) + ") "
	case l.Ordered:
		return strconv.Itoa(min(max(l.Start+i, 0), 999999999)) + ". "
	case other:
		return "+ "
	}
	return "- "
}

func (p *markdown) item(item ListItem, tight bool, width int) []string {
	box := taskBox(item.Task)
	if box == "" {
		return p.after(nil, nil, item.Blocks, width, tight)
	}
	first, rest := &Paragraph{}, item.Blocks
	if len(rest) > 0 {
		if para, ok := rest[0].(*Paragraph); ok {
			first, rest = para, rest[1:]
		}
	}
	return p.after(p.paragraph(box, first.Inline, width), first, rest, width, tight)
}

// interrupts reports whether b is a list that CommonMark lets follow
// paragraph a without an empty line.
func interrupts(a, b Block) bool {
	_, ok := a.(*Paragraph)
	l, ok2 := b.(*List)
	return ok && ok2 && (!l.Ordered || l.Start == 1)
}

func taskBox(t Task) string {
	switch t {
	case NoTask:
		return ""
	case TaskOpen:
		return "[ ]"
	case TaskDone:
		return "[x]"
	default:
		panic(unknown(t))
	}
}

// codeBlock returns a fence that is longer than any in the text.
func codeBlock(c *CodeBlock) []string {
	text := strings.TrimSuffix(Visible(c.Text), "\n")
	fence := strings.Repeat("`", max(3, longestRun(text, '`')+1))
	lines := []string{fence + strings.Map(infoRune, c.Language)}
	if c.Text != "" {
		lines = append(lines, strings.Split(text, "\n")...)
	}
	return append(lines, fence)
}

// infoRune keeps what names of languages are made of.
func infoRune(r rune) rune {
	if r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || strings.ContainsRune("+-._", r) {
		return r
	}
	return -1
}

// longestRun returns the length of the longest run of c in s.
func longestRun(s string, c byte) int {
	longest, run := 0, 0
	for i := 0; i < len(s); i++ {
		if run++; s[i] != c {
			run = 0
		}
		longest = max(longest, run)
	}
	return longest
}

func (p *markdown) figure(f *Figure, width int) []string {
	line := "![" + p.alt(f.Alt) + "](" + encodeURL(p.opt.Figures) + encodeName(f.Name) + ".svg)"
	return apart([]string{line}, p.caption(f.Caption, width))
}

func (p *markdown) image(i *Image) []string {
	line := "![" + p.alt(i.Alt) + "](" + encodeURL(p.opt.Images) + encodeName(i.Name)
	if title := words(i.Title); title != "" {
		line += ` "` + escapeTitle(title) + `"`
	}
	return []string{line + ")"}
}

// caption returns a caption in italics; none if it is empty.
func (p *markdown) caption(inlines []Inline, width int) []string {
	return p.paragraph("", []Inline{&Emphasis{inlines}}, width)
}

func (p *markdown) titleBlock(t *TitleBlock) []string {
	var lines []string
	if t.Title != "" {
		lines = p.heading(1, []Inline{Text(t.Title)})
	}
	if len(t.Fields) == 0 {
		return lines
	}
	g := grid{head: []string{"", ""}, align: make([]Align, 2)}
	for _, f := range t.Fields {
		g.rows = append(g.rows, p.field(f))
	}
	return apart(lines, g.lines())
}

func (p *markdown) summary(s *Summary) []string {
	g := grid{head: p.textCells(s.Heading, ""), align: make([]Align, 2)}
	answer := []Inline{&Strong{[]Inline{Text(s.Answer)}}}
	g.rows = [][]string{p.field(Field{s.Label, answer})}
	for _, f := range s.Fields {
		g.rows = append(g.rows, p.field(f))
	}
	return g.lines()
}

func (p *markdown) field(f Field) []string {
	return []string{p.cell([]Inline{Text(f.Label)}), p.cell(f.Value)}
}

func (p *markdown) textCells(texts ...string) []string {
	cells := make([]string, len(texts))
	for i, s := range texts {
		cells[i] = p.cell([]Inline{Text(s)})
	}
	return cells
}

// signOff returns a table with wide empty cells for names, signatures and
// seals, so that it can be signed on paper.
func (p *markdown) signOff(s *SignOff) []string {
	columns := signOffColumns(s)
	g := grid{head: columns, align: make([]Align, len(columns)), least: make([]int, len(columns))}
	for i := range columns {
		g.least[i] = 12
	}
	for _, sig := range s.Signatures {
		row := append(p.textCells(sig.Role, sig.Name, sig.Title, sig.Date), "", "")
		g.rows = append(g.rows, row[:len(columns)])
	}
	return g.lines()
}

// signOffColumns returns the headings of a sign-off; the last is there where
// one of the signatures needs a seal.
func signOffColumns(s *SignOff) []string {
	columns := []string{"Role", "Name", "Qualification", "Date", "Signature"}
	for _, sig := range s.Signatures {
		if sig.Seal {
			return append(columns, "Seal")
		}
	}
	return columns
}

// footnote returns the definition of footnote n. One that does not begin
// with a paragraph begins on the line below its label.
func (p *markdown) footnote(n int, f Footnote) []string {
	label := "[^" + strconv.Itoa(n) + "]:"
	lines := p.blocks(f.Blocks, lineWidth-4)
	if len(lines) == 0 {
		return []string{label}
	}
	if para, ok := f.Blocks[0].(*Paragraph); ok && plain(para.Inline) != "" {
		return prefixed(lines, label+" ", "    ")
	}
	return append([]string{label}, prefixed(lines, "    ", "    ")...)
}

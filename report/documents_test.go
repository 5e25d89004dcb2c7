package report

import (
	"fmt"
	"math/rand/v2"
	"strings"
)

// hostileTexts are what a text field can hold at its worst: markup of
// Markdown and HTML, line starts, ends of structures, characters that act
// unseen.
var hostileTexts = []string{
	"<script>alert(1)</script>", "</main></body><img src=x onerror=alert(1)>", "a < b & c > d &lt; &#60; &copy;",
	"# not a heading #", "- not an item", "+ nor this", "* nor that", "1. no list", "2) no list", "> no quote", "===", "---",
	"| a | b |\n|---|---|\n| c | d |", "***", "_ _ _", "```go", "~~~", "    code", "\ttab", "a\n\nb", "a  \nb\\\nc",
	"**bold** *it* __b__ _i_ ~~gone~~ ~gone~", "`code` ``more` code``", "[text](http://a.example)", "![alt](x.png)",
	"[ref][1]", "[1]: http://a.example", "[^1]: note", "[^1]", "^1", "!a^1]", "!!^1]", "[x] done", "[ ] open", "http://a_b_c.example/x_y", "https://a.example/*",
	"www.a_.example", "me@a.example", "<me@a.example>", "<-@a>", "<3@a>b", "<https://a.example>", "$x$ and $$y$$", `C:\dir\*`, `\`, `a\|b|c`, "!", "![",
	"](http://b.example)", "a*b*c", "snake_case_name", "* ", "*", "**", "a **b", "a** b", "<!-- x -->", "<![CDATA[", "]]>", "{{ x }}",
	"\u202egnp.exe\u202c", "\u2066x\u2069", "a\u200eb\u200fc\u061cd", "bell\x07 nul\x00 del\x7f c1\u0085", "\u2028\u2029", "\xff\xfe", "\ufffe\U0001ffff",
	`"quoted" 'text'`, "日本語 кириллица ½ ≤ ≥ ▸", "`", "a`", "`a", "```", "\\`", "~", "~5", "a~", "(~3)", ":--", "|", "-|-",
	"'); --", "&amp", "&#x26;", "10.", "100) x", "#hash", "####### seven", "=", "-", "+", "1)", "x [m/s] y", "[m/s](z)", "end.",
}

// pathologicalURLs are URLs of links: some are printed as links, some not.
var pathologicalURLs = []string{
	"https://example.org/a", "http://example.org/a_b(c)?d=e&lt;f", "mailto:me@example.org", "#site-class", "javascript:alert(1)",
	"JaVaScript:alert(1)", "data:text/html,<script>", " https://example.org", "java\nscript:x", "vbscript:x", "file:///etc/passwd",
	"https://example.org/\u202egnp", "https://example.org/\"><b>", "https://example.org/a b|c\\", "relative/path.csv", "", "//example.org", "https://",
}

// everything returns a document with a text from next in every text field
// that there is.
func everything(next func() string) *Document {
	line := func() []Inline {
		return []Inline{
			Text(next()), Text(" "), &Emphasis{[]Inline{Text(next())}}, Text(" "), &Strong{[]Inline{Text(next())}}, Text(" "),
			&Strike{[]Inline{Text(next())}}, Text(" "), Code(next()), Text(" "), &Link{"https://example.org/", []Inline{Text(next())}},
			FootnoteRef(1), Text(" V"), Sub(next()), Text(" m"), Sup(next()), LineBreak{}, Text(next()), FootnoteRef(2), Text(next()),
		}
	}
	para := func() Block { return &Paragraph{line()} }
	picture := &Picture{Width: 100, Height: 50, Marks: []Mark{&Label{X: 5, Y: 5, Size: 9, Text: next()}}}
	return &Document{
		Title: next(), Subject: next(), Author: next(), Keywords: []string{next(), next()}, Generator: next(),
		Blocks: []Block{
			&TitleBlock{next(), []Field{{next(), line()}, {next(), line()}}},
			&Summary{next(), next(), next(), []Field{{next(), line()}}},
			&CautionBox{[]Block{&Paragraph{[]Inline{Text(Caution)}}, para()}},
			&Heading{1, line()}, &Heading{2, []Inline{Text(next())}}, &Heading{6, []Inline{Code(next())}},
			para(), &Paragraph{[]Inline{Text(next())}}, &Paragraph{[]Inline{Code(next())}},
			&List{Tight: true, Items: []ListItem{{Blocks: []Block{para()}}, {Task: TaskOpen, Blocks: []Block{para()}}, {Task: TaskDone, Blocks: []Block{para()}}}},
			&List{Items: []ListItem{{Blocks: []Block{para(), para()}}, {Blocks: []Block{&CodeBlock{next(), next()}, para()}}}},
			&List{Ordered: true, Start: 9, Tight: true, Items: []ListItem{{Blocks: []Block{&Paragraph{[]Inline{Text(next())}}}}, {Blocks: []Block{para()}}}},
			&Quote{[]Block{para(), &Quote{[]Block{para(), &CodeBlock{"", next()}}}}},
			&CodeBlock{next(), next()}, &CodeBlock{"", next() + "\n" + next() + "\n"},
			&Table{
				Caption: line(), Columns: []TableColumn{{Header: line()}, {Header: []Inline{Text(next())}, Align: AlignDecimal}, {Header: line(), Align: AlignCentre}},
				Rows: []TableRow{
					{Cells: [][]Inline{line(), {Text(next())}, line()}}, {Marked: true, Cells: [][]Inline{line(), {Code(next())}, {Text(next())}}},
					{Emphasis: true, Cells: [][]Inline{{Text(next())}, {Text(next())}, {Text(next())}}},
				},
				Notes: [][]Inline{line(), {Text(next())}},
			},
			&Figure{next(), line(), next(), picture},
			&Image{next(), next(), next(), []byte{1, 2, 3}, "png", 3, 2},
			&Formula{MathRow{MathIdent(next()), MathText(next()), MathFrac{MathText(next()), MathSub{MathIdent(next()), MathText(next())}}}},
			&Rule{}, &PageBreak{},
			&SignOff{[]Signature{{next(), next(), next(), next(), false}, {next(), next(), next(), next(), true}}},
		},
		Footnotes: []Footnote{{[]Block{para()}}, {[]Block{&Paragraph{[]Inline{Text(next())}}, para(), &CodeBlock{"", next()}}}},
	}
}

// cycle returns texts one after the other, again and again, from the nth.
func cycle(texts []string, n int) func() string {
	return func() string {
		n++
		return texts[(n-1)%len(texts)]
	}
}

// shape draws random documents. Two shapes with the same seed draw the same
// document with texts of their own.
type shape struct {
	rng   *rand.Rand
	next  func() string
	depth int
	notes int
	tame  bool // only what keeps the spaces around its text, and text at all ends
}

func randomDocument(seed uint64, next func(*rand.Rand) string) *Document {
	return (&shape{}).document(seed, next)
}

func (s *shape) document(seed uint64, next func(*rand.Rand) string) *Document {
	// The texts have a generator of their own, so that the shape of the
	// document does not hang on how often they draw.
	texts := rand.New(rand.NewPCG(seed, 2))
	s.rng, s.next, s.notes = rand.New(rand.NewPCG(seed, 1)), func() string { return next(texts) }, 3
	mentions := &Paragraph{}
	for i := range s.notes {
		mentions.Inline = append(mentions.Inline, Text("x"), FootnoteRef(i+1))
	}
	d := &Document{Blocks: append([]Block{mentions}, s.blocks(6)...)}
	for range s.notes {
		d.Footnotes = append(d.Footnotes, Footnote{s.blocks(2)})
	}
	return d
}

func (s *shape) blocks(most int) []Block {
	if s.depth > 3 {
		return []Block{&Paragraph{s.inlines(3)}}
	}
	s.depth++
	defer func() { s.depth-- }()
	blocks := make([]Block, 1+s.rng.IntN(most))
	for i := range blocks {
		blocks[i] = s.block()
	}
	return blocks
}

func (s *shape) block() Block {
	switch s.rng.IntN(16) {
	case 0:
		return &Heading{1 + s.rng.IntN(6), s.inlines(4)}
	case 1, 2, 3:
		return s.list()
	case 4:
		return &Quote{s.blocks(3)}
	case 5:
		return &CodeBlock{"go", s.next() + "\n\n" + s.next() + "\n"}
	case 6, 7:
		return s.table()
	case 8:
		return &Image{"a.png", s.next(), s.next(), []byte{1}, "png", 1, 1}
	case 9:
		return &Formula{MathSub{MathIdent("V"), MathText(s.next())}}
	case 10:
		return []Block{&Rule{}, &PageBreak{}, &CautionBox{s.blocks(2)}}[s.rng.IntN(3)]
	case 11:
		return &Figure{s.next(), s.inlines(3), s.next(), &Picture{Width: 1, Height: 1}}
	}
	return &Paragraph{s.inlines(12)}
}

func (s *shape) list() *List {
	l := &List{Ordered: s.rng.IntN(2) == 0, Start: s.rng.IntN(12), Tight: s.rng.IntN(2) == 0}
	for range 1 + s.rng.IntN(3) {
		item := ListItem{Task: Task(s.rng.IntN(9) / 7), Blocks: s.blocks(3)}
		if s.rng.IntN(10) == 0 {
			item.Blocks = nil
		}
		l.Items = append(l.Items, item)
	}
	return l
}

func (s *shape) table() *Table {
	t := &Table{Caption: s.inlines(3)}
	for range 1 + s.rng.IntN(4) {
		t.Columns = append(t.Columns, TableColumn{Header: s.inlines(2), Align: Align(s.rng.IntN(4))})
	}
	for range s.rng.IntN(4) {
		r := TableRow{Marked: s.rng.IntN(5) == 0, Emphasis: s.rng.IntN(5) == 0}
		for range t.Columns {
			r.Cells = append(r.Cells, s.inlines(3))
		}
		t.Rows = append(t.Rows, r)
	}
	return t
}

func (s *shape) inlines(most int) []Inline {
	out := make([]Inline, s.rng.IntN(most+1))
	for i := range out {
		out[i] = s.inline()
	}
	if s.tame {
		out = append(append([]Inline{Text(s.next())}, out...), Text(s.next()))
	}
	return out
}

func (s *shape) inline() Inline {
	if s.depth > 6 {
		return Text(s.next())
	}
	s.depth++
	defer func() { s.depth-- }()
	switch kind := s.rng.IntN(14); {
	case s.tame && (kind == 3 || kind == 5 || kind >= 7):
		return Text(s.next())
	case s.tame && kind == 4:
		return &Link{pathologicalURLs[0], s.inlines(3)}
	case kind == 0:
		return &Emphasis{s.inlines(3)}
	case kind == 1:
		return &Strong{s.inlines(3)}
	case kind == 2:
		return &Strike{s.inlines(3)}
	case kind == 3:
		return Code(s.next())
	case kind == 4:
		return &Link{pathologicalURLs[s.rng.IntN(len(pathologicalURLs))], s.inlines(3)}
	case kind == 5:
		return FootnoteRef(1 + s.rng.IntN(s.notes))
	case kind == 6:
		return LineBreak{}
	case kind == 7:
		return Sub(s.next())
	case kind == 8:
		return Sup(s.next())
	}
	return Text(s.next())
}

// hostile draws texts of the worst kind, benign the same number of plain
// ones. Both are empty or blank at the same draws.
func hostile(rng *rand.Rand) string {
	switch kind, pick := rng.IntN(12), rng.IntN(len(hostileTexts)); {
	case kind == 0:
		return []string{"", " ", "\n"}[pick%3]
	case kind == 1:
		return " " + hostileTexts[pick] + " "
	case kind == 2:
		return string([]rune("*_`~[]()<>\\|#-+.!&$: ab1")[rng.IntN(24)])
	default:
		return hostileTexts[pick]
	}
}

func benign(rng *rand.Rand) string {
	s := hostile(rng)
	if strings.TrimSpace(s) == "" {
		return s
	}
	return "word"
}

// spaced draws plain words with spaces around them.
func spaced(rng *rand.Rand) string { return fmt.Sprintf(" word%d ", rng.IntN(100)) }

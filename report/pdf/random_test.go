package pdf

import (
	"io"
	"math/rand/v2"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"shearbook/report"
)

// writer makes up documents from a seed. Every text holds a token of its own.
type writer struct {
	*rand.Rand
	tokens int
	notes  int // footnotes of the document
}

func (w *writer) token() string {
	w.tokens++
	return "q" + strconv.Itoa(10000+w.tokens) + "z"
}

func (w *writer) text() string {
	words := []string{"sand", "clay,", "360", "m/s", "v̄", "ρ =", "Łódź", "волн", "a-b", "10⁻³", "×", "\u202E", "\x07", "…",
		"https://example.org/a/long/path/that/goes/on-and-on_and_on/for/ever.html", strings.Repeat("x", 150), "\u00AD", "\t\n", "soft\u00ADhyphen", "no\u00A0break"}
	var b strings.Builder
	b.WriteString(" " + w.token()) // so that it is no part of a word too wide for its line
	for range w.IntN(20) {
		b.WriteString(" " + words[w.IntN(len(words))])
	}
	return b.String()
}

func (w *writer) inlines(depth int) []report.Inline {
	var out []report.Inline
	for range 1 + w.IntN(4) {
		switch kind := w.IntN(12); {
		case kind == 0 && w.notes > 0:
			out = append(out, report.FootnoteRef(1+w.IntN(w.notes)))
		case kind == 1:
			out = append(out, report.LineBreak{})
		case kind == 2:
			out = append(out, report.Code(w.text()))
		case kind == 3:
			out = append(out, report.Sub(" "+w.token()+" "), report.Sup("2"))
		case kind == 4 && depth < 4:
			out = append(out, &report.Emphasis{Inline: w.inlines(depth + 1)})
		case kind == 5 && depth < 4:
			out = append(out, &report.Strong{Inline: w.inlines(depth + 1)})
		case kind == 6 && depth < 4:
			out = append(out, &report.Strike{Inline: w.inlines(depth + 1)})
		case kind == 7 && depth < 4:
			url := []string{"#a", "https://example.org/é b", "mailto:a@b.org", "javascript:x", ""}[w.IntN(5)]
			out = append(out, &report.Link{URL: url, Inline: w.inlines(depth + 1)})
		default:
			out = append(out, report.Text(w.text()))
		}
	}
	return out
}

func (w *writer) blocks(depth int) []report.Block {
	var out []report.Block
	for range 1 + w.IntN(6) {
		out = append(out, w.block(depth))
	}
	return out
}

func (w *writer) block(depth int) report.Block {
	switch kind := w.IntN(16); {
	case kind == 0:
		return &report.Heading{Level: w.IntN(9) - 1, Inline: w.inlines(0)}
	case kind == 1 && depth < 6:
		l := &report.List{Ordered: w.IntN(2) == 0, Start: w.IntN(2000) - 5, Tight: w.IntN(2) == 0}
		for range w.IntN(5) {
			l.Items = append(l.Items, report.ListItem{Task: report.Task(w.IntN(3)), Blocks: w.blocks(depth + 1)})
		}
		return l
	case kind == 2 && depth < 6:
		return &report.Quote{Blocks: w.blocks(depth + 1)}
	case kind == 3:
		return &report.CodeBlock{Text: strings.Repeat(w.text()+"\n", 1)}
	case kind == 4 || kind == 5:
		return w.table()
	case kind == 6:
		return &report.Figure{Picture: demoPicture(20+w.Float64()*900, 20+w.Float64()*2000), Caption: w.inlines(0)}
	case kind == 7:
		return &report.Formula{Math: w.math(0)}
	case kind == 8:
		return []report.Block{&report.Rule{}, &report.PageBreak{}}[w.IntN(2)]
	case kind == 9:
		return &report.TitleBlock{Title: w.text(), Fields: w.fields()}
	case kind == 10:
		return &report.Summary{Heading: w.token(), Label: w.token(), Answer: w.text(), Fields: w.fields()}
	case kind == 11 && depth < 6:
		return &report.CautionBox{Blocks: w.blocks(depth + 1)}
	case kind == 12:
		s := &report.SignOff{}
		for range w.IntN(6) {
			s.Signatures = append(s.Signatures, report.Signature{Role: w.token(), Name: w.token() + " of sand", Title: w.token() + strings.Repeat(" sand", w.IntN(30)), Date: w.token(), Seal: w.IntN(2) == 0})
		}
		return s
	case kind == 13:
		return &report.Image{Title: w.token(), Format: "png", Data: demoPNG(1+w.IntN(30), 1+w.IntN(30))}
	}
	return &report.Paragraph{Inline: w.inlines(0)}
}

func (w *writer) fields() []report.Field {
	var out []report.Field
	for range w.IntN(9) {
		out = append(out, report.Field{Label: w.token(), Value: w.inlines(0)})
	}
	return out
}

func (w *writer) table() *report.Table {
	t := &report.Table{Caption: w.inlines(0), Compact: w.IntN(3) == 0}
	for range w.IntN(9) { // with more, tokens would be broken
		c := report.TableColumn{Align: report.Align(w.IntN(4)), Wide: w.IntN(4) == 0}
		if w.IntN(4) > 0 {
			c.Header = []report.Inline{report.Text(w.token())}
		}
		t.Columns = append(t.Columns, c)
	}
	for range w.IntN(40) {
		r := report.TableRow{Marked: w.IntN(9) == 0, Emphasis: w.IntN(9) == 0}
		for i := range w.IntN(len(t.Columns) + 1) {
			if i > 0 && i == len(t.Columns)-1 && w.IntN(12) == 0 {
				r.Cells = append(r.Cells, w.inlines(0))
				continue
			}
			r.Cells = append(r.Cells, []report.Inline{report.Text(w.token())})
		}
		t.Rows = append(t.Rows, r)
	}
	if w.IntN(2) == 0 {
		t.Notes = append(t.Notes, w.inlines(0))
	}
	return t
}

func (w *writer) math(depth int) report.Math {
	kind := w.IntN(9)
	if depth > 4 {
		kind = w.IntN(2)
	}
	switch kind {
	case 0:
		return report.MathIdent(w.token())
	case 1:
		return report.MathText([]string{"=", "+", "−", " m/s", "360", "(", "×"}[w.IntN(7)])
	case 2:
		return report.MathFrac{Num: w.math(depth + 1), Den: w.math(depth + 1)}
	case 3:
		return report.MathSub{Base: w.math(depth + 1), Sub: w.math(depth + 1)}
	case 4:
		return report.MathOver{Base: w.math(depth + 1)}
	case 5:
		return report.MathSum{From: w.math(depth + 1)}
	}
	var row report.MathRow
	for range 1 + w.IntN(12-2*depth) {
		row = append(row, w.math(depth+1))
	}
	return row
}

var tokenPattern = regexp.MustCompile("q[0-9]{5}z")

func randomDocument(seed uint64) (*report.Document, *writer) {
	w := &writer{Rand: rand.New(rand.NewPCG(seed, 1))}
	w.notes = w.IntN(12)
	d := &report.Document{Title: "t", Project: w.text(), Reference: w.text(), Revision: w.text(), Date: "2026-01-01"}
	w.tokens = 0 // a header may be cut short
	d.Project, d.Reference, d.Revision = strings.ReplaceAll(d.Project, "q1", "h"), strings.ReplaceAll(d.Reference, "q1", "h"), strings.ReplaceAll(d.Revision, "q1", "h")
	for range 2 + w.IntN(4) {
		d.Blocks = append(d.Blocks, w.blocks(0)...)
	}
	for range w.notes {
		d.Footnotes = append(d.Footnotes, report.Footnote{Blocks: w.blocks(3)})
	}
	return d, w
}

// Whatever the document: it prints, nothing is lost or printed twice,
// nothing stands outside the column or over something else.
func TestRandomDocuments(t *testing.T) {
	for seed := range uint64(16) {
		d, w := randomDocument(seed)
		_, pages := laidOut(t, d)
		var all strings.Builder
		for _, pg := range pages {
			all.WriteString(textOf(pg))
		}
		text := strings.ReplaceAll(all.String(), " ", "")
		text = strings.ReplaceAll(text, "\n", "")
		found := map[string]bool{}
		for _, token := range tokenPattern.FindAllString(text, -1) {
			found[token] = true
		}
		for i := range w.tokens {
			if token := "q" + strconv.Itoa(10001+i) + "z"; !found[token] {
				t.Errorf("seed %d: %s is lost", seed, token)
			}
		}
		checkGeometry(t, pages)
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
		if seed%8 == 0 {
			if err := Write(io.Discard, d, Options{Paper: Paper(seed / 8 % 2)}); err != nil {
				t.Fatalf("seed %d: %v", seed, err)
			}
		}
	}
}

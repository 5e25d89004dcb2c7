package pdf

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"shearbook/report"
)

// laidOut sets a document without writing it.
func laidOut(t *testing.T, d *report.Document) (*setter, []*page) {
	t.Helper()
	s := &setter{doc: d, sheet: newSheet(A4), mentioned: map[int]bool{}, notes: map[int][]*piece{}}
	pages := s.paginate(s.flow(d.Blocks, s.column()))
	if s.err != nil {
		t.Fatal(s.err)
	}
	return s, pages
}

// textOf returns what stands on a page, body and foot.
func textOf(pg *page) string {
	var b strings.Builder
	for _, pc := range pg.placed {
		b.WriteString(pieceText(pc.piece))
	}
	for _, pc := range pg.foot {
		b.WriteString(pieceText(pc))
	}
	return b.String()
}

func pieceText(p *piece) string {
	var b strings.Builder
	for _, o := range p.ops {
		if o, ok := o.(*textOp); ok {
			b.WriteString(o.text + " ")
		}
	}
	return b.String() + "\n"
}

// pageWith returns the number of the page that holds a token, which must be
// there once.
func pageWith(t *testing.T, pages []*page, token string) int {
	t.Helper()
	found := -1
	for i, pg := range pages {
		for range strings.Count(textOf(pg), token) {
			if found >= 0 {
				t.Errorf("%s is there twice, on pages %d and %d", token, found+1, i+1)
			}
			found = i
		}
	}
	if found < 0 {
		t.Errorf("%s is lost", token)
	}
	return found
}

// offsets is how many distances from the top of a page are tried, a line and
// its space each: a little more than a page.
const offsets = 40

// atEveryOffset makes a section for each of many distances from the top of a
// page: lines of filler, then what make returns.
func atEveryOffset(make func(i int) []report.Block) *report.Document {
	d := &report.Document{}
	for i := range offsets {
		d.Blocks = append(d.Blocks, &report.PageBreak{})
		for range i {
			d.Blocks = append(d.Blocks, para("filler", report.LineBreak{}))
		}
		d.Blocks = append(d.Blocks, make(i)...)
	}
	return d
}

func token(kind string, i int) string { return kind + strconv.Itoa(1000+i) + "z" }

// followers are what may stand below a heading; each holds token "first".
var followers = map[string]func(i int) report.Block{
	"paragraph": func(i int) report.Block {
		return para(strings.Repeat("word ", 30), token("first", i), strings.Repeat(" word", 60))
	},
	"line": func(i int) report.Block { return para(token("first", i)) },
	"list": func(i int) report.Block {
		return &report.List{Items: []report.ListItem{item(para(token("first", i))), item(para("second")), item(para("third"))}}
	},
	"quote": func(i int) report.Block {
		return &report.Quote{Blocks: []report.Block{para(token("first", i)), para("more")}}
	},
	"code": func(i int) report.Block { return &report.CodeBlock{Text: token("first", i) + "\nb\nc\nd\n"} },
	"table": func(i int) report.Block {
		t := numberedTable(30)
		t.Rows[1].Cells[3] = inl(token("first", i))
		return t
	},
	"formula": func(i int) report.Block { return &report.Formula{Math: report.MathText(token("first", i))} },
	"figure": func(i int) report.Block {
		return &report.Figure{Picture: demoPicture(400, 2000), Caption: inl(token("first", i))}
	},
	"sign-off": func(i int) report.Block {
		return &report.SignOff{Signatures: []report.Signature{{Role: token("first", i), Seal: true}}}
	},
	"caution":  func(i int) report.Block { return &report.CautionBox{Blocks: []report.Block{para(token("first", i))}} },
	"summary":  func(i int) report.Block { return &report.Summary{Answer: token("first", i)} },
	"subtitle": func(i int) report.Block { return heading(3, token("first", i)) },
	"title":    func(i int) report.Block { return &report.TitleBlock{Title: token("first", i)} },
	"page rule": func(i int) report.Block {
		return &report.List{Items: []report.ListItem{item(&report.Rule{}, para(token("first", i)))}}
	},
}

func TestHeadingsAreNotOrphaned(t *testing.T) {
	for name, follower := range followers {
		d := atEveryOffset(func(i int) []report.Block {
			return []report.Block{heading(2, token("head", i)), follower(i)}
		})
		_, pages := laidOut(t, d)
		for i := range offsets {
			h, f := pageWith(t, pages, token("head", i)), pageWith(t, pages, token("first", i))
			if h != f {
				t.Errorf("%s after %d lines: heading on page %d, what follows on page %d", name, i, h+1, f+1)
			}
		}
	}
}

// The same for one kind in the file itself, by where pdftotext finds the
// words.
func TestHeadingsAreNotOrphanedInTheFile(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		return []report.Block{heading(2, token("head", i)), followers["paragraph"](i)}
	})
	out := string(popplers(t, printed(t, d, Options{}), "pdftotext", "-bbox-layout", "FILE", "-"))
	pages := strings.Split(out, "<page ")[1:]
	for i := range offsets {
		for n, page := range pages {
			_, after, ok := strings.Cut(page, ">"+token("head", i)+"<")
			if ok && strings.Count(after, "<line ") < 4 { // two lines of text, two of the footer
				t.Errorf("after %d lines: heading at the foot of page %d with %d lines below", i, n+1, strings.Count(after, "<line "))
			}
		}
	}
}

func TestParagraphsLeaveNoLineAlone(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		var parts []any
		for n := range 5 {
			parts = append(parts, token("line"+strconv.Itoa(n)+"-", i), report.LineBreak{})
		}
		return []report.Block{para(parts...)}
	})
	_, pages := laidOut(t, d)
	for i := range offsets {
		at := func(n int) int { return pageWith(t, pages, token("line"+strconv.Itoa(n)+"-", i)) }
		if at(0) != at(1) || at(3) != at(4) {
			t.Errorf("after %d lines: a line of a paragraph stands alone", i)
		}
	}
}

func TestFigureKeepsItsCaption(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		return []report.Block{&report.Figure{Picture: demoPicture(200, 150), Caption: inl(token("caption", i))}}
	})
	_, pages := laidOut(t, d)
	seen := 0
	for _, pg := range pages {
		figures, captions := 0, strings.Count(textOf(pg), "caption")
		for _, pc := range pg.placed {
			for _, o := range pc.ops {
				if _, ok := o.(*figureOp); ok {
					figures++
				}
			}
		}
		seen += figures
		if figures != captions {
			t.Errorf("a page has %d figures and %d captions", figures, captions)
		}
	}
	if seen != offsets {
		t.Errorf("%d figures of %d", seen, offsets)
	}
}

func TestNotesStandBelowTheirMention(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		return []report.Block{para("a"), para(token("mention", i), report.FootnoteRef(i+1)), para("b"), para("c")}
	})
	for i := range offsets {
		d.Footnotes = append(d.Footnotes, report.Footnote{Blocks: []report.Block{para(token("note", i), strings.Repeat(" and more", 40))}})
	}
	_, pages := laidOut(t, d)
	for i := range offsets {
		if m, n := pageWith(t, pages, token("mention", i)), pageWith(t, pages, token("note", i)); m != n {
			t.Errorf("after %d lines: mentioned on page %d, the note is on page %d", i, m+1, n+1)
		}
	}
}

func TestLongNotesRunOn(t *testing.T) {
	var blocks []report.Block
	for i := range 150 {
		blocks = append(blocks, para(token("line", i)))
	}
	d := &report.Document{
		Blocks:    []report.Block{para("a", report.FootnoteRef(1), report.FootnoteRef(2)), para("b"), heading(1, "c"), para("d")},
		Footnotes: []report.Footnote{{Blocks: blocks}, {Blocks: []report.Block{para(token("second", 0))}}, {Blocks: []report.Block{para(token("never", 0))}}},
	}
	_, pages := laidOut(t, d)
	before := 0
	for i := range 150 {
		n := pageWith(t, pages, token("line", i))
		if n < before {
			t.Errorf("line %d of the note stands before line %d", i, i-1)
		}
		before = n
	}
	if n := pageWith(t, pages, token("second", 0)); n < before {
		t.Error("the second note stands before the end of the first")
	}
	pageWith(t, pages, token("never", 0))
	checkGeometry(t, pages)
}

func TestTableRepeatsItsHeaderAndLosesNoRow(t *testing.T) {
	const n = 200
	d := &report.Document{Project: "Ferry Road", Blocks: []report.Block{para("before"), numberedTable(n), para("after")}}
	pages := pagesOf(t, printed(t, d, Options{}))
	all := strings.Join(pages, "\f")
	for i := range n {
		if got := strings.Count(all, "row"+strconv.Itoa(100000+i)); got != 1 {
			t.Errorf("row %d is there %d times", i, got)
		}
	}
	for i, page := range pages {
		if strings.Contains(page, "row1") && strings.Count(page, "Velocity (m/s)") != 1 {
			t.Errorf("page %d has rows but not one header", i+1)
		}
	}
	if len(pages) < 4 {
		t.Errorf("only %d pages", len(pages))
	}
}

func TestTenThousandRows(t *testing.T) {
	_, pages := laidOut(t, &report.Document{Blocks: []report.Block{numberedTable(10000)}})
	next := 0
	for _, pg := range pages {
		for _, pc := range pg.placed {
			if text := pieceText(pc.piece); strings.Contains(text, "row1") {
				if !strings.Contains(text, "row"+strconv.Itoa(100000+next)+" ") {
					t.Fatalf("%q where row %d should stand", text, next)
				}
				next++
			}
		}
	}
	if next != 10000 {
		t.Errorf("%d rows", next)
	}
}

func TestRowsAreNotSplit(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		table := numberedTable(3)
		lines := inl(token("top", i), report.LineBreak{}, "a", report.LineBreak{}, "b", report.LineBreak{}, "c", report.LineBreak{}, token("end", i))
		table.Rows[1].Cells[3] = lines
		table.Caption = inl(token("caption", i))
		table.Rows[0].Cells[3] = inl(token("zero", i))
		table.Rows = append(table.Rows, numberedTable(30).Rows...)
		return []report.Block{table}
	})
	_, pages := laidOut(t, d)
	for i := range offsets {
		top, end := pageWith(t, pages, token("top", i)), pageWith(t, pages, token("end", i))
		if top != end {
			t.Errorf("after %d lines: a row is split", i)
		}
		if c, z := pageWith(t, pages, token("caption", i)), pageWith(t, pages, token("zero", i)); c != z {
			t.Errorf("after %d lines: caption and header stand alone", i)
		}
	}
}

func TestRowsTallerThanHalfAPageAreSplit(t *testing.T) {
	var cell []report.Inline
	for i := range 200 {
		cell = append(cell, report.Text(token("tall", i)), report.LineBreak{})
	}
	table := numberedTable(2)
	table.Rows[1].Cells[3] = cell
	table.Rows[1].Marked = true
	_, pages := laidOut(t, &report.Document{Blocks: []report.Block{table}})
	for i := range 200 {
		pageWith(t, pages, token("tall", i))
	}
	checkGeometry(t, pages)
}

func TestDecimalsStandBelowEachOther(t *testing.T) {
	values := []string{"1", "12.5", "123.25", "1,200.125", "0.000001", "< 3.5", "−7.25", "361 m/s", "1 234.5"}
	table := &report.Table{Columns: []report.TableColumn{wideColumn("x"), column("v", report.AlignDecimal)}}
	for _, v := range values {
		table.Rows = append(table.Rows, tableRow("x", v))
	}
	s, pages := laidOut(t, &report.Document{Blocks: []report.Block{table}})
	var at []float64
	for _, pc := range pages[0].placed {
		for _, o := range pc.ops {
			o, ok := o.(*textOp)
			if !ok || o.text == "x" || o.text == "v" {
				continue
			}
			// The point, or the end of the figures where there is none.
			figures := strings.TrimSuffix(o.text, " m/s")
			if i := strings.LastIndexByte(figures, '.'); i >= 0 {
				figures = figures[:i]
			}
			at = append(at, o.x+s.width(o.style, figures))
		}
	}
	if len(at) != len(values) {
		t.Fatalf("%d cells, want %d", len(at), len(values))
	}
	for i, x := range at {
		if math.Abs(x-at[0]) > 0.05 { // points: far less than is seen
			t.Errorf("%q: its point is at %.2f, that of %q at %.2f", values[i], x, values[0], at[0])
		}
	}
}

func TestSignaturesStayOnOnePage(t *testing.T) {
	d := atEveryOffset(func(i int) []report.Block {
		return []report.Block{&report.SignOff{Signatures: []report.Signature{{Role: token("a", i), Date: token("last", i)}, {Role: "b"}, {Role: "c"}, {Role: "d"}, {Role: token("e", i), Seal: true}}}}
	})
	_, pages := laidOut(t, d)
	for i := range offsets {
		if a, e := pageWith(t, pages, token("a", i)), pageWith(t, pages, token("e", i)); a != e {
			t.Errorf("after %d lines: the sign-off is split", i)
		}
		if a, e := pageWith(t, pages, token("a", i)), pageWith(t, pages, token("last", i)); a != e {
			t.Errorf("after %d lines: a signature is split", i)
		}
	}
}

// checkGeometry checks that nothing is set outside the body, or over
// something else.
func checkGeometry(t *testing.T, pages []*page) {
	t.Helper()
	sheet := newSheet(A4)
	s := &setter{}
	for n, pg := range pages {
		y := 0.0
		for _, pc := range pg.placed {
			if pc.y < y-0.01 {
				t.Errorf("page %d: %.80q overlaps what stands above", n+1, pieceText(pc.piece))
			}
			y = pc.y + pc.height
			checkWidths(t, s, n, pc.piece)
		}
		if len(pg.foot) > 0 {
			y += footHeight(pg.foot)
		}
		if y > sheet.bottom+0.02 {
			last := pg.placed[len(pg.placed)-1]
			t.Errorf("page %d ends at %.2f, below %.2f; last %.1f high %.90q", n+1, y, sheet.bottom, last.height, pieceText(last.piece))
		}
	}
}

func checkWidths(t *testing.T, s *setter, page int, p *piece) {
	for _, o := range p.ops {
		switch o := o.(type) {
		case *textOp:
			if right := o.x + s.width(o.style, o.text); o.x < -0.01 || right > columnWidth+1 {
				t.Errorf("page %d: %.40q reaches from %.1f to %.1f", page+1, o.text, o.x, right)
			}
		case *figureOp:
			if right := o.x + o.scale*o.picture.Width; o.x < -0.01 || right > columnWidth+0.01 || o.scale > 1 {
				t.Errorf("page %d: a figure reaches from %.1f to %.1f at scale %.2f", page+1, o.x, right, o.scale)
			}
		case *imageOp:
			if right := o.x + o.width; o.x < -0.01 || right > columnWidth+0.01 {
				t.Errorf("page %d: an image reaches from %.1f to %.1f", page+1, o.x, right)
			}
		}
	}
}

func TestDemoKeepsToTheColumn(t *testing.T) {
	_, pages := laidOut(t, demo())
	checkGeometry(t, pages)
	if len(pages) < 6 {
		t.Error(fmt.Sprint(len(pages), " pages"))
	}
}

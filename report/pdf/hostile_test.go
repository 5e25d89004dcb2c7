package pdf

import (
	"io"
	"strings"
	"testing"
	"time"

	"shearbook/report"
)

// Documents that nobody writes must print all the same, in bounded time. The
// bound is a hundred times what they take.
func TestHostileDocuments(t *testing.T) {
	deepQuote := report.Block(para("deep"))
	deepList := report.Block(para("deep"))
	deepBox := report.Block(para("deep"))
	for range 2000 {
		deepQuote = &report.Quote{Blocks: []report.Block{deepQuote}}
		deepList = &report.List{Items: []report.ListItem{item(deepList)}}
		deepBox = &report.CautionBox{Blocks: []report.Block{deepBox}}
	}
	deepInline := report.Inline(report.Text("deep"))
	for i := range 2000 {
		switch i % 3 {
		case 0:
			deepInline = &report.Emphasis{Inline: []report.Inline{deepInline}}
		case 1:
			deepInline = &report.Link{URL: "#a", Inline: []report.Inline{deepInline}}
		default:
			deepInline = &report.Strong{Inline: []report.Inline{deepInline}}
		}
	}
	fraction := report.Math(report.MathIdent("x"))
	for range 60 {
		fraction = report.MathFrac{Num: report.MathText("1"), Den: report.MathRow{report.MathText("1"), report.MathText("+"), fraction}}
	}
	wide := &report.Table{}
	for range 300 {
		wide.Columns = append(wide.Columns, column("header", report.AlignDecimal))
	}
	wide.Rows = []report.TableRow{{}, {Cells: [][]report.Inline{inl("1.5")}}}
	tall := numberedTable(2)
	tall.Columns[0].Header = inl(strings.Repeat("header ", 3000))
	manyNotes := &report.Document{}
	var mentions []report.Inline
	for i := range 3000 {
		mentions = append(mentions, report.FootnoteRef(i+1))
		manyNotes.Footnotes = append(manyNotes.Footnotes, report.Footnote{Blocks: []report.Block{para("note", report.FootnoteRef(1+(i*7)%3000))}})
	}
	manyNotes.Blocks = []report.Block{&report.Paragraph{Inline: mentions}}
	var headings, pieces []report.Block
	for range 80 {
		headings = append(headings, heading(1, "same"), &report.PageBreak{})
		pieces = append(pieces, heading(2, "kept"), heading(3, "with the next"))
	}
	page := strings.Repeat("a field as long as a page ", 1200)
	one := func(b ...report.Block) *report.Document { return &report.Document{Blocks: b} }
	for name, d := range map[string]*report.Document{
		"a word of a megabyte": one(para(strings.Repeat("x", 1<<20))),
		"letters in thousands": one(para(strings.Repeat("x ", 1<<15))),
		"a megabyte of breaks": one(para(strings.Repeat("\u200B\u00AD", 1<<18) + "x")),
		"joined letters":       one(para(strings.Repeat("x\u2060", 1<<17))),
		"marks alone":          one(para(strings.Repeat("\u0304\u200B", 1<<14))),
		"marks on a letter":    one(para("v" + strings.Repeat("\u0304", 1<<14))),
		"line of code":         one(&report.CodeBlock{Text: strings.Repeat("x y\t", 1<<14)}),
		"lines of code":        one(&report.CodeBlock{Text: strings.Repeat("\n", 1<<12)}),
		"deep quotations":      one(deepQuote),
		"deep lists":           one(deepList),
		"deep boxes":           one(deepBox),
		"deep styles":          one(para(deepInline)),
		"deep fraction":        one(&report.Formula{Math: fraction}),
		"long formula":         one(&report.Formula{Math: longSum(2000)}),
		"formula of prose":     one(&report.Formula{Math: report.MathText(page)}),
		"wide table":           one(wide),
		"tall header":          one(tall),
		"many notes":           manyNotes,
		"pages of headings":    one(headings...),
		"headings alone":       one(pieces...),
		"long fields": one(&report.TitleBlock{Title: page, Fields: []report.Field{field(page, page)}},
			&report.Summary{Heading: page, Label: page, Answer: page, Fields: []report.Field{field(page, page)}},
			&report.SignOff{Signatures: []report.Signature{{Role: page, Name: page, Title: page, Date: page, Seal: true}}},
			&report.Figure{Picture: demoPicture(1e5, 1e5), Caption: inl(page)}),
		"long header":  {Project: page, Reference: page, Revision: page, Date: page, Blocks: headings[:4]},
		"empty blocks": one(&report.Heading{}, &report.Paragraph{}, &report.List{Items: make([]report.ListItem, 2)}, &report.Quote{}, &report.CodeBlock{}, &report.Table{}, &report.Formula{}, &report.TitleBlock{}, &report.Summary{}, &report.CautionBox{}, &report.SignOff{}),
		"hidden":       one(para("a\u0000b\u2028c\u202Ed\x7f\u0085"), &report.CodeBlock{Text: "a\u0000\r\n\x1b[31m"}, heading(1, "\u2066x"), &report.Image{Format: "png", Title: "\u202E", Data: demoPNG(1, 1)}),
	} {
		start := time.Now()
		if err := Write(io.Discard, d, Options{}); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if took := time.Since(start); took > 20*time.Second {
			t.Errorf("%s took %v", name, took)
		} else {
			t.Logf("%s took %v", name, took)
		}
	}
}

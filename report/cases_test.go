package report

import (
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/tools/txtar"
)

var update = flag.Bool("update", false, "rewrite testdata/*.txtar with what the printers write now")

// cases are documents that testdata shows as Markdown and HTML side by side,
// under the name of the file without its extension.
var cases = map[string]func() *Document{
	"prose":    proseCase,
	"escapes":  escapesCase,
	"emphasis": emphasisCase,
	"lists":    listsCase,
	"blocks":   blocksCase,
	"table":    tableCase,
	"furniture": func() *Document {
		return &Document{Blocks: []Block{titleBlock(), summary(), caution(), &PageBreak{}, signOff()}}
	},
	"pictures":  picturesCase,
	"formulas":  formulasCase,
	"footnotes": footnotesCase,
	"report":    reportCase,
}

// say returns a text as inlines.
func say(s string) []Inline { return []Inline{Text(s)} }

func para(inlines ...Inline) *Paragraph { return &Paragraph{inlines} }

func proseCase() *Document {
	return &Document{Blocks: []Block{
		&Heading{1, say("Site class of the Ferry Road pumping station")},
		para(Text("Line L1 was measured with 24 geophones at a spacing of 2 m. Its time-averaged velocity V"), Sub("S30"),
			Text(" is 312 m/s ± 8 %, over a column with an area of 1 m"), Sup("2"), Text(" and an exponent of n"), Sup("−1"), Text(" or x"), Sup("n"), Text(".")),
		&Heading{2, []Inline{Text("What "), Code("layers"), Text(" holds: #1 and #")}},
		para(Text("See "), &Link{"https://example.org/method?a=1&b=2", say("the method")}, Text(", "),
			&Link{"https://example.org/", nil}, Text(", "), &Link{"mailto:office@example.org", say("the office")}, Text(", "),
			&Link{"#what-layers-holds-1-and-", say("above")}, Text(" or "), &Link{"line-1.csv", say("the data")}, Text("."), LineBreak{},
			Text("A new line; and code that holds a tick, "), Code("a`b"), Text(", or begins with one, "), Code("`"), Text(".")),
		&Heading{2, say("What layers holds: #1 and #")},
	}}
}

func escapesCase() *Document {
	d := &Document{}
	for _, s := range []string{
		"V_S30 = 412.5 m/s (5 % of 400), ~300 m/s, Vs [m/s], a < b > c & d, C:\\data\\line, 3 * 4, a|b, me@example.org",
		"*stars* _lows_ ~~gone~~ `ticks` $5 \\* <b>bold</b> &lt; [a](b) ![c](d) https://example.org www.example.org",
		"# no heading", "- no item", "+ no item", "1. no number", "> no quotation", "---", "===", "| --- | --- |",
		"\u202egnp.exe\u202c and a bell\a",
	} {
		d.Blocks = append(d.Blocks, para(Text(s)))
	}
	return d
}

func emphasisCase() *Document {
	em := func(in ...Inline) Inline { return &Emphasis{in} }
	strong := func(in ...Inline) Inline { return &Strong{in} }
	strike := func(in ...Inline) Inline { return &Strike{in} }
	return &Document{Blocks: []Block{
		para(em(Text("em")), Text(", "), strong(Text("strong")), Text(", "), strike(Text("gone")), Text(", "), strong(em(Text("both"))), Text(", in"), em(Text("side")), Text("a word.")),
		para(Text("Space goes out:"), em(Text(" a ")), Text("b; neighbours"), Text(" "), em(Text("join")), em(Text("ed")), Text("; em in em is "), em(Text("em "), em(Text("only"))), Text(".")),
		para(strong(Text("strong "), em(Text("both")), Text(" strong"), LineBreak{}, strike(Text("all "), em(Text("three"))))),
		para(Text("Cannot be written in Markdown: a"), em(Text("(b)")), Text("c.")),
	}}
}

func listsCase() *Document {
	item := func(blocks ...Block) ListItem { return ListItem{Blocks: blocks} }
	return &Document{Blocks: []Block{
		&List{Tight: true, Items: []ListItem{
			item(para(Text("first"))),
			item(para(Text("second")), &List{Ordered: true, Start: 1, Tight: true, Items: []ListItem{item(para(Text("inner"))), item(para(Text("inner")))}}),
			item(),
		}},
		&List{Tight: true, Items: []ListItem{item(para(Text("of another list")))}},
		&List{Ordered: true, Start: 9, Items: []ListItem{
			item(para(Text("loose")), para(Text("with two paragraphs, the second of which is long enough to be wrapped below the first"))),
			item(&CodeBlock{"", "code\n\nin an item\n"}, &Table{Columns: []TableColumn{{Header: say("a")}}, Rows: []TableRow{{Cells: [][]Inline{say("b")}}}}),
		}},
		&List{Tight: true, Items: []ListItem{
			{Task: TaskDone, Blocks: []Block{para(Text("velocities checked"))}},
			{Task: TaskOpen, Blocks: []Block{para(Text("class confirmed")), &List{Tight: true, Items: []ListItem{item(para(Text("by whom")))}}}},
		}},
	}}
}

func blocksCase() *Document {
	return &Document{Blocks: []Block{
		&Quote{[]Block{para(Text("A quotation.")), &Quote{[]Block{para(Text("In it another.")), &Rule{}}}}},
		&Rule{},
		&CodeBlock{"csv", "top_m,vs_mps\n0,180 <&>\n\n```\n"},
		&CodeBlock{},
		para(),
		para(Text("The end.")),
	}}
}

func tableCase() *Document {
	row := func(cells ...string) (r TableRow) {
		for _, c := range cells {
			r.Cells = append(r.Cells, say(c))
		}
		return r
	}
	marked, total := row("2", "2.5", "1,312", "sand | gravel", "a"), row("", "10", "212.25", "", "")
	marked.Marked, total.Emphasis = true, true
	return &Document{
		Blocks: []Block{
			&Table{
				Caption: []Inline{Text("Layers of "), Code("L1")},
				Columns: []TableColumn{{Header: say("Layer")}, {say("Thickness (m)"), AlignDecimal, false}, {[]Inline{Text("V"), Sub("S"), Text(" [m/s]")}, AlignDecimal, false}, {say("Soil"), AlignLeft, true}, {say("Note"), AlignCentre, false}},
				Rows: []TableRow{
					row("1", "0.75", "98.5", "peat", ""), marked,
					{Cells: [][]Inline{say("3"), {Text("12.125"), FootnoteRef(1)}, say("≥ 360"), {Text("marl, "), &Strong{say("weathered")}}, say("bc")}},
					row("4", "half-space", "–", "日本", "abc"), total,
				},
				Notes: [][]Inline{say("Depths below ground level."), {Text("Basis: "), &Emphasis{say("inverted")}, Text(".")}},
			},
			&Table{Compact: true, Columns: []TableColumn{{say("n"), AlignRight, false}, {Header: say("as read")}}, Rows: []TableRow{{Cells: [][]Inline{say("1"), {Code("a|b")}}}, {Cells: [][]Inline{say("10")}}}},
		},
		Footnotes: []Footnote{{[]Block{para(Text("From the log."))}}},
	}
}

func titleBlock() *TitleBlock {
	return &TitleBlock{"Seismic site classification", []Field{
		{"Project", say("Ferry Road pumping station")}, {"Reference", say("FR-2041")}, {"Prepared by", []Inline{Text("M. Okonjo, "), &Emphasis{say("Delta Ground Ltd")}}},
		{"Date", say("2026-03-14")}, {"Revision", say("B")},
	}}
}

func summary() *Summary {
	return &Summary{"Line L1", "Site class", "C", []Field{
		{"Code", say("EN 1998-1:2004, Table 3.1")}, {"Average", []Inline{Text("V"), Sub("S,30"), Text(" = 280.0 m/s over 30 m")}},
		{"Distance", say("80.0 m/s (28.6 %) below the bound to class B")},
	}}
}

func caution() *CautionBox {
	return &CautionBox{[]Block{para(&Strong{say("Caution.")}, Text(" "+Caution))}}
}

func signOff() *SignOff {
	return &SignOff{[]Signature{
		{Role: "Prepared by", Name: "M. Okonjo", Title: "MSc", Date: "2026-03-14"}, {Role: "Checked by"},
		{Role: "Licensed engineer", Title: "licence no.", Seal: true},
	}}
}

func picturesCase() *Document {
	// Of the PNG there is its signature alone: no printer looks inside.
	return &Document{Blocks: []Block{
		&Figure{"velocity-L1", []Inline{Text("Velocity against depth, "), Code("L1"), Text(".")}, "A line that falls from 180 m/s to 400 m/s [30 m].", samplePicture()},
		&Figure{Name: "größe (1)", Alt: "", Picture: &Picture{Width: 1, Height: 1}},
		&Image{"site plan.png", "Site plan with line L1", `The "plan"`, []byte("\x89PNG"), "png", 640, 480},
	}}
}

func formulasCase() *Document {
	v := func(base Math, sub string) Math { return MathSub{base, MathText(sub)} }
	h, vi := v(MathIdent("h"), "i"), v(MathIdent("v"), "i")
	return &Document{Blocks: []Block{
		para(Text("The average is")),
		&Formula{MathRow{v(MathIdent("V"), "S30"), MathText("="), MathFrac{MathText("30 m"), MathRow{MathSum{MathRow{MathIdent("i"), MathText("="), MathText("1")}, MathIdent("n")}, MathFrac{h, vi}}},
			MathText("="), MathFrac{MathText("30"), MathText("0.0728")}, MathText("="), MathText("412"), MathText(" m/s")}},
		&Formula{MathRow{MathSub{MathOver{MathIdent("V")}, MathIdent("S")}, MathText("≥"), MathText("1,200.5"), MathText("×"), MathIdent("σ"), MathText("/"), MathIdent("ln Vs"), MathText("−"), MathSum{}, MathOver{MathRow{MathIdent("a"), MathIdent("b")}}}},
		&Formula{MathText("50 % < a_b & {c} m/s²")},
	}}
}

func footnotesCase() *Document {
	return &Document{
		Blocks: []Block{
			&Heading{2, []Inline{Text("Heading"), FootnoteRef(1)}},
			para(Text("A number"), FootnoteRef(2), Text(": doubtful, and"), FootnoteRef(1), FootnoteRef(3), Text(" in a "), &Link{"https://example.org", []Inline{Text("link"), FootnoteRef(3)}}, Text(".")),
		},
		Footnotes: []Footnote{
			{[]Block{para(Text("The profile ends at 22 m; below it the velocity of the lowest layer was carried on down to 30 m.")), para(Text("See note 2"), FootnoteRef(2), Text("."))}},
			{[]Block{&List{Tight: true, Items: []ListItem{{Blocks: []Block{para(Text("one"))}}, {Blocks: []Block{para(Text("two"))}}}}}},
			{nil},
		},
	}
}

func TestCases(t *testing.T) {
	files, err := filepath.Glob("testdata/*.txtar")
	if err != nil {
		t.Fatal(err)
	}
	if !*update && len(files) != len(cases) {
		t.Errorf("%d files for %d cases", len(files), len(cases))
	}
	for name, build := range cases {
		t.Run(name, func(t *testing.T) { checkCase(t, filepath.Join("testdata", name+".txtar"), build) })
	}
}

func checkCase(t *testing.T, file string, build func() *Document) {
	got := map[string]string{"markdown": markdownOf(t, build()), "html": bodyOf(t, htmlOf(t, build()))}
	if *update {
		a := &txtar.Archive{Comment: []byte("Written by go test ./report -update. Read what changed.\n")}
		for _, name := range []string{"markdown", "html"} {
			a.Files = append(a.Files, txtar.File{Name: name, Data: []byte(got[name])})
		}
		if err := os.WriteFile(file, txtar.Format(a), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	a, err := txtar.ParseFile(file)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range a.Files {
		if want := strings.ReplaceAll(string(f.Data), "\r\n", "\n"); got[f.Name] != want {
			t.Errorf("%s is\n%s\nwant\n%s", f.Name, got[f.Name], want)
		}
	}
	if len(a.Files) != len(got) {
		t.Errorf("%d parts", len(a.Files))
	}
	checkMarkdown(t, build(), build(), true)
	checkHTML(t, build(), build())
}

func TestSameDocumentSameBytes(t *testing.T) {
	for name, build := range cases {
		first, second := build(), build()
		if markdownOf(t, first) != markdownOf(t, second) || htmlOf(t, first) != htmlOf(t, second) {
			t.Errorf("%s differs", name)
		}
	}
}

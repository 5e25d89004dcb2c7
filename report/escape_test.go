package report

import (
	"io"
	"testing"
)

func TestVisible(t *testing.T) {
	for s, want := range map[string]string{
		"plain ≤ σ 日本":          "plain ≤ σ 日本",
		"a\nb\tc":               "a\nb\tc",
		"a\r\nb":                "a\nb",
		"a\rb":                  "a‹U+000D›b",
		"\x00\x1b[31m":          "‹U+0000›‹U+001B›[31m",
		"\u202egnp\u202c":       "‹U+202E›gnp‹U+202C›",
		"\u2066\u2069\u200e":    "‹U+2066›‹U+2069›‹U+200E›",
		"\u200f\u061c\u0085":    "‹U+200F›‹U+061C›‹U+0085›",
		"\u2028\u2029":          "‹U+2028›‹U+2029›",
		"\uffff\U0010fffe":      "‹U+FFFF›‹U+10FFFE›",
		"\xff a":                "\ufffd a",
		"e\u0301 \u00a0 \u200d": "e\u0301 \u00a0 \u200d",
	} {
		if got := Visible(s); got != want {
			t.Errorf("Visible(%q) = %q, want %q", s, got, want)
		}
		if again := Visible(want); again != want {
			t.Errorf("Visible(%q) = %q", want, again)
		}
	}
}

func TestVisibleShowsAllBidirectionalControls(t *testing.T) {
	// Unicode 16, PropList.txt, property Bidi_Control.
	for _, r := range "\u061c\u200e\u200f\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069" {
		if !hidden(r) {
			t.Errorf("%U is not shown", r)
		}
	}
}

func TestLinkable(t *testing.T) {
	for url, want := range map[string]bool{
		"https://example.org": true, "HTTP://EXAMPLE.ORG": true, "mailto:a@b.example": true, "#a": true,
		"": false, "#": false, "https://": false, "http:/x": false, "javascript:alert(1)": false, "java\nscript:x": false,
		" https://example.org": false, "data:text/html,x": false, "ftp://a.example": false, "a.csv": false, "//a.example": false,
		"https://a.example/\u202e": false, "https://a.example/\n": false, "https://a.example/\xff": false,
	} {
		if got := Linkable(url); got != want {
			t.Errorf("Linkable(%q) = %v", url, got)
		}
	}
}

func TestAnchors(t *testing.T) {
	var a Anchors
	for _, c := range [][2]string{
		{"Site class of Line L1", "site-class-of-line-l1"}, {"Site class of Line L1", "site-class-of-line-l1-1"},
		{"What, 3.2 (a_b)?", "what-32-a_b"}, {"Größe & σ", "größe--σ"}, {"a", "a"}, {"a-1", "a-1"}, {"a", "a-2"}, {"a", "a-3"}, {"!", "section"}, {"", "section-1"},
	} {
		if got := a.Name([]Inline{Text(c[0])}); got != c[1] {
			t.Errorf("anchor of %q is %q, want %q", c[0], got, c[1])
		}
	}
}

func TestPlain(t *testing.T) {
	got := plain([]Inline{
		Text(" V"), Sub("S30"), Text("\n= 1 m"), Sup("2"), Text(" x"), Sup("n"), Text(" y"), Sub("a b"), LineBreak{},
		&Strong{[]Inline{&Emphasis{[]Inline{&Strike{[]Inline{Code("c")}}}}}}, FootnoteRef(1), &Link{"x", []Inline{Text("!")}},
	})
	if want := "V_S30 = 1 m² x^n y_(a b) c!"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

// Nodes that no printer knows.
type (
	strangeBlock  struct{}
	strangeInline struct{}
	strangeMath   struct{}
	strangeMark   struct{}
)

func (strangeBlock) block()   {}
func (strangeInline) inline() {}
func (strangeMath) math()     {}
func (strangeMark) mark()     {}

func TestPrintersPanicOnWhatTheyDoNotKnow(t *testing.T) {
	strange := map[string]Block{
		"report: unknown node report.strangeBlock":  strangeBlock{},
		"report: unknown node report.strangeInline": &Paragraph{[]Inline{strangeInline{}}},
		"report: unknown node report.strangeMath":   &Formula{MathRow{strangeMath{}}},
		"report: unknown node <nil>":                &Formula{MathFrac{Num: MathText("1")}},
		"report: unknown node report.Align":         &Table{Columns: []TableColumn{{Align: 9}}},
		"report: unknown node report.Task":          &List{Items: []ListItem{{Task: 9}}},
		"report: reference to footnote 2 of 1":      &Paragraph{[]Inline{FootnoteRef(2)}},
		"report: a row of 2 cells in a table of 1 columns": &Table{
			Columns: make([]TableColumn, 1), Rows: []TableRow{{Cells: make([][]Inline, 2)}},
		},
	}
	for want, b := range strange {
		d := &Document{Blocks: []Block{&Quote{[]Block{b}}}, Footnotes: make([]Footnote, 1)}
		wantPanic(t, "Markdown", want, func() { Markdown(io.Discard, d, MarkdownOptions{}) })
		wantPanic(t, "HTML", want, func() { HTML(io.Discard, d, HTMLOptions{}) })
	}
	for want, p := range map[string]*Picture{
		"report: unknown node report.strangeMark": {Marks: []Mark{strangeMark{}}},
		"report: unknown node report.Font":        {Marks: []Mark{&Label{Font: 99}}},
		"report: unknown node report.MoveKind":    {Marks: []Mark{&Fill{Path: Path{{Kind: 99}}}}},
	} {
		wantPanic(t, "SVG", want, func() { p.SVG(io.Discard, "", "") })
	}
}

func wantPanic(t *testing.T, printer, want string, print func()) {
	t.Helper()
	defer func() {
		if got := recover(); got != want {
			t.Errorf("%s panics with %v, want %v", printer, got, want)
		}
	}()
	print()
}

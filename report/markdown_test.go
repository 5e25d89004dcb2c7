package report

import (
	"slices"
	"strings"
	"testing"
)

// checkMarkdown reads d back from its Markdown and compares it with what was
// meant, and its blocks with those of plain, the same document with plain
// texts.
func checkMarkdown(t testing.TB, d, plain *Document, lossy bool) {
	t.Helper()
	source := markdownOf(t, d)
	seen := readMarkdown(t, source, asWritten)
	compareChunks(t, seen.chunks, meantBy(d, false), lossy, source)
	want := readMarkdown(t, markdownOf(t, plain), asWritten)
	if !slices.Equal(seen.blocks, want.blocks) {
		t.Fatalf("blocks read back\n%s\nwant\n%s\nin\n%s", seen.blocks, want.blocks, source)
	}
	checkLinks(t, seen, want, source)
	seen = readMarkdown(t, source, linkifying)
	compareTexts(t, seen.chunks, meantBy(d, false), source)
	checkLinks(t, seen, want, source)
}

// checkLinks reports a link that plain does not have, other than to the mail
// address that its text is.
func checkLinks(t testing.TB, seen, plain *page, source string) {
	t.Helper()
	for _, url := range seen.links {
		if !slices.Contains(plain.links, url) && !strings.HasPrefix(url, "mailto:") {
			t.Fatalf("link to %q in\n%s", url, source)
		}
	}
}

func TestMarkdownKeepsHostileText(t *testing.T) {
	for i := range hostileTexts {
		checkMarkdown(t, everything(cycle(hostileTexts, i)), everything(cycle([]string{"word"}, 0)), true)
	}
}

func TestMarkdownKeepsRandomDocuments(t *testing.T) {
	for seed := range uint64(500) {
		checkMarkdown(t, randomDocument(seed, hostile), randomDocument(seed, benign), true)
	}
}

// Around plain words with spaces around them every style can be written, if
// no two begin or end at one place.
func TestMarkdownKeepsStyles(t *testing.T) {
	for seed := range uint64(300) {
		d := (&shape{tame: true}).document(seed, spaced)
		checkMarkdown(t, d, d, false)
	}
}

func FuzzMarkdownText(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s, "word")
		f.Add("word", s)
	}
	f.Fuzz(func(t *testing.T, a, b string) {
		plainOf := func(s string) string {
			if words(s) == "" {
				return s
			}
			return "word"
		}
		checkMarkdown(t, touching(a, b), touching(plainOf(a), plainOf(b)), true)
	})
}

// touching returns a document in which texts touch markup without a space.
func touching(a, b string) *Document {
	link := &Link{"https://example.org", []Inline{Text(b), &Emphasis{[]Inline{Text(a)}}}}
	line := []Inline{
		Text(a), &Emphasis{[]Inline{Text(b)}}, Text(a), &Strong{[]Inline{Text(b), LineBreak{}, Text(a)}}, Code(b), Text(a),
		FootnoteRef(1), Text(b), &Strike{[]Inline{Text(a)}}, link, Text(a), Sub(b), Text(a), Sup(b),
	}
	return &Document{
		Blocks: []Block{
			&Heading{2, line}, &Paragraph{[]Inline{Text(a), LineBreak{}, Text(b)}}, &CodeBlock{a, b},
			&List{Items: []ListItem{{Blocks: []Block{&Paragraph{[]Inline{Text(b)}}, &Paragraph{line}}}}},
			&Table{Columns: []TableColumn{{Header: line}, {Header: []Inline{Text(a)}, Align: AlignDecimal}}, Rows: []TableRow{{Cells: [][]Inline{{Text(a)}, {Code(b)}}}}},
			&Image{a, a, b, nil, "png", 0, 0},
		},
		Footnotes: []Footnote{{[]Block{&Paragraph{[]Inline{Text(a + b)}}}}},
	}
}

func TestMarkdownIsWrapped(t *testing.T) {
	long := strings.Repeat("The velocity was averaged by travel time. ", 40)
	d := &Document{
		Blocks: []Block{
			&Paragraph{[]Inline{Text(long)}},
			&Quote{[]Block{&List{Items: []ListItem{{Blocks: []Block{&Paragraph{[]Inline{Text(long)}}}}}}}},
			&Paragraph{[]Inline{Text("a"), FootnoteRef(1)}},
		},
		Footnotes: []Footnote{{[]Block{&Paragraph{[]Inline{Text(long)}}}}},
	}
	for line := range strings.Lines(markdownOf(t, d)) {
		if n := columns(strings.TrimSuffix(line, "\n")); n > 80 {
			t.Errorf("%d columns: %s", n, line)
		}
	}
}

func TestMarkdownNeverWrapsCodeAndLinks(t *testing.T) {
	code := strings.Repeat("a b ", 40) + "c"
	d := &Document{Blocks: []Block{&Paragraph{[]Inline{
		Text("before "), Code(code), Text(" and "), &Link{"https://example.org", []Inline{Text(code)}}, Text(" after"),
	}}}}
	source := markdownOf(t, d)
	for _, want := range []string{"\n`" + code + "`\n", "\n[" + code + "](https://example.org)\n"} {
		if !strings.Contains(source, want) {
			t.Errorf("no %q in\n%s", want, source)
		}
	}
}

// What an engineer writes stays as it is: only what is markup is escaped.
func TestMarkdownEscapesNoMore(t *testing.T) {
	for _, s := range []string{
		"V_S30 = 412.5 m/s (5 % of 400) at ~300 m/s", "Vs [m/s] and su [kPa]", "a < b > c <30 & d", "Müller & Söhne, § 3.2.2!",
		`C:\data\line`, "snake_case_name", "3 * 4 = 12 + 5 - 2", "issue #4", "10.5 m", "1.2.3", "a|b", "me@example.org", "(see [3])", "50-60 (=)", "x: y",
	} {
		want := s + "\n"
		if got := markdownOf(t, &Document{Blocks: []Block{&Paragraph{[]Inline{Text(s)}}}}); got != want {
			t.Errorf("got %q, want %q", got, want)
		}
	}
}

func TestMarkdownEscapesMarkup(t *testing.T) {
	for s, want := range map[string]string{
		"# a":            `\# a`,
		"- a":            `\- a`,
		"1. a":           `1\. a`,
		"> a":            `\> a`,
		"==":             `\==`,
		"| - |":          `\| - |`,
		"*a*":            `\*a\*`,
		"_a_":            `\_a\_`,
		"<b>":            `\<b>`,
		"&lt;":           `\&lt;`,
		"[a](b)":         `\[a](b)`,
		"[^1]":           `\[^1]`,
		"https://a.b":    `https\://a.b`,
		"$5":             `\$5`,
		"~~a~~":          `\~\~a\~\~`,
		"a`b":            "a\\`b",
		"\u202egnp.exe":  "‹U+202E›gnp.exe",
		"a\n# b\n\n- c":  "a # b - c",
		"www.example.en": `www\.example.en`,
	} {
		if got := markdownOf(t, &Document{Blocks: []Block{&Paragraph{[]Inline{Text(s)}}}}); got != want+"\n" {
			t.Errorf("%q: got %q, want %q", s, got, want)
		}
	}
}

func TestMarkdownFenceIsLonger(t *testing.T) {
	got := markdownOf(t, &Document{Blocks: []Block{&CodeBlock{"md", "```\n````\n"}}})
	if want := "`````md\n```\n````\n`````\n"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestMarkdownPrefixes(t *testing.T) {
	d := &Document{Blocks: []Block{&Figure{Name: "a b", Alt: "x"}, &Image{Name: "../c.png"}}}
	var b strings.Builder
	if err := Markdown(&b, d, MarkdownOptions{Figures: "f/", Images: "../i/"}); err != nil {
		t.Fatal(err)
	}
	if want := "![x](f/a%20b.svg)\n\n![](../i/..%2Fc.png)\n"; b.String() != want {
		t.Errorf("got %q, want %q", b.String(), want)
	}
}

// One long cell must not make all the others as long.
func TestMarkdownTableStaysSmall(t *testing.T) {
	table := &Table{Columns: make([]TableColumn, 2)}
	for range 1000 {
		table.Rows = append(table.Rows, TableRow{Cells: [][]Inline{{Text("a")}, {Text("b")}}})
	}
	table.Rows[0].Cells[0] = []Inline{Text(strings.Repeat("x", 100_000))}
	if n := len(markdownOf(t, &Document{Blocks: []Block{table}})); n > 300_000 {
		t.Errorf("%d bytes", n)
	}
}

func TestDecimalPoint(t *testing.T) {
	for _, c := range []struct {
		s     string
		point int
		ok    bool
	}{
		{"412.5", 3, true}, {"1,200", 5, true}, {"1,200.25 m", 5, true}, {"7", 1, true}, {".5", 0, true}, {"-3.5", 2, true},
		{"≤ 300", 7, true}, {"**12.5**", 4, true}, {"12.", 2, true}, {"–", 3, true}, {"", 0, false}, {"C", 0, false}, {"half-space", 0, false},
		{"1 200.5", 5, true}, {"30 m", 2, true},
	} {
		if point, ok := decimalPoint(c.s); point != c.point || ok != c.ok {
			t.Errorf("decimalPoint(%q) = %d, %v, want %d, %v", c.s, point, ok, c.point, c.ok)
		}
	}
}

func TestColumns(t *testing.T) {
	// Unicode Standard Annex 11: Han is wide; a combining acute has no width.
	for s, want := range map[string]int{"": 0, "abc": 3, "é": 1, "e\u0301": 1, "日本": 4, "≤": 1, "▸ C": 3} {
		if got := columns(s); got != want {
			t.Errorf("columns(%q) = %d, want %d", s, got, want)
		}
	}
}

// Found with cmark-gfm 0.29.0.gfm.6, to which a star behind ~~ stands behind
// the letter before them, and with goldmark 1.8.7, which sees a footnote in
// !x^1] and a mail address in <-@a>.
func TestMarkdownAvoidsWhatReadersTakeDifferently(t *testing.T) {
	for want, line := range map[string][]Inline{
		"x~~b~~^c":                    {&Emphasis{[]Inline{Text("x"), &Strike{say("b")}, &Strong{say("^c")}}}},
		"*x~~b~~ **c** d*":            {&Emphasis{[]Inline{Text("x"), &Strike{say("b")}, Text(" "), &Strong{say("c")}, Text(" d")}}},
		`\!x^1]`:                      say("!x^1]"),
		`\<-@a>`:                      say("<-@a>"),
		"[\\^1](https://example.org)": {&Link{"https://example.org", say("^1")}},
		"&#92;\\\na":                  {Text(`\`), LineBreak{}, Text("a")},
	} {
		if got := markdownOf(t, &Document{Blocks: []Block{&Paragraph{line}}}); got != want+"\n" {
			t.Errorf("got %q, want %q", got, want+"\n")
		}
	}
}

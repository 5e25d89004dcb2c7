package pdf

import (
	"bytes"
	"crypto/sha256"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"runtime"
	"slices"
	"strings"
	"testing"
	"time"

	"shearbook/report"
)

// printed returns a document as a file.
func printed(t *testing.T, d *report.Document, opt Options) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, d, opt); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// pagesOf returns the text of each page as Poppler's pdftotext reads it.
func pagesOf(t *testing.T, file []byte) []string {
	t.Helper()
	out := popplers(t, file, "pdftotext", "-layout", "FILE", "-")
	pages := strings.Split(string(out), "\f")
	return pages[:len(pages)-1]
}

// popplers runs one of Poppler's tools on a file.
func popplers(t *testing.T, file []byte, tool string, args ...string) []byte {
	t.Helper()
	path, err := exec.LookPath(tool)
	if err != nil {
		t.Skipf("%s (Debian's poppler-utils) is not here, so the file cannot be read back", tool)
	}
	name := filepath.Join(t.TempDir(), "a.pdf")
	if err := os.WriteFile(name, file, 0o600); err != nil {
		t.Fatal(err)
	}
	for i := range args {
		if args[i] == "FILE" {
			args[i] = name
		}
	}
	out, err := exec.Command(path, args...).CombinedOutput()
	if err != nil {
		t.Fatalf("%s: %v\n%s", tool, err, out)
	}
	return out
}

// flat joins what was set on several lines.
func flat(text string) string { return strings.Join(strings.Fields(text), " ") }

func TestEveryNodeReachesThePage(t *testing.T) {
	file := printed(t, demo(), Options{})
	out := popplers(t, file, "pdftotext", "-raw", "FILE", "-")
	text := flat(string(out))
	for _, want := range []string{
		"Seismic site classification", "Prepared by Moorland Ground Engineers", // TitleBlock
		"Profile L1", "Site class", "51 % higher", // Summary
		report.Caution,                                         // CautionBox, footer
		"Survey and method",                                    // Heading, Table
		"profiles/line-1.csv",                                  // Code
		"Layer", "338.75", "Densities are correlated", "100.0", // Table
		"Shear-wave velocity, m/s", "Depth, m", "Figure 1.", // Figure
		"238.4 m/s", "∑", "0.125823 s", "0.4231 s", // Formula
		"Liquefiable soil", "not assessed", "10.", "•", "–", // List
		"bold", "italics", "both", "struck out words", "m2", // styles
		"link to a page", "(file:///etc/hosts)", "A new line", // Link, LineBreak
		"A quotation within the quotation.", "The outer one", // Quote
		"indented by a tab", "18,265,sand", // CodeBlock
		"Plan of the site (invented)", "The north bank", // Image
		"evil‹U+202E›txt.exe", "bell ‹U+0007›", // hidden characters
		"Checked by", "Qualification, licence", "Seal", // SignOff
		"Appendix: data as read", "333.75", "Καλημέρα", "Скорость поперечных волн", "Łódź", "½", "σ ≤ 0.3",
		"365.76 m/s", "Surface waves sample", "mentions another.", "Mentioned only from within a note.", // Footnotes
	} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not on the pages", want)
		}
	}
}

// Node types that no printer knows, by embedding the interface.
type (
	strangeBlock  struct{ report.Block }
	strangeInline struct{ report.Inline }
	strangeMath   struct{ report.Math }
	strangeMark   struct{ report.Mark }
)

func TestUnknownNodesPanic(t *testing.T) {
	for name, block := range map[string]report.Block{
		"pdf.strangeBlock":  strangeBlock{},
		"pdf.strangeInline": para(strangeInline{}),
		"pdf.strangeMath":   &report.Formula{Math: strangeMath{}},
		"pdf.strangeMark":   &report.Figure{Picture: &report.Picture{Width: 1, Height: 1, Marks: []report.Mark{strangeMark{}}}},
	} {
		func() {
			defer func() {
				if got := fmt.Sprint(recover()); !strings.Contains(got, name) {
					t.Errorf("panic %q does not name %s", got, name)
				}
			}()
			Write(&bytes.Buffer{}, &report.Document{Blocks: []report.Block{block}}, Options{})
		}()
	}
}

// The sizes are those of ISO 216 (210 by 297 mm) and of US Letter (8.5 by 11
// in) in points.
func TestPaper(t *testing.T) {
	for paper, want := range map[Paper]string{A4: "595.28 841.89", Letter: "612.00 792.00"} {
		file := printed(t, demo(), Options{Paper: paper})
		boxes := regexp.MustCompile(`/MediaBox \[0 0 ([0-9. ]+)\]`).FindAllSubmatch(file, -1)
		if len(boxes) == 0 {
			t.Error("no MediaBox")
		}
		for _, b := range boxes {
			if string(b[1]) != want {
				t.Errorf("paper %d: %s, want %s", paper, b[1], want)
			}
		}
	}
}

func TestPageNumbersAndCautionStandOnEveryPage(t *testing.T) {
	pages := pagesOf(t, printed(t, demo(), Options{}))
	for i, page := range pages {
		if want := fmt.Sprintf("Page %d of %d", i+1, len(pages)); !strings.Contains(page, want) {
			t.Errorf("page %d lacks %q", i+1, want)
		}
		if !strings.Contains(flat(page), report.Caution) {
			t.Errorf("page %d lacks the caution", i+1)
		}
		if i > 0 && (!strings.Contains(page, "Ferry Road pumping station") || !strings.Contains(page, "MGE-2031-04 · Revision B")) {
			t.Errorf("page %d lacks its header", i+1)
		}
	}
	if got := pagesOf(t, printed(t, &report.Document{}, Options{})); len(got) != 1 || !strings.Contains(flat(got[0]), report.Caution) {
		t.Error("an empty document is not one page with the caution")
	}
}

func TestSameBytes(t *testing.T) {
	d := demo() // two of its images are equally wide
	d.Blocks = append(demoProse()[:2], demoProse()[9:]...)
	d.Blocks = append(d.Blocks, numberedTable(20), &report.Figure{Picture: demoPicture(300, 200)})
	digests := map[[32]byte]int{}
	for _, procs := range []int{1, 2} {
		before := runtime.GOMAXPROCS(procs)
		for range 25 {
			digests[sha256.Sum256(printed(t, d, Options{}))]++
		}
		runtime.GOMAXPROCS(before)
	}
	if len(digests) != 1 {
		t.Errorf("50 runs gave %d different files", len(digests))
	}
	files := make(chan []byte)
	for range 4 {
		go func() {
			var b bytes.Buffer
			Write(&b, d, Options{})
			files <- b.Bytes()
		}()
	}
	for range 4 {
		if digests[sha256.Sum256(<-files)] == 0 {
			t.Error("a file differs if others are printed at the same time")
		}
	}
}

func TestDates(t *testing.T) {
	zone := time.FixedZone("east", 3*3600)
	for _, c := range []struct {
		created time.Time
		date    string
		want    string
	}{
		{time.Time{}, "2026-03-14", "D:20260314000000"},
		{time.Time{}, "spring 2026", "D:20000101000000"},
		{time.Date(2031, 5, 6, 1, 2, 3, 0, zone), "2026-03-14", "D:20310505220203"}, // 01:02:03+03:00 is 22:02:03 UTC of the day before
	} {
		file := printed(t, &report.Document{Date: c.date}, Options{Created: c.created})
		for _, key := range []string{"/CreationDate (", "/ModDate ("} {
			if !bytes.Contains(file, []byte(key+c.want+")")) {
				t.Errorf("%v, %q: no %s%s", c.created, c.date, key, c.want)
			}
		}
	}
}

func TestMetadata(t *testing.T) {
	out := string(popplers(t, printed(t, demo(), Options{}), "pdfinfo", "FILE"))
	for _, want := range []string{"Seismic site classification", "Site class from shear-wave velocity", "Moorland Ground Engineers", "Vs30, site class, MASW", "shearbook demo"} {
		if !strings.Contains(out, want) {
			t.Errorf("pdfinfo does not show %q:\n%s", want, out)
		}
	}
	d := &report.Document{Project: "x", Title: "(brackets\\ \r and \U0001F600 beyond U+FFFF)"}
	file := printed(t, d, Options{Language: "de-CH (x)"})
	if !bytes.Contains(file, []byte("/Lang (de-CHx)")) {
		t.Error("language not stated, or not cleaned")
	}
	if out := string(popplers(t, file, "pdfinfo", "FILE")); !strings.Contains(out, "\U0001F600 beyond") {
		t.Errorf("title was mangled:\n%s", out)
	}
}

// The entries of the outline, in order, with the object that each is below:
// a heading is below the last one of a higher rank, whatever its level.
func TestOutlineFollowsTheHeadings(t *testing.T) {
	d := &report.Document{Blocks: []report.Block{heading(3, "deep first"), heading(1, "one"), heading(4, "below one"),
		heading(2, "also below one"), heading(3, "below that"), heading(1, "two", report.FootnoteRef(1))}, Footnotes: []report.Footnote{{}}}
	file := printed(t, d, Options{})
	entries := regexp.MustCompile(`(?s)(\d+) 0 obj\n<</Title \((.*?)\)\n/Parent (\d+) 0 R`).FindAllSubmatch(file, -1)
	titles := map[string]string{} // by object
	var got []string
	for _, e := range entries {
		title := strings.Map(func(r rune) rune { // UTF-16 of ASCII
			if r < ' ' || r > '~' {
				return -1
			}
			return r
		}, string(e[2]))
		titles[string(e[1])] = title
		got = append(got, title+" < "+titles[string(e[3])])
	}
	want := []string{"deep first < ", "one < ", "below one < one", "also below one < one", "below that < also below one", "two < "}
	if !slices.Equal(got, want) {
		t.Errorf("outline %q, want %q", got, want)
	}
}

func TestLinks(t *testing.T) {
	d := demo()
	file := printed(t, d, Options{})
	for _, want := range []string{"/URI (https://example.org/a?b=c&d=%C3%A9)", "/URI (mailto:office@example.org)"} {
		if !bytes.Contains(file, []byte(want)) {
			t.Errorf("no %s", want)
		}
	}
	if bytes.Contains(file, []byte("file:///")) {
		t.Error("a link to a file was made")
	}
	// Four mentions, four ways back, and two links to headings, of which one
	// is broken in two.
	if n := bytes.Count(file, []byte("/Border [0 0 0] /Dest [")); n != 11 {
		t.Errorf("%d links within the document, want 11", n)
	}
	dead := printed(t, &report.Document{Blocks: []report.Block{para(&report.Link{URL: "#nowhere", Inline: inl("nowhere")})}}, Options{})
	if bytes.Contains(dead, []byte("/Subtype /Link")) {
		t.Error("a link leads to a heading that is not there")
	}
}

func TestMissingGlyphs(t *testing.T) {
	for _, c := range []struct {
		block report.Block
		want  []rune
	}{
		{para("a漢b字c漢"), []rune{'字', '漢'}},
		{para("emoji \U0001F600"), []rune{'\U0001F600'}},
		{para("שלום"), []rune{0x5D5, 0x5DC, 0x5DD, 0x5E9}}, // would come out backwards
		{para("bad \xff byte"), []rune{'\uFFFD'}},
		{heading(1, "漢"), []rune{'漢'}},
		{&report.CodeBlock{Text: "漢\n"}, []rune{'漢'}},
		{&report.Formula{Math: report.MathIdent("漢")}, []rune{'漢'}},
		{&report.Figure{Picture: &report.Picture{Width: 9, Height: 9, Marks: []report.Mark{&report.Label{Text: "漢", Size: 8}}}}, []rune{'漢'}},
		{&report.TitleBlock{Title: "漢"}, []rune{'漢'}},
		{&report.Summary{Answer: "漢"}, []rune{'漢'}},
		{&report.SignOff{Signatures: []report.Signature{{Name: "漢"}}}, []rune{'漢'}},
		{&report.Table{Columns: []report.TableColumn{column("漢", report.AlignLeft)}}, []rune{'漢'}},
	} {
		var out bytes.Buffer
		err := Write(&out, &report.Document{Blocks: []report.Block{c.block}}, Options{})
		var missing *MissingGlyphs
		if !errors.As(err, &missing) {
			t.Errorf("%T: error %v", c.block, err)
			continue
		}
		if !slices.Equal(missing.Runes, c.want) {
			t.Errorf("%T: missing %q, want %q", c.block, missing.Runes, c.want)
		}
		if out.Len() > 0 {
			t.Error("something was written all the same")
		}
	}
	for _, d := range []*report.Document{{Project: "漢"}, {Reference: "漢"}, {Revision: "漢"}, {Date: "漢"}} {
		d.Blocks = []report.Block{para("x")}
		if err := Write(&bytes.Buffer{}, d, Options{}); err == nil {
			t.Errorf("%+v: header or footer printed what it cannot", d)
		}
	}
	if got := (&MissingGlyphs{Runes: []rune("漢")}).Error(); !strings.Contains(got, "U+6F22") {
		t.Errorf("message %q does not name the character", got)
	}
}

func TestBadPicturesAndImages(t *testing.T) {
	nan := func() float64 { z := 0.0; return z / z }()
	for name, block := range map[string]report.Block{
		"no picture":  &report.Figure{Name: "f"},
		"no size":     &report.Figure{Name: "f", Picture: &report.Picture{}},
		"NaN size":    &report.Figure{Name: "f", Picture: &report.Picture{Width: nan, Height: 1}},
		"NaN stroke":  &report.Figure{Name: "f", Picture: &report.Picture{Width: 1, Height: 1, Marks: []report.Mark{&report.Stroke{Path: report.Path{{X: nan}}}}}},
		"NaN label":   &report.Figure{Name: "f", Picture: &report.Picture{Width: 1, Height: 1, Marks: []report.Mark{&report.Label{Turn: nan}}}},
		"no PNG":      &report.Image{Name: "f", Format: "png", Data: []byte("\x89PNG\r\n\x1a\n")},
		"cut PNG":     &report.Image{Name: "f", Format: "png", Data: demoPNG(40, 40)[:300]},
		"cut JPEG":    &report.Image{Name: "f", Format: "jpeg", Data: demoJPEG(40, 40)[:300]},
		"some format": &report.Image{Name: "f", Format: "webp", Data: demoPNG(4, 4)},
	} {
		var out bytes.Buffer
		err := Write(&out, &report.Document{Blocks: []report.Block{block}}, Options{})
		if err == nil || !strings.Contains(err.Error(), `"f"`) || out.Len() > 0 {
			t.Errorf("%s: error %v, %d bytes written", name, err, out.Len())
		}
	}
}

func TestFontsAreEmbedded(t *testing.T) {
	out := popplers(t, printed(t, demo(), Options{}), "pdffonts", "FILE")
	lines := strings.Split(strings.TrimSpace(string(out)), "\n")[2:]
	if len(lines) != 7 {
		t.Errorf("%d fonts, want the 7 in use:\n%s", len(lines), out)
	}
	for _, l := range lines {
		if !regexp.MustCompile(`CID TrueType\s+Identity-H\s+yes\s+\w+\s+yes`).MatchString(l) {
			t.Errorf("not embedded, or without its characters: %s", l)
		}
	}
}

func TestFiguresAreVectors(t *testing.T) {
	figure := &report.Figure{Name: "f", Picture: demoPicture(468, 300)}
	file := printed(t, &report.Document{Blocks: []report.Block{figure}}, Options{})
	if bytes.Contains(file, []byte("/Subtype /Image")) {
		t.Error("a figure became an image")
	}
	out := popplers(t, file, "pdftotext", "FILE", "-")
	if !bytes.Contains(out, []byte("Shear-wave velocity, m/s")) {
		t.Error("the labels of a figure are not text")
	}
	image := &report.Image{Format: "png", Data: demoPNG(30, 30)}
	file = printed(t, &report.Document{Blocks: []report.Block{image, image}}, Options{})
	if n := bytes.Count(file, []byte("/Subtype /Image")); n != 1 {
		t.Errorf("one image used twice is in the file %d times", n)
	}
}

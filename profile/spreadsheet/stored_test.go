package spreadsheet

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"
)

// zipped is a zip file of parts, by name and content in turn.
func zipped(t testing.TB, parts ...string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for i := 0; i < len(parts); i += 2 {
		out, err := w.Create(parts[i])
		must(t, err)
		_, err = io.WriteString(out, parts[i+1])
		must(t, err)
	}
	must(t, w.Close())
	return b.Bytes()
}

const (
	transitional = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
	strict       = "http://purl.oclc.org/ooxml/officeDocument/relationships"
)

// bare is a workbook written by hand: one sheet with the given XML inside its
// root, and other parts.
func bare(t testing.TB, sheet string, more ...string) []byte {
	t.Helper()
	return zipped(t, append([]string{
		"xl/workbook.xml", `<workbook xmlns:r="` + transitional + `"><sheets><sheet name="S" sheetId="1" r:id="rId1"/></sheets></workbook>`,
		"xl/_rels/workbook.xml.rels", `<Relationships><Relationship Id="rId1" Type="` + transitional + `/worksheet" Target="worksheets/sheet1.xml"/></Relationships>`,
		"xl/worksheets/sheet1.xml", `<worksheet>` + sheet + `</worksheet>`,
	}, more...)...)
}

// stored is the rows of a workbook's first sheet as they are read, and the
// sheet.
func stored(t testing.TB, data []byte) ([]row, *sheet, error) {
	t.Helper()
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	must(t, err)
	b, err := openBook(archive)
	if err != nil {
		return nil, nil, err
	}
	var rows []row
	s := &sheet{hiddenColumns: map[int]bool{}, formulas: map[[2]int]string{}}
	err = b.readRows(b.sheets[0].part, s, func(r row) error {
		rows = append(rows, r)
		return nil
	})
	return rows, s, err
}

// Each type of cell (ISO/IEC 29500-1, 18.18.11) as the sheet stores it, in row
// 1; cells that do not say where they are follow one another.
func TestCellTypes(t *testing.T) {
	const shared = `<sst><si><t>plain</t></si>` +
		`<si><r><rPr><b/></rPr><t>V</t></r><r><rPr><vertAlign val="subscript"/></rPr><t xml:space="preserve">s (m/s)</t></r><rPh sb="0" eb="1"><t>spoken</t></rPh><phoneticPr fontId="1"/></si>` +
		`<si/><si><t>a_x000D_b_x005F_x_xyz</t></si><si><t>s&#246;il &amp; <![CDATA[<rock>]]></t></si></sst>`
	const styles = `<styleSheet><numFmts count="3"><numFmt numFmtId="164" formatCode="[Red]0.0&quot; d/m/y&quot;"/><numFmt numFmtId="165" formatCode="dd\.mm\.yyyy;@"/><numFmt numFmtId="166" formatCode="0.0%"/><numFmt numFmtId="167" formatCode="mm.yyyy hh:mm"/></numFmts>` +
		`<cellStyleXfs><xf numFmtId="9"/></cellStyleXfs><cellXfs><xf numFmtId="0"/><xf numFmtId="164"/><xf numFmtId="165"/><xf numFmtId="166"/><xf numFmtId="14"/><xf numFmtId="20"/><xf numFmtId="167"/></cellXfs></styleSheet>`
	for _, c := range []struct{ xml, want string }{
		{`<c><v>4.50</v></c>`, "4.50"},
		{`<c t="n"><v> 7 </v></c>`, "7"},
		{`<c t="s"><v>0</v></c>`, "plain"},
		{`<c t="s"><v>1</v></c>`, "Vs (m/s)"},
		{`<c t="s"><v>2</v></c>`, ""},
		{`<c t="s"><v>3</v></c>`, "a\rb_x_xyz"},
		{`<c t="s"><v>4</v></c>`, "söil & <rock>"},
		{`<c t="str"><f>A1&amp;"x"</f><v>12x</v></c>`, "12x"},
		{`<c t="inlineStr"><is><t>in</t></is></c>`, "in"},
		{`<c t="inlineStr"><is><r><t>in </t></r><r><t>runs</t></r></is></c>`, "in runs"},
		{`<c t="b"><v>1</v></c>`, "TRUE"},
		{`<c t="b"><v>0</v></c>`, "FALSE"},
		{`<c t="e"><v>#DIV/0!</v></c>`, "#DIV/0!"},
		{`<c t="d"><v>2026-05-05</v></c>`, "2026-05-05"},
		{`<c><f>1+1</f><v>2</v></c>`, "2"},
		{`<c s="1"><v>46147</v></c>`, "46147"},
		{`<c s="2"><v>46147</v></c>`, "05.05.2026"}, // day 46147 is 2026-05-05, as in TestFaults
		{`<c s="3"><v>0.355</v></c>`, "35.5"},
		{`<c s="4"><v>46147.75</v></c>`, "2026-05-05"},
		{`<c s="4"><v>180</v></c>`, "180"}, // a velocity, whatever the format of its column
		{`<c s="5"><v>46147.5</v></c>`, "46147.5"},
		{`<c s="6"><v>46147</v></c>`, "2026-05-05"}, // 05.2026 would be a number
		{`<c s="99"><v>1</v></c>`, "1"},
		{`<c s="3"/>`, ""},
		{`<x:c xmlns:x="urn:any" x:r="Z9"><x:v>5</x:v></x:c>`, "5"},
	} {
		rows, _, err := stored(t, bare(t, `<sheetData><row>`+c.xml+`<c><v>9</v></c></row></sheetData>`, "xl/sharedStrings.xml", shared, "xl/styles.xml", styles))
		if err != nil || len(rows) != 1 || len(rows[0].cells) != 2 || rows[0].cells[0] != c.want || rows[0].cells[1] != "9" {
			t.Errorf("%s: %v, %v, want %q", c.xml, rows, err, c.want)
		}
	}
}

// Days counted from 1904: day 44685 is 2026-05-05, 1462 days less than when
// counted from 1900 (ISO/IEC 29500-1, 18.17.4.1).
func TestFrom1904(t *testing.T) {
	f := numberFormat{date: true}
	if got := f.shown("44685", true); got != "2026-05-05" {
		t.Error(got)
	}
}

// The letters of a date's code (ISO/IEC 29500-1, 18.8.31) on a Tuesday.
func TestDateCodes(t *testing.T) {
	at := time.Date(2026, 5, 5, 0, 0, 0, 0, time.UTC)
	for code, want := range map[string]string{
		"d/m/yy": "5/5/26", "dddd, d mmmm yyyy": "Tuesday, 5 May 2026", "ddd dd-mmm": "Tue 05-May", "[$-409]mmmmm d": "M 5",
		"yyyymmdd": "2026-05-05", "m/d/yy h:mm AM/PM": "5/5/26", `yyyy"年"m"月"`: "2026年5月", "mmm": "May", "YYYY-MM-DD": "2026-05-05",
	} {
		f := parseFormat(code)
		if got := f.day(at); !f.date || got != want {
			t.Errorf("%s: %s, date %v, want %s", code, got, f.date, want)
		}
	}
	for _, code := range []string{strings.Repeat("d/", 200), "General", "0.00", "#,##0", "h:mm", "yyyy", "mm:ss", "0.00E+00", "@", `"day "0`, "[h]:mm", "[Red]0;d/m/y", `"`, "[", `\`, "_", ""} {
		if f := parseFormat(code); f.date || f.percent {
			t.Errorf("%s: %+v", code, f)
		}
	}
}

// A workbook of the strict kind, with prefixes, targets from the root and
// names of its writer's own, is read as any other.
func TestStrictAndPrefixed(t *testing.T) {
	const main = ` xmlns:x="http://purl.oclc.org/ooxml/spreadsheetml/main" xmlns:q="` + strict + `"`
	data := zipped(t,
		"XL/Workbook.xml", `<?xml version="1.0" encoding="UTF-8"?><x:workbook`+main+`><x:sheets><x:sheet name="Chart" sheetId="1" q:id="c"/><x:sheet name="A &amp; B" sheetId="2" state="veryHidden" q:id="s"/></x:sheets></x:workbook>`,
		"xl/_rels/workbook.xml.rels", `<p:Relationships xmlns:p="urn:any"><p:Relationship Id="c" Type="`+strict+`/chartsheet" Target="chartsheets/none.xml"/><p:Relationship Id="s" Type="`+strict+`/worksheet" Target="/xl/worksheets/layers.xml"/><p:Relationship Id="t" Type="`+strict+`/sharedStrings" Target="words.xml"/></p:Relationships>`,
		"xl/words.xml", `<x:sst`+main+`><x:si><x:t>bottom (m)</x:t></x:si><x:si><x:t>Vs (m/s)</x:t></x:si></x:sst>`,
		"xl/worksheets/layers.xml", `<x:worksheet`+main+`><x:cols><x:col min="2" max="16384" hidden="true"/></x:cols><x:sheetData><x:row r="3"><x:c r="B3" t="s"><x:v>0</x:v></x:c><x:c r="C3" t="s"><x:v>1</x:v></x:c></x:row><x:row r="4" hidden="true"><x:c r="B4"><x:v>5</x:v></x:c><x:c r="C4"><x:v>200</x:v></x:c></x:row></x:sheetData><x:extLst><x:ext><x:sheetData><x:row r="9"/></x:sheetData></x:ext></x:extLst></x:worksheet>`)
	profiles, err := Read("x.xlsx", data, Options{})
	if err != nil {
		t.Fatal(err)
	}
	got := profiles[0].Name + ": " + layers(&profiles[0]) + "; " + noteIDs(&profiles[0])
	if want := "A & B: 0-5 200 'A & B'!C4; hidden-rows@'A & B'!B4 hidden-columns@'A & B'!B4 hidden-sheet@'A & B'!B4"; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

// What is not in order is damage: no row of such a sheet is lost in silence.
func TestDamagedXML(t *testing.T) {
	const rows = `<sheetData><row r="1"><c r="A1"><v>1</v></c></row><row r="2"><c r="A2"><v>2</v></c></row></sheetData>`
	if got, _, err := stored(t, bare(t, rows)); err != nil || len(got) != 2 {
		t.Fatalf("%v, %v", got, err)
	}
	for _, c := range []struct{ name, from, to string }{
		{"rows that go back", `r="2"`, `r="1"`},
		{"row 0", `r="1"`, `r="0"`},
		{"a row beyond the last", `r="2"`, `r="1048577"`},
		{"a row that is no number", `r="2"`, `r="two"`},
		{"a cell of another row", `r="A2"`, `r="A3"`},
		{"a cell beyond the last column", `r="A2"`, `r="XFE2"`},
		{"a cell without a column", `r="A2"`, `r="2"`},
		{"cells that go back", `<v>2</v></c>`, `<v>2</v></c><c r="A2"><v>3</v></c>`},
		{"a shared text that is missing", `<c r="A2">`, `<c r="A2" t="s">`},
		{"an end without a beginning", `</row><row r="2">`, `</c></row><row r="2">`},
		{"no end", `</row></sheetData>`, ``},
		{"an entity that is not defined", `<v>2`, `<v>&two;2`},
		{"a byte that is no UTF-8", `<v>2`, "<v>\xff2"},
		{"another root", `</sheetData>`, `</sheetData></worksheet><worksheet>`},
		{"deep nesting", `<v>2</v>`, strings.Repeat("<x>", 200) + strings.Repeat("</x>", 200)},
		{"a tag of 2 MiB", `<c r="A2">`, `<c r="A2" x="` + strings.Repeat("x", 2<<20) + `">`},
		{"columns that are none", `<sheetData>`, `<cols><col min="0" max="2" hidden="1"/></cols><sheetData>`},
	} {
		if !strings.Contains(rows, c.from) {
			t.Fatal(c.name)
		}
		_, err := Read("x.xlsx", bare(t, strings.Replace(rows, c.from, c.to, 1)), Options{})
		if err == nil || err.Error() != `x.xlsx: sheet "S" is damaged, or not a workbook` {
			t.Errorf("%s: %v", c.name, err)
		}
	}
	for _, c := range [][2]string{{"xl/sharedStrings.xml", "<sst><si><t>x</si></sst>"}, {"xl/styles.xml", "<styleSheet>"}, {"xl/sharedStrings.xml", "<html/>"}} {
		if _, err := Read("x.xlsx", bare(t, rows, c[0], c[1]), Options{}); err == nil || err.Error() != "x.xlsx: the file is damaged, or not a workbook" {
			t.Errorf("%v: %v", c, err)
		}
	}
}

// A part that several sheets are made of is counted as often as it is read.
func TestUnzippedIsCounted(t *testing.T) {
	data := bare(t, `<sheetData/>`+strings.Repeat("<x></x>", 150_000)) // 1,050,000 bytes
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	must(t, err)
	b, err := openBook(archive)
	must(t, err)
	b.left = 3 << 20
	read := 0
	for err == nil && read < 10 {
		if err = b.readRows(b.sheets[0].part, &sheet{}, nil); err == nil {
			read++
		}
	}
	if read != 2 || !errors.Is(err, errLarge) {
		t.Errorf("read %d times, %v", read, err)
	}
}

// Formulas that nobody evaluated are told from those whose value is an empty
// text, and those that share their text from those that hold it.
func TestFormulas(t *testing.T) {
	_, s, err := stored(t, bare(t, `<sheetData><row><c><f>A9</f></c><c><f>B9</f><v></v></c><c t="str"><f>C9</f><v></v></c><c><f t="shared" si="0"/></c><c><f/></c><c><f>F9</f><v>1</v></c></row></sheetData>`))
	must(t, err)
	want := map[[2]int]string{{1, 1}: `the formula "=A9"`, {1, 2}: `the formula "=B9"`, {1, 4}: "the formula"}
	if diff := cmp.Diff(want, s.formulas); diff != "" {
		t.Error(diff)
	}
}

// Rows of many kinds of cells are read as excelize 2.11.1 reads them raw.
func TestAgainstLibrary(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 4))
	for range 20 {
		f := excelize.NewFile()
		for range 300 {
			column, n := 1+random.IntN(40), 1+random.IntN(60)
			name, err := excelize.CoordinatesToCellName(column, n)
			must(t, err)
			var value any
			switch random.IntN(5) {
			case 0:
				value = random.IntN(1000)
			case 1:
				value = float64(random.IntN(100000)) / 64
			case 2:
				value = fmt.Sprintf("text <%d> & more", random.IntN(50))
			case 3:
				must(t, f.SetCellRichText("Sheet1", name, []excelize.RichTextRun{{Text: "V"}, {Text: "s", Font: &excelize.Font{Bold: true}}}))
				continue
			}
			must(t, f.SetCellValue("Sheet1", name, value))
		}
		b, err := f.WriteToBuffer()
		must(t, err)
		want, err := f.GetRows("Sheet1", excelize.Options{RawCellValue: true})
		must(t, err)
		rows, _, err := stored(t, b.Bytes())
		must(t, err)
		got := make([][]string, len(want))
		for _, r := range rows {
			if r.number <= len(want) && len(r.cells) > 0 {
				got[r.number-1] = r.cells
			}
		}
		if diff := cmp.Diff(want, got, cmp.Transformer("blank", func(s []string) string { return strings.TrimRight(strings.Join(s, "|"), "|") })); diff != "" {
			t.Fatal(diff)
		}
		must(t, f.Close())
	}
}

// Names of cells there and back.
func TestCoordinates(t *testing.T) {
	for n := 1; n <= lastColumn; n++ {
		if column, r, ok := coordinates(letters(n) + number(n)); column != n || r != n || !ok {
			t.Fatalf("%s%d: %d, %d, %v", letters(n), n, column, r, ok)
		}
	}
	for _, name := range []string{"", "A", "1", "A0", "XFE1", "A1048577", "AAAA1", "A1B", "A-1", "$A$1", "A99999999999999999999"} {
		if _, _, ok := coordinates(name); ok {
			t.Error(name)
		}
	}
	if letters(1) != "A" || letters(27) != "AA" || letters(lastColumn) != "XFD" { // XFD is the last column a spreadsheet shows
		t.Error(letters(lastColumn))
	}
}

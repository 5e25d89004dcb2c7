package batch

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/templates"
	"shearbook/vs30/siteclass"
)

func codes(t testing.TB, ids ...string) []*siteclass.Code {
	t.Helper()
	var out []*siteclass.Code
	for _, id := range ids {
		c, err := siteclass.Find(id)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, c)
	}
	return out
}

// everything is all that can be made from a batch of the county.
func everything(t testing.TB, ids ...string) DeriveOptions {
	return DeriveOptions{GeoJSON: true, JSON: true, XLSX: true, Report: true, Codes: codes(t, ids...),
		Project: "Hollow Lea county survey", PreparedBy: "Marsh & Weir Ground Engineering", Date: "2026-03-02",
		Version: "shearbook 1.0.0", Command: "shearbook batch survey --code " + strings.Join(ids, ",") + " --out county",
		Settings: []Setting{{"Datum", "ground level"}, {"Extension of short profiles", "none"}}}
}

// files are the contents of all files of a folder.
func files(t testing.TB, dir string) map[string]string {
	t.Helper()
	out := map[string]string{}
	err := filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		out[strings.TrimPrefix(path, dir)] = string(data)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// The same tables give the same bytes, whatever stood in the folder before.
// With -artifacts the pages are kept, for looking at them.
func TestDeriveGivesTheSameBytes(t *testing.T) {
	for i, ids := range [][]string{{"asce-7-16"}, {"asce-7-22", "ec8-2004"}} {
		first, second := filepath.Join(t.ArtifactDir(), fmt.Sprint(i)), t.TempDir()
		if err := os.Mkdir(first, 0o777); err != nil {
			t.Fatal(err)
		}
		newCounty(t, 60, "nbcc-2020").write(t, second)
		if err := Derive(second, everything(t, "nbcc-2020")); err != nil {
			t.Fatal(err)
		}
		for _, dir := range []string{first, second} {
			newCounty(t, 400, ids...).write(t, dir)
			if err := Derive(dir, everything(t, ids...)); err != nil {
				t.Fatal(err)
			}
		}
		a, b := files(t, first), files(t, second)
		if len(a) != len(b) {
			t.Errorf("%d and %d files", len(a), len(b))
		}
		for name := range a {
			if a[name] != b[name] {
				t.Errorf("%s differs", name)
			}
		}
		want := []string{"/summary.md", "/summary.html", "/summary.pdf", "/datapackage.json"}
		for _, id := range ids {
			want = append(want, "/figures/map-"+id+".svg", "/figures/map-"+id+"-grid-28992.svg", "/figures/histogram-"+id+".svg")
		}
		for _, name := range want {
			if a[name] == "" {
				t.Errorf("there is no %s", name)
			}
		}
		for _, name := range []string{"/summary.md", "/summary.html"} {
			if !strings.Contains(oneLine(a[name]), report.Caution) {
				t.Errorf("%s does not hold the caution", name)
			}
		}
	}
}

// oneLine is text without its line ends and the marks of a quotation.
func oneLine(text string) string {
	return strings.Join(strings.Fields(strings.ReplaceAll(text, "\n>", "\n")), " ")
}

// gathered is the overview of a county.
func gathered(t testing.TB, c *county, opt DeriveOptions) *overview {
	t.Helper()
	dir := t.TempDir()
	c.write(t, dir)
	o, err := newOverview(dir, &opt)
	if err != nil {
		t.Fatal(err)
	}
	if err := o.draw(dir); err != nil {
		t.Fatal(err)
	}
	return o
}

// The counts against the rows, counted here once more.
func TestOverviewCounts(t *testing.T) {
	ids := []string{"asce-7-16", "ec8-2004"}
	c := newCounty(t, 300, ids...)
	o := gathered(t, c, everything(t, ids...))
	units := map[string]Flags{}
	classes := map[string]int{}
	for _, r := range c.rows {
		units[fmt.Sprint(r.File, r.Line, r.Profile)] |= r.Flags
		classes[r.Code+" "+r.Class]++
	}
	if o.rows != len(c.rows) || o.units != len(units) || o.sourceCount != len(c.files) {
		t.Errorf("%d rows, %d units, %d files; want %d, %d, %d", o.rows, o.units, o.sourceCount, len(c.rows), len(units), len(c.files))
	}
	for i := range flagKinds {
		n, rows := 0, 0
		for _, f := range units {
			if f&(1<<i) != 0 {
				n++
			}
		}
		for _, r := range c.rows {
			if r.Flags&(1<<i) != 0 {
				rows++
			}
		}
		if o.flags[i] != n || o.lists[i].n != rows {
			t.Errorf("%s: %d units and %d rows, want %d and %d", FlagWords[i], o.flags[i], o.lists[i].n, n, rows)
		}
	}
	for _, tally := range o.codes {
		if tally.failed != classes[tally.id+" "] {
			t.Errorf("%s: %d failed, want %d", tally.id, tally.failed, classes[tally.id+" "])
		}
		inBars := 0
		for _, b := range tally.bars {
			inBars += b.Count
		}
		if inBars != tally.averaged {
			t.Errorf("%s: the bars hold %d of %d averages", tally.id, inBars, tally.averaged)
		}
		for _, c := range tally.classes {
			if c.n != classes[tally.id+" "+c.name] {
				t.Errorf("%s %s: %d, want %d", tally.id, c.name, c.n, classes[tally.id+" "+c.name])
			}
		}
	}
	if o.degrees+o.grid+o.none != o.units || o.grid == 0 || o.none == 0 {
		t.Errorf("%d in degrees, %d by grid, %d without, of %d", o.degrees, o.grid, o.none, o.units)
	}
}

// The lists are the worst rows, worst first, rows of the same weight in the
// order of the table, and no more than are held.
func TestListsAreWorstFirst(t *testing.T) {
	c := newCounty(t, 1500, "asce-7-16")
	o := gathered(t, c, everything(t, "asce-7-16"))
	var near []Row
	for _, r := range c.rows {
		if r.Flags&NearBound != 0 {
			r.Margin = math.Round(10*r.Margin) / 10 // as the table has it
			near = append(near, r)
		}
	}
	slices.SortStableFunc(near, func(a, b Row) int {
		return int(math.Round(10*math.Abs(a.Margin))) - int(math.Round(10*math.Abs(b.Margin)))
	})
	l := o.lists[1]
	if l.n != len(near) || len(l.entries) != mostListed || len(near) <= mostListed {
		t.Fatalf("%d listed of %d, want %d of %d", len(l.entries), l.n, mostListed, len(near))
	}
	for i, e := range l.entries {
		if e.Profile != near[i].Profile || math.Abs(e.Margin-near[i].Margin) > 1e-9 {
			t.Errorf("place %d: %s with %v, want %s with %v", i, e.Profile, e.Margin, near[i].Profile, near[i].Margin)
		}
	}
	for _, e := range o.lists[3].entries {
		if !strings.HasPrefix(e.note, "a softer layer lies under a stiffer one") {
			t.Errorf("%s is reversed for %q", e.Profile, e.note)
		}
	}
	table := o.listTable(l, 20)
	if len(table.Rows) != 20 || !strings.Contains(report.PlainText(table.Notes[0]), fmt.Sprintf("And %d more rows in summary.csv", len(near)-20)) {
		t.Errorf("%d rows, %q", len(table.Rows), report.PlainText(table.Notes[0]))
	}
}

// One failure under several codes is told once.
func TestFailuresAreToldOnce(t *testing.T) {
	c := &county{}
	for i := range 3 {
		for _, id := range []string{"asce-7-16", "ec8-2004"} {
			c.rows = append(c.rows, Row{File: fmt.Sprintf("%d.csv", i), Code: id, Flags: Failed, Problem: "it cannot be read"})
		}
	}
	o := gathered(t, c, everything(t, "asce-7-16", "ec8-2004"))
	if l := o.lists[0]; l.n != 6 || len(l.entries) != 3 || len(l.entries[0].codes) != 2 {
		t.Errorf("%d rows in %d entries", l.n, len(l.entries))
	}
	if text := report.PlainText(o.listTable(o.lists[0], 2).Notes[0]); !strings.Contains(text, "And 2 more rows") {
		t.Error(text)
	}
}

// NBCC 2020, Table 4.1.8.4.-B: XC above 360 to 760 m/s, XD above 180 to 360.
// The designation X360 lies in the row of XD, X361 in that of XC.
func TestDesignationsCountInTheirRows(t *testing.T) {
	c := &county{}
	for _, class := range []string{"X360", "X361", "X760", "XC", "X200"} {
		c.rows = append(c.rows, Row{File: "a.csv", Profile: class, Code: "nbcc-2020", Class: class, Velocity: 300})
	}
	o := gathered(t, c, everything(t, "nbcc-2020"))
	for _, class := range o.codes[0].classes {
		if want := map[string]int{"XC": 3, "XD": 2}[class.name]; class.n != want {
			t.Errorf("%s: %d, want %d", class.name, class.n, want)
		}
	}
}

// Points on both sides of the antimeridian make a region across it; points
// all around the Earth do not.
func TestRegionAcrossTheAntimeridian(t *testing.T) {
	var g, all region
	for _, x := range []float64{178.5, 179.9, -179.2, -177.5} {
		g.add(x, -17)
	}
	if e := g.extent(); e.West != 178 || e.East != -177 {
		t.Errorf("%+v", e)
	}
	for x := -170.0; x < 180; x += 20 {
		all.add(x, 0)
	}
	if e := all.extent(); e.West != -170 || e.East != 170 {
		t.Errorf("%+v", e)
	}
}

// A name of signs that mean something elsewhere, and one in a script that the
// fonts do not have, go through every output.
func TestHostileNames(t *testing.T) {
	c := newCounty(t, 12, "asce-7-16")
	strange := hostile()
	foreign := hostile()
	foreign.Profile, foreign.Line = "孔 12", 9
	c.rows = append(c.rows, strange, foreign)
	opt := everything(t, "asce-7-16")
	opt.Project = "県 survey: \"quoted\" {x}"
	dir := derived(t, c, opt)
	html := string(contents(t, dir, SummaryHTML))
	if strings.Contains(html, "*bold* <b>") || !strings.Contains(html, "*bold* &lt;b&gt;") {
		t.Error("the name is not escaped in HTML")
	}
	if md := string(contents(t, dir, SummaryMarkdown)); !strings.Contains(md, `\*bold\* \<b`) {
		t.Error("the name is not escaped in Markdown")
	}
	pdfHas(t, filepath.Join(dir, SummaryPDF), "[U+5B54] 12", "[U+770C] survey")

	book, err := excelize.OpenFile(filepath.Join(dir, Workbook))
	if err != nil {
		t.Fatal(err)
	}
	defer book.Close()
	row := len(c.rows) + 1 // the caution, the headings, the rows
	at := func(column, row int) string {
		name, err := excelize.CoordinatesToCellName(column+1, row)
		if err != nil {
			t.Fatal(err)
		}
		return name
	}
	if v, _ := book.GetCellValue("summary", "A1"); v != report.Caution {
		t.Errorf("the first cell is %q", v)
	}
	if v, _ := book.GetCellValue("summary", at(atVelocity, 2)); v != "velocity_mps" {
		t.Errorf("the heading is %q", v)
	}
	name := at(atProfile, row)
	if f, _ := book.GetCellFormula("summary", name); f != "" {
		t.Errorf("the name became the formula %q", f)
	}
	if v, _ := book.GetCellValue("summary", name); !strings.HasPrefix(v, "=1+1\n\"quoted\"") {
		t.Errorf("the name became %q", v)
	}
	if kind, _ := book.GetCellType("summary", at(atVelocity, row)); kind != excelize.CellTypeUnset && kind != excelize.CellTypeNumber {
		t.Errorf("the velocity is of type %d", kind)
	}
}

// pdfHas looks for texts in the pages where pdftotext is present.
func pdfHas(t *testing.T, path string, texts ...string) {
	t.Helper()
	program, err := exec.LookPath("pdftotext")
	if err != nil {
		t.Log("pdftotext is not here: the pages were not read")
		return
	}
	out, err := exec.Command(program, "-layout", path, "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	for _, text := range texts {
		if !bytes.Contains(out, []byte(text)) {
			t.Errorf("the pages do not hold %q", text)
		}
	}
}

// A workbook goes on to a second sheet where the first is full.
func TestWorkbookOfSeveralSheets(t *testing.T) {
	c := newCounty(t, 9, "asce-7-16") // and a file that failed
	dir := t.TempDir()
	c.write(t, dir)
	table, in, err := openTable(dir, Summary, Columns)
	if err != nil {
		t.Fatal(err)
	}
	defer in.Close()
	var file bytes.Buffer
	k := sinks{book: newWorkbook(&file)}
	k.book.most = 4
	if err := k.pour(table); err != nil {
		t.Fatal(err)
	}
	if err := k.book.close(); err != nil {
		t.Fatal(err)
	}
	book, err := excelize.OpenReader(&file)
	if err != nil {
		t.Fatal(err)
	}
	defer book.Close()
	if sheets := book.GetSheetList(); !slices.Equal(sheets, []string{"summary", "summary 2", "summary 3"}) {
		t.Errorf("the sheets are %q", sheets)
	}
	for sheet, n := range map[string]int{"summary": 6, "summary 2": 6, "summary 3": 4} {
		if rows, err := book.GetRows(sheet); err != nil || len(rows) != n {
			t.Errorf("%s has %d rows, want %d; %v", sheet, len(rows), n, err)
		}
	}
}

// A template that is at fault leaves the folder as it was, and says where.
func TestTemplateFaults(t *testing.T) {
	dir := t.TempDir()
	newCounty(t, 9, "asce-7-16").write(t, dir)
	for _, p := range []struct{ template, want string }{
		{"```batch-list\nflag: bad\n```\n", `working batch-list: flag is "bad"`},
		{"```batch-list\nflag: odd\nrows: 500\n```\n", `working batch-list: rows is "500"`},
		{"```batch-list\nflags: odd\n```\n", `working batch-list has no key "flags"`},
		{"```layers\nof: L1\n```\n", `no profile is named "L1"`},
	} {
		opt := everything(t, "asce-7-16")
		opt.Template = p.template
		if err := Derive(dir, opt); err == nil || !strings.Contains(err.Error(), p.want) || !strings.HasPrefix(err.Error(), templateFile+":") {
			t.Errorf("%q: %v", p.template, err)
		}
		checkFiles(t, dir, Summary, FaultsIn, Sources)
	}
}

// An empty batch, and a code that the options do not name, have their pages.
func TestSummaryOfLittle(t *testing.T) {
	opt := everything(t, "asce-7-16")
	opt.US, opt.Letter = true, true
	derived(t, &county{}, opt)
	dir := derived(t, &county{rows: []Row{{File: "a.csv", Profile: "P", Code: "local", Class: "Z9", Velocity: 304.8, Depth: 30,
		Position: profile.Position{Latitude: profile.Known(10), Longitude: profile.Known(20)}}}}, opt)
	md := string(contents(t, dir, SummaryMarkdown))
	// 304.8 m/s is 1000 ft/s exactly.
	for _, want := range []string{"| Z9 ", "1000.0", "Averages from (ft/s)", "Nothing is known here of the code local"} {
		if !strings.Contains(md, want) {
			t.Errorf("%q is missing in %s", want, md)
		}
	}
}

// Every working of the summary is in the template, so that none is forgotten.
func TestTemplateUsesEveryWorking(t *testing.T) {
	md := string(contents(t, derived(t, newCounty(t, 9, "asce-7-16"), everything(t, "asce-7-16")), SummaryMarkdown))
	if strings.Contains(md, "```") {
		t.Error("a fence of the template was not evaluated")
	}
	for _, w := range SummaryWorkings() {
		if w.Summary == "" || !strings.Contains(templates.Batch, "```"+w.Name+"\n") {
			t.Errorf("%s is not in the template", w.Name)
		}
	}
}

func BenchmarkDeriveReport(b *testing.B) {
	c := newCounty(b, 20000, "asce-7-16")
	dir := b.TempDir()
	c.write(b, dir)
	opt := everything(b, "asce-7-16")
	opt.GeoJSON, opt.JSON, opt.XLSX = false, false, false
	for b.Loop() {
		if err := Derive(dir, opt); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(len(c.rows)*b.N)/b.Elapsed().Seconds(), "rows/s")
}

// A list names no papers: the table of the notes does.
func TestListsAreWithoutReferences(t *testing.T) {
	for _, c := range [][2]string{
		{"it goes on unchanged (Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105), from memory", "it goes on unchanged, from memory"},
		{"it goes on unchanged (Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105)", "it goes on unchanged"},
		{"class E whatever the average (Table 3.1); by the average B", "class E whatever the average (Table 3.1); by the average B"},
		{"open (doi:1", "open (doi:1"},
		{"none", "none"},
	} {
		if got := withoutReference(c[0]); got != c[1] {
			t.Errorf("%q: %q", c[0], got)
		}
	}
}

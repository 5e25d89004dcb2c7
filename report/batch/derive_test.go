package batch

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report"
)

// derived writes a county and what is made from it.
func derived(t testing.TB, c *county, opt DeriveOptions) string {
	t.Helper()
	dir := t.TempDir()
	c.write(t, dir)
	if err := Derive(dir, opt); err != nil {
		t.Fatal(err)
	}
	return dir
}

func contents(t testing.TB, dir, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join(dir, filepath.FromSlash(name)))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// hostile is a row whose texts are what no row should have.
func hostile() Row {
	return Row{File: "a,b\".csv", Line: 3, Profile: "=1+1\n\"quoted\" | *bold* <b> \u2028 \\ \x01é𝄞", Code: "asce-7-16", Class: "D", Route: "velocity",
		Velocity: 250.5, Depth: 30.48, Datum: 0, Basis: "measured", Standing: "checked", ToClass: "C", Margin: -0.04,
		Flags: NearBound | Odd, Notes: 2, Position: profile.Position{Latitude: profile.Known(-0.5), Longitude: profile.Known(180)}}
}

func TestColumnsStandWhereTheyAreRead(t *testing.T) {
	for i, name := range map[int]string{atFile: "file", atLine: "line", atProfile: "profile", atCode: "code", atClass: "class", atRoute: "route",
		atVelocity: "velocity_mps", atDepth: "depth_m", atVs30: "vs30_mps", atReached: "depth_reached_m", atDatum: "datum_m", atBasis: "basis",
		atStanding: "standing", atToClass: "to_class", atMargin: "margin_percent", atFlags: "flags", atNotes: "notes", atFaults: "faults",
		atLatitude: "latitude", atLongitude: "longitude", atEasting: "easting", atNorthing: "northing", atEPSG: "epsg", atProblem: "problem", atReport: "report"} {
		if Columns[i].Name != name {
			t.Errorf("column %d is %s, not %s", i, Columns[i].Name, name)
		}
	}
	if len(Columns) != atReport+1 {
		t.Errorf("%d columns are read of %d", atReport+1, len(Columns))
	}
}

// What is read back is what was written, but for the digits that a table
// leaves out.
func TestRowsReadBack(t *testing.T) {
	c := newCounty(t, 120, "asce-7-16", "ec8-2004")
	c.rows = append(c.rows, hostile())
	dir := t.TempDir()
	c.write(t, dir)
	i := 0
	for r, err := range Rows(Summary, bytes.NewReader(contents(t, dir, Summary))) {
		if err != nil {
			t.Fatal(err)
		}
		if got, want := cellsOf(*r), cellsOf(c.rows[i]); !slices.Equal(got, want) {
			t.Fatalf("row %d: got %q, want %q", i, got, want)
		}
		i++
	}
	if i != len(c.rows) {
		t.Errorf("%d rows, want %d", i, len(c.rows))
	}
	i = 0
	for f, err := range FaultRows(FaultsIn, bytes.NewReader(contents(t, dir, FaultsIn))) {
		if err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(*f, c.faults[i]) {
			t.Fatalf("fault %d: got %+v, want %+v", i, *f, c.faults[i])
		}
		i++
	}
	if i != len(c.faults) {
		t.Errorf("%d faults, want %d", i, len(c.faults))
	}
}

// A row that a run writes, read and written again, is the same bytes.
func TestRowsWriteReadWrite(t *testing.T) {
	c := newCounty(t, 200, "asce-7-16", "nbcc-2020")
	c.rows = append(c.rows, hostile())
	var want, got []byte
	for i := range c.rows {
		want = appendRow(want, &c.rows[i])
	}
	data := append([]byte(header(Columns)), want...)
	for r, err := range Rows(Summary, bytes.NewReader(data)) {
		if err != nil {
			t.Fatal(err)
		}
		got = appendRow(got, r)
	}
	if !bytes.Equal(got, want) {
		t.Error("the rows changed on their way")
	}
	want, got = nil, nil
	for i := range c.faults {
		want = appendFault(want, &c.faults[i])
	}
	for f, err := range FaultRows(FaultsIn, bytes.NewReader(append([]byte(header(FaultColumns)), want...))) {
		if err != nil {
			t.Fatal(err)
		}
		got = appendFault(got, f)
	}
	if !bytes.Equal(got, want) {
		t.Error("the faults changed on their way")
	}
}

// readAll are the records of a table, and the error at their end.
func readAll(data string, in func(io.Reader) io.Reader) (records [][]string, err error) {
	t := newTable("t", in(strings.NewReader(data)))
	for {
		record, err := t.read()
		if err == io.EOF {
			return records, nil
		}
		if err != nil {
			return records, err
		}
		var cells []string
		for _, c := range record {
			cells = append(cells, string(c))
		}
		records = append(records, cells)
	}
}

// onebyte reads a byte at a time, so that every place is the end of a buffer.
type onebyte struct{ r io.Reader }

func (o onebyte) Read(p []byte) (int, error) { return o.r.Read(p[:min(len(p), 1)]) }

func sameAsLibrary(t *testing.T, data string) {
	t.Helper()
	want, wrong := csv.NewReader(strings.NewReader(data)).ReadAll()
	for name, in := range map[string]func(io.Reader) io.Reader{
		"whole": func(r io.Reader) io.Reader { return r },
		"bytes": func(r io.Reader) io.Reader { return onebyte{r} },
	} {
		got, err := readAll(data, in)
		switch {
		case (err != nil) != (wrong != nil):
			t.Errorf("%q (%s): %v, encoding/csv says %v", data, name, err, wrong)
		case err == nil && !reflect.DeepEqual(got, want):
			t.Errorf("%q (%s): %q, encoding/csv has %q", data, name, got, want)
		}
	}
}

var tableSeeds = []string{"", "\n", "a,b\n1,2\n", "a,b\r\n1,2\r\n", "a\n\n\nb", "\"a\",\"b\"\n", "\"a\"\"b\",\"c\nd\"\r\n\"\",x\n", "\"a\r\nb\"\n",
	"\"a", "a\"b\n", "\"a\"b\n", "a,b\n1\n", "a,b\n1,2,3\n", ",\n,\n", "\"\"", "\"\n", "a\r", "\"a\"\r", "\"\"\"\"\n", "\r\n\r\nx", "a,\"b\r\"\r\n", "\r\r\n"}

func TestTableReadsAsEncodingCSV(t *testing.T) {
	for _, data := range tableSeeds {
		sameAsLibrary(t, data)
	}
}

func FuzzTable(f *testing.F) {
	for _, data := range tableSeeds {
		f.Add(data)
	}
	f.Fuzz(func(t *testing.T, data string) { sameAsLibrary(t, data) })
}

func TestTableFaultsNameTheLine(t *testing.T) {
	header := ""
	for i, c := range Columns {
		if i > 0 {
			header += ","
		}
		header += c.Name
	}
	row := func(cell int, text string) string {
		cells := cellsOf(hostile())
		cells[atProfile], cells[atFile] = "P", "f.csv"
		cells[cell] = text
		return strings.Join(cells, ",") + "\n"
	}
	good := header + "\n" + row(atProfile, "\"two\nlines\"")
	for _, p := range []struct{ name, data, want string }{
		{"no table", "hello\n", "s.csv:1: has 1 columns"},
		{"empty", "", "s.csv:1: has 0 columns"},
		{"a column of another name", strings.Replace(header, "velocity_mps", "velocity", 1) + "\n", `s.csv:1: has a column "velocity"`},
		{"a number that is none", good + row(atVelocity, "fast"), `s.csv:4: cell 7, "fast", is not a number`},
		{"not a number", good + row(atVelocity, "NaN"), `s.csv:4: cell 7, "NaN", is not a number`},
		{"an unknown flag", good + row(atFlags, "odd strange"), `s.csv:4: "odd strange" are no flags`},
		{"cut off", good + "a,b", "s.csv:4: the record has 2 cells, the header 25"},
		{"a quote that does not end", good + "\"a,b\n", "s.csv:4: a quoted cell does not end"},
		{"no line end", header + "\n" + strings.Repeat("x", maxRecord+1<<19), "s.csv:2: a record is longer than 1024 KiB"},
	} {
		var last error
		for _, err := range Rows("s.csv", strings.NewReader(p.data)) {
			last = err
		}
		var faults profile.Faults
		if !errors.As(last, &faults) || !strings.HasPrefix(last.Error(), p.want) {
			t.Errorf("%s: %v, want %s", p.name, last, p.want)
		}
	}
}

func TestJSONLinesAreTheRows(t *testing.T) {
	c := newCounty(t, 90, "asce-7-16", "ec8-2004")
	c.rows = append(c.rows, hostile())
	dir := derived(t, c, DeriveOptions{JSON: true})
	lines := bytes.Split(bytes.TrimSuffix(contents(t, dir, JSONLines), []byte("\n")), []byte("\n"))
	if len(lines) != len(c.rows) {
		t.Fatalf("%d lines for %d rows", len(lines), len(c.rows))
	}
	for i, l := range lines {
		checkObject(t, l, cellsOf(c.rows[i]))
	}
}

// checkObject holds a JSON object against the cells of its row, and the order
// of its names against that of the columns.
func checkObject(t *testing.T, object []byte, cells []string) {
	t.Helper()
	var values map[string]any
	d := json.NewDecoder(bytes.NewReader(object))
	d.UseNumber()
	if err := d.Decode(&values); err != nil {
		t.Fatalf("%s: %v", object, err)
	}
	if len(values) != len(Columns) {
		t.Fatalf("%d names, want %d: %s", len(values), len(Columns), object)
	}
	at := -1
	for i, c := range Columns {
		key := bytes.Index(object, []byte(`"`+c.Name+`":`))
		if key <= at {
			t.Errorf("%s is not in its place", c.Name)
		}
		at = key
		var want any = cells[i]
		switch {
		case cells[i] == "":
			want = nil
		case c.Type != "string":
			want = json.Number(cells[i])
		}
		if values[c.Name] != want {
			t.Errorf("%s is %q, want %q", c.Name, values[c.Name], want)
		}
	}
}

// Numbers as RFC 8259, section 6, has them, and not.
func TestJSONNumbers(t *testing.T) {
	for _, text := range []string{"0", "-0", "12", "1.5", "-0.25", "1e5", "1E-5", "12.50e+07"} {
		if !isJSONNumber([]byte(text)) || !json.Valid([]byte(text)) {
			t.Errorf("%s is a number", text)
		}
	}
	for _, text := range []string{"", "-", "+1", "01", ".5", "1.", "1e", "1e+", "0x1", "NaN", "1 ", "--1", "1.5.2"} {
		if isJSONNumber([]byte(text)) || json.Valid([]byte(text)) && text != "1 " {
			t.Errorf("%q is no number", text)
		}
	}
}

func FuzzJSONText(f *testing.F) {
	f.Add("plain", "12.5")
	f.Add("\"\\\n\t\r\x00\x7f\u2028é𝄞\xff\xc3", "+1")
	f.Fuzz(func(t *testing.T, text, number string) {
		object := appendJSONString(nil, []byte(text))
		var back string
		if err := json.Unmarshal(object, &back); err != nil || back != string([]rune(text)) {
			t.Errorf("%q became %s, %v", text, object, err)
		}
		if isJSONNumber([]byte(number)) && !json.Valid([]byte(number)) {
			t.Errorf("%q is no JSON", number)
		}
	})
}

// layer is what RFC 7946 asks of a FeatureCollection, as far as a map layer
// of points goes.
type layer struct {
	Type     string
	Features []struct {
		Type     string
		Geometry *struct {
			Type        string
			Coordinates []json.Number
		}
		Properties json.RawMessage
	}
	Confirmation        string
	RowsWithoutPosition int `json:"rows_without_position"`
	CRS                 any
}

// RFC 7946: a FeatureCollection (3.3) of Features with a geometry, or null,
// and properties (3.2); a Point's coordinates are longitude and latitude
// (3.1.1, 4); there is no crs (4).
func TestMapLayerIsGeoJSON(t *testing.T) {
	c := newCounty(t, 200, "asce-7-16")
	c.rows = append(c.rows, hostile())
	dir := derived(t, c, DeriveOptions{GeoJSON: true})
	data := contents(t, dir, MapLayer)
	var l layer
	d := json.NewDecoder(bytes.NewReader(data))
	d.UseNumber()
	if err := d.Decode(&l); err != nil {
		t.Fatal(err)
	}
	if l.Type != "FeatureCollection" || l.CRS != nil || l.Confirmation != report.Caution {
		t.Errorf("the collection is %q, with crs %v and the confirmation %q", l.Type, l.CRS, l.Confirmation)
	}
	i, grids, without := 0, 0, 0
	for _, r := range c.rows {
		degrees := r.Position.Latitude.Known
		if !degrees && !r.Position.Easting.Known {
			without++
			continue
		}
		if i == len(l.Features) {
			t.Fatal("features are missing")
		}
		f := l.Features[i]
		i++
		if f.Type != "Feature" {
			t.Errorf("a feature is a %q", f.Type)
		}
		checkObject(t, f.Properties, cellsOf(r))
		if !degrees {
			grids++
			if f.Geometry != nil {
				t.Errorf("%s is known by its grid alone and has a geometry", r.Profile)
			}
			continue
		}
		want := []json.Number{json.Number(number(r.Position.Longitude.Value, 9)), json.Number(number(r.Position.Latitude.Value, 9))}
		if f.Geometry == nil || f.Geometry.Type != "Point" || !slices.Equal(f.Geometry.Coordinates, want) {
			t.Errorf("%s stands at %+v, want %v", r.Profile, f.Geometry, want)
		}
	}
	if i != len(l.Features) || grids == 0 || without == 0 || l.RowsWithoutPosition != without {
		t.Errorf("%d features of %d, %d by grid, %d without position, told as %d", i, len(l.Features), grids, without, l.RowsWithoutPosition)
	}
	ogrinfo(t, filepath.Join(dir, MapLayer), i)
}

// ogrinfo opens the layer with GDAL where that is present.
func ogrinfo(t *testing.T, path string, features int) {
	t.Helper()
	program, err := exec.LookPath("ogrinfo")
	if err != nil {
		t.Log("ogrinfo is not here: GDAL was not asked to open the layer")
		return
	}
	out, err := exec.Command(program, "-ro", "-so", "-al", path).CombinedOutput()
	if err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	for _, want := range []string{"Geometry: Point", fmt.Sprintf("Feature Count: %d", features), "velocity_mps: Real", "epsg: Integer", "WGS 84"} {
		if !bytes.Contains(out, []byte(want)) {
			t.Errorf("ogrinfo does not say %q: %s", want, out)
		}
	}
}

func TestMapLayerRefusesNoPlace(t *testing.T) {
	dir := t.TempDir()
	r := hostile()
	r.Position.Latitude = profile.Known(91)
	(&county{rows: []Row{r}}).write(t, dir)
	err := Derive(dir, DeriveOptions{GeoJSON: true})
	if err == nil || !strings.Contains(err.Error(), "summary.csv:2: latitude") {
		t.Error(err)
	}
	checkFiles(t, dir, Summary, FaultsIn, Sources)
}

// checkFiles asserts what a folder holds.
func checkFiles(t *testing.T, dir string, want ...string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, e := range entries {
		got = append(got, e.Name())
	}
	slices.Sort(want)
	if !slices.Equal(got, want) {
		t.Errorf("the folder holds %q, want %q", got, want)
	}
}

// The tables against their own schema: Frictionless Table Schema, version 1.
func TestTablesKeepTheirSchema(t *testing.T) {
	c := newCounty(t, 150, "asce-7-16", "nbcc-2020")
	c.rows = append(c.rows, hostile())
	dir := derived(t, c, DeriveOptions{})
	var p dataPackage
	if err := json.Unmarshal(contents(t, dir, Package), &p); err != nil {
		t.Fatal(err)
	}
	if len(p.Resources) != 3 || p.Confirmation != report.Caution {
		t.Fatalf("%+v", p)
	}
	for _, r := range p.Resources {
		records, err := csv.NewReader(bytes.NewReader(contents(t, dir, r.Path))).ReadAll()
		if err != nil || len(records) < 2 {
			t.Fatalf("%s: %d records, %v", r.Path, len(records), err)
		}
		for i, f := range r.Schema.Fields {
			if records[0][i] != f.Name || f.Description == "" {
				t.Errorf("%s: column %d is %q, its field %+v", r.Path, i, records[0][i], f)
			}
			for _, record := range records[1:] {
				if cell := record[i]; cell != "" && !isOfType(cell, f.Type) {
					t.Errorf("%s: %s %q is no %s", r.Path, f.Name, cell, f.Type)
				}
			}
		}
	}
}

// isOfType reports whether a cell is of a type of the table schema.
func isOfType(cell, kind string) bool {
	switch kind {
	case "string":
		return true
	case "integer":
		_, err := strconv.ParseInt(cell, 10, 64)
		return err == nil
	case "number":
		_, err := strconv.ParseFloat(cell, 64)
		return err == nil
	}
	return false
}

func TestDeriveLeavesNothingOfAnotherRun(t *testing.T) {
	c := newCounty(t, 30, "asce-7-16")
	dir := derived(t, c, DeriveOptions{JSON: true, GeoJSON: true, XLSX: true})
	checkFiles(t, dir, Summary, FaultsIn, Sources, Package, JSONLines, MapLayer, Workbook)
	if err := Derive(dir, DeriveOptions{JSON: true}); err != nil {
		t.Fatal(err)
	}
	checkFiles(t, dir, Summary, FaultsIn, Sources, Package, JSONLines)
}

func BenchmarkDeriveJSON(b *testing.B) {
	c := newCounty(b, 20000, "asce-7-16")
	dir := b.TempDir()
	c.write(b, dir)
	for b.Loop() {
		if err := Derive(dir, DeriveOptions{JSON: true, GeoJSON: true}); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(len(c.rows)*b.N)/b.Elapsed().Seconds(), "rows/s")
}

func BenchmarkTable(b *testing.B) {
	c := newCounty(b, 20000, "asce-7-16")
	dir := b.TempDir()
	c.write(b, dir)
	data := contents(b, dir, Summary)
	b.SetBytes(int64(len(data)))
	for b.Loop() {
		t := newTable("t", bytes.NewReader(data))
		for {
			if _, err := t.read(); err != nil {
				break
			}
		}
	}
	b.ReportMetric(float64(len(c.rows)*b.N)/b.Elapsed().Seconds(), "rows/s")
}

func BenchmarkRows(b *testing.B) {
	c := newCounty(b, 20000, "asce-7-16")
	dir := b.TempDir()
	c.write(b, dir)
	data := contents(b, dir, Summary)
	for b.Loop() {
		for _, err := range Rows("s", bytes.NewReader(data)) {
			if err != nil {
				b.Fatal(err)
			}
		}
	}
	b.ReportMetric(float64(len(c.rows)*b.N)/b.Elapsed().Seconds(), "rows/s")
}

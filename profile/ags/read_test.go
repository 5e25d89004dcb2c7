package ags

import (
	"errors"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// logged is the fixture logging.ags.
func logged(t *testing.T) []byte {
	t.Helper()
	archive, err := txtar.ParseFile("testdata/shapes/groups.txtar")
	if err != nil {
		t.Fatal(err)
	}
	return cases(archive)[0].data
}

// The same file in every encoding and with every end of line is the same
// profile. The encoder is golang.org/x/text v0.44.0.
func TestEncodings(t *testing.T) {
	text := strings.Replace(string(logged(t)), "Soft brown CLAY", "Löß, 5 µm", 1)
	latin, err := charmap.Windows1252.NewEncoder().String(text)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ name, encoding, data string }{
		{"plain", "UTF-8", text},
		{"mark", "UTF-8", "\ufeff" + text},
		{"LF", "UTF-8", strings.ReplaceAll(text, "\r\n", "\n")},
		{"CR", "UTF-8", strings.ReplaceAll(text, "\r\n", "\r")},
		{"no last end of line", "UTF-8", strings.TrimRight(text, "\r\n")},
		{"DOS end of file", "UTF-8", text + "\x1a"},
		{"Windows-1252", "Windows-1252", latin},
	} {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read("x.ags", []byte(c.data), Options{})
			if err != nil {
				t.Fatal(err)
			}
			p := profiles[0]
			if p.Reading.Encoding != c.encoding || p.Reading.Size != int64(len(c.data)) || p.Layers[0].Soil != "Löß, 5 µm" || p.Layers[3].Line != 89 || p.Layers[3].Column != 49 {
				t.Errorf("%s, %d bytes, %+v", p.Reading.Encoding, p.Reading.Size, p.Layers)
			}
		})
	}
}

// Files that are no text in AGS4.
func TestTextFaults(t *testing.T) {
	const head = "\"GROUP\",\"LOCA\"\r\n"
	for _, c := range []struct{ name, data, want string }{
		{"empty", "", "x.ags: the file is empty"},
		{"blank", " \r\n\t\n", "x.ags: the file is empty"},
		{"only a mark", "\ufeff", "x.ags: the file is empty"},
		{"UTF-16, mark", "\xff\xfe\"\x00G\x00", "x.ags: the file is in UTF-16 or UTF-32, which AGS4 does not allow"},
		{"UTF-16", "\"\x00G\x00", "x.ags: the file is in UTF-16 or UTF-32, which AGS4 does not allow"},
		{"UTF-32", "\x00\x00\xfe\xff", "x.ags: the file is in UTF-16 or UTF-32, which AGS4 does not allow"},
		{"NUL", head + "\"ö\x00\"", "x.ags:2:3: NUL character"},
		{"unit separator", head + "\"\x1f\"", "x.ags:2:2: control character U+001F"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.ags", []byte(c.data), Options{})
			var faults profile.Faults
			if !errors.As(err, &faults) || faults.Error() != c.want || faults[0].Hint == "" {
				t.Errorf("got  %v\nwant %s, and a hint", err, c.want)
			}
		})
	}
}

// What the appendix of a report shows is what the file says.
func TestReading(t *testing.T) {
	profiles, err := Read("site.ags", logged(t), Options{})
	if err != nil {
		t.Fatal(err)
	}
	r := profiles[0].Reading
	var columns []string
	for _, c := range r.Columns {
		columns = append(columns, c.Heading+"|"+c.Unit+"|"+c.Quantity.String())
	}
	// The unit of LLPL_PI stands nowhere; it is percent by definition.
	wantColumns := []string{
		"depth|m|depth", "base|m|bottom", "WGPT_RDNG PSL-SWV|m/s|Vs", "WGPT_RDNG PSL-PWV|m/s|Vp", "GEOL_DESC||soil",
		"ISPT_NVAL||N", "TRIT_CU|kPa|su", "TRET_CU|kPa|su", "IVAN_IVAN|kPa|su", "LLPL_PI|%|plasticity index", "LNMC_MC|%|water content", "LDEN_BDEN|Mg/m3|density",
	}
	if diff := cmp.Diff(wantColumns, columns); diff != "" {
		t.Errorf("columns (-want +got)\n%s", diff)
	}
	var rows []string
	for _, row := range r.Rows {
		cells := slices.DeleteFunc(row.Split(), func(c string) bool { return c == "" })
		rows = append(rows, strings.Join(cells, "|"))
	}
	wantRows := []string{
		"0.00|1.40|Soft brown CLAY", `1.40|6.00|Dense "blue" SAND, some gravel`,
		"1.00|4", "2.50|20", "2.90|50",
		"0.90|31", "2.00|PL NP", "0.90|38", "1.10|42", "0.90|1.85", "0.90|22", "1.10|26", "1.20|>24",
		"1.00|140", "1.00|1450", "1.50|165", "2.00|230", "2.00|1600", "3.00|260",
	}
	if diff := cmp.Diff(wantRows, rows); diff != "" {
		t.Errorf("rows (-want +got)\n%s", diff)
	}
	if r.Rows[0].Line != 24 || r.Rows[18].Line != 89 || r.Unit(profile.Vs) != "m/s" {
		t.Errorf("lines %d to %d, Vs in %s", r.Rows[0].Line, r.Rows[18].Line, r.Unit(profile.Vs))
	}
	var metadata []string
	for _, m := range r.Metadata {
		metadata = append(metadata, m.Key+": "+m.Value)
	}
	wantMetadata := []string{
		"PROJ_ID: F-77", "PROJ_NAME: Lower weir footbridge", "PROJ_LOC: Ferry Meadow", "PROJ_CLNT: Meadow Parish", "PROJ_CONT: Heron Boring",
		"TRAN_ISNO: 2", "TRAN_DATE: 2026-02-14", "TRAN_PROD: Heron Boring", "TRAN_STAT: Final", "TRAN_AGS: 4.1.1", "TRAN_RECV: Meadow Parish",
		"LOCA_NATE: 412300.00 m", "LOCA_NATN: 287650.50 m", "LOCA_GREF: OSGB", "LOCA_GL: 8.40 m", "LOCA_LAT: 52:29:15.00", "LOCA_LON: -1:49:03.60", "LOCA_LLZ: WGS84",
		"WGPG_ID: W1-A", "WGPG_TOOL: PSL", "WGPG_DATE: 2026-01-30", "WGPG_STRT: 1.00 m", "WGPG_STOP: 3.00 m", "WGPG_CONT: Kestrel Logging",
	}
	if diff := cmp.Diff(wantMetadata, metadata); diff != "" {
		t.Errorf("metadata (-want +got)\n%s", diff)
	}
}

// Depths in two units have theirs in the cells.
func TestReadingMixedUnits(t *testing.T) {
	text := strings.Replace(string(logged(t)), `"UNIT","","m","m","",""`, `"UNIT","","ft","ft","",""`, 1)
	profiles, err := Read("site.ags", []byte(text), Options{})
	if err != nil {
		t.Fatal(err)
	}
	r := profiles[0].Reading
	if first := r.Rows[1].Split(); r.Columns[0].Unit != "" || first[0] != "1.40 ft" || first[1] != "6.00 ft" || r.Rows[2].Split()[0] != "1.00 m" {
		t.Errorf("unit %q, first row %q", r.Columns[0].Unit, first)
	}
	if soil := profiles[0].Layers[1].Soil; !strings.HasPrefix(soil, "Dense") { // 1.40 ft = 0.43 m
		t.Errorf("the soil of the second layer is %q", soil)
	}
}

// The holes of a file with their strata, tests and cones. MPa are 1000 kPa.
func TestHoles(t *testing.T) {
	data := string(logged(t)) + `
"GROUP","SCPG"
"HEADING","LOCA_ID","SCPG_TESN","SCPG_TYPE","SCPG_WAT"
"UNIT","","","","m"
"DATA","W2","C1","PC","1.20"

"GROUP","SCPT"
"HEADING","LOCA_ID","SCPG_TESN","SCPT_DPTH","SCPT_RES","SCPT_FRES","SCPT_PWP2"
"UNIT","","","m","MPa","kPa",""
"DATA","W2","C1","0.02","1.100","11","0.010"
"DATA","W2","C1","0.01","1.000","x",""

"GROUP","CPTT"
"HEADING","LOCA_ID","CPTG_TESN","CPTT_DPTH","CPTT_QC"
"UNIT","","","m","MPa"
"DATA","W3","C1","0.01","2.000"
"DATA","W3","C1","-1","2.000"
`
	holes, err := ReadHoles("x.ags", []byte(data), Options{})
	if err != nil {
		t.Fatal(err)
	}
	known := profile.Known
	want := []Cone{{Name: "C1", Type: "PC", WaterTable: known(1.2), Readings: []ConeReading{
		{Depth: 0.01, Tip: known(1000), Line: 100}, {Depth: 0.02, Tip: known(1100), Sleeve: known(11), PorePressure: known(10), Line: 99},
	}}}
	if len(holes) != 3 || holes[0].Name != "W1" || len(holes[0].Tests) != 11 || len(holes[0].Strata) != 2 || holes[0].Strata[1].Bottom != 6 {
		t.Fatalf("%+v", holes)
	}
	near := cmp.Comparer(func(a, b float64) bool { return math.Abs(a-b) <= 1e-9 })
	if diff := cmp.Diff(want, holes[1].Cones, near); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
	if test := holes[1].Tests[0]; test != (Test{Depth: 1, Quantity: profile.N, Value: 7, Heading: "ISPT_NVAL", Line: 34}) {
		t.Errorf("%+v", test)
	}
	if len(holes[2].Cones) != 1 || len(holes[2].Cones[0].Readings) != 1 {
		t.Errorf("%+v", holes[2])
	}
	if _, err := ReadHoles("x.ags", []byte("a,b\n1,2\n"), Options{}); err == nil {
		t.Error("a file that is not AGS4 has holes")
	}
}

// The order of the rows does not matter.
func TestOrderOfRows(t *testing.T) {
	data := logged(t)
	lines := strings.SplitAfter(string(data), "\r\n")
	i := slices.IndexFunc(lines, func(l string) bool { return strings.Contains(l, "PSL-SWV") })
	slices.Reverse(lines[i : i+6])
	a, err := Read("x.ags", data, Options{})
	if err != nil {
		t.Fatal(err)
	}
	b, err := Read("x.ags", []byte(strings.Join(lines, "")), Options{})
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(a, b, asWritten); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
}

// Every fault of the fixtures has a place in the file, or is of the whole
// file or of Options, and nearly every one a hint.
func TestHints(t *testing.T) {
	for _, name := range []string{"grammar", "velocities", "holes", "mapping"} {
		data, err := os.ReadFile("testdata/faults/" + name + ".txtar")
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range cases(txtar.Parse(data)) {
			_, err := Read(c.name+".ags", c.data, c.options())
			var faults profile.Faults
			errors.As(err, &faults)
			for _, f := range faults {
				if f.Hint == "" && !strings.Contains(f.Text, "of layer") && !strings.Contains(f.Text, "more fault") { // those are profile.Validate's
					t.Errorf("no hint: %v", f)
				}
			}
		}
	}
}

package ags

import (
	"errors"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
	"shearbook/profile/las"
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
"UNIT","","","m","MPa","kPa","MPa"
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
	inWords := cmpopts.IgnoreFields(ConeReading{}, "Cells")
	wantColumns := []profile.Column{{Heading: "SCPT_DPTH", Unit: "m", Quantity: profile.Depth}, {Heading: "SCPT_RES", Unit: "MPa", Quantity: profile.TipResistance},
		{Heading: "SCPT_FRES", Unit: "kPa", Quantity: profile.SleeveFriction}, {Heading: "SCPT_PWP2", Unit: "MPa", Quantity: profile.PorePressure}}
	want[0].Columns = wantColumns
	if got := holes[1].Cones[0].Readings[1].Cells; got != strings.Join([]string{"0.02", "1.100", "11", "0.010"}, profile.CellSeparator) {
		t.Errorf("the words of the file are %q", got)
	}
	if diff := cmp.Diff(want, holes[1].Cones, near, inWords); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
	if test := holes[1].Tests[0]; test != (Test{Depth: 1, Quantity: profile.N, Value: 7, Energy: 70, Heading: "ISPT_NVAL", Line: 34}) {
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

// A cone whose unit is blank, or whose resistances no cone meets, is a fault:
// kPa that are taken for MPa make soft clay into rock.
func TestConeUnitBlankIsNotMPa(t *testing.T) {
	cone := func(units, values string) string {
		return "\"GROUP\",\"SCPT\"\n\"HEADING\",\"LOCA_ID\",\"SCPG_TESN\",\"SCPT_DPTH\",\"SCPT_RES\",\"SCPT_FRES\",\"SCPT_PWP2\"\n" +
			"\"UNIT\",\"\",\"\",\"m\"," + units + "\n\"DATA\",\"H\",\"1\",\"1\"," + values + "\n\"DATA\",\"H\",\"1\",\"2\"," + values + "\n"
	}
	for _, c := range []struct{ units, values, want string }{
		{`"","kPa","kPa"`, `"1000","20","0"`, "x.ags:2:45: heading SCPT_RES states no unit"},
		{`"MPa","","kPa"`, `"1","20","0"`, "x.ags:2:56: heading SCPT_FRES states no unit"},
		{`"MPa","kPa",""`, `"1","20","0"`, "x.ags:2:68: heading SCPT_PWP2 states no unit"},
		{`"MPa","kPa",""`, `"1","20",""`, ""}, // nothing was read of it
		{`"MPa","kPa","kPa"`, `"1000","20","0"`, `x.ags:4:20: SCPT_RES "1000" MPa is more than the 150 MPa that a cone can meet`},
		{`"MPa","MPa","kPa"`, `"1","20","0"`, `x.ags:4:24: SCPT_FRES "20" MPa is more than the 5 MPa that a cone can meet`},
		{`"MPa","MPa","kPa"`, `"150","5","0"`, ""},
	} {
		_, err := ReadHoles("x.ags", []byte(cone(c.units, c.values)), Options{})
		got := ""
		if faults, ok := err.(profile.Faults); ok && len(faults) == 1 {
			got = faults[0].Place.String() + ": " + faults[0].Text
		} else if err != nil {
			got = err.Error()
		}
		if got != c.want {
			t.Errorf("%s %s: got %q, want %q", c.units, c.values, got, c.want)
		}
	}
}

// The area ratio of a cone is read, of both groups, and only where it can be one.
func TestConeAreaRatioRead(t *testing.T) {
	for value, want := range map[string]float64{"0.8": 0.8, "1": 1, "": 0, "80": 0, "0": 0} {
		for _, group := range []string{"SCPG", "CPTG"} {
			data := "\"GROUP\",\"" + group + "\"\n\"HEADING\",\"LOCA_ID\",\"" + group + "_TESN\",\"" + group + "_CAR\"\n\"UNIT\",\"\",\"\",\"\"\n\"DATA\",\"H\",\"1\",\"" + value + "\"\n"
			holes, err := ReadHoles("x.ags", []byte(data), Options{})
			if err != nil || holes[0].Cones[0].AreaRatio != want || (len(holes[0].Notes) > 0) != (value == "80" || value == "0") {
				t.Errorf("%s %q: %+v, %v", group, value, holes, err)
			}
		}
	}
}

// An interval that is missing is bridged over MaxGap at most, as in a log.
func TestWideGapIsNotBridged(t *testing.T) {
	if MaxGap != las.MaxGap {
		t.Errorf("a gap of %v m is filled, of %v m in a log", MaxGap, las.MaxGap)
	}
	seismic := func(from, to string) string {
		return "\"GROUP\",\"ISTA\"\n\"HEADING\",\"LOCA_ID\",\"ISTG_TESN\",\"ISTA_TOP\",\"ISTA_BASE\",\"ISTA_WVTY\",\"ISTA_WVL\"\n\"UNIT\",\"\",\"\",\"m\",\"m\",\"\",\"m/s\"\n" +
			"\"DATA\",\"H\",\"1\",\"0\",\"6\",\"S\",\"190\"\n\"DATA\",\"H\",\"1\",\"" + from + "\",\"" + to + "\",\"S\",\"370\"\n"
	}
	log := func(depths ...string) string {
		text := "\"GROUP\",\"WGPT\"\n\"HEADING\",\"LOCA_ID\",\"WGPG_ID\",\"WGPG_TOOL\",\"WGPT_PARA\",\"WGPT_UNIT\",\"WGPT_DPTH\",\"WGPT_RDNG\"\n\"UNIT\",\"\",\"\",\"\",\"\",\"\",\"m\",\"\"\n"
		for _, z := range depths {
			text += "\"DATA\",\"H\",\"R\",\"PSL\",\"PSL-SWV\",\"m/s\",\"" + z + "\",\"200\"\n"
		}
		return text
	}
	for _, c := range []struct{ name, data, want string }{
		{"intervals 16 m apart", seismic("22", "24"), `no velocity from 6 m to 22 m in "H"; no more than 3 m are filled`},
		{"intervals 3 m apart", seismic("9", "24"), ""},
		{"readings 11 m apart", log("1", "2", "3", "14", "15"), `no velocity from 3 m to 14 m in "H"; no more than 3 m are filled`},
		{"readings 4 m apart, 1 m being usual", log("1", "2", "3", "7", "8"), ""},
		{"readings 5 m apart throughout", log("1", "6", "11"), ""},
	} {
		_, err := Read("x.ags", []byte(c.data), Options{})
		if c.want == "" && err != nil || c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
}

// A test that was refused before it gave an N is a lower bound, and one of which
// nothing can be read is counted among what is left out.
func TestRefusedTestIsNotDropped(t *testing.T) {
	const data = `"GROUP","ISPT"
"HEADING","LOCA_ID","ISPT_TOP","ISPT_NVAL","ISPT_REP","ISPT_ERAT"
"UNIT","","m","","",""
"DATA","H","1","10","2,2/2,2,3,3","60"
"DATA","H","4","","25/50 for 140mm","75"
"DATA","H","7","","50/25mm","75"
"DATA","H","10","","refused",""
"DATA","H","13","","unknown",""
"DATA","H","16","","",""
"DATA","H","19","","50 for 200 mm","75"
`
	holes, err := ReadHoles("x.ags", []byte(data), Options{})
	if err != nil {
		t.Fatal(err)
	}
	n := func(z, v float64, refused bool, energy float64, line int) Test {
		return Test{Depth: z, Quantity: profile.N, Value: v, Refused: refused, Energy: energy, Heading: "ISPT_NVAL", Line: line}
	}
	// 140 and 25 mm are less than one increment of 150 mm; 200 mm is not.
	want := []Test{n(1, 10, false, 60, 4), n(4, 50, true, 75, 5), n(7, 50, true, 75, 6), n(19, 50, false, 75, 10)}
	if diff := cmp.Diff(want, holes[0].Tests); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
	var notes []string
	for _, note := range holes[0].Notes {
		notes = append(notes, note.ID+": "+note.Text)
	}
	wantNotes := []string{
		`test-bound: ISPT_NVAL "REP 25/50 for 140mm" is a lower bound and was read as its number, 50, and so in 2 more rows`,
		`not-read: ISPT_NVAL "REP refused" gives no blow count and was left out, and so in 1 more row`,
		`test-incomplete: ISPT_NVAL "REP 50 for 200 mm" is of a test driven 200 mm in place of 300 mm, and was taken as it stands`,
	}
	if diff := cmp.Diff(wantNotes, notes); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
	// Layers take the energy ratio of their tests; of several, the one that
	// keeps the harmonic mean of N60. By hand: 2/(1/(10·60) + 1/(20·80)) ÷
	// 2/(1/10 + 1/20) = 872.7273/13.3333 = 65.4545 %.
	list := []result{{value: 10, energy: 60}, {value: 20, energy: 80}}
	if got := energyOf(list); math.Abs(got-65.454545) > 1e-5 {
		t.Errorf("got %v %%", got)
	}
	if got := energyOf(append(list, result{value: 9})); got != 0 {
		t.Errorf("one of three does not say, got %v %%", got)
	}
	profiles, err := Read("x.ags", []byte(data), Options{})
	if err != nil || profiles[0].Layers[0].EnergyRatio != 60 || profiles[0].Layers[1].EnergyRatio != 75 || !profiles[0].Layers[1].Refusal {
		t.Errorf("%+v, %v", profiles, err)
	}
}

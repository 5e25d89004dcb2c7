package batch

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile/spreadsheet"
)

// book is a workbook; each sheet is its name and rows of cells with commas
// between. A cell that begins with a digit is a number.
func book(t *testing.T, sheets ...[]string) string {
	t.Helper()
	var b bytes.Buffer
	w := spreadsheet.NewWriter(&b)
	for _, rows := range sheets {
		if err := w.Sheet(rows[0], make([]spreadsheet.Column, 0)); err != nil {
			t.Fatal(err)
		}
		for _, row := range rows[1:] {
			var cells []spreadsheet.Cell
			for text := range strings.SplitSeq(row, ",") {
				cells = append(cells, spreadsheet.Text(text))
			}
			if err := w.Row(cells...); err != nil {
				t.Fatal(err)
			}
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

const agsFile = `"GROUP","LOCA"
"HEADING","LOCA_ID"
"UNIT",""
"TYPE","ID"
"DATA","A"
"DATA","B"
"DATA","C"

"GROUP","ISTA"
"HEADING","LOCA_ID","ISTG_TESN","ISTA_TOP","ISTA_BASE","ISTA_WVTY","ISTA_WVL"
"UNIT","","","m","m","","m/s"
"TYPE","ID","X","2DP","2DP","PA","0DP"
"DATA","A","1","0.00","8.00","S","180"
"DATA","A","1","8.00","40.00","S","420"
"DATA","B","1","0.00","5.00","S","BAD"
"DATA","B","1","5.00","40.00","S","400"
"DATA","C","1","0.00","3.00","S","220"
"DATA","C","1","3.00","60.00","S","510"
`

const jsonFile = `{"shearbook profiles": 1, "profiles": [
{"name": "A", "layers": [{"top_m": 0, "bottom_m": 8, "vs_mps": 180}, {"top_m": 8, "bottom_m": 40, "vs_mps": 420}]},
{"name": "B", "layers": [{"top_m": 0, "bottom_m": 5, "vs_mps": BAD}, {"top_m": 5, "bottom_m": 40, "vs_mps": 400}]},
{"name": "C", "layers": [{"top_m": 0, "bottom_m": 3, "vs_mps": 220}, {"top_m": 3, "bottom_m": 60, "vs_mps": 510}]}]}
`

const xmlFile = `<?xml version="1.0" encoding="UTF-8"?>
<q:quakeml xmlns:q="http://quakeml.org/xmlns/quakeml/1.3"><siteCharacterizationParameters schemaVersion="1.3">
<velocityProfile publicID="x/A"><velocityProfileData><velocityS><value>180</value></velocityS><layerThickness><layerTopDepth><value>0</value></layerTopDepth><layerBottomDepth><value>40</value></layerBottomDepth></layerThickness></velocityProfileData></velocityProfile>
<velocityProfile publicID="x/B"><velocityProfileData><velocityS><value>BAD</value></velocityS><layerThickness><layerTopDepth><value>0</value></layerTopDepth><layerBottomDepth><value>40</value></layerBottomDepth></layerThickness></velocityProfileData></velocityProfile>
<velocityProfile publicID="x/C"><velocityProfileData><velocityS><value>510</value></velocityS><layerThickness><layerTopDepth><value>0</value></layerTopDepth><layerBottomDepth><value>60</value></layerBottomDepth></layerThickness></velocityProfileData></velocityProfile>
</siteCharacterizationParameters></q:quakeml>
`

// One bad profile among three: the other two have the rows and the notes that
// they have beside a good one, and the bad one has a row that says what is wrong
// and faults at their places.
func TestBadProfileLeavesOthersAlone(t *testing.T) {
	const head = "top_m,bottom_m,vs_mps"
	stacked := func(bad string) string {
		return book(t, []string{"Line", "A", head, "0,8,180", "8,40,420", "", "B", head, "0,5," + bad, "5,40,400", "", "C", head, "0,3,220", "3,60,510"})
	}
	sheets := func(bad string) string {
		return book(t, []string{"A", head, "0,8,180", "8,40,420"}, []string{"B", head, "0,5," + bad, "5,40,400"}, []string{"C", head, "0,3,220", "3,60,510"})
	}
	column := func(bad string) string {
		return book(t, []string{"all", "method: MASW", "[B] operator: Firm", "profile," + head + ",colour", "A,0,8,180,x", "A,8,40,420,x", "B,0,5," + bad + ",x", "B,5,40,400,x", "C,0,3,220,x", "C,3,60,510,x"})
	}
	text := func(file string) func(string) string {
		return func(bad string) string { return strings.Replace(file, "BAD", bad, 1) }
	}
	for _, c := range []struct {
		name, bad, good string
		file            func(bad string) string
		fault           string // in faults.csv, behind the name of the file
	}{
		{"sheets.xlsx", "fast", "210", sheets, `,3,3,B!C3,B,,,"Vs ""fast"" is not a number"`},
		{"stacked.xlsx", "fast", "210", stacked, `,9,3,Line!C9,B,,,"Vs ""fast"" is not a number"`},
		{"column.xlsx", "fast", "210", column, `,7,4,all!D7,B,,,"Vs ""fast"" is not a number"`},
		{"some.json", "-1", "210", text(jsonFile), `,3,64,,B,,,Vs -1 m/s of layer 1 is not positive`},
		{"site.xml", "fast", "210", text(xmlFile), `,4,72,,B,,,"velocityS ""fast"" is not a number"`},
		{"holes.ags", "fast", "210", text(agsFile), `,15,34,,B,,,"ISTA_WVL ""fast"" is not a number"`},
		{"order.ags", `400"` + "\n" + `"DATA","B","1","1.00","4.00","S","200`, `400"` + "\n" + `"DATA","B","1","50.00","60.00","S","200`, text(agsFile), `,16,`},
	} {
		t.Run(c.name, func(t *testing.T) {
			with, faultsWith := rowsOfFile(t, c.name, c.file(c.bad))
			without, faultsWithout := rowsOfFile(t, c.name, c.file(c.good))
			if len(with) != 3 || len(without) != 3 {
				t.Fatalf("%d and %d rows: %+v\n%s", len(with), len(without), with, faultsWith)
			}
			b := with[1]
			if b.Profile != "B" || b.Class != "" || b.Problem == "" || b.Flags&Failed == 0 || b.Faults == 0 || b.Line == 0 {
				t.Errorf("the bad one: %+v", b)
			}
			if !strings.Contains(faultsWith, "fault,"+c.name+c.fault) {
				t.Errorf("no fault %s in\n%s", c.fault, faultsWith)
			}
			for i, name := range []string{"A", "", "C"} {
				if name == "" {
					continue
				}
				if diff := cmp.Diff(without[i], with[i]); diff != "" || with[i].Profile != name || with[i].Class == "" {
					t.Errorf("row %s: %s", name, diff)
				}
				if diff := cmp.Diff(linesOf(faultsWithout, name), linesOf(faultsWith, name)); diff != "" {
					t.Errorf("notes on %s: %s", name, diff)
				}
			}
		})
	}
}

// rowsOfFile classifies a file and returns its rows and its faults.csv.
func rowsOfFile(t *testing.T, name, text string) ([]Row, string) {
	t.Helper()
	t.Chdir(t.TempDir())
	if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	_, files := runJob(t, Job{Inputs: []string{name}, Codes: mustCode(t, "ec8-2004"), Out: filepath.Join(t.TempDir(), "out")})
	return rowsOf(t, files), files[FaultsIn]
}

// linesOf are the lines about a profile.
func linesOf(faults, name string) []string {
	return slices.DeleteFunc(strings.Split(faults, "\n"), func(line string) bool { return !strings.Contains(line, ","+name+",") })
}

// What is wrong outside the profiles is the file's.
func TestFaultOfTheFile(t *testing.T) {
	for name, text := range map[string]string{
		"cut.json":  jsonFile[:300],
		"cut.xml":   xmlFile[:900],
		"unit.ags":  strings.Replace(agsFile, `"m/s"`, `"kN"`, 1),
		"none.json": `{"shearbook profiles": 1, "profiles": []}`,
	} {
		rows, _ := rowsOfFile(t, name, strings.Replace(text, "BAD", "200", 1))
		if len(rows) != 1 || rows[0].Profile != "" || rows[0].Problem == "" {
			t.Errorf("%s: %+v", name, rows)
		}
	}
}

package spreadsheet

import (
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"shearbook/profile"
)

// cells are the cells of a workbook by name, as "Sheet1!B7". A value that is a
// string beginning with = is a formula without a stored value.
type cells map[string]any

// workbook is the bytes of a workbook with these cells, to which change may do
// more. Sheets come in the given order.
func workbook(t testing.TB, sheets []string, content cells, change func(f *excelize.File)) []byte {
	t.Helper()
	f := excelize.NewFile()
	defer f.Close()
	for i, name := range sheets {
		if i == 0 {
			must(t, f.SetSheetName("Sheet1", name))
			continue
		}
		_, err := f.NewSheet(name)
		must(t, err)
	}
	set := func(at string, value any) {
		name, cell, _ := strings.Cut(at, "!")
		switch value := value.(type) {
		case []any:
			must(t, f.SetSheetRow(name, cell, &value))
		case string:
			if strings.HasPrefix(value, "=") {
				must(t, f.SetCellValue(name, cell, nil))
				must(t, f.SetCellFormula(name, cell, value[1:]))
				return
			}
			must(t, f.SetCellValue(name, cell, value))
		default:
			must(t, f.SetCellValue(name, cell, value))
		}
	}
	names := slices.Sorted(maps.Keys(content))
	for _, at := range names {
		if _, whole := content[at].([]any); whole {
			set(at, content[at])
		}
	}
	for _, at := range names { // single cells over whole rows
		if _, whole := content[at].([]any); !whole {
			set(at, content[at])
		}
	}
	if change != nil {
		change(f)
	}
	b, err := f.WriteToBuffer()
	must(t, err)
	return b.Bytes()
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func line(values ...any) []any { return values }

var one = []string{"Sheet1"}

// simple is a table of an invented site.
var simple = cells{
	"Sheet1!A1": line("top (m)", "bottom (m)", "Vs (m/s)"),
	"Sheet1!A2": line(0, 4.5, 180),
	"Sheet1!A3": line(4.5, 12, 260),
	"Sheet1!A4": line(12, nil, 420),
}

const simpleWant = "0-4.5 180 Sheet1!C2, 4.5-12 260 Sheet1!C3, 12-inf 420 Sheet1!C4"

// with is a copy of content with more or other cells.
func with(content, more cells) cells {
	all := cells{}
	for at, v := range content {
		all[at] = v
	}
	for at, v := range more {
		all[at] = v
	}
	return all
}

// layers is a profile in words.
func layers(p *profile.Profile) string {
	var list []string
	for _, l := range p.Layers {
		bottom := fmt.Sprintf("%.6g", l.Bottom)
		if math.IsInf(l.Bottom, 1) {
			bottom = "inf"
		}
		text := fmt.Sprintf("%.6g-%s %.6g %s", l.Top, bottom, l.Vs, p.Reading.Place(int(l.Line), int(l.Column)).Cell)
		if l.Soil != "" {
			text += " " + l.Soil
		}
		list = append(list, text)
	}
	return strings.Join(list, ", ")
}

// noteIDs are the notes of a profile, but for the doubts about its velocities.
func noteIDs(p *profile.Profile) string {
	var list []string
	for _, n := range p.Notes {
		if n.ID == "one-layer" {
			continue
		}
		list = append(list, n.ID+"@"+n.Place.Cell)
	}
	return strings.Join(list, " ")
}

// Every shape of a table that is read. The expected layers are the cells
// themselves, or converted by hand where a comment says so.
func TestShapes(t *testing.T) {
	hide := func(rows ...int) func(f *excelize.File) {
		return func(f *excelize.File) {
			for _, n := range rows {
				must(t, f.SetRowVisible("Sheet1", n, false))
			}
		}
	}
	for _, c := range []struct {
		name   string
		sheets []string
		cells  cells
		change func(f *excelize.File)
		want   string // name: layers; notes
	}{
		{name: "plain", sheets: one, cells: simple, want: "site: " + simpleWant},
		{name: "sheet named", sheets: []string{"Line A"}, cells: cells{
			"Line A!C5": line("Depth (m)", "Vs (m/s)"), "Line A!C6": line(0, 180), "Line A!C7": line(5, 300),
		}, want: "Line A: 0-5 180 'Line A'!D6, 5-inf 300 'Line A'!D7; depth-as-top@'Line A'!C5 half-space-assumed@'Line A'!D7"},
		{name: "numbers as text, decimal commas in text", sheets: one, cells: cells{
			"Sheet1!A1": line("top (m)", "bottom (m)", "Vs (m/s)"),
			"Sheet1!A2": line("0", "4,5", "180"), "Sheet1!A3": line(4.5, "12", "260.5"),
		}, want: "site: 0-4.5 180 Sheet1!C2, 4.5-12 260.5 Sheet1!C3"},
		{name: "unit row", sheets: one, cells: cells{
			"Sheet1!A1": line("thickness", "Vs"), "Sheet1!A2": line("ft", "ft/s"), "Sheet1!A3": line(10, 1000),
		}, want: "site: 0-3.048 304.8 Sheet1!B3"}, // 10 ft = 3.048 m, 1000 ft/s = 304.8 m/s
		{name: "merged title and statements", sheets: one, cells: with(cells{
			"Sheet1!B2": "Ferry yard, model of the shear-wave velocity", "Sheet1!B3": "Method: MASW",
			"Sheet1!B4": line("Depth reached", 30, "m"), "Sheet1!B5": "name: FY-1",
			"Sheet1!C8": line("top (m)", "bottom (m)", "Vs (m/s)"), "Sheet1!C9": line(0, 30, 210),
		}, nil), change: func(f *excelize.File) { must(t, f.MergeCell("Sheet1", "B2", "F2")) },
			want: "FY-1: 0-30 210 Sheet1!E9"},
		{name: "soil merged down", sheets: one, cells: cells{
			"Sheet1!A1": line("bottom (m)", "Vs (m/s)", "soil"), "Sheet1!A2": line(2, 180, "sand"), "Sheet1!A3": line(5, 200),
		}, change: func(f *excelize.File) { must(t, f.MergeCell("Sheet1", "C2", "C3")) },
			want: "site: 0-2 180 Sheet1!B2 sand, 2-5 200 Sheet1!B3 sand"},
		{name: "profile column", sheets: one, cells: cells{
			"Sheet1!A1": line("line", "bottom (m)", "Vs (m/s)"), "Sheet1!A2": line("L1", 2, 180), "Sheet1!A3": line("L2", 5, 200),
		}, want: "L1: 0-2 180 Sheet1!C2 | L2: 0-5 200 Sheet1!C3"},
		{name: "stacked with titles", sheets: one, cells: cells{
			"Sheet1!A1": "North", "Sheet1!A2": line("bottom (m)", "Vs (m/s)"), "Sheet1!A3": line(2, 180),
			"Sheet1!A5": "South", "Sheet1!A6": line("bottom (ft)", "Vs (ft/s)"), "Sheet1!A7": line(10, 1000),
		}, want: "North: 0-2 180 Sheet1!B3 | South: 0-3.048 304.8 Sheet1!B7"},
		{name: "side by side", sheets: one, cells: cells{
			"Sheet1!A1": line("bottom (m)", "Vs (m/s)", nil, "bottom (m)", "Vs (m/s)"),
			"Sheet1!A2": line(2, 180, nil, 3, 190), "Sheet1!A3": line(4, 200),
		}, want: "Sheet1 1: 0-2 180 Sheet1!B2, 2-4 200 Sheet1!B3 | Sheet1 2: 0-3 190 Sheet1!E2"},
		{name: "several sheets", sheets: []string{"BH-1", "Remarks", "BH-2"}, cells: cells{
			"BH-1!A1": line("bottom (m)", "Vs (m/s)"), "BH-1!A2": line(2, 180), "Remarks!A1": "nothing here",
			"BH-2!A1": line("bottom (m)", "Vs (m/s)"), "BH-2!A2": line(3, 190),
		}, want: "BH-1: 0-2 180 'BH-1'!B2 | BH-2: 0-3 190 'BH-2'!B2"},
		{name: "hidden row", sheets: one, cells: simple, change: hide(3), want: "site: " + simpleWant + "; hidden-rows@Sheet1!A3"},
		{name: "hidden column", sheets: one, cells: simple, change: func(f *excelize.File) {
			must(t, f.SetColVisible("Sheet1", "B", false))
		}, want: "site: " + simpleWant + "; hidden-columns@Sheet1!A2"},
		{name: "hidden sheet", sheets: []string{"Cover", "L1"}, cells: cells{
			"L1!A1": line("bottom (m)", "Vs (m/s)"), "L1!A2": line(2, 180),
		}, change: func(f *excelize.File) { must(t, f.SetSheetVisible("L1", false)) },
			want: "L1: 0-2 180 L1!B2; hidden-sheet@L1!A2"},
		{name: "blank row inside, text below", sheets: one, cells: cells{
			"Sheet1!A1": line("bottom (m)", "Vs (m/s)"), "Sheet1!A2": line(2, 180), "Sheet1!A4": line(5, 200),
			"Sheet1!A6": "Interpreted by the survey crew",
		}, want: "site: 0-2 180 Sheet1!B2, 2-5 200 Sheet1!B4; row-not-read@Sheet1!A6"},
		{name: "percentage", sheets: one, cells: cells{
			"Sheet1!A1": line("bottom (m)", "Vs (m/s)", "water content (%)"), "Sheet1!A2": line(2, 180, 0.35),
		}, change: func(f *excelize.File) { format(t, f, "C2", 9) }, want: "site: 0-2 180 Sheet1!B2; w=35"},
		{name: "fifteen digits", sheets: one, cells: cells{
			"Sheet1!A1": line("top (m)", "bottom (m)", "Vs (m/s)"), "Sheet1!A2": line(0, 0.30000000000000004, 180), "Sheet1!A3": line(0.3, nil, 200),
		}, want: "site: 0-0.3 180 Sheet1!C2, 0.3-inf 200 Sheet1!C3"},
	} {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read("dir/site.xlsx", workbook(t, c.sheets, c.cells, c.change), Options{})
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for i := range profiles {
				p := &profiles[i]
				text := p.Name + ": " + layers(p)
				if l := p.Layers[0]; l.Has(profile.GivenWaterContent) {
					text += fmt.Sprintf("; w=%.6g", l.WaterContent)
				} else if ids := noteIDs(p); ids != "" {
					text += "; " + ids
				}
				got = append(got, text)
			}
			if diff := cmp.Diff(c.want, strings.Join(got, " | ")); diff != "" {
				t.Errorf("(-want +got)\n%s", diff)
			}
		})
	}
}

// format gives a cell of Sheet1 a built-in number format: 9 is 0%, 14 a date
// (ISO/IEC 29500-1, 18.8.30).
func format(t testing.TB, f *excelize.File, cell string, id int) {
	t.Helper()
	style, err := f.NewStyle(&excelize.Style{NumFmt: id})
	must(t, err)
	must(t, f.SetCellStyle("Sheet1", cell, cell, style))
}

// What stands above the header reaches the survey, and the file's own words
// are kept.
func TestReading(t *testing.T) {
	data := workbook(t, one, cells{
		"Sheet1!A1": "Ferry yard", "Sheet1!A2": line("Method:", "MASW", nil, "Date:", "3 May 2026"),
		"Sheet1!A3": line("Water table", 3.2, "m"), "Sheet1!A5": line("top", "bottom", "Vs", "remark"),
		"Sheet1!A6": line(0, "4.50", 180, "soft"),
	}, nil)
	profiles, err := Read("site.xlsx", data, Options{Units: "m, m/s"})
	if err != nil {
		t.Fatal(err)
	}
	p := profiles[0]
	if p.Survey.Method != "MASW" || p.Survey.Date != "3 May 2026" || p.Survey.WaterTable != profile.Known(3.2) {
		t.Errorf("survey %+v", p.Survey)
	}
	r := p.Reading
	if r.Sheet != "Sheet1" || r.Encoding != "XLSX" || r.Size != int64(len(data)) || len(r.SHA256) != 64 {
		t.Errorf("reading of %s, sheet %s, %s, %d bytes, %s", r.File, r.Sheet, r.Encoding, r.Size, r.SHA256)
	}
	want := []profile.Row{{Line: 6, Cells: strings.Join([]string{"0", "4.50", "180", "soft"}, profile.CellSeparator)}}
	if diff := cmp.Diff(want, r.Rows); diff != "" {
		t.Error(diff)
	}
	metadata := []profile.Metadatum{{Value: "Ferry yard", Line: 1}, {Key: "Method:", Value: "MASW", Line: 2}, {Key: "Date:", Value: "3 May 2026", Line: 2}, {Key: "Water table", Value: "3.2 m", Line: 3}}
	for i := range metadata {
		metadata[i].Key = strings.TrimSuffix(metadata[i].Key, ":")
	}
	if diff := cmp.Diff(metadata, r.Metadata); diff != "" {
		t.Error(diff)
	}
}

// A formula is read by its stored value, and not evaluated.
func TestFormulaStoredValue(t *testing.T) {
	data := workbook(t, one, with(simple, cells{"Sheet1!C3": "=100+160"}), nil)
	data = rewritten(t, data, "xl/worksheets/sheet1.xml", "<f>100+160</f>", "<f>100+160</f><v>555</v>")
	profiles, err := Read("site.xlsx", data, Options{})
	if err != nil || profiles[0].Layers[1].Vs != 555 {
		t.Fatalf("%v, %v", profiles, err)
	}
}

// Every fault is told at its cell.
func TestFaults(t *testing.T) {
	for _, c := range []struct {
		name, units string
		cells       cells
		change      func(f *excelize.File)
		want        string
	}{
		{name: "no number", cells: with(simple, cells{"Sheet1!C3": "fast"}), want: `x.xlsx:Sheet1!C3: Vs "fast" is not a number`},
		{name: "several", cells: with(simple, cells{"Sheet1!C2": 0, "Sheet1!C3": -5}),
			want: "x.xlsx:Sheet1!C2: Vs \"0\" is zero: " + profile.ZeroVsReason + "\nx.xlsx:Sheet1!C3: Vs \"-5\" is not positive"},
		{name: "blank velocity", cells: with(simple, cells{"Sheet1!C3": nil}), want: "x.xlsx:Sheet1!C3: Vs is blank"},
		{name: "gap", cells: with(simple, cells{"Sheet1!A3": line(5, 12, 260)}), want: "x.xlsx:Sheet1!A3: top \"5\" leaves a gap below the layer above, which ends at 4.5 m"},
		{name: "no unit", cells: with(simple, cells{"Sheet1!C1": "Vs"}), want: `x.xlsx:Sheet1!C1: column "Vs" states no unit`},
		{name: "two units", units: "ft, ft/s", cells: with(simple, nil), want: "x.xlsx:Sheet1!A1: column \"top\" is in m, but ft was given for it\nx.xlsx:Sheet1!B1: column \"bottom\" is in m, but ft was given for it\nx.xlsx:Sheet1!C1: column \"Vs\" is in m/s, but ft/s was given for it"},
		{name: "date", cells: with(simple, cells{"Sheet1!B2": 46147}), change: func(f *excelize.File) { format(t, f, "B2", 16) }, want: `x.xlsx:Sheet1!B2: bottom "5-May" is not a number`}, // day 46147 is 2026-05-05
		{name: "error value", cells: with(simple, cells{"Sheet1!C3": "#DIV/0!"}), want: `x.xlsx:Sheet1!C3: Vs "#DIV/0!" is not a number`},
		{name: "formula without a value", cells: with(simple, cells{"Sheet1!B4": "=B3+8"}), want: `x.xlsx:Sheet1!B4: the formula "=B3+8" has no stored value`},
		{name: "header alone", cells: cells{"Sheet1!B7": line("top (m)", "Vs (m/s)")}, want: `x.xlsx:Sheet1!B7: the table has a header but no layers`},
		{name: "header alone, tops and bottoms", cells: cells{"Sheet1!B7": line("top (m)", "bottom (m)", "Vs (m/s)")}, want: `x.xlsx:Sheet1!B7: the table has a header but no layers`},
		{name: "no table", cells: cells{"Sheet1!B7": "shopping list"}, want: "x.xlsx: no sheet holds a table of layers: no row names a column of Vs and one of depth"},
		{name: "empty", cells: cells{}, want: "x.xlsx: no sheet holds a table of layers: no row names a column of Vs and one of depth"},
		{name: "statement", cells: cells{"Sheet1!A1": "Water table: deep", "Sheet1!A3": line("bottom (m)", "Vs (m/s)"), "Sheet1!A4": line(5, 200)},
			want: `x.xlsx:Sheet1!A1: water table "deep" is not a length`},
		{name: "statement twice", cells: cells{"Sheet1!A1": "Method: MASW", "Sheet1!A2": line("Method", "SASW"), "Sheet1!A3": line("bottom (m)", "Vs (m/s)"), "Sheet1!A4": line(5, 200)},
			want: "x.xlsx:Sheet1!B2: method is stated a second time, after row 1"},
		{name: "same name", cells: cells{
			"Sheet1!A1": line("line", "bottom (m)", "Vs (m/s)"), "Sheet1!A2": line("L1", 5, 200),
			"Sheet1!A4": line("line", "bottom (m)", "Vs (m/s)"), "Sheet1!A5": line("L1", 5, 200)},
			want: `x.xlsx:Sheet1!A5: duplicate profile "L1": one of that name began at Sheet1!A2`},
		{name: "faults of two tables", cells: cells{
			"Sheet1!A1": line("bottom (m)", "Vs (m/s)"), "Sheet1!A2": line(5, "x"),
			"Sheet1!D1": line("bottom (m)", "Vs (m/s)"), "Sheet1!D2": line(5, "y")},
			want: "x.xlsx:Sheet1!B2: Vs \"x\" is not a number\nx.xlsx:Sheet1!E2: Vs \"y\" is not a number"},
		{name: "validation", cells: with(simple, cells{"Sheet1!D1": "Vp (m/s)", "Sheet1!D2": 190}), want: "x.xlsx:Sheet1!C2: Vp 190 m/s"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.xlsx", workbook(t, one, c.cells, c.change), Options{Units: c.units})
			var faults profile.Faults
			if !errors.As(err, &faults) {
				t.Fatalf("error %v", err)
			}
			if got := err.Error(); got != c.want && (c.name != "validation" || !strings.HasPrefix(got, "x.xlsx:Sheet1!C2: ")) {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
		})
	}
}

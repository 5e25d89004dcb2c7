package siteclass

import (
	"fmt"
	"os"
	"path/filepath"
	"reflect"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
)

// Each table is entered twice: in Go, and in testdata/tables from the
// published sources anew. The tests below hold one against the other, and
// see to it that a change of any cell of the Go table is found.

// transcription is the second entry: the cells of its tables by heading.
type transcription map[string][][]string

// readTranscription reads the second entry of a code's table, or of the one
// it adopts.
func readTranscription(t *testing.T, id string) transcription {
	t.Helper()
	if c, err := Find(id); err == nil && c.Adopts != "" {
		id = c.Adopts
	}
	data, err := os.ReadFile(filepath.Join("testdata", "tables", id+".md"))
	if err != nil {
		t.Fatal(err)
	}
	tables, heading := transcription{}, "Items"
	for line := range strings.SplitSeq(string(data), "\n") {
		if name, ok := strings.CutPrefix(line, "## "); ok {
			heading = name
			tables[heading] = nil
		}
		if !strings.HasPrefix(line, "|") {
			continue
		}
		cells := strings.Split(strings.Trim(line, "|"), "|")
		for i := range cells {
			cells[i] = strings.TrimSpace(cells[i])
		}
		tables[heading] = append(tables[heading], cells)
	}
	for heading, rows := range tables {
		if len(rows) < 2 {
			t.Fatalf("%s: no table under %s", id, heading)
		}
		tables[heading] = rows[2:] // without the header and its rule
	}
	return tables
}

// transcribe writes the Go table in the form of the second entry.
func transcribe(c *Code) transcription {
	out := transcription{"Classes": {}, "Conditions": {}, "Limits": {}, "Twin": {}}
	out["Items"] = [][]string{
		{"depth", plain(c.Depth) + " m"}, {"datum", c.Datum.String()}, {"velocity unit", c.Unit.Name},
		{"strength unit", c.SuUnit.Name}, {"length unit", c.Length.Name}, {"standing", c.Standing.String()}, {"outside", c.Outside}, {"twin unit", c.Twin.Unit.Name},
	}
	for _, b := range c.Bands {
		row := append(append(append([]string{b.Class}, cells(b.Vs)...), cells(b.N)...), cells(b.Su)...)
		out["Classes"] = append(out["Classes"], append(row, words(b.Improving, "improving", b.Indicative, "indicative"), b.Standing.String()))
	}
	for _, k := range c.Conditions {
		only := strings.Join(k.Only, " ")
		if only != "" || k.OnlyStanding != 0 {
			only += " (" + k.OnlyStanding.String() + ")"
		}
		out["Conditions"] = append(out["Conditions"], []string{k.ID, k.Kind.String(), k.Class, k.Clause, k.Fact.String(), only,
			strings.Join(k.Bars, " "), words(k.FromFoundation, "from foundation", k.OwnAverage, "own average"), k.Standing.String()})
		for _, l := range k.Limits {
			row := append([]string{k.ID, l.Property.String()}, cells(l.Range)...)
			out["Limits"] = append(out["Limits"], append(row, l.Unit.Name, words(l.About, "about", false, "")))
		}
	}
	transcribeRoutes(c, out)
	transcribeRules(c, out)
	if c.Twin.Unit.Name != "" || len(c.Twin.Bounds) > 0 {
		bounds := append(c.bounds(), make([]float64, len(c.Twin.Bounds))...) // never too few
		for i, twin := range c.Twin.Bounds {
			out["Twin"] = append(out["Twin"], []string{plain(bounds[i]), plain(twin)})
		}
	}
	return out
}

// transcribeRoutes adds the tables of the routes and averages, and the items
// that few codes have, where there are any.
func transcribeRoutes(c *Code, out transcription) {
	row := func(table, name, value string) {
		if value != "" && value != "0" {
			out[table] = append(out[table], []string{name, value})
		}
	}
	row("Items", "routes needed", plain(float64(c.Needs)))
	row("Items", "default class", c.DefaultClass)
	row("Items", "several profiles", words(c.WorstOf, "the worst governs", false, ""))
	row("Items", "adopts", c.Adopts)
	row("Items", "adoption standing", known0(c.AdoptionStanding, c.AdoptionStanding.String()))
	for _, r := range c.Routes {
		var measures []string
		for _, m := range r.Measures {
			measures = append(measures, m.String())
		}
		out["Routes"] = append(out["Routes"], []string{r.Name, strings.Join(measures, " "), plain(float64(r.Rank)), r.Clause, r.Standing.String()})
	}
	a := c.Averaging
	for _, v := range [][2]string{{"N", a.N}, {"Nch", a.Nch}, {"su", a.Su}, {"blow count", known0(a.Blow, a.Blow.String())},
		{"N cap", plain(a.NCap)}, {"su cap", plain(a.SuCap)},
		{"cohesive PI", strings.Trim(strings.Join(cells(a.Cohesive), " "), " ")},
		{"cohesionless PI", strings.Trim(strings.Join(cells(a.Cohesionless), " "), " ")},
		{"formula", words(a.Unstated, "not printed", false, "")},
		{"clause", a.Clause}, {"standing", known0(a.Standing, a.Standing.String())}} {
		row("Averages", v[0], v[1])
	}
}

// known0 returns the text, "" for the zero value.
func known0[T comparable](v T, text string) string {
	var zero T
	if v == zero {
		return ""
	}
	return text
}

func plain(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// cells returns the four cells of a range.
func cells(r Range) []string {
	var out []string
	for _, l := range []Limit{r.Lower, r.Upper} {
		value := plain(l.Value)
		if l.Op == Open && l.Value == 0 {
			value = ""
		}
		out = append(out, l.Op.String(), value)
	}
	return out
}

// words joins the words whose flags are set.
func words(a bool, wordA string, b bool, wordB string) string {
	switch {
	case a && b:
		return wordA + ", " + wordB
	case a:
		return wordA
	case b:
		return wordB
	}
	return ""
}

func TestTablesEnteredTwice(t *testing.T) {
	for _, build := range builders {
		c := build()
		if c.Adopts != "" {
			continue // no table of its own; see TestAdoptedTables
		}
		if diff := cmp.Diff(readTranscription(t, c.ID), transcribe(c), equateEmpty); diff != "" {
			t.Errorf("%s: second transcription (-) and Go table (+) differ:\n%s", c.ID, diff)
		}
	}
}

// TestAdoptedTables: a code that adopts another's table has it cell for cell,
// says whose it is, and with what standing.
func TestAdoptedTables(t *testing.T) {
	n := 0
	for _, c := range All() {
		if c.Adopts == "" {
			continue
		}
		n++
		base, err := Find(c.Adopts)
		if err != nil {
			t.Fatal(err)
		}
		copied := *c
		copied.Adopts, copied.AdoptionStanding, copied.Standing = "", 0, base.Standing
		own := transcribe(&copied)
		if diff := cmp.Diff(transcribe(base), own, equateEmpty); diff != "" {
			t.Errorf("%s does not have the table of %s:\n%s", c.ID, base.ID, diff)
		}
		d := decide(t, c.ID, uniform(300))
		if want := decide(t, base.ID, uniform(300)); d.Class != want.Class || noteOf(d, "adopted") != c.Adoption ||
			!strings.Contains(c.Adoption, "ASCE/SEI 7-") || d.Standing != max(want.Standing, c.AdoptionStanding) {
			t.Errorf("%s: class %s, %s, %q", c.ID, d.Class, d.Standing, noteOf(d, "adopted"))
		}
	}
	if n != 7 {
		t.Errorf("%d codes adopt a table, want the five IBC, NEHRP 2020 and AASHTO 2023", n)
	}
}

// equateEmpty lets an empty table equal a missing one.
var equateEmpty = cmp.Transformer("rows", func(rows [][]string) []string {
	var out []string
	for _, r := range rows {
		out = append(out, strings.Join(r, " | "))
	}
	return append(out, "end")
})

// TestChangedCellIsFound changes each cell of each Go table in turn and looks
// whether the comparison with the second transcription sees it.
func TestChangedCellIsFound(t *testing.T) {
	for _, build := range builders {
		if build().Adopts != "" {
			continue
		}
		second := readTranscription(t, build().ID)
		n := len(leaves(reflect.ValueOf(build()).Elem(), ""))
		if n < 60 {
			t.Errorf("%s: only %d cells", build().ID, n)
		}
		for i := range n {
			c := build()
			cell := leaves(reflect.ValueOf(c).Elem(), "")[i]
			cell.change()
			if cmp.Equal(second, transcribe(c), equateEmpty) {
				t.Errorf("%s: a change of %s is not found", c.ID, cell.path)
			}
		}
	}
}

// TestMissingRowIsFound takes out each row and condition in turn.
func TestMissingRowIsFound(t *testing.T) {
	for _, build := range builders {
		if build().Adopts != "" {
			continue
		}
		second := readTranscription(t, build().ID)
		for i := range build().Bands {
			c := build()
			c.Bands = append(c.Bands[:i], c.Bands[i+1:]...)
			c.Twin = Twin{}
			if cmp.Equal(second["Classes"], transcribe(c)["Classes"], equateEmpty) {
				t.Errorf("%s: missing row %d is not found", c.ID, i)
			}
		}
		for i := range build().Conditions {
			c := build()
			c.Conditions = append(c.Conditions[:i], c.Conditions[i+1:]...)
			if cmp.Equal(second, transcribe(c), equateEmpty) {
				t.Errorf("%s: missing condition %d is not found", c.ID, i)
			}
		}
	}
}

// leaf is one cell of a table.
type leaf struct {
	path  string
	value reflect.Value
}

// prose names the fields that hold no number, operator or rule, and those
// that follow from others.
var prose = map[string]bool{"Title": true, "Edition": true, "Region": true, "Table": true, "Source": true,
	"Parameter": true, "DepthText": true, "DatumNote": true, "Notes": true, "Short": true, "Correlated": true,
	"Default": true, "Several": true, "Adoption": true, "Superseded": true, "ready": true, "bandsAlone": true,
	"Name": true, "Also": true, "Text": true, "decide": true, "Own": true, "Dimension": true, "Factor": true}

func leaves(v reflect.Value, path string) []leaf {
	switch v.Kind() {
	case reflect.Struct:
		var out []leaf
		for i := range v.NumField() {
			name := v.Type().Field(i).Name
			switch {
			case prose[name] && !isNamed(v, name):
			case path == "" && (name == "ID" || name == "Clause"): // of the code itself
			default:
				out = append(out, leaves(v.Field(i), path+"."+name)...)
			}
		}
		return out
	case reflect.Slice:
		var out []leaf
		for i := range v.Len() {
			out = append(out, leaves(v.Index(i), fmt.Sprintf("%s[%d]", path, i))...)
		}
		return out
	}
	return []leaf{{path, v}}
}

// isNamed reports whether the field is the name of a unit or a route, which
// is a cell.
func isNamed(v reflect.Value, name string) bool {
	return name == "Name" && (v.Type() == reflect.TypeFor[profile.Unit]() || v.Type() == reflect.TypeFor[Route]())
}

// change makes the cell another one of its kind.
func (l leaf) change() {
	v := l.value
	limits := map[reflect.Type]uint64{
		reflect.TypeFor[Operator](): uint64(len(operatorSigns)), reflect.TypeFor[Standing](): uint64(len(standingWords)),
		reflect.TypeFor[Datum](): uint64(len(datumWords)), reflect.TypeFor[Kind](): uint64(len(kindWords)),
		reflect.TypeFor[Fact](): uint64(len(factWords)), reflect.TypeFor[Property](): uint64(len(propertyWords)),
		reflect.TypeFor[Measure](): uint64(len(measureWords)), reflect.TypeFor[Blow](): uint64(len(blowWords)),
	}
	switch v.Kind() {
	case reflect.Float64:
		v.SetFloat(v.Float() + 1)
	case reflect.String:
		v.SetString(v.String() + "x")
	case reflect.Int:
		v.SetInt(v.Int() + 1)
	case reflect.Bool:
		v.SetBool(!v.Bool())
	case reflect.Uint8:
		v.SetUint((v.Uint() + 1) % limits[v.Type()])
	default:
		panic("no change for " + v.Type().String())
	}
}

// TestUnitFactors holds the factor of every unit of a table against the
// definition of the foot and the pound (international foot 0.3048 m, pound
// 0.45359237 kg, standard gravity 9.80665 m/s²: 1 psf = 0.04788025898 kPa).
func TestUnitFactors(t *testing.T) {
	want := map[string]float64{"m": 1, "ft": 0.3048, "m/s": 1, "ft/s": 0.3048, "kPa": 1, "psf": 0.04788025898, "%": 1, "": 1,
		"ksf": 47.88025898034, "MPa": 1000}
	check := func(id string, u profile.Unit) {
		if f, ok := want[u.Name]; !ok || !(u.Factor-f < 1e-11 && f-u.Factor < 1e-11) {
			t.Errorf("%s: unit %q has the factor %v", id, u.Name, u.Factor)
		}
	}
	for _, c := range All() {
		check(c.ID, c.Unit)
		check(c.ID, c.Length)
		if c.SuUnit.Name != "" {
			check(c.ID, c.SuUnit)
		}
		for _, k := range c.Conditions {
			for _, l := range k.Limits {
				check(c.ID, l.Unit)
			}
		}
	}
}

// TestTextStatesLimits looks for each limit of a condition in its words, so
// that what is listed as not assessed names the printed limits.
func TestTextStatesLimits(t *testing.T) {
	for _, c := range All() {
		for _, k := range c.Conditions {
			for _, l := range k.Limits {
				for _, b := range []Limit{l.Range.Lower, l.Range.Upper} {
					if b.Op != Open && !strings.Contains(k.Text, number(b.Value)) {
						t.Errorf("%s, %s: %q does not state %s", c.ID, k.ID, k.Text, l)
					}
				}
				if !strings.Contains(k.Text, l.Unit.Name) {
					t.Errorf("%s, %s: %q does not state the unit of %s", c.ID, k.ID, k.Text, l)
				}
			}
		}
	}
}

// TestCodesAreComplete looks for what every report prints of a code.
func TestCodesAreComplete(t *testing.T) {
	previous := ""
	for _, c := range All() {
		if c.ID <= previous {
			t.Errorf("%s comes after %s", c.ID, previous)
		}
		previous = c.ID
		for name, text := range map[string]string{"title": c.Title, "edition": c.Edition, "region": c.Region, "clause": c.Clause,
			"table": c.Table, "source": c.Source, "parameter": c.Parameter, "depth": c.DepthText, "correlated": c.Correlated} {
			if text == "" {
				t.Errorf("%s has no %s", c.ID, name)
			}
		}
		weakest := max(Checked, c.AdoptionStanding)
		for _, b := range c.Bands {
			weakest = max(weakest, b.Standing)
			if b.Name == "" {
				t.Errorf("%s: class %s has no name", c.ID, b.Class)
			}
		}
		if c.Standing != weakest {
			t.Errorf("%s stands as %s, its weakest row is %s", c.ID, c.Standing, weakest)
		}
		ids := map[string]bool{}
		for _, k := range c.Conditions {
			if ids[k.ID] || k.Text == "" || k.Clause == "" {
				t.Errorf("%s: condition %q is there twice, or has no text or clause", c.ID, k.ID)
			}
			ids[k.ID] = true
			if k.Class != "" && c.band(k.Class) < 0 {
				t.Errorf("%s: %s leads to %s, which is no row", c.ID, k.ID, k.Class)
			}
			if k.Fact != StiffGround && k.Fact != Described && k.ID != strings.ReplaceAll(k.Fact.String(), " ", "-") {
				t.Errorf("%s: condition %q asks for %q", c.ID, k.ID, k.Fact)
			}
			for _, class := range append(append([]string{}, k.Only...), k.Bars...) {
				if c.band(class) < 0 {
					t.Errorf("%s: %s names %s, which is no row", c.ID, k.ID, class)
				}
			}
		}
		if c.Twin.Unit.Name != "" && len(c.Twin.Bounds) != len(c.bounds()) {
			t.Errorf("%s: the twin has %d bounds, the table %d", c.ID, len(c.Twin.Bounds), len(c.bounds()))
		}
	}
}

func TestFind(t *testing.T) {
	for _, c := range All() {
		if found, err := Find(c.ID); found != c || err != nil {
			t.Errorf("Find(%q) is %v, %v", c.ID, found, err)
		}
	}
	for id, want := range map[string]string{
		"asce-7-61": `no code is called "asce-7-61"; did you mean "asce-7-16"`,
		"ec8":       `no code is called "ec8"; did you mean "ec8-2004"`,
		"NTC":       `no code is called "NTC"; did you mean "ntc-2008"`,
		"zzz":       `no code is called "zzz"`,
		"EC8-2004":  `no code is called "EC8-2004"; did you mean "ec8-2004"`,
		"nbcc2015":  `no code is called "nbcc2015"; did you mean "nbcc-2015"`,
		"":          `no code is called ""`,
	} {
		c, err := Find(id)
		if c != nil || err == nil || err.Error() != want {
			t.Errorf("Find(%q) is %v, %v; want %s", id, c, err, want)
		}
	}
}

// TestAllIsACopy sees to it that a caller who changes the slice changes
// nothing for the next.
func TestAllIsACopy(t *testing.T) {
	first := All()
	first[0] = nil
	if All()[0] == nil {
		t.Error("a change of the slice of All changed the codes")
	}
}

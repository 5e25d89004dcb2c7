package open

import (
	"errors"
	"reflect"
	"slices"
	"testing"

	"shearbook/profile"
)

// A file refuses each option that it has no use for, and takes the others.
func TestRefuse(t *testing.T) {
	all := map[string]Options{
		"a map names columns of tables, AGS4 and LAS files":           {Map: []string{"Vs=VS"}},
		"a step averages the samples of a LAS file":                   {Step: 1},
		"bounds of layers are for the samples of a LAS file":          {Bounds: []float64{1}},
		"a log datum is for the depths of a LAS file":                 {LogDatum: 0.1},
		"carrying up is for the first reading of an AGS4 or LAS file": {CarryUp: 4},
		"N60 chooses blow counts of an AGS4 file":                     {N60: true},
		"all holes are of an AGS4 file":                               {AllHoles: true},
	}
	for _, c := range []struct{ data, what, takes string }{
		{table, "a table of layers", "m"},
		{logAGS, "an AGS4 file", "mcNa"},
		{logLAS, "a LAS file", "msblc"},
		{siteXML, "a SiteXML file", ""},
		{ownJSON, "a file of our own JSON", ""},
	} {
		for says, opt := range all {
			opt.Units = "ft, ft/s"
			_, err := Bytes("f", []byte(c.data), opt)
			want := "f: " + says + "; this is " + c.what
			letter := says[:1]
			switch says[2:5] {
			case "map":
				letter = "m"
			case "ste":
				letter = "s"
			case "log":
				letter = "l"
			case "l h":
				letter = "a"
			}
			takes := slices.Contains([]byte(c.takes), letter[0])
			if refused := err != nil && err.Error() == want; refused == takes {
				t.Errorf("%s: %s: %v", c.what, says, err)
			}
		}
	}
	_, err := Bytes("f", []byte("PK\x03\x04rest"), Options{Step: 1})
	wantFault(t, err, "f: a step averages the samples of a LAS file; this is a workbook")
	_, err = Bytes("f", []byte(table), Options{Step: 1, N60: true})
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) != 2 {
		t.Errorf("got %v", err)
	}
}

// Every option reaches the reader that has a use for it.
func TestOptionsReach(t *testing.T) {
	const log = "~V\nVERS. 2.0 :\n~C\nDEPT.M :\nVS.M/S :\nGR.M/S :\n~A\n8 200 150\n9 300 150\n10 400 150\n11 500 150\n"
	for name, c := range map[string]struct {
		opt    Options
		layers int
		vs     float64
	}{
		// Bounds at 8.5, 9.5 and 10.5 m; the last reaches 0.5 m below 11 m.
		"carry up": {Options{CarryUp: 10}, 4, 200},
		"map":      {Options{CarryUp: 10, Map: []string{"Vs=GR"}}, 4, 150},
		// 0 to 8.5 m at 200 m/s and the metre to 9.5 m at 300 m/s: 9.5 / (8.5/200 + 1/300).
		"bounds": {Options{CarryUp: 10, Bounds: []float64{9.5}}, 2, 9.5 / (8.5/200 + 1.0/300)},
		// Ends at 4, 8, 11.5 m.
		"step": {Options{CarryUp: 10, Step: 4}, 3, 200},
		// Depths from 7 m above ground: the first sample stands at 1 m.
		"datum": {Options{LogDatum: 7}, 4, 200},
	} {
		profiles, err := Bytes("a.las", []byte(log), c.opt)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if p := &profiles[0]; len(p.Layers) != c.layers || !near(p.Layers[0].Vs, c.vs) {
			t.Errorf("%s: %d layers, the first of %v m/s; want %d of %v", name, len(p.Layers), p.Layers[0].Vs, c.layers, c.vs)
		}
	}
	const holes = logAGS + "\r\n\"GROUP\",\"ISPT\"\r\n\"HEADING\",\"LOCA_ID\",\"ISPT_TOP\",\"ISPT_NVAL\",\"ISPT_N60\"\r\n\"UNIT\",\"\",\"m\",\"\",\"\"\r\n" +
		"\"DATA\",\"B\",\"1.00\",\"10\",\"15\"\r\n\"DATA\",\"B\",\"2.00\",\"10\",\"15\"\r\n"
	profiles, err := Bytes("a.ags", []byte(holes), Options{AllHoles: true})
	if err != nil || len(profiles) != 2 || profiles[0].Layers[0].N != 10 {
		t.Errorf("all holes: %+v, %v", profiles, err)
	}
	profiles, err = Bytes("a.ags", []byte(holes), Options{AllHoles: true, N60: true})
	if err != nil || profiles[0].Layers[0].N != 15 {
		t.Errorf("N60: %+v, %v", profiles, err)
	}
	profiles, err = Bytes("a.csv", []byte("oben (m),unten (m),v\n0,5,200\n"), Options{Map: []string{"top=oben", "bottom=unten", "Vs=v [ft/s]"}})
	if err != nil || !near(profiles[0].Layers[0].Vs, 200*profile.Foot) {
		t.Errorf("map of a table: %+v, %v", profiles, err)
	}
}

func near(a, b float64) bool { return a-b < 1e-9*b && b-a < 1e-9*b }

// Options differ in their keys if they differ in any field.
func TestKey(t *testing.T) {
	seen := map[string]bool{(&Options{}).Key(): true}
	fields := reflect.TypeFor[Options]()
	for i := range fields.NumField() {
		var o Options
		switch f := reflect.ValueOf(&o).Elem().Field(i); f.Kind() {
		case reflect.String:
			f.SetString("m")
		case reflect.Float64:
			f.SetFloat(1)
		case reflect.Bool:
			f.SetBool(true)
		case reflect.Slice:
			f.Set(reflect.MakeSlice(f.Type(), 1, 1))
		case reflect.Struct:
			o.Correlate.UnitWeight = 18
		default:
			t.Fatalf("a field of kind %v", f.Kind())
		}
		if seen[o.Key()] {
			t.Errorf("%+v has the key of another", o)
		}
		seen[o.Key()] = true
	}
}

package spreadsheet

import (
	"errors"
	"testing"

	"shearbook/profile"
)

// A mapping names columns in any table of the workbook; another table may lack
// them.
func TestMap(t *testing.T) {
	data := workbook(t, []string{"A", "B"}, cells{
		"A!B2": line("von (m)", "bis (m)", "speed"), "A!B3": line(0, 5, 180), "A!B4": line(5, 9, 260),
		"B!A1": line("top_m", "bottom_m", "vs_mps"), "B!A2": line(0, 5, 200),
	}, nil)
	got, err := Read("a.xlsx", data, Options{Map: []string{"top=von", "bottom=bis", "Vs=speed [m/s]"}})
	must(t, err)
	if len(got) != 2 || got[0].Layers[1].Vs != 260 || got[0].Layers[1].Bottom != 9 || got[1].Layers[0].Vs != 200 {
		t.Errorf("got %+v", got)
	}
	if n := got[0].Notes; len(n) != 2 || n[0].ID != "mapped" || n[0].Text != `read as given: top from "von", bottom from "bis", Vs from "speed"` || n[1].ID != "units-given" {
		t.Errorf("notes %+v", n)
	}
}

// What is wrong is told at the row that looks like a header, with what to do.
func TestNoTable(t *testing.T) {
	for _, c := range []struct {
		rows       cells
		mapped     []string
		want, hint string
	}{
		{
			cells{"Sheet1!A1": "Ferry Road", "Sheet1!B3": line("from here (m)", "S speed (m/s)"), "Sheet1!B4": line(0, 180)}, nil,
			`a.xlsx:Sheet1!B3: no sheet holds a table of layers; the row most like a header: this does not look like a table of layers: no column of depth and none of Vs in "from here (m)", "S speed (m/s)"`,
			`is "S speed (m/s)" the shear-wave velocity, and "from here (m)" the top of each layer? then add --map 'Vs=S speed (m/s)' --map 'top=from here (m)', or ` +
				"`map: [\"Vs=S speed (m/s)\", \"top=from here (m)\"]` to the profile in a notebook",
		},
		{
			cells{"Sheet1!A1": line("top (m)", "bottom (m)", "speed (m/s)"), "Sheet1!A2": line(0, 5, 180)}, nil,
			`a.xlsx:Sheet1!A1: no sheet holds a table of layers; the row most like a header: no column of Vs in "top (m)", "bottom (m)", "speed (m/s)"`,
			`is "speed (m/s)" the shear-wave velocity? then add --map 'Vs=speed (m/s)', or ` + "`map: [\"Vs=speed (m/s)\"]` to the profile in a notebook",
		},
		{
			cells{"Sheet1!C2": line("Frequency (Hz)", "Phase velocity (m/s)"), "Sheet1!C3": line(10, 180)}, nil,
			`a.xlsx:Sheet1!C2: this is a dispersion curve, not a profile: "Frequency (Hz)", "Phase velocity (m/s)"`,
			"give the layers and velocities that its inversion found, as top_m,bottom_m,vs_mps",
		},
		{
			cells{"Sheet1!A1": line("offset (m)", "first arrival (ms)"), "Sheet1!A2": line(10, 18)}, nil,
			`a.xlsx:Sheet1!A1: these are first-arrival times, not a profile: "offset (m)", "first arrival (ms)"`,
			"give the layers and velocities of their interpretation, as top_m,bottom_m,vs_mps",
		},
		{
			cells{"Sheet1!A1": line("top (m)", "bottom (m)", "speed (m/s)", "vs (m/s)"), "Sheet1!A2": line(0, 5, 180, 190)}, []string{"Vp=sped"},
			`a.xlsx: mapping of Vp: there is no column "sped"`, "name a heading as the file has it",
		},
	} {
		_, err := Read("a.xlsx", workbook(t, one, c.rows, nil), Options{Map: c.mapped})
		var faults profile.Faults
		if !errors.As(err, &faults) || len(faults) != 1 || faults[0].Error() != c.want || faults[0].Hint != c.hint {
			t.Errorf("got  %v\n%+v\nwant %s\nhint %s", err, faults, c.want, c.hint)
		}
	}
}

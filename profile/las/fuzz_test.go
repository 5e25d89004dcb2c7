package las

import (
	"bytes"
	"errors"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// FuzzRead looks for input that Read neither reads nor refuses in order: an
// error is Faults with a text each, inside the file and in its order; without
// one the profile is valid, and averaging keeps its travel time.
func FuzzRead(f *testing.F) {
	files, err := filepath.Glob("testdata/*/*.txtar")
	if err != nil || len(files) == 0 {
		f.Fatalf("no fixtures: %v", err)
	}
	for _, file := range files {
		archive, err := txtar.ParseFile(file)
		if err != nil {
			f.Fatal(err)
		}
		for _, a := range archive.Files {
			if strings.HasSuffix(a.Name, ".las") {
				f.Add(a.Data, "", 0.0)
			}
		}
	}
	f.Add([]byte(small), "m, us/ft", 1.5)
	f.Fuzz(func(t *testing.T, data []byte, units string, step float64) {
		if step != 0 && !(step > 1e-2) {
			step = 1
		}
		profiles, err := Read("fuzz.las", data, Options{Units: units, Step: step})
		if err != nil {
			checkFaults(t, data, err)
			return
		}
		checkProfile(t, profiles)
		cells, err := Read("fuzz.las", data, Options{Units: units})
		if err != nil {
			return // a cell may break a limit that the average keeps
		}
		a, b := seconds(profiles[0].Layers), seconds(cells[0].Layers)
		if math.Abs(a-b) > 1e-9*b {
			t.Errorf("travel time %v of the averages, %v of the samples", a, b)
		}
	})
}

func seconds(layers []profile.Layer) float64 {
	sum := 0.0
	for _, l := range layers {
		sum += l.Thickness() / l.Vs
	}
	return sum
}

func checkFaults(t *testing.T, data []byte, err error) {
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) == 0 || len(faults) > profile.MaxFaults+2 {
		t.Fatalf("error %v", err)
	}
	lines := 1 + bytes.Count(data, []byte("\n")) + bytes.Count(data, []byte("\r"))
	for i, f := range faults {
		if f.Text == "" || f.Place.Line < 0 || f.Place.Line > 2*lines || f.Place.Column > 2*len(data)+1 {
			t.Errorf("fault %+v in %d lines", f, lines)
		}
		if i > 0 && f.Place.Line > 0 && f.Place.Line < faults[i-1].Place.Line {
			t.Errorf("fault %v after %v", f, faults[i-1])
		}
	}
}

func checkProfile(t *testing.T, profiles []profile.Profile) {
	if len(profiles) != 1 {
		t.Fatalf("%d profiles", len(profiles))
	}
	p := &profiles[0]
	if faults := profile.Validate(p); len(faults) > 0 || p.Name == "" {
		t.Errorf("profile %q: %v", p.Name, faults)
	}
	for _, row := range p.Reading.Rows {
		if len(row.Split()) != len(p.Reading.Columns) {
			t.Errorf("row %q in %d columns", row.Cells, len(p.Reading.Columns))
		}
	}
	for _, n := range p.Notes {
		if n.ID == "" || n.Text == "" {
			t.Errorf("note %+v", n)
		}
	}
}

package delimited

import (
	"bytes"
	"errors"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// FuzzRead looks for input that Read neither reads nor refuses in order: an
// error is Faults with a text each, inside the file and in its order; without
// one every profile is valid, has a name of its own, and comes back from
// Write as it was.
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
		for _, c := range cases(archive) {
			f.Add(c.data, c.units)
		}
	}
	f.Add([]byte("\xff\xfet\x00o\x00p\x00"), "")
	f.Add([]byte("#name:0\t0\nz,vs\n0,1"), "m,m/s")
	f.Add([]byte("#operator:0\t0\n,Bottom ',vs mps\n,,10"), "")
	f.Add([]byte("0"), strings.Repeat("0,", 23)) // no more faults of units than are told
	f.Add([]byte("top_m,vs_mps\r0,1\r5,\xfc"), "m")
	f.Fuzz(func(t *testing.T, data []byte, units string) {
		profiles, err := Read("fuzz.csv", data, Options{Units: units})
		if err != nil {
			checkFaults(t, data, err)
			return
		}
		checkProfiles(t, profiles)
	})
}

func checkFaults(t *testing.T, data []byte, err error) {
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) == 0 || len(faults) > MaxFaults+2 {
		t.Fatalf("error %v", err)
	}
	lines := 1 + bytes.Count(data, []byte("\n")) + bytes.Count(data, []byte("\r"))
	for i, f := range faults {
		if f.Text == "" || f.Place.Line < 0 || f.Place.Line > lines || f.Place.Column > len(data)+1 {
			t.Errorf("fault %+v in %d lines", f, lines)
		}
		if i > 0 && f.Place.Line > 0 && f.Place.Line < faults[i-1].Place.Line {
			t.Errorf("fault %v after %v", f, faults[i-1])
		}
	}
}

func checkProfiles(t *testing.T, profiles []profile.Profile) {
	if len(profiles) == 0 {
		t.Fatal("neither profiles nor faults")
	}
	for i := range profiles {
		p := &profiles[i]
		if faults := profile.Validate(p); len(faults) > 0 {
			t.Errorf("profile %q: %v", p.Name, faults)
		}
		if len(p.Reading.Rows) != len(p.Layers) {
			t.Errorf("%d rows of %d layers", len(p.Reading.Rows), len(p.Layers))
		}
		for _, row := range p.Reading.Rows {
			if len(row.Split()) != len(p.Reading.Columns) {
				t.Errorf("row %q in %d columns", row.Cells, len(p.Reading.Columns))
			}
		}
	}
	again, err := Read("again.csv", written(t, profiles), Options{})
	if err != nil {
		t.Fatalf("written and read: %v\n%s", err, written(t, profiles))
	}
	equal(t, "written and read", again, profiles, asWritten)
}

// FuzzMap does the same with a mapping, an item a line.
func FuzzMap(f *testing.F) {
	for _, file := range []string{"testdata/shapes/mapping.txtar", "testdata/faults/mapping.txtar", "testdata/faults/otherkinds.txtar", "testdata/shapes/positions.txtar", "testdata/faults/positions.txtar"} {
		archive, err := txtar.ParseFile(file)
		if err != nil {
			f.Fatal(err)
		}
		for _, c := range cases(archive) {
			f.Add(c.data, c.mapped)
		}
	}
	f.Fuzz(func(t *testing.T, data []byte, mapped string) {
		c := fixture{mapped: mapped}
		if _, err := ParseMap(c.maps()); err != nil {
			return
		}
		profiles, err := Read("fuzz.csv", data, Options{Map: c.maps()})
		if err != nil {
			checkFaults(t, data, err)
			return
		}
		checkProfiles(t, profiles)
	})
}

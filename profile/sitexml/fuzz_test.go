package sitexml

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
// one every profile is valid, and comes back from Write as it was.
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
			if strings.HasSuffix(a.Name, ".xml") {
				f.Add(a.Data)
			}
		}
	}
	f.Add([]byte("\xff\xfe<\x00a\x00"))
	f.Fuzz(func(t *testing.T, data []byte) {
		profiles, err := Read("fuzz.xml", data)
		if err != nil {
			checkFaults(t, data, err)
			return
		}
		checkProfiles(t, profiles)
	})
}

func checkFaults(t *testing.T, data []byte, err error) {
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) == 0 || len(faults) > profile.MaxFaults+2 {
		t.Fatalf("error %v", err)
	}
	lines := 1 + bytes.Count(data, []byte("\n")) + bytes.Count(data, []byte("\r"))
	for i, f := range faults {
		if f.Text == "" || f.Place.Line < 0 || f.Place.Line > lines || f.Place.Column > 2*len(data)+1 {
			t.Errorf("fault %+v in %d lines", f, lines)
		}
		if i > 0 && f.Place.Line > 0 && f.Place.Line < faults[i-1].Place.Line {
			t.Errorf("fault %v after %v", f, faults[i-1])
		}
	}
}

// checkProfiles also writes each profile alone, with a place and a date where
// it has none.
func checkProfiles(t *testing.T, profiles []profile.Profile) {
	if len(profiles) == 0 {
		t.Fatal("neither profiles nor faults")
	}
	for _, p := range profiles {
		if faults := profile.Validate(&p); len(faults) > 0 {
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
		if !p.Position.Latitude.Known || !p.Position.Longitude.Known {
			p.Position = profile.Position{Latitude: profile.Known(1), Longitude: profile.Known(2)}
		}
		data := written(t, []profile.Profile{p}, Publication{Created: "2026-03-02"})
		if problems := check(data); len(problems) > 0 {
			t.Errorf("not of the form: %v\n%s", problems, data)
		}
		again, err := Read("again.xml", data)
		if err != nil {
			t.Fatalf("written and read: %v\n%s", err, data)
		}
		p.Notes = nil
		if lost := Losses(&p); len(lost) == 0 {
			equal(t, "written and read", again, []profile.Profile{p}, asWritten)
		}
	}
}

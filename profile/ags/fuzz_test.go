package ags

import (
	"bytes"
	"errors"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// FuzzRead looks for input that Read neither reads nor refuses in order: an
// error is Faults with a text each, inside the file and in its order; without
// one every profile is valid, has a name of its own and an appendix in order,
// and comes back from Write, by the rules of AGS4, as it was.
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
			f.Add(c.data, c.mapped)
		}
	}
	f.Add([]byte("\"GROUP\",\"PROJ\"\r\"HEADING\",\"PROJ_ID\"\r\"DATA\",\"\xfc\""), "")
	f.Fuzz(func(t *testing.T, data []byte, mapped string) {
		opt := (&fixture{mapped: mapped}).options()
		profiles, err := Read("fuzz.ags", data, opt)
		if err != nil {
			checkFaults(t, data, err)
		} else {
			checkProfiles(t, profiles)
		}
		holes, err := ReadHoles("fuzz.ags", data, opt)
		if err == nil {
			checkHoles(t, holes)
		} else {
			checkFaults(t, data, err)
		}
	})
}

func checkFaults(t *testing.T, data []byte, err error) {
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) == 0 || len(faults) > profile.MaxFaults+2 {
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
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		if faults := profile.Validate(p); len(faults) > 0 {
			t.Errorf("profile %q: %v", p.Name, faults)
		}
		if names[p.Name] {
			t.Errorf("two profiles are called %q", p.Name)
		}
		names[p.Name] = true
		line := 0
		for _, row := range p.Reading.Rows {
			if len(row.Split()) != len(p.Reading.Columns) || row.Line <= line {
				t.Errorf("row %q of line %d after %d, in %d columns", row.Cells, row.Line, line, len(p.Reading.Columns))
			}
			line = row.Line
		}
	}
	plain, err := plainProfiles(profiles)
	if err != nil {
		return // two names that are one in ASCII
	}
	for _, edition := range []string{"4.1.1", "4.2"} {
		data := written(t, profiles, WriteOptions{Edition: edition, Date: "2026-03-31"})
		if broken := brokenRules(data); len(broken) > 0 {
			t.Fatalf("%q\n%s", broken, data)
		}
		again, err := Read("again.ags", data, Options{})
		if err != nil {
			t.Fatalf("written and read: %v\n%s", err, data)
		}
		for i := range again {
			if !equal(&again[i], &plain[i]) {
				t.Fatalf("written and read (-want +got)\n%s\n%s", cmp.Diff(plain[i], again[i], asWritten), data)
			}
		}
	}
}

func checkHoles(t *testing.T, holes []Hole) {
	for i := range holes {
		h := &holes[i]
		for k, s := range h.Strata {
			if !(s.Top < s.Bottom) || k > 0 && s.Top < h.Strata[k-1].Bottom {
				t.Errorf("stratum %+v in %q", s, h.Name)
			}
		}
		for _, x := range h.Tests {
			if !(x.Value >= 0 && x.Depth >= 0 && x.Depth <= profile.MaxDepth) || x.Line == 0 || strings.TrimSpace(x.Heading) == "" {
				t.Errorf("test %+v in %q", x, h.Name)
			}
		}
		for _, c := range h.Cones {
			for k, x := range c.Readings {
				if !(x.Depth >= 0) || k > 0 && x.Depth < c.Readings[k-1].Depth {
					t.Errorf("reading %+v in %q", x, h.Name)
				}
			}
		}
	}
}

package json

import (
	"bytes"
	stdjson "encoding/json"
	"errors"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// FuzzRead looks for input that Read neither reads nor refuses in order: an
// error is Faults with a text each, inside the file and in its order; without
// one every profile is valid and comes back from Write as it was. What
// encoding/json finds valid the scanner can follow to its end, and nothing
// else.
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
			if strings.HasSuffix(a.Name, ".json") {
				f.Add(a.Data)
			}
		}
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		profiles, err := Read("fuzz.json", data)
		checkSyntax(t, data, err)
		if err != nil {
			checkFaults(t, data, err)
			return
		}
		checkProfiles(t, profiles)
	})
}

// checkSyntax compares with encoding/json what JSON is, where the file is one
// object in UTF-8 and not too deep.
func checkSyntax(t *testing.T, data []byte, err error) {
	text := bytes.TrimPrefix(data, []byte("\ufeff"))
	if !bytes.HasPrefix(bytes.TrimLeft(text, " \t\r\n"), []byte("{")) || !utf8.Valid(text) {
		return
	}
	var r reader
	r.read(data)
	if r.dead == stdjson.Valid(text) && (err == nil || !strings.Contains(err.Error(), "inside one another")) {
		t.Errorf("encoding/json finds it valid: %v; faults %v", stdjson.Valid(text), err)
	}
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
	data := written(t, profiles)
	again, err := Read("again.json", data)
	if err != nil {
		t.Fatalf("written and read: %v\n%s", err, data)
	}
	equal(t, "written and read", portable(again), portable(profiles), asWritten)
}

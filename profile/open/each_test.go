package open

import (
	"errors"
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// FuzzEach holds Each against Bytes: where a file has no fault both give the
// same profiles; where it has, Each refuses the file, or has a profile at fault,
// and every other is one that profile.Validate takes and has a name of its own.
func FuzzEach(f *testing.F) {
	for _, pattern := range []string{"../json/testdata/*/*.txtar", "../ags/testdata/*/*.txtar", "../sitexml/testdata/*/*.txtar"} {
		files, err := filepath.Glob(pattern)
		if err != nil || len(files) == 0 {
			f.Fatalf("no fixtures: %v", err)
		}
		for _, file := range files {
			archive, err := txtar.ParseFile(file)
			if err != nil {
				f.Fatal(err)
			}
			for _, a := range archive.Files {
				f.Add(a.Data)
			}
		}
	}
	f.Fuzz(func(t *testing.T, data []byte) { checkEach(t, data) })
}

func checkEach(t *testing.T, data []byte) {
	profiles, whole := Bytes("f", data, Options{})
	found, err := Each("f", data, Options{})
	if whole == nil {
		if diff := cmp.Diff(profile.FoundOf(profiles), found, cmp.AllowUnexported(profile.Profile{})); err != nil || diff != "" {
			t.Errorf("%v\n%s", err, diff)
		}
		return
	}
	if err != nil {
		var faults profile.Faults
		if !errors.As(err, &faults) {
			t.Errorf("no faults: %v", err)
		}
		return
	}
	bad, names := 0, map[string]bool{}
	for _, p := range found {
		switch {
		case (p.Profile == nil) != (len(p.Faults) > 0):
			t.Errorf("a profile and faults, or neither: %+v", p)
		case p.Profile == nil:
			bad++
		case len(profile.Validate(p.Profile)) > 0 || names[p.Name] || p.Name != p.Profile.Name:
			t.Errorf("%+v", p)
		default:
			names[p.Name] = true
		}
	}
	if bad == 0 {
		t.Errorf("no profile at fault, but %v", whole)
	}
}

package sitexml

import (
	"errors"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"shearbook/profile"
)

// update rewrites the expected parts of the fixtures; read them before they
// are kept.
var update = flag.Bool("update", false, "rewrite testdata")

// TestFixtures reads every file in testdata/*/*.txtar. An archive holds files
// x.xml, and in x.want what comes out: the profiles, or the messages as they
// are shown to people.
func TestFixtures(t *testing.T) {
	files, err := filepath.Glob("testdata/*/*.txtar")
	if err != nil || len(files) == 0 {
		t.Fatalf("no fixtures: %v", err)
	}
	for _, file := range files {
		t.Run(filepath.Base(file), func(t *testing.T) { testArchive(t, file) })
	}
}

func testArchive(t *testing.T, file string) {
	archive, err := txtar.ParseFile(file)
	if err != nil {
		t.Fatal(err)
	}
	refused := strings.Contains(file, "faults")
	want := map[string]string{}
	for _, f := range archive.Files {
		want[f.Name] = string(f.Data)
	}
	var rewritten []txtar.File
	for _, f := range archive.Files {
		name, is := strings.CutSuffix(f.Name, ".xml")
		if !is {
			continue
		}
		got := ""
		t.Run(name, func(t *testing.T) {
			profiles, err := Read(f.Name, f.Data)
			if refused != (err != nil) {
				t.Errorf("error = %v", err)
			}
			got = describe(profiles, err)
			if diff := cmp.Diff(want[name+".want"], got); diff != "" && !*update {
				t.Errorf("(-want +got)\n%s", diff)
			}
		})
		rewritten = append(rewritten, f, txtar.File{Name: name + ".want", Data: []byte(got)})
	}
	if *update {
		archive.Files = rewritten
		if err := os.WriteFile(file, txtar.Format(archive), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

// describe is what came out of Read, in words.
func describe(profiles []profile.Profile, err error) string {
	var b strings.Builder
	var faults profile.Faults
	switch {
	case errors.As(err, &faults):
		for _, f := range faults {
			fmt.Fprintln(&b, f.Error())
			if f.Hint != "" {
				fmt.Fprintln(&b, "hint:", f.Hint)
			}
		}
	case err != nil:
		fmt.Fprintln(&b, "not faults:", err)
	}
	for i := range profiles {
		describeProfile(&b, &profiles[i])
	}
	return b.String()
}

func describeProfile(b *strings.Builder, p *profile.Profile) {
	fmt.Fprintf(b, "profile %s\n", p.Name)
	fmt.Fprintf(b, "  %+v\n  %+v\n", p.Survey, p.Position)
	for i := range p.Layers {
		describeLayer(b, &p.Layers[i])
	}
	for _, n := range p.Notes {
		fmt.Fprintf(b, "  note %s at %d:%d: %s\n", n.ID, n.Place.Line, n.Place.Column, n.Text)
	}
	for _, m := range p.Reading.Metadata {
		fmt.Fprintf(b, "  line %d: %s: %s\n", m.Line, m.Key, m.Value)
	}
	for _, c := range p.Reading.Columns {
		fmt.Fprintf(b, "  | %s [%s] %s", c.Heading, c.Unit, c.Quantity)
	}
	b.WriteString("\n")
	for _, row := range p.Reading.Rows {
		fmt.Fprintf(b, "  %d | %s\n", row.Line, strings.Join(row.Split(), " | "))
	}
}

func describeLayer(b *strings.Builder, l *profile.Layer) {
	bottom := "…"
	if !math.IsInf(l.Bottom, 1) {
		bottom = fmt.Sprintf("%.9g", l.Bottom)
	}
	fmt.Fprintf(b, "  %d:%d: %.9g–%s m: Vs %.9g", l.Line, l.Column, l.Top, bottom, l.Vs)
	if l.VsBottom != 0 {
		fmt.Fprintf(b, "→%.9g", l.VsBottom)
	}
	for _, o := range []struct {
		given profile.Given
		name  string
		value float64
	}{{profile.GivenVp, "Vp", l.Vp}, {profile.GivenDensity, "ρ", l.Density}, {profile.GivenSigma, "σ", l.SigmaLnVs}} {
		if l.Has(o.given) {
			fmt.Fprintf(b, ", %s %.9g", o.name, o.value)
		}
	}
	b.WriteString("\n")
}

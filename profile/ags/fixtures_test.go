package ags

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
// x.ags, for some the mappings given for them in x.map, a line each, and in
// x.want what comes out: the profiles, or the messages as they are shown to
// people. The sites in them are invented.
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
	var rewritten []txtar.File
	for _, c := range cases(archive) {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read(c.name+".ags", c.data, c.options())
			if refused != (err != nil) {
				t.Errorf("error = %v", err)
			}
			got := describe(profiles, err)
			if diff := cmp.Diff(c.want, got); diff != "" && !*update {
				t.Errorf("(-want +got)\n%s", diff)
			}
			c.want = got
		})
		rewritten = append(rewritten, c.files()...)
	}
	if *update {
		archive.Files = rewritten
		if err := os.WriteFile(file, txtar.Format(archive), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

// fixture is one file of an archive. Its lines end in LF there, and in CRLF
// when it is read.
type fixture struct {
	name, mapped, want string
	text, data         []byte
}

func (c *fixture) options() Options {
	opt := Options{N60: strings.HasSuffix(c.name, "-n60")}
	opt.Untimed = strings.HasSuffix(c.name, "-untimed")
	if strings.HasSuffix(c.name, "-carried") {
		opt.CarryUp = 20
	}
	for line := range strings.Lines(c.mapped) {
		opt.Map = append(opt.Map, strings.TrimSpace(line))
	}
	return opt
}

func cases(archive *txtar.Archive) []*fixture {
	var list []*fixture
	byName := map[string]*fixture{}
	for _, f := range archive.Files {
		name, kind, _ := strings.Cut(f.Name, ".")
		c := byName[name]
		if c == nil {
			c = &fixture{name: name}
			byName[name] = c
			list = append(list, c)
		}
		switch kind {
		case "ags":
			c.text, c.data = f.Data, []byte(strings.ReplaceAll(string(f.Data), "\n", "\r\n"))
		case "map":
			c.mapped = string(f.Data)
		case "want":
			c.want = string(f.Data)
		}
	}
	return list
}

func (c *fixture) files() []txtar.File {
	files := []txtar.File{{Name: c.name + ".ags", Data: c.text}}
	if c.mapped != "" {
		files = append(files, txtar.File{Name: c.name + ".map", Data: []byte(c.mapped)})
	}
	return append(files, txtar.File{Name: c.name + ".want", Data: []byte(c.want)})
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
	s := p.Survey
	for _, field := range []struct {
		name, value string
	}{
		{"method", s.Method}, {"date", s.Date}, {"operator", s.Operator}, {"location", s.Location},
		{"basis", strings.TrimSuffix(s.Basis.String(), "not stated")},
		{"ground level", optionalText(s.GroundLevel)}, {"water table", optionalText(s.WaterTable)},
		{"depth reached", optionalText(profile.Optional{Value: s.DepthReached, Known: s.DepthReached > 0})},
		{"latitude", optionalText(p.Position.Latitude)}, {"longitude", optionalText(p.Position.Longitude)},
		{"easting", optionalText(p.Position.Easting)}, {"northing", optionalText(p.Position.Northing)},
		{"epsg", optionalText(profile.Optional{Value: float64(p.Position.EPSG), Known: p.Position.EPSG > 0})},
	} {
		if field.value != "" {
			fmt.Fprintf(b, "%s: %s\n", field.name, field.value)
		}
	}
	for i := range p.Layers {
		describeLayer(b, &p.Layers[i])
	}
	for _, n := range p.Notes {
		fmt.Fprintf(b, "note %s at %d:%d: %s\n", n.ID, n.Place.Line, n.Place.Column, n.Text)
	}
}

func optionalText(x profile.Optional) string {
	if !x.Known {
		return ""
	}
	return number(x.Value)
}

// number is a number to 9 significant digits.
func number(x float64) string { return fmt.Sprintf("%.9g", x) }

func describeLayer(b *strings.Builder, l *profile.Layer) {
	bottom := "…"
	if !math.IsInf(l.Bottom, 1) {
		bottom = number(l.Bottom)
	}
	fmt.Fprintf(b, "%d:%d: %s–%s m: Vs %s", l.Line, l.Column, number(l.Top), bottom, number(l.Vs))
	if l.VsBottom != 0 {
		fmt.Fprintf(b, "→%s", number(l.VsBottom))
	}
	for _, o := range []struct {
		given profile.Given
		name  string
		value float64
	}{
		{profile.GivenVp, "Vp", l.Vp}, {profile.GivenDensity, "ρ", l.Density}, {profile.GivenSigma, "σ", l.SigmaLnVs},
		{profile.GivenN, "N", l.N}, {profile.GivenSu, "su", l.Su}, {profile.GivenPI, "PI", l.PI},
		{profile.GivenWaterContent, "w", l.WaterContent},
	} {
		if l.Has(o.given) {
			fmt.Fprintf(b, ", %s %s", o.name, number(o.value))
		}
	}
	if l.Refusal {
		b.WriteString(", refusal")
	}
	if l.Basis != profile.BasisNotStated {
		b.WriteString(", " + l.Basis.String())
	}
	if l.Soil != "" {
		b.WriteString(", " + l.Soil)
	}
	b.WriteString("\n")
}

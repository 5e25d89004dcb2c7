package ags

import (
	"bytes"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shearbook/profile"
)

// asWritten leaves out what Write does not write, and places.
var asWritten = cmp.Options{
	cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"),
	cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column"),
}

var day = WriteOptions{Date: "2026-03-31"}

func written(t *testing.T, profiles []profile.Profile, opt WriteOptions) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, profiles, opt); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// random returns a profile with random layers and whatever else a profile
// may state.
func random(rnd *rand.Rand, name string) profile.Profile {
	p := profile.Profile{Name: name}
	if rnd.IntN(2) == 0 {
		p.Survey = profile.Survey{
			Method: `SASW, "two" spreads; wide`, Date: "2026-03-02", Operator: "Example: Crew", Location: "Quay # 4",
			Basis: profile.Inverted, DepthReached: 40 * rnd.Float64(),
			GroundLevel: profile.Known(float64(rnd.IntN(2000)-300) / 100), WaterTable: profile.Known(8 * rnd.Float64()),
		}
		p.Position = profile.Position{Latitude: profile.Known(-90 + 180*rnd.Float64()), Longitude: profile.Known(-180 + 360*rnd.Float64())}
		if rnd.IntN(2) == 0 {
			p.Position.Easting, p.Position.Northing = profile.Known(float64(rnd.IntN(1e8))/100), profile.Known(float64(-rnd.IntN(1e8))/100)
			p.Position.EPSG = rnd.IntN(2) * 27700
		}
	}
	z := 0.0
	for range 1 + rnd.IntN(12) {
		l := profile.Layer{Top: z, Bottom: z + 0.01 + 10*rnd.Float64(), Vs: 100 + 900*rnd.Float64()}
		z = l.Bottom
		for _, q := range quantityHeadings {
			if q.given != 0 && rnd.IntN(3) == 0 {
				*q.of(&l) = 3000 * (1 + rnd.Float64())
				l.Given |= q.given
			}
		}
		if rnd.IntN(4) == 0 {
			l.VsBottom = l.Vs + 100*rnd.Float64()
		}
		l.Refusal = rnd.IntN(5) == 0
		l.Basis = profile.Basis(rnd.IntN(4))
		if rnd.IntN(2) == 0 {
			l.Soil = `Clay, "stiff"; blue`
		}
		p.Layers = append(p.Layers, l)
	}
	if rnd.IntN(4) == 0 {
		p.NoVelocity = true
		for i := range p.Layers {
			l := &p.Layers[i]
			l.Vs, l.VsBottom, l.Vp, l.Given = 0, 0, 0, l.Given&^profile.GivenVp
		}
	}
	if last := &p.Layers[len(p.Layers)-1]; last.VsBottom == 0 && rnd.IntN(2) == 0 {
		last.Bottom = half
	}
	return p
}

// sampleProfiles are profiles of each form: a log, a seismic test, and two
// that AGS has no group for.
func sampleProfiles() []profile.Profile {
	measured := func(method string) profile.Survey {
		return profile.Survey{Method: method, Basis: profile.Measured}
	}
	log := profile.Profile{Name: "H1", Survey: measured("PS suspension logging"), Layers: []profile.Layer{
		{Top: 0, Bottom: 1.25, Vs: 140, Soil: "Firm clay", Vp: 1450, Given: profile.GivenVp},
		{Top: 1.25, Bottom: 1.75, Vs: 165.5, Soil: "Firm clay"},
		{Top: 1.75, Bottom: 2.25, Vs: 230, Soil: `Dense "blue" sand`},
	}}
	log.Survey.Date, log.Survey.Operator, log.Survey.GroundLevel = "2026-01-30", "Kestrel Logging", profile.Known(8.4)
	log.Position = profile.Position{Latitude: profile.Known(52.4875), Longitude: profile.Known(-1.8176), Easting: profile.Known(412300.25), Northing: profile.Known(287650.5), EPSG: 27700}
	cone := profile.Profile{Name: "H2", Survey: measured("seismic cone"), Layers: []profile.Layer{
		{Top: 0, Bottom: 1.2, Vs: 120.5, Vp: 400, Given: profile.GivenVp},
		{Top: 1.2, Bottom: 2.25, Vs: 180},
	}}
	waves := profile.Profile{Name: "L1", Survey: profile.Survey{Method: "MASW", Basis: profile.Inverted, DepthReached: 25, WaterTable: profile.Known(1.5)}, Layers: []profile.Layer{
		{Top: 0, Bottom: 3.333, Vs: 150, VsBottom: 170, Su: 25, Given: profile.GivenSu, Soil: "Silt"},
		{Top: 3.333, Bottom: half, Vs: 420, N: 45, Density: 2000, Given: profile.GivenN | profile.GivenDensity, Refusal: true, Basis: profile.Correlated},
	}}
	bare := profile.Profile{Name: "L2", Layers: []profile.Layer{{Top: 0, Bottom: 30, Vs: 300}}}
	return []profile.Profile{log, cone, waves, bare}
}

var half = math.Inf(1)

// Each profile goes into the groups that are meant for it.
func TestForms(t *testing.T) {
	for _, c := range []struct{ edition, want string }{
		{"4.0.4", "PROJ TRAN ABBR TYPE UNIT DICT LOCA GEOL VSPG VSPL"},
		{"4.1", "PROJ TRAN ABBR TYPE UNIT DICT LOCA GEOL WGPG WGPT VSPG VSPL"},
		{"", "PROJ TRAN ABBR TYPE UNIT DICT LOCA GEOL WGPG WGPT VSPG VSPL"},
		{"4.2", "PROJ TRAN ABBR TYPE UNIT DICT LOCA GEOL WGPG WGPT ISTG ISTA VSPG VSPL"},
	} {
		data := written(t, sampleProfiles(), WriteOptions{Edition: c.edition, Date: "2026-03-31"})
		var groups []string
		for line := range strings.Lines(string(data)) {
			if name, ok := strings.CutPrefix(line, `"GROUP","`); ok {
				groups = append(groups, name[:4])
			}
		}
		if got := strings.Join(groups, " "); got != c.want {
			t.Errorf("edition %q has %s, want %s", c.edition, got, c.want)
		}
		if broken := brokenRules(data); len(broken) > 0 {
			t.Errorf("edition %q breaks rules: %q", c.edition, broken)
		}
		back, err := Read("x.ags", data, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(sampleProfiles(), back, asWritten); diff != "" {
			t.Errorf("edition %q (-want +got)\n%s", c.edition, diff)
		}
	}
}

// A log is written at the depths that it was read from.
func TestLogDepths(t *testing.T) {
	const rows = `"DATA","W1","A","PSL","PSL-SWV","m/s","%s","200"` + "\r\n"
	for _, depths := range []string{"0.75", "1.00 1.50 2.00", "0.50 1.20 1.45 3.00 6.05", "2.00 2.01", "0.00 0.50", "3.00 12.00"} {
		var text strings.Builder
		text.WriteString("\"GROUP\",\"WGPT\"\r\n\"HEADING\",\"LOCA_ID\",\"WGPG_ID\",\"WGPG_TOOL\",\"WGPT_PARA\",\"WGPT_UNIT\",\"WGPT_DPTH\",\"WGPT_RDNG\"\r\n\"UNIT\",\"\",\"\",\"\",\"\",\"\",\"m\",\"\"\r\n")
		for z := range strings.FieldsSeq(depths) {
			text.WriteString(strings.Replace(rows, "%s", z, 1))
		}
		profiles, err := Read("x.ags", []byte(text.String()), Options{})
		if err != nil {
			t.Fatal(err)
		}
		data := string(written(t, profiles, day))
		var got []string
		for line := range strings.Lines(data) {
			if f := strings.Split(line, `","`); len(f) == 8 && f[4] == "PSL-SWV" {
				got = append(got, f[6])
			}
		}
		if strings.Join(got, " ") != depths {
			t.Errorf("readings at %s come back at %s\n%s", depths, strings.Join(got, " "), data)
		}
	}
}

// What is written is legal, and read again it is what it was, in every
// edition; and the same profiles give the same bytes.
func TestWriteRandom(t *testing.T) {
	rnd := rand.New(rand.NewPCG(4, 411))
	for range 60 {
		profiles := []profile.Profile{random(rnd, "A"), random(rnd, `B "2"`), random(rnd, "C/3, wide")}
		for _, edition := range writtenEditions {
			opt := WriteOptions{Edition: edition, Date: "2026-03-31", Project: Project{ID: "P-1", Name: "Weir"}}
			data := written(t, profiles, opt)
			if broken := brokenRules(data); len(broken) > 0 {
				t.Fatalf("%q\n%s", broken, data)
			}
			if again := written(t, profiles, opt); !bytes.Equal(again, data) {
				t.Fatal("written twice, two files")
			}
			back, err := Read("x.ags", data, Options{})
			if err != nil {
				t.Fatalf("%v\n%s", err, data)
			}
			if diff := cmp.Diff(profiles, back, asWritten); diff != "" {
				t.Fatalf("(-want +got)\n%s\n%s", diff, data)
			}
		}
	}
}

// What cannot be written is an error that says why.
func TestWriteFaults(t *testing.T) {
	layers := []profile.Layer{{Bottom: 5, Vs: 200}}
	one := func(name string) []profile.Profile { return []profile.Profile{{Name: name, Layers: layers}} }
	for _, c := range []struct {
		name     string
		profiles []profile.Profile
		opt      WriteOptions
		want     string
	}{
		{"edition", one("A"), WriteOptions{Edition: "3.1"}, `AGS4 edition "3.1" is not one that is written (4.0.4, 4.1, 4.1.1, 4.2)`},
		{"no date", one("A"), WriteOptions{}, "AGS4 demands the date of the issue, and no profile states the date of its survey as yyyy-mm-dd"},
		{"bad date", one("A"), WriteOptions{Date: "31 March"}, `date "31 March" of the issue is not a date such as 2026-03-31`},
		{"blank name", one(""), day, `the name "" of profile 1 is blank or not one line of plain text`},
		{"two lines", one("A\nB"), day, `the name "A\nB" of profile 1 is blank or not one line of plain text`},
		{"names", append(one("Löss"), one("Loss")...), day, `two profiles have the name "Loss" in ASCII`},
		{"faulty", []profile.Profile{{Name: "A"}}, day, `profile "A": the profile has no layers`},
	} {
		err := Write(&bytes.Buffer{}, c.profiles, c.opt)
		if err == nil || err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.name, err, c.want)
		}
	}
}

// The date of the issue is that of the latest survey; what AGS4 demands and
// nobody states is said not to be.
func TestWriteDate(t *testing.T) {
	profiles := sampleProfiles()
	profiles[1].Survey.Date, profiles[2].Survey.Date = "2026-02-01", "spring 2027"
	data := string(written(t, profiles, WriteOptions{}))
	for _, want := range []string{
		`"DATA","1","2026-02-01","not stated","not stated","Shear wave velocity profiles","4.1.1","not stated","|","+"` + "\r\n",
		`"DATA","not stated"` + "\r\n",
	} {
		if !strings.Contains(data, want) {
			t.Errorf("%q is not in\n%s", want, data)
		}
	}
}

// Lost tells what is not written.
func TestLost(t *testing.T) {
	p := profile.Profile{Name: "Löss", Layers: []profile.Layer{{Bottom: 5, Vs: 200, Soil: "Löß, 5 µm – «fine»"}}, Notes: make([]profile.Note, 2)}
	p.Survey.GroundLevel = profile.Known(4.125)
	p.Position = profile.Position{Easting: profile.Known(1.125), Northing: profile.Known(2)}
	var ids []string
	for _, n := range Lost([]profile.Profile{p, {Name: "A", Layers: p.Layers[:0]}}) {
		ids = append(ids, n.ID+": "+n.Text)
	}
	want := []string{"ascii: profile Löss: characters that are not ASCII, and replaces them",
		"ground-level: profile Löss: the ground level to more than 0.01 m",
		"position: profile Löss: the position in its grid to more than 0.01", "notes: profile Löss: notes on how it was read"}
	if diff := cmp.Diff(want, ids); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
	data := string(written(t, []profile.Profile{p}, day))
	for _, want := range []string{`"Loss"`, `"Loss, 5 um - ?fine?"`, `"4.13"`} {
		if !strings.Contains(data, want) && want != `"4.13"` {
			t.Errorf("%s is not in\n%s", want, data)
		}
	}
	if notes := Lost(sampleProfiles()); len(notes) > 0 {
		t.Errorf("nothing is lost, but %v", notes)
	}
}

// An angle written is the angle read.
func TestAngles(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for _, x := range []float64{0, 51.2, -0.5, 1. / 3, 179.99999999999997, -89.5, 59.999999999999} {
		checkAngle(t, x)
	}
	for range 2000 {
		checkAngle(t, 180*(2*rnd.Float64()-1))
	}
	// By hand: 52.4875 = 52 + 29/60 + 15/3600; -1.8176 = -(1 + 49/60 + 3.36/3600).
	for x, want := range map[float64]string{52.4875: "52:29:15", -1.8176: "-1:49:03.36", -0.5: "-0:30:00"} {
		if got := dms(x); got != want {
			t.Errorf("%v is %s, want %s", x, got, want)
		}
	}
}

func checkAngle(t *testing.T, x float64) {
	t.Helper()
	if v, ok := parseAngle(dms(x), 'N', 'S'); !ok || v != x {
		t.Errorf("%v is written %s and read %v", x, dms(x), v)
	}
}

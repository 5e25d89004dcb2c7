package json

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shearbook/profile"
)

func equal(t *testing.T, what string, got, want any, options ...cmp.Option) {
	t.Helper()
	if diff := cmp.Diff(want, got, options...); diff != "" {
		t.Errorf("%s (-want +got)\n%s", what, diff)
	}
}

// asWritten leaves out what Write does not write: places, the table of the
// file, and what Read tells of its own file.
var asWritten = cmp.Options{
	cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column"),
	cmpopts.IgnoreFields(profile.Note{}, "Place"),
	cmpopts.IgnoreFields(profile.Reading{}, "File", "SHA256", "Size", "Encoding", "Columns", "Rows"),
	cmpopts.IgnoreFields(profile.Metadatum{}, "Line"),
	cmpopts.EquateEmpty(),
}

func written(t *testing.T, profiles []profile.Profile) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, profiles); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// random returns a profile with random layers and whatever else a profile
// may state.
func random(rnd *rand.Rand, name string) profile.Profile {
	p := profile.Profile{Name: name, Reading: &profile.Reading{File: "invented.csv", SHA256: "ab12"}}
	if rnd.IntN(2) == 0 {
		p.Survey = profile.Survey{
			Method: `SASW, "two" spreads; <wide>`, Date: "2026-03-02", Operator: `Example \ Crew`, Location: "Quay # 4 ",
			Basis: profile.Basis(1 + rnd.IntN(3)), DepthReached: 40 * rnd.Float64(),
			GroundLevel: profile.Known(-3 + 9*rnd.Float64()), WaterTable: profile.Known(8e-9 * rnd.Float64()),
		}
		p.Position = profile.Position{Latitude: profile.Known(-90 + 180*rnd.Float64()), Longitude: profile.Known(-180 + 360*rnd.Float64())}
		if rnd.IntN(2) == 0 {
			p.Position.Easting, p.Position.Northing = profile.Known(1e6*rnd.Float64()), profile.Known(-1e6*rnd.Float64())
			p.Position.EPSG = rnd.IntN(2) * 32631
		}
		p.Notes = []profile.Note{{ID: "half-space-assumed", Text: "only tops are given"}}
		p.Reading.Metadata = []profile.Metadatum{{Key: "Sensor", Value: "4.5 Hz"}, {Value: "a remark"}}
	}
	z := 0.0
	for range 1 + rnd.IntN(12) {
		l := profile.Layer{Top: z, Bottom: z + 0.01 + 10*rnd.Float64(), Vs: 100 + 900*rnd.Float64()}
		z = l.Bottom
		for i := range fields {
			f := &fields[i]
			if f.given == 0 || rnd.IntN(3) > 0 {
				continue
			}
			*f.number(&l) = 0.1 + 50*rnd.Float64()
			if f.quantity == profile.Vp {
				l.Vp += 3000
			}
			l.Given |= f.given
		}
		if rnd.IntN(4) == 0 {
			l.VsBottom = l.Vs * (1 + rnd.Float64())
		}
		l.Refusal = rnd.IntN(5) == 0
		l.Basis = profile.Basis(rnd.IntN(4))
		l.Soil = []string{"", "Sand", `Clay, "blue"; soft`, "Löss \u2028", "a  b ", "=1+1", "-"}[rnd.IntN(7)]
		p.Layers = append(p.Layers, l)
	}
	if rnd.IntN(5) == 0 {
		p.NoVelocity = true
		for i := range p.Layers {
			l := &p.Layers[i]
			l.Vs, l.VsBottom, l.Vp = 0, 0, 0
			l.Given &^= profile.GivenVp
		}
	}
	if last := &p.Layers[len(p.Layers)-1]; rnd.IntN(2) == 0 {
		last.Bottom, last.VsBottom = math.Inf(1), 0
	}
	p.Notes = append(p.Notes, profile.Doubts(&p)...)
	return p
}

// What Write writes, Read reads back to the last bit; written again it is the
// same but for its source.
func TestWriteRead(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for i := range 300 {
		var profiles []profile.Profile
		for j, name := range []string{"L1", "#2", "a, b", `"q"`, "[x] y", "Ü: 😀"}[:1+rnd.IntN(6)] {
			profiles = append(profiles, random(rnd, fmt.Sprint(name, j)))
		}
		data := written(t, profiles)
		got, err := Read("invented.csv", data)
		if err != nil {
			t.Fatalf("%d: %v\n%s", i, err, data)
		}
		equal(t, "profiles", portable(got), portable(profiles), asWritten)
		for j := range got {
			got[j].Reading.SHA256 = "ab12"
		}
		if again := written(t, got); !bytes.Equal(data, again) {
			t.Errorf("written again it differs:\n%s\n%s", data, again)
		}
	}
}

// portable leaves out what belongs to one file: the note unit-suspect, whose
// text names the unit of the file, and the source.
func portable(profiles []profile.Profile) []profile.Profile {
	list := make([]profile.Profile, len(profiles))
	for i, p := range profiles {
		p.Notes = slices.DeleteFunc(slices.Clone(p.Notes), func(n profile.Note) bool { return n.ID == "unit-suspect" })
		reading := *p.Reading
		reading.Metadata = slices.DeleteFunc(slices.Clone(reading.Metadata), func(m profile.Metadatum) bool { return m.Key == WrittenFrom })
		p.Reading = &reading
		list[i] = p
	}
	return list
}

func TestWriteForm(t *testing.T) {
	profiles := []profile.Profile{
		{
			Name: "L1", Survey: profile.Survey{Method: "MASW", WaterTable: profile.Known(2.5)},
			Layers: []profile.Layer{
				{Top: 0, Bottom: 4.5, Vs: 180, N: 12, Given: profile.GivenN},
				{Top: 4.5, Bottom: math.Inf(1), Vs: 400, Soil: "Sand\n<dense>", Basis: profile.Measured, Refusal: true},
			},
			Reading: &profile.Reading{
				File: "l.csv", SHA256: "ab12", Columns: []profile.Column{{Heading: "N60 (-)", Quantity: profile.N}},
				Metadata: []profile.Metadatum{{Key: "sensor", Value: "x", Line: 4}, {Key: WrittenFrom, Value: "older.csv"}},
			},
			Notes: []profile.Note{{ID: "kept", Text: "a note"}},
		},
		{Name: "L2", Layers: []profile.Layer{{Top: 0, Bottom: 1, Vs: 1e-6 + 300}}, Notes: []profile.Note{{ID: "one-layer", Text: "x"}}},
	}
	const want = `{
  "shearbook profiles": 1,
  "profiles": [
    {
      "name": "L1",
      "survey": {"method": "MASW", "water_table_m": 2.5},
      "source": {"file": "l.csv", "sha256": "ab12"},
      "metadata": [
        {"key": "sensor", "value": "x"}
      ],
      "notes": [
        {"id": "kept", "text": "a note"}
      ],
      "layers": [
        {"top_m": 0, "bottom_m": 4.5, "vs_mps": 180, "n60": 12},
        {"top_m": 4.5, "bottom_m": null, "vs_mps": 400, "refusal": true, "basis": "measured", "soil": "Sand <dense>"}
      ]
    },
    {
      "name": "L2",
      "layers": [
        {"top_m": 0, "bottom_m": 1, "vs_mps": 300.000001}
      ]
    }
  ]
}
`
	equal(t, "file", string(written(t, profiles)), want)
}

// The kind of blow count lives in the heading of its column, and comes back.
func TestBlowCountKind(t *testing.T) {
	for _, heading := range []string{"n", "n60", "n1_60"} {
		p := profile.Profile{
			Name: "A", Layers: []profile.Layer{{Bottom: 4, Vs: 200, N: 9, Given: profile.GivenN}},
			Reading: &profile.Reading{Columns: []profile.Column{{Heading: heading, Quantity: profile.N}}},
		}
		got, err := Read("a.json", written(t, []profile.Profile{p}))
		if err != nil {
			t.Fatal(err)
		}
		r := got[0].Reading
		if i := r.Index(profile.N); i < 0 || r.Columns[i].Heading != heading || got[0].Layers[0].N != 9 {
			t.Errorf("%s came back as %+v", heading, r.Columns)
		}
	}
}

// Write refuses what Read would not give back.
func TestWriteRefuses(t *testing.T) {
	good := []profile.Layer{{Top: 0, Bottom: 4, Vs: 200}}
	for name, profiles := range map[string][]profile.Profile{
		"none":          nil,
		"no name":       {{Layers: good}},
		"two lines":     {{Name: "a\nb", Layers: good}},
		"outer blank":   {{Name: " a", Layers: good}},
		"no UTF-8":      {{Name: "a\xff", Layers: good}},
		"same name":     {{Name: "a", Layers: good}, {Name: "a", Layers: good}},
		"no layers":     {{Name: "a"}},
		"a gap":         {{Name: "a", Layers: []profile.Layer{{Top: 1, Bottom: 4, Vs: 200}}}},
		"half position": {{Name: "a", Layers: good, Position: profile.Position{Latitude: profile.Known(1)}}},
	} {
		var b bytes.Buffer
		if err := Write(&b, profiles); err == nil || b.Len() > 0 {
			t.Errorf("%s: error %v, wrote %q", name, err, b.String())
		}
	}
	if err := Write(broken{}, []profile.Profile{{Name: "a", Layers: good}}); !errors.Is(err, errBroken) {
		t.Errorf("error %v of a writer that fails, want its own", err)
	}
}

var errBroken = errors.New("broken")

type broken struct{}

func (broken) Write([]byte) (int, error) { return 0, errBroken }

package extend

import (
	"encoding/csv"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// readLayers returns the profiles of testdata/profiles/measured.csv.
func readLayers(t *testing.T) map[string][]profile.Layer {
	t.Helper()
	f, err := os.Open("../../testdata/profiles/measured.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	profiles := map[string][]profile.Layer{}
	for _, row := range rows[1:] {
		var n [3]float64
		for i := range n {
			if n[i], err = strconv.ParseFloat(row[i+1], 64); err != nil {
				t.Fatal(err)
			}
		}
		profiles[row[0]] = append(profiles[row[0]], profile.Layer{Top: n[0], Bottom: n[1], Vs: n[2]})
	}
	return profiles
}

// extended returns the average over thickness m below from of layers continued
// with constant velocity.
func extended(t *testing.T, layers []profile.Layer, from, thickness float64) float64 {
	t.Helper()
	v, err := vs30.Average(ConstantVelocity(layers, from+thickness), from, thickness)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tolerance)
	}
}

// The two measured profiles that end above 30 m: the Vs30 printed for them (1
// %) and the exact one; source in testdata/profiles/README.md.
func TestMeasuredProfilesThatEndEarly(t *testing.T) {
	profiles := readLayers(t)
	near(t, "OSW exact", extended(t, profiles["OSW"], 0, 30), 219.8012, 0.005)
	near(t, "OSW printed", extended(t, profiles["OSW"], 0, 30), 219.5034, 2.2)
	near(t, "BLF exact", extended(t, profiles["BLF"], 0, 30), 451.8854, 0.005)
	near(t, "BLF printed", extended(t, profiles["BLF"], 0, 30), 450.4596, 4.5)
}

// Deep profiles cut at 20 m and continued. By hand, 30/(t₂₀ + 10/v): AP2 goes on
// at 205 m/s, as it does in the ground; OHW at 367 and AND at 557, while in the
// ground they slow down to 243 and, at 25.6 m, to 402 m/s. There the extension
// is too fast, as its note says.
func TestDeepProfilesCutAt20(t *testing.T) {
	profiles := readLayers(t)
	for _, c := range []struct {
		name           string
		extended, true float64
	}{
		{"AP2", 133.11, 133.11},
		{"OHW", 281.00, 248.62},
		{"AND", 514.30, 488.77},
	} {
		var cut []profile.Layer
		for _, l := range profiles[c.name] {
			if l.Top < 20 {
				l.Bottom = min(l.Bottom, 20)
				cut = append(cut, l)
			}
		}
		near(t, c.name, extended(t, cut, 0, 30), c.extended, 0.005)
		whole, err := vs30.Average(profiles[c.name], 0, 30)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.name+" whole", whole, c.true, 0.005)
	}
}

// 10, 20, 25 ft of 500, 800, 1400 ft/s, continued from 55 ft to 100 ft:
// 100/(10/500 + 20/800 + 70/1400) = 100/0.095 = 1052.63 ft/s by hand.
func TestConstructedProfileInFeet(t *testing.T) {
	const foot = profile.Foot
	layers := []profile.Layer{
		{Top: 0, Bottom: 10 * foot, Vs: 500 * foot},
		{Top: 10 * foot, Bottom: 30 * foot, Vs: 800 * foot},
		{Top: 30 * foot, Bottom: 55 * foot, Vs: 1400 * foot},
	}
	near(t, "average", extended(t, layers, 0, 100*foot)/foot, 100/0.095, 1e-9)
}

// What is added is one layer that states nothing but the deepest velocity.
func TestWhatIsAdded(t *testing.T) {
	layers := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 20, Vs: 300, VsBottom: 420,
		Density: 1900, Given: profile.GivenDensity, Basis: profile.Measured, Soil: "sand", Line: 3}}
	before := slices.Clone(layers)
	got := ConstantVelocity(layers, 30)
	want := append(slices.Clone(layers), profile.Layer{Top: 20, Bottom: 30, Vs: 420})
	if !slices.Equal(got, want) {
		t.Errorf("%+v, want %+v", got, want)
	}

	got[0].Vs, got[1].Vs = 1, 1
	if !slices.Equal(layers, before) {
		t.Error("the caller's layers changed")
	}
}

// A caller's slice with room at its end is not written into.
func TestRoomInTheCallersSlice(t *testing.T) {
	layers := make([]profile.Layer, 1, 4)
	layers[0] = profile.Layer{Bottom: 10, Vs: 200}
	ConstantVelocity(layers, 30)
	if layers[:2][1] != (profile.Layer{}) {
		t.Error("the room behind the caller's layers was written into")
	}
}

func TestNothingToAdd(t *testing.T) {
	space := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: math.Inf(1), Vs: 800}}
	for _, c := range []struct {
		name   string
		layers []profile.Layer
		to     float64
	}{
		{"deep enough", []profile.Layer{{Bottom: 40, Vs: 200}}, 30},
		{"an ulp short", []profile.Layer{{Bottom: math.Nextafter(30, 0), Vs: 200}}, 30},
		{"half-space", space, 30},
		{"half-space for ever", space, math.Inf(1)},
		{"no layers", nil, 30},
	} {
		if got := ConstantVelocity(c.layers, c.to); !slices.Equal(got, c.layers) {
			t.Errorf("%s: %+v, want the layers as they are", c.name, got)
		}
		if n := Note(c.layers, 0, c.to); n != (profile.Note{}) {
			t.Errorf("%s: note %q, want none", c.name, n.Text)
		}
	}
}

func TestNote(t *testing.T) {
	layers := []profile.Layer{{Bottom: 8.6, Vs: 207}, {Top: 8.6, Bottom: 12.8, Vs: 247}}
	for _, c := range []struct {
		from, thickness float64
		say             []string
	}{
		// 30 − 12.8 = 17.2 m, 57 % of 30 m.
		{0, 30, []string{"ends 12.8 m", "247 m/s", "17.2 m,", "57 %", "Boore 2004", "doi:10.1785/0120030105"}},
		// 32 − 12.8 = 19.2 m, 64 % of the 30 m below 2 m.
		{2, 30, []string{"ends 12.8 m", "247 m/s", "19.2 m,", "64 %"}},
		// From below its end all of it is extension.
		{20, 30, []string{"ends 12.8 m", "30 m,", "100 %"}},
	} {
		n := Note(layers, c.from, c.thickness)
		if n.ID != "extended" {
			t.Errorf("id %q, want extended", n.ID)
		}
		for _, words := range c.say {
			if !strings.Contains(n.Text, words) {
				t.Errorf("%g m below %g m: %q does not say %q", c.thickness, c.from, n.Text, words)
			}
		}
		if strings.HasSuffix(n.Text, ".") {
			t.Errorf("note ends in a full stop: %q", n.Text)
		}
	}
}

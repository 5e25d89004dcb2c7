package delimited

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
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

// asWritten leaves out what Write does not write, and places.
var asWritten = cmp.Options{
	cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"),
	cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column"),
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
	p := profile.Profile{Name: name}
	if rnd.IntN(2) == 0 {
		p.Survey = profile.Survey{
			Method: `SASW, "two" spreads; wide`, Date: "2026-03-02", Operator: "Example: Crew", Location: "Quay # 4",
			Basis: profile.Inverted, DepthReached: 40 * rnd.Float64(),
			GroundLevel: profile.Known(-3 + 9*rnd.Float64()), WaterTable: profile.Known(8 * rnd.Float64()),
		}
		p.Position = profile.Position{Latitude: profile.Known(-90 + 180*rnd.Float64()), Longitude: profile.Known(-180 + 360*rnd.Float64())}
	}
	z := 0.0
	for range 1 + rnd.IntN(12) {
		l := profile.Layer{Top: z, Bottom: z + 0.01 + 10*rnd.Float64(), Vs: 100 + 900*rnd.Float64()}
		z = l.Bottom
		for _, o := range []struct {
			given profile.Given
			to    *float64
			low   float64
		}{
			{profile.GivenVp, &l.Vp, 3000}, {profile.GivenDensity, &l.Density, 1500}, {profile.GivenSigma, &l.SigmaLnVs, 0.1},
			{profile.GivenN, &l.N, 0}, {profile.GivenSu, &l.Su, 10}, {profile.GivenPI, &l.PI, 0}, {profile.GivenWaterContent, &l.WaterContent, 0},
		} {
			if rnd.IntN(3) == 0 {
				*o.to = o.low + 50*rnd.Float64()
				l.Given |= o.given
			}
		}
		if rnd.IntN(4) == 0 {
			l.VsBottom = l.Vs * (1 + rnd.Float64())
		}
		l.Refusal = rnd.IntN(5) == 0
		l.Basis = profile.Basis(rnd.IntN(4))
		l.Soil = []string{"", "Sand", `Clay, "blue"; soft`, "Löss", "# 4", "=1+1", "-"}[rnd.IntN(7)]
		p.Layers = append(p.Layers, l)
	}
	if last := &p.Layers[len(p.Layers)-1]; rnd.IntN(2) == 0 {
		last.Bottom, last.VsBottom = math.Inf(1), 0
	}
	return p
}

// What Write writes, Read reads back to the last bit.
func TestWriteRead(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for i := range 300 {
		var profiles []profile.Profile
		for j, name := range []string{"L1", "#2", "a, b", `"q"`, "[x] y", "Ü: z"}[:1+rnd.IntN(6)] {
			profiles = append(profiles, random(rnd, fmt.Sprint(name, j)))
		}
		data := written(t, profiles)
		got, err := Read("x.csv", data, Options{})
		if err != nil {
			t.Fatalf("%d: %v\n%s", i, err, data)
		}
		equal(t, "profiles", got, profiles, asWritten)
		if again := written(t, got); !bytes.Equal(data, again) {
			t.Errorf("written again it differs:\n%s\n%s", data, again)
		}
	}
}

func TestWriteForm(t *testing.T) {
	profiles := []profile.Profile{
		{Name: "L1", Survey: profile.Survey{Method: "MASW", WaterTable: profile.Known(2.5), Location: "Quay 4, north"}, Layers: []profile.Layer{
			{Top: 0, Bottom: 4.5, Vs: 180, N: 12, Given: profile.GivenN}, {Top: 4.5, Bottom: math.Inf(1), Vs: 400, Soil: "Sand, dense"},
		}},
		{Name: "L2", Survey: profile.Survey{Method: "MASW", Location: "Quay 4, north"}, Layers: []profile.Layer{{Top: 0, Bottom: 30, Vs: 1e-6 + 300}}},
	}
	const want = `# method: MASW
"# location: Quay 4, north"
# [L1] water table: 2.5 m
profile,top_m,bottom_m,vs_mps,n,soil
L1,0,4.5,180,12,
L1,4.5,,400,,"Sand, dense"
L2,0,30,300.000001,,
`
	equal(t, "file", string(written(t, profiles)), want)
}

// Write refuses what Read would not give back.
func TestWriteRefuses(t *testing.T) {
	good := []profile.Layer{{Top: 0, Bottom: 4, Vs: 200}}
	for name, profiles := range map[string][]profile.Profile{
		"no name":     {{Layers: good}},
		"two lines":   {{Name: "a\nb", Layers: good}},
		"outer blank": {{Name: " a", Layers: good}},
		"same name":   {{Name: "a", Layers: good}, {Name: "a", Layers: good}},
		"no layers":   {{Name: "a"}},
		"a gap":       {{Name: "a", Layers: []profile.Layer{{Top: 1, Bottom: 4, Vs: 200}}}},
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

// The same profile in feet, with its depths as thicknesses and its numbers
// with decimal commas, is the same profile to 1e-12.
func TestTwins(t *testing.T) {
	rnd := rand.New(rand.NewPCG(3, 4))
	near := cmpopts.EquateApprox(1e-12, 1e-12)
	for range 200 {
		p := random(rnd, "x")
		p.Survey, p.Position = profile.Survey{}, profile.Position{}
		for i := range p.Layers {
			l := &p.Layers[i]
			p.Layers[i] = profile.Layer{Top: l.Top, Bottom: l.Bottom, Vs: l.Vs, VsBottom: l.VsBottom}
		}
		for name, table := range map[string]string{
			"feet":      twin(p, "top_ft;bottom_ft;vs_ft_s;vs_bottom_fps\n", profile.Foot, profile.Foot, false, "."),
			"km/s":      twin(p, "top_m;bottom_m;vs_kmps;vs bottom (km/s)\n", 1, 1000, false, "."),
			"thickness": twin(p, "thickness (ft)\tVs [m/s]\tVs bottom, m/s\n", profile.Foot, 1, true, ","),
		} {
			got, err := Read("x.csv", []byte(table), Options{})
			if err != nil {
				t.Fatalf("%s: %v\n%s", name, err, table)
			}
			equal(t, name, got, []profile.Profile{p}, asWritten, near)
		}
	}
}

// twin writes the layers of a profile in other units.
func twin(p profile.Profile, header string, length, velocity float64, thickness bool, point string) string {
	var b strings.Builder
	digits := func(x, factor float64) string {
		if x == 0 || math.IsInf(x, 1) {
			return ""
		}
		return strings.ReplaceAll(fmt.Sprintf("%.17g", x/factor), ".", point)
	}
	b.WriteString(header)
	for i := range p.Layers {
		l := &p.Layers[i]
		if thickness {
			fmt.Fprintf(&b, "%s\t%s\t%s\n", digits(l.Thickness(), length), digits(l.Vs, velocity), digits(l.VsBottom, velocity))
			continue
		}
		top := digits(l.Top, length)
		if l.Top == 0 {
			top = "0"
		}
		fmt.Fprintf(&b, "%s;%s;%s;%s\n", top, digits(l.Bottom, length), digits(l.Vs, velocity), digits(l.VsBottom, velocity))
	}
	return b.String()
}

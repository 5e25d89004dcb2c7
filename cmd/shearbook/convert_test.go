package main

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shearbook/profile"
	"shearbook/profile/open"
)

// someProfiles are random profiles that state whatever every format can hold in
// one way or another: a SiteXML file is of one site and has velocities.
func someProfiles(rnd *rand.Rand) []profile.Profile {
	grid := rnd.IntN(2) == 0
	var list []profile.Profile
	for i := range 1 + rnd.IntN(4) {
		p := profile.Profile{Name: fmt.Sprintf("%s %d", []string{"L", "=B", "007", "a, \"b\"", "x: [y]"}[rnd.IntN(5)], i)}
		p.Survey = profile.Survey{Method: "MASW", Basis: profile.Inverted, Date: "2026-03-02"}
		if rnd.IntN(2) == 0 {
			p.Survey.Operator, p.Survey.Location = "Example: Crew", "Quay # 4, north"
			p.Survey.WaterTable = profile.Known(8 * rnd.Float64())
		}
		p.Survey.GroundLevel = profile.Known(4.25)
		p.Position = profile.Position{Latitude: profile.Known(51.0212345), Longitude: profile.Known(-4.1)}
		if grid {
			p.Position.Easting, p.Position.Northing, p.Position.EPSG = profile.Known(523145.25), profile.Known(float64(i)), 27700
		}
		z := 0.0
		for range 1 + rnd.IntN(8) {
			l := profile.Layer{Top: z, Bottom: z + 0.1 + 10*rnd.Float64(), Vs: 100 + 900*rnd.Float64()}
			z = l.Bottom
			for given, set := range map[profile.Given]func(x float64){
				profile.GivenVp:           func(x float64) { l.Vp = 3000 * (1 + x) },
				profile.GivenDensity:      func(x float64) { l.Density = 1500 + 500*x },
				profile.GivenSigma:        func(x float64) { l.SigmaLnVs = 0.05 + 0.3*x },
				profile.GivenN:            func(x float64) { l.N = math.Round(50 * x) },
				profile.GivenSu:           func(x float64) { l.Su = 1 + 100*x },
				profile.GivenPI:           func(x float64) { l.PI = 40 * x },
				profile.GivenWaterContent: func(x float64) { l.WaterContent = 40 * x },
			} {
				if x := rnd.Float64(); rnd.IntN(3) == 0 {
					set(x)
					l.Given |= given
				}
			}
			if rnd.IntN(4) == 0 {
				l.VsBottom = l.Vs * (1 + rnd.Float64())
			}
			if rnd.IntN(6) == 0 {
				l.Basis = profile.Measured
			}
			l.Refusal = rnd.IntN(5) == 0
			l.Soil = []string{"", "=sand", "Clay, \"blue\"; soft"}[rnd.IntN(3)]
			p.Layers = append(p.Layers, l)
		}
		if last := &p.Layers[len(p.Layers)-1]; last.VsBottom == 0 && rnd.IntN(2) == 0 {
			last.Bottom = math.Inf(1)
		}
		list = append(list, p)
	}
	return list
}

// kept is what a format keeps of profiles that someProfiles gives, by its
// definition: a table, AGS4 and JSON all; SiteXML velocities, densities and the
// place.
func kept(format string, profiles []profile.Profile) []profile.Profile {
	list := slices.Clone(profiles)
	if format != "sitexml" {
		return list
	}
	for i := range list {
		p := &list[i]
		p.Survey = profile.Survey{Method: "MASW", Basis: profile.Inverted, GroundLevel: p.Survey.GroundLevel}
		p.Position.Easting, p.Position.Northing, p.Position.EPSG = profile.Optional{}, profile.Optional{}, 0
		p.Layers = slices.Clone(p.Layers)
		for k := range p.Layers {
			l := &p.Layers[k]
			if l.Gradient() { // h/v = ∫dz/(a+bz) = h·ln(v₂/v₁)/(v₂−v₁)
				l.Vs = (l.VsBottom - l.Vs) / math.Log(l.VsBottom/l.Vs)
			}
			*l = profile.Layer{
				Top: l.Top, Bottom: l.Bottom, Vs: l.Vs, Vp: l.Vp, Density: l.Density, SigmaLnVs: l.SigmaLnVs,
				Given: l.Given & (profile.GivenVp | profile.GivenDensity | profile.GivenSigma),
			}
		}
	}
	return list
}

// heldAlike compares what profiles hold to the 15 digits that a spreadsheet keeps.
var heldAlike = cmp.Options{
	cmpopts.EquateApprox(1e-12, 1e-12),
	cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"),
	cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column"),
}

// converted is what comes back of profiles from a format.
func converted(t *testing.T, f *format, profiles []profile.Profile) []profile.Profile {
	t.Helper()
	var b bytes.Buffer
	flags := convertFlags{date: "2026-03-31"}
	if err := f.write(&b, profiles, flags); err != nil {
		t.Fatalf("%s: %v", f.name, err)
	}
	got, err := open.Bytes("file", b.Bytes(), open.Options{})
	if err != nil {
		t.Fatalf("%s: %v\n%s", f.name, err, b.Bytes())
	}
	return got
}

// Through every pair of formats and back profiles keep whatever both can hold.
func TestConvertPairs(t *testing.T) {
	rnd := rand.New(rand.NewPCG(5, 6))
	for range 12 {
		profiles := someProfiles(rnd)
		for i := range formats {
			first := converted(t, &formats[i], profiles)
			want := kept(formats[i].name, profiles)
			if diff := cmp.Diff(want, first, heldAlike); diff != "" {
				t.Fatalf("%s (-want +got)\n%s", formats[i].name, diff)
			}
			for k := range formats {
				there := converted(t, &formats[k], first)
				back := converted(t, &formats[i], there)
				if diff := cmp.Diff(kept(formats[i].name, kept(formats[k].name, want)), back, heldAlike); diff != "" {
					t.Fatalf("%s → %s → %s (-want +got)\n%s", formats[i].name, formats[k].name, formats[i].name, diff)
				}
			}
		}
	}
}

// What a format loses it says: profiles that come back other than they were
// have a loss, and profiles without a loss come back as they were.
func TestConvertTellsLosses(t *testing.T) {
	rnd := rand.New(rand.NewPCG(7, 8))
	for range 40 {
		profiles := someProfiles(rnd)
		for i := range formats {
			f := &formats[i]
			same := cmp.Equal(profiles, converted(t, f, profiles), heldAlike)
			if lost := f.lost(profiles); same != (len(lost) == 0) {
				t.Fatalf("%s: the same: %v, but lost: %v", f.name, same, lost)
			}
		}
	}
	// Notes are kept by JSON alone.
	p := someProfiles(rnd)[:1]
	p[0].Notes = []profile.Note{{ID: "half-space-assumed", Text: "only tops are given"}}
	for i := range formats {
		said := strings.Contains(fmt.Sprint(formats[i].lost(p)), "note")
		if got := converted(t, &formats[i], p); said == slices.ContainsFunc(got[0].Notes, func(n profile.Note) bool { return n.ID == "half-space-assumed" }) {
			t.Errorf("%s: the note is told to be lost: %v, but %v", formats[i].name, said, got[0].Notes)
		}
	}
}

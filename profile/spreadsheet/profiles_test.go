package spreadsheet

import (
	"bytes"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shearbook/profile"
)

// fifteen compares numbers to the 15 digits that a spreadsheet keeps.
var fifteen = cmpopts.EquateApprox(1e-14, 0)

// back is what Read makes of profiles that Write wrote.
func back(t testing.TB, profiles []profile.Profile) []profile.Profile {
	t.Helper()
	var b bytes.Buffer
	must(t, Write(&b, profiles))
	got, err := Read("book.xlsx", b.Bytes(), Options{})
	must(t, err)
	return got
}

// Whatever a table can hold comes back, names and texts that a sheet might take
// for something else included.
func TestWriteRead(t *testing.T) {
	inf := math.Inf(1)
	profiles := []profile.Profile{
		{
			Name:     "=L1",
			Survey:   profile.Survey{Method: "MASW", Date: "2026-05-05", Location: "Quay: 4, north", Basis: profile.Inverted, DepthReached: 30, WaterTable: profile.Known(2.5)},
			Position: profile.Position{Latitude: profile.Known(51.0212345678), Longitude: profile.Known(-4)},
			Layers: []profile.Layer{
				{Top: 0, Bottom: 3, Vs: 180, VsBottom: 220, Soil: "=soft \"grey\" clay", N: 4, Su: 25, Given: profile.GivenN | profile.GivenSu},
				{Top: 3, Bottom: 10.0 / 3, Vs: 1000.0 / 3, Vp: 1500, Given: profile.GivenVp, Basis: profile.Measured},
				{Top: 10.0 / 3, Bottom: inf, Vs: 400, Refusal: true},
			},
		},
		{
			Name:   "a: 2",
			Survey: profile.Survey{Method: "downhole", DepthReached: 12},
			Layers: []profile.Layer{{Top: 0, Bottom: 5, Vs: 200, Density: 1800, SigmaLnVs: 0.125, PI: 0, WaterContent: 41.5,
				Given: profile.GivenDensity | profile.GivenSigma | profile.GivenPI | profile.GivenWaterContent}},
		},
		{Name: "12345678901234567890", Layers: []profile.Layer{{Top: 0, Bottom: 5, Vs: 200}}},
	}
	got := back(t, profiles)
	if diff := cmp.Diff(profiles, got, fifteen, cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"), cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column")); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
}

// Profiles of blow counts or strengths alone come back too.
func TestWriteReadWithoutVelocities(t *testing.T) {
	profiles := []profile.Profile{{
		Name: "B1", NoVelocity: true,
		Layers: []profile.Layer{{Top: 0, Bottom: 3, N: 4, Given: profile.GivenN}, {Top: 3, Bottom: 9, N: 30, Given: profile.GivenN}},
	}}
	got := back(t, profiles)
	if diff := cmp.Diff(profiles, got, cmpopts.IgnoreFields(profile.Profile{}, "Reading", "Notes"), cmpopts.IgnoreFields(profile.Layer{}, "Line", "Column")); diff != "" {
		t.Errorf("(-want +got)\n%s", diff)
	}
}

// A table without velocities beside one with them is left out, and said so.
func TestTableWithoutVelocitiesBeside(t *testing.T) {
	data := workbook(t, one, cells{
		"Sheet1!A1": line("top_m", "bottom_m", "vs_mps"), "Sheet1!A2": line(0, 5, 200), "Sheet1!A3": line(5, 30, 300),
		"Sheet1!A6": line("top_m", "bottom_m", "N"), "Sheet1!A7": line(0, 5, 12),
	}, nil)
	got, err := Read("a.xlsx", data, Options{})
	must(t, err)
	if len(got) != 1 || len(got[0].Layers) != 2 || len(got[0].Notes) != 1 || got[0].Notes[0].ID != "table-not-read" {
		t.Fatalf("got %+v", got)
	}
	if want := "a table without velocities was not read: its header stands in Sheet1!A6"; got[0].Notes[0].Text != want {
		t.Errorf("got %q, want %q", got[0].Notes[0].Text, want)
	}
}

package siteclass

import (
	"strings"
	"testing"

	"shearbook/profile"
)

// blowsAndStrength is layers of thickness m, N and su kPa in turn, without
// velocities; NaN leaves N or su out.
func blowsAndStrength(rows ...float64) []profile.Layer {
	var layers []profile.Layer
	top := 0.0
	for i := 0; i < len(rows); i += 3 {
		l := profile.Layer{Top: top, Bottom: top + rows[i]}
		if rows[i+1] == rows[i+1] {
			l.N, l.Given = rows[i+1], l.Given|profile.GivenN
		}
		if rows[i+2] == rows[i+2] {
			l.Su, l.Given = rows[i+2], l.Given|profile.GivenSu
		}
		layers = append(layers, l)
		top = l.Bottom
	}
	return layers
}

// TestNTC2008: Tab. 3.2.II of the rules of 2008. E is thin soil of C or D on
// rock above 800 m/s, unless VS,30 is that of A, which allows 3 m itself.
func TestNTC2008(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		class  string
		note   string
	}{
		{"20 m on rock", column(20, 250, deep, 900), "E", ""},
		{"20.1 m on rock: 30/(20.1/250+9.9/900) = 328", column(20.1, 250, deep, 900), "C", "no-own-type"},
		{"on exactly 800, which is not above it: 30/(12/250+18/800) = 425", column(12, 250, deep, 800), "B", ""},
		{"soil of B on rock: 30/(12/500+18/900) = 682", column(12, 500, deep, 900), "B", "no-own-type"},
		{"360 m/s on rock", column(12, 360, deep, 900), "E", ""},
		{"2 m of 300 on 1,000: 30/(2/300+28/1000) = 865, A", column(2, 300, deep, 1000), "A", ""},
		{"2 m of 200 on 900: 30/(2/200+28/900) = 730, not A but thin soil on rock", column(2, 200, deep, 900), "E", ""},
		{"4 m of 500 on 1,500: 30/(4/500+26/1500) = 1,184, barred", column(4, 500, deep, 1500), "B", "rock-barred"},
		{"3 m on 1,500 is not", column(3, 500, deep, 1500), "A", ""},
		{"deep soil of C", column(40, 250, deep, 900), "C", ""},
	} {
		d := decide(t, "ntc-2008", siteOf(p.layers...))
		if d.Class != p.class {
			t.Errorf("%s: category %s, want %s", p.name, d.Class, p.class)
		}
		for _, id := range []string{"no-own-type", "rock-barred"} {
			if got := noteOf(d, id) != ""; got != (id == p.note) {
				t.Errorf("%s: note %s is there: %v", p.name, id, got)
			}
		}
	}
	// S1 needs VS,30 < 100 m/s and the soft ground together.
	for _, p := range []struct {
		v      float64
		ground Ground
		class  string
		state  State // of the soft clay
	}{
		{99, Ground{SoftClay: of(8)}, "S1", Met}, {99, Ground{SoftClay: of(7.9)}, "D", NotMet}, {100, Ground{SoftClay: of(8)}, "D", NotMet},
		{99, Ground{Peat: of(3)}, "S1", NotAssessed}, {100, Ground{Peat: of(3)}, "D", NotMet}, {99, Ground{}, "D", NotAssessed}, {150, Ground{}, "D", NotMet},
		{150, Ground{Liquefiable: Yes}, "S2", NotMet},
	} {
		d := decide(t, "ntc-2008", on(p.v, p.ground))
		if got := stateOf(t, d, "soft-clay"); d.Class != p.class || got != p.state {
			t.Errorf("%v m/s with %+v: category %s, soft clay %s; want %s, %s", p.v, p.ground, d.Class, got, p.class, p.state)
		}
	}
	// N and cu are strict on both sides of C: 50 and 15, 250 and 70 are in none.
	for n, want := range map[float64]string{51: "B", 50: "C", 16: "C", 15: "D", 14: "D"} {
		if d := decide(t, "ntc-2008", siteOf(blowsAndStrength(30, n, no)...)); d.Class != want || (noteOf(d, "boundary-gap") != "") != (n == 50 || n == 15) {
			t.Errorf("N of %v: category %s, %v", n, d.Class, d.Notes)
		}
	}
	for cu, want := range map[float64]string{251: "B", 250: "C", 71: "C", 70: "D", 69: "D"} {
		if d := decide(t, "ntc-2008", siteOf(blowsAndStrength(30, no, cu)...)); d.Class != want || (noteOf(d, "boundary-gap") != "") != (cu == 250 || cu == 70) {
			t.Errorf("cu of %v: category %s, %v", cu, d.Class, d.Notes)
		}
	}
	// Coarse and fine soil together: the worse category.
	if d := decide(t, "ntc-2008", siteOf(blowsAndStrength(15, 30, no, 15, no, 60)...)); d.Class != "D" || d.Route != "Nch and su" {
		t.Errorf("N 30 and cu 60: category %s by %s", d.Class, d.Route)
	}
}

// TestSNIAverage: a worked example of an average under SNI 1726:2012 (thesis
// extract): twelve intervals of 2 m, N of 40 in the first and 60 in the others.
// Σ(d/N) = 2/40 + 22/60 = 0.416667, N̄ = 24/0.416667 = 57.6, printed 57.6; 30 m
// in the numerator would give 72.0. The rows above 50 blows are SC. The
// standard averages over 30 m; the data end at 24 m, and Decide says so.
func TestSNIAverage(t *testing.T) {
	c, _ := Find("sni-1726-2019")
	rows := []float64{2, 40, no}
	for range 11 {
		rows = append(rows, 2, 60, no)
	}
	layers := blowsAndStrength(rows...)
	site := siteOf(layers...)
	r := begin(c, site)
	sum := r.tallyUp(AverageN, 30)
	if !near(sum.average(), 57.6, 1e-12) || sum.thickness != 24 || c.Bands[c.LookupIn(AverageN, sum.average())].Class != "SC" {
		t.Errorf("N̄ = %v over %v m", sum.average(), sum.thickness)
	}
	if _, err := c.Decide(site); err == nil || !strings.Contains(err.Error(), "reaches 24 m below ground level, 30 m are needed") {
		t.Errorf("24 m: %v", err)
	}
	layers[len(layers)-1].Bottom = 30 // 30/(2/40+28/60) = 58.0645
	if d := decide(t, "sni-1726-2019", siteOf(layers...)); d.Class != "SC" || !near(d.Averages[0].Value, 58.0645161, 1e-8) || noteOf(d, "needs-more") == "" {
		t.Errorf("30 m: class %s, %+v, %v", d.Class, d.Averages, d.Notes)
	}
}

// TestSNIWorseGoverns: of the parameters that are known the worse class
// governs; with one alone a note says that two are asked for.
func TestSNIWorseGoverns(t *testing.T) {
	of := func(v, n, su float64) Site {
		layers := blowsAndStrength(15, n, no, 15, n, su)
		for i := range layers {
			layers[i].Vs = v
		}
		return siteOf(layers...)
	}
	for _, p := range []struct {
		site   Site
		class  string
		route  string
		needs  bool
		others int
	}{
		{of(400, no, no), "SC", "velocity", true, 0},
		{of(400, 30, no), "SD", "N", false, 1},          // v̄s of SC, N̄ of SD
		{of(300, 60, no), "SD", "velocity", false, 2},   // by N and by Nch
		{of(400, 60, 40), "SE", "Nch and su", false, 2}, // s̄u of SE
		{of(170, 60, no), "SE", "velocity", false, 2},
	} {
		d := decide(t, "sni-1726-2019", p.site)
		if d.Class != p.class || d.Route != p.route || len(d.Others) != p.others {
			t.Errorf("%+v: class %s by %s, others %+v; want %s by %s", p.site.Profile.Layers, d.Class, d.Route, d.Others, p.class, p.route)
		}
		if got := noteOf(d, "needs-more") != ""; got != p.needs {
			t.Errorf("%+v: that two parameters are asked for is noted: %v", p.site.Profile.Layers, got)
		}
	}
	// s̄u of 100 kPa is in SC (≥ 100) and in SD (50 – 100).
	d := decide(t, "sni-1726-2019", siteOf(blowsAndStrength(30, no, 100)...))
	if got := noteOf(d, "boundary-overlap"); d.Class != "SD" || !strings.Contains(got, "SC is ≥ 100, SD is 50 – 100") {
		t.Errorf("s̄u of 100 kPa: class %s, %q", d.Class, got)
	}
	barred := siteOf(column(3.1, 300, deep, 2000)...)
	if d := decide(t, "sni-1726-2019", barred); d.Class != "SC" || stateOf(t, d, "rock-cover") != Met {
		t.Errorf("3.1 m of soil on rock: class %s", d.Class)
	}
}

// TestBC3: the most onerous of velocity, N and cu, from existing ground level.
func TestBC3(t *testing.T) {
	layers := blowsAndStrength(10, 12, 60, 20, 40, 200)
	layers[0].Vs, layers[1].Vs = 250, 500
	// 30/(10/250+20/500) = 375, B; 30/(10/12+20/40) = 22.5, C; 30/(10/60+20/200) = 112.5, C.
	d := decide(t, "bc3-2013", siteOf(layers...))
	if d.Class != "C" || len(d.Others) != 2 || d.Code.Datum != DatumGround {
		t.Errorf("type %s by %s, others %+v", d.Class, d.Route, d.Others)
	}
	layers[0].Vs, layers[1].Vs = 100, 150 // 30/(10/100+20/150) = 128.6, D
	if d := decide(t, "bc3-2013", siteOf(layers...)); d.Class != "D" || d.Route != "velocity" {
		t.Errorf("slow: type %s by %s", d.Class, d.Route)
	}
	if d := decide(t, "bc3-2013", on(90, Ground{SoftClay: of(10)})); d.Class != "S1" {
		t.Errorf("10 m of soft clay: type %s", d.Class)
	}
	if d := decide(t, "bc3-2013", uniform(90)); d.Class != "D" || noteOf(d, "indicative") == "" {
		t.Errorf("90 m/s alone: type %s, %v", d.Class, d.Notes)
	}
	d, err := Governing([]Decision{decide(t, "bc3-2013", uniform(400)), decide(t, "bc3-2013", uniform(300))})
	if err != nil || d.Class != "C" || noteOf(d, "governing") == "" {
		t.Errorf("two places: type %s, %v, %v", d.Class, err, d.Notes)
	}
}

// TestIS1893: IS 1893:2016 types by N alone, N > 30, 10 – 30 and < 10; the
// mean weighted by thickness is noted where it gives another type, and clay
// of N > 16 where it is II.
func TestIS1893(t *testing.T) {
	for n, want := range map[float64]string{31: "I", 30: "II", 10: "II", 9.9: "III", 1: "III"} {
		d := decide(t, "is-1893-2016", siteOf(blowsAndStrength(30, n, no)...))
		if d.Class != want || d.Route != "N" || d.Velocity != 0 || noteOf(d, "other-mean") != "" {
			t.Errorf("N of %v: type %s by %s, %v", n, d.Class, d.Route, d.Notes)
		}
	}
	// 30/(6/5+24/40) = 16.67, II; (6·5+24·40)/30 = 33, I.
	d := decide(t, "is-1893-2016", siteOf(blowsAndStrength(6, 5, no, 24, 40, no)...))
	if got := noteOf(d, "other-mean"); d.Class != "II" || !strings.Contains(got, "weighted by thickness, 33, would be type I") {
		t.Errorf("type %s, %q", d.Class, got)
	}
	for soil, want := range map[string]bool{"stiff clay": true, "sand": false, "": false} {
		for n, hard := range map[float64]bool{16: false, 17: true} {
			layers := blowsAndStrength(30, n, no)
			layers[0].Soil = soil
			d := decide(t, "is-1893-2016", siteOf(layers...))
			if got := noteOf(d, "hard-clay") != ""; d.Class != "II" || got != (want && hard) {
				t.Errorf("%q of N %v: type %s, noted is %v", soil, n, d.Class, got)
			}
		}
	}
	c, _ := Find("is-1893-2016")
	_, err := c.Decide(siteOf(column(10, 200, deep, 900)...))
	if err == nil || !strings.Contains(err.Error(), "the code types the ground by N alone") {
		t.Errorf("velocities alone: %v", err)
	}
}

// TestBNBC: EN 1998-1:2004 under other names.
func TestBNBC(t *testing.T) {
	names := map[string]string{"A": "SA", "B": "SB", "C": "SC", "D": "SD", "E": "SE", "S1": "S1", "S2": "S2"}
	for _, layers := range [][]profile.Layer{
		column(10, 220, deep, 1000), column(4.9, 300, deep, 2000), column(25, 150, deep, 1000), column(5.1, 500, deep, 1500), column(deep, 360), column(deep, 90),
	} {
		for _, g := range []Ground{{}, {SoftClay: of(12)}, {Liquefiable: Yes}} {
			site := siteOf(layers...)
			site.Ground = g
			ec8, bnbc := decide(t, "ec8-2004", site), decide(t, "bnbc-2020", site)
			if bnbc.Class != names[ec8.Class] || bnbc.Standing != FromMemory {
				t.Errorf("%v: %s under EN 1998-1, %s under BNBC, %s", layers, ec8.Class, bnbc.Class, bnbc.Standing)
			}
		}
	}
}

// TestIranAndPhilippines: the standing of the part used, and the rules beside
// the tables.
func TestIranAndPhilippines(t *testing.T) {
	for v, want := range map[float64]Standing{800: Checked, 500: FromMemory, 200: OneSource, 100: FromMemory} {
		if d := decide(t, "iran-2800", uniform(v)); d.Standing != want {
			t.Errorf("Standard 2800 at %v m/s: type %s, %s", v, d.Class, d.Standing)
		}
	}
	// 30/(5/400+25/1500) = 1,029 over 5 m of weaker cover; 5.1 m bars type I.
	for h, want := range map[float64]string{5: "I", 5.1: "II"} {
		if d := decide(t, "iran-2800", siteOf(column(h, 400, deep, 1500)...)); d.Class != want {
			t.Errorf("Standard 2800, %v m of cover: type %s, want %s", h, d.Class, want)
		}
	}
	if d := decide(t, "nscp-2015", on(250, Ground{SoftClay: with(3.1, 21, 40, 23.9)})); d.Class != "SE" {
		t.Errorf("NSCP, soft clay of 23.9 kPa: type %s", d.Class)
	}
	if d := decide(t, "nscp-2015", on(250, Ground{SoftClay: with(3.1, 21, 40, 24)})); d.Class != "SD" {
		t.Errorf("NSCP, soft clay of 24 kPa: type %s", d.Class)
	}
}

// TestKVectors: averages by hand, of TestConstructedVectors; the classes follow
// from the printed bounds.
func TestKVectors(t *testing.T) {
	for id, want := range map[string][3]string{ // K5 329.27, K6 360 exactly, K7 361.07 m/s
		"bc3-2013": {"C", "C", "B"}, "bnbc-2020": {"SC", "SC", "SB"}, "iran-2800": {"III", "III", "III"}, "nscp-2015": {"SD", "SD", "SC"},
		"ntc-2008": {"C", "C", "B"}, "sni-1726-2019": {"SD", "SC", "SC"}, "ec8-2024": {"C", "C", "C"}, "kds-41-17": {"S4", "S4", "S4"},
	} {
		for i, layers := range [][]profile.Layer{column(5, 180, 10, 300, 15, 500), column(10, 240, 20, 480), column(6, 220, 24, 430)} {
			if d := decide(t, id, siteOf(layers...)); d.Class != want[i] {
				t.Errorf("%s, K%d: class %s, want %s", id, 5+i, d.Class, want[i])
			}
		}
	}
}

// TestMaterialWords: the first noun that names a material.
func TestMaterialWords(t *testing.T) {
	for text, want := range map[string]material{
		"Silty clay": cohesive, "clayey sand": sandy, "sand with clay": sandy, "sandy GRAVEL": gravelly, "weathered sandstone": rocky,
		"fill": unstated, "": unstated, "soft mud, some sand": cohesive, "bedrock (granite)": rocky,
	} {
		if got := materialOf(&profile.Layer{Soil: text}); got != want {
			t.Errorf("%q is %d, want %d", text, got, want)
		}
	}
}

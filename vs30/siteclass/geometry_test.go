package siteclass

import (
	"errors"
	"math"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

var deep = math.Inf(1)

// TestTypeE: EN 1998-1 Table 3.1, velocities of C or D about 5 m to 20 m
// thick over vs > 800 m/s.
func TestTypeE(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		class  string
		about  bool
		no     bool // no type of its own
	}{
		{"10 m of 220 on 1000", column(10, 220, deep, 1000), "E", false, false},
		{"exactly 5 m", column(5, 300, deep, 1000), "E", true, false},
		{"exactly 20 m", column(20, 300, deep, 1000), "E", true, false},
		{"5 m in layers of 0.1 m", tenths(50, 300, 1000), "E", true, false},
		{"4.9 m: 30/(4.9/300+25.1/1000) = 724", column(4.9, 300, deep, 1000), "B", true, true},
		{"4.4 m, no longer about 5", column(4.4, 300, deep, 1000), "B", false, true},
		{"4.9 m on 2000, vs,30 of 1040 is A", column(4.9, 300, deep, 2000), "A", true, false},
		{"20.1 m: 30/(20.1/300+9.9/1000) = 390", column(20.1, 300, deep, 1000), "B", true, true},
		{"22.1 m, no longer about 20: 30/(22.1/300+7.9/1000) = 368", column(22.1, 300, deep, 1000), "B", false, true},
		{"25 m of 150: 30/(25/150+5/1000) = 175", column(25, 150, deep, 1000), "D", false, true},
		{"on exactly 800, which is not above 800", column(10, 220, deep, 800), "B", false, false},
		{"on 801", column(10, 220, deep, 801), "E", false, false},
		{"cover of exactly 360, of C by the softer reading", column(10, 360, deep, 1000), "E", false, false},
		{"cover of 361: velocities of B", column(10, 361, deep, 1000), "B", false, true},
		{"rock that does not last: 30/(10/220+5/1000+15/500) = 373", column(10, 220, 5, 1000, deep, 500), "B", false, false},
		{"soft ground below 30 m does not count", column(10, 220, 20, 1000, deep, 500), "E", false, false},
		{"rock at 30 m: 30/(30/200)", column(30, 200, deep, 1000), "C", false, true},
		{"no rock", column(10, 220, deep, 500), "C", false, false},
	} {
		d := decide(t, "ec8-2004", siteOf(p.layers...))
		if d.Class != p.class {
			t.Errorf("%s: class %s, want %s", p.name, d.Class, p.class)
		}
		if got := noteOf(d, "about-limit") != ""; got != p.about {
			t.Errorf("%s: the soft limit is noted: %v; %v", p.name, got, d.Notes)
		}
		if got := noteOf(d, "no-own-type") != ""; got != p.no {
			t.Errorf("%s: that the print has no type is noted: %v", p.name, got)
		}
		if got := d.Margin == nil; got != (p.class == "E") {
			t.Errorf("%s: margin %v", p.name, d.Margin)
		}
	}
	d := decide(t, "ec8-2004", siteOf(column(5.2, 300, deep, 1000)...))
	want := "the 5.2 m above the stiff ground are near the limit printed as about 5 m; read the other way, the average alone would decide and give B"
	if got := noteOf(d, "about-limit"); got != want {
		t.Errorf("5.2 m: %q", got)
	}
}

// tenths is n layers of 0.1 m of velocity v on a half-space, tops summed up
// in binary.
func tenths(n int, v, below float64) []profile.Layer {
	var pairs []float64
	for range n {
		pairs = append(pairs, 0.1, v)
	}
	return column(append(pairs, deep, below)...)
}

// TestTypeEFollowsTheDatum: from a datum of 6 m only 4 m of the cover are
// left.
func TestTypeEFollowsTheDatum(t *testing.T) {
	site := siteOf(column(10, 220, deep, 900)...)
	if d := decide(t, "ec8-2004", site); d.Class != "E" {
		t.Errorf("from the ground: class %s", d.Class)
	}
	site.Datum = profile.Known(6) // 30/(4/220+26/900) = 637
	if d := decide(t, "ec8-2004", site); d.Class != "B" {
		t.Errorf("from 6 m: class %s", d.Class)
	}
}

// TestMixedCover: a stiff crust does not hide soft ground; the cover's own
// average decides: 12/(1/500+11/200) = 210 m/s.
func TestMixedCover(t *testing.T) {
	d := decide(t, "ec8-2004", siteOf(column(1, 500, 11, 200, deep, 1000)...))
	if got := noteOf(d, "mixed-cover"); d.Class != "E" || !strings.Contains(got, "in part faster than 360 m/s") {
		t.Errorf("class %s, %q", d.Class, got)
	}
	d = decide(t, "ec8-2004", siteOf(column(10, 220, deep, 1000)...))
	if got := noteOf(d, "mixed-cover"); got != "" {
		t.Errorf("one layer, yet %q", got)
	}
}

// TestGradientCover: velocity growing from 200 to 1,000 m/s between 0 and
// 20 m passes 800 at 15 m; 15 m of cover average 15·(600/15)/ln(800/200) =
// 432.8 m/s, above C, so no E; from 100 to 1,000 over 9 m it passes at 7 m,
// 700/ln 8 = 336.6 m/s, so E.
func TestGradientCover(t *testing.T) {
	gradient := func(h, v0 float64) []profile.Layer {
		return []profile.Layer{{Bottom: h, Vs: v0, VsBottom: 1000}, {Top: h, Bottom: deep, Vs: 1000}}
	}
	for _, p := range []struct {
		h, v0, top float64
		class      string
	}{{20, 200, 15, "B"}, {9, 100, 7, "E"}} {
		d := decide(t, "ec8-2004", siteOf(gradient(p.h, p.v0)...))
		found := false
		for _, s := range d.Steps {
			if strings.HasPrefix(s.Text, "thickness above the stiff ground") {
				found = found || near(s.Value, p.top, 1e-12)
			}
		}
		if !found || d.Class != p.class {
			t.Errorf("from %v over %v m: class %s, steps %v", p.v0, p.h, d.Class, d.Steps)
		}
	}
}

// TestIndicative: EN 1998-1 shows vs,30 < 100 m/s beside S1; D is < 180.
func TestIndicative(t *testing.T) {
	if d := decide(t, "ec8-2004", uniform(99)); d.Class != "D" || noteOf(d, "indicative") == "" {
		t.Errorf("99 m/s: class %s, %q", d.Class, noteOf(d, "indicative"))
	}
	if d := decide(t, "ec8-2004", uniform(100)); d.Class != "D" || noteOf(d, "indicative") != "" {
		t.Errorf("100 m/s: class %s, %q", d.Class, noteOf(d, "indicative"))
	}
}

// TestNTC: section 3.2.2 of the 2018 rules. VS,eq = H/Σ(h/v) down to the
// substrate of VS ≥ 800 m/s, or over 30 m where it lies deeper.
func TestNTC(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		class  string
		depth  float64 // averaged, m
		v      float64 // m/s
		note   string
	}{
		{"substrate at 12 m", column(12, 250, deep, 900), "E", 12, 250, ""},
		{"half-space of exactly 800 is substrate", column(12, 250, deep, 800), "E", 12, 250, ""},
		{"half-space of 799 is not: 30/(12/250+18/799)", column(12, 250, deep, 799), "B", 30, 425.3620, ""},
		{"H of exactly 30 m is E, not C", column(30, 250, deep, 900), "E", 30, 250, ""},
		{"H of 30 m in layers of 0.1 m", tenths(300, 250, 900), "E", 30, 250, ""},
		{"H of 30.1 m is C", column(30.1, 250, deep, 900), "C", 30, 250, ""},
		{"30 m and nothing known below", column(30, 250), "C", 30, 250, ""},
		{"D, substrate deep", column(40, 150, deep, 900), "D", 30, 150, ""},
		{"B has no condition on H", column(12, 500, deep, 900), "B", 12, 500, ""},
		{"360 is B or C; with H ≤ 30 B or E: E", column(12, 360, deep, 900), "E", 12, 360, "boundary-overlap"},
		{"180 is C or D; with H ≤ 30 E either way", column(12, 180, deep, 900), "E", 12, 180, ""},
		{"100 is D; with H ≤ 30 E", column(12, 100, deep, 900), "E", 12, 100, ""},
		{"below 100 there is no category", column(12, 99, deep, 900), "outside A–E", 12, 99, "no-category"},
		{"below 100, substrate deep", column(deep, 99), "outside A–E", 30, 99, "no-category"},
		{"3 m of poorer material is allowed in A", column(3, 200, deep, 900), "A", 3, 200, "cover-allowed"},
		{"3.1 m is not", column(3.1, 200, deep, 900), "E", 3.1, 200, ""},
		{"rock from the datum down", column(deep, 1200), "A", 30, 1200, "no-cover"},
		{"rock known to 20 m only", column(20, 1200), "A", 20, 1200, "no-cover"},
		{"rock of exactly 800 is not above 800", column(deep, 800), "B", 30, 800, "no-cover"},
		{"3 m on exactly 800 is not A", column(3, 200, deep, 800), "E", 3, 200, ""},
		{"profile ends in the substrate at 15 m", column(12, 250, 3, 900), "E", 12, 250, ""},
		{"rock that does not last: 30/(10/250+5/900+15/400)", column(10, 250, 5, 900, deep, 400), "B", 30, 361.2040, "not-improving"},
		{"slower ground below 30 m does not count", column(10, 250, 20, 900, deep, 400), "E", 10, 250, ""},
		// 23 m above the substrate: 23/(20/2000+3/700) = 1,610, yet no A.
		{"fast over slow over rock", column(20, 2000, 3, 700, deep, 900), "B", 23, 1610, "rock-barred"},
	} {
		d := decide(t, "ntc-2018", siteOf(p.layers...))
		if d.Class != p.class || !near(d.Thickness, p.depth, 1e-9) || !near(d.Velocity, p.v, 1e-6) {
			t.Errorf("%s: class %s, %.7g m/s over %v m; want %s, %v over %v", p.name, d.Class, d.Velocity, d.Thickness, p.class, p.v, p.depth)
		}
		for _, id := range []string{"boundary-overlap", "boundary-gap", "no-category", "cover-allowed", "no-cover", "rock-barred", "not-improving"} {
			if got := noteOf(d, id) != ""; got != (id == p.note) {
				t.Errorf("%s: note %s is there: %v", p.name, id, got)
			}
		}
	}
}

// TestNTCTooShort: a profile that ends above 30 m is enough only where it
// reaches the substrate.
func TestNTCTooShort(t *testing.T) {
	c, _ := Find("ntc-2018")
	_, err := c.Decide(siteOf(column(12, 250, 8, 799)...))
	want := "ntc-2018 averages over H, at most 30 m: the profile reaches 20 m below ground level, 30 m are needed; no substrate of VS ≥ 800 m/s was reached"
	var short *vs30.ShortError
	if !errors.As(err, &short) || err.Error() != want {
		t.Errorf("%v", err)
	}
}

// TestNTCFollowsTheDatum: H counts from the foundation.
func TestNTCFollowsTheDatum(t *testing.T) {
	site := siteOf(column(32, 250, deep, 900)...)
	if d := decide(t, "ntc-2018", site); d.Class != "C" {
		t.Errorf("H = 32 m: class %s", d.Class)
	}
	site.Datum = profile.Known(2)
	if d := decide(t, "ntc-2018", site); d.Class != "E" || d.Thickness != 30 {
		t.Errorf("H = 30 m from 2 m: class %s over %v m", d.Class, d.Thickness)
	}
	site.Datum = profile.Known(29.5)
	if d := decide(t, "ntc-2018", site); d.Class != "A" || !near(d.Thickness, 2.5, 1e-9) {
		t.Errorf("H = 2.5 m from 29.5 m: class %s over %v m", d.Class, d.Thickness)
	}
}

// TestNTCMargin: with the substrate within 30 m, 180 m/s parts nothing, and
// E goes to B at 360 and out of the table at 100.
func TestNTCMargin(t *testing.T) {
	for v, want := range map[float64]Margin{
		200: {"outside A–E", 100, "m/s", -50},
		300: {"B", 360, "m/s", 20},
		700: {"E", 360, "m/s", -100 * 340. / 700},
	} {
		d := decide(t, "ntc-2018", siteOf(column(12, v, deep, 900)...))
		if d.Margin == nil || d.Margin.ToClass != want.ToClass || d.Margin.Bound != want.Bound || math.Abs(d.Margin.Percent-want.Percent) > 1e-9 {
			t.Errorf("%v m/s over H = 12 m: class %s, margin %+v", v, d.Class, d.Margin)
		}
	}
	if d := decide(t, "ntc-2018", siteOf(column(2, 200, deep, 900)...)); d.Margin != nil {
		t.Errorf("A hangs on the rock, not on the average, yet margin %+v", d.Margin)
	}
}

// TestRockUnderSoil: rock classes stand over 10 ft, 3 m or 5 m of softer
// material and not over more.
func TestRockUnderSoil(t *testing.T) {
	for _, p := range []struct {
		id     string
		layers []profile.Layer
		class  string
		state  State
	}{
		// 30/(3/300+27/2000) = 1,277 m/s, B; over 3.1 m 1,261 m/s.
		{"nbcc-2015", column(3, 300, deep, 2000), "B", NotMet},
		{"nbcc-2015", column(3.1, 300, deep, 2000), "D", Met}, // by the 3.1 m alone, 300 m/s
		{"nbcc-2015", tenths(30, 300, 2000), "B", NotMet},
		{"nbcc-2015", column(3.1, 400, deep, 2000), "C", Met},
		{"tbdy-2018", column(3, 300, deep, 2000), "ZB", NotMet},
		{"tbdy-2018", column(3.1, 300, deep, 2000), "ZC", Met},
		{"asce-7-16", feet(10, 1000, deep, 7000), "B", NotMet},
		{"asce-7-16", feet(10.1, 1000, deep, 7000), "C", Met},
		{"asce-7-22", feet(10, 1000, deep, 7000), "B", NotMet},
		{"asce-7-22", feet(10.1, 1000, deep, 7000), "BC", Met},
		// EN 1998-1 A: 30/(5/500+25/1500) = 1,125 m/s; 500 m/s is too fast for E.
		{"ec8-2004", column(5, 500, deep, 1500), "A", NotMet},
		{"ec8-2004", column(5.1, 500, deep, 1500), "B", Met},
		// Class A over 4 m of ground that is rock of B: 30.48/(4/1000+26.48/3000) = 2,376 m/s.
		{"asce-7-16", column(4, 1000, deep, 3000), "B", Met},
		{"nbcc-2015", column(4, 1000, deep, 3000), "B", Met}, // by the 4 m alone, 1,000 m/s
		// A soft seam at 20 m: the rock that stays begins at 21 m.
		{"asce-7-16", column(20, 2500, 1, 500, deep, 2500), "C", Met},
		// Not rock by the average: the bar has nothing to bar.
		{"asce-7-16", column(10, 300, deep, 600), "C", NotApplicable},
	} {
		d := decide(t, p.id, siteOf(p.layers...))
		if got := stateOf(t, d, "rock-cover"); d.Class != p.class || got != p.state {
			t.Errorf("%s, %v: class %s, bar %s; want %s, %s", p.id, p.layers, d.Class, got, p.class, p.state)
		}
		barred := noteOf(d, "rock-barred")
		if (barred != "") != (p.state == Met) {
			t.Errorf("%s, %v: note %q", p.id, p.layers, barred)
		}
		if p.state == Met && p.id != "nbcc-2015" && !strings.Contains(barred, "the print names no class") {
			t.Errorf("%s: the note does not say that the class is our choice: %q", p.id, barred)
		}
		if d.Margin == nil || d.Margin.ToClass == d.Class {
			t.Errorf("%s, %v: class %s, margin %+v", p.id, p.layers, d.Class, d.Margin)
		}
	}
}

// TestReplacementAverage: NBCC 2015 takes the average over the softer
// material: velocity, thickness and datum of the decision are that average's.
func TestReplacementAverage(t *testing.T) {
	site := siteOf(column(2, 500, 3.5, 300, deep, 2000)...)
	site.FoundationDepth = profile.Known(1)
	// From 1 m: 4.5 m of soil, 4.5/(1/500+3.5/300) = 329.268 m/s.
	d := decide(t, "nbcc-2015", site)
	if d.Class != "D" || d.Datum != 1 || !near(d.Thickness, 4.5, 1e-12) || !near(d.Velocity, 329.26829268, 1e-9) {
		t.Errorf("class %s, %v m/s over %v m from %v m", d.Class, d.Velocity, d.Thickness, d.Datum)
	}
	if d.Margin == nil || d.Margin.ToClass != "C" || d.Margin.Bound != 360 {
		t.Errorf("margin %+v", d.Margin)
	}
	if got := noteOf(d, "foundation-assumed"); got != "" {
		t.Errorf("the foundation is known, yet %q", got)
	}
	site.FoundationDepth = profile.Known(2.5) // 3 m of soil are left: the bar is "more than 3 m"
	if d := decide(t, "nbcc-2015", site); d.Class != "B" || d.Thickness != 30 {
		t.Errorf("foundation at 2.5 m: class %s over %v m", d.Class, d.Thickness)
	}
	site.FoundationDepth = profile.Known(8) // in the rock
	if d := decide(t, "nbcc-2015", site); d.Class != "B" {
		t.Errorf("foundation in the rock: class %s", d.Class)
	}
	site.FoundationDepth = profile.Known(40) // below all that is averaged
	if d := decide(t, "nbcc-2015", site); d.Class != "B" {
		t.Errorf("foundation at 40 m: class %s", d.Class)
	}
	site.FoundationDepth = profile.Optional{}
	if d := decide(t, "nbcc-2015", site); !strings.Contains(noteOf(d, "foundation-assumed"), "counted from ground level") {
		t.Errorf("foundation unknown: notes %v", d.Notes)
	}
	// A seam at 25 m in rock: the 26 m above the rock that stays average
	// 26/(25/1400+1/500) = 1,309 m/s, B once more, which is barred: C.
	d = decide(t, "nbcc-2015", siteOf(column(25, 1400, 1, 500, deep, 1400)...))
	if d.Class != "C" || !near(d.Velocity, 1309.3525, 1e-6) || d.Margin == nil || d.Margin.ToClass != "D" {
		t.Errorf("seam in rock: class %s, %v m/s, margin %+v", d.Class, d.Velocity, d.Margin)
	}
}

// TestFoundationCodesCountFromTheDatum: where a code measures from the
// foundation, a stated datum is the foundation.
func TestFoundationCodesCountFromTheDatum(t *testing.T) {
	site := siteOf(column(5, 300, deep, 2000)...)
	if d := decide(t, "tbdy-2018", site); d.Class != "ZC" {
		t.Errorf("from the ground: class %s", d.Class)
	}
	site.Datum = profile.Known(2)
	if d := decide(t, "tbdy-2018", site); d.Class != "ZB" || !strings.Contains(noteOf(d, "foundation-assumed"), "counted from the datum, 2 m deep") {
		t.Errorf("from 2 m: class %s, %q", d.Class, noteOf(d, "foundation-assumed"))
	}
	site.Datum = profile.Optional{}
	site.FoundationDepth = profile.Known(2)
	if d := decide(t, "tbdy-2018", site); d.Class != "ZB" || noteOf(d, "foundation-assumed") != "" {
		t.Errorf("foundation at 2 m: class %s, %q", d.Class, noteOf(d, "foundation-assumed"))
	}
}

// TestBarKeepsTheMargin: a barred site changes class at the next bound that
// still parts classes: B at 4,162 ft/s, barred to C, becomes D below 1,200.
func TestBarKeepsTheMargin(t *testing.T) {
	d := decide(t, "asce-7-16", siteOf(column(3.1, 300, deep, 2000)...))
	if d.Class != "C" || d.Margin == nil || d.Margin.ToClass != "D" || d.Margin.Bound != 1200 {
		t.Errorf("class %s, margin %+v", d.Class, d.Margin)
	}
}

package siteclass

import (
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
)

// TestInclusivityDiffers, vector K6: 30/(10/240+20/480) = 360 m/s exactly is D
// in NBCC 2015, in no class of NBCC 2010's print, C in NSR-10 and NEC, whose
// lower bounds are their own, and within S2 of E.030.
func TestInclusivityDiffers(t *testing.T) {
	site := siteOf(column(10, 240, 20, 480)...)
	for id, class := range map[string]string{"nbcc-2010": "D", "nbcc-2020": "X360", "nsr-10": "C", "nec-2015": "C", "e030-2018": "S2"} {
		if d := decide(t, id, site); d.Class != class {
			t.Errorf("%s: class %s, want %s", id, d.Class, class)
		}
	}
	if got := noteOf(decide(t, "nbcc-2010", site), "boundary-gap"); !strings.HasPrefix(got, "360 m/s is in no class as printed") {
		t.Errorf("nbcc-2010: %q", got)
	}
}

// TestConflictsInThePrint: where a code's own text disagrees with itself the
// softer reading is taken.
func TestConflictsInThePrint(t *testing.T) {
	for _, p := range []struct {
		id    string
		site  Site
		class string
	}{
		{"e030-2018", uniform(180), "S3"}, // S3 ≤ 180 in the clause, S2 from 180 in the table
		{"nsr-10", boring(sand(40, 50)), "D"},
		{"nec-2015", boring(sand(40, 50)), "C"},
		{"nsr-10", on(400, Ground{SoftClay: with(3, 21, 40, 49)}), "E"}, // 3 m or more, w ≥ 40
		{"nec-2015", on(400, Ground{SoftClay: with(3, 21, 40, 49)}), "E"},
		{"nsr-10", on(400, Ground{SoftClay: with(2.9, 21, 40, 49)}), "C"},
		{"nsr-10", on(400, Ground{SoftClay: with(3, 21, 40, 50)}), "C"},     // su < 50, not 25
		{"e030-2018", on(400, Ground{SoftClay: with(4, 21, 40, 24)}), "S2"}, // w > 40
		{"e030-2018", on(400, Ground{SoftClay: with(4, 21, 41, 24)}), "S3"},
	} {
		if d := decide(t, p.id, p.site); d.Class != p.class {
			t.Errorf("%s: class %s, want %s", p.id, d.Class, p.class)
		}
	}
}

// TestSpecialGround: the limits of the special classes at them and beyond.
func TestSpecialGround(t *testing.T) {
	for _, p := range []struct {
		id      string
		ground  func(Deposit) Ground
		limit   float64
		class   string
		atLimit bool
	}{
		{"nsr-10", func(d Deposit) Ground { return Ground{Peat: d} }, 3, "F2", false},
		{"nsr-10", func(d Deposit) Ground { return Ground{HighPlasticity: d} }, 7.5, "F3", false},
		{"nsr-10", func(d Deposit) Ground { return Ground{ThickClay: d} }, 36, "F4", false},
		{"nec-2015", func(d Deposit) Ground { return Ground{ThickClay: d} }, 30, "F4", false},
		{"ds61-2011", func(d Deposit) Ground { return Ground{Peat: d} }, 0, "F", false},
		{"ds61-2011", func(d Deposit) Ground { return Ground{HighPlasticity: d} }, 20, "F", false},
		{"ubc-97", func(d Deposit) Ground { return Ground{Peat: d} }, 10 * ft, "SF", false},
		{"ubc-97", func(d Deposit) Ground { return Ground{ThickClay: d} }, 120 * ft, "SF", false},
		{"ubc-97", func(d Deposit) Ground { return Ground{SoftClay: d} }, 10 * ft, "SE", false},
		{"aashto-2011", func(d Deposit) Ground { return Ground{HighPlasticity: d} }, 25 * ft, "F", false},
		{"nbcc-2010", func(d Deposit) Ground { return Ground{HighPlasticity: d} }, 8, "F", false},
	} {
		for _, q := range []struct {
			thickness float64
			met       bool
		}{{p.limit, p.atLimit}, {p.limit + 0.01, true}} {
			d := decide(t, p.id, on(400, p.ground(of(q.thickness))))
			if met := d.Class == p.class; met != q.met {
				t.Errorf("%s: %v m gives %s", p.id, q.thickness, d.Class)
			}
		}
	}
	// AASHTO's class F does not list liquefiable soil.
	d := decide(t, "aashto-2011", on(300, Ground{Liquefiable: Yes}))
	if d.Class != "D" || noteOf(d, "not-asked") == "" {
		t.Errorf("aashto-2011: class %s, notes %v", d.Class, d.Notes)
	}
	if d := decide(t, "nec-2015", uniform(300)); !slices.ContainsFunc(d.Unassessed, func(s string) bool { return strings.Contains(s, "α of at most 0.5") }) {
		t.Errorf("nec-2015 does not list the contrast of impedance: %q", d.Unassessed)
	}
}

// TestBarsOfTheAmericas: rock over 3 m or 10 ft of soil.
func TestBarsOfTheAmericas(t *testing.T) {
	for _, p := range []struct {
		id     string
		layers []profile.Layer
		class  string
	}{
		{"nsr-10", column(3, 300, deep, 2000), "B"}, // 30/(3/300+27/2000) = 1,277
		{"nsr-10", column(3.1, 300, deep, 2000), "C"},
		{"nec-2015", column(3.1, 300, deep, 2000), "C"},
		{"nbcc-2010", column(3.1, 300, deep, 2000), "D"}, // by the 3.1 m alone
		{"asce-7-10", feet(10.1, 1000, deep, 7000), "C"},
		{"ubc-97", feet(10, 1000, deep, 7000), "SB"},
		{"ubc-97", feet(10.1, 1000, deep, 7000), "SC"},
		{"ibc-2021", feet(10.1, 1000, deep, 7000), "C"},
		{"aashto-2023", feet(10.1, 1000, deep, 7000), "BC"},
		{"aashto-2011", feet(10.1, 1000, deep, 7000), "B"}, // no bar is known
		{"e030-2018", column(3.1, 300, deep, 2000), "S1"},
	} {
		if d := decide(t, p.id, siteOf(p.layers...)); d.Class != p.class {
			t.Errorf("%s, %v: class %s, want %s", p.id, p.layers, d.Class, p.class)
		}
	}
}

// TestSuperseded: an edition that is replaced says so in every decision.
func TestSuperseded(t *testing.T) {
	for id, want := range map[string]string{"e030-2018": "E.030-2026", "ds61-2011": "NCh433:2026"} {
		if got := noteOf(decide(t, id, uniform(300)), "superseded"); !strings.Contains(got, want) {
			t.Errorf("%s: %q", id, got)
		}
	}
	if got := noteOf(decide(t, "nsr-10", uniform(300)), "superseded"); got != "" {
		t.Errorf("nsr-10: %q", got)
	}
}

// TestDefaults: the class that a code names for want of data is one of its
// own.
func TestDefaults(t *testing.T) {
	for id, want := range map[string]string{"asce-7-10": "D", "asce-7-16": "D", "ibc-2018": "D", "ubc-97": "SD", "asce-7-22": "", "nbcc-2015": "", "ds61-2011": ""} {
		c, _ := Find(id)
		if c.DefaultClass != want || want != "" && c.Default == "" {
			t.Errorf("%s: default %q, %q", id, c.DefaultClass, c.Default)
		}
	}
	for _, c := range All() {
		if c.DefaultClass != "" && c.band(c.DefaultClass) < 0 {
			t.Errorf("%s: default class %q is no row", c.ID, c.DefaultClass)
		}
	}
}

// TestStandingOfTheAmericas: a class by the velocity stands as its row does.
func TestStandingOfTheAmericas(t *testing.T) {
	for id, want := range map[string]Standing{
		"asce-7-10": Checked, "ibc-2012": Checked, "ibc-2018": OneSource, "ibc-2021": FromMemory, "ibc-2024": FromMemory,
		"nehrp-2020": FromMemory, "aashto-2011": FromMemory, "aashto-2023": FromMemory, "ubc-97": OneSource,
		"nbcc-2010": OneSource, "nbcc-2020": Checked, "ds61-2011": Checked, "e030-2018": Checked, "nsr-10": Checked, "nec-2015": Checked,
	} {
		d := decide(t, id, uniform(300))
		if d.Standing != want || (noteOf(d, "standing") != "") != (want != Checked) {
			t.Errorf("%s stands as %s, want %s; %q", id, d.Standing, want, noteOf(d, "standing"))
		}
	}
	// The way by N̄ch and s̄u is from memory where that by N̄ is not.
	d := decide(t, "asce-7-16", boring(clay(40, 60)))
	if d.Standing != FromMemory {
		t.Errorf("by s̄u: %s", d.Standing)
	}
}

// TestCorrelatedEnvelope: ASCE/SEI 7-22 20.3, vector K3: 908.11 ft/s, ×1.3 =
// 1,180.5 and ÷1.3 = 698.5: CD, D and DE, all of them in the decision.
func TestCorrelatedEnvelope(t *testing.T) {
	site := siteOf(feet(20, 550, 30, 850, 50, 1300)...)
	for _, id := range []string{"asce-7-22", "ibc-2024", "nehrp-2020", "aashto-2023"} {
		site.Profile.Survey.Basis = profile.Correlated
		d := decide(t, id, site)
		if !slices.Equal(d.Classes, []string{"CD", "D", "DE"}) || d.Class != "D" {
			t.Errorf("%s: class %s, classes %v", id, d.Class, d.Classes)
		}
		if got := noteOf(d, "correlated-classes"); !strings.Contains(got, "the governing spectrum is the envelope of those of CD, D, DE") {
			t.Errorf("%s: %q", id, got)
		}
		if got := d.ClassWords(); got != "D (with CD and DE)" {
			t.Errorf("%s: %q", id, got)
		}
		// The bounds of CD are 1,000 and 1,450 ft/s, those of DE 500 and 700.
		var steps []string
		for _, s := range d.Steps[len(d.Steps)-4:] {
			steps = append(steps, s.Text+": "+s.Comparison())
		}
		over := d.Code.DepthText
		want := []string{"1.3·v̄s over " + over + ", class CD: 1,180.5 ft/s > 1,000 ft/s", "1.3·v̄s over " + over + ", class CD: 1,180.5 ft/s ≤ 1,450 ft/s",
			"v̄s/1.3 over " + over + ", class DE: 698.5 ft/s > 500 ft/s", "v̄s/1.3 over " + over + ", class DE: 698.5 ft/s ≤ 700 ft/s"}
		if !slices.Equal(steps, want) {
			t.Errorf("%s: steps %q, want %q", id, steps, want)
		}
		site.Profile.Survey.Basis = profile.Measured
		if d = decide(t, id, site); d.Classes != nil {
			t.Errorf("%s: measured, yet classes %v", id, d.Classes)
		}
	}
	// Soft clay settles the class; the three are told and not listed.
	site.Profile.Survey.Basis = profile.Correlated
	site.Ground.SoftClay = of(5)
	if d := decide(t, "asce-7-22", site); d.Class != "E" || d.Classes != nil {
		t.Errorf("soft clay: class %s, classes %v", d.Class, d.Classes)
	}
	// 9,000 ft/s is A whatever the factor.
	rock := uniform(9000 * profile.Foot)
	rock.Profile.Survey.Basis = profile.Correlated
	if d := decide(t, "asce-7-22", rock); d.Classes != nil || !strings.Contains(noteOf(d, "correlated-classes"), "one class throughout") {
		t.Errorf("rock: classes %v, %q", d.Classes, noteOf(d, "correlated-classes"))
	}
}

// TestDatumOf: from where each kind of code starts.
func TestDatumOf(t *testing.T) {
	two, three := profile.Known(2), profile.Known(3)
	for _, p := range []struct {
		id    string
		site  Site
		depth float64
		note  string
	}{
		{"e030-2018", Site{FoundationDepth: two}, 2, "datum-foundation"},
		{"e030-2018", Site{FoundationDepth: two, Datum: three}, 3, ""},
		{"e030-2018", Site{}, 0, "datum-assumed"},
		{"ntc-2018", Site{FoundationDepth: two}, 2, "datum-foundation"},
		{"tbdy-2018", Site{FoundationDepth: profile.Known(0)}, 0, "datum-foundation"},
		{"nsr-10", Site{FoundationDepth: two}, 0, ""},
		{"nsr-10", Site{Datum: three}, 3, "datum-other"},
		{"ubc-97", Site{FoundationDepth: two}, 0, "datum-assumed"},
	} {
		c, _ := Find(p.id)
		depth, note := c.DatumOf(p.site)
		if depth != p.depth || note.ID != p.note {
			t.Errorf("%s, %+v: %v m, %q", p.id, p.site, depth, note.ID)
		}
	}
}

package siteclass

import (
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
)

// decide returns the decision of a code, and fails the test on an error.
func decide(t *testing.T, id string, s Site) Decision {
	t.Helper()
	c, err := Find(id)
	if err != nil {
		t.Fatal(err)
	}
	d, err := c.Decide(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// noteOf returns the text of the first note of that ID, "" if there is none.
func noteOf(d Decision, id string) string {
	for _, n := range d.Notes {
		if n.ID == id {
			return n.Text
		}
	}
	return ""
}

// feet is layers from thicknesses in ft and velocities in ft/s in turn.
func feet(pairs ...float64) []profile.Layer {
	metric := make([]float64, len(pairs))
	for i, v := range pairs {
		metric[i] = v * profile.Foot
	}
	return column(metric...)
}

// near reports whether two numbers agree to a relative tolerance.
func near(a, b, tolerance float64) bool { return math.Abs(a-b) <= tolerance*math.Abs(b) }

// TestConstructedVectors: averages by hand, Z/Σ(h/v), each written out; the
// classes follow from the printed bounds. The unit trap of K7 is that the
// metric print of the 1997 NEHRP provisions has 360 m/s where the print in
// feet has 1,200 ft/s = 365.76 m/s.
func TestConstructedVectors(t *testing.T) {
	for _, k := range []struct {
		name   string
		layers []profile.Layer
		unit   profile.Unit
		want   float64           // average in unit
		class  map[string]string // by code
	}{
		// 100 / (10/600 + 30/900 + 60/1500) = 100/0.09
		{"K1", feet(10, 600, 30, 900, 60, 1500), profile.FootPerSecond, 1111.1111111, map[string]string{"asce-7-16": "D", "asce-7-22": "CD"}},
		// 100 / (50/450 + 50/900) = 100/(1/6)
		{"K2", feet(50, 450, 50, 900), profile.FootPerSecond, 600, map[string]string{"asce-7-16": "D", "asce-7-22": "DE"}},
		// 100 / (20/550 + 30/850 + 50/1300) = 100/0.1101192925
		{"K3", feet(20, 550, 30, 850, 50, 1300), profile.FootPerSecond, 908.1060887, map[string]string{"asce-7-16": "D", "asce-7-22": "D"}},
		// 100 / (60/1000 + 40/1500) = 100/0.0866667
		{"K4", feet(60, 1000, 40, 1500), profile.FootPerSecond, 1153.8461538, map[string]string{"asce-7-16": "D", "asce-7-22": "CD"}},
		// 30 / (5/180 + 10/300 + 15/500) = 30/0.0911111
		{"K5", column(5, 180, 10, 300, 15, 500), profile.MetrePerSecond, 329.2682927, map[string]string{"nbcc-2015": "D", "ec8-2004": "C", "tbdy-2018": "ZD", "ntc-2018": "C"}},
		// 30 / (10/240 + 20/480) = 30/(1/12)
		{"K6", column(10, 240, 20, 480), profile.MetrePerSecond, 360, map[string]string{"nbcc-2015": "D", "ec8-2004": "C", "tbdy-2018": "ZD", "ntc-2018": "C"}},
		// 30 / (6/220 + 24/430) = 30/0.0830867
		{"K7", column(6, 220, 24, 430), profile.MetrePerSecond, 361.0687023, map[string]string{"nbcc-2015": "C", "ec8-2004": "B", "tbdy-2018": "ZC", "ntc-2018": "B"}},
		// 55 ft of data carried on to 100: 100 / (10/500 + 20/800 + 70/1400) = 100/0.095
		{"K8", feet(10, 500, 20, 800, 70, 1400), profile.FootPerSecond, 1052.6315789, map[string]string{"asce-7-22": "CD", "asce-7-16": "D"}},
	} {
		for id, class := range k.class {
			d := decide(t, id, siteOf(k.layers...))
			if v := d.Velocity / k.unit.Factor; !near(v, k.want, 1e-9) || d.Class != class {
				t.Errorf("%s under %s: %.9g %s, class %s; want %.9g, class %s", k.name, id, v, k.unit.Name, d.Class, k.want, class)
			}
			if d.Route != "velocity" || d.Standing == 0 {
				t.Errorf("%s under %s: route %q, standing %v", k.name, id, d.Route, d.Standing)
			}
		}
	}
}

// TestBoundaryNotes: 600 ft/s of K2 and 360 m/s of K6 are exact by hand; whatever
// the sum in binary gives, the note says what the print does there.
func TestBoundaryNotes(t *testing.T) {
	k2 := decide(t, "asce-7-16", siteOf(feet(50, 450, 50, 900)...))
	if noteOf(k2, "boundary-overlap")+noteOf(k2, "boundary-gap") != "" {
		t.Errorf("600 ft/s is D alone as printed, yet noted: %v", k2.Notes)
	}
	for id, want := range map[string]string{
		"ec8-2004":  "360 m/s is in two classes as printed: B is 360 – 800, C is 180 – 360; the softer, C, is taken",
		"tbdy-2018": "360 m/s is in two classes as printed: ZC is 360 – 760, ZD is 180 – 360; the softer, ZD, is taken",
		"ntc-2018":  "360 m/s is in two classes as printed: B is 360 – 800, C is 180 – 360; the softer, C, is taken",
	} {
		if got := noteOf(decide(t, id, siteOf(column(10, 240, 20, 480)...)), "boundary-overlap"); got != want {
			t.Errorf("%s at 360: %q", id, got)
		}
	}
	want := "360 m/s is in no class as printed: C is > 360, < 760, D is > 180, < 360; the softer, D, is taken"
	if got := noteOf(decide(t, "nbcc-2015", siteOf(column(10, 240, 20, 480)...)), "boundary-gap"); got != want {
		t.Errorf("nbcc-2015 at 360: %q", got)
	}
	for bound, want := range map[float64]string{760: "B is > 760, ≤ 1,500, C is > 360, < 760; the softer, C", 180: "D is > 180, < 360, E is < 180; the softer, E"} {
		if got := noteOf(decide(t, "nbcc-2015", uniform(bound)), "boundary-gap"); !strings.Contains(got, want) {
			t.Errorf("nbcc-2015 at %v: %q", bound, got)
		}
	}
	d := decide(t, "asce-7-16", uniform(1200*profile.Foot))
	if got := noteOf(d, "boundary-overlap"); got != "1,200 ft/s is in two classes as printed: C is 1,200 – 2,500, D is 600 – 1,200; the softer, D, is taken" {
		t.Errorf("asce-7-16 at 1,200: %q", got)
	}
}

// TestUnitPrint: K7 carried on to 100 ft averages 30.48/(6/220 + 24.48/430) =
// 361.98 m/s = 1,187.6 ft/s, C by the metric print and D by the print in feet.
func TestUnitPrint(t *testing.T) {
	d := decide(t, "asce-7-16", siteOf(column(6, 220, math.Inf(1), 430)...))
	want := "362 m/s is 1,188 ft/s: class D by this table's bounds in ft/s, class C by the print in m/s (1997 NEHRP provisions, FEMA 302); the code's own unit decides"
	if got := noteOf(d, "unit-print"); d.Class != "D" || got != want {
		t.Errorf("class %s, %q", d.Class, got)
	}
	for v, want := range map[float64]bool{359.9: false, 360: false, 360.1: true, 365.7: true, 365.8: false, 182: true, 180: true, 183: false,
		179.9: false, 761: true, 763: false, 1510: true, 1525: false, 1500: false, 4000: false, 100: false} {
		if got := noteOf(decide(t, "asce-7-16", uniform(v)), "unit-print") != ""; got != want {
			t.Errorf("%v m/s: noted is %v", v, got)
		}
	}
	for _, id := range []string{"nbcc-2015", "ec8-2004", "asce-7-22"} {
		if got := noteOf(decide(t, id, uniform(361)), "unit-print"); got != "" {
			t.Errorf("%s has one print and notes %q", id, got)
		}
	}
}

func TestRoundingNote(t *testing.T) {
	d := decide(t, "nbcc-2015", uniform(360.3))
	if got := noteOf(d, "rounding"); got != "rounded to 360 m/s the average would be class D; the unrounded 360.3 m/s is class C" {
		t.Errorf("360.3: %q", got)
	}
	d = decide(t, "ec8-2004", uniform(179.999999))
	if got := noteOf(d, "rounding"); got != "rounded to 180 m/s the average would be class C; the unrounded 179.999999 m/s is class D" {
		t.Errorf("180 - 1e-6: %q", got)
	}
	for v, want := range map[float64]bool{361.2: false, 360.6: false, 359.7: false, 760.4: true, 180.2: true, 180: false} {
		if got := noteOf(decide(t, "nbcc-2015", uniform(v)), "rounding") != ""; got != want {
			t.Errorf("nbcc-2015 at %v: noted is %v", v, got)
		}
	}
}

// TestMargin: 100·(bound − value)/value, by hand.
func TestMargin(t *testing.T) {
	for _, p := range []struct {
		id     string
		v      float64 // in the code's unit
		class  string
		margin Margin
	}{
		{"ec8-2004", 400, "B", Margin{"C", 360, "m/s", -10}},
		{"ec8-2004", 200, "C", Margin{"D", 180, "m/s", -10}},
		{"ec8-2004", 120, "D", Margin{"C", 180, "m/s", 50}},
		{"ec8-2004", 360, "C", Margin{"B", 360, "m/s", 0}},
		{"nbcc-2015", 760, "C", Margin{"B", 760, "m/s", 0}},
		{"asce-7-16", 1000, "D", Margin{"C", 1200, "ft/s", 20}},
		{"asce-7-16", 600, "D", Margin{"E", 600, "ft/s", 0}},
		{"asce-7-22", 2000, "C", Margin{"BC", 2100, "ft/s", 5}},
		{"asce-7-22", 6250, "A", Margin{"B", 5000, "ft/s", -20}},
		{"tbdy-2018", 950, "ZB", Margin{"ZC", 760, "m/s", -20}},
		{"ntc-2018", 125, "D", Margin{"outside A–E", 100, "m/s", -20}},
		{"ntc-2018", 80, "outside A–E", Margin{"D", 100, "m/s", 25}},
	} {
		c, _ := Find(p.id)
		d := decide(t, p.id, uniform(p.v*c.Unit.Factor))
		if d.Class != p.class || d.Margin == nil {
			t.Errorf("%s at %v: class %s, margin %v", p.id, p.v, d.Class, d.Margin)
			continue
		}
		got := *d.Margin
		if got.ToClass != p.margin.ToClass || got.Bound != p.margin.Bound || got.Unit != p.margin.Unit || math.Abs(got.Percent-p.margin.Percent) > 1e-9 {
			t.Errorf("%s at %v: margin %+v, want %+v", p.id, p.v, got, p.margin)
		}
	}
}

// TestMarginLeadsToAnotherClass: just beyond the margin's bound, uniform
// ground is in the class that the margin names.
func TestMarginLeadsToAnotherClass(t *testing.T) {
	for _, c := range columned() {
		for v := 60.0; v < 1800; v *= 1.01 {
			d := decide(t, c.ID, uniform(v))
			if d.Margin == nil {
				if c.ID == "ntc-2018" && d.Class == "A" {
					continue // rock by its own velocity
				}
				t.Fatalf("%s at %v m/s has no margin", c.ID, v)
			}
			beyond := d.Margin.Bound * (1 + math.Copysign(1e-7, d.Margin.Percent)) * c.Unit.Factor
			next := decide(t, c.ID, uniform(beyond)).Class
			if d.Margin.ToClass == "XV" { // of nbcc-2020, with a number for V
				next = "XV"
			}
			if next != d.Margin.ToClass && c.ID != "ntc-2018" {
				t.Fatalf("%s at %v m/s: beyond the margin %+v the class is %s", c.ID, v, *d.Margin, next)
			}
		}
	}
}

func TestDatum(t *testing.T) {
	layers := column(3, 100, math.Inf(1), 400)
	at := func(d, f profile.Optional) Site {
		s := siteOf(layers...)
		s.Datum, s.FoundationDepth = d, f
		return s
	}
	unknown := profile.Optional{}
	for _, c := range timed() {
		assumed := decide(t, c.ID, at(unknown, unknown))
		if got, want := noteOf(assumed, "datum-assumed") != "", c.Datum != DatumGround; got != want || assumed.Datum != 0 {
			t.Errorf("%s without a datum: starts at %v, noted is %v", c.ID, assumed.Datum, got)
		}
		stated := decide(t, c.ID, at(profile.Known(3), unknown))
		if stated.Datum != 3 || stated.Velocity != 400 || noteOf(stated, "datum-assumed") != "" {
			t.Errorf("%s from 3 m: starts at %v with %v m/s, notes %v", c.ID, stated.Datum, stated.Velocity, stated.Notes)
		}
		if got, want := noteOf(stated, "datum-other") != "", c.Datum == DatumGround; got != want {
			t.Errorf("%s from 3 m: that the code starts at ground is noted: %v", c.ID, got)
		}
		zero := decide(t, c.ID, at(profile.Known(0), unknown))
		if noteOf(zero, "datum-assumed")+noteOf(zero, "datum-other") != "" {
			t.Errorf("%s from 0 m: notes %v", c.ID, zero.Notes)
		}
	}
	for _, c := range timed() {
		d := decide(t, c.ID, at(unknown, profile.Known(2)))
		if c.Datum == DatumFoundation {
			if got := noteOf(d, "datum-foundation"); d.Datum != 2 || !strings.HasSuffix(got, "the stated depth of the foundation, 2 m") {
				t.Errorf("%s, foundation at 2 m and no datum: starts at %v, %q", c.ID, d.Datum, got)
			}
		} else if d.Datum != 0 {
			t.Errorf("%s does not measure from the foundation, yet starts at %v", c.ID, d.Datum)
		}
		both := decide(t, c.ID, at(profile.Known(1), profile.Known(2)))
		if both.Datum != 1 || noteOf(both, "datum-foundation") != "" {
			t.Errorf("%s, a stated datum of 1 m goes before the foundation: starts at %v, notes %v", c.ID, both.Datum, both.Notes)
		}
	}
}

func TestBasis(t *testing.T) {
	of := func(survey profile.Basis, bases ...profile.Basis) Site {
		s := siteOf(column(5, 200, 10, 300, 15, 500, math.Inf(1), 900)...)
		s.Profile.Survey.Basis = survey
		for i, b := range bases {
			s.Profile.Layers[i].Basis = b
		}
		return s
	}
	for _, p := range []struct {
		site  Site
		basis string
		note  string
	}{
		{of(profile.BasisNotStated), "not stated", ""},
		{of(profile.Inverted), "inverted", ""},
		{of(profile.Inverted, profile.Inverted), "inverted", ""},
		{of(profile.Measured, profile.Correlated), "mixed", "correlated"},
		{of(profile.Correlated), "correlated", "correlated"},
		{of(profile.Measured, profile.Inverted), "mixed", "mixed-basis"},
		// The fourth layer begins at 30 m, below the average.
		{of(profile.Measured, profile.Measured, profile.Measured, profile.Measured, profile.Correlated), "measured", ""},
	} {
		d := decide(t, "ec8-2004", p.site)
		if d.Basis != p.basis {
			t.Errorf("basis %q, want %q", d.Basis, p.basis)
		}
		for _, id := range []string{"correlated", "mixed-basis"} {
			if got := noteOf(d, id) != ""; got != (id == p.note) {
				t.Errorf("basis %q: note %s is there: %v", p.basis, id, got)
			}
		}
	}
	for _, c := range timed() {
		if got := noteOf(decide(t, c.ID, of(profile.Correlated)), "correlated"); !strings.HasSuffix(got, c.Correlated) {
			t.Errorf("%s: the note on correlated velocities is %q", c.ID, got)
		}
	}
}

// TestCorrelatedClasses: ASCE/SEI 7-22 §20.3, v̄s, 1.3·v̄s and v̄s/1.3, for K1,
// K3 and K4 above: 1,111.11 → 1,444.44, 854.70; 908.11 → 1,180.54, 698.54;
// 1,153.85 → 1,500.00, 887.57 ft/s.
func TestCorrelatedClasses(t *testing.T) {
	for want, layers := range map[string][]profile.Layer{
		"1,111 ft/s is class CD; 1.3·v̄s of 1,444 ft/s is class CD; v̄s/1.3 of 854.7 ft/s is class D": feet(10, 600, 30, 900, 60, 1500),
		"908.1 ft/s is class D; 1.3·v̄s of 1,181 ft/s is class CD; v̄s/1.3 of 698.5 ft/s is class DE": feet(20, 550, 30, 850, 50, 1300),
		"1,154 ft/s is class CD; 1.3·v̄s of 1,500 ft/s is class C; v̄s/1.3 of 887.6 ft/s is class D":  feet(60, 1000, 40, 1500),
	} {
		site := siteOf(layers...)
		site.Profile.Survey.Basis = profile.Correlated
		if got := noteOf(decide(t, "asce-7-22", site), "correlated-classes"); !strings.Contains(got, want) {
			t.Errorf("%q, want %q", got, want)
		}
		if got := noteOf(decide(t, "asce-7-16", site), "correlated-classes"); got != "" {
			t.Errorf("asce-7-16 has no such rule, yet %q", got)
		}
		site.Profile.Survey.Basis = profile.Measured
		if got := noteOf(decide(t, "asce-7-22", site), "correlated-classes"); got != "" {
			t.Errorf("measured velocities, yet %q", got)
		}
	}
}

// extend is K8: data to a depth in ft, carried on to 100 ft.
func extend(reach float64) Site {
	s := siteOf(feet(10, 500, 20, 800, reach-30, 1400)...)
	s.Layers = append(slices.Clone(s.Profile.Layers), profile.Layer{Top: reach * profile.Foot, Bottom: 100 * profile.Foot, Vs: 1400 * profile.Foot})
	s.Extended = true
	s.Notes = []profile.Note{{ID: "extended", Text: "carried on"}}
	return s
}

// TestExtension: §20.3 of ASCE/SEI 7-22 from memory: from 50 ft of data on
// the last velocity may be carried down, above 50 ft the default classes
// apply.
func TestExtension(t *testing.T) {
	for reach, want := range map[float64]string{
		55: "carried down to 100 ft", 50: "carried down to 100 ft", 49.9: "default classes", 40: "default classes"} {
		d := decide(t, "asce-7-22", extend(reach))
		if got := noteOf(d, "extension-rule"); !strings.Contains(got, want) || d.Basis != "extended" || d.Class != "CD" || d.Standing != FromMemory {
			t.Errorf("data to %v ft: basis %s, class %s, %q", reach, d.Basis, d.Class, got)
		}
		if d.Notes[0].ID != "extended" {
			t.Errorf("the caller's note is lost: %v", d.Notes)
		}
	}
	stated := extend(55)
	stated.Profile.Survey.DepthReached = 45 * profile.Foot
	if got := noteOf(decide(t, "asce-7-22", stated), "extension-rule"); !strings.Contains(got, "reach 13.72 m (45 ft)") || !strings.Contains(got, "default classes") {
		t.Errorf("a survey that reached 45 ft: %q", got)
	}
	if got := noteOf(decide(t, "asce-7-16", extend(55)), "extension-rule"); !strings.Contains(got, "ends 16.76 m (55 ft) below ground level") {
		t.Errorf("asce-7-16: %q", got)
	}
	s := siteOf(column(10, 200, 21, 400)...)
	s.Extended = true // but not below 31 m
	for _, c := range averaging() {
		if d := decide(t, c.ID, s); d.Basis == "extended" || noteOf(d, "extension-rule") != "" {
			t.Errorf("%s: 31 m are enough, yet basis %s, notes %v", c.ID, d.Basis, d.Notes)
		}
	}
}

func TestNotesOnLayers(t *testing.T) {
	site := siteOf(column(5, 300, 5, 200, 10, 250, 5, 240, 5, 400, 5, 100)...)
	site.Profile.Survey.DepthReached = 25
	site.Profile.Reading = &profile.Reading{File: "line-1.csv"}
	site.Profile.Layers[1].Line, site.Profile.Layers[1].Column = 4, 3
	d := decide(t, "nbcc-2015", site)
	if got := noteOf(d, "reversal"); got != "the velocity falls with depth: from 300 to 200 m/s at 5 m, from 250 to 240 m/s at 20 m" {
		t.Errorf("reversal: %q", got)
	}
	if got := noteOf(d, "below-depth-reached"); got != "the survey reached 25 m below ground level; the average uses the profile below that" {
		t.Errorf("below-depth-reached: %q", got)
	}
	for _, n := range d.Notes {
		if want := (profile.Place{File: "line-1.csv", Line: 4, Column: 3}); n.ID == "reversal" && n.Place != want {
			t.Errorf("the reversal stands at %v", n.Place)
		}
	}
	if got := noteOf(d, "half-space"); got != "" {
		t.Errorf("no half-space, yet %q", got)
	}
	d = decide(t, "nbcc-2015", siteOf(column(12, 300, math.Inf(1), 500)...))
	if got := noteOf(d, "half-space"); got != "from 12 m below ground level on, the ground averaged is the half-space, 500 m/s" {
		t.Errorf("half-space: %q", got)
	}
	d = decide(t, "nbcc-2015", siteOf(column(30, 300, math.Inf(1), 200)...))
	if got := noteOf(d, "half-space") + noteOf(d, "reversal") + noteOf(d, "below-depth-reached"); got != "" {
		t.Errorf("all below 30 m, yet %q", got)
	}
	many := siteOf(column(5, 900, 5, 800, 5, 700, 5, 600, 5, 500, 5, 400)...)
	if got := noteOf(decide(t, "nbcc-2015", many), "reversal"); !strings.HasSuffix(got, ", and 2 more") {
		t.Errorf("five reversals: %q", got)
	}
}

func TestStandingNote(t *testing.T) {
	d := decide(t, "asce-7-16", uniform(500*profile.Foot))
	if got := noteOf(d, "standing"); d.Standing != OneSource || got != "one source: class E of Table 20.3-1" {
		t.Errorf("class E of asce-7-16 stands as %s, %q", d.Standing, got)
	}
	d = decide(t, "asce-7-16", uniform(1000*profile.Foot))
	if got := noteOf(d, "standing"); d.Standing != Checked || got != "" {
		t.Errorf("class D of asce-7-16 stands as %s, %q", d.Standing, got)
	}
	if d = decide(t, "asce-7-22", uniform(300)); d.Standing != FromMemory || noteOf(d, "standing") != "from memory: class D of Table 20.2-1" {
		t.Errorf("asce-7-22 stands as %s, %q", d.Standing, noteOf(d, "standing"))
	}
}

// TestSteps: 640 ft/s under ASCE/SEI 7-16, in the order of the printed rows.
func TestSteps(t *testing.T) {
	d := decide(t, "asce-7-16", uniform(640*profile.Foot))
	step := func(class, op string, bound float64, holds bool) Step {
		return Step{Text: "v̄s over 100 ft, class " + class, Clause: "Table 20.3-1", Value: d.Velocity / profile.Foot, Operator: op, Bound: bound, Unit: "ft/s", Holds: holds}
	}
	want := []Step{
		step("A", ">", 5000, false),
		step("B, lower end", "–", 2500, false),
		step("C, lower end", "–", 1200, false),
		step("D, lower end", "–", 600, true),
		step("D, upper end", "–", 1200, true),
	}
	if diff := cmp.Diff(want, d.Steps); diff != "" {
		t.Error(diff)
	}
	line := decide(t, "asce-7-16", uniform(640*profile.Foot)).Steps[0].String()
	if line != "v̄s over 100 ft, class A: 640 ft/s > 5,000 ft/s: no (Table 20.3-1)" {
		t.Errorf("a step prints %q", line)
	}
}

// TestStepsGiveTheClass: the class is always one whose every step holds,
// unless its value lies in a printed gap.
func TestStepsGiveTheClass(t *testing.T) {
	for _, c := range columned() {
		for v := 60.0; v < 1800; v *= 1.003 {
			d := decide(t, c.ID, uniform(v))
			last := ""
			for _, s := range d.Steps {
				_, class, ok := strings.Cut(s.Text, ", class ")
				if !ok || s.Clause != c.Table || s.Unit != c.Unit.Name {
					continue
				}
				class, _, _ = strings.Cut(class, ",")
				if s.Holds {
					last = class
				} else if last == class {
					last = ""
				}
			}
			if want := d.Row; last != want && want != c.Outside && c.ID != "ds61-2011" { // which lowers the type of the steps
				t.Fatalf("%s at %v m/s: class %s, the steps lead to %q", c.ID, v, want, last)
			}
		}
	}
}

// TestSameInputSameDecision: nothing in a decision depends on anything but
// the site, and the site is left as it was.
func TestSameInputSameDecision(t *testing.T) {
	site := siteOf(column(3.1, 300, 6, 250, math.Inf(1), 2000)...)
	site.Ground.SoftClay = Deposit{Thickness: profile.Known(4)}
	site.Profile.Survey.Basis = profile.Correlated
	before := slices.Clone(site.Profile.Layers)
	ignore := cmp.FilterPath(func(p cmp.Path) bool { return p.Last().String() == ".Code" || p.Last().String() == ".Condition" }, cmp.Ignore())
	for _, c := range timed() {
		first := decide(t, c.ID, site)
		for range 20 {
			if diff := cmp.Diff(first, decide(t, c.ID, site), ignore); diff != "" {
				t.Fatal(diff)
			}
		}
	}
	if diff := cmp.Diff(before, site.Profile.Layers); diff != "" {
		t.Errorf("the layers were changed: %s", diff)
	}
}

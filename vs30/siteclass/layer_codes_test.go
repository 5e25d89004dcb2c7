package siteclass

import (
	"errors"
	"math"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// The codes that look at each layer: NCSE-02, the Turkish code of 2007, and
// RPA 99.

// TestNCSE: C = Σ Ci·ei/30 with 1.0, 1.3, 1.6 and 2.0 for types I to IV (NCSE-02
// Table 2.1), each written out.
func TestNCSE(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		c      float64
		class  string
	}{
		{"type I", column(deep, 750*(1+e)), 1.0, "C = 1.00"},
		{"750 is II", column(deep, 750), 1.3, "C = 1.30"},
		{"just above 400 is II", column(deep, 400*(1+e)), 1.3, "C = 1.30"},
		{"400 is III", column(deep, 400), 1.6, "C = 1.60"},
		{"just above 200 is III", column(deep, 200*(1+e)), 1.6, "C = 1.60"},
		{"200 is IV", column(deep, 200), 2.0, "C = 2.00"},
		{"one of each: (6·2.0+9·1.6+8·1.3+7·1.0)/30", column(6, 150, 9, 300, 8, 500, deep, 900), 1.46, "C = 1.46"},
		{"the order does not matter", column(7, 900, 6, 150, 8, 500, 9, 300, deep, 100), 1.46, "C = 1.46"},
		{"24 m of IV, 6 m of I: (24·2.0+6·1.0)/30 = 1.8", column(24, 150, deep, 900), 1.8, "C = 1.80"},
		{"24.1 m of IV: (24.1·2.0+5.9·1.0)/30", column(24.1, 150, deep, 900), 1.8 + 0.1/30, "C = 1.80"},
		// From 100 to 900 m/s over 30 m: 200 at 3.75 m, 400 at 11.25 m, 750 at
		// 24.375 m: (3.75·2.0 + 7.5·1.6 + 13.125·1.3 + 5.625·1.0)/30.
		{"gradient", []profile.Layer{{Bottom: 30, Vs: 100, VsBottom: 900}}, (3.75*2 + 7.5*1.6 + 13.125*1.3 + 5.625) / 30, "C = 1.41"},
		{"falling gradient", []profile.Layer{{Bottom: 30, Vs: 900, VsBottom: 100}}, (3.75*2 + 7.5*1.6 + 13.125*1.3 + 5.625) / 30, "C = 1.41"},
	} {
		d := decide(t, "ncse-02", siteOf(p.layers...))
		if c := foundOf(t, d, "C"); !near(c.Value, p.c, 1e-12) || d.Class != p.class {
			t.Errorf("%s: C = %.15g, class %q; want %.15g, %q", p.name, c.Value, d.Class, p.c, p.class)
		}
		for _, s := range d.Steps {
			if spectrum := s.Bound == 1.8; !spectrum && !s.Holds {
				t.Errorf("%s: %q does not hold", p.name, s)
			} else if spectrum && s.Holds != (p.c > 1.8+1e-9) {
				t.Errorf("%s: %q", p.name, s)
			}
		}
		if got := noteOf(d, "spectrum") != ""; got != (p.c > 1.8+1e-9) {
			t.Errorf("%s: C > 1.8 is noted: %v", p.name, got)
		}
	}
	d := decide(t, "ncse-02", siteOf(column(6, 150, 9, 300, 8, 500, deep, 900)...))
	var texts []string
	for _, s := range d.Steps {
		texts = append(texts, s.String())
	}
	want := `ground of type IV from 0 m to 6 m, fastest: 150 m/s ≤ 200 m/s: yes (Table 2.1)
ground of type III from 6 m to 15 m, slowest: 300 m/s > 200 m/s: yes (Table 2.1)
ground of type III from 6 m to 15 m, fastest: 300 m/s ≤ 400 m/s: yes (Table 2.1)
ground of type II from 15 m to 23 m, slowest: 500 m/s > 400 m/s: yes (Table 2.1)
ground of type II from 15 m to 23 m, fastest: 500 m/s ≤ 750 m/s: yes (Table 2.1)
ground of type I from 23 m to 30 m, slowest: 900 m/s > 750 m/s: yes (Table 2.1)
coefficient of the ground, C: 1.5 > 1.8: no (2.4)`
	if got := strings.Join(texts, "\n"); got != want {
		t.Errorf("steps:\n%s", got)
	}
}

// TestTEC: Tables 6.1 and 6.2 of the Turkish code of 2007, the topmost layer
// by group and thickness at, below and above each bound.
func TestTEC(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		soil  string
		h, v  float64
		class string
		group string
	}{
		{"granite", 4, 1001, "Z1", "A"}, {"granite", 4, 1000, "Z1", "B"}, {"granite", 16, 1000, "Z2", "B"}, {"weathered rock", 16, 700, "Z3", "C"}, {"weathered rock", 15, 400, "Z2", "C"},
		{"dense sand", 15, 701, "Z1", "A"}, {"dense sand", 15, 700, "Z1", "B"}, {"dense sand", 15 * (1 + e), 450, "Z2", "B"}, {"sandy gravel", 15, 401, "Z1", "B"},
		{"sand", 15, 400, "Z2", "C"}, {"sand", 15 * (1 + e), 300, "Z3", "C"}, {"sand", 50, 200, "Z3", "C"}, {"sand", 50 * (1 + e), 200, "Z4", "C"},
		{"sand", 10, 199, "Z3", "D"}, {"sand", 10 * (1 + e), 199, "Z4", "D"},
		{"silty clay", 15, 301, "Z1", "B"}, {"silty clay", 15, 300, "Z2", "C"}, {"silty clay", 20, 350, "Z2", "B"}, {"silty clay", 10, 150, "Z3", "D"}, {"silty clay", 15, 701, "Z1", "A"},
	} {
		layers := column(p.h, p.v, deep, 2000)
		layers[0].Soil, layers[1].Soil = p.soil, "rock"
		if p.group == "A" {
			layers[1].Vs = 650 // rock of group C: the layer ends there
		}
		d := decide(t, "tec-2007", siteOf(layers...))
		h1 := foundOf(t, d, "h1 of group "+p.group)
		if d.Class != p.class || !near(h1.Value, p.h, 1e-12) || h1.AtLeast || !near(d.Velocity, p.v, 1e-12) || noteOf(d, "material-unknown") != "" {
			t.Errorf("%.10g m of %s of %v m/s: %s, %+v, want %s", p.h, p.soil, p.v, d.Class, h1, p.class)
		}
		for _, s := range d.Steps {
			if s.Clause == "Table 6.1" && !s.Holds {
				t.Errorf("%.10g m of %s of %v m/s: %q does not hold", p.h, p.soil, p.v, s)
			}
		}
	}
}

// TestTECMaterial: without a description the softest group that any material
// has for the velocity; rock slower than its rows likewise. Layers of one
// group are one layer.
func TestTECMaterial(t *testing.T) {
	for v, group := range map[float64]string{1200: "A", 1000: "B", 800: "B", 700: "C", 500: "C", 450: "C", 350: "C", 250: "C", 200: "C", 150: "D"} {
		below := 2000.0
		if v >= 1200 {
			below = 100
		}
		d := decide(t, "tec-2007", siteOf(column(12, v, deep, below)...))
		if foundOf(t, d, "h1 of group "+group).Value != 12 || noteOf(d, "material-unknown") == "" {
			t.Errorf("%v m/s of nothing stated: %+v, %v", v, d.Found, d.Notes)
		}
	}
	rock := column(12, 350, deep, 2000)
	rock[0].Soil = "crushed rock"
	if d := decide(t, "tec-2007", siteOf(rock...)); foundOf(t, d, "h1 of group C").Value != 12 || noteOf(d, "material-unknown") == "" {
		t.Errorf("rock of 350 m/s is in no row of rock: %+v, %v", d.Found, d.Notes)
	}
	layers := column(6, 220, 6, 390, 4, 250, deep, 900)
	for i := range layers {
		layers[i].Soil = "sand"
	}
	if d := decide(t, "tec-2007", siteOf(layers...)); foundOf(t, d, "h1 of group C").Value != 16 || d.Class != "Z3" {
		t.Errorf("three layers of group C: %+v, class %s", d.Found, d.Class)
	}
	// From 150 to 350 m/s over 20 m sand passes 200 at 5 m: 5 m of group D.
	gradient := []profile.Layer{{Bottom: 20, Vs: 150, VsBottom: 350, Soil: "sand"}, {Top: 20, Bottom: deep, Vs: 900, Soil: "rock"}}
	if d := decide(t, "tec-2007", siteOf(gradient...)); !near(foundOf(t, d, "h1 of group D").Value, 5, 1e-12) || d.Class != "Z3" {
		t.Errorf("gradient: %+v, class %s", d.Found, d.Class)
	}
}

// TestTECGoesOn: a topmost layer that goes on below the profile is typed only
// where how far does not matter.
func TestTECGoesOn(t *testing.T) {
	c, _ := Find("tec-2007")
	var short *vs30.ShortError
	sand := func(h, v float64) Site {
		l := column(h, v)
		l[0].Soil = "sand"
		return siteOf(l...)
	}
	for _, p := range []struct {
		site   Site
		class  string
		needed float64 // m; 0 where there is a class
	}{
		{sand(31, 250), "", 50.5}, {sand(51, 250), "Z4", 0}, {sand(9, 150), "", 10.1}, {sand(11, 150), "Z4", 0},
		{sand(9, 450), "", 15.15}, {sand(16, 450), "Z2", 0}, {sand(3, 800), "Z1", 0},
		{sand(deep, 250), "Z4", 0}, {sand(deep, 150), "Z4", 0}, {sand(deep, 450), "Z2", 0}, {sand(deep, 800), "Z1", 0},
	} {
		d, err := c.Decide(p.site)
		if p.needed > 0 {
			if !errors.As(err, &short) || !near(short.Needed, p.needed, 1e-12) {
				t.Errorf("%+v: class %s, %v; want %v m needed", p.site.Profile.Layers[0], d.Class, err, p.needed)
			}
			continue
		}
		if err != nil || d.Class != p.class || math.IsInf(d.Thickness, 1) {
			t.Errorf("%+v: class %s over %v m, %v; want %s", p.site.Profile.Layers[0], d.Class, d.Thickness, err, p.class)
		}
	}
}

// TestRPA: no layer slower than 800 m/s from the surface, than 400 from 3 m,
// than 200 from 10 m, each down to 20 m; the printed bounds are ≥.
func TestRPA(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		layers []profile.Layer
		class  string
		note   bool // the average is that of another row
	}{
		{column(deep, 800), "S1", false}, {column(deep, 800*(1-e)), "S2", false},
		{column(deep, 400), "S2", false}, {column(deep, 400*(1-e)), "S3", false},
		{column(deep, 200), "S3", false}, {column(deep, 200*(1-e)), "S4", false},
		{column(3, 150, deep, 900), "S2", false},   // 20/(3/150+17/900) = 514
		{column(3.1, 150, deep, 900), "S3", true},  // 20/(3.1/150+16.9/900) = 507, S2
		{column(10, 150, deep, 450), "S3", false},  // 20/(10/150+10/450) = 225
		{column(10.1, 150, deep, 450), "S4", true}, // 225, S3
		{column(2, 500, deep, 900), "S2", true},    // 20/(2/500+18/900) = 833, S1
		{column(20, 500, deep, 100), "S2", false},  // below 20 m nothing is asked
		{column(19, 500, deep, 100), "S4", true},   // 20/(19/500+1/100) = 417, S2
	} {
		d := decide(t, "rpa-99", siteOf(p.layers...))
		if d.Class != p.class || d.Thickness != 20 {
			t.Errorf("%v: class %s over %v m, want %s", p.layers, d.Class, d.Thickness, p.class)
		}
		if got := noteOf(d, "average") != ""; got != p.note {
			t.Errorf("%v: class %s, average %v m/s; noted is %v", p.layers, d.Class, d.Velocity, got)
		}
	}
	if i := decide(t, "rpa-99", uniform(300)).Code.Lookup(300); i != 2 {
		t.Errorf("300 m/s is in row %d", i)
	}
}

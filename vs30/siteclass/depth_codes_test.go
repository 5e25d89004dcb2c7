package siteclass

import (
	"errors"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// The codes that look at the depth of the rock and the velocity above it: EN
// 1998-1-1:2024, KDS 41 17 00 and GB 50011.

// foundOf returns a quantity that a decision found.
func foundOf(t *testing.T, d Decision, of string) Found {
	t.Helper()
	f := quantityOf(d.Found, of)
	if f == nil {
		t.Fatalf("%s: %s was not found: %+v", d.Code.ID, of, d.Found)
	}
	return *f
}

// TestEC8_2024 goes through the table, its rows and columns at, below and
// above each bound: ground of one velocity on rock of 1,000 m/s.
func TestEC8_2024(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		h, v  float64
		class string
	}{
		{5, 400, "A"}, {5, 250, "A"}, {5, 150, "E"}, {5, 150 * (1 - e), "outside A–F"},
		{5, 250 * (1 - e), "E"}, {5 * (1 + e), 400, "B"}, {5 * (1 + e), 400 * (1 - e), "E"}, {5 * (1 + e), 150, "E"},
		{30, 400, "B"}, {30, 250, "E"}, {30, 250 * (1 - e), "E"},
		{30 * (1 + e), 400, "B"}, {30 * (1 + e), 400 * (1 - e), "C"}, {30 * (1 + e), 250, "C"}, {30 * (1 + e), 250 * (1 - e), "D"}, {30 * (1 + e), 150, "D"},
		{100, 400, "B"}, {100, 250, "C"}, {100, 150, "D"}, {100, 150 * (1 - e), "outside A–F"},
		{100 * (1 + e), 400, "B"}, {100 * (1 + e), 400 * (1 - e), "F"}, {100 * (1 + e), 250, "F"}, {100 * (1 + e), 150, "F"}, {100 * (1 + e), 150 * (1 - e), "outside A–F"},
		{12, 799, "B"}, {2, 799, "A"},
	} {
		d := decide(t, "ec8-2024", siteOf(column(p.h, p.v, deep, 1000)...))
		if d.Class != p.class || !near(d.Velocity, p.v, 1e-12) || !near(d.Thickness, min(30, p.h), 1e-12) {
			t.Errorf("%.10g m of %.10g m/s: category %s, %v m/s over %v m; want %s", p.h, p.v, d.Class, d.Velocity, d.Thickness, p.class)
		}
		if got := noteOf(d, "no-category") != ""; got != (p.class == "outside A–F") {
			t.Errorf("%.10g m of %.10g m/s: notes %v", p.h, p.v, d.Notes)
		}
	}
	for v, want := range map[float64]string{800: "A", 2000: "A"} {
		if d := decide(t, "ec8-2024", uniform(v)); d.Class != want || noteOf(d, "no-cover") == "" {
			t.Errorf("rock of %v m/s: %s, %v", v, d.Class, d.Notes)
		}
	}
	// Rock faster than 800 m/s on top of slower ground: H800 is not its top.
	d := decide(t, "ec8-2024", siteOf(column(10, 1200, 30, 500, deep, 900)...))
	if h := foundOf(t, d, "H800"); h.Value != 40 || d.Class != "B" { // 30/(10/1200+20/500) = 620.7
		t.Errorf("fast over slow: H800 %v, category %s", h.Value, d.Class)
	}
}

// TestRockNotReached: a profile that ends above the rock knows its depth only
// to be more than that; what a deeper rock would change is not assessed.
func TestRockNotReached(t *testing.T) {
	for _, p := range []struct {
		id         string
		layers     []profile.Layer
		class      string
		known      float64
		unassessed string
	}{
		{"ec8-2024", column(30, 300), "C", 30, "H800 of more than 100 m, below what the profile reaches, with which the class would be F"},
		{"ec8-2024", column(12, 300, deep, 310), "C", 30, "H800 of more than 100 m, below what the profile reaches, with which the class would be F"},
		{"ec8-2024", column(45, 200), "D", 45, "H800 of more than 100 m, below what the profile reaches, with which the class would be F"},
		{"ec8-2024", column(45, 500), "B", 45, ""}, // B however deep
		{"ec8-2024", column(120, 300), "F", 120, ""},
		{"kds-41-17", column(30, 300), "S4", 30, ""},
		{"kds-41-17", column(12, 150, deep, 160), "S5", 30, ""},
		{"gb-50011-2010", column(22, 200), "II", 22, "cover of more than 50 m, below what the profile reaches, with which the class would be III"},
		{"gb-50011-2010", column(22, 140), "III", 22, "cover of more than 80 m, below what the profile reaches, with which the class would be IV"},
		{"gb-50011-2010", column(51, 200), "III", 51, ""},
		{"gb-50011-2010", column(22, 300), "II", 22, ""},
	} {
		d := decide(t, p.id, siteOf(p.layers...))
		found := quantityOf(d.Found, "H800")
		if found == nil {
			found = quantityOf(d.Found, "H")
		}
		if found == nil {
			found = quantityOf(d.Found, "cover")
		}
		if d.Class != p.class || !found.AtLeast || found.Value != p.known {
			t.Errorf("%s, %v: class %s, %+v; want %s, more than %v", p.id, p.layers, d.Class, *found, p.class, p.known)
		}
		got := strings.Join(d.Unassessed, "; ")
		if p.unassessed == "" && strings.Contains(got, "below what the profile reaches") || !strings.Contains(got, p.unassessed) {
			t.Errorf("%s, %v: not assessed: %q, want %q", p.id, p.layers, got, p.unassessed)
		}
		if noteOf(d, "rock-not-reached") == "" {
			t.Errorf("%s, %v: notes %v", p.id, p.layers, d.Notes)
		}
	}
	for _, id := range []string{"ec8-2024", "kds-41-17", "gb-50011-2010"} {
		c, _ := Find(id)
		_, err := c.Decide(siteOf(column(12, 200)...))
		var short *vs30.ShortError
		if !errors.As(err, &short) || short.Needed != c.Depth || !strings.Contains(err.Error(), "no rock above that depth was reached") {
			t.Errorf("%s, 12 m without rock: %v", id, err)
		}
		if _, err := c.Decide(siteOf(column(12, 200, 1, 900)...)); err != nil {
			t.Errorf("%s, 13 m down to rock: %v", id, err)
		}
	}
}

// TestKDSVectors: Vs,soil = H/Σ(h/v) over the soil, or the top 30 m of it
// (KDS 41 17 00:2022, 4.1.1), each written out; the class by H > 20 m and 260
// or 180 m/s (Cho, Manandhar and Kim 2016).
func TestKDSVectors(t *testing.T) {
	for _, k := range []struct {
		name   string
		layers []profile.Layer
		h, v   float64
		class  string
		note   string
	}{
		// 12/(4/180 + 8/320) = 12/0.0472222
		{"KD1", column(4, 180, 8, 320, deep, 800), 12, 254.1176, "S3", ""},
		// 20/(10/200 + 10/260) = 20/0.0884615; H of 20 m is still shallow
		{"KD2", column(10, 200, 10, 260, deep, 800), 20, 226.0870, "S3", ""},
		{"KD3", column(10.1, 260, 10, 260, deep, 800), 20.1, 260, "S4", ""},
		// 30/(10/150 + 20/260) = 30/0.1435897
		{"KD4", column(10, 150, 35, 260, deep, 800), 45, 208.9286, "S4", ""},
		// 30/(12/110 + 18/240) = 30/0.1840909
		{"KD5", column(12, 110, 20, 240, deep, 800), 32, 162.9630, "S5", ""},
		// 28/(8/330 + 20/400) = 28/0.0742424; 360 m/s and more: Fv × 0.80
		{"KD6", column(8, 330, 20, 400, deep, 800), 28, 377.1429, "S4", "fv-factor"},
	} {
		d := decide(t, "kds-41-17", siteOf(k.layers...))
		if h := foundOf(t, d, "H"); !near(h.Value, k.h, 1e-12) || !near(d.Velocity, k.v, 1e-6) || d.Class != k.class {
			t.Errorf("%s: H %v, %.7g m/s, class %s; want %v, %v, %s", k.name, h.Value, d.Velocity, d.Class, k.h, k.v, k.class)
		}
		if got := noteOf(d, "fv-factor") != ""; got != (k.note != "") {
			t.Errorf("%s: notes %v", k.name, d.Notes)
		}
	}
}

// TestKDSBounds: soil of one velocity on bedrock of 760 m/s, which counts as
// bedrock, at, below and above each bound.
func TestKDSBounds(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		h, v  float64
		class string
	}{
		{1, 100, "S1"}, {3 * (1 - e), 300, "S1"}, {3, 260, "S2"}, {3, 260 * (1 - e), "S3"}, {3, 120, "S5"}, {3, 120 * (1 + e), "S3"},
		{20, 260, "S2"}, {20, 260 * (1 - e), "S3"}, {20, 120, "S5"}, {20 * (1 + e), 260, "S4"},
		{20 * (1 + e), 180, "S4"}, {20 * (1 + e), 180 * (1 - e), "S5"}, {40, 180, "S4"}, {40, 179, "S5"},
	} {
		d := decide(t, "kds-41-17", siteOf(column(p.h, p.v, deep, 760)...))
		if d.Class != p.class {
			t.Errorf("%.10g m of %.10g m/s: class %s, want %s", p.h, p.v, d.Class, p.class)
		}
	}
	for h, want := range map[float64]string{0.5: "", 1: "S2", 2.9: "S2"} {
		d := decide(t, "kds-41-17", siteOf(column(h, 300, deep, 800)...))
		if got := noteOf(d, "table-alone"); d.Class != "S1" || (got != "") != (want != "") || !strings.HasSuffix(got, want) {
			t.Errorf("bedrock at %v m: class %s, %q", h, d.Class, got)
		}
	}
	if got := noteOf(decide(t, "kds-41-17", siteOf(column(2, 200, deep, 800)...)), "table-alone"); !strings.HasSuffix(got, "would be S3") {
		t.Errorf("2 m of 200 m/s: %q", got)
	}
	if d := decide(t, "kds-41-17", siteOf(column(20, 300, deep, 759)...)); d.Class != "S4" {
		t.Errorf("759 m/s is no bedrock: class %s", d.Class) // 30/(20/300+10/759) = 375.7 over deep soil
	}
	d := decide(t, "kds-41-17", siteOf(column(20, 140, deep, 170)...))
	if got := noteOf(d, "factor-unknown-bedrock"); d.Class != "S5" || !strings.Contains(got, "1.10") {
		t.Errorf("S5 without bedrock: class %s, %q", d.Class, got)
	}
	// What stands on more than memory is used where it gives the class too.
	if d := decide(t, "kds-41-17", siteOf(column(25, 110, deep, 800)...)); d.Class != "S5" || d.Standing != OneSource {
		t.Errorf("deep and below 120 m/s: class %s, %s", d.Class, d.Standing)
	}
	if d := decide(t, "kds-41-17", siteOf(column(15, 110, deep, 800)...)); d.Class != "S5" || d.Standing != FromMemory {
		t.Errorf("shallow and below 120 m/s: class %s, %s", d.Class, d.Standing)
	}
	site := siteOf(column(12, 300, deep, 800)...)
	site.Ground.Peat = of(4)
	if d := decide(t, "kds-41-17", site); d.Class != "S6" || !strings.HasSuffix(noteOf(d, "special-study"), "by the average alone, 300 m/s, the class would be S2") {
		t.Errorf("4 m of peat: class %s, %q", d.Class, noteOf(d, "special-study"))
	}
}

// TestGBWorkedExamples: solved items of the Chinese registered engineers'
// examination under GB 50011, recomputed. The printed layers end with "> 500"
// or "bedrock"; 600 m/s stands for that here, and every cover and vse is as
// printed whatever it is above 500.
func TestGBWorkedExamples(t *testing.T) {
	described := func(soil string, at int, layers []profile.Layer) []profile.Layer {
		layers[at].Soil = soil
		return layers
	}
	for _, w := range []struct {
		name   string
		layers []profile.Layer
		cover  float64 // m
		vse    float64 // m/s, d0/Σ(d/v)
		class  string
	}{
		// 20/(1.5/80 + 6/210 + 11.5/243 + 1/350) = 20/0.0975037
		{"W1", column(1.5, 80, 6, 210, 11.5, 243, 7, 350, deep, 600), 26, 205.12, "II"},
		// 20/(2/120 + 18/400) = 20/0.0616667; the cover is 40 m less 1 m
		{"W4, volcanic interlayer", described("volcanic interlayer", 2, column(2, 120, 23, 400, 1, 1000, 14, 380, deep, 700)), 39, 324.3243, "II"},
		// The print deducts the boulder; by 4.1.4-3 it is not deducted. The class is the same.
		{"W5, boulder", described("boulder", 2, column(2, 120, 23, 400, 1, 800, 14, 350, deep, 700)), 40, 324.3243, "II"},
		// 20/(12/130 + 8/260) = 20/0.1230769
		{"W6", column(12, 130, 10, 260, deep, 900), 22, 162.5, "II"},
		// 12/(9/180 + 3/300) = 12/0.06
		{"W10 A", column(9, 180, 3, 300, deep, 600), 12, 200, "II"},
		// 15/(3/150 + 9/225 + 3/300) = 15/0.07
		{"W10 B", column(3, 150, 9, 225, 3, 300, deep, 600), 15, 214.2857, "II"},
	} {
		d := decide(t, "gb-50011-2010", siteOf(w.layers...))
		if c := foundOf(t, d, "cover"); !near(c.Value, w.cover, 1e-12) || c.AtLeast || !near(d.Velocity, w.vse, 1e-5) || d.Class != w.class {
			t.Errorf("%s: cover %+v, vse %.7g, class %s; want %v m, %v, %s", w.name, c, d.Velocity, d.Class, w.cover, w.vse, w.class)
		}
	}
	// W3: 330/130 > 2.5 at 6 m ends the cover under the 2001 edition. Under
	// that of 2010 the layer of 330 m/s itself would have to have 400, and 500
	// is not above 500: the cover is not found within 22 m, and
	// 20/(6/130 + 6/330 + 8/500) = 20/0.0803357.
	d := decide(t, "gb-50011-2010", siteOf(column(6, 130, 6, 330, 10, 500)...))
	if c := foundOf(t, d, "cover"); !c.AtLeast || c.Value != 22 || !near(d.Velocity, 248.96, 1e-4) || d.Class != "II" {
		t.Errorf("W3: cover %+v, vse %.7g, class %s", c, d.Velocity, d.Class)
	}
}

// TestGBCover: clause 4.1.4, rule by rule.
func TestGBCover(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		cover  float64
		clause string
	}{
		{"hard ground at 12 m", column(12, 200, deep, 501), 12, "4.1.4-1"},
		{"exactly 500 does not end it, 501 below does", column(12, 200, 5, 500, deep, 501), 17, "4.1.4-1"},
		{"below hard ground 500 is allowed", column(12, 200, 5, 600, deep, 500), 12, "4.1.4-1"},
		{"below hard ground 499 is not", column(12, 300, 5, 600, 5, 499, deep, 600), 22, "4.1.4-1"},
		{"2.5 times every layer above: 401 over 160", column(6, 160, 8, 401, deep, 600), 6, "4.1.4-2"},
		{"exactly 2.5 times is not more", column(6, 160, 8, 400, deep, 600), 14, "4.1.4-1"},
		{"every layer, not the one just above", column(3, 200, 3, 150, 8, 401, deep, 600), 14, "4.1.4-1"},
		{"that layer of 400 and all below", column(6, 150, 8, 410, 4, 399, deep, 600), 18, "4.1.4-1"},
		{"that layer slower than 400", column(6, 150, 8, 399, deep, 600), 14, "4.1.4-1"},
		{"above 5 m it does not count", column(4.9, 150, 8, 410, deep, 600), 12.9, "4.1.4-1"},
		{"from 5 m on it does", column(5, 150, 8, 410, deep, 600), 5, "4.1.4-2"},
		{"hard ground first", column(3, 150, 8, 600, deep, 900), 3, "4.1.4-1"},
		{"growing from 100 to 600 over 25 m passes 500 at 20 m", []profile.Layer{{Bottom: 25, Vs: 100, VsBottom: 600}, {Top: 25, Bottom: deep, Vs: 700}}, 20, "4.1.4-1"},
	} {
		d := decide(t, "gb-50011-2010", siteOf(p.layers...))
		if c := foundOf(t, d, "cover"); !near(c.Value, p.cover, 1e-12) || c.AtLeast {
			t.Errorf("%s: cover %+v, want %v", p.name, c, p.cover)
		}
		clauses := ""
		for _, s := range d.Steps {
			if strings.HasPrefix(s.Clause, "4.1.4") {
				clauses += s.Clause + " "
				if !s.Holds {
					t.Errorf("%s: the cover ends where %q does not hold", p.name, s)
				}
			}
		}
		if !strings.HasPrefix(clauses, p.clause) {
			t.Errorf("%s: by %q, want %s", p.name, clauses, p.clause)
		}
	}
}

// TestGBDescribed: boulders count as the slower of their neighbours, volcanic
// interlayers are taken out, and a hard layer of no description counts as it
// is.
func TestGBDescribed(t *testing.T) {
	layers := func(soil string) []profile.Layer {
		l := column(8, 200, 2, 800, 20, 250, deep, 700)
		l[1].Soil = soil
		return l
	}
	for _, p := range []struct {
		soil  string
		cover float64
		vse   float64 // over 20 m
		note  string
	}{
		{"", 30, 20 / (8/200. + 2/800. + 10/250.), "hard-interlayer"},
		{"basalt", 30, 20 / (8/200. + 2/800. + 10/250.), "hard-interlayer"},
		{"large boulder", 30, 20 / (10/200. + 10/250.), "boulder"},
		{"hard lens", 30, 20 / (10/200. + 10/250.), "boulder"},
		{"hard volcanic rock", 28, 20 / (8/200. + 12/250.), "volcanic-interlayer"},
	} {
		d := decide(t, "gb-50011-2010", siteOf(layers(p.soil)...))
		if c := foundOf(t, d, "cover"); c.Value != p.cover || !near(d.Velocity, p.vse, 1e-12) || d.Class != "II" {
			t.Errorf("%q: cover %v, vse %v, class %s; want %v, %v", p.soil, c.Value, d.Velocity, d.Class, p.cover, p.vse)
		}
		for _, id := range []string{"hard-interlayer", "boulder", "volcanic-interlayer"} {
			if got := noteOf(d, id) != ""; got != (id == p.note) {
				t.Errorf("%q: note %s is there: %v", p.soil, id, got)
			}
		}
	}
	// Volcanic rock with nothing softer below is no interlayer but the base.
	base := column(8, 200, deep, 900)
	base[1].Soil = "volcanic rock"
	if d := decide(t, "gb-50011-2010", siteOf(base...)); foundOf(t, d, "cover").Value != 8 || noteOf(d, "volcanic-interlayer") != "" {
		t.Errorf("volcanic base: %+v, %v", d.Found, d.Notes)
	}
	soft := column(8, 200, 2, 300, deep, 900)
	soft[1].Soil = "volcanic ash"
	if d := decide(t, "gb-50011-2010", siteOf(soft...)); foundOf(t, d, "cover").Value != 10 {
		t.Errorf("soft volcanic ash is no hard interlayer: %+v", d.Found)
	}
}

// TestGBTable: one layer on hard ground of 600 or 900 m/s, at, below and above
// each bound of Table 4.1.6.
func TestGBTable(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		h, v  float64
		class string
	}{
		{5 * (1 - e), 300, "I1"}, {5, 300, "II"}, {90, 300, "II"}, {5 * (1 - e), 500, "I1"}, {5, 250 * (1 + e), "II"},
		{3 * (1 - e), 200, "I1"}, {3, 200, "II"}, {50, 200, "II"}, {50 * (1 + e), 200, "III"}, {200, 200, "III"},
		{4, 250, "II"}, {4, 250 * (1 + e), "I1"}, {60, 150 * (1 + e), "III"}, {60, 250, "III"}, {60, 250 * (1 + e), "II"},
		{3 * (1 - e), 150, "I1"}, {3, 150, "II"}, {15, 150, "II"}, {15 * (1 + e), 150, "III"}, {80, 150, "III"}, {80 * (1 + e), 150, "IV"},
		{20, 150 * (1 + e), "II"}, {20, 150, "III"}, {90, 150 * (1 + e), "III"},
	} {
		d := decide(t, "gb-50011-2010", siteOf(column(p.h, p.v, deep, 900)...))
		if d.Class != p.class || !near(d.Thickness, min(20, p.h), 1e-12) {
			t.Errorf("%.10g m of %.10g m/s: class %s over %v m, want %s", p.h, p.v, d.Class, d.Thickness, p.class)
		}
		if got := noteOf(d, "boundary-overlap") != ""; got != (p.h == 15) {
			t.Errorf("%.10g m of %.10g m/s: the shared 15 m is noted: %v", p.h, p.v, got)
		}
	}
	for v, want := range map[float64]string{501: "I1", 800: "I1", 800 * (1 + e): "I0", 2000: "I0"} {
		if d := decide(t, "gb-50011-2010", uniform(v)); d.Class != want {
			t.Errorf("rock of %.10g m/s: class %s, want %s", v, d.Class, want)
		}
	}
	// 6/(1/200+5/900) = 568 m/s over a seam at 6 m: in no row.
	d := decide(t, "gb-50011-2010", siteOf(column(5, 900, 1, 200, deep, 900)...))
	if d.Class != "II" || noteOf(d, "no-row") == "" {
		t.Errorf("vse of %v under a cover: class %s, %v", d.Velocity, d.Class, d.Notes)
	}
}

// TestGBMargin: of vse and cover the nearer, in percent of itself. 12 m of
// 240 m/s: vse 4.2 % below 250, but a cover of 12 m is II above it too; 150 is
// 37.5 % below, where 12 m is II as well; 3 m is 75 % below.
func TestGBMargin(t *testing.T) {
	d := decide(t, "gb-50011-2010", siteOf(column(12, 240, deep, 900)...))
	if m := d.Margin; m == nil || m.ToClass != "I1" || m.Bound != 3 || m.Unit != "m" || !near(m.Percent, -75, 1e-12) {
		t.Errorf("margin %+v", d.Margin)
	}
	d = decide(t, "gb-50011-2010", siteOf(column(60, 240, deep, 900)...))
	if m := d.Margin; m == nil || m.ToClass != "II" || m.Bound != 250 || m.Unit != "m/s" || !near(m.Percent, 100*10/240., 1e-12) {
		t.Errorf("margin %+v", d.Margin)
	}
}

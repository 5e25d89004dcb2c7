package siteclass

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// The codes that type the ground by its period, and those of Australia and
// New Zealand, which take the period for what is neither rock nor very soft.

// TestUniformPeriod: uniform ground of H m and V m/s has the period 4H/V by
// either formula, whatever the base below; the ground is typed at, below and
// above each printed bound. Layers of 1 m must not change it.
func TestUniformPeriod(t *testing.T) {
	const e = 1e-8
	for _, p := range []struct {
		id, of string
		period float64
		class  string
	}{
		{"jp-bridges-v", "TG", 0.2 * (1 - e), "I"}, {"jp-bridges-v", "TG", 0.2, "II"}, {"jp-bridges-v", "TG", 0.6 * (1 - e), "II"},
		{"jp-bridges-v", "TG", 0.6, "III"}, {"jp-bridges-v", "TG", 2, "III"}, {"jp-bridges-v", "TG", 0.05, "I"},
		{"jp-1793", "Tg", 0.2, "1"}, {"jp-1793", "Tg", 0.2 * (1 + e), "2"}, {"jp-1793", "Tg", 0.75, "2"}, {"jp-1793", "Tg", 0.75 * (1 + e), "3"},
		{"as-1170.4", "T", 0.6, "Ce"}, {"as-1170.4", "T", 0.6 * (1 + e), "De"},
		{"nzs-1170.5", "T", 0.6, "C"}, {"nzs-1170.5", "T", 0.6 * (1 + e), "D"},
	} {
		for _, v := range []float64{180, 250} {
			h := p.period * v / 4
			layers := column(h, v, deep, 700)
			fine := []profile.Layer{}
			for top := 0.0; top < h; top += h / 37 {
				fine = append(fine, profile.Layer{Top: top, Bottom: min(top+h/37, h), Vs: v})
			}
			fine[len(fine)-1].Bottom = h
			fine = append(fine, layers[1])
			for _, l := range [][]profile.Layer{layers, fine} {
				if h < 3.1 && !strings.HasPrefix(p.id, "jp") {
					continue
				}
				d := decide(t, p.id, siteOf(l...))
				if f := foundOf(t, d, p.of); !near(f.Value, p.period, 1e-12) || f.AtLeast || d.Class != p.class || d.Route != "period" {
					t.Errorf("%s, %d layers of %v m/s: %s = %.12g, class %s, route %s; want %.12g, %s", p.id, len(l), v, p.of, f.Value, d.Class, d.Route, p.period, p.class)
				}
				if strings.HasPrefix(p.id, "jp") && (!near(d.Velocity, v, 1e-12) || !near(d.Thickness, h, 1e-12)) {
					t.Errorf("%s: average %v m/s over %v m, want %v over %v", p.id, d.Velocity, d.Thickness, v, h)
				}
			}
		}
	}
}

// TestTwoLayerPeriods, by hand: 5 m of 100 m/s over 10 m of 200 m/s. TG =
// 4·(5/100 + 10/200) = 0.4 s. Tg = √(32·(5·2.5/100² + 10·10/200²)) =
// √(32·(0.00125+0.0025)) = √0.12 = 0.346410 s.
func TestTwoLayerPeriods(t *testing.T) {
	site := siteOf(column(5, 100, 10, 200, deep, 500)...)
	d := decide(t, "jp-bridges-v", site)
	if f := foundOf(t, d, "TG"); !near(f.Value, 0.4, 1e-12) || d.Class != "II" {
		t.Errorf("TG = %v, type %s", f.Value, d.Class)
	}
	if m := d.Margin; m == nil || m.ToClass != "I" && m.ToClass != "III" || m.Unit != "s" || !near(math.Abs(m.Percent), 50, 1e-9) {
		t.Errorf("0.4 s is 50 %% from either bound: margin %+v", d.Margin)
	}
	d = decide(t, "jp-1793", site)
	if f := foundOf(t, d, "Tg"); !near(f.Value, math.Sqrt(0.12), 1e-12) || d.Class != "2" {
		t.Errorf("Tg = %v, type %s", f.Value, d.Class)
	}
	if m := d.Margin; m == nil || m.ToClass != "1" || m.Bound != 0.2 || m.Unit != "s" || !near(m.Percent, 100*(0.2/math.Sqrt(0.12)-1), 1e-9) {
		t.Errorf("margin %+v", d.Margin)
	}
	// The notification counts from the foundation: 5 m down only the second
	// layer is left, 4·10/200 = 0.2 s.
	site.FoundationDepth = profile.Known(5)
	if d := decide(t, "jp-1793", site); !near(foundOf(t, d, "Tg").Value, 0.2, 1e-12) || d.Class != "1" || d.Datum != 5 {
		t.Errorf("from 5 m: %+v, type %s", d.Found, d.Class)
	}
	if d := decide(t, "jp-bridges-v", site); !near(foundOf(t, d, "TG").Value, 0.4, 1e-12) {
		t.Errorf("the bridge code counts from the ground: %+v", d.Found)
	}
}

// TestGravityPeriodOfAGradient holds the closed form of ∫z/V² against 20,000
// thin uniform layers, for steep, slight and falling gradients; and shows that
// neither branch jumps where the form changes.
func TestGravityPeriodOfAGradient(t *testing.T) {
	for _, v1 := range []float64{110, 199, 199.99, 200.0001, 201, 203.9, 204.1, 260, 390} {
		l := profile.Layer{Top: 3, Bottom: 15, Vs: 200, VsBottom: v1}
		got, err := gravityPeriod.of([]profile.Layer{{Bottom: 3, Vs: 150}, l}, 1, 15)
		if err != nil {
			t.Fatal(err)
		}
		sum := 2 * 1.0 / (150 * 150) // 2 m of 150 m/s below a datum of 1 m, mean depth 1 m
		const n = 20000
		for i := range n {
			h := 12.0 / n
			z := 3 + h*(float64(i)+0.5)
			sum += h * (z - 1) / math.Pow(l.VsAt(z), 2)
		}
		if want := math.Sqrt(32 * sum); !near(got, want, 1e-8) {
			t.Errorf("from 200 to %v m/s: %.12g, fine layers give %.12g", v1, got, want)
		}
	}
	below, above := depthOverSquare(0, 10, 200, 204-1e-9), depthOverSquare(0, 10, 200, 204+1e-9)
	if !near(below, above, 1e-10) {
		t.Errorf("a jump at a gradient of 2 %%: %.15g, %.15g", below, above)
	}
}

// TestBase: the base must be kept to the end of the profile; its bound counts
// as base.
func TestBase(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		period float64
		class  string
	}{
		{"base of exactly 300", column(15, 150, deep, 300), 0.4, "II"},
		{"299 is none, 900 below is", column(15, 150, 29.9, 299, deep, 900), 0.8, "III"},
		{"a hard crust is none", column(2, 400, 15, 150, deep, 500), 0.42, "II"},
		{"base at the ground", column(deep, 350), 0, "I"},
		{"base at the ground, 8 m known", column(8, 350), 0, "I"},
	} {
		d := decide(t, "jp-bridges-v", siteOf(p.layers...))
		if f := foundOf(t, d, "TG"); math.Abs(f.Value-p.period) > 1e-12 || d.Class != p.class || d.Velocity <= 0 {
			t.Errorf("%s: TG = %v, type %s, %v m/s; want %v, %s", p.name, f.Value, d.Class, d.Velocity, p.period, p.class)
		}
	}
}

// TestNoBase: ground that ends above the base is typed only where that is
// certain. 18 m of 150 m/s have 0.48 s; the last bound, 0.6 s, is passed by
// 1 % at 22.725 m, as 4·22.725/150 = 0.606 s.
func TestNoBase(t *testing.T) {
	c, _ := Find("jp-bridges-v")
	_, err := c.Decide(siteOf(column(18, 150)...))
	var short *vs30.ShortError
	if !errors.As(err, &short) || short.Reached != 18 || !near(short.Needed, 22.725, 1e-12) {
		t.Fatalf("18 m of 150 m/s: %v", err)
	}
	want := "jp-bridges-v averages over soil above the base: the profile reaches 18 m below ground level, 22.73 m are needed: no base layer of Vs ≥ 300 m/s was reached, and from there on the last class would be certain"
	if err.Error() != want {
		t.Errorf("%q", err)
	}
	// Carried on to there, as the caller may, the type is III.
	site := siteOf(column(18, 150)...)
	site.Layers = append(slices.Clone(site.Profile.Layers), profile.Layer{Top: 18, Bottom: short.Needed, Vs: 150})
	site.Extended = true
	d := decide(t, "jp-bridges-v", site)
	if f := foundOf(t, d, "TG"); d.Class != "III" || !f.AtLeast || !near(f.Value, 0.606, 1e-12) || d.Margin != nil || noteOf(d, "base-not-reached") == "" {
		t.Errorf("carried on: %+v, type %s, margin %v, %v", f, d.Class, d.Margin, d.Notes)
	}
	// A profile whose known part has the last bound already needs no more.
	if d := decide(t, "jp-bridges-v", siteOf(column(23, 150)...)); d.Class != "III" || !near(foundOf(t, d, "TG").Value, 4*23/150., 1e-12) {
		t.Errorf("23 m of 150 m/s: type %s, %+v", d.Class, d.Found)
	}
	// A half-space slower than the base goes on.
	d = decide(t, "jp-bridges-v", siteOf(column(6, 150, deep, 280)...))
	if f := foundOf(t, d, "TG"); d.Class != "III" || !f.AtLeast || !near(f.Value, 0.606, 1e-12) {
		t.Errorf("slow half-space: %+v, type %s", f, d.Class)
	}
	// By the other formula: 18 m of 150 m/s have 0.48 s, 0.7575 s at
	// √(18² + (0.7575² − 0.48²)·150²/16) = 28.40625 m = 0.7575·150/4.
	c, _ = Find("jp-1793")
	if _, err = c.Decide(siteOf(column(18, 150)...)); !errors.As(err, &short) || !near(short.Needed, 28.40625, 1e-12) {
		t.Errorf("Notification 1793, 18 m of 150 m/s: %v", err)
	}
	for _, id := range []string{"as-1170.4", "nzs-1170.5"} {
		c, _ := Find(id)
		if _, err := c.Decide(siteOf(column(12, 200, 18.1, 345)...)); !errors.As(err, &short) || short.Needed < 30.2 {
			t.Errorf("%s, no rock within 30.1 m, T so far %v: %v", id, 4*(12/200.+18.1/345), err)
		}
		if d := decide(t, id, siteOf(column(30, 190)...)); d.Found[len(d.Found)-1].Value < 0.6 || d.Route != "period" {
			t.Errorf("%s, 30 m of 190 m/s: %+v", id, d.Found)
		}
	}
}

// TestDescribedGround: what the notification says in words is listed and
// decides nothing.
func TestDescribedGround(t *testing.T) {
	d := decide(t, "jp-1793", siteOf(column(10, 200, deep, 500)...))
	if len(d.Unassessed) != 2 || stateOf(t, d, "mud-alluvium") != NotAssessed || stateOf(t, d, "young-fill") != NotAssessed || d.Class != "1" {
		t.Errorf("type %s, not assessed %q", d.Class, d.Unassessed)
	}
	if d.Standing != FromMemory || !strings.Contains(noteOf(d, "standing"), "base layer of Vs ≥ 400 m/s") {
		t.Errorf("the base is from memory: %s, %q", d.Standing, noteOf(d, "standing"))
	}
}

// TestSubsoilClasses: AS 1170.4 4.2 and NZS 1170.5 3.1.3, the classes of rock
// and of very soft soil, for both standards at once where they agree.
func TestSubsoilClasses(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		as, nz string
	}{
		{"strong rock", column(deep, 1501), "Ae", "A"},
		{"1500 is not above 1500", column(deep, 1500), "Be", "B"},
		{"strong rock on 600", column(40, 1600, deep, 600), "Ae", "A"},
		{"strong rock on 599", column(40, 1600, deep, 599), "Be", "B"},
		{"1 m of weathered rock of 400: 30/(1/400+29/2500) = 2,128, but 400 < 600", column(1, 400, deep, 2500), "Be", "B"},
		{"1 m of soil on strong rock", column(1, 300, deep, 2500), "Be", "B"},
		{"3 m of soil on rock: 30/(3/200+27/900) = 667", column(3, 200, deep, 900), "Be", "B"},
		{"3.1 m of soil on rock, T = 0.062", column(3.1, 200, deep, 900), "Ce", "C"},
		{"rock of 361", column(deep, 361), "Be", "B"},
		{"rock on 300", column(40, 700, deep, 300), "Be", "B"},
		{"rock on 299: 40 m of it, and no rock below", column(40, 700, deep, 299), "De", "D"},
		{"10 m of 150 are not more than 10 m; T = 0.27", column(10, 150, deep, 700), "Ce", "C"},
		{"10.1 m of 150", column(10.1, 150, deep, 700), "Ee", "C"}, // ≤ 150 and < 150
		{"10.1 m of 149", column(10.1, 149, deep, 700), "Ee", "E"},
		{"twice 5.1 m of 149", column(5.1, 149, 3, 250, 5.1, 149, deep, 700), "Ee", "E"},
		{"a gradient from 100 to 200 over 20.4 m, half of it soft", []profile.Layer{{Bottom: 20.4, Vs: 100, VsBottom: 200}, {Top: 20.4, Bottom: deep, Vs: 700}}, "Ee", "E"},
		{"half-space of 140", column(deep, 140), "Ee", "E"},
	} {
		for id, want := range map[string]string{"as-1170.4": p.as, "nzs-1170.5": p.nz} {
			d := decide(t, id, siteOf(p.layers...))
			if d.Class != want {
				t.Errorf("%s, %s: class %s, want %s; %+v", id, p.name, d.Class, want, d.Found)
			}
			state := NotApplicable
			if want == "Ae" || want == "Be" || want == "A" || want == "B" {
				state = NotAssessed
			}
			if got := stateOf(t, d, "rock-strength"); got != state {
				t.Errorf("%s, %s: the strength of rock is %s", id, p.name, got)
			}
		}
	}
}

// TestSoftByStrength: su < 12.5 kPa or N < 6 make soil very soft whatever its
// velocity: more than 10 m is E, less is D.
func TestSoftByStrength(t *testing.T) {
	with := func(h float64, given profile.Given, value float64) Site {
		layers := column(h, 250, deep, 700)
		layers[0].Given, layers[0].Su, layers[0].N = given, value, value
		return siteOf(layers...)
	}
	for _, p := range []struct {
		site  Site
		class string
	}{
		{with(10, profile.GivenSu, 12), "D"}, {with(10.1, profile.GivenSu, 12), "E"}, {with(10.1, profile.GivenSu, 12.5), "C"},
		{with(10, profile.GivenN, 5), "D"}, {with(10.1, profile.GivenN, 5), "E"}, {with(10.1, profile.GivenN, 6), "C"},
	} {
		for id, suffix := range map[string]string{"as-1170.4": "e", "nzs-1170.5": ""} {
			if d := decide(t, id, p.site); d.Class != p.class+suffix {
				t.Errorf("%s, %+v: class %s, want %s", id, p.site.Profile.Layers[0], d.Class, p.class+suffix)
			}
		}
	}
	site := with(20, 0, 0)
	site.Ground.SoftClay = of(11)
	if d := decide(t, "nzs-1170.5", site); d.Class != "E" || noteOf(d, "override") == "" {
		t.Errorf("11 m of soft clay as stated: class %s, %v", d.Class, d.Notes)
	}
}

// TestDepthLimits: Table 4.1 of AS 1170.4 and Table 3.2 of NZS 1170.5, one
// row at a time; the note where the depth gives another class than the period.
func TestDepthLimits(t *testing.T) {
	of := func(soil string, h, v float64, given profile.Given, value float64) Site {
		layers := column(h/2, v, h/2, v, deep, 700)
		for i := range 2 {
			layers[i].Soil, layers[i].Given, layers[i].Su, layers[i].N = soil, given, value, value
		}
		return siteOf(layers...)
	}
	const su, n = profile.GivenSu, profile.GivenN
	for _, p := range []struct {
		site Site
		want string // class by the depth; "" where there is no note
	}{
		{of("silty clay", 20, 200, su, 20), ""},  // 20 m, T = 0.4: C by both
		{of("silty clay", 21, 200, su, 20), "D"}, // T = 0.42: C by the period, 21 > 20 m by the depth
		{of("silty clay", 41, 300, su, 80), "D"},
		{of("silty clay", 60, 350, su, 150), "C"}, // T = 0.69: D by the period, 60 m by the depth
		{of("clean sand", 41, 300, n, 8), "D"},
		{of("clean sand", 46, 320, n, 20), "D"},
		{of("clean sand", 55, 320, n, 40), "C"},   // T = 0.69
		{of("clean sand", 60, 350, n, 60), "C"},   // T = 0.69
		{of("sandy gravel", 99, 350, n, 40), "C"}, // T = 1.13
		{of("sandy gravel", 101, 350, n, 40), ""},
		{of("silty clay", 21, 200, n, 20), ""}, // clay by N is in no row
		{of("", 21, 200, su, 20), ""},          // nothing says what it is
	} {
		d := decide(t, "nzs-1170.5", p.site)
		got := noteOf(d, "depth-limit")
		if (got != "") != (p.want != "") || p.want != "" && !strings.Contains(got, "would be class "+p.want) {
			t.Errorf("%+v: class %s, %q, want %q", p.site.Profile.Layers[0], d.Class, got, p.want)
		}
	}
	mixed := of("silty clay", 21, 200, su, 20)
	mixed.Profile.Layers[1].Soil = "sand"
	if got := noteOf(decide(t, "nzs-1170.5", mixed), "depth-limit"); got != "" {
		t.Errorf("clay on sand is no row: %q", got)
	}
}

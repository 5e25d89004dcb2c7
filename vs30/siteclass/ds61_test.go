package siteclass

import (
	"errors"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// dense is d m of sand of a velocity and an N1; firm d m of clay of a
// velocity and a strength in kPa. Thicknesses stand for bottoms.
func dense(d, v, n float64) profile.Layer {
	return profile.Layer{Bottom: d, Vs: v, N: n, Given: profile.GivenN}
}
func firm(d, v, su float64) profile.Layer {
	return profile.Layer{Bottom: d, Vs: v, Su: su, Given: profile.GivenSu}
}

// timedBoring is a boring with velocities.
func timedBoring(layers ...profile.Layer) Site {
	s := boring(layers...)
	s.Profile.NoVelocity = false
	return s
}

// TestDS61: DS 61 asks for the velocity and for the strength; the less
// favourable type is taken, and a velocity alone is typed one lower.
func TestDS61(t *testing.T) {
	for _, p := range []struct {
		name  string
		site  Site
		class string
		route string
	}{
		{"both B", timedBoring(dense(40, 600, 55)), "B", "velocity and strength"},
		{"velocity B, N1 of 45 is C", timedBoring(dense(40, 600, 45)), "C", "velocity and strength"},
		{"velocity C, N1 of 55 is B", timedBoring(dense(40, 400, 55)), "C", "velocity and strength"},
		{"the weakest layer decides: 22 is E", timedBoring(dense(5, 600, 60), dense(2, 600, 22), dense(40, 600, 60)), "E", "velocity and strength"},
		{"N1 below 20 is in no row: F", timedBoring(dense(40, 300, 19)), "F", "velocity and strength"},
		{"velocity A, but no RQD and qu: N1 carries B", timedBoring(dense(10, 800, 60), dense(40, 1500, 60)), "B", "velocity and strength"},
		{"all of the upper 15 m faster than 900: A", timedBoring(dense(40, 950, 60)), "A", "velocity and strength"},
		{"fine soil is D at best by Su", timedBoring(firm(40, 600, 250)), "D", "velocity and strength"},
		{"Su of 50 kPa = 0.05 MPa is D", timedBoring(firm(40, 300, 50)), "D", "velocity and strength"},
		{"Su below is E", timedBoring(firm(40, 300, 49)), "E", "velocity and strength"},
		{"one layer without strength: by velocity alone", timedBoring(dense(10, 600, 60), profile.Layer{Bottom: 30, Vs: 600}), "C", "velocity"},
		{"refusal is strength enough for B", timedBoring(refusing(profile.Layer{Bottom: 40, Vs: 600})), "B", "velocity and strength"},
		{"501 alone", uniform(501), "C", "velocity"},
		{"351 alone", uniform(351), "D", "velocity"},
		{"181 alone", uniform(181), "E", "velocity"},
		{"180 alone", uniform(180), "F", "velocity"},
		{"above 900 alone, the upper 15 m not all so", siteOf(column(5, 700, deep, 1200)...), "C", "velocity"},
		{"the upper 15 m faster than 900", siteOf(column(15, 901, deep, 1000)...), "A", "velocity"},
		{"falling with depth: no rule but E", siteOf(column(10, 700, deep, 600)...), "E", "velocity"},
		{"falling with depth below 180", siteOf(column(10, 170, deep, 150)...), "F", "velocity"},
		{"sand of N1 ≥ 30 without a velocity", boring(sand(40, 30)), "D", "N"},
		{"5 m of 20 to 29 among it", boring(sand(5, 20), sand(40, 30)), "D", "N"},
	} {
		if d := decide(t, "ds61-2011", p.site); d.Class != p.class || d.Route != p.route {
			t.Errorf("%s: class %s by %s, want %s by %s; %v", p.name, d.Class, d.Route, p.class, p.route, d.Notes)
		}
	}
	c, _ := Find("ds61-2011")
	for name, site := range map[string]Site{
		"5.1 m of 25":     boring(sand(5.1, 25), sand(40, 35)),
		"a layer of 19":   boring(sand(1, 19), sand(40, 35)),
		"clay without Vs": boring(sand(10, 40), clay(30, 100)),
	} {
		if _, err := c.Decide(site); err == nil || !strings.Contains(err.Error(), "without a velocity") {
			t.Errorf("%s: %v", name, err)
		}
	}
	site := timedBoring(dense(40, 600, 55))
	site.Route = "velocity"
	if d := decide(t, c.ID, site); d.Class != "C" || len(d.Others) != 2 {
		t.Errorf("the velocity alone, as chosen: class %s, others %v", d.Class, d.Others)
	}
}

// TestDS61Margin: the nearest bound is of the rule that decides.
func TestDS61Margin(t *testing.T) {
	d := decide(t, "ds61-2011", uniform(400))
	if m := d.Margin; m == nil || m.ToClass != "E" || m.Bound != 350 || !near(m.Percent, -12.5, 1e-9) {
		t.Errorf("400 m/s alone: margin %+v", m)
	}
	// Held at C by N1 = 45, 600 m/s changes the type only below 350.
	d = decide(t, "ds61-2011", timedBoring(dense(40, 600, 45)))
	if m := d.Margin; m == nil || m.ToClass != "D" || m.Bound != 350 {
		t.Errorf("600 m/s and N1 of 45: margin %+v", m)
	}
	if got := noteOf(d, "strength-governs"); !strings.HasPrefix(got, "by its velocity the site is type B, by the strength of its weakest layer, from 0 m to 30 m, type C") {
		t.Errorf("%q", got)
	}
}

// TestDS61Depth: 30 m below ground, with a foundation at 20 m down to 35 m;
// the average may end in rock.
func TestDS61Depth(t *testing.T) {
	site := siteOf(column(30, 300, deep, 600)...)
	site.FoundationDepth = profile.Known(20)
	// 35/(30/300+5/600) = 323.08 m/s
	if d := decide(t, "ds61-2011", site); d.Thickness != 35 || !near(d.Velocity, 323.076923, 1e-8) {
		t.Errorf("foundation at 20 m: %v m/s over %v m", d.Velocity, d.Thickness)
	}
	site.FoundationDepth = profile.Known(15)
	if d := decide(t, "ds61-2011", site); d.Thickness != 30 {
		t.Errorf("foundation at 15 m: over %v m", d.Thickness)
	}
	// 14/(12/300+2/1000) = 333.3 m/s
	d := decide(t, "ds61-2011", siteOf(column(12, 300, 2, 1000)...))
	if d.Thickness != 14 || !near(d.Velocity, 333.333333, 1e-8) || noteOf(d, "to-rock") == "" || d.Class != "E" {
		t.Errorf("a profile that ends in rock: %v m/s over %v m, class %s", d.Velocity, d.Thickness, d.Class)
	}
	c, _ := Find("ds61-2011")
	var short *vs30.ShortError
	if _, err := c.Decide(siteOf(column(12, 300, 2, 899)...)); !errors.As(err, &short) {
		t.Errorf("a profile that ends in soil: %v", err)
	}
}

// rancagua are two surface-wave lines of one site, Tables 3 and 4 of a
// geophysical study for housing in Rancagua, October 2017, in the file of its
// environmental assessment (SEIA). Their bottoms are rounded: the sums agree
// with the printed averages, 630.1 and 619.0 m/s, to 1.5 m/s.
func rancagua() [2]Site {
	var sites [2]Site
	bottoms := []float64{1.7, 3.8, 6.3, 9.2, 12.5, 16.3, 20.4, 25, 30}
	for i, line := range [][]float64{{395, 402, 438, 547, 658, 716, 770, 821, 845}, {384, 391, 432, 521, 602, 695, 788, 848, 857}} {
		top := 0.0
		var layers []profile.Layer
		for k, v := range line {
			layers = append(layers, profile.Layer{Top: top, Bottom: bottoms[k], Vs: v})
			top = bottoms[k]
		}
		sites[i] = siteOf(layers...)
	}
	return sites
}

// TestWorstGoverns: of the two lines the slower governs, not their mean. Both
// are faster than 500 m/s and nowhere fall, so that the velocity alone makes
// them C.
func TestWorstGoverns(t *testing.T) {
	lines := rancagua()
	first, second := decide(t, "ds61-2011", lines[0]), decide(t, "ds61-2011", lines[1])
	for _, p := range []struct {
		d       Decision
		printed float64
		exact   float64 // from the printed bottoms
	}{{first, 630.1, 628.87}, {second, 619.0, 617.76}} {
		if near := p.d.Velocity-p.printed < 1.5 && p.printed-p.d.Velocity < 1.5; !near || p.d.Velocity-p.exact > 0.005 || p.exact-p.d.Velocity > 0.005 || p.d.Class != "C" {
			t.Errorf("%.3f m/s, class %s; printed %v", p.d.Velocity, p.d.Class, p.printed)
		}
	}
	d, err := Governing([]Decision{first, second})
	if err != nil || d.Velocity != second.Velocity {
		t.Errorf("%v m/s governs, %v", d.Velocity, err)
	}
	want := "of 2 profiles the second governs, with class C and 617.8 m/s; of two surface-wave lines, at right angles if possible, the worse profile governs"
	if got := noteOf(d, "governing"); got != want {
		t.Errorf("%q", got)
	}
	if noteOf(second, "governing") != "" {
		t.Error("the decision that was handed in was changed")
	}
	// A softer class goes before a slower velocity.
	soft := decide(t, "ds61-2011", timedBoring(dense(40, 900, 25)))
	if d, err = Governing([]Decision{first, soft, second}); err != nil || d.Class != "E" {
		t.Errorf("class %s governs, %v", d.Class, err)
	}
	if _, err := Governing(nil); err == nil {
		t.Error("nothing governs, yet no error")
	}
	if _, err := Governing([]Decision{first, decide(t, "nbcc-2015", lines[0])}); err == nil || !strings.Contains(err.Error(), "ds61-2011 and nbcc-2015") {
		t.Errorf("two codes: %v", err)
	}
	if _, err := Governing([]Decision{decide(t, "nbcc-2015", lines[0])}); err == nil || err.Error() != "nbcc-2015 has no rule for several profiles of one site" {
		t.Errorf("a code without the rule: %v", err)
	}
}

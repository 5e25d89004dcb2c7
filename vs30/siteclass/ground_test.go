package siteclass

import (
	"strings"
	"testing"

	"shearbook/profile"
)

// stated is d m of ground of 250 m/s that states PI, w in % and su in kPa;
// NaN leaves one out.
func stated(d, pi, w, su float64) profile.Layer {
	l := profile.Layer{Bottom: d, Vs: 250}
	for _, q := range []struct {
		v  float64
		to *float64
		g  profile.Given
	}{{pi, &l.PI, profile.GivenPI}, {w, &l.WaterContent, profile.GivenWaterContent}, {su, &l.Su, profile.GivenSu}} {
		if q.v == q.v {
			*q.to, l.Given = q.v, l.Given|q.g
		}
	}
	return l
}

// TestFromLayers: where the site does not state a deposit, the layers that
// state PI, w and su are added up; what states too little leaves the
// condition open unless it could not change it.
func TestFromLayers(t *testing.T) {
	for _, p := range []struct {
		name   string
		layers []profile.Layer
		id     string
		state  State
		class  string
		note   string
	}{
		{"4 m meet all limits (> 3 m)", []profile.Layer{stated(4, 35, 55, 20), stated(30, 10, 20, 90)}, "soft-clay", Met, "E",
			"soft clay: by what the layers themselves state, 4 m of them meet the limits"},
		{"in two layers", []profile.Layer{stated(2, 35, 55, 20), stated(20, 10, 20, 90), stated(2, 35, 55, 20), stated(20, 10, 20, 90)}, "soft-clay", Met, "E", "4 m of them meet"},
		{"3 m are not more than 3", []profile.Layer{stated(3, 35, 55, 20), stated(30, 10, 20, 90)}, "soft-clay", NotMet, "D", "3 m of them meet"},
		{"none", []profile.Layer{stated(40, 10, 20, 90)}, "soft-clay", NotMet, "D", ""},
		{"one limit is enough to tell that it is not", []profile.Layer{stated(40, 10, no, no)}, "soft-clay", NotMet, "D", ""},
		{"too little to tell", []profile.Layer{stated(5, 35, 55, no), stated(30, 10, no, no)}, "soft-clay", NotAssessed, "D",
			"0 m of them meet the limits, and the rest, 5 m, does not tell"},
		{"too little to tell, but too thin to matter", []profile.Layer{stated(3, 35, 55, no), stated(30, 10, no, no)}, "soft-clay", NotMet, "D", ""},
		{"enough without what does not tell", []profile.Layer{stated(4, 35, 55, 20), stated(30, no, no, no)}, "soft-clay", Met, "E", "4 m of them meet"},
		{"nothing stated at all", []profile.Layer{stated(40, no, no, no)}, "soft-clay", NotAssessed, "D", ""},
		{"PI > 75 over more than 8 m", []profile.Layer{stated(9, 80, 30, 90), stated(30, 10, 20, 90)}, "high-plasticity-clay", Met, "F", "9 m of them meet"},
		{"below the averaging depth it does not count", []profile.Layer{stated(30, 10, 20, 90), stated(20, 80, 50, 20)}, "soft-clay", NotMet, "D", ""},
		{"no limit that a layer could state", []profile.Layer{stated(40, 30, 30, 40)}, "soft-to-medium-clay", NotAssessed, "D", ""},
	} {
		d := decide(t, "nbcc-2015", timedBoring(p.layers...))
		if got := stateOf(t, d, p.id); got != p.state || d.Row != p.class {
			t.Errorf("%s: %s, class %s; want %s, %s", p.name, got, d.Row, p.state, p.class)
		}
		got := ""
		for _, n := range d.Notes {
			if n.ID == "from-layers" && strings.HasPrefix(n.Text, d.Code.conditionFact(p.id)) {
				got = n.Text
			}
		}
		if (got == "") != (p.note == "") || !strings.Contains(got, p.note) {
			t.Errorf("%s: note %q, want %q", p.name, got, p.note)
		}
	}
}

// conditionFact names what a condition asks for.
func (c *Code) conditionFact(id string) string {
	for _, k := range c.Conditions {
		if k.ID == id {
			return k.Fact.String()
		}
	}
	return ""
}

// TestThickClayFromLayers: a limit below the averaging depth is looked for in
// all layers: 40 m = 131 ft of su = 40 kPa = 835 psf.
func TestThickClayFromLayers(t *testing.T) {
	d := decide(t, "asce-7-16", timedBoring(stated(40, 30, 30, 40), stated(20, 10, 20, 200)))
	if got := stateOf(t, d, "soft-to-medium-clay"); got != Met || d.Class != "F" {
		t.Errorf("40 m: %s, class %s", got, d.Class)
	}
	d = decide(t, "asce-7-16", timedBoring(stated(36, 30, 30, 40), stated(20, 10, 20, 200)))
	if got := stateOf(t, d, "soft-to-medium-clay"); got != NotMet || d.Class != "D" {
		t.Errorf("36 m: %s, class %s", got, d.Class)
	}
	d = decide(t, "asce-7-16", timedBoring(stated(30, 30, 30, 40), stated(deep, 30, 30, 40)))
	if got := stateOf(t, d, "soft-to-medium-clay"); got != NotAssessed {
		t.Errorf("a half-space of soft clay: %s", got)
	}
}

// TestPeatFromLayers: peat by its name; no name is no proof that there is
// none.
func TestPeatFromLayers(t *testing.T) {
	peat := stated(4, no, no, no)
	peat.Soil = "dark brown PEAT, wet"
	d := decide(t, "nbcc-2015", timedBoring(peat, stated(30, no, no, no)))
	if got := stateOf(t, d, "peat"); got != Met || d.Class != "F" {
		t.Errorf("4 m of peat: %s, class %s", got, d.Class)
	}
	peat.Bottom = 2
	d = decide(t, "nbcc-2015", timedBoring(peat, stated(30, no, no, no)))
	if got := stateOf(t, d, "peat"); got != NotAssessed || d.Class != "D" {
		t.Errorf("2 m of peat: %s, class %s", got, d.Class)
	}
}

// TestStatedGroundGoesFirst: what the site states is not asked of its layers.
func TestStatedGroundGoesFirst(t *testing.T) {
	site := timedBoring(stated(4, 35, 55, 20), stated(30, 10, 20, 90))
	site.Ground.SoftClay = of(0)
	d := decide(t, "nbcc-2015", site)
	if got := stateOf(t, d, "soft-clay"); got != NotMet || d.Class != "D" {
		t.Errorf("no soft clay, as stated: %s, class %s", got, d.Class)
	}
}

package correlate

import (
	"errors"
	"math"
	"strings"
	"testing"

	"shearbook/profile"
)

// uniform is a cone in uniform ground, with a reading each 5 cm from 2.5 cm on
// down to depth.
func uniform(depth, qc, fs float64) *Cone {
	c := &Cone{Name: "C1", WaterTable: profile.Known(2)}
	for i := 0; i < int(depth/0.05+0.5); i++ {
		c.Readings = append(c.Readings, Reading{Depth: 0.025 + float64(i)*0.05, Tip: profile.Known(qc), Sleeve: profile.Known(fs), Line: i + 10})
	}
	return c
}

// A relation that asks for the sleeve alone gives the same velocity at every
// depth: 220.337637 m/s at 50 kPa, as in TestRelations.
func TestSounding(t *testing.T) {
	p, err := Sounding(uniform(10.3, 5000, 50), Options{Relations: []string{"mayne-2006"}})
	if err != nil {
		t.Fatal(err)
	}
	// By hand: the readings end at 10.3 m; what is left of them, 0.3 m, joins the
	// tenth layer.
	if len(p.Layers) != 10 || math.Abs(p.Layers[9].Bottom-10.3) > 1e-9 || p.Layers[3].Top != 3 || p.Layers[3].Bottom != 4 {
		t.Errorf("got %+v", p.Layers)
	}
	for i, l := range p.Layers {
		if !near(l.Vs, 220.337637) || l.SigmaLnVs != Planning || !l.Has(profile.GivenSigma) || p.BasisOf(i) != profile.Correlated {
			t.Errorf("layer %d: %+v", i+1, l)
		}
	}
	if got := note(t, &p, "cone-to-layers"); got != "206 readings became layers of 1 m, each with the average of its readings by travel time" {
		t.Error(got)
	}
	for _, id := range []string{"tip-not-corrected", "unit-weight", "soil-by-cone", "top-not-measured"} {
		if hasNote(&p, id) {
			t.Errorf("note %s is not called for", id)
		}
	}
}

// The travel time of a layer is that of its readings. By hand, half of it at
// 118.8·log 100 + 18.5 = 256.1 and half at 118.8·log 10 + 18.5 = 137.3 m/s:
// 2/(1/256.1 + 1/137.3) = 178.762.
func TestSoundingTravelTime(t *testing.T) {
	c := uniform(2, 5000, 100)
	for i := range c.Readings {
		if i%2 == 1 {
			c.Readings[i].Sleeve = profile.Known(10)
		}
	}
	p, err := Sounding(c, Options{Relations: []string{"mayne-2006"}})
	if err != nil || len(p.Layers) != 2 || math.Abs(p.Layers[0].Vs-178.762) > 0.001 {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
}

// By hand, at the reading at 4.025 m: σv = 18·4.025 = 72.45, u = 9.80665·2.025
// = 19.858466, σ'v = 52.591534; Ic by bisection on its exponent is that of the
// other way of TestBehaviour; the velocity follows from the equation.
func TestSoundingRobertson(t *testing.T) {
	c := uniform(8, 5000, 50)
	o := Options{Relations: []string{"robertson-2009"}, UnitWeight: 18}
	in := o.input(c, 80)
	if !near(in.of(TotalStress), 72.45) || !near(in.of(EffectiveStress), 52.591534) || in.Soil != Sand {
		t.Errorf("got %+v", in)
	}
	b, _ := NewBehaviour(5000, 50, 72.45, 52.59153375)
	want := math.Sqrt(math.Pow(10, 0.55*b.Index+1.68) * (5000 - 72.45) / 100)
	p, err := Sounding(c, o)
	if err != nil {
		t.Fatal(err)
	}
	if l := p.Layers[4]; math.Abs(l.Vs-want) > 0.01*want {
		t.Errorf("got %v m/s from 4 to 5 m, and %v at the reading", l.Vs, want)
	}
	note(t, &p, "tip-not-corrected")
	note(t, &p, "unit-weight")
}

// By hand: qt = 1000 + (1 − 0.8)·300 = 1060 kPa; at 4.025 m Bq = (300 −
// 19.858466)/(1060 − 72.45) = 0.2836732.
func TestSoundingPorePressure(t *testing.T) {
	c := uniform(8, 1000, 20)
	for i := range c.Readings {
		c.Readings[i].PorePressure = profile.Known(300)
	}
	o := Options{Relations: []string{"long-donohue-2010-clay"}, UnitWeight: 18, AreaRatio: 0.8, Soil: Clay}
	in := o.input(c, 80)
	if in.of(CorrectedTip) != 1060 || !near(in.of(PorePressureRatio), 0.2836732) {
		t.Errorf("got qt %v and Bq %v", in.of(CorrectedTip), in.of(PorePressureRatio))
	}
	p, err := Sounding(c, o)
	if err != nil || hasNote(&p, "tip-not-corrected") || hasNote(&p, "soil-by-cone") {
		t.Errorf("got %+v, %v", p.Notes, err)
	}
}

// Layers keep to boundaries, and with Alone to nothing else.
func TestSoundingBoundaries(t *testing.T) {
	o := Options{Relations: []string{"mayne-2006"}, Boundaries: []float64{2.6, 50, -1, 2.6}}
	p, err := Sounding(uniform(5, 5000, 50), o)
	// By hand: 0–1, 1–2, 2–2.6 (0.6 of a step is a layer), 2.6–3.6, 3.6–5.
	if want := []float64{1, 2, 2.6, 3.6, 5}; err != nil || len(p.Layers) != len(want) {
		t.Errorf("got %+v, %v", p.Layers, err)
	} else {
		for i, z := range want {
			if math.Abs(p.Layers[i].Bottom-z) > 1e-9 {
				t.Errorf("layer %d ends at %v, want %v", i+1, p.Layers[i].Bottom, z)
			}
		}
	}
	o.Alone = true
	if p, err = Sounding(uniform(5, 5000, 50), o); err != nil || len(p.Layers) != 2 || p.Layers[1].Top != 2.6 {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
}

// A cone that starts in a hole is carried up, with a note; a gap is a fault.
func TestSoundingGaps(t *testing.T) {
	c := uniform(10, 5000, 50)
	c.Readings = c.Readings[40:] // from 2 m
	c.Source = &profile.Reading{File: "c.ags"}
	o := Options{Relations: []string{"mayne-2006"}}
	p, err := Sounding(c, o)
	// Half of 1–2 m is what the first reading stands for: 0.5 m above 2.025 m is
	// not quite that, so the first layer is 2–3 m.
	if err != nil || p.Layers[0].Bottom != 2 || p.Layers[1].Top != 2 {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
	if got := note(t, &p, "top-not-measured"); got != "the cone gives no velocity above 2 m; the first one is carried up to ground level" {
		t.Error(got)
	}
	for i := range c.Readings[40:80] { // 4 to 6 m
		c.Readings[40+i].Sleeve = profile.Optional{}
	}
	_, err = Sounding(c, o)
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) != 2 || !strings.HasSuffix(faults[0].Error(), `cone "C1" gives no velocity at 4–5 m: mayne-2006 needs fs, which is not stated`) ||
		!strings.HasPrefix(faults[0].Error(), "c.ags:") {
		t.Errorf("got %v", err)
	}
	for i := range c.Readings {
		c.Readings[i].Depth += 10
	}
	if _, err := Sounding(uniform(8, 5000, 50), Options{Relations: []string{"robertson-2009", "mayne-rix-1995-clay"}}); err == nil ||
		!strings.HasSuffix(err.Error(), `cone "C1" gives no velocity: robertson-2009 needs σv, and the unit weight of the ground down to there is not stated; `+
			"mayne-rix-1995-clay is for clay, and the soil is not stated") {
		t.Errorf("got %v", err)
	}
	if _, err = Sounding(c, o); err == nil || strings.Count(err.Error(), "\n") > 2 {
		t.Errorf("a hole of 12 m: %v", err)
	}
}

// Single readings without a velocity are told, and change little.
func TestSoundingReadingsRefused(t *testing.T) {
	c := uniform(5, 5000, 50)
	c.Readings[30].Sleeve = profile.Known(0)
	p, err := Sounding(c, Options{Relations: []string{"mayne-2006"}})
	if err != nil || !near(p.Layers[1].Vs, 220.337637) {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
	if got := note(t, &p, "readings-refused"); got != "Mayne (2006) gives no velocity at 1 reading of 100, the first at 1.525 m, where it needs fs above zero" {
		t.Error(got)
	}
}

func TestSoundingFaults(t *testing.T) {
	o := Options{Relations: []string{"mayne-2006"}}
	for want, c := range map[string]*Cone{
		`cone "C1" has no readings`:               {Name: "C1"},
		"the depth NaN m of a reading is not one": {Readings: []Reading{{Depth: math.NaN()}}},
		"the depth -1 m of a reading is not one":  {Readings: []Reading{{Depth: -1}}},
		"the reading at 2 m follows one at 2 m":   {Readings: []Reading{{Depth: 2}, {Depth: 2}}},
	} {
		if _, err := Sounding(c, o); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v; want %s", err, want)
		}
	}
	// Two readings a hundred kilometres apart, in the thinnest layers: bounded.
	o.Step = 0.1
	c := &Cone{Readings: []Reading{{Depth: 0.1, Sleeve: profile.Known(50)}, {Depth: profile.MaxDepth, Sleeve: profile.Known(50)}}}
	if _, err := Sounding(c, o); err == nil {
		t.Error("a gap of 100 km passes")
	}
}

// By hand: one reading at 2 m stands for 1.5 to 2.5 m, half of 1–2 m, which is
// carried up; what is left of it, 0.5 m, is half a step, so a layer of its own.
func TestSoundingOneReading(t *testing.T) {
	c := &Cone{Name: "C1", Readings: []Reading{{Depth: 2, Sleeve: profile.Known(50)}}}
	p, err := Sounding(c, Options{Relations: []string{"mayne-2006"}})
	if err != nil || len(p.Layers) != 3 || p.Layers[0].Bottom != 1 || p.Layers[2].Bottom != 2.5 {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
	c.Readings[0].Depth = 2.4
	if p, err = Sounding(c, Options{Relations: []string{"mayne-2006"}, Step: 4}); err == nil ||
		err.Error() != `cone "C1" gives no velocity: mayne-2006 has readings for less than half of it` {
		t.Errorf("got %+v, %v", p.Layers, err)
	}
}

// A relation for another soil says so, not that readings are missing.
func TestSoundingOtherSoil(t *testing.T) {
	p, err := Sounding(uniform(5, 5000, 50), Options{Relations: []string{"mayne-2006", "mayne-rix-1995-clay"}, Soil: Sand})
	if err != nil {
		t.Fatal(err)
	}
	if got := note(t, &p, "correlation-refused"); got != "Mayne & Rix (1995), clay is left out at 0–5 m: it is for clay and not for sand" {
		t.Error(got)
	}
}

// The area ratio of the cone stands where the user states none, and the user's
// goes before it. Either way the velocities are the same as by the user's alone.
func TestSoundingAreaRatioOfCone(t *testing.T) {
	cone := func(ratio float64) *Cone {
		c := uniform(3, 1000, 20)
		for i := range c.Readings {
			c.Readings[i].PorePressure = profile.Known(200)
		}
		c.AreaRatio = ratio
		return c
	}
	o := Options{Relations: []string{"robertson-2009"}, UnitWeight: 18}
	byUser := o
	byUser.AreaRatio = 0.8
	want, err := Sounding(cone(0), byUser)
	if err != nil {
		t.Fatal(err)
	}
	got, err := Sounding(cone(0.8), o)
	if err != nil || got.Layers[2].Vs != want.Layers[2].Vs || hasNote(&got, "tip-not-corrected") {
		t.Errorf("got %+v, %v; want %+v", got.Layers, err, want.Layers)
	}
	if text := note(t, &got, "area-ratio"); text != "qt is qc + (1 − a)·u2, with the area ratio a of 0.8 that the file states of the cone" {
		t.Error(text)
	}
	before, err := Sounding(cone(0.5), byUser)
	if err != nil || before.Layers[2].Vs != want.Layers[2].Vs || note(t, &before, "area-ratio") != "qt is qc + (1 − a)·u2, with the area ratio a of 0.8 that is stated by the user" {
		t.Errorf("got %+v, %v", before.Layers, err)
	}
	raw, err := Sounding(cone(0), o)
	if err != nil || raw.Layers[2].Vs >= want.Layers[2].Vs || !hasNote(&raw, "tip-not-corrected") {
		t.Errorf("uncorrected: %+v, %v", raw.Layers, err)
	}
	if _, err := Sounding(cone(1.5), o); err == nil {
		t.Error("an area ratio of 1.5 is taken")
	}
}

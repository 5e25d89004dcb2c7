package correlate

import (
	"errors"
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
)

// boring is a profile of blow counts and strengths.
func boring() *profile.Profile {
	return &profile.Profile{Name: "B1", NoVelocity: true, Layers: []profile.Layer{
		{Top: 0, Bottom: 4, N: 5, Su: 50, Given: profile.GivenN | profile.GivenSu, Soil: "Firm CLAY", Line: 2, Column: 3},
		{Top: 4, Bottom: 12, N: 20, Given: profile.GivenN, Soil: "Fine SAND", Line: 3, Column: 3},
		{Top: 12, Bottom: math.Inf(1), N: 120, Given: profile.GivenN, Refusal: true, Line: 4, Column: 3},
	}, Reading: &profile.Reading{File: "b1.csv"}}
}

func note(t *testing.T, p *profile.Profile, id string) string {
	t.Helper()
	for _, n := range p.Notes {
		if n.ID == id {
			return n.Text
		}
	}
	t.Errorf("no note %s in %v", id, p.Notes)
	return ""
}

func hasNote(p *profile.Profile, id string) bool {
	return slices.ContainsFunc(p.Notes, func(n profile.Note) bool { return n.ID == id })
}

// By hand: 97·5^0.314 = 160.786 and 85.35·5^0.348 = 149.432, whose geometric mean
// is 155.005; and so on for 20 and 100 blows.
func TestProfile(t *testing.T) {
	p := boring()
	before := *boring()
	out, err := Profile(p, Options{Relations: []string{"imai-tonouchi-1982", "ohta-goto-1978"}})
	if err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(*p, before) {
		t.Error("the profile that was given has changed")
	}
	for i, n := range []float64{5, 20, 100} {
		l := out.Layers[i]
		a, b := 97*math.Pow(n, 0.314), 85.35*math.Pow(n, 0.348)
		half := math.Abs(math.Log(a/b)) / 2
		if !near(l.Vs, math.Sqrt(a*b)) || !near(l.SigmaLnVs, math.Hypot(0.275, half)) || !l.Has(profile.GivenSigma|profile.GivenN) ||
			out.BasisOf(i) != profile.Correlated || l.Top != p.Layers[i].Top || l.Bottom != p.Layers[i].Bottom || l.N != p.Layers[i].N {
			t.Errorf("layer %d: %+v", i+1, l)
		}
	}
	if out.NoVelocity || out.Survey.Basis != profile.Correlated || out.Name != "B1" {
		t.Errorf("got %+v", out)
	}
	for id, want := range map[string]string{
		"correlated-by": "the velocities are estimated, not measured, by Imai & Tonouchi (1982) (Vs = 97.0 N^0.314; for all soils; Japan; one source) and " +
			"Ohta & Goto (1978), N alone (Vs = 85.35 N^0.348; for all soils; Japan; one source); each is the geometric mean of these, which differ by a factor of up to 1.08 at one depth",
		"correlation-sigma": "sigma of ln Vs of one correlation is taken as 0.275, the middle of the range of 0.20 to 0.35 that is planned with (common practice), " +
			"for none was seen in print; the scatter between the correlations is added; the error of a correlation is common to all layers and does not average out",
		"blow-counts":         "blow counts are taken as measured, without correction",
		"blows-capped":        "blow counts above 100 are counted as 100 at below 12 m; the ground there may be faster",
		"penetration-refused": "penetration was refused at below 12 m: N is a bound there, and so is the velocity",
	} {
		if got := note(t, &out, id); got != want {
			t.Errorf("got  %s\nwant %s", got, want)
		}
	}
	for _, id := range []string{"unit-weight", "correlation-refused", "velocity-left-out"} {
		if hasNote(&out, id) {
			t.Errorf("note %s is not called for", id)
		}
	}
}

// Relations that hold for some layers are left out in others, and that is told.
func TestProfileSomeRefuse(t *testing.T) {
	out, err := Profile(boring(), Options{Relations: []string{"imai-1977", "dickenson-1994", "seed-idriss-arango-1983"}})
	if err != nil {
		t.Fatal(err)
	}
	// By hand: √(91·5^0.337·147.481854), √(91·20^0.337·56.4·√20), 91·100^0.337.
	for i, want := range []float64{
		math.Sqrt(91 * math.Pow(5, 0.337) * 147.481854), math.Sqrt(249.740226 * 252.228468), 91 * math.Pow(100, 0.337),
	} {
		if !near(out.Layers[i].Vs, want) {
			t.Errorf("layer %d: got %v, want %v", i+1, out.Layers[i].Vs, want)
		}
	}
	var texts []string
	for _, n := range out.Notes {
		if n.ID == "correlation-refused" {
			texts = append(texts, n.Text)
		}
	}
	want := []string{
		"Dickenson (1994) is left out at below 4 m: it needs su, which is not stated",
		"Seed, Idriss & Arango (1983) is left out at 0–4 m: it is for sand and not for clay",
		"Seed, Idriss & Arango (1983) is left out at below 12 m: it is for sand, and the soil is not stated",
	}
	if !slices.Equal(texts, want) {
		t.Errorf("got  %s\nwant %s", strings.Join(texts, "\n"), strings.Join(want, "\n"))
	}
}

// A layer in which nothing holds is a fault at its place, and no half of a
// profile comes back.
func TestProfileGap(t *testing.T) {
	p := boring()
	p.Layers[1].Given = 0
	out, err := Profile(p, Options{Relations: []string{"imai-1977", "dickenson-1994"}})
	var faults profile.Faults
	want := "b1.csv:3:3: no correlation gives a velocity for layer 2, 4–12 m: imai-1977 needs N, which is not stated; dickenson-1994 needs su, which is not stated"
	if !errors.As(err, &faults) || len(faults) != 1 || faults[0].Error() != want || faults[0].Hint == "" || out.Layers != nil {
		t.Errorf("got %v, %+v", err, out)
	}
}

// Relations with a stress want N60, a unit weight and a water table, and say
// which is missing.
func TestProfileStress(t *testing.T) {
	p := boring()
	p.Layers = p.Layers[1:2]
	p.Layers[0].Top = 0
	opt := Options{Relations: []string{"brandenberg-2010-sand"}}
	refuses := func(want string) {
		t.Helper()
		if _, err := Profile(p, opt); err == nil || !strings.HasSuffix(err.Error(), "brandenberg-2010-sand needs "+want) {
			t.Errorf("got %v; want %s", err, want)
		}
	}
	refuses("N60, and the energy of the blows is not stated")
	opt.Blows = Energy60
	refuses("σ'v, and the unit weight of the ground down to there is not stated")
	opt.UnitWeight = 18
	refuses("σ'v, and the water table is not stated")
	opt.WaterTable = profile.Known(2)
	// By hand: at 6 m σ'v = 18·6 − 9.80665·4 = 68.7734; ln 68.7734 = 4.2308164;
	// e^(4.045 + 0.096·2.9957323 + 0.236·4.2308164) = 206.654.
	out, err := Profile(p, opt)
	if err != nil || math.Abs(out.Layers[0].Vs-206.654) > 0.01 {
		t.Errorf("got %+v, %v", out.Layers, err)
	}
	if got := note(t, &out, "unit-weight"); got != "the unit weight of ground whose density is not stated is taken as 18 kN/m³, as stated by the user" {
		t.Error(got)
	}
	if got := note(t, &out, "blow-counts"); got != "blow counts are N60, as stated" {
		t.Error(got)
	}
	if got := note(t, &out, "water-table"); got != "the water table is taken at 2 m, as stated by the user" || out.Survey.WaterTable != profile.Known(2) {
		t.Error(got)
	}
	// The user's water table goes before the profile's own; failing it, dry to 6 m,
	// σ'v = 108; ln 108 = 4.6821312, e^(4.045 + 0.2875903 + 1.1049830) = 229.883.
	p.Survey.WaterTable = profile.Known(6)
	if again, err := Profile(p, opt); err != nil || again.Layers[0].Vs != out.Layers[0].Vs {
		t.Errorf("got %+v, %v", again.Layers, err)
	}
	opt.WaterTable = profile.Optional{}
	if out, err = Profile(p, opt); err != nil || math.Abs(out.Layers[0].Vs-229.883) > 0.01 {
		t.Errorf("got %+v, %v", out.Layers, err)
	}
	// By hand: N60 = 20·72/60·0.85 = 20.4 with rods of 6 m; 229.883·1.02^0.096 = 230.320.
	opt.Blows, opt.Drive = AsHeaded, Drive{EnergyRatio: 72}
	if out, err = Profile(p, opt); err != nil || math.Abs(out.Layers[0].Vs-230.320) > 0.01 {
		t.Errorf("got %+v, %v", out.Layers, err)
	}
	if got := note(t, &out, "blow-counts"); !strings.HasPrefix(got, "blow counts are corrected to N60 from an energy ratio of 72 %, a borehole of 65 to 115 mm and") {
		t.Error(got)
	}
}

// A density of a layer goes before the user's unit weight, which is then not
// told of.
func TestProfileDensity(t *testing.T) {
	p := boring()
	p.Layers = []profile.Layer{{Top: 0, Bottom: 12, N: 20, Density: 1900, Given: profile.GivenN | profile.GivenDensity, Soil: "sand"}}
	opt := Options{Relations: []string{"brandenberg-2010-sand"}, Blows: Energy60, UnitWeight: 25, WaterTable: profile.Known(20)}
	out, err := Profile(p, opt)
	// By hand: σ'v = 18.632635·6 = 111.79581; ln = 4.7166735; e^(4.3325903 + 1.1131349) = 231.765.
	if err != nil || math.Abs(out.Layers[0].Vs-231.765) > 0.01 || hasNote(&out, "unit-weight") {
		t.Errorf("got %+v, %v", out, err)
	}
}

// Velocities beside N are neither used nor kept, with the quantities that
// belong to them.
func TestProfileWithVelocities(t *testing.T) {
	p := &profile.Profile{Name: "B2", Layers: []profile.Layer{{Top: 0, Bottom: 10, Vs: 400, VsBottom: 500, Vp: 1500, N: 20, Given: profile.GivenVp | profile.GivenN,
		Basis: profile.Measured}}}
	out, err := Profile(p, Options{Relations: []string{"imai-1977"}, SigmaLn: 0.3})
	if err != nil {
		t.Fatal(err)
	}
	if l := out.Layers[0]; !near(l.Vs, 249.740226) || l.Gradient() || l.Has(profile.GivenVp) || l.Basis != profile.Correlated || l.SigmaLnVs != 0.3 {
		t.Errorf("got %+v", l)
	}
	note(t, &out, "velocity-left-out")
	if got := note(t, &out, "correlation-sigma"); !strings.HasPrefix(got, "sigma of ln Vs of one correlation is taken as 0.3, as stated;") {
		t.Error(got)
	}
}

func TestOptionsCheck(t *testing.T) {
	ok := []string{"imai-1977"}
	for want, opt := range map[string]Options{
		"no correlation is named": {},
		`no correlation is called "imai-1978"; did you mean "imai-1977"`:               {Relations: []string{"imai-1978"}},
		`correlation "imai-1977" is named twice`:                                       {Relations: []string{"imai-1977", " imai-1977"}},
		"a unit weight of 1.8 kN/m³ is not one of the ground: 9 to 32 kN/m³":           {Relations: ok, UnitWeight: 1.8},
		"a sigma of ln Vs of 30 is not one of 0 to 1":                                  {Relations: ok, SigmaLn: 30},
		"a step of 0.01 m is not one of 0.1 m or more":                                 {Relations: ok, Step: 0.01},
		"an area ratio of 1.2 is not one of 0 to 1":                                    {Relations: ok, AreaRatio: 1.2},
		"a water table at NaN m is not a depth":                                        {Relations: ok, WaterTable: profile.Known(math.NaN())},
		"an energy ratio of 0.6 % is not one: hammers give 30 to 110 %":                {Relations: ok, Drive: Drive{EnergyRatio: 0.6}},
		"blow counts that are N60 are not corrected again: leave the energy ratio out": {Relations: ok, Blows: Energy60, Drive: Drive{EnergyRatio: 60}},
	} {
		if _, err := Profile(boring(), opt); err == nil || err.Error() != want {
			t.Errorf("got  %v\nwant %s", err, want)
		}
		if _, err := Sounding(&Cone{}, opt); err == nil || err.Error() != want {
			t.Errorf("cone: got  %v\nwant %s", err, want)
		}
	}
}

// Cutting a layer in two changes nothing where no relation asks for the depth.
func TestProfileCut(t *testing.T) {
	opt := Options{Relations: []string{"imai-1977", "ohta-goto-1978"}}
	whole, err := Profile(boring(), opt)
	if err != nil {
		t.Fatal(err)
	}
	p := boring()
	lower := p.Layers[1]
	p.Layers[1].Bottom, lower.Top = 7, 7
	p.Layers = slices.Insert(p.Layers, 2, lower)
	cut, err := Profile(p, opt)
	if err != nil || cut.Layers[1].Vs != whole.Layers[1].Vs || cut.Layers[2].Vs != whole.Layers[1].Vs {
		t.Errorf("got %+v, %v", cut.Layers, err)
	}
}

// The heading of the file says whether N is N60; it is not corrected again.
func TestProfileHeading(t *testing.T) {
	p := boring()
	p.Layers = []profile.Layer{{Top: 0, Bottom: 12, N: 20, Given: profile.GivenN, Soil: "sand"}}
	opt := Options{Relations: []string{"brandenberg-2010-sand"}, UnitWeight: 18, WaterTable: profile.Known(6)}
	for heading, is := range map[string]bool{"ISPT_N60": true, "N60 (blows)": true, "n-60": true, "N": false, "(N1)60": false, "ISPT_NVAL": false} {
		p.Reading.Columns = []profile.Column{{Heading: "N60 of another column"}, {Heading: heading, Quantity: profile.N}}
		out, err := Profile(p, opt)
		if is != (err == nil) {
			t.Errorf("%s: %v", heading, err)
		}
		// 229.883 m/s, as in TestProfileStress.
		if is && math.Abs(out.Layers[0].Vs-229.883) > 0.01 {
			t.Errorf("%s: %v m/s", heading, out.Layers[0].Vs)
		}
	}
}

// Layers at the top that have no test take the first velocity that there is;
// a boring without any, or with its first test too deep, is a fault.
func TestProfileTop(t *testing.T) {
	p := boring()
	p.Layers[0].Given = 0
	opt := Options{Relations: []string{"imai-1977"}}
	out, err := Profile(p, opt)
	if err != nil || !near(out.Layers[0].Vs, 249.740226) || out.Layers[0].SigmaLnVs != Planning || !out.Layers[0].Has(profile.GivenSigma) ||
		out.BasisOf(0) != profile.Correlated || out.Layers[0].Bottom != 4 {
		t.Errorf("got %+v, %v", out.Layers, err)
	}
	if got := note(t, &out, "top-not-measured"); got != "no correlation gives a velocity above 4 m; the first one is carried up to ground level" {
		t.Error(got)
	}
	p.Layers[0].Bottom, p.Layers[1].Top = 5.1, 5.1
	if _, err := Profile(p, opt); err == nil {
		t.Error("5.1 m pass")
	}
	p.Layers = p.Layers[:1]
	p.Layers[0].Bottom = 4
	if _, err := Profile(p, opt); err == nil {
		t.Error("a boring without a test passes")
	}
}

// N60 comes of the energy ratio of each layer's tests, unless the user states
// one; where they vary that is said. By hand, with the rods of 2 and 8 m: 20·72/60
// ·0.75 = 18 and 20·60/60·0.95 = 19 blows.
func TestProfileEnergyRatioOfTests(t *testing.T) {
	p := &profile.Profile{Name: "B1", NoVelocity: true, Layers: []profile.Layer{
		{Top: 0, Bottom: 4, N: 20, EnergyRatio: 72, Density: 1800, Given: profile.GivenN | profile.GivenDensity, Soil: "Sand"},
		{Top: 4, Bottom: 12, N: 20, EnergyRatio: 60, Density: 1800, Given: profile.GivenN | profile.GivenDensity, Soil: "Sand"},
	}}
	o := Options{Relations: []string{"brandenberg-2010-sand"}, WaterTable: profile.Known(50)}
	out, err := Profile(p, o)
	if err != nil {
		t.Fatal(err)
	}
	for i, n := range []float64{18, 19} {
		stress := 1.8 * 9.80665 * []float64{2, 8}[i]
		if want := math.Exp(4.045 + 0.096*math.Log(n) + 0.236*math.Log(stress)); math.Abs(out.Layers[i].Vs-want) > 1e-6 {
			t.Errorf("layer %d: got %v m/s, want %v", i+1, out.Layers[i].Vs, want)
		}
	}
	if text := note(t, &out, "blow-counts"); !strings.HasPrefix(text, "blow counts are corrected to N60 from the energy ratio that the file states of each test, which varies from 60 to 72 %, a borehole") {
		t.Error(text)
	}
	o.Drive.EnergyRatio = 60
	if out, err = Profile(p, o); err != nil || !strings.Contains(note(t, &out, "blow-counts"), "from an energy ratio of 60 %, a borehole") {
		t.Errorf("%v, %v", err, out.Notes)
	}
	o.Drive.EnergyRatio, p.Layers[0].EnergyRatio = 0, 60
	if out, err = Profile(p, o); err != nil || !strings.Contains(note(t, &out, "blow-counts"), "from the energy ratio of 60 % that the file states, a borehole") {
		t.Errorf("%v, %v", err, out.Notes)
	}
	p.Layers[1].EnergyRatio = 5
	if _, err = Profile(p, o); err == nil || !strings.Contains(err.Error(), "an energy ratio of 5 % is not one") {
		t.Errorf("got %v", err)
	}
}

// Relations of which one holds in each layer do not differ at one depth.
func TestRelationsSideBySideDoNotDifferByOne(t *testing.T) {
	p := &profile.Profile{Name: "B1", NoVelocity: true, Layers: []profile.Layer{
		{Top: 0, Bottom: 4, N: 20, EnergyRatio: 60, Density: 1800, Given: profile.GivenN | profile.GivenDensity, Soil: "Sand"},
		{Top: 4, Bottom: 12, N: 20, EnergyRatio: 60, Density: 1800, Given: profile.GivenN | profile.GivenDensity, Soil: "Clay"},
	}}
	out, err := Profile(p, Options{Relations: []string{"brandenberg-2010-sand", "brandenberg-2010-clay"}, WaterTable: profile.Known(50)})
	if err != nil {
		t.Fatal(err)
	}
	if text := note(t, &out, "correlated-by"); strings.Contains(text, "differ by") ||
		!strings.HasSuffix(text, "each is the geometric mean of those of them that hold in its layer, of which no two hold at one depth") {
		t.Error(text)
	}
}

package profile

import (
	"math"
	"strings"
	"testing"
)

// valid is a profile that nothing is wrong with and every quantity is in.
func valid() *Profile {
	all := GivenVp | GivenDensity | GivenSigma | GivenN | GivenSu | GivenPI | GivenWaterContent
	return &Profile{
		Name: "A",
		Layers: []Layer{
			{Top: 0, Bottom: 4, Vs: 150, VsBottom: 200, Vp: 900, Density: 1800, SigmaLnVs: 0.1, Su: 40, Given: all, Line: 2, Column: 7},
			{Top: 4, Bottom: 12, Vs: 260, Line: 3, Column: 7},
			{Top: 12, Bottom: math.Inf(1), Vs: 420, Line: 4, Column: 8},
		},
		Survey:   Survey{DepthReached: 30, GroundLevel: Known(-2), WaterTable: Known(1.5)},
		Position: Position{Latitude: Known(51), Longitude: Known(-180)},
		Reading:  &Reading{File: "a.csv"},
	}
}

func TestValidate(t *testing.T) {
	if faults := Validate(valid()); len(faults) > 0 {
		t.Fatalf("a sound profile: %v", faults)
	}
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		name   string
		change func(p *Profile)
		want   string // faults, one a line
	}{
		{"no layers", func(p *Profile) { p.Layers = nil }, "a.csv: the profile has no layers"},
		{"no file", func(p *Profile) { p.Layers, p.Reading = nil, nil }, "the profile has no layers"},
		{"below ground", func(p *Profile) { p.Layers = p.Layers[1:] }, "a.csv:3:7: gap from ground level to 4 m"},
		{"above ground", func(p *Profile) { p.Layers[0].Top = -1 }, "a.csv:2:7: top -1 m of layer 1 lies above ground level"},
		{"top NaN", func(p *Profile) { p.Layers[1].Top = nan }, "a.csv:3:7: top NaN of layer 2 is not a finite number"},
		{"bottom NaN", func(p *Profile) { p.Layers[1].Bottom = nan }, "a.csv:3:7: bottom NaN of layer 2 is not a depth"},
		{"gap", func(p *Profile) { p.Layers[1].Top = 4.04 }, "a.csv:3:7: gap from 4 m to 4.04 m"},
		{"gap of 2 µm", func(p *Profile) { p.Layers[1].Top = 4.000002 }, "a.csv:3:7: gap from 4 m to 4.000002 m"},
		{"rounding", func(p *Profile) { p.Layers[1].Top = 4.0000009 }, ""},
		{"overlap", func(p *Profile) { p.Layers[1].Top = 3 }, "a.csv:3:7: layers 1 and 2 overlap from 3 m to 4 m"},
		{"order", func(p *Profile) { p.Layers[1], p.Layers[2] = p.Layers[2], p.Layers[1] },
			"a.csv:4:8: layer 2 has no bottom, but another layer follows\na.csv:4:8: gap from 4 m to 12 m\na.csv:3:7: layer 3 starts at 4 m, above the layer before it"},
		{"no thickness", func(p *Profile) { p.Layers[1].Bottom = 4; p.Layers[2].Top = 4 }, "a.csv:3:7: thickness 0 m of layer 2 is not positive"},
		{"deep", func(p *Profile) { p.Layers[2].Bottom = 2e5 }, "a.csv:4:8: layer 3 reaches deeper than 100000 m"},
		{"water", func(p *Profile) { p.Layers[0] = Layer{Bottom: 4} }, "a.csv: Vs of layer 1 is zero: shear waves do not pass through water"},
		{"negative", func(p *Profile) { p.Layers[1].Vs = -3 }, "a.csv:3:7: Vs -3 m/s of layer 2 is not positive"},
		{"infinite", func(p *Profile) { p.Layers[1].Vs = inf }, "a.csv:3:7: Vs +Inf of layer 2 is not a finite number"},
		{"slow", func(p *Profile) { p.Layers[1].Vs = 0.26 }, "a.csv:3:7: Vs 0.26 m/s of layer 2 is slower than 10 m/s"},
		{"fast", func(p *Profile) { p.Layers[1].Vs = 26000 }, "a.csv:3:7: Vs 26000 m/s of layer 2 is faster than 5000 m/s"},
		{"gradient", func(p *Profile) { p.Layers[0].VsBottom = -200 }, "a.csv:2:7: Vs at the bottom -200 m/s of layer 1 is not positive"},
		{"half-space gradient", func(p *Profile) { p.Layers[2].VsBottom = 500 }, "a.csv:4:8: layer 3 is a half-space with a velocity gradient"},
		{"Vp zero", func(p *Profile) { p.Layers[0].Vp = 0 }, "a.csv:2:7: Vp 0 m/s of layer 1 is not positive"},
		{"Vp not given", func(p *Profile) { p.Layers[1].Vp = -1 }, ""},
		// 230/200 = 1.15: the ratio is taken where Vs is fastest.
		{"Vp/Vs", func(p *Profile) { p.Layers[0].Vp = 230 }, "a.csv:2:7: Vp/Vs = 1.15 of layer 1 is below 1.1547, which no solid can have"},
		// 2/√3 = 1.15470054: rounded to 1.1547 it still stands.
		{"Vp/Vs rounded", func(p *Profile) { p.Layers[0].Vp = 230.94 }, ""},
		{"optional", func(p *Profile) {
			l := &p.Layers[0]
			l.Density, l.SigmaLnVs, l.N, l.Su, l.PI, l.WaterContent = 0, -0.1, -1, nan, -1, inf
		}, `a.csv:2:7: density is zero
a.csv:2:7: sigma of ln Vs -0.1 is negative
a.csv:2:7: N -1 is negative
a.csv:2:7: su NaN is not a finite number
a.csv:2:7: plasticity index -1 is negative
a.csv:2:7: water content +Inf is not a finite number`},
		{"survey", func(p *Profile) {
			p.Survey = Survey{DepthReached: -1, GroundLevel: Known(nan), WaterTable: Known(inf)}
			p.Position = Position{Latitude: Known(90.1), Longitude: Known(-181)}
		}, `a.csv: depth reached -1 m is not a depth
a.csv: ground level NaN lies outside -100000 to 100000
a.csv: water table +Inf lies outside -100000 to 100000
a.csv: latitude 90.1 lies outside -90 to 90
a.csv: longitude -181 lies outside -180 to 180`},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := valid()
			c.change(p)
			if got := Validate(p).Error(); got != c.want {
				t.Errorf("got\n%s\nwant\n%s", got, c.want)
			}
		})
	}
}

// The limits of Vp/Vs are those of Poisson's ratio: with r² = 4/3 the bulk
// modulus Vp² − 4/3 Vs² is zero, with r² = 2 the ratio (r²−2)/(2(r²−1)) is.
func TestVpVsLimits(t *testing.T) {
	if math.Abs(MinVpVs*MinVpVs-4.0/3) > 1e-15 || math.Abs(ZeroPoisson*ZeroPoisson-2) > 1e-15 {
		t.Errorf("limits %v and %v", MinVpVs, ZeroPoisson)
	}
}

func notesOf(p *Profile) string {
	var ids []string
	for _, n := range Doubts(p) {
		ids = append(ids, n.ID)
	}
	return strings.Join(ids, " ")
}

func TestDoubts(t *testing.T) {
	if got := notesOf(valid()); got != "" {
		t.Fatalf("a sound profile: %s", got)
	}
	times := func(p *Profile, factor float64) {
		for i := range p.Layers {
			l := &p.Layers[i]
			l.Vs, l.VsBottom, l.Vp = l.Vs*factor, l.VsBottom*factor, l.Vp*factor
		}
	}
	for _, c := range []struct {
		name   string
		change func(p *Profile)
		want   string
	}{
		{"no layers", func(p *Profile) { p.Layers = nil }, ""},
		{"one layer", func(p *Profile) { p.Layers = p.Layers[:1] }, "one-layer"},
		// 1,000 and 3,600 m/s are the limits themselves: not yet doubtful.
		{"at the limits", func(p *Profile) { times(p, 6); p.Layers[0].Vs, p.Layers[2].Vs = 1000, 3600 }, ""},
		{"fast at the surface", func(p *Profile) { times(p, 7) }, "unit-suspect"},
		{"fast rock", func(p *Profile) {
			times(p, 7)
			p.Layers[0].Soil, p.Layers[1].Soil = "weathered Mudstone", "Granite; fresh"
		}, ""},
		{"fast below", func(p *Profile) { p.Layers[2].Vs = 3601 }, "unit-suspect"},
		{"slow", func(p *Profile) { p.Layers[0].Vs = 19 }, "unit-suspect"},
		// 282/200 = 1.41, 283/200 = 1.415; √2 = 1.41421.
		{"Vp/Vs below √2", func(p *Profile) { p.Layers[0].Vp = 282 }, "low-vp-vs"},
		{"Vp/Vs above √2", func(p *Profile) { p.Layers[0].Vp = 283 }, ""},
		{"refraction", func(p *Profile) { p.Survey.Method = "SH refraction" }, ""},
		{"reversal", func(p *Profile) { p.Layers[1].Vs = 190 }, ""},
		{"reversal in refraction", func(p *Profile) { p.Layers[1].Vs, p.Survey.Method = 190, "Refraction (SH)" }, "refraction-reversal"},
		{"reversal inside a layer", func(p *Profile) { p.Layers[0].VsBottom, p.Survey.Method = 140, "refraction" }, "refraction-reversal"},
		{"reversal in microtremor", func(p *Profile) { p.Layers[1].Vs, p.Survey.Method = 190, "refraction microtremor" }, ""},
		{"below depth reached", func(p *Profile) { p.Survey.DepthReached = 11 }, "below-depth-reached"},
		{"depth reached", func(p *Profile) { p.Survey.DepthReached = 12 }, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := valid()
			c.change(p)
			if got := notesOf(p); got != c.want {
				t.Errorf("notes %q, want %q", got, c.want)
			}
		})
	}
}

// A layered profile in m/s read as if it were in ft/s, and the reverse, is
// doubted where it can be: soil of 320 m/s and more in the upper 10 m, at
// 3.28 times, exceeds 1,000 m/s.
func TestUnitSuspectFeet(t *testing.T) {
	p := valid()
	for i := range p.Layers {
		l := &p.Layers[i]
		l.Vs, l.VsBottom = (l.Vs+170)/Foot, 0
		l.Given = 0
	}
	if got := notesOf(p); got != "unit-suspect" {
		t.Errorf("notes %q", got)
	}
}

func TestReversalsAreCounted(t *testing.T) {
	p := &Profile{Survey: Survey{Method: "refraction"}}
	for i := range 16 {
		p.Layers = append(p.Layers, Layer{Top: float64(i), Bottom: float64(i + 1), Vs: 300 - float64(10*(i%2))})
	}
	// The velocity falls at 1, 3, … 15 m: eight times.
	const want = "the velocity falls with depth at 1 m, 3 m, 5 m, 7 m, 9 m and 3 more depths, which refraction cannot find"
	if notes := Doubts(p); len(notes) != 1 || notes[0].Text != want {
		t.Errorf("notes %v", notes)
	}
}

// However many layers are wrong, few faults are kept and the rest are counted.
func TestValidateBounds(t *testing.T) {
	p := &Profile{Name: "A"}
	for i := range 100_000 {
		p.Layers = append(p.Layers, Layer{Top: float64(i) / 10, Bottom: float64(i+1) / 10, Vs: -1})
	}
	faults := Validate(p)
	if len(faults) != MaxFaults+1 || faults[MaxFaults].More != 100_000-MaxFaults || faults[MaxFaults].Text != "and 99980 more faults" {
		t.Fatalf("%d faults, the last: %+v", len(faults), faults[len(faults)-1])
	}
	// The faults of several profiles are counted together.
	c := Collector{File: "f"}
	c.Fault(Place{}, "", "one")
	c.Add(faults)
	if err := c.Err(); c.Count() != 100_001 || !strings.HasSuffix(err.Error(), "\nf: and 99981 more faults") {
		t.Errorf("%d: %v", c.Count(), err)
	}
	if n := testing.AllocsPerRun(3, func() { Validate(p) }); n > 400_000 { // their numbers, which nobody reads
		t.Errorf("%v allocations", n)
	}
}

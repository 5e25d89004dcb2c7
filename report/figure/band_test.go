package figure_test

import (
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
)

// threeSteps is a band with a gap from 12 to 15 m.
var threeSteps = []figure.BandPoint{
	{Depth: 0, Low: 110, Median: 140, High: 175},
	{Depth: 4, Low: 180, Median: 230, High: 300},
	{Depth: 12},
	{Depth: 15, Low: 350, Median: 420, High: 640},
	{Depth: 28},
}

// ofColour returns the fills of a colour.
func (r *reading) ofColour(c report.Colour) []*report.Fill {
	var fills []*report.Fill
	for _, m := range r.picture.Marks {
		if f, ok := m.(*report.Fill); ok && f.Colour == c {
			fills = append(fills, f)
		}
	}
	return fills
}

// area returns the area inside a path of straight lines (shoelace formula).
func area(p report.Path) float64 {
	sum := 0.0
	var a, first report.Move
	for i, b := range p {
		if b.Kind == report.Close {
			b = first
		}
		if i == 0 {
			first = b
		} else {
			sum += a.X*b.Y - b.X*a.Y
		}
		a = b
	}
	return math.Abs(sum) / 2
}

var (
	skyBlue   = report.Colour{R: 86, G: 180, B: 233}
	paleBlue  = report.Colour{R: 213, G: 236, B: 250}
	vermilion = report.Colour{R: 213, G: 94}
	blue      = report.Colour{G: 114, B: 178}
)

func TestVelocityBand(t *testing.T) {
	lines := []figure.Line{{Name: "L1", Layers: site()[:4]}, {Name: "L2", Layers: site()[:3]}}
	r := velocity(t, lines, figure.VelocityOptions{Classes: fourClasses, Band: threeSteps})
	x, y := r.x, r.y
	perArea := (x(1) - x(0)) * (y(0) - y(1)) // of 1 m/s by 1 m

	// By hand: 65 m/s over 4 m and 120 m/s over 8 m are 1220 m²/s, 290 m/s
	// over 13 m are 3770 m²/s. The last pale fill is the key's.
	fills := r.ofColour(paleBlue)
	if len(fills) != 3 {
		t.Fatalf("%d parts of the band and the key, want 3", len(fills))
	}
	for i, want := range []float64{1220, 3770} {
		if got := area(fills[i].Path) / perArea; math.Abs(got-want) > 0.001*want {
			t.Errorf("part %d of the band has %v m²/s, want %v", i, got, want)
		}
	}
	if r.picture.Marks[0] != report.Mark(fills[0]) {
		t.Error("the band does not lie behind everything")
	}
	for _, p := range []struct{ v0, z0, v1, z1 float64 }{
		{110, 0, 110, 4}, {110, 4, 180, 4}, {180, 4, 180, 12}, {350, 15, 350, 28}, // low
		{140, 0, 140, 4}, {140, 4, 230, 4}, {230, 4, 230, 12}, {420, 15, 420, 28}, // median
		{175, 0, 175, 4}, {175, 4, 300, 4}, {300, 4, 300, 12}, {640, 15, 640, 28}, // high
	} {
		if r.find(x(p.v0), y(p.z0), x(p.v1), y(p.z1)) == nil {
			t.Errorf("no line from %v m/s at %v m to %v m/s at %v m", p.v0, p.z0, p.v1, p.z1)
		}
	}
	if r.find(x(230), y(12), x(420), y(15)) != nil || r.find(x(230), y(12), x(230), y(15)) != nil {
		t.Error("the median is drawn through the gap")
	}
	for _, text := range []string{"L1", "L2", "median", "16–84 % band"} {
		r.label(t, text)
	}
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)
}

// In grey the median is told from every profile by the white inside it.
func TestVelocityMedianIsTwoLines(t *testing.T) {
	r := velocity(t, []figure.Line{{Layers: site()}}, figure.VelocityOptions{Band: threeSteps})
	var widths []float64
	white := report.Colour{R: 255, G: 255, B: 255}
	for _, s := range r.segments {
		if near(s.x0, r.x(420)) && near(s.y0, r.y(15)) && near(s.x1, r.x(420)) && near(s.y1, r.y(28)) {
			if inner := len(widths) == 1; inner != (s.of.Colour == white) {
				t.Errorf("line %d of the median is %v", len(widths), s.of.Colour)
			}
			widths = append(widths, s.of.Width)
		}
	}
	if len(widths) != 2 || !(widths[0] > widths[1]+1) {
		t.Errorf("the median is drawn %v wide", widths)
	}
}

func TestVelocityBandInFeet(t *testing.T) {
	// 10 ft are 3.048 m, 100 ft 30.48 m; 700 and 1500 ft/s are 213.36 and 457.2 m/s.
	band := []figure.BandPoint{{Depth: 3.048, Low: 213.36, Median: 213.36, High: 457.2}, {Depth: 30.48}}
	r := velocity(t, []figure.Line{{Layers: []profile.Layer{{Bottom: 6, Vs: 200}}}}, figure.VelocityOptions{Units: figure.US, Band: band})
	if r.find(r.x(700), r.y(10), r.x(700), r.y(100)) == nil || r.find(r.x(1500), r.y(10), r.x(1500), r.y(100)) == nil {
		t.Error("the band is not at its place in feet, or deeper or faster than the frame")
	}
}

func TestVelocityCutsBandAtDepth(t *testing.T) {
	r := velocity(t, []figure.Line{{Layers: site()}}, figure.VelocityOptions{Depth: 20, Band: threeSteps})
	if r.find(r.x(420), r.y(15), r.x(420), r.frame.y0) == nil {
		t.Error("the median does not end at the frame")
	}
	for _, f := range r.ofColour(paleBlue)[:2] {
		for _, m := range f.Path {
			if m.Kind != report.Close && m.Y < r.frame.y0-0.01 {
				t.Errorf("the band leaves the frame at %v", m.Y)
			}
		}
	}
}

// randomBand returns a band of 1 to 60 steps, some of them gaps or without
// width.
func randomBand(rng *rand.Rand) []figure.BandPoint {
	var band []figure.BandPoint
	z := 0.0
	for range 1 + rng.IntN(60) {
		b := figure.BandPoint{Depth: z, Low: 40 * math.Pow(70, rng.Float64())}
		b.Median = b.Low * math.Exp(rng.Float64())
		b.High = b.Median * math.Exp(rng.Float64()*float64(rng.IntN(2)))
		if rng.IntN(6) == 0 {
			b = figure.BandPoint{Depth: z}
		}
		band = append(band, b)
		z += 0.01 + 5*rng.Float64()
	}
	return append(band, figure.BandPoint{Depth: z})
}

func TestVelocityOfRandomBands(t *testing.T) {
	for seed := range uint64(150) {
		rng := rand.New(rand.NewPCG(seed, 4))
		lines, o := randomLines(rng), randomOptions(rng)
		o.Band = randomBand(rng)
		r := velocity(t, lines, o)
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		unit := []float64{1, 0.3048}[o.Units]
		for i, b := range o.Band[:len(o.Band)-1] {
			if b.Median == 0 {
				continue
			}
			for _, v := range []float64{b.Low, b.Median, b.High} {
				if r.find(r.x(v/unit), r.y(b.Depth/unit), r.x(v/unit), r.y(o.Band[i+1].Depth/unit)) == nil {
					t.Errorf("step %d of the band is not drawn at %v m/s", i, v)
				}
			}
		}
		if again := velocity(t, lines, o); !reflect.DeepEqual(r.picture, again.picture) {
			t.Error("another picture the second time")
		}
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

func TestVelocityRefusesBands(t *testing.T) {
	good := figure.BandPoint{Low: 100, Median: 200, High: 300}
	end := figure.BandPoint{Depth: 10}
	for want, band := range map[string][]figure.BandPoint{
		"one point":                       {good},
		"point 2 of the band":             {good, {Depth: 0}},
		"from NaN m":                      {{Depth: math.NaN(), Low: 1, Median: 1, High: 1}, end},
		"point 2 of the band cannot be":   {good, {Depth: math.Inf(1)}},
		"300 m/s, 200 m/s and 300 m/s":    {{Low: 300, Median: 200, High: 300}, end},
		"100 m/s, 300 m/s and 200 m/s":    {{Low: 100, Median: 300, High: 200}, end},
		"NaN m/s":                         {{Low: math.NaN(), Median: 300, High: 400}, end},
		"0 m/s, 300 m/s and 400 m/s":      {{Median: 300, High: 400}, end},
		"100 m/s, 300 m/s and +Inf m/s":   {{Low: 100, Median: 300, High: math.Inf(1)}, end},
		"-1 m/s, -1 m/s and -1 m/s from ": {{Low: -1, Median: -1, High: -1}, end},
	} {
		p, err := figure.Velocity([]figure.Line{{Layers: site()}}, figure.VelocityOptions{Band: band})
		if err == nil || p != nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}

// Steps of the same velocity are one line, which a fine band needs to stay
// small.
func TestVelocityJoinsEqualSteps(t *testing.T) {
	band := []figure.BandPoint{{Depth: 0, Low: 200, Median: 300, High: 400}, {Depth: 5, Low: 200, Median: 350, High: 400}, {Depth: 10}}
	r := velocity(t, []figure.Line{{Layers: site()}}, figure.VelocityOptions{Band: band})
	for _, v := range []float64{200, 400} {
		if r.find(r.x(v), r.y(0), r.x(v), r.y(10)) == nil {
			t.Errorf("no single line at %v m/s", v)
		}
	}
	if r.find(r.x(300), r.y(0), r.x(300), r.y(5)) == nil || r.find(r.x(350), r.y(5), r.x(350), r.y(10)) == nil {
		t.Error("the median does not step")
	}
}

func BenchmarkVelocityBand(b *testing.B) {
	var band []figure.BandPoint
	for i := range 121 {
		v := 150 + float64(i)
		band = append(band, figure.BandPoint{Depth: float64(i) / 4, Low: 0.8 * v, Median: v, High: 1.2 * v})
	}
	lines := []figure.Line{twentyLayers(), twentyLayers(), twentyLayers()}
	for b.Loop() {
		if _, err := figure.Velocity(lines, figure.VelocityOptions{Thickness: 30, Classes: manyClasses, Band: band}); err != nil {
			b.Fatal(err)
		}
	}
}

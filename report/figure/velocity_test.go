package figure_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
)

// Invented bounds, near one another at the soft end and far apart at the
// stiff.
var (
	fourClasses = figure.Classes{Code: "Code of four", Lowest: "S", Bounds: []figure.Bound{{Value: 180, Class: "R"}, {Value: 360, Class: "Q"}, {Value: 800, Class: "P"}}}
	manyClasses = figure.Classes{Code: "Code of eight", Lowest: "T", Bounds: []figure.Bound{{Value: 152.4, Class: "TS"}, {Value: 213.36, Class: "S"}, {Value: 304.8, Class: "SR"}, {Value: 441.96, Class: "R"}, {Value: 640.08, Class: "RQ"}, {Value: 914.4, Class: "Q"}, {Value: 1524, Class: "P"}}}
)

// wordClasses has names that are wider than their classes.
var wordClasses = figure.Classes{Code: strings.Repeat("A code of words ", 9), Lowest: "the softest of all",
	Bounds: []figure.Bound{{Value: 300, Class: ""}, {Value: 330, Class: "and one without a bound above"}}}

// site is an invented profile with a gradient, a reversal and a half-space.
func site() []profile.Layer {
	return []profile.Layer{
		{Top: 0, Bottom: 3, Vs: 120},
		{Top: 3, Bottom: 14, Vs: 180, VsBottom: 340},
		{Top: 14, Bottom: 16.5, Vs: 260},
		{Top: 16.5, Bottom: 26, Vs: 410},
		{Top: 26, Bottom: math.Inf(1), Vs: 560},
	}
}

// average returns a curve that starts at NaN, as 0 m in 0 s does.
func average() []figure.Point {
	points := []figure.Point{{Velocity: math.NaN(), Depth: 0}}
	for z := 0.5; z <= 30; z += 0.5 {
		points = append(points, figure.Point{Velocity: 120 + 6*z, Depth: z})
	}
	return points
}

// velocity draws a figure and reads it.
func velocity(t *testing.T, lines []figure.Line, o figure.VelocityOptions) *reading {
	t.Helper()
	p, err := figure.Velocity(lines, o)
	if err != nil {
		t.Fatal(err)
	}
	r := read(t, p)
	r.axes(t)
	return r
}

func TestVelocityShowsWhatItIsGiven(t *testing.T) {
	r := velocity(t, []figure.Line{{Name: "Line L1", Layers: site(), Reached: 20, Average: average()}},
		figure.VelocityOptions{Thickness: 30, Classes: fourClasses})
	x, y, f := r.x, r.y, r.frame

	if got, want := r.picture.Width, 165/25.4*72; !near(got, want) { // 165 mm in points
		t.Errorf("the picture is %v pt wide, want %v", got, want)
	}
	if !near(x(0), f.x0) || !near(y(0), f.y1) {
		t.Errorf("the axes do not start in the upper left corner")
	}
	if y(30) > y(0) {
		t.Errorf("depth grows upward")
	}
	pieces := []struct {
		v0, z0, v1, z1 float64
		dashed         bool
	}{
		{120, 0, 120, 3, false},
		{120, 3, 180, 3, false},  // the step
		{180, 3, 340, 14, false}, // the gradient slopes
		{260, 14, 260, 16.5, false},
		{410, 16.5, 410, 20, false}, // down to the depth reached
		{410, 20, 410, 26, true},    // and below it
		{410, 26, 560, 26, true},
	}
	for _, p := range pieces {
		s := r.find(x(p.v0), y(p.z0), x(p.v1), y(p.z1))
		if s == nil {
			t.Errorf("no line from %v m/s at %v m to %v m/s at %v m", p.v0, p.z0, p.v1, p.z1)
		} else if (s.Dash != nil) != p.dashed {
			t.Errorf("the line from %v m is dashed %v, want %v", p.z0, s.Dash, p.dashed)
		}
	}
	if r.find(x(560), y(26), x(560), f.y0) == nil {
		t.Error("the half-space does not reach the bottom")
	}
	if !slices.ContainsFunc(r.picture.Marks, func(m report.Mark) bool {
		fill, ok := m.(*report.Fill)
		return ok && near(fill.Path[0].X, x(560)) && near(fill.Path[0].Y, f.y0)
	}) {
		t.Error("the half-space has no arrow")
	}
	if r.find(f.x0, y(30), f.x1, y(30)) == nil || r.find(f.x0, y(20), f.x1, y(20)) == nil {
		t.Error("the averaging depth or the depth reached has no line")
	}
	for _, v := range []float64{180, 360} {
		if r.find(x(v), f.y0, x(v), f.y1+4) == nil {
			t.Errorf("no line at the bound of %v m/s", v)
		}
	}
	// 120 + 6·29.5 and 120 + 6·30, the last points of the average.
	if r.find(x(297), y(29.5), x(300), y(30)) == nil {
		t.Error("the average is not drawn to its end")
	}
	for text, middle := range map[string]float64{"S": 90, "R": 270, "180": 180, "360": 360} {
		found := false
		for _, b := range r.boxes {
			found = found || b.text == text && b.y0 > f.y1 && near((b.x0+b.x1)/2, x(middle))
		}
		if !found {
			t.Errorf("%q does not stand over %v m/s", text, middle)
		}
	}
	for _, text := range []string{"Shear-wave velocity Vs (m/s)", "Depth below ground level (m)", "Line L1",
		"Code of four", "averaging depth 30 m", "depth reached 20 m"} {
		r.label(t, text)
	}
	r.checkLabels(t)
	r.checkMarks(t)
}

func TestVelocityInFeet(t *testing.T) {
	// 1 ft is 0.3048 m: 100 ft are 30.48 m, 1200 ft/s are 365.76 m/s.
	classes := figure.Classes{Lowest: "D", Bounds: []figure.Bound{{Value: 365.76, Class: "C"}}}
	layers := []profile.Layer{{Top: 0, Bottom: 6.096, Vs: 243.84}, {Top: 6.096, Bottom: 36.576, Vs: 426.72}} // 20 ft, 800 ft/s; 120 ft, 1400 ft/s
	r := velocity(t, []figure.Line{{Name: "L1", Layers: layers}},
		figure.VelocityOptions{Units: figure.US, Thickness: 30.48, Datum: 3.048, Classes: classes})
	x, y, f := r.x, r.y, r.frame
	if r.find(x(800), y(0), x(800), y(20)) == nil || r.find(x(1400), y(20), x(1400), y(120)) == nil {
		t.Error("a layer is not at its place in feet")
	}
	if r.find(x(1200), f.y0, x(1200), f.y1+4) == nil {
		t.Error("the bound is not at 1200 ft/s")
	}
	if r.find(f.x0, y(10), f.x1, y(10)) == nil || r.find(f.x0, y(110), f.x1, y(110)) == nil {
		t.Error("the datum or the averaging depth is not at its place in feet")
	}
	for _, text := range []string{"(ft/s)", "level (ft)", "datum 10 ft", "averaging depth 100 ft below datum", "1200"} {
		r.label(t, text)
	}
	r.checkLabels(t)
}

func TestVelocityDepthOption(t *testing.T) {
	r := velocity(t, []figure.Line{{Layers: site()}}, figure.VelocityOptions{Depth: 10.3})
	if !near(r.y(10.3), r.frame.y0) {
		t.Errorf("the axis does not end at 10.3 m")
	}
	// 180 + (340−180)·(10.3−3)/(14−3) at 10.3 m
	if r.find(r.x(180), r.y(3), r.x(180+160*7.3/11), r.y(10.3)) == nil {
		t.Error("the gradient is not cut off at 10.3 m")
	}
	if r.find(r.x(260), r.y(14), r.x(260), r.y(16.5)) != nil {
		t.Error("a layer is drawn below the axis")
	}
	r = velocity(t, []figure.Line{{Layers: site()[2:]}}, figure.VelocityOptions{Depth: 0.1})
	r.checkLabels(t) // all of the profile is deeper
}

func TestVelocityStaggersLetters(t *testing.T) {
	// On an axis to 3500 m/s and more, 60 to 90 m/s are some 6 pt: narrower
	// than their letters.
	r := velocity(t, []figure.Line{{Name: "two\nwords", Layers: []profile.Layer{{Bottom: 30, Vs: 3500}}}},
		figure.VelocityOptions{Classes: manyClasses})
	r.label(t, "two words")
	for text, middle := range map[string]float64{"T": 152.4 / 2, "TS": (152.4 + 213.36) / 2, "S": (213.36 + 304.8) / 2, "SR": (304.8 + 441.96) / 2} {
		if !slices.ContainsFunc(r.boxes, func(b box) bool {
			return b.text == text && near((b.x0+b.x1)/2, r.x(middle)) && b.y0 > r.frame.y1
		}) {
			t.Errorf("%s does not stand over %v m/s", text, middle)
		}
	}
	r.checkLabels(t)
}

func TestVelocityLeavesOutLongNames(t *testing.T) {
	r := velocity(t, []figure.Line{{Layers: []profile.Layer{{Bottom: 30, Vs: 320}}}},
		figure.VelocityOptions{Classes: wordClasses})
	r.label(t, "the softest of all")
	r.checkLabels(t) // the last name would run into the code's
}

func TestVelocityTellsProfilesApartInGrey(t *testing.T) {
	var lines []figure.Line
	for i := range 15 {
		lines = append(lines, figure.Line{Layers: []profile.Layer{{Bottom: 10, Vs: 100 + 20*float64(i)}}})
	}
	r := velocity(t, lines, figure.VelocityOptions{})
	type pattern struct {
		dash  string
		width float64
	}
	seen := map[pattern]int{}
	for i := range lines {
		v := 100 + 20*float64(i)
		s := r.find(r.x(v), r.y(0), r.x(v), r.y(10))
		if s == nil {
			t.Fatalf("no line for profile %d", i)
		}
		p := pattern{strings.Trim(strings.Join(strings.Fields(cmp.Diff(nil, s.Dash)), ""), "-+"), s.Width}
		if j, ok := seen[p]; ok {
			t.Errorf("profiles %d and %d have the same dashes and width", j, i)
		}
		seen[p] = i
	}
}

// Okabe and Ito (2008), Color universal design: black, orange, sky blue,
// bluish green, blue, vermilion, reddish purple; values from memory. Beside
// them white, two greys and a tint of the sky blue.
var colours = []report.Colour{
	{R: 0, G: 0, B: 0}, {R: 230, G: 159, B: 0}, {R: 86, G: 180, B: 233}, {R: 0, G: 158, B: 115},
	{R: 0, G: 114, B: 178}, {R: 213, G: 94, B: 0}, {R: 204, G: 121, B: 167},
	{R: 255, G: 255, B: 255}, {R: 70, G: 70, B: 70}, {R: 165, G: 165, B: 165}, {R: 213, G: 236, B: 250},
}

// checkColours asserts that a picture has no other colours.
func checkColours(t *testing.T, p *report.Picture) {
	t.Helper()
	for _, m := range p.Marks {
		var c report.Colour
		switch m := m.(type) {
		case *report.Stroke:
			c = m.Colour
		case *report.Fill:
			c = m.Colour
		case *report.Label:
			c = m.Colour
		}
		if !slices.Contains(colours, c) {
			t.Errorf("%T in the colour %v", m, c)
		}
	}
}

// randomLayers returns a profile of 1 to 60 layers that ends at 5 to 300 m
// or in a half-space there, with 50 to 3500 m/s.
func randomLayers(rng *rand.Rand) []profile.Layer {
	speed := func() float64 { return 50 * math.Pow(70, rng.Float64()) } // 50 to 3500
	n := 1 + rng.IntN(60)
	end := 5 * math.Pow(60, rng.Float64()) // 5 to 300
	var layers []profile.Layer
	for i := range n {
		l := profile.Layer{Top: end * float64(i) / float64(n), Bottom: end * float64(i+1) / float64(n), Vs: speed()}
		if rng.IntN(4) == 0 {
			l.VsBottom = speed()
		}
		layers = append(layers, l)
	}
	if last := &layers[n-1]; rng.IntN(2) == 0 {
		last.Bottom, last.VsBottom = math.Inf(1), 0
	}
	return layers
}

// randomLines returns 1 to 24 profiles, often one.
func randomLines(rng *rand.Rand) []figure.Line {
	names := []string{"", "L1", "Line L2", "Seismic cone SCPT-07 beside the eastern abutment of the new bridge",
		strings.Repeat("unbroken", 40), strings.Repeat("name of many words ", 100000), "Скважина 12, северо-западный угол участка", "a\nb\tc\x00\u202e"}
	n := 1
	if rng.IntN(2) == 0 {
		n = 1 + rng.IntN(24)
	}
	var lines []figure.Line
	for range n {
		l := figure.Line{Name: names[rng.IntN(len(names))], Layers: randomLayers(rng)}
		if rng.IntN(2) == 0 {
			l.Reached = 100 * rng.Float64()
		}
		if rng.IntN(2) == 0 {
			l.Average = average()
		}
		lines = append(lines, l)
	}
	return lines
}

// randomOptions returns options, each of them often zero.
func randomOptions(rng *rand.Rand) figure.VelocityOptions {
	o := figure.VelocityOptions{Units: figure.Units(rng.IntN(2))}
	o.Classes = []figure.Classes{{}, fourClasses, manyClasses, wordClasses}[rng.IntN(4)]
	if rng.IntN(5) > 0 {
		o.Thickness = 30
	}
	if rng.IntN(3) == 0 {
		o.Datum = 8 * rng.Float64()
	}
	if rng.IntN(4) == 0 {
		o.Width = 0.1 + 0.1*rng.Float64()
	}
	return o
}

func TestVelocityOfRandomProfiles(t *testing.T) {
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 1))
		lines, o := randomLines(rng), randomOptions(rng)
		r := velocity(t, lines, o)
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		unit := []float64{1, 0.3048}[o.Units]
		at := func(v, z float64) (x, y float64) { return r.x(v / unit), r.y(z / unit) }
		for _, line := range lines {
			for i, l := range line.Layers {
				checkLayer(t, r, at, line, i, l)
			}
		}
		for _, b := range o.Classes.Bounds {
			if x, _ := at(b.Value, 0); x < r.frame.x1-0.1 && r.find(x, r.frame.y0, x, r.frame.y1+4) == nil {
				t.Errorf("no line at the bound of %v m/s", b.Value)
			}
		}
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

// checkLayer asserts that a layer is drawn from its top to its bottom or to
// that of the frame, in two pieces if the survey ended in it.
func checkLayer(t *testing.T, r *reading, at func(v, z float64) (x, y float64), line figure.Line, i int, l profile.Layer) {
	t.Helper()
	depths := []float64{l.Top, l.Bottom}
	if line.Reached > l.Top && line.Reached < l.Bottom {
		depths = []float64{l.Top, line.Reached, l.Bottom}
	}
	for k, z0 := range depths[:len(depths)-1] {
		z1 := depths[k+1]
		x0, y0 := at(l.VsAt(z0), z0)
		x1, y1 := x0, r.frame.y0
		if !math.IsInf(z1, 1) {
			x1, y1 = at(l.VsAt(z1), z1)
		}
		s := r.find(x0, y0, x1, y1)
		if s == nil {
			t.Errorf("layer %d is not drawn from %v m to %v m at %v m/s", i+1, z0, z1, l.Vs)
			continue
		}
		if extended := line.Reached > 0 && z0 >= line.Reached; extended && !slices.Equal(s.Dash, []float64{2, 2}) {
			t.Errorf("layer %d is an extension and dashed %v", i+1, s.Dash)
		}
	}
}

func TestVelocityIsTheSameEveryTime(t *testing.T) {
	lines := []figure.Line{{Name: "L1", Layers: site(), Average: average()}, {Name: "L2", Layers: site()[:2]}}
	o := figure.VelocityOptions{Thickness: 30, Classes: manyClasses}
	first, err := figure.Velocity(lines, o)
	if err != nil {
		t.Fatal(err)
	}
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			if p, err := figure.Velocity(lines, o); err != nil || !cmp.Equal(first, p) {
				t.Errorf("another picture, or %v", err)
			}
		})
	}
	wg.Wait()
}

func TestVelocityRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	good := []figure.Line{{Name: "L1", Layers: site()}}
	layer := func(l profile.Layer) []figure.Line {
		return []figure.Line{{Name: "L1", Layers: []profile.Layer{l}}}
	}
	tests := []struct {
		lines []figure.Line
		o     figure.VelocityOptions
		want  string
	}{
		{nil, figure.VelocityOptions{}, "no profile"},
		{[]figure.Line{{Name: "L1"}}, figure.VelocityOptions{}, `profile "L1" has no layers`},
		{layer(profile.Layer{Bottom: 5, Vs: nan}), figure.VelocityOptions{}, `layer 1 of profile "L1"`},
		{layer(profile.Layer{Bottom: 5, Vs: inf}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Bottom: 5, Vs: 0}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Bottom: 5, Vs: 1e300}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Bottom: nan, Vs: 200}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Bottom: 1e300, Vs: 200}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Top: 5, Bottom: 4, Vs: 200}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Top: -1, Bottom: 4, Vs: 200}), figure.VelocityOptions{}, "layer 1"},
		{layer(profile.Layer{Bottom: 5, Vs: 200, VsBottom: nan}), figure.VelocityOptions{}, "layer 1"},
		{[]figure.Line{{Name: "L1", Layers: site(), Reached: nan}}, figure.VelocityOptions{}, "reached"},
		{good, figure.VelocityOptions{Thickness: inf}, "depth of +Inf"},
		{good, figure.VelocityOptions{Datum: -1}, "depth of -1"},
		{good, figure.VelocityOptions{Depth: nan}, "depth of NaN"},
		{good, figure.VelocityOptions{Depth: 1e-300}, "depth axis of 1e-300"},
		{good, figure.VelocityOptions{Classes: figure.Classes{Code: "X", Bounds: []figure.Bound{{Value: nan}}}}, `bound of "X"`},
	}
	for _, tt := range tests {
		p, err := figure.Velocity(tt.lines, tt.o)
		if err == nil || p != nil || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("error %v, want one with %q", err, tt.want)
		}
	}
}

// twentyLayers is a profile of 20 layers, with an average of 120 points.
func twentyLayers() figure.Line {
	line := figure.Line{Name: "Line L1", Reached: 32}
	for i := range 20 {
		line.Layers = append(line.Layers, profile.Layer{Top: 2 * float64(i), Bottom: 2 * float64(i+1), Vs: 150 + 20*float64(i)})
	}
	for i := 1; i <= 120; i++ {
		line.Average = append(line.Average, figure.Point{Velocity: 150 + float64(i), Depth: float64(i) / 4})
	}
	return line
}

func BenchmarkVelocity(b *testing.B) {
	lines := []figure.Line{twentyLayers()}
	for b.Loop() {
		if _, err := figure.Velocity(lines, figure.VelocityOptions{Thickness: 30, Classes: manyClasses}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkVelocityOfEight(b *testing.B) {
	lines := slices.Repeat([]figure.Line{twentyLayers()}, 8)
	for b.Loop() {
		if _, err := figure.Velocity(lines, figure.VelocityOptions{Thickness: 30, Classes: manyClasses}); err != nil {
			b.Fatal(err)
		}
	}
}

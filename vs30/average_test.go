package vs30

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat"

	"shearbook/profile"
)

// Linear gradients. 200 m/s growing by 5 m/s a metre over 20 m: t = ln(300/200)/5
// = 0.0810930216 s by hand, 246.6303 m/s; the velocity at mid-depth, 250 m/s,
// is not the average. 180 + 6z to 30 m: 30·6/ln(360/180) = 259.685107 m/s.
func TestLinearGradient(t *testing.T) {
	time, err := TravelTime(gradient(20, 200, 300), 0, 20)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "time", time, 0.0810930216, 5e-11)
	near(t, "average", average(t, gradient(20, 200, 300), 0, 20), 246.6303, 5e-5)
	near(t, "average", average(t, gradient(30, 180, 360), 0, 30), 259.685107, 5e-7)

	// A part from 10 to 20 m of it: ln(300/250)/5 s by hand.
	time, err = TravelTime(gradient(20, 200, 300), 10, 20)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "time of the lower half", time, math.Log(1.2)/5, 1e-15)

	// The velocity may fall: the same layer upside down takes as long.
	near(t, "falling", average(t, gradient(20, 300, 200), 0, 20), 246.6303, 5e-5)
}

// As the gradient vanishes the average becomes the constant velocity without
// losing digits: to second order v·(1 + x/2 − x²/12) with x the relative rise
// (series of x/ln(1+x), by hand).
func TestVanishingGradient(t *testing.T) {
	for e := -1; e >= -17; e-- {
		x := math.Pow10(e)
		v1 := 200 * (1 + x)
		x = (v1 - 200) / 200 // as it is in binary
		want := 200 * (1 + x/2 - x*x/12 + x*x*x/24 - 19*x*x*x*x/720)
		near(t, "average", average(t, gradient(10, 200, v1), 0, 10), want, 200*(2e-15+math.Abs(x*x*x*x*x)))
	}
}

// Power law v = a·zⁿ from the surface: Z·a(1−n)·Zⁿ/Z = a(1−n)Zⁿ, by hand; for
// a = 150, n = 0.25, Z = 30: 112.5·30^0.25 = 263.2890734 m/s. The top 10⁻⁶ m, where the velocity
// goes to 0, is one layer with its own average.
func TestPowerLaw(t *testing.T) {
	const a, n, tiny = 150, 0.25, 1e-6
	law := func(z float64) float64 { return a * math.Pow(z, n) }
	layers := stack(tiny, (1-n)*law(tiny))
	layers = append(layers, fine(tiny, 30, 5000, law, true)...)
	near(t, "average", average(t, layers, 0, 30), 263.2890734, 1e-4)
	near(t, "closed form", (1-n)*law(30), 263.2890734, 5e-8)
}

// A boundary that misses the depth by an ulp is the depth, whichever way it
// misses, and a profile that ends an ulp short reaches.
func TestBoundaryAnUlpAway(t *testing.T) {
	layers := readLayers(t, "measured.csv")["OHW"]
	sums := stack(5, 197, 1.7, 146, 5.8, 263, 7.5, 367, 20, 243) // OHW by its thicknesses
	for _, boundary := range []float64{20, math.Nextafter(20, 0), math.Nextafter(20, 40), sums[3].Bottom} {
		layers[3].Bottom, layers[4].Top = boundary, boundary
		near(t, "over 20 m", average(t, layers, 0, 20), 251.529, 0.0005)
		near(t, "20 m to 30 m", average(t, layers, 20, 10), 243, 1e-12)
		near(t, "cut at 20 m", average(t, layers[:4], 0, 20), 251.529, 0.0005)
		w, err := Work(layers, 0, 20)
		if err != nil {
			t.Fatal(err)
		}
		if len(w.Rows) != 4 {
			t.Errorf("the working over 20 m with a boundary at %v has %d rows, want 4", boundary, len(w.Rows))
		}
	}
}

// Three hundred layers of 0.1 m add up to 30 m nowhere near exactly.
func TestSumsOfTenths(t *testing.T) {
	pairs := []float64{}
	for range 300 {
		pairs = append(pairs, 0.1, 360)
	}
	layers := stack(pairs...)
	if layers[299].Bottom == 30 {
		t.Fatal("the sum is exact: the test tests nothing")
	}
	near(t, "average", average(t, layers, 0, 30), 360, 360e-12)
}

// What is farther away than Touching is short, and says so.
func TestShortProfile(t *testing.T) {
	for _, c := range []struct {
		layers []profile.Layer
		want   string
	}{
		{stack(10, 200, 12.8, 300), "the profile reaches 22.8 m below ground level, 30 m are needed"},
		{stack(30-1e-6, 200), "the profile reaches 29.999999 m below ground level, 30 m are needed"},
		{nil, "the profile reaches 0 m below ground level, 30 m are needed"},
	} {
		_, err := Average(c.layers, 0, 30)
		var short *ShortError
		if !errors.As(err, &short) || short.Needed != 30 {
			t.Fatalf("error %v, want a *ShortError that needs 30 m", err)
		}
		if err.Error() != c.want {
			t.Errorf("error %q, want %q", err, c.want)
		}
		if _, err := Work(c.layers, 0, 30); !errors.As(err, &short) {
			t.Errorf("Work: error %v, want a *ShortError", err)
		}
		if _, err := Describe(c.layers, 0, 30); !errors.As(err, &short) {
			t.Errorf("Describe: error %v, want a *ShortError", err)
		}
	}
	if _, err := Average(stack(30-1e-10, 200), 0, 30); err != nil {
		t.Errorf("a profile within Touching of 30 m: %v", err)
	}
}

// A half-space has no bottom, and reaches every depth.
func TestHalfSpace(t *testing.T) {
	layers := stack(10, 200, 10, 400)
	layers[1].Bottom = math.Inf(1)
	near(t, "average", average(t, layers, 0, 30), 300, 1e-10) // 30/(10/200 + 20/400) by hand
}

func TestWork(t *testing.T) {
	w, err := Work(stack(5, 180, 10, 300, 25, 500), 2, 20)
	if err != nil {
		t.Fatal(err)
	}
	// By hand: 3/180 = 0.0166667 s, 10/300 = 0.0333333 s, 7/500 = 0.014 s.
	want := []Row{
		{Layer: 0, Top: 2, Bottom: 5, Thickness: 3, Vs: 180, Time: 3.0 / 180, Cumulative: 3.0 / 180},
		{Layer: 1, Top: 5, Bottom: 15, Thickness: 10, Vs: 300, Time: 10.0 / 300, Cumulative: 0.05},
		{Layer: 2, Top: 15, Bottom: 22, Thickness: 7, Vs: 500, Time: 0.014, Cumulative: 0.064},
	}
	if len(w.Rows) != len(want) {
		t.Fatalf("%d rows, want %d", len(w.Rows), len(want))
	}
	for i, r := range w.Rows {
		near(t, "cumulative time", r.Cumulative, want[i].Cumulative, 1e-15)
		r.Cumulative = want[i].Cumulative
		if r != want[i] {
			t.Errorf("row %d = %+v, want %+v", i, r, want[i])
		}
	}
	near(t, "time", w.Time, 0.064, 1e-15)
	near(t, "velocity", w.Velocity, 312.5, 1e-10)

	rng := seeded(1)
	for range 500 {
		layers := randomLayers(rng, true)
		w, err := Work(layers, 3, 30)
		if err != nil {
			t.Fatal(err)
		}
		last := w.Rows[len(w.Rows)-1]
		if v := average(t, layers, 3, 30); v != w.Velocity {
			t.Fatalf("the working gives %v, the average is %v", w.Velocity, v)
		}
		near(t, "last cumulative time", last.Cumulative, w.Time, 1e-9/60)
	}
}

// The harmonic mean weighted by thickness of a general-purpose library
// (gonum v0.17.0, stat.HarmonicMean) is the same number.
func TestHarmonicMeanOfGonum(t *testing.T) {
	rng := seeded(2)
	for range 1000 {
		layers := randomLayers(rng, false)
		var v, h []float64
		for _, l := range layers {
			v, h = append(v, l.Vs), append(h, l.Thickness())
		}
		depth := layers[len(layers)-1].Bottom
		want := stat.HarmonicMean(v, h)
		near(t, "average", average(t, layers, 0, depth), want, 1e-12*want)
	}
}

func TestSplittingChangesNothing(t *testing.T) {
	rng := seeded(3)
	for range 1000 {
		layers := randomLayers(rng, true)
		from := 10 * rng.Float64()
		want := average(t, layers, from, 30)
		near(t, "average", average(t, split(rng, layers), from, 30), want, 1e-12*want)
	}
}

func TestAverageBetweenSlowestAndFastest(t *testing.T) {
	rng := seeded(4)
	for range 1000 {
		layers := randomLayers(rng, true)
		s, err := Describe(layers, 5*rng.Float64(), 1+30*rng.Float64())
		if err != nil {
			t.Fatal(err)
		}
		if s.TimeAverage < s.Min*(1-1e-14) || s.TimeAverage > s.Max*(1+1e-14) {
			t.Fatalf("average %v outside %v to %v", s.TimeAverage, s.Min, s.Max)
		}
	}
}

func TestFasterLayerNeverLowersTheAverage(t *testing.T) {
	rng := seeded(5)
	for range 1000 {
		layers := randomLayers(rng, true)
		before := average(t, layers, 0, 30)
		i := rng.IntN(len(layers))
		layers[i].Vs *= 1 + rng.Float64()
		if layers[i].VsBottom != 0 {
			layers[i].VsBottom *= 1 + rng.Float64()
		}
		if after := average(t, layers, 0, 30); after < before*(1-1e-14) {
			t.Fatalf("layer %d faster: average from %v down to %v", i, before, after)
		}
	}
}

func TestTravelTimesAdd(t *testing.T) {
	rng := seeded(6)
	for range 1000 {
		layers := randomLayers(rng, true)
		a, b := 20*rng.Float64(), 20+20*rng.Float64()
		mid := a + (b-a)*rng.Float64()
		upper, _ := TravelTime(layers, a, mid)
		lower, _ := TravelTime(layers, mid, b)
		whole, err := TravelTime(layers, a, b)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "time", upper+lower, whole, 1e-13*whole)
	}
}

// Numbers in feet give the average in feet per second: the same as their twin
// in SI, converted.
func TestFeetAndTheirTwin(t *testing.T) {
	rng := seeded(7)
	for range 1000 {
		feet := randomLayers(rng, true) // taken as ft and ft/s; the last ends below 40
		feet[len(feet)-1].Bottom += 100
		si := make([]profile.Layer, len(feet))
		for i, l := range feet {
			si[i] = profile.Layer{Top: l.Top * profile.Foot, Bottom: l.Bottom * profile.Foot,
				Vs: l.Vs * profile.Foot, VsBottom: l.VsBottom * profile.Foot}
		}
		want := average(t, feet, 0, 100) * profile.Foot
		near(t, "average", average(t, si, 0, 30.48), want, 1e-12*want)
	}
}

func TestNoAllocation(t *testing.T) {
	layers := twenty()
	for name, f := range map[string]func(){
		"Average":           func() { sink, _ = Average(layers, 0, 30) },
		"TravelTime":        func() { sink, _ = TravelTime(layers, 1, 31) },
		"DepthTo":           func() { sink = DepthTo(layers, 760).Depth },
		"AboveRock":         func() { sink, _, _ = AboveRock(layers, 1, 400) },
		"QuarterWavePeriod": func() { sink, _ = QuarterWavePeriod(layers, 0, 30) },
		"FundamentalPeriod": func() { sink, _ = FundamentalPeriod(layers, 0, 30) },
	} {
		if n := testing.AllocsPerRun(100, f); n != 0 {
			t.Errorf("%s allocates %g times", name, n)
		}
	}
}

var sink float64

// twenty returns a profile of twenty layers to 40 m, one of them with a
// gradient.
func twenty() []profile.Layer {
	var pairs []float64
	for i := range 20 {
		pairs = append(pairs, 2, 150+25*float64(i))
	}
	layers := stack(pairs...)
	layers[7].VsBottom = 350
	return layers
}

func BenchmarkAverage20(b *testing.B) {
	layers := twenty()
	b.ReportAllocs()
	for b.Loop() {
		sink, _ = Average(layers, 0, 30)
	}
}

func BenchmarkDescribe20(b *testing.B) {
	layers := twenty()
	b.ReportAllocs()
	for b.Loop() {
		s, _ := Describe(layers, 0, 30)
		sink = s.StdDev
	}
}

func BenchmarkFundamentalPeriod20(b *testing.B) {
	layers := twenty()
	b.ReportAllocs()
	for b.Loop() {
		sink, _ = FundamentalPeriod(layers, 0, 30)
	}
}

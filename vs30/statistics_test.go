package vs30

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
)

func TestDescribe(t *testing.T) {
	s, err := Describe(stack(4, 100, 6, 200, 10, 150, 30, 400), 2, 24)
	if err != nil {
		t.Fatal(err)
	}
	// By hand: 2 m at 100, 6 at 200, 10 at 150, 6 at 400 m/s. Times 0.02 + 0.03 +
	// 0.0666667 + 0.015 = 0.1316667 s. Σhv = 200 + 1200 + 1500 + 2400 = 5300, over
	// 24 m 220.8333. Means over layers: 850/4 = 212.5, and 4/(0.01 + 0.005 +
	// 0.00666667 + 0.0025) = 165.5172. Σhv² = 20000 + 240000 + 225000 + 960000 =
	// 1445000; variance 1445000/24 − 220.8333² = 11440.97, deviation 106.9625.
	near(t, "time average", s.TimeAverage, 182.2785, 5e-5)
	near(t, "mean by thickness", s.ThicknessMean, 220.8333, 5e-5)
	near(t, "arithmetic mean", s.ArithmeticMean, 212.5, 1e-12)
	near(t, "harmonic mean", s.HarmonicMean, 165.5172, 5e-5)
	near(t, "deviation", s.StdDev, 106.9625, 5e-5)
	near(t, "spread", s.Spread, 4, 0)
	if s.Layers != 4 || s.Min != 100 || s.Max != 400 || s.From != 2 || s.Thickness != 24 {
		t.Errorf("%+v: want 4 layers, 100 to 400 m/s, 24 m below 2 m", s)
	}
	interfaces := []Interface{{4, 100, 200, 2}, {10, 200, 150, 0.75}, {20, 150, 400, 400.0 / 150}}
	if !slices.Equal(s.Interfaces, interfaces) {
		t.Errorf("interfaces %v, want %v", s.Interfaces, interfaces)
	}
	if want := []Reversal{{2, 10, 200, 150}}; !slices.Equal(s.Reversals, want) {
		t.Errorf("reversals %v, want %v", s.Reversals, want)
	}
}

// 100 to 400 m/s over 30 m: mean 250 m/s, deviation of a uniform distribution
// 300/√12 = 86.6025 m/s; by hand.
func TestDescribeGradient(t *testing.T) {
	s, err := Describe(gradient(30, 100, 400), 0, 30)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "mean by thickness", s.ThicknessMean, 250, 1e-12)
	near(t, "deviation", s.StdDev, 300/math.Sqrt(12), 1e-10)
	near(t, "time average", s.TimeAverage, 300/math.Log(4), 1e-10)
	near(t, "arithmetic mean", s.ArithmeticMean, 250, 1e-12)
	near(t, "harmonic mean", s.HarmonicMean, s.TimeAverage, 1e-10)
	near(t, "slowest", s.Min, 100, 0)
	near(t, "fastest", s.Max, 400, 0)
}

// The means of a general-purpose library (gonum v0.17.0), and what holds
// whatever the layers.
func TestDescribeRandomProfiles(t *testing.T) {
	rng := seeded(20)
	for range 1000 {
		layers := randomLayers(rng, false)
		var v, h []float64
		for _, l := range layers {
			v, h = append(v, l.Vs), append(h, l.Thickness())
		}
		s, err := Describe(layers, 0, layers[len(layers)-1].Bottom)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "mean by thickness", s.ThicknessMean, stat.Mean(v, h), 1e-9)
		near(t, "deviation", s.StdDev, stat.PopStdDev(v, h), 1e-9*s.Max)
		near(t, "arithmetic mean", s.ArithmeticMean, stat.Mean(v, nil), 1e-9)
		near(t, "harmonic mean", s.HarmonicMean, stat.HarmonicMean(v, nil), 1e-9)

		if s.Layers != len(layers) || len(s.Interfaces) != len(layers)-1 {
			t.Fatalf("%d layers and %d interfaces of %d layers", s.Layers, len(s.Interfaces), len(layers))
		}
		slower := 0
		for _, b := range s.Interfaces {
			if b.Ratio < 1 {
				slower++
			}
		}
		if slower != len(s.Reversals) {
			t.Fatalf("%d reversals, want %d", len(s.Reversals), slower)
		}
		if s.TimeAverage > s.ThicknessMean*(1+1e-14) {
			t.Fatalf("harmonic mean %v above arithmetic mean %v", s.TimeAverage, s.ThicknessMean)
		}
	}
}

// What is weighted by thickness does not change when a layer is split.
func TestSplittingDoesNotChangeTheDescription(t *testing.T) {
	rng := seeded(21)
	for range 500 {
		layers := randomLayers(rng, true)
		a, err := Describe(layers, 2, 30)
		if err != nil {
			t.Fatal(err)
		}
		b, err := Describe(split(rng, layers), 2, 30)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "time average", b.TimeAverage, a.TimeAverage, 1e-12*a.TimeAverage)
		near(t, "mean by thickness", b.ThicknessMean, a.ThicknessMean, 1e-12*a.ThicknessMean)
		near(t, "deviation", b.StdDev, a.StdDev, 1e-9*a.Max)
		near(t, "slowest", b.Min, a.Min, 1e-12*a.Min)
		near(t, "fastest", b.Max, a.Max, 1e-12*a.Max)
	}
}

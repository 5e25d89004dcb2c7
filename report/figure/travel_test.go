package figure_test

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/figure"
)

// fills returns the filled rectangles of a picture, in their order.
func (r *reading) fills() []box {
	var fills []box
	for _, m := range r.picture.Marks {
		if f, ok := m.(*report.Fill); ok {
			fills = append(fills, box{x0: f.Path[0].X, y0: f.Path[0].Y, x1: f.Path[2].X, y1: f.Path[2].Y})
		}
	}
	return fills
}

// travel draws a travel-time figure and reads it. Its frame, of two lines, is
// left empty but for the place of the axis.
func travel(t *testing.T, shares []figure.Share, o figure.TravelOptions) *reading {
	t.Helper()
	p, err := figure.Travel(shares, o)
	if err != nil {
		t.Fatal(err)
	}
	return read(t, p)
}

func TestTravel(t *testing.T) {
	// 2 m in 20 ms and 8 m in 60 ms: 25 % and 75 % of the time, 20 % and 80 %
	// of the thickness.
	r := travel(t, []figure.Share{{Top: 0, Bottom: 2, Time: 0.02}, {Top: 2, Bottom: 10, Time: 0.06}}, figure.TravelOptions{})
	bars := r.fills()[1:] // after the key's
	if len(bars) != 2 {
		t.Fatalf("%d bars, want 2", len(bars))
	}
	twenty := r.label(t, "20")
	x0 := bars[0].x0
	perCent := ((twenty.x0+twenty.x1)/2 - x0) / 20
	for i, want := range []struct{ time, thickness float64 }{{25, 20}, {75, 80}} {
		b := bars[i]
		if got := (b.x1 - b.x0) / perCent; math.Abs(got-want.time) > 0.01 {
			t.Errorf("bar %d shows %v %%, want %v", i, got, want.time)
		}
		x := x0 + perCent*want.thickness
		if r.find(x, b.y0-1, x, b.y1+1) == nil {
			t.Errorf("bar %d has no mark at %v %% of the thickness", i, want.thickness)
		}
	}
	if bars[0].y0 < bars[1].y1 {
		t.Error("the upper layer is not above the lower")
	}
	for _, text := range []string{"0.0 – 2.0 m", "2.0 – 10.0 m", "25.0 %", "75.0 %", "Share (%)", "share of the thickness"} {
		r.label(t, text)
	}
	r.checkLabels(t)
}

func TestTravelInFeet(t *testing.T) {
	// 10 ft × 0.3048 m/ft = 3.048 m
	r := travel(t, []figure.Share{{Top: 0, Bottom: 3.048, Time: 0.02}}, figure.TravelOptions{Units: figure.US})
	r.label(t, "0.0 – 10.0 ft")
	r.label(t, "100.0 %")
}

func TestTravelOfRandomLayers(t *testing.T) {
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 3))
		var shares []figure.Share
		z := 0.0
		for range 1 + rng.IntN(200) {
			h := 10 * rng.Float64()
			shares = append(shares, figure.Share{Top: z, Bottom: z + h, Time: h / (50 + 3000*rng.Float64())})
			z += h
		}
		r := travel(t, shares, figure.TravelOptions{Units: figure.Units(rng.IntN(2)), Width: 0.2 * rng.Float64()})
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		bars := r.fills()[1:]
		if len(bars) != len(shares) {
			t.Fatalf("%d bars for %d layers", len(bars), len(shares))
		}
		for i := range bars[1:] {
			// Bars are as long as their times; coordinates are to 0.001 pt.
			long, short := bars[i].x1-bars[i].x0, bars[i+1].x1-bars[i+1].x0
			if d := long*shares[i+1].Time - short*shares[i].Time; math.Abs(d) > 0.001*(shares[i].Time+shares[i+1].Time) {
				t.Errorf("bars %d and %d are not as their times", i, i+1)
			}
			if bars[i].overlaps(bars[i+1]) {
				t.Errorf("bars %d and %d overlap", i, i+1)
			}
		}
		if r.picture.Height > 250/25.4*72 { // 250 mm: it goes on a page of A4
			t.Errorf("the figure is %v pt high", r.picture.Height)
		}
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

func TestTravelRefuses(t *testing.T) {
	for want, shares := range map[string][]figure.Share{
		"no layer":            nil,
		"layer 1 from NaN":    {{Top: math.NaN(), Bottom: 1, Time: 1}},
		"layer 1 from 2 m":    {{Top: 2, Bottom: 1, Time: 1}},
		"with NaN s":          {{Bottom: 1, Time: math.NaN()}},
		"layer 2 from 1 m to": {{Bottom: 1, Time: 1}, {Top: 1, Bottom: math.Inf(1), Time: 1}},
	} {
		if _, err := figure.Travel(shares, figure.TravelOptions{}); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}

func BenchmarkTravel(b *testing.B) {
	var shares []figure.Share
	for i := range 20 {
		shares = append(shares, figure.Share{Top: 2 * float64(i), Bottom: 2 * float64(i+1), Time: 0.01 / float64(1+i)})
	}
	for b.Loop() {
		if _, err := figure.Travel(shares, figure.TravelOptions{}); err != nil {
			b.Fatal(err)
		}
	}
}

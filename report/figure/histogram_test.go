package figure_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/figure"
)

// Every bound among the velocities is an edge, the edges cover them all, and
// between two bounds the bars are equally wide on a logarithmic axis.
func TestBarEdges(t *testing.T) {
	for seed := range uint64(300) {
		rng := rand.New(rand.NewPCG(seed, 4))
		low := 50 * math.Pow(20, rng.Float64())
		high := low * math.Pow(30, rng.Float64()*rng.Float64())
		classes := []figure.Classes{{}, fourClasses, manyClasses}[rng.IntN(3)]
		n := 1 + rng.IntN(50)
		edges := figure.BarEdges(low, high, n, classes)
		if len(edges) < 2 || edges[0] > low || edges[len(edges)-1] < high || !slices.IsSorted(edges) {
			t.Fatalf("%v to %v: %v", low, high, edges)
		}
		bounds := 0
		for _, b := range classes.Bounds {
			if b.Value > low && b.Value < high {
				bounds++
				if !slices.Contains(edges, b.Value) {
					t.Errorf("%v m/s is no edge of %v", b.Value, edges)
				}
			}
		}
		if len(edges) > n+2*len(classes.Bounds)+4 {
			t.Errorf("%d edges for %d bars and %d bounds", len(edges), n, bounds)
		}
		for i := 2; i < len(edges); i++ {
			atBound := slices.ContainsFunc(classes.Bounds, func(b figure.Bound) bool { return b.Value == edges[i-1] })
			if a, b := edges[i-1]/edges[i-2], edges[i]/edges[i-1]; !atBound && math.Abs(a-b) > 1e-9 {
				t.Errorf("bars of %v and %v side by side", a, b)
			}
		}
	}
	for _, edges := range [][]float64{figure.BarEdges(0, 10, 3, figure.Classes{}), figure.BarEdges(20, 10, 3, figure.Classes{}),
		figure.BarEdges(math.NaN(), 10, 3, figure.Classes{}), figure.BarEdges(1, math.Inf(1), 3, figure.Classes{})} {
		if edges != nil {
			t.Errorf("edges of what cannot be drawn: %v", edges)
		}
	}
}

// histogram draws a histogram and reads it, with the logarithms of its
// velocity axis.
func histogram(t *testing.T, bars []figure.Bar, o figure.HistogramOptions) *reading {
	t.Helper()
	p, err := figure.Histogram(bars, o)
	if err != nil {
		t.Fatal(err)
	}
	return read(t, p)
}

func TestHistogram(t *testing.T) {
	bars := []figure.Bar{{Lower: 150, Upper: 180, Count: 2}, {Lower: 180, Upper: 254.56, Count: 7}, {Lower: 254.56, Upper: 360, Count: 0}, {Lower: 360, Upper: 500, Count: 5}}
	r := histogram(t, bars, figure.HistogramOptions{Classes: fourClasses})
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)
	r.label(t, "Number of profiles")
	r.label(t, "Average shear-wave velocity (m/s)")
	r.axes(t)
	// r.x is straight between the outermost numbers; the axis is logarithmic.
	logX := line(t, [][2]float64{{math.Log(200), middleOf(t, r, "200")}, {math.Log(500), middleOf(t, r, "500")}})
	for _, b := range bars {
		x0, x1, y1 := logX(math.Log(b.Lower)), logX(math.Log(b.Upper)), r.y(float64(b.Count))
		found := false
		for _, m := range r.picture.Marks {
			if f, ok := m.(*report.Fill); ok && near(f.Path[0].X, x0) && near(f.Path[2].X, x1) && near(f.Path[2].Y, y1) && near(f.Path[0].Y, r.frame.y0) {
				found = true
			}
		}
		if found != (b.Count > 0) {
			t.Errorf("the bar %+v is drawn: %v", b, found)
		}
	}
	for _, b := range fourClasses.Bounds {
		if x := logX(math.Log(b.Value)); x > r.frame.x0 && x < r.frame.x1 && r.find(x, r.frame.y0, x, r.frame.y1) == nil {
			t.Errorf("no line at the bound of %v m/s", b.Value)
		}
	}
}

// middleOf is the middle of the label of a tick.
func middleOf(t *testing.T, r *reading, text string) float64 {
	t.Helper()
	for _, b := range r.boxes {
		if b.text == text && b.y1 < r.frame.y0 {
			return (b.x0 + b.x1) / 2
		}
	}
	t.Fatalf("no number %q under the frame", text)
	return 0
}

// Counts are whole, and so are the numbers of their axis.
func TestHistogramCountsAreWhole(t *testing.T) {
	for _, count := range []int{0, 1, 2, 3, 10, 1000000} {
		r := histogram(t, []figure.Bar{{Lower: 200, Upper: 300, Count: count}}, figure.HistogramOptions{})
		for _, b := range r.boxes {
			if b.x1 < r.frame.x0 && strings.ContainsAny(b.text, ".") {
				t.Errorf("%d: the axis of counts has %q", count, b.text)
			}
		}
		r.checkLabels(t)
	}
}

func TestHistogramRefuses(t *testing.T) {
	for _, bars := range [][]figure.Bar{nil, {{Lower: 0, Upper: 1}}, {{Lower: 2, Upper: 1}}, {{Lower: 1, Upper: 2, Count: -1}}, {{Lower: 2, Upper: 3}, {Lower: 1, Upper: 2}},
		{{Lower: 1, Upper: math.Inf(1)}}, {{Lower: math.NaN(), Upper: 1}}} {
		if _, err := figure.Histogram(bars, figure.HistogramOptions{}); err == nil || !strings.HasPrefix(err.Error(), "histogram: ") {
			t.Errorf("%+v: %v", bars, err)
		}
	}
}

func TestHistogramOfRandomBars(t *testing.T) {
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 8))
		classes := []figure.Classes{{}, fourClasses, manyClasses, wordClasses}[rng.IntN(4)]
		low := 60 * math.Pow(15, rng.Float64())
		edges := figure.BarEdges(low, low*math.Pow(20, rng.Float64()), 1+rng.IntN(40), classes)
		most := int(math.Pow(10, 6*rng.Float64()))
		var bars []figure.Bar
		for i := 1; i < len(edges); i++ {
			bars = append(bars, figure.Bar{Lower: edges[i-1], Upper: edges[i], Count: rng.IntN(most + 1)})
		}
		o := figure.HistogramOptions{Classes: classes, Units: figure.Units(rng.IntN(2))}
		if rng.IntN(3) == 0 {
			o.Width, o.Height = 0.1+0.1*rng.Float64(), 0.06+0.1*rng.Float64()
		}
		r := histogram(t, bars, o)
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

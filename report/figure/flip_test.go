package figure_test

import (
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/figure"
)

// flip draws a figure and reads it. Its frame, of two lines, is left empty.
func flip(t *testing.T, shares []figure.FlipShare, o figure.FlipOptions) *reading {
	t.Helper()
	p, err := figure.Flip(shares, o)
	if err != nil {
		t.Fatal(err)
	}
	r := read(t, p)
	r.frame = box{}
	return r
}

// timeBars returns the full bars, from the top down, but for the legend's,
// which is drawn last.
func (r *reading) timeBars() []box {
	var bars []box
	for _, f := range r.ofColour(skyBlue) {
		bars = append(bars, box{x0: f.Path[0].X, y0: f.Path[0].Y, x1: f.Path[2].X, y1: f.Path[2].Y})
	}
	return bars[:len(bars)-1]
}

// varianceBars returns the outlines of the hatched bars, or the full ones
// where they are low, but for the legend's.
func (r *reading) varianceBars() []box {
	bars := r.bars()
	for _, f := range r.ofColour(vermilion) {
		bars = append(bars, box{x0: f.Path[0].X, y0: f.Path[0].Y, x1: f.Path[2].X, y1: f.Path[2].Y})
	}
	return bars[:len(bars)-1]
}

// row returns the texts on the line of the one that says text, from left to
// right.
func (r *reading) row(t *testing.T, text string) []string {
	t.Helper()
	at := r.label(t, text)
	var row []box
	for _, b := range r.boxes {
		if math.Abs(b.y0-at.y0) < 1 {
			row = append(row, b)
		}
	}
	slices.SortFunc(row, func(a, b box) int { return int(math.Copysign(1, a.x0-b.x0)) })
	var texts []string
	for _, b := range row {
		texts = append(texts, b.text)
	}
	return texts
}

// fiveShares is three layers and their interfaces.
var fiveShares = []figure.FlipShare{
	{Top: 0, Bottom: 4, Time: 0.25, Variance: 0.125, Softer: 0.814, Stiffer: 3.9},
	{Interface: true, Bottom: 4, Variance: 0.0625},
	{Top: 4, Bottom: 12, Time: 0.625, Variance: 0.75, Softer: 0.905, Stiffer: 1.317},
	{Interface: true, Bottom: 12, Variance: 0},
	{Top: 12, Bottom: 30, Time: 0.125, Variance: 0.0625, Softer: 0.689},
}

func TestFlip(t *testing.T) {
	r := flip(t, fiveShares, figure.FlipOptions{Softer: "D", Stiffer: "C"})
	times, variances := r.timeBars(), r.varianceBars()
	if len(times) != 3 || len(variances) != 4 { // one of 0 has none
		t.Fatalf("%d and %d bars, want 3 and 4", len(times), len(variances))
	}
	twenty := r.label(t, "20")
	x0 := times[0].x0
	perCent := ((twenty.x0+twenty.x1)/2 - x0) / 20
	check := func(what string, bars []box, want ...float64) {
		for i, b := range bars {
			// 0.01 pt, at some 3 pt for a percent
			if got := (b.x1 - b.x0) / perCent; math.Abs(got-want[i]) > 0.01 || b.x0 != x0 {
				t.Errorf("bar %d of the %s shows %v %%, want %v", i, what, got, want[i])
			}
		}
	}
	check("time", times, 25, 62.5, 12.5)
	check("variance", variances, 12.5, 6.25, 75, 6.25)
	// From the top down: the two bars of a layer touch, the interface's stands
	// between the layers.
	order := []box{times[0], variances[0], variances[1], times[1], variances[2], times[2], variances[3]}
	for i := 1; i < len(order); i++ {
		if order[i].y1 > order[i-1].y0+0.01 {
			t.Errorf("bar %d is not below bar %d", i, i-1)
		}
	}
	if !near(times[0].y0, variances[0].y1) {
		t.Error("the bars of a layer do not touch")
	}
	for text, want := range map[string][]string{
		"0.0 – 4.0 m":      {"0.0 – 4.0 m", "× 0.81 to D", "× 3.90 to C"},
		"interface 4.0 m":  {"interface 4.0 m", "6.2 %"},
		"4.0 – 12.0 m":     {"4.0 – 12.0 m", "× 0.91 to D", "× 1.32 to C"},
		"interface 12.0 m": {"interface 12.0 m", "0.0 %"},
		"12.0 – 30.0 m":    {"12.0 – 30.0 m", "× 0.69 to D", "cannot"},
		"softer class":     {"softer class", "stiffer class"},
		"share in the tr":  {"share in the travel time", "share in the variance of the average"},
	} {
		if got := r.row(t, text); !slices.Equal(got, want) {
			t.Errorf("beside %q stands %q, want %q", text, got, want)
		}
	}
	for _, text := range []string{"Share (%)", "25.0 %", "62.5 %", "75.0 %", "12.5 %"} {
		r.label(t, text)
	}
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)
}

// |ln 0.905| = 0.100 and |ln 1.317| = 0.275 are the least. An interface has no
// velocity, and a factor on it is not shown.
func TestFlipShowsTheNearestFactor(t *testing.T) {
	shares := slices.Clone(fiveShares)
	shares[1].Softer, shares[1].Stiffer = 0.99, 1.01
	r := flip(t, shares, figure.FlipOptions{Softer: "D", Stiffer: "C"})
	var got []string
	for _, m := range r.picture.Marks {
		if l, ok := m.(*report.Label); ok && l.Font == report.SansBold {
			got = append(got, l.Text)
		}
	}
	slices.Sort(got)
	if want := []string{"× 0.91 to D", "× 1.32 to C"}; !slices.Equal(got, want) {
		t.Errorf("bold are %q, want %q", got, want)
	}
}

func TestFlipHatches(t *testing.T) {
	r := flip(t, fiveShares, figure.FlipOptions{})
	for _, b := range r.varianceBars() {
		n := 0
		for _, s := range r.segments {
			rise := near(s.x1-s.x0, s.y1-s.y0) && s.x1 > s.x0
			if rise && s.x0 >= b.x0-0.01 && s.x1 <= b.x1+0.01 && s.y0 >= b.y0-0.01 && s.y1 <= b.y1+0.01 {
				n++
			}
		}
		// A line every 3 pt; the first begins a bar's height left of the bar.
		if want := (b.x1 - b.x0 + b.y1 - b.y0) / 3; math.Abs(float64(n)-want) > 1 {
			t.Errorf("a bar of %v pt has %d hatches, want %v", b.x1-b.x0, n, want)
		}
	}
}

func TestFlipWritesFactors(t *testing.T) {
	for x, want := range map[float64]string{0: "cannot", 0.0123456: "× 0.012 to B", 0.0996: "× 0.10 to B", 0.1004: "× 0.10 to B", 0.9949: "× 0.99 to B",
		0.9961: "× 0.996 to B", 0.99994: "× 0.9999 to B", 1: "× 1.00 to B", 1.004: "× 1.004 to B", 1.0004: "× 1.0004 to B", 1.32: "× 1.32 to B",
		1.999: "× 2.00 to B", 12.34: "× 12.3 to B", 456.7: "× 457 to B"} {
		r := flip(t, []figure.FlipShare{{Bottom: 1, Time: 1, Variance: 1, Stiffer: x}}, figure.FlipOptions{Stiffer: "B"})
		if row := r.row(t, "0.0 – 1.0 m"); row[len(row)-1] != want {
			t.Errorf("a factor of %v is written %q, want %q", x, row[len(row)-1], want)
		}
		r.checkLabels(t)
	}
}

func TestFlipInFeet(t *testing.T) {
	// 10 and 20 ft are 3.048 and 6.096 m.
	r := flip(t, []figure.FlipShare{{Bottom: 3.048, Time: 0.5, Variance: 0.4}, {Interface: true, Bottom: 3.048, Variance: 0.2},
		{Top: 3.048, Bottom: 6.096, Time: 0.5, Variance: 0.4}}, figure.FlipOptions{Units: figure.US})
	for _, text := range []string{"0.0 – 10.0 ft", "interface 10.0 ft", "10.0 – 20.0 ft"} {
		r.label(t, text)
	}
	for _, b := range r.boxes {
		if strings.Contains(b.text, "class") || strings.Contains(b.text, "×") {
			t.Errorf("%q, though no class was asked for", b.text)
		}
	}
}

// randomShares returns 1 to 200 layers, with or without interfaces.
func randomShares(rng *rand.Rand) []figure.FlipShare {
	var shares []figure.FlipShare
	interfaces := rng.IntN(2) == 0
	n := 1 + rng.IntN([]int{6, 25, 200}[rng.IntN(3)])
	z, time, variance := 0.0, 0.0, 0.0
	factor := func() float64 { return float64(rng.IntN(2)) * math.Pow(10, 4*rng.Float64()-2) }
	for i := range n {
		h := math.Pow(10, 2*rng.Float64()-1)
		s := figure.FlipShare{Top: z, Bottom: z + h, Time: h * rng.Float64(), Variance: math.Pow(rng.Float64(), 4), Softer: factor(), Stiffer: factor()}
		z += h
		shares = append(shares, s)
		if interfaces && i < n-1 {
			shares = append(shares, figure.FlipShare{Interface: true, Bottom: z, Variance: math.Pow(rng.Float64(), 4)})
		}
	}
	for _, s := range shares {
		time, variance = time+s.Time, variance+s.Variance
	}
	for i := range shares {
		shares[i].Time /= time
		shares[i].Variance *= float64(rng.IntN(2)) / variance
	}
	return shares
}

func TestFlipOfRandomLayers(t *testing.T) {
	classes := []string{"", "D", "BC", "a class of many words", "a\nb\tc\x00\u202e", "Ж"}
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 8))
		shares := randomShares(rng)
		o := figure.FlipOptions{Units: figure.Units(rng.IntN(2)), Width: 0.2 * rng.Float64(),
			Softer: classes[rng.IntN(len(classes))], Stiffer: classes[rng.IntN(len(classes))]}
		r := flip(t, shares, o)
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		r.checkBars(t, shares)
		if r.picture.Height > 250/25.4*72 { // 250 mm: it goes on a page of A4
			t.Errorf("the figure is %v pt high", r.picture.Height)
		}
		if again := flip(t, shares, o); !reflect.DeepEqual(r.picture, again.picture) {
			t.Error("another picture the second time")
		}
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

// checkBars asserts that all bars are as long as their shares, that none
// overlaps another, and that no text lies in one.
func (r *reading) checkBars(t *testing.T, shares []figure.FlipShare) {
	t.Helper()
	var times, variances []float64
	for _, s := range shares {
		if s.Time > 0 {
			times = append(times, s.Time)
		}
		if s.Variance > 0 {
			variances = append(variances, s.Variance)
		}
	}
	timeBars, varianceBars := r.timeBars(), r.varianceBars()
	if len(timeBars) != len(times) || len(varianceBars) != len(variances) {
		t.Fatalf("%d and %d bars for %d and %d shares", len(timeBars), len(varianceBars), len(times), len(variances))
	}
	scale := (timeBars[0].x1 - timeBars[0].x0) / times[0]
	compare := func(bars []box, shares []float64) {
		for i, b := range bars {
			// Coordinates are to 0.001 pt, and so is the bar of the scale.
			if got, want := b.x1-b.x0, shares[i]*scale; math.Abs(got-want) > 0.001*(2+2*shares[i]/times[0]) {
				t.Errorf("a bar of %v pt, want %v", got, want)
			}
		}
	}
	compare(timeBars, times)
	compare(varianceBars, variances)
	bars := append(timeBars, varianceBars...)
	for i, b := range bars {
		for _, o := range bars[:i] {
			if b.overlaps(o) {
				t.Errorf("bars overlap: %+v and %+v", b, o)
			}
		}
		for _, l := range r.boxes {
			l.y0, l.y1 = l.y0+1.5, l.y1-1.5 // as high as capitals
			if l.overlaps(b) {
				t.Errorf("%q lies in a bar", l.text)
			}
		}
	}
}

// Where there is no room to write beside all rows, the nearest factor and the
// largest share in the variance are written.
func TestFlipWritesWhatMatters(t *testing.T) {
	var shares []figure.FlipShare
	for i := range 100 {
		s := figure.FlipShare{Top: float64(i), Bottom: float64(i + 1), Time: 0.01, Variance: 0.009, Stiffer: 9}
		switch i {
		case 37:
			s.Variance = 0.109
		case 71:
			s.Stiffer = 1.5
		}
		shares = append(shares, s)
	}
	r := flip(t, shares, figure.FlipOptions{Stiffer: "C"})
	r.label(t, "37.0 – 38.0 m")
	if got, want := r.row(t, "71.0 – 72.0 m"), []string{"71.0 – 72.0 m", "× 1.50 to C"}; !slices.Equal(got, want) {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestFlipRefuses(t *testing.T) {
	nan := math.NaN()
	for want, shares := range map[string][]figure.FlipShare{
		"no layer":                              nil,
		"share 1, of the layer from NaN m":      {{Top: nan, Bottom: 1}},
		"share 1, of the layer from 2 m to 1 m": {{Top: 2, Bottom: 1}},
		"to +Inf m":                             {{Bottom: math.Inf(1)}},
		"share 2, of the interface":             {{Bottom: 1}, {Interface: true, Bottom: nan}},
		"a part of NaN of the time":             {{Bottom: 1, Time: nan}},
		"a part of 1.5 of the time":             {{Bottom: 1, Time: 1.5}},
		"-1 of the variance":                    {{Bottom: 1, Variance: -1}},
		"factors of -2 and 0":                   {{Bottom: 1, Softer: -2}},
		"factors of 0 and NaN":                  {{Bottom: 1, Stiffer: nan}},
		"factors of +Inf":                       {{Bottom: 1, Softer: math.Inf(1)}},
	} {
		p, err := figure.Flip(shares, figure.FlipOptions{})
		if err == nil || p != nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}

func BenchmarkFlip(b *testing.B) {
	var shares []figure.FlipShare
	for i := range 20 {
		z := 1.5 * float64(i+1)
		shares = append(shares, figure.FlipShare{Top: z - 1.5, Bottom: z, Time: 0.05, Variance: 0.03, Softer: 0.8, Stiffer: 1.4},
			figure.FlipShare{Interface: true, Bottom: z, Variance: 0.02})
	}
	for b.Loop() {
		if _, err := figure.Flip(shares, figure.FlipOptions{Softer: "D", Stiffer: "C"}); err != nil {
			b.Fatal(err)
		}
	}
}

package figure_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/figure"
)

// nineClasses has bounds in m/s at 500 to 5000 ft/s, and one beyond.
var nineClasses = figure.Classes{Code: "Code of nine", Lowest: "T", Bounds: []figure.Bound{
	{Value: 152.4, Class: "TS"}, {Value: 213.36, Class: "S"}, {Value: 304.8, Class: "SR"}, {Value: 441.96, Class: "R"},
	{Value: 640.08, Class: "RQ"}, {Value: 914.4, Class: "Q"}, {Value: 1524, Class: "P"}, {Value: 2500, Class: "PP"}}}

// density draws a figure, reads it, and finds its logarithmic axis.
func density(t *testing.T, o figure.DensityOptions) *reading {
	t.Helper()
	p, err := figure.Density(o)
	if err != nil {
		t.Fatal(err)
	}
	r := read(t, p)
	var at [][2]float64
	for _, b := range r.boxes {
		v, err := strconv.ParseFloat(b.text, 64)
		if err != nil || b.y1 > r.frame.y0 {
			continue
		}
		x := (b.x0 + b.x1) / 2
		if r.find(x, r.frame.y0, x, r.frame.y0-4) == nil {
			t.Errorf("the number %s has no tick", b.text)
		}
		at = append(at, [2]float64{math.Log(v), x})
	}
	l := line(t, at)
	for _, a := range at {
		// Text and ticks are rounded to 0.001 pt.
		if math.Abs(l(a[0])-a[1]) > 0.01 {
			t.Errorf("the number %v stands at %v, want %v", math.Exp(a[0]), a[1], l(a[0]))
		}
	}
	r.x = func(v float64) float64 { return l(math.Log(v)) }
	return r
}

// cells returns the boxes over the frame from left to right, each with the
// two texts in it.
func (r *reading) cells() []box {
	var cells []box
	for _, c := range r.bars() {
		if c.y0 < r.frame.y1 || !near(c.y1-c.y0, 26) {
			continue
		}
		var texts []string
		for _, b := range r.boxes {
			if b.x0 > c.x0 && b.x1 < c.x1 && b.y0 > c.y0 && b.y1 < c.y1 {
				texts = append(texts, b.text)
			}
		}
		c.text = strings.Join(texts, ": ")
		cells = append(cells, c)
	}
	return cells
}

// cellTexts returns the texts of the cells.
func (r *reading) cellTexts() []string {
	var texts []string
	for _, c := range r.cells() {
		texts = append(texts, c.text)
	}
	return texts
}

// areas returns the shaded areas and how much of them is darker.
func (r *reading) areas() (all, dark float64) {
	for i, c := range []report.Colour{paleBlue, skyBlue} {
		for _, f := range r.ofColour(c) {
			if f.Path[0].Y > r.frame.y1 { // a cell, or the legend's
				continue
			}
			all += area(f.Path)
			dark += float64(i) * area(f.Path)
		}
	}
	return all, dark
}

func TestDensityOfLognormal(t *testing.T) {
	const median, sigma = 348, 0.12
	r := density(t, figure.DensityOptions{Classes: fourClasses, Lognormal: figure.Lognormal{Median: median, SigmaLn: sigma}})
	x, f := r.x, r.frame

	// ln(360/348)/0.12 = 0.28251, and Φ(0.28251) = 0.61123 between Φ(0.28) =
	// 0.6103 and Φ(0.29) = 0.6141 of the usual table; ln(180/348)/0.12 = −5.5.
	want := []string{"S: < 0.1 %", "R: 61 %", "Q: 39 %", "P: < 0.1 %"}
	if got := r.cellTexts(); !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	// Areas are chances: so they are on paper, but for 0.2 % that lies outside
	// and for the chords of the curve.
	if all, dark := r.areas(); math.Abs(dark/all-0.6112) > 0.003 {
		t.Errorf("%v of the area is that of R, want 0.6112", dark/all)
	}
	cells := r.cells()
	if r.find(cells[1].x1, cells[1].y0, x(360), f.y1) == nil || r.find(x(360), f.y0, x(360), f.y1) == nil {
		t.Error("no line leads from the cells to the bound of 360 m/s")
	}
	if r.find(cells[0].x1, cells[0].y0, f.x0, f.y1) == nil || r.find(cells[2].x1, cells[2].y0, f.x1, f.y1) == nil {
		t.Error("the bounds outside are not led to the corners")
	}
	// Φ⁻¹(0.84) = 0.994458 (scipy 1.11 stats.norm.ppf, from memory).
	low, high := median*math.Exp(-0.994458*sigma), median*math.Exp(0.994458*sigma)
	marked := false
	for _, s := range r.segments {
		marked = marked || near(s.x0, x(low)) && near(s.x1, x(high)) && s.y0 == s.y1 && s.y0 > f.y0 && s.y0 < f.y0+15
	}
	if !marked {
		t.Errorf("no line from %v to %v m/s on the axis", low, high)
	}
	r.label(t, fmt.Sprintf("16–84 %%: %.1f to %.1f m/s", low, high))
	r.checkCurve(t, median, sigma)
	for _, text := range []string{"180", "360", "800", "Average shear-wave velocity (m/s)", "median 348 m/s", "σ of ln V = 0.12", "classes of Code of four"} {
		r.label(t, text)
	}
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)
}

// checkCurve asserts that the blue line in the frame is a bell over ln V:
// exp(−u²/2) of its peak at u sigmas from the median.
func (r *reading) checkCurve(t *testing.T, median, sigma float64) {
	t.Helper()
	var curve report.Path
	for _, m := range r.picture.Marks {
		if s, ok := m.(*report.Stroke); ok && s.Colour == blue && s.Path[0].Y < r.frame.y1 {
			curve = s.Path
		}
	}
	base, peak := r.frame.y0+15, 0.0
	for _, m := range curve {
		peak = max(peak, m.Y-base)
	}
	if len(curve) < 40 || !(peak > 30) {
		t.Fatalf("the curve has %d points and a height of %v pt", len(curve), peak)
	}
	perLn := r.x(math.E) - r.x(1)
	for _, m := range curve {
		u := (m.X - r.x(median)) / perLn / sigma
		if want := peak * math.Exp(-u*u/2); math.Abs(m.Y-base-want) > 0.02 {
			t.Errorf("the curve is %v pt high at %v sigmas, want %v", m.Y-base, u, want)
		}
	}
}

// twoBins are bins of the same area: ln 2 wide each, so of the same height.
var twoBins = []figure.Bin{{Lower: 100, Upper: 200, Part: 0.5}, {Lower: 200, Upper: 400, Part: 0.5}}

func TestDensityOfBins(t *testing.T) {
	classes := figure.Classes{Lowest: "A", Bounds: []figure.Bound{{Value: 282.84271247461903, Class: "B"}}}
	r := density(t, figure.DensityOptions{Classes: classes, Bins: twoBins})
	// The bound is 200·√2, the middle of the second bin over ln V.
	if got, want := r.cellTexts(), []string{"A: 75 %", "B: 25 %"}; !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	if all, dark := r.areas(); math.Abs(dark/all-0.75) > 0.001 {
		t.Errorf("%v of the area is that of A, want 0.75", dark/all)
	}
	// 100·4^0.16, 100·4^0.5 and 100·4^0.84 by hand: 124.83, 200, 320.43.
	r.label(t, "median 200 m/s")
	r.label(t, "16–84 %: 124.8 to 320.4 m/s")
	top := r.frame.y1 - 5
	if r.find(r.x(100), top, r.x(200), top) == nil && r.find(r.x(200), top, r.x(400), top) == nil {
		t.Error("the bins are not of the same height")
	}
	r.checkLabels(t)
}

// Bins that do not touch are drawn apart, on the base line between.
func TestDensityOfBinsApart(t *testing.T) {
	r := density(t, figure.DensityOptions{Bins: []figure.Bin{{Lower: 200, Upper: 220, Part: 0.5}, {Lower: 300, Upper: 330, Part: 0.5}}})
	base, top := r.frame.y0+15, r.frame.y1-5
	for _, p := range [][4]float64{{200, base, 200, top}, {220, top, 220, base}, {220, base, 300, base}, {300, base, 300, top}} {
		if r.find(r.x(p[0]), p[1], r.x(p[2]), p[3]) == nil {
			t.Errorf("no line from %v to %v m/s", p[0], p[2])
		}
	}
	if len(r.cells()) > 0 {
		t.Errorf("there are cells and no classes: %q", r.cellTexts())
	}
	r.checkLabels(t)
}

func TestDensityOfOneClass(t *testing.T) {
	for _, width := range []float64{0, 0.1} {
		r := density(t, figure.DensityOptions{Width: width, Classes: nineClasses, Lognormal: figure.Lognormal{Median: 760, SigmaLn: 0.01}})
		if n := len(r.cells()); n != 9 {
			t.Errorf("%d cells, want 9", n)
		}
		for _, c := range r.cellTexts() {
			if want := c == "RQ: > 99.9 %"; want == strings.Contains(c, "< 0.1 %") {
				t.Errorf("cell %q", c)
			}
		}
		// Bounds within a factor of 1.25 of what is shown are shown.
		for _, v := range []float64{640.08, 914.4} {
			if r.find(r.x(v), r.frame.y0, r.x(v), r.frame.y1) == nil {
				t.Errorf("the bound of %v m/s is not shown", v)
			}
		}
		r.checkLabels(t)
	}
}

func TestDensityOfNineClasses(t *testing.T) {
	for _, width := range []float64{0, 0.1} {
		r := density(t, figure.DensityOptions{Units: figure.US, Width: width, Classes: nineClasses, Lognormal: figure.Lognormal{Median: 420, SigmaLn: 0.7}})
		if n := len(r.cells()); n != 9 {
			t.Errorf("%d cells, want 9", n)
		}
		for _, c := range r.cellTexts() {
			if !strings.Contains(c, ": ") || !strings.HasSuffix(c, " %") {
				t.Errorf("cell %q", c)
			}
		}
		r.checkLabels(t)
		r.label(t, "(ft/s)")
		// 5000 ft/s, and 420 m/s = 1378 ft/s
		r.label(t, "median 1378 ft/s")
		if r.find(r.x(5000), r.frame.y0, r.x(5000), r.frame.y1) == nil {
			t.Error("no line at 5000 ft/s")
		}
	}
}

// A velocity that is sure is a line; on a bound it is of the softer class.
func TestDensityOfSureVelocity(t *testing.T) {
	r := density(t, figure.DensityOptions{Classes: fourClasses, Lognormal: figure.Lognormal{Median: 360}})
	want := []string{"S: < 0.1 %", "R: > 99.9 %", "Q: < 0.1 %", "P: < 0.1 %"}
	if got := r.cellTexts(); !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	if s := r.find(r.x(360), r.frame.y0+15, r.x(360), r.frame.y1); s == nil || s.Colour != blue {
		t.Error("no line at 360 m/s")
	}
	if dark := r.ofColour(skyBlue); len(dark) != 1 || !near(dark[0].Path[0].X, r.cells()[1].x0) {
		t.Error("the cell of R is not darker")
	}
	r.checkLabels(t)
}

func TestDensityTakesWhatItIsGiven(t *testing.T) {
	r := density(t, figure.DensityOptions{Classes: fourClasses, Bins: twoBins[:1], // half of everything
		Chances: []float64{0.0004, 0.2071, 0.0046, 0.7879}, Quantiles: figure.Quantiles{Low: 130, Median: 370, High: 520}})
	want := []string{"S: < 0.1 %", "R: 21 %", "Q: 0.5 %", "P: 79 %"}
	if got := r.cellTexts(); !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	r.label(t, "median 370 m/s")
	r.label(t, "16–84 %: 130 to 520 m/s")
	dark := r.ofColour(skyBlue)
	if len(dark) != 1 || !near(dark[0].Path[0].X, r.cells()[2].x0) {
		t.Error("the cell of the median is not darker")
	}
}

func TestDensityWritesChances(t *testing.T) {
	classes := figure.Classes{Lowest: "A", Bounds: []figure.Bound{{Value: 300, Class: "B"}}}
	for p, want := range map[float64]string{0: "< 0.1 %", 0.00099: "< 0.1 %", 0.001: "0.1 %", 0.0094: "0.9 %", 0.0096: "1 %",
		0.014: "1 %", 0.61: "61 %", 0.99: "99 %", 0.991: "99.1 %", 0.999: "99.9 %", 0.9991: "> 99.9 %", 1: "> 99.9 %"} {
		r := density(t, figure.DensityOptions{Classes: classes, Bins: twoBins, Chances: []float64{p, 1 - p}})
		if got := r.cells()[0].text; got != "A: "+want {
			t.Errorf("a chance of %v is written %q, want %q", p, got, want)
		}
	}
}

// A class without a name has a cell where it has a chance.
func TestDensityOfClassWithoutName(t *testing.T) {
	classes := figure.Classes{Bounds: []figure.Bound{{Value: 200, Class: "B"}, {Value: 400, Class: "A"}}}
	r := density(t, figure.DensityOptions{Classes: classes, Bins: twoBins})
	if got, want := r.cellTexts(), []string{"–: 50 %", "B: 50 %", "A: < 0.1 %"}; !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	r = density(t, figure.DensityOptions{Classes: classes, Bins: []figure.Bin{{Lower: 200, Upper: 400, Part: 1}}})
	if got, want := r.cellTexts(), []string{"B: > 99.9 %", "A: < 0.1 %"}; !slices.Equal(got, want) {
		t.Errorf("cells %q, want %q", got, want)
	}
	if c := r.cells()[0]; r.find(c.x0, c.y0, r.x(200), r.frame.y1) == nil {
		t.Error("no line leads to the lower bound of B")
	}
}

// randomBins returns bins of any number and width, some of them empty, some
// apart.
func randomBins(rng *rand.Rand) []figure.Bin {
	var bins []figure.Bin
	v, sum := 30*math.Pow(30, rng.Float64()), 0.0
	step := math.Pow(10, -4*rng.Float64())
	for range 1 + rng.IntN(80) {
		b := figure.Bin{Lower: v, Upper: v * (1 + step*(0.01+rng.Float64())), Part: max(0, rng.Float64()-0.2)}
		bins, sum = append(bins, b), sum+b.Part
		v = b.Upper
		if rng.IntN(8) == 0 {
			v *= 1 + step
		}
		if v > 3e4 {
			break
		}
	}
	if sum == 0 {
		bins[0].Part, sum = 1, 1
	}
	for i := range bins {
		bins[i].Part /= sum
	}
	return bins
}

// randomDensity returns options of every kind.
func randomDensity(rng *rand.Rand) figure.DensityOptions {
	o := figure.DensityOptions{Units: figure.Units(rng.IntN(2)), Width: 0.2 * rng.Float64(), Height: 0.2 * rng.Float64()}
	o.Classes = []figure.Classes{{}, fourClasses, manyClasses, wordClasses, nineClasses}[rng.IntN(5)]
	if rng.IntN(8) == 0 {
		o.Classes.Lowest = ""
		for range rng.IntN(40) {
			o.Classes.Bounds = append(slices.Clip(o.Classes.Bounds), figure.Bound{Value: math.Pow(10, 1+4*rng.Float64()), Class: []string{"", "BC", "a name of words"}[rng.IntN(3)]})
		}
	}
	kind := rng.IntN(3)
	if kind > 0 {
		o.Bins = randomBins(rng)
	}
	if kind != 1 {
		o.Lognormal = figure.Lognormal{Median: 30 * math.Pow(100, rng.Float64()), SigmaLn: []float64{0, 1e-9, 0.003, 0.1, 0.3, 2, 3}[rng.IntN(7)]}
		if rng.IntN(2) == 0 {
			o.Lognormal.SigmaLn = 0.05 + 0.3*rng.Float64()
		}
	}
	return o
}

func TestDensityOfRandomInput(t *testing.T) {
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 6))
		o := randomDensity(rng)
		r := density(t, o)
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		cells := r.cells()
		if n := len(o.Classes.Bounds) + 1; n > 1 && n <= 8 && o.Classes.Lowest != "" && len(cells) < n-1 { // one may have no name
			t.Errorf("%d cells for %d classes", len(cells), n)
		}
		for i, c := range cells {
			if !strings.HasSuffix(c.text, " %") || c.x0 < r.frame.x0-0.01 || c.x1 > r.frame.x1+0.01 || i > 0 && !near(c.x0, cells[i-1].x1) {
				t.Errorf("cell %+v", c)
			}
		}
		unit := []float64{1, 0.3048}[o.Units]
		for _, b := range o.Classes.Bounds {
			x := r.x(b.Value / unit)
			if inside := x > r.frame.x0+0.02 && x < r.frame.x1-0.02; inside && r.find(x, r.frame.y0, x, r.frame.y1) == nil {
				t.Errorf("no line at the bound of %v m/s", b.Value)
			}
		}
		if again := density(t, o); !reflect.DeepEqual(r.picture, again.picture) {
			t.Error("another picture the second time")
		}
		if t.Failed() {
			t.Fatalf("seed %d: %+v", seed, o)
		}
	}
}

func TestDensityRefuses(t *testing.T) {
	nan := math.NaN()
	lognormal := figure.Lognormal{Median: 300, SigmaLn: 0.1}
	for want, o := range map[string]figure.DensityOptions{
		"neither":                       {},
		"median of 0 m/s":               {Lognormal: figure.Lognormal{SigmaLn: 0.1}},
		"median of NaN m/s":             {Lognormal: figure.Lognormal{Median: nan, SigmaLn: 0.1}},
		"sigma of NaN":                  {Lognormal: figure.Lognormal{Median: 300, SigmaLn: nan}},
		"sigma of -1":                   {Lognormal: figure.Lognormal{Median: 300, SigmaLn: -1}},
		"sigma of 50":                   {Lognormal: figure.Lognormal{Median: 300, SigmaLn: 50}},
		"bin 1 from 0 m/s":              {Bins: []figure.Bin{{Lower: 0, Upper: 10, Part: 1}}},
		"bin 1 from 10 m/s to 10 m/s":   {Bins: []figure.Bin{{Lower: 10, Upper: 10, Part: 1}}},
		"bin 2 from 15 m/s":             {Bins: []figure.Bin{{Lower: 10, Upper: 20, Part: 0.5}, {Lower: 15, Upper: 30, Part: 0.5}}},
		"to +Inf m/s":                   {Bins: []figure.Bin{{Lower: 10, Upper: math.Inf(1), Part: 1}}},
		"a part of NaN":                 {Bins: []figure.Bin{{Lower: 10, Upper: 20, Part: nan}}},
		"a part of 3":                   {Bins: []figure.Bin{{Lower: 10, Upper: 20, Part: 3}}},
		"add up to 0":                   {Bins: []figure.Bin{{Lower: 10, Upper: 20}}},
		"add up to 1.5":                 {Bins: []figure.Bin{{Lower: 10, Upper: 20, Part: 0.75}, {Lower: 20, Upper: 30, Part: 0.75}}},
		"the bins hold 0.5 of":          {Bins: twoBins[:1]},
		`bound of "X" at -1 m/s`:        {Lognormal: lognormal, Classes: figure.Classes{Code: "X", Bounds: []figure.Bound{{Value: -1}}}},
		"3 bounds part 4 classes":       {Lognormal: lognormal, Classes: fourClasses, Chances: []float64{1}},
		"a chance of NaN":               {Lognormal: lognormal, Chances: []float64{nan}},
		"classes add up to 0.5":         {Lognormal: lognormal, Chances: []float64{0.5}},
		"quantiles of 3 m/s, 2 m/s and": {Lognormal: lognormal, Quantiles: figure.Quantiles{Low: 3, Median: 2, High: 4}},
		"quantiles of 3 m/s, NaN m/s":   {Lognormal: lognormal, Quantiles: figure.Quantiles{Low: 3, Median: nan, High: 4}},
		"4 m/s and +Inf m/s cannot":     {Lognormal: lognormal, Quantiles: figure.Quantiles{Low: 3, Median: 4, High: math.Inf(1)}},
	} {
		p, err := figure.Density(o)
		if err == nil || p != nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}

func BenchmarkDensity(b *testing.B) {
	bins := make([]figure.Bin, 60)
	for i := range bins {
		bins[i] = figure.Bin{Lower: 200 + 5*float64(i), Upper: 205 + 5*float64(i), Part: 1. / 60}
	}
	o := figure.DensityOptions{Classes: nineClasses, Bins: bins, Lognormal: figure.Lognormal{Median: 350, SigmaLn: 0.15}}
	for b.Loop() {
		if _, err := figure.Density(o); err != nil {
			b.Fatal(err)
		}
	}
}

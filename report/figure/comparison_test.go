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

// compare draws a comparison and reads it.
func compare(t *testing.T, strips []figure.Strip, o figure.ComparisonOptions) *reading {
	t.Helper()
	p, err := figure.Comparison(strips, o)
	if err != nil {
		t.Fatal(err)
	}
	return read(t, p)
}

// bars returns the outlines of the strips, from the top down.
func (r *reading) bars() []box {
	var bars []box
	for _, m := range r.picture.Marks {
		if s, ok := m.(*report.Stroke); ok && len(s.Path) == 5 && s.Path[4].Kind == report.Close {
			bars = append(bars, box{x0: s.Path[0].X, y0: s.Path[0].Y, x1: s.Path[2].X, y1: s.Path[2].Y})
		}
	}
	return bars
}

// xOf returns the logarithmic axis, from the numbers under its ticks.
func (r *reading) xOf(t *testing.T, bar box, low, high string) func(v float64) float64 {
	t.Helper()
	middle := func(text string) float64 {
		for _, b := range slices.Backward(r.boxes) { // the axis is drawn last
			if b.text == text && b.y1 < bar.y0 {
				return (b.x0 + b.x1) / 2
			}
		}
		t.Fatalf("no number %q on the axis", text)
		return 0
	}
	number := map[string]float64{"200": 200, "1000": 1000, "500": 500, "5000": 5000}
	l := line(t, [][2]float64{{math.Log(number[low]), middle(low)}, {math.Log(number[high]), middle(high)}})
	return func(v float64) float64 { return l(math.Log(v)) }
}

func TestComparison(t *testing.T) {
	r := compare(t, []figure.Strip{
		{Classes: fourClasses, Average: 340, Class: "R"},
		{Classes: manyClasses, Average: 350, Class: "elsewhere"},
	}, figure.ComparisonOptions{})
	r.frame = box{} // the letters stand in the strips
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)

	bars := r.bars()
	if len(bars) != 2 {
		t.Fatalf("%d strips, want 2", len(bars))
	}
	x := r.xOf(t, bars[1], "200", "1000")
	for i, classes := range []figure.Classes{fourClasses, manyClasses} {
		bar := bars[i]
		if r.find(x([]float64{340, 350}[i]), bar.y0, x([]float64{340, 350}[i]), bar.y1) == nil {
			t.Errorf("strip %d has no mark at its average", i)
		}
		for k, b := range classes.Bounds {
			if r.find(x(b.Value), bar.y0, x(b.Value), bar.y1) == nil {
				t.Errorf("strip %d has no tick at %v m/s", i, b.Value)
			}
			from, to := x(b.Value), bar.x1
			if k+1 < len(classes.Bounds) {
				to = x(classes.Bounds[k+1].Value)
			}
			if !slices.ContainsFunc(r.boxes, func(l box) bool {
				return l.text == b.Class && l.x0 > from && l.x1 < to && l.y0 > bar.y0-2 && l.y1 < bar.y1+2
			}) {
				t.Errorf("strip %d has no letter %s in its place", i, b.Class)
			}
		}
	}
	// The answer is shaded where it is one of the strip's own.
	shaded := 0
	for _, m := range r.picture.Marks {
		if f, ok := m.(*report.Fill); ok && near(f.Path[0].X, x(180)) && near(f.Path[2].X, x(360)) {
			shaded++
		}
	}
	if shaded != 1 {
		t.Errorf("%d cells from 180 to 360 m/s are shaded, want 1", shaded)
	}
	for _, text := range []string{"Average shear-wave velocity (m/s)", "Code of four", "class R", "340.0 m/s", "class elsewh", "350.0 m/s", "152.4", "1524"} {
		r.label(t, text)
	}
}

func TestComparisonInFeet(t *testing.T) {
	// 1200 ft/s × 0.3048 m/ft = 365.76 m/s
	r := compare(t, []figure.Strip{{Classes: manyClasses, Average: 365.76, Class: "SR"}}, figure.ComparisonOptions{Units: figure.US})
	bar := r.bars()[0]
	x := r.xOf(t, bar, "500", "5000")
	if r.find(x(1200), bar.y0, x(1200), bar.y1) == nil {
		t.Error("the average is not at 1200 ft/s")
	}
	for _, text := range []string{"(ft/s)", "1200 ft/s", "1450"} {
		r.label(t, text)
	}
}

func TestComparisonOfRandomStrips(t *testing.T) {
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 2))
		var strips []figure.Strip
		for range 1 + rng.IntN(9) {
			s := figure.Strip{Average: 50 * math.Pow(70, rng.Float64())}
			s.Classes.Code = []string{"", "A code", "A code with a name that is longer than the room for it by far"}[rng.IntN(3)]
			s.Class = []string{"", "A", "BC", "an answer of many words"}[rng.IntN(4)]
			s.Classes.Lowest = "A"
			for range rng.IntN(9) {
				s.Classes.Bounds = append(s.Classes.Bounds, figure.Bound{Value: math.Pow(10, 5*rng.Float64()), Class: "BC"})
			}
			strips = append(strips, s)
		}
		o := figure.ComparisonOptions{Units: figure.Units(rng.IntN(2)), Width: 0.2 * rng.Float64()}
		r := compare(t, strips, o)
		if len(r.bars()) != len(strips) {
			t.Errorf("%d strips, want %d", len(r.bars()), len(strips))
		}
		r.frame = box{}
		r.checkLabels(t)
		r.checkMarks(t)
		r.checkAverages(t)
		if again := compare(t, strips, o); !reflect.DeepEqual(r.picture, again.picture) {
			t.Error("another picture the second time")
		}
		if t.Failed() {
			t.Fatalf("seed %d", seed)
		}
	}
}

// checkAverages asserts that no text is crossed by the mark of an average,
// which is the only line of its colour.
func (r *reading) checkAverages(t *testing.T) {
	t.Helper()
	for _, s := range r.segments {
		if s.of.Colour != (report.Colour{R: 213, G: 94}) {
			continue
		}
		mark := box{x0: s.x0 - s.of.Width/2, x1: s.x0 + s.of.Width/2, y0: min(s.y0, s.y1) + 2, y1: max(s.y0, s.y1) - 2}
		for _, b := range r.boxes {
			if b.overlaps(mark) {
				t.Errorf("the mark at %v crosses %q", s.x0, b.text)
			}
		}
	}
}

func TestComparisonRefuses(t *testing.T) {
	for want, strips := range map[string][]figure.Strip{
		"no code":           nil,
		"average of NaN":    {{Average: math.NaN()}},
		"average of 0":      {{}},
		"average of +Inf":   {{Average: math.Inf(1)}},
		`bound of "X" at 0`: {{Average: 300, Classes: figure.Classes{Code: "X", Bounds: []figure.Bound{{}}}}},
	} {
		if _, err := figure.Comparison(strips, figure.ComparisonOptions{}); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("error %v, want one with %q", err, want)
		}
	}
}

func BenchmarkComparison(b *testing.B) {
	strips := slices.Repeat([]figure.Strip{{Classes: manyClasses, Average: 350, Class: "SR"}}, 6)
	for b.Loop() {
		if _, err := figure.Comparison(strips, figure.ComparisonOptions{}); err != nil {
			b.Fatal(err)
		}
	}
}

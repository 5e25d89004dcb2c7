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

var mapClasses = []string{"A", "B", "BC", "C", "CD", "D", "DE", "E", "F"}

// newMap is a map that has to be drawn.
func newMap(t *testing.T, e figure.Extent, o figure.MapOptions) *figure.Map {
	t.Helper()
	m, err := figure.NewMap(e, o)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// degreesOf reads a label such as "5.9° W".
func degreesOf(text string) (v float64, letter string, ok bool) {
	number, letter, ok := strings.Cut(text, "°")
	v, err := strconv.ParseFloat(number, 64)
	if letter = strings.TrimSpace(letter); letter == "W" || letter == "S" {
		v = -v
	}
	return v, letter, ok && err == nil
}

// scales finds the axes of a map from the labels at its ticks, in degrees or
// units of the grid.
func scales(t *testing.T, r *reading) (x, y func(float64) float64) {
	t.Helper()
	var xs, ys [][2]float64
	for _, b := range r.boxes {
		v, _, ok := degreesOf(b.text)
		if plain, err := strconv.ParseFloat(b.text, 64); err == nil {
			v, ok = plain, true
		}
		for _, s := range r.segments {
			switch {
			case !ok || math.Abs(math.Hypot(s.x1-s.x0, s.y1-s.y0)-4) > 0.01:
			case s.y0 == r.frame.y0 && s.y1 < s.y0 && near((b.x0+b.x1)/2, s.x0):
				xs = append(xs, [2]float64{v, s.x0})
			case s.x0 == r.frame.x0 && s.x1 < s.x0 && b.x1 < s.x1 && math.Abs((b.y0+b.y1)/2-s.y0) < 1.5:
				ys = append(ys, [2]float64{v, s.y0})
			}
		}
	}
	return line(t, xs), line(t, ys)
}

// blots returns the middle of every filled mark within the frame, by colour.
func (r *reading) blots() map[report.Colour][][2]float64 {
	out := map[report.Colour][][2]float64{}
	for _, m := range r.picture.Marks {
		f, ok := m.(*report.Fill)
		if !ok {
			continue
		}
		x0, x1, y0, y1 := math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)
		for _, p := range f.Path {
			if p.Kind != report.Close {
				x0, x1, y0, y1 = min(x0, p.X), max(x1, p.X), min(y0, p.Y), max(y1, p.Y)
			}
		}
		if y0 > r.frame.y0 && y1 < r.frame.y1 {
			out[f.Colour] = append(out[f.Colour], [2]float64{(x0 + x1) / 2, (y0 + y1) / 2})
		}
	}
	return out
}

// A point stands where the axes say, north is up, and a degree of longitude at
// 60° N is half as long on paper as one of latitude: cos 60° = 0.5.
func TestMapHasOneScale(t *testing.T) {
	m := newMap(t, figure.Extent{West: 10, South: 59.8, East: 10.4, North: 60.2}, figure.MapOptions{Classes: mapClasses})
	m.Add(10.1, 60.1, 0)
	m.Add(10.3, 59.9, 0)
	r := read(t, m.Picture())
	x, y := scales(t, r)
	if ratio := (x(10.3) - x(10.1)) / (y(60.1) - y(59.9)); math.Abs(ratio-0.5) > 1e-3 {
		t.Errorf("0.2° of longitude to 0.2° of latitude is %v, want 0.5", ratio)
	}
	blue := report.Colour{R: 0, G: 114, B: 178}
	for i, want := range [][2]float64{{10.1, 60.1}, {10.3, 59.9}} {
		if got := r.blots()[blue][i]; math.Abs(got[0]-x(want[0])) > 0.05 || math.Abs(got[1]-y(want[1])) > 0.05 {
			t.Errorf("%v stands at %v, want %v, %v", want, got, x(want[0]), y(want[1]))
		}
	}
	r.checkLabels(t)
	r.checkMarks(t)
	checkColours(t, r.picture)
	r.label(t, "A (2)")
	r.label(t, "N")
}

// The scale bar: a degree of latitude is 111.195 km on the sphere of the
// package (6371.0088·π/180).
func TestMapScaleBar(t *testing.T) {
	for _, p := range []struct {
		units figure.Units
		label string
		km    float64
	}{
		{figure.SI, "20 km", 20},
		{figure.US, "10 mi", 10 * 1.609344},
	} {
		m := newMap(t, figure.Extent{West: 10, South: 59.8, East: 10.4, North: 60.2}, figure.MapOptions{Units: p.units, Tall: 0.09})
		r := read(t, m.Picture())
		r.label(t, p.label)
		_, y := scales(t, r)
		want := p.km / 111.195 * (y(60) - y(59))
		found := false
		for _, s := range r.segments {
			found = found || s.y0 == s.y1 && s.y0 < r.frame.y0-20 && math.Abs(math.Abs(s.x1-s.x0)-want) < 0.05
		}
		if !found {
			t.Errorf("no bar of %s, %.2f points long", p.label, want)
		}
	}
}

// Classes are told apart by shape as well as by colour: no two of the first
// fourteen symbols have outlines and fillings alike.
func TestMapSymbolsDifferInGrey(t *testing.T) {
	var classes []string
	for i := range 14 {
		classes = append(classes, fmt.Sprint("C", i))
	}
	seen := map[string]int{}
	for class := range classes {
		m := newMap(t, figure.Extent{West: 0, South: 0, East: 100, North: 100}, figure.MapOptions{Grid: true, Classes: classes})
		m.Add(50, 50, class)
		r := read(t, m.Picture())
		var shape strings.Builder
		for _, mark := range r.picture.Marks {
			var path report.Path
			kind := ""
			switch mark := mark.(type) {
			case *report.Fill:
				path, kind = mark.Path, "fill"
				if mark.Colour == (report.Colour{R: 255, G: 255, B: 255}) {
					kind = "white"
				}
			case *report.Stroke:
				path, kind = mark.Path, "stroke"
			}
			if n := len(path); n > 3 && path[n-1].Kind == report.Close && path[0].Y > r.frame.y0+20 && path[0].Y < r.frame.y1-20 {
				fmt.Fprint(&shape, kind, path, ";")
			}
		}
		if other, twice := seen[shape.String()]; twice || shape.Len() == 0 {
			t.Errorf("classes %d and %d look alike in grey", class, other)
		}
		seen[shape.String()] = class
	}
}

// More points than MostPoints are thinned to squares: what is drawn does not
// depend on the order, and each square has the class of most of its points.
func TestMapThinsManyPoints(t *testing.T) {
	type point struct {
		x, y  float64
		class int
	}
	var points []point
	rng := rand.New(rand.NewPCG(3, 3))
	for range figure.MostPoints * 3 {
		points = append(points, point{100 * rng.Float64(), 100 * rng.Float64(), rng.IntN(3)})
	}
	draw := func(points []point) (*figure.Map, *report.Picture) {
		m := newMap(t, figure.Extent{West: 0, South: 0, East: 100, North: 100}, figure.MapOptions{Grid: true, Classes: mapClasses})
		for _, p := range points {
			m.Add(p.x, p.y, p.class)
		}
		return m, m.Picture()
	}
	if m, _ := draw(points[:figure.MostPoints]); func() bool { _, thinned := m.Square(); return thinned }() {
		t.Error("as many points as can be drawn are thinned")
	}
	m, first := draw(points)
	side, thinned := m.Square()
	if !thinned {
		t.Fatal("the points are not thinned")
	}
	r := read(t, first)
	x, _ := scales(t, r)
	if want := 5 / (x(1) - x(0)); math.Abs(side-want) > 1e-3*want {
		t.Errorf("a square is %v wide, want %v", side, want)
	}
	slices.Reverse(points)
	if _, second := draw(points); !reflect.DeepEqual(first, second) {
		t.Error("the order of the points changes the map")
	}
	drawn := 0
	for colour, at := range r.blots() {
		if colour != (report.Colour{R: 255, G: 255, B: 255}) {
			drawn += len(at)
		}
	}
	if drawn == 0 || drawn > figure.MostPoints*2 {
		t.Errorf("%d marks for %d points", drawn, len(points))
	}
	r.checkMarks(t)
}

// In one square the class of most points is drawn, of two with as many the
// softer, and a point without a class only where there is no other.
func TestMapSquareTakesTheClassOfMost(t *testing.T) {
	blue, sky, green := report.Colour{R: 0, G: 114, B: 178}, report.Colour{R: 86, G: 180, B: 233}, report.Colour{R: 0, G: 158, B: 115}
	for _, p := range []struct {
		counts []int // of classes 0, 1, 2 and none
		want   report.Colour
	}{
		{[]int{1500, 1000, 0, 0}, blue},
		{[]int{1000, 1500, 0, 0}, sky},
		{[]int{1200, 0, 1200, 0}, green},
		{[]int{1, 0, 0, 3000}, blue},
	} {
		m := newMap(t, figure.Extent{West: 0, South: 0, East: 100, North: 100}, figure.MapOptions{Grid: true, Classes: mapClasses})
		for class, n := range p.counts {
			for range n {
				m.Add(50, 50, class-4*(class/3)) // the last of counts is −1
			}
		}
		fills := read(t, m.Picture()).blots()
		if len(fills[p.want]) != 1 || len(fills) != 1 {
			t.Errorf("%v: drawn %v, want one of %v", p.counts, fills, p.want)
		}
	}
}

// A region across the antimeridian: West is larger than East.
func TestMapAcrossTheAntimeridian(t *testing.T) {
	m := newMap(t, figure.Extent{West: 178, South: -18, East: -179, North: -16}, figure.MapOptions{Classes: mapClasses})
	m.Add(178.5, -17.5, 0)
	m.Add(-179.5, -16.5, 0)
	r := read(t, m.Picture())
	r.label(t, "179° E")
	r.label(t, "179° W")
	at := r.blots()[report.Colour{R: 0, G: 114, B: 178}]
	if len(at) != 2 || at[1][0] <= at[0][0] || at[1][1] <= at[0][1] {
		t.Errorf("the points stand at %v", at)
	}
}

func TestMapRefuses(t *testing.T) {
	for _, p := range []struct {
		e    figure.Extent
		grid bool
		want string
	}{
		{figure.Extent{South: math.NaN()}, false, "map: coordinates that are no numbers cannot be drawn"},
		{figure.Extent{East: math.Inf(1)}, true, "map: coordinates that are no numbers cannot be drawn"},
		{figure.Extent{West: 5, East: 4}, true, "map: a region from 5, 0 to 4, 0 cannot be drawn"},
		{figure.Extent{South: 3, North: 2}, false, "map: a region from 0, 3 to 0, 2 cannot be drawn"},
		{figure.Extent{South: 3, North: 92}, false, "map: a region from 0, 3 to 0, 92 is not on Earth"},
	} {
		if _, err := figure.NewMap(p.e, figure.MapOptions{Grid: p.grid}); err == nil || err.Error() != p.want {
			t.Errorf("%+v: %v, want %s", p.e, err, p.want)
		}
	}
	m := newMap(t, figure.Extent{East: 1, North: 1}, figure.MapOptions{})
	m.Add(math.NaN(), 0.5, 0)
	m.Add(0.5, 70, 0)
	if r := read(t, m.Picture()); len(r.blots()) != 0 {
		t.Error("points that are no numbers or lie elsewhere are drawn")
	}
}

func TestMapOfRandomPoints(t *testing.T) {
	for seed := range uint64(150) {
		rng := rand.New(rand.NewPCG(seed, 9))
		o := figure.MapOptions{Units: figure.Units(rng.IntN(2)), Classes: mapClasses[:rng.IntN(len(mapClasses)+1)], Grid: rng.IntN(2) == 0}
		if rng.IntN(2) == 0 {
			o.Width, o.Tall = 0.1+0.1*rng.Float64(), 0.05+0.1*rng.Float64()
		}
		size := math.Pow(10, -4+6*rng.Float64())
		e := figure.Extent{West: -180 + 360*rng.Float64(), South: -85 + 150*rng.Float64()}
		e.East, e.North = min(e.West+size*rng.Float64(), 180), min(e.South+size*rng.Float64(), 90)
		if o.Grid {
			e = figure.Extent{West: 1e6 * rng.Float64(), South: 1e7 * rng.Float64()}
			e.East, e.North = e.West+size*1e3*rng.Float64(), e.South+size*1e3*rng.Float64()
		}
		m := newMap(t, e, o)
		for range rng.IntN(60) {
			m.Add(e.West+(e.East-e.West)*rng.Float64(), e.South+(e.North-e.South)*rng.Float64(), rng.IntN(11)-1)
		}
		r := read(t, m.Picture())
		r.checkLabels(t)
		r.checkMarks(t)
		checkColours(t, r.picture)
		if t.Failed() {
			t.Fatalf("seed %d: %+v %+v", seed, e, o)
		}
	}
}

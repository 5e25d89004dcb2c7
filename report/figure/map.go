package figure

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"

	"shearbook/report"
)

// MapOptions is how a Map looks.
type MapOptions struct {
	Units Units   // of the scale bar: km and m, or miles and feet
	Width float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
	Tall  float64 // m on paper, from 0.05 to 0.2; no frame is higher; 0 is 0.095

	// Classes are the classes that points may have, stiffest first. Each has a
	// mark of its own, by shape and colour; those beyond the fourteenth share
	// one.
	Classes []string

	// Grid says that the coordinates are eastings and northings of a projected
	// grid in a unit that is not known here; else they are degrees of longitude
	// and latitude.
	Grid bool
}

// Extent is the region that points of a map lie in. West may be larger than
// East in degrees: the region then crosses the antimeridian.
type Extent struct{ West, South, East, North float64 }

// MostPoints is how many points a Map draws one by one. Where there are more,
// the map is cut into squares of MapSquare, and each that holds points is
// drawn as one, at its middle, of the class that most of them have; where two
// have as many, of the softer. A square whose points have no class is drawn so.
const MostPoints = 2000

// MapSquare is the side of a square in m on paper.
const MapSquare = float64(mapSquare) / float64(metre)

const mapSquare = 5 // points

// Map draws points on a plane with north up and one scale in all directions:
// a degree of longitude is as long as one of latitude times the cosine of the
// latitude in the middle. Points are added one by one, and any number of them
// takes the same memory.
type Map struct {
	opt    MapOptions
	frame  frame
	counts []int // of points, by class; the last without one

	points  []spot            // up to MostPoints
	squares map[int32][]int32 // points by class, by square; nil until there are too many points
}

// spot is a point on paper.
type spot struct {
	vg.Point
	class int32
}

// NewMap returns a map of a region without points. The error says why it
// cannot be drawn.
func NewMap(e Extent, o MapOptions) (*Map, error) {
	f, err := newFrame(e, o)
	if err != nil {
		return nil, fmt.Errorf("map: %w", err)
	}
	return &Map{opt: o, frame: f, counts: make([]int, len(o.Classes)+1)}, nil
}

// Add adds a point: x is its longitude or easting, y its latitude or
// northing. class is an index of Classes; another means that it has none. A
// point outside the region is not drawn.
func (m *Map) Add(x, y float64, class int) {
	if class < 0 || class >= len(m.opt.Classes) {
		class = len(m.opt.Classes)
	}
	at, ok := m.frame.place(x, y)
	if !ok {
		return
	}
	m.counts[class]++
	s := spot{at, int32(class)}
	if m.squares == nil && len(m.points) < MostPoints {
		m.points = append(m.points, s)
		return
	}
	m.thin()
	m.count(s)
}

// thin goes over to squares.
func (m *Map) thin() {
	if m.squares != nil {
		return
	}
	m.squares = map[int32][]int32{}
	for _, s := range m.points {
		m.count(s)
	}
	m.points = nil
}

// across is the number of squares side by side.
func (m *Map) across() int32 { return int32(m.frame.width()/mapSquare) + 1 }

func (m *Map) count(s spot) {
	key := int32((s.Y-m.frame.Min.Y)/mapSquare)*m.across() + int32((s.X-m.frame.Min.X)/mapSquare)
	if m.squares[key] == nil {
		m.squares[key] = make([]int32, len(m.counts))
	}
	m.squares[key][s.class]++
}

// Square returns the side of the squares in metres, or in units of the grid,
// and whether the points were thinned by them.
func (m *Map) Square() (side float64, thinned bool) {
	return mapSquare / m.frame.scale, m.squares != nil
}

// Picture draws the map as it is now.
func (m *Map) Picture() *report.Picture {
	f := m.frame
	key := newLegend(m.meanings(), f.width())
	height := f.Max.Y + key.height() + gap + margin
	s := newSheet(paperWidth(m.opt.Width), height)
	f.drawLines(&s)
	m.drawSpots(&s)
	s.outline(frameLine, f.Rectangle)
	f.drawNumbers(&s)
	f.drawScale(&s, m.opt.Units)
	key.draw(&s, f.Min.X, height-margin)
	return s.picture
}

// The radii of the marks.
const (
	spotRadius   = 2.7
	squareRadius = 2.1
)

// meanings are the classes that occur, with how many points each has.
func (m *Map) meanings() []meaning {
	var list []meaning
	for class, n := range m.counts {
		if n == 0 {
			continue
		}
		name := "without a class"
		if class < len(m.opt.Classes) {
			name = clean(m.opt.Classes[class])
		}
		list = append(list, meaning{fmt.Sprintf("%s (%d)", name, n), 2 * spotRadius, func(s *sheet, x, y vg.Length) {
			m.mark(s, vg.Point{X: x + spotRadius, Y: y}, class, spotRadius)
		}})
	}
	return list
}

func (m *Map) mark(s *sheet, at vg.Point, class int, r vg.Length) {
	if class == len(m.opt.Classes) {
		s.nothing(at, 0.8*r)
		return
	}
	s.symbol(symbolOf(class), at, r)
}

// drawSpots draws the points, the rarer classes over the more frequent and
// those without a class on top.
func (m *Map) drawSpots(s *sheet) {
	spots, r := m.points, vg.Length(spotRadius)
	if m.squares != nil {
		spots, r = m.middles(), squareRadius
	}
	order := m.order()
	rank := make([]int, len(order))
	for i, class := range order {
		rank[class] = i
	}
	spots = slices.Clone(spots)
	slices.SortStableFunc(spots, func(a, b spot) int { return rank[a.class] - rank[b.class] })
	for _, p := range spots {
		m.mark(s, p.Point, int(p.class), r)
	}
}

// order is the classes, the most frequent first and none last.
func (m *Map) order() []int {
	var order []int
	for class := range m.opt.Classes {
		order = append(order, class)
	}
	slices.SortStableFunc(order, func(a, b int) int { return m.counts[b] - m.counts[a] })
	return append(order, len(m.opt.Classes))
}

// middles are the squares that hold points, from the lower left.
func (m *Map) middles() []spot {
	keys := make([]int32, 0, len(m.squares))
	for k := range m.squares {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	var spots []spot
	for _, k := range keys {
		x, y := float64(k%m.across()), float64(k/m.across())
		at := vg.Point{X: m.frame.Min.X + vg.Length((x+0.5)*mapSquare), Y: m.frame.Min.Y + vg.Length((y+0.5)*mapSquare)}
		at.X, at.Y = min(at.X, m.frame.Max.X-squareRadius), min(at.Y, m.frame.Max.Y-squareRadius)
		spots = append(spots, spot{at, most(m.squares[k])})
	}
	return spots
}

// most is the class that most points of a square have, the softer of two that
// have as many; the last, that of points without one, only where no other is.
func most(counts []int32) int32 {
	best := len(counts) - 1
	n := int32(0)
	for class, count := range counts[:best] {
		if count > 0 && count >= n {
			best, n = class, count
		}
	}
	return int32(best)
}

// finite reports whether numbers are ones that can be drawn.
func finite(numbers ...float64) bool {
	return !slices.ContainsFunc(numbers, func(v float64) bool { return math.IsNaN(v) || math.Abs(v) > 1e12 })
}

package figure

import (
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// symbol is the mark of a class on a Map: a shape and a colour together, and
// after the last of the shapes the same again hollow, so that no two are
// alike in grey.
type symbol struct {
	outline []vg.Point // a polygon about the origin, within 1 or little more; nil for a circle
	colour  ink
	hollow  bool
}

// polygon returns n corners at a distance r, the first at an angle in degrees
// from the right, anticlockwise.
func polygon(n int, first, r float64) []vg.Point {
	var corners []vg.Point
	for i := range n {
		sin, cos := math.Sincos((first + 360*float64(i)/float64(n)) * math.Pi / 180)
		corners = append(corners, vg.Point{X: vg.Length(r * cos), Y: vg.Length(r * sin)})
	}
	return corners
}

// star returns a star of n points.
func star(n int) []vg.Point {
	var corners []vg.Point
	for i, outer := range polygon(n, 90, 1.3) {
		corners = append(corners, outer, polygon(n, 90+180/float64(n), 0.55)[i])
	}
	return corners
}

// cross returns an upright cross.
func cross() []vg.Point {
	const a, b = 0.38, 1.1
	return []vg.Point{{X: a, Y: a}, {X: a, Y: b}, {X: -a, Y: b}, {X: -a, Y: a}, {X: -b, Y: a}, {X: -b, Y: -a},
		{X: -a, Y: -a}, {X: -a, Y: -b}, {X: a, Y: -b}, {X: a, Y: -a}, {X: b, Y: -a}, {X: b, Y: a}}
}

// shapes is how many shapes there are; with the hollow ones twice as many
// symbols.
const shapes = 7

// symbolOf returns the symbol of class i. Classes beyond the last symbol
// share it.
func symbolOf(i int) symbol {
	i = min(i, 2*shapes-1)
	s := [shapes]symbol{
		{nil, blue, false},
		{polygon(4, 45, 1.25), skyBlue, false},
		{polygon(3, 90, 1.3), bluishGreen, false},
		{polygon(4, 0, 1.25), orange, false},
		{polygon(3, 270, 1.3), vermilion, false},
		{star(5), reddishPurple, false},
		{cross(), black, false},
	}[i%shapes]
	s.hollow = i >= shapes
	return s
}

// path returns the symbol about a point, with a radius of about r.
func (k symbol) path(at vg.Point, r vg.Length) vg.Path {
	var p vg.Path
	if k.outline == nil {
		p.Move(vg.Point{X: at.X + r, Y: at.Y})
		p.Arc(at, r, 0, 2*math.Pi)
		p.Close()
		return p
	}
	for i, c := range k.outline {
		corner := vg.Point{X: at.X + r*c.X, Y: at.Y + r*c.Y}
		if i == 0 {
			p.Move(corner)
		} else {
			p.Line(corner)
		}
	}
	p.Close()
	return p
}

// symbol draws a symbol with a white rim, which parts it from the one below.
func (s *sheet) symbol(k symbol, at vg.Point, r vg.Length) {
	const rim, line = 0.6, 0.9
	path := k.path(at, r)
	if k.hollow {
		path = k.path(at, r-line/2)
		s.SetColor(white)
		s.Canvas.Fill(k.path(at, r+rim/2))
		s.SetLineStyle(draw.LineStyle{Color: k.colour, Width: line})
		s.Canvas.Stroke(path)
		return
	}
	s.SetLineStyle(draw.LineStyle{Color: white, Width: rim})
	s.Canvas.Stroke(path)
	s.SetColor(k.colour)
	s.Canvas.Fill(path)
}

// nothing draws the mark of a point without a class: a small ×.
func (s *sheet) nothing(at vg.Point, r vg.Length) {
	for _, l := range []draw.LineStyle{{Color: white, Width: 2.2}, {Color: black, Width: 1}} {
		s.StrokeLine2(l, at.X-r, at.Y-r, at.X+r, at.Y+r)
		s.StrokeLine2(l, at.X-r, at.Y+r, at.X+r, at.Y-r)
	}
}

package figure

import (
	"fmt"
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/profile"
)

// What can be drawn. Anything in the ground lies far inside.
const (
	fastest    = 1e5 // m/s
	deepest    = 1e5 // m
	shallowest = 0.1 // m, of a depth axis
)

// Line is one profile of a Velocity figure.
type Line struct {
	Name    string          // for the key
	Layers  []profile.Layer // as profile.Validate accepts them, extended or not
	Reached float64         // m below ground level; what lies deeper is drawn as an extension. 0: nothing is one
	Average []Point         // the average velocity from the datum down to each depth; points that are not finite are left out
}

// Point is a velocity at a depth.
type Point struct {
	Velocity float64 // m/s
	Depth    float64 // m below ground level
}

// finite reports whether the point can be drawn.
func (p Point) finite() bool {
	return p.Velocity > 0 && p.Velocity <= fastest && p.Depth >= 0 && p.Depth <= deepest
}

// check refuses a layer that cannot be drawn.
func (l *Line) check() error {
	if len(l.Layers) == 0 {
		return fmt.Errorf("profile %q has no layers to draw", clean(l.Name))
	}
	for i, y := range l.Layers {
		top := y.Top >= 0 && y.Top <= deepest
		bottom := y.Bottom > y.Top && (y.Bottom <= deepest || y.HalfSpace())
		vs := y.Vs > 0 && y.Vs <= fastest && y.VsBottom >= 0 && y.VsBottom <= fastest
		if !top || !bottom || !vs {
			return fmt.Errorf("layer %d of profile %q cannot be drawn: %v m to %v m, Vs %v m/s to %v m/s",
				i+1, clean(l.Name), y.Top, y.Bottom, y.Vs, y.VsBottom)
		}
	}
	return nil
}

// steps is a profile as the lines to be drawn.
type steps struct {
	measured [][]Point
	extended [][]Point
	goesOn   bool // below the depth to which it is drawn
}

// steps returns the profile down to depth to (m): for each layer its
// velocity at its top and at its bottom, joined to the layer above.
func (l *Line) steps(to float64) steps {
	var s steps
	reached := l.Reached
	if reached <= 0 {
		reached = math.Inf(1)
	}
	for i := range l.Layers {
		y := &l.Layers[i]
		if y.Top >= to {
			s.goesOn = true
			break
		}
		bottom := min(y.Bottom, to)
		if end := min(bottom, reached); y.Top < end {
			s.measured = extend(s.measured, y, y.Top, end)
		}
		if start := max(y.Top, reached); start < bottom {
			if len(s.extended) == 0 {
				s.extended = startAt(s.measured)
			}
			s.extended = extend(s.extended, y, start, bottom)
		}
		s.goesOn = y.Bottom > to*(1+1e-9)
	}
	return s
}

// startAt returns a line of one point, the last of lines.
func startAt(lines [][]Point) [][]Point {
	if len(lines) == 0 {
		return nil
	}
	last := lines[len(lines)-1]
	return [][]Point{{last[len(last)-1]}}
}

// extend lengthens the last of lines by the part of layer y between two
// depths, or begins another where there is a hole in the ground.
func extend(lines [][]Point, y *profile.Layer, top, bottom float64) [][]Point {
	from, to := Point{y.VsAt(top), top}, Point{y.VsAt(bottom), bottom}
	if n := len(lines); n > 0 {
		line := lines[n-1]
		last := line[len(line)-1]
		if math.Abs(last.Depth-top) < 1e-6 {
			if last.Velocity != from.Velocity {
				line = append(line, from)
			}
			lines[n-1] = append(line, to)
			return lines
		}
	}
	return append(lines, []Point{from, to})
}

// end returns the lowest point that is drawn, and false if there is none.
func (s steps) end() (Point, bool) {
	lines := s.extended
	if len(lines) == 0 {
		lines = s.measured
	}
	if len(lines) == 0 {
		return Point{}, false
	}
	last := lines[len(lines)-1]
	return last[len(last)-1], true
}

// look is how a profile is drawn.
type look struct {
	layers, extension, average draw.LineStyle
}

// The extension of every profile is thin with short dashes; no profile's
// own dashes are short.
var shortDash = []vg.Length{2, 2}

// looks are the colour, the dashes and the width of the first profiles.
// Their lists have no common factor, so that they repeat together only after
// the 35th.
var (
	lookColours = []ink{black, vermilion, blue, bluishGreen, reddishPurple, orange, skyBlue}
	lookDashes  = [][]vg.Length{nil, {9, 2.5}, {9, 2, 2.5, 2}, {5, 2}, {12, 2, 2.5, 2, 2.5, 2}}
	lookWidths  = []vg.Length{1.5, 2.4, 1}
)

// lookOf returns how profile i of n is drawn: its average as its layers, but
// thin. The average of a single profile has a colour of its own.
func lookOf(i, n int) look {
	colour := lookColours[i%len(lookColours)]
	width := lookWidths[i/len(lookDashes)%len(lookWidths)]
	k := look{
		layers:    draw.LineStyle{Color: colour, Width: width, Dashes: lookDashes[i%len(lookDashes)]},
		extension: draw.LineStyle{Color: colour, Width: 0.9, Dashes: shortDash},
		average:   draw.LineStyle{Color: colour, Width: 0.7, Dashes: lookDashes[i%len(lookDashes)]},
	}
	if n == 1 {
		k.average = draw.LineStyle{Color: blue, Width: 1}
	}
	return k
}

// drawLine draws a profile, then its average with a dot at its end, and an
// arrow where the profile goes on.
func (s *sheet) drawLine(p *plane, line *Line, st steps, k look) {
	s.curves(p, k.layers, st.measured)
	s.curves(p, k.extension, st.extended)
	if end, ok := st.end(); ok && st.goesOn {
		s.arrow(k.layers.Color.(ink), p.at(end.Velocity, end.Depth))
	}
	average := finitePoints(line.Average)
	if len(average) == 0 {
		return
	}
	s.curves(p, k.average, [][]Point{average})
	last := average[len(average)-1]
	if at := p.at(last.Velocity, last.Depth); p.Contains(at) {
		s.dot(k.average.Color.(ink), at)
	}
}

// finitePoints returns the points that can be drawn.
func finitePoints(points []Point) []Point {
	var out []Point
	for _, p := range points {
		if p.finite() {
			out = append(out, p)
		}
	}
	return out
}

// curves strokes lines in the frame of p, cut off at its edges.
func (s *sheet) curves(p *plane, style draw.LineStyle, lines [][]Point) {
	for _, line := range lines {
		points := make([]vg.Point, len(line))
		for i, pt := range line {
			points[i] = p.at(pt.Velocity, pt.Depth)
		}
		s.StrokeLines(style, p.ClipLinesXY(points)...)
	}
}

// arrow draws a head that points down to tip.
func (s *sheet) arrow(colour ink, tip vg.Point) {
	const length, half = 7, 3
	s.triangle(colour, tip,
		vg.Point{X: tip.X - half, Y: tip.Y + length},
		vg.Point{X: tip.X + half, Y: tip.Y + length})
}

// dot draws a dot with a white rim.
func (s *sheet) dot(colour ink, at vg.Point) {
	for _, d := range []struct {
		colour ink
		radius vg.Length
	}{{white, 3.2}, {colour, 2.4}} {
		s.SetColor(d.colour)
		var c vg.Path
		c.Move(vg.Point{X: at.X + d.radius, Y: at.Y})
		c.Arc(at, d.radius, 0, 2*math.Pi)
		c.Close()
		s.Canvas.Fill(c)
	}
}

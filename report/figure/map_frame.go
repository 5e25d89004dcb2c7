package figure

import (
	"fmt"
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// frame is the plane of a Map on paper.
type frame struct {
	vg.Rectangle
	grid       bool
	x0, y0     float64 // longitude or easting, latitude or northing, of its lower left corner
	perX, perY float64 // points for a degree or a unit of the grid
	scale      float64 // points for a metre or a unit of the grid
}

// degree is the length of a degree of latitude in m, on a sphere of the
// Earth's mean radius R1 = 6,371,008.8 m (Moritz 2000, Geodetic Reference
// System 1980, Journal of Geodesy 74:128): 6371008.8·π/180.
const degree = 6371008.8 * math.Pi / 180

// Lengths of a Map.
const (
	leastMap  = 50 * mm  // height of the frame
	usualMap  = 95 * mm  // likewise at most
	mostMap   = 200 * mm // likewise where the options ask for it
	aroundMap = 0.04     // of the region, left free around the points
	scaleRoom = 24       // for the scale bar, below the numbers
)

// smallest is the least width of a region in m, or in units of the grid: a
// map of one hole shows its surroundings.
const smallest = 200

// newFrame fits a region into a frame of the paper's width: the region is
// shown with something around it, and more where the frame has room.
func newFrame(e Extent, o MapOptions) (frame, error) {
	f := frame{grid: o.Grid}
	if !finite(e.West, e.South, e.East, e.North) {
		return f, fmt.Errorf("coordinates that are no numbers cannot be drawn")
	}
	if !o.Grid && e.East < e.West {
		e.East += 360
	}
	if e.East < e.West || e.North < e.South {
		return f, fmt.Errorf("a region from %v, %v to %v, %v cannot be drawn", e.West, e.South, e.East, e.North)
	}
	if !o.Grid && (e.South < -90 || e.North > 90 || e.West < -180 || e.East-e.West > 360) {
		return f, fmt.Errorf("a region from %v, %v to %v, %v is not on Earth", e.West, e.South, e.East, e.North)
	}
	unitX, unitY := 1.0, 1.0 // m of a degree
	if !o.Grid {
		unitY = degree
		unitX = degree * max(math.Cos((e.South+e.North)/2*math.Pi/180), 0.01)
	}
	width, height := (e.East-e.West)*unitX, (e.North-e.South)*unitY
	least := max(smallest, width, height) * (1 + 2*aroundMap)
	wide, tall := max(width*(1+2*aroundMap), least/4), max(height*(1+2*aroundMap), least/4)

	f.Min.Y = margin + scaleRoom + axisHeight - gap - titles.feed()
	if f.grid {
		f.Min.Y = margin + scaleRoom + axisHeight
	}
	f.Min.X = margin + titles.feed() + gap + longTick + 2 + plain.width("99.999° N")
	room := paperWidth(o.Width) - margin - rightRoom - f.Min.X
	f.scale = min(float64(room)/wide, float64(o.tall())/tall)
	f.Max.X = f.Min.X + room
	f.Max.Y = f.Min.Y + max(leastMap, vg.Length(tall*f.scale))
	f.perX, f.perY = f.scale*unitX, f.scale*unitY
	f.x0 = (e.West+e.East)/2 - float64(room)/2/f.perX
	f.y0 = (e.South+e.North)/2 - float64(f.Max.Y-f.Min.Y)/2/f.perY
	return f, nil
}

// tall is how high a frame may be.
func (o MapOptions) tall() vg.Length {
	if !(o.Tall > 0) {
		return usualMap
	}
	return min(max(vg.Length(o.Tall)*metre, leastMap), mostMap)
}

func (f *frame) width() vg.Length { return f.Max.X - f.Min.X }

// place returns where a point lies on paper, and whether that is within the
// frame.
func (f *frame) place(x, y float64) (vg.Point, bool) {
	if !finite(x, y) {
		return vg.Point{}, false
	}
	if !f.grid && x < f.x0 {
		x += 360
	}
	at := vg.Point{X: f.Min.X + vg.Length((x-f.x0)*f.perX), Y: f.Min.Y + vg.Length((y-f.y0)*f.perY)}
	return at, at.X >= f.Min.X && at.X <= f.Max.X && at.Y >= f.Min.Y && at.Y <= f.Max.Y
}

var graticule = draw.LineStyle{Color: lightGrey, Width: 0.3}

// lines returns the round values between from and to, at least spacing points
// apart.
func roundValues(from, to, per, spacing float64) (values []float64, digits int) {
	step, _ := niceStep(spacing / per)
	digits = max(0, -int(math.Floor(math.Log10(step)+1e-9)))
	first := math.Ceil(from/step - 1e-9)
	for i := 0.0; (first+i)*step <= to+1e-9*step && i < 100; i++ {
		values = append(values, (first+i)*step)
	}
	return values, digits
}

// xLines and yLines are the values that lines are drawn at.
func (f *frame) xLines() ([]float64, int) {
	spacing := 75.0
	return roundValues(f.x0, f.x0+float64(f.width())/f.perX, f.perX, spacing)
}

func (f *frame) yLines() ([]float64, int) {
	from, to := f.y0, f.y0+float64(f.Max.Y-f.Min.Y)/f.perY
	if !f.grid {
		from, to = max(from, -90), min(to, 90)
	}
	return roundValues(from, to, f.perY, 55)
}

// drawLines draws the thin lines behind the points.
func (f *frame) drawLines(s *sheet) {
	values, _ := f.xLines()
	for _, v := range values {
		x := f.Min.X + vg.Length((v-f.x0)*f.perX)
		s.StrokeLine2(graticule, x, f.Min.Y, x, f.Max.Y)
	}
	values, _ = f.yLines()
	for _, v := range values {
		y := f.Min.Y + vg.Length((v-f.y0)*f.perY)
		s.StrokeLine2(graticule, f.Min.X, y, f.Max.X, y)
	}
}

// drawNumbers writes the values of the lines below and left of the frame.
func (f *frame) drawNumbers(s *sheet) {
	values, digits := f.xLines()
	base := f.Min.Y - longTick - 2 - plain.size*capHeight
	for _, v := range values {
		x := f.Min.X + vg.Length((v-f.x0)*f.perX)
		s.StrokeLine2(frameLine, x, f.Min.Y, x, f.Min.Y-longTick)
		text := f.number(v, digits, "E", "W")
		if half := plain.width(text) / 2; x-half > margin && x+half < vg.Length(s.picture.Width)-margin {
			s.write(plain, x, base, draw.XCenter, text)
		}
	}
	values, digits = f.yLines()
	for _, v := range values {
		y := f.Min.Y + vg.Length((v-f.y0)*f.perY)
		s.StrokeLine2(frameLine, f.Min.X, y, f.Min.X-longTick, y)
		s.write(plain, f.Min.X-longTick-2, y-plain.size*capHeight/2, draw.XRight, f.number(v, digits, "N", "S"))
	}
	if f.grid {
		s.write(titles, f.Center().X, base-gap-titles.size*0.9, draw.XCenter, "Easting (units of the grid)")
		s.writeUp(titles, margin+titles.size, f.Center().Y, "Northing (units of the grid)")
	}
}

// Center returns the middle of the frame.
func (f *frame) Center() vg.Point {
	return vg.Point{X: (f.Min.X + f.Max.X) / 2, Y: (f.Min.Y + f.Max.Y) / 2}
}

// number writes a coordinate: degrees with their letter, or a plain number.
func (f *frame) number(v float64, digits int, positive, negative string) string {
	if f.grid {
		return strconv.FormatFloat(v, 'f', digits, 64)
	}
	if v > 180+1e-9 {
		v -= 360
	}
	letter := positive
	if v < 0 {
		v, letter = -v, negative
	}
	text := strconv.FormatFloat(v, 'f', digits, 64)
	if v < 1e-9 {
		return "0°"
	}
	return text + "°" + noBreak + letter
}

// drawScale draws the scale bar and the arrow to the north below the frame.
func (f *frame) drawScale(s *sheet, units Units) {
	unit, name := f.barUnit(units)
	length := barLength(0.3 * float64(f.width()) / f.scale / unit)
	w := vg.Length(length * unit * f.scale)
	const height = 3.5
	x, y := f.Min.X, vg.Length(margin+3)
	s.rectangle(black, x, y, x+w/2, y+height)
	s.outline(draw.LineStyle{Color: black, Width: 0.6}, vg.Rectangle{Min: vg.Point{X: x, Y: y}, Max: vg.Point{X: x + w, Y: y + height}})
	s.write(plain, x+w+gap, y-0.8, draw.XLeft, strconv.FormatFloat(length, 'f', -1, 64)+noBreak+name)

	right := f.Max.X - 8
	s.triangle(black, vg.Point{X: right, Y: y + 13}, vg.Point{X: right - 3.6, Y: y - 1}, vg.Point{X: right, Y: y + 2})
	s.outlineTriangle(vg.Point{X: right, Y: y + 13}, vg.Point{X: right + 3.6, Y: y - 1}, vg.Point{X: right, Y: y + 2})
	s.write(strong, right-2*gap, y+1, draw.XRight, "N")
}

// outlineTriangle strokes a triangle.
func (s *sheet) outlineTriangle(a, b, c vg.Point) {
	var p vg.Path
	p.Move(a)
	p.Line(b)
	p.Line(c)
	p.Close()
	s.SetLineStyle(draw.LineStyle{Color: black, Width: 0.6})
	s.Canvas.Stroke(p)
}

// barUnit returns the unit of the scale bar in m, or in units of the grid:
// 1 mile is 1609.344 m, 1 foot 0.3048 m (NIST Handbook 44, appendix C).
func (f *frame) barUnit(units Units) (metres float64, name string) {
	const mile, foot = 1609.344, 0.3048
	across := 0.3 * float64(f.width()) / f.scale
	switch {
	case f.grid:
		return 1, "units of the grid"
	case units == US && across >= mile:
		return mile, "mi"
	case units == US:
		return foot, "ft"
	case across >= 1000:
		return 1000, "km"
	}
	return 1, "m"
}

// barLength returns the largest of 1, 2 and 5 times a power of ten that is not
// above most.
func barLength(most float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(most)+1e-9))
	for _, m := range []float64{5, 2} {
		if m*power <= most*(1+1e-9) {
			return m * power
		}
	}
	return power
}

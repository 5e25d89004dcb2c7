package figure

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// Bar is one bar of a Histogram.
type Bar struct {
	Lower, Upper float64 // m/s, 0 < Lower < Upper
	Count        int     // of averages
}

// HistogramOptions is how a Histogram looks.
type HistogramOptions struct {
	Units   Units
	Width   float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
	Height  float64 // m on paper, from 0.06 to 0.4; 0 is 0.08
	Classes Classes // of the code; none if zero
	What    string  // is counted: "profiles" if ""
}

// mostEdges is how many edges BarEdges returns at most, but for the bounds.
const mostEdges = 200

// BarEdges returns the edges of about n bars that cover the velocities from
// low to high (m/s) and end at every bound that lies among them, so that no
// bar belongs to two classes. Between two bounds they have equal widths on a
// logarithmic axis. Velocities that cannot be drawn give no edges.
func BarEdges(low, high float64, n int, c Classes) []float64 {
	if !(low > 0 && low <= high && high <= fastest) || c.check() != nil {
		return nil
	}
	n = min(max(n, 1), mostEdges)
	step := max(math.Log(high/low)/float64(n), 0.02)
	stops := []float64{low * math.Exp(-step/2)}
	for _, b := range c.sorted() {
		if b.Value > stops[len(stops)-1] && b.Value < high*math.Exp(step/2) {
			stops = append(stops, b.Value)
		}
	}
	stops = append(stops, high*math.Exp(step/2))
	edges := stops[:1:1]
	for i, to := range stops[1:] {
		from := stops[i]
		parts := max(1, int(math.Round(math.Log(to/from)/step)))
		for k := 1; k < parts; k++ {
			edges = append(edges, from*math.Pow(to/from, float64(k)/float64(parts)))
		}
		edges = append(edges, to)
	}
	return edges
}

// Histogram draws how many averages lie in each of the bars, over the bounds
// of the classes with their letters and values. The velocity axis is
// logarithmic, on which the soft classes have as much room as the stiff. The
// error names what cannot be drawn.
func Histogram(bars []Bar, o HistogramOptions) (*report.Picture, error) {
	f := histogram{HistogramOptions: o, bars: bars}
	if err := f.check(); err != nil {
		return nil, fmt.Errorf("histogram: %w", err)
	}
	f.fit()
	return f.draw(), nil
}

// histogram is a Histogram in the making.
type histogram struct {
	HistogramOptions
	bars []Bar

	width, height vg.Length
	x, y          *axis
	letters       []placed
	values        []placed
}

// check refuses what cannot be drawn.
func (f *histogram) check() error {
	if len(f.bars) == 0 {
		return fmt.Errorf("no bar to draw")
	}
	before := 0.0
	for _, b := range f.bars {
		if !(b.Lower > 0 && b.Lower >= before && b.Upper > b.Lower && b.Upper <= fastest && b.Count >= 0) {
			return fmt.Errorf("a bar of %d from %v to %v m/s cannot be drawn", b.Count, b.Lower, b.Upper)
		}
		before = b.Upper
	}
	return f.Classes.check()
}

const histogramHeight = 80 * mm

// fit chooses the axes and places the letters.
func (f *histogram) fit() {
	f.width, f.height = paperWidth(f.Width), histogramHeight
	if f.Height > 0 {
		f.height = min(max(vg.Length(f.Height)*metre, leastHeight), widest)
	}
	f.height = max(f.height, f.strip(letterRows)+leastFrame+axisHeight+2*margin)
	f.fitVelocity()
	f.fitCount()
	p := f.frame()
	f.clearCorner(p)
	f.letters = f.placeLetters(p)
	f.values = f.placeValues(p)
}

// fitVelocity chooses the velocity axis: over all bars, and on to a bound that
// is not far.
func (f *histogram) fitVelocity() {
	from, to := f.bars[0].Lower, f.bars[len(f.bars)-1].Upper
	for _, b := range f.Classes.sorted() {
		if b.Value < from && b.Value > from/1.4 {
			from = b.Value
			break
		}
	}
	for _, b := range slices.Backward(f.Classes.sorted()) {
		if b.Value > to && b.Value < to*1.4 {
			to = b.Value
			break
		}
	}
	unit := f.Units.velocity()
	f.x = logarithmic("Average shear-wave velocity ("+unit.Name+")", from/1.08, to*1.08, unit.Factor)
}

// fitCount chooses the axis of the counts, which are whole.
func (f *histogram) fitCount() {
	highest := 1
	for _, b := range f.bars {
		highest = max(highest, b.Count)
	}
	what := "profiles"
	if f.What != "" {
		what = clean(f.What)
	}
	end := 1.08 * float64(highest)
	room := f.height - axisHeight - f.strip(letterRows) - 2*margin
	f.y = linear("Number of "+what, end, 1, room, max(25, room/vg.Length(end)), true)
	f.y.ticks = slices.DeleteFunc(f.y.ticks, func(t tick) bool { return math.Abs(t.value-math.Round(t.value)) > 1e-6 })
}

// rows is how many rows the letters take.
func (f *histogram) rows() int {
	rows := 1
	for _, l := range f.letters {
		rows = max(rows, l.row+1)
	}
	return rows
}

// strip returns the height of what stands over the frame: the values of the
// bounds, and rows of letters.
func (f *histogram) strip(rows int) vg.Length {
	if len(f.Classes.Bounds) == 0 {
		return gap
	}
	return longTick + 2 + small.feed() + 2 + strong.feed()*vg.Length(rows)
}

// frame returns the plane of the bars on paper.
func (f *histogram) frame() *plane {
	p := &plane{x: f.x, y: f.y}
	p.Min = vg.Point{X: margin + f.y.axisWidth(), Y: margin + axisHeight}
	p.Max = vg.Point{X: f.width - margin - rightRoom, Y: f.height - margin - f.strip(f.rows())}
	return p
}

// clearCorner takes the number off a tick of the velocity axis that would
// touch the 0 of the counts.
func (f *histogram) clearCorner(p *plane) {
	for i := range f.x.ticks {
		t := &f.x.ticks[i]
		if t.label != "" && p.X(f.x.fraction(t.value*f.x.unit))-plain.width(t.label)/2 < p.Min.X-longTick {
			t.label = ""
		}
	}
}

// placeValues puts the value of each bound in the frame over it; none if
// there is no room for all, lest a value be read at its neighbour.
func (f *histogram) placeValues(p *plane) []placed {
	var list []placed
	for _, b := range f.Classes.sorted() {
		v := newPlaced(small, f.Units.velocityNumber(b.Value), p.X(f.x.fraction(b.Value)), 0)
		if v.mid <= p.Min.X || v.mid >= p.Max.X {
			continue
		}
		if !v.clear(list) {
			return nil
		}
		list = append(list, v)
	}
	return list
}

// placeLetters puts the letter of each class over its middle on the axis.
func (f *histogram) placeLetters(p *plane) []placed {
	var list []placed
	for _, iv := range f.Classes.intervals(f.x.from*f.x.unit, f.x.to*f.x.unit) {
		x0, x1 := p.X(f.x.fraction(iv.from)), p.X(f.x.fraction(iv.to))
		for row := range letterRows {
			l := newPlaced(strong, strong.fit(iv.class, p.Max.X-p.Min.X), (x0+x1)/2, row)
			inside := l.mid-l.half >= p.Min.X-letterBeyond && l.mid+l.half <= p.Max.X+letterBeyond
			if inside && x1-x0 >= narrowClass && l.clear(list) {
				list = append(list, l)
				break
			}
		}
	}
	return list
}

// draw draws the figure from the back to the front.
func (f *histogram) draw() *report.Picture {
	s := newSheet(f.width, f.height)
	p := f.frame()
	p.Canvas.Canvas = s.Canvas.Canvas
	f.drawBars(&s, p)
	f.drawBounds(&s, p)
	s.outline(frameLine, p.Rectangle)
	s.drawX(p)
	s.drawY(p)
	return s.picture
}

// drawBars draws the bars that are not empty.
func (f *histogram) drawBars(s *sheet, p *plane) {
	for _, b := range f.bars {
		if b.Count == 0 {
			continue
		}
		r := vg.Rectangle{Min: p.at(b.Lower, 0), Max: p.at(b.Upper, float64(b.Count))}
		s.rectangle(paleBlue, r.Min.X, r.Min.Y, r.Max.X, r.Max.Y)
		s.outline(binLine, r)
	}
}

// histogramBound is a bound over bars, which it must stand out from.
var histogramBound = draw.LineStyle{Color: vermilion, Width: 0.9, Dashes: []vg.Length{4, 2}}

// drawBounds draws the bounds up the frame with their values above it, and
// the letters of the classes between them.
func (f *histogram) drawBounds(s *sheet, p *plane) {
	for _, b := range f.Classes.sorted() {
		if x := p.X(f.x.fraction(b.Value)); x > p.Min.X && x < p.Max.X {
			s.StrokeLine2(histogramBound, x, p.Min.Y, x, p.Max.Y)
			s.StrokeLine2(frameLine, x, p.Max.Y, x, p.Max.Y+longTick)
		}
	}
	for _, v := range f.values {
		s.write(small, v.mid, p.Max.Y+longTick+2, draw.XCenter, v.text)
	}
	base := p.Max.Y + longTick + 2 + small.feed() + 2
	for _, l := range f.letters {
		s.write(strong, l.mid, base+strong.feed()*vg.Length(l.row), draw.XCenter, l.text)
	}
}

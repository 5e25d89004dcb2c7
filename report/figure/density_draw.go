package figure

import (
	"math"
	"slices"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// What the velocity axis of a Density figure shows.
const (
	reach     = 3.1   // sigmas of the lognormal density to either side of its median
	outermost = 0.001 // of what is in bins may be left out at either end
	leastSpan = 1.1   // the axis goes farther from the median than by this factor
	nextBound = 1.25  // the axis goes on to a bound that is no farther than this
	beyond    = 1.03  // from the last of all that to the end of the axis
)

// fitVelocity chooses the velocity axis and the peak of the densities.
func (f *density) fitVelocity() {
	f.peak = f.bins.highest()
	q := f.Quantiles
	from, to := min(q.Low, q.Median/leastSpan), max(q.High, q.Median*leastSpan)
	if l := f.Lognormal; l != (Lognormal{}) {
		f.peak = max(f.peak, l.density(l.Median))
		from, to = min(from, l.Median*math.Exp(-reach*l.SigmaLn)), max(to, l.Median*math.Exp(reach*l.SigmaLn))
	}
	if len(f.bins) > 0 {
		from, to = min(from, f.bins.quantile(outermost)), max(to, f.bins.quantile(1-outermost))
	}
	bounds := f.Classes.sorted()
	for _, b := range bounds {
		if b.Value > to {
			if b.Value < to*nextBound {
				to = b.Value
			}
			break
		}
	}
	for _, b := range slices.Backward(bounds) {
		if b.Value < from {
			if b.Value > from/nextBound {
				from = b.Value
			}
			break
		}
	}
	f.x = f.newAxis(from/beyond, to*beyond)
}

// newAxis returns the velocity axis between two velocities in m/s: with
// ticks at even steps where it is short.
func (f *density) newAxis(from, to float64) *axis {
	const short, spacing = 6, 42
	unit := f.Units.velocity()
	a := logarithmic("Average shear-wave velocity ("+unit.Name+")", from, to, unit.Factor)
	if to/from > short {
		return a
	}
	a.ticks = nil
	step, parts := niceStep((a.to - a.from) * spacing / float64(paperWidth(f.Width)))
	minor := step / float64(parts)
	digits := max(0, -int(math.Floor(math.Log10(step)+1e-9)))
	for i := int(math.Ceil(a.from / minor)); minor*float64(i) <= a.to; i++ {
		t := tick{value: minor * float64(i)}
		if i%parts == 0 {
			t.label = strconv.FormatFloat(t.value, 'f', digits, 64)
		}
		a.ticks = append(a.ticks, t)
	}
	return a
}

// Lengths of a Density figure.
const (
	densityHeight = 90 * mm
	leastHeight   = 60 * mm
	leastFrame    = 70 // of the frame
	rangeRoom     = 15 // in the frame below the density
	headRoom      = 5  // in the frame above the density
	rightRoom     = 12 // for half a tick's label
)

// fitPaper fills the legend and the cells and chooses the height.
func (f *density) fitPaper() {
	f.width = paperWidth(f.Width)
	left, right := f.sides()
	f.legend = newLegend(f.meanings(), right-left)
	f.classes = f.partition()
	f.cells = newCells(f.classes)
	f.fitCells(left, right-left)
	f.height = densityHeight
	if f.Height > 0 {
		f.height = min(max(vg.Length(f.Height)*metre, leastHeight), widest)
	}
	f.height = max(f.height, f.strip()+leastFrame+axisHeight+2*margin)
}

// sides returns the left and the right edge of the frame.
func (f *density) sides() (left, right vg.Length) {
	return margin + titles.feed() + gap, f.width - margin - rightRoom
}

// strip returns the height of what stands over the frame.
func (f *density) strip() vg.Length {
	h := f.legend.height() + gap
	if len(f.cells) > 0 {
		h += valueRow + 2 + cellHeight + fanHeight
	}
	return h
}

// The lines of a Density figure.
var (
	curveLine  = draw.LineStyle{Color: blue, Width: 1.6}
	binLine    = draw.LineStyle{Color: darkGrey, Width: 0.7}
	rangeLine  = draw.LineStyle{Color: black, Width: 1.4}
	medianMark = draw.LineStyle{Color: black, Width: 0.9, Dashes: []vg.Length{3, 2}}
)

// meanings returns the entries of the legend.
func (f *density) meanings() []meaning {
	var list []meaning
	if len(f.bins) > 0 {
		list = append(list, meaning{"averages drawn", sampleLen / 2, func(s *sheet, x, y vg.Length) {
			s.rectangle(paleBlue, x, y-4, x+sampleLen/2, y+4)
			s.outline(binLine, vg.Rectangle{Min: vg.Point{X: x, Y: y - 4}, Max: vg.Point{X: x + sampleLen/2, Y: y + 4}})
		}})
	}
	if f.Lognormal != (Lognormal{}) {
		sigma := strconv.FormatFloat(f.Lognormal.SigmaLn, 'g', 3, 64)
		list = append(list, meaning{"lognormal, σ of ln V = " + sigma, sampleLen, func(s *sheet, x, y vg.Length) {
			s.StrokeLine2(curveLine, x, y, x+sampleLen, y)
		}})
	}
	unit := " " + f.Units.velocity().Name
	q := f.Quantiles
	list = append(list,
		meaning{"median " + f.Units.velocityNumber(q.Median) + unit, 7, func(s *sheet, x, y vg.Length) {
			s.dot(black, vg.Point{X: x + 3.5, Y: y})
		}},
		meaning{"16–84 %: " + f.Units.velocityNumber(q.Low) + " to " + f.Units.velocityNumber(q.High) + unit, sampleLen, func(s *sheet, x, y vg.Length) {
			s.whisker(x, x+sampleLen, y)
		}})
	if code := clean(f.Classes.Code); code != "" {
		list = append(list, meaning{text: "classes of " + code})
	}
	return list
}

// whisker draws a range between two caps.
func (s *sheet) whisker(x0, x1, y vg.Length) {
	const cap = 3
	s.StrokeLine2(rangeLine, x0, y, x1, y)
	for _, x := range []vg.Length{x0, x1} {
		s.StrokeLine2(rangeLine, x, y-cap, x, y+cap)
	}
}

// draw draws the figure from the back to the front.
func (f *density) draw() *report.Picture {
	s := newSheet(f.width, f.height)
	p := &plane{x: f.x}
	p.Canvas.Canvas = s.Canvas.Canvas
	left, right := f.sides()
	p.Min = vg.Point{X: left, Y: margin + axisHeight}
	p.Max = vg.Point{X: right, Y: f.height - margin - f.strip()}
	f.shade(&s, p)
	f.drawBounds(&s, p)
	f.drawDensities(&s, p)
	f.drawRange(&s, p)
	s.outline(frameLine, p.Rectangle)
	s.drawX(p)
	s.writeUp(titles, left-gap, p.Center().Y, plain.fit("Density (areas are chances)", p.Max.Y-p.Min.Y))
	if len(f.cells) > 0 {
		f.drawCells(&s, p, p.Max.Y+fanHeight)
	}
	f.legend.draw(&s, left, f.height-margin)
	return s.picture
}

// y returns where a density lies.
func (f *density) y(p *plane, density float64) vg.Length {
	base := p.Min.Y + rangeRoom
	if f.peak == 0 {
		return base
	}
	return base + vg.Length(density/f.peak)*(p.Max.Y-headRoom-base)
}

// shade fills the area under the density, class by class, that of the class
// of the median darker.
func (f *density) shade(s *sheet, p *plane) {
	from, to := f.x.from*f.x.unit, f.x.to*f.x.unit
	for _, c := range f.classes {
		colour := paleBlue
		if c.own && len(f.classes) > 1 {
			colour = skyBlue
		}
		if a, b := max(from, c.from), min(to, c.to); a < b {
			f.fill(s, p, colour, f.outline(p, a, b))
		}
	}
}

// outline returns the upper edge of the density between two velocities in
// m/s: of the histogram, or else of the lognormal density.
func (f *density) outline(p *plane, from, to float64) []vg.Point {
	if len(f.bins) > 0 {
		return f.steps(p, from, to)
	}
	return f.curve(p, from, to)
}

// steps returns the upper edge of the histogram between two velocities.
func (f *density) steps(p *plane, from, to float64) []vg.Point {
	var line []vg.Point
	base, end := f.y(p, 0), vg.Length(math.Inf(-1))
	down := func() {
		if len(line) > 0 {
			line = append(line, vg.Point{X: end, Y: base})
		}
	}
	for _, n := range f.bins {
		if n.Part == 0 || n.Upper <= from || n.Lower >= to {
			continue
		}
		x0, x1, y := p.X(f.x.fraction(max(n.Lower, from))), p.X(f.x.fraction(min(n.Upper, to))), f.y(p, n.height())
		if x0 > end+1e-3 {
			down()
			line = append(line, vg.Point{X: x0, Y: base})
		}
		line = append(line, vg.Point{X: x0, Y: y}, vg.Point{X: x1, Y: y})
		end = x1
	}
	down()
	return line
}

// curve returns the lognormal density between two velocities, in steps of a
// tenth of a sigma.
func (f *density) curve(p *plane, from, to float64) []vg.Point {
	l := f.Lognormal
	if l.SigmaLn == 0 {
		return nil
	}
	const steps, sigmas = 10, 4
	at := func(v float64) vg.Point { return vg.Point{X: p.X(f.x.fraction(v)), Y: f.y(p, l.density(v))} }
	line := []vg.Point{at(from)}
	for i := -steps * sigmas; i <= steps*sigmas; i++ {
		if v := l.Median * math.Exp(float64(i)/steps*l.SigmaLn); v > from && v < to {
			line = append(line, at(v))
		}
	}
	return append(line, at(to))
}

// fill fills what lies between an upper edge and the base line.
func (f *density) fill(s *sheet, p *plane, colour ink, edge []vg.Point) {
	if len(edge) == 0 {
		return
	}
	base := f.y(p, 0)
	var path vg.Path
	path.Move(vg.Point{X: edge[0].X, Y: base})
	for _, pt := range edge {
		path.Line(pt)
	}
	path.Line(vg.Point{X: edge[len(edge)-1].X, Y: base})
	path.Close()
	s.SetColor(colour)
	s.Canvas.Fill(path)
}

// drawBounds draws the bounds of the classes down the frame.
func (f *density) drawBounds(s *sheet, p *plane) {
	for _, b := range f.Classes.sorted() {
		if x := p.X(f.x.fraction(b.Value)); x > p.Min.X && x < p.Max.X {
			s.StrokeLine2(boundLine, x, p.Min.Y, x, p.Max.Y)
		}
	}
}

// drawDensities draws the edge of the histogram and the lognormal density. A
// density without a sigma is a line that goes to the top.
func (f *density) drawDensities(s *sheet, p *plane) {
	from, to := f.x.from*f.x.unit, f.x.to*f.x.unit
	base := f.y(p, 0)
	s.StrokeLine2(binLine, p.Min.X, base, p.Max.X, base)
	if len(f.bins) > 0 {
		s.StrokeLines(binLine, f.steps(p, from, to))
	}
	switch l := f.Lognormal; {
	case l == (Lognormal{}):
	case l.SigmaLn == 0:
		x := p.X(f.x.fraction(l.Median))
		s.StrokeLine2(curveLine, x, base, x, p.Max.Y)
	default:
		s.StrokeLines(curveLine, f.curve(p, from, to))
	}
}

// drawRange marks the median and the range from 16 to 84 % below the density.
func (f *density) drawRange(s *sheet, p *plane) {
	q := f.Quantiles
	x, y := p.X(f.x.fraction(q.Median)), p.Min.Y+rangeRoom/2
	d := f.Lognormal.density(q.Median)
	if len(f.bins) > 0 {
		d = max(d, f.bins.density(q.Median))
	}
	if top := f.y(p, d); top > p.Min.Y+rangeRoom {
		s.StrokeLine2(medianMark, x, y, x, top)
	}
	s.whisker(p.X(f.x.fraction(q.Low)), p.X(f.x.fraction(q.High)), y)
	s.dot(black, vg.Point{X: x, Y: y})
}

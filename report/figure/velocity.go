package figure

import (
	"fmt"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// VelocityOptions is what a Velocity figure shows beside its lines.
type VelocityOptions struct {
	Units     Units
	Width     float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
	Height    float64 // m on paper, at least; 0 is 0.11. The figure grows where its key needs it
	Depth     float64 // m below ground level at which the depth axis ends, at least 0.1; 0 shows every layer
	Datum     float64 // m below ground level from which the velocity is averaged
	Thickness float64 // m over which it is averaged; 0 marks no averaging depth
	Classes   Classes // the bounds to show behind; none if zero

	// Band is what the profiles together say of the velocity at each depth, from
	// the top down; none if nil. It lies behind them, its median before them.
	Band []BandPoint
}

// Velocity draws shear-wave velocity against depth for one or several
// profiles. Depth grows downward. Over the frame stand the letters of the
// classes, beside it the depths that matter and the key. The error names
// the layer, the bound, the depth or the point of the band that cannot be
// drawn.
func Velocity(lines []Line, o VelocityOptions) (*report.Picture, error) {
	if err := o.check(lines); err != nil {
		return nil, fmt.Errorf("velocity figure: %w", err)
	}
	f := velocity{VelocityOptions: o, lines: lines}
	f.fitDepth()
	f.fitVelocity()
	f.fitPaper()
	return f.draw(), nil
}

// check refuses what cannot be drawn.
func (o *VelocityOptions) check(lines []Line) error {
	if len(lines) == 0 {
		return fmt.Errorf("no profile to draw")
	}
	for i := range lines {
		if err := lines[i].check(); err != nil {
			return err
		}
		if r := lines[i].Reached; !(r >= 0 && r <= deepest) {
			return fmt.Errorf("the depth of %v m that profile %q reached cannot be drawn", r, clean(lines[i].Name))
		}
	}
	for _, d := range []float64{o.Depth, o.Datum, o.Thickness} {
		if !(d >= 0 && d <= deepest) {
			return fmt.Errorf("a depth of %v m cannot be drawn", d)
		}
	}
	if o.Depth > 0 && o.Depth < shallowest {
		return fmt.Errorf("a depth axis of %v m cannot be drawn", o.Depth)
	}
	if err := checkBand(o.Band); err != nil {
		return err
	}
	return o.Classes.check()
}

// velocity is a Velocity figure in the making.
type velocity struct {
	VelocityOptions
	lines []Line

	width, height vg.Length
	x, y          *axis
	bottom        float64 // m, where the depth axis ends
	steps         []steps
	band          [][]bandStep // its parts without a gap
	column        column
	letters       []placed // over the frame
	letterRows    int
	values        []placed // between the frame and the letters
}

// The frame's share of a paper of the usual size, to choose ticks by.
const (
	usualHeight = 110 * mm
	depthRoom   = usualHeight - axisHeight - 20
)

// narrowColumn is the least that the column beside the frame may take.
const narrowColumn = 36 * mm

// fitDepth chooses the depth axis: a little deeper than everything, a good
// deal deeper than the top of a half-space, and not less than 1 m.
func (f *velocity) fitDepth() {
	end := f.Depth
	if end == 0 {
		end = 1.04 * max(1, f.lowest())
	}
	title := "Depth below ground level (" + f.Units.length().Name + ")"
	f.y = linear(title, end, f.Units.length().Factor, depthRoom, 26, f.Depth > 0)
	f.y.down = true
	f.bottom = f.y.to * f.y.unit
	for i := range f.lines {
		f.steps = append(f.steps, f.lines[i].steps(f.bottom))
	}
	f.band = bandRuns(f.Band, f.bottom)
}

// lowest returns the greatest depth in m that the figure must show. A ground
// that is nothing but a half-space is shown to 30 m.
func (f *velocity) lowest() float64 {
	z := max(f.averagingDepth(), f.Datum)
	for i := range f.lines {
		l := &f.lines[i]
		z = max(z, l.Reached)
		switch last := l.Layers[len(l.Layers)-1]; {
		case !last.HalfSpace():
			z = max(z, last.Bottom)
		case last.Top > 0:
			z = max(z, 1.1*last.Top)
		}
	}
	if n := len(f.Band); n > 0 {
		z = max(z, f.Band[n-1].Depth)
	}
	if z == 0 {
		return 30
	}
	return z
}

// averagingDepth returns the depth in m below ground level down to which
// the velocity is averaged.
func (f *velocity) averagingDepth() float64 {
	if f.Thickness == 0 {
		return 0
	}
	return f.Datum + f.Thickness
}

// fitVelocity chooses the velocity axis: somewhat faster than everything
// that is drawn, and as far as the next bound if that is not much farther.
func (f *velocity) fitVelocity() {
	v := 1.0
	for i, s := range f.steps {
		for _, line := range append(s.measured[:len(s.measured):len(s.measured)], s.extended...) {
			for _, p := range line {
				v = max(v, p.Velocity)
			}
		}
		for _, p := range f.lines[i].Average {
			if p.finite() && p.Depth <= f.bottom {
				v = max(v, p.Velocity)
			}
		}
	}
	for _, run := range f.band {
		for _, st := range run {
			v = max(v, st.High)
		}
	}
	end := 1.08 * v
	for _, iv := range f.Classes.intervals(v, 1.3*v) {
		if iv.from > v {
			end = max(end, 1.1*iv.from)
			break
		}
	}
	title := "Shear-wave velocity Vs (" + f.Units.velocity().Name + ")"
	room := paperWidth(f.Width) * 0.6
	f.x = linear(title, end, f.Units.velocity().Factor, room, 40, false)
}

// fitPaper fills the column beside the frame, staggers the letters over it
// and chooses the height.
func (f *velocity) fitPaper() {
	f.width = paperWidth(f.Width)
	f.column = f.newColumn(max(0.3*f.width, narrowColumn))
	f.letters = f.Classes.placeLetters(f.frame())
	f.values = f.Classes.placeValues(f.frame(), f.Units)
	for _, l := range f.letters {
		f.letterRows = max(f.letterRows, l.row+1)
	}
	f.height = usualHeight
	if f.Height > 0 {
		f.height = min(vg.Length(f.Height)*metre, widest)
	}
	f.height = max(f.height, f.column.height()+axisHeight+f.strip()+2*margin)
}

// strip returns the height of what stands over the frame.
func (f *velocity) strip() vg.Length {
	return max(6, f.letterBase()+strong.feed()*vg.Length(f.letterRows))
}

// letterBase returns how far over the frame the lowest letters stand.
func (f *velocity) letterBase() vg.Length {
	switch {
	case len(f.letters)+len(f.values) == 0:
		return 0
	case len(f.values) == 0:
		return longTick + 3
	}
	return longTick + 2 + small.feed() + 2
}

// frame returns the plane of the data on paper.
func (f *velocity) frame() *plane {
	p := &plane{x: f.x, y: f.y}
	p.Min = vg.Point{X: margin + f.y.axisWidth(), Y: margin + axisHeight}
	p.Max = vg.Point{X: f.width - margin - f.column.width, Y: f.height - margin - f.strip()}
	return p
}

// draw draws what the fits have chosen, from the back to the front.
func (f *velocity) draw() *report.Picture {
	s := newSheet(f.width, f.height)
	p := f.frame()
	p.Canvas.Canvas = s.Canvas.Canvas
	s.drawBand(p, f.band)
	f.drawBounds(&s, p)
	f.drawDepths(&s, p)
	s.outline(frameLine, p.Rectangle)
	s.drawX(p)
	s.drawY(p)
	for i := range f.lines {
		s.drawLine(p, &f.lines[i], f.steps[i], lookOf(i, len(f.lines)))
	}
	s.drawMedian(p, f.band)
	f.column.draw(&s, p)
	return s.picture
}

// drawBounds draws the bounds of the classes down the frame, each with a
// tick above it, and the letters between the ticks.
func (f *velocity) drawBounds(s *sheet, p *plane) {
	for _, b := range f.Classes.sorted() {
		if b.Value < f.x.to*f.x.unit {
			x := p.X(f.x.fraction(b.Value))
			s.StrokeLine2(boundLine, x, p.Min.Y, x, p.Max.Y+longTick)
		}
	}
	for _, v := range f.values {
		s.write(small, v.mid, p.Max.Y+longTick+2, draw.XCenter, v.text)
	}
	base := p.Max.Y + f.letterBase()
	for _, l := range f.letters {
		s.write(strong, l.mid, base+strong.feed()*vg.Length(l.row), draw.XCenter, l.text)
	}
	if len(f.letters) > 0 {
		s.write(plain, p.Max.X+columnGap, base, draw.XLeft, f.column.code)
	}
}

// drawDepths draws the depths that matter across the frame.
func (f *velocity) drawDepths(s *sheet, p *plane) {
	for _, d := range f.depths() {
		y := p.Y(f.y.fraction(d.depth))
		s.StrokeLine2(boundLine, p.Min.X, y, p.Max.X, y)
	}
}

// depth is a depth that matters, with its label.
type depth struct {
	depth float64 // m below ground level
	label string
}

// depths returns the depths that the figure marks: the datum, the averaging
// depth, and the depth reached where there is one profile.
func (f *velocity) depths() []depth {
	var list []depth
	if f.Datum > 0 {
		list = append(list, depth{f.Datum, "datum " + f.Units.lengthText(f.Datum)})
	}
	if f.Thickness > 0 {
		label := "averaging depth " + f.Units.lengthText(f.Thickness)
		if f.Datum > 0 {
			label += " below datum"
		}
		list = append(list, depth{f.averagingDepth(), label})
	}
	if r := f.lines[0].Reached; len(f.lines) == 1 && r > 0 {
		list = append(list, depth{r, "depth reached " + f.Units.lengthText(r)})
	}
	inside := list[:0]
	for _, d := range list {
		if d.depth <= f.bottom {
			inside = append(inside, d)
		}
	}
	return inside
}

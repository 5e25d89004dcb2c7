package figure

import (
	"fmt"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// Share is one layer of a Travel figure.
type Share struct {
	Top, Bottom float64 // m below ground level, of the part that is averaged
	Time        float64 // s, > 0; its travel time
}

// TravelOptions is how a Travel figure looks.
type TravelOptions struct {
	Units Units
	Width float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
}

// The bars stand this far apart where there is room, and fill at most this
// height.
const (
	barPitch   = 13
	mostOfBars = 190 * mm
)

// Travel draws for each layer, from the top down, its share of the whole
// travel time as a bar, and across the bar its share of the whole thickness:
// a bar that goes beyond it is a layer slower than the average. The error
// names the layer that cannot be drawn.
func Travel(shares []Share, o TravelOptions) (*report.Picture, error) {
	f := travel{shares: shares, units: o.Units, width: paperWidth(o.Width)}
	if err := f.sum(); err != nil {
		return nil, fmt.Errorf("travel time figure: %w", err)
	}
	return f.draw(), nil
}

// travel is a Travel figure in the making.
type travel struct {
	shares          []Share
	units           Units
	width           vg.Length
	time, thickness float64 // of all layers
}

// sum adds up the layers and refuses what cannot be drawn.
func (f *travel) sum() error {
	if len(f.shares) == 0 {
		return fmt.Errorf("no layer to draw")
	}
	for i, y := range f.shares {
		depths := y.Top >= 0 && y.Bottom > y.Top && y.Bottom <= deepest
		if !depths || !(y.Time > 0 && y.Time <= deepest) {
			return fmt.Errorf("layer %d from %v m to %v m with %v s cannot be drawn", i+1, y.Top, y.Bottom, y.Time)
		}
		f.time += y.Time
		f.thickness += y.Bottom - y.Top
	}
	return nil
}

// pitch returns the distance from bar to bar.
func (f *travel) pitch() vg.Length {
	return min(barPitch, mostOfBars/vg.Length(len(f.shares)))
}

// draw draws the bars from the top down, the axis below them and the key
// above.
func (f *travel) draw() *report.Picture {
	bars := f.pitch() * vg.Length(len(f.shares))
	keyHeight := plain.feed() + gap
	s := newSheet(f.width, 2*margin+keyHeight+bars+2*gap+axisHeight)
	p := f.frame(s)
	p.Max.Y -= keyHeight
	f.drawKey(&s, p)
	f.drawBars(&s, p)
	s.StrokeLine2(frameLine, p.Min.X, p.Min.Y, p.Max.X, p.Min.Y)
	s.StrokeLine2(frameLine, p.Min.X, p.Min.Y, p.Min.X, p.Max.Y)
	s.drawX(p)
	return s.picture
}

// frame returns the plane of the bars.
func (f *travel) frame(s sheet) *plane {
	names := vg.Length(0)
	most := 0.0
	for _, y := range f.shares {
		names = max(names, plain.width(f.name(y)))
		most = max(most, y.Time/f.time, (y.Bottom-y.Top)/f.thickness)
	}
	p := &plane{Canvas: s.Canvas}
	p.Min = vg.Point{X: margin + names + gap, Y: margin + axisHeight}
	p.Max = vg.Point{X: p.Max.X - margin - plain.width("100.0 %") - 2*gap, Y: p.Max.Y - margin}
	p.x = linear("Share (%)", 100*most, 1, p.Max.X-p.Min.X, 40, false)
	return p
}

// name returns the depths of a layer as text.
func (f *travel) name(y Share) string {
	unit := f.units.length()
	number := func(metres float64) string {
		return strconv.FormatFloat(metres/unit.Factor, 'f', 1, 64)
	}
	return number(y.Top) + " – " + number(y.Bottom) + " " + unit.Name
}

// drawBars draws a bar for each layer, its depths to its left and its share
// of the time to its right. Where the bars are too narrow for that, only
// every second, third and so on is written.
func (f *travel) drawBars(s *sheet, p *plane) {
	pitch := f.pitch()
	every := int(plain.feed()/pitch) + 1
	if pitch >= plain.feed() {
		every = 1
	}
	for i, y := range f.shares {
		middle := p.Max.Y - gap - pitch*(vg.Length(i)+0.5)
		half := pitch * 0.36
		time, thickness := 100*y.Time/f.time, 100*(y.Bottom-y.Top)/f.thickness
		end := p.X(p.x.fraction(time))
		s.rectangle(skyBlue, p.Min.X, middle-half, end, middle+half)
		x := p.X(p.x.fraction(thickness))
		s.StrokeLine2(thicknessLine, x, middle-half-1, x, middle+half+1)
		if i%every == 0 {
			base := middle - plain.size*capHeight/2
			s.write(plain, p.Min.X-gap, base, draw.XRight, f.name(y))
			s.write(plain, f.width-margin, base, draw.XRight, strconv.FormatFloat(time, 'f', 1, 64)+" %")
		}
	}
}

// thicknessLine marks a share of the thickness.
var thicknessLine = draw.LineStyle{Color: black, Width: 1.5}

// drawKey writes over the frame what bars and marks are.
func (f *travel) drawKey(s *sheet, p *plane) {
	base := p.Max.Y + gap + 2
	middle := base + plain.size*capHeight/2
	x := p.Min.X
	s.rectangle(skyBlue, x, middle-4, x+sampleLen/2, middle+4)
	x += sampleLen/2 + gap
	text := "share of the travel time"
	s.write(plain, x, base, draw.XLeft, text)
	x += plain.width(text) + 4*gap
	s.StrokeLine2(thicknessLine, x, middle-5, x, middle+5)
	text = "share of the thickness"
	s.write(plain, x+gap, base, draw.XLeft, text)
	x += gap + plain.width(text)
	if heading := "time"; f.width-margin-plain.width(heading) > x+gap {
		s.write(plain, f.width-margin, base, draw.XRight, heading)
	}
}

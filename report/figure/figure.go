// Package figure draws the report's figures as report.Pictures: velocity
// against depth, one average against the bounds of several codes, the travel
// time of each layer, how likely each average is, and what each layer has to
// do with it. It takes plain data in SI and knows no code and no site; what
// the numbers mean is its caller's to say.
//
// The drawing is done with the vector graphics of gonum.org/v1/plot, whose
// canvas is here one that records marks. Its axes are not used: package plot
// registers every one of its output formats when a program starts, which
// costs each command some milliseconds.
//
// Colours are those of Okabe and Ito (2008), Color universal design, told
// apart by people with any kind of colour vision; wherever colour tells two
// things apart a dash, a width or a shape does too, so that a grey print
// says the same. The same input makes the same marks.
package figure

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/profile"
	"shearbook/report"
)

// Units chooses the units of the axes and of the numbers in a figure.
type Units uint8

// The systems of units.
const (
	SI Units = iota // m and m/s
	US              // ft and ft/s
)

// length returns the unit of depths.
func (u Units) length() profile.Unit {
	switch u {
	case SI:
		return profile.Metre
	case US:
		return profile.FootUnit
	default:
		panic(fmt.Sprintf("figure: unknown system of units %d", u))
	}
}

// velocity returns the unit of velocities.
func (u Units) velocity() profile.Unit {
	switch u {
	case SI:
		return profile.MetrePerSecond
	case US:
		return profile.FootPerSecond
	default:
		panic(fmt.Sprintf("figure: unknown system of units %d", u))
	}
}

// lengthText returns a length in m as text with its unit, to a tenth.
func (u Units) lengthText(metres float64) string {
	unit := u.length()
	v := math.Round(metres/unit.Factor*10) / 10
	return strconv.FormatFloat(v, 'f', -1, 64) + noBreak + unit.Name
}

// noBreak is a space at which no line is broken; it is written as a space.
const noBreak = "\u00a0"

// velocityNumber returns a velocity in m/s as a number to four digits,
// without its unit.
func (u Units) velocityNumber(metresPerSecond float64) string {
	v := metresPerSecond / u.velocity().Factor
	v, _ = strconv.ParseFloat(strconv.FormatFloat(v, 'g', 4, 64), 64)
	return strconv.FormatFloat(v, 'f', -1, 64)
}

// ink is an opaque colour.
type ink struct{ r, g, b uint8 }

// RGBA makes ink a color.Color.
func (k ink) RGBA() (r, g, b, a uint32) {
	return uint32(k.r) * 0x101, uint32(k.g) * 0x101, uint32(k.b) * 0x101, 0xffff
}

// The colours of Okabe and Ito, without the yellow, which is too light for
// lines on paper, and the greys of what stands behind.
var (
	white         = ink{255, 255, 255}
	black         = ink{0, 0, 0}
	orange        = ink{230, 159, 0}
	skyBlue       = ink{86, 180, 233}
	bluishGreen   = ink{0, 158, 115}
	blue          = ink{0, 114, 178}
	vermilion     = ink{213, 94, 0}
	reddishPurple = ink{204, 121, 167}

	darkGrey  = ink{70, 70, 70}
	lightGrey = ink{165, 165, 165}
	paleBlue  = ink{213, 236, 250} // a quarter of skyBlue on white
)

// The lines that are not data.
var (
	frameLine = draw.LineStyle{Color: darkGrey, Width: 0.6}
	boundLine = draw.LineStyle{Color: lightGrey, Width: 0.6}
)

// Lengths in points.
const (
	mm        = vg.Millimeter
	metre     = 1000 * mm
	textWidth = 165 * mm // of the report's column
	narrowest = 100 * mm
	widest    = 400 * mm
	margin    = 2 // white around everything
	gap       = 5 // between a mark and the text that belongs to it
)

// paperWidth returns the width of a picture for an option in m.
func paperWidth(option float64) vg.Length {
	if !(option > 0) {
		return textWidth
	}
	return min(max(vg.Length(option)*metre, narrowest), widest)
}

// sheet is the paper of one figure.
type sheet struct {
	draw.Canvas
	picture *report.Picture
}

// newSheet returns an empty sheet of width by height points.
func newSheet(width, height vg.Length) sheet {
	c := newCanvas(width, height)
	return sheet{draw.NewCanvas(c, width, height), c.picture}
}

// write writes text on the base line y, with its left end, middle or right
// end at x.
func (s *sheet) write(l lettering, x, y vg.Length, align draw.XAlignment, text string) {
	if text == "" {
		return
	}
	face := l.face()
	if align != draw.XLeft {
		x += vg.Length(align) * face.Width(text)
	}
	s.SetColor(l.colour)
	s.FillString(face, vg.Point{X: x, Y: y}, strings.ReplaceAll(text, noBreak, " "))
}

// writeUp writes text that reads upward, its base line at x and its middle
// at y.
func (s *sheet) writeUp(l lettering, x, y vg.Length, text string) {
	s.Push()
	s.Translate(vg.Point{X: x, Y: y})
	s.Rotate(math.Pi / 2)
	s.write(l, 0, 0, draw.XCenter, text)
	s.Pop()
}

// rectangle fills a rectangle.
func (s *sheet) rectangle(fill ink, x0, y0, x1, y1 vg.Length) {
	s.SetColor(fill)
	r := vg.Rectangle{Min: vg.Point{X: x0, Y: y0}, Max: vg.Point{X: x1, Y: y1}}
	s.Canvas.Fill(r.Path())
}

// outline strokes a rectangle.
func (s *sheet) outline(line draw.LineStyle, r vg.Rectangle) {
	s.SetLineStyle(line)
	s.Stroke(r.Path())
}

// triangle fills a triangle.
func (s *sheet) triangle(fill ink, a, b, c vg.Point) {
	var p vg.Path
	p.Move(a)
	p.Line(b)
	p.Line(c)
	p.Close()
	s.SetColor(fill)
	s.Canvas.Fill(p)
}

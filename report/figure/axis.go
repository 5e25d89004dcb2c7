package figure

import (
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// The ticks stand outside the frame.
const (
	longTick  = 4
	shortTick = 2.5
)

// axis is one axis in the unit it is printed in.
type axis struct {
	title    string
	from, to float64
	unit     float64 // SI of one unit of the axis
	log      bool
	down     bool // grows downward
	ticks    []tick
}

// tick is a mark on an axis; one without a label is short.
type tick struct {
	value float64
	label string
}

// fraction returns where the SI value v lies: 0 at the left or lower end of
// the axis, 1 at the other.
func (a *axis) fraction(v float64) float64 {
	v /= a.unit
	f := 0.0
	if a.log {
		f = math.Log(v/a.from) / math.Log(a.to/a.from)
	} else {
		f = (v - a.from) / (a.to - a.from)
	}
	if a.down {
		return 1 - f
	}
	return f
}

// linear returns an axis from 0 to at least the SI value end, with as many
// labelled ticks as fit into room points at that spacing or more. Labels
// stand at 1, 2 or 5 times a power of ten, short ticks at a fifth or a
// quarter of that. If exact, it ends at end, otherwise at the next short
// tick.
func linear(title string, end, unit float64, room, spacing vg.Length, exact bool) *axis {
	end /= unit
	step, parts := niceStep(end * float64(spacing/room))
	minor := step / float64(parts)
	n := int(math.Ceil(end/minor - 1e-9))
	if !exact {
		end = minor * float64(n)
	}
	a := &axis{title: title, to: end, unit: unit}
	digits := max(0, -int(math.Floor(math.Log10(step)+1e-9)))
	for i := 0; i <= n; i++ {
		t := tick{value: minor * float64(i)}
		if t.value > end*(1+1e-9) {
			break
		}
		if i%parts == 0 {
			t.label = strconv.FormatFloat(t.value, 'f', digits, 64)
		}
		a.ticks = append(a.ticks, t)
	}
	return a
}

// niceStep returns the least of 1, 2 and 5 times a power of ten that is not
// below least, and into how many parts short ticks divide it.
func niceStep(least float64) (step float64, parts int) {
	power := math.Pow(10, math.Floor(math.Log10(least)))
	switch m := least / power; {
	case m <= 1+1e-9:
		return power, 5
	case m <= 2+1e-9:
		return 2 * power, 4
	case m <= 5+1e-9:
		return 5 * power, 5
	}
	return 10 * power, 5
}

// logarithmic returns an axis from the SI value start to end, both positive,
// with ticks at 1 to 9 times the powers of ten; those at 1, 2 and 5 are
// labelled, and at 3 and 7 too where the axis spans less than a decade and a
// half.
func logarithmic(title string, start, end, unit float64) *axis {
	a := &axis{title: title, from: start / unit, to: end / unit, unit: unit, log: true}
	wide := a.to/a.from > 32
	for power := math.Pow(10, math.Floor(math.Log10(a.from))); power <= a.to; power *= 10 {
		for m := 1; m <= 9; m++ {
			v := power * float64(m)
			if v < a.from*(1-1e-9) || v > a.to*(1+1e-9) {
				continue
			}
			t := tick{value: v}
			if m == 1 || m == 2 || m == 5 || !wide && (m == 3 || m == 7) {
				t.label = strconv.FormatFloat(v, 'f', -1, 64)
			}
			a.ticks = append(a.ticks, t)
		}
	}
	return a
}

// labelWidth returns the width of the widest tick label.
func (a *axis) labelWidth() vg.Length {
	w := vg.Length(0)
	for _, t := range a.ticks {
		if t.label != "" {
			w = max(w, plain.width(t.label))
		}
	}
	return w
}

// axisHeight is what a horizontal axis takes below the frame.
const axisHeight = longTick + 2 + 8*capHeight + gap + 8.5*lineFeed

// axisWidth returns what a vertical axis takes left of the frame.
func (a *axis) axisWidth() vg.Length {
	return longTick + 2 + a.labelWidth() + gap + titles.feed()
}

// plane is a frame with its two axes.
type plane struct {
	draw.Canvas // the frame
	x, y        *axis
}

// at returns the point of the SI values x and y.
func (p *plane) at(x, y float64) vg.Point {
	return vg.Point{X: p.X(p.x.fraction(x)), Y: p.Y(p.y.fraction(y))}
}

// drawX draws the horizontal axis below the frame. A label that would touch
// the one before it is left out.
func (s *sheet) drawX(p *plane) {
	end := vg.Length(math.Inf(-1))
	y := p.Min.Y - longTick - 2 - plain.size*capHeight
	for _, t := range p.x.ticks {
		x := p.X(p.x.fraction(t.value * p.x.unit))
		length := vg.Length(shortTick)
		if t.label != "" {
			length = longTick
			if half := plain.width(t.label) / 2; x-half > end+gap {
				s.write(plain, x, y, draw.XCenter, t.label)
				end = x + half
			}
		}
		s.StrokeLine2(frameLine, x, p.Min.Y, x, p.Min.Y-length)
	}
	s.write(titles, p.Center().X, y-gap-titles.size*0.9, draw.XCenter, p.x.title)
}

// drawY draws the vertical axis left of the frame.
func (s *sheet) drawY(p *plane) {
	x := p.Min.X - longTick - 2
	for _, t := range p.y.ticks {
		y := p.Y(p.y.fraction(t.value * p.y.unit))
		length := vg.Length(shortTick)
		if t.label != "" {
			length = longTick
			s.write(plain, x, y-plain.size*capHeight/2, draw.XRight, t.label)
		}
		s.StrokeLine2(frameLine, p.Min.X, y, p.Min.X-length, y)
	}
	s.writeUp(titles, x-p.y.labelWidth()-gap, p.Center().Y, p.y.title)
}

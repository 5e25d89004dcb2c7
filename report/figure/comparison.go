package figure

import (
	"fmt"
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// Strip is one code of a Comparison figure.
type Strip struct {
	Classes Classes
	Average float64 // m/s, > 0; the average that this code asks for
	Class   string  // the class the code gives; it may lie elsewhere than the average
}

// ComparisonOptions is how a Comparison figure looks.
type ComparisonOptions struct {
	Units Units
	Width float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
}

// Lengths of a strip, from its upper edge down.
const (
	markRoom   = 8  // for the mark of the average
	barHeight  = 15 // with the letters of the classes
	boundRoom  = 10 // for the values of the bounds
	stripSpace = 5  // to the next strip
	stripPitch = markRoom + barHeight + boundRoom + stripSpace
)

// Comparison draws, for each code, its bounds as a strip with the letters of
// the classes in it, marks the average on it, and writes the class and the
// average beside it. All strips share one logarithmic velocity axis, on
// which the soft classes have as much room as the stiff. The error names the
// bound or average that cannot be drawn.
func Comparison(strips []Strip, o ComparisonOptions) (*report.Picture, error) {
	if err := checkStrips(strips); err != nil {
		return nil, fmt.Errorf("comparison figure: %w", err)
	}
	f := comparison{strips: strips, units: o.Units, width: paperWidth(o.Width)}
	from, to := f.span()
	f.x = logarithmic("Average shear-wave velocity ("+o.Units.velocity().Name+")", from, to, o.Units.velocity().Factor)
	return f.draw(), nil
}

// checkStrips refuses what cannot be drawn.
func checkStrips(strips []Strip) error {
	if len(strips) == 0 {
		return fmt.Errorf("no code to draw")
	}
	for _, s := range strips {
		if !(s.Average > 0 && s.Average <= fastest) {
			return fmt.Errorf("an average of %v m/s cannot be drawn", s.Average)
		}
		if err := s.Classes.check(); err != nil {
			return err
		}
	}
	return nil
}

// comparison is a Comparison figure in the making.
type comparison struct {
	strips []Strip
	units  Units
	width  vg.Length
	x      *axis

	answers vg.Length // where the verdicts begin
}

// span returns the ends of the velocity axis in m/s: beyond every bound and
// average by a third of their value, and at least a decade apart.
func (f *comparison) span() (from, to float64) {
	from, to = math.Inf(1), 0
	for _, s := range f.strips {
		from, to = min(from, s.Average), max(to, s.Average)
		for _, b := range s.Classes.Bounds {
			from, to = min(from, b.Value), max(to, b.Value)
		}
	}
	beyond := max(4./3, math.Sqrt(10*from/to))
	return from / beyond, to * beyond
}

// draw draws the strips from the top down and the axis below them.
func (f *comparison) draw() *report.Picture {
	height := 2*margin + stripPitch*vg.Length(len(f.strips)) + axisHeight
	s := newSheet(f.width, height)
	p := f.frame(s)
	for i := range f.strips {
		f.drawStrip(&s, p, &f.strips[i], height-margin-stripPitch*vg.Length(i))
	}
	s.StrokeLine2(frameLine, p.Min.X, p.Min.Y, p.Max.X, p.Min.Y)
	s.drawX(p)
	return s.picture
}

// frame returns the plane of the strips: between the names of the codes and
// what is written about each.
func (f *comparison) frame(s sheet) *plane {
	p := &plane{Canvas: s.Canvas, x: f.x}
	p.Min.X = margin + gap + max(f.widest(f.name), 2*gap) // half a tick's label goes there
	f.answers = f.width - margin - gap - f.widest(f.average) - f.widest(f.verdict)
	p.Max.X = f.answers - 2*gap
	p.Min.Y = margin + axisHeight
	p.Max.Y -= margin
	return p
}

// widest returns the width of the widest of the strips' texts.
func (f *comparison) widest(text func(*Strip) string) vg.Length {
	w := vg.Length(0)
	for i := range f.strips {
		w = max(w, plain.width(text(&f.strips[i])))
	}
	return w
}

// name returns the name of the strip's code, shortened to its share of the
// width.
func (f *comparison) name(t *Strip) string { return plain.fit(clean(t.Classes.Code), f.width*0.28) }

// verdict returns the class that the strip's code gives.
func (f *comparison) verdict(t *Strip) string {
	if class := clean(t.Class); class != "" {
		return plain.fit("class "+class, f.width*0.14)
	}
	return ""
}

// average returns the average of the strip with its unit.
func (f *comparison) average(t *Strip) string {
	unit := f.units.velocity()
	v := t.Average / unit.Factor
	digits := 1
	if f.units == US {
		digits = 0
	}
	return strconv.FormatFloat(v, 'f', digits, 64) + " " + unit.Name
}

// drawStrip draws one strip below top.
func (f *comparison) drawStrip(s *sheet, p *plane, t *Strip, top vg.Length) {
	bar := p.Rectangle
	bar.Max.Y = top - markRoom
	bar.Min.Y = bar.Max.Y - barHeight
	base := bar.Min.Y + (barHeight-strong.size*capHeight)/2

	f.drawClasses(s, p, t, bar, base)
	f.drawValues(s, p, t, bar.Min.Y)
	f.drawAverage(s, p, t, bar)
	s.write(plain, margin, base, draw.XLeft, f.name(t))
	s.write(plain, f.answers, base, draw.XLeft, f.verdict(t))
	s.write(plain, f.width-margin, base, draw.XRight, f.average(t))
}

// drawClasses draws the bar of a strip with its classes, the code's answer
// shaded and in bold.
func (f *comparison) drawClasses(s *sheet, p *plane, t *Strip, bar vg.Rectangle, base vg.Length) {
	from, to := f.x.from*f.x.unit, f.x.to*f.x.unit
	for _, iv := range t.Classes.intervals(from, to) {
		x0, x1 := p.X(f.x.fraction(iv.from)), p.X(f.x.fraction(iv.to))
		l := plain
		if iv.class == clean(t.Class) {
			l = strong
			s.rectangle(paleBlue, x0, bar.Min.Y, x1, bar.Max.Y)
		}
		if mid, ok := besideMark(x0, x1, p.X(f.x.fraction(t.Average)), l.width(iv.class)); ok {
			s.write(l, mid, base, draw.XCenter, iv.class)
		}
	}
	for _, b := range t.Classes.Bounds {
		x := p.X(f.x.fraction(b.Value))
		s.StrokeLine2(frameLine, x, bar.Min.Y, x, bar.Max.Y)
	}
	s.outline(frameLine, bar)
}

// besideMark returns where the middle of a text of width w goes between x0
// and x1: to the middle, or to the middle of the larger part beside a mark
// that would cross it there. There may be no room for it.
func besideMark(x0, x1, mark, w vg.Length) (mid vg.Length, ok bool) {
	const clear = 3
	mid = (x0 + x1) / 2
	if mark > mid-w/2-clear && mark < mid+w/2+clear {
		if mark-x0 > x1-mark {
			x1 = mark - 1
		} else {
			x0 = mark + 1
		}
		mid = (x0 + x1) / 2
	}
	return mid, w+4 <= x1-x0
}

// drawValues writes the values of the bounds under the bar, as far as there
// is room.
func (f *comparison) drawValues(s *sheet, p *plane, t *Strip, bottom vg.Length) {
	end := vg.Length(math.Inf(-1))
	for _, b := range t.Classes.sorted() {
		text := f.units.velocityNumber(b.Value)
		x, w := p.X(f.x.fraction(b.Value)), small.width(text)
		if x-w/2 >= end+2 {
			s.write(small, x, bottom-2-small.size*capHeight, draw.XCenter, text)
			end = x + w/2
		}
	}
}

// drawAverage draws a line through the bar at the average, with a head that
// points down to it.
func (f *comparison) drawAverage(s *sheet, p *plane, t *Strip, bar vg.Rectangle) {
	x := p.X(f.x.fraction(t.Average))
	s.StrokeLine2(draw.LineStyle{Color: vermilion, Width: 1.6}, x, bar.Min.Y, x, bar.Max.Y)
	s.triangle(vermilion, vg.Point{X: x, Y: bar.Max.Y},
		vg.Point{X: x - 3.5, Y: bar.Max.Y + 7}, vg.Point{X: x + 3.5, Y: bar.Max.Y + 7})
}

package figure

import (
	"errors"
	"fmt"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// FlipShare is one layer or interface of a Flip figure.
type FlipShare struct {
	Interface   bool    // between two layers, at Bottom; it takes no time
	Top, Bottom float64 // m below ground level
	Time        float64 // its part of the travel time, from 0 to 1
	Variance    float64 // its part of the variance of the average, from 0 to 1

	// Softer and Stiffer are the factors on the velocity of the layer, > 0, at
	// which the class would flip to the next softer and stiffer one. 0 where no
	// factor does it.
	Softer, Stiffer float64
}

// FlipOptions is how a Flip figure looks, and the classes next to the site's
// own.
type FlipOptions struct {
	Units           Units
	Width           float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
	Softer, Stiffer string  // the next classes; "" where there is none, or where it is not to be shown
}

// Flip draws for each layer and interface, from the top down, its share in
// the travel time and its share in the variance as two bars, and writes
// beside them the factors on its velocity at which the class would flip. The
// factor that is nearest to 1 is in bold. Where there is no room to write
// beside every layer, those with the largest share in the variance come
// first. The error names the layer that cannot be drawn.
func Flip(shares []FlipShare, o FlipOptions) (*report.Picture, error) {
	f := flip{FlipOptions: o, shares: shares, width: paperWidth(o.Width)}
	if err := f.check(); err != nil {
		return nil, fmt.Errorf("flip figure: %w", err)
	}
	f.fit()
	return f.draw(), nil
}

// flip is a Flip figure in the making.
type flip struct {
	FlipOptions
	shares []FlipShare
	width  vg.Length

	columns []flipColumn
	bar     vg.Length // height of a bar
	rows    []vg.Length
	height  vg.Length // of all rows
	legend  legend
}

// check refuses what cannot be drawn.
func (f *flip) check() error {
	if len(f.shares) == 0 {
		return errors.New("no layer to draw")
	}
	part := func(x float64) bool { return x >= 0 && x <= 1+1e-9 }
	factor := func(x float64) bool { return x >= 0 && x <= fastest }
	for i, y := range f.shares {
		what := "layer"
		depths := y.Top >= 0 && y.Bottom > y.Top
		if y.Interface {
			what, depths = "interface", y.Bottom >= 0
		}
		if !depths || !(y.Bottom <= deepest) {
			return fmt.Errorf("share %d, of the %s from %v m to %v m, cannot be drawn", i+1, what, y.Top, y.Bottom)
		}
		if !part(y.Time) || !part(y.Variance) {
			return fmt.Errorf("share %d, of the %s down to %v m, has a part of %v of the time and %v of the variance, not from 0 to 1",
				i+1, what, y.Bottom, y.Time, y.Variance)
		}
		if !factor(y.Softer) || !factor(y.Stiffer) {
			return fmt.Errorf("share %d, of the %s down to %v m, has factors of %v and %v that cannot be drawn",
				i+1, what, y.Bottom, y.Softer, y.Stiffer)
		}
	}
	return nil
}

// Heights of the rows of a Flip figure where there is room for all.
const (
	flipBar  = 8   // of a bar; a layer has two
	flipGap  = 5.5 // from row to row
	hatchBar = 3   // a lower bar is full and not hatched
)

// fit chooses the heights of the rows and fills the columns.
func (f *flip) fit() {
	total := vg.Length(0)
	for _, y := range f.shares {
		total += rowHeight(y)
	}
	scale := min(1, mostOfBars/total)
	f.bar, f.height = flipBar*scale, total*scale
	top := vg.Length(0)
	for _, y := range f.shares {
		h := rowHeight(y) * scale
		f.rows = append(f.rows, top+h/2)
		top += h
	}
	f.addColumn("softer class", clean(f.Softer), func(y FlipShare) float64 { return y.Softer })
	f.addColumn("stiffer class", clean(f.Stiffer), func(y FlipShare) float64 { return y.Stiffer })
	f.legend = newLegend(f.meanings(), f.width-2*margin)
}

// rowHeight returns the height of a row where there is room for all.
func rowHeight(y FlipShare) vg.Length {
	if y.Interface {
		return flipBar + flipGap
	}
	return 2*flipBar + flipGap
}

// meanings returns the entries of the legend.
func (f *flip) meanings() []meaning {
	const w = sampleLen / 2
	high := vg.Length(4)
	if f.bar < hatchBar {
		high = 0.49 * hatchBar
	}
	list := []meaning{
		{"share in the travel time", w, func(s *sheet, x, y vg.Length) { s.timeBar(x, y-4, x+w, y+4) }},
		{"share in the variance of the average", w, func(s *sheet, x, y vg.Length) { s.varianceBar(x, y-high, x+w, y+high) }},
	}
	if len(f.columns) > 0 {
		list = append(list, meaning{text: "× factor on the velocity of that layer alone at which the class flips"})
	}
	return list
}

// timeBar draws a bar of the travel time.
func (s *sheet) timeBar(x0, y0, x1, y1 vg.Length) { s.rectangle(skyBlue, x0, y0, x1, y1) }

// The lines of a bar of the variance.
var varianceLine = draw.LineStyle{Color: vermilion, Width: 0.7}

// varianceBar draws a bar of the variance: hatched where it is high enough.
func (s *sheet) varianceBar(x0, y0, x1, y1 vg.Length) {
	h := y1 - y0
	if h < hatchBar {
		s.rectangle(vermilion, x0, y0, x1, y1)
		return
	}
	const step = 3
	hatch := make(vg.Path, 0, 2*int((x1-x0+h)/step)+4)
	for x := x0 - h + step/2; x < x1; x += step {
		from, to := max(0, x0-x), min(h, x1-x) // along the line, which rises by as much as it goes right
		hatch.Move(vg.Point{X: x + from, Y: y0 + from})
		hatch.Line(vg.Point{X: x + to, Y: y0 + to})
	}
	s.SetLineStyle(varianceLine)
	s.Stroke(hatch)
	s.outline(varianceLine, vg.Rectangle{Min: vg.Point{X: x0, Y: y0}, Max: vg.Point{X: x1, Y: y1}})
}

// heading is the height of the headings of the columns.
const heading = 13

// draw draws the bars from the top down, the axis below them and the legend
// above.
func (f *flip) draw() *report.Picture {
	over := f.legend.height() + heading
	s := newSheet(f.width, 2*margin+over+f.height+gap+axisHeight)
	p := f.frame(s)
	p.Max.Y -= over
	f.drawBars(&s, p)
	f.drawTexts(&s, p)
	s.StrokeLine2(frameLine, p.Min.X, p.Min.Y, p.Max.X, p.Min.Y)
	s.StrokeLine2(frameLine, p.Min.X, p.Min.Y, p.Min.X, p.Max.Y)
	s.drawX(p)
	f.legend.draw(&s, margin, p.Max.Y+over)
	return s.picture
}

// frame returns the plane of the bars.
func (f *flip) frame(s sheet) *plane {
	names, most := vg.Length(0), 0.01
	for _, y := range f.shares {
		names = max(names, plain.width(f.name(y)))
		most = max(most, y.Time, y.Variance)
	}
	right := vg.Length(2 * gap)
	for _, c := range f.columns {
		right += 2*gap + c.width
	}
	p := &plane{Canvas: s.Canvas}
	p.Min = vg.Point{X: margin + names + gap, Y: margin + axisHeight}
	if f.numbers() { // that of the longest bar
		right += small.width("100.0 %")
	}
	p.Max = vg.Point{X: p.Max.X - margin - right, Y: p.Max.Y - margin}
	p.x = linear("Share (%)", 100*most, 1, p.Max.X-p.Min.X, 40, false)
	return p
}

// numbers reports whether each bar has its number.
func (f *flip) numbers() bool { return f.bar >= flipBar*(1-1e-9) }

// name returns the depths of a layer, or the depth of an interface, as text.
func (f *flip) name(y FlipShare) string {
	if y.Interface {
		unit := f.Units.length()
		return "interface " + strconv.FormatFloat(y.Bottom/unit.Factor, 'f', 1, 64) + " " + unit.Name
	}
	t := travel{units: f.Units}
	return t.name(Share{Top: y.Top, Bottom: y.Bottom})
}

// drawBars draws the bars of each row, with their numbers where there is
// room.
func (f *flip) drawBars(s *sheet, p *plane) {
	bar := func(mark func(x0, y0, x1, y1 vg.Length), part float64, bottom vg.Length) {
		end := p.X(p.x.fraction(100 * part))
		if end > p.Min.X {
			mark(p.Min.X, bottom, end, bottom+f.bar)
		}
		if f.numbers() {
			base := bottom + (f.bar-small.size*capHeight)/2
			s.write(small, end+3, base, draw.XLeft, strconv.FormatFloat(100*part, 'f', 1, 64)+" %")
		}
	}
	for i, y := range f.shares {
		middle := p.Max.Y - f.rows[i]
		if y.Interface {
			bar(s.varianceBar, y.Variance, middle-f.bar/2)
			continue
		}
		bar(s.timeBar, y.Time, middle)
		bar(s.varianceBar, y.Variance, middle-f.bar)
	}
}

package pdf

import (
	"errors"
	"fmt"
	"math"

	"shearbook/report"
)

// figure sets a picture and its caption, kept together.
func (s *setter) figure(f *report.Figure, a area) []*piece {
	if f.Picture == nil {
		s.fail(fmt.Errorf("figure %q holds no picture", f.Name))
		return nil
	}
	if err := s.check(f.Picture); err != nil {
		s.fail(fmt.Errorf("figure %q: %w", f.Name, err))
		return nil
	}
	p := f.Picture
	scale := s.fit(p.Width, p.Height, a.width)
	x := a.x + (a.width-scale*p.Width)/2
	drawn := &piece{height: scale * p.Height, ops: []op{&figureOp{x, 0, scale, p}}}
	return s.withCaption(drawn, f.Caption, scale*p.Width, a)
}

// fit returns the scale at which something fits the column and a page, with
// room for a heading and a caption; at most 1.
func (s *setter) fit(width, height, column float64) float64 {
	return min(1, column/width, (s.bodyHeight()-120)/height)
}

// withCaption puts a caption below what is drawn, in the middle below what
// is much narrower than the column.
func (s *setter) withCaption(drawn *piece, caption []report.Inline, width float64, a area) []*piece {
	a.look = a.caption()
	if width < 0.85*a.width {
		a.align = report.AlignCentre
	}
	lines := s.paragraph(caption, a)
	if len(lines) == 0 {
		return []*piece{drawn}
	}
	lines[0].above = 4
	if len(lines) <= 6 {
		keepAll(lines)
	}
	drawn.keep = true
	return append([]*piece{drawn}, lines...)
}

// check tells whether a picture can be drawn: its numbers are finite and its
// marks known.
func (s *setter) check(p *report.Picture) error {
	if !(p.Width > 0 && p.Height > 0) || !drawable(p.Width, p.Height) {
		return fmt.Errorf("its size of %g by %g points is no size", p.Width, p.Height)
	}
	for _, m := range p.Marks {
		ok := true
		switch m := m.(type) {
		case *report.Stroke:
			ok = checkPath(m.Path) && drawable(m.Width) && drawable(m.Dash...)
		case *report.Fill:
			ok = checkPath(m.Path)
		case *report.Label:
			ok = drawable(m.X, m.Y, m.Turn, m.Size) && m.Size >= 0
			s.labelRuns(m, 1) // notes what is missing
		default:
			panic(fmt.Sprintf("pdf: unknown mark %T", m))
		}
		if !ok {
			return errors.New("a coordinate is no number on the page")
		}
	}
	return nil
}

func checkPath(p report.Path) bool {
	for _, m := range p {
		if !drawable(m.X, m.Y, m.X1, m.Y1, m.X2, m.Y2) {
			return false
		}
	}
	return true
}

// drawable tells whether numbers are within what a page can hold; NaN is
// not.
func drawable(numbers ...float64) bool {
	for _, v := range numbers {
		if !(math.Abs(v) < 1e6) {
			return false
		}
	}
	return true
}

// labelRuns returns the runs of a label at a scale.
func (s *setter) labelRuns(l *report.Label, scale float64) []run {
	st := style{font: l.Font, size: scale * l.Size, colour: l.Colour}
	var runs []run
	for text := clean(l.Text); text != ""; {
		part, as, rest := s.printable(text, st)
		runs = append(runs, run{as, part, s.width(as, part)})
		text = rest
	}
	return runs
}

// drawFigure draws the marks of a picture. What reaches beyond its edge is
// cut off.
func (p *printer) drawFigure(o *figureOp, dx, dy float64) {
	x, y, pic := o.x+dx, o.y+dy, o.picture
	bottom := y + o.scale*pic.Height
	p.pdf.ClipRect(x, y, o.scale*pic.Width, o.scale*pic.Height, false)
	p.forget()
	at := func(mx, my float64) (float64, float64) { return x + o.scale*mx, bottom - o.scale*my }
	for _, m := range pic.Marks {
		switch m := m.(type) {
		case *report.Stroke:
			dash := make([]float64, len(m.Dash))
			for i, d := range m.Dash {
				dash[i] = o.scale * d
			}
			p.pen(o.scale*m.Width, m.Colour, dash)
			p.path(m.Path, at)
			p.pdf.DrawPath("S")
		case *report.Fill:
			p.ink(m.Colour)
			p.path(m.Path, at)
			p.pdf.DrawPath("F")
		case *report.Label:
			p.label(m, o.scale, at)
		default:
			panic(fmt.Sprintf("pdf: unknown mark %T", m))
		}
	}
	p.pdf.ClipEnd()
	p.forget()
}

// path puts a path on the page, to be stroked or filled.
func (p *printer) path(path report.Path, at func(x, y float64) (float64, float64)) {
	for i, m := range path {
		x, y := at(m.X, m.Y)
		kind := m.Kind
		if i == 0 && kind != report.MoveTo {
			kind = report.MoveTo // a path must start somewhere
		}
		switch kind {
		case report.MoveTo:
			p.pdf.MoveTo(x, y)
		case report.LineTo:
			p.pdf.LineTo(x, y)
		case report.CurveTo:
			x1, y1 := at(m.X1, m.Y1)
			x2, y2 := at(m.X2, m.Y2)
			p.pdf.CurveBezierCubicTo(x1, y1, x2, y2, x, y)
		case report.Close:
			p.pdf.ClosePath()
		default:
			panic(fmt.Sprintf("pdf: unknown move %d", m.Kind))
		}
	}
}

func (p *printer) label(l *report.Label, scale float64, at func(x, y float64) (float64, float64)) {
	x, y := at(l.X, l.Y)
	if l.Turn != 0 {
		p.pdf.TransformBegin()
		p.pdf.TransformRotate(l.Turn, x, y)
		p.forget()
		defer func() {
			p.pdf.TransformEnd()
			p.forget()
		}()
	}
	for _, r := range p.s.labelRuns(l, scale) {
		p.text(x, y-r.rise, r.text, r.style)
		x += r.width
	}
}

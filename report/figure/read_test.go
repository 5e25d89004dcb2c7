package figure_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/font/liberation"

	"shearbook/report"
)

// The tests read a picture as a person does who holds a ruler to it: they
// find the ticks by their labels and measure everything else against them.

// box is the place of a text on paper.
type box struct {
	text           string
	x0, y0, x1, y1 float64
}

// overlaps reports whether two boxes share more than a hundredth of a point.
func (b box) overlaps(o box) bool {
	const eps = 0.01
	return b.x0 < o.x1-eps && o.x0 < b.x1-eps && b.y0 < o.y1-eps && o.y0 < b.y1-eps
}

// faceOf holds Liberation Sans as gonum's own collection has it.
var faceOf = func() map[report.Font]font.Face {
	m := map[report.Font]font.Face{}
	for _, f := range liberation.Collection() {
		switch f.Font.Name() {
		case "LiberationSans-Regular":
			m[report.Sans] = f
		case "LiberationSans-Bold":
			m[report.SansBold] = f
		}
	}
	return m
}()

// measure returns the box of a label, from its face's descent to its ascent.
func measure(t *testing.T, l *report.Label) box {
	t.Helper()
	f, ok := faceOf[l.Font]
	if !ok {
		t.Fatalf("label %q is set in font %d", l.Text, l.Font)
	}
	f.Font.Size = font.Length(l.Size)
	e := f.Extents()
	w, up, down := float64(f.Width(l.Text)), float64(e.Ascent), float64(e.Descent)
	switch l.Turn {
	case 0:
		return box{l.Text, l.X, l.Y - down, l.X + w, l.Y + up}
	case 90:
		return box{l.Text, l.X - up, l.Y, l.X + down, l.Y + w}
	}
	t.Fatalf("label %q is turned by %v°", l.Text, l.Turn)
	return box{}
}

// segment is one straight piece of a stroke.
type segment struct {
	x0, y0, x1, y1 float64
	of             *report.Stroke
}

// reading is a picture taken apart.
type reading struct {
	picture  *report.Picture
	boxes    []box
	segments []segment
	frame    box                         // the largest rectangle that is stroked
	x, y     func(value float64) float64 // from the axes' numbers to paper
}

// read takes a picture apart.
func read(t *testing.T, p *report.Picture) *reading {
	t.Helper()
	r := &reading{picture: p}
	for _, m := range p.Marks {
		switch m := m.(type) {
		case *report.Label:
			r.boxes = append(r.boxes, measure(t, m))
		case *report.Stroke:
			r.stroke(m)
		}
	}
	return r
}

// stroke adds the segments of a stroke, and notes it if it is the frame.
func (r *reading) stroke(s *report.Stroke) {
	for i := 1; i < len(s.Path); i++ {
		if a, b := s.Path[i-1], s.Path[i]; b.Kind == report.LineTo {
			r.segments = append(r.segments, segment{a.X, a.Y, b.X, b.Y, s})
		}
	}
	if n := len(s.Path); n >= 5 && s.Path[n-1].Kind == report.Close {
		b := box{x0: math.Inf(1), y0: math.Inf(1)}
		for _, m := range s.Path[:n-1] {
			b.x0, b.x1 = min(b.x0, m.X), max(b.x1, m.X)
			b.y0, b.y1 = min(b.y0, m.Y), max(b.y1, m.Y)
		}
		if (b.x1-b.x0)*(b.y1-b.y0) > (r.frame.x1-r.frame.x0)*(r.frame.y1-r.frame.y0) {
			r.frame = b
		}
	}
}

// axes finds the scales of the axes from the long ticks and the numbers at
// their ends.
func (r *reading) axes(t *testing.T) {
	t.Helper()
	var xs, ys [][2]float64 // value, place on paper
	for _, b := range r.boxes {
		v, err := strconv.ParseFloat(b.text, 64)
		if err != nil {
			continue
		}
		for _, s := range r.segments {
			long := math.Abs(math.Hypot(s.x1-s.x0, s.y1-s.y0)-4) < 0.01
			switch {
			case !long:
			case s.y0 == r.frame.y0 && s.y1 < s.y0 && math.Abs((b.x0+b.x1)/2-s.x0) < 0.01 && b.y1 < s.y0:
				xs = append(xs, [2]float64{v, s.x0})
			case s.x0 == r.frame.x0 && s.x1 < s.x0 && b.x1 < s.x1 && math.Abs(b.y0+(b.y1-b.y0)*0.5-s.y0) < 1:
				ys = append(ys, [2]float64{v, s.y0})
			}
		}
	}
	r.x, r.y = line(t, xs), line(t, ys)
}

// line returns the straight line through the outermost points.
func line(t *testing.T, points [][2]float64) func(float64) float64 {
	t.Helper()
	if len(points) < 2 {
		t.Fatalf("an axis has %d numbers at ticks", len(points))
	}
	a, b := points[0], points[0]
	for _, p := range points {
		if p[0] < a[0] {
			a = p
		}
		if p[0] > b[0] {
			b = p
		}
	}
	return func(v float64) float64 { return a[1] + (v-a[0])*(b[1]-a[1])/(b[0]-a[0]) }
}

// near reports whether two places on paper are the same to 0.01 pt.
func near(a, b float64) bool { return math.Abs(a-b) <= 0.01 }

// find returns the stroke that has a segment between the two points, in
// either direction; nil if none has.
func (r *reading) find(x0, y0, x1, y1 float64) *report.Stroke {
	for _, s := range r.segments {
		if near(s.x0, x0) && near(s.y0, y0) && near(s.x1, x1) && near(s.y1, y1) ||
			near(s.x0, x1) && near(s.y0, y1) && near(s.x1, x0) && near(s.y1, y0) {
			return s.of
		}
	}
	return nil
}

// label returns the box of the first label that contains text.
func (r *reading) label(t *testing.T, text string) box {
	t.Helper()
	for _, b := range r.boxes {
		if strings.Contains(b.text, text) {
			return b
		}
	}
	t.Fatalf("no label says %q", text)
	return box{}
}

// checkLabels asserts that all labels lie inside the picture, that none
// overlaps another, and that none lies in the frame.
func (r *reading) checkLabels(t *testing.T) {
	t.Helper()
	for i, b := range r.boxes {
		if b.x0 < 0 || b.y0 < 0 || b.x1 > r.picture.Width || b.y1 > r.picture.Height {
			t.Errorf("%q leaves the picture: %+v", b.text, b)
		}
		if b.text == "" || strings.ContainsAny(b.text, "\n\t\u00a0") {
			t.Errorf("label %q", b.text)
		}
		if b.overlaps(r.frame) {
			t.Errorf("%q lies in the frame", b.text)
		}
		for _, o := range r.boxes[:i] {
			if b.overlaps(o) {
				t.Errorf("%q and %q overlap", b.text, o.text)
			}
		}
	}
}

// checkMarks asserts that every mark is finite and inside the picture, to
// half a line's width.
func (r *reading) checkMarks(t *testing.T) {
	t.Helper()
	inside := func(m report.Move) bool {
		return m.Kind == report.Close ||
			m.X >= -1 && m.X <= r.picture.Width+1 && m.Y >= -1 && m.Y <= r.picture.Height+1
	}
	for _, m := range r.picture.Marks {
		var path report.Path
		switch m := m.(type) {
		case *report.Stroke:
			path = m.Path
			if !(m.Width > 0) {
				t.Errorf("a stroke is %v wide", m.Width)
			}
		case *report.Fill:
			path = m.Path
		}
		for _, move := range path {
			if !inside(move) {
				t.Errorf("%T leaves the picture at %v, %v", m, move.X, move.Y)
				return
			}
		}
	}
}

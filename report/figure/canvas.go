package figure

import (
	"fmt"
	"image"
	"image/color"
	"math"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"

	"shearbook/report"
)

// canvas is a vg.Canvas that records into a report.Picture what is drawn on
// it. Coordinates are rounded to a thousandth of a point, so that the same
// figure has the same marks on every machine.
//
// It panics on what a Picture cannot hold, which is a mistake of ours and
// never of the data: images, a dash offset, text that is sheared or
// mirrored, and faces that are not the report's own.
type canvas struct {
	picture *report.Picture
	pen     pen
	stack   []pen
}

// pen is the state that Push saves.
type pen struct {
	width  vg.Length
	dash   []vg.Length
	colour report.Colour
	clear  bool // the colour is wholly transparent
	at     matrix
}

var _ vg.CanvasSizer = (*canvas)(nil)

// newCanvas returns a canvas that records into a new picture of width by
// height points.
func newCanvas(width, height vg.Length) *canvas {
	c := &canvas{
		picture: &report.Picture{Width: round(width), Height: round(height)},
		pen:     pen{at: matrix{a: 1, d: 1}},
	}
	vg.Initialize(c)
	return c
}

// Size returns the size of the picture.
func (c *canvas) Size() (x, y vg.Length) {
	return vg.Length(c.picture.Width), vg.Length(c.picture.Height)
}

// SetLineWidth sets the width of strokes; nothing is stroked where it is not
// positive.
func (c *canvas) SetLineWidth(w vg.Length) { c.pen.width = w }

// SetLineDash sets the dashes of strokes.
func (c *canvas) SetLineDash(pattern []vg.Length, offset vg.Length) {
	if offset != 0 {
		panic("figure: a picture has no dash offset")
	}
	c.pen.dash = pattern
}

// SetColor sets the colour of what follows, black if it is nil. A colour
// that is partly transparent is laid on white paper.
func (c *canvas) SetColor(clr color.Color) {
	if clr == nil {
		clr = color.Black
	}
	r, g, b, a := clr.RGBA()
	paper := 0xffff - a
	c.pen.colour = report.Colour{
		R: uint8((r + paper) >> 8),
		G: uint8((g + paper) >> 8),
		B: uint8((b + paper) >> 8),
	}
	c.pen.clear = a == 0
}

// Rotate turns what follows anticlockwise by rad radians.
func (c *canvas) Rotate(rad float64) {
	sin, cos := math.Sincos(rad)
	c.pen.at = c.pen.at.after(matrix{a: cos, b: sin, c: -sin, d: cos})
}

// Translate shifts what follows.
func (c *canvas) Translate(pt vg.Point) {
	c.pen.at = c.pen.at.after(matrix{a: 1, d: 1, e: float64(pt.X), f: float64(pt.Y)})
}

// Scale scales what follows, with line widths, dashes and text.
func (c *canvas) Scale(x, y float64) {
	c.pen.at = c.pen.at.after(matrix{a: x, d: y})
}

// Push saves the state.
func (c *canvas) Push() { c.stack = append(c.stack, c.pen) }

// Pop restores the state that the last Push saved.
func (c *canvas) Pop() {
	last := len(c.stack) - 1
	if last < 0 {
		panic("figure: Pop without Push")
	}
	c.pen, c.stack = c.stack[last], c.stack[:last]
}

// Stroke draws a line along the path.
func (c *canvas) Stroke(p vg.Path) {
	if c.pen.width <= 0 || c.pen.clear || len(p) == 0 {
		return
	}
	scale := vg.Length(c.pen.at.scale())
	stroke := &report.Stroke{
		Path:   c.path(p),
		Width:  round(c.pen.width * scale),
		Colour: c.pen.colour,
	}
	for _, d := range c.pen.dash {
		stroke.Dash = append(stroke.Dash, round(d*scale))
	}
	c.picture.Marks = append(c.picture.Marks, stroke)
}

// Fill fills the inside of the path.
func (c *canvas) Fill(p vg.Path) {
	if c.pen.clear || len(p) == 0 {
		return
	}
	c.picture.Marks = append(c.picture.Marks, &report.Fill{Path: c.path(p), Colour: c.pen.colour})
}

// FillString writes text on one line from the base-line point pt.
func (c *canvas) FillString(f font.Face, pt vg.Point, text string) {
	if f.Font.Size == 0 || c.pen.clear || text == "" {
		return
	}
	m := c.pen.at
	if size := m.scale(); math.Abs(m.a-m.d) > 1e-9*size || math.Abs(m.b+m.c) > 1e-9*size {
		panic("figure: text can be turned and enlarged, not sheared or mirrored")
	}
	x, y := m.apply(pt)
	c.picture.Marks = append(c.picture.Marks, &report.Label{
		X: x, Y: y,
		Turn:   round(vg.Length(math.Atan2(m.b, m.a) * 180 / math.Pi)),
		Text:   text,
		Font:   fontOf(f.Font),
		Size:   round(f.Font.Size * vg.Length(m.scale())),
		Colour: c.pen.colour,
	})
}

// DrawImage panics: a picture holds no images.
func (c *canvas) DrawImage(vg.Rectangle, image.Image) {
	panic("figure: a picture holds no images")
}

// path returns p in the coordinates of the picture.
func (c *canvas) path(p vg.Path) report.Path {
	out := make(report.Path, 0, len(p))
	var at vg.Point // where the pen is, before the transform
	for _, comp := range p {
		switch comp.Type {
		case vg.MoveComp:
			at = comp.Pos
			out = append(out, c.move(report.MoveTo, at))
		case vg.LineComp:
			at = comp.Pos
			out = append(out, c.move(report.LineTo, at))
		case vg.ArcComp:
			out, at = c.arc(out, comp)
		case vg.CurveComp:
			p1, p2 := controls(at, comp)
			at = comp.Pos
			out = append(out, c.curve(p1, p2, at))
		case vg.CloseComp:
			out = append(out, report.Move{Kind: report.Close})
		default:
			panic(fmt.Sprintf("figure: unknown kind of path component %d", comp.Type))
		}
	}
	return out
}

// move returns a straight movement.
func (c *canvas) move(kind report.MoveKind, to vg.Point) report.Move {
	x, y := c.pen.at.apply(to)
	return report.Move{Kind: kind, X: x, Y: y}
}

// curve returns a cubic Bézier movement.
func (c *canvas) curve(p1, p2, to vg.Point) report.Move {
	m := report.Move{Kind: report.CurveTo}
	m.X1, m.Y1 = c.pen.at.apply(p1)
	m.X2, m.Y2 = c.pen.at.apply(p2)
	m.X, m.Y = c.pen.at.apply(to)
	return m
}

// controls returns the two control points of a curve that starts at from. A
// quadratic curve with control point q is the cubic with from + ⅔(q−from)
// and to + ⅔(q−to).
func controls(from vg.Point, comp vg.PathComp) (p1, p2 vg.Point) {
	switch q := comp.Control; len(q) {
	case 1:
		return from.Add(q[0].Sub(from).Scale(2. / 3)), comp.Pos.Add(q[0].Sub(comp.Pos).Scale(2. / 3))
	case 2:
		return q[0], q[1]
	default:
		panic(fmt.Sprintf("figure: a curve with %d control points", len(q)))
	}
}

// arc appends a circular arc as cubic curves of at most a quarter turn, each
// with its control points (4/3)·tan(δ/4) radii along the tangents, where δ is
// its angle. The curve leaves the circle by less than 0.03 % of the radius
// (Goldapp 1991, Computer Aided Geometric Design 8:227, from memory).
func (c *canvas) arc(out report.Path, comp vg.PathComp) (report.Path, vg.Point) {
	n := int(math.Ceil(math.Abs(comp.Angle) / (math.Pi / 2)))
	on := func(angle float64) (point, tangent vg.Point) {
		sin, cos := math.Sincos(angle)
		radial := vg.Point{X: vg.Length(cos), Y: vg.Length(sin)}.Scale(comp.Radius)
		return comp.Pos.Add(radial), vg.Point{X: -radial.Y, Y: radial.X}
	}
	p, t := on(comp.Start)
	kind := report.LineTo
	if len(out) == 0 {
		kind = report.MoveTo
	}
	out = append(out, c.move(kind, p))
	for i := range n {
		delta := comp.Angle / float64(n)
		k := vg.Length(4. / 3 * math.Tan(delta/4))
		q, u := on(comp.Start + delta*float64(i+1))
		out = append(out, c.curve(p.Add(t.Scale(k)), q.Sub(u.Scale(k)), q))
		p, t = q, u
	}
	return out, p
}

// matrix is the affine transform x' = a·x + c·y + e, y' = b·x + d·y + f.
type matrix struct{ a, b, c, d, e, f float64 }

// after returns the transform that first does n and then m.
func (m matrix) after(n matrix) matrix {
	return matrix{
		a: m.a*n.a + m.c*n.b, c: m.a*n.c + m.c*n.d, e: m.a*n.e + m.c*n.f + m.e,
		b: m.b*n.a + m.d*n.b, d: m.b*n.c + m.d*n.d, f: m.b*n.e + m.d*n.f + m.f,
	}
}

// apply returns the transformed point, rounded.
func (m matrix) apply(p vg.Point) (x, y float64) {
	px, py := float64(p.X), float64(p.Y)
	return round(vg.Length(m.a*px + m.c*py + m.e)), round(vg.Length(m.b*px + m.d*py + m.f))
}

// scale returns the factor by which lengths grow: the root of that of areas.
func (m matrix) scale() float64 { return math.Sqrt(math.Abs(m.a*m.d - m.b*m.c)) }

// round returns a length or an angle rounded to a thousandth, never −0.
func round(v vg.Length) float64 { return math.Round(float64(v)*1000)/1000 + 0 }

package pdf

import (
	"fmt"
	"math"

	"shearbook/report"
)

// piece is what a page break leaves whole: a line of type, a row of a table,
// a figure with its caption. A document is one column of pieces.
type piece struct {
	above  float64 // space, lost at the top of a page
	height float64
	ops    []op // X from the left of the column, Y from the top of the piece

	keep      bool     // no page break between this piece and the next
	breaks    bool     // starts a page
	frames    []*frame // around this piece, the outermost first
	repeat    []*piece // printed first where this piece starts a page: a table's header
	footnotes []int    // mentioned here
}

// frame is drawn behind consecutive pieces, once for each page they reach.
type frame struct {
	x, width float64
	fill     *report.Colour
	stroke   *report.Colour
	bar      *report.Colour // at the left edge
	barWidth float64
}

// op is a mark on the page: *textOp, *fillOp, *pathOp, *figureOp, *imageOp,
// *linkOp, *destOp or *outlineOp.
type op interface{ op() }

// textOp is text from X on a base line at Y.
type textOp struct {
	x, y float64
	text string
	style
}

// fillOp is a filled rectangle.
type fillOp struct {
	x, y, width, height float64
	colour              report.Colour
}

// pathOp is a polygon or an open line.
type pathOp struct {
	points []point
	closed bool
	fill   bool
	width  float64 // of the line
	dash   []float64
	colour report.Colour
}

type point struct{ x, y float64 }

// figureOp is a picture whose upper left corner is at X, Y.
type figureOp struct {
	x, y, scale float64
	picture     *report.Picture
}

// imageOp is a raster image.
type imageOp struct {
	x, y, width, height float64
	image               *raster
}

// linkOp makes an area lead somewhere.
type linkOp struct {
	x, y, width, height float64
	link                *link
}

// destOp is a place that links lead to.
type destOp struct {
	name string
	y    float64
}

// outlineOp is an entry of the outline.
type outlineOp struct {
	title string
	level int // from 1, as the heading's
}

func (*textOp) op()    {}
func (*fillOp) op()    {}
func (*pathOp) op()    {}
func (*figureOp) op()  {}
func (*imageOp) op()   {}
func (*linkOp) op()    {}
func (*destOp) op()    {}
func (*outlineOp) op() {}

// rule is a horizontal line of a thickness, centred on y.
func rule(x, y, width, thickness float64, c report.Colour) op {
	return &pathOp{points: []point{{x, y}, {x + width, y}}, width: thickness, colour: c}
}

// box is the outline of a rectangle.
func box(x, y, w, h, thickness float64, c report.Colour) op {
	return &pathOp{
		points: []point{{x, y}, {x + w, y}, {x + w, y + h}, {x, y + h}},
		closed: true, width: thickness, colour: c,
	}
}

// pointer is the mark of the row that matters, size high, centred on y.
func pointer(x, y, size float64, c report.Colour) op {
	return &pathOp{
		points: []point{{x, y - size/2}, {x + 0.85*size, y}, {x, y + size/2}},
		closed: true, fill: true, colour: c,
	}
}

// height returns the height of pieces below each other, without the space
// above the first if that stands at the top of a page.
func height(pieces []*piece, top bool) float64 {
	h := 0.0
	for i, p := range pieces {
		if i > 0 || !top {
			h += p.above
		}
		h += p.height
	}
	return h
}

// keepAll keeps pieces on one page.
func keepAll(pieces []*piece) {
	for i := range len(pieces) - 1 {
		pieces[i].keep = true
	}
}

// enframe draws a frame behind pieces.
func enframe(f *frame, pieces []*piece) {
	for _, p := range pieces {
		if len(p.frames) < deepestFrame {
			p.frames = append([]*frame{f}, p.frames...)
		}
	}
}

// space is a piece with nothing in it.
func space(h float64) *piece { return &piece{height: h} }

// circle is a dashed circle.
func circle(x, y, radius float64, c report.Colour) op {
	const corners = 72
	p := &pathOp{closed: true, width: 0.6, dash: []float64{2.5, 2.5}, colour: c}
	for i := range corners {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / corners)
		p.points = append(p.points, point{x + radius*cos, y + radius*sin})
	}
	return p
}

// shift moves marks down.
func shift(ops []op, dy float64) {
	for _, o := range ops {
		switch o := o.(type) {
		case *textOp:
			o.y += dy
		case *fillOp:
			o.y += dy
		case *pathOp:
			for i := range o.points {
				o.points[i].y += dy
			}
		case *figureOp:
			o.y += dy
		case *imageOp:
			o.y += dy
		case *linkOp:
			o.y += dy
		case *destOp:
			o.y += dy
		case *outlineOp:
		default:
			panic(fmt.Sprintf("pdf: unknown mark %T", o))
		}
	}
}

// top returns where a mark begins; for text, its base line.
func top(o op) float64 {
	switch o := o.(type) {
	case *textOp:
		return o.y
	case *fillOp:
		return o.y
	case *pathOp:
		return o.points[0].y
	case *figureOp:
		return o.y
	case *imageOp:
		return o.y
	case *linkOp:
		return o.y
	case *destOp:
		return o.y
	case *outlineOp:
		return 0
	default:
		panic(fmt.Sprintf("pdf: unknown mark %T", o))
	}
}

// cut divides a piece that is taller than a page. It happens to fields that
// hold pages of text: what fits no page must not run off it.
func (p *piece) cut(most float64) []*piece {
	if p.height <= most {
		return []*piece{p}
	}
	n := int(math.Ceil(p.height / most))
	parts := make([]*piece, n)
	for i := range parts {
		parts[i] = &piece{height: min(most, p.height-float64(i)*most), frames: p.frames, repeat: p.repeat}
	}
	for _, o := range p.ops {
		i := min(max(int(top(o)/most), 0), n-1)
		shift([]op{o}, -float64(i)*most)
		parts[i].ops = append(parts[i].ops, o)
	}
	parts[0].above, parts[0].breaks, parts[0].footnotes = p.above, p.breaks, p.footnotes
	parts[n-1].keep = p.keep
	return parts
}

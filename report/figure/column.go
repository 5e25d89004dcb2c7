package figure

import (
	"cmp"
	"fmt"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Lengths in the column beside the frame.
const (
	columnGap  = 12 // from the frame to the text; leaders cross it
	itemGap    = 4
	sampleLen  = 26
	mostInKey  = 16
	sampleText = sampleLen + gap
	nameLines  = 2 // of a profile's name
	textLines  = 5 // of our own words
)

// column is what stands beside the frame of a Velocity figure: the labels of
// depths near their depths, and the key where it has most room.
type column struct {
	width  vg.Length // with the gap to the frame
	code   string    // at the height of the letters
	labels []label
	key    []entry
}

// label is the label of a depth.
type label struct {
	depth float64 // m
	lines []string
}

// entry is one line style of the key with what it means.
type entry struct {
	style draw.LineStyle
	dot   bool
	core  draw.LineStyle // a line inside the line
	band  bool           // a piece of the band and no line
	lines []string
}

// height returns the height of the entry.
func (e entry) height() vg.Length { return plain.feed() * vg.Length(len(e.lines)) }

// newColumn fills a column of at most the given width, gap included.
func (f *velocity) newColumn(most vg.Length) column {
	room := most - columnGap
	c := column{code: plain.fit(clean(f.Classes.Code), room)}
	c.width = plain.width(c.code)
	for _, d := range f.depths() {
		l := label{d.depth, plain.wrap(d.label, room, textLines)}
		c.widen(0, l.lines)
		c.labels = append(c.labels, l)
	}
	slices.SortStableFunc(c.labels, func(a, b label) int { return cmp.Compare(a.depth, b.depth) })
	c.key = f.newKey(room - sampleText)
	for _, e := range c.key {
		c.widen(sampleText, e.lines)
	}
	c.width += columnGap
	return c
}

// widen widens the column to hold lines of text behind an indent.
func (c *column) widen(indent vg.Length, lines []string) {
	for _, text := range lines {
		c.width = max(c.width, indent+plain.width(text))
	}
}

// newKey returns the entries of the key.
func (f *velocity) newKey(room vg.Length) []entry {
	var key []entry
	add := func(style draw.LineStyle, dot bool, text string, lines int) {
		key = append(key, entry{style: style, dot: dot, lines: plain.wrap(text, room, lines)})
	}
	n := len(f.lines)
	shown := n
	if n > mostInKey {
		shown = mostInKey - 1
	}
	average, extension := false, false
	for i := range f.lines {
		if i < shown {
			name := clean(f.lines[i].Name)
			switch {
			case name == "" && n == 1:
				name = "velocity of the layers"
			case name == "":
				name = fmt.Sprintf("profile %d", i+1)
			}
			add(lookOf(i, n).layers, false, name, nameLines)
		}
		average = average || len(finitePoints(f.lines[i].Average)) > 0
		extension = extension || len(f.steps[i].extended) > 0
	}
	if shown < n {
		add(draw.LineStyle{}, false, fmt.Sprintf("and %d more", n-shown), textLines)
	}
	common := lookOf(0, n)
	if average {
		add(common.average, true, f.averageText(), textLines)
	}
	if extension {
		add(common.extension, false, "extended below the depth reached", textLines)
	}
	if len(f.band) > 0 {
		key = append(key,
			entry{style: medianLine, core: medianCore, lines: plain.wrap("median", room, textLines)},
			entry{band: true, lines: plain.wrap(bandText, room, textLines)})
	}
	return key
}

// averageText says in the key what the average line is.
func (f *velocity) averageText() string {
	if f.Datum > 0 {
		return "average from the datum down to each depth"
	}
	return "average from ground level down to each depth"
}

// height returns the least height in which the column has room.
func (c *column) height() vg.Length {
	h := c.keyHeight()
	for _, l := range c.labels {
		h += itemGap + plain.feed()*vg.Length(len(l.lines))
	}
	return h + 2*itemGap
}

// keyHeight returns the height of the key.
func (c *column) keyHeight() vg.Length {
	h := vg.Length(0)
	for _, e := range c.key {
		h += e.height() + itemGap
	}
	return h
}

// block is a part of the column: it would like its top at want, and gets it
// at top.
type block struct {
	want, top, height vg.Length // from the top of the frame down
}

// settle moves the blocks, which are in order, down and then up until none
// overlaps another and none leaves the room. There must be room for all.
func settle(blocks []block, room vg.Length) {
	end := vg.Length(0)
	for i := range blocks {
		b := &blocks[i]
		b.top = max(b.want, end)
		end = b.top + b.height + itemGap
	}
	end = room
	for i := range slices.Backward(blocks) {
		b := &blocks[i]
		b.top = min(b.top, end-b.height)
		end = b.top - itemGap
	}
}

// draw draws the column to the right of the frame of p.
func (c *column) draw(s *sheet, p *plane) {
	blocks, key := c.arrange(p)
	for i, l := range c.labels {
		if i >= key {
			i++
		}
		c.drawLabel(s, p, l, p.Max.Y-blocks[i].top)
	}
	y := p.Max.Y - blocks[key].top
	for _, e := range c.key {
		c.drawEntry(s, p.Max.X+columnGap, y, e)
		y -= e.height() + itemGap
	}
}

// arrange places the labels near their depths and the key among them, in
// the widest space between. It returns the blocks from the top down and
// which of them is the key.
func (c *column) arrange(p *plane) (blocks []block, key int) {
	room := p.Max.Y - p.Min.Y
	for _, l := range c.labels {
		h := plain.feed() * vg.Length(len(l.lines))
		middle := p.Max.Y - p.Y(p.y.fraction(l.depth))
		blocks = append(blocks, block{want: middle - h/2, height: h})
	}
	settle(blocks, room)
	widest, start, top := vg.Length(-1), vg.Length(0), vg.Length(0)
	for i := 0; i <= len(blocks); i++ {
		end := room
		if i < len(blocks) {
			end = blocks[i].top
		}
		if end-start > widest+1e-6 {
			widest, key, top = end-start, i, start
		}
		if i < len(blocks) {
			start = blocks[i].top + blocks[i].height + itemGap
		}
	}
	blocks = slices.Insert(blocks, key, block{want: top, height: c.keyHeight()})
	settle(blocks, room)
	return blocks, key
}

// drawLabel writes the label of a depth below top and leads a line to it
// from the depth.
func (c *column) drawLabel(s *sheet, p *plane, l label, top vg.Length) {
	h := plain.feed() * vg.Length(len(l.lines))
	y := p.Y(p.y.fraction(l.depth))
	s.StrokeLine2(boundLine, p.Max.X, y, p.Max.X+columnGap-2, top-h/2)
	for _, text := range l.lines {
		s.write(plain, p.Max.X+columnGap, top-plain.size*0.9, draw.XLeft, text)
		top -= plain.feed()
	}
}

// drawEntry draws an entry of the key below and to the right of x, top.
func (c *column) drawEntry(s *sheet, x, top vg.Length, e entry) {
	base := top - plain.size*0.9
	middle := base + plain.size*capHeight/2
	if e.style.Width > 0 {
		end := x + sampleLen
		if e.dot {
			end -= 4
		}
		s.StrokeLine2(e.style, x, middle, end, middle)
		if e.core.Width > 0 {
			s.StrokeLine2(e.core, x, middle, end, middle)
		}
		if e.dot {
			s.dot(e.style.Color.(ink), vg.Point{X: end, Y: middle})
		}
	}
	if e.band {
		s.bandSample(x, middle)
	}
	for _, text := range e.lines {
		s.write(plain, x+sampleText, base, draw.XLeft, text)
		base -= plain.feed()
	}
}

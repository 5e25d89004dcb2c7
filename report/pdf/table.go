package pdf

import (
	"fmt"

	"shearbook/report"
)

// The type of tables.
const (
	tableSize    = 8.5
	compactSize  = 7.2
	tableFloor   = 6.0 // type is made no smaller to fit a table's width
	tableLeading = 1.28
	smallTable   = 0.2 // of a page: a table that is not split
)

// grid is a table while it is set.
type grid struct {
	s     *setter
	t     *report.Table
	x     float64
	look  look
	padX  float64
	padY  float64
	mark  float64 // room for the pointer before the first cell
	head  [][]word
	cells [][][]word // by row and column
	cols  []gridColumn
	width float64
}

// gridColumn is a column while its width is sought. Lengths are without
// padding.
type gridColumn struct {
	align         report.Align
	wide          bool
	least, most   float64 // its widest word, and its widest cell on one line
	before, after float64 // of decimals: the widest on either side of the point
	x, width      float64
}

// table sets a table: caption, header, rows and notes.
func (s *setter) table(t *report.Table, a area) []*piece {
	if len(t.Columns) == 0 {
		return append(s.tableCaption(t, a), s.tableNotes(t, a)...)
	}
	g := &grid{s: s, t: t, x: a.x}
	g.setType(a, tableSize)
	if t.Compact {
		g.setType(a, compactSize)
	}
	g.setWords()
	if size := g.sizeFor(a.width); size < g.look.size {
		g.setType(a, size)
		g.setWords()
	}
	g.setWidths(a.width)

	head := g.headPiece()
	rows := g.rowPieces(head)
	keepEnds(rows)
	if height(rows, true) < smallTable*s.bodyHeight() {
		keepAll(rows)
	}
	out := append(s.tableCaption(t, a), head)
	keepAll(out)
	head.keep = true
	notes := s.tableNotes(t, a)
	if len(rows) > 0 && len(notes) > 0 {
		rows[len(rows)-1].keep = true
	}
	return append(append(out, rows...), notes...)
}

func (g *grid) setType(a area, size float64) {
	g.look = a.look
	g.look.size = min(size, a.size)
	g.look.colour = ink
	g.look.leading = tableLeading * g.look.size
	g.padX, g.padY = 0.6*g.look.size, 0.34*g.look.size
	if g.t.Compact {
		g.padX, g.padY = 0.55*g.look.size, 0.12*g.look.size
	}
	g.mark = 0
	for _, r := range g.t.Rows {
		if r.Marked {
			g.mark = 1.05 * g.look.size
			return
		}
	}
}

// setWords makes words of all cells and measures the columns.
func (g *grid) setWords() {
	bolder := g.look.style
	bolder.font = bold(bolder.font)
	g.cols = make([]gridColumn, len(g.t.Columns))
	g.head = make([][]word, len(g.t.Columns))
	for i, c := range g.t.Columns {
		g.head[i] = g.s.words(c.Header, bolder)
		g.cols[i] = gridColumn{align: c.Align, wide: c.Wide, least: widest(g.head[i]), most: natural(g.head[i])}
	}
	g.cells = make([][][]word, len(g.t.Rows))
	for r, row := range g.t.Rows {
		if len(row.Cells) > len(g.cols) {
			panic(fmt.Sprintf("pdf: a row of %d cells in a table of %d columns", len(row.Cells), len(g.cols)))
		}
		st := g.look.style
		if row.Emphasis {
			st = bolder
		}
		g.cells[r] = make([][]word, len(row.Cells))
		for i, cell := range row.Cells {
			g.cells[r][i] = g.s.words(cell, st)
			g.measure(&g.cols[i], g.cells[r][i])
		}
	}
	for i := range g.cols {
		c := &g.cols[i]
		c.least = max(c.least, c.before+c.after)
		c.most = max(c.most, c.least)
	}
}

// tableCaption sets the caption, kept with the table below it.
func (s *setter) tableCaption(t *report.Table, a area) []*piece {
	a.look = a.caption()
	pieces := s.paragraph(t.Caption, a)
	if len(pieces) > 0 {
		pieces = append(pieces, space(3))
	}
	keepAll(pieces)
	return pieces
}

// tableNotes sets the notes in small type.
func (s *setter) tableNotes(t *report.Table, a area) []*piece {
	a.look = a.caption()
	a.size, a.leading = min(noteSize, a.size), min(noteLeading, a.leading)
	var out []*piece
	for _, note := range t.Notes {
		pieces := s.paragraph(note, a)
		if len(pieces) > 0 {
			pieces[0].above = 1.5
		}
		out = append(out, pieces...)
	}
	if len(out) > 0 {
		out[0].above = 3.5
	}
	if height(out, true) < 0.75*smallTable*s.bodyHeight() {
		keepAll(out)
	}
	return out
}

// The rules of a table.
const (
	heavyRule = 0.9
	thinRule  = 0.5
	hairRule  = 0.35
)

// headPiece sets the header between its rules.
func (g *grid) headPiece() *piece {
	cells := make([][]setLine, len(g.cols))
	deepest := 0
	for i, words := range g.head {
		cells[i] = g.s.breakLines(words, g.cols[i].width)
		deepest = max(deepest, len(cells[i]))
	}
	if deepest == 0 {
		return &piece{height: 1, ops: []op{rule(g.x, 0, g.width, heavyRule, ink)}}
	}
	p := &piece{height: float64(deepest)*g.look.leading + 2*g.padY + 1}
	p.ops = append(p.ops, rule(g.x, 0, g.width, heavyRule, ink), rule(g.x, p.height, g.width, thinRule, ink))
	for i, lines := range cells {
		y := g.padY + 0.5 + float64(deepest-len(lines))*g.look.leading
		p.addLines(g, i, lines, y)
	}
	return p
}

// rowPieces sets the rows. Each repeats the header where it starts a page,
// unless the header is so tall that it would crowd out the rows.
func (g *grid) rowPieces(head *piece) []*piece {
	var repeat []*piece
	if head.height < g.s.bodyHeight()/3 {
		repeat = []*piece{head}
	}
	var out []*piece
	for r := range g.t.Rows {
		pieces := g.rowPiece(r)
		if g.t.Rows[r].Emphasis && len(out) > 0 {
			out[len(out)-1].keep = true
		}
		out = append(out, pieces...)
	}
	for _, p := range out {
		p.repeat = repeat
	}
	if n := len(out); n > 0 {
		p := out[n-1]
		p.ops = append(p.ops, rule(g.x, p.height, g.width, heavyRule, ink))
	}
	return out
}

// rowPiece sets a row as one piece. A row taller than half a page is one
// piece for each of its lines.
func (g *grid) rowPiece(r int) []*piece {
	row := g.t.Rows[r]
	cells := make([][]setLine, len(g.cells[r]))
	deepest := 1
	for i, words := range g.cells[r] {
		cells[i] = g.s.breakLines(words, g.cols[i].width)
		deepest = max(deepest, len(cells[i]))
	}
	var pieces []*piece
	if h := float64(deepest)*g.look.leading + 2*g.padY; h <= g.s.bodyHeight()/2 {
		pieces = []*piece{g.slice(cells, 0, deepest, g.padY, g.padY)}
	} else {
		for n := range deepest {
			pieces = append(pieces, g.slice(cells, n, n+1, 0, 0))
		}
		pieces = append(append([]*piece{space(g.padY)}, pieces...), space(g.padY))
		keepEnds(pieces)
		keepEnds(pieces[1 : len(pieces)-1])
	}
	first, last := pieces[0], pieces[len(pieces)-1]
	if row.Marked {
		for _, p := range pieces {
			p.ops = append([]op{&fillOp{g.x, 0, g.width, p.height, tint}}, p.ops...)
		}
		first.ops = append(first.ops, pointer(g.x+0.7*g.padX, g.padY+g.look.baseline()-0.36*g.look.size, 0.8*g.look.size, accent))
	}
	if row.Emphasis {
		first.ops = append(first.ops, rule(g.x, 0, g.width, thinRule, ink))
	}
	last.ops = append(last.ops, rule(g.x, last.height, g.width, hairRule, hair))
	return pieces
}

// slice sets some lines of the cells of a row.
func (g *grid) slice(cells [][]setLine, from, to int, above, below float64) *piece {
	p := &piece{height: above + float64(to-from)*g.look.leading + below}
	for i, lines := range cells {
		p.addLines(g, i, lines[min(from, len(lines)):min(to, len(lines))], above)
	}
	return p
}

// addLines puts lines of a cell in column i, the first with its top at y.
func (p *piece) addLines(g *grid, i int, lines []setLine, y float64) {
	c := g.cols[i]
	x := c.x
	for _, l := range lines {
		align := c.align
		if before, ok := g.onPoint(c, l, len(lines)); ok {
			x, align = c.x+c.width-c.after-before, report.AlignLeft
		}
		p.ops = append(p.ops, g.s.lineOps(l, align, x, y+g.look.baseline(), c.width)...)
		p.footnotes = append(p.footnotes, l.notes...)
		y += g.look.leading
	}
}

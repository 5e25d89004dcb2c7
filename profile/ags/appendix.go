package ags

import (
	"cmp"
	"slices"

	"shearbook/profile"
)

// entry is a value in a row of the file that a profile was made from.
type entry struct {
	source             *source
	row                rowAt
	column             int      // of the appendix, in which the value stands
	from               *measure // column of the depth; nil if there is none
	depth, base, value string   // as the file gives them
}

// appendix is a profile in the words of the file: a row for each row that it
// was made from, in the order of the file, with its depth and, in a column for
// each heading, its value.
func (r *reader) appendix(s *set, layers []profile.Layer) *profile.Reading {
	a := appendix{r: r, entries: r.entries[:0]}
	first := profile.Column{Heading: "depth", Quantity: profile.Depth}
	if s.tested == profile.Unknown && !s.readings[0].point() {
		first = profile.Column{Heading: "top", Quantity: profile.Top}
	}
	a.columns = []profile.Column{first, {Heading: "base", Quantity: profile.Bottom}}
	if s.tested != profile.Unknown {
		a.hole(s.hole)
		return a.reading(s)
	}
	a.main, a.mainColumn = s, a.columnOf(s, profile.Vs)
	a.fields = make([]fields, len(s.readings))
	for i := range s.readings {
		a.fields[i] = s.readings[i].fields
	}
	s.readings = nil // the layers are made, and there may be many
	if p := r.p[s.run]; p != nil && slices.ContainsFunc(layers, func(l profile.Layer) bool { return l.Has(profile.GivenVp) }) && s.source.own == nil {
		a.set(p, profile.Vp)
	}
	if s.source.own == nil {
		a.hole(s.hole)
	}
	return a.reading(s)
}

// reading is the finished appendix.
func (a *appendix) reading(s *set) *profile.Reading {
	reading := a.r.reading
	reading.Metadata = slices.Concat(a.r.header.metadata, s.hole.metadata, s.metadata)
	reading.Rows = a.rows()
	reading.Columns = a.columns
	a.r.entries = a.entries // room for the next
	return &reading
}

// appendix is an appendix in the making.
type appendix struct {
	r          *reader
	columns    []profile.Column
	main       *set     // whose readings the layers were made of; nil if none were
	mainColumn int      // of its velocities
	fields     []fields // of these readings
	entries    []entry
	mixed      bool // the depths have several units, which stand in the cells
}

// column is the column of a heading, made where there is none.
func (a *appendix) column(heading, unit string, q profile.Quantity) int {
	i := slices.IndexFunc(a.columns, func(c profile.Column) bool { return c.Heading == heading && c.Quantity == q })
	if i < 0 {
		i = len(a.columns)
		a.columns = append(a.columns, profile.Column{Heading: heading, Unit: unit, Quantity: q})
	}
	return i
}

// set enters the readings of a set.
func (a *appendix) set(s *set, q profile.Quantity) {
	column := a.columnOf(s, q)
	for i := range s.readings {
		a.entries = append(a.entries, a.readingEntry(s, &s.readings[i].fields, column))
	}
}

// readingEntry is the entry of a reading.
func (a *appendix) readingEntry(s *set, x *fields, column int) entry {
	c := &a.r.again
	e := entry{source: s.source, row: x.row, column: column, from: &s.source.depths[x.from], depth: c.fieldAt(x.depthOff), base: c.fieldAt(x.baseOff), value: c.fieldAt(x.valueOff)}
	if s.source.unitColumn > 0 && s.unit == "" {
		c.g = s.source.g
		c.to(x.row)
		e.value += " " + c.text(s.source.unitColumn)
	}
	return e
}

// columnOf makes the columns of a set, and returns that of its velocities.
func (a *appendix) columnOf(s *set, q profile.Quantity) int {
	heading := s.source.name
	if heading == "WGPT_RDNG" {
		heading += " " + s.what
	}
	column := a.column(heading, s.unit, q)
	if s.source.own == nil {
		return column
	}
	g := s.source.g
	for _, k := range quantityHeadings {
		if i := g.column(k.heading); i > 0 {
			a.column(k.heading, g.unit(i), k.q)
		}
	}
	for _, k := range ownWords {
		if g.column(k.heading) > 0 {
			a.column(k.heading, "", k.q)
		}
	}
	return column
}

// hole enters strata and tests, whose rows are read once for all profiles of
// the hole.
func (a *appendix) hole(h *hole) {
	if h.entries == nil {
		a.r.enter(h)
	}
	for _, e := range h.entries {
		unit := e.source.unit
		if e.source.q == profile.Soil {
			unit = ""
		}
		e.column = a.column(e.source.name, unit, e.source.q)
		a.entries = append(a.entries, e)
	}
}

// enter reads the rows of strata and tests again.
func (r *reader) enter(h *hole) {
	for i := range h.strata {
		h.entries = append(h.entries, r.entry(h.strata[i].source, h.strata[i].row))
	}
	for _, k := range attached {
		for i := range h.results {
			if x := &h.results[i]; x.source.q == k.q {
				h.entries = append(h.entries, r.entry(x.source, x.row))
			}
		}
	}
}

// entry reads a row again.
func (r *reader) entry(s *source, row rowAt) entry {
	c := &r.again
	c.g = s.g
	c.to(row)
	e := entry{source: s, row: row, base: c.text(s.base.i), value: s.cell(c)}
	_, column, _ := s.depth(c)
	for i := range s.depths {
		if s.depths[i].i == column {
			e.from, e.depth = &s.depths[i], c.text(column)
		}
	}
	return e
}

// rows are the rows of the appendix, in the order of the file. Several values
// of one row of the file stand in one.
func (a *appendix) rows() []profile.Row {
	a.commonUnit()
	var list rowList
	list.rows = make([]profile.Row, 0, len(a.entries)+len(a.fields))
	cells := make([]string, len(a.columns))
	var at rowAt
	open := false
	for e := range a.inOrder {
		if open && e.row != at {
			list.add(int(at.line), cells)
		}
		if !open || e.row != at {
			clear(cells)
			at, open = e.row, true
		}
		a.cells(cells, e)
	}
	if open {
		list.add(int(at.line), cells)
	}
	return list.finish()
}

// inOrder yields the readings and the other entries in the order of the file.
// The readings may be many, and are made entries one by one.
func (a *appendix) inOrder(yield func(*entry) bool) {
	slices.SortStableFunc(a.entries, func(x, y entry) int { return cmp.Compare(x.row.off, y.row.off) })
	others := a.entries
	slices.SortStableFunc(a.fields, func(x, y fields) int { return cmp.Compare(x.row.off, y.row.off) })
	for i := range a.fields {
		for len(others) > 0 && others[0].row.off < a.fields[i].row.off {
			if !yield(&others[0]) {
				return
			}
			others = others[1:]
		}
		if e := a.readingEntry(a.main, &a.fields[i], a.mainColumn); !yield(&e) {
			return
		}
	}
	for i := range others {
		if !yield(&others[i]) {
			return
		}
	}
}

// rowList is rows in the making, whose cells become strings many rows at a
// time.
type rowList struct {
	rows    []profile.Row
	cells   []byte // of the rows from pending on
	ends    []int
	pending int
}

func (l *rowList) add(line int, cells []string) {
	for i, text := range cells {
		if i > 0 {
			l.cells = append(l.cells, profile.CellSeparator...)
		}
		l.cells = append(l.cells, text...)
	}
	l.rows, l.ends = append(l.rows, profile.Row{Line: line}), append(l.ends, len(l.cells))
	if len(l.cells) >= 1<<16 {
		l.flush()
	}
}

func (l *rowList) flush() {
	all, from := string(l.cells), 0
	for i, to := range l.ends {
		l.rows[l.pending+i].Cells = all[from:to]
		from = to
	}
	l.pending, l.cells, l.ends = len(l.rows), l.cells[:0], l.ends[:0]
}

func (l *rowList) finish() []profile.Row {
	l.flush()
	return l.rows
}

// commonUnit puts the unit of the depths into the heading if they have one.
func (a *appendix) commonUnit() {
	var units []string
	var last *source
	look := func(s *source) {
		if s == last {
			return
		}
		last = s
		for _, m := range append(slices.Clip(s.depths), s.base) {
			if m.i > 0 && !slices.Contains(units, m.unit) {
				units = append(units, m.unit)
			}
		}
	}
	if a.main != nil {
		look(a.main.source)
	}
	for i := range a.entries {
		look(a.entries[i].source)
	}
	if a.mixed = len(units) != 1; !a.mixed {
		a.columns[0].Unit, a.columns[1].Unit = units[0], units[0]
	}
}

// cells puts the values of an entry into a row.
func (a *appendix) cells(cells []string, e *entry) {
	cells[0], cells[1], cells[e.column] = e.depth, e.base, e.value
	if a.mixed && e.depth != "" && e.from != nil {
		cells[0] += " " + e.from.unit
	}
	if a.mixed && e.base != "" {
		cells[1] += " " + e.source.base.unit
	}
	if e.source.own == nil {
		return
	}
	c := &a.r.again
	c.g = e.source.g
	c.to(e.row)
	for i := 3; i < len(a.columns); i++ {
		if k := c.g.column(a.columns[i].Heading); k > 0 {
			cells[i] = c.text(k)
		}
	}
}

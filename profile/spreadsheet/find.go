package spreadsheet

import (
	"strings"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// table is a table that was found on a sheet.
type table struct {
	delimited.Table
	sheet    *sheet
	from, to int    // its columns, from 0: [from, to)
	numbers  []int  // columns of depth and of Vs, N and su
	velocity bool   // it has a column of Vs
	title    string // in the row nearest above its header
	header   int    // row
	number   int    // among the tables of its sheet, from 1
	hidden   []int  // rows
	below    []row  // text below it
	blanks   [][2]int
	gap      bool // a blank row, or text, came after its last layer
	last     int  // row last added
}

// finder finds the tables of a sheet row by row.
type finder struct {
	*reader
	sheet *sheet
	open  []*table // side by side
	above []row    // rows that belong to no table yet
	count int
}

// row takes the next row that is not blank.
func (f *finder) row(r row) {
	if headers := f.headersOf(&r); len(headers) > 0 {
		f.start(&r, headers)
		return
	}
	kept := false
	for _, t := range f.open {
		kept = t.row(&r) || kept
	}
	f.consider(&r)
	if !kept && len(f.above) < delimited.MaxMetadata {
		f.above = append(f.above, r)
	}
}

// span is a range of columns: [from, to).
type span struct{ from, to int }

// headersOf returns the columns of the headers in a row: one or several that
// blank cells separate, each with a depth and Vs, N or su.
func (f *finder) headersOf(r *row) []span {
	var found []span
	whole := span{-1, 0}
	for i := 0; i < len(r.cells); {
		if r.cells[i] == "" {
			i++
			continue
		}
		block := span{i, i}
		for block.to < len(r.cells) && r.cells[block.to] != "" {
			block.to++
		}
		if whole.from < 0 {
			whole.from = block.from
		}
		whole.to, i = block.to, block.to
		if f.isHeader(r.cells[block.from:block.to]) {
			found = append(found, block)
		}
	}
	switch {
	case whole.from >= 0 && len(found) < 2 && f.isHeader(r.cells[whole.from:whole.to]):
		return []span{whole}
	case len(found) >= 2:
		return found
	}
	return nil
}

// isHeader reports whether cells name a depth, and Vs or else N or su.
func (f *finder) isHeader(cells []string) bool {
	vs, depth := false, false
	for _, text := range cells {
		if numeric(text) {
			continue // most rows are layers, and soon told from headers so
		}
		switch f.mapping.Heading(text) {
		case profile.Vs, profile.N, profile.Su:
			vs = true
		case profile.Top, profile.Bottom, profile.Thickness:
			depth = true
		}
	}
	return vs && depth
}

// start starts the tables whose header is in row r. They end those above them.
func (f *finder) start(r *row, headers []span) {
	open := f.open[:0:0]
	for _, t := range f.open {
		overlaps := false
		for _, h := range headers {
			overlaps = overlaps || h.from < t.to && t.from < h.to
		}
		if !overlaps {
			open = append(open, t)
		}
	}
	f.handOver()
	f.open = open
	for _, h := range headers {
		f.count++
		t := &table{sheet: f.sheet, from: h.from, to: h.to, header: r.number, number: f.count}
		t.Column = h.from + 1
		t.Mapping = f.mapping
		for i := h.from; i < h.to; i++ {
			f.mapping.Mark(f.mapped, r.cells[i])
			switch f.mapping.Heading(r.cells[i]) {
			case profile.Vs:
				t.velocity = true
				t.numbers = append(t.numbers, i)
			case profile.N, profile.Su, profile.Top, profile.Bottom, profile.Thickness:
				t.numbers = append(t.numbers, i)
			}
		}
		t.state(f.above, len(headers) > 1)
		t.add(r)
		f.open = append(f.open, t)
		f.tables = append(f.tables, t)
	}
	f.above = nil
}

// handOver makes the text below a table text above the next one, if it comes
// directly before it.
func (f *finder) handOver() {
	for _, t := range f.open {
		f.above = append(f.above, t.below...)
		t.below = nil
	}
}

// finish notes text below the last tables that belongs to none.
func (f *finder) finish() {
	for _, t := range f.open {
		if len(t.below) == 0 {
			t.below = f.above
		}
	}
}

// row adds a row to the table, or to the text below it. It returns false if
// the row has nothing in the table's columns.
func (t *table) row(r *row) bool {
	filled, numbers := 0, 0
	for i := t.from; i < t.to; i++ {
		if r.cell(i) != "" {
			filled++
		}
	}
	for _, i := range t.numbers {
		if numeric(r.cell(i)) {
			numbers++
		}
	}
	t.gap = t.gap || r.number > t.last+1
	switch {
	case filled == 0:
		return false
	case numbers > 0, filled > 1 && !t.gap, filled > 0 && t.Rows() == 1:
		t.add(r)
	default:
		t.gap = true
		t.below = append(t.below, *r)
	}
	return true
}

// numeric reports whether a text begins as a number does.
func numeric(text string) bool {
	text = strings.TrimLeft(text, "+-−.,")
	return text != "" && text[0] >= '0' && text[0] <= '9'
}

// add adds a row of the table.
func (t *table) add(r *row) {
	cells := make([]string, t.to-t.from)
	for i := range cells {
		if cells[i] = r.cell(t.from + i); cells[i] == "" && t.sheet.inspected {
			t.blanks = append(t.blanks, [2]int{r.number, t.from + i + 1})
		}
	}
	t.Row(r.number, cells)
	t.totals(r)
	t.gap, t.last = false, r.number
	if r.hidden {
		t.hidden = append(t.hidden, r.number)
	}
}

package spreadsheet

import (
	"strings"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// state reads what stands in the rows above the table's header: statements,
// titles and other text. Of tables side by side each takes what stands in its
// own columns.
func (t *table) state(above []row, narrow bool) {
	for i := range above {
		r := &above[i]
		if len(r.cells) == 0 {
			continue
		}
		from, to := 0, len(r.cells)
		if narrow {
			from, to = min(t.from, to), min(t.to, to)
		}
		t.stateRow(r, from, to)
	}
}

// stateRow reads one row above the header. A title is a row with text in one
// cell that states nothing.
func (t *table) stateRow(r *row, from, to int) {
	for i := from; i < to; i++ {
		text := strings.TrimSpace(strings.TrimLeft(r.cells[i], "#"))
		if text == "" {
			continue
		}
		key, value, colon := strings.Cut(text, ":")
		switch {
		case colon && delimited.Statement(key) && strings.TrimSpace(value) != "":
			t.State(strings.TrimSpace(key), strings.TrimSpace(value), r.number, i+1)
		case delimited.Statement(key):
			i = t.stateBeside(r, strings.TrimSpace(key), i, to)
		default:
			t.State("", text, r.number, i+1)
			if countFilled(r.cells[from:to]) == 1 {
				t.title = text
			}
		}
	}
}

// stateBeside reads a statement whose value stands in the cells to the right
// of its key, up to the next key. It returns the last column that it read.
func (t *table) stateBeside(r *row, key string, i, to int) int {
	var values []string
	at, last := i, i
	for j := i + 1; j < to; j++ {
		text := r.cells[j]
		if next, _, _ := strings.Cut(text, ":"); text != "" && len(values) > 0 && delimited.Statement(next) {
			break
		}
		if text != "" {
			if len(values) == 0 {
				at = j
			}
			values = append(values, text)
			last = j
		}
	}
	if len(values) == 0 {
		t.State("", key, r.number, i+1) // a word, not a statement
		return i
	}
	t.State(key, strings.Join(values, " "), r.number, at+1)
	return last
}

func countFilled(cells []string) int {
	n := 0
	for _, text := range cells {
		if text != "" {
			n++
		}
	}
	return n
}

// notes are the notes on where profile p of the table stood.
func (t *table) notes(p *profile.Profile) []profile.Note {
	rows := p.Reading.Rows
	first, last := rows[0].Line, rows[len(rows)-1].Line
	var notes []profile.Note
	var hidden []string
	at := 0
	for _, n := range t.hidden {
		if n >= first && n <= last {
			if at == 0 {
				at = n
			}
			hidden = append(hidden, number(n))
		}
	}
	note := func(id, text string, row, column int) {
		notes = append(notes, profile.Note{ID: id, Text: text, Place: p.Reading.Place(row, column)})
	}
	if len(hidden) > 0 {
		note("hidden-rows", "rows that are hidden in the sheet were read: "+some(hidden), at, t.from+1)
	}
	var columns []string
	for i := t.from; i < t.to; i++ {
		if t.sheet.hiddenColumns[i] {
			columns = append(columns, letters(i+1))
		}
	}
	if len(columns) > 0 {
		note("hidden-columns", "columns that are hidden in the sheet were read: "+some(columns), first, t.from+1)
	}
	if t.sheet.hidden {
		note("hidden-sheet", "the sheet is hidden in the workbook and was read", first, t.from+1)
	}
	if len(t.below) > 0 {
		note("row-not-read", "text below the table was not read: "+t.belowText(), t.below[0].number, t.from+1)
	}
	if !t.sheet.inspected {
		note("sheet-not-inspected", "the sheet is too large to be looked through for merged cells, hidden columns and formulas without a stored value", first, t.from+1)
	}
	return notes
}

// belowText is the text below the table, row by row.
func (t *table) belowText() string {
	var list []string
	for i := range t.below {
		text := strings.Join(strings.Fields(strings.Join(t.below[i].cells, " ")), " ")
		list = append(list, profile.Quote(text))
	}
	return some(list)
}

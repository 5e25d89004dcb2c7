package delimited

import (
	"bytes"
	"strings"
	"unicode"

	"shearbook/profile"
)

// Table is a table of layers cell by cell, as the reader of a spreadsheet
// finds it. What Read says of headings, units, depths, numbers and limits
// holds for it too, but numbers with a point and text with decimal commas may
// stand side by side.
type Table struct {
	Name   string // of a profile that no column and no statement names; the file's if ""
	Column int    // column of the sheet, from 1, in which the first cell of a row stands

	Mapping Mapping // of its headings; one that it does not have is let pass

	text       []byte  // its rows with tabs between their cells
	rows       []int32 // row of the sheet in which each line of text stands
	totals     map[int32]int32
	statements []statement
}

// Rows returns how many rows the table has, its header included.
func (t *Table) Rows() int { return len(t.rows) }

// State adds a statement about all profiles of the table, as a line
// "# key: value" of a text file does. Its value stands in the given row and
// column of the sheet. A key of "" makes it a comment.
func (t *Table) State(key, value string, row, column int) {
	text := value
	if key != "" {
		text = key + ": " + value
	}
	t.statements = append(t.statements, statement{text: text, key: key, value: value, spot: spot{row, column}})
}

// Row adds a row that stands in the given row of the sheet, the header first.
// All rows must have as many cells as the header. Control characters become
// blanks.
func (t *Table) Row(row int, cells []string) {
	for i, text := range cells {
		if i > 0 {
			t.text = append(t.text, '\t')
		}
		t.cell(text)
	}
	t.text = append(t.text, '\n')
	t.rows = append(t.rows, int32(row))
}

// Totals says that the cell in the given row and column of the sheet holds a sum or
// an average of the cells above it, or the label of a row of such.
func (t *Table) Totals(row, column int) {
	if t.totals == nil {
		t.totals = map[int32]int32{}
	}
	t.totals[int32(row)] = int32(column)
}

// cell adds the text of a cell, quoted where the scanner would take it for
// something else.
func (t *Table) cell(text string) {
	text = strings.ToValidUTF8(strings.TrimSpace(text), "�")
	if strings.ContainsFunc(text, unicode.IsControl) {
		text = strings.TrimSpace(strings.Map(withoutControl, text))
	}
	if !strings.HasPrefix(text, `"`) {
		t.text = append(t.text, text...)
		return
	}
	t.text = append(t.text, '"')
	t.text = append(t.text, strings.ReplaceAll(text, `"`, `""`)...)
	t.text = append(t.text, '"')
}

func withoutControl(r rune) rune {
	if unicode.IsControl(r) {
		return ' '
	}
	return r
}

// Read returns the profiles of the table. Of the options it takes the units;
// the reading says which file and
// sheet they come from; rows, columns and metadata are added to it.
func (t *Table) Read(reading profile.Reading, opt Options) ([]profile.Profile, error) {
	r := reader{
		collector: collector{file: reading.File, sheet: reading.Sheet},
		reading:   reading,
		tableName: t.Name,
		mapping:   t.Mapping,
	}
	var err error
	if r.given, err = ParseUnits(opt.Units); err != nil {
		return nil, err
	}
	r.scan = newScanner(t.text)
	r.scan.grid = &grid{rows: t.rows, column: t.Column, totals: t.totals}
	r.preamble = preamble{statements: t.statements, seen: map[string]int{}, forced: '\t'}
	_ = r.apply() && r.readHeader() && r.readRows() && r.assemble()
	if err := r.err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

// grid is where in a sheet the lines of a table's text stand.
type grid struct {
	rows   []int32
	column int
	totals map[int32]int32 // column of the cell by which a row is one of totals, by row
}

// spot is the cell that begins after what stands before it in its line.
func (g *grid) spot(line int, before []byte) spot {
	if len(g.rows) == 0 {
		return spot{}
	}
	row := g.rows[min(line, len(g.rows))-1]
	return spot{int(row), g.column + bytes.Count(before, []byte{'\t'})}
}

// Statement reports whether key is one of the keys that are read above a
// header.
func Statement(key string) bool { return keyOf(key) != "" }

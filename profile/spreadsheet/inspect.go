package spreadsheet

import (
	"github.com/xuri/excelize/v2"

	"shearbook/profile"
)

// merged is a range of merged cells: rows and columns from 0, both ends
// included, and the text of its first cell once that was read.
type merged struct {
	top, left, bottom, right int
	text                     string
}

// inspect looks for merged cells and hidden columns. It returns false if the
// sheet is damaged.
func (s *sheet) inspect(f *excelize.File, width int) bool {
	ranges, err := f.GetMergeCells(s.name, true)
	if err != nil {
		return false
	}
	for _, m := range ranges {
		left, top, err1 := excelize.CellNameToCoordinates(m.GetStartAxis())
		right, bottom, err2 := excelize.CellNameToCoordinates(m.GetEndAxis())
		if err1 == nil && err2 == nil {
			s.merged = append(s.merged, merged{top: top - 1, left: left - 1, bottom: bottom - 1, right: right - 1})
		}
	}
	s.hiddenColumns = map[int]bool{}
	for i := range width {
		letters, err := excelize.ColumnNumberToName(i + 1)
		if err != nil {
			return false
		}
		visible, err := f.GetColVisible(s.name, letters)
		if err != nil {
			return false
		}
		s.hiddenColumns[i] = !visible
	}
	return true
}

// fill gives the cells of a range that is merged downward the text of its
// first cell. A range that is merged across only, such as a title, is left
// alone: its text stands once.
func (s *sheet) fill(r *row, width int) {
	n := r.number - 1
	for i := range s.merged {
		m := &s.merged[i]
		if n < m.top || n > m.bottom || m.top == m.bottom || m.left >= width {
			continue
		}
		if n == m.top {
			m.text = r.cell(m.left)
			continue
		}
		for len(r.cells) <= m.left {
			r.cells = append(r.cells, "")
		}
		r.cells[m.left] = m.text
	}
}

// checkFormulas tells of formulas in the blank cells of tables: a program
// other than a spreadsheet wrote them, and nobody evaluated them yet.
func (s *sheet) checkFormulas(r *reader, f *excelize.File) bool {
	if !s.inspected {
		return true
	}
	for _, t := range r.tables {
		if t.sheet != s {
			continue
		}
		for _, at := range t.blanks {
			name, err := excelize.CoordinatesToCellName(at[1], at[0])
			if err != nil {
				continue
			}
			if formula, err := f.GetCellFormula(s.name, name); err == nil && formula != "" {
				r.fault(r.place(s.name, at[0], at[1]), "open the workbook in a spreadsheet program and save it",
					"the formula %s has no stored value", profile.Quote("="+formula))
			}
		}
		t.blanks = nil
	}
	return true
}

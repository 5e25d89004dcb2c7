package spreadsheet

import (
	"strings"

	"shearbook/profile"
)

// merged is a range of merged cells: rows and columns from 0, both ends
// included, and the text of its first cell once that was read.
type merged struct {
	top, left, bottom, right int
	text                     string
}

// merge takes a range of merged cells by its name, as "C2:C9". After more than
// MaxMerged of them the sheet is not inspected.
func (s *sheet) merge(name string) {
	first, last, found := strings.Cut(name, ":")
	if !found {
		last = first
	}
	left, top, ok1 := coordinates(first)
	right, bottom, ok2 := coordinates(last)
	switch {
	case !ok1 || !ok2:
	case len(s.merged) == MaxMerged:
		s.crowded = true
	default:
		s.merged = append(s.merged, merged{top: min(top, bottom) - 1, left: min(left, right) - 1, bottom: max(top, bottom) - 1, right: max(left, right) - 1})
	}
}

// hide takes a range of hidden columns, from 1. Ranges come in order and do not
// overlap (ISO/IEC 29500-1, 18.3.1.17); what was passed is not taken again, so
// that there are never more columns than a sheet has.
func (s *sheet) hide(first, last int) {
	for n := max(first, s.columns+1); n <= min(last, lastColumn); n++ {
		s.hiddenColumns[n-1] = true
		s.columns = n
	}
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
func (s *sheet) checkFormulas(r *reader) {
	for _, t := range r.tables {
		if t.sheet != s {
			continue
		}
		for _, at := range t.blanks {
			if formula, ok := s.formulas[at]; ok {
				r.fault(r.place(s.name, at[0], at[1]), "open the workbook in a spreadsheet program and save it", "%s has no stored value", formula)
			}
		}
		t.blanks = nil
	}
	s.formulas = nil
}

// formulaText names a formula. One that is shared with other cells has no text
// of its own.
func formulaText(text string) string {
	if text == "" {
		return "the formula"
	}
	return "the formula " + profile.Quote("="+text)
}

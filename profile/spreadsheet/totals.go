package spreadsheet

import (
	"strings"

	"shearbook/profile/delimited"
)

// adding are parts of the names of functions that make one number of many.
var adding = []string{"SUM", "AVERAGE", "SUBTOTAL", "AGGREGATE", "MEAN", "MEDIAN"}

// totals reports whether the formula of a cell, in a column and row from 1, adds
// up or averages a range of two or more rows above it in its own column. A sum
// over another column, such as a depth made of thicknesses, and an average across
// columns are no totals.
func totals(formula string, column, row int) bool {
	const longest = 1000 // bytes that are looked at
	formula = strings.ToUpper(formula[:min(len(formula), longest)])
	is := false
	for _, name := range adding {
		is = is || strings.Contains(formula, name)
	}
	if !is {
		return false
	}
	formula = strings.ReplaceAll(formula, "$", "")
	for i := strings.IndexByte(formula, ':'); i >= 0; {
		before := formula[:i]
		from := strings.LastIndexFunc(before, notName) + 1
		after := formula[i+1:]
		to := strings.IndexFunc(after, notName)
		if to < 0 {
			to = len(after)
		}
		left, top, ok1 := coordinates(before[from:])
		right, bottom, ok2 := coordinates(after[:to])
		sheet := from > 0 && before[from-1] == '!' // of another sheet, or of this by its name
		if ok1 && ok2 && !sheet && left <= column && column <= right && bottom > top && bottom < row {
			return true
		}
		next := strings.IndexByte(after, ':')
		if next < 0 {
			return false
		}
		i += 1 + next
	}
	return false
}

func notName(r rune) bool { return (r < 'A' || r > 'Z') && (r < '0' || r > '9') }

// totals tells the table of a formula in row r that adds up others, or of a
// label directly beside it.
func (t *table) totals(r *row) {
	for _, column := range r.totals {
		if column > t.from && column <= t.to {
			t.Totals(r.number, column)
			return
		}
	}
	for _, i := range []int{t.from - 1, t.to} {
		if i >= 0 && delimited.TotalsLabel([]byte(r.cell(i))) {
			t.Totals(r.number, i+1)
			return
		}
	}
}

package spreadsheet

import (
	"errors"
	"math"
	"strconv"
)

// errStopped ends the reading of a sheet after a fault that was told.
var errStopped = errors.New("stopped")

// sheet is what is known of one sheet.
type sheet struct {
	name          string
	hidden        bool
	inspected     bool
	crowded       bool         // it has more than MaxMerged merged ranges
	columns       int          // how many were looked at for being hidden
	hiddenColumns map[int]bool // from 0
	merged        []merged
	formulas      map[[2]int]string // without a stored value, by row and column from 1
}

// row is one row of a sheet.
type row struct {
	number int // from 1
	hidden bool
	cells  []string // from column A on
	totals []int    // columns, from 1, of formulas that add up cells above them
}

// readSheet finds the tables of a sheet. A sheet whose rectangle of cells is
// small is inspected first.
func (r *reader) readSheet(b *book, p *sheetPart) bool {
	if p.part == "" {
		return true // a sheet of a chart has no rows
	}
	s := &sheet{name: p.name, hidden: p.hidden, hiddenColumns: map[int]bool{}, formulas: map[[2]int]string{}}
	g := &gatherer{finder: finder{reader: r, sheet: s}}
	err := b.readRows(p.part, s, g.take)
	if err == nil {
		err = g.end()
	}
	if err != nil {
		r.unreadable(p.name, err)
		return false
	}
	if !s.inspected {
		s.hiddenColumns = nil
	}
	g.finish()
	s.checkFormulas(r)
	return true
}

// gatherer holds the rows of a sheet back until all of them, and what comes
// after them, were read. Once they fill a rectangle of more than MaxInspected
// cells it hands them over one by one.
type gatherer struct {
	finder
	held   []row // that are not blank
	large  bool
	width  int
	passed int // number of the row last handed over
}

// take takes the next row of the sheet.
func (g *gatherer) take(each row) error {
	g.width = max(g.width, len(each.cells))
	if !g.large && each.number*max(g.width, 1) > MaxInspected {
		g.large, g.sheet.formulas = true, nil
		if err := g.handOverHeld(); err != nil {
			return err
		}
	}
	if g.large {
		return g.pass(&each)
	}
	if !each.blank() {
		g.held = append(g.held, each)
	}
	return nil
}

// end inspects the rows that were held.
func (g *gatherer) end() error {
	if g.large {
		return nil
	}
	g.sheet.inspected = !g.sheet.crowded
	if g.sheet.inspected {
		for i := range g.held {
			g.sheet.fill(&g.held[i], g.width)
		}
	}
	return g.handOverHeld()
}

func (g *gatherer) handOverHeld() error {
	for i := range g.held {
		if err := g.pass(&g.held[i]); err != nil {
			return err
		}
	}
	g.held = nil
	return nil
}

// pass hands a row to the finder, within the limits.
func (g *gatherer) pass(each *row) error {
	g.rows += each.number - g.passed
	g.passed = each.number
	g.cells += len(each.cells)
	if !g.withinLimits() {
		return errStopped
	}
	if !each.blank() {
		g.row(*each)
	}
	return nil
}

func (r *reader) withinLimits() bool {
	switch {
	case r.rows > MaxSheetRows:
		r.stop("split the file", "the sheets have more than %d rows", MaxSheetRows)
	case r.cells > MaxCells:
		r.stop("keep the layers in a workbook of their own", "the sheets have more than %d cells", MaxCells)
	case len(r.tables) > MaxTables:
		r.stop("split the file", "the file has more than %d tables", MaxTables)
	default:
		return true
	}
	return false
}

func (r *row) blank() bool {
	for _, text := range r.cells {
		if text != "" {
			return false
		}
	}
	return true
}

// cell is the text in a column, from 0; blank beyond the last.
func (r *row) cell(i int) string {
	if i < len(r.cells) {
		return r.cells[i]
	}
	return ""
}

// digits is how many significant digits of a number a spreadsheet shows.
const digits = 15

// fifteenDigits shortens a stored number that has more digits than a
// spreadsheet shows: 0.30000000000000004 is 0.3.
func fifteenDigits(text string) string {
	if len(text) <= digits || len(text) > 40 {
		return text
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return text
	}
	return strconv.FormatFloat(v, 'g', digits, 64)
}

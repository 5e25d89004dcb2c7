package spreadsheet

import (
	"math"
	"regexp"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
)

// sheet is what is known of one sheet.
type sheet struct {
	name          string
	hidden        bool
	inspected     bool
	hiddenColumns map[int]bool // from 0
	merged        []merged
}

// row is one row of a sheet.
type row struct {
	number int // from 1
	hidden bool
	cells  []string // from column A on
}

// readSheet finds the tables of a sheet. A sheet whose rectangle of cells is
// small is inspected first.
func (r *reader) readSheet(b *book, name string) bool {
	visible, _ := b.file.GetSheetVisible(name)
	s := &sheet{name: name, hidden: !visible}
	small, height, width := r.smallRows(b, name)
	fd := finder{reader: r, sheet: s}
	if b.damaged {
		r.damaged(name)
		return false
	}
	if small == nil {
		if !r.eachRow(b, name, fd.row) {
			return false
		}
		fd.finish()
		return true
	}
	if s.inspected = b.inspected && len(small) > 0; s.inspected && !s.inspect(b.file, width) {
		r.damaged(name)
		return false
	}
	r.rows += height
	for i := range small {
		r.cells += len(small[i].cells)
		s.fill(&small[i], width)
		fd.row(small[i])
	}
	if !r.withinLimits() {
		return false
	}
	fd.finish()
	return s.checkFormulas(r, b.file)
}

// smallRows returns the rows of a sheet, its height and its width; nil if it
// is larger than MaxInspected.
func (r *reader) smallRows(b *book, name string) (rows []row, height, width int) {
	rows = []row{}
	b.eachRow(name, func(each row) bool {
		height, width = each.number, max(width, len(each.cells))
		if height*max(width, 1) > MaxInspected {
			rows = nil
			return false
		}
		if !each.blank() {
			rows = append(rows, each)
		}
		return true
	})
	return rows, height, width
}

// eachRow calls do for each row of a sheet that is not blank, within the
// limits.
func (r *reader) eachRow(b *book, name string, do func(row)) bool {
	return b.eachRow(name, func(each row) bool {
		r.rows++
		r.cells += len(each.cells)
		if !r.withinLimits() {
			return false
		}
		if !each.blank() {
			do(each)
		}
		return true
	})
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

// eachRow calls do for every row of a sheet until it returns false; then it
// returns false. A sheet of charts has no rows.
func (b *book) eachRow(name string, do func(row) bool) bool {
	stored, err := b.file.Rows(name)
	if err != nil {
		return true
	}
	defer stored.Close()
	shown := stored
	if b.formats {
		if shown, err = b.file.Rows(name); err != nil {
			return true
		}
		defer shown.Close()
	}
	for n := 1; stored.Next(); n++ {
		hidden := stored.GetRowOpts().Hidden
		cells, err := stored.Columns()
		if err != nil {
			b.damaged = true
			return false
		}
		if b.formats {
			shown.Next()
			formatted, _ := shown.Columns(excelize.Options{RawCellValue: false})
			asShown(cells, formatted)
		}
		for i := range cells {
			cells[i] = fifteenDigits(strings.TrimSpace(cells[i]))
		}
		if !do(row{n, hidden, cells}) {
			return false
		}
	}
	b.damaged = stored.Error() != nil
	return !b.damaged
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

// asShown replaces stored numbers that are shown as percentages or dates.
func asShown(stored, shown []string) {
	for i := range min(len(stored), len(shown)) {
		if stored[i] == shown[i] {
			continue
		}
		v, err := strconv.ParseFloat(stored[i], 64)
		switch {
		case err != nil:
		case strings.HasSuffix(shown[i], "%"):
			stored[i] = strconv.FormatFloat(v*100, 'g', digits, 64)
		case v >= 20000 && v < 80000 && date.MatchString(shown[i]): // 1954 to 2119, counted in days from 1900
			stored[i] = shown[i]
		}
	}
}

// date is how a date is shown: 5/4/26, 2026-04-05, 5.4.26, 04-May, May 2026.
var date = regexp.MustCompile(`\d[-/]\d|\d\.\d+\.\d|\d[- ]\pL{3}|^\pL{3}`)

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

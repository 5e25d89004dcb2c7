package batch

import (
	"io"
	"strconv"
	"strings"
	"unicode/utf16"

	"shearbook/profile/spreadsheet"
	"shearbook/report"
)

// workbook writes the rows of summary.csv as a workbook: on a sheet as many
// as it holds, the rest on the next. Texts are typed as texts, so that a name
// such as =1+1 stays a name.
type workbook struct {
	out    *spreadsheet.Writer
	cells  []spreadsheet.Cell
	sheets int
	most   int // rows of a sheet, below the caution and the headings
	rows   int // of the sheet that is open
}

func newWorkbook(w io.Writer) *workbook {
	return &workbook{out: spreadsheet.NewWriter(w), cells: make([]spreadsheet.Cell, len(Columns)), most: spreadsheet.MaxRows - 2}
}

// sheet begins the next sheet.
func (b *workbook) sheet() error {
	b.sheets++
	b.rows = 0
	name := "summary"
	if b.sheets > 1 {
		name += " " + strconv.Itoa(b.sheets)
	}
	var columns []spreadsheet.Column
	for _, c := range Columns {
		columns = append(columns, spreadsheet.Column{Heading: c.Name})
	}
	return b.out.Sheet(name, columns, []spreadsheet.Cell{spreadsheet.Text(report.Caution)})
}

func (b *workbook) row(t *table, record [][]byte) error {
	if b.sheets == 0 || b.rows == b.most {
		if err := b.sheet(); err != nil {
			return err
		}
	}
	b.rows++
	for i, cell := range record {
		switch {
		case len(cell) == 0:
			b.cells[i] = spreadsheet.Cell{}
		case Columns[i].Type == "string":
			b.cells[i] = spreadsheet.Text(cut(string(cell)))
		default:
			v, err := strconv.ParseFloat(string(cell), 64)
			if err != nil {
				return t.fault("cell %d, %q, is not a number", i+1, cell)
			}
			b.cells[i] = spreadsheet.Number(v)
		}
	}
	return b.out.Row(b.cells...)
}

// cut shortens a text that no cell can hold.
func cut(text string) string {
	if len(text) <= spreadsheet.MaxCell {
		return text
	}
	units := utf16.Encode([]rune(text))
	if len(units) <= spreadsheet.MaxCell {
		return text
	}
	return strings.TrimSuffix(string(utf16.Decode(units[:spreadsheet.MaxCell-1])), "\ufffd") + "…"
}

func (b *workbook) close() error {
	if b.sheets == 0 {
		if err := b.sheet(); err != nil {
			return err
		}
	}
	return b.out.Close()
}

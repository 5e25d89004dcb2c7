package spreadsheet

import (
	"archive/zip"
	"bufio"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"time"
	"unicode/utf16"
	"unicode/utf8"
)

// Limits of what a sheet can hold, as spreadsheet programs state them; common
// practice, from memory.
const (
	MaxRows      = lastRow    // of a sheet
	MaxColumns   = lastColumn // of a sheet
	MaxCell      = 32767      // UTF-16 units of a cell
	MaxSheetName = 31         // UTF-16 units of the name of a sheet
)

// Cell is one cell that is written: blank, a text or a number. The zero value
// is blank.
type Cell struct {
	kind   cellKind
	text   string
	number float64
}

type cellKind uint8

const (
	blankCell cellKind = iota
	textCell
	numberCell
)

// Text is a cell that holds a text, blank if that is "". It is never taken for
// a formula, a number or a date, whatever it looks like.
func Text(text string) Cell {
	if text == "" {
		return Cell{}
	}
	return Cell{kind: textCell, text: text}
}

// Number is a cell that holds a number, blank if that is not finite.
func Number(x float64) Cell {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return Cell{}
	}
	return Cell{kind: numberCell, number: x}
}

// Column is a column of a sheet.
type Column struct {
	Heading string
	Width   float64 // in characters; after the length of its heading if 0
}

// Writer writes a workbook (Office Open XML, XLSX) sheet by sheet and row by
// row, holding none of it. The same calls give the same bytes. The error of the
// first call that failed is that of every later one.
type Writer struct {
	archive *zip.Writer
	part    *bufio.Writer // the sheet that is open; nil if none is
	sheets  []string
	row     int // of the sheet that is open, from 1; written last
	err     error
	buffer  []byte
}

// NewWriter returns a writer of a workbook.
func NewWriter(w io.Writer) *Writer { return &Writer{archive: zip.NewWriter(w)} }

// Sheet ends the sheet that is open, if one is, and begins another. The rows of
// above come first, then the headings of the columns, in bold. What stands above
// the first row of the table stays in sight while the sheet is scrolled, if it
// is not more than a few rows. The name must be one that spreadsheet programs
// accept: not blank, at most MaxSheetName long, without any of []:*?/\ and
// control characters, with no apostrophe at its ends, not "History", and not
// that of another sheet, case aside.
func (w *Writer) Sheet(name string, columns []Column, above ...[]Cell) error {
	w.endSheet()
	switch problem := w.badName(name); {
	case w.err != nil:
		return w.err
	case problem != "":
		return w.fail("a sheet cannot have the name %q: %s", name, problem)
	case len(columns) > MaxColumns:
		return w.fail("sheet %q would have more than %d columns", name, MaxColumns)
	case len(w.sheets) == 0:
		w.fixed("_rels/.rels", packageRelations)
		w.fixed("xl/styles.xml", styles)
	}
	w.sheets = append(w.sheets, name)
	w.part, w.row = w.create(fmt.Sprintf("xl/worksheets/sheet%d.xml", len(w.sheets))), 0
	if w.err != nil {
		return w.err
	}
	w.put(declaration + `<worksheet xmlns="` + mainSpace + `">`)
	w.view(len(above) + 1)
	w.widths(columns)
	w.put("<sheetData>")
	for _, cells := range above {
		w.Row(cells...)
	}
	headings := make([]Cell, len(columns))
	for i, c := range columns {
		headings[i] = Text(c.Heading)
	}
	w.writeRow(headings, ` s="1"`)
	return w.err
}

// Row writes the next row of the sheet that is open.
func (w *Writer) Row(cells ...Cell) error {
	w.writeRow(cells, "")
	return w.err
}

// Close ends the workbook. It does not close the writer below.
func (w *Writer) Close() error {
	w.endSheet()
	if w.err == nil && len(w.sheets) == 0 {
		w.fail("a workbook needs a sheet")
	}
	w.fixed("xl/workbook.xml", w.workbook())
	w.fixed("xl/_rels/workbook.xml.rels", w.workbookRelations())
	w.fixed("[Content_Types].xml", w.contentTypes())
	if w.err == nil {
		w.err = w.archive.Close()
	}
	return w.err
}

func (w *Writer) fail(format string, args ...any) error {
	w.note(fmt.Errorf(format, args...))
	return w.err
}

// note keeps the first error.
func (w *Writer) note(err error) {
	if w.err == nil {
		w.err = err
	}
}

// badName says why a sheet cannot have a name, "" if it can.
func (w *Writer) badName(name string) string {
	switch {
	case strings.TrimSpace(name) == "":
		return "it is blank"
	case !utf8.ValidString(name) || strings.ContainsFunc(name, func(r rune) bool { return r < ' ' || r == 0x7f || !inXML(r) }):
		return "it is not plain text"
	case len(utf16.Encode([]rune(name))) > MaxSheetName:
		return fmt.Sprintf("it is longer than %d characters", MaxSheetName)
	case strings.ContainsAny(name, `[]:*?/\`):
		return `it has one of []:*?/\ in it`
	case name[0] == '\'' || name[len(name)-1] == '\'':
		return "it has an apostrophe at its beginning or end"
	case strings.EqualFold(name, "History"):
		return "spreadsheet programs keep it for themselves"
	}
	for _, other := range w.sheets {
		if strings.EqualFold(name, other) {
			return "another sheet has it"
		}
	}
	return ""
}

// epoch is the time of every part: the first that a zip file can state.
var epoch = time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC)

// create begins a part.
func (w *Writer) create(name string) *bufio.Writer {
	if w.err != nil {
		return nil
	}
	part, err := w.archive.CreateHeader(&zip.FileHeader{Name: name, Method: zip.Deflate, Modified: epoch})
	w.note(err)
	return bufio.NewWriterSize(part, 1<<16)
}

// fixed writes a whole part.
func (w *Writer) fixed(name, text string) {
	if part := w.create(name); w.err == nil {
		part.WriteString(text)
		w.note(part.Flush())
	}
}

func (w *Writer) endSheet() {
	if w.part == nil {
		return
	}
	w.put("</sheetData></worksheet>")
	if w.err == nil {
		w.note(w.part.Flush())
	}
	w.part = nil
}

func (w *Writer) put(text string) {
	if w.err == nil {
		_, err := w.part.WriteString(text)
		w.note(err)
	}
}

// view keeps the rows down to the header in sight.
func (w *Writer) view(header int) {
	const most = 12 // rows that leave room for the table on a screen
	if header > most {
		return
	}
	w.put(fmt.Sprintf(`<sheetViews><sheetView workbookViewId="0"><pane ySplit="%d" topLeftCell="A%d" activePane="bottomLeft" state="frozen"/>`+
		`<selection pane="bottomLeft"/></sheetView></sheetViews>`, header, header+1))
}

// widths states how wide the columns are.
func (w *Writer) widths(columns []Column) {
	if len(columns) == 0 {
		return
	}
	const least, most = 8, 60
	w.put("<cols>")
	for i, c := range columns {
		width := c.Width
		if !(width > 0 && width <= 255) {
			width = float64(min(max(utf8.RuneCountInString(c.Heading)+2, least), most))
		}
		w.put(fmt.Sprintf(`<col min="%d" max="%d" width="%s" customWidth="1"/>`, i+1, i+1, strconv.FormatFloat(width, 'f', -1, 64)))
	}
	w.put("</cols>")
}

// writeRow writes a row whose cells have a style.
func (w *Writer) writeRow(cells []Cell, style string) {
	w.row++
	switch {
	case w.err != nil:
		return
	case w.part == nil:
		w.fail("a row needs a sheet")
		return
	case w.row > MaxRows:
		w.fail("sheet %q would have more than %d rows: write several files, or CSV", w.sheets[len(w.sheets)-1], MaxRows)
		return
	case len(cells) > MaxColumns:
		w.fail("row %d of sheet %q would have more than %d cells", w.row, w.sheets[len(w.sheets)-1], MaxColumns)
		return
	}
	b := append(w.buffer[:0], `<row r="`...)
	b = strconv.AppendInt(b, int64(w.row), 10)
	b = append(b, `">`...)
	for i := range cells {
		b = w.appendCell(b, &cells[i], i+1, style)
	}
	b = append(b, "</row>"...)
	w.buffer = b
	if w.err == nil {
		_, err := w.part.Write(b)
		w.note(err)
	}
}

// appendCell appends the XML of a cell (ISO/IEC 29500-1, 18.3.1.4). Its text
// stands in the cell itself, so that nothing need be held until the end.
func (w *Writer) appendCell(b []byte, c *Cell, column int, style string) []byte {
	if c.kind == blankCell {
		return b
	}
	b = append(b, `<c r="`...)
	b = append(b, letters(column)...)
	b = strconv.AppendInt(b, int64(w.row), 10)
	b = append(b, '"')
	b = append(b, style...)
	if c.kind == numberCell {
		b = append(b, `><v>`...)
		b = appendNumber(b, c.number)
		return append(b, `</v></c>`...)
	}
	if len(c.text) > MaxCell && len(utf16.Encode([]rune(c.text))) > MaxCell {
		w.fail("the text of cell %s%d is longer than %d characters", letters(column), w.row, MaxCell)
		return b
	}
	b = append(b, ` t="inlineStr"><is><t xml:space="preserve">`...)
	b = appendText(b, c.text)
	return append(b, `</t></is></c>`...)
}

// appendNumber appends a number with the fewest digits that give it again.
func appendNumber(b []byte, x float64) []byte {
	if size := math.Abs(x); size != 0 && (size < 1e-6 || size >= 1e15) {
		return strconv.AppendFloat(b, x, 'e', -1, 64)
	}
	return strconv.AppendFloat(b, x, 'f', -1, 64)
}

// appendText appends text as XML. A character that XML cannot hold, or would
// not give back, is written as _x0007_ is, and a text that looks so as _x005F_
// and the rest (ISO/IEC 29500-1, 22.9.2.19).
func appendText(b []byte, text string) []byte {
	for i, r := range text {
		switch {
		case r == '<':
			b = append(b, "&lt;"...)
		case r == '>':
			b = append(b, "&gt;"...)
		case r == '&':
			b = append(b, "&amp;"...)
		case r == '"':
			b = append(b, "&quot;"...)
		case r == '\r' || !inXML(r):
			b = fmt.Appendf(b, "_x%04X_", r)
		case r == '_' && escaped(text[i:]):
			b = append(b, "_x005F_"...)
		default:
			b = utf8.AppendRune(b, r) // of bytes that are no UTF-8, U+FFFD
		}
	}
	return b
}

// inXML reports whether XML 1.0 can hold a character (section 2.2).
func inXML(r rune) bool {
	return r == '\t' || r == '\n' || r == '\r' || r >= ' ' && r != 0xfffe && r != 0xffff
}

// escaped reports whether text begins as an escaped character does. The second
// underscore is not asked for: it may be that of a character that is escaped
// behind the text.
func escaped(text string) bool {
	if len(text) < 6 || text[1] != 'x' {
		return false
	}
	_, err := strconv.ParseUint(text[2:6], 16, 16)
	return err == nil
}

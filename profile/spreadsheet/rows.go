package spreadsheet

import (
	"encoding/xml"
	"errors"
	"strconv"
	"strings"
)

var (
	errReference = errors.New("a row or cell is not where it says that it is")
	errText      = errors.New("a cell holds a shared text that is missing")
)

// rowReader reads the XML of one sheet.
type rowReader struct {
	*part
	book   *book
	sheet  *sheet
	do     func(row) error
	row    row  // that is being read
	cell   cell // that is being read
	column int  // of the cell, from 1

	inRow, inCell func(xml.StartElement) error // readCell and readStored, made once
}

// cell is a cell as it is stored.
type cell struct {
	value      string
	hasValue   bool
	inline     string // text that stands in the cell itself
	hasInline  bool
	formula    string
	hasFormula bool
}

// readRows calls do for each row of a sheet that is stored, in order, and
// gives s what the sheet says of merged cells, hidden columns and formulas
// (ISO/IEC 29500-1, 18.3.1.99). Whatever is not in order is an error.
func (b *book) readRows(name string, s *sheet, do func(row) error) error {
	p, err := openPart(b.files[name], &b.left)
	if err != nil {
		return err
	}
	defer p.close()
	r := &rowReader{part: p, book: b, sheet: s, do: do}
	r.inRow, r.inCell = r.readCell, r.readStored
	return p.root("worksheet", func(e xml.StartElement) error {
		switch e.Name.Local {
		case "cols":
			return p.children(r.readColumns)
		case "sheetData":
			return p.children(r.readRow)
		case "mergeCells":
			return p.children(r.readMerged)
		}
		return nil
	})
}

// readColumns reads what is said of a range of columns.
func (r *rowReader) readColumns(e xml.StartElement) error {
	if e.Name.Local != "col" || !yes(e, "hidden") {
		return nil
	}
	first, err1 := strconv.Atoi(attribute(e, "min"))
	last, err2 := strconv.Atoi(attribute(e, "max"))
	if err1 != nil || err2 != nil || first < 1 || last < first {
		return errReference
	}
	r.sheet.hide(first, last)
	return nil
}

func (r *rowReader) readMerged(e xml.StartElement) error {
	if e.Name.Local == "mergeCell" {
		r.sheet.merge(attribute(e, "ref"))
	}
	return nil
}

// readRow reads a row. One that does not say its number comes next after the
// one before it.
func (r *rowReader) readRow(e xml.StartElement) error {
	if e.Name.Local != "row" {
		return nil
	}
	n := r.row.number + 1
	if text := attribute(e, "r"); text != "" {
		stated, err := strconv.Atoi(text)
		if err != nil || stated < n {
			return errReference
		}
		n = stated
	}
	if n > lastRow {
		return errReference
	}
	r.row, r.column = row{number: n, hidden: yes(e, "hidden")}, 0
	if err := r.children(r.inRow); err != nil {
		return err
	}
	return r.do(r.row)
}

// readCell reads a cell of a row. One that does not say its name comes next
// after the one before it.
func (r *rowReader) readCell(e xml.StartElement) error {
	if e.Name.Local != "c" {
		return nil
	}
	r.column++
	if name := attribute(e, "r"); name != "" {
		column, row, ok := coordinates(name)
		if !ok || row != r.row.number || column < r.column {
			return errReference
		}
		r.column = column
	}
	if r.column > lastColumn {
		return errReference
	}
	kind, style := attribute(e, "t"), attribute(e, "s")
	r.cell = cell{}
	if err := r.children(r.inCell); err != nil {
		return err
	}
	text, err := r.value(kind, style)
	text = strings.TrimSpace(text)
	if kind == "" || kind == "n" {
		text = fifteenDigits(text)
	}
	r.add(kind, text)
	return err
}

// readStored reads what is stored of a cell.
func (r *rowReader) readStored(e xml.StartElement) (err error) {
	c := &r.cell
	switch e.Name.Local {
	case "v":
		c.hasValue = true
		c.value, err = r.text()
	case "is":
		c.hasInline = true
		c.inline, err = r.richText()
	case "f":
		c.formula, err = r.text()
		c.hasFormula = c.formula != "" || attribute(e, "t") == "shared"
	}
	return err
}

// value is the text of the cell by its type (ISO/IEC 29500-1, 18.18.11). True
// and false are the words that a spreadsheet shows, so that nobody takes the 1
// and 0 that are stored for numbers.
func (r *rowReader) value(kind, style string) (string, error) {
	c := &r.cell
	switch kind {
	case "s":
		if strings.TrimSpace(c.value) == "" {
			return "", nil
		}
		n, err := strconv.Atoi(strings.TrimSpace(c.value))
		text, ok := r.book.texts.text(n)
		if err != nil || !ok {
			return "", errText
		}
		return text, nil
	case "inlineStr":
		if c.hasInline {
			return c.inline, nil
		}
		return unescape(c.value), nil
	case "str":
		return unescape(c.value), nil
	case "b":
		switch strings.TrimSpace(c.value) {
		case "1", "true":
			return "TRUE", nil
		case "0", "false":
			return "FALSE", nil
		}
	case "", "n":
		if n, err := strconv.Atoi(style); err == nil && n >= 0 && n < len(r.book.formats) {
			return r.book.formats[n].shown(c.value, r.book.from1904), nil
		}
	}
	return c.value, nil
}

// add adds the cell to its row. A formula whose value is an empty text has a
// stored value.
func (r *rowReader) add(kind, text string) {
	unevaluated := text == "" && r.cell.hasFormula && !(kind == "str" && r.cell.hasValue)
	if text == "" && !r.cell.hasFormula {
		return
	}
	for len(r.row.cells) < r.column {
		r.row.cells = append(r.row.cells, "")
	}
	r.row.cells[r.column-1] = text
	if r.cell.hasFormula && totals(r.cell.formula, r.column, r.row.number) {
		r.row.totals = append(r.row.totals, r.column)
	}
	if unevaluated && r.sheet.formulas != nil {
		r.sheet.formulas[[2]int{r.row.number, r.column}] = formulaText(r.cell.formula)
	}
}

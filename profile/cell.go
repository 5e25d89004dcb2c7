package profile

import (
	"strconv"
	"strings"
	"unicode"
)

// Place returns a place in the file: a line and a column in text, a row and a
// column, from 1, in a spreadsheet. Zero is the file as a whole.
func (r *Reading) Place(line, column int) Place {
	at := Place{File: r.File, Line: line, Column: column}
	if r.Sheet != "" && line > 0 {
		at.Cell = CellName(r.Sheet, line, column)
	}
	return at
}

// CellName returns the name of a cell of a spreadsheet, as Sheet1!B7. The name
// of a sheet that is not a plain word stands between quotes, as 'Line 1'!B7.
// Row and column count from 1; a column of 0 names the whole row, as Sheet1!7.
func CellName(sheet string, row, column int) string {
	plain := func(r rune) bool { return r == '_' || unicode.IsLetter(r) || unicode.IsDigit(r) }
	if strings.TrimFunc(sheet, plain) != "" {
		sheet = "'" + strings.ReplaceAll(sheet, "'", "''") + "'"
	}
	return sheet + "!" + columnLetters(column) + strconv.Itoa(row)
}

// columnLetters names a column: A to Z, AA to ZZ and so on; "" for 0.
func columnLetters(n int) string {
	var letters string
	for ; n > 0; n = (n - 1) / 26 {
		letters = string(rune('A'+(n-1)%26)) + letters
	}
	return letters
}

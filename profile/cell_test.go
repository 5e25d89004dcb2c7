package profile

import "testing"

// The names are those that spreadsheets show: Z is column 26, AA 27, XFD 16384,
// the last one of a sheet (ISO/IEC 29500-1, 18.3.1.73 and common practice).
func TestCellName(t *testing.T) {
	for _, c := range []struct {
		sheet       string
		row, column int
		want        string
	}{
		{"Sheet1", 7, 2, "Sheet1!B7"},
		{"Line 1", 1, 26, "'Line 1'!Z1"},
		{"O'Hara", 1, 27, "'O''Hara'!AA1"},
		{"Лист1", 1048576, 16384, "Лист1!XFD1048576"},
		{"L-1", 3, 702, "'L-1'!ZZ3"},
		{"Sheet1", 7, 0, "Sheet1!7"},
	} {
		if got := CellName(c.sheet, c.row, c.column); got != c.want {
			t.Errorf("CellName(%q, %d, %d) = %s, want %s", c.sheet, c.row, c.column, got, c.want)
		}
	}
}

// A place in a spreadsheet is shown by its cell, in text by its line.
func TestReadingPlace(t *testing.T) {
	for _, c := range []struct {
		reading Reading
		line    int
		want    string
	}{
		{Reading{File: "a.xlsx", Sheet: "Sheet1"}, 7, "a.xlsx:Sheet1!B7"},
		{Reading{File: "a.xlsx", Sheet: "Sheet1"}, 0, "a.xlsx"},
		{Reading{File: "a.csv"}, 7, "a.csv:7:2"},
	} {
		if got := c.reading.Place(c.line, 2).String(); got != c.want {
			t.Errorf("got %s, want %s", got, c.want)
		}
	}
}

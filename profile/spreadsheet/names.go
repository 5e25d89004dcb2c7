package spreadsheet

import (
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// nameTables gives each table the name that its profile has if nothing in it
// states one.
func nameTables(tables []*table) {
	if len(tables) == 1 && newSheet(tables[0].sheet.name) {
		return // named after the file
	}
	for start := 0; start < len(tables); {
		end := start
		for end < len(tables) && tables[end].sheet == tables[start].sheet {
			end++
		}
		nameOnSheet(tables[start:end])
		start = end
	}
}

// nameOnSheet names the tables of one sheet.
func nameOnSheet(tables []*table) {
	titles := map[string]bool{}
	for _, t := range tables {
		titles[t.title] = true
	}
	for _, t := range tables {
		switch {
		case len(tables) == 1:
			t.Name = t.sheet.name
		case len(titles) == len(tables) && !titles[""]:
			t.Name = t.title
		default:
			t.Name = t.sheet.name + " " + strconv.Itoa(t.number)
		}
		t.Name = strings.Join(strings.Fields(t.Name), " ")
	}
}

// newSheets is how spreadsheet programs name a new sheet in some languages,
// before its number; common practice, from memory.
var newSheets = []string{"sheet", "tabelle", "feuil", "feuille", "hoja", "foglio", "planilha", "folha", "blad", "ark", "лист", "аркуш", "arkusz", "list", "munka", "sayfa", "taul", "φύλλο"}

// newSheet reports whether a sheet has the name that a new one is given.
func newSheet(name string) bool {
	word := strings.TrimRightFunc(name, unicode.IsDigit)
	return slices.Contains(newSheets, strings.ToLower(strings.TrimSpace(word)))
}

// some is the first few of a list, in words.
func some(list []string) string {
	const most = 8
	if more := len(list) - most; more > 0 {
		list = append(slices.Clone(list[:most]), strconv.Itoa(more)+" more")
	}
	return strings.Join(list, ", ")
}

func number(n int) string { return strconv.Itoa(n) }

// letters names a column: A to Z, AA to ZZ and so on.
func letters(n int) string {
	var name string
	for ; n > 0; n = (n - 1) / 26 {
		name = string(rune('A'+(n-1)%26)) + name
	}
	return name
}

// coordinates are the column and the row that the name of a cell states, from
// 1; false if it is none, or beyond the last cell of a sheet, XFD1048576.
func coordinates(name string) (column, row int, ok bool) {
	i := 0
	for ; i < len(name) && i < 4; i++ {
		c := name[i] &^ 0x20
		if c < 'A' || c > 'Z' {
			break
		}
		column = column*26 + int(c-'A') + 1
	}
	for _, c := range []byte(name[i:]) {
		if c < '0' || c > '9' || row > lastRow {
			return 0, 0, false
		}
		row = row*10 + int(c-'0')
	}
	return column, row, column >= 1 && column <= lastColumn && row >= 1 && row <= lastRow
}

// The last row and column that a sheet can have; common practice, from memory.
const (
	lastRow    = 1 << 20
	lastColumn = 1 << 14
)

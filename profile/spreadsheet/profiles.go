package spreadsheet

import (
	"io"
	"strings"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// Write writes profiles as a workbook that Read reads back: one sheet with the
// columns and the statements above them that delimited.Write writes, each
// statement in two cells. Numbers are stored whole, but a spreadsheet, and so
// Read, takes 15 significant digits of them. The error is that of w, of a
// profile that Read would refuse, or of a sheet that has no room for so many
// layers.
func Write(w io.Writer, profiles []profile.Profile) error {
	l, err := delimited.Lay(profiles)
	if err != nil {
		return err
	}
	columns := make([]Column, len(l.Headings))
	for i, heading := range l.Headings {
		columns[i] = Column{Heading: heading, Width: widthOf(heading)}
	}
	above := make([][]Cell, len(l.Lines))
	for i, line := range l.Lines {
		above[i] = statement(line)
	}
	book := NewWriter(w)
	if err := book.Sheet("profiles", columns, above...); err != nil {
		return err
	}
	row := make([]Cell, len(columns))
	err = l.Rows(func(cells []delimited.Cell) error {
		for i, c := range cells {
			if row[i] = Text(c.Text); c.IsNumber {
				row[i] = Number(c.Number)
			}
		}
		return book.Row(row...)
	})
	if err != nil {
		return err
	}
	return book.Close()
}

// widthOf is the width of a column of text, 0 for others.
func widthOf(heading string) float64 {
	switch heading {
	case "profile":
		return 20
	case "soil":
		return 40
	}
	return 0
}

// statement is the cells of a statement above the header. One whose key is not
// told by itself, because a name in it holds a colon or is long, stands in one
// cell.
func statement(line delimited.Line) []Cell {
	if key := line.Scope(); delimited.Statement(key) && !strings.Contains(key, ":") {
		return []Cell{Text(key), Text(line.Value)}
	}
	return []Cell{Text(line.Scope() + ": " + line.Value)}
}

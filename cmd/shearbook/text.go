package main

import (
	"strings"
	"unicode/utf8"

	"shearbook/report"
)

// width is the width of the terminal in columns that output is laid out for.
const width = 80

// wrap breaks text into lines of at most n columns. All but the first come
// behind indent, which does not count. A word that is longer stands on a line
// of its own.
func wrap(text string, n int, indent string) string {
	var b strings.Builder
	column := 0
	for i, word := range strings.Fields(text) {
		length := columns(word)
		switch {
		case i == 0:
		case column+1+length > n:
			b.WriteString("\n" + indent)
			column = 0
		default:
			b.WriteByte(' ')
			column++
		}
		b.WriteString(word)
		column += length
	}
	return b.String()
}

// columns is how many columns text takes: one a character, none for a mark
// that combines with the one before it.
func columns(text string) int {
	n := utf8.RuneCountInString(text)
	for _, r := range text {
		if r >= 0x300 && r <= 0x36f {
			n--
		}
	}
	return n
}

// pad fills text with spaces up to n columns.
func pad(text string, n int) string {
	return text + strings.Repeat(" ", max(0, n-columns(text)))
}

// grid is a table for the terminal: the columns as wide as their cells, but
// for one that takes what is left of the width and wraps.
type grid struct {
	indent string
	wraps  int // the column that wraps
	rows   [][]string
	marked map[int]bool // rows with a > before them
}

// String lays the table out.
func (g grid) String() string {
	widths := make([]int, len(g.rows[0]))
	for _, r := range g.rows {
		for i, cell := range r {
			widths[i] = max(widths[i], columns(cell))
		}
	}
	left := width - columns(g.indent) - 2*(len(widths)-1)
	for i, w := range widths {
		if i != g.wraps {
			left -= w
		}
	}
	widths[g.wraps] = max(12, min(widths[g.wraps], left))
	var b strings.Builder
	for i, r := range g.rows {
		g.writeRow(&b, r, widths, g.marked[i])
	}
	return b.String()
}

func (g grid) writeRow(b *strings.Builder, cells []string, widths []int, marked bool) {
	lines := strings.Split(wrap(cells[g.wraps], widths[g.wraps], ""), "\n")
	for n, part := range lines {
		line := g.indent
		if marked && n == 0 {
			line = strings.TrimSuffix(g.indent, "  ") + "> "
		}
		for i, w := range widths {
			cell := ""
			switch {
			case i == g.wraps:
				cell = part
			case n == 0:
				cell = cells[i]
			}
			line += pad(cell, w) + "  "
		}
		b.WriteString(strings.TrimRight(line, " ") + "\n")
	}
}

// bold is text in bold on a terminal that may be coloured.
func (s streams) bold(text string) string {
	if !s.colour {
		return text
	}
	return "\x1b[1m" + text + "\x1b[0m"
}

// cells are the plain texts of a table's row.
func cells(row [][]report.Inline) []string {
	var out []string
	for _, c := range row {
		out = append(out, report.PlainText(c))
	}
	return out
}

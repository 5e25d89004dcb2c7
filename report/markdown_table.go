package report

import (
	"strings"
	"unicode"
)

// grid is a table of finished cells.
type grid struct {
	head  []string
	align []Align
	rows  [][]string
	least []int // width that a column has at least; nil for none
}

// widest is the width in columns up to which cells are padded. A longer cell
// sticks out, or one cell would blow up all the others.
const widest = 60

func (p *markdown) table(t *Table, width int) []string {
	lines := p.caption(t.Caption, width)
	if len(t.Columns) > 0 {
		lines = apart(lines, p.grid(t).lines())
	}
	for _, note := range t.Notes {
		lines = apart(lines, p.paragraph("", note, width))
	}
	return lines
}

func (p *markdown) grid(t *Table) *grid {
	g := &grid{}
	for _, c := range t.Columns {
		g.head = append(g.head, p.cell(c.Header))
		g.align = append(g.align, c.Align)
	}
	for _, r := range t.Rows {
		g.rows = append(g.rows, p.row(r, len(t.Columns)))
	}
	return g
}

func (p *markdown) row(r TableRow, n int) []string {
	row := make([]string, n)
	for i, c := range cellsOf(r, n) {
		if r.Emphasis {
			c = []Inline{&Strong{c}}
		}
		if r.Marked && i == 0 {
			c = append([]Inline{Text(markedRow)}, c...)
		}
		row[i] = p.cell(c)
	}
	return row
}

// markedRow stands before the first cell of a marked row.
const markedRow = "▸ "

// lines returns the table with its cells padded to columns.
func (g *grid) lines() []string {
	widths := make([]int, len(g.head))
	for i := range g.head {
		if g.align[i] == AlignDecimal {
			g.alignDecimals(i)
		}
		widths[i] = g.width(i)
	}
	lines := []string{g.line(g.head, widths), delimiterRow(g.align, widths)}
	for _, row := range g.rows {
		lines = append(lines, g.line(row, widths))
	}
	return lines
}

func (g *grid) width(col int) int {
	w := max(3, columns(g.head[col]))
	if g.least != nil {
		w = max(w, g.least[col])
	}
	for _, row := range g.rows {
		w = max(w, columns(row[col]))
	}
	return min(w, widest)
}

func (g *grid) line(cells []string, widths []int) string {
	var b strings.Builder
	for i, c := range cells {
		b.WriteString("| " + pad(c, widths[i], g.align[i]) + " ")
	}
	return b.String() + "|"
}

func delimiterRow(align []Align, widths []int) string {
	var b strings.Builder
	for i, a := range align {
		left, right := "-", "-"
		if a == AlignCentre {
			left = ":"
		}
		if a != AlignLeft {
			right = ":"
		}
		b.WriteString("| " + left + strings.Repeat("-", widths[i]-2) + right + " ")
	}
	return b.String() + "|"
}

// pad fills cell up to width columns.
func pad(cell string, width int, a Align) string {
	free := max(0, width-columns(cell))
	switch a {
	case AlignLeft:
		return cell + strings.Repeat(" ", free)
	case AlignCentre:
		return strings.Repeat(" ", free/2) + cell + strings.Repeat(" ", free-free/2)
	case AlignRight, AlignDecimal:
		return strings.Repeat(" ", free) + cell
	default:
		panic(unknown(a))
	}
}

// alignDecimals pads the numbers of a column on the right so that their
// decimal points stand below each other when it is set to the right.
func (g *grid) alignDecimals(col int) {
	tail := 0
	for _, row := range g.rows {
		if point, ok := decimalPoint(row[col]); ok {
			tail = max(tail, columns(row[col][point:]))
		}
	}
	for _, row := range g.rows {
		if point, ok := decimalPoint(row[col]); ok {
			free := min(tail, widest) - columns(row[col][point:])
			row[col] += strings.Repeat(" ", max(0, free))
		}
	}
}

// decimalPoint returns the place in s of its decimal point, or where it would
// stand behind a whole number, and whether s begins with a number at all. A
// sign, a mark of comparison or emphasis may stand before the number, and
// anything behind it. A dash alone stands for a number that is missing.
func decimalPoint(s string) (int, bool) {
	if strings.Trim(s, "-–—−") == "" {
		return len(s), s != ""
	}
	number := strings.TrimLeft(s, "*\\▸+-−±<>≤≥≈~ ")
	start := len(s) - len(number)
	for i, r := range number {
		switch {
		case r >= '0' && r <= '9':
		case i > 0 && strings.ContainsRune(", \u00a0\u2009\u202f", r) && digitAt(number, i+len(string(r))):
		case r == '.' && !digitAt(number, i+1):
			return start + i, i > 0
		default:
			return start + i, i > 0 || r == '.'
		}
	}
	return len(s), number != ""
}

func digitAt(s string, i int) bool { return i < len(s) && s[i] >= '0' && s[i] <= '9' }

// columns returns the width of s in columns of fixed pitch: two for the wide
// characters of East Asia, none for marks that stand on others and for
// characters that only format.
func columns(s string) int {
	n := 0
	for _, r := range s {
		switch {
		case r < 0x300:
			n++
		case unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf):
		case isWide(r):
			n += 2
		default:
			n++
		}
	}
	return n
}

// isWide reports whether r is wide: the scripts and blocks that are all, or
// nearly all, of East Asian width W or F (Unicode Standard Annex 11).
func isWide(r rune) bool {
	return unicode.In(r, unicode.Han, unicode.Hangul, unicode.Hiragana, unicode.Katakana) ||
		r >= 0x3000 && r <= 0x303e || r >= 0xff01 && r <= 0xff60 || r >= 0x1f300 && r <= 0x1faff
}

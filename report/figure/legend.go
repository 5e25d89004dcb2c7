package figure

import (
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// meaning is one entry of a legend: a sample of a mark and what it means.
type meaning struct {
	text  string
	width vg.Length                           // of the sample; 0 for none
	draw  func(s *sheet, x, middle vg.Length) // the sample, to the right of x
}

// legend is a key over a frame, in as many rows as its entries take.
type legend [][]meaning

// Lengths of a legend.
const (
	legendGap = 4 * gap // from entry to entry
	legendRow = 12      // from row to row
)

// room returns the width of an entry.
func (m meaning) room() vg.Length { return m.indent() + plain.width(m.text) }

// indent returns what the sample of an entry takes.
func (m meaning) indent() vg.Length {
	if m.width == 0 {
		return 0
	}
	return m.width + gap
}

// newLegend puts the entries into rows that are no wider than room. An entry
// that is wider by itself is shortened.
func newLegend(entries []meaning, room vg.Length) legend {
	var rows legend
	end := vg.Length(0)
	for _, m := range entries {
		m.text = plain.fit(m.text, room-m.indent())
		w := m.room()
		if len(rows) == 0 || end+legendGap+w > room {
			rows = append(rows, nil)
			end = -legendGap
		}
		last := &rows[len(rows)-1]
		*last = append(*last, m)
		end += legendGap + w
	}
	return rows
}

// height returns the height of the rows.
func (l legend) height() vg.Length { return legendRow * vg.Length(len(l)) }

// draw draws the rows from the top down, to the right of x.
func (l legend) draw(s *sheet, x, top vg.Length) {
	for _, row := range l {
		base := top - plain.size*0.95
		middle := base + plain.size*capHeight/2
		at := x
		for _, m := range row {
			if m.width > 0 {
				m.draw(s, at, middle)
			}
			s.write(plain, at+m.indent(), base, draw.XLeft, m.text)
			at += m.room() + legendGap
		}
		top -= legendRow
	}
}

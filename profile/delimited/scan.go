package delimited

import (
	"bytes"
	"unicode/utf8"
)

// scanner cuts text into rows of cells. A cell may be quoted; then it may
// hold separators, ends of lines and doubled quotes. A quote inside a cell
// that does not begin with one is an ordinary character.
type scanner struct {
	text []byte
	sep  byte // between cells: ',', ';' or '\t'

	off  int // of what comes next
	line int // of off, from 1
	bol  int // offset at which that line begins

	cells []cell // of the row last read; overwritten by the next
	end   spot   // of the row last read

	grid *grid // where the text came from, if from a spreadsheet
}

// cell is one cell of a row.
type cell struct {
	text   []byte // without quotes and outer spaces
	off    int    // at which it begins, its quote included
	line   int
	bol    int
	quoted bool
}

func newScanner(text []byte) scanner { return scanner{text: text, line: 1} }

func isLineEnd(b byte) bool { return b == '\n' || b == '\r' }

// spot is the place of offset off, which must lie in the present line.
func (s *scanner) spot(off int) spot {
	if s.grid != nil {
		return s.grid.spot(s.line, s.text[s.bol:off])
	}
	return spot{s.line, utf8.RuneCount(s.text[s.bol:off]) + 1}
}

// spotOf is the place of a cell.
func (s *scanner) spotOf(c *cell) spot {
	if s.grid != nil {
		return s.grid.spot(c.line, s.text[c.bol:c.off])
	}
	return spot{c.line, utf8.RuneCount(s.text[c.bol:c.off]) + 1}
}

// place is the place of cell i of the row last read, the end of the row if it
// has no such cell.
func (s *scanner) place(i int) spot {
	if i < len(s.cells) {
		return s.spotOf(&s.cells[i])
	}
	return s.end
}

// cell is the text of cell i of the row last read, blank if it has none.
func (s *scanner) cell(i int) []byte {
	if i >= 0 && i < len(s.cells) {
		return s.cells[i].text
	}
	return nil
}

// lineEnd steps over an end of line: LF, CRLF or CR.
func (s *scanner) lineEnd() {
	if s.text[s.off] == '\r' && s.off+1 < len(s.text) && s.text[s.off+1] == '\n' {
		s.off++
	}
	s.off++
	s.line++
	s.bol = s.off
}

// blankToEnd reports whether nothing but blanks is left.
func (s *scanner) blankToEnd() bool { return len(bytes.TrimSpace(s.text[s.off:])) == 0 }

// rawLine reads a line as it is, without its end.
func (s *scanner) rawLine() []byte {
	start := s.off
	for s.off < len(s.text) && !isLineEnd(s.text[s.off]) {
		s.off++
	}
	line := s.text[start:s.off]
	if s.off < len(s.text) {
		s.lineEnd()
	}
	return line
}

// next reads a row into s.cells, past lines that are empty. It returns false
// at the end of the text.
func (s *scanner) next() (bool, *trouble) {
	for s.off < len(s.text) && isLineEnd(s.text[s.off]) {
		s.lineEnd()
	}
	if s.off >= len(s.text) {
		return false, nil
	}
	s.cells = s.cells[:0]
	for {
		if bad := s.nextCell(); bad != nil {
			return false, bad
		}
		if s.off < len(s.text) && s.text[s.off] == s.sep {
			if len(s.cells) == MaxColumns {
				return false, &trouble{s.spot(s.off), "the row has more than " + count(MaxColumns, "cell"), ""}
			}
			s.off++
			continue
		}
		s.end = s.spot(s.off)
		if s.off < len(s.text) {
			s.lineEnd()
		}
		return true, nil
	}
}

// nextCell reads one cell and stops at what follows it: a separator, an end
// of line or the end of the text.
func (s *scanner) nextCell() *trouble {
	for s.off < len(s.text) && s.isBlank(s.text[s.off]) {
		s.off++
	}
	c := cell{off: s.off, line: s.line, bol: s.bol}
	if s.off < len(s.text) && s.text[s.off] == '"' {
		return s.quotedCell(c)
	}
	i := s.off
	for i < len(s.text) && s.text[i] != s.sep && !isLineEnd(s.text[i]) {
		i++
	}
	if i-s.off > MaxField {
		return s.tooLong(c)
	}
	c.text = bytes.TrimSpace(s.text[s.off:i])
	s.off = i
	s.cells = append(s.cells, c)
	return nil
}

func (s *scanner) tooLong(c cell) *trouble {
	return &trouble{s.spotOf(&c), "the cell is longer than 64 KiB", "is a quote not closed, or the separator not a comma, semicolon or tab?"}
}

const hintQuoteInside = `write a quote inside a quoted cell as ""`

func (s *scanner) isBlank(b byte) bool { return b == ' ' || b == '\t' && s.sep != '\t' }

// quotedCell reads a cell whose quote stands at s.off.
func (s *scanner) quotedCell(c cell) *trouble {
	s.off++
	start, doubled := s.off, false
	for {
		if s.off >= len(s.text) {
			return &trouble{s.spotOf(&c), "the quote is not closed", `end the cell with ", and write a quote inside it as ""`}
		}
		if s.off-start > MaxField {
			return s.tooLong(c)
		}
		switch b := s.text[s.off]; {
		case isLineEnd(b):
			s.lineEnd()
			continue
		case b != '"':
		case s.off+1 < len(s.text) && s.text[s.off+1] == '"':
			doubled = true
			s.off++
		default:
			c.text = s.text[start:s.off]
			s.off++
			return s.closeCell(c, doubled)
		}
		s.off++
	}
}

// closeCell ends a quoted cell and steps over the blanks after it.
func (s *scanner) closeCell(c cell, doubled bool) *trouble {
	if doubled {
		c.text = bytes.ReplaceAll(c.text, []byte(`""`), []byte(`"`))
	}
	c.text, c.quoted = bytes.TrimSpace(c.text), true
	s.cells = append(s.cells, c)
	for s.off < len(s.text) && s.isBlank(s.text[s.off]) {
		s.off++
	}
	if s.off < len(s.text) && s.text[s.off] != s.sep && !isLineEnd(s.text[s.off]) {
		return &trouble{s.spot(s.off), "text after a closing quote", hintQuoteInside}
	}
	return nil
}

// blank reports whether every cell of the row last read is blank.
func (s *scanner) blank() bool {
	for i := range s.cells {
		if len(s.cells[i].text) > 0 {
			return false
		}
	}
	return true
}

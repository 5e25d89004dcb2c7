package ags

import (
	"bytes"
	"unicode/utf8"

	"shearbook/profile"
)

// The words that rows begin with.
const (
	rowGroup   = "GROUP"
	rowHeading = "HEADING"
	rowUnit    = "UNIT"
	rowType    = "TYPE"
	rowData    = "DATA"
)

var descriptors = []string{rowGroup, rowHeading, rowUnit, rowType, rowData}

// scanner cuts text into rows of fields. It lets pass what stands in its
// oddities.
type scanner struct {
	text []byte

	off  int // of what comes next
	line int // of off, from 1
	bol  int // offset at which that line begins

	fields []field // of the row last read; overwritten by the next
	start  int     // offset of the line in which the row last read begins
	first  int     // number of that line

	odd oddities // of all rows so far

	counted struct{ bol, off, column int } // the column last found, for the next in its line
}

// field is one field of a row.
type field struct {
	text []byte // without quotes and outer blanks
	off  int    // at which it begins, its quote included
	line int
	bol  int
}

// trouble is a fault of a row. The rest of the row is read all the same
// unless it is fatal.
type trouble struct {
	place      profile.Place
	text, hint string
	fatal      bool
}

func isLineEnd(b byte) bool { return b == '\n' || b == '\r' }

func isBlank(b byte) bool { return b == ' ' || b == '\t' }

// place is the place of offset off, which must lie in the present line.
func (s *scanner) place(off int) profile.Place {
	return profile.Place{Line: s.line, Column: s.column(s.bol, off)}
}

// column is the column of offset off, in the line that begins at bol. It goes
// on counting from the one last found where it can, for rows may be long.
func (s *scanner) column(bol, off int) int {
	k := &s.counted
	if k.bol != bol || k.off > off || k.column == 0 {
		k.bol, k.off, k.column = bol, bol, 1
	}
	k.column += utf8.RuneCount(s.text[k.off:off])
	k.off = off
	return k.column
}

// placeOf is the place of field i of the row last read, the end of the last
// one if it has no such field.
func (s *scanner) placeOf(i int) profile.Place {
	if len(s.fields) == 0 {
		return profile.Place{Line: s.first, Column: 1}
	}
	f := &s.fields[min(i, len(s.fields)-1)]
	return profile.Place{Line: f.line, Column: s.column(f.bol, f.off)}
}

// field is the text of field i of the row last read, blank if it has none.
func (s *scanner) field(i int) []byte {
	if i >= 0 && i < len(s.fields) {
		return s.fields[i].text
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

func (s *scanner) skipBlanks() {
	for s.off < len(s.text) && isBlank(s.text[s.off]) {
		s.off++
	}
}

// back goes to the row that begins at an offset, in a line.
func (s *scanner) back(off, line int) { s.off, s.bol, s.line = off, off, line }

// next reads a row, past lines that are blank. It returns false at the end of
// the text, and after a fatal trouble.
func (s *scanner) next() (bool, *trouble) {
	for s.skipBlanks(); s.off < len(s.text) && isLineEnd(s.text[s.off]); s.skipBlanks() {
		s.lineEnd()
	}
	if s.off >= len(s.text) {
		return false, nil
	}
	s.start, s.first, s.fields = s.bol, s.line, s.fields[:0]
	var bad *trouble
	for {
		if t := s.nextField(); t != nil {
			if t.fatal {
				return false, t
			}
			bad = t
		}
		if s.off >= len(s.text) || s.text[s.off] != ',' {
			break
		}
		if len(s.fields) > MaxColumns {
			return false, &trouble{s.place(s.off), "the row has more than " + profile.Plural(MaxColumns, "field"), "is an end of line missing?", true}
		}
		s.off++
	}
	if s.off < len(s.text) {
		s.lineEnd()
	}
	return true, bad
}

// nextField reads one field and stops at what follows it: a comma, an end of
// line or the end of the text.
func (s *scanner) nextField() *trouble {
	s.skipBlanks()
	f := field{off: s.off, line: s.line, bol: s.bol}
	if s.off < len(s.text) && s.text[s.off] == '"' {
		return s.quoted(f)
	}
	i := s.off
	for i < len(s.text) && s.text[i] != ',' && !isLineEnd(s.text[i]) {
		i++
	}
	if i-s.off > MaxField {
		return s.tooLong(&f)
	}
	f.text = bytes.TrimSpace(s.text[s.off:i])
	s.odd.unquoted.see(s.line)
	s.off = i
	s.fields = append(s.fields, f)
	return nil
}

func (s *scanner) tooLong(f *field) *trouble {
	at := profile.Place{Line: f.line, Column: s.column(f.bol, f.off)}
	return &trouble{at, "the field is longer than 64 KiB", "is a quote not closed?", true}
}

// quoted reads a field whose quote stands at s.off. A quote that neither is
// doubled nor has a comma or the end of the line behind it belongs to the
// text.
func (s *scanner) quoted(f field) *trouble {
	s.off++
	start, doubled := s.off, false
	for s.off < len(s.text) {
		if s.off-start > MaxField {
			return s.tooLong(&f)
		}
		switch b := s.text[s.off]; {
		case isLineEnd(b):
			if !s.goesOn() {
				return s.unclosed(f, start, doubled)
			}
			s.odd.broken.see(f.line)
			s.lineEnd()
			continue
		case b != '"':
		case s.off+1 < len(s.text) && s.text[s.off+1] == '"':
			doubled = true
			s.off++
		case s.closes():
			s.keep(f, start, doubled)
			s.off++
			s.skipBlanks()
			return nil
		default:
			s.odd.undoubled.see(s.line)
		}
		s.off++
	}
	return s.unclosed(f, start, doubled)
}

// keep ends the field that began at start.
func (s *scanner) keep(f field, start int, doubled bool) {
	f.text = s.text[start:s.off]
	if doubled {
		f.text = bytes.ReplaceAll(f.text, []byte(`""`), []byte(`"`))
	}
	f.text = bytes.TrimSpace(f.text)
	s.fields = append(s.fields, f)
}

// unclosed ends a field at the end of its line for want of a quote.
func (s *scanner) unclosed(f field, start int, doubled bool) *trouble {
	s.keep(f, start, doubled)
	return &trouble{s.placeOf(len(s.fields)), "the quote is not closed", `end the field with a quote in the same line, and write a quote inside it as ""`, false}
}

// closes reports whether the quote at s.off has a comma or an end behind it.
func (s *scanner) closes() bool {
	rest := bytes.TrimLeft(s.text[s.off+1:min(len(s.text), s.off+MaxField)], " \t")
	return len(rest) == 0 || rest[0] == ',' || isLineEnd(rest[0])
}

// goesOn reports whether a field that a line breaks off goes on in the next:
// that one is not blank, and not the beginning of a row.
func (s *scanner) goesOn() bool {
	next := *s
	next.lineEnd()
	next.skipBlanks()
	rest := next.text[next.off:]
	if len(rest) == 0 || isLineEnd(rest[0]) {
		return false
	}
	word := bytes.TrimPrefix(rest[:min(len(rest), 16)], []byte(`"`))
	if i := bytes.IndexAny(word, `",`); i >= 0 {
		word = word[:i]
	}
	return !isDescriptor(word)
}

func isDescriptor(word []byte) bool {
	word = bytes.TrimSpace(word)
	for _, d := range descriptors {
		if bytes.EqualFold(word, []byte(d)) {
			return true
		}
	}
	return false
}

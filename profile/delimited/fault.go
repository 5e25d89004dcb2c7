package delimited

import (
	"cmp"
	"slices"
	"strconv"
	"unicode/utf8"

	"shearbook/profile"
)

// spot is a line and a column, both from 1, the column in characters. Zero is
// the file as a whole.
type spot struct {
	line, column int
}

// trouble is a fault found where the file's name is not known.
type trouble struct {
	spot
	text, hint string
}

// collector gathers the faults of one file: MaxFaults of them, and the one
// that ended the reading.
type collector struct {
	file   string
	sheet  string // of a spreadsheet; "" in text
	faults profile.Faults
	total  int
}

// place is a spot in the file.
func (c *collector) place(at spot) profile.Place {
	reading := profile.Reading{File: c.file, Sheet: c.sheet}
	return reading.Place(at.line, at.column)
}

// line is a line of the file in words; a spreadsheet has rows.
func (c *collector) line(n int) string {
	if c.sheet != "" {
		return "row " + strconv.Itoa(n)
	}
	return "line " + strconv.Itoa(n)
}

// fault adds a fault.
func (c *collector) fault(at spot, hint, format string, args ...any) {
	c.total++
	if len(c.faults) < MaxFaults {
		c.faults = append(c.faults, profile.Faultf(c.place(at), hint, format, args...))
	}
}

// stop adds a fault after which reading cannot go on; it is told however many
// there are.
func (c *collector) stop(at spot, hint, format string, args ...any) {
	c.total++
	c.faults = append(c.faults, profile.Faultf(c.place(at), hint, format, args...))
}

// trouble stops with a fault that is told already.
func (c *collector) trouble(t *trouble) { c.stop(t.spot, t.hint, "%s", t.text) }

// add adds the faults of a profile.
func (c *collector) add(faults profile.Faults) {
	for _, f := range faults {
		if f.More > 0 {
			c.total += f.More
			continue
		}
		c.fault(spot{f.Place.Line, f.Place.Column}, f.Hint, "%s", f.Text)
	}
}

// err returns what was gathered in the order of the file, nil if nothing was.
func (c *collector) err() error {
	slices.SortStableFunc(c.faults, func(a, b profile.Fault) int {
		return cmp.Or(cmp.Compare(a.Place.Line, b.Place.Line), cmp.Compare(a.Place.Column, b.Place.Column))
	})
	if more := c.total - len(c.faults); more > 0 {
		c.faults = append(c.faults, profile.MoreFaults(c.file, more))
	}
	return c.faults.Err()
}

// count is a number of things in words.
func count(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return strconv.Itoa(n) + " " + thing + "s"
}

// quoteLength is how many characters of an offending text are shown.
const quoteLength = 40

// quote is an offending text between quotes, shortened, with what cannot be
// printed escaped.
func quote[T string | []byte](text T) string {
	s := string(text[:min(len(text), utf8.UTFMax*(quoteLength+1))])
	n := 0
	for i := range s {
		if n == quoteLength {
			return strconv.Quote(s[:i] + "…")
		}
		n++
	}
	return strconv.Quote(s)
}

package ags

import (
	"bytes"
	"slices"
	"strings"

	"shearbook/profile"
)

// group is a group of the file. Of its DATA rows only the places are kept;
// they are read again when they are needed.
type group struct {
	name     string
	at       profile.Place
	headings []string // in capitals; the first is the word HEADING
	places   []spot
	units    []string // as the file gives them, as many as headings
	rows     []rowAt
	kept     bool // its rows are
	data     bool // it has DATA rows
	unitRow  bool
}

// rowAt is where a row begins.
type rowAt struct {
	off, line int32
}

// spot is a line and a column, from 1.
type spot struct {
	line, column int32
}

func (s spot) place() profile.Place {
	return profile.Place{Line: int(s.line), Column: int(s.column)}
}

func spotOf(p profile.Place) spot { return spot{int32(p.Line), int32(p.Column)} }

// column returns the index of a heading in the rows of the group, 0 if it has
// none.
func (g *group) column(heading string) int {
	return max(0, slices.Index(g.headings, heading))
}

// unit returns the unit of column i as the UNIT row gives it.
func (g *group) unit(i int) string {
	if i > 0 && i < len(g.units) {
		return g.units[i]
	}
	return ""
}

// oddities counts what breaks the rules and is let pass.
type oddities struct {
	unquoted, undoubled, broken, short, repeated, noUnits oddity
}

type oddity struct {
	n    int
	line int // of the first
}

func (o *oddity) see(line int) {
	if o.n == 0 {
		o.line = line
	}
	o.n++
}

// letPass returns the notes on what was let pass.
func (r *reader) letPass() []profile.Note {
	o := &r.oddities
	var notes []profile.Note
	for _, odd := range []struct {
		*oddity
		text string
	}{
		{&o.unquoted, "fields without quotes"},
		{&o.undoubled, "quotes inside a field that are not doubled"},
		{&o.broken, "fields broken over lines"},
		{&o.short, "rows with fewer fields than their HEADING row"},
		{&o.repeated, "groups that come twice"},
		{&o.noUnits, "groups without a UNIT row"},
	} {
		if odd.n > 0 {
			notes = append(notes, profile.Note{
				ID:    "let-pass",
				Text:  "the file has " + odd.text + ", which AGS4 does not allow",
				Place: profile.Place{File: r.File, Line: odd.line},
			})
		}
	}
	return notes
}

// indexer is the state of the first pass over the file.
type indexer struct {
	r       *reader
	s       scanner
	g       *group // that the rows belong to; nil before the first
	rows    int    // kept
	columns int    // of the groups that are kept
	seen    map[string]bool
}

// index finds the groups and the places of the rows that are read later.
func (r *reader) index() bool {
	x := indexer{r: r, s: scanner{text: r.text, line: 1}, seen: map[string]bool{}}
	for {
		ok, bad := x.s.next()
		if bad != nil {
			x.trouble(bad)
		}
		if !ok {
			break
		}
		if !x.row() {
			return false
		}
	}
	odd := r.oddities
	r.oddities = x.s.odd
	r.oddities.short, r.oddities.repeated, r.oddities.noUnits = odd.short, odd.repeated, odd.noUnits
	if len(r.groups) == 0 && r.Count() == 0 {
		r.Fault(profile.Place{Line: 1, Column: 1}, hintAGS4, "the file has no group")
	}
	return len(r.groups) > 0
}

func (x *indexer) trouble(t *trouble) {
	if t.fatal {
		x.r.Stop(t.place, t.hint, "%s", t.text)
	} else {
		x.r.Fault(t.place, t.hint, "%s", t.text)
	}
}

// row takes in the row last read. It returns false if there is no sense in
// going on.
func (x *indexer) row() bool {
	word := strings.ToUpper(string(x.s.field(0)[:min(16, len(x.s.field(0)))]))
	switch word {
	case rowGroup:
		return x.begin()
	case rowHeading:
		return x.heading()
	case rowUnit, rowType:
		x.describe(word)
		return true
	case rowData:
		return x.data()
	}
	if len(x.r.groups) == 0 {
		x.r.Stop(x.s.placeOf(0), hintAGS4, "the file does not begin with a group: this does not look like AGS4")
		return false
	}
	hint := "rows begin with " + strings.Join(descriptors, ", ")
	if near := profile.Nearest(word, descriptors); near != "" && word != "" {
		hint = "did you mean " + near + "?"
	}
	x.r.Fault(x.s.placeOf(0), hint, "a row begins with %s", profile.Quote(x.s.field(0)))
	return true
}

// begin begins a group.
func (x *indexer) begin() bool {
	x.end()
	if len(x.r.groups) == MaxGroups {
		x.r.Stop(x.s.placeOf(0), "split it", "the file has more than %d groups", MaxGroups)
		return false
	}
	name := strings.ToUpper(clean(x.s.field(1)))
	if name == "" {
		x.r.Fault(x.s.placeOf(1), "a group is named by four capitals", "the group has no name")
	}
	x.g = &group{name: name, at: x.s.placeOf(0)}
	x.r.groups = append(x.r.groups, x.g)
	if x.seen[name] {
		x.r.oddities.repeated.see(x.s.first)
	}
	x.seen[name] = true
	return true
}

// end ends the present group.
func (x *indexer) end() {
	if g := x.g; g != nil && g.kept && g.data && !g.unitRow {
		x.r.oddities.noUnits.see(g.at.Line)
	}
}

// heading reads a HEADING row.
func (x *indexer) heading() bool {
	switch {
	case x.g == nil:
		x.r.Stop(x.s.placeOf(0), hintAGS4, "a HEADING row stands before the first GROUP row")
		return false
	case x.g.headings != nil:
		x.r.Fault(x.s.placeOf(0), "begin a new group above it", "group %s has a second HEADING row", x.g.name)
		return true
	}
	g := x.g
	seen := make(map[string]bool, len(x.s.fields))
	for i := range x.s.fields {
		h := strings.ToUpper(clean(x.s.field(i)))
		if i > 0 && h != "" && seen[h] {
			x.r.Fault(x.s.placeOf(i), "keep one, or rename one of them", "heading %s stands twice in group %s", profile.Quote(h), g.name)
		}
		seen[h] = true
		g.headings = append(g.headings, h)
	}
	g.kept = seen["LOCA_ID"] || slices.Contains(headerGroups, g.name)
	if !g.kept {
		g.headings = g.headings[:1:1]
		return true
	}
	if x.columns += len(g.headings); x.columns > MaxHeadings {
		x.r.Stop(x.s.placeOf(0), "split it", "the file has more than %d headings", MaxHeadings)
		return false
	}
	g.units = make([]string, len(g.headings))
	for i := range g.headings {
		g.places = append(g.places, spotOf(x.s.placeOf(i)))
	}
	return true
}

// describe reads a UNIT or TYPE row. The types are not needed: values are
// read whatever their decimals.
func (x *indexer) describe(word string) {
	g := x.g
	switch {
	case g == nil || g.headings == nil:
		x.r.Fault(x.s.placeOf(0), "a group begins with the rows GROUP, HEADING, UNIT and TYPE", "a %s row stands before the HEADING row of its group", word)
		return
	case g.data:
		x.r.Fault(x.s.placeOf(0), "move it under the HEADING row", "the %s row of group %s stands below its data", word, g.name)
		return
	case word == rowType:
		return
	case g.unitRow:
		x.r.Fault(x.s.placeOf(0), "remove one of them", "group %s has a second UNIT row", g.name)
		return
	}
	g.unitRow = true
	x.fits()
	for i := 1; i < min(len(x.s.fields), len(g.units)); i++ {
		g.units[i] = clean(x.s.field(i))
	}
}

// data notes where a DATA row is.
func (x *indexer) data() bool {
	g := x.g
	if g == nil || g.headings == nil {
		x.r.Stop(x.s.placeOf(0), "a group begins with the rows GROUP, HEADING, UNIT and TYPE", "a DATA row stands before the HEADING row of its group")
		return false
	}
	g.data = true
	if !g.kept {
		return true
	}
	if x.rows++; x.rows > MaxRows {
		x.r.Stop(x.s.placeOf(0), "split it", "the file has more than %d rows of data", MaxRows)
		return false
	}
	x.fits()
	g.rows = append(g.rows, rowAt{int32(x.s.start), int32(x.s.first)})
	return true
}

// fits compares the number of fields with that of the headings. What is
// missing at the end is blank.
func (x *indexer) fits() {
	g, n := x.g, len(x.s.fields)
	switch {
	case !g.kept:
	case n < len(g.headings):
		x.r.oddities.short.see(x.s.first)
	case n > len(g.headings):
		for i := len(g.headings); i < n; i++ {
			if len(x.s.field(i)) > 0 {
				x.r.Fault(x.s.placeOf(i), `is a quote or a comma inside a field not within quotes?`,
					"the row has %s, but the HEADING row of %s has %d", profile.Plural(n, "field"), g.name, len(g.headings))
				return
			}
		}
	}
}

// cursor goes through the DATA rows of a group.
type cursor struct {
	g    *group
	next int
	scanner
}

func (r *reader) cursor(g *group) *cursor { return &cursor{g: g, scanner: scanner{text: r.text}} }

// row goes to the next row and returns false if there is none.
func (c *cursor) row() bool {
	if c.next == len(c.g.rows) {
		return false
	}
	c.to(c.g.rows[c.next])
	c.next++
	return true
}

// to goes to a row.
func (c *cursor) to(at rowAt) {
	c.back(int(at.off), int(at.line))
	_, _ = c.scanner.next() // its trouble is told already
}

// get is the text of column i, blank if i is 0.
func (c *cursor) get(i int) []byte {
	if i == 0 {
		return nil
	}
	return c.field(i)
}

// text is the text of column i in one line.
func (c *cursor) text(i int) string { return clean(c.get(i)) }

// offset is where the field in column i begins, -1 if it is not there.
func (c *cursor) offset(i int) int32 {
	if i <= 0 || i >= len(c.fields) {
		return -1
	}
	return int32(c.fields[i].off)
}

// fieldAt is the text of the field that begins at an offset, in one line.
func (c *cursor) fieldAt(off int32) string {
	if off < 0 {
		return ""
	}
	c.back(int(off), 0)
	c.fields = c.fields[:0]
	_ = c.nextField() // its trouble is told already
	if len(c.fields) == 0 {
		return ""
	}
	return clean(c.fields[0].text)
}

// here is where the present row begins.
func (c *cursor) here() rowAt { return c.g.rows[c.next-1] }

// clean is a text in one line, without outer blanks and those side by side.
func clean(text []byte) string {
	if !bytes.ContainsAny(text, " \t\r\n\u00a0\u2028\u2029\u0085") {
		return string(text)
	}
	return strings.Join(strings.Fields(string(text)), " ")
}

// named are the groups of a name whose rows are read.
func (r *reader) named(name string) []*group {
	var list []*group
	for _, g := range r.groups {
		if g.kept && g.name == name {
			list = append(list, g)
		}
	}
	return list
}

// ofHoles are the groups whose rows are each about a hole.
func (r *reader) ofHoles() []*group {
	var list []*group
	for _, g := range r.groups {
		if g.column("LOCA_ID") > 0 {
			list = append(list, g)
		}
	}
	return list
}

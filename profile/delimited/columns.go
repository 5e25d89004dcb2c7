package delimited

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// separators that are tried, the first of equally good ones wins.
const separators = "\t;,"

// columns is the header of a table.
type columns struct {
	list  []column
	index [profile.EPSG + 1]int // of each quantity in list; -1 if it has no column
	given []string              // "Vs (ft/s)" and so on, whose units Options gives
	notes []profile.Note        // on columns named depth
}

type column struct {
	heading
	spot
	used bool // a row has something in it
}

// readHeader reads the header and the row of units, if there is one.
func (r *reader) readHeader() bool {
	if !r.chooseSeparator() {
		return false
	}
	if !r.headerRow() {
		return false
	}
	r.columns.list = make([]column, len(r.scan.cells))
	for i := range r.scan.cells {
		c := &r.scan.cells[i]
		r.columns.list[i] = column{heading: parseHeading(string(c.text)), spot: r.scan.spotOf(c)}
	}
	r.dropTrailing()
	if !r.mapColumns() {
		return false
	}
	return r.isProfile() && r.decideDepth() && r.indexColumns() && r.required() && r.readUnits() && r.bottomsUnread()
}

// isProfile tells of a header of measurements that velocities have yet to be
// found from.
func (r *reader) isProfile() bool {
	vs := slices.ContainsFunc(r.columns.list, func(c column) bool { return c.quantity == profile.Vs })
	text, hint, measured := measurements(r.headings(), vs)
	if measured {
		r.fault(r.headerSpot(), hint, "%s", text)
	}
	return !measured
}

// headerRow reads the first row that is not blank.
func (r *reader) headerRow() bool {
	for {
		ok, bad := r.scan.next()
		switch {
		case bad != nil:
			r.trouble(bad)
			return false
		case !ok:
			r.fault(spot{}, hintTable, "the file has no header and no layers")
			return false
		case !r.scan.blank():
			return true
		}
	}
}

// chooseSeparator takes the separator under which the header names most
// columns.
func (r *reader) chooseSeparator() bool {
	if r.preamble.forced != 0 {
		r.scan.sep = r.preamble.forced
		return true
	}
	most := -1
	var first *trouble
	for _, sep := range []byte(separators) {
		try := r.scan
		try.sep, try.cells = sep, nil
		ok, bad := true, (*trouble)(nil)
		for ok = true; ok; {
			if ok, bad = try.next(); ok && !try.blank() {
				break
			}
		}
		if bad != nil {
			first = bad
			continue
		}
		if n := r.recognised(try.cells); n > most {
			most, r.scan.sep = n, sep
		}
	}
	if most <= MaxColumns && first != nil { // it names nothing
		r.trouble(first)
		return false
	}
	return true
}

// recognised rates a header: the columns that it names, then its cells.
func (r *reader) recognised(cells []cell) int {
	n := len(cells)
	for i := range cells {
		if r.mapping.Heading(string(cells[i].text)) != profile.Unknown {
			n += MaxColumns + 1
		}
	}
	return n
}

// dropTrailing drops the columns at the right that have no heading. What
// stands in them is then a fault of its row.
func (r *reader) dropTrailing() {
	list := r.columns.list
	for len(list) > 0 && list[len(list)-1].name == "" {
		list = list[:len(list)-1]
	}
	r.columns.list = list
}

// decideDepth decides what a column named depth is.
func (r *reader) decideDepth() bool {
	has := func(q profile.Quantity) bool {
		return slices.ContainsFunc(r.columns.list, func(c column) bool { return c.quantity == q && !c.depth })
	}
	i := slices.IndexFunc(r.columns.list, func(c column) bool { return c.depth })
	if i < 0 {
		return true
	}
	c := &r.columns.list[i]
	if has(profile.Top) && has(profile.Bottom) {
		c.quantity, c.depth = profile.Unknown, false // a depth inside the layer
		return r.decideDepth()
	}
	if slices.ContainsFunc(r.columns.list[i+1:], func(c column) bool { return c.depth }) {
		return true // two of them, which indexColumns tells
	}
	thickness := slices.IndexFunc(r.columns.list, func(c column) bool { return c.quantity == profile.Thickness })
	first, firstThickness := r.firstValues(i, thickness)
	switch {
	case has(profile.Bottom):
		r.note("depth-as-top", c, "the top", "the bottoms have a column of their own")
	case has(profile.Top):
		c.quantity = profile.Bottom
		r.note("depth-as-bottom", c, "the bottom", "the tops have a column of their own")
	case first == 0:
		r.note("depth-as-top", c, "the top", "its first value is 0")
	case first > 0 && first == firstThickness:
		c.quantity = profile.Bottom
		r.note("depth-as-bottom", c, "the bottom", "its first value is the first thickness")
	default:
		hint := "name it top or bottom; a first value of 0 would make it the top"
		if better := r.firstRowHint(i); better != "" {
			hint = better
		}
		r.fault(c.spot, hint, "column %s may be the top or the bottom of the layers", quote(c.name))
		return false
	}
	return true
}

func (r *reader) note(id string, c *column, what, why string) {
	r.columns.notes = append(r.columns.notes, profile.Note{
		ID:    id,
		Text:  "column " + quote(c.name) + " was taken for " + what + " of each layer, because " + why,
		Place: r.place(c.spot),
	})
}

// firstValues looks ahead for the first numbers in columns i and j; -1 if
// there is none.
func (r *reader) firstValues(i, j int) (first, second float64) {
	first, second = -1, -1
	ahead := r.scan
	ahead.cells = nil
	for range 3 { // a row of units, and a blank one
		if ok, bad := ahead.next(); !ok || bad != nil {
			break
		}
		if v, problem := metadataNumber(string(ahead.cell(i))); problem == "" {
			first = v
			if w, problem := metadataNumber(string(ahead.cell(j))); j >= 0 && problem == "" {
				second = w
			}
			break
		}
	}
	return first, second
}

// firstRowHint says what to do where the first row has no number in the column
// of depths: it holds more of the header, or ranges.
func (r *reader) firstRowHint(i int) string {
	ahead := r.scan
	ahead.cells = nil
	for range 3 {
		if ok, bad := ahead.next(); !ok || bad != nil {
			return ""
		}
		text := string(ahead.cell(i))
		if isRange(text) {
			return "give the top and the bottom of each layer in columns of their own"
		}
		for j := range ahead.cells {
			if parseHeading(string(ahead.cells[j].text)).quantity != profile.Unknown {
				return "write the header in one row, such as top (m),bottom (m),vs (m/s)"
			}
		}
		if _, problem := metadataNumber(text); problem == "" {
			return ""
		}
	}
	return ""
}

// isRange reports whether a text gives two numbers, as 0-5 or 5 to 12.
func isRange(text string) bool {
	from, rest := cutNumber(strings.TrimSpace(text))
	if i := strings.IndexAny(from, "-–−"); i > 0 {
		from, rest = from[:i], from[i:]
	}
	rest = strings.TrimSpace(rest)
	for _, word := range []string{"-", "–", "−", "—", "to", "bis", "..", "/", "~"} {
		if to, found := strings.CutPrefix(rest, word); found {
			to, _ = cutNumber(strings.TrimSpace(to))
			_, bad1 := metadataNumber(from)
			_, bad2 := metadataNumber(to)
			return bad1 == "" && bad2 == ""
		}
	}
	return false
}

// indexColumns finds the column of each quantity.
func (r *reader) indexColumns() bool {
	ok := true
	for q := range r.columns.index {
		r.columns.index[q] = -1
	}
	for i := range r.columns.list {
		c := &r.columns.list[i]
		before := r.columns.index[c.quantity]
		switch {
		case c.quantity == profile.Unknown:
		case before >= 0:
			hint := "keep one, or rename one of them"
			if better := r.firstRowHint(i); better != "" {
				hint = better
			}
			r.fault(c.spot, hint, "columns %s and %s both give %s",
				quote(r.columns.list[before].name), quote(c.name), c.quantity)
			ok = false
		default:
			r.columns.index[c.quantity] = i
		}
	}
	return ok
}

func (r *reader) has(q profile.Quantity) bool { return r.columns.index[q] >= 0 }

// required looks for the columns that a table cannot do without.
func (r *reader) required() bool {
	depth := r.has(profile.Top) || r.has(profile.Bottom) || r.has(profile.Thickness)
	vs := r.has(profile.Vs) || r.tested()
	at := r.headerSpot()
	if !vs || !depth {
		text, hint := r.noTable(vs, depth)
		r.fault(at, hint, "%s", text)
	}
	if r.has(profile.VsLower) != r.has(profile.VsUpper) {
		q := profile.VsLower
		if r.has(profile.VsUpper) {
			q = profile.VsUpper
		}
		r.fault(r.columnOf(q).spot, "give a lower and an upper Vs, or neither", "%s has no counterpart", q)
		return false
	}
	if r.has(profile.VsLower) && r.has(profile.SigmaLnVs) {
		r.fault(r.columnOf(profile.SigmaLnVs).spot, "keep one of them", "sigma of ln Vs is given twice, as such and by a lower and an upper Vs")
		return false
	}
	return vs && depth
}

// tested reports whether a table without velocities has blow counts or
// strengths instead.
func (r *reader) tested() bool {
	return !r.has(profile.Vs) && (r.has(profile.N) || r.has(profile.Su))
}

// principal is the quantity whose cell stands for a layer in messages: its
// Vs, or what the table has instead.
func (r *reader) principal() profile.Quantity {
	switch {
	case r.has(profile.Vs):
		return profile.Vs
	case r.has(profile.N):
		return profile.N
	}
	return profile.Su
}

func (r *reader) columnOf(q profile.Quantity) *column { return &r.columns.list[r.columns.index[q]] }

func (r *reader) headerLine() int {
	if len(r.columns.list) > 0 {
		return r.columns.list[0].line
	}
	return r.scan.end.line
}

// headerSpot is the place of the header: the line in text, the first cell in
// a spreadsheet.
func (r *reader) headerSpot() spot {
	if r.scan.grid != nil {
		return spot{r.headerLine(), r.scan.grid.column}
	}
	return spot{r.headerLine(), 1}
}

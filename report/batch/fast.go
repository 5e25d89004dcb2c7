package batch

import (
	"bytes"
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/profile/delimited"
	"shearbook/report"
	"shearbook/vs30/extend"
	"shearbook/vs30/siteclass"
)

// fast reads and decides the plain profiles of a table, and leaves every other
// to the ordinary way, package delimited and report.Classify. It is the one
// place where batch does twice what others do: reading a row in the ordinary way
// takes ten times as long as adding it up, and a region has ten million rows.
//
// A profile is plain where each of its rows is a line of ASCII without quotes
// whose cells give depth and velocity in ordinary decimals; where the layers
// follow one another from ground level down; and where neither the reader nor
// profile.Doubts would have anything to say of it. Whatever else a row may be, a
// fault among it, is none of fast's business, so faults are found and told by
// the ordinary reader alone. A test holds the two against each other on every
// fixture, and under fuzzing.
type fast struct {
	head  *delimited.Head
	sep   byte
	roles []role
	top   bool // the table has a column of tops

	base  profile.Profile    // what the head states of each profile, with the name and layers of the one read last
	name  []byte             // of the profile read last; base has it once it is asked for
	next  []byte             // a name that was found behind it, and is plain
	quick []*siteclass.Quick // of each code; nil for those without
	row   plainRow           // read last
	usual bool               // the columns are name, top, bottom and velocity, in SI

	brief  bool // neither notes nor reports are asked for: rows are written and nothing beside them
	codes  []*siteclass.Code
	frames []frame // of each code
	found  []found // likewise
	facts  report.Facts

	placed bool // the table has columns of positions
	place  [profile.EPSG - profile.Latitude + 1]placeCell

	relation *extend.Relation // that carries short profiles on; nil but for the constant velocity
	longer   []profile.Layer  // room for a profile carried on
}

// role is what a column of a table is for.
type role struct {
	quantity profile.Quantity
	factor   float64 // to SI
}

// plainRow is a row of a plain profile.
type plainRow struct {
	name             []byte
	top, bottom, vs  float64 // SI
	column           int     // of vs
	below            []byte  // the bottom with the separator behind it, where it was read by again
	open, suspicious bool    // the bottom is blank, or may stand for a half-space
}

// placeCell is what the rows of a profile say of one quantity of its position.
type placeCell struct {
	text  []byte // as the first row has it; blank where that says nothing
	value float64
}

// newFast returns what reads the plain profiles of a table, nil where it can
// have none.
func newFast(h *delimited.Head, job *Job, set *setting) *fast {
	f := &fast{head: h, sep: h.Separator(), base: h.Base()}
	var seen [profile.Vs + 1]bool
	for _, c := range h.Columns() {
		switch q := c.Quantity; q {
		case profile.Unknown:
		case profile.ProfileName, profile.Top, profile.Bottom, profile.Vs:
			seen[q] = true
		case profile.Latitude, profile.Longitude, profile.Easting, profile.Northing, profile.EPSG:
			f.placed = true
		default:
			return nil
		}
		f.roles = append(f.roles, role{c.Quantity, c.Unit.Factor})
	}
	f.top = seen[profile.Top]
	if !seen[profile.Bottom] || !seen[profile.Vs] || f.base.Survey != (profile.Survey{}) || len(h.Scoped()) > 0 || h.DecimalComma() ||
		f.placed && f.base.Position != (profile.Position{}) {
		return nil
	}
	if set.facts.Extend == constantVelocity {
		f.relation, _ = extend.Find(constantVelocity) // it is there
	}
	for _, c := range set.codes {
		q := c.Quick(set.facts.Datum, set.facts.Foundation)
		f.quick, f.frames = append(f.quick, q), append(f.frames, newFrame(c, q))
	}
	f.usual = slices.Equal(f.roles, []role{{profile.ProfileName, f.roles[0].factor}, {profile.Top, 1}, {profile.Bottom, 1}, {profile.Vs, 1}})
	f.codes, f.found = set.codes, make([]found, len(set.codes))
	f.brief, f.facts = job.FaultsAlone && job.Reports == NoReports, set.facts
	return f
}

// read reads the first profile of text, which begins with a row in the given
// line. It returns the length of its rows and how many they are; 0 where the
// profile is not plain. Its limits of layers and velocities are those within
// which profile.Doubts has nothing to say of a profile that states velocities
// alone, of no survey, or nearer.
func (f *fast) read(text []byte, line int) (length, rows int) {
	const slow, fastSoil, fastRock = 20, 1000, 3600 // m/s
	layers, row := f.base.Layers[:0], &f.row
	above, suspicious, name := 0.0, false, []byte(nil)
	if f.placed {
		f.place = [len(f.place)]placeCell{}
	}
	for length < len(text) {
		n := notPlain
		switch {
		case !f.usual:
		case name != nil:
			n = f.again(text[length:], name, above)
		case f.next != nil:
			row.name, row.below = f.next, nil
			n = f.again(text, f.next, 0)
		}
		if n == notPlain {
			n = f.scan(text[length:], name)
		}
		if n == otherName {
			break
		}
		if n == notPlain {
			return 0, 0
		}
		name, suspicious = row.name, row.suspicious
		top := above // +Inf below a half-space, which no bottom is deeper than
		if f.top && !(math.Abs(row.top-above) <= profile.Joint) || !(row.bottom-top > profile.Joint) ||
			row.bottom > profile.MaxDepth && !row.open || !(row.vs >= slow && row.vs <= fastRock) {
			return 0, 0
		}
		if rows == cap(layers) {
			layers = append(layers, profile.Layer{})
		}
		layers = layers[:rows+1]
		l := &layers[rows]
		l.Top, l.Bottom, l.Vs, l.Line, l.Column = top, row.bottom, row.vs, int32(line+rows), int32(row.column)
		above = row.bottom
		length += n
		rows++
	}
	f.base.Layers, f.name = layers, name
	if suspicious || rows < 2 || layers[0].Vs > fastSoil || f.placed && !f.position() {
		return 0, 0
	}
	return length, rows
}

// position puts the position that the rows state into f.base. It returns false
// where half of one is stated.
func (f *fast) position() bool {
	of := func(q profile.Quantity) profile.Optional {
		c := &f.place[q-profile.Latitude]
		return profile.Optional{Value: c.value, Known: len(c.text) > 0}
	}
	p := &f.base.Position
	p.Latitude, p.Longitude = of(profile.Latitude), of(profile.Longitude)
	p.Easting, p.Northing = of(profile.Easting), of(profile.Northing)
	p.EPSG = int(f.place[profile.EPSG-profile.Latitude].value)
	return p.Latitude.Known == p.Longitude.Known && p.Easting.Known == p.Northing.Known
}

// placeIn reads a cell of a position and returns its end; -1 where it is not
// plain. The first row of the profile states what the others say again, or
// leave blank.
func (f *fast) placeIn(text []byte, at int, q profile.Quantity, first bool) int {
	c := &f.place[q-profile.Latitude]
	end := plainCell(text, at, f.sep)
	cell := text[at:end]
	if !first || len(cell) == 0 {
		if len(cell) > 0 && !bytes.Equal(cell, c.text) {
			return -1
		}
		return end
	}
	digits, negative := bytes.CutPrefix(cell, []byte("-"))
	v, n := plainDecimal(digits, 0)
	limit := float64(profile.MaxGrid)
	switch q {
	case profile.Latitude:
		limit = 90
	case profile.Longitude:
		limit = 180
	case profile.EPSG:
		limit = profile.MaxEPSG
	}
	if n != len(digits) || n == 0 || v > limit || q == profile.EPSG && (negative || v < 1 || v != math.Trunc(v)) {
		return -1
	}
	if negative {
		v = -v
	}
	c.text, c.value = cell, v
	return end
}

// What scan returns beside a length.
const (
	notPlain  = 0
	otherName = -1 // than that of the rows before
)

// scan reads the row that text begins with into f.row and returns its length.
// name is that of the rows before; nil if there are none.
func (f *fast) scan(text, name []byte) int {
	at, row := 0, &f.row
	row.below = nil
	for i := range f.roles {
		if i > 0 {
			if at >= len(text) || text[at] != f.sep {
				return notPlain
			}
			at++
		}
		role, start := &f.roles[i], at
		switch role.quantity {
		case profile.ProfileName:
			if end := at + len(name); name != nil && end < len(text) && text[end] == f.sep && bytes.Equal(text[at:end], name) {
				row.name, at = text[start:end], end
				continue
			}
			at = plainCell(text, at, f.sep)
			if row.name = text[start:at]; !plainName(row.name) {
				return notPlain
			}
			if name != nil && !bytes.Equal(row.name, name) {
				f.next = row.name
				return otherName
			}
		case profile.Unknown:
			at = plainCell(text, at, f.sep)
			if !f.top && delimited.TotalsLabel(text[start:at]) {
				return notPlain
			}
		case profile.Latitude, profile.Longitude, profile.Easting, profile.Northing, profile.EPSG:
			if at = f.placeIn(text, at, role.quantity, name == nil); at < 0 {
				return notPlain
			}
			continue
		case profile.Top:
			row.top, at = plainDecimal(text, at)
			row.top *= role.factor
		case profile.Bottom:
			row.bottom, at = plainDecimal(text, at)
			row.suspicious = row.bottom >= 999 && nines(text[start:at])
			row.bottom *= role.factor
			if row.open = at == start; row.open {
				row.bottom = math.Inf(1)
				continue
			}
		case profile.Vs:
			row.vs, at = plainDecimal(text, at)
			row.vs *= role.factor
			row.column = start + 1
		}
		if at == start && role.quantity != profile.Unknown {
			return notPlain
		}
	}
	switch {
	case at < len(text) && text[at] == '\n':
		return at + 1
	case at+1 < len(text) && text[at] == '\r' && text[at+1] == '\n':
		return at + 2
	case at == len(text):
		return at
	}
	return notPlain
}

// again reads what scan would of nearly all rows: a name that was read before, the
// top where the row before ends (above), a bottom and a velocity. It leaves every
// other row to scan. Most rows write their top as the row before its bottom, so that the
// number need not be read again.
func (f *fast) again(text, name []byte, above float64) int {
	row, at := &f.row, len(name)
	if at >= len(text) || text[at] != f.sep || !bytes.HasPrefix(text, name) {
		return notPlain
	}
	at++
	row.top = above
	if n := len(row.below); n > 0 && len(text)-at >= n && string(text[at:at+n]) == string(row.below) {
		at += n
	} else {
		start := at
		if row.top, at = plainDecimal(text, at); at == start || at >= len(text) || text[at] != f.sep {
			return notPlain
		}
		at++
	}
	start := at
	if row.bottom, at = plainDecimal(text, at); at == start || at >= len(text) || text[at] != f.sep || row.bottom >= 999 {
		return notPlain
	}
	at++
	row.below, start = text[start:at], at
	if row.vs, at = plainDecimal(text, at); at == start || at >= len(text) || text[at] != '\n' {
		return notPlain
	}
	row.column, row.open, row.suspicious = start+1, false, false
	return at + 1
}

// plainCell returns the end of the cell that begins at a place. It ends at the
// first character that is not plain, where scan then looks for the separator.
func plainCell(text []byte, at int, sep byte) int {
	for at < len(text) {
		if b := text[at]; b == sep || b < ' ' || b > '~' || b == '"' {
			break
		}
		at++
	}
	return at
}

// plainName reports whether the reader takes a name as it stands: it has no
// blanks that it would drop, and is no comment.
func plainName(name []byte) bool {
	n := len(name)
	return n > 0 && name[0] != '#' && name[0] != ' ' && name[n-1] != ' ' && !bytes.Contains(name, []byte("  "))
}

// nines reports whether a number is written 999, 9999 and so on.
func nines(text []byte) bool { return len(bytes.Trim(text, "9")) == 0 }

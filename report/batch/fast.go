package batch

import (
	"bytes"
	"math"

	"shearbook/profile"
	"shearbook/profile/delimited"
	"shearbook/vs30"
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
	quick []*siteclass.Quick // of each code; nil for those without
	row   plainRow           // read last

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
	open, suspicious bool    // the bottom is blank, or may stand for a half-space
}

// placeCell is what the rows of a profile say of one quantity of its position.
type placeCell struct {
	text  []byte // as the first row has it; blank where that says nothing
	value float64
}

// newFast returns what reads the plain profiles of a table, nil where it can
// have none.
func newFast(h *delimited.Head, set *setting) *fast {
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
		f.quick = append(f.quick, c.Quick(set.facts.Datum, set.facts.Foundation))
	}
	return f
}

// read reads the first profile of text, which begins with a row in the given
// line. It returns the length of its rows and how many they are; 0 where the
// profile is not plain.
func (f *fast) read(text []byte, line int) (length, rows int) {
	layers, row := f.base.Layers[:0], &f.row
	above, suspicious, name := 0.0, false, []byte(nil)
	f.place = [len(f.place)]placeCell{}
	for length < len(text) {
		n := f.scan(text[length:], name)
		if n == otherName {
			break
		}
		if n == notPlain {
			return 0, 0
		}
		name, suspicious = row.name, row.suspicious
		top := above // +Inf below a half-space, which no bottom is deeper than
		if f.top && !(math.Abs(row.top-above) <= profile.Joint) || !(row.bottom-top > profile.Joint) ||
			row.bottom > profile.MaxDepth && !row.open || !(row.vs >= profile.MinVelocity && row.vs <= profile.MaxVelocity) {
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
	f.base.Layers = layers
	if suspicious || !undoubted(layers) || f.placed && !f.position() {
		return 0, 0
	}
	f.base.Name = string(name)
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

// undoubted reports whether profile.Doubts can have nothing to say of layers
// that state velocities alone, of no survey. The limits are its own, or
// nearer.
func undoubted(layers []profile.Layer) bool {
	const slow, fastSoil, fastRock = 20, 1000, 3600 // m/s
	if len(layers) < 2 || layers[0].Vs > fastSoil {
		return false
	}
	for i := range layers {
		if v := layers[i].Vs; v < slow || v > fastRock {
			return false
		}
	}
	return true
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
				at = end
				continue
			}
			at = plainCell(text, at, f.sep)
			if row.name = text[start:at]; !plainName(row.name) {
				return notPlain
			}
			if name != nil && !bytes.Equal(row.name, name) {
				return otherName
			}
		case profile.Unknown:
			at = plainCell(text, at, f.sep)
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

// plainDecimal reads an ordinary decimal number of at most 15 digits and returns
// where it ends; where none begins it ends where it should begin. The result
// is that of strconv.ParseFloat: the digits and the power of ten are both exact
// in a float64, so that one division rounds once (Clinger 1990, How to read
// floating point numbers accurately, from memory).
func plainDecimal(text []byte, at int) (float64, int) {
	digits, n := uint64(0), 0
	rest := text[at:]
	for n < len(rest) && rest[n]-'0' <= 9 {
		digits = 10*digits + uint64(rest[n]-'0')
		n++
	}
	point := n
	if n > 0 && n < len(rest) && rest[n] == '.' {
		for n++; n < len(rest) && rest[n]-'0' <= 9; n++ {
			digits = 10*digits + uint64(rest[n]-'0')
		}
	}
	switch places := n - point - 1; {
	case point == 0 || n > 16 || point > 15:
		return 0, at
	case places > 0:
		return float64(digits) / powers[places], at + n
	}
	return float64(digits), at + n
}

// powers are the powers of ten that a float64 holds exactly.
var powers = [...]float64{1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16}

// decide makes the row of the profile in hand under code number i. It returns
// false where report.Classify must.
func (f *fast) decide(c *clerk, u *unit, i int, r *result) bool {
	q := f.quick[i]
	if q == nil {
		return false
	}
	v, ok := q.Decide(f.base.Layers)
	basis := unstated
	if !ok {
		if v, ok = f.extended(u, q, r); !ok {
			return false
		}
		basis = extended
	}
	row := &r.row
	row.DepthReached = u.profile.DepthReached()
	row.Class, row.Route, row.Velocity, row.Depth, row.Datum = v.Class, byVelocity, v.Velocity, v.Thickness, v.Datum
	row.Basis, row.Standing = basis, v.Standing.String()
	row.ToClass, row.Margin = v.ToClass, v.Percent
	if row.Vs30 = v.Vs30; row.Vs30 == 0 {
		row.Vs30 = c.vs30(u, v.Datum)
	}
	c.flag(u, r)
	if r.fell = v.Reversed; r.fell {
		row.Flags |= Reversed
		row.Notes++
	}
	return true
}

// extended decides a profile that the deepest velocity carries down to the
// depth that the code asks for, from ground level.
func (f *fast) extended(u *unit, q *siteclass.Quick, r *result) (siteclass.Verdict, bool) {
	p := u.profile
	last := &p.Layers[len(p.Layers)-1]
	if f.relation == nil || q.From() != 0 || last.Bottom >= q.Depth()-vs30.Touching {
		return siteclass.Verdict{}, false
	}
	e, err := f.relation.Estimate(p.Layers, 0, q.Depth())
	if err != nil {
		return siteclass.Verdict{}, false
	}
	layers := append(append(f.longer[:0], p.Layers...), profile.Layer{Top: e.Reached, Bottom: e.From + e.Thickness, Vs: e.Below})
	f.longer = layers
	notes := append(make([]profile.Note, 0, 5), e.Note)
	notes = append(notes, e.Doubts...)
	v, notes, ok := q.DecideExtended(p, layers, notes)
	if ok {
		r.notes = notes
	}
	return v, ok
}

// What siteclass.Decision says of a profile that is decided by its velocity
// alone and does not state how that came to be known.
const (
	constantVelocity = "constant-velocity"

	byVelocity = "velocity"
	unstated   = "not stated"
	extended   = "extended"
)

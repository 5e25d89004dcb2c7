package delimited

import (
	"strings"

	"shearbook/profile"
)

// readUnits settles the unit of every column: the one in its heading, in the
// row of units, in the "# units:" line, or in Options.
func (r *reader) readUnits() bool {
	row, found := r.unitRow()
	for i := range r.columns.list {
		c := &r.columns.list[i]
		if found {
			r.unitFromRow(c, &row, i)
		}
		if c.problem != "" {
			r.fault(c.spot, hintBrackets, "column %s: %s", quote(c.name), c.problem)
			r.table.unitless = true
			c.unit.Factor = 1 // the numbers are checked all the same
			continue
		}
		if c.quantity.Dimension() != profile.Dimensionless {
			r.settleUnit(c)
		}
	}
	r.reading.Columns = r.readingColumns()
	return true
}

const hintBrackets = `state one unit, and nothing else in brackets, as "vs (m/s)"`

// unitRow looks for a row of units under the header: no column that must have
// a unit holds a number there, and at least one of them a unit. It is read
// past if it is one.
func (r *reader) unitRow() (scanner, bool) {
	ahead := r.scan
	ahead.cells = nil
	for {
		if ok, bad := ahead.next(); !ok || bad != nil {
			return ahead, false
		}
		if !ahead.blank() {
			break
		}
	}
	found := false
	for i := range r.columns.list {
		q := r.columns.list[i].quantity
		text := string(ahead.cell(i))
		if !needsUnit(q) || text == "" {
			continue
		}
		if _, problem := metadataNumber(text); problem == "" {
			return ahead, false
		}
		if _, ok := columnUnit(text, q.Dimension()); ok {
			found = true
		}
	}
	if found {
		r.scan.off, r.scan.line, r.scan.bol = ahead.off, ahead.line, ahead.bol
	}
	return ahead, found
}

// needsUnit reports whether quantity q means nothing without a stated unit.
func needsUnit(q profile.Quantity) bool {
	switch q.Dimension() {
	case profile.Dimensionless, profile.Blows:
		return false
	}
	return q != profile.PI
}

// unitFromRow reads the unit of column i in the row of units.
func (r *reader) unitFromRow(c *column, row *scanner, i int) {
	text := strings.TrimSpace(string(row.cell(i)))
	if text == "" || isDash(text) {
		return
	}
	d := c.quantity.Dimension()
	if c.quantity == profile.Unknown || d == profile.Dimensionless {
		c.unitText = text
		return
	}
	u, ok := columnUnit(text, d)
	switch {
	case !ok && !needsUnit(c.quantity):
	case !ok:
		c.problem, c.spot = notAUnit(text, d), row.place(i)
	case c.unit.Name != "" && c.unit != u:
		c.problem, c.spot = "two units, "+c.unit.Name+" and "+u.Name, row.place(i)
	default:
		c.unit, c.unitText = u, text
	}
}

// settleUnit takes the unit of a column from elsewhere if it has none, and
// looks for contradictions if it has one.
func (r *reader) settleUnit(c *column) {
	r.mappedUnit(c)
	for _, units := range []*Units{&r.stated, &r.given} {
		u, ok := units.of(c.quantity)
		switch {
		case !ok:
		case c.unit.Name == "":
			c.unit, c.unitText = u, u.Name
			if units == &r.given {
				r.columns.given = append(r.columns.given, quote(c.name)+" in "+u.Name)
			}
		case c.unit != u && units == &r.given:
			r.fault(c.spot, "leave the unit out of --units, or correct the file", "column %s is in %s, but %s was given for it",
				quote(c.name), c.unit.Name, u.Name)
		case c.unit != u:
			r.fault(c.spot, "", "column %s is in %s, but the units line above the header says %s", quote(c.name), c.unit.Name, u.Name)
		}
	}
	if c.unit.Name != "" {
		return
	}
	if needsUnit(c.quantity) {
		hint := hintUnit(c)
		if better := r.firstRowHint(r.columns.index[c.quantity]); better != "" {
			hint = better
		}
		r.fault(c.spot, hint, "column %s states no unit", quote(c.name))
		r.table.unitless = true
	}
	c.unit.Factor = 1
}

// mappedUnit takes the unit that a mapping gives for a column.
func (r *reader) mappedUnit(c *column) {
	if c.mapped == nil || c.mapped.unit == "" {
		return
	}
	u, ok := columnUnit(c.mapped.unit, c.quantity.Dimension())
	switch {
	case !ok: // it belongs to the heading
	case c.unit.Name == "":
		c.unit, c.unitText = u, c.mapped.unit
		r.columns.given = append(r.columns.given, quote(c.name)+" in "+u.Name)
	case c.unit != u:
		r.fault(c.spot, "leave the unit out of the mapping, or correct the file", "column %s is in %s, but %s was given for it", quote(c.name), c.unit.Name, u.Name)
	}
}

// hintUnit shows how to state the unit of a column.
func hintUnit(c *column) string {
	name := strings.ToLower(c.name)
	var suffixed, unit, option string
	switch c.quantity.Dimension() {
	case profile.Length:
		suffixed, unit, option = "_m", "m", "m, m/s"
	case profile.Velocity:
		suffixed, unit, option = "_mps", "m/s", "m, m/s"
	case profile.MassDensity:
		suffixed, unit, option = "_kg_m3", "kg/m3", "kg/m3"
	case profile.Stress:
		suffixed, unit, option = "_kpa", "kPa", "kPa"
	default:
		suffixed, unit, option = "_pct", "%", "%"
	}
	return "write it in the heading, as " + strings.ReplaceAll(name, " ", "_") + suffixed + ` or "` + name + " (" + unit + `)", or give --units "` + option + `"`
}

func (r *reader) readingColumns() []profile.Column {
	list := make([]profile.Column, len(r.columns.list))
	for i := range r.columns.list {
		c := &r.columns.list[i]
		list[i] = profile.Column{Heading: c.name, Unit: c.unitText, Quantity: c.quantity}
	}
	return list
}

package ags

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// measure is a column of numbers with the factor to SI. The zero value is no
// column.
type measure struct {
	i      int
	factor float64
	unit   string // as the file gives it, or the usual one
}

// source is where values of one quantity stand in one group.
type source struct {
	g          *group
	q          profile.Quantity
	name       string // heading of the value
	loca       int
	depths     []measure // the first that is not blank counts
	base       measure   // of an interval that begins at the depth
	value      int
	instead    []int  // columns that stand for the value where it is blank
	unit       string // of the value, as the file gives it; "" where each row has its own
	factor     float64
	speed      speed // the unit of a velocity
	unitColumn int   // of rows that state the unit of their value
	own        *own  // of VSPL
}

// newSource is the source of quantity q in column value of a group. Its
// depths are still missing.
func newSource(g *group, q profile.Quantity, value int) *source {
	return &source{g: g, q: q, name: g.headings[value], loca: g.column("LOCA_ID"), value: value, factor: 1}
}

// length is a column of lengths. One whose unit is blank is in its usual one,
// which is noted; one whose unit is not of length is a fault.
func (r *reader) length(g *group, i int) measure {
	if i == 0 {
		return measure{}
	}
	u, ok := r.unit(g, i, profile.Length, "m")
	if !ok {
		r.Fault(g.places[i].place(), "correct the UNIT row", "the unit of %s, %s, is not one of length that is read (%s)",
			g.headings[i], profile.Quote(r.unitOf(g, i)), strings.Join(profile.UnitNames(profile.Length), ", "))
		return measure{}
	}
	return measure{i, u.Factor, r.unitText(g, i, u)}
}

// unitText is the unit of column i as the file gives it; where it gives none,
// the one that was taken.
func (r *reader) unitText(g *group, i int, taken profile.Unit) string {
	if text := r.unitOf(g, i); text != "" {
		return text
	}
	return taken.Name
}

// soft is a column of numbers that a profile can do without. One whose unit
// cannot be read is left out, which is noted.
func (r *reader) soft(g *group, i int, d profile.Dimension) measure {
	if i == 0 {
		return measure{}
	}
	usual := ""
	if d == profile.Length {
		usual = "m"
	}
	u, ok := r.unit(g, i, d, usual)
	if !ok && len(g.rows) > 0 {
		text := "is not stated"
		if unit := r.unitOf(g, i); unit != "" {
			text = profile.Quote(unit) + " is not one of " + d.String() + " that is read (" + strings.Join(profile.UnitNames(d), ", ") + ")"
		}
		const most = 50
		r.unitNotes = append(r.unitNotes[:min(len(r.unitNotes), most)], profile.Note{ID: "unit-not-read", Text: "the unit of " + g.headings[i] + " " + text + "; it was left out", Place: r.at(g.places[i])})
	}
	if !ok {
		return measure{}
	}
	return measure{i, u.Factor, r.unitText(g, i, u)}
}

// unit is the unit of column i, of dimension d; where the file states none it
// is the usual one, which is noted. It returns false where the unit is of
// another dimension, or not known.
func (r *reader) unit(g *group, i int, d profile.Dimension, usual string) (profile.Unit, bool) {
	text := r.unitOf(g, i)
	if text == "" {
		if usual = usualOr(g.headings[i], usual); usual == "" {
			return profile.Unit{}, false
		}
		note := g.headings[i] + " in " + usual
		if len(g.rows) > 0 && g.headings[i] != "LLPL_PI" && // whose usual unit is blank
			!slices.Contains(r.assumed, note) {
			r.assumed = append(r.assumed, note)
		}
		text = usual
	}
	return profile.ParseUnit(text, d)
}

func usualOr(heading, usual string) string {
	if u, ok := usualUnits[heading]; ok {
		return u
	}
	return usual
}

// optional reads a number that a hole can do without. One that is not there
// is not ok; nor is one that cannot be read, which is remarked.
func (r *reader) optional(h *hole, c *cursor, m measure, d profile.Dimension) (float64, bool) {
	text := c.get(m.i)
	if len(text) == 0 {
		return 0, false
	}
	v, problem := parseNumber(text)
	if problem == "" && d == profile.Length && (v*m.factor > profile.MaxDepth || v*m.factor < -profile.MaxDepth) {
		problem = "is too large"
	}
	if problem != "" {
		heading := c.g.headings[m.i]
		h.remark("not-read", heading, c.placeOf(m.i), heading+" "+profile.Quote(text)+" "+problem+" and was left out")
		return 0, false
	}
	return v * m.factor, true
}

// depth reads the depth in m of the row that the cursor is at, from the first
// of its columns that is not blank, which it returns too; 0 if all are.
func (s *source) depth(c *cursor) (z float64, column int, problem string) {
	for _, m := range s.depths {
		if text := c.get(m.i); len(text) > 0 {
			z, problem = parseNumber(text)
			return z * m.factor, m.i, problem
		}
	}
	return 0, 0, ""
}

// depthColumns finds the headings of depth in a group: those that Options.Map
// names, those of the group's own that end in _TOP, _BASE and _DPTH, and those
// of a specimen or a sample.
func (r *reader) depthColumns(s *source) {
	g := s.g
	own := func(ends ...string) int {
		for _, end := range ends {
			if i := g.column(g.name + "_" + end); i > 0 {
				return i
			}
		}
		return 0
	}
	find := func(q profile.Quantity, i int) int {
		if m := r.mappedColumn(g, q); m > 0 {
			return m
		}
		return i
	}
	top, depth, base := find(profile.Top, own("TOP")), find(profile.Depth, own("DPTH", "DEPT", "DPT")), find(profile.Bottom, own("BASE", "BOT"))
	if base > 0 {
		s.base = r.length(g, base)
	}
	columns := []int{depth, top}
	if base > 0 {
		columns = []int{top, depth}
	}
	columns = append(columns, g.column("SPEC_DPTH"), g.column("SAMP_TOP"))
	for _, i := range columns {
		if i > 0 {
			s.depths = append(s.depths, r.length(g, i))
		}
	}
}

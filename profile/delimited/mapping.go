package delimited

import (
	"strings"

	"shearbook/profile"
)

// Mapping names columns by headings that are not read otherwise. The zero
// value names none.
type Mapping struct{ items []mapItem }

// mapItem is one item of a mapping.
type mapItem struct {
	word     string // the quantity as it was given
	quantity profile.Quantity
	depth    bool   // it may be the top or the bottom
	heading  string // as it was given, all of it
	base     string // the heading without what stands in brackets
	unit     string // the last of what stands in brackets; "" if nothing does
}

const hintMap = `write it as --map "Vs=S-wave speed [m/s]"`

// ParseMap reads items such as "Vs=S-wave speed [m/s]". The error is a
// profile.Faults.
func ParseMap(list []string) (Mapping, error) {
	var m Mapping
	var faults profile.Faults
	add := func(hint, format string, args ...any) {
		faults = append(faults, profile.Faultf(profile.Place{}, hint, format, args...))
	}
	for _, text := range list {
		word, heading, found := strings.Cut(text, "=")
		word, heading = strings.TrimSpace(word), strings.TrimSpace(heading)
		h := named(word)
		switch {
		case !found || heading == "":
			add(hintMap, "mapping %s has no = with a heading behind it", quote(text))
			continue
		case h.quantity == profile.Unknown:
			add("quantities are top, bottom, depth, thickness, Vs, Vp, density, N, su, PI, water content, soil, profile and others that a heading may name",
				"mapping of %s: that is no quantity that is read", quote(word))
			continue
		}
		item := mapItem{word: word, quantity: h.quantity, depth: h.depth, heading: heading}
		base, groups := brackets(heading)
		if item.base = base; len(groups) > 0 {
			item.unit = groups[len(groups)-1]
		}
		for i := range m.items {
			if other := &m.items[i]; other.quantity == item.quantity {
				add("keep one of them", "two mappings of %s", item.quantity)
			}
		}
		m.items = append(m.items, item)
	}
	return m, faults.Err()
}

// match rates how well a heading fits an item: 2 if it is the one that the
// item gives, 1 if only without the units of either, 0 if it is another.
func (item *mapItem) match(heading string) int {
	if len(heading) > longestHeading {
		return 0
	}
	want := plain(item.heading)
	if plain(heading) == want {
		return 2
	}
	base, _ := brackets(heading)
	bare := plain(item.base)
	if bare == "" {
		return 0
	}
	if b := plain(base); b == bare || b == want || plain(heading) == bare {
		return 1
	}
	if name, _, _ := cutUnit(base, item.quantity.Dimension()); name != "" && plain(name) == bare {
		return 1
	}
	return 0
}

// Heading returns what a column with this heading is taken for, Unknown if it
// is not read. A column named depth and no more is taken for tops; what stands
// in it may show that it holds bottoms.
func (m Mapping) Heading(text string) profile.Quantity {
	for i := range m.items {
		if m.items[i].match(text) > 0 {
			return m.items[i].quantity
		}
	}
	return parseHeading(text).quantity
}

// Mark sets found[i] if heading is one that item i names. The length of found
// is at least that of the list that was parsed.
func (m Mapping) Mark(found []bool, heading string) {
	for i := range m.items {
		found[i] = found[i] || m.items[i].match(heading) > 0
	}
}

// Missing is the fault of an item whose heading stands nowhere among headings.
func (m Mapping) Missing(i int, headings []string) profile.Fault {
	item := &m.items[i]
	hint := "name a heading as the file has it"
	if near := profile.Nearest(item.base, headings); near != "" {
		hint = "did you mean " + quote(near) + "?"
	} else if len(headings) > 0 {
		hint = "the headings are " + listed(headings)
	}
	return profile.Faultf(profile.Place{}, hint, "mapping of %s: there is no column %s", item.word, quote(item.base))
}

// mapColumns gives the columns that the mapping names their quantities. Others
// of these quantities are then not read.
func (r *reader) mapColumns() bool {
	ok := true
	for i := range r.mapping.items {
		item := &r.mapping.items[i]
		best, at, twice := 0, -1, false
		for j := range r.columns.list {
			switch fit := item.match(r.columns.list[j].text); {
			case fit > best:
				best, at, twice = fit, j, false
			case fit > 0 && fit == best:
				twice = true
			}
		}
		switch {
		case at < 0 && r.scan.grid == nil: // in a workbook another table may have it
			f := r.mapping.Missing(i, r.headings())
			r.fault(r.headerSpot(), f.Hint, "%s", f.Text)
			ok = false
		case at < 0:
		case twice:
			r.fault(r.columns.list[at].spot, "give the heading whole, or rename one of them", "mapping of %s: more than one column is named %s", item.word, quote(item.base))
			ok = false
		default:
			r.mapColumn(item, at)
		}
	}
	return ok
}

// mapColumn makes column at the one of an item.
func (r *reader) mapColumn(item *mapItem, at int) {
	for j := range r.columns.list {
		if c := &r.columns.list[j]; j != at && c.mapped == nil && (c.quantity == item.quantity || item.depth && c.depth) {
			c.heading = heading{name: c.text, text: c.text}
		}
	}
	c := &r.columns.list[at]
	text := c.text
	c.heading = heading{name: text, text: text, quantity: item.quantity, depth: item.depth, mapped: item}
	d := item.quantity.Dimension()
	base, groups := brackets(text)
	switch name, unit, text := cutUnit(base, d); {
	case len(groups) > 0:
		c.name = base
		if u, ok := columnUnit(groups[len(groups)-1], d); ok {
			c.unit, c.unitText = u, groups[len(groups)-1]
		}
	case name != "":
		c.name, c.unit, c.unitText = name, unit, text
	}
	if u := slowness(text); c.unit.Name == "" && d == profile.Velocity && u.Name != "" {
		c.unit, c.unitText = u, u.Name
	}
	if _, ok := columnUnit(item.unit, d); item.unit != "" && !ok && item.match(c.text) < 2 {
		c.problem = notAUnit(item.unit, d)
	}
	if unit := contradicts(text, item.quantity); unit != "" && c.unit.Name == "" {
		c.problem = "its heading states " + quote(unit) + ", which is no unit of " + d.String()
	}
}

// columnUnit is unitOf for a column, which may give velocities as slowness.
func columnUnit(text string, d profile.Dimension) (profile.Unit, bool) {
	if u := slownessUnit(text); d == profile.Velocity && u.Name != "" {
		return u, true
	}
	return unitOf(text, d)
}

// cutUnit cuts a heading into a name and the unit of a dimension behind it; the
// name is "" if there is none.
func cutUnit(text string, d profile.Dimension) (name string, unit profile.Unit, unitText string) {
	if d == profile.Dimensionless {
		return "", unit, ""
	}
	for i := 1; i < len(text); i++ {
		if !strings.ContainsRune(afterName, rune(text[i])) {
			continue
		}
		rest := strings.TrimLeft(text[i+1:], " _")
		if u, ok := unitOf(rest, d); ok {
			return strings.TrimRight(text[:i], afterName), u, rest
		}
	}
	return "", unit, ""
}

// headings are the headings of the table.
func (r *reader) headings() []string {
	var list []string
	for i := range r.columns.list {
		if text := r.columns.list[i].text; text != "" {
			list = append(list, text)
		}
	}
	return list
}

// mappedColumns says what was read as the mapping says.
func (r *reader) mappedColumns() []string {
	var list []string
	for i := range r.columns.list {
		if c := &r.columns.list[i]; c.mapped != nil {
			list = append(list, c.quantity.String()+" from "+quote(c.name))
		}
	}
	return list
}

package ags

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// mapping is one item of Options.Map.
type mapping struct {
	q    profile.Quantity
	name string // in capitals
	unit string
}

// mapped are the quantities that Options.Map may name.
var mapped = []struct {
	name string
	q    profile.Quantity
}{
	{"Vs", profile.Vs}, {"Vp", profile.Vp},
	{"top", profile.Top}, {"bottom", profile.Bottom}, {"base", profile.Bottom}, {"depth", profile.Depth},
	{"N", profile.N}, {"su", profile.Su}, {"cu", profile.Su}, {"PI", profile.PI},
	{"water content", profile.WaterContent}, {"density", profile.Density},
}

const hintMap = `write it as --map "Vs=MASW_VEL [m/s]"`

// readMap reads Options.Map.
func (r *reader) readMap() bool {
	for _, item := range r.opt.Map {
		name, heading, found := strings.Cut(item, "=")
		if !found {
			r.Fault(profile.Place{}, hintMap, "mapping %s has no =", profile.Quote(item))
			continue
		}
		if m, ok := r.mapping(name, heading); ok && r.exists(&m) {
			r.agrees(&m)
			r.maps = append(r.maps, m)
		}
	}
	return true
}

// mapping reads one item.
func (r *reader) mapping(name, heading string) (m mapping, ok bool) {
	name, heading = strings.TrimSpace(name), strings.TrimSpace(heading)
	i := slices.IndexFunc(mapped, func(k struct {
		name string
		q    profile.Quantity
	}) bool {
		return strings.EqualFold(k.name, name)
	})
	if i < 0 {
		var names []string
		for _, k := range mapped {
			names = append(names, k.name)
		}
		r.Fault(profile.Place{}, "quantities are "+strings.Join(names, ", "), "mapping of %s: that is no quantity that is read", profile.Quote(name))
		return m, false
	}
	m.q = mapped[i].q
	if from := strings.IndexAny(heading, "[("); from >= 0 {
		m.unit = strings.TrimSpace(strings.Trim(heading[from:], "[]() "))
		heading = strings.TrimSpace(heading[:from])
	}
	m.name = strings.ToUpper(heading)
	return m, true
}

// exists looks for what a mapping names.
func (r *reader) exists(m *mapping) bool {
	var names []string
	for _, g := range r.groups {
		if !g.kept {
			continue
		}
		if g.column(m.name) > 0 {
			return true
		}
		names = append(names, g.headings[min(1, len(g.headings)):]...)
	}
	codes := r.codesOf("WGPT_PARA")
	if slices.ContainsFunc(codes, func(c string) bool { return strings.EqualFold(c, m.name) }) {
		return true
	}
	hint := "name a heading, or a code of WGPT_PARA, as the file has it"
	if near := profile.Nearest(m.name, append(names, codes...)); near != "" {
		hint = "did you mean " + near + "?"
	}
	r.Fault(profile.Place{}, hint, "mapping of %s: the file has no heading %s", m.q, profile.Quote(m.name))
	return false
}

// codesOf are the codes that stand under a heading, in the order of the file.
func (r *reader) codesOf(heading string) []string {
	var list []string
	seen := map[string]bool{}
	for _, g := range r.groups {
		i := g.column(heading)
		if i == 0 {
			continue
		}
		for c := r.cursor(g); c.row() && len(list) < 1000; {
			if code := c.get(i); !seen[string(code)] {
				seen[string(code)] = true
				list = append(list, string(code))
			}
		}
	}
	return list
}

// mappingOf is what Options.Map says of a heading or a parameter, nil if
// nothing.
func (r *reader) mappingOf(name string) *mapping {
	for i := range r.maps {
		if strings.EqualFold(r.maps[i].name, name) {
			return &r.maps[i]
		}
	}
	return nil
}

// mappedColumn is the column of a group that Options.Map calls a quantity, 0
// if there is none.
func (r *reader) mappedColumn(g *group, q profile.Quantity) int {
	for i := range r.maps {
		if m := &r.maps[i]; m.q == q && g.column(m.name) > 0 {
			return g.column(m.name)
		}
	}
	return 0
}

// agrees looks for a unit in the file that contradicts the mapping.
func (r *reader) agrees(m *mapping) {
	for _, g := range r.groups {
		if i := g.column(m.name); i > 0 && m.unit != "" && r.unitOf(g, i) != "" && !sameUnit(r.unitOf(g, i), m.unit) {
			r.Fault(g.places[i].place(), "leave the unit out of the mapping, or correct the file",
				"heading %s is in %s, but %s was given for it", m.name, profile.Quote(r.unitOf(g, i)), profile.Quote(m.unit))
		}
	}
}

// unitOf is the unit of a column: the one in the UNIT row, in DICT, or in
// Options.Map.
func (r *reader) unitOf(g *group, i int) string {
	heading := g.headings[i]
	unit := g.unit(i)
	if unit == "" {
		unit = r.header.words[heading].unit
	}
	if m := r.mappingOf(heading); m != nil && unit == "" {
		return m.unit
	}
	return unit
}

// sameUnit reports whether two texts spell one unit.
func sameUnit(a, b string) bool {
	if strings.EqualFold(a, b) {
		return true
	}
	for d := profile.Length; d <= profile.Blows; d++ {
		u, ok := profile.ParseUnit(a, d)
		v, also := profile.ParseUnit(b, d)
		if ok && also && u == v {
			return true
		}
	}
	u, ok := parseSpeed(a)
	v, also := parseSpeed(b)
	return ok && also && u.factor == v.factor && u.slowness == v.slowness
}

package codefile

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// maxRoutes is how many routes a table may have; no print has more than four.
const maxRoutes = 10

// measures are what a route may average, each with the column that it is held
// against.
var measures = []siteclass.Measure{siteclass.AverageVs, siteclass.AverageN, siteclass.AverageNch, siteclass.AverageSu}

// blows are the kinds of blow count that a table may ask for.
var blows = []siteclass.Blow{siteclass.BlowUnstated, siteclass.BlowField, siteclass.BlowN60, siteclass.BlowN1, siteclass.BlowCorrected}

// routes reads the ways from the data to a class. A table that names none has
// the velocity alone.
func (r *reader) routes(top *mapping, c *siteclass.Code) {
	for i, n := range top.items("routes", maxRoutes) {
		m := &mapping{reader: r, what: fmt.Sprintf("route %d", i+1)}
		m.use(n)
		if m.node == nil {
			continue
		}
		route := m.route(i+1, c)
		if slices.ContainsFunc(c.Routes, func(other siteclass.Route) bool { return other.Name == route.Name }) {
			r.add(m.place(), "give each route one entry", "the table has two routes called %q", route.Name)
		}
		c.Routes = append(c.Routes, route)
	}
	c.Needs = top.number("routes needed", len(c.Routes))
	r.averaging(top, c)
}

// route reads one route; place is its place in the list, from 1.
func (m *mapping) route(place int, c *siteclass.Code) siteclass.Route {
	route := siteclass.Route{Measures: m.measures(), Name: m.class("name"), Rank: m.number("rank", 100),
		Clause: m.text("clause"), Standing: m.standing("standing", max(c.Standing, siteclass.Checked))}
	if route.Name == "" {
		route.Name = defaultName(route.Measures)
	}
	if route.Rank == 0 {
		route.Rank = place
	}
	if route.Clause == "" {
		route.Clause = c.Clause
	}
	m.rest()
	return route
}

func defaultName(of []siteclass.Measure) string { return strings.Join(words(of), " and ") }

// measures reads what a route averages.
func (m *mapping) measures() []siteclass.Measure {
	known := words(measures)
	var of []siteclass.Measure
	for _, n := range m.items("of", len(measures)) {
		i := slices.Index(known, m.textOf(n, "of"))
		switch {
		case i < 0:
			m.add(m.at(n), suggest(n.Value, known), "of %s is %q", m.what, shown(n.Value))
		case slices.Contains(of, measures[i]):
			m.add(m.at(n), "leave one out", "%s averages %s twice", m.what, known[i])
		default:
			of = append(of, measures[i])
		}
	}
	if n := m.get("of"); n == nil || n.Kind == yaml.SequenceNode && len(n.Content) == 0 {
		m.add(m.place(), "add `of: velocity`; known: "+strings.Join(known, ", "), "%s does not say what it is %q", m.what, "of")
	}
	if len(of) > 1 && slices.Contains(of, siteclass.AverageVs) {
		m.add(m.at(m.get("of")), "make two routes of it, of one rank where the softer class governs", "%s takes the velocity with another average", m.what)
	}
	return of
}

// number returns a key that is a whole number from 1 up to most, 0 where it
// is not there.
func (m *mapping) number(key string, most int) int {
	n := m.get(key)
	text := m.textOf(n, key)
	if text == "" {
		return 0
	}
	v, err := strconv.Atoi(text)
	if err != nil || v < 1 || v > most {
		m.add(m.at(n), fmt.Sprintf("write a whole number from 1 to %d", max(1, most)), "%s of %s is %q", key, m.what, shown(text))
		return 0
	}
	return v
}

// averaging reads how N and su are averaged.
func (r *reader) averaging(top *mapping, c *siteclass.Code) {
	n := top.get("averaging")
	if n == nil {
		if slices.ContainsFunc(c.Routes, byTests) {
			r.add(r.at(top.get("routes")), "add `averaging: {clause: 7.2}`; the example explains its keys", "the table has a route by N or su and does not state their %q", "averaging")
		}
		return
	}
	m := &mapping{reader: r, what: "averaging"}
	m.use(n)
	if m.node == nil {
		return
	}
	a := &c.Averaging
	a.N, a.Nch, a.Su = m.text("N"), m.text("Nch"), m.text("su")
	a.Blow = named(blows, m.word("blow count", words(blows), siteclass.BlowUnstated.String()))
	a.NCap, a.SuCap = m.plain("N cap"), m.plain("su cap")
	a.Cohesive, a.Cohesionless = m.index("cohesive"), m.index("cohesionless")
	a.Unstated = m.word("formula", []string{formulaPrinted, formulaNot}, formulaPrinted) == formulaNot
	if a.Clause = m.text("clause"); a.Clause == "" {
		a.Clause = c.Clause
	}
	a.Standing = m.standing("standing", max(c.Standing, siteclass.Checked))
	if a.SuCap > 0 && c.SuUnit.Name == "" {
		m.add(m.at(m.get("su cap")), "add a line such as `strength unit: kPa`", "averaging caps the strength, and the table does not state the %q", "strength unit")
	}
	m.rest()
}

// byTests reports whether a route averages N or su.
func byTests(u siteclass.Route) bool {
	return slices.ContainsFunc(u.Measures, func(m siteclass.Measure) bool { return m != siteclass.AverageVs })
}

// Whether the print has the formula of the averages of N and su.
const (
	formulaPrinted = "printed"
	formulaNot     = "not printed"
)

// plain returns a key that is a plain number above 0, 0 where it is not
// there.
func (m *mapping) plain(key string) float64 {
	n := m.get(key)
	text := m.textOf(n, key)
	if text == "" {
		return 0
	}
	v, err := parseNumber(text)
	if err == nil && v == 0 {
		err = fmt.Errorf("is 0")
	}
	if err != nil {
		m.add(m.at(n), "write the bare number, in the unit of the column", "%s of %s %v", key, m.what, err)
	}
	return v
}

// index returns a range of the plasticity index, in %.
func (m *mapping) index(key string) siteclass.Range {
	n := m.get(key)
	text := m.textOf(n, key)
	if text == "" {
		return siteclass.Range{}
	}
	k, err := parseCell(text)
	switch {
	case err != nil:
		m.add(m.at(n), cellForms, "%s of %s: %v", key, m.what, err)
	case k.unit != "" && k.unit != "%" || k.about:
		m.add(m.at(n), "write a range of the plasticity index, as \"> 20\"", "%s of %s is %q", key, m.what, shown(text))
	}
	return k.Range
}

// checkRoutes adds a fault where a route averages what the table has no
// column for, or needs no column that the table has none of.
func (r *reader) checkRoutes(top *mapping, c *siteclass.Code) {
	nodes := top.items("routes", maxRoutes)
	if len(c.Routes) == 0 && !hasColumn(c, siteclass.AverageVs) {
		r.add(profile.Place{File: r.file}, "give the classes bounds such as `vs: \"> 800\"`, or name the routes", "no class of the table has a range of velocities")
	}
	for i := range c.Routes {
		for _, m := range c.Routes[i].Measures {
			if !hasColumn(c, m) {
				r.add(r.at(routeNode(nodes, i)), "give the classes bounds on it, or leave the route out", "route %q averages %s, which no class of the table bounds", c.Routes[i].Name, m)
			}
		}
	}
}

func routeNode(nodes []*yaml.Node, i int) *yaml.Node {
	if i < len(nodes) {
		return nodes[i]
	}
	return nil
}

// hasColumn reports whether a class is given by the column of a measure.
func hasColumn(c *siteclass.Code, m siteclass.Measure) bool {
	return slices.ContainsFunc(c.Bands, func(b siteclass.Band) bool {
		return !b.Indicative && !columnOf(&b, m).Empty()
	})
}

// routeList writes a route.
func routeList(u *siteclass.Route, c *siteclass.Code) list {
	l := newList()
	l.texts("of", words(u.Measures), true)
	l.text("name", u.Name, defaultName(u.Measures))
	l.number("rank", float64(u.Rank))
	l.text("clause", u.Clause, c.Clause)
	l.text("standing", u.Standing.String(), c.Standing.String())
	return l
}

// averagingList writes how N and su are averaged.
func averagingList(a *siteclass.Averaging, c *siteclass.Code) list {
	l := newList()
	l.text("N", a.N, "")
	l.text("Nch", a.Nch, "")
	l.text("su", a.Su, "")
	l.text("blow count", a.Blow.String(), siteclass.BlowUnstated.String())
	l.number("N cap", a.NCap)
	l.number("su cap", a.SuCap)
	l.cell("cohesive", cell{Range: a.Cohesive})
	l.cell("cohesionless", cell{Range: a.Cohesionless})
	if a.Unstated {
		l.text("formula", formulaNot, "")
	}
	l.text("clause", a.Clause, c.Clause)
	l.text("standing", a.Standing.String(), c.Standing.String())
	return l
}

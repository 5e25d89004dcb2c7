package codefile

import (
	"fmt"
	"strings"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// maxDepth is the deepest that a table may average over, in m. No code in use
// goes beyond a few tens of metres.
const maxDepth = 1000

// units reads the depth and the units of the columns.
func (r *reader) units(top *mapping, c *siteclass.Code) {
	if top.must("unit", "unit: m/s") != "" {
		c.Unit = top.unit("unit", profile.Velocity, profile.Unit{})
	}
	c.SuUnit = top.unit("strength unit", profile.Stress, profile.Unit{})
	c.Depth, c.Length = top.depth()
	c.Length = top.unit("length unit", profile.Length, c.Length)
	c.DepthText = top.text("depth as printed")
	if c.DepthText == "" {
		c.DepthText = depthText(c.Depth, c.Length)
	}
}

// unit returns the unit under a key; otherwise where it is not there.
func (m *mapping) unit(key string, d profile.Dimension, otherwise profile.Unit) profile.Unit {
	n := m.get(key)
	text := m.textOf(n, key)
	if text == "" {
		return otherwise
	}
	u, ok := profile.ParseUnit(text, d)
	if !ok {
		m.add(m.at(n), "known: "+strings.Join(profile.UnitNames(d), ", "), "%s of %s, %q, is not a unit of %s", key, m.what, shown(text), d)
		return otherwise
	}
	return u
}

// depth reads the averaging depth in m and the unit it is written in.
func (m *mapping) depth() (float64, profile.Unit) {
	const example = "depth: 30 m"
	text := m.must("depth", example)
	if text == "" {
		return 0, profile.Unit{}
	}
	at := m.at(m.get("depth"))
	v, err := profile.ParseValue(text, profile.Length)
	if err != nil {
		m.add(at, "write it with its unit, as `"+example+"`", "depth of %s: %v", m.what, err)
		return 0, profile.Unit{}
	}
	if !(v > 0 && v <= maxDepth) {
		m.add(at, "give the depth over which the velocity is averaged, as `"+example+"`",
			"depth of %s is not between 0 and %d m", m.what, maxDepth)
		return 0, profile.Unit{}
	}
	u, _ := profile.ParseUnit(strings.TrimLeft(text, "+-.0123456789 "), profile.Length) // ParseValue has seen it
	return v, u
}

// depthText is the depth in a unit: "100 ft".
func depthText(m float64, u profile.Unit) string {
	if u.Factor == 0 {
		return ""
	}
	return plainNumber(m/u.Factor) + " " + u.Name
}

// bands reads the classes and holds the columns against each other.
func (r *reader) bands(top *mapping, c *siteclass.Code) {
	before := len(r.faults)
	nodes := top.items("bands", MaxBands)
	if nodes == nil && len(r.faults) == before {
		r.add(top.place(), "add `bands:` and below it a line `- {class: A, name: rock, vs: \"> 800\"}` for each class", "the table does not state its %q", "bands")
	}
	for i, n := range nodes {
		m := &mapping{reader: r, what: fmt.Sprintf("band %d", i+1)}
		m.use(n)
		if m.node != nil {
			c.Bands = append(c.Bands, m.band(c))
		}
	}
	if len(r.faults) == before {
		r.check(c, nodes)
	}
}

// band reads one class.
func (m *mapping) band(c *siteclass.Code) siteclass.Band {
	b := siteclass.Band{Class: m.class("class")}
	if b.Class == "" {
		m.must("class", "class: C")
	} else {
		m.what = "class " + b.Class
	}
	b.Name = m.must("name", "name: stiff soil")
	b.Vs, b.N, b.Su = m.cell("vs"), m.cell("n"), m.cell("su")
	b.Also = m.text("also")
	b.Improving, b.Indicative = m.yes("improving"), m.yes("indicative")
	b.Standing = m.standing("standing", max(c.Standing, siteclass.Checked))
	if !b.Su.Empty() && c.SuUnit.Name == "" {
		m.add(m.at(m.get("su")), "add a line such as `strength unit: kPa`", "%s bounds the strength, and the table does not state the %q", m.what, "strength unit")
	}
	if b.Standing > c.Standing && c.Standing != 0 {
		m.add(m.at(m.get("standing")), "a table stands as its weakest class does", "%s stands as %s and the table as %s", m.what, b.Standing, c.Standing)
	}
	m.rest()
	return b
}

// cell reads the range of a class in one of the columns.
func (m *mapping) cell(key string) siteclass.Range {
	n := m.get(key)
	if n == nil {
		return siteclass.Range{}
	}
	text := m.textOf(n, key)
	if text == "" {
		return siteclass.Range{}
	}
	k, err := parseCell(text)
	switch {
	case err != nil:
		m.add(m.at(n), cellForms, "%s of %s: %v", key, m.what, err)
	case k.unit != "":
		m.add(m.at(n), "write the bare number: the unit of a column is stated once, at the head of the file", "%s of %s has a unit of its own, %q", key, m.what, shown(k.unit))
	case zero(k.Lower), zero(k.Upper):
		m.add(m.at(n), "leave a bound of 0 out: every value is above it", "%s of %s has the bound 0", key, m.what)
	case k.about:
		m.add(m.at(n), "leave it out", "%s of %s says about", key, m.what)
	}
	return k.Range
}

// zero reports whether a bound is there and is 0.
func zero(l siteclass.Limit) bool { return l.Op != siteclass.Open && l.Value == 0 }

// check looks at the table as a whole: that no class stands in it twice, and
// that each column runs from stiff to soft without gap or overlap.
func (r *reader) check(c *siteclass.Code, nodes []*yaml.Node) {
	seen := map[string]bool{}
	for i := range c.Bands {
		class := c.Bands[i].Class
		if seen[class] {
			r.add(r.at(nodes[i]), "give each class one entry; what else leads to it is a condition", "class %s stands in the table twice", class)
		}
		seen[class] = true
	}
	for _, m := range []siteclass.Measure{siteclass.AverageVs, siteclass.AverageN, siteclass.AverageSu} {
		r.ladder(m, c, nodes).check()
	}
}

// columnKeys are the keys of the columns.
var columnKeys = map[siteclass.Measure]string{siteclass.AverageVs: "vs", siteclass.AverageN: "n", siteclass.AverageSu: "su"}

// ladder returns the column of a measure. Below its softest class a velocity
// is what `outside` says; N and strength are of the row below, if there is
// one.
func (r *reader) ladder(m siteclass.Measure, c *siteclass.Code, nodes []*yaml.Node) *ladder {
	l := &ladder{reader: r, column: columnKeys[m]}
	for i := range c.Bands {
		b := &c.Bands[i]
		if cell := columnOf(b, m); !b.Indicative && !cell.Empty() {
			l.rungs = append(l.rungs, rung{b.Class, cell, r.at(value(nodes[i], l.column))})
			l.outside = i+1 < len(c.Bands)
		}
	}
	if m == siteclass.AverageVs {
		l.outside = c.Outside != ""
	}
	return l
}

// columnOf returns the range of a class that a measure is held against.
func columnOf(b *siteclass.Band, m siteclass.Measure) siteclass.Range {
	switch m {
	case siteclass.AverageVs:
		return b.Vs
	case siteclass.AverageN, siteclass.AverageNch:
		return b.N
	}
	return b.Su
}

// value returns the value of a key of a mapping, which must have it.
func value(n *yaml.Node, key string) *yaml.Node {
	for i := 0; i+1 < len(n.Content); i += 2 {
		if n.Content[i].Value == key {
			return n.Content[i+1]
		}
	}
	return n
}

package codefile

import (
	"slices"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// twin reads the same velocity bounds as another unit prints them.
func (r *reader) twin(top *mapping, c *siteclass.Code) {
	n := top.get("twin")
	if n == nil {
		return
	}
	before := len(r.faults)
	m := &mapping{reader: r, what: "twin"}
	m.use(n)
	if m.node == nil {
		return
	}
	t := siteclass.Twin{Source: m.text("source")}
	if m.must("unit", "unit: ft/s") != "" {
		t.Unit = m.unit("unit", profile.Velocity, profile.Unit{})
	}
	for _, item := range m.items("bounds", 2*MaxBands) {
		v, err := parseNumber(item.Value)
		if err != nil {
			r.add(r.at(item), "write plain numbers, the fastest first, as `bounds: [1500, 760, 360]`", "bounds of twin %v", err)
			break
		}
		t.Bounds = append(t.Bounds, v)
	}
	m.rest()
	c.Twin = t
	if len(r.faults) == before {
		r.soundTwin(m, c)
	}
}

// soundTwin adds a fault where the bounds of the twin cannot be those of the
// table in another unit.
func (r *reader) soundTwin(m *mapping, c *siteclass.Code) {
	at := m.at(m.get("bounds"))
	switch n := velocityBounds(c); {
	case n > 0 && len(c.Twin.Bounds) != n:
		r.add(at, "give one for each different bound of the velocity column", "twin has %d bounds and the table has %d", len(c.Twin.Bounds), n)
	case !falling(c.Twin.Bounds):
		r.add(at, "put the fastest first", "the bounds of twin do not fall")
	case c.Twin.Unit == c.Unit:
		r.add(m.at(m.get("unit")), "leave twin out", "twin is in the unit of the table itself")
	}
}

// falling reports whether each number is less than the one before it.
func falling(list []float64) bool {
	for i := 1; i < len(list); i++ {
		if list[i] >= list[i-1] {
			return false
		}
	}
	return true
}

// velocityBounds counts the different bounds of the velocity column.
func velocityBounds(c *siteclass.Code) int {
	var all []float64
	for i := range c.Bands {
		b := &c.Bands[i]
		if b.Indicative {
			continue
		}
		for _, l := range [...]siteclass.Limit{b.Vs.Upper, b.Vs.Lower} {
			if l.Op != siteclass.Open && !slices.Contains(all, l.Value) {
				all = append(all, l.Value)
			}
		}
	}
	return len(all)
}

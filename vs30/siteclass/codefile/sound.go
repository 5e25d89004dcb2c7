package codefile

import (
	"slices"

	"shearbook/vs30/siteclass"
)

// sound adds a fault where a condition could not be decided on: no class to
// go to, no limit that ground which is not there would fail, rock classes
// that no velocity bounds.
func (m *mapping) sound(k *siteclass.Condition, c *siteclass.Code) {
	if k.Kind == siteclass.Barred {
		m.soundBar(k, c)
		return
	}
	if m.must("class", "class: F") != "" {
		m.isClass("class", k.Class, c)
	}
	for _, key := range []string{"bars", "counted from", "then"} {
		m.unused(key, "it belongs to a condition of kind "+siteclass.Barred.String())
	}
	switch k.Fact {
	case siteclass.Liquefiable, siteclass.Sensitive, siteclass.Collapsible:
	case siteclass.Described:
		m.must("text", "text: sand of uniform grains below the water table")
	case siteclass.StiffGround:
		m.add(m.at(m.get("fact")), "a condition on stiff ground bars classes: `kind: "+siteclass.Barred.String()+"`",
			"%s is of kind %s, which needs a rule that a table cannot say", m.what, k.Kind)
	default:
		m.needs(k, siteclass.Thickness, "thickness", "> 3 m")
	}
}

// soundBar checks a condition that bars rock classes.
func (m *mapping) soundBar(k *siteclass.Condition, c *siteclass.Code) {
	if k.Fact != siteclass.StiffGround {
		m.add(m.at(m.get("fact")), "write `fact: "+siteclass.StiffGround.String()+"`", "%s bars classes; that is asked of the depth of the rock", m.what)
		return
	}
	m.unused("class", "the classes that it bars stand under bars:")
	m.unused("only", "the classes that it bars stand under bars:")
	if len(k.Bars) == 0 {
		m.add(m.place(), "add `bars: [A, B]`", "%s does not state the classes it %s", m.what, "bars")
		return
	}
	m.needs(k, siteclass.CoverThickness, "cover", "> 3 m")
	softest := softestClass(c)
	for _, class := range k.Bars {
		i := slices.IndexFunc(c.Bands, func(b siteclass.Band) bool { return b.Class == class })
		if i < 0 {
			continue // told
		}
		if b := &c.Bands[i]; b.Vs.Lower.Op == siteclass.Open || b.Indicative || class == softest {
			m.add(m.at(m.get("bars")), "bar rock classes, which a softer one stands below", "%s cannot bar class %s, which has no lower velocity or no softer class", m.what, class)
		}
	}
}

// softestClass is the last class that velocities give.
func softestClass(c *siteclass.Code) string {
	for _, b := range slices.Backward(c.Bands) {
		if !b.Vs.Empty() && !b.Indicative {
			return b.Class
		}
	}
	return ""
}

// needs adds a fault where a condition has no limit on a thickness that 0
// does not satisfy.
func (m *mapping) needs(k *siteclass.Condition, p siteclass.Property, key, example string) {
	at := m.place()
	if n := m.get("limits"); n != nil {
		at = m.at(n)
	}
	i := slices.IndexFunc(k.Limits, func(l siteclass.Criterion) bool { return l.Property == p })
	switch {
	case i < 0:
		m.add(at, "add `limits: {"+key+": \""+example+"\"}`", "%s has no limit on the %s", m.what, key)
	case i >= 0 && k.Limits[i].Range.Contains(0):
		m.add(at, "say from which thickness on it counts, as \""+example+"\"", "the %s of %s holds for ground that is not there", key, m.what)
	}
}

// unused adds a fault where the condition states a key that has no meaning
// for its kind.
func (m *mapping) unused(key, hint string) {
	if n := m.get(key); n != nil {
		m.add(m.at(n), hint, "%s has no use for %q", m.what, key)
	}
}

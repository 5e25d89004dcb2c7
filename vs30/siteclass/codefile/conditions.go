package codefile

import (
	"fmt"
	"slices"
	"strings"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// facts are what a condition of a file may ask of the ground: what the
// ground: of a notebook states, the depth of the rock, and what only words
// describe, which is never assessed.
var facts = []siteclass.Fact{siteclass.Liquefiable, siteclass.Sensitive, siteclass.Collapsible, siteclass.Peat,
	siteclass.HighPlasticity, siteclass.SoftClay, siteclass.ThickClay, siteclass.StiffGround, siteclass.Described}

// kinds are the kinds of condition of a file. The kind Geometry needs a rule
// of its own and is none of them.
var kinds = []siteclass.Kind{siteclass.Special, siteclass.Softer, siteclass.Barred}

// limitKeys are the properties that limits are put on, by their keys.
var limitKeys = []struct {
	key      string
	property siteclass.Property
	unit     profile.Dimension
	example  string
}{
	{"thickness", siteclass.Thickness, profile.Length, "> 3 m"},
	{"PI", siteclass.PlasticityIndex, profile.Percent, "> 75"},
	{"water content", siteclass.WaterContent, profile.Percent, ">= 40 %"},
	{"su", siteclass.Strength, profile.Stress, "< 25 kPa"},
	{"cover", siteclass.CoverThickness, profile.Length, "> 3 m"},
}

// What becomes of a site whose rock class is barred.
const (
	nextClass = "next class"
	ownMean   = "average over the soil"
)

// Where the soil above the rock is counted from.
const (
	fromDatum      = "datum"
	fromFoundation = "foundation"
)

// conditions reads the conditions, in the order in which they are looked at.
func (r *reader) conditions(top *mapping, c *siteclass.Code) {
	seen := map[string]bool{}
	for i, n := range top.items("conditions", MaxConditions) {
		m := &mapping{reader: r, what: fmt.Sprintf("condition %d", i+1)}
		m.use(n)
		if m.node == nil {
			continue
		}
		k := m.condition(c)
		if k.ID != "" && seen[k.ID] {
			r.add(m.place(), "make one condition of them, or give one an `id` of its own", "the table has two conditions called %s", k.ID)
		}
		seen[k.ID] = true
		c.Conditions = append(c.Conditions, k)
	}
}

// condition reads one condition.
func (m *mapping) condition(c *siteclass.Code) siteclass.Condition {
	before := len(m.faults)
	fact := m.word("fact", words(facts), "")
	if fact != "" {
		m.what = "the condition on " + fact
	}
	kind := m.word("kind", words(kinds), "")
	k := siteclass.Condition{
		Fact:     named(facts, fact),
		Kind:     named(kinds, kind),
		Class:    m.class("class"),
		Clause:   m.text("clause"),
		Standing: m.standing("standing", max(c.Standing, siteclass.Checked)),
		ID:       m.class("id"),
	}
	if fact != "" {
		k.Limits = m.limits(k.Fact)
	}
	m.only(&k, c)
	m.bar(&k, c)
	k.Text = m.text("text")
	m.defaults(&k, c)
	m.rest()
	if len(m.faults) == before {
		m.sound(&k, c)
	}
	return k
}

// named returns the one of a closed set that prints as a word, the first
// where none does.
func named[T fmt.Stringer](set []T, word string) T {
	return set[max(0, slices.Index(words(set), word))]
}

// words are what the words of a closed set print as.
func words[T fmt.Stringer](set []T) []string {
	list := make([]string, len(set))
	for i, v := range set {
		list[i] = v.String()
	}
	return list
}

// limits reads the limits of a condition in their order.
func (m *mapping) limits(f siteclass.Fact) []siteclass.Criterion {
	n := m.get("limits")
	if n == nil {
		return nil
	}
	in := &mapping{reader: m.reader, what: "limits of " + m.what}
	in.use(n)
	if in.node == nil {
		return nil
	}
	allowed := allowedLimits(f)
	var list []siteclass.Criterion
	for i := 0; i+1 < len(n.Content); i += 2 {
		key := n.Content[i].Value
		if !slices.Contains(allowed, key) {
			hint := suggest(key, allowed)
			if len(allowed) == 0 {
				hint = "leave the limits out: no number settles it"
			}
			m.add(m.at(n.Content[i]), hint, "%s cannot be %q", in.what, shown(key))
			continue
		}
		if l, ok := in.limit(key, n.Content[i+1]); ok {
			list = append(list, l)
		}
	}
	return list
}

// allowedLimits are the keys of the limits that a fact has.
func allowedLimits(f siteclass.Fact) []string {
	switch f {
	case siteclass.Liquefiable, siteclass.Sensitive, siteclass.Collapsible, siteclass.Described:
		return nil
	case siteclass.StiffGround:
		return []string{"cover"}
	}
	return []string{"thickness", "PI", "water content", "su"}
}

// limit reads one limit with its unit. A percentage may be printed without.
func (m *mapping) limit(key string, n *yaml.Node) (siteclass.Criterion, bool) {
	text := m.textOf(n, key)
	if text == "" {
		return siteclass.Criterion{}, false
	}
	i := slices.Index(keysOfLimits(), key)
	k := limitKeys[i]
	c, err := parseCell(text)
	if err != nil {
		m.add(m.at(n), fmt.Sprintf("write it with its operator, in quotes, as %q", k.example), "%s in the %s: %v", key, m.what, err)
		return siteclass.Criterion{}, false
	}
	unit := profile.Unit{Dimension: profile.Percent, Factor: 1}
	if c.unit != "" || k.unit != profile.Percent {
		var ok bool
		if unit, ok = profile.ParseUnit(c.unit, k.unit); !ok {
			m.add(m.at(n), fmt.Sprintf("write it with its unit, as %q; known: %s", k.example, strings.Join(profile.UnitNames(k.unit), ", ")),
				"%s in the %s, %q, has no unit of %s", key, m.what, shown(text), k.unit)
			return siteclass.Criterion{}, false
		}
	}
	return siteclass.Criterion{Property: k.property, Range: c.Range, Unit: unit, About: c.about}, true
}

func keysOfLimits() []string {
	var keys []string
	for _, k := range limitKeys {
		keys = append(keys, k.key)
	}
	return keys
}

// only reads the classes that a condition is restricted to.
func (m *mapping) only(k *siteclass.Condition, c *siteclass.Code) {
	k.Only = m.classes("only", c)
	if len(k.Only) > 0 {
		k.OnlyStanding = m.standing("only standing", k.Standing)
	}
}

// classes reads a list of classes of the table.
func (m *mapping) classes(key string, c *siteclass.Code) []string {
	list := m.texts(key, MaxBands)
	for _, class := range list {
		m.isClass(key, class, c)
	}
	return list
}

// isClass adds a fault where the table has no such class. A table whose
// classes are at fault themselves is not asked.
func (m *mapping) isClass(key, class string, c *siteclass.Code) {
	var all []string
	for _, b := range c.Bands {
		all = append(all, b.Class)
	}
	if len(all) > 0 && !slices.Contains(all, class) {
		m.add(m.at(m.get(key)), "the classes are "+strings.Join(all, ", "), "%s of %s is %q, which is no class of the table", key, m.what, shown(class))
	}
}

// bar reads what a condition that bars rock classes says beside its limit.
func (m *mapping) bar(k *siteclass.Condition, c *siteclass.Code) {
	k.Bars = m.classes("bars", c)
	k.FromFoundation = m.word("counted from", []string{fromDatum, fromFoundation}, fromDatum) == fromFoundation
	k.OwnAverage = m.word("then", []string{nextClass, ownMean}, nextClass) == ownMean
}

// defaults fills in what a condition leaves out.
func (m *mapping) defaults(k *siteclass.Condition, c *siteclass.Code) {
	if k.ID == "" {
		k.ID = defaultID(k.Fact)
	}
	if k.Clause == "" {
		k.Clause = c.Clause
	}
	if k.Text == "" {
		k.Text = defaultText(k)
	}
}

func defaultID(f siteclass.Fact) string {
	if f == siteclass.StiffGround {
		return "rock-cover"
	}
	return strings.ReplaceAll(f.String(), " ", "-")
}

// defaultText words a condition by its limits.
func defaultText(k *siteclass.Condition) string {
	var limits []string
	for _, l := range k.Limits {
		limits = append(limits, l.String())
	}
	text := k.Fact.String()
	if k.Kind == siteclass.Barred {
		text = "soil above the rock that bars " + strings.Join(k.Bars, ", ")
	}
	if len(limits) > 0 {
		text += ": " + strings.Join(limits, ", ")
	}
	if len(k.Only) > 0 {
		text += ", where the class would otherwise be " + strings.Join(k.Only, " or ")
	}
	return text
}

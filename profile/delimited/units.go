package delimited

import (
	"strings"

	"shearbook/profile"
)

// Units is the units of the columns whose unit a file does not state. The
// zero value has none.
type Units struct {
	byDimension [profile.Blows + 1]profile.Unit
	byQuantity  [profile.EPSG + 1]profile.Unit
}

const hintUnits = `write units as "m, m/s", or as "depth=ft, vs=ft/s, density=g/cm3"`

// ParseUnits reads units from text: items separated by commas or semicolons.
// An item is a unit, which holds for every column of its dimension ("ft" for
// all depths, "ft/s" for all velocities); or a name, = and a unit, which
// holds for the columns of that name and goes before the former. The name is
// any heading that is read; depth means tops, bottoms and thicknesses, and vs
// all forms of Vs. Blank text is no units. The error is a profile.Faults.
func ParseUnits(text string) (Units, error) {
	var u Units
	var faults profile.Faults
	for item := range strings.FieldsFuncSeq(text, func(r rune) bool { return r == ',' || r == ';' }) {
		if item = strings.TrimSpace(item); item == "" {
			continue
		}
		if problem := u.add(item); problem != "" {
			faults = append(faults, profile.Faultf(profile.Place{}, hintUnits, "units: %s", problem))
			if len(faults) == MaxFaults {
				break
			}
		}
	}
	return u, faults.Err()
}

// add adds an item; it returns what is wrong with it.
func (u *Units) add(item string) (problem string) {
	name, text, named := strings.Cut(item, "=")
	if named {
		if problem = u.addNamed(name, text); problem != "" {
			problem = quote(item) + ": " + problem
		}
		return problem
	}
	for d := profile.Length; d <= profile.Percent; d++ {
		if unit, ok := unitOf(item, d); ok {
			return u.put(&u.byDimension[d], unit, d.String())
		}
	}
	return quote(item) + " is not a unit that is read"
}

func (u *Units) addNamed(name, text string) (problem string) {
	quantities := quantitiesOf(name)
	if len(quantities) == 0 {
		return quote(name) + " is not the name of a column that is read"
	}
	d := quantities[0].Dimension()
	unit, ok := unitOf(text, d)
	if !ok {
		return notAUnit(text, d)
	}
	for _, q := range quantities {
		if problem := u.put(&u.byQuantity[q], unit, name); problem != "" {
			return problem
		}
	}
	return ""
}

// put sets a unit that is not set to another.
func (u *Units) put(to *profile.Unit, unit profile.Unit, name string) (problem string) {
	if to.Name != "" && *to != unit {
		return "two units of " + strings.TrimSpace(name) + ": " + to.Name + " and " + unit.Name
	}
	*to = unit
	return ""
}

// quantitiesOf returns the quantities that a name in ParseUnits means.
func quantitiesOf(name string) []profile.Quantity {
	switch name = plain(name); name {
	case "depth", "length":
		return []profile.Quantity{profile.Top, profile.Bottom, profile.Thickness}
	case "velocity":
		return []profile.Quantity{profile.Vs, profile.VsBottom, profile.VsLower, profile.VsUpper, profile.Vp}
	case "vs":
		return []profile.Quantity{profile.Vs, profile.VsBottom, profile.VsLower, profile.VsUpper}
	}
	if q, ok := quantityOf[name]; ok {
		return []profile.Quantity{q}
	}
	return nil
}

// of returns the unit for quantity q, and false if there is none.
func (u *Units) of(q profile.Quantity) (profile.Unit, bool) {
	unit := u.byQuantity[q]
	if unit.Name == "" {
		unit = u.byDimension[q.Dimension()]
	}
	return unit, unit.Name != ""
}

// notAUnit says that text is not a unit of dimension d, and which are.
func notAUnit(text string, d profile.Dimension) string {
	if d == profile.Dimensionless {
		return "the column has no unit"
	}
	return quote(strings.TrimSpace(text)) + " is not a unit of " + d.String() + " that is read (" +
		strings.Join(profile.UnitNames(d), ", ") + ")"
}

// groundLevel is what may follow a unit of depth and changes nothing.
var groundLevel = []string{"bgl", "b.g.l.", "bgs", "below ground level", "below ground surface", "below ground", "below surface"}

// unitOf is profile.ParseUnit for what stands in headings: also in brackets,
// with underscores for slashes (m_s, kg_m3), with "per", and for depths with
// "below ground level" after it.
func unitOf(text string, d profile.Dimension) (profile.Unit, bool) {
	if len(text) > 64 {
		return profile.Unit{}, false
	}
	text = strings.ToLower(strings.TrimSpace(text))
	text = strings.TrimSpace(strings.Trim(text, "()[]{}"))
	if d == profile.Length {
		for _, words := range groundLevel {
			text = strings.TrimSpace(strings.TrimSuffix(text, words))
		}
	}
	for _, form := range []*strings.Replacer{asIs, slashed, spaced} {
		if u, ok := profile.ParseUnit(form.Replace(text), d); ok {
			return u, true
		}
	}
	return profile.Unit{}, false
}

// The ways in which unitOf tries a unit.
var (
	asIs    = strings.NewReplacer("∕", "/", "⁄", "/")
	slashed = strings.NewReplacer("_per_", "/", " per ", "/", "_", "/", ".", "")
	spaced  = strings.NewReplacer("_", " ", ".", "")
)

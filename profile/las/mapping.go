package las

import (
	"strings"

	"shearbook/profile"
)

const hintMap = `write it as --map "Vs=DTS" or --map "Vs=DTS [us/ft]"`

// readMap reads Options.Map.
func (r *reader) readMap() bool {
	before := r.Count()
	for _, text := range r.opt.Map {
		name, curve, found := strings.Cut(text, "=")
		if !found {
			r.fault(spot{}, hintMap, "mapping %s has no =", profile.Quote(text))
			continue
		}
		r.mapCurve(strings.TrimSpace(name), strings.TrimSpace(curve))
	}
	return r.Count() == before
}

// mapCurve makes a curve the one of a quantity.
func (r *reader) mapCurve(quantity, name string) {
	unit := ""
	if from := strings.LastIndexAny(name, "[("); from > 0 && r.curveOf(name) == nil {
		unit = strings.Trim(name[from:], "[]() ")
		name = strings.TrimSpace(name[:from])
	}
	c := r.curveOf(name)
	if c == nil {
		r.fault(spot{}, "the curves are "+r.curveList(), "mapping of %s: the file has no curve %s", quantity, profile.Quote(name))
		return
	}
	switch strings.ToLower(quantity) {
	case "vs":
		r.mapTo(c, shear, unit, velocity, slowness)
		r.vs = c
	case "vp":
		r.mapTo(c, compression, unit, velocity, slowness)
		r.vp = c
	case "density":
		r.mapTo(c, bulk, unit, mass)
		r.rho = c
	default:
		r.fault(spot{}, "quantities are Vs, Vp and density", "mapping of %s: that is no quantity that is read from a log", profile.Quote(quantity))
	}
}

// curveOf is the curve with a name, case aside, nil if there is none. The
// depth is not among them.
func (r *reader) curveOf(name string) *curve {
	for i := range r.curves[1:] {
		if c := &r.curves[i+1]; strings.EqualFold(c.name, name) {
			return c
		}
	}
	return nil
}

// mapTo gives a curve a role, and a unit if the file states none.
func (r *reader) mapTo(c *curve, to role, text string, kinds ...kind) {
	is := func(u unit) bool {
		for _, k := range kinds {
			if u.kind == k {
				return true
			}
		}
		return false
	}
	given := parseUnit(text)
	switch {
	case text != "" && !is(given):
		r.fault(spot{}, hintMap, "mapping of %s: %s is not a unit that fits", profile.Quote(c.name), profile.Quote(text))
	case c.item.unit == "" && text != "":
		c.unit, c.given = given, text
	case c.item.unit == "" && r.given.vsAs != "" && to == shear:
		c.unit, c.given = r.given.vs, r.given.vsAs
	case c.item.unit == "":
		r.fault(c.at, hintMap, "curve %s states no unit", profile.Quote(c.name))
	case !is(c.unit):
		r.fault(c.unitAt, "name another curve", "curve %s is in %s, which does not fit", profile.Quote(c.name), profile.Quote(c.item.unit))
	case text != "" && given != c.unit:
		r.fault(c.unitAt, "leave the unit out of the mapping", "curve %s is in %s, but %s is given for it", profile.Quote(c.name), profile.Quote(c.item.unit), profile.Quote(text))
	}
	c.role = to
}

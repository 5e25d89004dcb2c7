package delimited

import (
	"strings"

	"shearbook/profile"
)

// Slowness is the reciprocal of velocity. A column of Vs or Vp may give it: then
// the velocity is the factor of the unit divided by the number,
//
//	Vs [m/s] = 304,800 / slowness [µs/ft] = 1,000,000 / slowness [µs/m]

// slownessUnits are the units of slowness that are read, under their spellings.
var slownessUnits = map[string]profile.Unit{
	"us/ft": {Name: "µs/ft", Dimension: profile.Velocity, Factor: 1e6 * profile.Foot},
	"us/m":  {Name: "µs/m", Dimension: profile.Velocity, Factor: 1e6},
	"ms/m":  {Name: "ms/m", Dimension: profile.Velocity, Factor: 1e3},
	"s/m":   {Name: "s/m", Dimension: profile.Velocity, Factor: 1},
	"s/km":  {Name: "s/km", Dimension: profile.Velocity, Factor: 1e3},
}

var micro = strings.NewReplacer("µ", "u", "μ", "u", "usec", "us", "sec", "s", "∕", "/", "⁄", "/", "_per_", "/", " per ", "/", "feet", "ft", "foot", "ft")

// slownessUnit is the unit of slowness that text spells; its Name is "" if it
// spells none.
func slownessUnit(text string) profile.Unit {
	if len(text) > 64 {
		return profile.Unit{}
	}
	return slownessUnits[micro.Replace(strings.ToLower(strings.Trim(strings.TrimSpace(text), "()[]{} ")))]
}

// slowness is the unit of slowness that a heading states in brackets, or behind
// its name as slowness_us_ft.
func slowness(text string) profile.Unit {
	base, groups := brackets(text)
	for _, g := range groups {
		if u := slownessUnit(g); u.Name != "" {
			return u
		}
	}
	for i := range len(base) {
		if strings.IndexByte(afterName, base[i]) < 0 {
			continue
		}
		if u := slownessUnit(strings.ReplaceAll(base[i+1:], "_", "/")); u.Name != "" {
			return u
		}
	}
	return profile.Unit{}
}

// isSlow reports whether a unit is one of slowness.
func isSlow(u profile.Unit) bool {
	for _, known := range slownessUnits {
		if u == known {
			return true
		}
	}
	return false
}

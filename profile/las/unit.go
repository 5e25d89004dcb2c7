package las

import (
	"math"
	"strings"

	"shearbook/profile"
)

// kind is what a unit measures.
type kind uint8

const (
	other kind = iota // not one that is read
	length
	velocity
	slowness
	mass // density
)

// unit is a unit of a curve. A value in it times factor is the value in m,
// m/s or kg/m³; of a slowness, factor divided by the value is the velocity.
type unit struct {
	kind
	factor float64
}

// si is a value in SI.
func (u unit) si(x float64) float64 {
	if u.kind == slowness {
		return u.factor / x
	}
	return x * u.factor
}

// slownesses are the spellings of units of slowness, in the form of plainUnit.
var slownesses = map[string]float64{
	"us/ft": 1e6 * profile.Foot, "us/f": 1e6 * profile.Foot, "usec/ft": 1e6 * profile.Foot, "us/feet": 1e6 * profile.Foot, "usft": 1e6 * profile.Foot,
	"us/m": 1e6, "usec/m": 1e6, "us/metre": 1e6, "us/meter": 1e6,
	"ms/m": 1000, "msec/m": 1000, "s/m": 1, "s/km": 1000,
}

// spellings are those of other units that package profile does not know.
var spellings = map[string]unit{
	"f": {length, profile.Foot}, "mts": {length, 1}, "mt": {length, 1},
	"f/s":  {velocity, profile.Foot},
	"g/c3": {mass, 1000}, "gm/cc": {mass, 1000}, "gm/cm3": {mass, 1000}, "gr/cc": {mass, 1000}, "gm/c3": {mass, 1000}, "k/m3": {mass, 1}, "kg/m3": {mass, 1},
}

// parseUnit returns the unit that text spells; its kind is other if it spells
// none that is read.
func parseUnit(text string) unit {
	text = plainUnit(text)
	if factor, ok := slownesses[text]; ok {
		return unit{slowness, factor}
	}
	if u, ok := spellings[text]; ok {
		return u
	}
	for _, k := range []struct {
		kind
		profile.Dimension
	}{{length, profile.Length}, {velocity, profile.Velocity}, {mass, profile.MassDensity}} {
		if u, ok := profile.ParseUnit(text, k.Dimension); ok {
			return unit{k.kind, u.Factor}
		}
	}
	return unit{}
}

// plainUnit is a unit in lower case, without brackets around it, and with u
// for micro.
func plainUnit(text string) string {
	text = strings.Trim(strings.ToLower(text), "()[]{} ")
	return micro.Replace(text)
}

var micro = strings.NewReplacer("µ", "u", "μ", "u", "microsec", "us", "usec", "us", "∕", "/")

// units are those of Options.
type units struct {
	depth, vs     unit
	depthAs, vsAs string // as stated; "" if not
}

// options looks at the options.
func (r *reader) options() bool {
	o := &r.opt
	before := r.Count()
	for item := range strings.FieldsFuncSeq(o.Units, func(c rune) bool { return c == ',' || c == ';' }) {
		r.unitOption(strings.TrimSpace(item))
	}
	bad := func(x float64) bool { return !(x > 0 && x <= profile.MaxDepth) }
	switch {
	case o.Step != 0 && bad(o.Step):
		r.fault(spot{}, "give it in m", "a step of %v m is not the thickness of a layer", o.Step)
	case o.Step != 0 && len(o.Bounds) > 0:
		r.fault(spot{}, "give one of them", "both a step and bounds of layers are given")
	}
	for i, z := range o.Bounds {
		if bad(z) || i > 0 && z <= o.Bounds[i-1]+profile.Joint {
			r.fault(spot{}, "give depths below ground level from the top down", "the bound of %v m is not below the one before it", z)
		}
	}
	if o.CarryUp != 0 && bad(o.CarryUp) {
		r.fault(spot{}, "give it in m", "%v m is no depth to carry a velocity up from", o.CarryUp)
	}
	if !(math.Abs(o.Datum) <= profile.MaxDepth) {
		r.fault(spot{}, "give it in m above ground level", "the datum of %v m is not a height", o.Datum)
	}
	return r.Count() == before
}

// unitOption reads one unit of Options.Units, with or without a name before
// it. Units of quantities that a log does not hold are let pass.
func (r *reader) unitOption(text string) {
	name, word, named := strings.Cut(text, "=")
	if !named {
		name, word = "", text
	}
	u := parseUnit(word)
	name = strings.ToLower(strings.TrimSpace(name))
	depth := name == "" && u.kind == length || name == "depth" || name == "top" || name == "bottom"
	vs := name == "" && (u.kind == velocity || u.kind == slowness) || name == "vs" || name == "velocity"
	switch {
	case text == "":
	case depth && u.kind == length:
		r.given.depth, r.given.depthAs = u, strings.TrimSpace(word)
	case vs && (u.kind == velocity || u.kind == slowness):
		r.given.vs, r.given.vsAs = u, strings.TrimSpace(word)
	case depth || vs || name == "" && !known(word):
		r.fault(spot{}, `write units as "m, us/ft"`, "units: %s is not a unit that is read", profile.Quote(text))
	}
}

// known reports whether a text is a unit of anything.
func known(text string) bool {
	for d := profile.Length; d <= profile.Blows; d++ {
		if _, ok := profile.ParseUnit(text, d); ok {
			return true
		}
	}
	return false
}

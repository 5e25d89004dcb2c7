package las

import (
	"strconv"
	"strings"

	"shearbook/profile"
)

// curve is one curve of ~C, so one column of the data.
type curve struct {
	item
	name   string // its mnemonic, with :2 where another has it
	unit          // of its values
	given  string // its unit, where that is given and not the file's
	column int    // from 0
	role   role
	values []float64 // in the unit of the file; NaN where there is none
	places []spot    // of the values
	bad    []problem // values that cannot be
	more   int       // problems beyond those kept
}

// role is what a curve may be read as, by its name and unit.
type role uint8

const (
	unread role = iota
	depthRole
	shear
	compression
	bulk // density
)

// shearNames and compressionNames are mnemonics of curves of shear and
// compression waves, without a digit behind them.
var (
	shearNames       = []string{"DTS", "DTSM", "DTSH", "DTWS", "DTSXX", "DTSYY", "VS", "VSH", "VSV", "VSHEAR", "SWV", "SVEL"}
	compressionNames = []string{"DT", "DTC", "DTCO", "DTP", "VP", "VPH", "VPV", "PWV", "PVEL"}
	densityNames     = []string{"RHOB", "RHOZ", "DEN", "DENS", "RHO", "ZDEN"}
)

// roleOf is what a curve may be read as. Its unit must fit.
func (c *curve) roleOf() role {
	moves := c.kind == velocity || c.kind == slowness
	switch {
	case moves && c.named(shearNames, "shear", "s-wave", "s wave"):
		return shear
	case moves && c.named(compressionNames, "compress", "p-wave", "p wave"):
		return compression
	case c.kind == mass && c.named(densityNames, "density"):
		return bulk
	}
	return unread
}

// named reports whether the curve has one of the names; or none that is known,
// but a description with one of the words.
func (c *curve) named(names []string, words ...string) bool {
	base := strings.ToUpper(c.mnemonic)
	if n := len(base) - 1; n > 0 && base[n] >= '1' && base[n] <= '9' {
		base = base[:n] // DTS1; but VS30 is no curve of Vs
	}
	for _, list := range [][]string{shearNames, compressionNames, densityNames} {
		for _, name := range list {
			if base == name {
				return contains(names, base)
			}
		}
	}
	description := strings.ToLower(c.description)
	for _, word := range words {
		if strings.Contains(description, word) {
			return true
		}
	}
	return false
}

func contains(list []string, word string) bool {
	for _, w := range list {
		if w == word {
			return true
		}
	}
	return false
}

// readCurves makes the curves out of the items of ~C and finds the depth.
func (r *reader) readCurves() bool {
	h := &r.header
	if len(h.curves) == 0 {
		return r.stop(spot{}, "list the curves with their units in a section ~C", "the file lists no curves")
	}
	seen := map[string]int{}
	for i, it := range h.curves {
		c := curve{item: it, name: it.mnemonic, column: i, unit: parseUnit(it.unit)}
		if c.name == "" {
			c.name = "column " + strconv.Itoa(i+1)
		}
		key := strings.ToUpper(c.name)
		if seen[key]++; seen[key] > 1 {
			c.name += ":" + strconv.Itoa(seen[key])
		}
		if i > 0 {
			c.role = c.roleOf()
		}
		r.curves = append(r.curves, c)
	}
	r.index = &r.curves[0]
	r.index.role = depthRole
	return r.depthUnit() && r.readMap() && r.shearCurves()
}

// depthUnit settles the unit of the depths.
func (r *reader) depthUnit() bool {
	c, before := r.index, r.Count()
	if c.is("TIME") || parseTime(c.item.unit) {
		return r.stop(c.at, "export the log against depth", "the first curve is a time, not a depth: %s", profile.Quote(c.words()))
	}
	switch {
	case c.item.unit == "" && r.given.depthAs != "":
		c.unit, c.given = r.given.depth, r.given.depthAs
		r.note("units-given", c.at, "the file states no unit of depth; given for it: %s", r.given.depthAs)
	case c.item.unit == "" && r.startUnit().kind == length:
		c.unit = r.startUnit()
		c.item.unit = r.startItem().unit
	case c.item.unit == "":
		r.fault(c.at, `state it in ~C as "DEPT.M", or with the units that are given for the file`, "depth %s states no unit", profile.Quote(c.name))
	case c.kind != length:
		r.fault(c.unitAt, "the first curve of a log is its depth, in M or F", "%s is not a unit of length", profile.Quote(c.item.unit))
	case r.given.depthAs != "" && r.given.depth != c.unit && r.given.depth == r.startUnit():
		c.unit, c.given = r.given.depth, r.given.depthAs
		r.note("units-given", c.unitAt, "depths are in %s and STRT in %s; given for them: %s", c.item.unit, r.startItem().unit, r.given.depthAs)
	case r.given.depthAs != "" && r.given.depth != c.unit:
		r.fault(c.unitAt, "leave the given unit out", "depths are in %s, but %s is given for them", profile.Quote(c.item.unit), profile.Quote(r.given.depthAs))
	}
	return r.Count() == before
}

// parseTime reports whether a unit is one of time.
func parseTime(text string) bool {
	switch plainUnit(text) {
	case "s", "sec", "ms", "us", "min", "hr", "h", "d":
		return true
	}
	return false
}

// startItem is the item STRT, nil if there is none.
func (r *reader) startItem() *item {
	for i := range r.header.items {
		if it := &r.header.items[i]; it.section == 'W' && it.is("STRT") {
			return it
		}
	}
	return nil
}

func (r *reader) startUnit() unit {
	if it := r.startItem(); it != nil {
		return parseUnit(it.unit)
	}
	return unit{}
}

// shearCurves gives a unit to the shear curves that state none, and looks
// whether there is one.
func (r *reader) shearCurves() bool {
	if r.vs != nil {
		return true
	}
	for i := range r.curves[1:] {
		c := &r.curves[i+1]
		if c.item.unit == "" && r.given.vsAs != "" && c.named(shearNames, "shear", "s-wave", "s wave") {
			c.unit, c.role, c.given = r.given.vs, shear, r.given.vsAs
		}
	}
	return r.hasShear()
}

// hasShear looks whether there is a curve that may be Vs.
func (r *reader) hasShear() bool {
	var list []*curve
	for i := range r.curves {
		if r.curves[i].role == shear {
			list = append(list, &r.curves[i])
		}
	}
	const most = 8
	if n := len(list); n > most {
		return r.stop(r.curves[1].at, hintCurves(list[:2]...), "%d curves may be Vs", n)
	}
	if len(list) > 0 {
		return true
	}
	for i := range r.curves[1:] {
		c := &r.curves[i+1]
		if !c.named(shearNames, "shear", "s-wave", "s wave") {
			continue
		}
		if c.item.unit == "" {
			return r.stop(c.at, `state it in ~C as "VS.M/S", or with the units that are given for the file`, "curve %s states no unit", profile.Quote(c.name))
		}
		return r.stop(c.unitAt, r.hintUnit(c), "no curve is Vs: %s is in %s, which is not a unit of velocity or slowness", profile.Quote(c.name), profile.Quote(c.item.unit))
	}
	return r.stop(r.curves[0].at, "the curves are "+r.curveList()+`; name the one that is Vs, as --map "Vs=NAME"`, "no curve is Vs: none is named or described as shear")
}

// hintCurves is how to choose one of several curves.
func hintCurves(list ...*curve) string {
	var ways []string
	for _, c := range list {
		ways = append(ways, "--map "+profile.ShellWord("Vs="+c.name))
	}
	return "choose one by its mnemonic, as " + strings.Join(ways, " or ")
}

// hintUnit is what to do with a shear curve c in a unit of something else: name
// another curve, or state the unit in the file, where it is the unit that is wrong.
func (r *reader) hintUnit(c *curve) string {
	hint := "the curves are " + r.curveList()
	for i := range r.curves[1:] {
		o := &r.curves[i+1]
		if (o.kind == velocity || o.kind == slowness) && o.role == unread {
			return hint + "; if another is Vs, add --map " + profile.ShellWord("Vs="+o.name)
		}
	}
	return hint + "; if it is Vs, correct its unit in ~C, as " + c.mnemonic + ".US/F or " + c.mnemonic + ".M/S, or leave it out there and add --map " +
		profile.ShellWord("Vs="+c.name+" [us/ft]") + " or whatever unit its values are in"
}

// curveList is the curves and their units, for hints.
func (r *reader) curveList() string {
	const most = 12
	var list []string
	for i := range r.curves {
		if i == most {
			list = append(list, strconv.Itoa(len(r.curves)-most)+" more")
			break
		}
		c := &r.curves[i]
		list = append(list, strings.TrimSpace(c.name+" "+c.item.unit))
	}
	return strings.Join(list, ", ")
}

package codefile

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// ladder is a column of a table from stiff to soft.
type ladder struct {
	*reader
	column  string
	outside bool // values below the last rung have a class
	rungs   []rung
}

// rung is the range of one class in the column.
type rung struct {
	class string
	siteclass.Range
	at profile.Place
}

// check adds a fault for every step of the ladder that is out of order,
// leaves a gap, or overlaps the one above, and where it does not go on for
// ever at its ends. Ranges that meet in one value pass, whichever of the two
// owns it: a decision on it says so.
func (l *ladder) check() {
	if len(l.rungs) == 0 {
		return
	}
	if top := l.rungs[0]; top.Upper.Op != siteclass.Open {
		l.add(top.at, "leave the upper bound out, or put the stiffer class before it",
			"%s of class %s, the stiffest, ends at %s; what is above has no class", l.column, top.class, plainNumber(top.Upper.Value))
	}
	for i := 1; i < len(l.rungs); i++ {
		l.step(l.rungs[i-1], l.rungs[i])
	}
	if last := l.rungs[len(l.rungs)-1]; last.Lower.Op != siteclass.Open && !l.outside {
		hint := "leave the lower bound out, or add the softer class"
		if l.column == "vs" {
			hint += ", or say with `outside:` what such ground is"
		}
		l.add(last.at, hint, "%s of class %s, the softest, ends at %s; what is below has no class", l.column, last.class, plainNumber(last.Lower.Value))
	}
}

// step holds two neighbours against each other.
func (l *ladder) step(stiff, soft rung) {
	const order = "put the classes in the order of the print, the stiffest first"
	lower, upper := stiff.Lower, soft.Upper
	switch {
	case lower.Op == siteclass.Open:
		l.add(stiff.at, order, "%s of class %s has no lower bound, and class %s stands below it", l.column, stiff.class, soft.class)
	case upper.Op == siteclass.Open:
		l.add(soft.at, order, "%s of class %s has no upper bound, and class %s stands above it", l.column, soft.class, stiff.class)
	case meet(lower.Value, upper.Value):
	case upper.Value < lower.Value:
		l.add(soft.at, "let the two classes meet, or add the class between them",
			"%s leaves a gap from %s to %s between class %s and class %s", l.column, plainNumber(upper.Value), plainNumber(lower.Value), soft.class, stiff.class)
	case soft.Lower.Op != siteclass.Open && soft.Lower.Value >= lower.Value:
		l.add(soft.at, order, "%s of class %s is no softer than that of class %s, which stands above it", l.column, soft.class, stiff.class)
	default:
		l.add(soft.at, "let the two classes meet in one value", "%s from %s to %s is in class %s and in class %s",
			l.column, plainNumber(lower.Value), plainNumber(upper.Value), stiff.class, soft.class)
	}
}

// meet reports whether two bounds are one value, as decisions take it.
func meet(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Abs(b) }

package siteclass

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// finish adds what can only be said at the end and returns the decision.
func (r *ruling) finish() Decision {
	for i := range r.d.Conditions {
		if c := &r.d.Conditions[i]; c.State == NotAssessed {
			r.d.Unassessed = append(r.d.Unassessed, c.Condition.Text)
		}
	}
	r.weigh()
	return r.d
}

// near adds how near the average is to another class. It is called where the
// class hangs on the average.
func (r *ruling) near() {
	r.d.Margin = r.margin()
	r.rounding()
	r.twinPrint()
	r.indicative()
}

// beside is how far off a bound, in parts of it, the class beyond is looked
// up.
const beside = 1e-6

// margin returns the distance to the nearest bound beyond which the class is
// another, the softer side first; nil if there is none.
func (r *ruling) margin() *Margin {
	v := r.velocity
	var nearest *Margin
	consider := func(bound, beyond float64) {
		class := r.classAt(beyond)
		if class == r.d.Class {
			return
		}
		percent := 100 * (bound - snap(v, bound)) / v
		if nearest == nil || math.Abs(percent) < math.Abs(nearest.Percent) {
			nearest = &Margin{ToClass: class, Bound: bound, Unit: r.code.Unit.Name, Percent: percent}
		}
	}
	for _, b := range slices.Backward(r.code.bounds()) {
		if v > b || equal(v, b) {
			consider(b, b*(1-beside))
		}
		if v < b || equal(v, b) {
			consider(b, b*(1+beside))
		}
	}
	return nearest
}

// rounding notes where the average rounded to a whole unit is in another
// class.
func (r *ruling) rounding() {
	whole := math.Round(r.velocity)
	if class := r.classAt(whole); class != r.d.Class {
		r.note("rounding", "rounded to %s the average would be class %s; the unrounded %s is class %s",
			r.speed(whole), class, numberBeside(r.velocity, whole)+" "+r.code.Unit.Name, r.d.Class)
	}
}

// twinPrint notes where the same table printed in another unit gives another
// class.
func (r *ruling) twinPrint() {
	t := r.code.Twin
	if t.Unit.Name == "" {
		return
	}
	own, twin := r.code.Lookup(r.velocity), r.code.Lookup(r.code.fromTwin(r.d.Velocity))
	if own < 0 || twin < 0 || own == twin {
		return
	}
	r.note("unit-print", "%s is %s: class %s by this table's bounds in %s, class %s by the print in %s (%s); the code's own unit decides",
		quantity(r.d.Velocity, t.Unit), r.speed(r.velocity), r.code.Bands[own].Class, r.code.Unit.Name,
		r.code.Bands[twin].Class, t.Unit.Name, t.Source)
}

// indicative notes where the average lies within bounds that the table shows
// beside another class without giving it.
func (r *ruling) indicative() {
	for i := range r.code.Bands {
		if b := &r.code.Bands[i]; b.Indicative && !b.Vs.Empty() && b.Vs.Contains(r.velocity) {
			r.note("indicative", "the table shows %s %s beside class %s without making it a limit; whether that class fits is for its description to say",
				b.Vs, r.code.Unit.Name, b.Class)
		}
	}
}

// weigh gives the decision the standing of its weakest part and notes every
// part that is not checked.
func (r *ruling) weigh() {
	r.d.Standing = Checked
	weak := map[Standing][]string{}
	for _, p := range r.parts {
		r.d.Standing = max(r.d.Standing, p.standing)
		if p.standing != Checked && !slices.Contains(weak[p.standing], p.name) {
			weak[p.standing] = append(weak[p.standing], p.name)
		}
	}
	for s := FromMemory; s > Checked; s-- {
		if names := weak[s]; len(names) > 0 {
			r.note("standing", "%s: %s", s, strings.Join(names, "; "))
		}
	}
}

// override notes that a condition settled the class, and what the average
// alone would have given.
func (r *ruling) override(c *Condition) {
	alone := r.classAt(r.velocity)
	switch {
	case c.Kind == Special:
		r.note("special-study", "class %s calls for a site-specific study (%s); by the average alone, %s, the class would be %s",
			c.Class, c.Clause, r.speed(r.velocity), alone)
	case alone != c.Class:
		r.note("override", "class %s whatever the average (%s); by the average alone, %s, the class would be %s",
			c.Class, c.Clause, r.speed(r.velocity), alone)
	}
}

// place returns where in its file a layer's velocity stands.
func (r *ruling) place(l *profile.Layer) profile.Place {
	p := r.site.Profile
	if p == nil || p.Reading == nil || l.Line == 0 {
		return profile.Place{}
	}
	return profile.Place{File: p.Reading.File, Line: int(l.Line), Column: int(l.Column)}
}

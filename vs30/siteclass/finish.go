package siteclass

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// finish adds what can only be said at the end and returns the decision.
func (r *ruling) finish() Decision {
	open := 0
	for i := range r.d.Conditions {
		if r.d.Conditions[i].State == NotAssessed {
			open++
		}
	}
	if open > 0 {
		r.d.Unassessed = make([]string, 0, open)
	}
	for i := range r.d.Conditions {
		if c := &r.d.Conditions[i]; c.State == NotAssessed {
			r.d.Unassessed = append(r.d.Unassessed, c.Condition.Text)
		}
	}
	r.d.Unassessed = append(r.d.Unassessed, r.unassessed...)
	if r.d.Row == "" {
		r.d.Row = r.d.Class
	}
	r.averages()
	r.adopted()
	r.weigh()
	r.own()
	return r.d
}

// averages lists the average of a velocity route; those of other routes are
// listed where they are taken.
func (r *ruling) averages() {
	if r.velocity > 0 && len(r.d.Averages) == 0 {
		r.d.Averages = []Average{{Of: AverageVs, Symbol: r.code.Parameter, Value: r.velocity,
			Unit: r.code.Unit.Name, Thickness: r.thickness, Class: r.code.ClassOf(r.d.Velocity)}}
	}
}

// adopted notes whose table it is, and by what the code is replaced.
func (r *ruling) adopted() {
	if c := r.code; c.Adopts != "" {
		r.say("adopted", c.Adoption)
		r.rest(c.AdoptionStanding, c.adoptionName())
	}
	if r.code.Superseded != "" {
		r.say("superseded", r.code.Superseded)
	}
}

// adoptionName names the adoption of another code's table.
func (c *Code) adoptionName() string { return "that " + c.Edition + " takes the table of " + c.Adopts }

// near adds how near the average velocity is to another class. It is called
// where the class hangs on it.
func (r *ruling) near() {
	m := marginSearch{unit: r.code.Unit.Name, own: r.classAt(r.velocity)}
	m.look(r.velocity, r.code.bounds(), r.classAt)
	r.d.Margin = m.margin
	r.rounding()
	r.twinPrint()
	r.indicative()
}

// beside is how far off a bound, in parts of it, the class beyond is looked
// up.
const beside = 1e-6

// marginSearch looks for the bound nearest to a value beyond which the class is
// another, the softer side first.
type marginSearch struct {
	unit   string
	own    string
	margin *Margin // nil if there is none
}

// look goes through the bounds of a column, from stiff to soft, for a value
// above 0.
func (n *marginSearch) look(v float64, bounds []float64, classAt func(float64) string) {
	for _, b := range slices.Backward(bounds) {
		same := equal(v, b)
		if v > b || same {
			n.consider(v, b, classAt(b*(1-beside)))
		}
		if v < b || same {
			n.consider(v, b, classAt(b*(1+beside)))
		}
	}
}

// consider takes a bound where it is nearer than any before it, and leads to
// another class.
func (n *marginSearch) consider(v, bound float64, class string) {
	percent := 100 * (bound - snap(v, bound)) / v
	if class == n.own || n.margin != nil && math.Abs(percent) >= math.Abs(n.margin.Percent) {
		return
	}
	n.margin = &Margin{ToClass: class, Bound: bound, Unit: n.unit, Percent: percent}
}

// rounding notes where the average rounded to a whole unit is in another
// class.
func (r *ruling) rounding() {
	whole, own := math.Round(r.velocity), r.classAt(r.velocity)
	if class := r.classAt(whole); class != own {
		r.note("rounding", "rounded to %s the average would be class %s; the unrounded %s is class %s",
			withUnit(whole, r.code.Unit), class, numberBeside(r.velocity, whole)+" "+r.code.Unit.Name, own)
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
		t.write(r.d.Velocity), r.speed(r.velocity), r.code.Bands[own].Class, r.code.Unit.Name,
		r.code.Bands[twin].Class, t.Unit.Name, t.Source)
}

// write writes a velocity in m/s in the unit of the twin, with digits enough
// to tell it from every bound that it is not.
func (t *Twin) write(v float64) string {
	v /= t.Unit.Factor
	text := short(v)
	for _, b := range t.Bounds {
		if other := numberBeside(v, b); !equal(v, b) && len(other) > len(text) {
			text = other
		}
	}
	return text + " " + t.Unit.Name
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
	for i := range r.parts {
		r.d.Standing = max(r.d.Standing, r.parts[i].standing)
	}
	for s := r.d.Standing; s > Checked; s-- {
		if text := r.restingOn(s); text != "" {
			r.say("standing", s.String()+": "+text)
		}
	}
}

// restingOn lists the parts of a standing, each once.
func (r *ruling) restingOn(s Standing) string {
	var names []string
	for i := range r.parts {
		if p := &r.parts[i]; p.standing == s && !slices.Contains(names, p.name) {
			names = append(names, p.name)
		}
	}
	return strings.Join(names, "; ")
}

// override notes that a condition settled the class, and what the averages
// alone would have given.
func (r *ruling) override(c *Condition) {
	alone, averages := r.byAverages(), r.averagesText()
	switch {
	case c.Kind == Special:
		r.say("special-study", "class "+c.Class+" calls for a site-specific study ("+c.Clause+"); by the average alone, "+
			averages+", the class would be "+alone)
	case alone != c.Class:
		r.say("override", "class "+c.Class+" whatever the average ("+c.Clause+"); by the average alone, "+
			averages+", the class would be "+alone)
	}
}

// place returns where in its file a layer's velocity stands.
func (r *ruling) place(l *profile.Layer) profile.Place {
	p := r.site.Profile
	if p == nil || p.Reading == nil || l.Line == 0 {
		return profile.Place{}
	}
	return p.Reading.Place(int(l.Line), int(l.Column))
}

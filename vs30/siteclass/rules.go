package siteclass

import (
	"fmt"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// ground tests the special and soft conditions in their order. The first
// that is met settles the class; the others are still looked at.
func (r *ruling) ground() {
	if r.d.Conditions == nil {
		r.d.Conditions = make([]ConditionResult, 0, len(r.code.Conditions))
	}
	for i := range r.code.Conditions {
		c := &r.code.Conditions[i]
		if c.Kind == Special || c.Kind == Softer {
			r.record(c, r.restricted(c, r.assess(c)))
		}
	}
	r.notAsked()
}

// notAsked notes ground that is stated to be there and that no condition of
// the code asks for.
func (r *ruling) notAsked() {
	g := &r.site.Ground
	if *g == (Ground{}) {
		return
	}
	for f := Liquefiable; f < StiffGround; f++ {
		answer, _ := g.answer(f)
		thickness := g.deposit(f).Thickness
		if answer != Yes && !(thickness.Known && thickness.Value > 0) {
			continue
		}
		if !slices.ContainsFunc(r.code.Conditions, func(c Condition) bool { return c.Fact == f }) {
			r.note("not-asked", "%s is stated; %s has no rule for it and the class takes no account of it", f, r.code.Table)
		}
	}
}

// record puts what became of a condition into the decision, and settles the
// class where the condition is met and nothing before it was.
func (r *ruling) record(c *Condition, o Outcome) {
	r.d.Conditions = append(r.d.Conditions, ConditionResult{c, o})
	r.d.Steps = append(r.d.Steps, o.Steps...)
	r.d.Notes = append(r.d.Notes, o.Notes...)
	if o.State == Met || o.State == NotMet && weighed(o.Steps) {
		if c.Standing != Checked {
			r.rest(c.Standing, c.Text+" ("+c.Clause+")")
		}
	}
	if o.State == Met && c.Class != "" && !r.settled() {
		r.d.Class = c.Class
		r.override(c)
	}
}

// weighed reports whether something was held against a limit: where a
// deposit is not there at all, no limit matters.
func weighed(steps []Step) bool {
	return slices.ContainsFunc(steps, func(s Step) bool { return s.Value != 0 })
}

// restricted applies Condition.Only: to the class by the averages, or to the
// one that a soft condition puts the site in.
func (r *ruling) restricted(c *Condition, o Outcome) Outcome {
	if len(c.Only) == 0 {
		return o
	}
	alone := r.byAverages()
	if slices.Contains(c.Only, alone) {
		return o
	}
	soft := r.softest(c.Only)
	switch {
	case soft == Met || soft == NotAssessed && o.State != Met:
		return o
	case soft == NotAssessed:
		o.State = NotAssessed
		o.Notes = append(o.Notes, profile.Note{ID: "otherwise", Text: fmt.Sprintf(
			"%s: this counts only where the class would otherwise be %s; the average alone gives %s, and soft clay, which would change that, is not assessed",
			c.Fact, orList(c.Only), alone)})
		return o
	case o.State == Met:
		o.Notes = append(o.Notes, profile.Note{ID: "otherwise", Text: fmt.Sprintf(
			"%s: the limits are met, but count only where the class would otherwise be %s, and it is %s",
			c.Fact, orList(c.Only), alone)})
		r.use(c.OnlyStanding, "that %q counts only in class %s (%s)", c.Text, orList(c.Only), c.Clause)
	}
	o.State = NotApplicable
	return o
}

// softest returns what is known of the soft conditions that lead to one of
// the classes: met, not assessed, or not met.
func (r *ruling) softest(classes []string) State {
	state := NotMet
	for i := range r.code.Conditions {
		c := &r.code.Conditions[i]
		if c.Kind != Softer || !slices.Contains(classes, c.Class) {
			continue
		}
		switch r.assess(c).State {
		case Met:
			return Met
		case NotAssessed:
			state = NotAssessed
		}
	}
	return state
}

// table lets the average decide, unless the class is settled, and then bars
// the rock classes under soil.
func (r *ruling) table() {
	if r.settled() {
		r.bar("")
		return
	}
	class := r.byAverage()
	r.d.Class = r.bar(class)
	r.near()
}

// byAverage compares the average with the table and returns the class of the
// band, noting a value that two bands claim, or none.
func (r *ruling) byAverage() string {
	c := r.code
	r.bandSteps(AverageVs, r.velocity, c.Unit, r.over)
	i := c.Lookup(r.velocity)
	if i < 0 {
		return c.Outside
	}
	b := &c.Bands[i]
	r.restOnRow(i)
	if b.Improving && len(vs30.Reversals(r.layers, r.datum, r.bottom())) > 0 {
		r.say("not-improving", "the row of class "+b.Class+" asks for properties that improve with depth; here the velocity falls")
	}
	r.boundary(AverageVs, r.velocity, i, r.after)
	return b.Class
}

// boundary notes a value of a column that two bands claim, or none; i is the
// band that was taken, and after what comes of a band's class.
func (r *ruling) boundary(m Measure, v float64, i int, after func(string) string) {
	c := r.code
	first, last := c.claims(m, v)
	taken := &c.Bands[i]
	switch {
	case first < 0 && taken.cell(m).Empty():
		r.note("below-table", "%s is below every row of the column; the next class, %s, is taken", r.onBound(m, v), taken.Class)
	case first < 0:
		above := c.bandAbove(m, i)
		r.note("boundary-gap", "%s is in no class as printed: %s is %s, %s is %s; the softer, %s, is taken",
			r.onBound(m, v), above.Class, above.cell(m), taken.Class, taken.cell(m), taken.Class)
	case first != last && after(c.Bands[first].Class) != after(c.Bands[last].Class):
		stiff, soft := &c.Bands[first], &c.Bands[last]
		r.note("boundary-overlap", "%s is in two classes as printed: %s is %s, %s is %s; the softer, %s, is taken",
			r.onBound(m, v), stiff.Class, stiff.cell(m), soft.Class, soft.cell(m), soft.Class)
	}
}

// bandAbove returns the band of a column printed before band i.
func (c *Code) bandAbove(m Measure, i int) *Band {
	for i--; i > 0; i-- {
		if b := &c.Bands[i]; b.gives(m) {
			return b
		}
	}
	return &c.Bands[0]
}

// onBound writes the bound that v is within one part in 10⁹ of, and else v.
func (r *ruling) onBound(m Measure, v float64) string {
	for _, b := range r.code.boundsIn(m) {
		v = snap(v, b)
	}
	return r.code.write(m, v) + " " + r.code.unitOf(m).Name
}

// bandSteps compares an average with the bands of its column from stiff to
// soft, until no softer band can claim it.
func (r *ruling) bandSteps(m Measure, v float64, u profile.Unit, over string) {
	c := r.code
	for i := range c.Bands {
		b := &c.Bands[i]
		if !b.gives(m) {
			continue
		}
		cell := b.cell(m)
		inside := r.cellSteps(cell, v, u, r.subject(m, i, over))
		if onLower := cell.Lower.Op == Open || equal(v, cell.Lower.Value); inside && !onLower {
			break
		}
		if !inside && cell.Lower.holds(v, true) {
			break // in the gap above this band, or claimed by the one before
		}
	}
}

// subject says what band i is compared with.
func (r *ruling) subject(m Measure, i int, over string) subject {
	if ready := r.code.ready; m == AverageVs && ready != nil && over == ready.over {
		return ready.subjects[i]
	}
	return subjectOf(over + ", class " + r.code.Bands[i].Class)
}

// cellSteps compares a value with both bounds of a cell, the lower first, and
// reports whether both hold.
func (r *ruling) cellSteps(cell *Range, v float64, u profile.Unit, s subject) bool {
	for side, bound := range [...]Limit{cell.Lower, cell.Upper} {
		if bound.Op == Open {
			continue
		}
		text := s.whole
		if bound.Op == Dash {
			text = [...]string{s.lower, s.upper}[side]
		}
		step := newStep(text, r.code.Table, v, bound, side == 0, u)
		r.d.Steps = append(r.d.Steps, step)
		if !step.Holds {
			return false
		}
	}
	return true
}

// orList lists classes: "C, D or E".
func orList(classes []string) string {
	text := ""
	for i, c := range classes {
		switch {
		case i == 0:
		case i == len(classes)-1:
			text += " or "
		default:
			text += ", "
		}
		text += c
	}
	return text
}

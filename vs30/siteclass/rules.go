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
	for i := range r.code.Conditions {
		c := &r.code.Conditions[i]
		if c.Kind == Special || c.Kind == Softer {
			r.record(c, r.restricted(c, c.test(&r.site.Ground)))
		}
	}
	r.notAsked()
}

// notAsked notes ground that is stated to be there and that no condition of
// the code asks for.
func (r *ruling) notAsked() {
	g := &r.site.Ground
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
		r.use(c.Standing, "%s (%s)", c.Text, c.Clause)
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

// restricted applies Condition.Only: to the class by the average, or to the
// one that a soft condition puts the site in.
func (r *ruling) restricted(c *Condition, o Outcome) Outcome {
	if len(c.Only) == 0 || slices.Contains(c.Only, r.classAt(r.velocity)) {
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
			c.Fact, orList(c.Only), r.classAt(r.velocity))})
		return o
	case o.State == Met:
		o.Notes = append(o.Notes, profile.Note{ID: "otherwise", Text: fmt.Sprintf(
			"%s: the limits are met, but count only where the class would otherwise be %s, and it is %s",
			c.Fact, orList(c.Only), r.classAt(r.velocity))})
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
		switch c.test(&r.site.Ground).State {
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
	r.d.Steps = append(r.d.Steps, r.bandSteps()...)
	i := c.Lookup(r.velocity)
	if i < 0 {
		return c.Outside
	}
	b := &c.Bands[i]
	r.use(b.Standing, "class %s of %s", b.Class, c.Table)
	if b.Improving && len(vs30.Reversals(r.layers, r.datum, r.bottom())) > 0 {
		r.note("not-improving", "the row of class %s asks for properties that improve with depth; here the velocity falls", b.Class)
	}
	r.boundary(i)
	return b.Class
}

// boundary notes a value that two bands claim, or none.
func (r *ruling) boundary(i int) {
	c := r.code
	first, last := c.claims(r.velocity)
	switch {
	case first < 0:
		above := c.bandAbove(i)
		r.note("boundary-gap", "%s is in no class as printed: %s is %s, %s is %s; the softer, %s, is taken",
			r.speed(c.onBound(r.velocity)), above.Class, above.Vs, c.Bands[i].Class, c.Bands[i].Vs, c.Bands[i].Class)
	case first != last && r.after(c.Bands[first].Class) != r.after(c.Bands[last].Class):
		stiff, soft := &c.Bands[first], &c.Bands[last]
		r.note("boundary-overlap", "%s is in two classes as printed: %s is %s, %s is %s; the softer, %s, is taken",
			r.speed(c.onBound(r.velocity)), stiff.Class, stiff.Vs, soft.Class, soft.Vs, soft.Class)
	}
}

// bandAbove returns the velocity band printed before band i.
func (c *Code) bandAbove(i int) *Band {
	for i--; i > 0; i-- {
		if b := &c.Bands[i]; !b.Vs.Empty() && !b.Indicative {
			return b
		}
	}
	return &c.Bands[0]
}

// onBound returns the bound that v is within one part in 10⁹ of, and else v.
func (c *Code) onBound(v float64) float64 {
	for _, b := range c.bounds() {
		if equal(v, b) {
			return b
		}
	}
	return v
}

// bandSteps compares the average with the bands from stiff to soft, until no
// softer band can claim it.
func (r *ruling) bandSteps() []Step {
	var steps []Step
	for i := range r.code.Bands {
		b := &r.code.Bands[i]
		if b.Vs.Empty() || b.Indicative {
			continue
		}
		more, inside := r.bandStep(b)
		steps = append(steps, more...)
		if onLower := b.Vs.Lower.Op == Open || equal(r.velocity, b.Vs.Lower.Value); inside && !onLower {
			break
		}
		if !inside && b.Vs.Lower.holds(r.velocity, true) {
			break // in the gap above this band, or claimed by the one before
		}
	}
	return steps
}

// bandStep compares the average with one band, the lower bound first.
func (r *ruling) bandStep(b *Band) (steps []Step, inside bool) {
	k := Criterion{Range: b.Vs, Unit: r.code.Unit}
	return k.compare(r.d.Velocity, r.over+", class "+b.Class, r.code.Table)
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

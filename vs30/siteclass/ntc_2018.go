package siteclass

import (
	"slices"

	"shearbook/profile"
)

// ntc2018 returns the Italian technical rules for construction of 2018,
// section 3.2.2.
func ntc2018() *Code {
	return &Code{
		ID:        "ntc-2018",
		Title:     "Norme tecniche per le costruzioni",
		Edition:   "NTC 2018, D.M. 17 January 2018, G.U. 42 of 20 February 2018",
		Region:    "Italy",
		Clause:    "3.2.2",
		Table:     "Tab. 3.2.II",
		Source:    "D.M. 17 January 2018 section 3.2.2 and Tab. 3.2.II",
		Parameter: "VS,eq",
		Depth:     30,
		DepthText: "H, at most 30 m",
		Datum:     DatumFoundation,
		DatumNote: "shallow foundations: their base; piles: their head; walls that retain natural ground: the top of the wall (from memory)",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  OneSource,

		//  Category, name, VS,eq (m/s)
		Bands: []Band{
			{Class: "A", Name: "outcropping rock or very stiff ground", Vs: above(800),
				Also: "VS itself, not VS,eq; at most 3 m of poorer material at the surface", Standing: Checked},
			{Class: "B", Name: "soft rock, very dense coarse or very stiff fine soil", Vs: dash(360, 800),
				Also: "properties improving with depth; any H", Improving: true, Standing: OneSource},
			{Class: "C", Name: "medium dense coarse or medium stiff fine soil", Vs: dash(180, 360),
				Also: "properties improving with depth; H > 30 m", Improving: true, Standing: OneSource},
			{Class: "D", Name: "loose coarse or soft fine soil", Vs: dash(100, 180),
				Also: "properties improving with depth; H > 30 m", Improving: true, Standing: OneSource},
			{Class: "E", Name: "soil of C or D with a shallow substrate", Also: "velocities of C or D; H not above 30 m", Standing: OneSource},
		},
		Outside: "outside A–E",

		Conditions: []Condition{
			{ID: "rock-cover", Kind: Barred, Clause: "Tab. 3.2.II", Standing: OneSource, Fact: StiffGround,
				Text:   "more than 3 m of poorer material at the surface bars category A",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"A"}},
			{ID: "category-e", Kind: Geometry, Class: "E", Clause: "3.2.2, Tab. 3.2.II", Standing: Checked, Fact: StiffGround,
				Text: "substrate of VS ≥ 800 m/s at a depth H ≤ 30 m under ground of C or D velocities",
				Limits: []Criterion{
					{Property: StiffVelocity, Range: atLeast(800), Unit: profile.MetrePerSecond},
					{Property: CoverThickness, Range: atMost(30), Unit: profile.Metre}},
				Only: []string{"C", "D"}, OnlyStanding: OneSource},
		},

		Notes: []string{
			"H is the depth of the substrate, rock or very stiff ground of VS not less than 800 m/s; where it is more than 30 m VS,eq is taken over 30 m",
			"360 and 180 m/s are printed in two categories each; the softer is taken",
			"A is strictly above 800 m/s, so 800 is B; H of exactly 30 m is E, as C and D need H > 30 m",
			"VS,eq < 100 m/s is in no category, and anything the table does not describe calls for a site-response analysis",
			"the substrate counts from the first depth from which no velocity above 30 m is below 800 m/s",
			"there are no classes by N or cu, none for liquefiable or sensitive ground, and no default",
		},
		Short:      "the code allows a profile shorter than 30 m only where it reaches the substrate; it has no rule for carrying the last velocity on",
		Correlated: "the code allows VS from reliable correlations only where justified and only for its simplified approach",
		decide:     decideNTC,
	}
}

// decideNTC finds the substrate, averages down to it, and lets the depth of
// the substrate choose between C or D and E.
func decideNTC(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	e, a := r.condition("category-e"), r.condition("rock-cover")
	stiff, _ := e.limitOn(StiffVelocity)
	sub := coverAbove(r.layers, r.datum, r.datum+c.Depth, stiff.Range.Lower, stiff.Unit)
	if err := r.averageToSubstrate(sub); err != nil {
		return Decision{}, err
	}
	shallow := r.geometry(e, sub)
	r.after = func(class string) string { return r.category(class, shallow.State == Met, a, e) }
	r.ground()
	if r.rock(a, sub) {
		r.record(e, Outcome{State: NotApplicable})
		return r.finish(), nil
	}
	r.byCategory(e, shallow)
	r.near()
	return r.finish(), nil
}

// averageToSubstrate averages down to the substrate, or over 30 m where it
// lies deeper. Rock from the datum down has nothing above it; its own average
// is taken, as deep as it is known, to 30 m.
func (r *ruling) averageToSubstrate(sub cover) error {
	depth := r.code.Depth
	if sub.found && sub.thickness() > 0 {
		depth = sub.thickness()
	} else if end := r.layers[len(r.layers)-1].Bottom; sub.found && end < r.datum+depth {
		depth = end - r.datum
	}
	err := r.averageOver(depth)
	if short, ok := err.(*shortError); ok {
		short.text += "; no substrate of VS ≥ 800 m/s was reached"
	}
	if err != nil {
		return err
	}
	switch {
	case !sub.found:
		r.over = r.code.Parameter + " over 30 m, H being more"
	case sub.thickness() == 0:
		r.over = "velocity of the rock over " + r.length(depth)
		r.note("no-cover", "the substrate is at the datum: H is 0 and VS,eq is not defined; the average shown is that of the rock over %s", r.length(depth))
	default:
		r.over = r.code.Parameter + " over H, " + r.length(depth)
	}
	return nil
}

// category turns the category of the velocity column into the one that comes
// of it.
func (r *ruling) category(class string, shallow bool, a, e *Condition) string {
	if slices.Contains(a.Bars, class) {
		class = r.next(class) // rock settles the category before the average does
	}
	if shallow && slices.Contains(e.Only, class) {
		return e.Class
	}
	return class
}

// rock puts the site in category A where the substrate is faster than the
// category's bound and no more than the printed thickness lies above it.
func (r *ruling) rock(a *Condition, sub cover) bool {
	k, _ := a.limitOn(CoverThickness)
	band := &r.code.Bands[0]
	vs := Criterion{Range: band.Vs, Unit: r.code.Unit}
	steps, fast := vs.compare(sub.stiff, "VS of the slowest rock, class "+band.Class, r.code.Table)
	if !sub.found {
		r.record(a, Outcome{State: NotApplicable})
		return false
	}
	r.d.Steps = append(r.d.Steps, steps...)
	if !fast {
		r.record(a, Outcome{State: NotApplicable})
		return false
	}
	cover, thick := k.compare(sub.thickness(), "poorer material above the rock", a.Clause)
	if thick {
		r.record(a, Outcome{State: Met, Steps: cover})
		return false
	}
	r.record(a, Outcome{State: NotMet, Steps: cover})
	r.use(band.Standing, "class %s of %s", band.Class, r.code.Table)
	r.d.Class = band.Class
	if sub.thickness() > 0 {
		r.note("cover-allowed", "VS,eq is that of the %s above the rock, which category A allows; the category comes from the rock", r.length(sub.thickness()))
	}
	return true
}

// byCategory lets VS,eq choose the row, and H between C or D and E.
func (r *ruling) byCategory(e *Condition, shallow Outcome) {
	row := r.byAverage()
	if row == r.code.Outside {
		r.d.Class = row
		r.record(e, Outcome{State: NotApplicable})
		r.note("no-category", "%s is below every category of %s; the code then asks for a site-response analysis", r.speed(r.velocity), r.code.Table)
		return
	}
	if slices.Contains(e.Only, row) {
		r.record(e, shallow)
	} else {
		r.record(e, Outcome{State: NotApplicable})
	}
	if r.d.Class = r.after(row); r.d.Class != row && r.d.Class != e.Class {
		r.note("rock-barred", "VS,eq is that of category %s, which asks for rock faster than 800 m/s under at most 3 m of poorer material; the next, %s, is taken", row, r.d.Class)
	}
}

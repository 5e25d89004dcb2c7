package siteclass

import (
	"slices"

	"shearbook/profile"
)

// ntc2008 returns the Italian technical rules for construction of 2008,
// section 3.2.2, superseded on 22 March 2018.
func ntc2008() *Code {
	return &Code{
		ID:        "ntc-2008",
		Title:     "Norme tecniche per le costruzioni",
		Edition:   "NTC 2008, D.M. 14 January 2008 (superseded by NTC 2018 on 22 March 2018)",
		Region:    "Italy, designs under the rules of 2008",
		Clause:    "3.2.2",
		Table:     "Tab. 3.2.II",
		Source:    "D.M. 14 January 2008 section 3.2.2, Tab. 3.2.II and 3.2.III; comparison of the 2008 and 2018 tables in Master Magazine 6, p. 82; rows D, E, S1 and S2 from memory",
		Parameter: "VS,30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumFoundation,
		DatumNote: "shallow foundations: their base; piles: their head; walls that retain natural ground: the top of the wall (from memory)",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Category, name, VS,30 (m/s), NSPT,30 (coarse soil), cu,30 (kPa, fine soil)
		Bands: []Band{
			{Class: "A", Name: "outcropping rock or very stiff ground", Vs: above(800), Also: "at most 3 m of weathered material at the surface", Standing: Checked},
			{Class: "B", Name: "soft rock, very dense coarse or very stiff fine soil", Vs: dash(360, 800), N: above(50), Su: above(250),
				Also: "more than 30 m thick, properties improving with depth", Improving: true, Standing: OneSource},
			{Class: "C", Name: "medium dense coarse or medium stiff fine soil", Vs: dash(180, 360), N: above(15).to(below(50)), Su: above(70).to(below(250)),
				Also: "more than 30 m thick, properties improving with depth", Improving: true, Standing: OneSource},
			{Class: "D", Name: "loose coarse or soft fine soil", Vs: below(180), N: below(15), Su: below(70),
				Also: "more than 30 m thick, properties improving with depth", Improving: true, Standing: FromMemory},
			{Class: "E", Name: "soil of C or D, thin, on rock", Also: "at most 20 m thick, on the reference substrate of VS > 800 m/s", Standing: FromMemory},
			{Class: "S1", Name: "very soft ground", Vs: below(100), Su: above(10).to(below(20)),
				Also: "with at least 8 m of fine soil of low consistency or 3 m of peat or highly organic clay", Indicative: true, Standing: FromMemory},
			{Class: "S2", Name: "liquefiable soil, sensitive clay, or anything not in A to E or S1", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "S2", Clause: "Tab. 3.2.III", Standing: FromMemory, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "S2", Clause: "Tab. 3.2.III", Standing: FromMemory, Fact: Sensitive,
				Text: "sensitive clay"},
			{ID: "soft-clay", Kind: Special, Class: "S1", Clause: "Tab. 3.2.III", Standing: FromMemory, Fact: SoftClay,
				Text:   "VS,30 < 100 m/s and at least 8 m of fine soil of low consistency",
				Limits: []Criterion{{Property: Thickness, Range: atLeast(8), Unit: profile.Metre}}},
			{ID: "peat", Kind: Special, Class: "S1", Clause: "Tab. 3.2.III", Standing: FromMemory, Fact: Peat,
				Text:   "VS,30 < 100 m/s and at least 3 m of peat or highly organic clay",
				Limits: []Criterion{{Property: Thickness, Range: atLeast(3), Unit: profile.Metre}}},
			{ID: "category-e", Kind: Geometry, Class: "E", Clause: "Tab. 3.2.II", Standing: FromMemory, Fact: StiffGround,
				Text: "reference substrate of VS > 800 m/s under at most 20 m of soil of C or D velocities (to 360 m/s)",
				Limits: []Criterion{
					{Property: StiffVelocity, Range: above(800), Unit: profile.MetrePerSecond},
					{Property: CoverThickness, Range: atMost(20), Unit: profile.Metre},
					{Property: CoverVelocity, Range: dashUpTo(360), Unit: profile.MetrePerSecond}},
				Only: []string{"B", "C", "D"}, OnlyStanding: FromMemory},
			{ID: "rock-cover", Kind: Barred, Clause: "Tab. 3.2.II", Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of weathered material at the surface bars category A",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"A"}},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "3.2.2", Standing: OneSource},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 2, Clause: "3.2.2", Standing: FromMemory},
		},
		Averaging: Averaging{Nch: "NSPT,30", Su: "cu,30", Clause: "3.2.2", Standing: FromMemory},

		Notes: []string{
			"360 m/s is printed in both B and C; the softer, C, is taken",
			"A is strictly above 800 m/s and D strictly below 180 m/s, so 800 is B and 180 is C",
			"N of 50 and 15 and cu of 250 and 70 kPa are in no category as printed",
			"E is not asked where VS,30 is that of A, which allows 3 m of weathered material itself; its velocity is taken here as the average above VS > 800 m/s",
			"B, C and D are for more than 30 m of soil; soil of C or D velocities 20 m to 30 m thick on rock, and soil of B velocities on shallow rock, have no category of their own, and VS,30 decides",
			"S1 needs VS,30 < 100 m/s (or 10 < cu,30 < 20 kPa) and the soft ground together; without that ground VS,30 < 100 m/s is D",
			"S1 and S2 call for a study of the site response",
		},
		Short:      "the rules of 2008 were not seen to speak of profiles that end above 30 m",
		Correlated: "where VS is not known the rules go to NSPT in coarse and cu in fine soil, and where there are both the worse category is taken (from memory)",
		Superseded: "the rules of 2008 were superseded by NTC 2018 on 22 March 2018",
		decide:     decideNTC2008,
	}
}

// decideNTC2008 looks for soft ground of S1, then for thin soil on rock, and
// lets VS,30 decide what is left.
func decideNTC2008(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.specialGround()
	special := r.settled()
	e := r.condition("category-e")
	stiff, _ := e.limitOn(StiffVelocity)
	cov := coverAbove(r.layers, r.datum, r.bottom(), stiff.Range.Lower, stiff.Unit)
	o := r.geometry(e, cov)
	if !slices.Contains(e.Only, r.classAt(r.velocity)) {
		o = Outcome{State: NotApplicable}
	}
	r.record(e, o)
	if o.State == Met {
		r.mixedCover(e, cov)
	}
	r.table()
	if !special && o.State != Met {
		r.unlisted(e, cov)
	}
	return r.finish(), nil
}

// specialGround tests the special conditions; those of S1 count only where
// VS,30 is within the bounds printed beside it.
func (r *ruling) specialGround() {
	s1 := &r.code.Bands[r.code.band("S1")]
	for i := range r.code.Conditions {
		c := &r.code.Conditions[i]
		if c.Kind != Special {
			continue
		}
		o := r.assess(c)
		if c.Class == s1.Class {
			steps, slow := Criterion{Range: s1.Vs, Unit: r.code.Unit}.compare(r.d.Velocity, r.over+", beside "+c.Fact.String(), c.Clause)
			if !slow && o.State != NotMet {
				o = Outcome{State: NotMet, Steps: append(steps, o.Steps...)}
			}
		}
		r.record(c, o)
	}
	r.notAsked()
}

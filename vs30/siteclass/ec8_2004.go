package siteclass

import (
	"math"

	"shearbook/profile"
)

// ec8_2004 returns EN 1998-1:2004, clause 3.1.2.
func ec8_2004() *Code {
	return &Code{
		ID:        "ec8-2004",
		Title:     "Eurocode 8: Design of structures for earthquake resistance – Part 1: General rules, seismic actions and rules for buildings",
		Edition:   "EN 1998-1:2004 with AC:2009 and A1:2013",
		Region:    "Europe, with national annexes",
		Clause:    "3.1.2",
		Table:     "Table 3.1",
		Source:    "EN 1998-1:2004 Table 3.1; glossary of the SERA project, INGV",
		Parameter: "vs,30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		DatumNote: "national documents may fix it",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Type, name, vs,30 (m/s), NSPT (blows/30 cm), cu (kPa)
		Bands: []Band{
			{Class: "A", Name: "rock", Vs: above(800), Also: "at most 5 m of weaker material at the surface", Standing: Checked},
			{Class: "B", Name: "very dense sand or gravel, very stiff clay", Vs: dash(360, 800), N: above(50), Su: above(250),
				Also: "at least several tens of metres thick, properties improving with depth", Improving: true, Standing: Checked},
			{Class: "C", Name: "dense to medium dense sand or gravel, stiff clay", Vs: dash(180, 360), N: dash(15, 50), Su: dash(70, 250),
				Also: "several tens to many hundreds of metres thick", Standing: Checked},
			{Class: "D", Name: "loose to medium sand, soft to firm clay", Vs: below(180), N: below(15), Su: below(70), Standing: Checked},
			{Class: "E", Name: "surface alluvium over stiffer material",
				Also: "velocities of C or D, about 5 m to 20 m thick, over material of vs > 800 m/s", Standing: Checked},
			{Class: "S1", Name: "soft clay or silt of high plasticity and water content", Vs: below(100), Su: dash(10, 20),
				Also: "vs,30 is indicative; a layer of at least 10 m with PI > 40", Indicative: true, Standing: Checked},
			{Class: "S2", Name: "liquefiable soil, sensitive clay, or anything not in A to E or S1", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "S2", Clause: "Table 3.1, 3.1.2(4)P", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "S2", Clause: "Table 3.1, 3.1.2(4)P", Standing: Checked, Fact: Sensitive,
				Text: "sensitive clay"},
			{ID: "soft-clay", Kind: Special, Class: "S1", Clause: "Table 3.1, 3.1.2(4)P", Standing: Checked, Fact: SoftClay,
				Text: "a layer at least 10 m thick of soft clay or silt of PI > 40 and high water content (the table shows cu of 10 – 20 kPa)",
				Limits: []Criterion{
					{Property: Thickness, Range: atLeast(10), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(40), Unit: bare},
					{Property: Strength, Range: dashUpTo(20), Unit: profile.Kilopascal}}},
			{ID: "type-e", Kind: Geometry, Class: "E", Clause: "Table 3.1", Standing: Checked, Fact: StiffGround,
				Text: "material of vs > 800 m/s under a surface layer about 5 – 20 m thick with velocities of C or D (to 360 m/s)",
				Limits: []Criterion{
					{Property: StiffVelocity, Range: above(800), Unit: profile.MetrePerSecond},
					{Property: CoverThickness, Range: dash(5, 20), Unit: profile.Metre, About: true},
					{Property: CoverVelocity, Range: dashUpTo(360), Unit: profile.MetrePerSecond}}},
			{ID: "rock-cover", Kind: Barred, Clause: "Table 3.1", Standing: Checked, Fact: StiffGround,
				Text:   "more than 5 m of weaker material at the surface bars type A",
				Limits: []Criterion{{Property: CoverThickness, Range: above(5), Unit: profile.Metre}},
				Bars:   []string{"A"}},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "3.1.2(2)", Standing: FromMemory},
			{Name: "N", Measures: []Measure{AverageN}, Rank: 2, Clause: "3.1.2(2)", Standing: FromMemory},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 3, Clause: "Table 3.1", Standing: FromMemory},
		},
		Averaging: Averaging{
			N: "NSPT", Nch: "NSPT", Su: "cu",
			Clause: "Table 3.1", Standing: FromMemory, Unstated: true,
		},

		Notes: []string{
			"360 m/s is printed in both B and C; the softer, C, is taken, by analogy with N and cu, whose shared values sit in the softer type; much practice takes B",
			"A is strictly above 800 m/s and D strictly below 180 m/s, so 800 is B and 180 is C",
			"type E goes before vs,30, which for such ground is often that of B or C; its velocity is taken here as the average over the ground above vs > 800 m/s",
			"the limits of about 5 m and about 20 m are soft; within a tenth of them a note says so",
			"soil of C or D velocities 20 m to 30 m thick over rock, soil of B velocities over shallow rock, and thin soil over rock whose vs,30 is not above 800 m/s have no type of their own; vs,30 decides",
			"vs,30 < 100 m/s and cu of 10 – 20 kPa stand beside S1 as values that go with it; clay weaker than 10 kPa is counted in",
			"where vs,30 is not known NSPT is used (3.1.2(2), from memory); there is no default type and no rule for profiles shorter than 30 m",
			"S1 and S2 call for special studies",
		},
		Short:      "the clause says nothing of profiles that end above 30 m",
		Correlated: "where vs,30 is not known the clause goes to the NSPT column rather than to a correlated velocity",
		decide:     decideEC8,
	}
}

// decideEC8 looks for type E before vs,30 decides.
func decideEC8(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.ground()
	special := r.settled()
	e, cov, met := r.typeE()
	if !special {
		r.aboutLimits(e, cov, met)
	}
	r.table()
	if !special && !met {
		r.unlisted(e, cov)
	}
	return r.finish(), nil
}

// typeE compares the ground above the stiff ground with the limits of type E.
func (r *ruling) typeE() (e *Condition, cov cover, met bool) {
	e = r.condition("type-e")
	stiff, _ := e.limitOn(StiffVelocity)
	cov = coverAbove(r.layers, r.datum, r.bottom(), stiff.Range.Lower, stiff.Unit)
	o := r.geometry(e, cov)
	r.record(e, o)
	if o.State == Met {
		r.mixedCover(e, cov)
	}
	return e, cov, o.State == Met
}

// geometry compares the ground above the stiff ground, and that itself, with
// the limits of a condition, in their order.
func (r *ruling) geometry(c *Condition, cov cover) Outcome {
	o := Outcome{State: Met}
	values := map[Property]float64{StiffVelocity: cov.stiff, CoverThickness: cov.thickness(), CoverVelocity: cov.average(r.layers)}
	for _, k := range c.Limits {
		subject := c.subject(k)
		if k.Property == StiffVelocity && !cov.found {
			subject = "velocity at " + r.length(cov.bottom) + ", with no stiff ground above"
		}
		if k.About {
			subject += " (about)"
		}
		steps, holds := k.compare(values[k.Property], subject, c.Clause)
		o.Steps = append(o.Steps, steps...)
		if !holds {
			o.State = NotMet
			break
		}
	}
	return o
}

// aboutLimits notes a thickness within a tenth of a limit that is printed
// with "about", and the type that the other reading gives.
func (r *ruling) aboutLimits(e *Condition, cov cover, met bool) {
	k, _ := e.limitOn(CoverThickness)
	slow, _ := e.limitOn(CoverVelocity)
	other := "the type would be " + e.Class
	if met {
		other = "the average alone would decide and give " + r.classAt(r.velocity)
	}
	if !cov.found || !slow.Range.Contains(cov.average(r.layers)/slow.Unit.Factor) {
		return
	}
	for _, limit := range [...]float64{k.Range.Lower.Value, k.Range.Upper.Value} {
		if t := cov.thickness() / k.Unit.Factor; math.Abs(t-limit) <= limit/10 {
			r.note("about-limit", "the %s above the stiff ground are near the limit printed as about %s; read the other way, %s",
				withUnit(t, k.Unit), withUnit(limit, k.Unit), other)
		}
	}
}

// mixedCover notes that the ground above the stiff ground is not all slow.
func (r *ruling) mixedCover(e *Condition, cov cover) {
	k, _ := e.limitOn(CoverVelocity)
	for i := range r.layers {
		l := &r.layers[i]
		if l.Bottom <= cov.from || l.Top >= cov.bottom {
			continue
		}
		if v := max(l.Vs, l.VsAt(min(l.Bottom, cov.bottom))) / k.Unit.Factor; !k.Range.Contains(v) {
			r.note("mixed-cover", "the ground above the stiff ground is in part faster than %s; its average decides, where the print speaks of one surface layer",
				withUnit(k.Range.Upper.Value, k.Unit))
			return
		}
	}
}

// unlisted notes ground over rock for which the print has no type of its own
// and vs,30 decides.
func (r *ruling) unlisted(e *Condition, cov cover) {
	if !cov.found || cov.thickness() == 0 || r.d.Class == r.code.Bands[0].Class || r.noted("rock-barred") {
		return
	}
	slow, _ := e.limitOn(CoverVelocity)
	what := "ground faster than"
	if slow.Range.Contains(cov.average(r.layers) / slow.Unit.Factor) {
		what = "ground no faster than"
	}
	r.note("no-own-type", "%s of %s %s over more than 800 m/s has no type of its own in the print; %s decides",
		r.length(cov.thickness()), what, withUnit(slow.Range.Upper.Value, slow.Unit), r.code.Parameter)
}

// condition returns the code's condition of that ID.
func (r *ruling) condition(id string) *Condition {
	for i := range r.code.Conditions {
		if r.code.Conditions[i].ID == id {
			return &r.code.Conditions[i]
		}
	}
	panic("siteclass: " + r.code.ID + " has no condition " + id)
}

package siteclass

import (
	"strings"

	"shearbook/profile"
)

// nbcc2020 returns the National Building Code of Canada 2020, Division B,
// Article 4.1.8.4.
//
// Its site designation is XV, V being the velocity itself, where that was
// measured in place, with the exceptions of Table -A; and XS, S being the
// site class of Table -B, where it was not. The bands below are Table -B.
func nbcc2020() *Code {
	const a, b = "Table 4.1.8.4.-A", "Table 4.1.8.4.-B"
	return &Code{
		ID:        "nbcc-2020",
		Title:     "National Building Code of Canada",
		Edition:   "NBCC 2020, Division B",
		Region:    "Canada",
		Clause:    "4.1.8.4.",
		Table:     b,
		Source:    "NBCC 2020 Article 4.1.8.4., read in the British Columbia Building Code 2024 (B.C. Reg. 119/2024)",
		Parameter: "Vs30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		DatumNote: "the text says top 30 m and no more",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Designation, name, Vs30 (m/s), N60, su (kPa)
		Bands: []Band{
			{Class: "XA", Name: "hard rock", Vs: above(1500), Standing: Checked},
			{Class: "XB", Name: "rock", Vs: above(760).to(atMost(1500)), Standing: Checked},
			{Class: "XC", Name: "very dense soil and soft rock", Vs: above(360).to(atMost(760)), N: above(50), Su: above(100), Standing: Checked},
			{Class: "XD", Name: "stiff soil", Vs: above(180).to(atMost(360)), N: above(15).to(atMost(50)), Su: above(50).to(atMost(100)), Standing: Checked},
			{Class: "XE", Name: "soft soil", Vs: above(140).to(atMost(180)), N: above(10).to(atMost(15)), Su: above(40).to(atMost(50)),
				Also: "or more than 3 m of soft clay, if not XF", Standing: Checked},
			{Class: "XF", Name: "other soils", Vs: atMost(140), N: atMost(10), Su: atMost(40), Also: "or the list of Table -A; site-specific", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: Peat,
				Text:   "peat or highly organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 8 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(8), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "XF", Clause: a, Standing: Checked, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 30 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(30), Unit: profile.Metre}}},
			{ID: "soft-clay", Kind: Softer, Class: "XE", Clause: a, Standing: Checked, Fact: SoftClay,
				Text: "more than 3 m of soft clay: PI > 20, w ≥ 40 % and su < 25 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(25), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: a, Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of softer material between the rock and the underside of the footing or mat makes X760 of a faster Vs30, and of XA and XB",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"XA", "XB"}, FromFoundation: true},
		},

		Routes: threeWays("4.1.8.4.", Checked),
		Averaging: Averaging{
			N: "N̄60", Nch: "N̄60", Su: "su", Blow: BlowN60,
			Clause: "4.1.8.4.", Standing: Checked, Unstated: true,
		},

		Notes: []string{
			"XV is for a Vs30 measured in place; XS for N60 or su where there is none; a correlated velocity is none, and is held against Table -B here",
			"upper bounds are printed as their own, so no value is in two designations or in none",
			"where XE and XF both apply, XF does",
			"V runs from 140 m/s to 3,000 m/s; the upper end is from memory",
			"how N60 and su go together in mixed ground is left to rational analysis; here N60 over all layers stands beside N60 over the sand and su over the clay, and the softest class is taken",
			"the text has no averaging formula and no class for want of data",
			"liquefiable soil under structures with a period of 0.5 s or less may be taken not to liquefy",
			"a Note proposed in 2024 warns that the Article may not fit strong contrasts of impedance or deep basins (one source)",
		},
		Short:      "the text says nothing of profiles that end above 30 m",
		Correlated: "the designation XV is for velocities measured in place; where there are none the text asks for N60 or su",
		decide:     decideNBCC2020,
	}
}

// decideNBCC2020 designates the site by the velocity itself where it was
// measured in place, and else by Table -B.
func decideNBCC2020(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.byOther = r.designation
	if r.noted("correlated") {
		r.byOther = r.tableB
	}
	row := r.byAverage()
	if row == "XF" {
		r.d.Class = row // before the soft clay of XE
	}
	r.ground()
	r.exceptRock()
	if !r.settled() {
		r.d.Class, r.d.Row = r.byOther(r.velocity), row
	}
	r.nearDesignation()
	return r.finish(), nil
}

// fastestV is the largest V of a designation XV, in m/s (from memory).
const fastestV = 3000

// designation writes the designation XV of a velocity in m/s, with decimals
// only where a whole number would be a bound that the velocity is not.
func (r *ruling) designation(v float64) string {
	if row := r.tableB(v); row == "XF" {
		return row
	}
	v = min(v, fastestV)
	text := decimals(v, 0)
	for _, b := range r.code.bounds() {
		if !equal(v, b) && text == decimals(b, 0) {
			text = numberBeside(v, b)
		}
	}
	return "X" + strings.ReplaceAll(text, ",", "")
}

// tableB returns the designation XS of a velocity in m/s.
func (r *ruling) tableB(v float64) string { return r.code.Bands[r.code.Lookup(v)].Class }

// exceptRock makes X760 of rock under too much softer material.
func (r *ruling) exceptRock() {
	c := r.condition("rock-cover")
	class := r.tableB(r.velocity)
	if r.settled() || class != "XA" && class != "XB" {
		r.record(c, Outcome{State: NotApplicable})
		return
	}
	r.noteFoundation(c)
	steps, met := r.barStep(c, "XB", r.soilOver(c, "XB"))
	o := Outcome{State: NotMet, Steps: steps}
	if met {
		o.State = Met
	}
	r.record(c, o)
	if met {
		r.note("rock-barred", "%s by its Vs30 of %s, the site is X760: %s (%s)", r.byOther(r.velocity), r.speed(r.velocity), c.Text, c.Clause)
		r.d.Class, r.d.Row = "X760", "XC"
	}
}

// nearDesignation adds how near the velocity is to 140 m/s, at which the
// designation changes in kind; between the bounds every velocity has its own.
func (r *ruling) nearDesignation() {
	if fastest := r.designation(fastestV); r.d.Class == fastest && r.velocity > fastestV {
		r.note("fastest-designation", "Vs30 of %s is beyond the largest designation, %s (from memory)", r.speed(r.velocity), fastest)
		r.rest(FromMemory, "the largest designation, "+fastest)
	}
	if r.d.Class != r.byOther(r.velocity) {
		return // an exception settled it
	}
	kind := func(v float64) string {
		if r.tableB(v) == "XF" {
			return "XF"
		}
		return "XV"
	}
	if r.noted("correlated") {
		kind = r.tableB
	}
	m := marginSearch{unit: r.code.Unit.Name, own: kind(r.velocity)}
	m.look(r.velocity, r.code.bounds(), kind)
	r.d.Margin = m.margin
}

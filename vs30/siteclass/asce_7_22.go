package siteclass

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// asce7_22 returns ASCE/SEI 7-22, chapter 20, which is also the site
// classification of the 2020 NEHRP provisions (FEMA P-2082).
func asce7_22() *Code {
	return &Code{
		ID:        "asce-7-22",
		Title:     "Minimum Design Loads and Associated Criteria for Buildings and Other Structures",
		Edition:   "ASCE/SEI 7-22",
		Region:    "United States; IBC 2024",
		Clause:    "ch. 20",
		Table:     "Table 20.2-1",
		Source:    "ASCE/SEI 7-22 Table 20.2-1, from memory; the list of classes from the USGS ASCE7-22 web service documentation",
		Parameter: "v̄s",
		Depth:     100 * profile.Foot,
		DepthText: "100 ft",
		Datum:     DatumGround,
		DatumNote: "that the 100 ft start at the ground surface is from memory",
		Unit:      profile.FootPerSecond,
		Length:    profile.FootUnit,
		Standing:  FromMemory,

		//  Class, name, v̄s (ft/s)
		Bands: []Band{
			{Class: "A", Name: "hard rock", Vs: above(5000), Standing: FromMemory},
			{Class: "B", Name: "medium hard rock", Vs: above(3000).to(atMost(5000)), Standing: FromMemory},
			{Class: "BC", Name: "soft rock", Vs: above(2100).to(atMost(3000)), Standing: FromMemory},
			{Class: "C", Name: "very dense sand or hard clay", Vs: above(1450).to(atMost(2100)), Standing: FromMemory},
			{Class: "CD", Name: "dense sand or very stiff clay", Vs: above(1000).to(atMost(1450)), Standing: FromMemory},
			{Class: "D", Name: "medium dense sand or stiff clay", Vs: above(700).to(atMost(1000)), Standing: FromMemory},
			{Class: "DE", Name: "loose sand or medium stiff clay", Vs: above(500).to(atMost(700)), Standing: FromMemory},
			{Class: "E", Name: "very loose sand or soft clay", Vs: atMost(500), Also: "or the soft clay of 20.2.2", Standing: FromMemory},
			{Class: "F", Name: "ground that needs a site-specific study", Also: "see 20.2.1", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: Peat,
				Text:   "peat or highly organic clay more than 10 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(10), Unit: profile.FootUnit}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 25 ft thick, where the class would otherwise be CD, D, DE or E",
				Limits: []Criterion{
					{Property: Thickness, Range: above(25), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}},
				Only: []string{"CD", "D", "DE", "E"}, OnlyStanding: FromMemory},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F", Clause: "20.2.1", Standing: FromMemory, Fact: ThickClay,
				Text: "soft to medium stiff clay of su < 1,000 psf more than 120 ft thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(120), Unit: profile.FootUnit},
					{Property: Strength, Range: below(1000), Unit: profile.PoundPerSquareF}}},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "20.2.2", Standing: FromMemory, Fact: SoftClay,
				Text: "more than 10 ft in all of soft clay: su < 500 psf, w ≥ 40 % and PI > 20",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.FootUnit},
					{Property: Strength, Range: below(500), Unit: profile.PoundPerSquareF},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: PlasticityIndex, Range: above(20), Unit: bare}}},
			{ID: "rock-cover", Kind: Barred, Clause: "ch. 20", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 10 ft of soil between the rock and the bottom of the footing or mat bars classes A and B",
				Limits: []Criterion{{Property: CoverThickness, Range: above(10), Unit: profile.FootUnit}},
				Bars:   []string{"A", "B"}, FromFoundation: true},
		},

		Default: "the envelope of the spectra of C, CD and D at each period, unless the authority or the ground says DE, E or F (11.4.2.1, from memory)",

		Notes: []string{
			"the table gives velocities only; penetration and strength count through a correlation for velocity and 20.3",
			"the upper bound of each class is printed as its own, so no value is in two classes or in none",
			"without a measured profile the classes of v̄s, 1.3·v̄s and v̄s/1.3 are all looked at and the most critical governs at each period (20.3; one source)",
			"class A asks for measured velocities; what is taken for rock that was not measured is not settled here",
			"data that end between 50 and 100 ft may be carried down by the last velocity where no softer layer is to be expected; above 50 ft the default classes apply (20.3, from memory)",
			"which class follows where A or B is barred is not printed",
		},
		Correlated: "20.3 then looks at the classes of v̄s, 1.3·v̄s and v̄s/1.3 (one source)",
		decide:     decideASCE7_22,
		bandsAlone: true,
	}
}

// decideASCE7_22 is the ordinary rule with what §20.3 says of data that end
// above 100 ft and of velocities that were not measured.
func decideASCE7_22(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.shallowData()
	r.ground()
	byTable := !r.settled()
	r.table()
	r.spread(byTable)
	return r.finish(), nil
}

// shallowData notes the rule for data that end above 100 ft where the
// average uses an extension: from 50 ft on the last velocity may be carried
// down if nothing softer is to be expected; above 50 ft the default classes
// apply (20.3, from memory).
func (r *ruling) shallowData() {
	if !r.extended() {
		return
	}
	const enough = 50 // ft
	reach := r.reach() / profile.Foot
	text := "the code lets the last velocity be carried down to 100 ft where the data reach 50 ft and no softer layer is to be expected below"
	if reach < enough && !equal(reach, enough) {
		text = "the code takes its default classes where the data end above 50 ft, unless the geology justifies another; an extension is not its rule"
	}
	r.say("extension-rule", "the data reach "+r.length(r.reach())+" below the datum; "+text+" (20.3)")
	r.rest(FromMemory, "the rule for data that end above 100 ft (20.3)")
}

// spread lists the classes of 1.3·v̄s, v̄s and v̄s/1.3 where the velocities are
// correlated: the code then takes the most critical of their spectra at each
// period, which is not that of one class (20.3, one source).
func (r *ruling) spread(byTable bool) {
	const factor = 1.3
	if !r.noted("correlated") {
		return
	}
	v, fast, slow := r.velocity, r.velocity*factor, r.velocity/factor
	var all []string
	for _, class := range [...]string{r.classAt(fast), r.classAt(v), r.classAt(slow)} {
		if !slices.Contains(all, class) {
			all = append(all, class)
		}
	}
	what := "one class throughout"
	if len(all) > 1 {
		what = "the governing spectrum is the envelope of those of " + strings.Join(all, ", ") + ", the most critical at each period, and that of no single class"
		if byTable {
			r.d.Classes = all
		}
	}
	r.rowSteps(fast, "1.3·v̄s over "+r.code.DepthText)
	r.rowSteps(slow, "v̄s/1.3 over "+r.code.DepthText)
	r.note("correlated-classes", "v̄s of %s is class %s; 1.3·v̄s of %s is class %s; v̄s/1.3 of %s is class %s: %s (20.3)",
		r.speed(v), r.classAt(v), r.speed(fast), r.classAt(fast), r.speed(slow), r.classAt(slow), what)
	r.rest(OneSource, "the classes of correlated velocities (20.3)")
}

// rowSteps compares a velocity with the bounds of the row that claims it.
func (r *ruling) rowSteps(v float64, over string) {
	c := r.code
	if i := c.Lookup(v); i >= 0 {
		r.cellSteps(&c.Bands[i].Vs, v, c.Unit, r.subject(AverageVs, i, over))
	}
}

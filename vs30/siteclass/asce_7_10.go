package siteclass

import "shearbook/profile"

// asce7_10 returns ASCE/SEI 7-10, chapter 20.
func asce7_10() *Code {
	return &Code{
		ID:        "asce-7-10",
		Title:     "Minimum Design Loads for Buildings and Other Structures",
		Edition:   "ASCE/SEI 7-10",
		Region:    "United States; IBC 2012 and IBC 2015",
		Clause:    "ch. 20",
		Table:     "Table 20.3-1",
		Source:    "ASCE/SEI 7-10 Table 20.3-1; IBC 2009 §1613.5.5; US Army TI 809-51 (1999) Table B-1; UFC 3-310-03A; USGS design-map report tables",
		Parameter: "v̄s",
		Depth:     100 * profile.Foot,
		DepthText: "100 ft",
		Datum:     DatumGround,
		DatumNote: "the print speaks of the upper 100 ft of the site profile; that it nowhere restates this as the base of the footing is from memory",
		Unit:      profile.FootPerSecond,
		SuUnit:    profile.PoundPerSquareF,
		Length:    profile.FootUnit,
		Standing:  OneSource,

		//  Class, name, v̄s (ft/s), N̄ or N̄ch (blows/ft), s̄u (psf)
		Bands: []Band{
			{Class: "A", Name: "hard rock", Vs: above(5000), Standing: Checked},
			{Class: "B", Name: "rock", Vs: dash(2500, 5000), Standing: Checked},
			{Class: "C", Name: "very dense soil and soft rock", Vs: dash(1200, 2500), N: above(50), Su: above(2000), Standing: Checked},
			{Class: "D", Name: "stiff soil", Vs: dash(600, 1200), N: dash(15, 50), Su: dash(1000, 2000), Standing: Checked},
			{Class: "E", Name: "soft clay soil", Vs: below(600), N: below(15), Su: below(1000), Also: "or the soft clay of 20.3.2", Standing: OneSource},
			{Class: "F", Name: "ground that needs a site-specific study", Also: "see 20.3.1", Standing: OneSource},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F", Clause: "20.3.1 item 1", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "F", Clause: "20.3.1 item 1", Standing: Checked, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "F", Clause: "20.3.1 item 1", Standing: Checked, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "F", Clause: "20.3.1 item 2", Standing: Checked, Fact: Peat,
				Text:   "peat or highly organic clay more than 10 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(10), Unit: profile.FootUnit}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F", Clause: "20.3.1 item 3", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 25 ft thick, where the class would otherwise be D or E",
				Limits: []Criterion{
					{Property: Thickness, Range: above(25), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}},
				Only: []string{"D", "E"}, OnlyStanding: FromMemory},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F", Clause: "20.3.1 item 4", Standing: OneSource, Fact: ThickClay,
				Text: "soft to medium stiff clay of su < 1,000 psf more than 120 ft thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(120), Unit: profile.FootUnit},
					{Property: Strength, Range: below(1000), Unit: profile.PoundPerSquareF}}},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "20.3.2", Standing: OneSource, Fact: SoftClay,
				Text: "more than 10 ft in all of soft clay: su < 500 psf, w ≥ 40 % and PI > 20",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.FootUnit},
					{Property: Strength, Range: below(500), Unit: profile.PoundPerSquareF},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: PlasticityIndex, Range: above(20), Unit: bare}}},
			{ID: "rock-cover", Kind: Barred, Clause: "20.1", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 10 ft of soil between the rock and the bottom of the footing or mat bars classes A and B",
				Limits: []Criterion{{Property: CoverThickness, Range: above(10), Unit: profile.FootUnit}},
				Bars:   []string{"A", "B"}, FromFoundation: true},
		},

		Routes: ways("20.3.3", OneSource, FromMemory),
		Averaging: Averaging{
			N: "N̄", Nch: "N̄ch", Su: "s̄u",
			Blow: BlowField, NCap: 100, SuCap: 5000,
			Cohesive: above(20), Cohesionless: below(20),
			Clause: "20.4", Standing: OneSource,
		},
		Default:      "class D, unless the authority or the ground says E or F",
		DefaultClass: "D",

		Notes: []string{
			"at 2,500 and at 1,200 ft/s two printed ranges meet and neither is said to own the value; the softer class is taken, as the text of the 1997 NEHRP provisions has it",
			"class A is strictly above 5,000 ft/s and class E strictly below 600 ft/s, so 5,000 is B and 600 is D; likewise N = 50 and su = 2,000 psf, N = 15 and su = 1,000 psf are D",
			"only feet are printed, with a note on conversion; a blow count of 100 a foot is 328 a metre, where one print has 305 (one source)",
			"N̄ is over all layers, N̄ch over the cohesionless (PI < 20) and s̄u over the cohesive (PI > 20), each with the thickness of its own layers; a PI of exactly 20 is printed in neither (from memory)",
			"of N̄ch and s̄u the softer class governs (from memory); N̄ stands beside the two, and the softer class of both ways is taken here",
			"class A asks for velocities measured on the site or in the same formation; class B may be estimated for competent, moderately fractured rock (20.3.4 and 20.3.5, from memory)",
			"liquefiable soil under structures with a period of 0.5 s or less may take the class found as if it did not liquefy (20.3.1, one source)",
			"which class follows where A or B is barred is not printed",
		},
		Short:      "where the data end above 100 ft the code lets the registered design professional estimate the properties below from the known geology (20.1, one source)",
		Correlated: "the velocity column is for measured shear-wave velocities; the code's own way from penetration or strength is the N and su columns",
		Twin: Twin{Unit: profile.MetrePerSecond, Bounds: []float64{1500, 760, 360, 180},
			Source: "1997 NEHRP provisions, FEMA 302"},
	}
}

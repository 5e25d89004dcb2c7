package siteclass

import "shearbook/profile"

// nbcc2015 returns the National Building Code of Canada 2015, Division B,
// Article 4.1.8.4.
func nbcc2015() *Code {
	return &Code{
		ID:        "nbcc-2015",
		Title:     "National Building Code of Canada",
		Edition:   "NBCC 2015, Division B",
		Region:    "Canada",
		Clause:    "4.1.8.4.",
		Table:     "Table 4.1.8.4.-A",
		Source:    "NBCC 2015 Article 4.1.8.4., read in Ontario's consolidation (O. Reg. 332/12, Tables 4.1.8.4.A to I)",
		Parameter: "V̄s30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		DatumNote: "the text says top 30 m and no more; the commentary was not seen",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Class, name, V̄s30 (m/s), N̄60, su (kPa)
		Bands: []Band{
			{Class: "A", Name: "hard rock", Vs: above(1500), Standing: Checked},
			{Class: "B", Name: "rock", Vs: above(760).to(atMost(1500)), Standing: Checked},
			{Class: "C", Name: "very dense soil and soft rock", Vs: above(360).to(below(760)), N: above(50), Su: above(100), Standing: Checked},
			{Class: "D", Name: "stiff soil", Vs: above(180).to(below(360)), N: atLeast(15).to(atMost(50)), Su: above(50).to(atMost(100)), Standing: Checked},
			{Class: "E", Name: "soft soil", Vs: below(180), N: below(15), Su: below(50), Also: "or more than 3 m of soft clay", Standing: Checked},
			{Class: "F", Name: "other soils", Also: "site-specific", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: Peat,
				Text:   "peat or highly organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 8 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(8), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 30 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(30), Unit: profile.Metre}}},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "Table 4.1.8.4.-A", Standing: Checked, Fact: SoftClay,
				Text: "more than 3 m of soft clay: PI > 20, w ≥ 40 % and su < 25 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(25), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "4.1.8.4.", Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of softer material between the rock and the underside of the footing or mat bars classes A and B",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"A", "B"}, FromFoundation: true, OwnAverage: true},
		},

		Routes: nbccRoutes(),
		Averaging: Averaging{
			N: "N̄60", Nch: "N̄60", Su: "su", Blow: BlowN60,
			Clause: "4.1.8.4.", Standing: Checked, Unstated: true,
		},

		Notes: []string{
			"velocities of exactly 760, 360 and 180 m/s are in no class as printed, nor is su = 50 kPa; the softer class is taken",
			"the text has no averaging formula and no default class",
			"velocity comes first; N60 (corrected for energy) or su where it is not known",
			"how N60 and su go together in mixed ground is left to rational analysis; here N60 over all layers stands beside N60 over the sand and su over the clay, and the softest class is taken",
			"liquefiable soil under structures with a period of 0.5 s or less may take the class found as if it did not liquefy",
			"where A or B is barred the class comes from the average over the whole thickness of the softer material",
		},
		Short:      "the text says nothing of profiles that end above 30 m",
		Correlated: "the text asks for the velocity, or else N60 or su with their own columns, and has no rule for correlated velocities",
	}
}

// nbccRoutes are the ways of Article 4.1.8.4.: the velocity, or else N60 or
// su.
func nbccRoutes() []Route { return threeWays("4.1.8.4.", Checked) }

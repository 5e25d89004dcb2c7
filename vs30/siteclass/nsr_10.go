package siteclass

import "shearbook/profile"

// nsr10 returns the Colombian regulation NSR-10, Title A, section A.2.4.
func nsr10() *Code {
	return &Code{
		ID:        "nsr-10",
		Title:     "Reglamento Colombiano de Construcción Sismo Resistente",
		Edition:   "NSR-10, Decreto 926 of 2010, Title A",
		Region:    "Colombia",
		Clause:    "A.2.4",
		Table:     "Tabla A.2.4-1",
		Source:    "Decreto 926 of 2010, Title A, pp. A-20 to A-25",
		Parameter: "V̄s",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "with basements or on slopes the engineer may move the start, never below the slab of the lowest basement",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Profile, name, V̄s (m/s), N̄, s̄u (kPa)
		Bands: []Band{
			{Class: "A", Name: "competent rock", Vs: atLeast(1500), Standing: Checked},
			{Class: "B", Name: "rock of medium stiffness", Vs: atLeast(760).to(below(1500)), Standing: Checked},
			{Class: "C", Name: "very dense soil or soft rock", Vs: atLeast(360).to(below(760)), N: above(50), Su: above(100), Standing: Checked},
			{Class: "D", Name: "stiff soil", Vs: atLeast(180).to(below(360)), N: atLeast(15).to(below(50)), Su: atLeast(50).to(below(100)), Standing: Checked},
			{Class: "E", Name: "soft soil", Vs: below(180), Also: "or 3 m or more of soft clay", Standing: Checked},
			{Class: "F1", Name: "unstable ground, which needs a study of its own", Standing: Checked},
			{Class: "F2", Name: "thick peat or organic clay, which needs a study of its own", Standing: Checked},
			{Class: "F3", Name: "thick clay of very high plasticity, which needs a study of its own", Standing: Checked},
			{Class: "F4", Name: "very thick soft to medium stiff clay, which needs a study of its own", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F1", Clause: "A.2.4", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "F1", Clause: "A.2.4", Standing: Checked, Fact: Sensitive,
				Text: "sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "F1", Clause: "A.2.4", Standing: Checked, Fact: Collapsible,
				Text: "collapsible or weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "F2", Clause: "A.2.4", Standing: Checked, Fact: Peat,
				Text:   "peat or organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F3", Clause: "A.2.4", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of IP > 75 more than 7.5 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(7.5), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F4", Clause: "A.2.4", Standing: Checked, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 36 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(36), Unit: profile.Metre}}},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "Tabla A.2.4-1", Standing: Checked, Fact: SoftClay,
				Text: "3 m or more in all of soft clay: IP > 20, w ≥ 40 % and su < 50 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: atLeast(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(50), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "A.2.4", Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of soil over the rock bars profiles A and B",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"A", "B"}, FromFoundation: true},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "A.2.4", Standing: Checked},
			{Name: "N", Measures: []Measure{AverageN}, Rank: 2, Clause: "A.2.4", Standing: Checked},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 2, Clause: "A.2.4", Standing: Checked},
		},
		Averaging: Averaging{
			N: "N̄", Nch: "N̄ch", Su: "s̄u",
			Blow: BlowN60, NCap: 100, SuCap: 250,
			Cohesive: above(20), Cohesionless: below(20),
			Clause: "A.2.4", Standing: Checked,
		},

		Notes: []string{
			"lower bounds are printed as their own, the opposite of the NEHRP provisions, so 1,500 is A, 760 is B, 360 is C and 180 is D",
			"for C the class table prints N ≥ 50 and su ≥ 100 kPa, the table of the criteria more than 50 and 100; the softer reading is taken, so N = 50 and su = 100 kPa are D",
			"of the soft clay of E the class table prints more than 3 m and w ≥ 40 %, the procedure 3 m or more and w > 40 %; the wider of each is taken",
			"a blow count below 15, or a strength below 50 kPa, is below the rows that print one; E, the next, is taken",
			"the velocity decides; or else N̄ over all layers, or N̄ch over the cohesionless and s̄u over the cohesive, the softer governing; Σd is 30 m throughout",
			"N is corrected to an energy of 60 %; samples are wanted every 1.5 m at most",
			"profile A asks for measured velocities, on the site or in the same formation; B may be estimated",
			"from where the soil over the rock is counted was not read; the underside of the foundation is taken, as in the NEHRP provisions",
			"which profile follows where A or B is barred is not printed",
		},
		Short:      "the text takes 30 m throughout and was not read on explorations that end above",
		Correlated: "the code's own way from penetration or strength is N̄, N̄ch and s̄u",
	}
}

package siteclass

import "shearbook/profile"

// nec2015 returns the Ecuadorian standard NEC-SE-DS of 2015, section 3.2.1.
func nec2015() *Code {
	return &Code{
		ID:        "nec-2015",
		Title:     "Norma Ecuatoriana de la Construcción, Peligro Sísmico, Diseño Sismo Resistente",
		Edition:   "NEC-SE-DS (2015)",
		Region:    "Ecuador",
		Clause:    "3.2.1, 10.6",
		Table:     "Tabla 2",
		Source:    "NEC-SE-DS 2015 section 3.2.1, Tabla 2, and section 10.6, two copies",
		Parameter: "Vs30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "from the natural ground surface, even with basements",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Profile, name, Vs30 (m/s), N60, su (kPa)
		Bands: []Band{
			{Class: "A", Name: "competent rock", Vs: atLeast(1500), Standing: Checked},
			{Class: "B", Name: "rock of medium stiffness", Vs: atLeast(760).to(below(1500)), Standing: Checked},
			{Class: "C", Name: "very dense soil or soft rock", Vs: atLeast(360).to(below(760)), N: atLeast(50), Su: atLeast(100), Standing: Checked},
			{Class: "D", Name: "stiff soil", Vs: atLeast(180).to(below(360)), N: atLeast(15).to(below(50)), Su: atLeast(50).to(below(100)), Standing: Checked},
			{Class: "E", Name: "soft soil", Vs: below(180), Also: "or 3 m or more of soft clay", Standing: Checked},
			{Class: "F1", Name: "unstable ground, which needs a study of its own", Standing: Checked},
			{Class: "F2", Name: "thick peat or organic clay, which needs a study of its own", Standing: Checked},
			{Class: "F3", Name: "thick clay of very high plasticity, which needs a study of its own", Standing: Checked},
			{Class: "F4", Name: "very thick soft to medium stiff clay, which needs a study of its own", Standing: Checked},
			{Class: "F5", Name: "ground with a strong contrast of impedance, which needs a study of its own", Standing: Checked},
			{Class: "F6", Name: "fill placed without control, which needs a study of its own", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F1", Clause: "Tabla 2", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "F1", Clause: "Tabla 2", Standing: Checked, Fact: Sensitive,
				Text: "sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "F1", Clause: "Tabla 2", Standing: Checked, Fact: Collapsible,
				Text: "collapsible or weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "F2", Clause: "Tabla 2", Standing: Checked, Fact: Peat,
				Text:   "peat or organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F3", Clause: "Tabla 2", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of IP > 75 more than 7.5 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(7.5), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F4", Clause: "Tabla 2", Standing: Checked, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 30 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(30), Unit: profile.Metre}}},
			{ID: "impedance-contrast", Kind: Special, Class: "F5", Clause: "Tabla 2", Standing: Checked, Fact: Described,
				Text: "a contrast of impedance within the upper 30 m, soft soil on rock included (a ratio α of at most 0.5)"},
			{ID: "uncontrolled-fill", Kind: Special, Class: "F6", Clause: "Tabla 2", Standing: Checked, Fact: Described,
				Text: "fill placed without engineering control"},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "Tabla 2", Standing: Checked, Fact: SoftClay,
				Text: "3 m or more in all of soft clay: IP > 20, w ≥ 40 % and su < 50 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: atLeast(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(50), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "10.6", Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of soil between the rock and the bottom of the footing or mat bars profiles A and B",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"A", "B"}, FromFoundation: true},
		},

		Routes: threeWays("10.6", OneSource),
		Averaging: Averaging{
			N: "N60", Nch: "Nch", Su: "su",
			Blow: BlowN60, NCap: 100, SuCap: 250,
			Clause: "10.6", Standing: Checked,
		},

		Notes: []string{
			"lower bounds are printed as their own, the opposite of the NEHRP provisions, so 1,500 is A, 760 is B, 360 is C and 180 is D",
			"of the soft clay of E the table prints more than 3 m and w ≥ 40 %, the procedure 3 m or more and w > 40 %; the wider of each is taken",
			"a blow count below 15, or a strength below 50 kPa, is below the rows that print one; E, the next, is taken",
			"ground of more than 30 % fines counts as cohesive, silts among it; a profile does not state its fines, and what a layer states decides here",
			"F5 asks for the impedances on both sides of a contrast and its α for the half-space below; it is for the engineer to judge and never assessed here",
			"which profile follows where A or B is barred is not printed",
		},
		Short:      "what the text says of explorations that end above 30 m was not read",
		Correlated: "the text asks for the range of uncertainty of a correlation to be stated",
	}
}

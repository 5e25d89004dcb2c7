package siteclass

import "shearbook/profile"

// e0302018 returns the Peruvian standard E.030 of 2018, articles 12 and 13.
func e0302018() *Code {
	return &Code{
		ID:        "e030-2018",
		Title:     "Norma Técnica E.030 Diseño Sismorresistente",
		Edition:   "E.030 (2018), RM 355-2018-VIVIENDA, amended by RM 043-2019-VIVIENDA",
		Region:    "Peru",
		Clause:    "arts. 12 and 13",
		Table:     "Tabla 2",
		Source:    "E.030-2018 arts. 12 and 13, Tablas 2 to 4, two copies of the official text",
		Parameter: "V̄s",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumFoundation,
		DatumNote: "below the bottom of the foundation; with piles, below their tops",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Profile, name, V̄s (m/s), N̄60, S̄u (kPa)
		Bands: []Band{
			{Class: "S0", Name: "hard rock", Vs: above(1500), Standing: Checked},
			{Class: "S1", Name: "rock or very stiff soil", Vs: dash(500, 1500), N: above(50), Su: above(100),
				Also: "or fractured rock of qu ≥ 500 kPa; its stiff clay less than 20 m thick", Standing: Checked},
			{Class: "S2", Name: "intermediate soil", Vs: dash(180, 500), N: dash(15, 50), Su: dash(50, 100), Standing: Checked},
			{Class: "S3", Name: "soft soil", Vs: atMost(180), N: below(15), Su: dash(25, 50), Also: "or more than 3 m of soft clay", Standing: Checked},
			{Class: "S4", Name: "exceptional conditions", Also: "by a study of the site", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "soft-clay", Kind: Softer, Class: "S3", Clause: "arts. 12 and 13", Standing: Checked, Fact: SoftClay,
				Text: "more than 3 m of soft clay: PI > 20, w > 40 % and su < 25 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: above(40), Unit: percent},
					{Property: Strength, Range: below(25), Unit: profile.Kilopascal}}},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "arts. 12 and 13", Standing: Checked},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 2, Clause: "arts. 12 and 13", Standing: Checked},
		},
		Averaging: Averaging{
			N: "N̄60", Nch: "N̄60", Su: "S̄u", Blow: BlowN60,
			Clause: "arts. 12 and 13", Standing: Checked,
		},

		Notes: []string{
			"180 m/s: the clause has S3 at ≤ 180, the table at < 180 and S2 from 180; the softer, S3, is taken",
			"500 m/s is printed in S1 and in S2; the softer is taken; 1,500 is S1, as S0 is strict",
			"N̄60 is over the granular layers alone and S̄u over the cohesive alone, and in mixed profiles the worse of them governs; no caps are printed",
			"a strength below 25 kPa is below the last printed range; S4 is taken",
			"S0 asks for velocities measured on the site or in the same formation, no less weathered; a velocity at the surface will do where the hard rock is known to go on to 30 m",
			"the soft clay of S3 needs w > 40 %, where the NEHRP provisions have w ≥ 40 %",
			"liquefiable, sensitive or organic ground has no limits of its own in the text; S4 is for a study to find",
		},
		Short:      "where there are no data down to 30 m the code lets the professional estimate the properties",
		Correlated: "the code's own way from penetration or strength is N̄60 and S̄u",
		Superseded: "E.030-2018 is superseded by E.030-2026 (RM 183-2026-VIVIENDA, El Peruano, 3 May 2026); RM 217-2026-VIVIENDA keeps the edition of 2018 for projects under way",
	}
}

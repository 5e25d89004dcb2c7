package siteclass

import "shearbook/profile"

// bc3_2013 returns the ground types of Singapore: SS EN 1998-1:2013 with its
// national annex and the guidebook BC3:2013.
func bc3_2013() *Code {
	return &Code{
		ID:        "bc3-2013",
		Title:     "Guidebook for design of buildings in Singapore to design requirements in SS EN 1998-1",
		Edition:   "BC3:2013, with SS EN 1998-1:2013 and its national annex",
		Region:    "Singapore, buildings more than 20 m high",
		Clause:    "ground types",
		Table:     "table of ground types",
		Source:    "BCA guidebook BC3:2013; SS EN 1998-1:2013 with national annex",
		Parameter: "vs,30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "existing ground level, even where a basement is excavated",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  OneSource,

		//  Type, name, vs,30 (m/s), NSPT (blows/30 cm), cu (kPa)
		Bands: []Band{
			{Class: "A", Name: "rock", Vs: above(800), Standing: OneSource},
			{Class: "B", Name: "very dense sand or gravel, very stiff clay", Vs: dash(360, 800), N: above(50), Su: above(250), Standing: OneSource},
			{Class: "C", Name: "dense to medium dense sand or gravel, stiff clay", Vs: dash(180, 360), N: dash(15, 50), Su: dash(70, 250), Standing: OneSource},
			{Class: "D", Name: "loose to medium sand, soft to firm clay", Vs: below(180), N: below(15), Su: below(70), Standing: OneSource},
			{Class: "S1", Name: "soft clay or silt of high plasticity and water content", Vs: below(100), N: below(5), Su: dash(10, 20),
				Also: "a layer of at least 10 m with PI > 40", Indicative: true, Standing: OneSource},
		},

		Conditions: []Condition{
			{ID: "soft-clay", Kind: Special, Class: "S1", Clause: "table of ground types", Standing: OneSource, Fact: SoftClay,
				Text: "a layer at least 10 m thick of soft clay or silt of PI > 40 (the table shows cu of 10 – 20 kPa)",
				Limits: []Criterion{
					{Property: Thickness, Range: atLeast(10), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(40), Unit: bare},
					{Property: Strength, Range: dashUpTo(20), Unit: profile.Kilopascal}}},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "ground types", Standing: OneSource},
			{Name: "N", Measures: []Measure{AverageN}, Rank: 1, Clause: "ground types", Standing: OneSource},
			{Name: "su", Measures: []Measure{AverageSu}, Rank: 1, Clause: "ground types", Standing: OneSource},
		},
		Averaging: Averaging{N: "NSPT", Su: "cu", Clause: "weighted value P = Σd/Σ(d/P)", Standing: OneSource},
		Several:   "the most onerous ground type found on the site is used",
		WorstOf:   true,

		Notes: []string{
			"the numbers are those of EN 1998-1:2004, Table 3.1, with N < 5 beside S1",
			"where several parameters are known the most onerous type is used",
			"360 m/s is printed in both B and C; the softer, C, is taken; A is strictly above 800 m/s and D strictly below 180 m/s",
			"the weighted value is printed over 30 m for velocity, N and cu alike; here cu is averaged over the layers that state it",
			"the bounds beside S1 are taken to go with it and not to give it; type E of EN 1998-1 was not seen among these types",
			"design for earthquakes is asked of buildings more than 20 m high: ordinary ones on D or S1, special ones on C, D or S1",
		},
		Short:      "the guidebook was not seen to speak of profiles that end above 30 m",
		Correlated: "the guidebook goes by N and cu where the velocity is not known",
	}
}

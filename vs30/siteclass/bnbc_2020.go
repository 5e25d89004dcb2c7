package siteclass

import "shearbook/profile"

// bnbc2020 returns the Bangladesh National Building Code 2020, Part 6,
// section 2.5.3.
func bnbc2020() *Code {
	return &Code{
		ID:        "bnbc-2020",
		Title:     "Bangladesh National Building Code",
		Edition:   "BNBC 2020, Part 6, Gazette of 11 February 2021",
		Region:    "Bangladesh",
		Clause:    "Part 6, 2.5.3",
		Table:     "Table 6.2.13",
		Source:    "BNBC 2020, Gazette p. 3189, for the classes and that S1 and S2 need a special study; the numbers of Table 6.2.13 from memory",
		Parameter: "Vs,30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Class, name, Vs,30 (m/s), SPT N (blows/30 cm), su (kPa)
		Bands: []Band{
			{Class: "SA", Name: "rock", Vs: above(800), Also: "at most 5 m of weaker material at the surface", Standing: FromMemory},
			{Class: "SB", Name: "very dense sand or gravel, very stiff clay", Vs: dash(360, 800), N: above(50), Su: above(250),
				Also: "at least several tens of metres thick, properties improving with depth", Improving: true, Standing: FromMemory},
			{Class: "SC", Name: "dense to medium dense sand or gravel, stiff clay", Vs: dash(180, 360), N: dash(15, 50), Su: dash(70, 250),
				Also: "several tens to many hundreds of metres thick", Standing: FromMemory},
			{Class: "SD", Name: "loose to medium sand, soft to firm clay", Vs: below(180), N: below(15), Su: below(70), Standing: FromMemory},
			{Class: "SE", Name: "surface alluvium over stiffer material", Also: "velocities of SC or SD, about 5 m to 20 m thick, over Vs > 800 m/s", Standing: FromMemory},
			{Class: "S1", Name: "soft clay or silt of high plasticity and water content", Vs: below(100), Su: dash(10, 20),
				Also: "Vs,30 is indicative; a layer of at least 10 m with PI > 40", Indicative: true, Standing: FromMemory},
			{Class: "S2", Name: "liquefiable soil, sensitive clay, or anything not in SA to SE or S1", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "S2", Clause: "Table 6.2.13", Standing: FromMemory, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "S2", Clause: "Table 6.2.13", Standing: FromMemory, Fact: Sensitive,
				Text: "sensitive clay"},
			{ID: "soft-clay", Kind: Special, Class: "S1", Clause: "Table 6.2.13", Standing: FromMemory, Fact: SoftClay,
				Text: "a layer at least 10 m thick of soft clay or silt of PI > 40 and high water content (the table shows su of 10 – 20 kPa)",
				Limits: []Criterion{
					{Property: Thickness, Range: atLeast(10), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(40), Unit: bare},
					{Property: Strength, Range: dashUpTo(20), Unit: profile.Kilopascal}}},
			{ID: "type-e", Kind: Geometry, Class: "SE", Clause: "Table 6.2.13", Standing: FromMemory, Fact: StiffGround,
				Text: "material of Vs > 800 m/s under a surface layer about 5 – 20 m thick with velocities of SC or SD (to 360 m/s)",
				Limits: []Criterion{
					{Property: StiffVelocity, Range: above(800), Unit: profile.MetrePerSecond},
					{Property: CoverThickness, Range: dash(5, 20), Unit: profile.Metre, About: true},
					{Property: CoverVelocity, Range: dashUpTo(360), Unit: profile.MetrePerSecond}}},
			{ID: "rock-cover", Kind: Barred, Clause: "Table 6.2.13", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 5 m of weaker material at the surface bars class SA",
				Limits: []Criterion{{Property: CoverThickness, Range: above(5), Unit: profile.Metre}},
				Bars:   []string{"SA"}},
		},

		Routes:    threeWays("Part 6, 2.5.3", FromMemory),
		Averaging: Averaging{N: "N", Nch: "N", Su: "su", Clause: "Part 6, 2.5.3", Standing: FromMemory, Unstated: true},

		Notes: []string{
			"the numbers are those of EN 1998-1:2004, Table 3.1, from memory; the list of classes has a source",
			"360 m/s is read as printed in both SB and SC; the softer, SC, is taken",
			"SA is strictly above 800 m/s and SD strictly below 180 m/s, so 800 is SB and 180 is SC",
			"class SE goes before Vs,30; its velocity is taken here as the average over the ground above Vs > 800 m/s",
			"S1 and S2 call for special studies",
		},
		Short:      "the code was not seen to speak of profiles that end above 30 m",
		Correlated: "the code was not seen to speak of correlated velocities; the table has columns for N and su",
		decide:     decideEC8,
	}
}

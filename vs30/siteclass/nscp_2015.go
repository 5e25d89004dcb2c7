package siteclass

import "shearbook/profile"

// nscp2015 returns the National Structural Code of the Philippines 2015,
// section 208.4.3.
func nscp2015() *Code {
	return &Code{
		ID:        "nscp-2015",
		Title:     "National Structural Code of the Philippines, Volume I",
		Edition:   "NSCP 2015, 7th edition",
		Region:    "Philippines",
		Clause:    "208.4.3",
		Table:     "Table 208-2",
		Source:    "NSCP 2015 Table 208-2, from memory",
		Parameter: "Vs",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Type, name, Vs (m/s), N, su (kPa)
		Bands: []Band{
			{Class: "SA", Name: "hard rock", Vs: above(1500), Standing: FromMemory},
			{Class: "SB", Name: "rock", Vs: dash(760, 1500), Standing: FromMemory},
			{Class: "SC", Name: "very dense soil and soft rock", Vs: dash(360, 760), N: above(50), Su: above(100), Standing: FromMemory},
			{Class: "SD", Name: "stiff soil", Vs: dash(180, 360), N: dash(15, 50), Su: dash(50, 100), Standing: FromMemory},
			{Class: "SE", Name: "soft soil", Vs: below(180), N: below(15), Su: below(50), Also: "or more than 3 m of soft clay", Standing: FromMemory},
			{Class: "SF", Name: "soil that needs a site-specific study", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: Peat,
				Text:   "peat or highly organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 7.5 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(7.5), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "SF", Clause: "208.4.3, SF", Standing: FromMemory, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 35 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(35), Unit: profile.Metre}}},
			{ID: "soft-clay", Kind: Softer, Class: "SE", Clause: "Table 208-2, SE", Standing: FromMemory, Fact: SoftClay,
				Text: "more than 3 m of soft clay: PI > 20, w ≥ 40 % and su < 24 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(24), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "208.4.3", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 3 m of soil between the rock and the bottom of the footing or mat bars types SA and SB",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"SA", "SB"}, FromFoundation: true},
		},

		Routes:       threeWays("208.4.3", FromMemory),
		Averaging:    Averaging{N: "N", Nch: "NCH", Su: "su", Blow: BlowField, Clause: "208.4.3", Standing: FromMemory},
		Default:      "where the soil is not known well enough SD is taken, unless the authority or data say SE or SF",
		DefaultClass: "SD",

		Notes: []string{
			"760 and 360 m/s are read as printed in two types each; the softer is taken; N of 50 and su of 100 kPa are SD",
			"SA is strictly above 1500 and SE strictly below 180 m/s, so 1500 is SB and 180 is SD",
			"the whole table, the ground of SF and the bar on rock types are from memory; that the type comes from the average of field N over an expected 30 m has one source",
		},
		Short:      "penetration tests are expected to 30 m; what holds above that was not seen",
		Correlated: "the table has columns for N and su where the velocity was not measured",
	}
}

package siteclass

import "shearbook/profile"

// sni1726_2019 returns the Indonesian standard SNI 1726:2019, clauses 5.1 to
// 5.4.
func sni1726_2019() *Code {
	return &Code{
		ID:        "sni-1726-2019",
		Title:     "Tata cara perencanaan ketahanan gempa untuk struktur bangunan gedung dan nongedung",
		Edition:   "SNI 1726:2019",
		Region:    "Indonesia",
		Clause:    "5.1 to 5.4",
		Table:     "Table 5",
		Source:    "SNI 1726:2012 pp. 18 and 21 (BSN), whose Table 3 the 2019 edition keeps, and thesis reprints; rules of the text from SNI 1726:2019",
		Parameter: "v̄s",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Class, name, v̄s (m/s), N̄ or N̄ch, s̄u (kPa)
		Bands: []Band{
			{Class: "SA", Name: "hard rock", Vs: above(1500), Standing: Checked},
			{Class: "SB", Name: "rock", Vs: dash(750, 1500), Standing: Checked},
			{Class: "SC", Name: "very dense hard soil and soft rock", Vs: dash(350, 750), N: above(50), Su: atLeast(100), Standing: Checked},
			{Class: "SD", Name: "medium soil", Vs: dash(175, 350), N: dash(15, 50), Su: dash(50, 100), Standing: Checked},
			{Class: "SE", Name: "soft soil", Vs: below(175), N: below(15), Su: below(50), Also: "or more than 3 m of soft clay", Standing: Checked},
			{Class: "SF", Name: "special soil", Also: "site-specific", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: Sensitive,
				Text: "highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: Collapsible,
				Text: "weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: Peat,
				Text:   "peat or highly organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 7.5 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(7.5), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "SF", Clause: "Table 5, SF", Standing: Checked, Fact: ThickClay,
				Text: "soft to medium clay of s̄u < 50 kPa more than 35 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(35), Unit: profile.Metre},
					{Property: Strength, Range: below(50), Unit: profile.Kilopascal}}},
			{ID: "soft-clay", Kind: Softer, Class: "SE", Clause: "Table 5, SE", Standing: Checked, Fact: SoftClay,
				Text: "more than 3 m of soft clay: PI > 20, w ≥ 40 % and s̄u < 25 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(25), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "5.3", Standing: Checked, Fact: StiffGround,
				Text:   "more than 3 m of soil between the base of the footing or raft and the rock bars classes SA and SB",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"SA", "SB"}, FromFoundation: true},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "5.1", Standing: Checked},
			{Name: "N", Measures: []Measure{AverageN}, Rank: 1, Clause: "5.1", Standing: Checked},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 1, Clause: "5.1", Standing: Checked},
		},
		Needs:        2,
		Averaging:    Averaging{N: "N̄", Nch: "N̄ch", Su: "s̄u", Blow: BlowField, Clause: "5.4", Standing: OneSource},
		Default:      "where the properties of the soil are not known well enough SE is taken, unless the authority or data say otherwise",
		DefaultClass: "SE",

		Notes: []string{
			"at least two of the three parameters are to be measured independently, and the worse class governs; with one alone the properties count as not known well enough",
			"750 and 350 m/s are printed in two classes each and the softer is taken; SA is strictly above 1500 and SE strictly below 175 m/s, so 1500 is SB and 175 is SD",
			"s̄u of 100 kPa is in SC and SD as printed; the softer, SD, is taken",
			"the table is that of the 2012 edition, of which three printings agree, and is taken to stand unchanged in 2019",
			"where there are no data down to 30 m a certified geotechnical engineer estimates them",
			"SB needs a measurement or a competent estimate, and soft or fractured rock that was not measured is SC; SA needs a measurement, which may be extended down where hard rock is known to 30 m (2012 edition, one source)",
			"liquefiable ground under buildings of a period of 0.5 s or less may be classed without a site response analysis (2012 edition, one source)",
		},
		Short:      "where there are no data down to 30 m a certified geotechnical engineer estimates them",
		Correlated: "the text asks for parameters measured independently of each other",
	}
}

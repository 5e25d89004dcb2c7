package siteclass

import "shearbook/profile"

// megapascal is the unit in which DS 61 prints strengths.
var megapascal = profile.Unit{Name: "MPa", Dimension: profile.Stress, Factor: 1000}

// ds61 returns the Chilean decree DS 61 of 2011, articles 4 to 7, which asks
// for the velocity and for the strength of the ground.
func ds61() *Code {
	return &Code{
		ID:        "ds61-2011",
		Title:     "Reglamento que fija el diseño sísmico de edificios",
		Edition:   "DS 61 (V. y U.) of 2011, Diario Oficial of 13 December 2011, with NCh433.Of1996 Mod.2009",
		Region:    "Chile",
		Clause:    "arts. 4 to 7",
		Table:     "table of the types of soil",
		Source:    "DS 61 (V. y U.) of 2 November 2011, arts. 4 to 7; Diaz-Segura, Applied Sciences 11(22):10754, 2021",
		Parameter: "Vs30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "below the natural ground surface, or to rock if that is shallower; with basements down to 15 m below the foundation if that is deeper than 30 m",
		Unit:      profile.MetrePerSecond,
		SuUnit:    megapascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Type, name, Vs30 (m/s), N1 (blows/0.3 m), Su (MPa)
		Bands: []Band{
			{Class: "A", Name: "rock, cemented soil", Vs: atLeast(900), Also: "RQD ≥ 50 % and qu ≥ 10 MPa", Standing: Checked},
			{Class: "B", Name: "soft or fractured rock, very dense or firm soil", Vs: atLeast(500).to(below(900)), N: atLeast(50),
				Also: "fine soil by qu ≥ 0.40 MPa", Standing: Checked},
			{Class: "C", Name: "dense or firm soil", Vs: atLeast(350).to(below(500)), N: atLeast(40).to(below(50)),
				Also: "fine soil by qu ≥ 0.30 MPa", Standing: Checked},
			{Class: "D", Name: "medium dense or firm soil", Vs: atLeast(180).to(below(350)), N: atLeast(30).to(below(40)), Su: atLeast(0.05), Standing: Checked},
			{Class: "E", Name: "soil of medium compactness or consistency", Vs: below(180), N: atLeast(20).to(below(30)), Su: below(0.05), Standing: Checked},
			{Class: "F", Name: "special soil, which needs a study of its own", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil: saturated sand or silt of N1 < 20"},
			{ID: "sensitive-clay", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: Sensitive,
				Text: "fine soil of a sensitivity above 10"},
			{ID: "collapsible-soil", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: Collapsible,
				Text: "collapsible soil"},
			{ID: "densifiable-soil", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: Described,
				Text: "soil that vibration makes denser"},
			{ID: "peat", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: Peat,
				Text:   "organic soil, more than 0 m of it",
				Limits: []Criterion{{Property: Thickness, Range: above(0), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F", Clause: "arts. 4 to 7", Standing: Checked, Fact: HighPlasticity,
				Text: "saturated fine soil of a liquid limit > 80 more than 20 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(20), Unit: profile.Metre},
					{Property: LiquidLimit, Range: above(80), Unit: bare}}},
		},

		Routes: []Route{
			{Name: "velocity and strength", Measures: []Measure{AverageVs, AverageNch, AverageSu}, Rank: 1, Clause: "arts. 4 to 7", Standing: Checked, decide: ds61ByBoth},
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 2, Clause: "arts. 4 to 7", Standing: Checked},
			{Name: "N", Measures: []Measure{AverageNch}, Rank: 3, Clause: "arts. 4 to 7", Standing: Checked, decide: ds61BySand},
		},
		Averaging: Averaging{
			N: "N1", Nch: "N1", Su: "Su", Blow: BlowN1,
			Clause: "arts. 4 to 7", Standing: Checked,
		},
		Default: "buildings of categories III and IV of less than 500 m², of at most two storeys and 8 m, may go without a velocity, with type E",
		Several: "of two surface-wave lines, at right angles if possible, the worse profile governs",
		WorstOf: true,

		Notes: []string{
			"the table prints the lower bounds alone; each row ends where the one above it begins",
			"each type asks for its velocity and for its strength, and where they differ the less favourable type is taken; a layer's N1 (sand) or Su (fine soil) is held against the table, the weakest deciding, for no average is printed",
			"fine soil of types B and C is asked for qu (at a strain of 2 % or less), which is not read here: by Su it is at best D",
			"by a velocity alone that nowhere falls with depth the type is one lower: C above 500 m/s, D above 350, E above 180, each strictly; where the velocity falls with depth there is no such rule, and E is taken; at 180 m/s and below F",
			"type A asks for five measurements of RQD and qu, but not where all of the upper 15 m is faster than 900 m/s; a building founded wholly on such rock is A whatever lies above",
			"sand of N1 ≥ 30 in every metre of 30 m, with at most 5 m in all of N1 from 20 to 29, is D without a velocity; 30 m of fluvial gravel are B without one, which no profile can tell",
			"N1 is normalised to an overburden of 0.1 MPa and is for sand alone",
			"no velocity may be estimated from P waves; surface-wave surveys need an active source beside the passive",
		},
		Short:      "the average may end in rock above 30 m; otherwise the decree wants the whole depth",
		Correlated: "the decree wants velocities measured down a hole, across holes, by suspension or by surface waves",
		Superseded: "DS 61 is in force until NCh433:2026 replaces it about 10 February 2027 (D.Ex. 28 MINVU, Diario Oficial of 10 August 2026; one source)",
		decide:     ds61ByVelocity,
	}
}

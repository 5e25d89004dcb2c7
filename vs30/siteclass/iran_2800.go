package siteclass

import "shearbook/profile"

// iran2800 returns the Iranian Standard No. 2800, 4th edition, the ground
// types.
func iran2800() *Code {
	return &Code{
		ID:        "iran-2800",
		Title:     "Iranian code of practice for seismic resistant design of buildings, Standard No. 2800",
		Edition:   "Standard No. 2800, 4th edition (2014)",
		Region:    "Iran",
		Clause:    "ground types",
		Table:     "table of ground types",
		Source:    "Standard No. 2800, 4th edition: the bound of type I and the 30 m from two sources, type III from a practitioner's note, the rest from memory",
		Parameter: "V̄s30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Type, name, V̄s30 (m/s), N1(60), cu (kPa)
		Bands: []Band{
			{Class: "I", Name: "rock and rock-like ground", Vs: above(750), Also: "at most 5 m of weaker cover", Standing: Checked},
			{Class: "II", Name: "weak rock, very dense or very stiff soil", Vs: dash(375, 750), N: above(50), Su: above(250), Standing: FromMemory},
			{Class: "III", Name: "dense to medium dense or stiff soil", Vs: dash(175, 375), N: dash(15, 50), Su: dash(70, 250), Standing: OneSource},
			{Class: "IV", Name: "loose to medium or soft soil", Vs: below(175), N: below(15), Su: below(70), Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "rock-cover", Kind: Barred, Clause: "table of ground types", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 5 m of weaker cover bars type I",
				Limits: []Criterion{{Property: CoverThickness, Range: above(5), Unit: profile.Metre}},
				Bars:   []string{"I"}},
		},

		Routes: []Route{
			{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: "ground types", Standing: Checked},
			{Name: "N", Measures: []Measure{AverageN}, Rank: 2, Clause: "ground types", Standing: OneSource},
			{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 2, Clause: "ground types", Standing: FromMemory},
		},
		Averaging: Averaging{N: "N1(60)", Nch: "N1(60)", Su: "cu", Blow: BlowN1, Clause: "ground types", Standing: FromMemory, Unstated: true},

		Notes: []string{
			"type I is above 750 m/s; whether 375 and 175 m/s belong to the stiffer or the softer type was not verified: 375 is taken as printed in both and goes to III, 175 to III as IV is read as below 175",
			"the average is over 30 m below the ground surface; N may carry the estimate where the velocity is not known",
			"which type follows where I is barred is not printed here",
		},
		Short:      "the standard was not seen to speak of profiles that end above 30 m",
		Correlated: "N may carry the estimate of the velocity (one source)",
	}
}

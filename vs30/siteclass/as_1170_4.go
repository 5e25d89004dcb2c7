package siteclass

import "shearbook/profile"

// as1170_4 returns AS 1170.4-2007, the Australian earthquake actions,
// section 4.
func as1170_4() *Code {
	return &Code{
		ID:        "as-1170.4",
		Title:     "Structural design actions – Part 4: Earthquake actions in Australia",
		Edition:   "AS 1170.4-2007",
		Region:    "Australia",
		Clause:    "4.1 to 4.3",
		Table:     "clause 4.2",
		Source:    "AS 1170.4-2007 clauses 4.1 to 4.3 and Table 4.1, from memory",
		Parameter: "Vs,30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Class, ground
		Bands: []Band{
			{Class: "Ae", Name: "strong rock", Also: "UCS > 50 MPa or Vs,30 > 1500 m/s; nothing below of UCS < 18 MPa or Vs < 600 m/s", Standing: FromMemory},
			{Class: "Be", Name: "rock", Also: "UCS of 1 – 50 MPa or Vs,30 > 360 m/s; nothing below of UCS < 0.8 MPa or Vs < 300 m/s; at most 3 m of soil on it", Standing: FromMemory},
			{Class: "Ce", Name: "shallow soil", Also: "T ≤ 0.6 s, or depths within Table 4.1", Standing: FromMemory},
			{Class: "De", Name: "deep or soft soil", Also: "T > 0.6 s, or depths beyond Table 4.1, or up to 10 m of su < 12.5 kPa or N < 6", Standing: FromMemory},
			{Class: "Ee", Name: "very soft soil", Also: "more than 10 m of su < 12.5 kPa, N < 6 or Vs ≤ 150 m/s, also together", Standing: FromMemory},
		},

		Rules: append([]Rule{
			{Class: "Ee", Asks: []Ask{{verySoft, above(10), profile.Metre}}, Standing: FromMemory},
			{Class: "Ae", Asks: []Ask{
				{vs30Asked, above(1500), profile.MetrePerSecond},
				{soilOnRock, atMost(0), profile.Metre},
				{underlying, atLeast(600), profile.MetrePerSecond}}, Standing: FromMemory},
			{Class: "Be", Asks: []Ask{
				{vs30Asked, above(360), profile.MetrePerSecond},
				{soilOnRock, atMost(3), profile.Metre},
				{underlying, atLeast(300), profile.MetrePerSecond}}, Standing: FromMemory},
			{Class: "De", Asks: []Ask{{weakSoil, above(0), profile.Metre}}, Standing: FromMemory},
			{Class: "Ce", Asks: []Ask{{sitePeriod, atMost(0.6), second}}, Standing: FromMemory},
			{Class: "De", Asks: []Ask{{sitePeriod, above(0.6), second}}, Standing: FromMemory},
		}, depthRows("De", "Table 4.1")...),

		Terms: []Term{
			{ID: "rock", Text: "rock of Vs > 360 m/s", Range: above(360), Unit: profile.MetrePerSecond, Clause: "clause 4.2", Standing: FromMemory},
			{ID: "very-soft-vs", Text: "very soft soil of Vs ≤ 150 m/s", Range: atMost(150), Unit: profile.MetrePerSecond, Clause: "clause 4.2", Standing: FromMemory},
			{ID: "very-soft-su", Text: "very soft soil of su < 12.5 kPa", Range: below(12.5), Unit: profile.Kilopascal, Clause: "clause 4.2", Standing: FromMemory},
			{ID: "very-soft-n", Text: "very soft soil of N < 6", Range: below(6), Unit: blows, Clause: "clause 4.2", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "soft-clay", Kind: Softer, Class: "Ee", Clause: "clause 4.2", Standing: FromMemory, Fact: SoftClay,
				Text: "more than 10 m of soil of su < 12.5 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.Metre},
					{Property: Strength, Range: below(12.5), Unit: profile.Kilopascal}}},
			{ID: "rock-strength", Kind: Barred, Clause: "clause 4.2", Standing: FromMemory, Fact: Described,
				Text: "rock weaker than UCS of 18 MPa below Ae, or than 0.8 MPa below Be",
				Bars: []string{"Ae", "Be"}},
		},

		Notes: []string{
			"strength or Vs,30 makes rock; here the velocity does, and the strength of what lies below is not assessed",
			"T is four times the travel time from the surface to rock, taken as ground faster than 360 m/s down to the end of the profile",
			"class Ae says nothing of soil on the rock where Be allows 3 m; rock under any soil is taken as Be at best",
			"Ce asks for T ≤ 0.6 s or depths within Table 4.1, De for T > 0.6 s or depths beyond it, so a site may be both; the period decides, and a note says where the depth limits differ",
			"Table 4.1 limits the depth of cohesive soil by su, of cohesionless soil by N, and of gravel of N > 30; it has no rule here for layers of several rows",
			"T of exactly 0.6 s is Ce and Vs of exactly 150 m/s counts as very soft",
		},
		Short:      "what the code says of profiles that end above 30 m was not seen",
		Correlated: "what the code says of velocities that were not measured was not seen",
		decide:     decideSubsoil,
	}
}

package siteclass

import "shearbook/profile"

// nzs1170_5 returns NZS 1170.5:2004, the New Zealand earthquake actions,
// clause 3.1.3.
func nzs1170_5() *Code {
	return &Code{
		ID:        "nzs-1170.5",
		Title:     "Structural design actions – Part 5: Earthquake actions – New Zealand",
		Edition:   "NZS 1170.5:2004",
		Region:    "New Zealand",
		Clause:    "3.1.3",
		Table:     "clause 3.1.3",
		Source:    "NZS 1170.5:2004 clause 3.1.3 and Table 3.2, from memory; Larkin and Van Houtte, Bull. NZSEE 47(1), 2014; New Zealand Geotechnical Society, site subsoil class determinations in Tauranga",
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
			{Class: "A", Name: "strong rock", Also: "UCS > 50 MPa and Vs,30 > 1500 m/s; nothing below of UCS < 18 MPa or Vs < 600 m/s", Standing: FromMemory},
			{Class: "B", Name: "rock", Also: "UCS of 1 – 50 MPa and Vs,30 > 360 m/s; nothing below of UCS < 0.8 MPa or Vs < 300 m/s; at most 3 m of soil or weathered rock on it", Standing: FromMemory},
			{Class: "C", Name: "shallow soil", Also: "T ≤ 0.6 s, or depths within Table 3.2", Standing: FromMemory},
			{Class: "D", Name: "deep or soft soil", Also: "T > 0.6 s, or depths beyond Table 3.2, or up to 10 m of su < 12.5 kPa or N < 6", Standing: FromMemory},
			{Class: "E", Name: "very soft soil", Also: "more than 10 m of su < 12.5 kPa, N < 6 or Vs < 150 m/s, also together", Standing: FromMemory},
		},

		Rules: append([]Rule{
			{Class: "E", Asks: []Ask{{verySoft, above(10), profile.Metre}}, Standing: OneSource},
			{Class: "A", Asks: []Ask{
				{vs30Asked, above(1500), profile.MetrePerSecond},
				{soilOnRock, atMost(0), profile.Metre},
				{underlying, atLeast(600), profile.MetrePerSecond}}, Standing: FromMemory},
			{Class: "B", Asks: []Ask{
				{vs30Asked, above(360), profile.MetrePerSecond},
				{soilOnRock, atMost(3), profile.Metre},
				{underlying, atLeast(300), profile.MetrePerSecond}}, Standing: FromMemory},
			{Class: "D", Asks: []Ask{{weakSoil, above(0), profile.Metre}}, Standing: FromMemory},
			{Class: "C", Asks: []Ask{{sitePeriod, atMost(0.6), second}}, Standing: Checked},
			{Class: "D", Asks: []Ask{{sitePeriod, above(0.6), second}}, Standing: Checked},
		}, depthRows("D", "Table 3.2")...),

		Terms: []Term{
			{ID: "rock", Text: "rock of Vs > 360 m/s", Range: above(360), Unit: profile.MetrePerSecond, Clause: "clause 3.1.3", Standing: FromMemory},
			{ID: "very-soft-vs", Text: "very soft soil of Vs < 150 m/s", Range: below(150), Unit: profile.MetrePerSecond, Clause: "clause 3.1.3", Standing: OneSource},
			{ID: "very-soft-su", Text: "very soft soil of su < 12.5 kPa", Range: below(12.5), Unit: profile.Kilopascal, Clause: "clause 3.1.3", Standing: FromMemory},
			{ID: "very-soft-n", Text: "very soft soil of N < 6", Range: below(6), Unit: blows, Clause: "clause 3.1.3", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "clause 3.1.3", Standing: FromMemory, Fact: SoftClay,
				Text: "more than 10 m of soil of su < 12.5 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.Metre},
					{Property: Strength, Range: below(12.5), Unit: profile.Kilopascal}}},
			{ID: "rock-strength", Kind: Barred, Clause: "clause 3.1.3", Standing: FromMemory, Fact: Described,
				Text: "rock of UCS not above 50 MPa (class A) or below 1 MPa (class B), or weaker than 18 MPa (A) or 0.8 MPa (B) below",
				Bars: []string{"A", "B"}},
		},

		Notes: []string{
			"classes A and B ask for strength and velocity together, where AS 1170.4 takes either; the strength of the rock is not assessed here",
			"T is four times the travel time from the surface to rock, taken as ground faster than 360 m/s down to the end of the profile",
			"for layered ground the period by summed travel times (3.1.3.7) is judged unconservative by Larkin and Van Houtte (2014)",
			"class A says nothing of soil on the rock where B allows 3 m; rock under any soil is taken as B at best",
			"C asks for T ≤ 0.6 s or depths within Table 3.2, D for T > 0.6 s or depths beyond it, so a site may be both; the period decides, and a note says where the depth limits differ",
			"Table 3.2 limits the depth of cohesive soil by su, of cohesionless soil by N, and of gravel of N > 30; it has no rule here for layers of several rows",
			"T of exactly 0.6 s is C and Vs of exactly 150 m/s is not very soft",
		},
		Short:      "what the code says of profiles that end above 30 m was not seen",
		Correlated: "what the code says of velocities that were not measured was not seen",
		decide:     decideSubsoil,
	}
}

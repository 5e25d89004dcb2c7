package siteclass

import "shearbook/profile"

// ksf is a thousand pounds a square foot.
var ksf = profile.KipPerSquareF

// aashto2011 returns the AASHTO specifications for bridges from the 2008
// interims of the LRFD specifications to their 9th edition, and the guide
// specifications of 2011.
func aashto2011() *Code {
	return &Code{
		ID:        "aashto-2011",
		Title:     "AASHTO Guide Specifications for LRFD Seismic Bridge Design; AASHTO LRFD Bridge Design Specifications",
		Edition:   "AASHTO guide specifications, 2nd ed. (2011); LRFD specifications, 2008 interims to 9th ed.",
		Region:    "United States, bridges",
		Clause:    "3.4.2.1; 3.10.3.1",
		Table:     "Table 3.4.2.1-1",
		Source:    "AASHTO guide specifications 3.4.2.1, from memory; Illinois DOT AGMU 09.1 for the three methods and the 100 ft",
		Parameter: "v̄s",
		Depth:     100 * profile.Foot,
		DepthText: "100 ft",
		Datum:     DatumUnstated,
		DatumNote: "the upper 100 ft; from where is not known here",
		Unit:      profile.FootPerSecond,
		SuUnit:    ksf,
		Length:    profile.FootUnit,
		Standing:  FromMemory,

		//  Class, name, v̄s (ft/s), N̄ (blows/ft), s̄u (ksf)
		Bands: []Band{
			{Class: "A", Name: "hard rock", Vs: above(5000), Standing: FromMemory},
			{Class: "B", Name: "rock", Vs: above(2500).to(below(5000)), Standing: FromMemory},
			{Class: "C", Name: "very dense soil and soft rock", Vs: above(1200).to(below(2500)), N: above(50), Su: above(2), Standing: FromMemory},
			{Class: "D", Name: "stiff soil", Vs: above(600).to(below(1200)), N: above(15).to(below(50)), Su: above(1).to(below(2)), Standing: FromMemory},
			{Class: "E", Name: "soft soil", Vs: below(600), N: below(15), Su: below(1), Also: "or more than 10 ft of soft clay", Standing: FromMemory},
			{Class: "F", Name: "ground that needs a site-specific study", Standing: FromMemory},
		},

		Conditions: []Condition{
			{ID: "peat", Kind: Special, Class: "F", Clause: "Table 3.4.2.1-1", Standing: FromMemory, Fact: Peat,
				Text:   "peat or highly organic clay more than 10 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(10), Unit: profile.FootUnit}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "F", Clause: "Table 3.4.2.1-1", Standing: FromMemory, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 25 ft thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(25), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "F", Clause: "Table 3.4.2.1-1", Standing: FromMemory, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 120 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(120), Unit: profile.FootUnit}}},
			{ID: "soft-clay", Kind: Softer, Class: "E", Clause: "Table 3.4.2.1-1", Standing: FromMemory, Fact: SoftClay,
				Text: "more than 10 ft of soft clay: PI > 20, w ≥ 40 % and su < 0.5 ksf",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(0.5), Unit: ksf}}},
		},

		Routes: threeWays("3.4.2", OneSource),
		Averaging: Averaging{
			N: "N̄", Nch: "N̄ch", Su: "s̄u",
			Blow: BlowField, NCap: 100, SuCap: 5,
			Cohesive: above(20), Cohesionless: below(20),
			Clause: "3.4.2", Standing: FromMemory,
		},
		Default: "the soil is to be investigated; E or F need not be assumed unless the authority says so (from memory)",

		Notes: []string{
			"B, C and D are printed with a strict sign on both sides, so 5,000, 2,500, 1,200 and 600 ft/s, and likewise 50 and 15 blows and 2 and 1 ksf, are in no class; the softer is taken",
			"the three methods are by v̄s, by N̄, and by N̄ch with s̄u; of the last two the softer class is taken here",
			"liquefiable soil is not in the row of class F; it has rules of its own elsewhere",
			"whether A or B may stand on more than 10 ft of soil, as the NEHRP provisions do not allow, is not known here; nothing is barred",
		},
		Short:      "what the specifications say of data that end above 100 ft is not known here",
		Correlated: "the specifications' own way from penetration or strength is the N̄ and s̄u columns",
	}
}

package siteclass

import "shearbook/profile"

// ubc97 returns the Uniform Building Code of 1997, sections 1629.3 and 1636.
func ubc97() *Code {
	return &Code{
		ID:        "ubc-97",
		Title:     "Uniform Building Code",
		Edition:   "UBC 1997, Volume 2",
		Region:    "United States until 2000; codes that follow it elsewhere",
		Clause:    "1629.3, 1636",
		Table:     "Table 16-J",
		Source:    "UBC-97 Table 16-J, as reprinted in Day, Geotechnical Earthquake Engineering Handbook, Table 11.1",
		Parameter: "v̄s",
		Depth:     100 * profile.Foot,
		DepthText: "100 ft",
		Datum:     DatumUnstated,
		DatumNote: "the upper 100 ft of the soil profile",
		Unit:      profile.FootPerSecond,
		SuUnit:    profile.PoundPerSquareF,
		Length:    profile.FootUnit,
		Standing:  OneSource,

		//  Type, name, v̄s (ft/s), N̄ (blows/ft), s̄u (psf)
		Bands: []Band{
			{Class: "SA", Name: "hard rock", Vs: above(5000), Standing: OneSource},
			{Class: "SB", Name: "rock", Vs: dash(2500, 5000), Standing: OneSource},
			{Class: "SC", Name: "very dense soil and soft rock", Vs: dash(1200, 2500), N: above(50), Su: above(2000), Standing: OneSource},
			{Class: "SD", Name: "stiff soil", Vs: dash(600, 1200), N: dash(15, 50), Su: dash(1000, 2000), Standing: OneSource},
			{Class: "SE", Name: "soft soil", Vs: below(600), N: below(15), Su: below(1000), Also: "or more than 10 ft of soft clay", Standing: OneSource},
			{Class: "SF", Name: "soil that needs a site-specific evaluation", Also: "see 1629.3", Standing: OneSource},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: Sensitive,
				Text: "quick or highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: Peat,
				Text:   "peat or highly organic clay more than 10 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(10), Unit: profile.FootUnit}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 25 ft thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(25), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "SF", Clause: "1629.3", Standing: OneSource, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 120 ft thick",
				Limits: []Criterion{{Property: Thickness, Range: above(120), Unit: profile.FootUnit}}},
			{ID: "soft-clay", Kind: Softer, Class: "SE", Clause: "Table 16-J", Standing: OneSource, Fact: SoftClay,
				Text: "more than 10 ft of soft clay: PI > 20, w ≥ 40 % and su < 500 psf",
				Limits: []Criterion{
					{Property: Thickness, Range: above(10), Unit: profile.FootUnit},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: atLeast(40), Unit: percent},
					{Property: Strength, Range: below(500), Unit: profile.PoundPerSquareF}}},
			{ID: "rock-cover", Kind: Barred, Clause: "1636", Standing: FromMemory, Fact: StiffGround,
				Text:   "more than 10 ft of soil between the rock and the bottom of the footing or mat bars types SA and SB",
				Limits: []Criterion{{Property: CoverThickness, Range: above(10), Unit: profile.FootUnit}},
				Bars:   []string{"SA", "SB"}, FromFoundation: true},
		},

		Routes: threeWays("1636", FromMemory),
		Averaging: Averaging{
			N: "N̄", Nch: "N̄CH", Su: "s̄u",
			Blow: BlowField, NCap: 100, SuCap: 5000,
			Cohesive: above(20), Cohesionless: below(20),
			Clause: "1636", Standing: FromMemory,
		},
		Default:      "type SD; SE and SF need not be assumed unless the authority or the ground says so (from memory)",
		DefaultClass: "SD",

		Notes: []string{
			"at 2,500 and at 1,200 ft/s two printed ranges meet and neither is said to own the value; the softer type is taken",
			"SA is strictly above 5,000 ft/s and SE strictly below 600 ft/s, so 5,000 is SB and 600 is SD",
			"the metric values are printed beside those in feet and are no conversions of them: 1,500, 760, 360 and 180 m/s",
			"N is as measured; a reprint that heads its column (N1)60 is not the code",
			"of N̄ and of N̄CH with s̄u the softer class is taken here",
			"which type follows where SA or SB is barred is not printed",
		},
		Short:      "what the code says of data that end above 100 ft is not known here",
		Correlated: "the code's own way from penetration or strength is the N̄ and s̄u columns",
		Twin: Twin{Unit: profile.MetrePerSecond, Bounds: []float64{1500, 760, 360, 180},
			Source: "the same table, in parentheses"},
	}
}

package siteclass

import "shearbook/profile"

// tbdy2018 returns the Turkish building earthquake code of 2018, section
// 16.4.
func tbdy2018() *Code {
	return &Code{
		ID:        "tbdy-2018",
		Title:     "Türkiye Bina Deprem Yönetmeliği",
		Edition:   "TBDY 2018, Official Gazette of 18 March 2018, in force from 1 January 2019",
		Region:    "Türkiye",
		Clause:    "16.4",
		Table:     "Table 16.1",
		Source:    "TBDY 2018 sections 2 and 16; AFAD hazard-map report (2021), which reprints Table 16.1",
		Parameter: "(VS)30",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumFoundation,
		DatumNote: "downward from the underside of the foundation or of the pile cap (16.4.2)",
		Unit:      profile.MetrePerSecond,
		SuUnit:    profile.Kilopascal,
		Length:    profile.Metre,
		Standing:  Checked,

		//  Class, name, (VS)30 (m/s), (N60)30, (cu)30 (kPa)
		Bands: []Band{
			{Class: "ZA", Name: "sound, hard rock", Vs: above(1500), Standing: Checked},
			{Class: "ZB", Name: "slightly weathered, moderately strong rock", Vs: dash(760, 1500), Standing: Checked},
			{Class: "ZC", Name: "very dense sand and gravel, hard clay, weathered weak rock", Vs: dash(360, 760), N: above(50), Su: above(250), Standing: Checked},
			{Class: "ZD", Name: "medium dense to dense sand and gravel, very stiff clay", Vs: dash(180, 360), N: dash(15, 50), Su: dash(70, 250), Standing: Checked},
			{Class: "ZE", Name: "loose sand and gravel, soft to stiff clay", Vs: below(180), N: below(15), Su: below(70), Also: "or more than 3 m of soft clay", Standing: Checked},
			{Class: "ZF", Name: "ground that needs a site-specific study", Also: "site-specific (16.5)", Standing: Checked},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 1", Standing: Checked, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 1", Standing: Checked, Fact: Sensitive,
				Text: "highly sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 1", Standing: Checked, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 2", Standing: Checked, Fact: Peat,
				Text:   "peat or clay of high organic content more than 3 m thick in all",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 3", Standing: Checked, Fact: HighPlasticity,
				Text: "clay of PI > 50 more than 8 m thick in all",
				Limits: []Criterion{
					{Property: Thickness, Range: above(8), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(50), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "ZF", Clause: "Table 16.1, ZF item 4", Standing: Checked, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 35 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(35), Unit: profile.Metre}}},
			{ID: "soft-clay", Kind: Softer, Class: "ZE", Clause: "Table 16.1, ZE", Standing: Checked, Fact: SoftClay,
				Text: "more than 3 m in all of soft clay: PI > 20, w > 40 % and cu < 25 kPa",
				Limits: []Criterion{
					{Property: Thickness, Range: above(3), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(20), Unit: bare},
					{Property: WaterContent, Range: above(40), Unit: percent},
					{Property: Strength, Range: below(25), Unit: profile.Kilopascal}}},
			{ID: "rock-cover", Kind: Barred, Clause: "16.4.3", Standing: OneSource, Fact: StiffGround,
				Text:   "more than 3 m of soil between the base of a shallow foundation and the top of the rock bars classes ZA and ZB",
				Limits: []Criterion{{Property: CoverThickness, Range: above(3), Unit: profile.Metre}},
				Bars:   []string{"ZA", "ZB"}, FromFoundation: true},
		},

		Routes: threeWays("16.4", FromMemory),
		Averaging: Averaging{
			N: "(N60)30", Nch: "(N60)30", Su: "(cu)30", Blow: BlowN60,
			Clause: "Eq. (16.2)", Standing: OneSource,
		},

		Notes: []string{
			"at 760 and at 360 m/s two printed ranges meet and neither is said to own the value; the softer class is taken",
			"class ZA is strictly above 1500 m/s and class ZE strictly below 180 m/s, so 1500 is ZB and 180 is ZD",
			"the bar on ZA and ZB is written for shallow foundations; the kind of foundation is not asked here and the bar is applied",
			"the soft clay of ZE needs w > 40 %, where the NEHRP provisions have w ≥ 40 %",
			"(N60)30 and (cu)30 are harmonic averages; how they go together in mixed ground was not read: here (N60)30 over all layers stands beside (N60)30 over the sand and (cu)30 over the clay, and the softest class is taken",
			"which class follows where ZA or ZB is barred is not printed; there is no default class",
		},
		Short:      "the code says nothing of explorations that end above 30 m",
		Correlated: "the (VS)30 column is for velocities; the code's own way from penetration or strength is the (N60)30 and (cu)30 columns",
	}
}

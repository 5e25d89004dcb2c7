package siteclass

import "shearbook/profile"

// kds41_17 returns the Korean seismic design standard for buildings, KDS 41
// 17 00, clause 4.1, which takes the ground classes of KDS 17 10 00 and
// modifies them.
func kds41_17() *Code {
	return &Code{
		ID:        "kds-41-17",
		Title:     "Seismic design of buildings",
		Edition:   "KDS 41 17 00:2022, with the ground classes of KDS 17 10 00",
		Region:    "Korea, buildings",
		Clause:    "4.1",
		Table:     "KDS 17 10 00, 4.2.1.2",
		Source:    "KDS 41 17 00:2022 chapter 4, read in full; the class limits: Cho, Manandhar and Kim, EESK Journal 20(4), 2016; J. Korean Geotech. Soc. 38(8), 2022, doi 10.7843/kgs.2022.38.8.53",
		Parameter: "Vs,soil",
		Depth:     30,
		DepthText: "soil, at most 30 m",
		Datum:     DatumGround,
		DatumNote: "the ground surface after completion of the building (4.1.3)",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Class, ground
		Bands: []Band{
			{Class: "S1", Name: "rock", Also: "H < 3 m (KDS 41 17 00), H < 1 m (KDS 17 10 00)", Standing: OneSource},
			{Class: "S2", Name: "shallow and stiff ground", Also: "1 ≤ H ≤ 20 m, Vs,soil ≥ 260 m/s", Standing: OneSource},
			{Class: "S3", Name: "shallow and soft ground", Also: "1 ≤ H ≤ 20 m, Vs,soil < 260 m/s", Standing: OneSource},
			{Class: "S4", Name: "deep and stiff ground", Also: "H > 20 m, Vs,soil ≥ 180 m/s", Standing: OneSource},
			{Class: "S5", Name: "deep and soft ground", Also: "H > 20 m, Vs,soil < 180 m/s; or Vs,soil ≤ 120 m/s", Standing: FromMemory},
			{Class: "S6", Name: "ground that needs a site-specific study", Standing: FromMemory},
		},

		//  Deep ground first, as its S5 rests on better than memory.
		Rules: []Rule{
			{Class: "S1", Asks: []Ask{bedrock(below(3))}, Clause: "4.1.1(1) item 1", Standing: OneSource},
			{Class: "S4", Asks: []Ask{bedrock(above(20)), vsSoil(atLeast(180))}, Standing: OneSource},
			{Class: "S5", Asks: []Ask{bedrock(above(20)), vsSoil(below(180))}, Standing: OneSource},
			{Class: "S5", Asks: []Ask{vsSoil(atMost(120))}, Standing: FromMemory},
			{Class: "S2", Asks: []Ask{bedrock(atLeast(1).to(atMost(20))), vsSoil(atLeast(260))}, Standing: OneSource},
			{Class: "S3", Asks: []Ask{bedrock(atLeast(1).to(atMost(20))), vsSoil(below(260))}, Standing: OneSource},
		},

		Terms: []Term{
			{ID: "bedrock", Text: "bedrock of Vs ≥ 760 m/s", Range: atLeast(760), Unit: profile.MetrePerSecond, Clause: "1.2", Standing: Checked},
			{ID: "deep-bedrock", Text: "where bedrock is deeper than 30 m the mean of the top 30 m may serve as Vs,soil", Range: atMost(30), Unit: profile.Metre, Clause: "4.1.1(1) item 2", Standing: OneSource},
			{ID: "table-s1", Text: "S1 by the table of KDS 17 10 00 alone, H < 1 m", Range: below(1), Unit: profile.Metre, Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory},
			{ID: "stiff-deep", Text: "H > 20 m with Vs,soil ≥ 360 m/s, for which Fv is multiplied by 0.80", Range: atLeast(360), Unit: profile.MetrePerSecond, Clause: "4.2.2(2)", Standing: OneSource},
		},

		Conditions: []Condition{
			{ID: "liquefiable-soil", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: Liquefiable,
				Text: "liquefiable soil"},
			{ID: "sensitive-clay", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: Sensitive,
				Text: "quick or very sensitive clay"},
			{ID: "collapsible-soil", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: Collapsible,
				Text: "collapsible, weakly cemented soil"},
			{ID: "peat", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: Peat,
				Text:   "peat or highly organic clay more than 3 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(3), Unit: profile.Metre}}},
			{ID: "high-plasticity-clay", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: HighPlasticity,
				Text: "clay of PI > 75 more than 7 m thick",
				Limits: []Criterion{
					{Property: Thickness, Range: above(7), Unit: profile.Metre},
					{Property: PlasticityIndex, Range: above(75), Unit: bare}}},
			{ID: "soft-to-medium-clay", Kind: Special, Class: "S6", Clause: "KDS 17 10 00, 4.2.1.2", Standing: FromMemory, Fact: ThickClay,
				Text:   "soft to medium stiff clay more than 36 m thick",
				Limits: []Criterion{{Property: Thickness, Range: above(36), Unit: profile.Metre}}},
		},

		Default:      "where the data are not enough and S5 cannot be, S4 may be used (4.1.1(1) item 3)",
		DefaultClass: "S4",
		Several:      "one representative factor is taken, the mean of the places or the worst; on a steep slope the worst (4.2.3)",

		Notes: []string{
			"H is the depth of the bedrock, Vs,soil the travel-time mean of the soil above it alone",
			"20 m is shallow, 260 m/s is S2 and 180 m/s is S4",
			"KDS 41 17 00 lets bedrock shallower than 3 m be treated as S1, and that is done here; the table of KDS 17 10 00 has 1 m (from memory), and a note says where the two differ",
			"Vs,soil ≤ 120 m/s makes S5 whatever the depth, and the kinds of ground of S6, are from memory",
			"KDS 17 10 00 is remembered to put ground whose bedrock is deeper than 50 m into S6 as well; that is not applied here",
			"large buildings, slopes and uneven ground need at least three places explored (4.1.2)",
		},
		Short:      "where the data are not enough and S5 cannot be, the code lets S4 be used",
		Correlated: "the clause asks for the mean shear-wave velocity and was not seen to speak of correlated ones",
		decide:     decideKDS,
	}
}

// bedrock and vsSoil write a limit the way the table prints it.
func bedrock(r Range) Ask { return Ask{"H", r, profile.Metre} }
func vsSoil(r Range) Ask  { return Ask{"Vs,soil", r, profile.MetrePerSecond} }

// decideKDS finds the bedrock, averages the soil above it or the top 30 m,
// and reads the table by both.
func decideKDS(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	term := c.term("bedrock")
	rock := r.groundAbove(term)
	if err := r.averageAbove(rock, c.term("deep-bedrock").upper()); err != nil {
		return Decision{}, err
	}
	found := []Found{r.depthOf(rock, "H", "depth of the bedrock, H"), r.averageOf("Vs,soil")}
	r.alone("Vs,soil", found)
	r.ground()
	if class := r.byRules(found); !r.settled() {
		r.d.Class = class
		r.kdsNotes(found)
		r.notReached(found, term.Text)
		r.nearRules(found)
	}
	return r.finish(), nil
}

// kdsNotes says where KDS 17 10 00 alone would give another class, and where
// the code modifies the factors of the class.
func (r *ruling) kdsNotes(found []Found) {
	h, c := &found[0], r.code
	if s1 := c.term("table-s1"); r.d.Class == "S1" && !s1.Range.Contains(h.Value) {
		other := "S3"
		if c.ruled([]Found{{Of: "H", Value: 20}, found[1]}) == "S2" {
			other = "S2"
		}
		r.note("table-alone", "bedrock at %s, less than 3 m, may be treated as S1 (4.1.1(1) item 1); by the table of KDS 17 10 00 alone, whose S1 ends at 1 m (from memory), the class would be %s",
			r.length(h.Value), other)
	}
	if stiff := c.term("stiff-deep"); r.d.Class == "S4" && stiff.Range.Contains(r.velocity) {
		r.note("fv-factor", "%s", stiff.Text+" ("+stiff.Clause+")")
	}
	if r.d.Class == "S5" && h.AtLeast {
		r.note("factor-unknown-bedrock", "for S5 with the depth of the bedrock not known Fa and Fv are multiplied by 1.10 (4.2.2(3))")
	}
}

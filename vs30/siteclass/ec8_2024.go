package siteclass

import "shearbook/profile"

// ec8_2024 returns EN 1998-1-1:2024, the second generation of Eurocode 8, the
// site categories.
func ec8_2024() *Code {
	return &Code{
		ID:        "ec8-2024",
		Title:     "Eurocode 8: Design of structures for earthquake resistance – Part 1-1: General rules and seismic action",
		Edition:   "EN 1998-1-1:2024",
		Region:    "Europe, once a country has brought it into force",
		Clause:    "site categories",
		Table:     "table of site categories",
		Source:    "EN 1998-1-1:2024, from memory; that depth of bedrock and velocity set the category, and that there is a category F: Paolucci et al., Bull. Earthq. Eng. 2021, doi 10.1007/s10518-021-01118-9",
		Parameter: "vs,H",
		Depth:     30,
		DepthText: "H, at most 30 m",
		Datum:     DatumUnstated,
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Category, ground
		Bands: []Band{
			{Class: "A", Name: "rock, or stiff ground no more than 5 m thick on it", Also: "vs,H ≥ 800 m/s; or ≥ 250 m/s with H800 ≤ 5 m", Standing: FromMemory},
			{Class: "B", Name: "stiff ground", Also: "400 ≤ vs,H < 800 m/s with H800 > 5 m", Standing: FromMemory},
			{Class: "C", Name: "medium ground of intermediate depth", Also: "250 ≤ vs,H < 400 m/s with 30 < H800 ≤ 100 m", Standing: FromMemory},
			{Class: "D", Name: "soft ground of intermediate depth", Also: "150 ≤ vs,H < 250 m/s with 30 < H800 ≤ 100 m", Standing: FromMemory},
			{Class: "E", Name: "shallow ground on rock", Also: "150 ≤ vs,H < 400 m/s with 5 < H800 ≤ 30 m; or < 250 m/s with H800 ≤ 5 m", Standing: FromMemory},
			{Class: "F", Name: "deep ground", Also: "150 ≤ vs,H < 400 m/s with H800 > 100 m", Standing: FromMemory},
		},
		Outside: "outside A–F",

		//  Row by row: very shallow, shallow, intermediate, deep; in each
		//  stiff, medium, soft.
		Rules: []Rule{
			{Class: "A", Asks: []Ask{vsH(atLeast(800))}, Standing: FromMemory},
			{Class: "A", Asks: []Ask{h800(atMost(5)), vsH(atLeast(400).to(below(800)))}, Standing: FromMemory},
			{Class: "A", Asks: []Ask{h800(atMost(5)), vsH(atLeast(250).to(below(400)))}, Standing: FromMemory},
			{Class: "E", Asks: []Ask{h800(atMost(5)), vsH(atLeast(150).to(below(250)))}, Standing: FromMemory},
			{Class: "B", Asks: []Ask{h800(above(5).to(atMost(30))), vsH(atLeast(400).to(below(800)))}, Standing: FromMemory},
			{Class: "E", Asks: []Ask{h800(above(5).to(atMost(30))), vsH(atLeast(250).to(below(400)))}, Standing: FromMemory},
			{Class: "E", Asks: []Ask{h800(above(5).to(atMost(30))), vsH(atLeast(150).to(below(250)))}, Standing: FromMemory},
			{Class: "B", Asks: []Ask{h800(above(30).to(atMost(100))), vsH(atLeast(400).to(below(800)))}, Standing: FromMemory},
			{Class: "C", Asks: []Ask{h800(above(30).to(atMost(100))), vsH(atLeast(250).to(below(400)))}, Standing: FromMemory},
			{Class: "D", Asks: []Ask{h800(above(30).to(atMost(100))), vsH(atLeast(150).to(below(250)))}, Standing: FromMemory},
			{Class: "B", Asks: []Ask{h800(above(100)), vsH(atLeast(400).to(below(800)))}, Standing: FromMemory},
			{Class: "F", Asks: []Ask{h800(above(100)), vsH(atLeast(250).to(below(400)))}, Standing: FromMemory},
			{Class: "F", Asks: []Ask{h800(above(100)), vsH(atLeast(150).to(below(250)))}, Standing: FromMemory},
		},

		Terms: []Term{
			{ID: "rock", Text: "ground of vs ≥ 800 m/s", Range: atLeast(800), Unit: profile.MetrePerSecond, Clause: "definition of H800", Standing: FromMemory},
			{ID: "depth", Text: "H is H800 where that is at most 30 m, and else 30 m", Range: atMost(30), Unit: profile.Metre, Clause: "definition of vs,H", Standing: FromMemory},
		},

		Notes: []string{
			"the whole table is from memory of papers on its drafts; two sources say that the category comes of the depth of the bedrock and of the velocity together, and one that deep soft ground is a category F of its own",
			"H800 is the depth of the ground of vs ≥ 800 m/s that is kept as far down as the profile goes; vs,H is averaged down to it, or over 30 m where it lies deeper",
			"vs,H below 150 m/s is in no category; the site is for a study of its own",
			"a profile that ends above rock tells H800 only to be more than its depth; the category is then that of the least H800 that agrees with it, and what a deeper rock would change is listed as not assessed",
			"the standard also has a scheme by the site's fundamental frequency, and guidance where one of the two parameters is not known; neither is carried here, nor are its factors",
		},
		Short:      "guidance for sites where vs,H or H800 is not known exists in the standard and is not carried here",
		Correlated: "what the standard says of velocities that were not measured was not seen",
		decide:     decideEC8_2024,
	}
}

// vsH and h800 write a limit the way the table's columns and rows are headed.
func vsH(r Range) Ask  { return Ask{"vs,H", r, profile.MetrePerSecond} }
func h800(r Range) Ask { return Ask{"H800", r, profile.Metre} }

// decideEC8_2024 finds the depth of the rock, averages down to it or over
// 30 m, and reads the table by both.
func decideEC8_2024(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	term := c.term("rock")
	rock := r.groundAbove(term)
	if err := r.averageAbove(rock, c.term("depth").upper()); err != nil {
		return Decision{}, err
	}
	found := []Found{r.depthOf(rock, "H800", "depth of the rock, H800"), r.averageOf("vs,H")}
	r.alone("vs,H", found)
	r.ground()
	r.d.Class = r.byRules(found)
	if r.d.Class == c.Outside {
		r.note("no-category", "%s at that depth is in no category of the %s; the site is for a study of its own", r.speed(r.velocity), c.Table)
	}
	r.notReached(found, term.Text)
	r.nearRules(found)
	return r.finish(), nil
}

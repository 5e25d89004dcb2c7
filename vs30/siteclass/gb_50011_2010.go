package siteclass

import "shearbook/profile"

// gb50011_2010 returns the Chinese code for seismic design of buildings,
// clauses 4.1.3 to 4.1.6.
func gb50011_2010() *Code {
	return &Code{
		ID:        "gb-50011-2010",
		Title:     "Code for seismic design of buildings",
		Edition:   "GB 50011-2010, 2016 edition",
		Region:    "China",
		Clause:    "4.1.4 to 4.1.6",
		Table:     "Table 4.1.6",
		Source:    "GB 50011-2010 (2016 edition) chapter 4; cells of Table 4.1.6 confirmed by published solutions of the registered engineers' examination",
		Parameter: "vse",
		Depth:     20,
		DepthText: "d0, at most 20 m",
		Datum:     DatumGround,
		DatumNote: "cut and fill change the class",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Class, ground
		Bands: []Band{
			{Class: "I0", Name: "rock", Also: "vs > 800 m/s and no cover", Standing: FromMemory},
			{Class: "I1", Name: "hard soil or soft rock, or thin cover", Also: "500 < vs ≤ 800 m/s and no cover; or cover < 5 m, < 3 m for vse ≤ 250 m/s", Standing: FromMemory},
			{Class: "II", Name: "medium ground", Also: "cover ≥ 5 m, or 3 – 50 m for vse ≤ 250 m/s, 3 – 15 m for vse ≤ 150 m/s", Standing: FromMemory},
			{Class: "III", Name: "soft or thick ground", Also: "cover > 50 m for 150 < vse ≤ 250 m/s, 15 – 80 m for vse ≤ 150 m/s", Standing: OneSource},
			{Class: "IV", Name: "soft and thick ground", Also: "cover > 80 m for vse ≤ 150 m/s", Standing: FromMemory},
		},

		//  Row by row, as printed.
		Rules: []Rule{
			{Class: "I0", Asks: []Ask{covered(atMost(0)), {"vs of the rock", above(800), profile.MetrePerSecond}}, Standing: FromMemory},
			{Class: "I1", Asks: []Ask{covered(atMost(0)), {"vs of the rock", above(500).to(atMost(800)), profile.MetrePerSecond}}, Standing: FromMemory},

			{Class: "I1", Asks: []Ask{vse(above(250).to(atMost(500))), covered(below(5))}, Standing: FromMemory},
			{Class: "II", Asks: []Ask{vse(above(250).to(atMost(500))), covered(atLeast(5))}, Standing: OneSource},

			{Class: "I1", Asks: []Ask{vse(above(150).to(atMost(250))), covered(below(3))}, Standing: FromMemory},
			{Class: "II", Asks: []Ask{vse(above(150).to(atMost(250))), covered(dash(3, 50))}, Standing: OneSource},
			{Class: "III", Asks: []Ask{vse(above(150).to(atMost(250))), covered(above(50))}, Standing: OneSource},

			{Class: "I1", Asks: []Ask{vse(atMost(150)), covered(below(3))}, Standing: FromMemory},
			{Class: "II", Asks: []Ask{vse(atMost(150)), covered(dash(3, 15))}, Standing: FromMemory},
			{Class: "III", Asks: []Ask{vse(atMost(150)), covered(dash(15, 80))}, Standing: OneSource},
			{Class: "IV", Asks: []Ask{vse(atMost(150)), covered(above(80))}, Standing: FromMemory},
		},

		Terms: []Term{
			{ID: "hard", Text: "ground of vs > 500 m/s", Range: above(500), Unit: profile.MetrePerSecond, Clause: "4.1.4-1", Standing: OneSource},
			{ID: "below-hard", Text: "no layer below of vs < 500 m/s", Range: atLeast(500), Unit: profile.MetrePerSecond, Clause: "4.1.4-1", Standing: OneSource},
			{ID: "contrast", Text: "vs more than 2.5 times that of every layer above", Range: above(2.5), Unit: bare, Clause: "4.1.4-2", Standing: OneSource},
			{ID: "contrast-depth", Text: "5 m or more below the ground", Range: atLeast(5), Unit: profile.Metre, Clause: "4.1.4-2", Standing: OneSource},
			{ID: "contrast-stiff", Text: "that layer and all below of vs ≥ 400 m/s", Range: atLeast(400), Unit: profile.MetrePerSecond, Clause: "4.1.4-2", Standing: OneSource},
			{ID: "depth", Text: "vse is taken over the cover or 20 m, the less of them", Range: atMost(20), Unit: profile.Metre, Clause: "4.1.5", Standing: Checked},
		},

		Notes: []string{
			"the cover ends at the top of ground of vs > 500 m/s with nothing below slower than 500 m/s; or, below 5 m, at the top of a layer more than 2.5 times as fast as every layer above it, where that layer and all below have vs ≥ 400 m/s; one that begins at 5 m counts as below 5 m",
			"the 2001 edition compared with the layer just above alone and held only the layers below against 400 m/s; it had 140 m/s where this one has 150",
			"a boulder or lens of vs > 500 m/s counts as the soil around it, taken here as the slower of its neighbours; a hard volcanic interlayer is taken out of the cover (4.1.4-3 and -4); a layer is either only where its description says so",
			"15 m is read as printed in both II and III for vse ≤ 150 m/s; the 2001 print has > 15 m for III, and II is taken. 3 m, 50 m and 80 m are II, II and III",
			"a vse above 500 m/s under a cover is in no row; the row of 250 to 500 m/s is taken",
			"near a bound the characteristic period may be interpolated (4.1.6)",
			"GB 55002-2021, Table 3.1.3, and the 2024 edition as GB/T 50011 are believed to have the same numbers (from memory)",
		},
		Short:      "vse needs the ground down to the cover's end or to 20 m",
		Correlated: "estimated velocities are allowed for class D buildings and for class C buildings of at most 10 storeys and 24 m, each layer typed by Table 4.1.3",
		decide:     decideGB,
	}
}

// vse and covered write a limit the way the table's rows and cells print it.
func vse(r Range) Ask     { return Ask{"vse", r, profile.MetrePerSecond} }
func covered(r Range) Ask { return Ask{"cover", r, profile.Metre} }

// decideGB finds the cover, averages over it or over 20 m, and reads the
// table by both.
func decideGB(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	r.takeOut()
	rock := r.coverGB()
	if err := r.averageAbove(rock, c.term("depth").upper()); err != nil {
		return Decision{}, err
	}
	found := []Found{r.averageOf("vse"), r.depthOf(rock, "cover", "cover thickness")}
	if rock.found {
		found = append(found, Found{Of: "vs of the rock", Text: "slowest velocity of the ground below the cover", Value: rock.stiff, Unit: profile.MetrePerSecond.Name})
	}
	r.alone("vse", found)
	r.ground()
	if r.d.Class = r.byRules(found); !r.settled() {
		r.aboveRows(found)
	}
	r.fifteen(found)
	r.notReached(found, c.term("hard").Text)
	r.nearRules(found)
	return r.finish(), nil
}

// aboveRows takes the fastest row for a vse that is faster than all of them.
func (r *ruling) aboveRows(found []Found) {
	fastest := r.code.lastBound("vse")
	r.note("no-row", "vse of %s under a cover is in no row as printed; the fastest row, up to %s, is taken", r.speed(r.velocity), r.speed(fastest))
	found[0].Value, found[0].Text = fastest, found[0].Text+", taken at the end of the fastest row"
	r.d.Class = r.byRules(found)
}

// fifteen notes a cover of 15 m, which two cells claim.
func (r *ruling) fifteen(found []Found) {
	const shared = 15 // m
	vse, cover := quantityOf(found, "vse"), quantityOf(found, "cover")
	if equal(cover.Value, shared) && r.d.Class == "II" && vse.Value <= 150*(1+equality) {
		r.note("boundary-overlap", "a cover of 15 m is read as printed in both II and III for vse ≤ 150 m/s; the 2001 print has > 15 m for III, and II is taken")
	}
}

package siteclass

import "shearbook/profile"

// jpBridgesV returns the Japanese specifications for highway bridges, Part V
// on seismic design, the ground types by characteristic period.
func jpBridgesV() *Code {
	return &Code{
		ID:        "jp-bridges-v",
		Title:     "Specifications for Highway Bridges, Part V: Seismic design",
		Edition:   "Specifications for Highway Bridges, Part V, from 1990 on",
		Region:    "Japan, road bridges",
		Clause:    "Part V, ground types for seismic design",
		Table:     "table of ground types",
		Source:    "Specifications for Highway Bridges, Part V (Japan Road Association); the limits of TG from one source, formula and base layer from two",
		Parameter: "TG",
		DepthText: "soil above the base",
		Datum:     DatumGround,
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  OneSource,

		//  Type, ground
		Bands: []Band{
			{Class: "I", Name: "good diluvial ground and rock", Also: "TG < 0.2 s", Standing: OneSource},
			{Class: "II", Name: "diluvial and alluvial ground of neither type I nor III", Also: "0.2 ≤ TG < 0.6 s", Standing: OneSource},
			{Class: "III", Name: "soft alluvial ground", Also: "0.6 s ≤ TG", Standing: OneSource},
		},

		Rules: []Rule{
			{Class: "I", Asks: []Ask{{"TG", below(0.2), second}}, Standing: OneSource},
			{Class: "II", Asks: []Ask{{"TG", atLeast(0.2).to(below(0.6)), second}}, Standing: OneSource},
			{Class: "III", Asks: []Ask{{"TG", atLeast(0.6), second}}, Standing: OneSource},
		},

		Terms: []Term{
			{ID: "base", Text: "base layer of Vs ≥ 300 m/s", Range: atLeast(300), Unit: profile.MetrePerSecond,
				Clause: "base surface for seismic design", Standing: Checked},
		},

		Notes: []string{
			"TG = 4·Σ(Hi/Vsi) s, from the ground surface down to the base surface for seismic design",
			"the bounds leave no gap and do not overlap: 0.2 s is II and 0.6 s is III",
			"the base layer has Vs of at least 300 m/s, or N of at least 25 in cohesive and 50 in sandy soil (one source); here the velocity decides, and it must be kept as far down as the profile goes",
			"ground that ends above the base has a TG of more than that of what is known; it is typed only where that is already III",
			"what the types are called in words is from memory",
			"an older scheme of four types, 1 to 4, went over into this one: 1 to I, 2 and 3 to II, 4 to III (one source)",
		},
		Short:      "TG needs the ground down to the base; what lies below the end of the profile only makes it longer",
		Correlated: "where Vs is not measured the code itself takes 100·N^⅓ m/s in cohesive soil of 1 ≤ N ≤ 25 and 80·N^⅓ in sandy soil of 1 ≤ N ≤ 50",
		decide:     decideBridges,
	}
}

// decideBridges finds the base, and lets four times the travel time above it
// give the type.
func decideBridges(c *Code, s Site) (Decision, error) {
	return decideByPeriod(c, s, "TG", "characteristic period TG", quarterWave)
}

// decideByPeriod types the ground above the base by its period, which the
// rules know by the name of.
func decideByPeriod(c *Code, s Site, of, text string, formula columnPeriod) (Decision, error) {
	r := begin(c, s)
	base := c.term("base")
	column, err := r.columnToBase(base, c.lastBound(of), formula)
	if err != nil {
		return Decision{}, err
	}
	if err := r.averageColumn(column); err != nil {
		return Decision{}, err
	}
	r.d.Route = "period"
	r.noteColumn(column, base)
	found := []Found{column.periodOf(of, text)}
	r.alone("", found)
	r.ground()
	if class := r.byRules(found); !r.settled() {
		r.d.Class = class
		r.nearRules(found)
	}
	return r.finish(), nil
}

package siteclass

import (
	"errors"

	"shearbook/profile"
	"shearbook/vs30"
)

// is1893_2016 returns the Indian standard IS 1893 (Part 1):2016, clause
// 6.4.2. It types the ground by N alone.
func is1893_2016() *Code {
	return &Code{
		ID:        "is-1893-2016",
		Title:     "Criteria for earthquake resistant design of structures – Part 1: General provisions and buildings",
		Edition:   "IS 1893 (Part 1):2016",
		Region:    "India",
		Clause:    "6.4.2",
		Table:     "Table 4",
		Source:    "IS 1893 (Part 1):2016 clause 6.4.2 and Table 4, from memory; the 2002 edition: IITK-GSDMA EQ13, IIT Kanpur",
		Parameter: "N",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "existing ground level (from memory)",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  FromMemory,

		//  Type, name, N (corrected)
		Bands: []Band{
			{Class: "I", Name: "rock or hard soil", N: above(30), Also: "or N > 16 in stiff to hard clay", Standing: FromMemory},
			{Class: "II", Name: "medium or stiff soil", N: dash(10, 30), Also: "N of 10 – 16 in clay of low to medium plasticity", Standing: FromMemory},
			{Class: "III", Name: "soft soil", N: below(10), Standing: FromMemory},
		},

		Terms: []Term{
			{ID: "hard-clay", Text: "type I for stiff to hard clay of N > 16", Range: above(16), Unit: blowUnit, Clause: "Table 4", Standing: FromMemory},
		},

		Routes: []Route{
			{Name: "N", Measures: []Measure{AverageN}, Rank: 1, Clause: "6.4.2", Standing: FromMemory, decide: decideIS1893},
		},
		Averaging: Averaging{N: "N", Blow: BlowCorrected, Clause: "6.4.2", Standing: FromMemory, Unstated: true},

		Notes: []string{
			"there is no type by velocity",
			"IS 1893 (Part 1):2025, of November 2025, was rescinded on 3 March 2026 and the 2016 edition restored (one source)",
			"N is the weighted average of the corrected values of the layers from existing ground level to 30 m; how it is weighted is not printed, so the harmonic mean is taken, which is never more than that weighted by thickness, and a note says where that gives another type",
			"N of 30 and of 10 are in no type in one wording; they are taken as II",
			"clay of N from 16 to 30 is I by one row and II by another; II is taken, and a note says so",
			"the 2002 edition had I for N > 30, II for N of 10 to 30 and for poorly graded sand of N > 15, III for N < 10 (one source)",
		},
		Correlated: "the code does not use velocities",
	}
}

// decideIS1893 is the ordinary rule for N, with what the print leaves open of
// the average and of clay.
func decideIS1893(c *Code, s Site) (Decision, error) {
	if !s.tested() {
		return Decision{}, errors.New("the profile states no N, and the code types the ground by N alone")
	}
	d, err := decideByColumns(c, s, &c.Routes[0])
	if err != nil {
		return d, err
	}
	r := begin(c, s)
	r.d.Notes = nil
	r.otherMean(&d)
	r.hardClay(&d)
	d.Notes = append(d.Notes, r.d.Notes...)
	return d, nil
}

// otherMean notes where the mean of N weighted by thickness, Σ(d·N)/Σd, gives
// another type than the harmonic one, which is never more.
func (r *ruling) otherMean(d *Decision) {
	sum, thickness := 0.0, 0.0
	for i := range r.layers {
		l := &r.layers[i]
		part := min(l.Bottom, r.from+r.code.Depth) - max(l.Top, r.from)
		if n, ok := blowsOf(l); ok && part > vs30.Touching {
			sum, thickness = sum+part*n, thickness+part
		}
	}
	mean := sum / thickness
	row := r.code.LookupIn(AverageN, mean)
	if row < 0 {
		return
	}
	if class := r.code.Bands[row].Class; class != d.Averages[0].Class {
		r.note("other-mean", "the mean of N weighted by thickness, %s, would be type %s; the harmonic mean, the softer, is taken", r.code.write(AverageN, mean), class)
	}
}

// hardClay notes clay that another row of the table puts into type I.
func (r *ruling) hardClay(d *Decision) {
	hard, clay := r.code.term("hard-clay"), true
	for i := range r.layers {
		if l := &r.layers[i]; l.Bottom > r.from && l.Top < r.from+r.code.Depth {
			clay = clay && materialOf(l) == cohesive
		}
	}
	if clay && d.Class == "II" && hard.Range.Contains(d.Averages[0].Value) {
		r.note("hard-clay", "the ground is all clay of N > 16, which another row of %s puts into type I where it is stiff to hard; the softer, II, is taken", r.code.Table)
	}
}

package siteclass

import (
	"fmt"

	"shearbook/profile"
)

// ncse02 returns the Spanish seismic standard NCSE-02, clause 2.4. It puts no
// site into a class: it types each layer and weights a coefficient.
func ncse02() *Code {
	return &Code{
		ID:        "ncse-02",
		Title:     "Norma de construcción sismorresistente: parte general y edificación",
		Edition:   "NCSE-02, Real Decreto 997/2002 of 27 September, BOE 244 of 11 October 2002",
		Region:    "Spain",
		Clause:    "2.4",
		Table:     "Table 2.1",
		Source:    "Real Decreto 997/2002, NCSE-02 clause 2.4 and Table 2.1",
		Parameter: "vs",
		Depth:     30,
		DepthText: "30 m",
		Datum:     DatumGround,
		DatumNote: "with basements the thicknesses are normally measured from grade",
		Unit:      profile.MetrePerSecond,
		Length:    profile.Metre,
		Standing:  OneSource,

		//  Type, name, vs of the layer (m/s)
		Bands: []Band{
			{Class: "I", Name: "compact rock, cemented or very dense granular soil", Vs: above(750), Also: "C = 1.0", Standing: OneSource},
			{Class: "II", Name: "much fractured rock, dense granular or hard cohesive soil", Vs: above(400).to(atMost(750)), Also: "C = 1.3", Standing: OneSource},
			{Class: "III", Name: "medium dense granular or firm to very firm cohesive soil", Vs: above(200).to(atMost(400)), Also: "C = 1.6", Standing: OneSource},
			{Class: "IV", Name: "loose granular or soft cohesive soil", Vs: atMost(200), Also: "C = 2.0", Standing: OneSource},
		},

		Terms: []Term{
			{ID: "I", Text: "coefficient C of type I", Range: atMost(1.0), Unit: bare, Clause: "Table 2.1", Standing: OneSource},
			{ID: "II", Text: "coefficient C of type II", Range: atMost(1.3), Unit: bare, Clause: "Table 2.1", Standing: OneSource},
			{ID: "III", Text: "coefficient C of type III", Range: atMost(1.6), Unit: bare, Clause: "Table 2.1", Standing: OneSource},
			{ID: "IV", Text: "coefficient C of type IV", Range: atMost(2.0), Unit: bare, Clause: "Table 2.1", Standing: OneSource},
			{ID: "spectrum", Text: "C > 1.8, for which the spectrum may not hold beyond TB", Range: above(1.8), Unit: bare, Clause: "2.4", Standing: OneSource},
		},

		Notes: []string{
			"the standard has no class of a site: each layer has a type by its own velocity, and C = Σ Ci·ei/30 is the mean of the types' coefficients, weighted by thickness over the upper 30 m; the class given here is that coefficient",
			"the bounds leave no gap and do not overlap: 750 m/s is II, 400 m/s III and 200 m/s IV",
			"the average velocity is shown beside it and decides nothing",
			"where C is more than 1.8 the spectrum may not hold for periods longer than TB",
			"what the types are called in words is from memory",
		},
		Short:      "the standard says nothing of profiles that end above 30 m",
		Correlated: "the standard was not seen to speak of correlated velocities",
		decide:     decideNCSE,
	}
}

// decideNCSE types the ground layer by layer and weights the coefficient.
func decideNCSE(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.ground()
	typeOf := func(_ *profile.Layer, v float64) int { return c.Lookup(v / c.Unit.Factor) }
	coefficient := 0.0
	for _, t := range r.stretches(r.bottom(), c.bounds(), typeOf) {
		b := &c.Bands[t.kind]
		r.stretchSteps(t, b.Vs, c.Unit, "ground of type "+b.Class, c.Table)
		r.use(b.Standing, "type %s of %s", b.Class, c.Table)
		coefficient += c.term(b.Class).upper() * (t.bottom - t.top) / c.Depth
	}
	r.coefficient(coefficient)
	return r.finish(), nil
}

// coefficient gives the coefficient as the decision's class.
func (r *ruling) coefficient(v float64) {
	spectrum := r.code.term("spectrum")
	r.d.Found = []Found{{Of: "C", Text: "coefficient of the ground, C", Value: v}}
	r.termStep(spectrum, v, "coefficient of the ground, C")
	if spectrum.Range.Contains(v) {
		r.note("spectrum", "C of %s is more than 1.8; the spectrum may not hold for periods longer than TB (%s)", number(v), spectrum.Clause)
	}
	r.d.Class = fmt.Sprintf("C = %.2f", v)
}

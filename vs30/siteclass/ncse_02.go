package siteclass

import (
	"fmt"

	"shearbook/profile"
	"shearbook/vs30"
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

// stretch is neighbouring ground of one type.
type stretch struct {
	band             int
	top, bottom      float64 // m below ground level
	slowest, fastest float64 // m/s
}

// decideNCSE types the ground layer by layer and weights the coefficient.
func decideNCSE(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.ground()
	coefficient := 0.0
	for _, t := range r.stretches() {
		b := &c.Bands[t.band]
		r.typeSteps(b, t)
		r.use(b.Standing, "type %s of %s", b.Class, c.Table)
		coefficient += c.term(b.Class).upper() * (t.bottom - t.top) / c.Depth
	}
	r.weighed(coefficient)
	return r.finish(), nil
}

// stretches cuts the averaged ground where its type changes.
func (r *ruling) stretches() []stretch {
	var all []stretch
	for i := range r.layers {
		l := &r.layers[i]
		top, bottom := max(l.Top, r.datum), min(l.Bottom, r.bottom())
		if bottom-top <= vs30.Touching {
			continue
		}
		for _, cut := range r.cuts(l, top, bottom) {
			all = joined(all, cut)
		}
	}
	return all
}

// cuts returns the parts of a layer between two depths, cut where a gradient
// passes a bound of the types.
func (r *ruling) cuts(l *profile.Layer, top, bottom float64) []stretch {
	var parts []stretch
	v0, v1 := l.VsAt(top), l.VsAt(bottom)
	for z := top; bottom-z > vs30.Touching; {
		end := bottom
		for _, b := range r.code.bounds() {
			if at := top + (bottom-top)*(b*r.code.Unit.Factor-v0)/(v1-v0); v0 != v1 && at-z > vs30.Touching && at < end {
				end = at
			}
		}
		a, b, middle := l.VsAt(z), l.VsAt(end), l.VsAt((z+end)/2)
		parts = append(parts, stretch{r.code.Lookup(middle / r.code.Unit.Factor), z, end, min(a, b), max(a, b)})
		z = end
	}
	return parts
}

// joined adds a part to the stretches, to the last of them where it is of the
// same type.
func joined(all []stretch, part stretch) []stretch {
	if n := len(all); n > 0 && all[n-1].band == part.band {
		last := &all[n-1]
		last.bottom, last.slowest, last.fastest = part.bottom, min(last.slowest, part.slowest), max(last.fastest, part.fastest)
		return all
	}
	return append(all, part)
}

// typeSteps holds the slowest and the fastest ground of a stretch against the
// bounds of its type. Where a gradient passes a bound the stretch ends at it,
// and the bound itself is counted with the stretch.
func (r *ruling) typeSteps(b *Band, t stretch) {
	text := "ground of type " + b.Class + " from " + r.length(t.top) + " to " + r.length(t.bottom)
	slow, fast := t.slowest/r.code.Unit.Factor, t.fastest/r.code.Unit.Factor
	if low := b.Vs.Lower; low.Op != Open {
		if equal(slow, low.Value) {
			slow = low.Value * (1 + beside)
		}
		r.d.Steps = append(r.d.Steps, newStep(text+", slowest", r.code.Table, slow, low, true, r.code.Unit))
	}
	if high := b.Vs.Upper; high.Op != Open {
		r.d.Steps = append(r.d.Steps, newStep(text+", fastest", r.code.Table, fast, high, false, r.code.Unit))
	}
}

// weighed gives the coefficient as the decision's class.
func (r *ruling) weighed(coefficient float64) {
	spectrum := r.code.term("spectrum")
	r.d.Found = []Found{{Of: "C", Text: "coefficient of the ground, C", Value: coefficient}}
	r.termStep(spectrum, coefficient, "coefficient of the ground, C")
	if spectrum.Range.Contains(coefficient) {
		r.note("spectrum", "C of %s is more than 1.8; the spectrum may not hold for periods longer than TB (%s)", number(coefficient), spectrum.Clause)
	}
	r.d.Class = fmt.Sprintf("C = %.2f", coefficient)
}

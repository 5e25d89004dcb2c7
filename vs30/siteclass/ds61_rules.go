package siteclass

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// ds61ByVelocity is the rule for a velocity alone.
func ds61ByVelocity(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageDS61(); err != nil {
		return Decision{}, err
	}
	rock, falls := r.fastUpper(), len(vs30.Reversals(r.layers, r.datum, r.bottom())) > 0
	r.byOther = func(v float64) string {
		if rock && c.Lookup(v) == 0 {
			return c.Bands[0].Class
		}
		return velocityAlone(v, falls)
	}
	r.ground()
	if r.settled() {
		return r.finish(), nil
	}
	r.byAverage()
	r.aloneSteps(rock, falls)
	r.d.Class = r.byOther(r.velocity)
	r.rest(Checked, "the types by velocity alone ("+c.Clause+")")
	r.near()
	return r.finish(), nil
}

// aloneTypes is what the decree makes of a velocity alone, in m/s.
var aloneTypes = [...]struct {
	class string
	above float64
}{{"C", 500}, {"D", 350}, {"E", 180}}

// velocityAlone returns the type by a velocity alone.
func velocityAlone(v float64, falls bool) string {
	for _, t := range aloneTypes {
		if falls && t.class != "E" {
			continue
		}
		if v > t.above && !equal(v, t.above) {
			return t.class
		}
	}
	return "F"
}

// aloneSteps compares the velocity with the bounds of the types by velocity
// alone, and notes why they are taken.
func (r *ruling) aloneSteps(rock, falls bool) {
	if rock && r.code.Lookup(r.velocity) == 0 {
		r.say("rock-upper", "all of the upper 15 m is faster than 900 m/s; type A is then not asked for RQD and qu")
		return
	}
	for _, t := range aloneTypes {
		if falls && t.class != "E" {
			continue
		}
		step := newStep(r.code.Parameter+" alone, type "+t.class, r.code.Clause, r.velocity, Limit{Above, t.above}, true, r.code.Unit)
		r.d.Steps = append(r.d.Steps, step)
		if step.Holds {
			break
		}
	}
	text := "the strength of the ground is not known throughout; by the velocity alone the type is lowered"
	if falls {
		text = "the strength of the ground is not known throughout, and the velocity falls with depth, for which the decree has no type by velocity alone; the least favourable is taken"
	}
	r.say("velocity-alone", text)
}

// averageDS61 averages over 30 m, with a foundation deeper than 15 m down to
// 15 m below it; a profile that ends in rock above that depth down to its
// end.
func (r *ruling) averageDS61() error {
	depth := r.code.Depth
	if f := r.site.FoundationDepth; f.Known {
		depth = max(depth, f.Value+15-r.from)
	}
	last := &r.layers[len(r.layers)-1]
	rock := r.code.Bands[0].Vs
	if end := last.Bottom - r.from; end > 0 && depth-end > vs30.Touching && rock.Contains(last.VsAt(last.Bottom)) {
		depth = end
		r.say("to-rock", "the profile ends in rock "+metres(end)+" below the datum, and so does the average, as the decree allows")
	}
	if err := r.averageOver(depth); err != nil {
		return err
	}
	if depth != r.code.Depth {
		r.over = r.code.Parameter + " over " + metres(depth)
	}
	return nil
}

// fastUpper reports whether all of the upper 15 m is faster than 900 m/s.
func (r *ruling) fastUpper() bool {
	const upper = 15
	rock := r.code.Bands[0].Vs.Lower.Value
	v := slowest(r.layers, r.from, r.from+upper)
	return v > rock && !equal(v, rock) && r.bottom()-r.from >= upper-vs30.Touching && !math.IsInf(v, 1)
}

// ds61ByBoth takes the softer of the types by velocity and by strength.
func ds61ByBoth(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageDS61(); err != nil {
		return Decision{}, err
	}
	weakest, err := r.weakest()
	if err != nil {
		return Decision{}, err
	}
	r.d.Route = "velocity and strength"
	rock := r.fastUpper()
	r.after = func(class string) string {
		if rock && class == c.Bands[0].Class {
			return class
		}
		return r.softerOf(class, weakest.class)
	}
	r.ground()
	if !r.settled() {
		class := r.byAverage()
		r.byStrength(weakest)
		if r.d.Class = r.after(class); r.d.Class != class {
			r.note("strength-governs", "by its velocity the site is type %s, by the strength of its weakest layer, from %s to %s, type %s; the less favourable is taken",
				class, metres(weakest.layer.Top), metres(min(weakest.layer.Bottom, r.bottom())), weakest.class)
		}
		r.near()
	}
	r.d.Averages = []Average{
		{Of: AverageVs, Symbol: c.Parameter, Value: r.velocity, Unit: c.Unit.Name, Thickness: r.thickness, Class: c.ClassOf(r.d.Velocity)},
		{Of: weakest.measure, Symbol: c.symbolOf(weakest.measure) + " of the weakest layer", Value: weakest.value,
			Unit: c.unitOf(weakest.measure).Name, Thickness: weakest.thickness, Class: weakest.class}}
	return r.finish(), nil
}

// weakLayer is the layer whose strength gives the softest type.
type weakLayer struct {
	layer     *profile.Layer
	measure   Measure
	value     float64 // in the unit of its column
	thickness float64 // m inside the average
	class     string
}

// weakest returns the layer of the softest type by strength; the first of
// them. The error names a layer that states none: then the strength of the
// ground is not known.
func (r *ruling) weakest() (weakLayer, error) {
	var w weakLayer
	for i := range r.layers {
		l := &r.layers[i]
		d := min(l.Bottom, r.bottom()) - max(l.Top, r.datum)
		if d <= vs30.Touching {
			continue
		}
		m := AverageNch
		v, ok := blowsOf(l)
		if kind, _ := r.code.Averaging.soilOf(l); kind == kindCohesive {
			m, v, ok = AverageSu, l.Su/r.code.suUnit().Factor, true
		}
		if !ok || !(v >= 0) {
			return w, fmt.Errorf("the layer from %s to %s states neither N nor su", metres(l.Top), metres(l.Bottom))
		}
		class := r.code.Bands[r.code.LookupIn(m, v)].Class
		if w.layer == nil || r.rank(class) > r.rank(w.class) {
			w = weakLayer{l, m, v, d, class}
		}
	}
	return w, nil
}

// byStrength compares the weakest layer with its column.
func (r *ruling) byStrength(w weakLayer) {
	c := r.code
	over := c.symbolOf(w.measure) + " of the weakest layer, from " + metres(w.layer.Top) + " down"
	r.bandSteps(w.measure, w.value, c.unitOf(w.measure), over)
	row := c.LookupIn(w.measure, w.value)
	r.restOnRow(row)
	r.boundary(w.measure, w.value, row, itself)
	if w.measure == AverageNch {
		r.sayBlow()
	}
}

// ds61BySand is the rule for sand without a velocity: D where N1 is 30 or
// more throughout, but for at most 5 m of 20 to 29.
func ds61BySand(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.reaches(c.Depth); err != nil {
		return Decision{}, err
	}
	r.d.Route, r.d.Thickness, r.thickness, r.d.Velocity = "N", c.Depth, c.Depth, 0
	var loose float64
	least := math.Inf(1)
	for i := range r.layers {
		l := &r.layers[i]
		d := min(l.Bottom, r.bottom()) - max(l.Top, r.datum)
		if d <= vs30.Touching {
			continue
		}
		v, ok := blowsOf(l)
		if kind, _ := c.Averaging.soilOf(l); kind == kindCohesive || !ok || !(v >= 0) {
			return Decision{}, fmt.Errorf("without a velocity the decree types sand alone, and the layer from %s to %s states no N1", metres(l.Top), metres(l.Bottom))
		}
		if v < 30 && !equal(v, 30) {
			loose += d
		}
		least = min(least, v)
	}
	steps := []Step{
		newStep("N1 of the weakest sand", c.Clause, least, Limit{AtLeast, 20}, true, blowUnit),
		newStep("sand of N1 from 20 to 29", c.Clause, loose, Limit{AtMost, 5}, false, c.Length),
	}
	if !steps[0].Holds || !steps[1].Holds {
		return Decision{}, fmt.Errorf("without a velocity the decree gives type D alone, to sand of N1 ≥ 30 with at most 5 m of N1 from 20 to 29; here %s of sand are below 30, the least N1 is %s", metres(loose), short(least))
	}
	r.d.Steps = append(r.d.Steps, steps...)
	r.gauges = []gauge{{AverageNch, least, blowUnit, c.Depth, "D"}}
	r.ground()
	if !r.settled() {
		r.d.Class = "D"
	}
	r.rest(Checked, "type D of sand without a velocity ("+c.Clause+")")
	r.sayBlow()
	r.d.Averages = []Average{{Of: AverageNch, Symbol: "N1 of the weakest layer", Value: least, Unit: blowUnit.Name, Thickness: c.Depth, Class: "D"}}
	return r.finish(), nil
}

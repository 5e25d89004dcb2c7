package siteclass

import "slices"

// bar applies the bars on rock classes to the class of the average and
// returns the class that comes of it. Classes that no bar names pass.
func (r *ruling) bar(class string) string {
	for i := range r.code.Conditions {
		if c := &r.code.Conditions[i]; c.Kind == Barred {
			class = r.barOne(c, class)
		}
	}
	return class
}

// barOne goes down from class until the bar lets one stand.
func (r *ruling) barOne(c *Condition, class string) string {
	o := Outcome{State: NotApplicable}
	if slices.Contains(c.Bars, class) {
		o.State = NotMet
		r.noteFoundation(c)
	}
	first, soil := class, cover{}
	for slices.Contains(c.Bars, class) {
		cov := r.soilOver(c, class)
		step, barred := r.barStep(c, class, cov)
		o.Steps = append(o.Steps, step...)
		if !barred {
			break
		}
		o.State, soil = Met, cov
		class = r.next(class)
		if c.OwnAverage {
			break
		}
	}
	r.record(c, o)
	if o.State != Met {
		return class
	}
	free := r.stiffestFree(c)
	r.after = func(other string) string { return r.softerOf(other, free) }
	if c.OwnAverage {
		return r.byOwnAverage(c, first, soil)
	}
	r.note("rock-barred", "class %s is barred: %s (%s); the print names no class to take instead, and %s, the next, is taken",
		first, c.Text, c.Clause, class)
	return class
}

// barStep compares the soil above the rock of a class with the limit.
func (r *ruling) barStep(c *Condition, class string, cov cover) ([]Step, bool) {
	k, ok := c.limitOn(CoverThickness)
	if !ok {
		return nil, false
	}
	rock := r.code.Bands[r.code.band(class)].Vs.Lower
	subject := "material softer than " + r.speed(rock.Value) + " below " + r.startOf(c) + ", class " + class
	return k.compare(cov.thickness(), subject, c.Clause)
}

// soilOver returns the ground above the rock of a class: above the first
// depth from which no velocity inside the averaging depth is below the
// class's lower bound.
func (r *ruling) soilOver(c *Condition, class string) cover {
	bound := Limit{AtLeast, r.code.Bands[r.code.band(class)].Vs.Lower.Value}
	return coverAbove(r.layers, r.start(c), r.depthBelowDatum(), bound, r.code.Unit)
}

// depthBelowDatum returns the depth in m below ground level down to which a
// code's full averaging depth reaches.
func (r *ruling) depthBelowDatum() float64 { return r.from + r.code.Depth }

// start returns the depth in m below ground level from which a bar counts
// the soil: the foundation if it is known, or else the datum of a code that
// measures from the foundation, or else ground level; the datum for a bar
// that does not ask for the foundation.
func (r *ruling) start(c *Condition) float64 {
	switch {
	case c.FromFoundation && r.site.FoundationDepth.Known:
		return r.site.FoundationDepth.Value
	case c.FromFoundation && r.code.Datum != DatumFoundation:
		return 0
	}
	return r.from
}

// startOf names what start returns.
func (r *ruling) startOf(c *Condition) string {
	switch {
	case c.FromFoundation && r.site.FoundationDepth.Known:
		return "the foundation, " + r.length(r.site.FoundationDepth.Value) + " deep"
	case c.FromFoundation && r.code.Datum != DatumFoundation, r.start(c) == 0:
		return "ground level"
	}
	return "the datum, " + r.length(r.start(c)) + " deep"
}

// noteFoundation notes that the soil is counted from ground level, or the
// datum, for want of the depth of the foundation.
func (r *ruling) noteFoundation(c *Condition) {
	if c.FromFoundation && !r.site.FoundationDepth.Known {
		r.note("foundation-assumed", "the depth of the foundation is not stated; the soil above the rock is counted from %s", r.startOf(c))
	}
}

// next returns the class one row softer than class that has velocity bounds;
// class itself if it is the softest.
func (r *ruling) next(class string) string {
	for i := r.code.band(class) + 1; i < len(r.code.Bands); i++ {
		if b := &r.code.Bands[i]; !b.Vs.Empty() && !b.Indicative {
			return b.Class
		}
	}
	return class
}

// softerOf returns the softer of two classes.
func (r *ruling) softerOf(a, b string) string {
	if r.code.band(a) > r.code.band(b) {
		return a
	}
	return b
}

// stiffestFree returns the stiffest class that the bar lets stand.
func (r *ruling) stiffestFree(c *Condition) string {
	class := c.Bars[0]
	for slices.Contains(c.Bars, class) {
		if _, barred := r.barStep(c, class, r.soilOver(c, class)); !barred {
			break
		}
		class = r.next(class)
	}
	return class
}

// byOwnAverage takes the average over the soil above the rock for the
// average, and lets it decide.
func (r *ruling) byOwnAverage(c *Condition, first string, soil cover) string {
	whole, over := r.velocity, r.over
	r.datum = soil.from
	r.take(soil.average(r.layers), soil.thickness(), "the "+r.length(soil.thickness())+" of softer material")
	r.note("rock-barred", "class %s, by %s of %s, is barred: %s (%s); the class comes from the average over the %s of softer material, %s",
		first, over, r.speed(whole), c.Text, c.Clause, r.length(r.thickness), r.speed(r.velocity))
	class := r.byAverage()
	free := r.after(class)
	if free != class {
		r.note("rock-barred", "class %s, by %s, is barred for the same reason; %s, the next, is taken", class, r.over, free)
	}
	return free
}

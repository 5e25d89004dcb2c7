package siteclass

import (
	"math"
	"strings"

	"shearbook/profile"
	"shearbook/vs30"
)

// gauge is an average that is held against its column.
type gauge struct {
	measure   Measure
	value     float64 // in unit
	unit      profile.Unit
	thickness float64 // m of the layers that it is the average of
	class     string  // that a rule of the code gives it; "" where the column does
}

// decideByColumns is the ordinary rule of a route without velocity: each of
// its averages gives a class, and the softest governs.
func decideByColumns(c *Code, s Site, route *Route) (Decision, error) {
	r := begin(c, s)
	if err := r.gaugeAll(route); err != nil {
		return Decision{}, err
	}
	r.ground()
	r.noGeometry()
	r.columns()
	return r.finish(), nil
}

// sayNone notes an average that is 0 because a blow count is.
func (r *ruling) sayNone(t *tally) {
	if t.measure == AverageSu || t.average() != 0 {
		return
	}
	for i := range r.layers {
		l := &r.layers[i]
		if n, ok := blowsOf(l); ok && n == 0 && l.Top < r.bottom() && l.Bottom > r.datum {
			r.note("no-blows", "N is 0 from %s to %s, where the sampler sank of itself or the file means that nothing was tested; one such layer makes the harmonic average 0",
				metres(l.Top), metres(l.Bottom))
			return
		}
	}
}

// gaugeAll averages the measures of a route over the code's depth.
func (r *ruling) gaugeAll(route *Route) error {
	c := r.code
	if err := r.reaches(c.Depth); err != nil {
		return err
	}
	r.d.Route, r.d.Thickness, r.thickness = route.Name, c.Depth, c.Depth
	r.d.Averages = make([]Average, 0, len(route.Measures))
	for _, m := range route.Measures {
		t := r.tallyUp(m, c.Depth)
		if t.thickness == 0 && t.missing == nil && len(route.Measures) > 1 {
			continue // ground of one kind alone
		}
		if err := r.fault(&t); err != nil {
			return err
		}
		r.sayTally(&t)
		r.sayNone(&t)
		r.gauges = append(r.gauges, gauge{m, t.average(), c.unitOf(m), t.thickness, ""})
	}
	if len(r.gauges) == 0 {
		return r.fault(&tally{measure: route.Measures[0]})
	}
	r.nameRoute(route)
	r.rest(c.Averaging.Standing, "the averages of N and su ("+c.Averaging.Clause+")")
	r.rest(route.Standing, "the class by "+r.d.Route+" ("+route.Clause+")")
	if r.gauges[0].measure != AverageSu {
		r.sayBlow()
	}
	r.extension()
	return nil
}

// reaches returns an error where the layers end above a thickness below the
// datum.
func (r *ruling) reaches(thickness float64) error {
	end, needed := r.layers[len(r.layers)-1].Bottom, r.from+thickness
	if needed-end > vs30.Touching {
		return r.tooShort(&vs30.ShortError{Reached: end, Needed: needed})
	}
	return nil
}

// nameRoute names the route after the averages that there are.
func (r *ruling) nameRoute(route *Route) {
	if len(r.gauges) == len(route.Measures) {
		return
	}
	var names []string
	for _, g := range r.gauges {
		names = append(names, g.measure.String())
	}
	r.d.Route = strings.Join(names, " and ")
}

// noGeometry lists what velocities alone can tell as not assessed.
func (r *ruling) noGeometry() {
	for i := range r.code.Conditions {
		if c := &r.code.Conditions[i]; c.Kind == Geometry {
			r.record(c, Outcome{State: NotAssessed})
		}
	}
}

// columns lets the averages decide, unless the class is settled. The bars on
// rock classes do not apply: no blow count makes a rock class.
func (r *ruling) columns() {
	settled := r.settled()
	for i := range r.gauges {
		g := &r.gauges[i]
		r.d.Averages = append(r.d.Averages, Average{Of: g.measure, Symbol: r.code.symbolOf(g.measure), Value: g.value,
			Unit: g.unit.Name, Thickness: g.thickness, Class: r.gaugeClass(i, g.value)})
		if !settled {
			r.byColumn(i)
		}
	}
	if !settled {
		r.d.Class = r.softestGauge(-1, 0)
		r.governs()
		r.nearColumns()
	}
	for i := range r.code.Conditions {
		if c := &r.code.Conditions[i]; c.Kind == Barred {
			r.record(c, Outcome{State: NotApplicable})
		}
	}
}

// byColumn compares an average with its column.
func (r *ruling) byColumn(i int) {
	g, c := &r.gauges[i], r.code
	r.bandSteps(g.measure, g.value, g.unit, c.symbolOf(g.measure)+" of "+metres(g.thickness))
	if row := c.LookupIn(g.measure, g.value); row >= 0 {
		r.restOnRow(row)
		r.boundary(g.measure, g.value, row, itself)
	}
}

// gaugeClass returns the class that a value in place of average i gives.
func (r *ruling) gaugeClass(i int, v float64) string {
	if class := r.gauges[i].class; class != "" {
		return class
	}
	if row := r.code.LookupIn(r.gauges[i].measure, v); row >= 0 {
		return r.code.Bands[row].Class
	}
	return r.code.Outside
}

// softestGauge returns the softest class of the averages, with v in place of
// average i; all as they are where i is −1.
func (r *ruling) softestGauge(i int, v float64) string {
	class := ""
	for k := range r.gauges {
		own := r.gaugeClass(k, r.gauges[k].value)
		if k == i {
			own = r.gaugeClass(k, v)
		}
		if class == "" || r.rank(own) > r.rank(class) {
			class = own
		}
	}
	return class
}

// rank orders classes from stiff to soft; what the table does not name is the
// softest.
func (r *ruling) rank(class string) int { return r.code.rank(class) }

func (c *Code) rank(class string) int {
	if i := c.band(class); i >= 0 {
		return i
	}
	return len(c.Bands)
}

// governs notes which of two averages gives the class where they differ.
func (r *ruling) governs() {
	if len(r.d.Averages) < 2 || r.d.Averages[0].Class == r.d.Averages[1].Class {
		return
	}
	r.note("softer-governs", "%s; the softer class governs", r.gaugeText())
}

// gaugeText lists the averages with the classes they give.
func (r *ruling) gaugeText() string {
	var list []string
	for i := range r.gauges {
		g := &r.gauges[i]
		list = append(list, r.code.symbolOf(g.measure)+" of "+r.code.write(g.measure, g.value)+" "+g.unit.Name+
			" (class "+r.gaugeClass(i, g.value)+")")
	}
	return strings.Join(list, ", ")
}

// nearColumns adds how near the averages are to another class.
func (r *ruling) nearColumns() {
	for i := range r.gauges {
		g := &r.gauges[i]
		if g.value <= 0 {
			continue
		}
		m := marginSearch{unit: g.unit.Name, own: r.d.Class}
		m.look(g.value, r.code.boundsIn(g.measure), func(v float64) string { return r.softestGauge(i, v) })
		if m.margin != nil && (r.d.Margin == nil || math.Abs(m.margin.Percent) < math.Abs(r.d.Margin.Percent)) {
			r.d.Margin = m.margin
		}
		whole := math.Round(g.value)
		if class := r.softestGauge(i, whole); class != r.d.Class {
			r.note("rounding", "rounded to %s the average would be class %s; the unrounded %s is class %s",
				withUnit(whole, g.unit), class, numberBeside(g.value, whole)+" "+g.unit.Name, r.d.Class)
		}
	}
}

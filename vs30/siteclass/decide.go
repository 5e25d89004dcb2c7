package siteclass

import (
	"fmt"
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// Decide puts a site into a class of the code.
//
// The order is the code's: ground that needs a special study, soft clay, a
// class given by the depth of the stiff ground, the averages, and at last the
// bar on rock classes under soil. The averages are always there, even where
// the ground alone settles the class.
//
// Where the data allow several of the code's routes, the code's priority
// decides; see Route. Site.Route chooses one whatever the priority.
//
// The error wraps a *vs30.ShortError where the layers end above the code's
// depth; other errors say what about the site is not a number, or why the
// data allow no route. The profile must be one that profile.Validate accepts.
func (c *Code) Decide(s Site) (Decision, error) {
	if err := s.check(); err != nil {
		return Decision{}, fmt.Errorf("%s: %w", c.ID, err)
	}
	if s.Route == "" && c.Needs < 2 && (len(c.Routes) == 0 || !s.tested()) && c.routes()[0].has(AverageVs) {
		return c.byVelocity(s)
	}
	return c.byRoutes(s)
}

// byVelocity decides by the velocity, under the code's own rule where it has
// one.
func (c *Code) byVelocity(s Site) (Decision, error) {
	switch {
	case !s.timed():
		return Decision{}, c.noVelocity()
	case c.decide != nil:
		return c.decide(c, s)
	}
	return decideByBands(c, s)
}

// noVelocity is the error of a profile without velocities under a code, or on
// a route, that asks for them.
func (c *Code) noVelocity() error {
	return fmt.Errorf("%s: the profile states no velocity, and %s asks for one", c.ID, c.Table)
}

// decideByBands is the ordinary rule.
func decideByBands(c *Code, s Site) (Decision, error) {
	r := begin(c, s)
	if err := r.averageOver(c.Depth); err != nil {
		return Decision{}, err
	}
	r.ground()
	r.table()
	return r.finish(), nil
}

// ruling is a decision in the making.
type ruling struct {
	code   *Code
	site   *Site
	layers []profile.Layer
	given  profile.Given // what at least one of the layers states
	named  bool          // at least one of the layers has a description

	from      float64 // m below ground level: the datum of the site
	datum     float64 // m below ground level: where the present average starts
	thickness float64 // m averaged
	velocity  float64 // average, in the code's unit; 0 on a route without it
	over      string  // what velocity is: "v̄s over 100 ft"
	gauges    []gauge // the averages of a route without velocity

	// after turns the class that the velocity column gives into the one that
	// comes of it: once the rock classes are barred, the one below.
	after func(class string) string
	// byOther gives the class of an average, in the code's unit, where the
	// velocity column does not; nil where it does.
	byOther    func(v float64) string
	unassessed []string // beside the conditions
	parts      []part   // of the code that were used
	d          Decision
}

// part is a piece of the code that a decision used.
type part struct {
	name     string
	standing Standing
}

// begin takes the datum and what the caller noted of the layers.
func begin(c *Code, s Site) *ruling {
	r := &ruling{code: c, site: &s, layers: s.layers(), after: itself,
		d: Decision{Code: c, Route: velocityRoute.Name, Notes: slices.Clone(s.Notes), Steps: make([]Step, 0, len(c.Bands)+2)}}
	for i := range r.layers {
		r.given |= r.layers[i].Given
		r.named = r.named || r.layers[i].Soil != ""
	}
	from, note := c.DatumOf(s)
	r.from, r.datum, r.d.Datum = from, from, from
	if note.ID != "" {
		r.d.Notes = append(r.d.Notes, note)
	}
	return r
}

func itself(class string) string { return class }

// averageOver averages the velocity over thickness m below the datum.
func (r *ruling) averageOver(thickness float64) error {
	v, err := vs30.Average(r.layers, r.datum, thickness)
	if short, ok := err.(*vs30.ShortError); ok {
		return r.tooShort(short)
	}
	if err != nil {
		return fmt.Errorf("%s: %w", r.code.ID, err)
	}
	if !(v > 0) || math.IsInf(v, 1) {
		return fmt.Errorf("%s: the average velocity is %v m/s; a layer's velocity or thickness is no positive number", r.code.ID, v)
	}
	r.take(v, thickness, r.code.DepthText)
	r.underfoot()
	return nil
}

// take makes v (m/s) over thickness m the average that the class comes from.
func (r *ruling) take(v, thickness float64, depth string) {
	r.d.Velocity, r.d.Thickness, r.d.Datum = v, thickness, r.datum
	r.velocity, r.thickness = v/r.code.Unit.Factor, thickness
	if r.code.ready != nil && depth == r.code.DepthText {
		r.over = r.code.ready.over
		return
	}
	r.over = r.code.Parameter + " over " + depth
}

// bottom returns the depth in m below ground level at which the average ends.
func (r *ruling) bottom() float64 { return r.datum + r.thickness }

// note adds a note to the decision.
func (r *ruling) note(id, format string, args ...any) {
	r.say(id, fmt.Sprintf(format, args...))
}

// say adds a note to the decision in so many words.
func (r *ruling) say(id, text string) {
	r.d.Notes = append(r.d.Notes, note(id, text))
}

// sayOnce adds a note unless the decision has the same already.
func (r *ruling) sayOnce(id, text string) {
	if !slices.Contains(r.d.Notes, note(id, text)) {
		r.say(id, text)
	}
}

// noted reports whether the decision has a note of that ID.
func (r *ruling) noted(id string) bool {
	return slices.ContainsFunc(r.d.Notes, func(n profile.Note) bool { return n.ID == id })
}

// use records that the decision rests on a part of the code.
func (r *ruling) use(s Standing, format string, args ...any) {
	r.parts = append(r.parts, part{fmt.Sprintf(format, args...), s})
}

// rest records that the decision rests on a part of the code named in so many
// words.
func (r *ruling) rest(s Standing, name string) {
	if s != Checked { // what is checked is not listed
		r.parts = append(r.parts, part{name, s})
	}
}

// restOnRow records that the decision rests on a row of the table.
func (r *ruling) restOnRow(i int) {
	switch b := &r.code.Bands[i]; {
	case b.Standing == Checked:
	case r.code.ready != nil:
		r.rest(b.Standing, r.code.ready.rows[i])
	default:
		r.rest(b.Standing, r.code.rowName(i))
	}
}

// rowName names a row of the table.
func (c *Code) rowName(i int) string { return "class " + c.Bands[i].Class + " of " + c.Table }

// settled reports whether the class is found.
func (r *ruling) settled() bool { return r.d.Class != "" }

// speed writes a velocity of the code's unit, with digits enough to tell it
// from every bound that it is not.
func (r *ruling) speed(v float64) string {
	return r.code.write(AverageVs, v) + " " + r.code.Unit.Name
}

// write writes a value of a column with four significant digits, or as many
// more as it takes to tell it from every bound that it is not.
func (c *Code) write(m Measure, v float64) string {
	text := short(v)
	for _, b := range c.boundsIn(m) {
		if other := numberBeside(v, b); !equal(v, b) && len(other) > len(text) {
			text = other
		}
	}
	return text
}

// length writes a length in m, with the code's unit beside it where that is
// another.
func (r *ruling) length(m float64) string { return inUnit(m, r.code.Length) }

// classAt returns the class that an average velocity, in the code's unit,
// would give this site.
func (r *ruling) classAt(v float64) string {
	if r.byOther != nil {
		return r.byOther(v)
	}
	i := r.code.Lookup(v)
	if i < 0 {
		return r.code.Outside
	}
	return r.after(r.code.Bands[i].Class)
}

// byAverages returns the class that the averages alone give.
func (r *ruling) byAverages() string {
	if len(r.gauges) == 0 {
		return r.classAt(r.velocity)
	}
	return r.softestGauge(-1, 0)
}

// averagesText returns the averages in words.
func (r *ruling) averagesText() string {
	if len(r.gauges) == 0 {
		return r.speed(r.velocity)
	}
	return r.gaugeText()
}

// shortError is a profile that ends above a code's depth, in the code's
// words.
type shortError struct {
	text  string
	short *vs30.ShortError
}

// Error says how far the profile reaches and how far it would have to.
func (e *shortError) Error() string { return e.text }

// Unwrap returns the *vs30.ShortError.
func (e *shortError) Unwrap() error { return e.short }

func (r *ruling) tooShort(short *vs30.ShortError) error {
	c := r.code
	text := fmt.Sprintf("%s averages over %s: the profile reaches %s below ground level, %s are needed",
		c.ID, c.DepthText, both(short.Reached, short.Needed, c.Length), both(short.Needed, short.Reached, c.Length))
	return &shortError{text, short}
}

// both writes a depth in m and, where the code's unit is another, in that
// too, with digits enough to tell it from other.
func both(m, other float64, u profile.Unit) string {
	text := numberBeside(m, other) + " m"
	if u.Factor != 1 {
		text += " (" + numberBeside(m/u.Factor, other/u.Factor) + " " + u.Name + ")"
	}
	return text
}

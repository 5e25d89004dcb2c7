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
// class given by the depth of the stiff ground, the average velocity, and at
// last the bar on rock classes under soil. The average is always there, even
// where the ground alone settles the class.
//
// The error wraps a *vs30.ShortError where the layers end above the code's
// depth; other errors say what about the site is not a number. The profile
// must be one that profile.Validate accepts.
func (c *Code) Decide(s Site) (Decision, error) {
	if err := s.check(); err != nil {
		return Decision{}, fmt.Errorf("%s: %w", c.ID, err)
	}
	if c.decide != nil {
		return c.decide(c, s)
	}
	return decideByBands(c, s)
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

	datum     float64 // m below ground level
	thickness float64 // m averaged
	velocity  float64 // average, in the code's unit
	over      string  // what velocity is: "v̄s over 100 ft"

	// after turns the class that the velocity column gives into the one that
	// comes of it: once the rock classes are barred, the one below.
	after func(class string) string
	parts []part // of the code that were used
	d     Decision
}

// part is a piece of the code that a decision used.
type part struct {
	name     string
	standing Standing
}

// begin takes the datum and what the caller noted of the layers.
func begin(c *Code, s Site) *ruling {
	r := &ruling{code: c, site: &s, layers: s.layers(),
		d: Decision{Code: c, Route: "velocity", Notes: slices.Clone(s.Notes)}}
	r.after = func(class string) string { return class }
	r.takeDatum()
	return r
}

// takeDatum takes the depth from which to average: as stated, or else ground
// level, noted where the code does not say so itself.
func (r *ruling) takeDatum() {
	s, c := r.site, r.code
	r.datum = s.Datum.Value
	switch {
	case s.Datum.Known && c.Datum == DatumGround && s.Datum.Value != 0:
		r.note("datum-other", "the average starts %s below ground level, as stated; the code measures from the ground surface",
			quantity(s.Datum.Value, c.Length))
	case s.Datum.Known || c.Datum == DatumGround:
	case c.Datum == DatumUnstated:
		r.note("datum-assumed", "the code does not say where its depth is measured from; the average starts at ground level")
	case s.FoundationDepth.Known && s.FoundationDepth.Value != 0:
		r.note("datum-assumed", "the code measures from the underside of the foundation, stated %s below ground level; "+
			"no datum is stated and the average starts at ground level", quantity(s.FoundationDepth.Value, c.Length))
	default:
		r.note("datum-assumed", "the code measures from the underside of the foundation; "+
			"its depth is not stated and the average starts at ground level")
	}
	r.d.Datum = r.datum
}

// averageOver averages over thickness m below the datum.
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
	r.over = r.code.Parameter + " over " + depth
}

// bottom returns the depth in m below ground level at which the average ends.
func (r *ruling) bottom() float64 { return r.datum + r.thickness }

// note adds a note to the decision.
func (r *ruling) note(id, format string, args ...any) {
	r.d.Notes = append(r.d.Notes, profile.Note{ID: id, Text: fmt.Sprintf(format, args...)})
}

// noted reports whether the decision has a note of that ID.
func (r *ruling) noted(id string) bool {
	return slices.ContainsFunc(r.d.Notes, func(n profile.Note) bool { return n.ID == id })
}

// use records that the decision rests on a part of the code.
func (r *ruling) use(s Standing, format string, args ...any) {
	r.parts = append(r.parts, part{fmt.Sprintf(format, args...), s})
}

// settled reports whether the class is found.
func (r *ruling) settled() bool { return r.d.Class != "" }

// speed writes a velocity of the code's unit.
func (r *ruling) speed(v float64) string { return withUnit(v, r.code.Unit) }

// length writes a length in m in the code's unit.
func (r *ruling) length(m float64) string { return quantity(m, r.code.Length) }

// classAt returns the class that an average, in the code's unit, would give
// this site.
func (r *ruling) classAt(v float64) string {
	i := r.code.Lookup(v)
	if i < 0 {
		return r.code.Outside
	}
	return r.after(r.code.Bands[i].Class)
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

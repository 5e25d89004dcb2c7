package siteclass

import (
	"errors"
	"fmt"
	"math"

	"shearbook/profile"
)

// Governing returns the decision that governs a site with several profiles
// under a code that lets the worst of them govern: the softest class, and of
// equal classes the slowest average. It carries a note that says so. The
// error says that there are no decisions, that they are under more than one
// code, or that the code has no such rule.
func Governing(of []Decision) (Decision, error) {
	if len(of) == 0 {
		return Decision{}, errors.New("no decisions to choose from")
	}
	worst := 0
	for i := range of {
		if of[i].Code != of[0].Code {
			return Decision{}, fmt.Errorf("decisions under %s and %s cannot govern one another", of[0].Code.ID, of[i].Code.ID)
		}
		if of[i].softerThan(&of[worst]) {
			worst = i
		}
	}
	c, d := of[0].Code, of[worst]
	if !c.WorstOf {
		return Decision{}, fmt.Errorf("%s has no rule for several profiles of one site", c.ID)
	}
	text := fmt.Sprintf("of %d profiles the %s governs, with class %s", len(of), ordinal(worst), d.Class)
	if d.Velocity > 0 {
		text += " and " + short(d.Velocity) + " m/s"
	}
	d.Notes = append(d.Notes[:len(d.Notes):len(d.Notes)], note("governing", text+"; "+c.Several))
	return d, nil
}

// softerThan reports whether a decision is worse than another of its code.
func (d *Decision) softerThan(other *Decision) bool {
	own, its := d.Code.rank(d.Row), d.Code.rank(other.Row)
	if own != its {
		return own > its
	}
	return d.pace() < other.pace()
}

// pace returns the average velocity, +Inf on a route without one.
func (d *Decision) pace() float64 {
	if d.Velocity > 0 {
		return d.Velocity
	}
	return math.Inf(1)
}

// ordinal writes the place of an index in a list.
func ordinal(i int) string {
	words := [...]string{"first", "second", "third", "fourth", "fifth", "sixth"}
	if i < len(words) {
		return words[i]
	}
	return fmt.Sprintf("number %d", i+1)
}

// note is a note without a place.
func note(id, text string) profile.Note { return profile.Note{ID: id, Text: text} }

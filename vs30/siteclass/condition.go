package siteclass

import (
	"slices"
	"strings"

	"shearbook/profile"
)

// Kind says what a condition does.
type Kind uint8

// The kinds of condition.
const (
	Special  Kind = iota // puts the site in the class that needs a site-specific study
	Softer               // puts the site in a soft class whatever the average
	Geometry             // puts the site in a class of its own by the depth of the stiff ground
	Barred               // bars the rock classes
)

var kindWords = [...]string{"special study", "soft class", "depth of stiff ground", "rock barred"}

// String returns the words of the kind.
func (k Kind) String() string { return kindWords[k] }

// Condition is a rule beside the table that the average velocity does not
// settle. It is met where its fact is so and all its limits hold.
type Condition struct {
	ID       string // "soft-clay": the fact's name with hyphens; its own where the profile itself is asked
	Kind     Kind
	Class    string // to which the site goes where the condition is met; "" for a bar
	Text     string // the condition in our words, with its limits as printed
	Clause   string
	Standing Standing

	Fact   Fact        // what the condition asks of the ground
	Limits []Criterion // in the printed order

	// Only lists the classes that the site would otherwise have to be in for
	// the condition to apply; nil where it always applies.
	Only         []string
	OnlyStanding Standing // of that restriction

	// For a bar:

	Bars           []string // classes barred
	FromFoundation bool     // the soil is counted from the underside of the foundation, else from the datum
	OwnAverage     bool     // the class comes from the average over that soil; else the print names none and the next is taken
}

// Fact is what a condition asks of the ground.
type Fact uint8

// The facts. The first three are answered yes or no; the next four are
// deposits; stiff ground is taken from the profile.
const (
	Liquefiable Fact = iota
	Sensitive
	Collapsible
	Peat
	HighPlasticity
	SoftClay
	ThickClay
	StiffGround
	Described // ground that the print describes in words, which no number of a site settles; never assessed here
)

var factWords = [...]string{"liquefiable soil", "sensitive clay", "collapsible soil", "peat",
	"high-plasticity clay", "soft clay", "soft to medium clay", "stiff ground", "ground described in words"}

// String returns the name of the fact, as a notebook's ground: has it.
func (f Fact) String() string { return factWords[f] }

// state returns what becomes of a condition that is so answered.
func (a Answer) state() State {
	switch a {
	case Yes:
		return Met
	case No:
		return NotMet
	}
	return NotAssessed
}

// answer returns what the ground says of a fact that is yes or no.
func (g *Ground) answer(f Fact) (a Answer, ok bool) {
	switch f {
	case Liquefiable:
		return g.Liquefiable, true
	case Sensitive:
		return g.Sensitive, true
	case Collapsible:
		return g.Collapsible, true
	}
	return NotKnown, false
}

// deposit returns what the ground says of a fact that is a deposit.
func (g *Ground) deposit(f Fact) Deposit {
	switch f {
	case Peat:
		return g.Peat
	case HighPlasticity:
		return g.HighPlasticity
	case SoftClay:
		return g.SoftClay
	case ThickClay:
		return g.ThickClay
	}
	return Deposit{}
}

// State is what became of a condition.
type State uint8

// The states of a condition.
const (
	NotAssessed State = iota
	NotMet
	Met
	NotApplicable
)

var stateWords = [...]string{"not assessed", "not met", "met", "not applicable"}

// String returns the words of the state.
func (s State) String() string { return stateWords[s] }

// MarshalText writes the words.
func (s State) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// Outcome is what the test of a condition found.
type Outcome struct {
	State State
	Steps []Step         // the comparisons made, if any
	Notes []profile.Note // what was assumed
}

// ConditionResult is a condition with what became of it.
type ConditionResult struct {
	Condition *Condition
	Outcome
}

// test compares the facts of the ground with the printed limits. Limits that
// the ground gives no number for are taken to hold, and noted, once the
// thickness is known: the deposit was named after the code's own definition.
func (c *Condition) test(g *Ground) Outcome {
	if a, ok := g.answer(c.Fact); ok {
		return Outcome{State: a.state()}
	}
	d := g.deposit(c.Fact)
	if d == (Deposit{}) {
		return Outcome{State: NotAssessed}
	}
	o := Outcome{State: Met}
	var assumed []string
	for _, limit := range c.Limits {
		v := d.property(limit.Property)
		if !v.Known {
			if limit.Property != Thickness {
				assumed = append(assumed, limit.String())
			}
			continue
		}
		steps, holds := limit.compare(v.Value, c.subject(limit), c.Clause)
		o.Steps = append(o.Steps, steps...)
		if !holds {
			o.State = NotMet
			return o
		}
	}
	if !d.Thickness.Known {
		o.State = NotAssessed
	} else if len(assumed) > 0 {
		o.Notes = append(o.Notes, profile.Note{ID: "deposit-assumed", Text: c.Fact.String() +
			": no value is stated for " + strings.Join(assumed, ", ") + "; the limit is taken to be met"})
	}
	return o
}

// subject says what a limit of the condition is compared with.
func (c *Condition) subject(limit Criterion) string {
	if c.Fact == StiffGround {
		return limit.Property.String()
	}
	return c.Fact.String() + ", " + limit.Property.String()
}

// limitOn returns the condition's criterion on a property, and false if it
// has none.
func (c *Condition) limitOn(p Property) (Criterion, bool) {
	i := slices.IndexFunc(c.Limits, func(k Criterion) bool { return k.Property == p })
	if i < 0 {
		return Criterion{}, false
	}
	return c.Limits[i], true
}

package siteclass

import (
	"math"
	"slices"

	"shearbook/profile"
)

// Rule is one row, or one cell, of a class table that is no single column of
// velocities: the class it gives where everything it asks for is so. The
// rules of a code are looked at in their order and the first that holds
// decides.
type Rule struct {
	Class      string
	Asks       []Ask    // in the printed order
	Indicative bool     // shown beside the class and does not give it
	Clause     string   // of the rule; "" where it is the code's table
	Standing   Standing // of the rule
}

// Ask is one printed limit of a rule.
type Ask struct {
	Of    string // what is limited, as printed: "H800", "TG"
	Range Range
	Unit  profile.Unit // as printed
}

// Term is a figure that a code's rules rest on: what counts as rock, how deep
// to look.
type Term struct {
	ID       string // "base"
	Text     string // in our words
	Range    Range
	Unit     profile.Unit // as printed; without a name where the print has no unit
	Clause   string
	Standing Standing
}

// Found is a quantity that a decision found beside the average and held
// against the rules.
type Found struct {
	Of      string  // as the rules name it: "H800", "TG"
	Text    string  // in words
	Value   float64 // in Unit
	Unit    string  // of SI
	AtLeast bool    // the profile ends before the quantity does; it is more than Value
}

// second is the unit of a period.
var second = profile.Unit{Name: "s", Factor: 1}

// String returns the limit as printed: "H800 > 5, ≤ 30 m".
func (a Ask) String() string {
	s := a.Of + " " + a.Range.String()
	if a.Unit.Name != "" {
		s += " " + a.Unit.Name
	}
	return s
}

// String returns everything that the rule asks for, in a line.
func (u Rule) String() string {
	s := ""
	for i, a := range u.Asks {
		if i > 0 {
			s += "; "
		}
		s += a.String()
	}
	return s
}

// RulesOf returns the rules of a class, each in a line, for a table that
// prints them beside the class; nil where the band alone gives it.
func (c *Code) RulesOf(class string) []string {
	var lines []string
	for i := range c.Rules {
		if u := &c.Rules[i]; u.Class == class && !u.Indicative {
			lines = append(lines, u.String())
		}
	}
	return lines
}

// term returns the code's term of that ID.
func (c *Code) term(id string) *Term {
	for i := range c.Terms {
		if c.Terms[i].ID == id {
			return &c.Terms[i]
		}
	}
	panic("siteclass: " + c.ID + " has no term " + id)
}

// lower returns the term's lower bound in SI.
func (t *Term) lower() float64 { return t.Range.Lower.Value * t.Unit.Factor }

// upper returns the term's upper bound in SI.
func (t *Term) upper() float64 { return t.Range.Upper.Value * t.Unit.Factor }

// limits returns the range that what is known of a quantity is held against:
// the printed one, unless the quantity is more than its known value. Then
// more than the bound is known from the bound on, and no more than the bound
// is possible only below it.
func (f *Found) limits(printed Range) Range {
	if !f.AtLeast {
		return printed
	}
	if printed.Lower.Op == Above {
		printed.Lower.Op = AtLeast
	}
	if printed.Upper.Op == AtMost || printed.Upper.Op == Dash {
		printed.Upper.Op = Below
	}
	return printed
}

// quantityOf returns the quantity of that name, nil if it is not known.
func quantityOf(found []Found, of string) *Found {
	for i := range found {
		if found[i].Of == of {
			return &found[i]
		}
	}
	return nil
}

// holds reports whether everything the rule asks for is known to be so.
func (u *Rule) holds(found []Found) bool {
	for i := range u.Asks {
		a := &u.Asks[i]
		f := quantityOf(found, a.Of)
		if f == nil || !f.limits(a.Range).Contains(f.Value/a.Unit.Factor) {
			return false
		}
	}
	return true
}

// ruled returns the class of the first rule that holds, and the code's class
// for what is outside its table where none does.
func (c *Code) ruled(found []Found) string {
	for i := range c.Rules {
		if u := &c.Rules[i]; !u.Indicative && u.holds(found) {
			return u.Class
		}
	}
	return c.Outside
}

// byRules holds what was found against the rules, in their order, and returns
// the class of the first that holds; the code's class for what is outside its
// table where none does. A comparison that several rules ask for is one step.
func (r *ruling) byRules(found []Found) string {
	r.d.Found = found
	for i := range r.code.Rules {
		u := &r.code.Rules[i]
		if u.Indicative || !r.follow(u, found) {
			continue
		}
		r.rest(u.Standing, "class "+u.Class+" of "+u.clause(r.code))
		return u.Class
	}
	return r.code.Outside
}

// clause returns where the rule is printed.
func (u *Rule) clause(c *Code) string {
	if u.Clause != "" {
		return u.Clause
	}
	return c.Table
}

// follow compares what a rule asks for until something is not so.
func (r *ruling) follow(u *Rule, found []Found) bool {
	for i := range u.Asks {
		a := &u.Asks[i]
		f := quantityOf(found, a.Of)
		if f == nil {
			return false
		}
		k := Criterion{Range: f.limits(a.Range), Unit: a.Unit}
		steps, holds := k.compare(f.Value, f.Text, u.clause(r.code))
		for _, s := range steps {
			if !slices.Contains(r.d.Steps, s) {
				r.d.Steps = append(r.d.Steps, s)
			}
		}
		if !holds {
			return false
		}
	}
	return true
}

// nearRules adds how near the closest of the quantities is to a bound at
// which the class changes, the others as they are. A quantity of which only a
// least value is known, or that is zero, is near no bound.
func (r *ruling) nearRules(found []Found) {
	trial := slices.Clone(found)
	for i := range r.code.Rules {
		u := &r.code.Rules[i]
		for k := range u.Asks {
			a := &u.Asks[k]
			if f := quantityOf(trial, a.Of); f != nil && !u.Indicative && !f.AtLeast && f.Value > 0 {
				r.nearBound(a.Range.Lower, a.Unit, f, trial)
				r.nearBound(a.Range.Upper, a.Unit, f, trial)
			}
		}
	}
}

// nearBound moves a quantity just beyond a bound, and keeps the bound as the
// margin if the class is another there and no nearer bound is known.
func (r *ruling) nearBound(bound Limit, u profile.Unit, f *Found, trial []Found) {
	v := f.Value / u.Factor
	if bound.Op == Open || bound.Value == 0 || math.IsInf(v, 1) {
		return
	}
	percent := 100 * (bound.Value - snap(v, bound.Value)) / v
	if m := r.d.Margin; m != nil && math.Abs(m.Percent) <= math.Abs(percent) {
		return
	}
	was := f.Value
	defer func() { f.Value = was }()
	for _, side := range [...]float64{-1, 1} {
		if side*(bound.Value-v) < 0 && !equal(v, bound.Value) {
			continue // the bound lies on the other side
		}
		f.Value = bound.Value * (1 + side*beside) * u.Factor
		if class := r.code.ruled(trial); class != r.d.Class && class != "" {
			r.d.Margin = &Margin{ToClass: class, Bound: bound.Value, Unit: u.Name, Percent: percent}
			return
		}
	}
}

// beyondReach returns, in words, each other class that comes of a quantity of
// which only a least value is known, should it be more than the rules' next
// bounds.
func (r *ruling) beyondReach(found []Found) []string {
	var texts []string
	for i := range found {
		if !found[i].AtLeast {
			continue
		}
		trial, last := slices.Clone(found), r.d.Class
		trial[i].AtLeast = false
		for _, a := range r.code.boundsAbove(found[i]) {
			trial[i].Value = a.Range.Lower.Value * a.Unit.Factor * (1 + beside)
			if class := r.code.ruled(trial); class != last && class != "" {
				last = class
				texts = append(texts, found[i].Of+" of more than "+withUnit(a.Range.Lower.Value, a.Unit)+
					", below what the profile reaches, with which the class would be "+class)
			}
		}
	}
	return texts
}

// boundsAbove returns the rules' bounds on a quantity that are more than its
// known value, in their order; the bound is the lower one of the limit
// returned.
func (c *Code) boundsAbove(f Found) []Ask {
	var bounds []Ask
	for i := range c.Rules {
		if c.Rules[i].Indicative {
			continue
		}
		for _, a := range c.Rules[i].Asks {
			known := func(b Ask) bool { return b.Range.Lower.Value == a.Range.Lower.Value }
			if low := a.Range.Lower; a.Of == f.Of && low.Op != Open && low.Value*a.Unit.Factor > f.Value && !slices.ContainsFunc(bounds, known) {
				bounds = append(bounds, a)
			}
		}
	}
	return bounds
}

// alone lets classAt answer by the rules: with an average of the code's unit
// in place of the quantity of that name.
func (r *ruling) alone(of string, found []Found) {
	r.byOther = func(v float64) string {
		trial := slices.Clone(found)
		if f := quantityOf(trial, of); f != nil {
			f.Value = v * r.code.Unit.Factor
		}
		return r.code.ruled(trial)
	}
}

// lastBound returns the largest bound of the rules on a quantity, in SI: what
// is more than that is in the last class.
func (c *Code) lastBound(of string) float64 {
	last := 0.0
	for i := range c.Rules {
		for _, a := range c.Rules[i].Asks {
			if a.Of == of && !c.Rules[i].Indicative {
				last = max(last, a.Range.Lower.Value*a.Unit.Factor, a.Range.Upper.Value*a.Unit.Factor)
			}
		}
	}
	return last
}

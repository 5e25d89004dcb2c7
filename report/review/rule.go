package review

import (
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// Weight says what a finding asks for.
type Weight uint8

// The weights, from nothing to the heaviest.
const (
	Off     Weight = iota // the rule is not applied
	Note                  // to be known
	Explain               // the applicant should explain it
	Answer                // the applicant must answer it before anything rests on the claim
)

var weightWords = [...]string{"off", "note", "explain", "answer"}

// String returns the word of the weight.
func (w Weight) String() string { return weightWords[w] }

// MarshalText writes the word.
func (w Weight) MarshalText() ([]byte, error) { return []byte(w.String()), nil }

// ParseWeight returns the weight that a word names, and false if it names
// none.
func ParseWeight(word string) (Weight, bool) {
	i := slices.Index(weightWords[:], strings.ToLower(strings.TrimSpace(word)))
	return Weight(max(i, 0)), i >= 0
}

// Rule is one thing that a review looks at.
type Rule struct {
	ID      string // short, stable, lower case with hyphens
	Weight  Weight
	Summary string // what it finds, in one sentence without its full stop
	Source  string // the published method or clause behind it
	Limits  []Limit

	// Practice says that the rule, or a limit of it, is common practice and
	// rests on no published source.
	Practice bool
	// Unchecked says that what the rule finds keeps a claim from being
	// checked, and does not contradict it.
	Unchecked bool
	// Fixed says that the weight cannot be changed: the outcome is about just
	// what the rule finds.
	Fixed bool

	check func(*examination)
}

// Limit is a threshold of a rule.
type Limit struct {
	Name    string // as a file of rules calls it
	Value   float64
	Unit    string // "" for a plain number
	Meaning string
	Most    float64 // that a reviewer may set; 0 where there is no such bound
}

// String returns the limit as "divisor 2" or "slack 20 %".
func (l Limit) String() string {
	text := l.Name + " " + short(l.Value, 6)
	if l.Unit != "" {
		text += " " + l.Unit
	}
	return text
}

// Finding is one thing that a review found.
type Finding struct {
	Rule      string
	Weight    Weight
	Place     Place
	Text      string // a sentence without its full stop
	Claimed   string // "" where nothing is claimed
	Found     string // "" where nothing was computed
	Causes    []Cause
	Source    string
	Practice  bool // common practice
	Unchecked bool // it keeps a claim from being checked
}

// Cause is a way of computing that gives what was claimed.
type Cause struct {
	ID    string
	Text  string // what was done, in words
	Value string // what it gives, as printed; "" where that is the claim itself
	Loose bool   // it gives the claimed class, and no average is claimed that could bear it out
}

// Rules returns every rule as it stands without a reviewer's own weights and
// limits, in the order in which they are applied.
func Rules() []Rule {
	return slices.Concat(answerRules(), groundRules(), depthRules(), refractionRules(), surveyRules(),
		materialRules(), patternRules(), evidenceRules())
}

// Ruleset is the rules with a reviewer's own weights and limits. The zero
// value is Rules.
type Ruleset struct {
	Department string   // who set them
	File       string   // they were read from
	Changes    []Change // from Rules

	changed []Rule // nil for Rules
}

// Change is a weight or a limit that is not the rule's own.
type Change struct {
	Rule, What string // What is "weight" or the name of a limit
	From, To   string
}

func (s Ruleset) rules() []Rule {
	if s.changed == nil {
		return Rules()
	}
	return s.changed
}

// Rules returns the rules of the set.
func (s Ruleset) Rules() []Rule { return slices.Clone(s.rules()) }

// examination is a review under way.
type examination struct {
	*Submission
	desk     Desk
	cases    []Case
	rule     Rule
	told     int            // findings of the rule
	layers   map[string]int // findings of the rule on layers, by profile
	more     int            // findings that were not kept
	findings []Finding
}

// limit returns a limit of the rule that is being applied.
func (x *examination) limit(name string) float64 {
	for _, l := range x.rule.Limits {
		if l.Name == name {
			return l.Value
		}
	}
	panic("review: rule " + x.rule.ID + " has no limit " + name)
}

// causes are those of a finding that will be kept; of others nobody asks.
func (x *examination) causes(of func() []Cause) []Cause {
	if x.told >= maxOfRule {
		return nil
	}
	return of()
}

// add states a finding of the rule that is being applied.
func (x *examination) add(at Place, text, claimed, found string, causes ...Cause) {
	x.addUnder("", at, text, claimed, found, causes...)
}

// addAs is add with a weight of its own, where the rule's is heavier.
func (x *examination) addAs(w Weight, at Place, text, claimed, found string, causes ...Cause) {
	x.addUnderAs(w, "", at, text, claimed, found, causes...)
}

// addUnderAs is addUnder with a weight of its own, where the rule's is
// heavier.
func (x *examination) addUnderAs(w Weight, clause string, at Place, text, claimed, found string, causes ...Cause) {
	was := x.rule.Weight
	x.rule.Weight = min(was, w)
	x.addUnder(clause, at, text, claimed, found, causes...)
	x.rule.Weight = was
}

// addUnder is add with a clause of a code in place of the rule's source.
func (x *examination) addUnder(clause string, at Place, text, claimed, found string, causes ...Cause) {
	if at.Layer > 0 {
		x.layers[at.Profile]++
	}
	if x.told++; x.told > maxOfRule || x.layers[at.Profile] > maxOfLayers {
		x.more++
		return
	}
	f := Finding{Rule: x.rule.ID, Weight: x.rule.Weight, Place: at, Text: text, Claimed: claimed, Found: found,
		Causes: causes, Source: x.rule.Source, Practice: x.rule.Practice, Unchecked: x.rule.Unchecked}
	if clause != "" {
		f.Source = clause
	}
	x.findings = append(x.findings, f)
}

// sorted returns the findings, the weightiest first.
func (x *examination) sorted() []Finding {
	out := slices.Clone(x.findings)
	slices.SortStableFunc(out, func(a, b Finding) int { return int(b.Weight) - int(a.Weight) })
	return out
}

// each calls f for every profile that a claim could be about, once.
func (x *examination) each(f func(*Entry)) {
	for i := range x.Profiles {
		f(&x.Profiles[i])
	}
}

// decided is what a decision hangs on.
type decided struct {
	entry  *Entry
	code   *siteclass.Code
	stated Stated
}

// eachDecision calls f for every claim that was recomputed; once for those of
// one profile under one code with the same statements.
func (x *examination) eachDecision(f func(*Case)) {
	seen := map[decided]bool{}
	x.eachCase(func(c *Case) {
		key := decided{c.Entry, c.Code, c.Claim.Stated}
		if c.Err == nil && !seen[key] {
			seen[key] = true
			f(c)
		}
	})
}

// eachCase calls f for every claim that has a profile.
func (x *examination) eachCase(f func(*Case)) {
	for i := range x.cases {
		if x.cases[i].Entry != nil {
			f(&x.cases[i])
		}
	}
}

// eachProfile calls f once for each profile with a claim that needs
// velocities down to a depth: with the deepest of them.
func (x *examination) eachProfile(f func(e *Entry, from, to float64)) {
	type reach struct{ from, to float64 }
	deepest := map[*Entry]reach{}
	var order []*Entry
	x.eachCase(func(c *Case) {
		from, to, ok := c.span()
		if !ok || c.Entry.Profile.NoVelocity {
			return
		}
		was, seen := deepest[c.Entry]
		if !seen {
			order = append(order, c.Entry)
			was = reach{from, to}
		}
		deepest[c.Entry] = reach{min(was.from, from), max(was.to, to)}
	})
	for _, e := range order {
		f(e, deepest[e].from, deepest[e].to)
	}
}

// at is the place of a profile.
func (e *Entry) at() Place {
	p := Place{Place: e.Place, Profile: e.Profile.Name}
	if r := e.Profile.Reading; r != nil && p.File == "" {
		p.Place = r.Place(0, 0)
	}
	return p
}

// layer is the place of layer i of a profile.
func (e *Entry) layer(i int) Place {
	at := e.at()
	l := &e.Profile.Layers[i]
	at.Layer = i + 1
	if r := e.Profile.Reading; r != nil {
		at.Place = r.Place(int(l.Line), int(l.Column))
	} else if l.Line > 0 {
		at.Place = profile.Place{File: at.File, Line: int(l.Line), Column: int(l.Column)}
	}
	return at
}

// place is where a claim stands.
func (c *Case) place() Place {
	at := c.Claim.Place
	if at.Profile == "" {
		at.Profile = c.Claim.Profile
	}
	return at
}

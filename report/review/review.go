// Package review looks at what somebody else says of a site: it takes the
// data of a submission, applies the code that the reviewer names, and states
// what it finds. It never evaluates the applicant's notebook.
//
// A Submission is what was handed in: the profiles, what is claimed of them
// and what was said beside them. Examine recomputes every claim and lets each
// of Rules look at the result. A Finding says how much it weighs, where it
// stands, what was claimed, what was found, and the clause or published
// method behind it. Where a claimed average or class is wrong, the ways of
// computing that give just this value are named, the likeliest first.
package review

import (
	"errors"
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// Submission is what was handed in.
type Submission struct {
	Name     string // as the reviewer named it
	Kind     Kind
	Profiles []Entry
	Claims   []Claim
	Stated   Stated    // of the site as a whole
	Printed  []Printed // the text of the report, if there is one
	Digests  []Digest  // every digest that the submission prints of a file
	Files    []File    // every file that was read
	Faults   []Fault   // what could not be read, or does not fit together
	Results  []Result  // of a results.json

	// Confirmation is the caution that a results.json carries; nil where none
	// was read.
	Confirmation *string

	// Tables are the class tables that the submission brings along.
	Tables []*siteclass.Code

	under map[string]map[int]bool // by code, the profiles with a claim under it
}

// Kind is what a submission is.
type Kind uint8

// The kinds.
const (
	ProfileFile Kind = iota // a file of profiles, with claims on the command line
	ClaimsTable             // a table of claims on the profiles of many files
	SiteFolder              // a folder with a notebook, its profiles and its report
	ReportFile              // a report.pdf that carries its evidence
)

var kindWords = [...]string{"profile file with claims", "table of claims", "site folder", "report with its evidence inside"}

// String returns the words of the kind.
func (k Kind) String() string { return kindWords[k] }

// Entry is a profile of a submission.
type Entry struct {
	Profile *profile.Profile
	AsRead  *profile.Profile // the same as its file has it, before the notebook's statements were put over it
	Place   profile.Place    // where the submission names it

	// Unmapped is the same without the notebook's map of columns, where there
	// is a map and the file can be read without; nil elsewhere.
	Unmapped *profile.Profile
}

// method is the kind of survey by the file's own words, or the notebook's
// where the file has none.
func (e *Entry) method() method { return methodOf(e.methodText()) }

func (e *Entry) methodText() string {
	if e.AsRead != nil && e.AsRead.Survey.Method != "" {
		return e.AsRead.Survey.Method
	}
	return e.Profile.Survey.Method
}

// reached is the depth in m that the survey reached, the lesser of what the
// file and the notebook state; 0 where neither does.
func (e *Entry) reached() float64 {
	reached := e.Profile.Survey.DepthReached
	if e.AsRead != nil && e.AsRead.Survey.DepthReached > 0 && (reached == 0 || e.AsRead.Survey.DepthReached < reached) {
		reached = e.AsRead.Survey.DepthReached
	}
	return reached
}

// Stated is what a submission states of the ground and of the average.
type Stated struct {
	Datum      profile.Optional // m below ground level from which to average
	Foundation profile.Optional // m below ground level of the underside of the foundation
	Ground     siteclass.Ground
	Extend     string // relation by which a short profile is said to be carried on; "" if nothing is said
}

func (s Stated) facts() report.Facts {
	return report.Facts{Datum: s.Datum, Foundation: s.Foundation, Ground: s.Ground, Extend: s.Extend}
}

// Claim is what a submission says of one profile under one code. A field that
// is zero is not claimed.
type Claim struct {
	Profile string // as the submission calls it
	Entry   int    // index into Submission.Profiles; −1 if there is no such profile
	Code    string // ID
	Class   string
	Average Number // over the code's depth
	Depth   Number // over which the average is said to be taken
	Stated  Stated
	Basis   string // that the velocities are said to have: a profile.Basis word; "" if nothing is said
	Place   Place

	result  *Result // of a results.json that makes the claim; nil elsewhere
	problem string  // why the claim cannot be read; "" where it can
}

// File is a file of a submission.
type File struct {
	Name   string
	SHA256 string // lower-case hexadecimal
	Size   int64  // bytes
	Role   string // "profile", "notebook", "results", "report", "claims", "code table"
}

// Digest is a SHA-256 that a submission prints of a file.
type Digest struct {
	File   string
	SHA256 string
	Place  Place
}

// Fault is something that keeps a part of a submission from being checked, or
// two parts of it from fitting together.
type Fault struct {
	profile.Fault
	Evidence       bool   // two parts of the submission contradict each other
	Lesser         bool   // they may, without anything having been changed
	Page           int    // of a PDF, from 1; 0 where unknown
	Claimed, Found string // of evidence; "" where nothing is
}

// Place is where a finding stands.
type Place struct {
	profile.Place
	Profile string // "" where it is about no profile
	Layer   int    // from 1; 0 where it is about none
	Page    int    // of a PDF, from 1; 0 where unknown
	Section string // "" where there is none
}

// Case is one claim and what recomputing it gave.
type Case struct {
	Claim    Claim
	Entry    *Entry
	Code     *siteclass.Code    // under which it was recomputed; nil if no code is known
	Under    *siteclass.Code    // that the claim names; nil if it names none that is known
	Decision siteclass.Decision // zero where Err is set
	Err      error              // why it cannot be recomputed

	// Carried is the decision with the deepest velocity carried on to the
	// depth of the code, where the profile ends above it and the submission
	// does not say how it is carried on; nil elsewhere.
	Carried *siteclass.Decision
}

// Desk is the reviewer's side.
type Desk struct {
	Code  *siteclass.Code   // that the reviewer applies; nil for the claimed one
	Own   []*siteclass.Code // tables that the reviewer handed over beside the built-in ones
	Rules Ruleset
}

// Outcome is the answer of a review.
type Outcome uint8

// The outcomes.
const (
	CannotBeChecked Outcome = iota
	Agrees
	Differs
)

var outcomeWords = [...]string{"cannot be checked", "agrees", "differs"}

// String returns the words of the outcome.
func (o Outcome) String() string { return outcomeWords[o] }

// Review is what came of a submission.
type Review struct {
	Submission *Submission
	Desk       Desk
	Outcome    Outcome
	Cases      []Case
	Findings   []Finding // the weightiest first; of one weight in the order of the rules
	More       int       // findings beyond MaxFindings
}

// Limits of a review.
const (
	MaxClaims   = 20_000
	MaxFindings = 2_000
	maxOfRule   = 500  // findings of one rule
	maxOfLayers = 10   // findings of one rule on the layers of one profile
	maxCompared = 2000 // layers of a profile that rules look at in pairs
	maxCauses   = 4    // told of one finding
	maxLoose    = 2    // of them, where no average is claimed
	noise       = 1e-9 // relative, as everywhere a value meets a bound
)

// Examine recomputes every claim of a submission and states what it finds.
func Examine(s *Submission, desk Desk) *Review {
	r := &Review{Submission: s, Desk: desk}
	for _, claim := range s.Claims {
		r.Cases = append(r.Cases, desk.recompute(s, claim))
	}
	x := &examination{Submission: s, desk: desk, cases: r.Cases}
	for _, rule := range desk.Rules.rules() {
		if rule.Weight == Off {
			continue
		}
		x.rule, x.told, x.layers = rule, 0, map[string]int{}
		rule.check(x)
	}
	r.Findings = x.sorted()
	r.Outcome = x.outcome()
	if n := len(r.Findings); n > MaxFindings {
		r.Findings, r.More = r.Findings[:MaxFindings], n-MaxFindings
	}
	r.More += x.more
	return r
}

// outcome is the answer: differs where a claim does not follow, whatever
// weight the rules have, or a finding must be answered; unchecked where a
// claim could not be recomputed or there is none.
func (x *examination) outcome() Outcome {
	unchecked := len(x.cases) == 0
	tolerance := x.desk.tolerance()
	for i := range x.cases {
		switch c := &x.cases[i]; {
		case c.whyUnchecked() != "":
			unchecked = true
		case !c.Agrees(tolerance):
			return Differs
		}
	}
	for _, f := range x.findings {
		switch {
		case f.Weight == Answer && !f.Unchecked:
			return Differs
		case f.Weight == Answer:
			unchecked = true
		}
	}
	if unchecked {
		return CannotBeChecked
	}
	return Agrees
}

// saysSomething reports whether the claim holds anything to recompute.
func (c *Claim) saysSomething() bool { return c.Class != "" || c.Average.Known() }

// errNoProfile is the error of a claim on a profile that was not handed in.
var errNoProfile = errors.New("the submission holds no such profile, or its file cannot be read")

// unreadable is the error of a claim that cannot be read; where it stands and
// why is a fault of its own.
type unreadable struct{ text string }

func (e unreadable) Error() string { return e.text }

// recompute decides the class of the profile that a claim is about.
func (d *Desk) recompute(s *Submission, claim Claim) Case {
	c := Case{Claim: claim, Code: d.Code}
	if d.Code != nil && claim.Code != d.Code.ID && s.claimedUnder(d.Code.ID, claim.Entry) {
		c.Code = nil // the profile has a claim under the reviewer's code beside this one
	}
	c.Under = d.find(claim.Code)
	if i := slices.IndexFunc(s.Tables, func(t *siteclass.Code) bool { return t.ID == claim.Code }); i >= 0 && c.Under == nil {
		c.Under = s.Tables[i]
	}
	if c.Code == nil {
		c.Code = c.Under
	}
	if claim.problem != "" {
		c.Err = unreadable{claim.problem}
		return c
	}
	if claim.Entry < 0 || claim.Entry >= len(s.Profiles) {
		c.Err = errNoProfile
		return c
	}
	c.Entry = &s.Profiles[claim.Entry]
	if c.Code == nil {
		c.Err = errors.New("no code is named that is known")
		return c
	}
	facts := claim.Stated.facts()
	c.Decision, c.Err = report.Classify(c.Entry.Profile, c.Code, facts)
	var short *vs30.ShortError
	if errors.As(c.Err, &short) && facts.Extend == "" {
		facts.Extend = constantVelocity
		if carried, err := report.Classify(c.Entry.Profile, c.Code, facts); err == nil {
			c.Carried = &carried
		}
	}
	return c
}

// claimedUnder reports whether a claim on a profile names a code.
func (s *Submission) claimedUnder(code string, entry int) bool {
	if s.under == nil {
		s.under = map[string]map[int]bool{}
		for _, c := range s.Claims {
			if s.under[c.Code] == nil {
				s.under[c.Code] = map[int]bool{}
			}
			s.under[c.Code][c.Entry] = true
		}
	}
	return s.under[code][entry]
}

// constantVelocity is the relation that carries the deepest velocity on.
const constantVelocity = "constant-velocity"

// find returns the code of an ID, nil if there is none.
func (d *Desk) find(id string) *siteclass.Code {
	if id == "" {
		return nil
	}
	for _, c := range d.Own {
		if c.ID == id {
			return c
		}
	}
	c, err := siteclass.Find(id)
	if err != nil {
		return nil
	}
	return c
}

// layers are those that the case's average was taken of.
func (c *Case) layers() []profile.Layer { return c.Entry.Profile.Layers }

// average returns the recomputed average in m/s with the datum and the
// thickness it is taken over, and false where there is none.
func (c *Case) average() (v, from, thickness float64, ok bool) {
	d := &c.Decision
	if c.Err != nil || d.Velocity <= 0 {
		return 0, 0, 0, false
	}
	return d.Velocity, d.Datum, d.Thickness, true
}

// span returns the depths in m below ground level between which the case's
// average needs velocities, whether or not the profile reaches there.
func (c *Case) span() (from, to float64, ok bool) {
	d := &c.Decision
	switch {
	case c.Err == nil && d.Thickness > 0:
		return d.Datum, d.Datum + d.Thickness, true
	case c.Carried != nil && c.Carried.Thickness > 0:
		return c.Carried.Datum, c.Carried.Datum + c.Carried.Thickness, true
	}
	return 0, 0, false
}

// same reports whether two values are the same but for the noise of
// floating point.
func same(a, b float64) bool { return math.Abs(a-b) <= noise*max(math.Abs(a), math.Abs(b)) }

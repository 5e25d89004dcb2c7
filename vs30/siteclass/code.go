// Package siteclass holds the site-classification tables of published
// building codes and applies them to a velocity profile.
//
// One file holds one standard. Its table is a literal that reads like the
// printed page: the bands in the printed order, each bound with the printed
// operator and in the printed unit. Where a rule is not a band (EC8 type E,
// the substrate depth of NTC 2018) it is an ordinary function beside the
// table.
//
// A value within one part in 10⁹ of a bound is the bound. Then the printed
// operators decide. Where the print gives the value to two classes or to
// none, the softer class is taken and a note says so.
package siteclass

import "shearbook/profile"

// Standing is how well a table or rule is known to agree with the print.
// The order is from strong to weak.
type Standing uint8

// The standings.
const (
	Checked    Standing = iota + 1 // two independent published sources agree, or the issuing body's own text was read
	OneSource                      // one published source
	FromMemory                     // not checked against a source
)

var standingWords = [...]string{"unknown", "checked", "one source", "from memory"}

// String returns the words that every report prints for the standing.
func (s Standing) String() string { return standingWords[s] }

// MarshalText writes the words.
func (s Standing) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// Operator is the comparison printed with a bound.
type Operator uint8

// The printed operators. Dash is a bound of a printed range "a to b" that
// does not say which class owns it.
const (
	Open    Operator = iota // no bound
	Above                   // >
	AtLeast                 // ≥
	Below                   // <
	AtMost                  // ≤
	Dash
)

var operatorSigns = [...]string{"", ">", "≥", "<", "≤", "–"}

// String returns the sign of the operator; a dash for a printed range.
func (o Operator) String() string { return operatorSigns[o] }

// Limit is one printed bound.
type Limit struct {
	Op    Operator
	Value float64 // in the unit of the column
}

// Range is the cell of a class table: a lower and an upper bound, either of
// which may be open.
type Range struct {
	Lower, Upper Limit
}

// Empty reports whether the cell has no bounds at all.
func (r Range) Empty() bool { return r.Lower.Op == Open && r.Upper.Op == Open }

// Band is one row of a class table.
type Band struct {
	Class    string // as printed: "C", "BC", "ZD"
	Name     string // what the ground is, in our words
	Vs       Range  // in Code.Unit; empty for a class that is not given by velocity
	N        Range  // blows per 0.3 m (per foot)
	Su       Range  // in Code.SuUnit
	Standing Standing
}

// Datum is where a code measures its averaging depth from.
type Datum uint8

// The datums.
const (
	DatumUnstated   Datum = iota // the code does not say; ground level is taken and noted
	DatumGround                  // the ground surface
	DatumFoundation              // the underside of the foundation (pile head, pile cap)
)

var datumWords = [...]string{"not stated (ground surface taken)", "ground surface", "underside of foundation"}

// String returns the words of the datum.
func (d Datum) String() string { return datumWords[d] }

// Code is one published classification.
type Code struct {
	ID         string  // "asce-7-16"
	Title      string  // "Minimum Design Loads …"
	Edition    string  // "ASCE/SEI 7-16 with Supplements 1 and 3"
	Region     string  // where it is used
	Clause     string  // of the classification: "ch. 20"
	Table      string  // "Table 20.3-1"
	Source     string  // where the table was carried over from
	Parameter  string  // "v̄s", as printed
	Depth      float64 // m over which the velocity is averaged; the largest if the code varies it
	DepthText  string  // as the code words it: "100 ft", "30 m", "H, at most 30 m"
	Datum      Datum
	DatumNote  string       // what the code says of the datum beyond Datum; "" if nothing
	Unit       profile.Unit // of the velocity bounds, as printed
	SuUnit     profile.Unit // of the strength bounds, as printed
	Standing   Standing     // of the table as a whole: the weakest of its rows
	Bands      []Band       // in the printed order, stiffest first
	Conditions []Condition  // in the order in which they are looked at
	Notes      []string     // what the print leaves open, in our words

	// decide replaces the ordinary band rule where the code's own is not one.
	decide func(*Code, Site) (Decision, error)
}

// Kind says what a condition does.
type Kind uint8

// The kinds of condition.
const (
	Special Kind = iota // puts the site in the class that needs a site-specific study
	Softer              // puts the site in a soft class whatever the average
	Barred              // bars the rock classes
)

// Condition is a rule beside the table that the average velocity does not
// settle.
type Condition struct {
	ID       string // "peat"; also the key of the fact in a notebook's ground:
	Kind     Kind
	Class    string // to which the site goes where the condition is met
	Text     string // the condition in our words, with its limits as printed
	Clause   string
	Standing Standing

	// Test compares the facts of the site with the printed limits.
	Test func(Site) Outcome
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

// Outcome is what a condition's test found.
type Outcome struct {
	State State
	Steps []Step         // the comparisons made, if any
	Notes []profile.Note // what was assumed
}

// Step is one comparison of a decision, in the unit of the code.
type Step struct {
	Text     string  `json:"text"`     // what was compared with what
	Clause   string  `json:"clause"`   // under which clause
	Value    float64 `json:"value"`    // in Unit
	Operator string  `json:"operator"` // as printed; – for a bound of a dash range
	Bound    float64 `json:"bound"`    // in Unit
	Unit     string  `json:"unit"`
	Holds    bool    `json:"holds"`
}

// Margin is the distance from the value to the nearest bound at which the
// class changes.
type Margin struct {
	ToClass string  // the class beyond the bound
	Bound   float64 // in Unit
	Unit    string
	Percent float64 // of the value: 100·(bound−value)/value; negative where the bound lies below
}

// ConditionResult is a condition with what became of it.
type ConditionResult struct {
	Condition *Condition
	Outcome
}

// Decision is a class with everything that led to it.
type Decision struct {
	Code       *Code
	Class      string
	Route      string   // "velocity"
	Thickness  float64  // m over which Velocity is the average
	Velocity   float64  // m/s
	Datum      float64  // m below ground level
	Basis      string   // of the velocities: a profile.Basis word, "mixed" or "extended"
	Standing   Standing // the weakest part used
	Margin     *Margin  // nil where the class does not hang on a bound of the average
	Steps      []Step
	Conditions []ConditionResult
	Notes      []profile.Note
	Unassessed []string // the text of each condition that was not assessed
}

// Site is a profile with what the code must know beside the velocities.
type Site struct {
	Profile         *profile.Profile
	Layers          []profile.Layer  // those to average: the profile's, or an extension of them
	Datum           profile.Optional // m below ground level from which to average; where not known, ground level
	FoundationDepth profile.Optional // m below ground level of the underside of the foundation
	Extended        bool             // Layers go on below the profile
	Ground          Ground
	Notes           []profile.Note // about Layers, carried into the decision
}

// Ground is what is known of a site beside its velocities. What is not
// known is listed by every decision as not assessed.
type Ground struct {
	Liquefiable Answer // liquefiable soil
	Sensitive   Answer // quick or highly sensitive clay
	Collapsible Answer // collapsible, weakly cemented soil

	Peat           Deposit // peat or highly organic clay
	HighPlasticity Deposit // clay of very high plasticity; PI as stated
	SoftClay       Deposit // soft clay; PI, water content and strength as stated
	ThickClay      Deposit // soft to medium stiff clay
}

// Answer is yes, no, or not known.
type Answer uint8

// The answers. The zero value is NotKnown.
const (
	NotKnown Answer = iota
	No
	Yes
)

// Deposit is the total thickness of one kind of ground, with the properties
// that a code may ask for.
type Deposit struct {
	Thickness    profile.Optional // m, ≥ 0
	PI           profile.Optional // %
	WaterContent profile.Optional // %
	Su           profile.Optional // kPa
}

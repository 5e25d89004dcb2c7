package siteclass

import "shearbook/profile"

// Decision is a class with everything that led to it.
type Decision struct {
	Code       *Code
	Class      string
	Route      string   // "velocity"
	Thickness  float64  // m over which Velocity is the average
	Velocity   float64  // m/s
	Datum      float64  // m below ground level from which Velocity is the average
	Basis      string   // of the velocities: a profile.Basis word, "mixed" or "extended"
	Standing   Standing // the weakest part used
	Margin     *Margin  // nil where the class does not hang on a bound of the average
	Steps      []Step
	Conditions []ConditionResult
	Notes      []profile.Note
	Unassessed []string // the text of each condition that was not assessed
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

// newStep compares v with the lower or the upper bound of a cell. The step's
// value is the bound where v is within one part in 10⁹ of it.
func newStep(text, clause string, v float64, bound Limit, lower bool, u profile.Unit) Step {
	return Step{Text: text, Clause: clause, Value: snap(v, bound.Value), Operator: bound.Op.String(),
		Bound: bound.Value, Unit: u.Name, Holds: bound.holds(v, lower)}
}

// String returns the step in a line: "the text: 640 < 600 ft/s: no (clause)".
func (s Step) String() string {
	outcome := "no"
	if s.Holds {
		outcome = "yes"
	}
	line := s.Text + ": " + numberBeside(s.Value, s.Bound) + " " + s.Operator + " " + number(s.Bound)
	if s.Unit != "" {
		line += " " + s.Unit
	}
	return line + ": " + outcome + " (" + s.Clause + ")"
}

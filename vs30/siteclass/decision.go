package siteclass

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// Decision is a class with everything that led to it.
type Decision struct {
	Code       *Code
	Class      string
	Row        string   // class of the row of the table that Class belongs to; another than Class only where the code makes its own designation (X361, in the row of XC)
	Classes    []string // every class that results where the code looks at several at once, stiffest first; nil where Class is the only one
	Route      string   // "velocity", "N", "Nch and su", "Nch", "su"; what the code's Routes name; "period" where the rules took the site period
	Thickness  float64  // m over which Velocity is the average, or to which the layers of another route go
	Velocity   float64  // m/s; 0 on a route that does not average it
	Datum      float64  // m below ground level from which the average is taken
	Basis      string   // of the velocities: a profile.Basis word, "mixed" or "extended"; "" on a route without them
	Averages   []Average
	Standing   Standing // the weakest part used
	Found      []Found  // what was held against the code's rules beside the average; nil for a code of bands
	Margin     *Margin  // nil where the class does not hang on a bound of an average
	Steps      []Step
	Conditions []ConditionResult
	Notes      []profile.Note
	Unassessed []string      // the text of each condition that was not assessed
	Others     []Alternative // the other routes that the data allow, in the code's order
}

// ClassWords returns the class, and where several result at once the others with
// it: "DE (with D and E)".
func (d *Decision) ClassWords() string { return ClassWords(d.Class, d.Classes) }

// ClassWords returns a class with the others of those that result at once.
func ClassWords(class string, all []string) string {
	others := slices.DeleteFunc(slices.Clone(all), func(other string) bool { return other == class })
	switch n := len(others); n {
	case 0:
		return class
	case 1:
		return class + " (with " + others[0] + ")"
	default:
		return class + " (with " + strings.Join(others[:n-1], ", ") + " and " + others[n-1] + ")"
	}
}

// Average is an average that a decision held against a column of the table.
type Average struct {
	Of        Measure
	Symbol    string  // as the code prints it: "v̄s", "N̄ch"
	Value     float64 // in Unit
	Unit      string
	Thickness float64 // m of the layers that it is the average of
	Class     string  // that it gives by itself
}

// Alternative is what a route gives that did not decide.
type Alternative struct {
	Route    string
	Class    string
	Averages []Average
	Standing Standing
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

// String returns the step in a line: "the text: 640 ft/s < 600 ft/s: no
// (clause)".
func (s Step) String() string {
	outcome := "no"
	if s.Holds {
		outcome = "yes"
	}
	return s.Text + ": " + s.Comparison() + ": " + outcome + " (" + s.Clause + ")"
}

// Comparison returns what was compared, as it is printed: "810.1 ft/s > 5,000
// ft/s"; of a bound of a printed range "810.1 ft/s, bound 600 ft/s". A value
// that is not the bound has digits enough to look different from it.
func (s Step) Comparison() string {
	if s.Operator == "" {
		return ""
	}
	unit := ""
	if s.Unit != "" {
		unit = " " + s.Unit
	}
	value, bound := besideBound(s.Value, s.Bound)+unit, number(s.Bound)+unit
	if s.Operator == operatorSigns[Dash] {
		return value + ", bound " + bound
	}
	return value + " " + s.Operator + " " + bound
}

// besideBound writes a value with one decimal, or three digits where it is
// smaller than one, and with as many more as it takes to tell it from bound.
func besideBound(v, bound float64) string {
	if v == math.Trunc(v) {
		return decimals(v, 0)
	}
	n := 1
	if a := math.Abs(v); a < 1 {
		n = 3
	}
	for ; n < 12 && !equal(v, bound) && decimals(v, n) == decimals(bound, n); n++ {
	}
	return decimals(v, n)
}

package report

import (
	"encoding/json"
	"io"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// Schema is the version of the JSON that Results writes. It grows when a
// field changes its meaning or goes away, not when one is added.
const Schema = 1

// Results is what results.json and `classify --format json` hold.
type Results struct {
	Schema       int      `json:"schema"`
	Confirmation string   `json:"confirmation"` // Caution
	Results      []Result `json:"results"`
}

// Result is one profile under one code.
type Result struct {
	Profile      string           `json:"profile"`
	Source       Source           `json:"source"`
	Code         string           `json:"code"`
	Edition      string           `json:"edition"`
	Class        string           `json:"class"`
	Route        string           `json:"route"`
	Depth        float64          `json:"depth_m"`         // thickness over which velocity_mps is averaged
	VelocitySI   *float64         `json:"velocity_mps"`    // the average that the code uses; null on a route that averages none
	Velocity     *Quantity        `json:"velocity"`        // the same in the code's unit
	Vs30         *float64         `json:"vs30_mps"`        // over 30 m below the same datum; null where the profile is too short
	DepthReached float64          `json:"depth_reached_m"` // by the survey, below ground level
	Datum        float64          `json:"datum_m"`         // below ground level
	Basis        string           `json:"basis"`
	Standing     string           `json:"standing"`
	Margin       *Margin          `json:"margin"` // null where the class does not hang on a bound
	Steps        []siteclass.Step `json:"steps"`
	Notes        []Note           `json:"notes"`
	Unassessed   []string         `json:"unassessed"`

	Classes  []string      `json:"classes,omitempty"`  // every class that results where the code looks at several at once
	Averages []Average     `json:"averages,omitempty"` // what was held against the table, on a route by N or su
	Found    []Quantity    `json:"found,omitempty"`    // what was held against the code's rules beside the average
	Others   []Alternative `json:"others,omitempty"`   // the other routes that the data allow
}

// Average is an average that a decision held against a column of the table.
type Average struct {
	Symbol    string  `json:"symbol"`
	Value     float64 `json:"value"`
	Unit      string  `json:"unit"`
	Thickness float64 `json:"thickness_m"`
	Class     string  `json:"class"` // that it gives by itself
}

// Alternative is what a route gives that did not decide.
type Alternative struct {
	Route    string    `json:"route"`
	Class    string    `json:"class"`
	Averages []Average `json:"averages"`
}

// Source is the file a profile was read from.
type Source struct {
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
}

// Quantity is a number with its unit.
type Quantity struct {
	Of    string  `json:"of,omitempty"` // what it is, where its place does not say
	Value float64 `json:"value"`
	Unit  string  `json:"unit"`
}

// Margin is the distance to the nearest bound at which the class changes.
type Margin struct {
	ToClass string  `json:"to_class"`
	Bound   float64 `json:"bound"`
	Unit    string  `json:"unit"`
	Percent float64 `json:"percent"` // 100·(bound−value)/value
}

// Note is a doubt that travels with a result.
type Note struct {
	ID   string `json:"id"`
	Text string `json:"text"`
}

// NewResult puts a decision into the form in which it leaves. vs30 is the
// average over 30 m below the decision's datum, nil where there is none.
func NewResult(p *profile.Profile, d siteclass.Decision, vs30 *float64) Result {
	r := Result{
		Profile:      p.Name,
		Code:         d.Code.ID,
		Edition:      d.Code.Edition,
		Class:        d.Class,
		Route:        d.Route,
		Depth:        d.Thickness,
		Vs30:         vs30,
		DepthReached: p.DepthReached(),
		Datum:        d.Datum,
		Basis:        d.Basis,
		Standing:     d.Standing.String(),
		Steps:        d.Steps,
		Notes:        []Note{},
		Unassessed:   d.Unassessed,
		Classes:      d.Classes,
	}
	if d.Velocity > 0 {
		r.VelocitySI = &d.Velocity
		r.Velocity = &Quantity{Value: d.Velocity / d.Code.Unit.Factor, Unit: d.Code.Unit.Name}
	} else {
		r.Averages = averages(d.Averages)
	}
	for _, f := range d.Found {
		r.Found = append(r.Found, Quantity{f.Of, f.Value, f.Unit})
	}
	for _, o := range d.Others {
		r.Others = append(r.Others, Alternative{o.Route, o.Class, averages(o.Averages)})
	}
	if p.Reading != nil {
		r.Source = Source{p.Reading.File, p.Reading.SHA256}
	}
	if d.Margin != nil {
		m := Margin(*d.Margin)
		r.Margin = &m
	}
	for _, n := range d.Notes {
		r.Notes = append(r.Notes, Note{n.ID, n.Text})
	}
	if r.Steps == nil {
		r.Steps = []siteclass.Step{}
	}
	if r.Unassessed == nil {
		r.Unassessed = []string{}
	}
	return r
}

func averages(of []siteclass.Average) []Average {
	out := []Average{}
	for _, a := range of {
		out = append(out, Average{a.Symbol, a.Value, a.Unit, a.Thickness, a.Class})
	}
	return out
}

// WriteResults writes results as indented JSON with a final newline.
func WriteResults(w io.Writer, results []Result) error {
	if results == nil {
		results = []Result{}
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(Results{Schema, Caution, results})
}

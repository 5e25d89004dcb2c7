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
	VelocitySI   float64          `json:"velocity_mps"`    // the average that the code uses
	Velocity     Quantity         `json:"velocity"`        // the same in the code's unit
	Vs30         *float64         `json:"vs30_mps"`        // over 30 m below the same datum; null where the profile is too short
	DepthReached float64          `json:"depth_reached_m"` // by the survey, below ground level
	Datum        float64          `json:"datum_m"`         // below ground level
	Basis        string           `json:"basis"`
	Standing     string           `json:"standing"`
	Margin       *Margin          `json:"margin"` // null where the class does not hang on a bound
	Steps        []siteclass.Step `json:"steps"`
	Notes        []Note           `json:"notes"`
	Unassessed   []string         `json:"unassessed"`
}

// Source is the file a profile was read from.
type Source struct {
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
}

// Quantity is a number with its unit.
type Quantity struct {
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
		VelocitySI:   d.Velocity,
		Velocity:     Quantity{d.Velocity / d.Code.Unit.Factor, d.Code.Unit.Name},
		Vs30:         vs30,
		DepthReached: p.DepthReached(),
		Datum:        d.Datum,
		Basis:        d.Basis,
		Standing:     d.Standing.String(),
		Steps:        d.Steps,
		Notes:        []Note{},
		Unassessed:   d.Unassessed,
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

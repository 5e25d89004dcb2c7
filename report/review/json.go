package review

import (
	"encoding/json"
	"io"

	"shearbook/report"
)

// Schema is the version of the JSON that WriteJSON and WriteRules write. It
// grows when a field changes its meaning or goes away, not when one is added.
const Schema = 1

// memoJSON is memo.json and what `review --format json` prints.
type memoJSON struct {
	Schema       int           `json:"schema"`
	Confirmation string        `json:"confirmation"` // report.Caution
	Submission   string        `json:"submission"`
	Kind         string        `json:"kind"`
	Code         string        `json:"code"`    // that the reviewer names; "" for that of each claim
	Outcome      string        `json:"outcome"` // "agrees", "differs" or "cannot be checked"
	Claims       []claimJSON   `json:"claims"`
	Findings     []findingJSON `json:"findings"`      // the weightiest first
	More         int           `json:"more_findings"` // that were not kept
	Files        []fileJSON    `json:"files"`         // that were read
	Department   string        `json:"department"`    // whose weights and limits these are; "" for the built-in ones
	Changes      []changeJSON  `json:"changed_rules"`
}

// claimJSON is one claim and what recomputing gave.
type claimJSON struct {
	Profile        string   `json:"profile"`
	Place          string   `json:"place"`
	ClaimedCode    string   `json:"claimed_code"`
	ClaimedClass   string   `json:"claimed_class"`
	ClaimedAverage string   `json:"claimed_average"` // as printed, with its unit
	Code           string   `json:"code"`            // under which it was recomputed; "" if none is known
	Class          string   `json:"class"`           // "" where it cannot be recomputed
	Average        *float64 `json:"velocity_mps"`    // null where there is none
	Depth          float64  `json:"depth_m"`
	Datum          float64  `json:"datum_m"`
	Agrees         bool     `json:"agrees"`
	Problem        string   `json:"problem"` // why it cannot be recomputed; "" where it was
}

type findingJSON struct {
	Rule     string      `json:"rule"`
	Weight   Weight      `json:"weight"`
	File     string      `json:"file"`
	Line     int         `json:"line"`   // from 1; 0 where unknown
	Column   int         `json:"column"` // likewise
	Cell     string      `json:"cell"`   // of a spreadsheet
	Profile  string      `json:"profile"`
	Layer    int         `json:"layer"` // from 1; 0 where it is about none
	Page     int         `json:"page"`  // of a PDF, likewise
	Section  string      `json:"section"`
	Text     string      `json:"text"`
	Claimed  string      `json:"claimed"`
	Found    string      `json:"found"`
	Causes   []causeJSON `json:"causes"` // the likeliest first
	Source   string      `json:"source"`
	Practice bool        `json:"common_practice"`
}

type causeJSON struct {
	ID    string `json:"id"`
	Text  string `json:"text"`
	Value string `json:"value"`
	Loose bool   `json:"possible_only"` // no average is claimed that could bear it out
}

type fileJSON struct {
	Name   string `json:"name"`
	Role   string `json:"role"`
	Size   int64  `json:"bytes"`
	SHA256 string `json:"sha256"`
}

type changeJSON struct {
	Rule string `json:"rule"`
	What string `json:"what"` // "weight" or the name of a limit
	From string `json:"from"`
	To   string `json:"to"`
}

// WriteJSON writes a review as indented JSON with a final newline. Its fields
// are those of memo.json:
//
//   - schema, confirmation, submission, kind, code, outcome;
//   - claims: one for each claim, what is claimed beside what was found;
//   - findings: rule, weight, place, what was claimed and found, the causes
//     that give what was claimed, the likeliest first, and the source;
//   - files: every file that was read, with its digest;
//   - department, changed_rules: weights and limits that are not the
//     built-in ones.
func WriteJSON(w io.Writer, r *Review) error {
	m := memoJSON{Schema: Schema, Confirmation: report.Caution, Submission: r.Submission.Name, Kind: r.Submission.Kind.String(),
		Outcome: r.Outcome.String(), More: r.More, Department: r.Desk.Rules.Department,
		Claims: []claimJSON{}, Findings: []findingJSON{}, Files: []fileJSON{}, Changes: changes(r.Desk.Rules)}
	if r.Desk.Code != nil {
		m.Code = r.Desk.Code.ID
	}
	for i := range r.Cases {
		m.Claims = append(m.Claims, r.Cases[i].json(r.Desk.tolerance()))
	}
	for i := range r.Findings {
		m.Findings = append(m.Findings, r.Findings[i].json())
	}
	for _, f := range r.Submission.Files {
		m.Files = append(m.Files, fileJSON{f.Name, f.Role, f.Size, f.SHA256})
	}
	return encode(w, m)
}

// tolerance is that of the rule on averages.
func (d *Desk) tolerance() float64 {
	for _, r := range d.Rules.rules() {
		if r.ID == "average" {
			return r.Limits[0].Value / 100
		}
	}
	return 0
}

func encode(w io.Writer, v any) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(v)
}

func (c *Case) json(tolerance float64) claimJSON {
	j := claimJSON{Profile: c.Claim.Profile, Place: c.place().Place.String(), ClaimedCode: c.Claim.Code,
		ClaimedClass: c.Claim.Class, ClaimedAverage: c.Claim.Average.Text, Agrees: c.Agrees(tolerance)}
	if c.Code != nil {
		j.Code = c.Code.ID
	}
	if c.Err != nil {
		j.Problem = c.Err.Error()
		return j
	}
	j.Class, j.Depth, j.Datum = c.Decision.Class, c.Decision.Thickness, c.Decision.Datum
	if v, _, _, ok := c.average(); ok {
		j.Average = &v
	}
	return j
}

func (f *Finding) json() findingJSON {
	j := findingJSON{Rule: f.Rule, Weight: f.Weight, File: f.Place.File, Line: f.Place.Line, Column: f.Place.Column,
		Cell: f.Place.Cell, Profile: f.Place.Profile, Layer: f.Place.Layer, Page: f.Place.Page, Section: f.Place.Section,
		Text: f.Text, Claimed: f.Claimed, Found: f.Found, Source: f.Source, Practice: f.Practice, Causes: []causeJSON{}}
	for _, c := range f.Causes {
		j.Causes = append(j.Causes, causeJSON(c))
	}
	return j
}

func changes(set Ruleset) []changeJSON {
	out := []changeJSON{}
	for _, c := range set.Changes {
		out = append(out, changeJSON(c))
	}
	return out
}

// WriteRules writes the rules of a set as JSON: schema, department, rules
// with their id, weight, summary, source, common_practice and limits (name,
// value, unit, meaning), and changed_rules.
func WriteRules(w io.Writer, set Ruleset) error {
	type limitJSON struct {
		Name    string  `json:"name"`
		Value   float64 `json:"value"`
		Unit    string  `json:"unit"`
		Meaning string  `json:"meaning"`
	}
	type ruleJSON struct {
		ID       string      `json:"id"`
		Weight   Weight      `json:"weight"`
		Summary  string      `json:"summary"`
		Source   string      `json:"source"`
		Practice bool        `json:"common_practice"`
		Limits   []limitJSON `json:"limits"`
	}
	rules := []ruleJSON{}
	for _, r := range set.rules() {
		j := ruleJSON{r.ID, r.Weight, r.Summary, r.Source, r.Practice, []limitJSON{}}
		for _, l := range r.Limits {
			j.Limits = append(j.Limits, limitJSON{l.Name, l.Value, l.Unit, l.Meaning})
		}
		rules = append(rules, j)
	}
	return encode(w, struct {
		Schema     int          `json:"schema"`
		Department string       `json:"department"`
		Rules      []ruleJSON   `json:"rules"`
		Changes    []changeJSON `json:"changed_rules"`
	}{Schema, set.Department, rules, changes(set)})
}

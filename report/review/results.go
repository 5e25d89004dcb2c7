package review

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode/utf8"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/extend"
)

// Limits of a results.json.
const (
	MaxResults     = 10_000
	MaxResultsFile = 16 << 20 // bytes
)

// Result is what a results.json says of one profile under one code. Its
// numbers are kept as they are printed there.
type Result struct {
	Profile, Code, Edition, Class, Basis string
	Source                               Digest

	Average, Depth, Vs30, Reached, Datum, Margin Number

	Extend     string // relation that the notes name; "" if none
	Unassessed []string
	Place      Place

	raw *resultJSON // nil of one that was not read
}

// resultJSON is one entry of results.json, as far as it is looked at.
type resultJSON struct {
	Profile string `json:"profile"`
	Source  struct {
		File   string `json:"file"`
		SHA256 string `json:"sha256"`
	} `json:"source"`
	Code    string      `json:"code"`
	Edition string      `json:"edition"`
	Class   string      `json:"class"`
	Basis   string      `json:"basis"`
	Average json.Number `json:"velocity_mps"`
	Depth   json.Number `json:"depth_m"`
	Vs30    json.Number `json:"vs30_mps"`
	Reached json.Number `json:"depth_reached_m"`
	Datum   json.Number `json:"datum_m"`
	Margin  *struct {
		ToClass string      `json:"to_class"`
		Bound   json.Number `json:"bound"`
		Unit    string      `json:"unit"`
		Percent json.Number `json:"percent"`
	} `json:"margin"`
	Route    string `json:"route"`
	Standing string `json:"standing"`
	Velocity *struct {
		Value json.Number `json:"value"`
		Unit  string      `json:"unit"`
	} `json:"velocity"`
	Steps *[]struct {
		Text  string `json:"text"`
		Holds bool   `json:"holds"`
	} `json:"steps"`
	Averages []report.Average `json:"averages"`
	Notes    []struct {
		ID   string `json:"id"`
		Text string `json:"text"`
	} `json:"notes"`
	Unassessed []string `json:"unassessed"`
}

// readResults reads a results.json.
func readResults(file string, data []byte) ([]Result, error) {
	at := profile.Place{File: file}
	fail := func(offset int64, hint, format string, args ...any) error {
		at.Line, at.Column = position(data, offset)
		return profile.Faults{profile.Faultf(at, hint, format, args...)}
	}
	if len(data) > MaxResultsFile {
		return nil, profile.Faults{profile.Faultf(at, "is this another file", "the file is larger than %d MiB", MaxResultsFile>>20)}
	}
	const hint = "take the results.json that `shearbook report` wrote"
	dec := json.NewDecoder(bytes.NewReader(data))
	if err := findArray(dec, "results"); err != nil {
		return nil, fail(dec.InputOffset(), hint, "the file is no results.json: %v", err)
	}
	var results []Result
	here := mark{data: data, line: 1, column: 1}
	for dec.More() {
		if len(results) == MaxResults {
			return nil, fail(dec.InputOffset(), "review it in parts", "the file holds more than %d results", MaxResults)
		}
		start := dec.InputOffset()
		var raw resultJSON
		if err := dec.Decode(&raw); err != nil {
			return nil, fail(offsetOf(err, dec), hint, "the file is no results.json: %s", plainJSON(err))
		}
		r, err := raw.result()
		if err != nil {
			return nil, fail(start, hint, "result %d: %v", len(results)+1, err)
		}
		r.Place.File = file
		r.Place.Line, r.Place.Column = here.to(start + int64(bytes.IndexByte(data[start:], '{')))
		r.Place.Profile = r.Profile
		r.Source.Place = r.Place
		r.raw = &raw
		results = append(results, r)
	}
	if _, err := dec.Token(); err != nil {
		return nil, fail(dec.InputOffset(), hint, "the file is no results.json: %s", plainJSON(err))
	}
	return results, nil
}

// findArray reads up to and with the [ of a key of the outermost object.
func findArray(dec *json.Decoder, key string) error {
	if t, err := dec.Token(); err != nil || t != json.Delim('{') {
		return errors.New("it does not begin with {")
	}
	for dec.More() {
		t, err := dec.Token()
		if err != nil {
			return errors.New(plainJSON(err))
		}
		if t == key {
			if t, err = dec.Token(); err != nil || t != json.Delim('[') {
				return fmt.Errorf("%s is not a list", key)
			}
			return nil
		}
		var skipped json.RawMessage
		if err := dec.Decode(&skipped); err != nil {
			return errors.New(plainJSON(err))
		}
	}
	return fmt.Errorf("it has no %s", key)
}

func plainJSON(err error) string {
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		return "it ends too early"
	}
	return strings.TrimPrefix(err.Error(), "json: ")
}

func offsetOf(err error, dec *json.Decoder) int64 {
	var syntax *json.SyntaxError
	if errors.As(err, &syntax) {
		return syntax.Offset
	}
	return dec.InputOffset()
}

// position returns the line and the column, both from 1, of an offset.
func position(data []byte, offset int64) (line, column int) {
	m := mark{data: data, line: 1, column: 1}
	return m.to(offset)
}

// mark is a place in a text that moves on, so that the text is gone through
// once.
type mark struct {
	data         []byte
	at           int64
	line, column int // of at, from 1
}

// to moves the mark on to an offset and returns its line and column.
func (m *mark) to(offset int64) (line, column int) {
	passed := m.data[m.at:max(m.at, min(offset, int64(len(m.data))))]
	if last := bytes.LastIndexByte(passed, '\n'); last >= 0 {
		m.line += bytes.Count(passed, []byte("\n"))
		m.column, passed = 1, passed[last+1:]
	}
	m.column += utf8.RuneCount(passed)
	m.at = max(m.at, min(offset, int64(len(m.data))))
	return m.line, m.column
}

// result checks one entry and keeps its numbers as they are printed.
func (j *resultJSON) result() (Result, error) {
	r := Result{Profile: j.Profile, Code: j.Code, Edition: j.Edition, Class: j.Class, Basis: j.Basis, Unassessed: j.Unassessed,
		Source: Digest{File: j.Source.File, SHA256: j.Source.SHA256}}
	percent := profile.Unit{Name: "%", Dimension: profile.Percent, Factor: 1}
	margin := json.Number("")
	if j.Margin != nil {
		margin = j.Margin.Percent
	}
	for _, f := range []struct {
		name string
		to   *Number
		from json.Number
		unit profile.Unit
	}{
		{"velocity_mps", &r.Average, j.Average, profile.MetrePerSecond}, {"depth_m", &r.Depth, j.Depth, profile.Metre},
		{"vs30_mps", &r.Vs30, j.Vs30, profile.MetrePerSecond}, {"depth_reached_m", &r.Reached, j.Reached, profile.Metre},
		{"datum_m", &r.Datum, j.Datum, profile.Metre}, {"percent", &r.Margin, margin, percent},
	} {
		if f.from == "" {
			continue
		}
		n, err := printed(string(f.from), f.unit)
		if err != nil || len(f.from) > longestNumber {
			return r, fmt.Errorf("%s %s is not a number", f.name, profile.Quote(string(f.from)))
		}
		*f.to = n
	}
	for _, n := range j.Notes {
		if n.ID == "extended" {
			r.Extend = relationIn(n.Text)
		}
	}
	return r, nil
}

// relationIn finds the relation that the note of an extension cites; the
// deepest velocity carried on where it cites none that is known.
func relationIn(text string) string {
	best := extend.Relation{ID: constantVelocity}
	carriedOn := strings.Contains(text, "is taken to go on unchanged")
	for _, r := range extend.All() {
		unchanged := r.ID == constantVelocity || r.ID == "asce-7-22" // Boore (2004) is cited for two relations
		if unchanged == carriedOn && len(r.Cite) > len(best.Cite) && strings.Contains(text, r.Cite) {
			best = *r
		}
	}
	return best.ID
}

// resultsDiffer compares the rest of results.json with what the data give
// under the code that it names.
func resultsDiffer(x *examination) {
	if x.Confirmation != nil && len(x.Results) > 0 && oneSpaced(*x.Confirmation) != oneSpaced(report.Caution) {
		x.add(Place{Place: profile.Place{File: x.Results[0].Place.File}}, "results.json does not carry the words on the confirmation of the class by an engineer", *x.Confirmation, report.Caution)
	}
	for i := range x.cases {
		c := &x.cases[i]
		r := c.Claim.result
		if r == nil || c.Entry == nil || c.Under == nil {
			continue
		}
		facts := c.Claim.Stated.facts()
		d, err := report.Classify(c.Entry.Profile, c.Under, facts)
		if err != nil {
			continue // told as unchecked
		}
		tell := func(name string, n Number, v float64, known bool) {
			if n.Known() && !(known && n.Means(v, noise)) {
				found := "none"
				if known {
					found = short(v/n.Unit.Factor, 9) + " " + n.Unit.Name
				}
				x.add(c.place(), "results.json says another "+name+" than the data give", n.Text, found)
			}
		}
		vs30 := report.Average30(c.Entry.Profile, d.Datum, facts)
		x.wholeResult(c, report.NewResult(c.Entry.Profile, d, vs30))
		if vs30 == nil {
			vs30 = new(float64)
		}
		tell("Vs30", r.Vs30, *vs30, *vs30 > 0)
		tell("averaging depth", r.Depth, d.Thickness, true)
		tell("depth reached", r.Reached, c.Entry.Profile.DepthReached(), true)
		tell("datum", r.Datum, d.Datum, true)
		if d.Margin != nil {
			tell("margin", r.Margin, d.Margin.Percent, true)
		} else {
			tell("margin", r.Margin, 0, false)
		}
		if r.Basis != d.Basis {
			x.add(c.place(), "results.json says another basis of the velocities than the data give", r.Basis, d.Basis)
		}
		left := slices.DeleteFunc(slices.Clone(d.Unassessed), func(open string) bool { return slices.Contains(r.Unassessed, open) })
		if len(left) > 0 {
			x.add(c.place(), "results.json leaves out what was not assessed: "+strings.Join(left, "; "), "", "")
		}
	}
}

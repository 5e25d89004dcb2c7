package batch

import (
	"bytes"
	"errors"
	"fmt"
	"slices"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// unit is a profile, or a file that could not be read.
type unit struct {
	file    string
	line    int
	name    string           // of the profile; "" of a file
	profile *profile.Profile // nil where it could not be read
	faults  profile.Faults   // why it could not
	notes   []profile.Note   // that are told with it and are not its own
	setting *setting
	data    func() []byte // of its file, for a report
	beside  bool          // another profile of the file is at fault
	extract bool          // data is not the whole of it
	plain   *fast         // that read it; nil where the ordinary reader did
}

// setting is what a unit is classified under: what the job says, unless a
// manifest says otherwise.
type setting struct {
	codes    []*siteclass.Code
	facts    report.Facts
	position profile.Position // stated beside the file; zero where none is
	note     string           // likewise
}

// clerk writes units into the tables. Each worker has its own.
type clerk struct {
	job     *Job
	summary []byte
	faults  []byte
	tally   Tally
	rows    []int // of each unit, where it is not as many as the job has codes
	made    int   // reports

	results []result
	text    []byte // room for one

	file string // whose cell is cell, with a comma
	cell []byte
}

// fileCell is the cell of a file with a comma behind it, which is the same for
// many rows.
func (c *clerk) fileCell(name string) []byte {
	if c.cell == nil || c.file != name {
		c.file, c.cell = name, append(appendCell(nil, name), ',')
	}
	return c.cell
}

// result is a unit under one code.
type result struct {
	row   Row
	notes []profile.Note // of the code
	fell  bool           // it has the note reversal, which is not among notes
	fault *profile.Fault
}

// unit writes the rows of a unit. The ordinal counts all units from 0; it
// names the report.
func (c *clerk) unit(u *unit, ordinal int) error {
	c.results = c.results[:0]
	for i := range u.setting.codes {
		c.results = append(c.results, result{})
		c.classify(u, i, &c.results[i])
	}
	c.own(u)
	if err := c.report(u, ordinal); err != nil {
		return err
	}
	c.write(u)
	return nil
}

// classify makes the row of a unit under code number i.
func (c *clerk) classify(u *unit, i int, r *result) {
	code := u.setting.codes[i]
	row := &r.row
	row.File, row.Line, row.Profile, row.Code, row.Position = u.file, u.line, u.name, code.ID, u.setting.position
	if u.profile == nil {
		row.Flags, row.Problem = Failed, problem(u.faults)
		return
	}
	p := u.profile
	if row.Position == (profile.Position{}) {
		row.Position = p.Position
	}
	if u.plain != nil && u.plain.decide(c, u, i, r) {
		return
	}
	row.DepthReached = p.DepthReached()
	d, err := report.Classify(p, code, u.setting.facts)
	if err != nil {
		f := report.Failure(p, code, err)
		row.Flags, row.Problem, r.fault = Failed, f.Text, &f
		if short := (*vs30.ShortError)(nil); errors.As(err, &short) {
			row.Flags |= Shallow
		}
		return
	}
	row.Class, row.Route, row.Velocity, row.Depth, row.Datum = d.Class, d.Route, d.Velocity, d.Thickness, d.Datum
	row.Basis, row.Standing = d.Basis, d.Standing.String()
	row.Vs30 = c.vs30(u, d.Datum)
	if d.Margin != nil {
		row.ToClass, row.Margin = d.Margin.ToClass, d.Margin.Percent
	}
	r.notes = slices.DeleteFunc(d.Notes[:len(d.Notes)-len(p.Notes)], func(n profile.Note) bool { return standing(n.ID) })
	c.flag(u, r)
}

// flag counts the notes of a row and sets its flags.
func (c *clerk) flag(u *unit, r *result) {
	r.row.Notes = len(r.notes)
	r.row.Flags = c.flags(r.row.ToClass, r.row.Margin, r.row.Datum+r.row.Depth-r.row.DepthReached)
	for i := range r.notes {
		r.row.Flags |= flagOf(r.notes[i].ID)
	}
	for i := range u.profile.Notes {
		r.row.Flags |= flagOf(u.profile.Notes[i].ID)
	}
}

// vs30 is the average of a unit over 30 m, 0 where there is none.
func (c *clerk) vs30(u *unit, datum float64) float64 {
	v := report.Average30(u.profile, datum, u.setting.facts)
	if v == nil {
		return 0
	}
	return *v
}

// flags are those that numbers give: the margin in percent to another class, ""
// for none, and how many metres are missing to the depth that the code averages
// over.
func (c *clerk) flags(toClass string, margin, missing float64) Flags {
	var f Flags
	if near := c.job.near(); toClass != "" && margin >= -near && margin <= near {
		f |= NearBound
	}
	if missing > vs30.Touching {
		f |= Shallow
	}
	return f
}

// standing reports whether a note says the same of every profile under a code:
// whose table it is, how well it is known, where it starts to measure. Such
// notes stand in the summary, once.
func standing(id string) bool {
	switch id {
	case "adopted", "superseded", "standing", "own-table", "datum-assumed", "datum-other", "datum-foundation", "averaging-assumed":
		return true
	}
	return false
}

// flagOf is the flag that a note raises.
func flagOf(id string) Flags {
	switch id {
	case "reversal", "refraction-reversal", "not-improving":
		return Reversed
	case "correlated", "correlated-classes":
		return Correlated
	case "extended", "extension-rule", "shallow-data", "half-space", "below-depth-reached":
		return Shallow
	case "manifest", "foundation-assumed":
		return 0
	}
	return Odd
}

// own counts the faults and notes that are the unit's own under its first
// code.
func (c *clerk) own(u *unit) {
	for i := range c.results {
		r := &c.results[i]
		if r.fault != nil {
			r.row.Faults = 1
		}
	}
	first := &c.results[0].row
	first.Notes += len(u.notes)
	if u.setting.note != "" {
		first.Notes++
	}
	first.Faults += len(u.faults)
	if u.profile != nil {
		first.Notes += len(u.profile.Notes)
	}
}

// write writes the rows, and what is to be known beside them.
func (c *clerk) write(u *unit) {
	c.faults = appendFaults(c.faults, u.faults, u.name, "")
	if !c.job.FaultsAlone {
		c.notes(u)
	}
	failed, flags := false, Flags(0)
	for i := range c.results {
		r := &c.results[i]
		if c.job.FaultsAlone {
			r.row.Notes = 0
		}
		c.summary = appendRest(append(c.summary, c.fileCell(u.file)...), &r.row)
		if r.fault != nil {
			c.faults = appendFaults(c.faults, profile.Faults{*r.fault}, u.name, r.row.Code)
		}
		if !c.job.FaultsAlone {
			c.notesUnder(u, r)
		}
		c.tally.add(r.row.Code, r.row.Class, 1)
		failed, flags = failed || r.row.Class == "", flags|r.row.Flags
	}
	c.count(len(c.results), failed, flags)
}

// notes writes the notes on a unit that hold under every code.
func (c *clerk) notes(u *unit) {
	c.faults = appendNotes(c.faults, u.notes, u.file, "", "")
	if u.profile != nil {
		c.faults = appendNotes(c.faults, u.profile.Notes, u.file, u.name, "")
	}
	if text := u.setting.note; text != "" {
		c.faults = appendNotes(c.faults, []profile.Note{{ID: "manifest", Text: text}}, u.file, u.name, "")
	}
}

// notesUnder writes the notes on a unit under one code.
func (c *clerk) notesUnder(u *unit, r *result) {
	if r.fell {
		c.reversal(u, r)
	}
	c.faults = appendNotes(c.faults, r.notes, u.file, u.name, r.row.Code)
}

// reversal writes the note on a profile whose velocity falls with depth, as
// appendFault does.
func (c *clerk) reversal(u *unit, r *result) {
	var first int
	layers := u.profile.Layers
	c.text, first = siteclass.AppendReversal(c.text[:0], layers, r.row.Datum, r.row.Datum+r.row.Depth)
	b := append(append(c.faults, "note,"...), c.fileCell(u.file)...)
	b = append(appendWhole(b, int(layers[first].Line)), ',')
	b = append(appendWhole(b, int(layers[first].Column)), ",,"...)
	b = append(appendCell(b, u.name), ',')
	b = append(appendCell(b, r.row.Code), ",reversal,"...)
	if bytes.IndexByte(c.text, ',') >= 0 { // there is nothing else in it that asks for quotes
		b = append(append(append(b, '"'), c.text...), '"')
	} else {
		b = append(b, c.text...)
	}
	c.faults = append(b, ",\n"...)
}

// count counts a unit.
func (c *clerk) count(rows int, failed bool, flags Flags) {
	c.tally.Units++
	if failed {
		c.tally.Failed++
	}
	if flags != 0 {
		c.tally.Flagged++
	}
	c.rows = append(c.rows, rows)
}

func appendFaults(b []byte, faults profile.Faults, name, code string) []byte {
	for _, f := range faults {
		b = appendFault(b, &Fault{Severity: "fault", Place: f.Place, Profile: name, Code: code, Text: f.Text, Hint: f.Hint})
	}
	return b
}

func appendNotes(b []byte, notes []profile.Note, file, name, code string) []byte {
	for _, n := range notes {
		if n.Place.File == "" {
			n.Place.File = file
		}
		b = appendFault(b, &Fault{Severity: "note", Place: n.Place, Profile: name, Code: code, ID: n.ID, Text: n.Text})
	}
	return b
}

// problem is the first fault, and how many more there are.
func problem(faults profile.Faults) string {
	switch n := len(faults); n {
	case 0:
		return "it cannot be read"
	case 1:
		return faults[0].Text
	default:
		return fmt.Sprintf("%s (and %s)", faults[0].Text, profile.Plural(n-1, "more fault"))
	}
}

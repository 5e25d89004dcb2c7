package notebook

import (
	"fmt"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

var titleWorking = Working{
	Summary:  "The title block: project, reference, client, who prepared it, date, revision, location.",
	Example:  "",
	evaluate: evaluateTitle,
}

func evaluateTitle(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	m.rest()
	h := ev.nb.Header
	title := h.Title
	if title == "" {
		title = "Seismic site classification"
	}
	if ev.doc.Title == "" {
		ev.doc.Title = title
	}
	t := &report.TitleBlock{Title: title}
	for _, f := range []struct{ label, value string }{
		{"Project", h.Project}, {"Reference", h.Reference}, {"Client", h.Client},
		{"Prepared by", h.PreparedBy}, {"Date", h.Date}, {"Revision", h.Revision}, {"Location", h.place()},
	} {
		if f.value == "" {
			f.value = "not stated"
		}
		t.Fields = append(t.Fields, report.Field{Label: f.label, Value: words(f.value)})
	}
	return one(t)
}

// place words where the site is.
func (h Header) place() string {
	text := h.Location
	if p := positionText(h.Position); p != "" {
		if text != "" {
			text += "; "
		}
		text += p
	}
	return text
}

// positionText is a position in degrees, with its compass letters; "" if it
// is not known.
func positionText(p profile.Position) string {
	if !p.Latitude.Known || !p.Longitude.Known {
		return ""
	}
	return degreesText(p.Latitude.Value, "N", "S") + ", " + degreesText(p.Longitude.Value, "E", "W")
}

func degreesText(v float64, positive, negative string) string {
	if v < 0 {
		return shortest(-v, 6) + "° " + negative
	}
	return shortest(v, 6) + "° " + positive
}

var summaryWorking = Working{
	Summary: "The answer in a box, one for each profile: class, code, average, depth, basis, distance to the next class, standing; and the caution.",
	Keys: []Key{ofKey,
		{"code", "a code of `shearbook codes`, or a list; the front matter's if left out"},
	},
	Example:  "of: L1\n",
	evaluate: evaluateSummary,
}

// maxBoxes is how many summaries stand in boxes of their own before a table
// takes their place.
const maxBoxes = 3

func evaluateSummary(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	codes := ev.codes(&m, "code")
	m.rest()
	var decided []siteclass.Decision
	var of []*site
	for _, s := range sites {
		for _, code := range codes {
			if d, ok := ev.decide(s, code, s.entry.place); ok {
				decided, of = append(decided, d), append(of, s)
			}
		}
	}
	var blocks []report.Block
	if len(decided) > maxBoxes {
		blocks = one(ev.summaryTable(of, decided))
	} else {
		for i, d := range decided {
			blocks = append(blocks, ev.summaryBox(of[i], d))
		}
	}
	ev.cautioned = true
	return append(blocks, cautionBox())
}

func (ev *evaluation) summaryBox(s *site, d siteclass.Decision) *report.Summary {
	p := s.profile
	method := p.Survey.Method
	if method == "" {
		method = "method not stated"
	}
	box := &report.Summary{Heading: "Profile " + p.Name, Label: "Site class", Answer: d.ClassWords()}
	add := func(label, value string, notes ...profile.Note) {
		box.Fields = append(box.Fields, report.Field{Label: label, Value: append(words(value), ev.refs(notes)...)})
	}
	add("Code", d.Code.Edition+", "+d.Code.Table)
	if d.Velocity > 0 {
		add("Average velocity", ev.both(d.Velocity), averageNotes(d)...)
		add("Averaged over", ev.bothLengths(d.Thickness)+" "+ev.below(d.Datum))
	} else {
		add("By "+d.Route, ev.averages(d.Averages), averageNotes(d)...)
	}
	for _, f := range d.Found {
		add(f.Of, foundText(f))
	}
	if d.Basis != "" {
		method += "; velocities " + d.Basis
	}
	add("How measured", method+"; reached "+ev.bothLengths(p.DepthReached()))
	add("Next class", marginField(d), otherNotes(d)...)
	add("Standing of the table", d.Standing.String())
	if n := len(d.Unassessed); n > 0 {
		add("Not assessed", fmt.Sprintf("%s of the code's conditions; see the classification", count(n, "one", "%d")))
	}
	return box
}

func foundText(f siteclass.Found) string {
	value := shortest(f.Value, 3) + " " + f.Unit
	if f.AtLeast {
		return "more than " + value
	}
	return value
}

func count(n int, single, many string) string {
	if n == 1 {
		return single
	}
	return fmt.Sprintf(many, n)
}

func marginField(d siteclass.Decision) string {
	if d.Margin == nil {
		return "does not hang on one bound"
	}
	return d.Margin.ToClass + ", if " + MarginOf(d.Margin) + " were " + MarginText(d.Margin) + " (bound " +
		shortest(d.Margin.Bound, 3) + " " + d.Margin.Unit + ")"
}

// otherNotes are the notes of a decision that are not about its average.
func otherNotes(d siteclass.Decision) []profile.Note {
	var notes []profile.Note
	about := averageNotes(d)
	for _, n := range d.Notes {
		if !holds(about, n) {
			notes = append(notes, n)
		}
	}
	return notes
}

// averageCell is the average velocity in the report's unit, a dash where the
// route has none.
func averageCell(ev *evaluation, d siteclass.Decision) string {
	if d.Velocity == 0 {
		return "–"
	}
	return fixed(d.Velocity/ev.system.velocity().Factor, 1)
}

// summaryTable is the summary of many decisions.
func (ev *evaluation) summaryTable(of []*site, decided []siteclass.Decision) *report.Table {
	t := &report.Table{
		Caption: words("Site classes"),
		Columns: []report.TableColumn{column("Profile", report.AlignLeft), column("Code", report.AlignLeft), column("Class", report.AlignLeft),
			column("Average ("+ev.system.velocity().Name+")", report.AlignDecimal), column("Over ("+ev.system.length().Name+")", report.AlignDecimal),
			column("Basis", report.AlignLeft), wide("Next class"), column("Standing", report.AlignLeft)},
	}
	for i, d := range decided {
		next := "–"
		if d.Margin != nil {
			next = d.Margin.ToClass + ", " + MarginText(d.Margin)
		}
		r := row(of[i].profile.Name, d.Code.ID, "", averageCell(ev, d),
			ev.length(d.Thickness), d.Basis, next, d.Standing.String())
		r.Cells[2] = append(strong(d.ClassWords()), ev.refs(d.Notes)...)
		t.Rows = append(t.Rows, r)
	}
	return t
}

var surveyWorking = Working{
	Summary:  "How each profile was measured: method, date, operator, position, depth reached, basis.",
	Keys:     []Key{ofKey},
	Example:  "of: L1\n",
	evaluate: evaluateSurvey,
}

func evaluateSurvey(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	m.rest()
	t := &report.Table{Columns: []report.TableColumn{column("", report.AlignLeft)}}
	for _, s := range sites {
		t.Columns = append(t.Columns, wide("Profile "+s.profile.Name))
	}
	for _, f := range ev.surveyFields() {
		cells := []string{f.label}
		for _, s := range sites {
			text := f.of(s)
			if text == "" {
				text = "not stated"
			}
			cells = append(cells, text)
		}
		t.Rows = append(t.Rows, row(cells...))
	}
	return one(t)
}

type surveyField struct {
	label string
	of    func(*site) string
}

func (ev *evaluation) surveyFields() []surveyField {
	known := func(o profile.Optional, after string) string {
		if !o.Known {
			return ""
		}
		return ev.bothLengths(o.Value) + after
	}
	return []surveyField{
		{"Method", func(s *site) string { return s.profile.Survey.Method }},
		{"Basis of the velocities", func(s *site) string { return basisOf(s.profile) }},
		{"Date", func(s *site) string { return s.profile.Survey.Date }},
		{"Operator", func(s *site) string { return s.profile.Survey.Operator }},
		{"Location", func(s *site) string { return s.profile.Survey.Location }},
		{"Position", func(s *site) string {
			if text := positionText(s.profile.Position); text != "" {
				return text
			}
			return positionText(ev.nb.Header.Position)
		}},
		{"Ground level", func(s *site) string {
			level := s.profile.Survey.GroundLevel
			if !level.Known {
				level = ev.nb.Header.GroundLevel
			}
			return known(level, "")
		}},
		{"Water table", func(s *site) string { return known(s.profile.Survey.WaterTable, " below ground level") }},
		{"Depth reached", func(s *site) string {
			text := ev.bothLengths(s.profile.DepthReached())
			if s.profile.Survey.DepthReached == 0 {
				text += ", the lowest boundary of the profile; not stated by the survey"
			}
			return text
		}},
		{"Layers", func(s *site) string { return fmt.Sprint(len(s.profile.Layers)) }},
		{"File", func(s *site) string { return s.entry.File }},
	}
}

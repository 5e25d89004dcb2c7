package batch

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
)

// SummaryWorkings are the workings that a template of a batch's summary may
// use beside those of every notebook, each with what it puts into the pages.
// They are for telling; only Derive evaluates them.
func SummaryWorkings() []notebook.OwnWorking { return (&overview{opt: &DeriveOptions{}}).workings() }

// workings are the workings over what has been gathered.
func (o *overview) workings() []notebook.OwnWorking {
	plain := func(f func() []report.Block) func(map[string]string) ([]report.Block, error) {
		return func(map[string]string) ([]report.Block, error) { return f(), nil }
	}
	return []notebook.OwnWorking{
		{Name: "batch-title", Summary: "The title block: project, who prepared it, date, codes.", Evaluate: plain(o.titleBlock)},
		{Name: "batch-overview", Summary: "How many profiles there are, how many failed, how many are to be looked at and why.", Evaluate: plain(o.overviewBox)},
		{Name: "batch-classes", Summary: "For each code, how many profiles each class has, with their averages.", Evaluate: plain(o.classTables)},
		{Name: "batch-map", Summary: "For each code, a map of the profiles, the class by shape and colour; one more for each projected grid.", Evaluate: o.maps},
		{Name: "batch-histogram", Summary: "For each code, how many averages lie where, against the bounds of the classes.", Evaluate: o.histograms},
		{Name: "batch-list", Summary: "The profiles with a flag, worst first.",
			Keys: []notebook.Key{
				{Name: "flag", Meaning: "one of: " + strings.Join(FlagWords[:], ", ")},
				{Name: "rows", Meaning: fmt.Sprintf("how many are listed, at most %d; %d if left out", mostListed, usualRows)},
			}, Evaluate: o.listed},
		{Name: "batch-notes", Summary: "What the notes of faults.csv say, with how often.", Evaluate: plain(o.noteTable)},
		{Name: "batch-codes", Summary: "What holds for every profile under each code: table, standing, datum, conditions that were not assessed.", Evaluate: plain(o.codeNotes)},
		{Name: "batch-record", Summary: "What was done: the inputs with their digests, the settings, the version, the command.", Evaluate: plain(o.record)},
	}
}

// usualRows is how many rows a list has.
const usualRows = 20

func words(text string) []report.Inline {
	if text == "" {
		return nil
	}
	return []report.Inline{report.Text(text)}
}

func paragraph(text string) *report.Paragraph { return &report.Paragraph{Inline: words(text)} }

func blockHeading(level int, text string) *report.Heading {
	return &report.Heading{Level: level, Inline: words(text)}
}

func column(header string, align report.Align) report.TableColumn {
	return report.TableColumn{Header: words(header), Align: align}
}

func wide(header string) report.TableColumn {
	return report.TableColumn{Header: words(header), Wide: true}
}

func tableRow(cells ...string) report.TableRow {
	r := report.TableRow{}
	for _, c := range cells {
		r.Cells = append(r.Cells, words(c))
	}
	return r
}

// stated is a text, or that there is none.
func stated(text string) string {
	if text == "" {
		return "not stated"
	}
	return text
}

func (o *overview) titleBlock() []report.Block {
	var codes []string
	for _, t := range o.counted() {
		codes = append(codes, t.name())
	}
	t := &report.TitleBlock{Title: o.opt.title()}
	for _, f := range []struct{ label, value string }{
		{"Project", o.opt.Project}, {"Prepared by", o.opt.PreparedBy}, {"Date", o.opt.Date}, {"Codes", strings.Join(codes, "; ")},
	} {
		t.Fields = append(t.Fields, report.Field{Label: f.label, Value: words(stated(f.value))})
	}
	return []report.Block{t}
}

// name is what a code is called in the pages.
func (t *tally) name() string {
	if t.code == nil {
		return t.id
	}
	return t.code.Edition
}

// flagName and flagText say what a flag is called and what it means.
func flagName(i int) string {
	return [flagKinds]string{"Failed", "Near a bound", "Shallow", "Reversed", "Correlated", "Odd"}[i]
}

func (o *overview) flagText(i int) string {
	return [flagKinds]string{
		"no class could be given",
		"the average lies within " + shortest(o.opt.near(), 2) + " % of a bound",
		"the survey ends above the averaging depth",
		"a softer layer lies under a stiffer one",
		"a velocity was estimated, not measured",
		"another doubt stands in faults.csv",
	}[i]
}

func (o *overview) overviewBox() []report.Block {
	box := &report.Summary{Heading: "The whole batch", Label: "Profiles", Answer: strconv.Itoa(o.units)}
	add := func(label, value string) {
		box.Fields = append(box.Fields, report.Field{Label: label, Value: words(value)})
	}
	add("Read from", profile.Plural(o.sourceCount, "file"))
	add("Rows", fmt.Sprintf("%d in summary.csv, one a profile and code; a file that could not be read counts as a profile", o.rows))
	for i, n := range o.flags {
		add(flagName(i), o.share(n, o.units)+": "+o.flagText(i))
	}
	add("None of these", o.share(o.units-o.flagged, o.units))
	add("Position known", fmt.Sprintf("%d in degrees, %d by a projected grid alone, %d not at all", o.degrees, o.grid, o.none))
	var bases []string
	for _, b := range o.bases {
		bases = append(bases, fmt.Sprintf("%s %d", b.name, b.n))
	}
	add("Basis, in rows", stated(strings.Join(bases, ", ")))
	return []report.Block{box}
}

// share is a count with its part of the whole.
func (o *overview) share(n, of int) string {
	if n == 0 {
		return "0"
	}
	return strconv.Itoa(n) + " (" + percent(n, of) + " %)"
}

// percent is a part in percent to a tenth.
func percent(n, of int) string {
	if of == 0 {
		return "0.0"
	}
	return strconv.FormatFloat(100*float64(n)/float64(of), 'f', 1, 64)
}

// shortest prints a number with at most so many decimals.
func shortest(v float64, digits int) string {
	p := math.Pow(10, float64(digits))
	return strconv.FormatFloat(math.Round(v*p)/p+0, 'f', -1, 64)
}

// velocityUnit and lengthUnit are those of the pages.
func (o *overview) velocityUnit() profile.Unit {
	if o.opt.US {
		return profile.FootPerSecond
	}
	return profile.MetrePerSecond
}

func (o *overview) lengthUnit() profile.Unit {
	if o.opt.US {
		return profile.FootUnit
	}
	return profile.Metre
}

// velocity prints a velocity in the unit of the pages, a dash where there is
// none.
func (o *overview) velocity(v float64) string {
	if !(v > 0) {
		return "–"
	}
	return strconv.FormatFloat(v/o.velocityUnit().Factor, 'f', 1, 64)
}

func (o *overview) length(v float64) string { return shortest(v/o.lengthUnit().Factor, 2) }

// headed puts a heading over the blocks of a code where there are several.
func (o *overview) headed(t *tally, blocks ...report.Block) []report.Block {
	if len(o.counted()) < 2 || len(blocks) == 0 {
		return blocks
	}
	return append([]report.Block{blockHeading(3, t.name())}, blocks...)
}

func (o *overview) classTables() []report.Block {
	var blocks []report.Block
	for _, t := range o.counted() {
		blocks = append(blocks, o.headed(t, o.classTable(t))...)
	}
	return blocks
}

func (o *overview) classTable(t *tally) *report.Table {
	unit := o.velocityUnit().Name
	table := &report.Table{
		Caption: words("Profiles by class under " + t.name()),
		Columns: []report.TableColumn{column("Class", report.AlignLeft), wide("Ground"), column("Profiles", report.AlignRight), column("%", report.AlignDecimal),
			column("Averages from ("+unit+")", report.AlignDecimal), column("to ("+unit+")", report.AlignDecimal)},
	}
	for _, c := range t.classes {
		band := t.bandOf(c.name)
		if c.n == 0 && band == nil {
			continue
		}
		name := ""
		if band != nil {
			name = band.Name
		}
		table.Rows = append(table.Rows, tableRow(c.name, name, strconv.Itoa(c.n), percent(c.n, t.rows), o.velocity(c.low), o.velocity(c.high)))
	}
	if t.failed > 0 {
		table.Rows = append(table.Rows, tableRow("none", "no class could be given", strconv.Itoa(t.failed), percent(t.failed, t.rows), "–", "–"))
	}
	sum := tableRow("All", "", strconv.Itoa(t.rows), percent(t.rows, t.rows), o.velocity(t.low), o.velocity(t.high))
	sum.Emphasis = true
	table.Rows = append(table.Rows, sum)
	if t.designated {
		table.Notes = append(table.Notes, words("A designation that is the velocity itself counts in the row that its velocity lies in."))
	}
	return table
}

// bandOf is the row of the code's table of a class, nil if it has none.
func (t *tally) bandOf(class string) *siteclass.Band {
	if t.code == nil {
		return nil
	}
	i := slices.IndexFunc(t.code.Bands, func(b siteclass.Band) bool { return b.Class == class })
	if i < 0 {
		return nil
	}
	return &t.code.Bands[i]
}

// listed is the list of a flag.
func (o *overview) listed(keys map[string]string) ([]report.Block, error) {
	i := slices.Index(FlagWords[:], keys["flag"])
	if i < 0 {
		return nil, notebook.OwnFault("it is one of: "+strings.Join(FlagWords[:], ", "), "flag is %q", keys["flag"])
	}
	rows := usualRows
	if text, ok := keys["rows"]; ok {
		n, err := strconv.Atoi(text)
		if err != nil || n < 1 || n > mostListed {
			return nil, notebook.OwnFault(fmt.Sprintf("give a number from 1 to %d", mostListed), "rows is %q", text)
		}
		rows = n
	}
	l := o.lists[i]
	if l == nil || l.n == 0 {
		return []report.Block{paragraph("None.")}, nil
	}
	return []report.Block{o.listTable(l, rows)}, nil
}

// listTable is a list as a table.
func (o *overview) listTable(l *list, rows int) *report.Table {
	columns := o.listColumns(l)
	t := &report.Table{Compact: true}
	for _, c := range columns {
		t.Columns = append(t.Columns, c.TableColumn)
	}
	told := 0
	for _, e := range l.entries[:min(rows, len(l.entries))] {
		var cells []string
		for _, c := range columns {
			cells = append(cells, c.of(e))
		}
		t.Rows = append(t.Rows, tableRow(cells...))
		told += len(e.codes)
	}
	order := "Worst first: " + [flagKinds]string{"most faults", "nearest to the bound", "most metres missing", "softest average", "softest average", "most notes"}[kindOf(l.flag)] + "."
	if told < l.n {
		order += fmt.Sprintf(" And %s in summary.csv, with the flag %q.", moreRows(l.n-told), FlagWords[kindOf(l.flag)])
	}
	t.Notes = [][]report.Inline{words(order)}
	return t
}

func moreRows(n int) string {
	if n == 1 {
		return "1 more row"
	}
	return fmt.Sprintf("%d more rows", n)
}

func kindOf(flag Flags) int {
	for i := range flagKinds {
		if flag == 1<<i {
			return i
		}
	}
	panic(fmt.Sprintf("batch: %d is not one flag", flag))
}

// listColumn is a column of a list.
type listColumn struct {
	report.TableColumn
	of func(*entry) string
}

func (o *overview) listColumns(l *list) []listColumn {
	unit := o.velocityUnit().Name
	place := listColumn{column("At", report.AlignLeft), func(e *entry) string { return profile.Place{File: e.File, Line: e.Line}.String() }}
	code := listColumn{column("Code", report.AlignLeft), func(e *entry) string { return strings.Join(e.codes, ", ") }}
	class := listColumn{column("Class", report.AlignLeft), func(e *entry) string { return dash(e.Class) }}
	average := listColumn{column("Average ("+unit+")", report.AlignDecimal), func(e *entry) string { return o.velocity(e.Velocity) }}
	why := listColumn{wide("Why"), func(e *entry) string { return dash(shortened(withoutReference(cmp.Or(e.note, e.Problem)))) }}

	columns := []listColumn{{column("Profile", report.AlignLeft), func(e *entry) string { return dash(shortened(e.Profile)) }}, place}
	if len(o.counted()) > 1 {
		columns = append(columns, code)
	}
	switch l.flag {
	case Failed:
		why.of = func(e *entry) string { return shortened(e.Problem) }
		return append(columns, why)
	case NearBound:
		return append(columns, class, average,
			listColumn{column("Other class", report.AlignLeft), func(e *entry) string { return e.ToClass }},
			listColumn{column("To the bound (%)", report.AlignDecimal), func(e *entry) string { return signed(e.Margin) }})
	case Shallow:
		return append(columns, class,
			listColumn{column("Reached ("+o.lengthUnit().Name+")", report.AlignDecimal), func(e *entry) string { return o.length(e.DepthReached) }},
			listColumn{column("Missing ("+o.lengthUnit().Name+")", report.AlignDecimal), func(e *entry) string { return o.length(e.worse) }}, why)
	}
	return append(columns, class, average, why)
}

func dash(text string) string {
	if text == "" {
		return "–"
	}
	return text
}

// signed is a number to a tenth with its sign.
func signed(v float64) string {
	text := strconv.FormatFloat(math.Abs(v), 'f', 1, 64)
	switch {
	case v < 0:
		return "−" + text
	case v > 0:
		return "+" + text
	}
	return text
}

// withoutReference is a note without the paper in brackets that it rests on,
// which the table of the notes names once.
func withoutReference(text string) string {
	before, reference, found := strings.Cut(text, " (")
	in, after, closed := strings.Cut(reference, ")")
	for strings.Count(in, "(") >= 1+strings.Count(in, ")") && closed { // as the issue of a journal
		var more string
		more, after, closed = strings.Cut(after, ")")
		in += ")" + more
	}
	if !found || !closed || !strings.Contains(in, "doi:") {
		return text
	}
	return before + after
}

// shortened is a text that a cell of a page can hold.
func shortened(text string) string { return shortenedTo(200, text) }

func shortenedTo(most int, text string) string {
	r := []rune(text)
	if len(r) <= most {
		return text
	}
	return strings.TrimSpace(string(r[:most-1])) + "…"
}

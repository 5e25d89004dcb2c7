package review

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// Where the text of a report shows to which profile and code a class or an
// average belongs, it is held against the results of just these: in the boxes
// and the tables of the summary, in the table of several codes, and in the
// sentence that gives a class. These are the fixed layouts of our own
// reports; whatever else the text says is prose.

// bindings finds the results of a profile by what a report prints of them.
type bindings struct {
	*examination
	known     map[string]bool // classes of the codes
	byProfile map[string][]*Result
	told      map[int]bool // lines of the piece of text on which something was told
	quiet     bool         // nothing is told but the lines
	average   profile.Unit // of the column of averages that was seen last; zero before the first
}

func (x *examination) bindings(quiet bool) *bindings {
	b := &bindings{examination: x, quiet: quiet, known: x.knownClasses(), byProfile: map[string][]*Result{}}
	for i := range x.Results {
		name := oneSpaced(x.Results[i].Profile)
		b.byProfile[name] = append(b.byProfile[name], &x.Results[i])
	}
	return b
}

func oneSpaced(s string) string { return strings.Join(strings.Fields(s), " ") }

// result is that of a profile under a code of which the text begins with the
// edition, or is the ID; nil if there is none, or more than one.
func (b *bindings) result(name, code string) *Result {
	var found *Result
	longest := 0
	for _, r := range b.byProfile[oneSpaced(name)] {
		edition := r.Edition
		if c := b.desk.find(r.Code); c != nil {
			edition = c.Edition
		}
		edition = oneSpaced(edition)
		switch {
		case code == r.Code:
			return r
		case edition != "" && len(edition) > longest && strings.HasPrefix(code, edition):
			found, longest = r, len(edition)
		}
	}
	return found
}

// cellsOf cuts a line of a text into its cells: at the bars of Markdown, or
// at the tabs of a page. Emphasis and references to footnotes are left out.
func cellsOf(line string) []string {
	separator := "\t"
	if trimmed := strings.TrimSpace(line); strings.HasPrefix(trimmed, "|") {
		line, separator = strings.Trim(strings.ReplaceAll(trimmed, `\|`, "\x00"), "|"), "|"
	}
	cells := strings.Split(line, separator)
	for i, c := range cells {
		if at := strings.Index(c, "[^"); at >= 0 {
			c = c[:at]
		}
		c = strings.ReplaceAll(strings.ReplaceAll(c, "**", ""), "\x00", "|")
		cells[i] = oneSpaced(strings.Trim(unescaped(strings.TrimSpace(c)), "*"))
	}
	return cells
}

// namesClass reports whether a cell names a class. On a page the numbers of
// footnotes hang on it.
func (p *Printed) namesClass(cell, class string) bool {
	rest, ok := strings.CutPrefix(plainClass(cell), plainClass(class))
	return ok && (rest == "" || p.Page > 0 && strings.Trim(rest, "0123456789,") == "")
}

// bind holds one piece of text against the results that it names.
func (b *bindings) bind(p *Printed) {
	b.told = map[int]bool{}
	b.boxes(p)
	b.tables(p)
	b.sentences(p)
}

// tell states that the text says something else of a result.
func (b *bindings) tell(p *Printed, line int, what string, r *Result, claimed, found string) {
	b.told[line] = true
	if b.quiet {
		return
	}
	at := p.place(word{line: line})
	at.Profile = r.Profile
	b.add(at, fmt.Sprintf("the text gives another %s than results.json for this profile under %s", what, r.Code), claimed, found)
}

// class compares a printed class.
func (b *bindings) class(p *Printed, line int, r *Result, cell string) {
	if cell != "" && cell != "–" && r.Class != "" && !p.namesClass(cell, r.Class) {
		b.tell(p, line, "class", r, "class "+cell, "class "+r.Class)
	}
}

// velocities compares the printed velocities of an average.
func (b *bindings) velocities(p *Printed, line int, r *Result, text string) {
	words := (&Printed{Text: []string{text}}).words()
	for k := range words {
		if n, ok := velocityAt(words, k); ok && b.velocity(p, line, r, n) {
			return // the other unit says the same
		}
	}
}

// velocity compares one, and reports whether it was told.
func (b *bindings) velocity(p *Printed, line int, r *Result, n Number) bool {
	differs := r.Average.Known() && !n.Means(r.Average.Value, 0)
	if differs {
		b.tell(p, line, "average", r, n.Text, n.in(r.Average.Value))
	}
	return differs
}

// box is the summary of one profile, as it is read.
type box struct {
	profile, code, class, average string
	begun, classLine, averageLine int
	open                          bool
	alone                         []int // lines of a page whose first cell is a single word
}

// maxBox is the most lines that a box of a summary has.
const maxBox = 40

// boxes reads the boxes of summaries.
func (b *bindings) boxes(p *Printed) {
	var at box
	for i, line := range p.Text {
		cells := cellsOf(line)
		if name, ok := strings.CutPrefix(cells[0], "Profile "); ok && (len(cells) < 2 || cells[1] == "" || cells[1] == "Code") {
			at = box{profile: name, begun: i, open: true}
		}
		if !at.open {
			continue
		}
		if i-at.begun > maxBox {
			at.open = false
			continue
		}
		at.take(cells, i+1, p.Page > 0)
		if cells[0] == "Standing of the table" {
			b.box(p, &at)
			at.open = false
		}
	}
}

// take takes the cells of one line, of a page or of another text.
func (a *box) take(cells []string, line int, page bool) {
	for k, c := range cells {
		next := ""
		if k+1 < len(cells) {
			next = cells[k+1]
		}
		switch {
		case c == "Code" && next != "":
			a.code = next
		case c == "Average velocity" && next != "":
			a.average, a.averageLine = next, line
		case c == "Site class" && next != "" && len(cells) == 2 && !page:
			a.class, a.classLine = next, line
		}
	}
	if page && cells[0] != "" && !strings.Contains(cells[0], " ") {
		a.alone = append(a.alone, line)
	}
}

func (b *bindings) box(p *Printed, a *box) {
	r := b.result(a.profile, a.code)
	if r == nil {
		return
	}
	b.velocities(p, a.averageLine, r, a.average)
	if a.class != "" {
		b.class(p, a.classLine, r, a.class)
		return
	}
	// On a page the class stands large in a cell of its own.
	other := 0
	for _, line := range a.alone {
		cell := cellsOf(p.Text[line-1])[0]
		if p.namesClass(cell, r.Class) {
			return
		}
		if _, ok := p.knownClass(cell, b.known); ok && other == 0 {
			other = line
		}
	}
	if other > 0 {
		b.class(p, other, r, cellsOf(p.Text[other-1])[0])
	}
}

// tables reads the tables that have a class in each row.
func (b *bindings) tables(p *Printed) {
	var header []string
	of := "" // the profile of the caption
	for i, line := range p.Text {
		cells := cellsOf(line)
		if name, ok := strings.CutSuffix(cells[0], " under several codes"); ok && len(cells) == 1 {
			of = strings.TrimPrefix(name, "Profile ")
		}
		for _, c := range cells {
			if unit, ok := strings.CutPrefix(c, "Average ("); ok {
				b.average, _ = profile.ParseUnit(strings.TrimSuffix(unit, ")"), profile.Velocity)
			}
		}
		switch {
		case slices.Contains(cells, "Class") && (slices.Contains(cells, "Code") || slices.Contains(cells, "Profile") && slices.Contains(cells, "Basis")):
			header = cells
		case len(cells) == len(header):
			b.tableRow(p, i+1, header, cells, of)
		case len(cells) < 2 && strings.TrimSpace(line) == "" && p.Page == 0:
			header = nil
		}
	}
}

// tableRow compares one row.
func (b *bindings) tableRow(p *Printed, line int, header, cells []string, of string) {
	cell := func(name string) string {
		if at := slices.Index(header, name); at >= 0 {
			return cells[at]
		}
		return ""
	}
	name := cell("Profile")
	if !slices.Contains(header, "Profile") {
		name = of
	}
	at := slices.IndexFunc(header, func(h string) bool { return strings.HasPrefix(h, "Average (") })
	if at < 0 || b.average.Name == "" {
		return
	}
	n, err := printed(strings.ReplaceAll(cells[at], ",", ""), b.average)
	if err != nil && cells[at] != "–" {
		return // no row of the table: the words of a figure, or another table
	}
	if !slices.Contains(header, "Code") {
		b.anyClass(p, line, name, cell("Class"))
		return
	}
	r := b.result(name, cell("Code"))
	if r == nil {
		return
	}
	b.class(p, line, r, cell("Class"))
	if err == nil {
		b.velocity(p, line, r, n)
	}
}

// anyClass compares the class of a row that names no code with those of all
// codes.
func (b *bindings) anyClass(p *Printed, line int, name, class string) {
	of := b.byProfile[oneSpaced(name)]
	if len(of) == 0 || class == "" || class == "–" {
		return
	}
	if !slices.ContainsFunc(of, func(r *Result) bool { return p.namesClass(class, r.Class) }) {
		b.tell(p, line, "class", of[0], "class "+class, "class "+of[0].Class)
	}
}

// sentences reads "Profile L1 is site class D under ASCE/SEI 7-16, …, with an
// average velocity of 246.9 m/s".
func (b *bindings) sentences(p *Printed) {
	const mark = "is site class "
	for i, line := range p.Text {
		at := strings.Index(line, "Profile ")
		if at < 0 || len(line) > 4000 {
			continue
		}
		text := ""
		for _, more := range p.Text[i:min(i+6, len(p.Text))] {
			text += " " + more[:min(len(more), 4000)]
		}
		text = oneSpaced(text)
		if k := strings.Index(text, "Profile "); k >= 0 {
			text = text[k+len("Profile "):]
		}
		name, rest, ok := strings.Cut(text, " "+mark)
		if !ok || len(name) > 200 {
			continue
		}
		class, rest, ok := strings.Cut(rest, " under ")
		if !ok || len(class) > 200 {
			continue
		}
		r := b.result(unescaped(strings.Trim(name, "*")), unescaped(rest))
		if r == nil {
			continue
		}
		b.class(p, i+1, r, cellsOf(class)[0])
		if _, after, ok := strings.Cut(rest, "with an average velocity of "); ok {
			if over := strings.Index(after, " over "); over >= 0 {
				b.velocities(p, i+1, r, after[:over])
			}
		}
		for k := 1; b.told[i+1] && k <= 2; k++ {
			b.told[i+1+k] = true // the average stands on one of the next lines
		}
	}
}

package review

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/siteclass"
)

// or is text, or what stands for it where there is none.
func or(text, otherwise string) string {
	if text == "" {
		return otherwise
	}
	return text
}

func (w *writer) title() []report.Block {
	t := &report.TitleBlock{Title: "Review memo"}
	for _, f := range []struct{ label, value string }{
		{"Submission", w.Submission.Name}, {"What it is", w.Submission.Kind.String()},
		{"Code applied", w.codeText()}, {"Rules", w.rulesText()},
		{"Reviewed by", or(w.memo.PreparedBy, "not stated")}, {"Date", or(w.memo.Date, "not stated")},
	} {
		t.Fields = append(t.Fields, report.Field{Label: f.label, Value: w.inline(f.value)})
	}
	return []report.Block{t}
}

// codeText says which code was applied.
func (w *writer) codeText() string {
	if c := w.Desk.Code; c != nil {
		return c.Edition + " (" + c.ID + "), named by the reviewer"
	}
	return "that of each claim; the reviewer named none"
}

// rulesText says whose weights and limits were applied.
func (w *writer) rulesText() string {
	set := w.Desk.Rules
	if len(set.Changes) == 0 && set.Department == "" {
		return "built-in weights and limits"
	}
	return fmt.Sprintf("%s, with %s of weights and limits", or(set.Department, set.File), profile.Plural(len(set.Changes), "change"))
}

var outcomeTexts = map[Outcome]string{
	Agrees:          "The claims follow from the data of the submission under the code that was applied.",
	Differs:         "At least one claim does not follow from the data of the submission under the code that was applied, or parts of the submission contradict each other.",
	CannotBeChecked: "At least one claim cannot be recomputed from what was handed in.",
}

func (w *writer) outcome() []report.Block {
	box := &report.Summary{Heading: w.text(w.Submission.Name), Label: "Outcome", Answer: w.Outcome.String()}
	add := func(label, value string) {
		box.Fields = append(box.Fields, report.Field{Label: label, Value: w.inline(value)})
	}
	add("Meaning", outcomeTexts[w.Outcome])
	agree := 0
	for i := range w.Cases {
		if w.Cases[i].Agrees(w.Desk.tolerance()) {
			agree++
		}
	}
	add("Claims", fmt.Sprintf("%d, of which %d agree", len(w.Cases), agree))
	add("To be answered", profile.Plural(w.count(Answer), "finding"))
	add("To be explained", profile.Plural(w.count(Explain), "finding"))
	add("To be known", profile.Plural(w.count(Note), "finding"))
	if w.Submission.Kind == SiteFolder || w.Submission.Kind == ReportFile {
		add("Notebook", "not evaluated; its front matter alone was read")
	}
	return []report.Block{box, &report.CautionBox{Blocks: []report.Block{w.para(report.Caution)}}}
}

// count is how many findings have a weight.
func (r *Review) count(weight Weight) int {
	n := 0
	for _, f := range r.Findings {
		if f.Weight == weight {
			n++
		}
	}
	return n
}

func (w *writer) claims() []report.Block {
	if len(w.Cases) == 0 {
		return []report.Block{w.para("The submission claims nothing that could be recomputed.")}
	}
	t := &report.Table{Columns: append(heads(report.AlignLeft, "Profile", "Code", "Claimed class", "Found class"),
		append(heads(report.AlignRight, "Claimed average", "Found average", "Over"), heads(report.AlignLeft, "Agrees")...)...)}
	t.Compact = len(w.Cases) > 12
	for i := range w.Cases {
		if i == maxPrintedClaims {
			break
		}
		t.Rows = append(t.Rows, w.claimRow(&w.Cases[i]))
	}
	blocks := []report.Block{t}
	if more := len(w.Cases) - maxPrintedClaims; more > 0 {
		blocks = append(blocks, w.para(profile.Plural(more, "more claim")+" stand in memo.json."))
	}
	t.Notes = append(t.Notes, w.inline("A claimed average stands for everything that rounds to it as it is printed."))
	return blocks
}

func (w *writer) claimRow(c *Case) report.TableRow {
	code, class, average, depth := "unknown", "–", "–", "–"
	if c.Code != nil {
		code = c.Code.ID
		if c.Claim.Code != "" && c.Claim.Code != code {
			code += " (claimed under " + c.Claim.Code + ")"
		}
	}
	if c.Err == nil {
		class = c.Decision.Class
	}
	if v, from, thickness, ok := c.average(); ok {
		average, depth = c.Claim.Average.in(v), metres(thickness)
		if from > 0 {
			depth += " from " + metres(from)
		}
	}
	agrees := "no"
	switch {
	case c.Err != nil:
		agrees = "not checked"
	case c.Agrees(w.Desk.tolerance()):
		agrees = "yes"
	}
	row := w.row(c.Name(), code, or(c.Claim.Class, "–"), class, or(c.Claim.Average.String(), "–"), average, depth, agrees)
	if agrees == "no" {
		row.Marked = true
	}
	return row
}

// asks words what each weight asks for.
var asks = map[Weight]string{
	Answer:  "To be answered before anything rests on the claim",
	Explain: "To be explained",
	Note:    "To be known",
}

func (w *writer) findings() []report.Block {
	if len(w.Findings) == 0 {
		return []report.Block{w.para("None.")}
	}
	var blocks []report.Block
	var list *report.List
	last := Off
	for i := range w.Findings {
		if i == maxPrintedFindings {
			break
		}
		f := &w.Findings[i]
		if f.Weight != last {
			list = &report.List{Ordered: true, Start: i + 1}
			blocks = append(blocks, &report.Heading{Level: 3, Inline: w.inline(asks[f.Weight])}, list)
			last = f.Weight
		}
		list.Items = append(list.Items, w.finding(f))
	}
	if more := len(w.Findings) - maxPrintedFindings + w.More; len(w.Findings) > maxPrintedFindings || w.More > 0 {
		blocks = append(blocks, w.para(fmt.Sprintf("%d more findings stand in memo.json, or were not kept.", max(more, w.More))))
	}
	return blocks
}

// finding is one finding: what, where, what was claimed and found, what gives
// the claim, and what is behind it.
func (w *writer) finding(f *Finding) report.ListItem {
	head := []report.Inline{w.strong(report.Capital(f.Text) + ".")}
	var facts []string
	facts = append(facts, "At "+f.Where())
	if f.Claimed != "" {
		facts = append(facts, "claimed: "+f.Claimed)
	}
	if f.Found != "" {
		facts = append(facts, "found: "+f.Found)
	}
	item := report.ListItem{Blocks: []report.Block{&report.Paragraph{Inline: head}, w.para(strings.Join(facts, "; ") + ".")}}
	for i, c := range f.Causes {
		item.Blocks = append(item.Blocks, &report.Paragraph{Inline: []report.Inline{
			&report.Emphasis{Inline: w.inline(report.Capital(strings.TrimSuffix(f.CauseLabel(i), ": ")))}, report.Text(": " + w.text(c.Words()) + ".")}})
	}
	item.Blocks = append(item.Blocks, &report.Paragraph{Inline: []report.Inline{
		report.Text("Behind it: " + w.text(strings.TrimSuffix(f.Behind(), ".")) + ". Rule "), report.Code(f.Rule), report.Text(".")}})
	return item
}

// averages are the workings of the recomputed averages.
func (w *writer) averages() []report.Block {
	var blocks []report.Block
	shown := 0
	seen := map[decided]bool{}
	for i := range w.Cases {
		c := &w.Cases[i]
		key := decided{c.Entry, c.Code, c.Claim.Stated}
		if seen[key] {
			continue
		}
		seen[key] = true
		a, ok := newAveraging(c)
		if !ok || len(a.working.Rows) > maxCompared/10 {
			continue
		}
		if shown++; shown > maxPrintedAverages {
			blocks = append(blocks, w.para("The averages of the claims that follow were recomputed in the same way."))
			break
		}
		blocks = append(blocks, w.working(c, &a.working))
		if steps := w.steps(c); len(steps.Rows) > 0 {
			blocks = append(blocks, steps)
		}
	}
	if shown == 0 {
		return []report.Block{w.para("No average could be recomputed.")}
	}
	return blocks
}

// working is the table of one average.
func (w *writer) working(c *Case, of *vs30.Working) report.Block {
	t := &report.Table{
		Caption: w.inline(fmt.Sprintf("Profile %s, %s: %s%s", c.Claim.Profile, c.Code.ID, speed(of.Velocity), over(of.Thickness, of.From))),
		Columns: heads(report.AlignDecimal, "Layer", "Top (m)", "Bottom (m)", "Thickness (m)", "Vs (m/s)", "Time (ms)"),
	}
	for _, r := range of.Rows {
		t.Rows = append(t.Rows, w.row(fmt.Sprint(r.Layer+1), short(r.Top, 3), short(r.Bottom, 3), short(r.Thickness, 3), short(r.Vs, 2), fmt.Sprintf("%.3f", r.Time*1e3)))
	}
	sum := w.row("", "", "", short(of.Thickness, 3), short(of.Velocity, 2), fmt.Sprintf("%.3f", of.Time*1e3))
	sum.Emphasis = true
	t.Rows = append(t.Rows, sum)
	return t
}

// steps are the comparisons that led to the class.
func (w *writer) steps(c *Case) *report.Table {
	t := &report.Table{
		Caption: w.inline(fmt.Sprintf("Profile %s: class %s under %s, %s", c.Claim.Profile, c.Decision.Class, c.Code.Edition, c.Code.Table)),
		Columns: append([]report.TableColumn{wide("What was compared")}, heads(report.AlignLeft, "With", "Holds", "Clause")...),
	}
	for _, st := range c.Decision.Steps {
		t.Rows = append(t.Rows, w.row(st.Text, st.Comparison(), map[bool]string{true: "yes", false: "no"}[st.Holds], st.Clause))
	}
	return t
}

func (w *writer) basis() []report.Block {
	list := &report.List{Tight: true}
	say := func(text string) {
		list.Items = append(list.Items, report.ListItem{Blocks: []report.Block{w.para(text)}})
	}
	say("The data are taken as they were handed in: whether they are the site's own cannot be seen from them.")
	say("What the submission states of the ground, of the datum and of the foundation is taken as stated.")
	if len(w.Submission.Printed) > 0 {
		say("Of the text of the report (" + w.texts() + ") these were held against results.json, each with its own profile and code: the boxes and tables of the summary, the table of several codes, the table of several profiles, the sentence that gives a class, and the digests. " +
			"Not compared were the tables of layers and of steps, the class tables, the figures, and the prose, of which classes and averages that stand nowhere in results.json are told as notes.")
	}
	say("A cause that is named for a claim is a computation that gives just this claim; it is not proof of how the claim came about.")
	say("Rules that are marked as common practice, or as from memory, rest on no source that was checked, and warn alone.")
	for _, c := range w.codes() {
		say(c.Edition + ": standing of its table: " + c.Standing.String() + ".")
	}
	return []report.Block{list}
}

// texts names the files whose text was read.
func (w *writer) texts() string {
	var names []string
	for _, p := range w.Submission.Printed {
		if !slices.Contains(names, p.File) {
			names = append(names, p.File)
		}
	}
	return strings.Join(names, ", ")
}

// codes are the codes that were applied, each once.
func (w *writer) codes() []*siteclass.Code {
	var out []*siteclass.Code
	seen := map[string]bool{}
	for i := range w.Cases {
		if c := w.Cases[i].Code; c != nil && !seen[c.ID] {
			seen[c.ID] = true
			out = append(out, c)
		}
	}
	return out
}

func (w *writer) signOff() []report.Block {
	return []report.Block{&report.SignOff{Signatures: []report.Signature{
		{Role: "Reviewed by", Name: w.text(w.memo.PreparedBy)},
		{Role: "Answered by the applicant"},
		{Role: "Closed by"},
	}}}
}

func (w *writer) rules() []report.Block {
	var blocks []report.Block
	if len(w.Desk.Rules.Changes) > 0 {
		t := &report.Table{Caption: w.inline("Weights and limits that are not the built-in ones, by " + or(w.Desk.Rules.Department, w.Desk.Rules.File)),
			Columns: heads(report.AlignLeft, "Rule", "What", "Built-in", "Applied")}
		for _, c := range w.Desk.Rules.Changes {
			t.Rows = append(t.Rows, w.row(c.Rule, c.What, c.From, c.To))
		}
		blocks = append(blocks, t)
	}
	t := &report.Table{Caption: w.inline("Rules as they were applied"), Compact: true,
		Columns: append(heads(report.AlignLeft, "Rule", "Weight"), wide("What it finds"), wide("Source"), heads(report.AlignLeft, "Limits")[0])}
	for _, r := range w.Desk.Rules.rules() {
		var limits []string
		for _, l := range r.Limits {
			limits = append(limits, l.String())
		}
		t.Rows = append(t.Rows, w.row(r.ID, r.Weight.String(), r.Summary, r.Behind(), or(strings.Join(limits, ", "), "–")))
	}
	return append(blocks, t)
}

func (w *writer) files() []report.Block {
	t := &report.Table{Caption: w.inline("Files that were read"), Compact: true,
		Columns: append(heads(report.AlignLeft, "File", "What it is"), append(heads(report.AlignRight, "Bytes"), wide("SHA-256"))...)}
	for i, f := range w.Submission.Files {
		if i == maxPrintedFiles {
			t.Notes = append(t.Notes, w.inline(profile.Plural(len(w.Submission.Files)-i, "more file")+" stand in memo.json."))
			break
		}
		row := w.row(f.Name, f.Role, fmt.Sprint(f.Size), "")
		row.Cells[3] = []report.Inline{report.Code(f.SHA256)}
		t.Rows = append(t.Rows, row)
	}
	made := []report.Inline{report.Text("Made by " + w.memo.Version + ". The same files give the same memo, byte for byte.")}
	return []report.Block{t, &report.Paragraph{Inline: made}}
}

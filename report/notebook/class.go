package notebook

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

var classWorking = Working{
	Summary: "The site class under each code: the code's table with the class marked, the steps of the decision, the distance to the next class.",
	Keys: []Key{ofKey,
		{"code", "a code of `shearbook codes`, or a list; the front matter's if left out"},
	},
	Example:  "of: L1\ncode: asce-7-16\n",
	evaluate: evaluateClass,
}

func evaluateClass(ev *evaluation, c call) []report.Block {
	return ev.eachDecision(c, ev.classBlocks)
}

// eachDecision evaluates a working that puts blocks for each site under each
// code into the report.
func (ev *evaluation) eachDecision(c call, blocksOf func(*site, siteclass.Decision) []report.Block) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	codes := ev.codes(&m, "code")
	m.rest()
	return ev.each(sites, func(s *site) []report.Block {
		var blocks []report.Block
		for _, code := range codes {
			if d, ok := ev.decide(s, code, s.entry.place); ok {
				blocks = append(blocks, blocksOf(s, d)...)
			}
		}
		return blocks
	})
}

// classBlocks is one decision.
func (ev *evaluation) classBlocks(s *site, d siteclass.Decision) []report.Block {
	blocks := []report.Block{ev.answer(s, d)}
	if len(d.Classes) > 1 {
		blocks = append(blocks, para("Several classes result and count together: "+strings.Join(d.Classes, ", ")+
			". The governing spectrum is the envelope of theirs, the most severe at each period."))
	}
	if len(d.Code.Bands) > 0 {
		blocks = append(blocks, ev.codeTable(d))
	}
	blocks = append(blocks, stepTable(s, d))
	if len(d.Found) > 0 {
		blocks = append(blocks, foundTable(s, d))
	}
	if len(d.Others) > 0 {
		blocks = append(blocks, ev.routeTable(s, d))
	}
	return append(blocks, ev.marginSentence(d))
}

// averaged words what a decision rests on: the average velocity, or the
// averages of another route.
func (ev *evaluation) averaged(d siteclass.Decision) string {
	if d.Velocity > 0 {
		return "an average velocity of " + ev.both(d.Velocity) + " over " + ev.bothLengths(d.Thickness) + " " + ev.below(d.Datum)
	}
	return ev.averages(d.Averages)
}

// averages words the averages of a route: "N̄ = 23.8 blows over 30 m".
func (ev *evaluation) averages(of []siteclass.Average) string {
	var parts []string
	for _, a := range of {
		parts = append(parts, a.Symbol+" = "+fixed(a.Value, 1)+" "+a.Unit+" over "+ev.bothLengths(a.Thickness))
	}
	if len(parts) == 0 {
		return "what its steps say"
	}
	return strings.Join(parts, " and ")
}

// foundTable is what was held against the code's rules beside the average.
func foundTable(s *site, d siteclass.Decision) *report.Table {
	t := &report.Table{
		Caption: words("What the rules of " + d.Code.Edition + " asked of profile " + s.profile.Name),
		Columns: []report.TableColumn{column("Quantity", report.AlignLeft), wide("What it is"), column("Value", report.AlignRight)},
	}
	for _, f := range d.Found {
		t.Rows = append(t.Rows, row(f.Of, f.Text, foundText(f)))
	}
	return t
}

// routeTable is the other routes that the data allow.
func (ev *evaluation) routeTable(s *site, d siteclass.Decision) *report.Table {
	t := &report.Table{
		Caption: words("Other routes of " + d.Code.Edition + " for profile " + s.profile.Name + "; the class is by " + d.Route),
		Columns: []report.TableColumn{column("Route", report.AlignLeft), wide("Averages"), column("Class", report.AlignLeft), column("Standing", report.AlignLeft)},
	}
	for _, o := range d.Others {
		t.Rows = append(t.Rows, row(o.Route, ev.averages(o.Averages), o.Class, o.Standing.String()))
	}
	return t
}

// answer is the class in a sentence, with the decision's notes at it.
func (ev *evaluation) answer(s *site, d siteclass.Decision) *report.Paragraph {
	in := words("Profile " + s.profile.Name + " is site class ")
	in = append(in, strong(d.Class)...)
	in = append(in, ev.refs(d.Notes)...)
	in = append(in, words(" under "+d.Code.Edition+", "+d.Code.Clause+", "+d.Code.Table+", with "+
		ev.averaged(d)+
		". Standing of the part of the table that was used: "+d.Standing.String()+".")...)
	return &report.Paragraph{Inline: in}
}

// codeTable is the code's table with the class marked.
func (ev *evaluation) codeTable(d siteclass.Decision) *report.Table {
	t := ClassTable(d.Code)
	for i, b := range d.Code.Bands {
		t.Rows[i].Marked = b.Class == d.Row || d.Row != "" && b.Class == d.Row
	}
	return t
}

// ClassTable is the table of a code as it is printed, in the code's units.
func ClassTable(code *siteclass.Code) *report.Table {
	strength := false
	for _, b := range code.Bands {
		strength = strength || !b.N.Empty() || !b.Su.Empty()
	}
	t := &report.Table{
		Caption: words(code.Edition + ", " + code.Table),
		Columns: []report.TableColumn{column("Class", report.AlignLeft), wide("Ground"),
			column(code.Parameter+" ("+code.Unit.Name+")", report.AlignCentre)},
	}
	if strength {
		t.Columns = append(t.Columns, column("N", report.AlignCentre), column("su ("+code.SuUnit.Name+")", report.AlignCentre))
	}
	t.Columns = append(t.Columns, column("Standing", report.AlignLeft))
	for _, b := range code.Bands {
		r := row(b.Class, b.Name, orDash(b.Vs.String()))
		if strength {
			r.Cells = append(r.Cells, words(orDash(b.N.String())), words(orDash(b.Su.String())))
		}
		r.Cells = append(r.Cells, words(b.Standing.String()))
		t.Rows = append(t.Rows, r)
	}
	for _, rule := range RuleTexts(code) {
		t.Notes = append(t.Notes, words("Rule, the first that holds decides: "+sentence(rule)))
	}
	for _, n := range append([]string{code.Superseded, code.Adoption, code.Default}, code.Notes...) {
		if n != "" {
			t.Notes = append(t.Notes, words(sentence(n)))
		}
	}
	return t
}

// RuleTexts returns the rules of a code that are no columns, in their order.
func RuleTexts(c *siteclass.Code) []string {
	var texts []string
	for _, r := range c.Rules {
		clause := r.Clause
		if clause == "" {
			clause = c.Table
		}
		text := fmt.Sprintf("%s: %s (%s; %s)", r.Class, r, clause, r.Standing)
		if r.Indicative {
			text += ", shown and not deciding"
		}
		texts = append(texts, text)
	}
	return texts
}

func orDash(text string) string {
	if text == "" {
		return "–"
	}
	return text
}

// stepTable is the comparisons of a decision, in their order.
func stepTable(s *site, d siteclass.Decision) *report.Table {
	t := &report.Table{
		Caption: words("Steps of the decision for profile " + s.profile.Name),
		Columns: []report.TableColumn{column("Step", report.AlignRight), wide("Compared"),
			column("Comparison", report.AlignLeft), column("Holds", report.AlignLeft), column("Clause", report.AlignLeft)},
	}
	for i, st := range d.Steps {
		t.Rows = append(t.Rows, row(strconv.Itoa(i+1), report.Capital(st.Text), Comparison(st), yesNo(st.Holds), st.Clause))
	}
	return t
}

// Comparison is a step as it is printed: "942.1 ft/s > 1,200 ft/s".
func Comparison(st siteclass.Step) string { return st.Comparison() }

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

// marginSentence says how far the average is from another class.
func (ev *evaluation) marginSentence(d siteclass.Decision) *report.Paragraph {
	if d.Margin == nil {
		return para("The class does not hang on one bound.")
	}
	return para("The nearest bound at which the class changes is " + shortest(d.Margin.Bound, 3) + " " + d.Margin.Unit +
		", to class " + d.Margin.ToClass + ": " + MarginOf(d.Margin) + " would have to be " + MarginText(d.Margin) + ".")
}

// MarginOf says what would have to change: the average, or what a code
// compares instead.
func MarginOf(m *siteclass.Margin) string {
	switch m.Unit {
	case profile.MetrePerSecond.Name, profile.FootPerSecond.Name:
		return "the average"
	case "s":
		return "the period"
	}
	return "the value compared"
}

// MarginText says by how much the average would have to change:
// "12.3 % lower".
func MarginText(m *siteclass.Margin) string {
	text := fixed(math.Abs(m.Percent), 1) + " %"
	switch {
	case m.Percent < 0:
		return text + " lower"
	case m.Percent > 0:
		return text + " higher"
	}
	return "no different: it lies on the bound"
}

var conditionsWorking = Working{
	Summary: "The conditions that the average does not settle: met, not met, not assessed.",
	Keys: []Key{ofKey,
		{"code", "a code of `shearbook codes`, or a list; the front matter's if left out"},
	},
	Example:  "of: L1\n",
	evaluate: evaluateConditions,
}

func evaluateConditions(ev *evaluation, c call) []report.Block {
	return ev.eachDecision(c, func(s *site, d siteclass.Decision) []report.Block { return one(ev.conditionTable(s, d)) })
}

// conditionTable is what became of each condition of the code.
func (ev *evaluation) conditionTable(s *site, d siteclass.Decision) *report.Table {
	t := &report.Table{
		Caption: words("Conditions of " + d.Code.Edition + " beside the average, for profile " + s.profile.Name),
		Columns: []report.TableColumn{wide("Condition"), column("Then class", report.AlignLeft),
			column("Found", report.AlignLeft), column("Clause", report.AlignLeft), column("Standing", report.AlignLeft)},
	}
	for _, c := range d.Conditions {
		found := words(c.State.String())
		if c.State == siteclass.Met || c.State == siteclass.NotAssessed {
			found = strong(c.State.String())
		}
		r := row(report.Capital(c.Condition.Text), ConditionClass(c.Condition), "", c.Condition.Clause, c.Condition.Standing.String())
		r.Cells[2] = append(found, ev.refs(c.Notes)...)
		r.Marked = c.State == siteclass.Met
		t.Rows = append(t.Rows, r)
	}
	t.Notes = append(t.Notes, words("What is not assessed is not excluded: it needs a statement from the site investigation."))
	return t
}

// ConditionClass is the class a condition leads to, or those it bars.
func ConditionClass(c *siteclass.Condition) string {
	if c.Kind == siteclass.Barred {
		return "not " + strings.Join(c.Bars, ", ")
	}
	return c.Class
}

// averageNotes are the notes of a decision that are about its average.
func averageNotes(d siteclass.Decision) []profile.Note {
	var notes []profile.Note
	for _, n := range d.Notes {
		switch n.ID {
		case "extended", "below-depth-reached", "half-space", "reversal", "correlated", "datum-assumed", "datum-foundation", "datum-other":
			notes = append(notes, n)
		}
	}
	return notes
}

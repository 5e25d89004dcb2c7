package main

import (
	"reflect"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
)

// difference is what two codes say of one thing.
type difference struct{ of, a, b string }

// nothing is what stands where one of the codes says nothing.
const nothing = "–"

// differences is what differs between two codes, side by side: bounds and
// operators, depth, datum, unit, conditions; and what the classes are called
// where the codes do not have the same.
func (s streams) differences(a, b *siteclass.Code) string {
	var out strings.Builder
	out.WriteString(s.bold("What differs between "+a.ID+" and "+b.ID) + "\n\n")
	out.WriteString(sideBySide([]difference{
		{"", a.ID, b.ID}, {"edition", a.Edition, b.Edition}, {"table", a.Clause + ", " + a.Table, b.Clause + ", " + b.Table},
		{"standing", a.Standing.String(), b.Standing.String()},
	}))
	found := slices.Concat(headDifferences(a, b), bandDifferences(a, b), conditionDifferences(a, b))
	if len(found) == 0 {
		found = []difference{{"no difference", "in bounds, operators, depth, datum, units", "nor in the conditions"}}
	}
	out.WriteString("\n" + sideBySide(found))
	for _, c := range []*siteclass.Code{a, b} {
		if c.OwnRule() {
			out.WriteString("\n" + wrap(c.ID+" decides by a rule of its own beside these rows; `shearbook codes "+c.ID+
				"` says what it is. A difference in it is not shown here.", width, "") + "\n")
		}
	}
	return out.String()
}

// differing leaves out what both codes say alike.
func differing(all []difference) []difference {
	return slices.DeleteFunc(all, func(d difference) bool { return d.a == d.b })
}

// headDifferences are those in what the average is.
func headDifferences(a, b *siteclass.Code) []difference {
	return differing([]difference{
		{"parameter", a.Parameter, b.Parameter},
		{"depth", a.DepthText, b.DepthText},
		{"datum", a.Datum.String(), b.Datum.String()},
		{"unit of Vs", a.Unit.Name, b.Unit.Name},
		{"unit of su", orNothing(a.SuUnit.Name), orNothing(b.SuUnit.Name)},
		{"routes", orNothing(routesText(a)), orNothing(routesText(b))},
		{"softer than all", orNothing(a.Outside), orNothing(b.Outside)},
	})
}

func orNothing(text string) string {
	if text == "" {
		return nothing
	}
	return text
}

// bandDifferences are those in the rows, and in what the classes are called
// where the two tables do not have the same.
func bandDifferences(a, b *siteclass.Code) []difference {
	ofA, ofB := classesOf(a), classesOf(b)
	var found []difference
	for _, class := range inEither(ofA, ofB) {
		x, y := bandOf(a, class), bandOf(b, class)
		rows := []difference{
			{class + ": Vs", cell(x.Vs, a.Unit, profile.Unit{}), cell(y.Vs, b.Unit, a.Unit)},
			{class + ": N", cell(x.N, profile.Unit{}, profile.Unit{}), cell(y.N, profile.Unit{}, profile.Unit{})},
			{class + ": su", cell(x.Su, a.SuUnit, profile.Unit{}), cell(y.Su, b.SuUnit, a.SuUnit)},
			{class + ": bounds", decisive(x), decisive(y)},
			{class + ": asks", asked(a, class), asked(b, class)},
		}
		if !slices.Equal(ofA, ofB) {
			rows = slices.Insert(rows, 0, difference{"class " + class, orNothing(x.Name), orNothing(y.Name)})
		}
		found = append(found, differing(rows)...)
	}
	return found
}

func classesOf(c *siteclass.Code) []string {
	var classes []string
	for _, b := range c.Bands {
		classes = append(classes, b.Class)
	}
	return classes
}

// inEither is the first list with what only the second has, each behind the
// one that it follows there.
func inEither(a, b []string) []string {
	all := slices.Clone(a)
	at := 0
	for _, item := range b {
		if i := slices.Index(all, item); i >= 0 {
			at = i + 1
			continue
		}
		all = slices.Insert(all, at, item)
		at++
	}
	return all
}

// bandOf is the row of a class, an empty one if the code has no such class.
func bandOf(c *siteclass.Code, class string) siteclass.Band {
	for _, b := range c.Bands {
		if b.Class == class {
			return b
		}
	}
	return siteclass.Band{}
}

// cell is a range with its unit, and where the other code has another unit in
// that as well.
func cell(r siteclass.Range, u, other profile.Unit) string {
	if r.Empty() {
		return nothing
	}
	text := strings.TrimSpace(r.String() + " " + u.Name)
	if other.Name == "" || other == u {
		return text
	}
	r.Lower.Value *= u.Factor / other.Factor
	r.Upper.Value *= u.Factor / other.Factor
	return text + " (" + r.String() + " " + other.Name + ")"
}

// decisive says whether the bounds of a row decide.
func decisive(b siteclass.Band) string {
	if b.Indicative {
		return "shown, and do not decide"
	}
	return nothing
}

// asked is what a code asks for a class beside the columns of its row.
func asked(c *siteclass.Code, class string) string {
	return orNothing(strings.Join(c.RulesOf(class), ", or "))
}

// conditionDifferences are those in the conditions.
func conditionDifferences(a, b *siteclass.Code) []difference {
	var found []difference
	for _, id := range inEither(conditionsOf(a), conditionsOf(b)) {
		x, y := conditionOf(a, id), conditionOf(b, id)
		if !alike(x, y) {
			found = append(found, difference{strings.ReplaceAll(id, "-", " "), conditionText(x), conditionText(y)})
		}
	}
	return found
}

func conditionsOf(c *siteclass.Code) []string {
	var ids []string
	for _, k := range c.Conditions {
		ids = append(ids, k.ID)
	}
	return ids
}

// conditionOf is the condition of an ID, nil if the code has none.
func conditionOf(c *siteclass.Code, id string) *siteclass.Condition {
	for i := range c.Conditions {
		if c.Conditions[i].ID == id {
			return &c.Conditions[i]
		}
	}
	return nil
}

// alike reports whether two conditions do the same, whatever their words,
// their clauses and their standing.
func alike(a, b *siteclass.Condition) bool {
	if a == nil || b == nil {
		return a == b
	}
	x, y := *a, *b
	for _, c := range []*siteclass.Condition{&x, &y} {
		c.Text, c.Clause, c.Standing, c.OnlyStanding = "", "", 0, 0
	}
	return reflect.DeepEqual(x, y)
}

// conditionText words a condition, and for a bar what words leave open.
func conditionText(c *siteclass.Condition) string {
	if c == nil {
		return nothing
	}
	text := notebook.ConditionClass(c) + ": " + c.Text + " (" + c.Clause + ")"
	if c.Kind != siteclass.Barred {
		return text
	}
	from, then := "the datum", "the next class is taken"
	if c.FromFoundation {
		from = "the foundation"
	}
	if c.OwnAverage {
		then = "the average over that soil decides"
	}
	return text + "; counted from " + from + "; then " + then
}

// sideBySide lays differences out in the width of the terminal: what they are
// of, and a column for each code.
func sideBySide(rows []difference) string {
	const label, gap = 15, "  "
	const column = (width - label - 2*len(gap)) / 2
	var out strings.Builder
	for _, r := range rows {
		of, a, b := fold(r.of, label), fold(r.a, column), fold(r.b, column)
		for i := range max(len(of), len(a), len(b)) {
			line := pad(lineOf(of, i), label) + gap + pad(lineOf(a, i), column) + gap + lineOf(b, i)
			out.WriteString(strings.TrimRight(line, " ") + "\n")
		}
	}
	return out.String()
}

// fold breaks text into lines of n columns, in the middle of a word that is
// longer.
func fold(text string, n int) []string {
	var words []string
	for _, word := range strings.Fields(text) {
		r := []rune(word)
		for len(r) > n {
			words, r = append(words, string(r[:n])), r[n:]
		}
		words = append(words, string(r))
	}
	return strings.Split(wrap(strings.Join(words, " "), n, ""), "\n")
}

func lineOf(lines []string, i int) string {
	if i < len(lines) {
		return lines[i]
	}
	return ""
}

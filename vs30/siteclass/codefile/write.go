package codefile

import (
	"fmt"
	"io"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// Write writes a code in the form that Read reads. A built-in code is written
// under its ID with -local behind it, for Read takes no ID of a built-in
// code. The error says why a code cannot be written: it decides by a rule of
// its own that bands and conditions do not say.
func Write(w io.Writer, c *siteclass.Code) error {
	text, err := text(c)
	if err != nil {
		return err
	}
	if err := same(c, text); err != nil {
		return err
	}
	_, err = w.Write(text)
	return err
}

// OwnRuleError reports a code whose own rule a file of a table cannot say.
type OwnRuleError struct{ ID string }

// Error names the code and the reason.
func (e *OwnRuleError) Error() string {
	return e.ID + " decides by a rule of its own beside its table, which a file of bands and conditions cannot say; " +
		"the table alone would decide otherwise"
}

func text(c *siteclass.Code) ([]byte, error) {
	if c.OwnRule() {
		return nil, &OwnRuleError{c.ID}
	}
	return yaml.Dump(document(c), yaml.WithIndent(2), yaml.WithLineWidth(80))
}

// same returns an error where the text does not read back as the code: where
// the code says more than the form has keys for.
func same(c *siteclass.Code, text []byte) error {
	const file = "the table as written"
	back, err := Read(file, text)
	if err != nil {
		return fmt.Errorf("%s cannot be written as a file of a table: %w", c.ID, err)
	}
	if !equal(*c, *back) {
		return fmt.Errorf("%s cannot be written as a file of a table: it says more than bands and conditions", c.ID)
	}
	return nil
}

// list is a YAML mapping in the making: keys with their values in order.
type list struct{ node *yaml.Node }

func newList() list { return list{&yaml.Node{Kind: yaml.MappingNode, Tag: "!!map"}} }

// set adds a key with a node.
func (l list) set(key string, n *yaml.Node) {
	l.node.Content = append(l.node.Content, scalar(key), n)
}

// text adds a key with a text, unless that is blank or what Read takes
// without the key.
func (l list) text(key, value, otherwise string) {
	if value != otherwise && value != "" {
		l.set(key, scalar(value))
	}
}

// yes adds a key that is answered yes, and none that is answered no.
func (l list) yes(key string, value bool) {
	if value {
		l.set(key, scalar("yes"))
	}
}

// number adds a key with a plain number, and none for 0.
func (l list) number(key string, v float64) {
	if v != 0 {
		l.set(key, &yaml.Node{Kind: yaml.ScalarNode, Value: plainNumber(v)})
	}
}

// cell adds a range, in quotes.
func (l list) cell(key string, c cell) {
	if !c.Empty() {
		n := scalar(c.String())
		n.Style = yaml.DoubleQuotedStyle
		l.set(key, n)
	}
}

// texts adds a list of texts: in one line, or a line each.
func (l list) texts(key string, values []string, inLine bool) {
	if len(values) == 0 {
		return
	}
	n := &yaml.Node{Kind: yaml.SequenceNode, Tag: "!!seq"}
	if inLine {
		n.Style = yaml.FlowStyle
	}
	for _, v := range values {
		n.Content = append(n.Content, scalar(v))
	}
	l.set(key, n)
}

func scalar(text string) *yaml.Node {
	return &yaml.Node{Kind: yaml.ScalarNode, Tag: "!!str", Value: text}
}

// document is the whole file.
func document(c *siteclass.Code) *yaml.Node {
	l := newList()
	l.node.HeadComment = heading(c)
	id, edition, adopted := c.ID+localSuffix, c.Edition, ""
	if c.Own != nil {
		id, edition, adopted = c.ID, c.Own.Edition, c.Own.AdoptedBy
	}
	l.text("id", id, "")
	l.text("title", c.Title, "")
	l.text("edition", edition, "")
	l.text("adopted by", adopted, "")
	l.text("region", c.Region, "")
	l.text("clause", c.Clause, "")
	l.text("table", c.Table, "")
	l.text("source", c.Source, "")
	l.text("parameter", c.Parameter, "")
	depth, unit := writtenDepth(c)
	l.text("depth", depth, "")
	l.text("depth as printed", c.DepthText, depth)
	l.text("length unit", c.Length.Name, unit.Name)
	l.text("datum", datumWord(c.Datum), "not stated")
	l.text("datum note", c.DatumNote, "")
	l.text("unit", c.Unit.Name, "")
	l.text("strength unit", c.SuUnit.Name, "")
	l.text("standing", c.Standing.String(), "")
	l.text("outside", c.Outside, "")
	l.set("bands", sequence(c.Bands, func(b *siteclass.Band) list { return bandList(b, c) }))
	if len(c.Routes) > 0 {
		routes := &yaml.Node{Kind: yaml.SequenceNode, Tag: "!!seq"}
		for i := range c.Routes {
			routes.Content = append(routes.Content, routeList(&c.Routes[i], c).node)
		}
		l.set("routes", routes)
	}
	l.number("routes needed", float64(c.Needs))
	if c.Averaging != (siteclass.Averaging{}) {
		l.set("averaging", averagingList(&c.Averaging, c).node)
	}
	if len(c.Conditions) > 0 {
		l.set("conditions", sequence(c.Conditions, func(k *siteclass.Condition) list { return conditionList(k, c) }))
	}
	l.text("where data are lacking", c.Default, "")
	l.text("default class", c.DefaultClass, "")
	l.text("several profiles", c.Several, "")
	l.yes("worst profile governs", c.WorstOf)
	if c.Adopts != "" {
		l.text("adopts", c.Adopts, "")
		l.text("adoption", c.Adoption, "")
		l.text("adoption standing", c.AdoptionStanding.String(), c.Standing.String())
	}
	l.text("superseded", c.Superseded, "")
	l.texts("notes", c.Notes, false)
	l.text("short profiles", c.Short, "")
	l.text("correlated velocities", c.Correlated, nothingSaid)
	if t := c.Twin; t.Unit.Name != "" {
		l.set("twin", twinList(t).node)
	}
	return l.node
}

// heading is the comment at the head of the file.
func heading(c *siteclass.Code) string {
	if c.Own != nil {
		return ""
	}
	return "The table of " + c.ID + " as a file, to make a jurisdiction's own table of.\n" +
		"Give it an id, an edition, a clause and a standing of its own, and add\n" +
		"`adopted by:`. The design site class must be confirmed by a licensed engineer\n" +
		"under the locally adopted building code."
}

// writtenDepth is the depth in the first unit in which it reads back as the
// same number.
func writtenDepth(c *siteclass.Code) (string, profile.Unit) {
	for _, u := range []profile.Unit{c.Length, profile.Metre} {
		text := depthText(c.Depth, u)
		if v, err := profile.ParseValue(text, profile.Length); err == nil && v == c.Depth {
			return text, u
		}
	}
	return depthText(c.Depth, profile.Metre), profile.Metre
}

func datumWord(d siteclass.Datum) string {
	for _, word := range datumWords {
		if datums[word] == d {
			return word
		}
	}
	return d.String()
}

// sequence is a list of mappings.
func sequence[T any](items []T, of func(*T) list) *yaml.Node {
	n := &yaml.Node{Kind: yaml.SequenceNode, Tag: "!!seq"}
	for i := range items {
		n.Content = append(n.Content, of(&items[i]).node)
	}
	return n
}

func bandList(b *siteclass.Band, c *siteclass.Code) list {
	l := newList()
	l.text("class", b.Class, "")
	l.text("name", b.Name, "")
	l.cell("vs", cell{Range: b.Vs})
	l.cell("n", cell{Range: b.N})
	l.cell("su", cell{Range: b.Su})
	l.text("also", b.Also, "")
	l.yes("improving", b.Improving)
	l.yes("indicative", b.Indicative)
	l.text("standing", b.Standing.String(), c.Standing.String())
	return l
}

func conditionList(k *siteclass.Condition, c *siteclass.Code) list {
	l := newList()
	l.text("fact", k.Fact.String(), "")
	l.text("id", k.ID, defaultID(k.Fact))
	l.text("kind", k.Kind.String(), "")
	l.text("class", k.Class, "")
	if len(k.Limits) > 0 {
		limits := newList()
		for _, limit := range k.Limits {
			limits.cell(limitKey(limit.Property), cell{limit.Range, limit.About, limit.Unit.Name})
		}
		l.set("limits", limits.node)
	}
	l.texts("only", k.Only, true)
	if len(k.Only) > 0 {
		l.text("only standing", k.OnlyStanding.String(), k.Standing.String())
	}
	l.texts("bars", k.Bars, true)
	if k.FromFoundation {
		l.text("counted from", fromFoundation, "")
	}
	if k.OwnAverage {
		l.text("then", ownMean, "")
	}
	l.text("text", k.Text, defaultText(k))
	l.text("clause", k.Clause, c.Clause)
	l.text("standing", k.Standing.String(), c.Standing.String())
	return l
}

// limitKey is the key of a limit on a property; its words where the form has
// no key for it.
func limitKey(p siteclass.Property) string {
	for _, k := range limitKeys {
		if k.property == p {
			return k.key
		}
	}
	return p.String()
}

func twinList(t siteclass.Twin) list {
	l := newList()
	l.text("unit", t.Unit.Name, "")
	bounds := &yaml.Node{Kind: yaml.SequenceNode, Tag: "!!seq", Style: yaml.FlowStyle}
	for _, b := range t.Bounds {
		bounds.Content = append(bounds.Content, &yaml.Node{Kind: yaml.ScalarNode, Value: plainNumber(b)})
	}
	l.set("bounds", bounds)
	l.text("source", t.Source, "")
	return l
}

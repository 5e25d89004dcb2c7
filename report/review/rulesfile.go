package review

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
)

// A department's own weights and limits are a YAML file:
//
//	department: Building Department of Exampleton
//	rules:
//	  average: {tolerance: 1 %}
//	  wavelength: {weight: answer, divisor: 3}
//	  soil-window: off
//
// Every other rule stays as it is. A rule or limit that is not known is a
// fault.

// Limits of a file of rules.
const (
	MaxRulesFile = 256 << 10 // bytes
	maxMarks     = 20_000
	maxNesting   = 4
)

// ReadRules reads a file of rules. The error is a profile.Faults.
func ReadRules(file string, data []byte) (Ruleset, error) {
	r := &rulesReader{faults: profile.Collector{File: file}, set: Ruleset{File: file, changed: Rules()}}
	if top := r.parse(data); top != nil {
		r.top(top)
	}
	if err := r.faults.Err(); err != nil {
		return Ruleset{}, err
	}
	return r.set, nil
}

const noRules = "begin with `rules:`; `shearbook review --list` prints them"

type rulesReader struct {
	faults profile.Collector
	set    Ruleset
}

func (r *rulesReader) fault(n *yaml.Node, hint, format string, args ...any) {
	at := profile.Place{}
	if n != nil {
		at.Line, at.Column = n.Line, n.Column
	}
	r.faults.Fault(at, hint, format, args...)
}

// parse returns the outermost node, nil where there is a fault.
func (r *rulesReader) parse(data []byte) *yaml.Node {
	const another = "a file of rules is a page of text; is this another file"
	switch {
	case len(data) > MaxRulesFile:
		r.fault(nil, another, "the file is larger than %d KiB", MaxRulesFile>>10)
		return nil
	case len(bytes.TrimSpace(data)) == 0:
		r.fault(nil, noRules, "the file is empty")
		return nil
	case !utf8.Valid(data):
		r.fault(nil, "save it as UTF-8", "the file is not UTF-8 text")
		return nil
	case bytes.ContainsFunc(data, func(c rune) bool { return c == '&' || c == '*' }) || intricate(data):
		r.fault(nil, another, "the file holds references, or too many lists and keys, for a file of rules")
		return nil
	}
	var root yaml.Node
	if err := yaml.Load(data, &root); err != nil {
		r.unreadable(err)
		return nil
	}
	if root.Kind != yaml.DocumentNode || len(root.Content) != 1 {
		r.fault(nil, noRules, "the file is empty")
		return nil
	}
	if deep := tooDeep(root.Content[0], 0); deep != nil {
		r.fault(deep, "a rule reads `average: {tolerance: 1 %%}`", "this is nested too deep")
		return nil
	}
	return root.Content[0]
}

func intricate(data []byte) bool {
	marks := 0
	for _, b := range data {
		if bytes.IndexByte([]byte("\n,:[{-?!"), b) >= 0 {
			marks++
		}
	}
	return marks > maxMarks
}

// tooDeep returns a node that stands too deep, nil if there is none.
func tooDeep(n *yaml.Node, depth int) *yaml.Node {
	if depth > maxNesting {
		return n
	}
	for _, child := range n.Content {
		if deep := tooDeep(child, depth+1); deep != nil {
			return deep
		}
	}
	return nil
}

func (r *rulesReader) unreadable(err error) {
	at, text := profile.Place{}, err.Error()
	var load *yaml.LoadError
	if errors.As(err, &load) {
		text = load.Message
		if load.Mark.Line > 0 {
			at.Line, at.Column = load.Mark.Line, load.Mark.Column
		}
	}
	r.faults.Fault(at, "each line reads `key: value`", "the file is not readable YAML: %s", strings.TrimPrefix(text, "yaml: "))
}

// pairs calls f for each key of a mapping.
func (r *rulesReader) pairs(n *yaml.Node, what string, f func(key, value *yaml.Node)) {
	if n.Kind != yaml.MappingNode {
		r.fault(n, "write it as lines of `key: value`", "%s is not a list of keys and values", what)
		return
	}
	seen := map[string]bool{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		key := n.Content[i]
		if seen[key.Value] {
			r.fault(key, "keep one of them", "%s states %s twice", what, profile.Quote(key.Value))
			continue
		}
		seen[key.Value] = true
		f(key, n.Content[i+1])
	}
}

func (r *rulesReader) top(n *yaml.Node) {
	r.pairs(n, "the file", func(key, value *yaml.Node) {
		switch key.Value {
		case "department":
			r.department(value)
		case "rules":
			r.pairs(value, "rules", r.rule)
		default:
			r.fault(key, nearestOf(key.Value, []string{"department", "rules"}), "the file has no key %s", profile.Quote(key.Value))
		}
	})
}

func (r *rulesReader) department(n *yaml.Node) {
	const longest = 200
	name := strings.Join(strings.Fields(n.Value), " ")
	if n.Kind != yaml.ScalarNode || name == "" || utf8.RuneCountInString(name) > longest {
		r.fault(n, "write its name", "department is not a name of at most %d characters", longest)
		return
	}
	r.set.Department = name
}

// rule reads one rule: a weight, or a mapping of its weight and limits.
func (r *rulesReader) rule(key, value *yaml.Node) {
	at := slices.IndexFunc(r.set.changed, func(rule Rule) bool { return rule.ID == key.Value })
	if at < 0 {
		var ids []string
		for _, rule := range r.set.changed {
			ids = append(ids, rule.ID)
		}
		r.fault(key, nearestOf(key.Value, ids), "no rule is called %s", profile.Quote(key.Value))
		return
	}
	rule := &r.set.changed[at]
	if value.Kind == yaml.ScalarNode {
		r.weight(rule, value)
		return
	}
	r.pairs(value, "rule "+rule.ID, func(key, value *yaml.Node) {
		if key.Value == "weight" {
			r.weight(rule, value)
			return
		}
		r.limit(rule, key, value)
	})
}

func (r *rulesReader) weight(rule *Rule, n *yaml.Node) {
	w, ok := ParseWeight(n.Value)
	if n.Kind != yaml.ScalarNode || !ok {
		r.fault(n, "write answer, explain, note or off", "the weight of rule %s is %s", rule.ID, profile.Quote(n.Value))
		return
	}
	if rule.Fixed && w != rule.Weight {
		r.fault(n, "leave it out", "rule %s keeps its weight: a claim that does not follow, or cannot be checked, is the outcome itself", rule.ID)
		return
	}
	if w != rule.Weight {
		r.change(rule.ID, "weight", rule.Weight.String(), w.String())
	}
	rule.Weight = w
}

// limit reads one limit, with its unit or without.
func (r *rulesReader) limit(rule *Rule, key, n *yaml.Node) {
	at := slices.IndexFunc(rule.Limits, func(l Limit) bool { return l.Name == key.Value })
	if at < 0 {
		names := []string{"weight"}
		for _, l := range rule.Limits {
			names = append(names, l.Name)
		}
		r.fault(key, nearestOf(key.Value, names), "rule %s has no limit %s", rule.ID, profile.Quote(key.Value))
		return
	}
	l := &rule.Limits[at]
	number, unit := n.Value, ""
	if cut := strings.IndexFunc(number, func(c rune) bool { return !strings.ContainsRune("+-.0123456789", c) }); cut >= 0 {
		number, unit = n.Value[:cut], strings.TrimSpace(n.Value[cut:])
	}
	const largest = 1e6
	v, err := strconv.ParseFloat(number, 64)
	if n.Kind != yaml.ScalarNode || err != nil || unit != "" && unit != l.Unit || !(v >= 0 && v <= largest) {
		r.fault(n, fmt.Sprintf("write it as `%s: %s`", l.Name, strings.TrimPrefix(l.String(), l.Name+" ")), "%s of rule %s is %s", l.Name, rule.ID, profile.Quote(n.Value))
		return
	}
	if l.Most > 0 && v > l.Most {
		r.fault(n, fmt.Sprintf("write at most %s %s", short(l.Most, 6), l.Unit), "%s of rule %s is %s, with which anything would agree", l.Name, rule.ID, profile.Quote(n.Value))
		return
	}
	if l.Name == "divisor" && v == 0 {
		r.fault(n, "write a number above zero", "divisor of rule %s is zero", rule.ID)
		return
	}
	if v != l.Value {
		was := *l
		rule.Limits = slices.Clone(rule.Limits)
		rule.Limits[at].Value = v
		r.change(rule.ID, l.Name, strings.TrimPrefix(was.String(), l.Name+" "), strings.TrimPrefix(rule.Limits[at].String(), l.Name+" "))
	}
}

func (r *rulesReader) change(id, what, from, to string) {
	r.set.Changes = append(r.set.Changes, Change{id, what, from, to})
}

// nearestOf is a hint that names the nearest known word, or all of them.
func nearestOf(text string, known []string) string {
	if len(text) <= longestKey {
		if near := profile.Nearest(text, known); near != "" {
			return fmt.Sprintf("did you mean %q?", near)
		}
	}
	return "known here: " + strings.Join(known, ", ")
}

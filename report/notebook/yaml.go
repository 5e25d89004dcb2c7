package notebook

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
)

// faultList collects faults of one file.
type faultList struct {
	file   string
	faults profile.Faults
}

func (f *faultList) add(at profile.Place, hint, format string, args ...any) {
	f.faults = append(f.faults, profile.Faultf(at, hint, format, args...))
}

// mapping is a YAML mapping that knows its place and which of its keys have
// been read.
type mapping struct {
	*faultList
	what   string     // "the front matter", "working class"
	node   *yaml.Node // nil for an empty mapping
	offset int        // lines of the file before the YAML
	known  []string
}

// maxYAML is the longest front matter or working that is read, in bytes: the
// reader takes time that grows with the square of intricate input.
const maxYAML = 64 << 10

// parseMapping reads YAML text that starts after offset lines of the file.
func parseMapping(f *faultList, what, text string, offset int) mapping {
	m := mapping{faultList: f, what: what, offset: offset}
	if strings.TrimSpace(text) == "" {
		return m
	}
	if len(text) > maxYAML {
		f.add(m.at(nil), "keep data in files of their own", "%s is longer than %d KiB", what, maxYAML>>10)
		return m
	}
	var root yaml.Node
	if err := yaml.Load([]byte(text), &root); err != nil {
		f.yamlError(what, err, offset)
		return m
	}
	if root.Kind == yaml.DocumentNode && len(root.Content) == 1 {
		m.use(root.Content[0])
	}
	return m
}

// yamlError adds what the YAML reader found, at the line it names.
func (f *faultList) yamlError(what string, err error, offset int) {
	at, text := profile.Place{File: f.file, Line: offset + 1}, err.Error()
	var load *yaml.LoadError
	if errors.As(err, &load) {
		text = load.Message
		if load.Mark.Line > 0 {
			at.Line, at.Column = offset+load.Mark.Line, load.Mark.Column
		}
	}
	f.add(at, "each line of it reads `key: value`; put a value with : or # in it in double quotes",
		"%s is not readable YAML: %s", what, text)
}

// use takes a node as the mapping if it is one.
func (m *mapping) use(n *yaml.Node) {
	for n.Kind == yaml.AliasNode {
		n = n.Alias
	}
	if n.Kind != yaml.MappingNode {
		m.add(m.at(n), "write it as lines of `key: value`", "%s is not a list of keys and values", m.what)
		return
	}
	m.node = n
	seen := map[string]bool{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		key := n.Content[i]
		if seen[key.Value] {
			m.add(m.at(key), "keep one of them", "%s states %q twice", m.what, key.Value)
		}
		seen[key.Value] = true
	}
}

// at returns the place of a node.
func (m *mapping) at(n *yaml.Node) profile.Place {
	if n == nil {
		return profile.Place{File: m.file, Line: m.offset + 1}
	}
	return profile.Place{File: m.file, Line: m.offset + n.Line, Column: n.Column}
}

// get returns the value of a key, nil if the mapping has none, and marks the
// key as known.
func (m *mapping) get(key string) *yaml.Node {
	if !slices.Contains(m.known, key) {
		m.known = append(m.known, key)
	}
	if m.node == nil {
		return nil
	}
	for i := 0; i+1 < len(m.node.Content); i += 2 {
		if m.node.Content[i].Value == key {
			v := m.node.Content[i+1]
			for v.Kind == yaml.AliasNode {
				v = v.Alias
			}
			return v
		}
	}
	return nil
}

// has reports whether the mapping holds a key.
func (m *mapping) has(key string) bool { return m.get(key) != nil }

// keys returns the keys and values in their order.
func (m *mapping) pairs() (keys, values []*yaml.Node) {
	if m.node == nil {
		return nil, nil
	}
	for i := 0; i+1 < len(m.node.Content); i += 2 {
		v := m.node.Content[i+1]
		for v.Kind == yaml.AliasNode {
			v = v.Alias
		}
		keys, values = append(keys, m.node.Content[i]), append(values, v)
	}
	return keys, values
}

// text returns the value of a key as text; "" if there is none.
func (m *mapping) text(key string) string {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return ""
	}
	if n.Kind != yaml.ScalarNode {
		m.add(m.at(n), "", "%s of %s is not plain text", key, m.what)
		return ""
	}
	return n.Value
}

// texts returns the value of a key as a list; a single value is a list of
// one.
func (m *mapping) texts(key string) []string {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return nil
	}
	if n.Kind == yaml.ScalarNode {
		return []string{n.Value}
	}
	var list []string
	for _, item := range n.Content {
		if n.Kind != yaml.SequenceNode || item.Kind != yaml.ScalarNode {
			m.add(m.at(n), "write it as `"+key+": [a, b]`", "%s of %s is not a list of words", key, m.what)
			return nil
		}
		list = append(list, item.Value)
	}
	return list
}

// value returns the value of a key as a number with its unit, in SI.
func (m *mapping) value(key string, d profile.Dimension, example string) profile.Optional {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return profile.Optional{}
	}
	return m.valueOf(n, key, d, example)
}

func (m *mapping) valueOf(n *yaml.Node, key string, d profile.Dimension, example string) profile.Optional {
	v, err := profile.ParseValue(n.Value, d)
	if err != nil || n.Kind != yaml.ScalarNode {
		reason := "it is not a number with its unit"
		if err != nil {
			reason = err.Error()
		}
		m.add(m.at(n), fmt.Sprintf("write it with its unit, as `%s: %s`", key, example), "%s of %s: %s", key, m.what, reason)
		return profile.Optional{}
	}
	return profile.Known(v)
}

// inside returns the mapping that stands under a key, empty if there is
// none.
func (m *mapping) inside(key string) mapping {
	n := m.get(key)
	in := mapping{faultList: m.faultList, what: key + " of " + m.what, offset: m.offset}
	if n != nil && n.Tag != "!!null" {
		in.use(n)
	}
	return in
}

// rest adds a fault for every key that nobody asked for.
func (m *mapping) rest() {
	keys, _ := m.pairs()
	for _, k := range keys {
		if !slices.Contains(m.known, k.Value) {
			m.add(m.at(k), suggest(k.Value, m.known), "%s has no key %q", m.what, k.Value)
		}
	}
}

// suggest is a hint that names the nearest known word, or all of them.
func suggest(word string, known []string) string {
	if near := profile.Nearest(word, known); near != "" {
		return fmt.Sprintf("did you mean %q?", near)
	}
	if len(known) == 0 {
		return ""
	}
	return "known here: " + strings.Join(known, ", ")
}

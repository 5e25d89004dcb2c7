package codefile

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// mapping is a YAML mapping that knows what it is and which of its keys have
// been asked for.
type mapping struct {
	*reader
	what  string     // "the table", "class C"
	node  *yaml.Node // of kind MappingNode; nil for an empty mapping
	known []string
}

// parse reads the YAML text. It adds a fault where that is not one mapping
// of a sane size.
func (r *reader) parse(data []byte) *mapping {
	m := &mapping{reader: r, what: "the table"}
	at := profile.Place{File: r.file}
	switch {
	case len(data) > MaxSize:
		r.add(at, "a table of classes is a page of text; is this another file", "the file is larger than %d MiB", MaxSize>>20)
		return m
	case !utf8.Valid(data):
		r.add(at, "save it as UTF-8", "the file is not UTF-8 text")
		return m
	case tooIntricate(data):
		r.add(at, "a table of classes is a page of text; is this another file", "the file holds too many lists or keys for a table of classes")
		return m
	}
	var root yaml.Node
	err := yaml.Load(data, &root)
	switch {
	case err != nil && len(bytes.TrimSpace(data)) == 0, err == nil && root.Kind != yaml.DocumentNode:
		r.add(at, "`shearbook codes ID --format yaml` writes a table to start from", "the file is empty")
	case err != nil:
		r.unreadable(err)
	case len(root.Content) == 1 && r.plain(root.Content[0], 0):
		m.use(root.Content[0])
	}
	return m
}

// tooIntricate reports whether the text has so many of the marks that YAML
// is built of that reading it would take long.
func tooIntricate(data []byte) bool {
	marks := 0
	for _, b := range data {
		switch b {
		case '\n', ',', ':', '[', '{', '-', '?', '&', '*', '!':
			marks++
		}
	}
	return marks > maxMarks
}

// unreadable adds what the YAML reader found, at the place it names.
func (r *reader) unreadable(err error) {
	at, text := profile.Place{File: r.file}, err.Error()
	var load *yaml.LoadError
	if errors.As(err, &load) {
		text = load.Message
		if load.Mark.Line > 0 {
			at.Line, at.Column = load.Mark.Line, load.Mark.Column
		}
	}
	r.add(at, "each line reads `key: value`; put a bound in quotes, as `vs: \"> 1200\"`, and a text with : or # in it too",
		"the file is not readable YAML: %s", strings.TrimPrefix(text, "yaml: "))
}

// plain adds a fault and returns false where a node, or one inside it, is
// nested too deep or refers to another.
func (r *reader) plain(n *yaml.Node, depth int) bool {
	switch {
	case n.Kind == yaml.AliasNode || n.Anchor != "":
		r.add(r.at(n), "write the value out", "a table of classes has no anchors (&) and no references to them (*)")
		return false
	case depth > maxNesting:
		r.add(r.at(n), "the keys and lists of a table stand at most 3 deep", "this is nested too deep")
		return false
	}
	for _, child := range n.Content {
		if !r.plain(child, depth+1) {
			return false
		}
	}
	return true
}

// use takes a node as the mapping if it is one.
func (m *mapping) use(n *yaml.Node) {
	if n.Kind != yaml.MappingNode {
		m.add(m.at(n), "write it as lines of `key: value`", "%s is not a list of keys and values", m.what)
		return
	}
	m.node = n
	seen := map[string]bool{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		key := n.Content[i]
		if seen[key.Value] {
			m.add(m.at(key), "keep one of them", "%s states %q twice", m.what, shown(key.Value))
		}
		seen[key.Value] = true
	}
}

// at returns the place of a node, or the file where there is none.
func (r *reader) at(n *yaml.Node) profile.Place {
	if n == nil {
		return profile.Place{File: r.file}
	}
	return profile.Place{File: r.file, Line: n.Line, Column: n.Column}
}

// place returns the place of the mapping itself.
func (m *mapping) place() profile.Place {
	if m.node == nil {
		return m.at(nil)
	}
	return m.at(m.node)
}

// get returns the value of a key, nil if the mapping has none or leaves it
// blank, and marks the key as known.
func (m *mapping) get(key string) *yaml.Node {
	if !slices.Contains(m.known, key) {
		m.known = append(m.known, key)
	}
	if m.node == nil {
		return nil
	}
	for i := 0; i+1 < len(m.node.Content); i += 2 {
		if v := m.node.Content[i+1]; m.node.Content[i].Value == key && v.Tag != "!!null" {
			return v
		}
	}
	return nil
}

// text returns the value of a key as text in one line, "" if there is none.
func (m *mapping) text(key string) string { return m.textOf(m.get(key), key) }

func (m *mapping) textOf(n *yaml.Node, key string) string {
	if n == nil {
		return ""
	}
	if n.Kind != yaml.ScalarNode {
		m.add(m.at(n), "write it as one value, in quotes if it has : or # in it", "%s of %s is not plain text", key, m.what)
		return ""
	}
	text := oneLine(n.Value)
	switch {
	case strings.ContainsFunc(text, unprintable):
		m.add(m.at(n), "take it out", "%s of %s holds a character that cannot be printed", key, m.what)
		return ""
	case utf8.RuneCountInString(text) > MaxText:
		m.add(m.at(n), "shorten it, or make several notes of it", "%s of %s is longer than %d characters", key, m.what, MaxText)
		return ""
	}
	return text
}

// oneLine is text with its line breaks and runs of spaces made one space
// each.
func oneLine(text string) string {
	return strings.Join(strings.FieldsFunc(text, func(r rune) bool {
		return r == ' ' || r == '\t' || r == '\n' || r == '\r' || r == '\u0085' || r == '\u2028' || r == '\u2029'
	}), " ")
}

// unprintable reports control characters and those that change the direction
// of what stands around them.
func unprintable(r rune) bool { return unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r) }

// must returns the text of a key that has to be there.
func (m *mapping) must(key, example string) string {
	n := m.get(key)
	text := m.textOf(n, key)
	switch {
	case n == nil:
		m.add(m.place(), "add a line such as `"+example+"`", "%s does not state %q", m.what, key)
	case text == "" && n.Kind == yaml.ScalarNode && oneLine(n.Value) == "":
		m.add(m.at(n), "write it as `"+example+"`", "%s of %s is blank", key, m.what)
	}
	return text
}

// class returns the text of a key that names a class: short, as it stands in
// tables.
func (m *mapping) class(key string) string {
	const most = 40
	text := m.text(key)
	if utf8.RuneCountInString(text) > most {
		m.add(m.at(m.get(key)), "give the class as it is printed, as C", "%s of %s is longer than %d characters", key, m.what, most)
		return ""
	}
	return text
}

// texts returns the value of a key as a list of at most most texts; a single
// value is a list of one.
func (m *mapping) texts(key string, most int) []string {
	var list []string
	for _, n := range m.items(key, most) {
		if text := m.textOf(n, key); text != "" {
			list = append(list, text)
		}
	}
	return list
}

// items returns the nodes of a list of at most most; a single value is a list
// of one.
func (m *mapping) items(key string, most int) []*yaml.Node {
	n := m.get(key)
	switch {
	case n == nil:
		return nil
	case n.Kind != yaml.SequenceNode:
		return []*yaml.Node{n}
	case len(n.Content) > most:
		m.add(m.at(n.Content[most]), "leave out what is not of the table", "%s of %s has more than %d entries", key, m.what, most)
		return nil
	}
	return n.Content
}

// word returns the value of a key that is one of a few words, case aside;
// otherwise where the key is not there, or, if otherwise is "", a fault.
func (m *mapping) word(key string, words []string, otherwise string) string {
	n := m.get(key)
	text := m.textOf(n, key)
	i := slices.IndexFunc(words, func(w string) bool { return strings.EqualFold(w, text) })
	switch {
	case n == nil && otherwise == "":
		m.add(m.place(), "it is one of: "+strings.Join(words, ", "), "%s does not state %q", m.what, key)
	case n == nil:
		return otherwise
	case i >= 0:
		return words[i]
	case n.Kind == yaml.ScalarNode:
		m.add(m.at(n), suggest(text, words), "%s of %s is %q", key, m.what, shown(text))
	}
	return otherwise
}

// yes returns a key that is answered yes or no; no if it is not there.
func (m *mapping) yes(key string) bool {
	word := m.word(key, []string{"yes", "no", "true", "false"}, "no")
	return word == "yes" || word == "true"
}

// standings are the standings by the words of the file.
var standings = map[string]siteclass.Standing{"checked": siteclass.Checked,
	"one source": siteclass.OneSource, "from memory": siteclass.FromMemory}

// standing returns the standing under a key; otherwise where it is not
// there, or, if otherwise is 0, a fault.
func (m *mapping) standing(key string, otherwise siteclass.Standing) siteclass.Standing {
	word := ""
	if otherwise != 0 {
		word = otherwise.String()
	}
	return standings[m.word(key, []string{"checked", "one source", "from memory"}, word)]
}

// rest adds a fault for every key that nobody asked for.
func (m *mapping) rest() {
	if m.node == nil {
		return
	}
	for i := 0; i+1 < len(m.node.Content); i += 2 {
		if k := m.node.Content[i]; !slices.Contains(m.known, k.Value) {
			m.add(m.at(k), suggest(k.Value, m.known), "%s has no key %q", m.what, shown(k.Value))
		}
	}
}

// suggest is a hint that names the nearest known word, or all of them.
func suggest(word string, known []string) string {
	const longest = 100 // that anyone would mistype
	if len(word) <= longest {
		if near := profile.Nearest(word, known); near != "" {
			return fmt.Sprintf("did you mean %q?", near)
		}
	}
	return "known here: " + strings.Join(known, ", ")
}

// shown is text short enough for a message.
func shown(text string) string {
	const most = 60
	if r := []rune(text); len(r) > most {
		return string(r[:most]) + "…"
	}
	return text
}

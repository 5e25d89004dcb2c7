package notebook

import (
	"errors"
	"slices"

	"go.yaml.in/yaml/v4"

	"shearbook/profile"
	"shearbook/report/evidence"
	"shearbook/vs30/siteclass"
	"shearbook/vs30/siteclass/codefile"
)

// CodeEntry is one code that a notebook names: a built-in one by its ID, or a
// jurisdiction's own table by its file.
type CodeEntry struct {
	ID    string // of a built-in code; "" where File is set
	File  string // file, beside the notebook
	place profile.Place
}

// codeEntries reads code: an ID, `{file: local.yaml}`, or a list of them.
func (m *mapping) codeEntries(key string) []CodeEntry {
	n := m.get(key)
	if n == nil || n.Tag == "!!null" {
		return nil
	}
	if n.Kind != yaml.SequenceNode {
		return m.codeEntry(n, nil)
	}
	var entries []CodeEntry
	for _, item := range n.Content {
		entries = m.codeEntry(item, entries)
	}
	return entries
}

// codeEntry adds the entry of one node to the others.
func (m *mapping) codeEntry(n *yaml.Node, entries []CodeEntry) []CodeEntry {
	for n.Kind == yaml.AliasNode {
		n = n.Alias
	}
	switch {
	case n.Kind == yaml.ScalarNode && n.Value != "":
		return append(entries, CodeEntry{ID: n.Value, place: m.at(n)})
	case n.Kind == yaml.MappingNode:
		in := mapping{faultList: m.faultList, what: "code of " + m.what, offset: m.offset}
		in.use(n)
		file := in.text("file")
		if file == "" && !in.has("file") {
			m.add(m.at(n), "write it as `code: {file: local.yaml}`", "code of %s names no file", m.what)
		}
		in.rest()
		return append(entries, CodeEntry{File: file, place: m.at(n)})
	}
	m.add(m.at(n), "write it as `code: asce-7-16`, as `code: {file: local.yaml}`, or as a list of them", "code of %s is no code", m.what)
	return entries
}

// ownTable is a jurisdiction's own table with the file that it was read from.
type ownTable struct {
	code *siteclass.Code
	file string
	data []byte
}

// findCodes reads the tables that the front matter names by file, and finds
// the codes that it names by ID.
func (ev *evaluation) findCodes() {
	read := map[string]*siteclass.Code{}
	for _, e := range ev.nb.Header.Codes {
		if _, done := read[e.File]; e.File != "" && !done {
			read[e.File] = ev.readTable(e)
		}
	}
	for _, e := range ev.nb.Header.Codes {
		code := read[e.File]
		if e.File == "" {
			code = ev.codeNamed(e.ID, e.place)
		}
		if code != nil && !slices.Contains(ev.chosen, code) {
			ev.chosen = append(ev.chosen, code)
		}
	}
}

// readTable reads a jurisdiction's own table, nil where it is at fault.
func (ev *evaluation) readTable(e CodeEntry) *siteclass.Code {
	data, err := ev.readFile(e.File, evidence.CodeTable)
	if err != nil {
		ev.add(e.place, "name a file in the notebook's folder", "code: %s cannot be read: %v", e.File, profile.FileError(err))
		return nil
	}
	code, err := codefile.Read(e.File, data)
	var faults profile.Faults
	switch {
	case errors.As(err, &faults):
		ev.faults = append(ev.faults, faults...)
		return nil
	case err != nil:
		ev.add(e.place, "", "code: %v", err)
		return nil
	}
	for _, other := range ev.own {
		if other.code.ID == code.ID {
			ev.add(e.place, "give each table an id of its own", "%s and %s both have the id %q", other.file, e.File, code.ID)
			return nil
		}
	}
	ev.own = append(ev.own, ownTable{code, e.File, data})
	return code
}

// codeNamed returns the code of an ID among the notebook's own tables and the
// built-in codes. It adds a fault and returns nil where there is none.
func (ev *evaluation) codeNamed(id string, at profile.Place) *siteclass.Code {
	var ids []string
	for _, t := range ev.own {
		if t.code.ID == id {
			return t.code
		}
		ids = append(ids, t.code.ID)
	}
	code, err := siteclass.Find(id)
	if err == nil {
		return code
	}
	if near := profile.Nearest(id, ids); near != "" {
		err = &siteclass.UnknownError{ID: id, Nearest: near}
	}
	ev.add(at, "`shearbook codes` lists them", "%v", err)
	return nil
}

// allCodes returns the built-in codes and then the notebook's own tables.
func (ev *evaluation) allCodes() []*siteclass.Code {
	all := siteclass.All()
	for _, t := range ev.own {
		all = append(all, t.code)
	}
	return all
}

// code returns the first code of the notebook, nil if it names none.
func (ev *evaluation) code() *siteclass.Code {
	if len(ev.chosen) == 0 {
		return nil
	}
	return ev.chosen[0]
}

// codes returns the codes that a working is about: those it names under key,
// or else those of the front matter.
func (ev *evaluation) codes(m *mapping, key string) []*siteclass.Code {
	ids, place := m.texts(key), m.at(m.get(key))
	if ids == nil {
		if len(ev.chosen) == 0 {
			m.add(m.at(nil), "add `code: asce-7-16`, or another of `shearbook codes`, to the front matter", "%s needs a code", m.what)
		}
		return ev.chosen
	}
	if len(ids) == 0 {
		m.add(place, "add `code: asce-7-16`, or another of `shearbook codes`, to the front matter", "%s needs a code", m.what)
	}
	var codes []*siteclass.Code
	for _, id := range ids {
		if code := ev.codeNamed(id, place); code != nil {
			codes = append(codes, code)
		}
	}
	return codes
}

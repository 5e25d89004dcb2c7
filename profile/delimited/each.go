package delimited

import (
	"errors"
	"strings"

	"shearbook/profile"
)

// Each does what Read does, but a profile at fault leaves the others of the
// table alone: it comes with its faults. A table without a column of profile
// names, or whose header is at fault, is one profile. The error is of a table
// whose profiles are faultless but for one another.
func (t *Table) Each(reading profile.Reading, opt Options) ([]profile.Found, error) {
	profiles, whole := t.Read(reading, opt)
	if whole == nil {
		return profile.FoundOf(profiles), nil
	}
	groups, header := t.groups()
	if len(groups) < 2 || len(groups)*len(t.statements) > maxStated {
		return []profile.Found{t.failed(t.Name, 0, whole)}, nil
	}
	bad, names := map[string]profile.Found{}, map[string]bool{}
	for i := range groups {
		names[groups[i].name] = true
	}
	var good []group
	for i := range groups {
		g := groups[i : i+1]
		if _, err := t.of(header, g, names).Read(reading, opt); err != nil {
			bad[g[0].name] = t.failed(g[0].name, int(g[0].rows[0]), err)
			continue
		}
		good = append(good, g...)
	}
	var read []profile.Found
	if len(good) > 0 { // once more together, for what they say of one another
		profiles, err := t.of(header, good, names).Read(reading, opt)
		if err != nil || len(profiles) != len(good) {
			return nil, whole
		}
		read = profile.FoundOf(profiles)
	}
	found := make([]profile.Found, 0, len(groups))
	for _, g := range groups {
		f, is := bad[g.name]
		if !is {
			f, read = read[0], read[1:]
		}
		found = append(found, f)
	}
	return found, nil
}

// maxStated is how many statements, counted for each profile, Each looks
// through.
const maxStated = 10_000_000

// failed is a profile that could not be read.
func (t *Table) failed(name string, row int, err error) profile.Found {
	f := profile.Found{Name: name, Line: row}
	if row == 0 && len(t.rows) > 1 {
		f.Line = int(t.rows[1])
	}
	if !errors.As(err, &f.Faults) {
		f.Faults = profile.Faults{profile.Faultf(profile.Place{}, "", "%v", err)}
	}
	return f
}

// group is the rows of one profile of a table.
type group struct {
	name string
	text []string // lines
	rows []int32
}

// groups are the rows of each profile, in the order in which they begin, and
// the header; none where the table has no column of names, or a row without one
// above all others.
func (t *Table) groups() (groups []group, header string) {
	r := reader{mapping: t.Mapping}
	r.scan = newScanner(t.text)
	r.scan.grid = &grid{rows: t.rows, column: t.Column}
	r.preamble = preamble{seen: map[string]int{}, forced: '\t'}
	if !r.readHeader() || !r.has(profile.ProfileName) {
		return nil, ""
	}
	column := r.columns.index[profile.ProfileName]
	lines := strings.SplitAfter(strings.TrimSuffix(string(t.text), "\n"), "\n")
	at, last := map[string]int{}, -1
	for i, line := range lines {
		if i == 0 || i >= len(t.rows) {
			continue
		}
		name := nameOf(line, column)
		k, ok := at[name]
		switch {
		case name == "" && last < 0:
			return nil, ""
		case name == "":
			k = last
		case !ok:
			k = len(groups)
			at[name] = k
			groups = append(groups, group{name: name})
		}
		g := &groups[k]
		g.text, g.rows, last = append(g.text, strings.TrimSuffix(line, "\n")+"\n"), append(g.rows, t.rows[i]), k
	}
	return groups, strings.TrimSuffix(lines[0], "\n") + "\n"
}

// nameOf is the cell of a line of a table's text in a column, with single
// blanks.
func nameOf(line string, column int) string {
	s := newScanner([]byte(line))
	s.sep = '\t'
	if ok, bad := s.next(); !ok || bad != nil {
		return ""
	}
	return strings.Join(strings.Fields(string(s.cell(column))), " ")
}

// of is the table with some of its profiles, of all those names, alone, and without the statements
// about the others.
func (t *Table) of(header string, some []group, names map[string]bool) *Table {
	c := *t
	c.text, c.rows = []byte(header), t.rows[:1:1]
	in := map[string]bool{}
	for _, g := range some {
		in[g.name] = true
		for _, line := range g.text {
			c.text = append(c.text, line...)
		}
		c.rows = append(c.rows, g.rows...)
	}
	c.statements = nil
	for _, st := range t.statements {
		if name, _, _ := scoped(st.text, nil); in[name] || !names[name] {
			c.statements = append(c.statements, st)
		}
	}
	return &c
}

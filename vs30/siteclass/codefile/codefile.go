// Package codefile reads and writes a jurisdiction's own class table as YAML.
//
// A file says what a built-in code says: whose table it is, over which depth
// and from which datum velocities are averaged, the classes with their
// bounds, the conditions beside them. A bound is written with its printed
// operator, in quotes: "> 1200", ">= 600, <= 1200", "600 to 1200" where the
// print gives a range and does not say which class owns its ends. The example
// in testdata/codefile explains every key.
//
// Classes stand in the printed order, the stiffest first. Where two ranges
// meet, the value between them may belong to both classes or to none, as it
// does in print; the decision then takes the softer and says so. A gap or an
// overlap that is wider is a fault: the table leaves out velocities, or gives
// them twice. Velocities below the softest class are a fault as well unless
// `outside` says what they are. The columns of N and of strength are held to
// the same.
//
// A code that is read carries Own, its Edition says whose table it is, and
// every decision under it has the note own-table. It may not take the ID of a
// built-in code.
package codefile

import (
	"errors"
	"slices"
	"unicode/utf8"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// What a file may hold at most.
const (
	MaxSize       = 1 << 20 // bytes
	MaxBands      = 100
	MaxConditions = 100
	MaxNotes      = 100
	MaxText       = 2000 // characters of one text
	maxNesting    = 6    // the example has 4
	maxMarks      = 50_000
	maxFaults     = 50
)

// Read reads a table. File is its name as the user gave it. The error is a
// profile.Faults: everything that is wrong, with line and column, in the
// order of the file.
func Read(file string, data []byte) (*siteclass.Code, error) {
	r := &reader{file: file}
	top := r.parse(data)
	if len(r.faults) > 0 {
		return nil, r.faults
	}
	code := r.code(top)
	if len(r.faults) > 0 {
		return nil, r.told()
	}
	return code, nil
}

// reader reads one file and collects what is wrong with it.
type reader struct {
	file   string
	faults profile.Faults
}

func (r *reader) add(at profile.Place, hint, format string, args ...any) {
	r.faults = append(r.faults, profile.Faultf(at, hint, format, args...))
}

// told returns the faults in the order of the file, the first maxFaults of
// them where there are more.
func (r *reader) told() profile.Faults {
	slices.SortStableFunc(r.faults, func(a, b profile.Fault) int {
		if a.Place.Line != b.Place.Line {
			return a.Place.Line - b.Place.Line
		}
		return a.Place.Column - b.Place.Column
	})
	if n := len(r.faults); n > maxFaults {
		return append(r.faults[:maxFaults:maxFaults],
			profile.Faultf(profile.Place{File: r.file}, "mend these first", "%d more faults", n-maxFaults))
	}
	return r.faults
}

// code reads the whole table.
func (r *reader) code(top *mapping) *siteclass.Code {
	c := &siteclass.Code{
		ID:        top.id(),
		Title:     top.must("title", "title: Ordinance on building in the valley"),
		Edition:   top.must("edition", "edition: Ordinance 12 of 2025"),
		Region:    top.text("region"),
		Clause:    top.must("clause", "clause: section 7"),
		Table:     top.must("table", "table: Table 7-1"),
		Source:    top.text("source"),
		Parameter: top.must("parameter", "parameter: Vs30"),
		DatumNote: top.text("datum note"),
		Outside:   top.class("outside"),
		Notes:     top.texts("notes", MaxNotes),
		Short:     top.text("short profiles"),

		Correlated: top.text("correlated velocities"),
	}
	if c.Correlated == "" {
		c.Correlated = nothingSaid
	}
	c.Datum = datums[top.word("datum", datumWords, "not stated")]
	c.Standing = top.standing("standing", 0)
	r.units(top, c)
	r.bands(top, c)
	r.routes(top, c)
	if len(r.faults) == 0 {
		r.checkRoutes(top, c)
	}
	r.lacking(top, c)
	r.conditions(top, c)
	r.twin(top, c)
	r.own(top, c)
	top.rest()
	return c
}

// lacking reads what the print says beside its table: of missing data, of
// several profiles, of the table it takes over, and of what replaces it.
func (r *reader) lacking(top *mapping, c *siteclass.Code) {
	c.Default, c.DefaultClass = top.text("where data are lacking"), top.class("default class")
	if c.DefaultClass != "" {
		top.isClass("default class", c.DefaultClass, c)
	}
	c.Several, c.WorstOf = top.text("several profiles"), top.yes("worst profile governs")
	c.Superseded = top.text("superseded")
	if c.Adopts = top.class("adopts"); c.Adopts == "" {
		return
	}
	c.Adoption = top.must("adoption", "adoption: section 7 takes the table of that code")
	c.AdoptionStanding = top.standing("adoption standing", max(c.Standing, siteclass.Checked))
}

// nothingSaid stands for Correlated where a file says nothing of it.
const nothingSaid = "the file of the table says nothing of such velocities"

// The datums by the words of the file.
var (
	datumWords = []string{"not stated", "ground surface", "foundation"}
	datums     = map[string]siteclass.Datum{"not stated": siteclass.DatumUnstated,
		"ground surface": siteclass.DatumGround, "foundation": siteclass.DatumFoundation}
)

// own labels the code as a jurisdiction's own.
func (r *reader) own(top *mapping, c *siteclass.Code) {
	c.Own = &siteclass.Own{AdoptedBy: top.text("adopted by"), Edition: c.Edition, File: r.file}
	c.Edition += " (" + c.Own.String() + ")"
}

// id reads the ID, which commands and notebooks call the table by.
func (m *mapping) id() string {
	id := m.must("id", "id: halvard-2025")
	if id == "" {
		return ""
	}
	at := m.at(m.get("id"))
	if !validID(id) {
		m.add(at, "write small letters, digits, hyphens and points, as halvard-2025, at most 40",
			"the id %q cannot be used on a command line", id)
		return ""
	}
	var unknown *siteclass.UnknownError
	if _, err := siteclass.Find(id); !errors.As(err, &unknown) {
		m.add(at, "give the table an id of its own, as "+id+localSuffix, "the id %q is that of a built-in code", id)
	}
	return id
}

func validID(id string) bool {
	const most = 40
	for i, r := range id {
		letter := r >= 'a' && r <= 'z'
		if !letter && (i == 0 || !(r >= '0' && r <= '9' || r == '-' || r == '.')) {
			return false
		}
	}
	return utf8.RuneCountInString(id) <= most
}

// localSuffix stands behind the ID of a built-in code that is written out.
const localSuffix = "-local"

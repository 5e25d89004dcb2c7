package spreadsheet

import (
	"slices"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// ReadEach does what Read does, but a profile at fault leaves the others
// alone: it comes with its faults. A table without a column of profile names is
// one profile. Of two profiles of one name the first counts. The error is of
// the workbook as a whole: of what is wrong outside the rows of its tables, and
// of formulas without a stored value.
func ReadEach(file string, data []byte, opt Options) ([]profile.Found, error) {
	if _, err := delimited.ParseUnits(opt.Units); err != nil {
		return nil, err
	}
	mapping, err := delimited.ParseMap(opt.Map)
	if err != nil {
		return nil, err
	}
	r := reader{collector: collector{file: file}, opt: opt, mapping: mapping, mapped: make([]bool, len(opt.Map)), apart: true}
	r.read(data)
	if err := r.err(); err != nil {
		return nil, err
	}
	return r.found, nil
}

// tableApart reads the profiles of a table. It returns false where the table
// is at fault as a whole, which is told.
func (r *reader) tableApart(t *table, reading profile.Reading, began map[string]profile.Place) bool {
	found, err := t.Each(reading, delimited.Options{Units: r.opt.Units})
	t.Table = delimited.Table{} // its cells are in the profiles now
	if err != nil {
		r.addFaults(err)
		return false
	}
	for _, f := range found {
		if f.Line == 0 {
			f.Line = t.header
		}
		at := r.place(t.sheet.name, f.Line, t.from+1)
		before, twice := began[f.Name]
		switch {
		case twice:
			at.File = r.file
			f.Profile, f.Faults = nil, profile.Faults{profile.Faultf(at, hintNames, "duplicate profile %s: one of that name began at %s", profile.Quote(f.Name), before.Cell)}
		default:
			began[f.Name] = at
		}
		if f.Profile != nil {
			f.Profile.Notes = slices.Concat(t.notes(f.Profile), f.Profile.Notes)
		}
		r.found = append(r.found, f)
	}
	return true
}

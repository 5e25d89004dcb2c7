// Package spreadsheet reads tables of layers in workbooks (Office Open XML,
// XLSX).
//
// A table may stand anywhere on any sheet: its header is the row that names a
// column of Vs, or else of N or su, and one of top, bottom, thickness or depth. What package
// delimited says of headings, units, depths and numbers holds here too. Tables
// may follow one another down a sheet, each with its header, or stand side by
// side with a blank column between them. A table ends where the next header in
// its columns begins; blank rows do not end it, so that no layer is lost. Cells
// outside the columns that a header names are not read.
//
// # Titles and statements
//
// Rows above a header that are no layers belong to its table. A cell
// "method: MASW", or a cell "method" with "MASW" in the cell to the right of
// it, states what the lines above a table in text do; other text is kept as a
// comment. Text below a table is kept out of it and noted.
//
// # Names
//
// A profile is named by its column, or by a statement "name: …". Otherwise, one
// table on a sheet is named after the sheet, unless it is the workbook's only
// table and the sheet has the name that a new workbook gives it: then it is
// named after the file. Several tables on a sheet are named by the title above
// each, if each has one of its own, or after the sheet with a number.
//
// # Cells
//
// Numbers are read as stored, to the 15 digits that a spreadsheet shows; a
// percentage as it is shown. A date where a number is due is a fault; elsewhere
// it is read as it is shown, or as 2026-05-05 if its order depends on the
// reader's country. True and false are the words TRUE and FALSE. Of a formula
// its stored value is read; nothing is evaluated. Merged cells all hold the
// value of the first. Hidden rows, columns and sheets are read and noted. A
// sheet whose XML, rows or cells are not in order is damaged as a whole.
//
// # Standard library
//
// Workbooks are taken apart with archive/zip and encoding/xml alone. A general
// library for them was used before; its initialisation cost 4 to 20 ms and
// 21,000 allocations at the start of every command, also of those that read no
// workbook. The tests still make their workbooks with it. A sheet is read once,
// token by token; nothing is written to disk.
package spreadsheet

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"slices"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

// Limits of what Read takes in, beside those of package delimited. Beyond them
// it says so and stops.
const (
	MaxBytes     = delimited.MaxBytes // of a file
	MaxUnzipped  = 256 << 20          // bytes of its sheets and texts, unzipped
	MaxParts     = 64 << 20           // bytes of everything else in it, unzipped
	MaxPart      = 8 << 20            // bytes of one XML part that is no sheet and no text
	MaxFiles     = 5_000              // parts
	MaxSheets    = 100
	MaxSheetRows = 2_000_000  // of all sheets, blank ones before the last included
	MaxCells     = 10_000_000 // of all sheets, blank ones left of others included
	MaxTables    = 10_000
	MaxInspected = 200_000 // cells of the rectangle that a sheet fills; a larger one is not looked through for what Read calls inspected
	MaxMerged    = 2_000   // merged ranges of a sheet that is inspected
)

// Options says how to read a file. The zero value reads what the file states.
type Options struct {
	// Units are for what the file states no unit for, in the form of
	// delimited.ParseUnits: "ft, ft/s".
	Units string

	// Map names columns that would not be recognised, as delimited.Options does.
	// An item may hold for some tables alone; one that holds for none is a fault.
	Map []string
}

// Read returns the profiles of a workbook in the order of its sheets and of
// the tables on them. An error is a profile.Faults, each fault at its cell.
// Beside the notes of delimited.Read a profile may carry these:
//
//   - hidden-rows, hidden-columns, hidden-sheet: what is hidden and was read.
//   - row-not-read: text below a table.
//   - table-not-read: tables of N or su without velocities, in a workbook that
//     has tables with them; the first profile carries it.
//   - sheet-not-inspected: the sheet is too large to be inspected for merged
//     cells, hidden columns and formulas without a stored value.
func Read(file string, data []byte, opt Options) ([]profile.Profile, error) {
	if _, err := delimited.ParseUnits(opt.Units); err != nil {
		return nil, err
	}
	mapping, err := delimited.ParseMap(opt.Map)
	if err != nil {
		return nil, err
	}
	r := reader{collector: collector{file: file}, opt: opt, mapping: mapping, mapped: make([]bool, len(opt.Map))}
	r.read(data)
	if err := r.err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

func (r *reader) read(data []byte) {
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.file, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data)), Encoding: "XLSX"}
	if archive, ok := r.checkZip(data); ok {
		r.readBook(archive)
	}
}

// reader is the state of reading one file.
type reader struct {
	collector
	opt      Options
	mapping  delimited.Mapping
	mapped   []bool          // which of its items a table has
	nearest  candidate       // for the message, if no table is found
	reading  profile.Reading // what the readings of all profiles share
	rows     int             // read so far, of all sheets
	cells    int
	tables   []*table
	profiles []profile.Profile
	apart    bool            // each profile has faults of its own
	found    []profile.Found // where apart
}

// place is the place of a cell.
func (r *reader) place(sheet string, row, column int) profile.Place {
	return profile.Place{Line: row, Column: column, Cell: profile.CellName(sheet, row, column)}
}

// readTables reads the tables that were found.
func (r *reader) readTables() {
	if len(r.tables) == 0 {
		r.noTable()
		return
	}
	if !r.allMapped() {
		return
	}
	left := r.leaveOut()
	nameTables(r.tables)
	began := map[string]profile.Place{}
	for i, t := range r.tables {
		reading := r.reading
		reading.Sheet = t.sheet.name
		if r.apart {
			if !r.tableApart(t, reading, began) {
				return
			}
			continue
		}
		profiles, err := t.Read(reading, delimited.Options{Units: r.opt.Units})
		t.Table = delimited.Table{} // its cells are in the profiles now
		if err != nil {
			if r.addFaults(err); r.total >= profile.MaxFaults && i < len(r.tables)-1 {
				r.stop("mend these first", "%s after these were not looked at", profile.Plural(len(r.tables)-1-i, "table"))
				return
			}
			continue
		}
		for _, p := range profiles {
			r.take(p, t, began)
		}
	}
	if p := r.first(); p != nil && len(left) > 0 {
		p.Notes = append(p.Notes, r.leftOut(left))
	}
}

// first is the first profile that was read, nil if there is none.
func (r *reader) first() *profile.Profile {
	for i := range r.found {
		if p := r.found[i].Profile; p != nil {
			return p
		}
	}
	if len(r.profiles) == 0 {
		return nil
	}
	return &r.profiles[0]
}

// leaveOut takes the tables without velocities out, if others have them. It
// returns the places of their headers.
func (r *reader) leaveOut() []profile.Place {
	if !slices.ContainsFunc(r.tables, func(t *table) bool { return t.velocity }) {
		return nil
	}
	var left []profile.Place
	r.tables = slices.DeleteFunc(r.tables, func(t *table) bool {
		if !t.velocity {
			left = append(left, r.place(t.sheet.name, t.header, t.from+1))
		}
		return !t.velocity
	})
	return left
}

// leftOut is the note on tables that were left out.
func (r *reader) leftOut(left []profile.Place) profile.Note {
	var cells []string
	for _, at := range left {
		cells = append(cells, at.Cell)
	}
	text := "a table without velocities was not read: its header stands in "
	if len(left) > 1 {
		text = profile.Plural(len(left), "table") + " without velocities were not read: their headers stand in "
	}
	at := left[0]
	at.File = r.file
	return profile.Note{ID: "table-not-read", Text: text + some(cells), Place: at}
}

// addFaults adds the faults of one table.
func (r *reader) addFaults(err error) {
	var faults profile.Faults
	if !errors.As(err, &faults) {
		r.fault(profile.Place{}, "", "%v", err)
		return
	}
	for _, each := range faults {
		if each.More > 0 {
			r.total += each.More
			continue
		}
		r.fault(each.Place, each.Hint, "%s", each.Text)
	}
}

const hintNames = "give each table a title, a sheet or a column of profile names of its own"

// take takes a profile of table t unless one of its name was taken before.
func (r *reader) take(p profile.Profile, t *table, began map[string]profile.Place) {
	at := r.place(t.sheet.name, p.Reading.Rows[0].Line, t.from+1)
	if before, ok := began[p.Name]; ok {
		r.fault(at, hintNames, "duplicate profile %s: one of that name began at %s", profile.Quote(p.Name), before.Cell)
		return
	}
	began[p.Name] = at
	p.Notes = slices.Concat(t.notes(&p), p.Notes)
	r.profiles = append(r.profiles, p)
}

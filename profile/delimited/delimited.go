// Package delimited reads and writes tables of layers in text files whose
// cells are separated by commas, semicolons or tabs.
//
// A header row names the columns, a row is a layer, and lines that begin with
// # above the header state what holds for the whole profile:
//
//	# method: MASW
//	# depth reached: 34 m
//	top (m),bottom (m),vs (m/s)
//	0,4.5,180
//	4.5,12,260
//	12,,420
//
// # Depths
//
// Layers are given by top and bottom, by thickness, by bottom alone or by top
// alone, from ground level down. What is given twice must agree within
// profile.Joint. A last layer whose bottom or thickness is blank, "inf" or
// "half-space" is a half-space; so is the last layer of a table that gives
// tops alone, and a note says so. A column named depth and no more is a top
// if it stands beside a column of bottoms or its first value is 0, and a bottom
// if it stands beside a column of tops or its first value is the first
// thickness; a note says so. Otherwise it is refused.
//
// # Columns
//
// Beside depth and Vs a table may give Vs at the bottom of a layer, Vp,
// density, the standard deviation of ln Vs or a lower and an upper Vs, basis,
// soil, N, su, plasticity index, water content and refusal; the names are in
// names.go. Case, spaces, hyphens and underscores do not matter. A column
// with another name is kept unread and noted. A column of profile names puts
// several profiles into one file, each in rows that follow one another.
// Otherwise the profile is named by a line "# name: …", or after the file.
//
// # Units
//
// The unit of a column stands in its heading, as "vs (ft/s)" with round or
// square brackets, "Vs, m/s", "vs_mps" or "vs_ft_s", or in a row of units under
// the header, or in a line "# units: m, m/s" above it, or in Options. A unit that is not
// stated is a fault. N is in blows per 0.3 m (1 ft) and the plasticity index
// in percent by definition.
//
// # Numbers and text
//
// A decimal comma is read where semicolons or tabs separate the cells; a
// number such as 1,200 that could be 1.2 or 1200 is a fault. Text is UTF-8,
// UTF-16 or, failing both, Windows-1252. Lines end in LF, CRLF or CR.
//
// # Lines above the header
//
// Known keys are name, method, date, location, operator, basis, ground level,
// water table, depth reached, latitude, longitude, easting, northing, epsg and
// units; others are kept
// as they are. A line "# [L2] water table: 3 m" holds for profile L2 alone.
//
// # Positions
//
// Latitude and longitude (degrees, WGS 84), easting and northing (in their
// grid, in its own unit) and the EPSG code of the grid are read above the
// header, or from columns of these names, in which a profile says one thing:
// in its first row, and in others again or not at all.
package delimited

import (
	"crypto/sha256"
	"encoding/hex"

	"shearbook/profile"
)

// Limits of what Read takes in. Beyond them it says so and stops.
const (
	MaxBytes    = 64 << 20  // of a file
	MaxRows     = 2_000_000 // of layers in a file
	MaxField    = 64 << 10  // bytes of a cell, and of a line above the header
	MaxColumns  = 1000
	MaxProfiles = 100_000
	MaxMetadata = 1_000_000 // lines above the header, counted once for each profile that has lines of its own
	MaxFaults   = 20        // told of one file; one more says how many are not
)

// Options says how to read a file. The zero value reads what the file states.
type Options struct {
	// Units are for what the file states no unit for, in the form of
	// ParseUnits: "ft, ft/s". Where the file states another unit, that is a
	// fault.
	Units string

	// Map names columns that would not be recognised, each as
	// "Vs=S-wave speed [m/s]": a quantity under any name that is read, = and a
	// heading. The unit is for what the file states none for; where the file
	// states another, that is a fault. A mapped column goes before others of
	// its quantity, which are then not read.
	Map []string
}

// Read returns the profiles of a table in the order of the file. The name of
// the file is used in messages and for a profile that has no other name. An
// error is a profile.Faults: everything that is wrong, at most MaxFaults, the
// one that ended the reading if there is one, and a last one that says how
// many more. Each profile has passed
// profile.Validate and carries the notes of profile.Doubts after its own:
//
//   - column-not-read: columns that were carried along unread.
//   - mapped: columns that were read as Options.Map says.
//   - units-given: units that the file does not state and Options does.
//   - depth-as-top, depth-as-bottom: what a column named depth was taken for.
//   - half-space-assumed: tops alone were given, so the last layer has no
//     bottom.
//   - bottom-suspect: the last bottom is 999 or the like, which may stand for
//     a half-space.
//   - bounds-as-sigma: a lower and an upper Vs were read as the 16 % and 84 %
//     quantiles of a lognormal velocity, so the standard deviation of ln Vs is
//     ln(upper/lower)/2.
func Read(file string, data []byte, opt Options) ([]profile.Profile, error) {
	r := reader{collector: collector{file: file}}
	var err error
	if r.given, err = ParseUnits(opt.Units); err != nil {
		return nil, err
	}
	if r.mapping, err = ParseMap(opt.Map); err != nil {
		return nil, err
	}
	r.read(data)
	if err := r.err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

// reader is the state of reading one file.
type reader struct {
	collector
	given    Units   // by Options
	mapping  Mapping // by Options
	stated   Units   // by the file's "# units:" line
	scan     scanner
	reading  profile.Reading // what the readings of all profiles share
	preamble preamble
	columns  columns
	numerals numerals
	table    table
	profiles []profile.Profile

	tableName string        // of a profile that nothing in a spreadsheet's table names
	halfTold  map[spot]bool // halves of positions that were told of
}

// read runs from the bytes to the profiles. Each step that returns false has
// told why the next makes no sense.
func (r *reader) read(data []byte) {
	_ = r.decode(data) && r.readPreamble() && r.readHeader() && r.readRows() && r.assemble()
}

// decode turns the bytes into text.
func (r *reader) decode(data []byte) bool {
	if len(data) > MaxBytes {
		r.stop(spot{}, "split it", "the file is larger than %d MiB", MaxBytes>>20)
		return false
	}
	sum := sha256.Sum256(data)
	r.reading = profile.Reading{File: r.file, SHA256: hex.EncodeToString(sum[:]), Size: int64(len(data))}
	text, encoding, bad := decode(data)
	if bad != nil {
		r.trouble(bad)
		return false
	}
	r.reading.Encoding = encoding
	r.scan = newScanner(text)
	if r.scan.blankToEnd() {
		r.fault(spot{}, hintTable, "the file is empty")
		return false
	}
	return true
}

// hintTable says what a table needs.
const hintTable = `a table of layers has a header such as top_m,bottom_m,vs_mps and a row for each layer`

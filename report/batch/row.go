// Package batch classifies many profiles at once: files, folders or one table
// of a whole region in; one row a profile and code out.
//
// A run writes two tables, in the order of the input: summary.csv, whose rows
// are Rows, and faults.csv, whose rows are Faults. Everything else that a batch
// gives (the map layer, the JSON lines, the workbook, the summary's pages) is
// made from these two, so that shards that are joined, a run that is taken up
// again and a run in one piece cannot differ.
package batch

import "shearbook/profile"

// The files of a batch's folder.
const (
	Summary  = "summary.csv"
	FaultsIn = "faults.csv"  // every fault, and every note unless Job.FaultsAlone
	Sources  = "sources.csv" // file, sha256, bytes of every file that was read
	Reports  = "reports"     // one folder a profile
)

// Row is one profile under one code: a line of summary.csv. A profile that
// failed has its row too, with Problem; so has a file that could not be read,
// without a profile's name. Each unit (a profile, or such a file) therefore
// has one row for each code, in the order of the codes.
type Row struct {
	File    string
	Line    int    // where the profile begins in its file, from 1; 0 where a file has no lines
	Profile string // "" of a file that could not be read
	Code    string
	Class   string // "" where it failed
	Route   string // of the code: by velocity, N, su …

	Velocity     float64 // m/s, the average that the code uses; 0 where it uses none
	Depth        float64 // m, over which it is taken
	Vs30         float64 // m/s, over 30 m below the same datum; 0 where there is none
	DepthReached float64 // m below ground level
	Datum        float64 // m below ground level
	Basis        string
	Standing     string

	ToClass string  // at the nearest bound at which the class changes; "" where there is none
	Margin  float64 // %, to that bound: 100·(bound−average)/average

	Flags    Flags
	Notes    int // rows of faults.csv, none with Job.FaultsAlone, that are notes on this profile under this code, the profile's own told under the first
	Faults   int // rows of faults.csv that are faults of this profile under this code, likewise
	Position profile.Position
	Problem  string // why it failed; "" where it did not
	Report   string // the profile's report, below the batch's folder; "" where none was asked for
}

// Flags are the reasons to look at a row.
type Flags uint8

// The reasons, worst first.
const (
	Failed     Flags = 1 << iota // no class could be given
	NearBound                    // the average lies within Near percent of a bound
	Shallow                      // the survey ends above the depth the code averages over
	Reversed                     // a softer layer lies under a stiffer one within that depth
	Correlated                   // a velocity was estimated, not measured
	Odd                          // another doubt about the profile or the result stands in faults.csv
)

// FlagWords are the words of the flags in summary.csv, in the order of their
// bits; a cell joins several with a blank.
var FlagWords = [...]string{"failed", "near-bound", "shallow", "reversed", "correlated", "odd"}

// Near is how close to a bound in percent of the average counts as near where
// a job does not say: the spread of a good survey's average (common practice).
const Near = 5.0

// Column is one column of summary.csv or faults.csv.
type Column struct {
	Name string
	Type string // of the Frictionless table schema: string, integer, number
	Unit string // "" if it has none
	What string // what it is, in one sentence
}

// Columns are the columns of summary.csv, in their order. Numbers are plain
// decimals, as few digits as are needed: averages to 0.1 m/s, depths to
// 0.01 m, margins to 0.1 %, degrees as the input gives them. A column is
// added at the end and none is renamed within one schema.
var Columns = []Column{
	{"file", "string", "", "The file the profile was read from, as the command named it."},
	{"line", "integer", "", "The line of the file at which the profile begins."},
	{"profile", "string", "", "The name of the profile; blank for a file that could not be read."},
	{"code", "string", "", "The ID of the code."},
	{"class", "string", "", "The site class; blank where none could be given."},
	{"route", "string", "", "What the class was decided by."},
	{"velocity_mps", "number", "m/s", "The average that the code itself uses."},
	{"depth_m", "number", "m", "The thickness over which that average is taken."},
	{"vs30_mps", "number", "m/s", "The average over 30 m below the same datum."},
	{"depth_reached_m", "number", "m", "How deep the survey reached below ground level."},
	{"datum_m", "number", "m", "The depth below ground level from which the averages are taken."},
	{"basis", "string", "", "How the velocities came to be known."},
	{"standing", "string", "", "How well the code's table is known: checked, one source, from memory."},
	{"to_class", "string", "", "The class at the nearest bound."},
	{"margin_percent", "number", "%", "From the average to that bound, in percent of the average."},
	{"flags", "string", "", "Reasons to look at the row: failed, near-bound, shallow, reversed, correlated, odd."},
	{"notes", "integer", "", "How many notes faults.csv holds for the row."},
	{"faults", "integer", "", "How many faults faults.csv holds for the row."},
	{"latitude", "number", "degree", "Of the profile, WGS 84."},
	{"longitude", "number", "degree", "Of the profile, WGS 84."},
	{"easting", "number", "", "Of the profile in its projected grid, in the grid's unit."},
	{"northing", "number", "", "Of the profile in its projected grid, in the grid's unit."},
	{"epsg", "integer", "", "The EPSG code of the grid, where the input states it."},
	{"problem", "string", "", "Why no class could be given."},
	{"report", "string", "", "The folder of the profile's report, below the folder of the batch."},
}

// Fault is one fault or note: a row of faults.csv.
type Fault struct {
	Severity string // "fault" or "note"
	Place    profile.Place
	Profile  string // "" where it is the file's
	Code     string // "" where it holds under every code
	ID       string // of a note; "" of a fault
	Text     string
	Hint     string
}

// FaultColumns are the columns of faults.csv, in their order.
var FaultColumns = []Column{
	{"severity", "string", "", "fault: the profile was not classified; note: it was, and this should be known."},
	{"file", "string", "", "The file, as the command named it."},
	{"line", "integer", "", "The line, or the row of a sheet, from 1."},
	{"column", "integer", "", "The character of the line, or the column of a sheet, from 1."},
	{"cell", "string", "", "The cell of a workbook, as Sheet1!B7."},
	{"profile", "string", "", "The profile; blank where it is about the file."},
	{"code", "string", "", "The code; blank where it holds under every code."},
	{"id", "string", "", "The name of the note."},
	{"text", "string", "", "What is wrong, or should be known."},
	{"hint", "string", "", "What to do next."},
}

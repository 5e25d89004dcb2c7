package batch

import (
	"io"
	"iter"
	"strconv"
	"strings"

	"shearbook/profile"
)

// The places of the columns in summary.csv.
const (
	atFile = iota
	atLine
	atProfile
	atCode
	atClass
	atRoute
	atVelocity
	atDepth
	atVs30
	atReached
	atDatum
	atBasis
	atStanding
	atToClass
	atMargin
	atFlags
	atNotes
	atFaults
	atLatitude
	atLongitude
	atEasting
	atNorthing
	atEPSG
	atProblem
	atReport
)

// SourceColumns are the columns of sources.csv, in their order.
var SourceColumns = []Column{
	{"file", "string", "", "The file, as the command named it."},
	{"sha256", "string", "", "The SHA-256 of its content, in lower-case hexadecimal."},
	{"bytes", "integer", "byte", "Its size."},
}

// Rows are the rows of a summary.csv, one at a time: a table of any size
// takes the memory of one row. The row holds until the next one is asked for.
// An error, which names the line, is the last thing that is given.
func Rows(file string, in io.Reader) iter.Seq2[*Row, error] {
	return records(file, in, Columns, (*parser).row)
}

// FaultRows are the rows of a faults.csv, as Rows are those of a summary.csv.
func FaultRows(file string, in io.Reader) iter.Seq2[*Fault, error] {
	return records(file, in, FaultColumns, (*parser).faultRow)
}

// records are the records of a table with its header, each put into the same T
// by read.
func records[T any](file string, in io.Reader, columns []Column, read func(*parser, *T)) iter.Seq2[*T, error] {
	return func(yield func(*T, error) bool) {
		t := newTable(file, in)
		if err := t.header(columns); err != nil {
			yield(nil, err)
			return
		}
		each(t, read, yield)
	}
}

// each gives the records behind the header.
func each[T any](t *table, read func(*parser, *T), yield func(*T, error) bool) {
	var r T
	p := parser{table: t, before: make([]string, max(len(Columns), len(FaultColumns)))}
	for {
		record, err := t.read()
		if err == io.EOF {
			return
		}
		if err == nil {
			p.cells, p.err = record, nil
			read(&p, &r)
			err = p.err
		}
		if err != nil {
			yield(nil, err)
			return
		}
		if !yield(&r, nil) {
			return
		}
	}
}

// parser reads the cells of a record.
type parser struct {
	*table
	cells  [][]byte
	before []string // of each column, its text in the record before, which is often the same
	err    error    // the first
}

func (p *parser) row(r *Row) {
	*r = Row{
		File: p.text(atFile), Line: p.whole(atLine), Profile: p.text(atProfile),
		Code: p.text(atCode), Class: p.text(atClass), Route: p.text(atRoute),
		Velocity: p.number(atVelocity), Depth: p.number(atDepth), Vs30: p.number(atVs30),
		DepthReached: p.number(atReached), Datum: p.number(atDatum),
		Basis: p.text(atBasis), Standing: p.text(atStanding),
		ToClass: p.text(atToClass), Margin: p.number(atMargin),
		Flags: p.flags(), Notes: p.whole(atNotes), Faults: p.whole(atFaults),
		Position: profile.Position{
			Latitude: p.optional(atLatitude), Longitude: p.optional(atLongitude),
			Easting: p.optional(atEasting), Northing: p.optional(atNorthing), EPSG: p.whole(atEPSG),
		},
		Problem: p.text(atProblem), Report: p.text(atReport),
	}
}

func (p *parser) faultRow(f *Fault) {
	*f = Fault{Severity: p.text(0), Place: profile.Place{File: p.text(1), Line: p.whole(2), Column: p.whole(3), Cell: p.text(4)},
		Profile: p.text(5), Code: p.text(6), ID: p.text(7), Text: p.text(8), Hint: p.text(9)}
}

func (p *parser) text(i int) string {
	if cell := p.cells[i]; string(cell) != p.before[i] {
		p.before[i] = string(cell)
	}
	return p.before[i]
}

// wrong notes a cell that is no number.
func (p *parser) wrong(i int) {
	if p.err == nil {
		p.err = p.fault("cell %d, %q, is not a number", i+1, p.cells[i])
	}
}

func (p *parser) whole(i int) int {
	if len(p.cells[i]) == 0 {
		return 0
	}
	n, err := strconv.Atoi(string(p.cells[i]))
	if err != nil {
		p.wrong(i)
	}
	return n
}

func (p *parser) number(i int) float64 { return p.optional(i).Value }

func (p *parser) optional(i int) profile.Optional {
	if len(p.cells[i]) == 0 {
		return profile.Optional{}
	}
	v, err := strconv.ParseFloat(string(p.cells[i]), 64)
	if err != nil || v-v != 0 {
		p.wrong(i)
		return profile.Optional{}
	}
	return profile.Known(v)
}

func (p *parser) flags() Flags {
	if len(p.cells[atFlags]) == 0 {
		return 0
	}
	f, ok := parseFlags(string(p.cells[atFlags]))
	if !ok && p.err == nil {
		p.err = p.fault("%q are no flags", p.cells[atFlags])
	}
	return f
}

// parseFlags returns the flags that words name, and false if one names none.
func parseFlags(words string) (flags Flags, ok bool) {
	ok = true
	for word := range strings.FieldsSeq(words) {
		found := false
		for i, w := range FlagWords {
			if w == word {
				flags |= 1 << i
				found = true
			}
		}
		ok = ok && found
	}
	return flags, ok
}

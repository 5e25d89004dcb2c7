package review

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
)

// Limits of a table of claims.
const (
	MaxClaimsFile = 16 << 20 // bytes
	maxColumns    = 200
	maxCell       = 1000 // bytes
)

// column is a column of a table of claims.
type column struct {
	key  string // one of claimKeys; "" where it is not looked at
	unit profile.Unit
}

// claimKeys are the columns that are read, each with other names it goes by.
var claimKeys = []struct {
	key   string
	names string // separated by |
}{
	{"file", "file|profile file|data file"},
	{"profile", "profile|name|profile name|site"},
	{"code", "code|claimed code"},
	{"class", "class|claimed class|site class"},
	{"average", "average|claimed average|average velocity|velocity|vs30"},
	{"depth", "depth|averaging depth|claimed depth"},
	{"datum", "datum|claimed datum"},
	{"foundation", "foundation depth|foundation"},
	{"extension", "extension|extend|claimed extension"},
	{"basis", "basis|claimed basis"},
	{"units", "units"},
}

// separators are those that a table of claims may have.
const separators = ",;\t"

// headerOf reads the first line of a table of claims that is neither blank
// nor a comment.
func headerOf(data []byte) (header []string, comma rune) {
	const longest = 16 << 10 // bytes of a header
	for line := range bytes.Lines(data[:min(len(data), longest)]) {
		line = bytes.TrimSpace(bytes.TrimPrefix(line, []byte("\ufeff")))
		if len(line) == 0 || line[0] == '#' {
			continue
		}
		comma = ','
		for _, s := range separators {
			if bytes.ContainsRune(line, s) {
				comma = s
				break
			}
		}
		r := csv.NewReader(bytes.NewReader(line))
		r.Comma = comma
		header, err := r.Read()
		if err != nil {
			return nil, comma
		}
		return header, comma
	}
	return nil, ','
}

// isClaims reports whether data is a table of claims: its header names a
// class or an average and a file or a profile, and no velocity of layers.
func isClaims(data []byte) bool {
	header, _ := headerOf(data)
	var keys []string
	for _, h := range header[:min(len(header), maxColumns)] {
		keys = append(keys, columnOf(h).key)
	}
	claims := slices.Contains(keys, "class") || slices.Contains(keys, "average")
	return claims && (slices.Contains(keys, "file") || slices.Contains(keys, "profile") && slices.Contains(keys, "code"))
}

// columnOf recognises a heading: average_mps, "average (m/s)", Class.
func columnOf(heading string) column {
	name, unit := keyAndUnit(heading)
	for _, k := range claimKeys {
		for n := range strings.SplitSeq(k.names, "|") {
			rest, ok := strings.CutPrefix(name, n)
			if !ok || rest != "" && rest[0] != ' ' {
				continue
			}
			if unit == "" {
				unit = strings.TrimSpace(rest)
				rest = ""
			}
			d := dimensionOf(k.key)
			u, known := profile.ParseUnit(unit, d)
			if strings.TrimSpace(rest) == "" && (unit == "" || known) {
				return column{k.key, u}
			}
		}
	}
	return column{}
}

func dimensionOf(key string) profile.Dimension {
	if key == "average" {
		return profile.Velocity
	}
	return profile.Length
}

// claims reads a table of claims.
func (f *intake) claims(base string, data []byte) {
	f.keep(base, "claims", data)
	at := profile.Place{File: base}
	if len(data) > MaxClaimsFile {
		f.fault(at, "the table of claims is larger than %d MiB; review it in parts", MaxClaimsFile>>20)
		return
	}
	header, comma := headerOf(data)
	columns := f.columns(base, header)
	r := csv.NewReader(bytes.NewReader(data))
	r.Comma, r.Comment, r.FieldsPerRecord, r.ReuseRecord = comma, '#', -1, true
	first, err := r.Read()
	if err != nil {
		f.fault(at, "the table of claims cannot be read: %v", err)
		return
	}
	wide := len(first)
	for {
		cells, err := r.Read()
		switch {
		case errors.Is(err, io.EOF):
			return
		case err != nil:
			f.badCSV(base, err)
			return
		case len(f.sub.Claims) == MaxClaims:
			line, _ := r.FieldPos(0)
			f.fault(profile.Place{File: base, Line: line}, "the table holds more than %d claims; review it in parts", MaxClaims)
			return
		}
		f.row(base, r, wide, columns, cells)
	}
}

// badCSV tells a line that is no row.
func (f *intake) badCSV(base string, err error) {
	at := profile.Place{File: base}
	var parse *csv.ParseError
	if errors.As(err, &parse) {
		at.Line, at.Column, err = parse.Line, parse.Column, parse.Err
	}
	f.add(profile.Faultf(at, `put a cell with " in it between quotes, and double those inside`, "the table cannot be read from here: %v", err))
}

// columns recognises the header. A heading that is almost a known one is a
// fault, any other is let pass.
func (f *intake) columns(base string, header []string) []column {
	var names []string
	for _, k := range claimKeys {
		names = append(names, strings.Split(k.names, "|")...)
	}
	columns := make([]column, min(len(header), maxColumns))
	for i := range columns {
		columns[i] = columnOf(header[i])
		name, _ := keyAndUnit(header[i])
		if near := profile.Nearest(name, names); columns[i].key == "" && near != "" && len(name) <= longestKey {
			f.add(profile.Faultf(profile.Place{File: base, Line: 1}, fmt.Sprintf("did you mean %q?", near), "the heading %s is not known", profile.Quote(header[i])))
		}
	}
	return columns
}

// row makes a claim of one row, below a header of wide cells.
func (f *intake) row(base string, r *csv.Reader, wide int, columns []column, cells []string) {
	c := Claim{Entry: -1}
	file, units := "", ""
	c.Place.File = base
	c.Place.Line, _ = r.FieldPos(0)
	good := true
	for i, cell := range cells[:min(len(cells), len(columns))] {
		cell = strings.TrimSpace(cell)
		if cell == "" || columns[i].key == "" {
			continue
		}
		at := profile.Place{File: base}
		at.Line, at.Column = r.FieldPos(i)
		if len(cell) > maxCell {
			f.fault(at, "%s is longer than %d bytes", columns[i].key, maxCell)
			good = false
			continue
		}
		cell = strings.Clone(cell)
		switch columns[i].key {
		case "file":
			file = cell
		case "units":
			units = cell
		default:
			if err := c.set(columns[i], cell); err != nil {
				f.add(profile.Faultf(at, hints[columns[i].key], "%s: %v", columns[i].key, err))
				good = false
			}
		}
	}
	for i := wide; i < len(cells); i++ {
		if strings.TrimSpace(cells[i]) != "" {
			at := profile.Place{File: base}
			at.Line, at.Column = r.FieldPos(i)
			f.add(profile.Faultf(at, `put a cell with a separator in it between quotes: "1,200 ft/s"`, "the row has more cells than the header"))
			good = false
			break
		}
	}
	if !good {
		f.unread(c, "the row cannot be read")
		return
	}
	f.claimOn(c, file, units)
}

// unread keeps a claim that cannot be read, so that it is listed. Why it
// cannot is a fault of its own.
func (f *intake) unread(c Claim, problem string) {
	c.Entry, c.problem = -1, problem
	f.sub.Claims = append(f.sub.Claims, c)
}

// hints say how a cell is written.
var hints = map[string]string{
	"average":    "write it with its unit, as 287 m/s, or name the unit in the heading, as average_mps",
	"depth":      "write it with its unit, as 30 m",
	"datum":      "write it with its unit, as 1.5 m",
	"foundation": "write it with its unit, as 1.5 m",
	"extension":  "leave it blank where the profile was not carried on",
	"basis":      "write measured, inverted or correlated",
}

// set takes one cell of a claim.
func (c *Claim) set(col column, cell string) error {
	var err error
	switch col.key {
	case "profile":
		c.Profile = cell
	case "code":
		c.Code = CodeID(cell)
	case "class":
		c.Class = cell
	case "average":
		c.Average, err = positive(ParseNumber(cell, profile.Velocity, col.unit))
	case "depth":
		c.Depth, err = positive(ParseNumber(cell, profile.Length, col.unit))
	case "datum":
		c.Stated.Datum, err = depth(cell, col.unit)
	case "foundation":
		c.Stated.Foundation, err = depth(cell, col.unit)
	case "extension":
		c.Stated.Extend, err = extension(cell)
	case "basis":
		if _, ok := profile.ParseBasis(strings.ToLower(cell)); !ok {
			return fmt.Errorf("%s is not known", profile.Quote(cell))
		}
		c.Basis = strings.ToLower(cell)
	}
	return err
}

// positive refuses a number that is not.
func positive(n Number, err error) (Number, error) {
	if err == nil && !(n.Value > 0) {
		return Number{}, fmt.Errorf("%s is not positive", n.Text)
	}
	return n, err
}

// depth reads a depth below ground level.
func depth(text string, unit profile.Unit) (profile.Optional, error) {
	if text == "0" {
		return profile.Known(0), nil
	}
	n, err := ParseNumber(text, profile.Length, unit)
	switch {
	case err != nil:
		return profile.Optional{}, err
	case !(n.Value >= 0 && n.Value <= profile.MaxDepth):
		return profile.Optional{}, fmt.Errorf("%s is not a depth below ground level", n.Text)
	}
	return profile.Known(n.Value), nil
}

// extension reads the ID of a relation.
func extension(word string) (string, error) {
	word = strings.ToLower(word)
	switch {
	case word == "no" || word == "none":
		return "", nil
	case !slices.Contains(report.Extensions(), word):
		return "", fmt.Errorf("%s is not known (%s)", profile.Quote(word), strings.Join(report.Extensions(), ", "))
	}
	return word, nil
}

// claimOn finds the profile that a claim is about.
func (f *intake) claimOn(c Claim, file, units string) {
	at := c.Place.Place
	if file == "" {
		f.add(profile.Faultf(at, "add a column `file` with the profile's file, beside the table", "the row names no file"))
		f.unread(c, "the row names no file")
		return
	}
	name := clean(file)
	of := f.profilesOf(file, open.Options{Units: units}, at)
	i := 0
	switch {
	case of == nil:
		f.sub.Claims = append(f.sub.Claims, c)
		return
	case c.Profile != "":
		i = f.indexOf(of, c.Profile)
	case len(of) > 1:
		f.add(profile.Faultf(at, "add a column `profile` with its name", "%s holds %d profiles and the row does not say which it is about", profile.Quote(name), len(of)))
		f.unread(c, "the row does not say which profile it is about")
		return
	}
	if i < 0 {
		f.add(profile.Faultf(at, "check the name", "%s holds no profile %s", profile.Quote(name), profile.Quote(c.Profile)))
		f.unread(c, errNoProfile.Error())
		return
	}
	c.Profile = of[i].Name
	c.Entry = f.entryOf(&of[i])
	f.sub.Claims = append(f.sub.Claims, c)
}

// indexOf returns the index of the first profile of a name among those of a
// file, −1 if there is none.
func (f *intake) indexOf(of []profile.Profile, name string) int {
	if f.names == nil {
		f.names = map[*profile.Profile]map[string]int{}
	}
	index, ok := f.names[&of[0]]
	if !ok {
		index = make(map[string]int, len(of))
		for i := range of {
			if _, taken := index[of[i].Name]; !taken {
				index[of[i].Name] = i
			}
		}
		f.names[&of[0]] = index
	}
	i, ok := index[name]
	if !ok {
		return -1
	}
	return i
}

// entryOf returns the index of a profile among those of the submission, to
// which it is added.
func (f *intake) entryOf(p *profile.Profile) int {
	if i, ok := f.entries[p]; ok {
		return i
	}
	if f.entries == nil {
		f.entries = map[*profile.Profile]int{}
	}
	f.sub.Profiles = append(f.sub.Profiles, Entry{Profile: p})
	f.entries[p] = len(f.sub.Profiles) - 1
	return f.entries[p]
}

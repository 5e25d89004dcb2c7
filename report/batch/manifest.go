package batch

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// Limits of a manifest.
const (
	maxManifest = 64 << 20 // bytes
	hintColumns = "a manifest has the columns file, profile, code, datum, latitude, longitude, notes; all but file may be left out"
)

// manifestColumns are the columns of a manifest.
var manifestColumns = []string{"file", "profile", "code", "datum", "latitude", "longitude", "notes"}

// manifestRow is one row of a manifest.
type manifestRow struct {
	line    int
	file    string // below the manifest's folder
	profile string // "" for every profile of the file
	setting setting
}

// manifest reads a file as a manifest: a CSV table whose header has a column
// called file. It returns false where the file is none. What is wrong with a
// manifest is told before anything is done.
func (in *inputs) manifest(name string) (entries []manifestRow, faults profile.Faults, found bool) {
	f, err := os.Open(name)
	if err != nil {
		return nil, nil, false
	}
	defer f.Close() // opened for reading
	top := make([]byte, 4096)
	n, _ := io.ReadFull(f, top)
	if !isManifest(top[:n]) {
		return nil, nil, false
	}
	data, err := io.ReadAll(io.LimitReader(io.MultiReader(bytes.NewReader(top[:n]), f), maxManifest+1))
	switch {
	case err != nil:
		return nil, cannotOpen(name, err), true
	case len(data) > maxManifest:
		return nil, profile.Faults{profile.Faultf(profile.Place{File: name}, "split it", "the manifest is larger than %d MiB", maxManifest>>20)}, true
	}
	m := manifestReader{job: in.job, faults: profile.Collector{File: name}}
	m.read(bytes.TrimPrefix(data, []byte("\ufeff")))
	if err := m.faults.Err(); err != nil {
		errors.As(err, &faults)
		return nil, faults, true
	}
	return m.entries, nil, true
}

// isManifest reports whether the first line of a file has a cell file.
func isManifest(top []byte) bool {
	line, _, _ := bytes.Cut(bytes.TrimPrefix(top, []byte("\ufeff")), []byte("\n"))
	return slices.ContainsFunc(strings.Split(string(line), ","), func(cell string) bool { return plainHeading(cell) == "file" })
}

func plainHeading(cell string) string { return strings.ToLower(strings.Trim(cell, " \t\r\"")) }

type manifestReader struct {
	job     *Job
	faults  profile.Collector
	columns map[string]int
	record  []string
	line    int
	csv     *csv.Reader
	entries []manifestRow
}

func (m *manifestReader) read(data []byte) {
	m.csv = csv.NewReader(bytes.NewReader(data))
	m.csv.FieldsPerRecord = -1
	head, err := m.csv.Read()
	if err != nil {
		m.faults.Stop(profile.Place{Line: 1}, hintColumns, "%v", err)
		return
	}
	m.columns = map[string]int{}
	for i, cell := range head {
		name := plainHeading(cell)
		switch _, twice := m.columns[name]; {
		case !slices.Contains(manifestColumns, name):
			m.faults.Fault(profile.Place{Line: 1, Column: i + 1}, hintColumns, "a manifest has no column %s", profile.Quote(cell))
		case twice:
			m.faults.Fault(profile.Place{Line: 1, Column: i + 1}, "keep one of them", "column %s stands there twice", name)
		}
		m.columns[name] = i
	}
	for {
		m.record, err = m.csv.Read()
		if err == io.EOF {
			break
		}
		if err != nil {
			m.faults.Stop(profile.Place{}, "", "%v", err)
			return
		}
		m.line, _ = m.csv.FieldPos(0)
		m.entry()
	}
	if len(m.entries) == 0 {
		m.faults.Fault(profile.Place{Line: 1}, "", "the manifest names no file")
	}
}

// cell is the text in a column of the present row.
func (m *manifestReader) cell(name string) string {
	if i, ok := m.columns[name]; ok && i < len(m.record) {
		return strings.TrimSpace(m.record[i])
	}
	return ""
}

func (m *manifestReader) fault(column, hint, format string, args ...any) {
	at := profile.Place{Line: m.line}
	if i, ok := m.columns[column]; ok && i < len(m.record) {
		at.Line, at.Column = m.csv.FieldPos(i)
	}
	m.faults.Fault(at, hint, format, args...)
}

func (m *manifestReader) entry() {
	e := manifestRow{line: m.line, file: m.cell("file"), profile: m.cell("profile")}
	e.setting = setting{codes: m.job.Codes, facts: m.job.Facts, note: m.cell("notes")}
	if e.file == "" {
		m.fault("file", "", "no file is named")
	}
	if codes := strings.FieldsFunc(m.cell("code"), func(r rune) bool { return r == ' ' || r == ',' || r == ';' }); len(codes) > 0 {
		e.setting.codes = nil
		for _, id := range codes {
			e.setting.codes = append(e.setting.codes, m.code(id))
		}
	}
	if text := m.cell("datum"); text != "" {
		v, err := profile.ParseValue(text, profile.Length)
		if err != nil || v < 0 {
			m.fault("datum", "write it with its unit, as 2.5 m", "datum %s is no depth below ground level", profile.Quote(text))
		}
		e.setting.facts.Datum = profile.Known(v)
	}
	p := &e.setting.position
	p.Latitude, p.Longitude = m.degrees("latitude", 90), m.degrees("longitude", 180)
	if p.Latitude.Known != p.Longitude.Known {
		m.fault("latitude", "state both, or neither", "latitude and longitude belong together")
	}
	m.entries = append(m.entries, e)
}

// code finds a code among those of the job, and then among all.
func (m *manifestReader) code(id string) *siteclass.Code {
	for _, c := range m.job.Codes {
		if c.ID == id {
			return c
		}
	}
	c, err := siteclass.Find(id)
	if err != nil {
		m.fault("code", "`shearbook codes` lists them", "%v", err)
	}
	return c
}

func (m *manifestReader) degrees(name string, limit float64) profile.Optional {
	text := m.cell(name)
	if text == "" {
		return profile.Optional{}
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v >= -limit && v <= limit) {
		m.fault(name, "write decimal degrees, south and west negative", "%s %s is no angle of at most %v degrees", name, profile.Quote(text), limit)
	}
	return profile.Known(v)
}

// listed takes the files of a manifest. Rows of the same file that follow one
// another are one reading of it. Nothing outside the manifest's folder is
// opened.
func (in *inputs) listed(name string, entries []manifestRow) error {
	dir := filepath.Dir(name)
	root, err := os.OpenRoot(dir)
	if err != nil {
		return fmt.Errorf("%s cannot be read: %w", dir, profile.FileError(err))
	}
	in.roots = append(in.roots, root)
	manifest := plainItem(name)
	manifest.listing = true
	if err := in.do(manifest); err != nil {
		return err
	}
	for i := 0; i < len(entries); {
		j := i + 1
		for j < len(entries) && entries[j].file == entries[i].file {
			j++
		}
		file := filepath.FromSlash(entries[i].file)
		it := &item{name: filepath.Join(dir, file), entries: entries[i:j], open: func() (*os.File, error) {
			info, err := root.Stat(file)
			if err == nil {
				err = regular(info)
			}
			if err != nil {
				return nil, err
			}
			return root.Open(file)
		}}
		if filepath.IsAbs(file) {
			it.name = file
		}
		if err := in.do(it); err != nil {
			return err
		}
		i = j
	}
	return nil
}

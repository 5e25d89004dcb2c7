package batch

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"shearbook/profile"
	"shearbook/profile/delimited"
	"shearbook/profile/open"
)

// worker does chunks.
type worker struct {
	run   *run
	clerk clerk
	chunk *chunk

	head  *delimited.Head // that plain is of
	plain *fast
	u     unit // of a table, the one in hand

	unknown []profile.Note // on profiles that a table's head names and its rows do not

	next    int  // ordinal of the next unit
	counted bool // next is known
}

// do does a chunk.
func (w *worker) do(c *chunk) {
	w.chunk = c
	w.clerk = clerk{job: w.run.job, summary: w.run.room(), faults: w.run.room(), rows: w.clerk.rows[:0], results: w.clerk.results, text: w.clerk.text, file: w.clerk.file, cell: w.clerk.cell}
	w.next, w.counted, w.unknown = 0, false, nil
	if c.head != nil {
		c.made.err = w.table(c.head, c.data)
	} else {
		c.made.err = w.file()
	}
	w.pass(0)
	m := &c.made
	m.summary, m.faults, m.tally, m.reports = w.clerk.summary, w.clerk.faults, w.clerk.tally, w.clerk.made
	m.rows = append([]int(nil), w.clerk.rows...)
	close(c.done)
}

// pass waits for the ordinal of the chunk's first unit and passes that of the
// next chunk on. It must be called before the first unit where ordinals are
// asked for.
func (w *worker) pass(units int) {
	if w.counted {
		return
	}
	w.counted = true
	w.chunk.made.all = units
	if w.chunk.before != nil {
		w.next = <-w.chunk.before
		w.chunk.after <- w.next + units
	}
}

// file does a file that is not read in pieces.
func (w *worker) file() error {
	it := w.chunk.it
	data, faults := it.content()
	if faults != nil {
		w.chunk.digest = digestOf([]byte(faults.Error()))
		return w.unread(faults)
	}
	w.chunk.digest, w.chunk.size = digestOf(data), int64(len(data))
	w.chunk.source = sourceLine(it.name, w.chunk.digest, w.chunk.size)
	if it.listing {
		return nil
	}
	if it.entries == nil && open.IsTable(data) {
		if h, err := delimited.ReadHead(it.name, data, w.run.tableOptions()); h != nil && err == nil {
			w.chunk.line = h.Line()
			return w.wholeTable(h, data)
		}
	}
	found := w.load(it.name, data)
	if it.entries != nil {
		found = chosen(found, it)
	}
	w.pass(len(found))
	for i := range found {
		if err := w.unit(&found[i]); err != nil {
			return err
		}
	}
	return nil
}

// content reads a file that is small enough, or says why it cannot be read.
func (it *item) content() ([]byte, profile.Faults) {
	if len(it.faults) > 0 {
		return nil, it.faults
	}
	data, err := it.read()
	if err != nil {
		return nil, cannotOpen(it.name, err)
	}
	return data, nil
}

func (it *item) read() ([]byte, error) {
	f, err := it.open()
	if err != nil {
		return nil, err
	}
	defer f.Close() // opened for reading
	info, err := f.Stat()
	if err != nil {
		return nil, err
	}
	if info.Size() > maxFile {
		return nil, errTooLarge
	}
	data := make([]byte, info.Size())
	n, err := io.ReadFull(f, data)
	if err == io.ErrUnexpectedEOF || err == io.EOF {
		err = nil // it was cut short meanwhile; what is there is read
	}
	return data[:n], err
}

// unread writes a file that could not be read.
func (w *worker) unread(faults profile.Faults) error {
	settings := []*setting{&w.run.setting}
	if entries := w.chunk.it.entries; entries != nil {
		settings = settings[:0]
		for i := range entries {
			settings = append(settings, &entries[i].setting)
		}
	}
	w.pass(len(settings))
	for i, s := range settings {
		u := unit{file: w.chunk.it.name, faults: faults, setting: s}
		if w.chunk.it.entries != nil {
			u.name = w.chunk.it.entries[i].profile
		}
		if err := w.unit(&u); err != nil {
			return err
		}
	}
	return nil
}

// unit writes a unit if it is one of the shard.
func (w *worker) unit(u *unit) error {
	ordinal := w.next
	w.next++
	if !w.run.job.Shard.takes(ordinal) {
		return nil
	}
	return w.clerk.unit(u, ordinal)
}

// load reads the profiles of a file as classify does, but for a table with
// several profiles, of which each is read by itself.
func (w *worker) load(name string, data []byte) []unit {
	if open.IsTable(data) {
		if h, err := delimited.ReadHead(name, data, w.run.tableOptions()); h != nil && err == nil {
			var found []unit
			c := &chunk{line: h.Line()}
			pieces := cutAll(h, data[h.Size():])
			if gathered, lines, apart := gather(pieces, h.Line()); apart {
				c.lines = lines
				pieces = cutAll(h, gathered)
			}
			line := h.Line()
			for _, p := range pieces {
				found = append(found, w.piece(c, h, p, line))
				line += p.lines
			}
			return found
		}
	}
	profiles, err := open.Each(name, data, w.run.job.Read)
	if err != nil {
		return []unit{{file: name, faults: asFaults(name, err), setting: &w.run.setting}}
	}
	found := make([]unit, len(profiles))
	broken := slices.ContainsFunc(profiles, func(p profile.Found) bool { return p.Profile == nil })
	for i, p := range profiles {
		found[i] = unit{file: name, line: p.Line, name: p.Name, profile: p.Profile, faults: p.Faults, setting: &w.run.setting, data: func() []byte { return data }, beside: broken}
	}
	return found
}

// beginning returns the line at which a profile begins, 0 if it has none.
func beginning(p *profile.Profile) int {
	if p.Reading == nil || len(p.Reading.Rows) == 0 {
		return 0
	}
	return p.Reading.Rows[0].Line
}

// asFaults is an error as faults.
func asFaults(name string, err error) profile.Faults {
	var faults profile.Faults
	if errors.As(err, &faults) {
		return faults
	}
	return profile.Faults{profile.Faultf(profile.Place{File: name}, "", "%v", err)}
}

// piece reads one profile of a table.
func (w *worker) piece(c *chunk, h *delimited.Head, rows piece, line int) unit {
	u := unit{file: h.File(), line: c.lineOf(line), name: rows.name, setting: &w.run.setting}
	p, err := h.Read(rows.text, line)
	if err != nil {
		u.faults = asFaults(u.file, err)
		c.relocate(nil, u.faults)
		return u
	}
	c.relocate(&p, nil)
	p.Notes = slices.DeleteFunc(p.Notes, func(n profile.Note) bool { return ofTable(n.ID) }) // told once
	u.profile, u.name, u.line = &p, p.Name, beginning(&p)
	if last := c.lineOf(line + rows.lines - 1); last-u.line >= rows.lines {
		p.Notes = append(p.Notes, profile.Note{ID: "rows-apart", Place: profile.Place{File: u.file, Line: u.line},
			Text: fmt.Sprintf("the rows of the profile do not follow one another: the last stands in line %d, with other profiles between", last)})
	}
	u.data, u.extract = tableData(h, rows.text), w.isPart(h, rows.text)
	return u
}

// ofTable reports whether a note is on the columns of a table, which all its
// profiles share.
func ofTable(id string) bool {
	switch id {
	case "column-not-read", "mapped", "units-given", "depth-as-top", "depth-as-bottom":
		return true
	}
	return false
}

// chosen are the units that a manifest names.
func chosen(found []unit, it *item) []unit {
	var out []unit
	for i := range it.entries {
		e := &it.entries[i]
		n := len(out)
		for _, u := range found {
			if e.profile == "" || u.name == e.profile || u.name == "" {
				u.setting = &e.setting
				out = append(out, u)
			}
		}
		if len(out) == n {
			out = append(out, unit{file: it.name, name: e.profile, setting: &e.setting, faults: profile.Faults{profile.Faultf(
				profile.Place{File: it.name}, "check the name in the manifest", "the file has no profile %s", profile.Quote(e.profile))}})
		}
	}
	return out
}

// report makes the report of a unit, if one is asked for.
func (c *clerk) report(u *unit, ordinal int) error {
	job, flags := c.job, Flags(0)
	for i := range c.results {
		flags |= c.results[i].row.Flags
	}
	if job.Reports == NoReports || job.MakeReport == nil || u.profile == nil || flags&Failed != 0 || job.Reports == FlaggedReports && flags == 0 {
		return nil
	}
	if u.beside {
		c.noReport(u, "it carries the whole file, and another profile of that is at fault")
		return nil
	}
	name := reportName(u.name, ordinal)
	data := u.data()
	r := Reported{Profile: u.profile, Name: filepath.Base(u.file), Data: data, Extract: u.extract, Codes: u.setting.codes, Facts: u.setting.facts,
		Dir: filepath.Join(unfinished(job.Out), Reports, name)}
	digest := digestOf(data)
	mark := filepath.Join(unfinished(job.Out), marks, name)
	if before, err := os.ReadFile(mark); err != nil || string(before) != digest {
		err := job.MakeReport(r)
		var faults profile.Faults
		if errors.As(err, &faults) { // of the profile: the others go on
			c.noReport(u, problem(faults))
			return nil
		}
		if err != nil {
			return fmt.Errorf("the report of profile %s of %s: %w", profile.Quote(u.name), u.file, err)
		}
		if err := os.WriteFile(mark, []byte(digest), 0o666); err != nil {
			return err
		}
	}
	c.made++
	for i := range c.results {
		c.results[i].row.Report = Reports + "/" + name
	}
	return nil
}

// noReport notes why there is no report of a unit, and flags its first row.
func (c *clerk) noReport(u *unit, why string) {
	first := &c.results[0].row
	first.Flags |= Odd
	if c.job.FaultsAlone {
		return
	}
	p := *u.profile
	p.Notes = append(slices.Clip(p.Notes), profile.Note{ID: "no-report", Text: "its report could not be made: " + why})
	u.profile = &p
	first.Notes++
}

// reportName is the name of a report's folder: the number of the unit, and of
// the profile's name what any file system takes.
func reportName(name string, ordinal int) string {
	const most = 40
	safe := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9':
			return r
		}
		return '-'
	}, name)
	if len(safe) > most {
		safe = safe[:most]
	}
	return strings.TrimRight(fmt.Sprintf("%07d-%s", ordinal+1, safe), "-")
}

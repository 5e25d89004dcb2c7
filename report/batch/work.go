package batch

import (
	"bufio"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"

	"shearbook/profile"
)

// The files of an unfinished batch, in a folder of their own inside Job.Out:
// the tables as far as they are written, and a journal with a line for each
// chunk that they hold in full.
const (
	unfinishedName = "unfinished"
	journalName    = "journal"
	marks          = "reported" // one file a report that is whole, with the digest of what it was made of
	spillName      = "sorting"  // rows that are brought together
)

func unfinished(out string) string { return filepath.Join(out, unfinishedName) }

// journalHead is the first line of a journal.
type journalHead struct {
	Format string
	Job    string // digest of the job
	Shard  Shard
}

const journalFormat = "1"

// mark is a line of a journal: what a chunk of the input is, and how long the
// tables were once it was in them.
type mark struct {
	File   string
	Digest string // of the file up to the end of the chunk
	Size   int64  // likewise
	Apart  bool   `json:",omitempty"`
	Last   bool   // of its file

	Summary, Faults, Sources int64
	All                      int // units, those of other shards among them
	Tally                    Tally
	Rows                     []int `json:",omitempty"` // of the units: how many units, how many rows each has, and so on
	Names                    order
	Reports                  int `json:",omitempty"`
}

// lengths are how long the files of an unfinished batch are.
type lengths struct{ journal, summary, faults, sources int64 }

// work is the folder of an unfinished batch, open to be written.
type work struct {
	dir                               string
	summary, faults, sources, journal *os.File
	heading                           []byte
	at                                lengths

	old *bufio.Reader // the journal of an earlier run; nil at its end
	was lengths       // that it left

	ahead *mark   // its next line, once it is read
	then  lengths // with that
}

// conflict is an error that the user can act on.
type conflict struct{ text, hint string }

// Error says what stands in the way.
func (e *conflict) Error() string { return e.text }

// Hint says what to do next.
func (e *conflict) Hint() string { return e.hint }

// openWork opens the folder of an unfinished batch: an empty one, or with
// Job.Resume the one that is there.
func openWork(job *Job) (*work, error) {
	if err := ours(job.Out); err != nil {
		return nil, err
	}
	w := &work{dir: unfinished(job.Out)}
	_, err := os.Stat(filepath.Join(w.dir, journalName))
	switch there := err == nil; {
	case there && !job.Resume:
		return nil, &conflict{fmt.Sprintf("%s holds an unfinished batch", job.Out),
			fmt.Sprintf("add --resume to go on with it, or remove %s to start anew", w.dir)}
	case !there:
		if err := os.RemoveAll(w.dir); err != nil {
			return nil, w.failed(err)
		}
	}
	folders := []string{w.dir}
	if job.Reports != NoReports {
		folders = append(folders, filepath.Join(w.dir, Reports), filepath.Join(w.dir, marks))
	}
	for _, dir := range folders {
		if err := os.MkdirAll(dir, 0o777); err != nil {
			return nil, w.failed(err)
		}
	}
	if w.heading, err = json.Marshal(journalHead{journalFormat, job.digest(), job.Shard}); err != nil {
		return nil, err
	}
	w.heading = append(w.heading, '\n')
	if err := w.openFiles(); err != nil {
		w.close()
		return nil, w.failed(err)
	}
	if err := w.readHeading(job); err != nil {
		w.close()
		return nil, err
	}
	return w, nil
}

func (w *work) openFiles() (err error) {
	for _, f := range []struct {
		to   **os.File
		name string
		was  *int64
	}{{&w.journal, journalName, &w.was.journal}, {&w.summary, Summary, &w.was.summary}, {&w.faults, FaultsIn, &w.was.faults}, {&w.sources, Sources, &w.was.sources}} {
		if *f.to, err = os.OpenFile(filepath.Join(w.dir, f.name), os.O_RDWR|os.O_CREATE, 0o666); err != nil {
			return err
		}
		if *f.was, err = (*f.to).Seek(0, io.SeekEnd); err != nil {
			return err
		}
	}
	return nil
}

// readHeading looks whether the journal that is there, if any, is of this
// job.
func (w *work) readHeading(job *Job) error {
	in := bufio.NewReader(io.NewSectionReader(w.journal, 0, w.was.journal))
	var head journalHead
	n, ok := readLine(in, &head)
	if !ok {
		return w.reset(lengths{})
	}
	if head.Format != journalFormat || head.Job != job.digest() || head.Shard != job.Shard {
		return &conflict{fmt.Sprintf("the unfinished batch in %s was begun with other inputs or options", job.Out),
			fmt.Sprintf("give the same inputs and options, or remove %s to start anew", w.dir)}
	}
	w.old = in
	w.at = w.empty()
	w.at.journal = n
	return nil
}

// empty are the lengths before the first chunk.
func (w *work) empty() lengths {
	return lengths{int64(len(w.heading)), int64(len(header(Columns))), int64(len(header(FaultColumns))), int64(len(header(SourceColumns)))}
}

// readLine reads a line of JSON and returns its length. It returns false where
// there is no whole one.
func readLine(in *bufio.Reader, to any) (n int64, ok bool) {
	line, err := in.ReadBytes('\n')
	return int64(len(line)), err == nil && json.Unmarshal(line, to) == nil
}

// peek returns the next chunk that an earlier run left in the tables; nil if
// there is none. A line that is cut off, and what comes after it, does not
// count.
func (w *work) peek() *mark {
	if w.old == nil || w.ahead != nil {
		return w.ahead
	}
	var m mark
	n, ok := readLine(w.old, &m)
	if !ok || m.Summary > w.was.summary || m.Faults > w.was.faults || m.Sources > w.was.sources {
		w.old = nil
		return nil
	}
	w.ahead, w.then = &m, lengths{w.at.journal + n, m.Summary, m.Faults, m.Sources}
	return w.ahead
}

// take keeps the chunk that peek returned.
func (w *work) take() { w.at, w.ahead = w.then, nil }

// reset cuts the files off at the given lengths; what is written next comes
// there. Nothing is as long as an empty batch, or longer.
func (w *work) reset(to lengths) error {
	w.old, w.ahead = nil, nil
	if to.summary == 0 {
		to = w.empty()
		for _, f := range []struct {
			to   *os.File
			text []byte
		}{{w.journal, w.heading}, {w.summary, header(Columns)}, {w.faults, header(FaultColumns)}, {w.sources, header(SourceColumns)}} {
			if _, err := f.to.WriteAt(f.text, 0); err != nil {
				return w.failed(err)
			}
		}
	}
	for _, f := range []struct {
		to *os.File
		n  int64
	}{{w.journal, to.journal}, {w.summary, to.summary}, {w.faults, to.faults}, {w.sources, to.sources}} {
		if err := f.to.Truncate(f.n); err != nil {
			return w.failed(err)
		}
		if _, err := f.to.Seek(f.n, io.SeekStart); err != nil {
			return w.failed(err)
		}
	}
	w.at = to
	return nil
}

// add appends what was made of a chunk to the tables, and then its line to the
// journal.
func (w *work) add(m *made, source string, line mark) error {
	for _, f := range []struct {
		to   *os.File
		text []byte
		n    *int64
	}{{w.summary, m.summary, &w.at.summary}, {w.faults, m.faults, &w.at.faults}, {w.sources, []byte(source), &w.at.sources}} {
		if len(f.text) == 0 {
			continue
		}
		if _, err := f.to.Write(f.text); err != nil {
			return w.failed(err)
		}
		*f.n += int64(len(f.text))
	}
	line.Summary, line.Faults, line.Sources = w.at.summary, w.at.faults, w.at.sources
	text, err := json.Marshal(line)
	if err != nil {
		return err
	}
	text = append(text, '\n')
	if _, err := w.journal.Write(text); err != nil {
		return w.failed(err)
	}
	w.at.journal += int64(len(text))
	return nil
}

func (w *work) failed(err error) error {
	return &conflict{fmt.Sprintf("the batch cannot be written in %s: %v", w.dir, profile.FileError(err)),
		"what was done is kept; make room or mend the folder, and go on with --resume"}
}

func (w *work) close() {
	for _, f := range []*os.File{w.summary, w.faults, w.sources, w.journal} {
		if f != nil {
			_ = f.Close() // every write was looked at
		}
	}
}

// sourceLine is a line of sources.csv.
func sourceLine(file, digest string, size int64) string {
	return fmt.Sprintf("%s,%s,%d\n", appendCell(nil, file), digest, size)
}

// batchNames are what the folder of a batch may hold.
var batchNames = []string{Summary, FaultsIn, Sources, Reports, ShardFile, Package, MapLayer, JSONLines, Workbook,
	SummaryMarkdown, SummaryHTML, SummaryPDF, Figures, unfinishedName}

// ours is an error where the folder holds what is not of a batch.
func ours(out string) error {
	entries, err := os.ReadDir(out)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return &conflict{fmt.Sprintf("%s cannot be used as the folder of a batch: %v", out, profile.FileError(err)), "choose another folder with --out"}
	}
	for _, e := range entries {
		if !slices.Contains(batchNames, e.Name()) {
			return &conflict{fmt.Sprintf("%s holds %s, which is not of a batch", out, e.Name()), "choose another folder with --out"}
		}
	}
	return nil
}

package batch

import (
	"bufio"
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// Merge joins the folders of all shards of a batch into one: the same bytes as a
// run in one piece gives. Of the job it takes Out, Derive, and Codes where the
// shards used tables of a jurisdiction's own; the rest is what the shards were
// made with; Job.Tables must be among theirs. The shards stay as they are.
func Merge(ctx context.Context, dirs []string, job Job) (Outcome, error) {
	shards, err := openShards(dirs)
	defer func() {
		for _, s := range shards {
			s.close()
		}
	}()
	if err != nil {
		return Outcome{}, err
	}
	for _, table := range job.Tables {
		if !slices.Contains(shards[0].Tables, table) {
			return Outcome{}, &conflict{"the shards were not made with a table that is given", "give the tables that the shards were made with, as they were"}
		}
	}
	if err := ours(job.Out); err != nil {
		return Outcome{}, err
	}
	release, err := lockOut(job.Out)
	if err != nil {
		return Outcome{}, err
	}
	defer release()
	dir := unfinished(job.Out)
	if _, err := os.Stat(filepath.Join(dir, journalName)); err == nil {
		return Outcome{}, &conflict{fmt.Sprintf("%s holds an unfinished batch", job.Out), "choose another folder with --out, or remove " + dir}
	}
	if err := errors.Join(os.RemoveAll(dir), os.MkdirAll(dir, 0o777)); err != nil {
		return Outcome{}, notMerged(job.Out, err)
	}
	outcome, err := mergeInto(ctx, dir, shards)
	if err == nil && ctx.Err() != nil {
		err = ctx.Err()
	}
	if err == nil {
		err = deriveMerged(dir, shards[0], &job)
	}
	if err != nil {
		os.RemoveAll(dir)
		return outcome, err
	}
	outcome.Out = job.Out
	outcome.sort(&job)
	if err := declare(job.Out, whole{Job: shards[0].Job, Outcome: outcome}); err != nil {
		return outcome, notMerged(job.Out, err)
	}
	return outcome, install(job.Out, declared(job.Out))
}

func notMerged(out string, err error) error {
	return &conflict{fmt.Sprintf("the shards cannot be joined in %s: %v", out, profile.FileError(err)), "make room or mend the folder, and merge again"}
}

// shardReader reads the tables of a shard.
type shardReader struct {
	shardOf
	dir             string
	files           [2]*os.File
	summary, faults *bufio.Reader
	run, left       int // of Rows: the one in hand, and how many of its units are left
}

func (s *shardReader) close() {
	for _, f := range s.files {
		if f != nil {
			_ = f.Close() // opened for reading
		}
	}
}

// openShards opens the folders, in the order of the shards, and checks that they
// are the parts of one batch.
func openShards(dirs []string) ([]*shardReader, error) {
	var all []*shardReader
	var sorted []*shardReader
	for _, dir := range dirs {
		s, err := openShard(dir)
		if s != nil {
			all = append(all, s)
		}
		if err != nil {
			return all, err
		}
		if sorted == nil {
			sorted = make([]*shardReader, s.Shard.N)
		}
		first := all[0]
		switch {
		case s.Job != first.Job || s.Shard.N != first.Shard.N || s.All != first.All:
			return all, &conflict{fmt.Sprintf("%s and %s are not parts of one batch: their inputs or options differ", first.dir, dir), "merge the shards of one batch"}
		case sorted[s.Shard.I-1] != nil:
			return all, &conflict{fmt.Sprintf("%s and %s are the same shard, %d of %d", sorted[s.Shard.I-1].dir, dir, s.Shard.I, s.Shard.N), "name each once"}
		}
		if err := sameFile(filepath.Join(first.dir, Sources), filepath.Join(dir, Sources)); err != nil {
			return all, err
		}
		sorted[s.Shard.I-1] = s
	}
	for i, s := range sorted {
		if s == nil {
			return all, &conflict{fmt.Sprintf("shard %d of %d is missing", i+1, len(sorted)), "name the folders of all shards"}
		}
	}
	return sorted, nil
}

func openShard(dir string) (*shardReader, error) {
	text, err := os.ReadFile(filepath.Join(dir, ShardFile))
	s := &shardReader{dir: dir}
	if err == nil {
		err = json.Unmarshal(text, &s.shardOf)
	}
	if err != nil || s.Shard.I < 1 || s.Shard.I > s.Shard.N || s.Shard.N > 1_000_000 {
		return nil, &conflict{fmt.Sprintf("%s is not the folder of a finished shard", dir), "give the folders that runs with --shard wrote"}
	}
	for i, name := range []string{Summary, FaultsIn} {
		if s.files[i], err = os.Open(filepath.Join(dir, name)); err != nil {
			return s, &conflict{fmt.Sprintf("%s cannot be read: %v", filepath.Join(dir, name), profile.FileError(err)), ""}
		}
	}
	s.summary, s.faults = bufio.NewReader(s.files[0]), bufio.NewReader(s.files[1])
	for _, in := range []*bufio.Reader{s.summary, s.faults} {
		if _, err := record(in, nil); err != nil { // the header
			return s, s.broken(err)
		}
	}
	return s, nil
}

func (s *shardReader) broken(err error) error {
	return &conflict{fmt.Sprintf("the tables of %s do not agree with its %s: %v", s.dir, ShardFile, err), "run the shard again"}
}

// sameFile is an error where the shards did not read the same files.
func sameFile(a, b string) error {
	x, err1 := os.ReadFile(a)
	y, err2 := os.ReadFile(b)
	if err := errors.Join(err1, err2); err != nil {
		return &conflict{fmt.Sprintf("the sources cannot be read: %v", profile.FileError(err)), ""}
	}
	if !bytes.Equal(x, y) {
		return &conflict{fmt.Sprintf("%s and %s differ: the shards did not read the same files", a, b), "run the shards on the same input"}
	}
	return nil
}

// mergeInto joins the tables and the reports.
func mergeInto(ctx context.Context, dir string, shards []*shardReader) (Outcome, error) {
	var outcome Outcome
	for _, s := range shards {
		outcome.join(&s.Tally)
		outcome.Reports += s.Reports
		if err := copyTree(filepath.Join(s.dir, Reports), filepath.Join(dir, Reports)); err != nil {
			return outcome, notMerged(dir, err)
		}
	}
	if err := copyFile(filepath.Join(shards[0].dir, Sources), filepath.Join(dir, Sources)); err != nil {
		return outcome, notMerged(dir, err)
	}
	var out [2]*bufio.Writer
	var files [2]*os.File
	for i, f := range []struct {
		name    string
		columns []Column
	}{{Summary, Columns}, {FaultsIn, FaultColumns}} {
		var err error
		if files[i], err = os.Create(filepath.Join(dir, f.name)); err != nil {
			return outcome, notMerged(dir, err)
		}
		defer files[i].Close()
		out[i] = bufio.NewWriterSize(files[i], 256<<10)
		out[i].Write(header(f.columns)) // its error is kept for Flush
	}
	for i := range shards[0].All {
		if i%1024 == 0 && ctx.Err() != nil {
			return outcome, nil
		}
		if err := shards[i%len(shards)].copyUnit(out[0], out[1]); err != nil {
			return outcome, err
		}
	}
	for _, s := range shards {
		if _, err := s.summary.ReadByte(); err != io.EOF {
			return outcome, s.broken(errors.New("there are more rows than units"))
		}
	}
	if err := errors.Join(out[0].Flush(), out[1].Flush()); err != nil {
		return outcome, notMerged(dir, err)
	}
	return outcome, nil
}

// copyUnit copies the rows of the next unit.
func (s *shardReader) copyUnit(summary, faults *bufio.Writer) error {
	for s.left == 0 {
		if s.run += 2; s.run > len(s.Rows) {
			return s.broken(io.ErrUnexpectedEOF)
		}
		s.left = s.Rows[s.run-2]
	}
	s.left--
	for range s.Rows[s.run-1] {
		row, err := record(s.summary, nil)
		if err != nil {
			return s.broken(err)
		}
		summary.Write(row) // its error is kept for Flush
		n, err := beside(row)
		if err != nil {
			return s.broken(err)
		}
		for range n {
			fault, err := record(s.faults, nil)
			if err != nil {
				return s.broken(err)
			}
			faults.Write(fault) // its error is kept for Flush
		}
	}
	return nil
}

// beside returns how many rows of faults.csv belong to a row of summary.csv.
func beside(row []byte) (int, error) {
	const notes, faults = 16, 17 // of Columns
	n, column, inside := 0, 0, false
	from := 0
	for i, b := range row {
		switch {
		case b == '"':
			inside = !inside
		case b == ',' && !inside:
			if column == notes || column == faults {
				k, err := strconv.Atoi(string(row[from:i]))
				if err != nil {
					return 0, err
				}
				n += k
			}
			column, from = column+1, i+1
		}
	}
	return n, nil
}

// record reads a record, which ends with a line outside quotes.
func record(in *bufio.Reader, b []byte) ([]byte, error) {
	for {
		line, err := in.ReadSlice('\n')
		b = append(b, line...)
		switch {
		case err == bufio.ErrBufferFull:
			continue
		case err != nil && len(b) > 0 && err == io.EOF:
			return nil, io.ErrUnexpectedEOF
		case err != nil:
			return nil, err
		}
		if bytes.Count(b, []byte{'"'})%2 == 0 {
			return b, nil
		}
	}
}

// copyTree puts the files of a folder into another, as links where the file
// system has them. A folder that is not there is empty.
func copyTree(from, to string) error {
	if _, err := os.Stat(from); errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	return filepath.WalkDir(from, func(path string, e fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		rest, err := filepath.Rel(from, path)
		if err != nil {
			return err
		}
		target := filepath.Join(to, rest)
		if e.IsDir() {
			return os.MkdirAll(target, 0o777)
		}
		if os.Link(path, target) == nil {
			return nil
		}
		return copyFile(path, target)
	})
}

func copyFile(from, to string) error {
	in, err := os.Open(from)
	if err != nil {
		return err
	}
	defer in.Close() // opened for reading
	out, err := os.Create(to)
	if err != nil {
		return err
	}
	_, err = io.Copy(out, in)
	return errors.Join(err, out.Close())
}

// deriveMerged makes what is derived, as the run in one piece would have.
func deriveMerged(dir string, s *shardReader, job *Job) error {
	own := job.Codes
	job.Codes = nil
	for _, id := range s.Codes {
		var code *siteclass.Code
		for _, c := range own {
			if c.ID == id {
				code = c
			}
		}
		if code == nil {
			code, _ = siteclass.Find(id) // one of a file that was not given is told without its table
		}
		if code != nil {
			job.Codes = append(job.Codes, code)
		}
	}
	opt, wanted := s.Pages, &job.Derive
	opt.Codes, opt.Version, opt.Template = job.Codes, wanted.Version, wanted.Template
	opt.GeoJSON, opt.JSON, opt.XLSX, opt.Report = wanted.GeoJSON, wanted.JSON, wanted.XLSX, wanted.Report
	if err := Derive(dir, opt); err != nil {
		return fmt.Errorf("the shards are joined, but not what is made from them: %w", err)
	}
	return nil
}

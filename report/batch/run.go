package batch

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"shearbook/profile/delimited"
	"shearbook/vs30/siteclass"
)

// Run does a job: it classifies every profile of the inputs and writes the
// batch's folder.
//
// An input is a file of any kind that package open reads, a pattern, a folder,
// or a manifest: a CSV table with the columns file, profile, code, datum,
// latitude, longitude and notes, known by the first. Rows come in the order of
// the inputs, of the names in a folder, and of the profiles in a file, whatever
// the number of workers.
//
// A profile that is at fault, or a file, has its rows all the same and leaves
// the others alone. Profiles are told apart in tables, workbooks, AGS4,
// SiteXML and our own JSON; where cones of AGS4 are asked for a fault is the whole
// file's, and so it is where the fault lies outside the profiles (see open.Each). The report of a profile beside one at fault is not made, which a note
// says, but for tables: a report carries its whole file, and that cannot be
// read without fault. A table with a column of profile names may be of any size:
// it is read in pieces. Where the rows of a profile do not follow one another
// they are brought together first, on disk.
//
// Everything is written into a folder inside Job.Out and moved into place at the
// end. Where ctx ends before that, what is in hand is finished and kept, and
// the outcome is Unfinished; a later run with Resume goes on from there, as it
// does after a kill, and gives the same bytes as a run in one piece. Of two runs
// in one folder at the same time the second is refused, where the system has
// locks for that.
func Run(ctx context.Context, job Job) (Outcome, error) {
	if len(job.Codes) == 0 {
		return Outcome{}, errors.New("a batch needs a code")
	}
	release, err := lockOut(job.Out)
	if err != nil {
		return Outcome{}, err
	}
	defer release()
	if w := declared(job.Out); w != nil {
		if err := install(job.Out, w); err != nil {
			return Outcome{}, err
		}
		if job.Resume && w.Job == job.digest() && w.Shard == job.Shard {
			return w.Outcome, nil
		}
	}
	work, err := openWork(&job)
	if err != nil {
		return Outcome{}, err
	}
	r := &run{job: &job, work: work, ctx: ctx, setting: setting{codes: job.Codes, facts: job.Facts}}
	r.total = sizeOf(job.Inputs)
	err = r.tables()
	work.close()
	if err != nil {
		return r.outcome, err
	}
	r.outcome.Out = job.Out
	r.outcome.sort(&job)
	if r.stopped() {
		r.outcome.Unfinished = true
		return r.outcome, nil
	}
	return r.outcome, r.finish()
}

// sizeOf returns how large files are together, 0 where they are not all files.
func sizeOf(names []string) int64 {
	total := int64(0)
	for _, name := range names {
		info, err := os.Stat(name)
		if err != nil || !info.Mode().IsRegular() {
			return 0
		}
		total += info.Size()
	}
	return total
}

// run is a job in the making.
type run struct {
	job     *Job
	work    *work
	ctx     context.Context
	setting setting // of files that no manifest names
	outcome Outcome
	all     int   // units, those of other shards among them
	shape   shape // rows of the units
	done    int64 // bytes of the input
	total   int64 // likewise; 0 where folders or patterns hide it

	free    chan *buffer // for pieces of tables
	order   chan *chunk  // in the order of the input
	todo    chan *chunk
	rooms   chan []byte // for rows
	failed  atomic.Bool
	ordinal chan int // of the next chunk's first unit; nil where nobody asks
}

func (r *run) stopped() bool { return r.ctx.Err() != nil }

func (r *run) tableOptions() delimited.Options {
	return delimited.Options{Units: r.job.Read.Units, Map: r.job.Read.Map}
}

// room is an empty buffer for rows.
func (r *run) room() []byte {
	select {
	case b := <-r.rooms:
		return b
	default:
		return make([]byte, 0, chunkSize)
	}
}

// tables writes the tables: one goroutine finds and cuts the input, workers
// classify it, and this one writes what they made, in order.
func (r *run) tables() error {
	workers := r.job.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	r.order, r.todo = make(chan *chunk, workers+1), make(chan *chunk, workers+1)
	r.free, r.rooms = make(chan *buffer, workers+3), make(chan []byte, 2*workers+6)
	if r.job.Shard.N > 1 || r.job.Reports != NoReports {
		r.ordinal = make(chan int, 1)
		r.ordinal <- 0
	}
	var group sync.WaitGroup
	for range workers {
		group.Go(func() {
			w := worker{run: r}
			for c := range r.todo {
				w.do(c)
			}
		})
	}
	var found error
	in := &feeder{run: r}
	in.find = inputs{job: r.job, do: in.item}
	group.Go(func() {
		defer close(r.order)
		defer close(r.todo)
		found = in.find.each()
		if found == nil {
			found = in.end()
		}
	})
	err := r.write()
	group.Wait()
	in.find.close()
	if found == errStopped {
		found = nil
	}
	return errors.Join(err, found)
}

// errStopped ends the finding of inputs where the run is over.
var errStopped = errors.New("stopped")

// write writes what was made of the chunks, in their order.
func (r *run) write() error {
	var failure error
	for c := range r.order {
		if c.done != nil {
			<-c.done
		}
		if failure == nil {
			if failure = r.one(c); failure != nil {
				r.failed.Store(true)
			}
		}
		r.release(c)
		if s := c.stream; s != nil && c.last {
			s.verdict <- s.apart.Load()
		}
	}
	return failure
}

// one writes a chunk.
func (r *run) one(c *chunk) error {
	m := &c.made
	if m.err != nil {
		return m.err
	}
	if s := c.stream; s != nil {
		if c.first {
			s.start = r.state()
		}
		if s.apart.Load() {
			return nil
		}
		if apart, err := s.watch(r, &m.names); err != nil || apart {
			return errors.Join(err, r.goBack(s.start))
		}
	}
	if c.empty {
		return nil
	}
	line := mark{File: c.it.name, Digest: c.digest, Size: c.size, Apart: c.stream != nil && c.stream.sorted != "", Last: c.last,
		All: m.all, Tally: m.tally, Rows: encode(m.rows), Names: m.names, Reports: m.reports}
	if err := r.work.add(m, c.source, line); err != nil {
		return err
	}
	r.count(&line)
	r.progress(c)
	return nil
}

// count takes a chunk that is in the tables into the sums.
func (r *run) count(m *mark) {
	r.outcome.join(&m.Tally)
	r.outcome.Reports += m.Reports
	r.all += m.All
	r.shape.add(m.Rows)
	if m.Last {
		r.done += m.Size
	}
}

func (r *run) progress(c *chunk) {
	if r.job.Progress == nil {
		return
	}
	p := Progress{Units: r.outcome.Units, Bytes: r.done, Total: r.total, Reports: r.outcome.Reports}
	if !c.last {
		p.Bytes += c.size
	}
	r.job.Progress(p)
}

// release lets the buffers of a chunk be used again.
func (r *run) release(c *chunk) {
	for _, b := range [][]byte{c.made.summary, c.made.faults} {
		if cap(b) == 0 || cap(b) > 4*chunkSize {
			continue
		}
		select {
		case r.rooms <- b[:0]:
		default:
		}
	}
	c.made.summary, c.made.faults = nil, nil
	if c.buf != nil {
		r.free <- c.buf
	}
}

// state is what a run goes back to where a table must be done anew.
type state struct {
	at      lengths
	outcome Outcome
	all     int
	shape   shape
	done    int64
}

func (r *run) state() state {
	s := state{r.work.at, r.outcome, r.all, r.shape.clone(), r.done}
	s.outcome.Classes = append([]Count(nil), r.outcome.Classes...)
	return s
}

func (r *run) goBack(s state) error {
	r.outcome, r.all, r.shape, r.done = s.outcome, s.all, s.shape, s.done
	return r.work.reset(s.at)
}

// finish makes what is derived from the tables and moves everything into place.
func (r *run) finish() error {
	dir := unfinished(r.job.Out)
	if err := os.RemoveAll(filepath.Join(dir, spillName)); err != nil {
		return r.work.failed(err)
	}
	os.Remove(filepath.Join(dir, Reports)) // where there is none in it
	if r.job.Shard.N > 1 {
		if err := r.describeShard(dir); err != nil {
			return r.work.failed(err)
		}
	} else if err := r.derive(dir); err != nil {
		return err
	}
	w := whole{Job: r.job.digest(), Shard: r.job.Shard, Outcome: r.outcome}
	if err := declare(r.job.Out, w); err != nil {
		return r.work.failed(err)
	}
	return install(r.job.Out, declared(r.job.Out))
}

func (r *run) derive(dir string) error {
	opt := r.job.Derive
	opt.Codes, opt.Facts, opt.Near = r.job.Codes, r.job.Facts, r.job.Near
	if err := Derive(dir, opt); err != nil {
		return fmt.Errorf("the tables are whole, but not what is made from them: %w", err)
	}
	return nil
}

// sort puts the counts in the order of the codes and of the classes of their
// tables, the failed last.
func (o *Outcome) sort(job *Job) {
	place := func(c Count) (code, class int) {
		code = slices.IndexFunc(job.Codes, func(k *siteclass.Code) bool { return k.ID == c.Code })
		if code < 0 {
			return len(job.Codes), 0
		}
		class = slices.IndexFunc(job.Codes[code].Bands, func(b siteclass.Band) bool { return b.Class == c.Class })
		if class < 0 {
			class = len(job.Codes[code].Bands)
		}
		return code, class
	}
	slices.SortFunc(o.Classes, func(a, b Count) int {
		codeA, classA := place(a)
		codeB, classB := place(b)
		return cmp.Or(codeA-codeB, cmp.Compare(a.Code, b.Code), classA-classB, cmp.Compare(b.Class, a.Class))
	})
}

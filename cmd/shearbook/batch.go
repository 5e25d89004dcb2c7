package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"path/filepath"
	"runtime/debug"
	"slices"
	"strconv"
	"strings"
	"syscall"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/batch"
	"shearbook/report/evidence"
)

// batchFlags are the flags of batch.
type batchFlags struct {
	codes, codeFiles          []string
	datum, foundation, extend string
	read                      readFlags
	out, reports, shard       string
	write                     []string
	near                      float64
	merge, resume, quiet      bool
	jobs                      int
	pages                     pageFlags
}

func newBatch(s streams) *cobra.Command {
	var f batchFlags
	c := &cobra.Command{
		Use:   "batch INPUT…",
		Short: "Classify many profiles: folders of files, or one large table",
		Long: `batch classifies every profile of its inputs and writes a folder: summary.csv
with a row for each profile and code, faults.csv with everything that is wrong
or doubtful, sources.csv with the files that were read, a map, the pages of a
summary, and a full report of each profile that has something to look at.

An input is a file, a folder, a pattern, a table with a column of profile
names, or a manifest: a CSV file with the columns file, profile, code, datum,
latitude, longitude and notes, of which only the first must be there. Beside
the tables, --write names what is written: notes (into faults.csv, which else
has the faults alone), geojson, json, xlsx, report (the summary's pages), or csv
for none of them; notes,geojson,report if left out.

A profile at fault leaves the others alone; the exit status is then 3. Ctrl-C
ends a run after what is in hand; --resume goes on, as it does after a kill.

To spread a batch over machines, let each do a shard and merge them:

  for i in 1 2 3 4; do shearbook batch survey --code ec8-2004 \
    --shard $i/4 --out part-$i & done; wait
  parallel shearbook batch survey --code ec8-2004 \
    --shard {}/4 --out part-{} ::: 1 2 3 4
  sbatch --array=1-4 --wrap 'shearbook batch survey --code ec8-2004 \
    --shard $SLURM_ARRAY_TASK_ID/4 --out part-$SLURM_ARRAY_TASK_ID'

  shearbook batch --merge part-* --out whole`,
		Example: `  shearbook batch survey/ --code asce-7-22 --out survey-classes
  shearbook batch region.csv --code ec8-2004,ntc-2018 --reports none --out out
  shearbook batch manifest.csv --code nbcc-2015 --out out --resume`,
		Args: arguments(1, -1, "at least one input"),
		RunE: func(c *cobra.Command, args []string) error { return runBatch(s, c, f, args) },
	}
	fl := c.Flags()
	fl.StringVar(&f.out, "out", "", "`folder` to write")
	fl.StringSliceVar(&f.codes, "code", nil, "`ID`s of codes, with commas between")
	fl.StringVar(&f.datum, "datum", "", "`depth` to average from: 2.5m")
	fl.StringVar(&f.foundation, "foundation-depth", "", "`depth` of the foundation: 1.5m")
	fl.StringVar(&f.extend, "extend", "", "`rule` to carry a short profile on")
	f.read.define(fl)
	fl.StringVar(&f.reports, "reports", "flagged", "`which`: all, flagged or none")
	fl.Float64Var(&f.near, "near", batch.Near, "`percent` from a bound that is near")
	fl.StringSliceVar(&f.write, "write", []string{"notes", "geojson", "report"}, "`list` of csv, notes, geojson, json, xlsx, report")
	fl.Lookup("write").DefValue = "[]" // the text above has it, in a line that is short enough
	fl.StringVar(&f.shard, "shard", "", "`I/N`: every N-th profile from the I-th on")
	fl.BoolVar(&f.merge, "merge", false, "the inputs are the folders of shards")
	fl.BoolVar(&f.resume, "resume", false, "go on with an unfinished batch")
	fl.IntVar(&f.jobs, "jobs", 0, "`number` of profiles at the same time")
	fl.BoolVar(&f.quiet, "quiet", false, "no progress")
	f.pages.define(c)
	codeFilesFlag(c, &f.codeFiles)
	completeCodes(c)
	completeWords(c, "extend", report.Extensions()...)
	completeWords(c, "reports", "all", "flagged", "none")
	completeWords(c, "write", batchOutputs...)
	return c
}

// batchOutputs are the words of --write.
var batchOutputs = []string{"csv", "notes", "geojson", "json", "xlsx", "report"}

// runBatch is the whole of `shearbook batch`.
func runBatch(s streams, c *cobra.Command, f batchFlags, inputs []string) error {
	if f.out == "" {
		return misuse("add --out DIR", "batch needs a folder to write")
	}
	if slices.Contains(inputs, "-") {
		return misuse("write it to a file and name that", "batch reads its input more than once, which standard input cannot be")
	}
	job, err := f.job(c, inputs)
	if err != nil {
		return err
	}
	debug.SetGCPercent(100) // a batch runs for longer, and is to stay small
	show := newShow(s.err, f.quiet)
	job.Progress, job.Say = show.progress, show.say
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, stop) // a second Ctrl-C ends the program at once
	var o batch.Outcome
	if f.merge {
		o, err = batch.Merge(ctx, inputs, job)
	} else {
		o, err = batch.Run(ctx, job)
	}
	show.end()
	var stands interface{ Hint() string }
	if errors.As(err, &stands) {
		return hinted{err, stands.Hint()}
	}
	if err != nil {
		return err
	}
	return tellBatch(s, c, f, o)
}

// job checks the flags.
func (f *batchFlags) job(c *cobra.Command, inputs []string) (job batch.Job, err error) {
	job = batch.Job{Inputs: inputs, Out: filepath.Clean(f.out), Near: f.near, Resume: f.resume, Workers: f.jobs, Version: versionText()}
	if err := f.together(c); err != nil {
		return job, err
	}
	if f.near == 0 {
		job.Near = -1 // none is near
	}
	own, err := readCodeFiles(f.codeFiles)
	if err != nil {
		return job, err
	}
	for _, file := range own {
		job.Tables = append(job.Tables, evidence.Digest(file.data))
	}
	if err := errors.Join(f.outputs(&job), f.pages.apply(&job.Derive)); err != nil {
		return job, err
	}
	job.Derive.Version, job.Derive.Command = versionText(), batchCommand(c, inputs)
	if f.merge {
		for _, file := range own {
			job.Codes = append(job.Codes, file.code)
		}
		return job, nil
	}
	return job, f.classification(c, own, &job)
}

// together checks the flags that exclude one another.
func (f *batchFlags) together(c *cobra.Command) (err error) {
	fl := c.Flags()
	switch {
	case f.near < 0:
		return misuse("give a percentage, as --near 5", "--near %v is below 0", f.near)
	case f.shard != "" && fl.Changed("write") && slices.ContainsFunc(f.write, derived):
		return misuse("give it at --merge; a shard takes csv and notes alone", "a shard has nothing beside its tables and reports: --write %s cannot be used", strings.Join(f.write, ","))
	case !f.merge:
		return nil
	}
	fl.Visit(func(flag *pflag.Flag) {
		switch flag.Name {
		case "merge", "out", "write", "code-file", "quiet", "help":
		default:
			err = misuse("leave it out: the shards say it", "--%s cannot be used with --merge", flag.Name)
		}
	})
	return err
}

// derived reports whether a word of --write asks for what is made from the
// tables.
func derived(word string) bool { return word != "csv" && word != "notes" }

// classification reads the flags that say how to classify.
func (f *batchFlags) classification(c *cobra.Command, own []codeFile, job *batch.Job) (err error) {
	if len(f.codes) == 0 && len(own) == 0 {
		return misuse("add --code asce-7-16, or another of `shearbook codes`", "batch needs a code")
	}
	classify := classifyFlags{codes: f.codes, codeFiles: f.codeFiles, datum: f.datum, foundation: f.foundation, extend: f.extend, format: "text"}
	if job.Facts, _, err = classify.check(); err != nil {
		return err
	}
	if job.Codes, err = chooseCodes(f.codes, own); err != nil {
		return err
	}
	if job.Read, err = f.read.options(); err != nil {
		return err
	}
	if f.shard != "" {
		if job.Shard, err = parseShard(f.shard); err != nil {
			return err
		}
	}
	job.Derive.Settings = settings(c, own)
	r := reporter{job: *job, own: own, command: c}
	job.MakeReport = r.make
	return nil
}

// outputs reads --write and --reports.
func (f *batchFlags) outputs(job *batch.Job) error {
	job.FaultsAlone = true
	for _, word := range f.write {
		switch word {
		case "csv":
		case "notes":
			job.FaultsAlone = false
		case "geojson":
			job.Derive.GeoJSON = true
		case "json":
			job.Derive.JSON = true
		case "xlsx":
			job.Derive.XLSX = true
		case "report":
			job.Derive.Report = true
		default:
			return misuse("known: "+strings.Join(batchOutputs, ", "), "output %q is not known", word)
		}
	}
	switch f.reports {
	case "none":
	case "flagged":
		job.Reports = batch.FlaggedReports
	case "all":
		job.Reports = batch.AllReports
	default:
		return misuse("it is all, flagged or none", "reports %q are not known", f.reports)
	}
	return nil
}

// parseShard reads --shard.
func parseShard(text string) (batch.Shard, error) {
	first, second, _ := strings.Cut(text, "/")
	i, err1 := strconv.Atoi(first)
	n, err2 := strconv.Atoi(second)
	if err1 != nil || err2 != nil || i < 1 || i > n {
		return batch.Shard{}, misuse("write it as --shard 3/16", "shard %q is not one", text)
	}
	return batch.Shard{I: i, N: n}, nil
}

// tellBatch says what was found and where it is.
func tellBatch(s streams, c *cobra.Command, f batchFlags, o batch.Outcome) error {
	if o.Unfinished {
		return hinted{fmt.Errorf("stopped: %s are done and kept in %s", profile.Plural(o.Units, "profile"), f.out),
			"the same command with --resume goes on"}
	}
	var b strings.Builder
	g := grid{wraps: 1, rows: [][]string{{"code", "class", "profiles"}}}
	for _, n := range o.Classes {
		class := n.Class
		if class == "" {
			class = "none"
		}
		g.rows = append(g.rows, []string{n.Code, class, strconv.Itoa(n.N)})
	}
	fmt.Fprintf(&b, "%s\n", profile.Plural(o.Units, "profile"))
	if len(o.Classes) > 0 {
		b.WriteString(g.String())
	}
	fmt.Fprintf(&b, "failed   %d\nflagged  %d\n", o.Failed, o.Flagged)
	if o.Reports > 0 {
		fmt.Fprintf(&b, "reports  %d\n", o.Reports)
	}
	for _, name := range []string{batch.Summary, batch.FaultsIn, batch.MapLayer, batch.SummaryPDF} {
		if _, err := os.Stat(filepath.Join(f.out, name)); err == nil {
			b.WriteString(report.Visible(filepath.Join(f.out, name)) + "\n")
		}
	}
	b.WriteString(wrap(report.Caution, width, "") + "\n")
	if _, err := io.WriteString(s.out, b.String()); err != nil {
		return err
	}
	if o.Failed > 0 {
		say(s.err, fmt.Sprintf("%d of %s got no class", o.Failed, profile.Plural(o.Units, "profile")),
			"see "+filepath.Join(f.out, batch.FaultsIn))
		return errLook
	}
	return nil
}

package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
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

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/batch"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/vs30/siteclass"
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
latitude, longitude and notes, of which only the first must be there.

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
	fl.StringVar(&f.reports, "reports", "flagged", "`all, flagged or none`: reports of profiles")
	fl.Float64Var(&f.near, "near", batch.Near, "`percent` of the average that is near a bound")
	fl.StringSliceVar(&f.write, "write", []string{"geojson", "report"}, "`csv,geojson,json,xlsx,report`")
	fl.StringVar(&f.shard, "shard", "", "`I/N`: every N-th profile from the I-th on")
	fl.BoolVar(&f.merge, "merge", false, "the inputs are the folders of shards")
	fl.BoolVar(&f.resume, "resume", false, "go on with an unfinished batch")
	fl.IntVar(&f.jobs, "jobs", 0, "`number` of profiles at the same time")
	fl.BoolVar(&f.quiet, "quiet", false, "no progress")
	codeFilesFlag(c, &f.codeFiles)
	completeCodes(c)
	completeWords(c, "extend", report.Extensions()...)
	completeWords(c, "reports", "all", "flagged", "none")
	completeWords(c, "write", batchOutputs...)
	return c
}

// batchOutputs are the words of --write.
var batchOutputs = []string{"csv", "geojson", "json", "xlsx", "report"}

// runBatch is the whole of `shearbook batch`.
func runBatch(s streams, c *cobra.Command, f batchFlags, inputs []string) error {
	if f.out == "" {
		return misuse("add --out DIR", "batch needs a folder to write")
	}
	job, err := f.job(inputs)
	if err != nil {
		return err
	}
	job.Derive.Version, job.Derive.Command = versionText(), batchCommand(c, inputs)
	job.Derive.Settings = f.settings()
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
func (f *batchFlags) job(inputs []string) (job batch.Job, err error) {
	job = batch.Job{Inputs: inputs, Out: filepath.Clean(f.out), Near: f.near, Resume: f.resume, Workers: f.jobs, Version: versionText()}
	if f.near < 0 {
		return job, misuse("give a percentage, as --near 5", "--near %v is below 0", f.near)
	}
	if f.near == 0 {
		job.Near = -1 // none is near
	}
	if err := f.outputs(&job); err != nil || f.merge {
		return job, err
	}
	classify := classifyFlags{codes: f.codes, codeFiles: f.codeFiles, datum: f.datum, foundation: f.foundation, extend: f.extend, format: "text"}
	if len(f.codes) == 0 && len(f.codeFiles) == 0 {
		return job, misuse("add --code asce-7-16, or another of `shearbook codes`", "batch needs a code")
	}
	if job.Facts, job.Codes, err = classify.check(); err != nil {
		return job, err
	}
	if job.Read, err = f.read.options(); err != nil {
		return job, err
	}
	if f.shard != "" {
		if job.Shard, err = parseShard(f.shard); err != nil {
			return job, err
		}
	}
	own, err := readCodeFiles(f.codeFiles)
	if err != nil {
		return job, err
	}
	for _, file := range own {
		sum := sha256.Sum256(file.data)
		job.Tables = append(job.Tables, hex.EncodeToString(sum[:]))
	}
	job.MakeReport = func(r batch.Reported) error { return makeReport(r, own, f.extend, job) }
	return job, nil
}

// settings are the choices that the pages tell.
func (f *batchFlags) settings() []batch.Setting {
	var list []batch.Setting
	for _, s := range []batch.Setting{{Name: "short profiles", Value: f.extend}, {Name: "datum", Value: f.datum},
		{Name: "foundation depth", Value: f.foundation}, {Name: "units", Value: f.read.units}} {
		if s.Value != "" {
			list = append(list, s)
		}
	}
	return list
}

// outputs reads --write and --reports.
func (f *batchFlags) outputs(job *batch.Job) error {
	for _, word := range f.write {
		switch word {
		case "csv":
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

// batchCommand is the command as the pages print it: the same wherever the
// files lie.
func batchCommand(c *cobra.Command, inputs []string) string {
	text := "shearbook batch"
	for _, in := range inputs {
		text += " " + filepath.Base(in)
	}
	if c.Flags().Changed("merge") {
		return text + " --merge"
	}
	for _, name := range []string{"code", "datum", "foundation-depth", "extend", "units", "near"} {
		if fl := c.Flags().Lookup(name); fl.Changed {
			text += " --" + name + " " + strings.Trim(fl.Value.String(), "[]")
		}
	}
	return text
}

// makeReport makes the report of one profile of a batch, the same as `shearbook
// report` makes. What is wrong with the profile comes back as profile.Faults.
func makeReport(r batch.Reported, own []codeFile, extend string, job batch.Job) error {
	standard := notebook.Standard{Read: job.Read, Datum: r.Facts.Datum, Foundation: r.Facts.Foundation}
	tables := map[string][]byte{r.Name: r.Data}
	for _, code := range r.Codes {
		if i := slices.IndexFunc(own, func(f codeFile) bool { return f.code == code }); i >= 0 {
			standard.CodeFiles = append(standard.CodeFiles, own[i].base)
			tables[own[i].base] = own[i].data
			continue
		}
		standard.Codes = append(standard.Codes, code.ID)
	}
	nb, err := notebook.NewStandard(r.Name, r.Data, standard)
	if err != nil {
		return err
	}
	nb.Header.Extend = extend
	nb.Header.Profiles = slices.DeleteFunc(nb.Header.Profiles, func(e notebook.ProfileEntry) bool { return e.Profile != r.Profile.Name })
	made, err := notebook.Evaluate(nb, notebook.Options{Version: versionText(), Command: "shearbook report " + r.Name + " --code " + idList(r.Codes),
		ReadFile: func(name string) ([]byte, error) {
			if data, ok := tables[name]; ok {
				return data, nil
			}
			return nil, os.ErrNotExist
		}})
	if err != nil {
		return err
	}
	files, err := folder.Files(made.Document, made.Results, pdf.Options{})
	if err != nil {
		return placeGlyphs(err, nb)
	}
	return folder.Write(r.Dir, files)
}

func idList(codes []*siteclass.Code) string {
	ids := make([]string, len(codes))
	for i, c := range codes {
		ids[i] = c.ID
	}
	return strings.Join(ids, ",")
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

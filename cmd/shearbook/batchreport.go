package main

import (
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/report/batch"
	"shearbook/report/evidence"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
)

// pageFlags are the flags of batch that say what stands in its pages and
// reports beside the classes.
type pageFlags struct {
	paper, print              string
	project, preparedBy, date string
}

func (f *pageFlags) define(c *cobra.Command) {
	fl := c.Flags()
	fl.StringVar(&f.paper, "paper", "", "`A4 or Letter`")
	fl.StringVar(&f.print, "print-units", "", "`SI or US`, to print in")
	fl.StringVar(&f.project, "project", "", "`name` of the project")
	fl.StringVar(&f.preparedBy, "prepared-by", "", "`name` of who prepared the batch")
	fl.StringVar(&f.date, "date", "", "`date` to print")
	completeWords(c, "paper", "A4", "Letter")
	completeWords(c, "print-units", "SI", "US")
}

// apply checks the flags.
func (f *pageFlags) apply(opt *batch.DeriveOptions) error {
	var h notebook.Header
	if err := (reportFlags{paper: f.paper, print: f.print}).override(&h); err != nil {
		return err
	}
	opt.Letter, opt.US = h.Letter, h.Units == notebook.US
	opt.Project, opt.PreparedBy, opt.Date = f.project, f.preparedBy, f.date
	return nil
}

// settings are the choices that the pages tell.
func settings(c *cobra.Command, own []codeFile) []batch.Setting {
	var list []batch.Setting
	for _, name := range append([]string{"extend", "datum", "foundation-depth"}, readFlagNames...) {
		if values := flagValues(c, name); len(values) > 0 {
			word := strings.ReplaceAll(name, "-", " ")
			list = append(list, batch.Setting{Name: strings.ToUpper(word[:1]) + word[1:], Value: strings.Join(values, "; ")})
		}
	}
	for _, file := range own {
		list = append(list, batch.Setting{Name: "Table of " + file.code.ID, Value: file.base + ", SHA-256 " + evidence.Digest(file.data)})
	}
	return list
}

// batchCommand is the command as the pages print it: the same wherever the
// files lie, in whatever parts it was run, and for whatever outputs.
func batchCommand(c *cobra.Command, inputs []string) string {
	text := "shearbook batch"
	for _, in := range inputs {
		text += " " + filepath.Base(in)
	}
	return text + printedFlags(c, append(reportedFlags(), "near", "reports"), nil)
}

// reporter makes the reports of the profiles of a batch. Several goroutines
// may use it.
type reporter struct {
	job     batch.Job
	own     []codeFile
	command *cobra.Command
}

// make makes the report of one profile, the same as `shearbook report` makes.
// What is wrong with the profile comes back as profile.Faults.
func (m *reporter) make(r batch.Reported) error {
	name := r.Name
	if r.Extract {
		name = extractName(r)
	}
	d := &m.job.Derive
	standard := notebook.Standard{Profile: r.Profile.Name, Extract: r.Extract, Read: m.job.Read, Datum: r.Facts.Datum, Foundation: r.Facts.Foundation,
		Project: d.Project, PreparedBy: d.PreparedBy, Date: d.Date}
	files := map[string][]byte{name: r.Data}
	for _, code := range r.Codes {
		if i := slices.IndexFunc(m.own, func(f codeFile) bool { return f.code == code }); i >= 0 {
			standard.CodeFiles = append(standard.CodeFiles, m.own[i].base)
			files[m.own[i].base] = m.own[i].data
			continue
		}
		standard.Codes = append(standard.Codes, code.ID)
	}
	nb, err := notebook.NewStandard(name, r.Data, standard)
	if err != nil {
		return err
	}
	nb.Header.Extend, nb.Header.Letter = r.Facts.Extend, d.Letter
	if d.US {
		nb.Header.Units = notebook.US
	}
	made, err := notebook.Evaluate(nb, notebook.Options{Version: m.job.Version, Command: m.printed(name, &r, &standard),
		ReadFile: func(name string) ([]byte, error) {
			if data, ok := files[name]; ok {
				return data, nil
			}
			return nil, os.ErrNotExist
		}})
	if err != nil {
		return err
	}
	opt := pdf.Options{}
	if made.Letter {
		opt.Paper = pdf.Letter
	}
	written, err := folder.WithEvidence(made.Document, made.Results, made.Evidence, opt)
	if err != nil {
		return placeGlyphs(err, nb)
	}
	return folder.Write(r.Dir, written)
}

// extractName is the name of the rows of one profile of a table: that of the
// table, and that of the report.
func extractName(r batch.Reported) string {
	ext := filepath.Ext(r.Name)
	return strings.TrimSuffix(r.Name, ext) + "-" + filepath.Base(r.Dir) + ext
}

// printed is the command that makes the same report.
func (m *reporter) printed(name string, r *batch.Reported, s *notebook.Standard) string {
	instead := map[string][]string{"code": s.Codes, "code-file": s.CodeFiles}
	if r.Facts.Datum != m.job.Facts.Datum { // a manifest says so
		instead["datum"] = []string{strconv.FormatFloat(r.Facts.Datum.Value, 'f', -1, 64) + "m"}
	}
	return "shearbook report " + name + printedFlags(m.command, reportedFlags(), instead)
}

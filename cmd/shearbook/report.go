package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/vs30/siteclass"
)

// reportFlags are the flags of report.
type reportFlags struct {
	out, paper, print, extend string
	withoutData               bool
	standard                  notebook.Standard // what the standard template is filled with
	codeFiles                 []string
	datum, foundation         string
	read                      readFlags
}

func newReport(s streams) *cobra.Command {
	var f reportFlags
	c := &cobra.Command{
		Use:   "report NOTEBOOK.md | PROFILE",
		Short: "Write the report of a notebook, or of one profile file",
		Long: `report evaluates a notebook and writes its report: report.md, report.html,
report.pdf, results.json, and the figures as SVG. Without --out they go into
a folder beside the notebook, named after it. Given a profile file and a code,
or a file with a jurisdiction's own table, it does the same through the
standard template. report.pdf carries the files it was made from.`,
		Example: `  shearbook report ferry-road/notebook.md
  shearbook report line-1.csv --code asce-7-16
  shearbook report line-1.csv --code ec8-2004 --units "ft, ft/s" --out report`,
		Args: arguments(1, 1, "one notebook or one profile file"),
		RunE: func(c *cobra.Command, args []string) error {
			return writeReport(s, c, f, args[0])
		},
	}
	fl := c.Flags()
	fl.StringVar(&f.out, "out", "", "`folder` to write, instead of NAME-report")
	fl.StringVar(&f.paper, "paper", "", "`A4 or Letter`")
	fl.StringVar(&f.print, "print-units", "", "`SI or US`, to print in")
	fl.StringVar(&f.extend, "extend", "", "`rule` to carry a short profile on")
	fl.BoolVar(&f.withoutData, "without-data", false, "leave the profile files out of report.pdf")
	fl.StringSliceVar(&f.standard.Codes, "code", nil, "`ID`s of codes, for a profile file")
	f.read.define(fl)
	fl.StringVar(&f.datum, "datum", "", "`depth` to average from: 2.5m")
	fl.StringVar(&f.foundation, "foundation-depth", "", "`depth` of the foundation: 1.5m")
	fl.StringVar(&f.standard.Project, "project", "", "`name`, for a profile file")
	fl.StringVar(&f.standard.PreparedBy, "prepared-by", "", "`name`, for a profile file")
	fl.StringVar(&f.standard.Date, "date", "", "`date`, for a profile file")
	codeFilesFlag(c, &f.codeFiles)
	completeWords(c, "paper", "A4", "Letter")
	completeWords(c, "print-units", "SI", "US")
	completeWords(c, "extend", report.Extensions()...)
	completeCodes(c)
	return c
}

// forProfileOnly are the flags that a notebook says itself.
var forProfileOnly = append([]string{"code", "map", "code-file", "units", "datum", "foundation-depth", "project", "prepared-by", "date"}, readFlagNames[2:]...)

// writeReport is the whole of `shearbook report`.
func writeReport(s streams, c *cobra.Command, f reportFlags, source string) error {
	dir := f.out
	switch {
	case dir == "" && source == "-":
		return misuse("add --out DIR", "a profile from standard input has no folder to put the report beside")
	case dir == "":
		dir = folder.NameFor(source)
	}
	src, err := openSource(s.in, source)
	if err != nil {
		return err
	}
	defer src.close()
	nb, err := src.notebook(c, f)
	if err != nil {
		return src.relocate(err)
	}
	if err := f.override(&nb.Header); err != nil {
		return err
	}
	made, err := notebook.Evaluate(nb, notebook.Options{
		ReadFile: src.read, Version: versionText(), Command: canonical(c, src.base),
	})
	if err != nil {
		return src.relocate(err)
	}
	opt := pdf.Options{}
	if made.Letter {
		opt.Paper = pdf.Letter
	}
	files, err := folder.WithEvidence(made.Document, made.Results, made.Evidence, opt)
	if err != nil {
		return src.relocate(placeGlyphs(err, nb))
	}
	if err := folder.Write(dir, files); err != nil {
		return hinted{err, "choose another folder with --out"}
	}
	return tellClasses(s, made.Results, dir)
}

// tellClasses says what was found and where the report is.
func tellClasses(s streams, results []report.Result, dir string) error {
	var b strings.Builder
	for _, r := range results {
		by := "by " + r.Route
		if r.Velocity != nil {
			by = fmt.Sprintf("%.1f %s", r.Velocity.Value, r.Velocity.Unit)
		}
		fmt.Fprintf(&b, "%s: site class %s (%s, %s)\n", report.Visible(r.Profile), siteclass.ClassWords(r.Class, r.Classes), r.Code, by)
	}
	fmt.Fprintf(&b, "%s\n%s\n", report.Visible(filepath.Join(dir, folder.PDF)), wrap(report.Caution, width, ""))
	_, err := io.WriteString(s.out, b.String())
	return err
}

// override puts the flags that any report takes over the front matter.
func (f reportFlags) override(h *notebook.Header) error {
	switch strings.ToLower(f.paper) {
	case "":
	case "a4":
		h.Letter = false
	case "letter":
		h.Letter = true
	default:
		return misuse("it is A4 or Letter", "paper %q is not known", f.paper)
	}
	if f.print != "" {
		system, ok := notebook.ParseSystem(f.print)
		if !ok {
			return misuse("it is SI or US", "units %q cannot be printed in", f.print)
		}
		h.Units = system
	}
	if f.withoutData {
		h.WithoutData = true
	}
	if f.extend != "" {
		if err := checkExtend(f.extend); err != nil {
			return err
		}
		h.Extend = f.extend
	}
	return nil
}

// canonical is the command as the appendix prints it: the same wherever the
// files lie.
func canonical(c *cobra.Command, base string) string {
	return "shearbook report " + base + printedFlags(c, reportedFlags(), nil)
}

// reportedFlags are the flags of report that change what it says, in the order
// in which they are printed.
func reportedFlags() []string {
	return append([]string{"extend", "paper", "print-units", "without-data"}, forProfileOnly...)
}

// printedFlags are flags as they are printed behind a command, without the
// folders of files. The values in instead take the place of those given.
func printedFlags(c *cobra.Command, names []string, instead map[string][]string) string {
	text := ""
	for _, name := range names {
		values, other := instead[name]
		if !other {
			values = flagValues(c, name)
		}
		for _, value := range values {
			switch {
			case value == "true" && c.Flags().Lookup(name).Value.Type() == "bool":
				text += " --" + name
				continue
			case name == "code-file":
				value = filepath.Base(value)
			}
			if strings.ContainsAny(value, " ,") {
				value = `"` + value + `"`
			}
			text += " --" + name + " " + value
		}
	}
	return text
}

// flagValues are the values that a flag was given, none where it was not or is
// none of the command's.
func flagValues(c *cobra.Command, name string) []string {
	fl := c.Flags().Lookup(name)
	if fl == nil || !fl.Changed || fl.Value.Type() == "bool" && fl.Value.String() != "true" {
		return nil
	}
	if list, ok := fl.Value.(pflag.SliceValue); ok {
		return list.GetSlice()
	}
	return []string{fl.Value.String()}
}

// source is the notebook or the profile file that report was given.
type source struct {
	name, base string // as the user named it, and without its folder
	dir        string
	data       []byte
	root       *os.Root          // its folder; nil for standard input
	tables     map[string][]byte // of --code-file, by their names without their folders
}

// openSource reads the file that report was given, and opens its folder.
func openSource(in io.Reader, name string) (*source, error) {
	if name == "-" {
		data, err := io.ReadAll(io.LimitReader(in, maxRead+1))
		if err != nil {
			return nil, fmt.Errorf("standard input cannot be read: %w", err)
		}
		return &source{name: "standard input", base: "standard-input", data: data}, nil
	}
	src := &source{name: name, base: filepath.Base(name), dir: filepath.Dir(name)}
	root, err := os.OpenRoot(src.dir)
	if err != nil {
		return nil, hinted{fmt.Errorf("%s cannot be read: %w", name, profile.FileError(err)), "check the name"}
	}
	src.root = root
	if src.data, err = src.read(src.base); err != nil {
		src.close()
		return nil, hinted{fmt.Errorf("%s cannot be read: %w", name, profile.FileError(err)), "check the name"}
	}
	return src, nil
}

func (src *source) close() {
	if src.root != nil {
		_ = src.root.Close() // opened for reading
	}
}

// maxRead is the size in bytes above which no file is read.
const maxRead = 64 << 20

// read returns a file of the source's folder. It follows no link out of it,
// and waits for no pipe.
func (src *source) read(name string) ([]byte, error) {
	if name == src.base && src.data != nil {
		return src.data, nil
	}
	if data, ok := src.tables[name]; ok {
		return data, nil
	}
	if src.root == nil {
		return nil, fs.ErrNotExist
	}
	info, err := src.root.Stat(filepath.FromSlash(name))
	switch {
	case err != nil:
		return nil, err
	case info.IsDir():
		return nil, errors.New("it is a folder")
	case !info.Mode().IsRegular():
		return nil, errors.New("it is not a file")
	case info.Size() > maxRead:
		return nil, fmt.Errorf("it is larger than %d MiB", maxRead>>20)
	}
	return src.root.ReadFile(filepath.FromSlash(name))
}

// isNotebook reports whether the source is a notebook rather than a profile.
func (src *source) isNotebook() bool {
	switch strings.ToLower(filepath.Ext(src.base)) {
	case ".md", ".markdown":
		return true
	}
	return bytes.HasPrefix(bytes.TrimPrefix(src.data, []byte("\ufeff")), []byte("---\n"))
}

// notebook reads the notebook, or fills the standard template with the
// profiles of the file.
func (src *source) notebook(c *cobra.Command, f reportFlags) (*notebook.Notebook, error) {
	if src.isNotebook() {
		for _, name := range forProfileOnly {
			if c.Flags().Changed(name) {
				return nil, misuse("write it into the notebook's front matter", "--%s is for a profile file", name)
			}
		}
		return notebook.Parse(src.base, src.data)
	}
	if len(f.standard.Codes) == 0 && len(f.codeFiles) == 0 {
		return nil, misuse("add --code asce-7-16, or another of `shearbook codes`", "a report of a profile file needs a code")
	}
	own, err := readCodeFiles(f.codeFiles)
	if err != nil {
		return nil, elsewhere{err}
	}
	if _, err := chooseCodes(f.standard.Codes, own); err != nil {
		return nil, err
	}
	if f.standard.CodeFiles, err = src.keep(own); err != nil {
		return nil, err
	}
	if f.standard.Datum, err = depthFlag("datum", f.datum); err != nil {
		return nil, err
	}
	if f.standard.Foundation, err = depthFlag("foundation-depth", f.foundation); err != nil {
		return nil, err
	}
	if f.standard.Read, err = f.read.options(); err != nil {
		return nil, err
	}
	return notebook.NewStandard(src.base, src.data, f.standard)
}

// keep lets read return the tables of --code-file under their names without
// their folders, and returns these.
func (src *source) keep(own []codeFile) ([]string, error) {
	src.tables = map[string][]byte{}
	var names []string
	for _, f := range own {
		if _, taken := src.tables[f.base]; taken || f.base == src.base {
			return nil, misuse("rename one of them", "two files are called %s, and the report could not tell them apart", f.base)
		}
		src.tables[f.base] = f.data
		names = append(names, f.base)
	}
	return names, nil
}

// elsewhere is an error about files that the user named with their folders.
type elsewhere struct{ error }

func (e elsewhere) Unwrap() error { return e.error }

// relocate gives faults the path of the file as the user named it.
func (src *source) relocate(err error) error {
	var faults profile.Faults
	var named elsewhere
	if errors.As(err, &named) || !errors.As(err, &faults) {
		return err
	}
	moved := make(profile.Faults, len(faults))
	for i, f := range faults {
		switch {
		case f.Place.File == notebook.StandardFile: // nothing the user wrote
			f.Place = profile.Place{File: src.name}
			f.Hint = strings.NewReplacer("`extend: constant-velocity`", "--extend constant-velocity", " to the front matter", "").Replace(f.Hint)
		case f.Place.File == src.base:
			f.Place.File = src.name
		case f.Place.File != "" && src.dir != "" && src.dir != ".":
			f.Place.File = filepath.Join(src.dir, f.Place.File)
		}
		moved[i] = f
	}
	return moved
}

// placeGlyphs finds the characters that the fonts do not have in the
// notebook.
func placeGlyphs(err error, nb *notebook.Notebook) error {
	var missing *pdf.MissingGlyphs
	if !errors.As(err, &missing) {
		return err
	}
	var faults profile.Faults
	for _, r := range missing.Runes {
		at, found := nb.Find(r)
		hint := "write it in Latin, Greek or Cyrillic letters"
		if !found {
			hint += "; it comes from a profile file"
		}
		faults = append(faults, profile.Faultf(at, hint, "the report's fonts have no character %q (U+%04X)", r, r))
	}
	return faults
}

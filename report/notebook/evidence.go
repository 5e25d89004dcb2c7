package notebook

import (
	"bytes"
	"errors"
	"fmt"
	"path"
	"path/filepath"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/evidence"
)

// readFile reads a file beside the notebook, once under each name, and keeps
// it as evidence.
func (ev *evaluation) readFile(name string, role evidence.Role) ([]byte, error) {
	name = evidence.Clean(filepath.ToSlash(name))
	for _, f := range ev.files {
		if f.Name == name {
			return f.Data, nil
		}
	}
	if evidence.Reserved(name) {
		return nil, errors.New("report.pdf carries a file of its own with this name: rename it")
	}
	data, err := ev.opt.ReadFile(name)
	if err == nil {
		ev.files = append(ev.files, evidence.File{Name: name, Role: role, Data: data})
	}
	return data, err
}

// bundle is what report.pdf is to carry: the notebook, the files that were
// read for it, and the results.
func (ev *evaluation) bundle() (evidence.Bundle, error) {
	var results bytes.Buffer
	if err := report.WriteResults(&results, ev.results); err != nil {
		return evidence.Bundle{}, profile.Faults{profile.Faultf(profile.Place{File: ev.nb.File}, "", "the results cannot be written: %v", err)}
	}
	h := ev.nb.Header
	b := evidence.Bundle{
		Manifest: evidence.Manifest{
			Schema: evidence.Schema, Version: ev.opt.Version, Command: ev.opt.Command,
			Options: evidence.Options{Units: ev.system.String(), Paper: "A4", Extend: h.Extend, WithoutData: h.WithoutData},
		},
		Files: append([]evidence.File{{Name: ev.notebookName(), Role: evidence.Notebook, Data: ev.nb.Source}}, ev.files...),
	}
	if h.Letter {
		b.Manifest.Options.Paper = "Letter"
	}
	b.Files = append(b.Files, evidence.File{Name: evidence.ResultsName, Role: evidence.Results, Data: results.Bytes()})
	b.Manifest.Files = evidence.List(b.Files)
	for i, f := range b.Files {
		b.Manifest.Files[i].Withheld = h.WithoutData && f.Role == evidence.Profile
	}
	return b, nil
}

// notebookName is the name under which the notebook is attached: its own, or
// that of the standard template, changed where an input has it.
func (ev *evaluation) notebookName() string {
	name := path.Base(filepath.ToSlash(ev.nb.File))
	if ev.nb.File == StandardFile {
		name = "notebook.md"
	}
	ext := path.Ext(name)
	free := func(n string) bool {
		for _, f := range ev.files {
			if f.Name == n {
				return false
			}
		}
		return !evidence.Reserved(n)
	}
	unique := name
	for i := 2; !free(unique); i++ {
		unique = strings.TrimSuffix(name, ext) + "-" + strconv.Itoa(i) + ext
	}
	return unique
}

// digestList is the list of the files that the report was made from. It is
// filled when the whole notebook is evaluated: workings below it may read
// further files and decide further results.
func (ev *evaluation) digestList() *report.Table {
	t := &report.Table{
		Caption: words("Files"),
		Columns: []report.TableColumn{column("File", report.AlignLeft), column("What it is", report.AlignLeft),
			column("Bytes", report.AlignRight), wide("SHA-256")},
		Compact: true,
	}
	carried := "report.pdf carries these files as attachments"
	if ev.nb.Header.WithoutData {
		carried = "report.pdf carries these files, but for those that are withheld, as attachments"
	}
	t.Notes = append(t.Notes, words(carried+", with "+evidence.ManifestName+", which lists them with their digests."))
	ev.digestLists = append(ev.digestLists, t)
	return t
}

// printDigests fills the lists of files.
func (ev *evaluation) printDigests(m evidence.Manifest) {
	for _, t := range ev.digestLists {
		for _, e := range m.Files {
			what := string(e.Role)
			switch {
			case e.Withheld:
				what += ", withheld"
			case e.Attached != "":
				what += ", attached as " + e.Attached
			}
			r := row(e.Name, what, fmt.Sprint(e.Size), "")
			r.Cells[3] = []report.Inline{report.Code(e.SHA256)}
			t.Rows = append(t.Rows, r)
		}
	}
}

package review

import (
	"errors"
	"path"
	"strings"

	"shearbook/profile"
	"shearbook/report/evidence"
)

// pdf reads a report.pdf with its evidence inside: the notebook's front
// matter, the profiles, results.json and the text of the pages.
func (f *intake) pdf(base string, data []byte) error {
	f.sub.Kind = ReportFile
	f.keep(base, "report", data)
	at := profile.Place{File: base}
	e, err := evidence.Read(data)
	var refused *evidence.Error
	switch {
	case errors.As(err, &refused):
		f.add(profile.Faultf(at, refused.Hint, "the report cannot be taken apart: %s", refused.Text))
		return nil
	case err != nil:
		f.fault(at, "the report cannot be taken apart: %v", err)
		return nil
	}
	f.mismatches(base, e)
	f.read = f.attached(e)
	f.evidence(base, e)
	return nil
}

// pdfBeside takes the PDF of a report that lies beside its site: its own
// evidence must fit together, and be that of the folder. A PDF without
// evidence is let pass.
func (f *intake) pdfBeside(name, dir string, data []byte) {
	e, err := evidence.Read(data)
	if err != nil {
		return
	}
	f.mismatches(name, e)
	for _, m := range e.Manifest.Files {
		if len(f.sub.Digests) >= maxDigests {
			return
		}
		file := m.Name
		if m.Role == evidence.Results {
			file = path.Join(dir, m.Name)
		}
		f.sub.Digests = append(f.sub.Digests, Digest{File: file, SHA256: m.SHA256, Place: Place{Place: profile.Place{File: name}, Section: evidence.ManifestName}})
	}
}

// mismatches takes what does not fit together in the PDF.
func (f *intake) mismatches(base string, e *evidence.Evidence) {
	for _, m := range e.Check() {
		if len(f.sub.Faults) == MaxFaults {
			return
		}
		f.sub.Faults = append(f.sub.Faults, Fault{
			Fault:    profile.Faultf(profile.Place{File: base}, "", "%s", m.Text),
			Evidence: true, Lesser: m.Kind == evidence.Unlisted || m.Kind == evidence.NotPrinted,
			Page: m.Page, Claimed: m.Claimed, Found: m.Found,
		})
	}
}

// attached reads an attachment, and says of one that was withheld that it
// was.
func (f *intake) attached(e *evidence.Evidence) func(string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		data, err := e.ReadFile(name)
		if err == nil {
			return data, nil
		}
		for _, entry := range e.Manifest.Files {
			if entry.Withheld && entry.Name == evidence.Clean(name) {
				return nil, errors.New("it was withheld from the report; ask for it and review the site folder")
			}
		}
		return nil, errors.New("it is not attached")
	}
}

// evidence takes the notebook, the results and the pages.
func (f *intake) evidence(base string, e *evidence.Evidence) {
	books := e.Of(evidence.Notebook)
	if len(books) == 0 {
		f.fault(profile.Place{File: base}, "the report carries no notebook")
	} else {
		f.site(books[0].Name, books[0].Data)
	}
	if extend := e.Manifest.Options.Extend; extend != "" {
		f.sub.Stated.Extend = extend
	}
	if results, ok := e.File(evidence.ResultsName); ok {
		f.results(results.Name, results.Data)
	} else {
		f.fault(profile.Place{File: base}, "the report carries no %s", evidence.ResultsName)
	}
	total := 0
	for _, page := range e.Pages {
		p := Printed{File: base, Page: page.Number}
		for _, l := range page.Lines {
			if total += len(l.Text); total > MaxPrinted {
				f.fault(profile.Place{File: base}, "the text of the report is longer than %d MiB", MaxPrinted>>20)
				return
			}
			p.Text = append(p.Text, strings.ToValidUTF8(l.Text, "\ufffd"))
		}
		f.sub.Printed = append(f.sub.Printed, p)
	}
}

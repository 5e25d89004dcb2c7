package review

import (
	"errors"
	"path"
	"slices"
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
// evidence must fit together, and be that of the folder; its pages are
// compared as the other texts of the report are. One without evidence is
// told.
func (f *intake) pdfBeside(name, dir string, data []byte) {
	e, err := evidence.Read(data)
	if err != nil {
		f.pdfWithout(name, data, err)
		return
	}
	f.mismatches(name, e)
	f.pages(name, e.Pages)
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

// pdfWithout takes the PDF of a report that carries no evidence.
func (f *intake) pdfWithout(name string, data []byte, why error) {
	pages, err := evidence.ReadPages(data)
	text := "carries no evidence"
	if err != nil {
		text += ", and its pages cannot be read"
	}
	f.evident(Fault{Fault: profile.Faultf(profile.Place{File: name}, "", "%s %s: %v", path.Base(name), text, why), Lesser: err == nil})
	f.pages(name, pages)
}

// evident adds a part of the submission that does not fit together with
// another.
func (f *intake) evident(fault Fault) {
	if fault.Evidence = true; len(f.sub.Faults) < MaxFaults {
		f.sub.Faults = append(f.sub.Faults, fault)
	}
}

// mismatches takes what does not fit together in the PDF. Pages that were
// saved again are to be explained where nothing else is amiss.
func (f *intake) mismatches(base string, e *evidence.Evidence) {
	found := e.Check()
	lesser := func(m evidence.Mismatch) bool { return m.Kind == evidence.Unlisted || m.Kind == evidence.NotPrinted }
	amiss := slices.ContainsFunc(found, func(m evidence.Mismatch) bool { return m.Kind != evidence.PagesAltered && !lesser(m) })
	for _, m := range found {
		fault := Fault{Fault: profile.Faultf(profile.Place{File: base}, "", "%s", m.Text), Lesser: lesser(m),
			Page: m.Page, Claimed: m.Claimed, Found: m.Found}
		if m.Kind == evidence.PagesAltered && m.Resaved && !amiss {
			fault.Lesser = true
			fault.Text = "the PDF was saved again or signed after it was written: its attachments, digests and text fit together, and its drawings were not compared"
		}
		f.evident(fault)
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
	f.pages(base, e.Pages)
}

// pages takes the text of pages.
func (f *intake) pages(base string, pages []evidence.Page) {
	total := 0
	for _, page := range pages {
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

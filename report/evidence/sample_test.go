package evidence_test

import (
	"bytes"
	"compress/zlib"
	"fmt"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/evidence"
	"shearbook/report/pdf"
)

// The files of the sample: a site invented for the tests.
const (
	sampleNotebook = "---\ncode: asce-7-16\nprofiles:\n  Q1: {file: quay.csv}\n---\n# Quay\n"
	sampleProfile  = "depth (m),vs (m/s)\n0,180\n12,320\n"
)

// sampleFiles are the files of the sample with the bytes of results.json.
func sampleFiles() []evidence.File {
	return []evidence.File{
		{Name: "quay.md", Role: evidence.Notebook, Data: []byte(sampleNotebook)},
		{Name: "quay.csv", Role: evidence.Profile, Data: []byte(sampleProfile)},
		{Name: "results.json", Role: evidence.Results, Data: []byte("{\"schema\": 1}\n")},
	}
}

// pages prints a page with the digests of files, as the appendix has them.
func pages(t testing.TB, files []evidence.File) []byte {
	t.Helper()
	table := &report.Table{Compact: true, Columns: []report.TableColumn{
		{Header: inline("File")}, {Header: inline("SHA-256"), Wide: true}}}
	for _, f := range files {
		table.Rows = append(table.Rows, report.TableRow{Cells: [][]report.Inline{
			inline(f.Name), {report.Code(evidence.Digest(f.Data))}}})
	}
	d := &report.Document{Title: "Quay", Date: "2026-10-01", Blocks: []report.Block{
		&report.Heading{Level: 1, Inline: inline("Quay")},
		&report.Paragraph{Inline: inline("Profile Q1 is site class D, with an average velocity of 245.1 m/s.")},
		table,
	}}
	var b bytes.Buffer
	if err := pdf.Write(&b, d, pdf.Options{}); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func inline(text string) []report.Inline { return []report.Inline{report.Text(text)} }

// manifest lists files over the pages.
func manifest(base []byte, files []evidence.File) evidence.Manifest {
	m := evidence.Manifest{Schema: evidence.Schema, Version: "shearbook test", Command: "shearbook report quay.md",
		Options: evidence.Options{Units: "SI", Paper: "A4"},
		Pages:   evidence.Pages{SHA256: evidence.Digest(base), Size: int64(len(base))}}
	m.Files = evidence.List(files)
	return m
}

// attach adds files and a manifest to pages.
func attach(t testing.TB, base []byte, files []evidence.File, m evidence.Manifest) []byte {
	t.Helper()
	var list []pdf.Attachment
	as := map[string]string{}
	for _, e := range m.Files {
		as[e.Name] = e.AttachedAs()
	}
	for _, f := range files {
		name := as[f.Name]
		if name == "" {
			name = f.Name
		}
		list = append(list, pdf.Attachment{Name: name, Data: f.Data})
	}
	whole, err := pdf.Attach(base, append(list, pdf.Attachment{Name: evidence.ManifestName, Data: m.Bytes()}))
	if err != nil {
		t.Fatal(err)
	}
	return whole
}

// sample is a report with its evidence.
func sample(t testing.TB) []byte {
	t.Helper()
	base := pages(t, sampleFiles())
	return attach(t, base, sampleFiles(), manifest(base, sampleFiles()))
}

// hand writes a PDF by hand: object n is objects[n-1]. Its catalog is object
// 1, and trailer is added to the trailer's entries.
func hand(trailer string, objects ...string) []byte {
	var b bytes.Buffer
	b.WriteString("%PDF-1.7\n")
	var offsets []int
	for i, o := range objects {
		offsets = append(offsets, b.Len())
		fmt.Fprintf(&b, "%d 0 obj\n%s\nendobj\n", i+1, o)
	}
	xref := b.Len()
	fmt.Fprintf(&b, "xref\n0 %d\n0000000000 65535 f \n", len(objects)+1)
	for _, at := range offsets {
		fmt.Fprintf(&b, "%010d 00000 n \n", at)
	}
	fmt.Fprintf(&b, "trailer\n<</Size %d/Root 1 0 R%s>>\nstartxref\n%d\n%%%%EOF\n", len(objects)+1, trailer, xref)
	return b.Bytes()
}

// packed is a stream packed by Flate.
func packed(entries string, data []byte) string {
	var z bytes.Buffer
	w := zlib.NewWriter(&z)
	w.Write(data)
	w.Close()
	return fmt.Sprintf("<<%s/Filter/FlateDecode/Length %d>>\nstream\n%s\nendstream", entries, z.Len(), z.String())
}

// plain is a stream as it is.
func plain(entries, data string) string {
	return fmt.Sprintf("<<%s/Length %d>>\nstream\n%s\nendstream", entries, len(data), data)
}

// carrying is a PDF by hand with one page of some content and the manifest
// of no file; more are the objects from 8 on.
func carrying(page string, more ...string) []byte {
	m := evidence.Manifest{Schema: 1, Files: []evidence.Entry{}}
	return hand("", append([]string{
		"<</Type/Catalog/Pages 2 0 R/Names<</EmbeddedFiles 5 0 R>>>>",
		"<</Type/Pages/Kids[3 0 R]/Count 1>>",
		"<</Type/Page/Parent 2 0 R/MediaBox[0 0 100 100]/Resources<</Font<</F1 8 0 R>>>>/Contents 4 0 R>>",
		page,
		"<</Names[(manifest.json) 6 0 R]>>",
		"<</Type/Filespec/F(manifest.json)/EF<</F 7 0 R>>>>",
		plain("/Type/EmbeddedFile", string(m.Bytes())),
	}, more...)...)
}

// textOf joins the lines of all pages.
func textOf(e *evidence.Evidence) string {
	var b strings.Builder
	for _, p := range e.Pages {
		for _, l := range p.Lines {
			b.WriteString(l.Text + "\n")
		}
	}
	return b.String()
}

package folder

import (
	"bytes"
	"io/fs"
	"strings"
	"testing"

	"shearbook/report/evidence"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
)

// site is a folder in memory: a notebook and its profile.
var site = map[string]string{
	"site.md":      "---\ncode: [asce-7-16, ec8-2004]\nextend: constant-velocity\nprofiles:\n  L1: {file: lines/l1.csv}\n---\n# Site\n\n```class\n```\n\n```data\n```\n",
	"lines/l1.csv": "top (m),bottom (m),vs (m/s)\n0,6,220\n6,40,430\n",
}

func readSite(name string) ([]byte, error) {
	if text, ok := site[name]; ok {
		return []byte(text), nil
	}
	return nil, fs.ErrNotExist
}

// reported makes the files of the report of a notebook.
func reported(t *testing.T, nb *notebook.Notebook, read func(string) ([]byte, error)) map[string][]byte {
	t.Helper()
	made, err := notebook.Evaluate(nb, notebook.Options{ReadFile: read, Version: "shearbook test", Command: "shearbook report site.md"})
	if err != nil {
		t.Fatal(err)
	}
	files, err := WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{})
	if err != nil {
		t.Fatal(err)
	}
	byName := map[string][]byte{}
	for _, f := range files {
		byName[f.Name] = f.Data
	}
	return byName
}

func parsed(t *testing.T, name string, source []byte) *notebook.Notebook {
	t.Helper()
	nb, err := notebook.Parse(name, source)
	if err != nil {
		t.Fatal(err)
	}
	return nb
}

// A report can be made again, byte for byte, from what it carries alone.
func TestReportIsMadeAgainFromItsEvidence(t *testing.T) {
	first := reported(t, parsed(t, "site.md", []byte(site["site.md"])), readSite)
	e, err := evidence.Read(first[PDF])
	if err != nil {
		t.Fatal(err)
	}
	if found := e.Check(); found != nil {
		t.Errorf("mismatches: %+v", found)
	}
	book := e.Of(evidence.Notebook)
	if len(book) != 1 {
		t.Fatalf("%d notebooks", len(book))
	}
	again := reported(t, parsed(t, book[0].Name, book[0].Data), e.ReadFile)
	for name, data := range first {
		if !bytes.Equal(data, again[name]) {
			t.Errorf("%s differs when made again", name)
		}
	}
	if results, ok := e.File(evidence.ResultsName); !ok || !bytes.Equal(results.Data, first[Results]) {
		t.Error("the attached results.json is not the folder's")
	}
	for name, text := range site {
		if f, ok := e.File(name); !ok || string(f.Data) != text {
			t.Errorf("%s is not attached as it was read", name)
		}
	}
}

func TestWithheldFilesAreNotInTheFile(t *testing.T) {
	nb := parsed(t, "site.md", []byte(site["site.md"]))
	nb.Header.WithoutData = true
	made := reported(t, nb, readSite)
	e, err := evidence.Read(made[PDF])
	if err != nil {
		t.Fatal(err)
	}
	if found := e.Check(); found != nil {
		t.Errorf("mismatches: %+v", found)
	}
	if _, ok := e.File("lines/l1.csv"); ok {
		t.Error("the withheld file is attached")
	}
	for _, name := range []string{Markdown, HTML} {
		if text := string(made[name]); !strings.Contains(text, "withheld") || !strings.Contains(text, evidence.Digest([]byte(site["lines/l1.csv"]))) {
			t.Errorf("%s does not state what is withheld", name)
		}
	}
}

// The PDF grows by no more than the packed inputs and some hundred bytes for
// each of them.
func TestEvidenceIsSmall(t *testing.T) {
	nb := parsed(t, "site.md", []byte(site["site.md"]))
	made, err := notebook.Evaluate(nb, notebook.Options{ReadFile: readSite, Version: "shearbook test"})
	if err != nil {
		t.Fatal(err)
	}
	var pages bytes.Buffer
	if err := pdf.Write(&pages, made.Document, pdf.Options{}); err != nil {
		t.Fatal(err)
	}
	files, err := WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{})
	if err != nil {
		t.Fatal(err)
	}
	size := 0
	for _, f := range made.Evidence.Files {
		size += len(f.Data)
	}
	for _, f := range files {
		if grown := len(f.Data) - pages.Len(); f.Name == PDF && grown > size/2+4000 {
			t.Errorf("the PDF grows by %d bytes for files of %d", grown, size)
		}
	}
}

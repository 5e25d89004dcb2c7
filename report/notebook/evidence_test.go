package notebook

import (
	"bytes"
	"image"
	"image/png"
	"slices"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/evidence"
)

// onePixel is a PNG of one pixel.
func onePixel(t *testing.T) string {
	t.Helper()
	var b bytes.Buffer
	if err := png.Encode(&b, image.NewGray(image.Rect(0, 0, 1, 1))); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// evaluateIn evaluates a notebook in a folder and counts what was read.
func evaluateIn(t *testing.T, f files, name, source string) (*Report, map[string]int) {
	t.Helper()
	nb, err := Parse(name, []byte(source))
	if err != nil {
		t.Fatal(err)
	}
	count := map[string]int{}
	r, err := Evaluate(nb, Options{Version: "shearbook test", ReadFile: func(name string) ([]byte, error) {
		count[name]++
		return f.read(name)
	}})
	if err != nil {
		t.Fatal(err)
	}
	return r, count
}

const everyKindOfFile = "---\ncode: [{file: own.yaml}, asce-7-16]\nprofiles:\n  A: {file: two.csv, profile: A}\n" +
	"  B: {file: ./two.csv, profile: B, units: \"m, m/s\"}\n  C: {file: k7.csv}\n---\n# Data\n\n```data\n```\n\n![pit](pit.png)\n\n```class\nof: C\n```\n"

func TestEvidenceIsEveryFileThatWasRead(t *testing.T) {
	f := withTables(t)
	f["pit.png"] = onePixel(t)
	r, count := evaluateIn(t, f, "folder/site.md", everyKindOfFile)
	var got []string
	for i, file := range r.Evidence.Files {
		got = append(got, file.Name+" "+string(file.Role))
		if e := r.Evidence.Manifest.Files[i]; e.Name != file.Name || e.Role != file.Role || e.SHA256 != evidence.Digest(file.Data) || e.Size != int64(len(file.Data)) {
			t.Errorf("the manifest has %+v for %s", e, file.Name)
		}
		if text, ok := f[file.Name]; ok && text != string(file.Data) {
			t.Errorf("%s is not as read", file.Name)
		}
	}
	want := []string{"site.md notebook", "own.yaml code table", "two.csv profile", "k7.csv profile", "pit.png image", "results.json results"}
	if !slices.Equal(got, want) {
		t.Errorf("files %q, want %q", got, want)
	}
	for name, n := range count {
		if n != 1 {
			t.Errorf("%s was read %d times", name, n)
		}
	}
	var results bytes.Buffer
	if err := report.WriteResults(&results, r.Results); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(results.Bytes(), r.Evidence.Files[5].Data) {
		t.Error("results.json is not that of the results")
	}
}

// The list of files stands in front of workings that read and decide more.
func TestAppendixPrintsTheDigestOfEveryFile(t *testing.T) {
	f := withTables(t)
	f["pit.png"] = onePixel(t)
	r, _ := evaluateIn(t, f, "site.md", everyKindOfFile)
	var rows [][]string
	for b := range r.Document.All() {
		table, ok := b.(*report.Table)
		if !ok || report.PlainText(table.Caption) != "Files" {
			continue
		}
		for _, row := range table.Rows {
			rows = append(rows, []string{report.PlainText(row.Cells[0]), report.PlainText(row.Cells[3])})
		}
	}
	if len(rows) != len(r.Evidence.Manifest.Files) {
		t.Fatalf("rows %q", rows)
	}
	for i, e := range r.Evidence.Manifest.Files {
		if !slices.Equal(rows[i], []string{e.Name, e.SHA256}) {
			t.Errorf("row %d is %q, want %s %s", i, rows[i], e.Name, e.SHA256)
		}
	}
}

func TestWithheldData(t *testing.T) {
	r := mustEvaluate(t, strings.Replace(front, "code:", "data: withheld\ncode:", 1)+"```data\n```\n")
	m := r.Evidence.Manifest
	if !m.Options.WithoutData || m.Files[0].Withheld || !m.Files[1].Withheld || m.Files[2].Withheld {
		t.Errorf("manifest %+v", m)
	}
	var text strings.Builder
	if err := report.Markdown(&text, r.Document, report.MarkdownOptions{}); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(text.String(), "profile files are withheld") || !strings.Contains(text.String(), m.Files[1].SHA256) {
		t.Errorf("the appendix does not say what is withheld:\n%s", text.String())
	}
	if strings.Contains(text.String(), "as read from") {
		t.Error("the appendix still prints the data as read")
	}
	if _, err := evaluate(t, strings.Replace(front, "code:", "data: secret\ncode:", 1)); err == nil || !strings.Contains(err.Error(), `data of the front matter is "secret"`) {
		t.Errorf("data: secret: %v", err)
	}
}

// The names of our own attachments are not an input's.
func TestNamesOfOurOwnFilesAreRefused(t *testing.T) {
	folder["results.json"], folder["manifest.json"] = folder["k7.csv"], folder["k7.csv"]
	for _, name := range []string{"results.json", "./manifest.json"} {
		_, err := evaluate(t, strings.Replace(front, "k7.csv", name, 1))
		if err == nil || !strings.Contains(err.Error(), "a file of its own") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestStandardNotebookIsAttached(t *testing.T) {
	nb, err := NewStandard("k7.csv", []byte(folder["k7.csv"]), Standard{Codes: []string{"asce-7-16"}})
	if err != nil {
		t.Fatal(err)
	}
	r, err := Evaluate(nb, Options{ReadFile: folder.read, Version: "shearbook test", Command: "shearbook report k7.csv --code asce-7-16"})
	if err != nil {
		t.Fatal(err)
	}
	first := r.Evidence.Files[0]
	if first.Name != "notebook.md" || first.Role != evidence.Notebook {
		t.Errorf("the notebook is attached as %+v", first)
	}
	if _, err := Parse(first.Name, first.Data); err != nil {
		t.Errorf("it cannot be read again: %v", err)
	}
}

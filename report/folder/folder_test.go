package folder

import (
	"os"
	"path/filepath"
	"sort"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/pdf"
)

func document() *report.Document {
	return &report.Document{Title: "T", Blocks: []report.Block{
		&report.Heading{Level: 1, Inline: []report.Inline{report.Text("T")}},
		&report.List{Items: []report.ListItem{{Blocks: []report.Block{
			&report.Figure{Name: "inside", Picture: &report.Picture{Width: 10, Height: 10}},
		}}}},
		&report.CautionBox{Blocks: []report.Block{&report.Paragraph{Inline: []report.Inline{report.Text(report.Caution)}}}},
	}}
}

func names(t *testing.T, dir string) string {
	t.Helper()
	var found []string
	if err := filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err == nil && !d.IsDir() {
			name, _ := filepath.Rel(dir, path)
			found = append(found, filepath.ToSlash(name))
		}
		return err
	}); err != nil {
		t.Fatal(err)
	}
	sort.Strings(found)
	return strings.Join(found, " ")
}

func TestFolderHoldsEveryOutput(t *testing.T) {
	files, err := Files(document(), nil, pdf.Options{})
	if err != nil {
		t.Fatal(err)
	}
	dir := filepath.Join(t.TempDir(), "new", "report")
	if err := Write(dir, files); err != nil {
		t.Fatal(err)
	}
	want := "figures/inside.svg report.html report.md report.pdf results.json"
	if got := names(t, dir); got != want {
		t.Errorf("wrote %s, want %s", got, want)
	}
	if got := names(t, filepath.Dir(dir)); strings.Count(got, "report.md") != 1 {
		t.Errorf("something was left beside the folder: %s", got)
	}
}

func TestFolderIsReplacedAsAWhole(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "report")
	if err := Write(dir, []File{{"report.md", []byte("old")}, {"figures/gone.svg", []byte("x")}}); err != nil {
		t.Fatal(err)
	}
	if err := Write(dir, []File{{"report.md", []byte("new")}}); err != nil {
		t.Fatal(err)
	}
	if got := names(t, dir); got != "report.md" {
		t.Errorf("the folder holds %s", got)
	}
	if data, _ := os.ReadFile(filepath.Join(dir, "report.md")); string(data) != "new" {
		t.Errorf("report.md holds %q", data)
	}
	if got := names(t, filepath.Dir(dir)); got != "report/report.md" {
		t.Errorf("beside it: %s", got)
	}
}

func TestForeignFolderIsLeftAlone(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "thesis.tex"), []byte("x"), 0o666); err != nil {
		t.Fatal(err)
	}
	err := Write(dir, []File{{"report.md", []byte("new")}})
	if err == nil || !strings.Contains(err.Error(), "thesis.tex") {
		t.Errorf("got %v", err)
	}
	if got := names(t, dir); got != "thesis.tex" {
		t.Errorf("the folder holds %s", got)
	}
}

// A run that fails half-way leaves what was there: here a figure's name is
// taken by a file of the same run, so its folder cannot be made.
func TestFailedRunLeavesWhatWasThere(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "report")
	if err := Write(dir, []File{{"report.md", []byte("old")}}); err != nil {
		t.Fatal(err)
	}
	if err := Write(dir, []File{{"report.md", []byte("new")}, {"report.md/figure.svg", []byte("x")}}); err == nil {
		t.Fatal("no error")
	}
	if data, _ := os.ReadFile(filepath.Join(dir, "report.md")); string(data) != "old" {
		t.Errorf("report.md holds %q, want what was there", data)
	}
	if got := names(t, filepath.Dir(dir)); got != "report/report.md" {
		t.Errorf("left behind: %s", got)
	}
}

func TestNameFor(t *testing.T) {
	for source, want := range map[string]string{"a/line.csv": "a/line-report", "note.book.md": "note.book-report"} {
		if got := filepath.ToSlash(NameFor(source)); got != want {
			t.Errorf("NameFor(%q) = %q, want %q", source, got, want)
		}
	}
}

package pdf

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// sample are attachments with everything that a name or a content can be.
func sampleFiles() []Attachment {
	return []Attachment{
		{Name: "notebook.md", MIME: "text/markdown", Description: "the notebook", Relation: Source, Data: []byte("# Site\n")},
		{Name: "manifest.json", MIME: "application/json", Data: []byte("{}\n")},
		{Name: "a (b) \\ c.csv", MIME: "text/csv", Data: bytes.Repeat([]byte("1.5,200\n"), 5000)},
		{Name: "Größe-地.csv", Data: []byte{0, 1, 2, 0xFF}},
		{Name: "empty.csv", Data: nil},
	}
}

func attached(t *testing.T, files []Attachment) (base, whole []byte) {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, demo(), Options{}); err != nil {
		t.Fatal(err)
	}
	whole, err := Attach(b.Bytes(), files)
	if err != nil {
		t.Fatal(err)
	}
	return b.Bytes(), whole
}

func TestAttachLeavesTheDocumentInFront(t *testing.T) {
	base, whole := attached(t, sampleFiles())
	if !bytes.HasPrefix(whole, base) {
		t.Error("the document's bytes have changed")
	}
	packed := 0
	for _, f := range sampleFiles() {
		packed += len(pack(f.Data))
	}
	if most := packed + 600*len(sampleFiles()) + 600; len(whole)-len(base) > most {
		t.Errorf("attachments of %d bytes, packed, add %d bytes, want at most %d", packed, len(whole)-len(base), most)
	}
	if _, again := attached(t, sampleFiles()); !bytes.Equal(whole, again) {
		t.Error("the same attachments give other bytes")
	}
	if none, _ := Attach(base, nil); !bytes.Equal(none, base) {
		t.Error("no attachments change the document")
	}
}

func TestAttachRefuses(t *testing.T) {
	base, whole := attached(t, sampleFiles())
	two := append(sampleFiles(), sampleFiles()[0])
	if _, err := Attach(base, two); err == nil {
		t.Error("two attachments of one name are taken")
	}
	for _, cut := range []int{0, 1, len(base) / 2, len(base) - 20} {
		if _, err := Attach(base[:cut], two[:1]); err == nil {
			t.Errorf("a document cut at %d is taken", cut)
		}
	}
	if _, err := Attach(whole, two[:1]); err == nil {
		t.Error("a second set of attachments is taken, which would hide the first")
	}
}

// tool runs a program of another maker over the file, and skips where it is
// not installed.
func tool(t *testing.T, name string, args ...string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		t.Skipf("%s is not installed", name)
	}
	out, err := exec.Command(path, args...).CombinedOutput()
	if err != nil {
		t.Fatalf("%s %s: %v\n%s", name, strings.Join(args, " "), err, out)
	}
	return string(out)
}

func written(t *testing.T, whole []byte) string {
	t.Helper()
	file := filepath.Join(t.TempDir(), "report.pdf")
	if err := os.WriteFile(file, whole, 0o666); err != nil {
		t.Fatal(err)
	}
	return file
}

func TestOtherProgramsTakeTheAttachmentsOut(t *testing.T) {
	_, whole := attached(t, sampleFiles())
	file := written(t, whole)
	dir := t.TempDir()
	tool(t, "pdfdetach", "-saveall", "-o", dir, file)
	for _, f := range sampleFiles() {
		if data, err := os.ReadFile(filepath.Join(dir, f.Name)); err != nil || !bytes.Equal(data, f.Data) {
			t.Errorf("%s: %d bytes, %v, want %d bytes", f.Name, len(data), err, len(f.Data))
		}
	}
}

func TestAttachmentsChangeNoPage(t *testing.T) {
	base, whole := attached(t, sampleFiles())
	before, after := written(t, base), written(t, whole)
	if a, b := tool(t, "pdftotext", "-layout", before, "-"), tool(t, "pdftotext", "-layout", after, "-"); a != b || a == "" {
		t.Error("the text of the pages has changed")
	}
}

func TestAttachedFileIsSound(t *testing.T) {
	_, whole := attached(t, sampleFiles())
	out := tool(t, "qpdf", "--check", written(t, whole))
	if strings.Contains(out, "WARNING") || !strings.Contains(out, "No syntax or stream encoding errors found") {
		t.Errorf("qpdf says:\n%s", out)
	}
}

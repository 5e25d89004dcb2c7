package evidence_test

import (
	"bytes"
	"errors"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/report/evidence"
)

func mustRead(t testing.TB, data []byte) *evidence.Evidence {
	t.Helper()
	e, err := evidence.Read(data)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func kinds(found []evidence.Mismatch) []evidence.Kind {
	var k []evidence.Kind
	for _, m := range found {
		k = append(k, m.Kind)
	}
	return k
}

func TestWhatIsAttachedComesBack(t *testing.T) {
	e := mustRead(t, sample(t))
	if d := cmp.Diff(sampleFiles(), e.Files); d != "" {
		t.Errorf("files (-attached +read):\n%s", d)
	}
	if found := e.Check(); found != nil {
		t.Errorf("mismatches in a sound report: %+v", found)
	}
	if e.Manifest.Command != "shearbook report quay.md" || e.Manifest.Options.Paper != "A4" {
		t.Errorf("manifest: %+v", e.Manifest)
	}
}

func TestTextOfThePages(t *testing.T) {
	e := mustRead(t, sample(t))
	if len(e.Pages) != 1 || e.Pages[0].Number != 1 {
		t.Fatalf("pages: %+v", e.Pages)
	}
	for _, want := range []string{
		"Quay\n",
		"Profile Q1 is site class D, with an average velocity of 245.1 m/s.\n",
		"quay.csv\t" + evidence.Digest([]byte(sampleProfile)) + "\n",
	} {
		if text := textOf(e); !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
}

// The words of the pages are those that poppler's pdftotext finds.
func TestTextIsThatOfAnotherReader(t *testing.T) {
	program, err := exec.LookPath("pdftotext")
	if err != nil {
		t.Skip("pdftotext is not installed")
	}
	file := filepath.Join(t.TempDir(), "report.pdf")
	if err := os.WriteFile(file, sample(t), 0o666); err != nil {
		t.Fatal(err)
	}
	out, err := exec.Command(program, "-layout", file, "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	want, got := strings.Fields(string(out)), strings.Fields(textOf(mustRead(t, sample(t))))
	slices.Sort(want)
	slices.Sort(got)
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("words (-pdftotext +ours):\n%s", d)
	}
}

func TestReadFileStaysInTheFolder(t *testing.T) {
	files := append(sampleFiles(), evidence.File{Name: "../outside.csv", Data: []byte("x")}, evidence.File{Name: "/etc/x", Data: []byte("x")},
		evidence.File{Name: "lines/a.csv", Data: []byte("a")})
	base := pages(t, files)
	e := mustRead(t, attach(t, base, files, manifest(base, files)))
	for name, want := range map[string]string{"quay.csv": sampleProfile, "./quay.csv": sampleProfile, "lines/../quay.csv": sampleProfile,
		`lines\a.csv`: "a", "../outside.csv": "", "/etc/x": "", "lines": "", "": ""} {
		data, err := e.ReadFile(name)
		if want == "" && !errors.Is(err, fs.ErrNotExist) || want != "" && string(data) != want {
			t.Errorf("ReadFile(%q) = %q, %v, want %q", name, data, err, want)
		}
	}
}

// Files in folders are attached under plain names of their own.
func TestFilesInFolders(t *testing.T) {
	files := append(sampleFiles(), evidence.File{Name: "a/b.csv", Role: evidence.Profile, Data: []byte("1")},
		evidence.File{Name: "a-b.csv", Role: evidence.Profile, Data: []byte("2")}, evidence.File{Name: "a-b-2.csv", Role: evidence.Profile, Data: []byte("3")})
	base := pages(t, files)
	m := manifest(base, files)
	if got := m.Files[3].AttachedAs(); got != "a-b-3.csv" {
		t.Errorf("a/b.csv is attached as %s", got)
	}
	e := mustRead(t, attach(t, base, files, m))
	if d := cmp.Diff(files, e.Files); d != "" {
		t.Errorf("files (-attached +read):\n%s", d)
	}
	if found := e.Check(); found != nil {
		t.Errorf("mismatches: %+v", found)
	}
}

// A long name leaves its digest no room on one line.
func TestDigestInTwoLines(t *testing.T) {
	files := append(sampleFiles(), evidence.File{Name: strings.Repeat("a long name of a survey line, ", 8) + ".csv", Role: evidence.Profile, Data: []byte("1")})
	base := pages(t, files)
	e := mustRead(t, attach(t, base, files, manifest(base, files)))
	if strings.Contains(textOf(e), evidence.Digest([]byte(sampleProfile))) {
		t.Fatal("the digests have room on one line")
	}
	if found := e.Check(); found != nil {
		t.Errorf("mismatches: %+v", found)
	}
	other := append(sampleFiles()[:1], evidence.File{Name: "quay.csv", Role: evidence.Profile, Data: []byte("2")}, files[2], files[3])
	found := mustRead(t, attach(t, base, other, manifest(base, other))).Check()
	if len(found) != 1 || found[0].Kind != evidence.Misprinted || found[0].Found != evidence.Digest([]byte(sampleProfile)) || found[0].Page != 1 {
		t.Errorf("mismatches: %+v", found)
	}
}

// A second attachment cannot take the place of one that the manifest lists
// under another name.
func TestAttachmentOfAListedName(t *testing.T) {
	files := []evidence.File{{Name: "a/b.csv", Role: evidence.Profile, Data: []byte("1")}}
	base := pages(t, files)
	m := manifest(base, files)
	list := []evidence.File{files[0], {Name: "zz", Data: []byte("9")}}
	whole := bytes.Replace(attach(t, base, list, m), []byte("(zz)"), []byte("(a/b.csv)"), -1)
	e, err := evidence.Read(repaired(whole))
	if err != nil {
		t.Fatal(err)
	}
	if data, err := e.ReadFile("a/b.csv"); err != nil || string(data) != "1" {
		t.Errorf("a/b.csv is %q, %v", data, err)
	}
	if found := kinds(e.Check()); !slices.Contains(found, evidence.Unlisted) {
		t.Errorf("mismatches %v", found)
	}
}

// repaired moves the offsets of the newest table to where its objects are.
func repaired(whole []byte) []byte {
	at := bytes.LastIndex(whole, []byte("\nxref\n")) + 1
	head, tail := whole[:at], string(whole[at:])
	var b strings.Builder
	n := 0
	for line := range strings.Lines(tail) {
		f := strings.Fields(line)
		switch {
		case len(f) == 2 && !strings.HasPrefix(line, "/"):
			n, _ = strconv.Atoi(f[0])
		case len(f) == 3 && f[2] == "n":
			line = pad(bytes.LastIndex(head, []byte("\n"+strconv.Itoa(n)+" 0 obj"))+1) + line[10:]
			n++
		}
		b.WriteString(line)
	}
	out := append(bytes.Clone(head), b.String()...)
	end := bytes.LastIndex(out, []byte("startxref\n"))
	return append(out[:end], "startxref\n"+strconv.Itoa(at)+"\n%%EOF\n"...)
}

// Every single byte of every attachment counts.
func TestEveryByteIsHeldAgainstTheManifest(t *testing.T) {
	e := mustRead(t, sample(t))
	for i := range e.Files {
		for at := range e.Files[i].Data {
			e.Files[i].Data[at] ^= 1
			found := e.Check()
			e.Files[i].Data[at] ^= 1
			if len(found) != 1 || found[0].Kind != evidence.Altered || found[0].Name != e.Files[i].Name {
				t.Fatalf("byte %d of %s changed: %+v", at, e.Files[i].Name, found)
			}
		}
	}
}

func TestMismatches(t *testing.T) {
	base := pages(t, sampleFiles())
	altered := sampleFiles()
	altered[1].Data = []byte("depth (m),vs (m/s)\n0,180\n12,820\n")
	withheld := manifest(base, sampleFiles())
	withheld.Files[1].Withheld = true
	twice := manifest(base, sampleFiles())
	twice.Files = append(twice.Files, twice.Files[1])
	foreign := append(sampleFiles(), evidence.File{Name: "more.csv", Data: []byte("1")})
	escape := append(sampleFiles(), evidence.File{Name: "../../x", Data: []byte("1")})
	hidden := append(sampleFiles(), evidence.File{Name: "quay\u202Evsc.md", Data: []byte("1")})
	other := manifest(base, sampleFiles())
	other.Pages.Size--
	for _, c := range []struct {
		name  string
		files []evidence.File
		m     evidence.Manifest
		want  []evidence.Kind
	}{
		{"altered", altered, manifest(base, sampleFiles()), []evidence.Kind{evidence.Altered}},
		{"altered with its manifest", altered, manifest(base, altered), []evidence.Kind{evidence.Misprinted}},
		{"missing", sampleFiles()[1:], manifest(base, sampleFiles()), []evidence.Kind{evidence.Missing}},
		{"withheld", []evidence.File{sampleFiles()[0], sampleFiles()[2]}, withheld, nil},
		{"withheld and attached", sampleFiles(), withheld, nil},
		{"listed twice", sampleFiles(), twice, []evidence.Kind{evidence.Doubled}},
		{"not listed", foreign, manifest(base, sampleFiles()), []evidence.Kind{evidence.Unlisted}},
		{"not printed", foreign, manifest(base, foreign), []evidence.Kind{evidence.NotPrinted}},
		{"a name that leads outside", escape, manifest(base, sampleFiles()), []evidence.Kind{evidence.BadName, evidence.Unlisted}},
		{"a listed name that leads outside", escape, manifest(base, escape), []evidence.Kind{evidence.BadName, evidence.NotPrinted}},
		{"a name that hides", hidden, manifest(base, sampleFiles()), []evidence.Kind{evidence.BadName, evidence.Unlisted}},
		{"other pages", sampleFiles(), other, []evidence.Kind{evidence.PagesAltered}},
	} {
		found := mustRead(t, attach(t, base, c.files, c.m)).Check()
		if !slices.Equal(kinds(found), c.want) {
			t.Errorf("%s: %+v, want kinds %v", c.name, found, c.want)
		}
		for _, m := range found {
			if strings.ContainsRune(m.Text, '\u202E') || m.Text == "" {
				t.Errorf("%s: text %q", c.name, m.Text)
			}
		}
	}
}

// An update behind the attachments that puts other words on the page, as
// programs that edit PDFs write it.
func TestChangedPageIsFound(t *testing.T) {
	whole := sample(t)
	content := bytes.Index(whole, []byte("\n4 0 obj"))
	if content < 0 {
		t.Fatal("the page's content is not object 4")
	}
	var b bytes.Buffer
	b.Write(whole)
	at := b.Len()
	b.WriteString("4 0 obj\n<</Length 0>>\nstream\n\nendstream\nendobj\n")
	previous := string(whole[bytes.LastIndex(whole, []byte("startxref\n"))+10 : len(whole)-len("\n%%EOF\n")])
	xref := b.Len()
	trailer := string(whole[bytes.LastIndex(whole, []byte("/Size")):bytes.LastIndex(whole, []byte("/Prev"))])
	b.WriteString("xref\n4 1\n" + pad(at) + " 00000 n \ntrailer\n<<" + trailer + "/Prev " + previous + ">>\nstartxref\n" + pad(xref) + "\n%%EOF\n")
	e := mustRead(t, b.Bytes())
	if textOf(e) != "" {
		t.Fatalf("the update is not in force:\n%s", textOf(e))
	}
	if found := kinds(e.Check()); !slices.Contains(found, evidence.PagesAltered) {
		t.Errorf("the changed page is not found: %v", found)
	}
}

func pad(n int) string {
	s := "000000000" + string(rune('0'+n%10))
	for i := 8; n >= 10; i-- {
		n /= 10
		s = s[:i] + string(rune('0'+n%10)) + s[i+1:]
	}
	return s
}

// What qpdf makes of a report is still read, and said to be saved again.
func TestSavedAgain(t *testing.T) {
	program, err := exec.LookPath("qpdf")
	if err != nil {
		t.Skip("qpdf is not installed")
	}
	dir := t.TempDir()
	in, out := filepath.Join(dir, "in.pdf"), filepath.Join(dir, "out.pdf")
	if err := os.WriteFile(in, sample(t), 0o666); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args string
		want string // of the error
	}{
		{"--object-streams=generate", ""},
		{"--object-streams=disable", ""},
		{"--qdf", ""},
		{"--linearize", ""},
		{"--stream-data=uncompress", ""},
		{"--encrypt secret secret 256 --", "encrypted"},
		{"--remove-attachment=manifest.json", "carries no manifest.json"},
	} {
		if text, err := exec.Command(program, append(strings.Fields(c.args), in, out)...).CombinedOutput(); err != nil {
			t.Fatalf("qpdf %s: %v\n%s", c.args, err, text)
		}
		data, err := os.ReadFile(out)
		if err != nil {
			t.Fatal(err)
		}
		e, err := evidence.Read(data)
		if c.want != "" {
			if err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("%s: %v, want %q", c.args, err, c.want)
			}
			continue
		}
		if err != nil {
			t.Errorf("%s: %v", c.args, err)
			continue
		}
		if d := cmp.Diff(sampleFiles(), e.Files); d != "" {
			t.Errorf("%s: files (-attached +read):\n%s", c.args, d)
		}
		if d := cmp.Diff(textOf(mustRead(t, sample(t))), textOf(e)); d != "" {
			t.Errorf("%s: text (-before +after):\n%s", c.args, d)
		}
		if found := kinds(e.Check()); !slices.Equal(found, []evidence.Kind{evidence.PagesAltered}) {
			t.Errorf("%s: mismatches %v", c.args, found)
		}
	}
}

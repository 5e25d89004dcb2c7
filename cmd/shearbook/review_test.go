//go:build unix

package main

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"unicode"

	"shearbook/templates"
)

// ran is what a run of the whole program did.
type ran struct {
	out, err string
	status   int
	memory   int64   // bytes, the most that was resident; 0 where unknown
	seconds  float64 // of processor time
}

// runReview runs `shearbook review` as a process of its own.
func runReview(t *testing.T, dir string, args ...string) ran {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	program := filepath.Join(t.TempDir(), "shearbook") // TestMain runs the program under this name
	if err := os.Symlink(self, program); err != nil {
		t.Fatal(err)
	}
	c := exec.Command(program, append([]string{"review"}, args...)...)
	c.Dir = dir
	var out, errs bytes.Buffer
	c.Stdout, c.Stderr = &out, &errs
	_ = c.Run() // the status says it
	usage := c.ProcessState.SysUsage().(*syscall.Rusage)
	unit := int64(1024) // Linux counts in KiB
	memory := int64(usage.Maxrss) * unit
	// A process begins with the most that its parent held: where that is more,
	// nothing can be said of its own.
	var own syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &own); err == nil && memory <= int64(own.Maxrss)*unit {
		memory = 0
	}
	return ran{out.String(), errs.String(), c.ProcessState.ExitCode(), memory,
		(c.ProcessState.UserTime() + c.ProcessState.SystemTime()).Seconds()}
}

// The bars of a hostile submission.
const (
	memoryBar = 512 << 20 // bytes
	timeBar   = 10.0      // s of processor time
)

// hostile is a submission of a stranger.
type hostile struct {
	name  string
	files map[string]string
	make  func(t *testing.T, dir string) // what files cannot say
	args  []string
	says  string // that the program must say, on either stream
}

const (
	tiny   = "top (m),bottom (m),vs (m/s)\n0,10,200\n10,40,400\n"
	secret = "top (m),bottom (m),vs (m/s)\n0,40,613.7\n"
)

// book is a notebook over one profile file.
func book(file string) string {
	return "---\ncode: ec8-2004\nprofiles:\n  L1: {file: " + file + "}\n---\n# Site\n"
}

func hostiles() []hostile {
	claimFlags := []string{"--claimed-class", "C", "--claimed-code", "ec8-2004"}
	onFile := func(name string) []string { return append([]string{"site/" + name}, claimFlags...) }
	rtl := "\u202e"
	return []hostile{
		{name: "path up", files: map[string]string{"site/n.md": book("../secret.csv")}, args: []string{"site"}, says: "leads out of the submission"},
		{name: "absolute path", files: map[string]string{"site/n.md": book("/etc/hostname")}, args: []string{"site"}, says: "cannot be read"},
		{name: "backslashes", files: map[string]string{"site/n.md": book(`'..\secret.csv'`)}, args: []string{"site"}, says: "leads out of the submission"},
		{name: "claims up", files: map[string]string{"site/claims.csv": "file,code,class\n../secret.csv,ec8-2004,C\n"}, args: []string{"site/claims.csv"}, says: "leads out of the submission"},
		{name: "link out", files: map[string]string{"site/n.md": book("link.csv")}, make: link("../secret.csv", "site/link.csv"), args: []string{"site"}, says: "cannot be read"},
		{name: "report is a link out", files: map[string]string{"site/n.md": book("own.csv"), "site/own.csv": tiny}, make: link("../out", "site/n-report"), args: []string{"site"}, says: "cannot be checked"},
		{name: "link loop", files: map[string]string{"site/n.md": book("loop.csv")}, make: link("loop.csv", "site/loop.csv"), args: []string{"site"}, says: "cannot be read"},
		{name: "pipe", files: map[string]string{"site/n.md": book("pipe.csv")}, args: []string{"site"}, says: "no ordinary file", make: func(t *testing.T, dir string) {
			if err := syscall.Mkfifo(filepath.Join(dir, "site", "pipe.csv"), 0o600); err != nil {
				t.Fatal(err)
			}
		}},
		{name: "zip bomb", make: bomb("site/bomb.xlsx"), args: onFile("bomb.xlsx"), says: "cannot be checked"},
		{name: "deep YAML", files: map[string]string{"site/n.md": "---\nprofiles: " + strings.Repeat("[", 60_000) + "\n---\n"}, args: []string{"site/n.md"}, says: "not readable YAML"},
		{name: "YAML that multiplies", files: map[string]string{"site/n.md": laughs()}, args: []string{"site/n.md"}, says: "n.md:"},
		{name: "deep Markdown", files: map[string]string{"site/n.md": book("own.csv") + strings.Repeat(">", 1<<20) + strings.Repeat("- ", 1<<20), "site/own.csv": tiny}, args: []string{"site"}, says: "cannot be checked"},
		{name: "a text of numbers", files: map[string]string{"site/n.md": book("own.csv"), "site/own.csv": tiny}, make: numbers, args: []string{"site"}, says: "differs"},
		{name: "many profiles and claims", make: profilesAndClaims, args: []string{"site/claims.csv"}, says: "more findings"},
		{name: "expressions", files: map[string]string{"site/n.md": book("own.csv") + strings.Repeat("{{ 9**9**9**9 }}\n\n```calc\nx = "+strings.Repeat("(", 1000)+"\n```\n", 100), "site/own.csv": tiny,
			"site/results.json": `{"results": [{"profile": "L1", "code": "ec8-2004", "class": "C"}]}`}, args: []string{"site"}, says: "found class C, 300 m/s"},
		{name: "deep JSON", files: map[string]string{"site/n.md": book("own.csv"), "site/own.csv": tiny, "site/results.json": `{"results": ` + strings.Repeat("[", 1<<20)}, args: []string{"site"}, says: "no results.json"},
		{name: "many results", files: map[string]string{"site/n.md": book("own.csv"), "site/own.csv": tiny, "site/results.json": `{"results": [` + strings.Repeat("{},", 5_000_000) + "{}]}"}, args: []string{"site"}, says: "more than 10000 results"},
		{name: "a million rows", make: million("site/rows.csv"), args: onFile("rows.csv"), says: "layers"},
		{name: "a million claims", make: millionClaims("site/claims.csv"), args: []string{"site/claims.csv"}, says: "more than 20000 claims"},
		{name: "a wide claim", files: map[string]string{"site/claims.csv": "file,code,class" + strings.Repeat(",x", 1<<20) + "\nown.csv,ec8-2004,C" + strings.Repeat(",1", 1<<20) + "\n", "site/own.csv": tiny}, args: []string{"site/claims.csv"}, says: "agrees"},
		{name: "a long cell", files: map[string]string{"site/claims.csv": "file,code,class\nown.csv,ec8-2004," + strings.Repeat("C", 4<<20) + "\n", "site/own.csv": tiny}, args: []string{"site/claims.csv"}, says: "longer than"},
		{name: "characters that act", files: map[string]string{
			"site/claims.csv": "file,profile,code,class\nown.csv,\"<script>alert(1)</script>" + rtl + "\x1b[2J\x07\",ec8-2004,\"<b>" + rtl + "A\"\n",
			"site/own.csv":    "profile,top (m),bottom (m),vs (m/s)\n<script>alert(1)</script>" + rtl + ",0,40,300\n",
		}, args: []string{"site/claims.csv"}, says: `holds no profile "<script>alert(1)</script>\u202e\x1b[2J\a"`},
		{name: "characters in names and soils", files: map[string]string{
			"site/own.csv": "# location: <img src=x onerror=alert(1)>" + rtl + "\nprofile,top (m),bottom (m),vs (m/s),soil\n<script>" + rtl + "漢字,0,10,320,soft clay <script>alert(1)</script>" + rtl + "\n<script>" + rtl + "漢字,10,40,400,\n",
		}, args: []string{"site/own.csv", "--claimed-class", "B", "--claimed-code", "ec8-2004"}, says: "agrees"},
		{name: "no PDF", files: map[string]string{"site/report.pdf": "%PDF-1.7\n" + strings.Repeat("\x00", 8<<20)}, args: []string{"site/report.pdf"}, says: "cannot be taken apart"},
		{name: "PDF of numbers", files: map[string]string{"site/report.pdf": "%PDF-1.7\n" + strings.Repeat("1 0 obj\n<</A 1 0 R>>\nendobj\n", 200_000)}, args: []string{"site/report.pdf"}, says: "cannot be taken apart"},
		{name: "rules that are deep", files: map[string]string{"site/own.csv": tiny, "site/rules.yaml": "rules: " + strings.Repeat("{a: ", 5000)}, args: append(onFile("own.csv"), "--rules", "site/rules.yaml"), says: "rules.yaml"},
		{name: "blank file", files: map[string]string{"site/own.csv": ""}, args: onFile("own.csv"), says: "own.csv"},
		{name: "empty folder", files: map[string]string{"site/x.txt": "x"}, args: []string{"site"}, says: "holds no notebook"},
	}
}

// TestHostileSubmissions: whatever is handed in, the program ends within its
// bars, says what is wrong, reads nothing outside, writes nothing outside its
// own folder, and lets nothing act on the terminal or in the memo.
func TestHostileSubmissions(t *testing.T) {
	for _, h := range hostiles() {
		t.Run(h.name, func(t *testing.T) {
			dir := t.TempDir()
			mustWrite(t, dir, "secret.csv", secret)
			mustWrite(t, dir, "out/results.json", `{"results": []}`)
			mustWrite(t, dir, "site/.keep", "")
			for name, text := range h.files {
				mustWrite(t, dir, name, text)
			}
			if h.make != nil {
				h.make(t, dir)
			}
			before := listing(t, dir)
			r := runReview(t, dir, append(h.args, "--out", "memo")...)
			said := r.out + r.err
			if !strings.Contains(strings.Join(strings.Fields(said), " "), h.says) {
				t.Errorf("it does not say %q:\n%.2000s", h.says, said)
			}
			if h.says != "agrees" && r.status == 0 || r.status < 0 || strings.Contains(said, "panic") || strings.Contains(said, "goroutine") {
				t.Errorf("status %d: %.2000s", r.status, said)
			}
			t.Logf("%d MiB, %.1f s", r.memory>>20, r.seconds)
			if r.memory > memoryBar || r.seconds > timeBar {
				t.Errorf("%d MiB, %.1f s", r.memory>>20, r.seconds)
			}
			if strings.Contains(said, "613.7") {
				t.Error("it read the secret")
			}
			harmless(t, "the terminal", said)
			after := listing(t, dir)
			if got := strings.Join(outside(after), "\n"); got != strings.Join(before, "\n") {
				t.Errorf("it wrote beside its folder:\n%s\nbefore:\n%s", got, strings.Join(before, "\n"))
			}
			inspectMemo(t, dir)
		})
	}
}

// harmless fails where a text holds what acts without being seen.
func harmless(t *testing.T, what, text string) {
	t.Helper()
	for _, c := range text {
		if c != '\n' && c != '\t' && (unicode.IsControl(c) || unicode.Is(unicode.Bidi_Control, c)) {
			t.Errorf("%s holds %U", what, c)
			return
		}
	}
}

// inspectMemo looks through a memo, where one was written.
func inspectMemo(t *testing.T, dir string) {
	t.Helper()
	for _, name := range []string{"memo.md", "memo.html", "memo.json"} {
		data, err := os.ReadFile(filepath.Join(dir, "memo", name))
		if os.IsNotExist(err) {
			return
		}
		if name != "memo.json" { // JSON keeps what was claimed as it was
			harmless(t, name, string(data))
		}
		if name == "memo.html" && (bytes.Contains(data, []byte("<script")) || bytes.Contains(data, []byte("<img"))) {
			t.Error("a tag of the submission is in memo.html")
		}
	}
}

func mustWrite(t *testing.T, dir, name, text string) {
	t.Helper()
	path := filepath.Join(dir, filepath.FromSlash(name))
	if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

// listing is every file below a folder, with its size.
func listing(t *testing.T, dir string) []string {
	t.Helper()
	var names []string
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		info, err := d.Info()
		if err == nil {
			names = append(names, fmt.Sprint(strings.TrimPrefix(path, dir), " ", info.Size()))
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return names
}

// outside is a listing without the memo's own folder.
func outside(names []string) []string {
	var out []string
	for _, n := range names {
		if !strings.HasPrefix(n, "/memo/") {
			out = append(out, n)
		}
	}
	return out
}

func link(to, from string) func(*testing.T, string) {
	return func(t *testing.T, dir string) {
		if err := os.Symlink(to, filepath.Join(dir, from)); err != nil {
			t.Fatal(err)
		}
	}
}

// bomb writes a workbook whose sheet unpacks to 600 MB.
func bomb(name string) func(*testing.T, string) {
	return func(t *testing.T, dir string) {
		f, err := os.Create(filepath.Join(dir, name))
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		z := zip.NewWriter(f)
		for part, text := range map[string]string{
			"[Content_Types].xml": `<Types/>`,
			"xl/workbook.xml":     `<workbook xmlns:r="r"><sheets><sheet name="S" r:id="a"/></sheets></workbook>`,
			"xl/_rels/workbook.xml.rels": `<Relationships><Relationship Id="a" Type="worksheet" Target="worksheets/sheet1.xml"/>` +
				`</Relationships>`,
		} {
			w, err := z.Create(part)
			if err != nil {
				t.Fatal(err)
			}
			fmt.Fprint(w, text)
		}
		w, err := z.Create("xl/worksheets/sheet1.xml")
		if err != nil {
			t.Fatal(err)
		}
		blank := bytes.Repeat([]byte("<row/>"), 1<<18)
		fmt.Fprint(w, "<worksheet><sheetData>")
		for range 400 {
			if _, err := w.Write(blank); err != nil {
				t.Fatal(err)
			}
		}
		if err := z.Close(); err != nil {
			t.Fatal(err)
		}
	}
}

// million writes a profile of 10⁶ layers.
func million(name string) func(*testing.T, string) {
	return func(t *testing.T, dir string) {
		mustWrite(t, dir, name, "thickness (m),vs (m/s)\n"+strings.Repeat("0.001,250\n", 1_000_000))
	}
}

func millionClaims(name string) func(*testing.T, string) {
	return func(t *testing.T, dir string) {
		mustWrite(t, dir, "site/own.csv", tiny)
		mustWrite(t, dir, name, "file,code,class\n"+strings.Repeat("own.csv,ec8-2004,D\n", 800_000))
	}
}

// numbers writes 10,000 results and a text of half a million averages.
func numbers(t *testing.T, dir string) {
	var results, text strings.Builder
	results.WriteString(`{"results": [`)
	for i := range 10_000 {
		if i > 0 {
			results.WriteByte(',')
		}
		fmt.Fprintf(&results, `{"profile": "L1", "code": "ec8-2004", "class": "C%d", "velocity_mps": %d.5}`, i, 200+i)
	}
	results.WriteString("]}")
	for i := range 250_000 {
		fmt.Fprintf(&text, "Average velocity %d.25 m/s\n", i)
	}
	mustWrite(t, dir, "site/n-report/results.json", results.String())
	mustWrite(t, dir, "site/n-report/report.md", text.String())
}

// profilesAndClaims writes a file of 90,000 profiles and a claim on every
// fifth of them.
func profilesAndClaims(t *testing.T, dir string) {
	var profiles, claims strings.Builder
	profiles.WriteString("profile,top (m),bottom (m),vs (m/s)\n")
	claims.WriteString("file,profile,code,class\n")
	for i := range 90_000 {
		fmt.Fprintf(&profiles, "P%d,0,10,%d\nP%d,10,40,%d\n", i, 150+i%200, i, 300+i%300)
		if i%5 == 0 {
			fmt.Fprintf(&claims, "all.csv,P%d,ec8-2004,D\n", i)
		}
	}
	mustWrite(t, dir, "site/all.csv", profiles.String())
	mustWrite(t, dir, "site/claims.csv", claims.String())
}

// laughs is front matter whose references multiply to 10⁹ words.
func laughs() string {
	text := "---\na: &a [x, x, x, x, x, x, x, x, x, x]\n"
	for c := 'b'; c <= 'i'; c++ {
		text += fmt.Sprintf("%c: &%c [%s]\n", c, c, strings.Repeat(fmt.Sprintf("*%c, ", c-1), 10))
	}
	return text + "profiles: *i\n---\n"
}

// TestStarterReviewed: the program's own demo agrees, in each form that it is
// handed in.
func TestStarterReviewed(t *testing.T) {
	dir := t.TempDir()
	mustWrite(t, dir, "site/notebook.md", templates.StarterNotebook)
	mustWrite(t, dir, "site/line-1.csv", templates.StarterProfile)
	var out, errs bytes.Buffer
	if status := run([]string{"report", filepath.Join(dir, "site", "notebook.md")}, streams{out: &out, err: &errs}); status != done {
		t.Fatalf("%d: %s", status, errs.String())
	}
	for _, what := range []string{"site", "site/notebook.md", "site/notebook-report", "site/notebook-report/report.pdf"} {
		if r := runReview(t, dir, what); r.status != done || !strings.Contains(r.out, ": agrees\n") {
			t.Errorf("%s: %d\n%s%s", what, r.status, r.out, r.err)
		}
	}
}

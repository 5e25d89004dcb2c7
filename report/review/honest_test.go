package review_test

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"shearbook/report/review"
	"shearbook/templates"
)

// measured is a file of one profile, whole enough to leave no doubt.
func measured(layers string) string {
	return "# method: downhole\n# basis: measured\n# date: 2026-03-02\n# operator: Example Survey Crew\n# depth reached: 45 m\ntop (m),bottom (m),vs (m/s)\n" + layers
}

// fourProfiles is a notebook over four profiles, whose summary is a table.
func fourProfiles(code, body string) ([]byte, map[string][]byte) {
	files := map[string][]byte{}
	front := "---\ncode: " + code + "\nprofiles:\n"
	for i, v := range []int{150, 180, 260, 320} {
		name := fmt.Sprintf("l%d.csv", i+1)
		files[name] = []byte(measured(fmt.Sprintf("0,%d,%d\n%d,45,410\n", i+4, v, i+4)))
		front += fmt.Sprintf("  L%d: {file: %s}\n", i+1, name)
	}
	return []byte(front + "---\n# Site\n\n```summary\n```\n\n```class\n```\n\n" + body + "\n"), files
}

// TestSummaryTableIsRead: four results stand in a table with the unit in its
// heading, and none is said to be printed nowhere; under NBCC 2020 the
// classes end in digits, on which the footnotes of a page hang.
func TestSummaryTableIsRead(t *testing.T) {
	for _, code := range []string{"asce-7-16", "nbcc-2020"} {
		source, files := fourProfiles(code, "")
		dir := written(t, source, files, true)
		for _, what := range []string{"", "notebook-report/report.pdf"} {
			agrees(t, code+" "+what, opened(t, filepath.Join(dir, filepath.FromSlash(what)), review.Desk{}))
		}
	}
}

// TestProseIsNoAnswer: what an author says of other ground, or of other
// depths, is told as a note at most.
func TestProseIsNoAnswer(t *testing.T) {
	source, files := fourProfiles("asce-7-16", "The upper 10 m have an average velocity of 158 m/s.\n\nOther ground nearby is site class E.")
	r := opened(t, written(t, source, files, true), review.Desk{})
	agrees(t, "prose", r)
	if f := finding(t, r, "text-mention"); f.Weight != review.Note {
		t.Errorf("%s: %s", f.Weight, f.Text)
	}
}

// TestSavedAgainAgrees: a PDF that qpdf saved again, with every attachment,
// digest and text as it was, is to be explained alone.
func TestSavedAgainAgrees(t *testing.T) {
	program, err := exec.LookPath("qpdf")
	if err != nil {
		t.Skip("qpdf is not installed")
	}
	in := filepath.Join(demo(t), "notebook-report", "report.pdf")
	out := filepath.Join(t.TempDir(), "report.pdf")
	if text, err := exec.Command(program, "--linearize", in, out).CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, text)
	}
	r := opened(t, out, review.Desk{})
	agrees(t, "linearized", r)
	if f := finding(t, r, "evidence-loose"); f.Weight != review.Explain || !strings.Contains(f.Text, "saved again") {
		t.Errorf("%+v", f)
	}
}

// TestAddedToAgrees: an update behind the end that changes an object of the
// pages, as a signature does, is to be explained alone.
func TestAddedToAgrees(t *testing.T) {
	whole, err := os.ReadFile(filepath.Join(demo(t), "notebook-report", "report.pdf"))
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	put(t, dir, "report.pdf", updated(t, whole))
	r := opened(t, filepath.Join(dir, "report.pdf"), review.Desk{})
	agrees(t, "signed", r)
	if f := finding(t, r, "evidence-loose"); f.Weight != review.Explain {
		t.Errorf("%+v", f)
	}
}

// updated is a PDF with its document information replaced by an incremental
// update (ISO 32000-1, 7.5.6).
func updated(t *testing.T, whole []byte) []byte {
	t.Helper()
	last := whole[bytes.LastIndex(whole, []byte("trailer")):]
	field := func(key string) string {
		at := bytes.Index(last, []byte(key))
		if at < 0 {
			t.Fatalf("no %s in %s", key, last)
		}
		rest := string(last[at+len(key):])
		return strings.Join(strings.Fields(strings.FieldsFunc(rest, func(r rune) bool { return r == '/' || r == '>' || r == 's' })[0]), " ")
	}
	info := field("/Info")
	var number int
	if _, err := fmt.Sscan(info, &number); err != nil {
		t.Fatal(err)
	}
	previous := strings.Fields(string(whole[bytes.LastIndex(whole, []byte("startxref"))+9:]))[0]
	var b bytes.Buffer
	b.Write(whole)
	at := b.Len()
	fmt.Fprintf(&b, "%d 0 obj\n<</Title (Signed)>>\nendobj\n", number)
	xref := b.Len()
	fmt.Fprintf(&b, "xref\n%d 1\n%010d 00000 n \ntrailer\n<</Size %s/Root %s/Info %s/Prev %s>>\nstartxref\n%d\n%%%%EOF\n", number, at, field("/Size"), field("/Root"), info, previous, xref)
	return b.Bytes()
}

// TestClaimsAsPeopleSpell: the same claim in other words agrees. 272.06 m/s
// are 892.6 ft/s.
func TestClaimsAsPeopleSpell(t *testing.T) {
	dir := t.TempDir()
	put(t, dir, "site.csv", []byte(threeLayers))
	put(t, dir, "fast.csv", []byte(measured("0,45,365.76\n"))) // 1,200 ft/s
	put(t, dir, "claims.csv", []byte("file,code,class,average\n"+
		"site.csv,asce-7-16,D (stiff soil),272 m/s\n"+
		"site.csv,ASCE 7-16,Site Class D,272.1 m/s\n"+
		"site.csv,asce 7-16,D - stiff soil,2.721e2 m/s\n"+
		"site.csv,ASCE/SEI 7-16,Soil type D,893 ft/s\n"+
		"site.csv,Asce-7-16,site class d (stiff soil),272 m/s\n"+
		"fast.csv,asce-7-16,,\"1,200 ft/s\"\n"))
	r := opened(t, filepath.Join(dir, "claims.csv"), review.Desk{Code: code("asce-7-16")})
	agrees(t, "claims", r)
	if len(r.Cases) != 6 {
		t.Errorf("%d claims", len(r.Cases))
	}
	put(t, dir, "claims.csv", []byte("file,code,class\nsite.csv,asce-7-17,D\nsite.csv,asce-7-16,C (stiff soil)\n"))
	for i, f := range opened(t, filepath.Join(dir, "claims.csv"), review.Desk{}).Findings[:2] {
		if want := []string{"the nearest is asce-7-10", "another class"}[i]; !strings.Contains(f.Text, want) {
			t.Errorf("%s", f.Text)
		}
	}
}

// TestOneFileNamedTwice: a profile that is named twice is not copied.
func TestOneFileNamedTwice(t *testing.T) {
	source := "---\ncode: asce-7-16\nprofiles: {A: line.csv, B: line.csv}\n---\n# Site\n\n```summary\n```\n"
	r := opened(t, written(t, []byte(source), map[string][]byte{"line.csv": []byte(threeLayers)}, false), review.Desk{})
	agrees(t, "named twice", r)
	if f := finding(t, r, "copied"); f.Weight != review.Note || !strings.Contains(f.Text, "the same data") {
		t.Errorf("%+v", f)
	}
}

// TestRefractionOfPWaves: the S velocity falls below the water table and the
// P velocity, which was refracted, does not.
func TestRefractionOfPWaves(t *testing.T) {
	const table = "# method: P-wave refraction\ntop (m),bottom (m),vs (m/s),vp (m/s)\n0,5,300,600\n5,20,250,1500\n20,50,450,2200\n"
	for _, f := range review.Examine(submission(table, claim("ec8-2004", "C", "")), review.Desk{}).Findings {
		if f.Rule == "refraction-reversal" {
			t.Errorf("%s", f.Text)
		}
	}
	s := submission(strings.Replace(table, "P-wave", "SH", 1), claim("ec8-2004", "C", ""))
	finding(t, review.Examine(s, review.Desk{}), "refraction-reversal")
}

// TestHTMLIsCompared: the demo's page of HTML is compared too.
func TestHTMLIsCompared(t *testing.T) {
	dir := written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": []byte(templates.StarterProfile)}, true)
	path := filepath.Join(dir, "notebook-report", "report.html")
	page, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	agrees(t, "as it was", opened(t, dir, review.Desk{}))
	for _, p := range []struct{ old, new string }{
		{"<strong>D</strong></td>", "<strong>B</strong></td>"},
		{"246.9 m/s", "346.9 m/s"},
	} {
		if !bytes.Contains(page, []byte(p.old)) {
			t.Fatalf("report.html does not hold %s", p.old)
		}
		put(t, dir, "notebook-report/report.html", bytes.ReplaceAll(page, []byte(p.old), []byte(p.new)))
		if f := finding(t, opened(t, dir, review.Desk{}), "text"); f.Place.File != "notebook-report/report.html" {
			t.Errorf("%+v", f)
		}
	}
}

// TestBoxByBlowCounts: the box of a summary by N has no average velocity, and
// its class is read all the same.
func TestBoxByBlowCounts(t *testing.T) {
	const table = "top (m),bottom (m),N,soil\n0,4,6,Sand\n4,12,15,Sand\n12,40,25,Sand\n"
	source := "---\ncode: ec8-2004\nprofiles: {L1: {file: n.csv, depth reached: 20 m}}\n---\n# Site\n\n```summary\n```\n"
	agrees(t, "by N", opened(t, written(t, []byte(source), map[string][]byte{"n.csv": []byte(table)}, true), review.Desk{}))
}

// TestTwoNotebooks: a folder with two notebooks cannot be checked, and the
// review says which to name.
func TestTwoNotebooks(t *testing.T) {
	dir := t.TempDir()
	for _, name := range []string{"a.md", "b.md"} {
		put(t, dir, name, []byte("---\ncode: ec8-2004\nprofiles: {L1: own.csv}\n---\n"))
	}
	r := opened(t, dir, review.Desk{})
	if f := finding(t, r, "unchecked"); r.Outcome != review.CannotBeChecked || !strings.Contains(f.Text, "a.md or b.md") {
		t.Errorf("%s: %+v", r.Outcome, f)
	}
}

// TestReportFolderOfAnyName: a report's folder that was renamed is found.
func TestReportFolderOfAnyName(t *testing.T) {
	dir := demo(t)
	if err := os.Rename(filepath.Join(dir, "notebook-report"), filepath.Join(dir, "for the department")); err != nil {
		t.Fatal(err)
	}
	agrees(t, "renamed", opened(t, dir, review.Desk{}))
}

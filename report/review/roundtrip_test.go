package review_test

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/report/evidence"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/report/review"
	"shearbook/templates"
	"shearbook/vs30/siteclass"
)

// decidable are the codes that can classify every profile of a file.
func decidable(profiles []profile.Profile, facts report.Facts) []string {
	var ids []string
	for _, c := range siteclass.All() {
		all := true
		for i := range profiles {
			_, err := report.Classify(&profiles[i], c, facts)
			all = all && err == nil
		}
		if all {
			ids = append(ids, c.ID)
		}
	}
	return ids
}

// site writes a site folder for a file: a notebook, the file, and the report
// that the notebook gives; with a PDF if wanted. It returns the folder.
func site(t *testing.T, file string, data []byte, system notebook.System, withPDF bool) string {
	t.Helper()
	profiles, err := open.Bytes(file, data, open.Options{})
	if err != nil {
		t.Fatal(err)
	}
	facts := report.Facts{Extend: "constant-velocity"}
	nb, err := notebook.NewStandard(file, data, notebook.Standard{Codes: decidable(profiles, facts), Date: "2026-10-01"})
	if err != nil {
		t.Fatal(err)
	}
	source := strings.Replace(string(nb.Source), "---\n", "---\nextend: constant-velocity\nunits: "+system.String()+"\n", 1)
	for _, slow := range []string{"```figure\n```\n", "```spread\n```\n", "```statistics\nfigure: yes\n```\n", "```site\nheading: The profiles together\n```\n"} {
		source = strings.Replace(source, slow, "", 1) // no review looks at them
	}
	return written(t, []byte(source), map[string][]byte{file: data}, withPDF)
}

// written evaluates a notebook over files and writes both and the report.
func written(t *testing.T, source []byte, files map[string][]byte, withPDF bool) string {
	t.Helper()
	dir := t.TempDir()
	nb, err := notebook.Parse("notebook.md", source)
	if err != nil {
		t.Fatal(err)
	}
	made, err := notebook.Evaluate(nb, notebook.Options{Version: "shearbook test",
		ReadFile: func(name string) ([]byte, error) {
			if data, ok := files[name]; ok {
				return data, nil
			}
			return nil, os.ErrNotExist
		}})
	if err != nil {
		t.Fatal(err)
	}
	put(t, dir, "notebook.md", source)
	for name, data := range files {
		put(t, dir, name, data)
	}
	if withPDF {
		out, err := folder.WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{})
		if err != nil {
			t.Fatal(err)
		}
		if err := folder.Write(filepath.Join(dir, "notebook-report"), out); err != nil {
			t.Fatal(err)
		}
		return dir
	}
	var md, results bytes.Buffer
	if err := report.Markdown(&md, made.Document, report.MarkdownOptions{}); err != nil {
		t.Fatal(err)
	}
	if err := report.WriteResults(&results, made.Results); err != nil {
		t.Fatal(err)
	}
	put(t, dir, "notebook-report/report.md", md.Bytes())
	put(t, dir, "notebook-report/results.json", results.Bytes())
	return dir
}

func put(t *testing.T, dir, name string, data []byte) {
	t.Helper()
	path := filepath.Join(dir, filepath.FromSlash(name))
	if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, data, 0o666); err != nil {
		t.Fatal(err)
	}
}

// opened reviews what lies at a path.
func opened(t *testing.T, path string, desk review.Desk) *review.Review {
	t.Helper()
	sub, err := review.Open(path, review.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return review.Examine(sub, desk)
}

// agrees fails where a review finds anything to be answered.
func agrees(t *testing.T, what string, r *review.Review) {
	t.Helper()
	if r.Outcome == review.Agrees && len(r.Cases) > 0 {
		return
	}
	t.Errorf("%s: %s, %d claims", what, r.Outcome, len(r.Cases))
	for i, f := range r.Findings {
		if f.Weight == review.Answer && i < 5 {
			t.Errorf("  %s: %s: %s; %s / %s", f.Rule, f.Where(), f.Text, f.Claimed, f.Found)
		}
	}
}

// TestReportsAgree: every fixture, under every code that can decide it, in
// both systems of units, gives a report that its own review agrees with.
func TestReportsAgree(t *testing.T) {
	for _, name := range []string{"measured.csv", "scec.csv"} {
		data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "profiles", name))
		if err != nil {
			t.Fatal(err)
		}
		for _, system := range []notebook.System{notebook.SI, notebook.US} {
			dir := site(t, name, data, system, false)
			agrees(t, name+" in "+system.String(), opened(t, dir, review.Desk{}))
			agrees(t, name+" under a code of the reviewer's", opened(t, dir, review.Desk{Code: code("asce-7-16")}))
		}
	}
}

// TestDemoAgrees: the starter's report, as a folder, as a notebook's name and
// as its PDF alone.
func TestDemoAgrees(t *testing.T) {
	dir := demo(t)
	for _, name := range []string{"", "notebook.md", "notebook-report/report.pdf", "notebook-report"} {
		agrees(t, name, opened(t, filepath.Join(dir, filepath.FromSlash(name)), review.Desk{}))
	}
	source := strings.NewReplacer("units: SI ", "units: US ", "code: asce-7-16", "code: [asce-7-16, ibc-2024, ntc-2018, ubc-97, as-1170.4]").Replace(templates.StarterNotebook)
	dir = written(t, []byte(source), map[string][]byte{"line-1.csv": []byte(templates.StarterProfile)}, true)
	agrees(t, "several codes in US units", opened(t, filepath.Join(dir, "notebook-report", "report.pdf"), review.Desk{}))
}

// demo is the starter's folder with its report.
func demo(t *testing.T) string {
	return written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": []byte(templates.StarterProfile)}, true)
}

// TestEveryByteCounts: a report whose data are changed afterwards, in any
// single byte, does not agree. One bit is turned in each byte in its turn.
func TestEveryByteCounts(t *testing.T) {
	data := []byte(templates.StarterProfile)
	dir := written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": data}, false)
	for i := range data {
		changed := bytes.Clone(data)
		changed[i] ^= 1
		put(t, dir, "line-1.csv", changed)
		if r := opened(t, dir, review.Desk{}); r.Outcome == review.Agrees {
			t.Fatalf("byte %d: %s", i, r.Outcome)
		}
	}
	put(t, dir, "line-1.csv", data)
	agrees(t, "as it was", opened(t, dir, review.Desk{}))
}

// TestNotebookByteCounts: likewise of the notebook, whose digest the report
// prints; every seventh byte is changed.
func TestNotebookByteCounts(t *testing.T) {
	source := []byte(templates.StarterNotebook)
	dir := written(t, source, map[string][]byte{"line-1.csv": []byte(templates.StarterProfile)}, false)
	for i := 0; i < len(source); i += 7 {
		changed := bytes.Clone(source)
		changed[i] ^= 1
		put(t, dir, "notebook.md", changed)
		sub, err := review.Open(dir, review.Options{})
		if err != nil {
			continue // no notebook any more
		}
		if r := review.Examine(sub, review.Desk{}); r.Outcome == review.Agrees {
			t.Fatalf("byte %d: %s", i, r.Outcome)
		}
	}
}

// TestTamperedResults: a figure changed in results.json, or in the text, is
// found by the rule for it.
func TestTamperedResults(t *testing.T) {
	dir := demo(t)
	results, err := os.ReadFile(filepath.Join(dir, "notebook-report", "results.json"))
	if err != nil {
		t.Fatal(err)
	}
	text, err := os.ReadFile(filepath.Join(dir, "notebook-report", "report.md"))
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []struct{ rule, file, old, new string }{
		{"average", "results.json", `"velocity_mps": 246.91849894294157`, `"velocity_mps": 246.92849894294157`},
		{"class", "results.json", `"class": "D"`, `"class": "C"`},
		{"results", "results.json", `"vs30_mps": 245.06620477507727`, `"vs30_mps": 255.06620477507727`},
		{"results", "results.json", `"depth_reached_m": 38`, `"depth_reached_m": 48`},
		{"results", "results.json", `"basis": "inverted"`, `"basis": "measured"`},
		{"results", "results.json", `"percent": -25.935075426543765`, `"percent": -35.935075426543765`},
		{"digest", "results.json", `"sha256": "949d`, `"sha256": "849d`},
		{"text", "report.md", "| Average velocity      | 246.9 m/s (810.1 ft/s)", "| Average velocity      | 296.9 m/s (974.1 ft/s)"},
		{"text", "report.md", "| Site class            | **D**", "| Site class            | **B**"},
	} {
		put(t, dir, "notebook-report/results.json", results)
		put(t, dir, "notebook-report/report.md", text)
		was := map[string][]byte{"results.json": results, "report.md": text}[p.file]
		if !bytes.Contains(was, []byte(p.old)) {
			t.Errorf("%s does not hold %s", p.file, p.old)
			continue
		}
		put(t, dir, "notebook-report/"+p.file, bytes.Replace(was, []byte(p.old), []byte(p.new), 1))
		r := opened(t, dir, review.Desk{})
		if r.Outcome != review.Differs {
			t.Errorf("%s: %s", p.new, r.Outcome)
		}
		finding(t, r, p.rule)
	}
}

// TestBitFlippedPDF: a report.pdf with one bit turned in its pages, or in the
// middle of an attachment, does not agree.
func TestBitFlippedPDF(t *testing.T) {
	dir := demo(t)
	path := filepath.Join(dir, "notebook-report", "report.pdf")
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	e, err := evidence.Read(whole)
	if err != nil {
		t.Fatal(err)
	}
	var flips []int
	pages := int(e.Manifest.Pages.Size)
	for i := 0; i < pages; i += pages/40 + 1 {
		flips = append(flips, i)
	}
	const begin, end = ">>\nstream\n", "\nendstream"
	for at := pages; ; {
		start := bytes.Index(whole[at:], []byte(begin))
		if start < 0 {
			break
		}
		start += at + len(begin)
		at = start + bytes.Index(whole[start:], []byte(end))
		flips = append(flips, (start+at)/2)
	}
	if len(flips) < 40+len(e.Files) {
		t.Fatalf("%d places for %d attachments", len(flips), len(e.Files))
	}
	alone := t.TempDir()
	for _, i := range flips {
		changed := bytes.Clone(whole)
		changed[i] ^= 4
		put(t, alone, "report.pdf", changed)
		if r := opened(t, filepath.Join(alone, "report.pdf"), review.Desk{}); r.Outcome == review.Agrees {
			t.Errorf("byte %d of %d: %s", i, len(whole), r.Outcome)
		}
	}
	for _, n := range []int{0, 1, 8, len(whole) / 3, len(whole) - 7} {
		put(t, alone, "report.pdf", whole[:n])
		if r := opened(t, filepath.Join(alone, "report.pdf"), review.Desk{}); r.Outcome != review.CannotBeChecked && r.Outcome != review.Differs {
			t.Errorf("the first %d bytes: %s", n, r.Outcome)
		}
	}
}

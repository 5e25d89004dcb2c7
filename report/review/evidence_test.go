package review_test

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/report/review"
	"shearbook/templates"
	"shearbook/vs30/siteclass/codefile"
)

// demoPDF writes the starter's report.pdf after change had its way with what
// it is made of, and returns its path.
func demoPDF(t *testing.T, change func(*notebook.Report)) string {
	t.Helper()
	source := []byte(templates.StarterNotebook)
	nb, err := notebook.Parse("notebook.md", source)
	if err != nil {
		t.Fatal(err)
	}
	if change == nil {
		nb.Header.WithoutData = true
		change = func(*notebook.Report) {}
	}
	made, err := notebook.Evaluate(nb, notebook.Options{Version: "shearbook test",
		ReadFile: func(string) ([]byte, error) { return []byte(templates.StarterProfile), nil }})
	if err != nil {
		t.Fatal(err)
	}
	change(made)
	files, err := folder.WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{})
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	for _, f := range files {
		if f.Name == folder.PDF {
			put(t, dir, f.Name, f.Data)
		}
	}
	return filepath.Join(dir, folder.PDF)
}

// TestAttachmentNotAsListed: a PDF is well-formed, and an attachment is not
// what its manifest says: one velocity of the profile is another.
func TestAttachmentNotAsListed(t *testing.T) {
	path := demoPDF(t, func(made *notebook.Report) {
		for i, f := range made.Evidence.Files {
			if f.Name == "line-1.csv" {
				made.Evidence.Files[i].Data = []byte(strings.Replace(string(f.Data), ",468,", ",469,", 1))
			}
		}
	})
	r := opened(t, path, review.Desk{})
	if f := finding(t, r, "evidence"); r.Outcome != review.Differs || !strings.Contains(f.Text, "line-1.csv is not what manifest.json lists") {
		t.Errorf("%s: %+v", r.Outcome, f)
	}
	finding(t, r, "average") // and the average does not follow any more
	finding(t, r, "digest")  // nor is it the digest of results.json
}

// TestWithheldData: a report without its data cannot be checked, and the
// review says why.
func TestWithheldData(t *testing.T) {
	r := opened(t, demoPDF(t, nil), review.Desk{})
	if f := finding(t, r, "unchecked"); r.Outcome != review.CannotBeChecked || !strings.Contains(f.Text, "withheld") {
		t.Errorf("%s: %+v", r.Outcome, f)
	}
}

// TestPagesSayOtherwise: the pages and results.json of a report come of two
// evaluations.
func TestPagesSayOtherwise(t *testing.T) {
	other := strings.Replace(templates.StarterProfile, "24.5,,468,", "24.5,,968,", 1)
	dir := written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": []byte(other)}, false)
	stale, err := os.ReadFile(filepath.Join(dir, "notebook-report", "report.md"))
	if err != nil {
		t.Fatal(err)
	}
	dir = written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": []byte(templates.StarterProfile)}, false)
	put(t, dir, "notebook-report/report.md", stale)
	r := opened(t, dir, review.Desk{})
	finding(t, r, "text")
	finding(t, r, "digest")
}

// Example_ownTable reviews a claim under a table that the submission brings
// along, while the reviewer names no code.
func Example_ownTable() {
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "codefile", "example.yaml"))
	if err != nil {
		panic(err)
	}
	table, err := codefile.Read("local.yaml", data)
	if err != nil {
		panic(err)
	}
	s := submission(threeLayers, claim(table.ID, "", "270 m/s"))
	s.Tables = append(s.Tables, table)
	tell("own-table", s)
	// Output:
	// answer: site: the class table is the submission's own; name the code that holds with --code or --code-file
	//   claimed "local.yaml", found ""
}

// Example_results reviews a site folder whose results.json says another Vs30
// than the data give: 30 / (5/150 + 10/250 + 15/400) = 270.68 m/s.
func Example_results() {
	dir, err := os.MkdirTemp("", "")
	if err != nil {
		panic(err)
	}
	defer os.RemoveAll(dir)
	for name, text := range map[string]string{
		"line-1.csv":  threeLayers,
		"notebook.md": "---\ncode: ec8-2004\nprofiles: {L1: line-1.csv}\n---\n# Site\n",
		"results.json": `{"results": [{"profile": "L1", "code": "ec8-2004", "class": "C", "velocity_mps": 270.7, "vs30_mps": 280.7, "basis": "measured",
			"unassessed": ["liquefiable soil", "sensitive clay", "a layer at least 10 m thick of soft clay or silt of PI > 40 and high water content (the table shows cu of 10 – 20 kPa)"]}]}`,
	} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			panic(err)
		}
	}
	s, err := review.Open(dir, review.Options{})
	if err != nil {
		panic(err)
	}
	fmt.Println(review.Examine(s, review.Desk{}).Outcome)
	tell("results", s)
	// Output:
	// differs
	// answer: results.json: results.json does not carry the words on the confirmation of the class by an engineer
	//   claimed "", found "The design site class must be confirmed by a licensed engineer under the locally adopted building code before it is used for design."
	// answer: results.json:1:14, L1: results.json says another list of notes than the data give
	//   claimed "", found "datum-assumed"
	// answer: results.json:1:14, L1: results.json lacks what the data give: edition, route, standing, depth_m, datum_m, depth_reached_m, velocity, margin, steps
	// answer: results.json:1:14, L1: results.json says another Vs30 than the data give
	//   claimed "280.7 m/s", found "270.676691729 m/s"
}

// TestEveryRuleHasAnExample: each rule is told in an Example of this package.
func TestEveryRuleHasAnExample(t *testing.T) {
	told := map[string]bool{}
	for _, name := range []string{"rules_test.go", "survey_example_test.go", "evidence_test.go"} {
		data, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		for _, m := range regexp.MustCompile(`tell(?:Under)?\("([a-z-]+)"`).FindAllStringSubmatch(string(data), -1) {
			told[m[1]] = true
		}
	}
	for _, r := range review.Rules() {
		if !told[r.ID] {
			t.Errorf("rule %s has no Example", r.ID)
		}
	}
}

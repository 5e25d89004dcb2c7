package review_test

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report/review"
	"shearbook/templates"
)

// TestForgedFields: every field of results.json that a reader could lean on
// is held against the data, and one that was taken out is missed.
func TestForgedFields(t *testing.T) {
	dir := demo(t)
	path := filepath.Join(dir, "notebook-report", "results.json")
	was, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []struct{ old, new string }{
		{`"edition": "ASCE/SEI 7-16 with Supplements 1 and 3"`, `"edition": "ASCE/SEI 7-22"`},
		{`"route": "velocity"`, `"route": "N"`},
		{`"standing": "`, `"standing": "well `},
		{`"unit": "ft/s"`, `"unit": "m/s"`},
		{`"vs30_mps": 245.06620477507727`, `"vs30_mps": null`},
		{`"velocity_mps": 246.91849894294157`, `"velocity_mps": null`},
		{`"depth_m": 30.48`, `"depth_m": null`},
		{`"datum_m": 0`, `"datum_m": null`},
		{`"to_class": "E"`, `"to_class": "C"`},
		{`"holds": false`, `"holds": true`},
		{`"steps": [`, `"steps": [{"text": "one more", "holds": true},`},
		{`"id": "reversal"`, `"id": "harmless"`},
		{`"confirmation": "The design`, `"confirmation": "No design`},
	} {
		if !bytes.Contains(was, []byte(p.old)) {
			t.Errorf("results.json does not hold %s", p.old)
			continue
		}
		put(t, dir, "notebook-report/results.json", bytes.Replace(was, []byte(p.old), []byte(p.new), 1))
		r := opened(t, dir, review.Desk{})
		finding(t, r, "results")
		if r.Outcome != review.Differs {
			t.Errorf("%s: %s", p.new, r.Outcome)
		}
	}
}

// TestTextOfAnotherResult: a class or an average that is right of another
// profile, or under another code, is not right here.
func TestTextOfAnotherResult(t *testing.T) {
	source, files := fourProfiles("asce-7-16", "")
	dir := written(t, source, files, false)
	text, err := os.ReadFile(filepath.Join(dir, "notebook-report", "report.md"))
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range []struct{ from, to string }{
		{"| L1      | asce-7-16 | **D**", "| L1      | asce-7-16 | **C**"},   // L4's
		{"Profile L1 is site class **D**", "Profile L1 is site class **C**"}, // likewise
		{"Profile L4 is site class **C**", "Profile L4 is site class **D**"}, // L1's
	} {
		if !strings.Contains(string(text), p.from) {
			t.Errorf("report.md does not hold %s:\n%s", p.from, text[:1500])
			continue
		}
		put(t, dir, "notebook-report/report.md", []byte(strings.Replace(string(text), p.from, p.to, 1)))
		r := opened(t, dir, review.Desk{})
		if f := finding(t, r, "text"); r.Outcome != review.Differs || f.Place.Line == 0 {
			t.Errorf("%s: %s, %+v", p.to, r.Outcome, f)
		}
	}
}

// TestPDFWithoutEvidence: a report.pdf beside the site that carries nothing
// is told, and its pages are compared all the same.
func TestPDFWithoutEvidence(t *testing.T) {
	dir := demo(t)
	other := strings.Replace(templates.StarterProfile, "24.5,,468,", "24.5,,968,", 1)
	alien := written(t, []byte(templates.StarterNotebook), map[string][]byte{"line-1.csv": []byte(other)}, true)
	for i, from := range []string{dir, alien} {
		what := []string{"own", "another's"}[i]
		data, err := os.ReadFile(filepath.Join(from, "notebook-report", "report.pdf"))
		if err != nil {
			t.Fatal(err)
		}
		data = bytes.ReplaceAll(data, []byte("/EmbeddedFiles"), []byte("/EmbeddedNothn"))
		put(t, dir, "notebook-report/report.pdf", data)
		r := opened(t, dir, review.Desk{})
		if f := finding(t, r, "evidence-loose"); !strings.Contains(f.Text, "carries no evidence") {
			t.Errorf("%+v", f)
		}
		if differs := r.Outcome == review.Differs; differs != (what == "another's") {
			t.Errorf("%s: %s", what, r.Outcome)
		}
		for _, f := range r.Findings {
			if f.Weight == review.Answer && what == "own" {
				t.Errorf("%s: %+v", what, f)
			}
		}
	}
}

// TestMapTakesAnotherColumn: the notebook's map reads a column of the file
// for Vs that is another than the file's own Vs.
func TestMapTakesAnotherColumn(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s),trial (m/s)\n0,5,150,400\n5,45,300,500\n"
	const source = "---\ncode: asce-7-16\nprofiles: {L1: {file: line.csv, map: [\"Vs=trial [m/s]\"]}}\n---\n# Site\n\n```summary\n```\n"
	dir := written(t, []byte(source), map[string][]byte{"line.csv": []byte(table)}, false)
	r := opened(t, dir, review.Desk{})
	if f := finding(t, r, "mapped-column"); r.Outcome != review.Differs {
		t.Errorf("%s: %+v", r.Outcome, f)
	}
}

// TestNotebookDeepensTheSurvey: the file says 20 m, the notebook 60 m.
func TestNotebookDeepensTheSurvey(t *testing.T) {
	table := strings.Replace(measured("0,5,150\n5,15,250\n15,45,400\n"), "reached: 45 m", "reached: 20 m", 1)
	const source = "---\ncode: asce-7-16\nprofiles: {L1: {file: line.csv, depth reached: 60 m}}\n---\n# Site\n\n```summary\n```\n"
	dir := written(t, []byte(source), map[string][]byte{"line.csv": []byte(table)}, false)
	if f := finding(t, opened(t, dir, review.Desk{}), "depth-reached"); !strings.Contains(f.Text, "reached 20 m") {
		t.Errorf("%+v", f)
	}
}

// TestRatioWithinRounding: velocities times 1.1 rounded to 1 m/s, and steps in
// one ratio rounded so: 150·1.2^k = 150, 180, 216, 259.2, 311.04.
func TestRatioWithinRounding(t *testing.T) {
	const two = "profile,top (m),bottom (m),vs (m/s)\nA,0,5,153\nA,5,15,247\nA,15,45,401\nB,0,5,168\nB,5,15,272\nB,15,45,441\n"
	finding(t, review.Examine(submission(two, claim("ec8-2004", "C", "")), review.Desk{}), "copied")
	const steps = "top (m),bottom (m),vs (m/s)\n0,8,150\n8,16,180\n16,24,216\n24,32,259\n32,40,311\n"
	if f := finding(t, review.Examine(submission(steps, claim("ec8-2004", "C", "")), review.Desk{}), "regular"); !strings.Contains(f.Text, "one ratio, 1.2") {
		t.Errorf("%s", f.Text)
	}
}

// TestRelationDecides: the relations by which a profile of 12 m is carried on
// give more than one class, and the review says which how often.
func TestRelationDecides(t *testing.T) {
	c := claim("ec8-2004", "C", "")
	c.Stated.Extend = "constant-velocity"
	s := submission("top (m),bottom (m),vs (m/s)\n0,6,170\n6,12,172\n", c)
	told := false
	for _, f := range review.Examine(s, review.Desk{}).Findings {
		told = told || f.Rule == "extension" && strings.Contains(f.Text, "class D under 3, class C under 3")
	}
	if !told {
		t.Error("it is not told")
	}
}

// TestOtherDepthIsNoAgreement: a claim that does not follow is no agreement,
// whatever the department weighs.
func TestOtherDepthIsNoAgreement(t *testing.T) {
	c := claim("asce-7-16", "D", "")
	c.Depth, _ = review.ParseNumber("30 m", profile.Length, profile.Unit{})
	set, err := review.ReadRules("rules.yaml", []byte("rules: {averaging-depth: note}\n"))
	if err != nil {
		t.Fatal(err)
	}
	r := review.Examine(submission(threeLayers, c), review.Desk{Rules: set})
	if r.Outcome != review.Differs || r.Cases[0].Agrees(0) {
		t.Errorf("%s", r.Outcome)
	}
}

// TestUnreadRowsAreListed: a row that cannot be read is a claim that is not
// checked, and cells beyond the header are a fault.
func TestUnreadRowsAreListed(t *testing.T) {
	dir := t.TempDir()
	put(t, dir, "site.csv", []byte(threeLayers))
	put(t, dir, "claims.csv", []byte("file,code,class,average\nsite.csv,asce-7-16,D,272 m/s\nsite.csv,asce-7-16,D,fast\nsite.csv,asce-7-16,D,1,200 ft/s\n"))
	r := opened(t, filepath.Join(dir, "claims.csv"), review.Desk{})
	if r.Outcome != review.CannotBeChecked || len(r.Cases) != 3 || !r.Cases[0].Agrees(0) || r.Cases[1].Err == nil || r.Cases[2].Err == nil {
		t.Errorf("%s, %d claims", r.Outcome, len(r.Cases))
	}
	beyond := false
	for _, f := range r.Findings {
		beyond = beyond || f.Rule == "unchecked" && f.Place.Line == 4 && strings.Contains(f.Text, "more cells than the header")
	}
	if !beyond {
		t.Errorf("%+v", r.Findings)
	}
}

package main

import (
	"bytes"
	"encoding/json"
	"strings"
	"testing"

	"shearbook/report"
	"shearbook/report/notebook"
	"shearbook/vs30/siteclass"
)

// The JSON of the codes holds what the help documents, for every code and in
// the order of the list.
func TestCodesAsJSON(t *testing.T) {
	var out, stderr bytes.Buffer
	if status := run([]string{"codes", "--format", "json"}, streams{out: &out, err: &stderr}); status != done {
		t.Fatalf("exit status %d: %s", status, stderr.String())
	}
	var got map[string]json.RawMessage
	var codes []map[string]any
	if err := json.Unmarshal(out.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(got["codes"], &codes); err != nil {
		t.Fatal(err)
	}
	if string(got["schema"]) != "1" || !strings.Contains(string(got["confirmation"]), "licensed engineer") {
		t.Errorf("schema %s, confirmation %s", got["schema"], got["confirmation"])
	}
	all := siteclass.All()
	if len(codes) != len(all) {
		t.Fatalf("%d codes, want %d", len(codes), len(all))
	}
	for i, c := range all {
		for key, want := range map[string]any{"id": c.ID, "title": c.Title, "edition": c.Edition, "clause": c.Clause,
			"table": c.Table, "parameter": c.Parameter, "depth": c.DepthText, "depth_m": c.Depth, "datum": c.Datum.String(),
			"unit": c.Unit.Name, "standing": c.Standing.String(), "own_rule": c.OwnRule()} {
			if codes[i][key] != want {
				t.Errorf("%s: %s is %v, want %v", c.ID, key, codes[i][key], want)
			}
		}
		classes, _ := codes[i]["classes"].([]any)
		if len(classes) != len(c.Bands) {
			t.Errorf("%s: %d classes, want %d", c.ID, len(classes), len(c.Bands))
			continue
		}
		for k, b := range c.Bands {
			if class := classes[k].(map[string]any); class["class"] != b.Class || (class["vs"] == "") != b.Vs.Empty() {
				t.Errorf("%s: class %d is %v, want %+v", c.ID, k, class, b)
			}
		}
	}
}

// The keys that the help of codes documents are those that are written.
func TestCodesHelpNamesTheKeys(t *testing.T) {
	help := newCodes(streams{}).Long
	data, err := json.Marshal(codeList{codesSchema, report.Caution, []codeEntry{{Classes: []classEntry{{}}}}})
	if err != nil {
		t.Fatal(err)
	}
	for _, piece := range strings.Split(string(data), `"`)[1:] {
		if strings.Trim(piece, "abcdefghijklmnopqrstuvwxyz_") == "" && piece != "" && !strings.Contains(help, `"`+piece+`"`) {
			t.Errorf("the help does not name %q", piece)
		}
	}
}

// Two codes that are the same differ in nothing, and every pair of built-in
// codes fits 80 columns.
func TestDifferences(t *testing.T) {
	for _, a := range siteclass.All() {
		if text := (streams{}).differences(a, a); !strings.Contains(text, "no difference") {
			t.Errorf("%s differs from itself:\n%s", a.ID, text)
		}
		for _, b := range siteclass.All() {
			for line := range strings.Lines((streams{}).differences(a, b)) {
				if n := columns(strings.TrimSuffix(line, "\n")); n > width {
					t.Errorf("%s, %s: %d columns: %s", a.ID, b.ID, n, line)
				}
			}
		}
	}
}

// Every code is described within 80 columns, with each of its classes, rules
// and conditions.
func TestDescribe(t *testing.T) {
	for _, c := range siteclass.All() {
		text := (streams{}).describe(c)
		for line := range strings.Lines(text) {
			if n := columns(strings.TrimSuffix(line, "\n")); n > width {
				t.Errorf("%s: %d columns: %s", c.ID, n, line)
			}
		}
		flat := strings.Join(strings.Fields(text), " ")
		pieces := append(append(notebook.RuleTexts(c), termsText(c)...), c.Notes...)
		for _, k := range c.Conditions {
			pieces = append(pieces, k.Text)
		}
		for _, piece := range pieces {
			if !strings.Contains(flat, strings.Join(strings.Fields(piece), " ")) {
				t.Errorf("%s: the description does not say %q", c.ID, piece)
			}
		}
	}
}

// A difference that one code has over the other is there from the other side
// as well.
func TestDifferencesBothWays(t *testing.T) {
	all := siteclass.All()
	for _, a := range all {
		for _, b := range all {
			there := len(headDifferences(a, b)) + len(bandDifferences(a, b)) + len(conditionDifferences(a, b))
			back := len(headDifferences(b, a)) + len(bandDifferences(b, a)) + len(conditionDifferences(b, a))
			if there != back {
				t.Errorf("%s and %s: %d differences, and %d the other way", a.ID, b.ID, there, back)
			}
		}
	}
}

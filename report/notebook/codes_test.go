package notebook

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"maps"
	"os"
	"strings"
	"testing"

	"shearbook/profile"
)

// withTables is the folder of the other tests with the documented example of a
// jurisdiction's own table, and some that are at fault.
func withTables(t *testing.T) files {
	t.Helper()
	data, err := os.ReadFile("../../testdata/codefile/example.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f := files{"own.yaml": string(data), "twice.yaml": string(data), "bad.yaml": "id: Bad\n"}
	maps.Copy(f, folder)
	return f
}

func evaluateWithTables(t *testing.T, source string) (*Report, error) {
	t.Helper()
	nb, err := Parse("site.md", []byte(source))
	if err != nil {
		return nil, err
	}
	return Evaluate(nb, Options{ReadFile: withTables(t).read, Version: "shearbook test"})
}

// The front matter names a table by its file, alone or in a list, and workings
// name it by its ID. Under it k7.csv averages, over the 25 m that the table
// asks for, 25/(6/220 + 19/430) = 25/0.0714588 = 349.852 m/s, in 240 – 450:
// class M. Under asce-7-16 it is class D.
func TestOwnTable(t *testing.T) {
	for _, front := range []string{
		"code: {file: own.yaml}", "code: [{file: own.yaml}]", "code: [{file: own.yaml}, asce-7-16]",
		"code: [{file: own.yaml}, orvasta-2025]", "code: [orvasta-2025, {file: own.yaml}, {file: own.yaml}]",
	} {
		r, err := evaluateWithTables(t, "---\n"+front+"\nprofiles: {L1: {file: k7.csv}}\n---\n{{ L1.class }}, {{ L1.average }}, {{ L1.edition }}\n")
		if err != nil {
			t.Errorf("%s: %v", front, err)
			continue
		}
		want := "M, 349.9 m/s, Ordinance 12 of 2025, first amendment (own table of the Municipality of Orvasta)"
		if got := prose(t, r); got != want {
			t.Errorf("%s: %q, want %q", front, got, want)
		}
	}
}

func TestWorkingsKnowOwnTables(t *testing.T) {
	r, err := evaluateWithTables(t, "---\ncode: [asce-7-16, {file: own.yaml}]\nprofiles: {L1: {file: k7.csv}}\n---\n"+
		"```class\ncode: orvasta-2025\n```\n\n```compare\n```\n\n```figure\ncode: orvasta-2025\n```\n\n```conditions\ncode: orvasta-2025\n```\n\n```limits\n```\n\n```data\n```\n")
	if err != nil {
		t.Fatal(err)
	}
	var classes []string
	for _, res := range r.Results {
		classes = append(classes, res.Code+" "+res.Class)
	}
	if got := strings.Join(classes, ", "); got != "orvasta-2025 M, asce-7-16 D" {
		t.Errorf("results %s", got)
	}
	text := strings.Join(strings.Fields(markdown(t, r)), " ")
	sum := sha256.Sum256([]byte(withTables(t)["own.yaml"]))
	for _, want := range []string{"own table of the Municipality of Orvasta", hex.EncodeToString(sum[:]), "own.yaml",
		"Peat: total thickness > 2 m", "no published code"} {
		if !strings.Contains(text, want) {
			t.Errorf("the report does not say %q", want)
		}
	}
}

// The same in front matter as faults.
func TestOwnTableFaults(t *testing.T) {
	for front, want := range map[string]string{
		"code: {file: nonesuch.yaml}":                  "site.md:2:7: code: nonesuch.yaml cannot be read",
		"code: [asce-7-16, {file: nonesuch.yaml}]":     "site.md:2:19: code: nonesuch.yaml cannot be read",
		"code: {file: bad.yaml}":                       `bad.yaml:1:1: the table does not state "title"`,
		"code: {fil: own.yaml}":                        "site.md:2:7: code of the front matter names no file",
		"code: {file: own.yaml, id: a}":                `site.md:2:24: code of the front matter has no key "id"`,
		"code: {file: [own.yaml]}":                     "site.md:2:14: file of code of the front matter is not plain text",
		"code: [[asce-7-16]]":                          "site.md:2:8: code of the front matter is no code",
		"code: [{file: own.yaml}, {file: twice.yaml}]": `site.md:2:26: own.yaml and twice.yaml both have the id "orvasta-2025"`,
		"code: [{file: own.yaml}, orvasta-2026]":       `site.md:2:26: no code is called "orvasta-2026"; did you mean "orvasta-2025"`,
		"code: [{file: own.yaml}, asce-7-61]":          `site.md:2:26: no code is called "asce-7-61"; did you mean "asce-7-16"`,
		"code: [asce-7-16, {file: k7.csv}]":            "k7.csv",
		"code: orvasta-2025":                           `site.md:2:7: no code is called "orvasta-2025"`,
		"code: [asce-7-16, {file: own.yaml, file: b}]": `site.md:2:36: code of the front matter states "file" twice`,
	} {
		_, err := evaluateWithTables(t, "---\n"+front+"\nprofiles: {L1: {file: k7.csv}}\n---\n# A\n")
		var faults profile.Faults
		if !errors.As(err, &faults) || !strings.HasPrefix(faults[0].Error(), want) {
			t.Errorf("%s: %v, want %s", front, err, want)
		}
		if len(faults) > 0 && faults[0].Hint == "" && !strings.Contains(front, "[own.yaml]") {
			t.Errorf("%s: no hint", front)
		}
	}
	_, err := evaluateWithTables(t, "---\ncode: {file: own.yaml}\nprofiles: {L1: {file: k7.csv}}\n---\n```class\ncode: orvasta\n```\n")
	if err == nil || !strings.Contains(err.Error(), `site.md:6:7: no code is called "orvasta"`) {
		t.Errorf("a working that names no code: %v", err)
	}
}

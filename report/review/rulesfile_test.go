package review_test

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report/review"
)

// TestRulesStand: every rule says what it finds, where that comes from and
// what its limits mean; IDs are plain and unique, and each has an Example.
func TestRulesStand(t *testing.T) {
	seen := map[string]bool{}
	for _, r := range review.Rules() {
		if seen[r.ID] || strings.Trim(r.ID, "abcdefghijklmnopqrstuvwxyz-") != "" {
			t.Errorf("rule %q", r.ID)
		}
		seen[r.ID] = true
		if r.Weight == review.Off || r.Summary == "" || r.Source == "" || strings.HasSuffix(r.Summary, ".") {
			t.Errorf("rule %s: %+v", r.ID, r)
		}
		for _, l := range r.Limits {
			if l.Name == "" || l.Name == "weight" || l.Meaning == "" {
				t.Errorf("rule %s: limit %+v", r.ID, l)
			}
		}
	}
	if len(seen) < 30 {
		t.Errorf("%d rules", len(seen))
	}
}

// TestRulesFile: weights and limits are taken, and stated as changes.
func TestRulesFile(t *testing.T) {
	set, err := review.ReadRules("rules.yaml", []byte(`
department: Building Department of Exampleton
rules:
  average: {tolerance: 2 %}
  datum: note
  wavelength: {divisor: 3}
  margin: off
`))
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, c := range set.Changes {
		got = append(got, c.String())
	}
	want := []string{"average: tolerance 0 % → 2 %", "datum: weight explain → note", "wavelength: divisor 2 → 3", "margin: weight note → off"}
	if !slices.Equal(got, want) || set.Department != "Building Department of Exampleton" {
		t.Errorf("%q, %q", got, set.Department)
	}
	// 270.68 m/s claimed as 275: 1.6 % off, within 2 %.
	s := submission(threeLayers, claim("ec8-2004", "", "275 m/s"))
	if r := review.Examine(s, review.Desk{Rules: set}); r.Outcome != review.Agrees {
		t.Errorf("%s", r.Outcome)
	}
	// Beyond it the claim does not follow.
	s = submission(threeLayers, claim("ec8-2004", "", "285 m/s"))
	if r := review.Examine(s, review.Desk{Rules: set}); r.Outcome != review.Differs {
		t.Errorf("%s", r.Outcome)
	}
	if review.Rules()[1].Limits[0].Value != 0 {
		t.Error("the built-in rules were changed")
	}
}

// TestRulesFaults: what cannot be read is told at its place, with a hint.
func TestRulesFaults(t *testing.T) {
	for _, p := range []struct{ text, want, hint string }{
		{"rules: {averge: off}\n", `rules.yaml:1:9: no rule is called "averge"`, `did you mean "average"?`},
		{"rules:\n  average: {tolerence: 1 %}\n", `rules.yaml:2:13: rule average has no limit "tolerence"`, `did you mean "tolerance"?`},
		{"rules:\n  average: {tolerance: 1 m}\n", `rules.yaml:2:24: tolerance of rule average is "1 m"`, "write it as `tolerance: 0 %`"},
		{"rules:\n  average: {tolerance: -1 %}\n", `rules.yaml:2:24: tolerance of rule average is "-1 %"`, "write it as `tolerance: 0 %`"},
		{"rules:\n  wavelength: {divisor: 0}\n", "rules.yaml:2:25: divisor of rule wavelength is zero", "write a number above zero"},
		{"rules: {class: heavy}\n", `rules.yaml:1:16: the weight of rule class is "heavy"`, "write answer, explain, note or off"},
		{"rules: {average: note}\n", "rules.yaml:1:18: rule average keeps its weight: a claim that does not follow, or cannot be checked, is the outcome itself", "leave it out"},
		{"rules: {unchecked: off}\n", "rules.yaml:1:20: rule unchecked keeps its weight: a claim that does not follow, or cannot be checked, is the outcome itself", "leave it out"},
		{"rules: {average: {tolerance: 11 %}}\n", `rules.yaml:1:30: tolerance of rule average is "11 %", with which anything would agree`, "write at most 10 %"},
		{"rule: {}\n", `rules.yaml:1:1: the file has no key "rule"`, `did you mean "rules"?`},
		{"rules: {margin: off, margin: note}\n", `rules.yaml:1:22: rules states "margin" twice`, "keep one of them"},
		{"", "rules.yaml: the file is empty", "begin with `rules:`; `shearbook review --list` prints them"},
	} {
		_, err := review.ReadRules("rules.yaml", []byte(p.text))
		var faults profile.Faults
		if !errors.As(err, &faults) || faults[0].Error() != p.want || faults[0].Hint != p.hint {
			t.Errorf("%q: %v\nwant %s (%s)", p.text, err, p.want, p.hint)
		}
	}
}

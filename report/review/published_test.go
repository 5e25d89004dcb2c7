package review_test

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report/review"
)

// published reads testdata/profiles: the profiles and what is printed of each.
func published(t *testing.T) (profiles map[string]*profile.Profile, printed [][]string) {
	t.Helper()
	all, err := open.File(filepath.Join("..", "..", "testdata", "profiles", "measured.csv"), open.Options{})
	if err != nil {
		t.Fatal(err)
	}
	profiles = map[string]*profile.Profile{}
	for i := range all {
		profiles[all[i].Name] = &all[i]
	}
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "profiles", "measured-vs30.csv"))
	if err != nil {
		t.Fatal(err)
	}
	printed, err = csv.NewReader(strings.NewReader(string(data))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return profiles, printed[1:]
}

// examineVs30 reviews a Vs30 claimed of a profile, under a code of 30 m.
func examineVs30(p *profile.Profile, text, extended string, desk review.Desk) *review.Review {
	c := claim("ec8-2004", "", text)
	if extended == "yes" {
		c.Stated.Extend = "constant-velocity"
	}
	return review.Examine(&review.Submission{Name: "published", Claims: []review.Claim{c}, Profiles: []review.Entry{{Profile: p}}}, desk)
}

// nudged is a printed number with its last digit moved by two.
func nudged(t *testing.T, number string) string {
	t.Helper()
	v, err := strconv.ParseFloat(number, 64)
	if err != nil {
		t.Fatal(err)
	}
	_, decimals, _ := strings.Cut(number, ".")
	step := 2.0
	for range decimals {
		step /= 10
	}
	return strconv.FormatFloat(v+step, 'f', len(decimals), 64)
}

// TestPublishedVs30 claims what is printed of the published profiles. Two
// sources: the exact column of testdata/profiles/measured-vs30.csv, printed to
// 10⁻⁴ m/s, and the Vs30 of the NGA-West2 site file printed to 10⁻² m/s, which
// is from memory. Each passes as printed and fails with its last digit moved
// by two.
func TestPublishedVs30(t *testing.T) {
	profiles, rows := published(t)
	nga := map[string]string{ // from memory
		"AND": "488.77", "ANS": "190.0", "AP2": "133.11", "OHW": "248.62", "PGC": "594.47", "SFS": "400.62",
	}
	for _, row := range rows {
		for _, text := range []string{row[2], nga[row[0]]} {
			if text == "" {
				continue
			}
			if r := examineVs30(profiles[row[0]], text+" m/s", row[3], review.Desk{}); r.Outcome != review.Agrees {
				t.Errorf("%s: %s m/s: %s", row[0], text, r.Outcome)
			}
			if r := examineVs30(profiles[row[0]], nudged(t, text)+" m/s", row[3], review.Desk{}); r.Outcome != review.Differs {
				t.Errorf("%s: %s m/s nudged: %s", row[0], text, r.Outcome)
			}
		}
	}
}

// TestTabulatedVs30 claims the other column, the Vs30 that is tabulated with
// the profiles. Eight of the ten were not computed from the layers exactly:
// they lie up to 0.4 % off, so they do not pass as printed to 10⁻⁴ m/s, and do
// pass where a department allows 1 %. The two that are exact pass as they are.
func TestTabulatedVs30(t *testing.T) {
	profiles, rows := published(t)
	lenient, err := review.ReadRules("rules.yaml", []byte("rules:\n  average: {tolerance: 1 %}\n"))
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		want := review.Differs
		if row[1] == row[2] {
			want = review.Agrees
		}
		if r := examineVs30(profiles[row[0]], row[1]+" m/s", row[3], review.Desk{}); r.Outcome != want {
			t.Errorf("%s: %s m/s: %s", row[0], row[1], r.Outcome)
		}
		if r := examineVs30(profiles[row[0]], row[1]+" m/s", row[3], review.Desk{Rules: lenient}); r.Outcome != review.Agrees {
			t.Errorf("%s: %s m/s within 1 %%: %s", row[0], row[1], r.Outcome)
		}
	}
}

// TestReferenceModel: the Vs30 printed for the model of testdata/profiles/
// scec.csv is 863 m/s on one page and 862 on another; exact is 862.718. The
// same page prints 932 as the arithmetic mean of the velocities at 0, 1 … 30
// m; by thickness it is (2·450 + 4·650 + 6·850 + 8·950 + 10·1150)/30 = 923.3.
func TestReferenceModel(t *testing.T) {
	all, err := open.File(filepath.Join("..", "..", "testdata", "profiles", "scec.csv"), open.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for text, want := range map[string]review.Outcome{"863 m/s": review.Agrees, "862 m/s": review.Differs, "862.718 m/s": review.Agrees, "864 m/s": review.Differs} {
		if r := examineVs30(&all[0], text, "no", review.Desk{}); r.Outcome != want {
			t.Errorf("%s: %s", text, r.Outcome)
		}
	}
	f := finding(t, examineVs30(&all[0], "923.3 m/s", "no", review.Desk{}), "average")
	if len(f.Causes) == 0 || f.Causes[0].ID != "arithmetic-mean" {
		t.Errorf("%+v", f.Causes)
	}
}

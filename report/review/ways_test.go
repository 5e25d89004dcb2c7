package review_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report/review"
)

// mps prints a velocity as a claim.
func mps(v float64, decimals int) string { return fmt.Sprintf("%.*f m/s", decimals, v) }

// planted are wrong averages, each computed here from its own definition on
// plain numbers: 4, 8, 10 and 20 m of 160, 240, 310 and 450 m/s.
//
// The right ones: over 30 m 4/160 + 8/240 + 10/310 + 8/450 s, over 30.48 m
// with 8.48 m of the last.
func planted() map[string]float64 {
	const ft = 0.3048
	t := func(h4 float64) float64 { return 4./160 + 8./240 + 10./310 + h4/450 }
	return map[string]float64{
		"arithmetic-mean": (4*160 + 8*240 + 10*310 + 8*450.) / 30,
		"other-depth":     30.48 / t(8.48),
		"last-layer":      22 / (4./160 + 8./240 + 10./310),
		"last-time":       30 / (4./160 + 8./240 + 10./310),
		"feet-velocity":   30 / t(8) / ft,
		"metre-velocity":  30 / t(8) * ft,
		"feet-depth":      30 * ft / (4./160 + (30*ft-4)/240),
		"feet-both":       30 / (4./160 + (30*ft-4)/240),
		"plain-mean":      (160 + 240 + 310 + 450.) / 4,
		"plain-harmonic":  4 / (1./160 + 1./240 + 1./310 + 1./450),
		"first-layer":     26 / (t(8) - 4./160),
		"first-time":      30 / (t(8) - 4./160),
		"whole-profile":   42 / t(20),
		"cut-layer":       30 / t(20),
		"geometric-mean":  math.Exp((4*math.Log(160) + 8*math.Log(240) + 10*math.Log(310) + 8*math.Log(450)) / 30),
		"at-depth":        450,
		"rounded-times":   30 / (0.025 + 0.033 + 0.032 + 0.018),
	}
}

const four = "top (m),bottom (m),vs (m/s)\n0,4,160\n4,12,240\n12,22,310\n22,42,450\n"

// TestPlantedAverages: each wrong way, claimed to 0.01 m/s, is found and named
// first.
func TestPlantedAverages(t *testing.T) {
	for id, v := range planted() {
		r := review.Examine(submission(four, claim("ec8-2004", "", mps(v, 2))), review.Desk{})
		if r.Outcome != review.Differs {
			t.Errorf("%s: %s %s", id, mps(v, 2), r.Outcome)
			continue
		}
		f := finding(t, r, "average")
		if len(f.Causes) == 0 || f.Causes[0].ID != id && !(id == "feet-both" && f.Causes[0].ID == "metre-depth") {
			t.Errorf("%s: %s is explained by %+v", id, mps(v, 2), f.Causes)
		}
	}
}

// TestPlantedDatum: with a datum of 2.5 m stated the claim starts at ground
// level, ends at 30 m, or starts at the foundation.
func TestPlantedDatum(t *testing.T) {
	time := func(from, to float64) float64 { // of the four layers, by their bounds
		sum := 0.0
		for _, l := range [][3]float64{{0, 4, 160}, {4, 12, 240}, {12, 22, 310}, {22, 42, 450}} {
			if h := math.Min(to, l[1]) - math.Max(from, l[0]); h > 0 {
				sum += h / l[2]
			}
		}
		return sum
	}
	for id, v := range map[string]float64{
		"datum":      30 / time(0, 30),
		"datum-end":  27.5 / time(2.5, 30),
		"foundation": 30 / time(1, 31),
	} {
		c := claim("ec8-2004", "", mps(v, 2))
		c.Stated.Datum, c.Stated.Foundation = profile.Known(2.5), profile.Known(1)
		f := finding(t, review.Examine(submission(four, c), review.Desk{}), "average")
		if len(f.Causes) == 0 || f.Causes[0].ID != id {
			t.Errorf("%s: %s is explained by %+v", id, mps(v, 2), f.Causes)
		}
	}
	right := claim("ec8-2004", "", mps(30/time(2.5, 32.5), 2))
	right.Stated.Datum = profile.Known(2.5)
	if r := review.Examine(submission(four, right), review.Desk{}); r.Outcome != review.Agrees {
		t.Errorf("from 2.5 m: %s: %+v", r.Outcome, r.Findings)
	}
}

// TestPlantedThirtyMetres: 30 m for 100 ft under a code of feet.
func TestPlantedThirtyMetres(t *testing.T) {
	v := 30 / (4./160 + 8./240 + 10./310 + 8./450)
	f := finding(t, review.Examine(submission(four, claim("asce-7-16", "", mps(v, 2))), review.Desk{}), "average")
	if len(f.Causes) == 0 || f.Causes[0].ID != "other-depth" || !strings.Contains(f.Causes[0].Text, "30 m in place of 100 ft") {
		t.Errorf("%+v", f.Causes)
	}
}

// TestPlantedOverThirtyMetres: under a code of feet the arithmetic mean over
// 30 m, and the average over 30 m in ft/s written as m/s.
func TestPlantedOverThirtyMetres(t *testing.T) {
	for id, v := range map[string]float64{
		"other-depth-arithmetic": (4*160 + 8*240 + 10*310 + 8*450.) / 30,
		"other-depth-feet":       30 / (4./160 + 8./240 + 10./310 + 8./450) / 0.3048,
	} {
		f := finding(t, review.Examine(submission(four, claim("asce-7-16", "", mps(v, 2))), review.Desk{}), "average")
		if len(f.Causes) == 0 || f.Causes[0].ID != id {
			t.Errorf("%s: %s is explained by %+v", id, mps(v, 2), f.Causes)
		}
	}
}

// TestPlantedUnstatedDatum: averaged from 1.5 m, which nothing states: 2.5 m
// of 160, 8 m of 240, 10 m of 310 and 9.5 m of 450 m/s.
func TestPlantedUnstatedDatum(t *testing.T) {
	v := 30 / (2.5/160 + 8./240 + 10./310 + 9.5/450)
	f := finding(t, review.Examine(submission(four, claim("ec8-2004", "", mps(v, 1))), review.Desk{}), "average")
	if len(f.Causes) != 1 || f.Causes[0].ID != "other-datum" || !strings.Contains(f.Causes[0].Text, "about 1.5 m") {
		t.Errorf("%+v", f.Causes)
	}
}

// TestBarredClassHasOneCause: 5 m of 300 and 5 m of 600 m/s over 3,000 m/s
// average to class B of ASCE/SEI 7-16, which the soil above the rock bars:
// the average is right, and no other way of averaging is the cause.
func TestBarredClassHasOneCause(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s)\n0,5,300\n5,10,600\n10,,3000\n"
	v := 30.48 / (5./300 + 5./600 + 20.48/3000)
	f := finding(t, review.Examine(submission(table, claim("asce-7-16", "B", mps(v, 1))), review.Desk{}), "class")
	if len(f.Causes) != 1 || f.Causes[0].ID != "condition" {
		t.Errorf("%+v", f.Causes)
	}
}

// TestCubeRootOfN: 80 N^(1/3) of 5, 10, 20, 30: 136.8, 172.4, 217.2, 248.6.
func TestCubeRootOfN(t *testing.T) {
	const table = "# basis: measured\ntop (m),bottom (m),vs (m/s),N\n0,5,136.8,5\n5,10,172.4,10\n10,20,217.2,20\n20,40,248.6,30\n"
	if f := finding(t, review.Examine(submission(table, claim("ec8-2004", "C", "")), review.Desk{}), "correlated-as-measured"); !strings.Contains(f.Text, "80 N^(1/3)") {
		t.Errorf("%s", f.Text)
	}
}

// TestPlantedGradient: 200 m/s growing to 400 m/s over 20 m, then 500 m/s.
// Right: 20 m take ln(400/200)·20/200 s. With the mean 300 m/s they take
// 20/300 s, with the top 20/200 s.
func TestPlantedGradient(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s),vs bottom (m/s)\n0,20,200,400\n20,40,500,\n"
	for id, time := range map[string]float64{"gradient-mean": 20. / 300, "gradient-top": 20. / 200} {
		v := 30 / (time + 10./500)
		f := finding(t, review.Examine(submission(table, claim("ec8-2004", "", mps(v, 2))), review.Desk{}), "average")
		if len(f.Causes) == 0 || f.Causes[0].ID != id {
			t.Errorf("%s: %s is explained by %+v", id, mps(v, 2), f.Causes)
		}
	}
	right := 30 / (math.Log(2)*20/200 + 10./500)
	if r := review.Examine(submission(table, claim("ec8-2004", "", mps(right, 2))), review.Desk{}); r.Outcome != review.Agrees {
		t.Errorf("%s: %+v", r.Outcome, r.Findings)
	}
}

// TestPlantedVp: the P waves of 800 and 1,600 m/s averaged.
func TestPlantedVp(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s),vp (m/s)\n0,10,200,800\n10,40,400,1600\n"
	f := finding(t, review.Examine(submission(table, claim("ec8-2004", "", mps(30/(10./800+20./1600), 1))), review.Desk{}), "average")
	if len(f.Causes) == 0 || f.Causes[0].ID != "vp" {
		t.Errorf("%+v", f.Causes)
	}
}

// TestPlantedShort: a profile that ends at 22 m.
func TestPlantedShort(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s)\n0,4,160\n4,12,240\n12,22,310\n"
	time := 4./160 + 8./240 + 10./310
	mean := 4*160 + 8*240 + 10*310.
	for id, v := range map[string]float64{"constant-velocity": 30 / (time + 8./310), "reached-only": 22 / time,
		"full-over-reached": 30 / time, "reached-arithmetic": mean / 22, "carried-arithmetic": (mean + 8*310) / 30} {
		r := review.Examine(submission(table, claim("ec8-2004", "", mps(v, 2))), review.Desk{})
		f := finding(t, r, "extension-unsaid")
		if r.Outcome != review.Differs || len(f.Causes) == 0 || f.Causes[0].ID != id {
			t.Errorf("%s: %s, %+v", id, r.Outcome, f.Causes)
		}
	}
	said := claim("ec8-2004", "", mps(30/(time+8./310), 2))
	said.Stated.Extend = "constant-velocity"
	if r := review.Examine(submission(table, said), review.Desk{}); r.Outcome != review.Agrees {
		t.Errorf("said: %s %+v", r.Outcome, r.Findings)
	}
}

// TestPlantedRounding: 30 m of 358.2 m/s are class C of EN 1998-1 (180 – 360
// m/s); rounded to 10 m/s they are on the bound of class B.
func TestPlantedRounding(t *testing.T) {
	const table = "top (m),bottom (m),vs (m/s)\n0,10,358.2\n10,40,358.2\n"
	r := review.Examine(submission(table, claim("ec8-2004", "", "360.0 m/s")), review.Desk{})
	if f := finding(t, r, "average"); len(f.Causes) == 0 || f.Causes[0].ID != "rounded" {
		t.Errorf("%+v", f.Causes)
	}
	const near = "top (m),bottom (m),vs (m/s)\n0,10,359.8\n10,40,359.8\n"
	r = review.Examine(submission(near, claim("ec8-2004", "B", "360 m/s")), review.Desk{})
	if f := finding(t, r, "class"); len(f.Causes) == 0 || f.Causes[0].ID != "rounded" {
		t.Errorf("%+v", f.Causes)
	}
	// 182.76 m/s are 599.6 ft/s, class E of ASCE/SEI 7-16 (below 600 ft/s).
	const feet = "top (m),bottom (m),vs (m/s)\n0,10,182.76\n10,40,182.76\n"
	r = review.Examine(submission(feet, claim("asce-7-16", "D", "600 ft/s")), review.Desk{})
	if f := finding(t, r, "class"); len(f.Causes) == 0 || f.Causes[0].ID != "rounded" {
		t.Errorf("%+v", f.Causes)
	}
}

// TestPlantedClasses: the class of another print of the bounds, of another
// edition, of an average in another unit.
func TestPlantedClasses(t *testing.T) {
	uniform := func(v string) string {
		return "top (m),bottom (m),vs (m/s)\n0,10," + v + "\n10,40," + v + "\n"
	}
	for _, p := range []struct{ cause, table, code, class, average string }{
		// 1,200 ft/s is 365.76 m/s, the metric print has 360: 362 m/s is D by
		// feet and C by metres (ASCE/SEI 7-16 Table 20.3-1).
		{"unit-print", uniform("362"), "asce-7-16", "C", "362 m/s"},
		// 240 m/s are 787.4 ft/s: CD is no class of 7-16. 300 m/s, 984 ft/s, lie
		// between 700 and 1,000 ft/s: D by 7-22 and D by 7-16; 320 m/s, 1,050
		// ft/s, are CD by 7-22 (1,000 to 1,450).
		{"edition", uniform("320"), "asce-7-16", "CD", "320 m/s"},
		// 250 m/s held against bounds in ft/s: 250 < 600 gives E.
		{"unit-bounds", uniform("250"), "asce-7-16", "E", "250 m/s"},
		{"average", uniform("250"), "asce-7-16", "C", "400 m/s"},
	} {
		f := finding(t, review.Examine(submission(p.table, claim(p.code, p.class, p.average)), review.Desk{}), "class")
		if len(f.Causes) == 0 || f.Causes[0].ID != p.cause {
			t.Errorf("%s: %+v", p.cause, f.Causes)
		}
	}
}

// TestPlantedCondition: 3.5 m of peat make class F of ASCE/SEI 7-16 (20.3.1,
// more than 10 ft); the average alone gives D.
func TestPlantedCondition(t *testing.T) {
	c := claim("asce-7-16", "D", "")
	c.Stated.Ground.Peat.Thickness = profile.Known(3.5)
	f := finding(t, review.Examine(submission(four, c), review.Desk{}), "class")
	if len(f.Causes) == 0 || f.Causes[0].ID != "condition" || f.Found[:7] != "class F" {
		t.Errorf("%+v", f)
	}
}

// TestOneRounding: what a claim is printed to is what it stands for.
func TestOneRounding(t *testing.T) {
	right := 30 / (4./160 + 8./240 + 10./310 + 8./450) // 276.93…
	for _, decimals := range []int{0, 1, 2, 4} {
		step := math.Pow10(-decimals)
		for k := -3; k <= 3; k++ {
			printed := math.Round(right/step)*step + float64(k)*step
			r := review.Examine(submission(four, claim("ec8-2004", "", mps(printed, decimals))), review.Desk{})
			if agrees := math.Abs(printed-right) <= step/2; agrees != (r.Outcome == review.Agrees) {
				t.Errorf("%s for %.6f: %s", mps(printed, decimals), right, r.Outcome)
			}
		}
	}
}

// finding returns the first finding of a rule.
func finding(t *testing.T, r *review.Review, rule string) review.Finding {
	t.Helper()
	for _, f := range r.Findings {
		if f.Rule == rule {
			return f
		}
	}
	t.Errorf("no finding %s: %s, %+v", rule, r.Outcome, r.Findings)
	return review.Finding{}
}

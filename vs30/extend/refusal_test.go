package extend

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
)

// Whoever asks gets an answer or a Refusal with its reason, whatever the layers.
func TestRefusals(t *testing.T) {
	rising := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 20, Vs: 300}}
	falling := []profile.Layer{{Bottom: 10, Vs: 300}, {Top: 10, Bottom: 20, Vs: 200}}
	ragged := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 19, Vs: 300}, {Top: 19, Bottom: 20, Vs: 290}}
	for _, c := range []struct {
		id              string
		layers          []profile.Layer
		from, thickness float64
		want            Reason
		say             string
	}{
		{"boore-2004", uniform(9.9, 250), 0, 30, TooShallow, "reaches 9.9 m, at least 10 m"},
		{"boore-2004", uniform(29.5, 250), 0, 30, TooDeep, "29.5 m, deeper than the 29 m"},
		{"boore-2011", uniform(4.9, 250), 0, 30, TooShallow, "4.9 m"},
		{"boore-2004", rising, 2, 30, OtherDatum, "not from 2 m below"},
		{"boore-2004", rising, 0, 40, OtherThickness, "over 30 m or 30.48 m, not over 40 m"},
		{"wang-2015", rising, 0, 50, OtherThickness, "not over 50 m"},
		{"boore-2004", falling, 0, 30, Reversed, "from 300 to 200 m/s at 10 m"},
		{"boore-2011", falling, 0, 30, Reversed, "falls"},
		{"boore-japan", falling, 0, 30, Reversed, "falls"},
		{"wang-2015", falling, 0, 30, Reversed, "falls"},
		{"power-law", falling, 0, 30, Reversed, "falls"},
		{"boore-2004", []profile.Layer{{Bottom: 20, Vs: 400, VsBottom: 300}}, 0, 30, Reversed, "from 400 to 300 m/s at 0 m"},
		{"boore-2004", uniform(20, 1600), 0, 30, HardRock, "1600 m/s is above 1500"},
		{"boore-2004", uniform(12, 1400), 0, 30, HardRock, "the estimate of"},
		{"power-law", uniform(20, 300), 0, 30, NoFit, "one velocity"},
		{"power-law", uniform(5, 300), 0, 30, TooShallow, "5 m"},
		{"asce-7-22", uniform(15, 300), 0, hundredFeet, TooShallow, "default classes"},
		{"asce-7-22", uniform(20, 300), 0, 30, OtherThickness, "over 30.48 m, not over 30 m"},
		{"constant-velocity", uniform(30, 300), 0, 30, NothingToAdd, "reaches the averaging depth"},
		{"boore-2004", uniform(math.Inf(1), 300), 0, 30, NothingToAdd, "reaches"},
		{"constant-velocity", nil, 0, 30, NoProfile, "no profile below the datum"},
		{"constant-velocity", uniform(10, 300), 10, 30, NoProfile, "10 m below ground level"},
		{"constant-velocity", rising, math.NaN(), 30, OtherDatum, "NaN"},
		{"constant-velocity", rising, -1, 30, OtherDatum, "-1"},
		{"constant-velocity", rising, 0, 0, OtherThickness, "0"},
		{"constant-velocity", rising, 0, math.Inf(1), OtherThickness, "Inf"},
	} {
		_, err := find(t, c.id).Estimate(c.layers, c.from, c.thickness)
		var refusal *Refusal
		if !errors.As(err, &refusal) {
			t.Errorf("%s: error %v, want a refusal for %s", c.id, err, c.want)
			continue
		}
		if refusal.Reason != c.want || refusal.Relation != c.id || !strings.Contains(err.Error(), c.say) {
			t.Errorf("%s: %s, %q; want %s, %q", c.id, refusal.Reason, err, c.want, c.say)
		}
		if strings.HasSuffix(err.Error(), ".") || strings.Contains(err.Error(), "\n") {
			t.Errorf("%q does not fit a table", err)
		}
	}
	// A change of 5 % or less at the bottom is scatter.
	estimate(t, "boore-2004", ragged, 0, 30)
	// A faster layer below the reversal makes it good.
	estimate(t, "boore-2004", append(slices.Clone(falling), profile.Layer{Top: 20, Bottom: 22, Vs: 320}), 0, 30)
}

// What is estimated nevertheless, with a doubt.
func TestDoubts(t *testing.T) {
	falling := []profile.Layer{{Bottom: 10, Vs: 300}, {Top: 10, Bottom: 20, Vs: 200}}
	for _, c := range []struct {
		id     string
		layers []profile.Layer
		over   float64
		want   string
	}{
		{"constant-velocity", falling, 30, "falling-at-the-bottom"},
		{"asce-7-22", falling, hundredFeet, "falling-at-the-bottom"},
		{"boore-2004", uniform(15, 80), 30, "slow-ground"},
	} {
		e := estimate(t, c.id, c.layers, 0, c.over)
		if len(e.Doubts) != 1 || e.Doubts[0].ID != c.want {
			t.Errorf("%s: doubts %+v, want %s", c.id, e.Doubts, c.want)
		}
	}
	if e := estimate(t, "boore-2004", uniform(15, 200), 0, 30); len(e.Doubts) != 0 {
		t.Errorf("doubts %+v, want none", e.Doubts)
	}
}

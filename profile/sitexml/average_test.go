package sitexml

import (
	"math"
	"strings"
	"testing"

	"shearbook/profile"
)

// Vs30 = 30/(8/210 + 22/439) = 340.1 m/s.
func TestStatedVs30IsNeverCompared(t *testing.T) {
	of := func(stated string, bottom float64) *profile.Profile {
		return &profile.Profile{
			Layers: []profile.Layer{{Top: 0, Bottom: 8, Vs: 210}, {Top: 8, Bottom: bottom, Vs: 439}},
			Reading: &profile.Reading{Metadata: []profile.Metadatum{
				{Key: "analysis/velocityS30", Value: stated},
				{Key: "siteDescription/siteMorphology/siteClassEC8", Value: "A"},
			}},
		}
	}
	for _, c := range []struct {
		stated string
		bottom float64
		want   string
	}{
		{"640 ± 17", math.Inf(1), `the file states a velocityS30 of 640 m/s, but that of this profile is 340.1 m/s, -46.9 % from it; its siteClassEC8 "A" may go with the former`},
		{"640", 30, "the file states a velocityS30 of 640 m/s"},
		{"343", math.Inf(1), ""}, // within 1 %
		{"344", math.Inf(1), "the file states"},
		{"640", 29, ""}, // the profile ends above 30 m
		{"0", math.Inf(1), ""},
		{"unknown", math.Inf(1), ""},
	} {
		got, ok := otherAverage(of(c.stated, c.bottom))
		if ok != (c.want != "") || !strings.HasPrefix(got, c.want) {
			t.Errorf("%s over %v m: %q", c.stated, c.bottom, got)
		}
	}
}

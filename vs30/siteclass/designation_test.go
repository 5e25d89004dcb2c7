package siteclass

import (
	"strings"
	"testing"

	"shearbook/profile"
)

// TestDesignations, vectors N1 to N7 for NBCC 2020 Tables -A and -B.
func TestDesignations(t *testing.T) {
	// 905 m/s over 30 m with 3.0 and 3.1 m of soil of 300 m/s over the rock:
	// the rock's velocity by hand, (30−h)/(30/905−h/300).
	over := func(h float64) []profile.Layer { return column(h, 300, deep, (30-h)/(30./905-h/300)) }
	clay := Ground{SoftClay: with(3.5, 25, 40, 24)}
	for _, p := range []struct {
		name  string
		site  Site
		class string
		row   string
	}{
		{"N1: 361, no exception", uniform(361), "X361", "XC"},
		{"N2: 905 over 3.0 m of soil; the rule is more than 3 m", siteOf(over(3)...), "X905", "XB"},
		{"N3: 905 over 3.1 m of soil", siteOf(over(3.1)...), "X760", "XC"},
		{"N4: 240 with 3.5 m of soft clay", on(240, clay), "XE", "XE"},
		{"N5: 140", uniform(140), "XF", "XF"},
		{"140 or less goes before the soft clay", on(139, clay), "XF", "XF"},
		{"XF goes before XE", on(240, Ground{SoftClay: with(3.5, 25, 40, 24), Peat: of(4)}), "XF", "XF"},
		{"N6: N60 of 15", boring(sand(40, 15)), "XE", "XE"},
		{"N6: N60 of 15.1", boring(sand(40, 15.1)), "XD", "XD"},
		{"N6: N60 of 10", boring(sand(40, 10)), "XF", "XF"},
		{"N7: su of 50", boring(clayOf(50)), "XE", "XE"},
		{"N7: su of 40", boring(clayOf(40)), "XF", "XF"},
		{"N7: su of 100", boring(clayOf(100)), "XD", "XD"},
		{"rounded to a whole number", uniform(361.069), "X361", "XC"},
		{"not rounded onto a bound", uniform(140.3), "X140.3", "XE"},
		{"not rounded onto a bound", uniform(759.8), "X759.8", "XC"},
		{"on a bound", uniform(760), "X760", "XC"},
		{"the largest", uniform(3400), "X3000", "XA"},
	} {
		d := decide(t, "nbcc-2020", p.site)
		if d.Class != p.class || d.Row != p.row {
			t.Errorf("%s: %s in the row of %s, want %s, %s", p.name, d.Class, d.Row, p.class, p.row)
		}
	}
	// The same N60 is D in 2015, and the same su in no class.
	if d := decide(t, "nbcc-2015", boring(sand(40, 15))); d.Class != "D" {
		t.Errorf("N60 of 15 in 2015: %s", d.Class)
	}
	if d := decide(t, "nbcc-2015", boring(clayOf(50))); !strings.Contains(noteOf(d, "boundary-gap"), "50 kPa is in no class as printed") {
		t.Errorf("su of 50 kPa in 2015: %v", d.Notes)
	}
}

func clayOf(su float64) profile.Layer { return clay(40, su) }

// TestDesignationMargin: the designation changes in kind at 140 m/s alone.
func TestDesignationMargin(t *testing.T) {
	for v, want := range map[float64]Margin{200: {"XF", 140, "m/s", -30}, 100: {"XV", 140, "m/s", 40}} {
		if d := decide(t, "nbcc-2020", uniform(v)); d.Margin == nil || d.Margin.ToClass != want.ToClass || !near(d.Margin.Percent, want.Percent, 1e-9) {
			t.Errorf("%v m/s: margin %+v", v, d.Margin)
		}
	}
	// 30/(4/300+26/2000) = 1,139.24 m/s over 4 m of soil.
	d := decide(t, "nbcc-2020", siteOf(column(4, 300, deep, 2000)...))
	if got := noteOf(d, "rock-barred"); d.Class != "X760" || d.Margin != nil || !strings.HasPrefix(got, "X1139 by its Vs30 of 1,139 m/s, the site is X760") {
		t.Errorf("%s, margin %v, %q", d.Class, d.Margin, got)
	}
}

// TestDesignationCorrelated: a velocity that was not measured in place makes
// no XV; Table -B then has the class.
func TestDesignationCorrelated(t *testing.T) {
	site := uniform(361)
	site.Profile.Survey.Basis = profile.Correlated
	d := decide(t, "nbcc-2020", site)
	if d.Class != "XC" || d.Margin == nil || d.Margin.ToClass != "XD" || d.Margin.Bound != 360 {
		t.Errorf("%s, margin %+v", d.Class, d.Margin)
	}
	site.Profile.Survey.Basis = profile.Inverted
	if d = decide(t, "nbcc-2020", site); d.Class != "X361" {
		t.Errorf("a model of a survey on the site: %s", d.Class)
	}
}

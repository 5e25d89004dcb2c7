package codefile

import (
	"bytes"
	"errors"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

const exampleFile = "../../../testdata/codefile/example.yaml"

func example(t testing.TB) *siteclass.Code {
	t.Helper()
	data, err := os.ReadFile(exampleFile)
	if err != nil {
		t.Fatal(err)
	}
	c, err := Read("example.yaml", data)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// The example is held against what its own comments and lines say, read off
// by hand.
func TestExample(t *testing.T) {
	c := example(t)
	for what, got := range map[string][2]string{
		"ID":         {c.ID, "orvasta-2025"},
		"edition":    {c.Edition, "Ordinance 12 of 2025, first amendment (own table of the Municipality of Orvasta)"},
		"own":        {c.Own.Edition, "Ordinance 12 of 2025, first amendment"},
		"file":       {c.Own.File, "example.yaml"},
		"depth":      {c.DepthText, "the upper 25 m"},
		"datum":      {c.Datum.String(), "underside of foundation"},
		"unit":       {c.Unit.Name, "m/s"},
		"strength":   {c.SuUnit.Name, "kPa"},
		"length":     {c.Length.Name, "m"},
		"standing":   {c.Standing.String(), "one source"},
		"row M":      {c.Bands[2].Standing.String(), "checked"},
		"row L":      {c.Bands[3].Standing.String(), "one source"},
		"R":          {c.Bands[0].Vs.String(), "> 900"},
		"F":          {c.Bands[1].Vs.String(), "≥ 450, ≤ 900"},
		"M":          {c.Bands[2].Vs.String(), "240 – 450"},
		"M, N":       {c.Bands[2].N.String(), "15 – 50"},
		"L, su":      {c.Bands[3].Su.String(), "< 70"},
		"peat":       {c.Conditions[1].Text, "peat: total thickness > 2 m"},
		"peat, ID":   {c.Conditions[1].ID, "peat"},
		"plasticity": {c.Conditions[2].Text, "high-plasticity clay: total thickness > 6 m, plasticity index > 60, where the class would otherwise be M or L"},
		"only":       {c.Conditions[2].OnlyStanding.String(), "from memory"},
		"bar":        {c.Conditions[4].ID, "rock-cover"},
	} {
		if got[0] != got[1] {
			t.Errorf("%s is %q, want %q", what, got[0], got[1])
		}
	}
	if c.Depth != 25 || len(c.Bands) != 5 || len(c.Conditions) != 5 || len(c.Notes) != 2 || !c.Bands[1].Improving {
		t.Errorf("depth %v, %d bands, %d conditions, %d notes, improving %t", c.Depth, len(c.Bands), len(c.Conditions), len(c.Notes), c.Bands[1].Improving)
	}
}

// site is a profile whose average under the example is worked by hand. From a
// datum at 1.5 m, over 25 m:
//
//	1.5 –  4   m  180 m/s   2.5/180  = 0.0138889 s
//	4   – 12   m  290 m/s   8/290    = 0.0275862 s
//	12  – 26.5 m  520 m/s   14.5/520 = 0.0278846 s
//	                                   0.0693597 s
//
// and 25/0.0693597 = 360.440 m/s, in 240 – 450: class M. To F at 450 m/s it
// would have to grow by 450/360.440 − 1 = 24.847 %.
func site() siteclass.Site {
	return siteclass.Site{
		Layers: []profile.Layer{
			{Top: 0, Bottom: 4, Vs: 180}, {Top: 4, Bottom: 12, Vs: 290}, {Top: 12, Bottom: 40, Vs: 520},
		},
		Datum: profile.Known(1.5), FoundationDepth: profile.Known(1.5),
	}
}

func TestDecisionUnderExample(t *testing.T) {
	d, err := example(t).Decide(site())
	if err != nil {
		t.Fatal(err)
	}
	if d.Class != "M" || math.Abs(d.Velocity-360.440) > 0.001 || d.Thickness != 25 || d.Datum != 1.5 {
		t.Errorf("class %s by %v m/s over %v m below %v m", d.Class, d.Velocity, d.Thickness, d.Datum)
	}
	if d.Standing != siteclass.Checked {
		t.Errorf("row M stands as checked, the decision as %s", d.Standing)
	}
	if m := d.Margin; m == nil || m.ToClass != "F" || m.Bound != 450 || math.Abs(m.Percent-24.847) > 0.001 {
		t.Errorf("margin %+v", d.Margin)
	}
	// The four conditions that velocities do not settle, as the file words
	// them, and the bar on R, which does not arise in class M.
	if len(d.Unassessed) != 4 || len(d.Conditions) != 5 || d.Conditions[4].State != siteclass.NotApplicable {
		t.Errorf("%d not assessed, %d conditions", len(d.Unassessed), len(d.Conditions))
	}
	if text := note(d, "own-table"); !strings.Contains(text, "own table of the Municipality of Orvasta") || !strings.Contains(text, "example.yaml") {
		t.Errorf("the note own-table is %q", text)
	}
}

// On the route by N, with 8, 20 and 45 blows in the layers of site:
//
//	N̄ = 25/(2.5/8 + 8/20 + 14.5/45) = 25/1.034722 = 24.161
//
// in 15 – 50: class M. By velocity the layers are M as well, and velocity
// goes first.
func TestRoutesUnderExample(t *testing.T) {
	c, s := example(t), site()
	for i, n := range []float64{8, 20, 45} {
		s.Layers[i].N, s.Layers[i].Given = n, profile.GivenN
	}
	d, err := c.Decide(s)
	if err != nil || d.Route != "velocity" || d.Class != "M" {
		t.Errorf("route %q, class %s (%v)", d.Route, d.Class, err)
	}
	s.Route = "N"
	d, err = c.Decide(s)
	if err != nil || d.Route != "N" || d.Class != "M" {
		t.Fatalf("route %q, class %s (%v)", d.Route, d.Class, err)
	}
	if a := d.Averages; len(a) != 1 || math.Abs(a[0].Value-24.161) > 0.001 || a[0].Symbol != "N̄" {
		t.Errorf("averages %+v", a)
	}
	if note(d, "own-table") == "" {
		t.Error("no note own-table by N")
	}
}

// The conditions of the example one by one: what leads to which class follows
// from the lines of the file.
func TestConditionsUnderExample(t *testing.T) {
	deposit := func(thickness, pi, w, su float64) siteclass.Deposit {
		return siteclass.Deposit{Thickness: profile.Known(thickness), PI: profile.Known(pi), WaterContent: profile.Known(w), Su: profile.Known(su)}
	}
	rock := func(soil float64) []profile.Layer {
		return []profile.Layer{{Top: 0, Bottom: 1.5 + soil, Vs: 400}, {Top: 1.5 + soil, Bottom: 60, Vs: 1200}}
	}
	for _, c := range []struct {
		name, class string
		change      func(*siteclass.Site)
	}{
		{"liquefiable", "X", func(s *siteclass.Site) { s.Ground.Liquefiable = siteclass.Yes }},
		{"peat 2 m", "M", func(s *siteclass.Site) { s.Ground.Peat = deposit(2, 0, 0, 0) }},
		{"peat 2.1 m", "X", func(s *siteclass.Site) { s.Ground.Peat = deposit(2.1, 0, 0, 0) }},
		{"plastic, PI 60", "M", func(s *siteclass.Site) { s.Ground.HighPlasticity = deposit(7, 60, 0, 0) }},
		{"plastic, PI 61", "X", func(s *siteclass.Site) { s.Ground.HighPlasticity = deposit(7, 61, 0, 0) }},
		{"plastic under F", "F", func(s *siteclass.Site) {
			s.Ground.HighPlasticity = deposit(7, 61, 0, 0)
			s.Layers = []profile.Layer{{Top: 0, Bottom: 40, Vs: 500}}
		}},
		{"soft clay 3 m", "L", func(s *siteclass.Site) { s.Ground.SoftClay = deposit(3, 21, 40, 24) }},
		{"soft clay su 25", "M", func(s *siteclass.Site) { s.Ground.SoftClay = deposit(3, 21, 40, 25) }},
		// 4 m of 400 m/s and 21 m of 1200 m/s: 25/(4/400 + 21/1200) = 909.1
		// m/s, class R, and 4 m is no more than 4 m. 4.2 m: 25/(4.2/400 +
		// 20.8/1200) = 898.2 m/s, class F by itself.
		{"rock under 4 m", "R", func(s *siteclass.Site) { s.Layers = rock(4) }},
		{"rock under 4.2 m", "F", func(s *siteclass.Site) { s.Layers = rock(4.2) }},
		// 5 m of 600 m/s: 25/(5/600 + 20/1200) = 1000 m/s, R and barred.
		{"rock under 5 m", "F", func(s *siteclass.Site) {
			s.Layers = []profile.Layer{{Top: 0, Bottom: 6.5, Vs: 600}, {Top: 6.5, Bottom: 60, Vs: 1200}}
		}},
		// 450 m/s is printed in F and in M; the softer is taken.
		{"on the bound", "M", func(s *siteclass.Site) { s.Layers = []profile.Layer{{Top: 0, Bottom: 40, Vs: 450}} }},
		{"240 is M", "M", func(s *siteclass.Site) { s.Layers = []profile.Layer{{Top: 0, Bottom: 40, Vs: 240}} }},
		{"239 is L", "L", func(s *siteclass.Site) { s.Layers = []profile.Layer{{Top: 0, Bottom: 40, Vs: 239}} }},
	} {
		s := site()
		c.change(&s)
		d, err := example(t).Decide(s)
		if err != nil || d.Class != c.class {
			t.Errorf("%s: class %q (%v), want %s", c.name, d.Class, err, c.class)
		}
	}
}

func note(d siteclass.Decision, id string) string {
	for _, n := range d.Notes {
		if n.ID == id {
			return n.Text
		}
	}
	return ""
}

// Every built-in table of bands is written and read back to an equal code;
// every code with a rule of its own is refused, and nothing is written.
func TestRoundTripOfBuiltInCodes(t *testing.T) {
	written := 0
	for _, c := range siteclass.All() {
		var b bytes.Buffer
		err := Write(&b, c)
		if c.OwnRule() {
			var own *OwnRuleError
			if !errors.As(err, &own) || b.Len() > 0 {
				t.Errorf("%s has a rule of its own: %v, %d bytes written", c.ID, err, b.Len())
			}
			continue
		}
		if err != nil {
			t.Errorf("%s: %v", c.ID, err)
			continue
		}
		written++
		got, err := Read("local.yaml", b.Bytes())
		if err != nil {
			t.Errorf("%s: %v", c.ID, err)
			continue
		}
		want := *c
		want.ID += "-local"
		want.Edition += " (own table of a jurisdiction that its file does not name)"
		want.Own = &siteclass.Own{Edition: c.Edition, File: "local.yaml"}
		if diff := cmp.Diff(&want, got, cmpopts.IgnoreUnexported(siteclass.Code{}, siteclass.Route{}), cmpopts.EquateEmpty()); diff != "" {
			t.Errorf("%s: built in (-) and read back (+):\n%s", c.ID, diff)
		}
		if got.OwnRule() {
			t.Errorf("%s: the code read back has a rule of its own", c.ID)
		}
		settleAlike(t, c, got)
	}
	if written < 3 {
		t.Errorf("only %d built-in codes were written", written)
	}
}

// settleAlike decides under both codes at, below and above every bound.
func settleAlike(t *testing.T, a, b *siteclass.Code) {
	t.Helper()
	for _, band := range a.Bands {
		for _, l := range []siteclass.Limit{band.Vs.Lower, band.Vs.Upper} {
			for _, part := range []float64{1, 1 - 1e-8, 1 + 1e-8} {
				if l.Op == siteclass.Open {
					continue
				}
				s := siteclass.Site{Layers: []profile.Layer{{Top: 0, Bottom: 100, Vs: l.Value * part * a.Unit.Factor}}}
				x, errX := a.Decide(s)
				y, errY := b.Decide(s)
				if errX != nil || errY != nil || x.Class != y.Class {
					t.Errorf("%s at %v: class %s (%v), and %s (%v) as read back", a.ID, l.Value*part, x.Class, errX, y.Class, errY)
				}
			}
		}
	}
}

// What is read, written and read again is the same, and so is the text.
func TestExampleIsAFixedPoint(t *testing.T) {
	first := example(t)
	var a, b bytes.Buffer
	if err := Write(&a, first); err != nil {
		t.Fatal(err)
	}
	second, err := Read("example.yaml", a.Bytes())
	if err != nil {
		t.Fatalf("%v\n%s", err, a.String())
	}
	if diff := cmp.Diff(first, second, cmpopts.IgnoreUnexported(siteclass.Code{}, siteclass.Route{})); diff != "" {
		t.Errorf("read (-) and read again (+):\n%s", diff)
	}
	if err := Write(&b, second); err != nil || a.String() != b.String() {
		t.Errorf("%v: the second text differs from the first:\n%s", err, cmp.Diff(a.String(), b.String()))
	}
}

// A code that says what the form has no key for is refused rather than
// written without it.
func TestWriteRefusesWhatItCannotSay(t *testing.T) {
	for name, change := range map[string]func(*siteclass.Code){
		"kind":     func(c *siteclass.Code) { c.Conditions[0].Kind = siteclass.Geometry },
		"property": func(c *siteclass.Code) { c.Conditions[1].Limits[0].Property = siteclass.StiffVelocity },
		"operator": func(c *siteclass.Code) { c.Bands[3].Vs.Upper.Op = siteclass.Open },
		"about":    func(c *siteclass.Code) { c.Bands[0].Class = "" },
		"spaces":   func(c *siteclass.Code) { c.Title = "two  spaces" },
		"rules":    func(c *siteclass.Code) { c.Rules = []siteclass.Rule{{Class: "R"}} },
		"depth":    func(c *siteclass.Code) { c.Depth = 0 },
		"twice": func(c *siteclass.Code) {
			c.Conditions[1].Limits = append(c.Conditions[1].Limits, c.Conditions[1].Limits[0])
		},
	} {
		c := *example(t)
		c.Bands, c.Conditions = slices.Clone(c.Bands), slices.Clone(c.Conditions)
		change(&c)
		var b bytes.Buffer
		if err := Write(&b, &c); err == nil || b.Len() > 0 {
			t.Errorf("%s: %v, and %d bytes are written", name, err, b.Len())
		}
	}
}

func TestCells(t *testing.T) {
	limit := func(op siteclass.Operator, v float64) siteclass.Limit { return siteclass.Limit{Op: op, Value: v} }
	for text, want := range map[string]cell{
		"> 1200":             {Range: siteclass.Range{Lower: limit(siteclass.Above, 1200)}},
		">1200":              {Range: siteclass.Range{Lower: limit(siteclass.Above, 1200)}},
		"≥ 1200":             {Range: siteclass.Range{Lower: limit(siteclass.AtLeast, 1200)}},
		">= 600, <= 1200":    {Range: siteclass.Range{Lower: limit(siteclass.AtLeast, 600), Upper: limit(siteclass.AtMost, 1200)}},
		"< 1200, > 600":      {Range: siteclass.Range{Lower: limit(siteclass.Above, 600), Upper: limit(siteclass.Below, 1200)}},
		"600 to 1200":        {Range: siteclass.Range{Lower: limit(siteclass.Dash, 600), Upper: limit(siteclass.Dash, 1200)}},
		"600 – 1200":         {Range: siteclass.Range{Lower: limit(siteclass.Dash, 600), Upper: limit(siteclass.Dash, 1200)}},
		"to 20 kPa":          {Range: siteclass.Range{Upper: limit(siteclass.Dash, 20)}, unit: "kPa"},
		"about 5 to 20 m":    {Range: siteclass.Range{Lower: limit(siteclass.Dash, 5), Upper: limit(siteclass.Dash, 20)}, about: true, unit: "m"},
		"<= 365.76 ft/s":     {Range: siteclass.Range{Upper: limit(siteclass.AtMost, 365.76)}, unit: "ft/s"},
		"> 0.1, < 0.2 m":     {Range: siteclass.Range{Lower: limit(siteclass.Above, 0.1), Upper: limit(siteclass.Below, 0.2)}, unit: "m"},
		"  >=  40   %  ":     {Range: siteclass.Range{Lower: limit(siteclass.AtLeast, 40)}, unit: "%"},
		"> 123456789.012345": {Range: siteclass.Range{Lower: limit(siteclass.Above, 123456789.012345)}},
	} {
		got, err := parseCell(text)
		if err != nil || got != want {
			t.Errorf("%q is %+v (%v), want %+v", text, got, err, want)
		}
		if again, err := parseCell(got.String()); err != nil || again != got {
			t.Errorf("%q is written as %q, which reads as %+v (%v)", text, got, again, err)
		}
	}
	for text, want := range map[string]string{
		"":                                "no number",
		"fast":                            "no number",
		"1200":                            "without an operator",
		"> 1,200":                         "comma inside a number",
		"= 1200":                          "without an operator",
		"=> 1200":                         "without an operator",
		"> -5":                            `"-5", which is not a plain number`,
		"> 1e3":                           `"1e3", which is not a plain number`,
		"> 0x10":                          "not a plain number",
		"> .5":                            "not a plain number",
		"> 5 > 6":                         "not a plain number",
		"> 5, > 6":                        "two bounds on the same side",
		"> 5,":                            `has a unit`,
		"600 to 500":                      "ends below where it begins",
		"600 to 600":                      "ends below where it begins",
		"> 600, <600":                     "ends below where it begins",
		"600 to":                          "",
		"5 to 6 to 7":                     "not a plain number",
		"> ١٢":                            "no number",
		"> 99999999999999999999999999999": "not a plain number",
	} {
		c, err := parseCell(text)
		if err == nil && c.unit != "" {
			continue // read with the rest as its unit, which no caller knows
		}
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, want %q", text, err, want)
		}
	}
}

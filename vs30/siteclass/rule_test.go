package siteclass

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
)

// TestEveryBoundOfEveryRule holds the limits of rules and terms against the
// operators and numbers of the second transcription, below, at and above.
func TestEveryBoundOfEveryRule(t *testing.T) {
	seen := 0
	check := func(id string, cell Range, row []string) {
		for side, inside := range map[int]bool{0: false, 2: true} {
			if row[side] == "" {
				continue
			}
			bound, err := strconv.ParseFloat(row[side+1], 64)
			if err != nil {
				t.Fatal(err)
			}
			seen++
			owns := row[side] == "≥" || row[side] == "≤" || row[side] == "–"
			if got := cell.Contains(bound); got != owns {
				t.Errorf("%s, %s: %v inside is %v", id, cell, bound, got)
			}
			if got := bound == 0 || cell.Contains(bound*(1-step)) == inside; !got {
				t.Errorf("%s, %s: just below %v inside is %v", id, cell, bound, !inside)
			}
			if got := bound == 0 || cell.Contains(bound*(1+step)) == !inside; !got {
				t.Errorf("%s, %s: just above %v inside is %v", id, cell, bound, inside)
			}
		}
	}
	for _, c := range All() {
		tables, n := readTranscription(t, c.ID), 0
		for _, u := range c.Rules {
			for _, a := range u.Asks {
				check(c.ID+", "+a.Of, a.Range, tables["Rules"][n][3:7])
				n++
			}
			if len(u.Asks) == 0 {
				n++
			}
		}
		for i, term := range c.Terms {
			check(c.ID+", "+term.ID, term.Range, tables["Terms"][i][1:5])
		}
	}
	if seen < 150 {
		t.Errorf("only %d bounds seen", seen)
	}
}

// TestRulesAreComplete: every rule leads to a row, the code stands no better
// than its weakest rule, and every term states its bounds in words.
func TestRulesAreComplete(t *testing.T) {
	for _, c := range All() {
		for _, u := range c.Rules {
			if c.band(u.Class) < 0 || u.Standing == 0 || u.Standing > c.Standing {
				t.Errorf("%s: rule %q leads to %q and stands as %s, the code as %s", c.ID, u, u.Class, u.Standing, c.Standing)
			}
		}
		for _, term := range c.Terms {
			for _, l := range []Limit{term.Range.Lower, term.Range.Upper} {
				if l.Op != Open && !strings.Contains(term.Text, number(l.Value)) && c.ID != "ncse-02" && c.ID != "tec-2007" {
					t.Errorf("%s, %s: %q does not state %v", c.ID, term.ID, term.Text, l)
				}
			}
			if term.Clause == "" || term.Standing == 0 || c.term(term.ID).Text != term.Text {
				t.Errorf("%s: term %q is incomplete or there twice", c.ID, term.ID)
			}
		}
		if len(c.Rules) > 0 && c.decide == nil {
			t.Errorf("%s has rules and nothing that follows them", c.ID)
		}
	}
}

// TestRuleString: as the table prints it.
func TestRuleString(t *testing.T) {
	c, _ := Find("ec8-2024")
	want := []string{"H800 > 30, ≤ 100 m; vs,H ≥ 250, < 400 m/s"}
	if got := c.RulesOf("C"); len(got) != 1 || got[0] != want[0] {
		t.Errorf("category C is %q, want %q", got, want)
	}
	if got := c.RulesOf("E"); len(got) != 3 {
		t.Errorf("category E has %d rules: %q", len(got), got)
	}
	c, _ = Find("ec8-2004")
	if got := c.RulesOf("A"); got != nil {
		t.Errorf("type A of EN 1998-1:2004 has rules: %q", got)
	}
}

// TestLeastValue: what is known of a quantity of which the profile shows only
// the beginning. It is more than its value: more than the bound from the
// bound on, and possibly no more than the bound below it.
func TestLeastValue(t *testing.T) {
	for _, p := range []struct {
		cell Range
		v    float64
		want bool
	}{
		{above(20), 20, true}, {above(20), 19.9, false}, {above(20), 21, true},
		{atMost(20), 20, false}, {atMost(20), 19.9, true},
		{dash(3, 50), 50, false}, {dash(3, 50), 49, true}, {dash(3, 50), 3, true}, {dash(3, 50), 2, false},
		{below(5), 4.9, true}, {below(5), 5, false},
	} {
		f := Found{Value: p.v, AtLeast: true}
		if got := f.limits(p.cell).Contains(p.v); got != p.want {
			t.Errorf("more than %v, in %s: %v", p.v, p.cell, got)
		}
	}
}

// randomFound draws a value for every quantity that the rules of a code ask
// for, around their bounds.
func randomFound(random *rand.Rand, c *Code) []Found {
	var found []Found
	for _, u := range c.Rules {
		for _, a := range u.Asks {
			if u.Indicative || quantityOf(found, a.Of) != nil {
				continue
			}
			scale := max(c.lastBound(a.Of), 1e-3)
			found = append(found, Found{Of: a.Of, Value: scale * 1.5 * random.Float64()})
		}
	}
	return found
}

// TestMarginOfRules: one quantity moved just beyond the margin's bound gives
// the margin's class, and no quantity moved less far, in parts of itself,
// gives another class than the site's.
func TestMarginOfRules(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 8))
	margins := 0
	for _, c := range All() {
		if len(c.Rules) == 0 {
			continue
		}
		for range 500 {
			found := randomFound(random, c)
			r := &ruling{code: c, d: Decision{Class: c.ruled(found)}}
			if r.d.Class == "" {
				continue
			}
			r.nearRules(found)
			m, nearest := r.d.Margin, math.Inf(1)
			if m != nil {
				margins++
				nearest = math.Abs(m.Percent) / 100
				if !reaches(c, found, m.Percent/100, m.ToClass) {
					t.Fatalf("%s at %+v: nothing beyond %+v is class %s", c.ID, found, *m, m.ToClass)
				}
			}
			for i := range found {
				for range 20 {
					by := max(-0.99, (2*random.Float64()-1)*min(nearest, 3)*0.999)
					if class := moved(c, found, i, by); class != r.d.Class && class != "" {
						t.Fatalf("%s at %+v, class %s: %s moved by %v is class %s, and the margin is %+v", c.ID, found, r.d.Class, found[i].Of, by, class, m)
					}
				}
			}
		}
	}
	if margins < 3000 {
		t.Errorf("only %d margins", margins)
	}
}

// moved returns the class with quantity i changed by a part of itself.
func moved(c *Code, found []Found, i int, by float64) string {
	was := found[i].Value
	defer func() { found[i].Value = was }()
	found[i].Value *= 1 + by
	return c.ruled(found)
}

// reaches reports whether some quantity changed by just more than a part of
// itself gives the class.
func reaches(c *Code, found []Found, by float64, class string) bool {
	for i := range found {
		if moved(c, found, i, by+math.Copysign(1e-5, by)) == class {
			return true
		}
	}
	return false
}

// TestUnitsOfRules: every unit of a rule or term is one of SI, so that values
// need no conversion.
func TestUnitsOfRules(t *testing.T) {
	units := map[profile.Unit]bool{profile.Metre: true, profile.MetrePerSecond: true, profile.Kilopascal: true, second: true, blows: true, blowUnit: true, bare: true}
	for _, c := range All() {
		for _, u := range c.Rules {
			for _, a := range u.Asks {
				if !units[a.Unit] || a.Unit.Factor != 1 {
					t.Errorf("%s: %s has the unit %+v", c.ID, a, a.Unit)
				}
			}
		}
		for _, term := range c.Terms {
			if !units[term.Unit] {
				t.Errorf("%s: %s has the unit %+v", c.ID, term.ID, term.Unit)
			}
		}
	}
}

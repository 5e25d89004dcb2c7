package siteclass

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
)

// stateOf returns what became of a condition of a decision.
func stateOf(t *testing.T, d Decision, id string) State {
	t.Helper()
	for _, c := range d.Conditions {
		if c.Condition.ID == id {
			return c.State
		}
	}
	t.Fatalf("%s: no condition %s was looked at", d.Code.ID, id)
	return 0
}

// on is a site of uniform ground, in m/s, with something known of it.
func on(v float64, g Ground) Site {
	s := uniform(v)
	s.Ground = g
	return s
}

// of is a deposit of a thickness in m with nothing else known.
func of(thickness float64) Deposit { return Deposit{Thickness: profile.Known(thickness)} }

// with is a deposit with PI in %, w in % and su in kPa; NaN leaves one out.
func with(thickness, pi, w, su float64) Deposit {
	known := func(v float64) profile.Optional { return profile.Optional{Value: v, Known: !math.IsNaN(v)} }
	return Deposit{known(thickness), known(pi), known(w), known(su)}
}

var no = math.NaN()

// ft and psf in SI: 0.3048 m, and 0.45359237·9.80665/0.3048² Pa.
const (
	ft  = 0.3048
	psf = 0.45359237 * 9.80665 / (0.3048 * 0.3048) / 1000
)

// TestYesOrNoConditions: each is met by yes, not met by no, and listed in
// words where it is not known.
func TestYesOrNoConditions(t *testing.T) {
	set := map[string]func(*Ground, Answer){
		"liquefiable-soil": func(g *Ground, a Answer) { g.Liquefiable = a },
		"sensitive-clay":   func(g *Ground, a Answer) { g.Sensitive = a },
		"collapsible-soil": func(g *Ground, a Answer) { g.Collapsible = a },
	}
	seen := 0
	for _, c := range All() {
		for i := range c.Conditions {
			k := &c.Conditions[i]
			answer, ok := set[k.ID]
			if !ok {
				continue
			}
			seen++
			for a, want := range map[Answer]State{Yes: Met, No: NotMet, NotKnown: NotAssessed} {
				site := on(250, Ground{})
				answer(&site.Ground, a)
				d := decide(t, c.ID, site)
				if got := stateOf(t, d, k.ID); got != want {
					t.Errorf("%s, %s answered %d: %s, want %s", c.ID, k.ID, a, got, want)
				}
				if got := d.Class == k.Class; got != (a == Yes) {
					t.Errorf("%s, %s answered %d: class %s", c.ID, k.ID, a, d.Class)
				}
				if got := slices.Contains(d.Unassessed, k.Text); got != (a == NotKnown) {
					t.Errorf("%s, %s answered %d: listed as not assessed: %v", c.ID, k.ID, a, got)
				}
				if a == Yes && (d.Margin != nil || !strings.Contains(noteOf(d, "special-study"), "by the average alone, ")) {
					t.Errorf("%s, %s: margin %v, notes %v", c.ID, k.ID, d.Margin, d.Notes)
				}
			}
		}
	}
	if seen != 3*4+2+3*3+2*2+14*3 { // EN 1998-1, NTC 2008 and BNBC have no collapsible soil, NTC 2018, AASHTO 2011 and E.030 none of them
		t.Errorf("%d conditions seen", seen)
	}
}

// TestDeposits goes through the deposits of each code: above, at and below
// the printed limits. At a limit the printed operator decides.
func TestDeposits(t *testing.T) {
	type ground = func(Deposit) Ground
	peat := ground(func(d Deposit) Ground { return Ground{Peat: d} })
	plastic := ground(func(d Deposit) Ground { return Ground{HighPlasticity: d} })
	soft := ground(func(d Deposit) Ground { return Ground{SoftClay: d} })
	thick := ground(func(d Deposit) Ground { return Ground{ThickClay: d} })
	for _, p := range []struct {
		codes string
		id    string
		in    ground
		d     Deposit
		want  State
	}{
		// ASCE/SEI 7: > 10 ft of peat, > 25 ft of PI > 75, > 120 ft of su < 1,000 psf.
		{"asce-7-16 asce-7-22", "peat", peat, of(0), NotMet},
		{"asce-7-16 asce-7-22", "peat", peat, of(10 * ft), NotMet},
		{"asce-7-16 asce-7-22", "peat", peat, of(10.001 * ft), Met},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, of(25 * ft), NotMet},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, of(25.001 * ft), Met},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, with(26*ft, 75, no, no), NotMet},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, with(26*ft, 75.1, no, no), Met},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, with(no, 75.1, no, no), NotAssessed},
		{"asce-7-16 asce-7-22", "high-plasticity-clay", plastic, with(no, 60, no, no), NotMet},
		{"asce-7-16 asce-7-22", "soft-to-medium-clay", thick, of(120 * ft), NotMet},
		{"asce-7-16 asce-7-22", "soft-to-medium-clay", thick, of(120.1 * ft), Met},
		{"asce-7-16 asce-7-22", "soft-to-medium-clay", thick, with(121*ft, no, no, 1000*psf), NotMet},
		{"asce-7-16 asce-7-22", "soft-to-medium-clay", thick, with(121*ft, no, no, 999*psf), Met},
		// > 10 ft with su < 500 psf, w ≥ 40 % and PI > 20.
		{"asce-7-16 asce-7-22", "soft-clay", soft, of(10 * ft), NotMet},
		{"asce-7-16 asce-7-22", "soft-clay", soft, of(10.01 * ft), Met},
		{"asce-7-16 asce-7-22", "soft-clay", soft, with(11*ft, 20.1, 40, 499*psf), Met},
		{"asce-7-16 asce-7-22", "soft-clay", soft, with(11*ft, 20, 40, 499*psf), NotMet},
		{"asce-7-16 asce-7-22", "soft-clay", soft, with(11*ft, 20.1, 39.9, 499*psf), NotMet},
		{"asce-7-16 asce-7-22", "soft-clay", soft, with(11*ft, 20.1, 40, 500*psf), NotMet},
		{"asce-7-16 asce-7-22", "soft-clay", soft, with(11*ft, no, 40, no), Met},
		{"asce-7-16 asce-7-22", "soft-clay", soft, Deposit{}, NotAssessed},
		// NBCC 2015: > 3 m of peat, > 8 m of PI > 75, > 30 m of soft to medium clay.
		{"nbcc-2015 tbdy-2018", "peat", peat, of(3), NotMet},
		{"nbcc-2015 tbdy-2018", "peat", peat, of(3.01), Met},
		{"nbcc-2015 tbdy-2018", "high-plasticity-clay", plastic, of(8), NotMet},
		{"nbcc-2015 tbdy-2018", "high-plasticity-clay", plastic, of(8.01), Met},
		{"nbcc-2015", "high-plasticity-clay", plastic, with(9, 75, no, no), NotMet},
		{"nbcc-2015", "high-plasticity-clay", plastic, with(9, 76, no, no), Met},
		{"nbcc-2015", "soft-to-medium-clay", thick, of(30), NotMet},
		{"nbcc-2015", "soft-to-medium-clay", thick, of(30.1), Met},
		{"nbcc-2015", "soft-clay", soft, with(3.01, 20.1, 40, 24.9), Met},
		{"nbcc-2015", "soft-clay", soft, with(3, 20.1, 40, 24.9), NotMet},
		{"nbcc-2015 tbdy-2018", "soft-clay", soft, with(3.01, 20.1, 41, 25), NotMet},
		// TBDY 2018: PI > 50, > 35 m, and w > 40 % where the others have ≥.
		{"tbdy-2018", "high-plasticity-clay", plastic, with(9, 50, no, no), NotMet},
		{"tbdy-2018", "high-plasticity-clay", plastic, with(9, 51, no, no), Met},
		{"tbdy-2018", "soft-to-medium-clay", thick, of(35), NotMet},
		{"tbdy-2018", "soft-to-medium-clay", thick, of(35.1), Met},
		{"tbdy-2018", "soft-clay", soft, with(3.01, 20.1, 40, 24.9), NotMet},
		{"tbdy-2018", "soft-clay", soft, with(3.01, 20.1, 40.1, 24.9), Met},
		// EN 1998-1: ≥ 10 m of PI > 40; cu to 20 kPa.
		{"ec8-2004", "soft-clay", soft, of(9.99), NotMet},
		{"ec8-2004", "soft-clay", soft, of(10), Met},
		{"ec8-2004", "soft-clay", soft, with(10, 40, no, no), NotMet},
		{"ec8-2004", "soft-clay", soft, with(10, 41, 80, 20), Met},
		{"ec8-2004", "soft-clay", soft, with(10, 41, no, 21), NotMet},
		{"ec8-2004", "soft-clay", soft, with(10, 41, no, 8), Met},
	} {
		for id := range strings.SplitSeq(p.codes, " ") {
			d := decide(t, id, on(250, p.in(p.d)))
			if got := stateOf(t, d, p.id); got != p.want {
				t.Errorf("%s, %s with %+v: %s, want %s", id, p.id, p.d, got, p.want)
			}
			var k *Condition
			for i := range d.Code.Conditions {
				if d.Code.Conditions[i].ID == p.id {
					k = &d.Code.Conditions[i]
				}
			}
			if got := d.Class == k.Class; got != (p.want == Met) {
				t.Errorf("%s, %s with %+v: class %s", id, p.id, p.d, d.Class)
			}
			if got := slices.Contains(d.Unassessed, k.Text); got != (p.want == NotAssessed) {
				t.Errorf("%s, %s with %+v: listed as not assessed: %v", id, p.id, p.d, got)
			}
		}
	}
}

// TestDepositAssumed: a thickness alone is taken for ground of the code's own
// definition, and said so; a property that is known is compared.
func TestDepositAssumed(t *testing.T) {
	d := decide(t, "asce-7-16", on(400, Ground{SoftClay: of(4)}))
	want := "soft clay: no value is stated for undrained strength < 500 psf, water content ≥ 40 %, plasticity index > 20; the limit is taken to be met"
	if got := noteOf(d, "deposit-assumed"); d.Class != "E" || got != want {
		t.Errorf("class %s, %q", d.Class, got)
	}
	if got := noteOf(d, "override"); got != "class E whatever the average (20.3.2); by the average alone, 1,312 ft/s, the class would be C" {
		t.Errorf("override: %q", got)
	}
	d = decide(t, "asce-7-16", on(400, Ground{SoftClay: with(4, 30, 50, 20)}))
	if got := noteOf(d, "deposit-assumed"); got != "" || d.Class != "E" {
		t.Errorf("all known: class %s, %q", d.Class, got)
	}
	var texts []string
	for _, s := range d.Steps {
		texts = append(texts, s.String())
	}
	if got := strings.Join(texts[:4], "\n"); got != `soft clay, total thickness: 13.1 ft > 10 ft: yes (20.3.2)
soft clay, undrained strength: 417.7 psf < 500 psf: yes (20.3.2)
soft clay, water content: 50 % ≥ 40 %: yes (20.3.2)
soft clay, plasticity index: 30 > 20: yes (20.3.2)` {
		t.Errorf("steps:\n%s", got)
	}
	d = decide(t, "asce-7-16", on(400, Ground{SoftClay: of(2)}))
	if got := noteOf(d, "deposit-assumed"); got != "" || d.Class != "C" {
		t.Errorf("2 m are too thin for anything to be assumed: class %s, %q", d.Class, got)
	}
}

// TestSpecialBeforeSoft: class F is looked at before class E, whatever the
// average; the conditions below are still assessed.
func TestSpecialBeforeSoft(t *testing.T) {
	for id, class := range map[string]string{"asce-7-16": "F", "asce-7-22": "F", "nbcc-2015": "F", "tbdy-2018": "ZF"} {
		d := decide(t, id, on(400, Ground{Peat: of(5), SoftClay: of(5)}))
		if d.Class != class || stateOf(t, d, "soft-clay") != Met || stateOf(t, d, "rock-cover") != NotApplicable {
			t.Errorf("%s: class %s, conditions %v", id, d.Class, d.Conditions)
		}
	}
	d := decide(t, "ec8-2004", on(400, Ground{Liquefiable: Yes, SoftClay: of(12)}))
	if d.Class != "S2" || stateOf(t, d, "soft-clay") != Met {
		t.Errorf("EN 1998-1: class %s", d.Class)
	}
}

// TestOtherwise: ASCE/SEI 7-16 counts PI > 75 only where the class would
// otherwise be D or E, 7-22 where CD, D, DE or E. 400 m/s = 1,312 ft/s is C
// in 7-16 and CD in 7-22; 500 m/s = 1,640 ft/s is C in both.
func TestOtherwise(t *testing.T) {
	clay := with(10, 80, no, no)
	for _, p := range []struct {
		id    string
		v     float64
		soft  Deposit
		state State
		class string
	}{
		{"asce-7-16", 300, of(0), Met, "F"},
		{"asce-7-16", 400, of(0), NotApplicable, "C"},
		{"asce-7-16", 400, Deposit{}, NotAssessed, "C"}, // soft clay would make it E
		{"asce-7-16", 400, of(5), Met, "F"},             // soft clay does
		{"asce-7-22", 400, of(0), Met, "F"},
		{"asce-7-22", 500, of(0), NotApplicable, "C"},
		{"nbcc-2015", 500, of(0), Met, "F"}, // no such restriction
		{"tbdy-2018", 500, of(0), Met, "ZF"},
	} {
		d := decide(t, p.id, on(p.v, Ground{HighPlasticity: clay, SoftClay: p.soft}))
		if got := stateOf(t, d, "high-plasticity-clay"); got != p.state || d.Class != p.class {
			t.Errorf("%s at %v m/s with soft clay %v: %s, class %s; want %s, %s", p.id, p.v, p.soft.Thickness, got, d.Class, p.state, p.class)
		}
		if set := p.state == NotApplicable || p.state == NotAssessed; (noteOf(d, "otherwise") != "") != set {
			t.Errorf("%s at %v m/s: note %q", p.id, p.v, noteOf(d, "otherwise"))
		}
	}
	d := decide(t, "asce-7-16", on(400, Ground{HighPlasticity: clay, SoftClay: of(0)}))
	if d.Standing != FromMemory {
		t.Errorf("a restriction from memory set the clay aside, the decision stands as %s", d.Standing)
	}
	d = decide(t, "asce-7-16", on(400, Ground{SoftClay: of(0)}))
	if got := stateOf(t, d, "high-plasticity-clay"); got != NotApplicable || d.Standing != Checked {
		t.Errorf("class C, nothing stated: %s, %s", got, d.Standing)
	}
}

// TestNotAsked: ground that a code has no rule for does not go unsaid.
func TestNotAsked(t *testing.T) {
	everything := Ground{Liquefiable: Yes, Sensitive: Yes, Collapsible: Yes, Peat: of(5), HighPlasticity: of(9), SoftClay: of(12), ThickClay: of(40)}
	for id, want := range map[string]int{"asce-7-16": 0, "asce-7-22": 0, "nbcc-2015": 0, "tbdy-2018": 0, "ec8-2004": 4, "ntc-2018": 7} {
		d, n := decide(t, id, on(250, everything)), 0
		for _, note := range d.Notes {
			if note.ID == "not-asked" {
				n++
			}
		}
		if n != want {
			t.Errorf("%s: %d facts not asked for, want %d", id, n, want)
		}
	}
	if d := decide(t, "ntc-2018", on(250, Ground{Liquefiable: No, Peat: of(0)})); noteOf(d, "not-asked") != "" {
		t.Errorf("nothing is there, yet %q", noteOf(d, "not-asked"))
	}
}

// TestUnassessedInWords: with nothing known, every code lists what it would
// ask, with the printed limits.
func TestUnassessedInWords(t *testing.T) {
	d := decide(t, "tbdy-2018", uniform(250))
	want := []string{
		"liquefiable soil",
		"highly sensitive clay",
		"collapsible, weakly cemented soil",
		"peat or clay of high organic content more than 3 m thick in all",
		"clay of PI > 50 more than 8 m thick in all",
		"soft to medium stiff clay more than 35 m thick",
		"more than 3 m in all of soft clay: PI > 20, w > 40 % and cu < 25 kPa",
	}
	if got := fmt.Sprint(d.Unassessed); got != fmt.Sprint(want) {
		t.Errorf("not assessed: %s", got)
	}
	for id, n := range map[string]int{"asce-7-16": 7, "asce-7-22": 7, "nbcc-2015": 7, "ec8-2004": 3, "ntc-2018": 0} {
		if d := decide(t, id, uniform(250)); len(d.Unassessed) != n {
			t.Errorf("%s lists %d: %q", id, len(d.Unassessed), d.Unassessed)
		}
	}
}

// TestAbsentGroundWeighsNothing: a deposit that is not there rests on no
// limit, whatever its standing; one that is thinner than the limit does.
func TestAbsentGroundWeighsNothing(t *testing.T) {
	if d := decide(t, "asce-7-16", on(400, Ground{SoftClay: of(0)})); d.Standing != Checked {
		t.Errorf("no soft clay: %s", d.Standing)
	}
	if d := decide(t, "asce-7-16", on(400, Ground{SoftClay: of(1)})); d.Standing != OneSource {
		t.Errorf("1 m of soft clay against 10 ft from one source: %s", d.Standing)
	}
	if d := decide(t, "asce-7-16", on(1600, Ground{})); d.Class != "A" || d.Standing != Checked {
		t.Errorf("rock without soil: class %s, %s", d.Class, d.Standing)
	}
}

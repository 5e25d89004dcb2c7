package siteclass

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
)

// randomSite is ground of up to eight layers, some with a gradient, with
// anything else known or not: of one site in three the layers state blow
// counts, strengths and indices.
func randomSite(random *rand.Rand) Site {
	var layers []profile.Layer
	top := 0.0
	for range 1 + random.IntN(8) {
		l := profile.Layer{Top: top, Bottom: top + 0.5 + 12*random.Float64(), Vs: 60 * math.Exp(3.4*random.Float64())}
		if random.IntN(3) == 0 {
			l.VsBottom = l.Vs * (0.5 + 2*random.Float64())
		}
		l.Basis = profile.Basis(random.IntN(4))
		layers = append(layers, l)
		top = l.Bottom
	}
	layers = append(layers, profile.Layer{Top: top, Bottom: math.Inf(1), Vs: 60 * math.Exp(3.6*random.Float64())})
	s := siteOf(layers...)
	maybe := func(scale float64) profile.Optional {
		return profile.Optional{Value: scale * random.Float64(), Known: random.IntN(2) == 0}
	}
	deposit := func() Deposit { return Deposit{maybe(20), maybe(100), maybe(90), maybe(60)} }
	answer := func() Answer { return Answer(min(2, random.IntN(12)/5)) }
	s.Datum, s.FoundationDepth = maybe(6), maybe(6)
	if !s.Datum.Known {
		s.Datum = profile.Optional{}
	}
	if random.IntN(2) == 0 {
		thick := deposit()
		thick.Thickness.Value *= 3
		s.Ground = Ground{answer(), answer(), answer(), deposit(), deposit(), deposit(), thick}
	}
	if random.IntN(3) == 0 {
		testSoil(random, layers)
	}
	s.Profile.Survey.DepthReached = 40 * random.Float64()
	return s
}

// testSoil lets each layer state what tests of the soil would, most of the
// layers everything.
func testSoil(random *rand.Rand, layers []profile.Layer) {
	for i := range layers {
		l := &layers[i]
		l.N, l.Su = float64(random.IntN(140)), 400*random.Float64()
		l.PI, l.WaterContent = float64(random.IntN(90)), 100*random.Float64()
		l.Refusal = random.IntN(8) == 0
		for _, g := range []profile.Given{profile.GivenN, profile.GivenSu, profile.GivenPI, profile.GivenWaterContent} {
			if random.IntN(10) > 0 {
				l.Given |= g
			}
		}
	}
}

// TestRandomSites: whatever the ground, a decision is whole: a class of the
// code, numbers that JSON can carry, and texts without a slip of formatting.
func TestRandomSites(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 5))
	seen := map[string]int{}
	for range 1500 {
		site := randomSite(random)
		for _, c := range timed() {
			d, err := c.Decide(site)
			if err != nil {
				t.Fatalf("%s: %v", c.ID, err)
			}
			if c.band(d.Row) < 0 && (c.Outside == "" || d.Row != c.Outside) && c.ID != "ncse-02" {
				t.Fatalf("%s: class %q is none of the code", c.ID, d.Class)
			}
			seen[c.ID+" "+d.Row]++
			text, err := json.Marshal(struct {
				Steps  []Step
				Notes  []profile.Note
				Margin *Margin
			}{d.Steps, d.Notes, d.Margin})
			if err != nil || strings.Contains(string(text), "%!") || strings.Contains(string(text), "NaN") {
				t.Fatalf("%s: %v, %s", c.ID, err, text)
			}
			if len(d.Conditions) != len(c.Conditions) {
				t.Fatalf("%s: %d of %d conditions were looked at", c.ID, len(d.Conditions), len(c.Conditions))
			}
		}
	}
	for _, c := range columned() {
		for _, b := range c.Bands {
			rare := c.ID == "ds61-2011" && b.Class == "B" // sand of N1 ≥ 50 throughout
			if seen[c.ID+" "+b.Class] == 0 && reachable(c, &b) && !rare {
				t.Errorf("%s: no random site is class %s; the test tests too little", c.ID, b.Class)
			}
		}
	}
}

// reachable reports whether velocities, or what a site states of its ground,
// can lead to a row.
func reachable(c *Code, b *Band) bool {
	if b.gives(AverageVs) {
		return true
	}
	return slices.ContainsFunc(c.Conditions, func(k Condition) bool { return k.Class == b.Class && k.Fact != Described })
}

// TestSplittingALayerChangesNothing: every layer cut in two at a random depth
// gives the same class, margin and comparisons.
func TestSplittingALayerChangesNothing(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 6))
	for range 1000 {
		site := randomSite(random)
		cut := site
		cut.Layers = nil
		for _, l := range site.Profile.Layers {
			if l.HalfSpace() {
				cut.Layers = append(cut.Layers, l)
				continue
			}
			z := l.Top + (l.Bottom-l.Top)*(0.1+0.8*random.Float64())
			upper, lower := l, l
			upper.Bottom, lower.Top = z, z
			if l.Gradient() {
				upper.VsBottom, lower.Vs = l.VsAt(z), l.VsAt(z)
			}
			cut.Layers = append(cut.Layers, upper, lower)
		}
		for _, c := range timed() {
			whole, err := c.Decide(site)
			if err != nil {
				t.Fatal(err)
			}
			split, err := c.Decide(cut)
			if err != nil || split.Class != whole.Class || !slices.EqualFunc(whole.Steps, split.Steps, sameStep) {
				t.Fatalf("%s: class %s, split %s, %v\n%v\n%v", c.ID, whole.Class, split.Class, err, whole.Steps, split.Steps)
			}
		}
	}
}

func sameStep(a, b Step) bool {
	close := math.Abs(a.Value-b.Value) <= 1e-9*math.Abs(a.Value)+1e-12
	return a.Clause == b.Clause && a.Operator == b.Operator && a.Bound == b.Bound && a.Unit == b.Unit && a.Holds == b.Holds && close
}

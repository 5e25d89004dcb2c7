package siteclass

import (
	"math"
	"math/rand/v2"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// TestQuick holds the quick decision against Decide, under all codes, over
// random profiles of plain velocities: where it decides, all that it says is
// what Decide says, and Decide has nothing more to say of the profile.
func TestQuick(t *testing.T) {
	random := rand.New(rand.NewPCG(7, 22))
	decided, codes := map[string]int{}, 0
	for _, c := range All() {
		for _, datum := range []profile.Optional{{}, profile.Known(0), profile.Known(2.5)} {
			q := c.Quick(datum, profile.Optional{})
			if q == nil {
				continue
			}
			codes++
			for range 4000 {
				site := plainSite(random, c)
				site.Datum = datum
				v, ok := q.Decide(site.Profile.Layers)
				if !ok {
					continue
				}
				decided[c.ID]++
				compareQuick(t, c, site, v)
			}
		}
		if c.decide == nil && c.Quick(profile.Optional{}, profile.Optional{}) != nil && decided[c.ID] < 3000 {
			t.Errorf("%s: only %d of 12000 profiles were decided", c.ID, decided[c.ID])
		}
	}
	if codes < 3*15 || decided["asce-7-22"] < 5000 {
		t.Errorf("%d codes and data, %d profiles under asce-7-22", codes, decided["asce-7-22"])
	}
}

// plainSite is a profile of layers that state velocities alone; one in eight is
// put on a bound of the code, or very near one.
func plainSite(random *rand.Rand, c *Code) Site {
	var layers []profile.Layer
	top, base := 0.0, 60*math.Exp(3.6*random.Float64())
	for range 1 + random.IntN(12) {
		l := profile.Layer{Top: top, Bottom: top + 0.5 + 9*random.Float64(), Vs: base * (0.7 + 0.8*random.Float64())}
		layers = append(layers, l)
		top = l.Bottom
	}
	if random.IntN(3) > 0 {
		layers[len(layers)-1].Bottom = 60
		if random.IntN(3) == 0 {
			layers[len(layers)-1].Bottom = math.Inf(1)
		}
	}
	if bounds := c.bounds(); random.IntN(8) == 0 && len(bounds) > 0 {
		v := bounds[random.IntN(len(bounds))] * c.Unit.Factor * (1 + []float64{0, 1e-12, -1e-12, 1e-8, -1e-8, 1e-3, -1e-3}[random.IntN(7)])
		layers = []profile.Layer{{Bottom: 60, Vs: v}}
	}
	return siteOf(layers...)
}

func compareQuick(t *testing.T, c *Code, site Site, v Verdict) {
	t.Helper()
	d, err := c.Decide(site)
	if err != nil {
		t.Fatalf("%s: %v", c.ID, err)
	}
	to, percent := "", 0.0
	if d.Margin != nil {
		to, percent = d.Margin.ToClass, d.Margin.Percent
	}
	want := Verdict{d.Class, d.Velocity, d.Thickness, d.Datum, d.Standing, to, percent, false, v.Vs30}
	if average, err := vs30.Average(site.Profile.Layers, d.Datum, 30); v.Vs30 != 0 && (err != nil || average != v.Vs30) {
		t.Errorf("%s: Vs30 %v, want %v, %v", c.ID, v.Vs30, average, err)
	}
	for _, n := range d.Notes {
		switch n.ID {
		case "adopted", "superseded", "standing", "own-table", "datum-assumed", "datum-other", "datum-foundation":
		case "reversal":
			want.Reversed = true
			if text, _ := AppendReversal(nil, site.Profile.Layers, d.Datum, d.Datum+d.Thickness); string(text) != n.Text {
				t.Errorf("%s: reversal %q, want %q", c.ID, text, n.Text)
			}
		default:
			t.Errorf("%s: Decide notes %s: %s", c.ID, n.ID, n.Text)
		}
	}
	if v != want || d.Route != "velocity" || d.Basis != "not stated" || d.Row != d.Class || d.Classes != nil {
		t.Errorf("%s of %+v:\ngot  %+v\nwant %+v, route %s, basis %s", c.ID, site.Profile.Layers, v, want, d.Route, d.Basis)
	}
}

// TestAppendShort: the quick text of a number is that of short.
func TestAppendShort(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 4))
	for range 200000 {
		v := math.Exp(13*random.Float64() - 3)
		if scale := []float64{0, 1, 10, 100, 1000}[random.IntN(5)]; scale > 0 {
			v = math.Round(v*scale) / scale
		}
		if random.IntN(10) == 0 {
			v += 0.5
		}
		if got := string(appendShort(nil, v)); got != digits(v, 4) {
			t.Fatalf("%v: got %s, want %s", v, got, digits(v, 4))
		}
		other := v + math.Round(2*random.Float64())*math.Pow(10, -6*random.Float64())
		if got, want := string(appendBeside(nil, v, other)), moreBeside(v, other); got != want {
			t.Fatalf("%v beside %v: got %s, want %s", v, other, got, want)
		}
		if got, want := string(appendPair(nil, v, " to ", other)), moreBeside(v, other)+" to "+moreBeside(other, v); got != want {
			t.Fatalf("got %s, want %s", got, want)
		}
	}
}

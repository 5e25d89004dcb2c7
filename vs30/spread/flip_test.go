package spread

import (
	"math"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// 10 m at 200 and 20 m at 400 m/s: 0.05 + 0.05 = 0.1 s, 300 m/s. For 360 m/s
// 30/360 = 0.083333 s are needed, 0.016667 s less: the upper layer has
// 0.05/0.033333 = 1.5 times its velocity then, 300 m/s, the lower one 600. For
// 180 m/s 0.166667 s, 0.066667 s more: 0.05/0.116667 = 0.428571 times, 85.71 and
// 171.43 m/s.
func TestFlips(t *testing.T) {
	softer, stiffer, err := Flips(pairs(10, 200, 30, 400), 0, 30, nehrp)
	if err != nil {
		t.Fatal(err)
	}
	if stiffer.Class != "C" || stiffer.Bound != 360 || softer.Class != "E" || softer.Bound != 180 {
		t.Fatalf("flips to %s at %g and %s at %g", softer.Class, softer.Bound, stiffer.Class, stiffer.Bound)
	}
	near(t, "velocity", stiffer.Velocity, 300, 1e-9)
	near(t, "factor of all", stiffer.Factor, 1.2, 1e-12)
	near(t, "time", stiffer.Time, -0.0166667, 5e-8)
	for i, v := range []float64{300, 600} {
		near(t, "factor up", stiffer.Layers[i].Factor, 1.5, 1e-12)
		near(t, "velocity up", stiffer.Layers[i].Velocity, v, 1e-9)
	}
	near(t, "factor of all, down", softer.Factor, 0.6, 1e-12)
	for i, v := range []float64{85.714286, 171.428571} {
		near(t, "factor down", softer.Layers[i].Factor, 0.428571, 5e-7)
		near(t, "velocity down", softer.Layers[i].Velocity, v, 1e-6)
	}
}

// Changing one layer as told brings the average to the bound, for random
// profiles with gradients and from a datum; what cannot be done is said.
func TestFlipsBringTheAverageToTheBound(t *testing.T) {
	rng := seeded(9)
	possible, impossible := 0, 0
	for range 300 {
		layers := growing(rng)
		for i := range layers {
			if rng.IntN(3) == 0 {
				layers[i].VsBottom = layers[i].Vs * (0.9 + 0.5*rng.Float64())
			}
		}
		from := 3 * rng.Float64()
		softer, stiffer, err := Flips(layers, from, 30, nehrp)
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range []*Flip{softer, stiffer} {
			if f == nil {
				continue
			}
			for _, l := range f.Layers {
				changed := append([]profile.Layer(nil), layers...)
				factor := l.Factor
				if !l.Possible() {
					impossible++
					if factor = 1e9; f.Time > 0 && !hasSpeed(l.Impossible) {
						t.Errorf("layer %d cannot be slowed: %s", l.Layer, l.Impossible)
					}
				} else {
					possible++
				}
				if l.Possible() == (l.Factor == 0 || l.Velocity == 0) {
					t.Errorf("layer %d: %+v", l.Layer, l)
				}
				changed[l.Layer].Vs *= factor
				changed[l.Layer].VsBottom *= factor
				v, err := vs30.Average(changed, from, 30)
				if err != nil {
					t.Fatal(err)
				}
				if l.Possible() {
					near(t, "average", v, f.Bound, 1e-9*v)
				} else if v > f.Bound*(1+1e-6) && !hasSpeed(l.Impossible) {
					t.Errorf("layer %d could: %g m/s above %g", l.Layer, v, f.Bound)
				}
			}
			if best, ok := f.Easiest(); ok {
				for _, l := range f.Layers {
					if l.Possible() && math.Abs(math.Log(l.Factor)) < math.Abs(math.Log(best.Factor)) {
						t.Errorf("layer %d is easier than the easiest", l.Layer)
					}
				}
			}
		}
	}
	if possible < 500 || impossible < 100 {
		t.Errorf("%d possible, %d impossible: too few to tell", possible, impossible)
	}
}

// hasSpeed reports whether a layer cannot because of the velocity it would have
// to have.
func hasSpeed(why string) bool { return len(why) > 0 && why[len(why)-3:] == "m/s" }

// At a bound the class is the softer one, and the way up takes next to nothing;
// at the ends of the table one way is missing.
func TestFlipAtTheEnds(t *testing.T) {
	softer, stiffer, err := Flips(pairs(40, 360), 0, 30, nehrp)
	if err != nil {
		t.Fatal(err)
	}
	if stiffer.Class != "C" || softer.Class != "E" {
		t.Errorf("flips to %s and %s, want E and C", softer.Class, stiffer.Class)
	}
	near(t, "factor at the bound", stiffer.Factor, 1, 1e-12)
	if softer, stiffer, _ := Flips(pairs(40, 100), 0, 30, nehrp); softer != nil || stiffer.Class != "D" {
		t.Error("class E flips softer, or not to D")
	}
	if softer, stiffer, _ := Flips(pairs(40, 2000), 0, 30, nehrp); stiffer != nil || softer.Class != "B" {
		t.Error("class A flips stiffer, or not to B")
	}
	if _, _, err := Flips(pairs(20, 100), 0, 30, nehrp); err == nil {
		t.Error("a profile that is too short flips")
	}
	// 29.9 m at 100 and 0.1 m at 5000 m/s: the thin layer saves nothing.
	_, stiffer, err = Flips(pairs(29.9, 100, 5, 5000), 0, 30, nehrp)
	if err != nil {
		t.Fatal(err)
	}
	if l := stiffer.Layers[1]; l.Possible() || l.Factor != 0 {
		t.Errorf("the thin layer does it alone: %+v", l)
	}
	if best, ok := stiffer.Easiest(); !ok || best.Layer != 0 {
		t.Errorf("the easiest is %+v", best)
	}
}

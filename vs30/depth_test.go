package vs30

import (
	"errors"
	"math"
	"testing"

	"shearbook/profile"
)

func TestDepthTo(t *testing.T) {
	ground := stack(5, 200, 10, 400, 10, 350, 20, 900)
	rising := stack(10, 200, 20, 300, 10, 800)
	rising[1].VsBottom = 500 // 360 m/s 6 m below its top at 10 m, by hand
	crust := stack(2, 800, 8, 300, 20, 800)
	falling := gradient(30, 800, 400)
	edge := stack(10, 200, 20, 760*(1-1e-12), 10, 1500)
	space := stack(10, 200, 20, 1500)
	space[1].Bottom = math.Inf(1)
	for _, c := range []struct {
		name     string
		layers   []profile.Layer
		velocity float64
		want     Crossing
	}{
		{"reached and left again", ground, 360, Crossing{true, 5, false}},
		{"reached to stay", ground, 760, Crossing{true, 25, true}},
		{"exactly a layer's velocity", ground, 400, Crossing{true, 5, false}},
		{"slowest layer", ground, 100, Crossing{true, 0, true}},
		{"not reached", ground, 1500, Crossing{}},
		{"inside a gradient", rising, 360, Crossing{true, 16, true}},
		{"at the bottom of a gradient", rising, 500, Crossing{true, 30, true}},
		{"a crust over slower ground", crust, 800, Crossing{true, 0, false}},
		{"a falling gradient", falling, 600, Crossing{true, 0, false}},
		{"1e-12 below the velocity", edge, 760, Crossing{true, 10, true}},
		{"half-space", space, 800, Crossing{true, 10, true}},
		{"no layers", nil, 360, Crossing{}},
	} {
		got := DepthTo(c.layers, c.velocity)
		if got.Reached != c.want.Reached || got.Stays != c.want.Stays || math.Abs(got.Depth-c.want.Depth) > 1e-12 {
			t.Errorf("%s: %+v, want %+v", c.name, got, c.want)
		}
	}
}

// No depth above the crossing is as fast, the crossing itself is, and where it
// stays so is every depth below.
func TestDepthToRandomProfiles(t *testing.T) {
	rng := seeded(30)
	for range 500 {
		layers := randomLayers(rng, true)
		velocity := 100 + 1000*rng.Float64()
		c := DepthTo(layers, velocity)
		slower := false
		for _, l := range layers {
			for k := range 50 {
				z := l.Top + (l.Bottom-l.Top)*(float64(k)+0.5)/50
				fast := l.VsAt(z) >= velocity
				if fast && (!c.Reached || z < c.Depth-1e-9) {
					t.Fatalf("%g m/s at %g m, but %+v", l.VsAt(z), z, c)
				}
				slower = slower || (!fast && z > c.Depth+1e-9)
			}
		}
		if c.Reached && c.Stays && slower {
			t.Fatalf("slower below, but %+v", c)
		}
	}
}

func TestAboveRock(t *testing.T) {
	layers := stack(5, 200, 10, 400, 20, 900)
	for _, c := range []struct{ from, velocity float64 }{
		{0, 300},         // 15/(5/200 + 10/400) by hand
		{3, 12 / 0.035},  // 2/200 + 10/400 by hand
		{5, 400},         // one layer
		{14.9, 400},      // its last 0.1 m
		{1, 14 / 0.0450}, // 4/200 + 10/400 by hand
	} {
		v, depth, err := AboveRock(layers, c.from, 800)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "average above rock", v, c.velocity, 1e-9)
		near(t, "depth of rock", depth, 15, 1e-12)
	}

	if _, _, err := AboveRock(layers, 0, 1500); !errors.Is(err, ErrNoRock) {
		t.Errorf("error %v, want ErrNoRock", err)
	}
	for _, from := range []float64{15, 15 - 1e-12, 20} {
		if _, _, err := AboveRock(layers, from, 800); !errors.Is(err, ErrNoSoil) {
			t.Errorf("from %g m: error %v, want ErrNoSoil", from, err)
		}
	}

	// A hard crust above the datum is not the rock below it.
	crust := stack(2, 900, 10, 300, 20, 900)
	v, depth, err := AboveRock(crust, 2, 800)
	if err != nil || math.Abs(v-300) > 1e-9 || depth != 12 {
		t.Errorf("below the crust: %g m/s to %g m, %v; want 300 m/s to 12 m", v, depth, err)
	}
}

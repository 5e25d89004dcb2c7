package vs30

import (
	"math"
	"testing"

	"shearbook/profile"
)

func TestCurve(t *testing.T) {
	got := Curve(stack(5, 200, 10, 400, 30, 500), 0, 20, 4)
	// By hand: the time to 5 m is 0.025 s, to 15 m 0.05 s, to 20 m 0.06 s.
	want := []Point{{0, 200}, {4, 200}, {5, 200}, {8, 8 / 0.0325}, {12, 12 / 0.0425}, {15, 300}, {16, 16 / 0.052}, {20, 20 / 0.06}}
	if len(got) != len(want) {
		t.Fatalf("%v, want %v", got, want)
	}
	for i := range want {
		near(t, "depth", got[i].Depth, want[i].Depth, 1e-12)
		near(t, "average", got[i].Average, want[i].Average, 1e-9)
	}
}

// Depths grow, every point is the average that Average gives, and the
// interfaces and both ends are among them.
func TestCurveIsTheAverage(t *testing.T) {
	rng := seeded(10)
	for range 300 {
		layers := randomLayers(rng, true)
		from, to := 5*rng.Float64(), 30+10*rng.Float64()
		points := Curve(layers, from, to, 0.1+rng.Float64())
		near(t, "first", points[0].Depth, from, 0)
		near(t, "last", points[len(points)-1].Depth, to, 1e-12)
		seen := map[float64]bool{}
		for i, p := range points[1:] {
			seen[p.Depth] = true
			if p.Depth <= points[i].Depth {
				t.Fatalf("depth %v after %v", p.Depth, points[i].Depth)
			}
			want := average(t, layers, from, p.Depth-from)
			near(t, "average", p.Average, want, 1e-11*want)
		}
		for _, b := range Interfaces(layers, from, to) {
			if !seen[b.Depth] {
				t.Fatalf("no point at the interface at %v m", b.Depth)
			}
		}
	}
}

func TestCurveEdges(t *testing.T) {
	ground := stack(10, 200, 20, 400)
	space := stack(10, 200, 20, 400)
	space[1].Bottom = math.Inf(1)
	for _, c := range []struct {
		name           string
		layers         []profile.Layer
		from, to, step float64
		points         int
		end            float64
	}{
		{"short profile", ground, 0, 50, 10, 4, 30}, // 0, 10, 20, 30
		{"no step", ground, 0, 30, 0, 3, 30},
		{"step that is not a number", ground, 0, 30, math.NaN(), 3, 30},
		{"step far too small", ground, 0, 30, 1e-300, curveSteps + 2, 30},
		{"half-space", space, 0, math.Inf(1), 5, 3, 10}, // 0, 5, 10
		{"half-space to a depth", space, 0, 20, 5, 5, 20},
	} {
		points := Curve(c.layers, c.from, c.to, c.step)
		if n := len(points); n != c.points || points[n-1].Depth != c.end {
			t.Errorf("%s: %d points, want %d down to %g m", c.name, n, c.points, c.end)
		}
	}
	if points := Curve(ground, 30, 40, 1); points != nil {
		t.Errorf("below the profile: %v, want none", points)
	}
	if points := Curve(nil, 0, 30, 1); points != nil {
		t.Errorf("no layers: %v, want none", points)
	}
}

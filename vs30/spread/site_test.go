package spread

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// lines of one layer each, to 40 m.
func linesOf(sigma float64, velocities ...float64) []Line {
	var lines []Line
	for i, v := range velocities {
		lines = append(lines, Line{Name: "L" + string(rune('1'+i)), Layers: pairs(40, v), SigmaLn: sigma})
	}
	return lines
}

func combine(t *testing.T, lines []Line) Site {
	t.Helper()
	s, err := Combine(lines, 0, 30)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// 300, 330, 270: ln 5.703782, 5.799093, 5.598422, mean 5.700432, exp of it
// 298.9966; deviations 0.003350, 0.098661, −0.102010, √(Σ²/2) = 0.100377. The
// harmonic mean is 3/(1/300 + 1/330 + 1/270) = 297.9933. Student's t for two
// degrees of freedom: 2.919986 at 90 % (tables), so 298.9966·exp(±2.919986·
// 0.100377/√3) = 252.45 and 354.13.
func TestThreeProfiles(t *testing.T) {
	s := combine(t, linesOf(0, 300, 330, 270))
	near(t, "geometric mean", s.Geometric, 298.9966, 5e-5)
	near(t, "sigma", s.SigmaLn, 0.100377, 5e-7)
	near(t, "arithmetic mean", s.Arithmetic, 300, 1e-9)
	near(t, "of mean slowness", s.OfMeanSlowness, 297.9933, 5e-5)
	near(t, "standard error", s.StandardError, 0.100377/math.Sqrt(3), 5e-7)
	if s.Within != 0 || s.Between != 0 {
		t.Errorf("divided without sigmas: %g, %g", s.Within, s.Between)
	}
	low, high, ok := s.Interval(0.90)
	if !ok {
		t.Fatal("no interval")
	}
	near(t, "low", low, 252.45, 0.005)
	near(t, "high", high, 354.13, 0.005)
	low, high, _ = s.Another(0.90)
	near(t, "another, low", low, s.Geometric*math.Exp(-2.919986*0.100377*math.Sqrt(4.0/3)), 1e-3)
	near(t, "another, high", high, s.Geometric*math.Exp(2.919986*0.100377*math.Sqrt(4.0/3)), 1e-3)
}

// Student's t, from tables: 12.7062 and 6.313752 for one degree of freedom at 95
// and 90 %, 2.228139 for ten at 95 %.
func TestStudent(t *testing.T) {
	near(t, "1, 95 %", StudentT(1, 0.95), 12.7062, 5e-5)
	near(t, "1, 90 %", StudentT(1, 0.90), 6.313752, 5e-6)
	near(t, "10, 95 %", StudentT(10, 0.95), 2.228139, 5e-6)
	// With many it is the normal distribution's.
	near(t, "10⁶, 68 %", StudentT(1e6, 0.68), 0.994458, 1e-5)
}

func TestOneProfile(t *testing.T) {
	s := combine(t, linesOf(0.1, 300))
	near(t, "mean", s.Geometric, 300, 1e-9)
	near(t, "within", s.Within, 0.1, 1e-12)
	if s.SigmaLn != 0 || s.Between != 0 {
		t.Errorf("one profile scatters: %+v", s)
	}
	if _, _, ok := s.Interval(0.9); ok {
		t.Error("one profile has an interval")
	}
	three := combine(t, linesOf(0, 300, 310, 320))
	for _, level := range []float64{0, 1, -3, math.NaN()} {
		if _, _, ok := three.Interval(level); ok {
			t.Errorf("an interval of level %g", level)
		}
	}
}

// 0.100377² − 0.06² = 0.0064755, its root 0.080471; more measurement error than
// scatter leaves nothing.
func TestWithinAndBetween(t *testing.T) {
	s := combine(t, linesOf(0.06, 300, 330, 270))
	near(t, "within", s.Within, 0.06, 1e-12)
	near(t, "between", s.Between, 0.080471, 1e-6)
	if s := combine(t, linesOf(0.2, 300, 330, 270)); s.Between != 0 {
		t.Errorf("between %g, want 0", s.Between)
	}
}

func TestNothingToCombine(t *testing.T) {
	if _, err := Combine(nil, 0, 30); err == nil {
		t.Error("no profiles put together")
	}
	short := linesOf(0, 300, 310)
	short[1].Layers = pairs(20, 310)
	_, err := Combine(short, 0, 30)
	var e *vs30.ShortError
	if !errors.As(err, &e) || !strings.HasPrefix(err.Error(), "L2: ") {
		t.Errorf("error %v, want that of L2", err)
	}
	if _, err := Combine(linesOf(-1, 300), 0, 30); err == nil {
		t.Error("a negative sigma")
	}
}

// The mean slowness at every depth, averaged, is the average of mean slowness.
func TestSlicesAverage(t *testing.T) {
	rng := seeded(12)
	var lines []Line
	for range 4 {
		layers := growing(rng)
		layers[1].VsBottom = 1.2 * layers[1].Vs
		lines = append(lines, Line{Layers: layers})
	}
	s := combine(t, lines)
	for _, step := range []float64{0, 0.5, 1e-9} {
		var mean []profile.Layer
		for _, c := range Slices(lines, 0, 30, step) {
			mean = append(mean, profile.Layer{Top: c.Top, Bottom: c.Bottom, Vs: c.Mean})
			if c.Lines != 4 || c.Geometric < c.Mean || !(c.SigmaLn > 0) {
				t.Fatalf("slice %+v", c)
			}
		}
		v, err := vs30.Average(mean, 0, 30)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "average", v, s.OfMeanSlowness, 1e-9*v)
	}
}

// Lines count as far as they reach.
func TestSlicesOfUnequalDepth(t *testing.T) {
	lines := []Line{{Layers: pairs(5, 100, 10, 200)}, {Layers: pairs(8, 100, 22, 400)}}
	got := Slices(lines, 0, 50, 0)
	want := []Slice{
		{0, 5, 2, 100, 0, 100},
		{5, 8, 2, math.Sqrt(200 * 100), math.Ln2 / math.Sqrt2, 2 / (1.0/200 + 1.0/100)},
		{8, 15, 2, math.Sqrt(200 * 400), math.Ln2 / math.Sqrt2, 2 / (1.0/200 + 1.0/400)},
		{15, 30, 1, 400, 0, 400},
	}
	if len(got) != len(want) {
		t.Fatalf("%+v", got)
	}
	for i, w := range want {
		g := got[i]
		if g.Top != w.Top || g.Bottom != w.Bottom || g.Lines != w.Lines {
			t.Errorf("slice %+v, want %+v", g, w)
		}
		near(t, "geometric", g.Geometric, w.Geometric, 1e-9)
		near(t, "sigma", g.SigmaLn, w.SigmaLn, 1e-9)
		near(t, "mean", g.Mean, w.Mean, 1e-9)
	}
	for _, list := range [][]Slice{Slices(nil, 0, 30, 1), Slices(lines, 60, 70, 1), Slices(lines, 10, 10, 1), Slices([]Line{{}}, 0, 30, 1)} {
		if list != nil {
			t.Errorf("slices of nothing: %+v", list)
		}
	}
	if n := len(Slices(lines, 0, 30, 1e-12)); n > maxCuts+10 {
		t.Errorf("%d slices", n)
	}
}

func TestGroups(t *testing.T) {
	lines := linesOf(0, 300, 280, 320, 250)
	lines[0].Basis, lines[1].Basis, lines[2].Basis = profile.Inverted, profile.Measured, profile.Inverted
	groups, err := Groups(lines, 0, 30)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, g := range groups {
		names = append(names, g.Name)
	}
	if !slices.Equal(names, []string{"measured in the ground", "inverted from measurements at the surface", "basis not stated"}) {
		t.Errorf("groups %q", names)
	}
	if g := groups[1]; !slices.Equal(g.Lines, []int{0, 2}) || g.Basis != profile.Inverted {
		t.Errorf("lines %v are inverted", g.Lines)
	}
	near(t, "of the inverted", groups[1].Site.Geometric, math.Sqrt(300*320), 1e-9)
	lines[3].Layers = pairs(10, 200)
	if _, err := Groups(lines, 0, 30); err == nil {
		t.Error("a short profile in a group")
	}
}

// The interval of level 68 % around three lines holds the site's median of 68 ±
// 4 % of 1,000 sites.
func TestIntervalCoverage(t *testing.T) {
	rng := seeded(14)
	inside := 0
	for range 1000 {
		truth, sigma := 150+500*rng.Float64(), 0.03+0.2*rng.Float64()
		var v []float64
		for range 3 {
			v = append(v, truth*math.Exp(sigma*rng.NormFloat64()))
		}
		s := combine(t, linesOf(0, v...))
		if low, high, _ := s.Interval(0.68); truth >= low && truth <= high {
			inside++
		}
	}
	near(t, "sites inside", float64(inside)/1000, 0.68, 0.04)
}

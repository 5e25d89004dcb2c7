package correlate

import (
	"math"
	"testing"

	"shearbook/profile"
)

// The normalised quantities, each found by bisection on n, by which they are
// solved in another way than here: the root of min(1, 0.381·Ic(n) +
// 0.05·σ'v/pa − 0.15) − n between −0.5 and 1, Python 3 floats.
func TestBehaviour(t *testing.T) {
	for _, c := range []struct {
		qt, fs, total, effective float64
		want                     Behaviour
		soil                     Soil
	}{
		{5000, 50, 150, 100, Behaviour{2.168969686, 48.5, 1.030927835, 0.726377450}, Sand}, // at pa the exponent plays no part in Qtn
		{5000, 50, 90, 60, Behaviour{2.043019116, 68.729716611, 1.018329939, 0.658390283}, Sand},
		{20000, 60, 90, 60, Behaviour{1.293424096, 240.865873062, 0.301356102, 0.372794581}, Sand},
		{800, 20, 150, 100, Behaviour{3.158761131, 6.5, 3.076923077, 1}, Clay}, // n is capped
	} {
		b, ok := NewBehaviour(c.qt, c.fs, c.total, c.effective)
		if !ok || !near(b.Index, c.want.Index) || !near(b.NormalisedTip, c.want.NormalisedTip) ||
			!near(b.FrictionRatio, c.want.FrictionRatio) || !near(b.Exponent, c.want.Exponent) || b.Soil() != c.soil {
			t.Errorf("got %+v, %v, %v; want %+v", b, b.Soil(), ok, c.want)
		}
	}
	for _, c := range [][4]float64{{100, 10, 100, 50}, {100, 0, 50, 25}, {100, 10, 50, 0}, {math.NaN(), 10, 50, 25},
		{100, math.NaN(), 50, 25}, {100, 10, 50, math.NaN()}, {math.Inf(1), 10, 50, 25}, {100, math.Inf(1), 50, 25}} {
		if b, ok := NewBehaviour(c[0], c[1], c[2], c[3]); ok {
			t.Errorf("%v: got %+v", c, b)
		}
	}
}

// It settles wherever a cone may stand, and at its fixed point.
func TestBehaviourSettles(t *testing.T) {
	for _, qt := range []float64{100, 1000, 10_000, 100_000} {
		for _, fs := range []float64{0.1, 10, 1000} {
			for _, s := range []float64{0.5, 1, 10, 90, 2000} {
				if qt <= 1.5*s {
					continue
				}
				b, ok := NewBehaviour(qt, fs, 1.5*s, s)
				if n := min(1, 0.381*b.Index+0.05*s/Atmosphere-0.15); !ok || math.Abs(n-b.Exponent) > 1e-8 {
					t.Errorf("qt %v, fs %v, σ'v %v: %+v, %v, and n of it is %v", qt, fs, s, b, ok, n)
				}
			}
		}
	}
}

// By hand: 20·(72/60)·1.05·0.95 = 23.94, with rods of 8 + 1 m.
func TestN60(t *testing.T) {
	n, err := Drive{EnergyRatio: 72, Borehole: 150, RodAbove: 1}.N60(20, 8)
	if err != nil || !near(n, 23.94) {
		t.Errorf("got %v, %v", n, err)
	}
	// By hand: CB halfway from 150 to 200 mm is 1.10; CS 1.2; CR 1: 10·1.1·1.2.
	if n, err = (Drive{EnergyRatio: 60, Borehole: 175, Sampler: 1.2}).N60(10, 20); err != nil || !near(n, 13.2) {
		t.Errorf("got %v, %v", n, err)
	}
	for _, bad := range []Drive{{}, {EnergyRatio: 0.72}, {EnergyRatio: 60, Borehole: 50}, {EnergyRatio: 60, Sampler: 2},
		{EnergyRatio: 60, RodAbove: -1}, {EnergyRatio: math.NaN()}} {
		if n, err := bad.N60(20, 8); err == nil {
			t.Errorf("%+v: got %v", bad, n)
		}
	}
}

// The rows of CR (Skempton 1986; from memory), with the lower at a bound.
func TestRods(t *testing.T) {
	for length, want := range map[float64]float64{1: 0.75, 4: 0.75, 4.1: 0.85, 6: 0.85, 6.1: 0.95, 10: 0.95, 10.1: 1} {
		if got := rods(length); got != want {
			t.Errorf("%v m: got %v, want %v", length, got, want)
		}
	}
}

// By hand: 20·√0.9576 = 19.5714077; the cap of 1.7 gives 34.
func TestNormalisedBlows(t *testing.T) {
	if n := NormalisedBlows(20, 100); !near(n, 19.5714077) {
		t.Errorf("got %v", n)
	}
	if n := NormalisedBlows(20, 5); n != 34 {
		t.Errorf("got %v", n)
	}
}

func TestParseUnitWeight(t *testing.T) {
	// By hand: 1900·9.80665/1000 = 18.632635; 1 pcf is 16.018463 kg/m³, so 115
	// pcf are 115·16.018463·9.80665/1000 = 18.065064.
	for text, want := range map[string]float64{"18kN/m3": 18, " 18.5 kN/m³ ": 18.5, "1900 kg/m3": 18.632635, "1.9 t/m3": 18.632635, "115 pcf": 18.065064} {
		if got, err := ParseUnitWeight(text); err != nil || !near(got, want) {
			t.Errorf("%q: got %v, %v", text, got, err)
		}
	}
	for _, text := range []string{"", "18", "kN/m3", "18 kPa", "1.8 kN/m3", "180 kN/m3", "-18 kN/m3", "NaN kN/m3", "18 kg/m3 kN/m3"} {
		if got, err := ParseUnitWeight(text); err == nil {
			t.Errorf("%q: got %v", text, got)
		}
	}
}

func TestParseSoil(t *testing.T) {
	for text, want := range map[string]Soil{
		"": SoilNotStated, "Clay": Clay, "Firm brown slightly sandy CLAY": Clay, "silty fine sand": Sand,
		"Sand with gravel": Sand, "SAND and GRAVEL": SoilNotStated, "sand and gravel": SoilNotStated,
		"stiff CLAY with bands of sand": Clay, "MADE GROUND: brick and clay": SoilNotStated, "Peat": SoilNotStated,
		"Gravels": Gravel, "SILT": Silt, "weathered rock": SoilNotStated, "claystone": SoilNotStated, "clay, clay": Clay,
		"SAND, sand": Sand, "Clayey sand": Sand,
	} {
		if got := ParseSoil(text); got != want {
			t.Errorf("%q: got %s, want %s", text, got, want)
		}
	}
}

// By hand, 18 kN/m³ over 1,900 kg/m³, water at 2 m: at 6 m σv = 18·4 +
// 18.632635·2 = 109.265270, u = 9.80665·4 = 39.2266, σ'v = 70.038670.
func TestStresses(t *testing.T) {
	layers := []profile.Layer{
		{Top: 0, Bottom: 4},
		{Top: 4, Bottom: math.Inf(1), Density: 1900, Given: profile.GivenDensity},
	}
	var in Input
	soil, known := ofSoil(layers, 6, 18)
	in.setStresses(6, soil, known, water{profile.Known(2)})
	if !near(in.of(TotalStress), 109.265270) || !near(in.of(EffectiveStress), 70.038670) {
		t.Errorf("got %v and %v", in.of(TotalStress), in.of(EffectiveStress))
	}
	// Water on the ground adds to the total stress and not to the effective one:
	// at 6 m, 109.265270 − 9.80665·6 = 50.425370, however high it stands.
	for _, table := range []float64{0, -5} {
		in = Input{}
		in.setStresses(6, soil, known, water{profile.Known(table)})
		if !near(in.of(EffectiveStress), 50.425370) || !near(in.of(TotalStress), 109.265270-9.80665*table) {
			t.Errorf("water at %v m: got %v and %v", table, in.of(TotalStress), in.of(EffectiveStress))
		}
	}
	in = Input{}
	soil, known = ofSoil(layers, 6, 0)
	in.setStresses(6, soil, known, water{profile.Known(2)})
	if in.Get(TotalStress).Known || in.Get(EffectiveStress).Known {
		t.Error("a stress is made up without a unit weight")
	}
	in.setStresses(6, 100, true, water{})
	if !in.Get(TotalStress).Known || in.Get(EffectiveStress).Known {
		t.Error("without a water table only the total stress is known")
	}
}

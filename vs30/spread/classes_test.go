package spread

import (
	"math"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// nehrp are the metric bounds 180, 360, 760 and 1500 m/s; feet those of ASCE
// 7-22, 500 to 5,000 ft/s.
var (
	nehrp = Classes{Names: []string{"E", "D", "C", "B", "A"}, Bounds: []float64{180, 360, 760, 1500}}
	feet  = Classes{Names: []string{"E", "DE", "D", "CD", "C", "BC", "B", "A"},
		Bounds: []float64{152.4, 213.36, 304.8, 441.96, 640.08, 914.4, 1524}}
)

func chancesOf(o Outlook) []float64 {
	var list []float64
	for _, c := range o.Chances {
		list = append(list, c.Chance)
	}
	return list
}

// Φ((ln b − ln m)/s) differences, computed outside this program; by hand for m =
// 350, s = 0.1: Φ(ln(360/350)/0.1) = Φ(0.281709) = 0.610917.
func TestChances(t *testing.T) {
	for _, c := range []struct {
		l       Lognormal
		classes Classes
		want    []float64
		class   string
		likely  []string
	}{
		{Lognormal{350, 0.1}, nehrp, []float64{0, 0.610917, 0.389083, 0, 0}, "D", []string{"D", "C"}},
		{Lognormal{270, 0.25}, feet,
			[]float64{0.011079, 0.162078, 0.512982, 0.289510, 0.024074, 0.000277, 0.000001, 0}, "D", []string{"DE", "D", "CD"}},
	} {
		o, err := c.l.Outlook(c.classes)
		if err != nil {
			t.Fatal(err)
		}
		sum := 0.0
		for i, p := range chancesOf(o) {
			near(t, "chance of "+c.classes.Names[i], p, c.want[i], 5e-7)
			sum += p
		}
		near(t, "sum", sum, 1, 1e-12)
		if o.Class != c.class || !slices.Equal(o.Likely, c.likely) {
			t.Errorf("class %s, likely %v; want %s, %v", o.Class, o.Likely, c.class, c.likely)
		}
	}
}

// Against gonum's lognormal distribution (v0.17.0).
func TestAgainstGonum(t *testing.T) {
	rng := seeded(3)
	for range 200 {
		l := Lognormal{100 + 900*rng.Float64(), 0.02 + 0.5*rng.Float64()}
		g := distuv.LogNormal{Mu: math.Log(l.Median), Sigma: l.SigmaLn}
		o, err := l.Outlook(nehrp)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range o.Chances {
			want := 1.0
			if !math.IsInf(c.Upper, 1) {
				want = g.CDF(c.Upper)
			}
			if c.Lower > 0 {
				want -= g.CDF(c.Lower)
			}
			near(t, "chance", c.Chance, want, 1e-12)
		}
		for _, p := range []float64{0.05, 0.16, 0.5, 0.84, 0.95} {
			near(t, "quantile", l.Quantile(p), g.Quantile(p), 1e-9*l.Median)
			near(t, "and back", l.Below(l.Quantile(p)), p, 1e-12)
		}
	}
}

// The printed quantiles: Φ⁻¹(0.95) = 1.644854, Φ⁻¹(0.84) = 0.994458 (tables).
func TestBand(t *testing.T) {
	b := Lognormal{300, 0.2}.Band()
	for _, c := range [][2]float64{{b.P5, -1.644854}, {b.P16, -0.994458}, {b.Median, 0}, {b.P84, 0.994458}, {b.P95, 1.644854}} {
		near(t, "quantile", c[0], 300*math.Exp(0.2*c[1]), 1e-4)
	}
}

// The sample's chances are those of the lognormal within four of the errors
// stated, and add up to 1.
func TestChancesOfASample(t *testing.T) {
	m := &Model{Layers: pairs(40, 350), Thickness: 30, Sigmas: all(1, 0.1)}
	s := draw(t, m, Options{})
	o, err := s.Outlook(nehrp)
	if err != nil {
		t.Fatal(err)
	}
	want, _ := Lognormal{350, 0.1}.Outlook(nehrp)
	sum := 0.0
	for i, c := range o.Chances {
		near(t, c.Class, c.Chance, want.Chances[i].Chance, 4*c.Error+1e-9)
		sum += c.Chance
	}
	near(t, "sum", sum, 1, 1e-12)
	near(t, "error of D", o.Chances[1].Error, math.Sqrt(0.6109*0.3891/1e5), 1e-5)
	if o.Class != "D" || !slices.Equal(o.Likely, []string{"D", "C"}) {
		t.Errorf("class %s, likely %v", o.Class, o.Likely)
	}
}

// A bound, and what is within one part in 10⁹ of it, is of the softer class;
// without a sigma one class has the whole chance.
func TestAtABound(t *testing.T) {
	for _, c := range []struct {
		v    float64
		want string
	}{{359, "D"}, {360 * (1 - 1e-10), "D"}, {360, "D"}, {360 * (1 + 1e-10), "D"}, {360 * (1 + 1e-8), "C"}, {1, "E"}, {5000, "A"}} {
		if got := nehrp.Of(c.v); got != c.want {
			t.Errorf("%.12g m/s is %s, want %s", c.v, got, c.want)
		}
		o, err := Lognormal{c.v, 0}.Outlook(nehrp)
		if err != nil {
			t.Fatal(err)
		}
		if !slices.Equal(o.Likely, []string{c.want}) || o.Class != c.want {
			t.Errorf("%.12g m/s without sigma: %v", c.v, o.Likely)
		}
	}
	near(t, "half at the median", Lognormal{360, 0.2}.Below(360), 0.5, 1e-12)
}

func TestClassesThatAreNone(t *testing.T) {
	l := Lognormal{300, 0.1}
	for _, c := range []struct {
		classes Classes
		say     string
	}{
		{Classes{}, "no bounds"},
		{Classes{Names: []string{"A"}, Bounds: []float64{300}}, "1 bounds lie between 2 classes, not 1"},
		{Classes{Names: []string{"A", "B", "C"}, Bounds: []float64{300, 200}}, "200 m/s is not above 300"},
		{Classes{Names: []string{"A", "B"}, Bounds: []float64{math.NaN()}}, "NaN"},
		{Classes{Names: []string{"A", "B"}, Bounds: []float64{math.Inf(1)}}, "Inf"},
		{Classes{Names: []string{"A", "B"}, Bounds: []float64{0}}, "0 m/s"},
	} {
		_, err := l.Outlook(c.classes)
		_, _, flipErr := Flips(pairs(40, 200), 0, 30, c.classes)
		for _, err := range []error{err, flipErr} {
			if err == nil || !strings.Contains(err.Error(), c.say) {
				t.Errorf("error %v does not say %q", err, c.say)
			}
		}
	}
	for _, l := range []Lognormal{{0, 0.1}, {300, -1}, {math.NaN(), 0.1}, {300, math.Inf(1)}} {
		if _, err := l.Outlook(nehrp); err == nil {
			t.Errorf("%+v has an outlook", l)
		}
	}
}

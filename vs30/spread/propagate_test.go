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

// Profile AP2 with 0.20 in every layer. By hand: 2.5/155 = 0.016129, 7.5/73 =
// 0.102740, 5/150 = 0.033333, 15/205 = 0.073171 s, together 0.225373; the parts
// of it; 0.20·√(0.07157² + 0.45587² + 0.14790² + 0.32467²) = 0.20·0.58330 =
// 0.11666; fully correlated 0.20.
func TestAP2(t *testing.T) {
	m := &Model{Layers: measured(t, "AP2"), Thickness: 30}
	m.Sigmas = all(len(m.Layers), 0.20)
	p := propagate(t, m)
	near(t, "average", p.Velocity, 133.113, 0.0005)
	near(t, "independent", p.SigmaLn, 0.11666, 5e-6)
	if len(p.Shares) != 4 {
		t.Fatalf("%d shares, want 4", len(p.Shares))
	}
	sum := 0.0
	for i, w := range []float64{0.07157, 0.45587, 0.14790, 0.32467} {
		near(t, "time part", p.Shares[i].TimePart, w, 5e-6)
		near(t, "part of the variance", p.Shares[i].Part, (0.2*w)*(0.2*w)/(0.11666*0.11666), 1e-4)
		sum += p.Shares[i].Part
	}
	near(t, "sum of the parts", sum, 1, 1e-12)
	if s := p.Largest(); s.Layer != 1 || s.Boundary {
		t.Errorf("the largest share is %+v, want layer 1", s)
	}

	m.Correlation.Rule = Full
	p = propagate(t, m)
	near(t, "fully correlated", p.SigmaLn, 0.20, 1e-12)
	// Then the whole average is one lognormal factor, exactly.
	near(t, "matched sigma", p.Matched.SigmaLn, 0.20, 1e-12)
	near(t, "matched median", p.Matched.Median, p.Velocity, 1e-9)

	m.Correlation = Correlation{Interlayer, class(t, "USGS C")}
	if s := propagate(t, m).SigmaLn; !(s > 0.11666 && s < 0.20) {
		t.Errorf("correlated layer by layer: %g is not between independent and full", s)
	}
}

// Two layers of 15 m, by hand: 200 and 300 m/s, 0.075 and 0.05 s; a boundary
// error of 1 m is (1/200 − 1/300)/0.125 = 0.0133333 of ln V.
func TestBoundaryError(t *testing.T) {
	m := &Model{Layers: pairs(15, 200, 25, 300), Thickness: 30, Sigmas: all(2, 0), Boundaries: []float64{1, 99}}
	p := propagate(t, m)
	near(t, "sigma", p.SigmaLn, 0.0133333, 5e-8)
	if s := p.Largest(); !s.Boundary || s.Top != 15 || s.Layer != 0 {
		t.Errorf("the largest share is %+v, want the boundary at 15 m", s)
	}
	near(t, "slope", p.Shares[1].Slope, -0.0133333, 5e-8)
	m.Sigmas = all(2, 0.1)
	// 0.6·0.1 and 0.4·0.1 besides.
	near(t, "with layers", propagate(t, m).SigmaLn, math.Sqrt(0.06*0.06+0.04*0.04+0.0133333*0.0133333), 5e-8)
	// Nothing of it where the boundary lies below the averaging depth.
	m.Thickness = 15
	near(t, "above it", propagate(t, m).SigmaLn, 0.1, 1e-12)
}

// The slopes are those of the average itself, from a datum and with gradient
// layers too: by differences over a change of 10⁻⁵.
func TestSlopes(t *testing.T) {
	layers := pairs(3, 150, 7, 240, 12, 190, 20, 420)
	layers[1].VsBottom = 320
	m := &Model{Layers: layers, From: 1.5, Thickness: 30, Sigmas: all(4, 0.1), Boundaries: all(4, 0.3)}
	const e = 1e-5
	for _, s := range propagate(t, m).Shares {
		at := func(by float64) float64 {
			moved := slices.Clone(layers)
			if s.Boundary {
				// The layers meet elsewhere; constant layers around this boundary.
				moved[s.Layer].Bottom += by
				moved[s.Layer+1].Top += by
			} else {
				moved[s.Layer].Vs *= math.Exp(by)
				moved[s.Layer].VsBottom *= math.Exp(by)
			}
			v, err := vs30.Average(moved, 1.5, 30)
			if err != nil {
				t.Fatal(err)
			}
			return math.Log(v)
		}
		if s.Boundary && (layers[s.Layer].Gradient() || layers[s.Layer+1].Gradient()) {
			continue
		}
		near(t, "slope", s.Slope, (at(e)-at(-e))/(2*e), 1e-8)
	}
}

// Splitting a layer changes nothing where its halves are fully correlated.
func TestSplitting(t *testing.T) {
	whole := &Model{Layers: pairs(10, 200, 25, 300), Thickness: 30, Sigmas: []float64{0.1, 0.2}, Correlation: Correlation{Rule: Full}}
	split := &Model{Layers: pairs(4, 200, 6, 200, 25, 300), Thickness: 30, Sigmas: []float64{0.1, 0.1, 0.2}, Correlation: Correlation{Rule: Full}}
	a, b := propagate(t, whole), propagate(t, split)
	near(t, "sigma", b.SigmaLn, a.SigmaLn, 1e-12)
	near(t, "matched", b.Matched.SigmaLn, a.Matched.SigmaLn, 1e-12)
	near(t, "part", b.Shares[0].Part+b.Shares[1].Part, a.Shares[0].Part, 1e-12)
}

// The sigmas that the layers state are taken; one that is missing is asked for.
func TestSigmasOfTheProfile(t *testing.T) {
	layers := pairs(10, 200, 10, 300, 20, 400, 10, 500)
	for i := range layers {
		layers[i].SigmaLnVs, layers[i].Given = 0.1*float64(i+1), profile.GivenSigma
	}
	layers[3].Given = 0 // below the averaging depth
	p := propagate(t, &Model{Layers: layers, Thickness: 30})
	for i, s := range p.Shares {
		near(t, "sigma", s.Sigma, 0.1*float64(i+1), 1e-12)
	}

	layers[1].Given = 0
	_, err := (&Model{Layers: layers, Thickness: 30}).Propagate()
	var missing *MissingError
	if !errors.As(err, &missing) || !slices.Equal(missing.Missing, []int{1}) || !strings.Contains(err.Error(), "layer 2") {
		t.Errorf("error %v, want that of layer 2", err)
	}
	_, err = (&Model{Layers: pairs(40, 200), Thickness: 30}).Draw(Options{})
	if !errors.As(err, &missing) || !strings.Contains(err.Error(), "states no sigma") {
		t.Errorf("error %v, want that there is no sigma", err)
	}
	_, err = (&Model{Layers: pairs(1, 200, 1, 201, 1, 202, 1, 203, 1, 204, 1, 205, 1, 206, 1, 207, 40, 208), Thickness: 30,
		Sigmas: nil}).Propagate()
	if !errors.As(err, &missing) || len(missing.Missing) != 9 {
		t.Errorf("error %v, want nine layers", err)
	}
}

func TestModelsThatAreNone(t *testing.T) {
	layers := pairs(40, 200)
	for _, c := range []struct {
		m   Model
		say string
	}{
		{Model{Thickness: 30}, "no layers"},
		{Model{Layers: layers, Thickness: 0, Sigmas: all(1, 0.1)}, "averaging depth of 0"},
		{Model{Layers: layers, Thickness: math.NaN(), Sigmas: all(1, 0.1)}, "averaging depth of NaN"},
		{Model{Layers: layers, From: -1, Thickness: 30, Sigmas: all(1, 0.1)}, "datum of -1"},
		{Model{Layers: layers, Thickness: 50, Sigmas: all(1, 0.1)}, "reaches 40 m"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(2, 0.1)}, "2 sigmas for 1 layers"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, -0.1)}, "-0.1 is not a standard deviation"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, math.NaN())}, "NaN"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, 20)}, "above 2"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, 0.1), Boundaries: all(3, 1)}, "3 boundary errors"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, 0.1), Boundaries: all(1, -1)}, "boundary error -1"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, 0.1), Correlation: Correlation{Rule: Interlayer}}, "needs a class"},
		{Model{Layers: layers, Thickness: 30, Sigmas: all(1, 0.1), Correlation: Correlation{Rule: 9}}, "unknown rule 9"},
	} {
		for what, err := range map[string]error{
			"propagate": func() error { _, err := c.m.Propagate(); return err }(),
			"draw":      func() error { _, err := c.m.Draw(Options{Realisations: 10}); return err }(),
		} {
			if err == nil || !strings.Contains(err.Error(), c.say) {
				t.Errorf("%s: error %v does not say %q", what, err, c.say)
			}
		}
	}
	if _, err := (&Model{Layers: layers, Thickness: 30, Sigmas: all(1, 0.1), Layering: ToroLayering()}).Propagate(); err != ErrLayering {
		t.Errorf("error %v, want ErrLayering", err)
	}
	many := &Model{Thickness: 30}
	for i := range MaxLayers + 1 {
		many.Layers = append(many.Layers, profile.Layer{Top: 0.01 * float64(i), Bottom: 0.01 * float64(i+1), Vs: 200})
	}
	many.Thickness, many.Sigmas = many.Layers[MaxLayers].Bottom, all(MaxLayers+1, 0.1)
	if _, err := many.Propagate(); err == nil || !strings.Contains(err.Error(), "join layers") {
		t.Errorf("error %v, want that there are too many layers", err)
	}
}

// 0.1 and 0.2 and 0.2 together: √(0.01 + 0.04 + 0.04) = 0.3.
func TestTotal(t *testing.T) {
	near(t, "total", Total(0.1, 0.2, 0.2), 0.3, 1e-12)
	near(t, "of nothing", Total(), 0, 0)
}

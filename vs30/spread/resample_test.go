package spread

import (
	"math"
	"strings"
	"testing"
)

func equivalents(t *testing.T, q Equivalents, o Options) *Sample {
	t.Helper()
	s, err := q.Draw(o)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Three averages of equal weight: each is a third of the sample; by weight 1, 1,
// 2 the last is half, and the effective number is 4²/6 = 2.67, rounded 3.
func TestResampling(t *testing.T) {
	s := equivalents(t, Equivalents{Averages: []float64{330, 300, 270}}, Options{})
	near(t, "slowest third", s.Below(270), 1.0/3, 4*math.Sqrt(2.0/9/1e5))
	near(t, "two thirds", s.Below(300), 2.0/3, 4*math.Sqrt(2.0/9/1e5))
	near(t, "all", s.Below(330), 1, 0)
	if s.Median != 300 || s.Models != 3 || s.P5 != 270 || s.P95 != 330 {
		t.Errorf("%+v", s.Band)
	}
	// About √(1/3·2/3/3) = 0.272 of a chance are not sure with three profiles.
	near(t, "error", s.BelowError(270), math.Sqrt(2.0/27), 1e-3)
	// The rank of the median is unsure by √(0.25/3) = 0.289 of the sample, which
	// leads from the slowest third to the fastest: (330 − 270)/2.
	near(t, "error of the median", s.MedianError, 30, 1e-9)

	s = equivalents(t, Equivalents{Averages: []float64{330, 300, 270}, Weights: []float64{1, 1, 2}}, Options{})
	near(t, "half", s.Below(270), 0.5, 4*math.Sqrt(0.25/1e5))
	if s.Models != 3 {
		t.Errorf("effective number %d, want 3", s.Models)
	}
	s = equivalents(t, Equivalents{Averages: []float64{330, 300, 270}, Weights: []float64{0, 1, 0}}, Options{Realisations: 5000})
	if s.Velocities[0] != 300 || s.Velocities[4999] != 300 {
		t.Error("profiles of no weight are drawn")
	}

	// One average twice, and a common sigma: that lognormal.
	s = equivalents(t, Equivalents{Averages: []float64{300, 300}, SigmaLn: 0.15}, Options{})
	near(t, "sigma", s.SigmaLn, 0.15, 4*0.15/math.Sqrt(2e5))
	near(t, "median", s.Median, 300, 4*1.2533*0.15*300/math.Sqrt(1e5))
}

func TestEquivalentsThatAreNone(t *testing.T) {
	for _, c := range []struct {
		q   Equivalents
		say string
	}{
		{Equivalents{Averages: []float64{300}}, "fewer than two"},
		{Equivalents{Averages: []float64{300, -1}}, "profile 2"},
		{Equivalents{Averages: []float64{300, math.NaN()}}, "NaN"},
		{Equivalents{Averages: []float64{300, 310}, Weights: []float64{1}}, "1 weights for 2"},
		{Equivalents{Averages: []float64{300, 310}, Weights: []float64{1, -1}}, "weight -1"},
		{Equivalents{Averages: []float64{300, 310}, Weights: []float64{0, 0}}, "add up to nothing"},
		{Equivalents{Averages: []float64{300, 310}, SigmaLn: -1}, "standard deviation"},
		{Equivalents{Averages: []float64{300, 310}, SigmaLn: 3}, "above 2"},
	} {
		if _, err := c.q.Draw(Options{}); err == nil || !strings.Contains(err.Error(), c.say) {
			t.Errorf("error %v does not say %q", err, c.say)
		}
	}
	if _, err := (&Equivalents{Averages: []float64{300, 310}}).Draw(Options{Realisations: -5}); err == nil {
		t.Error("-5 realisations")
	}
}

package spread

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
)

func TestSort(t *testing.T) {
	rng := seeded(6)
	for _, n := range []int{0, 1, 2, 3, 1000, 4097} {
		for _, spread := range []float64{0, 1e-9, 0.2, 300} {
			v := make([]float64, n)
			for i := range v {
				v[i] = 250 * math.Exp(spread*rng.NormFloat64())
			}
			want := slices.Clone(v)
			slices.Sort(want)
			sortPositive(v)
			if !slices.Equal(v, want) {
				t.Errorf("%d numbers with a spread of %g are not sorted", n, spread)
			}
		}
	}
	v := []float64{math.MaxFloat64, 5e-324, 1, math.Inf(1), 0.5, 1}
	sortPositive(v)
	if !slices.IsSorted(v) {
		t.Errorf("%v is not sorted", v)
	}
}

// 1, 2, 3, 4: definition 7 has the median at 2.5 and the quarter at 1.75.
func TestQuantiles(t *testing.T) {
	s := summarise([]float64{3, 1, 4, 2}, 1, 0)
	for p, want := range map[float64]float64{0: 1, 0.25: 1.75, 0.5: 2.5, 0.84: 3.52, 1: 4} {
		near(t, "quantile", s.Quantile(p), want, 1e-12)
	}
	for v, want := range map[float64]float64{0.9: 0, 1: 0.25, 2.5: 0.5, 4: 1, 9: 1} {
		near(t, "below", s.Below(v), want, 0)
	}
	near(t, "mean of ln", s.MeanLn, math.Log(24)/4, 1e-12)
	near(t, "sigma", s.SigmaLn, stat.StdDev([]float64{0, math.Ln2, math.Log(3), math.Log(4)}, nil), 1e-12)
}

// The bins hold what lies between their edges, the last one its upper edge too.
func TestHistogram(t *testing.T) {
	s := summarise([]float64{100, 150, 199, 200, 250, 300, 300, 400}, 1, 0)
	bins := s.Histogram(100, 300, 2)
	want := []Bin{{100, 200, 3.0 / 8}, {200, 300, 4.0 / 8}}
	if !slices.Equal(bins, want) {
		t.Errorf("%v, want %v", bins, want)
	}
	drawn := draw(t, layered(5), Options{Realisations: 5000})
	sum := 0.0
	for _, b := range drawn.Histogram(drawn.Velocities[0], drawn.Velocities[4999], 37) {
		sum += b.Part
	}
	near(t, "all bins", sum, 1, 1e-12)
	sum = 0
	for _, b := range drawn.Histogram(drawn.P16, drawn.P84, 10) {
		sum += b.Part
	}
	near(t, "bins of the band", sum, 0.68, 1e-3)
}

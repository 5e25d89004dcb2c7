package spread

import (
	"math"
	"slices"
)

// Sample is an average drawn many times.
type Sample struct {
	// Velocities are the averages drawn, in m/s, sorted from slow to fast.
	Velocities []float64

	Seed   uint64
	Models int // equivalent profiles that were drawn from; 0 where layers were drawn

	Band                    // the quantiles that reports print
	MedianError     float64 // m/s, standard error of Median from drawing no more
	MeanLn, SigmaLn float64 // mean and standard deviation of ln V
}

// summarise sorts the averages drawn and describes them.
func summarise(velocities []float64, seed uint64, models int) *Sample {
	sortPositive(velocities)
	s := &Sample{Velocities: velocities, Seed: seed, Models: models}
	s.Band = Band{P5: s.Quantile(0.05), P16: s.Quantile(0.16), Median: s.Quantile(0.5),
		P84: s.Quantile(0.84), P95: s.Quantile(0.95)}
	s.moments()
	s.MedianError = s.QuantileError(0.5)
	return s
}

// moments fills in the mean and the deviation of ln V.
func (s *Sample) moments() {
	var sum, square float64
	for _, v := range s.Velocities {
		x := math.Log(v / s.Median)
		sum += x
		square += x * x
	}
	n := float64(len(s.Velocities))
	s.MeanLn = math.Log(s.Median) + sum/n
	s.SigmaLn = math.Sqrt(max(0, square-sum*sum/n) / max(1, n-1))
}

// Quantile returns the velocity in m/s that the part p of those drawn does not
// exceed, 0 ≤ p ≤ 1, linear between the two around rank p·(n−1) (definition 7
// of Hyndman & Fan 1996, The American Statistician 50:361–365).
func (s *Sample) Quantile(p float64) float64 {
	return s.at(p * float64(len(s.Velocities)-1))
}

// at returns the velocity at a rank from 0, linear between two ranks, the
// first or last one outside.
func (s *Sample) at(rank float64) float64 {
	last := len(s.Velocities) - 1
	if !(rank > 0) {
		return s.Velocities[0]
	}
	if rank >= float64(last) {
		return s.Velocities[last]
	}
	i := int(rank)
	a, b := s.Velocities[i], s.Velocities[i+1]
	return a + (rank-float64(i))*(b-a)
}

// QuantileError returns the standard error in m/s of Quantile(p): half the
// distance between the velocities one binomial standard deviation of the rank,
// √(n·p·(1−p)), above and below it. Where equivalent profiles are drawn, n is
// their number: drawing the same few again adds nothing.
func (s *Sample) QuantileError(p float64) float64 {
	n := float64(len(s.Velocities))
	rank, deviation := p*(n-1), math.Sqrt(n*p*(1-p))
	if s.Models > 0 {
		deviation *= math.Sqrt(1 + n/float64(s.Models))
	}
	return (s.at(rank+deviation) - s.at(rank-deviation)) / 2
}

// Below returns the part of the averages drawn that are v m/s or less.
func (s *Sample) Below(v float64) float64 {
	i, _ := slices.BinarySearchFunc(s.Velocities, v, func(a, v float64) int {
		if a <= v {
			return -1
		}
		return 1
	})
	return float64(i) / float64(len(s.Velocities))
}

// BelowError returns the standard error of Below(v): √(p(1−p)/n), with n as
// for QuantileError.
func (s *Sample) BelowError(v float64) float64 { return s.partError(s.Below(v)) }

func (s *Sample) partError(p float64) float64 {
	square := p * (1 - p) / float64(len(s.Velocities))
	if s.Models > 0 {
		square += p * (1 - p) / float64(s.Models)
	}
	return math.Sqrt(square)
}

// Bin is one bar of a histogram.
type Bin struct {
	Lower, Upper float64 // m/s; Lower counts in, Upper does not, except in the last bin
	Part         float64 // of the averages drawn
}

// Histogram returns n ≥ 1 bins of equal width between two velocities in m/s,
// lower < upper. Averages outside are in no bin. Part divided by the width of a
// bin is the density.
func (s *Sample) Histogram(lower, upper float64, n int) []Bin {
	bins := make([]Bin, n)
	edge := func(k int) float64 { return lower + (upper-lower)*float64(k)/float64(n) }
	from, _ := slices.BinarySearch(s.Velocities, lower)
	for k := range bins {
		to, _ := slices.BinarySearch(s.Velocities, edge(k+1))
		for k == n-1 && to < len(s.Velocities) && s.Velocities[to] == upper {
			to++
		}
		bins[k] = Bin{Lower: edge(k), Upper: edge(k + 1), Part: float64(to-from) / float64(len(s.Velocities))}
		from = to
	}
	return bins
}

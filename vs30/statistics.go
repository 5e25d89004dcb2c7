package vs30

import (
	"math"

	"shearbook/profile"
)

// Statistics describes the velocities between a datum and a depth. A layer
// counts with the part of it that lies between them; a gradient layer counts
// with its velocity at every depth, so that nothing here depends on how finely
// it is cut, except where a plain mean over layers is meant to.
type Statistics struct {
	From      float64 // m below ground level: the datum
	Thickness float64 // m
	Layers    int     // number of layers that lie inside, wholly or in part

	// TimeAverage is the average by travel time, Σh / Σ(h/v): the harmonic
	// mean weighted by thickness, and the average that codes ask for.
	TimeAverage float64 // m/s

	// ThicknessMean is the arithmetic mean weighted by thickness, Σhv / Σh.
	// It is never below TimeAverage, and no code asks for it.
	ThicknessMean float64 // m/s

	// ArithmeticMean and HarmonicMean are the plain means over the layers,
	// Σv / n and n / Σ(1/v), whatever their thickness. They change when a
	// layer is split. A gradient layer counts once, with its mean by
	// thickness or by time.
	ArithmeticMean float64 // m/s
	HarmonicMean   float64 // m/s

	Min    float64 // m/s
	Max    float64 // m/s
	Spread float64 // Max / Min

	// StdDev is the population standard deviation about ThicknessMean,
	// weighted by thickness: √(Σh(v−v̄)² / Σh). It does not depend on the
	// unit of the thicknesses, as the sample deviation would.
	StdDev float64 // m/s

	Interfaces []Interface
	Reversals  []Reversal
}

// Interface is a boundary between two layers.
type Interface struct {
	Depth float64 // m below ground level
	Above float64 // m/s just above
	Below float64 // m/s just below
	Ratio float64 // Below / Above
}

// Describe returns the statistics of the layers over thickness m, > 0, below
// depth from (m below ground level). It fails as Average does.
func Describe(layers []profile.Layer, from, thickness float64) (Statistics, error) {
	v, err := Average(layers, from, thickness)
	if err != nil {
		return Statistics{}, err
	}
	to := from + thickness
	s := Statistics{From: from, Thickness: thickness, TimeAverage: v,
		Interfaces: Interfaces(layers, from, to), Reversals: Reversals(layers, from, to)}
	s.means(layers, to)
	s.StdDev = stdDev(layers, from, to, s.ThicknessMean)
	return s, nil
}

// means fills in the number of layers, their means, and their extremes.
func (s *Statistics) means(layers []profile.Layer, to float64) {
	var area, depth, speed, slowness float64
	s.Min = math.Inf(1)
	for i := range layers {
		l := &layers[i]
		top, bottom, ok := clip(l, s.From, to)
		if !ok {
			continue
		}
		v0, v1 := l.VsAt(top), l.VsAt(bottom)
		s.Layers++
		s.Min, s.Max = min(s.Min, v0, v1), max(s.Max, v0, v1)
		mid := v0 + (v1-v0)/2
		area += mid * (bottom - top)
		depth += bottom - top
		speed += mid
		slowness += 1 / averageInside(l, top, bottom)
	}
	n := float64(s.Layers)
	s.ThicknessMean = area / depth
	s.ArithmeticMean = speed / n
	s.HarmonicMean = n / slowness
	s.Spread = s.Max / s.Min
}

// stdDev returns the population standard deviation in m/s about mean,
// weighted by thickness. Inside a linear gradient the mean square of v−v̄ is
// (v_mid−v̄)² + (v₁−v₀)²/12.
func stdDev(layers []profile.Layer, from, to, mean float64) float64 {
	var square, depth float64
	for i := range layers {
		l := &layers[i]
		top, bottom, ok := clip(l, from, to)
		if !ok {
			continue
		}
		v0, v1 := l.VsAt(top), l.VsAt(bottom)
		mid, rise := v0+(v1-v0)/2-mean, v1-v0
		square += (mid*mid + rise*rise/12) * (bottom - top)
		depth += bottom - top
	}
	return math.Sqrt(square / depth)
}

// Interfaces returns, top down, the boundaries between layers strictly
// between the depths from and to (m below ground level), those across which
// the velocity stays the same among them; nil if there are none.
func Interfaces(layers []profile.Layer, from, to float64) []Interface {
	var found []Interface
	for i := 1; i < len(layers); i++ {
		z := layers[i].Top
		if !inside(z, from, to) {
			continue
		}
		above, below := velocitiesAt(layers, i)
		found = append(found, Interface{Depth: z, Above: above, Below: below, Ratio: below / above})
	}
	return found
}

package spread

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
)

// Equivalents are the averages of the profiles of one survey that fit its data
// about equally well, as an inversion of surface waves leaves them.
type Equivalents struct {
	Averages []float64 // m/s
	Weights  []float64 // ≥ 0, one for each average; nil where all weigh the same

	// SigmaLn is that of ln V which all of them have in common, because the
	// survey errs as a whole; 0 where nothing is to be added to their scatter.
	SigmaLn float64
}

// Draw draws one of the averages at random, by weight, times a lognormal factor
// of SigmaLn, again and again. The sample's Models is the effective number of
// averages, (Σw)²/Σw² rounded: its standard errors count with that, because
// drawing from the same few again and again tells nothing new.
func (q *Equivalents) Draw(o Options) (*Sample, error) {
	o, err := o.resolve()
	if err != nil {
		return nil, err
	}
	cumulative, models, err := q.cumulative()
	if err != nil {
		return nil, err
	}
	return run(o, models, func() filler {
		return &pick{averages: q.Averages, cumulative: cumulative, sigma: q.SigmaLn}
	}), nil
}

// cumulative returns the sums of the weights, divided by the last, and the
// effective number of averages.
func (q *Equivalents) cumulative() ([]float64, int, error) {
	if len(q.Averages) < 2 {
		return nil, 0, errors.New("fewer than two equivalent profiles have no scatter: give more")
	}
	if q.Weights != nil && len(q.Weights) != len(q.Averages) {
		return nil, 0, fmt.Errorf("%d weights for %d equivalent profiles: give one for each", len(q.Weights), len(q.Averages))
	}
	if err := checkSigma(q.SigmaLn); err != nil {
		return nil, 0, err
	}
	sums := make([]float64, len(q.Averages))
	sum, square := 0.0, 0.0
	for i, v := range q.Averages {
		w := 1.0
		if q.Weights != nil {
			w = q.Weights[i]
		}
		if !(v > 0) || math.IsInf(v, 0) || !(w >= 0) || math.IsInf(w, 0) {
			return nil, 0, fmt.Errorf("equivalent profile %d: an average of %v m/s of weight %v is not one", i+1, v, w)
		}
		sum += w
		square += w * w
		sums[i] = sum
	}
	if !(sum > 0) || math.IsInf(square, 0) {
		return nil, 0, errors.New("the weights of the equivalent profiles add up to nothing")
	}
	for i := range sums {
		sums[i] /= sum
	}
	return sums, int(math.Round(sum * sum / square)), nil
}

// pick draws from equivalents.
type pick struct {
	averages, cumulative []float64
	sigma                float64
}

func (p *pick) fill(dst []float64, rng *rand.Rand) {
	for k := range dst {
		i, found := slices.BinarySearch(p.cumulative, rng.Float64())
		if found { // the sum belongs to the next one
			i++
		}
		dst[k] = p.averages[i]
		if p.sigma > 0 {
			dst[k] *= exp(p.sigma * rng.NormFloat64())
		}
	}
}

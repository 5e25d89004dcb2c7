package figure

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/plot/vg"

	"shearbook/report"
)

// DensityOptions is what a Density figure shows: a histogram, a lognormal
// density, or both.
type DensityOptions struct {
	Units  Units
	Width  float64 // m on paper, from 0.1 to 0.4; 0 is 0.165
	Height float64 // m on paper, from 0.06 to 0.4; 0 is 0.09

	Classes   Classes   // of the code; none if zero
	Bins      []Bin     // of the averages drawn, from slow to fast; none if nil
	Lognormal Lognormal // none if zero

	// Chances are those of the classes, from slow to fast: one more than there
	// are bounds. Nil takes them from the bins where these hold everything,
	// with a bin that a bound cuts split evenly over ln V, and else from the
	// lognormal density.
	Chances []float64

	// Quantiles are marked on the axis. Zero takes them from where Chances
	// would be taken from.
	Quantiles Quantiles
}

// Quantiles are the velocities that 16, 50 and 84 % lie below.
type Quantiles struct {
	Low, Median, High float64 // m/s, from 0.01, ascending
}

// Density draws how likely each average velocity is, over the bounds of the
// classes. The velocity axis is logarithmic: on it a lognormal density is a
// bell, the soft classes have as much room as the stiff, and areas are
// chances. Over the frame stands a cell for each class with its chance, from
// which lines lead to its bounds, so that a class that is far from the
// average, or narrow, can be read too; where there is no room for all cells,
// the least likely are left out. The class of the median is darker. Below the
// density the median and the range from 16 to 84 % are marked. The error
// names what cannot be drawn.
func Density(o DensityOptions) (*report.Picture, error) {
	f := density{DensityOptions: o, bins: o.Bins}
	if err := f.check(); err != nil {
		return nil, fmt.Errorf("density figure: %w", err)
	}
	if err := f.complete(); err != nil {
		return nil, fmt.Errorf("density figure: %w", err)
	}
	f.fitVelocity()
	f.fitPaper()
	return f.draw(), nil
}

// density is a Density figure in the making.
type density struct {
	DensityOptions
	bins bins

	width, height vg.Length
	x             *axis
	peak          float64 // of the density
	legend        legend
	classes       []cell    // all of them
	cells         []cell    // those over the frame
	text          lettering // of the chances
}

// check refuses what cannot be drawn.
func (f *density) check() error {
	if len(f.bins) == 0 && f.Lognormal == (Lognormal{}) {
		return errors.New("neither a histogram nor a lognormal density is given")
	}
	for _, err := range []error{f.bins.check(), f.Lognormal.check(), f.Classes.check(), f.checkChances()} {
		if err != nil {
			return err
		}
	}
	q := f.Quantiles
	if q != (Quantiles{}) && !(q.Low >= slowest && q.Low <= q.Median && q.Median <= q.High && q.High <= fastest) {
		return fmt.Errorf("quantiles of %v m/s, %v m/s and %v m/s cannot be drawn", q.Low, q.Median, q.High)
	}
	return nil
}

// checkChances refuses chances that are none.
func (f *density) checkChances() error {
	if f.Chances == nil {
		return nil
	}
	if n := len(f.Classes.Bounds); len(f.Chances) != n+1 {
		return fmt.Errorf("%d bounds part %d classes, not %d", n, n+1, len(f.Chances))
	}
	sum := 0.0
	for _, p := range f.Chances {
		if !(p >= 0 && p <= 1+1e-9) {
			return fmt.Errorf("a chance of %v cannot be drawn", p)
		}
		sum += p
	}
	if math.Abs(sum-1) > 0.001 {
		return fmt.Errorf("the chances of the classes add up to %v", sum)
	}
	return nil
}

// complete takes the chances and the quantiles that were not given from the
// densities.
func (f *density) complete() error {
	if f.Chances != nil && f.Quantiles != (Quantiles{}) {
		return nil
	}
	var from law = f.Lognormal
	switch {
	case f.bins.whole():
		from = f.bins
	case f.Lognormal == (Lognormal{}):
		return fmt.Errorf("the bins hold %.4g of the averages and not all: give the chances and the quantiles too", f.bins.sum())
	}
	if f.Quantiles == (Quantiles{}) {
		f.Quantiles = Quantiles{from.quantile(0.16), from.quantile(0.5), from.quantile(0.84)}
	}
	if f.Chances == nil {
		below := 0.0
		for _, b := range f.Classes.sorted() {
			p := from.below(b.Value)
			f.Chances = append(f.Chances, max(0, p-below))
			below = p
		}
		f.Chances = append(f.Chances, max(0, 1-below))
	}
	return nil
}

package spread

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// Classes are the velocity classes of a code: names from slow to fast and the
// bounds between them. A bound belongs to the class below it, the softer one;
// a velocity within one part in 10⁹ of a bound is the bound.
type Classes struct {
	Names  []string  // from slow to fast, one more than Bounds
	Bounds []float64 // m/s, > 0, ascending
}

func (c *Classes) check() error {
	if len(c.Bounds) == 0 {
		return errors.New("there are no bounds between classes")
	}
	if len(c.Names) != len(c.Bounds)+1 {
		return fmt.Errorf("%d bounds lie between %d classes, not %d", len(c.Bounds), len(c.Bounds)+1, len(c.Names))
	}
	below := 0.0
	for _, b := range c.Bounds {
		if !(b > below) || math.IsInf(b, 0) {
			return fmt.Errorf("the bound %v m/s is not above %v m/s", b, below)
		}
		below = b
	}
	return nil
}

// equality is the relative difference up to which a velocity is a bound.
const equality = 1e-9

// index returns the index of the class of a velocity in m/s.
func (c *Classes) index(v float64) int {
	return sort.Search(len(c.Bounds), func(i int) bool { return v <= c.Bounds[i]*(1+equality) })
}

// Of returns the class of a velocity in m/s.
func (c *Classes) Of(v float64) string { return c.Names[c.index(v)] }

// limits returns the bounds of class i in m/s, 0 and +Inf at the ends.
func (c *Classes) limits(i int) (lower, upper float64) {
	upper = math.Inf(1)
	if i > 0 {
		lower = c.Bounds[i-1]
	}
	if i < len(c.Bounds) {
		upper = c.Bounds[i]
	}
	return lower, upper
}

// Chance is that of one class.
type Chance struct {
	Class        string
	Lower, Upper float64 // m/s; 0 and +Inf where the class has no bound
	Chance       float64 // from 0 to 1
	Error        float64 // standard error of Chance from drawing no more; 0 by formula
}

// Outlook is what classes an average may have.
type Outlook struct {
	Chances []Chance // of all classes, from slow to fast; they add up to 1
	Class   string   // of the median
	Likely  []string // the classes with more than LikelyAbove, from slow to fast
}

// LikelyAbove is the chance above which a class is counted among the likely.
const LikelyAbove = 0.05

// Outlook returns the chance of each class by formula:
//
//	P(a < V ≤ b) = Φ((ln b − ln m)/σ) − Φ((ln a − ln m)/σ)
//
// for the median m and the sigma σ of ln V.
func (l Lognormal) Outlook(c Classes) (Outlook, error) {
	if !(l.Median > 0) || math.IsInf(l.Median, 0) || !(l.SigmaLn >= 0) || math.IsInf(l.SigmaLn, 0) {
		return Outlook{}, fmt.Errorf("a median of %v m/s with a sigma of %v is no velocity", l.Median, l.SigmaLn)
	}
	return outlook(c, l.Median, l.between)
}

// between returns the chance of a velocity between two bounds. Above the
// median the upper tails are subtracted, which keeps small chances exact.
func (l Lognormal) between(lower, upper float64) (chance, err float64) {
	if l.SigmaLn == 0 {
		return l.Below(upper*(1+equality)) - l.Below(lower*(1+equality)), 0
	}
	a, b := math.Log(lower/l.Median)/l.SigmaLn, math.Log(upper/l.Median)/l.SigmaLn
	if a > 0 {
		return normalCDF(-a) - normalCDF(-b), 0
	}
	return normalCDF(b) - normalCDF(a), 0
}

// Outlook returns the part of the averages drawn in each class, with its
// standard error.
func (s *Sample) Outlook(c Classes) (Outlook, error) {
	return outlook(c, s.Median, func(lower, upper float64) (chance, err float64) {
		p := s.Below(upper*(1+equality)) - s.Below(lower*(1+equality))
		return p, s.partError(p)
	})
}

// outlook asks for the chance of each class.
func outlook(c Classes, median float64, between func(lower, upper float64) (chance, err float64)) (Outlook, error) {
	if err := c.check(); err != nil {
		return Outlook{}, err
	}
	o := Outlook{Class: c.Of(median)}
	for i, name := range c.Names {
		lower, upper := c.limits(i)
		p, e := between(lower, upper)
		o.Chances = append(o.Chances, Chance{Class: name, Lower: lower, Upper: upper, Chance: p, Error: e})
		if p > LikelyAbove {
			o.Likely = append(o.Likely, name)
		}
	}
	return o, nil
}

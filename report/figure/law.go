package figure

import (
	"fmt"
	"math"
)

// slowest is the least velocity in m/s that is drawn on a logarithmic axis.
const slowest = 0.01

// Bin is one bar of a histogram.
type Bin struct {
	Lower, Upper float64 // m/s, from 0.01, Lower < Upper
	Part         float64 // of everything drawn, from 0 to 1
}

// Lognormal is a velocity whose logarithm is normal.
type Lognormal struct {
	Median  float64 // m/s, from 0.01
	SigmaLn float64 // standard deviation of ln V, from 0 to 3
}

// largestSigma is that of a velocity which is unknown to a factor of 20.
const largestSigma = 3

// law is a distribution of velocities.
type law interface {
	below(v float64) float64    // the part that lies below v (m/s)
	quantile(p float64) float64 // the velocity in m/s that the part p lies below
	density(v float64) float64  // per unit of ln V
}

// check refuses what cannot be drawn.
func (l Lognormal) check() error {
	if l == (Lognormal{}) {
		return nil
	}
	if !(l.Median >= slowest && l.Median <= fastest) || !(l.SigmaLn >= 0 && l.SigmaLn <= largestSigma) {
		return fmt.Errorf("a lognormal velocity with a median of %v m/s and a sigma of %v cannot be drawn", l.Median, l.SigmaLn)
	}
	return nil
}

func (l Lognormal) below(v float64) float64 {
	if l.SigmaLn == 0 {
		if l.Median <= v {
			return 1
		}
		return 0
	}
	return 0.5 * math.Erfc(math.Log(l.Median/v)/l.SigmaLn/math.Sqrt2)
}

func (l Lognormal) quantile(p float64) float64 {
	return l.Median * math.Exp(-l.SigmaLn*math.Sqrt2*math.Erfcinv(2*p))
}

// density is a bell over ln V; it is 0 everywhere where SigmaLn is.
func (l Lognormal) density(v float64) float64 {
	if l.SigmaLn == 0 {
		return 0
	}
	u := math.Log(v/l.Median) / l.SigmaLn
	return math.Exp(-u*u/2) / (l.SigmaLn * math.Sqrt(2*math.Pi))
}

// bins is a histogram. Inside a bin its parts are spread evenly over ln V.
type bins []Bin

// check refuses what cannot be drawn: bins need to be in order and may not
// overlap.
func (b bins) check() error {
	for i, n := range b {
		edges := n.Lower >= slowest && n.Lower < n.Upper && n.Upper <= fastest
		order := i == 0 || n.Lower >= b[i-1].Upper*(1-1e-9)
		if !edges || !order || !(n.Part >= 0 && n.Part <= 1+1e-9) {
			return fmt.Errorf("bin %d from %v m/s to %v m/s with a part of %v cannot be drawn", i+1, n.Lower, n.Upper, n.Part)
		}
	}
	if sum := b.sum(); len(b) > 0 && !(sum > 0 && sum <= 1+1e-6) {
		return fmt.Errorf("the parts of the bins add up to %v", sum)
	}
	return nil
}

// sum returns the part of everything that lies in bins.
func (b bins) sum() float64 {
	sum := 0.0
	for _, n := range b {
		sum += n.Part
	}
	return sum
}

// whole reports whether nothing lies outside the bins.
func (b bins) whole() bool { return b.sum() >= 1-1e-6 }

// log returns the width of the bin on ln V.
func (n Bin) log() float64 { return math.Log1p((n.Upper - n.Lower) / n.Lower) }

// height returns the density of the bin.
func (n Bin) height() float64 { return n.Part / n.log() }

func (b bins) below(v float64) float64 {
	sum := 0.0
	for _, n := range b {
		switch {
		case v >= n.Upper:
			sum += n.Part
		case v > n.Lower:
			return sum + n.Part*math.Log1p((v-n.Lower)/n.Lower)/n.log()
		default:
			return sum
		}
	}
	return sum
}

func (b bins) quantile(p float64) float64 {
	p *= b.sum()
	v := 0.0
	for _, n := range b {
		if n.Part > 0 {
			if p <= n.Part {
				return n.Lower * math.Exp(n.log()*max(0, p)/n.Part)
			}
			v = n.Upper
			p -= n.Part
		}
	}
	return v
}

func (b bins) density(v float64) float64 {
	for _, n := range b {
		if v >= n.Lower && v < n.Upper {
			return n.height()
		}
	}
	return 0
}

// highest returns the greatest density of a bin.
func (b bins) highest() float64 {
	h := 0.0
	for _, n := range b {
		h = max(h, n.height())
	}
	return h
}

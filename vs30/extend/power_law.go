package extend

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// PowerLaw is a velocity that grows as a power of depth: V(z) = a·zⁿ, z in m
// below ground level and V in m/s.
type PowerLaw struct {
	Coefficient float64 // a, the velocity in m/s at 1 m
	Exponent    float64 // n
	Scatter     float64 // root mean square of ln V about the law, over the depth of the fit
}

// At returns the velocity in m/s at depth z m, > 0.
func (p PowerLaw) At(z float64) float64 { return p.Coefficient * math.Pow(z, p.Exponent) }

// TravelTime returns the travel time in s between two depths in m, for n < 1:
//
//	t = (z₂^(1−n) − z₁^(1−n)) / (a·(1−n))
func (p PowerLaw) TravelTime(z1, z2 float64) float64 {
	m := 1 - p.Exponent
	return (math.Pow(z2, m) - math.Pow(z1, m)) / (p.Coefficient * m)
}

// FitPowerLaw returns the power law with the least sum of squares of ln V
// about it, every metre between ground level and the end of the layers
// counting the same. It does not depend on where a layer is split. With x =
// ln(z/d) over the depth d, whose mean is −1 and whose variance is 1,
//
//	n = (1/d)·∫ ln V·(x+1) dz,   ln a = mean of ln V − n·(ln d − 1)
//
// and for a layer of one velocity the integral of x+1 is z·x between its
// boundaries. Gradient layers are cut into 64 slices of one velocity. The
// layers must not be empty, nor end in a half-space.
func FitPowerLaw(layers []profile.Layer) PowerLaw {
	d := layers[len(layers)-1].Bottom
	var mean, square, slope float64
	eachSlice(layers, func(top, bottom, v float64) {
		y, h := math.Log(v), (bottom-top)/d
		mean += y * h
		square += y * y * h
		slope += y * (zLogZ(bottom/d) - zLogZ(top/d))
	})
	return PowerLaw{
		Coefficient: math.Exp(mean - slope*(math.Log(d)-1)),
		Exponent:    slope,
		Scatter:     math.Sqrt(max(0, square-mean*mean-slope*slope)),
	}
}

// zLogZ returns z·ln z, 0 at 0.
func zLogZ(z float64) float64 {
	if z == 0 {
		return 0
	}
	return z * math.Log(z)
}

// eachSlice calls f with the layers, gradient layers cut into slices that
// have the velocity at their middle.
func eachSlice(layers []profile.Layer, f func(top, bottom, v float64)) {
	const slices = 64
	for i := range layers {
		l := &layers[i]
		n := 1
		if l.Gradient() {
			n = slices
		}
		at := func(k int) float64 { return l.Top + (l.Bottom-l.Top)*float64(k)/float64(n) }
		for k := range n {
			top, bottom := at(k), at(k+1)
			f(top, bottom, l.VsAt(top+(bottom-top)/2))
		}
	}
}

// powerLaw returns the continuation of the profile by the power law that fits
// its own velocities best: from the end of the profile down, V = a·zⁿ with the
// a and n of FitPowerLaw. That velocity in soil grows as a power of depth is
// common practice; no source gives a sigma, and the scatter of the profile
// about the law, which the note states, is not one.
//
// It refuses a profile of less than 10 m, of one velocity, or with n outside
// 0 < n < 1.
func powerLaw() *Relation {
	return &Relation{
		ID:          "power-law",
		Name:        "power law fitted to the profile",
		Source:      "least squares on ln Vs of the profile itself",
		Cite:        "least squares on ln Vs",
		Region:      "the site itself",
		MinDepth:    10,
		MinVelocity: slowGround, MaxVelocity: hardRock,
		Limits:   "our own",
		Standing: CommonPractice,
		refuses:  true,
		estimate: continuedLaw,
	}
}

// continuedLaw is the estimate of powerLaw.
func continuedLaw(r *Relation, g *ground) (result, *Refusal) {
	end := g.end()
	if oneVelocity(g.layers) {
		return result{}, r.refuse(NoFit, "the profile has one velocity, which fixes no exponent")
	}
	p := FitPowerLaw(g.layers)
	if !(p.Exponent > 0 && p.Exponent < 1) {
		return result{}, r.refuse(NoFit, "the exponent of the law is %.3g; it has to lie between 0 and 1", p.Exponent)
	}
	time := g.depth/g.average + p.TravelTime(end, g.to())
	return result{velocity: g.thickness / time, how: fmt.Sprintf(
		"below it the power law that fits the profile best goes on, %.4g·z^%.3f m/s, from %.4g to %.4g m/s; "+
			"the profile scatters by %.2g of ln Vs about it",
		p.Coefficient, p.Exponent, p.At(end), p.At(g.to()), p.Scatter)}, nil
}

// oneVelocity reports whether all layers have the same velocity throughout.
func oneVelocity(layers []profile.Layer) bool {
	v := layers[0].Vs
	for i := range layers {
		if l := &layers[i]; l.Gradient() || math.Abs(l.Vs-v) > vs30.Touching*v {
			return false
		}
	}
	return true
}

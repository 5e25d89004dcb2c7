package spread

import (
	"math"
	"math/rand/v2"
)

// restack draws profiles whose boundaries are random.
type restack struct {
	parts    []part
	model    *Model
	boundary inverse
}

func (s *restack) fill(dst []float64, rng *rand.Rand) {
	for k := range dst {
		dst[k] = s.model.Thickness / s.time(rng)
	}
}

// time draws one profile and returns its travel time in s.
func (s *restack) time(rng *rand.Rand) float64 {
	from, to := s.model.From, s.model.From+s.model.Thickness
	at := walk{parts: s.parts}
	total, z, above := 0.0, 0.0, math.NaN() // above is the middle of the layer above
	events, top := 0.0, 0.0
	for top < to {
		events += rng.ExpFloat64()
		bottom := s.boundary.depth(events)
		if bottom > from {
			a, b := max(top, from), min(bottom, to)
			middle := a + (b-a)/2
			rho := 0.0
			if above == above {
				rho = s.model.Correlation.between(above, middle)
			}
			if rho < 1 {
				z = rho*z + math.Sqrt(1-rho*rho)*rng.NormFloat64()
			}
			median, sigma := at.down(middle, b)
			total += median * exp(-sigma*z)
			above = middle
		}
		top = bottom
	}
	return total
}

// walk goes down through the parts of a profile.
type walk struct {
	parts []part
	i     int     // the part that the walk has come to
	z     float64 // m, the depth that it has come to; 0 before the first step
}

// down walks to depth to in m and returns the travel time in s on the way, and
// the sigma at the depth middle, which it passes.
func (w *walk) down(middle, to float64) (time, sigma float64) {
	for {
		p := &w.parts[w.i]
		top, bottom := max(p.top, w.z), min(p.bottom, to)
		time += p.inside(top, bottom)
		if p.top <= middle {
			sigma = p.sigma
		}
		w.z = bottom
		if to <= p.bottom || w.i == len(w.parts)-1 {
			return time, sigma
		}
		w.i++
	}
}

// inside returns the travel time in s between two depths in the part, whose
// velocity is linear in depth.
func (p *part) inside(top, bottom float64) float64 {
	if p.above == p.below {
		return (bottom - top) * p.above
	}
	v := func(z float64) float64 {
		return 1/p.above + (1/p.below-1/p.above)*(z-p.top)/(p.bottom-p.top)
	}
	v0, v1 := v(top), v(bottom)
	if x := (v1 - v0) / v0; x != 0 {
		return (bottom - top) / v0 * math.Log1p(x) / x
	}
	return (bottom - top) / v0
}

package spread

import (
	"math"
	"math/rand/v2"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// Random layerings one by one, against the definition written out with the same
// random numbers: boundaries by bisection of the expected number, medians by
// vs30.Average, the sigma and the correlation looked up at the middles.
func TestLayeringStepByStep(t *testing.T) {
	layers := pairs(3, 150, 7, 240, 12, 190, 20, 420)
	layers[1].VsBottom = 320
	c := class(t, "USGS C")
	m := &Model{Layers: layers, From: 1.2, Thickness: 30, Sigmas: []float64{0.4, 0.1, 0.3, 0.05},
		Correlation: Correlation{Interlayer, c}, Layering: ToroLayering()}
	parts, err := m.parts()
	if err != nil {
		t.Fatal(err)
	}
	s := &restack{parts: parts, model: m, boundary: m.Layering.inverse()}
	a, b := rand.New(rand.NewPCG(3, 5)), rand.New(rand.NewPCG(3, 5))
	for range 500 {
		near(t, "travel time", s.time(a), plainTime(t, m, c, b), 1e-9)
	}
}

func plainTime(t *testing.T, m *Model, c ToroClass, rng *rand.Rand) float64 {
	t.Helper()
	from, to := m.From, m.From+m.Thickness
	var edges []float64 // from the datum down
	edges = append(edges, from)
	total, z, events := 0.0, 0.0, 0.0
	for k := 0; edges[k] < to; {
		events += rng.ExpFloat64()
		low, high := 0.0, 1e4
		for range 200 {
			if mid := (low + high) / 2; m.Layering.Expected(mid) < events {
				low = mid
			} else {
				high = mid
			}
		}
		if low <= from {
			continue
		}
		edges = append(edges, min(low, to))
		k++
		middle := (edges[k-1] + edges[k]) / 2
		rho := 0.0
		if k > 1 {
			above := (edges[k-2] + edges[k-1]) / 2
			d, apart := (above+middle)/2, middle-above
			byDepth := c.Rho200 * math.Pow((d+c.D0)/(200+c.D0), c.B)
			rho = (1-byDepth)*c.Rho0*math.Exp(-apart/c.Delta) + byDepth
		}
		z = rho*z + math.Sqrt(1-rho*rho)*rng.NormFloat64()
		v, err := vs30.Average(m.Layers, edges[k-1], edges[k]-edges[k-1])
		if err != nil {
			t.Fatal(err)
		}
		total += (edges[k] - edges[k-1]) / (v * math.Exp(sigmaAt(m.Layers, m.Sigmas, middle)*z))
	}
	return total
}

func sigmaAt(layers []profile.Layer, sigmas []float64, z float64) float64 {
	for i, l := range layers {
		if z < l.Bottom {
			return sigmas[i]
		}
	}
	return sigmas[len(sigmas)-1]
}

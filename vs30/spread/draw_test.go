package spread

import (
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat"

	"shearbook/profile"
	"shearbook/vs30"
)

// models are models of all kinds that have a formula.
func models(t testing.TB) map[string]*Model {
	ap2 := measured(t, "AP2")
	c := Correlation{Interlayer, class(t, "USGS D")}
	return map[string]*Model{
		"independent": {Layers: ap2, Thickness: 30, Sigmas: all(7, 0.2)},
		"full":        {Layers: ap2, Thickness: 30, Sigmas: all(7, 0.2), Correlation: Correlation{Rule: Full}},
		"Toro":        {Layers: ap2, Thickness: 30, Sigmas: all(7, 0.37), Correlation: c},
		"boundaries":  {Layers: ap2, Thickness: 30, Sigmas: all(7, 0.1), Boundaries: all(7, 0.4)},
		"boundary":    {Layers: pairs(15, 200, 25, 300), Thickness: 30, Sigmas: all(2, 0.1), Boundaries: all(2, 1.5)},
		"datum":       {Layers: ap2, From: 3, Thickness: 30, Sigmas: all(7, 0.15), Correlation: c, Boundaries: all(7, 0.2)},
		"gradient": {Layers: []profile.Layer{{Bottom: 8, Vs: 120, VsBottom: 260}, {Top: 8, Bottom: 40, Vs: 300, VsBottom: 500}},
			Thickness: 30, Sigmas: []float64{0.1, 0.3}, Correlation: Correlation{Interlayer, class(t, "USGS C")}},
	}
}

// The mean and the variance of the travel time are exact by formula: the
// sample has them within four standard errors (√(m₄ − σ⁴)/(2σ√n) of σ). Its
// median and its quantiles lie within four standard errors and 0.5 % of those
// of the matched lognormal, 2 % where layers have sigmas above 0.2: that one is
// not exact.
func TestDrawnAgainstFormula(t *testing.T) {
	for name, m := range models(t) {
		p, s := propagate(t, m), draw(t, m, Options{})
		n := float64(len(s.Velocities))
		times := make([]float64, len(s.Velocities))
		for i, v := range s.Velocities {
			times[i] = m.Thickness / v
		}
		mean, deviation := stat.MeanStdDev(times, nil)
		fourth := stat.Moment(4, times, nil)
		q := p.Matched
		wantMean := m.Thickness / q.Median * math.Exp(q.SigmaLn*q.SigmaLn/2)
		wantDeviation := wantMean * math.Sqrt(math.Expm1(q.SigmaLn*q.SigmaLn))
		near(t, name+" mean time", mean, wantMean, 4*deviation/math.Sqrt(n))
		near(t, name+" deviation of time", deviation, wantDeviation,
			4*math.Sqrt(fourth-math.Pow(deviation, 4))/(2*deviation*math.Sqrt(n)))

		band, loose := q.Band(), 0.005
		if slices.Max(m.Sigmas) > 0.2 {
			loose = 0.02
		}
		for _, c := range []struct{ p, want float64 }{{0.05, band.P5}, {0.16, band.P16}, {0.5, band.Median}, {0.84, band.P84}, {0.95, band.P95}} {
			near(t, name+" quantile", s.Quantile(c.p), c.want, 4*s.QuantileError(c.p)+loose*c.want)
		}
		near(t, name+" sigma", s.SigmaLn, q.SigmaLn, 4*s.SigmaLn/math.Sqrt(2*n)+5*loose*q.SigmaLn)
	}
}

// Where sigmas are small the first order is enough.
func TestDrawnAgainstFirstOrder(t *testing.T) {
	for name, m := range models(t) {
		small := *m
		small.Sigmas = make([]float64, len(m.Layers))
		for i := range small.Sigmas {
			small.Sigmas[i] = m.Sigmas[i] / 10
		}
		small.Boundaries = nil
		p, s := propagate(t, &small), draw(t, &small, Options{})
		near(t, name+" sigma", s.SigmaLn, p.SigmaLn, 4*p.SigmaLn/math.Sqrt(2e5)+1e-3*p.SigmaLn)
		near(t, name+" median", s.Median, p.Velocity, 4*s.MedianError+1e-3*p.Velocity)
	}
}

// Boundaries alone, between layers with gradients.
func TestDrawnBoundaries(t *testing.T) {
	layers := []profile.Layer{{Bottom: 8, Vs: 120, VsBottom: 260}, {Top: 8, Bottom: 18, Vs: 360, VsBottom: 700}, {Top: 18, Bottom: 40, Vs: 400}}
	m := &Model{Layers: layers, Thickness: 30, Sigmas: all(3, 0), Boundaries: all(3, 0.2)}
	p, s := propagate(t, m), draw(t, m, Options{})
	near(t, "sigma", s.SigmaLn, p.SigmaLn, 4*p.SigmaLn/math.Sqrt(2e5)+2e-3*p.SigmaLn)
	near(t, "median", s.Median, p.Velocity, 4*s.MedianError+1e-4*p.Velocity)
}

// The stated sampling errors are those of repeated drawing: over 200 seeds
// Median, P16 and a chance scatter by as much, within 20 % (four standard
// errors of a deviation from 200, 1/√400 each).
func TestSamplingErrors(t *testing.T) {
	m := models(t)["independent"]
	var median, p16, chance [200]float64
	var stated [3]float64
	for i := range median {
		s := draw(t, m, Options{Realisations: 2000, Seed: uint64(i + 1)})
		median[i], p16[i], chance[i] = s.Median, s.P16, s.Below(125)
		stated[0] += s.MedianError / 200
		stated[1] += s.QuantileError(0.16) / 200
		stated[2] += s.BelowError(125) / 200
	}
	for i, v := range [][]float64{median[:], p16[:], chance[:]} {
		near(t, "scatter over stated error", stat.StdDev(v, nil)/stated[i], 1, 0.2)
	}
}

// The same bytes on one core and on two, with one worker and with several, and
// another sample for another seed.
func TestSameOnAnyNumberOfCores(t *testing.T) {
	list := models(t)
	list["layering"] = &Model{Layers: measured(t, "AP2"), Thickness: 30, Sigmas: all(7, 0.2),
		Correlation: Correlation{Interlayer, class(t, "USGS D")}, Layering: ToroLayering()}
	for name, m := range list {
		o := Options{Realisations: 3*block + 77}
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(1))
		one := draw(t, m, o)
		runtime.GOMAXPROCS(2)
		two := draw(t, m, o)
		o.Workers = 3
		three := draw(t, m, o)
		if !slices.Equal(one.Velocities, two.Velocities) || !slices.Equal(one.Velocities, three.Velocities) || one.Band != two.Band {
			t.Errorf("%s: the sample depends on the cores", name)
		}
		if one.Seed != DefaultSeed {
			t.Errorf("%s: seed %d", name, one.Seed)
		}
		o.Seed = 7
		if other := draw(t, m, o); slices.Equal(one.Velocities, other.Velocities) {
			t.Errorf("%s: the seed does not matter", name)
		}
	}
}

// A hundred times the realisations allocate no more often.
func TestNoAllocationPerRealisation(t *testing.T) {
	list := models(t)
	list["layering"] = &Model{Layers: measured(t, "AP2"), Thickness: 30, Sigmas: all(7, 0.2), Layering: ToroLayering()}
	for name, m := range list {
		count := func(n int) float64 {
			return testing.AllocsPerRun(5, func() { draw(t, m, Options{Realisations: n, Workers: 1}) })
		}
		if few, many := count(200), count(20000); many > few {
			t.Errorf("%s: %g allocations for 200 realisations, %g for 20,000", name, few, many)
		}
	}
	q := Equivalents{Averages: []float64{300, 310}, SigmaLn: 0.1}
	count := func(n int) float64 {
		return testing.AllocsPerRun(5, func() {
			if _, err := q.Draw(Options{Realisations: n, Workers: 1}); err != nil {
				t.Fatal(err)
			}
		})
	}
	if few, many := count(200), count(20000); many > few {
		t.Errorf("equivalents: %g allocations for 200 realisations, %g for 20,000", few, many)
	}
}

// Without sigmas every profile drawn has the average of the profile, however
// its layering falls, from a datum and through gradients too.
func TestLayeringKeepsTheAverage(t *testing.T) {
	layers := pairs(3, 150, 7, 240, 12, 190, 20, 420)
	layers[1].VsBottom = 320
	for _, from := range []float64{0, 2.2, 11} {
		m := &Model{Layers: layers, From: from, Thickness: 30, Sigmas: all(4, 0), Layering: ToroLayering()}
		want, err := vs30.Average(layers, from, 30)
		if err != nil {
			t.Fatal(err)
		}
		s := draw(t, m, Options{Realisations: 3000})
		near(t, "slowest", s.Velocities[0], want, 1e-9)
		near(t, "fastest", s.Velocities[2999], want, 1e-9)
	}
}

// A uniform profile, randomly layered and fully correlated, is one lognormal
// factor: the median stays, and sigma is that of the layers.
func TestLayeringFullyCorrelated(t *testing.T) {
	m := &Model{Layers: pairs(40, 250), Thickness: 30, Sigmas: all(1, 0.25), Correlation: Correlation{Rule: Full}, Layering: ToroLayering()}
	s := draw(t, m, Options{})
	near(t, "median", s.Median, 250, 4*s.MedianError)
	near(t, "sigma", s.SigmaLn, 0.25, 4*0.25/math.Sqrt(2e5))
}

// The variance of a randomly layered uniform profile with independent layers is
// σ²·E[Σwᵢ²]: here from a plain simulation of the process by small steps.
func TestLayeringIndependent(t *testing.T) {
	const sigma = 0.05
	m := &Model{Layers: pairs(40, 250), Thickness: 30, Sigmas: all(1, sigma), Layering: ToroLayering()}
	s := draw(t, m, Options{})
	rng, sum := seeded(8), 0.0
	const n, step = 5000, 0.05
	for range n {
		top, square := 0.0, 0.0
		for z := 0.0; z < 30-step/2; z += step {
			if rng.Float64() < m.Layering.Rate(z)*step {
				square += (z - top) * (z - top) / 900
				top = z
			}
		}
		sum += square + (30-top)*(30-top)/900
	}
	near(t, "sigma", s.SigmaLn, sigma*math.Sqrt(sum/n), 0.015*s.SigmaLn)
}

// Boundaries never cross, however large their errors.
func TestBoundariesDoNotCross(t *testing.T) {
	layers := pairs(2, 100, 0.5, 2000, 37.5, 300)
	m := &Model{Layers: layers, Thickness: 30, Sigmas: all(3, 0), Boundaries: all(3, 50)}
	s := draw(t, m, Options{Realisations: 20000})
	// The boundaries move by half the thin layer, 0.25 m, at most. Slowest: the
	// upper one down and the lower one up, 2.25/100 + 0/2000 + 27.75/300;
	// fastest: 1.75/100 + 1/2000 + 27.25/300.
	near(t, "slowest", s.Velocities[0], 30/(2.25/100+27.75/300), 1e-9)
	near(t, "fastest", s.Velocities[19999], 30/(1.75/100+1.0/2000+27.25/300), 1e-9)
}

func TestOptionsThatAreNone(t *testing.T) {
	m := models(t)["independent"]
	for _, c := range []struct {
		o   Options
		say string
	}{
		{Options{Realisations: -1}, "-1 realisations"},
		{Options{Realisations: MaxRealisations + 1}, "between 1 and 10000000"},
	} {
		if _, err := m.Draw(c.o); err == nil || !strings.Contains(err.Error(), c.say) {
			t.Errorf("error %v does not say %q", err, c.say)
		}
	}
	both := *m
	both.Layering, both.Boundaries = ToroLayering(), all(7, 0.1)
	bad := *m
	bad.Layering = Layering{1, 5, 9}
	none := *m
	none.Layering = Layering{-1, 0.5, 1}
	for _, c := range []struct {
		m   *Model
		say string
	}{{&both, "either it or"}, {&bad, "too many"}, {&none, "no boundaries"}} {
		if _, err := c.m.Draw(Options{}); err == nil || !strings.Contains(err.Error(), c.say) {
			t.Errorf("error %v does not say %q", err, c.say)
		}
	}
	if _, err := layered(200).Draw(Options{Realisations: MaxRealisations}); err == nil || !strings.Contains(err.Error(), "draw fewer") {
		t.Errorf("error %v, want that this is too much to draw", err)
	}
	if s := draw(t, m, Options{Realisations: 1}); s.Median != s.Velocities[0] || s.SigmaLn != 0 {
		t.Errorf("one realisation: %+v", s)
	}
}

// Of 1,000 sites whose truth is known, surveyed with errors that the model
// describes, the band from 16 to 84 % around what was measured holds the true
// average of 68 ± 4 %; drawn and by formula.
func TestCoverage(t *testing.T) {
	rng := seeded(1)
	c := Correlation{Interlayer, class(t, "USGS C")}
	drawn, formula := 0, 0
	const sites = 1000
	for range sites {
		truth := growing(rng)
		want, err := vs30.Average(truth, 0, 30)
		if err != nil {
			t.Fatal(err)
		}
		m := &Model{Layers: slices.Clone(truth), Thickness: 30, Sigmas: make([]float64, len(truth)), Correlation: c}
		z := 0.0
		for i := range m.Layers {
			l := &m.Layers[i]
			rho := 0.0
			if i > 0 {
				u := &m.Layers[i-1]
				above, middle := (u.Top+u.Bottom)/2, (l.Top+min(30, l.Bottom))/2
				rho = c.Class.Correlation((above+middle)/2, middle-above)
			}
			z = rho*z + math.Sqrt(1-rho*rho)*rng.NormFloat64()
			m.Sigmas[i] = 0.05 + 0.2*rng.Float64()
			l.Vs *= math.Exp(m.Sigmas[i] * z)
		}
		s := draw(t, m, Options{Realisations: 4000, Seed: rng.Uint64() | 1})
		if want >= s.P16 && want <= s.P84 {
			drawn++
		}
		if b := propagate(t, m).Matched.Band(); want >= b.P16 && want <= b.P84 {
			formula++
		}
	}
	near(t, "sites inside the band drawn", float64(drawn)/sites, 0.68, 0.04)
	near(t, "sites inside the band by formula", float64(formula)/sites, 0.68, 0.04)
}

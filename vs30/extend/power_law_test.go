package extend

import (
	"bytes"
	"encoding/json"
	"math"
	"math/rand/v2"
	"os/exec"
	"testing"

	"shearbook/profile"
)

// a = 150, n = 0.25 to 30 m: the average a·(1−n)·Zⁿ = 112.5·30^0.25 = 263.289074 m/s.
func TestPowerLawTravelTime(t *testing.T) {
	p := PowerLaw{Coefficient: 150, Exponent: 0.25}
	near(t, "average", 30/p.TravelTime(0, 30), 263.289074, 1e-6)
	near(t, "in two parts", p.TravelTime(0, 12)+p.TravelTime(12, 30), p.TravelTime(0, 30), 1e-15)
	near(t, "velocity at 16 m", p.At(16), 300, 1e-9)
}

// A profile cut finely from a power law gives that law back, and the average
// over 30 m that it has. What scatter is left is that of the uppermost layers,
// in which the law bends.
func TestFitOfAPowerLaw(t *testing.T) {
	p := PowerLaw{Coefficient: 150, Exponent: 0.25}
	var layers []profile.Layer
	const n = 20000
	for i := range n {
		top, bottom := 20*float64(i)/n, 20*float64(i+1)/n
		layers = append(layers, profile.Layer{Top: top, Bottom: bottom, Vs: (bottom - top) / p.TravelTime(top, bottom)})
	}
	got := FitPowerLaw(layers)
	near(t, "a", got.Coefficient, 150, 0.01)
	near(t, "n", got.Exponent, 0.25, 1e-5)
	near(t, "scatter", got.Scatter, 0, 2e-3)
	near(t, "Vs30", estimate(t, "power-law", layers, 0, 30).Velocity, 263.289, 0.002)
	// From a datum below ground the law goes on the same.
	near(t, "from 5 m", estimate(t, "power-law", layers, 5, 30).Velocity, 30/p.TravelTime(5, 35), 0.01)
}

// Two layers of equal thickness d/2, by hand: the integral of ln(z/d)+1 over
// the upper half is (1/2)·ln(1/2), so n = (ln 2/2)·ln(V₂/V₁); for 100 and 200
// m/s n = 0.240227, mean of ln V = ln 141.4214, and for d = 20 m
// ln a = 4.951744 − 0.240227·1.995732 = 4.472315, a = 87.56. The variance of
// ln V is (ln 2/2)² = 0.120113; less n² = 0.057709 it is 0.062404 = 0.24981².
func TestFitOfTwoLayers(t *testing.T) {
	p := FitPowerLaw([]profile.Layer{{Bottom: 10, Vs: 100}, {Top: 10, Bottom: 20, Vs: 200}})
	near(t, "n", p.Exponent, 0.240227, 5e-7)
	near(t, "a", p.Coefficient, 87.56, 0.005)
	near(t, "scatter", p.Scatter, 0.24981, 5e-6)
}

// A hundred random profiles, computed again by testdata/recompute.py with
// numpy and scipy (1.24.2 and 1.10.1 when this was written), by other means.
func TestRecomputation(t *testing.T) {
	python := pythonWithNumpy(t)
	type question struct {
		Layers [][4]float64 `json:"layers"`
	}
	type answer struct{ A, N, Scatter, Power, Wang, California, Kiknet, Sigma float64 }

	rng := rand.New(rand.NewPCG(4, 1))
	profiles := make([][]profile.Layer, 100)
	questions := make([]question, len(profiles))
	for i := range profiles {
		profiles[i] = growing(rng, i%2 == 1)
		for _, l := range profiles[i] {
			questions[i].Layers = append(questions[i].Layers, [4]float64{l.Top, l.Bottom, l.Vs, l.VsAt(l.Bottom)})
		}
	}
	var answers []answer
	ask(t, python, questions, &answers)
	if len(answers) != len(questions) {
		t.Fatalf("%d answers to %d questions", len(answers), len(questions))
	}

	compared := map[string]int{}
	for i, a := range answers {
		layers := profiles[i]
		p := FitPowerLaw(layers)
		near(t, "n", p.Exponent, a.N, 1e-4)
		near(t, "a", p.Coefficient, a.A, 3e-4*a.A)
		near(t, "scatter", p.Scatter, a.Scatter, 3e-4)
		for id, want := range map[string]float64{"power-law": a.Power, "wang-2015": a.Wang,
			"boore-2004": a.California, "boore-2011": a.Kiknet} {
			e, err := find(t, id).Estimate(layers, 0, 30)
			if err != nil || want == 0 {
				continue
			}
			compared[id]++
			tolerance := 1e-8
			if id == "power-law" {
				tolerance = 1e-4
			}
			near(t, id, e.Velocity, want, tolerance*want)
			if id == "boore-2004" {
				near(t, "sigma", e.SigmaLn, a.Sigma, 1e-12)
			}
		}
	}
	for _, id := range []string{"power-law", "wang-2015", "boore-2004", "boore-2011"} {
		if compared[id] < 60 {
			t.Errorf("%s was compared %d times", id, compared[id])
		}
	}
}

// growing returns 2 to 8 layers to between 10 and 29 m whose velocity grows.
func growing(rng *rand.Rand, gradients bool) []profile.Layer {
	n := 2 + rng.IntN(7)
	depth := 10 + 19*rng.Float64()
	v := 100 + 150*rng.Float64()
	layers := make([]profile.Layer, n)
	for i := range layers {
		l := profile.Layer{Top: depth * float64(i) / float64(n), Bottom: depth * float64(i+1) / float64(n), Vs: v}
		if gradients {
			v *= 1 + 0.3*rng.Float64()
			l.VsBottom = v
		}
		v *= 1.06 + 0.2*rng.Float64()
		layers[i] = l
	}
	return layers
}

// ask has recompute.py answer the questions.
func ask(t *testing.T, python string, questions, answers any) {
	t.Helper()
	input, err := json.Marshal(questions)
	if err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(python, "testdata/recompute.py")
	cmd.Stdin = bytes.NewReader(input)
	var stderr bytes.Buffer
	cmd.Stderr = &stderr
	output, err := cmd.Output()
	if err != nil {
		t.Fatalf("recompute.py: %v\n%s", err, stderr.Bytes())
	}
	if err := json.Unmarshal(output, answers); err != nil {
		t.Fatal(err)
	}
}

// pythonWithNumpy returns a Python 3 that has numpy and scipy, Debian's first.
func pythonWithNumpy(t *testing.T) string {
	for _, python := range []string{"/usr/bin/python3", "python3"} {
		if exec.Command(python, "-c", "import numpy, scipy").Run() == nil {
			return python
		}
	}
	t.Skip("not recomputed: there is no python3 with numpy and scipy (Debian: python3-numpy, python3-scipy)")
	return ""
}

// FuzzEstimate asks every relation about two layers of any kind: an answer is
// finite and agrees with its own layers.
func FuzzEstimate(f *testing.F) {
	f.Add(10.0, 200.0, 12.0, 300.0, 0.0, 30.0)
	f.Add(1e-3, 1.0, 28.0, 20000.0, 0.0, 30.48)
	f.Fuzz(func(t *testing.T, h1, v1, h2, v2, from, thickness float64) {
		p := profile.Profile{Layers: []profile.Layer{{Bottom: h1, Vs: v1}, {Top: h1, Bottom: h1 + h2, Vs: v2}}}
		if len(profile.Validate(&p)) > 0 || !(thickness < 1e5) || !(from < 1e5) {
			t.Skip("not a profile")
		}
		for _, r := range All() {
			e, err := r.Estimate(p.Layers, from, thickness)
			if err != nil {
				if err.(*Refusal).Text == "" {
					t.Errorf("%s refuses without a word", r.ID)
				}
				continue
			}
			if !(e.Velocity > 0) || math.IsInf(e.Velocity, 0) || !(e.Below > 0) || e.SigmaLn < 0 {
				t.Errorf("%s: %+v", r.ID, e)
			}
		}
	})
}

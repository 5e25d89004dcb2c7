package spread

import (
	"bytes"
	"encoding/json"
	"math"
	"os/exec"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// The questions to testdata/recompute.py and its answers, see there.
type modelQuestion struct {
	H     []float64  `json:"h"`
	V     []float64  `json:"v"`
	Sigma []float64  `json:"sigma"`
	Dz    []float64  `json:"dz"`
	Class *[]float64 `json:"class"`
	Full  bool       `json:"full"`
}

type lognormalQuestion struct {
	Median float64   `json:"median"`
	Sigma  float64   `json:"sigma"`
	Bounds []float64 `json:"bounds"`
}

type layeringQuestion struct {
	H     []float64  `json:"h"`
	V     []float64  `json:"v"`
	Sigma []float64  `json:"sigma"`
	Class []float64  `json:"class"`
	C     [3]float64 `json:"c"`
	N     int        `json:"n"`
}

type questions struct {
	Models     []modelQuestion     `json:"models"`
	Lognormals []lognormalQuestion `json:"lognormals"`
	Students   [][2]float64        `json:"students"`
	Chi        [][2]float64        `json:"chi"`
	Sample     []float64           `json:"sample"`
	Layering   layeringQuestion    `json:"layering"`
}

type answers struct {
	Models []struct {
		Sigma     float64
		Part      []float64
		Slope     []float64
		MeanTime  float64 `json:"mean_time"`
		SdTime    float64 `json:"sd_time"`
		Quantiles []float64
	}
	Lognormals [][]float64
	Students   []float64
	Chi        []float64
	Sample     []float64
	Layering   struct {
		Quantiles  []float64
		Boundaries float64
	}
}

func parameters(c ToroClass) []float64 { return []float64{c.Rho0, c.Delta, c.Rho200, c.D0, c.B} }

// Everything computed again by testdata/recompute.py with numpy and scipy
// (1.24.2 and 1.10.1 when this was written), by other means.
func TestRecomputation(t *testing.T) {
	python := pythonWithNumpy(t)
	rng := seeded(20)
	var q questions
	var list []*Model
	classes := ToroClasses()
	for i := range 12 {
		m := &Model{Layers: growing(rng), Thickness: 35}
		n := len(m.Layers)
		mq := modelQuestion{Full: i%3 == 1}
		switch c := classes[rng.IntN(len(classes))]; i % 3 {
		case 1:
			m.Correlation.Rule = Full
		case 2:
			m.Correlation = Correlation{Interlayer, c}
			p := parameters(c)
			mq.Class = &p
		}
		m.Sigmas, m.Boundaries = make([]float64, n), make([]float64, n)
		for k, l := range m.Layers {
			m.Sigmas[k], m.Boundaries[k] = 0.02+0.18*rng.Float64(), 0.2*rng.Float64()
			mq.H, mq.V = append(mq.H, l.Bottom-l.Top), append(mq.V, l.Vs)
		}
		mq.Sigma, mq.Dz = m.Sigmas, m.Boundaries
		q.Models, list = append(q.Models, mq), append(list, m)
	}
	for range 50 {
		q.Lognormals = append(q.Lognormals, lognormalQuestion{100 + 1500*rng.Float64(), 0.02 + 0.5*rng.Float64(), nehrp.Bounds})
	}
	for _, f := range []float64{1, 2, 3, 7, 30} {
		for _, level := range []float64{0.68, 0.90, 0.95, 0.99} {
			q.Students = append(q.Students, [2]float64{f, level})
		}
		for _, x := range []float64{0.01, 1, 4, 20, 60} {
			q.Chi = append(q.Chi, [2]float64{x, f})
		}
	}
	drawn := draw(t, list[0], Options{Realisations: 5001})
	q.Sample = drawn.Velocities
	restacked := &Model{Layers: pairs(4, 150, 8, 260, 18, 420), Thickness: 30, Sigmas: []float64{0.35, 0.02, 0.25},
		Correlation: Correlation{Interlayer, class(t, "USGS C")}, Layering: ToroLayering()}
	q.Layering = layeringQuestion{H: []float64{4, 8, 18}, V: []float64{150, 260, 420}, Sigma: restacked.Sigmas,
		Class: parameters(restacked.Correlation.Class), C: [3]float64{10.86, -0.89, 1.98}, N: 5000}

	var a answers
	ask(t, python, q, &a)
	for i, want := range a.Models {
		compareModel(t, list[i], want.Sigma, want.Part, want.Slope)
		// Two samples of different generators: standard errors of both together.
		s := draw(t, list[i], Options{})
		for k, p := range []float64{0.05, 0.16, 0.5, 0.84, 0.95} {
			near(t, "quantile drawn", s.Quantile(p), want.Quantiles[k], 5*math.Sqrt(3)*s.QuantileError(p))
		}
		m := propagate(t, list[i]).Matched
		mean := 35 / m.Median * math.Exp(m.SigmaLn*m.SigmaLn/2)
		near(t, "mean time", mean, want.MeanTime, 5*want.SdTime/math.Sqrt(5e4))
		near(t, "deviation of time", mean*math.Sqrt(math.Expm1(m.SigmaLn*m.SigmaLn)), want.SdTime, 0.02*want.SdTime)
	}
	for i, want := range a.Lognormals {
		o, err := Lognormal{q.Lognormals[i].Median, q.Lognormals[i].Sigma}.Outlook(nehrp)
		if err != nil {
			t.Fatal(err)
		}
		for k, p := range chancesOf(o) {
			near(t, "chance", p, want[k], 1e-12)
		}
	}
	for i, want := range a.Students {
		near(t, "Student's t", StudentT(int(q.Students[i][0]), q.Students[i][1]), want, 1e-6*want)
	}
	for i, want := range a.Chi {
		near(t, "chi-square", survival(q.Chi[i][0], int(q.Chi[i][1])), want, 1e-9)
		near(t, "gonum's", distuv.ChiSquared{K: q.Chi[i][1]}.Survival(q.Chi[i][0]), want, 1e-9)
	}
	for k, p := range []float64{0.05, 0.16, 0.5, 0.84, 0.95} {
		near(t, "quantile of a sample", drawn.Quantile(p), a.Sample[k], 1e-9)
	}
	s := draw(t, restacked, Options{})
	for k, p := range []float64{0.05, 0.16, 0.5, 0.84, 0.95} {
		near(t, "quantile of random layerings", s.Quantile(p), a.Layering.Quantiles[k], 5*math.Sqrt(21)*s.QuantileError(p))
	}
	near(t, "expected boundaries", ToroLayering().Expected(30), a.Layering.Boundaries, 1e-9)
}

// compareModel compares the formula with the recomputation.
func compareModel(t *testing.T, m *Model, sigma float64, part, slope []float64) {
	t.Helper()
	p := propagate(t, m)
	near(t, "sigma", p.SigmaLn, sigma, 1e-7)
	layer, boundary := 0, 0
	for _, s := range p.Shares {
		if s.Boundary {
			near(t, "slope of a boundary", s.Slope, slope[boundary], 1e-7)
			boundary++
			continue
		}
		near(t, "part of a layer", s.Part, part[layer], 1e-6)
		layer++
	}
	if layer != len(part) || boundary != len(slope) {
		t.Errorf("%d layers and %d boundaries, want %d and %d", layer, boundary, len(part), len(slope))
	}
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

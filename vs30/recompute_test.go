package vs30

import (
	"bytes"
	"encoding/json"
	"os/exec"
	"testing"

	"shearbook/profile"
)

// A thousand random profiles, computed again by testdata/recompute.py with
// numpy and scipy (1.24.2 and 1.10.1 when this was written), by other means.
func TestRecomputation(t *testing.T) {
	python := pythonWithNumpy(t)
	type question struct {
		Layers [][5]float64 `json:"layers"`
		From   float64      `json:"from"`
		To     float64      `json:"to"`
		Period bool         `json:"period"`
	}
	type answer struct{ Time, Mean, Deviation, Period float64 }

	rng := seeded(50)
	profiles := make([][]profile.Layer, 1000)
	questions := make([]question, len(profiles))
	for i := range profiles {
		layers := randomLayers(rng, i%2 == 1)
		q := question{From: 5 * rng.Float64(), To: 30 + 10*rng.Float64(), Period: i%20 < 2}
		for _, l := range layers {
			q.Layers = append(q.Layers, [5]float64{l.Top, l.Bottom, l.Vs, l.VsAt(l.Bottom), l.Density})
		}
		profiles[i], questions[i] = layers, q
	}

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
	var answers []answer
	if err := json.Unmarshal(output, &answers); err != nil || len(answers) != len(questions) {
		t.Fatalf("%d answers to %d questions: %v", len(answers), len(questions), err)
	}

	for i, a := range answers {
		q, layers := questions[i], profiles[i]
		s, err := Describe(layers, q.From, q.To-q.From)
		if err != nil {
			t.Fatal(err)
		}
		want := (q.To - q.From) / a.Time
		near(t, "average", s.TimeAverage, want, 1e-10*want)
		near(t, "mean by thickness", s.ThicknessMean, a.Mean, 1e-10*a.Mean)
		near(t, "deviation", s.StdDev, a.Deviation, 1e-9*s.Max)
		if q.Period {
			near(t, "period", period(t, layers, q.From, q.To), a.Period, 1e-8*a.Period)
		}
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

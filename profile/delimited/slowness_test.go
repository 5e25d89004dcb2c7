package delimited

import (
	"math"
	"testing"
)

// Vs = 304,800/2032 = 150 m/s, 304,800/1385 = 220.072 m/s, 1,000,000/2500 = 400 m/s.
func TestSlownessCannotBeMapped(t *testing.T) {
	for _, c := range []struct {
		table string
		opt   Options
		want  float64
	}{
		{"top (m),bottom (m),slowness (us/ft)\n0,5,2032\n", Options{Map: []string{"Vs=slowness (us/ft)"}}, 150},
		{"top (m),bottom (m),slowness\n0,5,1385\n", Options{Map: []string{"Vs=slowness [us/ft]"}}, 304800.0 / 1385},
		{"top (m),bottom (m),slowness_us_ft\n0,5,2032\n", Options{Map: []string{"Vs=slowness_us_ft"}}, 150},
		{"top (m),bottom (m),Vs (µs/m)\n0,5,2500\n", Options{}, 400},
		{"top,bottom,vs\nm,m,us/m\n0,5,2500\n", Options{}, 400},
		{"profile,top (m),bottom (m),Vs (s/km)\nA,0,5,2.5\n", Options{}, 400},
	} {
		p, err := Read("x.csv", []byte(c.table), c.opt)
		if err != nil {
			t.Errorf("%q: %v", c.table, err)
			continue
		}
		if got := p[0].Layers[0].Vs; math.Abs(got-c.want) > 1e-9 {
			t.Errorf("%q: %v m/s, want %v", c.table, got, c.want)
		}
	}
	// The plain road of large tables multiplies, so it is not taken.
	h, err := ReadHead("x.csv", []byte("profile,top (m),bottom (m),Vs (s/km)\nA,0,5,2.5\n"), Options{})
	if h != nil || err != nil {
		t.Errorf("head %v, %v", h, err)
	}
}

// A mapping that a hint offers must never name what cannot be Vs.
func TestHintSuggestsNoVs(t *testing.T) {
	for _, heading := range []string{
		"Vs30 (m/s)", "V_S30 (m/s)", "average velocity (m/s)", "Rayleigh velocity (m/s)", "Love velocity (m/s)", "group velocity (m/s)", "phase velocity (m/s)",
		"shear modulus (MPa)", "H/V", "qc (MPa)", "fs (kPa)", "shear strength (kPa)", "shear wave time (ms)", "shear speed elevation (m)", "Vp velocity (m/s)",
	} {
		if hint := HintMap(false, true, []string{heading}); hint != "" {
			t.Errorf("%s: %s", heading, hint)
		}
	}
	for _, heading := range []string{"Elevation (m)", "RL (m)", "level (mAHD)", "top (m OD)"} {
		if items, _ := depthItems([]string{heading}); len(items) > 0 {
			t.Errorf("%s: %v", heading, items)
		}
	}
}

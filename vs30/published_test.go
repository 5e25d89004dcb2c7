package vs30

import (
	"math"
	"testing"

	"shearbook/profile"
)

// Ten measured profiles with the Vs30 printed for them; source in
// testdata/profiles/README.md. OSW and BLF end above 30 m and are continued
// with their deepest velocity, by hand here.
func TestMeasuredProfiles(t *testing.T) {
	profiles := readLayers(t, "measured.csv")
	rows := readRows(t, "measured-vs30.csv")
	if len(rows) != 10 || len(profiles) != 10 {
		t.Fatalf("%d values for %d profiles, want 10 of each", len(rows), len(profiles))
	}
	for _, row := range rows {
		name, printed, exact := row[0], number(t, row[1]), number(t, row[2])
		layers := profiles[name]
		if reached := layers[len(layers)-1].Bottom; reached != number(t, row[4]) {
			t.Errorf("%s reaches %g m, want %s", name, reached, row[4])
		}
		if row[3] == "yes" {
			if _, err := Average(layers, 0, 30); err == nil {
				t.Errorf("%s was averaged below its end", name)
			}
			layers[len(layers)-1].Bottom = 30
		}
		got := average(t, layers, 0, 30)
		near(t, name+" exact", got, exact, 0.005)
		near(t, name+" printed", got, printed, 0.01*printed)
	}
}

// The same profiles over other depths, over 100 ft, and over 30 m below a
// datum 3 m down: 3-decimal values of Z/Σ(h/v), recomputed in exact fractions
// (Python 3.11 fractions.Fraction) from measured.csv.
func TestOtherDepths(t *testing.T) {
	profiles := readLayers(t, "measured.csv")
	depths := []float64{5, 10, 15, 20, 25, 30, 100 * profile.Foot}
	for _, c := range []struct {
		name  string
		want  []float64 // m/s, over depths
		datum float64   // m/s, 30 m below 3 m
	}{
		{"AP2", []float64{99.254, 84.126, 98.553, 113.255, 124.389, 133.113, 133.852}, 139.266},
		{"OHW", []float64{197.000, 201.726, 227.653, 251.529, 249.776, 248.620, 248.530}, 254.705},
		{"AND", []float64{371.778, 445.920, 477.673, 495.308, 506.529, 488.774, 487.118}, 508.626},
	} {
		for i, depth := range depths {
			near(t, c.name, average(t, profiles[c.name], 0, depth), c.want[i], 0.0005001)
		}
		near(t, c.name+" from 3 m", average(t, profiles[c.name], 3, 30), c.datum, 0.0005001)
	}
}

// SCEC Los Angeles broadband model; source in testdata/profiles/README.md.
// Σ(h/v) = 2/450 + 4/650 + 6/850 + 8/950 + 10/1150 = 0.0347738 s.
func TestSCECModel(t *testing.T) {
	layers := readLayers(t, "scec.csv")["Los Angeles"]
	s, err := Describe(layers, 0, 30)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "time average", s.TimeAverage, 862.718, 0.0005)
	near(t, "time average as printed", s.TimeAverage, 862.5, 1) // printed 862 and 863

	// (2·450 + 4·650 + 6·850 + 8·950 + 10·1150)/30 = 27700/30 by hand.
	near(t, "mean by thickness", s.ThicknessMean, 27700.0/30, 1e-9)
	near(t, "mean by thickness", s.ThicknessMean, 923.333, 0.0005)

	// The printed mistake: the mean of 31 samples, a layer's top inclusive, 932.
	sum := 0.0
	for z := range 31 {
		for i := range layers {
			if l := layers[i]; l.Top <= float64(z) && float64(z) < l.Bottom {
				sum += l.Vs
			}
		}
	}
	near(t, "mean of samples", sum/31, 932.258, 0.0005)
	if math.Abs(s.TimeAverage-932) < 50 {
		t.Errorf("the time average %.1f is the arithmetic mean", s.TimeAverage)
	}
}

// SCEC "500" models for the Los Angeles basin and the Mojave desert (one
// source): the printed Vs30 is the nominal 500 m/s. Exact by hand: 30/(10/425
// + 20/538) and 30/(10/425 + 20/550).
func TestSCEC500Models(t *testing.T) {
	for _, c := range []struct{ lower, want float64 }{{538, 494.200}, {550, 500.893}} {
		got := average(t, stack(10, 425, 20, c.lower), 0, 30)
		near(t, "exact", got, c.want, 0.0005)
		near(t, "printed", got, 500, 0.02*500)
	}
}

// Generic rock of western North America (Boore & Joyner 1997, BSSA 87:327;
// the formula from memory, its velocities at 1 and 30 m, 336 and 850 m/s, in one
// source): 245 m/s down to 1 m, then 2206·z^0.272 with z in km. The published
// Vs30 is 618 m/s. Closed form: t = 1/245 + [0.03^0.728 − 0.001^0.728] /
// (2.206·0.728) = 0.0484903 s, 30/t = 618.680 m/s.
func TestGenericRock(t *testing.T) {
	rock := func(z float64) float64 { return 2206 * math.Pow(z/1000, 0.272) }
	near(t, "velocity at 30 m", rock(30), 850, 0.5)
	for _, gradients := range []bool{false, true} {
		layers := stack(1, 245)
		layers = append(layers, fine(1, 30, 2000, rock, gradients)...)
		got := average(t, layers, 0, 30)
		near(t, "closed form", got, 618.680, 0.001)
		near(t, "published", got, 618, 1)
	}
}

// fine cuts the velocities v between two depths into n layers, constant or
// with gradients, each a little thicker than the one above.
func fine(top, bottom float64, n int, v func(z float64) float64, gradients bool) []profile.Layer {
	ratio := math.Pow(bottom/top, 1/float64(n))
	layers := make([]profile.Layer, n)
	z := top
	for i := range layers {
		next := z * ratio
		if i == n-1 {
			next = bottom
		}
		layers[i] = profile.Layer{Top: z, Bottom: next, Vs: v((z + next) / 2)}
		if gradients {
			layers[i].Vs, layers[i].VsBottom = v(z), v(next)
		}
		z = next
	}
	return layers
}

// Profiles made up for the classes, each recomputed by hand.
func TestConstructedProfiles(t *testing.T) {
	const foot = profile.Foot
	for _, c := range []struct {
		name      string
		layers    []profile.Layer
		thickness float64 // m
		want      float64 // m/s
		tolerance float64
	}{
		// 100/(10/600 + 30/900 + 60/1500) = 100/0.09 ft/s
		{"K1", stackFt(10, 600, 30, 900, 60, 1500), 100 * foot, 1111.11 * foot, 0.005 * foot},
		// 100/(50/450 + 50/900) = 100/(150/900) ft/s
		{"K2", stackFt(50, 450, 50, 900), 100 * foot, 600 * foot, 1e-10},
		// 100/(20/550 + 30/850 + 50/1300) = 100/0.1101193 ft/s
		{"K3", stackFt(20, 550, 30, 850, 50, 1300), 100 * foot, 908.11 * foot, 0.005 * foot},
		// 100/(60/1000 + 40/1500) = 100/0.0866667 ft/s
		{"K4", stackFt(60, 1000, 40, 1500), 100 * foot, 1153.85 * foot, 0.005 * foot},
		// 30/(5/180 + 10/300 + 15/500) = 30/0.0911111
		{"K5", stack(5, 180, 10, 300, 15, 500), 30, 329.268, 0.0005},
		// 30/(10/240 + 20/480) = 30/(40/480)
		{"K6", stack(10, 240, 20, 480), 30, 360, 1e-10},
		// 30/(6/220 + 24/430) = 30/0.0830867; 361.069 m/s = 1,184.6 ft/s
		{"K7", stack(6, 220, 24, 430), 30, 361.069, 0.0005},
		{"K7 in ft/s", stack(6, 220, 24, 430), 30, 1184.6 * foot, 0.05 * foot},
		// 55/(10/500 + 20/800 + 25/1400) = 55/0.0628571 ft/s
		{"K8", stackFt(10, 500, 20, 800, 25, 1400), 55 * foot, 875 * foot, 1e-10},
	} {
		near(t, c.name, average(t, c.layers, 0, c.thickness), c.want, c.tolerance)
	}

	// K8 ends at 55 ft: over 100 ft there is no average.
	if v, err := Average(stackFt(10, 500, 20, 800, 25, 1400), 0, 100*foot); err == nil {
		t.Errorf("K8 over 100 ft = %g, want an error", v)
	}
}

package vs30

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"shearbook/profile"
)

// stack returns layers from pairs of thickness in m and velocity in m/s.
func stack(pairs ...float64) []profile.Layer {
	var layers []profile.Layer
	z := 0.0
	for i := 0; i < len(pairs); i += 2 {
		layers = append(layers, profile.Layer{Top: z, Bottom: z + pairs[i], Vs: pairs[i+1]})
		z += pairs[i]
	}
	return layers
}

// stackFt is stack for feet and feet per second.
func stackFt(pairs ...float64) []profile.Layer {
	si := make([]float64, len(pairs))
	for i, v := range pairs {
		si[i] = v * profile.Foot
	}
	return stack(si...)
}

// gradient returns one layer from 0 to h m, from v0 to v1 m/s.
func gradient(h, v0, v1 float64) []profile.Layer {
	return []profile.Layer{{Bottom: h, Vs: v0, VsBottom: v1}}
}

// dense gives the layers densities in kg/m³.
func dense(layers []profile.Layer, densities ...float64) []profile.Layer {
	for i, d := range densities {
		layers[i].Density, layers[i].Given = d, profile.GivenDensity
	}
	return layers
}

// randomLayers returns 1 to 20 layers of a multiple of 0.1 m that reach 40 m
// or more, their velocities between 60 and 2,500 m/s, and where gradients is
// true one in three with a gradient. All have densities.
func randomLayers(rng *rand.Rand, gradients bool) []profile.Layer {
	speed := func() float64 { return 60 * math.Exp(rng.Float64()*math.Log(2500.0/60)) }
	n := 1 + rng.IntN(20)
	layers := make([]profile.Layer, n)
	z := 0.0
	for i := range layers {
		h := 0.1 * float64(1+rng.IntN(100))
		if i == n-1 {
			h = max(h, 40.1-z)
		}
		layers[i] = profile.Layer{Top: z, Bottom: z + h, Vs: speed(),
			Density: 1500 + 1000*rng.Float64(), Given: profile.GivenDensity}
		if gradients && rng.IntN(3) == 0 {
			layers[i].VsBottom = speed()
		}
		z += h
	}
	return layers
}

// split cuts every layer in two at a random place.
func split(rng *rand.Rand, layers []profile.Layer) []profile.Layer {
	var out []profile.Layer
	for _, l := range layers {
		a, b := l, l
		z := l.Top + (0.1+0.8*rng.Float64())*(l.Bottom-l.Top)
		a.Bottom, b.Top = z, z
		if l.Gradient() {
			a.VsBottom, b.Vs = l.VsAt(z), l.VsAt(z)
		}
		out = append(out, a, b)
	}
	return out
}

// seeded returns the random numbers of a test, the same in every run.
func seeded(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 30)) }

// readRows returns the rows of a CSV file of testdata/profiles below its header.
func readRows(t testing.TB, name string) [][]string {
	t.Helper()
	f, err := os.Open(filepath.Join("..", "testdata", "profiles", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

// readLayers returns the profiles of a CSV file of testdata/profiles.
func readLayers(t testing.TB, name string) map[string][]profile.Layer {
	t.Helper()
	profiles := map[string][]profile.Layer{}
	for _, row := range readRows(t, name) {
		l := profile.Layer{Top: number(t, row[1]), Bottom: number(t, row[2]), Vs: number(t, row[3])}
		profiles[row[0]] = append(profiles[row[0]], l)
	}
	return profiles
}

func number(t testing.TB, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// near fails unless got is within tolerance of want.
func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tolerance)
	}
}

// average is Average for a profile that reaches.
func average(t testing.TB, layers []profile.Layer, from, thickness float64) float64 {
	t.Helper()
	v, err := Average(layers, from, thickness)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

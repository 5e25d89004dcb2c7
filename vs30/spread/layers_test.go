package spread

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"testing"

	"shearbook/profile"
)

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %.10g, want %.10g ± %.2g", what, got, want, tolerance)
	}
}

// stack of pairs of thickness in m and velocity in m/s.
func pairs(pairs ...float64) []profile.Layer {
	var layers []profile.Layer
	z := 0.0
	for i := 0; i < len(pairs); i += 2 {
		layers = append(layers, profile.Layer{Top: z, Bottom: z + pairs[i], Vs: pairs[i+1]})
		z += pairs[i]
	}
	return layers
}

// measured returns a profile of testdata/profiles/measured.csv; source in the
// README beside it.
func measured(t testing.TB, name string) []profile.Layer {
	t.Helper()
	f, err := os.Open("../../testdata/profiles/measured.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var layers []profile.Layer
	for _, row := range rows[1:] {
		if row[0] != name {
			continue
		}
		var n [3]float64
		for i := range n {
			if n[i], err = strconv.ParseFloat(row[i+1], 64); err != nil {
				t.Fatal(err)
			}
		}
		layers = append(layers, profile.Layer{Top: n[0], Bottom: n[1], Vs: n[2]})
	}
	return layers
}

// all returns n times x.
func all(n int, x float64) []float64 {
	list := make([]float64, n)
	for i := range list {
		list[i] = x
	}
	return list
}

func seeded(n uint64) *rand.Rand { return rand.New(rand.NewPCG(n, 4)) }

// growing returns 3 to 12 layers to 35 m whose velocity mostly grows.
func growing(rng *rand.Rand) []profile.Layer {
	n := 3 + rng.IntN(10)
	v := 90 + 200*rng.Float64()
	var layers []profile.Layer
	for i := range n {
		layers = append(layers, profile.Layer{Top: 35 * float64(i) / float64(n), Bottom: 35 * float64(i+1) / float64(n), Vs: v})
		v *= 0.9 + 0.5*rng.Float64()
	}
	return layers
}

func class(t testing.TB, name string) ToroClass {
	t.Helper()
	c, ok := FindToro(name)
	if !ok {
		t.Fatalf("no class %q", name)
	}
	return c
}

func draw(t testing.TB, m *Model, o Options) *Sample {
	t.Helper()
	s, err := m.Draw(o)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func propagate(t testing.TB, m *Model) Propagation {
	t.Helper()
	p, err := m.Propagate()
	if err != nil {
		t.Fatal(err)
	}
	return p
}

package correlate

import (
	"encoding/binary"
	"math"
	"testing"

	"shearbook/profile"
)

// Whatever numbers a cone has, what comes back is a valid profile or an error.
func FuzzSounding(f *testing.F) {
	add := func(values ...float64) {
		var data []byte
		for _, v := range values {
			data = binary.LittleEndian.AppendUint64(data, math.Float64bits(v))
		}
		f.Add(data, 18.0, 1.0, 0.8, 0.5)
	}
	add(0.2, 5000, 50, 10, 0.6, 6000, 60, 20, 1.2, 800, 20, 300)
	add(0, 0, 0, 0)
	add(math.Inf(1), math.NaN(), 1e308, -1e308)
	add(1, 1e308, 1e308, 1e308, 1e5, 1e-308, 1e-308, 1e-308)
	f.Fuzz(func(t *testing.T, data []byte, weight, table, area, step float64) {
		c := &Cone{Name: "C", WaterTable: profile.Known(table)}
		at := func(i int) float64 { return math.Float64frombits(binary.LittleEndian.Uint64(data[8*i:])) }
		for i := 0; 8*(i+4) <= len(data); i += 4 {
			c.Readings = append(c.Readings, Reading{at(i), profile.Known(at(i + 1)), profile.Known(at(i + 2)), profile.Known(at(i + 3)), i})
		}
		for _, r := range All() {
			if r.Family == ConeTest {
				validOr(t)(Sounding(c, Options{Relations: []string{r.ID}, UnitWeight: weight, AreaRatio: area, Step: step}))
			}
		}
	})
}

// Whatever N and su a layer has, what comes back is a valid profile or an error.
func FuzzProfile(f *testing.F) {
	f.Add(20.0, 50.0, 1900.0, 2.0, 72.0, "Firm CLAY", true)
	f.Add(0.0, -1.0, 0.0, -9.0, 0.0, "sand", false)
	f.Add(math.NaN(), math.Inf(1), 1e308, 1e308, math.NaN(), "SAND and gravel with \xff", true)
	f.Fuzz(func(t *testing.T, n, su, density, table, energy float64, soil string, deep bool) {
		given := profile.GivenN | profile.GivenSu | profile.GivenDensity
		p := &profile.Profile{NoVelocity: true, Survey: profile.Survey{WaterTable: profile.Known(table)}, Layers: []profile.Layer{
			{Top: 0, Bottom: 3, N: n, Su: su, Density: density, Given: given, Soil: soil, Refusal: deep},
			{Top: 3, Bottom: math.Inf(1), N: n, Given: profile.GivenN, Soil: soil},
		}}
		for _, r := range All() {
			validOr(t)(Profile(p, Options{Relations: []string{r.ID, "imai-1977"}, UnitWeight: 18, Drive: Drive{EnergyRatio: energy}}))
		}
	})
}

func validOr(t *testing.T) func(profile.Profile, error) {
	return func(p profile.Profile, err error) {
		t.Helper()
		if err != nil {
			return
		}
		if faults := profile.Validate(&p); len(faults) > 0 {
			t.Fatal(faults)
		}
		for i := range p.Layers {
			l := &p.Layers[i]
			if !(l.SigmaLnVs >= PlanningLow) || !l.Has(profile.GivenSigma) || p.BasisOf(i) != profile.Correlated {
				t.Fatalf("layer %d: %+v", i+1, l)
			}
		}
	}
}

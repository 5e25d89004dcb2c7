package las

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"shearbook/profile"
)

// log writes a log of random samples.
func randomLog(rnd *rand.Rand, n int) []byte {
	var b bytes.Buffer
	b.WriteString("~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nNULL. -999.25 :\n~C\nDEPT.M :\nVS.M/S :\nVP.M/S :\nRHOB.G/C3 :\n~A\n")
	z := 0.2 * rnd.Float64()
	for range n {
		vs := 100 + 900*rnd.Float64()
		fmt.Fprintf(&b, "%.4f %.3f %.3f %.4f\n", z, vs, vs*2+100*rnd.Float64(), 1.6+rnd.Float64())
		z += 0.3 + 0.1*rnd.Float64()
	}
	return b.Bytes()
}

func readLog(t *testing.T, data []byte, opt Options) []profile.Layer {
	t.Helper()
	profiles, err := Read("x.las", data, opt)
	if err != nil {
		t.Fatalf("%v\n%s", err, data)
	}
	return profiles[0].Layers
}

// sums are the travel time of S and P waves down to depth z, and the mass
// above it.
func sums(layers []profile.Layer, z float64) (s, p, mass float64) {
	for _, l := range layers {
		h := min(l.Bottom, z) - l.Top
		if h <= 0 {
			break
		}
		s += h / l.Vs
		p += h / l.Vp
		mass += h * l.Density
	}
	return s, p, mass
}

// Averaging onto thicker layers keeps the travel times and the mass above
// every bound, and every average lies between the slowest and the fastest
// sample.
func TestAveragesKeepTravelTime(t *testing.T) {
	rnd := rand.New(rand.NewPCG(7, 8))
	for range 50 {
		data := randomLog(rnd, 20+rnd.IntN(60))
		cells := readLog(t, data, Options{})
		var bounds []float64
		for z := rnd.Float64(); z < 40; z += 0.1 + 5*rnd.Float64() {
			bounds = append(bounds, z)
		}
		for _, opt := range []Options{{Step: 0.05 + 3*rnd.Float64()}, {Bounds: bounds}, {Step: 1e4}} {
			layers := readLog(t, data, opt)
			for i, l := range layers {
				s, p, mass := sums(layers, l.Bottom)
				s0, p0, mass0 := sums(cells, l.Bottom)
				if math.Abs(s/s0-1) > 1e-12 || math.Abs(p/p0-1) > 1e-12 || math.Abs(mass/mass0-1) > 1e-12 {
					t.Errorf("%+v: at %v m %v s, %v s and %v kg/m², want %v, %v and %v", opt, l.Bottom, s, p, mass, s0, p0, mass0)
				}
				if l.Vs < 100-1e-9 || l.Vs > 1000+1e-9 || opt.Step > 0 && i < len(layers)-1 && math.Abs(l.Thickness()-opt.Step) > 1e-9 {
					t.Errorf("%+v: layer %+v", opt, l)
				}
			}
			if end := cells[len(cells)-1].Bottom; layers[len(layers)-1].Bottom != end {
				t.Errorf("%+v: the layers end at %v m, the log at %v m", opt, layers[len(layers)-1].Bottom, end)
			}
		}
	}
}

// A step of the spacing of the samples leaves them as they are, where the
// first one lies half a step deep.
func TestStepOfSamples(t *testing.T) {
	data := []byte("~C\nDEPT.M :\nVS.M/S :\n~A\n0.25 100\n0.75 200\n1.25 150\n1.75 400\n")
	cells, layers := readLog(t, data, Options{}), readLog(t, data, Options{Step: 0.5})
	if len(cells) != 4 || len(layers) != 4 {
		t.Fatalf("%d samples, %d layers", len(cells), len(layers))
	}
	for i := range cells {
		if math.Abs(cells[i].Bottom-layers[i].Bottom) > 1e-12 || math.Abs(cells[i].Vs/layers[i].Vs-1) > 1e-12 {
			t.Errorf("layer %d is %+v, want %+v", i, layers[i], cells[i])
		}
	}
}

// A log in feet and us/ft is the same as its twin in m and m/s; one that goes
// up the same as one that goes down; one that is wrapped the same as one that
// is not.
func TestTwins(t *testing.T) {
	rnd := rand.New(rand.NewPCG(9, 10))
	for range 20 {
		var rows [][2]float64
		z := 0.1
		for range 5 + rnd.IntN(20) {
			rows = append(rows, [2]float64{z, 100 + 500*rnd.Float64()})
			z += 0.5
		}
		write := func(header, wrap, format string, change func(z, v float64) (float64, float64), up bool) []byte {
			var b bytes.Buffer
			b.WriteString("~V\nVERS. 2.0 :\nWRAP. " + wrap + " :\n~C\n" + header + "~A\n")
			for i := range rows {
				row := rows[i]
				if up {
					row = rows[len(rows)-1-i]
				}
				z, v := change(row[0], row[1])
				fmt.Fprintf(&b, format, z, v)
			}
			return b.Bytes()
		}
		same := func(z, v float64) (float64, float64) { return z, v }
		want := readLog(t, write("DEPT.M :\nVS.M/S :\n", "NO", "%.17g %.17g\n", same, false), Options{})
		for name, data := range map[string][]byte{
			"feet":    write("DEPT.F :\nDTS.US/F :\n", "NO", "%.17g %.17g\n", func(z, v float64) (float64, float64) { return z / 0.3048, 304800 / v }, false),
			"us/m":    write("DEPT.M :\nDTS.US/M :\n", "NO", "%.17g %.17g\n", func(z, v float64) (float64, float64) { return z, 1e6 / v }, false),
			"upward":  write("DEPT.M :\nVS.M/S :\n", "NO", "%.17g %.17g\n", same, true),
			"wrapped": write("DEPT.M :\nVS.M/S :\n", "YES", "%.17g\n%.17g\n", same, false),
		} {
			got := readLog(t, data, Options{})
			if len(got) != len(want) {
				t.Fatalf("%s: %d layers, want %d", name, len(got), len(want))
			}
			for i := range got {
				if math.Abs(got[i].Bottom-want[i].Bottom) > 1e-12 || math.Abs(got[i].Vs/want[i].Vs-1) > 1e-12 {
					t.Errorf("%s: layer %d is %+v, want %+v", name, i, got[i], want[i])
				}
			}
		}
	}
}

// The factors of the units against those of the Unified Code for Units of
// Measure (UCUM): us/[ft_i] is 3.280839895013123 us/m; [ft_i]/s is 0.3048 m/s.
func TestUnits(t *testing.T) {
	for text, want := range map[string]struct {
		kind kind
		at   float64 // what 200 of the unit are in SI
	}{
		"US/F": {slowness, 1e6 / (200 * 3.280839895013123)}, "us/ft": {slowness, 1e6 / (200 * 3.280839895013123)},
		"µs/ft": {slowness, 1e6 / (200 * 3.280839895013123)}, "USEC/FT": {slowness, 1e6 / (200 * 3.280839895013123)},
		"US/M": {slowness, 5000}, "[us/m]": {slowness, 5000}, "μs/m": {slowness, 5000},
		"M/S": {velocity, 200}, "m/sec": {velocity, 200}, "KM/S": {velocity, 200000}, "FT/S": {velocity, 60.96}, "F/S": {velocity, 60.96}, "(ft/s)": {velocity, 60.96},
		"M": {length, 200}, "F": {length, 60.96}, "FT": {length, 60.96}, "feet": {length, 60.96}, "CM": {length, 2},
		"G/C3": {mass, 200000}, "G/CC": {mass, 200000}, "K/M3": {mass, 200}, "KG/M3": {mass, 200},
		"GAPI": {other, 0}, "": {other, 0}, "US": {other, 0}, "V/V": {other, 0}, "OHMM": {other, 0},
	} {
		u := parseUnit(text)
		if u.kind != want.kind || u.kind != other && math.Abs(u.si(200)/want.at-1) > 1e-14 {
			t.Errorf("%q is %v of kind %d, want %v of kind %d", text, u.si(200), u.kind, want.at, want.kind)
		}
	}
}

// What a curve may be read as takes its name and its unit.
func TestRoles(t *testing.T) {
	for text, want := range map[string]role{
		"VS.M/S :": shear, "vs2.ft/s :": shear, "DTS.US/F :": shear, "DTS1.US/M :": shear, "VSHEAR.KM/S :": shear,
		"X1.M/S : Shear wave velocity": shear, "X1.US/M : S-wave slowness": shear,
		"VS.FT : vertical section": unread, "VS. :": unread, "X1.M/S : velocity": unread, "VS30.M/S : average": unread,
		"VP.M/S : P-wave": compression, "DT.US/F : sonic": compression, "DTC.US/F : shear quality": compression, "X.M/S : compressional velocity": compression,
		"RHOB.G/C3 :": bulk, "DEN.K/M3 :": bulk, "RHOB.V/V :": unread, "GR.GAPI : gamma": unread,
	} {
		it := parseItem(line{text: []byte(text), number: 1})
		c := curve{item: it, unit: parseUnit(it.unit)}
		if got := c.roleOf(); got != want {
			t.Errorf("%q may be read as %v, want %v", text, got, want)
		}
	}
}

func TestParseItem(t *testing.T) {
	for text, want := range map[string]item{
		" DATE.      2026-03-02 10:45 : log date": {mnemonic: "DATE", value: "2026-03-02 10:45", description: "log date"},
		"STRT.M  1.5:":               {mnemonic: "STRT", unit: "M", value: "1.5"},
		"STRT .M 1.5 : a.b":          {mnemonic: "STRT", unit: "M", value: "1.5", description: "a.b"},
		"WRAP.NO: x":                 {mnemonic: "WRAP", unit: "NO", description: "x"},
		"LOC.   10.5 N : a: b":       {mnemonic: "LOC", value: "10.5 N : a", description: "b"},
		"GR API : no dot":            {mnemonic: "GR", value: "API", description: "no dot"},
		"alone":                      {mnemonic: "alone"},
		".M : x":                     {unit: "M", description: "x"},
		"COMP. a firm without colon": {mnemonic: "COMP", value: "a firm without colon"},
		"\tVS\t.M/S\t7 :\tx\ty":      {mnemonic: "VS", unit: "M/S", value: "7", description: "x y"},
		":":                          {},
		".":                          {},
	} {
		got := parseItem(line{text: []byte(text), number: 1})
		got.at, got.unitAt, got.valueAt = spot{}, spot{}, spot{}
		if got != want {
			t.Errorf("%q is %+v, want %+v", text, got, want)
		}
	}
}

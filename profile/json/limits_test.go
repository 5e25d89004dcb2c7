package json

import (
	"bytes"
	"fmt"
	"runtime"
	"strings"
	"testing"

	"shearbook/profile"
)

// wrap puts the text of profiles into a file.
func wrap(profiles string) []byte {
	return []byte(`{"shearbook profiles": 1, "profiles": [` + profiles + `]}`)
}

// Input that is too large, or made to exhaust, ends in one clear fault.
func TestLimits(t *testing.T) {
	var many strings.Builder
	for i := range MaxProfiles + 1 {
		fmt.Fprintf(&many, `{"name":"%d","layers":[]},`, i)
	}
	for _, c := range []struct {
		name string
		data []byte
		want string
	}{
		{"a long text", wrap(`{"name": "` + strings.Repeat("x", MaxText+2)), "x.json:1:49: the text is longer than 1 MiB"},
		{"a long number", wrap(`{"name": "a", "layers": [{"top_m": ` + strings.Repeat("1", MaxText+2)), `x.json:1:75: "1111111111111111111111111111111111111111…" is not a number`},
		{"brackets alone", []byte(strings.Repeat("[", 8<<20)), "x.json:1:1: the file is a list"},
		{"brackets inside", []byte(`{"a":` + strings.Repeat("[", 8<<20)), "x.json:1:70: more than 64 lists and objects"},
		{"objects inside", []byte(strings.Repeat(`{"a":`, 1<<20)), "more than 64 lists and objects"},
		{"blanks alone", bytes.Repeat([]byte(" "), 8<<20), "x.json: the file is empty"},
		{"keys alone", []byte("{" + strings.Repeat(`"a":1,`, 1<<20) + `"a":1}`), "x.json:1:1: the file is JSON, but has no key"},
		{"too many profiles", wrap(many.String()), "x.json:1:"},
		{"too many layers", wrap(`{"name": "a", "layers": [` + strings.Repeat("{},", MaxLayers) + `{}]}`), "the file has more than 2000000 layers"},
		{"not UTF-8", []byte("{\n\"é\": \"\xe9\"}"), "x.json:2:7: the file is not UTF-8"},
		{"UTF-16", []byte("\xff\xfe{\x00}\x00"), "x.json:1:1: the file is not UTF-8"},
		{"too large", make([]byte, MaxBytes+1), "x.json: the file is larger than 64 MiB"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.json", c.data)
			faults, ok := err.(profile.Faults)
			if !ok || len(faults) > profile.MaxFaults+2 || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
}

// big is a file of n layers in profiles of 20.
func big(n int) []byte {
	var b strings.Builder
	for i := range n / 20 {
		if i > 0 {
			b.WriteString(",\n")
		}
		fmt.Fprintf(&b, `{"name":"BH-%d","layers":[`, i)
		for z := range 20 {
			if z > 0 {
				b.WriteByte(',')
			}
			fmt.Fprintf(&b, `{"top_m":%d,"bottom_m":%d,"vs_mps":%d}`, z, z+1, 150+10*z)
		}
		b.WriteString("]}")
	}
	return wrap(b.String())
}

// What is allocated grows with the layers, not faster.
func TestManyLayers(t *testing.T) {
	const n = 100_000
	data := big(n)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	profiles, err := Read("x.json", data)
	runtime.ReadMemStats(&after)
	if err != nil || len(profiles) != n/20 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	if last := profiles[len(profiles)-1].Layers[19]; last.Vs != 340 || last.Line != n/20 {
		t.Errorf("the last layer is %+v", last)
	}
	perLayer := float64(after.TotalAlloc-before.TotalAlloc) / n
	t.Logf("%.0f bytes a layer", perLayer)
	if perLayer > 400 { // 144 of it are the layer itself
		t.Errorf("%.0f bytes allocated for each layer, want at most 400", perLayer)
	}
}

// Many faults are twenty faults and a number.
func TestManyFaults(t *testing.T) {
	_, err := Read("x.json", wrap(`{"name": "a", "layers": [`+strings.Repeat(`{"a":0},`, 5000)+`{}]}`))
	faults, _ := err.(profile.Faults)
	// Each of 5,000 layers has an unknown key and lacks three, the last lacks three.
	if len(faults) != profile.MaxFaults+1 || faults[profile.MaxFaults].Text != "and 19983 more faults" {
		t.Errorf("%d faults, the last %v", len(faults), faults[len(faults)-1])
	}
}

func BenchmarkReadMillionLayers(b *testing.B) {
	data := big(1_000_000)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.json", data); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkRead20Layers(b *testing.B) {
	data := big(20)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.json", data); err != nil {
			b.Fatal(err)
		}
	}
}

package delimited

import (
	"bytes"
	"errors"
	"fmt"
	"runtime"
	"strings"
	"testing"
	"time"

	"shearbook/profile"
)

// million is a table of n layers in profiles of 20 layers each.
func million(n int) []byte {
	var b bytes.Buffer
	b.WriteString("hole,top_m,bottom_m,vs_mps,soil\n")
	for i := range n {
		z := i % 20
		fmt.Fprintf(&b, "BH-%d,%d.5,%d.5,%d,Clay\n", i/20, z, z+1, 150+10*z)
	}
	return bytes.ReplaceAll(b.Bytes(), []byte(",0.5,"), []byte(",0,"))
}

// A million layers stay inside 300 MB: all that is ever allocated is less,
// beside the file itself. They take about 1 s of processor time, the
// garbage collector's included.
func TestMillionRows(t *testing.T) {
	n := 1_000_000
	if testing.Short() {
		n = 100_000
	}
	data := million(n)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	start := cpuTime()
	profiles, err := Read("x.csv", data, Options{})
	took := cpuTime() - start
	runtime.ReadMemStats(&after)
	if err != nil || len(profiles) != n/20 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	last := profiles[len(profiles)-1]
	if l := last.Layers[19]; l.Vs != 340 || l.Soil != "Clay" || last.Reading.Rows[19].Line != n+1 {
		t.Errorf("the last layer is %+v", l)
	}
	bytesPerRow := float64(after.TotalAlloc-before.TotalAlloc) / float64(n)
	t.Logf("%d rows, %d bytes: %v, %.0f bytes a row", n, len(data), took, bytesPerRow)
	if bytesPerRow > 270 {
		t.Errorf("%.0f bytes allocated for each row, want at most 270", bytesPerRow)
	}
	if took > 3*time.Second { // room for slow machines; the benchmark measures
		t.Errorf("%d rows took %v", n, took)
	}
}

// Input that is too large, or made to exhaust, ends in one clear fault and
// soon.
func TestLimits(t *testing.T) {
	const header = "top_m,bottom_m,vs_mps\n"
	row := "0,1,200\n"
	var many strings.Builder
	many.WriteString("line,top_m,bottom_m,vs_mps\n")
	for i := range MaxProfiles + 1 {
		fmt.Fprintf(&many, "%d,0,,200\n", i)
	}
	cases := []struct {
		name, data, want string
	}{
		{"a long heading", strings.Repeat("x", 8<<20), "x.csv:1:1: the cell is longer than 64 KiB"},
		{"a long quoted field", header + `0,1,"` + strings.Repeat("5\n", 4<<20), "x.csv:2:5: the cell is longer than 64 KiB"},
		{"a long statement", "# method: " + strings.Repeat("5", 8<<20), "x.csv:1:1: the line is longer than 64 KiB"},
		{"NULs alone", strings.Repeat("\x00", 8<<20), "x.csv:1:1: NUL character"},
		{"line ends alone", header + strings.Repeat("\n", 16<<20), "x.csv:1:1: the table has a header but no layers"},
		{"too many columns", strings.Repeat("x,", MaxColumns) + "\n", "x.csv:1:2000: the row has more than 1000 cells"},
		{"too many cells", header + "0,1,200" + strings.Repeat(",", MaxColumns) + "\n", "x.csv:2:1005: the row has more than 1000 cells"},
		{"too many profiles", many.String(), "x.csv:100002:1: the file has more than 100000 profiles"},
		{"many brackets", strings.Repeat("# ["+strings.Repeat("]", 60_000)+"\n", 200) + header + "0,1,x\n", `x.csv:202:5: Vs "x" is not a number`},
		{"many comments", header + strings.Repeat("#\n", MaxMetadata+1), "x.csv:1000002:1: the file has more than 1000000 comments"},
		{"too many statements", strings.Repeat("#\n", MaxMetadata+1) + header + row, "x.csv:1000001:1: more than 1000000 lines stand above the header"},
	}
	if !testing.Short() {
		cases = append(cases, []struct{ name, data, want string }{
			{"a file of 100 MB", header + strings.Repeat("5", 100<<20), "x.csv: the file is larger than 64 MiB"},
			{"a field of 60 MB", header + "0,1," + strings.Repeat("5", 60<<20), "x.csv:2:5: the cell is longer than 64 KiB"},
			{"ten million rows", "bottom_m,vs_mps\n" + strings.Repeat("1,2\n", 10_000_000), "x.csv:2000002:1: the file has more than 2000000 layers"},
		}...)
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			data := []byte(c.data)
			start := cpuTime()
			_, err := Read("x.csv", data, Options{})
			took := cpuTime() - start
			var faults profile.Faults
			if !errors.As(err, &faults) || len(faults) > MaxFaults+2 || !strings.Contains("\n"+err.Error()+"\n", "\n"+c.want) {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
			t.Logf("%v of processor time", took)
			if took > 3*time.Second {
				t.Errorf("took %v", took)
			}
		})
	}
}

// Many faults are twenty faults and a number.
func TestManyFaults(t *testing.T) {
	data := "top_m,bottom_m,vs_mps\n" + strings.Repeat("0,1,x\n", 50_000)
	_, err := Read("x.csv", []byte(data), Options{})
	var faults profile.Faults
	if !errors.As(err, &faults) || len(faults) != MaxFaults+1 {
		t.Fatalf("%d faults, want %d", len(faults), MaxFaults+1)
	}
	// Each row has a faulty Vs, and each but the first overlaps the one above.
	if got, want := faults[MaxFaults].Error(), "x.csv: and 99979 more faults"; got != want {
		t.Errorf("the last fault is %q, want %q", got, want)
	}
}

func BenchmarkRead20Layers(b *testing.B) {
	data := million(20)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.csv", data, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkReadMillionRows(b *testing.B) {
	data := million(1_000_000)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.csv", data, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkReadMillionRowsDecimalComma(b *testing.B) {
	data := bytes.ReplaceAll(bytes.ReplaceAll(million(1_000_000), []byte(","), []byte(";")), []byte("."), []byte(","))
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.csv", data, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

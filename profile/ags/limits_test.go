package ags

import (
	"bytes"
	"errors"
	"fmt"
	"runtime"
	"runtime/debug"
	"runtime/metrics"
	"strings"
	"testing"
	"time"

	"shearbook/profile"
)

const wgptHead = "\"GROUP\",\"WGPT\"\r\n\"HEADING\",\"LOCA_ID\",\"WGPG_ID\",\"WGPG_TOOL\",\"WGPT_PARA\",\"WGPT_UNIT\",\"WGPT_DPTH\",\"WGPT_RDNG\"\r\n" +
	"\"UNIT\",\"\",\"\",\"\",\"\",\"\",\"m\",\"\"\r\n\"TYPE\",\"ID\",\"X\",\"PA\",\"PA\",\"PU\",\"2DP\",\"U\"\r\n"

// million is a file of n readings in holes of 20 readings each.
func million(n int) []byte {
	var b bytes.Buffer
	b.WriteString("\r\n\"GROUP\",\"LOCA\"\r\n\"HEADING\",\"LOCA_ID\"\r\n")
	for i := range n / 20 {
		fmt.Fprintf(&b, "\"DATA\",\"H%d\"\r\n", i)
	}
	b.WriteString(wgptHead)
	for i := range n {
		fmt.Fprintf(&b, "\"DATA\",\"H%d\",\"A\",\"PSL\",\"PSL-SWV\",\"m/s\",\"%d.50\",\"%d\"\r\n", i/20, i%20, 150+10*(i%20))
	}
	return b.Bytes()
}

// peak runs f and returns the most bytes of heap objects that were there at
// any time, by looking every millisecond, with the collector run often.
func peak(f func()) uint64 {
	defer debug.SetGCPercent(debug.SetGCPercent(10))
	runtime.GC()
	sample := []metrics.Sample{{Name: "/memory/classes/heap/objects:bytes"}}
	var most uint64
	done, looked := make(chan bool), make(chan bool)
	go func() {
		defer close(looked)
		for {
			metrics.Read(sample)
			most = max(most, sample[0].Value.Uint64())
			select {
			case <-done:
				return
			case <-time.After(time.Millisecond):
			}
		}
	}()
	f()
	close(done)
	<-looked
	return most
}

// A million readings stay inside 300 MB, beside the file itself. They take about
// 3 s of processor time, the collector's included.
func TestMillionRows(t *testing.T) {
	n := 1_000_000
	if testing.Short() {
		n = 100_000
	}
	data := million(n)
	var profiles []profile.Profile
	var err error
	start := cpuTime()
	most := peak(func() { profiles, err = Read("x.ags", data, Options{}) })
	took := cpuTime() - start
	if err != nil || len(profiles) != n/20 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	if l := profiles[len(profiles)-1].Layers[19]; l.Vs != 340 || int(l.Line) != n+n/20+7 {
		t.Errorf("the last layer is %+v", l)
	}
	t.Logf("%d rows, %d bytes: %v, %.0f bytes of heap a row at the most", n, len(data), took, float64(most)/float64(n))
	if room := 300*n + 20<<20 + len(data); most > uint64(room) {
		t.Errorf("%d bytes of heap, want at most %d", most, room)
	}
	if took > 12*time.Second { // room for slow machines
		t.Errorf("%d rows took %v", n, took)
	}
}

// A million blow counts, in holes of 20, are no more.
func TestMillionTests(t *testing.T) {
	n := 1_000_000
	if testing.Short() {
		n = 50_000
	}
	var b bytes.Buffer
	b.WriteString("\"GROUP\",\"ISPT\"\r\n\"HEADING\",\"LOCA_ID\",\"ISPT_TOP\",\"ISPT_NVAL\"\r\n\"UNIT\",\"\",\"m\",\"\"\r\n")
	for i := range n {
		fmt.Fprintf(&b, "\"DATA\",\"H%d\",\"%d.50\",\"%d\"\r\n", i/20, i%20, 5+i%20)
	}
	var profiles []profile.Profile
	var err error
	most := peak(func() { profiles, err = Read("x.ags", b.Bytes(), Options{}) })
	if err != nil || len(profiles) != n/20 || profiles[n/20-1].Layers[19].N != 24 {
		t.Fatalf("%d profiles, %v", len(profiles), err)
	}
	t.Logf("%d rows, %d bytes: %.0f bytes of heap a row at the most", n, b.Len(), float64(most)/float64(n))
	if room := 300*n + 20<<20 + 2*b.Len(); most > uint64(room) {
		t.Errorf("%d bytes of heap, want at most %d", most, room)
	}
}

// user is a group of the user's own, of n rows with m velocities each.
func user(n, m int) string {
	var b strings.Builder
	b.WriteString("\"GROUP\",\"MINE\"\r\n\"HEADING\",\"LOCA_ID\",\"MINE_DPTH\"")
	for i := range m {
		fmt.Fprintf(&b, ",\"A%d_VS\"", i)
	}
	b.WriteString("\r\n\"UNIT\",\"\",\"m\"" + strings.Repeat(",\"m/s\"", m) + "\r\n")
	for i := range n {
		fmt.Fprintf(&b, "\"DATA\",\"H\",\"%d\"%s\r\n", i, strings.Repeat(",\"90\"", m))
	}
	return b.String()
}

// each is a text for each of n numbers.
func each(n int, format string) string {
	var b strings.Builder
	for i := range n {
		fmt.Fprintf(&b, format, i)
	}
	return b.String()
}

// Input that is too large, or made to exhaust, ends soon: in one clear fault,
// or read.
func TestLimits(t *testing.T) {
	const (
		geol = "\"GROUP\",\"GEOL\"\n\"HEADING\",\"LOCA_ID\",\"GEOL_TOP\",\"GEOL_BASE\",\"GEOL_DESC\"\n"
		ispt = "\"GROUP\",\"ISPT\"\n\"HEADING\",\"LOCA_ID\",\"ISPT_TOP\",\"ISPT_NVAL\"\n"
		loca = "\"GROUP\",\"LOCA\"\n\"HEADING\",\"LOCA_ID\"\n"
		two  = wgptHead + "\"DATA\",\"H\",\"A\",\"PSL\",\"PSL-SWV\",\"m/s\",\"1\",\"200\"\n\"DATA\",\"H\",\"A\",\"PSL\",\"PSL-SWV\",\"m/s\",\"2\",\"250\"\n"
	)
	const deep = "\"DATA\",\"H\",\"A\",\"PSL\",\"PSL-SWV\",\"m/s\",\"%d\",\"200\"\n"
	n := 200_000
	if testing.Short() {
		n = 20_000
	}
	for _, c := range []struct{ name, data, want string }{
		{"a long quoted field", loca + `"DATA","` + strings.Repeat("x", 8<<20), `x.ags:3:8: the field is longer than 64 KiB`},
		{"a long field", loca + `"DATA",` + strings.Repeat("x", 8<<20), `x.ags:3:8: the field is longer than 64 KiB`},
		{"a field of many lines", loca + `"DATA","` + strings.Repeat("x\n", 4<<20), `x.ags:3:8: the field is longer than 64 KiB`},
		{"quotes alone", loca + `"DATA",` + strings.Repeat(`"`, 8<<20), `x.ags:3:8: the field is longer than 64 KiB`},
		{"quotes and blanks", loca + `"DATA",` + strings.Repeat(`" `, 8<<20), `x.ags:3:8: the field is longer than 64 KiB`},
		{"NULs alone", strings.Repeat("\x00", 8<<20), "x.ags:1:1: NUL character"},
		{"line ends alone", strings.Repeat("\r", 16<<20), "x.ags: the file is empty"},
		{"many fields", loca + `"DATA"` + strings.Repeat(",", 8<<20), "x.ags:3:1007: the row has more than 1000 fields"},
		{"many groups", strings.Repeat("\"GROUP\",\"AAAA\"\n", MaxGroups+1), "x.ags:10001:1: the file has more than 10000 groups"},
		{"many headings", strings.Repeat("\"GROUP\",\"AAAA\"\n\"HEADING\",\"LOCA_ID\""+each(MaxColumns-1, ",\"H%d\"")+"\n", 201), "x.ags:400:1: the file has more than 200000 headings"},
		{"many holes", loca + each(MaxHoles+1, "\"DATA\",\"%d\"\n"), "x.ags:100003:8: the file has more than 100000 holes"},
		{"many profiles", strings.Replace(two, "DATA", "DATA", 1) + each(MaxProfiles+1, "\"DATA\",\"H\",\"%d\",\"PSL\",\"PSL-SWV\",\"m/s\",\"1\",\"200\"\n"), "x.ags: the file has more than 100000 profiles"},
		{"profiles times tests", ispt + strings.Repeat("\"DATA\",\"H\",\"1\",\"5\"\n", 2001) + wgptHead + each(1000, "\"DATA\",\"H\",\"%d\",\"PSL\",\"PSL-SWV\",\"m/s\",\"1\",\"200\"\n"), "x.ags: the file has more than 2000000 strata and tests, counted for each profile of their hole"},
		{"many rows", loca + strings.Repeat("\"DATA\"\n", MaxRows+1), "x.ags:2000003:1: the file has more than 2000000 rows of data"},
		{"many faults", two + strings.Repeat("\"DATA\",\"H\",\"A\",\"PSL\",\"PSL-SWV\",\"m/s\",\"1\",\"x\"\n", n), `x.ags:10:42: WGPT_RDNG "x" is not a number`},
		{"many unclosed", loca + strings.Repeat("\"DATA\",\"\n", n), "x.ags:3:8: the quote is not closed"},
		{"many words", "\"GROUP\",\"ABBR\"\n\"HEADING\",\"ABBR_HDNG\",\"ABBR_CODE\",\"ABBR_DESC\"\n" + each(n, "\"DATA\",\"WGPT_PARA\",\"%d\",\"Shear wave velocity\"\n") + two, ""},
		{"many readings in one hole", wgptHead + each(n/2, deep), ""},
		{"strata that overlap", geol + each(n/4, "\"DATA\",\"H\",\"0.%06d\",\"99999\",\"Clay\"\n") + wgptHead + each(n/4, deep), ""},
		{"many tests in one layer", ispt + strings.Repeat("\"DATA\",\"H\",\"1\",\"5\"\n", n) + two, ""},
		{"a thousand columns", user(n/400, MaxColumns-2), ""},
		{"too many velocities", user(MaxReadings/(MaxColumns-2)+1, MaxColumns-2), "x.ags:2008:59: the file has more than 2000000 velocities"},
	} {
		t.Run(c.name, func(t *testing.T) {
			start := cpuTime()
			profiles, err := Read("x.ags", []byte(c.data), Options{})
			took := cpuTime() - start
			var faults profile.Faults
			switch {
			case c.want == "":
				if err != nil || len(profiles) == 0 {
					t.Errorf("got %d profiles, %v", len(profiles), err)
				}
			case !errors.As(err, &faults) || len(faults) > profile.MaxFaults+2 || !strings.Contains("\n"+err.Error()+"\n", "\n"+c.want):
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
			t.Logf("%v of processor time for %d bytes", took, len(c.data))
			if took > 5*time.Second {
				t.Errorf("took %v", took)
			}
		})
	}
	if !testing.Short() {
		_, err := Read("x.ags", make([]byte, MaxBytes+1), Options{})
		if err == nil || err.Error() != "x.ags: the file is larger than 64 MiB" {
			t.Errorf("got %v", err)
		}
	}
}

func BenchmarkRead20Layers(b *testing.B) {
	data := million(20)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.ags", data, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

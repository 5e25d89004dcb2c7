//go:build unix

package folder

import (
	"io/fs"
	"syscall"
	"testing"
	"time"

	"shearbook/report/notebook"
	"shearbook/report/pdf"
)

// eightLayers is an invented profile of the usual size.
const eightLayers = `# method: downhole
# basis: measured
# depth reached: 40 m
top (m),bottom (m),vs (m/s),soil
0,1.5,145,made ground
1.5,4,165,soft clay
4,7.5,210,silty sand
7.5,12,255,sand
12,17,290,dense sand
17,23,345,gravelly sand
23,31,410,stiff clay
31,,520,weathered rock
`

// BenchmarkStandardReport makes the standard report of one profile, from its
// bytes to the bytes of every file but the writing of them, and reports the
// processor time of the whole process. The aim is under 50 ms: 40 reports a
// second on two cores.
func BenchmarkStandardReport(b *testing.B) {
	read := func(name string) ([]byte, error) {
		if name == "hole.csv" {
			return []byte(eightLayers), nil
		}
		return nil, fs.ErrNotExist
	}
	start := processorTime(b)
	for b.Loop() {
		nb, err := notebook.NewStandard("hole.csv", []byte(eightLayers), notebook.Standard{Codes: []string{"asce-7-16"}})
		if err != nil {
			b.Fatal(err)
		}
		made, err := notebook.Evaluate(nb, notebook.Options{ReadFile: read, Version: "shearbook test"})
		if err != nil {
			b.Fatal(err)
		}
		if _, err := WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{}); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64((processorTime(b)-start).Microseconds())/1e3/float64(b.N), "cpu-ms/op")
}

// processorTime is what the process has used so far, user and system.
func processorTime(b *testing.B) time.Duration {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}

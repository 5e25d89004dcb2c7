package batch

import (
	"bufio"
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"

	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// writeRegion writes an invented table of so many profiles of ten layers, named
// in ascending order.
func writeRegion(tb testing.TB, name string, profiles int) {
	tb.Helper()
	f, err := os.Create(name)
	if err != nil {
		tb.Fatal(err)
	}
	w := bufio.NewWriter(f)
	random := rand.New(rand.NewPCG(12, 1))
	fmt.Fprintln(w, "profile,top_m,bottom_m,vs_mps")
	for p := range profiles {
		base, z := 90+500*random.Float64()*random.Float64(), 0
		for k := range 10 {
			h := 50 + random.IntN(700) // cm
			fmt.Fprintf(w, "P%07d,%.2f,%.2f,%.1f\n", p, float64(z)/100, float64(z+h)/100, base*(1+0.08*float64(k))*(0.85+0.3*random.Float64()))
			z += h
		}
	}
	if err := w.Flush(); err != nil {
		tb.Fatal(err)
	}
	if err := f.Close(); err != nil {
		tb.Fatal(err)
	}
}

func mustCode(tb testing.TB, ids ...string) []*siteclass.Code {
	tb.Helper()
	var codes []*siteclass.Code
	for _, id := range ids {
		c, err := siteclass.Find(id)
		if err != nil {
			tb.Fatal(err)
		}
		codes = append(codes, c)
	}
	return codes
}

// BenchmarkRun classifies a table of 100,000 profiles of ten layers, without
// notes.
func BenchmarkRun(b *testing.B) {
	dir := b.TempDir()
	in := filepath.Join(dir, "region.csv")
	writeRegion(b, in, 100_000)
	info, err := os.Stat(in)
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(info.Size())
	for b.Loop() {
		o, err := Run(context.Background(), Job{Inputs: []string{in}, Out: filepath.Join(dir, "out"),
			FaultsAlone: true,
			Codes:       mustCode(b, "asce-7-22"), Facts: report.Facts{Extend: "constant-velocity"}})
		if err != nil || o.Units != 100_000 {
			b.Fatal(o.Units, err)
		}
	}
}

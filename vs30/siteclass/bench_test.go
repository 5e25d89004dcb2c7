package siteclass

import (
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// twenty is a profile of twenty layers of 2 m, 150 to 720 m/s.
func twenty() []profile.Layer {
	var pairs []float64
	for i := range 20 {
		pairs = append(pairs, 2, 150+30*float64(i))
	}
	return column(pairs...)
}

// TestNumericCoreDoesNotAllocate: average and row of the table together.
func TestNumericCoreDoesNotAllocate(t *testing.T) {
	layers := twenty()
	for _, c := range columned() {
		row := -2
		allocs := testing.AllocsPerRun(100, func() {
			v, err := vs30.Average(layers, 0, c.Depth)
			if err != nil {
				panic(err)
			}
			row = c.Lookup(v / c.Unit.Factor)
			if c.ClassOf(v) == "" {
				panic("no class")
			}
		})
		if allocs != 0 || row < 0 {
			t.Errorf("%s: %v allocations, row %d", c.ID, allocs, row)
		}
	}
}

func BenchmarkAverageAndLookup(b *testing.B) {
	layers := twenty()
	for _, c := range columned() {
		b.Run(c.ID, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				v, err := vs30.Average(layers, 0, c.Depth)
				if err != nil || c.Lookup(v/c.Unit.Factor) < 0 {
					b.Fatal(v, err)
				}
			}
		})
	}
}

func BenchmarkLookup(b *testing.B) {
	for _, c := range columned() {
		b.Run(c.ID, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if c.Lookup(271.8) < 0 {
					b.Fatal("no row")
				}
			}
		})
	}
}

func BenchmarkDecide(b *testing.B) {
	site := siteOf(twenty()...)
	for _, c := range timed() {
		b.Run(c.ID, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := c.Decide(site); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// BenchmarkDecideAll decides on one profile under every code that decides by
// velocities, with all steps and notes.
func BenchmarkDecideAll(b *testing.B) {
	site := siteOf(twenty()...)
	all := timed()
	b.ReportAllocs()
	for b.Loop() {
		for _, c := range all {
			if _, err := c.Decide(site); err != nil {
				b.Fatal(err)
			}
		}
	}
	b.ReportMetric(float64(len(all)), "codes")
}

// BenchmarkClassOfAll looks one averaged profile up in every table that has a
// velocity column.
func BenchmarkClassOfAll(b *testing.B) {
	all := columned()
	b.ReportAllocs()
	for b.Loop() {
		for _, c := range all {
			if c.ClassOf(271.8) == "" {
				b.Fatal("no class")
			}
		}
	}
	b.ReportMetric(float64(len(all)), "codes")
}

// BenchmarkLoad makes every code afresh, and works out what does not change
// from one decision to the next.
func BenchmarkLoad(b *testing.B) {
	for b.Loop() {
		for _, build := range builders {
			build().prepare()
		}
	}
}

package spread

import (
	"testing"

	"shearbook/profile"
)

// layered returns n layers to 30 m whose velocity grows from 150 to 600 m/s,
// each with a sigma of 0.2.
func layered(n int) *Model {
	m := &Model{Thickness: 30}
	for i := range n {
		m.Layers = append(m.Layers, profile.Layer{Top: 30 * float64(i) / float64(n), Bottom: 30 * float64(i+1) / float64(n),
			Vs: 150 + 450*float64(i)/float64(n), SigmaLnVs: 0.2, Given: profile.GivenSigma})
	}
	c, _ := FindToro("USGS C")
	m.Correlation = Correlation{Rule: Interlayer, Class: c}
	return m
}

func benchmarkDraw(b *testing.B, m *Model, o Options) {
	b.ReportAllocs()
	for b.Loop() {
		if _, err := m.Draw(o); err != nil {
			b.Fatal(err)
		}
	}
}

// The default number of realisations, 10⁵, of a 20-layer profile on one core.
func BenchmarkDraw(b *testing.B) { benchmarkDraw(b, layered(20), Options{Workers: 1}) }

// Twice and half of it, in realisations and in layers.
func BenchmarkDrawHalfTheRealisations(b *testing.B) {
	benchmarkDraw(b, layered(20), Options{Workers: 1, Realisations: DefaultRealisations / 2})
}
func BenchmarkDrawTwiceTheRealisations(b *testing.B) {
	benchmarkDraw(b, layered(20), Options{Workers: 1, Realisations: DefaultRealisations * 2})
}
func BenchmarkDrawTenLayers(b *testing.B) {
	benchmarkDraw(b, layered(10), Options{Workers: 1})
}
func BenchmarkDrawFortyLayers(b *testing.B) {
	benchmarkDraw(b, layered(40), Options{Workers: 1})
}

func BenchmarkDrawBoundaries(b *testing.B) {
	m := layered(20)
	m.Boundaries = make([]float64, 20)
	for i := range m.Boundaries {
		m.Boundaries[i] = 0.2
	}
	benchmarkDraw(b, m, Options{Workers: 1})
}

func BenchmarkDrawLayering(b *testing.B) {
	m := layered(20)
	m.Layering = ToroLayering()
	benchmarkDraw(b, m, Options{Workers: 1})
}

func BenchmarkDrawTwoWorkers(b *testing.B) { benchmarkDraw(b, layered(20), Options{Workers: 2}) }

func BenchmarkPropagate(b *testing.B) {
	m := layered(20)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := m.Propagate(); err != nil {
			b.Fatal(err)
		}
	}
}

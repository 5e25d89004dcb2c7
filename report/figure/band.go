package figure

import (
	"fmt"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// BandPoint is a band of velocities that holds from Depth down to that of the
// next point, where it steps. The last point ends the band at its depth, and
// its velocities are not drawn. A point whose three velocities are 0 leaves a
// gap.
type BandPoint struct {
	Depth  float64 // m below ground level, greater than that of the point before
	Low    float64 // m/s, > 0: what 16 % lie below
	Median float64 // m/s, from Low to High
	High   float64 // m/s: what 84 % lie below
}

// gap reports whether nothing is known of the velocity from the point down.
func (b BandPoint) gap() bool { return b.Low == 0 && b.Median == 0 && b.High == 0 }

// bandText says in the key what the band is.
const bandText = "16–84" + noBreak + "% band"

// The median is two thin lines, as no profile is, with white between them;
// the band is light with an edge.
var (
	medianLine = draw.LineStyle{Color: black, Width: 3}
	medianCore = draw.LineStyle{Color: white, Width: 1.4}
	bandEdge   = draw.LineStyle{Color: skyBlue, Width: 0.6}
)

// checkBand refuses a band that cannot be drawn.
func checkBand(band []BandPoint) error {
	if len(band) == 1 {
		return fmt.Errorf("a band of one point has no depth at which it ends")
	}
	for i, b := range band {
		depth := b.Depth >= 0 && b.Depth <= deepest && (i == 0 || b.Depth > band[i-1].Depth)
		known := b.Low > 0 && b.Low <= b.Median && b.Median <= b.High && b.High <= fastest
		if !depth || !known && !b.gap() {
			return fmt.Errorf("point %d of the band cannot be drawn: %v m/s, %v m/s and %v m/s from %v m down",
				i+1, b.Low, b.Median, b.High, b.Depth)
		}
	}
	return nil
}

// bandStep is a part of a band with the same velocities from top to bottom.
type bandStep struct {
	BandPoint
	bottom float64 // m
}

// bandRuns returns the parts of the band down to depth to (m) inside which
// there is no gap.
func bandRuns(band []BandPoint, to float64) [][]bandStep {
	var runs [][]bandStep
	joined := false
	for i := 0; i+1 < len(band) && band[i].Depth < to; i++ {
		if band[i].gap() {
			joined = false
			continue
		}
		if !joined {
			runs = append(runs, nil)
		}
		last := &runs[len(runs)-1]
		*last = append(*last, bandStep{band[i], min(band[i+1].Depth, to)})
		joined = true
	}
	return runs
}

// The three lines of a band.
func low(b bandStep) float64    { return b.Low }
func median(b bandStep) float64 { return b.Median }
func high(b bandStep) float64   { return b.High }

// stepLine returns one line of a band, from the top down.
func stepLine(run []bandStep, of func(bandStep) float64) []Point {
	var line []Point
	for _, b := range run {
		v := of(b)
		if n := len(line); n > 0 && line[n-1].Velocity == v {
			line[n-1].Depth = b.bottom
			continue
		}
		line = append(line, Point{v, b.Depth}, Point{v, b.bottom})
	}
	return line
}

// stepLines returns one line of each part of a band.
func stepLines(runs [][]bandStep, of func(bandStep) float64) [][]Point {
	var lines [][]Point
	for _, run := range runs {
		lines = append(lines, stepLine(run, of))
	}
	return lines
}

// drawBand fills the band and draws its edges.
func (s *sheet) drawBand(p *plane, runs [][]bandStep) {
	s.SetColor(paleBlue)
	for _, run := range runs {
		around := stepLine(run, high)
		back := stepLine(run, low)
		slices.Reverse(back)
		var path vg.Path
		for i, pt := range append(around, back...) {
			if at := p.at(pt.Velocity, pt.Depth); i == 0 {
				path.Move(at)
			} else {
				path.Line(at)
			}
		}
		path.Close()
		s.Canvas.Fill(path)
	}
	s.curves(p, bandEdge, stepLines(runs, low))
	s.curves(p, bandEdge, stepLines(runs, high))
}

// drawMedian draws the median of the band.
func (s *sheet) drawMedian(p *plane, runs [][]bandStep) {
	lines := stepLines(runs, median)
	s.curves(p, medianLine, lines)
	s.curves(p, medianCore, lines)
}

// bandSample draws a piece of the band for the key.
func (s *sheet) bandSample(x, middle vg.Length) {
	const half = 3.5
	s.rectangle(paleBlue, x, middle-half, x+sampleLen, middle+half)
	for _, y := range []vg.Length{middle - half, middle + half} {
		s.StrokeLine2(bandEdge, x, y, x+sampleLen, y)
	}
}

package batch

import (
	"math"
	"shearbook/report/figure"
)

// region is where points lie.
type region struct {
	epsg int
	grid bool
	n    int
	figure.Extent
	columns [360]bool // degrees of longitude with a point in them
}

func (g *region) add(x, y float64) {
	if !g.grid {
		g.columns[min(max(int(math.Floor(x))+180, 0), 359)] = true
	}
	if g.n++; g.n == 1 {
		g.Extent = figure.Extent{West: x, East: x, South: y, North: y}
		return
	}
	g.West, g.East = min(g.West, x), max(g.East, x)
	g.South, g.North = min(g.South, y), max(g.North, y)
}

// extent is the region as a map shows it. Points on both sides of the
// antimeridian are shown across it, to the degree, where that is the smaller
// region.
func (g *region) extent() figure.Extent {
	e := g.Extent
	if g.grid || e.East-e.West <= 180 {
		return e
	}
	gap, begin := 0, 0 // the widest run of degrees without a point, and the one behind it
	for i, run := 0, 0; i < 720; i++ {
		if run++; g.columns[i%360] {
			run = 0
		}
		if run > gap && run < 360 {
			gap, begin = run, i+1
		}
	}
	if west := float64(begin%360 - 180); gap > 180 && west > e.West {
		return figure.Extent{West: west, South: e.South, East: float64((begin-gap+360)%360 - 180), North: e.North}
	}
	return e
}

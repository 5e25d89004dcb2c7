package figure

import (
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// cell is one class of a Density figure: its part of the velocities, and its
// box over the frame.
type cell struct {
	class    string
	chance   float64
	from, to float64 // m/s; to is +Inf for the last class
	own      bool    // the median lies in it
	x, width vg.Length
}

// Lengths of the cells.
const (
	cellHeight = 26
	cellInside = 1.5 // from the edge to the text, at least
	fanHeight  = 13  // from the cells to the frame
	valueRow   = 9   // over the cells
)

// partition returns all classes, from slow to fast, with their chances. The
// class of the median is the softer one where that is a bound.
func (f *density) partition() []cell {
	bounds := f.Classes.sorted()
	var list []cell
	from, class := 0.0, clean(f.Classes.Lowest)
	found := false
	for i, chance := range f.Chances {
		c := cell{class: class, chance: chance, from: from, to: math.Inf(1)}
		if i < len(bounds) {
			c.to = bounds[i].Value
			from, class = c.to, clean(bounds[i].Class)
		}
		c.own = !found && f.Quantiles.Median <= c.to*(1+1e-9)
		found = found || c.own
		list = append(list, c)
	}
	return list
}

// newCells returns the cells of the classes. One that has no name has a cell
// only where it has a chance that is worth a number.
func newCells(classes []cell) []cell {
	var cells []cell
	for _, c := range classes {
		if c.class == "" {
			if c.chance < rare || len(classes) == 1 {
				continue
			}
			c.class = "–"
		}
		cells = append(cells, c)
	}
	return cells
}

// rare is the least chance that is written as a number.
const rare = 0.001

// chanceText returns a chance in percent: to one, or to a tenth where it is
// near 0 or 100.
func chanceText(p float64) string {
	switch {
	case p < rare:
		return "< 0.1 %"
	case p > 1-rare:
		return "> 99.9 %"
	case p < 0.0095 || p > 0.9905:
		return strconv.FormatFloat(100*p, 'f', 1, 64) + " %"
	}
	return strconv.FormatFloat(100*p, 'f', 0, 64) + " %"
}

// fitCells gives the cells their places in the room to the right of x and
// chooses the lettering of the chances.
func (f *density) fitCells(x, room vg.Length) {
	for _, f.text = range []lettering{plain, smallBlack} {
		if f.leastWidth() <= room {
			break
		}
	}
	for f.leastWidth() > room {
		f.dropCell()
	}
	wanted, least := vg.Length(0), f.leastWidth()
	for _, c := range f.cells {
		wanted += f.nameRoom(c)
	}
	for i := range f.cells {
		c := &f.cells[i]
		c.width = f.chanceRoom(*c)
		if wanted <= room-least {
			c.width += f.nameRoom(*c) + (room-least-wanted)/vg.Length(len(f.cells))
		} else {
			c.width += f.nameRoom(*c) * (room - least) / wanted
		}
		c.class = strong.fit(c.class, c.width-2*cellInside)
		c.x = x
		x += c.width
	}
}

// smallBlack is small lettering for numbers that matter.
var smallBlack = lettering{small.font, small.size, black}

// chanceRoom returns the least width of a cell: that of its chance.
func (f *density) chanceRoom(c cell) vg.Length {
	return f.text.width(chanceText(c.chance)) + 2*cellInside
}

// nameRoom returns what the name of the class takes beyond that.
func (f *density) nameRoom(c cell) vg.Length {
	return max(0, strong.width(c.class)+2*cellInside-f.chanceRoom(c))
}

// leastWidth returns the least width of all cells.
func (f *density) leastWidth() vg.Length {
	w := vg.Length(0)
	for _, c := range f.cells {
		w += f.chanceRoom(c)
	}
	return w
}

// dropCell leaves out the least likely class.
func (f *density) dropCell() {
	least := 0
	for i, c := range f.cells {
		if c.chance < f.cells[least].chance {
			least = i
		}
	}
	f.cells = append(f.cells[:least:least], f.cells[least+1:]...)
}

// drawCells draws the cells, their lower edges at y, and the lines from them
// to the bounds on the upper edge of the frame.
func (f *density) drawCells(s *sheet, p *plane, y vg.Length) {
	var values []placed
	value := func(x vg.Length, v float64) {
		s.StrokeLine2(boundLine, x, y, f.onFrame(p, v), p.Max.Y)
		t := newPlaced(small, f.Units.velocityNumber(v), x, 0)
		if t.clear(values) && t.mid-t.half > margin && t.mid+t.half < f.width-margin {
			values = append(values, t)
		}
	}
	for i, c := range f.cells {
		box := vg.Rectangle{Min: vg.Point{X: c.x, Y: y}, Max: vg.Point{X: c.x + c.width, Y: y + cellHeight}}
		if c.own {
			s.rectangle(skyBlue, box.Min.X, box.Min.Y, box.Max.X, box.Max.Y)
		}
		if c.from > 0 && (i == 0 || f.cells[i-1].to != c.from) {
			value(box.Min.X, c.from)
		}
		if c.to < math.Inf(1) {
			value(box.Max.X, c.to)
		}
	}
	for _, c := range f.cells {
		box := vg.Rectangle{Min: vg.Point{X: c.x, Y: y}, Max: vg.Point{X: c.x + c.width, Y: y + cellHeight}}
		s.outline(frameLine, box)
		mid := c.x + c.width/2
		s.write(strong, mid, y+15, draw.XCenter, c.class)
		s.write(f.text, mid, y+4.5, draw.XCenter, chanceText(c.chance))
	}
	for _, v := range values {
		s.write(small, v.mid, y+cellHeight+3, draw.XCenter, v.text)
	}
}

// onFrame returns where a velocity lies on the upper edge of the frame, or
// the corner that is nearest.
func (f *density) onFrame(p *plane, v float64) vg.Length {
	return min(max(p.X(f.x.fraction(v)), p.Min.X), p.Max.X)
}

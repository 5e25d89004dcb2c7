package figure

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
)

// Classes is the velocity bounds of one code and the classes they part.
type Classes struct {
	Code   string  // the code's name as the figure shows it
	Lowest string  // the class below the first bound; "" for none
	Bounds []Bound // in any order
}

// Bound is a velocity at which one class ends and the next begins.
type Bound struct {
	Value float64 // m/s, > 0
	Class string  // the class between this bound and the next; "" for none
}

// check refuses bounds that cannot be drawn.
func (c Classes) check() error {
	for _, b := range c.Bounds {
		if !(b.Value > 0 && b.Value <= fastest) {
			return fmt.Errorf("a bound of %q at %v m/s cannot be drawn", clean(c.Code), b.Value)
		}
	}
	return nil
}

// interval is a class between two velocities in m/s.
type interval struct {
	class    string
	from, to float64
}

// sorted returns the bounds, slowest first.
func (c Classes) sorted() []Bound {
	bounds := slices.Clone(c.Bounds)
	slices.SortStableFunc(bounds, func(a, b Bound) int { return cmp.Compare(a.Value, b.Value) })
	return bounds
}

// intervals returns the classes that lie between the velocities from and
// to, slowest first.
func (c Classes) intervals(from, to float64) []interval {
	list := []interval{{clean(c.Lowest), 0, math.Inf(1)}}
	for _, b := range c.sorted() {
		list[len(list)-1].to = b.Value
		list = append(list, interval{clean(b.Class), b.Value, math.Inf(1)})
	}
	var inside []interval
	for _, iv := range list {
		iv.from, iv.to = max(iv.from, from), min(iv.to, to)
		if iv.class != "" && iv.from < iv.to {
			inside = append(inside, iv)
		}
	}
	return inside
}

// placed is a text with its place on the paper.
type placed struct {
	text string
	mid  vg.Length // its middle
	half vg.Length // half its width
	row  int       // from 0, upward
}

// newPlaced returns text with its middle at mid.
func newPlaced(l lettering, text string, mid vg.Length, row int) placed {
	return placed{text, mid, l.width(text) / 2, row}
}

// clear reports whether p stands clear of every other text.
func (p placed) clear(others []placed) bool {
	const between = 2.5
	for _, o := range others {
		apart := max(p.mid-o.mid, o.mid-p.mid)
		if o.row == p.row && apart < p.half+o.half+between {
			return false
		}
	}
	return true
}

// Letters may be staggered over so many rows, reach so far beyond the frame,
// and stand over a class that is at least so wide.
const (
	letterRows   = 3
	letterBeyond = 3
	narrowClass  = 4
)

// placeLetters puts the letter of each class over its middle between the
// ends of the axis, in the first row in which it stands clear of the others.
// A letter for which there is no room is left out.
func (c Classes) placeLetters(p *plane) []placed {
	var list []placed
	for _, iv := range c.intervals(0, p.x.to*p.x.unit) {
		x0, x1 := p.X(p.x.fraction(iv.from)), p.X(p.x.fraction(iv.to))
		for row := range letterRows {
			l := newPlaced(strong, iv.class, (x0+x1)/2, row)
			inside := l.mid-l.half >= p.Min.X-letterBeyond && l.mid+l.half <= p.Max.X+letterBeyond
			if inside && x1-x0 >= narrowClass && l.clear(list) {
				list = append(list, l)
				break
			}
		}
	}
	return list
}

// placeValues puts the value of each bound over the bound; none if there is
// no room for all, lest a value be read at its neighbour.
func (c Classes) placeValues(p *plane, units Units) []placed {
	var list []placed
	for _, b := range c.sorted() {
		v := newPlaced(small, units.velocityNumber(b.Value), p.X(p.x.fraction(b.Value)), 0)
		if v.mid > p.Max.X {
			break
		}
		if !v.clear(list) || v.mid-v.half < p.Min.X || v.mid+v.half > p.Max.X+letterBeyond {
			return nil
		}
		list = append(list, v)
	}
	return list
}

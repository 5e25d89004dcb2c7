package pdf

import (
	"math"

	"shearbook/report"
)

// measure widens a column's needs to those of a cell.
func (g *grid) measure(c *gridColumn, words []word) {
	c.most = max(c.most, natural(words))
	if c.align == report.AlignDecimal {
		if runs := cellRuns(words); hasFigure(runs) {
			before, after := g.s.decimalSplit(runs)
			c.before, c.after = max(c.before, before), max(c.after, after)
			return
		}
	}
	c.least = max(c.least, widest(words))
}

// onPoint returns how much of a line stands before the decimal point of its
// column, and whether it is to be set on the point at all: a number on one
// line.
func (g *grid) onPoint(c gridColumn, l setLine, lines int) (before float64, ok bool) {
	if c.align != report.AlignDecimal || lines != 1 || !hasFigure(l.runs) {
		return 0, false
	}
	before, after := g.s.decimalSplit(l.runs)
	return before, before <= c.before+0.01 && after <= c.after+0.01 && c.before+c.after <= c.width+0.01
}

func cellRuns(words []word) []run {
	var runs []run
	for _, w := range words {
		runs = append(runs, w.runs...)
		if w.gap != nil {
			runs = append(runs, *w.gap)
		}
	}
	if n := len(runs); n > 0 && runs[n-1].text == " " {
		runs = runs[:n-1]
	}
	return runs
}

func hasFigure(runs []run) bool {
	for _, r := range runs {
		for i := range len(r.text) {
			if isFigure(rune(r.text[i])) {
				return true
			}
		}
	}
	return false
}

// decimalSplit returns the widths before and after the decimal point of a
// number. Without a point, all that follows its figures, such as a unit, is
// after. Commas and spaces between figures belong to the figures.
func (s *setter) decimalSplit(runs []run) (before, after float64) {
	total := 0.0
	for _, r := range runs {
		total += r.width
	}
	x, seen := 0.0, false
	for _, r := range runs {
		for i := range len(r.text) {
			c := r.text[i]
			switch {
			case isFigure(rune(c)):
				seen = true
			case seen && !((c == ',' || c == ' ') && i+1 < len(r.text) && isFigure(rune(r.text[i+1]))):
				before = x + s.width(r.style, r.text[:i])
				return before, total - before
			}
		}
		x += r.width
	}
	return total, 0
}

// need returns the width that the columns and their padding ask for.
func (g *grid) need(width func(gridColumn) float64) float64 {
	total := g.mark
	for _, c := range g.cols {
		total += width(c) + 2*g.padX
	}
	return total
}

// sizeFor returns the size of type at which the widest words fit: the one at
// hand, or a smaller one down to a floor. Words that take up more than a
// good part of the width may be broken.
func (g *grid) sizeFor(width float64) float64 {
	need := g.need(func(c gridColumn) float64 { return min(c.least, 0.4*width) })
	if need <= width {
		return g.look.size
	}
	return max(math.Floor(10*g.look.size*width/need)/10, min(tableFloor, g.look.size))
}

// setWidths shares the width among the columns and places them.
func (g *grid) setWidths(width float64) {
	g.padX = min(g.padX, 0.15*width/float64(len(g.cols)))
	free := width - g.need(func(gridColumn) float64 { return 0 })
	if g.sum(most) <= free {
		g.spread(free)
	} else {
		g.squeeze(free)
	}
	x := g.x
	for i := range g.cols {
		g.cols[i].x = x + g.padX
		if i == 0 {
			g.cols[i].x += g.mark
		}
		x = g.cols[i].x + g.cols[i].width + g.padX
	}
	g.width = x - g.x
}

func most(c gridColumn) float64 { return c.most }

func (g *grid) sum(width func(gridColumn) float64) float64 {
	total := 0.0
	for _, c := range g.cols {
		total += width(c)
	}
	return total
}

// spread gives every column its most. What is left goes to the wide columns;
// where there is none to each alike, but only a little if the table is small:
// its rows are easier to follow so.
func (g *grid) spread(free float64) {
	left := free - g.sum(most)
	each := left / float64(len(g.cols))
	if each > 4.5*g.look.size {
		each = 2.6 * g.look.size
	}
	wide := 0
	for _, c := range g.cols {
		if c.wide {
			wide++
		}
	}
	for i := range g.cols {
		c := &g.cols[i]
		c.width = c.most
		switch {
		case wide > 0 && c.wide:
			c.width += left / float64(wide)
		case wide == 0:
			c.width += each
		}
	}
}

// squeeze lets columns narrower than a common measure have their most, and
// the others that measure, but never less than their widest word unless the
// words together are too wide. Wide columns give way first.
func (g *grid) squeeze(free float64) {
	floor := func(c gridColumn) float64 { return min(c.least, 0.4*free) }
	if g.sum(floor) > free { // words must break
		share := g.level(free, func(gridColumn) float64 { return 0 }, func(c gridColumn) float64 { return c.least })
		for i := range g.cols {
			g.cols[i].width = min(g.cols[i].least, share)
		}
		return
	}
	fixed := func(c gridColumn) float64 {
		if c.wide {
			return max(floor(c), min(c.most, 0.35*free))
		}
		return c.most
	}
	if need := g.sum(fixed); need <= free {
		wide := g.sum(func(c gridColumn) float64 {
			if c.wide {
				return c.most - fixed(c)
			}
			return 0
		})
		for i, c := range g.cols {
			g.cols[i].width = fixed(c)
			if c.wide && wide > 0 {
				g.cols[i].width += (free - need) * (c.most - fixed(c)) / wide
			}
		}
		return
	}
	share := g.level(free, floor, most)
	for i, c := range g.cols {
		g.cols[i].width = min(c.most, max(floor(c), share))
	}
}

// level returns the measure at which the columns, held between a low and a
// high of their own, together fill the width.
func (g *grid) level(free float64, low, high func(gridColumn) float64) float64 {
	from, to := 0.0, free
	for range 50 {
		mid := (from + to) / 2
		if g.sum(func(c gridColumn) float64 { return min(high(c), max(low(c), mid)) }) > free {
			to = mid
		} else {
			from = mid
		}
	}
	return from
}

package figure

import (
	"cmp"
	"math"
	"slices"
	"strconv"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"shearbook/report"
)

// flipColumn is the factors toward one class.
type flipColumn struct {
	heading string
	class   string
	factor  func(FlipShare) float64
	best    int // the share whose factor is nearest to 1; -1 if none has one
	width   vg.Length
}

// addColumn adds the factors toward a class; none if it has no name.
func (f *flip) addColumn(heading, class string, factor func(FlipShare) float64) {
	if class == "" {
		return
	}
	c := flipColumn{heading: heading, class: plain.fit(class, f.width*0.1), factor: factor, best: -1}
	least := math.Inf(1)
	for i, y := range f.shares {
		if far := math.Abs(math.Log(factor(y))); !y.Interface && far < least {
			least, c.best = far, i
		}
	}
	c.width = plain.width(heading)
	for i := range f.shares {
		c.width = max(c.width, emphatic.width(c.text(f.shares, i)))
	}
	f.columns = append(f.columns, c)
}

// emphatic is plain lettering in bold.
var emphatic = lettering{report.SansBold, plain.size, plain.colour}

// text returns what a column says of a share: nothing of an interface.
func (c *flipColumn) text(shares []FlipShare, i int) string {
	switch x := c.factor(shares[i]); {
	case shares[i].Interface:
		return ""
	case x == 0:
		return "cannot"
	default:
		return "× " + factorText(x) + " to " + c.class
	}
}

// factorText returns a factor to a hundredth, or to as many digits more as
// it takes to tell it from 1 or to show two that are not 0.
func factorText(x float64) string {
	switch {
	case x >= 100:
		return strconv.FormatFloat(x, 'f', 0, 64)
	case x >= 10:
		return strconv.FormatFloat(x, 'f', 1, 64)
	case x < 0.0995:
		return strconv.FormatFloat(x, 'g', 2, 64)
	}
	text := strconv.FormatFloat(x, 'f', 2, 64)
	for digits := 3; text[:1] == "1" && digits <= 5; digits++ {
		if v, _ := strconv.ParseFloat(text, 64); v != 1 || math.Abs(x-1) < 1e-9 {
			break
		}
		text = strconv.FormatFloat(x, 'f', digits, 64)
	}
	return text
}

// drawTexts writes the depths to the left of the rows and the factors to
// their right, under their headings.
func (f *flip) drawTexts(s *sheet, p *plane) {
	rows := f.written()
	for _, i := range rows {
		base := p.Max.Y - f.rows[i] - plain.size*capHeight/2
		s.write(plain, p.Min.X-gap, base, draw.XRight, f.name(f.shares[i]))
	}
	x := f.width - margin
	for _, c := range slices.Backward(f.columns) {
		x -= c.width
		s.write(small, x, p.Max.Y+gap, draw.XLeft, c.heading)
		for _, i := range rows {
			l := plain
			if i == c.best {
				l = emphatic
			}
			s.write(l, x, p.Max.Y-f.rows[i]-l.size*capHeight/2, draw.XLeft, c.text(f.shares, i))
		}
		x -= 2 * gap
	}
}

// written returns the rows beside which something is written, from the top
// down, so that no text touches another: first those whose factor is nearest
// to 1, then by their share in the variance.
func (f *flip) written() []int {
	order := make([]int, len(f.shares))
	for i := range order {
		order[i] = i
	}
	weight := func(i int) float64 {
		if slices.ContainsFunc(f.columns, func(c flipColumn) bool { return c.best == i }) {
			return 2
		}
		return f.shares[i].Variance
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(weight(b), weight(a)) })
	var rows []int
	for _, i := range order {
		k, _ := slices.BinarySearch(rows, i)
		above := k == 0 || f.rows[i]-f.rows[rows[k-1]] >= plain.feed()
		below := k == len(rows) || f.rows[rows[k]]-f.rows[i] >= plain.feed()
		if above && below {
			rows = slices.Insert(rows, k, i)
		}
	}
	return rows
}

package batch

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
	"shearbook/vs30/siteclass"
)

// tally counts the rows of a code.
type tally struct {
	id         string
	code       *siteclass.Code // nil where the options do not name it
	rows       int
	classes    []class // those of the code first, from stiff to soft
	failed     int
	designated bool // a class was its velocity

	low, high float64 // m/s, of the averages
	averaged  int
	bars      []figure.Bar
	maps      []*figure.Map // by degrees, then one a grid; nil where no point is
}

// class counts the rows of a class.
type class struct {
	name      string
	n         int
	low, high float64 // m/s, of the averages; 0 where there are none
}

func newTally(id string, code *siteclass.Code) *tally {
	t := &tally{id: id, code: code}
	if code == nil {
		return t
	}
	for _, b := range code.Bands {
		t.class(b.Class)
	}
	t.class(code.Outside)
	for _, c := range code.Conditions {
		t.class(c.Class)
	}
	return t
}

// class returns the place of a class, −1 of none.
func (t *tally) class(name string) int {
	if name == "" {
		return -1
	}
	for i := range t.classes {
		if t.classes[i].name == name {
			return i
		}
	}
	if len(t.classes) == mostClasses {
		t.classes[mostClasses-1].name = "others"
		return mostClasses - 1
	}
	t.classes = append(t.classes, class{name: strings.Clone(name)})
	return len(t.classes) - 1
}

// classOf returns the place of a row's class. A designation that is the
// velocity itself, as X361, counts in the row of the table that it lies in.
func (t *tally) classOf(r *Row) int {
	if r.Class == "" {
		return -1
	}
	if t.code == nil || slices.ContainsFunc(t.classes, func(c class) bool { return c.name == r.Class }) {
		return t.class(r.Class)
	}
	digits := strings.TrimLeftFunc(r.Class, func(c rune) bool { return c < '0' || c > '9' })
	if v, ok := decimal(digits); ok && digits != r.Class {
		for _, b := range t.code.Bands {
			if !b.Vs.Empty() && b.Vs.Contains(v) {
				t.designated = true
				return t.class(b.Class)
			}
		}
	}
	return t.class(r.Class)
}

func (t *tally) add(r *Row) {
	t.rows++
	i := t.classOf(r)
	if i < 0 {
		t.failed++
		return
	}
	c := &t.classes[i]
	c.n++
	if !(r.Velocity > 0) {
		return
	}
	if c.low == 0 || r.Velocity < c.low {
		c.low = r.Velocity
	}
	c.high = max(c.high, r.Velocity)
	if t.averaged++; t.low == 0 || r.Velocity < t.low {
		t.low = r.Velocity
	}
	t.high = max(t.high, r.Velocity)
}

// fit makes the bars of the histogram: more where there are more rows.
func (t *tally) fit() {
	n := 8 + int(2*math.Log2(float64(max(t.averaged, 1))))
	edges := figure.BarEdges(t.low, t.high, min(n, 40), t.bounds())
	for i := 1; i < len(edges); i++ {
		t.bars = append(t.bars, figure.Bar{Lower: edges[i-1], Upper: edges[i]})
	}
}

// count puts the average of a row into its bar. One on an edge belongs to the
// bar above it.
func (t *tally) count(v float64) {
	if len(t.bars) == 0 || !(v > 0) {
		return
	}
	i, _ := slices.BinarySearchFunc(t.bars, v, func(b figure.Bar, v float64) int {
		if b.Upper <= v {
			return -1
		}
		return 1
	})
	t.bars[min(i, len(t.bars)-1)].Count++
}

// bounds are the velocity bounds of the code in m/s.
func (t *tally) bounds() figure.Classes {
	out := figure.Classes{Code: t.id}
	if t.code == nil {
		return out
	}
	for i := len(t.code.Bands) - 1; i >= 0; i-- {
		b := &t.code.Bands[i]
		switch {
		case b.Vs.Empty():
		case b.Vs.Lower.Op == siteclass.Open:
			out.Lowest = b.Class
		default:
			out.Bounds = append(out.Bounds, figure.Bound{Value: b.Vs.Lower.Value * t.code.Unit.Factor, Class: b.Class})
		}
	}
	return out
}

// sayAll are the notes that say the same of every profile under a code, and
// the conditions that nobody has assessed. They are those of uniform ground,
// once in each class of the table.
func (t *tally) sayAll(opt *DeriveOptions) (notes []string, unassessed []string) {
	ground := []float64{400}
	for _, b := range t.bounds().Bounds {
		ground = append(ground, b.Value*1.05, b.Value*0.95)
	}
	for _, v := range ground {
		d, err := decideUniform(t.code, v, opt)
		if err != nil {
			continue
		}
		for _, n := range d.Notes {
			if standing(n.ID) {
				notes = merge(notes, n)
			}
		}
		for _, text := range d.Unassessed {
			if !slices.Contains(unassessed, text) {
				unassessed = append(unassessed, text)
			}
		}
	}
	return notes, unassessed
}

// merge adds a note that is not there yet. Notes on the standing of parts of a
// code ("from memory: class E of Table 1") become one for each standing.
func merge(notes []string, n profile.Note) []string {
	if slices.Contains(notes, n.Text) {
		return notes
	}
	word, parts, ok := strings.Cut(n.Text, ": ")
	if n.ID != "standing" || !ok {
		return append(notes, n.Text)
	}
	i := slices.IndexFunc(notes, func(text string) bool { return strings.HasPrefix(text, word+": ") })
	if i < 0 {
		return append(notes, n.Text)
	}
	for part := range strings.SplitSeq(parts, "; ") {
		if !slices.Contains(strings.Split(strings.TrimPrefix(notes[i], word+": "), "; "), part) {
			notes[i] += "; " + part
		}
	}
	return notes
}

// decideUniform decides uniform ground of a velocity in m/s.
func decideUniform(code *siteclass.Code, v float64, opt *DeriveOptions) (siteclass.Decision, error) {
	p := &profile.Profile{Layers: []profile.Layer{{Bottom: 500, Vs: v}, {Top: 500, Bottom: math.Inf(1), Vs: v}}}
	p.Survey.Basis = profile.Measured
	return report.Classify(p, code, opt.Facts)
}

// decimal is the number that digits write.
func decimal(digits string) (float64, bool) {
	v, err := strconv.ParseFloat(digits, 64)
	return v, err == nil && v-v == 0
}

// magnitude is the power of ten of a positive number.
func magnitude(v float64) float64 { return math.Floor(math.Log10(v)) }

// fileName makes a plain name of a code's ID.
func fileName(id string) string {
	name := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '-', r == '_':
			return r
		}
		return '-'
	}, id)
	return name[:min(len(name), 60)]
}

package siteclass

import (
	"fmt"
	"slices"
	"strings"
	"sync"

	"shearbook/profile"
)

// builders makes each built-in code, one line a file, in the order of All:
// by ID.
var builders = []func() *Code{
	aashto2011,
	aashto2023,
	as1170_4,
	asce7_10,
	asce7_16,
	asce7_22,
	bc3_2013,
	bnbc2020,
	ds61,
	e0302018,
	ec8_2004,
	ec8_2024,
	gb50011_2010,
	ibc2012,
	ibc2015,
	ibc2018,
	ibc2021,
	ibc2024,
	iran2800,
	is1893_2016,
	jp1793,
	jpBridgesV,
	kds41_17,
	nbcc2010,
	nbcc2015,
	nbcc2020,
	ncse02,
	nec2015,
	nehrp2020,
	nscp2015,
	nsr10,
	ntc2008,
	ntc2018,
	nzs1170_5,
	rpa99,
	sni1726_2019,
	tbdy2018,
	tec2007,
	ubc97,
}

// codes returns the built-in codes, ordered by ID, made when they are first
// asked for: a command that needs none does not wait for them.
var codes = sync.OnceValue(func() []*Code {
	all := make([]*Code, len(builders))
	for i, build := range builders {
		all[i] = build()
		all[i].prepare()
	}
	slices.SortStableFunc(all, func(a, b *Code) int { return strings.Compare(a.ID, b.ID) })
	return all
})

// All returns the built-in codes, ordered by ID.
func All() []*Code { return slices.Clone(codes()) }

// Find returns the built-in code of that ID. The error is an *UnknownError.
func Find(id string) (*Code, error) {
	for _, c := range codes() {
		if c.ID == id {
			return c, nil
		}
	}
	ids := make([]string, len(codes()))
	for i, c := range codes() {
		ids[i] = c.ID
	}
	return nil, &UnknownError{ID: id, Nearest: nearest(id, ids)}
}

// nearest returns the ID of the same letters in another order, or else the
// one most like the word, or else the first that begins with it, or "".
func nearest(word string, ids []string) string {
	letters := sorted(word)
	for _, id := range ids {
		if sorted(id) == letters {
			return id
		}
	}
	if like := profile.Nearest(word, ids); like != "" || word == "" {
		return like
	}
	for _, id := range ids {
		if strings.HasPrefix(id, strings.ToLower(word)) {
			return id
		}
	}
	return ""
}

// sorted returns the letters of a word in their order.
func sorted(word string) string {
	letters := []rune(strings.ToLower(word))
	slices.Sort(letters)
	return string(letters)
}

// UnknownError reports an ID that no code has.
type UnknownError struct {
	ID      string
	Nearest string // the ID most like it; "" if none is
}

// Error names the ID and the nearest one there is.
func (e *UnknownError) Error() string {
	if e.Nearest == "" {
		return fmt.Sprintf("no code is called %q", e.ID)
	}
	return fmt.Sprintf("no code is called %q; did you mean %q", e.ID, e.Nearest)
}

// ClassOf returns the class that the table alone gives an average velocity in
// m/s, without the conditions beside it: what Lookup finds, or Outside. It
// does not allocate.
func (c *Code) ClassOf(average float64) string {
	if i := c.Lookup(average / c.Unit.Factor); i >= 0 {
		return c.Bands[i].Class
	}
	return c.Outside
}

// Lookup returns the index in Bands of the class that the velocity column
// gives a value in Unit, by the printed operators; the softer one where two
// bands claim the value, or where it lies in a gap between two; −1 where the
// value is softer than every band, or is not a number. It does not allocate.
func (c *Code) Lookup(value float64) int { return c.LookupIn(AverageVs, value) }

// LookupIn does for any column what Lookup does for the velocity: the value
// is in blows per 0.3 m for AverageN and AverageNch, in SuUnit for AverageSu.
// A blow count or strength softer than every band is in the row below the
// softest of its column, if there is one.
func (c *Code) LookupIn(m Measure, value float64) int {
	if _, last := c.claims(m, value); last >= 0 {
		return last
	}
	if i := c.belowGap(m, value); i >= 0 || m == AverageVs {
		return i
	}
	return c.belowColumn(m, value)
}

// cell returns the band's bounds on a measure.
func (b *Band) cell(m Measure) *Range {
	switch m {
	case AverageVs:
		return &b.Vs
	case AverageN, AverageNch:
		return &b.N
	}
	return &b.Su
}

// gives reports whether the band's cell of a measure gives the class.
func (b *Band) gives(m Measure) bool { return !b.Indicative && !b.cell(m).Empty() }

// claims returns the stiffest and the softest band whose cell contains the
// value, −1 if none does.
func (c *Code) claims(m Measure, value float64) (first, last int) {
	first, last = -1, -1
	for i := range c.Bands {
		b := &c.Bands[i]
		if !b.gives(m) || !b.cell(m).Contains(value) {
			continue
		}
		if first < 0 {
			first = i
		}
		last = i
	}
	return first, last
}

// belowGap returns the band just below the gap in which the value lies, −1
// if there is none.
func (c *Code) belowGap(m Measure, value float64) int {
	for i := range c.Bands {
		b := &c.Bands[i]
		upper := b.cell(m).Upper
		if upper.Op == Open || b.Indicative {
			continue
		}
		if value > upper.Value || equal(value, upper.Value) {
			return i
		}
	}
	return -1
}

// belowColumn returns the row below the softest band of a column, −1 if there
// is none, or the value is not softer than that band.
func (c *Code) belowColumn(m Measure, value float64) int {
	for i := len(c.Bands) - 1; i >= 0; i-- {
		b := &c.Bands[i]
		if !b.gives(m) {
			continue
		}
		if i+1 < len(c.Bands) && value <= b.cell(m).Lower.Value {
			return i + 1
		}
		return -1
	}
	return -1
}

// bounds returns the different velocity bounds of the table, from stiff to
// soft.
func (c *Code) bounds() []float64 { return c.boundsIn(AverageVs) }

// boundsIn returns the different bounds of a column, from stiff to soft.
func (c *Code) boundsIn(m Measure) []float64 {
	if c.ready != nil {
		return c.ready.bounds[m]
	}
	var all []float64
	for i := range c.Bands {
		b := &c.Bands[i]
		if b.Indicative {
			continue
		}
		for _, l := range [...]Limit{b.cell(m).Upper, b.cell(m).Lower} {
			if l.Op != Open && !slices.Contains(all, l.Value) {
				all = append(all, l.Value)
			}
		}
	}
	slices.Sort(all)
	slices.Reverse(all)
	return all
}

// band returns the index of the row of a class, −1 if it has none.
func (c *Code) band(class string) int {
	for i := range c.Bands {
		if c.Bands[i].Class == class {
			return i
		}
	}
	return -1
}

// fromTwin returns a velocity in Unit that stands to the table's bounds as v
// (m/s) stands to those of the twin: on the same bound, or between the same
// two.
func (c *Code) fromTwin(v float64) float64 {
	v /= c.Twin.Unit.Factor
	bounds := c.bounds()
	upper := 2 * bounds[0]
	for i, b := range bounds {
		switch twin := c.Twin.Bounds[i]; {
		case equal(v, twin):
			return b
		case v > twin:
			return (b + upper) / 2
		}
		upper = b
	}
	return upper / 2
}

// prepared is what every decision under a code would otherwise work out anew.
type prepared struct {
	bounds   [AverageSu + 1][]float64 // of each column
	over     string                   // "v̄s over 100 ft"
	subjects []subject                // of each band
	rows     []string                 // names of the rows, as a standing lists them
}

// subject is what a band is compared with, in words: whole, and at either end
// of a printed range.
type subject struct{ whole, lower, upper string }

func subjectOf(text string) subject {
	return subject{text, text + ", lower end", text + ", upper end"}
}

// prepare works out what does not change from one decision to the next. It
// must be called again where the code is changed.
func (c *Code) prepare() {
	c.ready = nil
	p := &prepared{over: c.Parameter + " over " + c.DepthText}
	for m := range p.bounds {
		p.bounds[m] = c.boundsIn(Measure(m))
	}
	for i := range c.Bands {
		p.subjects = append(p.subjects, subjectOf(p.over+", class "+c.Bands[i].Class))
		p.rows = append(p.rows, c.rowName(i))
	}
	c.ready = p
}

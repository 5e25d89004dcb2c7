package siteclass

import (
	"fmt"
	"slices"
	"strings"

	"shearbook/profile"
)

// codes holds the built-in codes in the order of All. It is never changed.
var codes = []*Code{
	asce7_16(),
	asce7_22(),
	ec8_2004(),
	nbcc2015(),
	ntc2018(),
	tbdy2018(),
}

// All returns the built-in codes, ordered by ID.
func All() []*Code { return slices.Clone(codes) }

// Find returns the built-in code of that ID. The error is an *UnknownError.
func Find(id string) (*Code, error) {
	ids := make([]string, len(codes))
	for i, c := range codes {
		if c.ID == id {
			return c, nil
		}
		ids[i] = c.ID
	}
	return nil, &UnknownError{ID: id, Nearest: nearest(id, ids)}
}

// nearest returns the ID most like the word, or else the first that begins
// with it, or "".
func nearest(word string, ids []string) string {
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

// Lookup returns the index in Bands of the class that the velocity column
// gives a value in Unit, by the printed operators; the softer one where two
// bands claim the value, or where it lies in a gap between two; −1 where the
// value is softer than every band, or is not a number. It does not allocate.
func (c *Code) Lookup(value float64) int {
	if _, last := c.claims(value); last >= 0 {
		return last
	}
	return c.belowGap(value)
}

// claims returns the stiffest and the softest band whose velocity cell
// contains the value, −1 if none does.
func (c *Code) claims(value float64) (first, last int) {
	first, last = -1, -1
	for i := range c.Bands {
		b := &c.Bands[i]
		if b.Vs.Empty() || b.Indicative || !b.Vs.Contains(value) {
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
func (c *Code) belowGap(value float64) int {
	for i := range c.Bands {
		b := &c.Bands[i]
		if b.Vs.Upper.Op == Open || b.Indicative {
			continue
		}
		if value > b.Vs.Upper.Value || equal(value, b.Vs.Upper.Value) {
			return i
		}
	}
	return -1
}

// bounds returns the different velocity bounds of the table, from stiff to
// soft.
func (c *Code) bounds() []float64 {
	var all []float64
	for i := range c.Bands {
		b := &c.Bands[i]
		if b.Indicative {
			continue
		}
		for _, l := range [...]Limit{b.Vs.Upper, b.Vs.Lower} {
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
	return slices.IndexFunc(c.Bands, func(b Band) bool { return b.Class == class })
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

package siteclass

import (
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// Quick decides profiles under a code whose table of velocities alone settles
// them, and nothing else: it is for batches of a million profiles, in which
// nearly all are so. It takes a small part of the time of Decide, allocates
// nothing, and leaves every other profile to Decide; a test holds the two
// against each other under every code.
type Quick struct {
	code     *Code
	from     float64 // m below ground level: the datum
	sections []section
	shown    []Range // of the rows that do not give their class
}

// section is the velocities between two neighbouring bounds of the table.
type section struct {
	above, below float64 // the bounds, in Code.Unit: +Inf and 0 at the ends
	band         int
	standing     Standing
	improving    bool
	stiffer      string // the class beyond the nearest bound above at which it changes; "" if there is none
	stifferFrom  float64
	softer       string // likewise below
	softerFrom   float64
	own          bool // decided by nothing but its row
}

// Verdict is what Quick found.
type Verdict struct {
	Class     string
	Velocity  float64 // m/s
	Thickness float64 // m
	Datum     float64 // m below ground level
	Standing  Standing
	ToClass   string  // as Margin has it; "" where there is none
	Percent   float64 // likewise
	Reversed  bool    // the decision has the note reversal; see AppendReversal

	Vs30 float64 // m/s, the average over 30 m below the datum; 0 where it was not looked for
}

// Quick returns what decides plain profiles under the code, from a datum and
// for a foundation that are stated or not; nil where the code has a rule that
// the table does not show.
func (c *Code) Quick(datum, foundation profile.Optional) *Quick {
	s := Site{Datum: datum, FoundationDepth: foundation}
	if c.decide != nil && !c.bandsAlone || c.Needs > 1 || !c.routes()[0].has(AverageVs) || len(c.routes()[0].Measures) > 1 ||
		c.routes()[0].decide != nil || c.Depth == 0 ||
		known("", datum) != nil || known("", foundation) != nil {
		return nil
	}
	q := &Quick{code: c}
	q.from, _ = c.DatumOf(s)
	bounds := c.bounds()
	for i := range len(bounds) + 1 {
		x := section{above: math.Inf(1)}
		if i > 0 {
			x.above = bounds[i-1]
		}
		if i < len(bounds) {
			x.below = bounds[i]
		}
		q.sections = append(q.sections, c.describe(x, bounds))
	}
	for i := range c.Bands {
		if b := &c.Bands[i]; b.Indicative && !b.Vs.Empty() {
			q.shown = append(q.shown, b.Vs)
		}
	}
	return q
}

// describe says what a velocity inside a section comes to.
func (c *Code) describe(x section, bounds []float64) section {
	inside := (x.below + x.above) / 2
	if math.IsInf(x.above, 1) {
		inside = 2*x.below + 1
	}
	first, last := c.claims(AverageVs, inside)
	if first < 0 || first != last || c.Lookup(inside) != first {
		return x
	}
	b := &c.Bands[first]
	x.band, x.improving, x.own, x.standing = first, b.Improving, true, max(Checked, b.Standing)
	if c.Adopts != "" {
		x.standing = max(x.standing, c.AdoptionStanding)
	}
	for i := range c.Conditions {
		if k := &c.Conditions[i]; k.Kind == Barred && slices.Contains(k.Bars, b.Class) {
			x.own = false
		}
	}
	for _, bound := range slices.Backward(bounds) {
		if class := c.ClassOf(bound * (1 - beside) * c.Unit.Factor); bound <= x.below && class != b.Class {
			x.softer, x.softerFrom = class, bound
		}
	}
	for _, bound := range bounds {
		if class := c.ClassOf(bound * (1 + beside) * c.Unit.Factor); bound >= x.above && class != b.Class {
			x.stiffer, x.stifferFrom = class, bound
		}
	}
	return x
}

// Decide decides a profile of layers of constant velocity that state nothing
// but that, of no survey, and whose own end is theirs. It returns false where
// the profile is for Code.Decide: it is too short, its half-space is averaged,
// its average lies so near a bound that a note must be made of it, or a rule of
// the code beside the table may apply.
func (q *Quick) Decide(layers []profile.Layer) (Verdict, bool) {
	c := q.code
	t, t30 := travelTimes(layers, q.from, c.Depth, 30)
	if t == 0 {
		return Verdict{}, false
	}
	mps := c.Depth / t
	x := q.section(mps / c.Unit.Factor)
	last := &layers[len(layers)-1]
	if x == nil || last.HalfSpace() && q.from+c.Depth-last.Top > vs30.Touching {
		return Verdict{}, false
	}
	d := q.verdict(x, mps)
	if t30 > 0 {
		d.Vs30 = 30 / t30
	}
	d.Reversed = falls(layers, q.from, q.from+c.Depth)
	return d, !(d.Reversed && x.improving)
}

// travelTimes returns the travel times in s over two thicknesses below a depth of
// layers of constant velocity, 0 where the layers end above: the very numbers
// that vs30.TravelTime returns, in one pass.
func travelTimes(layers []profile.Layer, from, thickness, other float64) (t, u float64) {
	to, also := from+thickness, from+other
	sum := 0.0
	for i := range layers {
		l := &layers[i]
		if l.Bottom <= from {
			continue
		}
		top := max(l.Top, from)
		if l.Bottom >= to && t == 0 {
			if t = sum; to > top {
				t += (to - top) / l.Vs
			}
		}
		if l.Bottom >= also && u == 0 {
			if u = sum; also > top {
				u += (also - top) / l.Vs
			}
		}
		if t > 0 && u > 0 {
			break
		}
		sum += (l.Bottom - top) / l.Vs
	}
	return t, u
}

// verdict is what an average (m/s) in a section comes to.
func (q *Quick) verdict(x *section, mps float64) Verdict {
	v := mps / q.code.Unit.Factor
	d := Verdict{Class: q.code.Bands[x.band].Class, Velocity: mps, Thickness: q.code.Depth, Datum: q.from, Standing: x.standing}
	if x.softer != "" {
		d.ToClass, d.Percent = x.softer, 100*(x.softerFrom-v)/v
	}
	if percent := 100 * (x.stifferFrom - v) / v; x.stiffer != "" && (d.ToClass == "" || math.Abs(percent) < math.Abs(d.Percent)) {
		d.ToClass, d.Percent = x.stiffer, percent
	}
	return d
}

// DecideExtended decides a profile as Decide does, of which the last layer of
// layers was added to reach the depth that the code averages over. notes are
// those on the extension; the decision's come after them, the standing ones
// left out, and Reversed is not set.
func (q *Quick) DecideExtended(p *profile.Profile, layers []profile.Layer, notes []profile.Note) (Verdict, []profile.Note, bool) {
	c := q.code
	mps, err := vs30.Average(layers, q.from, c.Depth)
	if err != nil {
		return Verdict{}, notes, false
	}
	x := q.section(mps / c.Unit.Factor)
	if x == nil || x.improving {
		return Verdict{}, notes, false
	}
	r := ruling{code: c, site: &Site{Profile: p, Layers: layers, Extended: true}, layers: layers, from: q.from, datum: q.from, d: Decision{Notes: notes}}
	r.take(mps, c.Depth, c.DepthText)
	r.underfoot()
	if c.bandsAlone {
		r.shallowData()
	}
	d := q.verdict(x, mps)
	for _, part := range r.parts {
		d.Standing = max(d.Standing, part.standing)
	}
	return d, r.d.Notes, true
}

// DecideCarried decides a profile that ends above the depth that the code averages
// over, from ground level, and is carried down by its deepest velocity. It says
// what DecideExtended does of the constant velocity, without a word: in place of
// notes there is Reversed.
func (q *Quick) DecideCarried(layers []profile.Layer) (Verdict, bool) {
	c, last := q.code, &layers[len(layers)-1]
	t, t30 := travelTimes(layers, 0, last.Bottom, 30)
	if t30 == 0 && last.Bottom < 30-vs30.Touching {
		t30 = t + (30-last.Bottom)/last.Vs
	}
	mps := c.Depth / (t + (c.Depth-last.Bottom)/last.Vs)
	x := q.section(mps / c.Unit.Factor)
	if q.from != 0 || x == nil || x.improving {
		return Verdict{}, false
	}
	d := q.verdict(x, mps)
	if c.bandsAlone { // and so rests on the rule for shallow data
		d.Standing = max(d.Standing, FromMemory)
	}
	if t30 > 0 {
		d.Vs30 = 30 / t30
	}
	d.Reversed = falls(layers, 0, c.Depth)
	return d, true
}

// From returns the datum in m below ground level, and Depth the thickness in m
// that is averaged.
func (q *Quick) From() float64  { return q.from }
func (q *Quick) Depth() float64 { return q.code.Depth }

// section returns the section in which v (in the code's unit) lies, nil where
// it is not one that decides alone, or a bound is so near that the rounded
// average, or the print in another unit, may lie beyond it.
func (q *Quick) section(v float64) *section {
	for i := range q.sections {
		x := &q.sections[i]
		if v < x.below {
			continue
		}
		whole := math.Round(v)
		if !x.own || !(v < x.above) || equal(v, x.below) || equal(v, x.above) ||
			whole <= x.below*(1+equality) || whole >= x.above*(1-equality) || !q.alike(v, i) || q.indicated(v) {
			return nil
		}
		return x
	}
	return nil
}

// alike reports whether the print in another unit puts v into the same
// section.
func (q *Quick) alike(v float64, section int) bool {
	t := &q.code.Twin
	if t.Unit.Name == "" {
		return true
	}
	twin := v * q.code.Unit.Factor / t.Unit.Factor
	return (section == 0 || twin < t.Bounds[section-1]*(1-equality)) &&
		(section == len(t.Bounds) || twin > t.Bounds[section]*(1+equality))
}

// indicated reports whether a row that does not give its class shows v.
func (q *Quick) indicated(v float64) bool {
	return slices.ContainsFunc(q.shown, func(r Range) bool { return r.Contains(v) })
}

// falls reports whether vs30.Reversals finds any in layers of constant
// velocity.
func falls(layers []profile.Layer, from, to float64) bool {
	for i := 1; i < len(layers); i++ {
		top := layers[i].Top
		if vs30.Slower(layers[i].Vs, layers[i-1].Vs) && top-from > vs30.Touching && to-top > vs30.Touching {
			return true
		}
	}
	return false
}

// AppendReversal adds the text of the note reversal on layers between the
// depths from and to (m below ground level), and returns the index of the
// first slower layer; -1, and no text, where the velocity does not fall.
func AppendReversal(b []byte, layers []profile.Layer, from, to float64) ([]byte, int) {
	const most = 3
	first, n := -1, 0
	for i := range layers {
		l := &layers[i]
		if i > 0 && l.Top-from > vs30.Touching && to-l.Top > vs30.Touching {
			u := &layers[i-1]
			if above := u.VsAt(u.Bottom); vs30.Slower(l.Vs, above) {
				if n++; first < 0 {
					first = i
				}
				b = appendFall(b, n, most, above, l.Vs, l.Top)
			}
		}
		if !l.Gradient() || !vs30.Slower(l.VsBottom, l.Vs) {
			continue
		}
		if top, bottom := max(l.Top, from), min(l.Bottom, to); bottom-top > vs30.Touching {
			if n++; first < 0 {
				first = i
			}
			b = appendFall(b, n, most, l.VsAt(top), l.VsAt(bottom), top)
		}
	}
	if more := n - most; more > 0 {
		b = append(b, ", and "...)
		b = append(appendCount(b, more), " more"...)
	}
	return b, first
}

// appendFall adds the n-th fall, up to the most that are told.
func appendFall(b []byte, n, most int, above, below, depth float64) []byte {
	switch {
	case n > most:
		return b
	case n == 1:
		b = append(b, "the velocity falls with depth: from "...)
	default:
		b = append(b, ", from "...)
	}
	b = append(appendPair(b, above, " to ", below), " m/s at "...)
	return append(appendShort(b, depth), " m"...)
}

package review

import (
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
)

// averaging is an average as it ought to be taken.
type averaging struct {
	*Case
	all       []profile.Layer // of the profile
	from      float64         // m below ground level
	thickness float64         // m
	right     float64         // m/s
	working   vs30.Working
}

// way is a wrong way of averaging. The value is NaN where the way cannot be
// gone, or is no other than the right one.
type way struct {
	id    string
	text  func(a *averaging) string
	value func(a *averaging) float64
}

// says is the text of a way that is always worded alike.
func says(text string) func(*averaging) string { return func(*averaging) string { return text } }

// ways are the wrong ways of averaging, the likeliest first. The order is
// common practice. Each is an exact computation of its own, so that what is
// claimed can be met to the last printed digit.
var ways = []way{
	{"arithmetic-mean", says("the arithmetic mean of the velocities, weighted by thickness, in place of the average by travel time"), (*averaging).thicknessMean},
	{"other-depth", func(a *averaging) string { return a.otherDepth().text }, func(a *averaging) float64 { return a.over(a.from, a.otherDepth().depth) }},
	{"other-depth-arithmetic", func(a *averaging) string {
		return "the arithmetic mean by thickness over " + metres(a.otherDepth().depth) + " in place of " + metres(a.thickness)
	}, func(a *averaging) float64 { return a.meanTo(a.from + a.otherDepth().depth) }},
	{"datum", says("averaged from ground level in place of the stated datum"), (*averaging).fromGround},
	{"foundation", says("averaged from the underside of the foundation in place of the datum of the code"), (*averaging).fromFoundation},
	{"datum-end", says("averaged from the datum down to the averaging depth below ground level, so over less than that depth"), (*averaging).datumEnd},
	{"last-layer", says("the lowest layer or half-space left out, the average ended at its top"), (*averaging).withoutLast},
	{"last-time", says("the travel time of the lowest layer or half-space left out, the full depth kept"), (*averaging).withoutLastTime},
	{"feet-velocity", says("velocities in ft/s taken for m/s"), func(a *averaging) float64 { return a.right / profile.Foot }},
	{"other-depth-feet", func(a *averaging) string { return a.otherDepth().text + ", and the number of ft/s written as m/s" }, func(a *averaging) float64 { return a.over(a.from, a.otherDepth().depth) / profile.Foot }},
	{"metre-velocity", says("velocities in m/s taken for ft/s"), func(a *averaging) float64 { return a.right * profile.Foot }},
	{"feet-depth", says("depths in feet taken for metres"), func(a *averaging) float64 { return a.over(a.from, a.thickness*profile.Foot) }},
	{"metre-depth", says("depths in metres taken for feet"), func(a *averaging) float64 { return a.over(a.from, a.thickness/profile.Foot) }},
	{"feet-both", says("depths in feet taken for metres, and velocities in ft/s for m/s"), func(a *averaging) float64 { return a.over(a.from, a.thickness*profile.Foot) / profile.Foot }},
	{"plain-mean", says("the plain mean of the layers' velocities, whatever their thickness"), (*averaging).plainMean},
	{"plain-harmonic", says("the harmonic mean of the layers' velocities, whatever their thickness"), (*averaging).plainHarmonic},
	{"first-layer", says("the first layer left out, the average begun at its bottom"), (*averaging).withoutFirst},
	{"first-time", says("the travel time of the first layer left out, the full depth kept"), (*averaging).withoutFirstTime},
	{"whole-profile", says("averaged over the whole profile in place of the code's depth"), (*averaging).wholeProfile},
	{"cut-layer", says("the layer that the averaging depth cuts counted with its whole thickness"), (*averaging).cutLayer},
	{"cut-left-out", says("the layer that the averaging depth cuts left out"), (*averaging).cutLeftOut},
	{"gradient-top", says("layers with a gradient counted with the velocity at their top"), (*averaging).gradientTop},
	{"gradient-mean", says("layers with a gradient counted with the mean of their velocities"), (*averaging).gradientMean},
	{"geometric-mean", says("the geometric mean of the velocities, weighted by thickness"), (*averaging).geometricMean},
	{"at-depth", says("the velocity of the layer at the averaging depth, and no average"), (*averaging).atDepth},
	{"vp", says("the velocity of P waves averaged in place of that of S waves"), (*averaging).ofVp},
	{"rounded-times", says("travel times rounded to milliseconds before they were added"), (*averaging).roundedTimes},
}

// extended is the average of the profile carried on by a relation, NaN where
// the relation does not hold.
func (a *averaging) extended(id string) float64 {
	layers, _, err := report.Extended(a.Entry.Profile, id, a.from, a.thickness)
	if err != nil {
		return math.NaN()
	}
	v, err := vs30.Average(layers, a.from, a.thickness)
	if err != nil {
		return math.NaN()
	}
	return v
}

// averageCauses returns the wrong ways that give the claimed average.
func averageCauses(c *Case, claim Number) []Cause {
	a, ok := newAveraging(c)
	if !ok {
		return nil
	}
	var causes []Cause
	if c.Under != nil && c.Under.ID != c.Code.ID {
		if d, err := report.Classify(c.Entry.Profile, c.Under, c.Claim.Stated.facts()); err == nil && fits(claim, d.Velocity) {
			causes = append(causes, Cause{ID: "other-code", Text: "the average as " + c.Under.Edition + " takes it, the code that the claim names"})
		}
	}
	for _, w := range ways {
		v := w.value(a)
		if fits(claim, v) && !same(v, a.right) {
			causes = append(causes, Cause{w.id, w.text(a), claim.in(v), false})
		}
	}
	if from, ok := a.otherDatum(claim); ok && len(causes) == 0 {
		causes = append(causes, Cause{"other-datum", "averaged over the code's depth from a datum that is not stated, about " + short(from, 1) + " m below ground level", claim.in(claim.Value), true})
	}
	if step, ok := coarser(claim, a.right); ok {
		causes = append(causes, Cause{ID: "rounded", Text: "the average rounded to the nearest " + step})
	}
	return first(causes)
}

// fits reports whether a way gives what is claimed.
func fits(claim Number, v float64) bool {
	return v > 0 && !math.IsInf(v, 0) && claim.Means(v, 0)
}

// first keeps as many causes as are told.
func first(causes []Cause) []Cause { return causes[:min(len(causes), maxCauses)] }

// newAveraging returns how a case's average ought to be taken.
func newAveraging(c *Case) (*averaging, bool) {
	v, from, thickness, ok := c.average()
	if !ok {
		return nil, false
	}
	a := &averaging{Case: c, all: c.layers(), from: from, thickness: thickness, right: v}
	layers := a.all
	if extend := c.Claim.Stated.Extend; extend != "" {
		if carried, _, err := report.Extended(c.Entry.Profile, extend, from, thickness); err == nil {
			layers = carried
		}
	}
	var err error
	a.working, err = vs30.Work(layers, from, thickness)
	return a, err == nil
}

// over averages the profile over another depth, carried on as the submission
// states.
func (a *averaging) over(from, thickness float64) float64 {
	if !(thickness > 0) {
		return math.NaN()
	}
	v, err := vs30.Average(a.all, from, thickness)
	if err == nil {
		return v
	}
	if extend := a.Claim.Stated.Extend; extend != "" {
		if layers, _, err := report.Extended(a.Entry.Profile, extend, from, thickness); err == nil {
			if v, err = vs30.Average(layers, from, thickness); err == nil {
				return v
			}
		}
	}
	return math.NaN()
}

type depthText struct {
	depth float64
	text  string
}

// otherDepth is the depth that is mistaken for the code's: 30 m and 100 ft
// for each other.
func (a *averaging) otherDepth() depthText {
	const hundredFeet = 100 * profile.Foot
	switch {
	case same(a.thickness, hundredFeet):
		return depthText{30, "averaged over 30 m in place of 100 ft (30.48 m)"}
	case same(a.thickness, 30):
		return depthText{hundredFeet, "averaged over 100 ft (30.48 m) in place of 30 m"}
	}
	return depthText{30, fmt.Sprintf("averaged over 30 m in place of %s", metres(a.thickness))}
}

func (a *averaging) fromGround() float64 {
	if a.from == 0 {
		return math.NaN()
	}
	return a.over(0, a.thickness)
}

func (a *averaging) fromFoundation() float64 {
	f := a.Claim.Stated.Foundation
	if !f.Known || same(f.Value, a.from) {
		return math.NaN()
	}
	return a.over(f.Value, a.thickness)
}

func (a *averaging) datumEnd() float64 {
	if a.from == 0 || a.thickness <= a.from {
		return math.NaN()
	}
	return a.over(a.from, a.thickness-a.from)
}

// otherDatum is the datum between ground level and a deep basement, to a tenth
// of a metre, from which the average comes out as it is claimed; false where
// there is none.
func (a *averaging) otherDatum(claim Number) (float64, bool) {
	const deepest = 100                // tenths of a metre
	for _, step := range []int{5, 1} { // datums are stated to half a metre first
		for k := step; k <= deepest; k += step {
			from := float64(k) / 10
			if math.Abs(from-a.from) > 0.05 && fits(claim, a.over(from, a.thickness)) {
				return from, true
			}
		}
	}
	return 0, false
}

// meanTo is the arithmetic mean by thickness from the datum to a depth, of a
// profile that reaches there.
func (a *averaging) meanTo(to float64) float64 {
	sum := 0.0
	for _, l := range a.all {
		top, bottom := max(l.Top, a.from), min(l.Bottom, to)
		if bottom > top {
			sum += (bottom - top) * (l.VsAt(top) + l.VsAt(bottom)) / 2
		}
	}
	if end := a.all[len(a.all)-1].Bottom; end < to-vs30.Touching || to <= a.from {
		return math.NaN()
	}
	return sum / (to - a.from)
}

// sum adds f of every row of the working.
func (a *averaging) sum(f func(r vs30.Row) float64) float64 {
	total := 0.0
	for _, r := range a.working.Rows {
		total += f(r)
	}
	return total
}

// meanVelocity is the mean by thickness inside one row.
func (a *averaging) meanVelocity(r vs30.Row) float64 {
	if r.Layer < len(a.all) {
		if l := a.all[r.Layer]; l.Gradient() {
			return (l.VsAt(r.Top) + l.VsAt(r.Bottom)) / 2
		}
	}
	return r.Vs
}

func (a *averaging) thicknessMean() float64 {
	return a.sum(func(r vs30.Row) float64 { return r.Thickness * a.meanVelocity(r) }) / a.thickness
}

func (a *averaging) geometricMean() float64 {
	return math.Exp(a.sum(func(r vs30.Row) float64 { return r.Thickness * math.Log(r.Vs) }) / a.thickness)
}

func (a *averaging) plainMean() float64 {
	return a.sum(func(r vs30.Row) float64 { return r.Vs }) / float64(len(a.working.Rows))
}

func (a *averaging) plainHarmonic() float64 {
	return float64(len(a.working.Rows)) / a.sum(func(r vs30.Row) float64 { return 1 / r.Vs })
}

func (a *averaging) last() vs30.Row { return a.working.Rows[len(a.working.Rows)-1] }

func (a *averaging) withoutLast() float64 {
	if len(a.working.Rows) < 2 {
		return math.NaN()
	}
	return (a.last().Top - a.from) / (a.working.Time - a.last().Time)
}

func (a *averaging) withoutLastTime() float64 {
	if len(a.working.Rows) < 2 {
		return math.NaN()
	}
	return a.thickness / (a.working.Time - a.last().Time)
}

func (a *averaging) withoutFirst() float64 {
	if len(a.working.Rows) < 2 {
		return math.NaN()
	}
	r := a.working.Rows[0]
	return (a.thickness - r.Thickness) / (a.working.Time - r.Time)
}

func (a *averaging) withoutFirstTime() float64 {
	if len(a.working.Rows) < 2 {
		return math.NaN()
	}
	return a.thickness / (a.working.Time - a.working.Rows[0].Time)
}

func (a *averaging) wholeProfile() float64 {
	return a.over(a.from, a.Entry.Profile.DepthModelled()-a.from)
}

// cut is the layer that the averaging depth cuts, and the time through all of
// it; false where there is none, or it has no bottom.
func (a *averaging) cut() (r vs30.Row, bottom, time float64, ok bool) {
	r = a.last()
	if r.Layer >= len(a.all) {
		return r, 0, 0, false
	}
	l := a.all[r.Layer]
	if l.HalfSpace() || l.Bottom <= r.Bottom+vs30.Touching {
		return r, 0, 0, false
	}
	time, err := vs30.TravelTime(a.all, r.Top, l.Bottom)
	return r, l.Bottom, time, err == nil
}

func (a *averaging) cutLayer() float64 {
	r, _, time, ok := a.cut()
	if !ok {
		return math.NaN()
	}
	return a.thickness / (a.working.Time - r.Time + time)
}

func (a *averaging) cutLeftOut() float64 {
	if _, _, _, ok := a.cut(); !ok {
		return math.NaN()
	}
	return a.withoutLast()
}

func (a *averaging) gradientBy(f func(top, bottom float64) float64) float64 {
	any := false
	time := a.sum(func(r vs30.Row) float64 {
		if r.Layer >= len(a.all) || !a.all[r.Layer].Gradient() {
			return r.Time
		}
		any = true
		l := a.all[r.Layer]
		return r.Thickness / f(l.VsAt(r.Top), l.VsAt(r.Bottom))
	})
	if !any {
		return math.NaN()
	}
	return a.thickness / time
}

func (a *averaging) gradientTop() float64 {
	return a.gradientBy(func(top, _ float64) float64 { return top })
}

func (a *averaging) gradientMean() float64 {
	return a.gradientBy(func(top, bottom float64) float64 { return (top + bottom) / 2 })
}

func (a *averaging) atDepth() float64 { return a.last().Vs }

func (a *averaging) ofVp() float64 {
	time := a.sum(func(r vs30.Row) float64 {
		if r.Layer >= len(a.all) || !a.all[r.Layer].Has(profile.GivenVp) {
			return math.NaN()
		}
		return r.Thickness / a.all[r.Layer].Vp
	})
	return a.thickness / time
}

func (a *averaging) roundedTimes() float64 {
	time := a.sum(func(r vs30.Row) float64 { return math.Round(r.Time*1000) / 1000 })
	if time <= 0 {
		return math.NaN()
	}
	return a.thickness / time
}

// coarser reports whether a claim is the right value rounded to a coarser
// step than the claim is printed to, and which.
func coarser(claim Number, right float64) (string, bool) {
	factor := claim.Unit.Factor
	for _, step := range []float64{1, 5, 10, 50, 100} {
		if step*factor <= 2*claim.Half*(1+noise) {
			continue
		}
		if same(math.Round(right/factor/step)*step*factor, claim.Value) {
			return short(step, 0) + " " + claim.Unit.Name, true
		}
	}
	return "", false
}

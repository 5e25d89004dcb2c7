package siteclass

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// groundAbove returns the ground between the datum and the first depth from
// which every velocity, as far down as the profile goes, satisfies the
// term's lower bound.
func (r *ruling) groundAbove(t *Term) cover {
	return coverAbove(r.layers, r.datum, 2*profile.MaxDepth, t.Range.Lower, t.Unit)
}

// averageAbove averages over the ground above the rock, over no more than
// most m of it. Rock from the datum down has nothing above it; its own
// average is taken, as deep as it is known, to most.
func (r *ruling) averageAbove(rock cover, most float64) error {
	switch {
	case !rock.found:
		return r.averageTo(most, "no rock above that depth")
	case rock.thickness() == 0:
		depth := min(most, r.layers[len(r.layers)-1].Bottom-r.datum)
		err := r.averageTo(depth, "")
		r.over = "velocity of the rock over " + r.length(depth)
		r.note("no-cover", "the rock is at the datum and nothing lies above it; the average shown is that of the rock over %s", r.length(depth))
		return err
	}
	return r.averageTo(min(most, rock.thickness()), "")
}

// averageTo averages over depth m below the datum and says so where the
// decision speaks of the average.
func (r *ruling) averageTo(depth float64, why string) error {
	err := r.averageOver(depth)
	if short, ok := err.(*shortError); ok && why != "" {
		short.text += "; " + why + " was reached"
	}
	r.over = r.code.Parameter + " over " + r.length(depth)
	return err
}

// known returns how far below the datum, in m, the profile is known not to be
// the ground that was looked for: to the end of its layers, or to the top of
// its half-space, and in any case as far as it was averaged.
func (r *ruling) known() float64 {
	last := &r.layers[len(r.layers)-1]
	end := last.Bottom
	if last.HalfSpace() {
		end = last.Top
	}
	return max(end-r.datum, r.thickness)
}

// depthOf is the thickness of the ground above the rock as the rules ask for
// it; where no rock was reached, it is more than what is known.
func (r *ruling) depthOf(rock cover, of, text string) Found {
	if rock.found {
		return Found{Of: of, Text: text, Value: rock.thickness(), Unit: profile.Metre.Name}
	}
	return Found{Of: of, Text: text + ", not reached above", Value: r.known(), Unit: profile.Metre.Name, AtLeast: true}
}

// averageOf is the average as the rules ask for it.
func (r *ruling) averageOf(of string) Found {
	return Found{Of: of, Text: r.over, Value: r.d.Velocity, Unit: profile.MetrePerSecond.Name}
}

// notReached notes that no rock was found, and lists as not assessed what a
// deeper rock would make of the class.
func (r *ruling) notReached(found []Found, rock string) {
	for i := range found {
		if f := &found[i]; f.AtLeast {
			r.note("rock-not-reached", "no %s was reached; %s is more than %s", rock, f.Of, r.length(f.Value))
		}
	}
	r.unassessed = append(r.unassessed, r.beyondReach(found)...)
}

// columnPeriod is a formula for the period of the ground between two depths.
type columnPeriod struct {
	// of returns the period in s of the ground between the depths from and to
	// (m below ground level).
	of func(layers []profile.Layer, from, to float64) (float64, error)
	// carry returns the depth in m below the datum at which the period comes
	// to enough s, if at depth m it is t s and the ground goes on with v m/s.
	carry func(t, depth, v, enough float64) float64
}

// quarterWave is T = 4·Σh/v.
var quarterWave = columnPeriod{
	of:    vs30.QuarterWavePeriod,
	carry: func(t, depth, v, enough float64) float64 { return depth + (enough-t)*v/4 },
}

// passing is how far, in parts of it, ground that goes on below a profile is
// followed to be beyond the last bound of a code and not at it.
const passing = 1.01

// soilColumn is the ground whose period gives the class.
type soilColumn struct {
	thickness float64 // m, from the datum
	period    float64 // s
	atLeast   bool    // the base was not reached, and the period is more than that
}

// columnToBase returns the ground above the base layer with its period. The
// period of ground that ends above the base grows with every further metre;
// such ground will do only if its period is already more than last s, the
// last bound of the code. A half-space slower than the base goes on until it
// is. Otherwise the error is that of a profile too short, and says down to
// which depth the last velocity would have to go on.
func (r *ruling) columnToBase(base *Term, last float64, formula columnPeriod) (soilColumn, error) {
	above := r.groundAbove(base)
	if above.found {
		return r.columnDown(above.thickness(), formula, false)
	}
	end := &r.layers[len(r.layers)-1]
	to, v := end.Bottom, end.VsAt(end.Bottom)
	if end.HalfSpace() {
		to, v = max(end.Top, r.datum), end.Vs
	}
	if to <= r.datum && !end.HalfSpace() {
		return soilColumn{}, r.tooShort(&vs30.ShortError{Reached: to, Needed: r.datum})
	}
	c, err := r.columnDown(to-r.datum, formula, true)
	if err != nil || c.period > last*(1+beside) {
		return c, err
	}
	enough := formula.carry(c.period, c.thickness, v, last*passing)
	if end.HalfSpace() {
		return r.columnDown(enough, formula, true)
	}
	return c, r.noBase(to, r.datum+enough, base)
}

// columnDown is the ground down to thickness m below the datum.
func (r *ruling) columnDown(thickness float64, formula columnPeriod, atLeast bool) (soilColumn, error) {
	c := soilColumn{thickness: thickness, atLeast: atLeast}
	if thickness == 0 {
		return c, nil
	}
	var err error
	c.period, err = formula.of(r.layers, r.datum, r.datum+thickness)
	return c, err
}

// noBase is the error of a profile that ends above the base.
func (r *ruling) noBase(reached, needed float64, base *Term) error {
	err := r.tooShort(&vs30.ShortError{Reached: reached, Needed: needed}).(*shortError)
	err.text += ": no " + base.Text + " was reached, and from there on the last class would be certain"
	return err
}

// averageColumn makes the average over the column the decision's velocity.
func (r *ruling) averageColumn(c soilColumn) error {
	if c.thickness > 0 {
		return r.averageTo(c.thickness, "")
	}
	return r.averageAbove(cover{from: r.datum, bottom: r.datum, found: true}, rockLook)
}

// rockLook is how many m of rock at the datum are averaged where the code
// sets no depth. Our choice.
const rockLook = 30

// periodOf is the period of the column as the rules ask for it.
func (c soilColumn) periodOf(of, text string) Found {
	if c.atLeast {
		text += ", of which the base was not reached,"
	}
	return Found{Of: of, Text: text, Value: c.period, Unit: second.Name, AtLeast: c.atLeast}
}

// noteColumn notes a base that was not reached.
func (r *ruling) noteColumn(c soilColumn, base *Term) {
	if c.atLeast {
		r.note("base-not-reached", "no %s was reached; the period is counted down to %s below the datum and is more than that",
			base.Text, r.length(c.thickness))
	}
	r.use(base.Standing, "%s (%s)", base.Text, base.Clause)
}

// firstDepth returns the depth in m below ground level, from the depth from
// on, at which the velocity first satisfies the bound, whether or not it
// falls again below; +Inf if it nowhere does.
func firstDepth(layers []profile.Layer, from float64, bound Limit, u profile.Unit) float64 {
	for i := range layers {
		l := &layers[i]
		if l.Bottom-from <= vs30.Touching {
			continue
		}
		top := max(l.Top, from)
		v0, v1 := l.VsAt(top), l.VsAt(l.Bottom)
		switch {
		case bound.holds(v0/u.Factor, true):
			return top
		case bound.holds(v1/u.Factor, true):
			return top + (l.Bottom-top)*min(1, (bound.Value*u.Factor-v0)/(v1-v0))
		}
	}
	return math.Inf(1)
}

// slowest returns the slowest velocity in m/s between two depths (m below
// ground level), and +Inf if no layer lies there.
func slowest(layers []profile.Layer, from, to float64) float64 {
	v := math.Inf(1)
	for i := range layers {
		l := &layers[i]
		top, bottom := max(l.Top, from), min(l.Bottom, to)
		if bottom-top > vs30.Touching {
			v = min(v, l.VsAt(top), l.VsAt(bottom))
		}
	}
	return v
}

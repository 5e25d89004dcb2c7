package siteclass

import (
	"fmt"
	"math"
	"strings"

	"shearbook/profile"
	"shearbook/vs30"
)

// assess tests a condition of the ground: by what the site states, or else by
// what its layers state themselves.
func (r *ruling) assess(c *Condition) Outcome {
	o := c.test(&r.site.Ground)
	if o.State != NotAssessed || c.Fact < Peat || c.Fact > ThickClay {
		return o
	}
	if own, ok := r.fromLayers(c); ok {
		return own
	}
	return o
}

// extent is what the layers say of a deposit.
type extent struct {
	meets   float64 // m that meet every limit
	unknown float64 // m that do not state enough to tell
	stated  bool    // at least one layer states what tells
}

// fromLayers adds up the layers that meet the limits of a condition by what
// they state themselves: peat by the word in their description, clay by PI,
// water content and strength. ok is false where they state nothing, or the
// limits are none that a layer could state. Ground that states too little
// leaves the condition not assessed unless the rest of it settles it. A note
// says so, but where nothing at all meets the limits, which the step tells.
func (r *ruling) fromLayers(c *Condition) (o Outcome, ok bool) {
	limit, ok := c.limitOn(Thickness)
	states := r.given&(profile.GivenPI|profile.GivenWaterContent|profile.GivenSu) != 0
	if c.Fact == Peat {
		states = r.named
	}
	if !ok || !states {
		return o, false
	}
	f := r.find(c, limit)
	if !f.stated {
		return o, false
	}
	steps, holds := limit.compare(f.meets, c.Fact.String()+", total thickness by the layers", c.Clause)
	o.Steps, o.State = steps, NotMet
	text := fmt.Sprintf("%s: by what the layers themselves state, %s of them meet the limits", c.Fact, metres(f.meets))
	switch {
	case holds:
		o.State = Met
	case f.unknown > 0 && limit.Range.Contains((f.meets+f.unknown)/limit.Unit.Factor):
		o.State, o.Steps = NotAssessed, nil
		text += ", and " + unknownGround(f.unknown) + " does not tell"
	}
	if f.meets > 0 || o.State == NotAssessed {
		o.Notes = []profile.Note{note("from-layers", text)}
	}
	return o, true
}

// unknownGround names ground that states too little, by its thickness in m.
func unknownGround(m float64) string {
	if math.IsInf(m, 1) {
		return "the half-space"
	}
	return "the rest, " + metres(m) + ","
}

// find adds up the layers between the datum and the averaging depth; to
// their end where the limit is no smaller than that depth. Of a half-space no
// more counts than lies above the averaging depth.
func (r *ruling) find(c *Condition, limit Criterion) extent {
	averaged := r.from + r.code.Depth
	bottom := averaged
	if limit.Range.Lower.Value*limit.Unit.Factor >= r.code.Depth {
		bottom = math.Inf(1)
	}
	var f extent
	for i := range r.layers {
		l := &r.layers[i]
		end := min(l.Bottom, bottom)
		if math.IsInf(end, 1) {
			end = averaged
			f.unknown = math.Inf(1)
		}
		d := end - max(l.Top, r.from)
		if d <= vs30.Touching {
			continue
		}
		switch r.meets(c, l) {
		case Met:
			f.meets, f.stated = f.meets+d, true
		case NotMet:
			f.stated = true
		default:
			f.unknown += d
		}
	}
	return f
}

// meets says whether a layer meets the limits of a condition other than that
// on the thickness, by what it states.
func (r *ruling) meets(c *Condition, l *profile.Layer) State {
	if c.Fact == Peat {
		if strings.Contains(strings.ToLower(l.Soil), "peat") {
			return Met
		}
		return NotAssessed // a description need not say that there is none
	}
	if !r.code.Averaging.Cohesionless.Empty() && l.Has(profile.GivenPI) && r.code.Averaging.Cohesionless.Contains(l.PI) {
		return NotMet
	}
	asked, unknown := false, false
	for _, k := range c.Limits {
		if k.Property == Thickness {
			continue
		}
		v, given := propertyOf(l, k.Property)
		if given && !k.Range.Contains(v/k.Unit.Factor) {
			return NotMet
		}
		asked, unknown = true, unknown || !given
	}
	if !asked || unknown {
		return NotAssessed
	}
	return Met
}

// propertyOf returns a property of a layer in SI, and false if the layer does
// not state it.
func propertyOf(l *profile.Layer, p Property) (float64, bool) {
	switch p {
	case PlasticityIndex:
		return l.PI, l.Has(profile.GivenPI)
	case WaterContent:
		return l.WaterContent, l.Has(profile.GivenWaterContent)
	case Strength:
		return l.Su, l.Has(profile.GivenSu)
	}
	return 0, false
}

package siteclass

import (
	"math"

	"shearbook/profile"
	"shearbook/vs30"
)

// underfoot says what the layers inside the averaging depth are worth: their
// basis, whether they are an extension, lie below what the survey reached,
// are the half-space, or slow down with depth.
func (r *ruling) underfoot() {
	r.basis()
	r.extension()
	r.belowReach()
	r.halfSpace()
	r.reversals()
}

// survey returns the survey of the profile, if there is one.
func (r *ruling) survey() profile.Survey {
	if r.site.Profile == nil {
		return profile.Survey{}
	}
	return r.site.Profile.Survey
}

// ownEnd returns the depth in m below ground level at which the profile's own
// layers end, +Inf if they do not.
func (r *ruling) ownEnd() float64 {
	own := r.layers
	if r.site.Profile != nil && len(r.site.Profile.Layers) > 0 {
		own = r.site.Profile.Layers
	}
	return own[len(own)-1].Bottom
}

// extended reports whether the average goes on below the profile's own
// layers.
func (r *ruling) extended() bool {
	return r.site.Extended && r.bottom()-r.ownEnd() > vs30.Touching
}

// basis gives the decision the common basis of the velocities, and notes
// where it is not one, or a correlation.
func (r *ruling) basis() {
	var seen [profile.Correlated + 1]bool
	kinds := 0
	for i := range r.layers {
		l := &r.layers[i]
		if min(l.Bottom, r.bottom())-max(l.Top, r.datum) <= vs30.Touching || l.Top >= r.ownEnd() {
			continue
		}
		b := l.Basis
		if b == profile.BasisNotStated {
			b = r.survey().Basis
		}
		if !seen[b] {
			seen[b], kinds = true, kinds+1
			r.d.Basis = b.String()
		}
	}
	if kinds > 1 {
		r.d.Basis = "mixed"
	}
	r.noteBasis(seen[profile.Correlated], kinds > 1)
	if r.extended() {
		r.d.Basis = "extended"
	}
}

func (r *ruling) noteBasis(correlated, mixed bool) {
	switch {
	case correlated && mixed:
		r.say("correlated", "some of the velocities are correlated from other tests, not measured; "+r.code.Correlated)
	case correlated:
		r.say("correlated", "the velocities are correlated from other tests, not measured; "+r.code.Correlated)
	case mixed:
		r.say("mixed-basis", "the velocities averaged are not all known in the same way")
	}
}

// extension notes what the code says of a profile carried on below its end.
func (r *ruling) extension() {
	if r.extended() && r.code.Short != "" {
		r.say("extension-rule", "the profile ends "+r.length(r.ownEnd())+" below ground level; "+r.code.Short)
	}
}

// belowReach notes where the average uses layers of the profile below the
// depth that the survey states it reached.
func (r *ruling) belowReach() {
	reached := r.survey().DepthReached
	if used := min(r.bottom(), r.ownEnd()); reached > 0 && used-reached > vs30.Touching {
		r.say("below-depth-reached", "the survey reached "+metres(reached)+" below ground level; the average uses the profile below that")
	}
}

// halfSpace notes where the average uses the half-space.
func (r *ruling) halfSpace() {
	last := &r.layers[len(r.layers)-1]
	if used := r.bottom() - max(last.Top, r.datum); last.HalfSpace() && used > vs30.Touching && !r.extended() {
		from := "from ground level on"
		if last.Top > 0 {
			from = "from " + metres(last.Top) + " below ground level on"
		}
		r.say("half-space", from+", the ground averaged is the half-space, "+short(last.Vs)+" m/s")
	}
}

// reversals notes where the velocity falls with depth inside the average.
func (r *ruling) reversals() {
	text, first := AppendReversal(nil, r.layers, r.datum, r.bottom())
	if first >= 0 {
		r.d.Notes = append(r.d.Notes, profile.Note{ID: "reversal", Text: string(text), Place: r.place(&r.layers[first])})
	}
}

// reach returns how far below the datum, in m, the survey itself goes.
func (r *ruling) reach() float64 {
	end := r.ownEnd()
	if reached := r.survey().DepthReached; reached > 0 {
		end = math.Min(end, reached)
	}
	return max(0, end-r.datum)
}

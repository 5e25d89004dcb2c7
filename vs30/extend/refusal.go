package extend

import (
	"fmt"
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// Reason is why a relation refuses, in one or two words that fit a table.
type Reason string

// The reasons.
const (
	NothingToAdd   Reason = "reaches"         // the profile reaches the averaging depth
	NoProfile      Reason = "no profile"      // there are no layers below the datum
	OtherDatum     Reason = "datum"           // holds from the ground surface only
	OtherThickness Reason = "averaging depth" // does not hold for this one
	TooShallow     Reason = "too shallow"
	TooDeep        Reason = "too deep" // the profile ends below the last row of the table
	Reversed       Reason = "reversal" // the velocity falls at the bottom of the profile
	HardRock       Reason = "hard rock"
	NoFit          Reason = "no fit"      // the law cannot be fitted to the profile
	Implausible    Reason = "implausible" // the estimate contradicts what was measured
)

// Refusal is the error of a relation that does not hold for a profile.
type Refusal struct {
	Relation string // ID
	Reason   Reason
	Text     string // why, in words
}

// Error returns why.
func (e *Refusal) Error() string { return e.Text }

func (r *Relation) refuse(why Reason, format string, args ...any) *Refusal {
	return &Refusal{Relation: r.ID, Reason: why, Text: fmt.Sprintf(format, args...)}
}

// look returns what a relation estimates from, or why it does not hold.
func (r *Relation) look(layers []profile.Layer, from, thickness float64) (*ground, *Refusal) {
	if refusal := r.question(from, thickness); refusal != nil {
		return nil, refusal
	}
	g := &ground{layers: layers, from: from, thickness: thickness}
	if len(layers) > 0 {
		g.depth = layers[len(layers)-1].Bottom - from
	}
	if !(g.depth > vs30.Touching) {
		return nil, r.refuse(NoProfile, "there is no profile below the datum, %.4g m below ground level", from)
	}
	if thickness-g.depth <= vs30.Touching {
		return nil, r.refuse(NothingToAdd, "the profile reaches the averaging depth")
	}
	var err error
	if g.average, err = vs30.Average(layers, from, g.depth); err != nil {
		return nil, r.refuse(NoProfile, "%v", err)
	}
	return g, r.holds(g)
}

// question refuses a datum or an averaging depth that the relation is not for.
func (r *Relation) question(from, thickness float64) *Refusal {
	switch {
	case !(from >= 0) || math.IsInf(from, 0):
		return r.refuse(OtherDatum, "a datum of %v m is not a depth", from)
	case !(thickness > 0) || math.IsInf(thickness, 0):
		return r.refuse(OtherThickness, "an averaging depth of %v m is not one", thickness)
	case r.Surface && from > vs30.Touching:
		return r.refuse(OtherDatum, "holds for averages from the ground surface, not from %.4g m below it", from)
	case r.Over != nil && !slices.ContainsFunc(r.Over, func(z float64) bool { return same(z, thickness) }):
		return r.refuse(OtherThickness, "holds for an average over %s, not over %.4g m", metres(r.Over), thickness)
	}
	return nil
}

// holds refuses a profile that the relation is not for.
func (r *Relation) holds(g *ground) *Refusal {
	if r.MinDepth-g.depth > vs30.Touching {
		return r.refuse(TooShallow, "the profile reaches %.4g m, at least %.4g m are asked for%s", g.depth, r.MinDepth, r.shallow)
	}
	if r.MaxDepth > 0 && g.depth-r.MaxDepth > vs30.Touching {
		return r.refuse(TooDeep, "the profile reaches %.4g m, deeper than the %.4g m that the relation goes up to; "+
			"so near the averaging depth the constant velocity does as well", g.depth, r.MaxDepth)
	}
	if r.MaxVelocity > 0 && g.average > r.MaxVelocity {
		return r.refuse(HardRock, "the average of %.4g m/s is above %.4g m/s, hard rock, which has to be measured",
			g.average, r.MaxVelocity)
	}
	if fall, falls := fallAtBottom(g.layers, g.from); falls && r.refuses {
		return r.refuse(Reversed, "the velocity falls at the bottom of the profile, from %.4g to %.4g m/s at %.4g m; "+
			"the relation takes it to grow", fall.Above, fall.Below, fall.Depth)
	}
	return nil
}

// doubts returns the notes of an estimate that is made nevertheless.
func (r *Relation) doubts(g *ground) []profile.Note {
	var notes []profile.Note
	if g.average < r.MinVelocity {
		notes = append(notes, profile.Note{ID: "slow-ground", Text: fmt.Sprintf(
			"the average of %.4g m/s is below %.4g m/s; whether the data behind the relation hold ground so slow is not known here",
			g.average, r.MinVelocity)})
	}
	if fall, falls := fallAtBottom(g.layers, g.from); falls {
		notes = append(notes, profile.Note{ID: "falling-at-the-bottom", Text: "the velocity falls at the bottom of the profile, from " +
			four(fall.Above) + " to " + four(fall.Below) + " m/s at " + four(fall.Depth) + " m; the ground below may be slower still"})
	}
	return notes
}

// scatter is the part of a velocity up to which a change across an interface
// is taken for none, so that the last few metres of a log with a value every
// metre do not decide. It is ours.
const scatter = 0.05

// fallAtBottom returns the lowest change of velocity by more than 5 % below
// depth from, if it is a fall.
func fallAtBottom(layers []profile.Layer, from float64) (vs30.Reversal, bool) {
	for i := len(layers) - 1; i >= 0; i-- {
		l := &layers[i]
		if top := max(l.Top, from); differs(l.VsAt(top), l.VsAt(l.Bottom)) {
			return change(i, top, l.VsAt(top), l.VsAt(l.Bottom))
		}
		if i == 0 || l.Top-from <= vs30.Touching {
			break
		}
		u := &layers[i-1]
		if above := u.VsAt(u.Bottom); differs(above, l.Vs) {
			return change(i, l.Top, above, l.Vs)
		}
	}
	return vs30.Reversal{}, false
}

// FallsAtBottom reports whether the lowest change of velocity by more than 5 %
// below depth from (m below ground level) is a fall: what the doubt
// falling-at-the-bottom of an estimate says in words.
func FallsAtBottom(layers []profile.Layer, from float64) bool {
	_, falls := fallAtBottom(layers, from)
	return falls
}

func differs(above, below float64) bool { return math.Abs(below-above) > scatter*above }

func change(layer int, depth, above, below float64) (vs30.Reversal, bool) {
	return vs30.Reversal{Layer: layer, Depth: depth, Above: above, Below: below}, below < above
}

// same reports whether two depths in m touch.
func same(a, b float64) bool { return math.Abs(a-b) <= vs30.Touching }

// metres writes depths: "30 m or 30.48 m".
func metres(depths []float64) string {
	text := ""
	for i, z := range depths {
		if i > 0 {
			text += " or "
		}
		text += fmt.Sprintf("%.4g m", z)
	}
	return text
}

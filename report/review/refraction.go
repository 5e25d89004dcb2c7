package review

import (
	"fmt"
	"math"
	"slices"

	"shearbook/profile"
	"shearbook/vs30"
)

// refractionRules are about what refraction can find. A head wave comes back
// from a layer only if it is faster than everything above it, and is seen
// only where it arrives first. Of horizontal layers the head wave along layer
// n arrives at distance x after
//
//	t(x) = x/Vn + 2 Σ hi √(Vn² − Vi²) / (Vn Vi),   i < n
//
// which is the equation that every textbook of the method begins with.
func refractionRules() []Rule {
	return []Rule{
		{ID: "refraction-reversal", Weight: Answer, check: refractionReversal,
			Summary: "A refraction profile has a layer slower than one above it, which refraction cannot find",
			Source:  "Snell's law: no head wave comes back from a slower layer; ASTM D5777, from memory"},
		{ID: "hidden-layer", Weight: Explain, check: hiddenLayer,
			Summary: "A refraction profile has a layer whose head wave arrives first nowhere, so that refraction alone cannot have shown it",
			Source:  "intercept times of horizontal layers; blind zone, ASTM D5777, from memory"},
		{ID: "few-receivers", Weight: Explain, check: fewReceivers, Practice: true,
			Summary: "A layer of a refraction profile arrives first over less than a number of receivers",
			Source:  "intercept times of horizontal layers; the number of receivers is common practice",
			Limits:  []Limit{{"receivers", 2, "", "that must see the layer first", 0}}},
		{ID: "refraction-spread", Weight: Explain, check: refractionSpread,
			Summary: "A refraction spread is short against the depth it is used for",
			Source:  "ASTM D5777, from memory: three to five times the depth of interest",
			Limits:  []Limit{{"times", 3, "", "the depth that is used", 0}}},
	}
}

// eachRefraction calls f for every profile of a refraction survey.
func (x *examination) eachRefraction(f func(*Entry)) {
	x.each(func(e *Entry) {
		if e.method() == refraction && !e.Profile.NoVelocity && len(e.Profile.Layers) <= maxCompared {
			f(e)
		}
	})
}

// refracted are the layers with the velocity of the waves that were refracted
// in place of Vs: that of P waves where the method says so and every layer
// states it.
func (e *Entry) refracted() []profile.Layer {
	layers := e.Profile.Layers
	if !pRefraction(e.methodText()) || slices.ContainsFunc(layers, func(l profile.Layer) bool { return !l.Has(profile.GivenVp) || l.Vp <= 0 }) {
		return layers
	}
	layers = slices.Clone(layers)
	for i := range layers {
		layers[i].Vs, layers[i].VsBottom = layers[i].Vp, 0
	}
	return layers
}

// pRefraction reports whether a method is refraction of P waves: "P-wave
// refraction", "seismic refraction (P)", and not "P and S refraction".
func pRefraction(method string) bool {
	words := wordSet(method)
	return (words["p"] || words["vp"] || words["compressional"]) && !words["s"] && !words["sh"] && !words["shear"]
}

func refractionReversal(x *examination) {
	x.eachRefraction(func(e *Entry) {
		falls := vs30.Reversals(e.refracted(), 0, math.Inf(1))
		if len(falls) == 0 {
			return
		}
		r := falls[0]
		x.add(e.layer(r.Layer), fmt.Sprintf("the velocity falls from %s to %s at %s%s; refraction finds no layer slower than one above it",
			speed(r.Above), speed(r.Below), metres(r.Depth), andMore(len(falls)-1)), speed(r.Below), "")
	})
}

// branch is where the wave of one layer arrives first.
type branch struct {
	layer      int
	start, end float64 // m from the shot; end is +Inf for the last
}

// arrival is a straight line of travel time: t = intercept + x/velocity.
type arrival struct {
	layer               int
	velocity, intercept float64
}

// arrivals are the direct wave and the head waves of horizontal layers with
// constant velocity, those of layers that are faster than all above alone.
func arrivals(layers []profile.Layer) []arrival {
	var lines []arrival
	fastest := 0.0
	for n, l := range layers {
		if l.Vs <= fastest {
			continue
		}
		fastest = l.Vs
		t := 0.0
		for _, above := range layers[:n] {
			t += 2 * above.Thickness() * math.Sqrt(max(0, l.Vs*l.Vs-above.Vs*above.Vs)) / (l.Vs * above.Vs)
		}
		lines = append(lines, arrival{n, l.Vs, t})
	}
	return lines
}

// firstArrivals are the stretches over which each wave arrives first, in the
// order of the distance: the lower envelope of the lines.
func firstArrivals(layers []profile.Layer) []branch {
	lines := arrivals(layers)
	var out []branch
	at, x := 0, 0.0
	for at < len(lines) {
		next, cross := -1, math.Inf(1)
		for k := at + 1; k < len(lines); k++ {
			where := (lines[k].intercept - lines[at].intercept) / (1/lines[at].velocity - 1/lines[k].velocity)
			if where <= cross { // of two at one place the faster goes on
				next, cross = k, where
			}
		}
		out = append(out, branch{lines[at].layer, x, cross})
		if next < 0 {
			break
		}
		at, x = next, cross
	}
	return out
}

func hiddenLayer(x *examination) {
	x.eachRefraction(func(e *Entry) {
		layers := e.refracted()
		seen := map[int]bool{}
		for _, b := range firstArrivals(layers) {
			seen[b.layer] = true
		}
		for _, a := range arrivals(layers) {
			if !seen[a.layer] {
				l := layers[a.layer]
				x.add(e.layer(a.layer), fmt.Sprintf("the head wave of the layer from %s to %s at %s arrives first nowhere: it lies in the blind zone of the method",
					metres(l.Top), metres(l.Bottom), speed(l.Vs)), fmt.Sprintf("%s of %s", metres(l.Thickness()), speed(l.Vs)), "no first arrival")
			}
		}
	})
}

func fewReceivers(x *examination) {
	x.eachRefraction(func(e *Entry) {
		spacing, ok := length(e.Profile, receiverSpacing...)
		if !ok {
			return
		}
		end, limited := length(e.Profile, spreadLength...)
		if !limited {
			end = math.Inf(1)
		}
		for _, b := range firstArrivals(e.refracted()) {
			seen := min(b.end, end) - b.start
			if need := x.limit("receivers") * spacing; seen < need {
				x.add(e.layer(b.layer), fmt.Sprintf("the wave of this layer arrives first over %s of the spread, fewer than %s receivers at %s",
					metres(max(0, seen)), short(x.limit("receivers"), 0), metres(spacing)), "", metres(max(0, seen)))
			}
		}
	})
}

func refractionSpread(x *examination) {
	x.eachProfile(func(e *Entry, from, to float64) {
		spread, ok := length(e.Profile, spreadLength...)
		if need := x.limit("times") * to; ok && e.method() == refraction && spread < need {
			x.add(e.at(), fmt.Sprintf("a spread of %s is short for a depth of %s: %s times the depth is %s", metres(spread), metres(to), short(x.limit("times"), 2), metres(need)),
				metres(spread), metres(need))
		}
	})
}

// andMore words how many more places there are.
func andMore(n int) string {
	if n == 0 {
		return ""
	}
	return ", and falls at " + profile.Plural(n, "more depth")
}

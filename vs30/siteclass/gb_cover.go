package siteclass

import (
	"math"
	"slices"

	"shearbook/profile"
)

// coverGB returns the cover by clause 4.1.4 of GB 50011: the ground above the
// first depth at which either of two rules ends it.
func (r *ruling) coverGB() cover {
	hard, contrast := r.hardTop(), r.contrastTop()
	c := cover{from: r.datum, bottom: min(hard, contrast), found: true}
	switch {
	case math.IsInf(c.bottom, 1):
		return cover{from: r.datum, bottom: r.layers[len(r.layers)-1].Bottom}
	case contrast < hard:
		r.contrastSteps(contrast)
	default:
		r.hardSteps(hard)
	}
	c.stiff = r.slowestRock(c.bottom)
	r.hardInside(c.bottom)
	return c
}

// hardTop returns the depth in m below ground level of the first ground
// faster than 500 m/s that has nothing slower than 500 m/s below it
// (4.1.4-1), +Inf if there is none.
func (r *ruling) hardTop() float64 {
	hard, below := r.code.term("hard"), r.code.term("below-hard")
	kept := r.groundAbove(below)
	if !kept.found {
		return math.Inf(1)
	}
	return firstDepth(r.layers, kept.bottom, hard.Range.Lower, hard.Unit)
}

// contrastTop returns the depth of the first layer top below 5 m at which the
// velocity is more than 2.5 times that of every layer above, where from there
// on nothing is slower than 400 m/s (4.1.4-2), +Inf if there is none.
func (r *ruling) contrastTop() float64 {
	contrast, depth := r.code.term("contrast"), r.code.term("contrast-depth")
	kept := r.groundAbove(r.code.term("contrast-stiff"))
	if !kept.found {
		return math.Inf(1)
	}
	fastest := 0.0
	for i := range r.layers {
		l := &r.layers[i]
		if l.Bottom <= r.datum {
			continue
		}
		deep := depth.Range.Contains((l.Top - r.datum) / depth.Unit.Factor)
		if deep && l.Top >= kept.bottom && contrast.Range.Contains(l.Vs/fastest) {
			return l.Top
		}
		fastest = max(fastest, l.VsAt(max(l.Top, r.datum)), l.VsAt(l.Bottom))
	}
	return math.Inf(1)
}

// hardSteps are the comparisons that ended the cover at hard ground.
func (r *ruling) hardSteps(top float64) {
	hard, below := r.code.term("hard"), r.code.term("below-hard")
	v := velocityAt(r.layers, top)
	if equal(v, hard.lower()) {
		v *= 1 + beside // it grows through the bound there
	}
	r.termStep(hard, v, "velocity at "+r.length(top)+", the end of the cover")
	r.termStep(below, slowest(r.layers, top, math.Inf(1)), "slowest velocity below "+r.length(top))
}

// contrastSteps are the comparisons that ended the cover at a layer much
// faster than those above.
func (r *ruling) contrastSteps(top float64) {
	fastest := 0.0
	for i := range r.layers {
		if l := &r.layers[i]; l.Bottom > r.datum && l.Top < top {
			fastest = max(fastest, l.VsAt(max(l.Top, r.datum)), l.VsAt(min(l.Bottom, top)))
		}
	}
	r.termStep(r.code.term("contrast-depth"), top-r.datum, "depth of the end of the cover")
	r.termStep(r.code.term("contrast"), velocityAt(r.layers, top)/fastest, "velocity at "+r.length(top)+" over the fastest above")
	r.termStep(r.code.term("contrast-stiff"), slowest(r.layers, top, math.Inf(1)), "slowest velocity from "+r.length(top)+" down")
}

// termStep holds a value in SI against a term.
func (r *ruling) termStep(t *Term, value float64, text string) {
	steps, _ := Criterion{Range: t.Range, Unit: t.Unit}.compare(value, text, t.Clause)
	r.d.Steps = append(r.d.Steps, steps...)
	r.use(t.Standing, "%s (%s)", t.Text, t.Clause)
}

// velocityAt returns the velocity in m/s just below a depth.
func velocityAt(layers []profile.Layer, z float64) float64 {
	for i := range layers {
		if l := &layers[i]; l.Bottom > z {
			return l.VsAt(max(l.Top, z))
		}
	}
	return 0
}

// slowestRock returns the slowest velocity in m/s from a depth on of the
// ground that counts as hard; the velocity at the depth where none does.
func (r *ruling) slowestRock(top float64) float64 {
	hard, v := r.code.term("hard"), math.Inf(1)
	for i := range r.layers {
		l := &r.layers[i]
		if l.Bottom <= top {
			continue
		}
		if slow := min(l.VsAt(max(l.Top, top)), l.VsAt(l.Bottom)); hard.Range.Contains(slow / hard.Unit.Factor) {
			v = min(v, slow)
		}
	}
	if math.IsInf(v, 1) {
		return velocityAt(r.layers, top)
	}
	return v
}

// hardInside notes a layer faster than 500 m/s inside the cover that is
// described as neither a boulder nor a volcanic interlayer.
func (r *ruling) hardInside(bottom float64) {
	for i := range r.layers {
		l := &r.layers[i]
		if l.Bottom > r.datum && l.Top < bottom && r.isHard(l) {
			r.note("hard-interlayer", "ground of %s at %s lies inside the cover and counts with its velocity; were it a boulder or lens it would count as the soil around it, were it a hard volcanic interlayer it would be taken out (4.1.4-3 and -4)",
				quantity(l.Vs, r.code.Unit), r.length(l.Top))
			return
		}
	}
}

// takeOut replaces boulders and lenses by the soil around them, and takes
// hard volcanic interlayers out, moving what lies below them up. Both are
// known by their description alone.
func (r *ruling) takeOut() {
	if !slices.ContainsFunc(r.layers, func(l profile.Layer) bool { return says(&l, hardWords...) }) {
		return
	}
	var layers []profile.Layer
	up := 0.0
	for i := range r.layers {
		l := r.layers[i]
		switch {
		case r.isVolcanic(&l):
			up += l.Thickness()
			r.note("volcanic-interlayer", "the %s at %s are a hard volcanic interlayer by their description and are taken out of the cover (4.1.4-4)",
				r.length(l.Thickness()), r.length(l.Top))
			r.use(OneSource, "hard volcanic interlayers are taken out of the cover (4.1.4-4)")
			continue
		case r.isBoulder(&l):
			l.Vs, l.VsBottom = r.around(i), 0
			r.note("boulder", "the %s at %s are a boulder or lens by their description and count as the soil around them, %s (4.1.4-3)",
				r.length(l.Thickness()), r.length(l.Top), quantity(l.Vs, r.code.Unit))
			r.use(OneSource, "boulders and lenses count as the soil around them (4.1.4-3)")
		}
		l.Top, l.Bottom = l.Top-up, l.Bottom-up
		layers = append(layers, l)
	}
	r.layers = layers
}

// hardWords describe boulders, lenses and volcanic interlayers.
var hardWords = []string{"boulder", "boulders", "lens", "volcanic"}

// isBoulder reports whether a layer is a hard boulder or lens.
func (r *ruling) isBoulder(l *profile.Layer) bool {
	return r.isHard(l) && says(l, "boulder", "boulders", "lens")
}

// isVolcanic reports whether a layer below the datum is a hard volcanic
// interlayer: with ground below that is not hard.
func (r *ruling) isVolcanic(l *profile.Layer) bool {
	return l.Top >= r.datum && r.isHard(l) && says(l, "volcanic") && !says(l, "boulder", "boulders", "lens") &&
		slowest(r.layers, l.Bottom, math.Inf(1)) < r.code.term("below-hard").lower()
}

// isHard reports whether a layer is faster than 500 m/s throughout.
func (r *ruling) isHard(l *profile.Layer) bool {
	hard := r.code.term("hard")
	return hard.Range.Contains(min(l.Vs, l.VsAt(l.Bottom)) / hard.Unit.Factor)
}

// around returns the velocity in m/s of the slower neighbour of layer i; its
// own where it has none.
func (r *ruling) around(i int) float64 {
	v := math.Inf(1)
	if i > 0 {
		v = r.layers[i-1].VsAt(r.layers[i-1].Bottom)
	}
	if i+1 < len(r.layers) {
		v = min(v, r.layers[i+1].Vs)
	}
	if math.IsInf(v, 1) {
		return r.layers[i].Vs
	}
	return v
}

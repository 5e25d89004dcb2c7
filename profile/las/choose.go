package las

import (
	"math"
	"slices"

	"shearbook/profile"
)

// agreement is how far two curves may differ, relative to each other, and
// still be one velocity in two forms: three digits printed.
const agreement = 0.005

// choose finds the curves that are Vs, Vp and density, now that their values
// are known, and tells what is wrong with the values of depth and Vs.
func (r *reader) choose() bool {
	r.tell(r.index)
	if r.vs == nil && !r.chooseShear() {
		return false
	}
	r.tell(r.vs)
	r.vp = r.mappedOr(r.vp, compression)
	r.rho = r.mappedOr(r.rho, bulk)
	for _, c := range []*curve{r.vs, r.vp, r.rho} {
		if c == nil {
			continue
		}
		c.dropNines(func(v float64, at spot) { r.rows.nothing(plain(v), at) })
	}
	r.sameUnit()
	if r.Count() > 0 {
		return false
	}
	if !slices.ContainsFunc(r.vs.values, func(v float64) bool { return !math.IsNaN(v) }) {
		return r.stop(r.vs.at, "", "curve %s has no values", profile.Quote(r.vs.name))
	}
	for _, c := range []*curve{r.vs, r.vp, r.rho} {
		if c != nil && c.given != "" {
			r.note("units-given", c.at, "the file states no unit of curve %s; given for it: %s", c.name, c.given)
		}
	}
	return true
}

// sameUnit tells of a unit given for Vs where the file states another of its
// kind.
func (r *reader) sameUnit() {
	if g := &r.given; g.vsAs != "" && r.vs.item.unit != "" && r.vs.kind == g.vs.kind && r.vs.unit != g.vs {
		r.fault(r.vs.unitAt, "leave the given unit out", "curve %s is in %s, but %s is given for it", r.vs.name, profile.Quote(r.vs.item.unit), profile.Quote(g.vsAs))
	}
}

// tell tells of the values of a curve that cannot be.
func (r *reader) tell(c *curve) {
	what := "the depth"
	if c != r.index {
		what = c.name
	}
	hint := "write a plain number such as 12.5, or the NULL of the file"
	for _, p := range c.bad {
		r.fault(p.spot, hint, "%s %s", what, p.text)
	}
	for range c.more {
		r.fault(spot{}, "", "") // only counted: the kept ones are as many as are told
	}
}

// candidates are the curves of a role that have values.
func (r *reader) candidates(is role) []*curve {
	var list []*curve
	for _, c := range r.rows.wanted {
		if c.role == is && c.column < r.rows.width {
			list = append(list, c)
		}
	}
	return list
}

// chooseShear finds the one shear curve.
func (r *reader) chooseShear() bool {
	list := r.candidates(shear)
	r.vs = list[0]
	for _, c := range list {
		if c.kind == velocity {
			r.vs = c
			break
		}
	}
	for _, c := range list {
		if c == r.vs {
			continue
		}
		if apart, ok := r.vs.apart(c); !ok || apart > agreement {
			return r.disagree(c, apart, ok)
		}
	}
	if len(list) > 1 {
		r.note("curves-agree", r.vs.at, "the file has %d shear curves that agree within %g %%; %s was taken", len(list), 100*agreement, r.vs.name)
	}
	return true
}

func (r *reader) disagree(c *curve, apart float64, ok bool) bool {
	a, b := r.vs.titled(), c.titled()
	if !ok {
		return r.stop(c.at, hintCurves(r.vs, c), "the file has two shear curves that cannot be compared, %s and %s", a, b)
	}
	return r.stop(c.at, hintCurves(r.vs, c), "the file has two shear curves that differ by up to %.3g %%, %s and %s", 100*apart, a, b)
}

// titled is the name of a curve with its description.
func (c *curve) titled() string {
	if c.description == "" {
		return c.name
	}
	return c.name + " (" + shortened(c.description) + ")"
}

func shortened(text string) string {
	const most = 60
	if runes := []rune(text); len(runes) > most {
		return string(runes[:most]) + "…"
	}
	return text
}

// apart is how far two curves differ at most, relative to the smaller value;
// false if no row has both.
func (c *curve) apart(o *curve) (most float64, ok bool) {
	for i := range c.values {
		a, b := c.si(c.values[i]), o.si(o.values[i])
		if math.IsNaN(a) || math.IsNaN(b) || a <= 0 || b <= 0 || math.IsInf(a, 0) || math.IsInf(b, 0) || isNines(c.values[i]) || isNines(o.values[i]) {
			continue
		}
		most, ok = max(most, a/b-1, b/a-1), true
	}
	return most, ok
}

// mappedOr is a curve that Options.Map names, or else the companion of a role.
func (r *reader) mappedOr(c *curve, is role) *curve {
	if c == nil {
		return r.companion(is)
	}
	r.tell(c)
	return c
}

// companion finds the curve of P waves or density, nil if there is none or it
// is not clear which.
func (r *reader) companion(is role) *curve {
	list := r.candidates(is)
	if len(list) == 0 {
		return nil
	}
	first := list[0]
	for _, c := range list[1:] {
		if apart, ok := first.apart(c); !ok || apart > agreement {
			r.note("curve-not-read", c.at, "curves %s and %s differ, so neither was read", first.titled(), c.titled())
			return nil
		}
	}
	if len(first.bad) > 0 {
		r.note("curve-not-read", first.bad[0].spot, "curve %s was not read: %s", first.name, first.bad[0].text)
		return nil
	}
	return first
}

package delimited

import (
	"bytes"
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// state is what a cell of numbers holds.
type state uint8

const (
	blank state = iota
	good
	faulty // and the fault is told
	open   // a bottom or thickness that says there is none
)

// number reads the number of quantity q in the present row, in SI.
func (r *reader) number(q profile.Quantity) (float64, state) {
	i := r.columns.index[q]
	if i < 0 {
		return 0, blank
	}
	text := r.scan.cell(i)
	if len(text) == 0 {
		return 0, blank
	}
	numerals := r.numeralsOf(text)
	v, problem := numerals.parse(text)
	if problem != "" {
		r.fault(r.scan.place(i), numerals.hintNumber(text), "%s %s %s", q, quote(text), problem)
		return 0, faulty
	}
	switch unit := r.columns.list[i].unit; {
	case q.Dimension() == profile.Dimensionless:
	case q.Dimension() == profile.Velocity && isSlow(unit) && v != 0:
		v = unit.Factor / v
	default:
		v *= unit.Factor
	}
	switch {
	case math.IsInf(v, 0):
		r.fault(r.scan.place(i), "", "%s %s is not a finite number", q, quote(text))
		return 0, faulty
	case v > 0 && v < profile.MinVelocity && q.Dimension() == profile.Velocity && r.scan.grid == nil && r.scan.sep != ',' && pointThousands(text):
		r.fault(r.scan.place(i), "write numbers without separators of thousands", "%s %s may have a decimal point or a separator of thousands", q, quote(text))
		return 0, faulty
	}
	return v, good
}

// positive reads a number that must be above zero, or at least zero where the
// quantity may be.
func (r *reader) positive(q profile.Quantity) (float64, state) {
	v, st := r.number(q)
	switch {
	case st != good || v > 0:
		return v, st
	case v == 0 && q.MayBeZero():
		return 0, st
	case v == 0 && q == profile.Vs:
		r.cellFault(q, profile.ZeroVsHint, "is zero: "+profile.ZeroVsReason)
	case v == 0 && q == profile.Thickness:
		r.cellFault(q, "leave the last thickness blank for a half-space", "is not positive")
	case q == profile.Top:
		r.cellFault(q, hintDownward, "is negative")
	case q.MayBeZero():
		r.cellFault(q, "", "is negative")
	default:
		r.cellFault(q, profile.HintNull(v), "is not positive")
	}
	return 0, faulty
}

// cellFault tells what is wrong with the cell of quantity q in this row.
func (r *reader) cellFault(q profile.Quantity, hint, problem string) {
	i := r.columns.index[q]
	if text := r.scan.cell(i); len(text) > 0 {
		r.fault(r.scan.place(i), hint, "%s %s %s", q, quote(text), problem)
	} else {
		r.fault(r.scan.place(i), hint, "%s %s", q, problem)
	}
}

// layer reads the layer in the present row, but for its boundaries.
func (r *reader) layer(l *profile.Layer) {
	if r.has(profile.Vs) {
		var st state
		if l.Vs, st = r.positive(profile.Vs); st == blank {
			r.cellFault(profile.Vs, "give the velocity of every layer", "is blank")
		}
	}
	at := r.scan.place(r.columns.index[r.principal()])
	l.Line, l.Column = int32(at.line), int32(at.column)
	l.VsBottom, _ = r.positive(profile.VsBottom)
	for _, o := range []struct {
		given profile.Given
		q     profile.Quantity
		to    *float64
	}{
		{profile.GivenVp, profile.Vp, &l.Vp},
		{profile.GivenDensity, profile.Density, &l.Density},
		{profile.GivenSigma, profile.SigmaLnVs, &l.SigmaLnVs},
		{profile.GivenN, profile.N, &l.N},
		{profile.GivenSu, profile.Su, &l.Su},
		{profile.GivenPI, profile.PI, &l.PI},
		{profile.GivenWaterContent, profile.WaterContent, &l.WaterContent},
	} {
		if r.has(o.q) {
			r.optional(l, o.given, o.q, o.to)
		}
	}
	r.words(l)
	r.bounds(l)
}

// optional reads an optional quantity. A dash is as good as blank; NP
// (non-plastic) is a plasticity index of zero; a blow count may be the word
// refusal.
func (r *reader) optional(l *profile.Layer, given profile.Given, q profile.Quantity, to *float64) {
	text := r.scan.cell(r.columns.index[q])
	switch {
	case isDash(string(text)):
		return
	case q == profile.PI && bytes.EqualFold(text, []byte("NP")):
		l.Given |= given
		return
	case q == profile.N && (bytes.EqualFold(text, []byte("refusal")) || bytes.EqualFold(text, []byte("R"))):
		l.Refusal = true
		return
	}
	if v, st := r.positive(q); st == good {
		*to = v
		l.Given |= given
	}
}

// words reads soil, basis and refusal.
func (r *reader) words(l *profile.Layer) {
	if i := r.columns.index[profile.Soil]; i >= 0 {
		l.Soil = r.shared(r.scan.cell(i))
	}
	if i := r.columns.index[profile.BasisWord]; i >= 0 {
		if word := strings.ToLower(string(r.scan.cell(i))); word != "" && !isDash(word) {
			var ok bool
			if l.Basis, ok = profile.ParseBasis(word); !ok {
				r.cellFault(profile.BasisWord, hintBasis, "is not known")
			}
		}
	}
	if i := r.columns.index[profile.RefusalWord]; i >= 0 {
		switch strings.ToLower(string(r.scan.cell(i))) {
		case "", "-", "–", "no", "n", "false", "0":
		case "yes", "y", "true", "1", "x", "r", "refusal", "refused":
			l.Refusal = true
		default:
			r.cellFault(profile.RefusalWord, "write yes, or leave it blank", "is not known")
		}
	}
}

// shared returns a description, the same string as in the row before where
// that is the same.
func (r *reader) shared(text []byte) string {
	if string(text) != r.table.soil {
		r.table.soil = strings.Join(strings.Fields(string(text)), " ")
	}
	return r.table.soil
}

// bounds reads a lower and an upper Vs as the 16 % and 84 % quantiles, one
// standard deviation of ln Vs to either side.
func (r *reader) bounds(l *profile.Layer) {
	if !r.has(profile.VsLower) {
		return
	}
	lower, a := r.positive(profile.VsLower)
	upper, b := r.positive(profile.VsUpper)
	switch {
	case a == faulty || b == faulty || a == blank && b == blank:
	case a == blank:
		r.cellFault(profile.VsLower, "give both, or neither", "is blank beside an upper Vs")
	case b == blank:
		r.cellFault(profile.VsUpper, "give both, or neither", "is blank beside a lower Vs")
	case upper <= lower:
		r.cellFault(profile.VsUpper, "leave both blank where there is no range", "is not above the lower Vs")
	case l.Vs > 0 && l.Vs < lower:
		r.cellFault(profile.VsLower, "", "is above Vs")
	case l.Vs > 0 && l.Vs > upper:
		r.cellFault(profile.VsUpper, "", "is below Vs")
	default:
		l.SigmaLnVs = math.Log(upper/lower) / 2
		l.Given |= profile.GivenSigma
		r.table.bounds = true
	}
}

// end reads a bottom or thickness, which may say that there is none.
func (r *reader) end(q profile.Quantity) (float64, state) {
	i := r.columns.index[q]
	if i < 0 {
		return 0, blank
	}
	switch strings.ToLower(string(r.scan.cell(i))) {
	case "inf", "+inf", "infinity", "infinite", "∞", "half-space", "halfspace", "half space", "-", "–", "—":
		return math.Inf(1), open
	}
	if q == profile.Thickness {
		return r.positive(q)
	}
	return r.number(q)
}

// bottomOf returns the bottom of the layer in the present row, whose top is
// given: from its bottom, its thickness, or both. It is +Inf if neither is
// there. Only a result that is good may be used.
func (r *reader) bottomOf(top float64) (float64, state) {
	bottom, a := r.end(profile.Bottom)
	thickness, b := r.end(profile.Thickness)
	switch {
	case a == faulty || b == faulty:
		return 0, faulty
	case a == blank && b == good:
		return top + thickness, good
	case a == blank:
		return math.Inf(1), open
	case a == good && bottom-top <= profile.Joint:
		r.bottomTooHigh(top, bottom)
		return 0, faulty
	case a == open && b == good || a == good && b == open || a == good && b == good && math.Abs(top+thickness-bottom) > profile.Joint:
		r.cellFault(profile.Thickness, "correct one of them, or leave the column of thicknesses out", "does not agree with the top and bottom of its layer")
		return 0, faulty
	}
	return bottom, a
}

// bottomTooHigh tells of a bottom that is not below its top.
func (r *reader) bottomTooHigh(top, bottom float64) {
	switch {
	case bottom == top && top > 0 && !r.has(profile.Top):
		r.cellFault(profile.Bottom, hintStairs, "is the bottom of the layer above, too")
	case bottom == 0:
		r.cellFault(profile.Bottom, "leave the last bottom blank for a half-space", "is ground level")
	case bottom < 0:
		r.cellFault(profile.Bottom, hintDownward, "is negative")
	case r.has(profile.Top):
		r.cellFault(profile.Bottom, "", "is not below the top of its layer, "+r.depth(profile.Bottom, top))
	default:
		r.cellFault(profile.Bottom, hintSort, "is not below the bottom of the layer above, "+r.depth(profile.Bottom, top))
	}
}

// Hints on depths.
const (
	hintDownward = "depths are positive downward from ground level"
	hintSort     = "sort the layers from the top down"
	hintStairs   = "two rows with the same depth look like points of a drawn line: give a row for each layer"
)

// depth is a depth in words, in the unit of the column of q.
func (r *reader) depth(q profile.Quantity, z float64) string {
	u := profile.Metre
	if r.has(q) && !r.table.unitless {
		u = r.columnOf(q).unit
	}
	return strconv.FormatFloat(math.Round(z/u.Factor*1e9)/1e9, 'f', -1, 64) + " " + u.Name
}

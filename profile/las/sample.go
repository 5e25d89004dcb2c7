package las

import (
	"cmp"
	"math"
	"slices"
	"strconv"

	"shearbook/profile"
)

// sample is the velocity at a depth.
type sample struct {
	z           float64 // m below ground level
	vs, vp, rho float64 // m/s, m/s, kg/m³; vp and rho NaN where there is none
	at          spot    // of the value of Vs
}

// sample gathers the samples from the top down.
func (r *reader) sample() bool {
	before := r.Count()
	r.ascending()
	r.ends()
	r.samples = make([]sample, 0, len(r.vs.values))
	for i, raw := range r.vs.values {
		if math.IsNaN(raw) {
			continue
		}
		r.oneSample(i, raw)
	}
	if r.Count() > before {
		return false
	}
	if first, last := r.samples[0], r.samples[len(r.samples)-1]; first.z > last.z {
		slices.Reverse(r.samples)
	}
	return r.spacing()
}

// oneSample gathers the sample in row i, if there can be one.
func (r *reader) oneSample(i int, raw float64) {
	at := r.vs.places[i]
	z := r.index.si(r.index.values[i]) - r.opt.Datum
	switch {
	case raw == 0 && r.vs.kind == velocity:
		r.fault(at, profile.ZeroVsHint, "%s is zero: %s", r.vs.name, profile.ZeroVsReason)
		return
	case raw <= 0:
		r.fault(at, "if it stands for no value, state it as NULL in ~W", "%s %v is not positive", r.vs.name, raw)
		return
	case z < 0:
		r.fault(r.index.places[i], "depths are positive downward from ground level; check the datum", "the depth %.9g m lies above ground level", z)
		return
	}
	r.samples = append(r.samples, sample{z, r.vs.si(raw), r.vp.valueAt(i), r.rho.valueAt(i), at})
}

// valueAt is the value in SI in row i, NaN if there is none or no curve, or
// it cannot be.
func (c *curve) valueAt(i int) float64 {
	if c == nil {
		return math.NaN()
	}
	if v := c.si(c.values[i]); v > 0 && !math.IsInf(v, 0) {
		return v
	}
	return math.NaN()
}

// ascending tells of depths that turn back or stand still.
func (r *reader) ascending() {
	z := r.index.values
	if len(z) < 2 {
		return
	}
	down, words := 1, "below"
	if z[len(z)-1] < z[0] {
		down, words = -1, "above"
	}
	for i := 1; i < len(z); i++ {
		if cmp.Compare(z[i], z[i-1]) != down {
			r.fault(r.index.places[i], "each row lies "+words+" the one before it", "the depth %s does not lie %s that of the row before, %s", plain(z[i]), words, plain(z[i-1]))
		}
	}
}

// plain is a number as people write it.
func plain(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

// ends compares the depths with STRT and STOP.
func (r *reader) ends() {
	z := r.index.values
	if len(z) == 0 {
		return
	}
	for i := range r.header.items {
		it := &r.header.items[i]
		end := z[0]
		if it.is("STOP") {
			end = z[len(z)-1]
		}
		v, ok := parseNumber([]byte(it.value))
		u := parseUnit(it.unit)
		switch {
		case it.section != 'W' || !it.is("STRT", "STOP") || !ok:
		case u.kind != length || u == r.index.unit || r.given.depthAs != "":
			if math.Abs(v-end) > 1e-6*max(1, math.Abs(end)) {
				r.note("range-differs", it.valueAt, "%s is %s, but the data have %s", it.mnemonic, plain(v), plain(end))
				return
			}
		case math.Abs(u.si(v)-r.index.si(end)) <= 1e-3*max(1, math.Abs(u.si(v))):
			// The same depth in two units.
		case math.Abs(v-end) <= 1e-6*max(1, math.Abs(end)) && end != 0:
			r.fault(it.unitAt, "correct the unit that is wrong, or give the unit of depth for the file",
				"%s is in %s, but the same number stands among the depths, which are in %s", it.mnemonic, profile.Quote(it.unit), profile.Quote(r.index.item.unit))
			return
		}
	}
}

// spacing finds the usual spacing of the samples, and tells of ground that is
// too far from any.
func (r *reader) spacing() bool {
	n := len(r.samples)
	if n == 1 {
		return r.stop(r.samples[0].at, "", "the log has one value of %s alone, so no layer", r.vs.name)
	}
	gaps := make([]float64, n-1)
	for i := range gaps {
		gaps[i] = r.samples[i+1].z - r.samples[i].z
	}
	sorted := slices.Clone(gaps)
	slices.Sort(sorted)
	r.step = sorted[(len(sorted)-1)/2]
	r.topGap()
	r.gaps(gaps)
	return r.Err() == nil
}

// topGap looks at the ground above the first sample.
func (r *reader) topGap() {
	first, most := &r.samples[0], cmp.Or(r.opt.CarryUp, MaxCarry)
	gap := first.z - r.step/2
	switch {
	case gap > most:
		r.fault(first.at, "add a row at ground level with the velocity above, from another source", "the log begins at %.4g m; more than %g m above it are without velocity", first.z, most)
	case gap > profile.Joint:
		r.note("top-gap", first.at, "the log begins at %.4g m; its first velocity was carried up to ground level", first.z)
	}
}

// gaps looks at the ground between samples that lie further apart than most.
func (r *reader) gaps(gaps []float64) {
	holes, widest := 0, 0
	for i, gap := range gaps {
		if gap <= 1.5*r.step {
			continue
		}
		if gap-r.step > MaxGap {
			r.fault(r.samples[i+1].at, "add rows with the velocity between them, from another source", "no velocity from %.4g m to %.4g m", r.samples[i].z, r.samples[i+1].z)
		}
		if holes++; holes == 1 || gap > gaps[widest] {
			widest = i
		}
	}
	if holes > 0 {
		r.note("gaps", r.samples[widest+1].at, "samples are missing in %s; the neighbours of each were made to meet halfway; the widest is from %.4g m to %.4g m",
			profile.Plural(holes, "place"), r.samples[widest].z, r.samples[widest+1].z)
	}
}

package correlate

import (
	"fmt"
	"slices"

	"shearbook/profile"
)

// Profile returns a copy of p whose velocities are estimated from the N and su
// of its layers by the relations that opt names; velocities that p states are
// not used and not kept. The velocity of a layer is the geometric mean of those
// of the relations that hold for it, with the sigma of Combine. A relation is
// asked at the middle of the layer, or at the top of a half-space; the stress
// there comes from the densities of the layers and opt.UnitWeight.
//
// Every layer of the result states its sigma and the basis profile.Correlated.
// The notes of p are kept and these follow them, at most one of a kind and
// relation:
//
//   - correlated-by: which relations, from what, with which standing.
//   - correlation-sigma: where the sigma comes from.
//   - blow-counts: what N is, and how it was corrected.
//   - correlation-refused: relations that do not hold for some layers, and why.
//   - blows-capped, penetration-refused: counts that are bounds.
//   - unit-weight, water-table: that the user's is used.
//   - velocity-left-out: that p states velocities of its own.
//   - top-not-measured: how far the first velocity was carried up.
//
// Where no relation holds in the uppermost layers, down to MaxCarry, the first
// velocity that there is is carried up to ground level: borings often begin with
// a stratum without a test. Below, no layer takes the velocity of another.
//
// The error is a profile.Faults with a fault for each other layer in which none
// of the relations holds; or that of Options.Check.
func Profile(p *profile.Profile, opt Options) (profile.Profile, error) {
	if err := opt.Check(); err != nil {
		return profile.Profile{}, err
	}
	relations, err := opt.chosen()
	if err != nil {
		return profile.Profile{}, err
	}
	w := worker{opt: &opt, relations: relations, tells: newTeller(relations), energy60: opt.energy60(p)}
	out := *p
	out.Layers = slices.Clone(p.Layers)
	out.NoVelocity = false
	out.Survey.Basis = profile.Correlated
	out.Survey.WaterTable = opt.waterOf(p.Survey.WaterTable)
	faults := profile.Collector{}
	if p.Reading != nil {
		faults.File = p.Reading.File
	}
	first := -1 // layer that is estimated
	for i := range out.Layers {
		l := &out.Layers[i]
		found := w.ask(w.layer(p, i), span{l.Top, l.Bottom})
		if len(found) == 0 && first < 0 && l.Bottom <= MaxCarry+profile.Joint && i+1 < len(out.Layers) {
			continue
		}
		if len(found) == 0 {
			faults.Fault(placeOf(p, l), refusedHint, "no correlation gives a velocity for layer %d, %s: %s",
				i+1, span{l.Top, l.Bottom}, w.tells.last())
			continue
		}
		w.fill(l, found)
		if first < 0 {
			first = i
		}
	}
	if faults.Count() > 0 {
		return profile.Profile{}, faults.Err()
	}
	out.Notes = append(slices.Clone(p.Notes), w.notes(p)...)
	out.Notes = append(out.Notes, carryUp(out.Layers, first)...)
	return finish(out)
}

const refusedHint = "state what is missing, name a correlation that holds there, or give the layer a velocity"

// carryUp gives the layers above the first that is estimated its velocity.
func carryUp(layers []profile.Layer, first int) []profile.Note {
	if first < 1 {
		return nil
	}
	from := &layers[first]
	for i := range layers[:first] {
		l := &layers[i]
		l.Vs, l.VsBottom, l.Vp, l.SigmaLnVs, l.Basis = from.Vs, 0, 0, from.SigmaLnVs, profile.Correlated
		l.Given = l.Given&^profile.GivenVp | profile.GivenSigma
	}
	return []profile.Note{topNote("no correlation gives a velocity", from.Top)}
}

// topNote is the note on ground near the surface without a velocity.
func topNote(what string, depth float64) profile.Note {
	return profile.Note{ID: "top-not-measured", Text: fmt.Sprintf(
		"%s above %.4g m; the first one is carried up to ground level", what, depth)}
}

// placeOf is the place of a layer in the file of its profile.
func placeOf(p *profile.Profile, l *profile.Layer) profile.Place {
	if p.Reading == nil {
		return profile.Place{Line: int(l.Line), Column: int(l.Column)}
	}
	return p.Reading.Place(int(l.Line), int(l.Column))
}

// finish validates a profile and adds what is doubtful about it now.
func finish(p profile.Profile) (profile.Profile, error) {
	if err := profile.Validate(&p).Err(); err != nil {
		return profile.Profile{}, err
	}
	for _, n := range profile.Doubts(&p) {
		if !slices.ContainsFunc(p.Notes, func(had profile.Note) bool { return had.ID == n.ID && had.Text == n.Text }) {
			p.Notes = append(p.Notes, n)
		}
	}
	return p, nil
}

// span is a stretch of depth in m.
type span struct{ top, bottom float64 }

func (s span) String() string {
	if s.bottom > profile.MaxDepth {
		return fmt.Sprintf("below %.4g m", s.top)
	}
	return fmt.Sprintf("%.4g–%.4g m", s.top, s.bottom)
}

// middle is the depth at which a relation is asked.
func (s span) middle() float64 {
	if s.bottom > profile.MaxDepth {
		return s.top
	}
	return (s.top + s.bottom) / 2
}

// worker asks the relations, layer by layer, and remembers what to tell.
type worker struct {
	opt       *Options
	relations []*Relation
	tells     *teller
	energy60  bool      // N is N60
	ratios    []float64 // %, the energy ratios of layers that were used
}

// ask returns the estimates of the relations that hold in a stretch.
func (w *worker) ask(in Input, at span) []Estimate {
	var found []Estimate
	w.tells.next()
	for _, r := range w.relations {
		e, err := r.Estimate(in)
		if err != nil {
			w.tells.refused(r, err, at)
			continue
		}
		w.opt.sigma(&e)
		w.tells.used(e, at)
		found = append(found, e)
	}
	return found
}

// fill puts the mean of estimates into a layer.
func (w *worker) fill(l *profile.Layer, found []Estimate) {
	l.Vs, l.SigmaLnVs, _ = Combine(found)
	l.VsBottom, l.Vp = 0, 0
	l.Given = l.Given&^profile.GivenVp | profile.GivenSigma
	l.Basis = profile.Correlated
}

// layer is what layer i of a profile knows.
func (w *worker) layer(p *profile.Profile, i int) Input {
	l := &p.Layers[i]
	z := span{l.Top, l.Bottom}.middle()
	in := Input{Soil: ParseSoil(l.Soil)}
	if in.Soil == SoilNotStated {
		in.Soil = w.opt.Soil
	}
	in.Set(Depth, z)
	if l.Has(profile.GivenSu) {
		in.Set(Strength, l.Su)
	}
	w.blows(&in, l, z)
	soil, known := ofSoil(p.Layers, z, w.opt.UnitWeight)
	in.setStresses(z, soil, known, water{w.opt.waterOf(p.Survey.WaterTable)})
	if l.Refusal && l.Has(profile.GivenN) {
		w.tells.bounds = append(w.tells.bounds, span{l.Top, l.Bottom})
	}
	return in
}

// blows makes the blow counts of a layer known. N60 stands for N where N is not
// known, for which the note blow-counts answers, but N not for N60.
func (w *worker) blows(in *Input, l *profile.Layer, z float64) {
	switch {
	case !l.Has(profile.GivenN) && l.Refusal:
		in.missing(BlowCount, "penetration was refused there without a count")
		in.missing(BlowCount60, "penetration was refused there without a count")
	case !l.Has(profile.GivenN):
	case w.energy60:
		in.Set(BlowCount, l.N)
		in.Set(BlowCount60, l.N)
	default:
		in.Set(BlowCount, l.N)
		w.correct(in, l, z)
	}
}

// correct makes the N60 of a layer known from its N as measured: by the user's
// energy ratio, or else by that of its tests.
func (w *worker) correct(in *Input, l *profile.Layer, z float64) {
	d := w.opt.Drive
	if d.EnergyRatio == 0 {
		d.EnergyRatio = float64(l.EnergyRatio)
	}
	if d.EnergyRatio == 0 {
		in.missing(BlowCount60, "the energy of the blows is not stated")
		return
	}
	n, err := d.N60(l.N, z)
	if err != nil { // of the layer's energy ratio: Options.Check looked at the rest
		in.missing(BlowCount60, err.Error())
		return
	}
	in.Set(BlowCount60, n)
	if w.opt.Drive.EnergyRatio == 0 {
		w.ratios = append(w.ratios, d.EnergyRatio)
	}
}

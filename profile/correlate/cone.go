package correlate

import (
	"errors"
	"math"

	"shearbook/profile"
)

// Cone is one cone penetration test.
type Cone struct {
	Name        string
	Position    profile.Position
	GroundLevel profile.Optional // m above the stated datum
	WaterTable  profile.Optional // m below ground level
	AreaRatio   float64          // a of qt = qc + (1 − a)·u2, 0 < a ≤ 1; 0 if not stated
	Readings    []Reading        // top down

	Source *profile.Reading // the file that it was read from; nil if none
}

// Reading is one reading of a cone. What was not read is not known.
type Reading struct {
	Depth        float64          // m below ground level
	Tip          profile.Optional // kPa; qc, not corrected for pore pressure
	Sleeve       profile.Optional // kPa; fs
	PorePressure profile.Optional // kPa; u2
	Line         int              // in its file
}

// Reach is how far in m a reading stands for the ground above and below it at
// most. Cones are read every few centimetres; a metre without any was drilled
// through. The figure is our choice.
const Reach = 0.5

// MaxCarry is how far in m the velocity of the first layer that readings give is
// carried up to ground level, with a note. A cone may start in a hole that was
// drilled for it, but more than that is another soil. It is our choice.
const MaxCarry = 5.0

// Sounding returns the profile that the relations named in opt estimate from
// the readings of a cone.
//
// Each relation is asked at every reading, which stands for the ground to
// midway to its neighbours, over Reach at most. From the ground level, and from
// each of opt.Boundaries, layers of opt.Step follow each other; what is left
// above the next boundary, or above the end of the readings, joins the layer
// above it if it is thinner than half a step. The velocity of a layer by one
// relation is the average by travel time over those of its readings,
//
//	V = Σh/Σ(h/v)
//
// if these stand for half of the layer at least. The velocity of the layer is
// that of Combine.
//
// Stresses are those of ground of opt.UnitWeight. qt is qc + (1 − a)·u2 where
// both are known, and else qc. Ic, Qtn and Fr are those of NewBehaviour. The
// principal soil is opt.Soil, or else what Ic tells.
//
// The notes are correlated-by, correlation-sigma, correlation-refused,
// unit-weight and water-table, as of Profile, and
//
//   - cone-to-layers: the rule by which readings became layers.
//   - area-ratio, tip-not-corrected: how qt comes of qc, or that it is qc.
//   - soil-by-cone: the soil is the one that Ic tells.
//   - readings-refused: relations that do not hold at some readings.
//   - top-not-measured: how far the first velocity was carried up.
//
// The error is a profile.Faults, with a fault for each layer that none of the
// relations covers; or that of Options.Check.
func Sounding(c *Cone, opt Options) (profile.Profile, error) {
	if err := opt.Check(); err != nil {
		return profile.Profile{}, err
	}
	relations, err := opt.chosen()
	if err != nil {
		return profile.Profile{}, err
	}
	if err := c.check(); err != nil {
		return profile.Profile{}, err
	}
	b := &blocks{cone: c, w: worker{opt: &opt, relations: relations, tells: newTeller(relations)}}
	b.askReadings()
	layers, err := b.layers()
	if err != nil {
		return profile.Profile{}, err
	}
	return finish(profile.Profile{
		Name: c.Name, Layers: layers, Position: c.Position, Reading: c.Source,
		Survey: profile.Survey{Method: "cone penetration test", Basis: profile.Correlated,
			GroundLevel: c.GroundLevel, WaterTable: opt.waterOf(c.WaterTable)},
		Notes: b.notes(),
	})
}

// check returns the faults of readings that cannot be used at all.
func (c *Cone) check() error {
	faults := profile.Collector{File: c.file()}
	if len(c.Readings) == 0 {
		faults.Fault(profile.Place{}, "", "cone %s has no readings", profile.Quote(c.Name))
	}
	if a := c.AreaRatio; a != 0 && !(a > 0 && a <= 1) {
		faults.Fault(profile.Place{}, "", "the area ratio %v of cone %s is not one of 0 to 1", a, profile.Quote(c.Name))
	}
	above := math.Inf(-1)
	for i := range c.Readings {
		z := c.Readings[i].Depth
		switch at := c.place(i); {
		case !(z >= 0 && z <= profile.MaxDepth):
			faults.Fault(at, "", "the depth %v m of a reading is not one", z)
		case z <= above:
			faults.Fault(at, "sort the readings from the top down, one at a depth", "the reading at %.4g m follows one at %.4g m", z, above)
		}
		above = z
	}
	return faults.Err()
}

func (c *Cone) file() string {
	if c.Source == nil {
		return ""
	}
	return c.Source.File
}

// place is that of reading i.
func (c *Cone) place(i int) profile.Place {
	if c.Source == nil {
		return profile.Place{Line: c.Readings[i].Line}
	}
	return c.Source.Place(c.Readings[i].Line, 0)
}

// stands is the stretch that reading i stands for.
func (c *Cone) stands(i int) span {
	z := c.Readings[i].Depth
	s := span{max(0, z-Reach), z + Reach}
	if i > 0 {
		s.top = max(s.top, (c.Readings[i-1].Depth+z)/2)
	}
	if i+1 < len(c.Readings) {
		s.bottom = min(s.bottom, (c.Readings[i+1].Depth+z)/2)
	} else {
		s.bottom = z + c.lastReach(i)
	}
	return s
}

// lastReach is how far the last reading stands for the ground below it: as far
// as for that above.
func (c *Cone) lastReach(i int) float64 {
	if i == 0 {
		return Reach
	}
	return min(Reach, (c.Readings[i].Depth-c.Readings[i-1].Depth)/2)
}

// input is what a reading knows.
func (o *Options) input(c *Cone, i int) Input {
	r := &c.Readings[i]
	in := Input{Soil: o.Soil}
	in.Set(Depth, r.Depth)
	for _, x := range []struct {
		q Quantity
		v profile.Optional
	}{{Tip, r.Tip}, {Sleeve, r.Sleeve}} {
		if x.v.Known {
			in.Set(x.q, x.v.Value)
		}
	}
	if qt, ok := o.correctedTip(c, r); ok {
		in.Set(CorrectedTip, qt)
	}
	w := water{o.waterOf(c.WaterTable)}
	in.setStresses(r.Depth, o.UnitWeight*r.Depth, o.UnitWeight > 0, w)
	in.setBehaviour()
	in.setPorePressureRatio(r.PorePressure, w.pressure(r.Depth))
	return in
}

// correctedTip is qt, and false where qc was not read.
func (o *Options) correctedTip(c *Cone, r *Reading) (float64, bool) {
	if o.corrects(c, r) {
		return r.Tip.Value + (1-o.areaRatio(c))*r.PorePressure.Value, r.Tip.Known
	}
	return r.Tip.Value, r.Tip.Known
}

func (o *Options) corrects(c *Cone, r *Reading) bool {
	return o.areaRatio(c) > 0 && r.PorePressure.Known
}

// areaRatio is the user's, or else that of the cone.
func (o *Options) areaRatio(c *Cone) float64 {
	if o.AreaRatio > 0 {
		return o.AreaRatio
	}
	return c.AreaRatio
}

// setBehaviour makes Ic and Qtn known, and the soil that they tell, or says why
// they are not.
func (in *Input) setBehaviour() {
	for _, q := range []Quantity{CorrectedTip, Sleeve, TotalStress, EffectiveStress} {
		if !in.Get(q).Known {
			why := in.why[q]
			if why == "" {
				why = q.String() + " was not read"
			}
			in.missing(BehaviourIndex, why)
			in.missing(NormalisedTip, why)
			return
		}
	}
	b, ok := NewBehaviour(in.of(CorrectedTip), in.of(Sleeve), in.of(TotalStress), in.of(EffectiveStress))
	if !ok {
		const why = "qt above σv, and fs and σ'v above zero, are needed for it"
		in.missing(BehaviourIndex, why)
		in.missing(NormalisedTip, why)
		return
	}
	in.Set(BehaviourIndex, b.Index)
	in.Set(NormalisedTip, b.NormalisedTip)
	if in.Soil == SoilNotStated {
		in.Soil = b.Soil()
	}
}

// setPorePressureRatio makes Bq known where its parts are:
//
//	Bq = (u2 − u0)/(qt − σv)
func (in *Input) setPorePressureRatio(u2 profile.Optional, u0 float64) {
	switch {
	case !u2.Known:
		in.missing(PorePressureRatio, "u2 was not read")
	case !in.Get(CorrectedTip).Known:
		in.missing(PorePressureRatio, "qc was not read")
	case !in.Get(EffectiveStress).Known:
		in.missing(PorePressureRatio, in.why[EffectiveStress])
	case in.of(CorrectedTip) <= in.of(TotalStress):
		in.missing(PorePressureRatio, "qt is not above σv")
	default:
		in.Set(PorePressureRatio, (u2.Value-u0)/(in.of(CorrectedTip)-in.of(TotalStress)))
	}
}

// errFew is the refusal of a layer for which there are too few readings.
var errFew = errors.New("has readings for less than half of it")

package correlate

import (
	"errors"
	"fmt"
	"strings"
	"unicode"

	"shearbook/profile"
)

// Blows says what the blow counts of a profile are.
type Blows uint8

// The kinds of blow counts.
const (
	AsHeaded Blows = iota // N60 where the heading in the file says so, else N as measured
	Energy60              // N60
)

// energy60 reports whether the N of a profile are N60: as the user says, or by
// the headings of all their columns in its file, such as ISPT_N60.
func (o *Options) energy60(p *profile.Profile) bool {
	if o.Blows == Energy60 {
		return true
	}
	found := false
	if p.Reading != nil {
		for _, c := range p.Reading.Columns {
			if c.Quantity != profile.N {
				continue
			}
			if found = namesN60(c.Heading); !found {
				return false
			}
		}
	}
	return found
}

// namesN60 reports whether a heading says N60, and not (N1)60.
func namesN60(heading string) bool {
	var bare strings.Builder
	for _, r := range strings.ToLower(heading) {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			bare.WriteRune(r)
		}
	}
	return strings.Contains(bare.String(), "n60")
}

// Options says how to estimate. Relations must name at least one relation; the
// rest may be zero.
type Options struct {
	Relations []string // IDs; see All

	// UnitWeight in kN/m³ is that of ground whose density is not stated; 0 if
	// there is none, and relations that need a stress refuse.
	UnitWeight float64

	// WaterTable in m below ground level goes before that of the profile or the
	// cone.
	WaterTable profile.Optional

	Blows Blows // what N of the layers is
	Drive Drive // for N60 of counts as measured; its energy ratio goes before those of the layers; without any nothing is corrected, and N60 is not corrected again

	// SigmaLn is the standard deviation of ln Vs of a relation that publishes
	// none; 0 means Planning.
	SigmaLn float64

	Soil Soil // of ground whose description names none; of cones, of all ground

	// The rest is for cones.

	// Step is the thickness in m of the layers that readings become; 0 is 1 m,
	// about what a cone is pushed between two rods (common practice). It is at
	// least 0.1 m.
	Step float64

	// Boundaries in m below ground level, such as those of the strata, are kept:
	// no layer lies across one. Alone puts no others in.
	Boundaries []float64
	Alone      bool

	// AreaRatio is a of qt = qc + (1 − a)·u2, 0 < a ≤ 1; where it is 0 it is that
	// of the cone. Where neither is known, or u2 was not read, qt is qc, and a note
	// says so.
	AreaRatio float64
}

// chosen returns the relations that the options name.
func (o *Options) chosen() ([]*Relation, error) {
	if len(o.Relations) == 0 {
		return nil, errors.New("no correlation is named")
	}
	var list []*Relation
	seen := map[string]bool{}
	for _, id := range o.Relations {
		r, err := Find(strings.TrimSpace(id))
		if err != nil {
			return nil, err
		}
		if seen[r.ID] {
			return nil, fmt.Errorf("correlation %q is named twice", r.ID)
		}
		seen[r.ID] = true
		list = append(list, r)
	}
	return list, nil
}

// Check returns what is wrong with the options, nil if nothing is.
func (o *Options) Check() error {
	if _, err := o.chosen(); err != nil {
		return err
	}
	if o.UnitWeight != 0 {
		if err := checkUnitWeight(o.UnitWeight); err != nil {
			return err
		}
	}
	switch w := o.WaterTable; {
	case w.Known && !(w.Value >= -profile.MaxDepth && w.Value <= profile.MaxDepth):
		return fmt.Errorf("a water table at %v m is not a depth", w.Value)
	case !(o.SigmaLn >= 0 && o.SigmaLn <= 1):
		return fmt.Errorf("a sigma of ln Vs of %.4g is not one of 0 to 1", o.SigmaLn)
	case o.Step != 0 && !(o.Step >= minStep && o.Step <= profile.MaxDepth):
		return fmt.Errorf("a step of %.4g m is not one of %g m or more", o.Step, minStep)
	case o.AreaRatio != 0 && !(o.AreaRatio > 0 && o.AreaRatio <= 1):
		return fmt.Errorf("an area ratio of %.4g is not one of 0 to 1", o.AreaRatio)
	}
	if o.Drive == (Drive{}) {
		return nil
	}
	if o.Blows == Energy60 {
		return errors.New("blow counts that are N60 are not corrected again: leave the energy ratio out")
	}
	return o.Drive.check()
}

// minStep is the least thickness in m of a layer of cone readings: thinner ones
// would be the readings themselves.
const minStep = 0.1

// step is the thickness of the layers that readings become.
func (o *Options) step() float64 {
	if o.Step == 0 {
		return 1
	}
	return o.Step
}

// sigma puts the user's sigma in place of Planning.
func (o *Options) sigma(e *Estimate) {
	if e.Planned && o.SigmaLn > 0 {
		e.SigmaLn = o.SigmaLn
	}
}

// waterOf is the user's water table, or else that of a profile or cone.
func (o *Options) waterOf(own profile.Optional) profile.Optional {
	if o.WaterTable.Known {
		return o.WaterTable
	}
	return own
}

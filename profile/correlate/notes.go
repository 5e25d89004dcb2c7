package correlate

import (
	"fmt"
	"slices"

	"shearbook/profile"
)

// notes are those of a profile from N and su.
func (w *worker) notes(p *profile.Profile) []profile.Note {
	t := w.tells
	notes := []profile.Note{t.byRelations(), t.sigmas(w.opt.SigmaLn > 0)}
	if t.uses(Penetration) {
		notes = append(notes, profile.Note{ID: "blow-counts", Text: w.blowText()})
	}
	notes = append(notes, t.refusals()...)
	if t.uses(Penetration) {
		notes = append(notes, t.bound()...)
	}
	if t.needs(stressed...) && w.weighs(p) {
		notes = append(notes, w.opt.weightNote("whose density is not stated"))
	}
	notes = append(notes, w.waterNotes()...)
	if !p.NoVelocity {
		notes = append(notes, profile.Note{ID: "velocity-left-out",
			Text: "the velocities that the profile itself states are not used"})
	}
	return notes
}

// stressed are the quantities that rest on a unit weight.
var stressed = []Quantity{EffectiveStress, TotalStress, BehaviourIndex, NormalisedTip, PorePressureRatio}

// weighs reports whether a layer of the profile takes the user's unit weight.
func (w *worker) weighs(p *profile.Profile) bool {
	for i := range p.Layers {
		if !p.Layers[i].Has(profile.GivenDensity) {
			return w.opt.UnitWeight > 0
		}
	}
	return false
}

func (o *Options) weightNote(of string) profile.Note {
	return profile.Note{ID: "unit-weight", Text: fmt.Sprintf("the unit weight of ground %s is taken as %.4g kN/m³, as stated by the user", of, o.UnitWeight)}
}

// waterNotes is the note on the user's water table.
func (w *worker) waterNotes() []profile.Note {
	if !w.opt.WaterTable.Known || !w.tells.needs(stressed...) {
		return nil
	}
	return []profile.Note{{ID: "water-table", Text: fmt.Sprintf("the water table is taken at %.4g m, as stated by the user", w.opt.WaterTable.Value)}}
}

// blowText says what the blow counts are.
func (w *worker) blowText() string {
	o := w.opt
	switch {
	case w.energy60 && w.tells.needs(BlowCount):
		return "blow counts are N60, as stated; correlations with N as measured take them as they are"
	case w.energy60:
		return "blow counts are N60, as stated"
	case !w.tells.needs(BlowCount60):
		return "blow counts are taken as measured, without correction"
	}
	d := o.Drive
	text := fmt.Sprintf("blow counts are corrected to N60 from %s, a borehole of %s and the length of the rods, "+
		"%.4g m above ground level (Skempton 1986, Youd et al. 2001; from memory)", w.ratioText(), d.boreholeText(), d.RodAbove)
	if d.Sampler > 1 {
		text += fmt.Sprintf(", and by %.3g for a sampler without its liners", d.Sampler)
	}
	return text
}

// ratioText says what the energy ratio is, and who states it.
func (w *worker) ratioText() string {
	if len(w.ratios) == 0 {
		return fmt.Sprintf("an energy ratio of %.4g %%", w.opt.Drive.EnergyRatio)
	}
	least, most := slices.Min(w.ratios), slices.Max(w.ratios)
	if most-least <= 1e-9*most {
		return fmt.Sprintf("the energy ratio of %.4g %% that the file states", most)
	}
	return fmt.Sprintf("the energy ratio that the file states of each test, which varies from %.4g to %.4g %%", least, most)
}

func (d Drive) boreholeText() string {
	if d.Borehole == 0 {
		return "65 to 115 mm"
	}
	return fmt.Sprintf("%.4g mm", d.Borehole)
}

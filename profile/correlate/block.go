package correlate

import (
	"errors"
	"fmt"
	"slices"

	"shearbook/profile"
)

// blocks makes layers of the readings of a cone.
type blocks struct {
	cone *Cone
	w    worker

	velocities [][]float64 // by relation and reading, m/s; 0 where it refuses
	whys       [][]uint8   // by relation and reading: why it refuses, an index of its texts
	refusals   []refusals  // by relation
	carried    span        // the ground above the first layer that readings give
	byCone     bool        // the soil that Ic tells was used
	raw        int         // readings whose qt is qc
}

// refusals are those of one relation.
type refusals struct {
	count int
	first float64  // m, and
	text  string   // of the first that is not for another soil, where there is one
	soil  int      // how many are for another soil, which is nothing to mend
	texts []string // all there are, at most maxTexts
}

// maxTexts bounds the ways in which one relation refuses; there are hardly ten.
const maxTexts = 255

// askReadings asks every relation at every reading.
func (b *blocks) askReadings() {
	opt := b.w.opt
	b.velocities = make([][]float64, len(b.w.relations))
	b.whys = make([][]uint8, len(b.w.relations))
	b.refusals = make([]refusals, len(b.w.relations))
	for i := range b.velocities {
		b.velocities[i] = make([]float64, len(b.cone.Readings))
		b.whys[i] = make([]uint8, len(b.cone.Readings))
	}
	for i := range b.cone.Readings {
		in := opt.input(b.cone, i)
		if !opt.corrects(b.cone, &b.cone.Readings[i]) {
			b.raw++
		}
		for k, r := range b.w.relations {
			e, err := r.Estimate(in)
			if err != nil {
				b.whys[k][i] = b.refusals[k].add(err, b.cone.Readings[i].Depth)
				continue
			}
			b.velocities[k][i] = e.Vs
			b.byCone = b.byCone || r.Soils != nil && opt.Soil == SoilNotStated
		}
	}
}

// add counts a refusal and returns the index of its text.
func (r *refusals) add(err error, depth float64) uint8 {
	refusal := err.(*Refusal) // Estimate has no other error
	if r.count == r.soil {    // the first that is not for another soil is told before those that are
		r.first, r.text = depth, refusal.Text
	}
	r.count++
	if refusal.Reason == OtherSoil {
		r.soil++
	}
	i := slices.Index(r.texts, refusal.Text)
	if i < 0 && len(r.texts) < maxTexts {
		i = len(r.texts)
		r.texts = append(r.texts, refusal.Text)
	}
	return uint8(max(0, i))
}

// layers returns the layers, or a fault for each that has no velocity.
func (b *blocks) layers() ([]profile.Layer, error) {
	faults := profile.Collector{File: b.cone.file()}
	if !slices.ContainsFunc(b.refusals, func(r refusals) bool { return r.count < len(b.cone.Readings) }) {
		faults.Fault(b.cone.place(0), refusedHint, "cone %s gives no velocity: %s", profile.Quote(b.cone.Name), b.why())
		return nil, faults.Err()
	}
	var layers []profile.Layer
	reading := 0
	for _, s := range b.stretches() {
		for reading+1 < len(b.cone.Readings) && b.cone.stands(reading).bottom <= s.top {
			reading++
		}
		found := b.average(s, reading)
		if len(found) == 0 && len(layers) == 0 && s.bottom <= MaxCarry+profile.Joint {
			b.carried = span{0, s.bottom}
			continue
		}
		if len(found) == 0 {
			faults.Fault(b.cone.place(reading), refusedHint, "cone %s gives no velocity at %s: %s", profile.Quote(b.cone.Name), s, b.w.tells.last())
			if len(layers) == 0 || faults.Count() == profile.MaxFaults {
				break // nothing new to say
			}
			continue
		}
		l := profile.Layer{Top: s.top, Bottom: s.bottom, Line: int32(b.cone.Readings[reading].Line)}
		b.w.fill(&l, found)
		if len(layers) == 0 && b.carried.bottom > 0 {
			up := l
			up.Top, up.Bottom = 0, s.top
			layers = append(layers, up)
		}
		layers = append(layers, l)
	}
	if faults.Count() == 0 && len(layers) == 0 {
		faults.Fault(b.cone.place(0), refusedHint, "cone %s gives no velocity: %s", profile.Quote(b.cone.Name), b.w.tells.last())
	}
	return layers, faults.Err()
}

// why says why no relation gives a velocity anywhere.
func (b *blocks) why() string {
	text := ""
	for k, r := range b.w.relations {
		if k > 0 {
			text += "; "
		}
		text += r.ID + " " + b.refusals[k].text
	}
	return text
}

// stretches are the layers to be, from ground level to the end of the readings.
func (b *blocks) stretches() []span {
	n := len(b.cone.Readings)
	end := b.cone.stands(n - 1).bottom
	stops := []float64{}
	for _, z := range b.w.opt.Boundaries {
		if z > 0 && z < end {
			stops = append(stops, z)
		}
	}
	slices.Sort(stops)
	stops = append(stops, end)
	var list []span
	top := 0.0
	for _, stop := range stops {
		if stop-top <= profile.Joint {
			continue
		}
		list = append(list, b.divide(span{top, stop})...)
		top = stop
	}
	return list
}

// divide cuts a stretch into layers of a step.
func (b *blocks) divide(s span) []span {
	step := b.w.opt.step()
	if b.w.opt.Alone {
		return []span{s}
	}
	n := max(1, int((s.bottom-s.top)/step+0.5))
	list := make([]span, n)
	for i := range list {
		list[i] = span{s.top + float64(i)*step, s.top + float64(i+1)*step}
	}
	list[n-1].bottom = s.bottom
	return list
}

// average returns the estimates of the relations that cover a stretch. from is
// the first reading that may stand in it.
func (b *blocks) average(s span, from int) []Estimate {
	b.w.tells.next()
	var found []Estimate
	for k, r := range b.w.relations {
		covered, time, why := 0.0, 0.0, errFew
		for i := from; i < len(b.cone.Readings); i++ {
			at := b.cone.stands(i)
			if at.top >= s.bottom {
				break
			}
			h := min(at.bottom, s.bottom) - max(at.top, s.top)
			switch v := b.velocities[k][i]; {
			case h <= 0:
			case v > 0:
				covered += h
				time += h / v
			case why == errFew:
				why = errors.New(b.refusals[k].texts[b.whys[k][i]])
			}
		}
		if covered < (s.bottom-s.top)/2 {
			b.w.tells.refused(r, why, s)
			continue
		}
		e := Estimate{Relation: r, Vs: covered / time, SigmaLn: r.SigmaLn}
		if e.SigmaLn == 0 {
			e.SigmaLn, e.Planned = Planning, true
		}
		b.w.opt.sigma(&e)
		b.w.tells.used(e, s)
		found = append(found, e)
	}
	return found
}

// notes are those of the profile of a cone.
func (b *blocks) notes() []profile.Note {
	o, t := b.w.opt, b.w.tells
	notes := []profile.Note{t.byRelations(), t.sigmas(o.SigmaLn > 0), {ID: "cone-to-layers", Text: b.rule()}}
	if b.raw < len(b.cone.Readings) && t.needs(CorrectedTip, BehaviourIndex, NormalisedTip) {
		of := "the file states of the cone"
		if o.AreaRatio > 0 {
			of = "is stated by the user"
		}
		notes = append(notes, profile.Note{ID: "area-ratio", Text: fmt.Sprintf("qt is qc + (1 − a)·u2, with the area ratio a of %.4g that %s", o.areaRatio(b.cone), of)})
	}
	if b.raw > 0 && t.needs(CorrectedTip, BehaviourIndex, NormalisedTip) {
		notes = append(notes, profile.Note{ID: "tip-not-corrected", Text: fmt.Sprintf(
			"qt is taken to be qc at %s, for the pore pressure at the shoulder or the area ratio of the cone is not stated",
			profile.Plural(b.raw, "reading"))})
	}
	if b.byCone {
		notes = append(notes, profile.Note{ID: "soil-by-cone",
			Text: "the soil is the one that Ic of Robertson (2009) tells: sand up to 2.60, silt up to 2.95, clay up to 3.60 (from memory)"})
	}
	for k, r := range b.refusals {
		if n := r.count - r.soil; n > 0 && t.told[k].used {
			notes = append(notes, profile.Note{ID: "readings-refused", Text: fmt.Sprintf(
				"%s gives no velocity at %s of %d, the first at %.4g m, where it %s",
				b.w.relations[k].Name, profile.Plural(n, "reading"), len(b.cone.Readings), r.first, r.text)})
		}
	}
	notes = append(notes, t.refusals()...)
	if b.carried.bottom > 0 {
		notes = append(notes, topNote("the cone gives no velocity", b.carried.bottom))
	}
	if t.needs(stressed...) {
		notes = append(notes, o.weightNote("above the cone"))
	}
	return append(notes, b.w.waterNotes()...)
}

// rule is how readings became layers.
func (b *blocks) rule() string {
	text := fmt.Sprintf("%s became layers of %.4g m", profile.Plural(len(b.cone.Readings), "reading"), b.w.opt.step())
	if b.w.opt.Alone {
		text = fmt.Sprintf("%s became layers between the stated boundaries", profile.Plural(len(b.cone.Readings), "reading"))
	} else if len(b.w.opt.Boundaries) > 0 {
		text += ", cut at the stated boundaries"
	}
	return text + ", each with the average of its readings by travel time"
}

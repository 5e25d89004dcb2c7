package profile

import (
	"fmt"
	"strings"
	"unicode"
)

// Limits of the note unit-suspect, in m/s. They are common practice, without
// a source: velocities outside them occur, but a unit slip is the more
// frequent cause.
const (
	fastestRock  = 3600 // no rock near the surface is faster; 12,000 ft/s
	fastestSoil  = 1000 // soil within soilDepth of the surface is slower
	slowestSoil  = 20   // peat and fluid mud are about as slow
	soilDepth    = 10.0 // m
	maxDepthsOut = 5    // depths listed in one note
)

// Doubts returns what is doubtful about a profile that Validate accepts, in
// this order:
//
//   - one-layer: the profile is a single layer.
//   - unit-suspect: the velocities look as if their unit were another one. A
//     velocity in ft/s that is read as m/s comes out 3.28 times too fast, one
//     in km/s 1,000 times too slow. The note is given if the fastest layer is
//     faster than 3,600 m/s; or if every layer that starts above 10 m depth
//     is faster than 1,000 m/s and is not described as rock; or if a layer is
//     slower than 20 m/s. These limits are common practice.
//   - low-vp-vs: Vp/Vs is below √2, a negative Poisson's ratio.
//   - refraction-reversal: the velocity falls with depth although the survey's
//     method is refraction, which finds no layer slower than one above it.
//     Refraction microtremor is a surface-wave method and is not meant.
//   - below-depth-reached: layers go on below the depth that the survey says
//     it reached.
func Doubts(p *Profile) []Note {
	if len(p.Layers) == 0 {
		return nil
	}
	var notes []Note
	for _, doubt := range []func(*Profile) (Note, bool){
		oneLayer, unitSuspect, lowVpVs, refractionReversal, belowDepthReached,
	} {
		if n, ok := doubt(p); ok {
			notes = append(notes, n)
		}
	}
	return notes
}

func oneLayer(p *Profile) (Note, bool) {
	return Note{
		ID:    "one-layer",
		Text:  "the profile is a single layer",
		Place: p.placeOf(&p.Layers[0]),
	}, len(p.Layers) == 1
}

func unitSuspect(p *Profile) (Note, bool) {
	if p.NoVelocity {
		return Note{}, false
	}
	slowest, fastest := &p.Layers[0], &p.Layers[0]
	for i := range p.Layers {
		l := &p.Layers[i]
		if l.slowest() < slowest.slowest() {
			slowest = l
		}
		if l.fastest() > fastest.fastest() {
			fastest = l
		}
	}
	switch {
	case fastest.fastest() > fastestRock:
		return p.suspect(fastest, "Vs of %.4g m/s is faster than any rock near the surface: are the velocities in ft/s?", fastest.fastest()), true
	case slowest.slowest() < slowestSoil:
		return p.suspect(slowest, "Vs of %.4g m/s is slower than any soil: is the unit of the velocities right?", slowest.slowest()), true
	case fastAtSurface(p):
		return p.suspect(&p.Layers[0], "every layer in the upper %g m is faster than %d m/s: right for rock, but soil in ft/s would look the same", soilDepth, fastestSoil), true
	}
	return Note{}, false
}

func (l *Layer) slowest() float64 {
	if l.VsBottom != 0 {
		return min(l.Vs, l.VsBottom)
	}
	return l.Vs
}

func (l *Layer) fastest() float64 { return max(l.Vs, l.VsBottom) }

// suspect is the note unit-suspect about layer l. It names the unit that the
// file states, where that is known.
func (p *Profile) suspect(l *Layer, format string, args ...any) Note {
	text := fmt.Sprintf(format, args...)
	if p.Reading != nil {
		if unit := p.Reading.Unit(Vs); unit != "" {
			text += fmt.Sprintf(" (the file gives it in %s)", unit)
		}
	}
	return Note{ID: "unit-suspect", Text: text, Place: p.placeOf(l)}
}

// fastAtSurface reports whether every layer that starts in the upper 10 m is
// faster than soil, and at least one of them is not described as rock.
func fastAtSurface(p *Profile) bool {
	rock := true
	for i := range p.Layers {
		l := &p.Layers[i]
		if l.Top >= soilDepth {
			break
		}
		if l.slowest() <= fastestSoil {
			return false
		}
		rock = rock && namesRock(l.Soil)
	}
	return !rock
}

// rocks are words, or ends of words, that describe rock.
var rocks = []string{
	"rock", "stone", "granite", "gneiss", "schist", "slate", "shale", "basalt",
	"dolomite", "marble", "quartzite", "gabbro", "diorite", "andesite",
	"rhyolite", "tuff", "chalk", "conglomerate", "breccia", "greywacke",
	"phyllite", "granodiorite",
}

// namesRock reports whether a description contains a word for rock.
func namesRock(description string) bool {
	words := strings.FieldsFunc(strings.ToLower(description), func(r rune) bool { return !unicode.IsLetter(r) })
	for _, word := range words {
		for _, rock := range rocks {
			if strings.HasSuffix(word, rock) {
				return true
			}
		}
	}
	return false
}

func lowVpVs(p *Profile) (Note, bool) {
	for i := range p.Layers {
		l := &p.Layers[i]
		if !l.Has(GivenVp) {
			continue
		}
		if r := l.vpVs(); r < ZeroPoisson*(1-vpVsRounding) {
			return Note{
				ID:    "low-vp-vs",
				Text:  fmt.Sprintf("Vp/Vs = %.5g at %.4g m is below 1.4142: Poisson's ratio is negative", r, l.Top),
				Place: p.placeOf(l),
			}, true
		}
	}
	return Note{}, false
}

func refractionReversal(p *Profile) (Note, bool) {
	method := strings.ToLower(p.Survey.Method)
	if !strings.Contains(method, "refraction") || strings.Contains(method, "microtremor") {
		return Note{}, false
	}
	depths, first := reversals(p.Layers)
	if first == nil {
		return Note{}, false
	}
	return Note{
		ID:    "refraction-reversal",
		Text:  fmt.Sprintf("the velocity falls with depth at %s, which refraction cannot find", depths),
		Place: p.placeOf(first),
	}, true
}

// reversals returns the depths at which the velocity falls with depth, in
// words, and the first layer that is slower than what lies above.
func reversals(layers []Layer) (depths string, first *Layer) {
	var list []string
	more := 0
	for i := range layers {
		l := &layers[i]
		inside := l.VsBottom != 0 && l.VsBottom < l.Vs
		if !inside && (i == 0 || l.Vs >= layers[i-1].VsAt(layers[i-1].Bottom)) {
			continue
		}
		if first == nil {
			first = l
		}
		if len(list) == maxDepthsOut {
			more++
			continue
		}
		list = append(list, fmt.Sprintf("%.4g m", l.Top))
	}
	depths = strings.Join(list, ", ")
	if more > 0 {
		depths += fmt.Sprintf(" and %d more depths", more)
	}
	return depths, first
}

func belowDepthReached(p *Profile) (Note, bool) {
	reached := p.Survey.DepthReached
	if reached <= 0 || p.DepthModelled() <= reached+Joint {
		return Note{}, false
	}
	i := 0
	for !p.Layers[i].HalfSpace() && p.Layers[i].Bottom <= reached+Joint {
		i++
	}
	return Note{
		ID:    "below-depth-reached",
		Text:  fmt.Sprintf("the layers go down to %.4g m, but the survey reached %.4g m", p.DepthModelled(), reached),
		Place: p.placeOf(&p.Layers[i]),
	}, true
}

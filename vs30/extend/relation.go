package extend

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"shearbook/profile"
	"shearbook/vs30"
)

// Standing is how well the numbers of a relation are known to agree with the
// paper, in the words that reports print.
type Standing string

// The standings.
const (
	Checked        Standing = "checked"         // two independent published sources agree
	OneSource      Standing = "one source"      // one published source
	FromMemory     Standing = "from memory"     // not checked against a source
	CommonPractice Standing = "common practice" // there is no paper to agree with
)

// Relation is one published way from a profile that ends above the averaging
// depth to the average over that depth. The relations that All and Find return
// are shared: they are to be read and not changed.
type Relation struct {
	ID     string // "boore-2004"
	Name   string // "Boore (2004)"
	Source string // the paper or standard
	Cite   string // the same, short enough for a note
	Region string // where the data behind it were measured

	// AverageOnly says that the relation estimates an average and nothing of
	// the velocities below the profile. The others continue the profile.
	AverageOnly bool

	MinDepth float64 // m of profile below the datum that it asks for; 0 if any will do
	MaxDepth float64 // m of profile below the datum that it goes up to; 0 if up to the averaging depth

	// MinVelocity and MaxVelocity, in m/s, are the averages that the relation
	// is for, 0 where there is no limit. Above MaxVelocity, measured or
	// estimated, it refuses; below MinVelocity it estimates with a note.
	MinVelocity, MaxVelocity float64

	Limits  string    // where the limits above come from
	Surface bool      // holds for averages from the ground surface only
	Over    []float64 // m: the averaging depths that it holds for; nil for any

	Standing Standing

	shallow  string // what follows for a profile shallower than MinDepth; "" if nothing is said
	table    []row  // of coefficients; nil if it has none
	refuses  bool   // refuses where the velocity falls at the bottom of the profile
	estimate func(*Relation, *ground) (result, *Refusal)
}

// ground is what a relation estimates from.
type ground struct {
	layers          []profile.Layer
	from, thickness float64
	depth           float64 // m of profile below from
	average         float64 // m/s over depth
}

// to returns the averaging depth in m below ground level.
func (g *ground) to() float64 { return g.from + g.thickness }

// end returns the depth in m below ground level at which the profile ends.
func (g *ground) end() float64 { return g.from + g.depth }

// result is what a relation itself knows of its estimate.
type result struct {
	velocity float64 // m/s
	below    float64 // m/s below the profile; 0 if it follows from velocity
	sigma    float64 // of ln velocity; 0 if none is published
	how      string  // the middle of the note: how the estimate was made
	doubts   []profile.Note
}

// Estimate is an average that was not measured over the whole of its depth.
type Estimate struct {
	Relation  string  // ID
	From      float64 // m below ground level: the datum
	Thickness float64 // m
	Velocity  float64 // m/s, the average over Thickness below From

	// SigmaLn is the standard deviation of ln Velocity about what would have
	// been measured, as the source gives it; 0 where it gives none. The errors
	// of the measurement come on top: sigmas add as squares.
	SigmaLn float64

	Reached  float64 // m below ground level: where the profile ends
	Measured float64 // m/s, the average from From to Reached

	// Below is the average in m/s that the estimate implies between Reached
	// and From+Thickness. A relation with AverageOnly does not claim it, but
	// an engineer can ask whether such ground is to be expected there.
	Below float64

	Note     profile.Note   // must stand beside Velocity wherever it is printed
	Doubts   []profile.Note // what else is doubtful about it
	Standing Standing
}

// Continue returns the layers continued to e.From + e.Thickness by one layer
// of velocity e.Below, so that their average is e.Velocity. For a relation
// with AverageOnly, and for the power law, that layer stands for the ground
// below without describing it. layers are those that were estimated from; the
// result is a new slice, and the index of what was added is len(layers).
func (e *Estimate) Continue(layers []profile.Layer) []profile.Layer {
	out := make([]profile.Layer, len(layers), len(layers)+1)
	copy(out, layers)
	return append(out, profile.Layer{Top: e.Reached, Bottom: e.From + e.Thickness, Vs: e.Below})
}

// relations holds the relations in the order of All. It is never changed.
var relations = []*Relation{
	constantVelocity(),
	boore2004(),
	boore2011(),
	booreJapan(),
	wang2015(),
	powerLaw(),
	asce7_22(),
}

// All returns the relations, the constant velocity first, then those from
// shallow averages by year, then the power law and the rule of ASCE/SEI 7-22.
func All() []*Relation { return slices.Clone(relations) }

// Find returns the relation of that ID. The error names the nearest ID there is.
func Find(id string) (*Relation, error) {
	ids := make([]string, len(relations))
	for i, r := range relations {
		if r.ID == id {
			return r, nil
		}
		ids[i] = r.ID
	}
	if like := profile.Nearest(id, ids); like != "" {
		return nil, fmt.Errorf("no relation is called %q; did you mean %q", id, like)
	}
	return nil, fmt.Errorf("no relation is called %q", id)
}

// SigmaLn returns the standard deviation of the natural logarithm of the
// average that is estimated from depth m of profile, 0 where none is published
// or the relation has no table of its own. The papers print that of the decimal
// logarithm; ln 10 of it is that of the natural one.
func (r *Relation) SigmaLn(depth float64) float64 {
	c, ok := between(r.table, depth)
	if !ok {
		return 0
	}
	return c.sigma * math.Ln10
}

// Estimate returns the average over thickness m below depth from (m below
// ground level) of a profile that ends above from+thickness. The error is a
// *Refusal where the relation does not hold, and says why.
//
// The layers are taken to be measured down to their end; Cut takes off what
// lies below the depth that a survey reached.
func (r *Relation) Estimate(layers []profile.Layer, from, thickness float64) (Estimate, error) {
	g, refusal := r.look(layers, from, thickness)
	if refusal != nil {
		return Estimate{}, refusal
	}
	got, refusal := r.estimate(r, g)
	if refusal != nil {
		return Estimate{}, refusal
	}
	below, refusal := r.below(g, got.velocity)
	if refusal != nil {
		return Estimate{}, refusal
	}
	if got.below > 0 {
		below = got.below
	}
	e := Estimate{Relation: r.ID, From: from, Thickness: thickness, Velocity: got.velocity,
		SigmaLn: got.sigma, Reached: g.end(), Measured: g.average, Below: below,
		Doubts: append(got.doubts, r.doubts(g)...), Standing: r.Standing}
	e.Note = r.note(&e, got.how)
	return e, nil
}

// below returns the average in m/s that velocity, over the whole averaging
// depth, leaves for the ground below the profile: (Z−d) / (Z/V − t_d).
func (r *Relation) below(g *ground, velocity float64) (float64, *Refusal) {
	if r.MaxVelocity > 0 && velocity > r.MaxVelocity {
		return 0, r.refuse(HardRock, "the estimate of %.4g m/s is above %.4g m/s, hard rock, which has to be measured",
			velocity, r.MaxVelocity)
	}
	time := g.thickness/velocity - g.depth/g.average
	below := (g.thickness - g.depth) / time
	if !(time > 0) || below > profile.MaxVelocity {
		return 0, r.refuse(Implausible, "the estimate of %.4g m/s leaves no travel time for the ground below the profile", velocity)
	}
	return below, nil
}

// note is the note that must stand beside an estimate.
func (r *Relation) note(e *Estimate, how string) profile.Note {
	sigma := "no sigma is published for it"
	if e.SigmaLn > 0 {
		sigma = fmt.Sprintf("sigma of ln %.2g", e.SigmaLn)
	}
	return profile.Note{ID: "extended", Text: "the profile ends " + four(e.Reached) + " m below ground level; " + how +
		" (" + r.Cite + ", " + string(r.Standing) + "; " + sigma + "); it puts the ground below the profile at " +
		four(e.Below) + " m/s, and is too high where that is slower"}
}

// four writes a number with four significant digits, as fmt does with %.4g.
func four(x float64) string {
	var room [32]byte
	if b, ok := vs30.AppendFour(room[:0], x); ok {
		return string(b)
	}
	return strconv.FormatFloat(x, 'g', 4, 64)
}

// Cut returns the layers down to depth m below ground level: those that start
// above it, the last of them cut. The result is a new slice.
func Cut(layers []profile.Layer, depth float64) []profile.Layer {
	var out []profile.Layer
	for _, l := range layers {
		if depth-l.Top <= vs30.Touching {
			break
		}
		if l.Bottom-depth > vs30.Touching {
			if l.Gradient() {
				l.VsBottom = l.VsAt(depth)
			}
			l.Bottom = depth
		}
		out = append(out, l)
	}
	return out
}

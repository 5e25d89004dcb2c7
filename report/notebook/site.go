package notebook

import (
	"errors"
	"fmt"
	"math"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/extend"
	"shearbook/vs30/siteclass"
)

// site is one profile of the notebook with what has been made of it.
type site struct {
	entry   ProfileEntry
	profile *profile.Profile
	datum   float64 // m below ground level from which averages without a code start
	extend  string  // one of report.Extensions; "" refuses a profile that is too short

	decisions  map[string]siteclass.Decision // by code, those that a working told
	refused    map[string]bool               // codes whose fault is told already
	classified map[string]classified         // by code, whether told or not
}

// classified is what a code makes of a site.
type classified struct {
	decision siteclass.Decision
	err      error
}

func (ev *evaluation) newSite(e ProfileEntry, p *profile.Profile) *site {
	return &site{entry: e, profile: p, datum: ev.nb.Header.Datum.Value, extend: ev.nb.Header.Extend,
		decisions: map[string]siteclass.Decision{}, refused: map[string]bool{}, classified: map[string]classified{}}
}

// layersTo returns the layers of a site down to a thickness below a datum:
// its own, or their extension where the notebook asks for one, with the note
// that says so.
func (ev *evaluation) layersTo(s *site, from, thickness float64) (layers []profile.Layer, notes []profile.Note) {
	layers = s.profile.Layers
	if layers[len(layers)-1].Bottom >= from+thickness-vs30.Touching {
		if from+thickness > s.profile.DepthReached()+vs30.Touching {
			notes = []profile.Note{ev.belowReach(s, from+thickness)}
		}
		return layers, notes
	}
	if s.extend == "" {
		return layers, nil
	}
	extended, notes, err := report.Extended(s.profile, s.extend, from, thickness)
	if err != nil {
		return layers, nil
	}
	return extended, notes
}

// noVelocity says that a profile has none.
func noVelocity(s *site) string {
	return "profile " + s.profile.Name + " states no velocities"
}

// average returns the time-averaged velocity over a thickness below a datum
// with its notes.
func (ev *evaluation) average(s *site, from, thickness float64) Quantity {
	if s.profile.NoVelocity {
		return missing(noVelocity(s))
	}
	layers, notes := ev.layersTo(s, from, thickness)
	v, err := vs30.Average(layers, from, thickness)
	if err != nil {
		return missing(ev.shortText(s, err))
	}
	return metresPerSecond(v, notes...)
}

// belowReach is the note on an average that uses the model below the depth
// the survey reached.
func (ev *evaluation) belowReach(s *site, depth float64) profile.Note {
	return profile.Note{ID: "below-depth-reached", Text: fmt.Sprintf(
		"%s: the survey reached %s; down to %s the model's lowest velocity, %s, is taken to continue",
		s.profile.Name, metres(s.profile.DepthReached()).Print(ev.system), metres(depth).Print(ev.system),
		metresPerSecond(s.profile.Layers[len(s.profile.Layers)-1].Vs).Print(ev.system))}
}

// shortText says that a profile is too short, and by how much.
func (ev *evaluation) shortText(s *site, err error) string {
	var short *vs30.ShortError
	if refusal := ev.refusal(s, err); refusal != "" {
		return refusal
	}
	if errors.As(err, &short) {
		return fmt.Sprintf("profile %q reaches %s below ground level, %s are needed", s.profile.Name,
			metres(short.Reached).Print(ev.system), metres(short.Needed).Print(ev.system))
	}
	return err.Error()
}

// refusal says why the relation that was to extend a profile does not hold;
// "" where that is not what is wrong.
func (ev *evaluation) refusal(s *site, err error) string {
	var short *vs30.ShortError
	if errors.As(err, &short) && s.extend != "" && !s.profile.NoVelocity {
		_, _, err = report.Extended(s.profile, s.extend, s.datum, short.Needed-s.datum)
	}
	var refused *extend.Refusal
	if !errors.As(err, &refused) {
		return ""
	}
	return fmt.Sprintf("profile %q cannot be extended by %s: %s", s.profile.Name, refused.Relation, refused.Text)
}

// shortHint is what to do about a profile that is too short.
const shortHint = "add `extend: constant-velocity`, or another relation of the extend working, to the front matter if the ground below may be estimated so; or survey deeper"

// shortTests is the same where the profile has no velocities.
const shortTests = "N and su are not carried below their tests: bore deeper, or add `correlate: imai-tonouchi-1982` to the profile and `extend: constant-velocity`, if velocities may be estimated so"

// decide classifies a site under a code, once. It adds a fault where there
// is no answer.
func (ev *evaluation) decide(s *site, code *siteclass.Code, at profile.Place) (siteclass.Decision, bool) {
	if d, ok := s.decisions[code.ID]; ok {
		return d, true
	}
	if s.refused[code.ID] {
		return siteclass.Decision{}, false
	}
	d, err := ev.classify(s, code)
	if err != nil {
		s.refused[code.ID] = true
		hint := ""
		if errors.As(err, new(*vs30.ShortError)) {
			hint = shortHint
			if s.profile.NoVelocity {
				hint = shortTests
			}
		}
		ev.add(at, hint, "%s: %s", code.ID, ev.shortText(s, err))
		return d, false
	}
	s.decisions[code.ID] = d
	ev.results = append(ev.results, report.NewResult(s.profile, d, report.Average30(s.profile, d.Datum, ev.facts(s))))
	return d, true
}

// classify decides, once for each code: an expression may ask as often as it
// stands in the prose.
func (ev *evaluation) classify(s *site, code *siteclass.Code) (siteclass.Decision, error) {
	c, ok := s.classified[code.ID]
	if !ok {
		c.decision, c.err = report.Classify(s.profile, code, ev.facts(s))
		s.classified[code.ID] = c
	}
	return c.decision, c.err
}

// facts is what the notebook states of a site.
func (ev *evaluation) facts(s *site) report.Facts {
	h := ev.nb.Header
	return report.Facts{Datum: h.Datum, Foundation: h.Foundation, Ground: h.Ground, Extend: s.extend}
}

// Results is what an expression can say of a profile: {{ L1.vs30 }}.
type Results struct {
	Name    string   `expr:"name"`
	Vs30    Quantity `expr:"vs30"`    // over 30 m below the datum
	Average Quantity `expr:"average"` // the average that the notebook's code uses
	Depth   Quantity `expr:"depth"`   // over which it is taken
	Datum   Quantity `expr:"datum"`   // below ground level
	Reached Quantity `expr:"reached"` // depth the survey reached
	Slowest Quantity `expr:"slowest"` // velocity of the slowest layer
	Fastest Quantity `expr:"fastest"` // velocity of the fastest layer
	Layers  int      `expr:"layers"`
	Method  string   `expr:"method"`
	Basis   string   `expr:"basis"`
	Class   string   `expr:"class"` // under the notebook's code
	Code    string   `expr:"code"`
	Edition string   `expr:"edition"`
	Margin  Quantity `expr:"margin"` // to the nearest bound, in percent of the average
}

// scope returns the names that expressions may use.
func (ev *evaluation) scope() scope {
	names := scope{}
	for _, s := range ev.sites {
		names[s.profile.Name] = ev.resultsOf(s)
	}
	for name, q := range ev.named {
		names[name] = q
	}
	return names
}

func (ev *evaluation) resultsOf(s *site) Results {
	p := s.profile
	slow, fast := math.Inf(1), 0.0
	for _, l := range p.Layers {
		slow, fast = min(slow, l.Vs, l.VsAt(l.Bottom)), max(fast, l.Vs, l.VsAt(l.Bottom))
	}
	r := Results{Name: p.Name, Vs30: ev.average(s, s.datum, 30), Datum: metres(s.datum), Reached: metres(p.DepthReached()),
		Slowest: metresPerSecond(slow), Fastest: metresPerSecond(fast), Layers: len(p.Layers),
		Method: p.Survey.Method, Basis: basisOf(p)}
	if p.NoVelocity {
		r.Slowest, r.Fastest = missing(noVelocity(s)), missing(noVelocity(s))
	}
	code := ev.code()
	if code == nil {
		none := missing("the front matter names no code")
		r.Average, r.Depth, r.Margin = none, none, none
		return r
	}
	r.Code, r.Edition = code.ID, code.Edition
	d, ok := s.decisions[code.ID]
	if !ok {
		var err error
		if d, err = ev.classify(s, code); err != nil {
			none := missing(ev.shortText(s, err))
			r.Average, r.Depth, r.Margin = none, none, none
			return r
		}
	}
	r.Class, r.Average, r.Depth = d.Class, metresPerSecond(d.Velocity, d.Notes...), metres(d.Thickness)
	if d.Velocity == 0 {
		r.Average = missing("the class is by " + d.Route + ", without an average velocity")
	}
	r.Margin = missing("the class does not hang on a bound of the average")
	if d.Margin != nil {
		r.Margin = Quantity{Value: math.Abs(d.Margin.Percent), Decimals: 1}
	}
	return r
}

// basisOf returns the basis that all layers share, or "mixed".
func basisOf(p *profile.Profile) string {
	first := p.BasisOf(0)
	for i := range p.Layers {
		if p.BasisOf(i) != first {
			return "mixed"
		}
	}
	return first.String()
}

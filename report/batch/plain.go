package batch

import (
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/extend"
	"shearbook/vs30/siteclass"
)

// found is what a code says of a plain profile.
type found struct {
	siteclass.Verdict
	carried bool // by the deepest velocity, down to the depth that the code asks for
	flags   Flags
}

// frame is what the rows of plain profiles under a code have in common: what
// stands in them behind the name, the class and the average, and behind the depth
// reached.
type frame struct {
	code, route, depth string
	ends               [2][siteclass.FromMemory + 1]string // datum, basis and standing; those of profiles that are carried on come second
}

func newFrame(c *siteclass.Code, q *siteclass.Quick) frame {
	if q == nil {
		return frame{}
	}
	cells := func(texts ...string) string {
		var b strings.Builder
		for _, text := range texts {
			b.WriteByte(',')
			b.Write(appendCell(nil, text))
		}
		return b.String() + ","
	}
	k := frame{code: cells(c.ID), route: cells(byVelocity), depth: cells(string(appendKnown(nil, q.Depth(), 2)))}
	for i, basis := range [...]string{unstated, extended} {
		for s := siteclass.Checked; s <= siteclass.FromMemory; s++ {
			k.ends[i][s] = cells(string(appendRounded(nil, q.From(), 2)), basis, s.String())
		}
	}
	return k
}

// write writes the rows of the profile that was read last, as clerk.unit would
// where f.brief. It returns false, and writes nothing, where clerk.unit must.
func (f *fast) write(c *clerk, line int) bool {
	reached, flags := f.base.DepthModelled(), Flags(0)
	for i := range f.found {
		v := &f.found[i]
		if !f.verdict(i, v) {
			return false
		}
		v.flags |= c.flags(v.ToClass, v.Percent, v.Datum+v.Thickness-reached)
		flags |= v.flags
	}
	for i := range f.found {
		v := &f.found[i]
		c.summary = append(c.summary, c.fileCell(f.head.File())...)
		c.summary = f.appendRow(c.summary, i, line, reached)
		c.tally.add(f.codes[i].ID, v.Class, 1)
	}
	c.count(len(f.found), false, flags)
	return true
}

// appendRow adds what stands in the row under code number i behind the file, as
// appendRest does.
func (f *fast) appendRow(b []byte, i, line int, reached float64) []byte {
	k, v := &f.frames[i], &f.found[i]
	b = append(appendDigits(b, uint64(line)), ',')
	b = append(appendCell(b, f.name), k.code...)
	b = append(appendCell(b, v.Class), k.route...)
	b = append(appendRounded(b, v.Velocity, 1), k.depth...)
	b = append(appendKnown(b, v.Vs30, 1), ',')
	end := &k.ends[0]
	if v.carried {
		end = &k.ends[1]
	}
	b = append(appendRounded(b, reached, 2), end[v.Standing]...)
	b = append(appendCell(b, v.ToClass), ',')
	if v.ToClass != "" {
		b = appendRounded(b, v.Percent, 1)
	}
	b = v.flags.append(append(b, ','))
	if !f.placed {
		return append(b, ",0,0,,,,,,,\n"...)
	}
	return append(appendPosition(append(b, ",0,0,"...), &f.base.Position), ",,\n"...)
}

// decide makes the row of the profile in hand under code number i. It returns
// false where report.Classify must.
func (f *fast) decide(c *clerk, u *unit, i int, r *result) bool {
	v := &f.found[i]
	if !f.verdict(i, v) {
		return false
	}
	row := &r.row
	row.DepthReached = u.profile.DepthReached()
	row.Class, row.Route, row.Velocity, row.Depth, row.Datum = v.Class, byVelocity, v.Velocity, v.Thickness, v.Datum
	row.Basis, row.Standing, row.Vs30 = unstated, v.Standing.String(), v.Vs30
	row.ToClass, row.Margin = v.ToClass, v.Percent
	if v.carried {
		row.Basis = extended
	}
	if !c.job.FaultsAlone {
		if r.fell = v.Reversed && !v.carried; v.carried {
			if r.notes = f.carriedNotes(u.profile, f.quick[i]); r.notes == nil {
				return false
			}
		}
	}
	c.flag(u, r)
	row.Flags |= v.flags
	if r.fell {
		row.Notes++
	}
	return true
}

// verdict decides the profile that was read last under code number i, and sets
// the flags that the notes on it would. It returns false where it cannot.
func (f *fast) verdict(i int, v *found) (ok bool) {
	q, layers := f.quick[i], f.base.Layers
	if q == nil {
		return false
	}
	v.flags, v.carried = 0, false
	if v.Verdict, ok = q.Decide(layers); !ok {
		end := layers[len(layers)-1].Bottom
		if f.relation == nil || q.From() != 0 || end >= q.Depth()-profile.Joint { // beyond which Estimate may refuse
			return false
		}
		if v.Verdict, ok = q.DecideCarried(layers); !ok {
			return false
		}
		if v.carried, v.flags = true, Shallow; extend.FallsAtBottom(layers, 0) {
			v.flags |= Odd
		}
	}
	if v.Reversed {
		v.flags |= Reversed
	}
	if v.Vs30 == 0 {
		if average := report.Average30(&f.base, v.Datum, f.facts); average != nil {
			v.Vs30 = *average
		}
	}
	return true
}

// carriedNotes are the notes on a profile that the deepest velocity carries down
// to the depth that a code asks for.
func (f *fast) carriedNotes(p *profile.Profile, q *siteclass.Quick) []profile.Note {
	e, err := f.relation.Estimate(p.Layers, 0, q.Depth())
	if err != nil {
		return nil
	}
	f.longer = append(append(f.longer[:0], p.Layers...), profile.Layer{Top: e.Reached, Bottom: e.From + e.Thickness, Vs: e.Below})
	notes := append(append(make([]profile.Note, 0, 5), e.Note), e.Doubts...)
	_, notes, ok := q.DecideExtended(p, f.longer, notes)
	if !ok {
		return nil
	}
	return notes
}

// What siteclass.Decision says of a profile that is decided by its velocity
// alone and does not state how that came to be known.
const (
	constantVelocity = "constant-velocity"

	byVelocity = "velocity"
	unstated   = "not stated"
	extended   = "extended"
)

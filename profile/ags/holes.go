package ags

import (
	"cmp"
	"slices"

	"shearbook/profile"
)

// Hole is what a file says of one hole beside its velocities: for estimates of
// the velocity from tests, where none was measured.
type Hole struct {
	Name        string
	Position    profile.Position
	GroundLevel profile.Optional // m above the stated datum
	Strata      []Stratum        // of GEOL, top down, without overlaps
	Tests       []Test           // N, su and the others, top down
	Cones       []Cone           // of SCPG and CPTG, in the order of the file
	Notes       []profile.Note   // on what was left out, or read as a bound
}

// Stratum is one stratum of a hole.
type Stratum struct {
	Top, Bottom float64 // m; Bottom is +Inf where it is not stated
	Soil        string
	Line        int
}

// Test is the result of one test.
type Test struct {
	Depth    float64          // m
	Quantity profile.Quantity // N, Su, PI, WaterContent or Density
	Value    float64          // in the unit of profile.Layer
	Refused  bool             // penetration was
	Heading  string           // such as ISPT_NVAL or ISPT_N60
	Line     int
}

// Cone is one cone penetration test.
type Cone struct {
	Name       string // SCPG_TESN or CPTG_TESN
	Type       string // its code, such as PC or SC
	WaterTable profile.Optional
	Readings   []ConeReading // top down
}

// ConeReading is a reading of a cone. What was not read is not known.
type ConeReading struct {
	Depth        float64          // m
	Tip          profile.Optional // kPa; qc, not corrected for pore pressure
	Sleeve       profile.Optional // kPa; fs
	PorePressure profile.Optional // kPa; u2
	Line         int
}

// ReadHoles returns the holes of a file, in the order of LOCA, whether or not
// they have velocities. The error is as that of Read, but a file without
// velocities has none.
func ReadHoles(file string, data []byte, opt Options) ([]Hole, error) {
	r := newReader(file, opt)
	var cones map[*hole][]Cone
	if r.open(data) && r.readHoles() && r.readTests() {
		cones = r.cones()
	}
	if err := r.Err(); err != nil {
		return nil, err
	}
	list := make([]Hole, len(r.holes))
	for i, h := range r.holes {
		list[i] = Hole{Name: h.id, Position: h.position, GroundLevel: h.groundLevel, Strata: h.exportStrata(), Tests: h.exportTests(), Cones: cones[h], Notes: r.remarkNotes(h)}
	}
	return list, nil
}

func (h *hole) exportStrata() []Stratum {
	var list []Stratum
	for _, s := range h.strata {
		if s.bottom > s.top {
			list = append(list, Stratum{s.top, s.bottom, s.soil, int(s.row.line)})
		}
	}
	return list
}

func (h *hole) exportTests() []Test {
	var list []Test
	for i := range h.results {
		x := &h.results[i]
		list = append(list, Test{x.depth, x.source.q, x.value, x.refused, x.source.name, int(x.row.line)})
	}
	slices.SortStableFunc(list, func(a, b Test) int { return cmp.Compare(a.Depth, b.Depth) })
	return list
}

// coneGroups are the groups of cone tests: SCPG and SCPT of all editions, CPTG
// and CPTT of 4.2.
var coneGroups = []struct {
	general, readings                string
	test, kind, water                string
	depth, tip, sleeve, porePressure string
}{
	{"SCPG", "SCPT", "SCPG_TESN", "SCPG_TYPE", "SCPG_WAT", "SCPT_DPTH", "SCPT_RES", "SCPT_FRES", "SCPT_PWP2"},
	{"CPTG", "CPTT", "CPTG_TESN", "CPTG_TYPE", "CPTG_WAT", "CPTT_DPTH", "CPTT_QC", "CPTT_FS", "CPTT_U2"},
}

// cones reads cone tests.
func (r *reader) cones() map[*hole][]Cone {
	list := map[*hole][]Cone{}
	at := map[run]int{} // index of each test in the list of its hole, from 1
	find := func(h *hole, group, test string) *Cone {
		key := run{hole: h, group: group, id: test}
		if at[key] == 0 {
			list[h] = append(list[h], Cone{Name: test})
			at[key] = len(list[h])
		}
		return &list[h][at[key]-1]
	}
	for _, k := range coneGroups {
		for _, g := range r.named(k.general) {
			loca, water := g.column("LOCA_ID"), r.soft(g, g.column(k.water), profile.Length)
			for c := r.cursor(g); c.row(); {
				if h := r.hole(c, loca); h != nil {
					cone := find(h, k.general, c.text(g.column(k.test)))
					cone.Type = c.text(g.column(k.kind))
					if z, ok := r.optional(h, c, water, profile.Length); ok {
						cone.WaterTable = profile.Known(z)
					}
				}
			}
		}
		for _, g := range r.named(k.readings) {
			loca, test, depth := g.column("LOCA_ID"), g.column(k.test), r.length(g, g.column(k.depth))
			values := [3]measure{}
			for i, heading := range []string{k.tip, k.sleeve, k.porePressure} {
				values[i] = r.soft(g, g.column(heading), profile.Stress)
			}
			for c := r.cursor(g); c.row(); {
				h := r.hole(c, loca)
				if h == nil {
					continue
				}
				if x, ok := r.coneReading(h, c, depth, values); ok {
					cone := find(h, k.general, c.text(test))
					cone.Readings = append(cone.Readings, x)
				}
			}
		}
	}
	for _, cones := range list {
		for i := range cones {
			slices.SortStableFunc(cones[i].Readings, func(a, b ConeReading) int { return cmp.Compare(a.Depth, b.Depth) })
		}
	}
	return list
}

// coneReading reads the present row.
func (r *reader) coneReading(h *hole, c *cursor, depth measure, values [3]measure) (ConeReading, bool) {
	z, ok := r.optional(h, c, depth, profile.Length)
	if !ok || z < 0 {
		return ConeReading{}, false
	}
	x := ConeReading{Depth: z, Line: c.first}
	for i, to := range []*profile.Optional{&x.Tip, &x.Sleeve, &x.PorePressure} {
		if v, ok := r.optional(h, c, values[i], profile.Stress); ok {
			*to = profile.Known(v)
		}
	}
	return x, true
}

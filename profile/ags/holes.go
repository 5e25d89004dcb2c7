package ags

import (
	"cmp"
	"math"
	"slices"
	"strings"

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
	Energy   float64          // %, ISPT_ERAT of a blow count as measured; 0 if not stated
	Heading  string           // such as ISPT_NVAL or ISPT_N60
	Line     int
}

// Cone is one cone penetration test.
type Cone struct {
	Name       string // SCPG_TESN or CPTG_TESN
	Type       string // its code, such as PC or SC
	WaterTable profile.Optional
	AreaRatio  float64          // SCPG_CAR or CPTG_CAR, > 0 and ≤ 1; 0 if not stated
	Columns    []profile.Column // of what the file says of each reading
	Readings   []ConeReading    // top down
}

// ConeReading is a reading of a cone. What was not read is not known.
type ConeReading struct {
	Depth        float64          // m
	Tip          profile.Optional // kPa; qc, not corrected for pore pressure
	Sleeve       profile.Optional // kPa; fs
	PorePressure profile.Optional // kPa; u2
	Line         int
	Cells        string // the reading in the words of the file, in the order of Cone.Columns, as of profile.Row
}

// ReadHoles returns the holes of a file, in the order of LOCA, whether or not
// they have velocities. The error is as that of Read, but a file without
// velocities has none.
//
// The unit of what a cone measures must be stated, and a tip resistance above
// 150 MPa or a sleeve friction above 5 MPa is a fault.
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
		list = append(list, Test{x.depth, x.source.q, x.value, x.refused, x.energy, x.source.name, int(x.row.line)})
	}
	slices.SortStableFunc(list, func(a, b Test) int { return cmp.Compare(a.Depth, b.Depth) })
	return list
}

// coneGroups are the groups of cone tests: SCPG and SCPT of all editions, CPTG
// and CPTT of 4.2.
var coneGroups = []struct {
	general, readings                string
	test, kind, water, ratio         string
	depth, tip, sleeve, porePressure string
}{
	{"SCPG", "SCPT", "SCPG_TESN", "SCPG_TYPE", "SCPG_WAT", "SCPG_CAR", "SCPT_DPTH", "SCPT_RES", "SCPT_FRES", "SCPT_PWP2"},
	{"CPTG", "CPTT", "CPTG_TESN", "CPTG_TYPE", "CPTG_WAT", "CPTG_CAR", "CPTT_DPTH", "CPTT_QC", "CPTT_FS", "CPTT_U2"},
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
					cone.AreaRatio = r.areaRatio(h, c, g.column(k.ratio))
				}
			}
		}
		for _, g := range r.named(k.readings) {
			loca, test, depth := g.column("LOCA_ID"), g.column(k.test), r.length(g, g.column(k.depth))
			values := [3]measure{}
			headings := []string{k.tip, k.sleeve, k.porePressure}
			for i, heading := range headings {
				values[i] = r.resistance(g, g.column(heading))
			}
			unbelieved := map[string]bool{} // headings that are told already
			for c := r.cursor(g); c.row(); {
				h := r.hole(c, loca)
				if h == nil {
					continue
				}
				if x, ok := r.coneReading(h, c, depth, values); ok {
					r.believe(c, values, x, unbelieved)
					cone := find(h, k.general, c.text(test))
					cone.Readings = append(cone.Readings, x)
					if cone.Columns == nil {
						cone.Columns = columnsOf(g, depth, values, headings)
					}
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

// columnsOf are the columns of a cone's readings in the words of the file; there
// are all of them, so that every row has as many cells.
func columnsOf(g *group, depth measure, values [3]measure, headings []string) []profile.Column {
	columns := []profile.Column{{Heading: g.headings[depth.i], Unit: depth.unit, Quantity: profile.Depth}}
	for i, q := range []profile.Quantity{profile.TipResistance, profile.SleeveFriction, profile.PorePressure} {
		columns = append(columns, profile.Column{Heading: headings[i], Unit: values[i].unit, Quantity: q})
	}
	return columns
}

// coneReading reads the present row.
func (r *reader) coneReading(h *hole, c *cursor, depth measure, values [3]measure) (ConeReading, bool) {
	z, ok := r.optional(h, c, depth, profile.Length)
	if !ok || z < 0 {
		return ConeReading{}, false
	}
	x := ConeReading{Depth: z, Line: c.first, Cells: strings.Join([]string{c.text(depth.i), c.text(values[0].i), c.text(values[1].i), c.text(values[2].i)}, profile.CellSeparator)}
	for i, to := range []*profile.Optional{&x.Tip, &x.Sleeve, &x.PorePressure} {
		if v, ok := r.optional(h, c, values[i], profile.Stress); ok {
			*to = profile.Known(v)
		}
	}
	return x, true
}

// resistance is a column of stresses of a cone, whose unit must be stated where
// there are any.
func (r *reader) resistance(g *group, i int) measure {
	if i == 0 || r.unitOf(g, i) != "" {
		return r.soft(g, i, profile.Stress)
	}
	for c := r.cursor(g); c.row(); {
		if len(c.get(i)) > 0 {
			r.Fault(g.places[i].place(), "write it in the UNIT row of "+g.name+", as MPa or kPa", "heading %s states no unit", g.headings[i])
			break
		}
	}
	return measure{}
}

// Beyond these no cone is pushed: what is more is a slip of its unit. Common
// practice: heavy cones end at a tip resistance of 100 MPa, and at a sleeve
// friction of 1 to 2 MPa.
const (
	maxTip    = 150_000 // kPa
	maxSleeve = 5_000   // kPa
)

// believe tells of resistances that no cone meets, once for each heading.
func (r *reader) believe(c *cursor, values [3]measure, x ConeReading, told map[string]bool) {
	for _, of := range []struct {
		m    measure
		v    profile.Optional
		most float64
	}{{values[0], x.Tip, maxTip}, {values[1], x.Sleeve, maxSleeve}} {
		heading := c.g.headings[of.m.i]
		if !of.v.Known || math.Abs(of.v.Value) <= of.most || told[heading] {
			continue
		}
		told[heading] = true
		r.Fault(c.placeOf(of.m.i), "is the unit kPa? then write so in the UNIT row of "+c.g.name,
			"%s %s %s is more than the %.4g MPa that a cone can meet", heading, profile.Quote(c.get(of.m.i)), of.m.unit, of.most/1000)
	}
}

// areaRatio reads the area ratio of a cone, the a of qt = qc + (1 − a)·u2. One
// that cannot be one is left out and remarked.
func (r *reader) areaRatio(h *hole, c *cursor, i int) float64 {
	v, ok := r.optional(h, c, measure{i: i, factor: 1}, profile.Dimensionless)
	if !ok || v > 0 && v <= 1 {
		return v
	}
	h.remark("not-read", c.g.headings[i], c.placeOf(i), c.g.headings[i]+" "+profile.Quote(c.get(i))+" is not an area ratio of 0 to 1 and was left out")
	return 0
}

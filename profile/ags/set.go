package ags

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// set is the velocities of one run or test in one hole, which become a
// profile.
type set struct {
	hole     *hole
	run      run
	what     string // heading or parameter
	source   *source
	unit     string // of the velocities; "" where rows differ
	survey   profile.Survey
	metadata []profile.Metadatum
	readings []reading
	analyses []string // ISTA_ANYN of the readings
	blank    int      // rows without a reading
	invalid  int      // rows marked as invalid
	at       spot
	tested   profile.Quantity // whose tests make the layers, where the hole has no velocities; otherwise Unknown
}

// reading is one velocity: at a depth, where top and base are the same, or of
// an interval.
type reading struct {
	top, base float64 // m; base is +Inf where it is blank
	v         float64 // m/s
	fields
	column   int32 // of the velocity, in characters
	analysis int16 // index in the set's analyses
}

// fields is where in the file a reading stands.
type fields struct {
	row                         rowAt
	depthOff, baseOff, valueOff int32
	from                        uint8 // index of the depth in the source's depths
}

// point reports whether the reading is at a depth.
func (x *reading) point() bool { return x.base == x.top }

// run names the readings of a run or test.
type run struct {
	hole  *hole
	group string
	id    string
	tool  string // of a log
}

// kind is what was measured in a run.
type kind struct {
	run  run
	what string
}

// velocities is the state of reading velocities.
type velocities struct {
	r       *reader
	sets    map[run][]*set
	kinds   map[kind]*set
	p       map[run]*set    // of P waves
	unknown map[string]bool // headings and parameters in r.unread
	n       int             // readings
}

// unread is a velocity of which nothing says that it is of shear waves.
type unread struct {
	name, unit string
	at         spot
}

// readVelocities reads whatever gives velocities.
func (r *reader) readVelocities() bool {
	v := velocities{r: r, sets: map[run][]*set{}, kinds: map[kind]*set{}, p: map[run]*set{}, unknown: map[string]bool{}}
	v.wireline()
	v.seismic()
	v.written()
	v.estimated()
	v.users()
	r.p = v.p
	return true
}

// set is the set of readings of one kind in a run, made where there is none.
func (v *velocities) set(of run, what string, s *source, at profile.Place) *set {
	key := kind{of, what}
	if x := v.kinds[key]; x != nil {
		return x
	}
	x := &set{hole: of.hole, run: of, what: what, source: s, unit: s.unit, at: spotOf(at)}
	v.kinds[key] = x
	v.sets[of] = append(v.sets[of], x)
	v.r.sets = append(v.r.sets, x)
	return x
}

// compression adds a reading of P waves to a run. Where a run has several
// parameters of them the first counts.
func (v *velocities) compression(of run, what string, s *source, unit string, x reading) {
	p := v.p[of]
	if p == nil {
		p = &set{hole: of.hole, run: of, what: what, source: s}
		v.p[of] = p
	}
	if p.what == what {
		p.add(x, unit)
	}
}

// add adds a reading, which the file gives in a unit.
func (s *set) add(x reading, unit string) {
	if len(s.readings) == 0 {
		s.unit = unit
	} else if s.unit != unit {
		s.unit = ""
	}
	s.push(x)
}

// push adds a reading. A set that has had all rows of a group so far, and many,
// makes room for the rest of them at once.
func (s *set) push(x reading) {
	const many = 1 << 16
	if n, rows := len(s.readings), s.source.g.rows; n == many && n < len(rows) && rows[n] == x.row {
		s.readings = slices.Grow(s.readings, len(rows)-n)
	}
	s.readings = append(s.readings, x)
}

// drop removes the sets that meet a condition.
func (v *velocities) drop(is func(*set) bool) {
	kept := v.r.sets[:0]
	for _, s := range v.r.sets {
		if !is(s) {
			kept = append(kept, s)
		}
	}
	v.r.sets = kept
}

// reading reads the velocity in column i of the present row, and its depth. It
// returns false where there is a fault.
func (v *velocities) reading(c *cursor, s *source, i int, u speed) (x reading, ok bool) {
	at := c.placeOf(i)
	x = reading{fields: fields{row: c.here(), valueOff: c.offset(i)}, column: int32(at.Column)}
	okay := v.interval(c, s, &x)
	value, problem := parseNumber(c.get(i))
	hint := ""
	switch {
	case problem != "":
		hint = hintNumber(c.get(i))
	case value == 0 && u.slowness:
		problem, hint = "is zero", "leave the field blank where nothing was measured"
	case value == 0:
		problem, hint = "is zero: "+profile.ZeroVsReason, profile.ZeroVsHint
	case value < 0:
		problem, hint = "is not positive", "leave the field blank where nothing was measured"
	}
	if problem != "" {
		v.r.Fault(at, hint, "%s %s %s", c.g.headings[i], profile.Quote(c.get(i)), problem)
		return x, false
	}
	x.v = u.si(value)
	return x, okay && v.count(at)
}

// count counts a reading and returns false where there are too many.
func (v *velocities) count(at profile.Place) bool {
	if v.n++; v.n == MaxReadings+1 {
		v.r.Stop(at, "split it", "the file has more than %d velocities", MaxReadings)
	}
	return v.n <= MaxReadings
}

func hintNumber(text []byte) string {
	if strings.ContainsRune(string(text), ',') {
		return "write decimals with a point, and no separators of thousands"
	}
	return "write a plain number such as 212"
}

// interval reads the depth of the present row, or its top and base.
func (v *velocities) interval(c *cursor, s *source, x *reading) bool {
	z, column, problem := s.depth(c)
	heading := s.depthHeading()
	switch {
	case column == 0:
		v.r.Fault(c.placeOf(s.depths[0].i), "give the depth of every velocity", "%s is blank beside a velocity", heading)
		return false
	case problem == "" && z < 0:
		problem = "is negative"
	case problem == "" && z > profile.MaxDepth:
		problem = "is deeper than 100 km"
	}
	if problem != "" {
		v.r.Fault(c.placeOf(column), "depths are numbers, positive downward from ground level", "%s %s %s", c.g.headings[column], profile.Quote(c.get(column)), problem)
		return false
	}
	x.top, x.base, x.depthOff, x.baseOff = z, z, c.offset(column), c.offset(s.base.i)
	x.from = uint8(slices.IndexFunc(s.depths, func(m measure) bool { return m.i == column }))
	if s.base.i == 0 {
		return true
	}
	text := c.get(s.base.i)
	if len(text) == 0 {
		x.base = math.Inf(1)
		return true
	}
	base, problem := parseNumber(text)
	base *= s.base.factor
	switch {
	case problem == "" && base-z <= profile.Joint:
		problem = "is not below the top of its interval"
	case problem == "" && base > profile.MaxDepth:
		problem = "is deeper than 100 km"
	}
	if problem != "" {
		v.r.Fault(c.placeOf(s.base.i), "depths are numbers, positive downward from ground level", "%s %s %s", c.g.headings[s.base.i], profile.Quote(text), problem)
		return false
	}
	x.base = base
	return true
}

// depthHeading is the heading of the depths.
func (s *source) depthHeading() string { return s.g.headings[s.depths[0].i] }

// requires looks for headings that a group of velocities cannot do without. It
// returns their columns, nil if one is missing.
func (r *reader) requires(g *group, headings ...string) []int {
	columns := make([]int, len(headings))
	for i, h := range headings {
		if columns[i] = g.column(h); columns[i] == 0 {
			if len(g.rows) > 0 {
				r.Fault(g.at, "add it, with a value in each row", "group %s has no heading %s", g.name, h)
			}
			return nil
		}
	}
	return columns
}

// methodOf is the survey's method: what the file's own text says if it names
// the kind of survey behind the code, and otherwise that kind, with the text
// in brackets.
func (r *reader) methodOf(heading, code, text string) string {
	name := methods[code]
	if name == "" {
		name = r.header.code(heading, code)
	}
	switch {
	case text == "":
		return name
	case name == "" || codeOf(text) == code:
		return text
	}
	return name + " (" + text + ")"
}

// codeOf is the code of a method, "" if it has none.
func codeOf(method string) string {
	method = strings.ToLower(method)
	for _, m := range methodWords {
		if strings.Contains(method, m.word) {
			return m.code
		}
	}
	return ""
}

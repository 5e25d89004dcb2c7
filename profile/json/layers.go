package json

import (
	"bytes"
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// field is a key of a layer.
type field struct {
	name          string
	heading, unit string // of its column in a Reading
	quantity      profile.Quantity
	given         profile.Given
	number        func(*profile.Layer) *float64 // nil for a key that is no number
}

// fields are the keys of a layer, in the order in which they are written.
var fields = []field{
	{"top_m", "top", "m", profile.Top, 0, func(l *profile.Layer) *float64 { return &l.Top }},
	{"bottom_m", "bottom", "m", profile.Bottom, 0, func(l *profile.Layer) *float64 { return &l.Bottom }},
	{"vs_mps", "vs", "m/s", profile.Vs, 0, func(l *profile.Layer) *float64 { return &l.Vs }},
	{"vs_bottom_mps", "vs_bottom", "m/s", profile.VsBottom, 0, func(l *profile.Layer) *float64 { return &l.VsBottom }},
	{"vp_mps", "vp", "m/s", profile.Vp, profile.GivenVp, func(l *profile.Layer) *float64 { return &l.Vp }},
	{"density_kg_m3", "density", "kg/m³", profile.Density, profile.GivenDensity, func(l *profile.Layer) *float64 { return &l.Density }},
	{"sigma_ln_vs", "sigma_ln_vs", "", profile.SigmaLnVs, profile.GivenSigma, func(l *profile.Layer) *float64 { return &l.SigmaLnVs }},
	{"n", "n", "", profile.N, profile.GivenN, n},
	{"n60", "n60", "", profile.N, profile.GivenN, n},
	{"n1_60", "n1_60", "", profile.N, profile.GivenN, n},
	{"su_kpa", "su", "kPa", profile.Su, profile.GivenSu, func(l *profile.Layer) *float64 { return &l.Su }},
	{"pi_pct", "pi", "%", profile.PI, profile.GivenPI, func(l *profile.Layer) *float64 { return &l.PI }},
	{"water_content_pct", "water_content", "%", profile.WaterContent, profile.GivenWaterContent, func(l *profile.Layer) *float64 { return &l.WaterContent }},
	{name: "refusal", heading: "refusal", quantity: profile.RefusalWord},
	{name: "basis", heading: "basis", quantity: profile.BasisWord},
	{name: "soil", heading: "soil", quantity: profile.Soil},
}

func n(l *profile.Layer) *float64 { return &l.N }

// The places in fields of the keys that every layer has.
const (
	top = iota
	bottom
	vs
	needed // how many they are
)

// fieldNames are the keys of a layer.
var fieldNames = func() []string {
	names := make([]string, len(fields))
	for i, f := range fields {
		names[i] = f.name
	}
	return names
}()

// layer is the state of reading the layers of one profile.
type layer struct {
	profile.Layer
	columns []int           // fields that the profile has so far, in the order of the file
	cells   [16][]byte      // of this layer, as the file gives them, by field
	layers  []profile.Layer // of the file so far; those of a profile share its room
	rows    []profile.Row   // likewise
	first   int             // of the profile, in layers and rows
	pending int             // first row whose cells are no string yet
	text    []byte          // the cells of the rows from pending on
	ends    []int           // of each of them
	still   []spot          // places of layers without vs_mps
	blow    int             // the field of its blow counts; 0 before the first
	value   func(i int)
}

// layersOf reads the layers of a profile.
func (r *reader) layersOf(p *profile.Profile) {
	if r.layer.value == nil {
		r.layer.value = r.value
	}
	r.layer.blow = 0
	r.layer.still = r.layer.still[:0]
	r.reserve()
	r.layer.first, r.layer.pending = len(r.layer.layers), len(r.layer.rows)
	before := r.Count()
	r.list("layers", func() {
		if r.layers++; r.layers > MaxLayers {
			r.stop(r.tok.spot, "split the file", "the file has more than %d layers", MaxLayers)
			return
		}
		line := int(r.tok.line)
		if r.readLayer() && r.Count() == before {
			r.layer.layers = append(r.layer.layers, r.layer.Layer)
			join(r.layer.layers[r.layer.first:])
			r.layer.rows = append(r.layer.rows, profile.Row{Line: line})
			r.keepCells()
		}
	})
	r.flushCells()
	n := len(r.layer.layers)
	p.Layers = r.layer.layers[r.layer.first:n:n]
	p.Reading.Rows = r.layer.rows[r.layer.first:n:n]
	r.columnsOf(p.Reading)
}

// reserve makes room for as many layers as the file may have: one for each time
// that it has the key that every layer has.
func (r *reader) reserve() {
	if r.layer.layers != nil {
		return
	}
	n := min(bytes.Count(r.scan.text, []byte(`"top_m"`)), MaxLayers)
	r.layer.layers, r.layer.rows = make([]profile.Layer, 0, n), make([]profile.Row, 0, n)
}

// readLayer reads one layer.
func (r *reader) readLayer() bool {
	at := r.tok.spot
	r.layer.Layer, r.layer.cells = profile.Layer{}, [16][]byte{}
	found, ok := r.object("a layer", fieldNames, r.layer.value)
	if !ok {
		return false
	}
	if !found.has(top) {
		r.fault(at, "", "the layer has no key %q", fields[top].name)
	}
	if !found.has(bottom) {
		r.fault(at, "the bottom of a half-space is null", "the layer has no key %q", fields[bottom].name)
	}
	if !found.has(vs) {
		r.layer.Line, r.layer.Column = at.line, at.column
		r.layer.still = append(r.layer.still, at)
	}
	return true
}

// velocities tells of the layers without a velocity, if the profile does not
// say that it has none.
func (r *reader) velocities(p *profile.Profile) {
	if p.NoVelocity {
		return
	}
	for _, at := range r.layer.still {
		r.fault(at, `a profile without velocities says "no_velocity": true`, "the layer has no key %q", fields[vs].name)
	}
}

// value reads the value of key i of a layer.
func (r *reader) value(i int) {
	f, l, at := &fields[i], &r.layer, r.tok.spot
	if !slices.Contains(l.columns, i) {
		l.columns = append(l.columns, i)
	}
	l.cells[i] = r.cell()
	switch {
	case i == bottom && r.tok.kind == tokenNull:
		r.advance()
		l.Bottom = math.Inf(1)
		return
	case f.number != nil:
		r.quantity(i)
	case f.name == "refusal":
		l.Refusal = r.truth(f.name)
	case f.name == "basis":
		l.Basis = r.basis()
	case f.name == "soil":
		l.Soil, _ = r.text(f.name)
	}
	if i == vs {
		l.Line, l.Column = at.line, at.column
	}
}

// cell is the next value in the words of the file, "" if it is not a plain
// one.
func (r *reader) cell() []byte {
	switch r.tok.kind {
	case tokenText:
		return []byte(decoded(r.tok.raw))
	case tokenNumber, tokenNull, tokenTrue, tokenFalse:
		return r.tok.raw
	}
	return nil
}

// quantity reads a number of a layer. What boundaries and velocities must
// fulfil together is left to profile.Validate.
func (r *reader) quantity(i int) {
	f, l, at := &fields[i], &r.layer, r.tok.spot
	v, ok := r.number(f.name)
	switch {
	case !ok:
		return
	case f.given == 0 && f.quantity != profile.VsBottom:
	case v < 0:
		r.fault(at, "", "%s %v is negative", f.name, v)
	case v == 0 && !f.quantity.MayBeZero():
		r.fault(at, "leave it out where it is not known", "%s is zero", f.name)
	case f.quantity == profile.N && l.blow != 0 && l.blow != i:
		r.fault(at, "give one kind of blow count in a profile", "%s stands in a profile that gives %s", f.name, fields[l.blow].name)
	case f.quantity == profile.N:
		l.blow = i
	}
	*f.number(&l.Layer) = v
	l.Given |= f.given
}

// truth reads true or false.
func (r *reader) truth(what string) bool {
	switch r.tok.kind {
	case tokenTrue, tokenFalse:
		is := r.tok.kind == tokenTrue
		r.advance()
		return is
	}
	return r.notA(what, "true or false")
}

// join makes the boundary between the last two layers one, where rounding
// keeps them apart.
func join(layers []profile.Layer) {
	if n := len(layers); n > 1 && math.Abs(layers[n-1].Top-layers[n-2].Bottom) <= profile.Joint {
		layers[n-1].Top = layers[n-2].Bottom
	}
}

// keepCells keeps the cells of the layer, for the columns so far.
func (r *reader) keepCells() {
	l := &r.layer
	for i, column := range l.columns {
		if i > 0 {
			l.text = append(l.text, profile.CellSeparator...)
		}
		l.text = append(l.text, l.cells[column]...)
	}
	if l.ends = append(l.ends, len(l.text)); len(l.text) >= 1<<16 {
		r.flushCells()
	}
}

// flushCells turns the kept cells into strings, many rows at a time.
func (r *reader) flushCells() {
	l := &r.layer
	all, from := string(l.text), 0
	for i, to := range l.ends {
		l.rows[l.pending+i].Cells = all[from:to]
		from = to
	}
	l.pending, l.text, l.ends = len(l.rows), l.text[:0], l.ends[:0]
}

// columnsOf gives a reading its columns, and blank cells to the rows above
// the first that has a column.
func (r *reader) columnsOf(reading *profile.Reading) {
	for _, i := range r.layer.columns {
		f := &fields[i]
		reading.Columns = append(reading.Columns, profile.Column{Heading: f.heading, Unit: f.unit, Quantity: f.quantity})
	}
	for i := range reading.Rows {
		row := &reading.Rows[i]
		if missing := len(r.layer.columns) - 1 - strings.Count(row.Cells, profile.CellSeparator); missing > 0 {
			row.Cells += strings.Repeat(profile.CellSeparator, missing)
		}
	}
}

package ags

import (
	"strings"

	"shearbook/profile"
)

// The groups of Write for what AGS has none for: surveys and their layers.
const (
	groupGeneral = "VSPG"
	groupLayers  = "VSPL"
	headingRun   = "VSPG_ID"
)

// quantityHeadings are the headings of VSPL behind top, base and velocity.
var quantityHeadings = []struct {
	heading     string
	given       profile.Given // 0 for the velocity at the bottom
	q           profile.Quantity
	unit        string
	description string
	of          func(*profile.Layer) *float64
}{
	{"VSPL_VSB", 0, profile.VsBottom, "m/s", "Shear wave velocity at the base, where it changes with depth", func(l *profile.Layer) *float64 { return &l.VsBottom }},
	{"VSPL_VP", profile.GivenVp, profile.Vp, "m/s", "Compression wave velocity", func(l *profile.Layer) *float64 { return &l.Vp }},
	{"VSPL_DENS", profile.GivenDensity, profile.Density, "kg/m3", "Bulk density", func(l *profile.Layer) *float64 { return &l.Density }},
	{"VSPL_SLNV", profile.GivenSigma, profile.SigmaLnVs, "", "Standard deviation of the natural logarithm of the velocity", func(l *profile.Layer) *float64 { return &l.SigmaLnVs }},
	{"VSPL_NVAL", profile.GivenN, profile.N, "", "Standard penetration blow count, per 0.3 m", func(l *profile.Layer) *float64 { return &l.N }},
	{"VSPL_SU", profile.GivenSu, profile.Su, "kPa", "Undrained shear strength", func(l *profile.Layer) *float64 { return &l.Su }},
	{"VSPL_PI", profile.GivenPI, profile.PI, "%", "Plasticity index", func(l *profile.Layer) *float64 { return &l.PI }},
	{"VSPL_MC", profile.GivenWaterContent, profile.WaterContent, "%", "Water content", func(l *profile.Layer) *float64 { return &l.WaterContent }},
}

// ownWords are the headings of VSPL that hold words.
var ownWords = []struct {
	heading string
	q       profile.Quantity
}{{"VSPL_REF", profile.RefusalWord}, {"VSPL_BASI", profile.BasisWord}, {"VSPL_SOIL", profile.Soil}}

// written reads VSPG and VSPL.
func (v *velocities) written() {
	for _, g := range v.r.named(groupLayers) {
		v.layers(g)
	}
	for _, g := range v.r.named(groupGeneral) {
		v.surveys(g)
	}
}

// layers reads VSPL. What its rows say beside depths and velocity is read when
// the layers are made.
func (v *velocities) layers(g *group) {
	r := v.r
	columns := r.requires(g, "LOCA_ID", headingRun, "VSPL_TOP", "VSPL_BASE", "VSPL_VS")
	if columns == nil {
		return
	}
	s, ok := r.speedSource(g, columns[4])
	s.depths, s.base = []measure{r.length(g, columns[2])}, r.length(g, columns[3])
	s.own = r.ownColumns(g)
	if !ok || s.depths[0].i == 0 || s.base.i == 0 {
		return
	}
	for c := r.cursor(g); c.row(); {
		h := r.hole(c, s.loca)
		var x reading
		if len(c.get(s.value)) == 0 { // a profile without velocities
			x = reading{fields: fields{row: c.here(), valueOff: c.offset(s.value)}, column: int32(c.placeOf(s.value).Column)}
			ok = v.interval(c, s, &x) && v.count(c.placeOf(s.value))
		} else {
			x, ok = v.reading(c, s, s.value, s.speed)
		}
		if h == nil || !ok {
			continue
		}
		set := v.set(run{hole: h, group: g.name, id: c.text(columns[1])}, groupLayers, s, c.placeOf(s.value))
		set.push(x)
	}
}

// own is the columns of VSPL behind the velocity.
type own struct {
	quantities           []measure // as quantityHeadings
	refusal, basis, soil int
}

func (r *reader) ownColumns(g *group) *own {
	o := &own{refusal: g.column("VSPL_REF"), basis: g.column("VSPL_BASI"), soil: g.column("VSPL_SOIL")}
	for _, q := range quantityHeadings {
		m := measure{i: g.column(q.heading), factor: 1}
		switch d := q.q.Dimension(); {
		case m.i == 0 || d == profile.Dimensionless || d == profile.Blows:
		case d == profile.Velocity:
			s, ok := r.speedSource(g, m.i)
			if m.factor = s.speed.factor; !ok || s.speed.slowness {
				m = measure{}
			}
		default:
			m = r.soft(g, m.i, d)
		}
		o.quantities = append(o.quantities, m)
	}
	return o
}

// layer reads what the present row says of a layer beside its velocity.
func (o *own) layer(r *reader, h *hole, c *cursor, l *profile.Layer) {
	for i, q := range quantityHeadings {
		v, ok := r.optional(h, c, o.quantities[i], q.q.Dimension())
		if !ok {
			continue
		}
		*q.of(l) = v
		l.Given |= q.given
	}
	l.Refusal = isYes(c.get(o.refusal))
	l.Soil = c.text(o.soil)
	l.Basis = basisIn(h, c, o.basis)
}

// basisIn reads the basis in column i of the present row.
func basisIn(h *hole, c *cursor, i int) profile.Basis {
	word := strings.ToLower(c.text(i))
	if word == "" {
		return profile.BasisNotStated
	}
	b, ok := profile.ParseBasis(word)
	if !ok {
		heading := c.g.headings[i]
		h.remark("not-read", heading, c.placeOf(i), heading+" "+profile.Quote(word)+" is no basis that is known and was left out")
	}
	return b
}

// surveys reads VSPG.
func (v *velocities) surveys(g *group) {
	r := v.r
	reached, water := r.soft(g, g.column("VSPG_REAC"), profile.Length), r.soft(g, g.column("VSPG_WAT"), profile.Length)
	loca, id := g.column("LOCA_ID"), g.column(headingRun)
	for c := r.cursor(g); c.row(); {
		h := r.byID[c.text(loca)]
		for _, s := range v.sets[run{hole: h, group: groupLayers, id: c.text(id)}] {
			s.metadata = metadataOf(c, generalHeadings[g.name])
			s.survey.Method, s.survey.Date, s.survey.Operator = c.text(g.column("VSPG_METH")), c.text(g.column("VSPG_DATE")), c.text(g.column("VSPG_CONT"))
			s.survey.Basis = basisIn(h, c, g.column("VSPG_BASI"))
			if z, ok := r.optional(h, c, reached, profile.Length); ok && z > 0 {
				s.survey.DepthReached = z
			}
			if z, ok := r.optional(h, c, water, profile.Length); ok {
				s.survey.WaterTable = profile.Known(z)
			}
		}
	}
}

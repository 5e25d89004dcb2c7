package notebook

import (
	"strconv"

	"shearbook/profile"
	"shearbook/report"
)

var layersWorking = Working{
	Summary:  "The table of layers: depths, thickness, velocities and whatever else the file states.",
	Keys:     []Key{ofKey},
	Example:  "of: L1\n",
	evaluate: evaluateLayers,
}

func evaluateLayers(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	m.rest()
	return ev.each(sites, func(s *site) []report.Block { return one(ev.layerTable(s)) })
}

// layerColumn is an optional column of the table of layers.
type layerColumn struct {
	header string
	align  report.Align
	used   func(profile.Layer) bool
	cell   func(profile.Layer) string
}

// layerColumns are the columns that only some profiles have.
func (ev *evaluation) layerColumns() []layerColumn {
	v := ev.system.velocity()
	given := func(g profile.Given) func(profile.Layer) bool {
		return func(l profile.Layer) bool { return l.Has(g) }
	}
	return []layerColumn{
		{"Vs at bottom (" + v.Name + ")", report.AlignDecimal, profile.Layer.Gradient,
			func(l profile.Layer) string { return ev.velocity(l.VsBottom) }},
		{"σ of ln Vs", report.AlignDecimal, given(profile.GivenSigma),
			func(l profile.Layer) string { return shortest(l.SigmaLnVs, 3) }},
		{"Vp (" + v.Name + ")", report.AlignDecimal, given(profile.GivenVp),
			func(l profile.Layer) string { return shortest(l.Vp/v.Factor, 1) }},
		{"Density (kg/m³)", report.AlignDecimal, given(profile.GivenDensity),
			func(l profile.Layer) string { return shortest(l.Density, 0) }},
		{"N", report.AlignDecimal, given(profile.GivenN),
			func(l profile.Layer) string { return shortest(l.N, 1) }},
		{"su (kPa)", report.AlignDecimal, given(profile.GivenSu),
			func(l profile.Layer) string { return shortest(l.Su, 1) }},
		{"PI (%)", report.AlignDecimal, given(profile.GivenPI),
			func(l profile.Layer) string { return shortest(l.PI, 1) }},
		{"w (%)", report.AlignDecimal, given(profile.GivenWaterContent),
			func(l profile.Layer) string { return shortest(l.WaterContent, 1) }},
	}
}

// layerTable is the table of a profile's layers.
func (ev *evaluation) layerTable(s *site) *report.Table {
	p, unit := s.profile, ev.system.length().Name
	t := &report.Table{
		Caption: append(words("Layers of profile "+p.Name), ev.refs(p.Notes)...),
		Columns: []report.TableColumn{
			column("Layer", report.AlignRight), column("Top ("+unit+")", report.AlignDecimal),
			column("Bottom ("+unit+")", report.AlignDecimal), column("Thickness ("+unit+")", report.AlignDecimal),
		},
	}
	if !p.NoVelocity {
		t.Columns = append(t.Columns, column("Vs ("+ev.system.velocity().Name+")", report.AlignDecimal))
	}
	var optional []layerColumn
	for _, c := range ev.layerColumns() {
		if anyLayer(p, c.used) {
			optional = append(optional, c)
			t.Columns = append(t.Columns, column(c.header, c.align))
		}
	}
	mixed := basisOf(p) == "mixed"
	if mixed {
		t.Columns = append(t.Columns, column("Basis", report.AlignLeft))
	}
	described := anyLayer(p, func(l profile.Layer) bool { return l.Soil != "" })
	if described {
		t.Columns = append(t.Columns, wide("Ground"))
	}
	for i, l := range p.Layers {
		r := row(strconv.Itoa(i+1), ev.length(l.Top), ev.bottom(l), ev.thickness(l))
		if !p.NoVelocity {
			r.Cells = append(r.Cells, words(ev.velocity(l.Vs)))
		}
		for _, c := range optional {
			text := "–"
			if c.used(l) {
				text = c.cell(l)
			}
			r.Cells = append(r.Cells, words(text))
		}
		if mixed {
			r.Cells = append(r.Cells, words(p.BasisOf(i).String()))
		}
		if described {
			r.Cells = append(r.Cells, words(l.Soil))
		}
		t.Rows = append(t.Rows, r)
	}
	t.Notes = append(t.Notes, words("Depths are below ground level. "+ev.basisSentence(p)))
	return t
}

func anyLayer(p *profile.Profile, used func(profile.Layer) bool) bool {
	for _, l := range p.Layers {
		if used(l) {
			return true
		}
	}
	return false
}

func (ev *evaluation) bottom(l profile.Layer) string {
	if l.HalfSpace() {
		return "half-space"
	}
	return ev.length(l.Bottom)
}

func (ev *evaluation) thickness(l profile.Layer) string {
	if l.HalfSpace() {
		return "–"
	}
	return ev.length(l.Thickness())
}

// basisSentence says how the velocities came to be known.
func (ev *evaluation) basisSentence(p *profile.Profile) string {
	if p.NoVelocity {
		return "The file states no velocities."
	}
	switch basis := basisOf(p); basis {
	case "measured":
		return "The velocities are measured interval velocities."
	case "inverted":
		return "The velocities are those of a model fitted to the survey."
	case "correlated":
		return "The velocities are correlated from penetration resistance or strength, not measured."
	case "mixed":
		return "The velocities are of mixed basis."
	}
	return "How the velocities were found is not stated."
}

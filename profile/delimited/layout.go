package delimited

import (
	"strconv"

	"shearbook/profile"
)

// Layout is profiles laid out as a table that is read back: what Write writes,
// for writers of tables in other files.
type Layout struct {
	Lines    []Line   // above the header, in their order
	Headings []string // of the columns
	columns  []field
	profiles []profile.Profile
}

// Line is a statement above the header.
type Line struct {
	Profile    string // that it is about; "" for all
	Key, Value string
}

// Scope is the key of the line, behind the name of the profile that it is
// about, as "[L2] water table".
func (l Line) Scope() string {
	if l.Profile == "" {
		return l.Key
	}
	return "[" + l.Profile + "] " + l.Key
}

// Cell is a cell of a table: a number, or else a text; blank if that is "".
type Cell struct {
	Text     string
	Number   float64
	IsNumber bool
}

// String is the text of the cell. A number has the fewest digits that give it
// again.
func (c Cell) String() string {
	if c.IsNumber {
		return digits(c.Number)
	}
	return c.Text
}

func word(text string) Cell { return Cell{Text: text} }

func figure(x float64) Cell { return Cell{Number: x, IsNumber: true} }

// Lay lays profiles out. What is the same for all of them is stated once. The
// error names a profile that Read would refuse: one that profile.Validate finds
// faulty, or whose name is blank, not plain text or that of another.
func Lay(profiles []profile.Profile) (*Layout, error) {
	if err := writable(profiles); err != nil {
		return nil, err
	}
	l := &Layout{Lines: lines(profiles), profiles: profiles}
	for _, f := range fields {
		if f.stated == nil || anyLayer(profiles, f.stated) || f.heading == "n" && saysNothing(profiles) {
			l.columns = append(l.columns, f)
			heading := f.heading
			if heading == "n" && allN60(profiles) {
				heading = "n60"
			}
			l.Headings = append(l.Headings, heading)
		}
	}
	return l, nil
}

// Rows calls do with the cells of each layer in turn, and ends at the first
// error, which it returns. The cells hold until do returns.
func (l *Layout) Rows(do func(cells []Cell) error) error {
	cells := make([]Cell, len(l.columns))
	for i := range l.profiles {
		p := &l.profiles[i]
		for j := range p.Layers {
			for k := range l.columns {
				cells[k] = l.columns[k].cell(p, &p.Layers[j])
			}
			if err := do(cells); err != nil {
				return err
			}
		}
	}
	return nil
}

// saysNothing reports whether no layer states a velocity, a blow count or a
// strength. A table of such layers has a column of blow counts all the same, by
// which it is known for a table of layers.
func saysNothing(profiles []profile.Profile) bool {
	return !anyLayer(profiles, func(l *profile.Layer) bool {
		return l.Vs != 0 || l.Has(profile.GivenN) || l.Has(profile.GivenSu)
	})
}

// allN60 reports whether all blow counts are known to be corrected for energy.
func allN60(profiles []profile.Profile) bool {
	for i := range profiles {
		if p := &profiles[i]; blowKind(p) != "n60" && anyLayer(profiles[i:i+1], given(profile.GivenN)) {
			return false
		}
	}
	return true
}

func anyLayer(profiles []profile.Profile, is func(*profile.Layer) bool) bool {
	for i := range profiles {
		for j := range profiles[i].Layers {
			if is(&profiles[i].Layers[j]) {
				return true
			}
		}
	}
	return false
}

// field is one column of the table.
type field struct {
	heading string
	stated  func(*profile.Layer) bool // whether a layer needs it; nil for a column that is always there
	cell    func(*profile.Profile, *profile.Layer) Cell
}

// fields are the columns in their order.
var fields = []field{
	{"profile", nil, func(p *profile.Profile, _ *profile.Layer) Cell { return word(p.Name) }},
	{"top_m", nil, func(_ *profile.Profile, l *profile.Layer) Cell { return figure(l.Top) }},
	{"bottom_m", nil, func(_ *profile.Profile, l *profile.Layer) Cell {
		if l.HalfSpace() {
			return Cell{}
		}
		return figure(l.Bottom)
	}},
	optional("vs_mps", func(l *profile.Layer) bool { return l.Vs != 0 }, func(l *profile.Layer) float64 { return l.Vs }),
	optional("vs_bottom_mps", func(l *profile.Layer) bool { return l.VsBottom != 0 }, func(l *profile.Layer) float64 { return l.VsBottom }),
	optional("vp_mps", given(profile.GivenVp), func(l *profile.Layer) float64 { return l.Vp }),
	optional("density_kg_m3", given(profile.GivenDensity), func(l *profile.Layer) float64 { return l.Density }),
	optional("sigma_ln_vs", given(profile.GivenSigma), func(l *profile.Layer) float64 { return l.SigmaLnVs }),
	optional("n", given(profile.GivenN), func(l *profile.Layer) float64 { return l.N }),
	optional("su_kpa", given(profile.GivenSu), func(l *profile.Layer) float64 { return l.Su }),
	optional("pi_pct", given(profile.GivenPI), func(l *profile.Layer) float64 { return l.PI }),
	optional("water_content_pct", given(profile.GivenWaterContent), func(l *profile.Layer) float64 { return l.WaterContent }),
	{
		"refusal",
		func(l *profile.Layer) bool { return l.Refusal },
		func(_ *profile.Profile, l *profile.Layer) Cell {
			if l.Refusal {
				return word("yes")
			}
			return Cell{}
		},
	},
	{
		"basis",
		func(l *profile.Layer) bool { return l.Basis != profile.BasisNotStated },
		func(_ *profile.Profile, l *profile.Layer) Cell {
			if l.Basis == profile.BasisNotStated {
				return Cell{}
			}
			return word(l.Basis.String())
		},
	},
	{
		"soil",
		func(l *profile.Layer) bool { return l.Soil != "" },
		func(_ *profile.Profile, l *profile.Layer) Cell { return word(oneLine(l.Soil)) },
	},
}

// optional is the column of a number that a layer may state.
func optional(heading string, stated func(*profile.Layer) bool, value func(*profile.Layer) float64) field {
	return field{heading, stated, func(_ *profile.Profile, l *profile.Layer) Cell {
		if !stated(l) {
			return Cell{}
		}
		return figure(value(l))
	}}
}

func given(g profile.Given) func(*profile.Layer) bool {
	return func(l *profile.Layer) bool { return l.Has(g) }
}

// lines are what is known of the surveys. What all profiles state alike stands
// without a name.
func lines(profiles []profile.Profile) []Line {
	var list []Line
	add := func(name string, k key, value string) {
		if value != "" {
			list = append(list, Line{name, string(k), value})
		}
	}
	for _, k := range surveyKeys {
		if len(profiles) == 0 {
			return nil
		}
		common, same := k.text(&profiles[0]), true
		for i := range profiles {
			same = same && k.text(&profiles[i]) == common
		}
		if same {
			add("", k.key, common)
			continue
		}
		for i := range profiles {
			add(profiles[i].Name, k.key, k.text(&profiles[i]))
		}
	}
	return list
}

// surveyKeys are the lines above the header in their order.
var surveyKeys = []struct {
	key  key
	text func(*profile.Profile) string
}{
	{keyMethod, func(p *profile.Profile) string { return oneLine(p.Survey.Method) }},
	{keyBasis, func(p *profile.Profile) string {
		if p.Survey.Basis == profile.BasisNotStated {
			return ""
		}
		return p.Survey.Basis.String()
	}},
	{keyDate, func(p *profile.Profile) string { return oneLine(p.Survey.Date) }},
	{keyOperator, func(p *profile.Profile) string { return oneLine(p.Survey.Operator) }},
	{keyLocation, func(p *profile.Profile) string { return oneLine(p.Survey.Location) }},
	{keyLatitude, func(p *profile.Profile) string { return half(p.Position.Latitude, p.Position.Longitude) }},
	{keyLongitude, func(p *profile.Profile) string { return half(p.Position.Longitude, p.Position.Latitude) }},
	{keyEasting, func(p *profile.Profile) string { return half(p.Position.Easting, p.Position.Northing) }},
	{keyNorthing, func(p *profile.Profile) string { return half(p.Position.Northing, p.Position.Easting) }},
	{keyEPSG, func(p *profile.Profile) string {
		return known(profile.Optional{Value: float64(p.Position.EPSG), Known: p.Position.EPSG > 0}, "")
	}},
	{keyGroundLevel, func(p *profile.Profile) string { return known(p.Survey.GroundLevel, " m") }},
	{keyWaterTable, func(p *profile.Profile) string { return known(p.Survey.WaterTable, " m") }},
	{keyDepthReached, func(p *profile.Profile) string {
		return known(profile.Optional{Value: p.Survey.DepthReached, Known: p.Survey.DepthReached > 0}, " m")
	}},
}

// half is a coordinate, "" where the other one is not known.
func half(x, other profile.Optional) string {
	if !other.Known {
		return ""
	}
	return known(x, "")
}

// known is a number with its unit, "" if it is not known.
func known(x profile.Optional, unit string) string {
	if !x.Known {
		return ""
	}
	return strconv.FormatFloat(x.Value, 'f', -1, 64) + unit
}

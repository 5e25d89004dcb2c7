package sitexml

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// layer is a velocityProfileData.
type layer struct {
	spot
	depth int
	given [quantities]bool
	of    [quantities]quoted
}

// The quantities of a layer, in the order in which their columns stand.
const (
	topDepth = iota
	bottomDepth
	thickness
	velocityS
	uncertaintyS
	velocityP
	density
	quantities
)

// columns are the columns of the quantities in a reading.
var columns = [quantities]profile.Column{
	topDepth:     {Heading: "layerTopDepth", Unit: "m", Quantity: profile.Top},
	bottomDepth:  {Heading: "layerBottomDepth", Unit: "m", Quantity: profile.Bottom},
	thickness:    {Heading: "layerThickness", Unit: "m", Quantity: profile.Thickness},
	velocityS:    {Heading: "velocityS", Unit: "m/s", Quantity: profile.Vs},
	uncertaintyS: {Heading: "velocityS uncertainty", Unit: "m/s", Quantity: profile.SigmaLnVs},
	velocityP:    {Heading: "velocityP", Unit: "m/s", Quantity: profile.Vp},
	density:      {Heading: "density", Unit: "kg/m³", Quantity: profile.Density},
}

// table is the layers of a profile in the words of the file.
type table struct {
	columns  []int // of quantities, in the order in which they came up
	rows     []profile.Row
	unread   []string // names of elements
	unreadAt spot
	faulty   bool

	thickness map[int]float64 // of the layers that state it instead of a bottom
}

// quantity takes the value of an element in a layer.
func (r *reader) quantity(e *element) {
	l, value := r.walk.layer, e.number()
	switch e.lower {
	case "velocitys":
		r.give(e, velocityS, value)
		if e.uncertainty.text != "" {
			r.give(e, uncertaintyS, e.uncertainty)
		}
	case "velocityp":
		r.give(e, velocityP, value)
	case "density":
		r.give(e, density, value)
	case "layertopdepth":
		r.give(e, topDepth, value)
	case "layerbottomdepth":
		r.give(e, bottomDepth, value)
	case "layerthickness":
		if value.text != "" {
			r.give(e, thickness, value)
		}
	default:
		if value.text != "" {
			r.walk.profile.leaveOut(e.name, l.spot)
		}
	}
}

// give sets a quantity of the layer.
func (r *reader) give(e *element, i int, value quoted) {
	l := r.walk.layer
	if l.given[i] {
		r.fault(e.spot, "keep one of them", "%s stands twice in a layer", columns[i].Heading)
		return
	}
	l.given[i], l.of[i] = true, value
}

// leaveOut notes the name of an element that is not read.
func (t *table) leaveOut(name string, at spot) {
	const most = 8
	name = printable(name)
	if len(t.unread) == most || slices.Contains(t.unread, name) {
		return
	}
	if t.unread = append(t.unread, name); len(t.unread) == 1 {
		t.unreadAt = at
	}
}

// endLayer makes the layer out of its quantities. A top or bottom that is not
// stated is NaN until the whole profile is known.
func (r *reader) endLayer() {
	l, c, before := r.walk.layer, r.walk.profile, r.collector().Count()
	out := profile.Layer{Top: math.NaN(), Bottom: math.NaN()}
	place := l.of[velocityS].spot
	if l.of[velocityS].text == "" {
		place = l.spot
		r.fault(l.spot, "Vp alone does not give Vs", "a layer has no velocityS")
	}
	out.Line, out.Column = place.line, place.column
	for i := range quantities {
		if l.of[i].text == "" {
			continue
		}
		if v, ok := r.number(columns[i].Heading, l.of[i]); ok {
			r.put(&out, i, v)
		}
	}
	c.faulty = c.faulty || r.collector().Count() > before
	c.row(l)
	c.layers = append(c.layers, out)
}

// put sets quantity i of a layer. What velocities and boundaries must fulfil
// is left to profile.Validate.
func (r *reader) put(l *profile.Layer, i int, v float64) {
	at := r.walk.layer.of[i]
	name := columns[i].Heading
	switch {
	case i == topDepth:
		l.Top = v
	case i == bottomDepth:
		l.Bottom = v
	case i == thickness && !r.walk.layer.given[bottomDepth]:
		if v <= 0 {
			r.fault(at.spot, "", "%s %s is not positive", name, profile.Quote(at.text))
		}
		c := r.walk.profile
		if c.thickness == nil {
			c.thickness = map[int]float64{}
		}
		c.thickness[len(c.layers)] = v
	case i == thickness:
		// The bottom says it.
	case i == velocityS:
		l.Vs = v
	case i == uncertaintyS:
		switch {
		case v < 0:
			r.fault(at.spot, "", "%s %s is negative", name, profile.Quote(at.text))
		case v > 0 && l.Vs > 0:
			l.SigmaLnVs = v / l.Vs
			l.Given |= profile.GivenSigma
		}
	case v <= 0:
		r.fault(at.spot, "leave it out where it is not known", "%s %s is not positive", name, profile.Quote(at.text))
	case i == velocityP:
		l.Vp = v
		l.Given |= profile.GivenVp
	case i == density:
		l.Density = v
		l.Given |= profile.GivenDensity
	}
}

// row keeps the layer in the words of the file.
func (c *column) row(l *layer) {
	for i := range quantities {
		if l.given[i] && !slices.Contains(c.table.columns, i) {
			c.table.columns = append(c.table.columns, i)
		}
	}
	cells := make([]string, len(c.table.columns))
	for k, i := range c.table.columns {
		cells[k] = plain(l.of[i].text)
	}
	c.rows = append(c.rows, profile.Row{Line: int(l.line), Cells: strings.Join(cells, profile.CellSeparator)})
}

// resolve gives every layer its top and bottom.
func (r *reader) resolve(c *column) (fromNext int) {
	layers := c.layers
	for i := range layers {
		l := &layers[i]
		if math.IsNaN(l.Top) {
			if i > 0 {
				l.Top = layers[i-1].Bottom
			} else {
				l.Top = 0
			}
		}
		last := i == len(layers)-1
		h, thick := c.thickness[i]
		switch {
		case thick:
			l.Bottom = l.Top + h
		case !math.IsNaN(l.Bottom):
		case last:
			l.Bottom = math.Inf(1)
		case !math.IsNaN(layers[i+1].Top):
			l.Bottom = layers[i+1].Top
			fromNext++
		default:
			r.fault(spot{l.Line, l.Column}, "state one of them", "a layer has no bottom, and the next one no top")
			c.faulty = true
			return fromNext
		}
		if i > 0 && math.Abs(l.Top-layers[i-1].Bottom) <= profile.Joint {
			l.Top = layers[i-1].Bottom
		}
	}
	return fromNext
}

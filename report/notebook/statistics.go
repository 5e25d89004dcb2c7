package notebook

import (
	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
)

var statisticsWorking = Working{
	Summary: "Layer statistics: means for comparison, extremes, interfaces, depth to rock velocities, site period.",
	Keys: []Key{ofKey,
		{"depth", "thickness to describe, as 20 m; the code's own or 30 m if left out"},
		{"figure", "yes for a figure of each layer's share of the travel time"},
	},
	Example:  "of: L1\ndepth: 20 m\n",
	evaluate: evaluateStatistics,
}

func evaluateStatistics(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	depth := m.value("depth", profile.Length, "20 m")
	drawn := m.word("figure", []string{"yes", "no"}) == "yes"
	m.rest()
	return ev.eachMeasured(sites, func(s *site) []report.Block {
		depths := ev.depths(s, depth)
		if len(depths) == 0 {
			return nil
		}
		layers, notes := ev.layersTo(s, s.datum, depths[0])
		d, err := vs30.Describe(layers, s.datum, depths[0])
		if err != nil {
			ev.add(c.at, shortHint, "%s", ev.shortText(s, err))
			return nil
		}
		blocks := []report.Block{ev.statisticsTable(s, d, layers, notes), ev.interfaceTable(s, d)}
		if drawn {
			blocks = append(blocks, ev.travelFigure(s, layers, s.datum, depths[0], c.at)...)
		}
		return blocks
	})
}

// rockVelocities are the velocities in m/s at which codes and hazard maps
// set rock or its neighbours: 360 (NEHRP C), 760 (NEHRP B/C), 800 (EC8 A),
// 1500 (NEHRP A).
var rockVelocities = []float64{360, 760, 800, 1500}

// statisticsTable is the figures of one profile in two columns.
func (ev *evaluation) statisticsTable(s *site, d vs30.Statistics, layers []profile.Layer, notes []profile.Note) *report.Table {
	t := &report.Table{
		Caption: append(words("Statistics of profile "+s.profile.Name+" over "+ev.bothLengths(d.Thickness)+" "+ev.below(d.From)), ev.refs(notes)...),
		Columns: []report.TableColumn{wide("Quantity"), column("Value", report.AlignRight)},
	}
	add := func(label, value string) { t.Rows = append(t.Rows, row(label, value)) }
	speed := func(v float64) string { return metresPerSecond(v).Print(ev.system) }
	add("Time-averaged velocity, Σh / Σ(h/v)", speed(d.TimeAverage))
	add("Mean weighted by thickness, Σhv / Σh (for comparison only)", speed(d.ThicknessMean))
	add("Arithmetic mean of the layers (for comparison only)", speed(d.ArithmeticMean))
	add("Slowest", speed(d.Min))
	add("Fastest", speed(d.Max))
	add("Fastest over slowest", fixed(d.Spread, 2))
	add("Standard deviation weighted by thickness (population)", speed(d.StdDev))
	add("Layers inside", fixed(float64(d.Layers), 0))
	for _, v := range rockVelocities {
		add("Depth to "+speedName(ev, v), ev.crossing(s.profile.Layers, v))
	}
	ev.periods(add, layers, d.From, d.From+d.Thickness)
	ev.rockPeriods(add, s)
	t.Notes = append(t.Notes, words("The two other means are printed so that a reader can recognise them; codes average by travel time."))
	if !vs30.DensitiesStated(layers, d.From, d.From+d.Thickness) {
		t.Notes = append(t.Notes, words("The exact period is that of the undamped column on rigid rock, with one density for all layers because the file does not state one for each."))
	}
	return t
}

// speedName prints a round velocity in m/s, with ft/s behind it in US units.
func speedName(ev *evaluation, v float64) string {
	if ev.system == US {
		return shortest(v, 0) + " m/s (" + shortest(v/profile.Foot, 0) + " ft/s)"
	}
	return shortest(v, 0) + " m/s"
}

// crossing words where a profile comes up to a velocity.
func (ev *evaluation) crossing(layers []profile.Layer, v float64) string {
	c := vs30.DepthTo(layers, v)
	switch {
	case !c.Reached:
		return "not reached"
	case !c.Stays:
		return metres(c.Depth).Print(ev.system) + ", slower again below"
	}
	return metres(c.Depth).Print(ev.system)
}

// periods adds the periods of the column down to a depth.
func (ev *evaluation) periods(add func(label, value string), layers []profile.Layer, from, to float64) {
	if t, err := vs30.QuarterWavePeriod(layers, from, to); err == nil {
		add("Four times the travel time, 4·Σh/v", seconds(t).Print(ev.system))
	}
	if t, err := vs30.FundamentalPeriod(layers, from, to); err == nil {
		add("Exact fundamental period of that column on rigid rock", seconds(t).Print(ev.system))
	}
}

// rockPeriods adds the average and the period of the soil above the first
// depth at which the velocity is 760 m/s, where there is such a depth.
func (ev *evaluation) rockPeriods(add func(label, value string), s *site) {
	const rock = 760
	v, depth, err := vs30.AboveRock(s.profile.Layers, s.datum, rock)
	if err != nil {
		return
	}
	add("Average above "+speedName(ev, rock), metresPerSecond(v).Print(ev.system))
	if t, err := vs30.FundamentalPeriod(s.profile.Layers, s.datum, depth); err == nil {
		add("Exact fundamental period of the soil above it", seconds(t).Print(ev.system))
	}
}

// interfaceTable is the ratio of velocities across each interface.
func (ev *evaluation) interfaceTable(s *site, d vs30.Statistics) report.Block {
	if len(d.Interfaces) == 0 {
		return para("Profile " + s.profile.Name + " has no interface over this depth.")
	}
	unit, speed := ev.system.length().Name, ev.system.velocity().Name
	t := &report.Table{
		Caption: words("Velocity across the interfaces of profile " + s.profile.Name),
		Columns: []report.TableColumn{column("Depth ("+unit+")", report.AlignDecimal), column("Above ("+speed+")", report.AlignDecimal),
			column("Below ("+speed+")", report.AlignDecimal), column("Below / above", report.AlignDecimal), wide("Remark")},
	}
	for _, i := range d.Interfaces {
		remark := ""
		if i.Ratio < 1 {
			remark = "velocity falls with depth"
		}
		t.Rows = append(t.Rows, row(ev.length(i.Depth), ev.velocity(i.Above), ev.velocity(i.Below), fixed(i.Ratio, 2), remark))
	}
	return t
}

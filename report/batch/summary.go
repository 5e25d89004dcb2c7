package batch

import (
	"io"
	"shearbook/report/figure"
	"slices"
	"strings"
)

// Bounds of what an overview holds of tables of any size.
const (
	mostCodes   = 60  // the codes behind them are not looked at
	mostClasses = 40  // of a code; the classes behind them are counted together
	mostGrids   = 3   // maps by a projected grid
	mostListed  = 50  // rows of a list
	mostSources = 30  // files that are named
	mostIDs     = 100 // kinds of notes that are told apart
	mapCodes    = 4   // codes that have figures
)

// overview is what the summary's pages say: counts, and the rows to look at
// first. It is gathered in passes over the tables, the last of which fills
// the figures, whose frames the first has found.
type overview struct {
	opt *DeriveOptions

	rows, units, failed int
	flagged             int            // units with any flag
	flags               [flagKinds]int // units by flag
	bases               []namedCount   // rows by basis of the velocities
	degrees, grid, none int            // units by position
	codes               []*tally
	lists               [flagKinds]*list
	region              region    // of the points in degrees
	grids               []*region // of those in a grid, by its EPSG code

	notes       []namedCount // by ID
	faults      int
	sources     [][3]string // file, SHA-256 and size of the first
	sourceCount int
	sourceBytes int64

	now struct { // the unit that is being read
		row   Row
		flags Flags
		begun bool
	}
}

// flagKinds is how many flags there are.
const flagKinds = len(FlagWords)

// namedCount is a count with its name, and a text where one belongs to it.
type namedCount struct {
	name, text string
	n          int
}

// countName counts a name.
func countName(counts []namedCount, name, text string) []namedCount {
	for i := range counts {
		if counts[i].name == name {
			counts[i].n++
			return counts
		}
	}
	if len(counts) == mostIDs {
		counts[mostIDs-1].name, counts[mostIDs-1].text = "others", ""
		counts[mostIDs-1].n++
		return counts
	}
	return append(counts, namedCount{strings.Clone(name), strings.Clone(text), 1})
}

// newOverview gathers everything but the figures.
func newOverview(dir string, opt *DeriveOptions) (*overview, error) {
	o := &overview{opt: opt}
	for i := range o.lists {
		o.lists[i] = &list{flag: 1 << i}
	}
	for _, c := range opt.Codes {
		o.codes = append(o.codes, newTally(c.ID, c))
	}
	if err := o.eachRow(dir, o.add); err != nil {
		return nil, err
	}
	o.endUnit()
	for _, t := range o.codes {
		t.fit()
	}
	if err := o.readFaults(dir); err != nil {
		return nil, err
	}
	return o, o.readSources(dir)
}

// eachRow calls f for each row of summary.csv.
func (o *overview) eachRow(dir string, f func(*Row)) error {
	t, in, err := openTable(dir, Summary, Columns)
	if err != nil {
		return err
	}
	defer in.Close()
	each(t, (*parser).row, func(r *Row, wrong error) bool {
		if err = wrong; err == nil {
			f(r)
		}
		return err == nil
	})
	return err
}

// add counts a row.
func (o *overview) add(r *Row) {
	if n := &o.now; !n.begun || r.File != n.row.File || r.Line != n.row.Line || r.Profile != n.row.Profile {
		o.endUnit()
		n.row, n.flags, n.begun = *r, 0, true
	}
	o.now.flags |= r.Flags
	o.rows++
	if r.Basis != "" {
		o.bases = countName(o.bases, r.Basis, "")
	}
	t := o.tally(r.Code)
	t.add(r)
	for i := range o.lists {
		if r.Flags&(1<<i) != 0 {
			o.lists[i].add(r, t)
		}
	}
}

// endUnit counts the unit whose rows have been read.
func (o *overview) endUnit() {
	n := &o.now
	if !n.begun {
		return
	}
	o.units++
	if n.flags&Failed != 0 {
		o.failed++
	}
	if n.flags != 0 {
		o.flagged++
	}
	for i := range o.flags {
		if n.flags&(1<<i) != 0 {
			o.flags[i]++
		}
	}
	switch p := &n.row.Position; {
	case p.Latitude.Known && p.Longitude.Known:
		o.degrees++
		o.region.add(p.Longitude.Value, p.Latitude.Value)
	case p.Easting.Known && p.Northing.Known:
		o.grid++
		if g := o.gridOf(p.EPSG, true); g != nil {
			g.add(p.Easting.Value, p.Northing.Value)
		}
	default:
		o.none++
	}
}

// gridOf returns the region of a grid, made where it is not there and there
// is room for it; nil if there is not.
func (o *overview) gridOf(epsg int, make bool) *region {
	for _, g := range o.grids {
		if g.epsg == epsg {
			return g
		}
	}
	if !make || len(o.grids) == mostGrids {
		return nil
	}
	g := &region{epsg: epsg, grid: true}
	o.grids = append(o.grids, g)
	return g
}

// tally returns the counts of a code.
func (o *overview) tally(id string) *tally {
	for _, t := range o.codes {
		if t.id == id {
			return t
		}
	}
	if len(o.codes) >= mostCodes+len(o.opt.Codes) {
		return o.codes[len(o.codes)-1]
	}
	t := newTally(strings.Clone(id), nil)
	o.codes = append(o.codes, t)
	return t
}

// counted are the codes that rows name.
func (o *overview) counted() []*tally {
	return slices.DeleteFunc(slices.Clone(o.codes), func(t *tally) bool { return t.rows == 0 })
}

// drawn are the codes that have figures.
func (o *overview) drawn() []*tally {
	counted := o.counted()
	return counted[:min(len(counted), mapCodes)]
}

// readFaults counts the notes of faults.csv by ID, and puts the text of the
// first note that raised its flag beside each row of a list.
func (o *overview) readFaults(dir string) error {
	wanted := map[string][]*entry{}
	for _, l := range o.lists {
		for _, e := range l.entries {
			key := e.File + "\x00" + e.Profile
			wanted[key] = append(wanted[key], e)
		}
	}
	t, in, err := openTable(dir, FaultsIn, FaultColumns)
	if err != nil {
		return err
	}
	defer in.Close()
	each(t, (*parser).faultRow, func(f *Fault, wrong error) bool {
		if err = wrong; err != nil {
			return false
		}
		if f.Severity != "note" {
			o.faults++
			return true
		}
		o.notes = countName(o.notes, f.ID, f.Text)
		for _, e := range wanted[f.Place.File+"\x00"+f.Profile] {
			if e.note == "" && flagOf(f.ID)&e.list != 0 && (f.Code == "" || f.Code == e.Code) {
				e.note = f.Text
			}
		}
		return true
	})
	return err
}

// readSources counts the files of sources.csv and keeps the first.
func (o *overview) readSources(dir string) error {
	t, in, err := openTable(dir, Sources, SourceColumns)
	if err != nil {
		return err
	}
	defer in.Close()
	p := parser{table: t, before: make([]string, len(SourceColumns))}
	for {
		cells, err := t.read()
		if err == io.EOF {
			return nil
		}
		if err != nil {
			return err
		}
		p.cells = cells
		o.sourceCount++
		o.sourceBytes += int64(p.whole(2))
		if p.err != nil {
			return p.err
		}
		if len(o.sources) < mostSources {
			o.sources = append(o.sources, [3]string{string(cells[0]), string(cells[1]), string(cells[2])})
		}
	}
}

// draw fills the figures in a pass of its own.
func (o *overview) draw(dir string) error {
	regions := append([]*region{&o.region}, o.grids...)
	for _, t := range o.drawn() {
		for _, g := range regions {
			m, err := t.newMap(g, o.opt, len(o.drawn()) > 1)
			if err != nil {
				return err
			}
			t.maps = append(t.maps, m)
		}
	}
	return o.eachRow(dir, o.place)
}

// newMap is an empty map, nil where no point is. It is
// smaller where there are several, so that two go on a page.
func (t *tally) newMap(g *region, opt *DeriveOptions, several bool) (*figure.Map, error) {
	if g.n == 0 {
		return nil, nil
	}
	m := figure.MapOptions{Grid: g.grid}
	if g.grid || several {
		m.Tall = 0.08
	}
	if opt.US {
		m.Units = figure.US
	}
	for _, c := range t.classes {
		m.Classes = append(m.Classes, c.name)
	}
	return figure.NewMap(g.extent(), m)
}

// place puts a row into the figures of its code.
func (o *overview) place(r *Row) {
	t := o.tally(r.Code)
	t.count(r.Velocity)
	if len(t.maps) == 0 {
		return
	}
	switch p := &r.Position; {
	case p.Latitude.Known && p.Longitude.Known:
		if t.maps[0] != nil {
			t.maps[0].Add(p.Longitude.Value, p.Latitude.Value, t.classOf(r))
		}
	case p.Easting.Known && p.Northing.Known:
		if g := o.gridOf(p.EPSG, false); g != nil {
			t.maps[1+slices.Index(o.grids, g)].Add(p.Easting.Value, p.Northing.Value, t.classOf(r))
		}
	}
}

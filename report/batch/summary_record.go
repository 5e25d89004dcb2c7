package batch

import (
	"fmt"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/figure"
)

// noteTable counts the notes by their names.
func (o *overview) noteTable() []report.Block {
	if len(o.notes) == 0 {
		return []report.Block{paragraph("No note stands in faults.csv.")}
	}
	t := &report.Table{
		Columns: []report.TableColumn{column("Note", report.AlignLeft), column("Times", report.AlignRight), wide("The first of them")},
		Notes:   [][]report.Inline{words("faults.csv has every one, with its place and its profile.")},
		Compact: true,
	}
	for _, n := range o.notes {
		t.Rows = append(t.Rows, tableRow(n.name, strconv.Itoa(n.n), shortenedTo(1000, n.text)))
	}
	return []report.Block{t}
}

// codeNotes says what holds for every profile under each code.
func (o *overview) codeNotes() []report.Block {
	var blocks []report.Block
	for _, t := range o.counted() {
		if t.code == nil {
			blocks = append(blocks, o.headed(t, paragraph("Nothing is known here of the code "+t.id+" beyond the rows of summary.csv."))...)
			continue
		}
		blocks = append(blocks, o.headed(t, o.codeParagraph(t), o.codeList(t))...)
	}
	return blocks
}

func (o *overview) codeParagraph(t *tally) *report.Paragraph {
	c := t.code
	text := c.Edition + ", " + c.Table + "."
	if c.DepthText != "" {
		text += " " + c.Parameter + " is the average over " + c.DepthText + ", measured from: " + c.Datum.String() + "."
	}
	return &report.Paragraph{Inline: []report.Inline{report.Text(text + " Standing of the table: "),
		&report.Strong{Inline: words(c.Standing.String())}, report.Text(" (" + strings.TrimSuffix(c.Source, ".") + ").")}}
}

func (o *overview) codeList(t *tally) *report.List {
	list := &report.List{Tight: true}
	add := func(in ...report.Inline) {
		list.Items = append(list.Items, report.ListItem{Blocks: []report.Block{&report.Paragraph{Inline: in}}})
	}
	notes, unassessed := t.sayAll(o.opt)
	for _, n := range notes {
		add(report.Text(report.Capital(sentence(n))))
	}
	for _, text := range unassessed {
		add(&report.Strong{Inline: words("Not assessed")}, report.Text(", "+sentence(text)))
	}
	add(report.Text("What is not assessed is not excluded: it needs a statement from the site investigation of each site."))
	return list
}

// sentence ends a text with a full stop.
func sentence(text string) string { return strings.TrimSuffix(text, ".") + "." }

// record says what was done.
func (o *overview) record() []report.Block {
	settings := &report.Table{Columns: []report.TableColumn{column("Setting", report.AlignLeft), wide("Value")}}
	add := func(name, value string) { settings.Rows = append(settings.Rows, tableRow(name, stated(value))) }
	add("Program", o.opt.Version)
	add("Command", o.opt.Command)
	var ids []string
	for _, t := range o.counted() {
		ids = append(ids, t.id)
	}
	add("Codes", strings.Join(ids, ", "))
	add("Near a bound", "within "+shortest(o.opt.near(), 2)+" % of the average")
	for _, s := range o.opt.Settings {
		add(s.Name, s.Value)
	}
	inputs := &report.Table{
		Caption: words(fmt.Sprintf("The files that were read: %d, %d bytes together", o.sourceCount, o.sourceBytes)),
		Columns: []report.TableColumn{wide("File"), column("Bytes", report.AlignRight), column("SHA-256", report.AlignLeft)},
		Compact: true,
	}
	for _, s := range o.sources {
		r := tableRow(shortened(s[0]), s[2], "")
		r.Cells[2] = []report.Inline{report.Code(s[1])}
		inputs.Rows = append(inputs.Rows, r)
	}
	if more := o.sourceCount - len(o.sources); more > 0 {
		inputs.Notes = [][]report.Inline{words("And " + profile.Plural(more, "more file") + " in sources.csv.")}
	}
	return []report.Block{settings, inputs}
}

// maps are the maps of each code.
func (o *overview) maps(map[string]string) ([]report.Block, error) {
	var blocks []report.Block
	for _, t := range o.drawn() {
		var figures []report.Block
		for i, m := range t.maps {
			if m != nil {
				figures = append(figures, o.mapFigure(t, i, m))
			}
		}
		blocks = append(blocks, o.headed(t, figures...)...)
	}
	if o.degrees+o.grid == 0 {
		return []report.Block{paragraph("No position is known.")}, nil
	}
	if o.none > 0 {
		blocks = append(blocks, paragraph(fmt.Sprintf("Without a position, and so on no map: %d.", o.none)))
	}
	if shown := o.onGrids(); shown < o.grid {
		blocks = append(blocks, paragraph(fmt.Sprintf("In further grids, and so on no map: %d.", o.grid-shown)))
	}
	return append(blocks, o.furtherCodes()...), nil
}

// onGrids is how many units lie in the grids that have a map.
func (o *overview) onGrids() int {
	n := 0
	for _, g := range o.grids {
		n += g.n
	}
	return n
}

// furtherCodes says which codes have no figures.
func (o *overview) furtherCodes() []report.Block {
	counted := o.counted()
	if len(counted) <= mapCodes {
		return nil
	}
	return []report.Block{paragraph(fmt.Sprintf("Figures are drawn for the first %d of %d codes; summary.csv has all.", mapCodes, len(counted)))}
}

func (o *overview) mapFigure(t *tally, i int, m *figure.Map) *report.Figure {
	name, where, unit := "map-"+fileName(t.id), "in degrees of latitude and longitude (WGS 84)", "m"
	if i > 0 {
		g := o.grids[i-1]
		where, unit = "in a projected grid whose EPSG code is not stated", "units of the grid"
		name += "-grid"
		if g.epsg > 0 {
			where = "in the projected grid EPSG:" + strconv.Itoa(g.epsg)
			name += "-" + strconv.Itoa(g.epsg)
		}
	}
	caption := "Profiles by class under " + t.name() + ", " + where + "."
	if side, thinned := m.Square(); thinned {
		caption += fmt.Sprintf(" There are more than %d: each mark stands for those in a square of %s %s, of the class that most of them have; where two have as many, of the softer.",
			figure.MostPoints, shortest(side, -int(magnitude(side))+1), unit)
	}
	return &report.Figure{Name: name, Caption: words(caption), Picture: m.Picture(),
		Alt: "Map of the profiles with their classes; summary.csv and summary.geojson give the numbers"}
}

// histograms are the averages of each code against its bounds.
func (o *overview) histograms(map[string]string) ([]report.Block, error) {
	var blocks []report.Block
	for _, t := range o.drawn() {
		if len(t.bars) == 0 {
			blocks = append(blocks, o.headed(t, paragraph("No average velocity is known under "+t.name()+"."))...)
			continue
		}
		options := figure.HistogramOptions{Classes: t.bounds()}
		if len(o.drawn()) > 1 {
			options.Height = 0.065
		}
		if o.opt.US {
			options.Units = figure.US
		}
		picture, err := figure.Histogram(t.bars, options)
		if err != nil {
			return nil, err
		}
		blocks = append(blocks, o.headed(t, &report.Figure{Name: "histogram-" + fileName(t.id), Picture: picture,
			Caption: words(fmt.Sprintf("The %d averages under %s against the bounds of its classes. Every bound is an edge of a bar. A class may come from other ground than the average.", t.averaged, t.name())),
			Alt:     "Histogram of the average velocities; summary.csv gives the numbers"})...)
	}
	return append(blocks, o.furtherCodes()...), nil
}

package pdf

import (
	"bytes"
	"fmt"
	"image"
	"image/color"
	"image/jpeg"
	"image/png"
	"math"
	"strconv"
	"strings"

	"shearbook/report"
)

// The demonstration document holds every block and inline. Site, firm,
// people and numbers are invented.

func inl(parts ...any) []report.Inline {
	var out []report.Inline
	for _, p := range parts {
		switch p := p.(type) {
		case string:
			out = append(out, report.Text(p))
		case report.Inline:
			out = append(out, p)
		default:
			panic(fmt.Sprintf("inl of %T", p))
		}
	}
	return out
}

func para(parts ...any) *report.Paragraph { return &report.Paragraph{Inline: inl(parts...)} }

func heading(level int, parts ...any) *report.Heading {
	return &report.Heading{Level: level, Inline: inl(parts...)}
}

func strong(s string) report.Inline { return &report.Strong{Inline: inl(s)} }
func emph(s string) report.Inline   { return &report.Emphasis{Inline: inl(s)} }

func field(label string, value ...any) report.Field {
	return report.Field{Label: label, Value: inl(value...)}
}

func item(blocks ...report.Block) report.ListItem { return report.ListItem{Blocks: blocks} }

func tableRow(cells ...any) report.TableRow {
	var r report.TableRow
	for _, c := range cells {
		switch c := c.(type) {
		case string:
			r.Cells = append(r.Cells, inl(c))
		case []report.Inline:
			r.Cells = append(r.Cells, c)
		default:
			panic(fmt.Sprintf("tableRow of %T", c))
		}
	}
	return r
}

func column(header string, a report.Align) report.TableColumn {
	return report.TableColumn{Header: inl(header), Align: a}
}

func wideColumn(header string) report.TableColumn {
	return report.TableColumn{Header: inl(header), Wide: true}
}

func demo() *report.Document {
	d := &report.Document{
		Title: "Seismic site classification", Subject: "Site class from shear-wave velocity",
		Author: "Moorland Ground Engineers", Keywords: []string{"Vs30", "site class", "MASW"},
		Project: "Ferry Road pumping station", Reference: "MGE-2031-04", Revision: "B",
		Date: "2026-03-14", Generator: "shearbook demo",
	}
	d.Blocks = append(d.Blocks, demoFront()...)
	d.Blocks = append(d.Blocks, demoProfile()...)
	d.Blocks = append(d.Blocks, demoClass()...)
	d.Blocks = append(d.Blocks, demoProse()...)
	d.Blocks = append(d.Blocks, demoEnd()...)
	d.Footnotes = []report.Footnote{
		{Blocks: []report.Block{para("361 m/s is class C by the metric print and class D by the print in ft/s: 1,200 ft/s is 365.76 m/s. The softer class is taken where the prints differ.")}},
		{Blocks: []report.Block{para("Surface waves sample a volume, not a line; thin layers may be averaged with their neighbours.")}},
		{Blocks: []report.Block{
			para("A note of two paragraphs, with ", emph("italics"), " and ", report.Code("code"), "."),
			para("The second paragraph of the note mentions another.", report.FootnoteRef(4)),
		}},
		{Blocks: []report.Block{para("Mentioned only from within a note.")}},
	}
	return d
}

func demoFront() []report.Block {
	return []report.Block{
		&report.TitleBlock{Title: "Seismic site classification", Fields: []report.Field{
			field("Project", "Ferry Road pumping station"), field("Reference", "MGE-2031-04"),
			field("Client", "Lowland Water Board"), field("Prepared by", "Moorland Ground Engineers"),
			field("Date", "14 March 2026"), field("Revision", "B"),
			field("Location", "Ferry Road, north bank of the canal; 51.02° N, 4.1° E"),
		}},
		&report.Summary{Heading: "Profile L1", Label: "Site class", Answer: "C", Fields: []report.Field{
			field("Code", "Code One (invented), Table 3.1"),
			field("Average velocity", strong("238.4 m/s"), " (782 ft/s)", report.FootnoteRef(1)),
			field("Averaged over", "30 m (98.4 ft) below ground level"),
			field("How measured", "MASW; velocities inverted; reached 34 m", report.FootnoteRef(2)),
			field("Next class", "B, if the average were 51 % higher (bound 360 m/s)"),
			field("Standing of the table", "checked"),
			field("Not assessed", "two of the code’s conditions; see the ", &report.Link{URL: "#site-classification", Inline: inl("classification")}),
		}},
		&report.CautionBox{Blocks: []report.Block{para(report.Caution)}},
		heading(2, "Survey and method"),
		para("The velocities were measured along one line of 46 m on 3 March 2026, by the dispersion of surface waves. " +
			"The line lies on the north bank, 12 m from the planned wet well and parallel to it. Source offsets were 5 m, 10 m and 20 m at both ends; " +
			"24 receivers of 4.5 Hz stood 2 m apart."),
		&report.Table{Caption: inl("Survey and method"), Columns: []report.TableColumn{column("", report.AlignLeft), wideColumn("Profile L1")},
			Rows: []report.TableRow{
				tableRow("Method", "Multichannel analysis of surface waves, fundamental mode"),
				tableRow("Date", "2026-03-03"),
				tableRow("Operator", "A. Verbeke"),
				tableRow("Water table", "1.8 m below ground level"),
				tableRow("File", inl(report.Code("profiles/line-1.csv"))),
			}},
	}
}

func demoProfile() []report.Block {
	layers := &report.Table{Caption: inl("Layers of profile L1"),
		Columns: []report.TableColumn{column("Layer", report.AlignRight), column("From (m)", report.AlignDecimal), column("To (m)", report.AlignDecimal),
			{Header: inl("V", report.Sub("S"), " (m/s)"), Align: report.AlignDecimal}, column("ρ (kg/m³)", report.AlignDecimal), wideColumn("Ground")},
		Notes: [][]report.Inline{inl("Densities are correlated from the soil description, not measured.")},
		Rows: []report.TableRow{
			tableRow("1", "0", "2.5", "142", "1750", "Fill: sand with brick, loose"),
			tableRow("2", "2.5", "9.25", "186.5", "1800", "Silty clay, soft to firm, with a little organic matter and thin bands of fine sand towards the base"),
			tableRow("3", "9.25", "18", "265", "1950", "Sand, medium dense"),
			tableRow("4", "18", "30", "338.75", "2000", "Sand and gravel, dense"),
			tableRow("5", "30", "34", "412", "2050", "Stiff clay"),
		}}
	work := &report.Table{Caption: inl("Travel time through profile L1 over 30 m below ground level"),
		Columns: []report.TableColumn{column("Layer", report.AlignRight), column("h (m)", report.AlignDecimal), column("v (m/s)", report.AlignDecimal),
			column("h/v (s)", report.AlignDecimal), column("Σ h/v (s)", report.AlignDecimal), column("Share (%)", report.AlignDecimal)},
		Rows: []report.TableRow{
			tableRow("1", "2.5", "142", "0.017606", "0.017606", "14.0"),
			tableRow("2", "6.75", "186.5", "0.036193", "0.053799", "28.8"),
			tableRow("3", "8.75", "265", "0.033019", "0.086818", "26.2"),
			tableRow("4", "12", "338.75", "0.035424", "0.122242", "28.2"),
		}}
	total := tableRow("Sum", "30", "", "0.125823", "", "100.0")
	total.Emphasis = true
	work.Rows = append(work.Rows, total)
	sub := func(base, index string) report.Math {
		return report.MathSub{Base: report.MathIdent(base), Sub: report.MathIdent(index)}
	}
	symbol := report.MathSub{Base: report.MathOver{Base: report.MathIdent("v")}, Sub: report.MathText("S,30")}
	terms := report.MathRow{}
	for i, t := range [][2]string{{"2.5", "142"}, {"6.75", "186.5"}, {"8.75", "265"}, {"12", "338.75"}} {
		if i > 0 {
			terms = append(terms, report.MathText("+"))
		}
		terms = append(terms, report.MathFrac{Num: report.MathText(t[0]), Den: report.MathText(t[1])})
	}
	return []report.Block{
		heading(2, "Velocity profile"),
		para("Figure 1 shows the layers, the average from the surface down to each depth, and the bounds of the code behind them."),
		&report.Figure{Name: "velocity-L1", Alt: "Velocity against depth", Picture: demoPicture(468, 320),
			Caption: inl("Figure 1. Shear-wave velocity of profile L1 against depth, with the running average (dashed) and the bounds of the code.")},
		layers,
		heading(2, "Average velocity"),
		para("Over 30 m below ground level, the thickness divided by the vertical travel time of a shear wave:"),
		&report.Formula{Math: report.MathRow{symbol, report.MathText("="), report.MathFrac{Num: report.MathIdent("Z"),
			Den: report.MathRow{report.MathSum{From: report.MathRow{report.MathIdent("i"), report.MathText("="), report.MathText("1")}, To: report.MathIdent("n")},
				report.MathFrac{Num: sub("h", "i"), Den: sub("v", "i")}}}}},
		work,
		&report.Formula{Math: report.MathRow{symbol, report.MathText("="), report.MathFrac{Num: report.MathText("30"), Den: terms},
			report.MathText("="), report.MathFrac{Num: report.MathText("30 m"), Den: report.MathText("0.125823 s")}, report.MathText("="), report.MathText("238.4 m/s")}},
		para("The time-averaged velocity is ", strong("238.4 m/s (782 ft/s)"), ". A formula too wide for the column breaks before its operators:"),
		&report.Formula{Math: report.MathRow{sub("t", "n"), report.MathText("="), longSum(14)}},
	}
}

func longSum(n int) report.Math {
	var row report.MathRow
	for i := range n {
		if i > 0 {
			row = append(row, report.MathText("+"))
		}
		row = append(row, report.MathFrac{Num: report.MathText(strconv.Itoa(2 + i)), Den: report.MathText(strconv.Itoa(120 + 17*i))})
	}
	return append(row, report.MathText("="), report.MathText("0.4231 s"))
}

func demoClass() []report.Block {
	class := &report.Table{Caption: inl("Code One (invented), Table 3.1, ground types, with the type of this site marked"),
		Columns: []report.TableColumn{column("Type", report.AlignLeft), wideColumn("Stratigraphic profile"), {Header: inl("V", report.Sub("S,30"), " (m/s)"), Align: report.AlignRight}},
		Rows: []report.TableRow{
			tableRow("A", "Rock or other rock-like geological formation, with at most 5 m of weaker material at the surface", "> 800"),
			tableRow("B", "Very dense sand, gravel or very stiff clay, at least several tens of metres thick", "360–800"),
			tableRow("C", "Deep deposits of dense or medium dense sand, gravel or stiff clay, from several tens to many hundreds of metres", "180–360"),
			tableRow("D", "Loose to medium cohesionless soil, or predominantly soft to firm cohesive soil", "< 180"),
		}}
	class.Rows[2].Marked = true
	steps := &report.Table{Caption: inl("Steps of the decision"),
		Columns: []report.TableColumn{column("", report.AlignRight), wideColumn("Step"), column("Clause", report.AlignLeft), column("Value", report.AlignDecimal), column("Bound", report.AlignDecimal), column("Holds", report.AlignLeft)},
		Rows: []report.TableRow{
			tableRow("1", "average velocity above the lower bound of C", "3.1.2, Table 3.1", "238.4 m/s", "180 m/s", "yes"),
			tableRow("2", "average velocity not above the upper bound of C", "3.1.2, Table 3.1", "238.4 m/s", "360 m/s", "yes"),
			tableRow("3", "surface layer of C or D between 5 m and 20 m over stiffer material with a velocity above 800 m/s", "3.1.2, Table 3.1, type E", "–", "–", "no"),
		}}
	return []report.Block{
		heading(2, "Site classification"),
		para("The average lies between 180 m/s and 360 m/s. The ground is of type ", strong("C"), "."),
		class, steps,
		heading(3, "Conditions"),
		&report.List{Tight: true, Items: []report.ListItem{
			{Task: report.TaskDone, Blocks: []report.Block{para("Liquefiable soil: stated as not present")}},
			{Task: report.TaskDone, Blocks: []report.Block{para("Peat: 0 m stated")}},
			{Task: report.TaskOpen, Blocks: []report.Block{para("Soft clay of plasticity index above 40: ", strong("not assessed"), ". The notebook states no plasticity index and no undrained strength, and velocities cannot settle it; the box stays open until somebody has looked.")}},
		}},
		heading(2, "Limits and assumptions"),
		&report.List{Items: []report.ListItem{
			item(para("The line does not reach bedrock. The profile ends at 34 m.")),
			item(para("Velocities between the receivers and the wet well are taken to be those of the line, 12 m away."),
				&report.List{Ordered: true, Start: 9, Tight: true, Items: []report.ListItem{
					item(para("A borehole is planned at the wet well.")),
					item(para("Its log must be compared with the layers above."),
						&report.List{Tight: true, Items: []report.ListItem{item(para("depth of the sand")), item(para("thickness of the soft clay"))}}),
					item(para("If they differ, this report is to be revised.")),
				}}),
			item(para("No account is taken of the embankment planned to the east.")),
		}},
	}
}

func demoProse() []report.Block {
	return []report.Block{
		heading(1, "What the author may write"),
		para("Body text with ", strong("bold"), ", ", emph("italics"), ", ", &report.Strong{Inline: []report.Inline{emph("both")}}, ", ", &report.Strike{Inline: inl("struck out words")},
			", ", report.Code("fixed pitch"), ", V", report.Sub("S30"), ", m", report.Sup("2"), " and a ", &report.Link{URL: "https://example.org/a?b=c&d=é", Inline: inl("link to a page")},
			", a ", &report.Link{URL: "#limits-and-assumptions", Inline: inl("link to a heading")}, ", an ", &report.Link{URL: "mailto:office@example.org", Inline: inl("address")},
			", and a ", &report.Link{URL: "file:///etc/hosts", Inline: inl("link that is not made")}, ". The mean is v̄ = 238 m/s, X̄, é, 10⁻³, σ ≤ 0.3, Σ, ρ, 30 m ± 1 m, ½, Łódź, Żółw, Ünal, Ångström, "+
				"Καλημέρα, Скорость поперечных волн.", report.LineBreak{}, "A new line after a hard break.", report.FootnoteRef(3)),
		heading(3, "A third heading with V", report.Sub("S30"), " in it"),
		para("Ragged right, broken so that the edge is even. A long address, https://example.org/archive/2026/03/14/ferry-road/pumping-station/profiles/line-1/dispersion-curves-of-the-fundamental-mode.html, breaks where it can; "+
			"a digest, ", report.Code("9f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c15b0f00a089f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c15b0f00a08"), ", breaks anywhere."),
		heading(4, "A fourth"),
		&report.Quote{Blocks: []report.Block{
			para("The velocity of a layer is that of a model that explains the measured dispersion; others explain it as well."),
			&report.Quote{Blocks: []report.Block{para("A quotation within the quotation.")}},
			para("The outer one goes on."),
		}},
		heading(5, "A fifth"),
		&report.CodeBlock{Language: "csv", Text: "depth_m,vs (m/s),soil\n2.5,142,fill\n9.25,186.5,\"silty clay, soft to firm, with a little organic matter and thin bands of fine sand towards the base\"\n\tindented by a tab\n18,265,sand\n"},
		heading(6, "A sixth"),
		&report.Image{Name: "site.png", Title: "Plan of the site (invented)", Data: demoPNG(320, 160), Format: "png", Width: 320, Height: 160},
		&report.Image{Name: "photo.jpg", Alt: "The north bank", Data: demoJPEG(320, 140), Format: "jpeg", Width: 320, Height: 140},
		&report.Rule{},
		para("After the rule, a hostile name: evil\u202Etxt.exe and a bell \u0007."),
	}
}

func demoEnd() []report.Block {
	raw := &report.Table{Compact: true, Caption: inl("Data as read from line-1.csv"),
		Columns: []report.TableColumn{column("Line", report.AlignRight), column("depth_m", report.AlignDecimal), column("vs (m/s)", report.AlignDecimal), column("sigma ln vs", report.AlignDecimal), wideColumn("soil")}}
	for i := range 60 {
		raw.Rows = append(raw.Rows, tableRow(strconv.Itoa(i+2), strconv.FormatFloat(0.5*float64(i), 'f', -1, 64), strconv.FormatFloat(142+3.25*float64(i), 'f', -1, 64), "0.1", "sand"))
	}
	digests := &report.Table{Caption: inl("Files"), Columns: []report.TableColumn{column("File", report.AlignLeft), wideColumn("SHA-256")},
		Rows: []report.TableRow{tableRow(inl(report.Code("profiles/line-1.csv")), inl(report.Code(strings.Repeat("9f86d081884c7d65", 4))))}}
	return []report.Block{
		heading(2, "Sign-off"),
		&report.SignOff{Signatures: []report.Signature{
			{Role: "Prepared by", Name: "A. Verbeke", Title: "MSc Geophysics", Date: "2026-03-14"},
			{Role: "Checked by", Name: "", Title: ""},
			{Role: "Licensed engineer", Name: "", Title: "", Seal: true},
		}},
		&report.PageBreak{},
		heading(1, "Appendix: data as read"),
		para("Every value as the file states it."),
		raw, digests,
	}
}

// demoPicture is a profile against depth with axes, curves, dashes, turned
// and coloured labels.
func demoPicture(w, h float64) *report.Picture {
	p := &report.Picture{Width: w, Height: h}
	grey, dark, blue := report.Colour{R: 190, G: 190, B: 190}, report.Colour{R: 60, G: 60, B: 60}, report.Colour{R: 0, G: 114, B: 178}
	left, right, bottom, top := 52.0, w-14, 14.0, h-40
	x := func(v float64) float64 { return left + (right-left)*v/500 }
	y := func(z float64) float64 { return top - (top-bottom)*z/36 }
	lineTo := func(m ...float64) report.Path {
		var path report.Path
		for i := 0; i < len(m); i += 2 {
			kind := report.LineTo
			if i == 0 {
				kind = report.MoveTo
			}
			path = append(path, report.Move{Kind: kind, X: m[i], Y: m[i+1]})
		}
		return path
	}
	p.Marks = append(p.Marks, &report.Fill{Path: append(lineTo(x(180), bottom, x(360), bottom, x(360), top, x(180), top), report.Move{Kind: report.Close}), Colour: report.Colour{R: 238, G: 244, B: 249}})
	for v := 0.0; v <= 500; v += 100 {
		p.Marks = append(p.Marks, &report.Stroke{Path: lineTo(x(v), bottom, x(v), top), Width: 0.4, Colour: grey},
			&report.Label{X: x(v) - 7, Y: top + 5, Text: strconv.Itoa(int(v)), Size: 8, Colour: dark})
	}
	for z := 0.0; z <= 35; z += 5 {
		p.Marks = append(p.Marks, &report.Stroke{Path: lineTo(left, y(z), right, y(z)), Width: 0.4, Colour: grey},
			&report.Label{X: left - 16, Y: y(z) - 3, Text: strconv.Itoa(int(z)), Size: 8, Colour: dark})
	}
	p.Marks = append(p.Marks,
		&report.Stroke{Path: lineTo(x(142), y(0), x(142), y(2.5), x(186.5), y(2.5), x(186.5), y(9.25), x(265), y(9.25), x(265), y(18), x(338.75), y(18), x(338.75), y(30), x(412), y(30), x(412), y(34)), Width: 1.6, Colour: dark},
		&report.Stroke{Path: report.Path{{Kind: report.MoveTo, X: x(142), Y: y(2)}, {Kind: report.CurveTo, X1: x(170), Y1: y(10), X2: x(200), Y2: y(20), X: x(240), Y: y(34)}}, Width: 1.2, Colour: blue, Dash: []float64{4, 2}},
		&report.Label{X: left + 120, Y: top + 20, Text: "Shear-wave velocity, m/s", Font: report.Sans, Size: 9, Colour: dark},
		&report.Label{X: 16, Y: (top+bottom)/2 - 25, Turn: 90, Text: "Depth, m", Font: report.Sans, Size: 9, Colour: dark},
		&report.Label{X: x(182), Y: bottom + 4, Text: "C: 180 ≤ V < 360", Font: report.SansBold, Size: 8, Colour: blue},
	)
	return p
}

func demoImage(w, h int) image.Image {
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	for y := range h {
		for x := range w {
			v := uint8(128 + 100*math.Sin(float64(x)/23)*math.Cos(float64(y)/17))
			img.Set(x, y, color.RGBA{v, uint8(200 - v/3), 180, 255})
		}
	}
	return img
}

func demoPNG(w, h int) []byte {
	var b bytes.Buffer
	if err := png.Encode(&b, demoImage(w, h)); err != nil {
		panic(err)
	}
	return b.Bytes()
}

func demoJPEG(w, h int) []byte {
	var b bytes.Buffer
	if err := jpeg.Encode(&b, demoImage(w, h), nil); err != nil {
		panic(err)
	}
	return b.Bytes()
}

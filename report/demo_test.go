package report

import "fmt"

// reportCase is a whole report, of an invented site, with everything that a
// real one has. By hand: 2.5/140 + 3.5/210 + 3/165 + 9.25/290.5 + 11.75/520 =
// 0.107144 s, 30/0.107144 = 280.0 m/s, (360 − 280)/280 = 28.6 %.
func reportCase() *Document {
	return &Document{
		Title: "Seismic site classification, Ferry Road pumping station", Author: "M. Okonjo", Subject: "Site class of line L1",
		Keywords: []string{"site class", "Vs30"}, Generator: "shearbook",
		Blocks: append(append(reportFront(), reportBody()...), reportBack()...),
		Footnotes: []Footnote{
			{[]Block{para(Text("Carried on at constant velocity from 28.5 m down to 30 m."))}},
			{[]Block{para(Text("The velocity falls with depth here; refraction cannot see such a layer."))}},
		},
	}
}

func reportFront() []Block {
	return []Block{
		titleBlock(), summary(), caution(),
		&Heading{2, say("Survey")},
		para(Text("One line was measured on the quay, parallel to the water, with 24 geophones at a spacing of 2 m. The curve was inverted for five layers above a half-space; see "),
			&Link{"https://example.org/report", say("the field report")}, Text(" and "), Code("line-1.csv"), Text(".")),
		&Table{
			Caption: say("Table 1. Survey and method"), Columns: []TableColumn{{Header: say("Item")}, {Header: say("Value"), Wide: true}},
			Rows: []TableRow{
				{Cells: [][]Inline{say("Method"), say("multichannel analysis of surface waves")}}, {Cells: [][]Inline{say("Depth reached"), {Text("28.5 m"), FootnoteRef(1)}}},
				{Cells: [][]Inline{say("Basis of the velocities"), {&Strong{say("inverted")}, Text(", from one dispersion curve")}}},
			},
		},
	}
}

func reportBody() []Block {
	v := func(sub string) Math { return MathSub{MathIdent("V"), MathText(sub)} }
	hi, vi := MathSub{MathIdent("h"), MathIdent("i")}, MathSub{MathIdent("v"), MathIdent("i")}
	return []Block{
		&Heading{2, say("Velocity against depth")},
		&Figure{"velocity-L1", say("Figure 1. Shear-wave velocity of line L1: layers, running average (dashed) and the bounds of the code."),
			"Steps from 140 m/s at the surface to 520 m/s below 18 m, with a slower layer between 6 m and 9 m.", velocityPicture()},
		layerTable(),
		&Heading{2, say("Average")},
		para(Text("The time-averaged velocity is the depth over the sum of the travel times:")),
		&Formula{MathRow{v("S30"), MathText("="), MathFrac{MathText("30 m"), MathRow{MathSum{MathRow{MathIdent("i"), MathText("="), MathText("1")}, MathIdent("n")}, MathFrac{hi, vi}}},
			MathText("="), MathFrac{MathText("30 m"), MathText("0.1071 s")}, MathText("="), MathText("280.0 m/s")}},
		&Heading{2, say("Classification")},
		&List{Ordered: true, Start: 1, Tight: true, Items: []ListItem{
			{Blocks: []Block{para(Text("V"), Sub("S,30"), Text(" = 280.0 m/s is above 180 m/s (Table 3.1): "), &Strong{say("yes")})}},
			{Blocks: []Block{para(Text("V"), Sub("S,30"), Text(" = 280.0 m/s is below 360 m/s (Table 3.1): "), &Strong{say("yes")})}},
			{Blocks: []Block{para(Text("5 m to 20 m of soft soil over rock: "), &Emphasis{say("no")}), &List{Tight: true, Items: []ListItem{{Blocks: []Block{para(Text("no velocity above 800 m/s was reached"))}}}}}},
		}},
		&Heading{3, say("Not assessed")},
		&List{Tight: true, Items: []ListItem{{Task: TaskDone, Blocks: []Block{para(Text("liquefiable soil: no"))}}, {Task: TaskOpen, Blocks: []Block{para(Text("soft clay with plasticity index above 40: not stated"))}}}},
		&Quote{[]Block{para(Text("The class holds for the quay. It says nothing of the basin."))}},
	}
}

func layerTable() *Table {
	t := &Table{
		Caption: say("Table 2. Layers of line L1"),
		Columns: []TableColumn{{say("Layer"), AlignRight, false}, {say("Top (m)"), AlignDecimal, false}, {say("Thickness (m)"), AlignDecimal, false},
			{[]Inline{Text("V"), Sub("S"), Text(" (m/s)")}, AlignDecimal, false}, {say("Time (ms)"), AlignDecimal, false}, {say("Soil"), AlignLeft, true}},
		Notes: [][]Inline{say("Depths are below ground level, +4.2 m.")},
	}
	for i, l := range [][5]string{
		{"0", "2.5", "140", "17.857", "made ground"}, {"2.5", "3.5", "210", "16.667", "sand, loose"}, {"6", "3", "165", "18.182", "clay, silty"},
		{"9", "9.25", "290.5", "31.842", "sand, dense"}, {"18.25", "11.75", "520", "22.596", "gravel"},
	} {
		r := TableRow{Cells: [][]Inline{say(fmt.Sprint(i + 1)), say(l[0]), say(l[1]), say(l[2]), say(l[3]), say(l[4])}, Marked: i == 2}
		if i == 2 {
			r.Cells[3] = append(r.Cells[3], FootnoteRef(2))
		}
		t.Rows = append(t.Rows, r)
	}
	t.Rows = append(t.Rows, TableRow{Emphasis: true, Cells: [][]Inline{nil, nil, say("30"), say("280.0"), say("107.144"), nil}})
	return t
}

func reportBack() []Block {
	appendix := &Table{Compact: true, Caption: say("Table A1. Data as read"), Columns: []TableColumn{{say("Line"), AlignRight, false}, {say("top_m"), AlignDecimal, false}, {say("vs_mps"), AlignDecimal, false}, {say("soil"), AlignLeft, false}}}
	for i := range 12 {
		appendix.Rows = append(appendix.Rows, TableRow{Cells: [][]Inline{say(fmt.Sprint(i + 7)), say(fmt.Sprintf("%.2f", 1.25*float64(i))), say(fmt.Sprint(140 + 7*i)), {Code("sand")}}})
	}
	return []Block{
		&Heading{2, say("Sign-off")}, signOff(), &PageBreak{}, &Heading{2, say("Appendix: data as read")}, appendix,
		para(Text("Digest of the file (SHA-256):")),
		&CodeBlock{"text", "8f434346648f6b96df89dda901c5176b10a6d83961dd3c1ac88b59b2dc327aa4  line-1.csv\n"},
		&Rule{}, para(Text("Frames: 1 "), &Strike{say("2")}, Text(" 3.")),
	}
}

// velocityPicture is drawn by hand in the way package figure draws.
func velocityPicture() *Picture {
	blue, grey, black := Colour{0, 0x72, 0xb2}, Colour{0x80, 0x80, 0x80}, Colour{0x1a, 0x1a, 0x1a}
	line := func(points ...float64) (p Path) {
		for i := 0; i < len(points); i += 2 {
			kind := LineTo
			if i == 0 {
				kind = MoveTo
			}
			p = append(p, Move{Kind: kind, X: points[i], Y: points[i+1]})
		}
		return p
	}
	p := &Picture{Width: 320, Height: 240, Marks: []Mark{
		&Stroke{line(50, 30, 300, 30, 300, 220, 50, 220, 50, 30, 50, 30), 0.75, black, nil},
		&Stroke{line(125, 30, 125, 220), 0.5, grey, []float64{1, 2}}, &Stroke{line(200, 30, 200, 220), 0.5, grey, []float64{1, 2}},
		&Stroke{line(108, 220, 108, 204, 137, 204, 137, 182, 119, 182, 119, 163, 171, 163, 171, 104, 267, 104, 267, 30), 1.5, blue, nil},
		&Stroke{Path{{Kind: MoveTo, X: 108, Y: 220}, {Kind: CurveTo, X: 158, Y: 30, X1: 112, Y1: 170, X2: 128, Y2: 110}}, 1.2, black, []float64{4, 2}},
		&Label{X: 128, Y: 34, Text: "180", Font: SansItalic, Size: 7, Colour: grey}, &Label{X: 203, Y: 34, Text: "360", Font: SansItalic, Size: 7, Colour: grey},
		&Label{X: 125, Y: 10, Text: "Shear-wave velocity (m/s)", Size: 9, Colour: black}, &Label{X: 16, Y: 95, Turn: 90, Text: "Depth (m)", Size: 9, Colour: black},
	}}
	for i := range 4 {
		y := 220 - 63.333*float64(i)
		p.Marks = append(p.Marks, &Stroke{line(46, y, 50, y), 0.5, black, nil}, &Label{X: 28, Y: y - 3, Text: fmt.Sprint(10 * i), Size: 8, Colour: black})
	}
	return p
}

package figure

import (
	"image/color"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"

	"shearbook/report"
)

// at is a point.
func at(x, y vg.Length) vg.Point { return vg.Point{X: x, Y: y} }

// stretch is a path of one line.
func stretch(a, b vg.Point) vg.Path {
	var p vg.Path
	p.Move(a)
	p.Line(b)
	return p
}

func TestCanvasTransforms(t *testing.T) {
	c := newCanvas(200, 100)
	c.SetColor(color.RGBA{R: 213, G: 94, A: 255})
	c.SetLineWidth(1.5)
	c.Push()
	c.Translate(at(100, 50))
	c.Rotate(math.Pi / 2)
	c.Scale(2, 2)
	c.SetLineDash([]vg.Length{3, 1}, 0)
	c.Stroke(stretch(at(0, 0), at(10, 5)))
	c.Pop()
	c.Stroke(stretch(at(0, 0), at(10, 5)))

	// By hand: (10, 5) doubled is (20, 10), turned left (−10, 20), shifted
	// (90, 70). The width and the dashes double.
	vermilion := report.Colour{R: 213, G: 94}
	want := []report.Mark{
		&report.Stroke{Width: 3, Dash: []float64{6, 2}, Colour: vermilion,
			Path: report.Path{{Kind: report.MoveTo, X: 100, Y: 50}, {Kind: report.LineTo, X: 90, Y: 70}}},
		&report.Stroke{Width: 1.5, Colour: vermilion,
			Path: report.Path{{Kind: report.MoveTo}, {Kind: report.LineTo, X: 10, Y: 5}}},
	}
	if diff := cmp.Diff(want, c.picture.Marks); diff != "" {
		t.Error(diff)
	}
	if c.picture.Width != 200 || c.picture.Height != 100 {
		t.Errorf("the picture is %v by %v", c.picture.Width, c.picture.Height)
	}
}

func TestCanvasCurves(t *testing.T) {
	var p vg.Path
	p.Move(at(0, 0))
	p.QuadTo(at(3, 6), at(6, 0))
	p.CubeTo(at(7, 1), at(8, 2), at(9, 3))
	p.Close()
	c := newCanvas(10, 10)
	c.Fill(p)
	// A quadratic curve with control point q is the cubic with control points
	// at two thirds of the way to q from its ends: (2, 4) and (4, 4).
	want := []report.Mark{&report.Fill{Path: report.Path{
		{Kind: report.MoveTo},
		{Kind: report.CurveTo, X1: 2, Y1: 4, X2: 4, Y2: 4, X: 6},
		{Kind: report.CurveTo, X1: 7, Y1: 1, X2: 8, Y2: 2, X: 9, Y: 3},
		{Kind: report.Close},
	}}}
	if diff := cmp.Diff(want, c.picture.Marks); diff != "" {
		t.Error(diff)
	}
}

// bezier returns the point of a cubic curve at parameter u (Bernstein form).
func bezier(p0 report.Move, m report.Move, u float64) (x, y float64) {
	v := 1 - u
	a, b, c, d := v*v*v, 3*v*v*u, 3*v*u*u, u*u*u
	return a*p0.X + b*m.X1 + c*m.X2 + d*m.X, a*p0.Y + b*m.Y1 + c*m.Y2 + d*m.Y
}

func TestCanvasArcIsRound(t *testing.T) {
	for _, angle := range []float64{0.3, math.Pi / 2, math.Pi, 2 * math.Pi, -1.5 * math.Pi} {
		var p vg.Path
		p.Arc(at(50, 40), 30, 0.7, angle)
		c := newCanvas(100, 100)
		c.Stroke(p)
		path := c.picture.Marks[0].(*report.Stroke).Path
		if path[0].Kind != report.MoveTo {
			t.Errorf("the arc starts with a movement of kind %d", path[0].Kind)
		}
		for i := 1; i < len(path); i++ {
			for u := 0.0; u <= 1; u += 0.1 {
				x, y := bezier(path[i-1], path[i], u)
				// 0.03 % of the radius, and the rounding to 0.001 pt
				if r := math.Hypot(x-50, y-40); math.Abs(r-30) > 30*0.0003+0.002 {
					t.Errorf("arc of %v: %v from the centre, want 30", angle, r)
				}
			}
		}
		last, end := path[len(path)-1], 0.7+angle
		if math.Abs(last.X-50-30*math.Cos(end)) > 0.001 || math.Abs(last.Y-40-30*math.Sin(end)) > 0.001 {
			t.Errorf("arc of %v ends at %v, %v", angle, last.X, last.Y)
		}
	}
}

func TestCanvasText(t *testing.T) {
	c := newCanvas(100, 100)
	face := cache().Lookup(faces[report.SansBold], 9)
	c.FillString(face, at(5, 6), "flat")
	c.Translate(at(20, 30))
	c.Rotate(math.Pi / 2)
	c.Scale(0.5, 0.5)
	c.FillString(face, at(10, 0), "up")
	c.FillString(face, at(10, 0), "")
	// By hand: (10, 0) halved is (5, 0), turned (0, 5), shifted (20, 35).
	want := []report.Mark{
		&report.Label{X: 5, Y: 6, Text: "flat", Font: report.SansBold, Size: 9},
		&report.Label{X: 20, Y: 35, Turn: 90, Text: "up", Font: report.SansBold, Size: 4.5},
	}
	if diff := cmp.Diff(want, c.picture.Marks); diff != "" {
		t.Error(diff)
	}
}

func TestCanvasColours(t *testing.T) {
	c := newCanvas(10, 10)
	line := stretch(at(0, 0), at(1, 1))
	for _, clr := range []color.Color{nil, color.White, color.NRGBA{R: 255, A: 51}, color.Transparent} {
		c.SetColor(clr)
		c.Stroke(line)
	}
	c.SetColor(nil)
	c.SetLineWidth(0)
	c.Stroke(line)
	c.Stroke(nil)
	c.Fill(nil)
	// A fifth of red on four fifths of white: 255, 204, 204.
	want := []report.Colour{{}, {R: 255, G: 255, B: 255}, {R: 255, G: 204, B: 204}}
	var got []report.Colour
	for _, m := range c.picture.Marks {
		got = append(got, m.(*report.Stroke).Colour)
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestCanvasIsLoud(t *testing.T) {
	face := cache().Lookup(faces[report.Sans], 8)
	tests := map[string]func(*canvas){
		"image":       func(c *canvas) { c.DrawImage(vg.Rectangle{}, nil) },
		"dash offset": func(c *canvas) { c.SetLineDash([]vg.Length{1}, 1) },
		"Pop":         func(c *canvas) { c.Pop() },
		"mirrored":    func(c *canvas) { c.Scale(1, -1); c.FillString(face, at(0, 0), "x") },
		"stretched":   func(c *canvas) { c.Scale(2, 1); c.FillString(face, at(0, 0), "x") },
		"component":   func(c *canvas) { c.Stroke(vg.Path{{Type: 99}}) },
		"controls":    func(c *canvas) { c.Stroke(vg.Path{{Type: vg.CurveComp}}) },
		"face": func(c *canvas) {
			c.FillString(font.Face{Font: font.Font{Typeface: "Other", Size: 8}}, at(0, 0), "x")
		},
		"units": func(*canvas) { Units(7).length() },
	}
	for name, act := range tests {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("no panic")
				}
			}()
			act(newCanvas(10, 10))
		})
	}
}

// Every face of the report is its own in gonum's collection: no two have the
// same name, and bold is wider than regular.
func TestFacesAreFound(t *testing.T) {
	names := map[string]bool{}
	for i, f := range faces {
		if !cache().Has(f) {
			t.Errorf("no face for font %d", i)
		}
		if fontOf(f) != report.Font(i) {
			t.Errorf("font %d is taken for %d", i, fontOf(f))
		}
		names[f.Name()] = true
	}
	if len(names) != len(faces) {
		t.Errorf("%d names for %d faces", len(names), len(faces))
	}
	regular, bold := lettering{report.Sans, 8, black}, lettering{report.SansBold, 8, black}
	if !(bold.width("class") > regular.width("class")) {
		t.Error("bold is not wider than regular")
	}
}

// A Liberation Sans digit is 1139 of 2048 units wide, as in its hmtx table.
func TestWidth(t *testing.T) {
	if got, want := float64(plain.width("0")), 8*1139/2048.; math.Abs(got-want) > 1e-9 {
		t.Errorf("0 is %v pt wide, want %v", got, want)
	}
}

func TestWrap(t *testing.T) {
	text := "extended below the depth reached"
	tests := []struct {
		room  vg.Length
		lines int
		want  []string
	}{
		{200, 3, []string{"extended below the depth reached"}},
		{100, 3, []string{"extended below the depth", "reached"}},
		{60, 3, []string{"extended below", "the depth", "reached"}},
		{60, 2, []string{"extended below", "the depth reac…"}},
		{20, 1, []string{"ext…"}},
		{1, 1, []string{""}},
	}
	for _, tt := range tests {
		got := plain.wrap(text, tt.room, tt.lines)
		if diff := cmp.Diff(tt.want, got); diff != "" {
			t.Errorf("in %v pt and %d lines: %s", tt.room, tt.lines, diff)
		}
		for _, line := range got {
			if plain.width(line) > tt.room {
				t.Errorf("%q is wider than %v pt", line, tt.room)
			}
		}
	}
}

func TestNiceStep(t *testing.T) {
	tests := []struct{ least, want float64 }{
		{1, 1}, {1.01, 2}, {2, 2}, {2.1, 5}, {5, 5}, {5.1, 10}, {0.03, 0.05}, {730, 1000},
	}
	for _, tt := range tests {
		if got, _ := niceStep(tt.least); math.Abs(got-tt.want) > 1e-12*tt.want {
			t.Errorf("a step of at least %v is %v, want %v", tt.least, got, tt.want)
		}
	}
}

package report

import (
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
)

// SVG writes p as an SVG 1.1 element that is a file of its own as well as a
// part of an HTML page. title and desc are for those who cannot see it; ""
// leaves them out. Numbers have up to three decimals, a thousandth of a
// point. Text stays text, in a list of families that begins with the
// report's own. A number that is not finite is an error.
func (p *Picture) SVG(w io.Writer, title, desc string) error {
	s := &svg{height: p.Height}
	s.open(p, title, desc)
	for _, m := range p.Marks {
		s.mark(m)
	}
	s.b.WriteString("</svg>\n")
	if s.infinite {
		return fmt.Errorf("picture %q holds a number that is not finite", title)
	}
	_, err := io.WriteString(w, s.b.String())
	return err
}

// svg prints one picture. Its y axis points down.
type svg struct {
	b        strings.Builder
	height   float64
	infinite bool // a number was
}

func (s *svg) open(p *Picture, title, desc string) {
	width, height := s.number(p.Width), s.number(p.Height)
	fmt.Fprintf(&s.b, `<svg xmlns="http://www.w3.org/2000/svg" width="%spt" height="%spt" viewBox="0 0 %s %s" role="img" font-family="%s">`+"\n",
		width, height, width, height, sansFamilies)
	s.element("title", title)
	s.element("desc", desc)
}

func (s *svg) element(name, text string) {
	if text = words(text); text != "" {
		fmt.Fprintf(&s.b, "<%s>%s</%s>\n", name, escapeXML(text), name)
	}
}

func (s *svg) mark(m Mark) {
	switch m := m.(type) {
	case *Stroke:
		fmt.Fprintf(&s.b, `<path d="%s" fill="none" stroke="%s" stroke-width="%s"`, s.path(m.Path), hex(m.Colour), s.number(m.Width))
		if len(m.Dash) > 0 {
			fmt.Fprintf(&s.b, ` stroke-dasharray="%s"`, s.numbers(m.Dash...))
		}
		s.b.WriteString("/>\n")
	case *Fill:
		fmt.Fprintf(&s.b, `<path d="%s" fill="%s"/>`+"\n", s.path(m.Path), hex(m.Colour))
	case *Label:
		s.label(m)
	default:
		panic(unknown(m))
	}
}

func (s *svg) label(l *Label) {
	x, y := s.number(l.X), s.number(s.height-l.Y)
	fmt.Fprintf(&s.b, `<text x="%s" y="%s" font-size="%s" fill="%s"%s`, x, y, s.number(l.Size), hex(l.Colour), face(l.Font))
	if l.Turn != 0 {
		fmt.Fprintf(&s.b, ` transform="rotate(%s %s %s)"`, s.number(-l.Turn), x, y)
	}
	fmt.Fprintf(&s.b, ">%s</text>\n", escapeXML(oneLine(l.Text)))
}

// The families that stand in for the report's own where they are missing:
// first those of the same widths, then what is like them.
const (
	sansFamilies  = "Liberation Sans,Arimo,Arial,Helvetica,sans-serif"
	serifFamilies = "Liberation Serif,Tinos,Times New Roman,Times,serif"
	monoFamilies  = "Liberation Mono,Cousine,Courier New,Courier,monospace"
)

// face returns the attributes that choose a font where it is not Sans.
func face(f Font) string {
	const bold, italic = ` font-weight="bold"`, ` font-style="italic"`
	const serif, mono = ` font-family="` + serifFamilies + `"`, ` font-family="` + monoFamilies + `"`
	switch f {
	case Sans:
		return ""
	case SansBold:
		return bold
	case SansItalic:
		return italic
	case SansBoldItalic:
		return bold + italic
	case Serif:
		return serif
	case SerifBold:
		return serif + bold
	case SerifItalic:
		return serif + italic
	case SerifBoldItalic:
		return serif + bold + italic
	case Mono:
		return mono
	case MonoBold:
		return mono + bold
	default:
		panic(unknown(f))
	}
}

func (s *svg) path(p Path) string {
	var b strings.Builder
	for _, m := range p {
		switch m.Kind {
		case MoveTo:
			b.WriteString("M" + s.points(m.X, m.Y))
		case LineTo:
			b.WriteString("L" + s.points(m.X, m.Y))
		case CurveTo:
			b.WriteString("C" + s.points(m.X1, m.Y1, m.X2, m.Y2, m.X, m.Y))
		case Close:
			b.WriteString("Z")
		default:
			panic(unknown(m.Kind))
		}
	}
	return b.String()
}

// points returns pairs of x and y with y pointing down.
func (s *svg) points(xy ...float64) string {
	for i := 1; i < len(xy); i += 2 {
		xy[i] = s.height - xy[i]
	}
	return s.numbers(xy...)
}

func (s *svg) numbers(xs ...float64) string {
	parts := make([]string, len(xs))
	for i, x := range xs {
		parts[i] = s.number(x)
	}
	return strings.Join(parts, " ")
}

// number returns x rounded to three decimals without zeros at the end.
func (s *svg) number(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		s.infinite = true
		return "0"
	}
	text := strconv.FormatFloat(x, 'f', 3, 64)
	text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	if text == "-0" {
		return "0"
	}
	return text
}

func hex(c Colour) string { return fmt.Sprintf("#%02x%02x%02x", c.R, c.G, c.B) }

package pdf

import "shearbook/report"

// Everything is measured in points, 1/72 inch. The column is 6.5 inches wide
// on both papers, so A4 and Letter break their lines alike.
const (
	columnWidth = 468.0

	bodySize    = 9.5
	bodyLeading = 13.5

	noteSize    = 7.8
	noteLeading = 10.4

	captionSize    = 8.4
	captionLeading = 11.2

	paragraphGap = 6.5
	blockGap     = 11.0 // around tables, figures, formulas and boxes

	indent       = 15.0 // of a list or a quotation
	narrowest    = 80.0 // no indent makes the measure narrower
	deepestFrame = 8    // frames and bars within each other that are still drawn
)

// The colours: greys, and the blue of the set by Okabe and Ito (2008, "Color
// Universal Design") as the one accent.
var (
	ink    = report.Colour{R: 0x1A, G: 0x1A, B: 0x1A}
	soft   = report.Colour{R: 0x55, G: 0x55, B: 0x55} // labels, captions, header and footer
	line   = report.Colour{R: 0x8C, G: 0x8C, B: 0x8C} // frames
	hair   = report.Colour{R: 0xD4, G: 0xD4, B: 0xD4} // between rows
	wash   = report.Colour{R: 0xF5, G: 0xF5, B: 0xF5} // behind code and boxes
	tint   = report.Colour{R: 0xE2, G: 0xEC, B: 0xF4} // behind a marked row
	accent = report.Colour{R: 0x00, G: 0x72, B: 0xB2}
)

// style is how a run of text is set.
type style struct {
	font   report.Font
	size   float64
	colour report.Colour
	rise   float64 // of the base line
	strike bool
	link   *link
}

// link is where a run of text leads: outside, or to a place in the document.
type link struct {
	url  string
	dest string
}

// look is how prose is set: its face and the distance of its lines.
type look struct {
	style
	leading float64
	align   report.Align
}

func bodyLook() look {
	return look{style: style{font: report.Sans, size: bodySize, colour: ink}, leading: bodyLeading}
}

func noteLook() look {
	return look{style: style{font: report.Sans, size: noteSize, colour: ink}, leading: noteLeading}
}

// caption returns how captions are set beside prose of a look.
func (l look) caption() look {
	return look{
		style:   style{font: report.Sans, size: min(captionSize, l.size), colour: soft},
		leading: min(captionLeading, l.leading),
	}
}

// headingLook returns how a heading is set, and the space above and below.
func headingLook(level int) (l look, above, below float64) {
	l = bodyLook()
	l.font = report.SansBold
	switch level {
	case 1:
		l.size, l.leading, above, below = 15, 19, 22, 8
	case 2:
		l.size, l.leading, above, below = 12, 15.5, 17, 6
	case 3:
		l.size, l.leading, above, below = 10.5, 14, 13, 4
	case 4:
		above, below = 10, 3
	case 5:
		l.font, above, below = report.SansItalic, 9, 3
	default:
		l.font, l.colour, above, below = report.SansItalic, soft, 9, 3
	}
	return l, above, below
}

// baseline returns how far below the top of a line its letters stand.
func (l look) baseline() float64 { return l.leading/2 + 0.35*l.size }

func (l look) with(f report.Font) look {
	l.font = f
	return l
}

// italic and bold turn a face to its relative. Mono has no italic.
func italic(f report.Font) report.Font {
	switch f {
	case report.Sans:
		return report.SansItalic
	case report.SansBold:
		return report.SansBoldItalic
	case report.Serif:
		return report.SerifItalic
	case report.SerifBold:
		return report.SerifBoldItalic
	default:
		return f
	}
}

func bold(f report.Font) report.Font {
	switch f {
	case report.Sans:
		return report.SansBold
	case report.SansItalic:
		return report.SansBoldItalic
	case report.Serif:
		return report.SerifBold
	case report.SerifItalic:
		return report.SerifBoldItalic
	case report.Mono:
		return report.MonoBold
	default:
		return f
	}
}

func mono(f report.Font) report.Font {
	switch f {
	case report.SansBold, report.SansBoldItalic, report.SerifBold, report.SerifBoldItalic, report.MonoBold:
		return report.MonoBold
	default:
		return report.Mono
	}
}

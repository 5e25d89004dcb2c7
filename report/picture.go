package report

// Picture is a vector drawing as a list of marks, drawn in their order. The
// origin is the lower left corner, y grows upward, lengths are in points
// (1/72 inch). Package report/figure makes them.
type Picture struct {
	Width, Height float64
	Marks         []Mark
}

// Mark is one mark of a picture: *Stroke, *Fill or *Label.
type Mark interface{ mark() }

// Stroke is a line along a path.
type Stroke struct {
	Path   Path
	Width  float64 // points
	Colour Colour
	Dash   []float64 // lengths of dashes and gaps; nil for a full line
}

// Fill is the inside of a path.
type Fill struct {
	Path   Path
	Colour Colour
}

// Label is text that starts at X, Y on its base line.
type Label struct {
	X, Y   float64
	Turn   float64 // degrees, anticlockwise
	Text   string
	Font   Font
	Size   float64 // points
	Colour Colour
}

func (*Stroke) mark() {}
func (*Fill) mark()   {}
func (*Label) mark()  {}

// Font is one of the report's own faces.
type Font uint8

// The faces: Liberation Sans, Serif and Mono in their styles.
const (
	Sans Font = iota
	SansBold
	SansItalic
	SansBoldItalic
	Serif
	SerifBold
	SerifItalic
	SerifBoldItalic
	Mono
	MonoBold
)

// Colour is red, green and blue.
type Colour struct{ R, G, B uint8 }

// Path is a sequence of pen movements.
type Path []Move

// Move is one movement of the pen to X, Y.
type Move struct {
	Kind           MoveKind
	X, Y           float64
	X1, Y1, X2, Y2 float64 // control points of a CurveTo
}

// MoveKind is the kind of a movement.
type MoveKind uint8

// The kinds of movement.
const (
	MoveTo MoveKind = iota
	LineTo
	CurveTo // cubic Bézier
	Close
)

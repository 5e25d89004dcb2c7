// Package report is the document that every output is printed from: one
// closed tree of blocks and inlines, and its Markdown and HTML printers. The
// PDF printer is report/pdf. A printer that meets a node it does not know
// panics: a new node is a change to every printer.
//
// The package also holds Results, the form in which decisions leave as JSON.
package report

// Caution is the sentence that stands in every output, in every format.
const Caution = "The design site class must be confirmed by a licensed engineer " +
	"under the locally adopted building code before it is used for design."

// Document is a whole report.
type Document struct {
	Title     string
	Subject   string   // of the PDF's metadata
	Author    string   // who prepared it
	Keywords  []string // of the PDF's metadata
	Project   string   // for the page header
	Reference string   // for the page header
	Revision  string
	Date      string // as the notebook states it, YYYY-MM-DD where it is a date
	Generator string // name and version of the program

	Blocks    []Block
	Footnotes []Footnote // in the order of their first mention
}

// Footnote is a note at the foot, or the end, of a document. Its number is
// its place in Document.Footnotes, from 1.
type Footnote struct {
	Blocks []Block
}

// Block is a piece of a document that stands on lines of its own: *Heading,
// *Paragraph, *List, *Quote, *CodeBlock, *Table, *Figure, *Image, *Formula,
// *Rule, *TitleBlock, *Summary, *CautionBox, *SignOff or *PageBreak.
type Block interface{ block() }

// Heading is a heading of level 1 to 6.
type Heading struct {
	Level  int
	Inline []Inline
}

// Paragraph is a paragraph of prose.
type Paragraph struct {
	Inline []Inline
}

// List is a bulleted or numbered list.
type List struct {
	Ordered bool
	Start   int  // of an ordered list
	Tight   bool // no space between the items
	Items   []ListItem
}

// ListItem is one item of a list.
type ListItem struct {
	Task   Task
	Blocks []Block
}

// Task is the box of a task list's item.
type Task uint8

// The boxes.
const (
	NoTask Task = iota
	TaskOpen
	TaskDone
)

// Quote is a quotation.
type Quote struct {
	Blocks []Block
}

// CodeBlock is preformatted text.
type CodeBlock struct {
	Language string
	Text     string // lines end in \n
}

// Align is how the cells of a column stand.
type Align uint8

// The alignments. AlignDecimal sets the decimal points below each other;
// printers that cannot align so set the column to the right.
const (
	AlignLeft Align = iota
	AlignCentre
	AlignRight
	AlignDecimal
)

// Table is a table with one header row, repeated on every page it reaches.
type Table struct {
	Caption []Inline // printed above; nil for none
	Columns []TableColumn
	Rows    []TableRow
	Notes   [][]Inline // printed below in small type
	Compact bool       // small type, for long tables of an appendix
}

// TableColumn is one column.
type TableColumn struct {
	Header []Inline
	Align  Align
	Wide   bool // takes the space that is left over
}

// TableRow is one row.
type TableRow struct {
	Cells    [][]Inline // as many as there are columns
	Marked   bool       // the row that matters: shaded, and a ▸ before its first cell
	Emphasis bool       // a total: bold, with a rule above
}

// Figure is a vector drawing.
type Figure struct {
	Name    string // of its file, without extension: "velocity-L1"
	Caption []Inline
	Alt     string // what it shows, for those who cannot see it
	Picture *Picture
}

// Image is a raster image from the author's folder.
type Image struct {
	Name   string // of its file in the output
	Alt    string
	Title  string
	Data   []byte // PNG or JPEG
	Format string // "png" or "jpeg"
	Width  int    // pixels
	Height int    // pixels
}

// Formula is a displayed formula.
type Formula struct {
	Math Math
}

// Rule is a horizontal rule.
type Rule struct{}

// PageBreak starts a new page where the output has pages.
type PageBreak struct{}

// TitleBlock is the head of a report.
type TitleBlock struct {
	Title  string
	Fields []Field
}

// Field is a label and what stands beside it.
type Field struct {
	Label string
	Value []Inline
}

// Summary is the box that answers before the reader reads on. There is one
// for each profile and code.
type Summary struct {
	Heading string // "Line L1"
	Label   string // "Site class"
	Answer  string // "C"
	Fields  []Field
}

// CautionBox holds Caution, boxed, and whatever else the reader must not
// miss.
type CautionBox struct {
	Blocks []Block
}

// SignOff is the place where people sign.
type SignOff struct {
	Signatures []Signature
}

// Signature is the space for one signature.
type Signature struct {
	Role  string // "Prepared by"
	Name  string // "" leaves a line to write on
	Title string // qualification, licence number
	Date  string
	Seal  bool // room for a seal
}

func (*Heading) block()    {}
func (*Paragraph) block()  {}
func (*List) block()       {}
func (*Quote) block()      {}
func (*CodeBlock) block()  {}
func (*Table) block()      {}
func (*Figure) block()     {}
func (*Image) block()      {}
func (*Formula) block()    {}
func (*Rule) block()       {}
func (*PageBreak) block()  {}
func (*TitleBlock) block() {}
func (*Summary) block()    {}
func (*CautionBox) block() {}
func (*SignOff) block()    {}

// Inline is a piece of a line: Text, *Emphasis, *Strong, *Strike, *Link,
// Code, FootnoteRef, LineBreak, Sub or Sup.
type Inline interface{ inline() }

// Text is plain text. A newline in it is a space.
type Text string

// Code is text in fixed pitch.
type Code string

// Sub is text below the line, as in V with index S30.
type Sub string

// Sup is text above the line.
type Sup string

// Emphasis is text in italics.
type Emphasis struct{ Inline []Inline }

// Strong is text in bold.
type Strong struct{ Inline []Inline }

// Strike is text struck through.
type Strike struct{ Inline []Inline }

// Link is text that leads somewhere: http, https, mailto, or # and a
// heading.
type Link struct {
	URL    string
	Inline []Inline
}

// FootnoteRef refers to Document.Footnotes by number, from 1.
type FootnoteRef int

// LineBreak is a hard line break.
type LineBreak struct{}

func (Text) inline()        {}
func (Code) inline()        {}
func (Sub) inline()         {}
func (Sup) inline()         {}
func (*Emphasis) inline()   {}
func (*Strong) inline()     {}
func (*Strike) inline()     {}
func (*Link) inline()       {}
func (FootnoteRef) inline() {}
func (LineBreak) inline()   {}

// Math is a piece of a formula: MathRow, MathIdent, MathText, MathFrac,
// MathSub, MathOver or MathSum.
type Math interface{ math() }

// MathRow is pieces side by side.
type MathRow []Math

// MathIdent is a variable, set in italics.
type MathIdent string

// MathText is anything set upright: numbers, units, operators. Printers put
// space around the operators = + − × / < > ≤ ≥ when one stands alone.
type MathText string

// MathFrac is a fraction.
type MathFrac struct{ Num, Den Math }

// MathSub is a base with an index below.
type MathSub struct{ Base, Sub Math }

// MathOver is a base with a bar over it.
type MathOver struct{ Base Math }

// MathSum is Σ with its limits; either may be nil.
type MathSum struct{ From, To Math }

func (MathRow) math()   {}
func (MathIdent) math() {}
func (MathText) math()  {}
func (MathFrac) math()  {}
func (MathSub) math()   {}
func (MathOver) math()  {}
func (MathSum) math()   {}

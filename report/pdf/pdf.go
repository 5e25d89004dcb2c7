// Package pdf prints a report.Document as a PDF: A4 or Letter, in the
// Liberation faces, embedded and cut down to the characters in use; figures
// and formulas are drawn, not pictured. The same document gives the same
// bytes.
//
// A document is set as one column of pieces (see piece), which are put on
// pages in a second pass, so that every page knows how many there are. Only
// then is anything written: a document that cannot be printed leaves no
// output.
//
// fpdf writes paths, images, links, the outline and the tree of pages; the
// fonts, the text in them and the packing are our own (see embed.go and
// finish.go). Left to fpdf they took three quarters of a report's time: it
// hashes each face as JSON, reads it twice, writes a map of 128 KiB for it,
// and makes a fresh packer for every stream.
//
// Attach adds files behind a finished document.
package pdf

import (
	"fmt"
	"io"
	"strings"
	"time"

	"shearbook/report"
)

// Paper is a size of sheet.
type Paper uint8

// The papers: ISO 216 A4, 210 mm by 297 mm, and US Letter, 8.5 in by 11 in.
const (
	A4 Paper = iota
	Letter
)

// Options are choices of the one who prints. The zero value prints on A4.
type Options struct {
	Paper Paper

	// Created is the date of making that the file states of itself. Zero
	// takes the document's own date at midnight UTC, or 1 January 2000 if
	// that is no date, so that the file does not depend on the day.
	Created time.Time

	// Language is the BCP 47 tag of the document's language; "" is "en".
	Language string
}

// MissingGlyphs is the error for characters that no face of the report can
// print. Scripts written from right to left count among them.
type MissingGlyphs struct {
	Runes []rune // in order
}

func (m *MissingGlyphs) Error() string {
	const most = 12
	var b strings.Builder
	b.WriteString("the fonts of the report cannot print ")
	for i, r := range m.Runes {
		if i == most {
			fmt.Fprintf(&b, " and %d more", len(m.Runes)-most)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%q (U+%04X)", r, r)
	}
	return b.String()
}

// Write prints a document. Nothing is written if it cannot be printed: the
// error is a *MissingGlyphs, or names the figure or image at fault. Write
// panics where the tree itself is wrong: at a node that it does not know, a
// reference to a footnote that is not there, a row of more cells than its
// table has columns. It may be called from several goroutines at once.
func Write(w io.Writer, d *report.Document, opt Options) error {
	s := &setter{
		doc: d, sheet: newSheet(opt.Paper),
		mentioned: map[int]bool{}, notes: map[int][]*piece{},
	}
	pages := s.paginate(s.flow(d.Blocks, s.column()))
	p := newPrinter(s, opt)
	p.furnish(pages)
	if s.err != nil {
		return s.err
	}
	if runes := s.fonts.missingRunes(); runes != nil {
		return &MissingGlyphs{runes}
	}
	return p.print(w, pages)
}

// sheet is the paper and the place of the body on it.
type sheet struct {
	width, height float64
	left          float64
	top, bottom   float64 // of the body
}

func newSheet(p Paper) sheet {
	var s sheet
	switch p {
	case A4:
		s = sheet{width: 595.28, height: 841.89}
	case Letter:
		s = sheet{width: 612, height: 792}
	default:
		panic(fmt.Sprintf("pdf: unknown paper %d", p))
	}
	s.left = (s.width - columnWidth) / 2
	s.top = 72
	s.bottom = s.height - 70
	return s
}

// setter sets the blocks of a document in type.
type setter struct {
	doc       *report.Document
	sheet     sheet
	fonts     faces
	mentioned map[int]bool     // footnotes whose first mention is set
	notes     map[int][]*piece // by number
	anchors   report.Anchors
	rasters   map[string]*raster
	err       error // the first
}

func (s *setter) fail(err error) {
	if s.err == nil {
		s.err = err
	}
}

// area is a part of the column and the look of prose in it.
type area struct {
	x, width float64
	look
	depth int  // of lists
	tight bool // in a list without space between its items
}

func (s *setter) column() area { return area{width: columnWidth, look: bodyLook()} }

// inset leaves out d at the left, unless the measure would get too narrow.
func (a area) inset(d float64) area {
	if a.width-d < narrowest {
		return a
	}
	a.x += d
	a.width -= d
	return a
}

// bodyHeight is what a page holds.
func (s *setter) bodyHeight() float64 { return s.sheet.bottom - s.sheet.top }

// plainFirstPage tells whether the first page does without a header: the
// title block says it all.
func (s *setter) plainFirstPage() bool {
	if len(s.doc.Blocks) == 0 {
		return false
	}
	_, ok := s.doc.Blocks[0].(*report.TitleBlock)
	return ok
}

func (s *setter) firstTop() float64 {
	if s.plainFirstPage() {
		return s.sheet.top - 14
	}
	return s.sheet.top
}

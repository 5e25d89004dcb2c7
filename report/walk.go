package report

import (
	"fmt"
	"iter"
	"strings"
)

// All yields every block of the document, in the order in which they are
// printed, those inside lists, quotes, boxes and footnotes among them.
func (d *Document) All() iter.Seq[Block] {
	return func(yield func(Block) bool) {
		if !walk(d.Blocks, yield) {
			return
		}
		for _, f := range d.Footnotes {
			if !walk(f.Blocks, yield) {
				return
			}
		}
	}
}

func walk(blocks []Block, yield func(Block) bool) bool {
	for _, b := range blocks {
		if !yield(b) {
			return false
		}
		inner := [][]Block{}
		switch b := b.(type) {
		case *List:
			for _, item := range b.Items {
				inner = append(inner, item.Blocks)
			}
		case *Quote:
			inner = append(inner, b.Blocks)
		case *CautionBox:
			inner = append(inner, b.Blocks)
		}
		for _, blocks := range inner {
			if !walk(blocks, yield) {
				return false
			}
		}
	}
	return true
}

// PlainText returns the text of inlines without their styles; footnote
// references are left out.
func PlainText(inline []Inline) string {
	var text strings.Builder
	for _, in := range inline {
		switch in := in.(type) {
		case Text:
			text.WriteString(strings.ReplaceAll(string(in), "\n", " "))
		case Code:
			text.WriteString(string(in))
		case Sub:
			text.WriteString(string(in))
		case Sup:
			text.WriteString(string(in))
		case LineBreak:
			text.WriteByte(' ')
		case FootnoteRef:
		case *Emphasis:
			text.WriteString(PlainText(in.Inline))
		case *Strong:
			text.WriteString(PlainText(in.Inline))
		case *Strike:
			text.WriteString(PlainText(in.Inline))
		case *Link:
			text.WriteString(PlainText(in.Inline))
		default:
			panic(fmt.Sprintf("report: PlainText does not know %T", in))
		}
	}
	return text.String()
}

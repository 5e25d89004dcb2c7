package figure

import (
	"fmt"
	"sort"
	"strings"
	"sync"
	"unicode"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/font/liberation"
	"gonum.org/v1/plot/vg"

	"shearbook/report"
)

// The style and the weight of faces that are not regular: StyleItalic and
// WeightBold of golang.org/x/image/font.
const (
	italic = 1
	bold   = 3
)

// faces are gonum's descriptions of the report's fonts.
var faces = [...]font.Font{
	report.Sans:            {Typeface: "Liberation", Variant: "Sans"},
	report.SansBold:        {Typeface: "Liberation", Variant: "Sans", Weight: bold},
	report.SansItalic:      {Typeface: "Liberation", Variant: "Sans", Style: italic},
	report.SansBoldItalic:  {Typeface: "Liberation", Variant: "Sans", Style: italic, Weight: bold},
	report.Serif:           {Typeface: "Liberation", Variant: "Serif"},
	report.SerifBold:       {Typeface: "Liberation", Variant: "Serif", Weight: bold},
	report.SerifItalic:     {Typeface: "Liberation", Variant: "Serif", Style: italic},
	report.SerifBoldItalic: {Typeface: "Liberation", Variant: "Serif", Style: italic, Weight: bold},
	report.Mono:            {Typeface: "Liberation", Variant: "Mono"},
	report.MonoBold:        {Typeface: "Liberation", Variant: "Mono", Weight: bold},
}

// fontOf returns the report's font that f describes.
func fontOf(f font.Font) report.Font {
	f.Size = 0
	for i, own := range faces {
		if own == f {
			return report.Font(i)
		}
	}
	panic(fmt.Sprintf("figure: %s is not a face of the report", f.Name()))
}

// cache returns the parsed faces. They are parsed by the first figure of a
// process and not at its start, which other commands would pay for too.
var cache = sync.OnceValue(func() *font.Cache { return font.NewCache(liberation.Collection()) })

// lettering is how text looks.
type lettering struct {
	font   report.Font
	size   vg.Length
	colour ink
}

// The lettering of every figure.
var (
	plain  = lettering{report.Sans, 8, black}
	titles = lettering{report.Sans, 8.5, black}
	small  = lettering{report.Sans, 7, darkGrey}
	strong = lettering{report.SansBold, 9, black}
)

// lineFeed is the distance of base lines, in parts of the size.
const lineFeed = 1.2

// capHeight is the height of capitals and digits, in parts of the size
// (1409 of 2048 units in the OS/2 table of Liberation Sans).
const capHeight = 0.688

// face returns the face to measure and write with.
func (l lettering) face() font.Face { return cache().Lookup(faces[l.font], l.size) }

// width returns the width of text on one line.
func (l lettering) width(text string) vg.Length {
	face := l.face()
	return face.Width(text)
}

// feed returns the distance of base lines.
func (l lettering) feed() vg.Length { return l.size * lineFeed }

// longest is how many bytes of a name are looked at.
const longest = 400

// clean returns text on one line: printable, with single spaces, and cut to
// a length that can be measured in bounded time.
func clean(text string) string {
	text = strings.ToValidUTF8(text[:min(len(text), longest)], "")
	text = strings.Join(strings.Fields(text), " ")
	return strings.Map(func(r rune) rune {
		if unicode.IsPrint(r) {
			return r
		}
		return -1
	}, text)
}

// fit returns text, shortened with an ellipsis where it is wider than room;
// "" if not even that fits.
func (l lettering) fit(text string, room vg.Length) string {
	if l.width(text) <= room {
		return text
	}
	runes := []rune(text)
	short := func(n int) string { return strings.TrimRight(string(runes[:n]), " ,;") + "…" }
	n := sort.Search(len(runes), func(n int) bool { return l.width(short(n)) > room }) - 1
	if n < 1 {
		return ""
	}
	return short(n)
}

// wrap returns text in at most so many lines that are no wider than room.
func (l lettering) wrap(text string, room vg.Length, lines int) []string {
	if lines == 1 || l.width(text) <= room {
		return []string{l.fit(text, room)}
	}
	words := strings.Split(text, " ")
	n := 1
	for n < len(words) && l.width(strings.Join(words[:n+1], " ")) <= room {
		n++
	}
	first := l.fit(strings.Join(words[:n], " "), room)
	if n == len(words) {
		return []string{first}
	}
	return append([]string{first}, l.wrap(strings.Join(words[n:], " "), room, lines-1)...)
}

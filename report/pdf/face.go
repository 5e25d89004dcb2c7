package pdf

import (
	"encoding/binary"
	"fmt"
	"math"
	"math/bits"
	"slices"

	"codeberg.org/go-fonts/liberation/liberationmonobold"
	"codeberg.org/go-fonts/liberation/liberationmonoregular"
	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansbolditalic"
	"codeberg.org/go-fonts/liberation/liberationsansitalic"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"codeberg.org/go-fonts/liberation/liberationserifbold"
	"codeberg.org/go-fonts/liberation/liberationserifbolditalic"
	"codeberg.org/go-fonts/liberation/liberationserifitalic"
	"codeberg.org/go-fonts/liberation/liberationserifregular"

	"shearbook/report"
)

// faceCount is the number of faces in report.Font.
const faceCount = int(report.MonoBold) + 1

// trueType returns the file of a face.
func trueType(f report.Font) []byte {
	switch f {
	case report.Sans:
		return liberationsansregular.TTF
	case report.SansBold:
		return liberationsansbold.TTF
	case report.SansItalic:
		return liberationsansitalic.TTF
	case report.SansBoldItalic:
		return liberationsansbolditalic.TTF
	case report.Serif:
		return liberationserifregular.TTF
	case report.SerifBold:
		return liberationserifbold.TTF
	case report.SerifItalic:
		return liberationserifitalic.TTF
	case report.SerifBoldItalic:
		return liberationserifbolditalic.TTF
	case report.Mono:
		return liberationmonoregular.TTF
	case report.MonoBold:
		return liberationmonobold.TTF
	default:
		panic(fmt.Sprintf("pdf: unknown font %d", f))
	}
}

// face is one TrueType face: what setting type needs of it, and which
// characters the document has used. Lengths are in font units unless their
// comment says otherwise.
type face struct {
	file      []byte
	tables    map[string][]byte
	cmap      []byte // subtable of format 4, platform 3, encoding 1
	unitsEm   int
	metrics   int  // entries of hmtx that have an advance
	longLoca  bool // format of loca
	slanted   bool
	used      [1 << 16 / 64]uint64 // characters set, a bit each
	latin     [0x250]int16         // advance in 1/1000 em + 1; 0 where not yet looked up
	kernPairs []byte               // of the kern table, sorted, 6 bytes each
	before    [1 << 16 / 64]uint16 // characters in use below each word of used; see number
}

// loadFace reads the directory of a TrueType file. The files are part of the
// program, so their structure is not in doubt.
func loadFace(file []byte) *face {
	t := &face{file: file, tables: map[string][]byte{}}
	for i := range be16(file, 4) {
		entry := file[12+16*i:]
		start, size := be32(entry, 8), be32(entry, 12)
		t.tables[string(entry[:4])] = file[start : start+size : start+size]
	}
	t.unitsEm = be16(t.tables["head"], 18)
	t.longLoca = be16(t.tables["head"], 50) == 1
	t.metrics = be16(t.tables["hhea"], 34)
	t.slanted = be32(t.tables["post"], 4) != 0
	t.cmap = windowsMap(t.tables["cmap"])
	if kern := t.tables["kern"]; len(kern) > 18 && be16(kern, 8)>>8 == 0 {
		t.kernPairs = kern[18 : 18+6*be16(kern, 10)]
	}
	return t
}

// windowsMap finds the format 4 subtable for the Basic Multilingual Plane.
func windowsMap(cmap []byte) []byte {
	for i := range be16(cmap, 2) {
		entry := cmap[4+8*i:]
		sub := cmap[be32(entry, 4):]
		if be16(entry, 0) == 3 && be16(entry, 2) == 1 && be16(sub, 0) == 4 {
			return sub
		}
	}
	panic("pdf: face without a character map of format 4")
}

// glyph returns the glyph of r, 0 if there is none.
func (t *face) glyph(r rune) int {
	if r > 0xFFFE {
		return 0
	}
	n := be16(t.cmap, 6) / 2
	ends, starts := t.cmap[14:], t.cmap[16+2*n:]
	deltas, offsets := t.cmap[16+4*n:], t.cmap[16+6*n:]
	low, high := 0, n-1 // the last segment ends at 0xFFFF
	for low < high {
		mid := (low + high) / 2
		if be16(ends, 2*mid) < int(r) {
			low = mid + 1
		} else {
			high = mid
		}
	}
	start := be16(starts, 2*low)
	if int(r) < start {
		return 0
	}
	offset := be16(offsets, 2*low)
	if offset == 0 {
		return (int(r) + be16(deltas, 2*low)) & 0xFFFF
	}
	g := be16(offsets, 2*low+offset+2*(int(r)-start))
	if g == 0 {
		return 0
	}
	return (g + be16(deltas, 2*low)) & 0xFFFF
}

// advance returns the width of r in 1/1000 em, rounded as it is written to
// the file, so that a viewer sets the line as it was measured.
func (t *face) advance(r rune) int {
	if int(r) < len(t.latin) {
		if w := t.latin[r]; w != 0 {
			return int(w) - 1
		}
	}
	w := int(math.Round(1000 / float64(t.unitsEm) * float64(t.glyphAdvance(t.glyph(r)))))
	if int(r) < len(t.latin) {
		t.latin[r] = int16(w) + 1
	}
	return w
}

func (t *face) glyphAdvance(g int) int {
	return be16(t.tables["hmtx"], 4*min(g, t.metrics-1))
}

// outline returns the data of a glyph in the glyf table, empty for a space.
func (t *face) outline(g int) []byte {
	loca := t.tables["loca"]
	if t.longLoca {
		return t.tables["glyf"][be32(loca, 4*g):be32(loca, 4*g+4)]
	}
	return t.tables["glyf"][2*be16(loca, 2*g) : 2*be16(loca, 2*g+2)]
}

// bounds is the box around a glyph.
type bounds struct{ left, bottom, right, top int }

func (t *face) bounds(r rune) bounds {
	o := t.outline(t.glyph(r))
	if len(o) < 10 {
		return bounds{}
	}
	return bounds{beSigned(o, 2), beSigned(o, 4), beSigned(o, 6), beSigned(o, 8)}
}

// kern returns the correction between two neighbours in font units. Figures
// are left alone: they must stand below each other.
func (t *face) kern(left, right rune) int {
	if left <= ' ' || right <= ' ' || isFigure(left) && isFigure(right) {
		return 0
	}
	pair := t.glyph(left)<<16 | t.glyph(right)
	low, high := 0, len(t.kernPairs)/6
	for low < high {
		mid := (low + high) / 2
		if be32(t.kernPairs, 6*mid) < pair {
			low = mid + 1
		} else {
			high = mid
		}
	}
	if 6*low < len(t.kernPairs) && be32(t.kernPairs, 6*low) == pair {
		return beSigned(t.kernPairs, 6*low+4)
	}
	return 0
}

func isFigure(r rune) bool { return '0' <= r && r <= '9' }

func (t *face) use(r rune) { t.used[r>>6] |= 1 << (r & 63) }

// usedRunes lists the characters set in this face, in order.
func (t *face) usedRunes() []rune {
	var runes []rune
	for i, bits := range t.used {
		for b := range 64 {
			if bits>>b&1 == 1 {
				runes = append(runes, rune(64*i+b))
			}
		}
	}
	return runes
}

// number gives the characters in use their numbers: 1 and on, in order.
func (t *face) number() {
	n := 0
	for i, word := range t.used {
		t.before[i] = uint16(n)
		n += bits.OnesCount64(word)
	}
}

// numberOf returns the number of a character in use.
func (t *face) numberOf(r rune) uint16 {
	return t.before[r>>6] + uint16(bits.OnesCount64(t.used[r>>6]&(1<<(r&63)-1))) + 1
}

// faces holds the faces that a document has asked for, and the characters
// that none of them can print.
type faces struct {
	loaded  [faceCount]*face
	missing map[rune]bool
}

func (f *faces) get(font report.Font) *face {
	if f.loaded[font] == nil {
		f.loaded[font] = loadFace(trueType(font))
	}
	return f.loaded[font]
}

// missingRunes lists what could not be printed, in order.
func (f *faces) missingRunes() []rune {
	var runes []rune
	for r := range f.missing {
		runes = append(runes, r)
	}
	slices.Sort(runes)
	return runes
}

func be16(b []byte, at int) int     { return int(binary.BigEndian.Uint16(b[at:])) }
func be32(b []byte, at int) int     { return int(binary.BigEndian.Uint32(b[at:])) }
func beSigned(b []byte, at int) int { return int(int16(binary.BigEndian.Uint16(b[at:]))) }

package pdf

import (
	"encoding/binary"
	"slices"
)

// subset returns the face as a TrueType file that holds only the characters
// in use, and the glyph of each of them in it.
//
// The layout is that of the OpenType specification, version 1.9: glyph 0 and
// the components of compound glyphs come along, glyphs are numbered anew, and
// every glyph has its own entry in hmtx.
func (t *face) subset() (file []byte, glyphs []int) {
	runes := t.usedRunes()
	old, renumbered := t.closure(runes)

	var glyf, loca, hmtx []byte
	for _, g := range old {
		loca = binary.BigEndian.AppendUint32(loca, uint32(len(glyf)))
		glyf = append(glyf, renumberComponents(t.outline(g), renumbered)...)
		for len(glyf)%4 != 0 {
			glyf = append(glyf, 0)
		}
		hmtx = binary.BigEndian.AppendUint16(hmtx, uint16(t.glyphAdvance(g)))
		hmtx = binary.BigEndian.AppendUint16(hmtx, uint16(t.sideBearing(g)))
	}
	loca = binary.BigEndian.AppendUint32(loca, uint32(len(glyf)))

	for _, r := range runes {
		glyphs = append(glyphs, renumbered[t.glyph(r)])
	}
	count := uint16(len(old))
	return assemble(map[string][]byte{
		"post": t.tables["post"][:32],
		"cvt ": t.tables["cvt "], "fpgm": t.tables["fpgm"], "prep": t.tables["prep"],
		"cmap": characterMap(t, runes, renumbered),
		"glyf": glyf, "loca": loca, "hmtx": hmtx,
		"head": patch16(t.tables["head"], 50, 1),
		"hhea": patch16(t.tables["hhea"], 34, count),
		"maxp": patch16(t.tables["maxp"], 4, count),
	}), glyphs
}

// closure lists the glyphs of the characters and of their components, in
// order, and where each of them stands in that list.
func (t *face) closure(runes []rune) ([]int, map[int]int) {
	glyphs := []int{0}
	seen := map[int]bool{0: true}
	add := func(g int) {
		if !seen[g] {
			seen[g] = true
			glyphs = append(glyphs, g)
		}
	}
	for _, r := range runes {
		add(t.glyph(r))
	}
	for i := 0; i < len(glyphs); i++ {
		eachComponent(t.outline(glyphs[i]), func(at []byte) { add(be16(at, 0)) })
	}
	slices.Sort(glyphs)
	renumbered := make(map[int]int, len(glyphs))
	for i, g := range glyphs {
		renumbered[g] = i
	}
	return glyphs, renumbered
}

// Flags of a component of a compound glyph.
const (
	wordArguments  = 1 << 0
	oneScale       = 1 << 3
	moreComponents = 1 << 5
	twoScales      = 1 << 6
	twoByTwo       = 1 << 7
)

// eachComponent hands over the place of the glyph number of each component
// of a compound glyph.
func eachComponent(outline []byte, visit func(number []byte)) {
	if len(outline) < 10 || beSigned(outline, 0) >= 0 {
		return
	}
	for at := 10; ; {
		flags := be16(outline, at)
		visit(outline[at+2 : at+4])
		at += 6
		if flags&wordArguments != 0 {
			at += 2
		}
		switch {
		case flags&oneScale != 0:
			at += 2
		case flags&twoScales != 0:
			at += 4
		case flags&twoByTwo != 0:
			at += 8
		}
		if flags&moreComponents == 0 {
			return
		}
	}
}

func renumberComponents(outline []byte, renumbered map[int]int) []byte {
	if len(outline) < 10 || beSigned(outline, 0) >= 0 {
		return outline
	}
	outline = slices.Clone(outline)
	eachComponent(outline, func(number []byte) {
		binary.BigEndian.PutUint16(number, uint16(renumbered[be16(number, 0)]))
	})
	return outline
}

func (t *face) sideBearing(g int) int {
	hmtx := t.tables["hmtx"]
	if g < t.metrics {
		return be16(hmtx, 4*g+2)
	}
	return be16(hmtx, 4*t.metrics+2*(g-t.metrics))
}

// characterMap is a cmap of one subtable in format 4, a segment for each run
// of characters that follow each other.
func characterMap(t *face, runes []rune, renumbered map[int]int) []byte {
	var starts, ends, glyphs []int
	for _, r := range runes {
		g := renumbered[t.glyph(r)]
		if n := len(ends) - 1; n >= 0 && ends[n] == int(r)-1 && glyphs[n]+int(r)-starts[n] == g {
			ends[n]++
			continue
		}
		starts, ends, glyphs = append(starts, int(r)), append(ends, int(r)), append(glyphs, g)
	}
	starts, ends, glyphs = append(starts, 0xFFFF), append(ends, 0xFFFF), append(glyphs, 0)

	n := len(starts)
	search := 1
	for search*2 <= n {
		search *= 2
	}
	selector := 0
	for 1<<(selector+1) <= n {
		selector++
	}
	words := []int{0, 1, 3, 1, 0, 12, 4, 16 + 8*n, 0, 2 * n, 2 * search, selector, 2*n - 2*search}
	words = append(words, ends...)
	words = append(words, 0)
	words = append(words, starts...)
	for i := range n {
		words = append(words, glyphs[i]-starts[i])
	}
	words = append(words, make([]int, n)...)
	var out []byte
	for _, w := range words {
		out = binary.BigEndian.AppendUint16(out, uint16(w))
	}
	return out
}

func patch16(table []byte, at int, v uint16) []byte {
	table = slices.Clone(table)
	binary.BigEndian.PutUint16(table[at:], v)
	return table
}

// assemble joins tables into a file.
func assemble(tables map[string][]byte) []byte {
	var tags []string
	for tag, data := range tables {
		if len(data) > 0 {
			tags = append(tags, tag)
		}
	}
	slices.Sort(tags)
	out := make([]byte, 12+16*len(tags))
	binary.BigEndian.PutUint32(out, 0x00010000)
	n := len(tags)
	search, selector := 1, 0
	for search*2 <= n {
		search, selector = search*2, selector+1
	}
	for i, v := range []int{n, 16 * search, selector, 16 * (n - search)} {
		binary.BigEndian.PutUint16(out[4+2*i:], uint16(v))
	}
	head := 0
	for i, tag := range tags {
		entry, at := out[12+16*i:], len(out)
		copy(entry, tag)
		binary.BigEndian.PutUint32(entry[8:], uint32(at))
		binary.BigEndian.PutUint32(entry[12:], uint32(len(tables[tag])))
		if tag == "head" {
			head = at
		}
		out = append(out, tables[tag]...)
		if tag == "head" {
			binary.BigEndian.PutUint32(out[at+8:], 0) // as it stands while sums are taken
		}
		for len(out)%4 != 0 {
			out = append(out, 0)
		}
		binary.BigEndian.PutUint32(out[12+16*i+4:], tableSum(out[at:]))
	}
	binary.BigEndian.PutUint32(out[head+8:], 0xB1B0AFBA-tableSum(out))
	return out
}

// tableSum is the checksum of a table, of a length that 4 divides.
func tableSum(table []byte) uint32 {
	sum := uint32(0)
	for ; len(table) >= 4; table = table[4:] {
		sum += binary.BigEndian.Uint32(table)
	}
	return sum
}

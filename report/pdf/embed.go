package pdf

import (
	"fmt"
	"hash/fnv"
	"strconv"
	"strings"
	"unicode/utf16"

	"shearbook/report"
)

// embeddedFont is a face as the file holds it: a composite font (ISO 32000-1,
// 9.7) whose characters are numbered from 1 in the order of Unicode.
type embeddedFont struct {
	key     string // in the resources of the pages
	name    string // with the tag of a subset
	face    *face
	runes   []rune
	file    []byte
	toGlyph []byte // two bytes for each number
}

// fontKey is the name of a face in the resources of the pages.
func fontKey(f report.Font) string { return "F" + strconv.Itoa(int(f)) }

// embedded are the faces in use, cut down to what is used. Their characters
// must have their numbers before a page is written.
func (p *printer) embedded() []embeddedFont {
	var fonts []embeddedFont
	for i, f := range p.s.fonts.loaded {
		if f == nil {
			continue
		}
		e := embeddedFont{key: fontKey(report.Font(i)), face: f, runes: f.usedRunes()}
		if len(e.runes) == 0 {
			continue
		}
		var glyphs []int
		e.file, glyphs = f.subset()
		e.toGlyph = []byte{0, 0}
		for _, g := range glyphs {
			e.toGlyph = append(e.toGlyph, byte(g>>8), byte(g))
		}
		e.name = subsetTag(e.runes) + "+" + fontName(report.Font(i))
		fonts = append(fonts, e)
	}
	return fonts
}

// subsetTag is six capitals that stand for a set of characters.
func subsetTag(runes []rune) string {
	h := fnv.New64a()
	h.Write([]byte(string(runes)))
	sum := h.Sum64()
	tag := make([]byte, 6)
	for i := range tag {
		tag[i] = 'A' + byte(sum%26)
		sum /= 26
	}
	return string(tag)
}

// fontObjects is how many objects of a file a font takes.
const fontObjects = 6

// objects are the objects of a font, the first of them numbered n.
func (e *embeddedFont) objects(n int) []string {
	return []string{
		fmt.Sprintf("<</Type /Font /Subtype /Type0 /BaseFont /%s /Encoding /Identity-H /DescendantFonts [%d 0 R] /ToUnicode %d 0 R>>", e.name, n+1, n+2),
		fmt.Sprintf("<</Type /Font /Subtype /CIDFontType2 /BaseFont /%s /CIDSystemInfo <</Registry (Adobe) /Ordering (Identity) /Supplement 0>> /FontDescriptor %d 0 R /CIDToGIDMap %d 0 R /W [1 [%s]]>>",
			e.name, n+3, n+4, e.widths()),
		streamObject("", e.toUnicode()),
		e.descriptor(n + 5),
		streamObject("", e.toGlyph),
		streamObject(fmt.Sprintf("/Length1 %d ", len(e.file)), e.file),
	}
}

// streamObject is a packed stream.
func streamObject(entries string, data []byte) string {
	packed := pack(data)
	return fmt.Sprintf("<<%s/Filter /FlateDecode /Length %d>>\nstream\n%s\nendstream", entries, len(packed), packed)
}

// widths are the widths of the characters in 1/1000 of the size.
func (e *embeddedFont) widths() string {
	var b strings.Builder
	for i, r := range e.runes {
		if i > 0 {
			b.WriteByte(' ')
		}
		b.WriteString(strconv.Itoa(e.face.advance(r)))
	}
	return b.String()
}

// toUnicode is the table from numbers to characters (ISO 32000-1, 9.10.3).
func (e *embeddedFont) toUnicode() []byte {
	var b strings.Builder
	b.WriteString("/CIDInit /ProcSet findresource begin\n12 dict begin\nbegincmap\n" +
		"/CIDSystemInfo <</Registry (Adobe) /Ordering (UCS) /Supplement 0>> def\n/CMapName /Adobe-Identity-UCS def\n/CMapType 2 def\n" +
		"1 begincodespacerange\n<0000> <FFFF>\nendcodespacerange\n")
	const most = 100 // lines of one block
	for at := 0; at < len(e.runes); at += most {
		block := e.runes[at:min(at+most, len(e.runes))]
		fmt.Fprintf(&b, "%d beginbfchar\n", len(block))
		for i, r := range block {
			fmt.Fprintf(&b, "<%04X> <", at+i+1)
			for _, u := range utf16.Encode([]rune{r}) {
				fmt.Fprintf(&b, "%04X", u)
			}
			b.WriteString(">\n")
		}
		b.WriteString("endbfchar\n")
	}
	b.WriteString("endcmap\nCMapName currentdict /CMap defineresource pop\nend\nend\n")
	return []byte(b.String())
}

// descriptor is the font's descriptor (ISO 32000-1, 9.8), from its tables
// head, hhea, OS/2 and post.
func (e *embeddedFont) descriptor(file int) string {
	t := e.face
	em := func(v int) int { return v * 1000 / t.unitsEm }
	head, hhea, os2, post := t.tables["head"], t.tables["hhea"], t.tables["OS/2"], t.tables["post"]
	const symbolic, fixedPitch, italic = 4, 1, 64
	flags := symbolic
	if be32(post, 12) != 0 {
		flags |= fixedPitch
	}
	if t.slanted {
		flags |= italic
	}
	weight := float64(be16(os2, 4)) / 65
	return fmt.Sprintf("<</Type /FontDescriptor /FontName /%s /Flags %d /FontBBox [%d %d %d %d] /ItalicAngle %d /Ascent %d /Descent %d /CapHeight %d /StemV %d /FontFile2 %d 0 R>>",
		e.name, flags, em(beSigned(head, 36)), em(beSigned(head, 38)), em(beSigned(head, 40)), em(beSigned(head, 42)),
		beSigned(post, 4), em(beSigned(hhea, 4)), em(beSigned(hhea, 6)), em(beSigned(os2, 88)),
		50+int(weight*weight), // common practice
		file)
}

// fontName is the PostScript name of a face.
func fontName(f report.Font) string {
	return [faceCount]string{
		"LiberationSans", "LiberationSans-Bold", "LiberationSans-Italic", "LiberationSans-BoldItalic",
		"LiberationSerif", "LiberationSerif-Bold", "LiberationSerif-Italic", "LiberationSerif-BoldItalic",
		"LiberationMono", "LiberationMono-Bold",
	}[f]
}

package pdf

import (
	"bytes"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode/utf16"

	"github.com/go-pdf/fpdf"

	"shearbook/report"
)

// printer writes set pages with fpdf. It remembers what the page is set to,
// so that only changes are written.
type printer struct {
	s      *setter
	opt    Options
	pdf    *fpdf.Fpdf
	dests  map[string]int  // fpdf's number of each place that links lead to
	placed map[string]bool // the place has been passed
	images map[string]bool
	widths map[int]int // how many images have a width
	levels []int       // of the headings that the outline is inside

	font     report.Font
	size     float64
	fontSet  bool
	inkNow   report.Colour
	inkSet   bool
	penNow   report.Colour
	penWidth float64
	penDash  []float64
	penSet   bool

	line      []byte // what text writes into
	furniture [][]op // header and footer of each page, from its upper left corner
}

func newPrinter(s *setter, opt Options) *printer {
	return &printer{s: s, opt: opt,
		dests: map[string]int{}, placed: map[string]bool{}, images: map[string]bool{}, widths: map[int]int{}}
}

// print writes the pages.
func (p *printer) print(w io.Writer, pages []*page) error {
	p.pdf = fpdf.NewCustom(&fpdf.InitType{
		OrientationStr: "P", UnitStr: "pt",
		Size: fpdf.SizeType{Wd: p.s.sheet.width, Ht: p.s.sheet.height},
	})
	p.pdf.SetMargins(0, 0, 0)
	p.pdf.SetAutoPageBreak(false, 0)
	p.pdf.SetCatalogSort(true)
	p.pdf.SetLineCapStyle("butt")
	p.pdf.SetLineJoinStyle("round")
	p.metadata()
	p.survey(pages)
	for _, f := range p.s.fonts.loaded {
		if f != nil {
			f.number()
		}
	}
	p.pdf.SetCompression(false) // finish packs what is to be packed
	for i, pg := range pages {
		p.pdf.AddPage()
		p.forget()
		p.page(pg)
		for _, o := range p.furniture[i] {
			p.draw(o, 0, 0)
		}
	}
	var plain bytes.Buffer
	if err := p.pdf.Output(&plain); err != nil {
		return err
	}
	whole, err := finish(plain.Bytes(), p.embedded())
	if err != nil {
		return err
	}
	_, err = w.Write(whole)
	return err
}

// metadata states what the document is. Strings are UTF-16 with a byte order
// mark, as PDF has them; fpdf's own conversion stops at U+FFFF.
func (p *printer) metadata() {
	d := p.s.doc
	creator := d.Generator
	if creator == "" {
		creator = "shearbook"
	}
	p.pdf.SetTitle(utf16Text(d.Title), false)
	p.pdf.SetSubject(utf16Text(d.Subject), false)
	p.pdf.SetAuthor(utf16Text(d.Author), false)
	p.pdf.SetKeywords(utf16Text(strings.Join(d.Keywords, ", ")), false)
	p.pdf.SetCreator(utf16Text(creator), false)
	created := p.opt.Created.UTC()
	if p.opt.Created.IsZero() {
		created = documentDate(d.Date)
	}
	p.pdf.SetCreationDate(created)
	p.pdf.SetModificationDate(created)
	language := p.opt.Language
	if language == "" {
		language = "en"
	}
	p.pdf.SetLang(strings.Map(languageRune, language))
}

func documentDate(date string) time.Time {
	if t, err := time.Parse(time.DateOnly, date); err == nil {
		return t
	}
	return time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)
}

func languageRune(r rune) rune {
	if r == '-' || '0' <= r && r <= '9' || 'A' <= r && r <= 'Z' || 'a' <= r && r <= 'z' {
		return r
	}
	return -1
}

func utf16Text(text string) string {
	if text == "" {
		return ""
	}
	out := []byte{0xFE, 0xFF}
	for _, u := range utf16.Encode([]rune(clean(text))) {
		out = append(out, byte(u>>8), byte(u))
	}
	return string(out)
}

// survey notes the characters in use and the places that links can lead to.
func (p *printer) survey(pages []*page) {
	for i, pg := range pages {
		for _, pc := range pg.placed {
			p.surveyOps(pc.ops)
		}
		for _, pc := range pg.foot {
			p.surveyOps(pc.ops)
		}
		p.surveyOps(p.furniture[i])
	}
}

func (p *printer) surveyOps(ops []op) {
	for _, o := range ops {
		switch o := o.(type) {
		case *textOp:
			p.use(o.font, o.text)
		case *figureOp:
			for _, m := range o.picture.Marks {
				if l, ok := m.(*report.Label); ok {
					for _, r := range p.s.labelRuns(l, o.scale) {
						p.use(r.font, r.text)
					}
				}
			}
		case *destOp:
			if p.dests[o.name] == 0 {
				p.dests[o.name] = p.pdf.AddLink()
			}
		}
	}
}

func (p *printer) use(font report.Font, text string) {
	f := p.s.fonts.get(font)
	for _, r := range text {
		f.use(r)
	}
}

// page draws what stands on a page: frames behind, then the pieces, then the
// notes at the foot.
func (p *printer) page(pg *page) {
	left := p.s.sheet.left
	for _, f := range pg.frames {
		p.frame(f, left)
	}
	for _, pc := range pg.placed {
		for _, o := range pc.ops {
			p.draw(o, left, pc.y)
		}
	}
	if len(pg.foot) == 0 {
		return
	}
	y := p.s.sheet.bottom - footHeight(pg.foot)
	p.draw(rule(0, 6, 90, 0.5, line), left, y)
	y += footGap
	for i, pc := range pg.foot {
		if i > 0 {
			y += pc.above
		}
		for _, o := range pc.ops {
			p.draw(o, left, y)
		}
		y += pc.height
	}
}

func footHeight(foot []*piece) float64 { return footGap + height(foot, true) }

func (p *printer) frame(f framed, left float64) {
	x, h := left+f.x, f.bottom-f.top
	if f.fill != nil {
		p.draw(&fillOp{x, f.top, f.width, h, *f.fill}, 0, 0)
	}
	if f.stroke != nil {
		p.draw(box(x, f.top, f.width, h, 0.6, *f.stroke), 0, 0)
	}
	if f.bar != nil {
		p.draw(&fillOp{x, f.top, f.barWidth, h, *f.bar}, 0, 0)
	}
}

// draw puts a mark on the page.
func (p *printer) draw(o op, dx, dy float64) {
	switch o := o.(type) {
	case *textOp:
		for _, seg := range p.s.segments(o.style, o.text) {
			p.text(o.x+dx+seg.x, o.y+dy+seg.y, seg.text, o.style)
		}
	case *fillOp:
		p.ink(o.colour)
		p.pdf.Rect(o.x+dx, o.y+dy, o.width, o.height, "F")
	case *pathOp:
		p.polygon(o, dx, dy)
	case *figureOp:
		p.drawFigure(o, dx, dy)
	case *imageOp:
		p.register(o.image)
		p.pdf.ImageOptions(o.image.key, o.x+dx, o.y+dy, o.width, o.height, false, fpdf.ImageOptions{ImageType: o.image.kind}, 0, "")
	case *linkOp:
		p.linkArea(o, dx, dy)
	case *destOp:
		if !p.placed[o.name] {
			p.placed[o.name] = true
			p.pdf.SetLink(p.dests[o.name], max(0, o.y+dy-4), -1)
		}
	case *outlineOp:
		p.outline(o, dy)
	default:
		panic(fmt.Sprintf("pdf: unknown mark %T", o))
	}
}

func (p *printer) linkArea(o *linkOp, dx, dy float64) {
	if o.link.url != "" {
		p.pdf.LinkString(o.x+dx, o.y+dy, o.width, o.height, o.link.url)
		return
	}
	if n := p.dests[o.link.dest]; n != 0 {
		p.pdf.Link(o.x+dx, o.y+dy, o.width, o.height, n)
	}
}

// outline enters a heading at the depth at which it stands below others,
// whatever its level.
func (p *printer) outline(o *outlineOp, dy float64) {
	for len(p.levels) > 0 && p.levels[len(p.levels)-1] >= o.level {
		p.levels = p.levels[:len(p.levels)-1]
	}
	p.pdf.Bookmark(utf16Text(o.title), len(p.levels), max(0, dy-4))
	p.levels = append(p.levels, o.level)
}

// forget makes the printer state everything anew, after fpdf has changed or
// restored what the page is set to.
func (p *printer) forget() { p.fontSet, p.inkSet, p.penSet = false, false, false }

// text shows text. fpdf is not asked to: it knows fonts only as whole files,
// which cost it more than all the rest of a report.
func (p *printer) text(x, y float64, text string, st style) {
	p.ink(st.colour)
	b := append(p.line[:0], "BT "...)
	if !p.fontSet || p.font != st.font || p.size != st.size {
		p.font, p.size, p.fontSet = st.font, st.size, true
		b = append(b, '/')
		b = append(b, fontKey(st.font)...)
		b = append(b, ' ')
		b = strconv.AppendFloat(b, st.size, 'f', 2, 64)
		b = append(b, " Tf "...)
	}
	b = strconv.AppendFloat(b, x, 'f', 2, 64)
	b = append(b, ' ')
	b = strconv.AppendFloat(b, p.s.sheet.height-y, 'f', 2, 64)
	b = append(b, " Td ("...)
	f := p.s.fonts.get(st.font)
	for _, r := range text {
		n := f.numberOf(r)
		b = appendEscaped(appendEscaped(b, byte(n>>8)), byte(n))
	}
	p.line = append(b, ") Tj ET"...)
	p.pdf.RawWriteStr(string(p.line))
}

// appendEscaped appends a byte of a string.
func appendEscaped(b []byte, c byte) []byte {
	switch c {
	case '(', ')', '\\':
		return append(b, '\\', c)
	case '\r':
		return append(b, `\r`...)
	}
	return append(b, c)
}

// ink sets the colour of text and areas.
func (p *printer) ink(c report.Colour) {
	if p.inkSet && p.inkNow == c {
		return
	}
	p.inkNow, p.inkSet = c, true
	p.pdf.SetTextColor(int(c.R), int(c.G), int(c.B))
	p.pdf.SetFillColor(int(c.R), int(c.G), int(c.B))
}

// pen sets width, colour and dashes of lines.
func (p *printer) pen(width float64, c report.Colour, dash []float64) {
	if !p.penSet || p.penWidth != width {
		p.pdf.SetLineWidth(width)
	}
	if !p.penSet || p.penNow != c {
		p.pdf.SetDrawColor(int(c.R), int(c.G), int(c.B))
	}
	if !p.penSet || !slices.Equal(p.penDash, dash) {
		p.pdf.SetDashPattern(dash, 0)
	}
	p.penWidth, p.penNow, p.penDash, p.penSet = width, c, dash, true
}

func (p *printer) polygon(o *pathOp, dx, dy float64) {
	if o.fill {
		p.ink(o.colour)
	} else {
		p.pen(o.width, o.colour, o.dash)
	}
	for i, pt := range o.points {
		if i == 0 {
			p.pdf.MoveTo(pt.x+dx, pt.y+dy)
		} else {
			p.pdf.LineTo(pt.x+dx, pt.y+dy)
		}
	}
	if o.closed {
		p.pdf.ClosePath()
	}
	if o.fill {
		p.pdf.DrawPath("F")
	} else {
		p.pdf.DrawPath("S")
	}
}

// furnish sets header and footer of every page.
func (p *printer) furnish(pages []*page) {
	header := p.header()
	for i := range pages {
		ops := p.footer(i+1, len(pages))
		if i > 0 || !p.s.plainFirstPage() {
			ops = append(ops, header...)
		}
		p.furniture = append(p.furniture, ops)
	}
}

// header names the project at the left, reference and revision at the right,
// in two lines at most; the whole of them stands in the title block.
func (p *printer) header() []op {
	d, sheet := p.s.doc, p.s.sheet
	st := style{font: report.Sans, size: 7.8, colour: soft}
	const leading, base, gutter = 9.6, 50.0, 16.0
	right := d.Reference
	if d.Revision != "" {
		right = strings.TrimPrefix(right+" · Revision "+d.Revision, " · ")
	}
	rightWords := p.s.plainWords(right, st)
	width := min(natural(rightWords), 0.5*columnWidth)
	left := d.Project
	if left == "" {
		left = d.Title
	}
	var ops []op
	for _, side := range []struct {
		words    []word
		x, width float64
		align    report.Align
	}{
		{p.s.plainWords(left, st), sheet.left, columnWidth - width - gutter, report.AlignLeft},
		{rightWords, sheet.left + columnWidth - width, width, report.AlignRight},
	} {
		lines := p.s.breakLines(side.words, max(side.width, 1))
		if len(lines) > 2 {
			lines = lines[:2]
			last := &lines[1]
			last.runs = append(last.runs, run{st, " …", p.s.width(st, " …")})
		}
		for i, l := range lines {
			y := base - leading*float64(len(lines)-1-i)
			ops = append(ops, p.s.lineOps(l, side.align, side.x, y, side.width)...)
		}
	}
	return append(ops, rule(sheet.left, base+5, columnWidth, 0.5, line))
}

// footer holds the caution, the date and the number of the page.
func (p *printer) footer(n, of int) []op {
	sheet := p.s.sheet
	st := style{font: report.Sans, size: 7, colour: soft}
	if w := p.s.width(st, report.Caution); w > columnWidth {
		st.size *= columnWidth / w
	}
	y := sheet.height - 42
	number := "Page " + strconv.Itoa(n) + " of " + strconv.Itoa(of)
	paging := style{font: report.Sans, size: 7.8, colour: soft}
	ops := []op{
		rule(sheet.left, y-11, columnWidth, 0.5, line),
		&textOp{sheet.left, y, report.Caution, st},
		&textOp{sheet.left + columnWidth - p.s.width(paging, number), y + 12, number, paging},
	}
	date := p.s.breakLines(p.s.plainWords(p.s.doc.Date, paging), columnWidth/2)
	if len(date) > 0 {
		ops = append(ops, p.s.lineOps(date[0], report.AlignLeft, sheet.left, y+12, columnWidth/2)...)
	}
	return ops
}

package pdf

// page is a page of the body: where its pieces stand.
type page struct {
	first  bool
	placed []placed
	frames []framed
	foot   []*piece // notes, below each other
}

// placed is a piece with its top at Y from the top of the sheet.
type placed struct {
	*piece
	y float64
}

// framed is the stretch of a frame on one page.
type framed struct {
	*frame
	top, bottom float64
}

// The foot of a page: a short rule, then the notes.
const (
	footGap   = 15.0 // from the body to the first note; the rule stands in it
	footMost  = 0.6  // of the body: what notes may take of a page that has more to hold
	footLarge = 0.35 // of the body: a longer note may run on
)

// builder puts pieces on pages, in one pass.
type builder struct {
	s     *setter
	sheet sheet
	pages []*page
	now   *page
	y     float64 // where the next piece goes
	foot  float64 // height of the notes on this page with what separates them
	queue []*piece
	noted []bool // by number: the note is on a page or in the queue
	open  map[*frame]int
}

// paginate puts a column of pieces on pages.
func (s *setter) paginate(pieces []*piece) []*page {
	b := &builder{s: s, sheet: s.sheet, noted: make([]bool, len(s.doc.Footnotes)+1)}
	b.newPage(nil)
	pieces = cutAll(pieces, s.bodyHeight())
	for len(pieces) > 0 {
		n := 1
		for n < len(pieces) && pieces[n-1].keep && !pieces[n].breaks {
			n++
		}
		b.placeGroup(pieces[:n])
		pieces = pieces[n:]
	}
	for n := range s.doc.Footnotes { // those never mentioned
		b.enqueue(n + 1)
	}
	b.drain(1)
	for len(b.queue) > 0 {
		b.newPage(nil)
	}
	return b.pages
}

// cutAll cuts the pieces that are taller than a page.
func cutAll(pieces []*piece, page float64) []*piece {
	for i, p := range pieces {
		if p.height > page {
			out := append([]*piece{}, pieces[:i]...)
			for _, p := range pieces[i:] {
				out = append(out, p.cut(0.6*page)...)
			}
			return out
		}
	}
	return pieces
}

// newPage opens a page that starts with p, nil for nothing yet.
func (b *builder) newPage(p *piece) {
	b.now = &page{first: len(b.pages) == 0}
	b.pages = append(b.pages, b.now)
	b.y = b.top()
	b.foot = 0
	b.open = map[*frame]int{}
	b.drain(footMost)
	if p != nil {
		for _, h := range p.repeat {
			b.put(h)
		}
	}
}

func (b *builder) top() float64 {
	if b.now.first {
		return b.s.firstTop()
	}
	return b.sheet.top
}

func (b *builder) empty() bool { return len(b.now.placed) == 0 }

// room is the height that is left on this page.
func (b *builder) room() float64 { return b.sheet.bottom - b.foot - b.y + 0.01 }

// placeGroup places pieces that belong on one page, if one page holds them.
func (b *builder) placeGroup(group []*piece) {
	if group[0].breaks && !b.empty() {
		b.newPage(group[0])
	}
	if !b.fits(group) && !(b.empty() && b.foot == 0) {
		if b.fitsAlone(group) {
			b.newPage(group[0])
		}
	}
	if b.fits(group) {
		for _, p := range group {
			b.put(p)
		}
		b.note(group)
		return
	}
	for _, p := range group {
		b.placeLoose(p)
	}
}

// placeLoose places a piece where it fits, on a page of its own if need be.
func (b *builder) placeLoose(p *piece) {
	one := []*piece{p}
	for !b.fits(one) && !(b.empty() && b.foot == 0) {
		before := len(b.queue)
		b.newPage(p)
		if len(b.now.placed) == len(p.repeat) && len(b.queue) == before && b.foot == 0 {
			break // as empty as a page gets
		}
	}
	b.put(p)
	b.note(one)
}

// fits tells whether pieces and the notes they mention fit this page.
func (b *builder) fits(group []*piece) bool {
	return height(group, b.empty()) <= b.room()-b.footFor(group)
}

// fitsAlone tells whether pieces would fit a fresh page.
func (b *builder) fitsAlone(group []*piece) bool {
	return height(group, true)+height(group[0].repeat, true)+b.footFor(group) <= b.sheet.bottom-b.sheet.top
}

// footFor returns the height at the foot that the notes first mentioned in
// pieces ask for. Where notes are waiting already they ask for none.
func (b *builder) footFor(group []*piece) float64 {
	if len(b.queue) > 0 {
		return 0
	}
	h := 0.0
	var counted map[int]bool
	for _, p := range group {
		for _, n := range p.footnotes {
			if b.noted[n] || counted[n] {
				continue
			}
			if counted == nil {
				counted = map[int]bool{}
			}
			counted[n] = true
			h += b.noteHeight(n)
		}
	}
	if h > 0 && b.foot == 0 {
		h += footGap
	}
	return h
}

// noteHeight returns the height of a note, or of its first lines if it is
// long enough to run on to the next page.
func (b *builder) noteHeight(n int) float64 {
	note := b.s.note(n)
	h := height(note, false)
	if h > footLarge*(b.sheet.bottom-b.sheet.top) && len(note) > 3 {
		return height(note[:3], false)
	}
	return h
}

// put places a piece here.
func (b *builder) put(p *piece) {
	if !b.empty() {
		b.y += p.above
	}
	b.now.placed = append(b.now.placed, placed{p, b.y})
	for _, f := range p.frames {
		i, ok := b.open[f]
		if !ok {
			i = len(b.now.frames)
			b.open[f] = i
			b.now.frames = append(b.now.frames, framed{frame: f, top: b.y})
		}
		b.now.frames[i].bottom = b.y + p.height
	}
	b.y += p.height
}

// note puts the notes that pieces mention at the foot, once the pieces are
// placed.
func (b *builder) note(group []*piece) {
	for _, p := range group {
		for _, n := range p.footnotes {
			b.enqueue(n)
		}
	}
	b.drain(footMost)
}

// enqueue lets a note wait for room at the foot, once.
func (b *builder) enqueue(n int) {
	if b.noted[n] {
		return
	}
	b.noted[n] = true
	b.queue = append(b.queue, b.s.note(n)...)
}

// drain moves waiting notes to the foot of this page, as far as they fit in
// a share of the body.
func (b *builder) drain(share float64) {
	limit := share * (b.sheet.bottom - b.top())
	for len(b.queue) > 0 {
		p := b.queue[0]
		h := p.height + p.above
		if b.foot == 0 {
			h = p.height + footGap
		}
		untouched := b.foot == 0 && b.empty()
		if !untouched && (h > b.room() || b.foot+h > limit) {
			return
		}
		b.queue = b.queue[1:]
		b.now.foot = append(b.now.foot, p)
		b.foot += h
		for _, n := range p.footnotes {
			b.enqueue(n)
		}
	}
}

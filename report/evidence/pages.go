package evidence

import "fmt"

// maxPages is the most pages that are read.
const maxPages = 20_000

// pages reads the text of all pages.
func (f *file) pages() ([]Page, error) {
	root, _ := f.resolve(f.trailer["Root"]).(dict)
	w := &pageWalk{file: f, seen: map[int]bool{}, fonts: map[int]*font{}}
	err := w.node(root["Pages"], nil, 0)
	return w.found, err
}

// pageWalk walks the tree of pages (ISO 32000-1, 7.7.3).
type pageWalk struct {
	*file
	seen  map[int]bool
	fonts map[int]*font // by their objects
	found []Page
}

func (w *pageWalk) node(o object, resources object, depth int) error {
	r, ok := o.(ref)
	if !ok || w.seen[r.number] || depth > maxDepth {
		return damaged("the tree of its pages leads nowhere, or in a circle")
	}
	w.seen[r.number] = true
	o, err := w.need(o)
	if err != nil {
		return err
	}
	node, ok := o.(dict)
	if !ok {
		return damaged("a page cannot be read")
	}
	if own := node["Resources"]; own != nil {
		resources = own
	}
	kids, ok := w.resolve(node["Kids"]).(list)
	if !ok {
		return w.page(node, resources)
	}
	for _, kid := range kids {
		if err := w.node(kid, resources, depth+1); err != nil {
			return err
		}
	}
	return nil
}

// page reads the text of one page.
func (w *pageWalk) page(node dict, resources object) error {
	n := len(w.found) + 1
	if n > maxPages {
		return refuse(askAgain, "the PDF has more than %d pages", maxPages)
	}
	res, _ := w.resolve(resources).(dict)
	fonts, _ := w.resolve(res["Font"]).(dict)
	t := &typist{walk: w, fonts: fonts, used: map[name]*font{}, now: state{ctm: identity}}
	for _, c := range w.contents(node["Contents"]) {
		if w.budget.values--; w.budget.values < 0 {
			return errCostly
		}
		if err := w.content(t, c); err != nil {
			return fmt.Errorf("page %d: %w", n, err)
		}
	}
	w.found = append(w.found, Page{n, arrangeLines(t.runs)})
	return nil
}

// contents are the streams of a page: one, or a list of them.
func (w *pageWalk) contents(o object) []object {
	if l, ok := w.resolve(o).(list); ok {
		return l
	}
	if o == nil {
		return nil
	}
	return []object{o}
}

func (w *pageWalk) content(t *typist, o object) error {
	o, err := w.need(o)
	if err != nil {
		return err
	}
	st, ok := o.(*stream)
	if !ok {
		return damaged("its content is missing")
	}
	data, err := w.unpack(st, &w.budget.packed)
	if err != nil {
		return err
	}
	return t.read(data)
}

package sitexml

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"unicode"

	"shearbook/profile"
)

// walk is the state of going through the elements.
type walk struct {
	stack    []element
	count    int // of elements
	stated   int // how much metadata there is
	root     string
	rootSpot spot

	// What the present element lies in, nil where it does not.

	site     *site
	analysis *analysis
	profile  *column
	layer    *layer
}

// element is an element that is open.
type element struct {
	name, lower string // without its namespace
	spot        spot
	text        quoted // of its own
	value       quoted // of its child value
	uncertainty quoted
	children    bool
}

// quoted is a text of the file and its place.
type quoted struct {
	text string
	spot
}

// elements goes through the file. It returns false if there is nothing to
// assemble.
func (r *reader) elements(text []byte) bool {
	place := newCounter(text)
	d := xml.NewDecoder(bytes.NewReader(text))
	d.CharsetReader = func(_ string, in io.Reader) (io.Reader, error) { return in, nil } // it is UTF-8 already
	for {
		off := d.InputOffset()
		token, err := d.Token()
		if err == io.EOF {
			break
		}
		at := place.at(int(off))
		if err != nil {
			r.syntax(err, place.at(int(d.InputOffset())))
			return false
		}
		switch t := token.(type) {
		case xml.StartElement:
			if !r.start(t, at) {
				return false
			}
		case xml.CharData:
			r.text(t, at)
		case xml.EndElement:
			if !r.end() {
				return false
			}
		case xml.Directive:
			r.stop(at, "remove it", "a document type declaration is not read")
			return false
		}
	}
	return r.isSiteXML()
}

// syntax tells of XML that cannot be followed.
func (r *reader) syntax(err error, at spot) {
	var bad *xml.SyntaxError
	switch {
	case !errors.As(err, &bad):
		r.stop(at, "save it as XML 1.0 in UTF-8", "the file cannot be read: %s", printable(strings.TrimPrefix(err.Error(), "xml: ")))
	case bad.Msg == "unexpected EOF":
		r.stop(at, "the file seems to be cut off", "the file ends inside an element")
	default:
		r.stop(at, "open the file in a browser, which shows where it breaks", "the file is not well-formed XML: %s", printable(bad.Msg))
	}
}

// printable is a message of the parser, shortened, with what cannot be
// printed as blanks.
func printable(text string) string {
	const most = 120
	runes := []rune(strings.ToValidUTF8(text[:min(len(text), 4*most)], ""))
	if len(runes) > most {
		runes = append(runes[:most], '…')
	}
	return strings.Map(func(c rune) rune {
		if !unicode.IsPrint(c) {
			return ' '
		}
		return c
	}, string(runes))
}

// isSiteXML looks whether there was a profile.
func (r *reader) isSiteXML() bool {
	switch root := strings.ToLower(r.walk.root); {
	case len(r.file.profiles) > 0:
		return true
	case strings.Contains(root, "quakeml"):
		r.stop(r.walk.rootSpot, "give a file that holds a velocity profile, not only Vs30 or a site class", "the file has no element velocityProfile")
	default:
		r.stop(r.walk.rootSpot, "of XML only SiteXML is read; export the layers as CSV with the columns top_m,bottom_m,vs_mps",
			"the file is XML of another form: its outermost element is %s", profile.Quote(r.walk.root))
	}
	return false
}

// start opens an element.
func (r *reader) start(t xml.StartElement, at spot) bool {
	w := &r.walk
	switch {
	case len(w.stack) == MaxDepth:
		r.stop(at, "", "more than %d elements lie inside one another", MaxDepth)
		return false
	case w.count == MaxElements:
		r.stop(at, "split the file", "the file has more than %d elements", MaxElements)
		return false
	}
	w.count++
	e := element{name: t.Name.Local, lower: strings.ToLower(t.Name.Local), spot: at}
	if len(w.stack) == 0 {
		w.root, w.rootSpot = e.name, at
	} else {
		w.stack[len(w.stack)-1].children = true
	}
	w.stack = append(w.stack, e)
	return r.open(&e, t.Attr)
}

// text adds to the text of the element that is open.
func (r *reader) text(data xml.CharData, at spot) {
	stack := r.walk.stack
	words := strings.Join(strings.Fields(string(data)), " ")
	if len(stack) == 0 || words == "" {
		return
	}
	e := &stack[len(stack)-1]
	if e.text.text == "" {
		e.text = quoted{words, firstWord(data, at)}
		return
	}
	if len(e.text.text) < MaxTag {
		e.text.text += " " + words
	}
}

// firstWord is the place of the first character of data that is not blank,
// where at is the place of the first. It counts characters of the text, not
// of the references in the file.
func firstWord(data xml.CharData, at spot) spot {
	i := bytes.IndexFunc(data, func(c rune) bool { return !unicode.IsSpace(c) })
	c := newCounter(data)
	c.spot = at
	return c.at(max(i, 0))
}

// end closes the innermost element.
func (r *reader) end() bool {
	w := &r.walk
	e := w.stack[len(w.stack)-1]
	w.stack = w.stack[:len(w.stack)-1]
	if len(w.stack) > 0 && (e.lower == "value" || e.lower == "uncertainty") && !e.children {
		above := &w.stack[len(w.stack)-1]
		to := &above.value
		if e.lower == "uncertainty" {
			to = &above.uncertainty
		}
		if *to == (quoted{}) {
			*to = e.text
			if to.spot == (spot{}) {
				to.spot = e.spot
			}
			return true
		}
	}
	return r.close(&e)
}

// number is the text that an element gives as its value.
func (e *element) number() quoted {
	if e.value.text != "" || e.text.text == "" {
		q := e.value
		if q.spot == (spot{}) {
			q.spot = e.spot
		}
		return q
	}
	return e.text
}

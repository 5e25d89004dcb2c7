package spreadsheet

import (
	"archive/zip"
	"encoding/xml"
	"errors"
	"io"
)

// maxToken is how many bytes a tag or a text in a part may have, unzipped. A
// cell of a spreadsheet holds at most 32,767 characters (common practice, from
// memory), each of 10 bytes at most, as in &#x10FFFF;.
const maxToken = 1 << 20

// maxDepth is how deep the elements of a part may be nested.
const maxDepth = 100

var (
	errLarge   = errors.New("larger unzipped than it may be")
	errToken   = errors.New("a tag or a text is too long")
	errNested  = errors.New("elements are nested too deep")
	errRoot    = errors.New("not the element that the part begins with")
	errMissing = errors.New("the part is missing")
)

// part is one XML part of a workbook, read token by token. Elements and
// attributes go by their local names: prefixes are the writer's choice, and
// the strict and the transitional namespaces differ in nothing that is read.
type part struct {
	decoder *xml.Decoder
	source  source
	depth   int // of the element that is open
	buffer  []byte
}

// source is what a part is unzipped from. It counts what is really unzipped.
type source struct {
	io.ReadCloser
	left  *int64 // bytes that may still be unzipped
	token int    // bytes since the last token
}

// Read returns errLarge and errToken beyond the limits.
func (s *source) Read(p []byte) (int, error) {
	n, err := s.ReadCloser.Read(p)
	*s.left -= int64(n)
	s.token += n
	switch {
	case *s.left < 0:
		return 0, errLarge
	case s.token > maxToken:
		return 0, errToken
	}
	return n, err
}

// openPart opens a part of which left bytes may be unzipped.
func openPart(f *zip.File, left *int64) (*part, error) {
	if f == nil {
		return nil, errMissing
	}
	in, err := f.Open()
	if err != nil {
		return nil, err
	}
	p := &part{source: source{ReadCloser: in, left: left}}
	p.decoder = xml.NewDecoder(&p.source)
	return p, nil
}

func (p *part) close() { p.source.Close() }

// next is the next token. It checks, as the decoder does, that the XML is in
// order.
func (p *part) next() (xml.Token, error) {
	p.source.token = 0
	token, err := p.decoder.Token()
	if err != nil {
		return nil, err
	}
	switch token.(type) {
	case xml.StartElement:
		if p.depth++; p.depth > maxDepth {
			return nil, errNested
		}
	case xml.EndElement:
		p.depth--
	}
	return token, nil
}

// root calls do for each element directly in the part's first, which has the
// given name, and reads on to the part's end, so that its checksum is checked.
func (p *part) root(name string, do func(xml.StartElement) error) error {
	found := false
	for {
		token, err := p.next()
		switch {
		case err == io.EOF && found:
			return nil
		case err == io.EOF:
			return errRoot
		case err != nil:
			return err
		}
		if e, ok := token.(xml.StartElement); ok {
			if found || e.Name.Local != name {
				return errRoot
			}
			found = true
			if err := p.children(do); err != nil {
				return err
			}
		}
	}
}

// children calls do for each element directly in the one that is open, up to
// its end. What do leaves unread of an element is passed over.
func (p *part) children(do func(xml.StartElement) error) error {
	depth := p.depth
	for {
		token, err := p.next()
		if err != nil {
			return err
		}
		if p.depth < depth {
			return nil
		}
		if e, ok := token.(xml.StartElement); ok {
			if err := do(e); err != nil {
				return err
			}
			if err := p.passOver(depth); err != nil {
				return err
			}
		}
	}
}

// passOver reads on until the elements deeper than depth are closed.
func (p *part) passOver(depth int) error {
	for p.depth > depth {
		if _, err := p.next(); err != nil {
			return err
		}
	}
	return nil
}

// text reads the text of the element that is open, up to its end.
func (p *part) text() (string, error) {
	p.buffer = p.buffer[:0]
	for depth := p.depth; ; {
		token, err := p.next()
		if err != nil {
			return "", err
		}
		if p.depth < depth {
			return string(p.buffer), nil
		}
		if text, ok := token.(xml.CharData); ok && p.depth == depth {
			p.buffer = append(p.buffer, text...)
		}
	}
}

// attribute is the value of an attribute without a namespace, "" if there is
// none.
func attribute(e xml.StartElement, name string) string {
	for i := range e.Attr {
		if a := &e.Attr[i]; a.Name.Local == name && a.Name.Space == "" {
			return a.Value
		}
	}
	return ""
}

// yes reports whether an attribute is true (XML Schema, part 2, 3.2.2).
func yes(e xml.StartElement, name string) bool {
	value := attribute(e, name)
	return value == "1" || value == "true"
}

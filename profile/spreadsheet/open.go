package spreadsheet

import (
	"archive/zip"
	"encoding/xml"
	"path"
	"strings"
)

// book is an open workbook: its list of sheets and what they share.
type book struct {
	files    map[string]*zip.File // by partName
	shared   map[string]string    // the part of each kind that stands first in the list
	left     int64                // bytes of sheets and texts that may still be unzipped
	sheets   []sheetPart
	texts    texts
	formats  []numberFormat // of each style
	from1904 bool           // days are counted from 1904
}

// sheetPart is an entry in a workbook's list of sheets.
type sheetPart struct {
	name   string
	hidden bool
	part   string // "" of a sheet that is no worksheet
}

// relation is an entry in a workbook's list of what belongs to it.
type relation struct{ kind, part string }

// openBook reads everything but the sheets themselves.
func openBook(archive *zip.Reader) (*book, error) {
	b := &book{files: map[string]*zip.File{}, shared: map[string]string{}, left: MaxUnzipped}
	for _, f := range archive.File {
		if name := partName(f.Name); b.files[name] == nil {
			b.files[name] = f
		}
	}
	relations, err := b.readRelations()
	if err != nil {
		return nil, err
	}
	if err := b.readList(relations); err != nil {
		return nil, err
	}
	return b, b.readShared()
}

// other opens one of the workbook's lists.
func (b *book) other(name string) (*part, error) {
	left := int64(MaxPart)
	return openPart(b.files[name], &left)
}

// readRelations reads what belongs to the workbook, by id (ISO/IEC 29500-2,
// relationships).
func (b *book) readRelations() (map[string]relation, error) {
	p, err := b.other("xl/_rels/workbook.xml.rels")
	if err != nil {
		return nil, err
	}
	defer p.close()
	relations := map[string]relation{}
	err = p.root("Relationships", func(e xml.StartElement) error {
		if e.Name.Local == "Relationship" && attribute(e, "TargetMode") != "External" {
			to := relation{path.Base(attribute(e, "Type")), target(attribute(e, "Target"))}
			relations[attribute(e, "Id")] = to
			if b.shared[to.kind] == "" {
				b.shared[to.kind] = to.part
			}
		}
		return nil
	})
	return relations, err
}

// target is the part that a relation leads to: from the workbook's folder, or
// from the root.
func target(name string) string {
	name = partName(name)
	if strings.HasPrefix(name, "/") {
		return path.Clean(name)[1:]
	}
	return path.Join("xl", name)
}

// readList reads the list of sheets (ISO/IEC 29500-1, 18.2.20).
func (b *book) readList(relations map[string]relation) error {
	p, err := b.other("xl/workbook.xml")
	if err != nil {
		return err
	}
	defer p.close()
	return p.root("workbook", func(e xml.StartElement) error {
		switch e.Name.Local {
		case "workbookPr":
			b.from1904 = yes(e, "date1904")
		case "sheets":
			return p.children(func(e xml.StartElement) error { return b.addSheet(e, relations) })
		}
		return nil
	})
}

// addSheet adds an entry of the list of sheets.
func (b *book) addSheet(e xml.StartElement, relations map[string]relation) error {
	if e.Name.Local != "sheet" {
		return nil
	}
	s := sheetPart{name: unescape(attribute(e, "name"))}
	state := attribute(e, "state")
	s.hidden = state == "hidden" || state == "veryHidden"
	var to relation
	found := false
	for _, a := range e.Attr {
		if a.Name.Local == "id" && a.Name.Space != "" {
			to, found = relations[a.Value]
		}
	}
	if !found {
		return errMissing
	}
	if to.kind == "worksheet" {
		s.part = to.part
	}
	b.sheets = append(b.sheets, s)
	return nil
}

// readShared reads the texts and formats that cells share. A workbook may have
// neither.
func (b *book) readShared() error {
	if f := b.sharedFile("sharedStrings", "xl/sharedstrings.xml"); f != nil {
		p, err := openPart(f, &b.left)
		if err != nil {
			return err
		}
		defer p.close()
		if b.texts, err = readTexts(p); err != nil {
			return err
		}
	}
	if f := b.sharedFile("styles", "xl/styles.xml"); f != nil {
		left := int64(MaxPart)
		p, err := openPart(f, &left)
		if err != nil {
			return err
		}
		defer p.close()
		if b.formats, err = readFormats(p); err != nil {
			return err
		}
	}
	return nil
}

// sharedFile is the file of a kind of part, or the one of the usual name if
// the workbook does not list one that is there.
func (b *book) sharedFile(kind, usual string) *zip.File {
	if f := b.files[b.shared[kind]]; f != nil {
		return f
	}
	return b.files[usual]
}

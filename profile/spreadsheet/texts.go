package spreadsheet

import (
	"encoding/xml"
	"strconv"
	"strings"
)

// texts are the texts that the cells of a workbook share. They are held as one
// string, so that a great many short ones take little memory.
type texts struct {
	all  string
	ends []uint32 // of each text in all; MaxUnzipped is less than 1<<32
}

// text is the text of a number, from 0; false if there is none.
func (t *texts) text(n int) (string, bool) {
	if n < 0 || n >= len(t.ends) {
		return "", false
	}
	start := uint32(0)
	if n > 0 {
		start = t.ends[n-1]
	}
	return t.all[start:t.ends[n]], true
}

// readTexts reads the part of shared texts (ISO/IEC 29500-1, 18.4.9).
func readTexts(p *part) (texts, error) {
	var all strings.Builder
	var ends []uint32
	err := p.root("sst", func(e xml.StartElement) error {
		if e.Name.Local != "si" {
			return nil
		}
		text, err := p.richText()
		all.WriteString(text)
		ends = append(ends, uint32(all.Len()))
		return err
	})
	return texts{all.String(), ends}, err
}

// richText reads the text of the element that is open: its own, or that of its
// runs joined. Phonetic runs, which tell how it is spoken, are left out
// (ISO/IEC 29500-1, 18.4.4, 18.4.6 and 18.4.8).
func (p *part) richText() (string, error) {
	var pieces []string
	take := func(e xml.StartElement) error {
		if e.Name.Local != "t" {
			return nil
		}
		text, err := p.text()
		pieces = append(pieces, text)
		return err
	}
	err := p.children(func(e xml.StartElement) error {
		if e.Name.Local == "r" {
			return p.children(take)
		}
		return take(e)
	})
	return unescape(strings.Join(pieces, "")), err
}

// unescape replaces what stands for characters that XML cannot hold: _x000D_
// is a carriage return (ISO/IEC 29500-1, 22.9.2.19).
func unescape(text string) string {
	if !strings.Contains(text, "_x") {
		return text
	}
	var b strings.Builder
	for {
		before, after, found := strings.Cut(text, "_x")
		b.WriteString(before)
		if !found {
			return b.String()
		}
		text = after
		if len(after) >= 5 && after[4] == '_' {
			if v, err := strconv.ParseUint(after[:4], 16, 16); err == nil {
				b.WriteRune(rune(v))
				text = after[5:]
				continue
			}
		}
		b.WriteString("_x")
	}
}

package notebook

import (
	"fmt"
	"strings"

	"shearbook/profile"
	"shearbook/report"
)

var dataWorking = Working{
	Summary:  "The data as read, with the lines they stood on; the digests of the files; the program's version and the command.",
	Keys:     []Key{ofKey},
	Example:  "of: L1\n",
	evaluate: evaluateData,
}

func evaluateData(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	m.rest()
	var blocks []report.Block
	for _, s := range sites {
		if s.profile.Reading != nil {
			blocks = append(blocks, readingBlocks(s)...)
		}
	}
	return append(blocks, ev.provenance(), ev.digests(sites))
}

// readingBlocks is a profile in the words of its file.
func readingBlocks(s *site) []report.Block {
	r := s.profile.Reading
	t := &report.Table{
		Caption: words("Profile " + s.profile.Name + " as read from " + r.File + sheetText(r) + " (" + r.Encoding + ")"),
		Columns: []report.TableColumn{column(lineWord(r), report.AlignRight)},
		Compact: true,
	}
	for _, c := range r.Columns {
		head := words(c.Heading)
		if c.Unit != "" {
			head = append(head, report.Text(" ["+c.Unit+"]"))
		}
		if c.Quantity == profile.Unknown {
			head = append(head, report.Text(" (not used)"))
		}
		t.Columns = append(t.Columns, report.TableColumn{Header: head, Align: alignOf(c.Quantity)})
	}
	for _, line := range r.Rows {
		cells := append([]string{fmt.Sprint(line.Line)}, strings.Split(line.Cells, profile.CellSeparator)...)
		for len(cells) < len(t.Columns) {
			cells = append(cells, "")
		}
		t.Rows = append(t.Rows, row(cells[:len(t.Columns)]...))
	}
	for _, md := range r.Metadata {
		t.Notes = append(t.Notes, words(fmt.Sprintf("%s %d: %s: %s", lineWord(r), md.Line, md.Key, md.Value)))
	}
	return one(t)
}

// lineWord is what a place of a file is counted in.
func lineWord(r *profile.Reading) string {
	if r.Sheet != "" {
		return "Row"
	}
	return "Line"
}

// sheetText names the sheet of a spreadsheet.
func sheetText(r *profile.Reading) string {
	if r.Sheet == "" {
		return ""
	}
	return ", sheet " + r.Sheet
}

// alignOf sets numbers on their points and words to the left.
func alignOf(q profile.Quantity) report.Align {
	switch q {
	case profile.Unknown, profile.ProfileName, profile.BasisWord, profile.Soil, profile.RefusalWord:
		return report.AlignLeft
	}
	return report.AlignDecimal
}

// digests lists the files that the report was made from.
func (ev *evaluation) digests(sites []*site) *report.Table {
	t := &report.Table{
		Caption: words("Files"),
		Columns: []report.TableColumn{column("File", report.AlignLeft), column("Bytes", report.AlignRight), wide("SHA-256")},
		Compact: true,
	}
	add := func(name string, size int64, sum string) {
		r := row(name, fmt.Sprint(size), "")
		r.Cells[2] = []report.Inline{report.Code(sum)}
		t.Rows = append(t.Rows, r)
	}
	add(ev.nb.File, int64(len(ev.nb.Source)), digest(ev.nb.Source))
	for _, t := range ev.own {
		add(t.file, int64(len(t.data)), digest(t.data))
	}
	seen := map[string]bool{}
	for _, s := range sites {
		if r := s.profile.Reading; r != nil && !seen[r.File] {
			seen[r.File] = true
			add(r.File, r.Size, r.SHA256)
		}
	}
	return t
}

// provenance says what made the report.
func (ev *evaluation) provenance() *report.Paragraph {
	in := words("Made by " + ev.opt.Version)
	if ev.opt.Command != "" {
		in = append(in, report.Text(" with "), report.Code(ev.opt.Command))
	}
	return &report.Paragraph{Inline: append(in, report.Text(". The same files give the same report, byte for byte."))}
}

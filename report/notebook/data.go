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
		if s.profile.Reading != nil && !ev.nb.Header.WithoutData {
			blocks = append(blocks, readingBlocks(s)...)
		}
	}
	if ev.nb.Header.WithoutData {
		blocks = append(blocks, para("The profile files are withheld: neither their text nor the files are part of this report. "+
			"Their digests below tell whether a file is the one that was read."))
	}
	return append(blocks, ev.provenance(), ev.digestList())
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

// provenance says what made the report.
func (ev *evaluation) provenance() *report.Paragraph {
	in := words("Made by " + ev.opt.Version)
	if ev.opt.Command != "" {
		in = append(in, report.Text(" with "), report.Code(ev.opt.Command))
	}
	return &report.Paragraph{Inline: append(in, report.Text(". The same files give the same report, byte for byte."))}
}

package review

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strings"

	"shearbook/report"
	"shearbook/report/folder"
	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/templates"
)

// Memo says what the front matter of a memo holds.
type Memo struct {
	PreparedBy string // the reviewer
	Date       string // as it is to be printed
	Version    string // of the program: "shearbook 1.0.0"
	Letter     bool   // print on Letter paper, not A4
}

// MemoFile is the name under which the memo's template appears in faults.
const MemoFile = "review memo template"

// Limits of what a memo prints; memo.json holds the rest.
const (
	maxPrintedFindings = 300
	maxPrintedClaims   = 300
	maxPrintedAverages = 8
	maxPrintedFiles    = 200
	maxPrintedText     = 400 // characters of one text of the submission
)

// Files returns the memo as Markdown, HTML, PDF and JSON. A character that
// the fonts of the PDF do not have is shown by its number in all of them.
func Files(r *Review, m Memo) ([]folder.File, error) {
	unprintable := map[rune]bool{}
	const tries = 3
	for range tries {
		files, err := files(r, m, unprintable)
		var missing *pdf.MissingGlyphs
		if !errors.As(err, &missing) {
			return files, err
		}
		for _, c := range missing.Runes {
			unprintable[c] = true
		}
	}
	return files(r, m, unprintable)
}

func files(r *Review, m Memo, unprintable map[rune]bool) ([]folder.File, error) {
	d, err := m.document(r, unprintable)
	if err != nil {
		return nil, err
	}
	opt := pdf.Options{}
	if m.Letter {
		opt.Paper = pdf.Letter
	}
	var out []folder.File
	for _, f := range []struct {
		name  string
		write func(io.Writer) error
	}{
		{folder.MemoMarkdown, func(w io.Writer) error { return report.Markdown(w, d, report.MarkdownOptions{}) }},
		{folder.MemoHTML, func(w io.Writer) error { return report.HTML(w, d, report.HTMLOptions{}) }},
		{folder.MemoPDF, func(w io.Writer) error { return pdf.Write(w, d, opt) }},
		{folder.MemoResults, func(w io.Writer) error { return WriteJSON(w, r) }},
	} {
		var b bytes.Buffer
		if err := f.write(&b); err != nil {
			return nil, err
		}
		out = append(out, folder.File{Name: f.name, Data: b.Bytes()})
	}
	return out, nil
}

// document evaluates the memo's template.
func (m Memo) document(r *Review, unprintable map[rune]bool) (*report.Document, error) {
	nb, err := notebook.ParseOwn(MemoFile, []byte("---\ntitle: Review memo\n---\n\n"+templates.Review))
	if err != nil {
		return nil, errors.Join(errors.New("the memo's template is at fault"), err)
	}
	w := &writer{Review: r, memo: m, unprintable: unprintable}
	nb.Header.Project, nb.Header.PreparedBy, nb.Header.Date = w.text(r.Submission.Name), w.text(m.PreparedBy), w.text(m.Date)
	made, err := notebook.Evaluate(nb, notebook.Options{Version: m.Version, Own: w.workings()})
	if err != nil {
		return nil, errors.Join(errors.New("the memo's template is at fault"), err)
	}
	made.Document.Subject = "Review of a seismic site classification"
	return made.Document, nil
}

// writer makes the blocks of a memo.
type writer struct {
	*Review
	memo        Memo
	unprintable map[rune]bool
}

// workings are those that the memo's template may use.
func (w *writer) workings() []notebook.OwnWorking {
	own := func(name, summary string, blocks func() []report.Block) notebook.OwnWorking {
		return notebook.OwnWorking{Name: name, Summary: summary,
			Evaluate: func(map[string]string) ([]report.Block, error) { return blocks(), nil }}
	}
	return []notebook.OwnWorking{
		own("memo-title", "The title block: what was reviewed, by whom, when.", w.title),
		own("memo-outcome", "The outcome in a box.", w.outcome),
		own("memo-claims", "Every claim beside what was found.", w.claims),
		own("memo-findings", "The findings, the weightiest first.", w.findings),
		own("memo-averages", "The working of each average.", w.averages),
		own("memo-basis", "What the review rests on, and what it does not look at.", w.basis),
		own("memo-sign-off", "The place to sign.", w.signOff),
		own("memo-rules", "The rules with their weights, limits and sources.", w.rules),
		own("memo-files", "The files that were read, with their digests.", w.files),
	}
}

// text makes a text of the submission fit to be printed: not too long, and
// with characters that cannot be printed shown by their numbers.
func (w *writer) text(s string) string {
	var b strings.Builder
	n := 0
	for _, c := range report.Visible(s) {
		if n++; n > maxPrintedText {
			b.WriteString("…")
			break
		}
		if w.unprintable[c] {
			fmt.Fprintf(&b, "‹U+%04X›", c)
			continue
		}
		b.WriteRune(c)
	}
	return b.String()
}

func (w *writer) inline(s string) []report.Inline {
	if s = w.text(s); s == "" {
		return nil
	}
	return []report.Inline{report.Text(s)}
}

func (w *writer) strong(s string) report.Inline {
	return &report.Strong{Inline: []report.Inline{report.Text(w.text(s))}}
}

func (w *writer) para(s string) report.Block { return &report.Paragraph{Inline: w.inline(s)} }

func (w *writer) row(cells ...string) report.TableRow {
	var row report.TableRow
	for _, c := range cells {
		row.Cells = append(row.Cells, w.inline(c))
	}
	return row
}

func heads(align report.Align, names ...string) []report.TableColumn {
	var columns []report.TableColumn
	for _, n := range names {
		columns = append(columns, report.TableColumn{Header: []report.Inline{report.Text(n)}, Align: align})
	}
	return columns
}

func wide(name string) report.TableColumn {
	return report.TableColumn{Header: []report.Inline{report.Text(name)}, Wide: true}
}

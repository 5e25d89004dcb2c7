package pdf

import (
	"io"
	"strconv"
	"testing"

	"shearbook/report"
)

// BenchmarkReport prints a report of the usual size: six pages, two figures,
// four faces.
func BenchmarkReport(b *testing.B) {
	d := usualReport()
	b.ReportAllocs()
	for b.Loop() {
		if err := Write(io.Discard, d, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

// usualReport is the demonstration without what few reports have: images,
// code and italics.
func usualReport() *report.Document {
	d := demo()
	d.Blocks = append(append(demoFront(), demoProfile()...), demoClass()...)
	d.Blocks = append(d.Blocks, demoProfile()...)
	d.Blocks = append(d.Blocks, demoEnd()...)
	d.Footnotes = d.Footnotes[:2]
	for _, b := range d.Blocks {
		if t, ok := b.(*report.Table); ok {
			for _, r := range t.Rows {
				for i, cell := range r.Cells {
					r.Cells[i] = inl(report.PlainText(cell))
				}
			}
		}
	}
	return d
}

// BenchmarkDemo prints the demonstration: seven faces and two images.
func BenchmarkDemo(b *testing.B) {
	d := demo()
	b.ReportAllocs()
	for b.Loop() {
		if err := Write(io.Discard, d, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkRows shows that the time grows as the rows of a table do.
func BenchmarkRows(b *testing.B) {
	for _, n := range []int{100, 1000, 10000} {
		d := &report.Document{Blocks: []report.Block{numberedTable(n)}}
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if err := Write(io.Discard, d, Options{}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// numberedTable has n rows, each with a token of its own.
func numberedTable(n int) *report.Table {
	t := &report.Table{Caption: inl("Numbered rows"), Columns: []report.TableColumn{
		column("Token", report.AlignLeft), column("Depth (m)", report.AlignDecimal),
		column("Velocity (m/s)", report.AlignDecimal), wideColumn("Ground")}}
	for i := range n {
		t.Rows = append(t.Rows, tableRow("row"+strconv.Itoa(100000+i), strconv.FormatFloat(0.25*float64(i), 'f', -1, 64),
			strconv.FormatFloat(120+0.5*float64(i%700), 'f', 1, 64), "sand, medium dense"))
	}
	return t
}

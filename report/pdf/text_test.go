package pdf

import (
	"slices"
	"strings"
	"testing"

	"shearbook/report"
)

func newTestSetter() *setter {
	return &setter{doc: &report.Document{}, sheet: newSheet(A4), mentioned: map[int]bool{}, notes: map[int][]*piece{}}
}

// linesOf returns the text of prose set to a width.
func linesOf(width float64, inlines ...report.Inline) []string {
	s := newTestSetter()
	var out []string
	for _, l := range s.breakLines(s.words(inlines, bodyLook().style), width) {
		var b strings.Builder
		for _, r := range l.runs {
			b.WriteString(r.text)
		}
		out = append(out, b.String())
	}
	return out
}

func TestLineBreaks(t *testing.T) {
	narrow := 40.0 // about eight letters
	for _, c := range []struct {
		name string
		in   []report.Inline
		want []string
	}{
		{"spaces run together", inl("  a \n b\t c  "), []string{"a b c"}},
		{"hard break", inl("a", report.LineBreak{}, "b", report.LineBreak{}, report.LineBreak{}, "c"), []string{"a", "b", "", "c"}},
		{"soft hyphen shown", inl("tele\u00ADmetrical"), []string{"tele-", "metrical"}},
		{"soft hyphen hidden", inl("te\u00ADle"), []string{"tele"}},
		{"hyphen between letters", inl("shear-wave"), []string{"shear-", "wave"}},
		{"no break in a range of numbers", inl("wxyz 10-20"), []string{"wxyz", "10-20"}},
		{"no break in a no-break space", inl("wxyz 10\u00A0m/s"), []string{"wxyz", "10 m/s"}},
		{"a number stays with its unit", inl("x wxyz 10 m"), []string{"x wxyz", "10 m"}},
		{"a relation stays whole", inl("wxyz N = 9"), []string{"wxyz", "N = 9"}},
		{"unless it must part", inl("1234567 m/s"), []string{"1234567", "m/s"}},
		{"zero-width space", inl("abcdefg\u200Bhijk"), []string{"abcdefg", "hijk"}},
		{"styles within a word", inl("ab", strong("cd"), "ef gh"), []string{"abcdef", "gh"}},
		{"a word too long", inl("mmmmmmmmm"), []string{"mmmmm", "mmmm"}},
		{"a path breaks behind its marks", inl("aaaaaa/bbbb/c"), []string{"aaaaaa/", "bbbb/c"}},
	} {
		if got := linesOf(narrow, c.in...); !slices.Equal(got, c.want) {
			t.Errorf("%s: %q, want %q", c.name, got, c.want)
		}
	}
}

// The sum of squares of what is left over: 8 words of equal width in lines of
// five must go 4 and 4 or 5 and 3, and never leave a single one.
func TestLastLineIsNoScrap(t *testing.T) {
	lines := linesOf(468, inl(strings.Repeat("velocity ", 12)+"a")...)
	if last := lines[len(lines)-1]; len(lines) > 1 && len(last) < 3 {
		t.Errorf("the last line is %q", last)
	}
}

func TestRaisedFiguresLookAlike(t *testing.T) {
	s := newTestSetter()
	words := s.plainWords("10⁻³", bodyLook().style) // no face has ⁻
	if n := len(words[0].runs); n != 2 || words[0].runs[1].text != "−3" || words[0].runs[1].rise <= 0 {
		t.Errorf("10⁻³ is set as %+v", words[0].runs)
	}
	words = s.plainWords("m²", bodyLook().style)
	if n := len(words[0].runs); n != 1 || words[0].runs[0].text != "m²" {
		t.Errorf("m² is set as %+v", words[0].runs)
	}
	if s.fonts.missing != nil {
		t.Errorf("missing: %v", s.fonts.missing)
	}
}

func TestWideFormulaBreaksBeforeItsOperators(t *testing.T) {
	s := newTestSetter()
	row := report.MathRow{report.MathIdent("t"), report.MathText("="), longSum(60)}
	pieces := s.formula(&report.Formula{Math: row}, s.column())
	if len(pieces) < 3 {
		t.Fatalf("%d lines", len(pieces))
	}
	for i, p := range pieces {
		if first := p.ops[0].(*textOp).text; i > 0 && first != "+" && first != "=" {
			t.Errorf("line %d begins with %q", i+1, first)
		}
	}
	_, pages := laidOut(t, &report.Document{Blocks: []report.Block{&report.Formula{Math: row}}})
	checkGeometry(t, pages)
}

func TestFormulaSpacing(t *testing.T) {
	s := newTestSetter()
	width := func(m report.Math) float64 { return s.math(m, 10).width }
	text := func(v string) report.MathText { return report.MathText(v) }
	if a, b := width(report.MathRow{text("a"), text("="), text("b")}), width(text("a=b")); a <= b {
		t.Error("no space around = that stands alone")
	}
	if a, b := width(report.MathRow{text("−"), text("3")}), width(text("−3")); a != b {
		t.Errorf("a sign stands off its number: %g, %g", a, b)
	}
}

func TestTooWideTables(t *testing.T) {
	s := newTestSetter()
	wide := func(columns, length int) *report.Table {
		table := &report.Table{}
		row := report.TableRow{}
		for range columns {
			table.Columns = append(table.Columns, column("h", report.AlignLeft))
			row.Cells = append(row.Cells, inl(strings.Repeat("0", length)))
		}
		table.Rows = []report.TableRow{row, row}
		return table
	}
	size := func(table *report.Table) (smallest float64, lines int) {
		smallest = 99
		for _, p := range s.table(table, s.column()) {
			for _, o := range p.ops {
				if o, ok := o.(*textOp); ok {
					smallest = min(smallest, o.size)
					lines++
				}
			}
		}
		return smallest, lines
	}
	// At 8.5 points a figure is 4.73 wide; 10 columns of 6 take 284 and their
	// padding 102: they fit 468. 16 do not, but do at 6 points. 30 never do.
	if got, _ := size(wide(10, 6)); got != tableSize {
		t.Errorf("10 columns are set in %g", got)
	}
	if got, lines := size(wide(16, 6)); got >= tableSize || got < tableFloor || lines != 48 {
		t.Errorf("16 columns are set in %g, %d pieces of text; want smaller type and one line a cell", got, lines)
	}
	if got, lines := size(wide(30, 6)); got != tableFloor || lines <= 90 {
		t.Errorf("30 columns are set in %g, %d pieces of text; want the floor and broken words", got, lines)
	}
}

func TestMarkedAndTotalRows(t *testing.T) {
	s := newTestSetter()
	table := numberedTable(3)
	table.Rows[1].Marked = true
	table.Rows[2].Emphasis = true
	pieces := s.table(table, s.column())
	rows := pieces[len(pieces)-3:]
	if f, ok := rows[1].ops[0].(*fillOp); !ok || f.colour != tint {
		t.Error("the marked row is not shaded")
	}
	if !slices.ContainsFunc(rows[1].ops, func(o op) bool { p, ok := o.(*pathOp); return ok && p.fill }) {
		t.Error("no pointer before the marked row")
	}
	for i, p := range rows {
		for _, o := range p.ops {
			if o, ok := o.(*textOp); ok && (o.font == report.SansBold) != (i == 2) {
				t.Errorf("row %d: %q is in font %d", i, o.text, o.font)
			}
		}
	}
}

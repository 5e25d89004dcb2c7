package spreadsheet

import (
	"strings"
	"testing"
)

func TestTotalsFormula(t *testing.T) {
	for _, c := range []struct {
		formula     string
		column, row int
		want        bool
	}{
		{"SUM(A2:A4)", 1, 5, true},
		{"sum($A$2:$A$4)", 1, 5, true},
		{"AVERAGE(B2:B4)", 2, 5, true},
		{"SUM(A2:A4)/SUMPRODUCT(A2:A4/B2:B4)", 2, 5, true},
		{"SUBTOTAL(9,A2:A4)", 1, 5, true},
		{"SUM(A$2:A4)", 2, 4, false},       // a depth made of thicknesses
		{"AVERAGE(D5:E5)", 3, 5, false},    // across columns
		{"B4-A4", 3, 4, false},             // a thickness
		{"SUM(A2:A9)", 1, 5, false},        // from below
		{"SUM(Sheet2!A2:A4)", 1, 5, false}, // of another sheet
		{"SUM(A4:A4)", 1, 5, false},
		{"SUM(:::", 1, 5, false},
	} {
		if got := totals(c.formula, c.column, c.row); got != c.want {
			t.Errorf("totals(%q, %d, %d) = %v", c.formula, c.column, c.row, got)
		}
	}
}

// The label of a row of totals may stand in a cell beside the table.
func TestTotalsLabelBesideTable(t *testing.T) {
	data := workbook(t, []string{"A"}, cells{
		"A!B2": line("thickness (m)", "Vs (m/s)"), "A!B3": line(5, 180), "A!B4": line(7, 260), "A!A5": line("Total", 12, 220),
	}, nil)
	_, err := Read("a.xlsx", data, Options{})
	if err == nil || !strings.HasPrefix(err.Error(), "a.xlsx:A!A5: this cell adds up those above it, or says that its row does") {
		t.Errorf("error = %v", err)
	}
}

package folder

import (
	"os"
	"testing"

	"shearbook/report/notebook"
	"shearbook/report/pdf"
	"shearbook/vs30/siteclass"
)

// everything is an invented hole that states what any code asks for.
const everything = `# method: downhole
# basis: measured
# water table: 2 m
top (m),bottom (m),vs (m/s),density (kg/m3),soil,N,su (kPa),PI (%),water content (%)
0,3,140,1800,soft clay,4,20,30,45
3,12,210,1850,stiff clay,16,80,25,25
12,30,340,1950,dense sand,38,,,
30,60,520,2050,gravel,60,,,
60,,900,2300,rock,,,,
`

// The fonts have every character that a code's table, clauses and notes bring
// into a report.
func TestEveryCodePrints(t *testing.T) {
	for _, code := range siteclass.All() {
		nb, err := notebook.NewStandard("hole.csv", []byte(everything), notebook.Standard{Codes: []string{code.ID}})
		if err != nil {
			t.Fatal(err)
		}
		made, err := notebook.Evaluate(nb, notebook.Options{ReadFile: func(name string) ([]byte, error) {
			if name != "hole.csv" {
				return nil, os.ErrNotExist
			}
			return []byte(everything), nil
		}})
		if err != nil {
			t.Errorf("%s: %v", code.ID, err)
			continue
		}
		if _, err := WithEvidence(made.Document, made.Results, made.Evidence, pdf.Options{}); err != nil {
			t.Errorf("%s: %v", code.ID, err)
		}
	}
}

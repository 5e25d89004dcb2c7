package delimited

import (
	"errors"
	"strings"
	"testing"

	"shearbook/profile"
)

// faultOf is the first fault of a table with its hint; "" if it is read.
func faultOf(t *testing.T, text string, opt Options) (fault, hint string) {
	t.Helper()
	_, err := Read("x.csv", []byte(text), opt)
	var faults profile.Faults
	if err == nil {
		return "", ""
	}
	if !errors.As(err, &faults) {
		t.Fatal(err)
	}
	return faults[0].Error(), faults[0].Hint
}

// A row of totals made a survey of 20 m one of 40 m, with a class.
func TestTotalsRowBecomesLayer(t *testing.T) {
	for _, c := range []struct{ table, want string }{
		// 5 + 7 + 8 = 20 m; (150 + 220 + 400)/3 = 256.7 m/s.
		{"thickness (m),vs (m/s)\n5,150\n7,220\n8,400\n20,256.7\n", "x.csv:5:4: the last thickness, 20 m, is the sum of those above it"},
		// The sum of the velocities, as a formula that was drawn across gives it.
		{"thickness (m),vs (m/s)\n5,150\n7,220\n8,400\n20,770\n", "x.csv:5:4: the last thickness"},
		{"layer,thickness (m),vs (m/s)\n1,5,150\n2,7,220\nTOTAL:,12,190\n", `x.csv:4:1: the row is labelled "TOTAL:"`},
		{"thickness (m),vs (m/s),remark\n5,150,\n7,220,\n12,190,Average (0-12 m)\n", `x.csv:4:8: the row is labelled "Average (0-12 m)"`},
		{"thickness (m),vs (m/s),soil\n5,150,clay\n7,220,sand\n12,190,Mean\n", `x.csv:4:8: the row is labelled "Mean"`},
		{"top (m),bottom (m),vs (m/s)\n0,5,150\n5,12,220\nSum,,190\n", `x.csv:4:1: the row is labelled "Sum"`},
		{"profile,thickness (m),vs (m/s)\nA,5,150\nA,7,220\nTotal,12,190\n", `x.csv:4:1: the row is labelled "Total"`},
	} {
		fault, hint := faultOf(t, c.table, Options{})
		if !strings.HasPrefix(fault, c.want) || !strings.Contains(hint, "remove the row of totals") {
			t.Errorf("%q: %q, hint %q", c.table, fault, hint)
		}
	}
}

// Layers that only look a little like totals are read.
func TestTotalsRowNotFound(t *testing.T) {
	for _, table := range []string{
		"thickness (m),vs (m/s)\n5,150\n5,220\n",                                                         // of two layers of one thickness
		"thickness (m),vs (m/s)\n5,150\n5,220\n10,400\n",                                                 // faster than what it would be the average of
		"thickness (m),vs (m/s)\n5,150\n7,220\n12.5,190\n",                                               // another thickness
		"top (m),thickness (m),vs (m/s)\n0,5,150\n5,7,220\n12,12,190\n",                                  // with its own depth
		"thickness (m),vs (m/s),soil\n5,150,mean grain 2 mm\n7,220,Total Marsh clay\n",                   // descriptions
		"top (m),bottom (m),vs (m/s),kind\n0,5,150,average\n5,12,220,average\n",                          // a word beside stated depths
		"profile,top (m),bottom (m),vs (m/s)\nMean,0,5,150\nMean,5,12,220\nLine 1,0,12,200\n",            // a mean profile of several layers
		"thickness (m),vs (m/s)\n5,150\n7,220\n,400\n",                                                   // a half-space
		"profile,top (m),bottom (m),vs (m/s),soil\nTotal,0,5,150,clay\nB,0,5,150,clay\nB,5,,220,Total\n", // what Write writes
		"profile,thickness (m),vs (m/s)\nA,5,150\nA,7,220\nB,12,190\n",                                   // of another profile
	} {
		if fault, _ := faultOf(t, table, Options{}); fault != "" {
			t.Errorf("%q: %s", table, fault)
		}
	}
}

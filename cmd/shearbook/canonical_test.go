package main

import "testing"

// The command in the appendix holds each value whole, brackets and all.
func TestCanonicalCommand(t *testing.T) {
	c := newReport(streams{})
	for _, f := range [][2]string{{"code", "asce-7-16,ec8-2004"}, {"map", "Vs=DTS [us/ft]"}, {"map", "Vp=DTC"}, {"code-file", "far/away/own.yaml"}, {"datum", "2.5m"},
		{"bounds", "5m, 12m"}, {"carry-up", "6m"}, {"log-datum", "0.6m"}, {"n60", "true"}} {
		if err := c.Flags().Set(f[0], f[1]); err != nil {
			t.Fatal(err)
		}
	}
	want := `shearbook report log.las --code asce-7-16 --code ec8-2004 --map "Vs=DTS [us/ft]" --map Vp=DTC --code-file own.yaml --datum 2.5m --bounds "5m, 12m" --carry-up 6m --log-datum 0.6m --n60`
	if got := canonical(c, "log.las"); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

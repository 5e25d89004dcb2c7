package ags_test

import (
	"fmt"

	"shearbook/profile/ags"
)

// A suspension log with two readings.
func ExampleRead() {
	profiles, err := ags.Read("weir.ags", []byte(`"GROUP","WGPT"
"HEADING","LOCA_ID","WGPG_ID","WGPG_TOOL","WGPT_PARA","WGPT_UNIT","WGPT_DPTH","WGPT_RDNG"
"UNIT","","","","","","m",""
"TYPE","ID","X","PA","PA","PU","2DP","U"
"DATA","H1","H1-PS","PSL","PSL-SWV","m/s","1.00","140"
"DATA","H1","H1-PS","PSL","PSL-SWV","m/s","2.00","175"
`), ags.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range profiles[0].Layers {
		fmt.Printf("%.2f to %.2f m: %.0f m/s\n", l.Top, l.Bottom, l.Vs)
	}
	// Output:
	// 0.00 to 1.50 m: 140 m/s
	// 1.50 to 2.50 m: 175 m/s
}

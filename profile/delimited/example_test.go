package delimited_test

import (
	"fmt"

	"shearbook/profile/delimited"
)

// A table that states its units, and one that does not.
func ExampleRead() {
	profiles, err := delimited.Read("line-1.csv", []byte(`# method: MASW
top (ft),bottom (ft),vs (ft/s)
0,10,600
10,,900
`), delimited.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	p := profiles[0]
	fmt.Printf("%s, %s: %.4g m at %.4g m/s, then %.4g m/s\n",
		p.Name, p.Survey.Method, p.Layers[0].Thickness(), p.Layers[0].Vs, p.Layers[1].Vs)

	_, err = delimited.Read("line-2.csv", []byte("top,bottom,vs\n0,10,600\n"), delimited.Options{})
	fmt.Println(err)
	// Output:
	// line-1, MASW: 3.048 m at 182.9 m/s, then 274.3 m/s
	// line-2.csv:1:1: column "top" states no unit
	// line-2.csv:1:5: column "bottom" states no unit
	// line-2.csv:1:12: column "vs" states no unit
}

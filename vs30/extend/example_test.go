package extend_test

import (
	"fmt"

	"shearbook/profile"
	"shearbook/vs30/extend"
)

// Every relation for a profile that ends 12 m below ground level.
func ExampleRelation_Estimate() {
	layers := []profile.Layer{
		{Top: 0, Bottom: 3, Vs: 160},
		{Top: 3, Bottom: 8, Vs: 220},
		{Top: 8, Bottom: 12, Vs: 290},
	}
	for _, r := range extend.All() {
		e, err := r.Estimate(layers, 0, 30)
		if err != nil {
			fmt.Printf("%-17s %v\n", r.ID, err)
			continue
		}
		fmt.Printf("%-17s %.1f m/s, sigma of ln %.3f, %s\n", r.ID, e.Velocity, e.SigmaLn, e.Standing)
	}
	// Output:
	// constant-velocity 255.7 m/s, sigma of ln 0.000, one source
	// boore-2004        270.1 m/s, sigma of ln 0.137, one source
	// boore-2011        331.1 m/s, sigma of ln 0.166, one source
	// boore-japan       317.9 m/s, sigma of ln 0.180, one source
	// wang-2015         267.8 m/s, sigma of ln 0.000, from memory
	// power-law         258.1 m/s, sigma of ln 0.000, common practice
	// asce-7-22         holds for an average over 30.48 m, not over 30 m
}

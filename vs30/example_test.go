package vs30_test

import (
	"fmt"

	"shearbook/profile"
	"shearbook/vs30"
)

// The one-dimensional reference model of the Southern California Earthquake
// Center for Los Angeles, of which 862 m/s is published.
func ExampleWork() {
	layers := []profile.Layer{
		{Top: 0, Bottom: 2, Vs: 450},
		{Top: 2, Bottom: 6, Vs: 650},
		{Top: 6, Bottom: 12, Vs: 850},
		{Top: 12, Bottom: 20, Vs: 950},
		{Top: 20, Bottom: 30, Vs: 1150},
		{Top: 30, Bottom: 100, Vs: 1200},
	}
	w, err := vs30.Work(layers, 0, 30)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, r := range w.Rows {
		fmt.Printf("%4.0f m / %4.0f m/s = %.5f s\n", r.Thickness, r.Vs, r.Time)
	}
	fmt.Printf("%4.0f m / %.5f s = %.1f m/s\n", w.Thickness, w.Time, w.Velocity)
	// Output:
	//    2 m /  450 m/s = 0.00444 s
	//    4 m /  650 m/s = 0.00615 s
	//    6 m /  850 m/s = 0.00706 s
	//    8 m /  950 m/s = 0.00842 s
	//   10 m / 1150 m/s = 0.00870 s
	//   30 m / 0.03477 s = 862.7 m/s
}

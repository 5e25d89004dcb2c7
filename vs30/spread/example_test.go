package spread_test

import (
	"fmt"

	"shearbook/profile"
	"shearbook/vs30/spread"
)

// A profile of three layers that are known to 10, 20 and 10 %.
func ExampleModel_Propagate() {
	m := spread.Model{
		Layers: []profile.Layer{
			{Top: 0, Bottom: 4, Vs: 160},
			{Top: 4, Bottom: 12, Vs: 240},
			{Top: 12, Bottom: 35, Vs: 420},
		},
		Thickness: 30,
		Sigmas:    []float64{0.1, 0.2, 0.1},
	}
	p, err := m.Propagate()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.1f m/s, sigma of ln %.3f\n", p.Velocity, p.SigmaLn)
	for _, s := range p.Shares {
		fmt.Printf("%2.0f to %2.0f m: %.0f %% of the time, %.0f %% of the variance\n", s.Top, s.Bottom, 100*s.TimePart, 100*s.Part)
	}
	o, err := p.Matched.Outlook(spread.Classes{Names: []string{"E", "D", "C", "B"}, Bounds: []float64{180, 360, 760}})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, c := range o.Chances {
		fmt.Printf("class %s: %.3f\n", c.Class, c.Chance)
	}
	// Output:
	// 296.5 m/s, sigma of ln 0.082
	//  0 to  4 m: 25 % of the time, 9 % of the variance
	//  4 to 12 m: 33 % of the time, 64 % of the variance
	// 12 to 30 m: 42 % of the time, 27 % of the variance
	// class E: 0.000
	// class D: 0.992
	// class C: 0.008
	// class B: 0.000
}

// What would make class C of a site of class D.
func ExampleFlips() {
	layers := []profile.Layer{
		{Top: 0, Bottom: 10, Vs: 200},
		{Top: 10, Bottom: 35, Vs: 480},
	}
	classes := spread.Classes{Names: []string{"E", "D", "C", "B"}, Bounds: []float64{180, 360, 760}}
	_, stiffer, err := spread.Flips(layers, 0, 30, classes)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.1f m/s would have to be %.0f, %.1f %% more, for class %s\n",
		stiffer.Velocity, stiffer.Bound, 100*(stiffer.Factor-1), stiffer.Class)
	for _, l := range stiffer.Layers {
		fmt.Printf("layer %d alone: %.1f m/s, a factor of %.3f\n", l.Layer+1, l.Velocity, l.Factor)
	}
	// Output:
	// 327.3 m/s would have to be 360, 10.0 % more, for class C
	// layer 1 alone: 240.0 m/s, a factor of 1.200
	// layer 2 alone: 600.0 m/s, a factor of 1.250
}

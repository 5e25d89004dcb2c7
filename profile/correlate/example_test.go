package correlate_test

import (
	"fmt"

	"shearbook/profile"
	"shearbook/profile/correlate"
)

// The relations from the blow count for twenty blows in sand, at 8 m depth.
// Those that need a stress or N60 say so.
func ExampleRelation_Estimate() {
	in := correlate.Input{Soil: correlate.Sand}
	in.Set(correlate.BlowCount, 20)
	in.Set(correlate.Depth, 8)
	for _, r := range correlate.All() {
		if r.Family != correlate.Penetration {
			continue
		}
		e, err := r.Estimate(in)
		if err != nil {
			fmt.Println(err)
			continue
		}
		fmt.Printf("%s %.1f m/s, sigma of ln %.3f, %s\n", r.ID, e.Vs, e.SigmaLn, r.Standing)
	}
	// Output:
	// imai-1977 249.7 m/s, sigma of ln 0.275, one source
	// imai-tonouchi-1982 248.5 m/s, sigma of ln 0.275, one source
	// ohta-goto-1978 242.1 m/s, sigma of ln 0.275, one source
	// ohta-goto-1978-holocene 188.6 m/s, sigma of ln 0.275, from memory
	// ohta-goto-1978-pleistocene 245.7 m/s, sigma of ln 0.275, from memory
	// seed-idriss-1981 274.6 m/s, sigma of ln 0.275, from memory
	// seed-idriss-arango-1983 252.2 m/s, sigma of ln 0.275, from memory
	// sykora-stokoe-1983 239.6 m/s, sigma of ln 0.275, from memory
	// brandenberg-2010-sand needs N60, which is not stated
	// brandenberg-2010-silt needs N60, which is not stated
	// brandenberg-2010-clay needs N60, which is not stated
}

// A boring with blow counts, by two relations.
func ExampleProfile() {
	boring := &profile.Profile{Name: "B1", NoVelocity: true, Layers: []profile.Layer{
		{Top: 0, Bottom: 4, N: 5, Given: profile.GivenN},
		{Top: 4, Bottom: 12, N: 20, Given: profile.GivenN},
	}}
	p, err := correlate.Profile(boring, correlate.Options{Relations: []string{"imai-tonouchi-1982", "ohta-goto-1978"}})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range p.Layers {
		fmt.Printf("%g–%g m: %.1f m/s, sigma of ln %.3f, %s\n", l.Top, l.Bottom, l.Vs, l.SigmaLnVs, l.Basis)
	}
	// Output:
	// 0–4 m: 155.0 m/s, sigma of ln 0.277, correlated
	// 4–12 m: 245.3 m/s, sigma of ln 0.275, correlated
}

// A cone in sand that grows denser with depth, read every quarter of a metre.
// The numbers were worked out a second time in Python 3, with Ic by bisection.
// The two relations differ most where the ground is shallow.
func ExampleSounding() {
	c := &correlate.Cone{Name: "C1", WaterTable: profile.Known(1)}
	for i := range 16 {
		z := 0.125 + float64(i)*0.25
		c.Readings = append(c.Readings, correlate.Reading{
			Depth: z, Tip: profile.Known(3000 + 1000*z), Sleeve: profile.Known(30 + 10*z)})
	}
	p, err := correlate.Sounding(c, correlate.Options{
		Relations: []string{"robertson-2009", "mcgann-2015"}, UnitWeight: 18})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range p.Layers {
		fmt.Printf("%g–%g m: %.1f m/s, sigma of ln %.3f\n", l.Top, l.Bottom, l.Vs, l.SigmaLnVs)
	}
	// Output:
	// 0–1 m: 87.7 m/s, sigma of ln 0.462
	// 1–2 m: 119.9 m/s, sigma of ln 0.366
	// 2–3 m: 138.6 m/s, sigma of ln 0.336
	// 3–4 m: 154.0 m/s, sigma of ln 0.321
}

// A strength of 50 kPa.
func ExampleFind() {
	r, err := correlate.Find("dickenson-1994")
	if err != nil {
		fmt.Println(err)
		return
	}
	in := correlate.Input{Soil: correlate.Clay}
	in.Set(correlate.Strength, 50)
	e, err := r.Estimate(in)
	fmt.Printf("%s: %s = %.1f m/s, %v\n", r.Name, r.Equation, e.Vs, err)
	// Output:
	// Dickenson (1994): Vs = 23 su^0.475 = 147.5 m/s, <nil>
}

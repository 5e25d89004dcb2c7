package correlate

import "math"

// strengths are the relations from undrained shear strength.
func strengths() []*Relation {
	return []*Relation{{
		ID: "dickenson-1994", Name: "Dickenson (1994)", Family: Shear,
		Equation: "Vs = 23 su^0.475", Units: "su in kPa, Vs in m/s",
		Needs:  []Quantity{Strength},
		Source: "Dickenson (1994), Dynamic response of soft and deep cohesive soils during the Loma Prieta earthquake of October 17, 1989, thesis, University of California, Berkeley",
		For:    "cohesive soils", Soils: []Soil{Clay, Silt}, Region: "San Francisco Bay",
		Limits: NoLimits, SigmaNote: noSigma, Standing: FromMemory,
		Note:    "a layer that states su is taken to be cohesive where its soil is not stated",
		formula: func(in *Input) float64 { return 23 * math.Pow(in.of(Strength), 0.475) },
	}}
}

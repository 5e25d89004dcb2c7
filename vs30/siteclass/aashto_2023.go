package siteclass

// aashto2023 returns the AASHTO specifications for bridges from 2023 on,
// whose site classes follow ASCE/SEI 7-22.
func aashto2023() *Code {
	c := adopted(asce7_22(), "AASHTO (3.4.2.1 of the guide specifications, 3.10.3.1 of the LRFD specifications) aligns its site classes with Table 20.2-1 of ASCE/SEI 7-22, by velocity alone; that table and the conditions beside it decide", OneSource)
	c.ID = "aashto-2023"
	c.Title = "AASHTO Guide Specifications for LRFD Seismic Bridge Design; AASHTO LRFD Bridge Design Specifications"
	c.Edition = "AASHTO guide specifications, 3rd ed. (2023); LRFD specifications, 10th ed. (2024)"
	c.Clause = "3.4.2.1; 3.10.3.1"
	c.Region = "United States, bridges"
	return c
}

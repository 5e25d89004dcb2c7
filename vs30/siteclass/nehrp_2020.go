package siteclass

// nehrp2020 returns the NEHRP provisions of 2020, from which ASCE/SEI 7-22
// took its site classes.
func nehrp2020() *Code {
	c := adopted(asce7_22(), "the site classes of the 2020 NEHRP provisions are those of ASCE/SEI 7-22, chapter 20; that table decides", OneSource)
	c.ID = "nehrp-2020"
	c.Title = "NEHRP Recommended Seismic Provisions for New Buildings and Other Structures"
	c.Edition = "2020 NEHRP provisions, FEMA P-2082-1"
	c.Region = "United States"
	return c
}
